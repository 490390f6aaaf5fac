"""The plan as painted: cells, what they carry, the list of areas; and the laws of the file."""

from __future__ import annotations

import io
import math
from itertools import pairwise

import pytest
from ezdxf.entities.insert import Insert
from ezdxf.entities.lwpolyline import LWPolyline
from ezdxf.entities.text import Text
from ezdxf.filemanagement import read as read_dxf

from drawings import deck_plan
from dxfcable.drawing.items import Item, PolylineItem, TextItem
from dxfcable.drawing.painting.labels import text_corners
from dxfcable.drawing.painting.plan_labels import Shape, shapes
from dxfcable.job import Options, Outcome, solve_bytes, strip_bytes
from tests.drawing.excerpts import Sketch

Point = tuple[float, float]


def two_bays(*, at: Point = (4.0, -20.0), size: Point = (16.0, 8.0), h: float = 0.2) -> Sketch:
    """Give a cable with two marks, and a deck of two cells below it."""
    sketch = Sketch()
    sketch.doc.header["$INSUNITS"] = 6
    sketch.support(0, 12, MARK="S1", EL="12.000")
    sketch.support(24, 13, MARK="S2", EL="13.000")
    sketch.load_block(8, 7.8, MARK="P1")
    sketch.load_block(16, 7.9, MARK="P2")
    sketch.data(MARK="C1", SAG="2.4", UNDER="D")
    (x, y), (width, height) = at, size
    sketch.polyline("AREA", [(x, y), (x + width, y), (x + width, y + height), (x, y + height)])
    sketch.space[-1].dxf.flags = 1
    sketch.text(x + 0.1 * h, y + 0.1 * h, "D=1.5 kPa L=4 kPa", "AREA", h=h)
    for k in (1, 2):
        middle = (x + (2 * k - 1) * width / 4, y + height / 2)
        sketch.block("HANGER", middle, "S-CABL-PLAN", {"MARK": f"P{k}"})
    return sketch


def bytes_of(sketch: Sketch) -> bytes:
    stream = io.StringIO()
    sketch.doc.write(stream)
    return stream.getvalue().encode("utf-8")


def solved(data: bytes, options: Options | None = None) -> tuple[bytes, tuple[Item, ...], Outcome]:
    result, outcome = solve_bytes(data, options or Options(plot_scale="1:100"))
    assert outcome.painting is not None
    return result, tuple(i for i in outcome.painting.items if "/plan/" in i.id), outcome


def outlines(items: tuple[Item, ...]) -> dict[str, PolylineItem]:
    return {i.id: i for i in items if isinstance(i, PolylineItem) and "/outline/" in i.id}


def words(items: tuple[Item, ...], part: str) -> list[str]:
    return [i.text for i in items if isinstance(i, TextItem) and i.part == part]


def enclosed(points: tuple[Point, ...]) -> float:
    sides = pairwise((*points, points[0]))
    return 0.5 * abs(math.fsum(a[0] * b[1] - b[0] * a[1] for a, b in sides))


def test_each_cell_is_a_closed_outline_whose_area_is_what_its_label_says() -> None:
    _, items, _ = solved(bytes_of(two_bays()))
    found = outlines(items)
    assert list(found) == ["C1/plan/1/P1/outline/1", "C1/plan/1/P2/outline/1"]
    for name, item in found.items():
        assert item.is_closed
        assert enclosed(item.points) == pytest.approx(64.0, rel=1e-9)
        label = name.removesuffix("outline/1") + "label"
        mark = name.split("/")[3]
        assert words(items, label) == [f"{mark}: 64 m2", "D 96 kN", "L 256 kN"]
    assert {item.layer for item in items} == {"table"}


def test_labels_stand_in_their_cells_and_off_the_drafters_texts() -> None:
    _, items, _ = solved(bytes_of(two_bays()))
    for name, cell in outlines(items).items():
        xs, ys = zip(*cell.points, strict=True)
        part = name.removesuffix("outline/1") + "label"
        for item in items:
            if isinstance(item, TextItem) and item.part == part:
                for x, y in text_corners(item):
                    assert min(xs) < x < max(xs)
                    assert min(ys) < y < max(ys)
                    assert math.dist((x, y), (4.0, -20.0)) > 0.2


