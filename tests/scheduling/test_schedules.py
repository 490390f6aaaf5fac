"""Cable, hanger and anchorage schedules: what they list, how they round, what they refuse.

Figures of the crossing of nine loads are OWN (tests/crossing.py), to half their last digit.
"""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.errors import DxfcableError
from dxfcable.lengths import parse_length
from dxfcable.model import Cable, LoadPoint, Mast, State, Stay
from dxfcable.scheduling.schedule_fields import Field, Kind, Words, cable_fields
from dxfcable.scheduling.schedules import Schedules, schedules
from dxfcable.settings import Settings, load
from dxfcable.solving.solve import Forming, solve
from dxfcable.statics.cut_lengths import running_marks
from dxfcable.units import convert
from tests.crossing import crossing, layout, loads
from tests.layouts import anchor, sample
from tests.layouts import layout as metric
from tests.layouts import load as point

if TYPE_CHECKING:
    from dxfcable.model import Layout
    from dxfcable.scheduling.schedule_rows import CableRow, HangerRow

LAST = 0.6  # of the last printed digit
SOCKETS = """
[cut_length]
open_socket = { pin_to_face = 0.75, embedment = 0.25 }
button = { pin_to_face = 0.5 }
"""


def scheduled(drawn: Layout, page: str = "", *combos: str) -> Schedules:
    office = load(page)
    solution = solve(drawn, Forming(combos=combos), office)
    return schedules(drawn, solution, office)


def the_cable(page: str = "", **changes: object) -> CableRow:
    (row,) = scheduled(layout(crossing(None, **changes)), page).cables
    return row


def the_hanger(page: str = "", **changes: object) -> HangerRow:
    return scheduled(layout(crossing(None, **changes)), page).hangers[0]


def codes(whole: Schedules) -> list[str]:
    return [finding.code for finding in whole.findings]


def fitted(**changes: object) -> dict[str, object]:
    return {"fitting_left": "open_socket", "fitting_right": "button"} | changes


def test_lengths_of_the_crossing_are_the_published_ones() -> None:
    row = the_cable()
    assert row.length == pytest.approx(123.0976, abs=LAST * 1e-4)
    assert row.unstressed_length == pytest.approx(122.6121, abs=LAST * 1e-4)
    assert row.max_tension == pytest.approx(132.853, abs=LAST * 1e-3)
    assert row.lengths.pin_to_pin == row.length
    assert row.lengths.unstressed == pytest.approx(row.unstressed_length, rel=1e-14)


def test_fittings_named_in_the_drawing_give_the_cut_length() -> None:
    """By hand: unstressed less 0.75 and 0.5 to the faces, plus 0.25 in the left socket."""
    whole = scheduled(layout(crossing(None, **fitted())), SOCKETS)
    lengths = whole.cables[0].lengths
    assert lengths.cut == pytest.approx(122.6121 - 0.75 - 0.5 + 0.25, abs=LAST * 1e-4)
    assert lengths.fittings == ("open_socket", "button")
    steps = {(d.name, d.end): d.value for d in lengths.deductions}
    assert steps["pin to face", "left"] == -0.75
    assert steps["embedment", "left"] == 0.25
    assert steps["pin to face", "right"] == -0.5
    assert "no-measuring-tension" in codes(whole)


def test_a_measuring_tension_stretches_what_is_measured_and_cut() -> None:
    page = SOCKETS + "[cut_length.marks.C1]\nmeasuring_tension = '32.4 kip'"
    whole = scheduled(layout(crossing(None, **fitted())), page)
    lengths = whole.cables[0].lengths
    assert lengths.measuring_tension == pytest.approx(32.4)
    assert lengths.measured == pytest.approx(122.6121 * 1.001, abs=LAST * 1e-4)
    assert lengths.cut == pytest.approx(122.6121 * 1.001 - 1.0, abs=LAST * 1e-4)
    assert codes(whole) == []
    assert the_cable(page.replace("32.4 kip", "144.122 kN"), **fitted()).lengths.measured == (
        pytest.approx(122.6121 * 1.001, abs=LAST * 1e-4)
    )


