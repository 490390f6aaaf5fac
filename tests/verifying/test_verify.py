"""An issued drawing proves itself, and one thing done to it shows as that thing.

The scenarios are invented. Laws: an untouched drawing passes whatever program saved it; a
single entity moved, edited, deleted or copied fails by its handle, with and without marks.
"""

from __future__ import annotations

import functools
import json
import re
from typing import TYPE_CHECKING

import pytest

from dxfcable.commands.running import Asked
from dxfcable.commands.verifying import verified, verify_all
from dxfcable.errors import DxfcableError
from dxfcable.job import (
    CAUTION,
    AskedRevision,
    Options,
    revise_bytes,
    solve_bytes,
    strip_bytes,
)
from dxfcable.lengths import format_length
from tests.generated import (
    change_load_text,
    load_texts,
    renumber_handles,
    round_coordinates,
    shuffle_entities,
    swap_line_ends,
)
from tests.generated.pairs import entities, rewrite, tokens
from tests.issued_cases import SCENARIOS, Scenario, drawn, issued, saved_by_a_library
from tests.proving import failed, handles, opened, proof_as_issued, proof_of, told
from tests.tampering import open_issued, unmarked

if TYPE_CHECKING:
    from collections.abc import Callable
    from pathlib import Path

NAMES = tuple(SCENARIOS)
UNTOUCHED: dict[str, Callable[[bytes], bytes]] = {
    "as issued": bytes,
    "saved by a library": saved_by_a_library,
    "handles renumbered": renumber_handles,
    "rounded to 1e-8": lambda data: round_coordinates(data, 8),
    "rounded to 1e-6": lambda data: round_coordinates(data, 6),
    "in another order": shuffle_entities,
    "other line ends": swap_line_ends,
}


MARKS, NO_MARKS = True, False
BY_MARKS = pytest.mark.parametrize("has_marks", [MARKS, NO_MARKS], ids=["marks", "no marks"])


@pytest.mark.parametrize(
    ("name", "edit", "has_marks"),
    [(n, "saved by a library", MARKS) for n in NAMES]
    + [("heavy", e, MARKS) for e in UNTOUCHED if not e.startswith("saved")]
    + [(n, "saved by a library", NO_MARKS) for n in ("heavy", "feet")]
    + [(n, "rounded to 1e-8", NO_MARKS) for n in ("light", "feet", "pair")]
    + [("cases", "in another order", NO_MARKS), ("heavy", "rounded to 1e-6", NO_MARKS)],
)
def test_an_untouched_drawing_passes(name: str, edit: str, has_marks: bool) -> None:
    data = UNTOUCHED[edit](issued(name))
    proof = proof_of(data if has_marks else unmarked(data))
    assert proof.passed, told(proof)
    assert proof.exit_code == 0
    assert not [f for f in proof.findings if f.code == "stale"]
    assert len(proof.cables) == SCENARIOS[name].cables


def test_every_law_is_held_against_something() -> None:
    for name in NAMES:
        for cable in proof_as_issued(name).cables:
            held = {check.name: check for check in cable.checks}
            for law in (
                *("rays parallel", "polygon closed", "load line equals loads"),
                *("closing ray parallel", "labels to scale", "elevations at their points"),
                *("governing rule", "schedule", "entities as issued", "profile at supports"),
            ):
                assert held[law].count > 0, (name, law)
                assert held[law].worst is not None
            assert ("joint polygons closed" in held) is SCENARIOS[name].has_masts
            assert ("curve of the cable's weight" in held) is (name == "heavy")


_ENDS = [
    ("C1/ray/2", 11, "polygon closed"),
    ("C1/ray/2", 11, "rays parallel"),
    ("C1/ray/2", 10, "rays parallel"),
    ("C1/load-line/2", 11, "polygon closed"),
    ("C1/closing-ray/1", 11, "closing ray parallel"),
    ("C1/closing-string/1", 10, "closing ray parallel"),
    ("C1/hanger/P2", 11, "hangers"),
    ("C1/joint/S1/side/stay_1", 11, "joint polygons closed"),
    ("C1/sag/1", 11, "strings and dimensions"),
    ("C1/pole-distance/1", 11, "strings and dimensions"),
    ("C1/diagram/scale-bar", 11, "scale in words and as a bar"),
]


