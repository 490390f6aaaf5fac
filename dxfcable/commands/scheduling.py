"""`schedule`: cable, hanger and anchorage schedules of drawings, which stay as they are."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.commands.running import Asked, Done, options, run_over, write_beside
from dxfcable.errors import DxfcableError, LayoutError, OutputError
from dxfcable.files import read_drawing
from dxfcable.job import CAUTION, Outcome, read_bytes
from dxfcable.scheduling.schedule_csv import TABLES, is_ours, schedule_csv
from dxfcable.scheduling.schedule_report import scheduled
from dxfcable.scheduling.schedules import schedules
from dxfcable.sheets.changed_since import stale_in

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path

    from dxfcable.scheduling.schedule_rows import Schedules


def schedule_all(drawings: Sequence[Path], asked: Asked, csv_folder: Path | None) -> int:
    """Schedule each drawing; one that is not solved is solved on the way, in memory.

    Parameters
    ----------
    drawings : sequence of Path
    asked : Asked
    csv_folder : Path or None
        Where three CSV files for each drawing go; it is made where it is missing.

    Returns
    -------
    int
        Exit code.

    Raises
    ------
    DxfcableError
        Where files of several drawings would have one name.
    """
    _check(drawings, csv_folder)

    def work(drawing: Path) -> Done:
        chosen = options(drawing, asked)
        data = read_drawing(drawing)
        outcome = read_bytes(data, chosen)
        if outcome.layout is None or outcome.solution is None or outcome.exit_code == 2:
            message = "the drawing cannot be scheduled as it is"
            raise LayoutError(message, outcome.findings)
        whole = schedules(outcome.layout, outcome.solution, chosen.settings)
        stale = stale_in(data, chosen, "the schedule shows")
        findings = tuple(dict.fromkeys((*outcome.findings, *stale, *whole.findings)))
        comma = chosen.settings.units.decimal_comma
        said = [] if csv_folder is None else _write(drawing, whole, csv_folder, comma=comma)

        def show() -> None:
            from dxfcable.reporting import terminal
            from dxfcable.scheduling.schedule_terminal import show_schedules

            out = terminal.console()
            show_schedules(whole, lambda line: out.print(line, soft_wrap=True))
            out.print()
            terminal.show_findings(out, findings)
            for path, words in said:
                del path
                out.print(words, soft_wrap=True)

        document = scheduled(drawing.name, whole, findings, CAUTION)
        if csv_folder is not None:
            document["written"] = [str(path) for path, _ in said]
        code = Outcome(findings=findings).exit_code
        return Done(document=document, code=code, findings=findings, show=show)

    return run_over(drawings, asked, work)


def _check(drawings: Sequence[Path], folder: Path | None) -> None:
    """Refuse what would lose a file, before anything is done."""
    if folder is None:
        return
    stems = [drawing.stem.casefold() for drawing in drawings]
    doubled = sorted({d.name for d in drawings if stems.count(d.stem.casefold()) > 1})
    if doubled:
        message = f"the schedules of {', '.join(doubled)} would have the same names"
        raise DxfcableError(message, code="usage", remedy="Write them to folders of their own.")
    if folder.exists() and not folder.is_dir():
        message = f"{folder} is a file"
        raise OutputError(message, remedy="--csv names a folder.")


def _write(drawing: Path, whole: Schedules, folder: Path, *, comma: bool) -> list[tuple[Path, str]]:
    """Write the CSV files of one drawing; a file of another kind is not overwritten."""
    texts = schedule_csv(whole, decimal_comma=comma)
    paths = {name: folder / f"{drawing.stem}-{name}.csv" for name in TABLES}
    for path in paths.values():
        if path.is_file() and not is_ours(read_drawing(path).decode("utf-8", "replace")):
            message = f"{path} is no schedule of dxfcable, and would be overwritten"
            raise OutputError(message, remedy="Move it away, or name another folder.")
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        message = f"the folder {folder} cannot be made: {error.strerror or error}"
        raise OutputError(message, remedy="Name another one.") from error
    return [
        (paths[name], write_beside(paths[name], text.encode("utf-8", "backslashreplace")))
        for name, text in texts.items()
    ]
