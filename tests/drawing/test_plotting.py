"""The plotting scale in the contract's order, and usual scales of forces."""

from __future__ import annotations

import math
from dataclasses import replace
from itertools import islice

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing.painting.plotting import Plotting, plan_plotting
from dxfcable.model import Layout
from dxfcable.quantities import QuantityError
from dxfcable.settings import Settings, Show


def plan(
    unit: str = "m",
    *,
    told: str | None = None,
    setting: str = "",
    text_height: float | None = None,
    span: float = 24.0,
) -> Plotting:
    layout = Layout(version="AC1015", length_unit=unit, force_unit="kN", text_height=text_height)
    settings = replace(Settings(), show=Show(plot_scale=setting))
    return plan_plotting(layout, settings, told, span=span, size=(span, 0.15 * span))


def test_the_command_line_wins_over_settings_and_texts() -> None:
    found = plan(told="1:20", setting="1:50", text_height=0.25)
    assert (found.scale, found.text_height) == (20.0, 0.05)
    assert "as given" in found.finding.text


def test_settings_win_over_texts() -> None:
    found = plan(setting="1:50", text_height=0.25)
    assert found.scale == 50.0
    assert "settings" in found.finding.text


def test_the_drafters_texts_give_the_scale_where_they_are_believable() -> None:
    found = plan(text_height=0.25)
    assert (found.scale, found.text_height) == (100.0, 0.25)
    assert "drafter's load texts" in found.finding.text


@pytest.mark.parametrize("height", [24.0 / 1001, 24.0 / 49, 1e-9])
def test_other_texts_are_not_believed(height: float) -> None:
    assert "A1" in plan(text_height=height).finding.text


def test_else_the_usual_scale_that_fits_an_a1_sheet() -> None:
    assert plan().scale == 50.0
    assert plan("mm", span=24_000.0).scale == 50.0
    assert plan("mm", span=24_000.0).text_height == 125.0
    assert plan("ft", span=120.0).scale in (48.0, 64.0, 96.0)


def test_scales_are_named_as_drafters_name_them() -> None:
    assert plan(told="1:100").words == "1:100"
    assert plan("ft", told="96").words == '1/8" = 1\'-0"'
    assert plan("ft", told="240").words == '1" = 20\'-0"'
    assert plan("in", told="77").words == "1:77"


def test_the_text_height_is_the_plotted_height_times_the_scale() -> None:
    # 3/32 in at 1/8 in to the foot is 9 in.
    assert plan("ft", told='1/8"=1\'-0"').text_height == pytest.approx(0.75)
    assert plan("in", told='1/8"=1\'-0"').text_height == pytest.approx(9.0)


def test_a_scale_that_is_none_is_refused() -> None:
    with pytest.raises(QuantityError):
        plan(told="one to many")


@given(st.sampled_from(["m", "mm", "ft", "in", "us-ft"]), st.floats(1e-4, 1e6))
def test_force_scales_are_usual_and_rise(unit: str, least: float) -> None:
    plotting = plan(unit, told="1:100")
    scales = list(islice(plotting.force_scales(least), 6))
    steps = (1, 2, 3, 4, 5, 6) if plotting.paper_unit == "in" else (1, 2, 2.5, 5)
    assert scales[0] >= least * (1 - 1e-5)
    assert scales[0] <= 5 * least
    for scale in scales:
        share = scale / 10.0 ** math.floor(math.log10(scale) + 1e-9)
        assert min(abs(share - step) for step in steps) < 1e-9
    assert scales == sorted(set(scales))


def test_a_scale_round_on_the_drawing_too_goes_first() -> None:
    # At 1:20 a centimetre is 0.2 m: 2.5 kN on it is 12.5 kN/m, 5 kN is 25 kN/m.
    plotting = plan(told="1:20")
    first = next(plotting.force_scales(2.2))
    assert first == 5.0
    assert plotting.force_per_length(first) == pytest.approx(25.0)
