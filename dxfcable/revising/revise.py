"""A load change answered from the issued drawing: formed anew, or kept at its cut length."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.errors import LayoutError
from dxfcable.model import CableRevisions, Finding, Revised, RevisionRow, Severity
from dxfcable.recorded import CUT
from dxfcable.revising.movements import changes_of, least_shown, movements
from dxfcable.revising.past import as_formed, as_issued, hangers_of
from dxfcable.revising.recorded_loads import listing, partners, same_cases
from dxfcable.solving.built import Standing
from dxfcable.solving.governing import Forming
from dxfcable.solving.solve import solve

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.model import Cable, FormedCable, Layout, Movement, Point, Rule, Solution
    from dxfcable.recorded import CableRecord
    from dxfcable.settings import Settings

_SAME_PLACE = 1e-6  # of the span
HOLD_RULE, HOLD_CUT = "rule", "cut-length"


@dataclass(frozen=True, slots=True, kw_only=True)
class Revision:
    """What a revision holds, and how its row is to read.

    Attributes
    ----------
    hold : str
        `rule` forms anew; `cut-length` keeps every unstressed length.
    delta_t : float
        Change from the reference temperature [K]; only with `cut-length`.
    move_clamps : bool
        Whether load points drawn elsewhere are clamped there now.
    rev, description, by, date : str
        Of the revision row, blank where nobody said.
    """

    hold: str
    delta_t: float = 0.0
    move_clamps: bool = False
    rev: str = ""
    description: str = ""
    by: str = ""
    date: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Answer:
    """The layout as solved after a load change, what follows, and the records it came from."""

    layout: Layout
    solution: Solution
    records: Mapping[str, CableRecord]


def revise(
    layout: Layout,
    records: Mapping[str, CableRecord],
    revision: Revision,
    settings: Settings,
    combos: tuple[str, ...],
) -> Answer:
    """Answer a load change.

    Parameters
    ----------
    layout : Layout
        As drawn, with the loads that count now.
    records : mapping of str to CableRecord
        Of the drawing handed in, by mark of the cable.
    combos : tuple of str
        Combinations to check; none at all: those of the record.

    Raises
    ------
    LayoutError
        Where a cable has no record, or cannot be solved.
    """
    _refuse_unrecorded(layout, records)
    issued = records
    before = as_issued(layout, records, settings)
    start = as_formed(layout, records, settings)
    findings: list[Finding] = []
    standing: dict[str, Standing] = {}
    if revision.hold == HOLD_CUT:
        if revision.move_clamps:
            records = _clamps_moved(layout, records, before, findings)
        standing = {
            mark: Standing(
                record=record,
                delta_t=revision.delta_t,
                is_revised=True,
                hangers=hangers_of(start.get(mark)),
                formed_pull=start[mark].horizontal if mark in start else None,
            )
            for mark, record in records.items()
        }
        findings += _temperature_notes(layout, records, revision)
    else:
        layout = _to_form(layout, records, findings)
    texts = combos or tuple(dict.fromkeys(c for r in records.values() for c in r.combos))
    forming = Forming(combos=texts, combos_are_recorded=not combos)
    solution = solve(layout, forming, settings, standing)
    revised, revisions = [], []
    for cable, after in zip(layout.cables, solution.cables, strict=True):
        record, old = records[cable.mark], before[cable.mark]
        places = partners(
            [(p.mark, p.x) for p in cable.loads], [(p.mark, p.x) for p in issued[cable.mark].loads]
        )
        moved = movements(cable, old, after, start[cable.mark], places)
        revised.append(Revised(cable=cable.mark, held=revision.hold, before=old, movement=moved))
        note = listing(cable, record, layout.force_unit or "")
        findings += [note] if note else []
        findings += _lean_note(cable, moved, settings.limits.lean_deg)
        least = settings.limits.movement or least_shown(layout.length_unit)
        rows = _rows(cable, record, revision, old, moved, least)
        revisions += [rows] if rows else []
    whole = replace(
        solution,
        revised=tuple(revised),
        revisions=tuple(revisions),
        findings=(*findings, *solution.findings),
    )
    return Answer(layout=layout, solution=whole, records=records)


def kept_revisions(
    solution: Solution, records: Mapping[str, CableRecord]
) -> tuple[CableRevisions, ...]:
    """Return what stays on the revision layer when a drawing is solved again.

    The rows stay; old profile and changes only while every changed point still stands there.
    """
    result = []
    for formed in solution.cables:
        record = records.get(formed.mark)
        if record is None or record.revisions is None:
            continue
        kept = record.revisions
        places = {n.mark: (n.x, n.y) for n in formed.nodes}
        ends = [n.x for n in formed.nodes if n.is_support]
        tolerance = _SAME_PLACE * (max(ends) - min(ends))
        stands = all(
            change.mark in places and _is_near(places[change.mark], change.at, tolerance)
            for change in kept.changes
        )
        result.append(kept if stands else replace(kept, old=(), changes=()))
    return tuple(result)


def _is_near(a: Point, b: Point, tolerance: float) -> bool:
    return abs(a[0] - b[0]) <= tolerance and abs(a[1] - b[1]) <= tolerance


def _refuse_unrecorded(layout: Layout, records: Mapping[str, CableRecord]) -> None:
    """Refuse a drawing with a cable that has never been solved."""
    missing = [cable for cable in layout.cables if cable.mark not in records]
    if not missing and layout.cables:
        return
    named = ", ".join(f"cable {cable.mark}" for cable in missing) or "it"
    fault = Finding(
        code="no-record",
        severity=Severity.ERROR,
        text=f"the drawing keeps no record of {named}, so nothing can be held",
        remedy="Solve it first; only a drawing that was solved can be revised.",
        cable=missing[0].mark if missing else None,
    )
    raise LayoutError(fault.text, (*layout.findings, fault))


def _clamps_moved(
    layout: Layout,
    records: Mapping[str, CableRecord],
    before: Mapping[str, FormedCable],
    findings: list[Finding],
) -> dict[str, CableRecord]:
    """Clamp load points where they are drawn now."""
    from dxfcable.revising.clamps import with_clamps_moved

    result = dict(records)
    for cable in layout.cables:
        record, note = with_clamps_moved(cable, records[cable.mark], before[cable.mark])
        result[cable.mark] = record
        findings += [note] if note else []
    return result


def _temperature_notes(
    layout: Layout, records: Mapping[str, CableRecord], revision: Revision
) -> list[Finding]:
    """Say what temperature the cables stand at, where it is or was not the reference."""
    result = []
    for cable in layout.cables:
        was = records[cable.mark].delta_t
        has_alpha = cable.alpha is not None or records[cable.mark].alpha is not None
        if revision.delta_t and not has_alpha:
            fault = Finding(
                code="no-alpha",
                severity=Severity.ERROR,
                text=f"cable {cable.mark} states no ALPHA, so a change of temperature cannot act",
                remedy='Write ALPHA into its data block, such as "12e-6 /C".',
                cable=cable.mark,
                handle=cable.origin.handle,
                line=cable.origin.line,
            )
            raise LayoutError(fault.text, (*layout.findings, fault))
        if was or revision.delta_t:
            text = f"cable {cable.mark} stands at {revision.delta_t:+g} K"
            text += " from the reference temperature" + (f" (before: {was:+g} K)" if was else "")
            result.append(
                Finding(code="temperature", severity=Severity.NOTE, text=text, cable=cable.mark)
            )
    return result


def _to_form(layout: Layout, records: Mapping[str, CableRecord], findings: list[Finding]) -> Layout:
    """Fill rule and UNDER from the record where the drawing states none; say what is let go."""
    cables = []
    for cable in layout.cables:
        record = records[cable.mark]
        if record.status == CUT:
            findings.append(discarded(cable))
        stated, used = record.stated_rule, record.rule
        if cable.rule is None:
            cable = replace(cable, rule=used)
        elif not _is_same_rule(cable.rule, used):
            is_overruled = stated is not None and _is_same_rule(cable.rule, stated)
            held = "the one used last" if is_overruled else "the drawing's"
            findings.append(
                Finding(
                    code="rule-changed",
                    severity=Severity.NOTE,
                    text=f"cable {cable.mark}: {cable.rule.kind.name} {cable.rule.value:g} of the "
                    f"drawing is not the rule used last, {used.kind.name} {used.value:g}; {held} "
                    "is held",
                    cable=cable.mark,
                )
            )
            if is_overruled:
                cable = replace(cable, rule=used)
        under = cable.under or record.under
        if record.stated_under is not None and cable.under == record.stated_under:
            parts = cable.under.rpartition(":")[2].split(), record.under.split()
            under = cable.under if "".join(parts[0]) == "".join(parts[1]) else record.under
        cables.append(replace(cable, under=under))
    return replace(layout, cables=tuple(cables))


def _is_same_rule(a: Rule, b: Rule) -> bool:
    """Tell whether two rules ask the same."""
    return (a.kind, a.value, a.point) == (b.kind, b.value, b.point)


def discarded(cable: Cable) -> Finding:
    """Say that forming anew lets go of a cable that was cut."""
    return Finding(
        code="cut-discarded",
        severity=Severity.NOTE,
        text=f"cable {cable.mark} was cut: forming it anew discards that cable",
        cable=cable.mark,
        handle=cable.origin.handle,
        line=cable.origin.line,
        layer=cable.origin.layer or None,
        at=cable.origin.at,
    )


def _lean_note(cable: Cable, moved: Sequence[Movement], limit: float) -> list[Finding]:
    """Say which hangers lean so far that their horizontal part should not be neglected."""
    leaning = [m for m in moved if m.lean_deg is not None and m.lean_deg > limit]
    if not leaning:
        return []
    words = ", ".join(f"{m.mark} {m.lean_deg:.1f} deg" for m in leaning)
    return [
        Finding(
            code="hanger-lean",
            severity=Severity.NOTE,
            text=f"cable {cable.mark}: hangers lean more than {limit:g} degrees, and their "
            f"horizontal part is neglected: {words}",
            cable=cable.mark,
        )
    ]


def _rows(
    cable: Cable,
    record: CableRecord,
    revision: Revision,
    before: FormedCable,
    moved: Sequence[Movement],
    least: float,
) -> CableRevisions | None:
    """Add a row for what changed; nothing changed: what the record has stays."""
    changes = changes_of(tuple(moved), least)
    if not changes and not _inputs_differ(cable, record, revision):
        return record.revisions
    rows = record.revisions.rows if record.revisions else ()
    row = RevisionRow(
        number=(rows[-1].number if rows else 0) + 1,
        rev=revision.rev,
        description=revision.description,
        by=revision.by,
        date=revision.date,
    )
    old = before.curves or (tuple((n.x, n.y) for n in before.nodes),)
    return CableRevisions(cable=cable.mark, rows=(*rows, row), old=old, changes=changes)


def _inputs_differ(cable: Cable, record: CableRecord, revision: Revision) -> bool:
    """Tell whether loads, supports or temperature are others than those used last."""
    ends = (cable.supports[0], cable.supports[-1])
    reach = _SAME_PLACE * (ends[1].x - ends[0].x)  # other programs round what they save
    pairs = zip(cable.loads, record.loads, strict=False)
    delta_t = revision.delta_t if revision.hold == HOLD_CUT else 0.0
    return (
        len(cable.loads) != len(record.loads)
        or any(not same_cases(load.cases, kept.cases) for load, kept in pairs)
        or any(
            not _is_near((s.x, s.y), (k.x, k.y), reach)
            for s, k in zip(ends, record.supports, strict=False)
        )
        or delta_t != record.delta_t
    )
