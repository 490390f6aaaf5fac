"""Loads by area as drafters write them: read with their unit, or not at all."""

from __future__ import annotations

import re
from dataclasses import dataclass
from decimal import Decimal
from typing import TYPE_CHECKING

from dxfcable.forces import parse_force
from dxfcable.units import Doubt, QuantityError, convert, is_imperial, tidy

if TYPE_CHECKING:
    from dxfcable.forces import Style
    from dxfcable.settings import Cases

_NAMED = {
    "pa": ("N", "m"),
    "kpa": ("kN", "m"),
    "mpa": ("MN", "m"),
    "psf": ("lb", "ft"),
    "ksf": ("kip", "ft"),
    "psi": ("lb", "in"),
    "ksi": ("kip", "in"),
}
_SQUARED = {unit: unit for unit in ("m", "cm", "mm", "ft", "in")}
_WHOLE = {"sf": "ft", "sqft": "ft", "sqm": "m", "sqin": "in"}
_NUMBER = r"(?P<sign>[+-]? ?)(?P<number>\d[\d., ]*|\.\d+)"
_PER_AREA = re.compile(
    rf"{_NUMBER} ?(?P<unit>[a-zA-Z#]+)\.? ?/ ?(?P<per>[a-zA-Z]+)(?: ?\^? ?(?P<two>[2\u00b2]))?\.?"
)
_BY_NAME = re.compile(rf"{_NUMBER} ?(?P<unit>[a-zA-Z]+)\.?")
_BARE = re.compile(_NUMBER)
_ASSIGN = re.compile(r"([A-Za-z]\w*) ?= ?", re.ASCII)
_WRITE = "Write force by area, as 1.2 kPa, 1.2 kN/m2 or 25 psf."


@dataclass(frozen=True, slots=True, kw_only=True)
class Pressure:
    """A load by area as written: `value` in `force_unit` by square of `length_unit`, down positive.

    `note` says what was assumed.
    """

    value: float
    force_unit: str
    length_unit: str
    note: str = ""

    def into(self, force_unit: str, length_unit: str) -> float:
        """Give the value in other units.

        Examples
        --------
        >>> Pressure(value=1.0, force_unit="kip", length_unit="ft").into("lb", "ft")
        1000.0
        """
        force = convert(self.value, self.force_unit, force_unit)
        return force / convert(1.0, self.length_unit, length_unit) ** 2


@dataclass(frozen=True, slots=True, kw_only=True)
class PressureText:
    """What the text of a loaded area says: pressures by case, and what was added or assumed."""

    cases: tuple[tuple[str, Pressure], ...]
    notes: tuple[str, ...] = ()


def parse_pressure(text: str, style: Style) -> Pressure:
    """Read one load by area.

    Parameters
    ----------
    text : str
        As "1.2 kPa", "4 kN/m2", "35 psf", "0.035 ksf", "0.02 kip/ft2".
    style : Style
        As for forces: commas, signs and `k` follow the same rules. In a drawing in US survey
        feet, psf and ksf are by survey foot.

    Returns
    -------
    Pressure

    Raises
    ------
    QuantityError
        `pressure-unread` where it is none, `load-unit-missing` for a bare number; else as
        `parse_force`, e.g. a mass as "120 kg/m2".

    Examples
    --------
    >>> from dxfcable.forces import Style
    >>> parse_pressure("35 psf", Style(length_unit="ft"))
    Pressure(value=35.0, force_unit='lb', length_unit='ft', note='')
    """
    plain = tidy(text)
    if _BARE.fullmatch(plain):
        message = f'"{text}" has no unit'
        raise QuantityError(Doubt.LOAD_UNIT_MISSING, message, _WRITE)
    match = _PER_AREA.fullmatch(plain) or _BY_NAME.fullmatch(plain)
    units = _units(match) if match else None
    if match is None or units is None:
        message = f'"{text}" is no load by area'
        raise QuantityError(Doubt.PRESSURE_UNREAD, message, _WRITE)
    force_unit, per = units
    sign, number = match["sign"].strip(), match["number"].strip()
    force = parse_force(f"{sign}{number} {force_unit}", style)
    if per == "ft" and style.length_unit == "us-ft":
        per = "us-ft"
    return Pressure(value=force.value, force_unit=force.unit, length_unit=per, note=force.note)


