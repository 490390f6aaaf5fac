"""What stands below a view: its name, its scale in words, a bar that survives other sizes."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align, TriangleItem, VAlign
from dxfcable.drawing.painting.labels import text_width
from dxfcable.quantities import convert, is_imperial

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import Point

_LINE = 1.65
_THICK = 0.7  # of a bar, in text heights
BAR_RISE = 3.0  # of a bar with its numbers


def title_size(paper: Paper, title: str, lines: Sequence[str]) -> tuple[float, float]:
    """Give width and height of a view's title without its bar [mm]."""
    h = paper.text
    width = max(text_width(title, paper.large), *(text_width(line, h) for line in lines), 0.0)
    return width, 1.9 * paper.large + _LINE * len(lines) * h


def draw_view_title(
    sketch: Sketch, name: str, at: Point, paper: Paper, title: str, lines: Sequence[str]
) -> float:
    """Write a view's title from its upper left corner on; return the ordinate below it."""
    h, (x, y) = paper.text, at
    y -= 1.1 * paper.large
    sketch.text(f"{name}/title", "note", title, (x, y), paper.large)
    y -= 0.45 * paper.large
    end = x + text_width(title, paper.large)
    sketch.line(f"{name}/title-line", "title", (x, y), (end, y))
    y -= 0.35 * paper.large
    for number, line in enumerate(lines, start=1):
        y -= _LINE * h
        sketch.text(f"{name}/words-{number}", "note", line, (x, y + 0.35 * h), h)
    return y


def draw_bar(
    sketch: Sketch, name: str, at: Point, h: float, step: float, labels: Sequence[str]
) -> None:
    """Draw a bar of fields, every other one filled, with numbers above its divisions.

    Parameters
    ----------
    sketch : Sketch
        Gets the items.
    name : str
        First part of ids.
    at : Point
        Its upper left corner, numbers included [mm].
    h : float
        Text height [mm].
    step : float
        Length of a field [mm].
    labels : sequence of str
        One for each division, one more than fields; "" for none.
    """
    count = len(labels) - 1
    x, top = at[0], at[1] - 1.7 * h
    bottom = top - _THICK * h
    sketch.rectangle(f"{name}/bar", "table", (x, bottom, x + count * step, top))
    for field in range(0, count, 2):
        a, b = x + field * step, x + (field + 1) * step
        for half, corners in enumerate(
            (((a, bottom), (b, bottom), (b, top)), ((a, bottom), (b, top), (a, top)))
        ):
            points = tuple(sketch.rounder.point(p) for p in corners)
            sketch.items.append(
                TriangleItem(
                    id=f"{name}/field-{field}-{half}",
                    layer="table",
                    part=name,
                    points=(points[0], points[1], points[2]),
                )
            )
    for number, label in enumerate(labels):
        if label:
            align = Align.LEFT if number == 0 else Align.CENTER
            sketch.text(
                f"{name}/value-{number}",
                "table",
                label,
                (x + number * step, top + 0.45 * h),
                h,
                align=align,
                valign=VAlign.BASELINE,
            )


def length_bar(factor: float, unit: str, h: float) -> tuple[float, tuple[str, ...]]:
    """Give field length [mm] and labels of a bar of lengths.

    Parameters
    ----------
    factor : float
        Plotted millimetres by drawing unit.
    unit : str
        The drawing's; millimetres and inches are stated by metre and foot where they are many.
    h : float
        Text height [mm].
    """
    foot = "us-ft" if unit == "us-ft" else "ft"
    shown = foot if is_imperial(unit) else "m"
    scale = factor * convert(1.0, shown, unit)  # mm by shown unit
    if 50.0 * h < scale:  # details, larger than a metre or foot on paper
        shown, scale = unit, factor
    least = 4.0 * h / scale
    power = 10.0 ** math.floor(math.log10(least))
    step = next(s * power for s in (1, 2, 5, 10) if s * power >= least * (1 - 1e-9))
    word = "ft" if shown == "us-ft" else shown
    last = f"{4 * step:.6g} {word}"
    return step * scale, ("0", "", f"{2 * step:.6g}", "", last)


def force_bar(per_paper: float, unit: str, *, is_inch: bool) -> tuple[float, tuple[str, ...]]:
    """Give field length [mm] and labels of a bar of forces."""
    if is_inch:
        return 25.4, ("0", f"{per_paper:.6g}", f"{2 * per_paper:.6g} {unit}")
    return 10.0, ("0", "", f"{2 * per_paper:.6g}", "", f"{4 * per_paper:.6g} {unit}")


def force_scale_words(per_paper: float, unit: str, *, is_inch: bool) -> str:
    """Write a force scale in words."""
    return f"FORCE 1 {'in' if is_inch else 'cm'} = {per_paper:.6g} {unit}"
