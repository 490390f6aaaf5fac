"""The whole job without files: bytes of a drawing in, bytes of the solved drawing out.

For scripts::

    from dxfcable.job import Options, solve_bytes

    data, outcome = solve_bytes(Path("roof.dxf").read_bytes(), Options())
    print(outcome.solution.cables[0].horizontal)
"""

from __future__ import annotations

from dataclasses import dataclass, field, replace
from typing import TYPE_CHECKING

from dxfcable.errors import LayoutError
from dxfcable.model import Finding, Layout, Rule, RuleKind, Severity, Solution
from dxfcable.settings import Settings

if TYPE_CHECKING:
    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.drawing.items import Painting, TextItem
    from dxfcable.drawing.record import Memory
    from dxfcable.drawing.strip import Stripping

CAUTION = (
    "Preliminary calculation aid. Results depend on the loads and geometry drawn. "
    "To be checked and approved by a licensed engineer under the local code before use."
)


@dataclass(frozen=True, slots=True, kw_only=True)
class AskedRule:
    """A governing rule as asked for beside the drawing, such as PULL "120 kN"."""

    kind: RuleKind
    text: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Options:
    """What is asked beside the drawing.

    Attributes
    ----------
    settings : Settings
        The office's page.
    units, force_unit : str or None
        Length unit of the drawing and unit of bare forces; they win over the drawing.
    plot_scale : str or None
        Such as "1:100" or 1/8"=1'-0".
    rule, cable : AskedRule or None, str or None
        A governing rule for cables that have none; with `cable` for that one, whatever it has.
    under : str or None
        Combination to form under.
    loads : str or None
        Text of a load table that overrules loads of the drawing.
    fresh : bool
        Forget what the drafter moved or edited among our entities.
    """

    settings: Settings = field(default_factory=Settings)
    units: str | None = None
    force_unit: str | None = None
    plot_scale: str | None = None
    rule: AskedRule | None = None
    cable: str | None = None
    under: str | None = None
    loads: str | None = None
    fresh: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class Outcome:
    """What was understood, found and decided; `removed` counts entities taken out by strip."""

    findings: tuple[Finding, ...]
    layout: Layout | None = None
    solution: Solution | None = None
    painting: Painting | None = None
    layers: tuple[str, ...] = ()
    removed: int = 0

    @property
    def exit_code(self) -> int:
        """0 done, 1 something that an engineer must see, 2 refused."""
        found = {finding.severity for finding in self.findings}
        return 2 if Severity.ERROR in found else int(Severity.WARNING in found)


def read_bytes(data: bytes, options: Options) -> Outcome:
    """Understand a drawing and say everything about it.

    Faults in what is drawn are findings here and raise nothing.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    """
    work = _Work(data, options)
    layout = work.layout()
    findings = (*work.stripping.findings, *layout.findings)
    if any(f.code in _UNIT_CODES for f in layout.findings):
        layout = replace(layout, length_unit="")  # all else was read as if there were one
        return Outcome(findings=_unique(findings), layout=layout)
    try:
        solution = work.solution(layout)
    except LayoutError as error:
        return Outcome(findings=_unique((*findings, *_findings(error))), layout=layout)
    return Outcome(
        findings=_unique((*findings, *solution.findings)), layout=layout, solution=solution
    )


def solve_bytes(data: bytes, options: Options) -> tuple[bytes, Outcome]:
    """Solve a drawing; the bytes are the drafter's with whole records of ours inserted.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    LayoutError
        With all findings, where what is drawn cannot be solved.
    """
    pieces, outcome = solve_pieces(data, options)
    return b"".join(pieces), outcome


