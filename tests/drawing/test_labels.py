"""Widths and boxes of texts, and how labels take their places."""

from __future__ import annotations

import math
from dataclasses import replace
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.items import Align, LineItem, TextItem, VAlign
from dxfcable.drawing.painting.drawn_ground import DrawnGround
from dxfcable.drawing.painting.label_ground import Label, LabelGround
from dxfcable.drawing.painting.label_places import beside_line, readable_angle
from dxfcable.drawing.painting.label_placing import Group, put_labels
from dxfcable.drawing.painting.labels import text_corners, text_width
from dxfcable.drawing.painting.rounding import Rounder
from dxfcable.drawing.painting.sketch import Sketch
from dxfcable.drawing.painting.turned_boxes import grown, of_texts, reaches, touching
from tests.drawing.covering import common_area

if TYPE_CHECKING:
    from dxfcable.model import Point


def text_at(place: Point, words: str = "133 kip", rotation: float = 0.0) -> TextItem:
    return TextItem(
        id="a",
        layer="tension",
        part="a",
        text=words,
        at=place,
        height=1.0,
        rotation=rotation,
        align=Align.CENTER,
        valign=VAlign.MIDDLE,
    )


def label(name: str, *places: Point, is_optional: bool = False) -> Label:
    return Label(id=name, layer="tension", text="133 kip", places=places, is_optional=is_optional)


def place(
    *labels: Label,
    ground: LabelGround | None = None,
    held: dict[str, Point] | None = None,
    drawn: DrawnGround | None = None,
) -> dict[str, Point]:
    sketch = Sketch(Rounder(6))
    group = Group(labels=labels, sketch=sketch, drawn=drawn)
    put_labels([group], LabelGround(1.0) if ground is None else ground, held)
    return {item.id: item.at for item in sketch.items if isinstance(item, TextItem)}


def test_escapes_count_as_one_character() -> None:
    assert text_width(r"\U+0416", 2.0) == text_width("%%d", 2.0) == text_width("\u0416", 2.0)
    assert text_width("", 2.0) == 0.0


@given(st.text(st.characters(codec="ascii", exclude_characters="%\\"), max_size=30))
def test_width_adds_up_and_grows_with_height(words: str) -> None:
    one = text_width(words, 1.0)
    assert text_width(words + words, 1.0) == pytest.approx(2 * one)
    assert text_width(words, 2.5) == pytest.approx(2.5 * one)
    assert one >= 0.5 * len(words)


def test_digits_are_as_wide_as_in_a_usual_sans_serif_face() -> None:
    # Common practice: such a face has digits of 0.556 em and capitals 0.716 em high.
    assert text_width("0123456789", 1.0) >= 10 * 0.556 / 0.716


@pytest.mark.parametrize(
    ("align", "valign", "x", "y"),
    [
        (Align.LEFT, VAlign.BASELINE, 0.5, 0.43),
        (Align.CENTER, VAlign.MIDDLE, 0.0, -0.07),
        (Align.RIGHT, VAlign.TOP, -0.5, -0.57),
    ],
)
def test_the_box_of_a_text_follows_its_alignment(
    align: Align, valign: VAlign, x: float, y: float
) -> None:
    item = TextItem(
        id="a",
        layer="l",
        part="a",
        text="EL 1",
        at=(5.0, 7.0),
        height=1.0,
        align=align,
        valign=valign,
    )
    corners = text_corners(item)
    middle = (sum(p[0] for p in corners) / 4 - 5.0, sum(p[1] for p in corners) / 4 - 7.0)
    assert middle == pytest.approx((x * text_width("EL 1", 1.0), y))


def test_a_turned_box_keeps_its_size() -> None:
    flat, turned = (text_corners(text_at((3.0, 4.0), rotation=r)) for r in (0.0, 37.0))
    for i in range(4):
        sides = [math.dist(c[i], c[(i + 1) % 4]) for c in (flat, turned)]
        assert sides[0] == pytest.approx(sides[1])


