"""What the drawing keeps of each cable, so that a load change can be answered from it alone.

Units and signs as in `model`. Inputs and unstressed lengths only: forces are found again.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.model import CableRevisions, Point, Rule

Cases = tuple[tuple[str, float], ...]

FORMED, CUT = "formed", "cut"


@dataclass(frozen=True, slots=True, kw_only=True)
class RecordedSupport:
    """An end of the cable: where it stood last, and where it stood when the cable was formed."""

    mark: str
    x: float
    y: float
    formed: Point


@dataclass(frozen=True, slots=True, kw_only=True)
class RecordedLoad:
    """A load point: where it stood when formed, and what it carries.

    Attributes
    ----------
    cases : tuple of (str, float)
        Used last, down positive [force].
    drawn : tuple of (str, float)
        What the drawing said then; another value there now is a load change.
    formed : tuple of (str, float)
        What the cable was formed under.
    source : str
        Where `cases` came from: `drawing` or `csv`.
    """

    mark: str
    x: float
    y: float
    cases: Cases
    drawn: Cases
    formed: Cases
    source: str = "drawing"


@dataclass(frozen=True, slots=True, kw_only=True)
class RecordedStay:
    """A stay that stretches: its foot, unstressed length [length] and stiffness [force]."""

    foot: Point
    length: float
    ea: float


@dataclass(frozen=True, slots=True, kw_only=True)
class RecordedHead:
    """The head of a mast whose stays stretch; `mast_ea` None for a mast that does not.

    `head` is where it stands under the combination that the cable was formed under.
    """

    support: str
    head: Point
    mast_foot: Point
    mast_length: float
    mast_ea: float | None
    stays: tuple[RecordedStay, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class CableRecord:
    """All that one cable's next answer depends on.

    Attributes
    ----------
    status : str
        `formed` or `cut`.
    level : str or None
        Level of `under` as stated; None where it is assumed.
    delta_t : float
        Change from the reference temperature that it stands at [K].
    pieces : tuple of float
        Unstressed lengths, left to right [length].
    combos : tuple of str
        Combinations to check, as typed.
    stated_rule, stated_under : Rule or None, str or None
        What the data block said at the issue; None where it said nothing, or was not kept.
    """

    mark: str
    status: str
    length_unit: str
    force_unit: str | None
    rule: Rule
    under: str
    level: str | None
    weight: float
    weight_case: str | None
    ea: float | None
    alpha: float | None
    delta_t: float
    datum: float | None
    supports: tuple[RecordedSupport, ...]
    loads: tuple[RecordedLoad, ...]
    support_loads: tuple[tuple[str, RecordedLoad], ...]
    pieces: tuple[float, ...]
    heads: tuple[RecordedHead, ...] = ()
    combos: tuple[str, ...] = ()
    revisions: CableRevisions | None = None
    stated_rule: Rule | None = None
    stated_under: str | None = None
