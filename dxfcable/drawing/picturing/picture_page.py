"""A layout drawn and placed on a page: measured first, since pens and dashes depend on it."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from ezdxf.addons.drawing.config import (
    BackgroundPolicy,
    ColorPolicy,
    Configuration,
    HatchPolicy,
    ImagePolicy,
    LinePolicy,
)
from ezdxf.addons.drawing.properties import layer_key
from ezdxf.addons.drawing.recorder import Override
from ezdxf.math import BoundingBox2d, Matrix44

from dxfcable.drawing.picturing.picture_face import HouseText, MeasuringText
from dxfcable.drawing.picturing.picture_front import Enough, PictureFrontend
from dxfcable.drawing.picturing.picture_load import quiet
from dxfcable.drawing.picturing.picture_paper import fit, paper_under
from dxfcable.drawing.picturing.picture_record import CleanRecorder, PictureContext
from dxfcable.errors import DrawingError
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections import Counter
    from collections.abc import Callable, Iterator

    from ezdxf.addons.drawing.backend import BackendInterface
    from ezdxf.addons.drawing.recorder import Player
    from ezdxf.document import Drawing
    from ezdxf.layouts.layout import Layout

_FLATNESS = 1 / 8000  # of the drawing's size: how far a polygon may leave a curve
_DOT = 1 / 2500  # of the drawing's size: a dot in a line type
_HATCH_STEP = 1 / 1500  # of the drawing's size: closer lines are a tint
_POINT_SIZE = 0.03  # of the drawing's size, where $PDSIZE leaves it to the view
_FINEST = 0.13  # mm, the finest pen of ISO 128

_BOXES = "shown as boxes, since no face on this machine has them"


@dataclass(frozen=True, slots=True, kw_only=True)
class View:
    """How a layout is put on a page.

    Attributes
    ----------
    longer_side : float
        Of the page [mm]; where `is_true_size`, of layouts that state no paper only.
    margin : float
        About the drawing, as a part of its longer side.
    is_true_size : bool
        A paper-space layout at the size of its paper.
    pens : float
        Factor on line weights; a page of true size has them as drawn.
    shows_unplotted : bool
        Draw layers that are not plotted, too.
    window : tuple of float, optional
        Left, bottom, right, top of what is to be seen [drawing units]; all by default.
    """

    longer_side: float
    margin: float = 0.03
    is_true_size: bool = True
    pens: float = 1.0
    shows_unplotted: bool = False
    window: tuple[float, float, float, float] | None = None


@dataclass(frozen=True, slots=True, eq=False)
class Page:
    """A drawing on a page, ready to be replayed once.

    Attributes
    ----------
    width, height : float
        [mm]
    corner : tuple of float
        The drawing's point at the lower left corner [drawing units].
    scale : float
        Millimetres per drawing unit.
    pens : float
        Factor on line weights.
    findings : tuple of Finding
        What is not drawn.
    """

    width: float
    height: float
    corner: tuple[float, float]
    scale: float
    pens: float
    findings: tuple[Finding, ...]
    _player: Player = field(repr=False)

    def pen(self, line_weight: float) -> float:
        """Return the width of a stroke [mm]."""
        return max(line_weight * self.pens, _FINEST)

    def at(self, x: float, y: float) -> tuple[float, float]:
        """Place a point of the drawing on the page, y down from the upper edge [mm]."""
        left, bottom = self.corner
        return (x - left) * self.scale, self.height - (y - bottom) * self.scale

    def replay(
        self,
        backend: BackendInterface,
        *,
        flip_y: bool,
        scale: float,
        color: Callable[[str], str] | None = None,
    ) -> None:
        """Draw on a backend whose unit is 1/`scale` mm; `flip_y` puts y = 0 at the top."""
        left, bottom = self.corner
        both = self.scale * scale
        move = Matrix44.translate(-left, -bottom, 0)
        matrix = move @ Matrix44.scale(both, -both if flip_y else both, 1)
        if flip_y:
            matrix @= Matrix44.translate(0, self.height * scale, 0)
        self._player.transform(matrix)
        if color is None:
            self._player.replay(backend)
            return
        recolor = color
        self._player.replay(backend, lambda p: Override(p._replace(color=recolor(p.color))))


def draw_page(doc: Drawing, layout: Layout, view: View) -> Page:
    """Draw a layout of a throw-away document.

    Raises
    ------
    DrawingError
        Where there is nothing to be seen.
    """
    with quiet():
        coarse, _, _ = _draw(doc, layout, view, None)
        box = _box(coarse.player().bbox())
        recorder, not_drawn, is_whole = _draw(doc, layout, view, box)
        player = recorder.player()
        drawn = player.bbox()
    if not drawn.has_data:
        raise _nothing(doc, layout, not_drawn)
    if view.window:
        left, bottom, right, top = view.window
        drawn = BoundingBox2d([(left, bottom), (right, top)])
    paper = paper_under(layout, drawn) if view.is_true_size else None
    width, height, corner, scale = paper or fit(drawn, view.longer_side, view.margin)
    pens = 1.0 if paper else view.pens
    if recorder.dropped:
        not_drawn["shape", "no finite place"] = recorder.dropped
    findings = tuple(_findings(not_drawn, is_whole=is_whole))
    return Page(width, height, corner, scale, pens, findings, player)


def _draw(
    doc: Drawing, layout: Layout, view: View, box: BoundingBox2d | None
) -> tuple[CleanRecorder, Counter[tuple[str, str]], bool]:
    """Draw once: coarsely to measure where there is no box yet, else in full."""
    recorder = CleanRecorder()
    context = PictureContext(doc, export_mode=not view.shows_unplotted)
    config = _coarse() if box is None else _fine(box, doc)
    text = MeasuringText() if box is None else HouseText()
    frontend = PictureFrontend(context, recorder, config, box or BoundingBox2d(), text)
    frontend.note_frozen(layer_key(row.dxf.name) for row in doc.layers if row.is_frozen())
    try:
        frontend.draw_layout(layout)
    except Enough:
        is_whole = False
    else:
        is_whole = True
    if text.missing:
        frontend.not_drawn[_BOXES, _listed(text.missing)] += len(text.missing)
    return recorder, frontend.not_drawn, is_whole


def _listed(characters: set[str]) -> str:
    """Return characters by their code points, the first few of many."""
    codes = [f"U+{ord(character):04X}" for character in sorted(characters)]
    return ", ".join(codes[:5]) + (", .." if len(codes) > 5 else "")


def _coarse() -> Configuration:
    """Return settings to measure with: lines solid, hatches as their outline."""
    return Configuration(
        background_policy=BackgroundPolicy.WHITE,
        line_policy=LinePolicy.SOLID,
        hatch_policy=HatchPolicy.SHOW_OUTLINE,
        image_policy=ImagePolicy.MISSING,
        pdmode=0,
        pdsize=1,
    )


def _fine(box: BoundingBox2d, doc: Drawing) -> Configuration:
    """Return settings to draw with, as fine as the drawing's size asks for."""
    size = max(box.size.x, box.size.y)
    stated = float(doc.header.get("$PDSIZE", 0.0) or 0.0)
    if stated < 0:
        stated = -stated / 100 * size
    return Configuration(
        background_policy=BackgroundPolicy.WHITE,
        color_policy=ColorPolicy.COLOR,  # COLOR_SWAP_BW would draw colour 7 white on white
        image_policy=ImagePolicy.MISSING,  # opens no file that the drawing names
        pdsize=stated or _POINT_SIZE * size,  # type: ignore[arg-type]  # any size will do
        max_flattening_distance=_FLATNESS * size,
        min_dash_length=_DOT * size,
        min_hatch_line_distance=_HATCH_STEP * size,
    )


