"""One equation in one positive unknown, kept inside a bracket."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.errors import ConvergenceError, RuleError

if TYPE_CHECKING:
    from collections.abc import Callable

_ITERATIONS = 120
_EPSILON = 2.0**-52


def decreasing_root(
    function: Callable[[float], float], *, start: float, low: float, high: float, name: str
) -> float:
    """Find where a function that falls as its positive argument grows is zero.

    Parameters
    ----------
    function : callable
        Its value is relative: 1e-15 is rounding.
    start : float
        First guess, > 0.
    low, high : float
        Bounds of the search.
    name : str
        What is looked for, as the subject of an error's sentence.

    Returns
    -------
    float
        The root.

    Raises
    ------
    RuleError
        If the function has one sign between the bounds.

    Examples
    --------
    >>> round(decreasing_root(lambda u: 2 / u - 1, start=9.0, low=1e-9, high=1e9, name="u"), 12)
    2.0
    """
    at, value, factor = min(max(start, low), high), math.nan, 1.25
    other, other_value = at, function(at)
    while True:
        at = min(max(other * factor if other_value > 0.0 else other / factor, low), high)
        value = function(at)
        if (value > 0.0) is not (other_value > 0.0):
            break
        if at in (low, high):
            message = f"{name} cannot be met by a hanging cable under these loads."
            raise RuleError(message)
        other, other_value, factor = at, value, factor * factor
    return math.exp(bracketed_root(lambda u: function(math.exp(u)), math.log(other), math.log(at)))


def bracketed_root(function: Callable[[float], float], first: float, second: float) -> float:
    """Find the zero of a function between two arguments where its signs differ.

    Parameters
    ----------
    function : callable
        Continuous; values near 1e-16 are taken as zero.
    first, second : float
        Arguments with values of different sign.

    Returns
    -------
    float
        The best argument seen.

    Raises
    ------
    ConvergenceError
        If the bracket does not close.

    Notes
    -----
    Inverse quadratic steps where they are safe, else halving: the criterion of Chandrupatla,
    Adv. Eng. Software 28 (1997), 145 (MEM).
    """
    newest, value = first, function(first)
    against, other = second, function(second)
    share = 0.5
    for _ in range(_ITERATIONS):
        trial = newest + share * (against - newest)
        found = function(trial)
        if (found > 0.0) is (value > 0.0):
            third, third_value = newest, value
        else:
            third, third_value, against, other = against, other, newest, value
        newest, value = trial, found
        best, least = (newest, value) if abs(value) < abs(other) else (against, other)
        width = abs(against - newest)
        tolerance = 2.0 * _EPSILON * max(1.0, abs(best))
        if abs(least) <= _EPSILON or width <= tolerance:
            return best
        share = _share((newest, against, third), (value, other, third_value))
        share = min(max(share, 0.5 * tolerance / width), 1.0 - 0.5 * tolerance / width)
    message = f"The search for a rule did not close in {_ITERATIONS} steps."
    raise ConvergenceError(message, residual=abs(least), iterations=_ITERATIONS)


def _share(at: tuple[float, float, float], values: tuple[float, float, float]) -> float:
    """Part of the way from the newest to the opposite argument where the next trial goes."""
    newest, against, third = at
    value, other, third_value = values
    place = (newest - against) / (third - against)
    level = (value - other) / (third_value - other)
    if not (level * level < place and (1.0 - level) ** 2 < 1.0 - place):
        return 0.5
    return value / (other - value) * third_value / (other - third_value) + (
        (third - newest) / (against - newest)
    ) * value / (third_value - value) * other / (third_value - other)
