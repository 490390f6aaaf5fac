"""A painting of every kind of item, issued into a drawing made here."""

from __future__ import annotations

from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.bytes.splice import apply
from dxfcable.drawing.issue import issue
from dxfcable.drawing.items import (
    Align,
    CircleItem,
    Item,
    LineItem,
    Painting,
    PolylineItem,
    TextItem,
    TriangleItem,
    VAlign,
)
from dxfcable.drawing.strip import plan_strip
from dxfcable.settings import Settings

ITEMS: tuple[Item, ...] = (
    PolylineItem(
        id="C1/profile/1",
        layer="profile",
        part="C1/profile/1",
        points=((0.0, 0.0), (5.0, -1.25), (10.0, 1 / 3)),
    ),
    LineItem(
        id="C1/string",
        layer="closing_string",
        part="C1/string",
        start=(0, 0),
        end=(10, 0),
        is_chain=True,
    ),
    TextItem(
        id="C1/tension/1",
        layer="tension",
        part="C1/tension/1",
        text="133 kip",
        at=(2.0, 2.0),
        height=0.25,
        rotation=-12.5,
        align=Align.CENTER,
        valign=VAlign.BOTTOM,
    ),
    TextItem(
        id="C1/table/1",
        layer="table",
        part="C1/schedule",
        text="SLOPE 3%%d",
        at=(2, -2),
        height=0.25,
    ),
    CircleItem(id="C1/pole", layer="force_diagram", part="C1/diagram", center=(20, 0), radius=0.1),
    TriangleItem(
        id="C1/head", layer="reaction", part="C1/diagram", points=((20, 0), (21, 0), (20, 1))
    ),
    LineItem(
        id="C1/ray/1", layer="force_diagram", part="C1/diagram", start=(20, 0), end=(18, 1e-7)
    ),
)


def issued(data: bytes, items: tuple[Item, ...] = ITEMS) -> bytes:
    """Strip what is ours and issue the items, as a solve does."""
    drawing = scan(data)
    stripping = plan_strip(drawing)
    base = scan(apply(data, stripping.changes)) if stripping.changes else drawing
    painting = Painting(
        items=items,
        diagrams=(),
        origins=(("C1/diagram", (20.0, 0.0)),),
        text_height=0.25,
        plot_scale=100.0,
    )
    result = issue(
        base,
        painting,
        cable_records=["cable,C1,formed;" + "piece,1.0;" * 900],
        memory=stripping.facts.memory,
        opened_before=stripping.facts.opened,
        pointed_at=stripping.pointed_at,
        looks_before=stripping.layer_looks,
        settings=Settings(),
        unit_mm=1000.0,
    )
    return b"".join(result.pieces)


def stripped(data: bytes) -> bytes:
    """Take out what is ours."""
    return apply(data, plan_strip(scan(data)).changes)
