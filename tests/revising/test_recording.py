"""What is kept of a cable follows from what was drawn, and for a cut one from what was kept."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.loads.load_table import apply, read
from dxfcable.model import Layout, LoadPoint, LoadSymbol, Origin, Rule, RuleKind
from dxfcable.revising.recording import record_of
from dxfcable.settings import Settings
from dxfcable.solving.solve import Forming, solve
from tests.layouts import load, sample

if TYPE_CHECKING:
    from dxfcable.recorded import CableRecord


def recorded(
    layout: Layout, *, status: str = "formed", before: CableRecord | None = None
) -> CableRecord:
    """Solve a layout of one cable and make its record."""
    (formed,) = solve(layout, Forming(), Settings()).cables
    return record_of(layout, layout.cables[0], replace(formed, status=status), before=before)


def test_a_formed_cable_is_kept_as_it_is_drawn() -> None:
    layout = sample(datum=100.0, alpha=12e-6)
    kept = recorded(layout)
    assert (kept.mark, kept.status, kept.length_unit, kept.force_unit) == (
        "C1",
        "formed",
        "m",
        "kN",
    )
    assert (kept.datum, kept.alpha, kept.ea, kept.under) == (100.0, 12e-6, 9000.0, "D")
    assert kept.level is None  # nobody stated it
    assert [(s.mark, s.x, s.y, s.formed) for s in kept.supports] == [
        ("S1", 0.0, 12.0, (0.0, 12.0)),
        ("S2", 24.0, 13.0, (24.0, 13.0)),
    ]
    for point in kept.loads:
        assert point.cases == point.drawn == point.formed
    (formed,) = solve(layout, Forming(), Settings()).cables
    assert kept.pieces == tuple(piece.unstressed_length for piece in formed.segments)


def test_where_a_rule_came_from_in_the_file_is_not_kept() -> None:
    origin = Origin(handle="A1", line=10)
    kept = recorded(sample(rule=Rule(kind=RuleKind.SAG, value=2.4, text="2.4 m", origin=origin)))
    assert kept.rule == Rule(kind=RuleKind.SAG, value=2.4, text="2.4 m")


def test_what_the_data_block_stated_is_kept_beside_what_was_used() -> None:
    layout = sample()
    (formed,) = solve(layout, Forming(under="D"), Settings()).cables
    stated = Rule(kind=RuleKind.PULL, value=55.0, text="PULL 55 kN", origin=Origin(handle="A1"))
    block = replace(layout.cables[0], rule=stated, under="D + L")
    kept = record_of(layout, layout.cables[0], formed, drawn=block)
    assert kept.stated_rule == replace(stated, origin=Origin())
    assert (kept.stated_under, kept.under) == ("D + L", "D")
    assert recorded(layout).stated_rule is None


def test_a_load_table_is_kept_beside_what_the_drawing_says() -> None:
    layout = sample()
    text = "mark,D (kN)\nP2,30\n"
    filled = apply(layout, read(text, layout, Settings()))
    first, second = recorded(filled).loads
    assert (first.source, first.cases, first.drawn) == ("drawing", (("D", 15.0),), (("D", 15.0),))
    assert (second.source, second.cases, second.drawn) == ("csv", (("D", 30.0),), (("D", 21.0),))
    assert second.formed == second.cases


def test_a_second_load_table_leaves_what_the_drawing_says() -> None:
    layout = sample()
    for value in ("30", "33"):
        layout = apply(layout, read(f"mark,D (kN)\nP2,{value}\n", layout, Settings()))
    point = layout.cables[0].loads[1]
    assert (point.cases, point.drawn_cases) == ((("D", 33.0),), (("D", 21.0),))


def test_a_load_table_that_agrees_with_the_drawing_overrules_nothing() -> None:
    layout = sample()
    filled = apply(layout, read("mark,D (kN)\nP2,21\n", layout, Settings()))
    assert filled.cables[0].loads[1].drawn_cases is None


def test_a_cut_cable_remembers_where_and_under_what_it_was_formed() -> None:
    before = recorded(sample())
    moved = (replace(sample().supports[0], y=12.5), sample().supports[1])
    layout = sample(
        supports=moved, loads=(load("P1", 8.0, 18.0, y=7.586), load("P2", 16.0, 21.0, y=7.0))
    )
    kept = recorded(layout, status="cut", before=before)
    assert (kept.supports[0].y, kept.supports[0].formed) == (12.5, (0.0, 12.0))
    assert (kept.loads[0].cases, kept.loads[0].formed) == ((("D", 18.0),), (("D", 15.0),))
    formed_anew = recorded(layout, before=before)
    assert formed_anew.supports[0].formed == (0.0, 12.5)
    assert formed_anew.loads[0].formed == (("D", 18.0),)


def test_a_value_taken_from_the_record_keeps_its_first_source() -> None:
    layout = sample()
    filled = apply(layout, read("mark,D (kN)\nP2,30\n", layout, Settings()))
    before = recorded(filled)
    loads = tuple(replace(point, source="record") for point in filled.cables[0].loads)
    kept = recorded(sample(loads=loads), before=before)
    assert [point.source for point in kept.loads] == ["drawing", "csv"]
    assert kept.loads[1].drawn == (("D", 21.0),)


def test_a_load_point_that_was_not_there_is_formed_under_what_it_carries_now() -> None:
    before = recorded(sample())
    loads = (load("P1", 8.0, 15.0), load("P9", 12.0, 4.0), load("P2", 16.0, 22.0))
    kept = recorded(sample(loads=loads), status="cut", before=before)
    assert [point.formed for point in kept.loads] == [
        (("D", 15.0),),
        (("D", 4.0),),
        (("D", 21.0),),
    ]


def test_points_of_one_mark_keep_their_order() -> None:
    loads = (load("P", 8.0, 15.0), load("P", 16.0, 21.0))
    before = recorded(sample(loads=loads))
    heavier = (load("P", 8.0, 16.0), load("P", 16.0, 22.0))
    kept = recorded(sample(loads=heavier), status="cut", before=before)
    assert [point.formed for point in kept.loads] == [(("D", 15.0),), (("D", 21.0),)]


def test_a_load_at_a_support_is_kept_with_its_support() -> None:
    at_support = LoadPoint(mark="P0", x=0.0, y=12.0, cases=(("D", 7.0),), symbol=LoadSymbol.POINT)
    kept = recorded(sample(support_loads=((0, at_support),)))
    ((mark, point),) = kept.support_loads
    assert (mark, point.mark, point.formed) == ("S1", "P0", (("D", 7.0),))
