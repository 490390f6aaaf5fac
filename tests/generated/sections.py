"""The sections of a drawing as tags: header, tables, blocks, objects and the odd ones."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from tests.generated.cable import block
from tests.generated.quirks import Quirk
from tests.generated.writing import HAS_LINEWEIGHT, Tags

if TYPE_CHECKING:
    from tests.generated.entities import Maker

OFFICE_LAYERS = ("0", "WALLS", "S-GRID", "A-ANNO-NOTE")
# Names of ours as an office's template may have them: name, flags, colour.
TEMPLATE_LAYERS = (
    ("s-cabl-prof", "0", "30"),
    ("S-CABL-FORC", "1", "5"),
    ("S-CABL-TENS", "0", "-3"),
    ("S-Cabl-Elev", "4", "140"),
)
NON_ASCII_LAYERS = ("W\xe4nde", "LINIE-\\U+00D8", "\\U+0421-X")
CLASS_ROW: Tags = [
    (0, "CLASS"), (1, "ACME_WIDGET"), (2, "AcmeWidget"), (3, "ACME"),
    (90, "0"), (280, "0"), (281, "1"),
]  # fmt: skip


@dataclass(slots=True, kw_only=True)
class Handles:
    """Handles that several sections refer to."""

    model_space: str
    paper_space: str
    layout_block: str
    layout_layers: tuple[str, ...] = ()
    block_records: dict[str, str] = field(default_factory=dict)


def section(name: str, content: list[Tags]) -> Tags:
    """Wrap records in SECTION and ENDSEC."""
    inner = [tag for record in content for tag in record]
    return [(0, "SECTION"), (2, name), *inner, (0, "ENDSEC")]


def header(maker: Maker, quirks: frozenset[Quirk], seed: str | None) -> Tags:
    """Return the HEADER section."""
    version = maker.version
    tags: Tags = [(9, "$ACADVER"), (1, version)]
    if version >= "AC1009":
        tags += [(9, "$DWGCODEPAGE"), (3, "ANSI_1252")]
    if Quirk.UNKNOWN_VARIABLE in quirks:
        tags += [(9, "$MYVAR"), (70, "8"), (9, "$MYTEXT"), (1, "$HANDSEED")]
    tags += [(9, "$INSBASE"), (10, "0.0"), (20, "0.0"), (30, "0.0")]
    if not maker.modern:
        tags += [(9, "$HANDLING"), (70, "1" if maker.handles else "0")]
    if seed is not None:
        tags += [(9, "$HANDSEED"), (5, seed)]
    if version >= HAS_LINEWEIGHT and Quirk.NO_UNITS not in quirks:
        tags += [(9, "$INSUNITS"), (70, "6")]
    return section("HEADER", [tags])


def layer_names(quirks: frozenset[Quirk]) -> tuple[str, ...]:
    """Return the drafter's layers."""
    more = NON_ASCII_LAYERS if Quirk.NON_ASCII in quirks else ()
    mine = ("s-cabl-prof",) if Quirk.OUR_LAYERS in quirks else ()
    return OFFICE_LAYERS + more + mine


def tables(maker: Maker, quirks: frozenset[Quirk], handles: Handles, blocks: list[str]) -> Tags:
    """Return the TABLES section, without the tables that a quirk leaves out."""
    layers = [(name, "0", str(k + 1)) for k, name in enumerate(OFFICE_LAYERS)]
    layers += [(name, "0", "8") for name in NON_ASCII_LAYERS if Quirk.NON_ASCII in quirks]
    layers += list(TEMPLATE_LAYERS) if Quirk.OUR_LAYERS in quirks else []
    layers += [(name, "0", "7") for name in handles.layout_layers]
    linetypes = ["ByBlock", "ByLayer", "Continuous"] if maker.modern else ["CONTINUOUS"]
    appids = ["ACAD"] + (["ACME_APP"] if Quirk.FOREIGN_XDATA in quirks else [])
    made: list[Tags] = []
    if Quirk.NO_LTYPE not in quirks:
        rows: list[Tags] = [
            [(2, n), (70, "0"), (3, ""), (72, "65"), (73, "0"), (40, "0.0")] for n in linetypes
        ]
        made.append(_table(maker, quirks, "LTYPE", "AcDbLinetypeTableRecord", rows))
    if Quirk.NO_LAYER not in quirks:
        rows = [[(2, n), (70, flag), (62, c), (6, linetypes[-1])] for n, flag, c in layers]
        made.append(_table(maker, quirks, "LAYER", "AcDbLayerTableRecord", rows))
    if Quirk.NO_STYLE not in quirks:
        style: Tags = [(2, "Standard"), (70, "0"), (40, "0.0"), (41, "1.0"), (50, "0.0")]
        style += [(71, "0"), (42, "0.2"), (3, "txt"), (4, "")]
        made.append(_table(maker, quirks, "STYLE", "AcDbTextStyleTableRecord", [style]))
    if Quirk.NO_APPID not in quirks:
        rows = [[(2, n), (70, "0")] for n in appids]
        made.append(_table(maker, quirks, "APPID", "AcDbRegAppTableRecord", rows))
    dimension: Tags = [(2, "Standard"), (70, "0"), (3, ""), (4, "")]
    made.append(_table(maker, quirks, "DIMSTYLE", "AcDbDimStyleTableRecord", [dimension]))
    if maker.modern:
        rows = [[(2, n)] for n in blocks]
        own = [handles.block_records[n] for n in blocks]
        kind = "AcDbBlockTableRecord"
        made.append(_table(maker, quirks, "BLOCK_RECORD", kind, rows, own))
    return section("TABLES", made)


