"""From a cable as formed to the length that the shop measures and cuts.

Lengths are added exactly and never rounded here; whoever shows them rounds once.
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.beam import finite, positive

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike, NDArray


def unstressed(length: float, tension: float, ea: float | None) -> float:
    """Find the unstressed length of a straight member that a tension stretches.

    Parameters
    ----------
    length : float
        Under that tension [length].
    tension : float
        [force]; a member that is slack, tension zero or less, is as long as it was.
    ea : float or None
        Axial stiffness [force]; None for a member that does not stretch.

    Returns
    -------
    float
        Length without tension [length].

    Raises
    ------
    ValueError
        If a number is not finite, or the stiffness not positive.

    Notes
    -----
    L0 = L / (1 + T / EA), with strain on the unstressed length: linear elasticity, derived
    (OWN). The same definition is used for the pieces of a cable in `funicular` and `catenary`.

    Examples
    --------
    >>> round(unstressed(10.01, 9.0, 9000.0), 12)
    10.0
    """
    return finite("length", length) / _stretch(tension, ea)


def at_tension(unstressed_length: float, tension: float, ea: float | None) -> float:
    """Find the length of a straight member under a measuring tension.

    Parameters
    ----------
    unstressed_length : float
        [length].
    tension : float
        [force]; zero or less stretches nothing.
    ea : float or None
        Axial stiffness [force]; None for a member that does not stretch.

    Returns
    -------
    float
        L0 (1 + T / EA) [length], the inverse of `unstressed`.

    Raises
    ------
    ValueError
        If a number is not finite, or the stiffness not positive.

    Examples
    --------
    >>> round(at_tension(10.0, 9.0, 9000.0), 12)
    10.01
    """
    return finite("unstressed_length", unstressed_length) * _stretch(tension, ea)


def between_pins(
    pieces: ArrayLike,
    offsets: tuple[float, float],
    tensions: tuple[float, float],
    ea: float | None,
) -> NDArray[np.float64]:
    """Take what reaches from a support's point to the cable's pin off the outer pieces.

    Parameters
    ----------
    pieces : (n,) array of float
        Unstressed lengths from support to support, left to right [length].
    offsets : (float, float)
        From the support's point to the pin along the cable's end, left and right, as the cable
        stands [length], zero or more.
    tensions : (float, float)
        At the ends [force].
    ea : float or None
        Axial stiffness [force].

    Returns
    -------
    (n,) array of float
        Unstressed lengths from pin to pin [length].

    Raises
    ------
    ValueError
        If an offset is not positive or zero, or takes up a whole piece.

    Notes
    -----
    What the offset replaces would have been offset / (1 + T / EA) of cable. Exact for straight
    pieces; for a cable with weight the end's tension stands for that of the offset (derived,
    OWN): the error is of the weight of the offset over EA.

    Examples
    --------
    >>> between_pins([5.0, 6.0, 5.0], (0.5, 0.25), (10.0, 10.0), None).tolist()
    [4.5, 6.0, 4.75]
    """
    lengths = np.array(pieces, dtype=np.float64)
    if lengths.ndim != 1 or not lengths.size or not np.all(np.isfinite(lengths)):
        message = f"pieces must be finite lengths in a row, not an array of shape {lengths.shape}"
        raise ValueError(message)
    for at, offset, tension in zip((0, -1), offsets, tensions, strict=True):
        if finite("offset", offset) < 0.0:
            message = f"an offset must be zero or more, not {offset:g}"
            raise ValueError(message)
        lengths[at] -= unstressed(offset, tension, ea)
    if lengths.min() <= 0.0:
        message = "the offset from support to pin takes up a whole piece of the cable"
        raise ValueError(message)
    return lengths


def running_marks(pieces: Sequence[float]) -> list[float]:
    """Sum pieces from the left: where each ends, the last at the whole length.

    Parameters
    ----------
    pieces : (n,) sequence of float
        [length].

    Returns
    -------
    (n,) list of float
        Distances from the left end [length], each the exact sum rounded once to a float.

    Examples
    --------
    >>> running_marks([0.1] * 10)[-1]
    1.0
    """
    return [math.fsum(pieces[: k + 1]) for k in range(len(pieces))]


def cut_length(
    pin_to_pin: float,
    pin_to_faces: Sequence[float],
    embedments: Sequence[float],
    constructional_stretch: float = 0.0,
) -> float:
    """Find the length that strand or rope is cut to.

    Parameters
    ----------
    pin_to_pin : float
        At the tension that it is measured under [length].
    pin_to_faces : sequence of float
        From each end's pin to the face of its socket [length].
    embedments : sequence of float
        Length of rope inside each socket [length].
    constructional_stretch : float
        Share of its length that a rope which is not prestretched settles by, zero or more.

    Returns
    -------
    float
        [length].

    Raises
    ------
    ValueError
        If no rope is left between the faces, or a number is negative or not finite.

    Notes
    -----
    Pin to pin less pin to face at both ends plus what lies in the sockets; then divided by
    1 + stretch, so that the rope is right once it has settled (common practice; relation
    derived, OWN).

    Examples
    --------
    >>> cut_length(20.0, (0.5, 0.75), (0.25, 0.25))
    19.25
    """
    for value in (*pin_to_faces, *embedments, constructional_stretch):
        if finite("a deduction", value) < 0.0:
            message = f"a deduction must be zero or more, not {value:g}"
            raise ValueError(message)
    between_faces = math.fsum([pin_to_pin, *(-value for value in pin_to_faces)])
    if between_faces <= 0.0:
        message = "the end fittings take up the whole length: no rope is left between their faces"
        raise ValueError(message)
    whole = math.fsum([pin_to_pin, *(-value for value in pin_to_faces), *embedments])
    return whole / (1.0 + constructional_stretch)


def _stretch(tension: float, ea: float | None) -> float:
    """Stretched over unstressed length."""
    if ea is None:
        return 1.0
    return 1.0 + max(finite("tension", tension), 0.0) / positive("ea", ea)
