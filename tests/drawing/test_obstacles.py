"""What the drafter drew is in the way, as lines and as boxes."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING

import numpy as np
import pytest
from ezdxf.filemanagement import new
from hypothesis import given

from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.obstacles import obstacles
from tests.generated import drawings

if TYPE_CHECKING:
    from dxfcable.drawing.excerpt import Obstacles


def found(draw: object) -> Obstacles:
    document = new("R2000")
    assert callable(draw)
    draw(document)
    stream = io.StringIO()
    document.write(stream)
    return obstacles(scan(stream.getvalue().encode("utf-8")))


def sides(there: Obstacles) -> set[tuple[float, ...]]:
    return {tuple(row) for row in there.segments.tolist()}


def test_lines_and_all_sides_of_closed_polylines() -> None:
    def draw(document: object) -> None:
        space = document.modelspace()  # type: ignore[attr-defined]  # a library document
        space.add_line((0, 0), (5, 1))
        space.add_lwpolyline([(0, 0), (4, 0), (4, 3)], close=True)
        space.add_polyline2d([(10, 0), (14, 0), (14, 3)], close=True)
        space.add_lwpolyline([(20, 0), (24, 0), (24, 3)])
        space.add_point((7, 7))

    there = sides(found(draw))
    assert (0, 0, 5, 1) in there
    assert {(0, 0, 4, 0), (4, 0, 4, 3), (4, 3, 0, 0)} <= there
    assert {(10, 0, 14, 0), (14, 0, 14, 3), (14, 3, 10, 0)} <= there
    assert (24, 3, 20, 0) not in there
    assert (7, 7, 7, 7) in there
    assert not any(side[:2] == (0, 0) and side[2:] == (10, 0) for side in there)


def test_circles_texts_attributes_and_blocks_are_boxes() -> None:
    def draw(document: object) -> None:
        space = document.modelspace()  # type: ignore[attr-defined]  # a library document
        block = document.blocks.new("SYMBOL", base_point=(1, 0))  # type: ignore[attr-defined]
        block.add_line((1, 0), (3, 2))
        block.add_attdef("TAG", (1, 0), height=0.5)
        inner = document.blocks.new("OUTER")  # type: ignore[attr-defined]
        inner.add_blockref("SYMBOL", (5, 5), dxfattribs={"xscale": 2, "yscale": 2})
        space.add_circle((100, 100), 5)
        space.add_text("WORDS", height=2).set_placement((0, 50))
        space.add_blockref("SYMBOL", (200, 0), dxfattribs={"rotation": 90})
        space.add_blockref("OUTER", (300, 0))
        space.add_blockref("SYMBOL", (400, 0)).add_auto_attribs({"TAG": "VALUE"})

    boxes = found(draw).boxes
    assert [95, 95, 105, 105] in boxes.tolist()
    assert any(b[0] <= 0 and b[2] >= 8 and b[1] <= 50 and b[3] >= 52 for b in boxes)
    turned = boxes[(boxes[:, 0] > 190) & (boxes[:, 0] < 210)]
    assert turned.tolist() == [[198, pytest.approx(0), 200, 2]] or np.allclose(
        turned, [[198, 0, 200, 2]]
    )
    nested = boxes[(boxes[:, 0] > 290) & (boxes[:, 0] < 330)]
    assert np.allclose(nested, [[305, 5, 309, 9]])
    assert len(boxes[(boxes[:, 0] > 390)]) == 2  # the block, and its attribute's text


def test_paper_space_is_in_nobodys_way() -> None:
    def draw(document: object) -> None:
        document.layout("Layout1").add_line((0, 0), (9, 9))  # type: ignore[attr-defined]

    assert not len(found(draw).segments)


@given(drawings())
def test_any_drawing_has_finite_obstacles(data: bytes) -> None:
    there = obstacles(scan(data))
    assert np.isfinite(there.segments).all()
    assert np.isfinite(there.boxes).all()
    assert (there.boxes[:, 0] <= there.boxes[:, 2]).all()
    assert (there.boxes[:, 1] <= there.boxes[:, 3]).all()


def _reaches(there: Obstacles, x: float, y: float) -> bool:
    boxes = there.boxes
    inside = (boxes[:, 0] <= x) & (x <= boxes[:, 2]) & (boxes[:, 1] <= y) & (y <= boxes[:, 3])
    return bool(inside.any())


def test_what_is_filled_or_bent_is_in_the_way() -> None:
    def draw(document: object) -> None:
        space = document.modelspace()  # type: ignore[attr-defined]  # a library document
        hatch = space.add_hatch()
        hatch.paths.add_polyline_path([(100, 100), (110, 100), (110, 120), (100, 120)])
        space.add_solid([(200, 0), (210, 0), (200, 10), (210, 10)])
        space.add_3dface([(300, 0), (310, 0), (310, 10), (300, 10)])
        space.add_ellipse((400, 0), major_axis=(5, 0), ratio=0.5)
        space.add_lwpolyline([(500, 0, 0, 0, 1), (510, 0)], format="xyseb")
        block = document.blocks.new("CELL")  # type: ignore[attr-defined]
        block.add_line((0, 0), (1, 1))
        array = {"row_count": 3, "column_count": 4, "row_spacing": 5, "column_spacing": 6}
        space.add_blockref("CELL", (600, 0), dxfattribs=array)

    there = found(draw)
    for x, y in ((105, 110), (205, 5), (305, 5), (403, 2), (505, 4.9), (618.5, 10.5)):
        assert _reaches(there, x, y), (x, y)
    assert not _reaches(there, 50, 50)
    assert there.boxes[:, 0].min() > 99


def test_rays_are_followed_beyond_everything() -> None:
    def draw(document: object) -> None:
        space = document.modelspace()  # type: ignore[attr-defined]  # a library document
        space.add_line((0, 0), (10, 10))
        space.add_ray((0, 0), (1, 0))
        space.add_xline((0, 5), (0, 1))

    there = found(draw)
    assert there.segments[:, 2].max() >= 40
    assert there.segments[:, [1, 3]].max() >= 40
    assert there.segments[:, [1, 3]].min() <= -30
