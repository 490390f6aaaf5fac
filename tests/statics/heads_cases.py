"""Cables over masts and stays, formed in equilibrium, for the tests of heads that give."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.statics.catenary import respond
from dxfcable.statics.heads import HeadsResponse, respond_with_heads
from dxfcable.statics.heads_layout import CableChain, Head, StayMember, Vector, unstressed_from

if TYPE_CHECKING:
    from numpy.typing import NDArray

    Floats = NDArray[np.float64]

BENCHMARK_EA = 32400.0  # 1.35 in2 of 24 000 ksi


@dataclass(frozen=True, kw_only=True)
class Formed:
    """What stands in equilibrium under the loads it was formed with."""

    cables: tuple[CableChain, ...]
    supports: tuple[Vector, ...]
    heads: tuple[Head, ...]
    head_loads: tuple[float, ...]

    def under(
        self, loads: list[Floats] | None = None, head_loads: Floats | None = None
    ) -> HeadsResponse:
        """Solve with other loads on each cable and each head."""
        cables = self.cables
        if loads is not None:
            cables = tuple(replace(c, loads=f) for c, f in zip(cables, loads, strict=True))
        forces = self.head_loads if head_loads is None else head_loads
        return respond_with_heads(cables, self.supports, self.heads, forces)


def benchmark(
    *, stay_ea: float = BENCHMARK_EA, mast_ea: float | None = None, ea: float | None = BENCHMARK_EA
) -> Formed:
    """The 120 ft cable of ten bays, sag 12 ft under nine loads of 10 kip, with a stay each end."""
    x = 12.0 * np.arange(11)
    y = 12.0 * x * (x - 120.0) / 3600.0
    lengths = np.hypot(np.diff(x), np.diff(y))
    strains = 0.0 if ea is None else 125.0 * lengths / 12.0 / ea
    heads = []
    for support, (at, side) in enumerate((((0.0, 0.0), -1.0), ((120.0, 0.0), 1.0))):
        foot = at[0] + side * 46.2 * math.cos(math.pi / 6.0), -23.1
        base, force = (at[0], -23.1), 125.0 / math.cos(math.pi / 6.0)
        mast = -45.0 - 125.0 * math.tan(math.pi / 6.0)
        stay = unstressed_from(at, foot, force, stay_ea)
        heads.append(
            Head(
                support=support,
                at=at,
                foot=base,
                mast_ea=mast_ea,
                mast_length=None if mast_ea is None else unstressed_from(at, base, mast, mast_ea),
                stays=(StayMember(foot=foot, unstressed_length=stay, ea=stay_ea),),
            )
        )
    cable = CableChain(
        left=0, right=1, unstressed_lengths=lengths / (1.0 + strains), loads=[10.0] * 9, ea=ea
    )
    return Formed(
        cables=(cable,),
        supports=((0.0, 0.0), (120.0, 0.0)),
        heads=tuple(heads),
        head_loads=(0.0, 0.0),
    )


def random_layout(seed: int) -> Formed:
    """One to three spans of 20 to 60; held ends or heads, cables with and without EA and weight."""
    generator = np.random.default_rng(seed)
    count = int(generator.integers(1, 4))
    x = np.concatenate([[0.0], np.cumsum(generator.uniform(20.0, 60.0, count))])
    supports = tuple((float(v), float(generator.uniform(-3.0, 3.0))) for v in x)
    cables = tuple(_random_cable(generator, supports[k], supports[k + 1], k) for k in range(count))
    pulls = np.zeros((count + 1, 2))
    for cable in cables:
        answer = respond(
            cable.unstressed_lengths, cable.weight, cable.loads,
            [supports[cable.left], supports[cable.right]], ea=cable.ea,
        )  # fmt: skip
        pull = float(answer.horizontals[0])
        pulls[cable.left] += pull, float(answer.verticals_left[0, 0])
        pulls[cable.right] -= pull, float(answer.verticals_right[0, -1])
    chosen = np.flatnonzero(generator.random(count + 1) < 0.7)
    chosen = chosen if chosen.size else np.array([0])
    head_loads = tuple(float(v) for v in generator.uniform(0.0, 20.0, chosen.size))
    heads = tuple(
        _random_head(
            generator, int(k), supports[k], (float(pulls[k, 0]), float(pulls[k, 1]) - load)
        )
        for k, load in zip(chosen, head_loads, strict=True)
    )
    return Formed(cables=cables, supports=supports, heads=heads, head_loads=head_loads)


def _random_cable(
    generator: np.random.Generator, left: Vector, right: Vector, place: int
) -> CableChain:
    pieces = int(generator.integers(2, 8))
    loads = generator.uniform(2.0, 10.0, pieces - 1)
    parts = generator.uniform(0.3, 1.0, pieces)
    sag = 10.0 ** generator.uniform(math.log10(1 / 20), math.log10(1 / 6))
    length = math.dist(left, right) * (1.0 + 8.0 / 3.0 * sag**2)
    force = float(np.sum(loads))
    return CableChain(
        left=place,
        right=place + 1,
        unstressed_lengths=length * parts / np.sum(parts),
        loads=loads,
        weight=float(generator.choice([0.0, 0.2])) * force / length,
        ea=force * 10.0 ** generator.uniform(2.3, 4.0) if generator.random() < 0.7 else None,
    )


def _random_head(generator: np.random.Generator, support: int, at: Vector, pull: Vector) -> Head:
    """A mast and one stay that balance the pull, or two of which one is tensioned beforehand."""
    height = float(generator.uniform(8.0, 15.0))
    foot = at[0] + height * math.tan(math.radians(generator.uniform(-8.0, 8.0))), at[1] - height
    axis = np.array(foot) - at
    axis /= math.hypot(*axis)
    outward = -math.copysign(1.0, axis[0] * pull[1] - axis[1] * pull[0])
    sides, tensions = [outward], []
    if generator.random() < 0.5:
        sides.append(-outward)
    size = math.hypot(*pull)
    ea = [size * 10.0 ** generator.uniform(2.0, 3.5) for _ in sides]
    feet = [
        (
            foot[0] + side * height / math.tan(math.radians(generator.uniform(28.0, 50.0))),
            foot[1] + float(generator.uniform(-2.0, 2.0)),
        )
        for side in sides
    ]
    lines = [(np.array(f) - at) / math.dist(f, at) for f in feet]
    rest = np.array(pull)
    if len(sides) == 2:
        tensions = [0.3 * size]
        rest = rest + 0.3 * size * lines[1]
    mast, first = np.linalg.solve(np.stack([axis, lines[0]], axis=1), -rest)
    tensions = [float(first), *tensions]
    elastic = generator.random() < 0.5
    mast_ea = float(abs(mast)) * 10.0 ** generator.uniform(2.5, 3.5) if elastic else None
    return Head(
        support=support,
        at=at,
        foot=foot,
        mast_ea=mast_ea,
        mast_length=None if mast_ea is None else unstressed_from(at, foot, float(mast), mast_ea),
        stays=tuple(
            StayMember(foot=f, unstressed_length=unstressed_from(at, f, t, e), ea=e)
            for f, t, e in zip(feet, tensions, ea, strict=True)
        ),
    )


def random_states(layout: Formed, seed: int, count: int = 6) -> tuple[Formed, list[Floats]]:
    """Other loads, temperatures and weights on a layout."""
    generator = np.random.default_rng(seed + 1_000_000)
    cables = tuple(
        replace(
            cable,
            weight_factors=generator.uniform(0.9, 1.4, count),
            alpha=12e-6,
            delta_t=generator.uniform(-30.0, 30.0, count),
        )
        for cable in layout.cables
    )
    loads = [
        np.asarray(cable.loads) * generator.uniform(0.5, 1.8, (count, np.size(cable.loads)))
        for cable in cables
    ]
    return replace(layout, cables=cables), loads