def test_the_number_of_an_area_stands_in_it() -> None:
    _, items, _ = solved(bytes_of(two_bays()))
    assert words(items, "C1/plan/1/label") == ["AREA 1"]


def test_the_list_names_areas_sums_and_the_caution() -> None:
    _, items, outcome = solved(bytes_of(two_bays()))
    listed = words(items, "C1/plan/list")
    for text in ("LOADED AREAS IN PLAN", "128 m2", "D=1.5 kPa L=4 kPa", "D 192 kN  L 512 kN"):
        assert text in listed
    assert "Preliminary calculation aid." in " ".join(listed)
    assert "NEAREST POINT" in listed
    assert "plan-list-placed" in {f.code for f in outcome.findings}


def test_a_cell_too_small_for_its_label_has_a_row_in_the_list() -> None:
    _, items, _ = solved(bytes_of(two_bays(size=(2.4, 0.4), h=0.01)))
    assert words(items, "C1/plan/1/P1/label") == []
    listed = words(items, "C1/plan/list")
    assert "P1" in listed
    assert "P2" in listed
    assert listed.count("0.48 m2") == 2


def test_a_narrow_cell_is_labelled_from_the_side() -> None:
    _, items, _ = solved(bytes_of(two_bays(size=(3.2, 9.0), h=0.02)))
    turned = [i for i in items if isinstance(i, TextItem) and i.rotation == 90.0]
    assert {i.part for i in turned} >= {"C1/plan/1/P1/label", "C1/plan/1/P2/label"}


def test_a_drawing_without_a_plan_has_none() -> None:
    sketch = two_bays()
    for entity in sketch.space:
        if entity.dxf.layer in ("S-CABL-AREA", "S-CABL-PLAN"):
            entity.dxf.layer = "0"
    for insert in sketch.space:
        if isinstance(insert, Insert) and insert.dxf.layer == "S-CABL-LOAD":
            insert.add_attrib("D", "15 kN", (0, 0))
    _, items, _ = solved(bytes_of(sketch))
    assert items == ()


def test_solving_twice_gives_the_same_bytes_and_strip_gives_the_file_back() -> None:
    data = bytes_of(two_bays())
    result, _, _ = solved(data)
    assert solved(result)[0] == result
    assert strip_bytes(result)[0] == data


@pytest.mark.parametrize("version", ["R12", "R2000", "R2018"])
def test_a_plan_is_written_in_every_release(version: str) -> None:
    sketch = two_bays()
    if version == "R12":
        for line in [e for e in sketch.space if isinstance(e, LWPolyline)]:
            points = [(x, y) for x, y, *_ in line.get_points()]
            sketch.space.add_polyline2d(points, close=True, dxfattribs={"layer": line.dxf.layer})
            sketch.space.delete_entity(line)
    sketch.doc.dxfversion = version
    data = bytes_of(sketch)
    options = Options(units="m", plot_scale="1:100")
    result, items, _ = solved(data, options)
    assert len(outlines(items)) == 2
    assert solved(result, options)[0] == result
    assert strip_bytes(result)[0] == data
    auditor = read_dxf(io.StringIO(result.decode("utf-8"))).audit()
    assert [e.message for e in auditor.errors] == []


def test_a_label_that_the_drafter_moved_stays_there() -> None:
    result, items, _ = solved(bytes_of(two_bays()))
    doc = read_dxf(io.StringIO(result.decode("utf-8")))
    moved = {"P1: 64 m2", "D 96 kN", "L 256 kN"}
    texts = [e for e in doc.modelspace() if isinstance(e, Text) and e.dxf.text in moved]
    for entity in texts[:3]:  # of the first cell
        entity.translate(0.5, 0.3, 0.0)
    stream = io.StringIO()
    doc.write(stream)
    again, kept, _ = solved(stream.getvalue().encode("utf-8"))
    part = "C1/plan/1/P1/label"
    before = [i.at for i in items if isinstance(i, TextItem) and i.part == part]
    after = [i.at for i in kept if isinstance(i, TextItem) and i.part == part]
    assert len(after) == 3
    for (x0, y0), (x1, y1) in zip(before, after, strict=True):
        assert (x1 - x0, y1 - y0) == pytest.approx((0.5, 0.3), abs=1e-6)
    others = [i for i in items if i.part != part]
    assert [i for i in kept if i.part != part] == others
    assert solved(again)[0] == again


