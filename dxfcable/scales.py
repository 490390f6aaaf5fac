"""Plotting scales as drafters write them."""

from __future__ import annotations

import re

from dxfcable.units import Doubt, QuantityError, tidy

_RATIO = re.compile(r"(?:1 ?: ?)?(\d+(?:\.\d+)?)", re.ASCII)
_PAPER = re.compile(r'(?:(\d+)[ -])?(\d+)/(\d+) ?"|(\d+(?:\.\d+)?) ?"', re.ASCII)
_REAL = re.compile(r"(\d+(?:\.\d+)?) ?'(?: ?-? ?(\d+(?:\.\d+)?) ?\")?", re.ASCII)
_REMEDY = 'Write 1:100, 100 or 1/8"=1\'-0".'


def read_plot_scale(text: str) -> float:
    r"""Read a plotting scale.

    Parameters
    ----------
    text : str
        "1:100", "100", or paper inches against feet and inches as in `1/8"=1'-0"`.

    Returns
    -------
    float
        Length in the drawing over length on paper, > 0.

    Raises
    ------
    QuantityError
        With code `plot-scale-unread`.

    Examples
    --------
    >>> read_plot_scale("1/8\"=1'-0\"")
    96.0
    """
    plain = tidy(text)
    ratio = _RATIO.fullmatch(plain)
    if ratio and float(ratio[1]) > 0:
        return float(ratio[1])
    left, _, right = (part.strip() for part in plain.partition("="))
    paper, real = _PAPER.fullmatch(left), _REAL.fullmatch(right)
    if paper and real:
        inches = float(real[1]) * 12 + float(real[2] or 0)
        if paper[4]:
            top, bottom = float(paper[4]), 1.0
        else:
            bottom = float(paper[3])
            top = float(paper[1] or 0) * bottom + float(paper[2])
        if inches > 0 and top > 0 and bottom > 0:
            return inches * bottom / top
    message = f'"{text}" is no plotting scale'
    raise QuantityError(Doubt.PLOT_SCALE_UNREAD, message, _REMEDY)
