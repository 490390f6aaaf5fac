"""What each rule measures on a cable with weight, and what it refuses beforehand.

Signs, order and units: see the package's docstring. Every measure falls as the pull grows,
is zero where the rule holds, and is relative to the wanted value.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import RuleError
from dxfcable.model import RuleKind
from dxfcable.statics.beam import finite, shown_up, stated

if TYPE_CHECKING:
    from collections.abc import Callable

    from dxfcable.statics.beam import SimpleBeam
    from dxfcable.statics.catenary_shape import Catenary

_EPSILON = float(np.finfo(np.float64).eps)


def greatest_moment(beam: SimpleBeam, rise: float, weight: float) -> tuple[float, float]:
    """Find the greatest simple-beam moment of the loads and of the closing string's weight.

    Parameters
    ----------
    beam : SimpleBeam
        Stations and loads.
    rise : float
        Of the right support above the left one [length].
    weight : float
        Per length of the closing string [force/length], > 0.

    Returns
    -------
    moment, scale : float
        Greatest moment, inside the pieces as well, and the measure of its rounding
        [force length].
    """
    span = beam.span
    even = weight * math.hypot(1.0, rise / span)
    ways = beam.x - beam.x[0]
    places = 0.5 * span + beam.shears / even  # where the shear of each piece would vanish
    inside = (places > ways[:-1]) & (places < ways[1:])
    at = np.concatenate([ways, places[inside]])
    moments = np.interp(at, ways, beam.moments) + 0.5 * even * at * (span - at)
    return float(np.max(moments)), beam.scale + 0.125 * even * span * span


def measure_of(
    kind: RuleKind,
    value: float,
    point: tuple[float, float] | None,
    beam: SimpleBeam,
    supports: tuple[float, float],
    ea: float | None,
) -> Callable[[Catenary], float]:
    """Return what a rule measures.

    Parameters
    ----------
    kind : RuleKind
        SAG, LOW_POINT, LENGTH, CUT_LENGTH or THROUGH.
    value : float
        Wanted [length].
    point : (float, float) or None
        For THROUGH.
    beam : SimpleBeam
        Stations and loads.
    supports : (float, float)
        Ordinates of the supports [length].
    ea : float or None
        Axial stiffness [force].

    Returns
    -------
    callable
        From a cable to a number that falls as the pull grows and is zero where the rule holds.

    Raises
    ------
    RuleError
        If no cable can meet the rule.
    ValueError
        If THROUGH comes without a point.
    """
    if kind is RuleKind.SAG:
        sag = stated("sag", value)
        return lambda cable: cable.sag / sag - 1.0
    if kind is RuleKind.LOW_POINT:
        return _low_point(value, min(supports))
    if kind is RuleKind.THROUGH:
        if point is None:
            message = "the rule THROUGH needs a point"
            raise ValueError(message)
        return _through(point, beam, supports)
    chord = math.hypot(beam.span, supports[1] - supports[0])
    name = kind.value.replace("_", " ")
    if not (math.isfinite(value) and value > 0.0):
        message = f"The {name} must be a positive number, not {value:g}."
        raise RuleError(message, least=0.0, is_limit=True)
    if (kind is RuleKind.LENGTH or ea is None) and value <= chord * (1.0 + 4.0 * _EPSILON):
        message = (
            f"The {name} {value:g} must be more than the chord between the supports, "
            f"{shown_up(chord)}: state a longer one."
        )
        raise RuleError(message, least=chord, is_limit=True)
    if kind is RuleKind.LENGTH:
        return lambda cable: cable.length / value - 1.0
    return lambda cable: cable.unstressed_length / value - 1.0


def _low_point(value: float, lower: float) -> Callable[[Catenary], float]:
    if not (math.isfinite(value) and value < lower):
        message = (
            f"The low point {value:g} must be below the lower support, {lower:g}: "
            "state a lower one."
        )
        raise RuleError(message, least=lower, is_limit=True)
    return lambda cable: (value - cable.low_point[1]) / (lower - value)


def _through(
    point: tuple[float, float], beam: SimpleBeam, supports: tuple[float, float]
) -> Callable[[Catenary], float]:
    at, ordinate = finite("x of the point", point[0]), finite("y of the point", point[1])
    left, right = supports
    if not beam.x[0] < at < beam.x[-1]:
        message = (
            f"The point at x = {at:g} must lie between the supports, "
            f"{beam.x[0]:g} and {beam.x[-1]:g}."
        )
        raise RuleError(message)
    depth = (left - ordinate) + (right - left) * ((at - beam.x[0]) / beam.span)
    noise = 4.0 * _EPSILON * max(abs(left), abs(right), abs(ordinate), beam.span)
    if abs(depth) <= noise:
        message = (
            f"The point ({at:g}, {ordinate:g}) lies on the closing string, which only a "
            "straight cable would meet."
        )
        raise RuleError(message)
    return lambda cable: (ordinate - float(cable.ordinates_at(at))) / depth
