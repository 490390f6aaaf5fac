"""The string polygon of a weightless cable under vertical loads, for a given pull.

Signs, order and units: see the package's docstring. Everything is measured from the left
support, so that large coordinates cost no digits. Which pull a rule asks for: `forming`.

The one law used is the general cable theorem: pull times drop below the closing string equals
the moment of the same loads on a simple beam of the same span, at any support levels.
(General cable theorem as in LibreTexts, structural analysis, chapter on cables.)
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

import numpy as np

from dxfcable.statics.beam import TIE, finite, first_greatest, frozen, positive, simple_beam

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import Floats, SimpleBeam


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Funicular:
    """A weightless cable in equilibrium; arrays are read only.

    Attributes
    ----------
    x, y : (n+2,) array
        Supports and load points from left to right [length].
    loads : (n,) array
        Loads at the inner points, down positive [force].
    horizontal : float
        Horizontal component of every tension: the pull [force].
    verticals : (n+1,) array
        Vertical component of the tension in each segment, rising to the right positive [force].
    tensions : (n+1,) array
        Tension of each segment, the same at both of its ends [force].
    lengths, unstressed_lengths : (n+1,) array
        Length as formed, and length / (1 + tension / EA) [length].
    moments : (n+2,) array
        Simple-beam moments, sagging positive [force length].
    drops : (n+2,) array
        Distance below the closing string, negative above it [length].
    sag_index, low_index : int
        The point of the greatest drop and the lowest point, a support included; the first of
        equals.
    above_string : tuple of int
        Points held above the closing string by uplift.
    residual : float
        Greatest unbalanced vertical force at a load point, from the coordinates [force].
    """

    x: Floats
    y: Floats
    loads: Floats
    horizontal: float
    verticals: Floats
    tensions: Floats
    lengths: Floats
    unstressed_lengths: Floats
    moments: Floats
    drops: Floats
    sag_index: int
    low_index: int
    above_string: tuple[int, ...]
    residual: float

    @property
    def span(self) -> float:
        """Horizontal distance of the supports [length]."""
        return float(self.x[-1] - self.x[0])

    @property
    def reaction_left(self) -> tuple[float, float]:
        """What the left support gives: horizontal outward, vertical up positive [force]."""
        return self.horizontal, -float(self.verticals[0])

    @property
    def reaction_right(self) -> tuple[float, float]:
        """What the right support gives: horizontal outward, vertical up positive [force]."""
        return self.horizontal, float(self.verticals[-1])

    @property
    def sag(self) -> float:
        """Greatest drop below the closing string anywhere [length]: at a point of a polygon."""
        return float(self.drops[self.sag_index])

    @property
    def sag_point(self) -> tuple[float, float]:
        """The point on the cable where the drop is greatest [length]."""
        return float(self.x[self.sag_index]), float(self.y[self.sag_index])

    @property
    def low_point(self) -> tuple[float, float]:
        """The lowest point of the cable, a load point or a support [length]."""
        return float(self.x[self.low_index]), float(self.y[self.low_index])

    @property
    def length(self) -> float:
        """Length as formed, stretched [length]."""
        return math.fsum(self.lengths)

    @property
    def unstressed_length(self) -> float:
        """Sum of the pieces' unstressed lengths [length]."""
        return math.fsum(self.unstressed_lengths)

    @property
    def max_tension(self) -> float:
        """Largest tension anywhere [force]."""
        return float(np.max(self.tensions))

    @property
    def governing_segment(self) -> int:
        """The segment with the largest tension; of equals (1e-12 relative) the leftmost."""
        return first_greatest(self.tensions, self.max_tension)

    @property
    def governing_end(self) -> Literal["left", "right"]:
        """The end of that segment nearer to its support; the middle segment counts as left.

        Without weight both ends carry the same tension, so this only says where to point.
        """
        left, right = self.x[self.governing_segment], self.x[self.governing_segment + 1]
        nearer_right = (self.x[-1] - right) < (left - self.x[0]) - TIE * self.span
        return "right" if nearer_right else "left"

    @property
    def weight(self) -> float:
        """Weight of the cable: none here [force/length]."""
        return 0.0

    @property
    def verticals_left(self) -> Floats:
        """Vertical component at the left end of each segment; without weight that of both ends."""
        return self.verticals

    @property
    def verticals_right(self) -> Floats:
        """Vertical component at the right end of each segment."""
        return self.verticals

    @property
    def tensions_left(self) -> Floats:
        """Tension at the left end of each segment; without weight that of both ends."""
        return self.tensions

    @property
    def tensions_right(self) -> Floats:
        """Tension at the right end of each segment."""
        return self.tensions

    @property
    def angles_left(self) -> Floats:
        """Slope at the left end of each segment [degrees]."""
        return self.angles

    @property
    def angles_right(self) -> Floats:
        """Slope at the right end of each segment [degrees]."""
        return self.angles

    @property
    def angles(self) -> Floats:
        """Slope of each segment, rising to the right positive [degrees]."""
        slopes: Floats = np.degrees(np.arctan2(self.verticals, self.horizontal))
        return slopes

    @property
    def has_uplift(self) -> bool:
        """Whether a point stands above the closing string."""
        return bool(self.above_string)


