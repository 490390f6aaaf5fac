"""The answer of a cut cable: closure, many states at once, and where no shape exists."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.errors import ConvergenceError, RuleError
from dxfcable.model import RuleKind
from dxfcable.statics import catenary_chain
from dxfcable.statics.catenary import respond
from dxfcable.statics.catenary_forming import form_catenary
from tests.statics.cables import Cut, cut_cables

ENDS = [(0.0, 0.0), (10.0, 0.0)]


@settings(max_examples=150)
@given(cut_cables())
def test_every_cable_closes_to_rounding_or_says_why_not(cable: Cut) -> None:
    found = cable.respond()
    if found.faults[0]:
        assert cable.weight == 0.0
        assert np.isnan(found.horizontals[0])
        return
    pull = float(found.horizontals[0])
    assert pull > 0.0
    # The last digit of a vertical force tilts a piece that carries little by that over H.
    force = float(np.max(np.abs(found.verticals_left[0])))
    rounding = (1e-12 + 1e-15 * force / pull) * sum(cable.lengths)
    assert found.residuals[0] <= rounding
    assert found.iterations[0] < 120
    shape = found.state(0)
    assert shape.residual <= 2.0 * rounding
    steps = np.diff(shape.verticals_left) - cable.weight * np.array(cable.lengths[:-1])
    assert steps == pytest.approx(cable.loads, abs=1e-12 * np.max(np.abs(shape.tensions)))


@pytest.mark.parametrize("weight", [0.0, 1e-14, 1e-7, 1e-3, 1.0, 30.0, 1000.0])
@pytest.mark.parametrize("sag", [1 / 500, 0.05, 0.4, 2.0])
def test_usual_cables_need_few_steps(weight: float, sag: float) -> None:
    x = np.linspace(0.0, 100.0, 11)
    formed = form_catenary(
        x, np.full(9, 10.0), 0, 0, RuleKind.SAG, 100 * sag, weight=weight, ea=1e8
    )
    states = [np.full(9, 10.0), np.full(9, 16.0), np.r_[np.full(4, 30.0), np.full(5, 10.0)]]
    found = respond(formed.unstressed_lengths, weight, states, [(0, 0), (100, 0)], ea=1e8)
    assert int(np.max(found.iterations)) <= 9
    assert float(np.max(found.residuals)) <= 1e-12 * 100


@pytest.mark.parametrize("at", [0.001, 0.5, 0.999])
@pytest.mark.parametrize("weight", [0.0, 1e-3, 0.1, 10.0])
@pytest.mark.parametrize("ea", [None, 1e4])
def test_one_load_hard_by_a_support(at: float, weight: float, ea: float | None) -> None:
    formed = form_catenary([0, at, 1], [1.0], 0.0, 0.4, RuleKind.SAG, 0.1, weight=weight, ea=ea)
    found = respond(formed.unstressed_lengths, weight, [[1.0], [5.0]], [(0, 0), (1, 0.4)], ea=ea)
    assert found.horizontals[0] == pytest.approx(formed.horizontal, rel=1e-9)
    assert found.y[0, 1] == pytest.approx(formed.y[1], abs=1e-11)
    assert float(np.max(found.residuals)) <= 1e-12


def test_uplift_bows_a_cable_up_in_tension() -> None:
    found = respond([5.5, 5.5], 0.2, [-9.0], ENDS, ea=1e4).state(0)
    assert found.y[1] > 2.0
    assert found.horizontal > 0.0
    assert found.has_uplift
    assert found.above_string == (1,)
    mirrored = respond([5.5, 5.5], 0.2, [9.0], ENDS, ea=1e4, weight_factors=-1.0).state(0)
    assert mirrored.y == pytest.approx(-found.y, abs=1e-12)


def test_many_states_equal_each_alone() -> None:
    generator = np.random.default_rng(4)
    lengths = generator.uniform(1.0, 2.0, 9)
    loads = generator.uniform(-2.0, 9.0, (300, 8))
    factors = generator.uniform(0.0, 2.0, 300)
    heat = generator.uniform(-40.0, 40.0, 300)
    ends = np.zeros((300, 2, 2))
    ends[:, 1] = np.stack(
        [generator.uniform(0.4, 1.01, 300) * lengths.sum(), generator.uniform(-1, 1, 300)], 1
    )
    together = respond(
        lengths, 0.3, loads, ends, ea=900.0, weight_factors=factors, alpha=1e-5, delta_t=heat
    )
    for k in range(0, 300, 23):
        alone = respond(
            lengths, 0.3, loads[k], ends[k], ea=900.0,
            weight_factors=factors[k], alpha=1e-5, delta_t=heat[k],
        )  # fmt: skip
        assert alone.horizontals[0] == pytest.approx(together.horizontals[k], rel=1e-13)
        assert alone.y[0] == pytest.approx(together.y[k], abs=1e-12)
        assert alone.iterations[0] == together.iterations[k]


def test_a_long_chain_is_solved_in_blocks() -> None:
    count = 20_001
    lengths = np.full(count, 1.05 / count)
    found = respond(lengths, 3.0, np.full(count - 1, 2.0 / count), [(0, 0), (1, 0.1)], ea=200.0)
    coarse = respond([1.05], 3.0 + 2.0 / 1.05, [], [(0, 0), (1, 0.1)], ea=200.0)
    assert found.residuals[0] <= 1e-13
    assert found.iterations[0] <= 6
    assert found.horizontals[0] == pytest.approx(coarse.horizontals[0], rel=1e-4)


def test_flexibility_tells_how_forces_answer_to_moved_supports() -> None:
    lengths, loads = [4.0, 3.5, 4.0], [5.0, 8.0]
    step = 1e-5
    ends = np.array([[(0, 0), (10 + a, 1 + b)] for a, b in
                     [(0, 0), (step, 0), (-step, 0), (0, step), (0, -step)]])  # fmt: skip
    found = respond(lengths, 0.4, loads, ends, ea=3000.0)
    stiffness = np.linalg.inv(found.flexibilities[0])
    forces = np.stack([found.horizontals, found.verticals_left[:, 0]], axis=1)
    by_across = (forces[1] - forces[2]) / (2 * step)
    by_up = (forces[3] - forces[4]) / (2 * step)
    assert by_across == pytest.approx(stiffness[:, 0], rel=1e-6)
    assert by_up == pytest.approx(stiffness[:, 1], rel=1e-6)


# --- where there is no shape --------------------------------------------------------------------


def test_an_unloaded_weightless_cable_longer_than_its_string_has_no_shape() -> None:
    found = respond([5.5, 5.5], 0.0, [[0.0], [1.0]], ENDS, ea=100.0)
    assert "no determinate shape" in found.faults[0]
    assert not found.faults[1]
    assert np.all(np.isnan(found.y[0]))
    assert np.isnan(found.max_tensions[0])
    assert np.all(np.isfinite(found.y[1]))
    with pytest.raises(RuleError, match="no determinate shape"):
        found.state(0)


def test_an_unloaded_weightless_cable_that_is_stretched_is_straight() -> None:
    found = respond([4.0, 5.9], 0.0, [0.0], [(0, 0), (8, 6)], ea=990.0).state(0)
    assert found.tensions == pytest.approx([10.0, 10.0], rel=1e-12)
    assert found.y[1] / found.x[1] == pytest.approx(0.75, rel=1e-12)


def test_a_cable_without_stretch_must_be_longer_than_its_chord() -> None:
    found = respond([[5.0, 5.0], [4.0, 5.0]], 1.0, [1.0], ENDS)
    assert all("no longer than the chord" in reason for reason in found.faults)
    warm = respond([5.0, 5.0], 1.0, [1.0], ENDS, alpha=1e-5, delta_t=[0.0, 10.0])
    assert [bool(reason) for reason in warm.faults] == [True, False]


def test_loads_that_hang_straight_down_leave_no_pull() -> None:
    """The middle piece is longer than what the two that hang straight down leave open."""
    found = respond([2.0, 12.0, 2.0], 0.0, [3.0, 4.0], ENDS)
    assert "there is no pull" in found.faults[0]
    stiffer = respond([2.0, 9.9, 2.0], 0.0, [3.0, 4.0], ENDS)
    assert not stiffer.faults[0]
    weighted = respond([2.0, 12.0, 2.0], 0.01, [3.0, 4.0], ENDS)
    assert not weighted.faults[0]
    assert weighted.horizontals[0] < 0.1
    zeros = respond([2.0, 6.0, 6.0, 2.0], 0.0, [3.0, 0.0, 4.0], ENDS)
    assert "there is no pull" in zeros.faults[0]


@given(st.floats(0.02, 0.5), st.floats(0.5, 8.0))
def test_a_piece_just_too_short_to_be_slack_pulls_a_little(short: float, load: float) -> None:
    """Near the limit of no pull: the linkage is still found."""
    found = respond([2.0, 10.0 - short, 2.0], 0.0, [3.0, load], ENDS)
    assert not found.faults[0]
    assert 0.0 < found.horizontals[0] < 3.0 + load
    assert found.residuals[0] <= 1e-10


def test_a_search_that_is_cut_off_says_how_far_it_came(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(catenary_chain, "_ITERATIONS", 2)
    with pytest.raises(ConvergenceError, match="did not reach equilibrium") as caught:
        respond([40, 30, 50], 20.0, [2000, 3000], [(0, 0), (100, 8)], ea=5e6)
    assert caught.value.residual > 1e-9
    assert caught.value.iterations == 2


@pytest.mark.parametrize(
    ("changed", "said"),
    [
        ({"loads": [1.0]}, "2 pieces need 1 loads|3 pieces need 2 loads"),
        ({"ends": [(0, 0), (-1, 0)]}, "right end must be to the right"),
        ({"unstressed_lengths": [4, 0, 4]}, "must be positive"),
        ({"weight": -1.0}, "weight not negative"),
        ({"loads": [1.0, math.nan]}, "loads must be finite"),
        ({"weight_factors": [1.0, 2.0], "delta_t": [1.0, 2.0, 3.0]}, "one state or 3"),
        ({"ends": [0, 0]}, "ends must have 2 axes"),
        ({"ea": -4.0}, "ea must be a positive number"),
    ],
)
def test_wrong_input_gets_one_sentence(changed: dict[str, object], said: str) -> None:
    given: dict[str, object] = {
        "unstressed_lengths": [4, 4, 4], "weight": 1.0, "loads": [1.0, 2.0], "ends": ENDS,
    }  # fmt: skip
    with pytest.raises(ValueError, match=said):
        respond(**(given | changed))  # type: ignore[arg-type]


# --- the curve --------------------------------------------------------------------------------


@settings(max_examples=50)
@given(cut_cables(), st.floats(0.0, 1.0))
def test_the_extreme_points_are_not_beaten_by_any_point_of_the_curve(
    cable: Cut, part: float
) -> None:
    found = cable.respond()
    if found.faults[0]:
        return
    shape = found.state(0)
    x = np.clip(part * cable.across + np.linspace(0.0, 0.05, 7) * cable.across, 0, cable.across)
    y = shape.ordinates_at(x)
    slack = 1e-9 * (cable.across + abs(cable.up) + sum(cable.lengths))
    assert float(np.min(y)) >= shape.low_point[1] - slack
    drops = cable.up / cable.across * x - y
    assert float(np.max(drops)) <= shape.sag + slack
    line = [(0.0, -1.0), (0.4 * cable.across, 0.3), (cable.across, -2.0)]
    least, at = shape.least_clearance(line)
    stations, levels = np.array(line).T
    over = y - np.interp(x, stations, levels)
    assert float(np.min(over)) >= least - slack
    where = float(shape.ordinates_at(at) - np.interp(at, stations, levels))
    assert where == pytest.approx(least, abs=slack)


def test_the_nodes_lie_on_the_curve() -> None:
    shape = respond([4.0, 3.5, 4.0], 0.4, [5.0, 8.0], [(3, 7), (13, 8)], ea=3000.0).state(0)
    assert shape.ordinates_at(shape.x) == pytest.approx(shape.y, abs=1e-13)
    with pytest.raises(ValueError, match="between the supports"):
        shape.ordinates_at(13.1)
    with pytest.raises(ValueError, match="beyond the cable"):
        shape.least_clearance([(20, 0), (30, 0)])
    with pytest.raises(ValueError, match="two vertices"):
        shape.least_clearance([(20, 0)])


def test_a_line_under_part_of_the_cable_is_measured_there_only() -> None:
    shape = respond([12.0], 1.0, [], ENDS).state(0)
    least, at = shape.least_clearance([(1.0, -9.0), (3.0, -9.0)])
    assert at == 3.0
    assert least == pytest.approx(float(shape.ordinates_at(3.0)) + 9.0)
    low, where = shape.least_clearance([(-5.0, -9.0), (20.0, -9.0)])
    assert (where, low) == pytest.approx((5.0, shape.low_point[1] + 9.0))


def test_the_governing_piece_and_end_are_where_the_tension_is_largest() -> None:
    shape = respond([6.0, 7.0], 1.0, [3.0], [(0, 0), (10, 4)], ea=900.0).state(0)
    assert (shape.governing_segment, shape.governing_end) == (1, "right")
    assert shape.tensions_right[1] == shape.max_tension
    assert shape.reaction_right == (shape.horizontal, shape.verticals_right[1])
    level = respond([6.0, 6.0], 1.0, [3.0], ENDS).state(0)
    assert (level.governing_segment, level.governing_end) == (0, "left")
    assert level.angles_left[0] == pytest.approx(-level.angles_right[1])
