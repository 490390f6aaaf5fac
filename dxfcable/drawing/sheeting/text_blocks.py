"""Blocks of words on a sheet: notes, legend of signs, caution."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.schedule_text import CAUTION
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.drawing.sheeting.paper_view import ROUNDER
from dxfcable.drawing.sheeting.ruled_table import CONTINUED, wrapped

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.painting.elevation_view import View
    from dxfcable.model import CableRevisions, Point

_LINE = 1.6
_BETWEEN = 0.5  # entries apart, in text heights
_SAMPLE = 7.0  # width of a legend's sample
_NUMBER = 3.2


@dataclass(frozen=True, slots=True)
class _Entry:
    """A sample of a line or an arrow, and what it means."""

    sample: str
    role: str
    text: str


def notes_sketches(notes: Sequence[str], width: float, height: float, h: float) -> list[Sketch]:
    """Write numbered notes, each block about its upper left corner.

    Parameters
    ----------
    notes : sequence of str
    width, height : float
        Of a block at most [mm]; notes that do not fit one go on in the next.
    h : float
        Text height [mm].

    Returns
    -------
    list of Sketch
    """
    blocks: list[Sketch] = []
    y = -height
    for number, note in enumerate(notes, start=1):
        lines = wrapped(note, width - _NUMBER * h, h)
        rise = (_BETWEEN + _LINE * len(lines)) * h
        if y - rise < -height + h or not blocks:
            blocks.append(Sketch(ROUNDER))
            title = f"NOTES{CONTINUED if number > 1 else ''}"
            y = -1.2 * h
            blocks[-1].text(f"notes/title-{number}", "note", title, (0.0, y), h)
        y -= _BETWEEN * h
        for k, line in enumerate(lines):
            y -= _LINE * h
            if k == 0:
                blocks[-1].text(f"notes/{number}", "note", f"{number}.", (0.0, y), h)
            blocks[-1].text(f"notes/{number}-{k}", "note", line, (_NUMBER * h, y), h)
    return blocks


def caution_lines(width: float, h: float) -> list[str]:
    """Break the caution into lines of a width."""
    return wrapped(CAUTION, width, h)


def draw_caution(sketch: Sketch, name: str, at: Point, width: float, h: float) -> float:
    """Write the caution from an upper left corner on; return the ordinate below it."""
    x, y = at
    for number, line in enumerate(caution_lines(width, h), start=1):
        y -= _LINE * h
        sketch.text(f"{name}/caution-{number}", "note", line, (x, y + 0.3 * h), h)
    return y


def legend_sketch(
    views: Sequence[View], revisions: Sequence[CableRevisions], width: float, h: float
) -> Sketch:
    """Draw the legend of signs about its upper left corner: what stands on this sheet."""
    sketch = Sketch(ROUNDER)
    sketch.text("legend/title", "note", "LEGEND OF SIGNS", (0.0, -1.2 * h), h)
    y = -1.2 * h
    indent = (_SAMPLE + 1.5) * h
    for number, entry in enumerate(_entries(views, revisions), start=1):
        y -= _BETWEEN * h
        name = f"legend/{number}"
        _draw_sample(sketch, f"{name}/sample", entry, y - (_LINE - 0.5) * h, h)
        for k, line in enumerate(wrapped(entry.text, width - indent, h)):
            y -= _LINE * h
            sketch.text(f"{name}-{k}", "note", line, (indent, y), h)
    return sketch


def _entries(views: Sequence[View], revisions: Sequence[CableRevisions]) -> list[_Entry]:
    """List the signs that the sheet uses."""
    entries = [
        _Entry("line", "profile", "CABLE, CENTRE LINE"),
        _Entry("chain", "closing_string", "CLOSING STRING, CLOSING RAY"),
        _Entry("line", "force_diagram", "LOAD LINE, RAYS: ONE TO EACH PIECE, PARALLEL TO IT"),
        _Entry("down", "load", "LOAD, DOWN +, NOT TO SCALE"),
        _Entry(
            "right",
            "reaction",
            "REACTION, ON THE CABLE AS THE ARROW POINTS: V UP +, H OUTWARD + AT ENDS, "
            "TO THE RIGHT + AT SADDLES",
        ),
        _Entry("words:+ / -", "note", "TENSION + / COMPRESSION -"),
        _Entry(
            "words:A B, AO",
            "note",
            "BOW'S NOTATION: LETTERS STAND IN THE SPACES BETWEEN FORCES; A B IS A LOAD, "
            "AO THE PIECE IN SPACE A, O THE POLE",
        ),
    ]
    if any(view.formed.weight for view in views):
        text = "RAY AT THE RIGHT END OF A PIECE WITH WEIGHT, AO AT ITS LEFT END"
        entries.append(_Entry("words:AO'", "note", text))
    if any(view.anchorages for view in views):
        text = (
            "STAY OR MAST: ARROWHEADS POINT AWAY FROM A JOINT FOR TENSION, TOWARDS IT FOR "
            "COMPRESSION; UPLIFT OF AN ANCHOR +"
        )
        entries.append(_Entry("line", "stay", text))
    if any(view.cable.deck for view in views):
        entries.append(_Entry("line", "deck", "DECK"))
    if any(view.cable.clearance for view in views):
        entries.append(_Entry("line", "clearance", "LINE TO STAY CLEAR OF"))
    if any(row.old for row in revisions):
        entries.append(_Entry("line", "revision", "CABLE BEFORE THE LATEST REVISION"))
    return entries


def _draw_sample(sketch: Sketch, name: str, entry: _Entry, y: float, h: float) -> None:
    """Draw a sample about a middle line."""
    left, right = 0.0, _SAMPLE * h
    middle = 0.5 * right
    if entry.sample == "line":
        # A polyline, so that dashes show where the role has them.
        sketch.polyline(name, entry.role, ((left, y), (right, y)))
    elif entry.sample == "chain":
        sketch.line(name, entry.role, (left, y), (right, y), is_chain=True)
    elif entry.sample == "down":
        sketch.line(name, entry.role, (middle, y + 0.9 * h), (middle, y - 0.6 * h))
        sketch.arrowhead(f"{name}/head", entry.role, (middle, y - 0.6 * h), (0.0, -1.0), h)
    elif entry.sample == "right":
        sketch.line(name, entry.role, (middle - 1.8 * h, y), (middle + 1.8 * h, y))
        sketch.arrowhead(f"{name}/head", entry.role, (middle + 1.8 * h, y), (1.0, 0.0), 1.1 * h)
    else:
        sketch.text(name, entry.role, entry.sample.partition(":")[2], (left, y - 0.5 * h), h)
