"""Deductions from the drawn geometry to the cut length, by end fitting and by mark."""

from __future__ import annotations

from dataclasses import dataclass, fields, replace
from typing import TYPE_CHECKING, TypeVar

from dxfcable.settings_checks import refusal
from dxfcable.settings_values import number, table

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

_T = TypeVar("_T")

MARKS = "marks"  # the one name in the table that is no fitting's
ALL = "*"
Ends = tuple[float, float]  # left and right
_ENDS = ("pin_offset", "pin_to_face", "embedment")
_LENGTHS = ("clamp_drop", "deck_pin", "constructional_stretch")


@dataclass(frozen=True, slots=True, kw_only=True)
class Fitting:
    """Deductions of one end fitting [drawing units]."""

    pin_to_face: float = 0.0
    embedment: float = 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Marked:
    """What is stated for one mark; None or "" is not stated.

    Attributes
    ----------
    pin_offset, pin_to_face, embedment : (float, float) or None
        At the left and right end of a cable [drawing units].
    measuring_tension, hanger_ea : str
        Forces with their unit, as "60 kN".
    constructional_stretch : float or None
        Share of its length that a cable which is not prestretched grows by.
    clamp_drop : float or None
        From the cable's centre line down to a hanger's upper pin [drawing units].
    deck_pin : float or None
        From the deck line up to a hanger's lower pin [drawing units].
    hanger_top, hanger_bottom : str
        End fittings of a hanger.
    """

    measuring_tension: str = ""
    pin_offset: Ends | None = None
    pin_to_face: Ends | None = None
    embedment: Ends | None = None
    constructional_stretch: float | None = None
    hanger_ea: str = ""
    clamp_drop: float | None = None
    deck_pin: float | None = None
    hanger_top: str = ""
    hanger_bottom: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class CutLength:
    """All deductions of an office; names compare without regard to case."""

    fittings: tuple[tuple[str, Fitting], ...] = ()
    marks: tuple[tuple[str, Marked], ...] = ()

    def fitting(self, name: str) -> Fitting | None:
        """Find an end fitting by its name."""
        return dict(_folded(self.fittings)).get(name.casefold())

    def stated(self, names: Sequence[str]) -> Marked:
        """Gather what is stated under any of some marks, value by value the first that states it.

        Examples
        --------
        >>> both = (("*", Marked(hanger_top="fork")), ("P1", Marked(deck_pin=0.1)))
        >>> found = CutLength(marks=both).stated(["P1", "*"])
        >>> found.deck_pin, found.hanger_top
        (0.1, 'fork')
        """
        known = dict(_folded(self.marks))
        result = Marked()
        for name in reversed(names):
            marked = known.get(name.casefold(), Marked())
            values = {f.name: getattr(marked, f.name) for f in fields(marked)}
            result = replace(result, **{k: v for k, v in values.items() if v not in (None, "")})
        return result


def read_cut_length(content: Mapping[str, object]) -> CutLength:
    """Read the table of deductions.

    Parameters
    ----------
    content : mapping
        A table for each fitting, and `marks` with a table for each mark.

    Raises
    ------
    SettingsError
        Naming the key that cannot be, or a name that stands there twice.
    """
    fittings = tuple(
        (name, table(name, content, Fitting(), "cut_length.")) for name in content if name != MARKS
    )
    marked = content.get(MARKS, {})
    if not isinstance(marked, dict):
        where = "cut_length.marks"
        raise refusal(where, "is a table", "Write [cut_length.marks.C1] and its keys below.")
    marks = tuple((name, _marked(name, values)) for name, values in marked.items())
    _check_once("cut_length", [name for name, _ in fittings])
    _check_once("cut_length.marks", [name for name, _ in marks])
    return CutLength(fittings=fittings, marks=marks)


def _marked(mark: str, values: object) -> Marked:
    """Read what is stated for one mark."""
    where = f"cut_length.marks.{mark}"
    keys = [f.name for f in fields(Marked)]
    if not isinstance(values, dict):
        raise refusal(where, "is a table", f"Known keys: {', '.join(keys)}.")
    found: dict[str, object] = {}
    for key, value in values.items():
        place = f"{where}.{key}"
        if key not in keys:
            raise refusal(place, "is no key of the settings", f"Known: {', '.join(keys)}.")
        found[key] = _value(place, key, value)
    return replace(Marked(), **found)  # type: ignore[arg-type]  # each value was read by its key


def _value(where: str, key: str, value: object) -> object:
    """Read one value by its key."""
    if key in _ENDS:
        both = value if isinstance(value, list) else [value, value]
        if len(both) != 2:
            raise refusal(where, f"is {value!r}", "Write one number, or [left, right].")
        return number(where, both[0]), number(where, both[1])
    if key in _LENGTHS:
        found = number(where, value)
        if key == "constructional_stretch" and found > 0.05:
            raise refusal(where, f"is {value!r}", "Write a share of the length, as 0.002.")
        return found
    if isinstance(value, str):
        return value.strip()
    raise refusal(where, f"is {value!r}", "Write a text in quotes.")


def _folded(pairs: Sequence[tuple[str, _T]]) -> list[tuple[str, _T]]:
    return [(name.casefold(), value) for name, value in pairs]


def _check_once(where: str, names: Sequence[str]) -> None:
    """Refuse one name in two spellings."""
    folded = [name.casefold() for name in names]
    for name in names:
        if folded.count(name.casefold()) > 1:
            place = f"{where}.{name}"
            raise refusal(place, "stands twice", "Write each name once.")