@pytest.mark.parametrize(
    ("target", "code", "law", "has_marks"),
    [(*end, MARKS) for end in _ENDS] + [(*end, NO_MARKS) for end in _ENDS[1::3]],
)
def test_a_moved_end_fails_its_own_law_by_handle(
    target: str, code: int, law: str, has_marks: bool
) -> None:
    data = opened("light").moved(target, code, 0.004, 0.007)
    proof = proof_of(data if has_marks else unmarked(data))
    found = [d for c in proof.cables for d in c.differences if d.check == law]
    assert opened("light").handle(target) in {d.handle for d in found}, told(proof)
    check = next(c for c in proof.cables[0].checks if c.name == law)
    assert not check.passed
    assert check.handle is not None
    assert check.worst is not None
    assert check.tolerance is not None
    assert check.worst > check.tolerance


@BY_MARKS
def test_a_moved_vertex_is_blamed_on_the_profile_and_not_on_the_rays(has_marks: bool) -> None:
    file = opened("light")
    data = file.moved("C1/profile/1", 10, 0.0, 0.002, number=2)
    proof = proof_of(data if has_marks else unmarked(data))
    blamed = {d.handle for c in proof.cables for d in c.differences if d.check == "rays parallel"}
    assert blamed == {file.handle("C1/profile/1")}
    assert "elevations at their points" in failed(proof)


@pytest.mark.parametrize("name", ["heavy", "pair"])
def test_an_amount_is_told_with_the_handle(name: str) -> None:
    file = opened(name)
    by = 20.0 if SCENARIOS[name].unit == "mm" else 0.02
    proof = proof_of(file.moved("C1/ray/1", 11, 0.0, by))
    handle = file.handle("C1/ray/1")
    amounts = [
        d.amount
        for c in proof.cables
        for d in c.differences
        if d.check == "polygon closed" and d.handle == handle
    ]
    assert amounts == [pytest.approx(by, rel=1e-6)]
    finding = next(f for f in proof.findings if f.code == "verify-polygon-closed")
    assert handle is None or handle in {f.handle for f in proof.findings}
    assert finding.line is not None


@pytest.mark.parametrize(
    ("name", "has_marks"),
    [("heavy", MARKS), ("cases", NO_MARKS), ("feet", MARKS), ("feet", NO_MARKS)],
)
def test_a_changed_load_text_is_found_and_makes_the_drawing_stale(
    name: str, has_marks: bool
) -> None:
    words = load_texts(issued(name))[1]
    changed = re.sub(rb"(\d)(?=[\d. ]*k)", lambda m: b"%d" % ((int(m[1]) + 3) % 10), words, count=1)
    assert changed != words
    data = change_load_text(issued(name), 1, changed)
    proof = proof_of(data if has_marks else unmarked(data))
    assert not proof.passed
    assert "load line equals loads" in failed(proof)
    assert any(cable.stale for cable in proof.cables) is has_marks


def test_a_load_text_that_no_longer_reads_is_stale_by_the_record() -> None:
    proof = proof_of(change_load_text(issued("light"), 0, b"8.2 t"))
    (cable,) = proof.cables
    assert cable.reasons == ("load P1 was 12, now nothing that reads",)
    assert "drawing reads" in failed(proof)
    assert proof.exit_code == 1


def _on_layer(
    data: bytes, layer: bytes, code: int, number: int, change: Callable[[bytes], bytes]
) -> bytes:
    """Change a tag of the first entity on a layer."""
    found = tokens(data)
    for entity in entities(found):
        own = range(entity.first, entity.stop)
        if any(found[k].code == 8 and found[k].name.upper() == layer for k in own):
            at = [k for k in own if found[k].code == code][number]
            return rewrite(data, {at: change(found[at].name)}, found)
    raise AssertionError(layer)


