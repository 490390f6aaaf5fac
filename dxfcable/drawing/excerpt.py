"""What the ledger hands to the reader and the painter: a few entities, and obstacles."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    import numpy as np
    from ezdxf.document import Drawing
    from ezdxf.entities.dxfentity import DXFEntity
    from numpy.typing import NDArray


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Drawn:
    """One of the drafter's model-space entities: `handle` and `line` are those of the file.

    The entity's own handle in the small document is made up; never show it.
    """

    entity: DXFEntity
    handle: str | None
    line: int


@dataclass(frozen=True, slots=True, kw_only=True)
class PassedOver:
    """An entity on a layer of ours that is not in model space."""

    kind: str
    layer: str
    handle: str | None
    line: int
    why: str


@dataclass(frozen=True, slots=True, kw_only=True)
class LayerContent:
    """What a foreign layer holds that could be ours, for a drawing with nothing on our layers."""

    layer: str
    points: int
    circles: int
    texts: tuple[str, ...]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Excerpt:
    """The small document cut out of a drawing.

    Attributes
    ----------
    doc : Drawing
        Loaded small document: tables, the blocks that are reached, the entities.
    entities : tuple of Drawn
        The drafter's entities on our layers, or INSERTs that reach them, in file order.
    version : str
        $ACADVER as written, "" where absent.
    insunits, measurement, lunits : int or None
        Raw header values; None where absent.
    passed_over : tuple of PassedOver
        Paper space and unresolved external references on our layers.
    contents : tuple of LayerContent
        Filled only where `entities` is empty.
    undecodable : str
        A declared code page that is not known, else "".
    strays : tuple of PassedOver
        Inserts of the office's cable blocks on layers that are not read.
    ucs_x : (float, float, float) or None
        Direction of the user's x axis; None where the header does not say.
    damaged : tuple of int
        Lines where the file does not pair; reading went on behind them.
    """

    doc: Drawing
    entities: tuple[Drawn, ...]
    version: str
    insunits: int | None
    measurement: int | None = None
    lunits: int | None = None
    passed_over: tuple[PassedOver, ...] = ()
    contents: tuple[LayerContent, ...] = ()
    undecodable: str = ""
    strays: tuple[PassedOver, ...] = ()
    ucs_x: tuple[float, float, float] | None = None
    damaged: tuple[int, ...] = ()


@dataclass(frozen=True, slots=True, eq=False)
class Obstacles:
    """Everything the drafter drew in model space, for finding free places.

    Attributes
    ----------
    segments : (m, 4) array
        x0, y0, x1, y1 of lines and polyline sides; single points have zero length.
    boxes : (k, 4) array
        xmin, ymin, xmax, ymax of texts, blocks, circles.
    """

    segments: NDArray[np.float64] = field()
    boxes: NDArray[np.float64] = field()