def solve_pieces(data: bytes, options: Options) -> tuple[list[memoryview], Outcome]:
    """Solve a drawing as `solve_bytes`, the result as pieces that share the input's memory."""
    from dxfcable.drawing.issue import issue
    from dxfcable.drawing.record import cable_text
    from dxfcable.units import convert

    work = _Work(data, options)
    layout = work.layout()
    solution = work.solution(layout)
    base = work.base()
    memory = work.memory()
    painting = work.painting(layout, solution, base, memory)
    records = [
        cable_text(layout, cable, formed)
        for cable, formed in zip(layout.cables, solution.cables, strict=True)
    ]
    issued = issue(
        base,
        painting,
        cable_records=records,
        memory=memory,
        opened_before=work.stripping.facts.opened,
        pointed_at=work.stripping.pointed_at,
        looks_before=work.stripping.layer_looks,
        settings=options.settings,
        unit_mm=convert(1.0, layout.length_unit, "mm"),
    )
    findings = (
        *work.stripping.findings,
        *layout.findings,
        *solution.findings,
        *painting.findings,
        *issued.findings,
    )
    return issued.pieces, Outcome(
        findings=_unique(findings),
        layout=layout,
        solution=solution,
        painting=painting,
        layers=issued.layers,
    )


def strip_bytes(data: bytes) -> tuple[bytes, Outcome]:
    """Take everything of ours out of a drawing; what holds nothing of ours comes back as it is.

    Raises
    ------
    DrawingError
        Where the file is no drawing that can be read.
    """
    from dxfcable.drawing.bytes.scan import scan
    from dxfcable.drawing.bytes.splice import apply
    from dxfcable.drawing.strip import plan_strip

    stripping = plan_strip(scan(data))
    findings = tuple(f for f in stripping.findings if f.code not in _MEMORY_CODES)
    outcome = Outcome(findings=findings, removed=stripping.removed)
    return (apply(data, stripping.changes) if stripping.changes else data), outcome


_UNIT_CODES = frozenset({"no-units", "units-unsupported"})
_MEMORY_CODES = frozenset(
    {"moved", "edited", "restyled"}
)  # of no interest to who takes everything out


class _Work:
    """One run over one drawing."""

    def __init__(self, data: bytes, options: Options) -> None:
        from dxfcable.drawing.bytes.scan import scan
        from dxfcable.drawing.strip import plan_strip

        self._options = options
        self._drawing = scan(data)
        self.stripping: Stripping = plan_strip(self._drawing)

    def layout(self) -> Layout:
        """Read what the drafter drew, leaving out what is ours."""
        from dxfcable.drawing.reader import ReadOptions, read
        from dxfcable.drawing.small import excerpt

        settings = self._options.settings
        names = [settings.layers.name(role) for role in settings.layers.input_roles()]
        blocks = settings.blocks
        cut_out = excerpt(
            self._drawing,
            names,
            self.stripping.own_heads,
            (blocks.support, blocks.load, blocks.data, blocks.anchor),
        )
        wanted = ReadOptions(units=self._options.units, force_unit=self._options.force_unit)
        layout = _with_unit_note(read(cut_out, settings, wanted), self._options.force_unit)
        return layout if self._options.loads is None else self._with_loads(layout)

    def _with_loads(self, layout: Layout) -> Layout:
        """Put the values of a load table into the layout."""
        from dxfcable import load_table

        options = self._options
        assert options.loads is not None
        try:
            table = load_table.read(options.loads, layout, options.settings, options.force_unit)
        except LayoutError as error:
            everything = _unique((*layout.findings, *_findings(error)))
            raise LayoutError(error.message, everything) from error
        return load_table.apply(layout, table)

    def solution(self, layout: Layout) -> Solution:
        """Form the cables, unless reading found a fault: then refuse with all of them."""
        from dxfcable.solving import Forming, solve

        options = self._options
        rule = _rule(options.rule, layout, options) if options.rule else None
        forming = Forming(rule=rule, cable=options.cable, under=options.under)
        is_readable = not any(f.severity is Severity.ERROR for f in layout.findings)
        try:
            solution = solve(layout, forming, options.settings)
        except LayoutError as error:
            everything = _unique((*layout.findings, *_findings(error)))
            raise LayoutError(error.message, everything) from error
        if not is_readable:
            msg = "the drawing cannot be solved as it is"
            raise LayoutError(msg, layout.findings)
        return solution

    def base(self) -> Scan:
        """Return the drafter's file without anything of ours."""
        from dxfcable.drawing.bytes.scan import scan
        from dxfcable.drawing.bytes.splice import apply

        if not self.stripping.changes:
            return self._drawing
        return scan(apply(self._drawing.data, self.stripping.changes))

    def memory(self) -> Memory:
        """Return what the drafter did to our entities, unless it is to be forgotten."""
        from dxfcable.drawing.record import Memory

        return Memory() if self._options.fresh else self.stripping.facts.memory

    def painting(self, layout: Layout, solution: Solution, base: Scan, memory: Memory) -> Painting:
        """Draw the solution, with labels where the drafter put them."""
        from dxfcable.drawing.items import TextItem
        from dxfcable.drawing.obstacles import obstacles
        from dxfcable.drawing.painter import paint

        painting = paint(
            layout,
            solution,
            obstacles=obstacles(base),
            settings=self._options.settings,
            plot_scale=self._options.plot_scale,
            held_places=memory.places,
            held_texts={},
        )
        items, notes = [], []
        for item in painting.items:
            if isinstance(item, TextItem):
                notes += _held_note(item, memory)
                item = _held(item, memory)
            items.append(item)
        return replace(painting, items=tuple(items), findings=(*painting.findings, *notes))


