"""Free places are free, and the nearest ones."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.painting.block_places import FreeGround
from dxfcable.drawing.painting.free_place import OccupancyGrid, extents, grid_over

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.model import Point

REGION = (-10.0, -10.0, 30.0, 20.0)


def boxes(*rows: tuple[float, float, float, float]) -> NDArray[np.float64]:
    return np.array(rows, dtype=np.float64).reshape(-1, 4)


def grid(*rows: tuple[float, float, float, float]) -> OccupancyGrid:
    made = grid_over(REGION, 1.0, 10_000)
    made.add_boxes(boxes(*rows))
    return made


def place(
    *rows: tuple[float, float, float, float],
    wanted: Point,
    sizes: tuple[tuple[float, float], ...] = ((3.0, 2.0),),
    own: Bounds = REGION,
    others: tuple[Bounds, ...] = (),
    sheet: Bounds | None = None,
) -> tuple[int, Point]:
    """Place a block without a margin to speak of on ground with cells of a third of that."""
    ground = FreeGround(REGION, 10.0, 0.3, Obstacles(boxes(), boxes(*rows)), sheet)
    shape, corner, _ = ground.place(sizes, [wanted] * len(sizes), [own], others)
    return shape, corner


AWAY = (-9.0, -9.0, -8.0, -8.0)
TAKEN = (0.0, 0.0, 4.0, 4.0)


def test_the_wanted_place_is_taken_as_it_is_where_it_is_free() -> None:
    assert place(AWAY, wanted=(-7.6125, -9.0), own=AWAY) == (0, (-7.6125, -9.0))


def test_else_a_near_one() -> None:
    _, (x, y) = place(TAKEN, wanted=(1.0, 3.0), own=TAKEN)
    assert math.dist((x, y), (1.0, 3.0)) < 4.5
    assert x > 4.0 or x + 3.0 < 0.0 or y > 4.0 or y + 2.0 < 0.0


def test_a_place_on_the_sheet_goes_before_a_nearer_one_off_it() -> None:
    sheet = (-10.0, -10.0, 5.0, 5.0)
    taken = (0.0, 0.0, 4.0, 4.9)
    _, (x, y) = place(taken, wanted=(1.0, 4.0), own=AWAY, sheet=sheet)
    assert x + 3.0 <= 5.0
    assert y + 2.0 <= 5.0


def test_the_shape_that_fits_is_taken() -> None:
    sheet = (-10.0, -10.0, -4.0, 20.0)
    sizes = ((9.0, 2.0), (3.0, 6.0))
    assert place(AWAY, wanted=(-9.0, -7.0), sizes=sizes, own=AWAY, sheet=sheet)[0] == 1


def test_a_block_does_not_stand_nearer_to_another_cable() -> None:
    own, other = (-9.0, 8.0, 0.0, 12.0), (2.0, 8.0, 12.0, 12.0)
    _, (x, _) = place(own, other, wanted=(2.0, 5.0), own=own, others=(other,))
    assert x + 3.0 < 2.0


def test_a_window_may_be_kept_within_a_rectangle() -> None:
    made = grid((0.0, 0.0, 4.0, 4.0))
    within = (0.0, 0.0, 12.0, 4.5)
    assert made.free_windows(3.0, 2.0, within).min(axis=0).tolist() == [4.0, 0.0]
    assert made.free_windows(3.0, 2.0, within).max(axis=0).tolist() == [9.0, 2.0]
    assert len(made.free_windows(3.0, 5.0, within)) == 0
    assert made.is_free(3.0, 2.0, (4.0, 2.0), within)
    assert not made.is_free(3.0, 2.0, (4.0, 3.0), within)


def test_no_more_windows_are_looked_at_than_told() -> None:
    few = grid().free_windows(2.0, 2.0, most=50)
    assert 20 <= len(few) <= 120


def test_touching_is_free() -> None:
    made = grid((0.0, 0.0, 4.0, 4.0))
    assert made.taken(boxes((4.0, 0.0, 6.0, 4.0), (3.999, 0.0, 6.0, 4.0))).tolist() == [0, 4]


def test_a_full_region_has_no_place() -> None:
    assert len(grid(REGION).free_windows(1.0, 1.0)) == 0
    assert len(grid().free_windows(100.0, 1.0)) == 0


def test_what_lies_off_the_region_does_not_count() -> None:
    made = grid((100.0, 0.0, 110.0, 5.0))
    assert made.taken(boxes((99.0, 0.0, 120.0, 9.0))).tolist() == [0]
    assert made.is_free(30.0, 20.0, (-5.0, -5.0))


def test_a_sloping_line_takes_the_cells_along_it_and_not_its_whole_box() -> None:
    made = grid_over(REGION, 1.0, 10_000)
    made.add_segments(boxes((-10.0, -10.0, 20.0, 20.0)))
    taken = made.taken(boxes((15.0, -9.0, 20.0, -4.0), (4.0, 4.0, 6.0, 6.0)))
    assert taken[0] == 0
    assert taken[1] > 0


def test_a_point_takes_its_cell() -> None:
    made = grid_over(REGION, 1.0, 10_000)
    made.add_segments(boxes((3.5, 3.5, 3.5, 3.5)))
    assert made.taken(boxes((3.0, 3.0, 4.0, 4.0))).tolist() == [1]


@settings(deadline=None)
@given(
    st.lists(
        st.tuples(st.floats(-10, 30), st.floats(-10, 20), st.floats(0, 6), st.floats(0, 6)),
        max_size=12,
    ),
    st.floats(0.5, 9.0),
    st.floats(0.5, 9.0),
)
def test_what_is_found_overlaps_nothing(
    drawn: list[tuple[float, float, float, float]], width: float, height: float
) -> None:
    rows = [(x, y, x + w, y + h) for x, y, w, h in drawn]
    for x, y in grid(*rows).free_windows(width, height)[::7].tolist():
        for x0, y0, x1, y1 in rows:
            # Touching cells count as free up to a millionth of a cell.
            is_left, is_right = x + width <= x0 + 1e-5, x1 <= x + 1e-5
            assert is_left or is_right or y + height <= y0 + 1e-5 or y1 <= y + 1e-5


def test_too_many_cells_become_larger_ones() -> None:
    made = grid_over((0.0, 0.0, 1000.0, 1000.0), 0.01, 10_000)
    assert made.columns * made.rows <= 10_201


def test_extents_hold_every_end_and_box() -> None:
    obstacles = Obstacles(boxes((5.0, 9.0, -3.0, 2.0)), boxes((0.0, -7.0, 4.0, 1.0)))
    assert extents(obstacles) == (-3.0, -7.0, 5.0, 9.0)
    assert extents(Obstacles(boxes(), boxes())) is None
