"""Where things are painted: clear of each other, near their objects, where a drafter put them."""

from __future__ import annotations

import math
from itertools import combinations

import numpy as np
import pytest

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.items import (
    Item,
    LineItem,
    Painting,
    PolylineItem,
    TextItem,
)
from dxfcable.drawing.painter import paint
from dxfcable.drawing.painting.free_place import join
from dxfcable.drawing.painting.labels import text_corners
from dxfcable.drawing.painting.rounding import Rounder
from dxfcable.drawing.painting.schedule_text import arrangements, draw_schedule
from dxfcable.drawing.painting.sketch import Bounds, item_points
from dxfcable.drawing.painting.views import join_views
from dxfcable.model import Layout, Point, Rectangle, Solution
from dxfcable.settings import Settings
from tests.drawing.covering import covered_texts, struck_texts
from tests.drawing.painter_cases import Case, Span, even, layout_of, obstacles_of

SAMPLE = Case(
    spans=(Span(x=(0.0, 8.0, 16.0, 24.0), loads=(15.0, 21.0), y=(12.0, 13.0), sag=2.4),),
    mast=6.0,
    stay_run=10.0,
)


def painted(
    layout: Layout,
    solution: Solution,
    obstacles: Obstacles | None = None,
    plot_scale: str | None = None,
    places: dict[str, Point] | None = None,
) -> Painting:
    return paint(
        layout,
        solution,
        obstacles=obstacles_of(layout) if obstacles is None else obstacles,
        settings=Settings(),
        plot_scale=plot_scale,
        held_places=places or {},
    )


def bounds_of(items: list[Item]) -> Bounds:
    points = np.array([p for item in items for p in item_points(item)])
    low, high = points.min(axis=0), points.max(axis=0)
    return float(low[0]), float(low[1]), float(high[0]), float(high[1])


def parts(painting: Painting) -> dict[str, Bounds]:
    """Give the rectangle about each part, and about each elevation as one."""
    groups: dict[str, list[Item]] = {}
    moved = dict(painting.origins)
    for item in painting.items:
        name = item.part if item.part in moved else f"{item.id.split('/')[0]}/elevation-view"
        groups.setdefault(name, []).append(item)
    return {name: bounds_of(items) for name, items in groups.items()}


def overlap(a: Bounds, b: Bounds) -> bool:
    return a[0] < b[2] and b[0] < a[2] and a[1] < b[3] and b[1] < a[3]


def clashes(painting: Painting) -> list[tuple[str, str]]:
    """List the texts whose boxes overlap."""
    return covered_texts([item for item in painting.items if isinstance(item, TextItem)])


@pytest.mark.parametrize("rise", [0.0, 4.0])
@pytest.mark.parametrize("height", [None, 0.5])
@pytest.mark.parametrize("count", [3, 8, 13, 20])
def test_labels_do_not_overlap(count: int, height: float | None, rise: float) -> None:
    case = Case(spans=(even(count, 60.0, rise=rise),), deck=0.0, mast=9.0, stay_run=14.0)
    layout, solution = layout_of(case, text_height=height)
    assert clashes(painted(layout, solution)) == []


def test_overlaps_are_found_where_there_are_some() -> None:
    layout, solution = layout_of(SAMPLE)
    place = next(
        item.at
        for item in painted(layout, solution).items
        if isinstance(item, TextItem) and item.id == "C1/tension/1"
    )
    both = {"C1/tension/1": place, "C1/tension/2": place}
    found = clashes(painted(layout, solution, places=both))
    assert ("C1/tension/1", "C1/tension/2") in found


@pytest.mark.parametrize("count", [2, 9, 20])
def test_labels_lie_within_three_heights_of_their_object(count: int) -> None:
    layout, solution = layout_of(Case(spans=(even(count, 60.0),), deck=0.0), text_height=0.5)
    painting = painted(layout, solution)
    formed, h = solution.cables[0], painting.text_height
    texts = {item.id: item for item in painting.items if isinstance(item, TextItem)}
    for node in formed.nodes:
        label = texts[f"C1/elevation/{node.mark}"]
        assert gap(label, (node.x, node.y), (node.x, node.y)) <= 3.0 * h + 1e-9
        if node.hanger_foot is not None:
            label = texts[f"C1/hanger-length/{node.mark}"]
            assert gap(label, (node.x, node.y), (node.x, node.hanger_foot)) <= 3.0 * h + 1e-9
    for number, segment in enumerate(formed.segments, start=1):
        for name in (f"C1/tension/{number}", f"C1/letter/{segment.name[:-1]}"):
            assert gap(texts[name], segment.start, segment.end) <= 3.0 * h + 1e-9


