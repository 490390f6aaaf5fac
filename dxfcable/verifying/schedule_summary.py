"""The summary of a schedule held against the linework and the drafter's drawing."""

from __future__ import annotations

import difflib
import itertools
import math
from typing import TYPE_CHECKING

from dxfcable.verifying.schedule_cells import (
    SCHEDULE,
    Cell,
    compare,
    hold_cell,
    hold_words,
)
from dxfcable.verifying.schedule_safety import hold_anchor_rows, hold_capacity
from dxfcable.verifying.words import Kind

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.drawing.recovery.schedules import Schedule
    from dxfcable.verifying.cable_labels import SpanLabels
    from dxfcable.verifying.joint_laws import JointFacts
    from dxfcable.verifying.shapes import Shape
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader

_NAMES = (
    *("STATUS", "RULE", "UNDER", "LEVEL", "LARGEST TENSION", "SAG", "LENGTH"),
    *("UNSTRESSED LENGTH", "CABLE WEIGHT", "EA", "SUPPORTS", "ELEVATIONS"),
)

_RIGID, _TABLES = "CUT, INEXTENSIBLE", 3  # summary, points, pieces


def length_slack(facts: SpanLabels) -> float:
    """Give how well lengths along a span are known [length]."""
    return 8.0 * facts.span.grain * facts.span.pieces


def hold_summary(
    tally: Tally, schedule: Schedule, spans: Sequence[SpanLabels], reader: Reader
) -> None:
    """Hold what the summary says of the whole cable."""
    for first, second in schedule.summary:
        if first is None or second is None:
            lone = first or second
            if lone is not None and lone.text == _RIGID:
                continue
            text = f'the row of "{lone.text}" is not whole' if lone else "a row is not whole"
            tally.fail(SCHEDULE, text, lone)
    shapes = [s.shape for s in spans if s.shape is not None]
    known = {n.text: v for n, v in schedule.summary if n is not None}
    for missing in [name for name in (*_NAMES, *_pull_names(spans)) if name not in known]:
        tally.fail(SCHEDULE, f'the row of "{missing}" is missing', _like(schedule, missing))
    _hold_given(tally, known, spans[0], reader)
    _hold_rigid(tally, schedule, known)
    if len(shapes) != len(spans):
        return
    for name, cell in _summary_cells(spans, shapes).items():
        if known.get(name) is not None:
            hold_cell(tally, known[name], name, cell, reader)
    for name, facts in zip(_pull_names(spans), spans, strict=False):
        cell = Cell(kind=Kind.FORCE, value=facts.span.pull, slack=facts.span.force_error)
        if name in known:
            hold_cell(tally, known[name], name, cell, reader)
    _hold_largest(tally, known.get("LARGEST TENSION"), spans, reader)
    hold_capacity(tally, schedule, spans, reader)


def _hold_rigid(tally: Tally, schedule: Schedule, known: Mapping[str, IssuedEntity | None]) -> None:
    """Hold the heads over the tables of a cable that is cut and does not stretch."""
    due = [known.get(name) for name in ("STATUS", "EA")]
    is_due = [e.text if e is not None else "" for e in due] == ["CUT", "INEXTENSIBLE"]
    heads = [entity for entity in schedule.entities() if entity.text == _RIGID]
    if is_due and len(heads) < _TABLES:
        text = f'{len(heads)} tables have the head "{_RIGID}", {_TABLES} are due'
        tally.fail(SCHEDULE, text, due[0])
    elif heads and not is_due and None not in due:
        tally.fail(SCHEDULE, f'its head says "{_RIGID}", its rows do not', heads[0])


def _pull_names(spans: Sequence[SpanLabels]) -> list[str]:
    """Name the rows of the pull: one, or one a span where spans differ."""
    pulls = [facts.span.pull for facts in spans]
    if max(pulls) - min(pulls) <= 1e-9 * max(pulls) + 2.0 * spans[0].span.force_error:
        return ["PULL H"]
    marks = [support.mark for support in spans[0].cable.supports]
    return [f"PULL H {a} - {b}" for a, b in itertools.pairwise(marks)]


def _like(schedule: Schedule, name: str) -> IssuedEntity | None:
    """Find the row whose name may once have been another."""
    names = {n.text: n for n, _ in schedule.summary if n is not None and n.text not in _NAMES}
    found = difflib.get_close_matches(name, names, 1)
    return names[found[0]] if found else schedule.title


