"""Formed cables under combinations: states, stays that give, envelope, slack, clearance."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.errors import LayoutError
from dxfcable.model import Finding, LoadSymbol, Severity
from dxfcable.settings import Settings
from dxfcable.solving.solve import Forming, solve
from tests import layouts
from tests.crossing import MIDDLE, crossing, layout, loads

if TYPE_CHECKING:
    from dxfcable.model import Cable, FormedCable, LoadPoint, Solution

OFFICE = Settings()
LAST = 0.6  # of the last printed digit


def checked(cable: Cable, *combos: str, is_stayed: bool = False) -> Solution:
    return solve(layout(cable, is_stayed=is_stayed), Forming(combos=combos), OFFICE)


def formed(cable: Cable, *combos: str, is_stayed: bool = False) -> FormedCable:
    return checked(cable, *combos, is_stayed=is_stayed).cables[0]


def warned(solution: Solution) -> set[str]:
    return {f.code for f in solution.findings if f.severity is Severity.WARNING}


def with_live(values: dict[int, float]) -> tuple[LoadPoint, ...]:
    return tuple(
        replace(point, cases=(("D", 10.0), ("L", values.get(k, 0.0))))
        for k, point in enumerate(loads(), start=1)
    )


def test_a_cable_as_built_answers_a_load_change_as_the_benchmark_does() -> None:
    # OWN: computed for the benchmark with an independent solver (all 15; one 20; left half).
    every = formed(crossing(loads(10.0, 5.0)), "D + L").states[0]
    assert every.horizontal == pytest.approx(180.955, abs=LAST * 1e-3)
    assert every.max_tension == pytest.approx(193.135, abs=LAST * 1e-3)
    assert every.nodes[MIDDLE].y == pytest.approx(-12.42395, abs=LAST * 1e-5)
    single = formed(crossing(with_live({3: 10.0})), "D + L")
    state, before = single.states[0], single.nodes
    assert state.horizontal == pytest.approx(140.05, abs=LAST * 1e-2)
    assert state.max_tension == pytest.approx(149.43, abs=LAST * 1e-2)
    assert state.nodes[3].y - before[3].y == pytest.approx(-0.692, abs=LAST * 1e-3)
    assert state.nodes[7].y - before[7].y == pytest.approx(0.300, abs=LAST * 1e-3)
    assert state.nodes[5].x - before[5].x == pytest.approx(-0.105, abs=LAST * 1e-3)
    half = formed(crossing(loads(10.0, 5.0)), "D + L [left half]").states[0]
    assert half.horizontal == pytest.approx(153.99, abs=LAST * 1e-2)
    assert half.max_tension == pytest.approx(165.78, abs=LAST * 1e-2)


def test_loads_are_combined_before_the_cable_is_solved() -> None:
    # OWN: the same benchmark, D and L of 10 each; added tensions would be 265.7, 372.0, 285.1.
    cable = formed(crossing(loads(10.0, 10.0)), "D + L", "1.2D + 1.6L", "1.2D + 1.6L [left half]")
    tensions = [state.max_tension for state in cable.states]
    assert tensions == pytest.approx([250.49, 337.44, 259.94], abs=LAST * 1e-2)
    assert [state.level for state in cable.states] == ["service", "factored", "factored"]


def test_the_cables_own_weight_takes_the_factor_of_its_case() -> None:
    # OWN: formed under D with 0.15 kip/ft; the weight unfactored would give 359.977.
    cable = formed(crossing(loads(10.0, 10.0), weight=0.15), "1.2D + 1.6L")
    assert cable.horizontal == pytest.approx(147.694, abs=LAST * 1e-3)
    assert cable.max_tension == pytest.approx(157.322, abs=LAST * 1e-3)
    assert cable.states[0].max_tension == pytest.approx(363.861, abs=LAST * 1e-3)


def test_stays_that_stretch_let_the_cable_down() -> None:
    # OWN: masts of 23.1 ft that do not shorten, stays of 46.2 ft and the cable's EA.
    cable = formed(crossing(loads(10.0, 5.0)), "D + L", is_stayed=True)
    state = cable.states[0]
    assert not cable.supports_rigid
    assert state.nodes[MIDDLE].y == pytest.approx(-12.7475, abs=LAST * 1e-4)
    assert state.horizontal == pytest.approx(175.955, abs=LAST * 1e-3)
    assert state.supports[0].dx > 0.0 > state.supports[1].dx
    assert state.anchorages[0].stays[0] == pytest.approx(175.955 / math.sqrt(0.75), rel=1e-2)


def test_forces_of_a_head_that_moved_are_in_equilibrium_where_it_stands() -> None:
    cable = formed(crossing(loads(10.0, 5.0)), "D + L", is_stayed=True)
    state = cable.states[0]
    stayed = layout(crossing(), is_stayed=True)
    for found, stay in zip(state.anchorages, stayed.stays, strict=True):
        stretch = 46.2 / (1.0 + cable_stay(cable, found.support) / 32_400.0)
        reach = math.dist(stay.foot, found.at)
        assert found.stays[0] == pytest.approx(32_400.0 * (reach / stretch - 1.0), rel=1e-7)


def cable_stay(cable: FormedCable, support: int) -> float:
    return next(r.horizontal for r in cable.reactions if r.support == support) / math.sqrt(0.75)


def test_supports_without_a_stiffness_are_held_and_it_is_said() -> None:
    stayed = layout(crossing(loads(10.0, 5.0)), is_stayed=True)
    bare = replace(stayed, stays=tuple(replace(s, anchor=None) for s in stayed.stays))
    solution = solve(bare, Forming(combos=("D + L",)), OFFICE)
    assert solution.cables[0].supports_rigid
    assert any(f.code == "supports-rigid" for f in solution.findings)
    assert solution.cables[0].states[0].horizontal == pytest.approx(180.955, abs=1e-3)


def test_forming_again_in_a_state_of_its_own_loads_moves_nothing() -> None:
    cable = formed(crossing(), "D", is_stayed=True)
    state = cable.states[0]
    for node, same in zip(cable.nodes, state.nodes, strict=True):
        assert (same.x, same.y) == pytest.approx((node.x, node.y), abs=1e-8)
    assert state.max_tension == pytest.approx(cable.max_tension, rel=1e-9)


def test_a_temperature_change_acts_both_ways_without_being_asked() -> None:
    # OWN: 60 F at 6.5e-6 per F lowers the middle by 0.0872 ft and the pull to 124.077 kip.
    cable = formed(crossing(alpha=6.5e-6 * 1.8, delta_t=60.0 / 1.8))
    assert [state.combo for state in cable.states] == ["D + T", "D - T"]
    warm = cable.states[0]
    assert warm.nodes[MIDDLE].y == pytest.approx(-12.0872, abs=LAST * 1e-4)
    assert warm.horizontal == pytest.approx(124.077, abs=LAST * 1e-3)
    assert cable.states[1].horizontal > 125.0


def test_a_temperature_without_a_coefficient_stops() -> None:
    with pytest.raises(LayoutError) as refused:
        checked(crossing(delta_t=30.0))
    assert {f.code for f in refused.value.findings if isinstance(f, Finding)} >= {"no-alpha"}


def test_a_case_that_no_point_carries_stops_a_typed_combination() -> None:
    with pytest.raises(LayoutError) as refused:
        checked(crossing(), "D + W")
    assert any("W" in f.text for f in refused.value.findings if isinstance(f, Finding))


def test_the_envelope_names_the_combination_that_governs_each_figure() -> None:
    cable = formed(crossing(loads(10.0, 10.0)), "D + L", "D + L [left half]", is_stayed=True)
    found = cable.envelope
    assert found is not None
    assert found.max_tension.combo == "D + L"
    assert found.min_tension.combo == "D"
    assert found.max_uplift is not None
    assert found.max_uplift.combo == "D + L"
    by_mark = {p.mark: p for p in found.points}
    assert by_mark["P5"].lowest.combo == "D + L"
    assert by_mark["P8"].highest.combo == "D + L [left half]"
    most = max(s.max_tension for s in cable.states)
    assert found.max_tension.value == pytest.approx(most)


def test_a_hanger_without_load_in_a_state_is_slack_unless_it_is_clamped() -> None:
    points = list(loads(10.0, 0.0))
    points[3] = replace(points[3], cases=(("D", 10.0), ("L", -12.0)))
    loose = checked(crossing(tuple(points)), "D + L")
    assert loose.cables[0].states[0].slack == ("P4",)
    assert "slack-hanger" in warned(loose)
    points[3] = replace(points[3], clamped=True)
    assert "slack-hanger" not in warned(checked(crossing(tuple(points)), "D + L"))
    points[3] = replace(points[3], clamped=False, symbol=LoadSymbol.ARROW)
    assert "slack-hanger" not in warned(checked(crossing(tuple(points)), "D + L"))


def test_a_cable_that_nearly_hangs_loose_is_said() -> None:
    solution = checked(crossing(loads(10.0, -9.95)), "D + L")
    assert "slack-cable" in warned(solution)


def test_an_unloaded_cable_without_weight_has_no_shape_and_none_is_made_up() -> None:
    solution = checked(crossing(loads(10.0, -10.0)), "D + L", "D")
    idle, same = solution.cables[0].states
    assert idle.fault
    assert idle.nodes == ()
    assert not same.fault
    assert "no-shape" in warned(solution)
    assert solution.cables[0].envelope is not None


def test_every_combination_over_the_capacity_is_seen_with_its_level() -> None:
    solution = checked(crossing(loads(10.0, 10.0), capacity=300.0), "D + L", "1.2D + 1.6L")
    texts = [f.text for f in solution.findings if f.code == "over-capacity"]
    assert len(texts) == 1
    assert "factored" in texts[0]
    assert "1.2D + 1.6L" in texts[0]


def test_the_least_clearance_is_found_over_all_states() -> None:
    line = ((30.0, -13.5), (90.0, -12.9))
    clear = formed(crossing(loads(10.0, 5.0), clearance=line), "D + L", "D + L [left half]")
    found = clear.clearance
    assert found is not None
    assert found.state == "D + L"
    assert 0.0 < found.least < 13.5 - 12.42
    heights = [n.y for n in clear.states[0].nodes if 30.0 <= n.x <= 90.0]
    assert found.least <= min(h + 13.5 for h in heights)
    assert found.at[1] - found.to[1] == pytest.approx(found.least)


def test_a_cable_under_its_clearance_line_must_be_seen() -> None:
    solution = checked(crossing(clearance=((30.0, -11.0), (90.0, -11.0))))
    assert solution.cables[0].clearance is not None
    assert solution.cables[0].clearance.least == pytest.approx(-1.0)
    assert "clearance" in warned(solution)


def test_loads_at_supports_and_two_cables_at_a_head_are_checked_together() -> None:
    cable = layouts.cable(ea=9000.0, loads=(layouts.load("P1", 8.0, 15.0),))
    heavy = layouts.load("Q", 0.0, 12.0)
    loaded = replace(cable, support_loads=((0, heavy),))
    whole = replace(layouts.sample(), cables=(loaded,))
    states = solve(whole, Forming(combos=("D", "1.5D")), OFFICE).cables[0].states
    masts = [state.anchorages[0].mast for state in states]
    assert masts[0] is not None
    assert masts[1] is not None
    assert masts[1] < masts[0] - 0.5 * 12.0


@settings(max_examples=40, deadline=None)
@given(
    live=st.lists(st.floats(-4.0, 20.0), min_size=9, max_size=9),
    corners=st.lists(st.floats(-18.0, -12.0), min_size=2, max_size=5),
    weight=st.sampled_from([0.0, 0.15, 1.5]),
)
def test_no_state_lies_nearer_to_the_line_than_the_least_clearance(
    live: list[float], corners: list[float], weight: float
) -> None:
    points = with_live(dict(enumerate(live, start=1)))
    line = tuple((120.0 * k / (len(corners) - 1), y) for k, y in enumerate(corners))
    combos = ("D + L", "D + 0.5L", "D + L [left half]")
    whole = formed(crossing(points, clearance=line, weight=weight), *combos).clearance
    alone = [
        formed(crossing(points, clearance=line, weight=weight), combo).clearance for combo in combos
    ]
    assert whole is not None
    assert whole.least == pytest.approx(min(c.least for c in alone if c is not None), abs=1e-9)
