"""The plotting scale, the text height that follows from it, and usual scales of forces.

Usual drawing scales are those of ISO 5455 and the scales of architects and engineers in
inches; usual force scales step 1, 2, 2.5, 5 on a centimetre and 10 to 60 on an inch (common
practice).
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.model import Finding, Severity
from dxfcable.quantities import convert, is_imperial, read_plot_scale

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.model import Layout
    from dxfcable.settings import Settings

_ARCHITECT = {
    4.0: '3"',
    8.0: '1-1/2"',
    12.0: '1"',
    16.0: '3/4"',
    24.0: '1/2"',
    32.0: '3/8"',
    48.0: '1/4"',
    64.0: '3/16"',
    96.0: '1/8"',
    128.0: '3/32"',
    192.0: '1/16"',
}
_ENGINEER = tuple(12.0 * n * 10**k for k in range(6) for n in (20, 30, 40, 50, 60, 100))
# Room for the elevation on an A1 sheet, 841 x 594 mm, once border, title block, diagram and
# schedule have theirs.
_ROOM_MM = (640.0, 260.0)
_LEAST_SHARE, _GREATEST_SHARE = 1 / 1000, 1 / 50  # of the span: a believable text height
_SAME = 1e-6


@dataclass(frozen=True, slots=True, kw_only=True)
class Plotting:
    """How the drawing is plotted.

    Attributes
    ----------
    scale : float
        Length in the drawing over length on paper.
    text_height : float
        Of our texts [length].
    length_unit : str
        The drawing's.
    finding : Finding
        The note that says where the scale comes from.
    """

    scale: float
    text_height: float
    length_unit: str
    finding: Finding

    @property
    def paper_unit(self) -> str:
        """Unit that force scales are stated by: an inch or a centimetre on paper."""
        return "in" if is_imperial(self.length_unit) else "cm"

    @property
    def words(self) -> str:
        """Give the scale in words, as "1:100" or an architect's equation of inch and foot."""
        if is_imperial(self.length_unit):
            for scale, inches in _ARCHITECT.items():
                if abs(self.scale - scale) < _SAME * scale:
                    return f"{inches} = 1'-0\""
            feet = self.scale / 12
            if feet >= 10 and abs(feet - round(feet)) < _SAME * feet:
                return f'1" = {round(feet)}\'-0"'
        return f"1:{_short(self.scale)}"

    def force_per_length(self, per_paper: float) -> float:
        """Turn force by paper unit into force by length of the drawing."""
        return per_paper / self.on_drawing(1.0)

    def on_drawing(self, paper: float) -> float:
        """Turn a length on paper, in paper units, into one of the drawing."""
        return convert(paper * self.scale, self.paper_unit, self.length_unit)

    def force_scales(self, least: float) -> Iterator[float]:
        """Give usual force scales, the finest first.

        Parameters
        ----------
        least : float
            Force by paper unit that the scale must not fall below, > 0.

        Yields
        ------
        float
            Force by paper unit. A scale that is round by the drawing's unit too goes before a
            finer one that is not, if it is no more than twice as coarse.
        """
        steps = (1, 2, 3, 4, 5, 6) if self.paper_unit == "in" else (1, 2, 2.5, 5)
        decade = math.floor(math.log10(least)) - 1
        usual = [
            step * 10.0**power if power >= 0 else step / 10.0**-power
            for power in range(decade, decade + 12)
            for step in steps
        ]
        usual = [scale for scale in usual if scale >= least * (1 - _SAME)]
        rest = 0
        while rest < len(usual) - len(steps):
            fine = usual[rest]
            twice = [s for s in usual[rest:] if s <= 2 * fine * (1 + _SAME)]
            chosen = next((s for s in twice if self._is_round(s, steps)), fine)
            yield chosen
            rest = usual.index(chosen) + 1

    def _is_round(self, per_paper: float, steps: tuple[float, ...]) -> bool:
        """Tell whether the force by the drawing's own unit is a usual number too."""
        force = self.force_per_length(per_paper)
        share = force / 10.0 ** math.floor(math.log10(force) + _SAME)
        return any(abs(share - step) < _SAME * share for step in steps)


def _short(number: float) -> str:
    return f"{number:.6g}"


def plan_plotting(
    layout: Layout,
    settings: Settings,
    plot_scale: str | None,
    *,
    span: float,
    size: tuple[float, float],
) -> Plotting:
    """Find the plotting scale: as told, else from the drafter's texts, else from an A1 sheet.

    Parameters
    ----------
    layout : Layout
        For its length unit and the height of the drafter's load texts.
    settings : Settings
        For `show.plot_scale` and the plotted text height.
    plot_scale : str or None
        As given on the command line; it wins.
    span : float
        Greatest span [length].
    size : tuple of float
        Width and height of the largest elevation [length].

    Returns
    -------
    Plotting

    Raises
    ------
    QuantityError
        If the scale told is none.
    """
    show, unit = settings.show, layout.length_unit
    if is_imperial(unit):
        plotted, plotted_words = convert(show.text_in, "in", unit), f'{_short(show.text_in)}"'
    else:
        plotted, plotted_words = convert(show.text_mm, "mm", unit), f"{_short(show.text_mm)} mm"
    told = plot_scale or show.plot_scale
    drafters = layout.text_height
    if told:
        scale = read_plot_scale(told)
        source = "as given" if plot_scale else "from the settings"
    elif drafters is not None and _LEAST_SHARE * span <= drafters <= _GREATEST_SHARE * span:
        scale = _settled(drafters / plotted)
        source = "from the height of the drafter's load texts"
    else:
        scale = _fitting(size, unit)
        source = "the usual scale by which the elevation fits an A1 sheet"
    height = plotted * scale
    draft = Plotting(
        scale=scale,
        text_height=height,
        length_unit=unit,
        finding=Finding(code="plot-scale", severity=Severity.NOTE, text=""),
    )
    text = f"Plotting scale {draft.words}, {source}; texts are {plotted_words} high when plotted."
    remedy = "" if told else "Give --plot-scale, or plot_scale in the settings, for another."
    finding = Finding(code="plot-scale", severity=Severity.NOTE, text=text, remedy=remedy)
    return Plotting(scale=scale, text_height=height, length_unit=unit, finding=finding)


def _settled(scale: float) -> float:
    """Drop the noise of a division, so that 99.99999999999999 is 100."""
    return float(f"{scale:.9g}")


def _fitting(size: tuple[float, float], unit: str) -> float:
    """Give the finest usual scale by which a size fits the room on the sheet."""
    width, height = (convert(value, unit, "mm") for value in size)
    least = max(width / _ROOM_MM[0], height / _ROOM_MM[1])
    if is_imperial(unit):
        usual: tuple[float, ...] = (*_ARCHITECT, *_ENGINEER)
    else:
        usual = tuple(step * float(10**k) for k in range(8) for step in (1, 2, 5))
    return next((scale for scale in usual if scale >= least * (1 - _SAME)), usual[-1])
