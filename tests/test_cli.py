"""The commands as a user meets them: what is printed, what is written, the exit code."""

from __future__ import annotations

import json
import subprocess
import sys
from typing import TYPE_CHECKING, Protocol

import pytest
from typer.testing import CliRunner

from dxfcable.cli import app
from dxfcable.job import CAUTION
from tests.generated import RULELESS, CableOptions, change_load_text, drawing

if TYPE_CHECKING:
    from pathlib import Path

RUNNER = CliRunner()


class Result(Protocol):
    """What a run left: the parts of the runner's result that are used here."""

    @property
    def exit_code(self) -> int: ...
    @property
    def output(self) -> str: ...
    @property
    def stdout(self) -> str: ...


def run(*arguments: object) -> Result:
    return RUNNER.invoke(app, [str(a) for a in arguments])


@pytest.fixture
def bridge(tmp_path: Path) -> Path:
    path = tmp_path / "bridge.dxf"
    path.write_bytes(drawing("AC1015", seed=3, layout=CableOptions()))
    return path


@pytest.fixture
def ruleless(tmp_path: Path) -> Path:
    path = tmp_path / "ruleless.dxf"
    path.write_bytes(drawing("AC1015", seed=3, layout=RULELESS))
    return path


def test_every_command_has_help_with_an_example() -> None:
    names = [c.name or c.callback.__name__ for c in app.registered_commands if c.callback]
    assert {"read", "solve", "strip"} <= set(names)
    for name in names:
        result = run(name, "--help")
        assert result.exit_code == 0
        assert f"dxfcable {name}" in result.output


def test_the_version_is_printed() -> None:
    assert run("--version").output.startswith("dxfcable ")


def test_read_shows_what_was_understood_and_writes_nothing(bridge: Path) -> None:
    before = bridge.read_bytes()
    result = run("read", bridge)
    assert result.exit_code == 0
    assert "12.00 kN" in result.output
    assert "rule: SAG 2.400 m" in result.output
    assert bridge.read_bytes() == before
    assert [p.name for p in bridge.parent.iterdir()] == ["bridge.dxf"]


def test_read_exits_as_solve_would(ruleless: Path) -> None:
    result = run("read", ruleless)
    assert result.exit_code == 2
    assert "no-rule" in result.output
    assert "12.00 kN" in result.output


def test_solve_then_strip_gives_the_same_file(bridge: Path, tmp_path: Path) -> None:
    solved, back = tmp_path / "solved.dxf", tmp_path / "back.dxf"
    result = run("solve", bridge, "-o", solved)
    assert result.exit_code == 0
    assert CAUTION.split(".")[0] in result.output
    assert "S-CABL-PROF" in result.output
    assert f"written: {solved}" in result.output.replace("\n", "")
    assert run("strip", solved, "-o", back).exit_code == 0
    assert back.read_bytes() == bridge.read_bytes()


def test_strip_of_an_untouched_drawing_is_a_copy_and_says_so(bridge: Path, tmp_path: Path) -> None:
    result = run("strip", bridge, "-o", tmp_path / "copy.dxf")
    assert result.exit_code == 0
    assert "nothing of ours" in result.output
    assert (tmp_path / "copy.dxf").read_bytes() == bridge.read_bytes()


def test_solve_needs_a_place_for_its_result(bridge: Path) -> None:
    result = run("solve", bridge)
    assert result.exit_code == 2
    assert "--dry-run" in result.output


def test_the_drawing_itself_is_only_written_when_asked(bridge: Path) -> None:
    before = bridge.read_bytes()
    assert run("solve", bridge, "-o", bridge).exit_code == 2
    assert run("solve", bridge, "--dry-run").exit_code == 0
    assert bridge.read_bytes() == before
    assert run("solve", bridge, "--in-place", "--backup").exit_code == 0
    assert bridge.read_bytes() != before
    assert bridge.with_name("bridge.dxf.bak").read_bytes() == before
    again = run("solve", bridge, "--in-place")
    assert "unchanged" in again.output


def test_a_rule_of_the_command_line_serves_a_cable_without_one(
    ruleless: Path, tmp_path: Path
) -> None:
    for option, value in (
        ("--sag", "2.4"),
        ("--pull", "60 kN"),
        ("--max-tension", "90 kN"),
        ("--length", "24.8 m"),
        ("--cut-length", "24.8 m"),
        ("--low-point", "-2.5"),
    ):
        result = run("solve", ruleless, "-o", tmp_path / "out.dxf", option, value, "--json")
        assert result.exit_code == 0, result.output
        rule = json.loads(result.stdout)["cables"][0]["rule"]
        assert rule["kind"] == option.removeprefix("--").replace("-", "_")


