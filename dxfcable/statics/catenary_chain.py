"""Equilibrium of chains of elastic pieces between two supports, many load states at once.

Signs, order and units: see the package's docstring. A chain of n pieces has two unknowns, the
pull H and the vertical force V at its left end, since the forces of all pieces follow from
them. What the pieces span together must be what the supports are apart.

The gap is the gradient of the chain's complementary energy less H times the distance across
and V times the distance up. That function is convex, so Newton with a search along its step
converges from any start wherever a shape exists: no luck is needed. The search watches only
the slope along the step. Arrays run over states and pieces in blocks that fit the processor's
cache, so the cost is linear in both.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeAlias

import numpy as np

from dxfcable.errors import ConvergenceError
from dxfcable.statics.catenary_start import start
from dxfcable.statics.catenary_sums import blocks, row_sums

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.statics.beam import Floats

    Indices: TypeAlias = NDArray[np.intp]

_ITERATIONS = 200
_CLOSED = 1e-12  # of the span: what the closure must reach where rounding allows
_OVERSHOOT = 0.25  # of the first slope along a step; more is searched back
_SHRINK = 0.9  # of the pull that one step may take away
_LONGER = 0.5  # of a step's relative growth of the pull that makes the step longer
_EPSILON = float(np.finfo(np.float64).eps)


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Chain:
    """Chains to be put in equilibrium, all of the same number of pieces.

    Attributes
    ----------
    lengths, weights : (s, n) array
        Unstressed length [length] and weight [force] of each piece in each state.
    loads : (s, n-1) array
        Between the pieces, down positive [force].
    offsets : (s, n) array
        Vertical force at the left of each piece, less that at the left end of the chain [force].
    across, up : (s,) array
        From the left support to the right one [length]; across > 0.
    soft : float
        1 / EA [1/force].
    heat : (s,) array
        Thermal factor on the geometric length.
    """

    lengths: Floats
    weights: Floats
    loads: Floats
    offsets: Floats
    across: Floats
    up: Floats
    soft: float
    heat: Floats

    @property
    def state_count(self) -> int:
        """Number of states."""
        return int(self.across.size)

    def take(self, states: Indices) -> Chain:
        """Return the chain in some of its states only."""
        return Chain(
            lengths=self.lengths[states],
            weights=self.weights[states],
            loads=self.loads[states],
            offsets=self.offsets[states],
            across=self.across[states],
            up=self.up[states],
            soft=self.soft,
            heat=self.heat[states],
        )


def chain_of(
    lengths: Floats,
    weights: Floats,
    loads: Floats,
    apart: tuple[Floats, Floats],
    *,
    soft: float,
    heat: Floats,
) -> Chain:
    """Make a chain; arrays as in `Chain`, `apart` is across and up."""
    offsets = np.zeros_like(weights)
    inner = offsets[:, 1:]
    np.add(weights[:, :-1], loads, out=inner)
    np.cumsum(inner, axis=1, out=inner)
    return Chain(
        lengths=lengths,
        weights=weights,
        loads=loads,
        offsets=offsets,
        across=apart[0],
        up=apart[1],
        soft=soft,
        heat=heat,
    )


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Balance:
    """Chains in equilibrium, one value or row a state.

    Attributes
    ----------
    pulls, verticals : (s,) array
        H and V at the left end, rising to the right positive [force].
    derivatives : (s, 3) array
        Of across by H, across by V (which is up by H), up by V [length/force].
    residuals : (s,) array
        Distance by which the pieces miss the right support [length].
    iterations : (s,) array of int
        Evaluations of the chain after the first.
    """

    pulls: Floats
    verticals: Floats
    derivatives: Floats
    residuals: Floats
    iterations: Indices


def balance(chain: Chain) -> Balance:
    """Put every state of a chain in equilibrium.

    Parameters
    ----------
    chain : Chain
        In states that have an equilibrium (`catenary_start.faults` tells).

    Returns
    -------
    Balance
        Closed to rounding, or to 1e-12 of the span where rounding does not improve it.

    Raises
    ------
    ConvergenceError
        If a state does not close.

    Notes
    -----
    Newton on a convex function of two unknowns. It stops on the closure, never on the step:
    at the rounding of the sums (estimated from the derivatives), or below 1e-12 of the span
    once a step no longer halves what is left.
    """
    search = _Search(chain)
    for _ in range(_ITERATIONS):
        if not search.active.size:
            return search.result()
        search.evaluate()
    left = search.active
    worst = int(left[np.argmax(search.residuals[left] / chain.across[left])])
    message = (
        f"{left.size} of {chain.state_count} load states did not reach equilibrium in "
        f"{_ITERATIONS} steps: state {worst + 1} misses its support by "
        f"{search.residuals[worst]:.3g}."
    )
    raise ConvergenceError(message, residual=float(search.residuals[worst]), iterations=_ITERATIONS)


class _Search:
    """The state of the iteration: a base point, a step from it and how far along it to try."""

    def __init__(self, chain: Chain) -> None:
        self.chain = chain
        count = chain.state_count
        self.active: Indices = np.arange(count)
        begin = start(chain)
        self.trial = np.stack([begin.pulls, begin.verticals], axis=1)
        self.base, self.step = self.trial.copy(), np.zeros((count, 2))
        self.along, self.slope = np.ones(count), np.full(count, -np.inf)
        self.residuals, self.derivatives = np.full(count, np.inf), np.zeros((count, 3))
        self.iterations: Indices = np.full(count, -1)
        self.spans = np.hypot(chain.across, chain.up)
        self.sizes, self.stretch = begin.sizes, chain.soft * begin.sizes
        self.means = begin.means
        self.forces = np.maximum(np.max(chain.offsets, axis=1), -np.min(chain.offsets, axis=1))

    def result(self) -> Balance:
        return Balance(
            pulls=self.base[:, 0],
            verticals=self.base[:, 1],
            derivatives=self.derivatives,
            residuals=self.residuals,
            iterations=self.iterations,
        )

    def evaluate(self) -> None:
        """Try every unfinished state once; take, shorten or finish its step."""
        states = self.active
        gaps, slopes = self._gaps(states)
        residuals = np.hypot(gaps[:, 0], gaps[:, 1])
        self.iterations[states] += 1
        along = np.sum(gaps * self.step[states], axis=1)
        before = self.residuals[states]
        taken = (along <= -_OVERSHOOT * self.slope[states]) | (residuals <= 0.5 * before)
        noise = self._noise(states, slopes)
        stalled = (residuals <= _CLOSED * self.spans[states]) & (residuals > 0.5 * before)
        closed = before <= _CLOSED * self.spans[states]  # the base was good; this is no better
        done = (residuals <= noise) | stalled | closed & (residuals > 0.5 * before)
        keep = (taken | done) & ~(done & (residuals > before))
        kept = states[keep]
        self.base[kept] = self.trial[kept]
        self.residuals[kept] = residuals[keep]
        self.derivatives[kept] = slopes[keep]
        self._shorten(states[~taken & ~done], along[~taken & ~done])
        self._advance(states[taken & ~done], gaps[taken & ~done], slopes[taken & ~done])
        self.active = states[~done]

    def _gaps(self, states: Indices) -> tuple[Floats, Floats]:
        """Return what the pieces span beyond the supports, and its three derivatives."""
        chain, trial = self.chain, self.trial[states]
        pulls, verticals = trial.T
        turn, rise, cross, steep = _integrals(chain, states, trial) * chain.heat[states]
        stretch = self.stretch[states]
        across = pulls * (turn + stretch) - chain.across[states]
        up = rise + stretch * (verticals + self.means[states]) - chain.up[states]
        level = pulls * pulls * steep
        flat = np.maximum(turn - level, 0.0)
        slopes = np.stack([flat + stretch, -pulls * cross, level + stretch], axis=1)
        return np.stack([across, up], axis=1), slopes

    def _noise(self, states: Indices, slopes: Floats) -> Floats:
        """Closure that the last digits of lengths and forces leave open [length]."""
        pulls, verticals = np.abs(self.trial[states]).T
        forces = np.maximum(verticals, self.forces[states])
        by_pull = (np.abs(slopes[:, 0]) + np.abs(slopes[:, 1])) * pulls
        by_vertical = (np.abs(slopes[:, 1]) + np.abs(slopes[:, 2])) * forces
        noise: Floats = 2.0 * _EPSILON * (self.sizes[states] + by_pull + by_vertical)
        return noise

    def _shorten(self, states: Indices, along: Floats) -> None:
        """Go back on steps that went too far, by the secant of the slope along them."""
        first = self.slope[states]
        share = np.clip(first / (first - along), 0.1, 0.6)
        self.along[states] *= share
        self.slope[states] = first
        self.trial[states] = self.base[states] + self.along[states, np.newaxis] * self.step[states]

    def _advance(self, states: Indices, gaps: Floats, slopes: Floats) -> None:
        """Start the next Newton step; the pull stays positive."""
        step = _newton(gaps, slopes)
        pulls = self.base[states, 0]
        gain = step[:, 0] / pulls
        # A taut chain closes by c / H^2: there Newton in 1 / H, the same step of another size,
        # errs a third as much. What only stretches closes by H itself.
        curved = gain * (1.0 - self.stretch[states] / slopes[:, 0])
        along = 1.0 / (1.0 - np.minimum(curved, _LONGER))
        self.along[states] = np.minimum(along, _SHRINK / np.maximum(-gain, 1e-9))
        self.step[states] = step
        self.slope[states] = np.sum(gaps * step, axis=1)
        self.trial[states] = self.base[states] + self.along[states, np.newaxis] * step


def _newton(gaps: Floats, slopes: Floats) -> Floats:
    """Step to where the linearized gaps vanish; a straight chain is kept from being singular."""
    first, cross, second = slopes.T
    determinant = first * second - cross * cross
    determinant = np.maximum(determinant, 4.0 * _EPSILON * first * second)
    across, up = gaps.T
    step = np.stack([cross * up - second * across, cross * across - first * up], axis=1)
    result: Floats = step / determinant[:, np.newaxis]
    return result


def _integrals(chain: Chain, states: Indices, trial: Floats) -> Floats:
    """Integrals of 1 / T, V / T, V / T^3 and 1 / T^3 over each chain, (4, states)."""
    whole = states.size == chain.state_count
    sums = np.zeros((4, states.size))
    for rows, columns in blocks(states.size, chain.lengths.shape[1]):
        chosen = rows if whole else states[rows]
        sums[:, rows] += row_sums(
            trial[rows, :1],
            trial[rows, 1:] + chain.offsets[chosen, columns],
            chain.lengths[chosen, columns],
            chain.weights[chosen, columns],
        )
    return sums
