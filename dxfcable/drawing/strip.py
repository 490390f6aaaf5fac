"""Take everything of ours out of a drawing, and remember what the drafter did to it."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing import record
from dxfcable.drawing.bytes.cut import encoding_of
from dxfcable.drawing.bytes.decode import layer_key, plain
from dxfcable.drawing.bytes.pairs import find_tags, plain_pairs, skip_prologue
from dxfcable.drawing.bytes.splice import Change
from dxfcable.drawing.cable_reading import sort_cables
from dxfcable.drawing.marks import Marked, sort_marked
from dxfcable.drawing.record import FileFacts, Memory
from dxfcable.drawing.rows import LENT_ROW, LOOK_CODES, ROW
from dxfcable.drawing.uses import Row, row_key, users
from dxfcable.model import Finding, Point, Severity

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.recorded import CableRecord

_MOVED = 0.01  # of a label's height
_MOST = 0.6  # share of a part that must have moved alike
# Pointers and handles in other applications' data; 330 to 369 cover owners and groups too.
_POINTERS = (*range(320, 370), *range(390, 400), 480, 481, 1005)


@dataclass(frozen=True, slots=True, kw_only=True)
class Stripping:
    """What has to go, and what has to be known afterwards.

    Attributes
    ----------
    changes : tuple of Change
        Deletions and the seed's old value; empty where nothing is ours.
    facts : FileFacts
        Memory brought up to date; `opened` is what stays because the drafter now uses it.
    pointed_at : mapping of str to str
        (id/number) of entities that a span of the drafter points at, to their handle.
    own_heads : frozenset of int
        Records of ENTITIES that are ours.
    layer_looks : mapping of str to (str, ...)
        Colour, flags and weight of each layer row that goes, by the key of its name.
    cables : tuple of CableRecord
        What the record says of each cable, in the order of the file; those that do not read
        are told in `findings`.
    removed : int
        How many entities of ours there are.
    """

    changes: tuple[Change, ...]
    facts: FileFacts
    pointed_at: Mapping[tuple[str, int], str]
    own_heads: frozenset[int]
    layer_looks: Mapping[str, tuple[str, ...]]
    cables: tuple[CableRecord, ...]
    removed: int
    findings: tuple[Finding, ...]


def plan_strip(drawing: Scan) -> Stripping:
    """Work out how to take everything of ours out of a drawing.

    Raises
    ------
    DrawingError
        Where a later version of this program wrote the record.
    """
    found = sort_marked(drawing)
    records = record.join(m.record_lines for m in (*found.ours, *found.copies))
    facts = record.read_facts(records)
    cables, unread_notes = _cables(found.ours, records)
    findings = [*(_copy_note(drawing, m) for m in found.copies), *unread_notes]
    if found.ours and not records:
        findings.append(
            Finding(
                code="record-lost",
                severity=Severity.NOTE,
                text="the record of an earlier solve is missing or spoiled; layers and rows it "
                "made are left in the drawing",
            )
        )
    if found.ours and drawing.has_handles and not any(m.is_by_handle for m in found.ours):
        findings.append(
            Finding(
                code="adopted",
                severity=Severity.NOTE,
                text=f"{len(found.ours)} entities carry marks that another drawing gave, or this "
                "one before its handles were renumbered; they are taken as ours",
            )
        )
    changes = [_without_comments(drawing, *m.span) for m in found.ours]
    own_records = _records_of(drawing, found.ours)
    row_changes, staying, row_findings = _rows(drawing, facts.opened, own_records)
    memory, memory_findings = _memory(drawing, found.ours, facts)
    pointed_at, pointer_findings = _pointed_at(drawing, found.ours, own_records)
    changes += row_changes + _seed(drawing, facts.seed)
    return Stripping(
        changes=tuple(changes),
        facts=FileFacts(seed=facts.seed, opened=staying, memory=memory, origins=facts.origins),
        pointed_at=pointed_at,
        own_heads=frozenset(m.record for m in found.ours),
        layer_looks=_layer_looks(drawing, facts.opened),
        cables=cables,
        removed=len(found.ours),
        findings=(*findings, *row_findings, *memory_findings, *pointer_findings),
    )


def _without_comments(drawing: Scan, start: int, end: int) -> Change:
    """Take out records of ours, but not comments that somebody put among their tags."""
    data = drawing.data
    kept = b""
    if b"999" in data[start:end]:
        tags = plain_pairs(data, start, end)
        kept = b"".join(data[tag.start : tag.end] for tag in tags if tag.code == 999)
    return Change(start, end, kept)


def _records_of(drawing: Scan, ours: Iterable[Marked]) -> frozenset[int]:
    """Return all records of our entities, vertices included."""
    return frozenset(
        k for m in ours for k in range(m.record, int(np.searchsorted(drawing.starts, m.span[1])))
    )


def _cables(
    ours: Iterable[Marked], records: list[str]
) -> tuple[tuple[CableRecord, ...], list[Finding]]:
    """Read what is kept of each cable; what a drafter's copies carry counts last."""
    carried = record.join(m.record_lines for m in ours)
    read, unread = sort_cables([*carried, *(text for text in records if text not in carried)])
    notes = [
        Finding(
            code="record-unread",
            severity=Severity.NOTE,
            text=f"cable {cable.mark}: its record {cable.reason}",
            remedy="Solve the drawing again before it is revised or verified.",
            cable=cable.mark,
        )
        for cable in unread
    ]
    return read, notes


