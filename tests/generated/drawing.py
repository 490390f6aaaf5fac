"""Whole drawings as bytes, by seed: any version, any habit, any quirk."""

from __future__ import annotations

import random
from typing import TYPE_CHECKING

from tests.generated import sections
from tests.generated.cable import CABLE_LAYERS, CableOptions, cable_block, cable_layout
from tests.generated.entities import Maker, filler, point
from tests.generated.pairs import BOM
from tests.generated.quirks import Quirk, apply
from tests.generated.writing import IS_UTF8, Codes, Style, Tags, is_modern, odd_number, render

if TYPE_CHECKING:
    from collections.abc import Callable

    from tests.generated.entities import Body

ODD_TEXTS = ("0", "  0", "SECTION", "ENDSEC", "EOF", "  8", "", "   ", "999", "LINE", "1001")
LAST_HANDLE = (1 << 64) - 1
_FLOATS = frozenset(range(10, 60))


def drawing(
    version: str = "AC1015",
    *,
    newline: bytes = b"\n",
    codes: Codes = Codes.PADDED,
    handles: bool = True,
    seed: int = 0,
    quirks: frozenset[Quirk] = frozenset(),
    layout: CableOptions | None = None,
    entities: int = 11,
) -> bytes:
    """Return a drawing; the same arguments give the same bytes.

    Parameters
    ----------
    version : str
        $ACADVER; "" for a drawing without HEADER. R13 and later always have handles.
    newline, codes
        How lines end and how group codes are written.
    handles : bool
        Whether records have handles, before R13.
    seed : int
        Of all that is left to chance.
    quirks : frozenset of Quirk
        Those that the version cannot have are left out.
    layout : CableOptions or None
        A cable layout after the other entities.
    entities : int
        How many other entities of mixed types.
    """
    handles = handles or is_modern(version)
    quirks = apply(version, quirks, handles=handles)
    rng = random.Random(seed)
    builder = _Builder(version, handles, quirks, rng)
    style = Style(
        newline=newline,
        codes=codes,
        comments=Quirk.COMMENTS in quirks,
        mixed_newlines=Quirk.MIXED_NEWLINES in quirks,
        utf8=version >= IS_UTF8,
    )
    tags = builder.tags(layout, entities)
    return _dress(render(tags, style, rng), quirks, style)


def _dress(body: bytes, quirks: frozenset[Quirk], style: Style) -> bytes:
    """Add what stands before the first pair and after EOF."""
    newline = style.newline
    if Quirk.LEADING_COMMENT in quirks:
        body = b"999" + newline + b"made by hand" + newline + body
    if Quirk.BLANK_LINES in quirks:
        body = newline + b"  " + newline + body
    if Quirk.BOM in quirks:
        body = BOM + body
    if Quirk.NO_LAST_NEWLINE in quirks:
        return body.rstrip(b"\r\n")
    if Quirk.AFTER_EOF in quirks:
        body += b"  0" + newline + b"SECTION" + newline + b"a stray line \xff" + newline
    return body + b"\x1a" if Quirk.CTRL_Z in quirks else body


