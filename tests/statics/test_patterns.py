"""Loads in part of the span, and many combinations at once."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.statics.combinations import Combination, CombinationError, combine
from dxfcable.statics.expansion import expand
from dxfcable.statics.patterns import (
    PATTERNS,
    case_factors,
    combine_states,
    factors,
    pattern_names,
    pattern_shares,
    weight_factor,
)

CASES = ["D", "L", "S", "W", "T"]
EIGHTHS = np.arange(1, 8) / 8.0

shares_along = st.lists(
    st.integers(0, 400).map(lambda n: n / 400.0), min_size=1, max_size=12, unique=True
).map(sorted)
spans = st.tuples(st.floats(-1e4, 1e4), st.floats(1.0, 1e3)).map(lambda s: (s[0], s[0] + s[1]))


def one(text: str) -> Combination:
    (found,) = expand(text, CASES)
    return found


@pytest.mark.parametrize(
    ("pattern", "shares"),
    [
        ("", [1, 1, 1, 1, 1, 1, 1]),
        ("left half", [1, 1, 1, 0.5, 0, 0, 0]),
        ("right half", [0, 0, 0, 0.5, 1, 1, 1]),
        ("middle half", [0, 0.5, 1, 1, 1, 0.5, 0]),
        ("end quarters", [1, 0.5, 0, 0, 0, 0.5, 1]),
        ("odd points", [1, 0, 1, 0, 1, 0, 1]),
        ("even points", [0, 1, 0, 1, 0, 1, 0]),
    ],
)
def test_a_point_in_a_pattern_takes_all_and_one_on_its_boundary_half(
    pattern: str, shares: list[float]
) -> None:
    assert pattern_shares(pattern, 20.0 + 16.0 * EIGHTHS, 20.0, 36.0).tolist() == shares


def test_a_boundary_is_as_wide_as_rounding_and_no_wider() -> None:
    x = [50.0 * (1 - 1e-8), 50.0 * (1 - 1e-10), 50.0 * (1 + 1e-10), 50.0 * (1 + 1e-8)]
    assert pattern_shares("left half", x, 0.0, 100.0).tolist() == [1.0, 0.5, 0.5, 0.0]


def test_a_support_is_no_boundary() -> None:
    ends = [0.0, 10.0]
    assert pattern_shares("left half", ends, 0.0, 10.0).tolist() == [1.0, 0.0]
    assert pattern_shares("end quarters", ends, 0.0, 10.0).tolist() == [1.0, 1.0]


@given(along=shares_along, span=spans)
def test_patterns_that_share_a_span_add_up_to_the_full_load(
    along: list[float], span: tuple[float, float]
) -> None:
    x = np.minimum(span[0] + (span[1] - span[0]) * np.array(along), span[1])
    for first, second in zip(PATTERNS[::2], PATTERNS[1::2], strict=True):
        shares = pattern_shares(first, x, *span), pattern_shares(second, x, *span)
        assert np.all(shares[0] + shares[1] == 1.0), (first, second)
        assert set(np.concatenate(shares)) <= {0.0, 0.5, 1.0}


@given(along=shares_along, span=spans)
def test_a_pattern_moves_and_grows_with_its_span(
    along: list[float], span: tuple[float, float]
) -> None:
    x = np.minimum(span[0] + (span[1] - span[0]) * np.array(along), span[1])
    for pattern in PATTERNS:
        here = pattern_shares(pattern, x, *span)
        assert np.array_equal(here, pattern_shares(pattern, along, 0.0, 1.0)), pattern


@given(along=shares_along)
def test_left_and_right_are_mirror_images(along: list[float]) -> None:
    x = np.array(along)
    mirrored = pattern_shares("right half", (1.0 - x)[::-1], 0.0, 1.0)[::-1]
    assert np.array_equal(pattern_shares("left half", x, 0.0, 1.0), mirrored)


@pytest.mark.parametrize(
    ("x", "span", "why"),
    [
        ([[1.0]], (0.0, 10.0), "row of stations"),
        ([3.0, 2.0], (0.0, 10.0), "from left to right"),
        ([-1.0], (0.0, 10.0), "between x0 and x1"),
        ([11.0], (0.0, 10.0), "between x0 and x1"),
        ([float("nan")], (0.0, 10.0), "finite"),
        ([], (10.0, 10.0), "x0 less than x1"),
    ],
)
def test_stations_out_of_order_are_refused(x: object, span: tuple[float, float], why: str) -> None:
    with pytest.raises(ValueError, match=why):
        pattern_shares("left half", np.array(x), *span)


def test_a_pattern_of_no_such_name_is_refused() -> None:
    with pytest.raises(ValueError, match="no pattern is called third"):
        pattern_shares("third", [1.0], 0.0, 10.0)
    with pytest.raises(CombinationError, match="patterns are left half"):
        pattern_names("left half or third")


def test_names_of_patterns_read_without_regard_to_case_and_blanks() -> None:
    assert pattern_names("  Left   HALF ") == ("left half",)
    assert pattern_names("central half or middle half") == ("middle half",)
    assert pattern_names("checkerboard") == ("odd points", "even points")
    assert pattern_names("each pattern") == ("", *PATTERNS)


def test_each_term_has_its_factor_at_each_point() -> None:
    found = factors(one("1.2D + 1.6L [left half] - W"), [2.0, 5.0, 8.0], 0.0, 10.0)
    assert found.tolist() == [[1.2, 1.6, -1.0], [1.2, 0.8, -1.0], [1.2, 0.0, -1.0]]


POINTS = [
    [("D", 10.0), ("L", 4.0)],
    [("D", 12.0), ("L", 8.0), ("W", -3.0)],
    [("D", 1.0), ("D", 2.0)],
]


def test_all_combinations_are_combined_at_once() -> None:
    texts = ["D", "1.2D + 1.6L", "D + L [left half] + 0.5L [right half]", "0.9D - W", "S + T"]
    known = [one(text) if "T" not in text else expand(text, CASES)[0] for text in texts]
    loads = combine_states(POINTS, [2.0, 5.0, 8.0], (0.0, 10.0), known)
    expected = np.array(
        [[10, 12, 3], [18.4, 27.2, 3.6], [14, 18, 3], [9, 13.8, 2.7], [0, 0, 0]], np.float64
    )
    np.testing.assert_allclose(loads, expected, rtol=1e-14)


def test_no_point_and_no_combination_give_an_empty_table() -> None:
    assert combine_states([], [], (0.0, 1.0), [one("D")]).shape == (1, 0)
    assert combine_states(POINTS, [2.0, 5.0, 8.0], (0.0, 10.0), []).shape == (0, 3)


def test_points_and_stations_that_differ_and_endless_values_are_refused() -> None:
    with pytest.raises(ValueError, match="3 points and 2 stations"):
        combine_states(POINTS, [2.0, 5.0], (0.0, 10.0), [one("D")])
    with pytest.raises(ValueError, match="case D must be finite"):
        combine_states([[("D", float("inf"))]], [2.0], (0.0, 10.0), [one("D")])


values = st.floats(-1e3, 1e3)
point_cases = st.lists(
    st.lists(st.tuples(st.sampled_from(["D", "L", "S"]), values), max_size=4),
    min_size=1,
    max_size=8,
)


@given(cases=point_cases, d=st.integers(0, 200), live=st.integers(0, 200))
def test_without_patterns_many_at_once_equal_one_by_one(
    cases: list[list[tuple[str, float]]], d: int, live: int
) -> None:
    x = np.arange(1.0, len(cases) + 1.0)
    known = expand(f"{d / 100:.2f}D +- {live / 100:.2f}(L or S)", CASES)
    loads = combine_states(cases, x, (0.0, len(cases) + 1.0), known)
    for row, combination in zip(loads, known, strict=True):
        np.testing.assert_allclose(row, combine(cases, combination), rtol=1e-12, atol=1e-9)


@given(cases=point_cases, first=st.sampled_from(PATTERNS[::2]))
def test_a_pattern_and_its_rest_load_the_cable_as_the_whole_does(
    cases: list[list[tuple[str, float]]], first: str
) -> None:
    rest = PATTERNS[PATTERNS.index(first) + 1]
    x, span = np.arange(1.0, len(cases) + 1.0), (0.0, len(cases) + 1.0)
    known = [one(f"L [{first}]"), one(f"L [{rest}]"), one("L"), one(f"L [{first}] + L [{rest}]")]
    part, other, whole, both = combine_states(cases, x, span, known)
    np.testing.assert_allclose(part + other, whole, rtol=1e-12, atol=1e-9)
    np.testing.assert_allclose(both, whole, rtol=1e-12, atol=1e-9)


@given(cases=point_cases, scale=st.integers(-10, 10))
def test_combined_loads_scale_with_the_loads(
    cases: list[list[tuple[str, float]]], scale: int
) -> None:
    x, span = np.arange(1.0, len(cases) + 1.0), (0.0, len(cases) + 1.0)
    scaled = [[(case, 2.0**scale * value) for case, value in point] for point in cases]
    known = expand("1.2D + 1.6(L or S) [each pattern]", CASES)
    loads, larger = (combine_states(c, x, span, known) for c in (cases, scaled))
    np.testing.assert_allclose(larger, 2.0**scale * loads, rtol=1e-12, atol=1e-300)


def test_a_load_in_parts_of_the_span_is_never_combined_without_stations() -> None:
    with pytest.raises(ValueError, match="combine it with stations"):
        combine(POINTS, one("D + L [left half]"))


@pytest.mark.parametrize(
    ("text", "both", "left", "right"),
    [
        ("D + L", 1.0, 1.0, 1.0),
        ("D + L [left half]", 1.0, 1.0, 0.0),
        ("D - 2L [right half]", -2.0, 0.0, -2.0),
        ("D + L [middle half]", 1.0, 0.0, 0.0),
        ("D + L [end quarters]", 1.0, 1.0, 1.0),
        ("D + L [odd points]", 1.0, 1.0, 1.0),
        ("D + L [left half] + 0.5L [right half]", 1.0, 1.0, 0.5),
        ("D + L + 0.5L [left half]", 1.5, 1.5, 1.0),
        ("D - L [left half] + 0.5L [right half]", -1.0, -1.0, 0.5),
    ],
)
def test_a_load_at_a_support_is_in_the_patterns_that_reach_its_side(
    text: str, both: float, left: float, right: float
) -> None:
    combination = one(text)
    sides = [case_factors(combination, side) for side in (None, "left", "right")]
    assert [found["L"] for found in sides] == [both, left, right]
    assert [list(found) for found in sides] == [["D", "L"]] * 3
    with pytest.raises(ValueError, match="side"):
        case_factors(combination, "middle")


def test_the_cables_own_weight_takes_the_factor_of_its_case() -> None:
    assert weight_factor(one("1.2D + 1.6L [left half]"), "D") == 1.2
    assert weight_factor(one("0.9D - W"), "W") == -1.0
    assert weight_factor(one("L"), "D") == 0.0


@pytest.mark.parametrize("text", ["D [left half] + L", "D + 0.2D [odd points]"])
def test_the_cables_own_weight_cannot_be_in_part_of_the_span(text: str) -> None:
    with pytest.raises(CombinationError, match=r"own weight belongs to D: it cannot be in part"):
        weight_factor(one(text), "D")
