"""The schedule's second box: states, members, envelope; levels named, heads that warn."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

import pytest

from dxfcable.drawing.items import Painting, PolylineItem, TextItem
from dxfcable.drawing.painter import paint
from dxfcable.drawing.painting.rounding import Rounder
from dxfcable.drawing.painting.schedule_text import CAUTION, arrangements, draw_schedule
from dxfcable.drawing.painting.views import join_views
from dxfcable.settings import Settings
from tests.drawing.covering import covered_texts
from tests.drawing.painter_cases import Case, even, layout_of, obstacles_of
from tests.drawing.stated import Asked, with_states

if TYPE_CHECKING:
    from dxfcable.model import Layout, Solution

CASE = Case(spans=(even(5, 40.0),), mast=8.0, stay_run=9.0)
LIVE = Asked(combo="D + L", factor=2.0)
STRONG = Asked(combo="1.2D + 1.6L [left half]", factor=2.8, level="factored")


def painted(drawn: tuple[Layout, Solution]) -> Painting:
    layout, solution = drawn
    return paint(
        layout,
        solution,
        obstacles=obstacles_of(layout),
        settings=Settings(),
        plot_scale=None,
        held_places={},
    )


def texts(painting: Painting, under: str = "C1/states/") -> dict[str, str]:
    """Give the texts by what follows in their ids."""
    return {
        item.id.removeprefix(under): item.text
        for item in painting.items
        if isinstance(item, TextItem) and item.id.startswith(under)
    }


def row(found: dict[str, str], start: str) -> dict[str, str]:
    return {k.removeprefix(start): v for k, v in found.items() if k.startswith(start)}


def test_a_state_has_its_combination_as_typed_its_level_pull_tension_and_low_point() -> None:
    drawn = layout_of(CASE)
    formed = drawn[1].cables[0]
    found = texts(painted(with_states(drawn, LIVE, STRONG)))
    assert row(found, "state/2/") == {
        "combo": "1.2D + 1.6L [left half]",
        "level": "FACTORED (ASSUMED)",
        "pull": f"{2.8 * (formed.horizontal or 0.0):.3g} kN",
        "tension": f"{2.8 * formed.max_tension:.3g} kN",
        "piece": formed.governs.segment,
        "low": f"EL {min(n.elevation for n in formed.nodes):.3f}",
    }
    assert found["state/1/level"] == "SERVICE (ASSUMED)"
    assert found["title"] == "STATES OF CABLE C1, UNSTRESSED LENGTHS KEPT"


def test_masts_stays_and_uplift_stand_state_by_state_and_as_drawn() -> None:
    drawn = layout_of(CASE)
    joints = drawn[1].anchorages
    found = texts(painted(with_states(drawn, LIVE)))
    assert found["member/formed/combo"] == "D, AS DRAWN"
    heads = [v for k, v in found.items() if k.startswith("member/head/") and "S" in v]
    assert heads == ["S1 MAST", "S1 STAY", "S1 UPLIFT", "S2 MAST", "S2 STAY", "S2 UPLIFT"]
    cells = list(row(found, "member/1/").values())[1:]
    due = [2.0 * v for j in joints for v in (j.mast or 0.0, *j.stays, j.anchors[0].uplift)]
    assert cells == [f"{value:.3g} kN" for value in due]


def test_the_envelope_names_each_combination_with_its_level_where_levels_are_mixed() -> None:
    drawn = layout_of(CASE)
    formed = drawn[1].cables[0]
    found = texts(painted(with_states(drawn, LIVE, STRONG)))
    assert found["extreme/largest/value"] == f"{2.8 * formed.max_tension:.3g} kN"
    assert found["extreme/largest/under"] == "1.2D + 1.6L [left half], FACTORED"
    assert found["extreme/least/under"] == "D, SERVICE"
    for k in range(1, 7):
        assert found[f"tension/{k}/first-under"].endswith(", FACTORED")
        assert found[f"tension/{k}/second-under"] == "D, SERVICE"
    assert [found[f"range/{k}/name"] for k in range(1, 6)] == ["P1", "P2", "P3", "P4", "P5"]


def test_one_level_is_said_once_in_the_title() -> None:
    found = texts(painted(with_states(layout_of(CASE), LIVE)))
    assert found["title"].endswith(", ALL SERVICE (ASSUMED)")
    assert not [k for k in found if k.endswith("/level")]
    assert found["extreme/largest/under"] == "D + L"


def test_slack_hangers_and_states_without_a_shape_are_named() -> None:
    asked = (
        Asked(combo="D + W", factor=0.4, slack=("P2", "P3")),
        Asked(combo="0.9D - W", factor=1.0, fault="all loads point up"),
    )
    found = texts(painted(with_states(layout_of(CASE), *asked)))
    assert found["state/1/remark"] == "SLACK P2, P3"
    assert row(found, "state/2/") == {"combo": "0.9D - W", "remark": "NO SHAPE"}


def test_a_change_of_temperature_stands_beside_its_combination() -> None:
    asked = Asked(combo="D + T", factor=0.9, delta_t=30.0)
    found = texts(painted(with_states(layout_of(CASE), asked)))
    assert found["state/1/combo"] == "D + T, +30 K"


def test_beyond_twelve_states_those_that_govern_stay_and_the_rest_is_counted() -> None:
    asked = [Asked(combo=f"D + {k}L", factor=1.0 + 0.1 * k) for k in range(1, 18)]
    asked[7] = replace(asked[7], fault="no shape at all")
    asked[9] = replace(asked[9], slack=("P4",))
    found = texts(painted(with_states(layout_of(CASE), *asked)))
    listed = [v for k, v in found.items() if k.startswith("state/") and k.endswith("/combo")]
    # The head, the state without a shape, that with a slack hanger, the greatest, the count.
    assert listed[1:] == ["D + 8L", "D + 10L", "D + 17L", "AND 14 MORE, SEE THE REPORT"]


def test_at_most_twelve_states_are_listed_however_many_govern() -> None:
    asked = [Asked(combo=f"D + {k}L", factor=1.0, slack=("P1",)) for k in range(1, 31)]
    found = texts(painted(with_states(layout_of(CASE), *asked)))
    listed = [k for k in found if k.startswith("state/") and k.endswith("/combo")]
    assert len(listed) == 1 + 12 + 1
    assert found["state/more/combo"] == "AND 18 MORE, SEE THE REPORT"


def test_beyond_twenty_points_only_the_extremes_are_listed() -> None:
    drawn = layout_of(Case(spans=(even(30, 90.0),)))
    formed = drawn[1].cables[0]
    found = texts(painted(with_states(drawn, LIVE)))
    points = [n for n in formed.nodes if not n.is_support]
    lowest = min(points, key=lambda n: n.elevation)
    names = [v for k, v in found.items() if k.startswith("range/") and k.endswith("/name")]
    assert names[1:] == [lowest.mark]
    most = max(formed.segments, key=lambda s: s.tension).name
    least = min(formed.segments, key=lambda s: s.tension).name
    names = [v for k, v in found.items() if k.startswith("tension/") and k.endswith("/name")]
    assert set(names[1:]) == {most, least}


@pytest.mark.parametrize(
    ("status", "ea", "is_said"),
    [
        ("cut", None, True),
        ("cut", 9000.0, False),
        ("formed", None, False),
    ],
)
def test_a_cut_cable_without_ea_is_called_inextensible_over_each_table(
    status: str, ea: float | None, is_said: bool
) -> None:
    layout, solution = with_states(layout_of(CASE), LIVE, STRONG)
    formed = replace(solution.cables[0], status=status, ea=ea)
    painting = painted((layout, replace(solution, cables=(formed,))))
    every = texts(painting, "C1/")
    heads = {k.rsplit("/", 1)[0] for k, v in every.items() if v == "CUT, INEXTENSIBLE"}
    tables = {"schedule/summary", "schedule/point", "schedule/segment"}
    tables |= {f"states/{key}" for key in ("state", "member", "extreme", "range", "tension")}
    assert heads == (tables if is_said else set())
    assert every["schedule/summary/status/value"] == status.upper()
    assert covered_texts([i for i in painting.items if isinstance(i, TextItem)]) == []


def test_a_cable_that_stands_warmer_than_formed_says_so() -> None:
    layout, solution = layout_of(CASE)
    warm = replace(solution.cables[0], delta_t=30.0)
    found = texts(painted((layout, replace(solution, cables=(warm,)))), "C1/schedule/summary/")
    assert found["delta-t/value"] == "+30 K FROM REFERENCE"
    assert "delta-t/value" not in texts(painted((layout, solution)), "C1/schedule/summary/")


def test_a_cable_without_states_has_one_box() -> None:
    assert texts(painted(layout_of(CASE))) == {}


@pytest.mark.parametrize("count", [1, 9, 30])
def test_the_boxes_are_as_large_as_was_reckoned_and_one_part(count: int) -> None:
    case = Case(spans=(even(count, 60.0),), mast=9.0, stay_run=9.0)
    layout, solution = with_states(layout_of(case), LIVE, STRONG)
    view = join_views(layout, solution, Settings(), 0.25)[0]
    shapes = arrangements(view, "10 C")
    assert len(shapes) >= 4
    for shape in shapes:
        sketch = draw_schedule(view, shape, Rounder(9))
        x0, y0, x1, y1 = sketch.bounds()
        assert (x0, y1) == (0.0, 0.0)
        assert (x1, -y0) == pytest.approx((shape.width, shape.height))
        written = [item for item in sketch.items if isinstance(item, TextItem)]
        assert covered_texts(written) == []
        assert {item.part for item in sketch.items} == {"C1/schedule"}
        for box in ("schedule", "states"):
            lines = [i.text for i in written if i.id.startswith(f"C1/{box}/caution/")]
            assert " ".join(lines) == CAUTION
        frames = [i for i in sketch.items if isinstance(i, PolylineItem)]
        assert {i.id for i in frames} == {"C1/schedule/frame", "C1/states/frame"}


def test_two_cables_have_their_states_beside_their_own_schedules() -> None:
    cases = [
        Case(spans=(even(4, 40.0, y0=40.0 - 60.0 * k),), mark=f"C{k}", first_key=10 * k)
        for k in (1, 2)
    ]
    painting = painted(with_states(layout_of(*cases), LIVE, STRONG))
    origins = dict(painting.origins)
    views = {k: origins[f"C{k}/diagram"] for k in (1, 2)}
    for k, other in ((1, 2), (2, 1)):
        y = origins[f"C{k}/schedule"][1]
        assert abs(y - views[k][1]) < abs(y - views[other][1])
        boxes = [
            i for i in painting.items if i.id in (f"C{k}/schedule/frame", f"C{k}/states/frame")
        ]
        assert {i.part for i in boxes} == {f"C{k}/schedule"}
        first, second = (i.points for i in boxes if isinstance(i, PolylineItem))
        assert set(first) & set(second)  # they share a side
    assert covered_texts([i for i in painting.items if isinstance(i, TextItem)]) == []
