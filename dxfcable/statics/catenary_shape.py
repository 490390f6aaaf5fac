"""One elastic cable in equilibrium, with its curve inside the pieces as well.

Signs, order and units: see the package's docstring. The curve is tangent to the tension, so
it is parallel to a line of slope m where the vertical component is m times the pull: that is
where its distance below or above the line is greatest or least.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, Literal

import numpy as np

from dxfcable.statics.beam import TIE, first_greatest
from dxfcable.statics.catenary_piece import flexibility, hang
from dxfcable.statics.catenary_width import unstressed_for_width

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Catenary:
    """An elastic cable with weight in equilibrium; arrays are read only.

    Attributes
    ----------
    x, y : (n+2,) array
        Supports and load points from left to right [length].
    loads : (n,) array
        Loads at the inner points, down positive [force].
    weight : float
        Per unstressed length, with the factor of its load case [force/length].
    ea : float or None
        Axial stiffness [force]; None for no stretch.
    thermal : float
        1 + expansion times change of temperature.
    horizontal : float
        Horizontal component of every tension: the pull [force].
    verticals_left, verticals_right : (n+1,) array
        Vertical component of the tension at both ends of each piece, rising to the right
        positive [force].
    tensions_left, tensions_right : (n+1,) array
        Tension at both ends of each piece [force].
    lengths, unstressed_lengths : (n+1,) array
        Along the stretched curve, and without force at the reference temperature [length].
    residual : float
        Distance by which the pieces miss the right support or their stations [length].
    iterations : int
        Newton steps that it took.
    """

    x: Floats
    y: Floats
    loads: Floats
    weight: float
    ea: float | None
    thermal: float
    horizontal: float
    verticals_left: Floats
    verticals_right: Floats
    tensions_left: Floats
    tensions_right: Floats
    lengths: Floats
    unstressed_lengths: Floats
    residual: float
    iterations: int

    @property
    def span(self) -> float:
        """Horizontal distance of the supports [length]."""
        return float(self.x[-1] - self.x[0])

    @property
    def reaction_left(self) -> tuple[float, float]:
        """What the left support gives: horizontal outward, vertical up positive [force]."""
        return self.horizontal, -float(self.verticals_left[0])

    @property
    def reaction_right(self) -> tuple[float, float]:
        """What the right support gives: horizontal outward, vertical up positive [force]."""
        return self.horizontal, float(self.verticals_right[-1])

    @property
    def length(self) -> float:
        """Stretched length [length]."""
        return math.fsum(self.lengths)

    @property
    def unstressed_length(self) -> float:
        """Sum of the pieces' unstressed lengths [length]."""
        return math.fsum(self.unstressed_lengths)

    @property
    def tensions(self) -> Floats:
        """Largest tension of each piece [force]: at one of its ends, since V is monotone."""
        tensions: Floats = np.maximum(self.tensions_left, self.tensions_right)
        return tensions

    @property
    def max_tension(self) -> float:
        """Largest tension anywhere [force]."""
        return float(np.max(self.tensions))

    @property
    def governing_segment(self) -> int:
        """The piece with the largest tension; of equals (1e-12 relative) the leftmost."""
        return first_greatest(self.tensions, self.max_tension)

    @property
    def governing_end(self) -> Literal["left", "right"]:
        """The end of that piece with the larger tension; of equals the one nearer a support."""
        piece = self.governing_segment
        gain = self.tensions_right[piece] - self.tensions_left[piece]
        if abs(gain) > TIE * self.max_tension:
            return "right" if gain > 0.0 else "left"
        before, behind = self.x[piece] - self.x[0], self.x[-1] - self.x[piece + 1]
        return "right" if behind < before - TIE * self.span else "left"

    @property
    def angles_left(self) -> Floats:
        """Slope at the left end of each piece, rising to the right positive [degrees]."""
        slopes: Floats = np.degrees(np.arctan2(self.verticals_left, self.horizontal))
        return slopes

    @property
    def angles_right(self) -> Floats:
        """Slope at the right end of each piece, rising to the right positive [degrees]."""
        slopes: Floats = np.degrees(np.arctan2(self.verticals_right, self.horizontal))
        return slopes

    @property
    def drops(self) -> Floats:
        """Distance of every point below the closing string, negative above it [length]."""
        rise = float(self.y[-1] - self.y[0])
        drops: Floats = rise * ((self.x - self.x[0]) / self.span) - (self.y - self.y[0])
        drops[-1] = 0.0
        return drops

    @property
    def above_string(self) -> tuple[int, ...]:
        """Points held above the closing string by uplift."""
        scale = self.span + abs(float(self.y[-1] - self.y[0]))
        return tuple(int(i) for i in np.flatnonzero(self.drops < -TIE * scale))

    @property
    def has_uplift(self) -> bool:
        """Whether a point stands above the closing string."""
        return bool(self.above_string)

    @property
    def sag(self) -> float:
        """Greatest drop of the curve below the closing string anywhere [length]."""
        at, ordinate = self.sag_point
        rise = float(self.y[-1] - self.y[0])
        return rise * ((at - float(self.x[0])) / self.span) - (ordinate - float(self.y[0]))

    @property
    def sag_point(self) -> tuple[float, float]:
        """The point on the curve where the drop is greatest [length]."""
        slope = float(self.y[-1] - self.y[0]) / self.span
        return self.farthest_below(slope)

    @property
    def low_point(self) -> tuple[float, float]:
        """The lowest point of the curve, a support included [length]."""
        return self.farthest_below(0.0)

    def ordinates_at(self, x: ArrayLike) -> Floats:
        """Find the ordinates of the curve at given stations.

        Parameters
        ----------
        x : array of float
            Stations between the supports [length].

        Returns
        -------
        array
            Ordinates [length]; the nodes' own at their stations.

        Raises
        ------
        ValueError
            If a station is beyond the supports.
        """
        at = np.asarray(x, dtype=np.float64)
        if np.any((at < self.x[0]) | (at > self.x[-1])):
            message = f"stations must lie between the supports, {self.x[0]:g} and {self.x[-1]:g}"
            raise ValueError(message)
        piece = np.clip(np.searchsorted(self.x, at, side="right") - 1, 0, self.lengths.size - 1)
        pull = np.asarray(self.horizontal)
        left = self.verticals_left[piece]
        lengths = unstressed_for_width(
            pull, left, self.weight, at - self.x[piece], flexibility(self.ea), self.thermal
        )
        part = hang(lengths, self.weight, pull, left, ea=self.ea, thermal=self.thermal)
        ordinates: Floats = np.where(
            at == self.x[piece + 1], self.y[piece + 1], self.y[piece] + part.up
        )
        return ordinates

    def least_clearance(self, line: Sequence[tuple[float, float]]) -> tuple[float, float]:
        """Find the least vertical distance of the curve above a line.

        Parameters
        ----------
        line : sequence of (float, float)
            Vertices from left to right [length], at least two with increasing x.

        Returns
        -------
        clearance, x : float
            Negative where the curve is below the line; the leftmost station of the least.

        Raises
        ------
        ValueError
            If the line does not reach under the cable.

        Notes
        -----
        Exact: the least is at a node, at a vertex, at an end of the common reach, or where a
        piece is parallel to a side of the line.
        """
        corners = np.asarray(line, dtype=np.float64)
        if corners.ndim != 2 or corners.shape[0] < 2 or not np.all(np.diff(corners[:, 0]) > 0.0):
            message = "the line must have two vertices or more from left to right"
            raise ValueError(message)
        first, last = max(corners[0, 0], self.x[0]), min(corners[-1, 0], self.x[-1])
        if first > last:
            message = "the line lies beyond the cable"
            raise ValueError(message)
        slopes = np.diff(corners[:, 1]) / np.diff(corners[:, 0])
        tangents = [self._parallel_points(float(slope))[0] for slope in np.unique(slopes)]
        at = np.concatenate([self.x, corners[:, 0], [first, last], *tangents])
        at = np.unique(at[(at >= first) & (at <= last)])
        heights = self.ordinates_at(at) - np.interp(at, corners[:, 0], corners[:, 1])
        least = first_greatest(-heights, float(np.max(np.abs(heights))))
        return float(heights[least]), float(at[least])

    def _parallel_points(self, slope: float) -> tuple[Floats, Floats]:
        """Points inside pieces where the curve has a slope."""
        wanted = slope * self.horizontal
        inside = (self.verticals_left < wanted) & (wanted < self.verticals_right)
        some = np.flatnonzero(inside)
        if not some.size:
            return np.empty(0), np.empty(0)
        left = self.verticals_left[some]
        part = hang(
            (wanted - left) / self.weight,
            self.weight,
            self.horizontal,
            left,
            ea=self.ea,
            thermal=self.thermal,
        )
        return self.x[some] + part.across, self.y[some] + part.up

    def farthest_below(self, slope: float) -> tuple[float, float]:
        """Find the point of the curve that is farthest below a line.

        Parameters
        ----------
        slope : float
            Of the line, rise over run; where it lies does not matter.

        Returns
        -------
        x, y : float
            The leftmost of equals [length].
        """
        across, ordinates = self._parallel_points(slope)
        at, up = np.concatenate([self.x, across]), np.concatenate([self.y, ordinates])
        order = np.argsort(at, kind="stable")
        at, up = at[order], up[order]
        depths = slope * (at - self.x[0]) - (up - self.y[0])
        scale = max(self.span, float(np.max(np.abs(up - self.y[0]))))
        chosen = first_greatest(depths, scale)
        return float(at[chosen]), float(up[chosen])
