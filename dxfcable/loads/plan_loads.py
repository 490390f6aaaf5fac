"""A framing plan's loaded areas made into the loads of the cables' load points.

The reader gives areas and hanger points as drawn; here they are shared out (`statics.tributary`)
and matched by their marks. What a point gets this way counts as drawn.
"""

from __future__ import annotations

import math
from dataclasses import replace
from itertools import combinations, pairwise
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import Faults, listed
from dxfcable.loads.plan_marks import match
from dxfcable.model import PlanCell
from dxfcable.pressures import format_area
from dxfcable.quantities import format_force

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from dxfcable.loads.load_filling import Key, Spot
    from dxfcable.model import Cable, Finding, Layout, LoadPoint, PlanArea, PlanPoint
    from dxfcable.settings import Settings
    from dxfcable.statics.tributary import LoadedArea, Shares

_NEAR = 100.0  # times the tolerance: near, though not one line
_SPACING = 0.005  # of the spacing in elevation
_OVERLAP = 1e-9  # of the smaller area
_UNCASED = "load"

_Cases = tuple[tuple[str, float], ...]


def apply(layout: Layout, settings: Settings) -> Layout:
    """Share the loaded areas of a plan out to load points.

    Parameters
    ----------
    layout : Layout
        As read: areas without cells, load points that the plan names without a value.
    settings : Settings
        For the tolerance within which points touch.

    Returns
    -------
    Layout
        Load points with what they carry, areas with their cells, and findings: for each area
        the sum of its cells against pressure times net area; every fault of the plan as an
        error. Findings about missing values that the plan gives are gone. Without a plan the
        layout itself.
    """
    if not layout.plan and not layout.plan_points:
        return layout
    faults = Faults()
    spots = match(layout, faults)
    spans = [cable.supports[-1].x - cable.supports[0].x for cable in layout.cables]
    tolerance = settings.limits.touch * min(spans, default=0.0)
    shared = _share(layout, tolerance, faults)
    values = _values(layout, shared, spots, faults)
    filled = {spots[k].key: cases for k, cases in values.items() if k in spots}
    changed = replace(
        layout,
        cables=tuple(_filled(cable, i, filled) for i, cable in enumerate(layout.cables)),
        plan=tuple(_with_cells(area, shared, spots, layout.plan_points) for area in layout.plan),
    )
    _tell_spacing(layout, spots, faults)
    _tell_mixed(changed, filled, faults)
    kept = _still_true(layout, spots.values())
    return replace(changed, findings=(*kept, *faults.findings))


# --- areas shared out -----------------------------------------------------------------------


def _share(layout: Layout, tolerance: float, faults: Faults) -> dict[int, Shares]:
    """Share out each area whose pressure reads, by its number; tell sums and doubts."""
    from dxfcable.statics.tributary import LoadedArea, overlap, share_area

    places = [point.at for point in layout.plan_points]
    found: dict[int, Shares] = {}
    areas: dict[int, LoadedArea] = {}
    for area in layout.plan if places else ():
        loaded = LoadedArea(
            outline=area.outline,
            holes=area.holes,
            pressures=area.pressures,
            direction=_vector(area),
        )
        try:
            shares = share_area(loaded, places, tolerance=tolerance)
        except ValueError as error:
            text = f"plan area {area.number}: {error}"
            remedy = "Draw the area about the hanger points that carry it."
            faults.error(Code.AREA_UNSHARED, text, remedy, origin=area.origin)
            continue
        found[area.number], areas[area.number] = shares, loaded
        _tell_near_lines(layout, area, shares, tolerance, faults)
        if area.pressures:
            _tell_sum(layout, area, shares, faults)
    for one, other in combinations(areas, 2):
        common = overlap(areas[one], areas[other])
        if common > _OVERLAP * min(found[one].net_area, found[other].net_area):
            shown = format_area(common, layout.length_unit)
            text = f"plan areas {one} and {other} overlap by {shown}; there both act"
            faults.note(Code.AREA_OVERLAP, text)
    return found


def _vector(area: PlanArea) -> tuple[float, float] | None:
    """Give the direction of a one-way deck."""
    if area.direction is None:
        return None
    (x0, y0), (x1, y1) = area.direction
    return x1 - x0, y1 - y0


def _tell_near_lines(
    layout: Layout, area: PlanArea, shares: Shares, tolerance: float, faults: Faults
) -> None:
    """Stop where it is not clear whether points are on one supporting line."""
    for one, other in pairwise(shares.lines):
        if other.at - one.at > _NEAR * tolerance:
            continue
        first, second = (layout.plan_points[line.points[0]] for line in (one, other))
        text = (
            f"plan area {area.number}: {first.mark} and {second.mark} are {other.at - one.at:.3g} "
            "apart along the deck: one supporting line or two?"
        )
        remedy = "Draw the points of one line exactly across the direction of the deck."
        faults.error(Code.PLAN_LINES_NEAR, text, remedy, origin=second.origin)


def _tell_sum(layout: Layout, area: PlanArea, shares: Shares, faults: Faults) -> None:
    """Say what an area's points carry together: it is pressure times net area."""
    count = sum(cell.area > 0 for cell in shares.cells)
    unit = layout.force_unit or ""
    sums = ", ".join(
        f"{case} {format_force(value, unit, 6, is_trimmed=True)}" for case, value in shares.sums
    )
    deck = "one-way deck" if area.direction else "nearest points"
    text = (
        f"plan area {area.number}: {count} point{'s' if count != 1 else ''} ({deck}), net area "
        f"{format_area(shares.net_area, layout.length_unit)}, {sums}; the sum of the cells equals "
        "pressure times net area"
    )
    faults.note(Code.PLAN_SHARED, text, origin=area.value_origin)


