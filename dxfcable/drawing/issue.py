"""Write a painting into a drawing: rows, entities with marks and record, the handle seed."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing import conform, record
from dxfcable.drawing.bytes.cut import encoding_of
from dxfcable.drawing.bytes.handles import Allotter
from dxfcable.drawing.bytes.splice import Change, line_end_of, pieces
from dxfcable.drawing.dialect import dialect, encode
from dxfcable.drawing.export import Surroundings, entity
from dxfcable.drawing.items import Item, PolylineItem, TextItem
from dxfcable.drawing.record import FileFacts, Memory
from dxfcable.drawing.rows import plan_rows
from dxfcable.drawing.whole import whole_of
from dxfcable.errors import DrawingError
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.drawing.items import Painting
    from dxfcable.settings import Settings

_MODEL_SPACE = (b"*MODEL_SPACE", b"$MODEL_SPACE")


@dataclass(frozen=True, slots=True, kw_only=True)
class Issued:
    """The drawing with our entities in it, as pieces to write one after the other."""

    pieces: list[memoryview]
    layers: tuple[str, ...]
    findings: tuple[Finding, ...]


def issue(
    drawing: Scan,
    painting: Painting,
    *,
    cable_records: Sequence[str],
    memory: Memory,
    opened_before: tuple[str, ...],
    pointed_at: Mapping[tuple[str, int], str],
    looks_before: Mapping[str, tuple[str, ...]],
    settings: Settings,
    unit_mm: float,
) -> Issued:
    """Put a painting into a drawing that holds nothing of ours.

    Parameters
    ----------
    drawing : Scan
        The drafter's file.
    cable_records : sequence of str
        The record of each cable, by `cable_record.cable_text`.
    memory : Memory
        What the drafter did to entities of an earlier solve.
    opened_before : tuple of str
        Structures of ours that stand in the file because the drafter uses them.
    pointed_at : mapping
        Handles that entities must keep, by (id, follower number).
    looks_before : mapping
        How our layers looked, to say where a drafter's changes are undone.
    unit_mm : float
        Length of one drawing unit [mm].

    Raises
    ------
    DrawingError
        Where the drawing has no ENTITIES section.
    """
    entities = drawing.section("ENTITIES")
    if entities is None:
        msg = "the drawing has no ENTITIES section"
        raise DrawingError(msg, code="structure")
    encoding, _ = encoding_of(drawing)
    speech = dialect(drawing.version, encoding)
    allot = Allotter(drawing, frozenset(int(h, 16) for h in pointed_at.values()))
    roles = tuple(dict.fromkeys(item.layer for item in painting.items))
    rows = plan_rows(
        drawing,
        speech,
        {role: getattr(settings.layers, role) for role in roles},
        allot=allot,
        text_style=settings.show.text_style,
        chain_scale=painting.plot_scale / unit_mm,
        looks_before=looks_before,
    )
    opened = tuple(dict.fromkeys((*opened_before, *rows.opened)))
    around = Surroundings(
        dialect=speech,
        layers=rows.layers,
        style=rows.style,
        chain=rows.chain,
        owner=model_space_owner(drawing),
        allot=_Named(allot, pointed_at) if drawing.has_handles else None,
    )
    # The seed stands in the record, and the record in entities that take handles: allot first.
    handles = {item.id: _reserve(item, around) for item in painting.items}
    seed = _seed(drawing, allot)
    facts = FileFacts(
        seed=seed[0] if seed else None,
        opened=opened,
        memory=memory,
        origins=painting.origins,
        whole=whole_of(
            {item.id: item.part for item in painting.items}, [part for part, _ in painting.origins]
        ),
    )
    carried = _carriers(painting.items, record.facts_text(facts), cable_records)
    body = _body(drawing, entities.last, painting.items, _fixed(around, handles), carried)
    conform.check_entities(
        body.new, speech, layers=rows.layers.values(), has_handles=drawing.has_handles
    )
    for change in rows.changes:
        conform.check_rows(change.new, speech, has_handles=drawing.has_handles)
    changes = [*rows.changes, body, *([seed[1]] if seed else [])]
    return Issued(
        pieces=pieces(drawing.data, changes),
        layers=tuple(dict.fromkeys(rows.layers.values())),
        findings=(*_version_note(drawing, speech.is_assumed), *rows.findings),
    )


def _body(
    drawing: Scan,
    end: int,
    items: Sequence[Item],
    around: Surroundings,
    carried: Mapping[str, tuple[str, ...]],
) -> Change:
    """Return all entities, inserted directly before the record that ends the section."""
    at = int(drawing.starts[end])
    newline = line_end_of(drawing.data, at)
    encoding = around.dialect.encoding
    entities = (entity(item, around, carried.get(item.id, ())) for item in items)
    return Change(at, at, b"".join(encode(tags, newline, encoding) for tags in entities))


def model_space_owner(drawing: Scan) -> str:
    """Return the handle of the block record *Model_Space, "" where the file has none."""
    for row in drawing.rows("BLOCK_RECORD"):
        name = (drawing.first_tag(row, 2) or b"").upper()
        if name in _MODEL_SPACE:
            raw = drawing.first_tag(row, 5) or b""
            return raw.decode("latin-1") if raw.isalnum() else ""
    return ""


class _Named:
    """Handles by id: one that the drafter points at is kept, all others are new."""

    def __init__(self, allot: Allotter, kept: Mapping[tuple[str, int], str]) -> None:
        self._allot = allot
        self._kept = kept

    def __call__(self, name: str, number: int) -> str:
        """Return the handle for an item's follower of some number."""
        return self._kept.get((name, number)) or self._allot()


