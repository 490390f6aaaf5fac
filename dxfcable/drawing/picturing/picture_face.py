"""One face for the texts of pictures, whatever fonts a machine has.

The face is the free sans serif that the PDF library brings along; a text with characters
beyond it (Cyrillic, Chinese) takes the drawing's own face, or any face of the machine that
has them.
"""

from __future__ import annotations

from functools import lru_cache
from importlib.util import find_spec
from pathlib import Path
from typing import TYPE_CHECKING

from ezdxf.addons.drawing.unified_text_renderer import UnifiedTextRenderer
from ezdxf.fonts import fonts
from ezdxf.math import BoundingBox2d, Matrix44
from ezdxf.npshapes import NumpyPath2d

if TYPE_CHECKING:
    from ezdxf.fonts.font_face import FontFace

_FILES = {
    (False, False): "Vera.ttf",
    (True, False): "VeraBd.ttf",
    (False, True): "VeraIt.ttf",
    (True, True): "VeraBI.ttf",
}
_NARROW = 0.9  # the face is wider than those drawings are made with, by measure of the digits


class HouseText(UnifiedTextRenderer):
    """Renders texts in the house's face; `missing` are characters that no face here has."""

    def __init__(self) -> None:
        super().__init__()
        self.missing: set[str] = set()

    def get_text_glyph_paths(
        self, text: str, font_face: FontFace, cap_height: float = 1.0
    ) -> list[NumpyPath2d]:
        """Return a text as one path per glyph."""
        font = HouseFont(font_face)
        self.missing |= font.missing(text)
        return font.text_glyph_paths(text, cap_height)

    def get_font(self, font_face: FontFace) -> fonts.AbstractFont:
        """Return the face in the wanted weight and slant."""
        return HouseFont(font_face)


class MeasuringText(HouseText):
    """Stands in while a drawing is measured: the box of each text instead of its glyphs."""

    def get_text_glyph_paths(
        self, text: str, font_face: FontFace, cap_height: float = 1.0
    ) -> list[NumpyPath2d]:
        """Return the box that a text fills."""
        width = self.get_text_line_width(text, font_face, cap_height)
        box = BoundingBox2d([(0, 0), (width, cap_height)])
        return [NumpyPath2d.from_vertices(box.rect_vertices(), close=True)]


class HouseFont(fonts.AbstractFont):
    """The house's face, and for characters that it lacks another one."""

    font_render_type = fonts.FontRenderType.OUTLINE
    name = "house"

    def __init__(self, face: FontFace, cap_height: float = 1.0, width_factor: float = 1.0) -> None:
        self._file = face.filename
        self._house = _house(face.is_bold, face.is_italic)
        self._cap_height = cap_height
        self._width_factor = width_factor
        font = self._house or fonts.make_font(self._file, 1.0)
        super().__init__(font.measurements.scale(cap_height))

    def text_width(self, text: str) -> float:
        """Return the width of a text at the face's own height."""
        return self.text_width_ex(text, self._cap_height, self._width_factor)

    def text_width_ex(self, text: str, cap_height: float, width_factor: float = 1.0) -> float:
        """Return the width of a text."""
        runs = self._runs(text)
        return sum(_width(run, words, cap_height, width_factor) for run, words in runs)

    def text_path(self, text: str) -> NumpyPath2d:
        """Return a text as one path, at the face's own height."""
        return self.text_path_ex(text, self._cap_height, self._width_factor)

    def text_path_ex(self, text: str, cap_height: float, width_factor: float = 1.0) -> NumpyPath2d:
        """Return a text as one path."""
        return NumpyPath2d.concatenate(self.text_glyph_paths(text, cap_height, width_factor))

    def text_glyph_paths(
        self, text: str, cap_height: float, width_factor: float = 1.0
    ) -> list[NumpyPath2d]:
        """Return a text as one path per glyph."""
        paths: list[NumpyPath2d] = []
        at = 0.0
        for font, words in self._runs(text):
            narrow = width_factor * _narrowing(font)
            for path in font.text_glyph_paths(words, cap_height, narrow):
                path.transform_inplace(Matrix44.translate(at, 0, 0))
                paths.append(path)
            at += _width(font, words, cap_height, width_factor)
        return paths

    def space_width(self) -> float:
        """Return the width of a blank at the face's own height."""
        return self.text_width(" ")

    def missing(self, text: str) -> set[str]:
        """Return the characters that will show as boxes."""
        runs = self._runs(text)
        return {c for font, words in runs for c in words if not _has(font, c)}

    def _runs(self, text: str) -> list[tuple[fonts.AbstractFont, str]]:
        """Split a text into runs that one face shows."""
        runs: list[tuple[fonts.AbstractFont, str]] = []
        for character in text:
            font = self._for(character)
            if runs and (runs[-1][0] is font or character.isspace()):
                runs[-1] = runs[-1][0], runs[-1][1] + character
            else:
                runs.append((font, character))
        return runs

    def _for(self, character: str) -> fonts.AbstractFont:
        """Choose the face for a character."""
        if self._house is not None and _has(self._house, character):
            return self._house
        own, usual = _of_machine(self._file)
        if _has(own, character):
            return own
        if self._house is not None and not _has(usual, character):
            return self._house
        return usual


def _width(font: fonts.AbstractFont, words: str, cap_height: float, width_factor: float) -> float:
    """Return the width of a run; the library takes blanks alone for nothing."""
    factor = width_factor * _narrowing(font)
    if words.isspace():
        return len(words) * font.space_width() * cap_height * factor
    return font.text_width_ex(words, cap_height, factor)


def _narrowing(font: fonts.AbstractFont) -> float:
    """Return how much a face is narrowed."""
    return _NARROW if Path(font.name).name in _FILES.values() else 1.0


def _has(font: fonts.AbstractFont, text: str) -> bool:
    """Tell whether a face has every character of a text."""
    characters = getattr(getattr(font, "glyph_cache", None), "cmap", None)
    return characters is not None and all(ord(c) in characters or c.isspace() for c in text)


@lru_cache(maxsize=4)
def _house(is_bold: bool, is_italic: bool) -> fonts.AbstractFont | None:
    """Load the house's face from where the PDF library keeps it, None without that library."""
    spec = find_spec("reportlab")
    for folder in (spec.submodule_search_locations or ()) if spec else ():
        path = Path(folder) / "fonts" / _FILES[is_bold, is_italic]
        if path.is_file():
            return fonts.sideload_ttf(path, 1.0)
    return None


@lru_cache(maxsize=16)
def _of_machine(file_name: str) -> tuple[fonts.AbstractFont, fonts.AbstractFont]:
    """Load the drawing's own face and the machine's usual one."""
    usual = fonts.make_font(fonts.font_manager.fallback_font_name(), 1.0)
    return fonts.make_font(file_name, 1.0), usual
