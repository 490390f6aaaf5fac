"""The worked sample that the JSON of `solve` is described by: every number of it, from scratch.

Supports (0, 12) and (24, 13), loads 15 and 21 at x = 8 and 16, sag 2.4, EA 9000; at the left
support a mast 6 high and a stay with its foot 10 out. Own numbers, computed once elsewhere.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

from dxfcable.model import RuleKind
from dxfcable.statics.force_diagram import force_diagram
from dxfcable.statics.forming import form
from dxfcable.statics.joints import anchor_force, joint_equilibrium

if TYPE_CHECKING:
    from dxfcable.statics.funicular import Funicular

THREE_DECIMALS = 0.5e-3 + 1e-9
FOUR_DECIMALS = 0.5e-4 + 1e-9


@pytest.fixture(scope="module")
def cable() -> Funicular:
    return form([0, 8, 16, 24], [15, 21], 12.0, 13.0, RuleKind.SAG, 2.4, ea=9000.0)


def test_pull_tension_and_sag_are_the_samples(cable: Funicular) -> None:
    assert cable.horizontal == pytest.approx(63.333, abs=THREE_DECIMALS)
    assert cable.max_tension == pytest.approx(66.928, abs=THREE_DECIMALS)
    assert cable.sag == pytest.approx(2.4, rel=1e-12)


def test_both_lengths_are_the_samples(cable: Funicular) -> None:
    assert cable.length == pytest.approx(24.6576, abs=FOUR_DECIMALS)
    assert cable.unstressed_length == pytest.approx(24.4805, abs=FOUR_DECIMALS)


def test_the_first_segment_is_the_samples(cable: Funicular) -> None:
    assert cable.tensions[0] == pytest.approx(64.941, abs=THREE_DECIMALS)
    assert cable.angles[0] == pytest.approx(-12.776, abs=THREE_DECIMALS)
    assert cable.lengths[0] == pytest.approx(8.2031, abs=FOUR_DECIMALS)
    assert cable.unstressed_lengths[0] == pytest.approx(8.1443, abs=FOUR_DECIMALS)


def test_the_first_load_point_stands_where_the_sample_says(cable: Funicular) -> None:
    assert cable.y[1] == pytest.approx(10.186, abs=THREE_DECIMALS)


def test_the_right_end_of_the_last_segment_governs(cable: Funicular) -> None:
    assert force_diagram(cable).letters[cable.governing_segment] == "C"
    assert cable.governing_end == "right"


def test_the_reactions_are_the_samples(cable: Funicular) -> None:
    assert cable.reaction_left == pytest.approx((63.333, 14.361), abs=THREE_DECIMALS)
    assert cable.reaction_right == pytest.approx((63.333, 21.639), abs=THREE_DECIMALS)


def test_mast_stay_and_anchor_are_the_samples(cable: Funicular) -> None:
    outward, up = cable.reaction_left
    joint = joint_equilibrium([(outward, -up)], mast=(0.0, -6.0), stays=[(-10.0, -6.0)])
    assert joint.mast == pytest.approx(-52.361, abs=THREE_DECIMALS)
    assert joint.stays == pytest.approx((73.859,), abs=THREE_DECIMALS)
    anchor = anchor_force(joint.stay_feet[0], (-10.0, -6.0))
    assert anchor.horizontal == pytest.approx(63.333, abs=THREE_DECIMALS)
    assert anchor.uplift == pytest.approx(38.0, abs=THREE_DECIMALS)
    assert anchor.sliding_factor is None
    assert anchor.uplift_factor is None
