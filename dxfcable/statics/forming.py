"""From the one rule that governs a weightless cable to its pull, and to its shape.

Every rule but the two lengths (module `lengths`) has a closed form. Formed under loads whose
simple-beam moment is nowhere downward there is no hanging shape: refused in one sentence.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import RuleError
from dxfcable.model import RuleKind
from dxfcable.statics.beam import TIE, finite, hanging_beam, shown_up, stated
from dxfcable.statics.funicular import Funicular, polygon
from dxfcable.statics.lengths import horizontal_for_cut_length, horizontal_for_length

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import SimpleBeam

_EPSILON = float(np.finfo(np.float64).eps)


def horizontal_for_sag(x: ArrayLike, loads: ArrayLike, sag: float) -> float:
    """Find the pull that gives a greatest drop below the closing string.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    sag : float
        Greatest vertical distance below the closing string anywhere [length], > 0.

    Returns
    -------
    float
        Horizontal component [force].

    Raises
    ------
    RuleError
        If the sag is not positive, or no simple-beam moment is downward.

    Notes
    -----
    General cable theorem: greatest moment over sag, at any support levels.

    Examples
    --------
    >>> round(horizontal_for_sag([0, 8, 16, 24], [15, 21], 2.4), 3)
    63.333
    """
    beam = hanging_beam(x, loads)
    return float(np.max(beam.moments)) / stated("sag", sag)


def horizontal_for_max_tension(
    x: ArrayLike, loads: ArrayLike, y_left: float, y_right: float, max_tension: float
) -> float:
    """Find the larger pull at which the largest tension anywhere has a given value.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    y_left, y_right : float
        Ordinates of the supports [length].
    max_tension : float
        Largest tension in any segment [force].

    Returns
    -------
    float
        Horizontal component [force]; of two shapes that meet the rule, the one that pulls more.

    Raises
    ------
    RuleError
        If every shape has a larger tension: `least` is the least possible one, `is_limit` says
        that it is only approached as the cable sags without end.

    Notes
    -----
    With chord slope s and shear V of a segment, T^2 = H^2 + (s H - V)^2 is convex in H, and
    only the greatest and the least shear can govern. Below the larger roots of both all
    tensions keep the limit.

    Examples
    --------
    >>> round(horizontal_for_max_tension([0, 4, 8, 10], [600, 450], 0, 0, 720), 2)
    397.99
    """
    beam = hanging_beam(x, loads)
    slope = (finite("y_right", y_right) - finite("y_left", y_left)) / beam.span
    limit = stated("largest tension", max_tension)
    least, at = _least_tension(beam, slope)
    if limit <= least if at == 0.0 else limit < least * (1.0 - TIE):
        bound = "more than" if at == 0.0 else "at least"
        message = (
            f"No shape under these loads keeps the largest tension at {limit:g}: "
            f"it must be {bound} {shown_up(least)}."
        )
        raise RuleError(message, least=least, is_limit=at == 0.0)
    return max(at, min(_larger_root(slope, shear, limit) for shear in _extreme_shears(beam)))


def horizontal_for_low_point(
    x: ArrayLike, loads: ArrayLike, y_left: float, y_right: float, low_point: float
) -> float:
    """Find the pull at which the lowest point of the cable has a given ordinate.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    y_left, y_right : float
        Ordinates of the supports [length].
    low_point : float
        Ordinate of the lowest point [length], in the same datum as the supports' ordinates.

    Returns
    -------
    float
        Horizontal component [force].

    Raises
    ------
    RuleError
        If the ordinate is not below the lower support (`least` is that support's ordinate, here
        an upper bound), or no moment is downward.

    Notes
    -----
    Each point with a downward moment reaches the ordinate at its own pull, moment over depth
    below the closing string; at the largest of these pulls no point is lower.

    Examples
    --------
    >>> horizontal_for_low_point([0, 2, 4], [10], 0.0, 1.0, -0.5)
    10.0
    """
    beam = hanging_beam(x, loads)
    left, right = finite("y_left", y_left), finite("y_right", y_right)
    lower = min(left, right)
    if not (math.isfinite(low_point) and low_point < lower):
        message = (
            f"The low point {low_point:g} must be below the lower support, {lower:g}: "
            "state a lower one."
        )
        raise RuleError(message, least=lower, is_limit=True)
    far = beam.x - beam.x[0] if left <= right else beam.x[-1] - beam.x  # from the lower support
    depths = (lower - low_point) + abs(right - left) * (far / beam.span)
    return float(np.max(beam.moments / depths))


def horizontal_through(
    x: ArrayLike, loads: ArrayLike, y_left: float, y_right: float, point: tuple[float, float]
) -> float:
    """Find the pull at which the cable passes through a point.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    y_left, y_right : float
        Ordinates of the supports [length].
    point : (float, float)
        Station strictly between the supports, and ordinate [length].

    Returns
    -------
    float
        Horizontal component [force].

    Raises
    ------
    RuleError
        If the point is not between the supports, lies on the closing string, or on the side of
        it where the cable cannot be, or no moment is downward.

    Notes
    -----
    General cable theorem at the point; between loads the moment is linear.

    Examples
    --------
    >>> horizontal_through([0, 5, 20], [50], 0.0, 0.0, (5, -1))
    187.5
    """
    beam = hanging_beam(x, loads)
    at, ordinate = finite("x of the point", point[0]), finite("y of the point", point[1])
    left, right = finite("y_left", y_left), finite("y_right", y_right)
    if not beam.x[0] < at < beam.x[-1]:
        message = (
            f"The point at x = {at:g} must lie between the supports, "
            f"{beam.x[0]:g} and {beam.x[-1]:g}."
        )
        raise RuleError(message)
    from_left = at - beam.x[0]
    moment = float(np.interp(from_left, beam.x - beam.x[0], beam.moments))
    depth = float((left - ordinate) + (right - left) * (from_left / beam.span))
    noise = 4.0 * _EPSILON * max(abs(left), abs(right), abs(ordinate), beam.span)
    where = f"The point ({at:g}, {ordinate:g})"
    if abs(moment) <= TIE * beam.scale:
        message = f"{where} fixes no shape: there the cable meets its closing string at any pull."
        raise RuleError(message)
    if abs(depth) <= noise:
        message = f"{where} lies on the closing string, which only a straight cable would meet."
        raise RuleError(message)
    if (depth > 0.0) is not (moment > 0.0):
        side, drawn = ("below", "above") if moment > 0.0 else ("above", "below")
        message = (
            f"{where} is {drawn} the closing string, but under these loads the cable passes "
            f"{side} it there: move the point."
        )
        raise RuleError(message)
    return moment / depth


def form(
    x: ArrayLike,
    loads: ArrayLike,
    y_left: float,
    y_right: float,
    kind: RuleKind,
    value: float = 0.0,
    *,
    point: tuple[float, float] | None = None,
    ea: float | None = None,
) -> Funicular:
    """Form the cable that meets its one rule.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    y_left, y_right : float
        Ordinates of the supports [length].
    kind : RuleKind
        The rule.
    value : float
        Its value [length or force]; for a low point the ordinate. Not read for THROUGH.
    point : (float, float), optional
        For THROUGH.
    ea : float, optional
        Axial stiffness [force]; None for inextensible.

    Returns
    -------
    Funicular
        The cable in equilibrium. `has_uplift` says that part of it is above its closing string.

    Raises
    ------
    RuleError
        If no hanging cable meets the rule.
    ValueError
        If THROUGH comes without a point, or a number is not finite.
    ConvergenceError
        From the two rules on lengths only.

    Examples
    --------
    >>> cable = form([0, 8, 16, 24], [15, 21], 12, 13, RuleKind.SAG, 2.4, ea=9000)
    >>> round(cable.length, 4), round(cable.unstressed_length, 4)
    (24.6576, 24.4805)
    """
    match kind:
        case RuleKind.SAG:
            pull = horizontal_for_sag(x, loads, value)
        case RuleKind.PULL:
            hanging_beam(x, loads)
            pull = stated("pull", value)
        case RuleKind.MAX_TENSION:
            pull = horizontal_for_max_tension(x, loads, y_left, y_right, value)
        case RuleKind.LOW_POINT:
            pull = horizontal_for_low_point(x, loads, y_left, y_right, value)
        case RuleKind.LENGTH:
            pull = horizontal_for_length(x, loads, y_left, y_right, value)
        case RuleKind.CUT_LENGTH:
            pull = horizontal_for_cut_length(x, loads, y_left, y_right, value, ea=ea)
        case RuleKind.THROUGH:
            if point is None:
                message = "the rule THROUGH needs a point"
                raise ValueError(message)
            pull = horizontal_through(x, loads, y_left, y_right, point)
    return polygon(x, loads, y_left, y_right, pull, ea=ea)


def _extreme_shears(beam: SimpleBeam) -> tuple[float, float]:
    return float(np.max(beam.shears)), float(np.min(beam.shears))


def _least_tension(beam: SimpleBeam, slope: float) -> tuple[float, float]:
    """Least of the largest tensions over all pulls, and its pull; 0 if it is only a limit."""
    greatest, smallest = _extreme_shears(beam)
    pulls = [0.0, *(slope * shear / (1.0 + slope * slope) for shear in (greatest, smallest))]
    if slope != 0.0:
        pulls.append((greatest + smallest) / (2.0 * slope))  # where both tensions are equal

    def largest(pull: float) -> float:
        return max(math.hypot(pull, slope * pull - shear) for shear in (greatest, smallest))

    candidates = [(largest(pull), pull) for pull in pulls if pull >= 0.0]
    least, at = min(candidates)
    return least, at if at > TIE * least else 0.0


def _larger_root(slope: float, shear: float, tension: float) -> float:
    """Larger pull at which hypot(H, s H - V) is the tension, free of cancellation."""
    stiff = math.hypot(1.0, slope)
    least = abs(shear) / stiff
    # Rounding may leave a tension a hair under the least one of this segment.
    root = stiff * math.sqrt(max(0.0, (tension - least) * (tension + least)))
    lean = slope * shear
    if lean >= 0.0:
        return (lean + root) / stiff**2
    return (tension - abs(shear)) * (tension + abs(shear)) / (root - lean)
