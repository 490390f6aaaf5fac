"""What is told of a drawing as a whole: units, what was passed over, what does not fit a view."""

from __future__ import annotations

from collections import Counter
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.faults import coordinate, listed
from dxfcable.drawing.reading.pieces import Kind
from dxfcable.quantities import (
    INSUNITS,
    LENGTH_UNITS,
    QuantityError,
    convert,
    looks_like_force,
    parse_length,
    read_plot_scale,
)

if TYPE_CHECKING:
    from dxfcable.drawing.excerpt import Excerpt, LayerContent
    from dxfcable.drawing.reading.context import Context
    from dxfcable.drawing.reading.faults import Faults
    from dxfcable.drawing.reading.pieces import Piece
    from dxfcable.settings import Settings

_PLANE_ROLES = ("support", "string", "load", "mast", "stay", "anchor", "deck", "clearance")
_POINTS = (Kind.POINT, Kind.CIRCLE, Kind.BLOCK)
_LINES = (Kind.LINE, Kind.POLYLINE)
_READ: dict[str, tuple[Kind, ...]] = {
    "support": (*_POINTS, *_LINES, Kind.LEADER, Kind.TEXT),
    "string": _LINES,
    "load": (*_POINTS, *_LINES, Kind.LEADER, Kind.TEXT),
    "data": (Kind.BLOCK, Kind.POINT),
    "mast": _LINES,
    "stay": _LINES,
    "anchor": (Kind.BLOCK,),
    "deck": _LINES,
    "clearance": _LINES,
    "area": (*_LINES, Kind.CIRCLE, Kind.TEXT),
    "plan_point": (*_POINTS, Kind.TEXT),
    "frame": _LINES,
}
_LATER = {
    "hold_down": (Code.LATER_HOLD_DOWN, "hold-down cables are"),
}
_TURNED = 1e-6
_FEET_AND_INCHES = frozenset({3, 4})  # $LUNITS engineering and architectural: a unit is an inch


def read_unit(excerpt: Excerpt, wanted: str | None, faults: Faults) -> str:
    """Give the drawing's unit of length, by the command line or the header.

    Parameters
    ----------
    excerpt : Excerpt
    wanted : str or None
        Of the command line; wins.
    faults : Faults
        Takes an error where neither says it.

    Returns
    -------
    str
        One of LENGTH_UNITS; where none is said a likely one, so that all else can be read.
    """
    code = excerpt.insunits
    stated = INSUNITS.get(code) if code is not None else None
    if wanted is not None:
        if wanted not in LENGTH_UNITS:
            text = f'"{wanted}" is no unit that cables are drawn in'
            faults.error(Code.UNITS_UNSUPPORTED, text, f"Write one of {listed(LENGTH_UNITS)}.")
            return "ft"
        if stated is not None and stated != wanted:
            text = f"the header says {stated}, the command line {wanted}: {wanted} is used"
            faults.note(Code.UNITS_OVERRIDDEN, text)
        return wanted
    if stated is None and code:
        text = f"$INSUNITS is {code}, no unit that cables are drawn in"
        remedy = f"Give --units, one of {listed(LENGTH_UNITS)}."
        faults.error(Code.UNITS_UNSUPPORTED, text, remedy)
    elif stated is None:
        text = "the drawing does not say its unit of length ($INSUNITS)"
        remedy = f"Give --units, one of {listed(LENGTH_UNITS)}."
        faults.error(Code.NO_UNITS, text, remedy)
    elif stated in {"ft", "us-ft"} and excerpt.lunits in _FEET_AND_INCHES:
        text = (
            "the header says feet, but lengths are shown as feet and inches, where a unit is an "
            "inch: feet are used"
        )
        faults.note(Code.UNITS_TRAP, text, "If a unit is an inch, give --units in.")
    if stated is not None:
        return stated
    return "m" if excerpt.measurement == 1 else "ft"


def tell_passed_over(excerpt: Excerpt, settings: Settings, faults: Faults) -> None:
    """Tell what is odd about the file, paper space, external references."""
    if excerpt.undecodable:
        text = f"code page {excerpt.undecodable} is not known: texts may be garbled"
        faults.note(Code.CODE_PAGE_UNKNOWN, text)
    if excerpt.ucs_x is not None and abs(excerpt.ucs_x[1]) + abs(excerpt.ucs_x[2]) > _TURNED:
        text = "the user's coordinate system is turned: loads act along the drawing's own Y"
        faults.note(Code.TURNED_AXES, text, "Check that the elevation is upright in world axes.")
    for line in excerpt.damaged:
        text = f"line {line}: here the file does not pair, as if a line was lost or added"
        faults.note(Code.DAMAGED, text, "Audit the drawing in the CAD program.")
    for stray in excerpt.strays:
        text = f"line {stray.line}: block {stray.kind} on layer {stray.layer} is not read"
        faults.note(Code.BLOCK_STRAY, text, "Put it on its cable layer, or map that layer.")
    paper: Counter[str] = Counter()
    for passed in excerpt.passed_over:
        parent, bar, name = passed.layer.rpartition("|")
        role = settings.layers.role(name)
        if not bar:
            if role is not None:
                paper[passed.layer] += 1
        elif role == "load":
            text = f"line {passed.line}: layer {passed.layer} is in external reference {parent}"
            faults.error(Code.EXTERNAL_REFERENCE, text, "Bind it, or detach it.")
        elif role is not None:
            text = f"layer {passed.layer} is in external reference {parent}: not read"
            faults.note(Code.EXTERNAL_REFERENCE, text)
    for layer, count in paper.items():
        text = f"layer {layer}: {count} in paper space, not read"
        faults.note(Code.PAPER_SPACE, text, "Draw cables in model space.")


