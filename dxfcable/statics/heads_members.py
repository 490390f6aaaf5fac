"""Masts and stays as arrays: where heads stand, what the members pull, how stiff they are.

Signs, order and units: see the package's docstring. A head has two coordinates: the arc `a` that
it has turned about the mast's base (counterclockwise, measured on the circle as formed) and
the growth `b` of the mast; a mast without stretch has only the first. Movements are computed
from these directly, never as a difference of places, so that large coordinates and stiff
members cost no digits.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from dxfcable.statics.beam import Floats
    from dxfcable.statics.heads_layout import Head

_TAUT = 1e-12  # strain: what is below carries nothing that counts


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Stand:
    """Where heads stand in each state.

    Attributes
    ----------
    radial, tangent : (s, h, 2) array
        Unit vectors from the base to the head, and a right angle counterclockwise from it.
    size : (s, h) array
        Mast length [length].
    moved : (s, h, 2) array
        From where the head was formed [length].
    """

    radial: Floats
    tangent: Floats
    size: Floats
    moved: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Pulls:
    """Stays in each state: energy's slope and stiffness by the movement of their heads.

    Attributes
    ----------
    tensions, elongations : (s, m) array
        [force], [length].
    lines : (s, m, 2) array
        Unit vectors from foot to head.
    slopes : (s, h, 2) array
        Sum of the stays at each head, from their feet to the head [force].
    stiffness : (s, h, 2, 2) array
        [force/length].
    sizes : (s, h) array
        Sum of the tensions [force].
    """

    tensions: Floats
    elongations: Floats
    lines: Floats
    slopes: Floats
    stiffness: Floats
    sizes: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Members:
    """All masts (h) and stays (m).

    Attributes
    ----------
    radius, growth, mast_stiffness : (h,) array
        Mast length as formed, that less the unstressed one [length], EA / unstressed length
        [force/length]; the last two are 0 where the mast does not change its length.
    rigid : (h,) array of bool
        Which masts do not.
    radial : (h, 2) array
        Unit vector from the base to the head as formed.
    owner : (m,) array of int
        Head of each stay.
    reach : (m, 2) array
        From the foot to the head as formed [length].
    elongation, stiffness : (m,) array
        Formed less unstressed length [length], EA / unstressed length [force/length].
    """

    radius: Floats
    growth: Floats
    mast_stiffness: Floats
    rigid: NDArray[np.bool_]
    radial: Floats
    owner: NDArray[np.intp]
    reach: Floats
    elongation: Floats
    stiffness: Floats

    def stand(self, turned: Floats) -> Stand:
        """Find where heads stand.

        Parameters
        ----------
        turned : (s, h, 2) array
            Arc and growth of each head [length].

        Returns
        -------
        Stand
            With one row for each of the states.
        """
        angles, grown = turned[..., 0] / self.radius, turned[..., 1]
        across = _left_of(self.radial)
        # cos - 1 written so that a small turn keeps its digits
        back = -2.0 * np.sin(0.5 * angles) ** 2
        moved = back[..., np.newaxis] * self.radial + np.sin(angles)[..., np.newaxis] * across
        radial = self.radial + moved
        return Stand(
            radial=radial,
            tangent=_left_of(radial),
            size=self.radius + grown,
            moved=self.radius[:, np.newaxis] * moved + grown[..., np.newaxis] * radial,
        )

    def masts(self, turned: Floats) -> Floats:
        """Axial forces of elastic masts (s, h), tension positive; 0 for the others."""
        return self.mast_stiffness * (self.growth + turned[..., 1])

    def pulls(self, moved: Floats) -> Pulls:
        """Stretch the stays.

        Parameters
        ----------
        moved : (s, h, 2) array
            Of the heads from where they were formed [length].

        Returns
        -------
        Pulls
            Zero where a stay is slack.
        """
        moved_ends = moved[:, self.owner]
        place = self.reach + moved_ends
        lengths = np.hypot(place[..., 0], place[..., 1])
        formed = np.hypot(self.reach[:, 0], self.reach[:, 1])
        more = np.sum((2.0 * self.reach + moved_ends) * moved_ends, axis=2) / (lengths + formed)
        elongations = self.elongation + more
        tensions = self.stiffness * np.maximum(elongations, 0.0)
        lines = place / lengths[..., np.newaxis]
        along = lines[..., :, np.newaxis] * lines[..., np.newaxis, :]
        axial = np.where(elongations > 0.0, self.stiffness, 0.0) - tensions / lengths
        each = axial[..., np.newaxis, np.newaxis] * along
        each += (tensions / lengths)[..., np.newaxis, np.newaxis] * np.eye(2)
        at_head = np.eye(self.radius.size)[self.owner]
        slopes = np.einsum("nm,nmx,mh->nhx", tensions, lines, at_head)
        stiffness, sizes = np.einsum("nmxy,mh->nhxy", each, at_head), tensions @ at_head
        return Pulls(
            tensions=tensions,
            elongations=elongations,
            lines=lines,
            slopes=slopes,
            stiffness=stiffness,
            sizes=sizes,
        )

    def slack(self, elongations: Floats) -> NDArray[np.bool_]:
        """Whether stays carry nothing, (s, m)."""
        formed = np.hypot(self.reach[:, 0], self.reach[:, 1])
        result: NDArray[np.bool_] = elongations <= _TAUT * formed
        return result

    @property
    def noise(self) -> Floats:
        """Force that the last digit of a member's length makes up, (h,)."""
        result = self.mast_stiffness * self.radius
        np.add.at(result, self.owner, self.stiffness * np.hypot(self.reach[:, 0], self.reach[:, 1]))
        return result * float(np.finfo(np.float64).eps)


def members_of(heads: Sequence[Head]) -> Members:
    """Put heads that were checked into arrays.

    Parameters
    ----------
    heads : sequence of Head
        At least one.

    Returns
    -------
    Members
        Stays in the order of the heads.
    """
    feet, at = np.array([head.foot for head in heads]), np.array([head.at for head in heads])
    upward = at - feet
    radius = np.hypot(upward[:, 0], upward[:, 1])
    lengths = np.array([np.nan if h.mast_length is None else h.mast_length for h in heads])
    rigid = np.array([head.mast_ea is None for head in heads])
    ea = np.array([head.mast_ea or 0.0 for head in heads])
    stays = [(k, stay) for k, head in enumerate(heads) for stay in head.stays]
    owner = np.array([k for k, _ in stays], dtype=np.intp)
    reach = at[owner] - np.array([stay.foot for _, stay in stays]).reshape(-1, 2)
    unstressed = np.array([stay.unstressed_length for _, stay in stays])
    return Members(
        radius=radius,
        growth=np.where(rigid, 0.0, radius - lengths),
        mast_stiffness=np.where(rigid, 0.0, ea / lengths),
        rigid=rigid,
        radial=upward / radius[:, np.newaxis],
        owner=owner,
        reach=reach,
        elongation=np.hypot(reach[:, 0], reach[:, 1]) - unstressed,
        stiffness=np.array([stay.ea for _, stay in stays]) / unstressed,
    )


def _left_of(vectors: Floats) -> Floats:
    """Turn vectors a right angle counterclockwise."""
    return np.stack([-vectors[..., 1], vectors[..., 0]], axis=-1)