@given(st.floats(-180, 180))
def test_text_along_a_line_is_never_upside_down(angle: float) -> None:
    turn = math.radians(angle)
    found = readable_angle((0.0, 0.0), (math.cos(turn), math.sin(turn)))
    assert -90.0 < found <= 90.0 + 1e-6
    off = math.radians(found - angle)
    assert abs(math.sin(off)) < 1e-9


@given(st.floats(-math.pi, math.pi))
def test_places_beside_a_line_are_off_it_and_within_three_heights(angle: float) -> None:
    end = (20.0 * math.cos(angle), 20.0 * math.sin(angle))
    for x, y in beside_line((0.0, 0.0), end, 1.0, first_side=1):
        off = abs(x * end[1] - y * end[0]) / 20.0
        assert 0.9 < off < 3.3  # middles; the box reaches 0.58 to 0.72 nearer


def test_a_label_takes_the_first_clear_place() -> None:
    assert place(label("a", (0.0, 0.0), (9.0, 0.0))) == {"a": (0.0, 0.0)}


def test_a_label_keeps_clear_of_lines_and_of_other_labels() -> None:
    ground = LabelGround(1.0)
    ground.add([LineItem(id="l", layer="profile", part="l", start=(-9.0, -9.0), end=(9.0, 9.0))])
    ground.add([text_at((20.0, 0.0))])
    found = place(label("a", (0.0, 0.0), (21.0, 0.4), (0.0, 8.0)), ground=ground)
    assert found == {"a": (0.0, 8.0)}


def lines_drawn(*lines: tuple[float, float, float, float]) -> DrawnGround:
    obstacles = Obstacles(np.array(lines, dtype=np.float64), np.zeros((0, 4)))
    return DrawnGround(obstacles, (-20.0, -20.0, 20.0, 20.0), 6.0)


def test_a_label_rather_covers_the_drafters_lines_than_ours() -> None:
    drawn = lines_drawn((0.0, 5.0, 1.0, 5.0))
    ground = LabelGround(1.0)
    ground.add([LineItem(id="l", layer="profile", part="l", start=(-9.0, 0.0), end=(9.0, 0.0))])
    first = label("a", (0.0, 0.0), (0.0, 5.0))
    assert place(first, ground=ground, drawn=drawn) == {"a": (0.0, 5.0)}
    assert place(label("a", (0.0, 5.0), (0.0, 0.0)), drawn=drawn) == {"a": (0.0, 0.0)}


def test_a_box_about_the_object_named_is_its_symbol_and_weighs_as_a_line() -> None:
    boxes = np.array([(-4.0, -4.0, 4.0, 4.0), (6.0, -4.0, 14.0, 4.0)])
    region = (-20.0, -20.0, 20.0, 20.0)
    drawn = DrawnGround(Obstacles(np.zeros((0, 4)), boxes), region, 6.0)
    both = label("a", (10.0, 0.0), (0.0, 0.0))
    assert place(both, drawn=drawn) == {"a": (10.0, 0.0)}
    named = replace(both, target=((1.0, 1.0), (1.0, 1.0)))
    assert place(named, drawn=drawn) == {"a": (0.0, 0.0)}


def test_labels_of_two_views_make_room_for_each_other() -> None:
    one, other = Sketch(Rounder(6)), Sketch(Rounder(6))
    groups = [
        Group(labels=(label("a", (0.0, 0.0), (0.0, 5.0)),), sketch=one),
        Group(labels=(label("b", (1.0, 0.0)),), sketch=other),
    ]
    put_labels(groups, LabelGround(1.0))
    assert [i.at for i in one.items if isinstance(i, TextItem)] == [(0.0, 5.0)]
    assert [i.at for i in other.items if isinstance(i, TextItem)] == [(1.0, 0.0)]


def test_a_neighbour_makes_room() -> None:
    # The first label's best place is the second one's only one.
    found = place(label("a", (0.0, 0.0), (0.0, 5.0)), label("b", (1.0, 0.0)))
    assert found == {"a": (0.0, 5.0), "b": (1.0, 0.0)}


def test_a_chain_of_neighbours_makes_room() -> None:
    found = place(
        label("a", (0.0, 0.0), (0.0, 5.0)),
        label("b", (0.0, 5.0), (0.0, 10.0)),
        label("c", (0.0, 0.0)),
    )
    assert found == {"a": (0.0, 5.0), "b": (0.0, 10.0), "c": (0.0, 0.0)}