def polygon(
    x: ArrayLike,
    loads: ArrayLike,
    y_left: float,
    y_right: float,
    horizontal: float,
    *,
    ea: float | None = None,
) -> Funicular:
    """Draw the string polygon through both supports that has a given pull.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force]. None at all, or a moment that is
        upward everywhere, is no fault here: an unloaded span is straight.
    y_left, y_right : float
        Ordinates of the supports [length].
    horizontal : float
        Horizontal component of the tension [force], > 0.
    ea : float, optional
        Axial stiffness [force], > 0; None for an inextensible cable.

    Returns
    -------
    Funicular
        The cable in equilibrium.

    Raises
    ------
    ValueError
        If a number is not finite, or the pull or EA is not positive.

    Notes
    -----
    General cable theorem (see the module). Limits: no weight of the cable, loads vertical and
    on their stations; the unstressed length of a piece is length / (1 + tension / EA).

    Examples
    --------
    >>> cable = polygon([0, 8, 16, 24], [15, 21], 12.0, 13.0, 152 / 2.4)
    >>> round(cable.sag, 9), round(cable.max_tension, 3)
    (2.4, 66.928)
    """
    beam = simple_beam(x, loads)
    pull = positive("horizontal", horizontal)
    left, right = finite("y_left", y_left), finite("y_right", y_right)
    rise = right - left
    drops = beam.moments / pull
    heights = rise * ((beam.x - beam.x[0]) / beam.span) - drops  # above the left support
    heights[-1] = rise
    ordinates = left + heights
    ordinates[-1] = right
    verticals = pull * (rise / beam.span) - beam.shears
    tensions = np.hypot(pull, verticals)
    lengths = beam.spacings * np.hypot(1.0, verticals / pull)
    strains = tensions / positive("ea", ea) if ea is not None else np.zeros_like(tensions)
    return Funicular(
        x=beam.x,
        y=frozen(ordinates),
        loads=beam.loads,
        horizontal=pull,
        verticals=frozen(verticals),
        tensions=frozen(tensions),
        lengths=frozen(lengths),
        unstressed_lengths=frozen(lengths / (1.0 + strains)),
        moments=beam.moments,
        drops=frozen(drops),
        sag_index=first_greatest(drops, beam.scale / pull),
        low_index=first_greatest(-heights, max(beam.span, float(np.max(np.abs(heights))))),
        above_string=beam.upward,
        residual=_greatest_residual(beam, heights, pull),
    )


def _greatest_residual(beam: SimpleBeam, heights: Floats, pull: float) -> float:
    """Unbalanced vertical force at the worst load point, from the shape and not from shears."""
    secants = np.diff(heights) / beam.spacings
    return float(np.max(np.abs(pull * np.diff(secants) - beam.loads), initial=0.0))
