"""The same cables solved again from nothing but nodal equilibrium, with scipy.

The ordinates of a given pull solve one banded linear system, no simple beam in it; the pull of
a rule is then searched by bisection between bounds, no closed form in it.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np
import pytest
from scipy.linalg import solve_banded
from scipy.optimize import brentq

from dxfcable.errors import RuleError
from dxfcable.model import RuleKind
from dxfcable.statics.forming import form

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

CABLES = {
    "level": ([0.0, 3.0, 8.0, 12.5, 20.0, 26.0, 30.0], [4.0, 10.0, 6.0, 12.0, 5.0], 0.0, 0.0),
    "rising": ([0.0, 3.0, 8.0, 12.5, 20.0, 26.0, 30.0], [4.0, 10.0, 6.0, 12.0, 5.0], 0.0, 3.0),
    "falling-steeply": ([5.0, 9.0, 11.0, 20.0, 35.0], [3.0, 0.0, 14.0], 40.0, 18.0),
    "with-uplift": ([0.0, 6.0, 11.0, 19.0, 25.0], [10.0, -3.0, 7.0], 2.0, 1.0),
    "single": ([0.0, 11.0, 16.0], [9.0], 4.0, 4.5),
}


def shape(name: str, pull: float) -> Floats:
    """Ordinates at which both pulls on each load point balance its load: one linear system."""
    x, loads, left, right = CABLES[name]
    stiffness = pull / np.diff(x)
    bands = np.zeros((3, len(loads)))
    bands[0, 1:] = stiffness[1:-1]
    bands[1] = -(stiffness[:-1] + stiffness[1:])
    bands[2, :-1] = stiffness[1:-1]
    forces = np.array(loads)
    forces[0] -= stiffness[0] * left
    forces[-1] -= stiffness[-1] * right
    inner = np.asarray(solve_banded((1, 1), bands, forces), dtype=np.float64)
    return np.concatenate([[left], inner, [right]])


def steps(name: str, pull: float) -> tuple[Floats, Floats]:
    """Lengths and tensions of the segments of that shape."""
    across = np.diff(CABLES[name][0])
    lengths = np.hypot(across, np.diff(shape(name, pull)))
    return lengths, pull * lengths / across


def drop(name: str, pull: float) -> float:
    x, _, left, right = CABLES[name]
    return float(np.max(np.interp(x, [x[0], x[-1]], [left, right]) - shape(name, pull)))


EA = 4000.0
MEASURES: dict[RuleKind, Callable[[str, float], float]] = {
    RuleKind.SAG: drop,
    RuleKind.MAX_TENSION: lambda name, pull: float(np.max(steps(name, pull)[1])),
    RuleKind.LENGTH: lambda name, pull: float(np.sum(steps(name, pull)[0])),
    RuleKind.CUT_LENGTH: lambda name, pull: float(
        np.sum(steps(name, pull)[0] / (1.0 + steps(name, pull)[1] / EA))
    ),
    RuleKind.LOW_POINT: lambda name, pull: float(np.min(shape(name, pull))),
}


@pytest.mark.parametrize("kind", MEASURES, ids=lambda kind: str(kind))
@pytest.mark.parametrize("name", CABLES)
def test_the_pull_of_each_rule_is_the_one_found_by_iteration(name: str, kind: RuleKind) -> None:
    x, loads, left, right = CABLES[name]
    measure = MEASURES[kind]
    pull = 30.0 if kind is not RuleKind.LOW_POINT else 8.0
    value = measure(name, pull * 1.07)
    if kind is RuleKind.LOW_POINT and value >= min(left, right):
        pull = 1.5  # a steep chord: the cable must hang deep to pass under its lower support
        value = measure(name, pull * 1.07)
    found = brentq(lambda h: measure(name, h) - value, pull, 1.3 * pull, xtol=1e-13, rtol=1e-14)
    cable = form(x, loads, left, right, kind, value, ea=EA)
    assert cable.horizontal == pytest.approx(found, rel=1e-9)
    np.testing.assert_allclose(cable.y, shape(name, found), atol=1e-9 * (x[-1] - x[0]))
    np.testing.assert_allclose(cable.tensions, steps(name, found)[1], rtol=1e-9)


@pytest.mark.parametrize("name", CABLES)
def test_a_point_of_the_iterated_shape_gives_its_pull_back(name: str) -> None:
    x, loads, left, right = CABLES[name]
    ordinates = shape(name, 21.0)
    at = 0.5 * (x[0] + x[1])
    point = (at, float(np.interp(at, x, ordinates)))
    cable = form(x, loads, left, right, RuleKind.THROUGH, point=point)
    assert cable.horizontal == pytest.approx(21.0, rel=1e-9)


def test_the_least_of_the_largest_tensions_is_the_one_found_by_a_scan() -> None:
    """Over a fine scan of pulls no shape has a smaller largest tension than the one named."""
    for name, (x, loads, left, right) in CABLES.items():
        with pytest.raises(RuleError) as refusal:
            form(x, loads, left, right, RuleKind.MAX_TENSION, 0.1)
        least = refusal.value.least
        assert least is not None
        scan = [float(np.max(steps(name, h)[1])) for h in np.geomspace(1e-3, 60.0, 300)]
        assert min(scan) >= least * (1.0 - 1e-9)
        assert min(scan) <= least * (1.0 + 2e-3)
