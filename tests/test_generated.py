"""The generator keeps its promises: its drawings pair, ezdxf reads them, edits edit only."""

from __future__ import annotations

import io
import itertools
import logging
from typing import TYPE_CHECKING

import pytest
from ezdxf.filemanagement import read
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from tests.generated import (
    BROKEN_FOR_EZDXF,
    VERSIONS,
    CableOptions,
    Codes,
    Edit,
    Quirk,
    big_drawing,
    change_load_text,
    copy_records,
    drawing,
    drawings,
    edits,
    entities,
    is_ours,
    layouts,
    load_texts,
    move_records,
    our_texts,
    pairs,
    records,
    renumber_handles,
    round_coordinates,
    shuffle_entities,
    splice_layout,
    swap_line_ends,
    tokens,
)
from tests.generated.pairs import is_handle, model_space_owner, section_of_tokens, version_of

if TYPE_CHECKING:
    from collections.abc import Iterator

    from ezdxf.document import Drawing

CABLE = CableOptions()
SMALL = settings(
    max_examples=40, deadline=None, suppress_health_check=[HealthCheck.too_slow], derandomize=True
)
TINY = b"  0\nSECTION\n  2\nENTITIES\n  0\nTEXT\n  1\n0\n  0\nENDSEC\n  0\nEOF\n"
LABEL = (
    b"  0\nTEXT\n  5\nFA\n330\n1F\n100\nAcDbEntity\n  8\nS-CABL-TENS\n100\nAcDbText\n"
    b" 10\n1.5\n 20\n2.5\n 30\n0.0\n 40\n0.25\n  1\n133 kip\n 72\n1\n 11\n2.0\n 21\n2.5\n 31\n0.0\n"
    b"100\nAcDbText\n1001\nDXFCABLE\n1000\nC1/tension/1\n1000\nFA\n1010\n2.0\n1020\n2.5\n1030\n0.0\n"
)


@pytest.fixture(autouse=True)
def _quiet_ezdxf() -> Iterator[None]:
    """Keep ezdxf's log about faults that are made on purpose out of the report."""
    logger = logging.getLogger("ezdxf")
    before = logger.level
    logger.setLevel(logging.CRITICAL)
    yield
    logger.setLevel(before)


def load(data: bytes) -> Drawing:
    """Load a drawing as ezdxf's own file reader would."""
    page = "utf-8" if version_of(tokens(data)) >= "AC1021" else "cp1252"
    return read(io.StringIO(data.decode(page, "surrogateescape").replace("\r\n", "\n")))


def with_label() -> bytes:
    """Return a drawing that holds one marked text as the program writes it."""
    data = drawing("AC1015", layout=CABLE, seed=3)
    end = next(
        r for r in records(data) if r.start > data.index(b"ENTITIES") and r.type == b"ENDSEC"
    )
    return data[: end.start] + LABEL + data[end.start :]


# --- the plain pair parser ---


def test_pairs_give_code_value_and_line() -> None:
    assert pairs(TINY)[2:4] == [(0, b"TEXT", 5), (1, b"0", 7)]


def test_records_are_byte_ranges_from_code_0_to_code_0() -> None:
    found = records(TINY)
    assert [r.type for r in found] == [b"SECTION", b"TEXT", b"ENDSEC", b"EOF"]
    assert TINY[found[1].start : found[1].end] == b"  0\nTEXT\n  1\n0\n"


def test_what_stands_before_and_after_the_pairs_is_tolerated() -> None:
    data = b"\xef\xbb\xbf\n \n" + TINY + b"stray\n\x1a"
    assert [p.value for p in pairs(data)] == [p.value for p in pairs(TINY)]
    assert pairs(data)[0].line == 3


@pytest.mark.parametrize(
    ("data", "line"),
    [
        (TINY.replace(b"\n", b"\r"), 1),
        (TINY.replace(b"  1\n0\n", b"  1\n"), 9),
        (TINY.replace(b"  0\nEOF\n", b""), 11),
        (TINY.replace(b"  1\n", b"1.5\n"), 7),
        (TINY.decode().encode("utf-16"), 1),
        (b"", 1),
        (b"  0\nSECTION\n  2", 3),
    ],
    ids=["CR only", "a line is missing", "no EOF", "no integer", "UTF-16", "empty", "cut"],
)
def test_a_file_that_does_not_pair_names_its_line(data: bytes, line: int) -> None:
    with pytest.raises(ValueError, match=f"^line {line}:"):
        pairs(data)


