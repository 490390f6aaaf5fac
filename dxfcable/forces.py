"""Forces and load texts as drafters write them: read with their unit, or not at all."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.units import Doubt, QuantityError, convert, is_imperial, read_number, tidy

if TYPE_CHECKING:
    from dxfcable.settings import Cases

_UNITS = {
    **dict.fromkeys(("kip", "kips"), "kip"),
    **dict.fromkeys(("lb", "lbs", "lbf", "#", "pound", "pounds"), "lb"),
    **dict.fromkeys(("kn",), "kN"),
    **dict.fromkeys(("kgf",), "kgf"),
}
_TONS = frozenset({"t", "tf", "ton", "tons", "tonf", "tonne", "tonnes", "mt", "st", "lt"})
_MASSES = frozenset({"kg", "kgs", "kilos", "lbm", "g"})
_DISTRIBUTED = frozenset(
    {"plf", "klf", "psf", "ksf", "psi", "ksi", "pcf", "pa", "kpa", "mpa", "n/mm2"}
)
_UP = frozenset({"up", "uplift", "upward", "upwards", "\u2191"})
_DOWN = frozenset({"down", "dn", "downward", "downwards", "\u2193"})
_REPEATS = frozenset({"typ", "uno", "ea", "each", "typical"})
_LEVELS = frozenset(
    {"uls", "sls", "lrfd", "asd", "factored", "service", "unfactored", "ultimate", "max", "min"}
)
_NUMBER = r"(?:\d[\d.,]*(?: \d{3})*(?:[.,]\d+)?|\.\d+)"
_FORCE = re.compile(
    rf"(?P<sign>[+-]?) ?(?P<number>{_NUMBER}) ?(?P<unit>[a-zA-Z#][\w/#^*.\u00b2]*|)"
    r"(?P<rest>.*)\Z",
    re.ASCII | re.DOTALL,
)
_TYPO = re.compile(r"[+-]? ?(?=[^ ]*\d)(?=[^ ]*[lIOo|])([\dlIOo|.,]+) ?([a-zA-Z#]*)\Z", re.ASCII)
_MANY = re.compile(r"\(?\d+\)? ?[@xX] ?[\d.]|\(\d+\) ?\d", re.ASCII)
_SLASHED = re.compile(rf"{_NUMBER}(?: ?[a-zA-Z]+)? ?/ ?{_NUMBER}(?: ?[a-zA-Z]+)?\Z", re.ASCII)
_MIXED = re.compile(r"\d+[ -]\d+/\d+ ?(?:k|kips?|lbs?|lbf|#|k?n|mn)\Z", re.ASCII | re.IGNORECASE)
_ASSIGN = re.compile(r"([A-Za-z]\w*) ?= ?", re.ASCII)
_WITHIN = re.compile(
    r"(?<![\w.,'\"/-])[+-]?(?:\d[\d.,]*|\.\d+)"
    r"(?:[kKtT]| ?(?:kips?|lbs?|lbf|kN|MN|kgf|plf|klf|psf|ksf|kPa|tonnes?|tons?))(?![\w'\"])"
    r"|(?<![\w.,'\"])\d[\d.,]*#(?!\w)",
    re.ASCII | re.IGNORECASE,
)
_WRITE = "Write a number and its unit, as 18 kip or 80.1 kN."


@dataclass(frozen=True, slots=True, kw_only=True)
class Style:
    """How forces are written in one drawing: its unit of length and the office's settings.

    `bare_unit` is the unit of forces without one, "" where they stop; `upward_sign` is "-"
    where a minus or UP means uplift, "" where such a load stops.
    """

    length_unit: str
    bare_unit: str = ""
    decimal_comma: bool = False
    upward_sign: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Force:
    """A force as written: `value` in `unit`, positive down.

    `note` says what was assumed; `is_bare` where the unit is not in the text.
    """

    value: float
    unit: str
    note: str = ""
    is_bare: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class CaseForce:
    """The force of one load case; `case` is `load` where the text names none."""

    case: str
    force: Force


@dataclass(frozen=True, slots=True, kw_only=True)
class LoadText:
    """What a load text says, in its own order, and what was added up or assumed on the way."""

    cases: tuple[CaseForce, ...]
    notes: tuple[str, ...] = ()


def parse_force(text: str, style: Style) -> Force:
    """Read one force.

    Parameters
    ----------
    text : str
        As "18k", "18,000#", "80.1 kN".
    style : Style
        `k` is kip and commas group thousands only in inch and foot drawings.

    Returns
    -------
    Force

    Raises
    ------
    QuantityError
        Whatever may mean two things: tonnes, masses, signs without a rule, loads by length or
        area, several values, levels, repeats, letters among digits. Common practice.

    Examples
    --------
    >>> parse_force("18 K", Style(length_unit="ft"))
    Force(value=18.0, unit='kip', note='', is_bare=False)
    """
    plain = tidy(text)
    _refuse_shapes(text, plain)
    match = _FORCE.match(plain)
    if match is None:
        message = f'"{text}" is no force'
        raise QuantityError(Doubt.LOAD_UNREAD, message, _WRITE)
    sign, unit_text, rest = match["sign"], match["unit"], match["rest"].strip()
    if _word(unit_text) in _UP | _DOWN | _REPEATS | _LEVELS:
        unit_text, rest = "", f"{unit_text} {rest}".strip()
    direction = _direction(text, rest)
    unit, note = _unit(text, unit_text.rstrip("."), style)
    value, _ = read_number(
        match["number"],
        decimal_comma=style.decimal_comma,
        comma_groups=is_imperial(style.length_unit),
    )
    value *= _sense(text, sign, direction, style)
    return Force(value=value, unit=unit, note=note, is_bare=not unit_text)


def _refuse_shapes(text: str, plain: str) -> None:
    """Stop on shapes that hold more, or less, than one number with a unit."""
    if plain.startswith("(") and plain.endswith(")"):
        message = f'"{text}" in brackets may be uplift, a remark or another level'
        raise QuantityError(Doubt.LOAD_SIGN, message, "Write the load without brackets.")
    if _MANY.match(plain):
        message = f'"{text}" stands for several loads'
        raise QuantityError(Doubt.LOAD_REPEATED, message, "Write each load at its own point.")
    if _MIXED.match(plain):
        message = f'"{text}" may be a fraction or two values'
        raise QuantityError(Doubt.NUMBER_AMBIGUOUS, message, "Write decimals.")
    if _SLASHED.match(plain):
        message = f'"{text}" has several values and no load case letters'
        remedy = "Write each with its case, as D=10k L=14k."
        raise QuantityError(Doubt.LOAD_CASES_UNLABELLED, message, remedy)
    typo = _TYPO.match(plain)
    if typo and _word(typo[2]) in {"", "k", "n", "mn", *_UNITS, *_TONS, *_MASSES, *_DISTRIBUTED}:
        places = [f"letter {c} at place {i}" for i, c in enumerate(plain, 1) if c in "lIOo|"]
        places = places[: sum(c in "lIOo|" for c in typo[1])]
        message = f'"{text}" has letters among its digits: {", ".join(places)}'
        raise QuantityError(Doubt.LOAD_TYPO, message, "Write 1 and 0 as digits.")


def _word(text: str) -> str:
    return text.replace(".", "").casefold()


def _direction(text: str, rest: str) -> str:
    """Read what follows a force: nothing, UP or DOWN; all else stops."""
    words = {_word(w) for w in re.split(r"[\s(),;]+", rest)} - {""}
    if words & _REPEATS or {"u", "n", "o"} <= words:
        message = f'"{text}" stands for several loads'
        raise QuantityError(Doubt.LOAD_REPEATED, message, "Write each load at its own point.")
    if words & _LEVELS:
        message = f'"{text}" names a level, not a load case'
        remedy = "Write service loads by case letter, as D=12k L=6k; --combo factors them."
        raise QuantityError(Doubt.LOAD_LEVEL, message, remedy)
    if len(words) == 1 and words <= _UP:
        return "up"
    if len(words) == 1 and words <= _DOWN:
        return "down"
    if rest:
        message = f'"{text}" has more than a number and its unit'
        raise QuantityError(Doubt.LOAD_UNREAD, message, _WRITE)
    return ""


def _sense(text: str, sign: str, direction: str, style: Style) -> int:
    """Give 1 for down and -1 for up, where the office's rule says so."""
    if not sign and direction in {"", "down"}:
        return 1
    if style.upward_sign and not (sign and direction):
        return -1 if sign == style.upward_sign or direction == "up" else 1
    message = f'"{text}" may act upward'
    remedy = 'Write downward loads without a sign; for uplift set upward_sign = "-" in [units].'
    raise QuantityError(Doubt.LOAD_SIGN, message, remedy)


