"""A plain pair parser: exact, simple and slow, the judge of everything faster.

A DXF file is a list of pairs of lines, a group code and its value. It is taken as it stands;
tolerated are only a byte-order mark, blank lines before the first pair, and any text after
the first EOF.
"""

from __future__ import annotations

import itertools
from typing import NamedTuple

BOM = b"\xef\xbb\xbf"
GROUP_ENDS = {b"POLYLINE": b"SEQEND", b"INSERT": b"SEQEND"}
_MEMBERS = (b"VERTEX", b"ATTRIB", b"SEQEND")


class Pair(NamedTuple):
    """One tag; the value as its line stands, without the line end; lines count from 1."""

    code: int
    value: bytes
    line: int


class Token(NamedTuple):
    """A pair with its bytes: the code line begins at `start`, the value at `value_start`."""

    code: int
    value: bytes
    line: int
    start: int
    value_start: int
    value_end: int
    end: int

    @property
    def name(self) -> bytes:
        """The value without blanks about it, for comparing names."""
        return self.value.strip()


class Record(NamedTuple):
    """From the code 0 of one record to that of the next."""

    start: int
    end: int
    type: bytes


def _line_end(data: bytes, at: int) -> tuple[int, int]:
    """Return where the text of a line ends, and where the next line begins."""
    feed = data.find(b"\n", at)
    if feed < 0:
        return len(data), len(data)
    stop = feed
    while stop > at and data[stop - 1 : stop] == b"\r":
        stop -= 1
    return stop, feed + 1


def tokens(data: bytes) -> list[Token]:
    """Split a drawing into its pairs, up to and with the first EOF.

    Raises
    ------
    ValueError
        With the number of the line that is no group code, or where the file ends too soon.
    """
    at = len(BOM) if data.startswith(BOM) else 0
    line, found = 1, []
    while at < len(data):
        stop, after = _line_end(data, at)
        if data[at:stop].strip():
            break
        at, line = after, line + 1
    while at < len(data):
        stop, value_at = _line_end(data, at)
        try:
            code = int(data[at:stop].decode("ascii"))
        except ValueError:
            message = f"line {line}: {data[at : min(stop, at + 40)]!r} is no group code"
            raise ValueError(message) from None
        if value_at >= len(data) and not data.endswith(b"\n"):
            message = f"line {line}: group code {code} has no value"
            raise ValueError(message)
        value_stop, after = _line_end(data, value_at)
        token = Token(code, data[value_at:value_stop], line, at, value_at, value_stop, after)
        found.append(token)
        if code == 0 and token.name == b"EOF":
            return found
        at, line = after, line + 2
    message = f"line {line}: the file ends without EOF"
    raise ValueError(message)


def pairs(data: bytes) -> list[Pair]:
    """Return code, value and line of every pair; see `tokens` for what is tolerated."""
    return [Pair(t.code, t.value, t.line) for t in tokens(data)]


def records_of(found: list[Token]) -> list[Record]:
    """Return the records of tokens; what precedes the first code 0 belongs to none."""
    heads = [t for t in found if t.code == 0]
    ends = [t.start for t in heads[1:]] + [found[-1].end]
    return [Record(t.start, end, t.name) for t, end in zip(heads, ends, strict=True)]


def records(data: bytes) -> list[Record]:
    """Return the byte range and the type of every record, EOF included."""
    return records_of(tokens(data))


class Entity(NamedTuple):
    """An entity with its vertices or attributes: tokens [first, stop) of the list."""

    first: int
    stop: int
    section: bytes
    type: bytes


def section_of_tokens(found: list[Token]) -> list[bytes]:
    """Return for each token the name of the section that it lies in, b"" between sections."""
    names, current = [], b""
    for k, token in enumerate(found):
        if token.code == 0 and token.name == b"SECTION":
            following = next((t for t in found[k + 1 :] if t.code != 999), None)
            current = following.name if following is not None and following.code == 2 else b""
        names.append(current)
        if token.code == 0 and token.name == b"ENDSEC":
            current = b""
    return names


def entities(found: list[Token], section: bytes = b"ENTITIES") -> list[Entity]:
    """Return the entities of one section, POLYLINE and INSERT with all that belongs to them."""
    names = section_of_tokens(found)
    heads = [
        k
        for k, t in enumerate(found)
        if t.code == 0 and names[k] == section and t.name != b"SECTION"
    ]
    result: list[Entity] = []
    for first, stop in itertools.pairwise(heads):
        kind = found[first].name
        if kind in _MEMBERS and result:
            result[-1] = result[-1]._replace(stop=stop)
        else:
            result.append(Entity(first, stop, section, kind))
    return result


def is_handle(found: list[Token], names: list[bytes]) -> list[bool]:
    """Say for each token whether it states the handle of a record: 5, or 105 of a DIMSTYLE.

    A record states one handle, and before its XDATA; 5 of a DIMSTYLE is a block's name.
    """
    result, kind, is_open = [], b"", False
    for token, section in zip(found, names, strict=True):
        if token.code == 0:
            kind, is_open = token.name, section in (b"TABLES", b"BLOCKS", b"ENTITIES", b"OBJECTS")
        elif token.code >= 1000:
            is_open = False
        states = is_open and token.code == (105 if kind == b"DIMSTYLE" else 5)
        result.append(states)
        if states:
            is_open = False
    return result


def header_value(found: list[Token], name: bytes) -> Token | None:
    """Return the token that holds a header variable's value."""
    for k, token in enumerate(found):
        if token.code == 9 and token.name == name:
            return next((t for t in found[k + 1 :] if t.code != 999), None)
    return None


def version_of(found: list[Token]) -> str:
    """Return $ACADVER as written, or an empty string."""
    token = header_value(found, b"$ACADVER")
    return token.name.decode("ascii", "replace") if token is not None else ""


def model_space_owner(found: list[Token]) -> bytes | None:
    """Return the handle of the BLOCK_RECORD *Model_Space, None where there is none."""
    for record in _groups(found):
        if record[0].name != b"BLOCK_RECORD":
            continue
        if any(t.code == 2 and t.name.upper() == b"*MODEL_SPACE" for t in record):
            return next((t.name for t in record if t.code == 5), None)
    return None


def _groups(found: list[Token]) -> list[list[Token]]:
    """Split tokens at each code 0."""
    heads = [k for k, t in enumerate(found) if t.code == 0]
    stops = [*heads[1:], len(found)]
    return [found[a:b] for a, b in zip(heads, stops, strict=True)]


def rewrite(data: bytes, changes: dict[int, bytes], found: list[Token]) -> bytes:
    """Put new values into tokens, by their index; every other byte stays."""
    parts, at = [], 0
    for k in sorted(changes):
        token = found[k]
        parts += [data[at : token.value_start], changes[k]]
        at = token.value_end
    return b"".join([*parts, data[at:]])
