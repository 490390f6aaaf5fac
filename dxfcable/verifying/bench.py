"""The cables of one drawing on the bench: measured first, then named, then held against laws.

Names come before laws, and for all cables at once: a label without a mark may belong to any.
"""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.verifying import clearance_laws, furniture, joint_laws, profile_laws, scale_laws
from dxfcable.verifying.cable_labels import SpanLabels, span_labels
from dxfcable.verifying.holding import hold_cable
from dxfcable.verifying.joint_laws import JointFacts
from dxfcable.verifying.labelling import find_labels
from dxfcable.verifying.loads import node_names
from dxfcable.verifying.measuring import find_block, measure_cable
from dxfcable.verifying.staleness import overruled

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.model import Anchorage, Cable, Layout, Point
    from dxfcable.recorded import CableRecord
    from dxfcable.settings import Settings
    from dxfcable.verifying.cable_on_bench import CableOnBench
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.staleness import Overruled
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader


@dataclass(slots=True, kw_only=True, eq=False)
class Bench:
    """What all cables of a drawing share."""

    sheet: Sheet
    layout: Layout
    reader: Reader
    settings: Settings
    owners: Mapping[str, int]
    records: Mapping[str, CableRecord]
    places: list[tuple[Point, Point]] = field(default_factory=list)

    def hold_all(self, prefixes: Sequence[str]) -> dict[str, Tally]:
        """Measure, name and prove all cables."""
        cables = [self._measured(prefix) for prefix in prefixes]
        self._find_joints(cables)
        for cable in cables:
            self._want(cable)
        find_labels(self.sheet, [w for c in cables for w in c.wanted], self.reader)
        furniture.name_arrows(self.sheet, [a for c in cables for a in c.arrows])
        clearance_laws.name_clearances(self.sheet, [s for c in cables for s in c.spans])
        for cable in cables:
            without = frozenset(
                f"{cable.prefix}/load-line/{s.first_load + k}"
                for s in cable.spans
                for k in range(0, len(s.steps), 2)
                if s.per_piece == 2
            )
            cable.heads += furniture.heads_of_lines(self.sheet, cable.prefix, without)
        furniture.name_heads(self.sheet, [h for c in cables for h in c.heads])
        self._note_places(cables)
        return {cable.prefix: hold_cable(self.sheet, cable, self.reader) for cable in cables}

    def _measured(self, prefix: str) -> CableOnBench:
        """Measure the spans of one cable."""
        number = self.owners.get(prefix)
        cable = measure_cable(
            self.sheet,
            prefix,
            number,
            None if number is None else self.layout.cables[number],
            self.reader,
            self.settings,
            is_alone=len(self.owners) == 1,
        )
        cable.overruled = frozenset(one.what for one in self.overruled(number))
        return cable

    def overruled(self, number: int | None) -> tuple[Overruled, ...]:
        """Tell what of the data block of a cable in the layout was overruled at the issue."""
        cable = None if number is None else self.layout.cables[number]
        record = self.records.get(cable.mark) if cable else None
        return overruled(record, cable) if record and cable else ()

    def _find_joints(self, cables: Sequence[CableOnBench]) -> None:
        """Work out the joints, where every cable of the layout could be measured."""
        by_number = {c.number: c for c in cables if c.number is not None}
        moved: dict[int, Point] = {}
        reactions, combinations = [], []
        for k, drawn in enumerate(self.layout.cables):
            cable = by_number.get(k)
            if cable is None or cable.demand is None or cable.demand.combination is None:
                return
            if len(cable.spans) != len(drawn.supports) - 1 or None in cable.shapes:
                return
            cable.moved = self._moved(cable, drawn)
            moved |= cable.moved
            cable.reactions = joint_laws.reactions_of(self.layout, k, cable.spans)
            reactions.append(cable.reactions)
            combinations.append(cable.demand.combination)
        found = joint_laws.joints_of(self.layout, reactions, combinations, self.settings, moved)
        for _ in range(2):  # a block with a spoiled title is what the first round leaves over
            for owner, name, anchorage in found:
                part = f"{by_number[owner].prefix}/joint/{name}"
                find_block(self.sheet, part, ("JOINT", anchorage.mark))
        error = max(c.error for c in cables)
        for owner, name, anchorage in found:
            by_number[owner].joints.append(self._joint(by_number[owner], name, anchorage, error))
        joint_laws.name_joints(
            self.sheet, [j for c in cables for j in c.joints if math.isfinite(j.scale)]
        )

    def _moved(self, cable: CableOnBench, drawn: Cable) -> dict[int, Point]:
        """Find the heads of a cut cable's masts that its stretching stays let go."""
        gives = {s.support for s in self.layout.stays if s.anchor is not None and s.anchor.ea}
        if not cable.is_cut:
            return {}
        ends = [cable.spans[0].curve[0], *(span.curve[-1] for span in cable.spans)]
        return {
            support.key: end
            for support, end in zip(drawn.supports, ends, strict=True)
            if support.key in gives
        }

    def _joint(
        self, cable: CableOnBench, name: str, anchorage: Anchorage, error: float
    ) -> JointFacts:
        """Put a joint together with its scale."""
        part = f"{cable.prefix}/joint/{name}"
        block = find_block(self.sheet, part, ("JOINT", anchorage.mark))
        ratio = scale_laws.form_ratio(self.sheet.scales)
        grain = self.sheet.grain
        scale = scale_laws.scale_of(block, self.reader, grain, ratio) if block else None
        pulls = [span.pull for span in cable.spans]
        forces = [math.hypot(*side.force) for side in anchorage.sides]
        return JointFacts(
            prefix=cable.prefix,
            name=name,
            anchorage=anchorage,
            block=block,
            scale=scale or math.nan,
            error=2.0 * error * max([*forces, *pulls]) / min(pulls),
        )

    def _want(self, cable: CableOnBench) -> None:
        """List the labels and arrows that are due."""
        demand = cable.demand
        if demand is None or not cable.spans:
            return
        names = node_names(demand.cable)
        largest = max((s.largest(k) for s in cable.spans for k in range(s.pieces)), default=0.0)
        first_node = first_piece = 0
        has_datum = demand.cable.datum is not None
        # A support that gave way shows its own movement.
        first = demand.cable.supports[0]
        origin = (first.x, first.y) if first.key in cable.moved else cable.spans[0].curve[0]
        for span, shape in zip(cable.spans, cable.shapes, strict=True):
            carried = cable.carried_on(span.number) or ()
            hangers: list[float | None] = [
                None if foot is None else node[1] - foot
                for node, foot in zip(
                    span.nodes[1:-1],
                    profile_laws.feet_of(
                        self.sheet, span, demand.cable, carried, is_cut=cable.is_cut
                    ),
                    strict=False,
                )
            ]
            facts = SpanLabels(
                span=span,
                shape=shape,
                cable=demand.cable,
                combination=demand.combination,
                carried=carried,
                names=names[first_node : first_node + span.pieces + 1],
                first_piece=first_piece,
                lift=demand.cable.datum or 0.0,
                left=origin[0],
                reference=None if has_datum else origin[1],
                hangers=hangers,
                largest=largest,
            )
            cable.labels.append(facts)
            if len(facts.names) == span.pieces + 1:
                cable.wanted += span_labels(facts)
            first_node += span.pieces
            first_piece += span.pieces
        self._want_forces(cable, names)

    def _want_forces(self, cable: CableOnBench, names: Sequence[str]) -> None:
        """List labels, arrows and heads of reactions, joints and anchors."""
        assert cable.demand is not None
        supports = cable.demand.cable.supports
        ends = [0]
        for span in cable.spans:
            ends.append(ends[-1] + span.pieces)
        if cable.reactions and ends[-1] < len(names):
            parts = {s.key: names[k] for s, k in zip(supports, ends, strict=True)}
            places = {s.key: (s.x, s.y) for s in supports}
            cable.wanted += joint_laws.reaction_labels(
                cable.prefix, parts, places, cable.reactions, cable.error
            )
            cable.arrows += furniture.reaction_arrows(
                cable.prefix, parts, places, cable.reactions, cable.error
            )
        for joint in cable.joints:
            cable.wanted += joint_laws.joint_labels(self.sheet, joint)
            cable.arrows += furniture.anchor_arrows(joint)
            cable.heads += furniture.member_heads(joint, self.sheet.height)

    def _note_places(self, cables: Sequence[CableOnBench]) -> None:
        """Collect what leaders may end on: what labels name, and lines of ours."""
        self.places += [w.at for c in cables for w in c.wanted]
        self.places += [
            (e.start, e.end)
            for name, e in self.sheet.named.items()
            if e.kind == "LINE" and len(e.points) == 2 and not name.endswith("/leader")
        ]
        for cable in cables:
            points = [c.point for c in cable.demand.loads] if cable.demand else []
            self.places += [((p.x, p.y), (p.x, p.y)) for p in points]
