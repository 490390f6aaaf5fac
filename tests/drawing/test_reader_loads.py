"""Load points, arrows and load texts: read one by one, or stopped with the reason."""

from __future__ import annotations

import pytest

from dxfcable.model import LoadSymbol
from dxfcable.settings import load
from tests.drawing.excerpts import FOOT, Sketch, codes, errors, finding, walkway


def span(insunits: int = FOOT) -> Sketch:
    """Give two supports 100 apart, 40 high."""
    sketch = Sketch(insunits)
    sketch.support(0, 40, MARK="S1", EL="40.0")
    sketch.support(100, 40, MARK="S2", EL="40.0")
    return sketch


@pytest.mark.parametrize(
    ("text", "pounds"),
    [
        ("18k", 18_000.0),
        ("18 K", 18_000.0),
        ("18,000#", 18_000.0),
        ("18 000 LBS", 18_000.0),
        ("80.1kN", 80_100 / 4.4482216152605),
    ],
)
def test_a_load_text_is_read_with_its_unit(text: str, pounds: float) -> None:
    sketch = span()
    sketch.load(10, 20, "1 lb")
    sketch.load(50, 20, text)
    layout = sketch.read()
    assert errors(layout) == []
    ((case, value),) = layout.cables[0].loads[1].cases
    assert case == "load"
    assert value == pytest.approx(pounds, rel=1e-12)


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("80,1 kN", "number-ambiguous"),
        ("8.2 t", "load-unit-ambiguous"),
        ("8168 kg", "load-is-mass"),
        ("18", "load-unit-missing"),
        ("-18k", "load-sign"),
        ("18k UP", "load-sign"),
        ("(18k)", "load-sign"),
        ("2.4 k/ft", "load-distributed"),
        ("35 plf", "load-distributed"),
        ("20 psf", "load-distributed"),
        ("10/14", "load-cases-unlabelled"),
        ("18k (ULS)", "load-level"),
        ("18k TYP.", "load-repeated"),
        ("18k U.N.O.", "load-repeated"),
        ("2@18k", "load-repeated"),
        ("18k EA", "load-repeated"),
        ("l2k", "load-typo"),
        ("1O k", "load-typo"),
        ("X=18k", "load-case-unknown"),
        ("DL 12k", "load-unread"),
    ],
)
def test_a_doubtful_load_text_stops_once_and_shows_the_text(text: str, code: str) -> None:
    sketch = span()
    sketch.load(50, 20, text)
    layout = sketch.read()
    assert errors(layout) == [code]
    assert finding(layout, code).raw == text


def test_formatting_of_an_mtext_is_stripped_and_kept_raw() -> None:
    sketch = span()
    sketch.load(50, 20)
    raw = r"{\fArial|b0;\H0.7x;18\~k}\PL=6k"
    sketch.space.add_mtext(
        raw.replace("18", "D=18"),
        dxfattribs={"layer": "S-CABL-LOAD", "insert": (50.1, 20), "char_height": 0.2},
    )
    (point,) = sketch.read().cables[0].loads
    assert point.cases == (("D", 18.0), ("L", 6.0))
    assert point.value_origin is not None
    assert point.value_origin.raw.startswith(r"{\fArial")


def test_a_mark_on_the_first_line_of_a_load_text_is_the_points() -> None:
    sketch = span()
    sketch.load(50, 20)
    sketch.space.add_mtext(
        r"P7\P18k", dxfattribs={"layer": "S-CABL-LOAD", "insert": (50.1, 20), "char_height": 0.2}
    )
    (point,) = sketch.read().cables[0].loads
    assert (point.mark, point.cases) == ("P7", (("load", 18.0),))


def test_a_text_counts_from_its_alignment_point() -> None:
    sketch = span()
    sketch.load(50, 20)
    sketch.load(60, 20, "2k")
    text = sketch.space.add_text("18k", height=0.2, dxfattribs={"layer": "S-CABL-LOAD"})
    text.dxf.insert = (60.3, 20)
    text.dxf.align_point = (50.1, 20)
    text.dxf.halign = 2
    assert [p.cases[0][1] for p in sketch.read().cables[0].loads] == [18.0, 2.0]


