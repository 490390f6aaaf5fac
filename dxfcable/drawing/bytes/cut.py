"""Cut the few records that concern us out of a drawing, as a small drawing of its own."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.decode import codec, decode, layer_key
from dxfcable.drawing.bytes.pairs import distinct, texts

if TYPE_CHECKING:
    from collections.abc import Iterable

    from numpy.typing import NDArray

    from dxfcable.drawing.bytes.scan import Scan

_TABLES = ("LTYPE", "LAYER", "STYLE", "APPID", "BLOCK_RECORD")
_LAYER_WIDTH = 32  # compared in full only where the beginning fits
_FIRST_KEY = 1 << 40
_AT_ONCE = 1 << 15


@dataclass(frozen=True, slots=True)
class Kept:
    """An entity that was cut out: its record, handle and line in the file.

    `key` is the handle it has in the small drawing instead of its own, which may be missing
    or doubled.
    """

    record: int
    handle: str | None
    line: int
    key: str


@dataclass(frozen=True, slots=True)
class Cutting:
    """The small drawing and what was left out of it."""

    text: str
    kept: tuple[Kept, ...]
    in_paper_space: tuple[tuple[Kept, str], ...]  # with the layer as written
    undecodable: str


def encoding_of(drawing: Scan) -> tuple[str, str]:
    """Return the drawing's codec and, where it is not known, the page it declares."""
    page = (drawing.header_value("$DWGCODEPAGE") or b"").decode("latin-1")
    return codec(drawing.version, page)


def inserts_of(drawing: Scan, blocks: frozenset[str]) -> list[int]:
    """Return the INSERTs of ENTITIES that name one of some blocks (keys of `layer_key`)."""
    entities = drawing.section("ENTITIES")
    if entities is None:
        return []
    tags, record = drawing.tags, drawing.record_of
    which = np.flatnonzero((tags.codes == 2) & (record > entities.first) & (record < entities.last))
    which = which[drawing.kinds[record[which]] == b"INSERT"]
    encoding, _ = encoding_of(drawing)
    found: list[int] = []
    for k in range(0, which.size, _AT_ONCE):
        part = which[k : k + _AT_ONCE]
        names = texts(drawing.data, tags.values[part], tags.ends[part], _LAYER_WIDTH)
        first, group = distinct(names)
        fits = [layer_key(bytes(name), encoding) in blocks for name in names[first]]
        found += record[part[np.array(fits, np.bool_)[group]]].tolist()
    return found


def records_on(drawing: Scan, layers: frozenset[str]) -> NDArray[np.int64]:
    """Return the records whose layer is one of the given keys (see `layer_key`)."""
    records, tags = drawing.first_tags(8)
    if not records.size:
        return records
    encoding, _ = encoding_of(drawing)
    hits = [
        _on(drawing, records[k : k + _AT_ONCE], tags[k : k + _AT_ONCE], layers, encoding)
        for k in range(0, records.size, _AT_ONCE)
    ]
    return np.concatenate(hits)


def _on(
    drawing: Scan,
    records: NDArray[np.int64],
    tags: NDArray[np.int64],
    layers: frozenset[str],
    encoding: str,
) -> NDArray[np.int64]:
    """Return those of some records that are on the layers."""
    starts, ends = drawing.tags.values[tags], drawing.tags.ends[tags]
    names = texts(drawing.data, starts, ends, _LAYER_WIDTH)
    first, group = distinct(names)
    fits = np.array([_fits(bytes(name), layers, encoding) for name in names[first]], np.bool_)
    hit = np.flatnonzero(fits[group])
    exact = [k for k in hit if layer_key(drawing.data[starts[k] : ends[k]], encoding) in layers]
    return records[exact]


