"""Cables whose unstressed lengths are fixed: formed in this run, or cut and recorded."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.curves import Shape
    from dxfcable.model import Cable
    from dxfcable.recorded import CableRecord


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
    """What a cut cable stands by: its record, and the temperature it stands at [K]."""

    record: CableRecord
    delta_t: float = 0.0
