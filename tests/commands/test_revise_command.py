"""`revise`, `solve --cut`, `--reform` and `--combo` as a user meets them."""

from __future__ import annotations

import json
from typing import TYPE_CHECKING

import pytest

from tests.generated import CableOptions, change_load_text, drawing
from tests.test_cli import run

if TYPE_CHECKING:
    from pathlib import Path

F = drawing("AC1015", seed=3, layout=CableOptions())


@pytest.fixture
def issued(tmp_path: Path) -> Path:
    path = tmp_path / "bridge.dxf"
    path.write_bytes(F)
    assert run("solve", path, "-o", tmp_path / "issued.dxf", "--units", "m").exit_code == 0
    return tmp_path / "issued.dxf"


def edited(path: Path) -> Path:
    path.write_bytes(change_load_text(path.read_bytes(), 1, b"22 kN"))
    return path


def document(*arguments: object, code: int) -> dict[str, object]:
    result = run(*arguments, "--json")
    assert result.exit_code == code, result.output
    found: dict[str, object] = json.loads(result.stdout)
    return found


def first(found: dict[str, object]) -> dict[str, object]:
    cables = found["cables"]
    assert isinstance(cables, list)
    cable: dict[str, object] = cables[0]
    return cable


def codes(found: dict[str, object]) -> set[str]:
    findings = found["findings"]
    assert isinstance(findings, list)
    return {f["code"] for f in findings}


def test_an_edited_load_is_answered_with_what_moves(issued: Path, tmp_path: Path) -> None:
    # Without EA the cable runs as inextensible, which an engineer must see: exit 1.
    result = document(
        "revise", edited(issued), "--hold", "cut-length", "-o", tmp_path / "a.dxf", code=1
    )
    cable = first(result)
    assert (cable["status"], cable["held"]) == ("cut", "cut-length")
    assert isinstance(cable["before"], dict)
    moved = cable["movement"]
    assert isinstance(moved, list)
    second = next(m for m in moved if m["mark"] == "P2")
    assert (second["load_before"], second["load_after"]) == (15.0, 22.0)
    assert second["dy"] < 0.0
    assert second["elevation_after"] - second["elevation_before"] == pytest.approx(second["dy"])
    wanted = {"dx", "dy", "tension_before", "tension_after", "lean_deg"}
    assert wanted <= set(second)
    assert {"cut-inextensible", "loads-changed"} <= codes(result)


def test_holding_the_rule_forms_anew(issued: Path, tmp_path: Path) -> None:
    output = tmp_path / "a.dxf"
    cable = first(document("revise", edited(issued), "--hold", "rule", "-o", output, code=0))
    assert (cable["status"], cable["held"]) == ("formed", "rule")
    assert cable["sag"] == pytest.approx(2.4)


def test_a_load_table_overrules_and_what_it_leaves_out_is_kept(
    issued: Path, tmp_path: Path
) -> None:
    table = tmp_path / "loads.csv"
    table.write_text("mark,load\nP2,22 kN\n", encoding="utf-8")
    out = tmp_path / "a.dxf"
    run("revise", issued, "--hold", "rule", "--loads", table, "-o", out)
    cable = first(document("revise", out, "--hold", "rule", "-o", tmp_path / "b.dxf", code=0))
    points = cable["points"]
    assert isinstance(points, list)
    assert [p["load"] for p in points] == [0.0, 12.0, 22.0, 9.5, 0.0]
    assert (tmp_path / "b.dxf").read_bytes() == out.read_bytes()


def test_a_cut_cable_stands_and_says_that_its_loads_changed(issued: Path, tmp_path: Path) -> None:
    out = tmp_path / "cut.dxf"
    assert (
        first(document("solve", issued, "--cut", "-o", out, "--units", "m", code=1))["status"]
        == "cut"
    )
    again = document("solve", edited(out), "-o", tmp_path / "b.dxf", "--units", "m", code=1)
    assert "cut-loads-changed" in codes(again)
    text = next(f for f in again["findings"] if f["code"] == "cut-loads-changed")  # type: ignore[attr-defined]  # a list
    assert "revise" in text["remedy"]
    reformed = document("solve", out, "--reform", "-o", tmp_path / "c.dxf", "--units", "m", code=0)
    assert first(reformed)["status"] == "formed"
    assert "cut-discarded" in codes(reformed)


def test_states_and_envelope_stand_in_the_document(issued: Path) -> None:
    # The last hanger carries nothing in the left half: an engineer must see that.
    found = first(
        document(
            "solve",
            issued,
            "--dry-run",
            "--units",
            "m",
            "--combo",
            "load",
            "--combo",
            "1.5load [left half]",
            code=1,
        )
    )
    states = found["states"]
    assert isinstance(states, list)
    assert [s["combo"] for s in states] == ["load", "1.5load [left half]"]
    assert {"level", "horizontal", "max_tension", "points", "segments", "reactions"} <= set(
        states[0]
    )
    assert {"mark", "dx", "dy"} <= set(states[0]["supports"][0])
    assert states[0]["horizontal"] == pytest.approx(found["horizontal"])
    envelope = found["envelope"]
    assert isinstance(envelope, dict)
    assert set(envelope["max_tension"]) == {"value", "combo"}


@pytest.mark.parametrize(
    "asked",
    [
        ["--hold", "nothing"],
        ["--hold", "rule", "--delta-t", "30 K"],
        ["--hold", "cut-length", "--delta-t", "30 apples"],
    ],
)
def test_a_revision_that_says_nothing_is_refused(issued: Path, asked: list[str]) -> None:
    assert run("revise", issued, "--dry-run", *asked).exit_code == 2


def test_a_temperature_needs_a_coefficient(issued: Path) -> None:
    refused = document(
        "revise", issued, "--hold", "cut-length", "--delta-t", "30 K", "--dry-run", code=2
    )
    assert refused["error"]["code"] == "no-alpha"  # type: ignore[index]  # an object


def test_a_drawing_that_was_never_solved_cannot_be_revised(tmp_path: Path) -> None:
    path = tmp_path / "raw.dxf"
    path.write_bytes(F)
    refused = document("revise", path, "--hold", "rule", "--units", "m", "--dry-run", code=2)
    assert refused["error"]["code"] == "no-record"  # type: ignore[index]  # an object


def test_what_was_typed_for_the_row_is_in_the_drawing(issued: Path, tmp_path: Path) -> None:
    out = tmp_path / "a.dxf"
    run(
        "revise",
        edited(issued),
        "--hold",
        "rule",
        "-o",
        out,
        "--rev",
        "B",
        "--description",
        "heavier rail",
        "--by",
        "NN",
        "--date",
        "2026-03-04",
    )
    text = out.read_bytes()
    for word in (b"HEAVIER RAIL", b"2026-03-04", b"NN"):
        assert word in text.upper()
