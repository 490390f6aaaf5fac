"""Stays and masts that give: an own benchmark, round trip, equilibrium, limits, what is slack."""

from __future__ import annotations

import math
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.statics.catenary import respond
from dxfcable.statics.heads import respond_with_heads
from dxfcable.statics.heads_layout import StayMember, unstressed_from
from tests.statics.heads_cases import Formed, benchmark, random_layout, random_states

seeds = st.integers(0, 100_000)
few = settings(max_examples=25, deadline=None)
MORE = [np.array([[10.0] * 9, [15.0] * 9])]


def test_own_benchmark_of_stays_that_give() -> None:
    """OWN (nodes and bars, computed apart from this package): half of the last digit given."""
    found = benchmark().under(MORE)
    assert found.cables[0].y[:, 5] == pytest.approx([-12.0, -12.7475], abs=5e-5)
    assert found.cables[0].horizontals == pytest.approx([125.0, 175.955], abs=5e-4)
    assert found.faults == ("", "")


def test_own_benchmark_of_supports_held_rigid() -> None:
    """OWN, as above; without heads the answer is the cable's alone."""
    formed = replace(benchmark(), heads=(), head_loads=())
    found = formed.under(MORE)
    assert found.cables[0].y[1, 5] == pytest.approx(-12.42395, abs=5e-6)
    assert found.cables[0].horizontals[1] == pytest.approx(180.955, abs=5e-4)
    cable = formed.cables[0]
    alone = respond(cable.unstressed_lengths, 0.0, MORE[0], formed.supports, ea=cable.ea)
    assert found.cables[0].x.tolist() == alone.x.tolist()
    assert found.movements.shape == (2, 0, 2)


@few
@given(seeds)
def test_under_the_formed_loads_heads_stand_where_they_were_formed(seed: int) -> None:
    layout = random_layout(seed)
    found = layout.under()
    assert found.faults == ("",)
    size = layout.supports[-1][0]
    assert np.max(np.abs(found.movements)) < 1e-11 * size
    for head in layout.heads:
        assert found.supports[0, head.support] == pytest.approx(head.at, abs=1e-11 * size)


@few
@given(seeds)
def test_every_head_is_in_equilibrium_and_members_obey_their_laws(seed: int) -> None:
    layout, loads = random_states(random_layout(seed), seed)
    found = layout.under(loads)
    assert found.faults == ("",) * 6
    for k, head in enumerate(layout.heads):
        at = found.supports[:, head.support]
        total = -found.mast_feet[:, k] - np.sum(found.stay_feet[k], axis=1)
        total[:, 1] -= layout.head_loads[k]
        for cable, answer in zip(layout.cables, found.cables, strict=True):
            pull = answer.horizontals
            if cable.left == head.support:
                total += np.stack([pull, answer.verticals_left[:, 0]], axis=1)
            if cable.right == head.support:
                total -= np.stack([pull, answer.verticals_right[:, -1]], axis=1)
        # the feet's forces are the members', so their sum with the cables must vanish
        size = np.abs(found.masts[:, k]) + np.sum(found.stays[k], axis=1)
        assert np.max(np.hypot(total[:, 0], total[:, 1]) / size) < 1e-9
        mast = at - head.foot
        length = np.hypot(mast[:, 0], mast[:, 1])
        across = mast[:, 0] * found.mast_feet[:, k, 1] - mast[:, 1] * found.mast_feet[:, k, 0]
        assert np.max(np.abs(across) / length / size) < 1e-12
        if head.mast_ea is None or head.mast_length is None:
            assert length == pytest.approx(math.dist(head.at, head.foot), rel=1e-13)
        else:
            strain = length / head.mast_length - 1.0
            # a difference of lengths has 1e-16 of them as error, times EA
            assert found.masts[:, k] == pytest.approx(
                head.mast_ea * strain, rel=1e-9, abs=1e-14 * head.mast_ea
            )
        for m, stay in enumerate(head.stays):
            line = at - stay.foot
            strain = np.hypot(line[:, 0], line[:, 1]) / stay.unstressed_length - 1.0
            assert found.stays[k][:, m] == pytest.approx(
                stay.ea * np.maximum(strain, 0.0), rel=1e-9, abs=1e-14 * stay.ea
            )
            assert np.array_equal(found.slack_stays[k][:, m], strain <= 1e-12)


