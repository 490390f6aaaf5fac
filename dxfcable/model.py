"""Values that cross rooms: what the drawing says (Layout) and what follows from it (Solution).

Lengths are in the drawing's unit and forces in `Layout.force_unit`, consistently, everywhere
below. Signs: x to the right, y up, loads positive down, tension positive.
"""

from __future__ import annotations

import enum
import math
from dataclasses import dataclass, field

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
    `drawn` is that text where another source (CSV) overruled it, else "".
    """

    mark: str
    x: float
    y: float
    cases: tuple[tuple[str, float], ...]
    symbol: LoadSymbol
    clamped: bool = False
    source: str = "drawing"  # or "csv", "record"
    drawn: str = ""
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
    text_height: float | None = None
    findings: tuple[Finding, ...] = ()


# --- what follows from it -----------------------------------------------------------------


@dataclass(frozen=True, slots=True, kw_only=True)
class Node:
    """A support or load point of a formed cable.

    `y` is the drawing's ordinate, `elevation` the same in the datum (or y without one).
    `hanger` is the length down to the deck or drawn point, None where there is no hanger;
    `hanger_foot` is the ordinate of its lower end.
    """

    mark: str
    x: float
    y: float
    elevation: float
    load: float
    is_support: bool
    support: int | None = None
    hanger: float | None = None
    hanger_foot: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class Segment:
    """One piece between neighbouring nodes; angles in degrees, rising to the right positive."""

    name: str
    start: Point
    end: Point
    tension_left: float
    tension_right: float
    angle_left: float
    angle_right: float
    length: float
    unstressed_length: float

    @property
    def tension(self) -> float:
        """Largest tension in the piece [force]."""
        return max(self.tension_left, self.tension_right)

    @property
    def angle(self) -> float:
        """Slope of the chord of the piece [degrees]."""
        return math.degrees(math.atan2(self.end[1] - self.start[1], self.end[0] - self.start[0]))


@dataclass(frozen=True, slots=True, kw_only=True)
class Reaction:
    """What a support gives to one cable: vertical up positive, horizontal outward positive."""

    support: int
    mark: str
    horizontal: float
    vertical: float


@dataclass(frozen=True, slots=True, kw_only=True)
class SpanShape:
    """One span: its pull, its sag and where sag and low point lie [drawing coordinates]."""

    start: str
    end: str
    horizontal: float
    sag: float
    sag_at: Point  # on the curve; the closing string is `sag` above it
    low_point: Point


@dataclass(frozen=True, slots=True, kw_only=True)
class ForceDiagram:
    """The force polygon of one span in force units, load line from (0, 0) downwards.

    Attributes
    ----------
    letters : tuple of str
        Bow's letters of the spaces, one more than there are loads.
    load_line : tuple of float
        Ordinates of the letters on the load line; the first is 0, down loads go negative.
    pole : Point
        Right of the load line for a hanging cable.
    closing : float
        Ordinate where the closing ray meets the load line.
    """

    letters: tuple[str, ...]
    load_line: tuple[float, ...]
    pole: Point
    closing: float


@dataclass(frozen=True, slots=True, kw_only=True)
class AnchorForce:
    """What one anchor takes: horizontal pull, uplift positive; factors None where not stated."""

    mark: str
    at: Point
    horizontal: float
    uplift: float
    sliding_factor: float | None = None
    uplift_factor: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class JointSide:
    """One side of a joint's force polygon: the force on the joint [force]."""

    name: str
    force: Point


@dataclass(frozen=True, slots=True, kw_only=True)
class Anchorage:
    """Equilibrium of a support that has a mast or a stay, all cables at it summed.

    `mast` (compression negative) and `stays` are None and empty where not drawn.
    `head_shear` and `base_moment` belong to a mast without a stay, `residual` to a stay
    without a mast. `sides` close to a polygon when the joint is in equilibrium.
    """

    support: int
    mark: str
    at: Point
    mast: float | None
    stays: tuple[float, ...]
    anchors: tuple[AnchorForce, ...]
    head_shear: float = 0.0
    base_moment: float = 0.0
    residual: Point = (0.0, 0.0)
    sides: tuple[JointSide, ...] = ()
    mast_foot: Point | None = None
    stay_feet: tuple[Point, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Governs:
    """Where the largest tension acts."""

    segment: str
    end: str  # "left" or "right"
    support: str | None


@dataclass(frozen=True, slots=True, kw_only=True)
class FormedCable:
    """A cable formed under one combination; see the module's units and signs.

    `horizontal` is None where spans differ; `utilization` None without a capacity. `curves`
    holds one polyline a span for a cable with weight: its nodes, and so many points between
    them that it is true to a millimetre; empty where the nodes alone are the shape.
    """

    mark: str
    status: str
    rule: Rule
    under: str
    level: str
    level_is_assumed: bool
    supports_rigid: bool
    weight: float
    weight_case: str | None
    ea: float | None
    capacity: float | None
    utilization: float | None
    loads_source: str
    horizontal: float | None
    max_tension: float
    governs: Governs
    sag: float
    length: float
    unstressed_length: float
    nodes: tuple[Node, ...]
    segments: tuple[Segment, ...]
    spans: tuple[SpanShape, ...]
    reactions: tuple[Reaction, ...]
    diagrams: tuple[ForceDiagram, ...]
    curves: tuple[tuple[Point, ...], ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Solution:
    """All cables of a drawing formed, in the order of `Layout.cables`."""

    cables: tuple[FormedCable, ...]
    anchorages: tuple[Anchorage, ...] = ()
    findings: tuple[Finding, ...] = ()
