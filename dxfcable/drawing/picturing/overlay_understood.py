"""What a layout holds, drawn as marks: lines first, then points, then their labels."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.drawing.picturing.overlay_marks import nearest_on
from dxfcable.model import Severity

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.picturing.overlay_marks import Labels, Marks
    from dxfcable.drawing.picturing.picture_page import Page
    from dxfcable.model import Anchor, Cable, Finding, Layout, LoadPoint, Point

_FARTHEST = 1e12
_ROUND = 9  # digits of a position that tell two findings apart

STYLE = """
.sheet { fill: #ffffff; fill-opacity: 0.9; stroke-width: 0.15; }
.words { fill: #111111; stroke: none; }
.plain { fill: #333333; stroke: none; }
.support { stroke: #0b4f9e; stroke-width: 0.6; fill: none; }
.load { stroke: #b3261e; stroke-width: 0.5; fill: none; }
.from { stroke: #b3261e; stroke-width: 0.35; fill: none; }
.from.head, .from.dot { fill: #b3261e; }
.rule { stroke: #6a1b9a; stroke-width: 0.6; fill: none; }
.string { stroke: #0b4f9e; stroke-width: 0.3; stroke-dasharray: 4 1.2 0.8 1.2; fill: none; }
.mast { stroke: #1b7837; stroke-width: 1.3; stroke-opacity: 0.75; fill: none; }
.stay { stroke: #1b7837; stroke-width: 0.9; stroke-dasharray: 5 2; fill: none; }
.anchor { stroke: #1b7837; stroke-width: 0.5; fill: #d5eedb; }
.deck { stroke: #8c510a; stroke-width: 1.2; stroke-opacity: 0.8; fill: none; }
.clearance { stroke: #00796b; stroke-width: 0.8; stroke-dasharray: 1 1.4; fill: none; }
.frame { stroke: #6a1b9a; stroke-width: 0.5; stroke-dasharray: 3 2; fill: none; }
.error { stroke: #b00020; stroke-width: 0.5; fill: #ffd9de; }
.warning { stroke: #b26a00; stroke-width: 0.5; fill: #ffe9c2; }
.note { stroke: #455a64; stroke-width: 0.4; fill: #e3eaee; }
.leg { stroke: #777777; stroke-width: 0.15; fill: none; }
.string.sheet, .support.sheet, .load.sheet, .rule.sheet, .anchor.sheet, .error.sheet,
.warning.sheet, .note.sheet, .frame.sheet { fill: #ffffff; fill-opacity: 0.9; }
.support.sheet, .load.sheet, .rule.sheet, .anchor.sheet { stroke-width: 0.15; }
.support.words, .load.words, .rule.words, .anchor.words, .error.words, .warning.words,
.note.words { fill: #111111; stroke: none; }
"""


class Understood:
    """Draws what a layout holds, lines first, then marks, then their labels."""

    def __init__(
        self,
        layout: Layout,
        findings: Sequence[Finding],
        page: Page,
        marks: Marks,
        labels: Labels,
    ) -> None:
        self._layout = layout
        self._findings = findings
        self._page = page
        self._marks = marks
        self._labels = labels
        self._unit = layout.force_unit or ""
        self._h = labels.height
        self._pending: list[tuple[str, Point, tuple[str, ...]]] = []

    def draw(self) -> None:
        """Draw everything."""
        self._lines()
        for support in self._layout.supports:
            kind = "" if support.kind.value == "end" else f" {support.kind.value}"
            title = f"support {support.mark}{kind}"
            self._ring("support", (support.x, support.y), f"{support.mark}{kind}", title)
        for cable in self._layout.cables:
            for point in (*cable.loads, *(load for _, load in cable.support_loads)):
                self._load(cable, point)
            self._rule(cable)
        self._anchors()
        self._found()
        for name, at, lines in self._pending:
            self._label(name, at, lines)

    def _at(self, point: Point) -> Point:
        """Place a point of the drawing on the page."""
        return self._page.at(*point)

    def _lines(self) -> None:
        """Draw strings, masts, stays, decks, clearances, frames."""
        ends = {s.key: (s.x, s.y) for s in self._layout.supports}
        for name, lines in (
            ("string", [(c.mark, [(s.x, s.y) for s in c.supports]) for c in self._layout.cables]),
            ("mast", [("", [ends[m.support], m.foot]) for m in self._layout.masts]),
            ("stay", [("", [ends[s.support], s.foot]) for s in self._layout.stays]),
            ("deck", [(c.mark, list(c.deck)) for c in self._layout.cables if c.deck]),
            ("clearance", [(c.mark, list(c.clearance)) for c in self._layout.cables]),
        ):
            for mark, points in lines:
                if len(points) > 1:
                    group = self._marks.group(name, f"{name} {mark}".strip())
                    group.line(name, [self._at(point) for point in points])
        for cable in self._layout.cables:
            if cable.frame is not None:
                x0, y1 = self._at((cable.frame.x0, cable.frame.y0))
                x1, y0 = self._at((cable.frame.x1, cable.frame.y1))
                title = f"frame for the force diagram of {cable.mark}"
                self._marks.group("frame", title).rect("frame", (x0, y0, x1, y1))

    def _ring(self, name: str, point: Point, label: str, title: str) -> None:
        """Mark a point with a double ring and a label."""
        at = self._at(point)
        group = self._marks.group(name, title)
        for radius in (0.8, 1.2):
            group.circle(name, at, radius * self._h)
        self._labels.keep_clear(at, 1.2 * self._h)
        self._pending.append((name, at, (label,)))

    def _load(self, cable: Cable, load: LoadPoint) -> None:
        """Mark a load point, lead the text it came from to it, and say the value."""
        at = self._at((load.x, load.y))
        values = [
            f"{case} {value:.6g} {self._unit}".strip().removeprefix("load ")
            for case, value in load.cases
        ]
        source = "" if load.source == "drawing" else f" ({load.source})"
        title = f"load point {load.mark} of {cable.mark}: {', '.join(values) or 'no value'}"
        origin = load.value_origin
        if origin is not None and origin.raw:
            title += f'; from {origin.kind} {origin.handle or ""} "{origin.raw}"'
        group = self._marks.group("load", title)
        group.circle("load", at, 0.7 * self._h)
        group.line("load", [(at[0] - self._h, at[1]), (at[0] + self._h, at[1])])
        self._labels.keep_clear(at, self._h)
        if origin is not None and origin.at is not None and is_place(origin.at):
            start = self._at(origin.at)
            self._labels.keep_clear(start, 1.5 * self._h)
            if math.dist(start, at) > self._h:
                group.circle("from dot", start, 0.3 * self._h)
                group.arrow("from", start, at, 1.1 * self._h)
        self._pending.append(("load", at, (f"{load.mark}{source}", *values)))

    def _rule(self, cable: Cable) -> None:
        """Mark where the rule is stated, and the point that a cable goes through."""
        rule = cable.rule
        if rule is None:
            return
        text = rule.text or rule.kind.value
        for point in (rule.origin.at, rule.point):
            if point is None or not is_place(point):
                continue
            at = self._at(point)
            size = self._h
            group = self._marks.group("rule", f"rule of {cable.mark}: {text}")
            group.polygon("rule", [(at[0] + x * size, at[1] + y * size) for x, y in _SQUARE])
            self._labels.keep_clear(at, size)
            self._pending.append(("rule", at, (f"{cable.mark}: {text}",)))

    def _anchors(self) -> None:
        """Mark anchors at the feet of stays and masts."""
        for anchor in anchors_of(self._layout):
            at = self._at(anchor.at)
            group = self._marks.group("anchor", f"anchor {anchor.mark}")
            group.polygon("anchor", [(at[0] + x * self._h, at[1] + y * self._h) for x, y in _UP])
            self._labels.keep_clear(at, self._h)
            self._pending.append(("anchor", at, (anchor.mark,)))

    def _found(self) -> None:
        """Mark findings with a position, those of one place together."""
        places: dict[tuple[float, float], list[Finding]] = {}
        for finding in self._findings:
            if finding.at is not None and is_place(finding.at):
                x, y = finding.at
                places.setdefault((round(x, _ROUND), round(y, _ROUND)), []).append(finding)
        for point, found in places.items():
            name = min((f.severity for f in found), key=_ORDER.index).value
            x, y = self._at(point)
            if not (0 <= x <= self._page.width and 0 <= y <= self._page.height):
                continue  # far off: told below the picture only
            title = "; ".join(f"{f.code}: {f.text}" for f in found)
            group = self._marks.group(f"finding {name}", title)
            draw_sign(group, name, (x, y), self._h)
            self._labels.keep_clear((x, y), self._h)
            codes = tuple(dict.fromkeys(f.code for f in found))
            self._pending.append((name, (x, y), codes))

    def _label(self, name: str, at: Point, lines: tuple[str, ...]) -> None:
        """Write a label beside its mark, with a leg to it where it stands off."""
        box = self._labels.place(at, lines)
        near = nearest_on(box, at)
        if math.dist(near, at) > 2.2 * self._h:
            self._marks.line("leg", [near, at])
        self._marks.label(name, box, lines, self._h)


_ORDER = (Severity.ERROR, Severity.WARNING, Severity.NOTE)
_SQUARE = ((-1.0, -1.0), (1.0, -1.0), (1.0, 1.0), (-1.0, 1.0))
_UP = ((-1.0, 1.1), (1.0, 1.1), (0.0, -0.7))
SIGNS = {
    "error": ((-0.5, -1.2), (0.5, -1.2), (1.2, -0.5), (1.2, 0.5), (0.5, 1.2), (-0.5, 1.2),
              (-1.2, 0.5), (-1.2, -0.5)),
    "warning": ((-1.2, 1.0), (1.2, 1.0), (0.0, -1.1)),
    "note": ((-1.0, 0.0), (0.0, -1.0), (1.0, 0.0), (0.0, 1.0)),
}  # fmt: skip


def anchors_of(layout: Layout) -> tuple[Anchor, ...]:
    """Return the anchors of stays and masts, each place once."""
    stated = [stay.anchor for stay in layout.stays] + [mast.anchor for mast in layout.masts]
    return tuple({anchor.at: anchor for anchor in stated if anchor is not None}.values())


def draw_sign(group: Marks, name: str, at: Point, height: float) -> None:
    """Draw the sign of a severity: octagon, triangle, diamond."""
    group.polygon(name, [(at[0] + x * height, at[1] + y * height) for x, y in SIGNS[name]])


def is_place(point: Point) -> bool:
    """Tell whether a point lies in the plane that a drawing can use."""
    return all(abs(c) < _FARTHEST for c in point)  # false for NaN
