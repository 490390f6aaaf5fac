"""States, envelope, clearance, movement and plan areas as JSON: keys are public."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence

    from dxfcable.model import (
        Anchorage,
        Clearance,
        Envelope,
        Extreme,
        Movement,
        Node,
        PlanArea,
        Reaction,
        Segment,
        State,
    )

Json = dict[str, object]


def state(
    found: State,
    node: Callable[[Node], Json],
    segment: Callable[[Segment], Json],
    reaction: Callable[[Reaction], Json],
    anchorage: Callable[[Anchorage], Json],
) -> Json:
    """Describe one state; one without a determinate shape says why in `fault`."""
    governs = found.governs
    return {
        "combo": found.combo,
        "level": found.level,
        "level_assumed": found.level_is_assumed,
        "delta_t": found.delta_t,
        "fault": found.fault or None,
        "horizontal": _number(found.horizontal),
        "max_tension": _number(found.max_tension),
        "governs": {"segment": governs.segment, "end": governs.end, "support": governs.support}
        if governs
        else None,
        "low_point": list(found.low_point) if found.low_point else None,
        "points": [node(n) for n in found.nodes],
        "segments": [segment(s) for s in found.segments],
        "reactions": [reaction(r) for r in found.reactions],
        "anchorages": [anchorage(a) for a in found.anchorages],
        "supports": [{"mark": s.mark, "dx": s.dx, "dy": s.dy} for s in found.supports],
        "slack": list(found.slack),
    }


def envelope(found: Envelope | None) -> Json | None:
    """Describe the extremes over all states."""
    if found is None:
        return None
    return {
        "max_tension": _extreme(found.max_tension),
        "min_tension": _extreme(found.min_tension),
        "max_uplift": _extreme(found.max_uplift) if found.max_uplift else None,
        "points": [
            {"mark": p.mark, "lowest": _extreme(p.lowest), "highest": _extreme(p.highest)}
            for p in found.points
        ],
        "segments": [
            {"name": s.name, "max": _extreme(s.most), "min": _extreme(s.least)}
            for s in found.segments
        ],
    }


def clearance(found: Clearance | None) -> Json | None:
    """Describe the least clearance."""
    if found is None:
        return None
    return {"least": found.least, "x": found.at[0], "state": found.state}


def movement(found: Movement) -> Json:
    """Describe what a load change does to one node."""
    return {
        "mark": found.mark,
        "support": found.is_support,
        "dx": found.dx,
        "dy": found.dy,
        "sum_dx": found.sum_dx,
        "sum_dy": found.sum_dy,
        "load_before": found.load_before,
        "load_after": found.load_after,
        "elevation_before": found.elevation_before,
        "elevation_after": found.elevation_after,
        "tension_before": found.tension_before,
        "tension_after": found.tension_after,
        "lean_deg": found.lean_deg,
        "hanger_change": found.hanger_change,
    }


def plan_area(found: PlanArea, marks: Sequence[str]) -> Json:
    """Describe a loaded area and what each load point takes of it; `marks` are the cables'."""
    return {
        "area": found.number,
        "net_area": found.net_area,
        "pressures": dict(found.pressures),
        "cells": [
            {
                "cable": marks[cell.cable],
                "mark": cell.mark,
                "area": cell.area,
                "cases": dict(cell.cases),
            }
            for cell in found.cells
        ],
    }


def _extreme(found: Extreme) -> Json:
    return {"value": found.value, "combo": found.combo}


def _number(value: float) -> float | None:
    """JSON knows no not-a-number."""
    return value if math.isfinite(value) else None
