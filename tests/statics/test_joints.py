"""Equilibrium of supports with masts and stays: laws, flags and refusals."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.errors import LayoutError
from dxfcable.statics.joints import anchor_force, joint_equilibrium

if TYPE_CHECKING:
    from dxfcable.statics.joints import Joint

FORCE = st.floats(0.1, 1e4)
LEAN = st.floats(-0.3, 0.3)
REACH = st.floats(0.5, 3.0)


def gap(joint: Joint) -> float:
    """How far the sides laid end to end stay open."""
    return math.hypot(
        sum(side.force[0] for side in joint.sides), sum(side.force[1] for side in joint.sides)
    )


def size(joint: Joint) -> float:
    return sum(math.hypot(*side.force) for side in joint.sides)


@given(pull=FORCE, down=FORCE, load=FORCE, lean=LEAN, reach=REACH)
def test_the_sides_of_a_joint_with_mast_and_stay_close(
    pull: float, down: float, load: float, lean: float, reach: float
) -> None:
    joint = joint_equilibrium([(pull, -down)], load=load, mast=(lean, -1.0), stays=[(-reach, -1)])
    assert gap(joint) <= 1e-12 * size(joint)
    assert [side.name for side in joint.sides] == ["cable 1", "load", "stay 1", "mast"]
    assert joint.residual == (0.0, 0.0)


@given(pull=FORCE, down=FORCE, lean=LEAN)
def test_a_mast_alone_closes_the_joint_by_its_head_shear(
    pull: float, down: float, lean: float
) -> None:
    joint = joint_equilibrium([(pull, -down)], mast=(lean, -1.0))
    assert gap(joint) <= 1e-12 * size(joint)


@given(pull=FORCE, down=FORCE, load=FORCE, lean=LEAN, reach=REACH)
def test_the_feet_pass_on_all_that_acts_on_the_joint(
    pull: float, down: float, load: float, lean: float, reach: float
) -> None:
    for stays in ([], [(-reach, -1.0)], [(-reach, -1.0)] * 2):
        joint = joint_equilibrium([(pull, -down)], load=load, mast=(lean, -1.0), stays=stays)
        assert joint.mast_foot is not None
        feet = [joint.mast_foot, *joint.stay_feet]
        assert sum(f[0] for f in feet) == pytest.approx(pull, abs=1e-11 * size(joint))
        assert sum(f[1] for f in feet) == pytest.approx(-down - load, abs=1e-11 * size(joint))


@given(pull=FORCE, down=FORCE, reach=REACH)
def test_a_mirrored_joint_has_the_same_members(pull: float, down: float, reach: float) -> None:
    left = joint_equilibrium([(pull, -down)], mast=(0.1, -1.0), stays=[(-reach, -1.0)])
    right = joint_equilibrium([(-pull, -down)], mast=(-0.1, -1.0), stays=[(reach, -1.0)])
    assert right.mast == pytest.approx(left.mast, rel=1e-12)
    assert right.stays == pytest.approx(left.stays, rel=1e-12)


def test_all_cables_at_a_support_are_summed_first() -> None:
    apart = joint_equilibrium([(50, -10), (30, -5)], mast=(0, -6), stays=[(-8, -6)])
    together = joint_equilibrium([(80, -15)], mast=(0, -6), stays=[(-8, -6)])
    assert apart.mast == pytest.approx(together.mast, rel=1e-12)
    assert apart.stays == pytest.approx(together.stays, rel=1e-12)


def test_a_load_at_the_support_goes_down_a_vertical_mast() -> None:
    without = joint_equilibrium([(50, -10)], mast=(0, -6), stays=[(-8, -6)])
    loaded = joint_equilibrium([(50, -10)], load=7, mast=(0, -6), stays=[(-8, -6)])
    assert without.mast is not None
    assert loaded.mast == pytest.approx(without.mast - 7, rel=1e-12)
    assert loaded.stays == pytest.approx(without.stays, rel=1e-12)


def test_stays_with_one_foot_share_equally() -> None:
    joint = joint_equilibrium([(60, -10)], mast=(0, -6), stays=[(-8, -6), (-8, -6)])
    single = joint_equilibrium([(60, -10)], mast=(0, -6), stays=[(-8, -6)])
    assert joint.stays == pytest.approx((single.stays[0] / 2,) * 2, rel=1e-12)


def test_stays_with_one_foot_follow_stated_shares() -> None:
    joint = joint_equilibrium(
        [(60, -10)], mast=(0, -6), stays=[(-8, -6), (-8, -6)], shares=[0.25, 0.75]
    )
    assert joint.stays[1] == pytest.approx(3 * joint.stays[0], rel=1e-12)


def test_shares_are_fractions_of_the_stays_horizontal_component() -> None:
    joint = joint_equilibrium(
        [(60, -10)], mast=(0, -6), stays=[(-8, -6), (-4, -6)], shares=[0.3, 0.7]
    )
    assert joint.stay_feet[0][0] == pytest.approx(0.3 * 60, rel=1e-12)
    assert joint.stay_feet[1][0] == pytest.approx(0.7 * 60, rel=1e-12)
    assert gap(joint) <= 1e-12 * size(joint)


@pytest.mark.parametrize("shares", [None, [None, None], [0.5, None], [0.5]])
def test_stays_with_different_feet_and_without_shares_are_refused(
    shares: list[float | None] | None,
) -> None:
    with pytest.raises(LayoutError, match=r"different feet .* SHARE"):
        joint_equilibrium([(60, -10)], mast=(0, -6), stays=[(-8, -6), (-4, -6)], shares=shares)


@pytest.mark.parametrize("shares", [[0.5, 0.6], [-0.5, 1.5], [math.nan, 0.5], [50.0, 50.0]])
def test_shares_that_are_no_fractions_of_one_are_refused(shares: list[float]) -> None:
    with pytest.raises(LayoutError, match="fractions that sum to 1"):
        joint_equilibrium([(60, -10)], mast=(0, -6), stays=[(-8, -6), (-4, -6)], shares=shares)


def test_shares_may_miss_one_by_a_millionth() -> None:
    joint = joint_equilibrium(
        [(60, -10)], mast=(0, -6), stays=[(-8, -6), (-4, -6)], shares=[0.333333, 0.666667]
    )
    assert gap(joint) <= 1e-12 * size(joint)


def test_a_vertical_stay_cannot_take_a_share_of_the_horizontal() -> None:
    with pytest.raises(ValueError, match="vertical"):
        joint_equilibrium([(60, -10)], mast=(1, -6), stays=[(0, -6), (-4, -6)], shares=[0.5, 0.5])


def test_a_stay_alone_leaves_over_what_is_across_it() -> None:
    joint = joint_equilibrium([(60, 0)], stays=[(-3, -4)])
    assert joint.mast is None
    assert joint.mast_foot is None
    assert joint.stays == pytest.approx((36.0,), rel=1e-12)
    assert joint.residual == pytest.approx((60 - 0.6 * 36, -0.8 * 36), rel=1e-12)
    assert gap(joint) == pytest.approx(math.hypot(*joint.residual), rel=1e-12)


def test_a_stay_in_line_with_its_cable_needs_no_mast() -> None:
    joint = joint_equilibrium([(40, 30)], stays=[(-4, -3)])
    assert joint.stays == pytest.approx((50.0,), rel=1e-12)
    assert joint.residual == (0.0, 0.0)


def test_a_support_without_members_leaves_all_over() -> None:
    joint = joint_equilibrium([(60, -10)], load=5)
    assert (joint.mast, joint.stays) == (None, ())
    assert joint.residual == pytest.approx((60, -15), rel=1e-12)


def test_a_mast_alone_bends_clockwise_under_a_pull_to_the_right() -> None:
    joint = joint_equilibrium([(60, -10)], mast=(0, -6))
    assert joint.mast == pytest.approx(-10, rel=1e-12)
    assert joint.head_shear == pytest.approx(60, rel=1e-12)
    assert joint.base_moment == pytest.approx(360, rel=1e-12)
    assert joint.mast_foot == pytest.approx((60, -10), rel=1e-12)
    assert joint.sides[-1].name == "head shear"


def test_a_stay_on_the_side_of_its_cable_is_said_to_be_in_compression() -> None:
    joint = joint_equilibrium([(60, -10)], mast=(0, -6), stays=[(8, -6)])
    assert joint.stay_in_compression
    assert joint.stays[0] < 0


def test_a_mast_pulled_up_is_said_to_be_in_tension() -> None:
    joint = joint_equilibrium([(60, 100)], mast=(0, -6), stays=[(-8, -6)])
    assert joint.mast_in_tension
    assert not joint.stay_in_compression


def test_members_in_their_usual_sense_are_not_flagged() -> None:
    joint = joint_equilibrium([(60, -10)], mast=(0, -6), stays=[(-8, -6)])
    assert not (joint.mast_in_tension)
    assert not (joint.stay_in_compression)
    assert not joint.stay_parallel_to_mast


def test_a_stay_parallel_to_its_mast_is_flagged_and_the_mast_bends() -> None:
    joint = joint_equilibrium([(60, -10)], mast=(0, -6), stays=[(0, -5)])
    assert joint.stay_parallel_to_mast
    assert joint.stays == (0.0,)
    assert joint.head_shear == pytest.approx(60, rel=1e-12)


@pytest.mark.parametrize("member", [{"mast": (0.0, 0.0)}, {"stays": [(0.0, 0.0)]}])
def test_a_member_without_length_is_refused(member: dict[str, object]) -> None:
    with pytest.raises(ValueError, match="no length"):
        joint_equilibrium([(60, -10)], **member)  # type: ignore[arg-type]


@pytest.mark.parametrize("bad", [math.nan, math.inf])
def test_forces_that_are_not_finite_are_refused(bad: float) -> None:
    with pytest.raises(ValueError, match="cables"):
        joint_equilibrium([(bad, -10)], mast=(0, -6))
    with pytest.raises(ValueError, match="load"):
        joint_equilibrium([(60, -10)], load=bad, mast=(0, -6))


def test_an_anchor_states_no_factor_that_it_has_no_input_for() -> None:
    bare = anchor_force((50, 20), (-10, -4))
    assert (bare.sliding_factor, bare.uplift_factor) == (None, None)
    weighed = anchor_force((50, 20), (-10, -4), weight=100)
    assert (weighed.sliding_factor, weighed.uplift_factor) == (None, 5.0)


def test_a_foot_that_presses_down_has_no_uplift_factor() -> None:
    foot = anchor_force((0, -50), (0, -6), weight=100, mu=0.5)
    assert (foot.horizontal, foot.uplift) == (0.0, -50.0)
    assert (foot.sliding_factor, foot.uplift_factor) == (None, None)


def test_a_block_that_would_lift_has_no_friction() -> None:
    assert anchor_force((50, 120), (-10, -24), weight=100, mu=0.5).sliding_factor == 0.0


def test_the_horizontal_of_an_anchor_is_positive_towards_the_head_on_either_side() -> None:
    assert anchor_force((50, 20), (-10, -4)).horizontal == 50
    assert anchor_force((-50, 20), (10, -4)).horizontal == 50
    assert anchor_force((-50, -20), (-10, -4)).horizontal == -50


def test_an_anchor_refuses_a_weight_or_friction_that_is_none() -> None:
    with pytest.raises(ValueError, match="weight"):
        anchor_force((50, 20), (-10, -4), weight=0)
    with pytest.raises(ValueError, match="mu"):
        anchor_force((50, 20), (-10, -4), weight=10, mu=-0.1)
