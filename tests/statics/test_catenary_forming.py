"""Each rule holds on the exact curve of a cable with weight and stretch, or is refused."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import assume, example, given, settings
from hypothesis import strategies as st
from scipy.optimize import minimize_scalar

from dxfcable.errors import ConvergenceError, RuleError
from dxfcable.model import RuleKind
from dxfcable.statics import catenary_stations, roots
from dxfcable.statics.beam import simple_beam
from dxfcable.statics.catenary_forming import form_catenary
from dxfcable.statics.catenary_rules import greatest_moment
from dxfcable.statics.forming import form
from dxfcable.statics.funicular import polygon

X = [0.0, 3.0, 8.0, 12.5, 20.0, 26.0, 30.0]
LOADS = [4.0, 10.0, 6.0, 12.0, 5.0]
ALL_KINDS = tuple(RuleKind)


@pytest.mark.parametrize("kind", ALL_KINDS, ids=str)
@pytest.mark.parametrize("ea", [None, 5000.0])
@pytest.mark.parametrize("rise", [0.0, 3.0, -14.0])
def test_without_weight_every_rule_gives_the_string_polygon(
    kind: RuleKind, ea: float | None, rise: float
) -> None:
    plain = polygon(X, LOADS, 2.0, 2.0 + rise, 31.0, ea=ea)
    value = {
        RuleKind.MAX_TENSION: plain.max_tension,
        RuleKind.SAG: plain.sag,
        RuleKind.LOW_POINT: min(plain.low_point[1], min(2.0, 2.0 + rise) - 0.5),
        RuleKind.PULL: 31.0,
        RuleKind.LENGTH: plain.length,
        RuleKind.CUT_LENGTH: plain.unstressed_length,
        RuleKind.THROUGH: 0.0,
    }[kind]
    point = (9.0, float(np.interp(9.0, plain.x, plain.y)))
    flat = form(X, LOADS, 2.0, 2.0 + rise, kind, value, point=point, ea=ea)
    cable = form_catenary(X, LOADS, 2.0, 2.0 + rise, kind, value, point=point, ea=ea)
    assert cable.horizontal == flat.horizontal
    assert cable.y == pytest.approx(flat.y, rel=1e-12, abs=1e-13)
    assert cable.tensions_left == pytest.approx(flat.tensions, rel=1e-12)
    assert cable.tensions_right == pytest.approx(flat.tensions, rel=1e-12)
    assert cable.unstressed_lengths == pytest.approx(flat.unstressed_lengths, rel=1e-12)
    assert cable.lengths == pytest.approx(flat.lengths, rel=1e-12)
    assert cable.sag == pytest.approx(flat.sag, rel=1e-12)
    assert cable.above_string == flat.above_string
    assert cable.governing_segment == flat.governing_segment
    assert cable.governing_end == flat.governing_end


@settings(max_examples=25)
@given(
    st.lists(st.floats(0.0, 10.0), min_size=0, max_size=6),
    st.floats(-60.0, 60.0),
    st.floats(-4.0, 2.0),
    st.one_of(st.none(), st.floats(2.0, 5.0)),
    st.floats(math.log10(1 / 500), math.log10(2.0)),
)
@example([], 0.0, 0.0, None, 0.0)
@example([5.0], 60.0, 2.0, 2.0, math.log10(2.0))
def test_all_rules_find_the_same_cable(
    loads: list[float], slope: float, heavy: float, stiff: float | None, depth: float
) -> None:
    x = np.concatenate([[0.0], 100.0 * (np.arange(len(loads)) + 0.7) / (len(loads) + 0.9), [100.0]])
    rise = 100.0 * math.tan(math.radians(slope))
    force = sum(loads) or 1.0
    weight = force * 10.0**heavy / math.hypot(100.0, rise)
    ea = None if stiff is None else (force + 100.0 * weight) * 10.0**stiff
    sag = 100.0 * 10.0**depth
    cable = form_catenary(x, loads, 0, rise, RuleKind.SAG, sag, weight=weight, ea=ea)
    assert cable.sag == pytest.approx(sag, rel=1e-11)
    assert cable.residual <= 1e-11 * math.hypot(100.0, rise)
    # Moment about each load point of all that is left of it: the shape is in equilibrium.
    jumps = cable.verticals_left[1:] - cable.verticals_right[:-1]
    assert jumps == pytest.approx(loads, abs=1e-12 * cable.max_tension)
    at = 43.0
    wanted = {
        RuleKind.LENGTH: cable.length,
        RuleKind.CUT_LENGTH: cable.unstressed_length,
        RuleKind.THROUGH: 0.0,
        RuleKind.PULL: cable.horizontal,
    }
    if cable.low_point[1] < min(0.0, rise) - 1e-3 * sag:
        wanted[RuleKind.LOW_POINT] = cable.low_point[1]
    over = 1e-11 / min(1.0, (sag / math.hypot(100.0, rise)) ** 2)
    for kind, value in wanted.items():
        point = (at, float(cable.ordinates_at(at)))
        again = form_catenary(x, loads, 0, rise, kind, value, point=point, weight=weight, ea=ea)
        assert again.horizontal == pytest.approx(cable.horizontal, rel=max(over, 1e-9)), kind
    tight = form_catenary(
        x, loads, 0, rise, RuleKind.MAX_TENSION, cable.max_tension, weight=weight, ea=ea
    )
    assert tight.max_tension == pytest.approx(cable.max_tension, rel=1e-12)
    assert tight.horizontal >= cable.horizontal * (1.0 - 1e-7)


def test_the_sag_is_met_inside_a_piece() -> None:
    cable = form_catenary([0, 20, 100], [0.01], 0, 9, RuleKind.SAG, 11, weight=1.0, ea=4000.0)
    at, ordinate = cable.sag_point
    assert 45.0 < at < 60.0
    assert 0.09 * at - ordinate == pytest.approx(11.0, rel=1e-13)
    assert float(np.max(cable.drops)) < 11.0


def test_the_low_point_is_met_inside_a_piece() -> None:
    cable = form_catenary([0, 20, 100], [0.01], 5, 9, RuleKind.LOW_POINT, -3, weight=1.0, ea=4e3)
    assert cable.low_point[1] == pytest.approx(-3.0, abs=1e-13)
    assert 30.0 < cable.low_point[0] < 60.0


def test_the_least_tension_is_named_and_is_the_least() -> None:
    def tension(exponent: float) -> float:
        return form_catenary(
            X, LOADS, 0, 3, RuleKind.PULL, math.exp(exponent), weight=0.4, ea=5000.0
        ).max_tension

    least = float(minimize_scalar(tension, (0.0, 2.0, 4.0), options={"xtol": 1e-9}).fun)
    with pytest.raises(RuleError, match="it must be at least") as caught:
        form_catenary(X, LOADS, 0, 3, RuleKind.MAX_TENSION, 10.0, weight=0.4, ea=5000.0)
    assert caught.value.least == pytest.approx(least, rel=1e-11)
    assert not caught.value.is_limit
    just = form_catenary(
        X, LOADS, 0, 3, RuleKind.MAX_TENSION, least * (1 + 1e-9), weight=0.4, ea=5000.0
    )
    assert just.max_tension == pytest.approx(least, rel=2e-9)


def test_of_two_shapes_with_one_largest_tension_the_tauter_is_formed() -> None:
    deep = form_catenary([0, 100], [], 0, 0, RuleKind.SAG, 80, weight=1.0)
    taut = form_catenary([0, 100], [], 0, 0, RuleKind.MAX_TENSION, deep.max_tension, weight=1.0)
    assert taut.max_tension == pytest.approx(deep.max_tension, rel=1e-13)
    assert taut.horizontal > 2.0 * deep.horizontal


def test_a_cable_shorter_than_its_chord_is_cut_for_a_taut_span() -> None:
    cable = form_catenary(X, LOADS, 0, 0, RuleKind.CUT_LENGTH, 29.8, weight=0.1, ea=5000.0)
    assert cable.unstressed_length == pytest.approx(29.8, rel=1e-13)
    assert cable.length > 30.0


def test_partly_upward_loads_form_and_show_their_uplift() -> None:
    cable = form_catenary(
        [0, 10, 20, 30], [9.0, -8.0], 0, 0, RuleKind.SAG, 2.0, weight=0.05, ea=5000.0
    )
    assert cable.has_uplift
    assert cable.sag == pytest.approx(2.0, rel=1e-12)


@pytest.mark.parametrize(
    ("kind", "value", "point", "said"),
    [
        (RuleKind.SAG, 0.0, None, "sag must be a positive number"),
        (RuleKind.SAG, math.nan, None, "sag must be a positive number"),
        (RuleKind.PULL, -1.0, None, "pull must be a positive number"),
        (RuleKind.MAX_TENSION, 0.0, None, "largest tension must be a positive number"),
        (RuleKind.LOW_POINT, 0.0, None, "must be below the lower support"),
        (RuleKind.LENGTH, 30.0, None, "more than the chord"),
        (RuleKind.CUT_LENGTH, 29.0, None, "more than the chord"),
        (RuleKind.CUT_LENGTH, -1.0, None, "cut length must be a positive number"),
        (RuleKind.THROUGH, 0.0, (30.0, -1.0), "must lie between the supports"),
        (RuleKind.THROUGH, 0.0, (10.0, 1.0), "lies on the closing string"),
        (RuleKind.THROUGH, 0.0, (10.0, 4.0), "cannot be met"),
    ],
)
def test_what_no_cable_meets_is_refused_in_one_sentence(
    kind: RuleKind, value: float, point: tuple[float, float] | None, said: str
) -> None:
    with pytest.raises(RuleError, match=said):
        form_catenary(X, LOADS, 0, 3, kind, value, point=point, weight=0.2)


def test_loads_that_lift_the_cable_everywhere_are_refused() -> None:
    for weight in (0.0, 0.1):
        with pytest.raises(RuleError, match="nowhere downward"):
            form_catenary([0, 5, 10], [-3.0], 0, 0, RuleKind.SAG, 1, weight=weight)


def test_a_weightless_cable_without_loads_is_refused() -> None:
    with pytest.raises(RuleError, match="no determinate shape"):
        form_catenary([0, 10], [], 0, 0, RuleKind.SAG, 1)


def test_wrong_numbers_are_refused() -> None:
    with pytest.raises(ValueError, match="weight must not be negative"):
        form_catenary(X, LOADS, 0, 0, RuleKind.SAG, 1, weight=-1.0)
    with pytest.raises(ValueError, match="weight must be a finite number"):
        form_catenary(X, LOADS, 0, 0, RuleKind.SAG, 1, weight=math.nan)
    with pytest.raises(ValueError, match="THROUGH needs a point"):
        form_catenary(X, LOADS, 0, 0, RuleKind.THROUGH, weight=0.1)


def test_the_moment_of_the_weight_counts_inside_the_pieces() -> None:
    moment, _ = greatest_moment(simple_beam([0, 1, 10], [0.0]), 0.0, 2.0)
    assert moment == pytest.approx(2.0 * 10.0**2 / 8.0)
    lifted, _ = greatest_moment(simple_beam([0, 5, 10], [-10.0]), 0.0, 2.0)
    assert lifted == pytest.approx(2.0 * 2.5 * 7.5 / 2.0 - 5.0 * 2.5)


def test_an_iteration_that_is_cut_off_says_so(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(catenary_stations, "_ITERATIONS", 1)
    with pytest.raises(ConvergenceError, match="on its stations was not found"):
        form_catenary(X, LOADS, 0, 3, RuleKind.PULL, 10, weight=3.0, ea=5000.0)


def test_a_root_is_found_between_signs_only(monkeypatch: pytest.MonkeyPatch) -> None:
    assert roots.bracketed_root(lambda u: u**3 - 2.0, 0.0, 3.0) == pytest.approx(2 ** (1 / 3))
    with pytest.raises(RuleError, match="The sag cannot be met"):
        roots.decreasing_root(lambda u: 1.0 + u, start=2.0, low=1e-3, high=1e3, name="The sag")
    monkeypatch.setattr(roots, "_ITERATIONS", 3)
    with pytest.raises(ConvergenceError, match="did not close"):
        roots.bracketed_root(lambda u: u**3 - 2.0, 0.0, 3.0)


@given(st.floats(-3.0, 3.0), st.floats(1.0, 9.0))
def test_a_steep_or_flat_function_does_not_mislead_the_search(root: float, power: float) -> None:
    assume(abs(root) > 1e-6)
    found = roots.bracketed_root(
        lambda u: math.copysign(abs(u - root) ** power, u - root) / 10.0**power, -4.0, 5.0
    )
    assert abs(found - root) ** power / 10.0**power <= 1e-15
