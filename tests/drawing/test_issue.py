"""What is issued is whole records of ours; stripping gives the drafter's bytes back."""

from __future__ import annotations

import io
from collections import Counter

import pytest
from ezdxf import recover
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.marks import sort_marked
from dxfcable.drawing.strip import plan_strip
from dxfcable.errors import DrawingError
from dxfcable.job import Options, solve_bytes
from tests.drawing.issuing import ITEMS, issued, stripped
from tests.generated import (
    BROKEN_FOR_EZDXF,
    VERSIONS,
    CableOptions,
    Codes,
    Edit,
    Quirk,
    copy_records,
    drawing,
    drawings,
    edits,
    move_records,
    records,
    renumber_handles,
)
from tests.laws.laws import assert_only_records_were_inserted

MANY = settings(max_examples=60, deadline=None, suppress_health_check=[HealthCheck.too_slow])


@MANY
@given(drawings())
def test_stripping_what_was_issued_gives_the_same_bytes(data: bytes) -> None:
    assert stripped(data) == data
    solved = issued(data)
    assert solved != data
    assert stripped(solved) == data


@MANY
@given(drawings())
def test_issuing_twice_writes_the_same_bytes(data: bytes) -> None:
    solved = issued(data)
    assert issued(solved) == solved


@MANY
@given(drawings())
def test_only_whole_records_are_inserted_and_the_seed_rises(data: bytes) -> None:
    assert_only_records_were_inserted(data, issued(data))


@MANY
@given(drawings(), edits())
def test_edits_by_other_hands_outlast_ours(data: bytes, edit: Edit) -> None:
    edited = edit.apply(issued(data))
    found = sort_marked(scan(edited))
    assert {m.id for m in found.ours} == {item.id for item in ITEMS}
    assert not found.copies
    left, expected = stripped(edited), edit.apply(data)
    match edit.name:
        case "swap_line_ends" | "round_coordinates":
            assert left == expected
        case "shuffle_entities":  # which goes where depends on how many there are
            assert _counted(left) == _counted(expected)
        case _:
            assert renumber_handles(left, 0x10) == renumber_handles(data, 0x10)


def _counted(data: bytes) -> Counter[bytes]:
    return Counter(data[start:end] for start, end, _ in records(data))


@pytest.mark.parametrize("version", VERSIONS)
@pytest.mark.parametrize("codes", list(Codes))
def test_a_library_reads_what_was_issued_and_finds_no_new_fault(version: str, codes: Codes) -> None:
    data = drawing(version, codes=codes, seed=3)
    before = _audit(data)
    after = _audit(issued(data))
    assert after - before == Counter()


def _audit(data: bytes) -> Counter[int]:
    _, auditor = recover.read(io.BytesIO(data))
    return Counter(entry.code for entry in (*auditor.errors, *auditor.fixes))


def test_a_copy_of_ours_is_kept_and_told() -> None:
    data = drawing("AC1015", seed=1)
    copied = copy_records(issued(data), 100.0, 0.0)
    found = sort_marked(scan(copied))
    assert len(found.ours) == len(ITEMS)
    assert len(found.copies) == len(ITEMS)
    left = stripped(copied)
    assert len(sort_marked(scan(left)).ours) + len(sort_marked(scan(left)).copies) == len(ITEMS)


def test_after_renumbering_the_one_in_its_place_is_ours() -> None:
    data = drawing("AC1015", seed=1)
    copied = renumber_handles(copy_records(issued(data), 100.0, 0.0))
    found = sort_marked(scan(copied))
    assert all(m.is_in_place for m in found.ours)
    assert not any(m.is_in_place for m in found.copies)


def test_rows_that_the_drafter_uses_stay() -> None:
    data = drawing("AC1015", seed=1)
    solved = issued(data)
    line = b"  0\nLINE\n  5\nFFF1\n100\nAcDbEntity\n  8\nS-CABL-PROF\n100\nAcDbLine\n"
    line += b" 10\n0.0\n 20\n0.0\n 30\n0.0\n 11\n1.0\n 21\n1.0\n 31\n0.0\n"
    entities = solved.index(b"\nENTITIES\n") + len(b"\nENTITIES\n")
    edited = solved[:entities] + line + solved[entities:]
    left = stripped(edited)
    assert left.count(b"S-CABL-PROF") == 2
    assert b"S-CABL-TENS" not in left
    # Once the drafter's line goes, so does the row, even after another solve between.
    again = issued(edited)
    assert stripped(again.replace(line, b"")) == data


def test_a_label_that_was_moved_is_held_and_then_put_there() -> None:
    data = drawing("AC1015", seed=1)
    solved = issued(data)
    moved = move_records(solved, 3.0, -1.0, index=0)
    again = issued(moved)
    assert stripped(again) == data
    assert issued(again) == again


@pytest.mark.parametrize("quirk", [Quirk(q) for q in Quirk])
def test_each_quirk_of_real_drawings_comes_back(quirk: Quirk) -> None:
    for version in ("", "AC1009", "AC1015", "AC1032"):
        data = drawing(version, seed=5, quirks=frozenset({quirk}))
        solved = issued(data)
        assert stripped(solved) == data
        assert issued(solved) == solved


