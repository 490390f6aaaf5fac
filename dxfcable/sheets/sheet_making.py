"""Sheets of one drawing made from its outcome: named, numbered, as bytes of files."""

from __future__ import annotations

import importlib
from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.papers import paper
from dxfcable.drawing.sheeting.sheet_dxf import sheet_dxf
from dxfcable.drawing.sheeting.sheet_svg import sheet_svg
from dxfcable.drawing.sheets import Fields, Wish, compose, finish, table_pages
from dxfcable.model import Finding, Severity
from dxfcable.scales import read_plot_scale
from dxfcable.sheets.sheet_check import check_tables
from dxfcable.sheets.sheet_faults import character_warnings, cut_notes
from dxfcable.sheets.sheet_lengths import fabrication
from dxfcable.sheets.sheet_notes import sheet_notes
from dxfcable.sheets.sheet_set import IndexRow, check_name, index_table, page_names

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from dxfcable.asking import Outcome
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.drawing.sheets import Group, Sheet
    from dxfcable.model import Layout, Solution
    from dxfcable.settings import Settings
    from dxfcable.sheets.sheet_set import Numbers

_KIND, _CHECK, _INDEX = "FORCE DIAGRAM", "CHECKER'S PAGE", "SHEET INDEX"
_SMALLER = {"A": "A3", "ANSI": "ANSI-B", "ARCH": "ARCH-B"}  # an index needs no more


@dataclass(frozen=True, slots=True, kw_only=True)
class Order:
    """What the sheets of one drawing are to be.

    Attributes
    ----------
    drawing : str
        Its name without ending: first part of all names.
    settings : Settings
    size : str
        Of the paper.
    plot_scale : str or None
        Scale of elevations to try first, as "1:100".
    together, checker : bool
        Several cables on a sheet where they fit; a checker's page for each.
    """

    drawing: str
    settings: Settings
    size: str
    plot_scale: str | None = None
    together: bool = False
    checker: bool = False


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Made:
    """Sheets made.

    Attributes
    ----------
    sheets : tuple of Sheet
        In order.
    files : tuple of (str, bytes)
        Names and contents of their files.
    rows : tuple of IndexRow
    findings : tuple of Finding
    """

    sheets: tuple[Sheet, ...] = ()
    files: tuple[tuple[str, bytes], ...] = ()
    rows: tuple[IndexRow, ...] = ()
    findings: tuple[Finding, ...] = field(default=())

    def stems(self) -> tuple[str, ...]:
        """Give the names of files without their endings."""
        return tuple(sheet.stem for sheet in self.sheets)


def make_sheets(outcome: Outcome, order: Order, numbers: Numbers) -> Made:
    """Make the sheets of a solved drawing.

    Parameters
    ----------
    outcome : Outcome
        With layout and solution.
    order : Order
    numbers : Numbers
        Gives and keeps the numbers of sheets.

    Returns
    -------
    Made
        Without PDF where the library for it is missing, which is a finding.

    Raises
    ------
    DxfcableError
        Where the size of paper or the scale does not read, the paper is too small, or the
        number does not fit its field.
    """
    layout, solution = outcome.layout, outcome.solution
    assert layout is not None
    assert solution is not None
    sheet_paper = paper(order.size, order.settings.show)
    scale = None if order.plot_scale is None else read_plot_scale(order.plot_scale)
    wish = Wish(
        settings=order.settings,
        paper=sheet_paper,
        notes=sheet_notes(layout, solution, order.settings),
        fabrication=fabrication(layout, solution, order.settings),
        plot_scale=scale,
        together=order.together,
    )
    groups = compose(layout, solution, wish)
    firsts = [f"{order.drawing}-{group.name}" for group in groups]
    sheets: list[Sheet] = []
    rows = []
    small = _small(sheet_paper, order.settings)
    for group, stem in zip(groups, firsts, strict=True):
        others = [name for name in firsts if name != stem]
        fields = _fields(group, order, numbers.number(stem, order.settings.sheet.number_prefix))
        stems = page_names(stem, len(group.pages), others)
        sheets += finish(group.pages, sheet_paper, fields, stems)
        rows.append(_row(group, order, fields, stem, sheet_paper))
        if order.checker:
            sheets += _check_sheets(layout, solution, group, small, fields, (stem, others))
    written = _written(sheets, order.settings)
    findings = (*_scale_notes(groups, scale), *written.findings)
    return replace(written, rows=tuple(rows), findings=findings)


def make_index(rows: Sequence[IndexRow], settings: Settings, size: str) -> Made:
    """Make the index sheet of a set.

    Parameters
    ----------
    rows : sequence of IndexRow
    settings : Settings
    size : str
        Of the set's paper; the index takes a small one of its kind.
    """
    chosen = _small(paper(size, settings.show), settings)
    office = settings.sheet
    fields = replace(
        _office_fields(settings),
        title=office.title or office.project or _INDEX,
        supplement=f"{_INDEX}, {len(rows)} NUMBERS",
        kind=_INDEX,
        number=f"{office.number_prefix}000",
        scale="-",
    )
    pages = table_pages([index_table(rows)], chosen, "index")
    sheets = finish(
        pages, chosen, fields, page_names("index", len(pages), [row.file for row in rows])
    )
    return _written(sheets, settings)


