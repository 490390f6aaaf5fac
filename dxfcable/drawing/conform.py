"""Tag by tag check of everything that we write, before it is written.

The DXF library reads much that a CAD program rejects, so what we insert is held against
what the format asks: order of tags, owner, marks, sizes, handles. A fault here is ours.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING, NoReturn

from dxfcable.drawing.bytes.pairs import plain_pairs
from dxfcable.drawing.dialect import APPID

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from dxfcable.drawing.bytes.pairs import Pair
    from dxfcable.drawing.dialect import Dialect

_STRING_LIMIT = 249
_DATA_LIMIT = 12_000
_ENTITIES = {
    "LINE": ("AcDbLine", {10, 20, 30, 11, 21, 31}),
    "LWPOLYLINE": ("AcDbPolyline", {90, 70, 10, 20}),
    "POLYLINE": ("AcDb2dPolyline", {66, 10, 20, 30, 70}),
    "CIRCLE": ("AcDbCircle", {10, 20, 30, 40}),
    "SOLID": ("AcDbTrace", {10, 20, 30, 11, 21, 31, 12, 22, 32, 13, 23, 33}),
    "TEXT": ("AcDbText", {10, 20, 30, 40, 1}),
    "VERTEX": ("AcDbVertex", {10, 20, 30, 70}),
    "SEQEND": ("", set()),
}
_SINCE_R14 = {"LWPOLYLINE"}


class NotConformingError(AssertionError):
    """Something that we were about to write is not as the format asks."""


def check_entities(
    raw: bytes, dialect: Dialect, *, layers: Iterable[str], has_handles: bool
) -> None:
    """Check the entities that go into the ENTITIES section.

    Raises
    ------
    NotConformingError
        Naming the entity and the tag.
    """
    names = set(layers)
    handles: set[str] = set()
    follower = ""
    for tags in _records(raw):
        kind = tags[0].value.decode("ascii")
        _check_ascii(tags, dialect, names)
        _need(kind in _ENTITIES, kind, "is not a kind we write")
        _need(
            kind not in _SINCE_R14 or dialect.has_light_polylines, kind, "is too new for the file"
        )
        _check_handle(tags, handles, has_handles=has_handles)
        _check_owner(tags, dialect)
        _check_body(kind, tags, dialect)
        if kind in ("VERTEX", "SEQEND"):
            _need(follower == "POLYLINE", kind, "does not follow a polyline")
            follower = "" if kind == "SEQEND" else follower
            continue
        _need(not follower, kind, "stands inside a polyline")
        _check_mark(kind, tags, has_handles=has_handles)
        follower = "POLYLINE" if kind == "POLYLINE" else ""
    _need(not follower, "POLYLINE", "has no SEQEND")


def check_rows(raw: bytes, dialect: Dialect, *, has_handles: bool) -> None:
    """Check rows, tables and sections that go into the TABLES section.

    Raises
    ------
    NotConformingError
        Naming the row and the tag.
    """
    handles: set[str] = set()
    for tags in _records(raw):
        kind = tags[0].value.decode("ascii")
        _check_ascii(tags, dialect, None)
        if kind in ("SECTION", "ENDSEC", "ENDTAB"):
            continue
        _check_handle(tags, handles, has_handles=has_handles)
        codes = [p.code for p in tags]
        _need(2 in codes, kind, "has no name")
        if kind == "TABLE":
            continue
        _need((330 in codes) <= dialect.has_owners, kind, "has an owner before R2000")
        _need((370 in codes) <= dialect.has_owners, kind, "has a line weight before R2000")
        markers = codes.count(100)
        _need(markers == (2 if dialect.has_subclasses else 0), kind, "has wrong subclass markers")
        _need(70 in codes, kind, "has no flags")


def _records(raw: bytes) -> Iterator[list[Pair]]:
    """Part inserted bytes into records."""
    group: list[Pair] = []
    for pair in plain_pairs(raw, 0, len(raw)):
        if pair.code == 0 and group:
            yield group
            group = []
        group.append(pair)
    if group:
        _need(group[0].code == 0, "bytes", "do not begin with a record")
        yield group


def _need(holds: bool, kind: str, text: str) -> None:
    """Raise where something does not hold."""
    if not holds:
        _fail(kind, text)


def _fail(kind: str, text: str) -> NoReturn:
    """Raise, naming what is wrong."""
    message = f"{kind} {text}"
    raise NotConformingError(message)


def _check_ascii(tags: list[Pair], dialect: Dialect, layers: set[str] | None) -> None:
    """Check text, numbers and layer names."""
    kind = tags[0].value.decode("ascii")
    for pair in tags:
        if pair.code == 8 and layers is not None:
            name = pair.value.decode(dialect.encoding, "surrogateescape")
            _need(name in layers, kind, f"is on layer {name}, which is not ours")
            continue
        code, text = pair.code, pair.value.decode("ascii")
        # Words are made only where something is wrong: this runs for every tag.
        if not text.isprintable():
            _fail(kind, f"has an unprintable value at {code}")
        if text == "None":
            _fail(kind, f"says None at {code}")
        if (10 <= code < 60 or 1010 <= code < 1060) and not math.isfinite(float(text)):
            _fail(kind, f"has {text} at {code}")


def _check_handle(tags: list[Pair], seen: set[str], *, has_handles: bool) -> None:
    """Check that each handle stands once, second, and only where the drawing has handles."""
    kind = tags[0].value.decode("ascii")
    own = [p.value.decode("ascii") for p in tags if p.code == 5]
    _need(len(own) == int(has_handles), kind, "has no handle, or one too many")
    if own:
        _need(tags[1].code == 5 or kind == "TABLE", kind, "has its handle too late")
        _need(int(own[0], 16) > 0, kind, "has handle 0")
        _need(own[0] not in seen, kind, f"uses handle {own[0]} twice")
        seen.add(own[0])


def _check_owner(tags: list[Pair], dialect: Dialect) -> None:
    """Check owners and subclass markers."""
    kind = tags[0].value.decode("ascii")
    own = [p for p in tags if p.code < 1000]
    codes = [p.code for p in own]
    _need((330 in codes) <= dialect.has_owners, kind, "has an owner before R2000")
    markers = [p.value.decode("ascii") for p in own if p.code == 100]
    if dialect.has_subclasses:
        _need(markers[:1] == ["AcDbEntity"], kind, "lacks AcDbEntity")
        _need(codes.index(100) < codes.index(8), kind, "has its layer before AcDbEntity")
    else:
        _need(not markers, kind, "has subclass markers before R13")


def _check_body(kind: str, tags: list[Pair], dialect: Dialect) -> None:
    """Check that all tags of the kind are there, in the subclass they belong to."""
    subclass, needed = _ENTITIES[kind]
    own = [p for p in tags if p.code < 1000]
    codes = [p.code for p in own]
    missing = needed - set(codes)
    _need(not missing, kind, f"lacks {sorted(missing)}")
    if subclass and dialect.has_subclasses:
        markers = [p.value.decode("ascii") for p in own if p.code == 100]
        _need(subclass in markers, kind, f"lacks {subclass}")
        if kind == "TEXT":
            _need(markers.count("AcDbText") == 2, kind, "lacks the second AcDbText")
    if kind == "LWPOLYLINE":
        start = next(i for i, p in enumerate(own) if p.value == b"AcDbPolyline") + 1
        _need(codes[start] == 90, kind, "does not begin with its count")
        _need(int(own[start].value) == codes.count(10) == codes.count(20), kind, "counts wrongly")
    if kind == "TEXT" and (72 in codes or 73 in codes):
        _need({11, 21, 31} <= set(codes), kind, "is aligned to no point")


def _check_mark(kind: str, tags: list[Pair], *, has_handles: bool) -> None:
    """Check our extended data."""
    data = [p for p in tags if p.code >= 1000]
    _need(bool(data) and data[0].code == 1001, kind, "has no mark")
    _need(data[0].value == APPID.encode("ascii"), kind, "has another application's mark")
    _need(sum(p.code == 1001 for p in data) == 1, kind, "has two marks")
    strings = [p.value for p in data if p.code == 1000]
    _need(all(len(s) <= _STRING_LIMIT for s in strings), kind, "has a string that is too long")
    forbidden = any(mark in s for s in strings for mark in (b"^", b"%%", b"\\"))
    _need(not forbidden, kind, "has a string that CAD programs change")
    _need(sum(len(p.value) + 3 for p in data) <= _DATA_LIMIT, kind, "carries too much data")
    codes = [p.code for p in data]
    _need({1010, 1020, 1030} <= set(codes), kind, "does not say where it was put")
    own = next((p.value for p in tags if p.code == 5), b"")
    marked = next((s for s in strings if s.startswith(b"handle=")), b"handle=?")
    _need(marked == b"handle=" + (own if has_handles else b""), kind, "marks another handle")
