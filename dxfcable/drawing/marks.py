"""Which entities are ours: each carries its id, its own handle and the place it was put.

A drafter's copy carries the mark too. Of several entities with one id the one whose handle
agrees is ours; where another program renumbered all, the one at its recorded place; else the
first in the file. The rest are copies, which belong to the drafter.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.cut import encoding_of
from dxfcable.drawing.bytes.decode import decode
from dxfcable.drawing.dialect import APPID
from dxfcable.drawing.export import look_number, look_sum, text_sum
from dxfcable.drawing.rows import CHAIN

if TYPE_CHECKING:
    from dxfcable.drawing.bytes.pairs import Pair
    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.model import Point

_SAME_PLACE = 1e-5  # of the larger of the coordinate and one unit: other programs round


@dataclass(frozen=True, slots=True, kw_only=True)
class Marked:
    """An entity with our mark.

    Attributes
    ----------
    part : str
        The movable group that it belongs to; its own id where it stands alone.
    record : int
        Its record in the scan.
    handles : tuple of str
        Its own handle and those of its vertices; empty strings are left out.
    marked_handle : str
        The handle that its mark names.
    put : Point
        Where it was put; `place` is where it stands now.
    text : str
        Its text now, "" for other kinds; `text_was_edited` compares it with the mark.
    is_restyled : bool
        It has a colour, weight, scale or linetype of its own, which we never give, or another
        layer, text style, height or rotation than we gave.
    record_lines : tuple of str
        The part of the record that it carries.
    """

    id: str
    part: str
    kind: str
    record: int
    span: tuple[int, int]
    handles: tuple[str, ...]
    marked_handle: str
    put: Point
    place: Point
    height: float
    text: str
    text_was_edited: bool
    is_restyled: bool
    record_lines: tuple[str, ...]

    @property
    def is_by_handle(self) -> bool:
        """Whether the mark names this very entity."""
        own = self.handles[0] if self.handles else ""
        return own.upper() == self.marked_handle.upper()

    @property
    def is_in_place(self) -> bool:
        """Whether it stands where it was put."""
        reach = max(1.0, *(abs(v) for v in (*self.put, *self.place))) * _SAME_PLACE
        return math.dist(self.put, self.place) <= reach


@dataclass(frozen=True, slots=True)
class Sorted:
    """All marked entities of a drawing: ours, and what a drafter copied of them."""

    ours: tuple[Marked, ...]
    copies: tuple[Marked, ...]


def sort_marked(drawing: Scan) -> Sorted:
    """Find all marked entities of the ENTITIES section and tell ours from copies."""
    by_id: dict[str, list[Marked]] = {}
    for record in _marked_records(drawing):
        found = _read(drawing, record)
        if found is not None:
            by_id.setdefault(found.id, []).append(found)
    ours = [_pick(group) for group in by_id.values()]
    chosen = {marked.record for marked in ours}
    copies = [m for group in by_id.values() for m in group if m.record not in chosen]
    return Sorted(
        tuple(sorted(ours, key=lambda m: m.record)), tuple(sorted(copies, key=lambda m: m.record))
    )


def _pick(group: list[Marked]) -> Marked:
    """Choose which entity of one id is ours."""
    for wanted in ("is_by_handle", "is_in_place"):
        fitting = [m for m in group if getattr(m, wanted)]
        if wanted == "is_by_handle" and len(fitting) > 1:
            # Without handles, or with doubled ones, the mark alone does not decide.
            fitting = [m for m in fitting if m.is_in_place] or fitting
        if fitting:
            return fitting[0]
    return group[0]


def _marked_records(drawing: Scan) -> list[int]:
    """Return the heads in ENTITIES with extended data of ours."""
    tags = drawing.tags
    which = np.flatnonzero((tags.codes == 1001) & (tags.ends - tags.values == len(APPID)))
    name = APPID.encode("ascii")
    records = {
        int(drawing.record_of[k])
        for k in which
        if drawing.data[tags.values[k] : tags.ends[k]].upper() == name
    }
    return sorted(k for k in records if drawing.is_head(k))


def _read(drawing: Scan, record: int) -> Marked | None:
    """Read one marked entity; None where the mark is not whole."""
    encoding, _ = encoding_of(drawing)
    span = drawing.entity_span(record)
    last = int(np.searchsorted(drawing.starts, span[1]))
    tags = [p for p in drawing.whole(record, "an entity of ours") if p.code != 999]
    own, marked = _split(tags)
    strings = [decode(p.value, encoding) for p in marked if p.code == 1000]
    facts = dict(s.partition("=")[::2] for s in strings if "=" in s)
    point = {p.code: _float(p.value) for p in marked if p.code in (1010, 1020)}
    if not facts.get("id") or len(point) < 2:
        return None
    vertices = own
    if drawing.kinds[record] == b"POLYLINE" and last > record + 1:
        vertices = drawing.whole(record + 1, "a vertex of ours")
    text = next((decode(p.value, encoding) for p in own if p.code == 1), "")
    expected = facts.get("text")
    return Marked(
        id=facts["id"],
        part=facts.get("part", facts["id"]),
        kind=bytes(drawing.kinds[record]).decode("latin-1"),
        record=record,
        span=span,
        handles=_handles(drawing, record, last),
        marked_handle=facts.get("handle", ""),
        put=(point[1010], point[1020]),
        place=_place(vertices),
        height=next((_float(p.value) for p in own if p.code == 40), 0.0),
        text=text,
        text_was_edited=expected is not None and text_sum(text) != expected,
        is_restyled=_is_restyled(own) or _has_other_look(own, facts.get("look"), encoding),
        record_lines=tuple(s for s in strings if s.startswith("record=")),
    )


def _split(tags: list[Pair]) -> tuple[list[Pair], list[Pair]]:
    """Part an entity's own tags from our extended data."""
    own: list[Pair] = []
    marked: list[Pair] = []
    target = own
    for pair in tags:
        if pair.code == 1001:
            is_ours = pair.value.strip().upper() == APPID.encode("ascii")
            target = marked if is_ours else []
        elif pair.code < 1000:
            target = own
        target.append(pair)
    return own, marked


