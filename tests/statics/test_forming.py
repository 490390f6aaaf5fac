"""Forming by each rule: refusals with their bound, and numbers at the edges."""

from __future__ import annotations

import math
import re
from decimal import Decimal, localcontext

import numpy as np
import pytest

from dxfcable.errors import RuleError
from dxfcable.model import RuleKind
from dxfcable.statics.beam import simple_beam, simple_beam_moments
from dxfcable.statics.forming import form, horizontal_for_max_tension
from dxfcable.statics.funicular import polygon
from dxfcable.statics.lengths import horizontal_for_length
from dxfcable.statics.sag_table import sag_table

X, LOADS = [0.0, 8.0, 16.0, 24.0], [15.0, 21.0]
FORCE_OR_LENGTH = [kind for kind in RuleKind if kind not in (RuleKind.THROUGH, RuleKind.LOW_POINT)]
# A value that each rule meets between (0, 12) and (24, 13).
MET = {
    RuleKind.SAG: 2.4,
    RuleKind.PULL: 60.0,
    RuleKind.MAX_TENSION: 70.0,
    RuleKind.LENGTH: 25.0,
    RuleKind.CUT_LENGTH: 25.0,
    RuleKind.LOW_POINT: 10.0,
    RuleKind.THROUGH: 0.0,
}


@pytest.mark.parametrize("value", [0.0, -1.0, math.nan, math.inf, -math.inf])
@pytest.mark.parametrize("kind", FORCE_OR_LENGTH, ids=str)
def test_a_value_that_is_not_positive_is_refused(kind: RuleKind, value: float) -> None:
    with pytest.raises(RuleError, match="must be"):
        form(X, LOADS, 12, 13, kind, value)


@pytest.mark.parametrize("kind", list(RuleKind), ids=str)
@pytest.mark.parametrize(
    "loads", [[0.0, 0.0], [-15.0, -21.0], [-15.0, 0.0]], ids=["none", "up", "one-up"]
)
def test_loads_with_no_downward_moment_are_refused_by_every_rule(
    kind: RuleKind, loads: list[float]
) -> None:
    with pytest.raises(RuleError, match=r"no determinate shape|nowhere downward"):
        form(X, loads, 12, 13, kind, MET[kind], point=(8.0, 10.0))


@pytest.mark.parametrize("kind", list(RuleKind), ids=str)
def test_a_weightless_cable_without_load_points_is_refused_by_every_rule(kind: RuleKind) -> None:
    with pytest.raises(RuleError, match="weightless cable without loads"):
        form([0.0, 24.0], [], 12, 13, kind, MET[kind], point=(8.0, 10.0))


def test_an_unloaded_span_of_a_given_pull_is_straight() -> None:
    cable = polygon([0.0, 4.0], [], 0.0, 3.0, 8.0)
    assert cable.length == 5.0
    assert cable.tensions.tolist() == [10.0]
    assert (cable.sag, cable.low_point, cable.residual) == (0.0, (0.0, 0.0), 0.0)
    assert (cable.governing_segment, cable.governing_end) == (0, "left")


@pytest.mark.parametrize("kind", list(RuleKind), ids=str)
def test_every_rule_forms_the_cable_that_it_names(kind: RuleKind) -> None:
    cable = form(X, LOADS, 12, 13, kind, MET[kind], point=(8.0, 10.0), ea=9000.0)
    measured = {
        RuleKind.SAG: cable.sag,
        RuleKind.PULL: cable.horizontal,
        RuleKind.MAX_TENSION: cable.max_tension,
        RuleKind.LENGTH: cable.length,
        RuleKind.CUT_LENGTH: cable.unstressed_length,
        RuleKind.LOW_POINT: cable.low_point[1],
        RuleKind.THROUGH: cable.y[1] - 10.0,
    }
    assert measured[kind] == pytest.approx(MET[kind], rel=1e-13, abs=1e-13)


# --- largest tension ----------------------------------------------------------------------


def test_between_level_supports_the_least_tension_is_a_limit() -> None:
    with pytest.raises(RuleError, match="more than 19") as refusal:
        form(X, LOADS, 12, 12, RuleKind.MAX_TENSION, 19.0)
    assert refusal.value.least == pytest.approx(19.0, rel=1e-12)
    assert refusal.value.is_limit
    assert form(X, LOADS, 12, 12, RuleKind.MAX_TENSION, 19.0001).horizontal > 0.0


