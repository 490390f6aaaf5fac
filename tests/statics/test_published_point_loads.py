"""Weightless cables under point loads, against published examples.

Status of each row: TEXT (input and result were read in a text), PART (one of them), MEM (both
recalled from the publication, not seen: a plausibility check and no verification), OWN (no
publication, computed independently in double precision). Sources by row:

PT-1 Hibbeler, Structural Analysis, example 5.1 (MEM); PT-2 Hibbeler, Statics, cable example
with 4, 15 and 3 kN (PART); PT-3 Beer and Johnston, Statics, sample problem 7.8 (MEM); PT-4 the
same, problem 7.115 (TEXT); PT-6 the same, problem 7.117 (TEXT); PT-8 Tayal, example 10.2 (TEXT);
PT-9 MNNIT Allahabad, AM-1404, tutorial sheet 3 (TEXT; one printed answer wrong); PT-11 statics
worked examples, 6.5, example 1 (TEXT); PT-13, PT-14 Karnovsky and Lebed, sections 5.2, 5.3
(TEXT); PT-15 homework solution page (TEXT); PT-16 school-exam bridge on a physics forum (TEXT,
only the tension of CD); OWN-4 (OWN).

Where a row has an independent recomputation with more digits, that is compared as well.
"""

from __future__ import annotations

import math
from dataclasses import dataclass

import pytest

from dxfcable.model import RuleKind
from dxfcable.statics.forming import form


def half_of_last_place(printed: str) -> float:
    """What a printed number leaves open."""
    decimals = len(printed.partition(".")[2])
    return 0.5 * 10.0**-decimals * (1.0 + 1e-9)


def agree(values: object, printed: str) -> bool:
    """Compare numbers with printed ones, each to half of its last place."""
    numbers = [float(v) for v in values] if hasattr(values, "__iter__") else [float(str(values))]
    texts = printed.split()
    return len(numbers) == len(texts) and all(
        abs(number - float(text)) <= half_of_last_place(text)
        for number, text in zip(numbers, texts, strict=True)
    )


@dataclass(frozen=True)
class Case:
    """One published cable and what was computed for it elsewhere, as printed."""

    name: str
    x: tuple[float, ...]
    loads: tuple[float, ...]
    left: float
    right: float
    kind: RuleKind
    value: float = 0.0
    point: tuple[float, float] | None = None
    horizontal: str = ""
    reactions: str = ""
    ordinates: str = ""
    tensions: str = ""
    length: str = ""


THROUGH, PULL = RuleKind.THROUGH, RuleKind.PULL
OWN4 = ((0, 3, 8, 12.5, 20, 26, 30), (4, 10, 6, 12, 5), 0.0, 3.0)

