"""A load table's values put into a layout, with everything set, kept or converted said."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from decimal import Decimal
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import Faults, listed
from dxfcable.loads.load_columns import UNCASED, TableCode
from dxfcable.units import convert

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.forces import Force
    from dxfcable.model import Finding, Layout, LoadPoint

_SAME = 1e-12  # relative: values that differ by less were converted there and back
_Cases = tuple[tuple[str, float], ...]
Key = tuple[int, bool, int]


@dataclass(frozen=True, slots=True, kw_only=True)
class Entry:
    """What a load table says of one load point.

    Attributes
    ----------
    cable : int
        Position of its cable in `Layout.cables`.
    is_at_support, position : bool, int
        Where it stands in the cable's `loads`, or in its `support_loads`.
    line : int
        Of the table, counted from 1.
    values : tuple of (str, Force)
        By case, as written; empty where all cells are blank.
    """

    cable: int
    is_at_support: bool
    position: int
    line: int
    values: tuple[tuple[str, Force], ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class LoadTable:
    """A load table that fits its drawing; `findings` are notes on what was assumed."""

    entries: tuple[Entry, ...]
    findings: tuple[Finding, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Spot:
    """One load point of a layout and where it stands in it."""

    cable: int
    is_at_support: bool
    position: int
    load: LoadPoint
    name: str  # of its cable

    @property
    def key(self) -> Key:
        """Name the place."""
        return self.cable, self.is_at_support, self.position


def apply(layout: Layout, table: LoadTable) -> Layout:
    """Put the values of a load table into a layout.

    Parameters
    ----------
    layout : Layout
    table : LoadTable
        Read for this layout.

    Returns
    -------
    Layout
        Points with values from the table have `source` "csv" and, where a value differs from
        the drawn one, the drafter's text in `drawn`. Findings about missing values that the
        table gives are gone, what it set and what was kept is noted. Where the drawing states
        no force, the force unit is that of the leftmost value.
    """
    spots = list_spots(layout)
    entries = {(e.cable, e.is_at_support, e.position): e for e in table.entries if e.values}
    unit = layout.force_unit or _first_unit(spots, entries)
    filled = {
        spot.key: _filled(spot.load, entries[spot.key], unit)
        for spot in spots
        if spot.key in entries
    }
    cables = tuple(
        replace(
            cable,
            loads=tuple(filled.get((i, False, k), point) for k, point in enumerate(cable.loads)),
            support_loads=tuple(
                (key, filled.get((i, True, k), point))
                for k, (key, point) in enumerate(cable.support_loads)
            ),
        )
        for i, cable in enumerate(layout.cables)
    )
    changed = replace(layout, cables=cables, force_unit=unit or None)
    said = Faults()
    _tell(spots, entries, unit, said)
    findings = (*without_mended(layout, changed, filled), *table.findings, *said.findings)
    return replace(changed, findings=findings)


def list_spots(layout: Layout) -> list[Spot]:
    """List all load points cable by cable, left to right."""
    spots = []
    for i, cable in enumerate(layout.cables):
        pairs = [(False, k, point) for k, point in enumerate(cable.loads)]
        pairs += [(True, k, point) for k, (_, point) in enumerate(cable.support_loads)]
        spots += [
            Spot(cable=i, is_at_support=at, position=k, load=point, name=cable.mark)
            for at, k, point in sorted(pairs, key=lambda pair: pair[2].x)
        ]
    return spots


def plain_number(value: float, *, comma: bool) -> str:
    """Write a number so that it reads back exactly, without exponent."""
    text = f"{Decimal(repr(value)):f}".removesuffix(".0")
    return text.replace(".", ",") if comma else text


def merged(load: LoadPoint, values: Sequence[tuple[str, Force]], unit: str) -> _Cases:
    """Give a point's cases: the table's, and the drawn ones that it leaves alone.

    A drawn value without load case says nothing beside values with one, nor the other way
    round: it is replaced. Without `unit` values are as written, good for their cases only.
    """
    given = {
        case: convert(force.value, force.unit, unit) if unit else force.value
        for case, force in values
    }
    kept = load.cases
    if given and (UNCASED in given) != (UNCASED in dict(kept)):
        kept = ()
    order = dict.fromkeys([*(case for case, _ in kept), *given])
    return tuple((case, given[case] if case in given else dict(kept)[case]) for case in order)


def _filled(load: LoadPoint, entry: Entry, unit: str) -> LoadPoint:
    """Give a point the table's values."""
    cases = merged(load, entry.values, unit)
    # The very number drawn, though it differs by less than shows: it tells later edits.
    stated = load.cases if load.drawn_cases is None else load.drawn_cases
    words = load.drawn or _as_drawn(replace(load, cases=stated), unit)
    drawn = "" if _same(cases, stated) else words
    drawn_cases = None if cases == stated else stated
    return replace(load, cases=cases, source="csv", drawn=drawn, drawn_cases=drawn_cases)


