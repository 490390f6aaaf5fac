"""A framing plan's areas become the loads of load points, matched by mark; sums are said.

Rules: domain page section 5 of the trade (tributary areas: public pages, PART; one-way decks and
the printed sum: common practice, MEM). Numbers are our own, worked by hand (OWN).
"""

from __future__ import annotations

import math
import subprocess
import sys
from dataclasses import replace
from typing import Any

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.codes import MEANINGS
from dxfcable.loads import plan_loads
from dxfcable.model import (
    Cable,
    Finding,
    Layout,
    LoadPoint,
    LoadSymbol,
    Origin,
    PlanArea,
    PlanPoint,
    Severity,
    Support,
)
from dxfcable.settings import Settings
from tests.drawing.excerpts import Sketch
from tests.layouts import cable, layout

Point = tuple[float, float]
DEAD_LIVE = (("D", 1.2), ("L", 4.0))


def open_point(mark: str, x: float, line: int = 0) -> LoadPoint:
    """Return a load point without a value."""
    origin = Origin(handle=mark, line=line, layer="S-CABL-LOAD", kind="POINT", at=(x, 7.0))
    return LoadPoint(mark=mark, x=x, y=7.0, cases=(), symbol=LoadSymbol.POINT, origin=origin)


def missing(load: LoadPoint) -> Finding:
    """Return what the reader says of it."""
    return Finding(
        code="load-value-missing",
        severity=Severity.ERROR,
        text=f"load point {load.mark} has no value",
        handle=load.origin.handle,
        line=load.origin.line,
        at=load.origin.at,
    )


def box(low: Point, high: Point) -> tuple[Point, ...]:
    return (low, (high[0], low[1]), high, (low[0], high[1]))


DECK = PlanArea(number=1, outline=box((4, -12), (20, -9)), pressures=DEAD_LIVE)
POINTS = (PlanPoint(mark="P1", at=(8, -10.5)), PlanPoint(mark="P2", at=(16, -10.5)))


def planned(
    *cables: Cable,
    areas: tuple[PlanArea, ...] = (DECK,),
    points: tuple[PlanPoint, ...] = POINTS,
) -> Layout:
    """Return a layout with a plan, as the reader hands it over."""
    cables = cables or (cable(loads=(open_point("P1", 8.0, 1), open_point("P2", 16.0, 2))),)
    every = [load for c in cables for load in (*c.loads, *(p for _, p in c.support_loads))]
    return replace(
        layout(*cables),
        plan=areas,
        plan_points=points,
        findings=tuple(missing(load) for load in every if not load.cases),
    )


def applied(given_layout: Layout) -> Layout:
    return plan_loads.apply(given_layout, Settings())


def errors(found: Layout) -> list[str]:
    assert {f.code for f in found.findings} <= set(MEANINGS)
    return [f.code for f in found.findings if f.severity is Severity.ERROR]


def cases(found: Layout, index: int = 0) -> list[dict[str, float]]:
    return [dict(load.cases) for load in found.cables[index].loads]


def test_load_points_carry_pressure_times_their_area_and_count_as_drawn() -> None:
    found = applied(planned())
    # Half distance between 8 and 16 is 12: 8 x 3 = 24 m2 each.
    assert cases(found) == [{"D": 28.8, "L": 96.0}] * 2
    assert errors(found) == []
    assert {load.source for load in found.cables[0].loads} == {"drawing"}
    assert [(c.mark, c.cable, c.area) for c in found.plan[0].cells] == [
        ("P1", 0, 24),
        ("P2", 0, 24),
    ]
    assert found.plan[0].net_area == 48.0


def test_the_sum_of_an_area_is_said() -> None:
    (note,) = [f for f in applied(planned()).findings if f.code == "plan-shared"]
    assert note.severity is Severity.NOTE
    assert note.text == (
        "plan area 1: 2 points (nearest points), net area 48 m2, D 57.6 kN, L 192 kN; "
        "the sum of the cells equals pressure times net area"
    )