def test_stiffer_stays_tend_to_rigid_supports_as_one_over_ea() -> None:
    rigid = replace(benchmark(), heads=(), head_loads=()).under(MORE).cables[0].horizontals[1]
    gaps = [
        rigid - benchmark(stay_ea=32400.0 * 10.0**k).under(MORE).cables[0].horizontals[1]
        for k in (2, 3, 4)
    ]
    assert gaps[0] / gaps[1] == pytest.approx(10.0, rel=0.01)
    assert gaps[1] / gaps[2] == pytest.approx(10.0, rel=0.001)


def test_a_stiffer_mast_tends_to_one_that_keeps_its_length() -> None:
    plain = benchmark().under(MORE)
    gaps = [
        plain.cables[0].horizontals[1]
        - benchmark(mast_ea=10.0**k).under(MORE).cables[0].horizontals[1]
        for k in (7, 8)
    ]
    assert gaps[0] / gaps[1] == pytest.approx(10.0, rel=0.01)
    found = benchmark(mast_ea=1e13).under(MORE)
    assert found.masts == pytest.approx(plain.masts, rel=1e-9)


def test_large_coordinates_cost_no_digits() -> None:
    plain, far = benchmark(), np.array([4.0e6, 9.0e5])

    def away(point: tuple[float, float]) -> tuple[float, float]:
        return point[0] + far[0], point[1] + far[1]

    heads = tuple(
        replace(
            head,
            at=away(head.at),
            foot=away(head.foot),
            stays=tuple(replace(stay, foot=away(stay.foot)) for stay in head.stays),
        )
        for head in plain.heads
    )
    moved = replace(plain, supports=tuple(away(p) for p in plain.supports), heads=heads)
    # a place of 4e6 is known to 5e-10, which EA over the stay's length makes into 3e-7 kip
    assert moved.under(MORE).masts == pytest.approx(plain.under(MORE).masts, abs=1e-6)
    assert np.max(moved.under(MORE).residuals) < 1e-11


def mirrored(layout: Formed) -> Formed:
    """Left and right exchanged."""
    last = len(layout.supports) - 1
    cables = tuple(
        replace(
            cable,
            left=last - cable.right,
            right=last - cable.left,
            unstressed_lengths=np.asarray(cable.unstressed_lengths)[::-1],
            loads=np.asarray(cable.loads)[..., ::-1],
        )
        for cable in layout.cables
    )
    heads = tuple(
        replace(
            head,
            support=last - head.support,
            at=(-head.at[0], head.at[1]),
            foot=(-head.foot[0], head.foot[1]),
            stays=tuple(replace(s, foot=(-s.foot[0], s.foot[1])) for s in head.stays),
        )
        for head in layout.heads
    )
    supports = tuple((-x, y) for x, y in layout.supports[::-1])
    return replace(layout, cables=cables, heads=heads, supports=supports)


@few
@given(seeds)
def test_the_mirrored_layout_is_the_mirror_image(seed: int) -> None:
    layout, loads = random_states(random_layout(seed), seed, 3)
    found = layout.under(loads)
    other = mirrored(layout).under([force[:, ::-1] for force in loads])
    size = layout.supports[-1][0]
    assert other.movements * [-1.0, 1.0] == pytest.approx(found.movements, abs=1e-10 * size)
    assert other.masts == pytest.approx(found.masts, rel=1e-8)


def test_movements_under_each_others_loads_are_equal() -> None:
    """Betti about a loaded state: the second head's drop by a load at the first, and back."""
    layout = replace(
        benchmark(mast_ea=2e4),
        supports=((0.0, 0.0), (120.0, 0.0)),
    )
    step = 1e-3
    at_heads = np.array([[step, 0.0], [-step, 0.0], [0.0, step], [0.0, -step]])
    loads = np.tile([12.0, 10, 8, 15, 9, 7, 14, 20, 11], (4, 1))
    found = layout.under([loads], at_heads)
    drop = found.movements[..., 1]
    assert drop[0, 1] - drop[1, 1] == pytest.approx(drop[2, 0] - drop[3, 0], rel=1e-5)
    # a load on the cable's third point and the first head
    more = np.tile(loads[0], (2, 1))
    more[:, 2] += [step, -step]
    by_cable = layout.under([more]).movements[:, 0, 1]
    third = found.cables[0].y[:, 3]
    assert by_cable[0] - by_cable[1] == pytest.approx(third[0] - third[1], rel=1e-5)


