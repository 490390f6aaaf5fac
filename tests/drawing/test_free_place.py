"""Free places are free, and the nearest ones."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.painting.free_place import OccupancyGrid, extents, grid_over

if TYPE_CHECKING:
    from numpy.typing import NDArray

REGION = (-10.0, -10.0, 30.0, 20.0)


def boxes(*rows: tuple[float, float, float, float]) -> NDArray[np.float64]:
    return np.array(rows, dtype=np.float64).reshape(-1, 4)


def grid(*rows: tuple[float, float, float, float]) -> OccupancyGrid:
    made = grid_over(REGION, 1.0, 10_000)
    made.add_boxes(boxes(*rows))
    return made


def test_the_wanted_place_is_taken_as_it_is_where_it_is_free() -> None:
    assert grid((0.0, 0.0, 2.0, 2.0)).nearest_free(3.0, 2.0, (2.125, 0.5)) == (2.125, 0.5)


def test_else_the_nearest_one() -> None:
    assert grid((0.0, 0.0, 4.0, 4.0)).nearest_free(3.0, 2.0, (1.0, 3.0)) == (1.0, 4.0)


def test_a_window_may_be_kept_within_a_rectangle() -> None:
    made = grid((0.0, 0.0, 4.0, 4.0))
    within = (0.0, 0.0, 12.0, 4.5)
    assert made.nearest_free(3.0, 2.0, (1.0, 3.0), within) == (4.0, 2.0)
    assert made.nearest_free(3.0, 5.0, (1.0, 3.0), within) is None


def test_touching_is_free() -> None:
    made = grid((0.0, 0.0, 4.0, 4.0))
    assert made.taken(boxes((4.0, 0.0, 6.0, 4.0), (3.999, 0.0, 6.0, 4.0))).tolist() == [0, 4]


def test_a_full_region_has_no_place() -> None:
    assert grid(REGION).nearest_free(1.0, 1.0, (0.0, 0.0)) is None
    assert grid().nearest_free(100.0, 1.0, (0.0, 0.0)) is None


def test_what_lies_off_the_region_does_not_count() -> None:
    made = grid((100.0, 0.0, 110.0, 5.0))
    assert made.taken(boxes((99.0, 0.0, 120.0, 9.0))).tolist() == [0]
    assert made.nearest_free(30.0, 20.0, (-5.0, -5.0)) == (-5.0, -5.0)


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
    found = grid(*rows).nearest_free(width, height, (3.0, 3.0))
    if found is None:
        return
    x, y = found
    for x0, y0, x1, y1 in rows:
        # Touching cells count as free up to a millionth of a cell.
        assert x + width <= x0 + 1e-5 or x1 <= x + 1e-5 or y + height <= y0 + 1e-5 or y1 <= y + 1e-5


def test_too_many_cells_become_larger_ones() -> None:
    made = grid_over((0.0, 0.0, 1000.0, 1000.0), 0.01, 10_000)
    assert made.columns * made.rows <= 10_201


def test_extents_hold_every_end_and_box() -> None:
    obstacles = Obstacles(boxes((5.0, 9.0, -3.0, 2.0)), boxes((0.0, -7.0, 4.0, 1.0)))
    assert extents(obstacles) == (-3.0, -7.0, 5.0, 9.0)
    assert extents(Obstacles(boxes(), boxes())) is None
