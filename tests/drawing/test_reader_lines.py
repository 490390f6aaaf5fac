"""Data blocks, masts, stays, anchors, deck, clearance and frames."""

from __future__ import annotations

import pytest

from dxfcable.model import RuleKind
from tests.drawing.excerpts import FOOT, Sketch, codes, errors, finding, walkway


@pytest.mark.parametrize(
    ("tag", "text", "kind", "value"),
    [
        ("MAX_TENSION", "80 kN", RuleKind.MAX_TENSION, 80.0),
        ("SAG", "2.4", RuleKind.SAG, 2.4),
        ("LOW_POINT", "EL 9.8", RuleKind.LOW_POINT, 9.8),
        ("PULL", "0.06 MN", RuleKind.PULL, 60.0),
        ("LENGTH", "24600 mm", RuleKind.LENGTH, 24.6),
        ("CUT_LENGTH", "24.5 m", RuleKind.CUT_LENGTH, 24.5),
    ],
)
def test_a_data_block_gives_its_one_rule(tag: str, text: str, kind: RuleKind, value: float) -> None:
    sketch = walkway(rule=False)
    sketch.data(**{tag: text})
    rule = sketch.read().cables[0].rule
    assert rule is not None
    assert (rule.kind, rule.text) == (kind, f"{tag} {text}")
    assert rule.value == pytest.approx(value, rel=1e-12)


def test_tags_compare_without_regard_to_case() -> None:
    sketch = walkway(rule=False)
    sketch.data(sag="2.4", Under="1.0D")
    (cable,) = sketch.read().cables
    assert cable.rule is not None
    assert cable.under == "1.0D"


def test_a_point_on_the_data_layer_is_passed_through() -> None:
    sketch = walkway(rule=False)
    sketch.space.add_point((12, 9.5), dxfattribs={"layer": "S-CABL-DATA"})
    rule = sketch.read().cables[0].rule
    assert rule is not None
    assert (rule.kind, rule.point) == (RuleKind.THROUGH, (12, 9.5))


def test_a_point_to_pass_through_lies_between_the_ends() -> None:
    sketch = walkway(rule=False)
    sketch.space.add_point((24, 9.5), dxfattribs={"layer": "S-CABL-DATA"})
    assert errors(sketch.read()) == ["rule-value"]


def test_two_rules_stop() -> None:
    sketch = walkway(rule=False)
    sketch.data(SAG="2.4", PULL="60 kN")
    assert errors(sketch.read()) == ["rule-two"]
    sketch = walkway()
    sketch.space.add_point((12, 9.5), dxfattribs={"layer": "S-CABL-DATA"})
    assert errors(sketch.read()) == ["rule-two"]


def test_blank_attributes_are_absent() -> None:
    sketch = walkway(rule=False)
    sketch.data(SAG="2.4", PULL=" ", EA="", WEIGHT="")
    (cable,) = sketch.read().cables
    assert (cable.ea, cable.weight) == (None, 0.0)


@pytest.mark.parametrize("text", ["0", "-2.4"])
def test_a_sag_of_zero_or_less_stops(text: str) -> None:
    sketch = walkway(rule=False)
    sketch.data(SAG=text)
    assert errors(sketch.read()) == ["rule-value"]


def test_a_second_data_block_of_a_cable_stops() -> None:
    sketch = walkway()
    sketch.data_at((14, 14), SAG="2.4")
    assert errors(sketch.read()) == ["data-two"]


def test_all_else_of_a_data_block_is_read_in_the_layouts_units() -> None:
    sketch = Sketch(FOOT)
    sketch.support(0, 40)
    sketch.support(100, 40)
    sketch.load(50, 30, "18 kip")
    sketch.data_at(
        (50, 41),
        MARK="MAIN",
        SAG="10'-0\"",
        WEIGHT="3 lb/ft",
        WEIGHT_CASE="dl",
        EA="32400000 lb",
        STRAND="1 in A586",
        ALPHA="6.5e-6 /F",
        DELTA_T="54 F",
        CAPACITY="150 kip",
        SPAN="1",
        FITTING_L="open_socket",
    )
    layout = sketch.read()
    (cable,) = layout.cables
    assert cable.mark == "MAIN"
    assert cable.weight == pytest.approx(0.003, rel=1e-12)
    assert (cable.weight_case, cable.ea, cable.capacity) == ("D", 32400.0, 150.0)
    assert (cable.strand, cable.delta_t) == ("1 in A586", 30.0)
    assert cable.alpha == pytest.approx(11.7e-6, rel=1e-12)
    assert (cable.fitting_left, cable.fitting_right) == ("open_socket", "")
    assert codes(layout) == ["later-span", "force-units-mixed", "no-datum"]