def gap(label: TextItem, start: Point, end: Point) -> float:
    """Give the least distance from a text's box to a line, by points on both."""
    corners = text_corners(label)
    edges = [
        (a[0] + t * (b[0] - a[0]), a[1] + t * (b[1] - a[1]))
        for a, b in zip(corners, corners[1:] + corners[:1], strict=True)
        for t in np.linspace(0.0, 1.0, 21)
    ]
    run = (end[0] - start[0], end[1] - start[1])
    square = run[0] ** 2 + run[1] ** 2
    least = math.inf
    for x, y in edges:
        share = 0.0
        if square > 0.0:
            share = ((x - start[0]) * run[0] + (y - start[1]) * run[1]) / square
            share = min(1.0, max(0.0, share))
        at = (start[0] + share * run[0], start[1] + share * run[1])
        least = min(least, math.dist((x, y), at))
    return least


def test_parts_of_several_cables_do_not_overlap() -> None:
    cases = (
        Case(spans=(even(3, 24.0), even(4, 36.0, x0=24.0)), deck=6.0),
        Case(spans=(even(6, 60.0, y0=-30.0),), mark="C2", first_key=10, mast=8.0, stay_run=8.0),
        Case(spans=(even(2, 30.0, x0=90.0),), mark="C3", first_key=20),
    )
    found = parts(painted(*layout_of(*cases)))
    assert len(found) == 3 * 3 + 2
    for (one, a), (other, b) in combinations(found.items(), 2):
        assert not overlap(a, b), (one, other)


def test_blocks_are_free_of_all_that_is_drawn_and_keep_a_margin() -> None:
    layout, solution = layout_of(SAMPLE)
    rng = np.random.default_rng(7)
    start = rng.uniform((-60.0, -60.0), (90.0, 60.0), (160, 2))
    lines = np.hstack((start, start + rng.uniform(-4.0, 4.0, (160, 2))))
    corner = rng.uniform((-60.0, -60.0), (90.0, 60.0), (60, 2))
    boxes = np.hstack((corner, corner + rng.uniform(0.1, 3.0, (60, 2))))
    painting = painted(layout, solution, Obstacles(lines, boxes))
    margin = 3.0 * painting.text_height - 1e-9
    blocks = parts(painting)
    blocks.pop("C1/elevation-view")
    names = ("C1/diagram", "C1/joint/S1", "C1/joint/S2")
    row = join(*(blocks[name] for name in names))
    for x0, y0, x1, y1 in (row, blocks["C1/schedule"]):
        grown = (x0 - margin, y0 - margin, x1 + margin, y1 + margin)
        assert not any(overlap(grown, tuple(box)) for box in boxes.tolist())
        for ax, ay, bx, by in lines.tolist():
            t = np.linspace(0.0, 1.0, 200)
            x, y = ax + t * (bx - ax), ay + t * (by - ay)
            assert not ((x > grown[0]) & (x < grown[2]) & (y > grown[1]) & (y < grown[3])).any()


def test_blocks_stay_inside_a_sheet_border_that_has_room() -> None:
    layout, solution = layout_of(SAMPLE)
    border = ((-30.0, -8.0), (60.0, -8.0), (60.0, 40.0), (-30.0, 40.0))
    sides = tuple((*a, *b) for a, b in zip(border, border[1:] + border[:1], strict=True))
    blocks = parts(painted(layout, solution, obstacles_of(layout, sides)))
    for x0, y0, x1, y1 in blocks.values():
        assert x0 > -30.0
        assert y0 > -8.0
        assert x1 < 60.0
        assert y1 < 40.0


