"""Spans of a DXF file: records, sections, tables, handles and layers, as byte offsets."""

from __future__ import annotations

import re
from dataclasses import dataclass
from functools import cached_property
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.formats import refuse_other_formats
from dxfcable.drawing.bytes.handle_values import read_handles
from dxfcable.drawing.bytes.pairs import Tags, find_tags, names, plain_pairs, skip_prologue
from dxfcable.errors import DrawingError

if TYPE_CHECKING:
    from collections.abc import Iterator

    from numpy.typing import NDArray

    from dxfcable.drawing.bytes.pairs import Offsets, Pair

HANDLE_LIMIT = 1 << 64
FOLLOWERS = (b"VERTEX", b"ATTRIB", b"SEQEND")
_CODES = (0, 2, 5, 8, 67, 105, 1001)
_KEPT = (2, 8, 67, 1001)
_AT_ONCE = 1 << 14
# A code 0 that can be told without counting lines: after a value always comes an integer.
_RECORD = re.compile(
    rb"^[ \t]*[+-]?0+[ \t]*\r?\n(?![ \t]*[+-]?\d+[ \t]*\r?$)(?=[ \t]*[A-Za-z0-9_])", re.MULTILINE
)


@dataclass(frozen=True, slots=True)
class Block:
    """A run of records with a name: a section, a table, a block definition.

    `first` and `last` are the records that open and close it.
    """

    name: str
    first: int
    last: int


