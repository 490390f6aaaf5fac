"""The legend below an overlay: each kind of mark that occurs, and the findings in words."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.picturing.overlay_marks import clean
from dxfcable.drawing.picturing.overlay_understood import SIGNS, anchors_of, draw_sign
from dxfcable.model import Severity

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.picturing.overlay_marks import Marks
    from dxfcable.drawing.picturing.picture_page import Page
    from dxfcable.model import Finding, Layout, Point

_HEIGHT = 2.3  # mm, of capitals
_ROW = 5.2  # mm
_EDGE = 5.0  # mm
_SYMBOL = 11.0  # mm, room for a symbol
_UNIT_FAULTS = frozenset({"no-units", "units-unsupported"})
_LISTED = 24  # findings told in words


def draw_legend(marks: Marks, layout: Layout, findings: Sequence[Finding], page: Page) -> float:
    """Draw the legend and return its lower edge [mm]."""
    top = page.height
    marks.line("leg", [(0.0, top), (page.width, top)])
    y = top + _ROW
    is_stated = not any(f.code in _UNIT_FAULTS for f in findings)
    told = "As understood; the drawing itself in grey."
    told += f" Lengths in {layout.length_unit}." if is_stated else " Unit of length not known."
    told += f" Forces in {layout.force_unit}." if layout.force_unit else ""
    marks.text("plain", (_EDGE, y), told, _HEIGHT)
    y += 1.3 * _ROW
    x = _EDGE
    for name, words in _entries(layout, findings):
        width = _SYMBOL + text_width(words, _HEIGHT) * 0.85 + 6.0
        if x > _EDGE and x + width > page.width:
            x, y = _EDGE, y + _ROW
        _symbol(marks, name, (x, y - _HEIGHT / 2))
        marks.text("plain", (x + _SYMBOL, y), words, _HEIGHT)
        x += width
    for name, words in _lines(findings, page.width - 2 * _EDGE - _SYMBOL):
        y += _ROW
        _symbol(marks, name, (_EDGE, y - _HEIGHT / 2))
        marks.text("plain", (_EDGE + _SYMBOL, y), words, _HEIGHT)
    return round(y + _ROW, 1)


def _entries(layout: Layout, findings: Sequence[Finding]) -> list[tuple[str, str]]:
    """Return the marks that occur and what they mean."""
    cables = layout.cables
    loads = [load for cable in cables for load in cable.loads]
    loads += [load for cable in cables for _, load in cable.support_loads]
    severities = {f.severity for f in findings if f.at is not None}
    entries = (
        ("support", "support with its mark", bool(layout.supports)),
        ("string", "closing string of a cable", bool(cables)),
        ("load", "load point with the value read", bool(loads)),
        ("from", "from the text that states the value", any(p.value_origin for p in loads)),
        ("rule", "governing rule", any(c.rule for c in cables)),
        ("mast", "mast", bool(layout.masts)),
        ("stay", "stay", bool(layout.stays)),
        ("anchor", "anchor", bool(anchors_of(layout))),
        ("deck", "deck", any(c.deck for c in cables)),
        ("clearance", "to be kept clear", any(c.clearance for c in cables)),
        ("frame", "frame for the force diagram", any(c.frame for c in cables)),
        ("error", "error: stops a solve", Severity.ERROR in severities),
        ("warning", "warning: an engineer must look", Severity.WARNING in severities),
        ("note", "note: assumed or passed over", Severity.NOTE in severities),
    )
    return [(name, words) for name, words, occurs in entries if occurs]


def _lines(findings: Sequence[Finding], width: float) -> list[tuple[str, str]]:
    """Return findings in words, the gravest first, each in one line of a width."""
    order = {Severity.ERROR: 0, Severity.WARNING: 1, Severity.NOTE: 2}
    ranked = sorted(findings, key=lambda finding: order[finding.severity])
    lines = [
        (f.severity.value, _cut(clean(f"{f.code}: {f.text}"), width)) for f in ranked[:_LISTED]
    ]
    if len(ranked) > _LISTED:
        lines.append(("leg", f"and {len(ranked) - _LISTED} more, listed by the command read"))
    return lines


def _cut(text: str, width: float) -> str:
    """Shorten a text to a width."""
    if text_width(text, _HEIGHT) * 0.85 <= width:
        return text
    while text and text_width(text + " ..", _HEIGHT) * 0.85 > width:
        text = text[:-1]
    return text.rstrip() + " .."


def _symbol(marks: Marks, name: str, at: Point) -> None:
    """Draw a mark small, as it is drawn above."""
    x, y = at[0] + 3.5, at[1]
    size = 1.4
    if name in SIGNS:
        draw_sign(marks, name, (x, y), size)
    elif name == "support":
        for radius in (0.8, 1.2):
            marks.circle(name, (x, y), radius * size)
    elif name == "load":
        marks.circle(name, (x, y), 0.7 * size)
        marks.line(name, [(x - size, y), (x + size, y)])
    elif name == "from":
        marks.circle("from dot", (x - 2.5, y), 0.3 * size)
        marks.arrow("from", (x - 2.5, y), (x + 3.5, y), 1.1 * size)
    elif name == "rule":
        marks.rect(name, (x - size, y - size, x + size, y + size))
    elif name == "anchor":
        marks.polygon(name, [(x - size, y + size), (x + size, y + size), (x, y - size)])
    elif name == "frame":
        marks.rect(name, (x - 3.0, y - size, x + 4.0, y + size))
    elif name != "leg":
        marks.line(name, [(x - 3.0, y), (x + 5.0, y)])
