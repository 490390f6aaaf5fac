"""The whole of a drawing understood: cables, values, marks, units."""

from __future__ import annotations

import math

import pytest
from ezdxf.math import Vec2
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.codes import MEANINGS, Code
from dxfcable.drawing.excerpt import LayerContent, PassedOver
from dxfcable.drawing.reader import read
from dxfcable.model import LoadSymbol, RuleKind, Severity
from dxfcable.settings import Settings, load
from dxfcable.units import Doubt
from tests.drawing.excerpts import (
    FOOT,
    INCH,
    MILLIMETRE,
    Sketch,
    codes,
    errors,
    finding,
    walkway,
)


def test_the_sample_drawing_is_understood_without_a_finding() -> None:
    layout = walkway().read()
    assert codes(layout) == []
    assert (layout.length_unit, layout.force_unit) == ("m", "kN")
    (cable,) = layout.cables
    assert [(s.mark, s.x, s.y) for s in cable.supports] == [("S1", 0, 12), ("S2", 24, 13)]
    assert [(p.mark, p.x, p.y, p.cases) for p in cable.loads] == [
        ("P1", 8, 7.8, (("D", 15.0),)),
        ("P2", 16, 7.9, (("D", 21.0),)),
    ]
    assert cable.rule is not None
    assert (cable.rule.kind, cable.rule.value) == (RuleKind.SAG, 2.4)
    assert (cable.mark, cable.under, cable.datum) == ("C1", "D", 0.0)
    assert layout.text_height == 0.2


def test_every_code_has_a_meaning() -> None:
    assert set(MEANINGS) == {*Code, *Doubt}


def test_a_drawing_without_unit_stops_and_still_tells_the_rest() -> None:
    sketch = walkway(None)
    sketch.text(30, 30, "9 kN")
    assert errors(sketch.read()) == ["no-units", "load-text-unclaimed"]
    assert errors(sketch.read(units="m")) == ["load-text-unclaimed"]


def test_unit_zero_stops() -> None:
    assert errors(walkway(0).read()) == ["no-units"]


def test_a_unit_that_no_cable_is_drawn_in_stops() -> None:
    assert errors(walkway(3).read()) == ["units-unsupported"]


def test_the_command_lines_unit_wins_with_a_note() -> None:
    layout = walkway(MILLIMETRE).read(units="m")
    assert layout.length_unit == "m"
    assert codes(layout) == ["units-overridden"]


def test_feet_shown_as_architectural_inches_are_noted() -> None:
    assert codes(walkway(FOOT, lunits=4).read()) == ["units-trap"]
    assert codes(walkway(FOOT, lunits=2).read()) == []


def test_a_span_outside_the_usual_asks_for_an_engineer() -> None:
    found = finding(walkway(MILLIMETRE).read(), "span-unusual")
    assert found.severity is Severity.WARNING
    assert "0.024 m" in found.text


def test_nothing_on_our_layers_lists_what_others_hold_and_how_to_map_it() -> None:
    contents = (
        LayerContent(layer="A-COLS", points=2, circles=0, texts=()),
        LayerContent(layer="LOADS", points=3, circles=1, texts=("18k", "see plan")),
        LayerContent(layer="NOTES", points=0, circles=0, texts=("by others",)),
    )
    layout = read(Sketch().excerpt(contents=contents), Settings())
    text = finding(layout, "nothing-drawn").text
    assert "LOADS (3 points and 1 circle and 1 force text)" in text
    assert 'support = "A-COLS"' in text
    assert 'load = "LOADS"' in text
    assert "NOTES" not in text


