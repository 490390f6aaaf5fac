"""The number of entities and a sum over their ids tell what is missing, and name it."""

from __future__ import annotations

from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing.whole import Whole, id_sum, missing, whole_of
from tests.proving import opened

PARTS = ("C1/diagram", "C1/schedule")


def parts_of(names: list[str]) -> dict[str, str]:
    """Give each id its part, as far as its first words tell."""
    return {
        name: next((part for part in PARTS if name.startswith(f"{part}/")), name) for name in names
    }


NAMES = sorted(opened("light").ours)
ENTITIES = parts_of(NAMES)
WHOLE = whole_of(ENTITIES, PARTS)


def test_a_whole_issue_misses_nothing_in_any_order() -> None:
    assert missing(WHOLE, dict(reversed(ENTITIES.items()))) is None
    assert WHOLE.count == len(NAMES)
    assert dict(WHOLE.parts)["C1/schedule"] == sum("/schedule/" in name for name in NAMES)


@given(st.sampled_from(NAMES))
@settings(max_examples=30)
def test_one_missing_entity_is_named(name: str) -> None:
    rest = {key: part for key, part in ENTITIES.items() if key != name}
    found = missing(WHOLE, rest)
    assert found is not None
    assert (found.count, found.name) == (1, name)


@given(st.sets(st.sampled_from(NAMES), min_size=2, max_size=len(NAMES)))
def test_several_missing_entities_are_counted_by_part(names: set[str]) -> None:
    found = missing(WHOLE, {k: part for k, part in ENTITIES.items() if k not in names})
    assert found is not None
    assert (found.count, found.name) == (len(names), "")
    lost = {part: sum(ENTITIES[name] == part for name in names) for part in PARTS}
    assert dict(found.parts) == {part: count for part, count in lost.items() if count}


@given(st.sampled_from(NAMES), st.text(min_size=1, max_size=8))
def test_an_id_that_was_not_issued_is_no_stand_in(name: str, other: str) -> None:
    strange = f"C9/{other}"
    rest = {key: part for key, part in ENTITIES.items() if key != name} | {strange: strange}
    found = missing(WHOLE, rest)
    assert found is not None
    assert (found.count, found.extra) == (0, 1)


def test_an_id_like_no_other_is_counted_and_not_named() -> None:
    whole = whole_of({"C1/ray/1": "C1/ray/1", "X9/zebra": "X9/zebra"}, ())
    found = missing(whole, {"C1/ray/1": "C1/ray/1"})
    assert found is not None
    assert (found.count, found.name) == (1, "")
    assert whole == Whole(count=2, total=(id_sum("C1/ray/1") + id_sum("X9/zebra")) % 2**32)