CASES = (
    Case(
        "PT-1-MEM-published", (0, 2, 4, 5.5), (3, 8), 0, -2, THROUGH, point=(4, -4),
        tensions="6.90 4.82 6.79",
    ),
    Case(
        "PT-1-own", (0, 2, 4, 5.5), (3, 8), 0, -2, THROUGH, point=(4, -4),
        horizontal="4.071429", reactions="5.571429 5.428571", ordinates="-2.7368 -4.0000",
        tensions="6.9005 4.8155 6.7857",
    ),
    Case(
        "PT-2-PART-published", (0, 3, 8, 16, 18), (4, 15, 3), 0, 0, THROUGH, point=(8, -12),
        horizontal="6.33", reactions="12 10", tensions="13.6 10.2 9.44 11.8",
    ),
    Case(
        "PT-2-own", (0, 3, 8, 16, 18), (4, 15, 3), 0, 0, THROUGH, point=(8, -12),
        horizontal="6.333333", ordinates="-5.6842 -12.0000 -3.1579",
        tensions="13.5688 10.2035 9.4399 11.8369",
    ),
    Case(
        "PT-3-MEM-published", (0, 20, 30, 45, 60), (6, 12, 4), 0, 20, THROUGH, point=(30, -5),
        horizontal="18", ordinates="-5.56 -5.00 5.83",
    ),
    Case(
        "PT-3-own", (0, 20, 30, 45, 60), (6, 12, 4), 0, 20, THROUGH, point=(30, -5),
        horizontal="18.000000", ordinates="-5.5556 -5.0000 5.8333",
        tensions="18.6815 18.0278 22.2036 24.7588",
    ),
    Case(
        "PT-4-TEXT-published", (0, 4, 8, 10), (600, 450), 0, 0, RuleKind.MAX_TENSION, 720,
        horizontal="398",
    ),
    Case(
        "PT-4-own", (0, 4, 8, 10), (600, 450), 0, 0, RuleKind.MAX_TENSION, 720,
        horizontal="397.99497", ordinates="-4.5227 -3.0151",
        tensions="600.7495 425.3234 720.0000",
    ),
    Case(
        "PT-6-TEXT", (0, 6, 12, 18, 24, 30), (4, 4, 4, 4), -5, 0, THROUGH, point=(12, -12),
        horizontal="8.0000", reactions="6.6667 9.3333",
        ordinates="-10.00 -12.00 -11.00 -7.00",
    ),
    Case(
        "PT-8-TEXT", (0, 1, 2, 3, 4), (100, 150, 200), 0, -2, PULL, 200,
        reactions="300 150", ordinates="-1.5 -2.5 -2.75",
    ),
    Case(
        "PT-9-TEXT-published-but-for-the-misprint", (0, 10, 20, 30, 40), (20, 10, 12), 0, 0,
        THROUGH, point=(20, -13), horizontal="20", reactions="23 19", length="49.74",
    ),
    Case(
        "PT-9-own", (0, 10, 20, 30, 40), (20, 10, 12), 0, 0, THROUGH, point=(20, -13),
        tensions="30.4795 20.2237 21.1896 27.5862", length="49.7395",
    ),
    Case(
        "PT-11-TEXT-own-digits", (0, 2, 5, 9), (1.4, 2), 0, 0, THROUGH, point=(2, -2.5),
        horizontal="1.582222", ordinates="-2.500000 -3.595506",
    ),
    Case(
        "PT-13-TEXT", (0, 0.4, 1), (1,), 0, 0, RuleKind.LENGTH, 1.2, horizontal="0.7339",
    ),
    Case("PT-13-own", (0, 0.4, 1), (1,), 0, 0, RuleKind.LENGTH, 1.2, horizontal="0.733892"),
    Case(
        "PT-14-TEXT", (0, 0.5, 1), (1,), 0, 0, RuleKind.LENGTH, 1.01, ordinates="-0.071",
    ),
    Case(
        "PT-14-own", (0, 0.5, 1), (1,), 0, 0, RuleKind.LENGTH, 1.01, horizontal="3.526728",
        ordinates="-0.0708872",
    ),
    Case(
        "PT-15-TEXT", (0, 5, 20), (50,), 0, 0, THROUGH, point=(5, -1), horizontal="187.5",
        reactions="37.5 12.5", length="20.1323",
    ),
    Case(
        "PT-15-by-its-sag", (0, 5, 20), (50,), 0, 0, RuleKind.SAG, 1, horizontal="187.5",
    ),
    Case(
        "PT-16-TEXT-CD-else-own", (0, 4, 8, 12, 16, 20), (1, 1, 1, 1), 8, 8, THROUGH,
        point=(8, 2), horizontal="2.0000", ordinates="4.0000 2.0000 2.0000 4.0000",
        tensions="2.8284 2.2361 2.0000 2.2361 2.8284",
    ),
    Case(
        "OWN-4a", *OWN4, PULL, 40, ordinates="-1.1325 -2.52 -2.64375 -1.725 0.81",
        tensions="42.755234 41.511565 40.015122 40.299007 43.423611 45.602741",
        length="31.52716901",
    ),
    Case(
        "OWN-4b", *OWN4, RuleKind.MAX_TENSION, 50, horizontal="44.71590264",
        ordinates="-0.981423 -2.169861 -2.233101 -1.332148 0.998780",
        tensions="47.047873 45.961669 44.720318 45.037384 47.971701 50.000000",
        length="31.25966148",
    ),
    Case(
        "OWN-4d", *OWN4, RuleKind.SAG, 5, horizontal="31.150000",
        ordinates="-1.539486 -3.463242 -3.75 -2.783307 0.301445",
        tensions="35.012037 33.376080 31.213182 31.407686 35.025744 37.575959",
        length="32.37212755",
    ),
    Case(
        "OWN-4e", *OWN4, RuleKind.LENGTH, 32, horizontal="34.30219825",
        ordinates="-1.370447 -3.071472 -3.290525 -2.343745 0.512670",
        tensions="37.711839 36.232921 34.342815 34.574436 37.991011 40.393305",
        length="32.00000000",
    ),
)  # fmt: skip


@pytest.mark.parametrize("case", CASES, ids=lambda case: case.name)
def test_the_cable_agrees_with_the_row(case: Case) -> None:
    cable = form(case.x, case.loads, case.left, case.right, case.kind, case.value, point=case.point)
    if case.horizontal:
        assert agree([cable.horizontal], case.horizontal)
    if case.reactions:
        assert agree([cable.reaction_left[1], cable.reaction_right[1]], case.reactions)
    if case.ordinates:
        assert agree(cable.y[1:-1], case.ordinates)
    if case.tensions:
        assert agree(cable.tensions, case.tensions)
    if case.length:
        assert agree([cable.length], case.length)