def _same(first: _Cases, second: _Cases) -> bool:
    """Say whether two points carry the same."""
    a, b = dict(first), dict(second)
    return a.keys() == b.keys() and all(math.isclose(a[case], b[case], rel_tol=_SAME) for case in a)


def _as_drawn(load: LoadPoint, unit: str) -> str:
    """Give the drafter's words, or where those are formatted or several, the values."""
    if not load.cases:
        return ""
    origin = load.value_origin
    is_block = origin is not None and origin.kind == "INSERT"
    if origin is not None and origin.raw and not (is_block and len(load.cases) > 1):
        raw = origin.raw.removeprefix("LOAD=") if is_block else origin.raw
        if not set(raw) & set("\\{}\n"):
            return raw
    words = [(case, f"{plain_number(value, comma=False)} {unit}") for case, value in load.cases]
    return " ".join(text if case == UNCASED else f"{case}={text}" for case, text in words)


def _first_unit(spots: Sequence[Spot], entries: Mapping[Key, Entry]) -> str:
    """Give the unit of the leftmost value of the table, "" where it gives none."""
    for spot in spots:
        if spot.key in entries:
            return entries[spot.key].values[0][1].unit
    return ""


def _tell(spots: Sequence[Spot], entries: Mapping[Key, Entry], unit: str, said: Faults) -> None:
    """Note what the table set, what was kept, and units that were converted."""
    for i in dict.fromkeys(spot.cable for spot in spots):
        own = [spot for spot in spots if spot.cable == i]
        given = [spot.load.mark for spot in own if spot.key in entries]
        kept = [spot.load.mark for spot in own if spot.key not in entries]
        text = f"cable {own[0].name}: the load table sets {listed(given, len(given)) or 'nothing'}"
        text += f" ({len(given)} of {len(own)} load points)"
        if kept:
            verb = "keeps its value" if len(kept) == 1 else "keep their values"
            text += f"; {listed(kept, len(kept))} {verb}"
        said.note(TableCode.LOADS_SET, text, cable=own[0].name)
    units = dict.fromkeys(force.unit for e in entries.values() for _, force in e.values)
    others = [u for u in units if u != unit]
    if others:
        text = f"the load table states forces in {listed(others)}; all are given in {unit}"
        said.note(Code.FORCE_UNITS_MIXED, text)


def without_mended(
    layout: Layout, changed: Layout, filled: Mapping[Key, LoadPoint]
) -> list[Finding]:
    """Leave out findings of the reader that the table has mended."""
    # The place too: points within one block share its handle and line.
    origins = [load.origin for load in filled.values()]
    mended = {(origin.handle, origin.line, origin.at) for origin in origins}
    pure = set()
    for cable in changed.cables:
        points = (*cable.loads, *(point for _, point in cable.support_loads))
        cases = {case for point in points for case, _ in point.cases}
        if UNCASED not in cases or cases == {UNCASED}:
            pure.add(cable.mark)
    return [
        f
        for f in layout.findings
        if not (f.code == Code.LOAD_VALUE_MISSING and (f.handle, f.line, f.at) in mended)
        and not (f.code == Code.CASES_MIXED and f.cable in pure)
    ]
