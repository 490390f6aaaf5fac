"""The force diagram of one span: load line, pole and rays, with Bow's letters.

Loads read from left to right go down the load line; the pole stands to its right, so that each
ray runs parallel to its segment of a hanging cable. (Common practice of graphic statics; the
reciprocal figure, theorem PRP-6 of the published laws of string polygons.)
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.model import ForceDiagram

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from dxfcable.statics.catenary_shape import Catenary
    from dxfcable.statics.funicular import Funicular

# I is taken for 1, and O is the pole.
_ALPHABET = "ABCDEFGHJKLMNPQRSTUVWXYZ"


def bow_letters(count: int, start: int = 0) -> tuple[str, ...]:
    """Name the spaces between the external forces: A to Z without I and O, then AA, AB ..

    Parameters
    ----------
    count : int
        How many spaces.
    start : int
        How many were named before, in the spans to the left.

    Returns
    -------
    tuple of str
        The letters.

    Raises
    ------
    ValueError
        If a number is negative.

    Examples
    --------
    >>> bow_letters(3), bow_letters(3, start=23)
    (('A', 'B', 'C'), ('Z', 'AA', 'AB'))
    """
    if count < 0 or start < 0:
        message = f"count and start must not be negative, not {count} and {start}"
        raise ValueError(message)
    return tuple(_letter(number) for number in range(start, start + count))


def force_diagram(cable: Funicular | Catenary, *, start: int = 0) -> ForceDiagram:
    """Draw the force diagram of a formed span in force units.

    Parameters
    ----------
    cable : Funicular or Catenary
        The span in equilibrium.
    start : int
        How many spaces the spans to the left have named.

    Returns
    -------
    ForceDiagram
        A zero load keeps its letter: two letters then share one ordinate. With weight each
        piece has two ordinates, for its end tangents, and its weight between them.

    Notes
    -----
    The pole lies the pull to the right of the load line. The closing ray, parallel to the
    closing string, cuts the load line into the reactions of the simple beam.

    Examples
    --------
    >>> from dxfcable.statics.funicular import polygon
    >>> diagram = force_diagram(polygon([0, 8, 16, 24], [15, 21], 12, 13, 152 / 2.4))
    >>> diagram.letters, diagram.load_line, round(diagram.closing, 9)
    (('A', 'B', 'C'), (0.0, -15.0, -36.0), -17.0)
    """
    pole = float(cable.verticals_left[0])  # the first ray starts at ordinate 0
    if cable.weight:
        ends = np.column_stack((cable.verticals_left, cable.verticals_right)).reshape(-1)
        load_line = pole - ends
        load_line[0] = 0.0
    else:
        load_line = -np.cumsum(np.append(0.0, cable.loads)) + 0.0  # no minus zero
    slope = float(cable.y[-1] - cable.y[0]) / cable.span
    return ForceDiagram(
        letters=bow_letters(cable.loads.size + 1, start),
        load_line=tuple(load_line.tolist()),
        pole=(cable.horizontal, pole),
        closing=pole - cable.horizontal * slope,
    )


def closure_error(
    diagram: ForceDiagram,
    reaction_left: tuple[float, float],
    reaction_right: tuple[float, float],
) -> float:
    """Find by how much the polygon of all external forces of a span stays open.

    Parameters
    ----------
    diagram : ForceDiagram
        Its load line is taken.
    reaction_left, reaction_right : (float, float)
        Horizontal outward positive, vertical up positive [force].

    Returns
    -------
    float
        Length of the gap [force]; zero in equilibrium.

    Examples
    --------
    >>> diagram = ForceDiagram(letters=("A", "B"), load_line=(0.0, -8.0), pole=(3.0, -4.0),
    ...                        closing=-4.0)
    >>> closure_error(diagram, (3.0, 4.0), (3.0, 4.0))
    0.0
    """
    across = reaction_right[0] - reaction_left[0]
    up = reaction_left[1] + reaction_right[1] + diagram.load_line[-1]
    return math.hypot(across, up)


def parallel_error(diagram: ForceDiagram, x: ArrayLike, y: ArrayLike) -> float:
    """Find by how much the rays fail to run parallel to the segments of a cable.

    Parameters
    ----------
    diagram : ForceDiagram
        With n+1 rays.
    x, y : (n+2,) array of float
        Points of the cable from left to right [length].

    Returns
    -------
    float
        Greatest vertical gap at the load line between a ray and the parallel to its segment
        through the pole [force].

    Raises
    ------
    ValueError
        If the number of points is not the number of rays plus one.

    Examples
    --------
    >>> diagram = ForceDiagram(letters=("A", "B"), load_line=(0.0, -8.0), pole=(3.0, -4.0),
    ...                        closing=-4.0)
    >>> parallel_error(diagram, [0, 3, 6], [0, -4, 0])
    0.0
    """
    across, up = np.diff(np.asarray(x, np.float64)), np.diff(np.asarray(y, np.float64))
    if across.shape != (len(diagram.load_line),) or up.shape != across.shape:
        message = (
            f"x and y must have {len(diagram.load_line) + 1} points, "
            f"not {np.size(x)} and {np.size(y)}"
        )
        raise ValueError(message)
    rays = diagram.pole[1] - np.asarray(diagram.load_line)
    return float(np.max(np.abs(rays - diagram.pole[0] * up / across)))


def _letter(number: int) -> str:
    """Count in letters: after the last single one come the pairs, then the triples."""
    text = ""
    number += 1
    while number:
        number, digit = divmod(number - 1, len(_ALPHABET))
        text = _ALPHABET[digit] + text
    return text
