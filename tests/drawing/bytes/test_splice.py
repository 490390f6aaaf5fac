"""Bytes that are not named stay where they were."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing.bytes.splice import Change, apply, line_end_of


@given(st.binary(max_size=60), st.lists(st.tuples(st.integers(0, 60), st.binary(max_size=5))))
def test_what_is_inserted_can_be_taken_out_again(
    data: bytes, inserts: list[tuple[int, bytes]]
) -> None:
    places = {min(at, len(data)): new for at, new in inserts}
    grown = apply(data, [Change(at, at, new) for at, new in places.items()])
    shift, undo = 0, []
    for at, new in sorted(places.items()):
        undo.append(Change(at + shift, at + shift + len(new)))
        shift += len(new)
    assert apply(grown, undo) == data


def test_overlapping_changes_are_a_fault() -> None:
    with pytest.raises(ValueError, match="overlap"):
        apply(b"0123456789", [Change(2, 6), Change(4, 8)])


@pytest.mark.parametrize(
    ("data", "end"), [(b"  0\nA\n", b"\n"), (b"  0\r\nA\r\n", b"\r\n"), (b"A", b"\n")]
)
def test_an_insertion_takes_the_line_end_of_its_line(data: bytes, end: bytes) -> None:
    assert line_end_of(data, 0) == end
