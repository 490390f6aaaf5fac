"""From what is drawn to what follows: each cable formed, each support in equilibrium.

Units are the drawing's, as in `Layout`. All faults of all cables are collected before
anything is refused.
"""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.errors import LayoutError, RuleError
from dxfcable.model import (
    Cable,
    Finding,
    FormedCable,
    Layout,
    Rule,
    RuleKind,
    Severity,
    Solution,
)
from dxfcable.quantities import format_force
from dxfcable.recorded import CUT, FORMED
from dxfcable.solving.anchorages import anchorages, loads_at_supports
from dxfcable.solving.built import Built
from dxfcable.solving.gathering import gather
from dxfcable.solving.giving import giving_heads, recorded_heads
from dxfcable.solving.governing import (
    Forming,
    combination_for,
    offer_sags,
    refuse_later_work,
    rule_for,
    rule_value,
    weight_under,
)
from dxfcable.solving.remarks import Remarks, say_inextensible
from dxfcable.statics.catenary_forming import form_catenary
from dxfcable.statics.combinations import combine
from dxfcable.statics.forming import form

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.model import Anchorage
    from dxfcable.recorded import RecordedHead
    from dxfcable.settings import Settings
    from dxfcable.solving.anchorages import MovedHead
    from dxfcable.solving.built import Standing
    from dxfcable.solving.curves import Shape
    from dxfcable.statics.combinations import Combination

__all__ = ["Forming", "solve"]

_EXACT = 6  # digits, where a bound is shown
_REFUSED = "the drawing cannot be solved as it is"


def solve(
    layout: Layout,
    forming: Forming,
    settings: Settings,
    standing: Mapping[str, Standing] | None = None,
) -> Solution:
    """Form every cable, find the forces at every mast and stay, and check the combinations.

    Parameters
    ----------
    standing : mapping of str to Standing, optional
        Cables already cut, by mark: they are not formed, they keep their lengths.

    Raises
    ------
    LayoutError
        With all findings, where one of them stops.
    """
    work = _Work(layout, forming, settings, standing or {})
    work.notes += _unknown_cable(layout, forming)
    for number in range(len(layout.cables)):
        work.form(number)
    work.refuse_if_stopped()
    work.stand()
    work.refuse_if_stopped()
    work.join()
    work.refuse_if_stopped()
    return work.checked()