def _table(
    maker: Maker,
    quirks: frozenset[Quirk],
    name: str,
    subclass: str,
    rows: list[Tags],
    own: list[str] | None = None,
) -> Tags:
    """Return one table from TABLE to ENDTAB; the handle of a DIMSTYLE row has code 105."""
    head = maker.handle() if maker.handles else ""
    count = maker.rng.choice((0, 1, 999)) if Quirk.WRONG_COUNTS in quirks else len(rows)
    tags: Tags = [(0, "TABLE"), (2, name)]
    tags += [(5, head)] if head and maker.modern else []
    tags += [(330, "0")] if head and maker.modern else []
    tags += [*maker.marker("AcDbSymbolTable"), (70, str(count))]
    code = 105 if name == "DIMSTYLE" else 5
    for k, row in enumerate(rows):
        tags.append((0, name))
        if maker.handles and (maker.modern or name != "DIMSTYLE"):
            tags.append((code, own[k] if own else maker.handle()))
        if head and maker.modern:
            tags.append((330, head))
        tags += [*maker.marker("AcDbSymbolTableRecord"), *maker.marker(subclass), *row]
    return [*tags, (0, "ENDTAB")]


def blocks_section(
    maker: Maker, quirks: frozenset[Quirk], handles: Handles, own: list[Tags]
) -> tuple[Tags, list[str]]:
    """Return the BLOCKS section and the names of its blocks; `own` is the layout's block."""
    names = ["*Model_Space", "*Paper_Space"] if maker.modern else []
    records: dict[str, str] = handles.block_records
    content: list[Tags] = []
    for name in names:
        content += block(maker, name, [], records[name])
    inner = records["TREE"]
    tree = [maker.circle((0.0, 0.0), 1.0), maker.line((0.0, 0.0), (0.0, 1.0), "WALLS")]
    content += block(maker, "TREE", tree, inner)
    names.append("TREE")
    if Quirk.NESTED_BLOCKS in quirks:
        nested = maker.insert("TREE", (1.0, 1.0), "WALLS", [("KIND", "0"), ("NOTE", "ENDSEC")])
        nested += maker.old_polyline([(0.0, 0.0), (2.0, 1.0), (3.0, 0.0)], "S-GRID")
        content += block(maker, "ROW", nested, records["ROW"])
        outer = maker.insert("ROW", (5.0, 5.0))
        content += block(maker, "GROVE", outer, records["GROVE"])
        names += ["ROW", "GROVE"]
    if own:
        content += own
        names.append("CABLE-DATA")
    return section("BLOCKS", content), names


def objects(maker: Maker, quirks: frozenset[Quirk], members: list[str]) -> Tags:
    """Return the OBJECTS section; `members` are entities that a group points at."""
    root, groups = maker.handle(), maker.handle()
    content: list[Tags] = [
        [(0, "DICTIONARY"), (5, root), (330, "0"), (100, "AcDbDictionary"), (281, "1"),
         (3, "ACAD_GROUP"), (350, groups)]
    ]  # fmt: skip
    group = maker.handle() if Quirk.GROUP in quirks else ""
    entry: Tags = [(3, "SET-1"), (350, group)] if group else []
    content.append(
        [(0, "DICTIONARY"), (5, groups), (330, root), (100, "AcDbDictionary"), (281, "1"), *entry]
    )
    if group:
        pointers: Tags = [(340, m) for m in members]
        body: Tags = [(100, "AcDbGroup"), (300, ""), (70, "0"), (71, "1"), *pointers]
        content.append([(0, "GROUP"), (5, group), (330, groups), *body])
    if Quirk.UNKNOWN_OBJECT in quirks:
        body = [(100, "AcmeThing"), (1, "ENDSEC"), (90, "8"), (310, "00FF"), (40, "1.50000")]
        content.append([(0, "ACME_THING"), (5, maker.handle()), (330, root), *body])
    return section("OBJECTS", content)


def odd_sections(maker: Maker, quirks: frozenset[Quirk]) -> list[Tags]:
    """Return the sections that stand behind OBJECTS."""
    made = []
    if Quirk.UNKNOWN_SECTION in quirks:
        made.append(section("MYSECT", [[(0, "MYREC"), (1, "0"), (1000, "EOF"), (70, "3")]]))
    if Quirk.THUMBNAIL in quirks:
        made.append(section("THUMBNAILIMAGE", [[(90, "4"), (310, "00AB12FF")]]))
    if Quirk.ACDSDATA in quirks:
        record: Tags = [(0, "ACDSRECORD"), (90, "0"), (2, "AcDbDs::ID"), (280, "10")]
        if maker.handles and maker.owner:
            record.append((320, maker.owner))
        made.append(section("ACDSDATA", [[(70, "2"), (71, "2")], record]))
    return made