def _units(match: re.Match[str]) -> tuple[str, str] | None:
    """Give the units of force, as written, and of length; None where they make no pressure."""
    unit, parts = match["unit"], match.groupdict()
    if "per" not in parts:
        folded = unit.casefold()
        return None if folded == "mpa" and unit[0] == "m" else _NAMED.get(folded)  # no millipascal
    per = parts["per"].casefold()
    length = (_SQUARED if parts["two"] else _WHOLE).get(per)
    return (unit, length) if length else None


def parse_pressure_text(text: str, style: Style, cases: Cases) -> PressureText:
    """Read the text of a loaded area, by case or as one.

    Parameters
    ----------
    text : str
        As "D=1.2 kPa L=4 kPa" or "35 psf".
    style : Style
    cases : Cases
        Letters and aliases; two entries of one case add up, with a note.

    Returns
    -------
    PressureText
        One case `load` where the text names none.

    Raises
    ------
    QuantityError
        As `parse_pressure`; also an unknown case letter.
    """
    plain = tidy(text)
    marks = list(_ASSIGN.finditer(plain))
    if not marks:
        found = parse_pressure(text, style)
        return PressureText(cases=(("load", found),), notes=(found.note,) if found.note else ())
    if plain[: marks[0].start()].strip():
        message = f'"{text}" has words before its first load case'
        remedy = "Write only D=1.2 kPa L=4 kPa and the like."
        raise QuantityError(Doubt.PRESSURE_UNREAD, message, remedy)
    known: dict[str, Pressure] = {}
    notes: list[str] = []
    ends = [m.start() for m in marks[1:]] + [len(plain)]
    for mark, end in zip(marks, ends, strict=True):
        case = cases.find(mark[1])
        if case is None:
            message = f'"{mark[1]}" in "{text}" is no load case'
            remedy = f"Known: {', '.join(cases.letters)}; the settings may add aliases."
            raise QuantityError(Doubt.LOAD_CASE_UNKNOWN, message, remedy)
        pressure = parse_pressure(plain[mark.end() : end].strip(" ,;"), style)
        if pressure.note:
            notes.append(pressure.note)
        if case in known:
            pressure = _added(known[case], pressure)
            notes.append(f'"{text}" names case {case} more than once; its values are added')
        known[case] = pressure
    return PressureText(cases=tuple(known.items()), notes=tuple(dict.fromkeys(notes)))


def _added(first: Pressure, second: Pressure) -> Pressure:
    """Add two pressures in the units of the first."""
    more = second.into(first.force_unit, first.length_unit)
    return Pressure(
        value=first.value + more, force_unit=first.force_unit, length_unit=first.length_unit
    )


def format_area(value: float, length_unit: str, digits: int = 6) -> str:
    """Write an area in square metres or square feet.

    Parameters
    ----------
    value : float
        By the square of `length_unit`.
    length_unit : str
        Of the drawing.
    digits : int
        Significant digits, zeros at the end left out.

    Returns
    -------
    str

    Examples
    --------
    >>> format_area(7.2e6, "mm")
    '7.2 m2'
    """
    shown = "ft" if is_imperial(length_unit) else "m"
    return f"{_plain(value * convert(1.0, length_unit, shown) ** 2, digits)} {shown}2"


def format_pressure(value: float, force_unit: str, length_unit: str, digits: int = 6) -> str:
    """Write a load by square metre or square foot, as `format_area` writes areas.

    Examples
    --------
    >>> format_pressure(1.2e-6, "kN", "mm")
    '1.2 kN/m2'
    """
    shown = "ft" if is_imperial(length_unit) else "m"
    return f"{_plain(value / convert(1.0, length_unit, shown) ** 2, digits)} {force_unit}/{shown}2"


def _plain(value: float, digits: int) -> str:
    """Write a number to its significant digits, without exponent or zeros at the end."""
    return f"{Decimal(f'{value:.{digits}g}').normalize():f}"
