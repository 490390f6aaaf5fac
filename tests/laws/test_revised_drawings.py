"""Revised drawings obey the laws too, and are answered from the issued file alone."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.job import AskedRevision, AskedRule, Options, revise_bytes, solve_bytes, strip_bytes
from dxfcable.model import RuleKind
from tests.generated import (
    RULELESS,
    change_load_text,
    drawing,
    drawings,
    layouts,
    renumber_handles,
    round_coordinates,
    shuffle_entities,
    swap_line_ends,
)

ASKED = Options(units="m", rule=AskedRule(kind=RuleKind.SAG, text="2.4 m"))
PLAIN = Options(units="m")
HOLDS = st.sampled_from(["rule", "cut-length"])


def revised(data: bytes, hold: str = "cut-length", *, rev: str = "") -> bytes:
    return revise_bytes(data, PLAIN, AskedRevision(hold=hold, rev=rev))[0]


@given(drawings(layout=layouts(ruled=False)), HOLDS)
@settings(max_examples=10, deadline=None)
def test_a_revised_drawing_gives_the_drafters_file_back(f: bytes, hold: str) -> None:
    issued = solve_bytes(f, ASKED)[0]
    edited = change_load_text(issued, 0, b"31 kN")
    result = revised(edited, hold)
    assert strip_bytes(result)[0] == change_load_text(f, 0, b"31 kN")
    assert b"revision" in result


@given(drawings(layout=layouts(ruled=False)), HOLDS)
@settings(max_examples=6, deadline=None)
def test_a_revised_drawing_solved_again_twice_is_the_same_drawing(f: bytes, hold: str) -> None:
    edited = change_load_text(solve_bytes(f, ASKED)[0], 0, b"31 kN")
    result = revised(edited, hold, rev="A")
    asked = ASKED if hold == "rule" else PLAIN
    once = solve_bytes(result, asked)[0]
    assert solve_bytes(once, asked)[0] == once
    assert revised(result, hold, rev="B") == revised(revised(result, hold, rev="B"), hold, rev="C")


@pytest.mark.parametrize("version", ["AC1009", "AC1015", "AC1032"])
@pytest.mark.parametrize(
    "edit", [renumber_handles, shuffle_entities, round_coordinates, swap_line_ends]
)
def test_the_answer_is_the_same_after_another_program_saved_the_drawing(
    version: str, edit: object
) -> None:
    assert callable(edit)
    issued = solve_bytes(drawing(version, seed=5, layout=RULELESS), ASKED)[0]
    changed = change_load_text(issued, 1, b"22 kN")
    wanted = AskedRevision(hold="cut-length")
    _, plain = revise_bytes(changed, PLAIN, wanted)
    _, saved = revise_bytes(edit(changed), PLAIN, wanted)
    assert plain.solution is not None
    assert saved.solution is not None
    one, other = plain.solution.revised[0].movement, saved.solution.revised[0].movement
    assert [m.dy for m in other] == pytest.approx([m.dy for m in one], abs=1e-5)
    assert [m.mark for m in other] == [m.mark for m in one]
    assert other[1].load_before != other[1].load_after or other[2].load_before != 22.0


def test_the_unit_of_an_old_release_comes_from_the_record() -> None:
    issued = solve_bytes(drawing("AC1009", seed=5, layout=RULELESS), ASKED)[0]
    changed = change_load_text(issued, 1, b"22 kN")
    _, outcome = revise_bytes(changed, Options(), AskedRevision(hold="cut-length"))
    assert outcome.layout is not None
    assert outcome.layout.length_unit == "m"