def test_every_step_leads_from_the_measured_to_the_cut_length() -> None:
    page = SOCKETS + (
        "[cut_length.marks.C1]\nmeasuring_tension = '20 kip'\nconstructional_stretch = 0.002\n"
        "pin_offset = [0.5, 0.25]"
    )
    row = the_cable(page, **fitted())
    lengths = row.lengths
    assert lengths.cut is not None
    assert lengths.measured is not None
    summed = math.fsum([lengths.measured, *(d.value for d in lengths.deductions)])
    assert summed == pytest.approx(lengths.cut, rel=1e-14)
    assert lengths.pin_to_pin == pytest.approx(row.length - 0.75, rel=1e-15)
    last = row.pieces[-1]
    assert last.mark == lengths.unstressed
    assert last.measured_mark == lengths.measured
    assert last.end == "S2"


def test_pieces_between_clamp_marks_are_the_pieces_of_the_cable() -> None:
    row = the_cable()
    marks = [0.0, *(piece.mark for piece in row.pieces)]
    for piece, left, right in zip(row.pieces, marks[:-1], marks[1:], strict=True):
        assert right - left == pytest.approx(piece.unstressed_length, rel=1e-12)
    assert [p.end for p in row.pieces] == [*(f"P{k}" for k in range(1, 10)), "S2"]


def test_a_marks_own_deduction_wins_over_its_fittings_and_that_over_the_general_one() -> None:
    page = SOCKETS + (
        "[cut_length.marks.'*']\npin_to_face = 9.0\nembedment = 0.125\n"
        "[cut_length.marks.C1]\npin_to_face = [1.0, 1.5]"
    )
    steps = {(d.name, d.end): d.value for d in the_cable(page, **fitted()).lengths.deductions}
    assert steps["pin to face", "left"] == -1.0
    assert steps["pin to face", "right"] == -1.5
    assert steps["embedment", "left"] == 0.25
    assert steps["embedment", "right"] == 0.0
    without = {(d.name, d.end): d.value for d in the_cable(page).lengths.deductions}
    assert without["embedment", "right"] == 0.125


def test_a_fitting_that_the_settings_lack_is_said_and_nothing_is_guessed() -> None:
    whole = scheduled(layout(crossing(None, **fitted(fitting_right="fork"))), SOCKETS)
    lengths = whole.cables[0].lengths
    assert lengths.cut is None
    assert 'no end fitting "fork"' in lengths.missing
    assert lengths.deductions == ()
    assert codes(whole) == ["fitting-unknown"]


def test_an_end_without_fitting_has_no_cut_length_and_says_which() -> None:
    lengths = the_cable(SOCKETS, fitting_left="open_socket").lengths
    assert lengths.cut is None
    assert "right end (FITTING_R)" in lengths.missing
    assert "left" not in lengths.missing


def test_deductions_that_take_up_the_cable_are_said() -> None:
    page = "[cut_length.marks.C1]\npin_to_face = 70"
    whole = scheduled(layout(crossing()), page)
    assert whole.cables[0].lengths.cut is None
    assert codes(whole) == ["deductions-exceed"]
    offset = scheduled(
        layout(crossing(None, **fitted())), SOCKETS + "[cut_length.marks.C1]\npin_offset=20"
    )
    assert offset.cables[0].lengths.cut is None
    assert offset.cables[0].lengths.offsets == (0.0, 0.0)
    assert codes(offset) == ["deductions-exceed"]


def test_a_cable_without_stiffness_is_measured_as_it_is_and_says_so() -> None:
    page = SOCKETS + "[cut_length.marks.C1]\nmeasuring_tension = '20 kip'"
    whole = scheduled(layout(crossing(None, **fitted(ea=None))), page)
    lengths = whole.cables[0].lengths
    assert lengths.measured == lengths.unstressed == pytest.approx(whole.cables[0].length)
    assert codes(whole) == ["measured-inextensible"]


def test_a_force_of_the_settings_that_this_drawing_cannot_read_is_refused() -> None:
    page = "[cut_length.marks.C1]\nmeasuring_tension = '18,000 lb'"
    assert the_cable(page).lengths.measuring_tension == pytest.approx(18.0)
    with pytest.raises(DxfcableError, match="measuring_tension of C1") as caught:
        scheduled(sample(), page)
    assert caught.value.code == "settings"


def test_a_mark_that_nothing_has_is_named() -> None:
    page = "[cut_length.marks.C1]\ndeck_pin = 0.1\n[cut_length.marks.C9]\ndeck_pin = 0.1\n"
    page += "[cut_length.marks.'*']\nclamp_drop = 0.1\n"
    unused = [f for f in scheduled(sample(), page).findings if f.code == "mark-unused"]
    assert len(unused) == 1
    assert "C9" in unused[0].text