def test_paper_space_and_external_references_are_told() -> None:
    def passed(layer: str, why: str) -> PassedOver:
        return PassedOver(kind="POINT", layer=layer, handle="2A", line=9, why=why)

    over = (
        passed("S-CABL-LOAD", "in paper space"),
        passed("BASE|S-CABL-DECK", "in the external reference BASE"),
    )
    layout = read(walkway().excerpt(passed_over=over), Settings())
    assert codes(layout, Severity.NOTE) == ["external-reference", "paper-space"]
    bad = (passed("BASE|S-CABL-LOAD", "in the external reference BASE"),)
    assert errors(read(walkway().excerpt(passed_over=bad), Settings())) == ["external-reference"]


def test_a_code_page_that_is_not_known_is_noted() -> None:
    assert codes(walkway(undecodable="DOS9999").read()) == ["code-page-unknown"]


def test_layers_match_without_regard_to_case_and_with_no_other_guess() -> None:
    sketch = walkway()
    for entity in sketch.space:
        entity.dxf.layer = entity.dxf.layer.lower()
    sketch.doc.layers.add("S_CABL_LOAD")
    sketch.doc.layers.add("PLAN$0$S-CABL-SUPP")
    layout = sketch.read()
    assert len(layout.cables[0].loads) == 2
    assert codes(layout) == ["layer-spelling", "layer-variant", "layer-variant"]


def test_layer_names_are_decoded_before_they_are_compared() -> None:
    sketch = walkway()
    for entity in sketch.space.query('*[layer=="S-CABL-LOAD"]'):
        entity.dxf.layer = "Lasten \\U+00D8"
    layout = sketch.read(load('[layers]\nload = "Lasten \u00d8"'))
    assert codes(layout) == []
    assert len(layout.cables[0].loads) == 2


@pytest.mark.parametrize("state", ["off", "freeze"])
def test_layers_off_or_frozen_are_not_read_and_counted(state: str) -> None:
    sketch = walkway()
    getattr(sketch.doc.layers.add("S-CABL-DATA"), state)()
    layout = sketch.read()
    assert layout.cables[0].rule is None
    found = finding(layout, "layer-hidden")
    assert "1 entity not read" in found.text
    assert found.severity is Severity.NOTE


def test_locked_and_unplotted_layers_are_read_as_normal() -> None:
    sketch = walkway()
    layer = sketch.doc.layers.add("S-CABL-DATA")
    layer.lock()
    layer.dxf.plot = 0
    layout = sketch.read()
    assert layout.cables[0].rule is not None
    assert codes(layout) == []


def test_ten_faults_give_ten_findings() -> None:
    sketch = Sketch(None)
    sketch.support(0, 12, MARK="S1", EL="12.0")
    sketch.support(24, 13, MARK="S2", EL="14.0", FORCE="3 kN")
    sketch.data(SAG="2.4", PULL="60 kN", EA="nine")
    sketch.load(8, 7.8, "8.2 t")
    sketch.load(12, 7.8, "l2k")
    sketch.load(30, 7.8, "5 kN")
    sketch.load(16, 7.8)
    sketch.text(4, 0, "7 kN")
    sketch.line("MAST", (3, 3), (3, 0))
    assert sorted(errors(sketch.read())) == [
        "datum-conflict",
        "load-beyond-supports",
        "load-text-unclaimed",
        "load-typo",
        "load-unit-ambiguous",
        "load-unread",
        "load-value-missing",
        "mast-free",
        "no-units",
        "rule-two",
        "tag-unknown-force",
    ]


def test_a_finding_names_layer_kind_handle_position_and_remedy() -> None:
    sketch = walkway()
    sketch.load(8.3, 2.0)
    sketch.text(8.3, 2.0, "8.2 t")
    found = finding(sketch.read(), "load-unit-ambiguous")
    assert found.text == ('S-CABL-LOAD, TEXT F8 at (8.3, 2): "8.2 t" may be tonne or short ton.')
    assert (found.remedy, found.raw) == ("Write kN or kip.", "8.2 t")
    assert (found.handle, found.line, found.layer) == ("F8", 180, "S-CABL-LOAD")
    assert found.at == (8.3, 2.0)