def test_a_layout_without_a_plan_comes_back_as_it_is() -> None:
    plain = layout(cable())
    assert plan_loads.apply(plain, Settings()) is plain


def test_a_solve_without_a_plan_imports_no_geometry_library() -> None:
    program = (
        "import sys; from dxfcable.loads import plan_loads; "
        "from dxfcable.settings import Settings; "
        "from tests.layouts import layout, cable; plan_loads.apply(layout(cable()), Settings()); "
        "assert 'shapely' not in sys.modules, 'shapely'"
    )
    subprocess.run([sys.executable, "-c", program], check=True)


def test_a_direction_makes_strips_and_a_point_on_no_line_gets_nothing() -> None:
    deck = replace(DECK, direction=((6, -10), (9, -10)))
    loads = tuple(open_point(f"P{k}", x, k) for k, x in ((1, 8.0), (2, 11.0), (3, 16.0)))
    spots = ((8, -9), (8, -12), (16, -9), (16, -12), (11, -10.5))
    far = cable(
        mark="C2",
        loads=(open_point("Q1", 8.0, 8), open_point("Q3", 16.0, 9)),
        supports=tuple(replace(s, key=s.key + 2, y=s.y + 9) for s in cable().supports),
    )
    points = tuple(
        PlanPoint(mark=m, at=at)
        for m, at in zip(("P1", "Q1", "P3", "Q3", "P2"), spots, strict=True)
    )
    found = applied(planned(cable(loads=loads), far, areas=(deck,), points=points))
    assert errors(found) == []
    assert cases(found) == [{"D": 14.4, "L": 48.0}, {"D": 0.0, "L": 0.0}, {"D": 14.4, "L": 48.0}]
    assert cases(found, 1) == [{"D": 14.4, "L": 48.0}] * 2
    (note,) = [f for f in found.findings if f.code == "plan-point-free"]
    assert "P2 is on no supporting line" in note.text


def test_areas_add_up_at_a_point_and_their_overlap_is_said() -> None:
    kiosk = PlanArea(number=2, outline=box((6, -12), (10, -10)), pressures=(("D", 2.0), ("S", 1.0)))
    found = applied(planned(areas=(DECK, kiosk)))
    assert cases(found)[0] == {"D": 28.8 + 16.0, "L": 96.0, "S": 8.0}
    (note,) = [f for f in found.findings if f.code == "area-overlap"]
    assert "overlap by 8 m2" in note.text
    assert errors(found) == []


def test_an_opening_is_taken_off() -> None:
    deck = replace(DECK, holes=(box((5, -11), (6, -10)),))
    found = applied(planned(areas=(deck,)))
    assert cases(found) == [{"D": 27.6, "L": 92.0}, {"D": 28.8, "L": 96.0}]


def test_a_point_in_no_area_gets_no_load_and_it_is_said() -> None:
    points = (*POINTS, PlanPoint(mark="P3", at=(22, -10.5)))
    loads = tuple(open_point(f"P{k}", x, k) for k, x in ((1, 8.0), (2, 16.0), (3, 22.0)))
    found = applied(planned(cable(loads=loads), points=points))
    assert cases(found)[2] == {"D": 0.0, "L": 0.0}
    (note,) = [f for f in found.findings if f.code == "plan-point-free"]
    assert "P3 stands in no area" in note.text
    assert errors(found) == []


def test_a_load_at_a_support_is_filled_too() -> None:
    loads = (open_point("P2", 16.0, 2),)
    ends = ((0, open_point("P1", 0.0, 1)),)
    found = applied(planned(cable(loads=loads, support_loads=ends)))
    assert dict(found.cables[0].support_loads[0][1].cases) == {"D": 28.8, "L": 96.0}
    assert errors(found) == []


