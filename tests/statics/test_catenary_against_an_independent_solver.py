"""The same cables from the textbook equations, put into scipy's root finder one by one."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np
import pytest
from scipy.integrate import quad
from scipy.optimize import brentq, root

from dxfcable.model import RuleKind
from dxfcable.statics.catenary import respond
from dxfcable.statics.catenary_forming import form_catenary

if TYPE_CHECKING:
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]


@dataclass(frozen=True)
class Given:
    """A random cable between supports."""

    lengths: Floats
    weight: float
    loads: Floats
    up: float
    ea: float
    thermal: float


def random_cable(seed: int) -> Given:
    """Weight from a hundredth of the loads to 30 times, sag over span from 1/50 to 1."""
    generator = np.random.default_rng(seed)
    count = int(generator.integers(1, 13))
    loads = generator.uniform(0.0, 10.0, count - 1)
    if seed % 4 == 0:
        loads *= generator.choice([-0.3, 1.0], count - 1)
    parts = generator.uniform(0.2, 1.0, count)
    up = float(generator.uniform(-1.0, 1.0)) * 100.0
    ratio = 10.0 ** generator.uniform(math.log10(1 / 50), 0.0)
    long = math.hypot(100.0, up) * (1.0 + (8 / 3 * ratio**2 if ratio < 0.3 else 2 * ratio - 0.36))
    force = float(np.sum(np.abs(loads))) or 5.0
    weight = force * 10.0 ** generator.uniform(-2.0, 1.5) / long
    return Given(
        lengths=long * parts / parts.sum(),
        weight=weight,
        loads=loads,
        up=up,
        ea=(force + weight * long) * 10.0 ** generator.uniform(1.5, 4.0),
        thermal=float(generator.uniform(0.999, 1.001)),
    )


def spans(cable: Given, pull: float, vertical: float) -> tuple[float, float]:
    """Projections of the chain as the textbooks write them, differences of asinh and all."""
    left = vertical + np.concatenate(
        [[0.0], np.cumsum(cable.weight * cable.lengths[:-1] + cable.loads)]
    )
    right = left + cable.weight * cable.lengths
    turn = np.arcsinh(right / pull) - np.arcsinh(left / pull)
    across = pull * (cable.thermal * turn / cable.weight + cable.lengths / cable.ea)
    up = cable.thermal * (np.hypot(pull, right) - np.hypot(pull, left)) / cable.weight
    up = up + (right**2 - left**2) / (2.0 * cable.weight * cable.ea)
    return float(np.sum(across)), float(np.sum(up))


def by_scipy(cable: Given) -> tuple[float, float]:
    """Pull and vertical force: bisection in bisection for a start, then the root finder."""
    size = float(np.sum(np.abs(cable.loads))) + cable.weight * float(np.sum(cable.lengths))

    def vertical(exponent: float) -> float:
        pull = size * math.exp(exponent)
        reach = 4.0 * (size + pull)
        return float(
            brentq(lambda v: spans(cable, pull, v)[1] - cable.up, -reach, reach, xtol=1e-4 * size)
        )

    def gap(exponent: float) -> float:
        return spans(cable, size * math.exp(exponent), vertical(exponent))[0] - 100.0

    def gaps(unknowns: Floats) -> list[float]:
        across, up = spans(cable, size * math.exp(unknowns[0]), size * float(unknowns[1]))
        return [(across - 100.0) / 100.0, (up - cable.up) / 100.0]

    start = float(brentq(gap, -12.0, 6.0, xtol=1e-3))
    found = root(gaps, [start, vertical(start) / size], tol=1e-14)
    assert np.max(np.abs(gaps(found.x))) < 1e-11
    return size * math.exp(found.x[0]), size * float(found.x[1])


@pytest.mark.parametrize("seed", range(60))
def test_random_cables_agree_with_scipy(seed: int) -> None:
    cable = random_cable(seed)
    pull, vertical = by_scipy(cable)
    found = respond(
        cable.lengths, cable.weight, cable.loads, [(0, 0), (100, cable.up)],
        ea=cable.ea, alpha=1.0, delta_t=cable.thermal - 1.0,
    )  # fmt: skip
    force = float(found.max_tensions[0])
    assert found.horizontals[0] == pytest.approx(pull, rel=1e-9)
    assert found.verticals_left[0, 0] == pytest.approx(vertical, abs=1e-9 * force)


def by_shooting(
    x: Floats, loads: Floats, rise: float, pull: float, weight: float, ea: float
) -> tuple[Floats, Floats]:
    """Unstressed lengths and node ordinates for a pull: quadrature of dy = V/H dx, shot.

    The unknown slope at the left support is found by bisection, each piece's unstressed length
    by a root finder on its integral over the material.
    """

    def shoot(vertical: float) -> tuple[list[float], list[float]]:
        lengths, ordinates = [], [0.0]
        for k, width in enumerate(np.diff(x)):

            def across(s: float, start: float = vertical) -> float:
                return quad(
                    lambda u: pull * (1.0 / math.hypot(pull, start + weight * u) + 1.0 / ea),
                    0.0, s, epsabs=0.0, epsrel=1e-12,
                )[0]  # fmt: skip

            size = float(brentq(lambda s, w=width: across(s) - w, 1e-9, 50.0 * width, xtol=1e-14))
            rise_of_piece = quad(
                lambda u, start=vertical: (start + weight * u)
                * (1.0 / math.hypot(pull, start + weight * u) + 1.0 / ea),
                0.0, size, epsabs=1e-13, epsrel=1e-12,
            )[0]  # fmt: skip
            lengths.append(size)
            ordinates.append(ordinates[-1] + rise_of_piece)
            vertical += weight * size + (float(loads[k]) if k < loads.size else 0.0)
        return lengths, ordinates

    total = float(np.sum(loads)) + weight * 3.0 * float(x[-1])
    reach = 2.0 * total + 2.0 * pull * abs(rise) / float(x[-1])
    first = float(brentq(lambda v: shoot(v)[1][-1] - rise, -reach, reach, xtol=1e-12))
    lengths, ordinates = shoot(first)
    return np.array(lengths), np.array(ordinates)


@pytest.mark.parametrize(
    ("rise", "pull", "weight"), [(0.0, 20.0, 0.4), (4.0, 9.0, 2.0), (-6.0, 60.0, 0.05)]
)
def test_forming_agrees_with_quadrature_and_shooting(
    rise: float, pull: float, weight: float
) -> None:
    x, loads = np.array([0.0, 4.0, 7.0, 15.0]), np.array([3.0, 8.0])
    lengths, ordinates = by_shooting(x, loads, rise, pull, weight, 700.0)
    found = form_catenary(x, loads, 0, rise, RuleKind.PULL, pull, weight=weight, ea=700.0)
    assert found.unstressed_lengths == pytest.approx(lengths, rel=1e-9)
    assert found.y == pytest.approx(ordinates, abs=1e-9 * 15.0)
