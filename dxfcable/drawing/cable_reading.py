"""What the record says of each cable, read back from the lines that `cable_record.py` wrote."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.record import unescape
from dxfcable.model import CableRevisions, PointChange, RevisionRow, Rule, RuleKind
from dxfcable.recorded import (
    CableRecord,
    RecordedHead,
    RecordedLoad,
    RecordedStay,
    RecordedSupport,
)

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.cable_record import Words
    from dxfcable.recorded import Cases

    Line = tuple[Words, ...]  # the values of a line, group by group, without its key
    Lines = Mapping[str, Sequence[Line]]

# Lines that every record has; those of earlier versions lack some.
_ALWAYS = (
    "cable",
    "units",
    "rule",
    "under",
    "level",
    "weight",
    "ea",
    "alpha",
    "delta-t",
    "datum",
)


@dataclass(frozen=True, slots=True, kw_only=True)
class UnreadCable:
    """A cable whose record is there but cannot be used; `reason` ends a sentence about it."""

    mark: str
    reason: str


def read_cables(records: Sequence[str]) -> tuple[CableRecord, ...]:
    """Read the cables out of all records of a drawing; what does not read is left out.

    Parameters
    ----------
    records : sequence of str
        As `record.join` gives them.

    Returns
    -------
    tuple of CableRecord
        In their order; of two of one cable the first that reads.
    """
    return sort_cables(records)[0]


def sort_cables(
    records: Sequence[str],
) -> tuple[tuple[CableRecord, ...], tuple[UnreadCable, ...]]:
    """Read the cables out of all records of a drawing, and tell those that do not read.

    Parameters
    ----------
    records : sequence of str
        As `record.join` gives them.

    Returns
    -------
    read, unread : tuple of CableRecord, tuple of UnreadCable
        In the order of the records; no cable twice. Marks compare without regard to case.
    """
    read: dict[str, CableRecord] = {}
    unread: dict[str, UnreadCable] = {}
    for text in records:
        found = read_cable(text)
        if isinstance(found, CableRecord):
            read.setdefault(found.mark.casefold(), found)
        elif found is not None:
            unread.setdefault(found.mark.casefold(), found)
    return tuple(read.values()), tuple(u for key, u in unread.items() if key not in read)


def read_cable(text: str) -> CableRecord | UnreadCable | None:
    """Read the record of one cable.

    Parameters
    ----------
    text : str
        What `cable_text` wrote, alone or among the lines of the file.

    Returns
    -------
    CableRecord, UnreadCable or None
        None where the text tells of no cable.
    """
    lines: dict[str, list[Line]] = {}
    for line in text.split(";"):
        first, *rest = (tuple(group.split(",")) if group else () for group in line.split(":"))
        lines.setdefault(first[0] if first else "", []).append((first[1:], *rest))
    if "cable" not in lines:
        return None
    mark = ""
    try:
        mark = _words(lines["cable"][0][0], 2)[0]
        if not all(key in lines for key in _ALWAYS):
            return UnreadCable(mark=mark, reason="was written by an earlier version")
        return _record(lines)
    except ValueError as error:
        return UnreadCable(mark=mark, reason=f"does not read: {error}")


def _record(lines: Lines) -> CableRecord:
    """Put a record together; ValueError where a line is not as it was written."""
    one = {key: _one(lines, key) for key in _ALWAYS}
    mark, status = _words(one["cable"], 2)
    weight = _floats(one["weight"][:1], 1)[0]
    return CableRecord(
        mark=mark,
        status=status,
        length_unit=_words(one["units"][:1], 1)[0],
        force_unit=_text(one["units"][1:]),
        rule=_rule(one["rule"]),
        under=_words(one["under"], 1)[0],
        level=_text(one["level"]),
        weight=weight,
        weight_case=_text(one["weight"][1:]),
        ea=_number(one["ea"]),
        alpha=_number(one["alpha"]),
        delta_t=_floats(one["delta-t"], 1)[0],
        datum=_number(one["datum"]),
        supports=tuple(_support(line) for line in lines.get("support", ())),
        loads=tuple(_load(_groups(line, 4)) for line in lines.get("load", ())),
        support_loads=tuple(_support_load(line) for line in lines.get("support-load", ())),
        pieces=tuple(_floats(_groups(line, 1)[0], 1)[0] for line in lines.get("piece", ())),
        heads=tuple(_head(line) for line in lines.get("head", ())),
        combos=tuple(_words(_groups(line, 1)[0], 1)[0] for line in lines.get("combo", ())),
        revisions=_revisions(lines) if "revisions" in lines else None,
        stated_rule=_rule(_one(lines, "stated-rule")) if "stated-rule" in lines else None,
        stated_under=_words(_one(lines, "stated-under"), 1)[0] if "stated-under" in lines else None,
    )


def _rule(words: Words) -> Rule:
    kind, value, text = _words(words[:3], 3)
    place = _floats(words[3:], 2) if words[3:] else None
    point = (place[0], place[1]) if place else None
    return Rule(kind=RuleKind(kind), value=float(value), point=point, text=text)


def _support(line: Line) -> RecordedSupport:
    (words,) = _groups(line, 1)
    x, y, formed_x, formed_y = _floats(words[1:], 4)
    mark = unescape(words[0])
    return RecordedSupport(mark=mark, x=x, y=y, formed=(formed_x, formed_y))


def _load(line: Line) -> RecordedLoad:
    words, *cases = line
    mark, x, y, source = _words(words, 4)
    used, drawn, formed = (_cases(group) for group in cases)
    return RecordedLoad(
        mark=mark,
        x=float(x),
        y=float(y),
        cases=used,
        drawn=drawn,
        formed=formed,
        source=source,
    )


def _support_load(line: Line) -> tuple[str, RecordedLoad]:
    *load, name = _groups(line, 5)
    # No letters at all are an empty name.
    return _words(name or ("",), 1)[0], _load(tuple(load))


def _head(line: Line) -> RecordedHead:
    words, *stays = line
    x, y, foot_x, foot_y, length = _floats(words[1:6], 5)
    return RecordedHead(
        support=unescape(words[0]),
        head=(x, y),
        mast_foot=(foot_x, foot_y),
        mast_length=length,
        mast_ea=_number(words[6:]),
        stays=tuple(_stay(stay) for stay in stays),
    )


def _stay(words: Words) -> RecordedStay:
    x, y, length, ea = _floats(words, 4)
    return RecordedStay(foot=(x, y), length=length, ea=ea)


def _revisions(lines: Lines) -> CableRevisions:
    rows, changes = [], []
    for line in lines.get("revision", ()):
        number, rev, description, by, date = _words(_groups(line, 1)[0], 5)
        rows.append(
            RevisionRow(number=int(number), rev=rev, description=description, by=by, date=date)
        )
    for line in lines.get("change", ()):
        (words,) = _groups(line, 1)
        x, y, dx, dy = _floats(words[1:], 4)
        changes.append(PointChange(mark=unescape(words[0]), at=(x, y), dx=dx, dy=dy))
    profiles = [_groups(line, 1)[0] for line in lines.get("old", ())]
    flat = [_floats(words, len(words)) for words in profiles]
    return CableRevisions(
        cable=_words(_one(lines, "revisions"), 1)[0],
        rows=tuple(rows),
        old=tuple(tuple(zip(xy[::2], xy[1::2], strict=True)) for xy in flat),
        changes=tuple(changes),
    )


def _one(lines: Lines, key: str) -> Words:
    """Read the values of a line that stands there once."""
    return _groups(lines[key][0], 1)[0]


def _groups(line: Line, count: int) -> Line:
    """Check how many groups a line has."""
    if len(line) != count:
        msg = f"a line has {len(line)} groups of values instead of {count}"
        raise ValueError(msg)
    return line


def _words(words: Words, count: int) -> Words:
    """Read so many texts."""
    if len(words) != count:
        msg = f"a line has {len(words)} values instead of {count}"
        raise ValueError(msg)
    return tuple(unescape(word) for word in words)


def _floats(words: Words, count: int) -> tuple[float, ...]:
    """Read so many numbers."""
    return tuple(float(word) for word in _words(words, count))


def _text(words: Words) -> str | None:
    """Read a text that may be absent."""
    return _words(words, 1)[0] if words else None


def _number(words: Words) -> float | None:
    """Read a number that may be absent."""
    return _floats(words, 1)[0] if words else None


def _cases(words: Words) -> Cases:
    """Read cases and their values by turns."""
    values = _floats(words[1::2], len(words) // 2)
    return tuple(zip((unescape(case) for case in words[::2]), values, strict=True))