@pytest.mark.parametrize(
    "arguments",
    [
        ("--sag", "2", "--pull", "3 kN"),
        ("--cable", "C1"),
        ("--sag", "much"),
        ("--pull", "60"),
        ("--sag", "2", "--cable", "C7"),
        ("--sag", "-2"),
        ("--units", "furlong"),
        ("--plot-scale", "huge", "--sag", "2"),
        ("--settings", "missing.toml"),
        ("--frobnicate",),
    ],
)
def test_bad_usage_is_refused_in_words(
    ruleless: Path, tmp_path: Path, arguments: tuple[str, ...]
) -> None:
    output = tmp_path / "out.dxf"
    command = [
        sys.executable,
        "-m",
        "dxfcable",
        "solve",
        str(ruleless),
        "-o",
        str(output),
        *arguments,
    ]
    done = subprocess.run(command, capture_output=True, text=True, check=False)
    assert done.returncode == 2, done.stderr
    assert "Traceback" not in done.stderr
    assert done.stderr.strip()
    assert not output.exists()


def test_a_refused_drawing_has_its_document_and_nothing_is_written(
    ruleless: Path, tmp_path: Path
) -> None:
    output = tmp_path / "out.dxf"
    result = run("solve", ruleless, "-o", output, "--json")
    assert result.exit_code == 2
    document = json.loads(result.stdout)
    assert document["format"] == 1
    assert document["error"]["code"] == "no-rule"
    assert not output.exists()


def test_an_old_result_stays_when_a_solve_is_refused(ruleless: Path, tmp_path: Path) -> None:
    output = tmp_path / "out.dxf"
    output.write_bytes(b"old")
    assert run("solve", ruleless, "-o", output).exit_code == 2
    assert output.read_bytes() == b"old"


@pytest.mark.parametrize(
    ("content", "word"),
    [
        (b"AC1027\x00\x00\x00\x00", "DWG"),
        (b"AutoCAD Binary DXF\r\n\x1a\x00", "binary"),
        (b"", "empty"),
        (b"hello", "no record"),
    ],
)
def test_what_is_no_ascii_dxf_is_refused_with_how_to_save_it(
    tmp_path: Path, content: bytes, word: str
) -> None:
    path = tmp_path / "odd.dxf"
    path.write_bytes(content)
    for command in (
        ("read", path),
        ("solve", path, "--dry-run"),
        ("strip", path, "-o", tmp_path / "o.dxf"),
    ):
        result = run(*command)
        assert result.exit_code == 2
        assert word in result.output
        assert "Save it" in result.output or "DXF" in result.output


def test_a_missing_file_is_refused(tmp_path: Path) -> None:
    result = run("read", tmp_path / "none.dxf")
    assert result.exit_code == 2
    assert "none.dxf" in result.output.replace("\n", "")


def test_of_many_drawings_all_are_tried_and_the_worst_code_counts(
    bridge: Path, ruleless: Path, tmp_path: Path
) -> None:
    folder = tmp_path / "solved"
    result = run("solve", ruleless, bridge, "-o", folder, "--json")
    assert result.exit_code == 2
    drawings = json.loads(result.stdout)["drawings"]
    assert [d["drawing"] for d in drawings] == ["ruleless.dxf", "bridge.dxf"]
    assert "error" in drawings[0]
    assert drawings[1]["cables"]
    assert [p.name for p in folder.iterdir()] == ["bridge.dxf"]


def test_the_document_of_a_solve_has_the_stated_keys(bridge: Path) -> None:
    document = json.loads(run("solve", bridge, "--dry-run", "--json").stdout)
    assert document["length_unit"] == "m"
    assert document["force_unit"] == "kN"
    cable = document["cables"][0]
    assert set(cable) >= {
        *("mark", "status", "rule", "under", "level", "supports_rigid", "weight", "ea"),
        *("weight_case", "capacity", "utilization", "loads_source", "horizontal", "max_tension"),
        *("governs", "sag", "length", "unstressed_length", "points", "segments", "spans"),
        *("reactions", "force_diagrams", "anchorages", "clearance", "states", "envelope"),
    }
    assert set(cable["points"][1]) >= {"mark", "x", "elevation", "load", "support", "hanger"}
    assert cable["points"][0]["support"] is True
    diagram = cable["force_diagrams"][0]
    scale = diagram["scale_force_per_length"]
    assert (diagram["pole"][0] - diagram["load_line"][0][0]) * scale == pytest.approx(
        cable["horizontal"]
    )
    assert len(diagram["rays"]) == len(cable["segments"])


def test_the_document_of_read_has_the_stated_keys(bridge: Path) -> None:
    document = json.loads(run("read", bridge, "--json").stdout)
    assert set(document) >= {
        "format",
        "drawing",
        "version",
        "length_unit",
        "force_unit",
        "cables",
        "findings",
    }
    cable = document["cables"][0]
    assert set(cable["supports"][0]) >= {"mark", "x", "y", "elevation", "kind"}
    assert cable["loads"][0]["cases"] == {"load": 12.0}
    assert cable["rule"] == {"kind": "sag", "value": 2.4}
    assert all(
        set(f) >= {"code", "severity", "cable", "handle", "line", "layer", "at", "raw", "text"}
        for f in document["findings"]
    )


