"""Ids for linework whose marks are gone: profile, strings, dimensions, by layer and place."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.recovery.diagrams import TITLE, name_diagrams
from dxfcable.pairing import pair

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Point

_FAR = 10.0  # spans: the cost of what a line should not be


@dataclass(frozen=True, slots=True, kw_only=True)
class ExpectedSpan:
    """Where a span is expected: its cable's mark and first part of ids, its supports."""

    mark: str
    prefix: str
    number: int
    left: Point
    right: Point


@dataclass(frozen=True, slots=True, kw_only=True)
class PlacedSpan:
    """A span with the profile that was found for it."""

    mark: str
    prefix: str
    number: int
    profile: IssuedEntity

    @property
    def width(self) -> float:
        """Horizontal distance of its ends [length]."""
        return abs(self.profile.end[0] - self.profile.start[0])


def name_by_place(
    entities: Sequence[IssuedEntity], expected: Sequence[ExpectedSpan]
) -> dict[str, IssuedEntity]:
    """Name profiles, strings, dimensions and force diagrams by their layers and places.

    Parameters
    ----------
    entities : sequence of IssuedEntity
        Without marks.
    expected : sequence of ExpectedSpan
        What the drafter's supports say; profiles beyond them get prefixes of their own.

    Returns
    -------
    dict of str to IssuedEntity
        By id. What is in no place of ours is left out.
    """
    spans = place_profiles(entities, expected)
    named = {f"{s.prefix}/profile/{s.number}": s.profile for s in spans}
    lines = [e for e in entities if e.kind == "LINE" and "closing_string" in e.roles]
    named |= _strings(spans, lines)
    titles = [e for e in entities if "table" in e.roles and e.text.startswith(TITLE)]
    drawn = [e for e in entities if "force_diagram" in e.roles]
    named |= name_diagrams(spans, drawn, titles)
    return {name: entity.named(name) for name, entity in named.items()}


def place_profiles(
    entities: Sequence[IssuedEntity], expected: Sequence[ExpectedSpan]
) -> list[PlacedSpan]:
    """Give each profile to the span whose supports are nearest to its ends."""
    profiles = [
        e for e in entities if "profile" in e.roles and e.kind == "LWPOLYLINE" and len(e.points) > 1
    ]
    costs = [
        [math.dist(p.start, s.left) + math.dist(p.end, s.right) for s in expected] for p in profiles
    ]
    chosen = dict(pair(costs)) if expected and profiles else {}
    found = []
    for k, profile in enumerate(profiles):
        if k in chosen:
            span = expected[chosen[k]]
            found.append(
                PlacedSpan(mark=span.mark, prefix=span.prefix, number=span.number, profile=profile)
            )
        elif not expected:
            found.append(PlacedSpan(mark="", prefix=f"C{k + 1}", number=1, profile=profile))
    return sorted(found, key=lambda s: (s.prefix, s.number))


def _strings(spans: Sequence[PlacedSpan], lines: Sequence[IssuedEntity]) -> dict[str, IssuedEntity]:
    """Name closing strings, sags, span dimensions and their extension lines."""
    wanted: dict[str, Callable[[IssuedEntity], float]] = {}
    for span in spans:
        head, k = span.prefix, span.number
        wanted[f"{head}/closing-string/{k}"] = _Closing(span)
        wanted[f"{head}/sag/{k}"] = _Sag(span)
        wanted[f"{head}/span/{k}"] = _Dimension(span)
        wanted[f"{head}/span/extension-{k}"] = _Extension(span.profile.start, span.width)
        wanted[f"{head}/span/extension-{k + 1}"] = _Extension(span.profile.end, span.width)
    names = list(wanted)
    costs = [[wanted[name](line) for name in names] for line in lines]
    return {names[j]: lines[i] for i, j in pair(costs)} if lines and names else {}


@dataclass(frozen=True, slots=True)
class _Closing:
    """How far a line is from being the closing string."""

    span: PlacedSpan

    def __call__(self, line: IssuedEntity) -> float:
        ends = self.span.profile.start, self.span.profile.end
        off = math.dist(line.start, ends[0]) + math.dist(line.end, ends[1])
        return off + (0.0 if line.is_chain else _FAR * self.span.width)


@dataclass(frozen=True, slots=True)
class _Sag:
    """How far a line is from being a sag dimension: upright, from the string to the curve."""

    span: PlacedSpan

    def __call__(self, line: IssuedEntity) -> float:
        curve = np.array(self.span.profile.points)
        (x0, y0), (x1, y1) = self.span.profile.start, self.span.profile.end
        x = line.end[0]
        string = y0 + (y1 - y0) * (x - x0) / (x1 - x0) if x1 != x0 else y0
        below = float(np.interp(x, curve[:, 0], curve[:, 1]))
        off = abs(line.start[0] - x) + abs(line.start[1] - string) + abs(line.end[1] - below)
        is_outside = not min(x0, x1) < x < max(x0, x1)
        return off + _FAR * self.span.width * (is_outside + line.is_chain)


@dataclass(frozen=True, slots=True)
class _Dimension:
    """How far a line is from being the span's dimension: level, as long as the span."""

    span: PlacedSpan

    def __call__(self, line: IssuedEntity) -> float:
        ends = self.span.profile.start, self.span.profile.end
        off = sum(abs(a[0] - b[0]) for a, b in zip((line.start, line.end), ends, strict=True))
        lean = abs(line.start[1] - line.end[1])
        off += 0.1 * min(abs(line.start[1] - end[1]) for end in ends)
        return off + _FAR * lean + _FAR * self.span.width * line.is_chain


@dataclass(frozen=True, slots=True)
class _Extension:
    """How far a line is from being an extension line: upright over or under a support."""

    at: Point
    width: float

    def __call__(self, line: IssuedEntity) -> float:
        off = abs(line.start[0] - self.at[0]) + abs(line.end[0] - self.at[0])
        away = min(abs(p[1] - self.at[1]) for p in line.points)
        return off + 0.5 * away + _FAR * self.width * line.is_chain
