"""Lengths and elevations as drafters write them, read with their last place, and written."""

from __future__ import annotations

import re
from dataclasses import dataclass

from dxfcable.units import (
    IMPERIAL_LENGTHS,
    Doubt,
    QuantityError,
    convert,
    is_imperial,
    read_number,
    tidy,
)

_UNITS = {
    **dict.fromkeys(("mm",), "mm"),
    **dict.fromkeys(("cm",), "cm"),
    **dict.fromkeys(("dm",), "dm"),
    **dict.fromkeys(("m", "metre", "meter", "metres", "meters"), "m"),
    **dict.fromkeys(("in", "inch", "inches", '"'), "in"),
    **dict.fromkeys(("ft", "foot", "feet", "'"), "ft"),
    **dict.fromkeys(("us-ft", "usft", "sft"), "us-ft"),
}
_LABEL = re.compile(r"(?:elevation|elev|el)(?: ?[.:=] ?|(?=[ \d+-]) ?)", re.IGNORECASE)
_FRACTION = r"(?:(?P<whole>\d+)(?:[ -]|(?=\b)) ?)?(?P<top>\d+)[/#](?P<bottom>\d+)"
_INCHES = rf"(?:{_FRACTION}|(?P<inches>\d+(?:\.\d+)?|\.\d+)) ?\""
_FEET_INCHES = re.compile(rf"(?P<feet>\d[\d,]*) ?' ?-? ?{_INCHES}\Z", re.ASCII)
_INCHES_ONLY = re.compile(rf"{_INCHES}\Z", re.ASCII)
_NUMBER = re.compile(r"(?P<number>[\d., ]*\d\.?) ?(?P<unit>[a-zA-Z'\"-]*\.?)\Z", re.ASCII)
_REMEDY = "Write 41'-2 1/2\", 41.21' or 12.5 m, or a bare number in the drawing's unit."


@dataclass(frozen=True, slots=True, kw_only=True)
class Length:
    """A length as written: `value` and the worth of its `last_place`, both in one unit."""

    value: float
    last_place: float


def parse_length(text: str, unit: str, *, decimal_comma: bool = False) -> Length:
    """Read a length or an elevation.

    Parameters
    ----------
    text : str
        As `41'-2 1/2"`, `41.21'`, "EL. 12.500", "12500 mm"; a bare number is in `unit`.
    unit : str
        The drawing's unit; foot marks mean the survey foot in a survey-foot drawing.
    decimal_comma : bool
        The office writes 12,5 for 12.5.

    Returns
    -------
    Length
        In `unit`.

    Raises
    ------
    QuantityError
        `length-ambiguous` as for 41-2.5, `length-unread` else.

    Examples
    --------
    >>> parse_length("41.25'", "in").value
    495.0
    """
    plain = _LABEL.sub("", tidy(text), count=1)
    sign = -1.0 if plain.startswith("-") else 1.0
    plain = plain.removeprefix("-").removeprefix("+").strip()
    foot = "us-ft" if unit == "us-ft" else "ft"
    match = _FEET_INCHES.match(plain)
    if match:
        feet, _ = read_number(match["feet"], decimal_comma=False, comma_groups=True)
        inches, place = _inches(text, match)
        if inches >= 12:
            message = f'"{text}" has 12 inches or more beside feet'
            raise QuantityError(Doubt.LENGTH_AMBIGUOUS, message, _REMEDY)
        found, place, source = feet + inches / 12, place / 12, foot
    elif match := _INCHES_ONLY.match(plain):
        inches, place = _inches(text, match)
        found, place, source = inches / 12, place / 12, foot
    else:
        found, place, source = _decimal(text, plain, unit, decimal_comma=decimal_comma)
        if source == "ft":
            source = foot
    value = sign * convert(found, source, unit)
    return Length(value=value, last_place=convert(place, source, unit))


