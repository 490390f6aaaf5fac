"""What is painted says what the solution says: geometry of statics, numbers, ids."""

from __future__ import annotations

import math
import re
from dataclasses import replace

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.items import (
    CircleItem,
    Item,
    LineItem,
    Painting,
    PolylineItem,
    TextItem,
    TriangleItem,
)
from dxfcable.drawing.painter import paint
from dxfcable.drawing.painting.schedule_text import CAUTION
from dxfcable.drawing.painting.sketch import item_points
from dxfcable.model import Layout, Point, Rule, RuleKind, Solution
from dxfcable.settings import Settings
from tests.drawing.painter_cases import Case, Span, even, layout_of, obstacles_of

# Coordinates are rounded to at most 1e-9 of the span, so a direction is off by that over length.
PARALLEL = 4e-9

SAMPLE = Case(
    spans=(Span(x=(0.0, 8.0, 16.0, 24.0), loads=(15.0, 21.0), y=(12.0, 13.0), sag=2.4),),
    mast=6.0,
    stay_run=10.0,
)


def painted(*cases: Case, plot_scale: str | None = None) -> tuple[Painting, Layout, Solution]:
    layout, solution = layout_of(*cases)
    painting = paint(
        layout,
        solution,
        obstacles=obstacles_of(layout),
        settings=Settings(),
        plot_scale=plot_scale,
        held_places={},
    )
    return painting, layout, solution


def line(painting: Painting, name: str) -> LineItem:
    found = by_id(painting)[name]
    assert isinstance(found, LineItem)
    return found


def text(painting: Painting, name: str) -> str:
    found = by_id(painting)[name]
    assert isinstance(found, TextItem)
    return found.text


def by_id(painting: Painting) -> dict[str, Item]:
    return {item.id: item for item in painting.items}


def vector(start: Point, end: Point) -> Point:
    return end[0] - start[0], end[1] - start[1]


def sine(a: Point, b: Point) -> float:
    return (a[0] * b[1] - a[1] * b[0]) / (math.hypot(*a) * math.hypot(*b))


spans = st.integers(1, 24).flatmap(
    lambda n: st.tuples(
        st.lists(st.floats(0.5, 3.0), min_size=n + 1, max_size=n + 1),
        st.lists(st.floats(1.0, 50.0), min_size=n, max_size=n),
        st.floats(-0.1, 0.1),
        st.floats(0.06, 0.2),
    )
)


def spanned(
    drawn: tuple[list[float], list[float], float, float], x0: float = 0.0
) -> tuple[Span, ...]:
    panels, loads, rise, sag = drawn
    x = [x0]
    for panel in panels:
        x.append(x[-1] + panel)
    length = x[-1] - x[0]
    return (Span(x=tuple(x), loads=tuple(loads), y=(10.0, 10.0 + rise * length), sag=sag * length),)


@settings(max_examples=12, deadline=None)
@given(spans)
def test_every_ray_is_parallel_to_its_segment_and_measures_its_tension(
    drawn: tuple[list[float], list[float], float, float],
) -> None:
    painting, _, solution = painted(Case(spans=spanned(drawn)))
    formed, placed = solution.cables[0], painting.diagrams[0]
    for number, segment in enumerate(formed.segments, start=1):
        ray = line(painting, f"C1/ray/{number}")
        assert ray.start == placed.pole
        assert ray.end == placed.rays[number - 1]
        run = vector(ray.end, ray.start)
        length = math.hypot(*run)
        span = formed.nodes[-1].x - formed.nodes[0].x
        assert abs(sine(run, vector(segment.start, segment.end))) <= PARALLEL * span / length
        assert length * placed.scale == pytest.approx(segment.tension, rel=1e-8 * span / length)


@settings(max_examples=8, deadline=None)
@given(spans)
def test_the_load_line_sums_the_loads_and_the_closing_ray_follows_the_closing_string(
    drawn: tuple[list[float], list[float], float, float],
) -> None:
    painting, layout, solution = painted(Case(spans=spanned(drawn)))
    placed = painting.diagrams[0]
    loads = [node.load for node in solution.cables[0].nodes if not node.is_support]
    for number, load in enumerate(loads, start=1):
        step = line(painting, f"C1/load-line/{number}")
        assert step.start[0] == step.end[0] == placed.load_line[0][0]
        assert (step.start[1] - step.end[1]) * placed.scale == pytest.approx(load, rel=1e-6)
    total = (placed.load_line[0][1] - placed.load_line[-1][1]) * placed.scale
    assert total == pytest.approx(sum(loads), rel=1e-8)
    closing = line(painting, "C1/closing-ray/1")
    left, right = layout.cables[0].supports
    chord = (right.x - left.x, right.y - left.y)
    assert abs(sine(vector(closing.end, closing.start), chord)) < 1e-7
    assert closing.is_chain


