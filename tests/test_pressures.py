"""Loads by area are read with their unit, or not at all; the unit factors are exact."""

from __future__ import annotations

import pytest

from dxfcable.forces import Style
from dxfcable.pressures import (
    format_area,
    format_pressure,
    parse_pressure,
    parse_pressure_text,
)
from dxfcable.settings import Settings
from dxfcable.units import QuantityError

METRIC, FEET = Style(length_unit="m"), Style(length_unit="ft")
CASES = Settings().cases


@pytest.mark.parametrize(
    ("text", "value", "force", "length"),
    [
        ("1.2 kPa", 1.2, "kN", "m"),
        ("1.2kPa", 1.2, "kN", "m"),
        ("4 kN/m2", 4.0, "kN", "m"),
        ("4 kN/m\u00b2", 4.0, "kN", "m"),
        ("4 kN / m^2", 4.0, "kN", "m"),
        ("4 kN/sqm", 4.0, "kN", "m"),
        ("750 Pa", 750.0, "N", "m"),
        ("750 N/m2", 750.0, "N", "m"),
        ("0.002 N/mm2", 0.002, "N", "mm"),
        ("0.5 MPa", 0.5, "MN", "m"),
    ],
)
def test_a_metric_pressure_is_read(text: str, value: float, force: str, length: str) -> None:
    found = parse_pressure(text, METRIC)
    assert (found.value, found.force_unit, found.length_unit) == (value, force, length)


@pytest.mark.parametrize(
    ("text", "value", "force", "length"),
    [
        ("35 psf", 35.0, "lb", "ft"),
        ("35 PSF.", 35.0, "lb", "ft"),
        ("35 lb/ft2", 35.0, "lb", "ft"),
        ("35 #/sf", 35.0, "lb", "ft"),
        ("35 lbs/sqft", 35.0, "lb", "ft"),
        ("0.1 ksf", 0.1, "kip", "ft"),
        ("0.1 k/sf", 0.1, "kip", "ft"),
        ("0.1 kip/ft2", 0.1, "kip", "ft"),
        ("2 psi", 2.0, "lb", "in"),
        ("1,200 psf", 1200.0, "lb", "ft"),
    ],
)
def test_an_imperial_pressure_is_read(text: str, value: float, force: str, length: str) -> None:
    found = parse_pressure(text, FEET)
    assert (found.value, found.force_unit, found.length_unit) == (value, force, length)


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("1.2", "load-unit-missing"),
        ("12 kN", "pressure-unread"),
        ("12 kN/m", "pressure-unread"),
        ("12 kN/m3", "pressure-unread"),
        ("1.2 mPa", "pressure-unread"),
        ("1.2 kPa TYP", "pressure-unread"),
        ("1.2 kPa 4 kPa", "pressure-unread"),
        ("120 kg/m2", "load-is-mass"),
        ("0.12 t/m2", "load-unit-ambiguous"),
        ("0.1 k/sf", "load-unit-ambiguous"),
        ("-0.8 kPa", "load-sign"),
        ("1,2 kPa", "number-ambiguous"),
    ],
)
def test_a_doubtful_pressure_stops(text: str, code: str) -> None:
    with pytest.raises(QuantityError) as error:
        parse_pressure(text, METRIC)
    assert error.value.code == code
    assert error.value.remedy


def test_commas_and_signs_follow_the_office() -> None:
    style = Style(length_unit="m", decimal_comma=True, upward_sign="-")
    assert parse_pressure("-0,8 kPa", style).value == -0.8


def test_survey_feet_stay_survey_feet() -> None:
    assert parse_pressure("35 psf", Style(length_unit="us-ft")).length_unit == "us-ft"


def test_pressures_convert_by_exact_factors() -> None:
    # 1 psf = 4.4482216152605 N / 0.3048^2 m2 = 47.880 258 980 335 84 Pa (exact by definition).
    psf = parse_pressure("1 psf", FEET)
    assert psf.into("N", "m") == pytest.approx(47.88025898033584, rel=1e-15)
    assert parse_pressure("1 kPa", METRIC).into("kN", "mm") == pytest.approx(1e-6, rel=1e-15)
    assert parse_pressure("1 psi", FEET).into("lb", "ft") == pytest.approx(144.0, rel=1e-14)


def test_cases_are_read_in_their_order_and_aliases_add() -> None:
    found = parse_pressure_text("DL=1 kPa, LL = 4 kPa SDL=0.5 kN/m2", METRIC, CASES)
    assert [(case, p.value) for case, p in found.cases] == [("D", 1.5), ("L", 4.0)]
    assert len(found.notes) == 1


def test_a_pressure_without_case_is_the_one_load() -> None:
    found = parse_pressure_text("35 psf", FEET, CASES)
    assert [case for case, _ in found.cases] == ["load"]


@pytest.mark.parametrize(
    ("text", "code"),
    [("DECK D=1.2 kPa", "pressure-unread"), ("X=1.2 kPa", "load-case-unknown")],
)
def test_a_doubtful_text_of_an_area_stops(text: str, code: str) -> None:
    with pytest.raises(QuantityError) as error:
        parse_pressure_text(text, METRIC, CASES)
    assert error.value.code == code


def test_areas_and_pressures_are_shown_by_the_metre_or_the_foot() -> None:
    assert format_area(9.6, "m") == "9.6 m2"
    assert format_area(144.0, "in") == "1 ft2"
    assert format_area(1234.5678, "ft", 4) == "1235 ft2"
    assert format_area(0.0, "m") == "0 m2"
    assert format_pressure(1.2e-6, "kN", "mm") == "1.2 kN/m2"
    assert format_pressure(35.0 / 144, "lb", "in") == "35 lb/ft2"
