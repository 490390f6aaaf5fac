"""From a cable as formed to the length it is cut to: hand values, laws, the published crossing.

The crossing of nine equal loads is OWN (computed independently, with its digits as printed:
length 123.0976, unstressed 122.6121, stretch 0.4855). The relation L0 = L / (1 + T / EA) is
derived (OWN); that the shop measures under a stated tension and deducts its fittings is common
practice.
"""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.model import RuleKind
from dxfcable.statics.cut_lengths import (
    at_tension,
    between_pins,
    cut_length,
    running_marks,
    unstressed,
)
from dxfcable.statics.forming import form

LAST = 0.6  # of the last printed digit
LENGTH = st.floats(0.01, 1e4)
FORCE = st.floats(0.0, 1e4)
EA = st.one_of(st.none(), st.floats(1e4, 1e7))


def test_the_crossing_of_nine_loads_has_its_published_lengths() -> None:
    """OWN: length 123.0976 ft, unstressed 122.6121 ft."""
    x = [12.0 * k for k in range(11)]
    shape = form(x, [10.0] * 9, 0.0, 0.0, RuleKind.SAG, 12.0, ea=32_400.0)
    tensions = shape.tensions_left.tolist()
    pieces = [
        unstressed(length, tension, 32_400.0)
        for length, tension in zip(shape.lengths.tolist(), tensions, strict=True)
    ]
    assert math.fsum(shape.lengths.tolist()) == pytest.approx(123.0976, abs=LAST * 1e-4)
    assert running_marks(pieces)[-1] == pytest.approx(122.6121, abs=LAST * 1e-4)
    assert running_marks(pieces)[-1] == pytest.approx(shape.unstressed_length, rel=1e-14)


def test_a_bar_of_ten_under_a_thousandth_of_its_stiffness_is_longer_by_a_hundredth() -> None:
    assert at_tension(10.0, 9.0, 9000.0) == pytest.approx(10.01, rel=1e-15)
    assert unstressed(10.01, 9.0, 9000.0) == pytest.approx(10.0, rel=1e-15)


@settings(max_examples=80, deadline=None)
@given(LENGTH, FORCE, EA)
def test_measuring_undoes_relaxing(length: float, tension: float, ea: float | None) -> None:
    assert at_tension(unstressed(length, tension, ea), tension, ea) == pytest.approx(
        length, rel=1e-14
    )


def test_a_slack_member_and_one_that_does_not_stretch_keep_their_length() -> None:
    assert unstressed(5.0, -3.0, 100.0) == 5.0
    assert unstressed(5.0, 0.0, 100.0) == 5.0
    assert at_tension(5.0, 70.0, None) == 5.0


def test_pins_take_off_what_cable_would_have_stood_there() -> None:
    """By hand: 0.5 m under 100 kN at EA 10000 kN replaces 0.5 / 1.01 m of unstressed cable."""
    pieces = between_pins([5.0, 6.0, 5.0], (0.5, 0.2), (100.0, 200.0), 10_000.0)
    assert pieces.tolist() == pytest.approx([5.0 - 0.5 / 1.01, 6.0, 5.0 - 0.2 / 1.02], rel=1e-15)


def test_one_piece_has_both_pins() -> None:
    assert between_pins([10.0], (0.5, 0.25), (1.0, 1.0), None).tolist() == [9.25]


@settings(max_examples=60, deadline=None)
@given(st.lists(st.floats(1.0, 50.0), min_size=1, max_size=12), FORCE, st.floats(1e4, 1e7))
def test_pins_on_a_straight_cable_leave_the_rest_of_it(
    pieces: list[float], tension: float, ea: float
) -> None:
    """As it stands, pin to pin is the whole length less the two offsets."""
    kept = between_pins(pieces, (0.25, 0.125), (tension, tension), ea)
    standing = at_tension(math.fsum(kept.tolist()), tension, ea)
    whole = at_tension(math.fsum(pieces), tension, ea)
    assert standing == pytest.approx(whole - 0.375, rel=1e-12)


@settings(max_examples=60, deadline=None)
@given(st.lists(LENGTH, min_size=1, max_size=40))
def test_marks_grow_by_the_pieces_and_end_at_their_sum(pieces: list[float]) -> None:
    marks = running_marks(pieces)
    assert marks[-1] == math.fsum(pieces)
    assert np.diff([0.0, *marks]) == pytest.approx(pieces, rel=1e-9, abs=1e-10)


def test_the_cut_length_is_pin_to_pin_less_faces_plus_what_the_sockets_hold() -> None:
    assert cut_length(20.0, (0.5, 0.75), (0.25, 0.125)) == 19.125


def test_rope_that_settles_is_cut_shorter_so_that_it_is_right_afterwards() -> None:
    cut = cut_length(20.0, (0.5, 0.5), (0.25, 0.25), 0.002)
    assert cut * 1.002 == pytest.approx(19.5, rel=1e-15)


@settings(max_examples=60, deadline=None)
@given(st.floats(5.0, 500.0), st.floats(0.0, 2.0), st.floats(0.0, 1.0), st.floats(0.0, 2.0))
def test_deductions_at_either_end_are_worth_the_same(
    length: float, face: float, embedment: float, other: float
) -> None:
    one = cut_length(length, (face, other), (embedment, 0.0))
    assert one == pytest.approx(cut_length(length, (other, face), (0.0, embedment)), rel=1e-14)


@pytest.mark.parametrize(
    ("call", "words"),
    [
        (lambda: cut_length(1.0, (0.6, 0.4), (0.2, 0.2)), "no rope is left"),
        (lambda: cut_length(1.0, (-0.1, 0.0), (0.0, 0.0)), "zero or more"),
        (lambda: cut_length(1.0, (0.1, 0.0), (0.0, math.nan)), "finite"),
        (lambda: between_pins([1.0, 5.0], (1.0, 0.0), (0.0, 0.0), None), "whole piece"),
        (lambda: between_pins([1.0, 5.0], (-0.1, 0.0), (0.0, 0.0), None), "zero or more"),
        (lambda: between_pins([], (0.0, 0.0), (0.0, 0.0), None), "shape"),
        (lambda: between_pins([math.inf], (0.0, 0.0), (0.0, 0.0), None), "finite"),
        (lambda: unstressed(1.0, 1.0, 0.0), "ea must be a positive"),
        (lambda: at_tension(math.nan, 1.0, None), "finite"),
    ],
)
def test_what_cannot_be_cut_is_refused(call: object, words: str) -> None:
    assert callable(call)
    with pytest.raises(ValueError, match=words):
        call()
