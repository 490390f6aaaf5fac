"""Units of length and force, exact factors between them, and numbers as drafters write them."""

from __future__ import annotations

import enum
import math
import re

from dxfcable.errors import DxfcableError

# Exact fractions of the SI unit (numerator, denominator). The international foot is 0.3048 m,
# the US survey foot 1200/3937 m, the pound-force 4.4482216152605 N, g 9.80665 m/s2.
_LENGTHS: dict[str, tuple[int, int]] = {
    "in": (254, 10_000),
    "ft": (3048, 10_000),
    "us-ft": (1200, 3937),
    "mm": (1, 1000),
    "cm": (1, 100),
    "dm": (1, 10),
    "m": (1, 1),
}
_FORCES: dict[str, tuple[int, int]] = {
    "lb": (44_482_216_152_605, 10**13),
    "kip": (44_482_216_152_605, 10**10),
    "N": (1, 1),
    "kN": (1000, 1),
    "MN": (1_000_000, 1),
    "kgf": (980_665, 100_000),
}
LENGTH_UNITS = tuple(_LENGTHS)
FORCE_UNITS = tuple(_FORCES)
IMPERIAL_LENGTHS = frozenset({"in", "ft", "us-ft"})
INSUNITS = {1: "in", 2: "ft", 21: "us-ft", 4: "mm", 5: "cm", 14: "dm", 6: "m"}


class Doubt(enum.StrEnum):
    """Why a text is not read as a quantity."""

    NUMBER_UNREAD = "number-unread"
    NUMBER_AMBIGUOUS = "number-ambiguous"
    LOAD_UNREAD = "load-unread"
    LOAD_TYPO = "load-typo"
    LOAD_UNIT_MISSING = "load-unit-missing"
    LOAD_UNIT_AMBIGUOUS = "load-unit-ambiguous"
    LOAD_UNIT_UNKNOWN = "load-unit-unknown"
    LOAD_IS_MASS = "load-is-mass"
    LOAD_SIGN = "load-sign"
    LOAD_DISTRIBUTED = "load-distributed"
    LOAD_LEVEL = "load-level"
    LOAD_REPEATED = "load-repeated"
    LOAD_CASES_UNLABELLED = "load-cases-unlabelled"
    LOAD_CASE_UNKNOWN = "load-case-unknown"
    LENGTH_UNREAD = "length-unread"
    LENGTH_AMBIGUOUS = "length-ambiguous"
    WEIGHT_UNREAD = "weight-unread"
    PRESSURE_UNREAD = "pressure-unread"
    TEMPERATURE_UNREAD = "temperature-unread"
    EXPANSION_UNREAD = "expansion-unread"
    PLOT_SCALE_UNREAD = "plot-scale-unread"


class QuantityError(DxfcableError, ValueError):
    """A text that is no quantity, or may be two; `code` names the doubt, `remedy` ends it."""

    def __init__(self, doubt: Doubt, message: str, remedy: str) -> None:
        super().__init__(message, code=doubt.value, remedy=remedy)


def factor(source: str, target: str) -> tuple[int, int]:
    """Give the exact fraction that turns a value in `source` into one in `target`.

    Parameters
    ----------
    source, target : str
        Two units of length, or two of force.

    Returns
    -------
    tuple of int
        Numerator and denominator in lowest terms.

    Raises
    ------
    ValueError
        If a unit is not known, or one is a length and the other a force.

    Examples
    --------
    >>> factor("ft", "in")
    (12, 1)
    """
    for table in (_LENGTHS, _FORCES):
        if source in table and target in table:
            (a, b), (c, d) = table[source], table[target]
            common = math.gcd(a * d, b * c)
            return a * d // common, b * c // common
    message = f"no factor between {source!r} and {target!r}"
    raise ValueError(message)


def convert(value: float, source: str, target: str) -> float:
    """Convert a length or force from one unit to another.

    Parameters
    ----------
    value : float
        In `source`.
    source, target : str
        Two units of length, or two of force.

    Returns
    -------
    float
        In `target`; unchanged, bit for bit, where the units are the same.

    Examples
    --------
    >>> convert(18.0, "kip", "lb")
    18000.0
    """
    numerator, denominator = factor(source, target)
    return value * numerator / denominator


def is_imperial(length_unit: str) -> bool:
    """Say whether a drawing's unit is the inch or one of the two feet."""
    return length_unit in IMPERIAL_LENGTHS


_SPACES = re.compile(r"[\s\u00a0\u2007\u2009\u202f]+")
_SAME = str.maketrans(
    {
        "\u2212": "-",
        "\u2013": "-",
        "\u2018": "'",
        "\u2019": "'",
        "\u2032": "'",
        "\u201c": '"',
        "\u201d": '"',
        "\u2033": '"',
    }
)


def tidy(text: str) -> str:
    """Reduce all kinds of blank, minus, foot and inch mark to the plain ones."""
    return _SPACES.sub(" ", text.translate(_SAME)).strip().replace("''", '"')


_PLAIN = re.compile(r"(?:\d+\.?\d*|\.\d+)\Z", re.ASCII)
_BLANK_GROUPS = re.compile(r"\d{1,3}(?: \d{3})+(?:\.\d+)?\Z", re.ASCII)
_COMMA_GROUPS = re.compile(r"\d{1,3}(?:,\d{3})+(?:\.\d+)?\Z", re.ASCII)
_DECIMAL_COMMA = re.compile(r"\d+(?: \d{3})*,\d+\Z", re.ASCII)
_POINT_GROUP = re.compile(r"\d{1,3}(?:\.\d{3})+\Z", re.ASCII)


def read_number(text: str, *, decimal_comma: bool, comma_groups: bool) -> tuple[float, int]:
    """Read an unsigned number.

    Parameters
    ----------
    text : str
        Digits with at most a decimal mark and blanks or commas between thousands.
    decimal_comma : bool
        The office writes 80,1 for 80.1.
    comma_groups : bool
        A comma groups thousands, as on US sheets.

    Returns
    -------
    value : float
    decimals : int
        How many digits stand behind the decimal mark.

    Raises
    ------
    QuantityError
        `number-ambiguous` where the comma or point may be either mark, `number-unread` else.
    """
    if decimal_comma and _POINT_GROUP.match(text):
        message = f'the point in "{text}" may group thousands or mark decimals'
        remedy = "Write it without grouping, decimals behind a comma."
        raise QuantityError(Doubt.NUMBER_AMBIGUOUS, message, remedy)
    plain = text.replace(" ", "")
    if _PLAIN.match(text) or _BLANK_GROUPS.match(text):
        pass
    elif decimal_comma and _DECIMAL_COMMA.match(text):
        plain = plain.replace(",", ".")
    elif comma_groups and not decimal_comma and _COMMA_GROUPS.match(text):
        plain = plain.replace(",", "")
    elif "," in text and re.fullmatch(r"[\d., ]+", text):
        message = f'the comma in "{text}" may group thousands or mark decimals'
        remedy = "Write a decimal point and no grouping, or set decimal_comma in the settings."
        raise QuantityError(Doubt.NUMBER_AMBIGUOUS, message, remedy)
    else:
        message = f'"{text}" is no number'
        raise QuantityError(Doubt.NUMBER_UNREAD, message, "Write digits with one decimal point.")
    value = float(plain)
    if not math.isfinite(value):
        message = f'"{text}" is too large a number'
        raise QuantityError(Doubt.NUMBER_UNREAD, message, "Write a number of usual size.")
    return value, len(plain.partition(".")[2])
