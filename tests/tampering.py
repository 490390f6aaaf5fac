"""What somebody may do to one entity of an issued drawing, on its bytes."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from tests.generated.edits import APPID
from tests.generated.pairs import Entity, Token, entities, rewrite, tokens

if TYPE_CHECKING:
    from collections.abc import Mapping

_ID = b"id="
# Our name, then pairs of extended data up to the next entity or application.
_XDATA = re.compile(
    rb"^ *1001\r?\n%b\r?\n(?:(?! *1001\r?\n) *10\d\d\r?\n[^\n]*\n)*" % APPID, re.MULTILINE
)


@dataclass(frozen=True, kw_only=True)
class IssuedFile:
    """An issued drawing as tokens, its entities of ours by id."""

    data: bytes
    tokens: tuple[Token, ...]
    ours: Mapping[str, Entity]

    def kind(self, name: str) -> str:
        """Return the DXF type of an entity."""
        return self.ours[name].type.decode("ascii")

    def handle(self, name: str) -> str | None:
        """Return the handle of an entity, None in a drawing without handles."""
        own = self.tokens[self.ours[name].first : self.ours[name].stop]
        found = next((t.name for t in own if t.code == 5), None)
        return found.decode("ascii") if found is not None else None

    def text(self, name: str) -> str:
        """Return the text of an entity."""
        return self.tokens[self._at(name, 1, 0)].name.decode("ascii")

    def count(self, name: str, code: int) -> int:
        """Count the tags of a code before the mark."""
        return len(self._all(name, code))

    def _all(self, name: str, code: int) -> list[int]:
        """Return a code's tags; of a heavy polyline those of its vertices."""
        entity = self.ours[name]
        first = entity.first
        if entity.type == b"POLYLINE":
            heads = (k for k in range(first + 1, entity.stop) if self.tokens[k].code == 0)
            first = next(heads)
        return [k for k in range(first, entity.stop) if self.tokens[k].code == code]

    def _at(self, name: str, code: int, number: int) -> int:
        return self._all(name, code)[number]

    def moved(self, name: str, code: int, dx: float, dy: float, number: int = 0) -> bytes:
        """Move one point of an entity: its `number`-th tag of a code, and that of its y."""
        changes = {}
        for axis, by in ((code, dx), (code + 10, dy)):
            at = self._at(name, axis, number)
            changes[at] = repr(float(self.tokens[at].value) + by).encode()
        return rewrite(self.data, changes, list(self.tokens))

    def part_moved(self, part: str, dx: float, dy: float, only: str = "") -> bytes:
        """Move all entities of a part, or one of them, as a CAD program does."""
        wanted = b"part=%b" % part.encode()
        changes = {}
        for name, entity in self.ours.items():
            own = range(entity.first, entity.stop)
            if only not in ("", name) or not any(self.tokens[k].name == wanted for k in own):
                continue
            for k in own:
                by = {1: dx, 2: dy}.get(self.tokens[k].code // 10, 0.0)
                if by and self.tokens[k].code % 10 < 4:
                    changes[k] = repr(float(self.tokens[k].value) + by).encode()
        return rewrite(self.data, changes, list(self.tokens))

    def retexted(self, name: str, words: str) -> bytes:
        """Put other words into a text."""
        return rewrite(self.data, {self._at(name, 1, 0): words.encode()}, list(self.tokens))

    def without(self, name: str) -> bytes:
        """Delete an entity."""
        start, end = self._span(name)
        return self.data[:start] + self.data[end:]

    def doubled(self, name: str) -> bytes:
        """Copy an entity in its place, with handles of its own."""
        start, end = self._span(name)
        entity = self.ours[name]
        changes: dict[int, bytes] = {}
        states = [k for k in range(entity.first, entity.stop) if self.tokens[k].code == 5]
        for number, k in enumerate(states):
            changes[k] = b"%X" % (0xF0000 + number)
        parts, at = [], start
        for k in sorted(changes):
            parts += [self.data[at : self.tokens[k].value_start], changes[k]]
            at = self.tokens[k].value_end
        copy = b"".join([*parts, self.data[at:end]])
        return self.data[:end] + copy + self.data[end:]

    def _span(self, name: str) -> tuple[int, int]:
        entity = self.ours[name]
        return self.tokens[entity.first].start, self.tokens[entity.stop].start


def open_issued(data: bytes) -> IssuedFile:
    """Find the entities of ours in a drawing."""
    found = tokens(data)
    ours = {}
    for entity in entities(found):
        own = found[entity.first : entity.stop]
        names = [t.name for t in own if t.code == 1000 and t.name.startswith(_ID)]
        if names:
            ours[names[0].removeprefix(_ID).decode("ascii")] = entity
    return IssuedFile(data=data, tokens=tuple(found), ours=ours)


def unmarked(data: bytes) -> bytes:
    """Drop all extended data of ours, records too, as programs do that keep none."""
    return _XDATA.sub(b"", data)
