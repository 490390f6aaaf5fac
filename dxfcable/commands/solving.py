"""`solve`, `revise` and `strip`: our layers written into drawings, and taken out again."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.commands.running import (
    Asked,
    Done,
    Target,
    check_names,
    check_target,
    options,
    result_path,
    run_over,
    write_result,
)
from dxfcable.errors import DxfcableError
from dxfcable.files import read_drawing
from dxfcable.job import revise_pieces, solve_pieces, strip_bytes
from dxfcable.reporting import report

if TYPE_CHECKING:
    from collections.abc import Callable, Sequence
    from pathlib import Path

    from dxfcable.asking import AskedRevision, Options, Outcome


def solve_all(drawings: Sequence[Path], asked: Asked, target: Target) -> int:
    """Solve each drawing and write it."""
    _check_rules(asked)
    _check_cut(asked)

    def issue(data: bytes, wanted: Options) -> tuple[list[memoryview], Outcome]:
        return solve_pieces(data, wanted)

    return _issue_all(drawings, asked, target, issue, is_revised=False)


def revise_all(
    drawings: Sequence[Path], asked: Asked, target: Target, revision: AskedRevision
) -> int:
    """Answer a load change in each issued drawing and write it."""

    def issue(data: bytes, wanted: Options) -> tuple[list[memoryview], Outcome]:
        return revise_pieces(data, wanted, revision)

    return _issue_all(drawings, asked, target, issue, is_revised=True)


def _issue_all(
    drawings: Sequence[Path],
    asked: Asked,
    target: Target,
    issue: Callable[[bytes, Options], tuple[list[memoryview], Outcome]],
    *,
    is_revised: bool,
) -> int:
    """Issue each drawing, write it and tell of it."""
    check_target(target)
    check_names(drawings, target)

    def work(drawing: Path) -> Done:
        output = result_path(drawing, drawings, target)
        pieces, outcome = issue(read_drawing(drawing), options(drawing, asked))
        said = (
            write_result(drawing, output, pieces, target) if output else "dry run: nothing written"
        )

        def show() -> None:
            from dxfcable.reporting import terminal

            tell = terminal.show_revised if is_revised else terminal.show_solved
            tell(terminal.console(), outcome)
            terminal.show_findings(terminal.console(), outcome.findings)
            terminal.console().print(said)

        describe = report.revised if is_revised else report.solved
        document = describe(drawing.name, outcome)
        return Done(document=document, code=outcome.exit_code, findings=outcome.findings, show=show)

    return run_over(drawings, asked, work)


def strip_all(drawings: Sequence[Path], asked: Asked, target: Target) -> int:
    """Take everything of ours out of each drawing and write it."""
    check_target(target)
    check_names(drawings, target)

    def work(drawing: Path) -> Done:
        output = result_path(drawing, drawings, target)
        assert output is not None
        data, outcome = strip_bytes(read_drawing(drawing))
        said = write_result(drawing, output, [memoryview(data)], target)
        count = outcome.removed
        what = f"{count} entities taken out" if count else "nothing of ours in it: a copy"

        def show() -> None:
            from dxfcable.reporting import terminal

            terminal.show_findings(terminal.console(), outcome.findings)
            terminal.console().print(f"{what}; {said}")

        document = report.written(drawing.name, [str(output)], outcome.findings, removed=count)
        return Done(document=document, code=outcome.exit_code, findings=outcome.findings, show=show)

    return run_over(drawings, asked, work)


def _check_cut(asked: Asked) -> None:
    """Refuse to cut a cable and to discard it at once."""
    if asked.cut and asked.reform:
        message = "--cut keeps the cable that is formed now, --reform discards one that was cut"
        remedy = "Give --reform first, and --cut when the new cable is ordered."
        raise DxfcableError(message, code="usage", remedy=remedy)


def _check_rules(asked: Asked) -> None:
    """Refuse two rules at once, and a cable without a rule."""
    names = [f"--{name.replace('_', '-')}" for name in asked.rules]
    if len(names) > 1:
        message = f"{' and '.join(names)} are two rules; a cable obeys one"
        raise DxfcableError(message, code="usage", remedy="Give one of them.")
    if asked.cable is not None and not names:
        message = f"--cable {asked.cable} says no rule for it"
        raise DxfcableError(message, code="usage", remedy="Give a rule, such as --sag.")