def _small(own: Paper, settings: Settings) -> Paper:
    """Give a small paper of the same kind, for tables alone."""
    smaller = paper(_SMALLER.get(own.name.partition("-")[0], "A3"), settings.show)
    return own if own.width <= smaller.width else smaller


def set_pdf(parts: Iterable[Made]) -> bytes | None:
    """Make one PDF of all sheets; None without the library for it."""
    if not _has_pdf():
        return None
    from dxfcable.drawing.sheeting.sheet_pdf import sheets_pdf

    return sheets_pdf([sheet for part in parts for sheet in part.sheets], "Force diagrams")


def _has_pdf() -> bool:
    """Tell whether the library for PDF is there."""
    try:
        importlib.import_module("reportlab")
    except ImportError:
        return False
    return True


def _written(sheets: Sequence[Sheet], settings: Settings) -> Made:
    """Write sheets as files; say what is missing."""
    files: list[tuple[str, bytes]] = []
    findings = []
    has_pdf = _has_pdf()
    for sheet in sheets:
        files.append((f"{sheet.stem}.dxf", sheet_dxf(sheet, settings)))
        if has_pdf:
            from dxfcable.drawing.sheeting.sheet_pdf import sheets_pdf

            files.append((f"{sheet.stem}.pdf", sheets_pdf([sheet], sheet.title)))
        files.append((f"{sheet.stem}.svg", sheet_svg(sheet, settings)))
    if not has_pdf and sheets:
        names = ", ".join(f"{sheet.stem}.pdf" for sheet in sheets)
        findings.append(
            Finding(
                code="picture-extra",
                severity=Severity.WARNING,
                text=f"not written, for the library reportlab is missing: {names}",
                remedy="Install it with: pip install 'dxfcable[picture]'",
            )
        )
    elif has_pdf:
        findings += character_warnings(sheets)
    findings += cut_notes(sheets)
    return Made(sheets=tuple(sheets), files=tuple(files), findings=tuple(findings))


def _scale_notes(groups: Sequence[Group], wanted: float | None) -> list[Finding]:
    """Say where an elevation did not fit at the scale that was asked for."""
    return [
        Finding(
            code="sheet-scale",
            severity=Severity.NOTE,
            cable=mark,
            text=f"cable {mark}: its elevation does not fit the sheet at the scale asked for; "
            f"it is drawn {group.scale}",
            remedy="Give a larger --size.",
        )
        for group in groups
        for mark, scale in zip(group.marks, group.scales, strict=False)
        if wanted is not None and scale != wanted
    ]


def _office_fields(settings: Settings) -> Fields:
    """Give what the office says once for all of its sheets."""
    office = settings.sheet
    return Fields(
        owner=office.owner,
        project=office.project,
        created=office.drawn,
        checked=office.checked,
        approved=office.approved,
        date=office.date,
        status=office.status,
        language=office.language,
    )


def _fields(group: Group, order: Order, number: str) -> Fields:
    """Fill the title block of one cable's sheets."""
    cables = f"CABLE{'S' if len(group.marks) > 1 else ''} {', '.join(group.marks)}"
    title = order.settings.sheet.title
    last = group.revisions[-1] if group.revisions else None
    return replace(
        _office_fields(order.settings),
        title=title or f"{_KIND}, {cables}",
        supplement=f"{cables}, {order.drawing}" if title else order.drawing,
        kind=_KIND,
        number=number,
        scale=group.scale,
        revision="" if last is None else last.rev or str(last.number),
        revisions=group.revisions,
    )


def _row(group: Group, order: Order, fields: Fields, stem: str, sheet_paper: Paper) -> IndexRow:
    return IndexRow(
        number=fields.number,
        rev=fields.revision,
        title=fields.title,
        drawing=order.drawing,
        cables=", ".join(group.marks),
        file=stem,
        sheets=len(group.pages),
        size=sheet_paper.name,
        scale=group.scale,
        status=fields.status,
    )


def _check_sheets(
    layout: Layout,
    solution: Solution,
    group: Group,
    small: Paper,
    fields: Fields,
    names: tuple[str, list[str]],
) -> tuple[Sheet, ...]:
    """Make the checker's pages of a group."""
    stem, others = names
    tables = [t for index in group.cables for t in check_tables(layout, solution, index)]
    pages = table_pages(tables, small, f"{stem}/check")
    own = replace(fields, kind=_CHECK, supplement=f"{_CHECK}, {fields.supplement}", scale="-")
    stems = page_names(check_name(stem, others), len(pages), others)
    return finish(pages, small, own, stems)
