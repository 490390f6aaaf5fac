"""Supports, blocks at any depth, closing strings, saddles and the datum."""

from __future__ import annotations

import math

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.model import SupportKind
from tests.drawing.excerpts import FOOT, Sketch, codes, errors, finding, walkway


def test_points_circles_and_blocks_are_supports() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.space.add_circle((24, 12), 0.2, dxfattribs={"layer": "S-CABL-SUPP"})
    layout = sketch.read()
    assert [(s.x, s.y) for s in layout.supports] == [(0, 12), (24, 12)]
    assert layout.supports[1].origin.kind == "CIRCLE"


def test_a_missing_support_stops() -> None:
    sketch = Sketch()
    sketch.load(8, 7, "9 kN")
    assert errors(sketch.read()) == ["no-supports"]
    sketch.support(0, 12)
    assert errors(sketch.read()) == ["one-support"]


def test_three_supports_without_string_or_kind_stop() -> None:
    sketch = Sketch()
    for x in (0, 24, 48):
        sketch.support(x, 12)
    found = finding(sketch.read(), "string-missing")
    assert "S1, S2, S3" in found.text
    assert "S-CABL-STRG" in found.remedy


def test_saddles_with_kind_need_no_string() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(24, 14, KIND="roller")
    sketch.support(48, 12)
    layout = sketch.read()
    assert codes(layout)[0] == "saddles-without-string"
    (cable,) = layout.cables
    assert [s.kind for s in cable.supports] == [
        SupportKind.END,
        SupportKind.ROLLER,
        SupportKind.END,
    ]


def test_a_string_over_a_saddle_without_kind_stops() -> None:
    sketch = Sketch()
    for x in (0, 24, 48):
        sketch.support(x, 12, MARK=f"S{x}")
    sketch.string((48, 12), (24, 12), (0, 12))
    layout = sketch.read()
    assert errors(layout) == ["saddle-kind-missing"]
    assert [s.x for s in layout.cables[0].supports] == [0, 24, 48]


def test_a_line_that_passes_a_support_passes_over_it() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(24, 12, KIND="SHEAVE")
    sketch.support(48, 12)
    sketch.string((0, 12), (48, 12))
    assert len(sketch.read().cables[0].supports) == 3


def test_strings_that_meet_at_a_saddle_are_one_cable_else_two() -> None:
    for tags, number in (({"KIND": "FIXED"}, 1), ({"MARK": "B"}, 2)):
        sketch = Sketch()
        sketch.support(0, 12)
        sketch.support(24, 14, **tags)
        sketch.support(48, 12)
        sketch.string((24, 14), (48, 12))
        sketch.string((0, 12), (24, 14))
        layout = sketch.read()
        assert errors(layout) == []
        assert len(layout.cables) == number


def test_a_kind_that_is_not_known_stops() -> None:
    sketch = Sketch()
    sketch.support(0, 12, KIND="HINGE")
    sketch.support(24, 12)
    assert errors(sketch.read()) == ["value-unread"]


def test_supports_at_one_x_stop() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(0.0001, 24)
    assert errors(sketch.read()) == ["same-x"]


def test_a_string_with_a_free_end_stops_and_says_how_far_the_next_support_is() -> None:
    sketch = walkway()
    sketch.string((0, 12), (23.9, 13))
    layout = sketch.read()
    assert errors(layout)[0] == "string-free"
    assert "S2 is 0.1 away" in finding(layout, "string-free").text


def test_a_string_that_runs_back_stops() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(48, 12, KIND="FIXED")
    sketch.support(24, 12.5)
    sketch.string((0, 12), (48, 12), (24, 12.5))
    assert errors(sketch.read())[0] == "string-back"


def test_a_string_drawn_twice_or_in_part_counts_once() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(24, 14, KIND="FIXED")
    sketch.support(48, 12)
    sketch.string((0, 12), (24, 14), (48, 12))
    sketch.string((48, 12), (24, 14), (0, 12))
    sketch.string((0, 12), (24, 14))
    layout = sketch.read()
    assert len(layout.cables) == 1
    assert codes(layout).count("string-merged") == 2


def test_a_support_that_no_string_joins_stops() -> None:
    sketch = Sketch()
    for x in (0, 24, 48):
        sketch.support(x, 12)
    sketch.string((0, 12), (24, 12))
    assert errors(sketch.read()) == ["support-unused"]


