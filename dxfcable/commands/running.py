"""One command over one drawing or many: read, work, write, print, count."""

from __future__ import annotations

import gc
import json
import sys
import traceback
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable import safe_write
from dxfcable.errors import DxfcableError, LayoutError
from dxfcable.files import find_settings, read_table, resolve_output
from dxfcable.job import AskedRule, Options
from dxfcable.model import Finding, RuleKind, Severity
from dxfcable.reporting import report

if TYPE_CHECKING:
    from collections.abc import Callable, Iterator, Mapping, Sequence
    from pathlib import Path

    from dxfcable.reporting.report import Json

FAULT = 3


@dataclass(frozen=True, slots=True, kw_only=True)
class Asked:
    """What the command line asks, as typed."""

    units: str | None = None
    force_unit: str | None = None
    settings: Path | None = None
    as_json: bool = False
    plot_scale: str | None = None
    rules: Mapping[str, str] = field(default_factory=dict)
    cable: str | None = None
    under: str | None = None
    loads: Path | None = None
    fresh: bool = False
    combos: tuple[str, ...] = ()
    cut: bool = False
    reform: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Target:
    """Where results go."""

    output: Path | None = None
    in_place: bool = False
    backup: bool = False
    dry_run: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Done:
    """One drawing done: its document, its exit code, and how to print it."""

    document: Json
    code: int
    findings: tuple[Finding, ...]
    show: Callable[[], None]


def options(drawing: Path, asked: Asked) -> Options:
    """Turn what was typed into the job's options, with the settings that hold there."""
    settings, _ = find_settings(drawing, asked.settings)
    kinds = {kind.value: kind for kind in RuleKind}
    rule = next(
        (AskedRule(kind=kinds[name], text=text) for name, text in asked.rules.items()), None
    )
    return Options(
        settings=settings,
        units=asked.units,
        force_unit=asked.force_unit,
        plot_scale=asked.plot_scale,
        rule=rule,
        cable=asked.cable,
        under=asked.under,
        loads=read_table(asked.loads) if asked.loads else None,
        fresh=asked.fresh,
        combos=asked.combos,
        cut=asked.cut,
        reform=asked.reform,
    )


def run_over(drawings: Sequence[Path], asked: Asked, work: Callable[[Path], Done]) -> int:
    """Work on all drawings, each whatever became of the others; return the worst code."""
    documents: list[Json] = []
    worst = 0
    if len(drawings) > 1:
        gc.enable()  # what one drawing leaves is not kept through all others
    for drawing in progress(drawings, asked):
        if len(drawings) > 1 and not asked.as_json:
            sys.stdout.write(f"\n{drawing}\n")
        try:
            done = work(drawing)
        except DxfcableError as error:
            documents.append(_refuse(drawing, error, asked))
            worst = max(worst, 2)
            continue
        except Exception:
            if len(drawings) == 1:
                raise
            traceback.print_exc()
            sys.stderr.write(f"{drawing}: this is a fault of dxfcable; it was not touched.\n")
            documents.append(report.refused(drawing.name, ()))
            worst = FAULT
            continue
        documents.append(done.document)
        worst = max(worst, done.code)
        if asked.as_json:
            _tell(done.findings)
        else:
            done.show()
    if asked.as_json:
        whole = documents[0] if len(documents) == 1 else report.several(documents)
        sys.stdout.write(json.dumps(whole, indent=1) + "\n")
    return worst


def check_names(drawings: Sequence[Path], target: Target) -> None:
    """Refuse drawings whose results would take one name in a folder.

    Raises
    ------
    DxfcableError
        Before anything is written.
    """
    if target.output is None or len(drawings) < 2:
        return
    names = [drawing.name.casefold() for drawing in drawings]
    doubled = sorted({d.name for d in drawings if names.count(d.name.casefold()) > 1})
    if doubled:
        message = f"several drawings are called {', '.join(doubled)}; one result would be lost"
        raise DxfcableError(message, code="usage", remedy="Write them to folders of their own.")


def check_target(target: Target) -> None:
    """Refuse options that say nothing together.

    Raises
    ------
    DxfcableError
        Naming them.
    """
    faults = (
        (target.backup and not target.in_place, "--backup goes with --in-place"),
        (target.dry_run and target.output is not None, "--dry-run writes nothing, so -o is idle"),
        (
            target.output is not None and target.output.suffix.lower() == ".dwg",
            f"{target.output} would be a DXF under the name of a DWG",
        ),
    )
    for is_fault, message in faults:
        if is_fault:
            raise DxfcableError(message, code="usage", remedy="See --help.")


def result_path(drawing: Path, drawings: Sequence[Path], target: Target) -> Path | None:
    """Settle where one result goes, None for a dry run."""
    if target.dry_run:
        return None
    return resolve_output(
        drawing, target.output, in_place=target.in_place, is_one_of_many=len(drawings) > 1
    )


def write_result(drawing: Path, output: Path, pieces: Sequence[memoryview], target: Target) -> str:
    """Write a result and say what became of it."""
    kept = ""
    if target.in_place and target.backup:
        kept = f"; the old one is {safe_write.backup(drawing)}"
    if safe_write.write(output, pieces):
        return f"written: {output}{kept}"
    return f"unchanged: {output} holds this already{kept}"


def write_beside(path: Path, content: bytes) -> str:
    """Write a file of ours and say what became of it."""
    if safe_write.write(path, [content]):
        return f"written: {path}"
    return f"unchanged: {path} holds this already"


def _refuse(drawing: Path, error: DxfcableError, asked: Asked) -> Json:
    """Say on standard error why a drawing was refused, and return its document."""
    found: tuple[Finding, ...] = ()
    if isinstance(error, LayoutError):
        found = tuple(f for f in error.findings if isinstance(f, Finding))
    if not any(f.severity is Severity.ERROR for f in found):
        found = (report.error_finding(error), *found)
    if asked.as_json:
        _tell(found)
    else:
        from dxfcable.reporting import terminal

        out = terminal.console(is_error=True)
        terminal.show_findings(out, found)
        out.print(f"{drawing}: not done, nothing written")
    return report.refused(drawing.name, found)


def _tell(found: Sequence[Finding]) -> None:
    """Write what stops, and what an engineer must see, to standard error."""
    for finding in found:
        if finding.severity is not Severity.NOTE:
            words = report.sentence(finding).encode("utf-8", "backslashreplace").decode("utf-8")
            sys.stderr.write(f"{words}\n")


def progress(drawings: Sequence[Path], asked: Asked, what: str = "drawings") -> Iterator[Path]:
    """Yield drawings, with a bar on a terminal where there are several.

    Parameters
    ----------
    drawings : sequence of Path
    asked : Asked
    what : str
        Stands before the bar.

    Yields
    ------
    Path
    """
    if len(drawings) < 2 or asked.as_json or not sys.stderr.isatty():
        yield from drawings
        return
    from rich.progress import track

    from dxfcable.reporting.plain_output import rich_console

    yield from track(drawings, what, console=rich_console(sys.stderr))
