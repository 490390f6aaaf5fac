"""A framing plan is read as drawn: areas, openings, pressures, directions, hanger points."""

from __future__ import annotations

import pytest

from dxfcable.settings import load
from tests.drawing.excerpts import FOOT, MILLIMETRE, Sketch, codes, errors, finding

Point = tuple[float, float]


def plan(insunits: int = 6, *, text: str = "D=1.2 kPa L=4 kPa", marks: bool = True) -> Sketch:
    """Give an elevation with two load points without values, and a plan 10 below it."""
    sketch = Sketch(insunits)
    sketch.support(0, 12, MARK="S1", EL="12.000")
    sketch.support(24, 13, MARK="S2", EL="13.000")
    sketch.load_block(8, 7.8, MARK="P1")
    sketch.load_block(16, 7.9, MARK="P2")
    sketch.data(MARK="C1", SAG="2.4", UNDER="D")
    area(sketch, (4, -12), (20, -9))
    if text:
        sketch.text(4.5, -11.8, text, "AREA")
    for name, x in (("P1", 8.0), ("P2", 16.0)):
        sketch.space.add_point((x, -10.5), dxfattribs={"layer": "S-CABL-PLAN"})
        if marks:
            sketch.text(x + 0.2, -10.4, name, "PLAN")
    return sketch


def area(sketch: Sketch, low: Point, high: Point) -> None:
    corners = [low, (high[0], low[1]), high, (low[0], high[1])]
    sketch.polyline("AREA", corners, close=True)


def plan_errors(sketch: Sketch) -> list[str]:
    """List what stops, but for values that only the sharing gives."""
    return [code for code in errors(sketch.read()) if code != "load-value-missing"]


def test_an_area_is_read_with_its_pressures_by_the_drawings_unit() -> None:
    layout = plan().read()
    (found,) = layout.plan
    assert found.outline == ((4, -12), (20, -12), (20, -9), (4, -9))
    assert found.pressures == (("D", 1.2), ("L", 4.0))
    assert (found.number, found.direction, found.holes) == (1, None, ())
    assert [(p.mark, p.at) for p in layout.plan_points] == [("P1", (8, -10.5)), ("P2", (16, -10.5))]
    assert layout.force_unit == "kN"
    assert layout.text_height == 0.2
    assert plan_errors(plan()) == []


def test_pressures_follow_the_drawings_unit_of_length() -> None:
    ((_, dead), (_, live)) = plan(MILLIMETRE).read().plan[0].pressures
    assert (dead, live) == pytest.approx((1.2e-6, 4e-6), rel=1e-14)


@pytest.mark.parametrize(
    ("insunits", "text", "unit"),
    [(FOOT, "35 psf", "lb"), (FOOT, "0.1 ksf", "kip"), (6, "900 Pa", "N"), (6, "2 kN/m2", "kN")],
)
def test_the_pressures_force_is_taken_where_no_other_is_known(
    insunits: int, text: str, unit: str
) -> None:
    assert plan(insunits, text=text).read().force_unit == unit


def test_another_unit_of_force_wins_and_the_conversion_is_said() -> None:
    sketch = plan(FOOT, text="35 psf")
    sketch.load_block(12, 7.5, MARK="P3", D="3 kip")
    layout = sketch.read()
    assert layout.force_unit == "kip"
    assert dict(layout.plan[0].pressures)["load"] == pytest.approx(0.035, rel=1e-14)
    assert "lb" in finding(layout, "force-units-mixed").text


def test_an_outline_without_text_inside_an_area_is_an_opening() -> None:
    sketch = plan()
    area(sketch, (9, -11), (10, -10))
    sketch.line("AREA", (9, -11), (10, -10))  # the usual cross of an opening is symbol
    sketch.line("AREA", (9, -10), (10, -11))
    layout = sketch.read()
    assert layout.plan[0].holes == (((9, -11), (10, -11), (10, -10), (9, -10)),)
    assert layout.plan[0].direction is None
    assert plan_errors(sketch) == []


def test_an_outline_with_its_own_text_inside_an_area_is_an_area() -> None:
    sketch = plan()
    area(sketch, (9, -11), (15, -10))
    sketch.text(10, -10.5, "D=3 kPa", "AREA")
    assert [(a.number, len(a.holes)) for a in sketch.read().plan] == [(1, 0), (2, 0)]


def test_a_polyline_that_ends_where_it_began_is_closed() -> None:
    sketch = plan(text="")
    for entity in sketch.space.query("LWPOLYLINE"):
        entity.dxf.layer = "0"
    sketch.polyline("AREA", [(4, -12), (20, -12), (20, -9), (4, -9), (4, -12)])
    sketch.text(4.5, -11.8, "D=1.2 kPa", "AREA")
    assert len(sketch.read().plan[0].outline) == 4


