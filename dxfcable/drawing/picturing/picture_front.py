"""The drawing library's frontend, made safe: no chance, no endless drawings, nothing hidden."""

from __future__ import annotations

import math
from collections import Counter
from typing import TYPE_CHECKING

from ezdxf.addons.drawing.frontend import Frontend
from ezdxf.addons.drawing.mtext_complex import ComplexMTextRenderer
from ezdxf.addons.drawing.text import simplified_text_chunks
from ezdxf.entities.dimension import Dimension
from ezdxf.entities.insert import Insert
from ezdxf.fonts.font_face import FontFace
from ezdxf.math import BoundingBox2d, Matrix44, Vec2
from ezdxf.render import hatching
from ezdxf.tools import text_layout

from dxfcable.drawing.picturing.picture_face import HouseFont

if TYPE_CHECKING:
    from collections.abc import Iterable

    from ezdxf.addons.drawing.config import Configuration
    from ezdxf.addons.drawing.properties import Properties, RenderContext
    from ezdxf.addons.drawing.recorder import Recorder
    from ezdxf.addons.drawing.unified_text_renderer import UnifiedTextRenderer
    from ezdxf.entities.dxfentity import DXFEntity
    from ezdxf.entities.dxfgfx import DXFGraphic
    from ezdxf.entities.mtext import MText
    from ezdxf.entities.polygon import DXFPolygon
    from ezdxf.entities.viewport import Viewport
    from ezdxf.fonts import fonts
    from ezdxf.path import Path
    from ezdxf.tools.text import MTextContext

_DRAWN_AT_MOST = 1_000_000  # entities, counted in every insert of a block
_HATCH_LINES_AT_MOST = 20_000  # pieces in one hatch; denser ones are filled
# The library moves pattern lines off the corners of boundaries by chance; this is its mean.
_OFF_CORNERS = 0.00065
_TINT = "55"  # opacity, hexadecimal
_DENSE_PERIODS = 400  # a line type that repeats so often across the picture shows solid


class Enough(Exception):  # noqa: N818  # no error: the drawing is cut short on purpose
    """Raised when a drawing has more entities than a picture can show."""


