"""Cables of fixed unstressed lengths in load states, with the heads that give under them."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.solving.governing import weight_case
from dxfcable.statics.expansion import TEMPERATURE
from dxfcable.statics.heads import respond_with_heads
from dxfcable.statics.heads_layout import CableChain, Head, StayMember
from dxfcable.statics.patterns import case_factors, combine_states, weight_factor

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.model import Cable, Layout, Support
    from dxfcable.recorded import RecordedHead
    from dxfcable.solving.built import Built
    from dxfcable.statics.beam import Floats
    from dxfcable.statics.catenary import Response
    from dxfcable.statics.combinations import Combination


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class HeadStates:
    """A head that gives, in all states.

    Attributes
    ----------
    places : (s, 2) array
        Where it stands [length]; not-a-number where it finds no equilibrium.
    pulls : (s, m) array
        Force of each of its stays on the stay's foot, to the right [force].
    """

    places: Floats
    pulls: Floats


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class States:
    """All cables of a drawing in the same number of states.

    Attributes
    ----------
    cables : tuple of Response
        One a cable, in the order given.
    faults : tuple of tuples of str
        For each cable why a state has no determinate shape, "" where it has one.
    heads : dict of int to HeadStates
        Supports that give, by key.
    support_loads : dict of int to (s,) array
        Loads at supports themselves, by key [force].
    """

    cables: tuple[Response, ...]
    faults: tuple[tuple[str, ...], ...]
    heads: dict[int, HeadStates]
    support_loads: dict[int, Floats]


def respond(
    layout: Layout,
    built: Sequence[Built],
    combinations: Sequence[Sequence[Combination]],
    heads: Sequence[tuple[int, RecordedHead]],
    delta_t: Sequence[Floats],
) -> States:
    """Solve all cables in all states.

    Parameters
    ----------
    built : sequence of Built
        One a cable.
    combinations : sequence of sequences of Combination
        For each cable one a state.
    heads : sequence of (int, RecordedHead)
        Supports that give, by key.
    delta_t : sequence of (s,) arrays
        Temperature change of each cable [K].

    Raises
    ------
    CombinationError
        If a combination asks for a part of a cable's own weight.
    ConvergenceError
        If a state that has a shape does not reach equilibrium.
    """
    places = {support.key: k for k, support in enumerate(layout.supports)}
    chains = [
        _chain(one, own, change, places)
        for one, own, change in zip(built, combinations, delta_t, strict=True)
    ]
    support_loads = loads_at_supports(built, combinations)
    positions = np.array([(s.x, s.y) for s in layout.supports])
    none = np.zeros(len(combinations[0]))
    cables: dict[int, Response] = {}
    faults: dict[int, tuple[str, ...]] = {}
    stands: dict[int, HeadStates] = {}
    for members, keys in _groups(built, [key for key, _ in heads]):
        own_heads = [(key, head) for key, head in heads if key in keys]
        found = respond_with_heads(
            [chains[k] for k in members],
            positions,
            [_head(layout.supports[places[key]], places[key], head) for key, head in own_heads],
            np.column_stack([support_loads.get(key, none) for key, _ in own_heads])
            if own_heads
            else np.zeros((none.size, 0)),
        )
        for k, response in zip(members, found.cables, strict=True):
            cables[k] = response
            faults[k] = tuple(
                own or whole for own, whole in zip(response.faults, found.faults, strict=True)
            )
        for number, (key, _) in enumerate(own_heads):
            stands[key] = HeadStates(
                places=found.supports[:, places[key]],
                pulls=found.stay_feet[number][:, :, 0],
            )
    order = range(len(built))
    return States(
        cables=tuple(cables[k] for k in order),
        faults=tuple(faults[k] for k in order),
        heads=stands,
        support_loads=support_loads,
    )


def _groups(built: Sequence[Built], heads: Sequence[int]) -> list[tuple[list[int], frozenset[int]]]:
    """Part cables into groups that share no head: one that fails does not take others along."""
    groups: list[tuple[list[int], frozenset[int]]] = []
    for k, one in enumerate(built):
        members, keys = [k], frozenset(s.key for s in one.cable.supports) & frozenset(heads)
        apart = []
        for other, held in groups:
            if held & keys:
                members, keys = [*other, *members], keys | held
            else:
                apart.append((other, held))
        groups = [*apart, (members, keys)]
    return groups


def _chain(
    one: Built, own: Sequence[Combination], change: Floats, places: Mapping[int, int]
) -> CableChain:
    """Hand a cable to statics."""
    return CableChain(
        left=places[one.cable.supports[0].key],
        right=places[one.cable.supports[-1].key],
        unstressed_lengths=np.array(one.pieces),
        weight=one.cable.weight,
        loads=_loads(one.cable, own),
        ea=one.cable.ea,
        weight_factors=_weights(one.cable, own),
        alpha=one.cable.alpha or 0.0,
        delta_t=change,
    )


def loads_at_supports(
    built: Sequence[Built], combinations: Sequence[Sequence[Combination]]
) -> dict[int, Floats]:
    """Combine the loads that stand at supports and not on a cable, state by state [force]."""
    result: dict[int, Floats] = {}
    for one, own in zip(built, combinations, strict=True):
        for key, point in one.cable.support_loads:
            side = "left" if key == one.cable.supports[0].key else "right"
            values = np.array(
                [
                    sum(case_factors(c, side).get(case, 0.0) * value for case, value in point.cases)
                    for c in own
                ]
            )
            result[key] = result[key] + values if key in result else values
    return result


def _loads(cable: Cable, combinations: Sequence[Combination]) -> Floats:
    """Combine the loads on a cable, one row a state."""
    cases = [load.cases for load in cable.loads]
    return combine_states(cases, [load.x for load in cable.loads], _span(cable), combinations)


def _weights(cable: Cable, combinations: Sequence[Combination]) -> Floats:
    """Return the factor on a cable's own weight in each state."""
    case = weight_case(cable)
    if not cable.weight or case is None:
        return np.zeros(len(combinations))
    return np.array([weight_factor(one, case) for one in combinations])


def _span(cable: Cable) -> tuple[float, float]:
    """Return the stations of a cable's ends."""
    return cable.supports[0].x, cable.supports[-1].x


def _head(support: Support, index: int, head: RecordedHead) -> Head:
    """Hand a head to statics."""
    return Head(
        support=index,
        at=head.head,
        foot=head.mast_foot,
        mast_length=None if head.mast_ea is None else head.mast_length,
        mast_ea=head.mast_ea,
        stays=tuple(
            StayMember(foot=s.foot, unstressed_length=s.length, ea=s.ea) for s in head.stays
        ),
        name=f"support {support.mark}",
    )


def temperatures(one: Built, combinations: Sequence[Combination]) -> Floats:
    """Return a cable's change of temperature in each state [K]: case T times its factor."""
    return np.array([one.delta_t * dict(c.terms).get(TEMPERATURE, 0.0) for c in combinations])