def _held(item: TextItem, memory: Memory) -> TextItem:
    """Put a text where the drafter put it, with the words the drafter gave it."""
    from dxfcable.drawing.bytes.decode import escape

    place = memory.places.get(item.id, item.at)
    words = escape(memory.texts[item.id]) if item.id in memory.texts else item.text
    return replace(item, at=place, text=words)


def _held_note(item: TextItem, memory: Memory) -> list[Finding]:
    """Say what a text edited by hand hides, at every solve."""
    words = memory.texts.get(item.id)
    if words is None:
        return []
    text = f'{item.id} was edited by hand and is kept: it says "{words}", the solve "{item.text}"'
    note = Finding(
        code="edited",
        severity=Severity.NOTE,
        text=text,
        remedy="Give --fresh to let go of edits and moves.",
        at=item.at,
        raw=words,
    )
    return [note]


def _with_unit_note(layout: Layout, asked: str | None) -> Layout:
    """Say where the command line's unit of force is another than the drawing's."""
    if asked is None or layout.force_unit in (None, asked):
        return layout
    note = Finding(
        code="force-unit-differs",
        severity=Severity.NOTE,
        text=f"the drawing's forces are in {layout.force_unit}; --force-unit {asked} is only the "
        "unit of numbers that state none",
    )
    return replace(layout, findings=(*layout.findings, note))


_FORCE_RULES = frozenset({RuleKind.MAX_TENSION, RuleKind.PULL})


def _rule(asked: AskedRule, layout: Layout, options: Options) -> Rule:
    """Read a rule of the command line in the drawing's units."""
    from dxfcable.forces import Style, parse_force
    from dxfcable.lengths import parse_length
    from dxfcable.units import convert

    units = options.settings.units
    if asked.kind in _FORCE_RULES:
        style = Style(
            length_unit=layout.length_unit,
            bare_unit=options.force_unit or units.force,
            decimal_comma=units.decimal_comma,
        )
        force = parse_force(asked.text, style)
        value = convert(force.value, force.unit, layout.force_unit or force.unit)
    else:
        length = parse_length(asked.text, layout.length_unit, decimal_comma=units.decimal_comma)
        value = length.value
    return Rule(kind=asked.kind, value=value, text=asked.text)


def _findings(error: LayoutError) -> tuple[Finding, ...]:
    """Return the findings that an error carries."""
    return tuple(f for f in error.findings if isinstance(f, Finding))


def _unique(findings: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """Return findings once each, in order."""
    return tuple(dict.fromkeys(findings))