def _is_restyled(own: list[Pair]) -> bool:
    """Tell whether something was set that we leave to the layer."""
    values = {pair.code: pair.value.strip() for pair in own}
    plain = {62: b"256", 6: b"BYLAYER", 370: b"-1", 48: b"1", 420: b"", 60: b"0"}
    chain = CHAIN.encode("ascii")
    return any(
        values[code].upper() not in (usual, chain) and not _is_number(values[code], usual)
        for code, usual in plain.items()
        if code in values
    )


def _has_other_look(own: list[Pair], expected: str | None, encoding: str) -> bool:
    """Tell whether layer, or a text's style and sizes, are not those that were given."""
    values: dict[int, bytes] = {}
    for pair in own:
        values.setdefault(pair.code, pair.value.strip())
    layer = decode(values.get(8, b""), encoding)
    look: tuple[str, ...] = (layer,)
    if 1 in values:
        height, turn = (_float(values.get(code, b"0")) for code in (40, 50))
        style = decode(values.get(7, b""), encoding)
        look = (layer, style, look_number(height), look_number(turn % 360.0))
    return expected is not None and look_sum(look) != expected


def _is_number(value: bytes, usual: bytes) -> bool:
    """Tell whether two values are the same number."""
    return bool(usual) and _float(value) == _float(usual)


def _place(tags: list[Pair]) -> Point:
    """Return the point that counts: 11 of an aligned text, else 10."""
    values: dict[int, bytes] = {}
    for pair in tags:
        values.setdefault(pair.code, pair.value)
    aligned = any(values.get(code, b"0").strip() not in (b"0", b"") for code in (72, 73))
    is_text = 1 in values
    code = 11 if is_text and aligned and 11 in values else 10
    return _float(values.get(code, b"")), _float(values.get(code + 10, b""))


def _handles(drawing: Scan, record: int, last: int) -> tuple[str, ...]:
    """Return the handles of an entity and its followers."""
    found = (drawing.first_tag(k, 5) for k in range(record, last))
    return tuple(raw.decode("latin-1") for raw in found if raw)


def _float(raw: bytes) -> float:
    """Read a number; what another program spoiled reads as not a number."""
    try:
        return float(raw)
    except ValueError:
        return math.nan
