"""What sheets cannot show as it is stated: fields that are cut, characters the PDF lacks."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.sheets import Sheet

# Names of fields in the title block, and what states them: a key of [sheet], or nothing.
_SETTINGS = {
    "LEGAL OWNER": "owner",
    "PROJECT": "project",
    "TITLE": "title",
    "SUPPLEMENTARY TITLE": "",
    "CREATED BY": "drawn",
    "CHECKED BY": "checked",
    "APPROVED BY": "approved",
    "DATE OF ISSUE": "date",
    "DOCUMENT STATUS": "status",
    "LANG.": "language",
    "NUMBER": "number_prefix",
}


def cut_notes(sheets: Sequence[Sheet]) -> list[Finding]:
    """Name the fields of title blocks whose texts are cut short."""
    found = []
    for name in dict.fromkeys(name for sheet in sheets for name in sheet.cut):
        key = _SETTINGS.get(name, "")
        found.append(
            Finding(
                code="title-cut",
                severity=Severity.NOTE,
                text=f"the title block has no room for the whole of {_named(name)}; it is cut",
                remedy=f"Write {key} shorter." if key else "",
            )
        )
    return found


def _named(name: str) -> str:
    """Name a field, with the setting that states it."""
    key = _SETTINGS.get(name, "")
    return f"{name} ({key} in [sheet])" if key else name


def character_warnings(sheets: Sequence[Sheet]) -> list[Finding]:
    """Say which characters the PDF cannot show, and where they stand."""
    from dxfcable.drawing.items import TextItem
    from dxfcable.drawing.sheeting.sheet_pdf import unshown

    missing: set[str] = set()
    places: dict[str, None] = {}
    for sheet in sheets:
        for item in sheet.items:
            if isinstance(item, TextItem) and (lacking := unshown(item.text)):
                missing |= lacking
                places[_place(item.id)] = None
    if not missing:
        return []
    shown = " ".join(f"U+{ord(character):04X}" for character in sorted(missing))
    return [
        Finding(
            code="pdf-characters",
            severity=Severity.WARNING,
            text=f"the face of the PDF has no {shown}; they stand as ? there, in DXF and SVG as "
            f"they are: {', '.join(places)}",
            remedy="Write them with plain letters, or plot the DXF.",
        )
    ]


def _place(name: str) -> str:
    """Name the field of a title block that an item belongs to, or what else it is."""
    from dxfcable.drawing.sheeting.title_block import field_of

    field = field_of(name)
    return _named(field) if field else "texts of the drawing"