def test_a_cell_with_an_opening_has_the_opening_as_a_ring_of_its_own() -> None:
    sketch = two_bays()
    sketch.polyline("AREA", [(5, -18), (6, -18), (6, -17), (5, -17)], close=True)
    _, items, _ = solved(bytes_of(sketch))
    found = outlines(items)
    assert enclosed(found["C1/plan/1/P1/outline/1"].points) == pytest.approx(64.0, rel=1e-9)
    assert enclosed(found["C1/plan/1/P1/outline/2"].points) == pytest.approx(1.0, rel=1e-9)
    assert words(items, "C1/plan/1/P1/label")[0] == "P1: 63 m2"


def two_cables() -> Sketch:
    """Give two cables with marks alike, one deck for both, and a second area on it."""
    sketch = Sketch()
    sketch.doc.header["$INSUNITS"] = 6
    for name, y in (("C1", 40.0), ("C2", 12.0)):
        ends = ((0.0, y), (24.0, y))
        for end in ends:
            sketch.support(*end, MARK="S", EL=f"{y:.3f}")
        sketch.string(*ends)
        for k in (1, 2):
            sketch.load_block(8 * k, y - 5, MARK=f"P{k}")
            values = {"MARK": f"P{k}", "CABLE": name}
            sketch.block("HANGER", (8 * k, -14 if name == "C1" else -20), "S-CABL-PLAN", values)
        sketch.data_at((12, y + 1), MARK=name, SAG="2.4", UNDER="D")
    sketch.polyline("AREA", [(4, -21), (20, -21), (20, -13), (4, -13)], close=True)
    sketch.text(4.2, -20.8, "D=1.5 kPa", "AREA")
    sketch.polyline("AREA", [(6, -15), (10, -15), (10, -13), (6, -13)], close=True)
    sketch.text(6.2, -13.4, "D=3 kPa", "AREA")
    return sketch


def test_cells_of_several_cables_stand_under_their_own_and_name_their_area() -> None:
    data = bytes_of(two_cables())
    result, items, outcome = solved(data)
    assert set(outlines(items)) == {
        *(f"C{c}/plan/1/P{k}/outline/1" for c in (1, 2) for k in (1, 2)),
        "C1/plan/2/P1/outline/1",
    }
    assert words(items, "C2/plan/1/P1/label") == ["P1 (1): 32 m2", "D 48 kN"]
    assert outcome.layout is not None
    first, second = outcome.layout.cables
    assert [dict(p.cases) for p in first.loads] == [{"D": 72.0}, {"D": 48.0}]
    assert [dict(p.cases) for p in second.loads] == [{"D": 48.0}, {"D": 48.0}]
    assert solved(result)[0] == result
    assert strip_bytes(result)[0] == data


def test_shapes_of_a_label_begin_with_the_usual_one() -> None:
    found = shapes("P1", "8 m2", ("D 10 kN", "L 40 kN"))
    assert found[0] == Shape(lines=("P1: 8 m2", "D 10 kN", "L 40 kN"))
    assert found[3].lines == ("P1: 8 m2  D 10 kN  L 40 kN",)
    assert [shape.is_turned for shape in found] == [False] * 4 + [True] * 4
    width, height = found[0].size(0.25)
    assert found[4].size(0.25) == (height, width)


def test_the_demonstration_plan_labels_every_cell() -> None:
    stream = io.StringIO()
    deck_plan.draw().write(stream)
    data = stream.getvalue().encode("utf-8")
    _, items, outcome = solved(data, Options())
    assert outcome.exit_code == 0
    for k in range(1, 10):
        assert words(items, f"C1/plan/1/P{k}/label"), k
