"""What an office sets once: layer names, units, limits, strength, sheets; all with defaults.

A TOML text overrides what it names. The caller finds and reads the file; nothing here does.
"""

from __future__ import annotations

import tomllib
from dataclasses import dataclass, field, fields

from dxfcable.settings_checks import SettingsError, check, refusal
from dxfcable.settings_cut_length import CutLength, Fitting, read_cut_length
from dxfcable.settings_page import PAGE
from dxfcable.settings_values import table

__all__ = ["Fitting", "Settings", "SettingsError", "default_page", "load"]


@dataclass(frozen=True, slots=True, kw_only=True)
class Layers:
    """Layer name of each role: what is read, and from `profile` on what is written."""

    support: str = "S-CABL-SUPP"
    string: str = "S-CABL-STRG"
    load: str = "S-CABL-LOAD"
    data: str = "S-CABL-DATA"
    mast: str = "S-CABL-MAST"
    stay: str = "S-CABL-STAY"
    anchor: str = "S-CABL-ANCH"
    deck: str = "S-CABL-DECK"
    clearance: str = "S-CABL-CLRN"
    hold_down: str = "S-CABL-HOLD"
    area: str = "S-CABL-AREA"
    plan_point: str = "S-CABL-PLAN"
    frame: str = "S-CABL-FRAM"
    profile: str = "S-CABL-PROF"
    closing_string: str = "S-CABL-CLSG"
    force_diagram: str = "S-CABL-FORC"
    letters: str = "S-CABL-BOWN"
    tension: str = "S-CABL-TENS"
    elevation: str = "S-CABL-ELEV"
    reaction: str = "S-CABL-REAC"
    hanger: str = "S-CABL-HANG"
    table: str = "S-CABL-TABL"
    revision: str = "S-CABL-REVN"

    def name(self, role: str) -> str:
        """Give the layer name of a role, e.g. of `profile`."""
        value: str = getattr(self, role)
        return value

    def input_roles(self) -> tuple[str, ...]:
        """List the roles that the drafter draws, in the page's order."""
        names = [f.name for f in fields(self)]
        return tuple(names[: names.index("profile")])

    def output_roles(self) -> tuple[str, ...]:
        """List the roles that are written, in the page's order."""
        names = [f.name for f in fields(self)]
        return tuple(names[names.index("profile") :])

    def role(self, layer: str) -> str | None:
        """Find the role that a decoded layer name has for reading, without regard to case."""
        folded = layer.strip().casefold()
        for role in self.input_roles():
            if self.name(role).casefold() == folded:
                return role
        return None


@dataclass(frozen=True, slots=True, kw_only=True)
class Blocks:
    """Names of the blocks that carry attributes."""

    support: str = "CABLE-SUPPORT"
    load: str = "CABLE-LOAD"
    data: str = "CABLE-DATA"
    anchor: str = "CABLE-ANCHOR"


@dataclass(frozen=True, slots=True, kw_only=True)
class Units:
    """How the office writes forces."""

    force: str = ""
    decimal_comma: bool = False
    upward_sign: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Cases:
    """Load case letters, and other tags for them."""

    letters: tuple[str, ...] = (
        *("D", "L", "Lr", "S", "R", "W", "E"),
        *("H", "F", "T", "G", "P", "Q", "A"),
    )
    alias: tuple[tuple[str, str], ...] = (
        ("DL", "D"),
        ("SDL", "D"),
        ("LL", "L"),
        ("RL", "Lr"),
        ("SL", "S"),
        ("WL", "W"),
        ("EQ", "E"),
    )

    def find(self, tag: str) -> str | None:
        """Give the case that a tag names, itself or by alias, without regard to case."""
        folded = tag.casefold()
        for letter in self.letters:
            if letter.casefold() == folded:
                return letter
        for other, letter in self.alias:
            if other.casefold() == folded:
                return letter
        return None


@dataclass(frozen=True, slots=True, kw_only=True)
class Limits:
    """Tolerances and bounds; see the page for each one's unit."""

    text_reach: float = 6.0
    text_ratio: float = 1.5
    touch: float = 1e-5
    min_pull: float = 0.02
    lean_deg: float = 2.0
    movement: float = 0.0
    span_m: tuple[float, float] = (3.0, 1000.0)
    sag_ratio: tuple[float, float] = (0.02, 0.2)


@dataclass(frozen=True, slots=True, kw_only=True)
class Show:
    """How results are written."""

    plot_scale: str = ""
    text_mm: float = 2.5
    text_in: float = 0.09375
    text_style: str = ""
    force_digits: int = 3
    reference_temperature: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Strength:
    """Factor between breaking force and capacity, and where strands are listed."""

    factor: float = 0.0
    level: str = "service"
    edition: str = ""
    strand_table: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class AnchorDefaults:
    """What holds for anchors whose block does not say; 0 is not stated."""

    mu: float = 0.0
    sliding: float = 0.0
    uplift: float = 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Sheet:
    """Size and title block of the force-diagram sheets."""

    size: str = "A1"
    owner: str = ""
    project: str = ""
    number_prefix: str = "FD-"
    title: str = ""
    drawn: str = ""
    checked: str = ""
    approved: str = ""
    date: str = ""
    status: str = ""
    language: str = "en"


@dataclass(frozen=True, slots=True, kw_only=True)
class Settings:
    """All settings of an office."""

    layers: Layers = field(default_factory=Layers)
    blocks: Blocks = field(default_factory=Blocks)
    units: Units = field(default_factory=Units)
    cases: Cases = field(default_factory=Cases)
    limits: Limits = field(default_factory=Limits)
    show: Show = field(default_factory=Show)
    strength: Strength = field(default_factory=Strength)
    anchor: AnchorDefaults = field(default_factory=AnchorDefaults)
    sheet: Sheet = field(default_factory=Sheet)
    cut_length: CutLength = field(default_factory=CutLength)

    def fitting(self, name: str) -> Fitting | None:
        """Find an end fitting by its name, without regard to case."""
        return self.cut_length.fitting(name)


def default_page() -> str:
    """Give the settings page: each key with its default and what it is for.

    Returns
    -------
    str
        TOML text; `load` reads it back as the defaults.
    """
    return PAGE


def load(text: str) -> Settings:
    """Read a settings page; what it does not name keeps its default.

    Parameters
    ----------
    text : str
        TOML.

    Returns
    -------
    Settings

    Raises
    ------
    SettingsError
        With code `settings`, naming the key: not TOML, an unknown table or key, a wrong type,
        or a value that cannot be.
    """
    try:
        page = tomllib.loads(text)
    except tomllib.TOMLDecodeError as error:
        message = f"The settings are not TOML: {error}."
        raise SettingsError(message, remedy="Correct that line.") from error
    defaults = Settings()
    known = [f.name for f in fields(defaults)]
    for name, content in page.items():
        if name not in known:
            raise refusal(name, "is no table of the settings", f"Known: {', '.join(known)}.")
        if not isinstance(content, dict):
            raise refusal(name, "is a table", f"Write [{name}] and its keys below.")
    settings = Settings(
        layers=table("layers", page, defaults.layers),
        blocks=table("blocks", page, defaults.blocks),
        units=table("units", page, defaults.units),
        cases=table("cases", page, defaults.cases),
        limits=table("limits", page, defaults.limits),
        show=table("show", page, defaults.show),
        strength=table("strength", page, defaults.strength),
        anchor=table("anchor", page, defaults.anchor),
        sheet=table("sheet", page, defaults.sheet),
        cut_length=read_cut_length(page.get("cut_length", {})),
    )
    check(settings)
    return settings