def test_the_profile_has_a_vertex_at_each_support_and_point_and_the_drafters_numbers() -> None:
    x = (0.1, 8.000000000123456, 15.333333333333334, 24.7)
    case = Case(spans=(Span(x=x, loads=(15.0, 21.0), y=(12.123456789012345, 13.0), sag=2.4),))
    painting, _, _ = painted(case)
    profile = by_id(painting)["C1/profile/1"]
    assert isinstance(profile, PolylineItem)
    assert tuple(p[0] for p in profile.points) == x
    assert profile.points[0][1] == 12.123456789012345
    assert profile.points[1][1] == round(profile.points[1][1], 8)


def test_labels_say_the_numbers_that_they_name() -> None:
    # OWN: supports (0, 12), (24, 13), D 15 at 8 and 21 at 16, sag 2.4 (closed form H = M / sag).
    painting, _, _ = painted(SAMPLE)
    assert text(painting, "C1/tension/1") == "64.9 kN"
    assert text(painting, "C1/tension/3") == "66.9 kN"
    assert text(painting, "C1/elevation/P1") == "EL 10.186"
    assert text(painting, "C1/reaction/S1/H") == "H 63.3 kN"
    assert text(painting, "C1/reaction/S1/V") == "V 14.4 kN"
    assert text(painting, "C1/span-label/1") == "24.000 m"
    assert text(painting, "C1/sag-label/1") == "SAG 2.400 m"
    assert text(painting, "C1/load-value/2") == "21 kN"
    assert text(painting, "C1/pole-distance/1/label") == "H 63.3 kN"
    assert text(painting, "C1/largest-tension/1") == "MAX 66.9 kN"
    assert text(painting, "C1/anchorage/S1/mast") == "MAST -52.4 kN"
    assert text(painting, "C1/anchorage/S1/stay-1") == "STAY 73.9 kN"
    assert text(painting, "C1/anchorage/S1/anchor/uplift") == "UPLIFT 38.0 kN"


def test_without_a_datum_heights_are_differences_from_the_left_support() -> None:
    painting, _, _ = painted(replace(SAMPLE, datum=None))
    assert text(painting, "C1/elevation/S1") == "+0.000"
    assert text(painting, "C1/elevation/P1") == "-1.814"
    assert text(painting, "C1/elevation/S2") == "+1.000"


def test_an_inch_pound_drawing_is_written_in_its_units() -> None:
    case = Case(
        spans=(even(5, 120.0, load=10.0, y0=41.21),),
        unit="ft",
        force="kip",
        deck=20.0,
        drawn=((2, "10"),),
    )
    painting, _, _ = painted(case)
    assert text(painting, "C1/elevation/S1") == "EL 41'-2 1/2\""
    assert text(painting, "C1/load/P3") == "15 kip (drawn 10)"
    words = [item.text for item in painting.items if isinstance(item, TextItem)]
    assert any(re.fullmatch(r"PLOTTED: 1 in = \d+ kip", word) for word in words)


def test_the_schedule_holds_rule_results_and_the_caution_word_for_word() -> None:
    case = replace(SAMPLE, rule=Rule(kind=RuleKind.MAX_TENSION, value=66.928))
    painting, _, _ = painted(case)
    assert text(painting, "C1/schedule/summary/rule/value") == "LARGEST TENSION 66.928 kN"
    assert text(painting, "C1/schedule/summary/level/value") == "SERVICE (ASSUMED)"
    assert text(painting, "C1/schedule/summary/unstressed/value") == "24.480 m"
    assert text(painting, "C1/schedule/point/P2/load") == "21 kN"
    assert text(painting, "C1/schedule/segment/3/right") == "66.9 kN"
    lines = [
        item.text
        for item in painting.items
        if isinstance(item, TextItem) and "/caution/" in item.id
    ]
    assert " ".join(lines) == CAUTION
    assert all(len(words) < 200 for words in lines)


def test_a_zero_load_keeps_its_letter_and_has_no_step() -> None:
    span = Span(x=(0.0, 8.0, 16.0, 24.0, 32.0), loads=(15.0, 0.0, 21.0), y=(12.0, 12.0), sag=3.0)
    painting, _, _ = painted(Case(spans=(span,)))
    ids = by_id(painting)
    assert "C1/load-line/1" in ids
    assert "C1/load-line/2" not in ids
    assert [ids[f"C1/load-line-letter/{letter}"].layer for letter in "ABCD"] == ["letters"] * 4


