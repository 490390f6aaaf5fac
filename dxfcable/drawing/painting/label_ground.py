"""What labels stay clear of, and what each place of a label costs."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.items import Align, TextItem, VAlign
from dxfcable.drawing.painting.labels import text_box, text_corners
from dxfcable.drawing.painting.sketch import strokes

if TYPE_CHECKING:
    from collections.abc import Iterable

    from numpy.typing import NDArray

    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.free_place import OccupancyGrid
    from dxfcable.model import Point

# A place further down the list costs one; so a drafter's line is worth going down 40 places,
# a line of ours 1,000, another label any number.
_ON_DRAWN = 40.0
ON_STROKE = 1e3
ON_LABEL = 1e6
_GAP = 0.12  # kept clear about each label, in text heights
_TOUCH = 1e-6  # in text heights: touching is no crossing


@dataclass(frozen=True, slots=True, kw_only=True)
class Label:
    """A text with the places it may take, best first.

    `rotation`, `align` and `valign` follow from the object alone, never from the place taken,
    so that a label keeps its look where a drafter moves it.
    """

    id: str
    layer: str
    text: str
    places: tuple[Point, ...]
    rotation: float = 0.0
    align: Align = Align.CENTER
    valign: VAlign = VAlign.MIDDLE
    is_optional: bool = False


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Candidates:
    """The places of a label with the cost of each; `boxes` have a gap about them, `bare` none."""

    label: Label
    boxes: NDArray[np.float64]
    bare: NDArray[np.float64]
    costs: NDArray[np.float64]


class LabelGround:
    """What labels stay clear of: our linework, other labels, and the drafter's drawing.

    Parameters
    ----------
    height : float
        Text height [length].
    drawn : OccupancyGrid or None
        The drafter's drawing about the labels.
    """

    def __init__(self, height: float, drawn: OccupancyGrid | None = None) -> None:
        self.height = height
        self.drawn = drawn
        self._strokes = np.zeros((0, 4))
        self._labels = np.zeros((0, 4, 2))

    def add(self, items: Iterable[Item]) -> None:
        """Take the room of items."""
        items = tuple(items)
        self._strokes = np.vstack((self._strokes, strokes(items)))
        corners = [text_corners(item) for item in items if isinstance(item, TextItem)]
        if corners:
            self._labels = np.concatenate((self._labels, np.array(corners)))

    def candidates(self, label: Label, wording: str) -> Candidates:
        """Weigh the places of a label by all that does not move: order, linework, drawing.

        Parameters
        ----------
        label : Label
            What is to be placed.
        wording : str
            The text as it will be shown.

        Returns
        -------
        Candidates
        """
        boxes = self._candidates(label, wording, _GAP * self.height)
        costs = np.arange(len(boxes), dtype=np.float64)
        low, high = boxes.min(axis=(0, 1)), boxes.max(axis=(0, 1))
        others = _near(self._labels.min(axis=1), self._labels.max(axis=1), low, high)
        costs += ON_LABEL * self.overlaps(boxes, self._labels[others]).sum(axis=1)
        first, second = self._strokes[:, :2], self._strokes[:, 2:]
        lines = _near(np.minimum(first, second), np.maximum(first, second), low, high)
        costs += ON_STROKE * self.crossings(boxes, self._strokes[lines])
        if self.drawn is not None:
            flat = np.hstack((boxes.min(axis=1), boxes.max(axis=1)))
            costs += _ON_DRAWN * (self.drawn.taken(flat) > 0)
        bare = self._candidates(label, wording, 0.0)
        return Candidates(label=label, boxes=boxes, bare=bare, costs=costs)

    def _candidates(self, label: Label, wording: str, gap: float) -> NDArray[np.float64]:
        """Give the boxes of all places, (c, 4, 2), counter-clockwise."""
        left, bottom, right, top = text_box(wording, self.height, label.align, label.valign)
        left, bottom, right, top = left - gap, bottom - gap, right + gap, top + gap
        turn = np.radians(label.rotation)
        cos, sin = float(np.cos(turn)), float(np.sin(turn))
        box = np.array([(left, bottom), (right, bottom), (right, top), (left, top)])
        turned = box @ np.array([[cos, sin], [-sin, cos]])
        return np.asarray(np.array(label.places)[:, None, :] + turned[None, :, :])

    def overlaps(
        self, boxes: NDArray[np.float64], others: NDArray[np.float64]
    ) -> NDArray[np.bool_]:
        """Tell for each box which others it overlaps (separating axes of two rectangles)."""
        if not len(others):
            return np.zeros((len(boxes), 0), dtype=np.bool_)
        touch = _TOUCH * self.height
        apart = np.zeros((len(boxes), len(others)), dtype=bool)
        for side in (1, 3):
            axes = _unit(boxes[:, side] - boxes[:, 0])
            mine = np.einsum("ckx,cx->ck", boxes, axes)
            theirs = np.einsum("okx,cx->cok", others, axes)
            apart |= theirs.min(axis=2) >= mine.max(axis=1)[:, None] - touch
            apart |= theirs.max(axis=2) <= mine.min(axis=1)[:, None] + touch
            axes = _unit(others[:, side] - others[:, 0])
            mine2 = np.einsum("ckx,ox->cok", boxes, axes)
            theirs2 = np.einsum("okx,ox->ok", others, axes)
            apart |= mine2.min(axis=2) >= theirs2.max(axis=1)[None, :] - touch
            apart |= mine2.max(axis=2) <= theirs2.min(axis=1)[None, :] + touch
        return ~apart

    def crossings(
        self, boxes: NDArray[np.float64], lines: NDArray[np.float64]
    ) -> NDArray[np.float64]:
        """Count for each box the lines through it (lines clipped in the box's own frame)."""
        if not len(lines):
            return np.zeros(len(boxes))
        touch = _TOUCH * self.height
        enter = np.zeros((len(boxes), len(lines)))
        leave = np.ones_like(enter)
        for side in (1, 3):
            edge = boxes[:, side] - boxes[:, 0]
            extent = np.hypot(edge[:, 0], edge[:, 1])[:, None]
            axes = _unit(edge)
            origin = np.einsum("cx,cx->c", boxes[:, 0], axes)[:, None]
            start = axes @ lines[:, :2].T - origin
            run = axes @ lines[:, 2:].T - origin - start
            is_flat = np.abs(run) < touch
            safe = np.where(is_flat, 1.0, run)
            near, far = (touch - start) / safe, (extent - touch - start) / safe
            is_between = (start > touch) & (start < extent - touch)
            near, far = np.minimum(near, far), np.maximum(near, far)
            enter = np.maximum(enter, np.where(is_flat, np.where(is_between, 0.0, 2.0), near))
            leave = np.minimum(leave, np.where(is_flat, 1.0, far))
        return np.asarray((enter < leave).sum(axis=1), dtype=np.float64)


def _unit(vectors: NDArray[np.float64]) -> NDArray[np.float64]:
    return np.asarray(vectors / np.hypot(vectors[:, 0], vectors[:, 1])[:, None])


def _near(
    low: NDArray[np.float64],
    high: NDArray[np.float64],
    corner: NDArray[np.float64],
    opposite: NDArray[np.float64],
) -> NDArray[np.bool_]:
    """Tell which boxes reach into a rectangle."""
    return np.asarray(((low < opposite) & (high > corner)).all(axis=1))