def test_where_nothing_near_is_free_blocks_go_beyond_everything() -> None:
    layout, solution = layout_of(SAMPLE)
    across, up = np.meshgrid(np.arange(-200.0, 200.0, 1.0), np.arange(-200.0, 200.0, 1.0))
    corner = np.stack((across.ravel(), up.ravel()), axis=1)
    obstacles = Obstacles(np.hstack((corner, corner + 0.5)), np.zeros((0, 4)))
    painting = painted(layout, solution, obstacles)
    blocks = parts(painting)
    assert blocks["C1/diagram"][0] > 199.5
    assert blocks["C1/schedule"][0] > blocks["C1/diagram"][2]
    notes = {finding.code: finding.text for finding in painting.findings}
    assert "right of everything drawn" in notes["diagram-placed"]


def test_the_diagram_goes_into_its_frame_with_a_margin() -> None:
    frame = Rectangle(x0=30.0, y0=-20.0, x1=70.0, y1=4.0)
    case = Case(spans=SAMPLE.spans, mast=6.0, stay_run=10.0, frame=frame)
    painting = painted(*layout_of(case))
    blocks = parts(painting)
    row = join(*(blocks[f"C1/{name}"] for name in ("diagram", "joint/S1", "joint/S2")))
    assert row[0] >= 30.0 + 0.05 * 40.0 - 1e-6
    assert row[2] <= 70.0 - 0.05 * 40.0 + 1e-6
    assert row[1] >= -20.0 + 0.05 * 24.0 - 1e-6
    assert row[3] <= 4.0 - 0.05 * 24.0 + 1e-6
    assert not overlap(blocks["C1/schedule"], (30.0, -20.0, 70.0, 4.0))


def test_a_frame_without_room_for_joints_holds_the_diagram_alone() -> None:
    frame = Rectangle(x0=30.0, y0=-20.0, x1=37.0, y1=-9.0)
    case = Case(spans=SAMPLE.spans, mast=6.0, stay_run=10.0, frame=frame)
    blocks = parts(painted(*layout_of(case)))
    assert overlap(blocks["C1/diagram"], (30.0, -20.0, 37.0, -9.0))
    assert not overlap(blocks["C1/joint/S1"], (30.0, -20.0, 37.0, -9.0))


def test_a_frame_that_is_too_small_is_said() -> None:
    frame = Rectangle(x0=30.0, y0=-20.0, x1=31.0, y1=-19.0)
    painting = painted(*layout_of(Case(spans=SAMPLE.spans, frame=frame)))
    assert "frame-small" in {finding.code for finding in painting.findings}
    assert len(painting.diagrams) == 1


def test_held_places_of_labels_and_parts_are_kept() -> None:
    layout, solution = layout_of(SAMPLE)
    free = painted(layout, solution)
    held: dict[str, Point] = {
        "C1/tension/2": (11.5, 9.25),
        "C1/diagram": (100.0, 50.0),
        "C1/joint/S2": (150.0, 50.0),
        "C1/schedule": (-80.0, -40.0),
    }
    painting = painted(layout, solution, places=held)
    label = next(i for i in painting.items if i.id == "C1/tension/2")
    assert isinstance(label, TextItem)
    assert label.at == (11.5, 9.25)
    origins = dict(painting.origins)
    assert {name: origins[name] for name in held if name in origins} == {
        name: place for name, place in held.items() if name != "C1/tension/2"
    }
    before, after = free.diagrams[0], painting.diagrams[0]
    by = (100.0 - dict(free.origins)["C1/diagram"][0], 50.0 - dict(free.origins)["C1/diagram"][1])
    assert after.pole == pytest.approx((before.pole[0] + by[0], before.pole[1] + by[1]), abs=1e-7)
    assert after.load_line[0] == (100.0, 50.0)


