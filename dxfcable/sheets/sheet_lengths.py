"""What a fabricator reads off a sheet: measuring lengths, fittings, cut lengths, forces by level.

Taken from the schedules, word for word, so that sheets and schedules never differ.
"""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.sheets import Fabrication
from dxfcable.scheduling.schedule_fields import cable_fields, hanger_fields, words_for
from dxfcable.scheduling.schedules import schedules

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import FormedCable, Layout, Solution
    from dxfcable.scheduling.schedule_fields import Field
    from dxfcable.scheduling.schedule_rows import CableRow, HangerRow, Schedules
    from dxfcable.settings import Settings

_OF_CABLE = (
    *("pin_offset_left", "pin_offset_right", "measuring_tension", "measured_length"),
    *("fitting_left", "fitting_right", "pin_to_face_left", "pin_to_face_right"),
    *("embedment_left", "embedment_right", "constructional_stretch", "cut_length"),
)
_BY_LEVEL = tuple(
    f"{name}_{level}" for level in ("service", "factored") for name in ("largest", "least")
)
_OF_HANGER = ("slack", "ea", "clamp_drop", "deck_pin", "unstressed_length", "cut_length")


def fabrication(layout: Layout, solution: Solution, settings: Settings) -> dict[int, Fabrication]:
    """Give what the schedules say beyond the state shown, for each cable by its position.

    Parameters
    ----------
    layout, solution : Layout, Solution
        Cables in the same order.
    settings : Settings
        Deductions of end fittings.

    Returns
    -------
    dict of int to Fabrication
    """
    whole = schedules(layout, solution, settings)
    hangers = iter(whole.hangers)
    found = {}
    for index, (row, formed) in enumerate(zip(whole.cables, solution.cables, strict=True)):
        own = [next(hangers) for node in formed.nodes if node.hanger is not None]
        found[index] = Fabrication(
            cable_rows=_cable_rows(whole, row),
            hanger_head=_head(whole, own, formed),
            hanger_rows=tuple(_hanger_cells(whole, hanger, formed) for hanger in own),
        )
    return found


def _cable_rows(whole: Schedules, row: CableRow) -> tuple[tuple[str, str], ...]:
    """Pair names and words of what is known of a cable's lengths."""
    words = words_for(whole, row)
    fields = _chosen(cable_fields(whole, row), _OF_CABLE)
    rows = [(field.label.upper(), words.of(field)) for field in fields if words.of(field)]
    if row.lengths.missing and any(row.lengths.fittings):
        rows.append(("NO CUT LENGTH", row.lengths.missing))
    return tuple(rows)


def _keys(formed: FormedCable) -> tuple[str, ...]:
    """List the columns of hangers: forces by level where there are states beside the formed one."""
    return (*(_BY_LEVEL if formed.states else ()), *_OF_HANGER)


def _head(whole: Schedules, rows: Sequence[HangerRow], formed: FormedCable) -> tuple[str, ...]:
    if not rows:
        return ()
    fields = _chosen(hanger_fields(whole, rows[0]), _keys(formed))
    return tuple(field.label.upper() for field in fields)


def _hanger_cells(whole: Schedules, row: HangerRow, formed: FormedCable) -> tuple[str, ...]:
    words = words_for(whole, row)
    fields = _chosen(hanger_fields(whole, row), _keys(formed))
    # Without stiffness the unstressed length is the length, which stands there already.
    is_same = row.ea is None
    return tuple(
        "" if is_same and field.key == "unstressed_length" else words.of(field) for field in fields
    )


def _chosen(fields: Sequence[Field], keys: Sequence[str]) -> list[Field]:
    """Pick fields by their keys, in the order of the keys."""
    by_key = {field.key: field for field in fields}
    return [by_key[key] for key in keys]
