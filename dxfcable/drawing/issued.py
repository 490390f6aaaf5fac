"""Entities on our layers as they stand in an issued drawing: geometry, texts, ids.

Nothing is taken from marks but ids, so that what somebody did to an entity shows.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing import record
from dxfcable.drawing.bytes.cut import encoding_of, records_on
from dxfcable.drawing.bytes.decode import decode, layer_key, plain, unescape
from dxfcable.drawing.dialect import APPID
from dxfcable.drawing.export import text_sum
from dxfcable.drawing.painting.labels import text_width

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.drawing.bytes.pairs import Pair
    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.drawing.whole import Whole
    from dxfcable.model import Point
    from dxfcable.settings import Settings

_PLAIN_LINES = frozenset({"", "BYLAYER", "BYBLOCK", "CONTINUOUS"})
_SHARE = {0: 0.0, 1: 0.5, 2: 1.0, 4: 0.5}  # of a text's width left of its point, by group 72
_RISE = {0: 0.5, 1: 0.5, 2: 0.0, 3: -0.5}  # of its height up to its middle, by group 73


@dataclass(frozen=True, slots=True, kw_only=True)
class IssuedEntity:
    """One entity in model space that is ours, or stands on a layer of ours.

    Attributes
    ----------
    id : str
        By its mark, or as found by its place; "" where neither tells.
    roles : frozenset of str
        Keys of the settings' output layers that have its layer's name.
    kind : str
        DXF type.
    offset : int
        First byte in the file.
    points : tuple of Point
        Ends of a line, vertices, centre of a circle, corners of a solid, alignment point.
    middle : Point
        Of a text's box; else the first point.
    is_chain, is_closed, is_bent : bool
        Has a linetype of its own; is closed; has arcs between vertices.
    was_edited : bool
        Its text is not the one that its mark names.
    part : str
        What it moves with, by its mark; "" without one.
    put : Point or None
        Where its mark says that its first point was put.
    """

    id: str
    roles: frozenset[str]
    kind: str
    layer: str
    handle: str | None
    offset: int
    points: tuple[Point, ...]
    middle: Point
    text: str = ""
    height: float = 0.0
    is_chain: bool = False
    is_closed: bool = False
    is_bent: bool = False
    was_edited: bool = False
    part: str = ""
    put: Point | None = None

    @property
    def start(self) -> Point:
        """First point."""
        return self.points[0]

    @property
    def end(self) -> Point:
        """Last point."""
        return self.points[-1]

    def named(self, name: str) -> IssuedEntity:
        """Give the same entity with an id."""
        return replace(self, id=name)


@dataclass(frozen=True, slots=True, kw_only=True)
class Issued:
    """All entities of ours in a drawing.

    Attributes
    ----------
    marked : mapping of str to IssuedEntity
        By id; empty where another program dropped all marks.
    unmarked : tuple of IssuedEntity
        On our layers without a mark, in file order.
    copies : tuple of IssuedEntity
        With the mark of another entity.
    whole : Whole or None
        What the record that they carry says of how many there are.
    """

    marked: Mapping[str, IssuedEntity]
    unmarked: tuple[IssuedEntity, ...]
    copies: tuple[IssuedEntity, ...]
    whole: Whole | None = None


def read_issued(drawing: Scan, settings: Settings, own_heads: frozenset[int]) -> Issued:
    """Read all entities of ours, and what else stands on our layers.

    Parameters
    ----------
    drawing : Scan
        The file.
    settings : Settings
        For the names of the layers.
    own_heads : frozenset of int
        Records that are ours by their marks, as `plan_strip` tells them from copies.

    Returns
    -------
    Issued
    """
    names: dict[str, set[str]] = {}
    for role in settings.layers.output_roles():
        key = unescape(settings.layers.name(role)).strip().casefold()
        names.setdefault(key, set()).add(role)
    roles = {key: frozenset(found) for key, found in names.items()}
    marked: dict[str, IssuedEntity] = {}
    copies, unmarked, carried = [], [], []
    for head in sorted(own_heads | _records(drawing, frozenset(roles))):
        entity, record_lines = _read(drawing, head, roles)
        if head in own_heads:
            marked[entity.id] = entity
            carried.append(record_lines)
        elif entity.id:
            copies.append(entity)
        else:
            unmarked.append(entity)
    return Issued(
        marked=marked,
        unmarked=tuple(unmarked),
        copies=tuple(copies),
        whole=record.read_facts(record.join(carried)).whole,
    )


def _records(drawing: Scan, layers: frozenset[str]) -> set[int]:
    """Return the heads in model space on some layers."""
    section = drawing.section("ENTITIES")
    if section is None:
        return set()
    found = records_on(drawing, layers)
    found = found[(found > section.first) & (found < section.last)]
    found = found[np.isin(found, drawing.heads)]
    return {k for k in found.tolist() if drawing.first_tag(k, 67) != b"1"}


def _read(
    drawing: Scan, head: int, roles: Mapping[str, frozenset[str]]
) -> tuple[IssuedEntity, tuple[str, ...]]:
    """Read one entity's own tags and its mark, and the part of the record that it carries."""
    encoding, _ = encoding_of(drawing)
    everything = drawing.whole(head, "an entity on our layers")
    mark = _mark(everything, encoding)
    tags = [p for p in everything if p.code < 999]
    values: dict[int, bytes] = {}
    for pair in tags:
        values.setdefault(pair.code, pair.value.strip())
    kind = bytes(drawing.kinds[head]).decode("latin-1")
    raw_layer = values.get(8, b"0")
    text = plain(decode(values.get(1, b""), encoding)) if kind in ("TEXT", "MTEXT") else ""
    height = _number(values.get(40, b"0"))
    vertices = _followers(drawing, head) if kind == "POLYLINE" else [tags]
    points, is_bent = _points(kind, values, vertices)
    linetype = decode(values.get(6, b""), encoding).upper()
    handle = values.get(5, b"").decode("latin-1")
    name = mark.facts.get("id", "")
    entity = IssuedEntity(
        id=name,
        roles=roles.get(layer_key(raw_layer, encoding), frozenset()),
        kind="LWPOLYLINE" if kind == "POLYLINE" else kind,
        layer=unescape(decode(raw_layer, encoding)),
        handle=handle or None,
        offset=drawing.span(head)[0],
        points=points,
        middle=_middle(values, points[0], text, height) if text else points[0],
        text=text,
        height=height,
        is_chain=linetype not in _PLAIN_LINES,
        is_closed=kind in ("LWPOLYLINE", "POLYLINE") and bool(_whole(values.get(70)) & 1),
        is_bent=is_bent,
        was_edited=bool(text) and text_sum(text) != mark.facts.get("text", text_sum(text)),
        part=mark.facts.get("part", name),
        put=mark.put,
    )
    return entity, mark.record_lines


