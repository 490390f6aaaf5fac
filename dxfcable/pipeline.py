"""One run over one drawing: read, solved, painted, issued; no file is touched."""

from __future__ import annotations

from dataclasses import replace
from typing import TYPE_CHECKING

from dxfcable.errors import DxfcableError, LayoutError
from dxfcable.model import Cable, Finding, Layout, Rule, RuleKind, Severity, Solution
from dxfcable.recorded import CUT

if TYPE_CHECKING:
    from collections.abc import Mapping

    from dxfcable.asking import AskedRevision, AskedRule, Options, Outcome
    from dxfcable.drawing.bytes.scan import Scan
    from dxfcable.drawing.items import Painting, TextItem
    from dxfcable.drawing.record import Memory
    from dxfcable.drawing.strip import Stripping
    from dxfcable.recorded import CableRecord
    from dxfcable.revising.revise import Revision
    from dxfcable.solving.built import Standing


class Work:
    """One run over one drawing."""

    def __init__(self, data: bytes, options: Options) -> None:
        from dxfcable.drawing.bytes.scan import scan
        from dxfcable.drawing.strip import plan_strip

        self._options = options
        self._drawing = scan(data)
        self.stripping: Stripping = plan_strip(self._drawing)
        # What the drawing keeps of its cables, by mark.
        self.records: dict[str, CableRecord] = {r.mark: r for r in self.stripping.cables}
        self._drawn: dict[str, Cable] = {}  # as read, for what their data blocks say

    def _in_units_of(self, layout: Layout) -> Layout:
        """Bring the records into the layout's units, and say so."""
        from dxfcable.revising.recorded_units import in_units_of

        self.records, notes = in_units_of(layout, self.records)
        return replace(layout, findings=(*layout.findings, *notes)) if notes else layout

    def layout(self, *, with_table: bool = True) -> Layout:
        """Read what the drafter drew, leaving out what is ours, with the load table if told."""
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
        if layout.plan or layout.plan_points:
            from dxfcable.loads.plan_loads import apply

            layout = apply(layout, settings)
        self._drawn = {cable.mark: cable for cable in layout.cables}
        return layout if self._options.loads is None or not with_table else self.with_loads(layout)

    def with_loads(self, layout: Layout) -> Layout:
        """Put the values of a load table into the layout."""
        from dxfcable.loads import load_table

        options = self._options
        assert options.loads is not None
        try:
            table = load_table.read(options.loads, layout, options.settings, options.force_unit)
        except LayoutError as error:
            everything = unique((*layout.findings, *findings_of(error)))
            raise LayoutError(error.message, everything) from error
        return load_table.apply(layout, table)

    def layout_with_new_loads(self) -> Layout:
        """Read the drawing with the loads that count after a change, the load table last.

        Raises
        ------
        LayoutError
            Where reading found a fault that the record does not mend.
        """
        from dxfcable.revising.keeping import with_new_loads

        layout = self.layout(with_table=False)
        if self.records and any(f.code == "no-units" for f in layout.findings):
            # An old release states none: the record knows.
            unit = next(iter(self.records.values())).length_unit
            self._options = replace(self._options, units=unit)
            layout = self.layout(with_table=False)
        layout = with_new_loads(self._in_units_of(layout), self.records)
        if self._options.loads is not None:
            layout = self.with_loads(layout)
        self.refuse_unreadable(layout)
        return layout

    def held_layout(self) -> tuple[Layout, Mapping[str, Standing]]:
        """Read the drawing; cables that are cut stand as recorded."""
        layout = self.layout()
        if all(record.status != CUT for record in self.records.values()):
            return self._without_tables(layout), {}
        from dxfcable.revising.keeping import with_cut_cables

        layout = self._without_tables(self._in_units_of(layout))
        held = with_cut_cables(
            layout, self.records, self._options.settings, is_reformed=self._options.reform
        )
        return held.layout, held.standing

    def _without_tables(self, layout: Layout) -> Layout:
        """Say which values of an earlier load table a formed cable no longer has."""
        marked = [r for r in self.records.values() if any(load.source == "csv" for load in r.loads)]
        if not marked or self._options.loads is not None:
            return layout
        from dxfcable.revising.keeping import dropped_tables

        notes = dropped_tables(layout, {record.mark: record for record in marked})
        return replace(layout, findings=(*layout.findings, *notes))

    def answer(self) -> tuple[Layout, Solution, dict[str, CableRecord]]:
        """Read and solve; revisions that stand in the drawing stay in it.

        Returns
        -------
        layout, solution : Layout, Solution
        records : dict of str to CableRecord
            Of the cables that are cut and stand.
        """
        layout, standing = self.held_layout()
        solution = self.solution(layout, standing)
        if any(record.revisions for record in self.records.values()):
            from dxfcable.revising.revise import kept_revisions

            kept = kept_revisions(solution, self.records)
            solution = replace(solution, revisions=kept)
        return layout, solution, {mark: one.record for mark, one in standing.items()}

    def issued(
        self,
        layout: Layout,
        solution: Solution,
        records: Mapping[str, CableRecord],
        *,
        delta_t: float | None = None,
    ) -> tuple[list[memoryview], Outcome]:
        """Paint a solution into the drawing.

        Parameters
        ----------
        records : mapping of str to CableRecord
            What cables stand by that were cut before.
        delta_t : float, optional
            Temperature change that the cables stand at [K]; None leaves that of the records.
        """
        from dxfcable.asking import Outcome
        from dxfcable.drawing.issue import issue
        from dxfcable.drawing.strangers import strangers
        from dxfcable.units import convert

        base, memory = self.base(), self.memory()
        painting = self.painting(layout, solution, base, memory)
        issued = issue(
            base,
            painting,
            cable_records=self._record_texts(layout, solution, records, delta_t),
            memory=memory,
            opened_before=self.stripping.facts.opened,
            pointed_at=self.stripping.pointed_at,
            looks_before=self.stripping.layer_looks,
            settings=self._options.settings,
            unit_mm=convert(1.0, layout.length_unit, "mm"),
        )
        findings = (
            *self.stripping.findings,
            *strangers(base, self._options.settings),
            *layout.findings,
            *solution.findings,
            *painting.findings,
            *issued.findings,
        )
        return issued.pieces, Outcome(
            findings=unique(findings),
            layout=layout,
            solution=solution,
            painting=painting,
            layers=issued.layers,
        )

    def _record_texts(
        self,
        layout: Layout,
        solution: Solution,
        records: Mapping[str, CableRecord],
        delta_t: float | None,
    ) -> list[str]:
        """Write the record of each cable."""
        from dxfcable.drawing.cable_record import cable_text
        from dxfcable.revising.recording import record_of

        texts = []
        kept = {revisions.cable: revisions for revisions in solution.revisions}
        for cable, formed in zip(layout.cables, solution.cables, strict=True):
            before = records.get(cable.mark)
            stands_at = 0.0
            if formed.status == CUT:
                stands_at = (before.delta_t if before else 0.0) if delta_t is None else delta_t
            keys = {s.key for s in cable.supports}
            record = record_of(
                layout,
                cable,
                formed,
                drawn=self._drawn.get(cable.mark),
                before=before,
                combos=solution.combos,
                delta_t=stands_at,
                heads=tuple(head for key, head in solution.heads if key in keys),
                revisions=kept.get(cable.mark),
            )
            texts.append(cable_text(record))
        return texts

    def solution(self, layout: Layout, standing: Mapping[str, Standing] | None = None) -> Solution:
        """Form the cables, unless reading found a fault: then refuse with all of them."""
        from dxfcable.solving.solve import Forming, solve

        options = self._options
        rule = _rule(options.rule, layout, options) if options.rule else None
        forming = Forming(
            rule=rule,
            cable=options.cable,
            under=options.under,
            combos=options.combos,
            cut=options.cut,
        )
        try:
            solution = solve(layout, forming, options.settings, standing)
        except LayoutError as error:
            everything = unique((*layout.findings, *findings_of(error)))
            raise LayoutError(error.message, everything) from error
        self.refuse_unreadable(layout)
        return solution

    def refuse_unreadable(self, layout: Layout) -> None:
        """Refuse a layout in which reading found a fault, with all findings."""
        if any(f.severity is Severity.ERROR for f in layout.findings):
            msg = "the drawing cannot be solved as it is"
            raise LayoutError(msg, layout.findings)

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
        )
        items, notes = [], []
        for item in painting.items:
            if isinstance(item, TextItem):
                notes += _held_note(item, memory)
                item = _held(item, memory)
            items.append(item)
        return replace(painting, items=tuple(items), findings=(*painting.findings, *notes))


