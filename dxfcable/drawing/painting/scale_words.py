"""Scales below a diagram: words, and a bar that survives prints at half size."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align, VAlign

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.plotting import Plotting
    from dxfcable.drawing.painting.sketch import Sketch

_LAYER = "table"
_LINE = 1.7  # from line to line, in text heights
_DIVISIONS = {"cm": 4, "in": 2}


def under_words(view: View) -> str:
    """Say the state that a diagram shows: combination, level, change of temperature."""
    formed = view.formed
    assumed = ", ASSUMED" if formed.level_is_assumed else ""
    change = f", {formed.delta_t:+.6g} K" if formed.delta_t else ""
    return f"UNDER {formed.under} ({formed.level.upper()}{assumed}{change})"


def draw_force_scale(
    sketch: Sketch,
    name: str,
    plotting: Plotting,
    per_paper: float,
    force_unit: str,
    words: Sequence[str],
) -> None:
    """Write words and the scales below what is sketched, and a bar of the force scale.

    Parameters
    ----------
    sketch : Sketch
        Gets the items below its bounds.
    name : str
        First part of the ids.
    plotting : Plotting
        Plotting scale and text height.
    per_paper : float
        Force by paper unit.
    force_unit : str
        Of the drawing.
    words : sequence of str
        Lines that stand above the scales: title first.
    """
    h, unit = plotting.text_height, plotting.length_unit
    left, bottom, _, _ = sketch.bounds()
    per_length = plotting.force_per_length(per_paper)
    lines = (
        *words,
        f"FORCE 1 {unit} = {per_length:.6g} {force_unit}",
        f"PLOTTED: 1 {plotting.paper_unit} = {per_paper:.6g} {force_unit}",
    )
    y = bottom - 1.5 * h
    for number, line in enumerate(lines, start=1):
        at = (left, y - (number - 1) * _LINE * h)
        sketch.text(f"{name}/words/{number}", _LAYER, line, at, h, valign=VAlign.TOP)
    bar = y - (len(lines) * _LINE + 2.2) * h
    _draw_bar(sketch, f"{name}/scale-bar", plotting, per_paper, force_unit, (left + h, bar))


def _draw_bar(
    sketch: Sketch,
    name: str,
    plotting: Plotting,
    per_paper: float,
    force_unit: str,
    start: tuple[float, float],
) -> None:
    """Draw a bar with a stroke at each paper unit, the first and the last one labelled."""
    h, (x, y) = plotting.text_height, start
    divisions = _DIVISIONS[plotting.paper_unit]
    step = plotting.on_drawing(1.0)
    sketch.line(name, _LAYER, start, (x + divisions * step, y))
    for number in range(divisions + 1):
        at = x + number * step
        rise = 0.9 if number in (0, divisions) else 0.5
        sketch.line(f"{name}/stroke-{number}", _LAYER, (at, y), (at, y + rise * h))
    for number, text in ((0, "0"), (divisions, f"{divisions * per_paper:.6g} {force_unit}")):
        at = x + number * step
        align = Align.CENTER if number == 0 else Align.LEFT
        here = (at - 0.5 * h if number else at, y + 1.2 * h)
        sketch.text(f"{name}/value-{number}", _LAYER, text, here, h, align=align)
