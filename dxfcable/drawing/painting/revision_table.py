"""The table of revisions of one cable, and of what the latest one moved where tags are too many."""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.drawing.painting.revision_tags import LAYER, MOST_TAGGED, row_sign
from dxfcable.drawing.painting.schedule_text import CAUTION, broken
from dxfcable.drawing.painting.sketch import Sketch, shown
from dxfcable.drawing.painting.text_table import ROW, Table, draw_table

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.rounding import Rounder
    from dxfcable.model import CableRevisions, RevisionRow

_UNDER, _BETWEEN = 1.2, 3.0  # between the tables, in text heights
_MOST_ROWS = 20  # of movements, before they go on in a table beside
_WIDEST = 48.0  # description, before it is broken into lines
_COLUMNS = ("rev", "description", "date", "by")


def draw_revisions(view: View, revisions: CableRevisions, rounder: Rounder) -> Sketch:
    """Draw the rows of revision about their upper left corner as origin, the oldest first.

    Parameters
    ----------
    view : View
        The cable.
    revisions : CableRevisions
        At least one row. More changes than get a tag are listed below the rows.
    rounder : Rounder
        Rounds coordinates about the origin.

    Returns
    -------
    Sketch
    """
    h, name = view.height, f"{view.prefix}/revisions"
    sketch = Sketch(rounder, name)
    left, y = h, -2.5 * h
    title = f"REVISIONS OF CABLE {view.formed.mark}"
    sketch.text(f"{name}/title", LAYER, title, (left, y), h)
    right = left + text_width(shown(title), h)
    edge, y = draw_table(
        sketch, f"{name}/row", _rows(revisions, h), (left, y - 0.5 * h), h, layer=LAYER
    )
    right = max(right, edge)
    if len(revisions.changes) > MOST_TAGGED:
        x, top = left, y - _UNDER * h
        for table in _changes(view, revisions):
            edge, low = draw_table(sketch, f"{name}/moved", table, (x, top), h, layer=LAYER)
            right, x, y = max(right, edge), edge + _BETWEEN * h, min(y, low)
        # Rows alone hold no results; a table of movements does, and says what they are.
        for number, line in enumerate(broken(CAUTION, right - left, h), start=1):
            y -= ROW * h
            sketch.text(f"{name}/caution/{number}", LAYER, line, (left, y), h)
            right = max(right, left + text_width(line, h))
    sketch.rectangle(f"{name}/frame", LAYER, (0.0, y - h, right + h, 0.0))
    return sketch


def _rows(revisions: CableRevisions, height: float) -> Table:
    return Table(
        columns=_COLUMNS,
        head=("REV", "DESCRIPTION", "DATE", "BY"),
        aligns=(Align.LEFT,) * 4,
        rows=tuple(
            line
            for number, row in enumerate(revisions.rows, start=1)
            for line in _lines(str(number), row, height)
        ),
    )


def _lines(key: str, row: RevisionRow, height: float) -> Iterator[tuple[str, tuple[str, ...]]]:
    """Give the lines of one row: a long description goes on below."""
    first, *rest = broken(shown(row.description), _WIDEST * height, height)
    yield key, (row_sign(row), first, row.date, row.by)
    for number, line in enumerate(rest, start=2):
        yield f"{key}-{number}", ("", line, "", "")


def _changes(view: View, revisions: CableRevisions) -> Iterator[Table]:
    """Give the movements in tables of about equal length, to stand side by side."""
    length = view.wording.length
    names = unique_parts([change.mark for change in revisions.changes], "N")
    rows = tuple(
        (name, (change.mark, length(change.dx), length(change.dy)))
        for name, change in zip(names, revisions.changes, strict=True)
    )
    sign = row_sign(revisions.rows[-1])
    lots = -(-len(rows) // _MOST_ROWS)
    bounds = [len(rows) * number // lots for number in range(lots + 1)]
    for number, (start, end) in enumerate(itertools.pairwise(bounds), start=1):
        yield Table(
            columns=("mark", "dx", "dy"),
            head=(f"MOVED BY REV {sign}" if sign else "MOVED BY REVISION", "dx", "dy"),
            aligns=(Align.LEFT, Align.RIGHT, Align.RIGHT),
            rows=rows[start:end],
            part=f"-{number}" if number > 1 else "",
        )
