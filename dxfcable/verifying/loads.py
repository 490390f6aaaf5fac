"""What the drafter's layout says of one cable's loads, as the issued drawing uses them."""

from __future__ import annotations

import math
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.labels import text_width
from dxfcable.drawing.painting.naming import unique_parts
from dxfcable.forces import Style, parse_load_text
from dxfcable.pairing import pair
from dxfcable.solving.governing import Forming, combination_for, weight_under
from dxfcable.solving.remarks import Remarks
from dxfcable.statics.combinations import combine
from dxfcable.units import QuantityError, convert, tidy

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.model import Cable, LoadPoint, Point
    from dxfcable.settings import Cases, Settings
    from dxfcable.statics.combinations import Combination
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.words import Reader

_SAME = 1e-9  # relative
OVERRULED = re.compile(r"(?P<used>.+) \(drawn (?P<drawn>.+)\)\Z")


@dataclass(frozen=True, slots=True, kw_only=True)
class Carried:
    """A load under the combination that formed the cable.

    Attributes
    ----------
    value, half : float
        Down positive; half the worth of its last place where a label of ours states it [force].
    label : IssuedEntity or None
        The label that overrules the drafter's text.
    label_fits : bool
        Whether it names that text as it is now.
    """

    point: LoadPoint
    name: str
    value: float
    half: float = 0.0
    label: IssuedEntity | None = None
    label_fits: bool = True


@dataclass(frozen=True, slots=True, kw_only=True)
class Demand:
    """What a cable is to carry.

    Attributes
    ----------
    combination : Combination or None
        None where it does not read.
    weight : float
        Of the cable with its factor, per unstressed length [force/length].
    """

    cable: Cable
    combination: Combination | None
    loads: tuple[Carried, ...]
    weight: float
    names: tuple[str, ...]

    def of_span(self, number: int) -> tuple[Carried, ...]:
        """Give the loads between two neighbouring supports."""
        left, right = self.cable.supports[number - 1 : number + 1]
        return tuple(c for c in self.loads if left.x < c.point.x < right.x)


def demand_on(
    cable: Cable,
    prefix: str,
    under: Sequence[str],
    sheet: Sheet,
    reader: Reader,
    settings: Settings,
) -> Demand:
    """Combine a cable's loads, labels of ours first.

    Parameters
    ----------
    under : sequence of str
        Combination as schedule and diagram say it; the first that reads counts, else what the
        drafter's drawing says.
    """
    remarks = Remarks(cable)
    asked = [Forming(under=words) for words in under if words]
    combination = next(
        (
            found
            for forming in (*asked, Forming())
            if (found := combination_for(cable, forming, settings, Remarks(cable))) is not None
        ),
        None,
    )
    names = _names(cable)
    values = [0.0] * len(cable.loads)
    weight = 0.0
    if combination is not None:
        values = combine([load.cases for load in cable.loads], combination).tolist()
        weight = weight_under(cable, combination, remarks) if cable.weight else 0.0
    labels = _labels(cable, prefix, names, sheet, reader, settings.cases)
    loads = []
    for name, point, value, label in zip(names, cable.loads, values, labels, strict=True):
        match = OVERRULED.match(label.text) if label else None
        shown = reader.load(match["used"]) if match else None
        if label is not None and shown is not None:
            loads.append(
                Carried(
                    point=point,
                    name=name,
                    value=shown.value,
                    half=shown.half,
                    label=label,
                    label_fits=says_drawn(label, point, reader, settings.cases),
                )
            )
        else:
            loads.append(Carried(point=point, name=name, value=value))
    return Demand(
        cable=cable,
        combination=combination,
        loads=tuple(loads),
        weight=weight,
        names=names,
    )


def _names(cable: Cable) -> tuple[str, ...]:
    """Give the part of ids of each load point, as its node has it."""
    nodes = [(s.x, 0, s.mark) for s in cable.supports] + [(p.x, 1, p.mark) for p in cable.loads]
    nodes.sort(key=lambda node: (node[0], node[1]))
    parts = unique_parts([mark for _, _, mark in nodes], "N")
    return tuple(part for part, node in zip(parts, nodes, strict=True) if node[1])


def node_names(cable: Cable) -> tuple[str, ...]:
    """Give the part of ids of every node, left to right."""
    nodes = [(s.x, s.mark) for s in cable.supports] + [(p.x, p.mark) for p in cable.loads]
    return unique_parts([mark for _, mark in sorted(nodes, key=lambda node: node[0])], "N")


def _labels(
    cable: Cable,
    prefix: str,
    names: Sequence[str],
    sheet: Sheet,
    reader: Reader,
    cases: Cases,
) -> list[IssuedEntity | None]:
    """Find the labels that overrule the drafter's texts."""
    if sheet.has_marks:
        return [sheet.named.get(f"{prefix}/load/{name}") for name in names]
    pool = [e for e in sheet.loose if "reaction" in e.roles and OVERRULED.match(e.text)]
    reach = 20.0 * sheet.height
    costs = [
        [
            _apart(e, (p.x, p.y)) + (0.0 if says_drawn(e, p, reader, cases) else 0.5 * reach)
            for p in cable.loads
        ]
        for e in pool
    ]
    found: list[IssuedEntity | None] = [None] * len(names)
    for i, j in pair(costs) if pool and names else ():
        if costs[i][j] <= reach:
            sheet.adopt(f"{prefix}/load/{names[j]}", pool[i])
            found[j] = sheet.named[f"{prefix}/load/{names[j]}"]
    return found


def says_drawn(label: IssuedEntity, point: LoadPoint, reader: Reader, cases: Cases) -> bool:
    """Tell whether a label names the values that the drafter's text has now.

    The label has the drafter's own words, or some of his values.
    """
    match = OVERRULED.match(label.text)
    if match is None:
        return False
    origin = point.value_origin
    if origin is not None and tidy(origin.raw).removeprefix("LOAD=") == tidy(match["drawn"]):
        return True
    style = Style(length_unit=reader.length_unit, bare_unit=reader.force_unit, upward_sign="-")
    try:
        said = parse_load_text(match["drawn"], style, cases).cases
    except QuantityError:
        return False
    drawn = dict(point.cases)
    return all(
        one.case in drawn
        and math.isclose(
            convert(one.force.value, one.force.unit, reader.force_unit),
            drawn[one.case],
            rel_tol=_SAME,
        )
        for one in said
    )


def _apart(label: IssuedEntity, point: Point) -> float:
    """Give the distance of a point from a level text."""
    half = 0.5 * text_width(label.text, label.height)
    across = max(0.0, abs(label.middle[0] - point[0]) - half)
    return max(across, abs(label.middle[1] - point[1]))
