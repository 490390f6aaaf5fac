"""What has to be said of one cable while it is worked on."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.model import Cable, Finding, Severity

if TYPE_CHECKING:
    from dxfcable.model import Origin


class Remarks:
    """Findings about one cable, in the order they come up."""

    def __init__(self, cable: Cable) -> None:
        self._cable = cable
        self.findings: list[Finding] = []

    @property
    def name(self) -> str:
        """What sentences call the cable."""
        return f"cable {self._cable.mark}"

    @property
    def is_stopped(self) -> bool:
        """Whether one of them stops the cable."""
        return any(f.severity is Severity.ERROR for f in self.findings)

    def stop(
        self, code: str, text: str, *, remedy: str = "", origin: Origin | None = None, raw: str = ""
    ) -> None:
        """Add what stops the cable."""
        self._add(code, text, Severity.ERROR, remedy, origin or self._cable.origin, raw)

    def say(self, code: str, text: str, severity: Severity = Severity.NOTE) -> None:
        """Add a note, or what an engineer must see."""
        self._add(code, text, severity, "", self._cable.origin, "")

    def _add(
        self, code: str, text: str, severity: Severity, remedy: str, origin: Origin, raw: str
    ) -> None:
        self.findings.append(
            Finding(
                code=code,
                severity=severity,
                text=text,
                remedy=remedy,
                cable=self._cable.mark,
                handle=origin.handle,
                line=origin.line,
                layer=origin.layer or None,
                at=origin.at,
                raw=raw,
            )
        )


def say_inextensible(remarks: Remarks) -> None:
    """Say that a cut cable without EA is taken as inextensible: an engineer must see that."""
    remarks.say(
        "cut-inextensible",
        f"{remarks.name} keeps its cut length and states no EA: it runs as inextensible",
        Severity.WARNING,
    )