def test_supports_drawn_twice_merge_and_near_ones_are_listed() -> None:
    sketch = walkway()
    sketch.support(0, 12)
    sketch.support(24.0001, 13)
    layout = sketch.read()
    assert codes(layout) == ["support-merged", "support-merged"]
    assert [s.mark for s in layout.supports] == ["S1", "S2"]


def test_supports_at_one_point_that_differ_stop() -> None:
    sketch = walkway()
    sketch.support(0, 12, MARK="A", EL="11.0")
    assert errors(sketch.read()) == ["support-conflict"]


def test_a_support_near_another_is_listed() -> None:
    sketch = walkway()
    sketch.support(24.01, 13, MARK="S9")
    assert "near-duplicate" in codes(sketch.read())


def test_symbol_lines_beside_supports_are_counted_not_read() -> None:
    sketch = walkway()
    sketch.line("SUPP", (0, 12), (-0.5, 11))
    sketch.line("SUPP", (0, 12), (0.5, 11))
    layout = sketch.read()
    assert "2 lines" in finding(layout, "symbol-pieces").text
    assert len(layout.supports) == 2


def test_an_exploded_symbol_is_no_support() -> None:
    sketch = Sketch()
    sketch.line("SUPP", (0, 12), (-0.5, 11))
    sketch.line("SUPP", (24, 12), (24.5, 11))
    layout = sketch.read()
    assert errors(layout) == ["no-supports"]
    assert "block" in finding(layout, "symbol-pieces").remedy


def test_an_elevation_gives_the_datum() -> None:
    sketch = Sketch(FOOT)
    sketch.support(0, 12, EL="EL 41'-2 1/2\"")
    sketch.support(90, 12.5)
    layout = sketch.read()
    assert layout.cables[0].datum == pytest.approx(41 + 2.5 / 12 - 12, rel=1e-12)
    assert layout.supports[0].stated_elevation == pytest.approx(41 + 2.5 / 12, rel=1e-12)
    assert "no-datum" not in codes(layout)


def test_without_an_elevation_a_note_says_what_labels_mean() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(24, 13)
    layout = sketch.read()
    assert layout.cables[0].datum is None
    assert "differences from S1" in finding(layout, "no-datum").text


@pytest.mark.parametrize(
    ("left", "right", "is_at_fault"),
    [
        ("12.000", "13.000", False),
        ("12.000", "13.001", False),  # 1 mm
        ("12.000", "13.002", True),
        ("12.0", "13.05", False),  # half of the last place of the coarser
        ("12.0", "13.06", True),
        ("12000 mm", "13 m", False),
        ("12", "13.4", False),
    ],
)
def test_elevations_agree_with_the_drawing_within_half_their_last_place(
    left: str, right: str, *, is_at_fault: bool
) -> None:
    sketch = Sketch()
    sketch.support(0, 12, EL=left)
    sketch.support(24, 13, EL=right)
    assert ("datum-conflict" in errors(sketch.read())) is is_at_fault


def test_sixteenths_of_an_inch_are_tolerated_in_feet() -> None:
    sketch = Sketch(FOOT)
    sketch.support(0, 0, EL="40'-0 1/16\"")
    sketch.support(90, 1, EL="41'-0\"")
    assert errors(sketch.read()) == []
    sketch = Sketch(FOOT)
    sketch.support(0, 0, EL="40'-0 1/8\"")
    sketch.support(90, 1, EL="41'-0 1/16\"")
    assert errors(sketch.read()) == []
    sketch = Sketch(FOOT)
    sketch.support(0, 0, EL="40.00")
    sketch.support(90, 1, EL="41.02")
    assert errors(sketch.read()) == ["datum-conflict"]


def test_an_elevation_that_does_not_read_stops() -> None:
    sketch = Sketch(FOOT)
    sketch.support(0, 12, EL="41-2.5")
    sketch.support(90, 12)
    assert errors(sketch.read()) == ["length-ambiguous"]


def test_texts_beside_supports_give_elevation_and_mark() -> None:
    sketch = Sketch()
    sketch.support(0, 12)
    sketch.support(24, 12)
    sketch.text(0.2, 12.1, "EL. 112.500", "SUPP")
    sketch.text(24.2, 12, "B1", "SUPP")
    sketch.text(12, 2, "cable line", "SUPP")
    layout = sketch.read()
    assert layout.cables[0].datum == 100.5
    assert [s.mark for s in layout.supports] == ["S1", "B1"]
    assert '"cable line"' in finding(layout, "texts-listed").text


