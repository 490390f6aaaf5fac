"""Labels of 2 to 60 points clear of each other, of our lines, and of what a drafter drew.

The layouts are made here from seeds: uneven panels, unlevel supports, with and without masts,
and about them a drafter's grid lines, dimension chain, deck, symbols and texts.
"""

from __future__ import annotations

import itertools
import math
from functools import cache
from typing import TYPE_CHECKING, NamedTuple

import numpy as np
import pytest

from dxfcable.drawing.excerpt import Obstacles
from dxfcable.drawing.items import LineItem, Painting, TextItem
from dxfcable.drawing.painter import paint
from dxfcable.drawing.painting.labels import text_corners
from dxfcable.drawing.painting.sketch import strokes
from dxfcable.settings import Settings
from tests.drawing.covering import boxed_texts, covered_texts, distance, struck_texts
from tests.drawing.painter_cases import Case, Span, form, layout_of, obstacles_of

if TYPE_CHECKING:
    from dxfcable.model import FormedCable, Layout, Point, Solution

H = 0.25  # text height at 1:100 [m]
COUNTS = [2, 3, 5, 8, 12, 16, 20, 30, 60]
Box = tuple[float, float, float, float]


class Scene(NamedTuple):
    """A layout painted among what a drafter drew."""

    layout: Layout
    solution: Solution
    obstacles: Obstacles
    painting: Painting

    @property
    def formed(self) -> FormedCable:
        return self.solution.cables[0]

    def texts(self) -> dict[str, TextItem]:
        """Give the texts of the elevation."""
        items = self.painting.items
        return {i.id: i for i in items if isinstance(i, TextItem) and i.part == i.id}

    def struck(self) -> list[str]:
        """List the texts that any line runs through, but for the end of their own leader."""
        texts = self.texts()
        own = [i for i in self.painting.items if i.part == i.id]
        leaders = [i for i in own if isinstance(i, LineItem) and i.id.endswith("/leader")]
        names = {i.id for i in leaders}
        found = struck_texts(list(texts.values()), self.obstacles.segments.tolist())
        rest = strokes(i for i in own if i.id not in names)
        found += struck_texts(list(texts.values()), rest.tolist())
        for leader in leaders:
            others = [t for t in texts.values() if f"{t.id}/leader" != leader.id]
            found += struck_texts(others, [(*leader.start, *leader.end)])
        return found


def invented(count: int, seed: int, panel: float) -> Case:
    """Invent a cable: panels of about so many text heights."""
    rng = np.random.default_rng(1000 * seed + count)
    panels = panel * H * rng.uniform(0.8, 1.4, count + 1)
    x = np.round(np.concatenate(([0.0], np.cumsum(panels))), 3)
    length = float(x[-1])
    rise, sag = length * float(rng.choice([-0.12, -0.05, 0.0, 0.05, 0.12])), length * 0.1
    span = Span(
        x=tuple(x.tolist()),
        loads=tuple(rng.integers(5, 30, count).astype(float).tolist()),
        y=(30.0, 30.0 + rise),
        sag=sag,
    )
    deck = min(form(span).y) - float(rng.uniform(6.0, 24.0)) * H
    mast = float(rng.uniform(20.0, 40.0)) * H if seed % 3 else None
    run = float(rng.uniform(20.0, 50.0)) * H
    return Case(spans=(span,), deck=deck, mast=mast, stay_run=run)


def drafters(case: Case) -> tuple[list[Box], list[Box]]:
    """Draw what a drafter would about it: lines, and boxes of texts and symbols."""
    span, deck = case.spans[0], case.deck or 0.0
    x, top = span.x, max(span.y) + 14 * H
    lines: list[Box] = [(x[0] - 2.0, deck, x[-1] + 2.0, deck), (x[0], top, x[-1], top)]
    lines += [(at, top - H, at, top + H) for at in x]
    boxes: list[Box] = []
    for at in x[1:-1]:
        boxes += [_box(at + 0.4 * H, deck - 4 * H, 5.6, 3.0), _box(at - 0.6 * H, deck - 0.6 * H)]
    for a, b in itertools.pairwise(x):
        boxes.append(_box(0.5 * (a + b) - 2 * H, top + 0.2 * H, 4.0, 1.4))
    for at, y, side in ((x[0], span.y[0], -1), (x[-1], span.y[1], 1)):
        lines.append((at, y - 40 * H, at, top + 4 * H))
        mark = at + 0.8 * H if side > 0 else at - 3.0 * H
        level = at - 8.0 * H if side > 0 else at + 0.8 * H
        boxes += [_box(at - 0.6 * H, y - 0.6 * H), _box(mark, y + 0.8 * H, 2.2, 1.8)]
        boxes.append(_box(level, y + 1.2 * H, 7.2, 1.5))
    return lines, boxes


def _box(x: float, y: float, wide: float = 1.2, high: float = 1.2) -> Box:
    """Give a box by its corner and its size in text heights."""
    return x, y, x + wide * H, y + high * H


