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
    from dxfcable.settings import Settings
    from dxfcable.solving.remarks import Remarks


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
    combos, combos_are_recorded : tuple of str, bool
        Combinations to check, as typed; whether that was in an earlier run, so that those which
        no longer fit are only told.
    cut : bool
        Whether the cables count as cut from now on.
    """

    rule: Rule | None = None
    cable: str | None = None
    under: str | None = None
    combos: tuple[str, ...] = ()
    combos_are_recorded: bool = False
    cut: bool = False


def refuse_later_work(cable: Cable, remarks: Remarks) -> None:
    """Refuse by name what this version does not compute."""
    asked = []
    if len(cable.supports) > 2:
        asked.append(("later-saddles", "saddles between its ends"))
    if cable.strand:
        asked.append(("later-strand", "a strand from a table (STRAND)"))
    for code, what in asked:
        remarks.stop(
            code,
            f"cable {cable.mark} asks for {what}, which this version does not compute",
            remedy="Take it out of the drawing, or state its effect as loads or EA.",
        )
    if cable.delta_t and cable.alpha is None:
        remarks.stop(
            "no-alpha",
            f"cable {cable.mark} has DELTA_T and no ALPHA",
            remedy='Write ALPHA into its data block, such as "12e-6 /C".',
        )


def combination_for(
    cable: Cable, forming: Forming, settings: Settings, remarks: Remarks
) -> Combination | None:
    """Choose the combination that a cable is formed under, None where that stops it."""
    cases = list(dict.fromkeys(case for load in cable.loads for case, _ in load.cases))
    own_case = weight_case(cable) if cable.weight else None
    if own_case is not None and own_case not in cases:
        cases.append(own_case)
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


def weight_case(cable: Cable) -> str | None:
    """Return the case that a cable's own weight belongs to, None where nothing tells.

    WEIGHT_CASE, else D, else G, else the one case there is; D where there are no loads.
    """
    cases = list(dict.fromkeys(case for load in cable.loads for case, _ in load.cases))
    if cable.weight_case or not cases:
        return cable.weight_case or "D"
    return default_under(cases)


def weight_under(cable: Cable, combination: Combination, remarks: Remarks) -> float:
    """Return the cable's weight with the factor that the combination gives it."""
    if not cable.weight:
        return 0.0
    case = weight_case(cable)
    if case is None:
        remarks.stop(
            "no-weight-case",
            f"cable {cable.mark} has a weight, and neither D nor G is among its cases",
            remedy="Write WEIGHT_CASE in its data block.",
        )
        return 0.0
    factors = dict(combination.terms)
    if case not in factors:
        remarks.say(
            "no-cable-weight",
            f"cable {cable.mark}: {combination.text} has no {case}, so no weight of the cable",
        )
    return cable.weight * factors.get(case, 0.0)


def rule_for(cable: Cable, forming: Forming, remarks: Remarks) -> Rule | None:
    """Choose the governing rule: the drawing's, or the command line's where it applies."""
    option = forming.rule
    if option is None:
        return cable.rule
    if forming.cable is None:
        if cable.rule is not None:
            remarks.say(
                "rule-unused",
                f"cable {cable.mark} has {_named(cable.rule)} of its own, so {_named(option)} of "
                f"the command line is not used; with --cable {cable.mark} it would be",
            )
        return cable.rule or option
    if forming.cable != cable.mark:
        return cable.rule
    if cable.rule is not None:
        remarks.say(
            "rule-overruled",
            f"cable {cable.mark}: {_named(option)} of the command line overrules "
            f"{_named(cable.rule)} of the drawing",
        )
    return option


def _named(rule: Rule) -> str:
    """Write a rule as it was stated, with its name once."""
    name = rule.kind.name
    return rule.text if rule.text.upper().startswith(name) else f"{name} {rule.text}".strip()


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