def _values(
    layout: Layout, shared: Mapping[int, Shares], spots: Mapping[int, Spot], faults: Faults
) -> dict[int, _Cases]:
    """Add up what each hanger point carries of all areas; one that carries nothing is told."""
    none = {case: 0.0 for area in layout.plan for case, _ in area.pressures}
    parts: dict[int, list[_Cases]] = {k: [] for k in range(len(layout.plan_points))}
    carried = dict.fromkeys(parts, 0.0)
    for shares in shared.values():
        for cell in shares.cells:
            parts[cell.point].append(cell.loads)
            carried[cell.point] += cell.area
    for k, point in enumerate(layout.plan_points):
        if carried[k] == 0 and k in spots and len(shared) == len(layout.plan):
            where = "is on no supporting line of its deck" if parts[k] else "stands in no area"
            text = f"hanger point {point.mark} {where}: it gets no load"
            faults.note(Code.PLAN_POINT_FREE, text, origin=point.origin)
    return {
        k: tuple(
            (case, _settled(math.fsum(value for part in own for c, value in part if c == case)))
            for case in (dict.fromkeys(case for part in own for case, _ in part) or none)
        )
        for k, own in parts.items()
    }


def _settled(value: float) -> float:
    """Drop the last digits, in which versions of the geometry library differ."""
    return float(f"{value:.12g}")


# --- the layout filled ----------------------------------------------------------------------


def _filled(cable: Cable, index: int, filled: Mapping[Key, _Cases]) -> Cable:
    """Give a cable's load points what they carry; a value of their own stays (and was told)."""

    def point(load: LoadPoint, key: Key) -> LoadPoint:
        is_open = key in filled and not load.cases and load.value_origin is None
        return replace(load, cases=filled[key]) if is_open else load

    loads = tuple(point(load, (index, False, k)) for k, load in enumerate(cable.loads))
    at_supports = tuple(
        (key, point(load, (index, True, k))) for k, (key, load) in enumerate(cable.support_loads)
    )
    return replace(cable, loads=loads, support_loads=at_supports)


def _with_cells(
    area: PlanArea,
    shared: Mapping[int, Shares],
    spots: Mapping[int, Spot],
    points: Sequence[PlanPoint],
) -> PlanArea:
    """Give an area its cells."""
    if area.number not in shared:
        return area
    shares = shared[area.number]
    cells = tuple(
        PlanCell(
            cable=spots[cell.point].cable,
            mark=points[cell.point].mark,
            at=points[cell.point].at,
            rings=cell.rings,
            area=_settled(cell.area),
            cases=tuple((case, _settled(value)) for case, value in cell.loads),
        )
        for cell in shares.cells
        if cell.area > 0 and cell.point in spots
    )
    return replace(area, net_area=_settled(shares.net_area), cells=cells)


def _tell_spacing(layout: Layout, spots: Mapping[int, Spot], faults: Faults) -> None:
    """Note where neighbours stand further apart, or nearer, in plan than in elevation."""
    for i, cable in enumerate(layout.cables):
        own = [(s.load.x, layout.plan_points[k]) for k, s in spots.items() if s.cable == i]
        own.sort(key=lambda pair: pair[0])
        for (x0, first), (x1, second) in pairwise(own):
            apart = math.dist(first.at, second.at)
            if abs(apart - (x1 - x0)) > _SPACING * (x1 - x0):
                text = (
                    f"{first.mark} and {second.mark} are {apart:.6g} apart in plan, "
                    f"{x1 - x0:.6g} in elevation"
                )
                remedy = "Check the scale of the plan, and its marks."
                faults.note(Code.PLAN_SPACING, text, remedy, origin=second.origin, cable=cable.mark)
                break  # one says enough


def _tell_mixed(layout: Layout, filled: Mapping[Key, _Cases], faults: Faults) -> None:
    """Stop where a cable has values with load cases and without."""
    told = {f.cable for f in layout.findings if f.code == Code.CASES_MIXED}
    for i in dict.fromkeys(cable for cable, _, _ in filled):
        cable = layout.cables[i]
        every = [*cable.loads, *(load for _, load in cable.support_loads)]
        bare = [load.mark for load in every if _UNCASED in dict(load.cases)]
        cased = [load for load in every if set(dict(load.cases)) - {_UNCASED}]
        if bare and cased and cable.mark not in told:
            text = (
                f"with the plan, cable {cable.mark} has values with load cases and without; "
                f"without: {listed(bare)}"
            )
            remedy = "Write the case before each value and pressure, as D=1.2 kPa."
            faults.error(Code.CASES_MIXED, text, remedy, cable=cable.mark)


def _still_true(layout: Layout, spots: Iterable[Spot]) -> list[Finding]:
    """Leave out that values are missing which the plan gives, or would but for its own faults."""
    origins = [spot.load.origin for spot in spots]
    mended = {(origin.handle, origin.line, origin.at) for origin in origins}
    return [
        f
        for f in layout.findings
        if not (f.code == Code.LOAD_VALUE_MISSING and (f.handle, f.line, f.at) in mended)
    ]
