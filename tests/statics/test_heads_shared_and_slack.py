"""Heads that two cables share, stays and cables that are slack, masts that nothing holds."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest

from dxfcable.statics.catenary_start import NO_SHAPE, TOO_SHORT
from dxfcable.statics.heads import respond_with_heads
from dxfcable.statics.heads_layout import CableChain, Head, StayMember, unstressed_from
from dxfcable.statics.heads_search import PULLED_STRAIGHT
from tests.statics.heads_cases import Formed, benchmark


def two_spans(*, ea: float | None = 40_000.0, stays: int = 2, weight: float = 0.0) -> Formed:
    """Two like spans of 40 over one mast of 10 with a fixed saddle, far ends held."""
    lengths = [math.hypot(10.0, 3.0), 10.0, 10.0, math.hypot(10.0, 3.0)]
    tensions = np.array([math.hypot(40.0, 12.0), 40.0, 40.0, math.hypot(40.0, 12.0)])
    unstressed = np.array(lengths) if ea is None else np.array(lengths) / (1.0 + tensions / ea)
    cables = tuple(
        CableChain(
            left=k, right=k + 1, unstressed_lengths=unstressed, loads=[12.0, 0.0, 12.0], ea=ea,
            weight=weight,
        )
        for k in range(2)
    )  # fmt: skip
    at, foot = (40.0, 0.0), (40.0, -10.0)
    members = tuple(
        StayMember(
            foot=(40.0 + side * 10.0, -10.0),
            unstressed_length=unstressed_from(at, (40.0 + side * 10.0, -10.0), 5.0, 20_000.0),
            ea=20_000.0,
        )
        for side in (-1.0, 1.0)[:stays]
    )
    return Formed(
        cables=cables,
        supports=((0.0, 0.0), at, (80.0, 0.0)),
        heads=(Head(support=1, at=at, foot=foot, stays=members, name="S2"),),
        head_loads=(0.0,),
    )


def test_a_head_between_two_cables_yields_to_the_heavier_span() -> None:
    loads = [np.array([[12.0, 0, 12], [20.0, 0, 20]]), np.array([[12.0, 0, 12], [12.0, 0, 12]])]
    found = two_spans().under(loads)
    assert found.faults == ("", "")
    assert found.movements[0].tolist() == [[0.0, 0.0]]
    assert found.movements[1, 0, 0] < -0.01
    left, right = found.cables
    assert left.x[1, -1] == pytest.approx(right.x[1, 0], abs=1e-13)
    assert left.y[1, -1] == pytest.approx(right.y[1, 0], abs=1e-13)
    held = 66.0  # about what the heavier span would pull on a rigid support
    assert 40.0 < right.horizontals[1] < left.horizontals[1] < held


def test_a_slack_stay_is_told_and_the_other_span_holds_the_mast() -> None:
    loads = [np.array([[20.0, 0, 20]]), np.array([[12.0, 0, 12]])]
    found = two_spans().under(loads)
    assert found.faults == ("",)
    assert found.slack_stays[0].tolist() == [[True, False]]
    assert found.stays[0][0, 0] == 0.0
    without = two_spans()
    head = replace(without.heads[0], stays=without.heads[0].stays[1:])
    alone = replace(without, heads=(head,)).under(loads)
    assert alone.movements == pytest.approx(found.movements, rel=1e-9)


def test_a_mast_without_stays_is_held_by_its_cables() -> None:
    found = two_spans(stays=0).under([np.array([[14.0, 0, 14]]), np.array([[12.0, 0, 12]])])
    assert found.faults == ("",)
    assert found.movements[0, 0, 0] < 0.0
    left, right = found.cables
    assert found.masts[0, 0] < -24.0
    assert left.horizontals[0] == pytest.approx(right.horizontals[0], rel=0.01)


def test_an_unloaded_span_without_weight_acts_as_a_stay() -> None:
    layout = two_spans(stays=0)
    found = layout.under([np.zeros((1, 3)), np.array([[12.0, 0, 12]])])
    assert found.faults == ("",)
    idle = found.cables[0]
    chord = math.hypot(40.0 + found.movements[0, 0, 0], found.movements[0, 0, 1])
    strain = chord / float(np.sum(layout.cables[0].unstressed_lengths)) - 1.0
    assert idle.max_tensions[0] == pytest.approx(40_000.0 * strain, rel=1e-9)
    assert np.ptp(np.diff(idle.y[0]) / np.diff(idle.x[0])) < 1e-9


def test_an_idle_cable_has_no_shape_and_leaves_the_others_theirs() -> None:
    loads = [np.array([[12.0, 0, 12], [12.0, 0, 12]]), np.array([[12.0, 0, 12], [0.0, 0, 0]])]
    found = two_spans().under(loads)
    assert found.faults == ("", NO_SHAPE)
    assert found.heads_found.tolist() == [True, True]
    assert found.cables[1].faults[1] == NO_SHAPE
    assert np.all(np.isnan(found.cables[1].x[1]))
    assert found.cables[0].faults == ("", "")
    assert found.movements[1, 0, 0] < 0.0
    # the right stay alone takes the left cable's pull: 45 degrees on an upright mast
    assert found.stays[0][1, 1] == pytest.approx(
        math.sqrt(2.0) * found.cables[0].horizontals[1], rel=0.02
    )


def test_masts_whose_stays_are_slack_are_refused_and_no_shape_is_made_up() -> None:
    """Without loads the stays shorten, the cable straightens, and both masts could sway."""
    layout = replace(benchmark(), head_loads=(5.0, 5.0))
    found = layout.under([np.array([[0.0] * 9, [10.0] * 9])])
    assert found.faults[1] == ""
    assert "support 1 has an equilibrium that is not stable" in found.faults[0]
    assert found.faults[0].endswith("its stay is slack.")
    assert found.heads_found.tolist() == [False, True]
    assert np.all(np.isnan(found.movements[0]))
    assert np.all(np.isnan(found.cables[0].y[0]))
    assert found.cables[0].faults[0] == found.faults[0]
    assert found.slack_stays[0].tolist() == [[False], [False]]
    with pytest.raises(ValueError, match="not stable"):
        found.cables[0].state(0)


def test_a_mast_that_its_stay_pulls_over_falls_and_it_is_said() -> None:
    layout = benchmark()
    found = respond_with_heads([], layout.supports, layout.heads[:1], [[5.0], [50.0]])
    for fault in found.faults:
        assert fault == "The head at support 1 would fall: its stay is slack."


def test_an_equilibrium_that_is_not_stable_is_refused() -> None:
    """A heavy load on a mast between two cables too weak to keep it upright."""
    found = two_spans(stays=0).under(head_loads=np.array([[0.0], [3000.0]]))
    assert found.faults[0] == ""
    assert "S2 has an equilibrium that is not stable" in found.faults[1]
    assert "it has no stay" in found.faults[1]


def test_a_cable_without_stretch_pulled_straight_is_refused() -> None:
    found = two_spans(ea=None, stays=0).under([np.zeros((1, 3)), np.array([[12.0, 0, 12]])])
    assert found.faults == (PULLED_STRAIGHT,)


def test_heads_are_drawn_to_a_cable_that_would_not_reach_them() -> None:
    layout = benchmark(ea=None)
    right = [(120.0, 0.0), (124.0, 0.0)]  # the far support, held, moves beyond the cable's length
    supports = np.array([[(0.0, 0.0), end] for end in right])
    found = respond_with_heads(layout.cables, supports, layout.heads[:1])
    assert found.faults == ("", "")
    assert found.movements[1, 0, 0] > 124.0 - 123.0976
    held = respond_with_heads(layout.cables, supports)
    assert held.faults == ("", TOO_SHORT)