def test_a_load_point_that_the_plan_lacks_still_misses_its_value() -> None:
    loads = (*(open_point(f"P{k}", 8.0 * k, k) for k in (1, 2)), open_point("P3", 20.0, 3))
    found = applied(planned(cable(loads=loads)))
    assert errors(found) == ["load-value-missing"]
    assert "P3" in next(f.text for f in found.findings if f.code == "load-value-missing")


def test_a_value_in_the_elevation_and_in_the_plan_stops() -> None:
    valued = replace(open_point("P1", 8.0, 1), cases=(("D", 9.0),))
    found = applied(planned(cable(loads=(valued, open_point("P2", 16.0, 2)))))
    assert errors(found) == ["load-conflict"]
    assert cases(found)[0] == {"D": 9.0}


def test_a_hanger_point_without_a_load_point_stops() -> None:
    points = (*POINTS, PlanPoint(mark="P9", at=(12, -10.5)))
    found = applied(planned(points=points))
    assert errors(found) == ["plan-mark-unknown"]
    assert "P1, P2" in next(f.remedy for f in found.findings if f.code == "plan-mark-unknown")


def test_two_hanger_points_for_one_load_point_stop() -> None:
    points = (*POINTS, PlanPoint(mark="p2", at=(12, -10.5)))
    assert errors(applied(planned(points=points))) == ["plan-mark-repeated"]


def twin() -> tuple[Cable, Cable]:
    """Return two cables, each with its own P1 and P2."""
    supports = (Support(key=2, mark="S3", x=0.0, y=32.0), Support(key=3, mark="S4", x=24.0, y=32.0))
    first, second = ((open_point("P1", 8.0, k), open_point("P2", 16.0, k + 1)) for k in (1, 3))
    upper = tuple(replace(p, y=27.0, origin=replace(p.origin, at=(p.x, 27.0))) for p in second)
    return cable(loads=first), cable(mark="C2", supports=supports, loads=upper)


def test_a_mark_at_two_cables_stops_unless_the_block_names_the_cable() -> None:
    assert errors(applied(planned(*twin())))[:2] == ["load-value-missing"] * 2
    assert "plan-mark-ambiguous" in errors(applied(planned(*twin())))
    points = tuple(
        PlanPoint(mark=f"P{k}", cable=name, at=(8.0 * k, y))
        for name, y in (("C1", -9.0), ("c2", -12.0))
        for k in (1, 2)
    )
    found = applied(planned(*twin(), points=points))
    assert errors(found) == []
    assert cases(found, 0) == cases(found, 1) == [{"D": 14.4, "L": 48.0}] * 2
    assert {c.cable for c in found.plan[0].cells} == {0, 1}


def test_a_cable_that_is_not_drawn_stops() -> None:
    points = (replace(POINTS[0], cable="C7"), POINTS[1])
    assert "cable-unknown" in errors(applied(planned(points=points)))


def test_an_area_that_no_hanger_point_stands_on_stops() -> None:
    far = PlanArea(number=2, outline=box((40, 0), (44, 4)), pressures=DEAD_LIVE)
    found = applied(planned(areas=(DECK, far)))
    assert errors(found) == ["area-unshared"]
    assert "plan area 2: no point stands on the area" in found.findings[-1].text


def test_supporting_lines_that_may_be_one_stop() -> None:
    deck = replace(DECK, direction=((6, -10), (9, -10)))
    points = (POINTS[0], replace(POINTS[1], at=(8.001, -9.5)))
    found = applied(planned(areas=(deck,), points=points))
    assert errors(found) == ["plan-lines-near"]


def test_values_with_and_without_case_in_one_cable_stop() -> None:
    valued = replace(open_point("P3", 20.0, 3), cases=(("load", 9.0),))
    loads = (open_point("P1", 8.0, 1), open_point("P2", 16.0, 2), valued)
    assert errors(applied(planned(cable(loads=loads)))) == ["cases-mixed"]


