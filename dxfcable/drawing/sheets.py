"""Sheets of a drawing's cables: composed, framed, and written as DXF, PDF and SVG.

A sheet is a drawing of its own at plotted size: everything on it stands in its paper-space
layout at one to one, so that texts, pens and spacing are exact.
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.sketch import Sketch, shown
from dxfcable.drawing.sheeting.blocks import Drawing
from dxfcable.drawing.sheeting.composing import CableSheet, Cell, cells_of, continued
from dxfcable.drawing.sheeting.paper_view import ROUNDER, scale_words
from dxfcable.drawing.sheeting.ruled_table import Schedule
from dxfcable.drawing.sheeting.ruling import ruled
from dxfcable.drawing.sheeting.schedules import Fabrication
from dxfcable.drawing.sheeting.sheet import Sheet
from dxfcable.drawing.sheeting.text_blocks import legend_sketch, notes_sketches
from dxfcable.drawing.sheeting.title_block import Fields, draw_border, draw_title_block, places
from dxfcable.drawing.sheeting.views import sheet_views
from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.drawing.sheeting.blocks import Block, Wanted
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import CableRevisions, Layout, RevisionRow, Solution
    from dxfcable.settings import Settings

__all__ = [
    "Fabrication",
    "Fields",
    "Group",
    "Sheet",
    "Table",
    "Wish",
    "compose",
    "finish",
    "table_pages",
]

_NOTES = "notes"  # chain of their blocks
_WORDS = 44.0  # width of notes and legend where they have no column, in text heights


@dataclass(frozen=True, slots=True, kw_only=True)
class Table:
    """A table of words for a sheet; `lefts` are the columns of words."""

    key: str
    title: str
    head: tuple[str, ...]
    rows: tuple[tuple[str, ...], ...]
    lefts: tuple[int, ...] = (0,)


@dataclass(frozen=True, slots=True, kw_only=True)
class Wish:
    """What is asked of the sheets of one drawing.

    Attributes
    ----------
    settings : Settings
    paper : Paper
    plot_scale : float or None
        Scale of elevations to try first.
    together : bool
        Several cables on a sheet where they fit.
    notes : mapping of int to tuple of str
        Notes that apply to each cable, by its position.
    fabrication : mapping of int to Fabrication
        What schedules say of a cable beyond the state shown.
    """

    settings: Settings
    paper: Paper
    notes: Mapping[int, tuple[str, ...]]
    fabrication: Mapping[int, Fabrication] = field(default_factory=dict)
    plot_scale: float | None = None
    together: bool = False


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Group:
    """Cables that share sheets, and what stands on each sheet.

    Attributes
    ----------
    cables : tuple of int
        Positions in the solution.
    parts : tuple of str
        Their marks as parts of names.
    marks : tuple of str
    pages : tuple of tuples of Item
    scales : tuple of float
        Of the elevations.
    """

    cables: tuple[int, ...]
    parts: tuple[str, ...]
    marks: tuple[str, ...]
    pages: tuple[tuple[Item, ...], ...]
    scales: tuple[float, ...]
    length_unit: str
    revisions: tuple[RevisionRow, ...]

    @property
    def name(self) -> str:
        """Part of the names of files."""
        return "+".join(self.parts)

    @property
    def scale(self) -> str:
        """What the title block says of scales."""
        words = dict.fromkeys(scale_words(scale, self.length_unit) for scale in self.scales)
        return " / ".join(words) if len(words) == 1 else "AS NOTED"


def compose(layout: Layout, solution: Solution, wish: Wish) -> tuple[Group, ...]:
    """Compose the sheets of all cables.

    Parameters
    ----------
    layout, solution : Layout, Solution
    wish : Wish

    Returns
    -------
    tuple of Group
        In the order of the cables; alone, or together where several fit without a further sheet.

    Raises
    ------
    DxfcableError
        With code `sheet-small`, where the paper is too small for an elevation.
    """
    views = sheet_views(layout, solution, wish.settings)
    by_mark = {row.cable: row for row in solution.revisions}
    maker = _Maker(wish=wish, views=views, revisions=by_mark)
    groups: list[Group] = []
    first = 0
    while first < len(views):
        count = len(views) - first if wish.together else 1
        group = None
        while group is None and count > 1:
            group = maker.group(range(first, first + count), may_continue=False)
            count -= group is None
        if group is None:
            group = maker.group(range(first, first + 1), may_continue=True)
            count = 1
        assert group is not None
        groups.append(group)
        first += count
    return tuple(groups)


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Maker:
    """Composes groups of cables."""

    wish: Wish
    views: tuple[View, ...]
    revisions: Mapping[str, CableRevisions]

    def group(self, cables: range, *, may_continue: bool) -> Group | None:
        """Compose some cables on one sheet and those that continue it.

        None where several cables do not fit one sheet.
        """
        paper = self.wish.paper
        where = places(paper)
        views = [self.views[k] for k in cables]
        revisions = [
            self.revisions[v.formed.mark] for v in views if v.formed.mark in self.revisions
        ]
        column, words = self._words(cables, views, revisions, where.words)
        cells: list[Cell] = []
        regions = cells_of(where.main, len(views), 2 * paper.gap)
        for index, region in zip(cables, regions, strict=True):
            cell = self._cell(index, region, words if index == cables[-1] else ())
            if cell is None and may_continue:
                raise _too_small(self.views[index], paper)
            if cell is None or (cell.wanted and not may_continue):
                return None
            cells.append(cell)
        wanted = [w for cell in cells for w in cell.wanted]
        pages = [(*column, *(item for cell in cells for item in cell.items()))]
        pages += further_pages(wanted, where.main, paper)
        return Group(
            cables=tuple(cables),
            parts=tuple(view.prefix for view in views),
            marks=tuple(view.formed.mark for view in views),
            pages=tuple(pages),
            scales=tuple(cell.scale for cell in cells if cell.scale is not None),
            length_unit=views[0].wording.length_unit,
            revisions=_rows(revisions, is_several=len(views) > 1),
        )

    def _cell(self, index: int, region: Bounds, further: Sequence[Block]) -> Cell | None:
        view = self.views[index]
        sheet = CableSheet(
            view=view,
            paper=self.wish.paper,
            temperature=self.wish.settings.show.reference_temperature,
            plot_scale=self.wish.plot_scale,
            revisions=self.revisions.get(view.formed.mark),
            fabrication=self.wish.fabrication.get(index, Fabrication()),
            further=tuple(further),
        )
        return sheet.cell(region)

    def _words(
        self,
        cables: range,
        views: Sequence[View],
        revisions: Sequence[CableRevisions],
        room: Bounds | None,
    ) -> tuple[list[Item], list[Block]]:
        """Write notes and legend in their column; what has no room there is a block to place."""
        paper = self.wish.paper
        h, main = paper.text, places(paper).main
        x0, y0, x1, y1 = room or (0.0, main[1], _WORDS * h, main[3])
        notes = notes_sketches(self._notes(cables), x1 - x0, y1 - y0, h)
        legend = legend_sketch(views, revisions, x1 - x0, h)
        if room is None:
            chained = [Drawing(sketch=sketch, chain=_NOTES) for sketch in notes]
            return [], [*chained, Drawing(sketch=legend)]
        items: list[Item] = []
        left: list[Block] = []
        top = y1
        for number, sketch in enumerate((*notes, legend)):
            chain = _NOTES if number < len(notes) else ""
            _, low, _, high = sketch.bounds()
            is_behind = bool(chain) and any(block.chain == chain for block in left)
            if high - low <= top - y0 and not is_behind:
                items += sketch.moved((x0, top - high), ROUNDER)
                top -= high - low + paper.gap
            else:
                left.append(Drawing(sketch=sketch, chain=chain))
        return items, left

    def _notes(self, cables: range) -> list[str]:
        """Join the notes of cables: those of all once, others with the cable's mark."""
        lists = [self.wish.notes[k] for k in cables]
        common = [note for note in lists[0] if all(note in other for other in lists)]
        own = [
            f"CABLE {self.views[k].formed.mark}: {note}"
            for k, notes in zip(cables, lists, strict=True)
            for note in notes
            if note not in common
        ]
        return [*common, *own]