def test_a_joint_closes_and_its_sides_measure_the_forces() -> None:
    painting, _, solution = painted(SAMPLE)
    sides = [line(painting, f"C1/joint/S1/side/{name}") for name in ("cable_1", "stay_1", "mast")]
    assert sides[0].end == sides[1].start
    assert sides[1].end == sides[2].start
    assert math.dist(sides[2].end, sides[0].start) < 1e-7
    words = text(painting, "C1/joint/S1/words/4")
    match = re.fullmatch(r"FORCE 1 m = ([\d.]+) kN", words)
    assert match is not None
    for drawn, side in zip(sides, solution.anchorages[0].sides, strict=True):
        assert math.dist(drawn.start, drawn.end) * float(match[1]) == pytest.approx(
            math.hypot(*side.force), rel=1e-7
        )


def test_a_cable_with_weight_has_two_rays_a_piece() -> None:
    layout, solution = layout_of(Case(spans=(even(1, 10.0),)))
    formed = solution.cables[0]
    diagram = formed.diagrams[0]
    a, b = diagram.load_line
    heavy = replace(diagram, load_line=(a + 0.4, a - 0.4, b + 0.4, b - 0.4))
    pieces = tuple(replace(p, tension_right=p.tension_right + 0.01) for p in formed.segments)
    cable = replace(formed, diagrams=(heavy,), segments=pieces, weight=0.16)
    painting = paint(
        layout,
        replace(solution, cables=(cable,)),
        obstacles=obstacles_of(layout),
        settings=Settings(),
        plot_scale=None,
        held_places={},
    )
    ids = by_id(painting)
    assert len(painting.diagrams[0].rays) == 4
    assert {f"C1/ray/{n}" for n in range(1, 5)} <= ids.keys()
    assert text(painting, "C1/load-line-letter/B'") == "B'"
    assert "C1/load-line/1/head" not in ids  # a piece's own weight is no load
    assert "C1/load-line/2/head" in ids
    assert text(painting, "C1/load-value/2") == "14.2 kN"


def test_letters_and_diagrams_run_on_through_the_spans() -> None:
    case = Case(spans=(even(2, 20.0), even(3, 30.0, x0=20.0)), support_marks=("S", "S", "S"))
    painting, _, _ = painted(case)
    ids = by_id(painting)
    assert [d.span for d in painting.diagrams] == [0, 1]
    assert {f"C1/ray/{n}" for n in range(1, 8)} <= ids.keys()
    assert {"C1/elevation/S", "C1/elevation/S~2", "C1/elevation/S~3"} <= ids.keys()
    assert {f"C1/letter/{letter}" for letter in "ABCDEFG"} <= ids.keys()
    right = max(p[0] for p in (*painting.diagrams[0].rays, painting.diagrams[0].pole))
    assert all(p[0] > right for p in painting.diagrams[1].load_line)


@pytest.mark.parametrize("count", [1, 7, 20, 60])
def test_ids_are_unique_ascii_and_every_item_is_of_an_own_layer(count: int) -> None:
    case = Case(spans=(even(count, 60.0),), deck=0.0, mark="C\u00e9 1/2", mast=8.0, stay_run=9.0)
    second = Case(spans=(even(3, 40.0, y0=-40.0),), mark="C\u00e9 1/2", first_key=10)
    painting, _, _ = painted(case, second)
    ids = [item.id for item in painting.items]
    assert len(set(ids)) == len(ids)
    assert all(name.isascii() and " " not in name for name in ids)
    assert {name.split("/")[0] for name in ids} == {"C__1_2", "C__1_2~2"}
    own = Settings().layers.output_roles()
    assert {item.layer for item in painting.items} <= set(own)
    texts = [item.text for item in painting.items if isinstance(item, TextItem)]
    assert all(words.isascii() and len(words) < 200 for words in texts)


def test_up_to_twenty_points_every_label_stands() -> None:
    painting, _, _ = painted(Case(spans=(even(20, 60.0),), deck=0.0))
    ids = by_id(painting)
    for number in range(1, 21):
        assert {f"C1/elevation/P{number}", f"C1/hanger-length/P{number}"} <= ids.keys()
        assert {f"C1/tension/{number}", f"C1/load-value/{number}"} <= ids.keys()


def test_above_twenty_points_the_largest_tension_ends_and_low_point_stay() -> None:
    painting, _, solution = painted(Case(spans=(even(40, 120.0),), deck=-10.0))
    ids = by_id(painting)
    formed = solution.cables[0]
    most = max(range(41), key=lambda i: formed.segments[i].tension)
    low = min(formed.nodes, key=lambda node: node.y)
    kept = {"C1/tension/1", "C1/tension/41", f"C1/tension/{most + 1}", f"C1/elevation/{low.mark}"}
    assert kept | {"C1/elevation/S1", "C1/elevation/S2"} <= ids.keys()
    assert "C1/tension/20" not in ids
    assert {f"C1/schedule/segment/{n}/left" for n in range(1, 42)} <= ids.keys()


