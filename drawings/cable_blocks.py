"""The office's blocks that carry a cable's data in attributes."""

from __future__ import annotations

from typing import TYPE_CHECKING

from drawings.drafting import STYLE, Sheet

if TYPE_CHECKING:
    from collections.abc import Sequence

    from ezdxf.layouts.blocklayout import BlockLayout

    from drawings.drafting import Point

DATA_TAGS = ("MARK", "MAX_TENSION", "SAG", "LOW_POINT", "PULL", "UNDER")
ANCHOR_TAGS = ("MARK", "EA", "STRAND", "SHARE", "WEIGHT", "MU", "FS_SLIDE", "FS_UPLIFT")


def _attribute(
    block: BlockLayout, sheet: Sheet, tag: str, at: Point, *, size: float = 1.0, shown: bool = True
) -> None:
    block.add_attdef(
        tag,
        at,
        dxfattribs={
            "height": sheet.height * size,
            "style": STYLE,
            "prompt": tag,
            "flags": 0 if shown else 1,
        },
    )


def support_block(sheet: Sheet, *, is_el_shown: bool = True) -> None:
    """Define CABLE-SUPPORT: a pin; mark and elevation above it."""
    block = sheet.doc.blocks.new("CABLE-SUPPORT")
    h = sheet.height
    block.add_circle((0, 0), 0.6 * h)
    block.add_line((-1.2 * h, 0), (1.2 * h, 0))
    block.add_line((0, -1.2 * h), (0, 1.2 * h))
    _attribute(block, sheet, "MARK", (-3.2 * h, 1.6 * h), size=1.3)
    _attribute(block, sheet, "EL", (0.8 * h, 1.6 * h), shown=is_el_shown)
    _attribute(block, sheet, "KIND", (0.8 * h, 3.2 * h), shown=False)


def anchor_block(sheet: Sheet) -> None:
    """Define CABLE-ANCHOR: an anchor plate; its mark below, its data not shown."""
    block = sheet.doc.blocks.new("CABLE-ANCHOR")
    h = sheet.height
    block.add_line((-1.2 * h, 0), (1.2 * h, 0))
    block.add_solid([(-0.8 * h, 0), (0.8 * h, 0), (0, -1.4 * h)])
    for k, tag in enumerate(ANCHOR_TAGS):
        shown = tag == "MARK"
        at = (-3.6 * h, -1.6 * h) if shown else (2.0 * h, -(3.2 + 1.6 * k) * h)
        _attribute(block, sheet, tag, at, size=1.3 if shown else 1.0, shown=shown)


def load_block(sheet: Sheet, cases: Sequence[str]) -> None:
    """Define CABLE-LOAD: a hanger pin, mark and one line for each load case below it."""
    block = sheet.doc.blocks.new("CABLE-LOAD")
    h = sheet.height
    block.add_circle((0, 0), 0.5 * h)
    block.add_line((0, -0.5 * h), (0, -6.0 * h))
    _attribute(block, sheet, "MARK", (0.5 * h, -3.0 * h))
    for k, case in enumerate(cases):
        y = -(5.0 + 1.8 * k) * h
        block.add_text(case, height=h, dxfattribs={"style": STYLE}).set_placement((0.5 * h, y))
        _attribute(block, sheet, case, (2.2 * h, y))
    _attribute(block, sheet, "CABLE", (0.5 * h, -8.6 * h), shown=False)
    _attribute(block, sheet, "CLAMPED", (0.5 * h, -10.2 * h), shown=False)


def data_block(sheet: Sheet, tags: Sequence[str] = DATA_TAGS) -> None:
    """Define CABLE-DATA: a small table, names on the left, values on the right."""
    block = sheet.doc.blocks.new("CABLE-DATA")
    h = sheet.height
    row, split, width = 2.0 * h, 11.0 * h, 21.0 * h
    style = {"style": STYLE}
    for k in range(len(tags) + 1):
        block.add_line((0, -k * row), (width, -k * row))
    bottom = -len(tags) * row
    for x in (0.0, split, width):
        block.add_line((x, 0), (x, bottom))
    for k, tag in enumerate(tags):
        y = -(k + 1) * row + 0.5 * h
        name = tag.replace("_", " ")
        block.add_text(name, height=h, dxfattribs=style).set_placement((0.6 * h, y))
        _attribute(block, sheet, tag, (split + 0.6 * h, y))
