"""Texts that stand for several combinations."""

from __future__ import annotations

from decimal import Decimal
from math import prod

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.statics.combinations import CombinationError, parse
from dxfcable.statics.expansion import MOST, expand, expand_listed
from dxfcable.statics.patterns import PATTERNS

CASES = ["D", "L", "Lr", "S", "R", "W", "E", "T"]
STILL = [case for case in CASES if case != "T"]


def texts(text: str) -> list[str]:
    return [one.text for one in expand(text, CASES)]


@pytest.mark.parametrize(
    ("text", "alternatives"),
    [
        ("1.2D + 1.6(Lr or S)", ["1.2D + 1.6Lr", "1.2D + 1.6S"]),
        ("D + (L or S) + (W or E)", ["D + L + W", "D + L + E", "D + S + W", "D + S + E"]),
        ("1.2D + (L or 0.5W)", ["1.2D + L", "1.2D + 0.5W"]),
        ("1.2D + (L OR S)", ["1.2D + L", "1.2D + S"]),
        ("D+1.6 * ( L or 2*S )", ["D + 1.6L", "D + 3.2S"]),
        ("(D + L or D + S)", ["D + L", "D + S"]),
        ("D + (L + W or S - W)", ["D + L + W", "D + S - W"]),
        ("D + 2((L or S) or W)", ["D + 2L", "D + 2S", "D + 2W"]),
        ("D - (L or S)", ["D - L", "D - S"]),
        ("D + (L or L)", ["D + L"]),
    ],
)
def test_a_choice_in_brackets_gives_its_alternatives_in_the_order_typed(
    text: str, alternatives: list[str]
) -> None:
    assert texts(text) == alternatives


@pytest.mark.parametrize(
    ("text", "written"),
    [
        ("0.75(0.6W)", "0.45W"),
        ("D + 0.75(L + S)", "D + 0.75L + 0.75S"),
        ("D - 0.5(L - S)", "D - 0.5L + 0.5S"),
        ("1.35(0.85(D + 2L))", "1.1475D + 2.295L"),
        ("1.50D + 1.50(L)", "1.50D + 1.50L"),
        ("1.50(1.0L)", "1.5L"),
        ("100(2.0L)", "200L"),
        ("0(1.6L) + D", "0L + D"),
        ("(D)", "D"),
        (".5(W)", ".5W"),
    ],
)
def test_brackets_without_a_choice_multiply_out_exactly(text: str, written: str) -> None:
    assert texts(text) == [written]


def test_a_product_is_the_decimal_number_and_not_the_nearest_sum_of_halves() -> None:
    assert 0.75 * 0.6 != 0.45
    assert expand("D + 0.75(0.6W)", CASES)[0].terms == (("D", 1.0), ("W", 0.45))


@pytest.mark.parametrize("text", ["1.2D+1.6L", "1.20D + 1.0W", "D  -  0.5 * L", "D + L[left half]"])
def test_a_text_that_is_one_combination_is_echoed_as_typed(text: str) -> None:
    assert texts(text) == [text]
    assert texts(f"service: {text} ") == [text]


@pytest.mark.parametrize("sign", ["+-", "+/-", "±", "+ -", "+ / -"])
def test_both_signs_give_two(sign: str) -> None:
    assert texts(f"0.9D {sign} W") == ["0.9D + W", "0.9D - W"]
    assert texts(f"{sign}W + D") == ["W + D", "-W + D"]
    assert texts(f"D + (L {sign} W)") == ["D + L + W", "D + L - W"]
    assert texts(f"D {sign} (W or E)") == ["D + W", "D + E", "D - W", "D - E"]


def test_both_signs_start_with_the_one_typed_first() -> None:
    assert texts("D -+ W") == texts("D -/+ W") == ["D - W", "D + W"]