def revision_of(asked: AskedRevision) -> Revision:
    """Read what a revision asks for.

    Raises
    ------
    DxfcableError
        Where the words make no revision.
    """
    from dxfcable.quantities import parse_temperature_change
    from dxfcable.revising.revise import HOLD_CUT, HOLD_RULE, Revision

    if asked.hold not in (HOLD_CUT, HOLD_RULE):
        message = f'"{asked.hold}" is nothing that a revision can hold'
        remedy = f"Write --hold {HOLD_RULE} or --hold {HOLD_CUT}."
        raise DxfcableError(message, code="usage", remedy=remedy)
    if asked.hold == HOLD_RULE and (asked.delta_t is not None or asked.move_clamps):
        message = "a cable formed anew is formed at the reference temperature, its clamps as drawn"
        remedy = f"Give --delta-t and --move-clamps with --hold {HOLD_CUT}."
        raise DxfcableError(message, code="usage", remedy=remedy)
    return Revision(
        hold=asked.hold,
        delta_t=parse_temperature_change(asked.delta_t) if asked.delta_t else 0.0,
        move_clamps=asked.move_clamps,
        rev=asked.rev,
        description=asked.description,
        by=asked.by,
        date=asked.date,
    )


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


def findings_of(error: LayoutError) -> tuple[Finding, ...]:
    """Return the findings that an error carries."""
    return tuple(f for f in error.findings if isinstance(f, Finding))


def unique(findings: tuple[Finding, ...]) -> tuple[Finding, ...]:
    """Return findings once each, in order."""
    return tuple(dict.fromkeys(findings))