def test_between_uneven_supports_the_least_tension_can_be_reached() -> None:
    with pytest.raises(RuleError, match="at least") as refusal:
        form(X, LOADS, 30, 0, RuleKind.MAX_TENSION, 10.0)
    least = refusal.value.least
    assert least is not None
    assert not refusal.value.is_limit
    assert form(X, LOADS, 30, 0, RuleKind.MAX_TENSION, least).max_tension == pytest.approx(
        least, rel=1e-12
    )


@pytest.mark.parametrize("rise", [0.0, 0.7, 30.0, -30.0, -200.0])
@pytest.mark.parametrize("loads", [[15.0, 21.0], [21.0, 15.0], [1.0, 1e3], [10.0, -2.0]])
def test_the_least_value_that_a_refusal_shows_is_accepted(rise: float, loads: list[float]) -> None:
    with pytest.raises(RuleError) as refusal:
        form(X, loads, 0.0, rise, RuleKind.MAX_TENSION, 1e-3)
    shown = float(re.findall(r"(?:more than|at least) ([\d.e+-]+?)\.?$", str(refusal.value))[0])
    cable = form(X, loads, 0.0, rise, RuleKind.MAX_TENSION, shown * (1.0 + 1e-6))
    assert cable.max_tension == pytest.approx(shown, rel=2e-6)


@pytest.mark.parametrize("rise", [0.0, 5.0, -5.0, 60.0, -60.0])
def test_any_larger_pull_passes_the_largest_tension(rise: float) -> None:
    pull = horizontal_for_max_tension(X, LOADS, 0.0, rise, 120.0)
    assert polygon(X, LOADS, 0.0, rise, pull).max_tension == pytest.approx(120.0, rel=1e-12)
    for factor in (1.001, 1.1, 2.0, 10.0):
        assert polygon(X, LOADS, 0.0, rise, factor * pull).max_tension > 120.0


def test_a_tension_just_above_the_limit_keeps_the_digits_of_its_pull() -> None:
    """Shear -19 against a chord rising by 1.25: H = (T^2 - V^2) / (2 |s V|) for a tiny H."""
    excess = 1e-10
    pull = horizontal_for_max_tension(X, LOADS, 0.0, 30.0, 19.0 * (1.0 + excess))
    tension = 19.0 * (1.0 + excess)
    expected = (tension - 19.0) * (tension + 19.0) / (2.0 * 1.25 * 19.0)
    assert pull == pytest.approx(expected, rel=1e-8, abs=0.0)


@pytest.mark.parametrize(("at", "rise"), [(0.7, 1.5), (0.3, -1.5)])
def test_equal_end_shears_give_a_limit_though_rounding_parts_them(at: float, rise: float) -> None:
    assert simple_beam([0.0, at, 3.0 - at, 3.0], [0.7, 0.7]).shears[[0, -1]].sum() != 0.0
    with pytest.raises(RuleError, match="more than") as refusal:
        form([0.0, at, 3.0 - at, 3.0], [0.7, 0.7], 0.0, rise, RuleKind.MAX_TENSION, 0.1)
    assert refusal.value.is_limit


# --- lengths ------------------------------------------------------------------------------


@pytest.mark.parametrize("kind", [RuleKind.LENGTH, RuleKind.CUT_LENGTH], ids=str)
@pytest.mark.parametrize("length", [10.0, 24.0, math.hypot(24, 7)])
def test_a_length_up_to_the_chord_is_refused_with_the_chord(kind: RuleKind, length: float) -> None:
    with pytest.raises(RuleError, match="more than the chord between the supports, 25") as refusal:
        form(X, LOADS, 0.0, 7.0, kind, length)
    assert refusal.value.least == pytest.approx(25.0, rel=1e-15)
    assert refusal.value.is_limit


@pytest.mark.parametrize("excess", [1e-12, 1e-9, 1e-6, 1e-3, 1.0, 1e3, 1e6])
@pytest.mark.parametrize("rise", [0.0, 7.0, -18.0])
def test_taut_and_slack_cables_are_solved_to_rounding(excess: float, rise: float) -> None:
    """The excess is taken from the exact squares, so a taut cable keeps its digits."""
    length = math.hypot(24.0, rise) * (1.0 + excess)
    cable = form(X, LOADS, 0.0, rise, RuleKind.LENGTH, length)
    assert cable.length == pytest.approx(length, rel=4e-16 * 4)
    if rise == 0.0 and excess <= 1e-9:
        # Taut and level: excess = sum(V^2 d) / (2 H^2), the next term is smaller by the excess.
        squares = 8.0 * (17.0**2 + 2.0**2 + 19.0**2)
        taut = math.sqrt(squares / (2.0 * (length - 24.0)))
        assert cable.horizontal == pytest.approx(taut, rel=1e-8)


