"""The checker's page: what is needed to do five numbers again by hand.

The figures here are worked out anew from the loads as read and the shape as drawn, by sums and
moments only, and set beside the results; they share no code with the solver.
"""

from __future__ import annotations

import hashlib
import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.sheets import Table
from dxfcable.quantities import format_elevation, format_force, format_length
from dxfcable.recorded import CUT

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from dxfcable.model import (
        Cable,
        FormedCable,
        Layout,
        Node,
        Origin,
        Segment,
        Solution,
        SpanShape,
    )

_DIGITS = 6
_UNCASED = "load"


def check_tables(layout: Layout, solution: Solution, index: int) -> tuple[Table, ...]:
    """Give the tables of one cable's checker's page.

    Parameters
    ----------
    layout, solution : Layout, Solution
        Cables in the same order.
    index : int
        The cable's position.

    Returns
    -------
    tuple of Table
        Figures by hand, inputs with the handles they came from, combinations.
    """
    page = _Page(layout=layout, cable=layout.cables[index], formed=solution.cables[index])
    return (page.by_hand(), page.inputs(), page.loads(), page.combinations())


def fingerprint(layout: Layout, formed: FormedCable, index: int) -> str:
    """Give the fingerprint of a cable's inputs: the same inputs have the same, in any file.

    Parameters
    ----------
    layout : Layout
    formed : FormedCable
        For the rule and the combination that were used.
    index : int
        The cable's position.

    Returns
    -------
    str
        Sixteen hexadecimal digits of SHA-256.
    """
    cable = layout.cables[index]
    keys = {s.key for s in cable.supports}
    facts = (
        layout.length_unit,
        layout.force_unit,
        [(s.mark, s.x, s.y, s.kind.value, s.stated_elevation) for s in cable.supports],
        [(p.mark, p.x, p.cases, p.clamped) for p in cable.loads],
        [(k, p.mark, p.cases) for k, p in cable.support_loads],
        (formed.rule.kind.value, formed.rule.value, formed.rule.point, formed.status),
        (formed.under, cable.datum, cable.weight, cable.weight_case, cable.ea, cable.alpha),
        (cable.delta_t, cable.capacity, cable.strand, cable.deck, cable.clearance),
        [(m.support, m.foot) for m in layout.masts if m.support in keys],
        [(s.support, s.foot) for s in layout.stays if s.support in keys],
    )
    return hashlib.sha256(repr(facts).encode("utf-8", "backslashreplace")).hexdigest()[:16]


def source_words(origin: Origin) -> str:
    """Say where in the file a value came from: entity and handle, else its layer and place."""
    if origin.handle:
        return f"{origin.kind} {origin.handle}".strip()
    if origin.at is not None:
        x, y = origin.at
        return f"{origin.kind} at ({x:.6g}, {y:.6g}) on {origin.layer}".strip()
    return origin.kind


