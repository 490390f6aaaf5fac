"""Values that follow from a layout: cables formed, their states, their revisions.

Units and signs as in `model`, which hands these names on.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.model import Finding, Point, Rule
    from dxfcable.recorded import RecordedHead


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
    them that it is true to a millimetre; empty where the nodes alone are the shape. `delta_t` is
    the change from the reference temperature that it stands at [K].
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
    states: tuple[State, ...] = ()
    envelope: Envelope | None = None
    clearance: Clearance | None = None
    delta_t: float = 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class SupportShift:
    """How far a support stands from where it is drawn [length]: the head of a mast that gives."""

    support: int
    mark: str
    dx: float
    dy: float


@dataclass(frozen=True, slots=True, kw_only=True)
class State:
    """A formed cable, its unstressed lengths fixed, under one combination.

    Attributes
    ----------
    combo : str
        As typed; an alternative or a pattern with its own name.
    delta_t : float
        Change from the reference temperature [K].
    fault : str
        Why there is no determinate shape; then `nodes`, `segments` and all below are empty
        and the figures are not-a-number. "" where there is one.
    anchorages : tuple of Anchorage
        Of this cable's supports, all cables at them in this state.
    slack : tuple of str
        Marks of hangers whose net load is zero or up.
    """

    combo: str
    level: str
    level_is_assumed: bool
    horizontal: float
    max_tension: float
    delta_t: float = 0.0
    fault: str = ""
    governs: Governs | None = None
    low_point: Point | None = None
    nodes: tuple[Node, ...] = ()
    segments: tuple[Segment, ...] = ()
    reactions: tuple[Reaction, ...] = ()
    anchorages: tuple[Anchorage, ...] = ()
    supports: tuple[SupportShift, ...] = ()
    slack: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Extreme:
    """A largest or least value and the combination that brings it."""

    value: float
    combo: str


@dataclass(frozen=True, slots=True, kw_only=True)
class PointRange:
    """Lowest and highest elevation of a load point over all states [length]."""

    mark: str
    lowest: Extreme
    highest: Extreme


@dataclass(frozen=True, slots=True, kw_only=True)
class SegmentRange:
    """Largest and least tension of a piece over all states [force]."""

    name: str
    most: Extreme
    least: Extreme


@dataclass(frozen=True, slots=True, kw_only=True)
class Envelope:
    """Extremes over all checked states; `max_uplift` None where no anchor is drawn.

    The formed state counts with them, under the name of its combination.
    """

    max_tension: Extreme
    min_tension: Extreme
    max_uplift: Extreme | None
    points: tuple[PointRange, ...]
    segments: tuple[SegmentRange, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Clearance:
    """Least vertical distance of the cable above its clearance line, over all states.

    Attributes
    ----------
    at, to : Point
        On the cable and on the line; `at` is `least` above `to`.
    state : str
        Combination that brings it.
    """

    least: float
    at: Point
    to: Point
    state: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Movement:
    """What a load change does to one node.

    Attributes
    ----------
    dx, dy : float
        Against the drawing handed in [length]; `sum_dx`, `sum_dy` since forming.
    tension_before, tension_after : float
        Largest in the pieces that meet at the node [force].
    lean_deg : float or None
        Of the hanger against the vertical, None where there is none.
    hanger_change : float or None
        By which the hanger must grow to hold the deck at its level [length].
    """

    mark: str
    is_support: bool
    at: Point
    dx: float
    dy: float
    sum_dx: float
    sum_dy: float
    load_before: float
    load_after: float
    elevation_before: float
    elevation_after: float
    tension_before: float
    tension_after: float
    lean_deg: float | None = None
    hanger_change: float | None = None


@dataclass(frozen=True, slots=True, kw_only=True)
class RevisionRow:
    """One line of the revision table; fields that nobody filled are blank."""

    number: int
    rev: str = ""
    description: str = ""
    by: str = ""
    date: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class PointChange:
    """A node that moved more than the office marks: where it stands now, and by how much."""

    mark: str
    at: Point
    dx: float
    dy: float


@dataclass(frozen=True, slots=True, kw_only=True)
class CableRevisions:
    """What the revision layer shows of one cable, and the record keeps.

    Attributes
    ----------
    cable : str
        Its mark.
    rows : tuple of RevisionRow
        Oldest first; the last is the one that `old` and `changes` belong to.
    old : tuple of tuples of Point
        Profile before the latest revision, one polyline a span.
    changes : tuple of PointChange
        Of the latest revision.
    """

    cable: str
    rows: tuple[RevisionRow, ...]
    old: tuple[tuple[Point, ...], ...] = ()
    changes: tuple[PointChange, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Revised:
    """One cable before and after a load change; `held` is `rule` or `cut-length`."""

    cable: str
    held: str
    before: FormedCable
    movement: tuple[Movement, ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class Solution:
    """All cables of a drawing formed, in the order of `Layout.cables`.

    `revisions` is what stands on the revision layer, `revised` what this run changed, `heads`
    the supports that give after forming, by key, `combos` the combinations asked for, as typed.
    """

    cables: tuple[FormedCable, ...]
    anchorages: tuple[Anchorage, ...] = ()
    findings: tuple[Finding, ...] = ()
    revisions: tuple[CableRevisions, ...] = ()
    revised: tuple[Revised, ...] = ()
    heads: tuple[tuple[int, RecordedHead], ...] = ()
    combos: tuple[str, ...] = ()
