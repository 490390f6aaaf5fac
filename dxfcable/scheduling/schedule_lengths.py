"""Cut lengths of cables and hangers: what the office states, applied to what was formed."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.quantities import QuantityError, Style, convert, parse_stiffness
from dxfcable.scheduling.schedule_rows import CutLengths, Deduction, Piece
from dxfcable.settings_checks import refusal
from dxfcable.settings_cut_length import ALL, Fitting
from dxfcable.statics.cut_lengths import (
    at_tension,
    between_pins,
    cut_length,
    running_marks,
    unstressed,
)

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, FormedCable, Layout
    from dxfcable.settings import Settings
    from dxfcable.solving.remarks import Remarks

_SIDES = ("left", "right")
_UPRIGHT = ("top", "bottom")
_EXCEED = "deductions-exceed"


@dataclass(frozen=True, slots=True, kw_only=True)
class _Fitted:
    """End fittings of one member, or why they are not known."""

    ends: tuple[Fitting, ...] = ()
    missing: str = ""


def cable_lengths(
    layout: Layout, cable: Cable, formed: FormedCable, settings: Settings, remarks: Remarks
) -> tuple[CutLengths, tuple[Piece, ...]]:
    """Find a cable's lengths from pin to pin, and what it is cut to.

    Returns
    -------
    tuple
        The lengths; its pieces.

    Raises
    ------
    SettingsError
        Where the measuring tension does not read in this drawing.
    """
    who = f"cable {cable.mark}"
    stated = settings.cut_length.stated([cable.mark, ALL])
    tension = _force(layout, settings, cable.mark, "measuring_tension", stated.measuring_tension)
    offsets = stated.pin_offset or (0.0, 0.0)
    ends = (formed.segments[0].tension_left, formed.segments[-1].tension_right)
    whole = [segment.unstressed_length for segment in formed.segments]
    fitted = _cable_ends(cable, settings, remarks)
    try:
        pieces: list[float] = between_pins(whole, offsets, ends, cable.ea).tolist()
    except ValueError as error:
        remarks.say(_EXCEED, f"{who}: {error}; its lengths are those from support to support")
        offsets, pieces, fitted = (0.0, 0.0), whole, _Fitted(missing=str(error))
    marks = running_marks(pieces)
    lengths = CutLengths(
        offsets=offsets,
        pin_to_pin=formed.length - offsets[0] - offsets[1],
        unstressed=marks[-1],
        measuring_tension=tension,
        measured=None if tension is None else at_tension(marks[-1], tension, cable.ea),
        fittings=(cable.fitting_left, cable.fitting_right),
    )
    lengths = _cut(lengths, fitted, _SIDES, stated.constructional_stretch or 0.0, who, remarks)
    _say_what_is_assumed(cable, formed, lengths, remarks)
    nodes = [node.mark for node in formed.nodes]
    rows = tuple(
        Piece(
            name=segment.name,
            start=nodes[k],
            end=nodes[k + 1],
            unstressed_length=segment.unstressed_length,
            mark=marks[k],
            measured_mark=None if tension is None else at_tension(marks[k], tension, cable.ea),
        )
        for k, segment in enumerate(formed.segments)
    )
    return lengths, rows


def hanger_lengths(
    layout: Layout,
    names: Sequence[str],
    length: float,
    force: float,
    settings: Settings,
    remarks: Remarks,
) -> tuple[float | None, CutLengths]:
    """Find what a hanger is cut to.

    Parameters
    ----------
    names : sequence of str
        Under which the settings may state its values, the first that does counts; the first
        names the hanger in findings.
    length : float
        From the cable's centre line to the deck line [length].
    force : float
        That it carries then [force].

    Returns
    -------
    tuple
        Its EA, None where it is not stated; its lengths.

    Raises
    ------
    SettingsError
        Where its stiffness does not read in this drawing.
    """
    who = f"hanger {names[0]}"
    stated = settings.cut_length.stated([*names, ALL])
    ea = _force(layout, settings, names[0], "hanger_ea", stated.hanger_ea)
    offsets = (stated.clamp_drop or 0.0, stated.deck_pin or 0.0)
    pins = length - offsets[0] - offsets[1]
    fittings = (stated.hanger_top, stated.hanger_bottom)
    fitted = _hanger_ends(who, fittings, settings, remarks)
    if pins <= 0.0:
        missing = "clamp_drop and deck_pin take up its whole length"
        remarks.say(_EXCEED, f"{who}: {missing}")
        return ea, CutLengths(
            offsets=offsets, pin_to_pin=pins, unstressed=None, fittings=fittings, missing=missing
        )
    lengths = CutLengths(
        offsets=offsets,
        pin_to_pin=pins,
        unstressed=None if ea is None else unstressed(pins, force, ea),
        fittings=fittings,
    )
    if ea is None:
        return ea, replace(lengths, missing="hanger_ea is not stated")
    return ea, _cut(lengths, fitted, _UPRIGHT, 0.0, who, remarks)


def _cut(
    lengths: CutLengths,
    fitted: _Fitted,
    sides: tuple[str, str],
    settling: float,
    who: str,
    remarks: Remarks,
) -> CutLengths:
    """Take off what the end fittings need, or say why that cannot be."""
    start = lengths.unstressed if lengths.measured is None else lengths.measured
    if fitted.missing or start is None:
        return replace(lengths, missing=fitted.missing)
    faces = [end.pin_to_face for end in fitted.ends]
    embedments = [end.embedment for end in fitted.ends]
    try:
        settled = cut_length(start, faces, embedments)
        cut = cut_length(start, faces, embedments, settling)
    except ValueError as error:
        remarks.say(_EXCEED, f"{who}: {error}")
        return replace(lengths, missing=str(error))
    steps = []
    for side, face, embedment in zip(sides, faces, embedments, strict=True):
        steps.append(Deduction(name="pin to face", end=side, value=-face + 0.0))
        steps.append(Deduction(name="embedment", end=side, value=embedment))
    if settling:
        steps.append(Deduction(name="constructional stretch", end="", value=cut - settled))
    return replace(lengths, deductions=tuple(steps), cut=cut)


def _cable_ends(cable: Cable, settings: Settings, remarks: Remarks) -> _Fitted:
    """Settle the deductions at both ends: the mark's, else the fitting's, else those of all."""
    own = settings.cut_length.stated([cable.mark])
    general = settings.cut_length.stated([ALL])
    ends, missing = [], []
    for k, name in enumerate((cable.fitting_left, cable.fitting_right)):
        fitting = settings.fitting(name) if name else None
        if name and fitting is None:
            missing.append(_unknown(f"cable {cable.mark}", name, remarks))
            continue
        values = []
        for key in ("pin_to_face", "embedment"):
            candidates = (getattr(own, key), getattr(general, key))
            of_own, of_all = (None if both is None else both[k] for both in candidates)
            of_fitting = getattr(fitting, key) if fitting else None
            values.append(next((v for v in (of_own, of_fitting, of_all) if v is not None), None))
        if values == [None, None]:
            missing.append(f"no end fitting is named at the {_SIDES[k]} end (FITTING_{'LR'[k]})")
            continue
        ends.append(Fitting(pin_to_face=values[0] or 0.0, embedment=values[1] or 0.0))
    return _Fitted(ends=tuple(ends), missing="; ".join(missing))


def _hanger_ends(who: str, names: tuple[str, str], settings: Settings, remarks: Remarks) -> _Fitted:
    """Find a hanger's end fittings."""
    ends, missing = [], []
    for side, name in zip(_UPRIGHT, names, strict=True):
        fitting = settings.fitting(name) if name else None
        if fitting is not None:
            ends.append(fitting)
        elif name:
            missing.append(_unknown(who, name, remarks))
        else:
            missing.append(f"hanger_{side} is not stated")
    return _Fitted(ends=tuple(ends), missing="; ".join(missing))


