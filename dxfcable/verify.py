"""An issued drawing proves itself: its own geometry against the laws of statics.

The record is asked only for what changed since it was written, and for units that the header
does not state. For scripts::

    from dxfcable.job import Options
    from dxfcable.verify import verify_bytes

    proof = verify_bytes(Path("issued.dxf").read_bytes(), Options())
    print(proof.passed, [check.name for cable in proof.cables for check in cable.checks])
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.errors import DxfcableError
from dxfcable.model import Finding, Severity
from dxfcable.verifying.proving import CableProof, prove
from dxfcable.verifying.unproved import CODE, not_proved

if TYPE_CHECKING:
    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.drawing.issued import Issued
    from dxfcable.drawing.strip import Stripping
    from dxfcable.job import Options
    from dxfcable.model import Layout
    from dxfcable.recorded import CableRecord
    from dxfcable.verifying.tally import Difference

__all__ = ["CableProof", "Proof", "verify_bytes"]

# Told as differences here, or of no interest to a proof.
_TOLD = frozenset({"copied", "edited", "redrawn", "row-in-use", "pointed-at"})
_UNITS = frozenset({1, 2, 21, 4, 5, 14, 6})


@dataclass(frozen=True, slots=True, kw_only=True)
class Proof:
    """What came of holding an issued drawing against the laws.

    Attributes
    ----------
    cables : tuple of CableProof
        One for each cable that is issued, or recorded.
    findings : tuple of Finding
        Every difference, every reason to be stale, and notes.
    """

    cables: tuple[CableProof, ...]
    findings: tuple[Finding, ...]

    @property
    def passed(self) -> bool:
        """Whether every check passed and no cable is stale."""
        return all(cable.passed and not cable.stale for cable in self.cables)

    @property
    def has_unproved(self) -> bool:
        """Whether tables stand in the drawing that nothing was held against."""
        return any(finding.code == CODE for finding in self.findings)

    @property
    def exit_code(self) -> int:
        """0 proved, 1 failed or stale."""
        return 0 if self.passed else 1


def verify_bytes(data: bytes, options: Options) -> Proof:
    """Prove an issued drawing from its geometry, and say whether it is stale.

    Parameters
    ----------
    data : bytes
        The issued drawing.
    options : Options
        Settings and units; the rest is not read.

    Returns
    -------
    Proof

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    DxfcableError
        With code `not-issued` where nothing was issued.
    """
    from dxfcable.drawing.bytes.scan import scan
    from dxfcable.drawing.issued import read_issued
    from dxfcable.drawing.strip import plan_strip

    drawing = scan(data)
    stripping = plan_strip(drawing)
    issued = read_issued(drawing, options.settings, stripping.own_heads)
    if not _is_issued(issued):
        message = "nothing in this drawing was issued by dxfcable, so there is nothing to verify"
        raise DxfcableError(message, code="not-issued", remedy="Solve it first: dxfcable solve.")
    records = recorded(stripping)
    layout = _layout(drawing, stripping, issued, records, options)
    cables = prove(issued, layout, records, options.settings)
    notes = tuple(f for f in stripping.findings if f.code not in _TOLD)
    found = (*notes, *_findings(cables, drawing), *not_proved(issued))
    return Proof(cables=cables, findings=found)


def recorded(stripping: Stripping) -> tuple[CableRecord, ...]:
    """Give what the record says of each cable."""
    return stripping.cables


def _is_issued(issued: Issued) -> bool:
    """Tell whether there is a profile or a force diagram of ours."""
    roles = {"profile", "force_diagram"}
    return bool(issued.marked) or any(roles & e.roles for e in issued.unmarked)


def _layout(
    drawing: Scan,
    stripping: Stripping,
    issued: Issued,
    records: tuple[CableRecord, ...],
    options: Options,
) -> Layout:
    """Read what the drafter drew; the unit from the header, the record or the scale's words."""
    from dxfcable.drawing.reader import ReadOptions, read
    from dxfcable.drawing.small import excerpt

    settings = options.settings
    names = [settings.layers.name(role) for role in settings.layers.input_roles()]
    blocks = settings.blocks
    cut_out = excerpt(
        drawing,
        names,
        stripping.own_heads,
        (blocks.support, blocks.load, blocks.data, blocks.anchor),
    )
    units, force = options.units, options.force_unit
    if units is None and cut_out.insunits not in _UNITS:
        units = records[0].length_unit if records else _units(issued)[0]
    if force is None and not settings.units.force:
        force = records[0].force_unit if records else _units(issued)[1]
    layout = read(cut_out, settings, ReadOptions(units=units, force_unit=force))
    if layout.plan or layout.plan_points:
        from dxfcable.loads.plan_loads import apply

        layout = apply(layout, settings)
    return replace(layout, force_unit=layout.force_unit or force)


def _units(issued: Issued) -> tuple[str | None, str | None]:
    """Find the units in the words of a force scale."""
    from dxfcable.units import LENGTH_UNITS
    from dxfcable.verifying.words import read_scale

    for entity in (*issued.marked.values(), *issued.unmarked):
        found = read_scale(entity.text) if entity.text else None
        if found is not None and found.length_unit in LENGTH_UNITS:
            return found.length_unit, found.force_unit
    return None, None


def _findings(cables: tuple[CableProof, ...], drawing: Scan) -> tuple[Finding, ...]:
    """Turn differences and reasons into findings that an engineer must see."""
    found = []
    for cable in cables:
        found += [
            Finding(
                code="stale",
                severity=Severity.WARNING,
                text=f"cable {cable.mark} is stale: {reason}",
                remedy="Revise or solve the drawing, and issue it again.",
                cable=cable.mark,
            )
            for reason in cable.reasons
        ]
        found += [
            Finding(
                code=f"{one.what.lower()}-overruled",
                severity=Severity.NOTE,
                text=f"cable {cable.mark} is issued with {one.what} {one.used}, as asked for then; "
                f"its data block states {one.stated}",
                cable=cable.mark,
            )
            for one in cable.overruled
        ]
        found += [_finding(cable.mark, d, drawing) for d in cable.differences]
    return tuple(found)


def _finding(mark: str, difference: Difference, drawing: Scan) -> Finding:
    """Tell one difference."""
    offset = difference.offset
    return Finding(
        code=f"verify-{difference.check.replace(' ', '-')}",
        severity=Severity.WARNING,
        text=f"cable {mark}, {difference.check}: {difference.text}",
        cable=mark,
        handle=difference.handle,
        line=None if offset is None else drawing.line(offset),
        layer=difference.layer,
        at=difference.at,
        raw=difference.raw,
    )
