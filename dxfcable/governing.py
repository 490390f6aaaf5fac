"""What governs a cable: the combination that it is formed under and its one rule."""

from __future__ import annotations

from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.errors import RuleError
from dxfcable.lengths import format_length
from dxfcable.model import RuleKind
from dxfcable.quantities import format_force
from dxfcable.statics.combinations import Combination, CombinationError, default_under, parse
from dxfcable.statics.sag_table import sag_table

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, Layout, Point, Rule
    from dxfcable.remarks import Remarks
    from dxfcable.settings import Settings


@dataclass(frozen=True, slots=True, kw_only=True)
class Forming:
    """What the command line says about forming.

    Attributes
    ----------
    rule : Rule or None
        Serves cables without a rule of their own; with `cable` it sets that cable's rule.
    cable : str or None
        Mark of the cable that the rule is for.
    under : str or None
        Combination that overrules the drawing's UNDER.
    """

    rule: Rule | None = None
    cable: str | None = None
    under: str | None = None


def refuse_later_work(cable: Cable, remarks: Remarks) -> None:
    """Refuse by name what this version does not compute."""
    asked = []
    if len(cable.supports) > 2:
        asked.append(("later-saddles", "saddles between its ends"))
    if cable.weight:
        asked.append(("later-weight", "its own weight (WEIGHT)"))
    if cable.delta_t is not None:
        asked.append(("later-temperature", "a change of temperature (DELTA_T)"))
    if cable.strand:
        asked.append(("later-strand", "a strand from a table (STRAND)"))
    for code, what in asked:
        remarks.stop(
            code,
            f"cable {cable.mark} asks for {what}, which this version does not compute",
            remedy="Take it out of the drawing, or state its effect as loads or EA.",
        )


def combination_for(
    cable: Cable, forming: Forming, settings: Settings, remarks: Remarks
) -> Combination | None:
    """Choose the combination that a cable is formed under, None where that stops it."""
    cases = list(dict.fromkeys(case for load in cable.loads for case, _ in load.cases))
    text = forming.under or cable.under
    if forming.under and cable.under and forming.under != cable.under:
        remarks.say(
            "under-overruled",
            f'cable {cable.mark}: formed under "{forming.under}" of the command line, '
            f'not "{cable.under}" of the drawing',
        )
    if not cases:
        remarks.stop(
            "no-loads",
            f"cable {cable.mark} carries no loads: a cable without weight has then no "
            "determinate shape",
            remedy="Draw load points with values.",
        )
        return None
    if text is None:
        text = default_under(cases)
        if text is None:
            remarks.stop(
                "no-under",
                f"cable {cable.mark} has the cases {', '.join(cases)} and no UNDER says which "
                "combination forms it",
                remedy='Write UNDER in its data block, or give --under "D".',
            )
            return None
        if len(cases) > 1:
            remarks.say(
                "under-assumed",
                f"cable {cable.mark}: no UNDER is given; formed under {text} alone",
            )
    try:
        combination = parse(text, cases, aliases=dict(settings.cases.alias))
    except CombinationError as error:
        remarks.stop("combination", f"cable {cable.mark}, UNDER: {error}", raw=text)
        return None
    if combination.level_is_assumed:
        remarks.say(
            "level-assumed",
            f"cable {cable.mark}: {combination.text} is assumed to be of {combination.level} level",
        )
    return combination


def rule_for(cable: Cable, forming: Forming, remarks: Remarks) -> Rule | None:
    """Choose the governing rule: the drawing's, or the command line's where it applies."""
    option = forming.rule
    if option is None:
        return cable.rule
    if forming.cable is None:
        return cable.rule or option
    if forming.cable != cable.mark:
        return cable.rule
    if cable.rule is not None:
        remarks.say(
            "rule-overruled",
            f"cable {cable.mark}: {option.kind.name} {option.text} of the command line "
            f"overrules {cable.rule.kind.name} {cable.rule.text} of the drawing",
        )
    return option


def rule_value(cable: Cable, rule: Rule) -> float:
    """Return the rule's value as statics wants it: a low point as an ordinate."""
    if rule.kind is RuleKind.LOW_POINT:
        return rule.value - (cable.datum or 0.0)
    return rule.value


def offer_sags(
    layout: Layout,
    cable: Cable,
    x: Sequence[float],
    loads: Sequence[float],
    settings: Settings,
    remarks: Remarks,
) -> None:
    """Stop a cable without a rule, with the table that helps to pick one."""
    unit, digits = layout.force_unit or "", settings.show.force_digits
    ends: Point = (cable.supports[0].y, cable.supports[-1].y)
    head = f"cable {cable.mark} has no governing rule"
    try:
        rows = sag_table(x, loads, *ends, ea=cable.ea)
    except RuleError as error:
        remarks.stop("no-rule", f"{head}, and {error}")
        return
    lines = [
        f"  span/{row.ratio:g}: sag {format_length(row.sag, layout.length_unit)}, "
        f"pull {format_force(row.horizontal, unit, digits)}, "
        f"largest tension {format_force(row.max_tension, unit, digits)}, "
        f"length {format_length(row.length, layout.length_unit)}"
        for row in rows
    ]
    remarks.stop(
        "no-rule",
        "\n".join([f"{head}; sags to pick from:", *lines, " "]),
        remedy="Write one rule into its CABLE-DATA block, or give one, for example "
        f"--sag {rows[1].sag:.4g}.",
    )
