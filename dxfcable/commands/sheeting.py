"""`sheets`: force-diagram sheets of many drawings into one folder, with an index."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.asking import Outcome
from dxfcable.commands.running import Asked, Done, options, progress, run_over, write_beside
from dxfcable.drawing.sheeting.sheet import MARK
from dxfcable.errors import DxfcableError, OutputError
from dxfcable.files import find_settings, read_drawing
from dxfcable.model import Finding, Severity
from dxfcable.reporting import report
from dxfcable.sheets.sheet_making import Order, make_index, make_sheets, set_pdf
from dxfcable.sheets.sheet_set import (
    INDEX,
    Numbers,
    in_order,
    page_names,
    read_index,
    write_index,
)
from dxfcable.sheets.sheet_solving import solved_for_sheets

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path

    from dxfcable.sheets.sheet_making import Made
    from dxfcable.sheets.sheet_set import IndexRow

SET = "set.pdf"


@dataclass(frozen=True, slots=True, kw_only=True)
class SheetsAsked:
    """What `sheets` is asked for beside what all commands share."""

    folder: Path
    together: bool = False
    checker: bool = False
    size: str | None = None


@dataclass(slots=True, kw_only=True)
class _Written:
    """Files written: what to say of each, their paths, what was found on the way."""

    said: list[str] = field(default_factory=list)
    paths: list[str] = field(default_factory=list)
    findings: list[Finding] = field(default_factory=list)

    def write(self, path: Path, content: bytes) -> None:
        """Write a file, unless it holds this already."""
        self.said.append(write_beside(path, content))
        self.paths.append(str(path))


@dataclass(slots=True, kw_only=True)
class _Result:
    """What became of one drawing."""

    outcome: Outcome | None = None
    made: Made | None = None
    fault: Exception | None = None
    written: _Written = field(default_factory=_Written)


def sheets_all(drawings: Sequence[Path], asked: Asked, wanted: SheetsAsked) -> int:
    """Make the sheets of all drawings.

    Each drawing is solved in memory and stays as it is; its sheets are written once all of
    them are made. A second run writes the same bytes, so it touches nothing.

    Parameters
    ----------
    drawings : sequence of Path
    asked : Asked
    wanted : SheetsAsked

    Returns
    -------
    int
        Exit code.
    """
    _check(drawings, wanted)
    before = _rows_before(wanted.folder)
    numbers = Numbers({row.file: row.number for row in before})
    # In order of their names, so that numbers do not depend on how they were typed.
    ordered = sorted(drawings, key=lambda d: (d.name.casefold(), d.name))
    results: dict[Path, _Result] = {}
    for drawing in progress(ordered, asked, "sheets"):
        results[drawing] = _result(drawing, asked, wanted, numbers, results)
    shared = _write_all(results, before, asked, wanted)

    last = next((d for d in reversed(ordered) if results[d].made is not None), None)

    def work(drawing: Path) -> Done:
        result = results[drawing]
        if result.fault is not None:
            raise result.fault
        assert result.outcome is not None
        assert result.made is not None
        own = (*result.outcome.findings, *result.made.findings)
        findings = tuple(dict.fromkeys((*own, *shared.findings)))
        # What belongs to the whole set is told once, after the last drawing.
        told = findings if drawing == last else own
        said = [*result.written.said, *(shared.said if drawing == last else ())]

        def show() -> None:
            from dxfcable.reporting import terminal

            terminal.show_findings(terminal.console(), told)
            terminal.console().print("\n".join(said))

        paths = [*result.written.paths, *shared.paths]
        document = report.written(drawing.name, paths, findings)
        code = Outcome(findings=findings).exit_code
        return Done(document=document, code=code, findings=findings, show=show)

    return run_over(ordered, asked, work)


def _check(drawings: Sequence[Path], wanted: SheetsAsked) -> None:
    """Refuse what cannot be one set of sheets, before anything is done."""
    from dxfcable.drawing.sheeting.papers import paper
    from dxfcable.settings import Show

    stems = [drawing.stem.casefold() for drawing in drawings]
    doubled = sorted({d.name for d in drawings if stems.count(d.stem.casefold()) > 1})
    if doubled:
        message = f"the sheets of {', '.join(doubled)} would have the same names"
        raise DxfcableError(message, code="usage", remedy="Write them to folders of their own.")
    if wanted.size is not None:
        paper(wanted.size, Show())
    if wanted.folder.exists() and not wanted.folder.is_dir():
        message = f"{wanted.folder} is a file"
        raise OutputError(message, remedy="-d names a folder.")


def _rows_before(folder: Path) -> tuple[IndexRow, ...]:
    """Read the index of the last run into this folder, of sheets that are still there."""
    path = folder / INDEX
    if not path.is_file():
        return ()
    try:
        text = read_drawing(path).decode("utf-8")
    except UnicodeDecodeError as error:
        message = f"{path} is no index of sheets, and would be overwritten"
        raise DxfcableError(message, code="output", remedy="Name another folder.") from error
    rows = read_index(text, str(path))
    return tuple(row for row in rows if (folder / f"{row.file}.dxf").is_file())


def _result(
    drawing: Path,
    asked: Asked,
    wanted: SheetsAsked,
    numbers: Numbers,
    results: dict[Path, _Result],
) -> _Result:
    """Solve one drawing and make its sheets; a fault is kept and told in its turn."""
    result = _Result()
    try:
        chosen = options(drawing, asked)
        result.outcome = solved_for_sheets(read_drawing(drawing), chosen)
        taken = {
            name.casefold(): other.name
            for other, done in results.items()
            if done.made is not None
            for name in done.made.stems()
        }
        order = Order(
            drawing=drawing.stem,
            settings=chosen.settings,
            size=wanted.size or chosen.settings.sheet.size,
            plot_scale=asked.plot_scale,
            together=wanted.together,
            checker=wanted.checker,
        )
        made = make_sheets(result.outcome, order, numbers)
        both = next((taken[n.casefold()] for n in made.stems() if n.casefold() in taken), None)
        if both is not None:
            message = f"sheets of {drawing.name} would have the names of sheets of {both}"
            raise DxfcableError(message, code="usage", remedy="Write them to folders of their own.")
        result.made = made
    except Exception as error:  # told by `run_over`, which counts faults and refusals
        result.fault = error
    return result


def _write_all(
    results: dict[Path, _Result], before: Sequence[IndexRow], asked: Asked, wanted: SheetsAsked
) -> _Written:
    """Write all sheets, then what belongs to the whole set; nothing where nothing was made."""
    shared = _Written()
    made = {drawing: result.made for drawing, result in results.items() if result.made is not None}
    if not made:
        return shared
    stems = {drawing.stem for drawing in made}
    kept = [row for row in before if row.drawing not in stems]
    rows = in_order([*kept, *(row for each in made.values() for row in each.rows)])
    settings, _ = find_settings(next(iter(made)), asked.settings)
    index = make_index(rows, settings, wanted.size or settings.sheet.size)
    whole = None if kept else set_pdf([index, *made.values()])
    names = [name for each in (index, *made.values()) for name, _ in each.files]
    _check_foreign(wanted.folder, names if whole is None else [*names, SET])
    _make_folder(wanted.folder)
    for drawing, each in made.items():
        for name, content in each.files:
            results[drawing].written.write(wanted.folder / name, content)
    shared.write(wanted.folder / INDEX, write_index(rows).encode("utf-8"))
    for name, content in index.files:
        shared.write(wanted.folder / name, content)
    shared.findings += [*index.findings, *_left_over(before, rows)]
    if whole is not None:
        shared.write(wanted.folder / SET, whole)
    elif kept:
        text = f"{SET} is not renewed: {INDEX} lists sheets of drawings that this run did not make"
        remedy = "Run over all drawings of the set for a new one."
        note = Finding(code="set-partial", severity=Severity.NOTE, text=text, remedy=remedy)
        shared.findings.append(note)
    return shared


def _check_foreign(folder: Path, names: Sequence[str]) -> None:
    """Refuse to write over files that are no sheets of an earlier run."""
    for name in names:
        path = folder / name
        if path.exists() and MARK.encode() not in read_drawing(path):
            message = f"{path} is no sheet of an earlier run, and would be overwritten"
            raise OutputError(message, remedy="Name another folder, or move that file.")


def _make_folder(folder: Path) -> None:
    """Make the folder of the sheets."""
    try:
        folder.mkdir(parents=True, exist_ok=True)
    except OSError as error:
        message = f"the folder {folder} cannot be made: {error.strerror or error}"
        raise OutputError(message, remedy="Name another one.") from error


def _left_over(before: Sequence[IndexRow], rows: Sequence[IndexRow]) -> list[Finding]:
    """Say which sheets of an earlier run no longer belong to the set; they are left alone."""
    now = {row.file: row.sheets for row in rows}
    names = []
    for row in before:
        names += [
            name
            for number, name in enumerate(page_names(row.file, row.sheets, now), start=1)
            if number > now.get(row.file, 0)
        ]
    if not names:
        return []
    text = f"of an earlier run, and no longer of the set: {', '.join(names)}"
    remedy = "Remove these files if they are not needed."
    return [Finding(code="sheets-left-over", severity=Severity.NOTE, text=text, remedy=remedy)]
