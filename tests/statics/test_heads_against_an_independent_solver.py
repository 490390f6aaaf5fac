"""The same heads from textbook equations, put into scipy's root finder one state at a time."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np
import pytest
from scipy.optimize import root

from tests.statics.heads_cases import random_layout, random_states

if TYPE_CHECKING:
    from dxfcable.statics.heads import HeadsResponse
    from dxfcable.statics.heads_layout import CableChain, Head
    from tests.statics.heads_cases import Floats, Formed


def spanned(
    cable: CableChain, loads: Floats, factor: float, heat: float, pull: float, vertical: float
) -> tuple[Floats, float]:
    """Across and up of a chain as textbooks write it, and the vertical force at its right end."""
    soft = 0.0 if cable.ea is None else 1.0 / cable.ea
    across = up = 0.0
    for length, load in zip(np.asarray(cable.unstressed_lengths), [*loads, 0.0], strict=True):
        weight = cable.weight * factor * length
        after = vertical + weight
        before_t, after_t = math.hypot(pull, vertical), math.hypot(pull, after)
        if weight:
            turn = math.asinh(after / pull) - math.asinh(vertical / pull)
            across += pull * length * (heat * turn / weight + soft)
            up += heat * length * (after_t - before_t) / weight
        else:
            across += pull * length * (heat / before_t + soft)
            up += heat * length * vertical / before_t
        up += soft * length * (vertical + after) / 2.0
        vertical = after + load
    return np.array([across, up]), vertical


class Plain:
    """One state: H and V of each cable, place and mast force of each head are unknown."""

    def __init__(self, layout: Formed, loads: list[Floats], state: int) -> None:
        self.layout, self.state = layout, state
        self.loads = [force[state] for force in loads]
        self.length = layout.supports[-1][0]
        self.force = sum(float(np.sum(np.abs(force))) for force in self.loads)

    def start(self, formed: HeadsResponse) -> Floats:
        """The shape as formed, which the root finder has to leave by itself."""
        cables = [(c.horizontals[0], c.verticals_left[0, 0]) for c in formed.cables]
        heads = [
            (head.at[0] / self.length, head.at[1] / self.length, mast / self.force)
            for head, mast in zip(self.layout.heads, formed.masts[0], strict=True)
        ]
        return np.array([*(np.ravel(cables) / self.force), *np.ravel(heads)])

    def heads(self, unknowns: Floats) -> Floats:
        return unknowns[2 * len(self.layout.cables) :].reshape(-1, 3)

    def __call__(self, unknowns: Floats) -> Floats:
        layout, heads = self.layout, self.heads(unknowns)
        places = np.array(layout.supports)
        forces = np.zeros_like(places)
        for head, row in zip(layout.heads, heads, strict=True):
            places[head.support] = row[:2] * self.length
        gaps: list[float] = []
        pairs = zip(layout.cables, self.loads, strict=True)
        for (cable, loads), (pull, vertical) in zip(
            pairs, unknowns[: 2 * len(layout.cables)].reshape(-1, 2) * self.force, strict=True
        ):
            factor = float(np.asarray(cable.weight_factors)[self.state])
            heat = 1.0 + cable.alpha * float(np.asarray(cable.delta_t)[self.state])
            reach, tail = spanned(cable, loads, factor, heat, abs(pull), vertical)
            gaps += list((reach - (places[cable.right] - places[cable.left])) / self.length)
            forces[cable.left] += abs(pull), vertical
            forces[cable.right] -= abs(pull), tail
        for k, (head, row) in enumerate(zip(layout.heads, heads, strict=True)):
            gaps += self._head(head, places[head.support], forces[head.support], row[2], k)
        return np.array(gaps)

    def _head(self, head: Head, at: Floats, pull: Floats, mast: float, k: int) -> list[float]:
        """Two equations of equilibrium, and the length of the mast under its force."""
        force = mast * self.force
        along = np.array(head.foot) - at
        size = math.hypot(*along)
        total = pull + force * along / size + [0.0, -self.layout.head_loads[k]]
        for stay in head.stays:
            line = np.array(stay.foot) - at
            length = math.hypot(*line)
            tension = max(0.0, stay.ea * (length / stay.unstressed_length - 1.0))
            total = total + tension * line / length
        wanted = math.dist(head.at, head.foot)
        if head.mast_ea is not None and head.mast_length is not None:
            wanted = head.mast_length * (1.0 + force / head.mast_ea)
        return [*(total / self.force), (size - wanted) / self.length]


@pytest.mark.parametrize("seed", range(40))
def test_random_layouts_agree_with_the_plain_equations(seed: int) -> None:
    layout, loads = random_states(random_layout(seed), seed, 3)
    found, formed = layout.under(loads), random_layout(seed).under()
    assert found.faults == ("",) * 3
    for state in range(3):
        plain = Plain(layout, loads, state)
        solution = root(plain, plain.start(formed), method="hybr", tol=1e-13)
        assert np.max(np.abs(plain(solution.x))) < 1e-11, "the root finder did not converge"
        heads = plain.heads(solution.x)
        where = found.supports[state, [head.support for head in layout.heads]]
        # lengths against the whole layout, forces against all loads
        assert heads[:, :2] * plain.length == pytest.approx(where, abs=1e-8 * plain.length)
        assert heads[:, 2] * plain.force == pytest.approx(found.masts[state], rel=1e-8)
        pulls = np.abs(solution.x[: 2 * len(layout.cables) : 2]) * plain.force
        ours = [cable.horizontals[state] for cable in found.cables]
        assert pulls == pytest.approx(ours, rel=1e-8)
