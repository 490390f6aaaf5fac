"""What stands on masts and stays that give: heads, their members, the cables between supports.

Signs, order and units: see the package's docstring.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeAlias

import numpy as np

from dxfcable.statics.beam import finite, positive

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import Floats

Vector: TypeAlias = tuple[float, float]


@dataclass(frozen=True, slots=True, kw_only=True)
class StayMember:
    """A stay from a head down to its foot; it pulls, and is slack where it would have to push.

    Attributes
    ----------
    foot : (float, float)
        Where it is anchored [length].
    unstressed_length : float
        Without force [length], > 0: `unstressed_from`.
    ea : float
        Axial stiffness [force], > 0.
    """

    foot: Vector
    unstressed_length: float
    ea: float


@dataclass(frozen=True, slots=True, kw_only=True)
class Head:
    """A support on top of a mast that is pinned at its base.

    Attributes
    ----------
    support : int
        Its place in the row of supports, from 0.
    at, foot : (float, float)
        The head as formed and the base of the mast [length].
    mast_ea, mast_length : float or None
        Axial stiffness [force] and unstressed length [length]: both, or neither for a mast that
        does not change its length. A mast pushes and pulls.
    stays : tuple of StayMember
        None, one or more.
    name : str
        What sentences call it.
    """

    support: int
    at: Vector
    foot: Vector
    mast_ea: float | None = None
    mast_length: float | None = None
    stays: tuple[StayMember, ...] = ()
    name: str = ""

    @property
    def called(self) -> str:
        """What sentences call it."""
        return self.name or f"support {self.support + 1}"


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class CableChain:
    """A cable of fixed unstressed lengths between two supports, as `catenary.respond` takes it.

    Attributes
    ----------
    left, right : int
        Places of its ends in the row of supports, from 0.
    unstressed_lengths : (n+1,) or (s, n+1) array
        Of each piece [length].
    loads : (n,) or (s, n) array
        Between the pieces, down positive [force].
    weight : float
        Per unstressed length [force/length].
    ea : float or None
        Axial stiffness [force]; None for a cable that does not stretch.
    weight_factors, delta_t : float or (s,) array
        Factor on the weight; change from the reference temperature [K].
    alpha : float
        Thermal expansion [1/K].
    """

    left: int
    right: int
    unstressed_lengths: ArrayLike
    loads: ArrayLike
    weight: float = 0.0
    ea: float | None = None
    weight_factors: ArrayLike = 1.0
    alpha: float = 0.0
    delta_t: ArrayLike = 0.0


def unstressed_from(at: Vector, foot: Vector, force: float, ea: float) -> float:
    """Find the unstressed length of a member that carries a force where it is drawn.

    Parameters
    ----------
    at, foot : (float, float)
        Its ends [length].
    force : float
        Tension positive, compression negative [force].
    ea : float
        Axial stiffness [force].

    Returns
    -------
    float
        Drawn length / (1 + force / EA) [length].

    Raises
    ------
    ValueError
        If a number is not finite, EA is not positive, or the force would crush the member.

    Examples
    --------
    >>> unstressed_from((0.0, 3.0), (4.0, 0.0), 20.0, 1000.0)
    4.901960784313726
    """
    strain = finite("force", force) / positive("ea", ea)
    if strain <= -1.0:
        message = f"a force of {force:g} would crush a member of EA {ea:g} to nothing"
        raise ValueError(message)
    return positive("the length of a member", math.dist(at, foot)) / (1.0 + strain)


def check(cables: Sequence[CableChain], heads: Sequence[Head], support_count: int) -> None:
    """Say which cable or head cannot be.

    Parameters
    ----------
    cables, heads : sequence of CableChain, of Head
        To be checked.
    support_count : int
        Length of the row of supports.

    Raises
    ------
    ValueError
        If an index is out of range or doubled, a member has no length or no stiffness, or a
        number is not finite.
    """
    for number, cable in enumerate(cables, 1):
        ends = cable.left, cable.right
        if ends[0] == ends[1] or not all(0 <= end < support_count for end in ends):
            message = f"cable {number} must join two of {support_count} supports, not {ends}"
            raise ValueError(message)
    places = [head.support for head in heads]
    if len(set(places)) < len(places) or not all(0 <= k < support_count for k in places):
        message = f"heads must be different ones of {support_count} supports, not {places}"
        raise ValueError(message)
    for head in heads:
        members = [(head.foot, head.mast_length, head.mast_ea)] if head.mast_ea is not None else []
        if head.mast_ea is None and head.mast_length is not None:
            message = f"the mast of {head.called} has an unstressed length and no EA"
            raise ValueError(message)
        members += [(stay.foot, stay.unstressed_length, stay.ea) for stay in head.stays]
        for foot, length, ea in [(head.foot, 1.0, 1.0), *members]:
            distance = math.dist(head.at, foot)
            if not all(v is not None and 0.0 < v < math.inf for v in (distance, length, ea)):
                message = (
                    f"each member of {head.called} needs two different ends, a positive "
                    f"unstressed length and a positive EA, not {foot}, {length}, {ea}"
                )
                raise ValueError(message)


def rows(name: str, values: ArrayLike, shape: tuple[int, ...]) -> Floats:
    """Give an array of the given shape, its first axis repeated where it is missing or one.

    Parameters
    ----------
    name : str
        What a sentence calls it.
    values : array of float
        Without or with the axis of states.
    shape : tuple of int
        States first.

    Returns
    -------
    array of float
        Read only where it is repeated.

    Raises
    ------
    ValueError
        If the shape does not fit or a number is not finite.
    """
    array = np.asarray(values, dtype=np.float64)
    if array.shape not in (shape, shape[1:], (1, *shape[1:])) or not np.all(np.isfinite(array)):
        message = f"{name} must be finite numbers of shape {shape[1:]} or {shape}"
        raise ValueError(message)
    return np.broadcast_to(array, shape)
