"""Quantities as drafters write them, row by row of the trade's usual forms (common practice).

Exact definitions: pound-force 4.4482216152605 N, g 9.80665 m/s2, foot 0.3048 m, US survey
foot 1200/3937 m.
"""

from __future__ import annotations

import contextlib
import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.quantities import (
    FORCE_UNITS,
    INSUNITS,
    LENGTH_UNITS,
    QuantityError,
    Style,
    convert,
    format_elevation,
    format_force,
    format_length,
    looks_like_force,
    parse_expansion,
    parse_force,
    parse_length,
    parse_line_load,
    parse_load_text,
    parse_stiffness,
    parse_temperature_change,
    read_plot_scale,
)
from dxfcable.settings import Cases

US = Style(length_unit="ft")
SI = Style(length_unit="m")
COMMA = Style(length_unit="m", decimal_comma=True)


@pytest.mark.parametrize(
    ("source", "target", "value"),
    [
        ("ft", "m", 0.3048),
        ("in", "mm", 25.4),
        ("us-ft", "m", 1200 / 3937),
        ("ft", "in", 12.0),
        ("dm", "cm", 10.0),
        ("lb", "N", 4.4482216152605),
        ("kip", "lb", 1000.0),
        ("kgf", "N", 9.80665),
        ("MN", "kN", 1000.0),
    ],
)
def test_factors_between_units_are_the_defined_ones(source: str, target: str, value: float) -> None:
    assert convert(1.0, source, target) == value


def test_header_codes_name_the_units_of_the_dxf_reference() -> None:
    # $INSUNITS, DXF reference: 1 in, 2 ft, 4 mm, 5 cm, 6 m, 14 dm, 21 US survey ft.
    assert INSUNITS == {1: "in", 2: "ft", 4: "mm", 5: "cm", 6: "m", 14: "dm", 21: "us-ft"}


def test_a_length_does_not_convert_to_a_force() -> None:
    with pytest.raises(ValueError, match="'ft' and 'lb'"):
        convert(1.0, "ft", "lb")


@given(st.floats(-1e9, 1e9), st.sampled_from([LENGTH_UNITS, FORCE_UNITS]), st.data())
def test_conversion_there_and_back_keeps_the_value(
    value: float, units: tuple[str, ...], data: st.DataObject
) -> None:
    source, target = data.draw(st.sampled_from(units)), data.draw(st.sampled_from(units))
    back = convert(convert(value, source, target), target, source)
    assert math.isclose(back, value, rel_tol=1e-15, abs_tol=1e-300)


# The trade's table of load texts, row by row; its kN column has four digits.
@pytest.mark.parametrize(
    ("text", "style", "unit", "kilonewtons"),
    [
        ("18k", US, "kip", 80.07),
        ("18 K", US, "kip", 80.07),
        ("18.0 K", US, "kip", 80.07),
        ("18 kips", US, "kip", 80.07),
        ("18 KIPS", SI, "kip", 80.07),
        ("18kip", SI, "kip", 80.07),
        ("18000 lb", SI, "lb", 80.07),
        ("18,000#", US, "lb", 80.07),
        ("18000 lbf", US, "lb", 80.07),
        ("18 000 LBS", SI, "lb", 80.07),
        ("80.1kN", SI, "kN", 80.1),
        ("80,1 kN", COMMA, "kN", 80.1),
        ("0.0801 MN", SI, "MN", 80.1),
        ("80100 N", SI, "N", 80.1),
        ("8168 kgf", SI, "kgf", 80.1),
        ("18k DOWN", US, "kip", 80.07),
        ("18\u00a0000 lb", US, "lb", 80.07),
    ],
)
def test_a_force_is_read_with_its_unit(
    text: str, style: Style, unit: str, kilonewtons: float
) -> None:
    force = parse_force(text, style)
    assert force.unit == unit
    assert convert(force.value, unit, "kN") == pytest.approx(kilonewtons, abs=0.005)
    assert looks_like_force(text)


