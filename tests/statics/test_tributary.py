"""Tributary areas: hand values one by one, and the laws that every sharing keeps.

Sources, as domain.md section 5 tags them. Boundary at half distance, edge points to the edge;
nearest support on irregular grids, equal to rectangular strips on an orthogonal grid: public
pages on tributary areas (PART: rules read, numbers our own). One-way strips between supporting
lines, openings subtracted, overhangs to the last point, the sum against q times net area:
common practice (MEM). All areas here are worked by hand (OWN).
"""

from __future__ import annotations

import itertools
import math
from typing import TYPE_CHECKING

import pytest
import shapely
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.statics.tributary import LoadedArea, Shares, share_area

if TYPE_CHECKING:
    from shapely.geometry.base import BaseGeometry

Point = tuple[float, float]
TOUCH = 1e-6
DEAD_LIVE = (("D", 1.2), ("L", 4.0))


def rectangle(width: float, height: float, at: Point = (0.0, 0.0)) -> tuple[Point, ...]:
    x, y = at
    return ((x, y), (x + width, y), (x + width, y + height), (x, y + height))


def share(
    outline: tuple[Point, ...],
    points: list[Point],
    *,
    holes: tuple[tuple[Point, ...], ...] = (),
    direction: Point | None = None,
    pressures: tuple[tuple[str, float], ...] = DEAD_LIVE,
) -> Shares:
    area = LoadedArea(outline=outline, holes=holes, direction=direction, pressures=pressures)
    return share_area(area, points, tolerance=TOUCH)


def areas(shares: Shares) -> list[float]:
    return [cell.area for cell in shares.cells]


# --- hand values: nearest points ------------------------------------------------------------


def test_on_an_orthogonal_grid_cells_are_rectangular_strips_to_half_distance() -> None:
    # 9 x 5 with points at x = 1.5, 4.5, 7.5 and y = 1, 4: strips 3 wide, split at y = 2.5.
    grid = [(x, y) for y in (1.0, 4.0) for x in (1.5, 4.5, 7.5)]
    shares = share(rectangle(9, 5), grid)
    assert areas(shares) == pytest.approx([7.5] * 6, rel=1e-12)
    assert shares.cells[4].rings == (((3.0, 2.5), (6.0, 2.5), (6.0, 5.0), (3.0, 5.0)),)


def test_each_point_carries_pressure_times_its_area_by_case() -> None:
    shares = share(rectangle(9, 2), [(2, 1), (6, 1)])
    # Half distance between x = 2 and 6 is 4: areas 4 x 2 = 8 and 5 x 2 = 10.
    assert dict(shares.cells[0].loads) == pytest.approx({"D": 9.6, "L": 32.0}, rel=1e-12)
    assert dict(shares.cells[1].loads) == pytest.approx({"D": 12.0, "L": 40.0}, rel=1e-12)
    assert dict(shares.sums) == pytest.approx({"D": 1.2 * 18, "L": 4.0 * 18}, rel=1e-12)


def test_unequal_spacing_gives_unequal_strips_and_overhangs_go_to_the_last_point() -> None:
    # Points at 1, 2, 6, 7.5 on a strip 0 to 10: edges at 1.5, 4, 6.75.
    shares = share(rectangle(10, 1), [(1, 0.5), (2, 0.5), (6, 0.5), (7.5, 0.5)])
    assert areas(shares) == pytest.approx([1.5, 2.5, 2.75, 3.25], rel=1e-12)


def test_an_l_shaped_area_is_shared_within_its_outline() -> None:
    # Legs 6 x 2 and 2 x 4; points in the corner and at the two ends.
    outline = ((0.0, 0.0), (6.0, 0.0), (6.0, 2.0), (2.0, 2.0), (2.0, 6.0), (0.0, 6.0))
    shares = share(outline, [(1, 1), (5, 1), (1, 5)])
    # Bisectors at x = 3 and y = 3; the two end points never meet within the L.
    assert areas(shares) == pytest.approx([3 * 2 + 2 * 1, 3 * 2, 2 * 3], rel=1e-12)
    assert shares.net_area == pytest.approx(20.0, rel=1e-12)


def test_three_points_off_any_grid_meet_at_the_centre_of_their_circle() -> None:
    # Bisectors of (1, 1), (7, 1), (1, 5) are x = 4, y = 3 and the line between the other two,
    # through (4, 3) with slope 3/2: it reaches the top y = 6 at x = 6.
    shares = share(rectangle(8, 6), [(1, 1), (7, 1), (1, 5)])
    assert areas(shares) == pytest.approx([4 * 3, 4 * 6 - 0.5 * 2 * 3, 4 * 3 + 3], rel=1e-12)


