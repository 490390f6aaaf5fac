"""Border, title block and revision rows of a sheet.

The fields of the title block are those of ISO 7200: what the office does not say is left as a
ruled field to fill.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.sketch import shown
from dxfcable.drawing.sheeting.papers import TITLE_WIDTH
from dxfcable.drawing.sheeting.ruled_table import wrapped
from dxfcable.drawing.sheeting.text_blocks import caution_lines, draw_caution

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.painting.sketch import Bounds, Sketch
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import RevisionRow

_LEAST_BESIDE = 61.0  # left of the title block for caution and revisions [mm]
_TITLE_ROWS = 1.75  # height of the row of the title, in rows
_REVISION_ROWS = 6  # in a column, filled or to fill
_MARK = 5.0  # centring marks reach inwards [mm]


@dataclass(frozen=True, slots=True, kw_only=True)
class Fields:
    """What the title block says; blanks are to be filled by hand."""

    owner: str = ""
    project: str = ""
    title: str = ""
    supplement: str = ""
    kind: str = ""
    created: str = ""
    checked: str = ""
    approved: str = ""
    date: str = ""
    status: str = ""
    language: str = ""
    number: str = ""
    revision: str = ""
    sheet: str = ""
    scale: str = ""
    source: str = ""
    revisions: tuple[RevisionRow, ...] = ()


@dataclass(frozen=True, slots=True, kw_only=True)
class Places:
    """Where the parts of a sheet stand [mm]: `words` is the room of notes and legend, if any."""

    main: Bounds
    title: Bounds
    caution: Bounds
    words: Bounds | None


def _row(paper: Paper) -> float:
    """Give the height of a field [mm]."""
    return 1.5 * paper.small + 1.9 * paper.text + 0.6


def _title_height(paper: Paper) -> float:
    return (3.0 + _TITLE_ROWS) * _row(paper)


def places(paper: Paper) -> Places:
    """Divide a sheet: title block at the lower right, in a column or in a strip.

    Examples
    --------
    >>> from dxfcable.settings import Show
    >>> from dxfcable.drawing.sheeting.papers import paper
    >>> places(paper("A3", Show())).words is None
    True
    """
    x0, y0, x1, y1 = paper.frame
    pad, rise = 2.0 * paper.text, _title_height(paper)
    if paper.has_column:
        left = x1 - TITLE_WIDTH
        below = y0 + rise
        room = _revision_height(paper, _REVISION_ROWS) + _caution_height(paper, TITLE_WIDTH)
        return Places(
            main=(x0 + pad, y0 + pad, left - pad, y1 - pad),
            title=(left, y0, x1, below),
            caution=(left, below, x1, below + room),
            words=(left + pad, below + room + pad, x1 - pad, y1 - pad),
        )
    left = x1 - min(TITLE_WIDTH, (x1 - x0) - _LEAST_BESIDE)
    beside = _caution_height(paper, left - x0) + _revision_height(paper, 1)
    rise = max(rise, beside)
    return Places(
        main=(x0 + pad, y0 + rise + pad, x1 - pad, y1 - pad),
        title=(left, y0, x1, y0 + rise),
        caution=(x0, y0, left, y0 + rise),
        words=None,
    )


def _revision_row(paper: Paper) -> float:
    return 2.0 * paper.text


def _revision_height(paper: Paper, rows: int) -> float:
    return (rows + 1) * _revision_row(paper)


def _caution_height(paper: Paper, width: float) -> float:
    lines = len(caution_lines(width - 3.0 * paper.text, paper.text))
    return (1.6 * lines + 1.2) * paper.text


def draw_border(sketch: Sketch, paper: Paper) -> None:
    """Draw the border with its centring marks, and what parts title block and drawing."""
    x0, y0, x1, y1 = paper.frame
    sketch.rectangle("border", "border", paper.frame)
    marks = (
        ((0.5 * (x0 + x1), y1 - _MARK), (0.5 * (x0 + x1), paper.height)),
        ((0.5 * (x0 + x1), 0.0), (0.5 * (x0 + x1), y0 + _MARK)),
        ((0.0, 0.5 * (y0 + y1)), (x0 + _MARK, 0.5 * (y0 + y1))),
        ((x1 - _MARK, 0.5 * (y0 + y1)), (paper.width, 0.5 * (y0 + y1))),
    )
    for number, (start, end) in enumerate(marks, start=1):
        inside = _clipped(start, end, paper)
        sketch.line(f"border/mark-{number}", "border", *inside)
    where = places(paper)
    if paper.has_column:
        left = where.title[0]
        sketch.line("border/column", "title", (left, y0), (left, y1))
    else:
        top = where.title[3]
        sketch.line("border/strip", "title", (x0, top), (x1, top))


def _clipped(
    start: tuple[float, float], end: tuple[float, float], paper: Paper
) -> tuple[tuple[float, float], tuple[float, float]]:
    """Keep the part of a centring mark that lies outside the drawing's room."""
    x0, y0, x1, y1 = paper.frame

    def out(point: tuple[float, float]) -> tuple[float, float]:
        x, y = point
        if x0 < x < x1 and y0 < y < y1:
            if start[0] == end[0]:
                return x, (y1 if y > 0.5 * (y0 + y1) else y0)
            return (x1 if x > 0.5 * (x0 + x1) else x0), y
        return point

    return out(start), out(end)