@pytest.mark.parametrize(
    ("text", "alternatives"),
    [
        ("T", ["T", "-T"]),
        ("D + 0.6T", ["D + 0.6T", "D - 0.6T"]),
        ("D + 0.6(T or W)", ["D + 0.6T", "D - 0.6T", "D + 0.6W"]),
        ("D + 1.5(0.6T)", ["D + 0.9T", "D - 0.9T"]),
        ("D - 0.6T", ["D - 0.6T"]),
        ("D - (W + T)", ["D - W - T"]),
        ("D - (W - T)", ["D - W + T"]),
        ("D +- T", ["D + T", "D - T"]),
        ("D +- (T or W)", ["D + T", "D + W", "D - T", "D - W"]),
        ("D +- W + T", ["D + W + T", "D + W - T", "D - W + T", "D - W - T"]),
    ],
)
def test_a_temperature_acts_either_way_unless_its_sign_is_typed(
    text: str, alternatives: list[str]
) -> None:
    assert texts(text) == alternatives


def test_a_name_that_stands_for_the_temperature_acts_either_way_too() -> None:
    found = expand("D + TEMP", CASES, aliases={"TEMP": "T"})
    assert [one.terms[1] for one in found] == [("T", 1.0), ("T", -1.0)]
    assert [one.text for one in found] == ["D + TEMP", "D - TEMP"]


def test_names_are_echoed_as_typed_and_mean_the_case_they_stand_for() -> None:
    found = expand("1.2DL + 1.6(LL or S)", CASES, aliases={"DL": "D", "LL": "L"})
    assert [one.text for one in found] == ["1.2DL + 1.6LL", "1.2DL + 1.6S"]
    assert found[0].terms == (("D", 1.2), ("L", 1.6))


@pytest.mark.parametrize(
    ("text", "patterns"),
    [
        ("D + L [left half]", [("", "left half")]),
        ("D + L[ Central  HALF ]", [("", "middle half")]),
        ("D + (L + S) [end quarters]", [("", "end quarters", "end quarters")]),
        ("D + (L or S) [odd points]", [("", "odd points"), ("", "odd points")]),
        ("D + L [checkerboard]", [("", "odd points"), ("", "even points")]),
        ("D + L [right half or left half]", [("", "right half"), ("", "left half")]),
        ("D + L [each pattern]", [(), *(("", pattern) for pattern in PATTERNS)]),
        ("D + L [left half] + 0.5L [right half]", [("", "left half", "right half")]),
        ("D + L + 0.5L [left half]", [("", "", "left half")]),
        ("D + L", [()]),
    ],
)
def test_a_pattern_belongs_to_the_term_or_bracket_right_before_it(
    text: str, patterns: list[tuple[str, ...]]
) -> None:
    assert [one.patterns for one in expand(text, CASES)] == patterns


def test_a_pattern_stands_in_the_text_of_its_alternative() -> None:
    assert texts("0.9D + 0.5(L or S) [left half]") == [
        "0.9D + 0.5L [left half]",
        "0.9D + 0.5S [left half]",
    ]
    assert texts("D + L [each pattern]")[:2] == ["D + L", "D + L [left half]"]


def test_each_alternative_has_the_level_of_its_own_factors_unless_stated() -> None:
    assert [(one.level, one.level_is_assumed) for one in expand("D + (L or 1.6S or W)", CASES)] == [
        ("service", True),
        ("factored", True),
        ("factored", True),
    ]
    stated = expand("Service: D + (L or W)", CASES, level="factored")
    assert [(one.level, one.level_is_assumed) for one in stated] == [("service", False)] * 2
    assert [one.level for one in expand("D +- L", CASES, level="factored")] == ["factored"] * 2
    with pytest.raises(ValueError, match="level"):
        expand("D", CASES, level="ultimate")


def test_a_level_is_assumed_from_every_term_of_a_case_in_several_places() -> None:
    (one,) = expand("D + 1.6L [left half] + 0.5L [right half]", CASES)
    assert one.level == "factored"


