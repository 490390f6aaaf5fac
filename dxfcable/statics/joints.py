"""Equilibrium of a support that a mast or backstays hold, and of the anchors at their feet.

Every force is a vector (right, up). A member's axial force is positive in tension, so a mast
in compression has a negative one. Directions run from the head (the support) down to the foot.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING, TypeAlias

from dxfcable.errors import LayoutError
from dxfcable.model import AnchorForce, JointSide

if TYPE_CHECKING:
    from collections.abc import Sequence

Vector: TypeAlias = tuple[float, float]

_PARALLEL = 1e-6  # sine of the angle under which a stay counts as parallel to its mast
_SAME_FOOT = 1e-9  # of the stays' length
_SHARES = 1e-6  # the sum of shares may differ from one by this much
_ROUNDING = 1e-12  # of the forces at the joint: smaller ones are taken as zero


@dataclass(frozen=True, slots=True, kw_only=True)
class Joint:
    """Forces at one support.

    Attributes
    ----------
    mast : float or None
        Axial force of the mast, compression negative [force]; None without a mast.
    stays : tuple of float
        Axial forces of the stays, tension positive [force].
    head_shear : float
        What the mast must take across its axis at the head; positive to the right on an
        upright mast [force]. Only where no stay can take it.
    base_moment : float
        Head shear times mast length, clockwise on the base positive [force length].
    residual : (float, float)
        The part of the load on the joint that nothing drawn takes [force].
    mast_foot, stay_feet : (float, float) or None, tuple of (float, float)
        Force on the foot of each member [force].
    sides : tuple of JointSide
        Forces on the joint, laid end to end; they close unless there is a residual.
    mast_in_tension, stay_in_compression, stay_parallel_to_mast : bool
        What an engineer must see. A parallel stay carries nothing here.
    """

    mast: float | None
    stays: tuple[float, ...]
    head_shear: float
    base_moment: float
    residual: Vector
    mast_foot: Vector | None
    stay_feet: tuple[Vector, ...]
    sides: tuple[JointSide, ...]
    mast_in_tension: bool
    stay_in_compression: bool
    stay_parallel_to_mast: bool


def joint_equilibrium(
    cables: Sequence[Vector],
    *,
    load: float = 0.0,
    mast: Vector | None = None,
    stays: Sequence[Vector] = (),
    shares: Sequence[float | None] | None = None,
) -> Joint:
    """Find the forces in the mast and the stays of one support.

    Parameters
    ----------
    cables : (m, 2) sequence of float
        Pull of each cable on the support, right and up positive [force]: a left support is
        pulled by (H, -V), a right one by (-H, -V), V the vertical reaction up.
    load : float
        Further load at the support, down positive [force].
    mast : (float, float), optional
        Head to foot [length].
    stays : sequence of (float, float)
        Head to foot of each stay [length].
    shares : sequence of float, optional
        Fraction of the stays' summed horizontal component that each stay takes, summing to 1.
        Needed where stays have different feet; stays with one foot share equally without it.

    Returns
    -------
    Joint
        See there for signs.

    Raises
    ------
    LayoutError
        If stays with different feet have no shares, or shares are not fractions that sum to 1.
    ValueError
        If a number is not finite, a member has no length, or a stay with a share is vertical.

    Notes
    -----
    Mast and stays: two equations of equilibrium, the members pinned at the head. A mast alone
    takes the rest by bending, stays alone leave it over (`residual`). MST-2 (OWN): stay
    H / cos b, mast V + H tan b.

    Examples
    --------
    >>> joint = joint_equilibrium([(63.333, -14.361)], mast=(0, -6), stays=[(-10, -6)])
    >>> round(joint.mast, 2), round(joint.stays[0], 2)
    (-52.36, 73.86)
    """
    pull = _sum([_vector("cables", cable) for cable in cables])
    pull = (pull[0], pull[1] - _vector("load", (load, load))[0])
    size = sum(math.hypot(*cable) for cable in cables) + abs(load)
    axis = None if mast is None else _unit("mast", mast)
    lines = tuple(_unit("stay", stay) for stay in stays)
    parts = _parts(stays, lines, shares)
    resultant = _sum([_times(part, line) for part, line in zip(parts, lines, strict=True)])
    axial, stay = _solve(pull, axis, resultant if stays else None)
    forces = tuple(_plus(stay * part) for part in parts)
    members = [_times(force, line) for force, line in zip(forces, lines, strict=True)]
    if axis is not None:
        members.append(_times(axial, axis))
    left_over = _sum([pull, *members])
    size += sum(math.hypot(*member) for member in members)
    if math.hypot(*left_over) <= _ROUNDING * size:
        left_over = (0.0, 0.0)
    shear, moment, residual = 0.0, 0.0, left_over
    if axis is not None and mast is not None:
        shear = _plus(left_over[1] * axis[0] - left_over[0] * axis[1])
        moment, residual = shear * math.hypot(*mast), (0.0, 0.0)
    return Joint(
        mast=None if axis is None else _plus(axial),
        stays=forces,
        head_shear=shear,
        base_moment=moment,
        residual=residual,
        mast_foot=None if axis is None else _sum([_times(-axial, axis), left_over]),
        stay_feet=tuple(_times(-f, line) for f, line in zip(forces, lines, strict=True)),
        sides=_sides(cables, load, members, axis is not None, left_over),
        mast_in_tension=axis is not None and axial > _ROUNDING * size,
        stay_in_compression=any(force < -_ROUNDING * size for force in forces),
        stay_parallel_to_mast=axis is not None and bool(stays) and _is_parallel(axis, resultant),
    )


def anchor_force(
    pull: Vector,
    direction: Vector,
    *,
    weight: float | None = None,
    mu: float | None = None,
    mark: str = "",
    at: Vector = (0.0, 0.0),
) -> AnchorForce:
    """Find what an anchor takes and how safely its block holds.

    Parameters
    ----------
    pull : (float, float)
        Force of the member on its foot, right and up positive [force]: `Joint.stay_feet`.
    direction : (float, float)
        Head to foot of the member [length].
    weight : float, optional
        Of the block [force].
    mu : float, optional
        Coefficient of friction under the block.
    mark, at : str, (float, float)
        Carried over.

    Returns
    -------
    AnchorForce
        Horizontal towards the head positive, uplift positive. A factor is None where its weight
        or coefficient is not stated, or where nothing slides or lifts the block.

    Raises
    ------
    ValueError
        If a number is not finite, the weight is not positive or the coefficient negative.

    Notes
    -----
    Uplift factor: weight / uplift. Sliding factor: mu (weight - uplift) / horizontal, friction
    on the net weight, and zero where the block would lift. ANC-1 (OWN).

    Examples
    --------
    >>> anchor = anchor_force((50.0, 20.0), (-10, -4), weight=100.0, mu=0.5)
    >>> anchor.horizontal, anchor.uplift, anchor.uplift_factor, anchor.sliding_factor
    (50.0, 20.0, 5.0, 0.8)
    """
    across, up = _vector("pull", pull)
    size = math.hypot(across, up)
    towards_head = -_vector("direction", direction)[0]
    horizontal = across if towards_head > 0.0 else -across if towards_head < 0.0 else abs(across)
    if weight is not None and not (math.isfinite(weight) and weight > 0.0):
        message = f"weight must be a positive number, not {weight}"
        raise ValueError(message)
    if mu is not None and not (math.isfinite(mu) and mu >= 0.0):
        message = f"mu must be a number from 0, not {mu}"
        raise ValueError(message)
    lifts, slides = up > _ROUNDING * size, abs(across) > _ROUNDING * size
    sliding = None
    if weight is not None and mu is not None and slides:
        sliding = mu * max(0.0, weight - up) / abs(across)
    return AnchorForce(
        mark=mark,
        at=at,
        horizontal=_plus(horizontal),
        uplift=_plus(up),
        sliding_factor=sliding,
        uplift_factor=weight / up if weight is not None and lifts else None,
    )


def _solve(pull: Vector, axis: Vector | None, stay: Vector | None) -> tuple[float, float]:
    """Axial force of the mast and multiplier of the stays' resultant."""
    if axis is None:
        return 0.0, 0.0 if stay is None else -_dot(pull, stay) / _dot(stay, stay)
    if stay is None or _is_parallel(axis, stay):
        return -_dot(pull, axis), 0.0
    area = _cross(axis, stay)
    return -_cross(pull, stay) / area, -_cross(axis, pull) / area


