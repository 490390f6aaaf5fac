"""Plain text and alignment points of TEXT, MTEXT and attributes."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from ezdxf.entities.attrib import AttDef, Attrib
from ezdxf.entities.mtext import MText
from ezdxf.tools.text import plain_mtext

from dxfcable.drawing.bytes.decode import unescape

if TYPE_CHECKING:
    from ezdxf.entities.text import Text
    from ezdxf.math import Vec3

# A stacked fraction right behind a digit would run into it: 2\S1/2; is 2 1/2, not 21/2.
_STACK = re.compile(r"(?<=\d)(?=(?:\{|\\[A-Za-z][^;\\{}]*;)*\\S[^;]*[/#^])")
_SURROGATE = re.compile(r"[\ud800-\udfff]")


def decoded(text: str) -> str:
    r"""Decode `\U+XXXX`, and show bytes that no code page explains as a question mark."""
    return _SURROGATE.sub("?", unescape(text))


def plain_text(entity: Text | MText) -> str:
    """Give the text of an entity as a person reads it, lines separated by line feeds."""
    if isinstance(entity, MText):
        return plain_content(entity.text)
    if isinstance(entity, Attrib | AttDef) and entity.has_embedded_mtext_entity:
        return plain_text(entity.virtual_mtext_entity())
    return decoded(entity.plain_text()).strip()


def plain_content(raw: str) -> str:
    """Give formatted content of an MTEXT as a person reads it."""
    return decoded("\n".join(plain_mtext(_STACK.sub(" ", raw), split=True))).strip()


def raw_text(entity: Text | MText) -> str:
    """Give the text as it stands in the file."""
    if isinstance(entity, MText):
        return decoded(entity.text)
    return decoded(entity.dxf.get("text", ""))


def alignment_point(entity: Text | MText) -> Vec3:
    """Give the point that a text is aligned to, in world coordinates.

    Notes
    -----
    DXF reference, TEXT: group 11 counts where 72 or 73 is not 0, else group 10; both in the
    object coordinate system.
    """
    if isinstance(entity, MText):
        return entity.dxf.insert
    point = entity.dxf.insert
    is_aligned = entity.dxf.get("halign", 0) or entity.dxf.get("valign", 0)
    if is_aligned and entity.dxf.hasattr("align_point"):
        point = entity.dxf.align_point
    return entity.ocs().to_wcs(point)


def height(entity: Text | MText) -> float:
    """Give the height of a text's capitals."""
    key = "char_height" if isinstance(entity, MText) else "height"
    return float(entity.dxf.get(key, 1.0))
