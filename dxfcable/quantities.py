"""Quantities read and written: one door to forces, lengths, weights, temperatures, scales."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass

from dxfcable.forces import (
    CaseForce,
    Force,
    LoadText,
    Style,
    add,
    looks_like_force,
    parse_force,
    parse_load_text,
)
from dxfcable.lengths import Length, format_elevation, format_length, parse_length
from dxfcable.scales import read_plot_scale
from dxfcable.units import (
    FORCE_UNITS,
    INSUNITS,
    LENGTH_UNITS,
    Doubt,
    QuantityError,
    convert,
    is_imperial,
    tidy,
)

__all__ = [
    "FORCE_UNITS",
    "INSUNITS",
    "LENGTH_UNITS",
    "CaseForce",
    "Doubt",
    "Force",
    "Length",
    "LineLoad",
    "LoadText",
    "QuantityError",
    "Style",
    "add",
    "convert",
    "format_elevation",
    "format_force",
    "format_length",
    "is_imperial",
    "looks_like_force",
    "parse_expansion",
    "parse_force",
    "parse_length",
    "parse_line_load",
    "parse_load_text",
    "parse_stiffness",
    "parse_temperature_change",
    "read_plot_scale",
]

_NAMED = {"plf": ("lb", "ft"), "klf": ("kip", "ft")}
_PER = {"m": "m", "ft": "ft", "foot": "ft", "in": "in", "mm": "mm", "'": "ft", "lf": "ft"}
_LINE_LOAD = re.compile(r"(?P<force>[+-]? ?[\d., ]*\d\.? ?[a-zA-Z#]+) ?/ ?(?P<per>[a-zA-Z']+)\.?")
_LINE_NAMED = re.compile(r"(?P<number>[+-]? ?[\d., ]*\d\.?) ?(?P<name>[a-zA-Z]+)\.?")
_DEGREES = re.compile(
    r"(?:\+-|\u00b1)? ?(?P<sign>[+-]?) ?(?P<n>\d+(?:\.\d+)?|\.\d+) ?(?:\u00b0|deg)? ?(?P<u>[KCF])"
)
_EXPANSION = re.compile(
    r"(?P<n>(?:\d+\.?\d*|\.\d+)(?: ?[eE] ?[+-]?\d+| ?[xX*] ?10 ?\^ ?\(?-\d+\)?)?)"
    r" ?(?:/|1/|per) ?(?:\u00b0|deg)? ?(?P<u>[KCF])"
)


@dataclass(frozen=True, slots=True, kw_only=True)
class LineLoad:
    """A force by length as written, e.g. the weight of a cable."""

    value: float
    force_unit: str
    length_unit: str

    def into(self, force_unit: str, length_unit: str) -> float:
        """Give the value in other units.

        Examples
        --------
        >>> LineLoad(value=12.0, force_unit="lb", length_unit="ft").into("lb", "in")
        1.0
        """
        force = convert(self.value, self.force_unit, force_unit)
        return force / convert(1.0, self.length_unit, length_unit)


def parse_line_load(text: str, style: Style) -> LineLoad:
    """Read a weight by length.

    Parameters
    ----------
    text : str
        As "0.15 kip/ft", "2.2 N/m", "150 plf".
    style : Style
        As for forces.

    Returns
    -------
    LineLoad
        Zero or more.

    Raises
    ------
    QuantityError
        `weight-unread` where it is none; else as `parse_force`, e.g. a mass as "3.2 kg/m".
    """
    plain = tidy(text)
    remedy = "Write force by length, as 0.15 kip/ft or 2.2 N/m."
    named = _LINE_NAMED.fullmatch(plain)
    if named and named["name"].casefold() in _NAMED:
        unit, per = _NAMED[named["name"].casefold()]
        force = parse_force(f"{named['number']} {unit}", style)
    else:
        match = _LINE_LOAD.fullmatch(plain)
        per = _PER.get(match["per"].casefold(), "") if match else ""
        if match is None or not per:
            message = f'"{text}" is no weight by length'
            raise QuantityError(Doubt.WEIGHT_UNREAD, message, remedy)
        force = parse_force(match["force"], style)
    if force.value < 0:
        message = f'"{text}" is a weight below zero'
        raise QuantityError(Doubt.WEIGHT_UNREAD, message, remedy)
    if per == "ft" and style.length_unit == "us-ft":
        per = "us-ft"
    return LineLoad(value=force.value, force_unit=force.unit, length_unit=per)


def parse_stiffness(text: str, style: Style) -> Force:
    """Read an axial stiffness EA as "32400 kip" or "9000 kN".

    Parameters
    ----------
    text : str
    style : Style

    Returns
    -------
    Force
        Greater than zero.

    Raises
    ------
    QuantityError
        As `parse_force`; `load-sign` where it is not above zero.
    """
    force = parse_force(text, style)
    if force.value <= 0:
        message = f'"{text}" is no stiffness above zero'
        raise QuantityError(Doubt.LOAD_SIGN, message, "Write it as 32400 kip, or leave it blank.")
    return force


def parse_temperature_change(text: str) -> float:
    """Read a temperature difference.

    Parameters
    ----------
    text : str
        As "30 K", "30 C", "54 F"; "+-30 K" is 30, for both signs are checked.

    Returns
    -------
    float
        In kelvin.

    Raises
    ------
    QuantityError
        With code `temperature-unread`.

    Examples
    --------
    >>> parse_temperature_change("54 F")
    30.0
    """
    match = _DEGREES.fullmatch(tidy(text))
    if match is None:
        message = f'"{text}" is no temperature difference'
        raise QuantityError(Doubt.TEMPERATURE_UNREAD, message, "Write 30 K or 54 F.")
    value = float(match["n"]) * (-1 if match["sign"] == "-" else 1)
    return value * 5 / 9 if match["u"] == "F" else value


def parse_expansion(text: str) -> float:
    """Read a coefficient of thermal expansion.

    Parameters
    ----------
    text : str
        As "12e-6 /C", "12E-6/K" or "6.5e-6 /F".

    Returns
    -------
    float
        In 1/K.

    Raises
    ------
    QuantityError
        With code `expansion-unread`.
    """
    match = _EXPANSION.fullmatch(tidy(text))
    if match is None:
        message = f'"{text}" is no coefficient of expansion'
        raise QuantityError(Doubt.EXPANSION_UNREAD, message, "Write 12e-6 /C or 6.5e-6 /F.")
    number = re.sub(r"[xX*]10\^\(?(-\d+)\)?", r"e\1", match["n"].replace(" ", ""))
    value = float(number)
    return value * 1.8 if match["u"] == "F" else value


def format_force(value: float, unit: str, digits: int, *, is_trimmed: bool = False) -> str:
    """Write a force with its significant digits, its unit behind.

    Parameters
    ----------
    value : float
        In `unit`.
    unit : str
    digits : int
        Significant digits, at least 1; whole numbers that have more keep their places.
    is_trimmed : bool
        Leave out zeros at the end of decimals: "15 kip" for "15.0 kip".

    Returns
    -------
    str

    Examples
    --------
    >>> format_force(133.42, "kip", 3)
    '133 kip'
    >>> format_force(1334.2, "kip", 3)
    '1330 kip'
    """
    if value == 0:
        return f"0 {unit}"
    # Twice: rounding may carry into the next power of ten, 99.96 to 100.
    rounded = round(value, digits - 1 - math.floor(math.log10(abs(value))))
    if rounded == 0:
        return f"0 {unit}"
    decimals = max(0, digits - 1 - math.floor(math.log10(abs(rounded))))
    text = f"{rounded:.{decimals}f}"
    if is_trimmed and "." in text:
        text = text.rstrip("0").rstrip(".")
    return f"{text} {unit}"
