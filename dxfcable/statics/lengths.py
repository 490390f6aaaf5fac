"""The pull that gives a cable its length, as formed or unstressed.

The unknown is u = 1 / pull. The length as formed, S(u), is convex and grows from the chord at
u = 0. What is solved is the excess over the chord, written as a sum of positive terms: a taut
cable exceeds its chord by so little that the difference of the two lengths would be rounding.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from fractions import Fraction
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import ConvergenceError, RuleError
from dxfcable.statics.beam import finite, hanging_beam, positive, shown_up

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import Floats, SimpleBeam

_ITERATIONS = 200
_STEP = 1e-10  # relative; Newton squares it, so the root returned is at rounding
_EPSILON = float(np.finfo(np.float64).eps)


def horizontal_for_length(
    x: ArrayLike, loads: ArrayLike, y_left: float, y_right: float, length: float
) -> float:
    """Find the pull at which the cable, as formed, has a given length.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    y_left, y_right : float
        Ordinates of the supports [length].
    length : float
        Stretched length between the supports [length], more than their chord.

    Returns
    -------
    float
        Horizontal component [force].

    Raises
    ------
    RuleError
        If the length is not above the chord (`least` is the chord), or no moment is downward.
    ConvergenceError
        If the iteration does not reach the length.

    Notes
    -----
    Newton in u = 1 / pull inside a bracket, from the side where the convex excess makes it
    monotone. With slope s of the chord, shear V, q = s - V u, r = sqrt(1 + q^2) and
    r0 = sqrt(1 + s^2), the excess of a segment of width d is
    d (V u)^2 (r r0 - s q + 1) / (r0 (r + r0)^2): derived here from sum(V d) = 0.

    Examples
    --------
    >>> round(horizontal_for_length([0, 0.5, 1], [1.0], 0.0, 0.0, 1.01), 6)
    3.526728
    """
    return _horizontal(x, loads, (y_left, y_right), length, None, "length")


def horizontal_for_cut_length(
    x: ArrayLike,
    loads: ArrayLike,
    y_left: float,
    y_right: float,
    cut_length: float,
    *,
    ea: float | None = None,
) -> float:
    """Find the pull at which the pieces' unstressed lengths sum to a given length.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    y_left, y_right : float
        Ordinates of the supports [length].
    cut_length : float
        Unstressed length between the supports [length]. With EA it may be less than the chord.
    ea : float, optional
        Axial stiffness [force]; without it the cable does not stretch.

    Returns
    -------
    float
        Horizontal component [force].

    Raises
    ------
    RuleError
        If the length is not positive, without EA not above the chord, or no moment is downward.
    ConvergenceError
        If the iteration does not reach the length.

    Notes
    -----
    A piece of length S under tension T was S / (1 + T / EA) long. The sum falls as the pull
    grows as long as no piece stretches by more than about 40 % (tried over random cables,
    OWN); a wire cable stays under 2 %.

    Examples
    --------
    >>> pull = horizontal_for_cut_length([0, 8, 16, 24], [15, 21], 12, 13, 24.4805, ea=9000)
    >>> round(pull, 1)
    63.3
    """
    return _horizontal(x, loads, (y_left, y_right), cut_length, ea, "cut length")


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Excess:
    """Unstressed length minus the wanted one, as a function of u = 1 / pull."""

    widths: Floats
    shears: Floats
    slope: float  # of the closing string
    wanted: float  # excess over the chord, negative for a cable shorter than it
    ea: float | None

    def __call__(self, inverse: float) -> tuple[float, float]:
        """Value [length] and derivative with respect to u."""
        turns = self.shears * inverse
        slopes = self.slope - turns
        rays, chord = np.hypot(1.0, slopes), math.hypot(1.0, self.slope)
        shape = (rays * chord - self.slope * slopes + 1.0) / (chord * (rays + chord) ** 2)
        value = math.fsum(self.widths * turns**2 * shape) - self.wanted
        growth = self.widths * self.shears * (self.slope / chord - slopes / rays)
        if self.ea is None:
            return value, math.fsum(growth)
        soft = inverse * self.ea  # EA / pull
        value -= math.fsum(self.widths * rays**2 / (soft + rays))
        growth = -self.widths * self.shears * slopes / rays * soft**2 + (
            self.widths * rays**2 * self.ea
        )
        return value, math.fsum(growth / (soft + rays) ** 2)


def _horizontal(
    x: ArrayLike,
    loads: ArrayLike,
    supports: tuple[float, float],
    length: float,
    ea: float | None,
    name: str,
) -> float:
    beam = hanging_beam(x, loads)
    rise = finite("y_right", supports[1]) - finite("y_left", supports[0])
    chord = math.hypot(beam.span, rise)
    if not (math.isfinite(length) and length > 0.0):
        message = f"The {name} must be a positive number, not {length:g}."
        raise RuleError(message, least=0.0 if ea is not None else chord, is_limit=True)
    wanted = _over_chord(length, beam.span, rise, chord)
    noise = 4.0 * _EPSILON * max(chord, *np.abs(beam.x[[0, -1]]), *map(abs, supports))
    if ea is None and wanted <= noise:
        message = (
            f"The {name} {length:g} must be more than the chord between the supports, "
            f"{shown_up(chord)}: state a longer one."
        )
        raise RuleError(message, least=chord, is_limit=True)
    excess = _Excess(
        widths=beam.spacings,
        shears=beam.shears,
        slope=rise / beam.span,
        wanted=wanted,
        ea=None if ea is None else positive("ea", ea),
    )
    return 1.0 / _increasing_root(excess, _start(beam, rise / beam.span, max(wanted, noise)))


def _over_chord(length: float, span: float, rise: float, chord: float) -> float:
    """Length minus chord, exact before the last rounding: (L^2 - l^2 - h^2) / (L + chord)."""
    squares = Fraction(length) ** 2 - Fraction(span) ** 2 - Fraction(rise) ** 2
    return float(squares) / (length + chord)


def _start(beam: SimpleBeam, slope: float, wanted: float) -> float:
    """Inverse pull of a taut cable: excess = u^2 sum(V^2 d) / (2 (1 + s^2)^1.5)."""
    squares = math.fsum(beam.spacings * beam.shears**2)
    return math.sqrt(2.0 * wanted * math.hypot(1.0, slope) ** 3 / squares)


def _increasing_root(function: Callable[[float], tuple[float, float]], start: float) -> float:
    """Find the positive root of a function that is negative near zero and grows."""
    low = high = start
    for _ in range(_ITERATIONS):
        if function(low)[0] <= 0.0:
            break
        low /= 8.0
    for _ in range(_ITERATIONS):
        if function(high)[0] >= 0.0:
            break
        high *= 8.0
    at, value = high, math.inf
    for _ in range(_ITERATIONS):
        value, slope = function(at)
        low, high = (low, at) if value >= 0.0 else (at, high)
        step = value / slope if slope > 0.0 else math.inf
        if abs(step) <= _STEP * at:
            return at - step
        inside = low < at - step < high
        at = at - step if inside else math.sqrt(low) * math.sqrt(high)
    message = f"The pull for this length was not found in {_ITERATIONS} steps."
    raise ConvergenceError(message, residual=abs(value), iterations=_ITERATIONS)
