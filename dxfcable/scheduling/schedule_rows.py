"""What the schedules hold: cables, hangers and anchorages as values, nothing rounded.

Units and signs as in `model`. Where a length is None, `missing` says why.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.model import Anchorage, Extreme, Finding, Governs, Rule


@dataclass(frozen=True, slots=True, kw_only=True)
class LevelRange:
    """Largest and least of a force over the states of one level, service or factored.

    `is_assumed` where the level of one of these states was only inferred from its factors.
    """

    level: str
    is_assumed: bool
    most: Extreme
    least: Extreme


@dataclass(frozen=True, slots=True, kw_only=True)
class Deduction:
    """One step from the measured length to the cut length: what it adds, negative off [length].

    `end` is `left`, `right`, `top`, `bottom`, or "" for the whole member.
    """

    name: str
    end: str
    value: float


@dataclass(frozen=True, slots=True, kw_only=True)
class CutLengths:
    """From pin to pin to the cut length of one member.

    Attributes
    ----------
    offsets : (float, float)
        What lies between its drawn ends and its pins [length]: pin offsets at left and right
        of a cable, clamp drop and deck pin of a hanger.
    pin_to_pin : float
        As formed [length].
    unstressed : float or None
        Pin to pin without tension [length].
    measuring_tension, measured : float or None
        The tension stated for measuring [force], and the length pin to pin under it [length].
    fittings : tuple of str
        Names at left and right, or top and bottom; "" where none is named.
    deductions : tuple of Deduction
        Applied to `measured`, or to `unstressed` where no measuring tension is stated.
    cut : float or None
        [length].
    missing : str
        Why there is no cut length, "" where there is one.
    """

    offsets: tuple[float, float]
    pin_to_pin: float
    unstressed: float | None
    measuring_tension: float | None = None
    measured: float | None = None
    fittings: tuple[str, str] = ("", "")
    deductions: tuple[Deduction, ...] = ()
    cut: float | None = None
    missing: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Piece:
    """One piece of a cable between its clamps.

    Attributes
    ----------
    unstressed_length : float
        From node to node [length].
    mark, measured_mark : float or None
        Distance of its right end from the left pin, without tension and under the measuring
        tension [length]; of the last piece to the right pin.
    """

    name: str
    start: str
    end: str
    unstressed_length: float
    mark: float
    measured_mark: float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class CableRow:
    """One cable; lengths without `pin` run from support to support.

    `faults` pairs a combination with why it has no determinate shape.
    """

    mark: str
    status: str
    rule: Rule
    under: str
    level: str
    level_is_assumed: bool
    horizontal: float | None
    max_tension: float
    governs: Governs
    sag: float
    weight: float
    ea: float | None
    strand: str
    capacity: float | None
    utilization: float | None
    length: float
    unstressed_length: float
    lengths: CutLengths
    pieces: tuple[Piece, ...]
    tensions: tuple[LevelRange, ...]
    faults: tuple[tuple[str, str], ...]
    has_datum: bool
    reference: float  # elevation of the left support


@dataclass(frozen=True, slots=True, kw_only=True)
class HangerRow:
    """One hanger, from the cable's centre line down to the deck line or the drawn point.

    `length` and `force` are those under the combination that the cable was formed under;
    `slack` names the combinations in which its net load is zero or up.
    """

    cable: str
    mark: str
    x: float
    along: float  # from the left support
    elevation: float
    deck_elevation: float
    length: float
    force: float
    forces: tuple[LevelRange, ...]
    slack: tuple[str, ...]
    is_clamped: bool
    ea: float | None
    lengths: CutLengths
    has_datum: bool
    reference: float


@dataclass(frozen=True, slots=True, kw_only=True)
class AnchorageRow:
    """One support with mast or stay, in one state; `is_formed` for the state as formed.

    `stay_angles` are against the horizontal [degrees].
    """

    found: Anchorage
    combo: str
    level: str
    level_is_assumed: bool
    is_formed: bool
    stay_angles: tuple[float, ...]
    elevation: float
    has_datum: bool
    reference: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Schedules:
    """All schedules of a drawing, and what has to be said of them.

    `temperature` is the reference temperature that lengths are for, "" where none is stated;
    `digits` the significant digits of forces.
    """

    length_unit: str
    force_unit: str
    digits: int
    temperature: str
    cables: tuple[CableRow, ...]
    hangers: tuple[HangerRow, ...]
    anchorages: tuple[AnchorageRow, ...]
    findings: tuple[Finding, ...]