@dataclass(frozen=True, slots=True, kw_only=True)
class _Page:
    """One cable's page in the making."""

    layout: Layout
    cable: Cable
    formed: FormedCable

    def _force(self, value: float) -> str:
        return format_force(value, self.layout.force_unit or "", _DIGITS)

    def _load(self, value: float) -> str:
        return format_force(value, self.layout.force_unit or "", _DIGITS, is_trimmed=True)

    def _length(self, value: float) -> str:
        return format_length(value, self.layout.length_unit)

    def _level(self, value: float) -> str:
        return format_elevation(value, self.layout.length_unit)

    def _table(
        self,
        key: str,
        title: str,
        head: tuple[str, ...],
        rows: Iterable[tuple[str, ...]],
        lefts: tuple[int, ...] = (0,),
    ) -> Table:
        title = f"{title}, CABLE {self.formed.mark}"
        name = f"{self.formed.mark}-{key}"
        return Table(key=name, title=title, head=head, rows=tuple(rows), lefts=lefts)

    def by_hand(self) -> Table:
        """Work out sums, reactions, pull and end tensions by hand, beside the results."""
        formed = self.formed
        rows = []
        for number, span in enumerate(formed.spans):
            nodes, pieces = self._of_span(number)
            rows += self._span_rows(span, nodes, pieces, is_only=len(formed.spans) == 1)
        rows += self._closures()
        head = ("FIGURE", "BY HAND", "RESULT", "DIFFERENCE", "HOW")
        return self._table("by-hand", "BY HAND AND AS SOLVED", head, rows, (0, 4))

    def _of_span(self, number: int) -> tuple[list[Node], list[Segment]]:
        """Give the nodes and pieces of a span."""
        ends = [k for k, node in enumerate(self.formed.nodes) if node.is_support]
        first, last = ends[number], ends[number + 1]
        return list(self.formed.nodes[first : last + 1]), list(self.formed.segments[first:last])

    def _span_rows(
        self, span: SpanShape, nodes: list[Node], pieces: list[Segment], *, is_only: bool
    ) -> list[tuple[str, ...]]:
        name = "" if is_only else f" {span.start}-{span.end}"
        forces = _vertical_forces(nodes, pieces, self._weight())
        left, right = nodes[0], nodes[-1]
        length, rise = right.x - left.x, right.y - left.y
        total = sum(force for _, force in forces)
        at_left = sum(force * (right.x - x) for x, force in forces) / length
        moment = _beam_moment(forces, at_left, left.x, span.sag_at[0])
        pull = moment / span.sag if span.sag else math.nan
        slope = rise / length
        first, last = pieces[0], pieces[-1]
        # Vertical parts at the ends from beam reactions and the slope of the closing string.
        v_left, v_right = at_left - pull * slope, total - at_left + pull * slope
        got_left = -first.tension_left * math.sin(math.radians(first.angle_left))
        got_right = last.tension_right * math.sin(math.radians(last.angle_right))
        near = ", weight at middles of pieces" if self._weight() else ""
        force = self._row_force
        length_words = self._length(length)
        return [
            force(f"SUM OF LOADS{name}", total, got_left + got_right, f"sum of P{near}"),
            force(
                f"V AT {left.mark}{name}",
                v_left,
                got_left,
                f"moments about {right.mark}, - H r / l",
            ),
            force(f"V AT {right.mark}{name}", v_right, got_right, "sum of P - V left"),
            (
                f"BEAM MOMENT{name}",
                f"{self._force(moment)} {self.layout.length_unit}",
                "",
                "",
                f"at x {self._length(span.sag_at[0] - left.x)} of span {length_words}",
            ),
            force(f"PULL H{name}", pull, span.horizontal, f"M / sag {self._length(span.sag)}"),
            force(
                f"T AT {left.mark}{name}",
                math.hypot(pull, v_left),
                first.tension_left,
                "root of H2 + V2",
            ),
            force(
                f"T AT {right.mark}{name}",
                math.hypot(pull, v_right),
                last.tension_right,
                "root of H2 + V2",
            ),
        ]

    def _weight(self) -> float:
        """Give the cable's weight by length as it acts in the state shown."""
        diagram = self.formed.diagrams[0]
        has_weight = len(diagram.load_line) == 2 * len(diagram.letters)
        if not has_weight:
            return 0.0
        drop = diagram.load_line[0] - diagram.load_line[1]
        return drop / self.formed.segments[0].unstressed_length

    def _row_force(self, name: str, hand: float, result: float, how: str) -> tuple[str, ...]:
        scale = max(abs(hand), abs(result), 1e-300)
        difference = _share(abs(hand - result) / scale)
        return (name, self._force(hand), self._force(result), difference, how)

    def _closures(self) -> list[tuple[str, ...]]:
        """Sum up the force polygons and the joints along the cable."""
        formed = self.formed
        total = sum(abs(node.load) for node in formed.nodes) or 1.0
        worst, where = 0.0, ""
        for k, node in enumerate(formed.nodes):
            if node.is_support:
                continue
            before, after = formed.segments[k - 1], formed.segments[k]
            a, b = math.radians(before.angle_right), math.radians(after.angle_left)
            x = after.tension_left * math.cos(b) - before.tension_right * math.cos(a)
            y = after.tension_left * math.sin(b) - before.tension_right * math.sin(a) - node.load
            if math.hypot(x, y) >= worst:
                worst, where = math.hypot(x, y), node.mark
        up = sum(r.vertical for r in formed.reactions)
        down = sum(node.load for node in formed.nodes) + self._weight() * formed.unstressed_length
        return [
            (
                "CLOSURE AT POINTS",
                "0",
                f"{worst:.1e} {self.layout.force_unit}",
                _share(worst / total),
                f"worst of all, at {where}; share of the sum of loads",
            ),
            self._row_force("SUM OF V", down, up, "reactions hold all loads"),
        ]

    def inputs(self) -> Table:
        """List what the cable was given, with the handles it came from."""
        cable, formed = self.cable, self.formed
        datum = cable.datum or 0.0
        rows = [
            (
                f"SUPPORT {s.mark}",
                f"x {s.x:.10g}, y {s.y:.10g}, {self._level(s.y + datum)}",
                source_words(s.origin),
                s.origin.layer,
            )
            for s in cable.supports
        ]
        rule = formed.rule
        value = rule.text or f"{rule.value:.10g}"
        if rule.point is not None:
            value = f"x {rule.point[0]:.10g}, y {rule.point[1]:.10g}"
        origin = rule.origin if cable.rule is None else cable.rule.origin
        word = "FIRST FORMED BY" if formed.status == CUT else "RULE"
        rows.append((f"{word} {rule.kind.name}", value, source_words(origin), origin.layer))
        facts = (
            ("UNDER", formed.under if formed.under != _UNCASED else "the loads drawn"),
            ("LEVEL", f"{formed.level}{' (assumed)' if formed.level_is_assumed else ''}"),
            ("EA", "inextensible" if formed.ea is None else self._force(formed.ea)),
            ("WEIGHT", f"{formed.weight:.10g} {self.layout.force_unit}/{self.layout.length_unit}"),
            ("UNITS", f"{self.layout.length_unit}, {self.layout.force_unit}"),
        )
        rows += [
            (name, value, source_words(cable.origin), cable.origin.layer) for name, value in facts
        ]
        index = self.layout.cables.index(cable)
        rows.append(
            ("FINGERPRINT OF INPUTS", fingerprint(self.layout, self.formed, index), "SHA-256", "")
        )
        return self._table(
            "inputs", "INPUTS", ("INPUT", "VALUE", "FROM", "LAYER"), rows, (0, 1, 2, 3)
        )

    def loads(self) -> Table:
        """List the loads with the texts and handles they were read from."""
        rows = []
        nodes = [node for node in self.formed.nodes if not node.is_support]
        for load, node in zip(self.cable.loads, nodes, strict=True):
            words = ", ".join(
                self._load(value) if case == _UNCASED else f"{case} {self._load(value)}"
                for case, value in load.cases
            )
            origin = load.value_origin or load.origin
            source = source_words(origin) if load.source == "drawing" else load.source.upper()
            rows.append(
                (load.mark, f"{load.x:.10g}", words, self._load(node.load), origin.raw, source)
            )
        for key, load in self.cable.support_loads:
            words = ", ".join(f"{case} {self._load(value)}" for case, value in load.cases)
            mark = next((s.mark for s in self.cable.supports if s.key == key), "")
            rows.append((f"{load.mark} AT {mark}", f"{load.x:.10g}", words, "not on cable", "", ""))
        head = ("POINT", "X DRAWN", "AS READ", "IN STATE", "TEXT", "FROM")
        return self._table("loads", "LOADS AS READ", head, rows, (0, 2, 4, 5))

    def combinations(self) -> Table:
        """List the state shown and every combination with its level."""
        formed = self.formed
        assumed = " (assumed)" if formed.level_is_assumed else ""
        pull = formed.spans[0].horizontal if formed.horizontal is None else formed.horizontal
        rows = [
            (
                formed.under,
                f"{formed.level}{assumed}",
                formed.status,
                self._force(pull),
                self._force(formed.max_tension),
            )
        ]
        for state in formed.states:
            level = f"{state.level}{' (assumed)' if state.level_is_assumed else ''}"
            if state.fault:
                rows.append((state.combo, level, state.fault, "", ""))
            else:
                figures = (self._force(state.horizontal), self._force(state.max_tension))
                rows.append((state.combo, level, "checked", *figures))
        head = ("COMBINATION", "LEVEL", "WHAT", "PULL H", "MAX T")
        return self._table("combinations", "COMBINATIONS AND LEVELS", head, rows, (0, 1, 2))


def _share(value: float) -> str:
    """Write a difference as a share: what is only noise of the arithmetic as such."""
    return "< 1e-12" if value < 1e-12 else f"{value:.1e}"


def _vertical_forces(
    nodes: Sequence[Node], pieces: Sequence[Segment], weight: float
) -> list[tuple[float, float]]:
    """Give place and size of all vertical forces on a span, pieces' weights at their middles."""
    forces = [(node.x, node.load) for node in nodes if not node.is_support]
    if weight:
        forces += [(0.5 * (p.start[0] + p.end[0]), weight * p.unstressed_length) for p in pieces]
    return forces


def _beam_moment(
    forces: Iterable[tuple[float, float]], at_left: float, start: float, x: float
) -> float:
    """Give the moment of a simple beam at a place."""
    return at_left * (x - start) - sum(force * (x - at) for at, force in forces if at < x)
