"""The elevation of a cable on a sheet, at the finest usual scale that fits its room."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.painting.arrows import plan_arrows
from dxfcable.drawing.painting.drawn_ground import DrawnGround
from dxfcable.drawing.painting.elevation_labels import elevation_labels
from dxfcable.drawing.painting.elevation_view import (
    draw_elevation,
    draw_span_dimensions,
    extent,
)
from dxfcable.drawing.painting.free_place import grown
from dxfcable.drawing.painting.label_ground import Label, LabelGround
from dxfcable.drawing.painting.label_placing import Group, put_labels
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.sketch import Sketch, strokes
from dxfcable.drawing.sheeting.own_labels import adapted, member_ids, own_labels
from dxfcable.drawing.sheeting.paper_view import (
    ROUNDER,
    on_paper,
    per_unit,
    scale_words,
    usual_scales,
)
from dxfcable.drawing.sheeting.point_strip import PointStrip
from dxfcable.drawing.sheeting.saying import brief, held_words, state_words
from dxfcable.drawing.sheeting.site_lines import draw_site
from dxfcable.drawing.sheeting.titles import (
    BAR_RISE,
    draw_bar,
    draw_view_title,
    length_bar,
    title_size,
)

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import CableRevisions, Point

_ABOVE = 8.0  # room for dimensions and arrows over the cable, in text heights
_BELOW_CABLE = 1.5
_BESIDE_BAR = 8.0  # from the words to the bar
_LEAST_SPAN = 8.0  # text heights that a span measures at least: less shows nothing


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class ElevationBlock:
    """An elevation drawn.

    Attributes
    ----------
    sketch : Sketch
    scale : float
        Length in the drawing over length on paper.
    has_places : bool
        Whether places and levels of all points stand in its strip.
    """

    sketch: Sketch
    scale: float
    has_places: bool


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class ElevationMaker:
    """Draws the elevation of one cable.

    Attributes
    ----------
    view : View
        In drawing units.
    paper : Paper
    temperature : str
        Reference temperature, or "".
    revisions : CableRevisions or None
        For the profile before the latest one.
    """

    view: View
    paper: Paper
    temperature: str
    revisions: CableRevisions | None = None
    _drawn: dict[tuple[float, bool], ElevationBlock] = field(default_factory=dict)

    def fittings(
        self, rooms: Sequence[tuple[float, float]], wanted: float | None = None
    ) -> Iterator[ElevationBlock]:
        """Draw at each usual scale that fits one of some rooms and is legible, the finest first.

        Parameters
        ----------
        rooms : sequence of (float, float)
            Widths and heights [mm].
        wanted : float, optional
            A scale to try first; coarser usual ones follow.

        Yields
        ------
        ElevationBlock
            Of one scale with the full strip before the one with the short strip.
        """
        unit = self.view.wording.length_unit
        scales = list(usual_scales(unit))
        if wanted is not None:
            scales = [wanted, *(s for s in scales if s > wanted)]
        for scale in scales:
            if not any(self._may_fit(scale, width) for width, _ in rooms):
                continue
            paper_view = on_paper(self.view, scale, self.paper.text)
            nodes = paper_view.formed.nodes
            if (nodes[-1].x - nodes[0].x) < _LEAST_SPAN * self.paper.text:
                return
            for is_short in (False, True):
                block = self._block(paper_view, scale, rooms, is_short=is_short)
                if block is not None:
                    yield block

    def _may_fit(self, scale: float, width: float) -> bool:
        """Tell by the bare extent whether drawing is worth while."""
        x0, _, x1, _ = extent(self.view)
        factor = per_unit(scale, self.view.wording.length_unit)
        return (x1 - x0) * factor <= width

    def _block(
        self,
        view: View,
        scale: float,
        rooms: Sequence[tuple[float, float]],
        *,
        is_short: bool,
    ) -> ElevationBlock | None:
        """Draw at a scale; None where it does not fit."""
        strip = self._strip(view, is_short=is_short)
        _, title_rise = title_size(self.paper, self._title(view), self._words(view, scale))
        below = title_rise + (strip.rise if strip.is_possible else 0.0)
        _, y0, _, y1 = extent(view)
        least = (y1 - y0) + below + (_ABOVE + _BELOW_CABLE) * view.height
        if all(least > height for _, height in rooms):
            return None
        key = (scale, is_short)
        if key not in self._drawn:  # the same for every room
            self._drawn[key] = self._draw(view, scale, strip, is_short=is_short)
        a, b, c, d = self._drawn[key].sketch.bounds()
        fits = any(c - a <= width + 1e-6 and d - b <= height + 1e-6 for width, height in rooms)
        return self._drawn[key] if fits else None

    def _strip(self, view: View, *, is_short: bool) -> PointStrip:
        return PointStrip(view, is_short=is_short, has_tensions=not _labels_every_piece(view))

    def _draw(
        self, view: View, scale: float, strip: PointStrip, *, is_short: bool
    ) -> ElevationBlock:
        """Draw the view, its strip and its title."""
        sketch = Sketch(ROUNDER)
        old = self._old_profile(view, scale)
        _draw_view(view, sketch, old, with_tensions=_labels_every_piece(view))
        x0, bottom, _, _ = sketch.bounds()
        y = bottom - _BELOW_CABLE * view.height
        if strip.is_possible:
            strip.draw(sketch, y)
            y -= strip.rise
            x0 = min(x0, strip.bounds()[0])
        self._draw_title(view, sketch, (x0, y - view.height), scale)
        has_places = strip.is_possible and not is_short
        return ElevationBlock(sketch=sketch, scale=scale, has_places=has_places)

    def _title(self, view: View) -> str:
        return f"CABLE ELEVATION {brief(view.formed.mark)}"

    def _words(self, view: View, scale: float) -> tuple[str, ...]:
        """Say scale, state shown and what was held."""
        at = f", {brief(self.temperature)}" if self.temperature else ""
        return (
            f"{scale_words(scale, view.wording.length_unit)}, NOT EXAGGERATED",
            f"SHOWN: {state_words(view)}{at}",
            f"HELD: {held_words(self.view)}",
        )

    def _draw_title(self, view: View, sketch: Sketch, at: Point, scale: float) -> None:
        """Write the title, the bar of lengths right of it."""
        h, name = view.height, f"{view.prefix}/elevation-title"
        title, lines = self._title(view), self._words(view, scale)
        below = draw_view_title(sketch, name, at, self.paper, title, lines)
        width, _ = title_size(self.paper, title, lines)
        unit = self.view.wording.length_unit
        step, labels = length_bar(per_unit(scale, unit), unit, h)
        x = at[0] + width + _BESIDE_BAR * h
        draw_bar(sketch, name, (x, below + (BAR_RISE + 0.4) * h), h, step, labels)

    def _old_profile(self, view: View, scale: float) -> tuple[tuple[Point, ...], ...]:
        """Bring the profile before the latest revision to paper."""
        if self.revisions is None:
            return ()
        factor = per_unit(scale, view.wording.length_unit)
        first = self.view.formed.nodes[0]
        return tuple(
            tuple(((x - first.x) * factor, (y - first.y) * factor) for x, y in line)
            for line in self.revisions.old
        )


def _draw_view(
    view: View,
    sketch: Sketch,
    old: tuple[tuple[Point, ...], ...],
    *,
    with_tensions: bool,
) -> None:
    """Draw the linework, then the labels clear of all of it."""
    h = view.height
    draw_site(view, sketch)
    for number, line in enumerate(old, start=1):
        sketch.polyline(f"{view.prefix}/old-profile/{number}", "revision", line)
    site = Obstacles(strokes(sketch.items), np.zeros((0, 4)))
    drawn = DrawnGround(site, grown(extent(view), 30.0 * h), 6.0 * h)
    arrows = plan_arrows(view, drawn)
    draw_elevation(view, sketch, arrows)
    level = draw_span_dimensions(view, sketch, drawn, _clear_above(view, sketch))
    ground = LabelGround(h, sketch.items)
    usual = [
        adapted(view, label)
        for label in elevation_labels(view, level, arrows)
        if _is_wanted(view, label, with_tensions=with_tensions)
    ]
    labels = (*own_labels(view), *usual)
    put_labels([Group(labels=labels, sketch=sketch)], ground)


def _is_wanted(view: View, label: Label, *, with_tensions: bool) -> bool:
    """Tell whether a label of the drawing stands on the sheet too, or a strip says it."""
    kind, _, rest = label.id.removeprefix(f"{view.prefix}/").partition("/")
    if kind == "tension":
        return with_tensions
    if kind == "elevation":
        return rest.startswith("low-point")
    if kind == "anchorage":
        return label.id not in member_ids(view)
    return kind not in ("hanger-length", "load", "sag-label")


def _labels_every_piece(view: View) -> bool:
    """Tell whether each piece is long enough for its tension along it."""
    h = view.height
    return not view.is_dense and all(
        text_width(view.wording.force(p.tension), h) + 1.2 * h
        <= float(np.hypot(p.end[0] - p.start[0], p.end[1] - p.start[1]))
        for p in view.formed.segments
    )


def _clear_above(view: View, sketch: Sketch) -> float:
    """Give the ordinate up to which linework, and labels about the supports, reach."""
    return sketch.bounds()[3] + 1.8 * view.height
