"""Tags, and how a program might write them down."""

from __future__ import annotations

import enum
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import random
    from collections.abc import Iterable

Value = str | bytes
Tag = tuple[int, Value]
Tags = list[Tag]

VERSIONS = (
    "", "AC1006", "AC1009", "AC1012", "AC1014", "AC1015", "AC1018",
    "AC1021", "AC1024", "AC1027", "AC1032",
)  # fmt: skip
HAS_SUBCLASSES = "AC1012"
HAS_LWPOLYLINE = "AC1014"
HAS_LINEWEIGHT = "AC1015"
IS_UTF8 = "AC1021"


class Codes(enum.StrEnum):
    """How group codes are written."""

    PADDED = "padded"
    UNPADDED = "unpadded"
    MIXED = "mixed"
    ODD = "odd"  # 00, +0, wide


def is_modern(version: str) -> bool:
    """Whether the version has subclass markers, owners and objects."""
    return version >= HAS_SUBCLASSES


@dataclass(frozen=True, slots=True, kw_only=True)
class Style:
    """The habits of one program: line end, group codes, comments, code page."""

    newline: bytes = b"\n"
    codes: Codes = Codes.PADDED
    comments: bool = False
    mixed_newlines: bool = False
    utf8: bool = False

    def encode(self, value: Value) -> bytes:
        """Return a value in the code page of the drawing."""
        if isinstance(value, bytes):
            return value
        return value.encode("utf-8" if self.utf8 else "cp1252")


COMMENTS = (b"a note", b"0", b"  0", b"EOF", b"ENDSEC", b"", b"SECTION", b"5", b"  8")


def code_text(code: int, style: Style, rng: random.Random) -> bytes:
    """Write one group code."""
    kind = style.codes
    if kind is Codes.MIXED:
        kind = rng.choice((Codes.PADDED, Codes.UNPADDED))
    if kind is Codes.PADDED:
        return b"%3d" % code
    if kind is Codes.UNPADDED:
        return b"%d" % code
    forms = (b"%d", b"%02d", b"+%d", b" %d", b"%6d", b"%d ", b"\t%d")
    return rng.choice(forms) % code


def render(tags: Iterable[Tag], style: Style, rng: random.Random) -> bytes:
    """Write tags as bytes, comments strewn between them where the style has them."""
    lines: list[bytes] = []

    def put(code: int, value: bytes) -> None:
        newline = style.newline
        if style.mixed_newlines:
            newline = rng.choice((b"\n", b"\r\n"))
        lines.append(code_text(code, style, rng) + newline + value + newline)

    for code, value in tags:
        put(code, style.encode(value))
        if style.comments and rng.random() < 0.08:
            put(999, rng.choice(COMMENTS))
    return b"".join(lines)


def number(value: float) -> str:
    """Write a number as most programs do."""
    return repr(float(value))


def odd_number(value: float, rng: random.Random) -> str:
    """Write a number as some programs do; every form reads back as a number."""
    forms = (
        f"{value:.20f}", f"{value:.16E}", f"{value:.1e}", f"{value:g}", f"{value:.0f}",
        f"{value:+.4f}", f"  {value:.3f}", f"{value:.3f}  ", f"{value:.0f}.",
    )  # fmt: skip
    return rng.choice(forms)
