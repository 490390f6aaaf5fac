"""What a revision shows: the old profile, a tag at each point that moved, the table of its rows.

Scenarios are invented; shapes are formed in `painter_cases` by the general cable theorem.
"""

from __future__ import annotations

import io
import itertools
import math
from dataclasses import replace
from functools import cache

import numpy as np
import pytest
from ezdxf.filemanagement import new, read
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing import conform
from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.bytes.splice import apply
from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.issue import issue
from dxfcable.drawing.items import Item, LineItem, Painting, PolylineItem, TextItem
from dxfcable.drawing.painter import paint
from dxfcable.drawing.painting.labels import text_corners
from dxfcable.drawing.painting.revision_view import thinned
from dxfcable.drawing.painting.sketch import strokes
from dxfcable.drawing.record import Memory
from dxfcable.drawing.strip import plan_strip
from dxfcable.model import CableRevisions, Layout, PointChange, RevisionRow, Solution
from dxfcable.settings import Settings
from tests.drawing.covering import boxed_texts, covered_texts, distance, struck_texts
from tests.drawing.painter_cases import Case, build, even, layout_of, obstacles_of
from tests.generated import drawing

H = 0.25  # text height at 1:100 [m]
ROWS = (
    RevisionRow(number=1, rev="A", description="Issued for tender", by="RK", date="2026-03-02"),
    RevisionRow(number=2, rev="2"),
)
Point = tuple[float, float]


