"""A cable brought to paper: its geometry in plotted millimetres, its numbers in true units."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.elevation_view import View
from dxfcable.drawing.painting.plotting import Plotting
from dxfcable.drawing.painting.rounding import Rounder
from dxfcable.drawing.painting.wording import Wording
from dxfcable.model import Finding, Severity
from dxfcable.quantities import convert, is_imperial

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View as TrueView
    from dxfcable.model import Anchorage, Cable, FormedCable, Node, Point, Segment, SpanShape

ROUNDER = Rounder(5)  # a hundredth of a micrometre on paper


@dataclass(frozen=True, slots=True, kw_only=True)
class PaperWording(Wording):
    """Writes lengths that are given in plotted millimetres as what they are in the drawing.

    `per_unit` is plotted millimetres by drawing unit.
    """

    per_unit: float

    def _true(self, value: float) -> float:
        """Turn back; the noise of two divisions must not decide how a last place is rounded."""
        return float(f"{value / self.per_unit:.12g}")

    def length(self, value: float) -> str:
        """Write a length."""
        return Wording.length(self, self._true(value))

    def level(self, elevation: float) -> str:
        """Write a height."""
        true = Wording(
            length_unit=self.length_unit,
            force_unit=self.force_unit,
            digits=self.digits,
            has_datum=self.has_datum,
            reference=self._true(self.reference),
        )
        return true.level(self._true(elevation))

    def moment(self, value: float) -> str:
        """Write a moment."""
        return Wording.moment(self, self._true(value))


@dataclass(frozen=True, slots=True, kw_only=True)
class PaperPlotting(Plotting):
    """Plotting of what is drawn in plotted millimetres; `is_inch` states forces by the inch."""

    is_inch: bool

    @property
    def paper_unit(self) -> str:
        """Unit that force scales are stated by."""
        return "in" if self.is_inch else "cm"


def plotting_of(height: float, *, is_inch: bool) -> PaperPlotting:
    """Give the plotting of a sheet: one to one, in millimetres."""
    nothing = Finding(code="plot-scale", severity=Severity.NOTE, text="")
    return PaperPlotting(
        scale=1.0, text_height=height, length_unit="mm", finding=nothing, is_inch=is_inch
    )


def scale_words(scale: float, unit: str) -> str:
    """Write a scale in words, as "1:100" or an architect's equation."""
    nothing = Finding(code="plot-scale", severity=Severity.NOTE, text="")
    return Plotting(scale=scale, text_height=1.0, length_unit=unit, finding=nothing).words


_ARCHITECT = (4.0, 8.0, 12.0, 16.0, 24.0, 32.0, 48.0, 64.0, 96.0, 128.0, 192.0)
_ENGINEER = tuple(12.0 * n * 10**k for k in range(5) for n in (20, 30, 40, 50, 60, 100))


def usual_scales(unit: str) -> tuple[float, ...]:
    """List usual scales of elevations by their denominators, the finest first.

    Parameters
    ----------
    unit : str
        Of the drawing: inches and feet have the scales of architects and engineers, else those
        of ISO 5455.
    """
    if is_imperial(unit):
        return (*_ARCHITECT, *_ENGINEER)
    return tuple(step * 10.0**k for k in range(7) for step in (1, 2, 5))


def per_unit(scale: float, unit: str) -> float:
    """Give plotted millimetres by drawing unit."""
    return convert(1.0, unit, "mm") / scale


def on_paper(view: TrueView, scale: float, height: float) -> View:
    """Bring a view to paper, its first node at the origin.

    Parameters
    ----------
    view : View
        In drawing units.
    scale : float
        Length in the drawing over length on paper.
    height : float
        Text height [mm].

    Returns
    -------
    View
        All its lengths in plotted millimetres.
    """
    wording = view.wording
    factor = per_unit(scale, wording.length_unit)
    first = view.formed.nodes[0]
    shift = _Shift(factor=factor, x=first.x, y=first.y)
    return View(
        prefix=view.prefix,
        cable=shift.cable(view.cable),
        formed=shift.formed(view.formed),
        anchorages=tuple((name, shift.anchorage(a)) for name, a in view.anchorages),
        wording=PaperWording(
            length_unit=wording.length_unit,
            force_unit=wording.force_unit,
            digits=wording.digits,
            has_datum=wording.has_datum,
            reference=wording.reference * factor,
            per_unit=factor,
        ),
        height=height,
        node_names=view.node_names,
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class _Shift:
    """From the drawing to paper."""

    factor: float
    x: float
    y: float

    def point(self, at: Point) -> Point:
        return (at[0] - self.x) * self.factor, (at[1] - self.y) * self.factor

    def points(self, line: tuple[Point, ...]) -> tuple[Point, ...]:
        return tuple(self.point(p) for p in line)

    def _length(self, value: float | None) -> float | None:
        return None if value is None else value * self.factor

    def cable(self, cable: Cable) -> Cable:
        supports = tuple(
            replace(s, x=self.point((s.x, s.y))[0], y=self.point((s.x, s.y))[1])
            for s in cable.supports
        )
        loads = tuple(
            replace(p, x=self.point((p.x, p.y))[0], y=self.point((p.x, p.y))[1])
            for p in cable.loads
        )
        return replace(
            cable,
            supports=supports,
            loads=loads,
            deck=self.points(cable.deck),
            clearance=self.points(cable.clearance),
            frame=None,
        )

    def _node(self, node: Node) -> Node:
        x, y = self.point((node.x, node.y))
        foot = node.hanger_foot
        return replace(
            node,
            x=x,
            y=y,
            elevation=node.elevation * self.factor,
            hanger=self._length(node.hanger),
            hanger_foot=None if foot is None else self.point((0.0, foot))[1],
        )

    def _segment(self, piece: Segment) -> Segment:
        return replace(
            piece,
            start=self.point(piece.start),
            end=self.point(piece.end),
            length=piece.length * self.factor,
            unstressed_length=piece.unstressed_length * self.factor,
        )

    def _span(self, span: SpanShape) -> SpanShape:
        return replace(
            span,
            sag=span.sag * self.factor,
            sag_at=self.point(span.sag_at),
            low_point=self.point(span.low_point),
        )

    def formed(self, formed: FormedCable) -> FormedCable:
        return replace(
            formed,
            sag=formed.sag * self.factor,
            length=formed.length * self.factor,
            unstressed_length=formed.unstressed_length * self.factor,
            nodes=tuple(self._node(n) for n in formed.nodes),
            segments=tuple(self._segment(s) for s in formed.segments),
            spans=tuple(self._span(s) for s in formed.spans),
            curves=tuple(self.points(c) for c in formed.curves),
        )

    def anchorage(self, found: Anchorage) -> Anchorage:
        anchors = tuple(replace(a, at=self.point(a.at)) for a in found.anchors)
        foot = found.mast_foot
        return replace(
            found,
            at=self.point(found.at),
            anchors=anchors,
            base_moment=found.base_moment * self.factor,
            mast_foot=None if foot is None else self.point(foot),
            stay_feet=self.points(found.stay_feet),
        )
