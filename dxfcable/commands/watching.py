"""`solve --watch`: a drawing is solved again each time the drafter saves it.

The result goes to a second file, which a CAD program can show as a reference. The drawing is
looked at a few times a second; a save counts once it has stood still for one look, so that a
half-written file is waited for, and one that is cut off is only told.
"""

from __future__ import annotations

import gc
import signal
import sys
import time
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.commands.running import check_names, check_target, options, result_path, write_result
from dxfcable.errors import DxfcableError, LayoutError, OutputError
from dxfcable.files import read_drawing, settings_path
from dxfcable.job import solve_pieces
from dxfcable.model import Finding, Severity
from dxfcable.reporting.report import error_finding, sentence
from dxfcable.reporting.watched import change_line

if TYPE_CHECKING:
    from collections.abc import Iterator, Sequence
    from pathlib import Path
    from types import FrameType

    from dxfcable.asking import Outcome
    from dxfcable.commands.running import Asked, Target

_LOOK = 0.25  # seconds between two looks
_Stamp = tuple[tuple[int, int, int] | None, ...]


@dataclass(slots=True, kw_only=True)
class _Watched:
    """One drawing: how it stood at the last look and at the last solve, and what came of it."""

    drawing: Path
    output: Path
    seen: _Stamp | None = None
    solved: _Stamp | None = None
    outcome: Outcome | None = None
    said: str = field(default="")


def watch_all(drawings: Sequence[Path], asked: Asked, target: Target) -> int:
    """Solve each drawing now and after each save, until interrupted; return 0 then.

    Raises
    ------
    DxfcableError
        Where there is no second file to write to, or what is asked says nothing together.
    """
    if asked.as_json or target.in_place or target.dry_run:
        message = "--watch writes a second file and says one line a save"
        remedy = "Leave out --json, --in-place and --dry-run."
        raise DxfcableError(message, code="usage", remedy=remedy)
    check_target(target)
    check_names(drawings, target)
    watched = []
    for drawing in drawings:
        output = result_path(drawing, drawings, target)
        assert output is not None
        watched.append(_Watched(drawing=drawing, output=output))
    gc.enable()  # this run has no end of its own
    names = ", ".join(str(one.drawing) for one in watched)
    _say(f"watching {names}; end with Ctrl-C")
    with_end = signal.signal(signal.SIGTERM, _interrupt)
    try:
        for _ in _looks():
            for one in watched:
                _look(one, asked, target)
    except KeyboardInterrupt:
        _say("ended; the results stay as they are")
    finally:
        signal.signal(signal.SIGTERM, with_end)
    return 0


def _looks() -> Iterator[None]:
    """Look again and again, with a rest between."""
    while True:
        yield
        time.sleep(_LOOK)


def _look(one: _Watched, asked: Asked, target: Target) -> None:
    """Solve a drawing if it was saved since, and stands still."""
    stamp = _stamp(one.drawing, asked)
    stands = stamp == one.seen
    one.seen = stamp
    if not stands or stamp == one.solved:
        return
    if stamp[0] is None:
        _tell(one, f"{one.drawing.name} is not there; waiting for it")
        return
    one.solved = stamp
    try:
        data = read_drawing(one.drawing)
        pieces, outcome = solve_pieces(data, options(one.drawing, asked))
        written = write_result(one.drawing, one.output, pieces, target)
    except OutputError as error:
        one.solved = None  # the result may be free again without a save
        _tell(one, f"{one.drawing.name}: {_reason(error)}")
        return
    except DxfcableError as error:
        _tell(one, f"{one.drawing.name}: not done, {one.output.name} stays: {_reason(error)}")
        return
    line = change_line(one.outcome, outcome)
    one.outcome = outcome
    _tell(one, f"{one.drawing.name}: {line}; {written}")


def _tell(one: _Watched, line: str) -> None:
    """Say a line, but not the same fault again for each save."""
    if line != one.said:
        _say(line)
    one.said = line


def _reason(error: DxfcableError) -> str:
    """Return the first thing that stops, in one line."""
    found = error.findings if isinstance(error, LayoutError) else ()
    stopping = [f for f in found if isinstance(f, Finding) and f.severity is Severity.ERROR]
    more = f" (and {len(stopping) - 1} more; see dxfcable read)" if len(stopping) > 1 else ""
    first = stopping[0] if stopping else error_finding(error)
    return " ".join(sentence(first).split()) + more


def _stamp(drawing: Path, asked: Asked) -> _Stamp:
    """Return what changes when the drawing, the office's page or the load table is saved."""
    page = settings_path(drawing, asked.settings)
    return tuple(_mark(path) for path in (drawing, page, asked.loads))


def _mark(path: Path | None) -> tuple[int, int, int] | None:
    """Return what changes when a file is saved, None while it is not there."""
    try:
        found = path.stat() if path is not None else None
    except OSError:
        return None
    return (found.st_mtime_ns, found.st_size, found.st_ino) if found else None


def _say(line: str) -> None:
    """Print one line at once."""
    sys.stdout.write(line.encode("utf-8", "backslashreplace").decode("utf-8") + "\n")
    sys.stdout.flush()


def _interrupt(_signal: int, _frame: FrameType | None) -> None:
    """End as Ctrl-C does."""
    raise KeyboardInterrupt
