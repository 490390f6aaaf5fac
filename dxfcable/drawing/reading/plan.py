"""The framing plan of a drawing: loaded areas and hanger points, pressures in one unit."""

from __future__ import annotations

import statistics
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import listed
from dxfcable.drawing.reading.plan_areas import read_areas
from dxfcable.drawing.reading.plan_points import read_plan_points
from dxfcable.model import PlanArea

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import Context


class Plan:
    """What is drawn of a framing plan.

    Parameters
    ----------
    context : Context
        Takes what is wrong with it.
    tolerance : float
        Points within it touch [drawing unit].

    Attributes
    ----------
    points : tuple of PlanPoint
    force_unit : str
        Of the first area's pressure, as kN of kPa and lb of psf; "" where there is none.
    text_height : float or None
        Median height of the areas' texts [drawing unit].
    """

    def __init__(self, context: Context, tolerance: float) -> None:
        self._context = context
        self._drafts = read_areas(context, tolerance)
        self.points = tuple(read_plan_points(context, tolerance))
        pressures = [p for draft in self._drafts for _, p in draft.pressures]
        self._units = list(dict.fromkeys(p.force_unit for p in pressures))
        self.force_unit = self._units[0] if self._units else ""
        heights = [draft.text_height for draft in self._drafts if draft.text_height > 0]
        self.text_height = statistics.median(heights) if heights else None
        self._check_complete()

    def _check_complete(self) -> None:
        """Tell areas without points and points without areas, if nothing else is wrong there."""
        every = self._context.pieces
        if self._drafts and not every.of("plan_point"):
            layer = self._context.settings.layers.plan_point
            text = f"loaded areas are drawn, but no hanger points on {layer}"
            remedy = "Draw a point with the mark of its load point where each hanger stands."
            origin = self._drafts[0].origin
            self._context.faults.error(Code.PLAN_INCOMPLETE, text, remedy, origin=origin)
        elif self.points and not every.of("area"):
            layer = self._context.settings.layers.area
            text = f"hanger points are drawn in plan, but no loaded area on {layer}"
            remedy = "Draw a closed polyline with its pressure inside, as D=1.2 kPa."
            origin = self.points[0].origin
            self._context.faults.error(Code.PLAN_INCOMPLETE, text, remedy, origin=origin)

    def areas(self, force_unit: str) -> tuple[PlanArea, ...]:
        """Give the areas, their pressures by the drawing's unit of length.

        Parameters
        ----------
        force_unit : str
            Of the layout; forces of pressures in another one are converted, with a note.

        Returns
        -------
        tuple of PlanArea
        """
        others = [unit for unit in self._units if unit != force_unit]
        if others:
            text = f"pressures are stated in {listed(others)} by area; forces are in {force_unit}"
            self._context.faults.note(Code.FORCE_UNITS_MIXED, text)
        length_unit = self._context.unit
        return tuple(
            PlanArea(
                number=number,
                outline=draft.ring,
                holes=tuple(draft.holes),
                pressures=tuple(
                    (case, pressure.into(force_unit, length_unit))
                    for case, pressure in draft.pressures
                ),
                direction=draft.direction,
                origin=draft.origin,
                value_origin=draft.value_origin,
            )
            for number, draft in enumerate(self._drafts, start=1)
        )
