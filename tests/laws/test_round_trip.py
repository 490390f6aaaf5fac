"""The drawing comes back untouched: laws over drawings of our own and over real ones."""

from __future__ import annotations

from collections import Counter
from typing import TYPE_CHECKING

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.errors import DrawingError
from dxfcable.job import Options, solve_bytes
from tests.generated import (
    RULELESS,
    VERSIONS,
    CableOptions,
    Codes,
    Edit,
    Quirk,
    change_load_text,
    copy_records,
    drawing,
    drawings,
    edits,
    layouts,
    move_records,
    records,
    renumber_handles,
    splice_layout,
)
from tests.laws import corpus, laws

if TYPE_CHECKING:
    from pathlib import Path

RULED = Options(units="m")


@given(drawings(layout=layouts(ruled=False)))
@settings(max_examples=12)
def test_a_generated_drawing(f: bytes) -> None:
    for law in laws.LAWS:
        law(f)


@pytest.mark.parametrize("version", ["", "AC1009", "AC1015", "AC1032"])
@pytest.mark.parametrize("quirk", list(Quirk), ids=lambda quirk: quirk.name.lower())
def test_each_quirk_of_real_drawings(quirk: Quirk, version: str) -> None:
    f = drawing(version, seed=7, quirks=frozenset({quirk}), layout=RULELESS)
    for law in laws.LAWS:
        law(f)


@pytest.mark.parametrize("codes", list(Codes))
@pytest.mark.parametrize("version", VERSIONS)
def test_each_release_with_its_rule_in_a_block(version: str, codes: Codes) -> None:
    f = drawing(version, codes=codes, seed=11, layout=CableOptions())
    result, _ = solve_bytes(f, RULED)
    assert laws.stripped(result) == f
    assert solve_bytes(result, RULED)[0] == result


@given(drawings(layout=layouts(ruled=False)), edits())
@settings(max_examples=14)
def test_edits_by_other_hands_outlast_ours(f: bytes, edit: Edit) -> None:
    left, expected = laws.stripped(edit.apply(laws.solved(f))), edit.apply(f)
    match edit.name:
        case "swap_line_ends" | "round_coordinates":
            assert left == expected
        case "shuffle_entities":  # which goes where depends on how many there are
            assert _counted(left) == _counted(expected)
        case _:
            assert renumber_handles(left, 0x10) == renumber_handles(f, 0x10)


def _counted(data: bytes) -> Counter[bytes]:
    return Counter(data[start:end] for start, end, _ in records(data))


@given(drawings(layout=layouts(ruled=False)), st.integers(0, 1))
@settings(max_examples=15)
def test_a_changed_load_is_solved_as_if_it_had_always_been_so(f: bytes, index: int) -> None:
    changed = change_load_text(f, index, b"31 kN")
    again = laws.solved(change_load_text(laws.solved(f), index, b"31 kN"))
    assert again == laws.solved(changed)
    assert laws.stripped(again) == changed


@given(drawings(versions=("AC1009", "AC1015", "AC1032"), layout=layouts(ruled=False)))
@settings(max_examples=15)
def test_copies_of_ours_stay_and_everything_else_goes(f: bytes) -> None:
    copied = copy_records(laws.solved(f), 500.0, 0.0)
    left = laws.stripped(copied)
    pasted = [copied[a:b] for a, b, _ in records(copied)]
    kept = [left[a:b] for a, b, _ in records(left)]
    assert Counter(kept) - Counter(pasted) <= Counter(k for k in kept if b"HEADER" in k)
    assert laws.stripped(laws.solved(copied)) == left


@given(
    drawings(layout=layouts(ruled=False)),
    st.integers(0, 12),
    st.sampled_from([(3.0, 1.5), (-40.0, 0.25)]),
)
@settings(max_examples=12)
def test_a_label_that_was_moved_stays_there(
    f: bytes, index: int, shift: tuple[float, float]
) -> None:
    moved = move_records(laws.solved(f), *shift, index=index)
    again = laws.solved(moved)
    assert laws.solved(again) == again
    assert laws.stripped(again) == f
    assert b"held" in again


@given(st.sampled_from(VERSIONS))
@settings(max_examples=6)
def test_what_is_inserted_does_not_grow_with_the_file(version: str) -> None:
    small, large = (drawing(version, seed=2, entities=n, layout=RULELESS) for n in (3, 80))
    growth = [len(laws.solved(f)) - len(f) for f in (small, large)]
    # Places found among other obstacles may be written with other digits.
    assert abs(growth[1] - growth[0]) < 0.1 * growth[0]


@pytest.mark.parametrize("path", corpus.drawings("open"), ids=lambda path: path.name)
def test_a_real_drawing(path: Path) -> None:
    if not corpus.is_text(path):
        with pytest.raises(DrawingError) as refused:
            laws.solved(path.read_bytes())
        assert refused.value.code == "binary-dxf"
        return
    f = splice_layout(path.read_bytes())
    for law in laws.LAWS:
        law(f)


@pytest.mark.parametrize("path", corpus.drawings("broken"), ids=lambda path: path.name)
def test_a_broken_drawing_is_refused_by_line_or_obeys_the_laws(path: Path) -> None:
    data = path.read_bytes()
    refusal = _refusal(data)
    if refusal:
        assert "line" in refusal or "ENTITIES" in refusal
        return
    f = splice_layout(data)
    laws.comes_back(f)
    laws.is_written_the_same_again(f)


def _refusal(data: bytes) -> str:
    """Return why a drawing cannot take a cable or be solved, "" where it can."""
    try:
        laws.solved(splice_layout(data))
    except (DrawingError, ValueError) as error:
        return str(error)
    return ""