def _fits(name: bytes, layers: frozenset[str], encoding: str) -> bool:
    """Tell whether a name, perhaps cut off, may be one of the layers."""
    key = layer_key(name, encoding)
    if len(name) < _LAYER_WIDTH:
        return key in layers
    return any(layer.startswith(key[: _LAYER_WIDTH // 4]) for layer in layers)


def cut(drawing: Scan, layers: Iterable[str], leave_out: frozenset[int] = frozenset()) -> Cutting:
    """Cut out all entities on some layers, the blocks they need, and the tables.

    Parameters
    ----------
    drawing : Scan
        The file.
    layers : iterable of str
        Names in the form of `layer_key`.
    leave_out : frozenset of int
        Records of ENTITIES that are not the drafter's.

    Raises
    ------
    DrawingError
        Where an entity that concerns us does not pair; names the line.
    """
    entities = drawing.section("ENTITIES")
    encoding, undecodable = encoding_of(drawing)
    on_layers = records_on(drawing, frozenset(layers))
    blocks = _Blocks(drawing, encoding)
    chosen: set[int] = set()
    if entities is not None:
        inside = on_layers[(on_layers > entities.first) & (on_layers < entities.last)]
        chosen = set(inside[np.isin(inside, drawing.heads)].tolist())
        chosen |= blocks.inserts_reaching(on_layers)
    chosen -= leave_out
    paper = {k for k in chosen if drawing.first_tag(k, 67) == b"1"}
    first_key = _free_run(drawing, len(chosen))
    kept, outside, body = [], [], []
    line = _Lines(drawing)
    for number, record in enumerate(sorted(chosen)):
        head = _kept(drawing, record, f"{first_key + number:X}", line)
        if record in paper:
            layer = decode(drawing.first_tag(record, 8) or b"", encoding)
            outside.append((head, layer))
            continue
        kept.append(head)
        body.append(_with_key(drawing, record, head.key))
    # What the library makes of its own gets handles above all that it reads.
    seed = first_key + len(chosen)
    raw = _assemble(drawing, body, blocks.needed_by(h.record for h in kept), seed)
    return Cutting(decode(raw, encoding), tuple(kept), tuple(outside), undecodable)


def _free_run(drawing: Scan, count: int) -> int:
    """Return the first of so many free handles, far above what the library allots itself."""
    first = _FIRST_KEY
    used = drawing.handles
    while ((used >= np.uint64(first)) & (used < np.uint64(first + count))).any():
        first += _FIRST_KEY
    return first


class _Lines:
    """Line numbers of ascending bytes, each line counted once."""

    def __init__(self, drawing: Scan) -> None:
        self._data = drawing.data
        self._at, self._line = 0, 1

    def __call__(self, offset: int) -> int:
        """Return the line number of a byte not before the last one asked for."""
        self._line += self._data.count(b"\n", self._at, offset)
        self._at = offset
        return self._line


def _kept(drawing: Scan, record: int, key: str, line: _Lines) -> Kept:
    """Describe one entity."""
    raw = drawing.first_tag(record, 5)
    handle = raw.decode("latin-1") if raw else None
    return Kept(record, handle, line(int(drawing.starts[record])), key)


def _with_key(drawing: Scan, record: int, key: str) -> bytes:
    """Copy an entity, its own handle replaced, comments left out."""
    _, end = drawing.entity_span(record)
    last = int(np.searchsorted(drawing.starts, drawing.starts.dtype.type(end)))
    result = []
    for k in range(record, last):
        for pair in drawing.whole(k, "an entity on a cable layer"):
            if pair.code == 999 or (k == record and pair.code == 5):
                continue
            result.append(drawing.data[pair.start : pair.end])
            if k == record and pair.code == 0:
                result.append(f"  5\n{key}\n".encode())
    return b"".join(piece if piece.endswith(b"\n") else piece + b"\n" for piece in result)


def _assemble(
    drawing: Scan, body: list[bytes], block_spans: list[tuple[int, int]], seed: int
) -> bytes:
    """Put the small drawing together."""
    version = drawing.version or "AC1009"
    out = [
        b"  0\nSECTION\n  2\nHEADER\n  9\n$ACADVER\n  1\n",
        version.encode("latin-1"),
        f"\n  9\n$HANDSEED\n  5\n{seed:X}\n  0\nENDSEC\n".encode(),
    ]
    data = drawing.data
    tables = [t for name in _TABLES if (t := drawing.table(name))]
    if tables:
        out.append(b"  0\nSECTION\n  2\nTABLES\n")
        out += [data[drawing.span(t.first)[0] : drawing.span(t.last)[1]] for t in tables]
        out.append(b"  0\nENDSEC\n")
    if block_spans:
        out.append(b"  0\nSECTION\n  2\nBLOCKS\n")
        out += [data[start:end] for start, end in block_spans]
        out.append(b"  0\nENDSEC\n")
    out += [b"  0\nSECTION\n  2\nENTITIES\n", *body, b"  0\nENDSEC\n  0\nEOF\n"]
    return b"".join(out).replace(b"\r\n", b"\n")


class _Blocks:
    """Block definitions by name, and which INSERT reaches which."""

    def __init__(self, drawing: Scan, encoding: str) -> None:
        self._drawing = drawing
        self._encoding = encoding
        self._section = drawing.section("BLOCKS")
        self._spans: dict[str, tuple[int, int]] | None = None

    def inserts_reaching(self, on_layers: NDArray[np.int64]) -> set[int]:
        """Return INSERTs of model space whose block, at any depth, holds one of the records."""
        section, entities = self._section, self._drawing.section("ENTITIES")
        if section is None or entities is None:
            return set()
        inside = on_layers[(on_layers > section.first) & (on_layers < section.last)]
        holding = {
            name
            for name, (first, last) in self._by_name().items()
            if ((inside > first) & (inside < last)).any() and not name.startswith("*paper_space")
        }
        if not holding:
            return set()
        inserts = self._inserts()
        while True:  # outwards, until no further block holds a block that holds ours
            more = {
                name
                for name, (first, last) in self._by_name().items()
                if name not in holding
                and any(first < k < last and target in holding for k, target in inserts.items())
            }
            if not more:
                break
            holding |= more
        return {
            k
            for k, target in inserts.items()
            if entities.first < k < entities.last and target in holding
        }

    def needed_by(self, records: Iterable[int]) -> list[tuple[int, int]]:
        """Return the spans of the blocks that some INSERTs need, nested ones too."""
        if self._section is None:
            return []
        todo = [self._target(k) for k in records if self._drawing.kinds[k] == b"INSERT"]
        found: set[str] = set()
        while todo:
            name = todo.pop()
            if name in found or name not in self._by_name():
                continue
            found.add(name)
            first, last = self._by_name()[name]
            todo += [
                self._target(k) for k in range(first, last) if self._drawing.kinds[k] == b"INSERT"
            ]
        spans = [self._by_name()[name] for name in found]
        starts = self._drawing.starts
        return sorted((int(starts[first]), int(starts[last + 1])) for first, last in spans)

    def _by_name(self) -> dict[str, tuple[int, int]]:
        """Return the records that open and close each block."""
        if self._spans is None:
            self._spans = {}
            kinds, section = self._drawing.kinds, self._section
            assert section is not None
            inside = np.arange(section.first, section.last)
            opens = inside[kinds[inside] == b"BLOCK"]
            closes = inside[kinds[inside] == b"ENDBLK"]
            for first, last in zip(opens.tolist(), closes.tolist(), strict=False):
                name = self._drawing.first_tag(first, 2) or b""
                self._spans.setdefault(layer_key(name, self._encoding), (first, last))
        return self._spans

    def _inserts(self) -> dict[int, str]:
        """Return all INSERT records with the key of their block."""
        which = np.flatnonzero(self._drawing.kinds == b"INSERT")
        return {int(k): self._target(int(k)) for k in which}

    def _target(self, record: int) -> str:
        """Return the key of the block that an INSERT names."""
        return layer_key(self._drawing.first_tag(record, 2) or b"", self._encoding)