def test_settings_beside_the_drawing_are_found(bridge: Path, tmp_path: Path) -> None:
    (tmp_path / "dxfcable.toml").write_text('[layers]\nprofile = "K-LINIE"\n', encoding="utf-8")
    run("solve", bridge, "-o", tmp_path / "out.dxf")
    assert b"K-LINIE" in (tmp_path / "out.dxf").read_bytes()
    (tmp_path / "dxfcable.toml").write_text("[layers]\nprofil = 1\n", encoding="utf-8")
    result = run("solve", bridge, "--dry-run")
    assert result.exit_code == 2
    assert "profil" in result.output


def test_a_changed_load_is_solved_anew(bridge: Path, tmp_path: Path) -> None:
    solved = tmp_path / "solved.dxf"
    run("solve", bridge, "-o", solved)
    solved.write_bytes(change_load_text(solved.read_bytes(), 0, b"20 kN"))
    document = json.loads(run("solve", solved, "--in-place", "--json").stdout)
    assert document["cables"][0]["points"][1]["load"] == 20.0


def test_a_fault_of_our_own_shows_its_traceback_and_exits_3() -> None:
    code = (
        "import dxfcable.commands.reading as c, dxfcable.cli as cli, sys\n"
        "def broken(*_): raise ZeroDivisionError('planted')\n"
        "c.read_all = broken\nsys.argv = ['dxfcable', 'read', 'x.dxf']\ncli.main()"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)
    assert done.returncode == 3
    assert "planted" in done.stderr
    assert "fault of dxfcable" in done.stderr


def test_help_loads_no_heavy_library() -> None:
    code = (
        "import sys, dxfcable.cli\n"
        "heavy = {'ezdxf', 'numpy', 'shapely', 'rich.table', 'rich.progress'} & set(sys.modules)\n"
        "assert not heavy, heavy"
    )
    subprocess.run([sys.executable, "-c", code], check=True)


def test_drawings_of_one_name_are_refused_before_anything_is_written(
    bridge: Path, tmp_path: Path
) -> None:
    other = tmp_path / "B"
    other.mkdir()
    (other / bridge.name).write_bytes(bridge.read_bytes())
    drawings = [str(bridge), str(other / bridge.name)]
    command = [sys.executable, "-m", "dxfcable", "solve", *drawings, "-o", str(tmp_path / "solved")]
    done = subprocess.run(command, capture_output=True, text=True, check=False)
    assert done.returncode == 2
    assert bridge.name in done.stderr
    assert not (tmp_path / "solved").exists()


@pytest.mark.parametrize(
    "arguments", [("-o", "x.dwg"), ("-o", "x.dxf", "--dry-run"), ("--dry-run", "--backup")]
)
def test_options_that_say_nothing_together_are_refused(
    bridge: Path, arguments: tuple[str, ...]
) -> None:
    command = [sys.executable, "-m", "dxfcable", "solve", str(bridge), *arguments, "--json"]
    done = subprocess.run(command, capture_output=True, text=True, check=False, cwd=bridge.parent)
    assert done.returncode == 2
    assert json.loads(done.stdout)["error"]["code"] == "usage"


def test_a_rule_that_is_not_used_is_told(bridge: Path) -> None:
    document = json.loads(run("solve", bridge, "--dry-run", "--json", "--pull", "60 kN").stdout)
    assert "rule-unused" in {f["code"] for f in document["findings"]}
    assert document["cables"][0]["rule"]["kind"] == "sag"


def test_a_text_edited_by_hand_is_told_at_every_solve(bridge: Path, tmp_path: Path) -> None:
    solved = tmp_path / "solved.dxf"
    run("solve", bridge, "-o", solved)
    solved.write_bytes(solved.read_bytes().replace(b"CABLE C1\n", b"SEEN BY JO\n", 1))
    for _ in range(2):
        document = json.loads(run("solve", solved, "--in-place", "--json").stdout)
        told = [f for f in document["findings"] if f["code"] == "edited"]
        assert len(told) == 1
        assert "SEEN BY JO" in told[0]["text"]
    fresh = json.loads(run("solve", solved, "--in-place", "--json", "--fresh").stdout)
    assert "edited" not in {f["code"] for f in fresh["findings"]}
    assert b"SEEN BY JO" not in solved.read_bytes()


@pytest.mark.parametrize("typed", [["solve", "--nope"], ["revise", "x.dxf"], ["unknown"]])
def test_what_makes_no_command_is_refused_in_json_too(typed: list[str]) -> None:
    done = subprocess.run(
        [sys.executable, "-m", "dxfcable", *typed, "--json"],
        capture_output=True,
        text=True,
        check=False,
    )
    assert done.returncode == 2
    document = json.loads(done.stdout)
    assert document["error"]["code"] == "usage"
    assert document["error"]["text"] in done.stderr