def test_a_text_beyond_reach_stops_and_so_does_the_point_without_value() -> None:
    sketch = span()
    sketch.load(50, 20)
    sketch.text(51.3, 20, "18k")
    layout = sketch.read()
    assert errors(layout) == ["load-text-unclaimed", "load-value-missing"]
    assert "(50, 20)" in finding(layout, "load-text-unclaimed").text
    missing = finding(layout, "load-value-missing")
    assert (missing.cable, missing.at) == ("C1", (50, 20))
    assert "--loads" in missing.remedy
    assert layout.cables[0].loads[0].cases == ()


def test_reach_and_ratio_come_from_the_settings() -> None:
    sketch = span()
    sketch.load(50, 20)
    sketch.text(51.3, 20, "18k")
    assert errors(sketch.read(load("[limits]\ntext_reach = 7.0"))) == []
    sketch.load(52.9, 20, "1k")
    assert errors(sketch.read(load("[limits]\ntext_reach = 7.0"))) == ["load-text-ambiguous"]
    settings = load("[limits]\ntext_reach = 7.0\ntext_ratio = 1.2")
    assert errors(sketch.read(settings)) == []


def test_a_text_between_two_points_stops_and_names_the_pair() -> None:
    sketch = span()
    sketch.load(50, 20)
    sketch.load(51, 20)
    sketch.text(50.45, 20, "18k")
    layout = sketch.read()
    text = finding(layout, "load-text-ambiguous").text
    assert "(50, 20)" in text
    assert "(51, 20)" in text
    assert errors(layout) == ["load-text-ambiguous"]


def test_two_force_texts_for_one_point_stop() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.text(50, 20.2, "6k")
    assert errors(sketch.read()) == ["load-texts-two"]


def test_a_text_beside_a_block_with_values_stops() -> None:
    sketch = span()
    sketch.load_block(50, 20, LOAD="18k")
    sketch.text(50, 20.2, "6k")
    assert errors(sketch.read()) == ["load-texts-two"]


def test_a_text_drawn_twice_counts_once() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.text(50.1, 20, "18k")
    layout = sketch.read()
    assert codes(layout) == ["text-merged"]
    assert layout.cables[0].loads[0].cases == (("load", 18.0),)


def test_other_texts_are_listed_in_one_note() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.text(10, 10, "LOADS")
    sketch.text(20, 10, "see detail 3/S-101")
    text = finding(sketch.read(), "texts-listed").text
    assert '"LOADS", "see detail 3/S-101"' in text


def test_a_mark_beside_a_point_names_it_and_leaves_its_value_to_the_csv() -> None:
    sketch = span()
    sketch.load(50, 20, "P3")
    layout = sketch.read()
    assert layout.cables[0].loads[0].mark == "P3"
    assert "P3" in finding(layout, "load-value-missing").text


def test_a_mark_far_from_any_point_is_only_a_note() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.text(90, 20, "P9")
    assert codes(sketch.read()) == ["mark-unclaimed"]


def test_a_negative_load_is_uplift_where_the_office_says_so() -> None:
    sketch = span()
    sketch.load(30, 20, "-18k")
    sketch.load(60, 20, "4k UP")
    layout = sketch.read(load('[units]\nupward_sign = "-"'))
    assert [p.cases[0][1] for p in layout.cables[0].loads] == [-18.0, -4.0]


def test_values_with_and_without_case_letters_do_not_mix_in_a_cable() -> None:
    sketch = span()
    sketch.load(30, 20, "18k")
    sketch.load(60, 20, "D=18k")
    assert finding(sketch.read(), "cases-mixed").cable == "C1"


