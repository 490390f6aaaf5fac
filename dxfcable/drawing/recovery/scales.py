"""The scales under diagrams and joints: words, a bar with strokes, the values at its ends."""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from dxfcable.drawing.issued import IssuedEntity

_TITLE = re.compile(r"(?P<kind>FORCE DIAGRAM|JOINT) (?P<mark>.*)\Z")
_ID = re.compile(r"(?P<part>.+)/(?:words|scale-bar)(?:/.*)?\Z")
_SAME = 0.05  # of a text height
_BELOW = 2.6  # from line to line at most, in text heights
_REACH = 6.0  # of the bar from the last line


@dataclass(slots=True, kw_only=True, eq=False)
class ScaleBlock:
    """Words and bar of one scale.

    Attributes
    ----------
    part : str
        The diagram or joint it belongs to; "" while not known.
    words : list of IssuedEntity
        From the title down.
    bar : IssuedEntity or None
        The level line; `strokes` stand on it, `values` above its ends.
    """

    part: str = ""
    words: list[IssuedEntity] = field(default_factory=list)
    bar: IssuedEntity | None = None
    strokes: list[IssuedEntity] = field(default_factory=list)
    values: list[IssuedEntity] = field(default_factory=list)

    @property
    def title(self) -> tuple[str, str]:
        """What it says it is the scale of: kind and mark."""
        for entity in self.words:
            match = _TITLE.match(entity.text)
            if match:
                return match["kind"], match["mark"]
        return "", ""

    def entities(self) -> list[IssuedEntity]:
        """Give all that belongs to it."""
        bar = [self.bar] if self.bar else []
        return [*self.words, *bar, *self.strokes, *self.values]


def scales_by_ids(marked: Mapping[str, IssuedEntity]) -> list[ScaleBlock]:
    """Put scales together from marked entities."""
    found: dict[str, ScaleBlock] = {}
    for name, entity in marked.items():
        match = _ID.match(name)
        if match is None:
            continue
        part = match["part"]
        block = found.setdefault(part, ScaleBlock(part=part))
        rest = name.removeprefix(f"{part}/")
        if rest.startswith("words/"):
            block.words.append(entity)
        elif rest == "scale-bar":
            block.bar = entity
        elif rest.startswith("scale-bar/stroke"):
            block.strokes.append(entity)
        else:
            block.values.append(entity)
    for block in found.values():
        block.words.sort(key=lambda e: -e.start[1])
    return list(found.values())


def scales_by_place(entities: Iterable[IssuedEntity]) -> list[ScaleBlock]:
    """Put scales together from titles, the lines of words below them, and the bar below those."""
    pool = [e for e in entities if "table" in e.roles]
    texts = [e for e in pool if e.text]
    lines = [e for e in pool if e.kind == "LINE"]
    return [_block(title, texts, lines) for title in texts if _TITLE.match(title.text)]


def _block(
    title: IssuedEntity, texts: Sequence[IssuedEntity], lines: Sequence[IssuedEntity]
) -> ScaleBlock:
    """Read one block downwards."""
    h, near = title.height, _SAME * title.height
    block = ScaleBlock(words=[title])
    column = [e for e in texts if abs(e.start[0] - title.start[0]) <= near]
    for entity in sorted(column, key=lambda e: -e.start[1]):
        drop = block.words[-1].start[1] - entity.start[1]
        if near < drop <= _BELOW * h:
            block.words.append(entity)
    x, y = block.words[-1].start
    bars = [
        e
        for e in lines
        if abs(e.start[1] - e.end[1]) <= near
        and abs(e.start[0] - x) <= 2.0 * h
        and 0.0 < y - e.start[1] <= _REACH * h
    ]
    if not bars:
        return block
    block.bar = max(bars, key=lambda e: e.start[1])
    level, left, right = block.bar.start[1], block.bar.start[0], block.bar.end[0]
    block.strokes = [
        e
        for e in lines
        if e is not block.bar
        and abs(e.start[0] - e.end[0]) <= near
        and abs(e.start[1] - level) <= near
        and left - near <= e.start[0] <= right + near
    ]
    block.values = [
        e
        for e in texts
        if 0.0 < e.start[1] - level <= 2.0 * h
        and left - h <= e.start[0] <= right + h
        and e not in block.words
    ]
    return block