def pin(sketch: Sketch, name: str = "CABLE-SUPPORT") -> None:
    """Define a support block: a triangle with its top at the base point."""
    block = sketch.doc.blocks.new(name)
    block.add_lwpolyline([(0, 0), (-0.3, -0.5), (0.3, -0.5)], close=True)
    block.add_attdef("KIND", (0, 0), "FIXED", dxfattribs={"flags": 2})


def test_a_mirrored_support_block_stands_where_it_is_seen() -> None:
    sketch = Sketch()
    pin(sketch)
    sketch.space.add_blockref(
        "CABLE-SUPPORT",
        (0, 12),
        dxfattribs={"layer": "S-CABL-SUPP", "xscale": -1},
    )
    # With extrusion -Z the stored x has the other sign.
    sketch.space.add_blockref(
        "CABLE-SUPPORT",
        (-24, 13),
        dxfattribs={"layer": "S-CABL-SUPP", "extrusion": (0, 0, -1)},
    )
    layout = sketch.read()
    assert [(s.x, s.y) for s in layout.supports] == [(0, 12), (24, 13)]
    assert errors(layout) == []


def test_constant_attributes_are_read_from_the_block() -> None:
    sketch = Sketch()
    pin(sketch)
    sketch.support(0, 12)
    sketch.space.add_blockref("CABLE-SUPPORT", (24, 12), dxfattribs={"layer": "S-CABL-SUPP"})
    sketch.support(48, 12)
    layout = sketch.read()
    assert layout.supports[1].kind is SupportKind.FIXED


def test_an_attribute_may_hold_an_mtext() -> None:
    sketch = walkway()
    insert = sketch.space.query('INSERT[layer=="S-CABL-SUPP"]')[0]
    attrib = insert.attribs[1]
    mtext = sketch.space.add_mtext(r"{\C1;12\S1/2;}")
    attrib.embed_mtext(mtext)
    sketch.space.delete_entity(mtext)
    layout = sketch.read()
    assert errors(layout) == ["length-unread"]
    assert finding(layout, "length-unread").raw == "12 1/2"


def nested(angle: float, scale: float, at: tuple[float, float]) -> Sketch:
    """Give a drawing whose supports lie two blocks deep, turned and scaled."""
    sketch = Sketch()
    inner = sketch.doc.blocks.new("INNER")
    inner.add_point((2, 1))  # on layer 0: it has the layer of its INSERT
    inner.add_line((2, 1), (2, 3), dxfattribs={"layer": "A-WALL"})
    outer = sketch.doc.blocks.new("OUTER")
    attribs = {"layer": "S-CABL-SUPP", "rotation": angle, "xscale": scale, "yscale": scale}
    for x in (0, 100):
        outer.add_blockref("INNER", (x, 5), dxfattribs=attribs)
    sketch.space.add_blockref("OUTER", at, dxfattribs={"layer": "A-VIEW"})
    return sketch


def test_blocks_two_deep_on_a_support_layer_count_by_their_base_points() -> None:
    layout = nested(30, 2, (10, 20)).read()
    assert [(s.x, s.y) for s in layout.supports] == [(10, 25), (110, 25)]
    assert layout.supports[0].origin.layer == "S-CABL-SUPP"
    assert layout.supports[0].origin.handle == "F0"


@settings(max_examples=20, deadline=None)
@given(
    angle=st.floats(-180, 180),
    inner_angle=st.floats(-180, 180),
    scale=st.floats(0.1, 9),
    mirror=st.sampled_from((1, -1)),
)
def test_content_of_nested_blocks_is_transformed_by_the_full_matrix(
    angle: float, inner_angle: float, scale: float, mirror: int
) -> None:
    sketch = Sketch()
    inner = sketch.doc.blocks.new("INNER")
    inner.add_point((2, 1), dxfattribs={"layer": "S-CABL-SUPP"})
    outer = sketch.doc.blocks.new("OUTER")
    outer.add_blockref("INNER", (3, 4), dxfattribs={"rotation": inner_angle})
    sketch.space.add_blockref(
        "OUTER",
        (50, 60),
        dxfattribs={"xscale": scale * mirror, "yscale": scale, "rotation": angle},
    )
    sketch.support(900, 0)
    t, u = math.radians(inner_angle), math.radians(angle)
    x = 3 + 2 * math.cos(t) - math.sin(t)
    y = 4 + 2 * math.sin(t) + math.cos(t)
    x, y = x * scale * mirror, y * scale
    found = next(s for s in sketch.read().supports if s.x < 800)
    assert found.x == pytest.approx(50 + x * math.cos(u) - y * math.sin(u), abs=1e-9)
    assert found.y == pytest.approx(60 + x * math.sin(u) + y * math.cos(u), abs=1e-9)