class _Work:
    """One layout on its way to a solution."""

    def __init__(
        self,
        layout: Layout,
        forming: Forming,
        settings: Settings,
        standing: Mapping[str, Standing],
    ) -> None:
        self._layout = layout
        self._forming = forming
        self._settings = settings
        self._standing = standing
        self._cables = list(layout.cables)
        self._formed: dict[int, FormedCable] = {}
        self._combinations: dict[int, Combination] = {}
        self._built: dict[int, Built] = {}
        self._heads: tuple[tuple[int, RecordedHead], ...] = ()
        self._moved: dict[int, MovedHead] = {}
        self._anchorages: tuple[Anchorage, ...] = ()
        self.notes: list[Finding] = []

    def refuse_if_stopped(self) -> None:
        """Refuse with everything found so far, if something of it stops."""
        if any(f.severity is Severity.ERROR for f in self.notes):
            raise LayoutError(_REFUSED, tuple(self.notes))

    def form(self, number: int) -> None:
        """Form one cable, or fit one that is cut to its record."""
        cable = self._cables[number]
        remarks = Remarks(cable)
        standing = self._standing.get(cable.mark)
        if standing is not None:
            from dxfcable.solving.standing import fitted

            refuse_later_work(cable, remarks)
            self._cables[number] = fitted(cable, standing, remarks)
            self._say_unused(cable, remarks)
            self.notes += remarks.findings
            return
        combination = combination_for(cable, self._forming, self._settings, remarks)
        found = _form(self._layout, cable, combination, self._forming, self._settings, remarks)
        self.notes += remarks.findings
        if found is not None and combination is not None:
            shape, formed = found
            self._formed[number] = formed
            self._combinations[number] = combination
            self._built[number] = Built(
                cable=cable,
                pieces=tuple(shape.unstressed_lengths.tolist()),
                shape=shape,
                delta_t=cable.delta_t or 0.0,
            )

    def _say_unused(self, cable: Cable, remarks: Remarks) -> None:
        """Say what the command line asks in vain of a cable that is cut."""
        forming = self._forming
        if forming.rule is not None and forming.cable in (None, cable.mark):
            name = forming.rule.text or forming.rule.kind.name
            text = f"{remarks.name} is cut: {forming.rule.kind.name} {name} of the command line"
            remarks.say("rule-unused", f"{text} is not used; --reform forms it anew")
        if forming.under is not None:
            text = f'{remarks.name} is cut: --under "{forming.under}" is not used'
            remarks.say("under-unused", f"{text}; --reform forms it anew")

    def stand(self) -> None:
        """Find how the cables that are cut stand."""
        numbers = [k for k, c in enumerate(self._cables) if c.mark in self._standing]
        if not numbers:
            return
        from dxfcable.solving.standing import stand

        self._heads = recorded_heads(self._layout, self._standing, self.notes)
        pairs = [(self._cables[k], self._standing[self._cables[k].mark]) for k in numbers]
        stood, self._moved = stand(self._layout, pairs, self._heads, self._settings, self.notes)
        for number, one in zip(numbers, stood, strict=False):
            self._formed[number] = one.formed
            self._combinations[number] = one.combination
            self._built[number] = one.built

    def join(self) -> None:
        """Find the forces of masts, stays and anchors, and which heads give after forming."""
        order = range(len(self._cables))
        loads = loads_at_supports(self._layout, [self._combinations[k] for k in order])
        self._anchorages, said = anchorages(
            self._layout,
            [self._formed[k].reactions for k in order],
            loads,
            self._settings,
            heads=self._moved,
        )
        self.notes += said
        if not self._layout.stays:
            return
        known = {key for key, _ in self._heads}
        fresh = [a for a in self._anchorages if a.support not in known]
        cut = {s.key for c in self._cables if c.mark in self._standing for s in c.supports} - known
        self._heads += giving_heads(self._layout, fresh, cut, self.notes)
        self._say_rigid({key for key, _ in self._heads})

    def _say_rigid(self, giving: set[int]) -> None:
        """Say of each cable with stays which of its supports do not give."""
        for number, cable in enumerate(self._cables):
            keys = {s.key for s in cable.supports}
            if keys & giving:
                formed = self._formed[number]
                self._formed[number] = replace(formed, supports_rigid=False)
            stayed = keys & {stay.support for stay in self._layout.stays}
            if not stayed - giving:
                continue
            held = [s.mark for s in cable.supports if s.key not in giving]
            remarks = Remarks(cable)
            which = f" ({', '.join(held)})" if keys & giving else ""
            remarks.say("supports-rigid", f"cable {cable.mark}: supports held rigid{which}")
            self.notes += remarks.findings

    def checked(self) -> Solution:
        """Check every combination asked for."""
        order = range(len(self._cables))
        formed = tuple(self._formed[k] for k in order)
        texts = self._forming.combos
        has_heat = any(cable.delta_t for cable in self._cables)
        if texts or has_heat or any(cable.clearance for cable in self._cables):
            from dxfcable.solving.checking import check, combinations_asked

            built = [self._built[k] for k in order]
            asked, faults = combinations_asked(built, formed, texts, self._settings)
            if self._forming.combos_are_recorded:
                faults = [
                    replace(
                        f,
                        severity=Severity.NOTE,
                        text=f"a combination of the record is not checked any more: {f.text}",
                    )
                    for f in faults
                ]
            self.notes += faults
            self.refuse_if_stopped()
            found = check(self._layout, built, formed, asked, self._heads, self._settings)
            self.notes += found.findings
            self.refuse_if_stopped()
            formed = found.cables
        return Solution(
            cables=formed,
            anchorages=self._anchorages,
            findings=tuple(dict.fromkeys(self.notes)),
            heads=self._heads,
            combos=texts,
        )


