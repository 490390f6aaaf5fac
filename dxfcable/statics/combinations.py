"""Load cases and linear combinations of them: "1.2D + 1.6L".

Loads are combined first and the cable is solved once for each combination, since the tension
of a cable does not add. Texts that stand for several combinations: `expansion`; loads in part
of the span: `patterns`.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from numpy.typing import NDArray

SERVICE, FACTORED = "service", "factored"

_PREFIX = re.compile(rf"\s*({SERVICE}|{FACTORED})\s*:", re.IGNORECASE)
_ALTERNATIVES = re.compile(r"\+\s*/?\s*-|-\s*/?\s*\+|±|\bor\b|\[", re.IGNORECASE)
_TERM = re.compile(r"\s*([+-]?)\s*(\d+(?:\.\d*)?|\.\d+)?\s*\*?\s*([A-Za-z][A-Za-z0-9_]*)\s*")


class CombinationError(DxfcableError, ValueError):
    """A combination that cannot be read, or that names a case which no point carries."""

    code = "combination"


class AlternativesError(CombinationError):
    """A combination that stands for several: a cable is formed under a single one."""

    code = "combination-alternatives"


@dataclass(frozen=True, slots=True, kw_only=True)
class Combination:
    """One linear combination.

    Attributes
    ----------
    text : str
        As typed, without a level prefix and outer blanks.
    terms : tuple of (str, float)
        Case and factor, in the order typed.
    level : str
        `service` or `factored`.
    level_is_assumed : bool
        Whether the level was only inferred from the factors.
    patterns : tuple of str
        For each term the part of the span that it acts on (`patterns.PATTERNS`), "" for all
        of it; empty where no term has one.
    """

    text: str
    terms: tuple[tuple[str, float], ...]
    level: str
    level_is_assumed: bool
    patterns: tuple[str, ...] = ()

    @property
    def placed_terms(self) -> tuple[tuple[str, float, str], ...]:
        """Case, factor and pattern of each term."""
        patterns = self.patterns or ("",) * len(self.terms)
        return tuple(
            (case, factor, pattern)
            for (case, factor), pattern in zip(self.terms, patterns, strict=True)
        )


def parse(
    text: str,
    known_cases: Sequence[str],
    *,
    aliases: Mapping[str, str] | None = None,
    level: str | None = None,
) -> Combination:
    """Read one linear combination such as "1.2D + 1.6L" or "service: D + 0.75L".

    Parameters
    ----------
    text : str
        As typed. A factor stands before its case; without one it is 1.
    known_cases : sequence of str
        Cases that some load carries; compared with regard to case.
    aliases : mapping of str to str, optional
        Other names of cases, such as DL for D.
    level : str, optional
        `service` or `factored` where a standard's table says so; a prefix in the text wins.

    Returns
    -------
    Combination
        Its level from the prefix or `level`, else assumed from the factors.

    Raises
    ------
    AlternativesError
        If the text stands for several combinations ("or", "+-", "[left half]").
    CombinationError
        If it cannot be read, names a case that is not known, or a case twice.

    Examples
    --------
    >>> parse("1.2D + 1.6L", ["D", "L"]).terms
    (('D', 1.2), ('L', 1.6))
    """
    require_level(level)
    body, typed = split_level(text)
    stated = typed or level
    if _ALTERNATIVES.search(body):
        message = (
            f'"{text.strip()}" stands for several combinations; alternatives belong to checking, '
            "and a cable is formed under a single one: name that one."
        )
        raise AlternativesError(message)
    terms = tuple(
        (known_case(name, text, known_cases, aliases or {}), factor)
        for name, factor in _terms(body)
    )
    names = [case for case, _ in terms]
    for case in names:
        if names.count(case) > 1:
            message = f'"{text.strip()}" names case {case} twice: write it once with its factor.'
            raise CombinationError(message)
    return Combination(
        text=body,
        terms=terms,
        level=stated or assumed_level(terms),
        level_is_assumed=stated is None,
    )


def assumed_level(terms: Sequence[tuple[str, float]]) -> str:
    """Infer the level of a combination from its factors.

    Parameters
    ----------
    terms : sequence of (str, float)
        Case and factor.

    Returns
    -------
    str
        `factored` if a factor is over 1 in size, or D is at 0.9, or W or E at 1.0 stands
        beside D; else `service`.

    Examples
    --------
    >>> assumed_level([("D", 1.0), ("L", 0.75)]), assumed_level([("D", 0.9), ("W", -1.0)])
    ('service', 'factored')
    """
    over_one = any(abs(factor) > 1.0 for _, factor in terms)
    reduced = ("D", 0.9) in terms
    beside_dead = any(case == "D" for case, _ in terms)
    lateral = any(case in ("W", "E") and abs(factor) == 1.0 for case, factor in terms)
    return FACTORED if over_one or reduced or (beside_dead and lateral) else SERVICE


def combine(
    cases: Sequence[Sequence[tuple[str, float]]], combination: Combination
) -> NDArray[np.float64]:
    """Combine the loads of each point.

    Parameters
    ----------
    cases : (n,) sequence of sequences of (str, float)
        For each point its cases and their values, down positive [force]. A case that a point
        does not carry counts as zero there; one that it carries twice adds.
    combination : Combination
        What to combine them by; without patterns, which need stations (`combine_states`).

    Returns
    -------
    (n,) array of float
        Loads, down positive [force].

    Raises
    ------
    ValueError
        If a term acts on a part of the span only.

    Examples
    --------
    >>> points = [[("D", 10.0), ("L", 5.0)], [("D", 20.0)]]
    >>> combine(points, parse("1.2D + 1.6L", ["D", "L"])).tolist()
    [20.0, 24.0]
    """
    if any(combination.patterns):
        message = f'"{combination.text}" loads parts of the span: combine it with stations'
        raise ValueError(message)
    factors = dict(combination.terms)
    sums = [sum(factors.get(case, 0.0) * value for case, value in point) for point in cases]
    return np.array(sums, dtype=np.float64)


def default_under(cases: Sequence[str]) -> str | None:
    """Choose the case to form under where the drawing does not say: the only one, else D, else G.

    Parameters
    ----------
    cases : sequence of str
        All cases that the cable's points carry; repeats do not matter.

    Returns
    -------
    str or None
        None where several cases are neither D nor G: the drafter must say.

    Examples
    --------
    >>> default_under(["D", "L"]), default_under(["S"]), default_under(["L", "S"])
    ('D', 'S', None)
    """
    names = list(dict.fromkeys(cases))
    if len(names) == 1:
        return names[0]
    return next((case for case in ("D", "G") if case in names), None)


def split_level(text: str) -> tuple[str, str | None]:
    """Split the prefix that states a level from a combination.

    Parameters
    ----------
    text : str
        As typed.

    Returns
    -------
    tuple of (str, str or None)
        The combination without prefix and outer blanks; `service`, `factored` or None.

    Examples
    --------
    >>> split_level("service: D + 0.75L"), split_level("D")
    (('D + 0.75L', 'service'), ('D', None))
    """
    prefix = _PREFIX.match(text)
    if prefix is None:
        return text.strip(), None
    return text[prefix.end() :].strip(), prefix.group(1).lower()


def require_level(level: str | None) -> None:
    """Raise ValueError if a level is neither `service` nor `factored` nor left open."""
    if level not in (None, SERVICE, FACTORED):
        message = f"level must be {SERVICE} or {FACTORED}, not {level}"
        raise ValueError(message)


def known_case(name: str, text: str, known: Sequence[str], aliases: Mapping[str, str]) -> str:
    """Find the case that a name in a combination stands for.

    Parameters
    ----------
    name : str
        As typed.
    text : str
        The whole combination, for the message.
    known : sequence of str
        Cases that some load carries. A case of that very name wins over an alias.
    aliases : mapping of str to str
        Other names of cases.

    Returns
    -------
    str
        One of `known`.

    Raises
    ------
    CombinationError
        If no load carries it; the message lists the cases there are.

    Examples
    --------
    >>> known_case("DL", "1.2DL", ["D"], {"DL": "D"})
    'D'
    """
    for candidate in (name, aliases.get(name)):
        if candidate is not None and candidate in known:
            return candidate
    listed = ", ".join(dict.fromkeys(known)) or "none"
    message = f'"{text.strip()}" names case {name}, which no load carries; cases here: {listed}.'
    raise CombinationError(message)


def _terms(body: str) -> list[tuple[str, float]]:
    """Split into names and signed factors; every character must belong to a term."""
    terms: list[tuple[str, float]] = []
    at = 0
    while at < len(body) or not terms:
        match = _TERM.match(body, at)
        if match is None or (terms and not match.group(1)):
            message = (
                f'"{body}" is not a combination from "{body[at:]}" on: '
                'write factors before cases, as in "1.2D + 1.6L".'
            )
            raise CombinationError(message)
        sign, factor, name = match.groups()
        terms.append((name, float(factor or 1.0) * (-1.0 if sign == "-" else 1.0)))
        at = match.end()
    return terms
