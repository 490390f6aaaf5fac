"""Quantities of one drawing in words: its units, its digits, elevations or differences."""

from __future__ import annotations

from dataclasses import dataclass

from dxfcable.quantities import format_elevation, format_force, format_length

_LOAD_DIGITS = 6  # a load is the drafter's own number: shown as he wrote it, not rounded to three


@dataclass(frozen=True, slots=True, kw_only=True)
class Wording:
    """How one cable's numbers are written.

    Attributes
    ----------
    length_unit, force_unit : str
        Of the drawing.
    digits : int
        Significant digits of forces.
    has_datum : bool
        Elevations are those of a datum; else heights are differences from `reference`.
    reference : float
        Ordinate of the left support as drawn [length].
    """

    length_unit: str
    force_unit: str
    digits: int
    has_datum: bool = True
    reference: float = 0.0

    def force(self, value: float) -> str:
        """Write a computed force."""
        return format_force(value, self.force_unit, self.digits)

    def load(self, value: float) -> str:
        """Write a load, which is given and not computed."""
        return format_force(value, self.force_unit, _LOAD_DIGITS, is_trimmed=True)

    def moment(self, value: float) -> str:
        """Write a moment, its unit that of force times that of length."""
        return f"{self.force(value)} {self.length_unit}"

    def weight(self, value: float) -> str:
        """Write a weight by length."""
        return f"{self.load(value)}/{self.length_unit}"

    def length(self, value: float) -> str:
        """Write a length."""
        return format_length(value, self.length_unit)

    def level(self, elevation: float) -> str:
        """Write a height: "EL 12.345" over a datum, else the signed difference, "-2.400"."""
        if self.has_datum:
            return format_elevation(elevation, self.length_unit)
        text = format_elevation(elevation - self.reference, self.length_unit).removeprefix("EL ")
        return text if text.startswith("-") else f"+{text}"
