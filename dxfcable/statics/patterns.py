"""Loads in part of the span: the shares of patterns, and many combinations at once.

The patterns are common practice for cables, whose lowest and highest points come from partial
loads. Signs, order and units: see the package's docstring.
"""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.combinations import CombinationError

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike, NDArray

    from dxfcable.statics.combinations import Combination

PATTERNS = ("left half", "right half", "middle half", "end quarters", "odd points", "even points")
EACH = "each pattern"
BOUNDARY = 1e-9  # of the span: so near to a boundary a point takes half

_OTHER_NAMES = {
    "central half": ("middle half",),
    "checkerboard": ("odd points", "even points"),
    EACH: ("", *PATTERNS),
}
_OR = re.compile(r"\bor\b")


def pattern_names(text: str) -> tuple[str, ...]:
    """Read what stands between the square brackets of "D + L [left half]".

    Parameters
    ----------
    text : str
        Names between "or", without regard to case and blanks. "checkerboard" is odd points and
        even points, "each pattern" the whole span and then all of `PATTERNS`.

    Returns
    -------
    tuple of str
        Of `PATTERNS`, each once; "" for the whole span.

    Raises
    ------
    CombinationError
        If a name is not known; the message is only the reason, without place.

    Examples
    --------
    >>> pattern_names("Left half or checkerboard")
    ('left half', 'odd points', 'even points')
    """
    names: list[str] = []
    for part in _OR.split(text.lower()):
        name = " ".join(part.split())
        if name not in PATTERNS and name not in _OTHER_NAMES:
            known = ", ".join([*PATTERNS, *_OTHER_NAMES])
            message = f"patterns are {known}"
            raise CombinationError(message)
        names.extend(_OTHER_NAMES.get(name, (name,)))
    return tuple(dict.fromkeys(names))


def pattern_shares(pattern: str, x: ArrayLike, x0: float, x1: float) -> NDArray[np.float64]:
    """Tell how much of its load each point takes.

    Parameters
    ----------
    pattern : str
        One of `PATTERNS`, or "" for the whole span.
    x : (n,) array of float
        Stations of all load points of the span from left to right [length]. Odd points are the
        first, third and so on of them.
    x0, x1 : float
        Stations of the supports, x0 < x1 [length].

    Returns
    -------
    (n,) array of float
        1 inside the pattern, 0.5 on its boundary (within 1e-9 of the span), 0 outside. The
        supports themselves are no boundary.

    Raises
    ------
    ValueError
        If the pattern is not known, or the stations are not finite and in order between the
        supports.

    Examples
    --------
    >>> pattern_shares("left half", [2.0, 5.0, 8.0], 0.0, 10.0).tolist()
    [1.0, 0.5, 0.0]
    """
    stations = _stations(x, x0, x1)
    along = (stations - x0) / (x1 - x0)
    if pattern == "":
        return np.ones(along.shape)
    if pattern == "left half":
        return 1.0 - _beyond(along, 0.5)
    if pattern == "right half":
        return _beyond(along, 0.5)
    if pattern in ("middle half", "end quarters"):
        middle = _beyond(along, 0.25) - _beyond(along, 0.75)
        return middle if pattern == "middle half" else 1.0 - middle
    if pattern in ("odd points", "even points"):
        odd = (np.arange(along.size) + 1) % 2
        return (odd if pattern == "odd points" else 1 - odd).astype(np.float64)
    message = f"no pattern is called {pattern}; there are {', '.join(PATTERNS)}"
    raise ValueError(message)


def factors(combination: Combination, x: ArrayLike, x0: float, x1: float) -> NDArray[np.float64]:
    """Return the factor of each term at each point.

    Parameters
    ----------
    combination : Combination
        Of t terms.
    x : (n,) array of float
        Stations of all load points from left to right [length].
    x0, x1 : float
        Stations of the supports [length].

    Returns
    -------
    (n, t) array of float
        The term's factor times the share that its pattern gives the point.

    Raises
    ------
    ValueError
        As `pattern_shares`.

    Examples
    --------
    >>> from dxfcable.statics.expansion import expand
    >>> (half,) = expand("1.2D + 1.6L [left half]", ["D", "L"])
    >>> factors(half, [2.0, 5.0, 8.0], 0.0, 10.0).tolist()
    [[1.2, 1.6], [1.2, 0.8], [1.2, 0.0]]
    """
    columns = [
        factor * pattern_shares(pattern, x, x0, x1)
        for _, factor, pattern in combination.placed_terms
    ]
    return np.stack(columns, axis=1)