def test_a_line_inside_is_the_direction_and_its_arrowheads_are_symbol() -> None:
    sketch = plan()
    sketch.line("AREA", (10, -11), (14, -11))
    for y in (-10.9, -11.1):
        sketch.line("AREA", (14, -11), (13.8, y))
        sketch.line("AREA", (10, -11), (10.2, y))
    layout = sketch.read()
    assert layout.plan[0].direction == ((10, -11), (14, -11))
    assert plan_errors(sketch) == []


def test_two_lines_the_same_way_are_one_direction_and_two_ways_stop() -> None:
    sketch = plan()
    sketch.line("AREA", (10, -11), (14, -11))
    sketch.line("AREA", (10, -10), (13, -10))
    assert plan_errors(sketch) == []
    sketch.line("AREA", (12, -11.5), (12, -9.5))
    assert plan_errors(sketch) == ["area-direction"]


def test_areas_are_numbered_left_to_right_then_top_to_bottom() -> None:
    sketch = plan()
    for low, high in (((30.0, -12.0), (34.0, -9.0)), ((0.0, -16.0), (3.0, -14.0))):
        area(sketch, low, high)
        sketch.text(low[0] + 1, low[1] + 1, "D=2 kPa", "AREA")
    area(sketch, (30, -8), (34, -6))
    sketch.text(31, -7, "D=2 kPa", "AREA")
    found = [(a.number, a.outline[0]) for a in sketch.read().plan]
    assert found == [(1, (0, -16)), (2, (4, -12)), (3, (30, -8)), (4, (30, -12))]


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("D=1.2", "load-unit-missing"),
        ("12 kN", "pressure-unread"),
        ("D=1.2 kPa X=3 kPa", "load-case-unknown"),
        ("120 kg/m2", "load-is-mass"),
    ],
)
def test_a_doubtful_pressure_stops_and_shows_its_text(text: str, code: str) -> None:
    sketch = plan(text=text)
    assert plan_errors(sketch) == [code]
    assert finding(sketch.read(), code).raw == text


def test_an_area_without_pressure_stops() -> None:
    assert plan_errors(plan(text="")) == ["area-text-missing"]


def test_a_pressure_in_no_area_stops() -> None:
    sketch = plan()
    sketch.text(30, -10, "D=2 kPa", "AREA")
    assert plan_errors(sketch) == ["area-text-stray"]


def test_two_pressures_in_one_area_stop() -> None:
    sketch = plan()
    sketch.text(10, -11.5, "S=2 kPa", "AREA")
    assert plan_errors(sketch) == ["area-texts-two"]


def test_a_pressure_where_two_areas_overlap_stops() -> None:
    sketch = plan()
    area(sketch, (15, -12), (24, -9))
    sketch.text(17, -11.5, "S=2 kPa", "AREA")
    assert "area-text-stray" in plan_errors(sketch)


def test_other_texts_on_the_area_layer_are_listed() -> None:
    sketch = plan()
    sketch.text(10, -11.5, "TIMBER DECK", "AREA")
    assert "TIMBER DECK" in finding(sketch.read(), "texts-listed").text
    assert plan_errors(sketch) == []


def test_a_text_and_an_outline_drawn_twice_count_once() -> None:
    sketch = plan()
    area(sketch, (4, -12), (20, -9))
    sketch.text(4.5, -11.8, "D=1.2 kPa L=4 kPa", "AREA")
    layout = sketch.read()
    assert len(layout.plan) == 1
    assert {"area-merged", "text-merged"} <= set(codes(layout))
    assert plan_errors(sketch) == []


@pytest.mark.parametrize(
    ("points", "close", "code"),
    [
        ([(30, 0), (34, 4), (34, 0), (30, 4)], True, "area-shape"),
        ([(30, 0), (34, 0)], True, "area-shape"),
        ([(30, 0), (34, 0), (34, 4), (30, 4)], False, "area-direction"),
    ],
)
def test_an_outline_that_is_none_stops(points: list[Point], close: bool, code: str) -> None:
    sketch = plan()
    sketch.polyline("AREA", points, close=close)
    assert plan_errors(sketch) == [code]


def test_a_c_shaped_outline_does_not_cross_itself() -> None:
    sketch = plan()
    corners = [(30, 0), (36, 0), (36, 2), (32, 2), (32, 4), (36, 4), (36, 6), (30, 6)]
    sketch.polyline("AREA", corners, close=True)
    sketch.text(30.5, 1, "D=2 kPa", "AREA")
    assert plan_errors(sketch) == []


