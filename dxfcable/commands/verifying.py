"""`verify`: issued drawings prove themselves."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.commands.running import Asked, Done, options, run_over
from dxfcable.files import read_drawing
from dxfcable.reporting import report
from dxfcable.verify import verify_bytes

if TYPE_CHECKING:
    from collections.abc import Sequence
    from pathlib import Path

    from dxfcable.reporting.report import Json
    from dxfcable.verify import CableProof, Proof
    from dxfcable.verifying.tally import Check, Difference


def verify_all(drawings: Sequence[Path], asked: Asked) -> int:
    """Prove each drawing; 1 where one failed or is stale."""

    def work(drawing: Path) -> Done:
        proof = verify_bytes(read_drawing(drawing), options(drawing, asked))

        def show() -> None:
            show_proof(proof)

        document = verified(drawing.name, proof)
        return Done(document=document, code=proof.exit_code, findings=proof.findings, show=show)

    return run_over(drawings, asked, work)


def show_proof(proof: Proof) -> None:
    """Print one line a check, then every difference, then the caution."""
    from dxfcable.job import CAUTION
    from dxfcable.reporting import terminal

    out = terminal.console()
    for cable in proof.cables:
        out.print()
        out.print(f"Cable {printable(cable.mark)}: {verdict(cable)}", style="bold")
        for check in cable.checks:
            style = None if check.passed else "bold red"
            out.print(check_line(check), style=style, soft_wrap=True)
    out.print()
    terminal.show_findings(out, proof.findings)
    out.print(outcome(proof))
    out.print(CAUTION)


def outcome(proof: Proof) -> str:
    """Say in a few words what came of a drawing, and never more than was proved."""
    if not proof.passed:
        return "not proved: failed or stale"
    return "proved, but not its tables named above" if proof.has_unproved else "proved"


def verdict(cable: CableProof) -> str:
    """Say in a few words what came of a cable."""
    failed = sum(not check.passed for check in cable.checks)
    words = f"{failed} of {len(cable.checks)} checks failed" if failed else "all checks passed"
    words = words if cable.checks else "nothing to hold against the laws"
    return f"{words}; stale" if cable.stale else words


def check_line(check: Check) -> str:
    """Write one check: whether it passed, its worst case, its tolerance, how many cases."""
    passed = "passed" if check.passed else "FAILED"
    unit = f" {check.unit}" if check.unit else ""
    worst = "-" if check.worst is None else f"{check.worst:.3g}{unit}"
    allowed = "-" if check.tolerance is None else f"{check.tolerance:.3g}{unit}"
    where = f", handle {check.handle}" if check.handle else ""
    return (
        f"  {passed}  {check.name}: worst {worst}, tolerance {allowed}, {check.count} held{where}"
    )


def printable(text: str) -> str:
    """Replace what a terminal cannot show: bytes that did not decode."""
    return text.encode("utf-8", "backslashreplace").decode("utf-8")


def verified(drawing: str, proof: Proof) -> Json:
    """Describe a proof as one JSON document."""
    return {
        "format": report.FORMAT,
        "drawing": drawing,
        "passed": proof.passed,
        "cables": [_cable(cable) for cable in proof.cables],
        "findings": report.findings(proof.findings),
    }


def _cable(cable: CableProof) -> Json:
    return {
        "mark": cable.mark,
        "stale": cable.stale,
        "stale_because": list(cable.reasons),
        "checks": [_check(check) for check in cable.checks],
        "differences": [_difference(difference) for difference in cable.differences],
    }


def _check(check: Check) -> Json:
    return {
        "name": check.name,
        "passed": check.passed,
        "worst": check.worst,
        "tolerance": check.tolerance,
        "unit": check.unit,
        "count": check.count,
        "handle": check.handle,
    }


def _difference(difference: Difference) -> Json:
    return {
        "check": difference.check,
        "id": difference.id,
        "handle": difference.handle,
        "amount": difference.amount,
        "unit": difference.unit,
        "text": difference.text,
    }
