"""Blocks resolved at any depth: the drafter's entities as pieces, by the role of their layers."""

from __future__ import annotations

import math
import re
from collections import Counter
from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from ezdxf.entities.attrib import AttDef
from ezdxf.entities.insert import Insert
from ezdxf.entities.mtext import MText
from ezdxf.entities.text import Text

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading import texts
from dxfcable.drawing.reading.blocks import attributes, extent, symbol_size, true_name
from dxfcable.drawing.reading.faults import listed
from dxfcable.drawing.reading.pieces import Kind, Piece, Pieces
from dxfcable.drawing.reading.shapes import is_invisible, layer_of, piece_of
from dxfcable.model import Origin
from dxfcable.quantities import looks_like_force

if TYPE_CHECKING:
    from ezdxf.entities.dxfentity import DXFEntity
    from ezdxf.entities.dxfgfx import DXFGraphic
    from ezdxf.layouts.blocklayout import BlockLayout

    from dxfcable.drawing.excerpt import Drawn, Excerpt
    from dxfcable.drawing.reading.faults import Faults
    from dxfcable.settings import Settings

_UNIT_FACTORS = (25.4, 12.0, 304.8, 1000.0, 0.3048)  # and their inverses
_POINT_ROLES = frozenset({"support", "load", "data", "anchor", "plan_point"})


def expand(excerpt: Excerpt, settings: Settings, faults: Faults) -> Pieces:
    """Read all entities of an excerpt as pieces.

    Parameters
    ----------
    excerpt : Excerpt
    settings : Settings
        Names of layers and blocks.
    faults : Faults
        Takes what is passed over.

    Returns
    -------
    Pieces
        In file order. Content on layer 0 of a block has the layer of its INSERT (common
        practice of CAD programs).
    """
    walk = _Walk(excerpt, settings, faults)
    for drawn in excerpt.entities:
        walk.visit(drawn.entity, drawn, "", ())
    walk.report()
    return walk.pieces


