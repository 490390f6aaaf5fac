"""`read`: what is understood of a drawing."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.commands.running import Asked, Done, options, run_over, write_beside
from dxfcable.errors import DxfcableError
from dxfcable.files import read_drawing
from dxfcable.job import read_bytes
from dxfcable.reporting import report

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path


@dataclass(frozen=True, slots=True, kw_only=True)
class Extras:
    """What `read` may write beside what it shows."""

    loads: Path | None = None
    picture: Path | None = None


def read_all(drawings: Sequence[Path], asked: Asked, extras: Extras) -> int:
    """Show what is understood of each drawing."""
    _check_extras(extras, drawings)

    def work(drawing: Path) -> Done:
        chosen = options(drawing, asked)
        data = read_drawing(drawing)
        outcome = read_bytes(data, chosen)
        said = []
        if extras.picture is not None and outcome.layout is not None:
            from dxfcable.drawing.overlay import overlay

            image = overlay(data, outcome.layout, outcome.findings)
            said.append(write_beside(extras.picture, image))
        if extras.loads is not None and outcome.layout is not None:
            from dxfcable.loads import load_table

            text = load_table.write(outcome.layout, chosen.settings)
            said.append(write_beside(extras.loads, text.encode("utf-8")))

        def show() -> None:
            from dxfcable.reporting import terminal

            terminal.show_understood(terminal.console(), outcome)
            terminal.show_findings(terminal.console(), outcome.findings)
            for line in said:
                terminal.console().print(line)

        document = report.understood(drawing.name, outcome)
        return Done(document=document, code=outcome.exit_code, findings=outcome.findings, show=show)

    return run_over(drawings, asked, work)


def _check_extras(extras: Extras, drawings: Sequence[Path]) -> None:
    """Refuse what `read` cannot write."""
    given = {"--loads": extras.loads, "--picture": extras.picture}
    for name, path in given.items():
        if path is not None and len(drawings) > 1:
            message = f"{name} takes one drawing at a time"
            raise DxfcableError(message, code="usage", remedy="Read the drawings one by one.")
        if path is not None and path.suffix.lower() == ".dxf":
            message = f"{name} {path} would overwrite a drawing"
            raise DxfcableError(message, code="usage", remedy="Name another file.")
    if extras.picture is not None and extras.picture.suffix.lower() != ".svg":
        message = f"{extras.picture} is no SVG, the only kind that shows what was understood"
        raise DxfcableError(message, code="usage", remedy="Name a file that ends in .svg.")