def _unknown_cable(layout: Layout, forming: Forming) -> list[Finding]:
    """Refuse a rule for a cable that is not there."""
    marks = [cable.mark for cable in layout.cables]
    if forming.cable is None or forming.cable in marks:
        return []
    return [
        Finding(
            code="unknown-cable",
            severity=Severity.ERROR,
            text=f'there is no cable "{forming.cable}" in this drawing',
            remedy=f"Its cables are {', '.join(marks) or 'none'}.",
        )
    ]


def _form(
    layout: Layout,
    cable: Cable,
    combination: Combination | None,
    forming: Forming,
    settings: Settings,
    remarks: Remarks,
) -> tuple[Shape, FormedCable] | None:
    """Form one cable, None where a finding stops it."""
    refuse_later_work(cable, remarks)
    rule = rule_for(cable, forming, remarks)
    if remarks.is_stopped or combination is None:
        return None
    weight = weight_under(cable, combination, remarks)
    loads = combine([load.cases for load in cable.loads], combination)
    x = [cable.supports[0].x, *(load.x for load in cable.loads), cable.supports[-1].x]
    if rule is None:
        offer_sags(layout, cable, x, loads.tolist(), settings, remarks)
        return None
    ends = cable.supports[0].y, cable.supports[-1].y
    value = rule_value(cable, rule)
    shape: Shape
    try:
        if weight:
            shape = form_catenary(
                x, loads, *ends, rule.kind, value, point=rule.point, weight=weight, ea=cable.ea
            )
        else:
            shape = form(x, loads, *ends, rule.kind, value, point=rule.point, ea=cable.ea)
    except (RuleError, ValueError) as error:
        text = f"cable {cable.mark}: {_refusal(layout, rule, error)}"
        remarks.stop("rule", text, origin=rule.origin, raw=rule.text)
        return None
    _remark(cable, shape, settings, remarks)
    if forming.cut and cable.ea is None:
        say_inextensible(remarks)
    status = CUT if forming.cut else FORMED
    formed = gather(layout, cable, rule, combination, shape, settings, remarks, status=status)
    return shape, formed


def _refusal(layout: Layout, rule: Rule, error: Exception) -> str:
    """Say why a rule cannot be met, the least tension with its unit."""
    least = getattr(error, "least", None)
    if rule.kind is not RuleKind.MAX_TENSION or least is None:
        words = str(error).rstrip(".")
        return f"{words} (forces in {layout.force_unit}, lengths in {layout.length_unit})"
    more = "more than " if getattr(error, "is_limit", False) else ""
    unit = layout.force_unit or ""
    return (
        f"MAX_TENSION {format_force(rule.value, unit, _EXACT)} cannot be met: the least tension "
        f"possible under these loads is {more}{format_force(least, unit, _EXACT)}"
    )


def _remark(cable: Cable, shape: Shape, settings: Settings, remarks: Remarks) -> None:
    """Say what an engineer should know of this shape."""
    if shape.has_uplift:
        marks = ", ".join(cable.loads[k - 1].mark for k in shape.above_string)
        remarks.say(
            "above-string",
            f"cable {cable.mark}: uplift holds {marks} above the closing string; "
            "this is no simple hanging shape",
        )
    ratio = shape.sag / shape.span
    low, high = settings.limits.sag_ratio
    if not low <= ratio <= high:
        remarks.say(
            "sag-ratio",
            f"cable {cable.mark}: sag over span is {ratio:.4f}, outside {low:g} to {high:g}",
        )
    if cable.delta_t:
        stated = settings.show.reference_temperature
        remarks.say(
            "reference-temperature",
            f"cable {cable.mark}: formed at the reference temperature, "
            f"{stated or 'which the settings do not state (reference_temperature)'}",
        )
    if cable.ea is None:
        remarks.say(
            "inextensible",
            f"cable {cable.mark}: no EA is given; the unstressed length is taken as the length",
        )
