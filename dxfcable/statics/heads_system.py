"""Heads, members, cables and loads together: the potential energy and its derivatives.

Signs, order and units: see the package's docstring; coordinates: `heads_members`.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.heads_spans import Sum

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import NDArray

    from dxfcable.statics.beam import Floats
    from dxfcable.statics.heads_members import Members
    from dxfcable.statics.heads_spans import Span

    Indices = NDArray[np.intp]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Point:
    """The energy about a place of the heads in each of n states.

    Attributes
    ----------
    slopes, curvatures : (n, 2h), (n, 2h, 2h) array
        First and second derivatives by arc and growth of each head [force], [force/length].
    masts, forces : (n, h) array
        Axial force of each mast; sum of the magnitudes of all forces at its head [force].
    residuals, noise : (n,) array
        Force left over at the worst head, and what rounding may make up, over the forces there.
    reasons : list of str
        Why a cable has no determinate force, "" where all have.
    """

    slopes: Floats
    curvatures: Floats
    masts: Floats
    forces: Floats
    residuals: Floats
    noise: Floats
    reasons: list[str]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class System:
    """Heads with their members, cables and loads.

    Attributes
    ----------
    members : Members
        Masts and stays.
    spans : sequence of Span
        The cables that end at them.
    loads : (s, h) array
        At the heads, down positive [force].
    names : tuple of str
        Of the heads.
    """

    members: Members
    spans: Sequence[Span]
    loads: Floats
    names: tuple[str, ...]

    def at(self, states: Indices, turned: Floats) -> Point:
        """Evaluate some states.

        Parameters
        ----------
        states : (n,) array of int
            Which.
        turned : (n, h, 2) array
            Arc and growth of each head [length].

        Returns
        -------
        Point
            Not meant to be used in states that have a reason.
        """
        members, (count, heads, _) = self.members, turned.shape
        stand = members.stand(turned)
        pulls = members.pulls(stand.moved)
        total = Sum(
            slopes=pulls.slopes,
            stiffness=np.zeros((count, heads, 2, heads, 2)),
            sizes=pulls.sizes + np.abs(self.loads[states]),
            noise=np.repeat(members.noise[np.newaxis], count, axis=0),
            reasons=[""] * count,
        )
        total.slopes[..., 1] += self.loads[states]
        for k in range(heads):
            total.stiffness[:, k, :, k, :] += pulls.stiffness[:, k]
        for span in self.spans:
            span.add(total, states, stand.moved)
        outward = np.sum(total.slopes * stand.radial, axis=2)
        aside = np.sum(total.slopes * stand.tangent, axis=2)
        masts = np.where(members.rigid, -outward, members.masts(turned))
        forces = total.sizes + np.abs(masts)
        over = np.maximum(forces, np.finfo(np.float64).tiny)
        share = stand.size / members.radius
        slopes = np.stack([aside * share, outward + masts], axis=2)
        return Point(
            slopes=slopes.reshape(count, -1),
            curvatures=self._curvatures(total, stand.radial, stand.tangent, outward, aside, share),
            masts=masts,
            forces=forces,
            residuals=np.max(np.hypot(aside, outward + masts) / over, axis=1),
            noise=np.max(total.noise / over, axis=1),
            reasons=total.reasons,
        )

    def _curvatures(
        self,
        total: Sum,
        radial: Floats,
        tangent: Floats,
        outward: Floats,
        aside: Floats,
        share: Floats,
    ) -> Floats:
        """Second derivatives of the energy by arcs and growths (n, 2h, 2h)."""
        ways = np.stack([share[..., np.newaxis] * tangent, radial], axis=2)  # (n, h, 2, xy)
        half = np.einsum("nhax,nhxky->nhaky", ways, total.stiffness)
        whole = np.einsum("nhaky,nkby->nhakb", half, ways)
        radius = self.members.radius
        for k, rigid in enumerate(self.members.rigid):
            whole[:, k, 0, k, 0] -= outward[:, k] * share[:, k] / radius[k]
            if rigid:  # the growth is no unknown
                whole[:, k, 1] = 0.0
                whole[:, :, :, k, 1] = 0.0
                whole[:, k, 1, k, 1] = 1.0
            else:
                whole[:, k, 0, k, 1] += aside[:, k] / radius[k]
                whole[:, k, 1, k, 0] += aside[:, k] / radius[k]
                whole[:, k, 1, k, 1] += self.members.mast_stiffness[k]
        size = 2 * radius.size
        result: Floats = whole.reshape(-1, size, size)
        return result