def _reserve(item: Item, around: Surroundings) -> tuple[str, ...]:
    """Take all handles that an item needs, in the order it writes them."""
    if around.allot is None:
        return ()
    count = 1
    if isinstance(item, PolylineItem) and not around.dialect.has_light_polylines:
        count = len(item.points) + 2
    return tuple(around.allot(item.id, number) for number in range(count))


def _fixed(around: Surroundings, handles: Mapping[str, tuple[str, ...]]) -> Surroundings:
    """Return the surroundings with handles that are already allotted."""
    return Surroundings(
        dialect=around.dialect,
        layers=around.layers,
        style=around.style,
        chain=around.chain,
        owner=around.owner,
        allot=(lambda name, number: handles[name][number]) if around.allot else None,
    )


def _seed(drawing: Scan, allot: Allotter) -> tuple[tuple[str, str], Change] | None:
    """Return old and new seed, and the change, where the header has one that must rise."""
    values = drawing.header.get("$HANDSEED")
    if not drawing.has_handles or not values or allot.seed is None:
        return None
    pair = values[0]
    old = pair.value.strip()
    if not old or not old.isalnum():
        return None
    at = drawing.data.index(b"\n", pair.start) + 1
    at = drawing.data.index(old, at)
    return (old.decode("latin-1"), allot.seed), Change(at, at + len(old), allot.seed.encode())


def _carriers(
    items: Sequence[Item], facts: str, cable_records: Sequence[str]
) -> dict[str, tuple[str, ...]]:
    """Choose the entities that carry the record, two sets for each cable.

    The profile and the schedule's texts come first; further parts go to the next entities of
    the same cable.
    """
    carried: dict[str, tuple[str, ...]] = {}
    prefixes = list(dict.fromkeys(item.id.split("/", 1)[0] for item in items))
    for prefix, text in zip(prefixes, cable_records, strict=True):
        own = [item for item in items if item.id.startswith(f"{prefix}/")]
        lines = [i.id for i in own if i.layer == "profile"]
        lines += [i.id for i in own if i.layer != "profile" and not isinstance(i, TextItem)]
        words = [i.id for i in own if i.layer == "table" and isinstance(i, TextItem)]
        words += [i.id for i in own if i.layer != "table" and isinstance(i, TextItem)]
        groups = record.parts(f"{facts};{text}" if facts else text)
        for carriers in (lines, words):
            for name, strings in zip(carriers, groups, strict=False):
                carried[name] = tuple(strings)
    return carried


def _version_note(drawing: Scan, is_assumed: bool) -> tuple[Finding, ...]:
    """Say that a drawing of no release, or an old one, is written as R12."""
    if not is_assumed:
        return ()
    stated = f"release {drawing.version}" if drawing.version else "no release"
    return (
        Finding(
            code="written-as-r12",
            severity=Severity.NOTE,
            text=f"the drawing states {stated}; what is added is written as release 12",
        ),
    )
