"""What other hands and other programs do to a drawing, on its bytes.

Each edit keeps everything that it does not mean to change, tags that it does not know too.
"""

from __future__ import annotations

import random
from typing import TYPE_CHECKING

from tests.generated.cable import LOAD_LAYER
from tests.generated.pairs import (
    Entity,
    Token,
    entities,
    header_value,
    is_handle,
    rewrite,
    section_of_tokens,
    tokens,
)

if TYPE_CHECKING:
    from collections.abc import Iterator

APPID = b"DXFCABLE"
_POINTERS = frozenset([*range(320, 370), *range(390, 400), 480, 481, 1005])
_COORDINATES = frozenset([*range(10, 60), *range(110, 150), *range(210, 240), *range(1010, 1060)])
_ABSCISSAS, _ORDINATES = frozenset({10, 11, 1011}), frozenset({20, 21, 1021})


def _tokens_of(found: list[Token], entity: Entity) -> Iterator[tuple[int, Token]]:
    """Yield index and token of an entity, its members included."""
    for k in range(entity.first, entity.stop):
        yield k, found[k]


def _layer(found: list[Token], entity: Entity) -> bytes:
    """Return the layer of an entity's first record."""
    return next((t.name for _, t in _tokens_of(found, entity) if t.code == 8), b"")


def is_ours(found: list[Token], entity: Entity) -> bool:
    """Say whether an entity carries XDATA of the program's own APPID."""
    return any(t.code == 1001 and t.name == APPID for _, t in _tokens_of(found, entity))


def load_texts(data: bytes) -> list[bytes]:
    """Return the drafter's TEXTs on the load layer, in file order."""
    found = tokens(data)
    return [found[k].value for k in _load_text_tokens(found)]


def _load_text_tokens(found: list[Token]) -> list[int]:
    return [
        k
        for entity in entities(found)
        if entity.type == b"TEXT" and _layer(found, entity).upper() == LOAD_LAYER.encode()
        for k, t in _tokens_of(found, entity)
        if t.code == 1
    ]


def change_load_text(data: bytes, index: int, words: bytes) -> bytes:
    """Put another text into the `index`-th load text: what a drafter does before a revision."""
    found = tokens(data)
    return rewrite(data, {_load_text_tokens(found)[index]: words}, found)


def renumber_handles(data: bytes, start: int = 0x1000) -> bytes:
    """Give every record a new handle in file order, and follow the pointers to them.

    Pointers to what does not exist stay; so do texts that happen to name a handle.
    """
    found = tokens(data)
    states = is_handle(found, section_of_tokens(found))
    new: dict[int, bytes] = {}
    changes: dict[int, bytes] = {}
    count = start
    for k, token in enumerate(found):
        if states[k]:
            changes[k] = b"%X" % count
            new[int(token.value, 16)] = changes[k]
            count += 1
    for k, token in enumerate(found):
        if token.code in _POINTERS and _is_hex(token.name):
            target = new.get(int(token.name, 16))
            if target is not None:
                changes[k] = target
    seed = header_value(found, b"$HANDSEED")
    if seed is not None:
        changes[found.index(seed)] = b"%X" % count
    return rewrite(data, changes, found)


def _is_hex(value: bytes) -> bool:
    """Say whether a value reads as a handle."""
    try:
        int(value, 16)
    except ValueError:
        return False
    return True


def shuffle_entities(data: bytes, seed: int = 0) -> bytes:
    """Put the entities of ENTITIES into another order, each with what belongs to it."""
    found = tokens(data)
    drawn = entities(found)
    if not drawn:
        return data
    parts = [data[found[e.first].start : found[e.stop].start] for e in drawn]
    random.Random(seed).shuffle(parts)
    first, last = found[drawn[0].first].start, found[drawn[-1].stop].start
    return data[:first] + b"".join(parts) + data[last:]


def round_coordinates(data: bytes, digits: int = 6) -> bytes:
    """Round the numbers of ENTITIES and BLOCKS that have more decimals, XDATA included."""
    found = tokens(data)
    names = section_of_tokens(found)
    changes = {}
    for k, token in enumerate(found):
        if token.code not in _COORDINATES or names[k] not in (b"ENTITIES", b"BLOCKS"):
            continue
        written = token.name.upper()
        decimals = len(written.partition(b".")[2].partition(b"E")[0])
        if decimals > digits or b"E" in written:
            changes[k] = f"{float(written):.{digits}f}".encode()
    return rewrite(data, changes, found)


def swap_line_ends(data: bytes) -> bytes:
    """Write LF for CRLF, or CRLF for LF where there is no CRLF, as a transfer does."""
    if b"\r\n" in data:
        return data.replace(b"\r\n", b"\n")
    return data.replace(b"\n", b"\r\n")


def copy_records(data: bytes, dx: float = 0.0, dy: float = 0.0) -> bytes:
    """Copy all entities of ours with fresh handles, as COPY does: XDATA goes along.

    The copies come last in ENTITIES. Points move, 1011 too; 1010 and texts in XDATA do not.
    """
    found = tokens(data)
    ours = [e for e in entities(found) if is_ours(found, e)]
    if not ours:
        return data
    states = is_handle(found, section_of_tokens(found))
    used = [int(t.value, 16) for t, is_one in zip(found, states, strict=True) if is_one]
    fresh, parts = max(used, default=0) + 1, []
    for entity in ours:
        changes = _moved(found, entity, dx, dy)
        new: dict[bytes, bytes] = {}
        for k, token in _tokens_of(found, entity):
            if states[k]:
                new[token.name] = changes[k] = b"%X" % fresh
                fresh += 1
            elif token.code == 330 and token.name in new:
                changes[k] = new[token.name]
        parts.append(_rendered(data, found, entity, changes))
    end = found[entities(found)[-1].stop].start
    return data[:end] + b"".join(parts) + data[end:]


def _rendered(data: bytes, found: list[Token], entity: Entity, changes: dict[int, bytes]) -> bytes:
    """Return the bytes of one entity with new values."""
    parts = []
    for k, token in _tokens_of(found, entity):
        value = changes.get(k)
        if value is None:
            parts.append(data[token.start : token.end])
        else:
            head, tail = data[token.start : token.value_start], data[token.value_end : token.end]
            parts.append(head + value + tail)
    return b"".join(parts)


def _moved(found: list[Token], entity: Entity, dx: float, dy: float) -> dict[int, bytes]:
    """Return the new values of an entity's points."""
    changes = {}
    for k, token in _tokens_of(found, entity):
        if token.code in _ABSCISSAS and dx:
            changes[k] = repr(float(token.value) + dx).encode()
        elif token.code in _ORDINATES and dy:
            changes[k] = repr(float(token.value) + dy).encode()
    return changes


def our_texts(data: bytes) -> list[bytes]:
    """Return the texts of ours in file order."""
    found = tokens(data)
    return [
        next(t.value for _, t in _tokens_of(found, e) if t.code == 1) for e in _our_texts(found)
    ]


def _our_texts(found: list[Token]) -> list[Entity]:
    return [e for e in entities(found) if e.type == b"TEXT" and is_ours(found, e)]


def move_records(data: bytes, dx: float, dy: float, index: int = 0) -> bytes:
    """Move the `index`-th text of ours, as MOVE does: 10, 11 and 1011 go along, 1010 stays."""
    found = tokens(data)
    entity = _our_texts(found)[index]
    return rewrite(data, _moved(found, entity, dx, dy), found)
