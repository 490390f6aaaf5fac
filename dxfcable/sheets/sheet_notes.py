"""Notes of a sheet: of those that are usual on cable drawings, the ones that apply to a cable.

The subjects are common practice of offices; the words are our own.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Anchorage, Cable, FormedCable, Layout, Solution
    from dxfcable.settings import Settings

_LIVE = frozenset({"L", "LR", "S", "R", "Q"})


def sheet_notes(
    layout: Layout, solution: Solution, settings: Settings
) -> dict[int, tuple[str, ...]]:
    """Give the notes that apply to each cable, by its position.

    Parameters
    ----------
    layout, solution : Layout, Solution
        Cables in the same order.
    settings : Settings
        For the reference temperature and the strength factor.

    Returns
    -------
    dict of int to tuple of str
    """
    found = {}
    for index, (cable, formed) in enumerate(zip(layout.cables, solution.cables, strict=True)):
        keys = {support.key for support in cable.supports}
        anchorages = [a for a in solution.anchorages if a.support in keys]
        found[index] = (
            *_geometry(cable, formed, settings),
            *_assumptions(cable, formed, anchorages),
            *_states(formed, anchorages),
            *_work(cable, anchorages),
        )
    return found


def _geometry(cable: Cable, formed: FormedCable, settings: Settings) -> list[str]:
    """Say what the geometry shown is, and how it is measured."""
    temperature = settings.show.reference_temperature
    at = f"at {temperature}" if temperature else "at the reference temperature, not stated here"
    first = formed.nodes[0].mark or "the left support"
    notes = [
        "Do not scale. Written values govern.",
        f"The shape shown is the cable under the loads of its state, {at}.",
        "Levels are to the centre line of the cable."
        if cable.datum is not None
        else f"Levels are to the centre line of the cable, measured from {first}: no datum is "
        "given.",
    ]
    changed = [p.mark for p in cable.loads if p.drawn]
    if changed:
        notes.append(f"Loads at {', '.join(changed)} are not those drawn: see the value in use.")
    return notes


def _assumptions(cable: Cable, formed: FormedCable, anchorages: Sequence[Anchorage]) -> list[str]:
    """Say what the figures rest on."""
    notes = ["Loads act vertically at the points shown."]
    if formed.ea is None:
        notes.append("The cable is taken as inextensible: no stiffness is stated.")
    else:
        notes.append("Unstressed lengths are without tension; stretch is elastic, by the EA shown.")
    if not formed.weight:
        notes.append("Weight of the cable is not included.")
    if formed.supports_rigid:
        notes.append("Supports are held rigid.")
    elif anchorages:
        notes.append("Heads of masts move with the stretch of their stays.")
    if cable.support_loads:
        notes.append(
            "Loads drawn at a support are not on the cable; its mast and anchor take them."
        )
    if formed.level_is_assumed:
        notes.append("Levels marked ASSUMED (service, factored) are to be confirmed.")
    return notes


def _states(formed: FormedCable, anchorages: Sequence[Anchorage]) -> list[str]:
    """Say how combinations were checked, and what in them needs care."""
    notes = []
    if formed.states:
        notes.append(
            "In combinations, loads are added first and the cable is solved once for their sum, "
            "its unstressed lengths fixed. Tensions are not to be added or factored."
        )
    slack = sorted({mark for state in formed.states for mark in state.slack})
    if slack:
        notes.append(
            f"Hangers {', '.join(slack)} go slack in a combination: ballast, or stays against "
            "uplift, must remain in place."
        )
    lifted = any(a.uplift > 0 for found in anchorages for a in found.anchors)
    if lifted:
        notes.append("Anchors are pulled upwards: their weight or hold must not be reduced.")
    return notes


def _work(cable: Cable, anchorages: Sequence[Anchorage]) -> list[str]:
    """Say what those who build it must keep to."""
    notes = [
        "No welding, flame cutting or other heat near cables; no cutting to length on site.",
        "Handle cables by the maker's least bending radius. Prestretch as the cable schedule says.",
        "Measure the sag and set it right before the deck or cladding goes on.",
    ]
    if any(load.clamped for load in cable.loads):
        notes.append("Tighten clamps again once all dead load hangs.")
        cases = {case.upper() for load in cable.loads for case, _ in load.cases}
        if cases & _LIVE:
            notes.append("No live load before all clamps are set.")
    if any(a.mast is not None for a in anchorages):
        notes.append("Hold masts by temporary means until their stays are set.")
    notes.append("If the order of erection differs, it needs an analysis of its own.")
    notes.append("A change of any load needs the engineer's consent and a new sheet.")
    return notes
