"""From layout to solution: what is computed, what is said, what is refused by name."""

from __future__ import annotations

import math
from dataclasses import replace
from itertools import pairwise

import pytest

from dxfcable.errors import LayoutError
from dxfcable.model import (
    Cable,
    Finding,
    LoadPoint,
    LoadSymbol,
    Mast,
    Rule,
    RuleKind,
    Stay,
    Support,
)
from dxfcable.settings import AnchorDefaults, Settings
from dxfcable.solving.solve import Forming, solve
from dxfcable.statics.catenary_forming import form_catenary
from tests.layouts import anchor, cable, layout, load, sample

NOTHING = Forming()
OFFICE = Settings()
THREE = 0.5e-3  # half of the last printed digit


def codes(findings: tuple[Finding, ...]) -> set[str]:
    return {f.code for f in findings}


def refusal(*arguments: object, **changes: object) -> set[str]:
    with pytest.raises(LayoutError) as refused:
        solve(layout(cable(**changes)), NOTHING, OFFICE)
    found = tuple(f for f in refused.value.findings if isinstance(f, Finding))
    assert all(
        f.remedy or f.code in ("rule", "combination", "joint")
        for f in found
        if f.severity == "error"
    )
    return codes(tuple(f for f in found if f.severity == "error"))


def test_the_worked_cable_has_the_stated_forces() -> None:
    # Own value, computed for the interface's sample and checked there by hand (OWN).
    solution = solve(sample(), NOTHING, OFFICE)
    formed = solution.cables[0]
    assert formed.horizontal == pytest.approx(63.333, abs=THREE)
    assert formed.max_tension == pytest.approx(66.928, abs=THREE)
    assert formed.length == pytest.approx(24.6576, abs=0.5e-4)
    assert formed.unstressed_length == pytest.approx(24.4805, abs=0.5e-4)
    assert [n.elevation for n in formed.nodes] == pytest.approx([12, 10.186, 10.267, 13], abs=THREE)
    assert (formed.governs.segment, formed.governs.end, formed.governs.support) == (
        "CO",
        "right",
        "S2",
    )
    assert [r.vertical for r in formed.reactions] == pytest.approx([14.361, 21.639], abs=THREE)
    at = solution.anchorages[0]
    assert at.mast == pytest.approx(-52.361, abs=THREE)
    assert at.stays == pytest.approx([73.859], abs=THREE)
    assert at.anchors[0].horizontal == pytest.approx(63.333, abs=THREE)
    assert at.anchors[0].uplift == pytest.approx(38.0, abs=THREE)


def test_hangers_run_down_to_drawn_points_and_that_is_said() -> None:
    solution = solve(sample(), NOTHING, OFFICE)
    assert [n.hanger for n in solution.cables[0].nodes] == [
        None,
        pytest.approx(2.6, abs=THREE),
        pytest.approx(3.267, abs=THREE),
        None,
    ]
    assert "hangers-to-points" in codes(solution.findings)


def test_a_deck_line_takes_the_hangers() -> None:
    deck = ((0.0, 8.0), (24.0, 9.0))
    formed = solve(sample(deck=deck), NOTHING, OFFICE).cables[0]
    assert formed.nodes[1].hanger_foot == pytest.approx(8 + 8 / 24)
    short = solve(sample(deck=((0.0, 8.0), (10.0, 8.0))), NOTHING, OFFICE)
    assert short.cables[0].nodes[2].hanger is None
    assert "deck-too-short" in codes(short.findings)
    high = solve(sample(deck=((0.0, 11.0), (24.0, 11.0))), NOTHING, OFFICE)
    assert "deck-above-cable" in codes(high.findings)


def test_arrows_have_no_hangers() -> None:
    arrow = replace(load("P1", 8.0, 15.0, y=1.0), symbol=LoadSymbol.ARROW)
    formed = solve(sample(loads=(arrow,)), NOTHING, OFFICE).cables[0]
    assert formed.nodes[1].hanger is None


def test_a_low_point_is_in_the_datum_of_the_elevations() -> None:
    rule = Rule(kind=RuleKind.LOW_POINT, value=110.0)
    formed = solve(sample(rule=rule, datum=100.0), NOTHING, OFFICE).cables[0]
    assert min(n.elevation for n in formed.nodes) == pytest.approx(110.0)


