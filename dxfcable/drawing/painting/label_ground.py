"""What labels stay clear of, and what each place of a label costs."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.items import Align, TextItem, VAlign
from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.sketch import strokes

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from numpy.typing import NDArray

    from dxfcable.drawing.items import Item
    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.model import Point

    Floats = NDArray[np.float64]

# A place further down the list costs one, one far off more than any near one, so that neighbours
# make room first, and less than any line. To keep clear of a drafter's line is worth going down
# the whole list, of his texts and blocks more, of our own lines yet more; a label never covers
# another one where that can be helped at all.
FAR_OFF, _FURTHER = 260.0, 0.4
ON_LINE = 300.0
ON_BOX = 700.0
ON_STROKE = 2e3
ON_LABEL = 1e6
GAP = 0.15  # kept clear about each label, in text heights
TOUCH = 1e-6  # in text heights: touching is no crossing


@dataclass(frozen=True, slots=True, kw_only=True)
class Label:
    """A text with the places it may take, best first.

    `rotation`, `align` and `valign` follow from the object alone, never from the place taken,
    so that a label keeps its look where a drafter moves it. `target` is the object named, a
    line or twice the same point: a leader runs to it from a label that stands off by more than
    `leader_from` text heights; None where no leader is wanted. `room` is for what is drawn
    about the text and goes with it: how far that reaches beyond the text's box, before, below,
    behind and above it [length]. The last `far` places are far off the object.
    """

    id: str
    layer: str
    text: str
    places: tuple[Point, ...]
    rotation: float = 0.0
    align: Align = Align.CENTER
    valign: VAlign = VAlign.MIDDLE
    is_optional: bool = False
    target: tuple[Point, Point] | None = None
    leader_from: float = 1.25
    room: tuple[float, float, float, float] = (0.0, 0.0, 0.0, 0.0)
    far: int = 0


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Candidates:
    """The places of a label with the cost of each.

    `rows` have a gap about them, `bare` none; `low` and `high` are the corners of the upright
    boxes about the bare ones, `reach` those about all with their gaps.
    """

    label: Label
    rows: Floats
    bare: Floats
    costs: Floats
    low: Floats
    high: Floats
    reach: tuple[Floats, Floats]


class LabelGround:
    """What labels stay clear of beside the drafter's drawing: our linework, other labels.

    Parameters
    ----------
    height : float
        Text height [length].
    items : iterable of Item, optional
        What takes room from the beginning.
    """

    def __init__(self, height: float, items: Iterable[Item] = ()) -> None:
        self.height = height
        self.strokes: Floats = turned_boxes.NO_ROWS
        self.labels: Floats = turned_boxes.NO_ROWS
        self.add(items)

    @property
    def touch(self) -> float:
        """Overlap that is only touching [length]."""
        return TOUCH * self.height

    def add(self, items: Iterable[Item]) -> None:
        """Take the room of items."""
        items = tuple(items)
        self.strokes = np.concatenate((self.strokes, turned_boxes.of_lines(strokes(items))))
        texts = [item for item in items if isinstance(item, TextItem)]
        self.labels = np.concatenate((self.labels, turned_boxes.of_texts(texts)))

    def add_rooms(self, pairs: Iterable[tuple[Label, TextItem]]) -> None:
        """Take the room about texts that stand as their labels."""
        rows = [turned_boxes.of_rooms(label, item) for label, item in pairs if any(label.room)]
        self.labels = np.concatenate((self.labels, *rows))

    def candidates(
        self,
        labels: Sequence[Label],
        wordings: Sequence[str],
        drawn: DrawnGround | None = None,
    ) -> list[Candidates]:
        """Weigh the places of labels by all that does not move: order, linework, drawing.

        Parameters
        ----------
        labels : sequence of Label
            What is to be placed.
        wordings : sequence of str
            The texts as they will be shown.
        drawn : DrawnGround, optional
            The drafter's drawing about them.

        Returns
        -------
        list of Candidates
        """
        if not labels:
            return []
        bare = [
            turned_boxes.of_places(label, wording, self.height)
            for label, wording in zip(labels, wordings, strict=True)
        ]
        ends = np.cumsum([len(rows) for rows in bare])
        starts = ends - [len(rows) for rows in bare]
        together = np.concatenate(bare)
        bottom, top = turned_boxes.reaches(together)
        rows = turned_boxes.grown(together, GAP * self.height)
        low, high = turned_boxes.reaches(rows)
        low, high = np.minimum.reduceat(low, starts), np.maximum.reduceat(high, starts)
        costs = np.arange(ends[-1], dtype=np.float64) - np.repeat(starts, ends - starts)
        for label, end in zip(labels, ends, strict=True):
            costs[end - label.far : end] = FAR_OFF + _FURTHER * np.arange(label.far)
        for others, weight in ((self.strokes, ON_STROKE), (self.labels, ON_LABEL)):
            which, other = turned_boxes.pairs_near(low, high, *turned_boxes.reaches(others))
            costs += self._hits(rows, starts, ends, which, others[other], weight)
        if drawn is not None:
            which, other = drawn.near(low, high)
            none = ((np.nan, np.nan),) * 2
            named = np.array([label.target or none for label in labels])[which]
            ends_named = (named[:, 0], named[:, 1])
            weights = drawn.weights(other, ends_named, ON_LINE, ON_BOX)
            costs += self._hits(rows, starts, ends, which, drawn.rows[other], weights)
        return [
            Candidates(
                label=label,
                rows=rows[a:b],
                bare=bare[i],
                costs=costs[a:b],
                low=bottom[a:b],
                high=top[a:b],
                reach=(low[i], high[i]),
            )
            for i, (label, a, b) in enumerate(zip(labels, starts, ends, strict=True))
        ]

    def _hits(
        self,
        rows: Floats,
        starts: NDArray[np.intp],
        ends: NDArray[np.intp],
        which: NDArray[np.intp],
        others: Floats,
        weights: Floats | float,
    ) -> Floats:
        """Sum up for each place the weights of what lies near its label and under it."""
        counts = (ends - starts)[which]
        pair = np.repeat(np.arange(len(which)), counts)
        place = np.arange(len(pair)) - np.repeat(np.cumsum(counts) - counts, counts)
        place += np.repeat(starts[which], counts)
        # Most pairs are far apart: tell so by the distance of their middles first.
        size = np.abs(rows[:, 4]) + np.abs(rows[:, 5])
        size2 = np.abs(others[:, 4]) + np.abs(others[:, 5])
        reach = size[place] + size2[pair]
        apart = np.abs(rows[place, 0] - others[pair, 0]) >= reach
        apart |= np.abs(rows[place, 1] - others[pair, 1]) >= reach
        place, pair = place[~apart], pair[~apart]
        hit = turned_boxes.touching(rows[place], others[pair], self.touch)
        found = np.broadcast_to(weights, len(which))[pair] * hit
        return np.asarray(np.bincount(place, found, len(rows)), dtype=np.float64)
