"""Small drawings made in memory for the reader's tests; all numbers are our own."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from ezdxf.filemanagement import new

from dxfcable.drawing.excerpt import Drawn, Excerpt, LayerContent, PassedOver
from dxfcable.drawing.reader import ReadOptions, read
from dxfcable.model import Severity
from dxfcable.settings import Settings

if TYPE_CHECKING:
    from collections.abc import Iterable

    from ezdxf.entities.dxfgfx import DXFGraphic
    from ezdxf.entities.insert import Insert

    from dxfcable.model import Finding, Layout

METRE, FOOT, INCH, MILLIMETRE = 6, 2, 1, 4


class Sketch:
    """A drawing under the hands of a drafter."""

    def __init__(self, insunits: int | None = METRE, **header: Any) -> None:
        self.doc = new("R2010")
        self.space = self.doc.modelspace()
        self.insunits = insunits
        self.header = header

    def _on(self, role: str, **more: Any) -> dict[str, Any]:
        return {"layer": f"S-CABL-{role}", **more}

    def block(
        self, name: str, at: tuple[float, ...], layer: str, tags: dict[str, str], **more: Any
    ) -> Insert:
        """Insert a block with attributes; the block is made if it is not there."""
        if name not in self.doc.blocks:
            self.doc.blocks.new(name).add_circle((0, 0), 0.1)
        insert = self.space.add_blockref(name, at, dxfattribs={"layer": layer, **more})
        for tag, text in tags.items():
            insert.add_attrib(tag, text, at, dxfattribs={"height": 0.2})
        return insert

    def support(self, x: float, y: float, **tags: str) -> DXFGraphic:
        if tags:
            return self.block("CABLE-SUPPORT", (x, y), "S-CABL-SUPP", tags)
        return self.space.add_point((x, y), dxfattribs=self._on("SUPP"))

    def string(self, *points: tuple[float, float]) -> DXFGraphic:
        if len(points) == 2:
            return self.space.add_line(*points, dxfattribs=self._on("STRG"))
        return self.space.add_lwpolyline(points, dxfattribs=self._on("STRG"))

    def load(self, x: float, y: float, text: str = "") -> DXFGraphic:
        """Draw a POINT, and its text just right of it."""
        point = self.space.add_point((x, y), dxfattribs=self._on("LOAD"))
        if text:
            self.text(x + 0.1, y, text)
        return point

    def text(self, x: float, y: float, text: str, role: str = "LOAD", h: float = 0.2) -> DXFGraphic:
        entity = self.space.add_text(text, height=h, dxfattribs=self._on(role))
        return entity.set_placement((x, y))

    def load_block(self, x: float, y: float, **tags: str) -> Insert:
        return self.block("CABLE-LOAD", (x, y), "S-CABL-LOAD", tags)

    def data(self, **tags: str) -> Insert:
        """Insert a data block beside the sample's string."""
        return self.data_at((12, 13), **tags)

    def data_at(self, at: tuple[float, float], **tags: str) -> Insert:
        return self.block("CABLE-DATA", at, "S-CABL-DATA", tags)

    def line(
        self, role: str, start: tuple[float, float], end: tuple[float, float], **more: Any
    ) -> DXFGraphic:
        return self.space.add_line(start, end, dxfattribs=self._on(role, **more))

    def polyline(
        self, role: str, points: Iterable[tuple[float, ...]], *, close: bool = False
    ) -> DXFGraphic:
        return self.space.add_lwpolyline(points, close=close, dxfattribs=self._on(role))

    def anchor(self, x: float, y: float, **tags: str) -> Insert:
        return self.block("CABLE-ANCHOR", (x, y), "S-CABL-ANCH", tags)

    def excerpt(
        self, *, passed_over: tuple[PassedOver, ...] = (), contents: tuple[LayerContent, ...] = ()
    ) -> Excerpt:
        """Hand over every entity; handle and line are made up, apart from the library's."""
        entities = tuple(
            Drawn(entity=entity, handle=f"F{i:X}", line=100 + 10 * i)
            for i, entity in enumerate(self.space)
        )
        return Excerpt(
            doc=self.doc,
            entities=entities,
            version="AC1024",
            insunits=self.insunits,
            passed_over=passed_over,
            contents=contents,
            **self.header,
        )

    def read(self, settings: Settings | None = None, **options: str) -> Layout:
        return read(self.excerpt(), settings or Settings(), ReadOptions(**options))


def walkway(insunits: int | None = METRE, *, rule: bool = True, **header: Any) -> Sketch:
    """Give the contract's sample: supports at (0, 12) and (24, 13), loads at 8 and 16."""
    sketch = Sketch(insunits, **header)
    sketch.support(0, 12, MARK="S1", EL="12.000")
    sketch.support(24, 13, MARK="S2", EL="13.000")
    sketch.load(8, 7.8, "D=15 kN")
    sketch.load(16, 7.9, "D=21 kN")
    if rule:
        sketch.data(MARK="C1", SAG="2.4", UNDER="D")
    return sketch


def codes(layout: Layout, *severities: Severity) -> list[str]:
    """List the codes of findings, of some severities or of all."""
    return [f.code for f in layout.findings if not severities or f.severity in severities]


def errors(layout: Layout) -> list[str]:
    """List the codes of what stops."""
    return codes(layout, Severity.ERROR)


def finding(layout: Layout, code: str) -> Finding:
    """Give the one finding of a code."""
    found = [f for f in layout.findings if f.code == code]
    assert len(found) == 1, [f.text for f in layout.findings]
    return found[0]
