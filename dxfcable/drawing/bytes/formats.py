"""What looks like a drawing and is no ASCII DXF."""

from __future__ import annotations

from dxfcable.errors import DrawingError

BINARY_SENTINEL = b"AutoCAD Binary DXF"


def refuse_other_formats(data: bytes) -> None:
    """Refuse what is no ASCII DXF, saying how to save it.

    Raises
    ------
    DrawingError
        Naming what it is.
    """
    remedy = "Save it from the CAD program as ASCII DXF, release 12 or later."
    if data.startswith(BINARY_SENTINEL):
        msg = "line 1: this is a binary DXF"
        raise DrawingError(msg, code="binary-dxf", line=1, remedy=remedy)
    if data[:6].startswith(b"AC1") and data[3:6].isdigit():
        msg = "line 1: this is a DWG drawing, not a DXF"
        raise DrawingError(msg, code="dwg", line=1, remedy=remedy)
    if data[:2] in (b"\xff\xfe", b"\xfe\xff"):
        msg = "line 1: this file is UTF-16"
        raise DrawingError(msg, code="utf-16", line=1, remedy=remedy)
    if not data or data.isspace():
        msg = "line 1: the file is empty"
        raise DrawingError(msg, code="not-dxf", line=1, remedy=remedy)
    head = data[: 1 << 16]
    if b"\n" not in head and b"\r" in head:
        msg = "line 1: lines end with a carriage return only"
        raise DrawingError(
            msg,
            code="carriage-returns",
            line=1,
            remedy="Save it with line feeds (LF or CRLF).",
        )