def revised(
    count: int = 3,
    *,
    dx: float = 0.0,
    only: int | None = None,
    rows: tuple[RevisionRow, ...] = ROWS,
    panel: float = 18.0,
    unit: str = "m",
) -> tuple[Layout, Solution]:
    """Double the loads of the right half, and say what that moved; `only` one point if told."""
    span = even(count, panel * H * (count + 1), y0=40.0)
    case = Case(spans=(span,), deck=24.0, unit=unit)
    heavier = tuple(p * (2.0 if i >= count // 2 else 1.0) for i, p in enumerate(span.loads))
    _, before, _ = build(case)
    layout, solution = layout_of(
        replace(case, spans=(replace(span, loads=heavier),)), text_height=H
    )
    pairs = zip(before.nodes, solution.cables[0].nodes, strict=True)
    changes = tuple(
        PointChange(mark=now.mark, at=(now.x, now.y), dx=dx, dy=now.y - old.y)
        for old, now in pairs
        if not now.is_support and abs(now.y - old.y) > 1e-3
    )
    revisions = CableRevisions(
        cable="C1",
        rows=rows,
        old=(tuple((n.x - dx * (not n.is_support), n.y) for n in before.nodes),),
        changes=changes if only is None else changes[only : only + 1],
    )
    return layout, replace(solution, revisions=(revisions,))


def painted(
    made: tuple[Layout, Solution],
    held: dict[str, Point] | None = None,
    obstacles: Obstacles | None = None,
) -> Painting:
    layout, solution = made
    return paint(
        layout,
        solution,
        obstacles=obstacles or obstacles_of(layout),
        settings=Settings(),
        plot_scale="1:100",
        held_places=held or {},
    )


@cache
def example(count: int, dx: float = 0.0, only: int | None = None, panel: float = 18.0) -> Painting:
    return painted(revised(count, dx=dx, only=only, panel=panel))


def by_id(painting: Painting) -> dict[str, Item]:
    return {item.id: item for item in painting.items}


def texts_of(painting: Painting) -> dict[str, str]:
    return {item.id: item.text for item in painting.items if isinstance(item, TextItem)}


def on_layer(painting: Painting) -> list[Item]:
    return [item for item in painting.items if item.layer == "revision"]


def shifted(item: Item, by: Point) -> Item:
    """Give an item of a tag moved."""
    if isinstance(item, TextItem):
        return replace(item, at=(item.at[0] + by[0], item.at[1] + by[1]))
    assert isinstance(item, PolylineItem)
    return replace(item, points=tuple((x + by[0], y + by[1]) for x, y in item.points))


def assert_same_place(found: Item, expected: Item) -> None:
    """Compare items, but for the rounding of coordinates."""
    if isinstance(found, TextItem) and isinstance(expected, TextItem):
        assert found.at == pytest.approx(expected.at, abs=1e-6)
        assert replace(found, at=expected.at) == expected
    else:
        assert isinstance(found, PolylineItem)
        assert isinstance(expected, PolylineItem)
        assert np.array(found.points) == pytest.approx(np.array(expected.points), abs=1e-6)


# --- what is drawn ---


def test_without_revisions_nothing_is_on_the_layer() -> None:
    layout, solution = revised()
    assert on_layer(painted((layout, replace(solution, revisions=())))) == []
    blank = replace(solution.revisions[0], rows=())
    assert on_layer(painted((layout, replace(solution, revisions=(blank,))))) == []


def test_each_point_that_moved_has_its_triangle_with_the_number_and_the_change_in_words() -> None:
    layout, solution = revised(3)
    painting = painted((layout, solution))
    items, texts = by_id(painting), texts_of(painting)
    assert [c.mark for c in solution.revisions[0].changes] == ["P1", "P3"]
    for change in solution.revisions[0].changes:
        name = f"C1/revision/{change.mark}"
        assert texts[name] == f"dy {change.dy:+.3f} m"
        assert texts[f"{name}/rev"] == "2"
        triangle = items[f"{name}/triangle"]
        assert isinstance(triangle, PolylineItem)
        assert triangle.is_closed
        assert len(triangle.points) == 3
    assert "C1/revision/P2" not in texts


def test_the_letter_given_stands_in_triangle_and_row() -> None:
    painting = painted(revised(3, rows=(RevisionRow(number=1, rev=" B "),)))
    texts = texts_of(painting)
    assert texts["C1/revision/P1/rev"] == "B"
    assert texts["C1/revisions/row/1/rev"] == "B"


@pytest.mark.parametrize("count", [4, 30])
def test_where_no_letter_was_given_none_is_drawn(count: int) -> None:
    rows = (RevisionRow(number=1, rev="A"), RevisionRow(number=2, rev=" ", by="RK"))
    painting = painted(revised(count, rows=rows, panel=40.0 if count == 4 else 8.0))
    texts = texts_of(painting)
    triangles = [i for i in painting.items if i.id.endswith("/triangle")]
    assert triangles
    assert [name for name in texts if name.endswith("/rev")] == [
        "C1/revisions/row/head/rev",
        "C1/revisions/row/1/rev",
    ]
    assert texts["C1/revisions/row/2/by"] == "RK"
    said = [text for name, text in texts.items() if "/revision/old-label/" in name]
    assert set(said) <= {"BEFORE REVISION"}
    assert said or count == 30
    if count == 30:
        assert texts["C1/revisions/moved/head/mark"] == "MOVED BY REVISION"


def test_a_sideways_movement_is_told_where_it_shows() -> None:
    shown, hidden = texts_of(example(3, 0.03)), texts_of(example(3, 0.0004))
    assert shown["C1/revision/P1/row-2"] == "dx +0.030 m"
    assert "C1/revision/P1/row-2" not in hidden


def test_a_point_that_moved_sideways_only_says_no_height() -> None:
    layout, solution = revised(3, dx=-0.05)
    revisions = solution.revisions[0]
    level = replace(revisions, changes=tuple(replace(c, dy=0.0) for c in revisions.changes))
    texts = texts_of(painted((layout, replace(solution, revisions=(level,)))))
    assert texts["C1/revision/P1"] == "dx -0.050 m"


def test_feet_drawings_tell_the_change_in_feet_and_inches() -> None:
    layout, solution = revised(3, unit="ft")
    first = replace(solution.revisions[0].changes[0], dy=-1.5)
    revisions = replace(solution.revisions[0], changes=(first,))
    texts = texts_of(painted((layout, replace(solution, revisions=(revisions,)))))
    assert texts["C1/revision/P1"] == "dy -1'-6\""


def test_the_profile_before_is_drawn_in_chain_lines_through_its_old_nodes() -> None:
    made = revised(5)
    painting = painted(made)
    pieces = [i for i in painting.items if i.id.startswith("C1/revision/old/1/")]
    ends = [(piece.start, piece.end) for piece in pieces if isinstance(piece, LineItem)]
    assert all(isinstance(piece, LineItem) and piece.is_chain for piece in pieces)
    nodes = [ends[0][0], *(end for _, end in ends)]
    old = made[1].revisions[0].old[0]
    assert np.array(nodes) == pytest.approx(np.array(old), abs=1e-6)


def test_where_nothing_moved_no_second_profile_hides_the_first() -> None:
    layout, solution = revised()
    still = replace(solution.revisions[0], changes=())
    items = on_layer(painted((layout, replace(solution, revisions=(still,)))))
    assert items
    assert all(item.part == "C1/revisions" for item in items)


def test_the_table_has_a_row_for_each_revision_the_oldest_first() -> None:
    texts = texts_of(example(3))
    head = [texts[f"C1/revisions/row/head/{key}"] for key in ("rev", "description", "date", "by")]
    assert head == ["REV", "DESCRIPTION", "DATE", "BY"]
    assert texts["C1/revisions/row/1/description"] == "Issued for tender"
    assert (texts["C1/revisions/row/1/date"], texts["C1/revisions/row/1/by"]) == (
        "2026-03-02",
        "RK",
    )
    assert texts["C1/revisions/row/2/rev"] == "2"
    assert "C1/revisions/row/2/description" not in texts  # left blank


def test_a_long_description_goes_on_in_lines_below() -> None:
    words = "loads of the second lift added at the right half of the bridge after tender"
    texts = texts_of(painted(revised(rows=(RevisionRow(number=1, description=words),))))
    lines = [t for name, t in texts.items() if name.endswith("/description") and "head" not in name]
    assert len(lines) > 1
    assert " ".join(lines) == words


def test_the_place_of_the_table_is_told() -> None:
    painting = example(3)
    (note,) = [f for f in painting.findings if f.code == "revisions-placed"]
    assert note.at == dict(painting.origins)["C1/revisions"]


@pytest.mark.parametrize("count", [30, 60])
def test_above_twenty_changes_the_greatest_are_tagged_and_the_table_tells_all(count: int) -> None:
    layout, solution = revised(count, panel=8.0)
    painting = painted((layout, solution))
    changes, texts = solution.revisions[0].changes, texts_of(painting)
    tagged = {name.split("/")[2] for name in texts if name.endswith("/rev") and "row" not in name}
    assert tagged == {
        max(changes, key=lambda c: c.dy).mark,
        min(changes, key=lambda c: c.dy).mark,
    }
    for change in changes:
        assert texts[f"C1/revisions/moved/{change.mark}/dy"] == f"{change.dy:.3f} m"
    caution = [text for name, text in texts.items() if name.startswith("C1/revisions/caution/")]
    assert " ".join(caution).startswith("Preliminary calculation aid. ")


# --- where it stands ---

SCENES = [
    *((count, dx, None, 18.0) for count in (3, 8, 12, 20) for dx in (0.0, 0.03)),
    *((count, dx, None, 11.0) for count in (12, 20) for dx in (0.0, 0.03)),
    *((count, 0.03, 1, 18.0) for count in (3, 12)),
    (30, 0.03, None, 8.0),
    (30, 0.0, 17, 8.0),
]


@pytest.mark.parametrize("scene", SCENES)
def test_no_text_covers_another_and_none_stands_in_a_triangle(
    scene: tuple[int, float, int | None, float],
) -> None:
    painting = example(*scene)
    texts = [item for item in painting.items if isinstance(item, TextItem)]
    assert covered_texts(texts) == []
    for item in painting.items:
        if isinstance(item, PolylineItem) and item.id.endswith("/triangle"):
            own = item.id.replace("/triangle", "/rev")
            sides = strokes([item]).tolist()
            assert struck_texts([t for t in texts if t.id != own], sides) == []


@pytest.mark.parametrize("scene", [s for s in SCENES if s[3] > 10.0])
def test_tags_are_clear_of_our_lines_and_of_the_drafters(
    scene: tuple[int, float, int | None, float],
) -> None:
    layout, _ = revised(*scene[:1], panel=scene[3])
    painting = example(*scene)
    tags = [i for i in on_layer(painting) if i.part.startswith("C1/revision/")]
    words = [i for i in tags if isinstance(i, TextItem)]
    assert words
    rest = [i for i in painting.items if not i.id.endswith(("/leader", "/triangle"))]
    lines = [*strokes(rest).tolist(), *obstacles_of(layout).segments.tolist()]
    assert struck_texts(words, lines) == []
    frames = [
        (min(x for x, _ in i.points), min(y for _, y in i.points),
         max(x for x, _ in i.points), max(y for _, y in i.points))
        for i in tags
        if isinstance(i, PolylineItem)
    ]  # fmt: skip
    others = [
        i for i in painting.items if isinstance(i, TextItem) and i.part == i.id and i not in words
    ]
    assert boxed_texts(others, frames) == []


@pytest.mark.parametrize("scene", SCENES)
def test_a_tag_stands_within_three_heights_of_its_point(
    scene: tuple[int, float, int | None, float],
) -> None:
    _, solution = revised(scene[0], dx=scene[1], only=scene[2], panel=scene[3])
    items = by_id(example(*scene))
    found = 0
    for change in solution.revisions[0].changes:
        name = f"C1/revision/{change.mark}"
        if name in items:
            found += 1
            assert min(tag_gaps(items, name, change.at)) <= 3.0 * H + 1e-6
    assert found


def tag_gaps(items: dict[str, Item], name: str, at: Point) -> list[float]:
    """Give the distances of a tag's words and triangle from a point."""
    gaps = []
    for item in (items[name], items.get(f"{name}/row-2"), items[f"{name}/triangle"]):
        if isinstance(item, TextItem):
            gaps.append(distance(text_corners(item), (at, at)))
        elif isinstance(item, PolylineItem):
            gaps.append(distance(item.points, (at, at)))
    return gaps


def test_a_tag_goes_further_off_with_a_leader_where_a_drafter_filled_all_about_its_point() -> None:
    made = revised(3)
    change = made[1].revisions[0].changes[0]
    (x, y), reach = change.at, 3.2 * H
    own = obstacles_of(made[0])
    # Load texts and levels in columns above and below the point, a gap over it for the leader.
    boxes = [
        (x + side * 0.3 * H, y + k * 0.8 * H, x + side * 9.0 * H, y + (k + 0.7) * 0.8 * H)
        for k in range(-4, 4)
        for side in (-1, 1)
    ]
    boxes = [(min(a, c), b, max(a, c), d) for a, b, c, d in boxes]
    painting = painted(made, obstacles=Obstacles(own.segments, np.array(boxes)))
    items = by_id(painting)
    tag = [i for i in on_layer(painting) if i.part == f"C1/revision/{change.mark}"]
    words = [i for i in tag if isinstance(i, TextItem)]
    assert boxed_texts(words, boxes) == []
    assert min(tag_gaps(items, words[0].id, change.at)) > reach
    assert f"{words[0].id}/leader" in items


def test_tags_keep_clear_of_what_a_drafter_wrote() -> None:
    layout, solution = revised(8)
    free = painted((layout, solution))
    own = obstacles_of(layout)
    # A text of the drafter's just where a tag would like to stand.
    corners = [
        text_corners(i)
        for i in on_layer(free)
        if isinstance(i, TextItem) and i.part != "C1/revisions"
    ]
    boxes = [
        (min(x for x, _ in c), min(y for _, y in c), max(x for x, _ in c), max(y for _, y in c))
        for c in corners
    ]
    painting = painted((layout, solution), obstacles=Obstacles(own.segments, np.array(boxes)))
    words = [i for i in on_layer(painting) if isinstance(i, TextItem) and i.part != "C1/revisions"]
    assert boxed_texts(words, boxes) == []


def test_leaders_of_tags_run_over_no_text_and_no_triangle() -> None:
    count = 0
    for scene in SCENES:
        painting = example(*scene)
        texts = [i for i in painting.items if isinstance(i, TextItem)]
        for leader in on_layer(painting):
            if isinstance(leader, LineItem) and leader.id.endswith("/leader"):
                count += 1
                owner = leader.id.removesuffix("/leader")
                others = [t for t in texts if t.id != owner]
                assert struck_texts(others, [(*leader.start, *leader.end)]) == []
    assert count > 5


# --- what a drafter moved ---


def test_words_that_a_drafter_moved_take_their_triangle_along() -> None:
    before = example(3, 0.03)
    items = by_id(before)
    words = items["C1/revision/P1"]
    assert isinstance(words, TextItem)
    place = (words.at[0] + 3.0, words.at[1] - 2.0)
    after = by_id(painted(revised(3, dx=0.03), {"C1/revision/P1": place}))
    for name in ("", "/row-2", "/triangle", "/rev"):
        name = f"C1/revision/P1{name}"
        assert_same_place(after[name], shifted(items[name], (3.0, -2.0)))


@pytest.mark.parametrize("count", [3, 12])
def test_a_tag_or_table_held_where_it_stands_changes_nothing(count: int) -> None:
    painting = example(count, 0.03)
    origins = dict(painting.origins)
    for part in ("C1/revision/P1", "C1/revisions"):
        held = painted(revised(count, dx=0.03), {part: origins[part]})
        assert by_id(held) == by_id(painting)
        assert held.origins == painting.origins


def test_a_table_that_a_drafter_moved_stays_there() -> None:
    painting = painted(revised(), {"C1/revisions": (500.0, 300.0)})
    assert dict(painting.origins)["C1/revisions"] == (500.0, 300.0)
    (note,) = [f for f in painting.findings if f.code == "revisions-placed"]
    assert "moved" in note.text


# --- in the drawing ---


def issued(data: bytes, painting: Painting) -> bytes:
    result = issue(
        scan(data),
        painting,
        cable_records=["cable,C1,formed"],
        memory=Memory(),
        opened_before=(),
        pointed_at={},
        looks_before={},
        settings=Settings(),
        unit_mm=1000.0,
    )
    return b"".join(result.pieces)


@pytest.mark.parametrize("version", ["AC1009", "AC1015", "AC1032"])
def test_the_layer_is_there_only_with_revisions_and_strips_away_again(version: str) -> None:
    data = drawing(version)
    layout, solution = revised(3, dx=0.03)
    without = issued(data, painted((layout, replace(solution, revisions=()))))
    assert b"S-CABL-REVN" not in without
    # Conformity is checked on the way, tag by tag.
    with_revisions = issued(data, example(3, 0.03))
    assert b"S-CABL-REVN" in with_revisions
    assert apply(with_revisions, plan_strip(scan(with_revisions)).changes) == data


def test_conformity_is_checked_for_what_a_revision_draws(monkeypatch: pytest.MonkeyPatch) -> None:
    seen: list[bytes] = []
    check = conform.check_entities

    def watched(data: bytes, *args: object, **kwargs: object) -> None:
        seen.append(data)
        check(data, *args, **kwargs)  # type: ignore[arg-type]  # handed on as they came

    monkeypatch.setattr(conform, "check_entities", watched)
    issued(drawing(), example(3, 0.03))
    assert any(b"id=C1/revision/P1/triangle" in data for data in seen)


def moved_by_hand(data: bytes, names: set[str], by: Point) -> bytes:
    """Move entities of ours in another program."""
    document = read(io.StringIO(data.decode("utf-8")))
    for entity in document.modelspace():
        if entity.has_xdata("DXFCABLE"):
            strings = [value for code, value in entity.get_xdata("DXFCABLE") if code == 1000]
            if any(s.removeprefix("id=") in names for s in strings if s.startswith("id=")):
                entity.translate(*by, 0.0)
    stream = io.StringIO()
    document.write(stream)
    return stream.getvalue().encode("utf-8")


def plain_drawing() -> bytes:
    stream = io.StringIO()
    new("R2010").write(stream)
    return stream.getvalue().encode("utf-8")


@pytest.mark.parametrize("whole", [True, False])
def test_a_tag_moved_in_the_drawing_is_held_whole_or_by_its_words(whole: bool) -> None:
    painting = example(3, 0.03)
    name, by = "C1/revision/P1", (3.0, 1.5)
    names = {name, f"{name}/row-2", f"{name}/triangle", f"{name}/rev"} if whole else {name}
    data = moved_by_hand(issued(plain_drawing(), painting), names, by)
    memory = plan_strip(scan(data)).facts.memory
    before = by_id(painting)
    words = before[name]
    assert isinstance(words, TextItem)
    assert memory.places[name] == pytest.approx((words.at[0] + by[0], words.at[1] + by[1]))
    after = by_id(painted(revised(3, dx=0.03), dict(memory.places)))
    assert_same_place(after[f"{name}/triangle"], shifted(before[f"{name}/triangle"], by))


# --- thinning ---


@given(
    st.lists(st.tuples(st.floats(0.0, 100.0), st.floats(-10.0, 10.0)), min_size=2, max_size=40),
    st.floats(0.001, 5.0),
)
def test_a_thinned_line_keeps_its_ends_and_stays_within_the_distance(
    points: list[Point], off: float
) -> None:
    kept = thinned(sorted(points), off)
    assert (kept[0], kept[-1]) == (min(points), max(points))
    for point in points:
        assert min(_from_piece(point, a, b) for a, b in itertools.pairwise(kept)) <= off + 1e-9


def _from_piece(point: Point, start: Point, end: Point) -> float:
    """Give the distance of a point from the straight line of a piece."""
    run = math.dist(start, end)
    if run == 0.0:
        return math.dist(point, start)
    cross = (end[0] - start[0]) * (point[1] - start[1]) - (end[1] - start[1]) * (
        point[0] - start[0]
    )
    return abs(cross) / run


def test_a_straight_line_of_many_vertices_becomes_one_piece() -> None:
    assert thinned([(float(k), 2.0 * k) for k in range(50)], 1e-6) == [(0.0, 0.0), (49.0, 98.0)]
