"""Many equal loads against published parabolas: load uniform on the horizontal projection.

The points of the polygon lie on the parabola (PRP-8), so sags and pulls agree exactly; its end
tension falls short by the half panel load that goes straight to the support, its length by
1/n^2. Status as in checks: TEXT, PART, MEM (recalled only, no verification), OWN.

PB-1 Hibbeler, Structural Analysis, example 5.2 (MEM); PB-3, PB-4 Tayal, examples 10.4, 10.5
(TEXT); PB-5 Beer and Johnston, sample problem 7.9 (MEM); PB-6 the same, problem 7.107 (PART);
PB-7 the same, Golden Gate side span (PART); PB-8 Karnovsky and Lebed, problems 5.3, 5.4 (TEXT);
PB-9, PB-11, PB-12 McLean and Nelson, examples 7-7, 7-10, 7-11 (TEXT; the transcription of PB-9
has integer-division errors, so its own recomputation counts); PB-13 Udoeyo, chapter 6 (MEM).
"""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

import numpy as np
import pytest

from dxfcable.model import RuleKind
from dxfcable.statics.forming import form

if TYPE_CHECKING:
    from dxfcable.statics.funicular import Funicular

G = 9.81  # as the SI rows use it
PANELS = 4000


def uniform(
    intensity: float,
    span: float,
    kind: RuleKind,
    value: float,
    *,
    rise: float = 0.0,
    panels: int = PANELS,
    point: tuple[float, float] | None = None,
) -> Funicular:
    """Put the load of each panel at its ends; the halves at the supports go straight there."""
    x = np.linspace(0.0, span, panels + 1)
    loads = np.full(panels - 1, intensity * span / panels)
    return form(x, loads, 0.0, rise, kind, value, point=point)


def end_tension(cable: Funicular, intensity: float) -> float:
    """Tension of the parabola at its steeper end: the end segment's, with half a panel more."""
    half_panel = 0.5 * intensity * cable.span / (cable.x.size - 1)
    return math.hypot(cable.horizontal, float(np.max(np.abs(cable.verticals))) + half_panel)


@pytest.mark.parametrize(
    ("panels", "tension", "length"), [(10, 672.681, 114.661403), (100, 703.580, 114.778179)]
)
def test_prp_8_tension_and_length_rise_to_the_parabolas(
    panels: int, tension: float, length: float
) -> None:
    cable = uniform(10.0, 100.0, RuleKind.PULL, 500.0, panels=panels)
    assert cable.max_tension == pytest.approx(tension, abs=5e-4)
    assert cable.length == pytest.approx(length, abs=5e-7)
    assert end_tension(cable, 10.0) == pytest.approx(707.107, abs=5e-4)
    assert cable.length < 114.779357


@pytest.mark.parametrize("panels", [2, 10, 101])
def test_prp_8_the_points_lie_on_the_parabola(panels: int) -> None:
    cable = uniform(10.0, 100.0, RuleKind.PULL, 500.0, panels=panels)
    parabola = -10.0 * cable.x * (100.0 - cable.x) / (2.0 * 500.0)
    np.testing.assert_allclose(cable.y, parabola, atol=1e-12 * 25.0, rtol=1e-12)


def test_prp_8_the_length_closes_in_with_the_square_of_the_panels() -> None:
    limit = 114.779357
    errors = [
        limit - uniform(10.0, 100.0, RuleKind.PULL, 500.0, panels=n).length for n in (10, 20, 40)
    ]
    assert errors[0] / errors[1] == pytest.approx(4.0, rel=0.02)
    assert errors[1] / errors[2] == pytest.approx(4.0, rel=0.02)


def test_pb_1_uneven_supports_are_formed_by_their_low_point() -> None:
    cable = uniform(850.0, 100.0, RuleKind.LOW_POINT, -20.0, rise=20.0)
    assert cable.low_point[0] == pytest.approx(41.42, abs=0.5 * 100 / PANELS + 0.005)
    assert cable.horizontal == pytest.approx(36_459.2, abs=0.05)
    assert np.min(cable.tensions) / 1e3 == pytest.approx(36.5, abs=0.05)
    left = math.hypot(cable.horizontal, cable.verticals[0] - 0.5 * 850 * 100 / PANELS)
    assert left == pytest.approx(50_684.22, abs=0.05)
    assert end_tension(cable, 850.0) == pytest.approx(61_713.08, abs=0.05)


