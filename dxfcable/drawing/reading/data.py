"""Data blocks: the rule that governs a cable, its weight, stiffness, temperature, capacity."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import listed
from dxfcable.drawing.reading.geometry import to_polyline
from dxfcable.drawing.reading.owners import owner
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.drawing.reading.tags import Tags
from dxfcable.model import Rule, RuleKind
from dxfcable.quantities import parse_expansion, parse_temperature_change

if TYPE_CHECKING:
    from dxfcable.drawing.reading.context import CableDraft, Context
    from dxfcable.drawing.reading.pieces import Piece

_FORCES = (RuleKind.MAX_TENSION, RuleKind.PULL)
_LENGTHS = (RuleKind.SAG, RuleKind.LOW_POINT, RuleKind.LENGTH, RuleKind.CUT_LENGTH)


def read_data(context: Context, cables: list[CableDraft]) -> None:
    """Read the data blocks and points into the cables that they belong to.

    Parameters
    ----------
    context : Context
    cables : list of CableDraft
        Filled in.
    """
    seen: list[CableDraft] = []
    for piece in context.pieces.of("data", Kind.BLOCK):
        if piece.block.casefold() != context.settings.blocks.data.casefold():
            text = f"block {piece.block} is no {context.settings.blocks.data}"
            remedy = "Use that block, or name yours in [blocks]."
            context.faults.error(Code.BLOCK_UNKNOWN, text, remedy, origin=piece.origin)
            continue
        gaps = [to_polyline(piece.at, cable.string) for cable in cables]
        cable = owner(context, cables, gaps, "the data block", piece.origin)
        if cable is None:
            continue
        if any(known is cable for known in seen):
            text = "is the second data block of one cable"
            context.faults.error(Code.DATA_TWO, text, "Keep one.", origin=piece.origin)
            continue
        seen.append(cable)
        _read_block(context, piece, cable)
    for piece in context.pieces.of("data", Kind.POINT):
        gaps = [to_polyline(piece.at, cable.string) for cable in cables]
        cable = owner(context, cables, gaps, "the point to pass through", piece.origin)
        if cable is not None:
            _read_through(context, piece, cable)


def _read_block(context: Context, piece: Piece, cable: CableDraft) -> None:
    """Read one data block."""
    tags = Tags(context, piece)
    cable.mark = tags.text("MARK")
    cable.origin = piece.origin
    _read_rule(context, piece, tags, cable)
    cable.under = tags.text("UNDER") or None
    cable.weight = tags.line_load("WEIGHT")
    case = tags.text("WEIGHT_CASE")
    if case:
        cable.weight_case = context.settings.cases.find(case)
        if cable.weight_case is None:
            text = f'WEIGHT_CASE "{case}" is no load case'
            remedy = f"Known: {listed(context.settings.cases.letters, 20)}."
            context.faults.error(Code.CASE_UNKNOWN, text, remedy, origin=piece.origin, raw=case)
    cable.ea = tags.stiffness("EA")
    cable.strand = tags.text("STRAND")
    cable.alpha = tags.other("ALPHA", parse_expansion)
    cable.delta_t = tags.other("DELTA_T", parse_temperature_change)
    cable.capacity = tags.stiffness("CAPACITY")
    if tags.text("SPAN"):
        text = "SPAN is not used in this version"
        context.faults.note(Code.LATER_SPAN, text, origin=piece.origin)
    cable.fitting_left, cable.fitting_right = tags.text("FITTING_L"), tags.text("FITTING_R")
    tags.finish()


def _read_rule(context: Context, piece: Piece, tags: Tags, cable: CableDraft) -> None:
    """Read the one rule of a data block."""
    names = [kind.value.upper() for kind in (*_FORCES, *_LENGTHS)]
    stated = [name for name in names if tags.peek(name)]
    if len(stated) > 1:
        text = f"two rules: {listed(stated)}"
        context.faults.error(Code.RULE_TWO, text, "Keep one, blank the rest.", origin=piece.origin)
    for kind in (*_FORCES, *_LENGTHS):
        tag = kind.value.upper()
        raw = tags.peek(tag)
        if kind in _FORCES:
            force = tags.force(tag)
            value = None if force is None else force.value
        else:
            force = None
            length = tags.length(tag)
            value = None if length is None else length.value
        if value is None:
            continue
        if value <= 0 and kind is not RuleKind.LOW_POINT:
            text = f'{tag} is "{raw}"'
            remedy = "Write a value above zero."
            context.faults.error(Code.RULE_VALUE, text, remedy, origin=piece.origin, raw=raw)
            continue
        cable.rule = Rule(kind=kind, value=value, text=f"{tag} {raw}", origin=piece.origin)
        cable.rule_force = force


def _read_through(context: Context, piece: Piece, cable: CableDraft) -> None:
    """Read the rule THROUGH."""
    tolerance = context.touch * cable.span
    x0, x1 = cable.string[0][0], cable.string[-1][0]
    if not x0 + tolerance < piece.at[0] < x1 - tolerance:
        text = "the point to pass through is not between the cable's ends"
        context.faults.error(Code.RULE_VALUE, text, "Move it.", origin=piece.origin)
    elif cable.rule is not None:
        text = f"a second rule, THROUGH, beside {cable.rule.text}"
        context.faults.error(Code.RULE_TWO, text, "Keep one rule.", origin=piece.origin)
    else:
        cable.rule = Rule(
            kind=RuleKind.THROUGH, point=piece.at, text="THROUGH", origin=piece.origin
        )