@pytest.mark.parametrize(
    ("text", "style", "code", "remedy"),
    [
        ("18k", SI, "load-unit-ambiguous", "Write kip or kN."),
        ("18,000 lb", SI, "number-ambiguous", "decimal point"),
        ("80,1 kN", SI, "number-ambiguous", "decimal_comma"),
        ("80,1 kN", US, "number-ambiguous", "decimal_comma"),
        ("18.000 kN", COMMA, "number-ambiguous", "comma"),
        ("8.2 t", SI, "load-unit-ambiguous", "Write kN or kip."),
        ("8.2 tf", SI, "load-unit-ambiguous", "Write kN or kip."),
        ("8.2 tonne", SI, "load-unit-ambiguous", "Write kN or kip."),
        ("8.2 T", US, "load-unit-ambiguous", "Write kN or kip."),
        ("8.2 ton", US, "load-unit-ambiguous", "Write kN or kip."),
        ("8168 kg", SI, "load-is-mass", "kgf"),
        ("18", US, "load-unit-missing", "--force-unit"),
        ("-18k", US, "load-sign", "upward_sign"),
        ("\u221218k", US, "load-sign", "upward_sign"),
        ("18k UP", US, "load-sign", "upward_sign"),
        ("(18k)", US, "load-sign", "brackets"),
        ("2.4 k/ft", US, "load-distributed", "at this point"),
        ("35 plf", US, "load-distributed", "at this point"),
        ("20 psf", US, "load-distributed", "at this point"),
        ("1.2 kPa", SI, "load-distributed", "at this point"),
        ("10/14", US, "load-cases-unlabelled", "D=10k L=14k"),
        ("10k/14k", US, "load-cases-unlabelled", "D=10k L=14k"),
        ("18k (ULS)", US, "load-level", "case letter"),
        ("18k TYP.", US, "load-repeated", "its own point"),
        ("18k U.N.O.", US, "load-repeated", "its own point"),
        ("2@18k", US, "load-repeated", "its own point"),
        ("2 x 18k", US, "load-repeated", "its own point"),
        ("18k EA", US, "load-repeated", "its own point"),
        ("l2k", US, "load-typo", "digits"),
        ("1O k", US, "load-typo", "digits"),
        ("1 1/2 k", US, "number-ambiguous", "decimals"),
        ("18 daN", SI, "load-unit-unknown", "80.1 kN"),
        ("18k each side", US, "load-repeated", "its own point"),
        ("18k, see plan", US, "load-unread", "its unit"),
    ],
)
def test_a_doubtful_force_stops_with_a_remedy(
    text: str, style: Style, code: str, remedy: str
) -> None:
    with pytest.raises(QuantityError) as caught:
        parse_force(text, style)
    assert caught.value.code == code
    assert remedy in caught.value.remedy


def test_a_typo_shows_its_letters() -> None:
    with pytest.raises(QuantityError, match=r'"1Ol k".*letter O at place 2, letter l at place 3'):
        parse_force("1Ol k", US)


def test_a_bare_force_takes_the_stated_unit() -> None:
    force = parse_force("18", Style(length_unit="m", bare_unit="kN"))
    assert (force.value, force.unit, force.is_bare) == (18.0, "kN", True)


def test_a_mass_is_a_force_where_the_office_works_in_kgf() -> None:
    force = parse_force("8168 kg", Style(length_unit="m", bare_unit="kgf"))
    assert force.unit == "kgf"
    assert "9.80665" in force.note


@pytest.mark.parametrize(("text", "value"), [("-18k", -18), ("+18k", 18), ("18k UP", -18)])
def test_signs_follow_the_offices_rule(text: str, value: float) -> None:
    assert parse_force(text, Style(length_unit="ft", upward_sign="-")).value == value


