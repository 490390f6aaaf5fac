"""The labels that one cable must have: tensions, elevations, dimensions, reactions, letters."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.statics.force_diagram import bow_letters
from dxfcable.verifying.labelling import ELEVATIONS, LETTERS, Wanted
from dxfcable.verifying.words import Kind

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.model import Cable, Point
    from dxfcable.statics.combinations import Combination
    from dxfcable.verifying.loads import Carried
    from dxfcable.verifying.measure import SpanFigures
    from dxfcable.verifying.shapes import Shape

_MOST_LABELLED = 20  # points up to which nothing is left out


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class SpanLabels:
    """What the labels of a span depend on.

    Attributes
    ----------
    first_piece : int
        Number of its first piece in the cable.
    lift : float
        Elevation minus ordinate [length].
    left : float
        Where places along the cable count from [length].
    reference : float or None
        Elevation that differences count from; None where labels are elevations.
    hangers : sequence of (float or None)
        Length of each hanger [length].
    largest : float
        Largest tension of the cable [force].
    """

    span: SpanFigures
    shape: Shape | None
    cable: Cable
    combination: Combination | None
    carried: Sequence[Carried]
    names: Sequence[str]  # of the span's nodes
    first_piece: int
    lift: float
    left: float
    reference: float | None
    hangers: Sequence[float | None]
    largest: float

    @property
    def is_dense(self) -> bool:
        """Whether there are too many points to label them all."""
        return len(self.cable.loads) > _MOST_LABELLED

    @property
    def letters(self) -> tuple[str, ...]:
        """Bow's letters of its spaces."""
        return bow_letters(self.span.pieces, self.first_piece)


def span_labels(facts: SpanLabels) -> Iterator[Wanted]:
    """Give the labels that a span must have, and those that it may have."""
    yield from _tensions(facts)
    yield from _elevations(facts)
    yield from _dimensions(facts)
    yield from _diagram(facts)
    yield from _letters(facts)


def _tensions(facts: SpanLabels) -> Iterator[Wanted]:
    span, count = facts.span, facts.span.pieces
    for k in range(count):
        force = span.largest(k)
        is_largest = force >= facts.largest * (1.0 - 1e-9)
        is_kept = not facts.is_dense or k in (0, count - 1)
        yield Wanted(
            id=f"{span.prefix}/tension/{facts.first_piece + k + 1}",
            role="tension",
            value=force,
            slack=span.force_error,
            at=span.side(k),
            is_required=is_kept or (is_largest and not facts.is_dense),
        )


def _elevations(facts: SpanLabels) -> Iterator[Wanted]:
    span = facts.span
    words = "EL" if facts.reference is None else ""
    for k, (name, node) in enumerate(zip(facts.names, span.nodes, strict=True)):
        yield Wanted(
            id=f"{span.prefix}/elevation/{name}",
            role="elevation",
            check=ELEVATIONS,
            words=words,
            kind=Kind.LENGTH,
            value=_level(facts, node[1]),
            slack=2.0 * span.grain,
            at=(node, node),
            is_required=not facts.is_dense or k in (0, span.pieces),
        )
    if facts.shape is None:
        return
    low = facts.shape.low_point
    near = [k for k, node in enumerate(span.nodes) if abs(node[0] - low[0]) <= _touch(facts)]
    name = f"{span.prefix}/elevation/low-point-{span.number}"
    if not near:
        yield Wanted(
            id=name,
            role="elevation",
            check=ELEVATIONS,
            words=f"LOW PT {words}".strip(),
            kind=Kind.LENGTH,
            value=_level(facts, low[1]),
            slack=8.0 * span.grain,
            at=(low, low),
        )
    elif 0 < near[0] < span.pieces:
        yield Wanted(
            id=name,
            role="elevation",
            check=ELEVATIONS,
            words="LOW PT",
            kind=Kind.WORDS,
            at=(low, low),
        )


def _touch(facts: SpanLabels) -> float:
    return 1e-6 * abs(facts.span.curve[-1][0] - facts.span.curve[0][0])


def _level(facts: SpanLabels, ordinate: float) -> float:
    return ordinate + facts.lift - (facts.reference or 0.0)


