"""Everything that the reader finds, collected, so that all faults are told at once."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.model import Finding, Origin, Severity

if TYPE_CHECKING:
    from collections.abc import Iterable

    from dxfcable.model import Point
    from dxfcable.units import QuantityError


def coordinate(value: float) -> str:
    """Write a coordinate for a message, to 1e-4, large ones in full."""
    text = f"{value:.4f}".rstrip("0").rstrip(".")
    return "0" if text in {"-0", ""} else text


def place(at: Point) -> str:
    """Write a position for a message.

    Examples
    --------
    >>> place((8.3, 7.80))
    '(8.3, 7.8)'
    """
    return f"({coordinate(at[0])}, {coordinate(at[1])})"


def where(origin: Origin) -> str:
    """Name an entity: layer, kind, handle or line, position."""
    name = origin.handle or (f"at line {origin.line}" if origin.line else "")
    words = " ".join(word for word in (origin.kind, name) if word)
    at = f" at {place(origin.at)}" if origin.at else ""
    return ", ".join(part for part in (origin.layer, words + at) if part)


def listed(words: Iterable[str], most: int = 12) -> str:
    """Join words with commas; what is over `most` is counted."""
    every = list(words)
    more = f" and {len(every) - most} more" if len(every) > most else ""
    return ", ".join(every[:most]) + more


@dataclass(slots=True)
class Faults:
    """Collector of findings, in the order in which they are found."""

    findings: list[Finding] = field(default_factory=list)

    def add(
        self,
        severity: Severity,
        code: str,
        text: str,
        remedy: str = "",
        *,
        origin: Origin | None = None,
        cable: str | None = None,
        raw: str | None = None,
    ) -> None:
        """Add a finding; where an origin is given, the sentence starts with its name."""
        source = origin or Origin()
        name = where(source) if origin else ""
        self.findings.append(
            Finding(
                code=str(code),
                severity=severity,
                text=f"{name}: {text}" if name else text,
                remedy=remedy,
                cable=cable,
                handle=source.handle,
                line=source.line,
                layer=source.layer or None,
                at=source.at,
                raw=source.raw if raw is None else raw,
            )
        )

    def error(
        self,
        code: str,
        text: str,
        remedy: str,
        *,
        origin: Origin | None = None,
        cable: str | None = None,
        raw: str | None = None,
    ) -> None:
        """Add a finding that stops the run."""
        self.add(Severity.ERROR, code, text, remedy, origin=origin, cable=cable, raw=raw)

    def note(
        self,
        code: str,
        text: str,
        remedy: str = "",
        *,
        origin: Origin | None = None,
        cable: str | None = None,
        raw: str | None = None,
    ) -> None:
        """Add a finding that informs."""
        self.add(Severity.NOTE, code, text, remedy, origin=origin, cable=cable, raw=raw)

    def doubt(
        self,
        error: QuantityError,
        *,
        origin: Origin,
        cable: str | None = None,
        raw: str = "",
        what: str = "",
    ) -> None:
        """Add a text that does not read as a quantity; `what` names its attribute."""
        text = f"{what}: {error.message}." if what else f"{error.message}."
        self.error(error.code, text, error.remedy, origin=origin, cable=cable, raw=raw)
