"""The closed form of one piece against 90 digits, and its limits."""

from __future__ import annotations

import math
from decimal import Decimal, localcontext
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import example, given
from hypothesis import strategies as st

from dxfcable.statics.catenary_piece import flexibility, hang, projections
from dxfcable.statics.catenary_width import unstressed_for_width

if TYPE_CHECKING:
    from collections.abc import Callable


def exact(
    length: float, weight: float, pull: float, left: float, ea: float | None, thermal: float
) -> tuple[float, float, float]:
    """Projections and stretched length from the textbook integrals, in 90 digits."""
    with localcontext() as context:
        context.prec = 90
        size, heavy, horizontal, first, heat = map(Decimal, (length, weight, pull, left, thermal))
        soft = 1 / Decimal(ea) if ea is not None else Decimal(0)
        second = first + heavy * size
        t1 = (horizontal**2 + first**2).sqrt()
        t2 = (horizontal**2 + second**2).sqrt()
        if heavy == 0:
            across, up = heat / t1 + soft, heat / t1 + soft
            return (
                float(horizontal * size * across),
                float(first * size * up),
                float(size * (heat + soft * t1)),
            )

        def asinh(vertical: Decimal, tension: Decimal) -> Decimal:
            """Of V / H, by the larger of the two forms of its argument."""
            argument = (abs(vertical) + tension) / horizontal
            return argument.ln() if vertical >= 0 else -argument.ln()

        turn = asinh(second, t2) - asinh(first, t1)
        across = horizontal * (heat * turn / heavy + soft * size)
        up = heat * (t2 - t1) / heavy + soft * (second**2 - first**2) / (2 * heavy)
        area = (second * t2 - first * t1 + horizontal**2 * turn) / (2 * heavy)
        return float(across), float(up), float(heat * size + soft * area)


logs = st.floats(-3.0, 3.0)


@given(
    logs,
    st.one_of(st.just(0.0), st.floats(-25.0, 2.0).map(lambda e: 10.0**e)),
    st.floats(-4.0, 4.0),
    st.floats(-1e3, 1e3),
    st.one_of(st.none(), st.floats(1.0, 6.0).map(lambda e: 10.0**e)),
    st.floats(0.999, 1.001),
)
@example(0.0, 1e-17, 0.0, 3.0, 50.0, 1.0)
@example(0.0, 1e2, -4.0, -50.0, None, 1.0)
def test_no_digit_is_lost_from_weightless_to_hanging_straight_down(
    size: float, weight: float, force: float, left: float, ea: float | None, thermal: float
) -> None:
    length, pull = 10.0**size, 10.0**force
    found = hang(length, weight, pull, left, ea=ea, thermal=thermal)
    across, up, long = exact(length, weight, pull, left, ea, thermal)
    assert float(found.across) == pytest.approx(across, rel=1e-14)
    assert float(found.lengths) == pytest.approx(long, rel=1e-14)
    # V1 + V2 may cancel: that is in the data, not in the formula.
    right = float(found.verticals_right)
    scale = (abs(left) + abs(right)) / max(abs(left + right), 1e-300)
    assert float(found.up) == pytest.approx(up, rel=1e-15 * (10.0 + scale), abs=1e-300)


@given(logs, st.floats(-20.0, 1.0), st.floats(-2.0, 4.0), st.floats(-1e2, 1e2), st.booleans())
def test_the_length_for_a_width_is_the_inverse(
    size: float, heavy: float, force: float, left: float, stretches: bool
) -> None:
    length, pull = np.array(10.0**size), np.array(10.0**force)
    weight = 10.0**heavy * float(pull / length)
    ea = 40.0 * float(pull) if stretches else None
    piece = hang(length, weight, pull, left, ea=ea)
    again = unstressed_for_width(pull, np.array(left), weight, piece.across, flexibility(ea))
    assert float(again) == pytest.approx(float(length), rel=1e-11)


