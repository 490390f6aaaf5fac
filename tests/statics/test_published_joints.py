"""Masts, backstays and anchors against published values.

MST-1 (SAD-3c-i): textbook exercise 13.12, book not identified, answers printed with the
question (TEXT). MST-2: the same numbers by the formula T = H / cos b, mast = V + H tan b (OWN).
ANC-1: an anchor block of 250 kN under 100 kN at 30 degrees (OWN). Backstay ratios: derived.
"""

from __future__ import annotations

import math

import pytest

from dxfcable.statics.joints import anchor_force, joint_equilibrium


def saddle() -> tuple[tuple[float, float], tuple[float, float]]:
    """Main cable of 1000 kN falling at 15 degrees to the right, backstay at 30 to the left."""
    steep = math.radians(15.0)
    pull = (1000.0 * math.cos(steep), -1000.0 * math.sin(steep))
    line = (-math.cos(math.radians(30.0)), -math.sin(math.radians(30.0)))
    return pull, line


def test_mst_1_a_saddle_free_to_move_gives_the_printed_vertical_reaction() -> None:
    pull, line = saddle()
    joint = joint_equilibrium([pull], mast=(0.0, -1.0), stays=[line])
    assert joint.mast == pytest.approx(-816.5, abs=0.05)
    assert joint.head_shear == 0.0


def test_mst_2_stay_and_mast_have_the_recomputed_digits() -> None:
    pull, line = saddle()
    joint = joint_equilibrium([pull], mast=(0.0, -12.0), stays=[line])
    assert joint.stays[0] == pytest.approx(1115.3551, abs=5e-5)
    assert joint.mast == pytest.approx(-816.4966, abs=5e-5)


def test_mst_1_over_a_pulley_the_mast_keeps_the_difference_of_the_horizontals() -> None:
    """SAD-3c-ii: equal tensions give components 758.8190 down and 99.9004 to the main span."""
    pull, line = saddle()
    back = (1000.0 * line[0], 1000.0 * line[1])
    joint = joint_equilibrium([pull, back], mast=(0.0, -10.0))
    assert joint.mast == pytest.approx(-758.8190, abs=5e-5)
    assert joint.head_shear == pytest.approx(99.9004, abs=5e-5)
    assert joint.base_moment == pytest.approx(999.004, abs=5e-4)
    assert joint.mast is not None
    resultant = math.hypot(joint.mast, joint.head_shear)
    assert resultant == pytest.approx(765.3669, abs=5e-5)
    assert math.degrees(math.atan2(joint.head_shear, -joint.mast)) == pytest.approx(7.5, abs=5e-5)


def test_anc_1_friction_acts_on_the_net_weight() -> None:
    steep = math.radians(30.0)
    anchor = anchor_force(
        (100.0 * math.cos(steep), 100.0 * math.sin(steep)), (-10.0, -5.0), weight=250.0, mu=0.5
    )
    assert anchor.uplift == pytest.approx(50.0, rel=1e-12)
    assert anchor.horizontal == pytest.approx(86.6025, abs=5e-5)
    assert anchor.uplift_factor == pytest.approx(5.000, rel=1e-12)
    assert anchor.sliding_factor == pytest.approx(1.154701, abs=5e-7)


@pytest.mark.parametrize(
    ("degrees", "tension", "vertical"),
    [
        (20, 1.064, 0.364),
        (25, 1.103, 0.466),
        (30, 1.155, 0.577),
        (35, 1.221, 0.700),
        (40, 1.305, 0.839),
        (45, 1.414, 1.000),
    ],
)
def test_a_backstay_turns_the_pull_into_tension_and_uplift_by_its_angle(
    degrees: int, tension: float, vertical: float
) -> None:
    steep = math.radians(degrees)
    line = (-math.cos(steep), -math.sin(steep))
    joint = joint_equilibrium([(1.0, 0.0)], mast=(0.0, -1.0), stays=[line])
    assert joint.stays[0] == pytest.approx(tension, abs=5e-4)
    assert anchor_force(joint.stay_feet[0], line).uplift == pytest.approx(vertical, abs=5e-4)
