"""Whether a chain of pieces has an equilibrium, and where to start looking for it.

Signs, order and units: see the package's docstring.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.catenary_sums import blocks

if TYPE_CHECKING:
    from dxfcable.statics.beam import Floats
    from dxfcable.statics.catenary_chain import Chain

_EPSILON = float(np.finfo(np.float64).eps)
_TIE = 1e-13  # forces nearer than this, relative to all loads, count as equal
_HALVINGS = 10
_DEEPEST = 50.0  # half of the turn asinh(V2/H) - asinh(V1/H) of the estimate

TOO_SHORT = (
    "The cable does not stretch and is no longer than the chord between its supports, "
    "so no load can hang on it: lengthen it or state its EA."
)
NO_SHAPE = (
    "A weightless cable without loads that is longer than its closing string has no "
    "determinate shape: give it loads or a weight."
)
NO_PULL = (
    "The loads of this weightless cable hang straight down and the piece between them is slack: "
    "there is no pull and no determinate shape. Shorten that piece or give the cable a weight."
)


def faults(chain: Chain) -> tuple[str, ...]:
    """Say of each state why it has no determinate equilibrium; "" where it has one.

    Parameters
    ----------
    chain : Chain
        The states.

    Returns
    -------
    tuple of str
        One sentence a state.

    Notes
    -----
    The complementary energy has a least value unless a cable without stretch is no longer than
    its chord. Weightless pieces may make it lie where the pull is zero: then all the pieces in
    one group carry no force at all, the others hang vertically, and the group is longer than
    the way it has to bridge.
    """
    lengths = np.sum(chain.lengths, axis=1) * chain.heat
    chords = np.hypot(chain.across, chain.up)
    short = (chain.soft == 0.0) & (lengths <= chords * (1.0 + 4.0 * _EPSILON))
    weightless = ~np.any(chain.weights, axis=1)
    slack = np.zeros(chain.state_count, dtype=np.bool_)
    maybe = np.flatnonzero(weightless & ~short)
    if maybe.size:
        slack[maybe] = _has_no_pull(chain.take(maybe))
    return tuple(
        _reason(chain, k, is_short) if is_short or is_slack else ""
        for k, (is_short, is_slack) in enumerate(zip(short.tolist(), slack.tolist(), strict=True))
    )


def _reason(chain: Chain, state: int, is_short: bool) -> str:
    if is_short:
        return TOO_SHORT
    return NO_PULL if np.any(chain.loads[state]) else NO_SHAPE


def _has_no_pull(chain: Chain) -> Floats:
    """Whether some pieces without force can bridge what the others, hanging down, leave."""
    order = np.argsort(chain.offsets, axis=1, kind="stable")
    offsets = np.take_along_axis(chain.offsets, order, axis=1)
    lengths = np.take_along_axis(np.broadcast_to(chain.lengths, offsets.shape), order, axis=1)
    tie = _TIE * np.sum(np.abs(chain.loads), axis=1, keepdims=True)
    places = np.broadcast_to(np.arange(offsets.shape[1]), offsets.shape)
    opens = np.diff(offsets, axis=1, prepend=-np.inf) > tie
    firsts = np.maximum.accumulate(np.where(opens, places, 0), axis=1)
    closes = np.concatenate([opens[:, 1:], np.ones_like(opens[:, :1])], axis=1)
    ends = np.where(closes, places, offsets.shape[1])[:, ::-1]
    lasts = np.minimum.accumulate(ends, axis=1)[:, ::-1]
    sums = np.concatenate([np.zeros_like(tie), np.cumsum(lengths, axis=1)], axis=1)
    below = np.take_along_axis(sums, firsts, axis=1)  # lengths that hang down
    through = np.take_along_axis(sums, lasts + 1, axis=1)
    total, heat = sums[:, -1:], chain.heat[:, np.newaxis]
    forces = np.sum(lengths * offsets, axis=1, keepdims=True) - offsets * total
    rest = heat * ((total - through) - below) + chain.soft * forces
    reach = heat * (through - below)
    need = np.hypot(chain.across[:, np.newaxis], chain.up[:, np.newaxis] - rest)
    found: Floats = np.any(need <= reach, axis=1)
    return found


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Start:
    """Where the search for equilibrium begins, a value for every state.

    Attributes
    ----------
    pulls, verticals : (s,) array
        H > 0 and V at the left end [force].
    sizes : (s,) array
        Unstressed length of the chain [length].
    means : (s,) array
        Average over it of the vertical force, less that at the left end [force].
    """

    pulls: Floats
    verticals: Floats
    sizes: Floats
    means: Floats


def start(chain: Chain) -> Start:
    """Estimate pull and vertical force at the left end of each state.

    Parameters
    ----------
    chain : Chain
        The states.

    Returns
    -------
    Start
        The estimate, and what it summed on its way.

    Notes
    -----
    Shears V of a simple beam, on stations spread like the unstressed lengths, give the even
    load q that has the same integral of V^2: 12 integral = q^2 l^3 (1 + slope^2). Its catenary
    has the length of the cable, stretched by the mean tension. Exact for an even load, and in
    the limit for a taut cable on its stations.
    """
    count = chain.state_count
    sizes, means, squares = (np.empty(count) for _ in range(3))
    pieces = chain.lengths.shape[1]
    for rows, _ in blocks(count, pieces, whole_rows=True):
        lengths, weights = chain.lengths[rows], chain.weights[rows]
        sizes[rows] = np.sum(lengths, axis=1)
        forces = chain.offsets[rows] + 0.5 * weights
        means[rows] = np.sum(forces * lengths, axis=1) / sizes[rows]
        forces -= means[rows, np.newaxis]
        forces *= forces
        forces += weights * weights / 12.0
        forces *= lengths
        squares[rows] = np.sum(forces, axis=1) / sizes[rows]
    slope = chain.up / chain.across
    load = np.sqrt(12.0 * squares / (1.0 + slope * slope))
    pulls = _pull_of_even_load(chain, load, sizes)
    return Start(pulls=pulls, verticals=slope * pulls - means, sizes=sizes, means=means)


def _pull_of_even_load(chain: Chain, load: Floats, sizes: Floats) -> Floats:
    """Pull of the catenary of the same length under the given total load."""
    chords = np.hypot(chain.across, chain.up)
    taut = np.maximum(chords / sizes - chain.heat, 0.0)  # strain without any load
    across = chain.across / chords
    high = load * 1e9
    if chain.soft > 0.0:
        high = 2.0 * (load + np.cbrt(load * load / chain.soft) + across * taut / chain.soft)
    low = np.maximum(load / (2.0 * _DEEPEST), high * 1e-20)
    for _ in range(_HALVINGS):
        pull = np.sqrt(low) * np.sqrt(high)
        half = np.minimum(0.5 * load / pull, _DEEPEST)
        stretched = sizes * (chain.heat + chain.soft * pull / across)
        needs = np.hypot(chain.across * np.sinh(half) / np.maximum(half, 1e-300), chain.up)
        shallow = np.where(half > 1e-8, needs, chords) < stretched
        low, high = np.where(shallow, low, pull), np.where(shallow, pull, high)
    estimate: Floats = np.sqrt(low) * np.sqrt(high)
    return estimate