def _dimensions(facts: SpanLabels) -> Iterator[Wanted]:
    span, k = facts.span, facts.span.number
    first, last = span.curve[0], span.curve[-1]
    if facts.shape is not None:
        x, drop = facts.shape.sag_x, facts.shape.sag
        y = facts.shape.ordinate(x)
        yield Wanted(
            id=f"{span.prefix}/sag-label/{k}",
            role="closing_string",
            words="SAG",
            kind=Kind.LENGTH,
            value=drop,
            slack=8.0 * span.grain,
            at=((x, y), (x, y + drop)),
        )
    yield Wanted(
        id=f"{span.prefix}/span-label/{k}",
        role="closing_string",
        kind=Kind.LENGTH,
        value=last[0] - first[0],
        slack=2.0 * span.grain,
        at=(first, last),
    )
    for length, load, node in zip(facts.hangers, facts.carried, span.nodes[1:-1], strict=False):
        if length is not None:
            yield Wanted(
                id=f"{span.prefix}/hanger-length/{load.name}",
                role="hanger",
                kind=Kind.LENGTH,
                value=length,
                slack=2.0 * span.grain,
                at=(node, (node[0], node[1] - length)),
                is_required=not facts.is_dense,
            )


def _diagram(facts: SpanLabels) -> Iterator[Wanted]:
    """Labels within the force diagram: loads, pole distance, largest tension."""
    span = facts.span
    pole = span.pole
    if pole is None or not span.is_whole:
        return
    halves = [load.half for load in facts.carried]
    halves = halves if len(halves) == span.pieces - 1 else [0.0] * (span.pieces - 1)
    for k, half in enumerate(halves):
        first = span.per_piece * (k + 1) - 1
        start, end = span.joints[first], span.joints[first + 1]
        assert start is not None
        assert end is not None
        if math.dist(start, end) <= 4.0 * span.grain:
            continue
        yield Wanted(
            id=f"{span.prefix}/load-value/{span.first_load + first}",
            role="force_diagram",
            kind=Kind.LOAD,
            value=(start[1] - end[1]) * span.scale,
            slack=span.force_error + half,
            at=(start, end),
            is_required=not facts.is_dense,
        )
    joints = [j for j in span.joints if j is not None]
    foot = min(pole[1], *(j[1] for j in joints))
    yield Wanted(
        id=f"{span.prefix}/pole-distance/{span.number}/label",
        role="force_diagram",
        words="H",
        value=abs(span.pull),
        slack=span.force_error,
        at=((joints[0][0], foot), (pole[0], foot)),
    )
    longest = max(joints, key=lambda j: math.dist(pole, j))
    is_here = math.dist(pole, longest) * span.scale >= facts.largest * (1.0 - 1e-9)
    if is_here:
        yield Wanted(
            id=f"{span.prefix}/largest-tension/{span.number}",
            role="force_diagram",
            words="MAX",
            value=facts.largest,
            slack=span.force_error,
            at=(pole, longest),
            is_required=len(facts.cable.supports) == 2,  # of equal ones only one is labelled
        )


def _letters(facts: SpanLabels) -> Iterator[Wanted]:
    """Bow's letters, in the spaces of the elevation and down the load line."""
    span = facts.span
    for k, letter in enumerate(facts.letters):
        yield _letter(facts, f"letter/{letter}", letter, span.side(k))
    for k, joint in enumerate(span.joints):
        if joint is not None:
            letter = facts.letters[k // span.per_piece] + "'" * (k % span.per_piece)
            yield _letter(facts, f"load-line-letter/{letter}", letter, (joint, joint))
    if span.pole is not None:
        yield _letter(facts, f"pole-letter/{span.number}", "O", (span.pole, span.pole))
    middle = _middle(span.curve[0], span.curve[-1])
    yield _letter(facts, f"letter/O-{span.number}", "O", (middle, middle), is_required=False)


def _letter(
    facts: SpanLabels, rest: str, letter: str, at: tuple[Point, Point], *, is_required: bool = True
) -> Wanted:
    return Wanted(
        id=f"{facts.span.prefix}/{rest}",
        role="letters",
        check=LETTERS,
        words=letter,
        kind=Kind.WORDS,
        at=at,
        is_required=is_required and not facts.is_dense,
    )


def _middle(first: Point, last: Point) -> Point:
    return 0.5 * (first[0] + last[0]), 0.5 * (first[1] + last[1])