@given(logs, st.floats(-3.0, 1.0), st.floats(-1.0, 3.0), st.floats(-30.0, 30.0))
def test_the_derivatives_are_those_of_the_projections(
    size: float, heavy: float, force: float, left: float
) -> None:
    length, pull, start = np.array(10.0**size), np.array(10.0**force), np.array(left)
    weights, soft = np.array(10.0**heavy), 1e-3

    def at(by_pull: float, by_force: float) -> tuple[float, float]:
        found = projections(pull + by_pull, start + by_force, length, weights, soft, 1.0)
        return float(found[0]), float(found[1])

    _, _, by_pull, cross, by_force = projections(pull, start, length, weights, soft, 1.0)
    step = 1e-5 * float(pull)

    def rough(value: object) -> object:
        return pytest.approx(float(str(value)), rel=1e-5, abs=1e-6 * float(by_pull + by_force))

    wider, narrower = at(step, 0.0), at(-step, 0.0)
    assert (wider[0] - narrower[0]) / (2 * step) == rough(by_pull)
    assert (wider[1] - narrower[1]) / (2 * step) == rough(cross)
    higher, lower = at(0.0, step), at(0.0, -step)
    assert (higher[0] - lower[0]) / (2 * step) == rough(cross)
    assert (higher[1] - lower[1]) / (2 * step) == rough(by_force)


def test_a_vertical_cable_stretches_by_its_own_weight_and_its_load() -> None:
    """PRP-16: w L^2 / 2 EA + P L / EA, exact."""
    length, weight, load, ea = 120.0, 0.4, 7.0, 900.0
    found = hang(length, weight, 0.0, load, ea=ea)
    stretch = weight * length**2 / (2 * ea) + load * length / ea
    assert float(found.up) - length == pytest.approx(stretch, rel=1e-12)
    assert float(found.lengths) - length == pytest.approx(stretch, rel=1e-12)
    assert float(found.across) == 0.0


@given(st.floats(0.1, 50.0), st.floats(-40.0, 40.0), st.floats(0.1, 30.0), st.floats(0.1, 4.0))
def test_tension_grows_by_weight_times_rise(
    pull: float, left: float, length: float, weight: float
) -> None:
    """PRP-10 on an inextensible piece: exact."""
    found = hang(length, weight, pull, left)
    gain = float(found.tensions_right - found.tensions_left)
    scale = float(found.tensions_right + found.tensions_left)
    assert gain == pytest.approx(weight * float(found.up), abs=1e-14 * scale)


def parabola(ratio: float) -> tuple[float, float, float]:
    """Pull, largest tension and length of span 1 and unit load, at a sag over span."""
    pull = 1.0 / (8.0 * ratio)
    root = math.sqrt(1.0 + 16.0 * ratio**2)
    return pull, pull * root, 0.5 * (root + math.asinh(4.0 * ratio) / (4.0 * ratio))


@pytest.mark.parametrize(
    ("ratio", "pull", "tension", "length"),
    [
        (0.01, 1.000133, 1.000134, 1.4e-8),
        (0.05, 1.003316, 1.003444, 8.6e-6),
        (0.10, 1.013059, 1.014880, 1.23e-4),
        (0.125, 1.020178, 1.024279, 2.78e-4),
        (0.20, 1.049380, 1.069306, 1.36e-3),
        (0.30, 1.102673, 1.166847, 4.20e-3),
    ],
)
def test_the_catenary_nears_the_parabola_as_it_flattens(
    ratio: float, pull: float, tension: float, length: float
) -> None:
    """PRP-9 (OWN): ratios at equal sag; the weight per length equals the load per span."""
    half = _half_turn(lambda z: (math.cosh(z) - 1.0) / (2.0 * z), ratio)
    horizontal = 1.0 / (2.0 * half)
    long = math.sinh(half) / half
    found = hang(long, 1.0, horizontal, -0.5 * long)
    flat = parabola(ratio)
    assert float(found.across) == pytest.approx(1.0, rel=1e-14)
    assert horizontal / flat[0] == pytest.approx(pull, abs=6e-7)
    assert float(found.tensions_right) / flat[1] == pytest.approx(tension, abs=6e-7)
    assert float(found.lengths) / flat[2] - 1.0 == pytest.approx(length, rel=5e-2)
    assert horizontal / flat[0] - 1.0 == pytest.approx(4.0 / 3.0 * ratio**2, rel=0.2)


def _half_turn(function: Callable[[float], float], wanted: float) -> float:
    low, high = 1e-9, 20.0
    for _ in range(200):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if function(middle) < wanted else (low, middle)
    return 0.5 * (low + high)


def test_a_stiffness_that_is_not_positive_is_refused() -> None:
    with pytest.raises(ValueError, match="ea must be a positive number"):
        hang(1.0, 1.0, 1.0, 0.0, ea=0.0)
    assert flexibility(None) == flexibility(math.inf) == 0.0
