"""All laws held against all cables of a drawing, one after the other."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.drawing.recovery.by_place import ExpectedSpan
from dxfcable.model import Severity
from dxfcable.pairing import pair
from dxfcable.verifying.bench import Bench
from dxfcable.verifying.sheet import lay_out
from dxfcable.verifying.staleness import reasons
from dxfcable.verifying.wholeness import hold_whole
from dxfcable.verifying.words import Reader

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.issued import Issued
    from dxfcable.model import Cable, Layout
    from dxfcable.recorded import CableRecord
    from dxfcable.settings import Settings
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.staleness import Overruled
    from dxfcable.verifying.tally import Check, Difference


@dataclass(frozen=True, slots=True, kw_only=True)
class CableProof:
    """What came of one cable.

    Attributes
    ----------
    reasons : tuple of str
        Why it is stale; empty where it is not, or where there is no record.
    overruled : tuple of Overruled
        What the command line overruled when it was issued.
    """

    mark: str
    reasons: tuple[str, ...]
    checks: tuple[Check, ...]
    differences: tuple[Difference, ...]
    overruled: tuple[Overruled, ...] = ()

    @property
    def stale(self) -> bool:
        """Whether something was changed since the record."""
        return bool(self.reasons)

    @property
    def passed(self) -> bool:
        """Whether every check passed."""
        return all(check.passed for check in self.checks)


def prove(
    issued: Issued,
    layout: Layout,
    records: Sequence[CableRecord],
    settings: Settings,
) -> tuple[CableProof, ...]:
    """Hold every cable of a drawing against the laws of statics.

    Parameters
    ----------
    issued : Issued
        Entities of ours.
    layout : Layout
        What the drafter drew.
    records : sequence of CableRecord
        For what changed since; may be empty.
    settings : Settings
        For digits, cases, anchors.

    Returns
    -------
    tuple of CableProof
        Left to right.
    """
    heads = unique_parts([cable.mark for cable in layout.cables], "C")
    sheet = lay_out(issued, _expected(layout, heads))
    prefixes = _prefixes(sheet, heads)
    owners = _owners(sheet, prefixes, layout, heads)
    reader = Reader(
        length_unit=layout.length_unit,
        force_unit=layout.force_unit or "N",
        digits=settings.show.force_digits,
    )
    bench = Bench(
        sheet=sheet,
        layout=layout,
        reader=reader,
        settings=settings,
        owners=owners,
        records={record.mark: record for record in records},
    )
    tallies = bench.hold_all(prefixes)
    fault = next((f for f in layout.findings if f.severity is Severity.ERROR), None)
    hold_whole(tallies, sheet, issued, fault, bench.places)
    marks = {p: layout.cables[owners[p]].mark if p in owners else p for p in prefixes}
    found = [
        CableProof(
            mark=marks[prefix],
            reasons=_reasons(marks[prefix], records, layout, sheet),
            checks=tallies[prefix].checks(),
            differences=tuple(tallies[prefix].differences),
            overruled=bench.overruled(owners.get(prefix)),
        )
        for prefix in prefixes
    ]
    return (*found, *_without_linework(found, records, layout, owners, prefixes))


def _without_linework(
    found: Sequence[CableProof],
    records: Sequence[CableRecord],
    layout: Layout,
    owners: Mapping[str, int],
    prefixes: Sequence[str],
) -> list[CableProof]:
    """Tell cables that are recorded and no longer drawn, or drawn and not issued."""
    known = {proof.mark for proof in found}
    gone = [
        record.mark
        for record in records
        if record.mark not in known and unique_parts([record.mark], "C")[0] not in prefixes
    ]
    new = [cable.mark for k, cable in enumerate(layout.cables) if k not in owners.values()]
    told = [(mark, "it is not drawn any more") for mark in gone]
    told += [(mark, "it was drawn after the issue") for mark in new if mark not in gone]
    return [
        CableProof(mark=mark, reasons=(reason,), checks=(), differences=()) for mark, reason in told
    ]


def _expected(layout: Layout, heads: Sequence[str]) -> list[ExpectedSpan]:
    """Give the spans between the drafter's supports."""
    return [
        ExpectedSpan(mark=cable.mark, prefix=head, number=k + 1, left=(a.x, a.y), right=(b.x, b.y))
        for head, cable in zip(heads, layout.cables, strict=True)
        for k, (a, b) in enumerate(zip(cable.supports, cable.supports[1:], strict=False))
    ]


def _prefixes(sheet: Sheet, heads: Sequence[str]) -> list[str]:
    """List the first parts of ids, profiles from left to right first."""
    found = [
        (entity.start[0] if "/profile/" in name else math.inf, name.partition("/")[0])
        for name, entity in sheet.named.items()
    ]
    return list(dict.fromkeys(prefix for _, prefix in sorted(found))) or list(heads) or ["C1"]


def _owners(
    sheet: Sheet, prefixes: Sequence[str], layout: Layout, heads: Sequence[str]
) -> dict[str, int]:
    """Give each prefix its cable in the layout: of its name, else the nearest."""
    owners = {p: heads.index(p) for p in prefixes if p in heads}
    left = [p for p in prefixes if p not in owners]
    free = [k for k in range(len(heads)) if k not in owners.values()]
    if not left or not free:
        return owners
    costs = [[_distance(sheet, p, layout.cables[k]) for k in free] for p in left]
    return owners | {left[i]: free[j] for i, j in pair(costs)}


def _distance(sheet: Sheet, prefix: str, cable: Cable) -> float:
    profile = sheet.named.get(f"{prefix}/profile/1")
    if profile is None:
        return 1e9
    support = cable.supports[0]
    return abs(profile.start[0] - support.x) + abs(profile.start[1] - support.y)


def _reasons(
    mark: str, records: Sequence[CableRecord], layout: Layout, sheet: Sheet
) -> tuple[str, ...]:
    """Tell why a cable is stale."""
    record = next((r for r in records if r.mark == mark), None)
    if record is None:
        return ()
    cable = next((c for c in layout.cables if c.mark == mark), None)
    return tuple(reasons(record, cable, layout.supports, sheet.grain))