def _hold_given(
    tally: Tally, known: Mapping[str, IssuedEntity | None], facts: SpanLabels, reader: Reader
) -> None:
    """Hold what the schedule repeats of the drafter's drawing."""
    cable, combination = facts.cable, facts.combination
    stiff, weight = known.get("EA"), known.get("CABLE WEIGHT")
    if stiff is not None and cable.ea is None:
        hold_words(tally, stiff, "EA", "INEXTENSIBLE")
    elif stiff is not None and cable.ea is not None:
        cell = Cell(kind=Kind.LOAD, value=cable.ea, slack=1e-9 * cable.ea)
        hold_cell(tally, stiff, "EA", cell, reader)
    if weight is not None and not cable.weight:
        hold_words(tally, weight, "CABLE WEIGHT", "WEIGHTLESS")
    elif weight is not None:
        force, _, rest = weight.text.partition("/")
        cell = Cell(kind=Kind.LOAD, value=cable.weight, slack=1e-9 * cable.weight)
        compare(tally, weight, force, "CABLE WEIGHT", cell, reader)
        if rest.split(" ")[0] != reader.length_unit:
            tally.fail(SCHEDULE, f'CABLE WEIGHT says "{weight.text}"', weight)
    datum = known.get("ELEVATIONS")
    if datum is not None:
        due = f"DIFFERENCES FROM {cable.supports[0].mark or 'LEFT'}"
        due = due if cable.datum is None else "DATUM OF EL"
        if datum.text.strip().removesuffix(" AS DRAWN") != due:
            tally.fail(SCHEDULE, f'ELEVATIONS says "{datum.text}", not "{due}"', datum)
    status, level = known.get("STATUS"), known.get("LEVEL")
    if status is not None and status.text not in ("FORMED", "CUT"):
        tally.fail(SCHEDULE, f'STATUS says "{status.text}"', status)
    if level is not None and combination is not None:
        said = combination.level.upper()
        if level.text not in (said, f"{said} (ASSUMED)"):
            tally.fail(SCHEDULE, f'LEVEL says "{level.text}", not {combination.level}', level)


def _summary_cells(spans: Sequence[SpanLabels], shapes: Sequence[Shape]) -> Mapping[str, Cell]:
    slack = sum(length_slack(facts) for facts in spans)
    length = math.fsum(one for shape in shapes for one in shape.lengths)
    unstressed = math.fsum(one for shape in shapes for one in shape.unstressed)
    return {
        "SAG": Cell(kind=Kind.LENGTH, value=max(s.sag for s in shapes), slack=slack),
        "LENGTH": Cell(kind=Kind.LENGTH, value=length, slack=slack),
        "UNSTRESSED LENGTH": Cell(kind=Kind.LENGTH, value=unstressed, slack=slack),
    }


def _hold_largest(
    tally: Tally, entity: IssuedEntity | None, spans: Sequence[SpanLabels], reader: Reader
) -> None:
    """Hold the largest tension and the piece that it is in."""
    if entity is None:
        return
    force, _, place = entity.text.partition(", ")
    facts = max(spans, key=lambda s: s.largest)
    cell = Cell(kind=Kind.FORCE, value=facts.largest, slack=facts.span.force_error)
    where = "LARGEST TENSION"
    compare(tally, entity, force, where, cell, reader)
    near = facts.largest * (1.0 - 1e-6)
    names = {
        f"{s.letters[k]}O" for s in spans for k in range(s.span.pieces) if s.span.largest(k) >= near
    }
    if place.split(" ")[0] not in names:
        text = f'{where} says "{place}", it is in {" or ".join(sorted(names))}'
        tally.fail(SCHEDULE, text, entity)


def hold_joint_rows(
    tally: Tally, schedule: Schedule, joints: Sequence[JointFacts], reader: Reader
) -> None:
    """Hold forces of masts, stays and anchors."""
    for joint in joints:
        found, mark, error = joint.anchorage, joint.anchorage.mark, joint.error
        rows: list[tuple[str, float]] = []
        if found.mast is not None:
            rows.append((f"{mark} MAST", found.mast))
        words = ["STAY"] if len(found.stays) == 1 else [f"STAY {n + 1}" for n in range(9)]
        rows += [(f"{mark} {w}", force) for w, force in zip(words, found.stays, strict=False)]
        for name, value in rows:
            cell = Cell(kind=Kind.FORCE, value=value, slack=error)
            if schedule.value(name) is None:
                tally.fail(SCHEDULE, f"{name} is missing", _like(schedule, name))
            else:
                hold_cell(tally, schedule.value(name), name, cell, reader)
    hold_anchor_rows(tally, schedule, joints, _like, reader)
