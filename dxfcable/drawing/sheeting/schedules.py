"""What the schedules of a cable say: cable, points, pieces, hangers, reactions, anchorages."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.schedule_tables import (
    point_table,
    segment_table,
    summary_table,
)
from dxfcable.drawing.sheeting.ruled_table import Schedule
from dxfcable.drawing.sheeting.saying import held_words, under_words
from dxfcable.model import SupportKind
from dxfcable.recorded import CUT

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import Anchorage, CableRevisions, Reaction

# What a fabricator is told on the sheet and the drawing does not say: fields to fill.
_TO_FILL = ("SPECIFICATION, COATING", "PRESTRETCH", "LENGTH TOLERANCE")
_FITTINGS = "END FITTINGS"
_NOISE = 1e-11  # of the largest reaction: rounding of a sum


@dataclass(frozen=True, slots=True, kw_only=True)
class Fabrication:
    """What is known beyond the state shown, in words.

    Attributes
    ----------
    cable_rows : tuple of (str, str)
        Names and values for the cable schedule.
    hanger_head : tuple of str
        More columns of the hanger schedule.
    hanger_rows : tuple of tuples of str
        Their cells, for the hangers from left to right.
    """

    cable_rows: tuple[tuple[str, str], ...] = ()
    hanger_head: tuple[str, ...] = ()
    hanger_rows: tuple[tuple[str, ...], ...] = ()


def schedule(
    key: str,
    title: str,
    head: Sequence[str],
    rows: Sequence[Sequence[str]],
    *,
    lefts: Sequence[int] = (0,),
) -> Schedule:
    """Make a schedule without the columns that are empty in every row.

    Parameters
    ----------
    lefts : sequence of int
        Columns of words; numbers stand to the right.
    """
    kept = [k for k in range(len(head)) if any(row[k] for row in rows) or not head[k]]
    return Schedule(
        key=key,
        title=title,
        head=tuple(head[k] for k in kept),
        aligns=tuple(Align.LEFT if k in lefts else Align.RIGHT for k in kept),
        rows=tuple(tuple(row[k] for k in kept) for row in rows),
    )


def cable_schedules(
    view: View, temperature: str, more: Fabrication, *, has_places: bool
) -> list[Schedule]:
    """List the schedules of one cable as formed, in the order that they are read in.

    Parameters
    ----------
    view : View
        In drawing units.
    temperature : str
        Reference temperature, or "".
    more : Fabrication
        What is known beyond the state shown.
    has_places : bool
        Whether the elevation's strip says where the points are.
    """
    found = [_cable(view, temperature, more)]
    hangs_all = all(node.is_support or node.hanger is not None for node in view.formed.nodes)
    if not has_places and not hangs_all:  # a hanger schedule says the same and more
        found.append(_points(view))
    found += [*_spans(view), _pieces(view), *_hangers(view, more)]
    found.append(
        schedule(
            "reactions",
            f"REACTIONS ON CABLE {view.formed.mark}, {under_words(view)}",
            ("SUPPORT", "H", "V"),
            reaction_rows(view, view.formed.reactions),
        )
    )
    if view.anchorages:
        title = f"MASTS, STAYS AND ANCHORS, ALL CABLES AT THEM, {under_words(view)}"
        rows = anchorage_rows(view, [a for _, a in view.anchorages])
        found.append(schedule("anchorages", title, ANCHORAGE_HEAD, rows, lefts=(0, 1)))
    found += _cases(view)
    return found


def _cable(view: View, temperature: str, more: Fabrication) -> Schedule:
    """Say what governs the cable and what follows; leave fields for what only offices know."""
    alone = replace(view, anchorages=())
    table = summary_table(alone, temperature)
    formed, wording = view.formed, view.wording
    said = {"under": ("UNDER", under_words(view).removeprefix("UNDER "))}
    if formed.status == CUT:
        said["rule"] = ("HELD", held_words(view))
    rows = [("MARK", formed.mark), *(said.get(key, cells) for key, cells in table.rows)]
    total = sum(node.load for node in formed.nodes)
    rows.append(("SUM OF POINT LOADS", wording.load(total)))
    if formed.clearance is not None:
        least = formed.clearance
        rows.append(("LEAST CLEARANCE", f"{wording.length(least.least)}, UNDER {least.state}"))
    rows.append(("LOADS FROM", formed.loads_source.upper()))
    if not view.cable.strand:
        rows.append(("SIZE, CONSTRUCTION", ""))
    rows += more.cable_rows
    if not any(name.startswith("FITTING") for name, _ in more.cable_rows):
        rows.append((_FITTINGS, ""))
    rows += [(name, "") for name in _TO_FILL]
    return Schedule(
        key="cable",
        title=f"CABLE SCHEDULE {formed.mark}",
        head=("", ""),
        aligns=(Align.LEFT, Align.LEFT),
        rows=tuple((name, value) for name, value in rows),
    )


def _points(view: View) -> Schedule:
    table = point_table(view)
    rows = [cells for _, cells in table.rows]
    return schedule("points", f"POINTS OF CABLE {view.formed.mark}", table.head, rows)


def _pieces(view: View) -> Schedule:
    table = segment_table(view)
    rows = [cells for _, cells in table.rows]
    title = f"PIECES OF CABLE {view.formed.mark}, {under_words(view)}"
    return schedule("pieces", title, table.head, rows)


def _spans(view: View) -> list[Schedule]:
    """List the spans of a chain."""
    wording, first = view.wording, view.formed.nodes[0]
    if len(view.formed.spans) < 2:
        return []
    lift = first.elevation - first.y
    supports = {support.key: support.kind for support in view.cable.supports}
    at = [node for node in view.formed.nodes if node.is_support]
    rows = []
    for left, right, span in zip(at, at[1:], view.formed.spans, strict=False):
        kind = supports.get(right.support if right.support is not None else -1, SupportKind.END)
        cells = (
            f"{left.mark} - {right.mark}",
            wording.length(right.x - left.x),
            wording.force(span.horizontal),
            wording.length(span.sag),
            wording.level(span.low_point[1] + lift),
            "" if kind is SupportKind.END else kind.value.upper(),
        )
        rows.append(cells)
    head = ("SPAN", "LENGTH", "PULL H", "SAG", "LOW POINT", "SADDLE AT RIGHT")
    return [schedule("spans", f"SPANS OF CABLE {view.formed.mark}", head, rows, lefts=(0, 5))]


def _cases(view: View) -> list[Schedule]:
    """List loads case by case, where there is more than one."""
    cases = list(dict.fromkeys(case for p in view.cable.loads for case, _ in p.cases))
    if len(cases) < 2:
        return []
    rows = []
    for point in view.cable.loads:
        values = dict(point.cases)
        words = [view.wording.load(values[c]) if c in values else "" for c in cases]
        rows.append((point.mark, *words))
    title = f"LOADS OF CABLE {view.formed.mark} BY CASE"
    return [schedule("cases", title, ("POINT", *cases), rows)]


def _hangers(view: View, more: Fabrication) -> list[Schedule]:
    """List hangers from the cable down."""
    wording, nodes = view.wording, view.formed.nodes
    rows = []
    further = iter(more.hanger_rows)
    for node in nodes:
        if node.hanger is None:
            continue
        cells = (
            node.mark,
            wording.length(node.x - nodes[0].x),
            wording.level(node.elevation),
            wording.level(node.elevation - node.hanger),
            wording.length(node.hanger),
            wording.load(node.load),
        )
        rows.append((*cells, *next(further, ())))
    if not rows:
        return []
    head = ("HANGER", "X", "AT CABLE", "AT FOOT", "LENGTH", "FORCE", *more.hanger_head)
    title = f"HANGER SCHEDULE {view.formed.mark}, {under_words(view)}"
    return [schedule("hangers", title, head, rows)]


def change_schedules(view: View, revisions: CableRevisions | None) -> list[Schedule]:
    """List how far points moved at the latest revision."""
    if revisions is None or not revisions.changes or not revisions.rows:
        return []
    last = revisions.rows[-1]
    length = view.wording.length
    rows = [(c.mark, length(c.dx), length(c.dy)) for c in revisions.changes]
    title = f"MOVED AT REV {last.rev or last.number}, CABLE {view.formed.mark}"
    return [schedule("moved", title, ("POINT", "RIGHT", "UP"), rows)]


def reaction_rows(view: View, reactions: Sequence[Reaction]) -> list[tuple[str, ...]]:
    """Give the rows of reactions; what is left of a sum that is nothing is told as nothing."""
    noise = _NOISE * max((abs(v) for r in reactions for v in (r.horizontal, r.vertical)), default=0)

    def force(value: float) -> str:
        return view.wording.force(value if abs(value) > noise else 0.0)

    return [(r.mark, force(r.horizontal), force(r.vertical)) for r in reactions]


ANCHORAGE_HEAD = (
    "AT",
    "MEMBER",
    "FORCE",
    "ANCHOR H",
    "UPLIFT",
    "FACTOR SLIDING",
    "FACTOR UPLIFT",
)


def anchorage_rows(view: View, anchorages: Sequence[Anchorage]) -> list[tuple[str, ...]]:
    """Give one row for each mast, stay and anchor, and for what is left over at a joint."""
    force, moment = view.wording.force, view.wording.moment
    rows: list[tuple[str, ...]] = []
    for found in anchorages:
        at = found.mark
        if found.mast is not None:
            rows.append((at, "MAST", force(found.mast), "", "", "", ""))
        many = len(found.stays) > 1
        for number, stay in enumerate(found.stays, start=1):
            rows.append((at, f"STAY {number}" if many else "STAY", force(stay), "", "", "", ""))
        for anchor in found.anchors:
            factors = (anchor.sliding_factor, anchor.uplift_factor)
            words = ["" if f is None else f"{f:.2f}" for f in factors]
            name = f"ANCHOR {anchor.mark}".strip()
            row = (at, name, "", force(anchor.horizontal), force(anchor.uplift), *words)
            rows.append(row)
        if found.head_shear:
            rows.append((at, "HEAD SHEAR", force(found.head_shear), "", "", "", ""))
        if found.base_moment:
            rows.append((at, "BASE MOMENT", moment(found.base_moment), "", "", "", ""))
        if any(found.residual):
            x, y = found.residual
            rows.append((at, f"NOT HELD: X {force(x)}, Y {force(y)}", "", "", "", "", ""))
    return rows
