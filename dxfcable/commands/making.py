"""`picture` and `starter`: files of ours beside the drawings."""

from __future__ import annotations

import json
import sys
from typing import TYPE_CHECKING

from dxfcable.commands.running import Asked, Done, run_over, write_beside
from dxfcable.errors import DxfcableError
from dxfcable.files import find_settings, read_drawing
from dxfcable.job import Outcome
from dxfcable.reporting import report

if TYPE_CHECKING:
    from pathlib import Path


def picture_one(drawing: Path, output: Path, asked: Asked, *, layout: str | None, size: int) -> int:
    """Picture a drawing as it is drawn."""
    from dxfcable.drawing.picture import KINDS, draw_picture

    kind = next((k for k in KINDS if output.suffix.lower() == f".{k}"), None)
    if kind is None:
        message = f"{output} is no kind of picture"
        raise DxfcableError(message, code="usage", remedy=f"Ask for one of {', '.join(KINDS)}.")

    def work(drawing: Path) -> Done:
        made = draw_picture(read_drawing(drawing), kind, size=size, layout=layout)
        said = write_beside(output, made.data)
        outcome = Outcome(findings=made.findings)

        def show() -> None:
            from dxfcable.reporting import terminal

            terminal.show_findings(terminal.console(), made.findings)
            terminal.console().print(said)

        document = report.written(drawing.name, [str(output)], made.findings)
        return Done(document=document, code=outcome.exit_code, findings=made.findings, show=show)

    return run_over([drawing], asked, work)


def make_starter(output: Path, units: str, settings: Path | None, *, as_json: bool) -> int:
    """Write a starter drawing, and the office's page where asked for."""
    from dxfcable.drawing.starter import starter
    from dxfcable.settings import default_page

    if output.exists() and output.stat().st_size:
        message = f"{output} stands already"
        raise DxfcableError(message, code="output", remedy="Name a new file for the starter.")
    office, _ = find_settings(output, None)
    said = [write_beside(output, starter(units, office))]
    paths = [str(output)]
    if settings is not None:
        if settings.exists():
            message = f"{settings} stands already"
            raise DxfcableError(message, code="output", remedy="Name a new file for the page.")
        said.append(write_beside(settings, default_page().encode("utf-8")))
        paths.append(str(settings))
    if as_json:
        document = report.written(output.name, paths, ())
        sys.stdout.write(json.dumps(document, indent=1) + "\n")
    else:
        sys.stdout.write("\n".join([*said, f"next: dxfcable solve {output} -o solved.dxf"]) + "\n")
    return 0
