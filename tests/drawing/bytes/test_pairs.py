"""Every tag is found where a plain pair parser finds it."""

from __future__ import annotations

import contextlib

from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing.bytes import pairs
from dxfcable.drawing.bytes.pairs import find_tags, plain_pairs, skip_prologue

_CODES = st.sampled_from([0, 2, 5, 8, 10, 62, 105, 330, 999, 1000, 1001, 1071])
_STYLES = st.sampled_from(["{}", " {}", "  {}", "{} ", "00{}", "+{}", "\t{}", "   {}  "])
_VALUES = st.text("0 EOFabc8.-+", max_size=9) | st.sampled_from(["0", "  0", "EOF", "", "8", "-5"])


@st.composite
def files(draw: st.DrawFn) -> bytes:
    newline = draw(st.sampled_from(["\n", "\r\n"]))
    tags = draw(st.lists(st.tuples(_CODES, _STYLES, _VALUES), max_size=30))
    lines = [part for code, style, value in tags for part in (style.format(code), value)]
    text = newline.join(lines)
    if draw(st.booleans()) and lines:
        text += newline
    return text.encode("ascii")


@given(files(), st.sampled_from([3, 17, 1 << 20]))
def test_all_tags_are_those_of_the_plain_parser(data: bytes, chunk: int) -> None:
    start = skip_prologue(data)
    old, pairs.CHUNK = pairs.CHUNK, chunk
    try:
        found = find_tags(data, (0, 2, 5, 8, 10, 62, 105, 330, 999, 1000, 1001, 1071), start)
    finally:
        pairs.CHUNK = old
    expected = []
    with contextlib.suppress(ValueError):  # the file may end after a code
        for pair in plain_pairs(data, start, len(data)):
            expected.append((pair.code, pair.start, pair.value.strip(b" \t\r")))
            if expected[-1][::2] == (0, b"EOF"):
                break
    values = [data[a:b] for a, b in zip(found.values, found.ends, strict=True)]
    got = list(zip(found.codes.tolist(), found.starts.tolist(), values, strict=True))
    assert found.fault is None
    assert got == expected


def test_a_line_that_is_no_code_is_named_by_its_byte() -> None:
    data = b"  0\nLINE\n  8\nWALL\nhello\n0.0\n  0\nEOF\n"
    found = find_tags(data, (0, 8), 0)
    assert found.fault == data.index(b"hello")
    assert found.codes.tolist() == [0, 8]


def test_reading_stops_at_the_first_end_of_file() -> None:
    data = b"  0\nEOF\n  0\nLINE\n"
    found = find_tags(data, (0,), 0)
    assert found.codes.tolist() == [0]
    assert found.stop == len(b"  0\nEOF\n")


def test_a_byte_order_mark_and_blank_lines_come_before_the_first_tag() -> None:
    assert skip_prologue(b"\xef\xbb\xbf\n \r\n  0\nSECTION\n") == 7
