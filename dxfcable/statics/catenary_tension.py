"""The larger of two pulls at which a cable with weight has a given largest tension.

Signs, order and units: see the package's docstring. A shallow cable pulls hard, a deep one
hangs heavily at its supports, so the largest tension has a least value in between. It is
bracketed on a grid of pulls, all solved at once, and refined about the least.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import RuleError
from dxfcable.statics.beam import TIE, shown_up
from dxfcable.statics.roots import bracketed_root

if TYPE_CHECKING:
    from collections.abc import Callable

    from dxfcable.statics.beam import Floats

_GRID = 64
_ROUNDS = 6  # each narrows the place of the least tension 16-fold; its value errs by the square


def pull_for_max_tension(
    tensions: Callable[[Floats], Floats], limit: float, low: float, high: float
) -> float:
    """Find the larger pull at which the largest tension is a given one.

    Parameters
    ----------
    tensions : callable
        From pulls (b,) to the largest tension of each shape (b,) [force].
    limit : float
        Wanted largest tension [force].
    low, high : float
        Bounds of the pull [force]; at `high` the tension is above the limit.

    Returns
    -------
    float
        Pull [force].

    Raises
    ------
    RuleError
        If every shape has a larger tension; `least` is the least one, `is_limit` says that it
        is only approached as the cable sags without end.
    """
    pulls = np.geomspace(low, high, _GRID)
    found = tensions(pulls)
    is_limit = int(np.argmin(found)) == 0
    for _ in range(_ROUNDS):
        if np.any(found <= limit):
            break
        least = int(np.argmin(found))
        first, last = max(least - 1, 0), min(least + 1, pulls.size - 1)
        pulls = np.geomspace(pulls[first], pulls[last], _GRID // 2 + 1)
        found = tensions(pulls)
    kept = np.flatnonzero(found <= limit)
    if not kept.size:
        return _least_or_refuse(pulls, found, limit, is_limit=is_limit)
    inner = int(kept[-1])
    if inner == pulls.size - 1:
        return float(pulls[inner])

    def excess(exponent: float) -> float:
        return float(tensions(np.array([math.exp(exponent)]))[0]) / limit - 1.0

    return math.exp(bracketed_root(excess, math.log(pulls[inner]), math.log(pulls[inner + 1])))


def _least_or_refuse(pulls: Floats, found: Floats, limit: float, *, is_limit: bool) -> float:
    """Accept a limit that is the least tension but for rounding; else say what it must be."""
    at = int(np.argmin(found))
    least = float(found[at])
    if limit >= least * (1.0 - TIE) and not is_limit:
        return float(pulls[at])
    bound = "more than" if is_limit else "at least"
    message = (
        f"No shape under these loads and the cable's weight keeps the largest tension at "
        f"{limit:g}: it must be {bound} {shown_up(least)}."
    )
    raise RuleError(message, least=least, is_limit=is_limit)
