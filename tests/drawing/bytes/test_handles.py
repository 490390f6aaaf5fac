"""New handles stand nowhere else in the drawing."""

from __future__ import annotations

import pytest

from dxfcable.drawing.bytes.handles import Allotter
from dxfcable.drawing.bytes.scan import scan


def _drawing(seed: str, *handles: str) -> bytes:
    points = "".join(f"  0\nPOINT\n  5\n{h}\n  8\n0\n" for h in handles)
    return (
        f"  0\nSECTION\n  2\nHEADER\n  9\n$HANDSEED\n  5\n{seed}\n  0\nENDSEC\n"
        f"  0\nSECTION\n  2\nENTITIES\n{points}  0\nENDSEC\n  0\nEOF\n"
    ).encode("ascii")


@pytest.mark.parametrize(
    ("seed", "handles", "first"),
    [
        ("30", ["2A"], "30"),
        ("30", ["9f"], "A0"),  # a seed that is too low
        ("zz", ["10"], "11"),  # a seed that is no number
        ("FFFF", ["10"], "FFFF"),
    ],
)
def test_handles_rise_from_seed_and_greatest(seed: str, handles: list[str], first: str) -> None:
    allot = Allotter(scan(_drawing(seed, *handles)))
    assert allot() == first
    assert allot.seed == f"{int(first, 16) + 1:X}"


def test_at_the_end_of_the_range_handles_come_from_gaps() -> None:
    allot = Allotter(scan(_drawing("FFFFFFFFFFFFFFFF", "FFFFFFFFFFFFFFFE", "FFFFFFFFFFFFFFFC")))
    assert [allot(), allot()] == ["FFFFFFFFFFFFFFFD", "FFFFFFFFFFFFFFFB"]
    assert allot.seed is None


def test_handles_promised_to_others_are_left_alone() -> None:
    allot = Allotter(scan(_drawing("10", "F")), frozenset({0x10, 0x20}))
    assert allot() == "21"