def test_the_quirks_that_only_we_read_are_few() -> None:
    assert len(BROKEN_FOR_EZDXF) < len(Quirk) / 2


@given(st.sampled_from(VERSIONS))
@settings(deadline=None)
def test_what_is_inserted_does_not_grow_with_the_file(version: str) -> None:
    small, large = (drawing(version, seed=2, entities=n) for n in (3, 60))
    growth = [len(issued(data)) - len(data) for data in (small, large)]
    assert abs(growth[1] - growth[0]) < 200  # longer handles


def test_an_entity_that_the_drafter_points_at_keeps_its_handle() -> None:
    data = drawing("AC1015", seed=1)
    solved = issued(data)
    ray = next(m for m in sort_marked(scan(solved)).ours if m.id == "C1/ray/1")
    group = b"  0\nGROUP\n  5\nFFF2\n340\n" + ray.handles[0].encode() + b"\n"
    end = solved.index(b"OBJECTS\n") + len(b"OBJECTS\n")
    pointed = solved[:end] + group + solved[end:]
    again = issued(pointed, tuple(reversed(ITEMS)))
    kept = next(m for m in sort_marked(scan(again)).ours if m.id == "C1/ray/1")
    assert kept.handles == ray.handles
    assert len({m.handles for m in sort_marked(scan(again)).ours}) == len(ITEMS)
    assert issued(again, tuple(reversed(ITEMS))) == again
    assert "pointed-at" in {f.code for f in plan_strip(scan(pointed)).findings}
    assert (
        stripped(again)
        == data[: data.index(b"OBJECTS\n") + 8] + group + data[data.index(b"OBJECTS\n") + 8 :]
    )


def test_a_set_pasted_from_another_drawing_is_adopted_and_said() -> None:
    source = issued(drawing("AC1015", seed=1))
    ours = b"".join(source[slice(*m.span)] for m in sort_marked(scan(source)).ours)
    target = drawing("AC1015", seed=9)
    end = target.index(b"ENTITIES\n") + len(b"ENTITIES\n")
    pasted = target[:end] + ours + target[end:]
    pasted = renumber_handles(pasted, 0x5000)
    assert "adopted" in {f.code for f in plan_strip(scan(pasted)).findings}
    assert renumber_handles(stripped(pasted), 0x10) == renumber_handles(target, 0x10)


def test_a_look_that_the_drafter_gave_is_said() -> None:
    solved = issued(drawing("AC1015", seed=1))
    red = solved.replace(b"  8\nS-CABL-TENS\n", b"  8\nS-CABL-TENS\n 62\n1\n")
    codes = [f.code for f in plan_strip(scan(red)).findings]
    assert codes.count("restyled") == 1
    assert "restyled" not in {f.code for f in plan_strip(scan(solved)).findings}
    assert issued(red) == solved


def test_a_layer_that_the_drafter_changed_is_set_again_and_said() -> None:
    data = drawing("AC1015", seed=1, layout=CableOptions())
    solved, plain = solve_bytes(data, Options())
    assert "layer-restyled" not in {f.code for f in plain.findings}
    row = solved.index(b"S-CABL-PROF\n 70\n0\n 62\n5\n")
    red = solved[:row] + solved[row:].replace(b" 62\n5\n", b" 62\n1\n", 1)
    again, outcome = solve_bytes(red, Options())
    assert again == solved
    assert "layer-restyled" in {f.code for f in outcome.findings}


def test_handles_near_the_end_of_the_range_stand_once() -> None:
    for seed in (b"FFFFFFFFFFFFFFF0", b"FFFFFFFFFFFFFFFE", b"FFFFFFFFFFFFFF80"):
        data = drawing("AC1015", seed=1)
        at = data.index(b"$HANDSEED\n  5\n") + 14
        data = data[:at] + seed + data[data.index(b"\n", at) :]
        solved = issued(data)
        assert stripped(solved) == data
        assert issued(solved) == solved


def test_comments_that_somebody_put_among_our_tags_stay() -> None:
    data = drawing("AC1015", seed=1)
    solved = issued(data)
    for mark in (b"1001\nDXFCABLE\n", b"  8\nS-CABL-TENS\n", b"S-CABL-PROF\n 70\n"):
        at = solved.index(mark)
        commented = solved[:at] + b"999\nKEEP ME\n" + solved[at:]
        if mark.startswith(b"S-CABL"):
            at += len(b"S-CABL-PROF\n")
            commented = solved[:at] + b"999\nKEEP ME\n" + solved[at:]
        left = stripped(commented)
        assert left.count(b"KEEP ME") == 1
        assert left.replace(b"999\nKEEP ME\n", b"") == data
        assert issued(commented).count(b"KEEP ME") == 1


def test_a_line_lost_inside_our_data_is_refused_by_its_number() -> None:
    solved = issued(drawing("AC1015", seed=1))
    broken = solved.replace(b"1000\nid=C1/tension/1\n", b"id=C1/tension/1\n")
    with pytest.raises(DrawingError, match="line") as refused:
        stripped(broken)
    assert refused.value.line == solved[: solved.index(b"1000\nid=C1/tension/1")].count(b"\n") + 1