def test_large_coordinates_keep_their_last_digit() -> None:
    east, north = 4_512_345.125, 6_012_345.375
    sketch = Sketch()
    sketch.support(east, north, MARK="S1")
    sketch.support(east + 24.0625, north + 1, MARK="S2")
    sketch.load_block(east + 8.03125, north - 3, D="15 kN")
    layout = sketch.read()
    assert layout.cables[0].loads[0].x == east + 8.03125
    assert layout.cables[0].supports[1].x == east + 24.0625
    assert errors(layout) == []


def test_mixed_units_convert_to_the_first_load_from_the_left() -> None:
    sketch = Sketch(FOOT)
    sketch.support(0, 40)
    sketch.support(100, 40)
    sketch.load_block(75, 20, LOAD="4448.2216152605 N")
    sketch.load_block(25, 20, LOAD="18000 lb")
    sketch.data_at((50, 40), MAX_TENSION="200 kip", WEIGHT="0.15 kip/ft", EA="32400 kip")
    layout = sketch.read()
    (cable,) = layout.cables
    assert layout.force_unit == "lb"
    assert [p.cases[0][1] for p in cable.loads] == [18000.0, pytest.approx(1000.0, rel=1e-12)]
    assert cable.rule is not None
    assert (cable.rule.value, cable.weight, cable.ea) == (200_000.0, 150.0, 32_400_000.0)
    assert "force-units-mixed" in codes(layout, Severity.NOTE)


def test_without_loads_the_force_unit_is_the_rules_then_the_weights() -> None:
    sketch = Sketch(FOOT)
    sketch.support(0, 40)
    sketch.support(100, 40)
    block = sketch.data_at((50, 40), MAX_TENSION="200 kip", WEIGHT="2.2 N/m")
    assert sketch.read().force_unit == "kip"
    block.attribs[0].dxf.text = ""
    assert sketch.read().force_unit == "N"


def test_bare_forces_take_the_stated_unit_with_a_note() -> None:
    sketch = Sketch(FOOT)
    sketch.support(0, 40)
    sketch.support(100, 40)
    sketch.load(50, 30, "18")
    assert errors(sketch.read()) == ["load-unit-missing"]
    layout = sketch.read(force_unit="kip")
    assert layout.cables[0].loads[0].cases == (("load", 18.0),)
    assert "force-unit-assumed" in codes(layout)
    office = load('[units]\nforce = "kN"')
    assert sketch.read(office).force_unit == "kN"
    both = sketch.read(office, force_unit="kip")
    assert both.force_unit == "kip"
    assert "units-overridden" in codes(both)


def test_undrawn_marks_run_left_to_right_then_top_to_bottom() -> None:
    sketch = Sketch()
    for y in (100, 0):
        sketch.support(24, y)
        sketch.support(0, y)
        sketch.string((0, y), (24, y))
        sketch.load(16, y - 4, "9 kN")
        sketch.load(8, y - 4, "9 kN")
    layout = sketch.read()
    assert [(s.mark, s.x, s.y) for s in layout.supports] == [
        ("S1", 0, 100),
        ("S2", 0, 0),
        ("S3", 24, 100),
        ("S4", 24, 0),
    ]
    upper, lower = layout.cables
    assert (upper.mark, [p.mark for p in upper.loads]) == ("C1", ["P1", "P3"])
    assert (lower.mark, [p.mark for p in lower.loads]) == ("C2", ["P2", "P4"])
    assert errors(layout) == []


def test_marks_made_up_leave_out_marks_that_are_drawn() -> None:
    sketch = walkway()
    sketch.load_block(20, 7, MARK="P1", D="3 kN")
    assert [p.mark for p in sketch.read().cables[0].loads] == ["P2", "P3", "P1"]