@pytest.mark.parametrize("rise", [1, 5, 11, -17])
def test_a_taut_cable_is_measured_against_its_exact_chord(rise: int) -> None:
    """The chord as a double is off by up to 1e-3 of an excess of 2e-12: taken in 50 digits."""
    length = math.hypot(24.0, rise) * (1.0 + 1e-13)
    with localcontext(prec=50):
        excess = float(Decimal(length) - Decimal(24 * 24 + rise * rise).sqrt())
    squares = 8.0 * (17.0**2 + 2.0**2 + 19.0**2)
    taut = math.sqrt(squares / (2.0 * math.hypot(1.0, rise / 24.0) ** 3 * excess))
    pull = horizontal_for_length(X, LOADS, 0.0, float(rise), length)
    assert pull == pytest.approx(taut, rel=2e-6)


def test_a_stiff_enough_cable_is_cut_as_long_as_it_is() -> None:
    soft = form(X, LOADS, 12, 13, RuleKind.CUT_LENGTH, 25.0, ea=1e15)
    assert soft.horizontal == pytest.approx(horizontal_for_length(X, LOADS, 12, 13, 25.0), rel=1e-9)


@pytest.mark.parametrize("cut", [10.0, 23.9, 24.0, 24.02, 30.0, 500.0])
def test_an_elastic_cable_may_be_cut_shorter_than_its_chord(cut: float) -> None:
    cable = form(X, LOADS, 12, 13, RuleKind.CUT_LENGTH, cut, ea=9000.0)
    assert cable.unstressed_length == pytest.approx(cut, rel=1e-14)
    assert cable.length > math.hypot(24, 1)


def test_an_elastic_cable_still_needs_a_positive_cut_length() -> None:
    with pytest.raises(RuleError, match="positive") as refusal:
        form(X, LOADS, 12, 13, RuleKind.CUT_LENGTH, 0.0, ea=9000.0)
    assert refusal.value.least == 0.0


# --- low point and point ------------------------------------------------------------------


@pytest.mark.parametrize("value", [12.0, 12.5, 20.0, math.nan, math.inf])
def test_a_low_point_at_or_above_the_lower_support_is_refused(value: float) -> None:
    with pytest.raises(RuleError, match="below the lower support, 12") as refusal:
        form(X, LOADS, 12, 13, RuleKind.LOW_POINT, value)
    assert refusal.value.least == 12.0


@pytest.mark.parametrize("ends", [(0.0, 9.0), (9.0, 0.0)])
def test_a_low_point_just_under_the_lower_support_is_met(ends: tuple[float, float]) -> None:
    cable = form(X, LOADS, *ends, RuleKind.LOW_POINT, -1e-6)
    assert cable.low_point[1] == pytest.approx(-1e-6, abs=1e-14)


@pytest.mark.parametrize("at", [0.0, 24.0, -3.0, 99.0])
def test_a_point_outside_the_supports_is_refused(at: float) -> None:
    with pytest.raises(RuleError, match="between the supports, 0 and 24"):
        form(X, LOADS, 12, 13, RuleKind.THROUGH, point=(at, 5.0))


def test_a_point_above_the_closing_string_is_refused_where_the_cable_hangs() -> None:
    with pytest.raises(RuleError, match="above the closing string"):
        form(X, LOADS, 12, 13, RuleKind.THROUGH, point=(8.0, 12.5))


def test_a_point_on_the_closing_string_is_refused() -> None:
    with pytest.raises(RuleError, match="straight cable"):
        form(X, LOADS, 12, 12, RuleKind.THROUGH, point=(8.0, 12.0))
    with pytest.raises(RuleError, match="straight cable"):
        form(X, LOADS, 12, 13, RuleKind.THROUGH, point=(8.0, 12.0 + 8.0 / 24.0))


def test_where_part_is_lifted_the_point_must_be_on_the_side_of_the_cable() -> None:
    x, loads = [0.0, 2.0, 8.0, 10.0], [10.0, -6.0]
    assert simple_beam_moments(x, loads)[2] < 0.0 < simple_beam_moments(x, loads)[1]
    lifted = form(x, loads, 0, 0, RuleKind.THROUGH, point=(8.0, 0.4))
    assert lifted.y[2] == pytest.approx(0.4, rel=1e-12)
    with pytest.raises(RuleError, match="below the closing string"):
        form(x, loads, 0, 0, RuleKind.THROUGH, point=(8.0, -0.4))


