"""A load table's text taken apart: separator, header, rows, values with their units.

Nothing here knows which load points there are; every fault names its line of the table.
"""

from __future__ import annotations

import csv
import enum
import io
import re
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import Faults, listed
from dxfcable.forces import add, parse_force
from dxfcable.units import Doubt, QuantityError, is_imperial

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence

    from dxfcable.forces import Force, Style
    from dxfcable.settings import Settings

UNCASED = "load"
_HEAD = re.compile(r"(?P<name>[^()\[\]]*?) ?(?:[(\[] ?(?P<unit>[^()\[\]]*?) ?[)\]])?", re.ASCII)
_GROUPED = re.compile(r"[+-]? ?\d{1,3}(?:,\d{3})+(?![\d,])", re.ASCII)
_COLUMNS = (
    "Columns are mark, cable, and load or a load case, each value with its unit or the unit in "
    "the header, as D (kN)."
)


class TableCode(enum.StrEnum):
    """What a load table has or lacks; values that do not read have the codes of `Doubt`."""

    UNREAD = "csv-unread"
    HEADER = "csv-header"
    COLUMN_UNKNOWN = "csv-column-unknown"
    CELLS = "csv-cells"
    UNITS_DIFFER = "csv-units-differ"
    MARK_MISSING = "csv-mark-missing"
    MARK_UNKNOWN = "csv-mark-unknown"
    MARK_AMBIGUOUS = "csv-mark-ambiguous"
    MARK_REPEATED = "csv-mark-repeated"
    CABLE_UNKNOWN = "csv-cable-unknown"
    CASES_ADDED = "csv-cases-added"
    LOADS_SET = "csv-loads"


@dataclass(frozen=True, slots=True, kw_only=True)
class Row:
    """One line of a load table; `values` pairs a case (or `load`) with its force as written."""

    line: int
    mark: str
    cable: str
    values: tuple[tuple[str, Force], ...]


@dataclass(frozen=True, slots=True, kw_only=True)
class _Column:
    """One column: `kind` is mark, cable, value, blank or faulty; `unit` that of its header."""

    name: str
    kind: str
    case: str = ""
    unit: str = ""


def at_line(line: int) -> str:
    """Begin a message about one line of the table."""
    return f"line {line} of the load table"


def read_rows(text: str, style: Style, settings: Settings, faults: Faults) -> list[Row]:
    """Read the rows of a load table.

    Parameters
    ----------
    text : str
        CSV with a header row; commas, or semicolons and then decimal commas, as the header
        shows. A byte-order mark, any line ends and quoted cells are accepted.
    style : Style
        Of the drawing; `bare_unit` serves columns whose header has no unit.
    settings : Settings
        For the load cases.
    faults : Faults
        Takes every fault.

    Returns
    -------
    list of Row
        In the table's order, without blank lines.
    """
    head = next((line for line in text.splitlines() if line.strip()), "")
    separator = ";" if ";" in head else ","
    if separator == ";":
        style = replace(style, decimal_comma=True)
    if "\t" in head and separator not in head:
        text = "the load table's cells are separated by tabs"
        faults.error(TableCode.UNREAD, text, "Save it with commas, or semicolons.")
        return []
    reader = _Reader(style, settings, faults)
    try:
        for line, cells in _records(text, separator):
            reader.take(line, cells)
    except csv.Error as error:
        text = f"the load table is no CSV that reads: {error}"
        faults.error(TableCode.UNREAD, text, "Close every quote, and save it as CSV.")
    reader.finish()
    return reader.rows


def _records(text: str, separator: str) -> Iterator[tuple[int, list[str]]]:
    """Yield each record that is not blank with the line it starts on."""
    stream = io.StringIO(text.removeprefix("\ufeff"), newline="")
    reader = csv.reader(stream, delimiter=separator, strict=True, skipinitialspace=True)
    start = 1
    for cells in reader:
        line, start = start, reader.line_num + 1
        stripped = [cell.strip() for cell in cells]
        if any(stripped):
            yield line, stripped