def test_an_arrow_acts_at_its_lower_end_whichever_way_it_was_drawn() -> None:
    sketch = span()
    sketch.line("LOAD", (30, 24), (30, 20))
    sketch.line("LOAD", (60, 20), (60.05, 24))
    sketch.text(30.1, 23.9, "18k")
    sketch.text(60.1, 22, "6k")
    layout = sketch.read()
    assert errors(layout) == []
    assert [(p.x, p.y, p.symbol) for p in layout.cables[0].loads] == [
        (30, 20, LoadSymbol.ARROW),
        (60, 20, LoadSymbol.ARROW),
    ]


def test_arrowheads_hatches_and_concentric_circles_are_symbol() -> None:
    sketch = span()
    sketch.line("LOAD", (30, 24), (30, 20))
    sketch.line("LOAD", (30, 20), (29.7, 20.8))
    sketch.line("LOAD", (30, 20), (30.3, 20.8))
    sketch.line("LOAD", (29.7, 20.8), (30.3, 20.8))
    sketch.text(30.1, 23, "18k")
    for radius in (0.3, 0.5):
        sketch.space.add_circle((60, 20), radius, dxfattribs={"layer": "S-CABL-LOAD"})
    sketch.load(60, 20, "6k")
    sketch.space.add_hatch(dxfattribs={"layer": "S-CABL-LOAD"})
    sketch.space.add_solid([(30, 20), (29, 21), (31, 21)], dxfattribs={"layer": "S-CABL-LOAD"})
    layout = sketch.read()
    assert codes(layout) == ["symbol-pieces"]
    assert [p.symbol for p in layout.cables[0].loads] == [LoadSymbol.ARROW, LoadSymbol.POINT]


def test_a_slanted_line_away_from_every_load_stops() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.line("LOAD", (70, 20), (72, 24))
    assert errors(sketch.read()) == ["arrow-slanted"]


def test_an_arrow_off_vertical_by_more_than_a_degree_stops() -> None:
    sketch = span()
    sketch.line("LOAD", (50, 20), (50.08, 24))
    sketch.text(50.1, 22, "18k")
    assert errors(sketch.read()) == ["arrow-slanted", "load-text-unclaimed"]


def leader(sketch: Sketch, *points: tuple[float, float]) -> None:
    sketch.space.add_leader(points, dxfattribs={"layer": "S-CABL-LOAD"})


def test_a_leader_acts_at_its_first_vertex() -> None:
    sketch = span()
    leader(sketch, (50, 20), (50, 24), (52, 24))
    sketch.text(50.2, 23, "18k")
    layout = sketch.read()
    assert errors(layout) == []
    assert layout.cables[0].loads[0].y == 20


def test_a_leader_that_points_up_stops() -> None:
    sketch = span()
    leader(sketch, (50, 24), (50, 20))
    sketch.text(50.2, 23, "18k")
    assert errors(sketch.read()) == ["leader-up"]


def test_a_slanted_leader_from_a_text_to_its_point_is_symbol() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    leader(sketch, (50, 20), (53, 22))
    assert codes(sketch.read()) == ["symbol-pieces"]


def test_points_drawn_twice_merge_with_a_note() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.load(50.0004, 20)
    layout = sketch.read()
    assert codes(layout) == ["load-merged"]
    assert len(layout.cables[0].loads) == 1


def test_blocks_at_one_place_with_different_values_stop() -> None:
    sketch = span()
    sketch.load_block(50, 20, LOAD="18k")
    sketch.load_block(50, 20, LOAD="6k")
    assert "sum or one?" in finding(sketch.read(), "load-conflict").text


def test_two_loads_at_one_x_stop_if_they_differ_and_merge_if_not() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.load(50, 25, "18k")
    assert codes(sketch.read()) == ["load-merged"]
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.load(50, 25, "6k")
    assert "two loads at X = 50; sum or one?" in finding(sketch.read(), "load-conflict").text


