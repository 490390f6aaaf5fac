"""The checker's page redoes the figures by hand; the notes are those that apply."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.model import Rule, RuleKind, Support
from dxfcable.settings import Settings, Show
from dxfcable.sheets.sheet_check import check_tables, fingerprint, source_words
from dxfcable.sheets.sheet_notes import sheet_notes
from dxfcable.solving.governing import Forming
from dxfcable.solving.solve import solve
from tests.layouts import cable, layout, load, sample

if TYPE_CHECKING:
    from dxfcable.drawing.sheets import Table
    from dxfcable.model import Layout, Solution

SETTINGS = Settings()


def solved(drawn: Layout) -> Solution:
    return solve(drawn, Forming(), SETTINGS)


def by_hand(drawn: Layout) -> dict[str, tuple[str, ...]]:
    """Give the rows of the first table by their names."""
    table = check_tables(drawn, solved(drawn), 0)[0]
    return {row[0]: row[1:] for row in table.rows}


def test_a_known_cable_gives_the_numbers_that_a_checker_finds() -> None:
    # OWN: level supports 120 apart, nine loads of 10 at 12, sag 12: by hand M = 1500 in the
    # middle, H = 1500 / 12 = 125, V = 45, T = root(125^2 + 45^2) = 132.853.
    drawn = layout(
        cable(
            supports=(
                Support(key=0, mark="S1", x=0.0, y=0.0),
                Support(key=1, mark="S2", x=120.0, y=0.0),
            ),
            loads=tuple(load(f"P{k}", 12.0 * k, 10.0, y=-20.0) for k in range(1, 10)),
            rule=Rule(kind=RuleKind.SAG, value=12.0),
        )
    )
    rows = by_hand(drawn)
    assert rows["SUM OF LOADS"][:2] == ("90.0000 kN", "90.0000 kN")
    assert rows["BEAM MOMENT"][0] == "1500.00 kN m"
    assert rows["PULL H"][:2] == ("125.000 kN", "125.000 kN")
    assert rows["V AT S1"][:2] == ("45.0000 kN", "45.0000 kN")
    assert rows["T AT S1"][:2] == ("132.853 kN", "132.853 kN")


@settings(max_examples=40)
@given(
    st.lists(st.floats(1.0, 50.0), min_size=1, max_size=8),
    st.floats(-3.0, 3.0),
    st.floats(1.0, 4.0),
)
def test_figures_by_hand_agree_with_the_results_of_any_weightless_cable(
    loads: list[float], rise: float, sag: float
) -> None:
    step = 24.0 / (len(loads) + 1)
    drawn = layout(
        cable(
            supports=(
                Support(key=0, mark="S1", x=0.0, y=12.0),
                Support(key=1, mark="S2", x=24.0, y=12.0 + rise),
            ),
            loads=tuple(load(f"P{k}", k * step, p, y=5.0) for k, p in enumerate(loads, start=1)),
            rule=Rule(kind=RuleKind.SAG, value=sag),
        )
    )
    for name, row in by_hand(drawn).items():
        if row[2]:
            assert row[2] == "< 1e-12" or float(row[2]) < 1e-9, name


def test_weight_is_part_of_the_sum_and_the_pull_is_near() -> None:
    drawn = layout(cable(weight=0.05, weight_case="D"))
    rows = by_hand(drawn)
    assert "weight at middles" in rows["SUM OF LOADS"][3]
    assert rows["SUM OF V"][2] == "< 1e-12" or float(rows["SUM OF V"][2]) < 1e-9
    assert float(rows["PULL H"][2]) < 1e-2  # pieces are curves: their weight is not at middles


def test_inputs_are_told_with_the_handles_they_came_from() -> None:
    drawn = sample()
    tables = {t.title.partition(",")[0]: t for t in check_tables(drawn, solved(drawn), 0)}
    rows = tables["INPUTS"].rows
    ea = next(row for row in rows if row[0] == "EA")
    assert ea[1:3] == ("9000.00 kN", "INSERT A1")
    assert rows[-1][0] == "FINGERPRINT OF INPUTS"
    assert tables["LOADS AS READ"].rows[0][0] == "P1"
    assert source_words(drawn.cables[0].origin) == "INSERT A1"


def test_combinations_are_listed_with_their_levels() -> None:
    drawn = sample()
    solution = solve(drawn, Forming(combos=("1.2D",)), SETTINGS)
    table: Table = check_tables(drawn, solution, 0)[-1]
    assert [row[0] for row in table.rows] == ["D", "1.2D"]
    assert table.rows[1][1].startswith("factored")


def test_the_fingerprint_changes_with_an_input_and_with_nothing_else() -> None:
    drawn = sample()
    formed = solved(drawn).cables[0]
    same = replace(drawn, findings=(), text_height=0.5)
    assert fingerprint(same, formed, 0) == fingerprint(drawn, formed, 0)
    heavier = sample(loads=(load("P1", 8.0, 15.5, y=7.586), load("P2", 16.0, 21.0, y=7.0)))
    assert fingerprint(heavier, formed, 0) != fingerprint(drawn, formed, 0)


@pytest.mark.parametrize(
    ("changes", "word", "is_there"),
    [
        ({"ea": None}, "inextensible", True),
        ({}, "inextensible", False),
        ({"weight": 0.05, "weight_case": "D"}, "Weight of the cable is not included", False),
        ({}, "Weight of the cable is not included", True),
        ({"datum": 0.0}, "no datum is given", False),
        ({}, "no datum is given", True),
    ],
)
def test_only_notes_that_apply_are_given(
    changes: dict[str, object], word: str, is_there: bool
) -> None:
    drawn = sample(**changes)
    notes = " ".join(sheet_notes(drawn, solved(drawn), SETTINGS)[0])
    assert (word in notes) is is_there


def test_the_reference_temperature_and_the_masts_are_noted() -> None:
    drawn = sample()
    settings = Settings(show=Show(reference_temperature="10 C"))
    notes = sheet_notes(drawn, solved(drawn), settings)[0]
    assert any("at 10 C" in note for note in notes)
    assert any("Hold masts" in note for note in notes)
    bare = layout(cable())
    assert not any("masts" in note for note in sheet_notes(bare, solved(bare), settings)[0])