def test_under_is_the_only_case_else_dead_else_it_must_be_said() -> None:
    both = (
        LoadPoint(mark="P1", x=8.0, y=0, cases=(("D", 10.0), ("L", 5.0)), symbol=LoadSymbol.POINT),
    )
    formed = solve(sample(loads=both), NOTHING, OFFICE)
    assert formed.cables[0].under == "D"
    assert "under-assumed" in codes(formed.findings)
    summed = solve(sample(loads=both), Forming(under="1.2D + 1.6L"), OFFICE).cables[0]
    assert summed.nodes[1].load == pytest.approx(20.0)
    assert (summed.level, summed.level_is_assumed) == ("factored", True)
    neither = (replace(both[0], cases=(("S", 1.0), ("W", 1.0))),)
    assert refusal(loads=neither) == {"no-under"}


def test_the_command_line_wins_and_says_so() -> None:
    asked = Forming(rule=Rule(kind=RuleKind.PULL, value=80.0, text="80 kN"), cable="C1", under="D")
    solution = solve(sample(under="1.0D"), asked, OFFICE)
    assert solution.cables[0].horizontal == 80.0
    assert {"rule-overruled", "under-overruled"} <= codes(solution.findings)
    general = solve(sample(), Forming(rule=asked.rule), OFFICE)
    assert general.cables[0].horizontal == pytest.approx(63.333, abs=THREE)


def test_a_rule_for_a_cable_that_is_not_there_is_refused() -> None:
    with pytest.raises(LayoutError) as refused:
        solve(sample(), Forming(rule=Rule(kind=RuleKind.PULL, value=1.0), cable="C9"), OFFICE)
    assert "unknown-cable" in codes(
        tuple(f for f in refused.value.findings if isinstance(f, Finding))
    )


def test_a_cable_without_a_rule_gets_the_table_of_sags() -> None:
    with pytest.raises(LayoutError) as refused:
        solve(layout(cable(rule=None)), NOTHING, OFFICE)
    finding = next(
        f for f in refused.value.findings if isinstance(f, Finding) and f.code == "no-rule"
    )
    assert finding.text.count("span/") == 5
    assert "span/8: sag 3.000 m, pull 50.7 kN" in finding.text
    assert "--sag" in finding.remedy


@pytest.mark.parametrize(
    ("changes", "code"),
    [
        ({"delta_t": 20.0}, "no-alpha"),
        ({"strand": "1/2"}, "later-strand"),
        (
            {
                "supports": (
                    Support(key=0, mark="S1", x=0.0, y=12.0),
                    Support(key=1, mark="S2", x=12.0, y=12.0),
                    Support(key=2, mark="S3", x=24.0, y=13.0),
                )
            },
            "later-saddles",
        ),
        ({"loads": ()}, "no-loads"),
        ({"loads": (load("P1", 8.0, -15.0),)}, "rule"),
        ({"rule": Rule(kind=RuleKind.SAG, value=0.0)}, "rule"),
        ({"rule": Rule(kind=RuleKind.LOW_POINT, value=12.5)}, "rule"),
        ({"under": "D + W"}, "combination"),
        ({"under": "D or L"}, "combination"),
    ],
)
def test_what_cannot_be_formed_is_refused_by_name(changes: dict[str, object], code: str) -> None:
    assert code in refusal(**changes)


def test_all_faults_of_all_cables_come_at_once() -> None:
    with pytest.raises(LayoutError) as refused:
        solve(layout(cable(strand="1/2"), cable(mark="C2", loads=())), NOTHING, OFFICE)
    found = [f for f in refused.value.findings if isinstance(f, Finding) and f.severity == "error"]
    assert {(f.cable, f.code) for f in found} == {("C1", "later-strand"), ("C2", "no-loads")}


def test_capacity_is_used_and_overrun_is_a_warning() -> None:
    fine = solve(sample(capacity=100.0), NOTHING, OFFICE)
    assert fine.cables[0].utilization == pytest.approx(0.66928, abs=1e-5)
    over = solve(sample(capacity=60.0), NOTHING, OFFICE)
    assert [f.severity for f in over.findings if f.code == "over-capacity"] == ["warning"]


def test_uplift_of_some_points_is_formed_and_said() -> None:
    loads = (load("P1", 4.0, -3.0), load("P2", 16.0, 20.0))
    solution = solve(
        sample(loads=loads, rule=Rule(kind=RuleKind.PULL, value=50.0)), NOTHING, OFFICE
    )
    assert ("above-string" in codes(solution.findings)) == (
        solution.cables[0].nodes[1].y > 12 + 4 / 24
    )