def test_marks_may_repeat_between_cables() -> None:
    sketch = Sketch()
    for y in (100, 0):
        sketch.support(0, y, MARK="S")
        sketch.support(24, y, MARK="S")
        sketch.string((0, y), (24, y))
        sketch.load_block(8, y - 4, MARK="P1", D="9 kN")
    layout = sketch.read()
    assert errors(layout) == []
    assert [s.mark for s in layout.supports] == ["S"] * 4
    assert [s.key for s in layout.supports] == [0, 1, 2, 3]


def test_two_cables_with_one_mark_stop() -> None:
    sketch = Sketch()
    for y in (100, 0):
        sketch.support(0, y)
        sketch.support(24, y)
        sketch.string((0, y), (24, y))
        sketch.data_at((12, y), MARK="C1", SAG="2")
    assert errors(sketch.read()) == ["cable-mark-repeated"]


def test_two_views_far_apart_keep_their_own() -> None:
    sketch = Sketch()
    for k, x in enumerate((0.0, 5000.0)):
        sketch.support(x, 12)
        sketch.support(x + 24, 12)
        sketch.string((x, 12), (x + 24, 12))
        sketch.load(x + 8, 8, f"{k + 1} kN")
        sketch.data_at((x + 12, 14), MARK=f"V{k}", SAG="2")
        sketch.polyline("DECK", [(x, 7), (x + 24, 7.5)])
        sketch.polyline("FRAM", [(x + 30, 0), (x + 40, 0), (x + 40, 9), (x + 30, 9)], close=True)
    layout = sketch.read()
    assert errors(layout) == []
    for k, cable in enumerate(layout.cables):
        assert cable.mark == f"V{k}"
        assert [p.cases for p in cable.loads] == [(("load", k + 1.0),)]
        assert cable.deck[0] == (5000.0 * k, 7)
        assert cable.frame is not None
        assert cable.frame.x0 == 5000.0 * k + 30


def test_a_missing_rule_is_no_fault_of_the_layout() -> None:
    layout = walkway(rule=False).read()
    assert layout.cables[0].rule is None
    assert codes(layout) == []


def test_bare_lengths_are_in_the_drawings_unit() -> None:
    sketch = Sketch(INCH)
    sketch.support(0, 480, EL="40'-0\"")
    sketch.support(1200, 492, EL="492")
    sketch.load_block(600, 300, LOAD="18k")
    sketch.data_at((600, 500), SAG="10'-0\"")
    layout = sketch.read()
    assert codes(layout) == []
    rule = layout.cables[0].rule
    assert rule is not None
    assert rule.value == 120.0


def test_different_z_asks_for_an_elevation_view() -> None:
    sketch = walkway()
    sketch.space.add_point((12, 7, 3), dxfattribs={"layer": "S-CABL-LOAD"})
    sketch.text(12.1, 7, "D=2 kN")
    found = finding(sketch.read(), "z-spread")
    assert "Z = 3" in found.text
    assert "elevation view" in found.remedy


def test_one_common_z_is_accepted() -> None:
    sketch = Sketch()
    for x in (0, 24):
        sketch.space.add_point((x, 12, 38), dxfattribs={"layer": "S-CABL-SUPP"})
    sketch.space.add_point((8, 7, 38), dxfattribs={"layer": "S-CABL-LOAD"})
    sketch.text(8.1, 7, "2 kN")
    assert errors(sketch.read()) == []


def test_a_dimension_that_says_another_length_is_noted() -> None:
    sketch = walkway()
    for text in ("24.3 m", "24.05 m", "<>", "VARIES"):
        override = sketch.space.add_linear_dim(
            base=(0, 15), p1=(0, 12), p2=(24, 13), text=text, dxfattribs={"layer": "S-CABL-SUPP"}
        )
        override.render()
    found = finding(sketch.read(), "dimension-differs")
    assert found.raw == "24.3 m"
    assert "drawn is 24 m" in found.text


def test_texts_that_plot_too_small_are_noted_where_the_scale_is_known() -> None:
    sketch = walkway()
    assert "text-tiny" not in codes(sketch.read())
    office = load('[show]\nplot_scale = "1:500"')
    assert "text-tiny" in codes(sketch.read(office))