def test_points_nearly_at_one_x_are_listed() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.load(50.05, 25, "18k")
    layout = sketch.read()
    assert codes(layout) == ["near-duplicate"]
    assert len(layout.cables[0].loads) == 2


def test_a_load_beyond_the_supports_stops() -> None:
    sketch = span()
    sketch.load(120, 20, "18k")
    assert errors(sketch.read()) == ["load-beyond-supports"]


def test_a_load_at_a_supports_x_acts_on_the_support() -> None:
    sketch = span()
    sketch.load(50, 20, "18k")
    sketch.load(100.0005, 20, "7k")
    layout = sketch.read()
    assert codes(layout) == ["load-at-support"]
    (cable,) = layout.cables
    assert [(key, p.cases) for key, p in cable.support_loads] == [(1, (("load", 7.0),))]
    assert len(cable.loads) == 1


def stacked(gap: float) -> Sketch:
    """Give two cables one above the other, and a load 4 below the lower."""
    sketch = Sketch(FOOT)
    for k, y in enumerate((40.0, 40.0 + gap)):
        sketch.support(0, y)
        sketch.support(100, y)
        sketch.string((0, y), (100, y))
        sketch.data_at((50, y), MARK=f"K{k}", SAG="9")
    return sketch


def test_a_load_belongs_to_the_nearest_string_or_stops() -> None:
    sketch = stacked(2.1)
    sketch.load_block(50, 36, LOAD="18k")
    layout = sketch.read()
    assert errors(layout) == []
    assert {c.mark: len(c.loads) for c in layout.cables} == {"K0": 1, "K1": 0}
    sketch = stacked(1.9)
    sketch.load_block(50, 36, LOAD="18k")
    assert errors(sketch.read()) == ["load-owner-ambiguous"]


def test_the_attribute_cable_decides() -> None:
    sketch = stacked(1.9)
    sketch.load_block(50, 36, LOAD="18k", CABLE="k1")
    assert {c.mark: len(c.loads) for c in sketch.read().cables} == {"K0": 0, "K1": 1}
    sketch.load_block(60, 36, LOAD="18k", CABLE="K9")
    assert errors(sketch.read()) == ["cable-unknown"]


def test_a_load_block_gives_its_cases_mark_and_clamp() -> None:
    sketch = span()
    sketch.load_block(50, 20, mark="H4", d="12k", LL="6k", Clamped="Yes", W="")
    (point,) = sketch.read().cables[0].loads
    assert point.cases == (("D", 12.0), ("L", 6.0))
    assert (point.mark, point.clamped, point.symbol) == ("H4", True, LoadSymbol.BLOCK)


def test_two_tags_of_one_case_add_with_a_note() -> None:
    sketch = span()
    sketch.load_block(50, 20, DL="12k", SDL="2000 lb")
    layout = sketch.read()
    assert layout.cables[0].loads[0].cases == (("D", 14.0),)
    assert "SDL" in finding(layout, "tag-repeated").text


def test_an_unknown_tag_with_a_force_stops_and_others_are_listed() -> None:
    sketch = span()
    sketch.load_block(50, 20, D="12k", SNOW="6k", TYPE="clip")
    layout = sketch.read()
    assert errors(layout) == ["tag-unknown-force"]
    assert 'TYPE "clip"' in finding(layout, "tag-unknown").text


def test_a_clamp_that_is_neither_yes_nor_no_stops() -> None:
    sketch = span()
    sketch.load_block(50, 20, D="12k", CLAMPED="maybe")
    assert errors(sketch.read()) == ["value-unread"]


def test_a_cable_without_loads_is_noted() -> None:
    assert codes(span().read()) == ["no-loads"]


def test_the_median_height_of_load_texts_is_kept() -> None:
    sketch = walkway()
    sketch.load(12, 7)
    sketch.text(12.1, 7, "D=2 kN", h=0.5)
    sketch.text(1, 1, "NOTES", h=9)
    assert sketch.read().text_height == 0.2
