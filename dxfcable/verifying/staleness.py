"""What the drafter changed since the record: load texts, supports, the rule."""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.model import RuleKind

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.model import Cable, LoadPoint, Rule, Support
    from dxfcable.recorded import CableRecord, RecordedLoad

_SAME = 1e-9  # relative: the record holds every digit


def reasons(
    record: CableRecord, cable: Cable | None, supports: Sequence[Support], grain: float
) -> list[str]:
    """Say what differs between a cable as recorded and as it is drawn now.

    Parameters
    ----------
    record : CableRecord
        As issued.
    cable : Cable or None
        As drawn now, None where it no longer reads.
    supports : sequence of Support
        All that are drawn now, for a cable that lost one.
    grain : float
        What rounding makes of a coordinate [length].

    Returns
    -------
    list of str
        One sentence without a full stop for each change; empty where nothing changed.
    """
    if cable is None:
        return ["the cable no longer reads", *_lost(record, supports, grain)]
    found = _supports(record, cable, grain)
    found += _loads("load", record.loads, cable.loads, grain)
    supported = [point for _, point in cable.support_loads]
    found += _loads("load at a support", [p for _, p in record.support_loads], supported, grain)
    return found + _datum(record, cable, grain) + _governing(record, cable)


def _datum(record: CableRecord, cable: Cable, grain: float) -> list[str]:
    """Compare elevations: stated, no longer stated, or stated otherwise."""
    before, now = record.datum, cable.datum
    if before is None and now is None:
        return []
    if before is None:
        return ["no EL was stated, now one is"]
    if now is None:
        return ["an EL was stated, now none is"]
    if abs(now - before) > 4.0 * grain:
        return [f"EL at its supports was changed by {now - before:.6g}"]
    return []


def _renamed(word: str, before: str, now: str) -> list[str]:
    """Tell a mark that was changed."""
    return [] if before == now else [f'{word} "{before}" is marked "{now}" now']


def _lost(record: CableRecord, supports: Sequence[Support], grain: float) -> list[str]:
    """Name the supports that no longer stand where they were."""
    found = []
    for before in record.supports:
        away = [math.dist((before.x, before.y), (now.x, now.y)) for now in supports]
        if not away or min(away) > 2.0 * grain:
            by = f", the nearest is {min(away):.6g} off" if away else ""
            place = f"({before.x:.6g}, {before.y:.6g})"
            found.append(f"support {before.mark} no longer stands at {place}{by}")
    return found


def _supports(record: CableRecord, cable: Cable, grain: float) -> list[str]:
    if len(record.supports) != len(cable.supports):
        return [f"{len(record.supports)} supports were drawn, now {len(cable.supports)}"]
    found = []
    for before, now in zip(record.supports, cable.supports, strict=True):
        off = math.dist((before.x, before.y), (now.x, now.y))
        if off > 2.0 * grain:
            found.append(f"support {now.mark} was moved by {off:.6g}")
        found += _renamed("support", before.mark, now.mark)
    return found


def _loads(
    word: str, before: Sequence[RecordedLoad], now: Sequence[LoadPoint], grain: float
) -> list[str]:
    """Compare loads in order; a different number of them is told as that."""
    if len(before) != len(now):
        return [f"{len(before)} of kind {word} were drawn, now {len(now)}"]
    found = []
    for old, new in zip(before, now, strict=True):
        off = abs(old.x - new.x)
        if off > 2.0 * grain:
            found.append(f"{word} {new.mark} was moved by {off:.6g}")
        found += _renamed(word, old.mark, new.mark)
        if not _is_same(dict(old.drawn), dict(new.cases)):
            text = f"{word} {new.mark} was {_cases(old.drawn)}, now {_cases(new.cases)}"
            found.append(text)
    return found


def _is_same(before: dict[str, float], now: dict[str, float]) -> bool:
    return before.keys() == now.keys() and all(
        math.isclose(value, now[case], rel_tol=_SAME, abs_tol=0.0) for case, value in before.items()
    )


def _cases(cases: Sequence[tuple[str, float]]) -> str:
    """Write cases and values, as D=12 L=6."""
    if not cases:
        return "nothing that reads"
    return " ".join(
        f"{value:g}" if case == "load" else f"{case}={value:g}" for case, value in cases
    )


@dataclass(frozen=True, slots=True, kw_only=True)
class Overruled:
    """What a data block states, and what the drawing was issued with instead.

    Attributes
    ----------
    what : str
        `RULE` or `UNDER`.
    """

    what: str
    stated: str
    used: str


def overruled(record: CableRecord, cable: Cable) -> tuple[Overruled, ...]:
    """Tell what the command line overruled at the issue, of what the data block states still."""
    found = []
    stated, now = record.stated_rule, cable.rule
    if stated and now and _is_same_rule(stated, now) and not _is_same_rule(stated, record.rule):
        found.append(Overruled(what="RULE", stated=_words(stated), used=_words(record.rule)))
    under = record.stated_under
    is_stated = under and cable.under and plain_under(under) == plain_under(cable.under)
    if under and is_stated and plain_under(under) != plain_under(record.under):
        found.append(Overruled(what="UNDER", stated=f'"{under}"', used=f'"{record.under}"'))
    return tuple(found)


def _is_same_rule(one: Rule, other: Rule) -> bool:
    if one.kind is not other.kind:
        return False
    if one.kind is RuleKind.THROUGH:
        there, here = one.point or (math.nan, math.nan), other.point or (0.0, 0.0)
        return math.dist(there, here) <= _SAME * max(1.0, *(abs(c) for c in here))
    return math.isclose(one.value, other.value, rel_tol=_SAME, abs_tol=_SAME)


def _words(rule: Rule) -> str:
    """Write a rule as it was stated, with its name once."""
    name = rule.kind.name
    return rule.text if rule.text.upper().startswith(name) else f"{name} {rule.text}".strip()


def _governing(record: CableRecord, cable: Cable) -> list[str]:
    """Compare the data block with what it said at the issue, or with what was used.

    What it left open then and leaves open now may be anything.
    """
    found = []
    stated, rule = record.stated_rule, cable.rule
    if rule is None and stated is not None:
        found.append(f"the data block said {_words(stated)}, now no rule")
    elif rule is not None and not any(_is_same_rule(r, rule) for r in (stated, record.rule) if r):
        source = "the data block said" if stated else "the record says"
        found.append(f"{source} {_words(stated or record.rule)}, now {_words(rule)}")
    before, under = record.stated_under, cable.under
    if under is None and before is not None:
        found.append(f'the data block said UNDER "{before}", now nothing')
    elif under is not None and plain_under(under) not in (
        plain_under(before or record.under),
        plain_under(record.under),
    ):
        source = "the data block said" if before else "the record says"
        found.append(f'{source} UNDER "{before or record.under}", now "{under}"')
    for word, before_value, now in (
        ("WEIGHT", record.weight, cable.weight),
        ("EA", record.ea or 0.0, cable.ea or 0.0),
    ):
        if not math.isclose(before_value, now, rel_tol=_SAME, abs_tol=0.0):
            found.append(f"{word} was {before_value:g}, now {now:g}")
    return found


def plain_under(under: str) -> str:
    """Leave out a combination's level and its blanks."""
    return "".join(under.rpartition(":")[2].split())