class _Reader:
    """Header and rows as they come."""

    def __init__(self, style: Style, settings: Settings, faults: Faults) -> None:
        self._style = style
        self._settings = settings
        self._faults = faults
        self._columns: list[_Column] | None = None
        self._bare = 0
        self.rows: list[Row] = []

    def take(self, line: int, cells: Sequence[str]) -> None:
        """Take the header, then rows."""
        if self._columns is None:
            self._columns = [self._column(line, cell) for cell in cells]
            self._check_header(line, self._columns)
        else:
            self._row(line, cells, self._columns)

    def finish(self) -> None:
        """Tell a table without rows, and the unit of values without one."""
        if self._columns is None:
            self._faults.error(TableCode.HEADER, "the load table is empty", _COLUMNS)
        if self._bare:
            text = f"{self._bare} loads of the load table without unit are read as "
            self._faults.note(Code.FORCE_UNIT_ASSUMED, text + self._style.bare_unit)

    def _column(self, line: int, cell: str) -> _Column:
        """Understand one cell of the header."""
        match = _HEAD.fullmatch(" ".join(cell.split()))
        name = match["name"] if match else cell
        folded = name.casefold()
        if not cell:
            return _Column(name="", kind="blank")
        if folded in {"mark", "cable"} and match and match["unit"] is None:
            return _Column(name=name, kind=folded)
        case = UNCASED if folded == UNCASED else self._settings.cases.find(name)
        if match is None or case is None:
            text = f'{at_line(line)}: column "{cell}" is not known'
            self._faults.error(TableCode.COLUMN_UNKNOWN, text, _COLUMNS, raw=cell)
            return _Column(name=name, kind="faulty")
        unit = ""
        if match["unit"]:
            try:
                unit = parse_force(f"1 {match['unit']}", self._style).unit
            except QuantityError as error:
                text = f'{at_line(line)}, column "{cell}": {error.message}.'
                self._faults.error(error.code, text, error.remedy, raw=cell)
                return _Column(name=name, kind="faulty")
        return _Column(name=name, kind="value", case=case, unit=unit)

    def _check_header(self, line: int, columns: Sequence[_Column]) -> None:
        """Tell what the header lacks or has twice, and cases that two columns share."""
        names = [c.name.casefold() for c in columns if c.name]
        twice = sorted({name for name in names if names.count(name) > 1})
        if twice:
            text = f"{at_line(line)}: columns twice: {listed(twice)}"
            self._faults.error(TableCode.HEADER, text, "Keep one of each.")
        kinds = {c.kind for c in columns}
        if "mark" not in kinds:
            text = f"{at_line(line)} is no header with a column mark"
            self._faults.error(TableCode.HEADER, text, _COLUMNS)
        elif not kinds & {"value", "faulty"}:
            text = f"{at_line(line)}: the header has no column of loads"
            self._faults.error(TableCode.HEADER, text, _COLUMNS)
        cases = [c.case for c in columns if c.kind == "value"]
        for case in dict.fromkeys(cases):
            both = [c.name for c in columns if c.case == case]
            if len(both) > 1 and not twice:
                text = f"load table: {listed(both)} are all case {case}; their values are added"
                self._faults.note(TableCode.CASES_ADDED, text)

    def _row(self, line: int, cells: Sequence[str], columns: Sequence[_Column]) -> None:
        """Read one row."""
        named = {c.kind: cell for c, cell in zip(columns, cells, strict=False)}
        over = [cell for cell in cells[len(columns) :] if cell]
        over += [c for k, c in zip(columns, cells, strict=False) if k.kind == "blank" and c]
        if over:
            text = f"{at_line(line)}: {listed(over)} under no column"
            remedy = "Write decimal points, or separate by semicolons; name every column."
            self._faults.error(TableCode.CELLS, text, remedy)
        mark = named.get("mark", "")
        if not mark and any(c.kind == "mark" for c in columns):
            text = f"{at_line(line)} has no mark"
            self._faults.error(TableCode.MARK_MISSING, text, "Name the load point.")
        values: dict[str, Force] = {}
        for column, cell in zip(columns, cells, strict=False):
            if column.kind != "value" or not cell:
                continue
            force = self._value(line, column, cell)
            if force is not None:
                known = values.get(column.case)
                values[column.case] = add(known, force) if known else force
        if mark:
            pairs = tuple(values.items())
            self.rows.append(Row(line=line, mark=mark, cable=named.get("cable", ""), values=pairs))

    def _value(self, line: int, column: _Column, cell: str) -> Force | None:
        """Read one value; its own unit must be the header's."""
        style = replace(self._style, bare_unit=column.unit or self._style.bare_unit)
        where = f"{at_line(line)}, column {column.name}"
        try:
            self._refuse_doubtful_comma(cell)
            force = parse_force(cell, style)
        except QuantityError as error:
            self._faults.error(error.code, f"{where}: {error.message}.", error.remedy, raw=cell)
            return None
        if column.unit and force.unit != column.unit:
            text = f'{where}: "{cell}" under a header that says {column.unit}'
            self._faults.error(TableCode.UNITS_DIFFER, text, "Keep one of the two.", raw=cell)
            return None
        if force.is_bare and not column.unit:
            self._bare += 1
        if force.note:
            self._faults.note(Code.LOAD_NOTE, f"{where}: {force.note}", raw=cell)
        return force

    def _refuse_doubtful_comma(self, cell: str) -> None:
        """Stop on 18,000 between semicolons in an inch or foot drawing: 18 or 18000."""
        is_told = self._settings.units.decimal_comma
        if is_told or not self._style.decimal_comma or not is_imperial(self._style.length_unit):
            return
        if _GROUPED.match(cell):
            message = f'the comma in "{cell}" may group thousands or mark decimals'
            remedy = "Write it without grouping, or set decimal_comma in the settings."
            raise QuantityError(Doubt.NUMBER_AMBIGUOUS, message, remedy)
