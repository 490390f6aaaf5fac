"""Single linear combinations of load cases."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.errors import DxfcableError
from dxfcable.statics.combinations import (
    AlternativesError,
    CombinationError,
    assumed_level,
    combine,
    default_under,
    parse,
)

CASES = ["D", "L", "Lr", "S", "W", "E", "G"]
ALIASES = {"DL": "D", "SDL": "D", "LL": "L"}


@pytest.mark.parametrize(
    ("text", "terms"),
    [
        ("D", (("D", 1.0),)),
        ("D + L", (("D", 1.0), ("L", 1.0))),
        ("1.2D + 1.6L", (("D", 1.2), ("L", 1.6))),
        ("1.2D+1.6Lr", (("D", 1.2), ("Lr", 1.6))),
        (" 0.9 D - W ", (("D", 0.9), ("W", -1.0))),
        ("-W", (("W", -1.0),)),
        ("1.2*D + .5 * S", (("D", 1.2), ("S", 0.5))),
        ("1.2D + 1E", (("D", 1.2), ("E", 1.0))),
        ("0D + 2.L", (("D", 0.0), ("L", 2.0))),
        ("DL + 0.75LL", (("D", 1.0), ("L", 0.75))),
    ],
)
def test_a_linear_combination_is_read_in_the_order_typed(
    text: str, terms: tuple[tuple[str, float], ...]
) -> None:
    assert parse(text, CASES, aliases=ALIASES).terms == terms


@pytest.mark.parametrize(
    ("text", "level"),
    [
        ("D", "service"),
        ("D + L", "service"),
        ("D + 0.75L", "service"),
        ("0.6D + 0.6W", "service"),
        ("1.2D + 1.6L", "factored"),
        ("D + 1.01L", "factored"),
        ("0.9D", "factored"),
        ("D + W", "factored"),
        ("0.6D - E", "factored"),
        ("L + W", "service"),
        ("G + W", "service"),
    ],
)
def test_a_level_that_nobody_states_is_assumed_from_the_factors(text: str, level: str) -> None:
    combination = parse(text, CASES)
    assert (combination.level, combination.level_is_assumed) == (level, True)


def test_a_prefix_states_the_level_and_is_not_part_of_the_text() -> None:
    combination = parse("service: D + 0.75L", CASES)
    assert (combination.level, combination.level_is_assumed) == ("service", False)
    assert combination.text == "D + 0.75L"
    assert parse("Factored : D", CASES).level == "factored"


def test_a_standards_level_is_stated_and_a_prefix_wins_over_it() -> None:
    assert not parse("D + W", CASES, level="service").level_is_assumed
    assert parse("factored: D", CASES, level="service").level == "factored"
    with pytest.raises(ValueError, match="level"):
        parse("D", CASES, level="ultimate")


@pytest.mark.parametrize(
    "text",
    ["1.2D + 1.6(Lr or S)", "D or L", "D +- W", "D + - W", "D ± W", "D +/- W", "D + L [left half]"],
)
def test_alternatives_are_refused_as_belonging_to_checking(text: str) -> None:
    with pytest.raises(AlternativesError, match="alternatives belong to checking"):
        parse(text, CASES)


@pytest.mark.parametrize(
    "text", ["", "  ", "+", "1.2", "D L", "D ++ L", "1,2D", "1.2.3D", "D + (L)", "D +", "D = 3"]
)
def test_what_is_no_combination_is_refused_in_one_sentence(text: str) -> None:
    with pytest.raises(CombinationError, match="is not a combination"):
        parse(text, CASES)


@pytest.mark.parametrize("text", ["X", "d", "1.2D + 1.6LR", "load"])
def test_a_case_that_no_load_carries_is_named_with_the_cases_there_are(text: str) -> None:
    with pytest.raises(CombinationError, match=r"which no load carries; cases here: D, L, Lr"):
        parse(text, CASES)


def test_an_alias_never_hides_a_case_of_its_own_name() -> None:
    assert parse("DL", ["D", "DL"], aliases=ALIASES).terms == (("DL", 1.0),)


def test_an_alias_of_a_case_that_no_load_carries_is_refused() -> None:
    with pytest.raises(CombinationError, match="names case LL"):
        parse("LL", ["D"], aliases=ALIASES)


def test_a_combination_to_form_under_is_of_the_whole_span() -> None:
    combination = parse("1.2D + 1.6L", CASES)
    assert combination.patterns == ()
    assert combination.placed_terms == (("D", 1.2, ""), ("L", 1.6, ""))


def test_a_level_counts_every_term_of_a_case_in_several_places() -> None:
    assert assumed_level([("D", 1.0), ("L", 1.6), ("L", 0.5)]) == "factored"
    assert assumed_level([("D", 0.9), ("D", 0.5)]) == "factored"


@pytest.mark.parametrize("text", ["D + 0.2D", "1.2DL + 1.2SDL"])
def test_a_case_named_twice_is_refused_since_its_loads_would_count_twice(text: str) -> None:
    with pytest.raises(CombinationError, match="names case D twice"):
        parse(text, CASES, aliases=ALIASES)


def test_a_user_meets_these_errors_as_bad_input() -> None:
    assert issubclass(AlternativesError, CombinationError)
    assert issubclass(CombinationError, DxfcableError)
    assert issubclass(CombinationError, ValueError)


@given(
    values=st.lists(st.tuples(st.floats(-1e3, 1e3), st.floats(-1e3, 1e3)), min_size=1, max_size=9),
    factors=st.tuples(st.integers(0, 200), st.integers(0, 200)),
)
def test_loads_combine_linearly(
    values: list[tuple[float, float]], factors: tuple[int, int]
) -> None:
    dead, live = (factor / 100 for factor in factors)
    points = [[("D", d), ("L", live_load)] for d, live_load in values]
    combined = combine(points, parse(f"{dead:.2f}D - {live:.2f}L", CASES))
    expected = dead * np.array([v[0] for v in values]) - live * np.array([v[1] for v in values])
    np.testing.assert_allclose(combined, expected, rtol=1e-12, atol=1e-9)


def test_a_case_that_a_point_lacks_counts_as_zero_and_two_of_one_case_add() -> None:
    points = [[("D", 10.0), ("D", 2.0)], [("L", 4.0)], []]
    assert combine(points, parse("D + 2L", CASES)).tolist() == [12.0, 8.0, 0.0]
    assert combine([], parse("D", CASES)).shape == (0,)


@pytest.mark.parametrize(
    ("cases", "chosen"),
    [
        (["load", "load"], "load"),
        (["S"], "S"),
        (["L", "D", "G"], "D"),
        (["L", "G"], "G"),
        (["L", "S"], None),
        ([], None),
    ],
)
def test_a_cable_that_does_not_say_is_formed_under_its_dead_case(
    cases: list[str], chosen: str | None
) -> None:
    assert default_under(cases) == chosen