def combine_states(
    cases: Sequence[Sequence[tuple[str, float]]],
    x: ArrayLike,
    span: tuple[float, float],
    combinations: Sequence[Combination],
) -> NDArray[np.float64]:
    """Combine the loads of each point under many combinations at once.

    Parameters
    ----------
    cases : (n,) sequence of sequences of (str, float)
        For each point its cases and their values, down positive [force]. A case that a point
        does not carry counts as zero there; one that it carries twice adds.
    x : (n,) array of float
        Stations of the points from left to right [length].
    span : (float, float)
        Stations of the supports [length].
    combinations : (s,) sequence of Combination
        What to combine them by.

    Returns
    -------
    (s, n) array of float
        Loads, down positive [force], one row a combination.

    Raises
    ------
    ValueError
        If a value is not finite or `cases` and `x` differ in size; else as `pattern_shares`.

    Examples
    --------
    >>> from dxfcable.statics.expansion import expand
    >>> halves = expand("D + L [left half or right half]", ["D", "L"])
    >>> points = [[("D", 10.0), ("L", 4.0)], [("D", 10.0), ("L", 4.0)]]
    >>> combine_states(points, [2.0, 5.0], (0.0, 10.0), halves).tolist()
    [[14.0, 12.0], [10.0, 12.0]]
    """
    stations = _stations(x, *span)
    if stations.size != len(cases):
        message = f"there are {len(cases)} points and {stations.size} stations"
        raise ValueError(message)
    weights: dict[tuple[str, str], NDArray[np.float64]] = {}
    for row, combination in enumerate(combinations):
        for case, factor, pattern in combination.placed_terms:
            column = weights.setdefault((case, pattern), np.zeros(len(combinations)))
            column[row] += factor
    loads = np.zeros((len(combinations), stations.size))
    # added column by column, in the order of the terms: a matrix product may add in another
    # order on another machine
    for (case, pattern), column in weights.items():
        values = np.array([sum(v for c, v in point if c == case) for point in cases], np.float64)
        if not (np.all(np.isfinite(values)) and np.all(np.isfinite(column))):
            message = f"values and factors of case {case} must be finite numbers"
            raise ValueError(message)
        loads += column[:, None] * (values * pattern_shares(pattern, stations, *span))
    return loads


def case_factors(combination: Combination, side: str | None = None) -> dict[str, float]:
    """Return one factor for each case, for what is no load point of the span.

    Parameters
    ----------
    combination : Combination
        Of any terms.
    side : str, optional
        `left` or `right` for a load at that support: left half is in full at the left and
        absent at the right, middle half absent at both, all other patterns in full. Without
        it patterns are ignored, and of several patterned terms of a case the largest counts.

    Returns
    -------
    dict of str to float
        Cases in the order of the terms.

    Raises
    ------
    ValueError
        If `side` is neither.

    Examples
    --------
    >>> from dxfcable.statics.expansion import expand
    >>> (mixed,) = expand("D + L [left half] + 0.5L [right half]", ["D", "L"])
    >>> case_factors(mixed), case_factors(mixed, "right")
    ({'D': 1.0, 'L': 1.0}, {'D': 1.0, 'L': 0.5})
    """
    if side not in (None, "left", "right"):
        message = f"side must be left or right, not {side}"
        raise ValueError(message)
    whole: dict[str, float] = {}
    parts: dict[str, list[float]] = {}
    for case, factor, pattern in combination.placed_terms:
        whole.setdefault(case, 0.0)
        if not pattern:
            whole[case] += factor
        elif side is None or _reaches(pattern, side):
            parts.setdefault(case, []).append(factor)
    for case, values in parts.items():
        whole[case] += max(values, key=abs) if side is None else sum(values)
    return whole


def weight_factor(combination: Combination, case: str) -> float:
    """Return the factor of the cable's own weight.

    Parameters
    ----------
    combination : Combination
        Of any terms.
    case : str
        That the weight belongs to.

    Returns
    -------
    float
        Zero where the combination has no such case.

    Raises
    ------
    CombinationError
        If the case acts on part of the span.
    """
    for name, _, pattern in combination.placed_terms:
        if name == case and pattern:
            message = (
                f'"{combination.text}" has {case} in the {pattern} alone, and the cable\'s own '
                f"weight belongs to {case}: it cannot be in part of the span. Give {case} "
                "without a pattern, or name another WEIGHT_CASE."
            )
            raise CombinationError(message)
    return case_factors(combination).get(case, 0.0)


def _reaches(pattern: str, side: str) -> bool:
    """Whether a load at the support of that side is in the pattern."""
    return pattern not in {"middle half", "right half" if side == "left" else "left half"}


def _beyond(along: NDArray[np.float64], boundary: float) -> NDArray[np.float64]:
    """Return 1 right of the boundary, 0.5 on it, 0 left of it."""
    past = along - boundary
    return np.where(np.abs(past) <= BOUNDARY, 0.5, np.where(past > 0.0, 1.0, 0.0))


def _stations(x: ArrayLike, x0: float, x1: float) -> NDArray[np.float64]:
    """Stations as an array, or one sentence on what is wrong with them."""
    stations = np.asarray(x, dtype=np.float64)
    if stations.ndim != 1:
        message = f"x must be a row of stations, not of shape {stations.shape}"
        raise ValueError(message)
    ends = np.concatenate([[x0], stations, [x1]])
    if not np.all(np.isfinite(ends)) or not x0 < x1:
        message = "x, x0 and x1 must be finite numbers, x0 less than x1"
        raise ValueError(message)
    if np.any(np.diff(ends) < -BOUNDARY * (x1 - x0)):
        message = "x must run from left to right between x0 and x1"
        raise ValueError(message)
    return stations
