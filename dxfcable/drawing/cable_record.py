"""The record of one cable as lines of text: written so that every number reads back exactly.

A line is a key and values, joined by commas; lists that hang on it follow after colons. What
may be absent stands last and is left out. Lines that concern the whole file stand in the same
text (`record.py`); `cable_reading.py` reads it all back.
"""

from __future__ import annotations

import itertools
from typing import TYPE_CHECKING

from dxfcable.drawing.record import escape

if TYPE_CHECKING:
    from collections.abc import Iterator

    from dxfcable.model import Rule
    from dxfcable.recorded import CableRecord, Cases, RecordedLoad
    from dxfcable.results import CableRevisions

Words = tuple[str, ...]


def cable_text(record: CableRecord) -> str:
    """Write the lines of one cable, joined.

    Parameters
    ----------
    record : CableRecord
        What is to be kept.

    Returns
    -------
    str
        ASCII, which `cable_reading.read_cable` turns into an equal record; only the origin of
        its rule is not kept.
    """
    return ";".join(_line(*groups) for groups in _lines(record))


def _line(*groups: Words) -> str:
    return ":".join(",".join(group) for group in groups)


def _lines(record: CableRecord) -> Iterator[tuple[Words, ...]]:
    yield (("cable", escape(record.mark), escape(record.status)),)
    yield (("units", escape(record.length_unit), *_text(record.force_unit)),)
    yield (("rule", *_rule_words(record.rule)),)
    yield (("under", escape(record.under)),)
    if record.stated_rule is not None:
        yield (("stated-rule", *_rule_words(record.stated_rule)),)
    if record.stated_under is not None:
        yield (("stated-under", escape(record.stated_under)),)
    yield (("level", *_text(record.level)),)
    yield (("weight", *_numbers(record.weight), *_text(record.weight_case)),)
    yield (("ea", *_numbers(record.ea)),)
    yield (("alpha", *_numbers(record.alpha)),)
    yield (("delta-t", *_numbers(record.delta_t)),)
    yield (("datum", *_numbers(record.datum)),)
    for support in record.supports:
        yield (("support", escape(support.mark), *_numbers(support.x, support.y, *support.formed)),)
    for load in record.loads:
        yield _load_line("load", load)
    for name, load in record.support_loads:
        yield *_load_line("support-load", load), (escape(name),)
    for piece in record.pieces:
        yield (("piece", *_numbers(piece)),)
    for head in record.heads:
        numbers = _numbers(*head.head, *head.mast_foot, head.mast_length, head.mast_ea)
        stays = (_numbers(*stay.foot, stay.length, stay.ea) for stay in head.stays)
        yield ("head", escape(head.support), *numbers), *stays
    for combo in record.combos:
        yield (("combo", escape(combo)),)
    if record.revisions is not None:
        yield from _revision_lines(record.revisions)


def _rule_words(rule: Rule) -> Words:
    place = _numbers(*rule.point) if rule.point is not None else ()
    return (rule.kind.value, *_numbers(rule.value), escape(rule.text), *place)


def _load_line(key: str, load: RecordedLoad) -> tuple[Words, ...]:
    head = (key, escape(load.mark), *_numbers(load.x, load.y), escape(load.source))
    return head, *(_case_words(cases) for cases in (load.cases, load.drawn, load.formed))


def _revision_lines(revisions: CableRevisions) -> Iterator[tuple[Words, ...]]:
    yield (("revisions", escape(revisions.cable)),)
    for row in revisions.rows:
        words = (row.rev, row.description, row.by, row.date)
        yield (("revision", str(row.number), *(escape(word) for word in words)),)
    for profile in revisions.old:
        yield (("old", *_numbers(*itertools.chain.from_iterable(profile))),)
    for change in revisions.changes:
        yield (("change", escape(change.mark), *_numbers(*change.at, change.dx, change.dy)),)


def _text(text: str | None) -> Words:
    return () if text is None else (escape(text),)


def _numbers(*values: float | None) -> Words:
    # Numbers of numpy write themselves with their type, so they are made plain ones first.
    return tuple(repr(float(value)) for value in values if value is not None)


def _case_words(cases: Cases) -> Words:
    return tuple(word for case, value in cases for word in (escape(case), *_numbers(value)))