# --- drawings ---


@SMALL
@given(drawings())
def test_generated_drawings_pair_and_their_sections_close(data: bytes) -> None:
    found = records(data)
    assert all(a.end == b.start for a, b in itertools.pairwise(found))
    types = [r.type for r in found if r.type in (b"SECTION", b"ENDSEC", b"EOF")]
    assert types == [b"SECTION", b"ENDSEC"] * (len(types) // 2) + [b"EOF"]


@SMALL
@given(drawings(without=BROKEN_FOR_EZDXF))
def test_ezdxf_reads_generated_drawings_with_their_cable(data: bytes) -> None:
    layout = load(data).modelspace()
    assert len(layout.query('POINT[layer=="S-CABL-SUPP"]')) == 2
    assert len(layout.query('INSERT[layer=="S-CABL-DATA"]')) == 1
    assert len(layout.query('TEXT[layer=="S-CABL-LOAD"]')) == len(load_texts(data))


@pytest.mark.parametrize("version", VERSIONS)
@pytest.mark.parametrize("handles", [True, False])
def test_plain_drawings_have_no_fault_that_an_audit_finds(version: str, handles: bool) -> None:
    auditor = load(drawing(version, handles=handles, layout=CABLE)).audit()
    assert [e.message for e in [*auditor.errors, *auditor.fixes]] == []


def test_the_same_arguments_give_the_same_bytes() -> None:
    quirks = frozenset({Quirk.COMMENTS, Quirk.ODD_FLOATS, Quirk.WRONG_COUNTS})
    first, second = (
        drawing("AC1027", codes=Codes.ODD, quirks=quirks, layout=CABLE, seed=5) for _ in range(2)
    )
    assert (
        first == second != drawing("AC1027", codes=Codes.ODD, quirks=quirks, layout=CABLE, seed=6)
    )


@pytest.mark.parametrize("quirk", list(Quirk))
def test_every_quirk_shows_in_the_bytes(quirk: Quirk) -> None:
    changed = [
        version
        for version in ("AC1009", "AC1015", "AC1032")
        if drawing(version, quirks=frozenset({quirk})) != drawing(version)
    ]
    assert changed


def test_handles_and_owners_are_those_asked_for() -> None:
    no_handles = tokens(drawing("AC1009", handles=False, layout=CABLE))
    assert not any(is_handle(no_handles, section_of_tokens(no_handles)))
    other = drawing("AC1015", quirks=frozenset({Quirk.MODEL_SPACE_17}))
    assert model_space_owner(tokens(other)) == b"17"


# --- splicing ---


@SMALL
@given(drawings(layout=st.none()), layouts(ruled=False))
def test_a_spliced_layout_keeps_every_other_byte(data: bytes, options: CableOptions) -> None:
    spliced = splice_layout(data, options)
    before, after = records(data), records(spliced)
    added = 2 + 2 * len(options.loads)
    both = zip(before, after, strict=False)
    start = next(k for k, (a, b) in enumerate(both) if _raw(data, a) != _raw(spliced, b))
    assert before[start].type == b"ENDSEC"
    kept = after[:start] + after[start + added :]
    assert [_raw(spliced, r) for r in kept] == [_raw(data, r) for r in before]
    cut, resumed = after[start].start, after[start + added].start
    assert spliced[:cut] + spliced[resumed:] == data


def _raw(data: bytes, record: tuple[int, int, bytes]) -> bytes:
    return data[record[0] : record[1]]


@SMALL
@given(drawings(layout=st.none(), without=BROKEN_FOR_EZDXF), layouts(ruled=False))
def test_a_spliced_layout_has_handles_of_its_own(data: bytes, options: CableOptions) -> None:
    spliced = tokens(splice_layout(data, options))
    states = is_handle(spliced, section_of_tokens(spliced))
    used = [int(t.value, 16) for t, is_one in zip(spliced, states, strict=True) if is_one]
    assert len(used) == len(set(used))


def test_a_drawing_without_entities_section_cannot_be_spliced() -> None:
    data = b"  0\nSECTION\n  2\nHEADER\n  0\nENDSEC\n  0\nEOF\n"
    with pytest.raises(ValueError, match="no ENTITIES section"):
        splice_layout(data)


# --- edits ---


@SMALL
@given(drawings(), edits())
def test_edits_of_other_programs_keep_the_drawing_whole(data: bytes, edit: Edit) -> None:
    edited = edit.apply(data)
    before, after = pairs(data), pairs(edited)
    assert sorted(p.code for p in before) == sorted(p.code for p in after)
    assert sorted(load_texts(edited)) == sorted(load_texts(data))


def test_renumbering_changes_every_handle_and_keeps_what_points_at_it() -> None:
    data = drawing("AC1018", quirks=frozenset({Quirk.GROUP}), layout=CABLE)
    edited = renumber_handles(data, 0xABC00)
    found = tokens(edited)
    states = is_handle(found, section_of_tokens(found))
    handles = {t.value for t, is_one in zip(found, states, strict=True) if is_one}
    assert all(int(h, 16) >= 0xABC00 for h in handles)
    pointers = {t.value for t in found if t.code in (330, 340, 350)} - {b"0"}
    assert pointers <= handles
    assert model_space_owner(found) in handles


def test_shuffling_keeps_polylines_and_inserts_whole() -> None:
    data = drawing("AC1009", layout=CABLE, entities=30)
    edited = shuffle_entities(data, 4)
    assert edited != data

    def bodies(content: bytes) -> list[bytes]:
        found = tokens(content)
        return [content[found[e.first].start : found[e.stop].start] for e in entities(found)]

    assert bodies(edited) != bodies(data)
    assert sorted(bodies(edited)) == sorted(bodies(data))


def test_rounding_changes_long_numbers_only() -> None:
    data = drawing("AC1015", quirks=frozenset({Quirk.ODD_FLOATS}), layout=CABLE, entities=20)
    before, after = pairs(data), pairs(round_coordinates(data, 3))
    changed = [(a, b) for a, b in zip(before, after, strict=True) if a != b]
    assert changed
    assert all(abs(float(a.value) - float(b.value)) <= 0.0005 for a, b in changed)
    assert round_coordinates(data, 3) == round_coordinates(round_coordinates(data, 3), 3)


def test_line_ends_swapped_twice_come_back() -> None:
    data = drawing("AC1024", newline=b"\r\n", layout=CABLE)
    assert b"\r" not in swap_line_ends(data)
    assert swap_line_ends(swap_line_ends(data)) == data


def test_a_changed_load_text_is_the_only_change() -> None:
    data = drawing("AC1015", layout=CABLE)
    edited = change_load_text(data, 1, b"16.5 kN")
    changed = [(a, b) for a, b in zip(pairs(data), pairs(edited), strict=True) if a != b]
    assert [(a.value, b.value) for a, b in changed] == [(b"15 kN", b"16.5 kN")]


def test_a_copy_keeps_its_mark_and_gets_a_handle_of_its_own() -> None:
    data = with_label()
    edited = copy_records(data, 10.0, 0.0)
    found = tokens(edited)
    ours = [e for e in entities(found) if is_ours(found, e)]
    values = [[t.value for t in found[e.first : e.stop] if t.code in (5, 11, 1000)] for e in ours]
    assert values[0] == [b"FA", b"2.0", b"C1/tension/1", b"FA"]
    assert values[1] == [b"FB", b"12.0", b"C1/tension/1", b"FA"]
    assert len(edited) > len(data)


def test_a_moved_label_moves_its_points_but_not_its_recorded_place() -> None:
    data = with_label()
    assert our_texts(data) == [b"133 kip"]
    edited = move_records(data, 3.0, -1.0)
    changed = [(a.code, b.value) for a, b in zip(pairs(data), pairs(edited), strict=True) if a != b]
    assert changed == [(10, b"4.5"), (20, b"1.5"), (11, b"5.0"), (21, b"1.5")]


# --- the large drawing ---


@pytest.mark.parametrize("newline", [b"\n", b"\r\n"], ids=["LF", "CRLF"])
@pytest.mark.parametrize("padded", [True, False])
@pytest.mark.parametrize("version", ["AC1009", "AC1015", "AC1032"])
def test_a_big_drawing_is_valid_and_of_the_stated_size(
    version: str, newline: bytes, padded: bool
) -> None:
    data = big_drawing(400, newline=newline, padded=padded, version=version)
    doc = load(data)
    assert len(doc.modelspace()) == 400 + 2 + 2 * 3 + 1
    assert len({e.dxftype() for e in doc.modelspace()}) >= 9
    assert doc.audit().errors == []
    assert (data.count(b"\r\n") == data.count(b"\n")) is (newline == b"\r\n")


def test_a_big_drawing_grows_by_about_120_bytes_an_entity() -> None:
    small, large = big_drawing(500), big_drawing(1500)
    assert 100 < (len(large) - len(small)) / 1000 < 190
