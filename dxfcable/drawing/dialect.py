"""How tags are written for one file: its release, its line ends, and numbers as text."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from dxfcable.drawing.bytes.decode import is_release

APPID = "DXFCABLE"
Tag = tuple[int, str | int | float]
_R13, _R14, _R2000 = "AC1012", "AC1014", "AC1015"


@dataclass(frozen=True, slots=True)
class Dialect:
    """What a release of the format wants.

    Attributes
    ----------
    release : str
        The file's own $ACADVER where it is R12 or later, else R12's.
    encoding : str
        Python's name of the file's codec.
    is_assumed : bool
        The file states none, or one before R12: it is written as R12.
    """

    release: str
    encoding: str
    is_assumed: bool

    @property
    def has_subclasses(self) -> bool:
        """Subclass markers, group code 100."""
        return self.release >= _R13

    @property
    def has_light_polylines(self) -> bool:
        """LWPOLYLINE."""
        return self.release >= _R14

    @property
    def has_owners(self) -> bool:
        """Owner handles 330 and line weights 370."""
        return self.release >= _R2000


def dialect(version: str, encoding: str) -> Dialect:
    """Choose the dialect for a $ACADVER."""
    if is_release(version) and version >= "AC1009":
        return Dialect(version, encoding, is_assumed=False)
    return Dialect("AC1009", encoding, is_assumed=True)


def number(value: float) -> str:
    """Write a number so that it reads back exactly, without an exponent or a negative zero."""
    value = float(value)
    if value == 0.0:
        return "0.0"
    text = repr(value)
    if "e" in text:
        text = np.format_float_positional(value, trim="0")
    return text


def encode(tags: list[Tag], newline: bytes, encoding: str = "ascii") -> bytes:
    """Write tags, group codes padded to three places.

    All text of ours is ASCII; only a layer's name in the drafter's own spelling needs `encoding`.
    """
    lines = []
    for code, value in tags:
        text = number(value) if isinstance(value, float) else str(value)
        raw = text.encode(encoding, errors="surrogateescape")
        lines.append(f"{code:3d}".encode("ascii") + newline + raw + newline)
    return b"".join(lines)