def test_an_opening_is_subtracted_from_the_cell_it_lies_in() -> None:
    shares = share(rectangle(8, 4), [(2, 2), (6, 2)], holes=(rectangle(1, 2, (5.5, 1.0)),))
    assert areas(shares) == pytest.approx([16.0, 14.0], rel=1e-12)
    assert shares.net_area == pytest.approx(30.0, rel=1e-12)
    outer, hole = shares.cells[1].rings
    assert outer == ((4.0, 0.0), (8.0, 0.0), (8.0, 4.0), (4.0, 4.0))
    assert hole == ((5.5, 1.0), (5.5, 3.0), (6.5, 3.0), (6.5, 1.0))  # clockwise


def test_an_opening_across_a_boundary_takes_from_both_cells() -> None:
    shares = share(rectangle(8, 4), [(2, 2), (6, 2)], holes=(rectangle(3, 1, (3.0, 1.0)),))
    assert areas(shares) == pytest.approx([15.0, 14.0], rel=1e-12)


def test_an_opening_counts_once_where_two_overlap_or_one_leaves_the_outline() -> None:
    holes = (rectangle(2, 2, (7.0, 1.0)), rectangle(1, 2, (6.5, 1.0)))
    assert areas(share(rectangle(8, 4), [(2, 2)], holes=holes)) == pytest.approx([29.0], rel=1e-12)


def test_a_cell_may_be_cut_in_two_by_an_opening() -> None:
    shares = share(rectangle(6, 2), [(3, 1)], holes=(rectangle(2, 2, (2.0, 0.0)),))
    assert shares.cells[0].area == pytest.approx(8.0, rel=1e-12)
    left, right = shares.cells[0].rings
    assert (left[0], right[0]) == ((0.0, 0.0), (4.0, 0.0))


# --- hand values: one-way decks --------------------------------------------------------------

PAIRS: list[Point] = [(2.0, 0.5), (2.0, 2.5), (5.0, 0.5), (5.0, 2.5), (9.0, 0.5), (9.0, 2.5)]


def test_a_one_way_deck_spans_in_strips_between_supporting_lines() -> None:
    # Lines at x = 2, 5, 9 on 0 to 10: strips 3.5, 3.5, 3 wide; each pair shares 3 x 1/2.
    shares = share(rectangle(10, 3), PAIRS, direction=(1, 0))
    assert areas(shares) == pytest.approx([5.25, 5.25, 5.25, 5.25, 4.5, 4.5], rel=1e-12)
    assert [line.at for line in shares.lines] == [2.0, 5.0, 9.0]


def test_the_other_direction_takes_the_other_lines() -> None:
    # Along y the lines are y = 0.5 and 2.5, each 1.5 high; along them edges at 3.5 and 7.
    shares = share(rectangle(10, 3), PAIRS, direction=(0, 1))
    assert areas(shares) == pytest.approx([5.25, 5.25, 5.25, 5.25, 4.5, 4.5], rel=1e-12)
    assert [line.points for line in shares.lines] == [(0, 2, 4), (1, 3, 5)]


def test_one_way_and_nearest_differ_where_lines_are_staggered() -> None:
    # Line x = 2: points at y = 1, 3; line x = 6: points at y = 0.5, 1.5, 3.5, on 8 x 4.
    points = [(2.0, 1.0), (2.0, 3.0), (6.0, 0.5), (6.0, 1.5), (6.0, 3.5)]
    shares = share(rectangle(8, 4), points, direction=(1, 0))
    assert areas(shares) == pytest.approx([8, 8, 4 * 1, 4 * 1.5, 4 * 1.5], rel=1e-12)
    assert areas(share(rectangle(8, 4), points)) != pytest.approx(areas(shares), rel=1e-3)


def test_a_point_on_no_supporting_line_gets_nothing_of_a_one_way_deck() -> None:
    shares = share(rectangle(10, 3), [*PAIRS, (3.5, 1.5)], direction=(1, 0))
    assert areas(shares)[:6] == pytest.approx([5.25] * 4 + [4.5] * 2, rel=1e-12)
    assert (shares.cells[6].area, shares.cells[6].rings) == (0.0, ())
    assert dict(shares.cells[6].loads) == {"D": 0.0, "L": 0.0}