@pytest.mark.parametrize("name", ["light", "heavy", "feet"])
def test_a_moved_support_is_stale_though_the_layout_no_longer_reads(name: str) -> None:
    def lifted(value: bytes) -> bytes:
        return repr(float(value) + 0.02).encode()

    proof = proof_of(_on_layer(issued(name), b"S-CABL-SUPP", 20, 0, lifted))
    assert any("support S1" in reason for cable in proof.cables for reason in cable.reasons)
    assert proof.exit_code == 1


def test_a_support_moved_with_its_string_is_found_without_a_record() -> None:
    scenario = Scenario(has_masts=False, has_deck=False)
    data, _ = solve_bytes(drawn(scenario), Options())

    def lifted(value: bytes) -> bytes:
        return repr(float(value) + 0.02).encode()

    moved = _on_layer(data, b"S-CABL-SUPP", 20, 0, lifted)
    moved = unmarked(_on_layer(moved, b"S-CABL-STRG", 20, 0, lifted))
    assert "profile at supports" in failed(proof_of(moved))


RULES = {
    "light": (b"2.4 m", b"2.41 m"),
    "heavy": (b"90 kN", b"90.01 kN"),
    "cases": (b"109.6", b"109.601"),
    "feet": (b"62'-3\"", b"62'-3 1/16\""),
    "pair": (b"55 kN", b"55.01 kN"),
}


@pytest.mark.parametrize(
    ("name", "has_marks"),
    [("heavy", MARKS), ("cases", NO_MARKS), ("feet", MARKS), ("feet", NO_MARKS)],
)
def test_a_changed_rule_is_found(name: str, has_marks: bool) -> None:
    before, after = RULES[name]

    def other(value: bytes) -> bytes:
        assert value == before
        return after

    data = _on_layer(issued(name), b"S-CABL-DATA", 1, 1, other)
    proof = proof_of(data if has_marks else unmarked(data))
    assert "governing rule" in failed(proof)
    assert any(cable.stale for cable in proof.cables) is has_marks


@functools.cache
def _off_by(share: float, has_block: bool) -> bytes:
    """Issue a drawing consistently with another pull, and write the old rule into it."""
    wrong = Scenario(data=(("SAG", f"{2.4 / share:.9f} m"), ("EA", "9000 kN")))
    data, _ = solve_bytes(drawn(wrong), Options())
    assert format_length(2.4 / share, "m").encode() in data
    shown = open_issued(data).retexted("C1/schedule/summary/rule/value", "SAG 2.400 m")
    words = b"2.4 m" if has_block else b""
    return _on_layer(shown, b"S-CABL-DATA", 1, 1, lambda _: words)


@pytest.mark.parametrize("share", [1.02])
@pytest.mark.parametrize("has_block", [True, False], ids=["data block", "schedule's words"])
@BY_MARKS
def test_a_drawing_painted_consistently_with_a_wrong_pull_fails_by_its_rule(
    share: float, has_block: bool, has_marks: bool
) -> None:
    data = _off_by(share, has_block)
    proof = proof_of(data if has_marks else unmarked(data))
    assert "governing rule" in failed(proof)
    amounts = [d.amount for c in proof.cables for d in c.differences if d.check == "governing rule"]
    assert all(a == pytest.approx(abs(2.4 - 2.4 / share), abs=0.001) for a in amounts)
    if not has_marks:
        assert failed(proof) == {"governing rule"}


def test_loads_that_a_table_overruled_are_proved_by_their_labels() -> None:
    table = "mark,load\nP2,20 kN\n"
    data, _ = solve_bytes(drawn(SCENARIOS["light"]), Options(loads=table))
    assert b"(drawn 15.5 kN)" in data
    for each in (data, unmarked(data)):
        assert proof_of(each).passed, told(proof_of(each))
    file = open_issued(data)
    changed = file.retexted("C1/load/P2", "21 kN (drawn 15.5 kN)")
    for each in (changed, unmarked(changed)):
        assert "load line equals loads" in failed(proof_of(each))