def test_arcs_and_splines_as_cable_are_not_supported_and_said_so() -> None:
    sketch = walkway()
    sketch.space.add_arc((12, 20), 14, 220, 320, dxfattribs={"layer": "S-CABL-STRG"})
    sketch.space.add_spline([(0, 12), (12, 9), (24, 13)], dxfattribs={"layer": "S-CABL-STRG"})
    layout = sketch.read()
    assert codes(layout) == ["entity-unsupported", "entity-unsupported"]
    assert len(layout.cables) == 1


@pytest.mark.parametrize(
    ("layer", "code"),
    [
        ("S-CABL-HOLD", "later-hold-down"),
    ],
)
def test_what_this_version_does_not_do_stops(layer: str, code: str) -> None:
    sketch = walkway()
    sketch.space.add_point((1, 1), dxfattribs={"layer": layer})
    assert errors(sketch.read()) == [code]


def test_a_multileader_that_states_a_force_stops() -> None:
    sketch = walkway()
    builder = sketch.space.add_multileader_mtext("Standard")
    builder.set_content("18 kN")
    builder.build(insert=Vec2(8, 9))
    for entity in sketch.space.query("MULTILEADER"):
        entity.dxf.layer = "S-CABL-LOAD"
    found = finding(sketch.read(), "load-text-unclaimed")
    assert found.raw == "18 kN"


def test_a_coordinate_that_is_no_number_stops() -> None:
    sketch = walkway()
    sketch.load(math.inf, 3)
    sketch.load_block(math.nan, 3, D="3 kN")
    assert errors(sketch.read()) == ["entity-broken", "entity-broken"]


def test_an_external_reference_on_a_load_layer_stops() -> None:
    sketch = walkway()
    sketch.block("SITE", (12, 7), "S-CABL-LOAD", {})
    block = sketch.doc.blocks.get("SITE").block
    assert block is not None
    block.dxf.flags = 4
    assert errors(sketch.read()) == ["external-reference"]


def test_a_polyline_of_one_vertex_is_not_read() -> None:
    sketch = walkway()
    for role in ("STRG", "LOAD", "MAST", "DECK", "FRAM"):
        sketch.polyline(role, [(12, 9)])
    assert set(codes(sketch.read())) == {"entity-unsupported"}


def test_a_thousand_loads_are_read_in_a_moment() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(900, 12)
    for k in range(1, 1000):
        sketch.line("LOAD", (0.9 * k, 5), (0.9 * k, 8))
        sketch.line("LOAD", (0.9 * k, 5), (0.9 * k + 0.1, 5.3))
        sketch.text(0.9 * k + 0.1, 7, f"{k} kN", h=0.1)
    layout = sketch.read()
    assert errors(layout) == []
    assert [p.cases[0][1] for p in layout.cables[0].loads] == list(range(1, 1000))


def test_reading_twice_gives_the_same() -> None:
    sketch = walkway()
    sketch.load(12, 7, "8.2 t")
    assert sketch.read() == sketch.read()


_coordinate = st.floats(-1e6, 1e6).map(lambda v: round(v, 3))


@settings(max_examples=20, deadline=None)
@given(x=_coordinate, y=_coordinate, width=st.floats(5, 900), share=st.floats(0.05, 0.95))
def test_moving_a_drawing_moves_the_layout_and_changes_nothing_else(
    x: float, y: float, width: float, share: float
) -> None:
    sketch = Sketch()
    sketch.support(x, y)
    sketch.support(x + width, y + 1)
    sketch.load(x + share * width, y - 2, "9 kN")
    layout = sketch.read()
    assert errors(layout) == []
    (cable,) = layout.cables
    assert cable.loads[0].x == x + share * width
    assert cable.loads[0].symbol is LoadSymbol.POINT
    assert math.isclose(cable.supports[1].x - cable.supports[0].x, width, abs_tol=1e-9)
