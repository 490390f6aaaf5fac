"""A starter drawing: layers, blocks with their attributes, and one worked cable with notes."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING

from ezdxf._options import options

from dxfcable.drawing.starting.starter_blocks import add_blocks
from dxfcable.drawing.starting.starter_board import new_board
from dxfcable.drawing.starting.starter_example import Example
from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from ezdxf.document import Drawing

    from dxfcable.settings import Settings

UNITS = ("ft", "in", "m", "mm")


def starter(units: str, settings: Settings) -> bytes:
    """Make a starter drawing.

    Parameters
    ----------
    units : str
        Drawing unit: ft, in, m or mm; numbers of the example are proper to it.
    settings : Settings
        Names of layers and blocks, load cases, text height and plotting scale.

    Returns
    -------
    bytes
        DXF of release R2000; the same at every run.

    Raises
    ------
    DxfcableError
        With code `usage`, for another unit.
    """
    if units not in UNITS:
        message = f'"{units}" is no unit of a starter drawing'
        raise DxfcableError(message, code="usage", remedy=f"Write one of {', '.join(UNITS)}.")
    before = options.write_fixed_meta_data_for_testing
    options.write_fixed_meta_data_for_testing = True  # no times, no new GUIDs, when made or written
    try:
        return _written(_drawn(units, settings))
    finally:
        options.write_fixed_meta_data_for_testing = before


def _drawn(units: str, settings: Settings) -> Drawing:
    """Draw it, and have it open in full view."""
    board = new_board(units, settings)
    example = Example(board, settings)
    add_blocks(board, settings, example.prompts())
    example.draw()
    low, high = example.corners()
    header = board.doc.header
    header["$EXTMIN"], header["$EXTMAX"] = (*low, 0.0), (*high, 0.0)
    header["$LIMMIN"], header["$LIMMAX"] = low, high
    middle = (low[0] + high[0]) / 2, (low[1] + high[1]) / 2
    board.doc.set_modelspace_vport(1.1 * (high[1] - low[1]), middle)
    return board.doc


def _written(doc: Drawing) -> bytes:
    """Write a drawing, its CLASS rows in order: the library makes them from a set."""
    doc.classes.add_required_classes(doc.dxfversion)
    rows = sorted(doc.classes.classes.items())
    doc.classes.classes.clear()
    doc.classes.classes.update(rows)
    stream = io.StringIO()
    doc.write(stream)
    return stream.getvalue().encode(doc.output_encoding)
