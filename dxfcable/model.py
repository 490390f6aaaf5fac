"""Values that cross rooms: what the drawing says (Layout) and what follows from it (Solution).

Lengths are in the drawing's unit and forces in `Layout.force_unit`, consistently, everywhere
below. Signs: x to the right, y up, loads positive down, tension positive.
"""

from __future__ import annotations

import enum
from dataclasses import dataclass, field

from dxfcable.results import (
    Anchorage,
    AnchorForce,
    CableRevisions,
    Clearance,
    Envelope,
    Extreme,
    ForceDiagram,
    FormedCable,
    Governs,
    JointSide,
    Movement,
    Node,
    PointChange,
    PointRange,
    Reaction,
    Revised,
    RevisionRow,
    Segment,
    SegmentRange,
    Solution,
    SpanShape,
    State,
    SupportShift,
)

__all__ = [
    "Anchor",
    "AnchorForce",
    "Anchorage",
    "Cable",
    "CableRevisions",
    "Clearance",
    "Envelope",
    "Extreme",
    "Finding",
    "ForceDiagram",
    "FormedCable",
    "Governs",
    "JointSide",
    "Layout",
    "LoadPoint",
    "LoadSymbol",
    "Mast",
    "Movement",
    "Node",
    "Origin",
    "PlanArea",
    "PlanCell",
    "PlanPoint",
    "Point",
    "PointChange",
    "PointRange",
    "Reaction",
    "Rectangle",
    "Revised",
    "RevisionRow",
    "Rule",
    "RuleKind",
    "Segment",
    "SegmentRange",
    "Severity",
    "Solution",
    "SpanShape",
    "State",
    "Stay",
    "Support",
    "SupportKind",
    "SupportShift",
]

Point = tuple[float, float]


class Severity(enum.StrEnum):
    """What a finding does to the run: stop (exit 2), ask for an engineer (exit 1), inform."""

    ERROR = "error"
    WARNING = "warning"
    NOTE = "note"


@dataclass(frozen=True, slots=True, kw_only=True)
class Finding:
    """Something that was assumed, passed over, or that is wrong.

    `code` is stable and public; `text` may change. `raw` is the drafter's own text.
    """

    code: str
    severity: Severity
    text: str
    remedy: str = ""
    cable: str | None = None
    handle: str | None = None
    line: int | None = None
    layer: str | None = None
    at: Point | None = None
    raw: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Origin:
    """Where in the file a value came from."""

    handle: str | None = None
    line: int | None = None
    layer: str = ""
    kind: str = ""  # DXF type
    at: Point | None = None
    raw: str = ""  # the text as drawn


class SupportKind(enum.StrEnum):
    """End of a cable, or how a saddle between ends lets the cable pass."""

    END = "end"
    FIXED = "fixed"
    ROLLER = "roller"
    SHEAVE = "sheave"
    PINNED = "pinned"


@dataclass(frozen=True, slots=True, kw_only=True)
class Support:
    """A point that holds one cable or several.

    `key` is its position in `Layout.supports`: marks may repeat, keys do not.
    `stated_elevation` is its EL [length], None where the drawing gives none.
    """

    key: int
    mark: str
    x: float
    y: float
    kind: SupportKind = SupportKind.END
    stated_elevation: float | None = None
    origin: Origin = field(default_factory=Origin)


class LoadSymbol(enum.StrEnum):
    """How a load point is drawn; arrows have no hanger."""

    POINT = "point"
    CIRCLE = "circle"
    ARROW = "arrow"
    BLOCK = "block"


@dataclass(frozen=True, slots=True, kw_only=True)
class LoadPoint:
    """Vertical loads at one station of a cable.

    `cases` pairs a case letter (or `load`) with its value [force], down positive, in the
    drafter's order. `value_origin` is the text or attribute that states the value.
    `drawn` is that text where another source (CSV) overruled it, else ""; `drawn_cases` is then
    what the drawing states, None where nothing overruled it.
    """

    mark: str
    x: float
    y: float
    cases: tuple[tuple[str, float], ...]
    symbol: LoadSymbol
    clamped: bool = False
    source: str = "drawing"  # or "csv", "record"
    drawn: str = ""
    drawn_cases: tuple[tuple[str, float], ...] | None = None
    origin: Origin = field(default_factory=Origin)
    value_origin: Origin | None = None


class RuleKind(enum.StrEnum):
    """The one quantity that governs the shape of a cable."""

    MAX_TENSION = "max_tension"
    SAG = "sag"
    LOW_POINT = "low_point"
    PULL = "pull"
    LENGTH = "length"
    CUT_LENGTH = "cut_length"
    THROUGH = "through"