def test_a_mirrored_block_of_polylines_is_read_in_world_coordinates() -> None:
    sketch = walkway()
    block = sketch.doc.blocks.new("DECK")
    block.add_lwpolyline([(0, 7), (24, 7.5)], dxfattribs={"layer": "S-CABL-DECK"})
    sketch.space.add_blockref("DECK", (24, 0), dxfattribs={"xscale": -1})
    (x0, y0), (x1, y1) = sketch.read().cables[0].deck
    assert (x0, y0, x1, y1) == pytest.approx((0, 7.5, 24, 7), abs=1e-9)


def test_a_block_on_a_frozen_layer_hides_what_it_holds() -> None:
    sketch = nested(0, 1, (0, 0))
    sketch.doc.layers.add("A-VIEW").freeze()
    layout = sketch.read()
    assert layout.supports == ()
    assert "A-VIEW is frozen" in finding(layout, "layer-hidden").text


def test_a_block_inserted_as_an_array_stops() -> None:
    sketch = walkway()
    sketch.block(
        "CABLE-LOAD", (12, 7), "S-CABL-LOAD", {"D": "3 kN"}, column_count=3, column_spacing=2
    )
    assert errors(sketch.read()) == ["block-array"]


@pytest.mark.parametrize("scale", [25.4, 12, 304.8, 1000, 0.3048, 1 / 12, 1 / 25.4])
def test_a_block_scaled_by_a_factor_between_units_is_noted(scale: float) -> None:
    sketch = walkway()
    sketch.block("CABLE-LOAD", (12, 7), "S-CABL-LOAD", {"D": "3 kN"}, xscale=scale, yscale=scale)
    assert codes(sketch.read()) == ["block-scale-unit"]


def test_a_base_point_far_from_its_symbol_is_noted() -> None:
    sketch = Sketch()
    sketch.doc.blocks.new("CABLE-SUPPORT").add_circle((50, 0), 1)
    sketch.support(0, 12, EL="12.0")
    sketch.support(24, 12, EL="12.0")
    layout = sketch.read()
    assert codes(layout).count("block-base-far") == 2
    assert layout.supports[1].x == 24


def test_an_anonymous_block_has_its_true_name() -> None:
    sketch = Sketch()
    pin(sketch)
    sketch.doc.appids.add("AcDbBlockRepBTag")
    altered = sketch.doc.blocks.new("*U7")
    altered.add_circle((0, 0), 0.2)
    handle = sketch.doc.blocks.get("CABLE-SUPPORT").block_record_handle
    altered.block_record.set_xdata("AcDbBlockRepBTag", [(1070, 1), (1005, handle)])
    sketch.space.add_blockref("*U7", (24, 12), dxfattribs={"layer": "S-CABL-SUPP"})
    sketch.support(0, 12)
    assert sketch.read().supports[1].origin.raw == "CABLE-SUPPORT"


def test_a_block_on_the_load_layer_that_is_not_ours_is_a_point_or_read_through() -> None:
    sketch = walkway()
    sketch.doc.blocks.new("DOT").add_circle((0, 0), 0.1)
    sketch.space.add_blockref("DOT", (12, 7), dxfattribs={"layer": "S-CABL-LOAD"})
    sketch.text(12.1, 7, "D=3 kN")
    arrow = sketch.doc.blocks.new("ARROW")
    arrow.add_line((0, 0), (0, 2))
    arrow.add_text("D=4 kN", height=0.2).set_placement((0.1, 1))
    sketch.space.add_blockref("ARROW", (20, 7), dxfattribs={"layer": "S-CABL-LOAD"})
    layout = sketch.read()
    assert errors(layout) == []
    assert [(p.x, p.cases[0][1]) for p in layout.cables[0].loads] == [
        (8, 15.0),
        (12, 3.0),
        (16, 21.0),
        (20, 4.0),
    ]


def test_a_block_of_ours_on_another_roles_layer_stops() -> None:
    sketch = walkway()
    sketch.block("CABLE-LOAD", (12, 7), "S-CABL-SUPP", {"D": "3 kN"})
    assert errors(sketch.read()) == ["block-layer"]
