"""The table of usual sags that a drafter picks a rule from."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.model import RuleKind
from dxfcable.statics.beam import hanging_beam, stated
from dxfcable.statics.forming import form

if TYPE_CHECKING:
    from collections.abc import Iterable

    from numpy.typing import ArrayLike


@dataclass(frozen=True, slots=True, kw_only=True)
class SagRow:
    """One line of the table by which a rule is picked: `ratio` is span over sag."""

    ratio: float
    sag: float
    horizontal: float
    max_tension: float
    length: float
    unstressed_length: float


def sag_table(
    x: ArrayLike,
    loads: ArrayLike,
    y_left: float,
    y_right: float,
    ratios: Iterable[float] = (8, 10, 12, 15, 20),
    *,
    ea: float | None = None,
) -> tuple[SagRow, ...]:
    """Tabulate pull, tension and length over the usual range of sags, to pick a rule from.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force].
    y_left, y_right : float
        Ordinates of the supports [length].
    ratios : iterable of float
        Span over sag, > 0; 8 to 20 is common practice for cable roofs and footbridges.
    ea : float, optional
        Axial stiffness [force].

    Returns
    -------
    tuple of SagRow
        In the order of the ratios.

    Raises
    ------
    RuleError
        If no simple-beam moment is downward, or a ratio is not positive.

    Examples
    --------
    >>> [round(row.horizontal, 2) for row in sag_table([0, 8, 16, 24], [15, 21], 12, 13)]
    [50.67, 63.33, 76.0, 95.0, 126.67]
    """
    span = hanging_beam(x, loads).span
    rows = []
    for ratio in ratios:
        sag = span / stated("ratio of span to sag", ratio)
        cable = form(x, loads, y_left, y_right, RuleKind.SAG, sag, ea=ea)
        rows.append(
            SagRow(
                ratio=float(ratio),
                sag=sag,
                horizontal=cable.horizontal,
                max_tension=cable.max_tension,
                length=cable.length,
                unstressed_length=cable.unstressed_length,
            )
        )
    return tuple(rows)
