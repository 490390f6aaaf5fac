"""The search for where heads stand: down the potential energy, all load states at once.

Signs, order and units: see the package's docstring. The energy of cables and stays is convex in
the places of the heads; only masts, which push, and the circles that they keep heads on, are
not. Newton's step is therefore taken with the magnitudes of the stiffnesses, so that it always
leads down, and its length is searched: it may not run past the lowest point along it. What is
reached from the shape as formed is a stable equilibrium, or none is; no luck is needed.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.catenary_start import TOO_SHORT

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.statics.beam import Floats
    from dxfcable.statics.heads_system import Point, System

    Indices = NDArray[np.intp]

_ITERATIONS = 150
_CLOSED = 1e-12  # residual force over the forces at a head: rounding
_CLOSE = 1e-9  # the same where a step no longer halves it
_OVERSHOOT = 0.25  # of the first slope along a step; more is searched back
_TURN = 0.1  # of the mast length that one step may move a head
_FALLEN = 1.0  # the same from where it was formed
_BACK = 0.25  # of a step that led to where a cable has no shape
_SHORTEST = 1e-12  # of a step
_STRAINED = 60  # trials with a cable that is too short; one that bears loads needs few
_STIFF = 1e-10  # least stiffness over the forces by mast length, or over the greatest, that holds
_TRIES = 13  # doublings of 1e-4 of the mast length

PULLED_STRAIGHT = (
    "The heads would pull a cable without stretch all but straight, where its force is not "
    "determinate: state its EA."
)


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Found:
    """Where the heads came to stand; one row a state.

    Attributes
    ----------
    turned : (s, h, 2) array
        Arc and growth of each head [length]; not-a-number where there is a reason.
    masts : (s, h) array
        Axial forces [force].
    residuals : (s,) array
        Force left over at the worst head, over the forces there.
    iterations : (s,) array of int
        Evaluations after the first.
    reasons : tuple of str
        Why no equilibrium was found, "" where one was.
    """

    turned: Floats
    masts: Floats
    residuals: Floats
    iterations: Indices
    reasons: tuple[str, ...]


def settle(system: System) -> Found:
    """Find where the heads stand in every state.

    Parameters
    ----------
    system : System
        Formed, so that it starts near.

    Returns
    -------
    Found
        Equilibria are stable; a state without one says why.
    """
    search = _Search(system)
    for _ in range(_ITERATIONS):
        if not search.active.size:
            break
        search.evaluate()
    for state in search.active.tolist():
        search.reasons[state] = search.not_found(state, "comes to no rest")
    return search.result()


class _Search:
    """The state of the iteration: a base point, a step from it and how far along it to try."""

    def __init__(self, system: System) -> None:
        self.system = system
        count, self.heads = system.loads.shape
        size = 2 * self.heads
        self.radius = system.members.radius
        self.active: Indices = np.arange(count)
        self.trial, self.base, self.step = (np.zeros((count, size)) for _ in range(3))
        self.along, self.slope = np.ones(count), np.full(count, -np.inf)
        self.residuals, self.masts = np.full(count, np.inf), np.zeros((count, self.heads))
        self.iterations: Indices = np.full(count, -1)
        self.strained = np.zeros(count, dtype=np.intp)  # trials that a cable was too short for
        self.reasons = [""] * count
        self._draw_in()

    def result(self) -> Found:
        lost = np.array([bool(reason) for reason in self.reasons])
        for values in (self.base, self.masts, self.residuals):
            values[lost] = np.nan
        return Found(
            turned=self.base.reshape(-1, self.heads, 2),
            masts=self.masts,
            residuals=self.residuals,
            iterations=self.iterations,
            reasons=tuple(self.reasons),
        )

    def _draw_in(self) -> None:
        """Start with heads drawn towards cables that do not reach them and do not stretch."""
        members = self.system.members
        for doubling in range(_TRIES):
            moved = members.stand(self.trial.reshape(-1, self.heads, 2)).moved
            arc = 1e-4 * 2.0**doubling * self.radius
            found = False
            for span in self.system.spans:
                short = np.flatnonzero(span.is_short(moved))
                found = found or bool(short.size)
                across, up = span.chain.across[short], span.chain.up[short]
                for head, sign in ((span.left, 1.0), (span.right, -1.0)):
                    if head >= 0:
                        right, above = members.radial[head]
                        towards = np.sign(sign * (right * up - above * across))
                        self.trial[short, 2 * head] = towards * arc[head]
            if not found:
                return

    def evaluate(self) -> None:
        """Try every unfinished state once; take, shorten or finish its step."""
        states = self.active
        point = self.system.at(states, self.trial[states].reshape(-1, self.heads, 2))
        known = np.array([not reason for reason in point.reasons])
        self.iterations[states] += 1
        along = np.sum(point.slopes * self.step[states], axis=1)
        before = self.residuals[states]
        near = np.maximum(_CLOSE, 8.0 * point.noise)
        no_better = ~known | (point.residuals > 0.5 * before)
        done = (known & (point.residuals <= _CLOSED)) | ((before <= near) & no_better)
        taken = known & ~done & (along <= -_OVERSHOOT * self.slope[states])
        keep = taken | (done & known & (point.residuals <= before))
        kept = states[keep]
        self.base[kept] = self.trial[kept]
        self.residuals[kept] = point.residuals[keep]
        self.masts[kept] = point.masts[keep]
        for state in states[done][~self._holds(point, done)].tolist():
            why = "has an equilibrium that is not stable, or nothing holds it"
            self.reasons[state] = self.not_found(state, why)
        self._shorten(states, ~taken & ~done, along, point.reasons)
        self._advance(states[taken], point, taken)
        self._drop_fallen(states[taken])
        self.active = states[~done & np.array([not self.reasons[k] for k in states], dtype=bool)]

    def _holds(self, point: Point, done: NDArray[np.bool_]) -> NDArray[np.bool_]:
        """Whether the energy has a least value there, not a saddle and not a plain."""
        loose = np.repeat(_STIFF * point.forces[done] / self.radius, 2, axis=1)
        loose[:, 1::2][:, self.system.members.rigid] = 0.0  # no unknown
        curvatures = point.curvatures[done]
        stiffness = np.diagonal(curvatures, axis1=1, axis2=2)
        held: NDArray[np.bool_] = np.all(stiffness > loose, axis=1)
        root = np.sqrt(stiffness[held])
        scaled = curvatures[held] / root[:, :, np.newaxis] / root[:, np.newaxis, :]
        held[held] = np.linalg.eigvalsh(scaled)[:, 0] > _STIFF
        return held

    def _shorten(self, states: Indices, back: Floats, along: Floats, reasons: list[str]) -> None:
        """Go back on steps that went too far, by the secant of the slope along them."""
        for k in np.flatnonzero(back):
            state = int(states[k])
            if reasons[k]:
                share = _BACK
                self.strained[state] += reasons[k] == TOO_SHORT
            else:
                share = float(np.clip(self.slope[state] / (self.slope[state] - along[k]), 0.1, 0.6))
            self.along[state] *= share
            if not np.isfinite(self.residuals[state]):
                self.reasons[state] = reasons[k]  # not even where it starts
            elif self.strained[state] > _STRAINED:
                self.reasons[state] = PULLED_STRAIGHT
            elif self.along[state] < _SHORTEST:
                self.reasons[state] = reasons[k] or self.not_found(state, "comes to no rest")
            self.trial[state] = self.base[state] + self.along[state] * self.step[state]

    def _advance(self, states: Indices, point: Point, taken: Floats) -> None:
        """Start the next step down the energy, no longer than its curvature can be trusted."""
        slopes, curvatures = point.slopes[taken], point.curvatures[taken]
        diagonal = np.abs(np.diagonal(curvatures, axis1=1, axis2=2))
        least = np.repeat(point.forces[taken] / self.radius, 2, axis=1) * _STIFF
        root = np.sqrt(np.maximum(diagonal, np.maximum(least, np.finfo(np.float64).tiny)))
        scaled = curvatures / root[:, :, np.newaxis] / root[:, np.newaxis, :]
        values, ways = np.linalg.eigh(scaled)
        values = np.maximum(np.abs(values), 1e-14)
        parts = np.einsum("nji,nj->ni", ways, slopes / root) / values
        step = -np.einsum("nij,nj->ni", ways, parts) / root
        step = step.reshape(-1, self.heads, 2)
        step[:, self.system.members.rigid, 1] = 0.0
        share = np.max(np.abs(step) / self.radius[:, np.newaxis], axis=(1, 2))
        self.along[states] = np.minimum(1.0, _TURN / np.maximum(share, 1e-300))
        self.step[states] = step.reshape(-1, 2 * self.heads)
        self.slope[states] = np.sum(slopes * self.step[states], axis=1)
        self.trial[states] = self.base[states] + self.along[states, np.newaxis] * self.step[states]

    def _drop_fallen(self, states: Indices) -> None:
        turns = np.abs(self.base[states].reshape(-1, self.heads, 2)) / self.radius[:, np.newaxis]
        for state in states[np.any(turns > _FALLEN, axis=(1, 2))].tolist():
            self.reasons[state] = self.not_found(state, "would fall")

    def not_found(self, state: int, why: str) -> str:
        """Say which head finds no equilibrium, and which of its stays are slack."""
        base = self.base[state].reshape(1, -1, 2)
        members = self.system.members
        worst = int(np.argmax(np.abs(base[0, :, 0]) / self.radius))
        elongations = members.pulls(members.stand(base).moved).elongations
        idle = members.slack(elongations)[0][members.owner == worst]
        if not idle.size:
            stays = "it has no stay"
        elif np.all(idle):
            stays = "its stay is slack" if idle.size == 1 else "its stays are slack"
        else:
            stays = "its stays do not hold it"
        return f"The head at {self.system.names[worst]} {why}: {stays}."