def draw_title_block(sketch: Sketch, paper: Paper, fields: Fields) -> None:
    """Draw title block, revision rows and caution."""
    where = places(paper)
    _draw_fields(sketch, paper, fields, where.title)
    x0, y0, x1, y1 = where.caution
    sketch.line("title/left", "title", (x1, y0), (x1, y1))
    room = y1 - y0 - _caution_height(paper, x1 - x0)
    rows = max(1, int((room + 1e-6) / _revision_row(paper)) - 1)
    _draw_revisions(sketch, paper, fields.revisions, (x0, y0, x1, y1), rows)
    top = y0 + _revision_height(paper, rows)
    at = (x0 + 1.5 * paper.text, y1 - 0.4 * paper.text)
    draw_caution(sketch, "title", at, x1 - x0 - 3.0 * paper.text, paper.text)
    sketch.line("title/above-revisions", "title", (x0, top), (x1, top))
    if paper.has_column:
        sketch.line("title/above-caution", "title", (x0, y1), (x1, y1))


def _layout(fields: Fields) -> tuple[tuple[tuple[str, str, float], ...], ...]:
    """Give the rows of fields from the top: name, value, share of the width."""
    return (
        (("LEGAL OWNER", fields.owner, 0.5), ("PROJECT", fields.project, 0.5)),
        (("TITLE, SUPPLEMENTARY TITLE", "", 1.0),),
        (
            ("CREATED BY", fields.created, 0.18),
            ("CHECKED BY", fields.checked, 0.19),
            ("APPROVED BY", fields.approved, 0.19),
            ("DATE OF ISSUE", fields.date, 0.2),
            ("DOCUMENT STATUS", fields.status, 0.24),
        ),
        (
            ("DOCUMENT TYPE", fields.kind, 0.26),
            ("NUMBER", fields.number, 0.24),
            ("REV.", fields.revision, 0.09),
            ("SHEET", fields.sheet, 0.12),
            ("LANG.", fields.language, 0.09),
            ("SCALE", fields.scale, 0.2),
        ),
    )


def _draw_fields(sketch: Sketch, paper: Paper, fields: Fields, box: Bounds) -> None:
    x0, y0, x1, y1 = box
    rows = _layout(fields)
    rise = (y1 - y0) / (len(rows) - 1 + _TITLE_ROWS)
    top = y1
    for number, row in enumerate(rows):
        high = rise * (_TITLE_ROWS if number == 1 else 1.0)
        left = x0
        for k, (name, value, share) in enumerate(row):
            width = share * (x1 - x0)
            key = f"title/{number}-{k}"
            _draw_field(sketch, paper, key, (name, value), (left, top - high, left + width, top))
            if number == 1:
                _draw_titles(sketch, paper, fields, (left, top - high, left + width, top))
            left += width
            if k < len(row) - 1:
                sketch.line(f"{key}/edge", "ruling", (left, top), (left, top - high))
        sketch.line(f"title/{number}/rule", "title", (x0, top), (x1, top))
        top -= high