def test_work_of_the_loads_is_the_energy_stored() -> None:
    """PRP-11 with stays: the integral of P dv is the change of strain energy, exactly."""
    layout = benchmark(mast_ea=5e4)
    points, weights = np.polynomial.legendre.leggauss(12)
    share = np.concatenate([[0.0], (points + 1.0) / 2.0, [1.0]])
    found = layout.under([10.0 + np.outer(share, [5.0] * 9)])
    cable = found.cables[0]
    heads_energy = sum(
        np.sum(found.stays[k] ** 2 * s.unstressed_length / (2.0 * s.ea), axis=1)
        + found.masts[:, k] ** 2 * (head.mast_length or 0.0) / (2.0 * (head.mast_ea or 1.0))
        for k, head in enumerate(layout.heads)
        for s in head.stays
    )
    lengths = np.asarray(layout.cables[0].unstressed_lengths)
    energy = heads_energy + np.sum(cable.tensions_left**2 * lengths, axis=1) / (2.0 * 32400.0)
    sink = -np.sum(cable.y[:, 1:-1], axis=1)
    # work by parts: P v at the ends less the integral of v dP
    work = 15.0 * sink[-1] - 10.0 * sink[0] - 5.0 * np.sum(weights * sink[1:-1]) / 2.0
    assert energy[-1] - energy[0] == pytest.approx(work, rel=1e-10)


def test_cables_without_stretch_are_solved_too() -> None:
    found = benchmark(ea=None).under(MORE)
    assert found.faults == ("", "")
    nearly = benchmark(ea=1e12).under(MORE)
    assert found.cables[0].y == pytest.approx(nearly.cables[0].y, abs=1e-7)
    assert found.masts == pytest.approx(nearly.masts, rel=1e-8)


def test_many_states_are_each_solved_as_if_alone() -> None:
    layout, loads = random_states(random_layout(7), 7, 5)
    found = layout.under(loads)
    for k in range(5):
        one = replace(
            layout,
            cables=tuple(
                replace(
                    cable,
                    weight_factors=np.asarray(cable.weight_factors)[k],
                    delta_t=np.asarray(cable.delta_t)[k],
                )
                for cable in layout.cables
            ),
        ).under([force[k] for force in loads])
        assert one.movements[0] == pytest.approx(found.movements[k], rel=1e-9)
        assert one.masts[0] == pytest.approx(found.masts[k], rel=1e-10)


def test_an_unstressed_length_gives_its_force_back() -> None:
    length = unstressed_from((0.0, 3.0), (4.0, 0.0), -20.0, 1000.0)
    assert 1000.0 * (5.0 / length - 1.0) == pytest.approx(-20.0, rel=1e-12)
    with pytest.raises(ValueError, match="crush"):
        unstressed_from((0.0, 3.0), (4.0, 0.0), -1000.0, 1000.0)


@pytest.mark.parametrize(
    ("change", "said"),
    [
        ({"support": 2}, "heads must be different ones of 2 supports"),
        ({"foot": (0.0, 0.0)}, "two different ends"),
        ({"mast_length": 23.1}, "unstressed length and no EA"),
        ({"mast_ea": 1e4}, "positive unstressed length"),
        ({"stays": (StayMember(foot=(-40.0, -23.1), unstressed_length=46.0, ea=0.0),)}, "EA"),
    ],
)
def test_a_head_that_cannot_be_is_refused(change: dict[str, object], said: str) -> None:
    layout = benchmark()
    head = replace(layout.heads[0], **change)  # type: ignore[arg-type]
    with pytest.raises(ValueError, match=said):
        replace(layout, heads=(head, layout.heads[1])).under()


def test_cables_and_numbers_that_do_not_fit_are_refused() -> None:
    layout = benchmark()
    with pytest.raises(ValueError, match="cable 1 must join two of 2 supports"):
        respond_with_heads([replace(layout.cables[0], right=2)], layout.supports, layout.heads)
    with pytest.raises(ValueError, match="head_loads must be finite"):
        layout.under(head_loads=np.zeros(3))
    with pytest.raises(ValueError, match="one state or 3, not 2"):
        layout.under(MORE, np.zeros((3, 2)))