@cache
def scene(count: int, seed: int, panel: float) -> Scene:
    case = invented(count, seed, panel)
    layout, solution = layout_of(case, text_height=H)
    lines, boxes = drafters(case)
    own = obstacles_of(layout, tuple(lines))
    obstacles = Obstacles(own.segments, np.array(boxes))
    painting = paint(
        layout,
        solution,
        obstacles=obstacles,
        settings=Settings(),
        plot_scale="1:100",
        held_places={},
    )
    return Scene(layout, solution, obstacles, painting)


@pytest.mark.parametrize("panel", [18.0, 11.0, 8.0])
@pytest.mark.parametrize("count", COUNTS)
def test_no_text_covers_another(count: int, panel: float) -> None:
    for seed in (1, 2, 3):
        texts = [i for i in scene(count, seed, panel).painting.items if isinstance(i, TextItem)]
        assert covered_texts(texts) == []
        assert {round(item.height, 9) for item in texts} == {H}


@pytest.mark.parametrize("count", COUNTS)
def test_texts_are_clear_of_all_lines_and_of_the_drafters_texts(count: int) -> None:
    for seed in (1, 2, 3):
        made = scene(count, seed, 18.0)
        texts = list(made.texts().values())
        assert made.struck() == []
        assert boxed_texts(texts, made.obstacles.boxes.tolist()) == []


@pytest.mark.parametrize("panel", [11.0, 8.0])
def test_in_narrow_panels_hardly_a_text_touches_a_line(panel: float) -> None:
    count = struck = 0
    for points in COUNTS:
        for seed in (1, 2, 3):
            made = scene(points, seed, panel)
            texts = list(made.texts().values())
            found = made.struck()
            found += boxed_texts(texts, made.obstacles.boxes.tolist())
            count, struck = count + len(texts), struck + len(set(found))
    assert count > 1000
    assert struck <= 0.01 * count


@pytest.mark.parametrize("panel", [18.0, 11.0])
@pytest.mark.parametrize("count", [n for n in COUNTS if n <= 20])
def test_up_to_twenty_points_all_is_labelled_within_three_heights(count: int, panel: float) -> None:
    for seed in (1, 2, 3):
        made = scene(count, seed, panel)
        texts, formed = made.texts(), made.formed
        named: dict[str, tuple[Point, Point]] = {}
        for number, piece in enumerate(formed.segments, start=1):
            named[f"C1/tension/{number}"] = (piece.start, piece.end)
            named[f"C1/letter/{piece.name[:-1]}"] = (piece.start, piece.end)
        for node in formed.nodes:
            named[f"C1/elevation/{node.mark}"] = ((node.x, node.y),) * 2
            if node.hanger_foot is not None:
                ends = ((node.x, node.y), (node.x, node.hanger_foot))
                named[f"C1/hanger-length/{node.mark}"] = ends
        lines = {i.id: i for i in made.painting.items if isinstance(i, LineItem)}
        for reaction in formed.reactions:
            for key in "HV":
                arrow = lines[f"C1/reaction/{reaction.mark}/{key}-arrow"]
                named[f"C1/reaction/{reaction.mark}/{key}"] = (arrow.start, arrow.end)
        for name, line in named.items():
            gap = distance(text_corners(texts[name]), line)
            assert gap <= 3.0 * H + 1e-6, name
            # A letter names the space that it stands in: no leader.
            if gap > 1.3 * H and "/letter/" not in name:
                assert f"{name}/leader" in lines or _is_stacked(texts, name), name


def _is_stacked(texts: dict[str, TextItem], name: str) -> bool:
    """Tell whether another text stands just below or above, where a leader would run over it."""
    own = texts[name]
    return any(
        math.dist(own.at, item.at) < 6.0 * H for other, item in texts.items() if other != name
    )


def test_leaders_run_over_no_text() -> None:
    found = 0
    for count in COUNTS:
        for seed in (1, 2, 3):
            made = scene(count, seed, 11.0)
            leaders = [
                i
                for i in made.painting.items
                if isinstance(i, LineItem) and i.id.endswith("/leader") and i.part == i.id
            ]
            found += len(leaders)
            for leader in leaders:
                owner = leader.id.removesuffix("/leader")
                others = [t for name, t in made.texts().items() if name != owner]
                assert struck_texts(others, [(*leader.start, *leader.end)]) == []
                assert leader.layer == made.texts()[owner].layer
    assert found > 10


@pytest.mark.parametrize("count", [21, 30, 60])
def test_above_twenty_points_ends_low_point_and_largest_tension_are_labelled(count: int) -> None:
    made = scene(count, 1, 11.0)
    texts, formed = made.texts(), made.formed
    most = max(range(len(formed.segments)), key=lambda i: formed.segments[i].tension)
    low = min(formed.nodes, key=lambda node: node.y)
    assert {
        "C1/tension/1",
        f"C1/tension/{count + 1}",
        f"C1/tension/{most + 1}",
        f"C1/elevation/{low.mark}",
        "C1/elevation/S1",
        "C1/elevation/S2",
        "C1/reaction/S1/H",
        "C1/reaction/S2/V",
        "C1/sag-label/1",
        "C1/span-label/1",
    } <= texts.keys()


def test_the_same_drawing_is_painted_the_same() -> None:
    one = scene(12, 2, 11.0).painting
    scene.cache_clear()
    assert scene(12, 2, 11.0).painting == one
