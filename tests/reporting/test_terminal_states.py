"""States, envelope, clearance and load changes at the terminal."""

from __future__ import annotations

import io
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest

from dxfcable.job import CAUTION, Outcome
from dxfcable.model import Movement, Revised
from dxfcable.reporting import terminal
from dxfcable.reporting.plain_output import PlainConsole
from dxfcable.reporting.terminal_states import show_changes, show_states
from tests.drawing.painter_cases import Case, even, layout_of
from tests.drawing.stated import Asked, with_clearance, with_states

if TYPE_CHECKING:
    from dxfcable.model import FormedCable, Layout, Solution

CASE = Case(spans=(even(3, 40.0),), mast=8.0, stay_run=9.0, deck=0.0)
LIVE = Asked(combo="D + L", factor=2.0)
STRONG = Asked(combo="1.2D + 1.6L [left half]", factor=2.8, level="factored", is_assumed=False)
INEXTENSIBLE = "(cut, inextensible)"


def lines_of(layout: Layout, formed: FormedCable) -> list[str]:
    stream = io.StringIO()
    show_states(PlainConsole(stream), formed, layout)
    return stream.getvalue().splitlines()


def states(*asked: Asked) -> list[str]:
    layout, solution = with_states(layout_of(CASE), *asked)
    return lines_of(layout, solution.cables[0])


def cells(lines: list[str], start: str) -> list[str]:
    """Give the cells of the first row that begins so."""
    found = next(line for line in lines if line.strip().startswith(start))
    return [cell.strip() for cell in found.strip().split("   ") if cell.strip()]


def test_each_state_has_its_level_pull_largest_tension_and_low_point() -> None:
    formed = layout_of(CASE)[1].cables[0]
    found = states(LIVE, STRONG)
    low = min(node.elevation for node in formed.nodes)
    assert cells(found, "D + L") == [
        "D + L",
        "service, assumed",
        f"{2.0 * (formed.horizontal or 0.0):.1f} kN",
        f"{2.0 * formed.max_tension:.1f} kN",
        formed.governs.segment,
        f"EL {low:.3f}",
    ]
    assert cells(found, "1.2D + 1.6L [left half]")[1] == "factored"
    assert cells(found, "D, as drawn")[2] == f"{formed.horizontal or 0.0:.2f} kN"


def test_masts_stays_and_uplift_are_listed_state_by_state() -> None:
    joint = layout_of(CASE)[1].anchorages[0]
    found = states(LIVE)
    head = next(k for k, line in enumerate(found) if line.split()[:3] == ["state", "level", "at"])
    assert cells(found[head:], "D + L")[2:] == [
        "S1",
        f"{2.0 * (joint.mast or 0.0):.1f} kN",
        f"{2.0 * joint.stays[0]:.1f} kN",
        f"{2.0 * joint.anchors[0].uplift:.1f} kN",
    ]


def test_the_envelope_names_combination_and_level() -> None:
    formed = layout_of(CASE)[1].cables[0]
    found = states(LIVE, STRONG)
    assert cells(found, "largest tension")[1:] == [
        f"{2.8 * formed.max_tension:.1f} kN",
        "1.2D + 1.6L [left half], factored",
    ]
    assert cells(found, "least tension")[-1] == "D, service"
    assert "envelope, service level" in states(LIVE)
    assert cells(states(LIVE), "largest tension")[-1] == "D + L"


def test_slack_hangers_and_states_without_a_shape_are_named() -> None:
    found = states(
        Asked(combo="D + W", factor=0.4, slack=("P2", "P3")),
        Asked(combo="0.9D - W", factor=1.0, fault="all loads point up"),
    )
    assert "slack under D + W: hangers P2, P3" in found
    assert "no shape under 0.9D - W: all loads point up" in found
    assert cells(found, "0.9D - W")[2:] == ["no shape"]


def test_long_combinations_are_numbered_so_that_no_number_is_cut_off() -> None:
    long = "1.2D + 1.6L + 0.5S + 0.5W + 1.0T [every second panel]"
    found = states(Asked(combo=long, factor=1.5))
    assert f"state 2: {long}" in found
    assert "state 1: D" in found
    assert cells(found, "state 2   ")[0] == "state 2"
    assert max(map(len, found)) <= 110
    assert "\u2026" not in "".join(found)


