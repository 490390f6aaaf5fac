"""Layouts made by hand for tests that need no drawing."""

from __future__ import annotations

from dxfcable.model import (
    Anchor,
    Cable,
    Layout,
    LoadPoint,
    LoadSymbol,
    Mast,
    Origin,
    Rule,
    RuleKind,
    Stay,
    Support,
)


def sample_cable(**changes: object) -> dict[str, object]:
    """Return the arguments of the worked cable: two loads, unlevel supports, sag 2.4."""
    facts: dict[str, object] = {
        "mark": "C1",
        "supports": (
            Support(key=0, mark="S1", x=0.0, y=12.0),
            Support(key=1, mark="S2", x=24.0, y=13.0),
        ),
        "loads": (load("P1", 8.0, 15.0, y=7.586), load("P2", 16.0, 21.0, y=7.0)),
        "rule": Rule(kind=RuleKind.SAG, value=2.4),
        "ea": 9000.0,
        "origin": Origin(handle="A1", line=10, layer="S-CABL-DATA", kind="INSERT"),
    }
    return facts | changes


def load(mark: str, x: float, value: float, *, y: float = 0.0, case: str = "D") -> LoadPoint:
    """Return a load point of one case."""
    return LoadPoint(mark=mark, x=x, y=y, cases=((case, value),), symbol=LoadSymbol.POINT)


def layout(*cables: Cable, masts: tuple[Mast, ...] = (), stays: tuple[Stay, ...] = ()) -> Layout:
    """Return a metric layout of some cables."""
    supports = {s.key: s for cable in cables for s in cable.supports}
    return Layout(
        version="AC1015",
        length_unit="m",
        force_unit="kN",
        supports=tuple(supports[k] for k in sorted(supports)),
        cables=cables,
        masts=masts,
        stays=stays,
    )


def cable(**changes: object) -> Cable:
    """Return the worked cable with some facts changed."""
    return Cable(**sample_cable(**changes))  # type: ignore[arg-type]  # checked by the dataclass


def sample(**changes: object) -> Layout:
    """Return the worked cable with a mast and a stay at its left support."""
    return layout(
        cable(**changes),
        masts=(Mast(support=0, foot=(0.0, 6.0)),),
        stays=(Stay(support=0, foot=(-10.0, 6.0)),),
    )


def anchor(
    *,
    weight: float | None = None,
    mu: float | None = None,
    share: float | None = None,
    fs_slide: float | None = None,
    fs_uplift: float | None = None,
) -> Anchor:
    """Return an anchor block with some attributes."""
    return Anchor(
        mark="A1",
        at=(-10.0, 6.0),
        weight=weight,
        mu=mu,
        share=share,
        fs_slide=fs_slide,
        fs_uplift=fs_uplift,
    )