def test_pb_3_a_rope_over_a_pulley_has_the_printed_angle_and_length() -> None:
    intensity = 0.5 * G
    cable = uniform(intensity, 30.0, RuleKind.SAG, 0.5)
    assert end_tension(cable, intensity) == pytest.approx(1106.0748, abs=5e-5)
    slope = math.degrees(math.atan(0.5 * intensity * 30.0 / cable.horizontal))
    assert slope == pytest.approx(3.814075, abs=5e-7)
    assert cable.length == pytest.approx(30.022207, abs=5e-7)


@pytest.mark.parametrize(
    ("intensity", "span", "tension", "sag"),
    [
        pytest.param(3.0, 30.0, 400.0, 0.849141, id="PB-4-TEXT"),
        pytest.param(2000.0, 20.0, 140_000.0, 0.721688, id="PB-11-TEXT"),
        pytest.param(10 / 16, 80.0, 500.0, 1.001252, id="PB-12-TEXT"),
    ],
)
def test_rows_governed_by_their_largest_tension_have_the_recomputed_sag(
    intensity: float, span: float, tension: float, sag: float
) -> None:
    # The rule bites at the end segment, half a panel's load short of the parabola's end.
    errors = [
        uniform(intensity, span, RuleKind.MAX_TENSION, tension, panels=n).sag / sag - 1.0
        for n in (PANELS // 2, PANELS)
    ]
    assert abs(errors[1]) < 1.0 / PANELS
    # Extrapolated to no panel width the printed digits are met.
    assert sag * (1.0 + 2.0 * errors[1] - errors[0]) == pytest.approx(sag, abs=1e-6)


@pytest.mark.parametrize(
    ("intensity", "span", "sag", "pull", "tension", "length", "digits"),
    [
        pytest.param(0.75 * G, 40, 0.5, 2943.0, 2946.676, 40.016660, 5e-4, id="PB-5-MEM"),
        pytest.param(0.6 * G, 60, 1.5, None, 1774.607, 60.09985, 5e-4, id="PB-6-PART"),
        pytest.param(2.0, 36, 6, 54.0, 64.8999, None, 5e-5, id="PB-8-TEXT"),
        pytest.param(800.0, 600, 40, 900_000.0, 931_450.48, 607.0371, 5e-3, id="PB-9-TEXT-input"),
        pytest.param(240.0, 20, 4, 3000.0, 3841.8745, 21.9646, 5e-5, id="PB-13-MEM"),
    ],
)
def test_rows_governed_by_their_sag_have_the_recomputed_pull_tension_and_length(
    intensity: float,
    span: float,
    sag: float,
    pull: float | None,
    tension: float,
    length: float | None,
    digits: float,
) -> None:
    cable = uniform(intensity, span, RuleKind.SAG, sag)
    if pull is not None:
        assert cable.horizontal == pytest.approx(pull, rel=1e-9)
    assert end_tension(cable, intensity) == pytest.approx(tension, abs=digits)
    if length is not None:
        assert cable.length == pytest.approx(length, abs=5e-5)


def test_pb_8_by_its_pull_has_the_printed_sag() -> None:
    cable = uniform(2.0, 36.0, RuleKind.PULL, 108.0)
    assert cable.sag == pytest.approx(3.0, rel=1e-9)
    assert end_tension(cable, 2.0) == pytest.approx(113.8420, abs=5e-5)


def test_pb_7_an_inclined_side_span_has_the_recomputed_pull_and_end_tension() -> None:
    cable = uniform(10.2, 1100.0, RuleKind.SAG, 30.0, rise=496.0)
    assert cable.horizontal == pytest.approx(51_425.0, rel=1e-9)
    assert end_tension(cable, 10.2) == pytest.approx(58_939.42, abs=5e-3)
    slope = math.degrees(math.acos(cable.horizontal / end_tension(cable, 10.2)))
    assert slope == pytest.approx(29.2488, abs=5e-5)
