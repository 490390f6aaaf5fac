"""The page under a drawing: the paper that a layout states, or one that fits what is drawn."""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.layouts.layout import Paperspace

if TYPE_CHECKING:
    from ezdxf.layouts.layout import Layout
    from ezdxf.math import BoundingBox2d

Placed = tuple[float, float, tuple[float, float], float]
"""Width and height [mm], the drawing's point at the lower left corner, mm per drawing unit."""

_SLIMMEST = 0.12  # shorter side of a page over the longer one


def paper_under(layout: Layout, drawn: BoundingBox2d) -> Placed | None:
    """Return the paper of a layout if the drawing lies on it."""
    paper = _paper(layout) if isinstance(layout, Paperspace) else None
    return paper if paper is not None and _is_on(drawn, paper) else None


def fit(drawn: BoundingBox2d, longer_side: float, margin: float) -> Placed:
    """Return a page that fits the drawing."""
    size = drawn.size
    longer = max(size.x, size.y) or 1.0
    around = margin * longer
    wide = max(size.x + 2 * around, _SLIMMEST * (longer + 2 * around))
    high = max(size.y + 2 * around, _SLIMMEST * (longer + 2 * around))
    scale = longer_side / max(wide, high)
    center = drawn.center
    corner = (center.x - wide / 2, center.y - high / 2)
    # The SVG library rounds pages to a tenth of a millimetre; so nothing is off by that.
    return round(wide * scale, 1), round(high * scale, 1), corner, scale


def _paper(layout: Paperspace) -> Placed | None:
    """Return the paper that a layout is plotted on, None where it states none."""
    dxf = layout.dxf_layout.dxf
    width, height = float(dxf.paper_width), float(dxf.paper_height)
    left, bottom = float(dxf.left_margin), float(dxf.bottom_margin)
    right, top = float(dxf.right_margin), float(dxf.top_margin)
    turned = {1: (top, left), 2: (right, top), 3: (bottom, right)}
    left, bottom = turned.get(dxf.plot_rotation, (left, bottom))
    if dxf.plot_rotation in (1, 3):
        width, height = height, width
    unit = 25.4 if dxf.plot_paper_units == 0 else 1.0
    top_of_scale = float(dxf.scale_numerator)
    scale = unit * top_of_scale / float(dxf.scale_denominator or 1.0)
    if not (10 <= width <= 10_000 and 10 <= height <= 10_000 and scale > 0):
        return None
    return round(width, 1), round(height, 1), (-left / scale, -bottom / scale), scale


def _is_on(drawn: BoundingBox2d, paper: Placed) -> bool:
    """Tell whether a drawing lies on the paper it says it does, by its middle and its size."""
    width, height, (left, bottom), scale = paper
    center, size = drawn.center, drawn.size
    x, y = (center.x - left) * scale, (center.y - bottom) * scale
    is_small = size.x * scale <= 1.1 * width and size.y * scale <= 1.1 * height
    return bool(is_small and 0 <= x <= width and 0 <= y <= height)
