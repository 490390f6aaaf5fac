"""Which values the settings may not have."""

from __future__ import annotations

from dataclasses import fields
from typing import TYPE_CHECKING, NoReturn

from dxfcable.errors import DxfcableError
from dxfcable.scales import read_plot_scale
from dxfcable.units import FORCE_UNITS, QuantityError

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.settings import Settings

_ILLEGAL = '<>/\\":;?*|,=`'
_SIZES = (
    *("A0", "A1", "A2", "A3", "A4", "ANSI-A", "ANSI-B", "ANSI-C", "ANSI-D", "ANSI-E"),
    *("ARCH-A", "ARCH-B", "ARCH-C", "ARCH-D", "ARCH-E", "ARCH-E1"),
)


class SettingsError(DxfcableError, ValueError):
    """The settings' text has a key that is not known, or a value that cannot be."""

    code = "settings"


def refusal(key: str, what: str, remedy: str) -> SettingsError:
    """Make the error that names a key of the settings."""
    message = f"Settings: {key} {what}."
    return SettingsError(message, remedy=remedy)


def _fail(key: str, what: str, remedy: str) -> NoReturn:
    raise refusal(key, what, remedy)


def check(settings: Settings) -> None:
    """Refuse names and choices that cannot be; see `settings.load`."""
    _check_names(settings)
    units, cases, limits = settings.units, settings.cases, settings.limits
    _choice("units.force", units.force, ("", *FORCE_UNITS))
    _choice("units.upward_sign", units.upward_sign, ("", "-"))
    _choice("strength.level", settings.strength.level, ("service", "factored"))
    _choice("sheet.size", settings.sheet.size, _SIZES)
    tags = [*cases.letters, *(tag for tag, _ in cases.alias)]
    folded = [tag.casefold() for tag in tags]
    for tag in tags:
        if not tag.isidentifier() or folded.count(tag.casefold()) > 1:
            _fail("cases", f"has {tag!r} twice, or it is no word", "Write each case once.")
    for tag, letter in cases.alias:
        if letter not in cases.letters:
            _fail(f"cases.alias.{tag}", f"is {letter!r}", "Name one of cases.letters.")
    for key, (low, high) in (("span_m", limits.span_m), ("sag_ratio", limits.sag_ratio)):
        if low >= high:
            _fail(f"limits.{key}", f"is [{low}, {high}]", "Write the smaller number first.")
    if not 0 < limits.touch <= 0.01:
        _fail("limits.touch", f"is {limits.touch}", "Write a number from 1e-9 to 0.01.")
    if limits.text_ratio < 1:
        _fail("limits.text_ratio", f"is {limits.text_ratio}", "Write 1 or more.")
    if not 1 <= settings.show.force_digits <= 12:
        _fail("show.force_digits", f"is {settings.show.force_digits}", "Write 1 to 12.")
    for key in ("text_mm", "text_in"):
        if getattr(settings.show, key) == 0:
            _fail(f"show.{key}", "is 0", "Write the plotted height of texts.")
    _check_cut_length(settings)
    if settings.show.plot_scale:
        try:
            read_plot_scale(settings.show.plot_scale)
        except QuantityError as error:
            what = f"is {settings.show.plot_scale!r}"
            _fail("show.plot_scale", what, error.remedy)


def _check_cut_length(settings: Settings) -> None:
    """Refuse forces that do not read in any drawing."""
    if not settings.cut_length.marks:
        return
    from dxfcable.quantities import Style, parse_stiffness
    from dxfcable.units import Doubt

    style = Style(
        length_unit="ft",
        bare_unit=settings.units.force,
        decimal_comma=settings.units.decimal_comma,
    )
    for mark, stated in settings.cut_length.marks:
        for key in ("measuring_tension", "hanger_ea"):
            text = getattr(stated, key)
            try:
                if text:
                    parse_stiffness(text, style)
            except QuantityError as error:
                is_negative = error.code == Doubt.LOAD_SIGN.value
                remedy = f"A {key} is above zero, such as 60 kN." if is_negative else error.remedy
                _fail(f"cut_length.marks.{mark}.{key}", f"is {text!r}", remedy)


def _choice(key: str, value: str, choices: tuple[str, ...]) -> None:
    if value not in choices:
        _fail(key, f"is {value!r}", f"Write one of: {', '.join(repr(c) for c in choices)}.")


def _check_names(settings: Settings) -> None:
    """Refuse names that CAD programs refuse, and one name for two roles."""
    layers = settings.layers
    for table, names in (("layers", layers), ("blocks", settings.blocks)):
        for f in fields(names):
            name = getattr(names, f.name)
            is_plain = name.isprintable() and name.strip() == name
            if not name or not is_plain or len(name) > 255 or set(name) & set(_ILLEGAL):
                remedy = f"Names have 1 to 255 characters without {' '.join(_ILLEGAL)}"
                _fail(f"{table}.{f.name}", f"is {name!r}", f"{remedy} or blanks at their ends.")
    _check_apart("layers", {role: layers.name(role) for role in layers.input_roles()})
    blocks = settings.blocks
    _check_apart("blocks", {f.name: getattr(blocks, f.name) for f in fields(blocks)})
    inputs = {layers.name(role).casefold(): role for role in layers.input_roles()}
    for role in layers.output_roles():
        other = inputs.get(layers.name(role).casefold())
        if other is not None:
            remedy = "What is written needs layers apart from what is read."
            _fail(f"layers.{role}", f"is the layer of {other}", remedy)


def _check_apart(table: str, names: Mapping[str, str]) -> None:
    """Refuse one name for two roles."""
    seen: dict[str, str] = {}
    for role, name in names.items():
        other = seen.setdefault(name.casefold(), role)
        if other != role:
            _fail(f"{table}.{role}", f"is the name of {other} too", "Give each its own name.")
