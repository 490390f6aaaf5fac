"""The load table: every load point of a drawing as CSV, to fill and hand back.

Text in and values out; the caller reads and writes files. A point that the table names takes
the table's values, blank cells keep the drawing's; a point that it does not name keeps its
own. All of it is said.
"""

from __future__ import annotations

import csv
import io
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import Faults, listed
from dxfcable.errors import LayoutError
from dxfcable.forces import Style
from dxfcable.loads.load_columns import UNCASED, TableCode, at_line, read_rows
from dxfcable.loads.load_filling import Entry, LoadTable, apply, list_spots, merged, plain_number
from dxfcable.model import Severity
from dxfcable.units import FORCE_UNITS

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.loads.load_columns import Row
    from dxfcable.loads.load_filling import Key, Spot
    from dxfcable.model import Layout
    from dxfcable.settings import Settings

__all__ = ["Entry", "LoadTable", "TableCode", "apply", "read", "write"]


def write(layout: Layout, settings: Settings) -> str:
    """Write the load table of a drawing.

    Parameters
    ----------
    layout : Layout
        Load points without a value get empty cells.
    settings : Settings
        With `decimal_comma` cells are separated by semicolons.

    Returns
    -------
    str
        Columns cable, mark and one for each case, the layout's force unit in the header; one
        row for each load point, left to right along each cable. Digits enough that reading
        gives the same values.
    """
    spots = list_spots(layout)
    cases = list(dict.fromkeys(case for s in spots for case, _ in s.load.cases)) or [UNCASED]
    unit = f" ({layout.force_unit})" if layout.force_unit else ""
    comma = settings.units.decimal_comma
    stream = io.StringIO()
    writer = csv.writer(stream, delimiter=";" if comma else ",", lineterminator="\n")
    writer.writerow(["cable", "mark", *(f"{case}{unit}" for case in cases)])
    for spot in spots:
        values = dict(spot.load.cases)
        cells = [
            plain_number(values[case], comma=comma) if case in values else "" for case in cases
        ]
        writer.writerow([spot.name, spot.load.mark, *cells])
    return stream.getvalue()


def read(text: str, layout: Layout, settings: Settings, force_unit: str | None = None) -> LoadTable:
    """Read a load table and find the load point of each row.

    Parameters
    ----------
    text : str
        The CSV; see `load_columns.read_rows`.
    layout : Layout
        The drawing that it is for.
    settings : Settings
    force_unit : str, optional
        Of the command line: unit of values that have none, nor their header; else that of the
        settings. One that is no unit of force is the reader's to tell.

    Returns
    -------
    LoadTable

    Raises
    ------
    LayoutError
        With every fault of the table at once: what does not read, marks that the drawing
        lacks or that may be two points, a point twice, values with and without load case in
        one cable.
    """
    faults = Faults()
    units = settings.units
    style = Style(
        length_unit=layout.length_unit,
        bare_unit=force_unit if force_unit in FORCE_UNITS else units.force,
        decimal_comma=units.decimal_comma,
        upward_sign=units.upward_sign,
    )
    spots = list_spots(layout)
    entries: dict[Key, Entry] = {}
    for row in read_rows(text, style, settings, faults):
        spot = _find(row, spots, faults)
        if spot is None:
            continue
        known = entries.get(spot.key)
        if known is not None:
            said = f'{at_line(row.line)}: mark "{row.mark}" stands at line {known.line} already'
            faults.error(TableCode.MARK_REPEATED, said, "Keep one of the two.", cable=spot.name)
            continue
        entries[spot.key] = Entry(
            cable=spot.cable,
            is_at_support=spot.is_at_support,
            position=spot.position,
            line=row.line,
            values=row.values,
        )
    _check_cases(spots, entries, faults)
    if any(f.severity is Severity.ERROR for f in faults.findings):
        message = "the load table does not fit the drawing"
        raise LayoutError(message, tuple(faults.findings))
    return LoadTable(entries=tuple(entries.values()), findings=tuple(faults.findings))


def _find(row: Row, spots: Sequence[Spot], faults: Faults) -> Spot | None:
    """Find the one load point that a row names, or tell why there is none."""
    where = at_line(row.line)
    if row.cable:
        names = list(dict.fromkeys(spot.name for spot in spots))
        spots = [s for s in spots if s.name.casefold() == row.cable.casefold()]
        if not spots:
            text = f'{where}: no cable with load points is marked "{row.cable}"'
            remedy = f"Cables of the drawing: {listed(names) or 'none'}."
            faults.error(TableCode.CABLE_UNKNOWN, text, remedy, raw=row.cable)
            return None
    folded = row.mark.casefold()
    found = [s for s in spots if s.load.mark.strip() == row.mark]
    found = found or [s for s in spots if s.load.mark.strip().casefold() == folded]
    if len(found) == 1:
        return found[0]
    if not found:
        on = f" on cable {row.cable}" if row.cable else ""
        text = f'{where}: the drawing has no load point "{row.mark}"{on}'
        remedy = f"Its marks are {listed(dict.fromkeys(s.load.mark for s in spots)) or 'none'}."
        faults.error(TableCode.MARK_UNKNOWN, text, remedy, raw=row.mark)
        return None
    cables = list(dict.fromkeys(s.name for s in found))
    text = f'{where}: mark "{row.mark}" is at {len(found)} load points, of {listed(cables)}'
    remedy = "Name the cable in a column cable."
    if row.cable or len(cables) == 1:
        remedy = "Give each its own mark in the drawing."
    faults.error(TableCode.MARK_AMBIGUOUS, text, remedy, raw=row.mark)
    return None


def _check_cases(spots: Sequence[Spot], entries: Mapping[Key, Entry], faults: Faults) -> None:
    """Tell cables whose loads, as far as the table has a hand in it, mix two kinds."""
    for i in dict.fromkeys(spot.cable for spot in spots):
        own = [spot for spot in spots if spot.cable == i]
        if not any(spot.key in entries and entries[spot.key].values for spot in own):
            continue
        bare, cased = [], []
        for spot in own:
            entry = entries.get(spot.key)
            cases = {case for case, _ in merged(spot.load, entry.values if entry else (), "")}
            if UNCASED in cases:
                bare.append(spot.load.mark)
            if cases - {UNCASED}:
                cased.append(spot.load.mark)
        if bare and cased:
            text = (
                f"with the load table, cable {own[0].name} has values with load cases and "
                f"without; without: {listed(bare)}; with: {listed(cased)}"
            )
            remedy = "Give all of its load points in columns of load cases, or all as load."
            faults.error(Code.CASES_MIXED, text, remedy, cable=own[0].name)
