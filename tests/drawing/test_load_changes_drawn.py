"""What is said and drawn of a cable that is cut, of heads that moved, of anchors and hangers.

Scenarios are invented; shapes are formed in `painter_cases` by the general cable theorem.
"""

from __future__ import annotations

import io
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.items import LineItem, Painting, TextItem, TriangleItem
from dxfcable.drawing.painter import paint
from dxfcable.drawing.painting.naming import anchor_names
from dxfcable.job import Outcome
from dxfcable.model import Rule, RuleKind
from dxfcable.reporting import terminal
from dxfcable.reporting.plain_output import PlainConsole
from dxfcable.settings import Settings
from dxfcable.verifying.scale_laws import combination_in
from tests.drawing.covering import struck_texts
from tests.drawing.painter_cases import Case, even, layout_of, obstacles_of
from tests.drawing.stated import Asked, with_states

if TYPE_CHECKING:
    from collections.abc import Callable

    from dxfcable.model import Anchorage, FormedCable, Layout, Solution

    Drawn = tuple[Layout, Solution]

CASE = Case(spans=(even(3, 40.0),), mast=8.0, stay_run=9.0, deck=0.0)
SAG = Rule(kind=RuleKind.SAG, value=3.0, text="3")


def painted(drawn: Drawn, obstacles: Obstacles | None = None) -> Painting:
    layout, solution = drawn
    return paint(
        layout,
        solution,
        obstacles=obstacles or obstacles_of(layout),
        settings=Settings(),
        plot_scale="1:100",
        held_places={},
    )


def texts(painting: Painting) -> dict[str, str]:
    return {item.id: item.text for item in painting.items if isinstance(item, TextItem)}


def with_cable(drawn: Drawn, change: Callable[[FormedCable], FormedCable]) -> Drawn:
    layout, solution = drawn
    return layout, replace(solution, cables=tuple(change(c) for c in solution.cables))


def cut(drawn: Drawn, delta_t: float = 0.0) -> Drawn:
    return with_cable(
        drawn,
        lambda c: replace(c, status="cut", rule=SAG, ea=20_000.0, delta_t=delta_t, sag=2.952),
    )


def summary(drawn: Drawn) -> list[tuple[str, str]]:
    """Give names and values of the schedule's summary in order."""
    found = texts(painted(drawn))
    rows = [name for name in found if "/schedule/summary/" in name and name.endswith("/name")]
    return [(found[name], found[name.removesuffix("name") + "value"]) for name in rows]


def said(drawn: Drawn) -> str:
    layout, solution = drawn
    stream = io.StringIO()
    terminal.show_solved(
        PlainConsole(stream), Outcome(findings=(), layout=layout, solution=solution)
    )
    return stream.getvalue()


# --- what is held ---


def test_a_schedule_says_of_a_cut_cable_what_is_held_and_what_formed_it_first() -> None:
    rows = summary(cut(layout_of(CASE)))
    at = rows.index(("RULE", "UNSTRESSED LENGTHS HELD"))
    assert rows[at + 1] == ("FIRST FORMED BY", "SAG 3.000 m")
    assert ("SAG", "2.952 m") in rows
    assert [name for name, value in rows if value == "SAG 3.000 m"] == ["FIRST FORMED BY"]


def test_a_formed_cable_says_its_rule_as_ever() -> None:
    rows = dict(summary(with_cable(layout_of(CASE), lambda c: replace(c, rule=SAG))))
    assert rows["RULE"] == "SAG 3.000 m"
    assert "FIRST FORMED BY" not in rows


def test_the_terminal_says_of_a_cut_cable_what_is_held() -> None:
    formed = said(with_cable(layout_of(CASE), lambda c: replace(c, rule=SAG)))
    assert "formed by SAG 3.000 m under D (service, assumed); weightless" in formed
    words = said(cut(layout_of(CASE), delta_t=30.0))
    expected = (
        "cut, its unstressed lengths held under D (service, assumed, +30 K); "
        "first formed by SAG 3.000 m"
    )
    assert expected in words
    assert "\nformed by" not in words


