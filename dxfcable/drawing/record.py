"""The record kept in the drawing: inputs, unstressed lengths, memory, and what we opened.

Text lines `key,value,...` joined by `;`, names escaped as `=XX`, in strings of under 250
bytes on entities of ours. Each string begins `record=`; the first of a part says which part
it is and how the whole sums up. It is written twice for each cable, and either copy will do.
The lines of a cable are those of `cable_record.py`.
"""

from __future__ import annotations

import itertools
import zlib
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.whole import Whole
from dxfcable.errors import DrawingError

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping, Sequence

    from dxfcable.model import Point

FORMAT = 1
_PREFIX = "record="
_CHUNK = 230  # bytes of text a string, below DXF's 255
_PART = 40  # strings an entity: about 9 kB of the 16 kB that extended data may hold
_TRIES = 64  # of copies that other programs may have spoiled
_PLAIN = frozenset("ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-+._/~*")


@dataclass(frozen=True, slots=True, kw_only=True)
class Memory:
    """What a drafter did to our entities, and nothing that we put.

    Attributes
    ----------
    places : mapping of str to Point
        Id of a label, or name of a part, to the place the drafter gave it.
    texts : mapping of str to str
        Id to the text the drafter wrote.
    """

    places: Mapping[str, Point] = field(default_factory=dict)
    texts: Mapping[str, str] = field(default_factory=dict)


@dataclass(frozen=True, slots=True, kw_only=True)
class FileFacts:
    """What concerns the file and not one cable.

    Attributes
    ----------
    seed : tuple of str or None
        $HANDSEED as it was and as we wrote it, None where it was not touched.
    opened : tuple of str
        Rows, tables and sections that are ours.
    origins : tuple of (str, Point)
        Where each part was put.
    whole : Whole or None
        What tells that an entity is missing, with the parts of `origins`; None in a record
        that does not have it.
    """

    seed: tuple[str, str] | None = None
    opened: tuple[str, ...] = ()
    memory: Memory = field(default_factory=Memory)
    origins: tuple[tuple[str, Point], ...] = ()
    whole: Whole | None = None


def escape(text: str) -> str:
    """Write any text in letters that survive every CAD program."""
    return "".join(
        c if c in _PLAIN else "".join(f"={b:02X}" for b in c.encode("utf-8", "surrogateescape"))
        for c in text
    )


def unescape(text: str) -> str:
    """Read what `escape` wrote."""
    raw = bytearray()
    at = 0
    while at < len(text):
        if text[at] == "=":
            raw.append(int(text[at + 1 : at + 3], 16))
            at += 3
        else:
            raw += text[at].encode("ascii")
            at += 1
    return raw.decode("utf-8", "surrogateescape")


def facts_text(facts: FileFacts) -> str:
    """Return the lines that concern the file."""
    lines: list[tuple[str, ...]] = []
    if facts.seed is not None:
        lines.append(("seed", escape(facts.seed[0]), escape(facts.seed[1])))
    lines += [("opened", escape(name)) for name in facts.opened]
    lines += [
        ("held", escape(k), repr(x), repr(y)) for k, (x, y) in sorted(facts.memory.places.items())
    ]
    lines += [("text", escape(k), escape(v)) for k, v in sorted(facts.memory.texts.items())]
    lines += [("origin", escape(k), repr(x), repr(y)) for k, (x, y) in facts.origins]
    if facts.whole is not None:
        counts = [str(count) for _, count in facts.whole.parts]
        lines.append(("whole", str(facts.whole.count), f"{facts.whole.total:08X}", *counts))
    return ";".join(",".join(line) for line in lines)


def parts(text: str) -> list[list[str]]:
    """Cut a record into parts, each the strings for one entity."""
    total = f"{zlib.crc32(text.encode('ascii')):08X}"
    chunks = [text[k : k + _CHUNK] for k in range(0, len(text), _CHUNK)] or [""]
    groups = [chunks[k : k + _PART] for k in range(0, len(chunks), _PART)]
    return [
        [f"{_PREFIX}{FORMAT}/{k}/{len(groups)}/{total}", *(f"{_PREFIX}{c}" for c in group)]
        for k, group in enumerate(groups, start=1)
    ]


def join(carriers: Iterable[Sequence[str]]) -> list[str]:
    """Put records together from the strings of all carriers, each record once.

    Raises
    ------
    DrawingError
        Where a later version of this program wrote the record.
    """
    found: dict[tuple[str, int], dict[int, dict[str, None]]] = {}
    for strings in carriers:
        if not strings:
            continue
        head = strings[0].removeprefix(_PREFIX).split("/")
        if head[0].isdigit() and int(head[0]) > FORMAT:
            msg = f"this drawing was solved by a later version (record format {head[0]})"
            raise DrawingError(
                msg,
                code="newer-record",
                remedy="Update dxfcable.",
            )
        if len(head) != 4 or not all(part.isdigit() for part in head[:3]):
            continue
        body = "".join(s.removeprefix(_PREFIX) for s in strings[1:])
        group = found.setdefault((head[3], int(head[2])), {})
        group.setdefault(int(head[1]), {}).setdefault(body)
    result = []
    for (total, count), group in found.items():
        copies = [list(group.get(k, {})) for k in range(1, count + 1)]
        for choice in itertools.islice(itertools.product(*copies), _TRIES):
            text = "".join(choice)
            if f"{zlib.crc32(text.encode('ascii', 'replace')):08X}" == total:
                result.append(text)
                break
    return result


def read_facts(records: Sequence[str]) -> FileFacts:
    """Read what concerns the file out of all records of a drawing."""
    seed: tuple[str, str] | None = None
    opened: dict[str, None] = {}
    places: dict[str, Point] = {}
    texts: dict[str, str] = {}
    origins: dict[str, Point] = {}
    whole: Whole | None = None
    for record in records:
        for line in record.split(";"):
            key, *values = line.split(",")
            if key == "seed" and seed is None:
                seed = unescape(values[0]), unescape(values[1])
            elif key == "opened":
                opened.setdefault(unescape(values[0]))
            elif key == "held":
                places[unescape(values[0])] = (float(values[1]), float(values[2]))
            elif key == "text":
                texts[unescape(values[0])] = unescape(values[1])
            elif key == "origin":
                origins[unescape(values[0])] = (float(values[1]), float(values[2]))
            elif key == "whole" and whole is None:
                whole = _whole(values, tuple(origins))
    return FileFacts(
        seed=seed,
        opened=tuple(opened),
        memory=Memory(places=places, texts=texts),
        origins=tuple(origins.items()),
        whole=whole,
    )


def _whole(values: Sequence[str], parts: Sequence[str]) -> Whole:
    """Read the line that tells whether all entities are there; its parts stand before it."""
    count, total, *counts = values
    return Whole(
        count=int(count),
        total=int(total, 16),
        parts=tuple(zip(parts, map(int, counts), strict=False)),
    )
