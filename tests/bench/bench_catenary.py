"""How fast the cut cable is solved: against scipy state by state, by size, by combinations.

Run by hand: `python tests/bench/bench_catenary.py`. It prints ratios and asserts nothing, since
times belong to the machine. Every time is the least of some runs after one that is not counted.
"""

from __future__ import annotations

import math
import sys
import time
from pathlib import Path
from typing import TYPE_CHECKING

import numpy as np
from scipy.optimize import root

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

from dxfcable.model import RuleKind
from dxfcable.statics.catenary import respond
from dxfcable.statics.catenary_forming import form_catenary

if TYPE_CHECKING:
    from collections.abc import Callable

    from numpy.typing import NDArray

    from dxfcable.statics.catenary_shape import Catenary

    Floats = NDArray[np.float64]

EA, WEIGHT, SPAN, RISE = 32_400.0, 0.15, 120.0, 4.0
ENDS = [(0.0, 0.0), (SPAN, RISE)]


def least_time(work: Callable[[], object], runs: int) -> float:
    """Return the least wall time of some runs [s], after one to warm up."""
    work()
    times = []
    for _ in range(runs):
        start = time.perf_counter()
        work()
        times.append(time.perf_counter() - start)
    return min(times)


def cable(points: int) -> tuple[Catenary, Floats]:
    """Form a cable under dead loads of 90 in all."""
    x = np.linspace(0.0, SPAN, points + 2)
    dead = np.full(points, 90.0 / points)
    formed = form_catenary(x, dead, 0, RISE, RuleKind.SAG, 12.0, weight=WEIGHT, ea=EA)
    return formed, dead


def by_scipy(lengths: Floats, loads: Floats, start: Floats) -> Floats:
    """Solve one state: the textbook equations in pull and left vertical force, scipy's root."""

    def gaps(unknowns: Floats) -> Floats:
        pull, vertical = unknowns
        forces = np.concatenate([[0.0], np.cumsum(WEIGHT * lengths[:-1] + loads)])
        left = vertical + forces
        right = left + WEIGHT * lengths
        turn = np.arcsinh(right / pull) - np.arcsinh(left / pull)
        across = pull * (turn / WEIGHT + lengths / EA)
        rise = np.hypot(pull, right) - np.hypot(pull, left)
        up = rise / WEIGHT + (right**2 - left**2) / (2.0 * WEIGHT * EA)
        return np.array([np.sum(across) - SPAN, np.sum(up) - RISE])

    found = root(gaps, start, tol=1e-12)
    if not np.max(np.abs(found.fun)) < 1e-8:
        message = f"scipy did not converge: {found.message}"
        raise RuntimeError(message)
    return np.asarray(found.x, dtype=np.float64)


def states_against_scipy(count: int, points: int) -> None:
    """Print how many times faster all states at once are."""
    formed, dead = cable(points)
    generator = np.random.default_rng(0)
    loads = dead * generator.uniform(0.5, 3.0, (count, points))
    lengths = formed.unstressed_lengths
    start = np.array([formed.horizontal, formed.verticals_left[0]])
    found = respond(lengths, WEIGHT, loads, ENDS, ea=EA)
    some = loads[::5]
    rounds = []
    for _ in range(7):  # in turn, so that both meet the same machine
        ours = least_time(lambda: respond(lengths, WEIGHT, loads, ENDS, ea=EA), 3)
        start_time = time.perf_counter()
        for row in some:
            by_scipy(lengths, row, start)
        theirs = (time.perf_counter() - start_time) * count / len(some)
        rounds.append((theirs / ours, ours, theirs))
    ratio, ours, theirs = sorted(rounds)[len(rounds) // 2]
    apart = max(
        abs(by_scipy(lengths, row, start)[0] / pull - 1.0)
        for row, pull in zip(loads[::50], found.horizontals[::50], strict=True)
    )
    print(
        f"{count:,} states of {points} points: ours {ours * 1e3:.1f} ms, scipy from the formed "
        f"shape {theirs:.2f} s: 1/{ratio:.0f} (target 1/50, median of {len(rounds)}); "
        f"pulls differ by {apart:.0e}; "
        f"steps {int(np.min(found.iterations))} to {int(np.max(found.iterations))}, "
        f"residual/span {float(np.max(found.residuals)) / SPAN:.0e}"
    )


def growth(sizes: tuple[int, ...]) -> None:
    """Print the exponent of time over points of one span."""
    times = []
    for points in sizes:
        generator = np.random.default_rng(points)
        lengths = np.full(points + 1, 123.0 / (points + 1))
        loads = generator.uniform(0.5, 1.5, points) * 90.0 / points

        def work(lengths: Floats = lengths, loads: Floats = loads) -> object:
            return respond(lengths, WEIGHT, loads, ENDS, ea=EA)

        times.append(least_time(work, 5 if points < 500_000 else 3))
        print(f"one span of {points:>9,} points: {times[-1] * 1e3:9.2f} ms")
    slope = np.polyfit(np.log(sizes), np.log(times), 1)[0]
    last = math.log(times[-1] / times[-2]) / math.log(sizes[-1] / sizes[-2])
    print(f"growth exponent: {slope:.2f} over all, {last:.2f} over the last step (at most 1.1)")


def combinations(count: int, points: int) -> None:
    """Print what many combinations cost more than one."""
    formed, dead = cable(points)
    lengths = formed.unstressed_lengths
    generator = np.random.default_rng(1)
    loads = dead * generator.uniform(0.5, 3.0, (count, points))
    factors = generator.uniform(0.9, 1.4, count)

    def work(states: int) -> Callable[[], object]:
        return lambda: respond(
            lengths, WEIGHT, loads[:states], ENDS, ea=EA, weight_factors=factors[:states]
        )

    one, many = least_time(work(1), 5), least_time(work(count), 5)
    print(
        f"{count} combinations on {points} points: {many * 1e3:.1f} ms, one {one * 1e3:.1f} ms: "
        f"{many - one:.3f} s more (at most 0.2)"
    )


def forming(points: int) -> None:
    """Print what forming by each rule costs."""
    formed, dead = cable(points)
    values = {
        RuleKind.SAG: 12.0,
        RuleKind.MAX_TENSION: formed.max_tension,
        RuleKind.LENGTH: formed.length,
        RuleKind.CUT_LENGTH: formed.unstressed_length,
        RuleKind.PULL: formed.horizontal,
    }
    for kind, value in values.items():

        def work(kind: RuleKind = kind, value: float = value) -> object:
            return form_catenary(formed.x, dead, 0, RISE, kind, value, weight=WEIGHT, ea=EA)

        print(f"forming {points} points by {kind}: {least_time(work, 3) * 1e3:.1f} ms")


def main() -> int:
    """Print all ratios."""
    states_against_scipy(1000, 60)
    growth((1_000, 10_000, 100_000, 1_000_000))
    combinations(300, 40)
    forming(60)
    return 0


if __name__ == "__main__":
    sys.exit(main())