def _too_small(view: View, paper: Paper) -> DxfcableError:
    message = f"cable {view.formed.mark}: its elevation does not fit a sheet {paper.name}"
    return DxfcableError(message, code="sheet-small", remedy="Give a larger --size.")


def _rows(revisions: Sequence[CableRevisions], *, is_several: bool) -> tuple[RevisionRow, ...]:
    """Give the revision rows of the cables of a sheet."""
    return tuple(
        replace(row, description=f"{each.cable}: {row.description}") if is_several else row
        for each in revisions
        for row in each.rows
    )


def further_pages(wanted: Sequence[Wanted], region: Bounds, paper: Paper) -> list[tuple[Item, ...]]:
    """Put what is still wanted on further sheets: in order, unless that takes more of them."""
    chains = []
    for in_order in (True, False):
        rest: Sequence[Wanted] = wanted
        cells: list[Cell] = []
        while rest:
            cells.append(continued(rest, region, paper, in_order=in_order))
            rest = cells[-1].wanted
        chains.append(cells)
        if len(cells) < 2:
            break
    return [tuple(cell.items()) for cell in min(chains, key=len)]


def finish(
    pages: Sequence[Sequence[Item]], paper: Paper, fields: Fields, stems: Sequence[str]
) -> tuple[Sheet, ...]:
    """Frame pages: border, title block with the sheet's number of all, revision rows, caution.

    Parameters
    ----------
    pages : sequence of sequences of Item
    paper : Paper
    fields : Fields
        Of all of them; `sheet` is filled in here.
    stems : sequence of str
        Names of files, one for each page.
    """
    sheets = []
    for number, (page, stem) in enumerate(zip(pages, stems, strict=True), start=1):
        own = replace(fields, sheet=f"{number} / {len(pages)}")
        if number > 1:
            own = replace(own, supplement=f"{fields.supplement}, CONTINUED")
        frame = Sketch(ROUNDER)
        draw_border(frame, paper)
        cut = draw_title_block(frame, paper, own)
        items = (*frame.items, *page)
        sheets.append(Sheet(stem=stem, paper=paper, fields=own, items=items, cut=cut))
    return tuple(sheets)


def table_pages(tables: Sequence[Table], paper: Paper, name: str) -> list[tuple[Item, ...]]:
    """Put tables on as many pages as they need."""
    schedules = [
        Schedule(
            key=table.key,
            title=shown(table.title),
            head=table.head,
            aligns=tuple(
                Align.LEFT if k in table.lefts else Align.RIGHT for k in range(len(table.head))
            ),
            rows=table.rows,
        )
        for table in tables
    ]
    return further_pages(ruled(schedules, name, paper), places(paper).main, paper)