def _inches(text: str, match: re.Match[str]) -> tuple[float, float]:
    """Give inches and the worth of their last place."""
    if match["inches"]:
        return float(match["inches"]), 10.0 ** -len(match["inches"].partition(".")[2])
    top, bottom = int(match["top"]), int(match["bottom"])
    if bottom == 0 or top >= bottom:
        message = f'"{text}" has a fraction that is no part of an inch'
        raise QuantityError(Doubt.LENGTH_AMBIGUOUS, message, _REMEDY)
    return int(match["whole"] or 0) + top / bottom, 1 / bottom


def _decimal(text: str, plain: str, unit: str, *, decimal_comma: bool) -> tuple[float, float, str]:
    """Read a decimal number with or without its unit: value, last place, unit."""
    match = _NUMBER.match(plain)
    if match is None:
        if re.match(r"[\d.]+ ?[-/] ?[\d.]+", plain):
            message = f'"{text}" may be feet and inches, or a difference'
            raise QuantityError(Doubt.LENGTH_AMBIGUOUS, message, _REMEDY)
        message = f'"{text}" is no length'
        raise QuantityError(Doubt.LENGTH_UNREAD, message, _REMEDY)
    name = match["unit"].casefold()
    source = _UNITS.get(name if name in {"'", '"'} else name.rstrip("."), unit if not name else "")
    if not source:
        message = f'"{match["unit"]}" in "{text}" is no unit of length'
        raise QuantityError(Doubt.LENGTH_UNREAD, message, _REMEDY)
    value, decimals = read_number(
        match["number"].strip(),
        decimal_comma=decimal_comma,
        comma_groups=is_imperial(unit) and source in IMPERIAL_LENGTHS,
    )
    return value, 10.0**-decimals, source


_DECIMALS = {"m": 3, "dm": 2, "cm": 1, "mm": 0}


def format_length(value: float, unit: str) -> str:
    """Write a length to 1 mm or 1/16 in.

    Parameters
    ----------
    value : float
        In `unit`.
    unit : str
        The drawing's; inch and foot drawings give feet, inches and sixteenths.

    Returns
    -------
    str
        Such that `parse_length` gives the value within half the last place.

    Examples
    --------
    >>> format_length(12.3456, "m")
    '12.346 m'
    """
    if is_imperial(unit):
        return _feet_and_inches(value, unit, is_elevation=False)
    return f"{_fixed(value, _DECIMALS[unit])} {unit}"


def format_elevation(value: float, unit: str) -> str:
    """Write an elevation to 1 mm or 1/16 in; a bare number is in the drawing's unit.

    Parameters
    ----------
    value : float
        In `unit`.
    unit : str
        The drawing's.

    Returns
    -------
    str
        As "EL 12.345"; `parse_length` gives the value within half the last place.

    Examples
    --------
    >>> print(format_elevation(41.21, "ft"))
    EL 41'-2 1/2"
    """
    if is_imperial(unit):
        return f"EL {_feet_and_inches(value, unit, is_elevation=True)}"
    return f"EL {_fixed(value, _DECIMALS[unit])}"


def _fixed(value: float, decimals: int) -> str:
    """Write decimals, without the minus of a rounded zero."""
    text = f"{value:.{decimals}f}"
    return text.removeprefix("-") if not text.strip("-0.") else text


def _feet_and_inches(value: float, unit: str, *, is_elevation: bool) -> str:
    foot = "us-ft" if unit == "us-ft" else "ft"
    sixteenths = round(abs(convert(value, unit, foot)) * 192)
    feet, rest = divmod(sixteenths, 192)
    inches, part = divmod(rest, 16)
    sign = "-" if value < 0 and sixteenths else ""
    words = f"{inches}"
    if part:
        shift = (part & -part).bit_length() - 1  # sixteenths in lowest terms
        fraction = f"{part >> shift}/{16 >> shift}"
        words = f"{inches} {fraction}" if inches or feet or is_elevation else fraction
    if feet or is_elevation:
        return f"{sign}{feet}'-{words}\""
    return f'{sign}{words}"'
