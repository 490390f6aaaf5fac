"""How a cable of fixed unstressed lengths answers to loads, temperature and moved supports.

Signs, order and units: see the package's docstring. All load states are solved at once; the
elastic catenary of each piece is exact (`catenary_piece`), nothing is lumped at nodes.
Forming, where the lengths are what is looked for: `catenary_forming`.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import RuleError
from dxfcable.statics.beam import frozen
from dxfcable.statics.catenary_chain import balance
from dxfcable.statics.catenary_layout import shape_from
from dxfcable.statics.catenary_piece import Pieces, flexibility, hang_weights
from dxfcable.statics.catenary_start import faults
from dxfcable.statics.catenary_states import states_of
from dxfcable.statics.catenary_sums import blocks

if TYPE_CHECKING:
    from numpy.typing import ArrayLike, NDArray

    from dxfcable.statics.beam import Floats
    from dxfcable.statics.catenary_chain import Balance, Chain
    from dxfcable.statics.catenary_shape import Catenary


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Response:
    """A cable in its load states; arrays are read only, one row a state.

    A state without a determinate shape has its reason in `faults` and not-a-number in every
    array.

    Attributes
    ----------
    x, y : (s, n+2) array
        Supports and load points [length].
    loads : (s, n) array
        Down positive [force].
    horizontals : (s,) array
        Pull [force].
    verticals_left, verticals_right, tensions_left, tensions_right : (s, n+1) array
        Vertical components (rising to the right positive) and tensions at the ends of the
        pieces [force].
    lengths, unstressed_lengths : (s, n+1) array
        Stretched, and without force at the reference temperature [length].
    weights : (s,) array
        Per unstressed length with the state's factor [force/length].
    thermals : (s,) array
        1 + expansion times change of temperature.
    flexibilities : (s, 2, 2) array
        How the distance of the supports (across, up) grows with the pull and the vertical
        force at the left end, rising to the right positive [length/force]. The inverse tells
        how both forces answer to supports that move.
    residuals : (s,) array
        Distance by which the pieces miss the right support [length].
    iterations : (s,) array of int
        Newton steps.
    faults : tuple of str
        Why a state has no determinate shape, "" where it has one.
    ea : float or None
        Axial stiffness [force].
    """

    x: Floats
    y: Floats
    loads: Floats
    horizontals: Floats
    verticals_left: Floats
    verticals_right: Floats
    tensions_left: Floats
    tensions_right: Floats
    lengths: Floats
    unstressed_lengths: Floats
    weights: Floats
    thermals: Floats
    flexibilities: Floats
    residuals: Floats
    iterations: NDArray[np.intp]
    faults: tuple[str, ...]
    ea: float | None

    @property
    def max_tensions(self) -> Floats:
        """Largest tension anywhere in each state [force]."""
        tensions: Floats = np.max(np.maximum(self.tensions_left, self.tensions_right), axis=1)
        return tensions

    def state(self, index: int) -> Catenary:
        """Return one state as a cable of its own.

        Parameters
        ----------
        index : int
            Of the state, from 0.

        Returns
        -------
        Catenary
            With its curve inside the pieces.

        Raises
        ------
        RuleError
            If the state has no determinate shape.
        """
        if self.faults[index]:
            raise RuleError(self.faults[index])
        row_x, row_y = self.x[index], self.y[index]
        return shape_from(
            self.loads[index],
            ((float(row_x[0]), float(row_y[0])), (float(row_x[-1]), float(row_y[-1]))),
            self.unstressed_lengths[index],
            float(self.horizontals[index]),
            self.verticals_left[index],
            weight=float(self.weights[index]),
            ea=self.ea,
            thermal=float(self.thermals[index]),
            iterations=int(self.iterations[index]),
        )


def respond(
    unstressed_lengths: ArrayLike,
    weight: float,
    loads: ArrayLike,
    ends: ArrayLike,
    *,
    ea: float | None = None,
    weight_factors: ArrayLike = 1.0,
    alpha: float = 0.0,
    delta_t: ArrayLike = 0.0,
) -> Response:
    """Solve a cable of fixed unstressed lengths in any number of load states at once.

    Parameters
    ----------
    unstressed_lengths : (n+1,) or (s, n+1) array of float
        Of each piece [length], > 0.
    weight : float
        Per unstressed length [force/length], >= 0.
    loads : (n,) or (s, n) array of float
        Vertical loads fixed to the cable between the pieces, down positive [force].
    ends : (2, 2) or (s, 2, 2) array of float
        Left and right support, each (x, y) [length]; the right one is to the right.
    ea : float, optional
        Axial stiffness [force]; None for a cable that does not stretch.
    weight_factors : float or (s,) array
        Factor on the weight in each state.
    alpha : float
        Thermal expansion [1/K].
    delta_t : float or (s,) array
        Change from the reference temperature [K].

    Returns
    -------
    Response
        All states; those without a determinate shape carry their reason.

    Raises
    ------
    ValueError
        If shapes do not match or a number is out of its range.
    ConvergenceError
        If a state that has a shape does not reach equilibrium.

    Notes
    -----
    Temperature changes the geometric length, not the total weight; stretch acts on the
    unstressed length. Limits: plane, no bending, no friction, loads vertical.

    Examples
    --------
    >>> cable = respond([40, 30, 50], 20.0, [2000, 3000], [(0, 0), (100, 8)], ea=5e6)
    >>> round(float(cable.horizontals[0]), 3)
    4056.825
    """
    lefts, chain, per_length = states_of(
        unstressed_lengths, weight, loads, ends, flexibility(ea), weight_factors, alpha, delta_t
    )
    reasons = faults(chain)
    solved = np.flatnonzero([not reason for reason in reasons])
    found = balance(chain.take(solved) if solved.size < chain.state_count else chain)
    return _response(lefts, chain, per_length, reasons, solved, found, ea)


def _response(
    points: Floats,
    chain: Chain,
    per_length: Floats,
    reasons: tuple[str, ...],
    solved: NDArray[np.intp],
    found: Balance,
    ea: float | None,
) -> Response:
    """Spread the solved states over all states and lay out their nodes."""

    def spread(values: Floats) -> Floats:
        whole = np.full((chain.state_count, *values.shape[1:]), np.nan)
        whole[solved] = values
        return frozen(whole)

    horizontals, verticals = spread(found.pulls), spread(found.verticals)
    pieces = _pieces(chain, horizontals, verticals)
    iterations = np.full(chain.state_count, -1)
    iterations[solved] = found.iterations
    iterations.flags.writeable = False
    first, cross, second = found.derivatives.T
    return Response(
        x=frozen(_nodes(points[:, 0, 0], points[:, 1, 0], pieces.across)),
        y=frozen(_nodes(points[:, 0, 1], points[:, 1, 1], pieces.up)),
        loads=chain.loads,
        horizontals=horizontals,
        verticals_left=frozen(pieces.verticals_left),
        verticals_right=frozen(pieces.verticals_right),
        tensions_left=frozen(pieces.tensions_left),
        tensions_right=frozen(pieces.tensions_right),
        lengths=frozen(pieces.lengths),
        unstressed_lengths=chain.lengths,
        weights=per_length,
        thermals=chain.heat,
        flexibilities=spread(np.stack([first, cross, cross, second], 1).reshape(-1, 2, 2)),
        residuals=spread(found.residuals),
        iterations=iterations,
        faults=reasons,
        ea=ea,
    )


def _pieces(chain: Chain, horizontals: Floats, verticals: Floats) -> Pieces:
    """Hang all pieces of all states, block by block."""
    left = verticals[:, np.newaxis] + chain.offsets
    right, first, second, across, up, lengths = (np.empty_like(left) for _ in range(6))
    for rows, columns in blocks(*left.shape):
        here = rows, columns
        part = hang_weights(
            chain.lengths[here],
            chain.weights[here],
            horizontals[rows, np.newaxis],
            left[here],
            chain.soft,
            chain.heat[rows, np.newaxis],
        )
        right[here], first[here] = part.verticals_right, part.tensions_left
        second[here], lengths[here] = part.tensions_right, part.lengths
        across[here], up[here] = part.across, part.up
    return Pieces(
        verticals_left=left,
        verticals_right=right,
        tensions_left=first,
        tensions_right=second,
        across=across,
        up=up,
        lengths=lengths,
    )


def _nodes(left: Floats, right: Floats, steps: Floats) -> Floats:
    """Coordinates of all nodes; the last one is the support itself."""
    nodes = np.empty((steps.shape[0], steps.shape[1] + 1))
    nodes[:, 0], nodes[:, -1] = left, right
    inner = nodes[:, 1:-1]
    np.cumsum(steps[:, :-1], axis=1, out=inner)
    inner += left[:, np.newaxis]
    unsolved = np.isnan(steps[:, 0])
    nodes[unsolved] = np.nan
    return nodes