def test_painting_twice_is_equal_and_no_number_is_a_negative_zero() -> None:
    case = Case(spans=(even(9, 40.0, y0=0.0, rise=0.0),), deck=-8.0, mast=8.0, stay_run=9.0)
    first, second = painted(case)[0], painted(case)[0]
    assert first == second
    for item in first.items:
        numbers = [c for p in item_points(item) for c in p]
        if isinstance(item, TextItem):
            numbers = [*item.at, item.rotation]
        elif isinstance(item, CircleItem):
            numbers = [*item.center, item.radius]
        assert all(math.isfinite(n) and math.copysign(1.0, n) > 0 for n in numbers if n == 0)


def test_ids_stay_when_a_load_changes() -> None:
    one = painted(Case(spans=(even(5, 40.0),), deck=0.0))[0]
    two = painted(Case(spans=(even(5, 40.0, load=33.0),), deck=0.0))[0]
    assert [item.id for item in one.items] == [item.id for item in two.items]


def test_the_low_point_is_marked_and_the_datum_is_named() -> None:
    painting, _, _ = painted(SAMPLE)
    assert text(painting, "C1/elevation/low-point-1") == "LOW PT"
    assert text(painting, "C1/schedule/summary/elevations/value") == "DATUM OF EL"
    painting, _, _ = painted(replace(SAMPLE, datum=None))
    assert text(painting, "C1/schedule/summary/elevations/value") == "DIFFERENCES FROM S1"


def test_closing_strings_and_closing_rays_are_chain_lines_and_nothing_else_is() -> None:
    painting, _, _ = painted(SAMPLE)
    chains = {i.id for i in painting.items if isinstance(i, LineItem) and i.is_chain}
    assert chains == {"C1/closing-string/1", "C1/closing-ray/1"}


@pytest.mark.parametrize(("deck", "side"), [(6.0, -1.0), (None, 1.0)])
def test_letters_stand_on_the_side_of_the_loads(deck: float | None, side: float) -> None:
    # Common practice: Bow's letters stand in the spaces between the external forces.
    case = Case(spans=(even(3, 40.0, y0=20.0),), deck=deck)
    layout, solution = layout_of(case)
    if deck is None:
        loads = tuple(replace(load, y=30.0) for load in layout.cables[0].loads)
        layout = replace(layout, cables=(replace(layout.cables[0], loads=loads),))
    painting = paint(
        layout,
        solution,
        obstacles=obstacles_of(layout),
        settings=Settings(),
        plot_scale="1:100",
        held_places={},
    )
    for piece in solution.cables[0].segments:
        item = by_id(painting)[f"C1/letter/{piece.name[:-1]}"]
        assert isinstance(item, TextItem)
        share = (item.at[0] - piece.start[0]) / (piece.end[0] - piece.start[0])
        on_cable = piece.start[1] + share * (piece.end[1] - piece.start[1])
        assert side * (item.at[1] - on_cable) > 0.0
    assert text(painting, "C1/letter/O-1") == "O"


def test_stays_pull_away_from_the_joint_and_masts_push_towards_it() -> None:
    painting, _, solution = painted(replace(SAMPLE, mast=9.0))
    anchorage = solution.anchorages[0]
    for key, foot, sign in (
        ("stay-1", anchorage.stay_feet[0], 1.0),
        ("mast", anchorage.mast_foot, -1.0),
    ):
        assert foot is not None
        head = by_id(painting)[f"C1/anchorage/S1/{key}/head-1"]
        assert isinstance(head, TriangleItem)
        tip, left, right = head.points
        back = (0.5 * (left[0] + right[0]), 0.5 * (left[1] + right[1]))
        along, away = vector(back, tip), vector(anchorage.at, foot)
        assert sign * (along[0] * away[0] + along[1] * away[1]) > 0.0
    pull = line(painting, "C1/anchorage/S1/anchor/H-arrow")
    assert pull.end[0] > pull.start[0]  # towards the mast, which stands right of it
    lift = line(painting, "C1/anchorage/S1/anchor/uplift-arrow")
    assert lift.end[1] > lift.start[1]


def test_loads_have_arrowheads_pointing_down_the_load_line() -> None:
    painting, _, _ = painted(SAMPLE)
    head = by_id(painting)["C1/load-line/1/head"]
    assert isinstance(head, TriangleItem)
    tip, left, right = head.points
    assert tip == painting.diagrams[0].load_line[1]
    assert left[1] == right[1] > tip[1]


def test_layout_and_solution_must_have_the_same_cables() -> None:
    layout, solution = layout_of(SAMPLE)
    with pytest.raises(ValueError, match="no cable"):
        paint(
            replace(layout, cables=()),
            replace(solution, cables=()),
            obstacles=obstacles_of(layout),
            settings=Settings(),
            plot_scale=None,
            held_places={},
        )
