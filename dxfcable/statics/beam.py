"""The loads of a span on a simple beam: what every rule for the cable's shape rests on.

Signs, order and units: see the package's docstring. Distances are taken from both supports, so
that large coordinates cost no digits.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeAlias

import numpy as np

from dxfcable.errors import RuleError

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

    Floats: TypeAlias = NDArray[np.float64]

# Two values nearer than this, relative to their scale, count as equal: rounding of sums of a
# few thousand loads stays under it.
TIE = 1e-12


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SimpleBeam:
    """Moments and shears of the loads on a simple beam of the cable's span.

    Attributes
    ----------
    x : (n+2,) array
        Stations, both ends included [length].
    loads : (n,) array
        Loads at the inner stations, down positive [force].
    spacings : (n+1,) array
        Horizontal lengths of the segments [length].
    moments : (n+2,) array
        Sagging positive [force length]; zero at both ends.
    shears : (n+1,) array
        Left of the section up positive [force], one in each segment.
    scale : float
        Greatest moment of the loads' sizes, the measure of rounding [force length].
    """

    x: Floats
    loads: Floats
    spacings: Floats
    moments: Floats
    shears: Floats
    scale: float

    @property
    def span(self) -> float:
        """Horizontal distance of the supports [length]."""
        return float(self.x[-1] - self.x[0])

    @property
    def is_downward_somewhere(self) -> bool:
        """Whether a hanging shape exists: some moment is sagging beyond rounding."""
        return bool(np.max(self.moments) > TIE * self.scale)

    @property
    def upward(self) -> tuple[int, ...]:
        """Indices of the stations whose moment is hogging beyond rounding."""
        return tuple(int(i) for i in np.flatnonzero(self.moments < -TIE * self.scale))


def simple_beam(x: ArrayLike, loads: ArrayLike) -> SimpleBeam:
    """Take the loads on a simple beam of the cable's span.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations from left to right, both ends included [length], strictly increasing.
    loads : (n,) array of float
        Vertical loads at the inner stations, down positive [force]; zero and uplift allowed.

    Returns
    -------
    SimpleBeam
        Moments and shears.

    Raises
    ------
    ValueError
        If a number is not finite, the stations do not increase, or the counts do not match.

    Notes
    -----
    A moment is the sum of what the loads left and right of the section give, each a sum of
    terms of one sign when all loads are down: nothing is lost near a support or at large x.
    """
    stations, forces = _checked(x, loads)
    from_left, from_right = stations - stations[0], stations[-1] - stations
    span = from_right[0]
    at_left, at_right = _one_sided_sums(forces, from_left, from_right)
    # Station k takes the loads up to and with k from the left, those beyond k from the right.
    moments = (from_right[:-1] * at_left + from_left[:-1] * at_right) / span
    sizes = _one_sided_sums(np.abs(forces), from_left, from_right)
    measure = (from_right[:-1] * sizes[0] + from_left[:-1] * sizes[1]) / span
    return SimpleBeam(
        x=frozen(stations),
        loads=frozen(forces),
        spacings=frozen(np.diff(stations)),
        moments=frozen(np.append(moments, 0.0)),
        shears=frozen((at_right - at_left) / span),
        scale=float(np.max(measure)),
    )


def simple_beam_moments(x: ArrayLike, loads: ArrayLike) -> Floats:
    """Find the simple-beam moments at all stations, sagging positive.

    Parameters and errors are those of `simple_beam`.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both ends included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].

    Returns
    -------
    (n+2,) array of float
        Moments [force length], zero at both ends.

    Examples
    --------
    >>> simple_beam_moments([0, 8, 16, 24], [15, 21]).tolist()
    [0.0, 136.0, 152.0, 0.0]
    """
    return simple_beam(x, loads).moments


def hanging_beam(x: ArrayLike, loads: ArrayLike) -> SimpleBeam:
    """Take the loads on a simple beam, and refuse loads under which no cable can hang.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].

    Returns
    -------
    SimpleBeam
        With a downward moment somewhere.

    Raises
    ------
    RuleError
        If there are no loads, all are zero, or the moment is nowhere downward.
    ValueError
        As `simple_beam`.
    """
    beam = simple_beam(x, loads)
    if not np.any(beam.loads):
        message = (
            "A weightless cable without loads has no determinate shape: give it loads or a weight."
        )
        raise RuleError(message)
    if not beam.is_downward_somewhere:
        message = (
            "The simple-beam moment of these loads is nowhere downward, so no hanging cable "
            "can be formed: form it under a combination that is."
        )
        raise RuleError(message)
    return beam


def first_greatest(values: Floats, scale: float) -> int:
    """Find the first value that is the greatest, or equals it within 1e-12 of the scale."""
    return int(np.argmax(values >= np.max(values) - TIE * abs(scale)))


def shown_up(value: float) -> str:
    """Write a least value with six digits, never rounded down: what is shown is allowed."""
    text = f"{value:.6g}"
    if float(text) >= value or value <= 0.0:
        return text
    return f"{value + 10.0 ** (math.floor(math.log10(value)) - 5):.6g}"


def stated(name: str, value: float) -> float:
    """Return a rule's value, which the drafter chose, or refuse it."""
    if not (math.isfinite(value) and value > 0.0):
        message = f"The {name} must be a positive number, not {value:g}."
        raise RuleError(message, least=0.0, is_limit=True)
    return float(value)


def finite(name: str, value: float) -> float:
    """Return the value as a float, or say which quantity is not a finite number."""
    if not math.isfinite(value):
        message = f"{name} must be a finite number, not {value}"
        raise ValueError(message)
    return float(value)


def positive(name: str, value: float) -> float:
    """Return the value as a float, or say which quantity is not a positive number."""
    if not (math.isfinite(value) and value > 0.0):
        message = f"{name} must be a positive number, not {value}"
        raise ValueError(message)
    return float(value)


def _one_sided_sums(forces: Floats, from_left: Floats, from_right: Floats) -> tuple[Floats, Floats]:
    """For each segment: moments about the near end of the loads left and right of it."""
    about_left = np.cumsum(np.append(0.0, forces * from_left[1:-1]))
    about_right = np.cumsum(np.append(0.0, (forces * from_right[1:-1])[::-1]))[::-1]
    return about_left, about_right


def _checked(x: ArrayLike, loads: ArrayLike) -> tuple[Floats, Floats]:
    """Stations and loads as fresh arrays, or one sentence on what is wrong with them."""
    stations, forces = np.array(x, dtype=np.float64), np.array(loads, dtype=np.float64)
    if stations.ndim != 1 or stations.size < 2:
        message = f"x must be a row of two stations or more, not of shape {stations.shape}"
        raise ValueError(message)
    if forces.shape != (stations.size - 2,):
        message = (
            f"loads must have one value for each of the {stations.size - 2} inner stations, "
            f"not the shape {forces.shape}"
        )
        raise ValueError(message)
    if not np.all(np.isfinite(stations)) or not np.all(np.isfinite(forces)):
        message = "x and loads must be finite numbers"
        raise ValueError(message)
    if not np.all(np.diff(stations) > 0.0):
        message = "x must increase from station to station"
        raise ValueError(message)
    return stations, forces


def frozen(values: Floats) -> Floats:
    """Make an array read only, as a frozen dataclass promises."""
    values.flags.writeable = False
    return values
