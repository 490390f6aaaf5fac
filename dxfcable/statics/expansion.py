"""Texts that stand for several combinations, expanded: "1.2D + 1.6(Lr or S)".

What expands: "or" in brackets; the sign "+-"; a pattern in square brackets that names several;
and case T, a change of temperature, which acts either way: typed with a plus it comes with
both signs, typed with a minus it stays as it is. Brackets without "or" are multiplied out.
Several alternatives in one text multiply, the first one slowest. Notation:
`combination_notation`; parts of the span: `patterns`.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from decimal import Decimal
from itertools import product
from math import isfinite, prod
from typing import TYPE_CHECKING

from dxfcable.statics.combination_notation import read_notation
from dxfcable.statics.combinations import (
    Combination,
    CombinationError,
    assumed_level,
    known_case,
    require_level,
    split_level,
)

if TYPE_CHECKING:
    from collections.abc import Iterator, Mapping, Sequence

    from dxfcable.statics.combination_notation import Item

MOST = 2000
TEMPERATURE = "T"


def expand(
    text: str,
    known_cases: Sequence[str],
    *,
    aliases: Mapping[str, str] | None = None,
    level: str | None = None,
) -> tuple[Combination, ...]:
    """Expand one text to all the combinations that it stands for.

    Parameters
    ----------
    text : str
        As typed; a prefix such as "service:" states the level of all.
    known_cases : sequence of str
        Cases that some load carries, T where there is a change of temperature.
    aliases : mapping of str to str, optional
        Other names of cases, such as DL for D.
    level : str, optional
        `service` or `factored` where a standard's table says so; a prefix in the text wins.

    Returns
    -------
    tuple of Combination
        In the order typed, each once. A text that is a single combination without brackets is
        echoed as typed; others are written out with factors as typed, products exact.

    Raises
    ------
    CombinationError
        If the text does not read (the message quotes it from the place on), names a case that
        is not known, loads one case twice in the same part of the span, gives the temperature
        a pattern, or stands for more than 2000 combinations.

    Examples
    --------
    >>> [one.text for one in expand("1.2D + 1.6(Lr or S)", ["D", "Lr", "S"])]
    ['1.2D + 1.6Lr', '1.2D + 1.6S']
    >>> [one.text for one in expand("D + 0.75(0.6W) + T", ["D", "W", "T"])]
    ['D + 0.45W + T', 'D + 0.45W - T']
    """
    require_level(level)
    body, typed = split_level(text)
    items = read_notation(body)
    known = {name: known_case(name, text, known_cases, aliases or {}) for name in _names(items)}
    return _combinations(body, items, known, typed or level)


def expand_listed(
    text: str,
    known_cases: Sequence[str],
    *,
    aliases: Mapping[str, str] | None = None,
    level: str | None = None,
) -> tuple[tuple[Combination, ...], tuple[str, ...]]:
    """Expand a text of a standard's list, leaving out the cases that no load carries.

    Parameters
    ----------
    text, known_cases, aliases, level
        As `expand`.

    Returns
    -------
    combinations : tuple of Combination
        Without terms of absent cases; a bracket keeps the choices that are left. Empty if
        nothing is left.
    dropped : tuple of str
        Cases left out, in the order of the text.

    Raises
    ------
    CombinationError
        As `expand`, but for cases that are not known.

    Examples
    --------
    >>> found, dropped = expand_listed("1.2D + 1.6(Lr or S or R) + (L or 0.5W)", ["D", "L", "S"])
    >>> [one.text for one in found], dropped
    (['1.2D + 1.6S + L'], ('Lr', 'R', 'W'))
    """
    require_level(level)
    body, typed = split_level(text)
    items = read_notation(body)
    known: dict[str, str] = {}
    dropped: list[str] = []
    for name in _names(items):
        if name in known_cases or (aliases or {}).get(name) in known_cases:
            known[name] = known_case(name, text, known_cases, aliases or {})
        else:
            dropped.append(name)
    kept = _kept(items, known)
    if not kept:
        return (), tuple(dropped)
    found = _combinations(body, kept, known, typed or level, is_whole=not dropped)
    return found, tuple(dropped)


@dataclass(frozen=True, slots=True, kw_only=True)
class _Term:
    """A case with all that stands before it; as `outer`, what encloses a term."""

    case: str = ""
    name: str = ""
    factor: str = ""
    is_negative: bool = False
    is_sign_typed: bool = False  # a minus or both signs, on it or on a bracket about it
    pattern: str = ""

    @property
    def value(self) -> float:
        return float(self.factor or 1) * (-1.0 if self.is_negative else 1.0)

    @property
    def text(self) -> str:
        place = f" [{self.pattern}]" if self.pattern else ""
        return f"{self.factor}{self.name}{place}"


def _combinations(
    body: str,
    items: tuple[Item, ...],
    known: Mapping[str, str],
    level: str | None,
    *,
    is_whole: bool = True,
) -> tuple[Combination, ...]:
    """Expand what was read of `body`, the whole of it or what is left."""
    count = _count(items, known, is_sign_typed=False)
    if count > MOST:
        message = (
            f'"{body}" stands for {count} combinations, and one text may stand for {MOST}: '
            "split it."
        )
        raise CombinationError(message)
    found = list(_of_sum(items, _Term(), known))
    is_echoed = is_whole and len(found) == 1 and "(" not in body
    combinations: dict[str, Combination] = {}
    for terms in found:
        text = body if is_echoed else _written(terms)
        _refuse(terms, text)
        pairs = tuple((term.case, term.value) for term in terms)
        patterns = tuple(term.pattern for term in terms)
        combinations[text] = Combination(
            text=text,
            terms=pairs,
            level=level or assumed_level(pairs),
            level_is_assumed=level is None,
            patterns=patterns if any(patterns) else (),
        )
    return tuple(combinations.values())


def _of_sum(
    items: tuple[Item, ...], outer: _Term, known: Mapping[str, str]
) -> Iterator[tuple[_Term, ...]]:
    """Every way to choose the terms of a sum."""
    for parts in product(*(list(_of_item(item, outer, known)) for item in items)):
        yield tuple(term for part in parts for term in part)


def _of_item(item: Item, outer: _Term, known: Mapping[str, str]) -> Iterator[tuple[_Term, ...]]:
    """Every way to choose one item of a sum: a term, or the terms of a bracket."""
    is_sign_typed = outer.is_sign_typed or any(item.is_negative)
    for negative, pattern in product(item.is_negative, item.patterns):
        inner = replace(
            outer,
            factor=_multiplied(outer.factor, item.factor),
            is_negative=outer.is_negative != negative,
            is_sign_typed=is_sign_typed,
            pattern=pattern or outer.pattern,
        )
        for choice in item.choices:
            yield from _of_sum(choice, inner, known)
        if item.name:
            term = replace(inner, case=known[item.name], name=item.name)
            yield (term,)
            if term.case == TEMPERATURE and not is_sign_typed:
                yield (replace(term, is_negative=True),)


def _count(items: tuple[Item, ...], known: Mapping[str, str], *, is_sign_typed: bool) -> int:
    """How many combinations a sum stands for, without making them."""
    counts = []
    for item in items:
        inner = is_sign_typed or any(item.is_negative)
        ways = sum(_count(choice, known, is_sign_typed=inner) for choice in item.choices)
        if item.name:
            ways = 2 if known[item.name] == TEMPERATURE and not inner else 1
        counts.append(ways * len(item.is_negative) * len(item.patterns))
    return prod(counts)


def _multiplied(outer: str, inner: str) -> str:
    """Multiply factors exactly; one that stands alone keeps its spelling."""
    if not outer or not inner:
        return outer or inner
    return f"{(Decimal(outer) * Decimal(inner)).normalize():f}"


def _written(terms: Sequence[_Term]) -> str:
    """Write terms out with their signs."""
    first, *others = terms
    head = f"-{first.text}" if first.is_negative else first.text
    return head + "".join(f" {'-' if term.is_negative else '+'} {term.text}" for term in others)


def _refuse(terms: Sequence[_Term], text: str) -> None:
    """Refuse loads that would count twice, a temperature with a place, boundless factors."""
    seen = set()
    for term in terms:
        where = f" in the {term.pattern}" if term.pattern else ""
        if (term.case, term.pattern) in seen:
            message = (
                f'"{text}" names case {term.case} twice{where}: write it once with its factor.'
            )
            raise CombinationError(message)
        if term.pattern and term.case == TEMPERATURE:
            message = (
                f'"{text}" has a change of temperature{where} alone, and {TEMPERATURE} acts on '
                "the whole cable: write it without a pattern."
            )
            raise CombinationError(message)
        if not isfinite(term.value):
            message = f'"{text}" has a factor that is no finite number.'
            raise CombinationError(message)
        seen.add((term.case, term.pattern))


def _names(items: tuple[Item, ...]) -> dict[str, None]:
    """Names of cases as typed, each once, in order."""
    names: dict[str, None] = {}
    for item in items:
        if item.name:
            names[item.name] = None
        for choice in item.choices:
            names |= _names(choice)
    return names


def _kept(items: tuple[Item, ...], known: Mapping[str, str]) -> tuple[Item, ...]:
    """Leave out absent cases and the brackets that hold nothing else."""
    kept = []
    for item in items:
        choices = tuple(left for choice in item.choices if (left := _kept(choice, known)))
        if choices or item.name in known:
            kept.append(replace(item, choices=choices))
    return tuple(kept)
