"""The dimension of the least clearance: from the line up to the cable's place in that state."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from dxfcable.drawing.items import Item, LineItem, Painting, TextItem, TriangleItem
from dxfcable.drawing.painter import paint
from dxfcable.drawing.painting.labels import text_box
from dxfcable.drawing.painting.sketch import strokes
from dxfcable.settings import Settings
from tests.drawing.covering import covered_texts, struck_texts
from tests.drawing.painter_cases import Case, even, layout_of, obstacles_of
from tests.drawing.stated import with_clearance

if TYPE_CHECKING:
    from dxfcable.model import Layout, Point, Solution

H = 0.25
CASE = Case(spans=(even(5, 48.0, sag=4.0),), deck=1.0)
LINE = ((-2.0, 4.0, 50.0, 4.0),)  # the drafter's clearance line


def painted(
    drawn: tuple[Layout, Solution], places: dict[str, Point] | None = None
) -> dict[str, Item]:
    return {item.id: item for item in painting(drawn, places).items}


def painting(drawn: tuple[Layout, Solution], places: dict[str, Point] | None = None) -> Painting:
    layout, solution = drawn
    return paint(
        layout,
        solution,
        obstacles=obstacles_of(layout, LINE),
        settings=Settings(),
        plot_scale="1:100",
        held_places=places or {},
    )


def words(items: dict[str, Item]) -> str:
    label = items["C1/clearance-label"]
    assert isinstance(label, TextItem)
    row = items.get("C1/clearance-label/row-2")
    return f"{label.text} {row.text}" if isinstance(row, TextItem) else label.text


def line(items: dict[str, Item], name: str) -> LineItem:
    found = items[name]
    assert isinstance(found, LineItem)
    return found


@pytest.mark.parametrize("least", [0.2, 0.75, 2.4])
def test_the_dimension_runs_from_the_line_to_the_cable_in_that_state(least: float) -> None:
    items = painted(with_clearance(layout_of(CASE), 27.0, 4.0, least, "D + L"))
    tips = [items[f"C1/clearance/head-{n}"] for n in (1, 2)]
    assert [t.points[0][1] for t in tips if isinstance(t, TriangleItem)] == [4.0, 4.0 + least]
    assert words(items) == f"CLEAR {least:.3f} m, D + L"
    mark = line(items, "C1/clearance/level-2")
    assert mark.start[1] == mark.end[1] == 4.0 + least
    assert mark.start[0] < 27.0 < mark.end[0]


def test_a_long_dimension_has_its_arrows_inside_and_a_short_one_outside() -> None:
    long = painted(with_clearance(layout_of(CASE), 27.0, 4.0, 2.4, "D + L"))
    short = painted(with_clearance(layout_of(CASE), 27.0, 4.0, 0.2, "D + L"))
    inside, outside = line(long, "C1/clearance"), line(short, "C1/clearance")
    assert (inside.start[1], inside.end[1]) == (4.0, 6.4)
    assert outside.start[1] < 4.0
    assert outside.end[1] > 4.2


def test_a_cable_under_the_line_is_said_plainly() -> None:
    items = painted(with_clearance(layout_of(CASE), 27.0, 4.0, -0.35, "1.2D + 1.6L"))
    assert words(items) == "CLEAR -0.350 m, 1.2D + 1.6L"
    tips = [items[f"C1/clearance/head-{n}"] for n in (1, 2)]
    assert [t.points[0][1] for t in tips if isinstance(t, TriangleItem)] == [4.0, 3.65]


def test_a_cable_that_touches_the_line_has_a_label_and_no_arrows() -> None:
    items = painted(with_clearance(layout_of(CASE), 27.0, 4.0, 0.0, "D"))
    assert words(items) == "CLEAR 0.000 m, D"
    assert "C1/clearance" not in items


def test_the_dimension_stands_beside_a_hanger_and_is_carried_over_to_it() -> None:
    items = painted(with_clearance(layout_of(CASE), 24.0, 4.0, 2.4, "D + L"))
    x = line(items, "C1/clearance").start[0]
    assert 0.5 * H < abs(x - 24.0) < 4.0 * H
    for number in (1, 2):
        stroke = line(items, f"C1/clearance/level-{number}")
        low, high = sorted((stroke.start[0], stroke.end[0]))
        assert low < min(x, 24.0)
        assert high > max(x, 24.0)


def test_a_long_combination_stands_below_as_one_part_with_its_clearance() -> None:
    case = Case(spans=(even(11, 48.0, sag=4.0),), deck=1.0)
    state = "1.2D + 1.6L + 0.5S [left half]"
    drawn = with_clearance(layout_of(case), 22.0, 4.0, 2.4, state)
    done = painting(drawn)
    items = {item.id: item for item in done.items}
    assert words(items) == f"CLEAR 2.400 m, {state}"
    first, second = items["C1/clearance-label"], items["C1/clearance-label/row-2"]
    assert isinstance(first, TextItem)
    assert isinstance(second, TextItem)
    assert first.part == second.part == "C1/clearance-label"
    assert dict(done.origins)["C1/clearance-label"] == first.at
    place = (first.at[0] + 9.0, first.at[1] - 20.0)
    moved = painted(drawn, {"C1/clearance-label": place})["C1/clearance-label/row-2"]
    assert isinstance(moved, TextItem)
    assert moved.at[0] - second.at[0] == pytest.approx(9.0)
    assert moved.at[1] - second.at[1] == pytest.approx(-20.0)


@pytest.mark.parametrize("count", [3, 5, 8])
@pytest.mark.parametrize("least", [-0.4, 0.3, 1.8])
def test_nothing_covers_the_label_and_it_stands_near(count: int, least: float) -> None:
    case = Case(spans=(even(count, 60.0, sag=4.0),), deck=0.0)
    x = 29.0 if count % 2 else 60.0 * (count // 2) / (count + 1)
    items = painted(with_clearance(layout_of(case), x, 4.0, least, "D + L"))
    texts = [i for i in items.values() if isinstance(i, TextItem)]
    assert [pair for pair in covered_texts(texts) if "clearance" in " ".join(pair)] == []
    label = items["C1/clearance-label"]
    assert isinstance(label, TextItem)
    others = [i for i in items.values() if not i.id.startswith("C1/clearance-label")]
    assert struck_texts([label], strokes(others).tolist()) == []
    assert struck_texts([label], list(LINE)) == []
    left, bottom, right, top = text_box(label.text, H, label.align, label.valign)
    at = line(items, "C1/clearance").start[0]
    across = max(label.at[0] + left - at, at - label.at[0] - right, 0.0)
    up = max(label.at[1] + bottom - max(4.0, 4.0 + least), 0.0)
    down = max(min(4.0, 4.0 + least) - label.at[1] - top, 0.0)
    assert max(across, up, down) <= 3.0 * H + 1e-9


def test_a_cable_without_a_clearance_line_has_none() -> None:
    assert not [name for name in painted(layout_of(CASE)) if "clearance" in name]
