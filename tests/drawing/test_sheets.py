"""Sheets as a drafter looks at them: nothing overlaps, scales are usual, all that must be there."""

from __future__ import annotations

import itertools
import math
from functools import cache

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.items import Align, LineItem, TextItem
from dxfcable.drawing.painting.labels import text_corners
from dxfcable.drawing.painting.schedule_text import CAUTION
from dxfcable.drawing.painting.sketch import Sketch, item_points
from dxfcable.drawing.sheeting.paper_view import ROUNDER, per_unit, usual_scales
from dxfcable.drawing.sheeting.papers import SIZES, paper
from dxfcable.drawing.sheeting.point_strip import spread
from dxfcable.drawing.sheeting.ruled_table import RuledTable, Schedule, wrapped
from dxfcable.drawing.sheeting.ruling import ruled
from dxfcable.drawing.sheeting.text_blocks import notes_sketches
from dxfcable.drawing.sheeting.title_block import Fields, draw_title_block, places
from dxfcable.drawing.sheeting.words import plain
from dxfcable.drawing.sheets import Sheet
from dxfcable.errors import DxfcableError
from dxfcable.model import RevisionRow
from dxfcable.settings import Settings
from tests.drawing.painter_cases import Case, Span, even, layout_of
from tests.drawing.sheet_cases import faults, invented, made, texts_of

SHOW = Settings().show
SLOW = pytest.mark.slow
QUICK = [
    ("A1", 12, 2),
    ("A3", 3, 1),
    ("A4", 12, 2),
    ("ARCH-D", 3, 1),
    ("ANSI-A", 5, 1),
]
LONG = [
    *(("A1", count, count % 3) for count in (2, 60)),
    *(("A3", count, 1) for count in (2, 8, 20, 30)),
    *(("A3", 8, 2), ("A3", 60, 2), ("A4", 3, 2), ("A4", 60, 2), ("ARCH-D", 30, 1)),
]
SCENES = [*QUICK, *(pytest.param(*scene, marks=SLOW) for scene in LONG)]


@cache
def sheets_of(size: str, count: int, seed: int) -> tuple[Sheet, ...]:
    case = invented(count, seed, is_inch=size.startswith("A") and "-" in size)
    return made(*layout_of(case), size)


@pytest.mark.parametrize(("size", "count", "seed"), SCENES)
def test_no_text_stands_on_another_or_is_crossed_by_a_line(
    size: str, count: int, seed: int
) -> None:
    for sheet in sheets_of(size, count, seed):
        assert faults(sheet) == [], sheet.stem


@pytest.mark.parametrize(("size", "count", "seed"), SCENES)
def test_everything_lies_within_the_border(size: str, count: int, seed: int) -> None:
    for sheet in sheets_of(size, count, seed):
        x0, y0, x1, y1 = sheet.paper.frame
        for item in sheet.items:
            if item.id.startswith("border"):
                continue
            for x, y in item_points(item):
                assert x0 - 1e-6 <= x <= x1 + 1e-6, item.id
                assert y0 - 1e-6 <= y <= y1 + 1e-6, item.id


@pytest.mark.parametrize(("size", "count", "seed"), SCENES)
def test_texts_have_usual_heights_and_are_read_from_below_or_from_the_right(
    size: str, count: int, seed: int
) -> None:
    # Heights of ISO 3098; 3/32 in and up for papers in inches (common practice, PART).
    for sheet in sheets_of(size, count, seed):
        for item in texts_of(sheet):
            assert -90.0 < item.rotation <= 90.0, item.id
            if sheet.paper.is_inch:
                assert item.height >= 3 / 32 * 25.4 - 1e-4, item.id
            else:
                assert min(abs(item.height - h) for h in (1.8, 2.5, 3.5, 5.0)) < 1e-4, item.id


@pytest.mark.parametrize(("size", "count", "seed"), SCENES)
def test_each_sheet_has_the_caution_and_a_title_block_with_its_number(
    size: str, count: int, seed: int
) -> None:
    sheets = sheets_of(size, count, seed)
    for number, sheet in enumerate(sheets, start=1):
        texts = texts_of(sheet)
        caution = " ".join(t.text for t in texts if t.id.startswith("title/caution"))
        assert caution == CAUTION
        shown = {t.text for t in texts}
        assert f"{number} / {len(sheets)}" in shown
        # Mandatory fields of ISO 7200 (list as domain handbooks give it, PART).
        assert {
            *("LEGAL OWNER", "NUMBER", "DATE OF ISSUE", "SHEET", "TITLE, SUPPLEMENTARY TITLE"),
            *("APPROVED BY", "CREATED BY", "DOCUMENT TYPE"),
        } <= shown