def test_heads_of_diagram_and_joints_say_level_and_change_of_temperature() -> None:
    names = ("C1/diagram/words/2", "C1/joint/S1/words/2", "C1/joint/S2/words/2")
    cold, hot = (texts(painted(cut(layout_of(CASE), t))) for t in (0.0, 30.0))
    assert {cold[name] for name in names} == {"UNDER D (SERVICE, ASSUMED)"}
    assert {hot[name] for name in names} == {"UNDER D (SERVICE, ASSUMED, +30 K)"}
    assert combination_in(hot[names[0]]) == "D"


# --- heads that moved ---


def moved_left(datum: float | None, by: tuple[float, float]) -> Drawn:
    """Let the head at the left give way, the support staying where it is drawn."""

    def change(formed: FormedCable) -> FormedCable:
        first, *rest = formed.nodes
        first = replace(
            first, x=first.x + by[0], y=first.y + by[1], elevation=first.elevation + by[1]
        )
        return replace(formed, nodes=(first, *rest))

    return with_cable(layout_of(replace(CASE, datum=datum)), change)


def test_without_a_datum_heights_and_places_count_from_the_left_support_as_drawn() -> None:
    still = texts(painted(layout_of(replace(CASE, datum=None))))
    moved = texts(painted(moved_left(None, (0.017, -0.002))))
    assert still["C1/elevation/S1"] == "+0.000"
    assert moved["C1/elevation/S1"] == "-0.002"
    assert moved["C1/schedule/point/S1/elevation"] == "-0.002"
    assert moved["C1/schedule/point/S1/x"] == "0.017 m"
    for column in ("x", "elevation"):
        name = f"C1/schedule/point/P2/{column}"
        assert moved[name] == still[name]
    value = "C1/schedule/summary/elevations/value"
    assert still[value] == "DIFFERENCES FROM S1"
    assert moved[value] == "DIFFERENCES FROM S1 AS DRAWN"


def test_over_a_datum_a_head_that_moved_shows_its_elevation() -> None:
    moved = texts(painted(moved_left(0.0, (0.017, -0.002))))
    node = layout_of(CASE)[1].cables[0].nodes[0]
    assert moved["C1/elevation/S1"] == f"EL {node.elevation - 0.002:.3f}"


# --- anchors ---


def with_base(drawn: Drawn, mark: str = "") -> Drawn:
    """Give each mast an anchor at its base too, pressed down."""
    layout, solution = drawn

    def change(joint: Anchorage) -> Anchorage:
        assert joint.mast_foot is not None
        stay = replace(joint.anchors[0], mark=mark)
        base = replace(stay, at=joint.mast_foot, horizontal=0.0, uplift=-93.6)
        return replace(joint, anchors=(stay, base))

    return layout, replace(solution, anchorages=tuple(map(change, solution.anchorages)))


def test_anchors_without_a_mark_are_named_by_their_members() -> None:
    rows = [name for name, _ in summary(with_base(layout_of(CASE)))]
    for name in ("S1 STAY FOOT", "S1 MAST BASE", "S2 STAY FOOT", "S2 MAST BASE"):
        assert rows.count(name) == 1
    assert not [name for name in rows if name.startswith("ANCHOR")]


def test_a_marked_or_a_lone_anchor_keeps_its_name() -> None:
    joint = with_base(layout_of(CASE), "A1")[1].anchorages[0]
    assert anchor_names(joint) == ("ANCHOR A1", "ANCHOR A1")
    joint = layout_of(CASE)[1].anchorages[0]
    assert anchor_names(joint) == ("ANCHOR S1",)


def test_several_stays_have_feet_of_their_own_numbers() -> None:
    joint = with_base(layout_of(CASE))[1].anchorages[0]
    stay, base = joint.anchors
    other = (stay.at[0] - 3.0, stay.at[1])
    joint = replace(
        joint,
        stay_feet=(stay.at, other),
        anchors=(base, replace(stay, at=other), stay),
    )
    assert anchor_names(joint) == ("S1 MAST BASE", "S1 STAY 2 FOOT", "S1 STAY 1 FOOT")


