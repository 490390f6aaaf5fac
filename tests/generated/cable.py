"""A small cable layout of our own: two supports, a few load points with texts, one rule."""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from tests.generated.entities import Maker, point
from tests.generated.pairs import (
    entities,
    header_value,
    is_handle,
    model_space_owner,
    section_of_tokens,
    tokens,
    version_of,
)
from tests.generated.writing import Codes, Style, Tags, is_modern, number, render

if TYPE_CHECKING:
    from tests.generated.entities import Body
    from tests.generated.pairs import Token

SUPPORT_LAYER, LOAD_LAYER, DATA_LAYER = "S-CABL-SUPP", "S-CABL-LOAD", "S-CABL-DATA"
CABLE_LAYERS = (SUPPORT_LAYER, LOAD_LAYER, DATA_LAYER)
DATA_BLOCK = "CABLE-DATA"
LAST_HANDLE = (1 << 64) - 1


@dataclass(frozen=True, slots=True, kw_only=True)
class CableOptions:
    """What the layout is.

    Attributes
    ----------
    origin : tuple of float
        The left support [drawing units].
    span, rise : float
        The right support from the left one.
    loads : tuple of str
        Texts of the load points, evenly spaced.
    rule : tuple of str or None
        Tag and value of the CABLE-DATA block; None leaves the rule to the command line.
    height : float
        Text height; load points lie `span`/8 below the closing string.
    """

    origin: tuple[float, float] = (0.0, 0.0)
    span: float = 24.0
    rise: float = 1.0
    loads: tuple[str, ...] = ("12 kN", "15 kN", "9.5 kN")
    rule: tuple[str, str] | None = ("SAG", "2.4 m")
    height: float = 0.25

    def stations(self) -> list[tuple[float, float]]:
        """Return the load points as drawn."""
        x0, y0 = self.origin
        parts = [(k + 1) / (len(self.loads) + 1) for k in range(len(self.loads))]
        return [
            (round(x0 + t * self.span, 6), round(y0 + t * self.rise - self.span / 8, 6))
            for t in parts
        ]


RULELESS = CableOptions(rule=None)


def cable_layout(maker: Maker, options: CableOptions) -> list[Tags]:
    """Return the records of the layout's entities; the block is that of `cable_block`."""
    x0, y0 = options.origin
    right = (x0 + options.span, y0 + options.rise)
    found = [maker.dot(options.origin, SUPPORT_LAYER), maker.dot(right, SUPPORT_LAYER)]
    for at, words in zip(options.stations(), options.loads, strict=True):
        found.append(maker.dot(at, LOAD_LAYER))
        below = (at[0], round(at[1] - 2.0 * options.height, 6))
        found.append(maker.text(words, below, options.height, LOAD_LAYER))
    if options.rule is not None:
        values = [("MARK", "C1"), options.rule]
        at = (x0 + 0.5 * options.span, y0 + options.rise + 2.0)
        found += maker.insert(DATA_BLOCK, at, DATA_LAYER, values, options.height)
    return found


def cable_block(maker: Maker, options: CableOptions, record: str) -> list[Tags]:
    """Return the CABLE-DATA block; `record` is the handle of its BLOCK_RECORD."""
    if options.rule is None:
        return []
    content: list[Tags] = [maker.line((0.0, 0.0), (4.0, 0.0))]
    for k, (tag, value) in enumerate((("MARK", ""), (options.rule[0], ""))):
        text: Tags = [*point((0.0, -0.5 * k)), (40, number(options.height)), (1, value)]
        definition: Tags = [(3, tag), (2, tag), (70, "0")]
        bodies: list[Body] = [("AcDbText", text), ("AcDbAttributeDefinition", definition)]
        content.append(maker.entity("ATTDEF", "0", bodies, owner=record))
    return block(maker, DATA_BLOCK, content, record, has_attributes=True)


def block(
    maker: Maker, name: str, content: list[Tags], record: str, *, has_attributes: bool = False
) -> list[Tags]:
    """Return BLOCK, its content and ENDBLK."""
    body: Tags = [(2, name), (70, "2" if has_attributes else "0")]
    body += [(10, "0.0"), (20, "0.0"), (30, "0.0")]
    body += [(3, name), (1, "")] if maker.modern else []
    head = maker.entity("BLOCK", "0", [("AcDbBlockBegin", body)], owner=record)
    tail = maker.entity("ENDBLK", "0", [("AcDbBlockEnd", [])], owner=record)
    return [head, *content, tail]


def splice_layout(data: bytes, options: CableOptions = RULELESS) -> bytes:
    """Put a layout without a rule into any ASCII drawing that pairs.

    The records come directly before ENDSEC of ENTITIES, with that line's line end. They get
    fresh handles where the drawing's entities have handles, and the *Model_Space record as
    owner where there is one. Nothing else changes, $HANDSEED neither.

    Raises
    ------
    ValueError
        If the drawing does not pair, or has no ENTITIES section.
    """
    found = tokens(data)
    names = section_of_tokens(found)
    end = next(
        (
            t
            for t, name in zip(found, names, strict=True)
            if name == b"ENTITIES" and t.code == 0 and t.name == b"ENDSEC"
        ),
        None,
    )
    if end is None:
        message = "the drawing has no ENTITIES section"
        raise ValueError(message)
    maker = maker_for(found)
    layout = cable_layout(maker, replace(options, rule=None))
    tags = [tag for record in layout for tag in record]
    newline = b"\r\n" if data[end.value_start - 2 : end.value_start] == b"\r\n" else b"\n"
    code = data[end.start : end.value_start].rstrip(b"\r\n")
    codes = Codes.PADDED if code == b"  0" else Codes.UNPADDED
    new = render(tags, Style(newline=newline, codes=codes), maker.rng)
    return data[: end.start] + new + data[end.start :]


def maker_for(found: list[Token]) -> Maker:
    """Return a maker whose records fit into a drawing: its version, handles and owner."""
    version = version_of(found)
    if not is_modern(version):
        version = "AC1009"
    states = is_handle(found, section_of_tokens(found))
    used = frozenset(_hex(t.name) for t, is_one in zip(found, states, strict=True) if is_one)
    drawn = [k for e in entities(found) for k in range(e.first, e.stop)]
    has_handles = any(states[k] for k in drawn) or (not drawn and is_modern(version))
    owner = model_space_owner(found)
    seed = header_value(found, b"$HANDSEED")
    first = max([*used, 0x30]) + 1
    if seed is not None:
        first = max(first, _hex(seed.name))
    if first + 4096 > LAST_HANDLE:  # no room at the end: take the gaps
        first = 0x30
    return Maker(
        version=version,
        handles=has_handles,
        owner=owner.decode("ascii") if owner else "",
        next_handle=first,
        reserved=used,
    )


def _hex(value: bytes) -> int:
    """Read a handle; what is none counts as 0."""
    try:
        return int(value, 16)
    except ValueError:
        return 0
