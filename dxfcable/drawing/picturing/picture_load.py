"""Any DXF as a document to draw and throw away: loaded leniently, its texts decoded."""

from __future__ import annotations

import contextlib
import io
import logging
import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

from ezdxf import recover
from ezdxf.document import Drawing
from ezdxf.entities.attrib import AttDef
from ezdxf.entities.dimension import Dimension
from ezdxf.entities.mtext import MText
from ezdxf.entities.text import Text
from ezdxf.lldxf.encoding import decode_dxf_unicode, decode_mif_to_unicode
from ezdxf.lldxf.tagger import binary_tags_loader

from dxfcable.drawing.bytes.decode import codec
from dxfcable.drawing.bytes.formats import BINARY_SENTINEL
from dxfcable.drawing.bytes.pairs import skip_prologue
from dxfcable.drawing.bytes.scan import scan
from dxfcable.errors import DrawingError
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections.abc import Iterator

    from ezdxf.entities.dxfentity import DXFEntity

_HEADER_TEXT = rb"\$%s\s*\r?\n\s*\d+\s*\r?\n[ \t]*([^\r\n]*)"
_VERSION = re.compile(_HEADER_TEXT % b"ACADVER")
_CODE_PAGE = re.compile(_HEADER_TEXT % b"DWGCODEPAGE")
_VERSION_TEXT = re.compile(_VERSION.pattern.decode())
_HEADER_TEXT_START = re.compile(r"\n[ \t]*2[ \t]*\nHEADER[ \t]*\n")
_HEADER_REACH = 1 << 16
_SURROGATES = re.compile("[\ud800-\udfff]")
# What no leniency helps against, and where the ledger's sentence is the right one.
_HOPELESS = frozenset({"dwg", "utf-16", "not-dxf"})
# Subclass of entities whose writers left the markers out, as they may in R12 and before.
_MARKERS = {
    "LWPOLYLINE": "AcDbPolyline",
    "SPLINE": "AcDbSpline",
    "ELLIPSE": "AcDbEllipse",
    "MTEXT": "AcDbMText",
    "HATCH": "AcDbHatch",
}
_HEAD_CODES = frozenset((0, 5, 102, 330, 360))
_COMMON_CODES = _HEAD_CODES | frozenset((6, 8, 48, 60, 62, 67, 370, 420, 440))
_ADDRESS = re.compile(r"\(#\w+\)")  # the library's own, for entities without a handle
_NUMBERED = re.compile(r"%%(\d{3})")
_SYMBOLS = {127: "\u00b0", 128: "\u00b1", 129: "\u00d8"}  # of the CAD programs' own faces
_VISIBLE_CONSTANT = 2  # of the flags 1 invisible, 2 constant


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class Loaded:
    """A document that must never be written back, and what was said on loading it."""

    doc: Drawing
    findings: tuple[Finding, ...] = ()


def load(data: bytes) -> Loaded:
    r"""Load a drawing to be drawn, mending what can be mended.

    Texts are decoded (`\U+XXXX`, `\M+nXXXX`), dimensions without a picture get one, constant
    attributes become texts of their block.

    Parameters
    ----------
    data : bytes
        An ASCII or binary DXF of any release.

    Raises
    ------
    DrawingError
        Where it is no DXF, or none of the ways to load it works.
    """
    with quiet():
        loaded = _load(data)
        _prepare(loaded.doc)
    return loaded


@contextlib.contextmanager
def quiet() -> Iterator[None]:
    """Keep what the library prints and logs off the terminal; findings say what matters."""
    logger = logging.getLogger("ezdxf")
    before = logger.disabled
    logger.disabled = True
    try:
        with contextlib.redirect_stdout(io.StringIO()):
            yield
    finally:
        logger.disabled = before


def _load(data: bytes) -> Loaded:
    """Try the strict way, then the lenient ones."""
    if data.startswith(BINARY_SENTINEL):
        return Loaded(doc=_binary(data))
    _refuse(data)
    start = skip_prologue(data)
    text, encoding = _text(data[start:])
    try:
        return Loaded(doc=Drawing.read(io.StringIO(text)))
    except Exception as error:  # the library raises many kinds, ValueError to AttributeError
        first = error
    for lenient in (text, _with_markers(text)):
        try:
            doc, _ = recover.read(io.BytesIO(lenient.encode(encoding, "surrogateescape")))
        except Exception:  # the next way may do; else the first error is told
            continue
        finding = Finding(
            code="picture-mended",
            severity=Severity.NOTE,
            text=f"the drawing is damaged and was mended before it was drawn: {_one_line(first)}",
            remedy="Audit the drawing in the CAD program: something may be missing here.",
        )
        return Loaded(doc=doc, findings=(finding,))
    msg = f"the drawing cannot be loaded: {_one_line(first)}"
    raise DrawingError(
        msg,
        code="unreadable-drawing",
        remedy="Audit the drawing in the CAD program and save it again.",
    ) from first


def _refuse(data: bytes) -> None:
    """Refuse what is no DXF at all, in the words of the ledger."""
    try:
        scan(data)
    except DrawingError as error:
        if error.code in _HOPELESS:
            raise


def _binary(data: bytes) -> Drawing:
    """Load a binary DXF."""
    try:
        return Drawing.load(binary_tags_loader(data))
    except Exception as error:  # as above
        msg = f"the binary DXF cannot be loaded: {_one_line(error)}"
        raise DrawingError(
            msg,
            code="unreadable-drawing",
            remedy="Save it from the CAD program as ASCII DXF, release 12 or later.",
        ) from error