@pytest.mark.parametrize(("size", "count", "seed"), SCENES)
def test_every_point_piece_and_reaction_is_told_somewhere(size: str, count: int, seed: int) -> None:
    shown = {t.text for sheet in sheets_of(size, count, seed) for t in texts_of(sheet)}
    assert {f"P{k}" for k in range(1, count + 1)} <= shown
    _, solution = layout_of(invented(count, seed, is_inch="-" in size))
    assert {piece.name for piece in solution.cables[0].segments} <= shown
    titles = {text.partition(" C1")[0] for text in shown if " C1" in text}
    assert {"CABLE ELEVATION", "FORCE DIAGRAM", "CABLE SCHEDULE", "PIECES OF CABLE"} <= titles
    assert {"NOTES", "LEGEND OF SIGNS"} <= shown
    assert any(text.startswith("HELD: SAG ") for text in shown)


def test_the_elevation_is_true_to_its_scale() -> None:
    layout, solution = layout_of(invented(5, 1))
    sheet = made(layout, solution, "A1")[0]
    denominator = float(sheet.fields.scale.removeprefix("1:"))
    assert denominator in usual_scales("m")
    profile = next(i for i in sheet.items if i.id == "C1/profile/1")
    nodes = solution.cables[0].nodes
    for drawn, node in zip(item_points(profile), nodes, strict=True):
        first = item_points(profile)[0]
        assert (drawn[0] - first[0]) * denominator / 1000 == pytest.approx(
            node.x - nodes[0].x, abs=1e-4
        )
        assert (drawn[1] - first[1]) * denominator / 1000 == pytest.approx(
            node.y - nodes[0].y, abs=1e-4
        )


def test_rays_are_parallel_to_the_pieces_and_true_to_the_force_scale() -> None:
    layout, solution = layout_of(invented(5, 1))
    sheet = made(layout, solution, "A1")[0]
    words = next(t.text for t in texts_of(sheet) if t.id == "C1/diagram-title/words-1")
    per_cm = float(words.removeprefix("FORCE 1 cm = ").removesuffix(" kN"))
    for number, piece in enumerate(solution.cables[0].segments, start=1):
        ray = next(i for i in sheet.items if i.id == f"C1/ray/{number}")
        assert isinstance(ray, LineItem)
        dx, dy = ray.end[0] - ray.start[0], ray.end[1] - ray.start[1]
        assert math.hypot(dx, dy) / 10 * per_cm == pytest.approx(piece.tension, rel=1e-4)
        angle = math.degrees(math.atan2(dy, dx)) % 180
        assert abs((angle - piece.angle + 90) % 180 - 90) < 1e-3


@pytest.mark.parametrize(
    ("size", "is_inch", "begin"),
    [("A1", True, "FORCE 1 in = "), ("ARCH-D", False, "FORCE 1 cm = ")],
)
def test_force_scales_follow_the_drawing_whatever_the_paper(
    size: str, is_inch: bool, begin: str
) -> None:
    sheet = made(*layout_of(invented(5, 1, is_inch=is_inch)), size)[0]
    words = next(t.text for t in texts_of(sheet) if t.id == "C1/diagram-title/words-1")
    assert words.startswith(begin)


def test_scales_of_feet_are_those_of_architects_and_engineers() -> None:
    # 1/8" = 1'-0" is 1:96, 1" = 20'-0" is 1:240 (common practice).
    assert {96.0, 48.0, 240.0} <= set(usual_scales("ft"))
    assert 100.0 not in usual_scales("in")
    assert per_unit(96.0, "ft") == pytest.approx(25.4 / 8)