def test_a_hanger_is_as_long_as_from_cable_to_deck() -> None:
    """Crossing, OWN: node 1 hangs 4.32 under the string, the points lie at -20."""
    row = the_hanger()
    assert (row.cable, row.mark, row.along) == ("C1", "P1", 12.0)
    assert row.length == pytest.approx(20.0 - 4.32, abs=1e-9)
    assert row.elevation - row.deck_elevation == pytest.approx(row.length, rel=1e-14)
    assert row.force == 10.0
    assert row.lengths.unstressed is None
    assert row.lengths.missing == "hanger_ea is not stated"


def test_heights_of_a_hanger_are_in_the_datum() -> None:
    row = the_hanger(datum=100.0)
    assert row.has_datum
    assert row.elevation == pytest.approx(95.68)
    assert row.deck_elevation == pytest.approx(80.0)


def test_a_hanger_loses_clamp_deck_pin_stretch_and_fittings() -> None:
    """By hand: 15.68 - 0.4 - 0.28 = 15; under 10 kip of 1990 it was 15 * 1990 / 2000 long."""
    page = SOCKETS + (
        "[cut_length.marks.C1]\nclamp_drop = 0.4\ndeck_pin = 0.28\nhanger_ea = '1990 kip'\n"
        "hanger_top = 'open_socket'\nhanger_bottom = 'button'"
    )
    row = the_hanger(page)
    assert row.lengths.pin_to_pin == pytest.approx(15.0, rel=1e-9)
    assert row.lengths.unstressed == pytest.approx(14.925, rel=1e-9)
    assert row.lengths.cut == pytest.approx(14.925 - 1.0, rel=1e-9)
    assert row.ea == 1990.0


def test_what_a_hanger_states_for_itself_wins_over_its_cables_word() -> None:
    page = (
        "[cut_length.marks.C1]\nclamp_drop = 0.4\n[cut_length.marks.P1]\nclamp_drop = 0.3\n"
        "[cut_length.marks.'C1/P2']\nclamp_drop = 0.2"
    )
    rows = scheduled(layout(crossing()), page).hangers
    assert [row.lengths.offsets[0] for row in rows[:3]] == [0.3, 0.2, 0.4]


def test_a_hanger_that_its_pins_take_up_is_said() -> None:
    whole = scheduled(layout(crossing()), "[cut_length.marks.P5]\nclamp_drop = 9.0")
    assert codes(whole) == ["deductions-exceed"]
    assert whole.hangers[4].lengths.missing
    assert whole.hangers[3].lengths.unstressed is None


def test_a_hanger_with_one_fitting_unknown_has_no_cut_length() -> None:
    page = "[cut_length.marks.P1]\nhanger_ea = '1990 kip'\nhanger_top = 'fork'"
    row = the_hanger(page)
    assert row.lengths.cut is None
    assert '"fork"' in row.lengths.missing
    assert "hanger_bottom is not stated" in row.lengths.missing


def test_forces_over_states_are_kept_apart_by_level() -> None:
    drawn = layout(crossing(loads(10.0, 6.0)))
    whole = scheduled(drawn, "", "D + L", "1.2D + 1.6L", "0.9D")
    service, factored = whole.hangers[0].forces
    assert (service.level, service.most.value, service.most.combo) == ("service", 16.0, "D + L")
    assert (service.least.value, service.least.combo) == (10.0, "D")
    assert factored.most.value == pytest.approx(21.6)
    assert (factored.least.value, factored.least.combo) == (9.0, "0.9D")
    tensions = {r.level: r.most.combo for r in whole.cables[0].tensions}
    assert tensions == {"service": "D + L", "factored": "1.2D + 1.6L"}
    assert whole.cables[0].tensions[0].most.value > whole.cables[0].max_tension


def test_a_slack_hanger_is_flagged_unless_it_is_clamped() -> None:
    points = tuple(
        LoadPoint(
            mark=p.mark,
            x=p.x,
            y=p.y,
            cases=(("D", 10.0), ("W", -12.0 if p.mark in ("P2", "P3") else 0.0)),
            symbol=p.symbol,
            clamped=p.mark == "P3",
        )
        for p in loads()
    )
    rows = scheduled(layout(crossing(points)), "", "service: D + W").hangers
    assert [row.slack for row in rows[:4]] == [(), ("D + W",), (), ()]
    assert rows[2].is_clamped