def test_a_plan_at_another_spacing_than_the_elevation_is_said() -> None:
    points = (POINTS[0], replace(POINTS[1], at=(14, -10.5)))
    (note,) = [f for f in applied(planned(points=points)).findings if f.code == "plan-spacing"]
    assert "6 apart in plan, 8 in elevation" in note.text
    assert not [f for f in applied(planned()).findings if f.code == "plan-spacing"]


def test_an_area_whose_text_does_not_read_adds_no_second_fault() -> None:
    found = applied(planned(areas=(replace(DECK, pressures=()),)))
    assert errors(found) == []  # the reader has told the text; nothing is missing beside it
    assert not [f for f in found.findings if f.code == "plan-shared"]


@settings(max_examples=40, deadline=None)
@given(
    xs=st.lists(st.integers(1, 23), min_size=1, max_size=8, unique=True),
    width=st.floats(0.5, 6.0),
    pressure=st.floats(0.1, 20.0),
    is_one_way=st.booleans(),
)
def test_a_cable_carries_pressure_times_net_area_in_all(
    xs: list[int], width: float, pressure: float, is_one_way: bool
) -> None:
    loads = tuple(open_point(f"P{x}", float(x), x) for x in sorted(xs))
    deck = PlanArea(
        number=1,
        outline=box((0, 0), (24, width)),
        pressures=(("D", pressure),),
        direction=((1, 0.1), (3, 0.1)) if is_one_way else None,
    )
    points = tuple(PlanPoint(mark=p.mark, at=(p.x, 0.5 * width)) for p in loads)
    found = applied(planned(cable(loads=loads), areas=(deck,), points=points))
    assert errors(found) == []
    total = math.fsum(case["D"] for case in cases(found))
    assert total == pytest.approx(pressure * 24 * width, rel=1e-9)


spot = st.tuples(st.sampled_from((0.0, 4.0, 4.0001, 8.0, 16.0)), st.sampled_from((-8.0, -6.0, 0.0)))
plan_piece = st.one_of(
    st.tuples(st.just("area"), st.lists(spot, min_size=2, max_size=5), st.booleans()),
    st.tuples(st.just("line"), spot, spot),
    st.tuples(st.just("text"), spot, st.sampled_from(("D=1 kPa", "2 kPa", "X", "L=3 psf", "8 kN"))),
    st.tuples(st.just("mark"), spot, st.sampled_from(("P1", "P2", "P9", "note"))),
    st.tuples(st.just("point"), spot),
    st.tuples(st.just("hanger"), spot, st.sampled_from(("P1", "P2", "P9")), st.sampled_from("C ")),
)


@settings(max_examples=80, deadline=None)
@given(pieces=st.lists(plan_piece, max_size=9))
def test_whatever_is_drawn_as_a_plan_is_shared_or_told(pieces: list[tuple[Any, ...]]) -> None:
    sketch = Sketch()
    sketch.support(0, 12, MARK="S1", EL="12.000")
    sketch.support(24, 12, MARK="S2", EL="12.000")
    for k in (1, 2):
        sketch.load_block(8 * k, 8, MARK=f"P{k}")
    for kind, *what in pieces:
        if kind == "area":
            sketch.polyline("AREA", what[0], close=what[1])
        elif kind == "line":
            sketch.line("AREA", *what)
        elif kind in ("text", "mark"):
            (x, y), words = what
            sketch.text(x, y, words, "AREA" if kind == "text" else "PLAN")
        elif kind == "point":
            sketch.space.add_point(what[0], dxfattribs={"layer": "S-CABL-PLAN"})
        else:
            tags = {"MARK": what[1], "CABLE": what[2].strip()}
            sketch.block("HANGER", what[0], "S-CABL-PLAN", tags)
    found = plan_loads.apply(sketch.read(), Settings())
    stopped = errors(found)
    # Either something is told, or every load point has its value and every area its cells.
    if not stopped:
        assert all(load.cases for load in found.cables[0].loads)
        for area in found.plan:
            carried = math.fsum(cell.area for cell in area.cells)
            assert carried == pytest.approx(area.net_area, rel=1e-9)