def test_a_point_where_the_moment_is_zero_fixes_no_shape() -> None:
    x, loads = [0.0, 2.5, 5.0, 7.5, 10.0], [10.0, 0.0, -10.0]
    with pytest.raises(RuleError, match="fixes no shape"):
        form(x, loads, 0, 0, RuleKind.THROUGH, point=(5.0, -1.0))


def test_the_rule_through_needs_its_point() -> None:
    with pytest.raises(ValueError, match="point"):
        form(X, LOADS, 12, 13, RuleKind.THROUGH)


# --- shape --------------------------------------------------------------------------------


def test_points_held_above_the_closing_string_are_told() -> None:
    cable = form([0.0, 2.0, 8.0, 10.0], [10.0, -6.0], 0, 0, RuleKind.SAG, 1.0)
    assert cable.has_uplift
    assert cable.above_string == (2,)
    assert not form(X, LOADS, 12, 13, RuleKind.SAG, 1.0).has_uplift


def test_a_point_held_slightly_above_the_closing_string_is_told_too() -> None:
    cable = form([0.0, 2.0, 8.0, 10.0], [10.0, -2.51], 0, 0, RuleKind.SAG, 1.0)
    assert -1e-2 < cable.drops[2] < 0.0
    assert cable.above_string == (2,)


def test_of_equal_drops_and_tensions_the_leftmost_is_named() -> None:
    cable = form([0.0, 1.0, 2.0, 3.0], [5.0, 5.0], 0, 0, RuleKind.SAG, 1.0)
    assert (cable.sag_index, cable.low_index, cable.governing_segment) == (1, 1, 0)
    assert cable.governing_end == "left"


def test_an_inner_segment_that_governs_points_to_the_nearer_support() -> None:
    # Uplift at both sides of a heavy load makes an inner segment the steepest.
    cable = polygon([0.0, 1.0, 4.0, 9.0, 10.0], [-4.0, 10.0, -4.5], 0, 0, 5.0)
    assert cable.governing_segment == 1
    assert cable.governing_end == "left"
    mirrored = polygon([0.0, 1.0, 6.0, 9.0, 10.0], [-4.5, 10.0, -4.0], 0, 0, 5.0)
    assert mirrored.governing_segment == 2
    assert mirrored.governing_end == "right"


@pytest.mark.parametrize("offset", [1e6, -3e6])
def test_large_coordinates_keep_the_digits_of_small_ones(offset: float) -> None:
    """State-plane coordinates: only their own last digit is lost, 1e-10 at a million."""
    x = np.array([0.0, 3.0, 8.0, 12.5, 20.0, 26.0, 30.0])
    loads = [4.0, 10.0, 6.0, 12.0, 5.0]
    for kind, value in (
        (RuleKind.SAG, 2.5),
        (RuleKind.MAX_TENSION, 60.0),
        (RuleKind.LENGTH, 30.5),
        (RuleKind.LOW_POINT, -2.5),
    ):
        near = form(x, loads, 0.0, 0.5, kind, value)
        shift = offset if kind is RuleKind.LOW_POINT else 0.0
        far = form(x + offset, loads, offset, offset + 0.5, kind, value + shift)
        assert far.horizontal == pytest.approx(near.horizontal, rel=1e-9)
        np.testing.assert_allclose(far.y - offset, near.y, atol=1e-9 * 30.0, rtol=0)
        np.testing.assert_allclose(far.tensions, near.tensions, rtol=1e-9)
        assert far.residual <= 1e-9 * sum(loads)
        assert far.x.tolist() == (x + offset).tolist()
        assert (far.y[0], far.y[-1]) == (offset, offset + 0.5)


@pytest.mark.parametrize("fraction", [1e-3, 1e-6, 1.0 - 1e-3, 1.0 - 1e-6])
def test_a_load_very_near_a_support_keeps_its_moment(fraction: float) -> None:
    at = 100.0 * fraction
    moment = simple_beam_moments([0.0, at, 100.0], [7.0])[1]
    assert moment == pytest.approx(7.0 * at * (100.0 - at) / 100.0, rel=1e-14)
    cable = form([0.0, at, 100.0], [7.0], 0.0, 3.0, RuleKind.LENGTH, 101.0)
    assert cable.length == pytest.approx(101.0, rel=1e-15)