def test_all_cables_at_one_support_are_summed() -> None:
    shared = Support(key=1, mark="S2", x=24.0, y=13.0)
    right = cable(
        mark="C2",
        supports=(shared, Support(key=2, mark="S3", x=48.0, y=12.0)),
        loads=(load("P1", 32.0, 21.0), load("P2", 40.0, 15.0)),
    )
    found = solve(
        layout(cable(), right, masts=(Mast(support=1, foot=(24.0, 0.0)),)), NOTHING, OFFICE
    )
    at = found.anchorages[0]
    assert at.mast == pytest.approx(-2 * 21.639, abs=2 * THREE)
    assert at.head_shear == pytest.approx(0.0, abs=1e-9)


def test_loads_at_a_support_go_into_its_mast() -> None:
    light = solve(sample(), NOTHING, OFFICE).anchorages[0]
    loaded = solve(sample(support_loads=((0, load("P0", 0.0, 5.0)),)), NOTHING, OFFICE).anchorages[
        0
    ]
    assert light.mast is not None
    assert loaded.mast == pytest.approx(light.mast - 5.0)
    assert loaded.stays == pytest.approx(light.stays)


def test_an_anchor_block_is_held_against_its_factors() -> None:
    # Friction acts on the net weight (ANC-1, OWN): mu (W - uplift) / horizontal.
    block = anchor(weight=80.0, mu=0.5, fs_slide=1.5, fs_uplift=1.5)
    base = sample()
    stays = (Stay(support=0, foot=(-10.0, 6.0), anchor=block),)
    solution = solve(replace(base, stays=stays), NOTHING, OFFICE)
    force = solution.anchorages[0].anchors[0]
    assert force.sliding_factor == pytest.approx(0.5 * (80 - 38) / 63.3333, rel=1e-5)
    assert force.uplift_factor == pytest.approx(80 / 38, rel=1e-5)
    warned = [f.text for f in solution.findings if f.code == "anchor-factor"]
    assert len(warned) == 1
    assert "sliding" in warned[0]
    page = replace(OFFICE, anchor=AnchorDefaults(uplift=3.0))
    again = solve(replace(base, stays=stays), NOTHING, page)
    assert len([f for f in again.findings if f.code == "anchor-factor"]) == 1  # the block's wins


@pytest.mark.parametrize(
    ("masts", "stays", "code"),
    [
        (((0.0, 6.0),), (), "mast-without-stay"),
        ((), ((-10.0, 6.0),), "stay-without-mast"),
        (((0.0, 6.0),), ((10.0, 6.0),), "stay-compressed"),
        (((0.0, 6.0),), ((0.0, 4.0),), "stay-parallel"),
    ],
)
def test_a_support_that_an_engineer_must_see_is_a_warning(
    masts: tuple[tuple[float, float], ...], stays: tuple[tuple[float, float], ...], code: str
) -> None:
    drawn = layout(
        cable(),
        masts=tuple(Mast(support=0, foot=foot) for foot in masts),
        stays=tuple(Stay(support=0, foot=foot) for foot in stays),
    )
    solution = solve(drawn, NOTHING, OFFICE)
    assert [f.severity for f in solution.findings if f.code == code] == ["warning"]


def test_two_stays_with_different_feet_need_shares() -> None:
    base = sample()
    feet = ((-10.0, 6.0), (-14.0, 6.0))
    bare = replace(base, stays=tuple(Stay(support=0, foot=f) for f in feet))
    with pytest.raises(LayoutError) as refused:
        solve(bare, NOTHING, OFFICE)
    assert "joint" in codes(tuple(f for f in refused.value.findings if isinstance(f, Finding)))
    shared = replace(
        base,
        stays=tuple(
            Stay(support=0, foot=f, anchor=anchor(share=s))
            for f, s in zip(feet, (0.25, 0.75), strict=True)
        ),
    )
    at = solve(shared, NOTHING, OFFICE).anchorages[0]
    across = [
        t * abs(x) / math.hypot(x, 6)
        for t, (x, _) in zip(at.stays, ((-10, 0), (-14, 0)), strict=True)
    ]
    assert across == pytest.approx([0.25 * 63.3333, 0.75 * 63.3333], rel=1e-5)