@dataclass(frozen=True, eq=False)
class Scan:
    """All records of a drawing.

    Attributes
    ----------
    data : bytes
        The file.
    starts : (n + 1,) array of int
        First byte of each record (its code 0), and where the last one ends.
    kinds : (n,) array of bytes
        Types, cut after 16 bytes.
    tags : Tags
        Codes 2, 8, 67 and 1001.
    record_of : (k,) array of int
        Record that each tag belongs to.
    handles : (h,) array of unsigned int
        Every value of codes 5 and 105, the header left out, that is a hexadecimal number.
    has_handles : bool
        Whether any entity has a handle.
    sections : tuple of Block
        In file order.
    damaged : tuple of int
        Bytes where lines do not pair; reading went on at the next record.
    """

    data: bytes
    starts: Offsets
    kinds: NDArray[np.bytes_]
    tags: Tags
    record_of: NDArray[np.int32]
    handles: NDArray[np.uint64]
    has_handles: bool
    sections: tuple[Block, ...]
    damaged: tuple[int, ...] = ()

    def line(self, offset: int) -> int:
        """Return the line number of a byte, counted from 1."""
        return self.data.count(b"\n", 0, offset) + 1

    def section(self, name: str) -> Block | None:
        """Return the section of that name."""
        return next((s for s in self.sections if s.name == name), None)

    def span(self, record: int) -> tuple[int, int]:
        """Return the bytes of one record."""
        return int(self.starts[record]), int(self.starts[record + 1])

    def pairs(self, record: int, upto: int | None = None) -> Iterator[Pair]:
        """Yield the tags of one record, or of all before record `upto`."""
        last = record + 1 if upto is None else upto
        return plain_pairs(self.data, int(self.starts[record]), int(self.starts[last]))

    def whole(self, record: int, what: str) -> list[Pair]:
        """Return the tags of one record.

        Raises
        ------
        DrawingError
            Where its lines do not pair; names the line and what the record is.
        """
        try:
            return list(self.pairs(record))
        except ValueError as error:
            line = self.line(int(error.args[1]))
            message = f"line {line}: {error.args[0]}, inside {what}"
            raise DrawingError(
                message,
                code="damaged",
                line=line,
                remedy="Audit the drawing in the CAD program and save it again.",
            ) from error

    def first_tag(self, record: int, code: int) -> bytes | None:
        """Return the first value of a code in a record, blanks taken off."""
        if code not in _KEPT:
            return self._plain_tag(record, code)
        # Asked for in the array's own type, or all of it would be converted each time.
        asked = np.array((record, record + 1), self.record_of.dtype)
        low, high = np.searchsorted(self.record_of, asked)
        for k in range(low, high):
            if self.tags.codes[k] == code:
                return self.data[self.tags.values[k] : self.tags.ends[k]]
        return None

    def _plain_tag(self, record: int, code: int) -> bytes | None:
        """Read a record tag by tag, up to where its lines no longer pair."""
        try:
            return next((p.value.strip() for p in self.pairs(record) if p.code == code), None)
        except ValueError:
            return None

    def first_tags(self, code: int) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
        """Return records that hold a code, and the index of their first such tag."""
        which = np.flatnonzero(self.tags.codes == code)
        records = self.record_of[which]  # ascending, as tags are
        is_first = np.diff(records, prepend=records.dtype.type(-2)) > 0
        return records[is_first].astype(np.int64), which[is_first]

    @cached_property
    def heads(self) -> NDArray[np.int64]:
        """Records of ENTITIES that begin an entity: no vertices, attributes, end marks."""
        entities = self.section("ENTITIES")
        if entities is None:
            return np.empty(0, np.int64)
        first = entities.first + 1
        is_head = ~np.isin(self.kinds[first : entities.last], FOLLOWERS)
        return np.flatnonzero(is_head) + first

    def is_head(self, record: int) -> bool:
        """Tell whether a record begins an entity of ENTITIES."""
        k = int(np.searchsorted(self.heads, record))
        return k < self.heads.size and int(self.heads[k]) == record

    def entity_span(self, head: int) -> tuple[int, int]:
        """Return the bytes of an entity with its vertices or attributes."""
        entities = self.section("ENTITIES")
        assert entities is not None
        k = int(np.searchsorted(self.heads, head, side="right"))
        last = int(self.heads[k]) if k < self.heads.size else entities.last
        return int(self.starts[head]), int(self.starts[last])

    @cached_property
    def tables(self) -> tuple[Block, ...]:
        """Tables of the TABLES section."""
        section = self.section("TABLES")
        if section is None:
            return ()
        found, first = [], None
        for k in range(section.first + 1, section.last):
            if self.kinds[k] == b"TABLE":
                first = k
            elif self.kinds[k] == b"ENDTAB" and first is not None:
                name = (self.first_tag(first, 2) or b"").decode("latin-1").upper()
                found.append(Block(name, first, k))
                first = None
        return tuple(found)

    def table(self, name: str) -> Block | None:
        """Return the table of that name."""
        return next((t for t in self.tables if t.name == name), None)

    def rows(self, table: str) -> range:
        """Return the records between the head of a table and its end."""
        found = self.table(table)
        return range(found.first + 1, found.last) if found else range(0)

    @cached_property
    def header(self) -> dict[str, tuple[Pair, ...]]:
        """Header variables with their raw tags."""
        section = self.section("HEADER")
        result: dict[str, tuple[Pair, ...]] = {}
        if section is None:
            return result
        name = ""
        values: list[Pair] = []
        for pair in self.pairs(section.first, section.last):
            if pair.code == 9:
                if name:
                    result.setdefault(name, tuple(values))
                name, values = pair.value.strip().decode("latin-1").upper(), []
            elif name and pair.code != 999:
                values.append(pair)
        if name:
            result.setdefault(name, tuple(values))
        return result

    def header_value(self, name: str) -> bytes | None:
        """Return the first value of a header variable, blanks taken off."""
        values = self.header.get(name)
        return values[0].value.strip() if values else None

    @cached_property
    def version(self) -> str:
        """$ACADVER as written, "" where absent."""
        return (self.header_value("$ACADVER") or b"").decode("latin-1")


def scan(data: bytes) -> Scan:
    """Find the records and sections of a drawing.

    Raises
    ------
    DrawingError
        Where the file is no ASCII DXF, is cut off, or its sections do not nest; names the line.
    """
    refuse_other_formats(data)
    start = skip_prologue(data)
    tags, damaged = _all_tags(data, start)
    zeros = np.flatnonzero(tags.codes == 0)
    if not zeros.size:
        msg = "line 1: there is no record in this file"
        raise DrawingError(
            msg,
            code="not-dxf",
            line=1,
            remedy="Save it as DXF.",
        )
    kinds = names(data, tags, zeros)
    starts = np.append(tags.starts[zeros], tags.starts.dtype.type(tags.stop))
    record_of = np.cumsum(tags.codes == 0, dtype=np.int32)
    record_of -= 1
    sections = _sections(_Draft(data, starts, kinds, tags, record_of))
    handles, has_handles = read_handles(data, tags, record_of, sections)
    kept = np.flatnonzero(np.isin(tags.codes, _KEPT))
    return Scan(
        data=data,
        starts=starts,
        kinds=kinds,
        tags=tags.some(kept),
        record_of=record_of[kept],
        handles=handles,
        has_handles=has_handles,
        sections=sections,
        damaged=damaged,
    )


