"""What was held against what: checks with their worst case, and each difference."""

from __future__ import annotations

import math
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Point


@dataclass(frozen=True, slots=True, kw_only=True)
class Difference:
    """One thing that is not as it must be.

    Attributes
    ----------
    check : str
        Name of the check that found it.
    amount, unit : float or None, str
        By how much; None where something is missing or cannot be read.
    offset : int or None
        First byte of the entity in the file.
    """

    check: str
    text: str
    amount: float | None = None
    unit: str = ""
    id: str = ""
    handle: str | None = None
    offset: int | None = None
    layer: str | None = None
    at: Point | None = None
    raw: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Check:
    """One law, held against everything that it governs.

    Attributes
    ----------
    worst, tolerance : float or None
        Of the case that comes nearest to its tolerance, or exceeds it most; None where nothing
        was measured.
    count : int
        How many cases were held against it.
    """

    name: str
    passed: bool
    worst: float | None
    tolerance: float | None
    unit: str
    count: int
    handle: str | None


@dataclass(slots=True)
class _Draft:
    """A check while cases come in."""

    unit: str
    worst: float | None = None
    tolerance: float | None = None
    ratio: float = -1.0
    count: int = 0
    handle: str | None = None
    failures: int = 0


@dataclass(slots=True)
class Tally:
    """Collects the cases of one cable."""

    drafts: dict[str, _Draft] = field(default_factory=dict)
    differences: list[Difference] = field(default_factory=list)

    def open(self, check: str, unit: str = "") -> None:
        """Name a check, in the order in which they are shown."""
        self.drafts.setdefault(check, _Draft(unit))

    def hold(
        self,
        check: str,
        amount: float,
        tolerance: float,
        text: str,
        entity: IssuedEntity | None = None,
        unit: str | None = None,
    ) -> bool:
        """Hold an amount against its tolerance.

        Parameters
        ----------
        check : str
            Its name, opened before.
        amount, tolerance : float
            In the check's unit; what is not a number fails.
        text : str
            What differs, should it fail.
        entity : IssuedEntity, optional
            Where.
        unit : str, optional
            Of this case, in a check whose cases have several.

        Returns
        -------
        bool
            Whether it holds.
        """
        draft = self.drafts[check]
        draft.count += 1
        unit = draft.unit if unit is None else unit
        ratio = amount / tolerance if tolerance > 0.0 else (math.inf if amount > 0.0 else 0.0)
        ratio = math.inf if math.isnan(ratio) else ratio
        holds = ratio <= 1.0
        if ratio > draft.ratio:
            draft.ratio, draft.tolerance, draft.unit = ratio, tolerance, unit
            draft.worst = amount if math.isfinite(amount) else None
            draft.handle = entity.handle if entity is not None and not holds else None
        if not holds:
            is_known = math.isfinite(amount)
            by = f" by {amount:.3g} {unit}".rstrip() if is_known else ""
            self._add(check, f"{text}{by}", entity, amount if is_known else None, unit)
        return holds

    def fail(self, check: str, text: str, entity: IssuedEntity | None = None) -> None:
        """Say that something is missing, doubled, or cannot be read."""
        self.drafts[check].count += 1
        if self.drafts[check].handle is None and entity is not None:
            self.drafts[check].handle = entity.handle
        self._add(check, text, entity, None, "")

    def _add(
        self, check: str, text: str, entity: IssuedEntity | None, amount: float | None, unit: str
    ) -> None:
        self.drafts[check].failures += 1
        self.differences.append(
            Difference(
                check=check,
                text=text,
                amount=amount,
                unit=unit,
                id=entity.id if entity else "",
                handle=entity.handle if entity else None,
                offset=entity.offset if entity else None,
                layer=entity.layer if entity else None,
                at=entity.start if entity and math.isfinite(sum(entity.start)) else None,
                raw=entity.text if entity else "",
            )
        )

    def checks(self) -> tuple[Check, ...]:
        """Give all checks that had a case."""
        return tuple(
            Check(
                name=name,
                passed=not draft.failures,
                worst=draft.worst,
                tolerance=draft.tolerance,
                unit=draft.unit,
                count=draft.count,
                handle=draft.handle,
            )
            for name, draft in self.drafts.items()
            if draft.count
        )
