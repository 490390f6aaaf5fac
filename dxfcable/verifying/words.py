"""Our own labels read back: a number with half the worth of its last place."""

from __future__ import annotations

import enum
import math
import re
from dataclasses import dataclass

from dxfcable.lengths import parse_length
from dxfcable.model import RuleKind
from dxfcable.units import FORCE_UNITS, QuantityError, convert, is_imperial

_FORCE = re.compile(r"(?P<number>[+-]?\d+(?:\.\d+)?) (?P<unit>[A-Za-z]+)\Z", re.ASCII)
_SCALE = re.compile(r"FORCE 1 (?P<length>[\w-]+) = (?P<number>\d[\d.e+-]*) (?P<force>\w+)\Z")
_PLOTTED = re.compile(r"PLOTTED: 1 (?P<length>\w+) = (?P<number>\d[\d.e+-]*) (?P<force>\w+)\Z")
_LOAD_DIGITS = 6  # of loads and of other given numbers
_SIXTEENTH = 192.0  # of a foot
_LOOSE = 1.0 + 1e-9  # a value on the very edge of its rounding
_RULES = {
    "LARGEST TENSION ": RuleKind.MAX_TENSION,
    "PULL ": RuleKind.PULL,
    "SAG ": RuleKind.SAG,
    "LOW POINT ": RuleKind.LOW_POINT,
    "LENGTH ": RuleKind.LENGTH,
    "UNSTRESSED LENGTH ": RuleKind.CUT_LENGTH,
    "THROUGH X ": RuleKind.THROUGH,
}
_FORCE_RULES = (RuleKind.MAX_TENSION, RuleKind.PULL)


class Kind(enum.StrEnum):
    """What a label states behind its words."""

    FORCE = "force"
    LOAD = "load"
    LENGTH = "length"
    MOMENT = "moment"
    DEGREES = "slope"
    WORDS = "words"


@dataclass(frozen=True, slots=True, kw_only=True)
class Shown:
    """A number as shown: it stands for values within `half` of it."""

    value: float
    half: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Reader:
    """Reads the labels of one drawing.

    Attributes
    ----------
    length_unit, force_unit : str
        Values are given in these.
    digits : int
        Significant digits of computed forces.
    """

    length_unit: str
    force_unit: str
    digits: int

    def unit_of(self, kind: Kind) -> str:
        """Give the unit of what a label states."""
        match kind:
            case Kind.FORCE | Kind.LOAD:
                return self.force_unit
            case Kind.LENGTH:
                return self.length_unit
            case Kind.MOMENT:
                return f"{self.force_unit} {self.length_unit}"
            case Kind.DEGREES:
                return "deg"
            case Kind.WORDS:
                return ""

    def force(self, text: str) -> Shown | None:
        """Read a computed force such as "133 kip"; None where it is none."""
        return self._force(text, self.digits)

    def load(self, text: str) -> Shown | None:
        """Read a given force, whose zeros at the end are left out."""
        return self._force(text, _LOAD_DIGITS, is_trimmed=True)

    def _force(self, text: str, digits: int, *, is_trimmed: bool = False) -> Shown | None:
        match = _FORCE.match(text.strip())
        if match is None or match["unit"] not in FORCE_UNITS:
            return None
        value = float(match["number"])
        whole, _, decimals = match["number"].lstrip("+-").partition(".")
        place = 10.0 ** -len(decimals)
        if is_trimmed and value:
            place = 10.0 ** (math.floor(math.log10(abs(value))) + 1 - digits)
        elif not decimals and len(whole) > digits:
            coarse = 10 ** (len(whole) - digits)
            place = float(coarse) if int(whole) % coarse == 0 else 1.0
        place = place if value else 0.0  # a force that is not zero never shows as zero
        unit = match["unit"]
        return Shown(
            value=convert(value, unit, self.force_unit),
            half=convert(0.5 * place, unit, self.force_unit) * _LOOSE,
        )

    def moment(self, text: str) -> Shown | None:
        """Read a moment such as "12.3 kN m"."""
        force, _, length = text.strip().rpartition(" ")
        return self.force(force) if length == self.length_unit else None

    def length(self, text: str) -> Shown | None:
        """Read a length or an elevation, written to the millimetre or the sixteenth of an inch."""
        try:
            found = parse_length(text.strip(), self.length_unit)
        except QuantityError:
            return None
        place = found.last_place
        if is_imperial(self.length_unit):
            foot = "us-ft" if self.length_unit == "us-ft" else "ft"
            place = convert(1.0 / _SIXTEENTH, foot, self.length_unit)
        return Shown(value=found.value, half=0.5 * place * _LOOSE)

    def degrees(self, text: str) -> Shown | None:
        """Read a slope in degrees."""
        number = text.strip().removesuffix("\u00b0")
        try:
            return Shown(value=float(number), half=0.005 * _LOOSE)
        except ValueError:
            return None

    def rule(self, text: str) -> tuple[RuleKind, Shown, Shown | None] | None:
        """Read the schedule's words of a rule; the third is the elevation of THROUGH."""
        for words, kind in _RULES.items():
            if not text.startswith(words):
                continue
            rest = text.removeprefix(words)
            if kind is RuleKind.THROUGH:
                across, _, level = rest.rpartition(", ")
                first, second = self.length(across), self.length(level)
                return (kind, first, second) if first and second else None
            shown = self.load(rest) if kind in _FORCE_RULES else self.length(rest)
            return (kind, shown, None) if shown else None
        return None


@dataclass(frozen=True, slots=True, kw_only=True)
class ScaleWords:
    """A force scale in words: so much force by one length, on the drawing or on paper."""

    length_unit: str
    force_unit: str
    force: float
    half: float


def read_scale(text: str, *, is_plotted: bool = False) -> ScaleWords | None:
    """Read "FORCE 1 m = 10 kN", or "PLOTTED: 1 cm = 10 kN"; None for other texts."""
    match = (_PLOTTED if is_plotted else _SCALE).match(text.strip())
    if match is None or match["force"] not in FORCE_UNITS:
        return None
    value = float(match["number"])
    half = 0.5 * 10.0 ** (math.floor(math.log10(value)) + 1 - _LOAD_DIGITS) if value > 0 else 0.0
    return ScaleWords(
        length_unit=match["length"], force_unit=match["force"], force=value, half=half * _LOOSE
    )