def _draw_field(
    sketch: Sketch, paper: Paper, key: str, field: tuple[str, str], box: Bounds
) -> None:
    """Write a field's name in its upper left corner, its value below."""
    (name, value), (x0, y0, x1, y1) = field, box
    pad = 0.4 * paper.text
    room = x1 - x0 - 2 * pad
    words, height = fitted(name, room, paper.small)
    sketch.text(f"{key}/name", "ruling", words, (x0 + pad, y1 - 1.35 * paper.small), height)
    if value:
        words, height = fitted(value, room, paper.text, paper.small)
        sketch.text(f"{key}/value", "title", words, (x0 + pad, y0 + 0.5 * paper.text), height)


def _draw_titles(sketch: Sketch, paper: Paper, fields: Fields, box: Bounds) -> None:
    """Write title and supplementary title."""
    x0, y0, x1, _ = box
    pad = 0.4 * paper.text
    for key, text, size, y in (
        ("title", fields.title, paper.large, y0 + 2.4 * paper.text),
        ("supplement", fields.supplement, paper.text, y0 + 0.6 * paper.text),
    ):
        if text:
            words, height = fitted(text, x1 - x0 - 2 * pad, size, paper.text, paper.small)
            sketch.text(f"title/{key}", "title", words, (x0 + pad, y), height)


def fitted(text: str, width: float, *heights: float) -> tuple[str, float]:
    """Give a text in the first of some heights by which it fits, else cut short in the last.

    Examples
    --------
    >>> fitted("AB", 100.0, 2.5, 1.8)
    ('AB', 2.5)
    """
    plain = shown(text)
    for height in heights:
        if text_width(plain, height) <= width:
            return plain, height
    least = heights[-1]
    return wrapped(plain, width - text_width("..", least), least)[0] + "..", least


def _columns(width: float) -> tuple[tuple[str, ...], tuple[float, ...]]:
    """Give heads and shares of the revision columns: a date must fit in any case."""
    if width > 120.0:
        return ("REV", "DESCRIPTION", "BY", "DATE"), (0.12, 0.48, 0.16, 0.24)
    if width > 80.0:
        return ("REV", "DESCRIPTION", "BY", "DATE"), (0.13, 0.37, 0.18, 0.32)
    return ("REV", "WHAT", "BY", "DATE"), (0.17, 0.23, 0.14, 0.46)


def _draw_revisions(
    sketch: Sketch, paper: Paper, rows: Sequence[RevisionRow], box: Bounds, count: int
) -> None:
    """Draw the rows of revisions from the bottom up, the head lowest, blank ones to fill."""
    x0, y0, x1, _ = box
    width = x1 - x0
    head, shares = _columns(width)
    step, h = _revision_row(paper), paper.text
    shown_rows = list(rows)[-count:]
    lines: list[tuple[str, ...]] = [head]
    lines += [(r.rev or str(r.number), r.description, r.by, r.date) for r in shown_rows]
    lines += [("", "", "", "")] * (count - len(shown_rows))
    for number, cells in enumerate(lines):
        y, left = y0 + number * step, x0
        for k, (text, share) in enumerate(zip(cells, shares, strict=True)):
            if text:
                words, height = fitted(text, share * width - h, h, paper.small)
                role = "ruling" if number == 0 else "title"
                at = (left + 0.5 * h, y + 0.5 * h)
                sketch.text(f"revisions/{number}-{k}", role, words, at, height)
            left += share * width
        if number:
            sketch.line(f"revisions/rule-{number}", "ruling", (x0, y), (x1, y))
    left = x0
    for k, share in enumerate(shares[:-1]):
        left += share * width
        edge = ((left, y0), (left, y0 + len(lines) * step))
        sketch.line(f"revisions/edge-{k}", "ruling", *edge)
