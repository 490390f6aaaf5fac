"""Drawings made in tests, and pictures of them as pixels."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING

import numpy as np
from ezdxf.filemanagement import new
from PIL import Image

from dxfcable.drawing.picture import picture

if TYPE_CHECKING:
    from ezdxf.document import Drawing
    from numpy.typing import NDArray

SIDE = 400  # pixels
RELEASES = ("R12", "R2000", "R2004", "R2007", "R2010", "R2013", "R2018")


def blank(release: str = "R2010") -> Drawing:
    """Return a drawing with a grey frame of lines from (0, 0) to (10, 10)."""
    doc = new(release, setup=["linetypes", "styles"])
    corners = [(0, 0), (10, 0), (10, 10), (0, 10)]
    for k, corner in enumerate(corners):
        doc.modelspace().add_line(corner, corners[(k + 1) % 4], dxfattribs={"color": 9})
    return doc


def saved(doc: Drawing) -> bytes:
    """Return a drawing as it would lie on the disk."""
    stream = io.StringIO()
    doc.write(stream)
    return stream.getvalue().encode(doc.output_encoding, errors="surrogateescape")


class Shot:
    """A square picture of a drawing with the frame of `blank`."""

    def __init__(self, drawing: Drawing | bytes) -> None:
        data = drawing if isinstance(drawing, bytes) else saved(drawing)
        png = picture(data, "png", size=SIDE, margin=0.05)
        image = Image.open(io.BytesIO(png)).convert("RGB")
        assert image.size == (SIDE, SIDE)
        self.pixels: NDArray[np.int_] = np.asarray(image).astype(int)

    def _place(self, x: float, y: float) -> tuple[int, int]:
        """Return row and column of a point of the drawing."""
        scale = SIDE / 11
        return round(SIDE - (y + 0.5) * scale), round((x + 0.5) * scale)

    def colour(self, x: float, y: float) -> tuple[int, int, int]:
        """Return the colour at a point of the drawing."""
        row, column = self._place(x, y)
        red, green, blue = self.pixels[row, column]
        return int(red), int(green), int(blue)

    def ink(self, x0: float, y0: float, x1: float, y1: float) -> float:
        """Return how much of a rectangle is not white, 0 to 1."""
        bottom, left = self._place(x0, y0)
        top, right = self._place(x1, y1)
        part = self.pixels[top:bottom, left:right]
        return float((part.min(axis=2) < 200).mean())