def test_a_sign_and_a_word_together_stop_even_with_a_rule() -> None:
    with pytest.raises(QuantityError, match="may act upward"):
        parse_force("-18k UP", Style(length_unit="ft", upward_sign="-"))


@pytest.mark.parametrize(
    ("text", "cases"),
    [
        ("D=12k L=6k", [("D", 12.0), ("L", 6.0)]),
        ("D = 12 kip, L = 6 kip", [("D", 12.0), ("L", 6.0)]),
        ("L=6k;D=12k", [("L", 6.0), ("D", 12.0)]),
        ("DL=12k\nlr=1,200#", [("D", 12.0), ("Lr", 1200.0)]),
        ("18k", [("load", 18.0)]),
    ],
)
def test_a_load_text_gives_its_cases_in_order(text: str, cases: list[tuple[str, float]]) -> None:
    found = parse_load_text(text, US, Cases())
    assert [(c.case, c.force.value) for c in found.cases] == cases
    assert found.notes == ()


def test_a_case_named_twice_adds_up_and_is_told() -> None:
    found = parse_load_text("DL=12k SDL=2000 lb", US, Cases())
    assert [(c.case, c.force.value, c.force.unit) for c in found.cases] == [("D", 14.0, "kip")]
    assert "case D" in found.notes[0]


@pytest.mark.parametrize("text", ["X=3k", "P1 = 18k"])
def test_an_unknown_case_stops(text: str) -> None:
    with pytest.raises(QuantityError) as caught:
        parse_load_text(text, US, Cases())
    assert caught.value.code == "load-case-unknown"


@pytest.mark.parametrize(
    "text",
    ["P3", "S1", "see detail", "LOADS", "EL 12.5", "12.5 m", "41'-2 1/2\"", "3/S-101", "NOTE 3"],
)
def test_other_texts_do_not_look_like_a_force(text: str) -> None:
    assert not looks_like_force(text)


@pytest.mark.parametrize(
    "text", ["8.2 t", "l2k", "10/14", "DL 12k", "2.4 k/ft", "X=3k", "ALL LOADS 18k U.N.O.", "(18k)"]
)
def test_a_text_that_tries_to_be_a_force_looks_like_one(text: str) -> None:
    assert looks_like_force(text)


_LETTERS = "0123456789.,'\"/-+ kKlLOobstpNMmeE=DTUPCF()@#x^\u00b0\n"


@settings(max_examples=300)
@given(st.text(alphabet=_LETTERS, max_size=12) | st.text(max_size=20))
def test_any_text_reads_or_is_refused_by_a_quantity_error(text: str) -> None:
    for parse in (
        lambda: parse_load_text(text, US, Cases()),
        lambda: parse_load_text(text, COMMA, Cases()),
        lambda: parse_length(text, "ft"),
        lambda: parse_line_load(text, US),
        lambda: parse_temperature_change(text),
        lambda: parse_expansion(text),
        lambda: read_plot_scale(text),
    ):
        with contextlib.suppress(QuantityError):
            parse()
    looks_like_force(text)


@given(st.floats(0, 1e7), st.sampled_from(["kip", "lb", "N", "kN", "MN", "kgf"]))
def test_whatever_reads_as_a_force_looks_like_one(value: float, unit: str) -> None:
    text = f"{value:.3f} {unit}"
    assert parse_force(text, SI).value == float(f"{value:.3f}")
    assert looks_like_force(text)