def _box(measured: BoundingBox2d) -> BoundingBox2d:
    """Return the drawing's box, never flat in either direction."""
    if not measured.has_data:
        return BoundingBox2d([(0, 0), (1, 1)])
    size = max(measured.size.x, measured.size.y)
    box = BoundingBox2d(measured.rect_vertices())
    if min(box.size.x, box.size.y) <= 0.01 * size:
        box.grow(0.02 * size or 0.5)
    return box


def _nothing(doc: Drawing, layout: Layout, not_drawn: Counter[tuple[str, str]]) -> DrawingError:
    """Say that a picture would be empty, and where to look."""
    others = [name for name in doc.layout_names_in_taborder() if name != layout.name]
    filled = [name for name in others if len(doc.layouts.get(name)) > (name != "Model")]
    where = "model space" if layout.name == "Model" else f'layout "{layout.name}"'
    count = len(layout)
    if not count:
        what = "is empty"
    elif not_drawn:
        kinds = ", ".join(sorted({kind for kind, _ in not_drawn}))
        what = f"holds nothing that can be drawn ({kinds})"
    else:
        what = f"shows nothing: all {count} entities are hidden or on layers off or not plotted"
    remedy = "Draw something, or turn its layer on."
    if filled:
        remedy = f"Ask for another layout: {', '.join(filled)}."
    return DrawingError(f"{where} {what}", code="picture-empty", remedy=remedy)


def _findings(not_drawn: Counter[tuple[str, str]], *, is_whole: bool) -> Iterator[Finding]:
    """Tell what is missing in a picture."""
    if not is_whole:
        yield Finding(
            code="picture-cut-short",
            severity=Severity.WARNING,
            text="the drawing has more entities than a picture takes; the rest is not drawn",
            remedy="Take out blocks that are inserted very often.",
        )
    for (kind, why), count in sorted(not_drawn.items()):
        yield Finding(
            code="picture-not-drawn",
            severity=Severity.NOTE,
            text=f"{kind}: {why}" if kind == _BOXES else f"not drawn: {count} x {kind}, {why}",
        )
