"""How a sheet is composed: views first, schedules in columns with one gap, nothing lost."""

from __future__ import annotations

import itertools
from collections import Counter
from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.items import Align
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.drawing.sheeting.arranging import Views, arrangements
from dxfcable.drawing.sheeting.blocks import Block, Drawing
from dxfcable.drawing.sheeting.columns import Filling, Room, fill
from dxfcable.drawing.sheeting.composing import CableSheet, Cell
from dxfcable.drawing.sheeting.paper_view import ROUNDER
from dxfcable.drawing.sheeting.papers import paper
from dxfcable.drawing.sheeting.point_strip import drawn_row
from dxfcable.drawing.sheeting.ruled_table import RuledTable, Schedule
from dxfcable.drawing.sheeting.title_block import places
from dxfcable.drawing.sheeting.views import sheet_views
from dxfcable.settings import Settings
from tests.drawing.painter_cases import layout_of
from tests.drawing.sheet_cases import invented

Box = tuple[float, float, float, float]
SETTINGS = Settings()
REGION = (10.0, 20.0, 210.0, 140.0)
GAP = 4.0
SIZES = st.lists(st.tuples(st.floats(5, 60), st.floats(5, 60)), min_size=1, max_size=9)


def block(width: float, height: float) -> Drawing:
    sketch = Sketch(ROUNDER)
    sketch.rectangle("b", "table", (0.0, 0.0, width, height))
    return Drawing(sketch=sketch)


def table(count: int) -> RuledTable:
    rows = tuple((f"P{k}", f"{k} kN") for k in range(count))
    aligns = (Align.LEFT, Align.RIGHT)
    schedule = Schedule(key="k", title="T", head=("POINT", "LOAD"), aligns=aligns, rows=rows)
    return RuledTable(schedule=schedule, name="t", height=2.5)


def apart(one: Box, other: Box) -> float:
    """Give the distance of two boxes, negative where they overlap."""
    return max(one[0] - other[2], other[0] - one[2], one[1] - other[3], other[1] - one[3])


def assert_clear(boxes: list[Box], region: Box, gap: float) -> None:
    for a, b, c, d in boxes:
        assert a >= region[0] - 1e-4
        assert b >= region[1] - 1e-4
        assert c <= region[2] + 1e-4
        assert d <= region[3] + 1e-4
    for one, other in itertools.combinations(boxes, 2):
        assert apart(one, other) >= gap - 1e-4


def composed(size: str, count: int, seed: int) -> Cell:
    """Compose the sheet of one invented cable."""
    layout, solution = layout_of(invented(count, seed))
    chosen = paper(size, SETTINGS.show)
    sheet = CableSheet(
        view=sheet_views(layout, solution, SETTINGS)[0], paper=chosen, temperature=""
    )
    cell = sheet.cell(places(chosen).main)
    assert cell is not None
    return cell


def chained(width: float, height: float) -> Drawing:
    return replace(block(width, height), chain="notes")


# --- columns --------------------------------------------------------------------------------


@given(SIZES, st.booleans())
@settings(max_examples=30)
def test_blocks_of_a_chain_are_placed_in_their_order(
    sizes: list[tuple[float, float]], in_order: bool
) -> None:
    blocks = [chained(*size) for size in [(150.0, 118.0), *sizes]]
    found = fill(blocks, Room(region=REGION, taken=(), gap=GAP, in_order=in_order))
    order = [next(k for k, b in enumerate(blocks) if b is put) for put, _ in found.placed]
    assert order == list(range(len(order)))


def test_a_continued_block_waits_for_one_that_finds_no_place() -> None:
    high, low = chained(30.0, 200.0), chained(30.0, 20.0)
    other = block(30.0, 20.0)
    found = fill([high, low, other], Room(region=REGION, taken=(), gap=GAP, in_order=False))
    assert [put for put, _ in found.placed] == [other]
    assert found.rest == (high, low)


@settings(max_examples=40)
@given(SIZES, st.tuples(st.floats(20, 150), st.floats(20, 90)), st.booleans())
def test_blocks_in_columns_keep_their_gap_and_none_is_lost(
    sizes: list[tuple[float, float]], view: tuple[float, float], in_order: bool
) -> None:
    taken = (REGION[0], REGION[3] - view[1], REGION[0] + view[0], REGION[3])
    blocks: list[Block] = [block(*size) for size in sizes]
    filling = fill(blocks, Room(region=REGION, taken=(taken,), gap=GAP, in_order=in_order))
    assert_clear([taken, *(box for _, box in filling.placed)], REGION, GAP)
    put = [each for each, _ in filling.placed]
    assert Counter(map(id, (*put, *filling.rest))) == Counter(map(id, blocks))
    if in_order:  # read column by column from the top down
        assert put == blocks[: len(put)]
        assert [*filling.rest] == blocks[len(put) :]
        keys = [(box[0], -box[3]) for _, box in filling.placed]
        assert keys == sorted(keys)


@settings(max_examples=40)
@given(SIZES)
def test_what_fits_out_of_order_is_never_less(sizes: list[tuple[float, float]]) -> None:
    blocks: list[Block] = [block(*size) for size in sizes[:6]]
    strict, free = (
        fill(blocks, Room(region=REGION, gap=GAP, in_order=in_order)) for in_order in (True, False)
    )
    assert free.cost[0] <= strict.cost[0]