def test_in_a_single_row_of_hangers_each_stands_for_its_line() -> None:
    shares = share(rectangle(10, 3), [(2, 2.9), (5, 2.9), (9, 2.9)], direction=(1, 0))
    assert areas(shares) == pytest.approx([10.5, 10.5, 9.0], rel=1e-12)


def test_a_one_way_deck_has_openings_too() -> None:
    # 1 x 1 at x 3 to 4: half of it left of the edge x = 3.5, below y = 1.5.
    hole = rectangle(1, 1, (3.0, 0.25))
    shares = share(rectangle(10, 3), PAIRS, holes=(hole,), direction=(1, 0))
    assert areas(shares) == pytest.approx([4.75, 5.25, 4.75, 5.25, 4.5, 4.5], rel=1e-12)


def test_the_sense_of_the_direction_does_not_matter() -> None:
    there = share(rectangle(10, 3), PAIRS, direction=(2, 0))
    back = share(rectangle(10, 3), PAIRS, direction=(-3, 0))
    assert areas(there) == pytest.approx(areas(back), rel=1e-12)


def test_points_within_the_tolerance_are_on_one_line() -> None:
    near = [(2.0, 0.5), (2.0 + 0.9 * TOUCH, 2.5), (5.0, 0.5), (5.0, 2.5)]
    shares = share(rectangle(10, 3), near, direction=(1, 0))
    assert [line.points for line in shares.lines] == [(0, 1), (2, 3)]


# --- what is refused ------------------------------------------------------------------------


def test_points_off_the_area_get_nothing_of_it_and_edges_belong_to_it() -> None:
    shares = share(rectangle(8, 4), [(0, 2), (8, 2), (9, 2), (4, -1)])
    assert [cell.point for cell in shares.cells] == [0, 1]
    assert areas(shares) == pytest.approx([16.0, 16.0], rel=1e-12)


def test_a_hanger_in_its_own_slot_carries_the_deck_about_it() -> None:
    shares = share(rectangle(8, 4), [(2, 2), (6, 2)], holes=(rectangle(0.2, 0.2, (1.9, 1.9)),))
    assert areas(shares) == pytest.approx([15.96, 16.0], rel=1e-12)


@pytest.mark.parametrize(
    ("outline", "points", "holes", "words"),
    [
        (rectangle(8, 4), [(9.0, 2.0)], (), "no point stands on the area"),
        (rectangle(8, 4), [(2.0, 2.0), (2.0, 2.0)], (), "two points stand at"),
        (((0, 0), (8, 4), (8, 0), (0, 4)), [(1.0, 1.0)], (), "outline crosses"),
        (((0, 0), (8, 0)), [(1.0, 1.0)], (), "outline encloses nothing"),
        (rectangle(8, 4), [(1.0, 1.0)], (rectangle(8, 4),), "leave nothing"),
        (rectangle(8, 4), [(math.nan, 1.0)], (), "no finite number"),
    ],
)
def test_what_cannot_be_shared_is_refused(
    outline: tuple[Point, ...],
    points: list[Point],
    holes: tuple[tuple[Point, ...], ...],
    words: str,
) -> None:
    with pytest.raises(ValueError, match=words):
        share(outline, points, holes=holes)


def test_a_direction_without_length_is_refused() -> None:
    with pytest.raises(ValueError, match="direction of the deck"):
        share(rectangle(8, 4), [(1.0, 1.0)], direction=(0.0, 0.0))


# --- laws -----------------------------------------------------------------------------------

whole = st.integers(0, 40)


@st.composite
def plans(draw: st.DrawFn) -> tuple[tuple[Point, ...], list[Point], tuple[tuple[Point, ...], ...]]:
    """Draw a star-shaped area of 3 to 9 corners, points on a fine grid about it, an opening."""
    corners = draw(st.integers(3, 9))
    radii = draw(st.lists(st.floats(4.0, 20.0), min_size=corners, max_size=corners))
    outline = tuple(
        (20 + r * math.cos(2 * math.pi * k / corners), 20 + r * math.sin(2 * math.pi * k / corners))
        for k, r in enumerate(radii)
    )
    points = draw(st.lists(st.tuples(whole, whole), min_size=0, max_size=12, unique=True))
    places = [(20.25, 20.25), *((float(x), float(y)) for x, y in points)]
    holes = (rectangle(draw(st.floats(0.1, 1.5)), draw(st.floats(0.1, 1.5)), (20.5, 20.5)),)
    return outline, places, holes if draw(st.booleans()) else ()