@pytest.mark.parametrize(
    ("text", "place", "why"),
    [
        ("", "at its end", "a case or a bracket belongs here"),
        ("D +", "at its end", "a case or a bracket belongs here"),
        ("1.2", "at its end", "a case or a bracket belongs here"),
        ("D + (L or S", 'from "(L or S" on', "this bracket is not closed"),
        ("D + 2((L or S)", 'from "((L or S)" on', "this bracket is not closed"),
        ("D + L) + S", 'from ") + S" on', "no bracket is open here"),
        ("D + ()", 'from ")" on', "a case or a bracket belongs here"),
        ("D + (L or)", 'from ")" on', "a case or a bracket belongs here"),
        ("D + (or L)", 'from "or L)" on', "a case or a bracket belongs here"),
        ("D L", 'from "L" on', "a sign between terms"),
        ("D + (L S)", 'from "S)" on', "a sign between terms"),
        ("D + (L)(S)", 'from "(S)" on', "a sign between terms"),
        ("1,2D", 'from ",2D" on', "a case or a bracket belongs here"),
        ("strength: D", 'from ": D" on', "service or factored"),
        ("D + L [left", 'from "[left" on', "this square bracket is not closed"),
        ("D + L [left]", 'from "[left]" on', "patterns are left half, right half, middle half"),
        ("D + L []", 'from "[]" on', "patterns are left half"),
        ("D + L [left half] [right half]", 'from "L [left half] [right half]" on', "there are two"),
        ("D + (L [left half] + S) [right half]", 'from "(L [left half] + S', "there are two"),
        ("[left half] D", 'from "[left half] D" on', "a case or a bracket belongs here"),
        ("(" * 21 + "D" + ")" * 21, 'from "(D)', "more than 20 deep"),
    ],
)
def test_what_does_not_read_is_quoted_from_the_place_on(text: str, place: str, why: str) -> None:
    with pytest.raises(CombinationError) as refused:
        expand(text, CASES)
    assert place in str(refused.value)
    assert why in str(refused.value)


def test_alternatives_without_brackets_are_refused_with_the_remedy() -> None:
    with pytest.raises(CombinationError, match=r'from "or D \+ S" on: .*brackets.*--combo twice'):
        expand("D + L or D + S", CASES)


def test_a_case_that_no_load_carries_is_named_with_the_cases_there_are() -> None:
    with pytest.raises(CombinationError, match="names case S, which no load carries; cases here: "):
        expand("1.2D + 1.6(Lr or S)", ["D", "Lr"])


@pytest.mark.parametrize(
    "text",
    ["D + D", "D + 0.75L + (S or L)", "D + L [left half] + 2L [left half]", "D + 2(0.5D + L)"],
)
def test_a_case_twice_in_the_same_place_is_refused(text: str) -> None:
    with pytest.raises(CombinationError, match=r"names case [DL] twice"):
        expand(text, CASES)


@pytest.mark.parametrize("text", ["D + T [left half]", "D + (L + T) [each pattern]"])
def test_a_temperature_has_no_place_along_the_cable(text: str) -> None:
    with pytest.raises(CombinationError, match="T acts on the whole cable"):
        expand(text, CASES)


def test_a_factor_beyond_all_numbers_is_refused() -> None:
    with pytest.raises(CombinationError, match="no finite number"):
        expand("9" * 400 + "D", CASES)


def test_a_text_for_more_than_two_thousand_is_refused_before_it_is_expanded() -> None:
    names = [f"Q{number}" for number in range(40)]
    choice = f"({' or '.join(names[:20])})"
    at_most = f"{choice} + (D1 or D2 or D3 or D4 or D5) + {choice.replace('Q', 'P')}"
    known = names + [name.replace("Q", "P") for name in names] + [f"D{n}" for n in range(1, 6)]
    assert len(expand(at_most, known)) == MOST == 2000
    with pytest.raises(CombinationError, match="stands for 4000 combinations"):
        expand(f"{at_most} +- E", [*known, "E"])
    with pytest.raises(CombinationError, match="stands for 2401 combinations"):
        expand(" + ".join(f"{name} [each pattern]" for name in names[:4]), names)
    with pytest.raises(CombinationError, match="stands for 1099511627776 combinations"):
        expand(" ".join(f"+- {name}" for name in names), names)


