"""A finished sheet: the one list of items that DXF, PDF and SVG are written from."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.drawing.items import Item
    from dxfcable.drawing.sheeting.papers import Paper
    from dxfcable.drawing.sheeting.title_block import Fields

MARK = "dxfcable sheet"  # in each file that is written, so that no other one is overwritten


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Sheet:
    """One sheet.

    Attributes
    ----------
    stem : str
        Name of its files without their endings.
    paper : Paper
    fields : Fields
        As its title block says.
    items : tuple of Item
        In millimetres from the lower left corner of the paper.
    cut : tuple of str
        Names of fields whose texts are cut.
    """

    stem: str
    paper: Paper
    fields: Fields
    items: tuple[Item, ...]
    cut: tuple[str, ...] = ()

    @property
    def title(self) -> str:
        """What a reader's window shows."""
        return f"{self.fields.number} {self.fields.title}".strip()
