"""Laws that hold for every elastic cable: scale, mirror, energy, symmetry, limits.

PRP numbers are theorems of statics, each exact unless it says how fast it is approached.
"""

from __future__ import annotations

import math
from itertools import pairwise
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from scipy.integrate import quad

from dxfcable.model import RuleKind
from dxfcable.statics.catenary import respond
from dxfcable.statics.catenary_forming import form_catenary
from dxfcable.statics.forming import form
from tests.statics.cables import Cut, cut_cables

if TYPE_CHECKING:
    from dxfcable.statics.catenary_shape import Catenary

few = settings(max_examples=60)


def solved(cable: Cut) -> Catenary:
    """The cable's shape, where it has one and pulls enough to be well conditioned."""
    found = cable.respond()
    assume(not found.faults[0])
    shape = found.state(0)
    assume(shape.horizontal > 1e-4 * shape.max_tension)
    return shape


def conditioned(cable: Cut) -> float:
    """How much a change in the last digit of a length may change the pull, relative."""
    over = sum(cable.lengths) / math.hypot(cable.across, cable.up) - 1.0
    return 1e-12 / max(abs(over), 1e-6) + 1e-12


@few
@given(cut_cables(), st.floats(0.01, 100.0), st.floats(0.01, 100.0))
def test_prp_4_scaled_lengths_and_forces_scale_the_result(
    cable: Cut, size: float, force: float
) -> None:
    shape = solved(cable)
    other = respond(
        np.array(cable.lengths) * size,
        cable.weight * force / size,
        np.array(cable.loads) * force,
        np.array(cable.ends) * size,
        ea=None if cable.ea is None else cable.ea * force,
    ).state(0)
    assert other.horizontal == pytest.approx(shape.horizontal * force, rel=1e2 * conditioned(cable))
    scale = size * sum(cable.lengths)
    assert other.y == pytest.approx(shape.y * size, abs=1e-9 * scale)


@few
@given(cut_cables())
def test_prp_5_the_mirrored_cable_is_the_mirror_image(cable: Cut) -> None:
    shape = solved(cable)
    other = respond(
        cable.lengths[::-1], cable.weight, cable.loads[::-1],
        [(0.0, cable.up), (cable.across, 0.0)], ea=cable.ea,
    ).state(0)  # fmt: skip
    assert other.horizontal == pytest.approx(shape.horizontal, rel=1e2 * conditioned(cable))
    assert other.y == pytest.approx(shape.y[::-1], abs=1e-9 * sum(cable.lengths))
    assert other.x == pytest.approx(cable.across - shape.x[::-1], abs=1e-9 * sum(cable.lengths))


def test_prp_5_own_1_reversed() -> None:
    found = respond([50, 30, 40], 20.0, [3000, 2000], [(0, 8), (100, 0)], ea=5e6).state(0)
    assert found.horizontal == pytest.approx(4056.825002, abs=5e-7)
    assert found.x[1:3].tolist() == pytest.approx([100 - 62.433451, 100 - 32.481764], abs=6e-7)
    assert found.y[1:3].tolist() == pytest.approx([-25.017264, -23.364235], abs=6e-7)


@few
@given(cut_cables())
def test_prp_15_supports_carry_all_loads_and_the_moments_balance(cable: Cut) -> None:
    shape = solved(cable)
    up = shape.reaction_left[1] + shape.reaction_right[1]
    scale = sum(abs(p) for p in cable.loads) + cable.weight * sum(cable.lengths)
    assert up == pytest.approx(cable.total, abs=1e-11 * (scale + shape.max_tension))
    # Each piece by itself: moment of its end forces about its middle, by quadrature of weight.
    moment = 0.0
    for k, length in enumerate(cable.lengths):
        x, _ = quad(lambda s, k=k: _station(shape, k, s), 0.0, length, epsabs=0, epsrel=1e-9)
        moment += cable.weight * x
    moment += float(np.dot(shape.x[1:-1], shape.loads))
    right = shape.reaction_right[1] * cable.across - shape.horizontal * cable.up
    assert moment == pytest.approx(
        right, abs=1e-7 * (scale + shape.max_tension) * (cable.across + abs(cable.up))
    )