@settings(max_examples=40)
@given(st.integers(24, 90))
def test_a_long_table_goes_on_in_the_next_column_with_each_row_once(count: int) -> None:
    whole = table(count)
    filling = fill([whole], Room(region=REGION, gap=GAP))
    parts = [each for each, _ in filling.placed if isinstance(each, RuledTable)]
    parts += [each for each in filling.rest if isinstance(each, RuledTable)]
    rows = [k for part in parts for k in range(part.first, part.first + part.count)]
    assert rows == list(range(count))
    tops = {box[3] for _, box in filling.placed}
    assert tops == {REGION[3]}  # all parts begin level


def test_a_later_block_fills_a_hole_only_where_order_does_not_count() -> None:
    wide, low = block(190.0, 100.0), block(30.0, 10.0)
    blocks: list[Block] = [wide, block(190.0, 60.0), low]

    def done(in_order: bool) -> Filling:
        return fill(blocks, Room(region=REGION, gap=GAP, in_order=in_order))

    assert [each for each, _ in done(in_order=True).placed] == [wide]
    assert [each for each, _ in done(in_order=False).placed] == [wide, low]


# --- views ----------------------------------------------------------------------------------

SIZE = st.tuples(st.floats(10, 120), st.floats(10, 70))


@given(SIZE, SIZE, st.lists(SIZE, max_size=3), st.floats(0, 20))
def test_views_keep_clear_of_each_other_in_every_arrangement(
    elevation: tuple[float, float],
    diagram: tuple[float, float],
    joints: list[tuple[float, float]],
    even: float,
) -> None:
    views = Views(elevation=elevation, diagram=diagram, joints=tuple(joints))
    names = []
    for found in arrangements(views, REGION, GAP, even):
        assert_clear(list(found.boxes), REGION, GAP)
        names.append(found.name)
        for box, taken in zip(found.boxes, found.taken, strict=True):
            assert (taken[0], taken[2:]) == (box[0], box[2:])
            assert 0.0 <= box[1] - taken[1] <= even + 1e-9
        left, _, _, top = found.boxes[0]
        assert (left, top) == (REGION[0], REGION[3])  # the elevation at the upper left
        assert len(found.boxes) in (2, 2 + len(joints))
    assert len(names) == len(set(names))


# --- the whole ------------------------------------------------------------------------------


@pytest.mark.parametrize(("size", "count", "seed"), [("A1", 12, 1), ("A1", 8, 2), ("A2", 5, 1)])
def test_tables_of_a_column_stand_one_gap_apart_everywhere(
    size: str, count: int, seed: int
) -> None:
    cell = composed(size, count, seed)
    assert not cell.wanted  # one sheet is enough
    boxes = [box for _, box in cell.placed]
    gaps = set()
    for box in boxes:
        under = [q for q in boxes if abs(q[0] - box[0]) < 1e-3 and q[3] < box[1]]
        if under:
            gaps.add(round(box[1] - max(q[3] for q in under), 2))
    step = paper(size, SETTINGS.show).gap
    # What stands under several views clears the lowest of them; all else keeps the one gap.
    assert min(gaps) in {round(step * k, 2) for k in (1.0, 1.5, 2.0)}
    assert_clear(boxes, places(paper(size, SETTINGS.show)).main, min(gaps))


def test_schedules_stand_in_the_order_that_they_are_read_in() -> None:
    cell = composed("A1", 12, 1)
    starts = ("CABLE SCHEDULE", "PIECES", "HANGER", "REACTIONS", "MASTS")
    found = []
    for sketch, box in cell.placed:
        texts = [str(getattr(item, "text", "")) for item in sketch.items]
        rank = next((k for k, word in enumerate(starts) if texts[0].startswith(word)), None)
        if rank is not None:
            found.append((box[0], -box[3], rank))
    assert [rank for _, _, rank in sorted(found)] == list(range(len(starts)))


def test_the_same_cable_is_composed_the_same_again() -> None:
    assert composed("A3", 8, 2).items() == composed("A3", 8, 2).items()


def test_the_strip_tells_in_a_row_of_its_own_what_is_drawn_where_loads_are_others() -> None:
    layout, solution = layout_of(invented(3, 1))
    cable = layout.cables[0]

    def row(*changes: tuple[str, tuple[tuple[str, float], ...]]) -> list[tuple[str, list[str]]]:
        loads = [
            replace(load, drawn=drawn, drawn_cases=cases or None)
            for load, (drawn, cases) in zip(cable.loads, changes, strict=True)
        ]
        other = replace(layout, cables=(replace(cable, loads=tuple(loads)),))
        view = sheet_views(other, solution, SETTINGS)[0]
        return [(head, texts) for _, head, texts in drawn_row(view)]

    (case, value), *_ = cable.loads[0].cases
    as_used = ((case, value),)
    nothing: tuple[str, tuple[tuple[str, float], ...]] = ("", ())
    assert row(nothing, nothing, nothing) == []
    one = row(("4 kN", ((case, 4.0),)), nothing, nothing)
    assert [texts for _, texts in one] == [["", "4", "", "", ""]]
    assert one[0][0].startswith("DRAWN")
    assert one[0][0].endswith(", kN")
    # Of several cases only those that are others now.
    two = row(("D=4 L=3", (*as_used, ("L", 3.0))), nothing, ("D=5 L=3", (("D", 5.5), ("L", 3.0))))
    assert two[0][0] == "DRAWN, kN"
    assert two[0][1] == ["", "L=3", "", "D=5.5 L=3", ""]
    # Words that are no values of ours stand as they are.
    assert row(nothing, ("abt 5 kN", ()), nothing) == [("DRAWN", ["", "", "abt 5 kN", "", ""])]