def test_two_loads_close_together_act_as_their_sum() -> None:
    split = form([0, 4, 4 + 1e-7, 10], [3, 4], 0, 1, RuleKind.PULL, 10)
    one = form([0, 4, 10], [7], 0, 1, RuleKind.PULL, 10)
    assert split.y[1] == pytest.approx(one.y[1], abs=1e-6)
    assert split.residual < 1e-6 * 7


def test_zero_loads_bend_nothing() -> None:
    with_zero = form([0, 2, 4, 7, 10], [0, 8, 0], 0, 1, RuleKind.SAG, 1)
    without = form([0, 4, 10], [8], 0, 1, RuleKind.SAG, 1)
    assert with_zero.horizontal == pytest.approx(without.horizontal, rel=1e-14)
    np.testing.assert_allclose(with_zero.y[[0, 2, 4]], without.y, atol=1e-14)
    assert with_zero.tensions[0] == pytest.approx(with_zero.tensions[1], rel=1e-14)


def test_any_positive_sag_is_possible() -> None:
    for sag in (1e-9, 1e-3, 1.0, 1e3, 1e9):
        assert form(X, LOADS, 12, 13, RuleKind.SAG, sag).sag == pytest.approx(sag, rel=1e-15, abs=0)


def test_results_and_inputs_are_never_changed() -> None:
    x, loads = np.array(X), np.array(LOADS)
    cable = form(x, loads, 12, 13, RuleKind.SAG, 2.4)
    with pytest.raises(ValueError, match="read-only"):
        cable.y[0] = 1.0
    x[0] = loads[0] = -9.0
    assert (cable.x[0], cable.loads[0]) == (0.0, 15.0)


# --- bad numbers --------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("x", "loads", "words"),
    [
        ([0.0, 1.0, 1.0, 2.0], [1.0, 1.0], "x must increase"),
        ([0.0, 2.0, 1.0, 3.0], [1.0, 1.0], "x must increase"),
        ([3.0, 0.0], [], "x must increase"),
        ([0.0, math.nan, 2.0], [1.0], "finite"),
        ([0.0, 1.0, math.inf], [1.0], "finite"),
        ([0.0, 1.0, 2.0], [math.nan], "finite"),
        ([0.0, 1.0, 2.0], [1.0, 2.0], "each of the 1 inner stations"),
        ([0.0], [], "two stations"),
        ([[0.0, 1.0]], [], "two stations"),
    ],
)
def test_stations_and_loads_that_make_no_span_are_refused(
    x: list[float], loads: list[float], words: str
) -> None:
    with pytest.raises(ValueError, match=words):
        simple_beam(x, loads)


@pytest.mark.parametrize("bad", [math.nan, math.inf])
def test_ordinates_stiffness_and_pull_must_be_finite(bad: float) -> None:
    with pytest.raises(ValueError, match="y_left"):
        polygon(X, LOADS, bad, 0, 10)
    with pytest.raises(ValueError, match="y_right"):
        form(X, LOADS, 0, bad, RuleKind.LENGTH, 30)
    with pytest.raises(ValueError, match="horizontal"):
        polygon(X, LOADS, 0, 0, bad)
    with pytest.raises(ValueError, match="ea"):
        form(X, LOADS, 0, 0, RuleKind.CUT_LENGTH, 30, ea=bad)
    with pytest.raises(ValueError, match="y of the point"):
        form(X, LOADS, 0, 0, RuleKind.THROUGH, point=(8, bad))


# --- table of sags ------------------------------------------------------------------------


def test_the_table_of_sags_holds_what_forming_by_each_sag_gives() -> None:
    rows = sag_table(X, LOADS, 12, 13, ea=9000.0)
    assert [row.ratio for row in rows] == [8, 10, 12, 15, 20]
    for row in rows:
        cable = form(X, LOADS, 12, 13, RuleKind.SAG, 24 / row.ratio, ea=9000.0)
        assert row.sag == pytest.approx(24 / row.ratio, rel=1e-15)
        assert (row.horizontal, row.max_tension) == (cable.horizontal, cable.max_tension)
        assert (row.length, row.unstressed_length) == (cable.length, cable.unstressed_length)


@pytest.mark.parametrize("ratio", [0.0, -8.0, math.nan])
def test_the_table_of_sags_refuses_a_ratio_that_is_not_positive(ratio: float) -> None:
    with pytest.raises(RuleError, match="ratio"):
        sag_table(X, LOADS, 12, 13, [ratio])


def test_the_table_of_sags_refuses_a_cable_that_cannot_hang() -> None:
    with pytest.raises(RuleError, match="nowhere downward"):
        sag_table(X, [-1, -1], 12, 13)
