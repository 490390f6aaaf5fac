"""Entities of an issued drawing are found again, by marks and by layers and places alike."""

from __future__ import annotations

import functools
from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.issued import Issued, read_issued
from dxfcable.drawing.recovery.by_place import ExpectedSpan, name_by_place
from dxfcable.drawing.recovery.scales import scales_by_ids, scales_by_place
from dxfcable.drawing.recovery.schedules import schedules_by_ids, schedules_by_place
from dxfcable.drawing.strip import plan_strip
from dxfcable.pairing import pair
from dxfcable.settings import Settings
from tests.generated import copy_records
from tests.issued_cases import SCENARIOS, issued
from tests.proving import opened
from tests.tampering import unmarked

NAMES = tuple(SCENARIOS)


@functools.cache
def as_issued(name: str) -> Issued:
    return read(issued(name))


def read(data: bytes) -> Issued:
    drawing = scan(data)
    return read_issued(drawing, Settings(), plan_strip(drawing).own_heads)


@pytest.mark.parametrize("name", NAMES)
def test_every_marked_entity_is_read_with_its_handle_and_geometry(name: str) -> None:
    file, found = opened(name), as_issued(name)
    assert found.marked.keys() == file.ours.keys()
    assert not found.unmarked
    assert not found.copies
    for key, entity in found.marked.items():
        assert entity.id == key
        assert entity.handle == file.handle(key)
        assert len(entity.roles) == 1
        assert np.all(np.isfinite(entity.points))
        if entity.kind == "LWPOLYLINE":
            assert len(entity.points) == file.count(key, 10)


@pytest.mark.parametrize("name", NAMES)
def test_without_marks_the_same_entities_stand_there_unmarked(name: str) -> None:
    before, after = as_issued(name), read(unmarked(issued(name)))
    assert not after.marked
    assert [e.points for e in after.unmarked] == [
        e.points for e in sorted(before.marked.values(), key=lambda e: e.offset)
    ]


def test_copies_are_told_from_the_entities_issued() -> None:
    found = read(copy_records(issued("light"), dx=3.0))
    assert len(found.copies) == len(found.marked)
    for copy in found.copies:
        original = found.marked[copy.id]
        assert copy.start[0] == pytest.approx(original.start[0] + 3.0)


def test_a_text_edited_by_hand_is_told() -> None:
    found = read(opened("light").retexted("C1/tension/1", "999 kN"))
    assert [e.id for e in found.marked.values() if e.was_edited] == ["C1/tension/1"]


@pytest.mark.parametrize("name", NAMES)
def test_linework_gets_the_ids_by_place_that_its_marks_would_give(name: str) -> None:
    marked = as_issued(name).marked
    expected = [
        ExpectedSpan(mark=head, prefix=head, number=1, left=e.start, right=e.end)
        for k, e in marked.items()
        for head, _, rest in (k.partition("/"),)
        if rest == "profile/1"
    ]
    found = name_by_place([replace(e, id="") for e in marked.values()], expected)
    assert {key: e.offset for key, e in found.items()} == {key: marked[key].offset for key in found}
    due = ("/ray/", "/load-line/", "/closing-ray/", "/pole/", "/profile/", "/closing-string/")
    lines = {
        k for k, e in marked.items() if any(w in k for w in due) and e.kind not in ("TEXT", "SOLID")
    }
    assert lines <= found.keys()


@pytest.mark.parametrize("name", NAMES)
def test_schedules_and_scales_are_the_same_by_ids_and_by_place(name: str) -> None:
    marked = as_issued(name).marked
    by_ids = sorted(schedules_by_ids(marked), key=lambda s: s.mark)
    by_place = sorted(schedules_by_place(marked.values()), key=lambda s: s.mark)
    assert len(by_ids) == len(by_place) == SCENARIOS[name].cables
    for first, second in zip(by_ids, by_place, strict=True):
        assert first.mark == second.mark
        assert first.points == second.points
        assert first.pieces == second.pieces
        assert first.summary == second.summary
    for one, other in zip(
        sorted(scales_by_ids(marked), key=lambda b: b.title),
        sorted(scales_by_place(marked.values()), key=lambda b: b.title),
        strict=True,
    ):
        assert one.title == other.title
        assert one.bar == other.bar
        assert {e.id for e in one.entities()} == {e.id for e in other.entities()}


@given(
    st.integers(1, 5).flatmap(
        lambda m: st.integers(1, 5).flatmap(
            lambda n: st.lists(
                st.lists(st.floats(0.0, 100.0), min_size=n, max_size=n), min_size=m, max_size=m
            )
        )
    )
)
def test_pairs_cost_least_of_all_ways_to_pair(costs: list[list[float]]) -> None:
    found = pair(costs)
    assert len(found) == min(len(costs), len(costs[0]))
    assert len({i for i, _ in found}) == len({j for _, j in found}) == len(found)
    assert sum(costs[i][j] for i, j in found) == pytest.approx(_least(costs), abs=1e-9)


def _least(costs: list[list[float]]) -> float:
    """Try every way."""
    if len(costs) > len(costs[0]):
        costs = [list(column) for column in zip(*costs, strict=True)]
    first, *rest = costs
    if not rest:
        return min(first)
    return min(
        cost + _least([row[:j] + row[j + 1 :] for row in rest]) for j, cost in enumerate(first)
    )
