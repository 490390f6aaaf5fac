"""Whether all entities of an issue are still there, and the names of the missing as far as told.

The record keeps how many there are and a sum over their ids, which is the sum of one missing
id's checksum short when one is missing. So no list of ids is needed to find its name: of names
like those still there, the one with that checksum.
"""

from __future__ import annotations

import itertools
import re
import zlib
from collections import Counter
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator, Mapping, Sequence

_ALL = 1 << 32
_NUMBER = re.compile(r"\d+")
# Stems and last words that a drawing may have once.
_FAMILIES = (
    *("profile", "closing-string", "sag", "span", "sag-label", "span-label", "elevation"),
    *("tension", "hanger", "hanger-length", "letter", "load", "ray", "closing-ray", "pole"),
    *("pole-letter", "pole-distance", "load-line", "load-line-letter", "load-value"),
    *("largest-tension", "schedule/caution"),
)
_ONCE = (
    *("leader", "head", "head-1", "head-2", "label", "frame", "title", "rule", "scale-bar"),
    *("hanger", "extension-1", "extension-2", "O-1", "low-point-1", "1"),
)


@dataclass(frozen=True, slots=True, kw_only=True)
class Whole:
    """What the record keeps of all ids of an issue.

    Attributes
    ----------
    count : int
        How many entities there are.
    total : int
        Sum of the CRC-32 of their ids, modulo 2**32, so that their order does not matter.
    parts : tuple of (str, int)
        How many belong to each part that moves as one.
    """

    count: int
    total: int
    parts: tuple[tuple[str, int], ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Missing:
    """Entities of an issue that are no longer there.

    Attributes
    ----------
    count : int
        How many.
    name : str
        Its id, where one is missing and can be told; else empty.
    parts : tuple of (str, int)
        How many of them belonged to each part.
    extra : int
        Entities with ids that were not issued.
    """

    count: int
    name: str = ""
    parts: tuple[tuple[str, int], ...] = ()
    extra: int = 0


def id_sum(name: str) -> int:
    """Return the checksum of an id."""
    return zlib.crc32(name.encode("utf-8", "surrogatepass"))


def whole_of(parts_of: Mapping[str, str], parts: Sequence[str]) -> Whole:
    """Sum up an issue.

    Parameters
    ----------
    parts_of : mapping of str to str
        Each id, and the part that it belongs to.
    parts : sequence of str
        Parts that are counted for themselves.
    """
    counts = Counter(parts_of.values())
    return Whole(
        count=len(parts_of),
        total=sum(map(id_sum, parts_of)) % _ALL,
        parts=tuple((part, counts[part]) for part in parts),
    )


def missing(whole: Whole, parts_of: Mapping[str, str]) -> Missing | None:
    """Tell what is missing of an issue, None where it is whole.

    Parameters
    ----------
    parts_of : mapping of str to str
        Each id that is there, and its part.
    """
    here = whole_of(parts_of, [part for part, _ in whole.parts])
    count, gap = whole.count - here.count, (whole.total - here.total) % _ALL
    if not count and not gap:
        return None
    if count <= 0:
        return Missing(count=0, extra=max(1, -count))
    lost = tuple(
        (part, before - now)
        for (part, before), (_, now) in zip(whole.parts, here.parts, strict=True)
        if before > now
    )
    return Missing(count=count, name=_name(gap, parts_of) if count == 1 else "", parts=lost)


def _name(gap: int, here: Iterable[str]) -> str:
    """Find the one id whose checksum fills the gap, "" where none does."""
    known = set(here)
    return next((n for n in _alike(known) if id_sum(n) == gap and n not in known), "")


def _alike(here: Iterable[str]) -> Iterator[str]:
    """Give names made of words that ids have: all stems with all last words."""
    names = list(here)
    stems = {name.rpartition("/")[0] for name in names} | set(names)
    stems |= {stem.rpartition("/")[0] for stem in stems}
    for prefix in {name.partition("/")[0] for name in names}:
        stems |= {f"{prefix}/{family}" for family in _FAMILIES}
    words = {name.rpartition("/")[2] for name in names}
    words |= {f"{word}'" for word in words}
    words |= {word.replace("stroke-", "value-") for word in words}
    words |= {
        _NUMBER.sub(str(int(match[0]) + step), word, count=1)
        for word in words
        for step in (-1, 1)
        if (match := _NUMBER.search(word)) is not None and int(match[0]) + step >= 0
    }
    for stem, word in itertools.product(sorted(stems), sorted(words | set(_ONCE))):
        yield f"{stem}/{word}"
