"""What every part of the reader needs: settings, units, pieces, and where findings go."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.units import convert, is_imperial

if TYPE_CHECKING:
    from dxfcable.drawing.reading.faults import Faults
    from dxfcable.drawing.reading.pieces import Pieces
    from dxfcable.forces import Style
    from dxfcable.model import Origin, Point, Rule, SupportKind
    from dxfcable.quantities import Force, Length, LineLoad
    from dxfcable.settings import Settings


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Context:
    """The drawing as pieces, and how it is to be read."""

    settings: Settings
    style: Style
    pieces: Pieces
    faults: Faults

    @property
    def unit(self) -> str:
        """The drawing's unit of length."""
        return self.style.length_unit

    @property
    def touch(self) -> float:
        """Share of the span within which points are one."""
        return self.settings.limits.touch

    def finest(self) -> float:
        """Give 1/16 in or 1 mm, what elevations are shown to [drawing unit]."""
        if is_imperial(self.unit):
            return convert(1 / 16, "in", self.unit)
        return convert(1.0, "mm", self.unit)


@dataclass(slots=True, kw_only=True)
class SupportDraft:
    """A support point while it is being understood."""

    at: Point
    origin: Origin
    mark: str = ""
    kind: SupportKind | None = None
    elevation: Length | None = None
    is_block: bool = False


@dataclass(slots=True, kw_only=True)
class CableDraft:
    """A cable while it is being understood; `keys` are its supports from left to right."""

    keys: tuple[int, ...]
    string: tuple[Point, ...]
    origin: Origin
    mark: str = ""
    rule: Rule | None = None
    rule_force: Force | None = None
    under: str | None = None
    weight: LineLoad | None = None
    weight_case: str | None = None
    ea: Force | None = None
    alpha: float | None = None
    delta_t: float | None = None
    capacity: Force | None = None
    strand: str = ""
    fitting_left: str = ""
    fitting_right: str = ""
    datum: float | None = None

    @property
    def span(self) -> float:
        """Distance between the end supports in x."""
        return self.string[-1][0] - self.string[0][0]
