"""The spans of one cable measured, and the words and tables that go with it."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.verifying import profile_laws, scale_laws
from dxfcable.verifying.cable_on_bench import CableOnBench
from dxfcable.verifying.loads import demand_on
from dxfcable.verifying.measure import measure_span
from dxfcable.verifying.shapes import shape_of

if TYPE_CHECKING:
    from dxfcable.drawing.recovery.scales import ScaleBlock
    from dxfcable.drawing.recovery.schedules import Schedule
    from dxfcable.model import Cable
    from dxfcable.settings import Settings
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.words import Reader


def measure_cable(
    sheet: Sheet,
    prefix: str,
    number: int | None,
    drawn: Cable | None,
    reader: Reader,
    settings: Settings,
    *,
    is_alone: bool,
) -> CableOnBench:
    """Measure one cable.

    Parameters
    ----------
    prefix : str
        First part of its ids.
    number, drawn : int, Cable or None
        Its place in the layout and itself, None where the drafter's drawing does not have it.
    is_alone : bool
        Whether it is the only one, so that words without its mark are its own.
    """
    mark = drawn.mark if drawn else ""
    schedule = _schedule(sheet, prefix, mark, is_alone=is_alone)
    block = find_block(sheet, f"{prefix}/diagram", ("FORCE DIAGRAM", mark))
    said = [
        schedule.value("UNDER") if schedule else None,
        scale_laws.under_of(block) if block else None,
    ]
    words = [scale_laws.combination_in(e.text) for e in said if e]
    demand = demand_on(drawn, prefix, words, sheet, reader, settings) if drawn else None
    ratio = scale_laws.form_ratio(sheet.scales)
    scale = scale_laws.scale_of(block, reader, sheet.grain, ratio) if block else None
    cable = CableOnBench(
        prefix=prefix,
        number=number,
        schedule=schedule,
        demand=demand,
        scale=scale or math.nan,
        block=block,
    )
    _measure_spans(sheet, cable)
    return cable


def _measure_spans(sheet: Sheet, cable: CableOnBench) -> None:
    """Measure the spans from left to right; rays and loads are numbered on."""
    demand = cable.demand
    weight, ea = (demand.weight, demand.cable.ea) if demand else (0.0, None)
    first_ray = first_load = 1
    for k in sheet.numbers(f"{cable.prefix}/profile/"):
        carried = cable.carried_on(k)
        stations: list[float] = []
        if carried is not None and demand is not None:
            left, right = demand.cable.supports[k - 1 : k + 1]
            stations = [left.x, *(c.point.x for c in carried), right.x]
        span = measure_span(
            sheet,
            cable.prefix,
            k,
            stations=stations,
            per_piece=_per_piece(sheet, cable),
            scale=cable.scale,
            first_ray=first_ray,
            first_load=first_load,
        )
        if span is None:
            continue
        cable.spans.append(span)
        cable.shapes.append(shape_of(span, weight, ea, cable.thermal))
        first_ray += len(span.rays)
        first_load += len(span.steps)
        if carried is not None and demand is not None and not sheet.has_marks:
            profile_laws.name_hangers(sheet, span, demand.cable, carried, is_cut=cable.is_cut)


def _schedule(sheet: Sheet, prefix: str, mark: str, *, is_alone: bool) -> Schedule | None:
    """Find a cable's schedule by its id, else by its title."""
    found = [s for s in sheet.schedules if s.prefix == prefix]
    if not found and not sheet.has_marks:
        named = [s for s in sheet.schedules if s.mark == mark]
        found = named or (sheet.schedules if is_alone else [])
    return found[0] if found else None


def find_block(sheet: Sheet, part: str, title: tuple[str, str]) -> ScaleBlock | None:
    """Find the words and bar of a diagram or a joint by its id, else by its title.

    Of one kind the last block without an owner is taken whatever its title says.
    """
    found = [b for b in sheet.scales if b.part == part]
    if not found and not sheet.has_marks:
        left = [b for b in sheet.scales if not b.part and b.title[0] == title[0]]
        found = [b for b in left if b.title == title] or (left if len(left) == 1 else [])
    for block in found[:1]:
        block.part = part
    return found[0] if found else None


def _per_piece(sheet: Sheet, cable: CableOnBench) -> int:
    """Tell whether pieces have two rays: with weight under this combination."""
    if cable.demand is not None and cable.demand.combination is not None:
        return 2 if cable.demand.weight > 0.0 else 1
    stem = f"{cable.prefix}/load-line-letter/"
    return 2 if any(n.startswith(stem) and n.endswith("'") for n in sheet.named) else 1
