"""Border, title block and revision rows of a sheet.

The fields of the title block are those of ISO 7200: what the office does not say is left as a
ruled field to fill.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.papers import TITLE_WIDTH
from dxfcable.drawing.sheeting.revision_rows import draw_revisions, revision_row
from dxfcable.drawing.sheeting.text_blocks import caution_lines, draw_caution
from dxfcable.drawing.sheeting.title_texts import (
    NUMBER,
    STEP,
    fitted,
    in_lines,
    number_lines,
    widths,
)

if TYPE_CHECKING:
    from dxfcable.drawing.painting.sketch import Bounds, Sketch
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.drawing.sheeting.title_texts import Lines
    from dxfcable.model import RevisionRow

_LEAST_BESIDE = 61.0  # left of the title block for caution and revisions [mm]
_TITLE_ROWS = 1.75  # height of the row of the title, in rows
_REVISION_ROWS = 6  # in a column, filled or to fill
_PAD = 0.4  # beside a text, in text heights
_LOW, _HIGH = 0.38, 1.62  # of a field's room for two lines, in heights of its name
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
    """Give the height of a field, of its name and two lines of the least letters [mm]."""
    return max(1.5 * paper.small + 1.9 * paper.text + 0.6, 4.4 * paper.small)


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


def _revision_height(paper: Paper, rows: int) -> float:
    return (rows + 1) * revision_row(paper)


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


def draw_title_block(sketch: Sketch, paper: Paper, fields: Fields) -> tuple[str, ...]:
    """Draw title block, revision rows and caution; return the names of fields that are cut.

    Raises
    ------
    DxfcableError
        With code `settings`, where the number does not fit.
    """
    where = places(paper)
    cut = _draw_fields(sketch, paper, fields, where.title)
    x0, y0, x1, y1 = where.caution
    sketch.line("title/left", "title", (x1, y0), (x1, y1))
    room = y1 - y0 - _caution_height(paper, x1 - x0)
    rows = max(1, int((room + 1e-6) / revision_row(paper)) - 1)
    draw_revisions(sketch, paper, fields.revisions, (x0, y0, x1, y1), rows)
    top = y0 + _revision_height(paper, rows)
    at = (x0 + 1.5 * paper.text, y1 - 0.4 * paper.text)
    draw_caution(sketch, "title", at, x1 - x0 - 3.0 * paper.text, paper.text)
    sketch.line("title/above-revisions", "title", (x0, top), (x1, top))
    if paper.has_column:
        sketch.line("title/above-caution", "title", (x0, y1), (x1, y1))
    return tuple(cut)


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
            (NUMBER, fields.number, 0.24),
            ("REV.", fields.revision, 0.09),
            ("SHEET", fields.sheet, 0.12),
            ("LANG.", fields.language, 0.09),
            ("SCALE", fields.scale, 0.2),
        ),
    )


def field_of(item: str) -> str:
    """Name the field that an item of the title block writes a value of; "" for any other.

    Examples
    --------
    >>> field_of("title/0-0/value"), field_of("title/title"), field_of("C1/node-1")
    ('LEGAL OWNER', 'TITLE', '')
    """
    for key, name in (("title/title", "TITLE"), ("title/supplement", "SUPPLEMENTARY TITLE")):
        if item.startswith(key):
            return name
    for number, row in enumerate(_layout(Fields())):
        for k, (name, _, _) in enumerate(row):
            if item.startswith(f"title/{number}-{k}/value"):
                return name
    return "REVISIONS" if item.startswith("revisions/") else ""


def _draw_fields(sketch: Sketch, paper: Paper, fields: Fields, box: Bounds) -> list[str]:
    """Draw the fields row by row; return the names of those that are cut."""
    x0, y0, x1, y1 = box
    rows = _layout(fields)
    rise = (y1 - y0) / (len(rows) - 1 + _TITLE_ROWS)
    top = y1
    cut: list[str] = []
    for number, row in enumerate(rows):
        high = rise * (_TITLE_ROWS if number == 1 else 1.0)
        left = x0
        wide = widths(row, x1 - x0, _PAD * paper.text, (paper.text, paper.small))
        for k, ((name, value, _), width) in enumerate(zip(row, wide, strict=True)):
            key, place = f"title/{number}-{k}", (left, top - high, left + width, top)
            cut += _draw_field(sketch, paper, key, (name, value), place)
            if number == 1:
                cut += _draw_titles(sketch, paper, fields, place)
            left += width
            if k < len(row) - 1:
                sketch.line(f"{key}/edge", "ruling", (left, top), (left, top - high))
        sketch.line(f"title/{number}/rule", "title", (x0, top), (x1, top))
        top -= high
    return cut


def _draw_field(
    sketch: Sketch, paper: Paper, key: str, field: tuple[str, str], box: Bounds
) -> list[str]:
    """Write a field's name in its upper left corner, its value below; return the name if cut."""
    (name, value), (x0, y0, x1, y1) = field, box
    pad = _PAD * paper.text
    room = x1 - x0 - 2 * pad
    words, height = fitted(name, room, paper.small)
    sketch.text(f"{key}/name", "ruling", words, (x0 + pad, y1 - 1.35 * paper.small), height)
    if not value:
        return []
    low, high = y0 + _LOW * paper.small, y1 - _HIGH * paper.small
    give = number_lines if name == NUMBER else in_lines
    lines = give(value, room, high - low, paper.text, paper.small)
    if len(lines.texts) == 1:
        low = y0 + 0.5 * paper.text
    _write(sketch, f"{key}/value", lines, (x0 + pad, low))
    return [name] if lines.is_cut else []


def _draw_titles(sketch: Sketch, paper: Paper, fields: Fields, box: Bounds) -> list[str]:
    """Write title and supplementary title; return the names of what is cut."""
    x0, y0, x1, y1 = box
    pad = _PAD * paper.text
    cut = []
    low = y0 + 2.4 * paper.text
    for name, text, size, y, high in (
        ("TITLE", fields.title, paper.large, low, y1 - _HIGH * paper.small),
        (
            "SUPPLEMENTARY TITLE",
            fields.supplement,
            paper.text,
            y0 + 0.6 * paper.text,
            low - paper.small,
        ),
    ):
        if text:
            width = x1 - x0 - 2 * pad
            lines = in_lines(text, width, high - y, size, paper.text, paper.small)
            key = "title" if name == "TITLE" else "supplement"
            _write(sketch, f"title/{key}", lines, (x0 + pad, y))
            cut += [name] if lines.is_cut else []
    return cut


def _write(sketch: Sketch, key: str, lines: Lines, at: tuple[float, float]) -> None:
    """Write lines one over the other from the left end of the lowest on."""
    last = len(lines.texts) - 1
    for number, text in enumerate(lines.texts):
        y = at[1] + STEP * lines.height * (last - number)
        name = key if number == 0 else f"{key}-{number + 1}"
        sketch.text(name, "title", text, (at[0], y), lines.height)
