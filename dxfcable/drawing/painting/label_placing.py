"""Places labels: each takes its best place left, then neighbours make room where two clash."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.painting.label_ground import ON_LABEL, ON_STROKE

if TYPE_CHECKING:
    from collections.abc import Iterable, Mapping

    from numpy.typing import NDArray

    from dxfcable.drawing.painting.label_ground import Candidates, Label, LabelGround
    from dxfcable.drawing.painting.sketch import Sketch
    from dxfcable.model import Point

_ROUNDS = 3
_DEPTH = 3  # how many neighbours in a chain may be moved for one label
_TRIED = 30  # places of a label that are tried when neighbours must move
_BUDGET = 120  # moves looked at in all: keeps a hopeless crowd from taking long


def put_labels(
    labels: Iterable[Label],
    sketch: Sketch,
    ground: LabelGround,
    held_places: Mapping[str, Point] | None = None,
) -> None:
    """Place labels and add their texts to a sketch.

    Parameters
    ----------
    labels : iterable of Label
        In the order in which they take their places.
    sketch : Sketch
        Gets the texts.
    ground : LabelGround
        What to stay clear of; gets the texts too.
    held_places : mapping of str to Point, optional
        Id to the place that a drafter gave a label: it stands there whatever it covers.
    """
    labels, held = tuple(labels), held_places or {}
    for label in labels:
        if label.id in held:
            _write(label, held[label.id], sketch, ground)
    free = [label for label in labels if label.id not in held]
    crowd = _Crowd(ground, free, sketch)
    crowd.settle()
    for label, index in zip(free, crowd.chosen, strict=True):
        if index is not None:
            _write(label, label.places[index], sketch, ground)


def _write(label: Label, place: Point, sketch: Sketch, ground: LabelGround) -> None:
    item = sketch.text(
        label.id,
        label.layer,
        label.text,
        place,
        ground.height,
        align=label.align,
        valign=label.valign,
        rotation=label.rotation,
    )
    ground.add([item])


class _Crowd:
    """Labels that may still move; `chosen` is the place of each, None while it has none."""

    def __init__(self, ground: LabelGround, labels: list[Label], sketch: Sketch) -> None:
        self.ground = ground
        self.all: list[Candidates] = [
            ground.candidates(label, sketch.wording(label.id, label.text)) for label in labels
        ]
        self.chosen: list[int | None] = [None] * len(labels)
        self.budget = _BUDGET
        self._boxes = np.full((len(labels), 4, 2), np.nan)

    def settle(self) -> None:
        """Give every label a place."""
        for index, candidates in enumerate(self.all):
            costs = candidates.costs + ON_LABEL * self._clashes(index).sum(axis=1)
            best = int(np.argmin(costs))
            if not candidates.label.is_optional or costs[best] < ON_STROKE:
                self._put(index, best)
        for _ in range(_ROUNDS):
            clashing = self._clashing()
            for index in clashing:
                self._make_room(index, _DEPTH, frozenset({index}))
            if not clashing:
                return

    def _put(self, index: int, place: int | None) -> None:
        self.chosen[index] = place
        self._boxes[index] = np.nan if place is None else self.all[index].bare[place]

    def _clashes(self, index: int) -> NDArray[np.bool_]:
        """Tell for each place of a label which labels stand there, (places, labels)."""
        boxes = self.all[index].boxes
        low, high = boxes.min(axis=(0, 1)), boxes.max(axis=(0, 1))
        bottom, top = self._boxes.min(axis=1), self._boxes.max(axis=1)
        # Labels without a place have no numbers here, and compare as not near.
        near = ((bottom < high) & (top > low)).all(axis=1)
        near[index] = False
        found = np.zeros((len(boxes), len(self.all)), dtype=np.bool_)
        found[:, near] = self.ground.overlaps(boxes, self._boxes[near])
        return found

    def _clashing(self) -> list[int]:
        """List the labels that stand on another one."""
        placed = [(i, place) for i, place in enumerate(self.chosen) if place is not None]
        if not placed:
            return []
        boxes = np.array([self.all[i].boxes[place] for i, place in placed])
        bare = np.array([self.all[i].bare[place] for i, place in placed])
        # Each box overlaps its own, hence more than one.
        counts = self.ground.overlaps(boxes, bare).sum(axis=1)
        return [
            i
            for (i, place), count in zip(placed, counts, strict=True)
            if count > 1 or self.all[i].costs[place] >= ON_LABEL
        ]

    def _make_room(self, index: int, depth: int, moving: frozenset[int]) -> bool:
        """Move a label to a clear place, or to one whose only neighbour can move away."""
        candidates, before = self.all[index], self.chosen[index]
        clashes = self._clashes(index)
        counts = clashes.sum(axis=1)
        order = np.argsort(candidates.costs + 2.0 * ON_STROKE * (counts > 0), kind="stable")
        for place in order[:_TRIED]:
            if candidates.costs[place] >= ON_LABEL or counts[place] > 1:
                continue
            if counts[place] == 0:
                self._put(index, int(place))
                return True
            neighbour = int(np.argmax(clashes[place]))
            if depth == 0 or neighbour in moving or self.budget <= 0:
                continue
            self.budget -= 1
            self._put(index, int(place))
            if self._make_room(neighbour, depth - 1, moving | {neighbour}):
                return True
        self._put(index, before)
        return False