class _Builder:
    """Builds the sections of one drawing in the order in which handles are known."""

    def __init__(
        self,
        version: str,
        handles: bool,
        quirks: frozenset[Quirk],
        rng: random.Random,
    ) -> None:
        self.quirks = quirks
        self.rng = rng
        self.maker = Maker(
            version=version,
            handles=handles,
            handle_last=Quirk.HANDLE_NOT_FIRST in quirks,
            reserved=frozenset({0x17, 0x1F}),
            rng=rng,
        )
        self.members: list[str] = []

    def tags(self, layout: CableOptions | None, count: int) -> list[tuple[int, str | bytes]]:
        """Return all tags of the drawing."""
        maker, quirks = self.maker, self.quirks
        names = self._handles(layout)
        maker.owner = names.model_space if maker.modern else ""
        own = cable_block(maker, layout, names.layout_block) if layout is not None else []
        blocks, block_names = sections.blocks_section(maker, quirks, names, own)
        has_blocks = not (Quirk.NO_BLOCKS in quirks and not own)
        drawn: list[Tags] = []
        if Quirk.EMPTY_ENTITIES not in quirks:
            drawn = self._drawn(count, names, has_blocks=has_blocks)
        if layout is not None:
            drawn += cable_layout(maker, layout)
        drawn = self._odd_floats(drawn)
        parts: list[Tags] = []
        if Quirk.NO_TABLES not in quirks:
            parts.append(sections.tables(maker, quirks, names, block_names))
        if has_blocks:
            parts.append(blocks)
        parts.append(sections.section("ENTITIES", drawn))
        if maker.modern:
            parts.append(sections.objects(maker, quirks, self.members))
        parts += sections.odd_sections(maker, quirks)
        if maker.modern and Quirk.UNKNOWN_ENTITY in quirks:
            parts.insert(0, sections.section("CLASSES", [sections.CLASS_ROW]))
        if Quirk.NO_HEADER not in quirks:
            parts.insert(0, sections.header(maker, quirks, self._seed()))
        return [tag for part in parts for tag in part] + [(0, "EOF")]

    def _handles(self, layout: CableOptions | None) -> sections.Handles:
        """Allot the handles that several sections use."""
        maker = self.maker
        model = "1F"
        if Quirk.MODEL_SPACE_17 in self.quirks:
            model = "17"
        elif Quirk.MODEL_SPACE_OTHER in self.quirks:
            model = maker.handle()
        names = ["*Paper_Space", "TREE", "ROW", "GROVE"]
        if layout is not None and layout.rule is not None:
            names.append("CABLE-DATA")
        records = {"*Model_Space": model} | {n: maker.handle() for n in names}
        return sections.Handles(
            model_space=model,
            paper_space=records["*Paper_Space"],
            layout_layers=CABLE_LAYERS if layout is not None else (),
            layout_block=records.get("CABLE-DATA", ""),
            block_records=records,
        )

    def _seed(self) -> str | None:
        """Return the value of $HANDSEED; None leaves it out."""
        quirks, greatest = self.quirks, self.maker.next_handle
        if not self.maker.handles or Quirk.SEED_ABSENT in quirks:
            return None
        if Quirk.SEED_LOW in quirks:
            return "26"
        if Quirk.SEED_AT_END in quirks:
            return f"{LAST_HANDLE:X}"
        return f"{greatest:x}" if Quirk.SEED_LOWER_CASE in quirks else f"{greatest:X}"

    def _drawn(self, count: int, names: sections.Handles, *, has_blocks: bool) -> list[Tags]:
        """Return the entities: the quirks' own first, then the rest."""
        maker = self.maker
        made: list[Tags] = []
        recipes: list[tuple[Quirk, Callable[[], list[Tags]]]] = [
            (Quirk.ODD_VALUES, self._odd_values),
            (Quirk.FOREIGN_XDATA, self._foreign_xdata),
            (Quirk.PROXY, self._proxy),
            (Quirk.REACTORS, self._reactors),
            (Quirk.UNKNOWN_ENTITY, self._unknown),
            (Quirk.GROUP, self._dimension),
            (Quirk.DUPLICATE_HANDLES, self._duplicates),
            (Quirk.SOME_WITHOUT_HANDLE, self._without_handle),
            (Quirk.LOWER_CASE_HANDLES, self._lower_case),
            (Quirk.SEED_AT_END, self._at_end),
            (Quirk.PAPER_SPACE, lambda: self._paper_space(names.paper_space)),
        ]
        for quirk, recipe in recipes:
            if quirk in self.quirks:
                made += recipe()
        block = "TREE" if has_blocks else None
        if block is not None and Quirk.NESTED_BLOCKS in self.quirks:
            made += maker.insert("GROVE", (40.0, -20.0), "WALLS")
        made += filler(maker, count, sections.layer_names(self.quirks), block)
        if Quirk.GROUP in self.quirks:
            firsts = [dict(tags).get(5, "") for tags in made[:3]]
            self.members = [str(h) for h in firsts if h]
        return made

    def _odd_values(self) -> list[Tags]:
        """Return texts whose values look like the format's own words."""
        texts = [self.maker.text(w, (30.0 + k, 30.0), 0.2) for k, w in enumerate(ODD_TEXTS)]
        return [*texts, self.maker.mtext("ENDSEC", (30.0, 33.0), 0.2)]

    def _foreign_xdata(self) -> list[Tags]:
        """Return a line with another program's data."""
        extra: Tags = [(1001, "ACME_APP"), (1002, "{"), (1000, "0"), (1000, "ENDSEC")]
        extra += [(1010, "1.0"), (1020, "2.0"), (1030, "0.0"), (1040, "1.5000"), (1070, "8")]
        return [[*self.maker.line((31.0, 20.0), (35.0, 22.0)), *extra, (1002, "}")]]

    def _proxy(self) -> list[Tags]:
        """Return a line with proxy graphics."""
        chunks: Tags = [(92, "6"), (310, "000102"), (310, "0A0B0C")]
        body: Body = ("AcDbLine", point((32.0, 1.0)) + point((33.0, 1.0), 11))
        return [self.maker.entity("LINE", "0", [body], common=chunks)]

    def _reactors(self) -> list[Tags]:
        """Return a line that something reacts to."""
        group: Tags = [(102, "{ACAD_REACTORS"), (330, self.maker.owner), (102, "}")]
        body: Body = ("AcDbLine", point((32.0, 2.0)) + point((33.0, 2.0), 11))
        return [self.maker.entity("LINE", "WALLS", [body], before_owner=group)]

    def _unknown(self) -> list[Tags]:
        """Return an entity of a program that nobody knows."""
        body: Tags = [(90, "0"), (1, "ENDSEC"), (40, "1.250000000000000000"), *point((33.0, 3.0))]
        return [self.maker.entity("ACME_WIDGET", "WALLS", [("AcmeWidget", body)])]

    def _dimension(self) -> list[Tags]:
        """Return an aligned dimension."""
        head: Tags = [*point((34.0, 5.0)), (70, "33"), (1, ""), (3, "Standard")]
        body: Tags = point((32.0, 4.0), 13) + point((36.0, 4.0), 14)
        bodies: list[Body] = [("AcDbDimension", head), ("AcDbAlignedDimension", body)]
        return [self.maker.entity("DIMENSION", "S-GRID", bodies)]

    def _duplicates(self) -> list[Tags]:
        """Return two circles with one handle."""
        circle: Body = ("AcDbCircle", [*point((36.0, 6.0)), (40, "1.0")])
        handle = self.maker.handle()
        return [self.maker.entity("CIRCLE", "0", [circle], handle=handle) for _ in range(2)]

    def _without_handle(self) -> list[Tags]:
        """Return a circle that lacks its handle."""
        tags = self.maker.circle((37.0, 7.0), 1.0)
        return [[tag for tag in tags if tag[0] != 5]]

    def _lower_case(self) -> list[Tags]:
        """Return a circle whose handle is in lower case, with zeros."""
        circle: Body = ("AcDbCircle", [*point((38.0, 8.0)), (40, "1.0")])
        handle = f"00{self.maker.handle().lower()}"
        return [self.maker.entity("CIRCLE", "0", [circle], handle=handle)]

    def _at_end(self) -> list[Tags]:
        """Return a circle with the last handle but one."""
        circle: Body = ("AcDbCircle", [*point((39.0, 9.0)), (40, "1.0")])
        return [self.maker.entity("CIRCLE", "0", [circle], handle=f"{LAST_HANDLE - 1:X}")]

    def _paper_space(self, owner: str) -> list[Tags]:
        """Return a line on the sheet."""
        body: Body = ("AcDbLine", point((1.0, 1.0)) + point((9.0, 1.0), 11))
        return [self.maker.entity("LINE", "0", [body], owner=owner, common=[(67, "1")])]

    def _odd_floats(self, records: list[Tags]) -> list[Tags]:
        """Write the coordinates of entities that are not the layout's in odd formats."""
        if Quirk.ODD_FLOATS not in self.quirks:
            return records
        result: list[Tags] = []
        for tags in records:
            if any(c == 8 and str(v).upper().startswith("S-CABL") for c, v in tags):
                result.append(tags)
                continue
            result.append(
                [(c, odd_number(float(v), self.rng)) if c in _FLOATS else (c, v) for c, v in tags]
            )
        return result