@pytest.mark.parametrize("least", [1.2, -0.35])
def test_the_clearance_says_where_and_under_what(least: float) -> None:
    layout, solution = with_clearance(with_states(layout_of(CASE), LIVE), 21.0, 4.0, least, "D + L")
    last = lines_of(layout, solution.cables[0])[-1]
    assert last.startswith(f"least clearance {least:.3f} m")
    assert "at x 21, under D + L (service)" in last
    assert ("under the line" in last) is (least < 0.0)


def moved(mark: str, dy: float, *, is_support: bool = False) -> Movement:
    return Movement(
        mark=mark,
        is_support=is_support,
        at=(0.0, 0.0),
        dx=0.01,
        dy=dy,
        sum_dx=0.02,
        sum_dy=2.0 * dy,
        load_before=15.0,
        load_after=22.5,
        elevation_before=10.0,
        elevation_after=10.0 + dy,
        tension_before=100.0,
        tension_after=150.0,
        lean_deg=None if is_support else 0.4,
        hanger_change=None if is_support else dy,
    )


def revised(held: str = "cut-length") -> tuple[Layout, Solution]:
    layout, solution = layout_of(CASE)
    before = solution.cables[0]
    after = replace(before, status="cut", horizontal=150.0)
    change = Revised(
        cable="C1",
        held=held,
        before=before,
        movement=(moved("S1", 0.0, is_support=True), moved("P1", -0.123)),
    )
    return layout, replace(solution, cables=(after,), revised=(change,))


def test_a_load_change_is_told_before_and_after_and_point_by_point() -> None:
    layout, solution = revised()
    stream = io.StringIO()
    show_changes(PlainConsole(stream), solution, layout)
    found = stream.getvalue().splitlines()
    before = solution.revised[0].before
    assert "Cable C1 revised, its cut length held" in found
    assert cells(found, "pull H")[1:] == [f"{before.horizontal or 0.0:.2f} kN", "150.0 kN"]
    tables = [cells(found[k:], "P1") for k, line in enumerate(found) if line.startswith(" P1 ")]
    assert tables == [
        ["P1", "15.00 kN", "22.50 kN", "+0.010 m", "-0.123 m", "+0.020 m", "-0.246 m"],
        ["P1", "EL 10.000", "EL 9.877", "100.0 kN", "150.0 kN"],
        ["P1", "0.40 deg", "-0.123 m"],
    ]


def test_what_was_held_is_said() -> None:
    layout, solution = revised("rule")
    stream = io.StringIO()
    show_changes(PlainConsole(stream), solution, layout)
    assert "Cable C1 revised, its rule held" in stream.getvalue()


def test_the_caution_ends_a_revision() -> None:
    layout, solution = revised()
    stream = io.StringIO()
    outcome = Outcome(findings=(), layout=layout, solution=solution)
    terminal.show_revised(PlainConsole(stream), outcome)
    said = " ".join(stream.getvalue().split())
    assert said.endswith(CAUTION)
    assert said.index("revised, its cut length held") < said.index("formed by SAG")


@pytest.mark.parametrize(("ea", "status"), [(None, "cut"), (9000.0, "cut"), (None, "formed")])
def test_a_cut_cable_without_ea_is_called_inextensible_over_each_table(
    ea: float | None, status: str
) -> None:
    layout, solution = with_states(revised(), LIVE)
    after = replace(solution.cables[0], ea=ea, status=status)
    stream = io.StringIO()
    outcome = Outcome(findings=(), layout=layout, solution=replace(solution, cables=(after,)))
    terminal.show_revised(PlainConsole(stream), outcome)
    heads = [line for line in stream.getvalue().splitlines() if INEXTENSIBLE in line]
    if status == "cut" and ea is None:
        # Revised, movement, the cable as it stands, states, members, envelope.
        assert len(heads) == 6
    else:
        assert heads == []
