"""The schedules as three CSV texts: cables, hangers, anchorages.

One heading with units, one row a cable, a hanger, and a mast, stay or anchor in each state; the
caution is the last line. A cell that begins with = + - @ or a control character would be a
formula to a spreadsheet: texts that do get an apostrophe before them. Figures of ours stay as
they are, also feet and inches below zero.
"""

from __future__ import annotations

import csv
import io
import re
from typing import TYPE_CHECKING

from dxfcable.job import CAUTION
from dxfcable.scheduling.schedule_fields import (
    Field,
    Kind,
    Words,
    anchor_fields,
    anchorage_fields,
    cable_fields,
    hanger_fields,
    stay_fields,
    words_for,
)

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.scheduling.schedule_rows import AnchorageRow, CableRow, Schedules

TABLES = ("cables", "hangers", "anchorages")
_FORMULA = ("=", "+", "-", "@", "\t", "\r", "\n")
_NUMBER = re.compile(r"-?\d+(?:[.,]\d+)?\Z", re.ASCII)
_Rows = list[tuple[Words, list[Field]]]


def schedule_csv(whole: Schedules, *, decimal_comma: bool = False) -> dict[str, str]:
    """Write the schedules.

    Parameters
    ----------
    whole : Schedules
    decimal_comma : bool
        Numbers with a comma, cells separated by semicolons.

    Returns
    -------
    dict of str to str
        By the names in `TABLES`. Rounded as the drawing's schedule, once: to 1/16 in or 1 mm.
    """
    cables = [(words_for(whole, row), _cable(whole, row)) for row in whole.cables]
    hangers = [(words_for(whole, row), hanger_fields(whole, row)) for row in whole.hangers]
    anchorages = [
        (words_for(whole, row), fields)
        for row in whole.anchorages
        for fields in _anchorage(whole, row)
    ]
    tables = zip(TABLES, (cables, hangers, anchorages), strict=True)
    return {name: _text(name, rows, decimal_comma=decimal_comma) for name, rows in tables}


def is_ours(text: str) -> bool:
    """Tell whether a CSV is a schedule of ours: the caution stands in its last line."""
    lines = text.rstrip().splitlines()
    return not lines or CAUTION in lines[-1]


def _text(name: str, rows: _Rows, *, decimal_comma: bool) -> str:
    """Write one table."""
    stream = io.StringIO()
    writer = csv.writer(stream, delimiter=";" if decimal_comma else ",", lineterminator="\n")
    if rows:
        words, fields = rows[0]
        writer.writerow([_heading(field, words) for field in fields])
    else:
        writer.writerow([f"no {name}"])
    for words, fields in rows:
        writer.writerow([_cell(field, words, decimal_comma=decimal_comma) for field in fields])
    writer.writerow([CAUTION])
    return stream.getvalue()


def _heading(field: Field, words: Words) -> str:
    """Name a column with its unit."""
    unit = words.unit(field.kind)
    return f"{field.label} ({unit})" if unit else field.label


def _cell(field: Field, words: Words, *, decimal_comma: bool) -> str:
    """Write one cell."""
    text = words.number(field)
    if decimal_comma and field.kind is not Kind.TEXT and _NUMBER.match(text):
        text = text.replace(".", ",")
    is_risky = field.kind is Kind.TEXT and text.startswith(_FORMULA)
    return f"'{text}" if is_risky else text


def _cable(whole: Schedules, row: CableRow) -> list[Field]:
    """Give a cable's columns, its pieces written into one cell each for lengths and marks."""
    words = words_for(whole, row)

    def joined(values: Sequence[tuple[str, float | None]]) -> str:
        return " | ".join(
            f"{name} {words.of(Field('', '', Kind.LENGTH, value))}"
            for name, value in values
            if value is not None
        )

    pieces = joined([(p.name, p.unstressed_length) for p in row.pieces])
    marks = joined([(p.end, p.mark) for p in row.pieces])
    measured = joined([(p.end, p.measured_mark) for p in row.pieces])
    return [
        *cable_fields(whole, row),
        Field("pieces", "pieces unstressed", Kind.TEXT, pieces),
        Field("marks", "clamp marks from left pin, unstressed", Kind.TEXT, marks),
        Field("measured_marks", "clamp marks from left pin, measured", Kind.TEXT, measured),
    ]


def _anchorage(whole: Schedules, row: AnchorageRow) -> list[list[Field]]:
    """Give a row for the mast, for each stay and for each anchor of a support."""
    support = anchorage_fields(whole, row)
    fixed, forces = support[:5], support[5:]
    found = row.found
    blank = [*stay_fields(row, None), *anchor_fields(row, None)]
    rows: list[tuple[str, list[Field]]] = [("mast and support", forces)]
    rows += [(f"stay {k + 1}", stay_fields(row, k)) for k in range(len(found.stays))]
    rows += [(f"anchor {k + 1}", anchor_fields(row, k)) for k in range(len(found.anchors))]
    result = []
    for name, own in rows:
        values = {field.key: field for field in own}
        columns = [values.get(f.key, _blank(f)) for f in (*forces, *blank)]
        result.append([*fixed, Field("member", "member", Kind.TEXT, name), *columns])
    return result


def _blank(field: Field) -> Field:
    return Field(field.key, field.label, field.kind, None)
