"""One entity of the small drawing as a piece, its points in world coordinates."""

from __future__ import annotations

from typing import TYPE_CHECKING

from ezdxf.entities.circle import Circle
from ezdxf.entities.dimension import Dimension
from ezdxf.entities.dxfentity import DXFTagStorage
from ezdxf.entities.leader import Leader
from ezdxf.entities.line import Line
from ezdxf.entities.lwpolyline import LWPolyline
from ezdxf.entities.mleader import MultiLeader
from ezdxf.entities.mtext import MText
from ezdxf.entities.point import Point as DxfPoint
from ezdxf.entities.polyline import Polyline
from ezdxf.entities.text import Text
from ezdxf.math import Vec3
from ezdxf.path.converter import make_path

from dxfcable.drawing.reading import texts
from dxfcable.drawing.reading.pieces import Kind, Piece
from dxfcable.model import Origin

if TYPE_CHECKING:
    from collections.abc import Iterable

    from ezdxf.entities.dxfentity import DXFEntity

_ARC_GRAIN = 1e-5  # of a polyline's size
_SYMBOLS = frozenset({"HATCH", "MPOLYGON", "SOLID", "TRACE", "WIPEOUT", "3DFACE"})


def piece_of(entity: DXFEntity, role: str, *, layer: str, handle: str | None, line: int) -> Piece:
    """Turn an entity into a piece.

    Parameters
    ----------
    entity : DXFEntity
        Of model space, or a transformed copy out of a block; no INSERT.
    role : str
        Of its layer.
    layer, handle, line
        Where it comes from in the file; of the outermost block for what lies in blocks.

    Returns
    -------
    Piece
        Of kind OTHER where the entity is of no kind that is read here.
    """
    kind, points, extra = _read(entity)
    if kind in {Kind.POLYLINE, Kind.LEADER} and len(points) < 2:
        kind, points = Kind.OTHER, []
    first = (float(points[0].x), float(points[0].y)) if points else None
    raw = texts.raw_text(entity) if isinstance(entity, Text | MText) else ""
    return Piece(
        kind=kind,
        role=role,
        origin=Origin(
            handle=handle, line=line, layer=layer, kind=entity.dxftype(), at=first, raw=raw
        ),
        points=tuple((float(p.x), float(p.y)) for p in points),
        z=tuple(float(p.z) for p in points),
        is_closed=isinstance(entity, LWPolyline | Polyline) and bool(entity.is_closed),
        size=extra,
        text=_words(entity),
        measured=_measured(entity),
    )


def layer_of(entity: DXFEntity) -> str:
    """Give an entity's layer as it stands in the file, also of kinds that the library skips."""
    if isinstance(entity, DXFTagStorage):
        return str(entity.xtags.noclass.get_first_value(8, "") or _stored_layer(entity))
    return str(entity.dxf.get("layer", "0"))


def _stored_layer(entity: DXFTagStorage) -> str:
    for tags in entity.xtags.subclasses[1:]:
        if tags.has_tag(8):
            return str(tags.get_first_value(8))
    return "0"


def is_invisible(entity: DXFEntity) -> bool:
    """Say whether an entity is marked as not visible."""
    return not isinstance(entity, DXFTagStorage) and bool(entity.dxf.get("invisible", 0))


def _read(entity: DXFEntity) -> tuple[Kind, list[Vec3], float]:
    """Give kind, points and size of an entity."""
    match entity:
        case DxfPoint():
            return Kind.POINT, [entity.dxf.location], 0.0
        case Line():
            return Kind.LINE, [entity.dxf.start, entity.dxf.end], 0.0
        case Text() | MText():
            return Kind.TEXT, [texts.alignment_point(entity)], texts.height(entity)
        case LWPolyline() | Polyline() if bool(entity.has_arc):
            return Kind.POLYLINE, _along_arcs(entity), 0.0
        case LWPolyline():
            return Kind.POLYLINE, _distinct(entity.vertices_in_wcs()), 0.0
        case Polyline() if entity.is_2d_polyline or entity.is_3d_polyline:
            return Kind.POLYLINE, _distinct(entity.points_in_wcs()), 0.0
        case Leader():
            return Kind.LEADER, _distinct(Vec3(v) for v in entity.vertices), 0.0
        case Dimension():
            return Kind.DIMENSION, [entity.dxf.defpoint], 0.0
    if type(entity) is Circle:  # an arc is a kind of circle to the library, not to the trade
        return Kind.CIRCLE, [entity.ocs().to_wcs(entity.dxf.center)], float(entity.dxf.radius)
    if entity.dxftype() in _SYMBOLS:
        return Kind.SYMBOL, [], 0.0
    return Kind.OTHER, [], 0.0


def _along_arcs(entity: LWPolyline | Polyline) -> list[Vec3]:
    """Follow a polyline with arcs by chords that stay within 1e-5 of its size."""
    path = make_path(entity)
    corners = [Vec3(corner) for corner in path.control_vertices()]
    size = max(corners[0].distance(corner) for corner in corners)
    return _distinct(path.flattening(max(size, 1e-9) * _ARC_GRAIN))


def _distinct(points: Iterable[Vec3]) -> list[Vec3]:
    """Leave out vertices that repeat the one before."""
    result: list[Vec3] = []
    for point in points:
        if not result or point != result[-1]:
            result.append(point)
    return result


def _words(entity: DXFEntity) -> str:
    if isinstance(entity, Text | MText):
        return texts.plain_text(entity)
    if isinstance(entity, MultiLeader) and entity.context.mtext is not None:
        return texts.plain_content(entity.context.mtext.default_content)
    if isinstance(entity, Dimension):
        return texts.decoded(str(entity.dxf.get("text", "")))
    return ""


def _measured(entity: DXFEntity) -> float:
    """Give what a linear or aligned dimension measures, else 0."""
    if not isinstance(entity, Dimension) or entity.dimtype not in {0, 1}:
        return 0.0
    measured = entity.get_measurement()
    return float(measured) if isinstance(measured, int | float) else 0.0
