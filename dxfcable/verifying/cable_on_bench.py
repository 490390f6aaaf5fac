"""One cable on the bench: what is known of it while it is proved."""

from __future__ import annotations

import re
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.drawing.recovery.scales import ScaleBlock
    from dxfcable.drawing.recovery.schedules import Schedule
    from dxfcable.model import Point, Reaction
    from dxfcable.verifying.cable_labels import SpanLabels
    from dxfcable.verifying.furniture import WantedArrow, WantedHead
    from dxfcable.verifying.joint_laws import JointFacts
    from dxfcable.verifying.labelling import Wanted
    from dxfcable.verifying.loads import Carried, Demand
    from dxfcable.verifying.measure import SpanFigures
    from dxfcable.verifying.shapes import Shape

_CUT = "CUT"
_KELVIN = re.compile(r"([+-][\d.]+(?:e[+-]?\d+)?) K\b")


@dataclass(slots=True, kw_only=True, eq=False)
class CableOnBench:
    """One cable while it is proved.

    Attributes
    ----------
    number : int or None
        Its place in the layout; None where the drafter's drawing does not have it.
    moved : dict of int to Point
        Heads of masts that stretching stays let go, by the support's key.
    overruled : frozenset of str
        RULE, UNDER: what of the data block does not count, since the record says that the
        drawing was issued otherwise.
    """

    prefix: str
    number: int | None
    schedule: Schedule | None
    demand: Demand | None
    scale: float
    block: ScaleBlock | None
    spans: list[SpanFigures] = field(default_factory=list)
    shapes: list[Shape | None] = field(default_factory=list)
    labels: list[SpanLabels] = field(default_factory=list)
    joints: list[JointFacts] = field(default_factory=list)
    reactions: tuple[Reaction, ...] = ()
    wanted: list[Wanted] = field(default_factory=list)
    arrows: list[WantedArrow] = field(default_factory=list)
    heads: list[WantedHead] = field(default_factory=list)
    moved: dict[int, Point] = field(default_factory=dict)
    overruled: frozenset[str] = frozenset()

    @property
    def is_cut(self) -> bool:
        """Whether its unstressed lengths are fixed, by the schedule's words."""
        status = self.words_of("STATUS")
        return status is not None and status.text.strip() == _CUT

    @property
    def error(self) -> float:
        """What rounding makes of its forces [force]."""
        return max((span.force_error for span in self.spans), default=0.0)

    @property
    def thermal(self) -> float:
        """1 + expansion times the change of temperature that the schedule states."""
        words = self.words_of("DELTA_T")
        match = _KELVIN.match(words.text.strip()) if words else None
        alpha = self.demand.cable.alpha if self.demand else None
        return 1.0 + (alpha or 0.0) * float(match[1]) if match else 1.0

    @property
    def mark(self) -> str:
        """Its mark as drawn, "" where the drafter's drawing does not have it."""
        return self.demand.cable.mark if self.demand else ""

    def carried_on(self, number: int) -> tuple[Carried, ...] | None:
        """Give the loads of a span, None where the drafter's drawing does not have it."""
        if self.demand is None or not 0 < number < len(self.demand.cable.supports):
            return None
        return self.demand.of_span(number)

    def words_of(self, name: str) -> IssuedEntity | None:
        """Give the schedule's words beside a name."""
        return self.schedule.value(name) if self.schedule else None