def test_nothing_is_dropped_but_what_is_optional() -> None:
    found = place(
        label("a", (0.0, 0.0)), label("b", (0.0, 0.0)), label("c", (0.0, 0.0), is_optional=True)
    )
    assert found.keys() == {"a", "b"}


def test_a_held_label_stands_and_the_others_give_way() -> None:
    found = place(
        label("a", (0.0, 0.0), (0.0, 5.0)), label("b", (9.0, 9.0)), held={"b": (1.0, 0.2)}
    )
    assert found == {"a": (0.0, 5.0), "b": (1.0, 0.2)}


def leaders(*labels: Label, ground: LabelGround | None = None) -> dict[str, LineItem]:
    sketch = Sketch(Rounder(6))
    group = Group(labels=labels, sketch=sketch)
    put_labels([group], LabelGround(1.0) if ground is None else ground)
    return {item.id: item for item in sketch.items if isinstance(item, LineItem)}


def test_a_label_that_stands_off_gets_a_leader_to_what_it_names() -> None:
    far = replace(label("a", (0.0, 3.0)), target=((0.0, 0.0), (0.0, 0.0)))
    found = leaders(far)
    assert found.keys() == {"a/leader"}
    assert found["a/leader"].end == (0.0, 0.0)
    assert found["a/leader"].layer == "tension"
    assert 2.0 < found["a/leader"].start[1] < 2.5  # just below the text
    near = replace(label("a", (0.0, 1.0)), target=((0.0, 0.0), (0.0, 0.0)))
    assert leaders(near) == {}
    assert leaders(label("a", (0.0, 3.0))) == {}


def test_a_leader_runs_to_the_nearest_point_of_a_line() -> None:
    along = replace(label("a", (4.0, 3.0)), target=((-20.0, 0.0), (20.0, 0.0)))
    leader = leaders(along)["a/leader"]
    assert leader.end[1] == 0.0
    assert leader.start[0] == pytest.approx(leader.end[0])


def test_a_leader_goes_round_a_text_and_is_left_out_where_it_cannot() -> None:
    far = replace(label("a", (0.0, 3.0)), target=((0.0, 0.0), (0.0, 0.0)))
    beside = LabelGround(1.0)
    beside.add([text_at((-2.9, 1.2))])
    assert leaders(far, ground=beside)["a/leader"].start[0] > 0.0
    under = LabelGround(1.0)
    under.add([text_at((0.0, 1.2))])
    assert leaders(far, ground=under) == {}


@given(st.floats(-180, 180), st.floats(-180, 180), st.floats(0, 12), st.floats(-180, 180))
def test_turned_boxes_touch_where_clipping_finds_a_common_area(
    first: float, second: float, away: float, towards: float
) -> None:
    turn = math.radians(towards)
    one = text_at((0.0, 0.0), rotation=first)
    other = text_at((away * math.cos(turn), away * math.sin(turn)), rotation=second)
    shared = common_area(text_corners(one), text_corners(other))
    rows = of_texts([one, other])
    if shared > 1e-3:
        assert touching(rows[0], rows[1], 1e-6)
    if not touching(grown(rows, 1e-3)[0], rows[1], 0.0):
        assert shared == 0.0


@given(st.lists(st.tuples(*[st.floats(-25, 25)] * 4), min_size=1, max_size=30), st.integers(0, 99))
def test_columns_find_what_lies_near_and_each_once(
    lines: list[tuple[float, float, float, float]], seed: int
) -> None:
    ground = lines_drawn(*lines)
    low = np.random.default_rng(seed).uniform(-22.0, 18.0, (5, 2))
    high = low + 7.0
    box, row = ground.near(low, high)
    bottom, top = reaches(ground.rows)
    expected = {
        (k, i)
        for k in range(5)
        for i in range(len(ground.rows))
        if (bottom[i] < high[k]).all() and (top[i] > low[k]).all()
    }
    pairs = list(zip(box.tolist(), row.tolist(), strict=True))
    assert len(pairs) == len(set(pairs))
    assert set(pairs) == expected