def test_a_state_without_shape_is_listed_and_counts_in_no_extreme() -> None:
    drawn = layout(crossing())
    solution = solve(drawn, Forming(), Settings())
    (formed,) = solution.cables
    broken = State(
        combo="D + W",
        level="service",
        level_is_assumed=True,
        horizontal=math.nan,
        max_tension=math.nan,
        fault="no determinate shape",
    )
    solution = replace(solution, cables=(replace(formed, states=(broken,)),))
    (row,) = schedules(drawn, solution, Settings()).cables
    assert row.faults == (("D + W", "no determinate shape"),)
    assert row.tensions[0].most.value == row.max_tension


def test_anchorages_stand_as_formed_and_in_each_state() -> None:
    """Crossing with stays at 30 degrees: the stay takes H / cos 30, the anchor H tan 30 up."""
    whole = scheduled(layout(crossing(loads(10.0, 5.0)), is_stayed=True), "", "D + L")
    assert [(r.found.mark, r.combo, r.is_formed) for r in whole.anchorages] == [
        ("S1", "D", True),
        ("S1", "D + L", False),
        ("S2", "D", True),
        ("S2", "D + L", False),
    ]
    first = whole.anchorages[0]
    assert list(first.stay_angles) == pytest.approx([30.0])
    assert first.found.stays[0] == pytest.approx(125.0 / math.cos(math.radians(30)), rel=1e-9)
    assert first.found.anchors[0].uplift == pytest.approx(125 * math.tan(math.radians(30)))
    assert whole.anchorages[1].found.stays[0] > first.found.stays[0]


def test_two_cables_at_one_support_share_its_states() -> None:
    left = sample().cables[0]
    other = Cable(
        mark="C2",
        supports=left.supports,
        loads=(point("P1", 8.0, 5.0, y=5.0), point("P2", 16.0, 5.0, y=5.0)),
        rule=left.rule,
        ea=9000.0,
    )
    drawn = metric(
        left,
        other,
        masts=(Mast(support=0, foot=(0.0, 6.0)),),
        stays=(Stay(support=0, foot=(-10.0, 6.0), anchor=anchor()),),
    )
    whole = scheduled(drawn, "", "1.4D")
    assert [row.combo for row in whole.anchorages] == ["D", "1.4D"]


def test_utilization_is_given_for_each_level() -> None:
    whole = scheduled(layout(crossing(loads(10.0, 6.0), capacity=300.0)), "", "1.2D + 1.6L")
    row = whole.cables[0]
    fields = {field.key: field.value for field in cable_fields(whole, row)}
    assert fields["utilization"] == pytest.approx(row.max_tension / 300.0)
    share = fields["utilization_factored"]
    assert share == pytest.approx(row.tensions[1].most.value / 300.0)
    assert fields["service_level"] == "assumed"


@settings(max_examples=150, deadline=None)
@given(
    st.floats(-2000.0, 2000.0),
    st.sampled_from(["ft", "in", "us-ft", "m", "dm", "cm", "mm"]),
    st.sampled_from([Kind.LENGTH, Kind.LEVEL]),
)
def test_rounding_is_off_by_half_the_last_place_at_most(
    value: float, unit: str, kind: Kind
) -> None:
    """1/32 in, 0.5 mm; words and CSV numbers read back alike."""
    words = Words(length_unit=unit, force_unit="kN", digits=3)
    half = (
        convert(1 / 32, "in", unit) if unit in ("ft", "in", "us-ft") else convert(0.5, "mm", unit)
    )
    field = Field("", "", kind, value)
    for text in (words.of(field), words.number(field)):
        assert abs(parse_length(text, unit).value - value) <= half * (1 + 1e-6) + 1e-12


@settings(max_examples=60, deadline=None)
@given(st.lists(st.floats(0.5, 60.0), min_size=2, max_size=30))
def test_a_total_is_rounded_itself_and_no_sum_of_rounded_pieces(pieces: list[float]) -> None:
    words = Words(length_unit="ft", force_unit="kip", digits=3)
    total = running_marks(pieces)[-1]
    shown = parse_length(words.of(Field("", "", Kind.LENGTH, total)), "ft").value
    assert abs(shown - math.fsum(pieces)) <= 1 / 384 + 1e-9


def test_heights_without_a_datum_are_differences_from_the_left_support() -> None:
    words = Words(length_unit="m", force_unit="kN", digits=3, has_datum=False, reference=12.0)
    assert words.of(Field("", "", Kind.LEVEL, 10.186)) == "-1.814"
    assert words.of(Field("", "", Kind.LEVEL, 13.0)) == "+1.000"
