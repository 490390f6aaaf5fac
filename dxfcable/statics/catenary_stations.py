"""The elastic cable with weight whose load points stand on given stations, for given pulls.

Signs, order and units: see the package's docstring. Unknown are the unstressed length of each
piece and the vertical force at the left support, any number of pulls at once. First the cable
is taken as inextensible: then the rises of its pieces solve equations that are convex, with
derivatives of fixed signs, so that Newton converges from any start. From there Newton on the
elastic pieces needs a few steps. All is linear in the number of pieces, since each step is one
recurrence along the cable.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import ConvergenceError
from dxfcable.statics.catenary_piece import projections
from dxfcable.statics.catenary_width import sinh_over

if TYPE_CHECKING:
    from dxfcable.statics.beam import Floats, SimpleBeam

_ITERATIONS = 100
_CLOSED = 1e-12  # of the span: what must be reached where rounding allows
_NEAR = 1e-6  # of the loads: good enough to start the elastic steps from
_EPSILON = float(np.finfo(np.float64).eps)


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class StationForces:
    """Cables on their stations, a row for every pull.

    Attributes
    ----------
    verticals_left : (b, n+1) array
        Vertical component of the tension at the left end of each piece, rising positive [force].
    unstressed_lengths : (b, n+1) array
        Of each piece [length].
    max_tensions : (b,) array
        Largest tension anywhere [force].
    iterations : int
        Elastic Newton steps, the slowest pull's.
    """

    verticals_left: Floats
    unstressed_lengths: Floats
    max_tensions: Floats
    iterations: int


def forces_on_stations(
    beam: SimpleBeam, rise: float, pulls: Floats, *, weight: float, soft: float
) -> StationForces:
    """Find the cables that have given pulls and their load points on their stations.

    Parameters
    ----------
    beam : SimpleBeam
        Stations and loads.
    rise : float
        Of the right support above the left one [length].
    pulls : (b,) array
        Horizontal components [force], > 0.
    weight : float
        Per unstressed length [force/length], >= 0.
    soft : float
        1 / EA [1/force].

    Returns
    -------
    StationForces
        A row for every pull.

    Raises
    ------
    ConvergenceError
        If the stations or the right support are not met.
    """
    pull = pulls[:, np.newaxis]
    verticals, lengths = _inextensible(beam, rise, pull, weight)
    middle = np.hypot(pull, verticals + 0.5 * weight * lengths)
    lengths = lengths / (1.0 + soft * middle)
    first, lengths, iterations = _elastic(beam, rise, pull, weight, soft, verticals[:, :1], lengths)
    left = first + _offsets(beam, weight, lengths)
    right = left + weight * lengths
    greatest = np.maximum(np.max(np.abs(left), axis=1), np.max(np.abs(right), axis=1))
    return StationForces(
        verticals_left=left,
        unstressed_lengths=lengths,
        max_tensions=np.hypot(pulls, greatest),
        iterations=iterations,
    )


def _offsets(beam: SimpleBeam, weight: float, lengths: Floats) -> Floats:
    """Vertical force at the left of each piece less that at the left support."""
    offsets = np.zeros_like(lengths)
    np.cumsum(weight * lengths[:, :-1] + beam.loads, axis=1, out=offsets[:, 1:])
    return offsets


def _inextensible(
    beam: SimpleBeam, rise: float, pull: Floats, weight: float
) -> tuple[Floats, Floats]:
    """Vertical forces at the left ends and lengths of the pieces of a cable without stretch.

    The load at a point is the vertical force right of it less that left of it. Seen from the
    rise e of a piece of width d, with b = w d / H and S = e / (d sinh(b/2) / (b/2)), these are
    H (S cosh(b/2) -+ sqrt(1 + S^2) sinh(b/2)): one concave, the other convex in e.
    """
    widths = beam.spacings
    half = 0.5 * weight * widths / pull
    stretch, swing, growth = widths * sinh_over(half), np.sinh(half), np.cosh(half)
    rises = _first_rises(beam, rise, pull, weight)
    enough = _NEAR * (np.sum(np.abs(beam.loads)) + weight * float(np.hypot(beam.span, rise)))
    for _ in range(_ITERATIONS):
        slopes = rises / stretch
        rays = np.hypot(1.0, slopes)
        left = pull * (slopes * growth - rays * swing)
        right = left + 2.0 * pull * rays * swing
        unbalanced = left[:, 1:] - right[:, :-1] - beam.loads
        if np.max(np.abs(unbalanced), initial=0.0) <= enough:
            return left, stretch * rays
        lean = slopes / rays * swing
        stiff_left = pull * (growth - lean) / stretch
        stiff_right = pull * (growth + lean) / stretch
        ratios = stiff_right[:, :-1] / stiff_left[:, 1:]
        products, sums = _recurrence(ratios, -unbalanced / stiff_left[:, 1:])
        closing = rise - np.sum(rises, axis=1, keepdims=True)
        total = np.sum(products, axis=1, keepdims=True)
        start = (closing - np.sum(products * sums, axis=1, keepdims=True)) / total
        rises = rises + products * (start + sums)
    worst = float(np.max(np.abs(unbalanced)))
    message = f"The cable on its stations was not found: a load point is out by {worst:.3g}."
    raise ConvergenceError(message, residual=worst, iterations=_ITERATIONS)


def _first_rises(beam: SimpleBeam, rise: float, pull: Floats, weight: float) -> Floats:
    """Rises of the pieces if the cable weighed what its closing string weighs."""
    slope = rise / beam.span
    even = weight * float(np.hypot(1.0, slope))
    ways = beam.x - beam.x[0]
    middles = 0.5 * (ways[1:] + ways[:-1])
    shears = beam.shears + even * (0.5 * beam.span - middles)
    rises: Floats = beam.spacings * (slope - shears / pull)
    return rises


def _recurrence(ratios: Floats, terms: Floats) -> tuple[Floats, Floats]:
    """Solve z[k+1] = ratio[k] z[k] + term[k] as z[k] = product[k] (z[0] + sum[k])."""
    products = np.ones((ratios.shape[0], ratios.shape[1] + 1))
    np.cumprod(ratios, axis=1, out=products[:, 1:])
    sums = np.zeros_like(products)
    np.cumsum(terms / products[:, 1:], axis=1, out=sums[:, 1:])
    return products, sums


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Guess:
    """How far a guess is off, a row for every pull, and the Newton step from it."""

    residual: Floats  # [length]
    rounding: Floats  # what the last digits leave open [length]
    first: Floats  # step of the left vertical force
    lengths: Floats  # step of the unstressed lengths


def _elastic(
    beam: SimpleBeam,
    rise: float,
    pull: Floats,
    weight: float,
    soft: float,
    first: Floats,
    lengths: Floats,
) -> tuple[Floats, Floats, int]:
    """Left vertical force and unstressed lengths that meet all stations and the right support.

    A step that does not bring the stations nearer is shortened.
    """
    span = float(np.hypot(beam.span, rise))
    base_first, base_lengths = first, lengths
    step_first, step_lengths = np.zeros_like(first), np.zeros_like(lengths)
    best, share = np.full_like(pull, np.inf), np.zeros_like(pull)
    for iteration in range(_ITERATIONS):
        guess = _guess(beam, rise, pull, weight, soft, first, lengths)
        residual = guess.residual
        worse = residual > (1.0 - 0.2 * share) * best
        stalled = (residual <= _CLOSED * span) & (residual > 0.5 * best)
        done = (residual <= guess.rounding) | stalled | (worse & (best <= _CLOSED * span))
        base_first = np.where(worse, base_first, first)
        base_lengths = np.where(worse, base_lengths, lengths)
        if np.all(done):
            return base_first, base_lengths, iteration
        loss = np.max(-guess.lengths / lengths, axis=1, keepdims=True)
        share = np.where(worse, share / 3.0, 1.0 / np.maximum(1.0, 2.0 * loss))
        step_first = np.where(worse, step_first, guess.first)
        step_lengths = np.where(worse, step_lengths, guess.lengths)
        best = np.where(worse, best, residual)
        go = np.where(done, 0.0, share)
        first, lengths = base_first + go * step_first, base_lengths + go * step_lengths
    worst = float(np.max(best))
    message = f"The elastic cable on its stations was not found: it misses them by {worst:.3g}."
    raise ConvergenceError(message, residual=worst, iterations=_ITERATIONS)


def _guess(
    beam: SimpleBeam,
    rise: float,
    pull: Floats,
    weight: float,
    soft: float,
    first: Floats,
    lengths: Floats,
) -> _Guess:
    """Linearize stations and closure; the changes run along the cable as one recurrence."""
    left = first + _offsets(beam, weight, lengths)
    weights = weight * lengths
    across, up, _, lean, lift = projections(pull, left, lengths, weights, soft, 1.0)
    right = left + weights
    reach = pull / np.hypot(pull, right) + soft * pull  # across per length at the right end
    miss = across - beam.spacings
    closing = np.sum(up, axis=1, keepdims=True) - rise
    products, sums = _recurrence(
        (1.0 - weight * lean / reach)[:, :-1], (-weight * miss / reach)[:, :-1]
    )
    steep = right / pull
    lifts = (lift - steep * lean) * products
    total = np.sum(lifts, axis=1, keepdims=True)
    known = np.sum(steep * miss - lifts * sums, axis=1, keepdims=True) - closing
    change = known / total
    size = np.sum(lengths, axis=1, keepdims=True)
    forces = np.max(np.maximum(np.abs(left), np.abs(right)), axis=1, keepdims=True)
    return _Guess(
        residual=np.maximum(np.max(np.abs(miss), axis=1, keepdims=True), np.abs(closing)),
        rounding=2.0 * _EPSILON * (size + total * forces),
        first=change,
        lengths=-(miss + lean * products * (change + sums)) / reach,
    )