@dataclass(slots=True)
class _Walk:
    """The way through entities and blocks, and what was counted on it."""

    excerpt: Excerpt
    settings: Settings
    faults: Faults
    pieces: Pieces = field(default_factory=Pieces)
    hidden: Counter[tuple[str, str]] = field(default_factory=Counter)
    spelled: dict[str, str] = field(default_factory=dict)
    holds: dict[str, bool] = field(default_factory=dict)
    scaled: set[int] = field(default_factory=set)

    def visit(self, entity: DXFEntity, drawn: Drawn, parent: str, trail: tuple[str, ...]) -> None:
        """Read one entity; `parent` is the layer of the block that holds it."""
        if not entity.is_alive:  # images need objects that are not loaded
            text = f"line {drawn.line}: an image, or another object with parts elsewhere, not read"
            self.faults.note(Code.ENTITY_UNSUPPORTED, text)
            return
        own = layer_of(entity)
        layer = parent if own == "0" and parent else own
        name = texts.decoded(layer)
        role = self.settings.layers.role(name)
        if role is not None and name.strip() != self.settings.layers.name(role):
            self.spelled[name] = self.settings.layers.name(role)
        why = self._hidden(entity, layer)
        if isinstance(entity, Insert):
            self._insert(entity, drawn, layer, role, why, trail)
        elif role is not None and not isinstance(entity, AttDef):
            if why == "invisible" and trail:
                return  # other states of a dynamic block
            if why:
                self.hidden[name, why] += 1
                return
            piece = piece_of(entity, role, layer=name, handle=drawn.handle, line=drawn.line)
            if not _is_finite(piece):
                self._tell_broken(piece.origin)
                return
            self.pieces.every.append(piece)

    def _hidden(self, entity: DXFEntity, layer: str) -> str:
        """Say why an entity is not seen, "" where it is."""
        table = self.excerpt.doc.layers
        if table.has_entry(layer):
            row = table.get(layer)
            if row.is_frozen():
                return "frozen"
            if row.is_off():
                return "off"
        return "invisible" if is_invisible(entity) else ""

    def _insert(
        self,
        insert: Insert,
        drawn: Drawn,
        layer: str,
        role: str | None,
        why: str,
        trail: tuple[str, ...],
    ) -> None:
        """Take a block as a point with attributes, or read what lies in it."""
        name = true_name(insert)
        decoded = texts.decoded(layer)
        known = self._block_role(name)
        block = insert.block()
        is_point = known is not None or (
            role in _POINT_ROLES and not (block and self._holds_ours(block))
        )
        if why == "invisible" and trail:
            return
        if why and (is_point or why != "off"):
            self.hidden[decoded, why] += 1
            return
        at = insert.ocs().to_wcs(insert.dxf.insert)
        origin = Origin(
            handle=drawn.handle,
            line=drawn.line,
            layer=decoded,
            kind="INSERT",
            at=(float(at.x), float(at.y)),
            raw=name,
        )
        if insert.mcount > 1:
            text = f"block {name} is inserted as an array of {insert.mcount}"
            self.faults.error(Code.BLOCK_ARRAY, text, "Insert it once for each.", origin=origin)
            return
        if block is not None and block.block is not None and block.block.dxf.get("flags", 0) & 12:
            text = f"{name} is an external reference: what lies in it is not read"
            self.faults.error(Code.EXTERNAL_REFERENCE, text, "Bind it.", origin=origin)
            return
        if is_point or role is not None:
            self._check_scale(insert, name, drawn, origin)
        if not is_point:
            self._enter(insert, drawn, layer, origin, trail)
            return
        role = self._role_of_point(name, known, role, origin)
        if block is not None and role in {"support", "load"}:
            self._check_base(block, name, origin)
        piece = Piece(
            kind=Kind.BLOCK,
            role=role,
            origin=origin,
            points=((float(at.x), float(at.y)),),
            z=(float(at.z),),
            size=symbol_size(insert),
            block=name,
            attributes=attributes(insert, block),
        )
        if _is_finite(piece):
            self.pieces.every.append(piece)
        else:
            self._tell_broken(origin)

    def _tell_broken(self, origin: Origin) -> None:
        text = "has a coordinate that is no number"
        self.faults.error(Code.ENTITY_BROKEN, text, "Draw it again.", origin=origin)

    def _block_role(self, name: str) -> str | None:
        blocks = self.settings.blocks
        for role in ("support", "load", "data", "anchor"):
            if getattr(blocks, role).casefold() == name.casefold():
                return role
        return None

    def _role_of_point(self, name: str, known: str | None, role: str | None, origin: Origin) -> str:
        """Say what a block is: by its name, which its layer must not contradict."""
        if known is None:
            return role or ""
        wanted = self.settings.layers.name(known)
        if role is None:
            text = f"block {name} stands on a layer that is not ours; it is read as on {wanted}"
            self.faults.note(Code.BLOCK_LAYER, text, origin=origin)
        elif role != known:
            text = f"block {name} belongs on layer {wanted}"
            self.faults.error(Code.BLOCK_LAYER, text, "Move it there.", origin=origin)
        return known

    def _holds_ours(self, block: BlockLayout) -> bool:
        """Say whether a block's content, at any depth, names a layer that is read."""
        name = block.name
        if name not in self.holds:
            self.holds[name] = False  # ends the walk where a block holds itself
            self.holds[name] = any(self._is_ours(entity) for entity in block)
        return self.holds[name]

    def _is_ours(self, entity: DXFGraphic) -> bool:
        role = self.settings.layers.role(texts.decoded(layer_of(entity)))
        if isinstance(entity, Insert):
            if role or self._block_role(true_name(entity)):
                return True
            inner = entity.block()
            return inner is not None and self._holds_ours(inner)
        if layer_of(entity) == "0" and isinstance(entity, Text | MText):
            return looks_like_force(texts.plain_text(entity))
        # Lines and hatches of a symbol may stand on the symbol's own layer.
        point_like = entity.dxftype() in {"POINT", "CIRCLE", "TEXT", "MTEXT", "LEADER"}
        return role is not None and (point_like or role not in _POINT_ROLES)

    def _enter(
        self, insert: Insert, drawn: Drawn, layer: str, origin: Origin, trail: tuple[str, ...]
    ) -> None:
        """Read what lies in a block, transformed to world coordinates."""
        block = insert.block()
        if block is None or block.name in trail:
            what = "is not defined" if block is None else "holds itself"
            text = f"block {origin.raw} {what}"
            remedy = "Audit the drawing in the CAD program."
            self.faults.error(Code.ENTITY_BROKEN, text, remedy, origin=origin)
            return

        def skipped(entity: DXFGraphic, reason: str) -> None:
            text = f"{entity.dxftype()} in block {origin.raw} is not read: {reason}"
            self.faults.note(Code.ENTITY_UNSUPPORTED, text, origin=origin)

        inner = (*trail, block.name)
        for entity in insert.virtual_entities(skipped_entity_callback=skipped):
            self.visit(entity, drawn, layer, inner)
        for attrib in insert.attribs:
            self.visit(attrib, drawn, layer, inner)

    def _check_scale(self, insert: Insert, name: str, drawn: Drawn, origin: Origin) -> None:
        """Note a scale that looks like a change of units, once for each outermost block."""
        scale = abs(float(insert.dxf.get("xscale", 1.0)))
        if scale == 0 or drawn.line in self.scaled:
            return
        for unit in _UNIT_FACTORS:
            if math.isclose(scale, unit, rel_tol=1e-4) or math.isclose(
                1 / scale, unit, rel_tol=1e-4
            ):
                self.scaled.add(drawn.line)
                text = f"block {name} is scaled by {scale:g}, a factor between units"
                remedy = "Check that its base point is where it should be."
                self.faults.note(Code.BLOCK_SCALE_UNIT, text, remedy, origin=origin)
                return

    def _check_base(self, block: BlockLayout, name: str, origin: Origin) -> None:
        """Note a base point that lies off its symbol by more than the symbol's size."""
        box = extent(block)
        if box is None:
            return
        x0, y0, x1, y1 = box
        base = block.block.dxf.base_point if block.block is not None else (0.0, 0.0)
        gap = math.hypot(max(x0 - base[0], base[0] - x1, 0), max(y0 - base[1], base[1] - y1, 0))
        if gap > math.hypot(x1 - x0, y1 - y0):
            text = f"the base point of block {name} is off its symbol; the base point counts"
            self.faults.note(Code.BLOCK_BASE_FAR, text, "Redefine the block.", origin=origin)

    def report(self) -> None:
        """Tell what was hidden, and how layers are spelled."""
        for (layer, why), count in self.hidden.items():
            what = f"{count} entit{'y' if count == 1 else 'ies'}"
            state = "is invisible" if count == 1 else "are invisible"
            text = (
                f"{what} on layer {layer} {state}: not read"
                if why == "invisible"
                else f"layer {layer} is {why}: {what} not read"
            )
            self.faults.note(Code.LAYER_HIDDEN, text, "Thaw or turn it on to have them read.")
        if self.spelled:
            pairs = listed(f"{name} as {ours}" for name, ours in self.spelled.items())
            self.faults.note(Code.LAYER_SPELLING, f"layers read without regard to case: {pairs}")
        self._report_variants()

    def _report_variants(self) -> None:
        ours = {
            _reduced(self.settings.layers.name(role)): self.settings.layers.name(role)
            for role in self.settings.layers.input_roles()
        }
        for row in self.excerpt.doc.layers:
            name = texts.decoded(row.dxf.name)
            near = ours.get(_reduced(name))
            if near and "|" not in name and self.settings.layers.role(name) is None:
                text = f"layer {name} is nearly {near}, but its name differs: not read"
                self.faults.note(Code.LAYER_VARIANT, text, "Rename it, or map it in [layers].")


def _is_finite(piece: Piece) -> bool:
    """Say whether all coordinates are numbers that can be computed with."""
    return all(map(math.isfinite, (*piece.z, *(v for point in piece.points for v in point))))


def _reduced(name: str) -> str:
    """Give a layer name without binding prefix, blanks and kinds of dash, for comparing."""
    return re.sub(r"[\s_\-.]+", "", re.split(r"\$\d+\$", name)[-1]).casefold()
