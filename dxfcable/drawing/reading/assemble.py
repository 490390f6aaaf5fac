"""Drafts made into the layout's values, forces in one unit."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import listed
from dxfcable.model import Cable, LoadPoint, Rule, Support, SupportKind
from dxfcable.quantities import convert

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.reading.context import CableDraft, Context, SupportDraft
    from dxfcable.drawing.reading.loadowners import Carried
    from dxfcable.drawing.reading.loadpoints import LoadDraft
    from dxfcable.model import Point, Rectangle
    from dxfcable.quantities import Force


class Forces:
    """All forces that a drawing states, and the one unit they are given in.

    Parameters
    ----------
    context : Context
        Takes notes on mixed units and on bare forces.
    cables : sequence of CableDraft
    carried : sequence of Carried
    others : sequence of Force
        Of anchor blocks.

    Attributes
    ----------
    unit : str
        Of the first load as drawn from the left, else of the rule, else of WEIGHT, else of
        what else there is; "" where no force is stated.
    """

    def __init__(
        self,
        context: Context,
        cables: Sequence[CableDraft],
        carried: Sequence[Carried],
        others: Sequence[Force],
    ) -> None:
        loads = [
            force
            for held in carried
            for draft in (*held.loads, *(d for _, d in held.at_supports))
            for force in draft.cases.values()
        ]
        rules = [c.rule_force for c in cables if c.rule_force is not None]
        rest = [f for c in cables for f in (c.ea, c.capacity) if f is not None]
        weights = [c.weight.force_unit for c in cables if c.weight is not None]
        units = [f.unit for f in (*loads, *rules)] + weights
        units += [f.unit for f in (*rest, *others)]
        self.unit = units[0] if units else ""
        kinds = list(dict.fromkeys(units))
        if len(kinds) > 1:
            text = f"forces are stated in {listed(kinds)}; all are given in {self.unit}"
            context.faults.note(Code.FORCE_UNITS_MIXED, text)
        bare = [f for f in (*loads, *rules, *rest, *others) if f.is_bare]
        if bare:
            text = f"{len(bare)} forces without unit are read as {context.style.bare_unit}"
            context.faults.note(Code.FORCE_UNIT_ASSUMED, text)


def support_of(key: int, draft: SupportDraft, cables: Sequence[CableDraft]) -> Support:
    """Make a support; its kind counts only where a cable passes over it."""
    is_saddle = any(key in cable.keys[1:-1] for cable in cables)
    return Support(
        key=key,
        mark=draft.mark,
        x=draft.at[0],
        y=draft.at[1],
        kind=draft.kind if is_saddle and draft.kind else SupportKind.END,
        stated_elevation=draft.elevation.value if draft.elevation else None,
        origin=draft.origin,
    )


def cable_of(
    draft: CableDraft,
    supports: Sequence[Support],
    carried: Carried,
    force_unit: str,
    length_unit: str,
    *,
    deck: tuple[Point, ...],
    clearance: tuple[Point, ...],
    frame: Rectangle | None,
) -> Cable:
    """Make a cable of its draft.

    Parameters
    ----------
    draft : CableDraft
    supports : sequence of Support
    carried : Carried
    force_unit, length_unit : str
        Of the layout.
    deck, clearance : tuple of Point
    frame : Rectangle or None

    Returns
    -------
    Cable
    """
    return Cable(
        mark=draft.mark,
        supports=tuple(supports[key] for key in draft.keys),
        loads=tuple(_load_of(load, force_unit) for load in carried.loads),
        support_loads=tuple((key, _load_of(load, force_unit)) for key, load in carried.at_supports),
        rule=_rule_of(draft, force_unit),
        under=draft.under,
        datum=draft.datum,
        weight=draft.weight.into(force_unit, length_unit) if draft.weight else 0.0,
        weight_case=draft.weight_case,
        ea=_into(draft.ea, force_unit),
        alpha=draft.alpha,
        delta_t=draft.delta_t,
        capacity=_into(draft.capacity, force_unit),
        strand=draft.strand,
        fitting_left=draft.fitting_left,
        fitting_right=draft.fitting_right,
        deck=deck,
        clearance=clearance,
        frame=frame,
        origin=draft.origin,
    )


def _into(force: Force | None, unit: str) -> float | None:
    return None if force is None else convert(force.value, force.unit, unit)


def _rule_of(draft: CableDraft, force_unit: str) -> Rule | None:
    rule, force = draft.rule, draft.rule_force
    if rule is None or force is None:
        return rule
    value = convert(force.value, force.unit, force_unit)
    return Rule(kind=rule.kind, value=value, text=rule.text, origin=rule.origin)


def _load_of(draft: LoadDraft, force_unit: str) -> LoadPoint:
    return LoadPoint(
        mark=draft.mark,
        x=draft.at[0],
        y=draft.at[1],
        cases=tuple(
            (case, convert(force.value, force.unit, force_unit))
            for case, force in draft.cases.items()
        ),
        symbol=draft.symbol,
        clamped=draft.clamped,
        origin=draft.origin,
        value_origin=draft.value_origin,
    )
