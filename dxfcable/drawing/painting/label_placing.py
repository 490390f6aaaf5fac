"""Places labels: each takes its best place left, then neighbours make room where two clash."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting import turned_boxes
from dxfcable.drawing.painting.label_ground import FAR_OFF, GAP, ON_LABEL, ON_STROKE
from dxfcable.drawing.painting.leaders import draw_leaders
from dxfcable.drawing.painting.sketch import shown

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from numpy.typing import NDArray

    from dxfcable.drawing.items import TextItem
    from dxfcable.drawing.painting.drawn_ground import DrawnGround
    from dxfcable.drawing.painting.label_ground import Candidates, Label, LabelGround
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Point

    Floats = NDArray[np.float64]

_ROUNDS = 3
_DEPTH = 3  # how many neighbours in a chain may be moved for one label
_TOGETHER = 2  # neighbours that are moved for one place
_TRIED = 30  # places of a label that are tried when neighbours must move
_FEW = 12
_BUDGET = 120  # moves looked at in all: keeps a hopeless crowd from taking long


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Group:
    """Labels of one view, in the order in which they take their places.

    `sketch` gets their texts; `drawn` is the drafter's drawing about them, if any.
    """

    labels: tuple[Label, ...]
    sketch: Sketch
    drawn: DrawnGround | None = None


def put_labels(
    groups: Sequence[Group],
    ground: LabelGround,
    held_places: Mapping[str, Point] | None = None,
) -> None:
    """Place labels and add their texts to sketches, with leaders where they stand off.

    Parameters
    ----------
    groups : sequence of Group
        Views, each with its labels; the labels of all make room for each other.
    ground : LabelGround
        What to stay clear of; gets the texts too.
    held_places : mapping of str to Point, optional
        Id to the place that a drafter gave a label: it stands there whatever it covers.
    """
    held = held_places or {}
    written = {
        label.id: _write(label, held[label.id], group.sketch, ground)
        for group in groups
        for label in group.labels
        if label.id in held
    }
    ground.add(written.values())
    crowd = _Crowd(ground, groups, held)
    crowd.settle()
    placed = {
        candidates.label.id: _write(
            candidates.label, candidates.label.places[index], sketch, ground
        )
        for candidates, sketch, index in zip(crowd.all, crowd.sketches, crowd.chosen, strict=True)
        if index is not None
    }
    ground.add(placed.values())
    written |= placed
    labels = [label for group in groups for label in group.labels]
    ground.add_rooms((label, written[label.id]) for label in labels if label.id in written)
    for group in groups:
        # In the labels' own order, so that a label held where it stands has the same leader.
        pairs = [(label, written[label.id]) for label in group.labels if label.id in written]
        draw_leaders(pairs, group.sketch, ground, group.drawn)


def _write(label: Label, place: Point, sketch: Sketch, ground: LabelGround) -> TextItem:
    return sketch.text(
        label.id,
        label.layer,
        label.text,
        place,
        ground.height,
        align=label.align,
        valign=label.valign,
        rotation=label.rotation,
    )


class _Crowd:
    """Labels that may still move; `chosen` is the place of each, None while it has none."""

    def __init__(
        self, ground: LabelGround, groups: Sequence[Group], held: Mapping[str, Point]
    ) -> None:
        self.ground = ground
        self.all: list[Candidates] = []
        self.sketches: list[Sketch] = []
        for group in groups:
            free = [label for label in group.labels if label.id not in held]
            wordings = [shown(label.text) for label in free]
            self.all += ground.candidates(free, wordings, group.drawn)
            self.sketches += [group.sketch] * len(free)
        self.chosen: list[int | None] = [None] * len(self.all)
        self.budget = _BUDGET
        self._placed = np.full((len(self.all), 6), np.nan)
        self._low = np.full((len(self.all), 2), np.nan)
        self._high = np.full((len(self.all), 2), np.nan)

    def settle(self) -> None:
        """Give every label a place."""
        for index in range(len(self.all)):
            self._take_room(index)
        for _ in range(_ROUNDS):
            clashing = self._clashing()
            for index in clashing:
                self._make_room(index, _DEPTH, frozenset({index}), ON_LABEL)
            if not clashing:
                break
        self.budget = _BUDGET
        for index, place in enumerate(self.chosen):
            if place is not None and self.all[index].costs[place] >= FAR_OFF:
                self._make_room(index, _DEPTH, frozenset({index}), FAR_OFF)
        for index, place in enumerate(self.chosen):
            if place is None:
                self._take_room(index)

    def _take_room(self, index: int) -> None:
        """Give a label its best place; one that may be left out only a clear one."""
        candidates = self.all[index]
        order = np.argsort(candidates.costs, kind="stable")
        # The best few places mostly hold a clear one: the others need not be looked at then.
        for chosen in (order[:_FEW], order):
            costs = candidates.costs[chosen]
            costs = costs + ON_LABEL * self._clashes(index, chosen).sum(axis=1)
            at = int(np.argmin(costs))
            if costs[at] <= candidates.costs[order[min(_FEW, len(order)) - 1]]:
                break
        if not candidates.label.is_optional or costs[at] < ON_STROKE:
            self._put(index, int(chosen[at]))

    def _put(self, index: int, place: int | None) -> None:
        self.chosen[index] = place
        if place is None:
            self._placed[index] = self._low[index, 0] = np.nan
            return
        candidates = self.all[index]
        self._placed[index] = candidates.bare[place]
        self._low[index], self._high[index] = candidates.low[place], candidates.high[place]

    def _clashes(self, index: int, chosen: NDArray[np.intp] | None = None) -> NDArray[np.bool_]:
        """Tell for each place of a label, or some, which labels stand there, (places, labels)."""
        rows, (low, high) = self.all[index].rows, self.all[index].reach
        if chosen is not None:
            rows = rows[chosen]
        # Labels without a place have no numbers here, and compare as not near.
        near = np.asarray(((self._low < high) & (self._high > low)).all(axis=1))
        near[index] = False
        found = np.zeros((len(rows), len(self.all)), dtype=np.bool_)
        others = self._placed[near]
        if len(others):
            found[:, near] = turned_boxes.touching(
                rows[:, None, :], others[None, :, :], self.ground.touch
            )
        return found

    def _clashing(self) -> list[int]:
        """List the labels that stand on another one."""
        placed = [(i, place) for i, place in enumerate(self.chosen) if place is not None]
        if not placed:
            return []
        bare = np.array([self.all[i].bare[place] for i, place in placed])
        rows = turned_boxes.grown(bare, GAP * self.ground.height)
        # Each box overlaps its own, hence more than one.
        counts = turned_boxes.touching(rows[:, None, :], bare[None, :, :], self.ground.touch).sum(
            axis=1
        )
        return [
            i
            for (i, place), count in zip(placed, counts, strict=True)
            if count > 1 or self.all[i].costs[place] >= ON_LABEL
        ]

    def _make_room(self, index: int, depth: int, moving: frozenset[int], limit: float) -> bool:
        """Move a label to a place that costs less than a limit and is clear, or can be made so.

        A place can be made clear where its one or two neighbours can move away likewise.
        """
        candidates, before = self.all[index], self.chosen[index]
        if candidates.costs.min() >= limit:
            return False
        clashes = self._clashes(index)
        counts = clashes.sum(axis=1)
        order = np.argsort(candidates.costs + 2.0 * ON_STROKE * (counts > 0), kind="stable")
        order = order[candidates.costs[order] < limit]
        for place in order[:_TRIED]:
            if counts[place] > _TOGETHER:
                continue
            if counts[place] == 0:
                self._put(index, int(place))
                return True
            neighbours = np.flatnonzero(clashes[place]).tolist()
            if depth == 0 or self.budget <= 0 or not moving.isdisjoint(neighbours):
                continue
            self.budget -= 1
            state = self._state()
            self._put(index, int(place))
            now = moving | set(neighbours)
            if all(self._make_room(other, depth - 1, now, limit) for other in neighbours):
                return True
            self._restore(state)
        self._put(index, before)
        return False

    def _state(self) -> tuple[list[int | None], Floats, Floats, Floats]:
        return self.chosen.copy(), self._placed.copy(), self._low.copy(), self._high.copy()

    def _restore(self, state: tuple[list[int | None], Floats, Floats, Floats]) -> None:
        self.chosen, self._placed, self._low, self._high = state
