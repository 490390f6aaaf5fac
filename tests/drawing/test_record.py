"""The record comes back whole from either of its copies, or not at all."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing import record
from dxfcable.drawing.record import FileFacts, Memory
from dxfcable.drawing.whole import Whole
from dxfcable.errors import DrawingError

_NAMES = st.text(min_size=1, max_size=12)
_FLOATS = st.floats(allow_nan=False, allow_infinity=False)
_POINTS = st.tuples(_FLOATS, _FLOATS)


@given(st.text(max_size=40))
def test_any_text_survives_in_letters_that_no_program_changes(text: str) -> None:
    written = record.escape(text)
    assert record.unescape(written) == text
    assert written.isascii()
    assert not any(mark in written for mark in ("^", "%", "\\", ";", ",", " ", "\n"))


@given(st.text("ab0.,;=", min_size=1, max_size=60), st.integers(0, 700))
def test_a_record_joins_again_from_its_parts_in_any_order(unit: str, times: int) -> None:
    text = unit * times
    parts = record.parts(text)
    assert all(len(line) < 250 for part in parts for line in part)
    assert all(sum(map(len, part)) < 12_000 for part in parts)
    assert record.join([*reversed(parts), *parts]) == [text]


@given(st.text("abcdef", min_size=1, max_size=600), st.data())
def test_one_spoiled_copy_does_no_harm(text: str, data: st.DataObject) -> None:
    parts = record.parts(text)
    k = data.draw(st.integers(0, len(parts) - 1))
    spoiled = [list(part) for part in parts]
    spoiled[k][1] = spoiled[k][1][:-1] + "#"
    assert record.join([*spoiled, *parts]) == [text]
    assert record.join([*parts[:k], *parts[k + 1 :], *spoiled]) == []


@given(
    st.dictionaries(_NAMES, _POINTS, max_size=4),
    st.dictionaries(_NAMES, st.text(max_size=20), max_size=4),
    st.lists(_NAMES, max_size=4, unique=True),
    st.none() | st.tuples(st.just("2F"), st.just("40")),
    st.none() | st.tuples(st.integers(0, 9999), st.integers(0, 2**32 - 1)),
)
def test_what_concerns_the_file_reads_back_exactly(
    places: dict[str, tuple[float, float]],
    texts: dict[str, str],
    opened: list[str],
    seed: tuple[str, str] | None,
    sums: tuple[int, int] | None,
) -> None:
    facts = FileFacts(
        seed=seed,
        opened=tuple(opened),
        memory=Memory(places=places, texts=texts),
        origins=tuple(places.items()),
        whole=Whole(
            count=sums[0], total=sums[1], parts=tuple((part, k) for k, part in enumerate(places))
        )
        if sums
        else None,
    )
    assert record.read_facts([record.facts_text(facts)]) == facts


def test_a_record_of_a_later_format_is_refused() -> None:
    parts = record.parts("cable,C1,formed")
    parts[0][0] = parts[0][0].replace(f"={record.FORMAT}/", f"={record.FORMAT + 1}/")
    with pytest.raises(DrawingError, match="later version") as refused:
        record.join(parts)
    assert refused.value.code == "newer-record"