def test_states_name_the_uplift_of_each_anchor() -> None:
    drawn = with_states(with_base(layout_of(CASE)), Asked(combo="D + L", factor=2.0))
    found = texts(painted(drawn))
    heads = [text for name, text in found.items() if "/states/member/head/uplift" in name]
    assert heads == [
        *("S1 STAY FOOT UPLIFT", "S1 MAST BASE UPLIFT"),
        *("S2 STAY FOOT UPLIFT", "S2 MAST BASE UPLIFT"),
    ]
    words = said(drawn)
    assert "stay foot horizontal" in words
    assert "mast base -187.2 kN" in words


def test_an_anchor_that_is_pressed_down_has_its_arrow_downwards() -> None:
    painting = painted(with_base(layout_of(CASE)))
    items = {item.id: item for item in painting.items}
    for part, sign in (("anchor", 1.0), ("anchor~2", -1.0)):
        arrow = items[f"C1/anchorage/S1/{part}/uplift-arrow"]
        head = items[f"C1/anchorage/S1/{part}/uplift-head"]
        assert isinstance(arrow, LineItem)
        assert isinstance(head, TriangleItem)
        assert sign * (arrow.end[1] - arrow.start[1]) > 0.0
        assert head.points[0] == arrow.end  # the tip
        assert sign * (head.points[0][1] - head.points[1][1]) > 0.0
    assert texts(painting)["C1/anchorage/S1/anchor~2/uplift"] == "UPLIFT -93.6 kN"


# --- hangers that are kept ---


@pytest.mark.parametrize("rise", [0.4, -0.4])
def test_a_hanger_kept_ends_off_the_deck_line_and_its_label_stays_clear(rise: float) -> None:
    def change(formed: FormedCable) -> FormedCable:
        nodes = tuple(
            n if n.hanger is None else replace(n, hanger_foot=n.y - (n.hanger - rise))
            for n in formed.nodes
        )
        nodes = tuple(
            n if n.hanger is None else replace(n, hanger=n.y - (n.hanger_foot or 0.0))
            for n in nodes
        )
        return replace(formed, nodes=nodes)

    drawn = with_cable(layout_of(CASE), change)
    painting = painted(drawn)
    items = {item.id: item for item in painting.items}
    hung = [n for n in drawn[1].cables[0].nodes if n.hanger is not None]
    assert hung
    labels = []
    for node in hung:
        line = items[f"C1/hanger/{node.mark}"]
        assert isinstance(line, LineItem)
        assert min(line.start[1], line.end[1]) == pytest.approx(rise)  # deck at 0
        label = items[f"C1/hanger-length/{node.mark}"]
        assert isinstance(label, TextItem)
        assert label.text == f"{node.hanger:.3f} m"
        labels.append(label)
    assert struck_texts(labels, obstacles_of(drawn[0]).segments.tolist()) == []


# --- loads overruled ---


def test_a_value_that_overrules_the_drawing_keeps_clear_of_a_crowded_deck() -> None:
    case = replace(CASE, drawn=tuple((k, "D=13.5 kN") for k in range(3)))
    layout, solution = layout_of(case)
    h = painted((layout, solution)).text_height
    own = obstacles_of(layout)
    # Deck, rails and edges run through all places near the load points.
    levels = np.arange(-3.0, 3.1, 0.5) * h
    lines = np.array([(-2.0, y, 42.0, y) for y in levels])
    crowded = Obstacles(np.concatenate((own.segments, lines)), own.boxes)
    painting = painted((layout, solution), crowded)
    labels = [i for i in painting.items if isinstance(i, TextItem) and i.id.startswith("C1/load/")]
    assert len(labels) == 3
    assert struck_texts(labels, crowded.segments.tolist()) == []
    leaders = {i.id for i in painting.items if i.id.endswith("/leader")}
    assert {f"{label.id}/leader" for label in labels} <= leaders
