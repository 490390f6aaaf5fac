"""Layer, linetype, text style and APPID rows that our entities need, per release."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.drawing.block_extents import number
from dxfcable.drawing.bytes.cut import encoding_of
from dxfcable.drawing.bytes.decode import decode, escape, layer_key
from dxfcable.drawing.bytes.splice import Change, line_end_of
from dxfcable.drawing.dialect import APPID, Dialect, Tag, encode
from dxfcable.drawing.uses import Row, row_key, users
from dxfcable.model import Finding, Severity

if TYPE_CHECKING:
    from collections.abc import Callable, Mapping, Sequence

    from dxfcable.drawing.bytes.scan import Scan

ROW = "row"  # in the record: goes once nobody but us uses it
LOOK_CODES = (62, 70, 370)  # colour, flags, pen width of a layer row
LENT_ROW = "lent-row"  # named by the drafter's entities before there was a row: always goes
CHAIN = "DXFCABLE-CHAIN"
STYLE = "DXFCABLE"
# Long dash, gap, short dash, gap [mm at plotted size]: the chain line of ISO 128, common practice.
_CHAIN_PATTERN = (12.0, -1.5, 1.5, -1.5)
_NAMES = {
    "LAYER": "AcDbLayerTableRecord",
    "LTYPE": "AcDbLinetypeTableRecord",
    "STYLE": "AcDbTextStyleTableRecord",
    "APPID": "AcDbRegAppTableRecord",
}


@dataclass(frozen=True, slots=True)
class LayerLook:
    """Colour index and pen width [1/100 mm] of a layer."""

    color: int
    lineweight: int


# Pen widths are of the ISO 128 groups; profile heavy, construction lines thin (common practice).
LOOKS = {
    "profile": LayerLook(5, 50),
    "closing_string": LayerLook(7, 18),
    "force_diagram": LayerLook(7, 25),
    "letters": LayerLook(7, 25),
    "tension": LayerLook(5, 25),
    "elevation": LayerLook(7, 25),
    "reaction": LayerLook(1, 25),
    "hanger": LayerLook(7, 18),
    "table": LayerLook(7, 25),
    "revision": LayerLook(6, 18),
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Rows:
    """What the tables hold after `plan_rows`.

    Attributes
    ----------
    changes : tuple of Change
        Insertions into the file.
    opened : tuple of str
        Structures that are ours: `row LAYER NAME`, `lent-row LAYER NAME`, `table NAME`,
        `section TABLES`.
    layers : mapping of str to str
        Role to layer name in the file's own spelling.
    style, chain : str
        Names of the text style and the chain linetype, "" where the file has no such table.
    """

    changes: tuple[Change, ...]
    opened: tuple[str, ...]
    layers: Mapping[str, str]
    style: str
    chain: str
    findings: tuple[Finding, ...] = field(default=())


def plan_rows(
    drawing: Scan,
    dialect: Dialect,
    layers: Mapping[str, str],
    *,
    allot: Callable[[], str],
    text_style: str = "",
    chain_scale: float = 1.0,
    looks_before: Mapping[str, tuple[str, ...]] | None = None,
) -> Rows:
    """Work out the rows that are missing.

    Parameters
    ----------
    layers : mapping of str to str
        Role to the office's layer name, for the roles that are drawn on.
    allot : callable
        Gives a new handle; called only where the drawing has handles.
    text_style : str
        The office's text style, used where the drawing has it.
    chain_scale : float
        Drawing units per plotted millimetre.
    looks_before : mapping of str to (str, ...)
        How our layers looked in an earlier solve's drawing, by the key of their names.
    """
    plan = _Plan(drawing, dialect, allot, looks_before or {})
    names = {role: plan.layer(role, name) for role, name in layers.items()}
    plan.row("APPID", APPID, [(2, APPID), (70, 0)])
    chain = plan.linetype(chain_scale)
    style = plan.text_style(text_style)
    return Rows(
        changes=plan.changes(),
        opened=(*plan.opened, *plan.opened_rows()),
        layers=names,
        style=style,
        chain=chain,
        findings=tuple(plan.findings),
    )


class _Plan:
    """Rows collected table by table."""

    def __init__(
        self,
        drawing: Scan,
        dialect: Dialect,
        allot: Callable[[], str],
        looks_before: Mapping[str, tuple[str, ...]],
    ) -> None:
        self._drawing = drawing
        self._looks_before = looks_before
        self._dialect = dialect
        self._allot = allot
        self._encoding, _ = encoding_of(drawing)
        self._new: dict[str, list[list[Tag]]] = {}
        self._heads: dict[str, list[Tag]] = {}
        self._rows: list[Row] = []
        self.opened: list[str] = []
        self.findings: list[Finding] = []

    def layer(self, role: str, name: str) -> str:
        """Return the layer's name in this file, adding its row where there is none."""
        found = self._find("LAYER", name)
        if found is not None:
            return self._existing_layer(found)
        look = LOOKS[role]
        tags: list[Tag] = [(2, escape(name)), (70, 0), (62, look.color), (6, "CONTINUOUS")]
        if self._dialect.has_owners:
            tags.append((370, look.lineweight))
            tags += self._plot_style()
        self._note_changed_look(name, tags)
        self.row("LAYER", name, tags)
        return name

    def _note_changed_look(self, name: str, tags: list[Tag]) -> None:
        """Say where a drafter changed a layer of ours that is set again."""
        before = self._looks_before.get(row_key(name))
        values = {code: str(value) for code, value in tags}
        if before is not None and before != tuple(values.get(c, "") for c in LOOK_CODES):
            self._note(
                "layer-restyled",
                f"layer {name} was given another colour, state or pen width; they are set again. "
                "A layer of that name in the office's template is used as it is",
                layer=name,
            )

    def linetype(self, scale: float) -> str:
        """Return the name of the chain linetype, "" where the file has no linetype table."""
        if self._drawing.table("LTYPE") is None:
            return ""
        lengths = [length * scale / self._linetype_scale() for length in _CHAIN_PATTERN]
        tags: list[Tag] = [
            (2, CHAIN),
            (70, 0),
            (3, "Closing string __ . __ . __"),
            (72, 65),
            (73, len(lengths)),
            (40, float(sum(abs(length) for length in lengths))),
        ]
        for length in lengths:
            tags.append((49, float(length)))
            if self._dialect.has_subclasses:
                tags.append((74, 0))
        self.row("LTYPE", CHAIN, tags)
        return CHAIN

    def _linetype_scale(self) -> float:
        """Return $LTSCALE, by which CAD programs stretch every pattern."""
        stated = number(self._drawing.header_value("$LTSCALE") or b"1")
        return stated if stated > 0.0 else 1.0

    def text_style(self, wanted: str) -> str:
        """Return the office's text style where the file has it, else our own."""
        if self._drawing.table("STYLE") is None:
            return ""
        if wanted and (found := self._find("STYLE", wanted)) is not None:
            return self._spelling(found)
        if wanted:
            self._note(
                "text-style",
                f'the text style "{wanted}" of the settings is not in this drawing; '
                f"{STYLE} is used",
            )
        font = "arial.ttf" if self._dialect.has_owners else "txt"
        tags: list[Tag] = [(2, STYLE), (70, 0), (40, 0.0), (41, 1.0), (50, 0.0), (71, 0)]
        self.row("STYLE", STYLE, [*tags, (42, 2.5), (3, font), (4, "")])
        return STYLE

    def row(self, table: str, name: str, tags: list[Tag]) -> None:
        """Add a row unless the table has one of that name."""
        if self._find(table, name) is not None:
            return
        if self._drawing.table(table) is None and table not in self._heads:
            self._open_table(table)
        head: list[Tag] = [(0, table)]
        if self._drawing.has_handles:
            head.append((5, self._allot()))
            head += self._owner(table)
        if self._dialect.has_subclasses:
            head += [(100, "AcDbSymbolTableRecord"), (100, _NAMES[table])]
        self._new.setdefault(table, []).append([*head, *tags])
        self._rows.append((table, name))

    def changes(self) -> tuple[Change, ...]:
        """Return the insertions, rows before ENDTAB, tables before ENDSEC."""
        result, loose = [], []
        for table, rows in self._new.items():
            found = self._drawing.table(table)
            if found is None:
                count: Tag = (70, len(rows))
                loose.append([*self._heads[table], count])
                loose += [*rows, [(0, "ENDTAB")]]
            else:
                result.append(self._insert(found.last, rows))
        if loose:
            section = self._drawing.section("TABLES")
            if section is not None:
                result.append(self._insert(section.last, loose))
            else:
                result.append(self._insert_section(loose))
        return tuple(result)

    def opened_rows(self) -> list[str]:
        """Name the new rows, telling those that entities name already."""
        near = [
            (table, name)
            for table, name in self._rows
            if table in ("LAYER", "APPID") or APPID.encode("ascii") in self._drawing.data
        ]
        used = users(self._drawing, near)
        return [
            f"{LENT_ROW if (table, name) in used else ROW} {table} {name}"
            for table, name in self._rows
        ]

    def _insert(self, record: int, rows: Sequence[list[Tag]]) -> Change:
        """Insert rows directly before a record."""
        at = int(self._drawing.starts[record])
        newline = line_end_of(self._drawing.data, at)
        rows_bytes = b"".join(encode(row, newline, self._encoding) for row in rows)
        return Change(at, at, rows_bytes)

    def _insert_section(self, tables: Sequence[list[Tag]]) -> Change:
        """Insert a whole TABLES section before the first of BLOCKS and ENTITIES."""
        self.opened.append("section TABLES")
        first = min(
            s.first for name in ("BLOCKS", "ENTITIES") if (s := self._drawing.section(name))
        )
        opening: list[Tag] = [(0, "SECTION"), (2, "TABLES")]
        return self._insert(first, [opening, *tables, [(0, "ENDSEC")]])

    def _open_table(self, table: str) -> None:
        """Begin a table that the drawing lacks."""
        head: list[Tag] = [(0, "TABLE"), (2, table)]
        if self._drawing.has_handles:
            head.append((5, self._allot()))
            if self._dialect.has_owners:
                head.append((330, "0"))
        if self._dialect.has_subclasses:
            head.append((100, "AcDbSymbolTable"))
        self._heads[table] = head
        self.opened.append(f"table {table}")

    def _owner(self, table: str) -> list[Tag]:
        """Return the owner tag of a row: its table's handle as it stands in the file."""
        if not self._dialect.has_owners:
            return []
        if table in self._heads:
            return [(330, str(value)) for code, value in self._heads[table] if code == 5]
        found = self._drawing.table(table)
        raw = self._drawing.first_tag(found.first, 5) if found else None
        return [(330, raw.decode("ascii"))] if raw and raw.isalnum() else []

    def _plot_style(self) -> list[Tag]:
        """Return plot style, material and visual style handles of layer 0."""
        found = self._find("LAYER", "0")
        if found is None:
            return []
        return [
            (pair.code, pair.value.strip().decode("ascii"))
            for pair in self._drawing.pairs(found)
            if pair.code in (390, 347, 348) and pair.value.strip().isalnum()
        ]

    def _find(self, table: str, name: str) -> int | None:
        """Return the row of that name, compared decoded and without regard to case."""
        key = layer_key(escape(name).encode("ascii"), self._encoding)
        for record in self._drawing.rows(table):
            raw = self._drawing.first_tag(record, 2)
            if raw is not None and layer_key(raw, self._encoding) == key:
                return record
        return None

    def _spelling(self, record: int) -> str:
        """Return a row's name as it is written in the file."""
        return decode(self._drawing.first_tag(record, 2) or b"", self._encoding)

    def _existing_layer(self, record: int) -> str:
        """Use the office's own row, saying so where it hides what is drawn on it."""
        name = self._spelling(record)
        state = {pair.code: pair.value.strip() for pair in self._drawing.pairs(record)}
        hidden = []
        if state.get(62, b"7").startswith(b"-"):
            hidden.append("off")
        if state.get(70, b"0").isdigit() and int(state.get(70, b"0")) & 1:
            hidden.append("frozen")
        if hidden:
            self._note(
                "output-layer-hidden",
                f"layer {name} is {' and '.join(hidden)}: what is drawn on it does not show",
                line=self._drawing.line(int(self._drawing.starts[record])),
                layer=name,
            )
        return name

    def _note(
        self, code: str, text: str, line: int | None = None, layer: str | None = None
    ) -> None:
        """Collect a note."""
        self.findings.append(
            Finding(code=code, severity=Severity.NOTE, text=text, line=line, layer=layer)
        )