def _parts(
    stays: Sequence[Vector], lines: Sequence[Vector], shares: Sequence[float | None] | None
) -> tuple[float, ...]:
    """Relative axial force of each stay; the joint fixes their common multiplier."""
    given = [share for share in shares or () if share is not None]
    reach = max((math.hypot(*stay) for stay in stays), default=0.0)
    same = all(math.dist(stay, stays[0]) <= _SAME_FOOT * reach for stay in stays)
    if same and not given:
        return tuple(1.0 / len(stays) for _ in stays)
    if len(given) != len(stays):
        message = (
            f"{len(stays)} stays of one support have different feet and {len(given)} shares: "
            "give each CABLE-ANCHOR its SHARE, fractions that sum to 1."
        )
        raise LayoutError(message)
    if any(not (share >= 0.0) for share in given) or not abs(math.fsum(given) - 1.0) <= _SHARES:
        message = (
            f"The shares {', '.join(f'{share:g}' for share in given)} of the stays of one "
            "support must be fractions that sum to 1."
        )
        raise LayoutError(message)
    if same:
        return tuple(given)
    if any(abs(line[0]) <= _PARALLEL for line in lines):
        message = "a stay with a share of the horizontal component must not be vertical"
        raise ValueError(message)
    return tuple(share / line[0] for share, line in zip(given, lines, strict=True))


