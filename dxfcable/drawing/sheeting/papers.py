"""Papers of the sheets: true sizes, margins, text heights and pen widths that go with them.

Sizes of A0 to A4 are those of ISO 216, of ANSI A to E and ARCH A to E1 the usual ones in inches;
margins follow ISO 5457 (20 mm for filing, else 10 mm) and half an inch (common practice). Pen
widths are the groups of ISO 128, text heights those of ISO 3098, or 3/32 in and up.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.errors import DxfcableError

if TYPE_CHECKING:
    from dxfcable.drawing.painting.sketch import Bounds
    from dxfcable.settings import Show

INCH = 25.4
_ISO = {
    "A0": (1189.0, 841.0),
    "A1": (841.0, 594.0),
    "A2": (594.0, 420.0),
    "A3": (420.0, 297.0),
    "A4": (297.0, 210.0),
}
_INCHES = {
    "ANSI-A": (11.0, 8.5),
    "ANSI-B": (17.0, 11.0),
    "ANSI-C": (22.0, 17.0),
    "ANSI-D": (34.0, 22.0),
    "ANSI-E": (44.0, 34.0),
    "ARCH-A": (12.0, 9.0),
    "ARCH-B": (18.0, 12.0),
    "ARCH-C": (24.0, 18.0),
    "ARCH-D": (36.0, 24.0),
    "ARCH-E": (48.0, 36.0),
    "ARCH-E1": (42.0, 30.0),
}
SIZES = (*_ISO, *_INCHES)
_HEIGHTS = (1.8, 2.5, 3.5, 5.0, 7.0, 10.0)  # ISO 3098 [mm]
_LEAST_INCH = 3 / 32 * INCH
_LARGE = 700.0  # width from which the pens are those of A1 and A0 [mm]
_COLUMN_FROM = 500.0  # width from which the title block has a column of its own [mm]
TITLE_WIDTH = 180.0  # of a title block: the most that ISO 7200 allows [mm]


@dataclass(frozen=True, slots=True, kw_only=True)
class Pens:
    """A line group [mm]: thin, of letters and symbols, thick, extra thick."""

    thin: float
    medium: float
    thick: float
    extra: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Paper:
    """A sheet of paper, lying.

    Attributes
    ----------
    name : str
        As the settings name it.
    width, height : float
        Trimmed size [mm].
    is_inch : bool
        Whether its DXF layout is in inches.
    text : float
        Height of usual texts [mm].
    """

    name: str
    width: float
    height: float
    is_inch: bool
    text: float

    @property
    def small(self) -> float:
        """Height of the names of fields [mm]; 3/32 in is the least in inches."""
        if self.is_inch:
            return min(self.text, _LEAST_INCH)
        smaller = [h for h in _HEIGHTS if h < self.text - 1e-9]
        return smaller[-1] if smaller else self.text

    @property
    def large(self) -> float:
        """Height of the titles of views [mm]."""
        if self.is_inch:
            return 4 / 3 * self.text
        return next((h for h in _HEIGHTS if h > self.text + 1e-9), 1.4 * self.text)

    @property
    def unit(self) -> float:
        """Millimetres in a unit of the layout."""
        return INCH if self.is_inch else 1.0

    @property
    def pens(self) -> Pens:
        """Line group: 0.35/0.5/0.7 for A1 and larger, else 0.25/0.35/0.5, fine lines thinner."""
        if self.width >= _LARGE:
            return Pens(thin=0.25, medium=0.35, thick=0.7, extra=1.0)
        return Pens(thin=0.18, medium=0.25, thick=0.5, extra=0.7)

    @property
    def frame(self) -> Bounds:
        """Rectangle of the border [mm from the lower left corner of the paper]."""
        left, other = (INCH, 0.5 * INCH) if self.is_inch else (20.0, 10.0)
        return left, other, self.width - other, self.height - other

    @property
    def has_column(self) -> bool:
        """Whether the title block stands in a column on the right, else in a strip below."""
        return self.width >= _COLUMN_FROM

    @property
    def gap(self) -> float:
        """Room between the blocks of a sheet [mm]."""
        return 3.0 * self.text


def paper(name: str, show: Show) -> Paper:
    """Give a paper by its name.

    Parameters
    ----------
    name : str
        A0 to A4, ANSI-A to ANSI-E, ARCH-A to ARCH-E1, in any case.
    show : Show
        The office's text heights.

    Returns
    -------
    Paper

    Raises
    ------
    DxfcableError
        With code `usage`, for another name.
    """
    key = name.strip().upper()
    if key in _ISO:
        width, height = _ISO[key]
        return Paper(name=key, width=width, height=height, is_inch=False, text=show.text_mm)
    if key in _INCHES:
        width, height = (side * INCH for side in _INCHES[key])
        text = show.text_in * INCH
        return Paper(name=key, width=width, height=height, is_inch=True, text=text)
    message = f'"{name}" is no size of paper'
    raise DxfcableError(message, code="usage", remedy=f"Give one of {', '.join(SIZES)}.")