def _unit(text: str, unit: str, style: Style) -> tuple[str, str]:
    """Give the unit that a text names, and a note where the office's settings decided."""
    folded = _word(unit) if unit != "." else ""
    if not unit:
        if style.bare_unit:
            return style.bare_unit, ""
        message = f'"{text}" has no unit'
        raise QuantityError(Doubt.LOAD_UNIT_MISSING, message, "Write it, or give --force-unit.")
    if folded in _UNITS:
        return _UNITS[folded], ""
    if unit in {"N", "MN"}:
        return unit, ""
    if folded == "k":
        if is_imperial(style.length_unit):
            return "kip", ""
        message = f'"{text}" in a {style.length_unit} drawing may be kip or a thousand'
        raise QuantityError(Doubt.LOAD_UNIT_AMBIGUOUS, message, "Write kip or kN.")
    if folded in _TONS:
        message = f'"{text}" may be tonne or short ton'
        raise QuantityError(Doubt.LOAD_UNIT_AMBIGUOUS, message, "Write kN or kip.")
    if folded in _MASSES:
        if folded == "kg" and style.bare_unit == "kgf":
            return "kgf", f'"{text}" is taken as kgf with g = 9.80665 m/s2'
        message = f'"{text}" is a mass'
        raise QuantityError(Doubt.LOAD_IS_MASS, message, "Write the force in kN, kip or kgf.")
    if folded in _DISTRIBUTED or "/" in unit:
        message = f'"{text}" is a load by length or area'
        raise QuantityError(Doubt.LOAD_DISTRIBUTED, message, "Write the force at this point.")
    message = f'"{unit}" in "{text}" is no unit of force'
    raise QuantityError(Doubt.LOAD_UNIT_UNKNOWN, message, _WRITE)


