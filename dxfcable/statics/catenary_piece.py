"""One piece of an elastic cable that hangs freely between two points, in closed form.

Signs, order and units: see the package's docstring. A piece has the unstressed length L, the
weight W, the flexibility f = 1 / EA, the thermal factor t = 1 + alpha dT on its geometric
length, and the pull H. The vertical component of the tension, rising to the right positive,
grows along it from V1 to V2 = V1 + W, since the weight stays with the material.

With T = sqrt(H^2 + V^2) an element ds of unstressed length spans dx = H (t / T + f) ds and
dy = V (t / T + f) ds, and is (t + f T) ds long. The integrals are classical (elastic catenary,
e.g. Irvine, Cable Structures, 1981, chapter 1: MEM); `catenary_ends` has them in a form that
loses no digits.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.catenary_ends import Ends

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Pieces:
    """Pieces in equilibrium; every array has the common shape of what was given.

    Attributes
    ----------
    verticals_left, verticals_right : array
        Vertical component of the tension at the ends, rising to the right positive [force].
    tensions_left, tensions_right : array
        Tension at the ends [force].
    across, up : array
        Horizontal and vertical projection from the left end to the right one [length].
    lengths : array
        Length along the stretched curve [length].
    """

    verticals_left: Floats
    verticals_right: Floats
    tensions_left: Floats
    tensions_right: Floats
    across: Floats
    up: Floats
    lengths: Floats


def flexibility(ea: float | None) -> float:
    """Return 1 / EA; None and infinity mean a cable that does not stretch.

    Parameters
    ----------
    ea : float or None
        Axial stiffness [force], > 0.

    Returns
    -------
    float
        Strain per force [1/force].

    Raises
    ------
    ValueError
        If EA is not positive.
    """
    if ea is None:
        return 0.0
    if not ea > 0.0:
        message = f"ea must be a positive number, infinite or None, not {ea}"
        raise ValueError(message)
    return 1.0 / float(ea)


def hang(
    unstressed_lengths: ArrayLike,
    weight: ArrayLike,
    horizontal: ArrayLike,
    vertical_left: ArrayLike,
    *,
    ea: float | None = None,
    thermal: ArrayLike = 1.0,
) -> Pieces:
    """Hang pieces from a known force at their left ends.

    Parameters
    ----------
    unstressed_lengths : array of float
        Length without force at the reference temperature [length].
    weight : array of float
        Per unstressed length [force/length]; zero is no special case.
    horizontal : array of float
        Pull [force]; zero only where the vertical force does not change its sign.
    vertical_left : array of float
        Vertical component of the tension at the left end, rising to the right positive [force].
    ea : float, optional
        Axial stiffness [force]; None or infinity for no stretch.
    thermal : array of float
        1 + expansion times change of temperature. Weight is unchanged in total and stretch
        acts on the original length.

    Returns
    -------
    Pieces
        In the broadcast shape of all arrays.

    Examples
    --------
    >>> piece = hang(10.0, 0.0, 3.0, 4.0)
    >>> float(piece.across), float(piece.up), float(piece.lengths)
    (6.0, 8.0, 10.0)
    """
    length, per_length, pull, left, heat = (
        np.asarray(a, dtype=np.float64)
        for a in np.broadcast_arrays(
            unstressed_lengths, weight, horizontal, vertical_left, np.asarray(thermal)
        )
    )
    return hang_weights(length, per_length * length, pull, left, flexibility(ea), heat)


def hang_weights(
    lengths: Floats,
    weights: Floats,
    pull: Floats,
    left: Floats,
    soft: float,
    heat: Floats | float,
) -> Pieces:
    """Hang pieces whose weights are known; arrays need only be broadcastable to `left`.

    Parameters
    ----------
    lengths, weights : array of float
        Unstressed length [length] and weight of each piece [force].
    pull, left : array of float
        H and V1 [force].
    soft, heat : float or array
        1 / EA [1/force] and thermal factor.

    Returns
    -------
    Pieces
        In the shape of `left`.
    """
    right = left + weights
    ends = Ends(pull, left, right, weights)
    across = heat * ends.turn
    up = heat / ends.total
    stretched = lengths * heat
    if soft > 0.0:
        across += soft
        up += 0.5 * soft
        stretched = stretched + (soft * lengths) * ends.mean_tension
    across *= lengths
    across *= pull
    up *= lengths
    up *= left + right
    return Pieces(
        verticals_left=left,
        verticals_right=right,
        tensions_left=ends.first,
        tensions_right=ends.second,
        across=across,
        up=up,
        lengths=np.broadcast_to(stretched, left.shape),
    )


def projections(
    pull: Floats,
    left: Floats,
    lengths: Floats,
    weights: Floats,
    soft: Floats | float,
    heat: Floats | float,
) -> tuple[Floats, Floats, Floats, Floats, Floats]:
    """Project pieces, with the derivatives by pull H and vertical force V at the left end.

    Parameters
    ----------
    pull, left, lengths, weights : array of float
        H, V1 [force], unstressed length [length], weight of the piece [force]; broadcastable.
    soft, heat : array of float or float
        1 / EA [1/force] and thermal factor.

    Returns
    -------
    across, up : array
        Projections [length].
    across_by_pull, across_by_vertical, up_by_vertical : array
        Derivatives [length/force]. `up` by H equals `across` by V: both come from one
        complementary energy, the integral of t T + f T^2 / 2, which is convex in (H, V).
    """
    right = left + weights
    ends = Ends(pull, left, right, weights)
    products = ends.first * ends.second
    both = lengths * (left + right)
    stretch = soft * lengths
    across = pull * (heat * lengths * ends.turn + stretch)
    up = both * (heat / ends.total + 0.5 * soft)
    steep = heat * lengths * ends.pull_squared * ends.spread / products  # of H^2 / T^3
    flat = np.maximum(heat * lengths * ends.turn - steep, 0.0)  # of V^2 / T^3
    cross = -heat * pull * both / (ends.total * products)
    return across, up, flat + stretch, cross, steep + stretch
