"""What is no drawing is refused with its line; what is one is cut into its records."""

from __future__ import annotations

import pytest

from dxfcable.drawing.bytes.scan import scan
from dxfcable.errors import DrawingError

_LINES = (
    *[
        "0",
        "SECTION",
        "2",
        "HEADER",
        "9",
        "$ACADVER",
        "1",
        "AC1015",
        "9",
        "$HANDSEED",
        "5",
        "2B",
        "0",
        "ENDSEC",
    ],
    *["0", "SECTION", "2", "ENTITIES", "0", "POLYLINE", "5", "2A", "8", "WALL", "70", "0"],
    *["0", "VERTEX", "5", "1c", "8", "WALL", "0", "SEQEND", "8", "WALL", "0", "POINT", "8", "0"],
    *["0", "ENDSEC", "0", "EOF"],
)
SMALL = "".join(f"{line}\n" for line in _LINES).encode("ascii")


def test_an_entity_reaches_to_the_end_of_its_vertices() -> None:
    drawing = scan(SMALL)
    start, end = drawing.entity_span(int(drawing.heads[0]))
    assert SMALL[start:end].startswith(b"0\nPOLYLINE")
    assert SMALL[start:end].endswith(b"SEQEND\n8\nWALL\n")
    assert len(drawing.heads) == 2


def test_a_value_of_zero_is_no_record() -> None:
    kinds = [bytes(k) for k in scan(SMALL).kinds]
    assert kinds.count(b"POINT") == 1
    assert len(kinds) == 9


def test_handles_are_read_in_any_case() -> None:
    assert sorted(scan(SMALL).handles.tolist()) == [0x1C, 0x2A]
    assert scan(SMALL).has_handles


def test_header_variables_keep_their_raw_values() -> None:
    assert scan(SMALL).version == "AC1015"
    assert scan(SMALL).header_value("$HANDSEED") == b"2B"


@pytest.mark.parametrize(
    ("data", "code", "line"),
    [
        (b"AutoCAD Binary DXF\r\n\x1a\x00", "binary-dxf", 1),
        (b"AC1032\x00\x00\x00", "dwg", 1),
        (b"\xff\xfe0\x00", "utf-16", 1),
        (b"", "not-dxf", 1),
        (b"just a letter\nto somebody\n", "not-dxf", 1),
        (SMALL.replace(b"\n", b"\r"), "carriage-returns", 1),
        (SMALL[: SMALL.index(b"0\nEOF")], "cut-off", 42),
        (SMALL[: SMALL.index(b"0\nPOINT")], "cut-off", 36),
        (SMALL.replace(b"ENTITIES", b"entities"), "lower-case", 15),
        (SMALL.replace(b"SECTION", b"section"), "lower-case", 1),
        (SMALL.replace(b"HEADER", b"ENTITIES"), "structure", 15),
        (SMALL.replace(b"0\nENDSEC\n0\nSECTION", b"0\nSECTION", 1), "structure", 13),
    ],
)
def test_what_cannot_be_read_is_refused_with_its_line(data: bytes, code: str, line: int) -> None:
    with pytest.raises(DrawingError) as refused:
        scan(data)
    assert refused.value.code == code
    assert refused.value.line == line
    assert refused.value.remedy


def test_reading_goes_on_at_the_next_record_after_lines_that_do_not_pair() -> None:
    data = SMALL.replace(b"8\nWALL\n70\n0\n", b"8\nWALL\n70\n0\nstray\n")
    drawing = scan(data)
    assert drawing.damaged == (data.index(b"stray"),)
    assert len(drawing.heads) == 2
