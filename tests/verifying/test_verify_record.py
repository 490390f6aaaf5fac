"""What the record adds to a proof: what was overruled at the issue, and what is missing since."""

from __future__ import annotations

import functools

import pytest

from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.strip import plan_strip
from dxfcable.job import AskedRevision, AskedRule, Options, revise_bytes, solve_bytes
from dxfcable.model import RuleKind, Severity
from tests.generated import change_load_text
from tests.issued_cases import Scenario, drawn, issued, saved_by_a_library
from tests.proving import failed, handles, opened, proof_of, told
from tests.tampering import open_issued, unmarked

_CASES = Scenario(
    loads=("D=8 kN L=5 kN", "D=6 kN L=9 kN"),
    data=(("SAG", "2.4 m"), ("UNDER", "D + L")),
    has_masts=False,
    has_deck=False,
)
OVERRULED = {
    "under": Options(under="D + 0.5L"),
    "rule": Options(rule=AskedRule(kind=RuleKind.PULL, text="50 kN"), cable="C1"),
}


@functools.cache
def drawing() -> bytes:
    return drawn(_CASES)


@functools.cache
def overruled(what: str) -> bytes:
    data, _ = solve_bytes(drawing(), OVERRULED[what])
    return data


@pytest.mark.parametrize("what", OVERRULED)
def test_what_the_command_line_overruled_is_noted_and_no_failure(what: str) -> None:
    proof = proof_of(overruled(what))
    assert proof.passed, told(proof)
    (note,) = proof.findings
    assert (note.code, note.severity) == (f"{what}-overruled", Severity.NOTE)
    words = ("PULL 50 kN", "SAG 2.4 m") if what == "rule" else ('"D + 0.5L"', '"D + L"')
    assert all(w in note.text for w in words)
    assert proof_of(saved_by_a_library(overruled(what))).passed


@pytest.mark.parametrize("what", OVERRULED)
def test_solving_twice_with_an_override_writes_the_same_file(what: str) -> None:
    again, _ = solve_bytes(overruled(what), OVERRULED[what])
    assert again == overruled(what)
    plain, _ = solve_bytes(overruled(what), Options())
    assert plain == solve_bytes(drawing(), Options())[0]
    assert not proof_of(plain).findings


def test_without_a_record_an_override_contradicts_its_data_block() -> None:
    assert failed(proof_of(unmarked(overruled("under")))) == {"combination"}
    assert failed(proof_of(unmarked(overruled("rule")))) == {"governing rule"}


@pytest.mark.parametrize(
    ("what", "before", "after", "law"),
    [("under", "D + L", "D + 2L", "combination"), ("rule", "2.4 m", "2.5 m", "governing rule")],
)
def test_a_data_block_edited_after_an_override_is_stale(
    what: str, before: str, after: str, law: str
) -> None:
    data = overruled(what)
    line, other = f"\n{before}\n".encode(), f"\n{after}\n".encode()
    assert data.count(line) == 1
    proof = proof_of(data.replace(line, other))
    (cable,) = proof.cables
    (reason,) = cable.reasons
    assert before in reason
    assert after in reason
    assert law in failed(proof)


def test_a_data_block_brought_in_line_with_an_override_is_held_again() -> None:
    proof = proof_of(overruled("under").replace(b"\nD + L\n", b"\nD + 0.5L\n"))
    assert proof.passed, told(proof)
    assert not proof.findings


def test_a_rule_deleted_from_the_data_block_is_stale() -> None:
    data, _ = solve_bytes(drawing(), Options())
    (cable,) = proof_of(data.replace(b"\n2.4 m\n", b"\n\n")).cables
    assert cable.reasons == ("the data block said SAG 2.4 m, now no rule",)
    assert not [check for check in cable.checks if not check.passed]


def test_a_revision_that_fills_the_rule_from_the_record_records_none_as_stated() -> None:
    silent = Scenario(loads=("12 kN", "9 kN"), data=(), has_masts=False, has_deck=False)
    asked = Options(rule=AskedRule(kind=RuleKind.SAG, text="2.4 m"))
    first, _ = solve_bytes(drawn(silent), asked)
    changed = change_load_text(first, 1, b"10 kN")
    revised, _ = revise_bytes(changed, Options(), AskedRevision(hold="rule"))
    for data in (first, revised):
        (record,) = plan_strip(scan(data)).cables
        assert record.rule.kind is RuleKind.SAG
        assert record.stated_rule is None
        assert record.stated_under is None
        assert proof_of(data).passed, told(proof_of(data))


@pytest.mark.parametrize("name", ["cases", "light"])
def test_a_leader_that_is_missing_is_named(name: str) -> None:
    file = opened(name)
    leaders = [key for key in file.ours if key.endswith("/leader")]
    assert leaders
    proof = proof_of(file.without(leaders[0]))
    assert failed(proof) == {"entities as issued"}
    assert f"{leaders[0]} is missing" in told(proof)


def test_several_missing_entities_are_counted_by_part() -> None:
    data = issued("small")
    for name in ("C1/schedule/title", "C1/schedule/frame", "C1/letter/A"):
        data = open_issued(data).without(name)
    proof = proof_of(data)
    assert "3 entities of ours are missing: 2 of C1/schedule, 1 elsewhere" in told(proof)


def test_a_copy_does_not_stand_in_for_what_is_missing() -> None:
    data = opened("small").doubled("C1/ray/1")
    proof = proof_of(open_issued(data).without("C1/letter/A"))
    assert "C1/letter/A is missing" in told(proof)


def test_linework_moved_within_a_part_that_was_moved_is_found() -> None:
    file = opened("small")
    moved = file.part_moved("C1/diagram", 40.0, -3.0)
    proof = proof_of(moved)
    assert proof.passed, told(proof)
    strayed = open_issued(moved).part_moved("C1/diagram", 0.02, 0.0, only="C1/diagram/scale-bar")
    proof = proof_of(strayed)
    assert file.handle("C1/diagram/scale-bar") in handles(proof)
    assert "C1/diagram/scale-bar was moved by itself" in told(proof)


@pytest.mark.parametrize("name", ["small feet", "pair"])
def test_the_record_of_wholeness_is_one_short_line(name: str) -> None:
    (profile,) = [key for key in opened(name).ours if key == "C1/profile/1"]
    (line,) = [text for text in _lines_of(name, profile) if text.startswith("whole,")]
    assert len(line) < 60


def _lines_of(name: str, key: str) -> list[str]:
    """Return the lines of the record that an entity carries."""
    file = opened(name)
    own = file.tokens[file.ours[key].first : file.ours[key].stop]
    strings = [t.name.decode() for t in own if t.code == 1000 and t.name.startswith(b"record=")]
    return "".join(s.removeprefix("record=") for s in strings[1:]).split(";")