def test_the_misprint_of_pt_9_is_not_reproduced() -> None:
    """Trap: 25.08 kN is printed for the first segment; sqrt(20^2 + 23^2) is 30.48."""
    cable = form((0, 10, 20, 30, 40), (20, 10, 12), 0, 0, RuleKind.THROUGH, point=(20, -13))
    assert cable.tensions[0] == pytest.approx(math.hypot(20, 23), rel=1e-12)
    assert not agree([cable.tensions[0]], "25.08")


def test_pt_6_gives_the_beam_moment_of_72_at_the_middle_loads() -> None:
    cable = form((0, 6, 12, 18, 24, 30), (4, 4, 4, 4), -5, 0, RuleKind.THROUGH, point=(12, -12))
    assert cable.moments[2:4] == pytest.approx([72, 72], rel=1e-12)


def test_pt_11_gives_the_printed_reaction_and_depth() -> None:
    cable = form((0, 2, 5, 9), (1.4, 2), 0, 0, RuleKind.THROUGH, point=(2, -2.5))
    assert cable.reaction_left == pytest.approx((1.582, 1.978), abs=half_of_last_place("1.582"))
    assert cable.reaction_left[1] == pytest.approx(1.977778, abs=half_of_last_place("1.977778"))
    assert -cable.y[2] == pytest.approx(3.60, abs=half_of_last_place("3.60"))


def test_pt_13_differs_from_the_taut_approximation_by_the_printed_amount() -> None:
    """H = 0.7746 P by the two-term length is 5.546 % above the exact pull (TEXT: 5.54 %)."""
    exact = form((0, 0.4, 1), (1,), 0, 0, RuleKind.LENGTH, 1.2).horizontal
    approximate = math.sqrt(0.4 * 0.6 / (2 * 0.2))
    assert approximate == pytest.approx(0.774597, abs=5e-7)
    assert 100 * (approximate / exact - 1) == pytest.approx(5.546, abs=5e-4)


def test_pt_1_has_the_printed_angles() -> None:
    cable = form((0, 2, 4, 5.5), (3, 8), 0, -2, RuleKind.THROUGH, point=(4, -4))
    assert agree([-a for a in cable.angles[:2]], "53.8 32.3")


def test_pt_3_has_the_printed_largest_tension_and_angle() -> None:
    cable = form((0, 20, 30, 45, 60), (6, 12, 4), 0, 20, RuleKind.THROUGH, point=(30, -5))
    assert agree([cable.max_tension, cable.angles[-1]], "24.8 43.4")


# Benchmark of footbridge proportions (OWN): level span of 120, nine loads at 12, sag 12 formed
# under 10 each, EA = 1.35 in2 times 24 000 ksi. Its table prints 135.39 for the tension with one
# load at 20 and the pull held; that is one off in the last place: hypot(125, 52) = 135.3846.
BRIDGE_X = tuple(12.0 * i for i in range(11))


def test_the_benchmark_bridge_has_its_own_pull_tension_and_lengths() -> None:
    cable = form(BRIDGE_X, [10.0] * 9, 0, 0, RuleKind.SAG, 12, ea=1.35 * 24_000)
    assert agree([cable.horizontal, cable.max_tension], "125.000 132.853")
    assert agree([cable.length, cable.unstressed_length], "123.0976 122.6121")
    assert agree(cable.y[1:6], "-4.32 -7.68 -10.08 -11.52 -12.00")


@pytest.mark.parametrize(
    ("loads", "pull_at_sag", "tension_at_sag", "tension_at_pull"),
    [
        pytest.param([15.0] * 9, "187.50", "199.28", "142.06", id="all-at-15"),
        pytest.param([10.0] * 2 + [20.0] + [10.0] * 6, "140.00", "149.35", "135.38", id="one-20"),
        pytest.param([15.0] * 4 + [12.5] + [10.0] * 4, "156.25", "167.83", "139.20", id="left"),
    ],
)
def test_the_benchmark_bridge_is_formed_anew_by_sag_or_by_pull(
    loads: list[float], pull_at_sag: str, tension_at_sag: str, tension_at_pull: str
) -> None:
    by_sag = form(BRIDGE_X, loads, 0, 0, RuleKind.SAG, 12)
    assert agree([by_sag.horizontal, by_sag.max_tension], f"{pull_at_sag} {tension_at_sag}")
    by_pull = form(BRIDGE_X, loads, 0, 0, RuleKind.PULL, 125)
    assert agree([by_pull.max_tension], tension_at_pull)