@dataclass(frozen=True, slots=True, kw_only=True)
class _Mark:
    """What our extended data says of an entity."""

    facts: Mapping[str, str]
    put: Point | None
    record_lines: tuple[str, ...]


def _mark(tags: list[Pair], encoding: str) -> _Mark:
    """Read our extended data."""
    strings: list[str] = []
    place: dict[int, bytes] = {}
    is_ours = False
    for pair in tags:
        if pair.code == 1001:
            is_ours = pair.value.strip().upper() == APPID.encode("ascii")
        elif is_ours and pair.code == 1000:
            strings.append(decode(pair.value, encoding))
        elif is_ours and pair.code in (1010, 1020):
            place.setdefault(pair.code, pair.value)
    facts: dict[str, str] = {}
    for text in strings:
        key, _, value = text.partition("=")
        facts.setdefault(key, value)
    return _Mark(
        facts=facts,
        put=_point(place, 1010) if len(place) > 1 else None,
        record_lines=tuple(s for s in strings if s.startswith("record=")),
    )


def _points(
    kind: str, values: Mapping[int, bytes], groups: list[list[Pair]]
) -> tuple[tuple[Point, ...], bool]:
    """Return the points that matter, and whether arcs run between them."""
    if kind in ("LWPOLYLINE", "POLYLINE"):
        tags = [p for group in groups for p in group]
        across = [_number(p.value) for p in tags if p.code == 10]
        up = [_number(p.value) for p in tags if p.code == 20]
        bulges = [_number(p.value) for p in tags if p.code == 42]
        points = tuple(zip(across, up, strict=False))
        return points or ((math.nan, math.nan),), any(bulges)
    if kind == "TEXT" and (_whole(values.get(72)) or _whole(values.get(73))) and 11 in values:
        return (_point(values, 11),), False
    codes = {"LINE": (10, 11), "SOLID": (10, 11, 12)}.get(kind, (10,))
    return tuple(_point(values, code) for code in codes), False


def _followers(drawing: Scan, head: int) -> list[list[Pair]]:
    """Return the tags of a polyline's vertices."""
    last = int(np.searchsorted(drawing.starts, drawing.entity_span(head)[1]))
    return [
        drawing.whole(k, "a vertex on our layers")
        for k in range(head + 1, last)
        if drawing.kinds[k] == b"VERTEX"
    ]


def _middle(values: Mapping[int, bytes], at: Point, text: str, height: float) -> Point:
    """Return the middle of a text's box."""
    across, up = _whole(values.get(72)), _whole(values.get(73))
    share = (0.5 - _SHARE.get(across, 0.5)) * text_width(text, height)
    rise = (0.0 if across == 4 else _RISE.get(up, 0.0)) * height
    turn = math.radians(_number(values.get(50, b"0")))
    cos, sin = math.cos(turn), math.sin(turn)
    return at[0] + share * cos - rise * sin, at[1] + share * sin + rise * cos


def _point(values: Mapping[int, bytes], code: int) -> Point:
    return _number(values.get(code, b"")), _number(values.get(code + 10, b""))


def _number(raw: bytes) -> float:
    """Read a number; what another program spoiled reads as not a number."""
    try:
        return float(raw)
    except ValueError:
        return math.nan


def _whole(raw: bytes | None) -> int:
    """Read a whole number, 0 where there is none."""
    try:
        return int(raw or 0)
    except ValueError:
        return 0