def _sides(
    cables: Sequence[Vector], load: float, members: list[Vector], has_mast: bool, rest: Vector
) -> tuple[JointSide, ...]:
    """Lay end to end: cables, load, stays, mast, and what the mast takes by bending."""
    sides = [(f"cable {i}", (cable[0], cable[1])) for i, cable in enumerate(cables, 1)]
    if load:
        sides.append(("load", (0.0, -load)))
    stay_count = len(members) - has_mast
    sides += [(f"stay {i}", force) for i, force in enumerate(members[:stay_count], 1)]
    if has_mast:
        sides.append(("mast", members[-1]))
        if any(rest):
            sides.append(("head shear", (-rest[0], -rest[1])))
    return tuple(JointSide(name=name, force=force) for name, force in sides)


def _is_parallel(axis: Vector, stay: Vector) -> bool:
    return abs(_cross(axis, stay)) <= _PARALLEL * math.hypot(*stay)


def _vector(name: str, values: Sequence[float]) -> Vector:
    across, up = values
    if not (math.isfinite(across) and math.isfinite(up)):
        message = f"{name} must be finite numbers, not {values}"
        raise ValueError(message)
    return float(across), float(up)


def _unit(name: str, direction: Vector) -> Vector:
    across, up = _vector(name, direction)
    size = math.hypot(across, up)
    if size == 0.0:
        message = f"the {name} has no length: head and foot are one point"
        raise ValueError(message)
    return across / size, up / size


def _sum(vectors: Sequence[Vector]) -> Vector:
    return math.fsum(v[0] for v in vectors), math.fsum(v[1] for v in vectors)


def _times(factor: float, vector: Vector) -> Vector:
    return _plus(factor * vector[0]), _plus(factor * vector[1])


def _plus(value: float) -> float:
    """Turn minus zero into zero, which prints without its sign."""
    return value + 0.0


def _dot(a: Vector, b: Vector) -> float:
    return a[0] * b[0] + a[1] * b[1]


def _cross(a: Vector, b: Vector) -> float:
    return a[0] * b[1] - a[1] * b[0]
