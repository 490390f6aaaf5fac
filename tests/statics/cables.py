"""Cables for the laws of the catenary: hypothesis strategies from slack to taut."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
from hypothesis import strategies as st

from dxfcable.statics.catenary import respond

if TYPE_CHECKING:
    from numpy.typing import NDArray

    from dxfcable.statics.catenary import Response

    Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Cut:
    """A cable of fixed unstressed lengths under its loads."""

    lengths: tuple[float, ...]
    weight: float
    loads: tuple[float, ...]
    across: float
    up: float
    ea: float | None

    @property
    def ends(self) -> list[tuple[float, float]]:
        return [(0.0, 0.0), (self.across, self.up)]

    @property
    def total(self) -> float:
        """All vertical force that the supports carry."""
        return sum(self.loads) + self.weight * sum(self.lengths)

    def respond(self) -> Response:
        return respond(self.lengths, self.weight, self.loads, self.ends, ea=self.ea)


@st.composite
def cut_cables(
    draw: st.DrawFn, *, uplift: bool = True, stretch: bool | None = None, deepest: float = 2.0
) -> Cut:
    """Weight from 0 to 100 times the loads, sag over span from 1/500, slopes to 60 degrees."""
    across = 10.0 ** draw(st.floats(0.0, 3.0))
    up = across * math.tan(math.radians(draw(st.floats(-60.0, 60.0))))
    parts = np.array(draw(st.lists(st.floats(0.02, 1.0), min_size=1, max_size=7)))
    hundredths = st.integers(-500 if uplift else 0, 1000)
    count = parts.size - 1
    loads = tuple(v / 100.0 for v in draw(st.lists(hundredths, min_size=count, max_size=count)))
    force = sum(abs(load) for load in loads) or 1.0
    ratio = draw(st.one_of(st.just(0.0) if loads else st.just(1.0), st.floats(-4.0, 2.0)))
    heavy = 0.0 if ratio == 0.0 else 10.0**ratio
    sag = 10.0 ** draw(st.floats(math.log10(1.0 / 500.0), math.log10(deepest)))
    longer = 8.0 / 3.0 * sag * sag if sag < 0.3 else 2.0 * sag - 0.36
    length = math.hypot(across, up) * (1.0 + longer)
    elastic = draw(st.booleans()) if stretch is None else stretch
    ea = (1.0 + heavy) * force * 10.0 ** draw(st.floats(2.0, 5.0)) if elastic else None
    return Cut(
        lengths=tuple(float(v) for v in length * parts / parts.sum()),
        weight=heavy * force / length,
        loads=loads,
        across=across,
        up=up,
        ea=ea,
    )