@pytest.mark.parametrize(
    ("hold", "delta", "weight"),
    [
        ("rule", None, ""),
        ("cut-length", "30 K", ""),
        ("cut-length", "-20 K", "0.3 kN/m"),
    ],
)
def test_a_revised_drawing_proves_itself(hold: str, delta: str | None, weight: str) -> None:
    data = (("SAG", "2.4 m"), ("EA", "9000 kN"), ("ALPHA", "12e-6 /C"), ("WEIGHT", weight))
    first, _ = solve_bytes(drawn(Scenario(data=data)), Options())
    changed = change_load_text(first, 1, b"21 kN")
    assert not proof_of(changed).passed
    asked = AskedRevision(hold=hold, delta_t=delta)
    revised, _ = revise_bytes(changed, Options(), asked)
    for each in (revised, unmarked(revised)):
        assert proof_of(each).passed, told(proof_of(each))


def test_units_come_from_the_record_or_the_words_where_the_header_has_none() -> None:
    data = issued("feet")
    assert b"$INSUNITS" not in data
    assert proof_of(data).passed
    assert proof_of(unmarked(data)).passed


def test_a_copy_is_told_by_its_handle_with_marks() -> None:
    proof = proof_of(opened("light").doubled("C1/tension/2"))
    assert "F0000" in handles(proof)
    assert failed(proof) == {"entities as issued"}


def test_a_label_that_the_drafter_moved_is_no_difference() -> None:
    file = opened("light")
    data = file.moved("C1/tension/2", 11, 0.6, -0.8)
    assert proof_of(data).passed
    assert proof_of(unmarked(data)).passed


def test_a_drawing_that_was_not_issued_is_refused_with_a_sentence() -> None:
    stripped, _ = strip_bytes(issued("light"))
    with pytest.raises(DxfcableError) as caught:
        proof_of(stripped)
    assert caught.value.code == "not-issued"
    assert "solve" in caught.value.remedy


def test_the_document_has_the_public_keys() -> None:
    document = verified("x.dxf", proof_of(opened("light").without("C1/ray/1")))
    assert list(document)[:4] == ["format", "drawing", "passed", "cables"]
    whole = json.loads(json.dumps(document, allow_nan=False))
    assert whole["format"] == 1
    assert whole["passed"] is False
    (cable,) = whole["cables"]
    assert cable["mark"] == "C1"
    assert cable["stale"] is False
    check = cable["checks"][0]
    assert {"name", "passed", "worst", "tolerance", "handle"} <= set(check)
    assert whole["findings"][0]["code"].startswith("verify-")


def test_the_command_prints_each_check_each_difference_and_the_caution(
    tmp_path: Path, capsys: pytest.CaptureFixture[str]
) -> None:
    path = tmp_path / "issued.dxf"
    path.write_bytes(issued("light"))
    assert verify_all([path], Asked()) == 0
    said = capsys.readouterr().out
    assert "passed  rays parallel: worst" in said
    assert "proved" in said
    assert CAUTION in " ".join(said.split())
    path.write_bytes(opened("light").moved("C1/ray/2", 11, 0.0, 0.02))
    assert verify_all([path], Asked()) == 1
    said = capsys.readouterr().out
    assert "FAILED  rays parallel" in said
    assert f"handle {opened('light').handle('C1/ray/2')}" in said
    path.write_bytes(strip_bytes(issued("light"))[0])
    assert verify_all([path], Asked()) == 2
    assert "nothing to verify" in capsys.readouterr().err
    path.write_bytes(issued("light"))
    assert verify_all([path], Asked(as_json=True)) == 0
    assert json.loads(capsys.readouterr().out)["passed"] is True


def test_a_cut_cable_without_stiffness_is_proved_and_its_head_held() -> None:
    scenario = Scenario(loads=("12 kN", "9 kN"), has_masts=False)
    data, _ = solve_bytes(drawn(scenario), Options(cut=True))
    file = open_issued(data)
    head = next(key for key in file.ours if file.kind(key) == "TEXT" and "CUT, " in file.text(key))
    for each in (data, unmarked(data)):
        assert proof_of(each).passed, told(proof_of(each))
    for each in (file.without(head), unmarked(file.without(head))):
        assert "schedule" in failed(proof_of(each))