def _unknown(who: str, name: str, remarks: Remarks) -> str:
    """Say that the settings lack a fitting."""
    text = f'the settings have no end fitting "{name}" in [cut_length]'
    remarks.say("fitting-unknown", f"{who}: {text}; no cut length is given")
    return text


def _say_what_is_assumed(
    cable: Cable, formed: FormedCable, lengths: CutLengths, remarks: Remarks
) -> None:
    """Say under what a cut length holds."""
    who = f"cable {cable.mark}"
    if lengths.measured is None and lengths.cut is not None:
        remarks.say(
            "no-measuring-tension",
            f"{who}: the settings state no measuring_tension for it, so its cut length is the "
            "one without tension",
        )
    if lengths.measured is not None and cable.ea is None:
        remarks.say(
            "measured-inextensible",
            f"{who}: no EA is given; its length under the measuring tension is taken as the "
            "unstressed length",
        )
    if formed.status != "formed" and any(lengths.offsets):
        remarks.say(
            "pins-under-present-tension",
            f"{who} is cut: what its pin offsets replace is reckoned under its present tension",
        )


def _force(layout: Layout, settings: Settings, mark: str, key: str, text: str) -> float | None:
    """Read a force of the settings in the drawing's unit, None where it is not stated."""
    if not text:
        return None
    style = Style(
        length_unit=layout.length_unit,
        bare_unit=settings.units.force,
        decimal_comma=settings.units.decimal_comma,
    )
    try:
        force = parse_stiffness(text, style)
    except QuantityError as error:
        where = f"{key} of {mark} in [cut_length.marks]"
        raise refusal(where, f"is {text!r}", error.remedy) from error
    return convert(force.value, force.unit, layout.force_unit or force.unit)
