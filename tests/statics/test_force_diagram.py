"""Load line, pole, rays and Bow's letters."""

from __future__ import annotations

import pytest

from dxfcable.statics.force_diagram import (
    bow_letters,
    closure_error,
    force_diagram,
    parallel_error,
)
from dxfcable.statics.funicular import polygon


def test_letters_leave_out_i_and_o_in_every_place() -> None:
    names = bow_letters(24 + 24 * 24 + 3)
    assert len(set(names)) == len(names)
    assert not any("I" in name or "O" in name for name in names)


def test_letters_run_on_in_pairs_after_z() -> None:
    assert bow_letters(27)[7:9] == ("H", "J")
    assert bow_letters(27)[12:14] == ("N", "P")
    assert bow_letters(27)[22:] == ("Y", "Z", "AA", "AB", "AC")
    assert bow_letters(2, start=24 + 23) == ("AZ", "BA")
    assert bow_letters(2, start=24 + 24 * 24 - 1) == ("ZZ", "AAA")


def test_letters_run_on_through_the_spans() -> None:
    assert bow_letters(3) + bow_letters(4, start=3) == bow_letters(7)
    assert bow_letters(0, start=5) == ()


@pytest.mark.parametrize(("count", "start"), [(-1, 0), (1, -1)])
def test_negative_counts_of_letters_are_refused(count: int, start: int) -> None:
    with pytest.raises(ValueError, match="negative"):
        bow_letters(count, start)


def test_the_pole_of_a_hanging_cable_is_right_of_a_load_line_that_runs_down() -> None:
    diagram = force_diagram(polygon([0, 8, 16, 24], [15, 21], 12, 13, 152 / 2.4))
    assert diagram.load_line == (0.0, -15.0, -36.0)
    assert diagram.pole == pytest.approx((63.333, -14.361), abs=5e-4)
    assert diagram.closing == pytest.approx(-17.0, rel=1e-12)


def test_a_zero_load_keeps_its_letter() -> None:
    diagram = force_diagram(polygon([0, 1, 2, 3], [0, 6], 0, 0, 10), start=2)
    assert diagram.letters == ("C", "D", "E")
    assert diagram.load_line == (0.0, 0.0, -6.0)


def test_an_unloaded_span_has_one_ray_and_one_letter() -> None:
    diagram = force_diagram(polygon([0, 4], [], 0, 3, 8))
    assert (diagram.letters, diagram.load_line) == (("A",), (0.0,))
    assert diagram.pole == (8.0, 6.0)
    assert diagram.closing == 0.0


def test_uplift_runs_up_the_load_line() -> None:
    diagram = force_diagram(polygon([0, 1, 2, 3], [9, -4], 0, 0, 10))
    assert diagram.load_line == (0.0, -9.0, -5.0)


def test_an_open_polygon_and_a_turned_ray_are_measured() -> None:
    cable = polygon([0, 8, 16, 24], [15, 21], 12, 13, 60)
    diagram = force_diagram(cable)
    pull, up = cable.reaction_right
    assert closure_error(diagram, cable.reaction_left, (pull + 3, up + 4)) == pytest.approx(5)
    lifted = cable.y.copy()
    lifted[1] += 0.8
    assert parallel_error(diagram, cable.x, lifted) == pytest.approx(60 * 0.8 / 8, rel=1e-9)


def test_points_that_do_not_match_the_rays_are_refused() -> None:
    diagram = force_diagram(polygon([0, 4, 9], [5], 0, 3, 8))
    with pytest.raises(ValueError, match="3 points, not 2 and 2"):
        parallel_error(diagram, [0, 4], [0, 1])