def _station(shape: Catenary, piece: int, along: float) -> float:
    """Station of a material point, from the textbook form."""
    pull, left = shape.horizontal, float(shape.verticals_left[piece])
    soft = 0.0 if shape.ea is None else along / shape.ea
    if shape.weight == 0.0:
        turn = along / math.hypot(pull, left)
    else:
        right = left + shape.weight * along
        turn = (math.asinh(right / pull) - math.asinh(left / pull)) / shape.weight
    return float(shape.x[piece]) + pull * (turn + soft)


CAB_1 = ([412.88380322, 613.0421043], 3.16e-3, [(0, 0), (1000, 0)], 16150.0)


def energy(shape: Catenary) -> float:
    """Strain energy and potential of the weight, by quadrature over the material [ft kip]."""
    total = 0.0
    assert shape.ea is not None
    for k, length in enumerate(shape.unstressed_lengths):
        left, up = float(shape.verticals_left[k]), float(shape.y[k])

        def density(s: float, left: float = left, up: float = up) -> float:
            vertical = left + shape.weight * s
            first, here = (math.hypot(shape.horizontal, v) for v in (left, vertical))
            rise = (here - first) / shape.weight + (vertical**2 - left**2) / (
                2 * shape.weight * float(shape.ea or 0.0)
            )
            return here**2 / (2 * float(shape.ea or 1.0)) + shape.weight * (up + rise)

        total += quad(density, 0.0, float(length), epsabs=1e-13, epsrel=1e-12)[0]
    return total


def test_prp_11_work_of_the_load_is_the_change_of_energy() -> None:
    """OWN: 30 253.3728 ft lb of CAB-1, from zero to 8 kip."""
    lengths, weight, ends, ea = CAB_1
    places, shares = np.polynomial.legendre.leggauss(24)
    cuts = 8.0 * np.linspace(0.0, 1.0, 9) ** 2
    loads = np.concatenate([0.5 * (b - a) * places + 0.5 * (a + b) for a, b in pairwise(cuts)])
    weights = np.concatenate([0.5 * (b - a) * shares for a, b in pairwise(cuts)])
    found = respond(lengths, weight, loads[:, np.newaxis], ends, ea=ea)
    last = respond(lengths, weight, [[0.0], [8.0]], ends, ea=ea)
    # By parts: the work is the load at the end times its way, less the ways times d load.
    down = -(found.y[:, 1] - last.y[0, 1])
    work = 8.0 * float(last.y[0, 1] - last.y[1, 1]) - float(np.dot(weights, down))
    assert 1000.0 * work == pytest.approx(30253.3728, abs=2e-3)
    change = energy(last.state(1)) - energy(last.state(0))
    assert 1000.0 * change == pytest.approx(30253.3728, abs=2e-3)
    assert change == pytest.approx(work, rel=1e-8)


def test_prp_12_the_tangent_flexibility_is_symmetric() -> None:
    """OWN: OWN-1, dv1/dP2 = dv2/dP1 = -1.00435e-3; diagonal 1.49066e-3, 7.8052e-4 m/N."""
    step = 0.05
    base = np.array([2000.0, 3000.0])
    states = base + step * np.array([[1, 0], [-1, 0], [0, 1], [0, -1]])
    found = respond([40, 30, 50], 20.0, states, [(0, 0), (100, 8)], ea=5e6)
    down = -found.y[:, 1:3]
    first, second = (down[0] - down[1]) / (2 * step), (down[2] - down[3]) / (2 * step)
    assert first[1] == pytest.approx(second[0], rel=1e-6)
    assert first[1] == pytest.approx(-1.00435e-3, abs=6e-9)
    assert first[0] == pytest.approx(1.49066e-3, abs=6e-9)
    assert second[1] == pytest.approx(7.8052e-4, abs=6e-9)


@few
@given(
    st.lists(st.floats(0.5, 10.0), min_size=1, max_size=8),
    st.floats(-0.5, 0.5),
    st.one_of(st.just(0.0), st.floats(-4, 1.5).map(lambda e: 10.0**e)),
    st.one_of(st.none(), st.floats(3.0, 6.0).map(lambda e: 10.0**e)),
    st.floats(0.02, 0.8),
)
def test_prp_13_a_formed_cable_returns_to_its_shape(
    loads: list[float], rise: float, weight: float, ea: float | None, sag: float
) -> None:
    x = np.linspace(0.0, 1.0, len(loads) + 2)
    formed = form_catenary(x, loads, 0, rise, RuleKind.SAG, sag, weight=weight, ea=ea)
    found = respond(formed.unstressed_lengths, weight, loads, [(0, 0), (1, rise)], ea=ea).state(0)
    assert found.horizontal == pytest.approx(formed.horizontal, rel=1e-11)
    assert found.x == pytest.approx(formed.x, abs=1e-11)
    assert found.y == pytest.approx(formed.y, abs=1e-11)
    assert found.tensions_left == pytest.approx(formed.tensions_left, rel=1e-11)