def _copy_note(drawing: Scan, copy: Marked) -> Finding:
    """Say that a copy of ours is the drafter's."""
    return Finding(
        code="copied",
        severity=Severity.NOTE,
        text=f"{copy.kind} is a copy of {copy.id}; it is kept as the drafter's own",
        handle=copy.handles[0] if copy.handles else None,
        line=drawing.line(copy.span[0]),
        at=copy.place,
    )


def _seed(drawing: Scan, seed: tuple[str, str] | None) -> list[Change]:
    """Put the old seed back, if nobody wrote another one since."""
    values = drawing.header.get("$HANDSEED")
    if seed is None or not values:
        return []
    old, written = seed
    pair = values[0]
    if pair.value.strip() != written.encode("ascii"):
        return []
    at = drawing.data.index(pair.value, drawing.data.index(b"\n", pair.start) + 1)
    at += pair.value.index(pair.value.strip())
    return [Change(at, at + len(written), old.encode("latin-1"))]


def _rows(
    drawing: Scan, opened: tuple[str, ...], own_records: frozenset[int]
) -> tuple[list[Change], tuple[str, ...], list[Finding]]:
    """Remove rows, tables and the section that we opened, unless the drafter uses them."""
    encoding, _ = encoding_of(drawing)
    ours = [name.split(" ", 2) for name in opened]
    rows: dict[int, tuple[str, Row]] = {}
    for kind, table, *rest in ours:
        if kind in (ROW, LENT_ROW) and rest:
            for k in drawing.rows(table):
                if layer_key(drawing.first_tag(k, 2) or b"", encoding) == row_key(rest[0]):
                    rows[k] = (kind, (table, rest[0]))
    kept = {row for kind, row in rows.values() if kind == ROW}
    used = users(drawing, kept, own_records | frozenset(rows))
    gone = {k for k, (kind, row) in rows.items() if kind == LENT_ROW or row not in used}
    changes = []
    staying = [f"{ROW} {table} {name}" for k, (_, (table, name)) in rows.items() if k not in gone]
    tables = {name for kind, name, *_ in ours if kind == "table"}
    whole = []
    for block in drawing.tables:
        body = range(block.first + 1, block.last)
        if block.name in tables and all(k in gone for k in body):
            whole.append(block)
        else:
            changes += [_without_comments(drawing, *drawing.span(k)) for k in body if k in gone]
            if block.name in tables:
                staying.append(f"table {block.name}")
    section = drawing.section("TABLES")
    if "section TABLES" in opened and section is not None:
        if len(whole) == len(drawing.tables):
            start, end = drawing.span(section.first)[0], drawing.span(section.last)[1]
            return [_without_comments(drawing, start, end)], (), []
        staying.append("section TABLES")
    for block in whole:
        start, end = drawing.span(block.first)[0], drawing.span(block.last)[1]
        changes.append(_without_comments(drawing, start, end))
    findings = [
        _row_note(drawing, k, row, used[row]) for k, (_, row) in rows.items() if k not in gone
    ]
    return changes, tuple(staying), findings


def _layer_looks(drawing: Scan, opened: tuple[str, ...]) -> dict[str, tuple[str, ...]]:
    """Return how our layer rows look now, a drafter's changes included."""
    ours = {row_key(name.split(" ", 2)[2]) for name in opened if " LAYER " in name}
    encoding, _ = encoding_of(drawing)
    looks = {}
    for row in drawing.rows("LAYER") if ours else ():
        key = layer_key(drawing.first_tag(row, 2) or b"", encoding)
        if key in ours:
            tags = {p.code: p.value.strip().decode("latin-1") for p in drawing.pairs(row)}
            looks[key] = tuple(tags.get(code, "") for code in LOOK_CODES)
    return looks


def _row_note(drawing: Scan, record: int, row: Row, user: int) -> Finding:
    """Say that a row stays, and who uses it."""
    table, name = row
    kind = bytes(drawing.kinds[user]).decode("latin-1")
    line = drawing.line(int(drawing.starts[user]))
    return Finding(
        code="row-in-use",
        severity=Severity.NOTE,
        text=f"{table} {name} stays, since {kind} at line {line} uses it",
        line=drawing.line(int(drawing.starts[record])),
        layer=name if table == "LAYER" else None,
    )