@dataclass(frozen=True, slots=True, kw_only=True)
class Rule:
    """A governing rule: `value` [force, length or elevation], `point` for THROUGH only."""

    kind: RuleKind
    value: float = 0.0
    point: Point | None = None
    text: str = ""  # as the drafter or the command line wrote it
    origin: Origin = field(default_factory=Origin)


@dataclass(frozen=True, slots=True, kw_only=True)
class Rectangle:
    """An upright rectangle, e.g. the frame that a force diagram goes into [length]."""

    x0: float
    y0: float
    x1: float
    y1: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Cable:
    """One cable as drawn.

    Attributes
    ----------
    supports : tuple of Support
        Left to right; two, or more where saddles carry it.
    loads : tuple of LoadPoint
        Left to right, strictly between the end supports.
    support_loads : tuple of (int, LoadPoint)
        Loads at a support's x with that support's key: not on the cable.
    datum : float or None
        Elevation minus y [length]; None where no support states an EL.
    weight : float
        Per unstressed length [force/length]; `ea` [force] or None for inextensible.
    alpha, delta_t : float or None
        Expansion [1/K] and temperature change [K].
    fitting_left, fitting_right : str
        End fittings by their names in the settings; "" where none is named.
    deck, clearance : tuple of Point
        Vertices from left to right; empty where none is drawn.
    """

    mark: str
    supports: tuple[Support, ...]
    loads: tuple[LoadPoint, ...]
    support_loads: tuple[tuple[int, LoadPoint], ...] = ()
    rule: Rule | None = None
    under: str | None = None
    datum: float | None = None
    weight: float = 0.0
    weight_case: str | None = None
    ea: float | None = None
    alpha: float | None = None
    delta_t: float | None = None
    capacity: float | None = None
    strand: str = ""
    fitting_left: str = ""
    fitting_right: str = ""
    deck: tuple[Point, ...] = ()
    clearance: tuple[Point, ...] = ()
    frame: Rectangle | None = None
    origin: Origin = field(default_factory=Origin)


@dataclass(frozen=True, slots=True, kw_only=True)
class Anchor:
    """A CABLE-ANCHOR block at the foot of a stay or mast; blank attributes are None."""

    mark: str
    at: Point
    ea: float | None = None
    share: float | None = None
    weight: float | None = None  # of the block [force]
    mu: float | None = None
    fs_slide: float | None = None
    fs_uplift: float | None = None
    origin: Origin = field(default_factory=Origin)


@dataclass(frozen=True, slots=True, kw_only=True)
class Mast:
    """A mast from the support with key `support` down to `foot`."""

    support: int
    foot: Point
    anchor: Anchor | None = None
    origin: Origin = field(default_factory=Origin)


@dataclass(frozen=True, slots=True, kw_only=True)
class Stay:
    """A backstay from the support with key `support` down to `foot`."""

    support: int
    foot: Point
    anchor: Anchor | None = None
    origin: Origin = field(default_factory=Origin)


@dataclass(frozen=True, slots=True, kw_only=True)
class PlanPoint:
    """A hanger point of a framing plan; `cable` is the cable that it names, "" for none."""

    mark: str
    at: Point
    cable: str = ""
    origin: Origin = field(default_factory=Origin)


@dataclass(frozen=True, slots=True, kw_only=True)
class PlanCell:
    """What one hanger point carries of one loaded area.

    `cable` is the position in `Layout.cables` of the load point with this mark, `at` the point
    in plan. `rings` bound the cell, openings too [length]; `cases` pairs case and force.
    """

    cable: int
    mark: str
    at: Point
    rings: tuple[tuple[Point, ...], ...]
    area: float
    cases: tuple[tuple[str, float], ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class PlanArea:
    """A loaded area of a framing plan.

    `number` counts from 1, left to right, then top to bottom. `pressures` pairs a case (or
    `load`) with its value [force/length^2], empty where the text does not read. `direction`
    is the line that a one-way deck spans along. `cells` and `net_area` [length^2] are known
    once the area is shared out to its points.
    """

    number: int
    outline: tuple[Point, ...]
    holes: tuple[tuple[Point, ...], ...] = ()
    pressures: tuple[tuple[str, float], ...] = ()
    direction: tuple[Point, Point] | None = None
    net_area: float = 0.0
    cells: tuple[PlanCell, ...] = ()
    origin: Origin = field(default_factory=Origin)
    value_origin: Origin | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Layout:
    """All that was understood of one drawing.

    `text_height` is the median height of the drafter's load texts [length], or None.
    """

    version: str
    length_unit: str
    force_unit: str | None
    supports: tuple[Support, ...] = ()
    cables: tuple[Cable, ...] = ()
    masts: tuple[Mast, ...] = ()
    stays: tuple[Stay, ...] = ()
    plan: tuple[PlanArea, ...] = ()
    plan_points: tuple[PlanPoint, ...] = ()
    text_height: float | None = None
    findings: tuple[Finding, ...] = ()
