"""The list of a plan's loaded areas: net area, pressure, what its points carry together."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.naming import id_part
from dxfcable.drawing.painting.schedule_text import CAUTION, broken
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.drawing.painting.text_table import ROW, Table, draw_table
from dxfcable.pressures import format_area, format_pressure
from dxfcable.quantities import format_force

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.model import Layout, PlanArea, PlanCell

_LAYER = "table"
_LEAST = 40.0  # width that the caution is broken to at least, in text heights
DIGITS = 4  # of areas and loads in plan
_SUM = "THE CELLS OF EACH AREA SUM UP TO PRESSURE TIMES NET AREA."


def draw_list(
    layout: Layout,
    name: str,
    unlabelled: Sequence[tuple[PlanArea, PlanCell]],
    height: float,
    rounder: Rounder,
) -> Sketch:
    """Draw the list about its upper left corner as origin.

    Parameters
    ----------
    layout : Layout
        Areas with their cells.
    name : str
        Part of all items, and first part of their ids.
    unlabelled : sequence of (PlanArea, PlanCell)
        Cells with no room for their label; they get rows of their own.
    height : float
        Of texts [length].
    rounder : Rounder
        Rounds coordinates about the origin.

    Returns
    -------
    Sketch
    """
    sketch = Sketch(rounder, name)
    margin, top = height, -2.5 * height
    sketch.text(f"{name}/title", _LAYER, "LOADED AREAS IN PLAN", (margin, top), height)
    corner = (margin, top - 0.5 * height)
    right, bottom = draw_table(sketch, name, _table(layout, unlabelled), corner, height)
    width = max(right - margin, _LEAST * height)
    for key, words in (("sum", _SUM), ("caution", CAUTION)):
        for number, line in enumerate(broken(words, width, height), start=1):
            bottom -= ROW * height
            sketch.text(f"{name}/{key}/{number}", _LAYER, line, (margin, bottom), height)
            right = max(right, margin + text_width(line, height))
    sketch.rectangle(f"{name}/frame", _LAYER, (0.0, bottom - margin, right + margin, 0.0))
    return sketch


def _table(layout: Layout, unlabelled: Sequence[tuple[PlanArea, PlanCell]]) -> Table:
    """Make a row for each area, with its cells that have no label below it."""
    rows: list[tuple[str, tuple[str, ...]]] = []
    for area in layout.plan:
        if not area.cells:
            continue
        net = format_area(area.net_area, layout.length_unit, DIGITS)
        sums: dict[str, list[float]] = {}
        for cell in area.cells:
            for case, value in cell.cases:
                sums.setdefault(case, []).append(value)
        carried = [(case, math.fsum(values)) for case, values in sums.items()]
        deck = "ONE-WAY" if area.direction else "NEAREST POINT"
        words = (str(area.number), net, _pressure(layout, area), _loads(layout, carried), deck)
        rows.append((f"area-{area.number}", words))
        rows += [
            (
                f"area-{area.number}-{k}-{id_part(cell.mark, 'P')}",
                (
                    cell_name(layout, area, cell),
                    format_area(cell.area, layout.length_unit, DIGITS),
                    "",
                    _loads(layout, cell.cases),
                    "",
                ),
            )
            for k, (owner, cell) in enumerate(unlabelled, start=1)
            if owner is area
        ]
    return Table(
        columns=("number", "net", "pressure", "carried", "deck"),
        head=("AREA", "NET AREA", "PRESSURE", "CARRIED", "SHARED"),
        aligns=(Align.LEFT, Align.RIGHT, Align.LEFT, Align.LEFT, Align.LEFT),
        rows=tuple(rows),
    )


def cell_name(layout: Layout, area: PlanArea, cell: PlanCell) -> str:
    """Name a cell by its mark, with its area's number where there are several."""
    return f"{cell.mark} ({area.number})" if len(layout.plan) > 1 else cell.mark


def _pressure(layout: Layout, area: PlanArea) -> str:
    """Give the drafter's words, or where those are formatted, the values."""
    raw = area.value_origin.raw.strip() if area.value_origin else ""
    if raw and raw.isprintable() and not set(raw) & set("\\{}%"):
        return raw
    unit = layout.force_unit or ""
    return "  ".join(
        f"{_case(case)}{format_pressure(value, unit, layout.length_unit, DIGITS)}"
        for case, value in area.pressures
    )


def _loads(layout: Layout, cases: Sequence[tuple[str, float]]) -> str:
    return "  ".join(load_words(layout, cases))


def load_words(layout: Layout, cases: Sequence[tuple[str, float]]) -> tuple[str, ...]:
    """Write loads by case; one without a case letter has none."""
    unit = layout.force_unit or ""
    return tuple(
        f"{_case(case)}{format_force(value, unit, DIGITS, is_trimmed=True)}"
        for case, value in cases
    )


def _case(case: str) -> str:
    return "" if case == "load" else f"{case} "
