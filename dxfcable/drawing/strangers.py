"""Entities on the layers that we write to and that carry no mark of ours."""

from __future__ import annotations

from collections import Counter
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.cut import encoding_of, records_on
from dxfcable.drawing.bytes.decode import layer_key
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.settings import Settings

_APPID = b"DXFCABLE"


def strangers(drawing: Scan, settings: Settings) -> tuple[Finding, ...]:
    """Tell what stands on our layers and is not ours: a drafter's, or an issue that lost its marks.

    Parameters
    ----------
    drawing : Scan
        The drafter's file, ours taken out.

    Returns
    -------
    tuple of Finding
        One note at most; what it tells is kept and never touched.
    """
    names = {getattr(settings.layers, role) for role in settings.layers.output_roles()}
    encoding, _ = encoding_of(drawing)
    keys = frozenset(layer_key(name.encode("utf-8"), "utf-8") for name in names)
    section = drawing.section("ENTITIES")
    if section is None or not _may_be_used(drawing, keys, encoding):
        return ()
    found = records_on(drawing, keys)
    found = found[(found > section.first) & (found < section.last)]
    found = found[np.isin(found, drawing.heads)]
    alone = [k for k in found.tolist() if not _is_marked(drawing, k)]
    if not alone:
        return ()
    layers = Counter(
        (drawing.first_tag(k, 8) or b"").decode(encoding, "replace").strip() for k in alone
    )
    words = ", ".join(f"{count} on {name}" for name, count in sorted(layers.items()))
    line = drawing.line(int(drawing.starts[alone[0]]))
    return (
        Finding(
            code="unmarked",
            severity=Severity.NOTE,
            text=f"{len(alone)} entities on layers that results are written to carry no mark of "
            f"dxfcable and stay as the drafter's: {words}",
            remedy="If they are an earlier issue whose marks another program dropped, delete "
            "them; its record is gone too, so a cable that was cut counts as not cut.",
            line=line,
            layer=next(iter(sorted(layers))),
        ),
    )


def _may_be_used(drawing: Scan, keys: frozenset[str], encoding: str) -> bool:
    """Tell whether an entity can be on one of the layers: there is a row for it, or no table."""
    rows = drawing.rows("LAYER")
    if not rows:
        return True
    return any(layer_key(drawing.first_tag(row, 2) or b"", encoding) in keys for row in rows)


def _is_marked(drawing: Scan, head: int) -> bool:
    """Tell whether an entity carries extended data of ours, as a drafter's copy does."""
    start, end = drawing.entity_span(head)
    return drawing.data.find(_APPID, start, end) >= 0
