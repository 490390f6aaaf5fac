"""The walls of the house: who may import whom."""

from __future__ import annotations

import ast
from pathlib import Path

import dxfcable

PACKAGE = Path(dxfcable.__file__).parent
LIGHT = ("errors", "model", "units", "forces", "lengths", "quantities", "scales", "settings")


def imports(path: Path) -> set[str]:
    found: set[str] = set()
    for node in ast.walk(ast.parse(path.read_text(encoding="utf-8"))):
        if isinstance(node, ast.Import):
            found |= {alias.name for alias in node.names}
        elif isinstance(node, ast.ImportFrom) and node.module:
            found.add(node.module)
    return found


def reaches(path: Path, *roots: str) -> set[str]:
    return {
        name for name in imports(path) if any(name == r or name.startswith(f"{r}.") for r in roots)
    }


def test_statics_knows_no_drawing_and_no_terminal() -> None:
    for path in (PACKAGE / "statics").rglob("*.py"):
        assert not reaches(path, "dxfcable.drawing", "ezdxf", "typer", "rich"), path
        if path.name != "tributary.py":
            assert not reaches(path, "shapely"), path


def test_drawing_knows_no_mechanics() -> None:
    for path in (PACKAGE / "drawing").rglob("*.py"):
        assert not reaches(path, "dxfcable.statics", "typer", "rich"), path


def test_bytes_are_handled_without_the_library() -> None:
    for path in (PACKAGE / "drawing" / "bytes").rglob("*.py"):
        assert not reaches(path, "ezdxf"), path


def test_nothing_below_the_command_line_reaches_up() -> None:
    for path in PACKAGE.rglob("*.py"):
        if path.name in ("cli.py", "terminal.py", "__main__.py") or path.parent.name == "commands":
            continue
        assert not reaches(
            path, "dxfcable.cli", "dxfcable.commands", "dxfcable.reporting.terminal"
        ), path


def test_the_values_that_all_rooms_share_need_no_library() -> None:
    for name in LIGHT:
        assert not reaches(PACKAGE / f"{name}.py", "ezdxf", "numpy", "shapely", "rich", "typer"), (
            name
        )
