"""Invented cables for the tests of sheets, and how sheets are made of them."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.items import LineItem, TextItem
from dxfcable.drawing.painting.sketch import strokes
from dxfcable.drawing.sheeting.papers import paper
from dxfcable.drawing.sheets import Fields, Sheet, Wish, compose, finish
from dxfcable.settings import Settings
from tests.drawing.covering import covered_texts, struck_texts
from tests.drawing.painter_cases import Case, Span, form

if TYPE_CHECKING:
    from dxfcable.model import Layout, Solution

NOTES = (
    "Do not scale. Written values govern.",
    "A note that is long enough to take two lines in a column of its own, and so to be broken.",
)


def invented(count: int, seed: int, *, is_inch: bool = False) -> Case:
    """Invent a cable: uneven panels, unlevel supports, with and without masts and deck."""
    rng = np.random.default_rng(1000 * seed + count)
    length = float(rng.choice([12.0, 30.0, 60.0, 90.0]))
    panels = rng.uniform(0.7, 1.5, count + 1)
    panels *= length / panels.sum()
    x = np.round(np.concatenate(([0.0], np.cumsum(panels))), 3)
    rise = length * float(rng.choice([-0.12, -0.05, 0.0, 0.05, 0.12]))
    span = Span(
        x=tuple(x.tolist()),
        loads=tuple(rng.integers(5, 30, count).astype(float).tolist()),
        y=(30.0, 30.0 + rise),
        sag=length * float(rng.choice([0.06, 0.1, 0.14])),
    )
    deck = min(form(span).y) - float(rng.uniform(0.02, 0.1)) * length if seed % 2 else None
    mast = float(rng.uniform(0.15, 0.3)) * length if seed % 3 else None
    return Case(
        spans=(span,),
        deck=deck,
        mast=mast,
        stay_run=0.0 if mast is None else 1.2 * mast,
        unit="ft" if is_inch else "m",
        force="kip" if is_inch else "kN",
    )


def made(
    layout: Layout, solution: Solution, size: str, *, together: bool = False
) -> tuple[Sheet, ...]:
    """Make the sheets of all cables."""
    settings = Settings()
    chosen = paper(size, settings.show)
    notes = dict.fromkeys(range(len(layout.cables)), NOTES)
    wish = Wish(settings=settings, paper=chosen, notes=notes, together=together)
    sheets: list[Sheet] = []
    for group in compose(layout, solution, wish):
        fields = Fields(title="FORCE DIAGRAM", number="FD-001", scale=group.scale)
        stems = [f"roof-{group.name}-{k}" for k in range(len(group.pages))]
        sheets += finish(group.pages, chosen, fields, stems)
    return tuple(sheets)


def texts_of(sheet: Sheet) -> list[TextItem]:
    """List the texts of a sheet."""
    return [item for item in sheet.items if isinstance(item, TextItem)]


def faults(sheet: Sheet) -> list[object]:
    """List texts that stand on each other, or that a line runs through.

    The end of a text's own leader may touch it.
    """
    texts = texts_of(sheet)
    is_leader = {i.id for i in sheet.items if i.id.endswith("/leader")}
    rest = strokes(i for i in sheet.items if i.id not in is_leader)
    found: list[object] = [*covered_texts(texts), *struck_texts(texts, rest.tolist())]
    for item in sheet.items:
        if isinstance(item, LineItem) and item.id in is_leader:
            others = [t for t in texts if f"{t.id}/leader" != item.id]
            found += struck_texts(others, [(*item.start, *item.end)])
    return found