def test_a_circle_as_area_stops() -> None:
    sketch = plan()
    sketch.space.add_circle((12, -10.5), 0.5, dxfattribs={"layer": "S-CABL-AREA"})
    assert plan_errors(sketch) == ["area-shape"]


def test_a_line_in_no_area_stops() -> None:
    sketch = plan()
    sketch.line("AREA", (18, -10), (30, -10))
    assert plan_errors(sketch) == ["area-direction"]


# --- hanger points --------------------------------------------------------------------------


def test_a_block_names_its_mark_and_cable() -> None:
    sketch = plan()
    sketch.block("HANGER", (12, -10), "S-CABL-PLAN", {"MARK": "P3", "CABLE": "C1"})
    point = sketch.read().plan_points[-1]
    assert (point.mark, point.cable, point.at) == ("P3", "C1", (12, -10))


def test_a_circle_with_its_mark_is_a_hanger_point() -> None:
    sketch = plan()
    sketch.space.add_circle((12, -10), 0.1, dxfattribs={"layer": "S-CABL-PLAN"})
    sketch.text(12.2, -10, "P3", "PLAN")
    assert sketch.read().plan_points[-1].mark == "P3"


def test_a_point_within_a_circle_is_one_hanger_point() -> None:
    sketch = plan()
    sketch.space.add_circle((8, -10.5), 0.1, dxfattribs={"layer": "S-CABL-PLAN"})
    assert len(sketch.read().plan_points) == 2
    assert plan_errors(sketch) == []


def test_a_point_without_mark_stops() -> None:
    assert plan_errors(plan(marks=False)) == ["plan-mark-missing"] * 2


def test_a_mark_out_of_reach_is_said_and_its_point_stops() -> None:
    sketch = plan(marks=False)
    sketch.text(8.2, -10.4, "P1", "PLAN")
    sketch.text(16, -14, "P2", "PLAN")  # 6 heights of 0.2 are 1.2
    assert plan_errors(sketch) == ["plan-mark-missing"]
    assert "mark-unclaimed" in codes(sketch.read())
    wider = load("[limits]\ntext_reach = 20.0\n")
    assert [p.mark for p in sketch.read(wider).plan_points] == ["P1", "P2"]


def test_a_mark_between_two_points_stops() -> None:
    sketch = plan(marks=False)
    sketch.text(8.2, -10.4, "P1", "PLAN")
    sketch.text(16.2, -10.4, "P2", "PLAN")
    sketch.space.add_point((12, -10), dxfattribs={"layer": "S-CABL-PLAN"})
    sketch.space.add_point((12.8, -10), dxfattribs={"layer": "S-CABL-PLAN"})
    sketch.text(12.4, -10, "P3", "PLAN")
    assert plan_errors(sketch) == ["mark-unclaimed", "plan-mark-missing", "plan-mark-missing"]


def test_two_marks_at_one_point_stop() -> None:
    sketch = plan()
    sketch.text(8.2, -10.9, "P9", "PLAN")
    assert plan_errors(sketch) == ["plan-mark-repeated"]


def test_a_force_beside_a_hanger_point_stops() -> None:
    sketch = plan()
    sketch.text(8.2, -11, "12 kN", "PLAN")
    assert plan_errors(sketch) == ["load-text-unclaimed"]


def test_areas_without_points_and_points_without_areas_stop() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(24, 12)
    sketch.load(12, 8, "D=3 kN")
    area(sketch, (4, -12), (20, -9))
    sketch.text(5, -11, "D=1 kPa", "AREA")
    assert plan_errors(sketch) == ["plan-incomplete"]
    other = Sketch()
    other.support(0, 12)
    other.support(24, 12)
    other.load(12, 8, "D=3 kN")
    other.block("HANGER", (12, -10), "S-CABL-PLAN", {"MARK": "P1"})
    assert plan_errors(other) == ["plan-incomplete"]


def test_layers_of_the_office_are_read() -> None:
    sketch = plan()
    for entity in sketch.space:
        layer = entity.dxf.layer
        entity.dxf.layer = {"S-CABL-AREA": "a-flor-load", "S-CABL-PLAN": "a-hang"}.get(layer, layer)
    settings = load('[layers]\narea = "A-FLOR-LOAD"\nplan_point = "A-HANG"\n')
    layout = sketch.read(settings)
    assert (len(layout.plan), len(layout.plan_points)) == (1, 2)