class PictureFrontend(Frontend):
    """Draws entities one by one; what cannot be drawn is counted in `not_drawn`.

    Parameters
    ----------
    limits : BoundingBox2d
        What lines without end are drawn across; empty while a drawing is measured.
    text : UnifiedTextRenderer
        Makes shapes of texts.
    """

    def __init__(
        self,
        ctx: RenderContext,
        out: Recorder,
        config: Configuration,
        limits: BoundingBox2d,
        text: UnifiedTextRenderer,
    ) -> None:
        super().__init__(ctx, out, config)
        self.pipeline.text_engine = text
        self.not_drawn: Counter[tuple[str, str]] = Counter()
        self._limits = limits
        self._open_blocks: list[str] = []
        self._drawn = 0
        self._frozen = frozenset[str]()

    def note_frozen(self, layers: Iterable[str]) -> None:
        """Say which layers are frozen: inserts on them show nothing of their block."""
        self._frozen = frozenset(layers)

    def override_properties(self, entity: DXFGraphic, properties: Properties) -> None:
        """Hide inserts on frozen layers; show line types solid where no dash could be seen."""
        if isinstance(entity, Insert) and properties.layer.lower() in self._frozen:
            properties.is_visible = False
        if properties.linetype_pattern and self._limits.has_data:
            period = sum(properties.linetype_pattern) * abs(properties.linetype_scale)
            across = max(self._limits.size.x, self._limits.size.y)
            if not period * _DENSE_PERIODS > across:
                properties.linetype_pattern = ()

    def skip_entity(self, entity: DXFEntity, msg: str) -> None:
        """Count what the library does not draw; what is hidden is meant to be."""
        if msg != "invisible":
            self.not_drawn[entity.dxftype(), msg] += 1

    def draw_entity(self, entity: DXFGraphic, properties: Properties) -> None:
        """Draw one entity, whatever is wrong with it."""
        self._drawn += 1
        if self._drawn > _DRAWN_AT_MOST:
            raise Enough
        if isinstance(entity, Dimension) and entity.get_geometry_block() is None:
            self.skip_entity(entity, "without its block")
            return
        depth = len(self.ctx._saved_states)
        try:
            super().draw_entity(entity, properties)
        except Enough:
            raise
        except Exception as error:  # one damaged entity must not cost the picture
            self.skip_entity(entity, f"damaged ({type(error).__name__})")
            while len(self.ctx._saved_states) > depth:
                self.ctx.pop_state()

    def draw_composite_entity(self, entity: DXFGraphic, properties: Properties) -> None:
        """Draw a block, unless it holds itself."""
        if not isinstance(entity, Insert):
            super().draw_composite_entity(entity, properties)
            return
        name = str(entity.dxf.get("name", "")).lower()
        if name in self._open_blocks:
            self.skip_entity(entity, "a block that holds itself")
            return
        if entity.block() is None and not entity.attribs:
            self.skip_entity(entity, "without its block")
            return
        self._open_blocks.append(name)
        try:
            super().draw_composite_entity(entity, properties)
        finally:
            self._open_blocks.pop()

    def draw_line_entity(self, entity: DXFGraphic, properties: Properties) -> None:
        """Draw lines without end across the picture."""
        kind = entity.dxftype()
        if kind == "LINE":
            super().draw_line_entity(entity, properties)
            return
        start, direction = Vec2(entity.dxf.start), Vec2(entity.dxf.unit_vector)
        first = 0.0 if kind == "RAY" else -math.inf
        if not self._limits.has_data:
            self.pipeline.draw_point(start, properties)
            return
        across = _across(start, direction, self._limits, first)
        if across is not None:
            low, high = across
            self.pipeline.draw_line(start + direction * low, start + direction * high, properties)

    def draw_viewport(self, vp: Viewport) -> None:
        """Draw what a viewport shows, lines without end as far as it reaches."""
        outer = self._limits
        try:
            x0, y0, x1, y1 = vp.get_modelspace_limits()
            self._limits = BoundingBox2d([(x0, y0), (x1, y1)])
            super().draw_viewport(vp)
        except ValueError:  # no view: the library shows such a viewport empty as well
            self.skip_entity(vp, "without a view")
        finally:
            self._limits = outer

    def draw_hatch_pattern(
        self, polygon: DXFPolygon, paths: list[Path], properties: Properties
    ) -> None:
        """Draw the lines of a hatch; where they lie too close to be seen, a tint of it."""
        try:
            self._draw_hatch_pattern(polygon, paths, properties)
        except hatching.DenseHatchingLinesError:
            properties.color = properties.color[:7] + _TINT
            raise  # the library fills the hatch then

    def _draw_hatch_pattern(
        self, polygon: DXFPolygon, paths: list[Path], properties: Properties
    ) -> None:
        """Draw the lines of a hatch, off the corners by a fixed step."""
        pattern = polygon.pattern
        if pattern is None or not pattern.lines:
            return
        steps = [line.offset.magnitude for line in pattern.lines]
        step = _OFF_CORNERS * sum(steps) / len(steps)
        lines: list[tuple[Vec2, Vec2]] = []
        for line in pattern.lines:
            baseline = hatching.HatchBaseLine(
                origin=line.base_point + Vec2(step, step),
                direction=Vec2.from_deg_angle(line.angle),
                offset=line.offset,
                line_pattern=line.dash_length_items,
                min_hatch_line_distance=self.config.min_hatch_line_distance,
            )
            for piece in hatching.hatch_paths(baseline, paths):
                renderer = baseline.pattern_renderer(piece.distance)
                if renderer.pattern_length < self.config.min_dash_length:
                    lines.append((piece.start, piece.end))
                else:
                    lines += renderer.render(piece.start, piece.end)
                if len(lines) > _HATCH_LINES_AT_MOST:
                    raise hatching.DenseHatchingLinesError
        self._draw_hatch_lines(polygon, lines, properties)

    def _draw_hatch_lines(
        self, polygon: DXFPolygon, lines: list[tuple[Vec2, Vec2]], properties: Properties
    ) -> None:
        """Draw the pieces of hatch lines, in the plane of the hatch."""
        ocs, elevation = polygon.ocs(), polygon.dxf.elevation.z
        if ocs.transform:
            lines = [
                (
                    Vec2(ocs.to_wcs((start.x, start.y, elevation))),
                    Vec2(ocs.to_wcs((end.x, end.y, elevation))),
                )
                for start, end in lines
            ]
        properties.linetype_pattern = ()
        self.pipeline.draw_solid_lines(lines, properties)

    def draw_text_entity_2d(self, entity: DXFGraphic, properties: Properties) -> None:
        """Draw a line of text, slanted as its entity says."""
        chunks = simplified_text_chunks(
            entity,  # type: ignore[arg-type]  # the library sends texts and attributes here
            self.text_engine,
            font_face=self.get_font_face(properties),
        )
        slant = math.tan(math.radians(entity.dxf.get("oblique", 0.0)))
        for line, transform, cap_height in chunks:
            sheared = Matrix44((1, 0, 0, 0, slant, 1, 0, 0, 0, 0, 1, 0, 0, 0, 0, 1)) @ transform
            self.pipeline.draw_text(line, sheared, properties, cap_height, entity.dxftype())

    def draw_simple_mtext(self, mtext: MText, properties: Properties) -> None:
        """Draw an unformatted text; with a background it is laid out as a formatted one."""
        if mtext.dxf.get("bg_fill", 0):
            self.draw_complex_mtext(mtext, properties)
        else:
            super().draw_simple_mtext(mtext, properties)

    def draw_complex_mtext(self, mtext: MText, properties: Properties) -> None:
        """Draw a formatted text in the house's face."""
        renderer = _HouseMText(self.ctx, self.pipeline, properties)
        try:
            engine = renderer.layout_engine(mtext)
            engine.place(align=text_layout.LayoutAlignment(mtext.dxf.attachment_point))
        except text_layout.LayoutError:  # columns that do not add up: the words without them
            super().draw_simple_mtext(mtext, properties)
            return
        engine.render(mtext.ucs().matrix)


class _HouseMText(ComplexMTextRenderer):
    """Lays formatted texts out in the house's face."""

    def get_font_face(self, mtext: MText) -> FontFace:
        """Return the face of the text's style."""
        return self._properties.font or FontFace()

    def get_font(self, ctx: MTextContext) -> fonts.AbstractFont:
        """Return the face that a piece of text is measured with."""
        return HouseFont(ctx.font_face, ctx.cap_height, ctx.width_factor)


def _across(
    start: Vec2, direction: Vec2, box: BoundingBox2d, first: float
) -> tuple[float, float] | None:
    """Return from where to where a line lies in a box, in multiples of its direction."""
    low, high = first, math.inf
    for at, step, near, far in (
        (start.x, direction.x, box.extmin.x, box.extmax.x),
        (start.y, direction.y, box.extmin.y, box.extmax.y),
    ):
        if abs(step) < 1e-12:
            if not near <= at <= far:
                return None
            continue
        ends = sorted(((near - at) / step, (far - at) / step))
        low, high = max(low, ends[0]), min(high, ends[1])
    return (low, high) if low < high < math.inf else None