def test_several_cables_share_a_sheet_where_they_fit() -> None:
    cases = [
        Case(spans=(even(3, 20.0, y0=40.0),), mark="C1"),
        Case(spans=(even(4, 24.0, y0=20.0),), mark="C2", first_key=2),
    ]
    layout, solution = layout_of(*cases)
    together, alone = made(layout, solution, "A1", together=True), made(layout, solution, "A1")
    assert len(together) == 1
    assert len(alone) == 2
    assert faults(together[0]) == []
    shown = {t.text for t in texts_of(together[0])}
    assert {"CABLE ELEVATION C1", "CABLE ELEVATION C2"} <= shown
    small = made(layout, solution, "A4", together=True)
    assert {s.stem.split("-")[1] for s in small} == {"C1", "C2"}


def test_a_chain_of_spans_has_a_diagram_for_each() -> None:
    spans = (even(3, 24.0, rise=-2.0), even(4, 40.0, rise=1.0, x0=24.0, y0=10.0))
    sheets = made(*layout_of(Case(spans=spans)), "A2")
    assert [faults(sheet) for sheet in sheets] == [[] for _ in sheets]
    ids = {item.id for sheet in sheets for item in sheet.items}
    assert {"C1/pole/1", "C1/pole/2"} <= ids


@pytest.mark.parametrize(
    ("size", "count"),
    [("A4", 3), pytest.param("A3", 8, marks=SLOW), pytest.param("A4", 8, marks=SLOW)],
)
def test_a_long_chain_of_short_spans_keeps_clear(size: str, count: int) -> None:
    spans = tuple(even(2, 20.0, x0=20.0 * k, y0=10.0) for k in range(count))
    sheets = made(*layout_of(Case(spans=spans, deck=2.0)), size)
    assert [faults(sheet) for sheet in sheets] == [[] for _ in sheets]
    shown = {t.text for sheet in sheets for t in texts_of(sheet)}
    assert {
        f"S{k} - S{k + 1}" for k in range(1, count + 1)
    } <= shown  # all that the view has no room for


def test_marks_of_any_length_and_script_keep_clear() -> None:
    marks = ("M" * 120, "a b c d e f g h " * 6, "\u0416" * 50, "", "P/1")
    case = Case(
        spans=(even(5, 30.0, rise=1.0),),
        marks=marks,
        support_marks=("N" * 90, "\u041e\u043f\u043e\u0440\u0430"),
        mark="\u0422\u0440\u043e\u0441 " + "C" * 90,
        mast=5.0,
        stay_run=6.0,
    )
    sheets = made(*layout_of(case), "A2")
    assert [faults(sheet) for sheet in sheets] == [[] for _ in sheets]
    # A code of one character is never cut in two.
    words = [t.text for sheet in sheets for t in texts_of(sheet)]
    assert not [text for text in words if "\\" in plain(text)]


def test_uplift_and_points_without_load_are_drawn_as_they_act() -> None:
    span = Span(
        x=(0.0, 5.0, 10.0, 15.0, 20.0, 25.0, 30.0),
        loads=(10.0, -3.0, 0.0, 20.0, 8.0),
        y=(10.0, 10.0),
        sag=3.0,
    )
    sheet = made(*layout_of(Case(spans=(span,))), "A2")[0]
    assert faults(sheet) == []
    arrows = {i.id: i for i in sheet.items if i.id.startswith("C1/load-arrow/")}
    up, down = arrows["C1/load-arrow/P2"], arrows["C1/load-arrow/P1"]
    assert isinstance(up, LineItem)
    assert isinstance(down, LineItem)
    assert up.end[1] > up.start[1]
    assert down.end[1] < down.start[1]
    assert "C1/load-arrow/P3" not in arrows


def test_many_notes_go_on_in_a_further_block() -> None:
    notes = tuple(
        f"Note {k} of the office, long enough for two lines of a block." for k in range(40)
    )
    blocks = notes_sketches(notes, 100.0, 120.0, 2.5)
    assert len(blocks) > 1
    texts = [i.text for block in blocks for i in block.items if isinstance(i, TextItem)]
    assert texts.count("NOTES (CONTINUED)") == len(blocks) - 1
    assert [t for t in texts if t.endswith(".") and t[:-1].isdigit()] == [
        f"{k}." for k in range(1, 41)
    ]
    for block in blocks:
        _, low, _, high = block.bounds()
        assert high - low <= 120.0


