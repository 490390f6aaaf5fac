"""The strip of values below an elevation: each under its point or its piece of the cable.

As below a longitudinal section (common practice): what would crowd the elevation stands in
rows, level where there is room, else upright; where points are closer than a line of text,
the columns are spread and thin lines lead to them.
"""

from __future__ import annotations

import itertools
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align, VAlign
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.sheeting.saying import UNCASED, brief

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import LoadPoint

_PITCH = 1.65  # least distance of upright texts, in text heights
_BETWEEN = 0.9  # room between level texts
_LEVEL_ROW = 2.0
_TICK, _FAN = 1.0, 3.0
_SPREAD = 1.3  # most that the strip may be wider than the cable


@dataclass(frozen=True, slots=True, kw_only=True)
class _Row:
    """One row: its head, its texts and where they stand, and whether upright."""

    key: str
    head: str
    texts: tuple[str, ...]
    places: tuple[float, ...]
    is_upright: bool
    rise: float


class PointStrip:
    """The strip of one cable, made for a paper view.

    Parameters
    ----------
    view : View
        On paper.
    is_short : bool
        Leaves out what the schedules say: places, levels and hangers.
    has_tensions : bool
        Adds pieces and their tensions.
    """

    def __init__(self, view: View, *, is_short: bool, has_tensions: bool) -> None:
        self.height = view.height
        self._name = f"{view.prefix}/strip"
        self._ends = [node.x for node in view.formed.nodes]
        found = _node_texts(view, is_short=is_short)
        pieces = _piece_texts(view) if has_tensions else []
        self.at = self._columns([texts for _, _, texts in found], [t for _, _, t in pieces])
        middles = tuple(0.5 * (a + b) for a, b in itertools.pairwise(self.at))
        self.rows = [self._row(*row, self.at) for row in found]
        self.rows += [self._row(*row, middles) for row in pieces]
        self._is_spread = any(
            abs(a - b) > 0.05 * self.height for a, b in zip(self.at, self._ends, strict=True)
        )

    @property
    def is_possible(self) -> bool:
        """Whether the columns are not spread far beyond the cable."""
        span = self._ends[-1] - self._ends[0]
        return self.at[-1] - self.at[0] <= _SPREAD * span + 8.0 * self.height

    @property
    def rise(self) -> float:
        """Height with the lines that lead to it [mm]."""
        lead = _FAN if self._is_spread else _TICK
        return lead * self.height + sum(row.rise for row in self.rows)

    def bounds(self) -> tuple[float, float]:
        """Give left and right end [mm]."""
        return self._edges()[0], self._edges()[2]

    def _columns(
        self, nodes: list[tuple[str, ...]], pieces: list[tuple[str, ...]]
    ) -> tuple[float, ...]:
        """Give the abscissas of the columns: those of the nodes where all texts have room."""
        least = _PITCH * self.height
        middles = [0.5 * (a + b) for a, b in itertools.pairwise(self._ends)]
        level = all(_fit_level(texts, self._ends, self.height) for texts in nodes)
        level &= all(_fit_level(texts, middles, self.height) for texts in pieces)
        gap = min(b - a for a, b in itertools.pairwise(self._ends))
        if level or gap >= least:
            return tuple(self._ends)
        return tuple(spread(self._ends, least))

    def _row(self, key: str, head: str, texts: tuple[str, ...], places: tuple[float, ...]) -> _Row:
        h = self.height
        is_upright = not _fit_level(texts, places, h)
        widest = max(text_width(text, h) for text in texts)
        rise = widest + 1.2 * h if is_upright else _LEVEL_ROW * h
        return _Row(
            key=key,
            head=head,
            texts=texts,
            places=places,
            is_upright=is_upright,
            rise=max(rise, _LEVEL_ROW * h),
        )

    def _edges(self) -> tuple[float, float, float]:
        """Give left end, end of the heads, right end."""
        h = self.height
        left, right = self.at[0], self.at[-1]
        for row in self.rows:
            halves = [0.65 * h if row.is_upright else 0.5 * text_width(t, h) for t in row.texts]
            left = min(left, row.places[0] - halves[0])
            right = max(right, row.places[-1] + halves[-1])
        left, right = left - 0.8 * h, right + 0.8 * h
        widest = max(text_width(row.head, h) for row in self.rows)
        return left - widest - 1.5 * h, left, right

    def draw(self, sketch: Sketch, top: float) -> None:
        """Draw the strip from an ordinate down."""
        h, (left, inner, right) = self.height, self._edges()
        lead = (_FAN if self._is_spread else _TICK) * h
        for number, (x, column) in enumerate(zip(self._ends, self.at, strict=True)):
            start, end = (x, top), (column, top - lead)
            sketch.line(f"{self._name}/lead-{number}", "table", start, end)
        y = high = top - lead
        for row in self.rows:
            sketch.line(f"{self._name}/rule-{row.key}", "table", (left, y), (right, y))
            middle = y - 0.5 * row.rise
            head = (left + 0.75 * h, middle)
            sketch.text(
                f"{self._name}/head-{row.key}", "table", row.head, head, h, valign=VAlign.MIDDLE
            )
            for number, (text, x) in enumerate(zip(row.texts, row.places, strict=True)):
                if text:
                    sketch.text(
                        f"{self._name}/{row.key}-{number}",
                        "table",
                        text,
                        (x, middle),
                        h,
                        align=Align.CENTER,
                        valign=VAlign.MIDDLE,
                        rotation=90.0 if row.is_upright else 0.0,
                    )
            y -= row.rise
        sketch.line(f"{self._name}/edge", "table", (inner, high), (inner, y))
        sketch.rectangle(f"{self._name}/frame", "title", (left, y, right, high))