@pytest.mark.parametrize(
    "cases",
    [
        (Case(spans=(even(6, 40.0),), deck=0.0, mast=8.0, stay_run=9.0),),
        (Case(spans=(even(34, 120.0),), deck=-9.0),),
        (
            Case(spans=(even(9, 30.0, rise=2.0),), deck=4.0),
            Case(spans=(even(5, 30.0, y0=-30.0),), mark="C2", first_key=10),
        ),
        (
            Case(
                spans=(even(7, 40.0),),
                frame=Rectangle(x0=50.0, y0=-20.0, x1=75.0, y1=4.0),
                mast=8.0,
                stay_run=9.0,
            ),
        ),
    ],
)
def test_holding_everything_where_it_stands_changes_nothing(cases: tuple[Case, ...]) -> None:
    layout, solution = layout_of(*cases)
    free = painted(layout, solution)
    places = dict(free.origins)
    places |= {i.id: i.at for i in free.items if isinstance(i, TextItem) and i.part == i.id}
    again = painted(layout, solution, places=places)
    assert sorted(again.items, key=lambda i: i.id) == sorted(free.items, key=lambda i: i.id)


def test_a_label_moved_aside_gets_a_leader_and_one_moved_far_none() -> None:
    layout, solution = layout_of(SAMPLE)
    node, h = solution.cables[0].nodes[2], painted(layout, solution).text_height
    found = {}
    for away in (1.0, 4.0, 100.0):
        places: dict[str, Point] = {"C1/elevation/P2": (node.x, node.y - away * h)}
        items = {i.id: i for i in painted(layout, solution, places=places).items}
        found[away] = items.get("C1/elevation/P2/leader")
    assert found[1.0] is None
    assert found[100.0] is None
    leader = found[4.0]
    assert isinstance(leader, LineItem)
    assert leader.end == pytest.approx((node.x, node.y), abs=1e-7)


def test_reaction_arrows_keep_clear_of_the_drafters_mark() -> None:
    layout, solution = layout_of(SAMPLE)
    h = painted(layout, solution).text_height
    free = arrow(painted(layout, solution), "C1/reaction/S1/H-arrow")
    mark = (-3.0 * h, 12.0 + 0.7 * h, -0.5 * h, 12.0 + 2.5 * h)
    own = obstacles_of(layout)
    among = painted(layout, solution, Obstacles(own.segments, np.array([mark])))
    moved = arrow(among, "C1/reaction/S1/H-arrow")
    assert mark[1] < free.start[1] < mark[3]
    for key in "HV":
        line = arrow(among, f"C1/reaction/S1/{key}-arrow")
        x, y = sorted((line.start[0], line.end[0])), sorted((line.start[1], line.end[1]))
        assert not overlap((x[0], y[0], x[1], y[1]), mark)
    assert math.dist(moved.start, (0.0, 12.0)) < 6.0 * h


def arrow(painting: Painting, name: str) -> LineItem:
    found = next(item for item in painting.items if item.id == name)
    assert isinstance(found, LineItem)
    return found


def test_the_span_dimension_keeps_off_the_drafters_dimension_chain() -> None:
    layout, solution = layout_of(SAMPLE)
    own = obstacles_of(layout)
    level = arrow(painted(layout, solution), "C1/span/1").start[1]
    h = painted(layout, solution).text_height
    chain = [(0.0, level + off * h, 24.0, level + off * h) for off in (-2.0, 0.0, 2.0)]
    grid_lines = [(x, 0.0, x, level + 20.0) for x in (0.0, 8.0, 16.0, 24.0)]
    boxes = np.array([(x, level, x + 6.0 * h, level + 1.5 * h) for x in (4.0, 12.0, 20.0)])
    obstacles = Obstacles(np.vstack((own.segments, chain, grid_lines)), boxes)
    among = painted(layout, solution, obstacles)
    found = arrow(among, "C1/span/1").start[1]
    assert all(abs(found - line[1]) >= 0.7 * h for line in chain)
    label = next(i for i in among.items if i.id == "C1/span-label/1")
    assert isinstance(label, TextItem)
    assert struck_texts([label], obstacles.segments.tolist()) == []


def test_schedules_stand_with_their_own_cable() -> None:
    cases = [
        Case(spans=(even(4, 40.0, y0=40.0 - 40.0 * k),), mark=f"C{k}", first_key=10 * k)
        for k in range(3)
    ]
    painting = painted(*layout_of(*cases))
    blocks = parts(painting)
    for k in range(3):
        table = blocks[f"C{k}/schedule"]
        gaps = [
            min(between(table, blocks[f"C{n}/{part}"]) for part in ("diagram", "elevation-view"))
            for n in range(3)
        ]
        assert min(range(3), key=lambda n: gaps[n]) == k