def _text(data: bytes) -> tuple[str, str]:
    """Decode a drawing, and return its codec; line ends become those that the library splits at."""
    head = data[:_HEADER_REACH]
    version, page = _header(_VERSION, head), _header(_CODE_PAGE, head)
    encoding, _ = codec(version, page)
    text = data.decode(encoding, errors="surrogateescape")
    return text.replace("\r\n", "\n").replace("\r", "\n").replace("\x1a", ""), encoding


def _header(pattern: re.Pattern[bytes], head: bytes) -> str:
    """Return a header text, "" where absent."""
    found = pattern.search(head)
    return found[1].decode("latin-1").strip() if found else ""


def _with_markers(text: str) -> str:
    """Give entities that lack them the subclass markers the library wants."""
    lines = text.split("\n")
    tags = list(zip(lines[::2], lines[1::2], strict=False))
    codes = [int(code) if code.strip().isdecimal() else -1 for code, _ in tags]
    result: list[str] = []
    missing: list[str] = []
    for k, (code, value) in enumerate(tags):
        if codes[k] == 0:
            marker = _MARKERS.get(value.strip())
            upto = next((j for j in range(k + 1, len(codes)) if codes[j] == 0), len(codes))
            missing = ["AcDbEntity", marker] if marker and 100 not in codes[k:upto] else []
        while missing and codes[k] not in (_HEAD_CODES if len(missing) > 1 else _COMMON_CODES):
            result += ["100", missing.pop(0)]
        result += [code, value]
    return _as_release_2000("\n".join([*result, ""]))


def _as_release_2000(text: str) -> str:
    """Claim the release whose entities these are; under R12 the library looks for no markers."""
    found = _VERSION_TEXT.search(text)
    if found and found[1].strip() >= "AC1015":
        return text
    if found:
        return text[: found.start(1)] + "AC1015" + text[found.end(1) :]
    header = "9\n$ACADVER\n1\nAC1015\n"
    place = _HEADER_TEXT_START.search(text)
    if place:
        return text[: place.end()] + header + text[place.end() :]
    return f"0\nSECTION\n2\nHEADER\n{header}0\nENDSEC\n{text}"


def _one_line(error: Exception) -> str:
    """Return what an error says, in one line that any terminal can show."""
    words = " ".join(str(error).split()) or type(error).__name__
    words = _ADDRESS.sub("", words.removeprefix("DXFStructureError: "))
    return words.encode("ascii", "backslashreplace").decode("ascii").rstrip(".")


def _prepare(doc: Drawing) -> None:
    """Make a document say what a CAD program shows."""
    for entity in list(doc.entitydb.values()):
        if isinstance(entity, Text):
            entity.dxf.text = shown(entity.dxf.get("text", ""))
            if isinstance(entity, AttDef):
                entity.dxf.tag = shown(entity.dxf.get("tag", ""))
            _prepare_embedded(entity)
        elif isinstance(entity, MText):
            entity.text = shown(entity.text)
        elif isinstance(entity, Dimension):
            _give_picture(entity)
    for entity in list(_constant_attributes(doc)):
        _add_text(doc, entity)


def shown(text: str) -> str:
    r"""Decode `\U+XXXX`, `\M+nXXXX`, `%%nnn`; bytes that no code page explains become U+FFFD."""
    decoded = decode_mif_to_unicode(decode_dxf_unicode(text))
    decoded = _NUMBERED.sub(lambda found: _symbol(int(found[1])), decoded)
    return _SURROGATES.sub("\ufffd", decoded)


def _symbol(number: int) -> str:
    """Return the character that `%%nnn` stands for."""
    return _SYMBOLS.get(number) or (chr(number) if 32 <= number < 256 else "")


def _prepare_embedded(entity: Text) -> None:
    """Decode the text that an attribute of R2018 keeps in an embedded MTEXT."""
    embedded = getattr(entity, "_embedded_mtext", None)
    if embedded is not None:
        embedded.text = shown(embedded.text)


def _give_picture(dimension: Dimension) -> None:
    """Draw a dimension that has no block with its picture, as R12 writers leave them."""
    if not dimension.is_alive or dimension.get_geometry_block() is not None:
        return
    with contextlib.suppress(Exception):  # incomplete: the frontend tells that it is not drawn
        dimension.render()


def _constant_attributes(doc: Drawing) -> Iterator[AttDef]:
    """Yield the attributes that every insert of a block shows with the same text."""
    for block in doc.blocks:
        for entity in block:
            if not isinstance(entity, AttDef) or block.is_any_layout:
                continue
            if entity.dxf.get("flags", 0) & 3 == _VISIBLE_CONSTANT:
                yield entity


def _add_text(doc: Drawing, entity: DXFEntity) -> None:
    """Put a constant attribute's text beside it, since inserts leave the attribute out."""
    text = Text.new(doc=doc)
    for name, value in entity.dxfattribs().items():
        if name not in {"handle", "owner"} and text.is_supported_dxf_attrib(name):
            text.dxf.set(name, value)
    if entity.dxf.hasattr("valign"):
        text.dxf.valign = entity.dxf.valign
    doc.entitydb.add(text)
    block = doc.blocks.get(doc.entitydb[entity.dxf.owner].dxf.name)
    block.add_entity(text)