@pytest.mark.parametrize(
    ("tag", "text", "code"),
    [
        ("WEIGHT", "3.2 kg/m", "load-is-mass"),
        ("WEIGHT", "3", "weight-unread"),
        ("WEIGHT_CASE", "Z", "case-unknown"),
        ("EA", "-9000 kN", "load-sign"),
        ("ALPHA", "12", "expansion-unread"),
        ("DELTA_T", "thirty", "temperature-unread"),
        ("MAXTENSION", "80 kN", "tag-unknown-force"),
    ],
)
def test_a_value_of_a_data_block_that_does_not_read_stops(tag: str, text: str, code: str) -> None:
    sketch = walkway(rule=False)
    sketch.data(SAG="2.4", **{tag: text})
    layout = sketch.read()
    assert errors(layout) == [code]
    assert finding(layout, code).raw == text


def test_a_data_block_between_two_cables_stops() -> None:
    sketch = Sketch()
    for y in (12, 22):
        sketch.support(0, y)
        sketch.support(24, y)
        sketch.string((0, y), (24, y))
    sketch.data_at((12, 17), SAG="2.4")
    assert errors(sketch.read()) == ["owner-ambiguous"]
    sketch = Sketch()
    for y in (12, 22):
        sketch.support(0, y)
        sketch.support(24, y)
        sketch.string((0, y), (24, y))
    sketch.data_at((12, 15.9), SAG="2.4")
    layout = sketch.read()
    assert errors(layout) == []
    assert [c.rule is not None for c in layout.cables] == [False, True]


def test_another_block_on_the_data_layer_stops() -> None:
    sketch = walkway(rule=False)
    sketch.block("MY-DATA", (12, 13), "S-CABL-DATA", {"SAG": "2.4"})
    assert errors(sketch.read()) == ["block-unknown"]


def test_masts_and_stays_run_from_a_support_down() -> None:
    sketch = walkway()
    sketch.line("MAST", (0, 6), (0, 12))
    sketch.line("STAY", (0, 12), (-10, 6))
    layout = sketch.read()
    assert codes(layout) == []
    assert [(m.support, m.foot) for m in layout.masts] == [(0, (0, 6))]
    assert [(s.support, s.foot) for s in layout.stays] == [(0, (-10, 6))]


@pytest.mark.parametrize(
    ("role", "start", "end", "code"),
    [
        ("MAST", (0.5, 12), (0.5, 6), "mast-free"),
        ("STAY", (-0.5, 12), (-10, 6), "stay-free"),
        ("MAST", (0, 12), (0, 18), "mast-up"),
        ("STAY", (0, 12), (-10, 13), "stay-up"),
        ("STAY", (0, 12), (24, 13), "stay-up"),
    ],
)
def test_a_mast_or_stay_that_starts_or_runs_elsewhere_stops(
    role: str, start: tuple[float, float], end: tuple[float, float], code: str
) -> None:
    sketch = walkway()
    sketch.line(role, start, end)
    assert errors(sketch.read()) == [code]


def test_a_stay_drawn_twice_counts_once_and_a_second_mast_stops() -> None:
    sketch = walkway()
    sketch.line("STAY", (0, 12), (-10, 6))
    sketch.line("STAY", (-10, 6), (0, 12))
    assert codes(sketch.read()) == ["line-merged"]
    sketch.line("MAST", (0, 12), (0, 6))
    sketch.line("MAST", (0, 12), (1, 6))
    assert errors(sketch.read()) == ["mast-two"]