def test_a_table_with_too_many_columns_is_parted_with_its_first_column_in_each() -> None:
    head = ("COMBINATION", *(f"S{k} H" for k in range(40)))
    schedule = Schedule(
        key="k",
        title="REACTIONS",
        head=head,
        aligns=(Align.LEFT, *(Align.RIGHT,) * 40),
        rows=(("D + L", *(f"{k}.5 kN" for k in range(40))),) * 3,
    )
    tables = ruled([schedule], "t", paper("A3", SHOW))
    assert len(tables) > 1
    assert [h for t in tables for h in t.schedule.head[1:]] == list(head[1:])
    assert all(t.schedule.head[0] == "COMBINATION" for t in tables)
    assert all(t.size[0] <= places(paper("A3", SHOW)).main[2] for t in tables)


def test_a_paper_that_is_too_small_is_refused_by_name() -> None:
    case = Case(spans=(even(3, 20.0),), mark="C1", mast=4000.0, stay_run=10.0)
    with pytest.raises(DxfcableError, match="does not fit a sheet A4"):
        made(*layout_of(case), "A4")
    with pytest.raises(DxfcableError, match="is no size of paper"):
        paper("B5", SHOW)


@pytest.mark.parametrize("size", SIZES)
def test_the_names_of_all_fields_fit_and_a_date_does(size: str) -> None:
    chosen = paper(size, SHOW)
    sketch = Sketch(ROUNDER)
    row = RevisionRow(number=1, rev="A", description="loads", by="NN", date="2026-12-01")
    draw_title_block(sketch, chosen, Fields(title="T", date="2026-12-01", revisions=(row,)))
    sheet = Sheet(stem="s", paper=chosen, fields=Fields(), items=tuple(sketch.items))
    assert not [t.text for t in texts_of(sheet) if t.text.endswith("..")]
    assert [t.text for t in texts_of(sheet)].count("2026-12-01") == 2
    assert faults(sheet) == []


def test_long_values_of_the_office_are_cut_to_their_fields() -> None:
    chosen = paper("A4", SHOW)
    long = "A very long name of an office " * 8
    sketch = Sketch(ROUNDER)
    draw_title_block(sketch, chosen, Fields(owner=long, title=long, supplement=long, status=long))
    sheet = Sheet(stem="s", paper=chosen, fields=Fields(), items=tuple(sketch.items))
    assert faults(sheet) == []
    assert max(x for t in texts_of(sheet) for x, _ in text_corners(t)) <= chosen.frame[2]


# --- parts ----------------------------------------------------------------------------------


@given(
    st.lists(st.floats(0.0, 100.0), min_size=2, max_size=30),
    st.floats(0.1, 5.0),
)
def test_spread_places_keep_their_order_and_their_distance(
    places: list[float], least: float
) -> None:
    places = sorted(places)
    moved = spread(places, least)
    gaps = [b - a for a, b in itertools.pairwise(moved)]
    assert min(gaps) >= least - 1e-6
    # Least squares: the whole is not shifted (the mean of the moves is nothing).
    assert float(np.mean(moved) - np.mean(places)) == pytest.approx(0.0, abs=1e-6)


@settings(max_examples=50)
@given(st.integers(1, 90), st.floats(20.0, 400.0))
def test_a_table_in_runs_has_each_row_once(count: int, height: float) -> None:
    rows = tuple((f"P{k}", f"{k} kN") for k in range(count))
    schedule = Schedule(
        key="k", title="T", head=("POINT", "LOAD"), aligns=(Align.LEFT, Align.RIGHT), rows=rows
    )
    rest: RuledTable | None = RuledTable(schedule=schedule, name="t", height=2.5)
    shown: list[int] = []
    while rest is not None:
        part, after = rest.fitting(height, 1)
        if part is None:
            assert rest.size[1] > height
            break
        assert part.size[1] <= height + 1e-6
        shown += range(part.first, part.first + part.count)
        rest = after
    else:
        assert shown == list(range(count))


@given(st.text(max_size=80), st.floats(8.0, 80.0))
def test_wrapped_words_are_all_there(text: str, width: float) -> None:
    lines = wrapped(text, width, 2.5)
    assert "".join(lines).replace(" ", "") == "".join(wrapped(text, math.inf, 2.5)).replace(" ", "")