@pytest.mark.parametrize(
    ("text", "unit", "value", "place"),
    [
        ("41'-2 1/2\"", "ft", 41 + 2.5 / 12, 0.5 / 12),
        ("41'-2\"", "in", 494.0, 1.0),
        ("41'2 1/2\"", "in", 494.5, 0.5),
        ('2 1/2"', "in", 2.5, 0.5),
        ('3/16"', "in", 0.1875, 1 / 16),
        ("41.21'", "ft", 41.21, 0.01),
        ("41\u2032-2 1#2\u2033", "in", 494.5, 0.5),
        ("EL. 12.500", "m", 12.5, 0.001),
        ("EL 41'-2 1/2\"", "in", 494.5, 0.5),
        ("ELEV -3.25", "m", -3.25, 0.01),
        ("EL +12.345", "m", 12.345, 0.001),
        ("12500 mm", "m", 12.5, 0.001),
        ("12.5 m", "mm", 12500.0, 100.0),
        ("7", "dm", 7.0, 1.0),
        ("1,250.5", "ft", 1250.5, 0.1),
    ],
)
def test_a_length_is_read_with_its_last_place(
    text: str, unit: str, value: float, place: float
) -> None:
    found = parse_length(text, unit)
    assert found.value == pytest.approx(value, rel=1e-14)
    assert found.last_place == pytest.approx(place, rel=1e-12)


@pytest.mark.parametrize(
    ("text", "unit", "code"),
    [
        ("41-2.5", "ft", "length-ambiguous"),
        ("41'-14\"", "ft", "length-ambiguous"),
        ("41'-21/2\"", "ft", "length-ambiguous"),
        ("41'-2 5/4\"", "ft", "length-ambiguous"),
        ("12,500 mm", "m", "number-ambiguous"),
        ("12,500", "m", "number-ambiguous"),
        ("3 1/2", "ft", "length-unread"),
        ("12 furlongs", "ft", "length-unread"),
        ("", "ft", "length-unread"),
    ],
)
def test_a_doubtful_length_stops(text: str, unit: str, code: str) -> None:
    with pytest.raises(QuantityError) as caught:
        parse_length(text, unit)
    assert caught.value.code == code


def test_a_decimal_comma_is_read_where_the_office_says_so() -> None:
    assert parse_length("12,5 m", "m", decimal_comma=True).value == 12.5


def test_foot_marks_mean_the_survey_foot_in_a_survey_foot_drawing() -> None:
    assert parse_length("41'-6\"", "us-ft").value == 41.5


@pytest.mark.parametrize(
    ("text", "force", "length", "value"),
    [
        ("0.15 kip/ft", "lb", "ft", 150.0),
        ("150 plf", "lb", "ft", 150.0),
        ("0.15 k/ft", "kip", "in", 0.0125),
        ("2.2 N/m", "kN", "m", 0.0022),
        ("3 lb/ft", "N", "m", 3 * 4.4482216152605 / 0.3048),
        ("1.5 klf", "kip", "ft", 1.5),
    ],
)
def test_a_weight_by_length_converts_to_any_units(
    text: str, force: str, length: str, value: float
) -> None:
    assert parse_line_load(text, US).into(force, length) == pytest.approx(value, rel=1e-14)


@pytest.mark.parametrize(
    ("text", "code"),
    [("3.2 kg/m", "load-is-mass"), ("3", "weight-unread"), ("20 psf", "weight-unread")],
)
def test_a_doubtful_weight_stops(text: str, code: str) -> None:
    with pytest.raises(QuantityError) as caught:
        parse_line_load(text, US)
    assert caught.value.code == code


def test_a_stiffness_is_above_zero() -> None:
    assert parse_stiffness("32400 kip", US).value == 32400.0
    with pytest.raises(QuantityError):
        parse_stiffness("0 kip", US)


@pytest.mark.parametrize(
    ("text", "kelvin"),
    [("30 K", 30.0), ("54 F", 30.0), ("+-20 \u00b0C", 20.0), ("\u00b118 F", 10.0), ("-9 F", -5.0)],
)
def test_a_temperature_difference_is_in_kelvin(text: str, kelvin: float) -> None:
    assert parse_temperature_change(text) == pytest.approx(kelvin, rel=1e-15)


