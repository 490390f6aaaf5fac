"""Cables whose unstressed lengths are fixed: formed in this run, or cut and recorded."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.model import Cable
    from dxfcable.recorded import CableRecord
    from dxfcable.solving.curves import Shape


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Built:
    """A cable as built: its unstressed lengths, left to right [length].

    `shape` is how it stands, `delta_t` the temperature change that case T means [K].
    """

    cable: Cable
    pieces: tuple[float, ...]
    shape: Shape | None = None
    delta_t: float = 0.0


@dataclass(frozen=True, slots=True, kw_only=True)
class Standing:
    """What a cut cable stands by.

    Attributes
    ----------
    record : CableRecord
        Its unstressed lengths, and what it was formed under.
    delta_t : float
        Change from the reference temperature that it stands at [K].
    is_revised : bool
        Whether what the drawing says now counts; else it stands as recorded.
    hangers : tuple of float or None
        Lengths of its hangers as formed, which they keep [length]; empty where not known.
    formed_pull : float or None
        Its pull as formed [force].
    """

    record: CableRecord
    delta_t: float = 0.0
    is_revised: bool = False
    hangers: tuple[float | None, ...] = ()
    formed_pull: float | None = None
