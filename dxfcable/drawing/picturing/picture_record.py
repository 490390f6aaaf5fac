"""What a picture records: shapes with a place in the plane, colours that show on white."""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.addons.drawing.properties import LayerProperties, RenderContext, layer_key
from ezdxf.addons.drawing.recorder import Recorder

if TYPE_CHECKING:
    from collections.abc import Iterable

    from ezdxf.addons.drawing.properties import BackendProperties
    from ezdxf.entities.dxfgfx import DXFGraphic
    from ezdxf.math import Vec2
    from ezdxf.npshapes import NumpyPath2d, NumpyPoints2d

_FARTHEST = 1e12  # drawing units; beyond it a coordinate is a slip, not a place


class CleanRecorder(Recorder):
    """Records what has a place in the plane, and drops the rest, counted in `dropped`."""

    def __init__(self) -> None:
        super().__init__()
        self.dropped = 0

    def draw_point(self, pos: Vec2, properties: BackendProperties) -> None:
        """Record a point."""
        if self._are_sound((pos,)):
            super().draw_point(pos, properties)

    def draw_line(self, start: Vec2, end: Vec2, properties: BackendProperties) -> None:
        """Record a line."""
        if self._are_sound((start, end)):
            super().draw_line(start, end, properties)

    def draw_solid_lines(
        self, lines: Iterable[tuple[Vec2, Vec2]], properties: BackendProperties
    ) -> None:
        """Record lines of one kind."""
        sound = [line for line in lines if self._are_sound(line)]
        if sound:
            super().draw_solid_lines(sound, properties)

    def draw_path(self, path: NumpyPath2d, properties: BackendProperties) -> None:
        """Record a path."""
        if len(path) and self._are_sound(path.extents()):
            super().draw_path(path, properties)

    def draw_filled_polygon(self, points: NumpyPoints2d, properties: BackendProperties) -> None:
        """Record a filled polygon."""
        if len(points) > 2 and self._are_sound(points.extents()):
            super().draw_filled_polygon(points, properties)

    def draw_filled_paths(
        self, paths: Iterable[NumpyPath2d], properties: BackendProperties
    ) -> None:
        """Record filled paths that belong together."""
        sound = [path for path in paths if len(path) and self._are_sound(path.extents())]
        super().draw_filled_paths(sound, properties)

    def _are_sound(self, points: Iterable[Vec2]) -> bool:
        """Tell whether points lie in the plane that a drawing can use."""
        if all(abs(point.x) < _FARTHEST and abs(point.y) < _FARTHEST for point in points):
            return True  # a comparison with NaN is false
        self.dropped += 1
        return False


class PictureContext(RenderContext):
    """Resolves properties; a layer that the drawing does not list is black, as CAD shows it."""

    def resolve_color(self, entity: DXFGraphic, *, resolved_layer: str | None = None) -> str:
        """Return an entity's colour."""
        key = resolved_layer or layer_key(self.resolve_layer(entity))
        if key not in self.layers:
            unlisted = LayerProperties()  # type: ignore[no-untyped-call]  # the library's
            unlisted.layer = key
            unlisted.has_aci_color_7 = True
            self.layers[key] = unlisted
        return super().resolve_color(entity, resolved_layer=resolved_layer)