def parse_load_text(text: str, style: Style, cases: Cases) -> LoadText:
    """Read the loads of one point, by case or as one.

    Parameters
    ----------
    text : str
        As "18k", "D=12k L=6k" or "D = 12 kip, L = 6 kip".
    style : Style
    cases : Cases
        Letters and aliases; two entries of one case add up, with a note.

    Returns
    -------
    LoadText
        One case `load` where the text names none.

    Raises
    ------
    QuantityError
        As `parse_force`; also an unknown case letter.
    """
    plain = tidy(text)
    marks = list(_ASSIGN.finditer(plain))
    if not marks:
        force = parse_force(text, style)
        notes = (force.note,) if force.note else ()
        return LoadText(cases=(CaseForce(case="load", force=force),), notes=notes)
    if plain[: marks[0].start()].strip():
        message = f'"{text}" has words before its first load case'
        raise QuantityError(Doubt.LOAD_UNREAD, message, "Write only D=12k L=6k and the like.")
    found: dict[str, Force] = {}
    remarks: list[str] = []
    ends = [m.start() for m in marks[1:]] + [len(plain)]
    for mark, end in zip(marks, ends, strict=True):
        case = cases.find(mark[1])
        if case is None:
            message = f'"{mark[1]}" in "{text}" is no load case'
            remedy = f"Known: {', '.join(cases.letters)}; the settings may add aliases."
            raise QuantityError(Doubt.LOAD_CASE_UNKNOWN, message, remedy)
        force = parse_force(plain[mark.end() : end].strip(" ,;"), style)
        if force.note:
            remarks.append(force.note)
        if case in found:
            force = add(found[case], force)
            remarks.append(f'"{text}" names case {case} more than once; its values are added')
        found[case] = force
    pairs = tuple(CaseForce(case=case, force=force) for case, force in found.items())
    return LoadText(cases=pairs, notes=tuple(dict.fromkeys(remarks)))


def add(first: Force, second: Force) -> Force:
    """Add two forces in the unit of the first."""
    value = first.value + convert(second.value, second.unit, first.unit)
    return Force(value=value, unit=first.unit, is_bare=first.is_bare or second.is_bare)


def looks_like_force(text: str) -> bool:
    """Say whether a text states a force, or tries to; "P3" or "see detail" does not.

    Parameters
    ----------
    text : str

    Returns
    -------
    bool
        True also for texts that `parse_load_text` stops on, such as "8.2 t" or "l2k".
    """
    plain = tidy(text)
    style = Style(length_unit="ft", bare_unit="kip", upward_sign="-")
    if _WITHIN.search(plain):
        return True
    if re.search(r"\b[A-Za-z]{1,3}\d* ?= ?[+-]?[.\d]", plain):
        return True
    try:
        parse_force(plain.strip("()[] "), style)
    except QuantityError as error:
        return error.code not in {Doubt.LOAD_UNREAD, Doubt.LOAD_UNIT_UNKNOWN, Doubt.NUMBER_UNREAD}
    return True
