"""Which of many states governs."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.statics.envelopes import governing

NAN = math.nan


def test_each_quantity_has_the_state_of_its_largest_and_its_least_value() -> None:
    most, least = governing([[1.0, 9.0, -4.0], [3.0, 8.0, -5.0], [2.0, 7.0, -3.0]])
    assert (most.tolist(), least.tolist()) == ([1, 0, 2], [0, 2, 1])


def test_a_state_without_a_value_never_governs() -> None:
    most, least = governing([[NAN, NAN], [3.0, NAN], [2.0, NAN]])
    assert (most.tolist(), least.tolist()) == ([1, -1], [2, -1])


def test_rounding_does_not_choose_between_equal_states() -> None:
    most, least = governing([[100.0, -1.0], [100.0 + 1e-12, -1.0 - 1e-12]])
    assert (most.tolist(), least.tolist()) == ([0, 0], [0, 0])
    assert governing([[100.0], [100.0 + 1e-6]])[0].tolist() == [1]


def test_no_state_and_no_quantity_govern_nothing() -> None:
    assert governing(np.empty((0, 2)))[0].tolist() == [-1, -1]
    assert governing(np.empty((3, 0)))[1].tolist() == []


@pytest.mark.parametrize("values", [[1.0, 2.0], [[math.inf]]])
def test_what_is_no_table_of_numbers_is_refused(values: object) -> None:
    with pytest.raises(ValueError, match="table"):
        governing(np.array(values))


@given(st.lists(st.lists(st.integers(-50, 50), min_size=3, max_size=3), min_size=1, max_size=6))
def test_nothing_lies_outside_the_envelope(rows: list[list[int]]) -> None:
    table = np.array(rows, dtype=np.float64)
    most, least = governing(table)
    assert np.array_equal(table[most, range(3)], table.max(axis=0))
    assert np.array_equal(table[least, range(3)], table.min(axis=0))
    mirrored = governing(-table)
    assert mirrored[0].tolist() == least.tolist()
