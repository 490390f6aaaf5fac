"""Commands read plain values as typer does, and `solve` starts with no more than it needs."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path

import pytest
import typer
from typer.core import TyperCommand
from typer.main import get_command

from dxfcable.cli import app
from dxfcable.commands.plain import PlainCommand, PlainGroup

ROOT = Path(__file__).resolve().parents[2]
TYPED = [
    ("solve", "a.dxf", "b.dxf", "-o", "out", "--sag", "2.4 m", "--json"),
    ("solve", "a.dxf", "--in-place", "--backup", "--loads", "loads.csv", "--units=mm"),
    ("solve", "a.dxf", "--sag", "2", "--sag", "3"),
    ("solve", "a.dxf", "--combo", "D + L", "--combo", "1.2D"),
    ("solve", "a.dxf", "--", "-b.dxf"),
    ("strip", "a.dxf", "-o", "b.dxf"),
    ("picture", "a.dxf", "-o", "b.png", "--layout", "A1"),
    ("picture", "a.dxf", "-o", "b.png", "--size", "800"),  # a number: typer's own way
]


@pytest.mark.parametrize("typed", TYPED, ids=" ".join)
def test_plain_values_are_those_that_typer_makes(typed: tuple[str, ...]) -> None:
    group = get_command(app)
    assert isinstance(group, PlainGroup)
    command = group.commands[typed[0]]
    assert isinstance(command, PlainCommand)
    ours, theirs = typer.Context(command), typer.Context(command)
    assert command.parse_args(ours, list(typed[1:])) == []
    TyperCommand.parse_args(command, theirs, list(typed[1:]))
    given = {name: value for name, value in theirs.params.items() if name in ours.params}
    assert ours.params == given
    kept = {param.name: param.default for param in command.params}
    rest = {name: value for name, value in theirs.params.items() if name not in given}
    assert {name: value or None for name, value in rest.items()} == {
        name: kept[name] or None for name in rest
    }


def test_every_command_takes_plain_values() -> None:
    group = get_command(app)
    assert isinstance(group, PlainGroup)
    assert all(isinstance(command, PlainCommand) for command in group.commands.values())


def test_solve_loads_neither_validators_nor_rich_nor_masked_arrays(tmp_path: Path) -> None:
    drawing = ROOT / "drawings" / "canopy_roof.dxf"
    command = [sys.executable, "-X", "importtime", "-m", "dxfcable", "solve", str(drawing)]
    command += ["-o", str(tmp_path / "solved.dxf")]
    done = subprocess.run(command, capture_output=True, text=True, check=False, cwd=ROOT)
    assert done.returncode in (0, 1)
    loaded = {line.rpartition("|")[2].strip() for line in done.stderr.splitlines()}
    assert "ezdxf" in loaded
    assert loaded.isdisjoint({"pydantic", "rich.console", "numpy.ma"})