def test_a_standards_list_leaves_out_the_cases_that_no_load_carries() -> None:
    text = "1.2D + 1.6(Lr or S or R) + (L or 0.5W)"
    found, dropped = expand_listed(text, ["D", "L", "S"], level="factored")
    assert [one.text for one in found] == ["1.2D + 1.6S + L"]
    assert dropped == ("Lr", "R", "W")
    assert (found[0].level, found[0].level_is_assumed) == ("factored", False)
    assert [one.text for one in expand_listed(text, ["D"])[0]] == ["1.2D"]
    assert expand_listed("W + E", ["D"]) == ((), ("W", "E"))
    assert expand_listed("1.2D+1.6LL", ["D", "L"], aliases={"LL": "L"})[0][0].text == "1.2D+1.6LL"


def test_a_standards_list_without_absent_cases_expands_like_a_typed_text() -> None:
    text = "1.2D + 1.0W + L + 0.5(Lr or S or R)"
    assert expand_listed(text, CASES) == (expand(text, CASES), ())


FACTORS = st.decimals(Decimal(0), Decimal(3), places=2).map(str) | st.just("")


@st.composite
def groups(draw: st.DrawFn) -> tuple[str, list[int]]:
    """A sum of D and brackets, no case twice, and the sizes of its brackets."""
    names = list(draw(st.permutations([f"Q{number}" for number in range(12)])))
    text = f"{draw(FACTORS)}D"
    sizes: list[int] = []
    while names and len(sizes) < 4:
        size = draw(st.integers(1, min(3, len(names))))
        members = " or ".join(f"{draw(FACTORS)}{names.pop()}" for _ in range(size))
        sign = draw(st.sampled_from(["+", "-", "+-"]))
        text += f" {sign} {draw(FACTORS)}({members})"
        sizes.append(2 * size if sign == "+-" else size)
    return text, sizes


@given(groups())
def test_several_alternatives_multiply_and_each_reads_back_as_itself(
    made: tuple[str, list[int]],
) -> None:
    text, sizes = made
    known = ["D", *(f"Q{number}" for number in range(12))]
    found = expand(text, known)
    assert len(found) == prod(sizes)
    assert [parse(one.text, known) for one in found] == list(found)
    assert all(expand(one.text, known) == (one,) for one in found)


@given(st.lists(st.sampled_from(STILL), min_size=1, unique=True), st.data())
def test_a_plain_text_expands_to_what_it_parses_to(cases: list[str], data: st.DataObject) -> None:
    signs = st.sampled_from(["+", "-"])
    text = " ".join(f"{data.draw(signs)} {data.draw(FACTORS)}{case}" for case in cases)
    assert expand(text, STILL) == (parse(text, STILL),)


@given(outer=FACTORS, inner=FACTORS)
def test_a_product_of_typed_factors_is_exact(outer: str, inner: str) -> None:
    (one,) = expand(f"{outer}({inner}W)", CASES)
    assert one.terms == (("W", float(Decimal(outer or 1) * Decimal(inner or 1))),)


@given(st.text(alphabet="DLS()[] or+-±/*.:12lefthalfT", max_size=30))
def test_whatever_is_typed_gives_combinations_or_one_sentence(text: str) -> None:
    try:
        found = expand(text, CASES)
    except CombinationError as error:
        sentence = str(error)
    else:
        sentence = "."
        assert found
        assert all(one.terms for one in found)
    assert sentence.endswith(".")
