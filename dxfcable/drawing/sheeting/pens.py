"""How the roles of a sheet's items look: pen, kind of line, layer."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.settings import Layers

# Long dash, gap, short dash, gap: the chain line of ISO 128; dashes of the usual length [mm].
CHAIN = (12.0, 1.5, 1.5, 1.5)
DASHES = (4.0, 2.0)


@dataclass(frozen=True, slots=True)
class Look:
    """Pen of a role by its place in the line group, and whether its lines are dashed."""

    pen: str
    is_dashed: bool = False


# Thick is what the sheet is about; load line, rays and everything that measures are thin.
LOOKS = {
    "profile": Look("extra"),
    "closing_string": Look("thin"),
    "force_diagram": Look("thin"),
    "letters": Look("thin"),
    "tension": Look("thin"),
    "elevation": Look("thin"),
    "reaction": Look("medium"),
    "hanger": Look("thin"),
    "table": Look("thin"),
    "revision": Look("thin", is_dashed=True),
    "support": Look("medium"),
    "load": Look("medium"),
    "mast": Look("thick"),
    "stay": Look("thick"),
    "anchor": Look("medium"),
    "deck": Look("medium"),
    "clearance": Look("thin", is_dashed=True),
    "border": Look("thick"),
    "title": Look("medium"),
    "ruling": Look("thin"),
    "note": Look("thin"),
}
_OWN = {
    "border": "S-ANNO-TTLB",
    "title": "S-ANNO-TTLB-HEAV",
    "ruling": "S-ANNO-TTLB-THIN",
    "note": "S-ANNO-NOTE",
}


def pen_of(role: str, paper: Paper) -> float:
    """Give the pen of a role [mm]."""
    width: float = getattr(paper.pens, LOOKS[role].pen)
    return width


def layer_of(role: str, layers: Layers) -> str:
    """Give the layer of a role: the office's name, or ours for border, title block and notes."""
    return _OWN[role] if role in _OWN else layers.name(role)
