"""The small drawing that was cut out, loaded by the DXF library, ready for the reader."""

from __future__ import annotations

import io
import math
from typing import TYPE_CHECKING

import numpy as np
from ezdxf.filemanagement import read

from dxfcable.drawing.block_extents import number
from dxfcable.drawing.bytes.cut import Cutting, Kept, cut, encoding_of, inserts_of
from dxfcable.drawing.bytes.decode import decode, layer_key, unescape
from dxfcable.drawing.excerpt import Drawn, Excerpt, LayerContent, PassedOver
from dxfcable.errors import DrawingError

if TYPE_CHECKING:
    from collections.abc import Iterable

    from ezdxf.document import Drawing

    from dxfcable.drawing.bytes.scan import Scan

_SHOWN_TEXTS = 40


def excerpt(
    drawing: Scan,
    layers: Iterable[str],
    leave_out: frozenset[int] = frozenset(),
    blocks: Iterable[str] = (),
) -> Excerpt:
    """Cut out and load what stands on some layers.

    Parameters
    ----------
    drawing : Scan
        The file.
    layers : iterable of str
        Layer names of the office, in any case.
    leave_out : frozenset of int
        Records that are not the drafter's.
    blocks : iterable of str
        Names of the office's cable blocks, told where they stand on other layers.

    Raises
    ------
    DrawingError
        Where an entity on these layers is damaged or the library cannot load it.
    """
    names = frozenset(unescape(name).strip().casefold() for name in layers)
    cutting = cut(drawing, names, leave_out)
    doc = _load(cutting)
    entities = tuple(_drawn(doc, head) for head in cutting.kept)
    return Excerpt(
        doc=doc,
        entities=entities,
        version=drawing.version,
        insunits=_header_int(drawing, "$INSUNITS"),
        measurement=_header_int(drawing, "$MEASUREMENT"),
        lunits=_header_int(drawing, "$LUNITS"),
        passed_over=_passed_over(drawing, cutting, names),
        contents=() if entities else _contents(drawing, leave_out),
        undecodable=cutting.undecodable,
        strays=_strays(drawing, cutting, blocks),
        ucs_x=_header_point(drawing, "$UCSXDIR"),
        damaged=tuple(drawing.line(at) for at in drawing.damaged),
    )


def _load(cutting: Cutting) -> Drawing:
    """Load the small drawing; whatever the library stumbles over is the input's fault."""
    try:
        return read(io.StringIO(cutting.text))
    except Exception as error:  # the library raises many kinds, ValueError to AttributeError
        where = f", first at line {cutting.kept[0].line}" if cutting.kept else ""
        line = cutting.kept[0].line if cutting.kept else None
        msg = f"the entities on the cable layers{where}, or the tables, cannot be read: {error}"
        raise DrawingError(
            msg,
            code="unreadable-entities",
            line=line,
            remedy="Audit the drawing in the CAD program and save it again.",
        ) from error


def _drawn(doc: Drawing, head: Kept) -> Drawn:
    """Find the loaded entity again."""
    entity = doc.entitydb.get(head.key)
    if entity is None:
        msg = f"line {head.line}: an entity on a cable layer cannot be read"
        raise DrawingError(
            msg,
            code="unreadable-entities",
            line=head.line,
            handle=head.handle,
            remedy="Audit the drawing in the CAD program and save it again.",
        )
    return Drawn(entity=entity, handle=head.handle, line=head.line)


def _header_int(drawing: Scan, name: str) -> int | None:
    """Read a header variable as an integer, None where absent or no integer."""
    raw = drawing.header_value(name)
    try:
        return int(raw) if raw else None
    except ValueError:
        return None


def _header_point(drawing: Scan, name: str) -> tuple[float, float, float] | None:
    """Read a header variable as a point, None where absent or no numbers."""
    found = {pair.code: number(pair.value) for pair in drawing.header.get(name, ())}
    x, y, z = (found.get(code, math.nan) for code in (10, 20, 30))
    return (x, y, z) if math.isfinite(x + y + z) else None


def _passed_over(drawing: Scan, cutting: Cutting, names: frozenset[str]) -> tuple[PassedOver, ...]:
    """List what stands on our layers and is not read."""
    result = [
        PassedOver(
            kind=bytes(drawing.kinds[head.record]).decode("latin-1"),
            layer=layer,
            handle=head.handle,
            line=head.line,
            why="in paper space",
        )
        for head, layer in cutting.in_paper_space
    ]
    encoding, _ = encoding_of(drawing)
    for row in drawing.rows("LAYER"):
        raw = drawing.first_tag(row, 2) or b""
        parent, bar, name = layer_key(raw, encoding).rpartition("|")
        if bar and name in names:
            result.append(
                PassedOver(
                    kind="LAYER",
                    layer=unescape(decode(raw, encoding)),
                    handle=None,
                    line=drawing.line(int(drawing.starts[row])),
                    why=f"in the external reference {parent}",
                )
            )
    return tuple(result)


def _strays(drawing: Scan, cutting: Cutting, blocks: Iterable[str]) -> tuple[PassedOver, ...]:
    """List inserts of cable blocks that were not cut out."""
    names = frozenset(unescape(name).strip().casefold() for name in blocks)
    read = {head.record for head in cutting.kept} | {h.record for h, _ in cutting.in_paper_space}
    encoding, _ = encoding_of(drawing)
    result = []
    for record in inserts_of(drawing, names) if names else ():
        if record in read:
            continue
        raw = drawing.first_tag(record, 5)
        result.append(
            PassedOver(
                kind=unescape(decode(drawing.first_tag(record, 2) or b"", encoding)),
                layer=unescape(decode(drawing.first_tag(record, 8) or b"0", encoding)),
                handle=raw.decode("latin-1") if raw else None,
                line=drawing.line(int(drawing.starts[record])),
                why="not on a cable layer",
            )
        )
    return tuple(result)


def _contents(drawing: Scan, leave_out: frozenset[int]) -> tuple[LayerContent, ...]:
    """Count points, circles and texts on each layer of model space."""
    encoding, _ = encoding_of(drawing)
    counts: dict[str, tuple[str, list[int], list[str]]] = {}
    kinds = np.array([b"POINT", b"CIRCLE", b"TEXT", b"MTEXT"])
    for head in drawing.heads[np.isin(drawing.kinds[drawing.heads], kinds)].tolist():
        if head in leave_out or drawing.first_tag(head, 67) == b"1":
            continue
        raw = drawing.first_tag(head, 8) or b"0"
        _, number, words = counts.setdefault(
            layer_key(raw, encoding), (unescape(decode(raw, encoding)), [0, 0], [])
        )
        kind = bytes(drawing.kinds[head])
        if kind == b"POINT":
            number[0] += 1
        elif kind == b"CIRCLE":
            number[1] += 1
        elif len(words) < _SHOWN_TEXTS:
            words += [decode(p.value, encoding) for p in drawing.pairs(head) if p.code == 1][:1]
    return tuple(
        LayerContent(layer=name, points=number[0], circles=number[1], texts=tuple(words))
        for name, number, words in counts.values()
    )
