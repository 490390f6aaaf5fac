"""Theorems of the string polygon, over generated cables (PRP-1 to PRP-7 and PRP-15)."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.model import RuleKind
from dxfcable.statics.force_diagram import closure_error, force_diagram, parallel_error
from dxfcable.statics.forming import form
from dxfcable.statics.funicular import Funicular, polygon

IDENTITY = 1e-9  # relative; the laws are exact, rounding stays far below


@dataclass(frozen=True)
class Span:
    """A generated cable: widths of the segments, loads, rise of the right support, sag."""

    widths: tuple[float, ...]
    loads: tuple[float, ...]
    rise: float
    sag: float
    ea: float

    @property
    def x(self) -> list[float]:
        return [0.0, *np.cumsum(self.widths).tolist()]

    def formed(self) -> Funicular:
        return form(self.x, self.loads, 0.0, self.rise, RuleKind.SAG, self.sag, ea=self.ea)

    def mirrored(self) -> Span:
        return Span(self.widths[::-1], self.loads[::-1], -self.rise, self.sag, self.ea)


@st.composite
def spans(draw: st.DrawFn, *, least_load: float = 0.0) -> Span:
    """Draw spans of about 20 to 100 with loads down, some of them zero, and one never zero."""
    count = draw(st.integers(1, 8))
    widths = draw(st.lists(st.floats(0.1, 20.0), min_size=count + 1, max_size=count + 1))
    loads = draw(st.lists(st.floats(least_load, 50.0), min_size=count, max_size=count))
    loads[draw(st.integers(0, count - 1))] = draw(st.floats(1.0, 50.0))
    span = sum(widths)
    rise = draw(st.floats(-0.5, 0.5)) * span
    return Span(
        tuple(widths), tuple(loads), rise, draw(st.floats(0.02, 0.4)) * span,
        draw(st.floats(5e3, 1e6)),
    )  # fmt: skip


def forces_at_nodes(cable: Funicular) -> np.ndarray[tuple[int, ...], np.dtype[np.float64]]:
    """Sum both pulls and the load at each load point, from coordinates and tensions alone."""
    steps = np.column_stack([np.diff(cable.x), np.diff(cable.y)])
    pulls = cable.tensions[:, None] * steps / np.hypot(steps[:, 0], steps[:, 1])[:, None]
    total = pulls[1:] - pulls[:-1]
    total[:, 1] -= cable.loads
    return total


def total_load(cable: Funicular) -> float:
    return float(np.sum(np.abs(cable.loads))) + cable.horizontal


@given(spans(least_load=-20.0).filter(lambda s: sum(s.loads) > 1.0))
def test_every_load_point_is_in_equilibrium(span: Span) -> None:
    cable = polygon(span.x, span.loads, 0.0, span.rise, 100.0)
    assert np.max(np.abs(forces_at_nodes(cable))) <= IDENTITY * total_load(cable)
    assert cable.residual <= IDENTITY * total_load(cable)


@given(spans())
def test_prp_1_pull_times_drop_is_the_simple_beam_moment(span: Span) -> None:
    cable = span.formed()
    chord = span.rise * cable.x / cable.span
    loads, x = np.array(span.loads), cable.x
    left = math.fsum(loads * (x[-1] - x[1:-1])) / x[-1]
    moments = [left * at - math.fsum(loads * np.clip(at - x[1:-1], 0.0, None)) for at in x]
    np.testing.assert_allclose(
        cable.horizontal * (chord - cable.y), moments, atol=IDENTITY * max(moments), rtol=0
    )


@given(spans(), st.floats(-30.0, 30.0))
def test_prp_2_raising_a_support_keeps_pull_and_drops(span: Span, lift: float) -> None:
    cable = span.formed()
    raised = form(span.x, span.loads, 0.0, span.rise + lift, RuleKind.SAG, span.sag)
    assert raised.horizontal == pytest.approx(cable.horizontal, rel=IDENTITY)
    np.testing.assert_allclose(raised.drops, cable.drops, rtol=IDENTITY, atol=1e-12)
    change = raised.reaction_left[1] - cable.reaction_left[1]
    assert change == pytest.approx(
        -cable.horizontal * lift / cable.span, rel=1e-9, abs=IDENTITY * total_load(cable)
    )


@given(spans(), st.floats(0.1, 10.0))
def test_prp_3_loads_and_pull_in_proportion_leave_the_shape(span: Span, factor: float) -> None:
    cable = span.formed()
    more = polygon(
        span.x, [factor * p for p in span.loads], 0.0, span.rise, factor * cable.horizontal
    )
    np.testing.assert_allclose(more.y, cable.y, atol=IDENTITY * span.sag)
    np.testing.assert_allclose(more.tensions, factor * cable.tensions, rtol=IDENTITY)


@given(spans(), st.floats(0.1, 10.0))
def test_prp_3_drops_scale_with_the_inverse_of_the_pull(span: Span, factor: float) -> None:
    cable = span.formed()
    other = polygon(span.x, span.loads, 0.0, span.rise, factor * cable.horizontal)
    np.testing.assert_allclose(other.drops * factor, cable.drops, rtol=IDENTITY)


@given(spans(), st.floats(0.01, 1000.0), st.floats(0.01, 1000.0))
def test_prp_4_scaled_geometry_forces_and_stiffness_give_scaled_results(
    span: Span, length_scale: float, force_scale: float
) -> None:
    cable = span.formed()
    scaled = form(
        length_scale * np.array(span.x),
        force_scale * np.array(span.loads),
        0.0,
        length_scale * span.rise,
        RuleKind.CUT_LENGTH,
        length_scale * cable.unstressed_length,
        ea=force_scale * span.ea,
    )
    assert scaled.horizontal == pytest.approx(force_scale * cable.horizontal, rel=1e-8)
    np.testing.assert_allclose(scaled.y, length_scale * cable.y, atol=1e-8 * scaled.span)


@given(spans())
def test_prp_5_a_mirrored_cable_is_the_mirror_image(span: Span) -> None:
    cable, mirror = span.formed(), span.mirrored().formed()
    assert mirror.horizontal == pytest.approx(cable.horizontal, rel=IDENTITY)
    np.testing.assert_allclose(mirror.y[::-1] + span.rise, cable.y, atol=IDENTITY * cable.span)
    np.testing.assert_allclose(mirror.tensions[::-1], cable.tensions, rtol=IDENTITY)
    np.testing.assert_allclose(
        mirror.verticals[::-1], -cable.verticals, atol=IDENTITY * total_load(cable)
    )


@given(spans())
def test_prp_6_rays_are_parallel_and_the_closing_ray_cuts_off_the_beam_reactions(
    span: Span,
) -> None:
    cable = span.formed()
    diagram = force_diagram(cable)
    size = total_load(cable)
    assert parallel_error(diagram, cable.x, cable.y) <= IDENTITY * size
    assert closure_error(diagram, cable.reaction_left, cable.reaction_right) <= IDENTITY * size
    assert diagram.pole[0] == cable.horizontal
    x, loads = cable.x, np.array(span.loads)
    left = math.fsum(loads * (x[-1] - x[1:-1])) / x[-1]
    assert -diagram.closing == pytest.approx(left, abs=IDENTITY * size)
    rays = np.hypot(diagram.pole[0], diagram.pole[1] - np.array(diagram.load_line))
    np.testing.assert_allclose(rays, cable.tensions, rtol=IDENTITY)


def string_polygon(
    span: Span, pole: tuple[float, float]
) -> np.ndarray[tuple[int, ...], np.dtype[np.float64]]:
    """Draw a string polygon from the left support by parallels to the rays of any pole."""
    load_line = -np.cumsum([0.0, *span.loads])
    slopes = (pole[1] - load_line) / pole[0]
    return np.concatenate([[0.0], np.cumsum(slopes * np.array(span.widths))])


@given(spans(), st.floats(-50.0, 50.0))
def test_prp_7_a_pole_moved_along_the_closing_line_keeps_the_drops(span: Span, by: float) -> None:
    cable = span.formed()
    pole = force_diagram(cable).pole
    moved = string_polygon(span, (pole[0], pole[1] + by))
    chord = moved[-1] * cable.x / cable.span
    np.testing.assert_allclose(chord - moved, cable.drops, atol=IDENTITY * (cable.span + abs(by)))


@given(spans(), st.floats(1.2, 3.0), st.floats(-20.0, 20.0))
def test_prp_7_the_strings_of_two_poles_meet_on_a_parallel_to_the_pole_line(
    span: Span, farther: float, by: float
) -> None:
    cable = span.formed()
    one = force_diagram(cable).pole
    two = (one[0] * farther, one[1] + by)
    heights = string_polygon(span, one), string_polygon(span, two)
    # Lines of the k-th segments of both, met: both polygons start at the left support, so the
    # parallel to the pole line through it is the locus.
    slopes = [np.diff(h) / np.array(span.widths) for h in heights]
    x = np.array(span.x)
    apart = slopes[0] - slopes[1]
    locus = (two[1] - one[1]) / (two[0] - one[0])
    usable = np.abs(apart) > 1e-3
    at = x[:-1][usable] - (heights[0][:-1] - heights[1][:-1])[usable] / apart[usable]
    meet = heights[0][:-1][usable] + slopes[0][usable] * (at - x[:-1][usable])
    scale = np.max(np.abs(at), initial=cable.span) * (1.0 + np.max(np.abs(slopes[0])))
    np.testing.assert_allclose(meet, locus * at, atol=1e-8 * float(scale))


@given(spans())
def test_prp_15_the_whole_cable_is_in_equilibrium(span: Span) -> None:
    cable = span.formed()
    (pull_left, up_left), (pull_right, up_right) = cable.reaction_left, cable.reaction_right
    size = total_load(cable)
    assert pull_left == pull_right
    assert up_left + up_right == pytest.approx(math.fsum(span.loads), abs=IDENTITY * size)
    moment = (
        up_right * cable.span
        - pull_right * span.rise
        - math.fsum(np.array(span.loads) * cable.x[1:-1])
    )
    assert abs(moment) <= IDENTITY * size * cable.span


@given(spans())
@settings(max_examples=60)
def test_each_rule_leads_back_to_the_cable_it_was_taken_from(span: Span) -> None:
    cable = span.formed()
    stations, loads = span.x, span.loads
    low = cable.low_point[1] < min(0.0, span.rise) - 1e-3 * cable.span
    point = (float(cable.x[1]), float(cable.y[1]))
    rules: list[tuple[RuleKind, float, tuple[float, float] | None]] = [
        (RuleKind.SAG, cable.sag, None),
        (RuleKind.PULL, cable.horizontal, None),
        (RuleKind.LENGTH, cable.length, None),
        (RuleKind.CUT_LENGTH, cable.unstressed_length, None),
    ]
    if cable.drops[1] > 1e-3 * span.sag:
        rules.append((RuleKind.THROUGH, 0.0, point))
    if low:
        rules.append((RuleKind.LOW_POINT, cable.low_point[1], None))
    for kind, value, through in rules:
        again = form(stations, loads, 0.0, span.rise, kind, value, point=through, ea=span.ea)
        assert again.horizontal == pytest.approx(cable.horizontal, rel=1e-8), kind


@given(spans())
def test_of_two_shapes_with_one_largest_tension_the_one_that_pulls_more_is_formed(
    span: Span,
) -> None:
    cable = span.formed()
    again = form(span.x, span.loads, 0.0, span.rise, RuleKind.MAX_TENSION, cable.max_tension)
    assert again.max_tension == pytest.approx(cable.max_tension, rel=1e-9)
    # Where tension and pull fall together a rounding of the tension moves the pull by its root.
    assert again.horizontal >= cable.horizontal * (1.0 - 1e-6)


@given(spans(), st.floats(1.0 + 1e-9, 5.0))
def test_a_longer_cable_always_pulls_less(span: Span, factor: float) -> None:
    chord = math.hypot(sum(span.widths), span.rise)
    shorter = form(span.x, span.loads, 0.0, span.rise, RuleKind.LENGTH, factor * chord)
    longer = form(span.x, span.loads, 0.0, span.rise, RuleKind.LENGTH, factor * chord * 1.01)
    assert shorter.length == pytest.approx(factor * chord, rel=1e-14)
    assert longer.horizontal < shorter.horizontal