def spread(places: list[float], least: float) -> list[float]:
    """Move places apart to a least distance, each as little as can be (least squares).

    Examples
    --------
    >>> spread([0.0, 0.5, 5.0], 1.0)
    [-0.25, 0.75, 5.0]
    """
    blocks: list[tuple[float, int]] = []  # mean of reduced places, and how many
    for index, place in enumerate(places):
        mean, count = place - index * least, 1
        while blocks and blocks[-1][0] > mean:
            other, many = blocks.pop()
            mean = (mean * count + other * many) / (count + many)
            count += many
        blocks.append((mean, count))
    reduced = [mean for mean, count in blocks for _ in range(count)]
    return [round(value + index * least, 9) for index, value in enumerate(reduced)]


def _fit_level(texts: tuple[str, ...], places: tuple[float, ...] | list[float], h: float) -> bool:
    """Tell whether level texts stand clear of each other."""
    halves = [0.5 * text_width(text, h) for text in texts]
    pairs = zip(itertools.pairwise(halves), itertools.pairwise(places), strict=True)
    return all(a + b + _BETWEEN * h <= q - p for (a, b), (p, q) in pairs)


def _node_texts(view: View, *, is_short: bool) -> list[tuple[str, str, tuple[str, ...]]]:
    """Give key, head and texts of the rows that stand under points."""
    wording, nodes = view.wording, view.formed.nodes
    unit = wording.length_unit
    first = nodes[0].mark or "LEFT"
    rows = [("mark", "POINT", [brief(node.mark) for node in nodes])]
    if not is_short:
        bare = wording.length(0.0).endswith(f" {unit}")
        words = [wording.length(node.x - nodes[0].x).removesuffix(f" {unit}") for node in nodes]
        rows.append(("x", f"X FROM {brief(first)}{f', {unit}' if bare else ''}", words))
        levels = [wording.level(node.elevation).removeprefix("EL ") for node in nodes]
        over = "EL" if wording.has_datum else f"LEVEL FROM {brief(first)}"
        rows.append(("level", f"{over}{f', {unit}' if bare else ''}", levels))
        if any(node.hanger is not None for node in nodes):
            hangers = [
                "" if n.hanger is None else wording.length(n.hanger).removesuffix(f" {unit}")
                for n in nodes
            ]
            rows.append(("hanger", f"HANGER{f', {unit}' if bare else ''}", hangers))
    values = [
        "" if node.is_support else wording.load(node.load).removesuffix(f" {wording.force_unit}")
        for node in nodes
    ]
    case = "" if view.formed.under == UNCASED else f" {brief(view.formed.under)}"
    rows.append(("load", f"LOAD{case}, {wording.force_unit}", values))
    rows += drawn_row(view)
    return [(key, head, tuple(texts)) for key, head, texts in rows]


def drawn_row(view: View) -> list[tuple[str, str, list[str]]]:
    """Give the row of what is drawn where the loads used are others; none where all are as drawn.

    Of several cases only those that are others now are told, a sole one in the row's head.
    """
    unit = view.wording.force_unit
    changed = [_changed(load) for load in view.cable.loads]
    cases = {case for found in changed for case, _ in found}
    sole = next(iter(cases)) if len(cases) == 1 else None
    words = []
    for load, found in zip(view.cable.loads, changed, strict=True):
        values = [(c, view.wording.load(v).removesuffix(f" {unit}")) for c, v in found]
        told = [value if sole == case else f"{case}={value}" for case, value in values]
        words.append(" ".join(told) or brief(load.drawn))
    if not any(words):
        return []
    # Words of the drafter that are no values of ours have units of their own.
    pairs = zip(changed, view.cable.loads, strict=True)
    is_plain = all(found or not load.drawn for found, load in pairs)
    of = "" if sole in (None, UNCASED) else f" {brief(sole)}"
    rest = iter(words)
    texts = ["" if node.is_support else next(rest) for node in view.formed.nodes]
    return [("drawn", f"DRAWN{of}{f', {unit}' if is_plain else ''}", texts)]


def _changed(load: LoadPoint) -> list[tuple[str, float]]:
    """List the cases that the drawing states otherwise."""
    if not load.drawn:
        return []
    used = dict(load.cases)
    return [(case, value) for case, value in load.drawn_cases or () if used.get(case) != value]


def _piece_texts(view: View) -> list[tuple[str, str, tuple[str, ...]]]:
    """Give key, head and texts of the rows that stand between points."""
    unit = view.wording.force_unit
    pieces = view.formed.segments
    tensions = [view.wording.force(p.tension).removesuffix(f" {unit}") for p in pieces]
    return [
        ("piece", "PIECE", tuple(p.name for p in pieces)),
        ("tension", f"TENSION, {unit}", tuple(tensions)),
    ]
