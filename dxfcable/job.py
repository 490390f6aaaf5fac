"""The whole job without files: bytes of a drawing in, bytes of the solved drawing out.

For scripts::

    from dxfcable.job import Options, solve_bytes

    data, outcome = solve_bytes(Path("roof.dxf").read_bytes(), Options())
    print(outcome.solution.cables[0].horizontal)
"""

from __future__ import annotations

from dataclasses import replace

from dxfcable.asking import AskedRevision, AskedRule, Options, Outcome
from dxfcable.errors import LayoutError
from dxfcable.pipeline import Work, findings_of, revision_of, unique

__all__ = [
    "CAUTION",
    "AskedRevision",
    "AskedRule",
    "Options",
    "Outcome",
    "read_bytes",
    "revise_bytes",
    "revise_pieces",
    "solve_bytes",
    "solve_pieces",
    "strip_bytes",
]

CAUTION = (
    "Preliminary calculation aid. Results depend on the loads and geometry drawn. "
    "To be checked and approved by a licensed engineer under the local code before use."
)


def read_bytes(data: bytes, options: Options) -> Outcome:
    """Understand a drawing and say everything about it.

    Faults in what is drawn are findings here and raise nothing.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    """
    work = Work(data, options)
    layout, standing = work.held_layout()
    findings = (*work.stripping.findings, *layout.findings)
    if any(f.code in _UNIT_CODES for f in layout.findings):
        layout = replace(layout, length_unit="")  # all else was read as if there were one
        return Outcome(findings=unique(findings), layout=layout)
    try:
        solution = work.solution(layout, standing)
    except LayoutError as error:
        return Outcome(findings=unique((*findings, *findings_of(error))), layout=layout)
    return Outcome(
        findings=unique((*findings, *solution.findings)), layout=layout, solution=solution
    )


def solve_bytes(data: bytes, options: Options) -> tuple[bytes, Outcome]:
    """Solve a drawing; the bytes are the drafter's with whole records of ours inserted.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    LayoutError
        With all findings, where what is drawn cannot be solved.
    """
    pieces, outcome = solve_pieces(data, options)
    return b"".join(pieces), outcome


def solve_pieces(data: bytes, options: Options) -> tuple[list[memoryview], Outcome]:
    """Solve a drawing as `solve_bytes`, the result as pieces that share the input's memory."""
    work = Work(data, options)
    return work.issued(*work.answer())


def revise_bytes(data: bytes, options: Options, revision: AskedRevision) -> tuple[bytes, Outcome]:
    """Answer a load change from an issued drawing alone; see `AskedRevision`.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    LayoutError
        With all findings, where a cable has no record or cannot be solved.
    """
    pieces, outcome = revise_pieces(data, options, revision)
    return b"".join(pieces), outcome


def revise_pieces(
    data: bytes, options: Options, revision: AskedRevision
) -> tuple[list[memoryview], Outcome]:
    """Revise as `revise_bytes`, the result as pieces that share the input's memory."""
    from dxfcable.revising.revise import HOLD_CUT, revise

    work = Work(data, options)
    wanted = revision_of(revision)
    layout = work.layout_with_new_loads()
    try:
        answer = revise(layout, work.records, wanted, options.settings, options.combos)
    except LayoutError as error:
        everything = unique((*layout.findings, *findings_of(error)))
        raise LayoutError(error.message, everything) from error
    kept = answer.records if wanted.hold == HOLD_CUT else {}
    return work.issued(answer.layout, answer.solution, kept, delta_t=wanted.delta_t)


def strip_bytes(data: bytes) -> tuple[bytes, Outcome]:
    """Take everything of ours out of a drawing; what holds nothing of ours comes back as it is.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    """
    from dxfcable.drawing.bytes.scan import scan
    from dxfcable.drawing.bytes.splice import apply
    from dxfcable.drawing.strip import plan_strip

    stripping = plan_strip(scan(data))
    findings = tuple(f for f in stripping.findings if f.code not in _MEMORY_CODES)
    outcome = Outcome(findings=findings, removed=stripping.removed)
    return (apply(data, stripping.changes) if stripping.changes else data), outcome


_UNIT_CODES = frozenset({"no-units", "units-unsupported"})
_MEMORY_CODES = frozenset(
    {"moved", "edited", "restyled"}
)  # of no interest to who takes everything out