directions = st.one_of(
    st.none(), st.floats(0, 2 * math.pi).map(lambda a: (math.cos(a), math.sin(a)))
)


@settings(max_examples=60, deadline=None)
@given(plan=plans(), direction=directions)
def test_cells_sum_up_to_the_net_area_and_do_not_overlap(
    plan: tuple[tuple[Point, ...], list[Point], tuple[tuple[Point, ...], ...]],
    direction: Point | None,
) -> None:
    outline, points, holes = plan
    shares = share(outline, points, holes=holes, direction=direction)
    # An area worked out another way: the shoelace formula, and openings in the middle whole.
    net = abs(
        math.fsum(
            a[0] * b[1] - b[0] * a[1]
            for a, b in zip(outline, (*outline[1:], outline[0]), strict=True)
        )
    )
    cut = shapely.Polygon(outline).intersection(shapely.Polygon(holes[0])).area if holes else 0.0
    assert math.fsum(areas(shares)) == pytest.approx(0.5 * net - cut, rel=1e-9)
    assert shares.sum_of_areas == pytest.approx(shares.net_area, rel=1e-9)
    for case, total in shares.sums:
        assert total == pytest.approx(dict(DEAD_LIVE)[case] * shares.net_area, rel=1e-9)
    pieces = [_even_odd(cell.rings) for cell in shares.cells]
    for i, one in enumerate(pieces):
        assert one.area == pytest.approx(shares.cells[i].area, abs=1e-8)
        for other in pieces[i + 1 :]:
            assert one.intersection(other).area < 1e-8


def _even_odd(rings: tuple[tuple[Point, ...], ...]) -> BaseGeometry:
    """Give the shape that rings enclose, whatever their order."""
    shape: BaseGeometry = shapely.Polygon()
    for ring in rings:
        shape = shape.symmetric_difference(shapely.Polygon(ring))
    return shape


@settings(max_examples=40, deadline=None)
@given(plan=plans())
def test_each_spot_of_a_cell_is_nearest_to_its_point(
    plan: tuple[tuple[Point, ...], list[Point], tuple[tuple[Point, ...], ...]],
) -> None:
    outline, points, holes = plan
    shares = share(outline, points, holes=holes)
    on_area = [points[cell.point] for cell in shares.cells]
    for cell in shares.cells:
        for corner in (corner for ring in cell.rings for corner in ring):
            own = math.dist(corner, points[cell.point])
            assert own <= min(math.dist(corner, p) for p in on_area) + 1e-6


@settings(max_examples=40, deadline=None)
@given(
    plan=plans(),
    direction=directions,
    turn=st.floats(0, 2 * math.pi),
    by=st.tuples(st.floats(-1e5, 1e5), st.floats(-1e5, 1e5)),
)
def test_turning_and_moving_the_plan_changes_no_area(
    plan: tuple[tuple[Point, ...], list[Point], tuple[tuple[Point, ...], ...]],
    direction: Point | None,
    turn: float,
    by: Point,
) -> None:
    def there(point: Point) -> Point:
        x, y = turned(point)
        return x + by[0], y + by[1]

    def turned(point: Point) -> Point:
        x, y = point
        cos, sin = math.cos(turn), math.sin(turn)
        return x * cos - y * sin, x * sin + y * cos

    # Points near the outline, or nearly on one line, may fall on the other side by rounding.
    outline, points, holes = plan
    edge = shapely.Polygon(outline).exterior
    points = [p for p in points if edge.distance(shapely.Point(p)) > 1e-3]
    points = points if (20.25, 20.25) in points else [(20.25, 20.25), *points]
    if direction is not None:
        along = sorted(x * direction[0] + y * direction[1] for x, y in points)
        gaps = [b - a for a, b in itertools.pairwise(along)]
        if any(1e-8 < gap < 1e-4 for gap in gaps):
            return
    before = share(outline, points, holes=holes, direction=direction)
    after = share(
        tuple(there(p) for p in outline),
        [there(p) for p in points],
        holes=tuple(tuple(there(p) for p in hole) for hole in holes),
        direction=turned(direction) if direction else None,
    )
    assert [c.point for c in before.cells] == [c.point for c in after.cells]
    assert areas(after) == pytest.approx(areas(before), rel=1e-6, abs=1e-6)
