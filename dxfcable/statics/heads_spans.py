"""Cables as springs between supports that move: their pull on the heads and its derivative.

Signs, order and units: see the package's docstring. The potential energy of a cable and its
loads is a convex function of what its ends are apart; its slope is the force (H, V) and its
second derivative the inverse of the chain's flexibility.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.catenary_chain import balance
from dxfcable.statics.catenary_piece import flexibility
from dxfcable.statics.catenary_start import NO_SHAPE, faults
from dxfcable.statics.catenary_states import states_of

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.statics.beam import Floats
    from dxfcable.statics.catenary_chain import Chain
    from dxfcable.statics.heads_layout import CableChain

    Indices = NDArray[np.intp]

_EPSILON = float(np.finfo(np.float64).eps)
_SHORT = 1e-12  # of the chord: what exceeds it by less counts as too short to start with
CROSSED = "The heads of a cable would pass each other: their masts or stays do not hold them apart."


@dataclass(slots=True, kw_only=True, eq=False)
class Sum:
    """What cables do to the heads, filled cable by cable; n states, h heads.

    Attributes
    ----------
    slopes : (n, h, 2) array
        Energy's slope by the movement of each head [force]: minus the force on it.
    stiffness : (n, h, 2, h, 2) array
        Its derivative [force/length].
    sizes, noise : (n, h) array
        Sum of the tensions at each head, and what rounding of lengths may make up [force].
    reasons : list of str
        Why a cable has no determinate force in a state; "" where all have.
    """

    slopes: Floats
    stiffness: Floats
    sizes: Floats
    noise: Floats
    reasons: list[str]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Span:
    """A cable that ends at one head or two.

    Attributes
    ----------
    left, right : int
        Head at each end, -1 for a support that is held.
    chain : Chain
        All states, with the heads as formed.
    rest : (s,) array
        Vertical force at the right end less that at the left one [force].
    """

    left: int
    right: int
    chain: Chain
    rest: Floats

    def add(self, total: Sum, states: Indices, moved: Floats) -> None:
        """Add the cable's part in some states.

        Parameters
        ----------
        total : Sum
            Changed in place.
        states : (n,) array of int
            Which.
        moved : (n, h, 2) array
            Of the heads from where they were formed [length].
        """
        apart = self._apart(states, moved)
        known = np.flatnonzero(apart[:, 0] > 0.0)
        for k in np.flatnonzero(apart[:, 0] <= 0.0).tolist():
            total.reasons[k] = total.reasons[k] or CROSSED
        chain = replace(self.chain.take(states[known]), across=apart[known, 0], up=apart[known, 1])
        reasons = faults(chain)
        for k, reason in zip(known.tolist(), reasons, strict=True):
            # Longer than its string, without weight and loads: it pulls nothing, like a stay.
            if reason != NO_SHAPE:
                total.reasons[k] = total.reasons[k] or reason
        pulling = np.flatnonzero([not reason for reason in reasons])
        if pulling.size:
            self._hang(total, states, known[pulling], chain.take(pulling))

    def is_short(self, moved: Floats) -> NDArray[np.bool_]:
        """Whether the cable, without stretch, does not reach from end to end.

        Parameters
        ----------
        moved : (s, h, 2) array
            Of the heads from where they were formed, in all states [length].

        Returns
        -------
        (s,) array of bool
            False wherever it stretches.
        """
        if self.chain.soft > 0.0:
            return np.zeros(self.chain.state_count, dtype=np.bool_)
        apart = self._apart(np.arange(self.chain.state_count), moved)
        reach = np.sum(self.chain.lengths, axis=1) * self.chain.heat
        short: NDArray[np.bool_] = reach <= np.hypot(apart[:, 0], apart[:, 1]) * (1.0 + _SHORT)
        return short

    def _apart(self, states: Indices, moved: Floats) -> Floats:
        apart = np.stack([self.chain.across[states], self.chain.up[states]], axis=1)
        if self.left >= 0:
            apart -= moved[:, self.left]
        if self.right >= 0:
            apart += moved[:, self.right]
        return apart

    def _hang(self, total: Sum, states: Indices, into: Indices, chain: Chain) -> None:
        """Add force and stiffness of the states that have both; `into` are rows of the sum."""
        found = balance(chain)
        first, cross, second = found.derivatives.T
        determinant = np.maximum(first * second - cross * cross, 4.0 * _EPSILON * first * second)
        stiffness = np.stack([second, -cross, -cross, first], axis=1) / determinant[:, np.newaxis]
        stiffness = stiffness.reshape(-1, 2, 2)
        noise = _EPSILON * np.hypot(chain.across, chain.up) * np.trace(stiffness, axis1=1, axis2=2)
        tail = found.verticals + self.rest[states[into]]
        ends = [(self.left, -1.0, found.verticals), (self.right, 1.0, tail)]
        for head, sign, vertical in ends:
            if head < 0:
                continue
            force = np.stack([found.pulls, vertical], axis=1)
            total.slopes[into, head] += sign * force
            total.sizes[into, head] += np.hypot(force[:, 0], force[:, 1])
            total.noise[into, head] += noise
            for other, turn, _ in ends:
                if other >= 0:
                    total.stiffness[into, head, :, other, :] += sign * turn * stiffness


def span_of(cable: CableChain, ends: Floats, heads: dict[int, int]) -> Span:
    """Make the spring of one cable.

    Parameters
    ----------
    cable : CableChain
        With an end at a head.
    ends : (s, 2, 2) array
        Its ends with the heads as formed [length].
    heads : dict of int to int
        Number of the head of each support that is one.

    Returns
    -------
    Span
        In all states.

    Raises
    ------
    ValueError
        As `catenary.respond`.
    """
    _, chain, _ = states_of(
        cable.unstressed_lengths,
        cable.weight,
        cable.loads,
        ends,
        flexibility(cable.ea),
        cable.weight_factors,
        cable.alpha,
        cable.delta_t,
    )
    return Span(
        left=heads.get(cable.left, -1),
        right=heads.get(cable.right, -1),
        chain=chain,
        rest=chain.offsets[:, -1] + chain.weights[:, -1],
    )
