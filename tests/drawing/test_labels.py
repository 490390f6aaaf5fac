"""Widths and boxes of texts, and how labels take their places."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing.items import Align, LineItem, TextItem, VAlign
from dxfcable.drawing.painting.free_place import grid_over
from dxfcable.drawing.painting.label_ground import Label, LabelGround
from dxfcable.drawing.painting.label_places import beside_line, readable_angle
from dxfcable.drawing.painting.label_placing import put_labels
from dxfcable.drawing.painting.labels import text_corners, text_width
from dxfcable.drawing.painting.rounding import Rounder
from dxfcable.drawing.painting.sketch import Sketch

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
    *labels: Label, ground: LabelGround | None = None, held: dict[str, Point] | None = None
) -> dict[str, Point]:
    sketch = Sketch(Rounder(6), {})
    put_labels(labels, sketch, LabelGround(1.0) if ground is None else ground, held)
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
        assert 0.9 < off < 3.5  # middles; the box reaches 0.58 to 0.72 nearer


def test_a_label_takes_the_first_clear_place() -> None:
    assert place(label("a", (0.0, 0.0), (9.0, 0.0))) == {"a": (0.0, 0.0)}


def test_a_label_keeps_clear_of_lines_and_of_other_labels() -> None:
    ground = LabelGround(1.0)
    ground.add([LineItem(id="l", layer="profile", part="l", start=(-9.0, -9.0), end=(9.0, 9.0))])
    ground.add([text_at((20.0, 0.0))])
    found = place(label("a", (0.0, 0.0), (21.0, 0.4), (0.0, 8.0)), ground=ground)
    assert found == {"a": (0.0, 8.0)}


def test_a_label_rather_covers_the_drafters_lines_than_ours() -> None:
    grid = grid_over((-20.0, -20.0, 20.0, 20.0), 0.5, 10_000)
    grid.add_segments(np.array([(0.0, 5.0, 1.0, 5.0)]))
    ground = LabelGround(1.0, grid)
    ground.add([LineItem(id="l", layer="profile", part="l", start=(-9.0, 0.0), end=(9.0, 0.0))])
    assert place(label("a", (0.0, 0.0), (0.0, 5.0)), ground=ground) == {"a": (0.0, 5.0)}
    ground = LabelGround(1.0, grid)
    assert place(label("a", (0.0, 5.0), (0.0, 0.0)), ground=ground) == {"a": (0.0, 0.0)}


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