def test_prp_14_a_stiffer_cable_nears_the_linkage() -> None:
    formed = form([0, 3, 8, 12.5, 20, 26, 30], [4, 10, 6, 12, 5], 0, 3, RuleKind.PULL, 40)
    loads = [4, 10, 6, 24, 5]

    def pull(ea: float | None) -> float:
        lengths = formed.unstressed_lengths
        return float(respond(lengths, 0.0, loads, [(0, 0), (30, 3)], ea=ea).horizontals[0])

    errors = [pull(ea) - pull(None) for ea in (1e5, 1e6, 1e7)]
    assert errors[0] / errors[1] == pytest.approx(10.0, rel=0.1)
    assert errors[1] / errors[2] == pytest.approx(10.0, rel=0.01)


@few
@given(cut_cables(stretch=False, uplift=False), st.data())
def test_prp_17_no_other_shape_of_a_linkage_has_less_potential(
    cable: Cut, data: st.DataObject
) -> None:
    assume(len(cable.loads) >= 2)
    weightless = Cut(cable.lengths, 0.0, cable.loads, cable.across, cable.up, None)
    shape = solved(weightless)
    turned = data.draw(st.integers(0, len(cable.lengths) - 3))
    angle = data.draw(st.floats(-0.3, 0.3))
    # Turn one bar, then close the two after it: another shape of the same lengths.
    points = np.stack([shape.x, shape.y], axis=1)
    bar = points[turned + 1] - points[turned]
    turn = np.array([[math.cos(angle), -math.sin(angle)], [math.sin(angle), math.cos(angle)]])
    other = points.copy()
    other[turned + 1] = points[turned] + turn @ bar
    gap = points[turned + 3] - other[turned + 1]
    near, far = cable.lengths[turned + 1], cable.lengths[turned + 2]
    wide = float(np.hypot(*gap))
    assume(abs(near - far) < wide < near + far)
    along = (near**2 - far**2 + wide**2) / (2 * wide)
    off = math.sqrt(max(0.0, near**2 - along**2))
    for side in (1.0, -1.0):
        normal = np.array([gap[1], -gap[0]]) * side / wide
        other[turned + 2] = other[turned + 1] + along / wide * gap + off * normal
        change = float(np.dot(cable.loads, other[1:-1, 1] - points[1:-1, 1]))
        assert change >= -1e-9 * sum(cable.loads) * sum(cable.lengths)


def test_prp_19_the_lower_reaction_turns_where_the_low_point_leaves_the_span() -> None:
    for right, outside in ((-5.0, False), (-60.0, True)):
        shape = respond([118.0], 29.43, [], [(0, 0), (100, right)], ea=1e7).state(0)
        assert (shape.reaction_right[1] < 0.0) is outside
        assert (shape.low_point == (100.0, right)) is outside
        assert shape.reaction_left[1] + shape.reaction_right[1] == pytest.approx(118 * 29.43)


@few
@given(cut_cables(stretch=False))
def test_prp_10_tension_grows_by_weight_times_rise_in_each_piece(cable: Cut) -> None:
    shape = solved(cable)
    gains = shape.tensions_right - shape.tensions_left
    slack = 1e-11 * (shape.max_tension + cable.weight * sum(cable.lengths))
    assert gains == pytest.approx(cable.weight * np.diff(shape.y), abs=slack)


def test_weight_towards_zero_tends_to_the_weightless_cable() -> None:
    lengths, loads, ends = [4.0, 3.5, 4.0], [5.0, 8.0], [(0, 0), (10, 1)]
    none = respond(lengths, 0.0, loads, ends, ea=3000.0)
    for weight in (1e-300, 1e-30, 1e-17, 1e-12, 1e-6):
        light = respond(lengths, weight, loads, ends, ea=3000.0)
        assert light.horizontals[0] == pytest.approx(none.horizontals[0], rel=2 * weight + 1e-14)
        assert light.y[0] == pytest.approx(none.y[0], abs=20 * weight + 1e-13)