def test_an_anchor_block_at_a_foot_gives_stiffness_and_block() -> None:
    sketch = walkway()
    sketch.line("STAY", (0, 12), (-10, 6))
    sketch.anchor(
        -10, 6, MARK="A1", EA="9 MN", SHARE="0.5", WEIGHT="250 kN", MU="0.45", FS_SLIDE="1.5"
    )
    anchor = sketch.read().stays[0].anchor
    assert anchor is not None
    assert (anchor.mark, anchor.ea, anchor.weight) == ("A1", 9000.0, 250.0)
    assert (anchor.share, anchor.mu, anchor.fs_slide, anchor.fs_uplift) == (0.5, 0.45, 1.5, None)


def test_an_anchor_block_at_no_foot_stops() -> None:
    sketch = walkway()
    sketch.line("STAY", (0, 12), (-10, 6))
    sketch.anchor(-10.5, 6, MARK="A1")
    assert errors(sketch.read()) == ["anchor-free"]


def test_a_strand_of_an_anchor_block_is_not_yet_read_and_stops() -> None:
    sketch = walkway()
    sketch.line("STAY", (0, 12), (-10, 6))
    sketch.anchor(-10, 6, STRAND="1 in A586")
    assert errors(sketch.read()) == ["later-strand"]


def test_deck_and_clearance_run_from_left_to_right() -> None:
    sketch = walkway()
    sketch.line("DECK", (24, 7.5), (12, 7))
    sketch.line("DECK", (0, 7), (12, 7))
    sketch.polyline("CLRN", [(-5, 4), (10, 5), (30, 4)])
    (cable,) = sketch.read().cables
    assert cable.deck == ((0, 7), (12, 7), (24, 7.5))
    assert cable.clearance == ((-5, 4), (10, 5), (30, 4))


def test_a_deck_that_runs_back_or_twice_over_one_x_stops() -> None:
    sketch = walkway()
    sketch.polyline("DECK", [(0, 7), (24, 7), (24, 6.8), (0, 6.8)], close=True)
    assert errors(sketch.read()) == ["polyline-back"]
    sketch = walkway()
    sketch.line("DECK", (0, 7), (24, 7))
    sketch.line("DECK", (0, 6), (24, 6))
    assert errors(sketch.read()) == ["polyline-two"]


def test_one_deck_may_run_under_two_cables() -> None:
    sketch = Sketch()
    for x in (0, 24, 48):
        sketch.support(x, 12)
    sketch.string((0, 12), (24, 12))
    sketch.string((24, 12), (48, 12))
    sketch.line("DECK", (0, 7), (48, 7))
    layout = sketch.read()
    assert errors(layout) == []
    assert [cable.deck for cable in layout.cables] == [((0, 7), (48, 7))] * 2


def test_a_frame_is_an_upright_rectangle() -> None:
    sketch = walkway()
    sketch.polyline("FRAM", [(30, 0), (30, 9), (40, 9), (40, 0)], close=True)
    frame = sketch.read().cables[0].frame
    assert frame is not None
    assert (frame.x0, frame.y0, frame.x1, frame.y1) == (30, 0, 40, 9)
    sketch.polyline("FRAM", [(50, 0), (50, 9), (60, 9), (60, 0)], close=True)
    assert errors(sketch.read()) == ["frame-unclear"]


def test_a_slanted_or_open_frame_stops() -> None:
    sketch = walkway()
    sketch.polyline("FRAM", [(30, 0), (31, 9), (41, 9), (40, 0)], close=True)
    sketch.polyline("FRAM", [(30, 0), (30, 9), (40, 9), (40, 0)])
    assert errors(sketch.read()) == ["frame-unclear", "frame-unclear"]


def test_a_deck_with_arcs_is_followed_along_them() -> None:
    sketch = walkway()
    deck = {"layer": "S-CABL-DECK"}
    sketch.space.add_lwpolyline([(0, 0, -0.2), (24, 0)], format="xyb", dxfattribs=deck)
    (cable,) = sketch.read().cables
    # The rise of an arc is its bulge times half its chord.
    assert max(y for _, y in cable.deck) == pytest.approx(0.2 * 12, abs=1e-3)
