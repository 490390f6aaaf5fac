"""The rows of revisions beside or above the title block of a sheet."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.sheeting.title_texts import fitted

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.painting.sketch import Bounds, Sketch
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.model import RevisionRow


def revision_row(paper: Paper) -> float:
    """Give the height of a row of revisions [mm]."""
    return 2.0 * paper.text


def _columns(width: float) -> tuple[tuple[str, ...], tuple[float, ...]]:
    """Give heads and shares of the revision columns: a date must fit in any case."""
    if width > 120.0:
        return ("REV", "DESCRIPTION", "BY", "DATE"), (0.12, 0.48, 0.16, 0.24)
    if width > 80.0:
        return ("REV", "DESCRIPTION", "BY", "DATE"), (0.13, 0.37, 0.18, 0.32)
    return ("REV", "WHAT", "BY", "DATE"), (0.17, 0.23, 0.14, 0.46)


def draw_revisions(
    sketch: Sketch, paper: Paper, rows: Sequence[RevisionRow], box: Bounds, count: int
) -> None:
    """Draw the rows of revisions from the bottom up, the head lowest, blank ones to fill."""
    x0, y0, x1, _ = box
    width = x1 - x0
    head, shares = _columns(width)
    step, h = revision_row(paper), paper.text
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
