"""Every tag of a DXF file, found a megabyte at a time.

A DXF file is a list of pairs of lines: a group code, then its value. Lines are cut and codes
are read for a whole block of bytes at once, which is exact and costs about as much as a
pattern search. `plain_pairs` does the same for short ranges, one pair after the other.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, NamedTuple, TypeAlias

import numpy as np

from dxfcable.drawing.bytes.growing import Growing

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from numpy.typing import NDArray

CHUNK = 1 << 20
_BLANK = b" \t\r"
_NAME_WIDTH = 16
_ROWS = 1 << 14  # at a time, so that masks stay small
_LF, _PLUS, _MINUS = 10, 43, 45
_DIGITS = 9
_SMALL = 1 << 31
_MIXER = np.uint64(0x9E3779B97F4A7C15)  # odd, so that no bit of a string is lost
_HIGHEST_CODE = 1071
_IS_BLANK = np.zeros(256, np.bool_)
_IS_BLANK[[9, 13, 32]] = True


# Offsets of 32 bits where the file is small enough: half the memory for all tags of a drawing.
Offsets: TypeAlias = "NDArray[np.signedinteger]"


class Pair(NamedTuple):
    """One tag: code, value without blanks around the code and the line end, and its bytes."""

    code: int
    value: bytes
    start: int  # first byte of the code line
    end: int  # after the line end of the value


@dataclass(frozen=True, slots=True, eq=False)
class Tags:
    """Tags of chosen codes, in file order.

    Attributes
    ----------
    codes : (k,) array of int
        Group codes.
    starts : (k,) array of int
        First byte of each code line.
    values, ends : (k,) array of int
        First byte of each value, and the byte after its last (line end excluded).
    stop : int
        Where reading ended: after the value line of EOF, or the end of the range.
    fault : int or None
        Start of the first code line that is no integer; tags after it are missing.
    """

    codes: Offsets
    starts: Offsets
    values: Offsets
    ends: Offsets
    stop: int
    fault: int | None

    def some(self, which: NDArray[np.intp]) -> Tags:
        """Return some of the tags."""
        return Tags(
            self.codes[which],
            self.starts[which],
            self.values[which],
            self.ends[which],
            self.stop,
            self.fault,
        )


def skip_prologue(data: bytes) -> int:
    """Return where the first tag begins, behind a byte-order mark and blank lines."""
    at = 3 if data.startswith(b"\xef\xbb\xbf") else 0
    while True:
        end = data.find(b"\n", at)
        if end < 0 or data[at:end].strip():
            return at
        at = end + 1


def find_tags(data: bytes, wanted: Iterable[int], start: int, end: int | None = None) -> Tags:
    """Find all tags of the wanted codes between two bytes that both begin a tag.

    Parameters
    ----------
    data : bytes
        The file.
    wanted : iterable of int
        Group codes to report; 0 is needed to stop at EOF.
    start, end : int
        Range; `end` None reads up to the first EOF, or to the end of the file.

    Returns
    -------
    Tags
        With `fault` set where a line stands that should be a code and is not.
    """
    view = np.frombuffer(data, np.uint8)
    limit = len(data) if end is None else end
    is_wanted = np.zeros(_HIGHEST_CODE + 2, np.bool_)
    is_wanted[list(wanted)] = True
    parts = _Parts(np.int32 if limit < _SMALL else np.int64)
    at, size, fault = start, CHUNK, None
    while at < limit and fault is None:
        lines = _lines(view, at, min(at + size, limit), limit, len(data))
        if lines is None:
            if at + size >= limit:
                break  # a last line without a partner, e.g. blanks at the end
            size *= 2
            continue
        begins, stops, at = lines
        codes, good = _integers(view, begins[::2], stops[::2])
        if not good.all():
            first = int(np.argmin(good))
            fault = int(begins[2 * first])
            begins, stops, codes = begins[: 2 * first], stops[: 2 * first], codes[:first]
        hit = np.flatnonzero(is_wanted[np.clip(codes, -1, _HIGHEST_CODE + 1)])
        values, ends = _trim(view, begins[1::2][hit], stops[1::2][hit])
        found = codes[hit]
        if end is None and (cut := _eof(data, found, values, ends)) is not None:
            at = int(stops[1::2][hit[cut]]) + 1
            last = cut + 1
            parts.add(found[:last], begins[::2][hit][:last], values[:last], ends[:last])
            return parts.joined(min(at, len(data)), None)
        parts.add(found, begins[::2][hit], values, ends)
        size = CHUNK
    return parts.joined(at, fault)


def names(data: bytes, tags: Tags, which: NDArray[np.intp]) -> NDArray[np.bytes_]:
    """Return the values of some tags as fixed-width byte strings, cut after 16 bytes."""
    return texts(data, tags.values[which], tags.ends[which], _NAME_WIDTH)


def texts(data: bytes, starts: Offsets, ends: Offsets, width: int) -> NDArray[np.bytes_]:
    """Return byte ranges as an array of strings of at most `width` bytes."""
    result = np.zeros((starts.size, width), np.uint8)
    view = np.frombuffer(data, np.uint8)
    last = view.size - width
    # Whole rows are copied where they fit before the end of the file; the rest one by one.
    if last >= 0:
        windows = np.lib.stride_tricks.sliding_window_view(view, width)
        for k in range(0, starts.size, _ROWS):
            part = starts[k : k + _ROWS]
            result[k : k + _ROWS] = windows[np.minimum(part, last)]
    lengths = np.minimum(ends - starts, width)
    for at_end in np.flatnonzero(starts > max(last, -1)):
        raw = data[starts[at_end] : ends[at_end]][:width]
        result[at_end] = 0
        result[at_end, : len(raw)] = np.frombuffer(raw, np.uint8)
    columns = np.arange(width, dtype=np.int64)
    for k in range(0, starts.size, _ROWS):
        result[k : k + _ROWS][columns >= lengths[k : k + _ROWS, None]] = 0
    flat: NDArray[np.bytes_] = result.view(f"S{width}").reshape(-1)
    return flat


def distinct(rows: NDArray[np.bytes_]) -> tuple[NDArray[np.intp], NDArray[np.intp]]:
    """Group equal strings without sorting them as strings.

    Returns
    -------
    tuple of arrays
        Index of one string of each group, and the group of each string.
    """
    width = rows.dtype.itemsize
    words = rows.view(np.uint8).reshape(-1, width)
    sums = np.zeros(rows.size, np.uint64)
    for k in range(0, width, 8):
        piece = np.ascontiguousarray(words[:, k : k + 8]).view(np.uint64).reshape(-1)
        sums = (sums ^ piece) * _MIXER
        sums ^= sums >> np.uint64(29)
    _, first, group = np.unique(sums, return_index=True, return_inverse=True)
    ones = rows[first]
    blocks = (slice(k, k + _ROWS) for k in range(0, rows.size, _ROWS))
    if not all((ones[group[block]] == rows[block]).all() for block in blocks):
        # Two strings share a sum: sort after all.
        _, first, group = np.unique(rows, return_index=True, return_inverse=True)
    return first, group


def plain_pairs(data: bytes, start: int, end: int) -> Iterator[Pair]:
    """Yield the tags of a short range one after the other.

    Raises
    ------
    ValueError
        With the byte offset as second argument, where a code is no integer.
    """
    at = start
    while at < end:
        code_end = data.find(b"\n", at, end)
        if code_end < 0 or code_end + 1 >= end:
            if data[at:end].strip():
                msg = "a group code without a value"
                raise ValueError(msg, at)
            return
        value_end = data.find(b"\n", code_end + 1, end)
        after = value_end + 1 if value_end >= 0 else end
        value_stop = value_end if value_end >= 0 else end
        text = data[at:code_end].strip(_BLANK)
        digits = text[1:] if text[:1] in (b"+", b"-") else text
        if not digits.isdigit():
            msg = "not a group code"
            raise ValueError(msg, at)
        yield Pair(int(text), data[code_end + 1 : value_stop].rstrip(b"\r"), at, after)
        at = after


def _lines(
    view: NDArray[np.uint8], at: int, upto: int, limit: int, size: int
) -> tuple[NDArray[np.int64], NDArray[np.int64], int] | None:
    """Cut an even number of whole lines; None where the range holds less than two."""
    stops = np.flatnonzero(view[at:upto] == _LF) + at
    if upto == limit and limit == size and (not stops.size or stops[-1] != size - 1):
        stops = np.append(stops, size)  # a last line without its line end
    count = stops.size - stops.size % 2
    if count == 0:
        return None
    stops = stops[:count].astype(np.int64)
    begins = np.empty_like(stops)
    begins[0] = at
    begins[1:] = stops[:-1] + 1
    return begins, stops, int(stops[-1]) + 1


def _integers(
    view: NDArray[np.uint8], begins: NDArray[np.int64], stops: NDArray[np.int64]
) -> tuple[NDArray[np.int64], NDArray[np.bool_]]:
    """Read lines as integers of up to nine digits; the second array says which are."""
    begins, stops = _trim(view, begins, stops)
    first = view[np.minimum(begins, view.size - 1)]
    is_minus = first == _MINUS
    has_sign = (is_minus | (first == _PLUS)) & (stops - begins > 1)
    if has_sign.any():
        begins = begins + has_sign
    width = stops - begins
    good = (width > 0) & (width <= _DIGITS)
    value = np.zeros(begins.size, np.int64)
    last = view.size - 1
    for k in range(min(int(width.max(initial=0)), _DIGITS)):
        has = width > k
        digit = view[np.minimum(begins + k, last)] - np.uint8(
            48
        )  # wraps round: 10 and more is no digit
        good &= ~has | (digit <= 9)
        value = np.where(has, value * 10 + digit, value)
    return np.where(is_minus & has_sign, -value, value), good


def _trim(
    view: NDArray[np.uint8], begins: NDArray[np.int64], stops: NDArray[np.int64]
) -> tuple[NDArray[np.int64], NDArray[np.int64]]:
    """Take blanks off both ends of lines."""
    begins, stops = begins.copy(), stops.copy()
    last = view.size - 1
    todo = np.flatnonzero(_IS_BLANK[view[np.maximum(stops - 1, 0)]] & (stops > begins))
    while todo.size:
        stops[todo] -= 1
        left = stops[todo]
        todo = todo[_IS_BLANK[view[np.maximum(left - 1, 0)]] & (left > begins[todo])]
    todo = np.flatnonzero(_IS_BLANK[view[np.minimum(begins, last)]] & (begins < stops))
    while todo.size:
        begins[todo] += 1
        right = begins[todo]
        todo = todo[_IS_BLANK[view[np.minimum(right, last)]] & (right < stops[todo])]
    return begins, stops


def _eof(
    data: bytes, codes: NDArray[np.int64], values: NDArray[np.int64], ends: NDArray[np.int64]
) -> int | None:
    """Return which tag is the first EOF, if any."""
    for k in np.flatnonzero((codes == 0) & (ends - values == 3)):
        if data[values[k] : ends[k]].upper() == b"EOF":
            return int(k)
    return None


class _Parts:
    """Tags block by block."""

    def __init__(self, kind: type[np.signedinteger]) -> None:
        kinds: tuple[type[np.signedinteger], ...] = (np.int16, kind, kind, kind)
        self._columns = [Growing(one) for one in kinds]

    def add(self, *found: NDArray[np.int64]) -> None:
        """Add codes, starts, values and ends of one block."""
        for column, part in zip(self._columns, found, strict=True):
            column.add(part)

    def joined(self, stop: int, fault: int | None) -> Tags:
        """Return all tags."""
        codes, starts, values, ends = (column.taken() for column in self._columns)
        return Tags(codes, starts, values, ends, stop, fault)
