"""A load change: formed anew or kept at its cut length, from the record alone."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.errors import LayoutError
from dxfcable.model import Finding, Rule, RuleKind, Severity
from dxfcable.recorded import CUT
from dxfcable.revising.keeping import with_cut_cables, with_new_loads
from dxfcable.revising.recorded_loads import partners
from dxfcable.revising.recorded_units import in_units_of
from dxfcable.revising.recording import record_of
from dxfcable.revising.revise import HOLD_CUT, HOLD_RULE, Revision, revise
from dxfcable.settings import Settings
from dxfcable.solving.solve import Forming, solve
from tests.crossing import EA, MIDDLE, crossing, layout, loads

if TYPE_CHECKING:
    from dxfcable.model import Layout, LoadPoint
    from dxfcable.recorded import CableRecord
    from dxfcable.revising.revise import Answer

OFFICE = Settings()
LAST = 0.6  # of the last printed digit
CUT_LENGTH, RULE = Revision(hold=HOLD_CUT), Revision(hold=HOLD_RULE)


def issued(drawn: Layout, forming: Forming | None = None) -> dict[str, CableRecord]:
    """Solve a layout and return what its drawing would keep."""
    solution = solve(drawn, forming or Forming(), OFFICE)
    return {
        cable.mark: record_of(
            drawn,
            cable,
            formed,
            combos=solution.combos,
            heads=tuple(head for _, head in solution.heads),
        )
        for cable, formed in zip(drawn.cables, solution.cables, strict=True)
    }


def answer(drawn: Layout, records: dict[str, CableRecord], how: Revision) -> Answer:
    return revise(with_new_loads(drawn, records), records, how, OFFICE, ())


def kept(found: Answer, how: Revision) -> dict[str, CableRecord]:
    """Return what the revised drawing keeps."""
    revisions = {r.cable: r for r in found.solution.revisions}
    return {
        cable.mark: record_of(
            found.layout,
            cable,
            formed,
            before=found.records[cable.mark] if how.hold == HOLD_CUT else None,
            delta_t=how.delta_t,
            combos=found.solution.combos,
            heads=tuple(head for _, head in found.solution.heads),
            revisions=revisions.get(cable.mark),
        )
        for cable, formed in zip(found.layout.cables, found.solution.cables, strict=True)
    }


def without_rows(records: dict[str, CableRecord]) -> dict[str, CableRecord]:
    return {mark: replace(record, revisions=None) for mark, record in records.items()}


def changed(points: tuple[LoadPoint, ...], values: dict[int, float]) -> tuple[LoadPoint, ...]:
    return tuple(
        replace(point, cases=(("D", values[k]),)) if k in values else point
        for k, point in enumerate(points, start=1)
    )


BEFORE = layout(crossing())
HEAVY = layout(crossing(loads(15.0)))


def test_the_two_questions_have_two_answers() -> None:
    # OWN: formed anew with the sag held nothing moves but the pull; held at its pull the middle
    # would go down 6.00 ft; kept at its cut length it goes down 0.424 ft.
    records = issued(BEFORE)
    anew = answer(HEAVY, records, RULE).solution
    assert anew.cables[0].horizontal == pytest.approx(187.50, abs=LAST * 1e-2)
    assert anew.cables[0].max_tension == pytest.approx(199.28, abs=LAST * 1e-2)
    assert anew.revised[0].movement[MIDDLE].dy == pytest.approx(0.0, abs=1e-9)
    assert anew.cables[0].status == "formed"
    cut = answer(HEAVY, records, CUT_LENGTH).solution
    assert cut.cables[0].horizontal == pytest.approx(180.955, abs=LAST * 1e-3)
    assert cut.cables[0].max_tension == pytest.approx(193.135, abs=LAST * 1e-3)
    assert cut.revised[0].movement[MIDDLE].dy == pytest.approx(-0.42395, abs=LAST * 1e-5)
    assert cut.cables[0].status == CUT


def test_a_pull_that_is_held_lets_the_middle_down_by_half() -> None:
    # OWN: all loads from 10 to 15 at 125 kip: the middle goes from 12 to 18 ft.
    pulled = replace(crossing(), rule=Rule(kind=RuleKind.PULL, value=125.0))
    heavy = replace(crossing(loads(15.0)), rule=Rule(kind=RuleKind.PULL, value=125.0))
    found = answer(layout(heavy), issued(layout(pulled)), RULE).solution
    assert found.revised[0].movement[MIDDLE].dy == pytest.approx(-6.0)
    assert found.cables[0].max_tension == pytest.approx(142.06, abs=LAST * 1e-2)


def test_one_load_more_lifts_the_far_side() -> None:
    # OWN: node 3 from 10 to 20.
    drawn = layout(crossing(changed(loads(), {3: 20.0})))
    moved = answer(drawn, issued(BEFORE), CUT_LENGTH).solution.revised[0].movement
    assert moved[3].dy == pytest.approx(-0.692, abs=LAST * 1e-3)
    assert moved[7].dy == pytest.approx(0.300, abs=LAST * 1e-3)
    assert moved[5].dx == pytest.approx(-0.105, abs=LAST * 1e-3)
    assert (moved[3].load_before, moved[3].load_after) == (10.0, 20.0)
    assert moved[3].tension_after > moved[3].tension_before


def test_stays_that_stretch_are_part_of_what_moves() -> None:
    # OWN: 0.75 ft instead of 0.42 ft.
    records = issued(layout(crossing(), is_stayed=True))
    found = answer(layout(crossing(loads(15.0)), is_stayed=True), records, CUT_LENGTH).solution
    assert found.revised[0].movement[MIDDLE].dy == pytest.approx(-0.7475, abs=LAST * 1e-4)
    assert found.cables[0].horizontal == pytest.approx(175.955, abs=LAST * 1e-3)
    assert found.revised[0].movement[0].dx > 0.0


def test_a_change_of_temperature_moves_a_cut_cable() -> None:
    # OWN: +60 F at 6.5e-6 per F, 0.0872 ft down, 124.077 kip.
    steel = layout(crossing(alpha=6.5e-6 * 1.8))
    warm = Revision(hold=HOLD_CUT, delta_t=60.0 / 1.8)
    found = answer(steel, issued(steel), warm)
    assert found.solution.revised[0].movement[MIDDLE].dy == pytest.approx(-0.0872, abs=6e-5)
    assert found.solution.cables[0].horizontal == pytest.approx(124.077, abs=LAST * 1e-3)
    assert kept(found, warm)["C1"].delta_t == pytest.approx(33.333, abs=1e-3)


def test_the_sum_since_forming_stands_beside_the_last_movement() -> None:
    first = answer(HEAVY, issued(BEFORE), CUT_LENGTH)
    second = answer(layout(crossing(loads(20.0))), kept(first, CUT_LENGTH), CUT_LENGTH)
    once = first.solution.revised[0].movement[MIDDLE]
    twice = second.solution.revised[0].movement[MIDDLE]
    assert twice.sum_dy == pytest.approx(once.dy + twice.dy, abs=1e-9)
    assert second.solution.revised[0].before.horizontal == pytest.approx(180.955, abs=1e-3)


@settings(max_examples=25, deadline=None)
@given(
    first=st.lists(st.floats(2.0, 30.0), min_size=9, max_size=9),
    second=st.lists(st.floats(2.0, 30.0), min_size=9, max_size=9),
    how=st.sampled_from([CUT_LENGTH, RULE]),
    is_stayed=st.booleans(),
)
def test_revising_twice_is_revising_once_with_the_second_loads(
    first: list[float], second: list[float], how: Revision, *, is_stayed: bool
) -> None:
    records = issued(layout(crossing(), is_stayed=is_stayed))

    def drawn(values: list[float]) -> Layout:
        points = changed(loads(), dict(enumerate(values, start=1)))
        return layout(crossing(points), is_stayed=is_stayed)

    between = kept(answer(drawn(first), records, how), how)
    twice = answer(drawn(second), between, how)
    once = answer(drawn(second), records, how)
    assert twice.solution.cables == once.solution.cables
    assert without_rows(kept(twice, how)) == without_rows(kept(once, how))


def test_the_same_loads_again_add_no_row() -> None:
    how = replace(CUT_LENGTH, rev="A", description="new deck", by="NN", date="2026-01-02")
    first = answer(HEAVY, issued(BEFORE), how)
    row = first.solution.revisions[0].rows[0]
    assert (row.number, row.rev, row.description) == (1, "A", "new deck")
    assert [change.mark for change in first.solution.revisions[0].changes][:2] == ["P1", "P2"]
    again = answer(HEAVY, kept(first, how), how)
    assert again.solution.revisions == first.solution.revisions
    third = answer(layout(crossing(loads(16.0))), kept(again, how), CUT_LENGTH)
    assert [r.number for r in third.solution.revisions[0].rows] == [1, 2]


def test_only_what_moved_more_than_the_office_marks_is_marked() -> None:
    office = replace(OFFICE, limits=replace(OFFICE.limits, movement=0.35))
    drawn = layout(crossing(changed(loads(), {3: 20.0})))
    records = issued(BEFORE)
    found = revise(with_new_loads(drawn, records), records, CUT_LENGTH, office, ())
    marks = {change.mark for change in found.solution.revisions[0].changes}
    assert "P3" in marks
    assert "P9" not in marks


def test_a_cut_cable_without_a_stiffness_runs_as_inextensible_and_it_must_be_seen() -> None:
    bare = layout(crossing(ea=None))
    found = answer(layout(crossing(loads(15.0), ea=None)), issued(bare), CUT_LENGTH)
    assert any(
        f.code == "cut-inextensible" and f.severity is Severity.WARNING
        for f in found.solution.findings
    )
    # Loads in proportion do not move an inextensible cable.
    assert found.solution.revised[0].movement[MIDDLE].dy == pytest.approx(0.0, abs=1e-9)


def test_a_value_from_a_load_table_stays_while_its_text_is_not_edited() -> None:
    from_table = tuple(
        replace(point, cases=(("D", 15.0),), source="csv", drawn_cases=point.cases)
        for point in loads()
    )
    records = issued(layout(crossing(from_table)))
    merged = with_new_loads(BEFORE, records).cables[0].loads
    assert [load.cases for load in merged] == [(("D", 15.0),)] * 9
    edited = with_new_loads(layout(crossing(changed(loads(), {2: 11.0}))), records).cables[0]
    assert edited.loads[1].cases == (("D", 11.0),)
    assert edited.loads[2].cases == (("D", 15.0),)


def test_supports_that_were_moved_are_solved_as_moved() -> None:
    down = crossing(
        supports=(
            replace(crossing().supports[0], y=-0.5),
            crossing().supports[1],
        )
    )
    found = answer(layout(down), issued(BEFORE), CUT_LENGTH).solution
    assert found.revised[0].movement[0].dy == pytest.approx(-0.5)
    assert found.cables[0].nodes[0].y == -0.5
    assert found.revisions[0].rows


def test_a_load_point_drawn_elsewhere_stops_unless_its_clamp_is_moved() -> None:
    points = list(loads())
    points[4] = replace(points[4], x=61.5)
    drawn = layout(crossing(tuple(points)))
    records = issued(BEFORE)
    with pytest.raises(LayoutError) as refused:
        answer(drawn, records, CUT_LENGTH)
    assert "clamp-moved" in {f.code for f in refused.value.findings if isinstance(f, Finding)}
    moved = answer(drawn, records, replace(CUT_LENGTH, move_clamps=True)).solution.cables[0]
    whole = sum(records["C1"].pieces)
    assert sum(s.unstressed_length for s in moved.segments) == pytest.approx(whole, rel=1e-12)
    # Clamped where the standing cable passes x 61.5, the point goes on a little under its load.
    assert moved.nodes[5].x == pytest.approx(61.5, abs=0.2)


def test_a_cable_that_was_never_solved_cannot_be_revised() -> None:
    with pytest.raises(LayoutError) as refused:
        answer(BEFORE, {}, CUT_LENGTH)
    assert "no-record" in {f.code for f in refused.value.findings if isinstance(f, Finding)}


def cut_records() -> dict[str, CableRecord]:
    return issued(BEFORE, Forming(cut=True))


def test_a_cut_cable_stands_as_recorded_when_it_is_solved_again() -> None:
    records = cut_records()
    assert records["C1"].status == CUT
    held = with_cut_cables(BEFORE, records, OFFICE, is_reformed=False)
    formed = solve(held.layout, Forming(), OFFICE, held.standing).cables[0]
    assert formed.status == CUT
    assert formed.horizontal == pytest.approx(125.0)
    assert [s.unstressed_length for s in formed.segments] == list(records["C1"].pieces)


def test_new_loads_on_a_cut_cable_must_be_seen_and_do_not_count_in_a_plain_solve() -> None:
    held = with_cut_cables(HEAVY, cut_records(), OFFICE, is_reformed=False)
    warning = [f for f in held.layout.findings if f.code == "cut-loads-changed"]
    assert warning[0].severity is Severity.WARNING
    assert "revise" in warning[0].remedy
    formed = solve(held.layout, Forming(), OFFICE, held.standing).cables[0]
    assert formed.horizontal == pytest.approx(125.0)
    # The edit is still an edit afterwards.
    record = record_of(held.layout, held.layout.cables[0], formed, before=cut_records()["C1"])
    merged = with_new_loads(HEAVY, {"C1": record})
    assert merged.cables[0].loads[0].cases == (("D", 15.0),)


def test_reforming_says_which_cable_it_discards() -> None:
    held = with_cut_cables(HEAVY, cut_records(), OFFICE, is_reformed=True)
    assert any(f.code == "cut-discarded" and f.cable == "C1" for f in held.layout.findings)
    assert held.standing == {}


def test_a_hanger_leans_with_its_clamp_and_tells_what_would_hold_the_deck() -> None:
    deck = ((0.0, -30.0), (120.0, -30.0))
    before = layout(crossing(deck=deck))
    drawn = layout(crossing(changed(loads(), {3: 20.0}), deck=deck))
    moved = answer(drawn, issued(before), CUT_LENGTH).solution.revised[0].movement
    third = moved[3]
    assert third.hanger_change == pytest.approx(third.dy, abs=1e-3)
    assert third.lean_deg is not None
    assert 0.0 < third.lean_deg < 2.0
    assert moved[0].lean_deg is None


def codes_of(found: Answer) -> dict[str, Severity]:
    return {f.code: f.severity for f in found.solution.findings}


def test_a_record_in_another_unit_of_force_is_converted_once() -> None:
    in_pounds = replace(
        layout(
            crossing(tuple(replace(p, cases=(("D", 10_000.0),)) for p in loads()), ea=EA * 1000.0)
        ),
        force_unit="lb",
    )
    records, notes = in_units_of(in_pounds, issued(BEFORE))
    assert [note.code for note in notes] == ["record-converted"]
    found = answer(in_pounds, records, CUT_LENGTH).solution
    assert found.cables[0].horizontal == pytest.approx(125_000.0)
    assert all(m.dy == pytest.approx(0.0, abs=1e-8) for m in found.revised[0].movement)


def test_a_record_in_another_unit_of_length_stops() -> None:
    metres = replace(BEFORE, length_unit="m")
    with pytest.raises(LayoutError, match="was solved in ft"):
        in_units_of(metres, issued(BEFORE))


def test_points_are_known_again_by_where_they_stand_when_marks_were_counted_anew() -> None:
    # A point added at the left shifts the marks that were given by position.
    before = [("P1", 8.0), ("P2", 16.0), ("P3", 24.0)]
    assert partners([("P1", 4.0), ("P2", 8.0), ("P3", 16.0), ("P4", 24.0)], before) == [
        None,
        0,
        1,
        2,
    ]
    assert partners([("P1", 16.0), ("P2", 24.0)], before) == [1, 2]
    assert partners([("P1", 8.0), ("P2", 17.0), ("P3", 24.0)], before) == [0, 1, 2]
    assert partners([("B", 8.0), ("A", 30.0)], [("A", 8.0), ("B", 20.0)]) == [0, 1]


def test_what_stands_after_a_change_is_looked_at_too() -> None:
    up = answer(layout(crossing(loads(-10.0))), issued(BEFORE), CUT_LENGTH)
    assert codes_of(up)["slack-hanger"] is Severity.WARNING
    assert codes_of(up)["above-string"] is Severity.NOTE
    light = answer(layout(crossing(loads(0.1))), issued(BEFORE), CUT_LENGTH)
    assert codes_of(light)["slack-cable"] is Severity.WARNING


def test_a_stiffness_that_comes_after_the_cut_is_not_used() -> None:
    bare = issued(layout(crossing(ea=None)), Forming(cut=True))
    held = with_cut_cables(BEFORE, bare, OFFICE, is_reformed=False)
    solution = solve(held.layout, Forming(), OFFICE, held.standing)
    assert solution.cables[0].ea is None
    assert solution.cables[0].horizontal == pytest.approx(125.0)
    warned = {f.code for f in solution.findings if f.severity is Severity.WARNING}
    assert "cut-ea-added" in warned


def test_stays_that_were_rigid_when_the_cable_was_cut_stay_so() -> None:
    stayed = layout(crossing(), is_stayed=True)
    rigid = replace(stayed, stays=tuple(replace(s, anchor=None) for s in stayed.stays))
    heavy = layout(crossing(loads(15.0)), is_stayed=True)
    found = answer(heavy, issued(rigid), CUT_LENGTH).solution
    assert found.cables[0].supports_rigid
    assert found.cables[0].horizontal == pytest.approx(180.955, abs=1e-3)
    assert sum(f.code == "supports-rigid" for f in found.findings) >= 2


def test_a_stay_made_stiffer_since_is_used_and_told() -> None:
    stayed = layout(crossing(), is_stayed=True)
    anchors = [replace(s, anchor=replace(s.anchor, ea=2 * EA)) for s in stayed.stays if s.anchor]
    found = answer(replace(stayed, stays=tuple(anchors)), issued(stayed), CUT_LENGTH)
    assert "stay-changed" in codes_of(found)


def test_rules_and_combinations_that_do_not_govern_a_cut_cable_are_told() -> None:
    records = issued(BEFORE, Forming(cut=True))
    other = layout(crossing(rule=Rule(kind=RuleKind.SAG, value=13.0, text="SAG 13"), under="1.0D"))
    held = with_cut_cables(other, records, OFFICE, is_reformed=False)
    asked = Forming(rule=Rule(kind=RuleKind.PULL, value=99.0), under="D")
    solution = solve(held.layout, asked, OFFICE, held.standing)
    assert solution.cables[0].horizontal == pytest.approx(125.0)
    told = [f.code for f in solution.findings]
    assert told.count("rule-unused") == 2
    assert told.count("under-unused") == 2


def test_a_recorded_combination_that_no_longer_fits_does_not_stop_a_revision() -> None:
    both = layout(crossing(loads(10.0, 5.0)))
    records = issued(both, Forming(combos=("D + L", "1.2D")))
    found = answer(BEFORE, records, CUT_LENGTH)
    assert codes_of(found)["combination"] is Severity.NOTE
    assert [state.combo for state in found.solution.cables[0].states] == ["1.2D"]


def test_hangers_of_a_cut_cable_keep_their_lengths() -> None:
    deck = ((0.0, -30.0), (120.0, -30.0))
    records = issued(layout(crossing(deck=deck)))
    found = answer(layout(crossing(loads(15.0), deck=deck)), records, CUT_LENGTH).solution
    for node, moved in zip(found.cables[0].nodes, found.revised[0].movement, strict=True):
        if node.hanger is not None and node.hanger_foot is not None:
            assert node.hanger == pytest.approx(node.y - moved.dy + 30.0)
            assert node.hanger_foot == pytest.approx(-30.0 + moved.dy)