@pytest.mark.parametrize(
    ("text", "value"),
    [("12e-6 /C", 12e-6), ("12E-6/K", 12e-6), ("6.5e-6 /F", 11.7e-6), ("12 x 10^-6 / K", 12e-6)],
)
def test_an_expansion_is_by_kelvin(text: str, value: float) -> None:
    assert parse_expansion(text) == pytest.approx(value, rel=1e-14)


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [
        (133.42, 3, "133 kip"),
        (1334.2, 3, "1330 kip"),
        (99.96, 3, "100 kip"),
        (15.0, 3, "15.0 kip"),
        (0.012345, 3, "0.0123 kip"),
        (-2.5, 2, "-2.5 kip"),
        (0.0, 3, "0 kip"),
        (123456789.0, 4, "123500000 kip"),
    ],
)
def test_a_force_is_written_with_its_significant_digits(
    value: float, digits: int, text: str
) -> None:
    assert format_force(value, "kip", digits) == text


def test_a_force_may_be_written_without_zeros_at_its_end() -> None:
    assert format_force(15.0, "kip", 3, is_trimmed=True) == "15 kip"
    assert format_force(150.0, "kip", 3, is_trimmed=True) == "150 kip"


@given(st.floats(1e-6, 1e9), st.integers(1, 8), st.booleans())
def test_a_written_force_reads_back_within_half_its_last_digit(
    value: float,
    digits: int,
    is_trimmed: bool,
) -> None:
    text = format_force(value, "kN", digits, is_trimmed=is_trimmed)
    assert "e" not in text
    place = 10.0 ** (math.floor(math.log10(value)) - digits + 1)
    assert abs(parse_force(text, SI).value - value) <= 0.5 * place * (1 + 1e-9) + 1e-15 * value


@pytest.mark.parametrize(
    ("value", "unit", "length", "elevation"),
    [
        (12.3456, "m", "12.346 m", "EL 12.346"),
        (12345.6, "mm", "12346 mm", "EL 12346"),
        (41.21, "ft", "41'-2 1/2\"", "EL 41'-2 1/2\""),
        (494.5, "in", "41'-2 1/2\"", "EL 41'-2 1/2\""),
        (11.9999, "ft", "12'-0\"", "EL 12'-0\""),
        (0.2, "ft", '2 3/8"', "EL 0'-2 3/8\""),
        (0.25, "in", '1/4"', "EL 0'-0 1/4\""),
        (-0.0001, "m", "0.000 m", "EL 0.000"),
        (-3.5, "ft", "-3'-6\"", "EL -3'-6\""),
    ],
)
def test_lengths_are_written_as_the_trade_writes_them(
    value: float, unit: str, length: str, elevation: str
) -> None:
    assert format_length(value, unit) == length
    assert format_elevation(value, unit) == elevation


@given(st.floats(-1e5, 1e5), st.sampled_from(LENGTH_UNITS))
def test_a_written_length_reads_back_within_half_its_last_place(value: float, unit: str) -> None:
    place = convert(1 / 16, "in", unit) if unit in {"in", "ft"} else convert(1.0, "mm", unit)
    if unit == "us-ft":
        place = 1 / 192
    for text in (format_length(value, unit), format_elevation(value, unit)):
        assert abs(parse_length(text, unit).value - value) <= place / 2 * (1 + 1e-6)


@pytest.mark.parametrize(
    ("text", "scale"),
    [
        ("1:100", 100.0),
        ("100", 100.0),
        ("1 : 50", 50.0),
        ('1/8"=1\'-0"', 96.0),
        ("1/8\" = 1'", 96.0),
        ('1 1/2"=1\'-0"', 8.0),
        ("1\"=20'", 240.0),
    ],
)
def test_a_plotting_scale_is_read(text: str, scale: float) -> None:
    assert read_plot_scale(text) == scale


@pytest.mark.parametrize("text", ["", "0", "1:0", "big", "1/0\"=1'", "1/8=1"])
def test_what_is_no_plotting_scale_stops(text: str) -> None:
    with pytest.raises(QuantityError):
        read_plot_scale(text)