def _memory(
    drawing: Scan, ours: tuple[Marked, ...], facts: FileFacts
) -> tuple[Memory, list[Finding]]:
    """Bring memory up to date: labels and parts moved, texts edited, held things deleted."""
    here = {m.id: m for m in ours}
    groups: dict[str, list[Marked]] = {}
    for marked in ours:
        groups.setdefault(marked.part, []).append(marked)
    places = {k: at for k, at in facts.memory.places.items() if k in here or k in groups}
    texts = {k: text for k, text in facts.memory.texts.items() if k in here}
    findings = []
    shifts: dict[str, Point] = {}
    for part, origin in facts.origins:
        shift = _common_shift(groups.get(part, []))
        if shift is not None:
            shifts[part] = shift
            places[part] = (origin[0] + shift[0], origin[1] + shift[1])
            text = f"{part} was moved as a whole and stays there"
            findings.append(_memory_note(drawing, groups[part][0], "moved", text))
    for marked in ours:
        shift = shifts.get(marked.part)
        if marked.id in places and shift is not None:
            places[marked.id] = marked.place
        if marked.kind == "TEXT" and _is_moved(marked, shift or (0.0, 0.0)):
            places[marked.id] = marked.place
            text = f"label {marked.id} was moved and stays there"
            findings.append(_memory_note(drawing, marked, "moved", text))
        if marked.is_restyled:
            text = f"{marked.id} was given another look; a solve sets layer, style and colour again"
            findings.append(_memory_note(drawing, marked, "restyled", text))
        if marked.kind != "TEXT" and shift is None and not marked.is_in_place:
            text = f"{marked.id} was moved by itself; a solve draws it in its place again"
            findings.append(_memory_note(drawing, marked, "redrawn", text))
        if marked.text_was_edited:
            texts[marked.id] = plain(marked.text)
    return Memory(places=places, texts=texts), findings


def _is_moved(marked: Marked, shift: Point) -> bool:
    """Tell whether a drafter moved a label by more than its part and what programs round."""
    expected = (marked.put[0] + shift[0], marked.put[1] + shift[1])
    distance = math.dist(expected, marked.place)
    return distance > _MOVED * (marked.height or 1.0) and math.isfinite(distance)


def _common_shift(members: list[Marked]) -> Point | None:
    """Return the shift that most members of a part share, None where they stand still."""
    if not members:
        return None
    shifts = np.array([(m.place[0] - m.put[0], m.place[1] - m.put[1]) for m in members])
    shifts = shifts[np.isfinite(shifts).all(axis=1)]
    height = max((m.height for m in members if m.kind == "TEXT"), default=1.0)
    if not shifts.size:
        return None
    middle = np.median(shifts, axis=0)
    sharing = np.abs(shifts - middle).max(axis=1) <= _MOVED * height
    if sharing.mean() < _MOST or float(np.hypot(*middle)) <= _MOVED * height:
        return None
    return float(middle[0]), float(middle[1])


def _memory_note(drawing: Scan, marked: Marked, code: str, text: str) -> Finding:
    """Say what a drafter did to an entity of ours."""
    return Finding(
        code=code,
        severity=Severity.NOTE,
        text=text,
        handle=marked.handles[0] if marked.handles else None,
        line=drawing.line(marked.span[0]),
        at=marked.place,
        raw=marked.text,
    )


def _pointed_at(
    drawing: Scan, ours: tuple[Marked, ...], own_records: frozenset[int]
) -> tuple[dict[tuple[str, int], str], list[Finding]]:
    """Find entities of ours that a span of the drafter points at by handle."""
    owners = {h.upper(): (m, n) for m in ours for n, h in enumerate(m.handles)}
    if not owners:
        return {}, []
    tags = find_tags(drawing.data, _POINTERS, skip_prologue(drawing.data))
    records = np.searchsorted(drawing.starts[:-1], tags.starts, side="right") - 1
    result: dict[tuple[str, int], str] = {}
    findings = []
    for k in range(tags.codes.size):
        raw = drawing.data[tags.values[k] : tags.ends[k]]
        if len(raw) > 16:
            continue
        found = owners.get(raw.decode("latin-1").upper())
        if found is None or int(records[k]) in own_records:
            continue
        marked, number = found
        result[(marked.id, number)] = raw.decode("latin-1")
        kind = bytes(drawing.kinds[records[k]]).decode("latin-1")
        line = drawing.line(int(tags.starts[k]))
        text = f"{kind} at line {line} points at {marked.id}, which is ours"
        findings.append(_memory_note(drawing, marked, "pointed-at", text))
    return result, findings