def tell_nothing_drawn(excerpt: Excerpt, settings: Settings, faults: Faults) -> None:
    """Tell what other layers hold, and the settings that would have them read."""
    held = [c for c in excerpt.contents if c.points or c.circles or _forces(c)]
    text = "nothing is drawn on the layers of the settings"
    if held:
        text += f"; other layers hold {listed(_content(c) for c in held)}"
        text += "; to read them: [layers]"
        for content in held:
            role = "load" if _forces(content) else "support"
            text += f' {role} = "{content.layer}"'
    names = listed((settings.layers.support, settings.layers.load))
    remedy = f"Draw on {names}, or map your layers in the settings' [layers]."
    faults.error(Code.NOTHING_DRAWN, text, remedy)


def _forces(content: LayerContent) -> list[str]:
    return [text for text in content.texts if looks_like_force(text)]


def _content(content: LayerContent) -> str:
    words = [
        f"{count} {name}{'s' if count != 1 else ''}"
        for count, name in (
            (content.points, "point"),
            (content.circles, "circle"),
            (len(_forces(content)), "force text"),
        )
        if count
    ]
    return f"{content.layer} ({' and '.join(words)})"


def tell_not_read(context: Context) -> None:
    """Tell kinds that are not read on their layer, and work that is not done yet."""
    counts: Counter[tuple[str, str]] = Counter()
    words: dict[str, list[str]] = {}
    later: Counter[str] = Counter()
    for piece in context.pieces.every:
        if piece.role in _LATER:
            later[piece.role] += 1
        elif _is_force_in_other_form(piece):
            text = f'"{piece.text}" reads as a force, but texts of this kind are not read'
            remedy = "Write it as TEXT or MTEXT beside its load point."
            context.faults.error(
                Code.LOAD_TEXT_UNCLAIMED, text, remedy, origin=piece.origin, raw=piece.text
            )
        elif piece.kind is Kind.TEXT and Kind.TEXT not in _READ[piece.role]:
            words.setdefault(piece.origin.layer, []).append(f'"{piece.text}"')
        elif piece.kind not in (*_READ[piece.role], Kind.SYMBOL, Kind.DIMENSION):
            counts[piece.origin.layer, piece.origin.kind] += 1
    for (layer, kind), count in counts.items():
        text = f"layer {layer}: {count} {kind} not read, the kind is not supported there"
        context.faults.note(Code.ENTITY_UNSUPPORTED, text)
    for layer, texts in words.items():
        text = f"texts on {layer} that are not read: {listed(texts)}"
        context.faults.note(Code.TEXTS_LISTED, text)
    for role, count in later.items():
        code, what = _LATER[role]
        first = context.pieces.of(role)[0]
        text = f"{what} not read in this version ({count} drawn)"
        remedy = "Take them off this layer, and draw each load at its point."
        context.faults.error(code, text, remedy, origin=first.origin)


def _is_force_in_other_form(piece: Piece) -> bool:
    """Say whether a dimension or multileader among the loads states a force."""
    is_other = piece.role == "load" and piece.kind in {Kind.OTHER, Kind.DIMENSION}
    return is_other and bool(piece.text) and looks_like_force(piece.text)


def check_plane(context: Context) -> None:
    """Stop where entities lie at different Z."""
    pieces = [p for p in context.pieces.every if p.role in _PLANE_ROLES and p.kind is not Kind.TEXT]
    heights = [(z, p) for p in pieces for z in p.z]
    if not heights:
        return
    xs = [x for p in pieces for x, _ in p.points]
    ys = [y for p in pieces for _, y in p.points]
    low, high = min(heights, key=lambda h: h[0]), max(heights, key=lambda h: h[0])
    size = max(max(xs) - min(xs), max(ys) - min(ys))
    if high[0] - low[0] > context.touch * size:
        text = f"lies at Z = {coordinate(high[0])}, others at Z = {coordinate(low[0])}"
        remedy = "Draw an elevation view: X horizontal, Y up, all at one Z."
        context.faults.error(Code.Z_SPREAD, text, remedy, origin=high[1].origin)


def check_dimensions(context: Context) -> None:
    """Note dimension texts that differ from what is measured by more than 0.5 %."""
    for piece in context.pieces.every:
        if piece.kind is not Kind.DIMENSION or not piece.text.strip() or "<>" in piece.text:
            continue
        try:
            stated = parse_length(piece.text, context.unit).value
        except QuantityError:
            continue  # words, not a length
        if abs(stated - piece.measured) > 0.005 * abs(piece.measured):
            text = (
                f'the dimension says "{piece.text}", drawn is {coordinate(piece.measured)} '
                f"{context.unit}; what is drawn counts"
            )
            context.faults.note(Code.DIMENSION_DIFFERS, text, origin=piece.origin, raw=piece.text)


def check_text_heights(context: Context) -> None:
    """Note texts under 0.5 mm at the settings' plotting scale."""
    scale = context.settings.show.plot_scale
    if not scale:
        return
    millimetres = convert(1.0, context.unit, "mm") / read_plot_scale(scale)
    tiny = [
        piece
        for piece in context.pieces.every
        if piece.kind is Kind.TEXT and piece.size * millimetres < 0.5
    ]
    if tiny:
        text = f"{len(tiny)} texts plot under 0.5 mm at {scale}"
        context.faults.note(Code.TEXT_TINY, text, origin=tiny[0].origin)
