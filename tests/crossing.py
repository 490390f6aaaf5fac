"""A weightless crossing of nine equal loads over level supports, in feet and kip.

Span 120, loads every 12, sag 12, EA 1.35 in2 times 24,000 ksi: the pages of checks call its
figures OWN, computed there with an independent solver.
"""

from __future__ import annotations

from dxfcable.model import (
    Anchor,
    Cable,
    Layout,
    LoadPoint,
    LoadSymbol,
    Mast,
    Rule,
    RuleKind,
    Stay,
    Support,
)
from tests.layouts import layout as metric

EA = 32_400.0
MIDDLE = 5


def loads(dead: float = 10.0, live: float | None = None) -> tuple[LoadPoint, ...]:
    """Return the nine loads; `live` adds a second case."""
    cases = (("D", dead),) if live is None else (("D", dead), ("L", live))
    return tuple(
        LoadPoint(mark=f"P{k}", x=12.0 * k, y=-20.0, cases=cases, symbol=LoadSymbol.POINT)
        for k in range(1, 10)
    )


def crossing(points: tuple[LoadPoint, ...] | None = None, **changes: object) -> Cable:
    """Return the cable, some facts changed."""
    facts: dict[str, object] = {
        "mark": "C1",
        "supports": (
            Support(key=0, mark="S1", x=0.0, y=0.0),
            Support(key=1, mark="S2", x=120.0, y=0.0),
        ),
        "loads": loads() if points is None else points,
        "rule": Rule(kind=RuleKind.SAG, value=12.0),
        "under": "D",
        "ea": EA,
    }
    return Cable(**(facts | changes))  # type: ignore[arg-type]  # checked by the dataclass


def layout(cable: Cable, *, is_stayed: bool = False) -> Layout:
    """Return the cable on rigid supports, or on two masts each with one stay at 30 degrees."""
    whole = metric(cable)
    masts: tuple[Mast, ...] = ()
    stays: tuple[Stay, ...] = ()
    if is_stayed:
        across, height = 46.2 * 3.0**0.5 / 2.0, 23.1
        masts = tuple(Mast(support=k, foot=(120.0 * k, -height)) for k in (0, 1))
        feet = ((-across, -height), (120.0 + across, -height))
        stays = tuple(
            Stay(support=k, foot=foot, anchor=Anchor(mark=f"A{k + 1}", at=foot, ea=EA))
            for k, foot in enumerate(feet)
        )
    return Layout(
        version="AC1015",
        length_unit="ft",
        force_unit="kip",
        supports=whole.supports,
        cables=whole.cables,
        masts=masts,
        stays=stays,
    )