@pytest.mark.parametrize("count", [1, 9, 30, 31, 60])
def test_a_schedule_is_as_large_as_was_reckoned_in_every_shape(count: int) -> None:
    layout, solution = layout_of(Case(spans=(even(count, 60.0),), mast=9.0, stay_run=9.0))
    view = join_views(layout, solution, Settings(), 0.25)[0]
    shapes = arrangements(view, "10 C")
    assert len(shapes) >= 4
    names = set()
    for shape in shapes:
        sketch = draw_schedule(view, shape, Rounder(9))
        x0, y0, x1, y1 = sketch.bounds()
        assert (x0, y1) == (0.0, 0.0)
        assert (x1, -y0) == pytest.approx((shape.width, shape.height))
        texts = [item for item in sketch.items if isinstance(item, TextItem)]
        assert covered_texts(texts) == []
        names.add(frozenset(i.id for i in texts if "head" not in i.id and "caution" not in i.id))
    assert len(names) == 1  # ids do not depend on the shape


def between(a: Bounds, b: Bounds) -> float:
    across, up = max(a[0] - b[2], b[0] - a[2], 0.0), max(a[1] - b[3], b[1] - a[3], 0.0)
    return math.hypot(across, up)


def test_a_schedule_takes_the_shape_that_fits_the_sheet() -> None:
    layout, solution = layout_of(Case(spans=(even(5, 40.0),)), text_height=0.25)
    wide = parts(painted(layout, solution))["C1/schedule"]
    assert wide[2] - wide[0] > 2.0 * (wide[3] - wide[1])
    border = ((-4.0, -40.0), (44.0, -40.0), (44.0, 20.0), (-4.0, 20.0))
    sides = [(*a, *b) for a, b in zip(border, border[1:] + border[:1], strict=True)]
    # Hatching leaves a strip that the usual shape does not fit.
    hatch = [(x, -40.0, x, 2.0) for x in np.arange(24.0, 44.0, 1.0)]
    own = obstacles_of(layout, (*sides, *hatch))
    x0, y0, x1, y1 = parts(painted(layout, solution, own))["C1/schedule"]
    assert x1 - x0 < 0.8 * (wide[2] - wide[0])
    assert x0 > -4.0
    assert x1 < 44.0
    assert y0 > -40.0
    assert y1 < 20.0


@pytest.mark.parametrize("shift", [(1e6, 0.0), (-3e5, 1e6)])
def test_a_shifted_drawing_is_painted_alike(shift: Point) -> None:
    def case(dx: float, dy: float) -> Case:
        span = even(7, 48.0, x0=dx, y0=12.0 + dy, rise=2.0)
        return Case(spans=(span,), deck=dy, datum=-dy, mast=6.0, stay_run=8.0)

    here = painted(*layout_of(case(0.0, 0.0)))
    there = painted(*layout_of(case(*shift)))
    assert [i.id for i in here.items] == [i.id for i in there.items]
    for a, b in zip(here.items, there.items, strict=True):
        moved = [(x + shift[0], y + shift[1]) for x, y in item_points(a)]
        assert np.allclose(moved, item_points(b), rtol=0.0, atol=1e-6)


def test_a_mirrored_drawing_has_a_mirrored_cable_and_the_pole_still_to_the_right() -> None:
    span = SAMPLE.spans[0]
    mirrored = Span(
        x=tuple(24.0 - x for x in reversed(span.x)),
        loads=tuple(reversed(span.loads)),
        y=(span.y[1], span.y[0]),
        sag=span.sag,
    )
    here, there = (painted(*layout_of(Case(spans=(s,)))) for s in (span, mirrored))
    for painting in (here, there):
        diagram = painting.diagrams[0]
        assert diagram.pole[0] > diagram.load_line[0][0]
        assert [p[1] for p in diagram.load_line] == sorted(
            (p[1] for p in diagram.load_line), reverse=True
        )
    profiles = [
        next(i.points for i in p.items if isinstance(i, PolylineItem) and i.id == "C1/profile/1")
        for p in (here, there)
    ]
    back = [(24.0 - x, y) for x, y in reversed(profiles[1])]
    assert np.allclose(profiles[0], back, rtol=0.0, atol=1e-7)