@dataclass(frozen=True, slots=True, eq=False)
class _Draft:
    """Records before their sections are known."""

    data: bytes
    starts: Offsets
    kinds: NDArray[np.bytes_]
    tags: Tags
    record_of: NDArray[np.int32]

    def line(self, offset: int) -> int:
        """Return the line number of a byte, counted from 1."""
        return self.data.count(b"\n", 0, offset) + 1

    def name(self, record: int) -> str:
        """Return the first value of code 2 in a record."""
        asked = np.array((record, record + 1), self.record_of.dtype)
        low, high = np.searchsorted(self.record_of, asked)
        which = [k for k in range(low, high) if self.tags.codes[k] == 2]
        return (
            self.data[self.tags.values[which[0]] : self.tags.ends[which[0]]].decode("latin-1")
            if which
            else ""
        )


def _all_tags(data: bytes, start: int) -> tuple[Tags, tuple[int, ...]]:
    """Find tags, going on at the next record where lines do not pair."""
    parts, damaged = [], []
    at = start
    while True:
        tags = find_tags(data, _CODES, at)
        parts.append(tags)
        if tags.fault is None:
            break
        damaged.append(tags.fault)
        found = _RECORD.search(data, tags.fault)
        if found is None:
            break
        at = found.start()
    if len(parts) == 1:
        return parts[0], tuple(damaged)
    last = parts[-1]
    tags = Tags(
        codes=np.concatenate([part.codes for part in parts]),
        starts=np.concatenate([part.starts for part in parts]),
        values=np.concatenate([part.values for part in parts]),
        ends=np.concatenate([part.ends for part in parts]),
        stop=last.stop if last.fault is None else len(data),
        fault=last.fault,
    )
    return tags, tuple(damaged)


def _sections(draft: _Draft) -> tuple[Block, ...]:
    """Pair SECTION with ENDSEC and check what must stand once."""
    kinds = draft.kinds
    marks = _marks(kinds)
    found: list[Block] = []
    opened: int | None = None
    for k in marks:
        at = int(draft.starts[k])
        kind = bytes(kinds[k]).upper()
        if kind != bytes(kinds[k]):
            _fault(draft, at, f"{bytes(kinds[k]).decode()} is in lower case", "lower-case")
        if kind == b"SECTION":
            if opened is not None:
                _fault(draft, at, "a section begins before the last one has ended", "structure")
            opened = k
        elif kind == b"ENDSEC":
            if opened is None:
                _fault(draft, at, "ENDSEC without a section", "structure")
                continue
            found.append(Block(_section_name(draft, opened), opened, k))
            opened = None
    if opened is not None or not marks or bytes(kinds[marks[-1]]).upper() != b"EOF":
        at = max(int(draft.starts[-1]) - 1, 0)
        text = "a section has no ENDSEC" if opened is not None else "there is no EOF"
        _fault(draft, at, f"the file is cut off: {text}", "cut-off")
    if [s.name for s in found].count("ENTITIES") > 1:
        second = [s for s in found if s.name == "ENTITIES"][1]
        _fault(draft, int(draft.starts[second.first]), "a second ENTITIES section", "structure")
    return tuple(found)


def _marks(kinds: NDArray[np.bytes_]) -> list[int]:
    """Return the records that part the file, in whatever case they are written."""
    found: list[int] = []
    for k in range(0, kinds.size, _AT_ONCE):  # so that no second copy of all types is made
        is_mark = np.isin(np.char.upper(kinds[k : k + _AT_ONCE]), (b"SECTION", b"ENDSEC", b"EOF"))
        found += (np.flatnonzero(is_mark) + k).tolist()
    return found


def _section_name(draft: _Draft, record: int) -> str:
    """Return a section's name, refusing known ones in lower case."""
    name = draft.name(record)
    known = ("HEADER", "CLASSES", "TABLES", "BLOCKS", "ENTITIES", "OBJECTS")
    if name.upper() in known and name not in known:
        _fault(draft, int(draft.starts[record]), f"section {name} is in lower case", "lower-case")
    return name


def _fault(draft: _Draft, at: int, text: str, code: str) -> None:
    """Refuse with the line number."""
    line = draft.line(at)
    msg = f"line {line}: {text}"
    raise DrawingError(
        msg,
        code=code,
        line=line,
        remedy="Open it in the CAD program, audit it, and save it again as DXF.",
    )