def _footbridge(**changes: object) -> Cable:
    """Return the level cable of nine equal loads: 120 long, 10 each at 12, sag 12, EA 32400."""
    facts: dict[str, object] = {
        "supports": (
            Support(key=0, mark="S1", x=0.0, y=50.0),
            Support(key=1, mark="S2", x=120.0, y=50.0),
        ),
        "loads": tuple(load(f"P{k}", 12.0 * k, 10.0) for k in range(1, 10)),
        "rule": Rule(kind=RuleKind.SAG, value=12.0),
        "ea": 32400.0,
        "weight": 0.15,
    }
    return cable(**(facts | changes))


def test_a_cable_with_weight_is_formed_on_its_exact_curve() -> None:
    # Own value (OWN): the level benchmark with 0.15 per length formed under D.
    formed = solve(layout(_footbridge()), NOTHING, OFFICE).cables[0]
    assert formed.horizontal == pytest.approx(147.694, abs=THREE)
    assert formed.max_tension == pytest.approx(157.322, abs=THREE)
    assert formed.sag == pytest.approx(12.0, rel=1e-12)
    total = sum(r.vertical for r in formed.reactions)
    assert total == pytest.approx(90.0 + 0.15 * formed.unstressed_length, rel=1e-12)


def test_weight_takes_the_factor_of_its_case() -> None:
    plain = solve(layout(_footbridge()), Forming(under="1.2D"), OFFICE).cables[0]
    pull = Rule(kind=RuleKind.PULL, value=plain.horizontal or 0.0)
    same = _footbridge(
        rule=pull,
        weight=0.18,
        loads=tuple(load(f"P{k}", 12.0 * k, 12.0) for k in range(1, 10)),
    )
    other = solve(layout(same), NOTHING, OFFICE).cables[0]
    assert other.sag == pytest.approx(12.0, rel=1e-9)
    assert other.max_tension == pytest.approx(plain.max_tension, rel=1e-12)


def test_a_combination_without_the_dead_case_has_no_cable_weight() -> None:
    loads = tuple(load(f"P{k}", 12.0 * k, 10.0, case="L") for k in range(1, 10))
    solution = solve(layout(_footbridge(loads=loads, weight_case="D")), Forming(under="L"), OFFICE)
    assert solution.cables[0].horizontal == pytest.approx(125.0)
    assert "no-cable-weight" in codes(solution.findings)


def test_a_cable_with_weight_and_no_loads_is_a_cable_too() -> None:
    # Catenary of 5 per length over 20 with sag 6 (Hibbeler, Statics, catenary example; MEM).
    bare = cable(
        supports=(Support(key=0, mark="A", x=0.0, y=0.0), Support(key=1, mark="B", x=20.0, y=0.0)),
        loads=(),
        rule=Rule(kind=RuleKind.SAG, value=6.0),
        ea=None,
        weight=5.0,
    )
    formed = solve(layout(bare), NOTHING, OFFICE).cables[0]
    assert formed.under == "D"
    assert formed.horizontal == pytest.approx(45.9, abs=0.05)
    assert formed.max_tension == pytest.approx(75.9, abs=0.05)
    assert formed.length == pytest.approx(24.2, abs=0.05)


def test_the_drawn_curve_is_true_to_a_millimetre() -> None:
    formed = solve(layout(_footbridge()), NOTHING, OFFICE).cables[0]
    curve = formed.curves[0]
    assert {n.x for n in formed.nodes} <= {x for x, _ in curve}
    half = [((a + c) / 2, (b + d) / 2) for (a, b), (c, d) in pairwise(curve)]
    exact = form_catenary(
        [0.0, *(12.0 * k for k in range(1, 10)), 120.0],
        [10.0] * 9,
        50.0,
        50.0,
        RuleKind.SAG,
        12.0,
        weight=0.15,
        ea=32400.0,
    ).ordinates_at([x for x, _ in half])
    assert max(abs(y - e) for (_, y), e in zip(half, exact, strict=True)) < 1e-3


def test_with_weight_each_piece_has_two_rays_with_its_weight_between() -> None:
    formed = solve(layout(_footbridge()), NOTHING, OFFICE).cables[0]
    diagram = formed.diagrams[0]
    assert len(diagram.load_line) == 2 * len(diagram.letters) == 2 * len(formed.segments)
    for k, segment in enumerate(formed.segments):
        left, right = diagram.load_line[2 * k], diagram.load_line[2 * k + 1]
        assert left - right == pytest.approx(0.15 * segment.unstressed_length)
        for ordinate, angle in ((left, segment.angle_left), (right, segment.angle_right)):
            slope = (diagram.pole[1] - ordinate) / diagram.pole[0]
            assert math.degrees(math.atan(slope)) == pytest.approx(angle, abs=1e-9)
