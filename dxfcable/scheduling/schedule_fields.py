"""The columns of each schedule: one list for the table, the CSV and the words of the JSON.

Values go in exact and are rounded here, once, when they are written.
"""

from __future__ import annotations

import enum
from dataclasses import dataclass
from typing import TYPE_CHECKING

from dxfcable.lengths import format_elevation, format_length
from dxfcable.model import RuleKind
from dxfcable.quantities import format_force
from dxfcable.units import is_imperial

if TYPE_CHECKING:
    from dxfcable.model import Rule
    from dxfcable.scheduling.schedule_rows import (
        AnchorageRow,
        CableRow,
        CutLengths,
        HangerRow,
        LevelRange,
        Schedules,
    )

LEVELS = ("service", "factored")
_GIVEN_DIGITS = 6  # of what the drafter states: shown as it was written


class Kind(enum.StrEnum):
    """What a value is, and so how it is rounded."""

    TEXT = "text"
    COUNT = "count"
    LENGTH = "length"
    LEVEL = "level"
    FORCE = "force"
    GIVEN_FORCE = "given force"
    LINE_LOAD = "line load"
    MOMENT = "moment"
    ANGLE = "angle"
    RATIO = "ratio"


@dataclass(frozen=True, slots=True)
class Field:
    """One column of a schedule: its public key, its heading, its exact value."""

    key: str
    label: str
    kind: Kind
    value: str | float | None


@dataclass(frozen=True, slots=True, kw_only=True)
class Words:
    """How values of one drawing are written.

    `has_datum` and `reference` are those of the row: without a datum heights are differences
    from the left support.
    """

    length_unit: str
    force_unit: str
    digits: int
    has_datum: bool = True
    reference: float = 0.0

    def of(self, field: Field) -> str:
        """Write a value with its unit, "" where there is none."""
        value, kind = field.value, field.kind
        if value is None or isinstance(value, str):
            return value or ""
        match kind:
            case Kind.LENGTH:
                return format_length(value, self.length_unit)
            case Kind.LEVEL:
                return self._level(value)
            case Kind.FORCE:
                return format_force(value, self.force_unit, self.digits)
            case Kind.GIVEN_FORCE:
                return format_force(value, self.force_unit, _GIVEN_DIGITS, is_trimmed=True)
            case Kind.LINE_LOAD:
                force = format_force(value, self.force_unit, _GIVEN_DIGITS, is_trimmed=True)
                return f"{force}/{self.length_unit}"
            case Kind.MOMENT:
                return f"{format_force(value, self.force_unit, self.digits)} {self.length_unit}"
            case Kind.ANGLE:
                return f"{round(value, 2) + 0.0:.2f} deg"
            case Kind.RATIO:
                return f"{value:.3f}"
            case _:
                return f"{value:g}"

    def unit(self, kind: Kind) -> str:
        """Name the unit that `number` leaves out."""
        lengths = "ft-in" if is_imperial(self.length_unit) else self.length_unit
        return {
            Kind.LENGTH: lengths,
            Kind.LEVEL: lengths,
            Kind.FORCE: self.force_unit,
            Kind.GIVEN_FORCE: self.force_unit,
            Kind.LINE_LOAD: f"{self.force_unit}/{self.length_unit}",
            Kind.MOMENT: f"{self.force_unit} {self.length_unit}",
            Kind.ANGLE: "deg",
        }.get(kind, "")

    def number(self, field: Field) -> str:
        """Write a value without its unit; feet and inches keep their signs."""
        words = self.of(field)
        if field.kind in (Kind.TEXT, Kind.COUNT) or not words:
            return words
        if field.kind is Kind.LEVEL:
            return words.removeprefix("EL ").removeprefix("+")
        unit = self.unit(field.kind)
        return words.removesuffix(unit).rstrip(" ") if unit else words

    def _level(self, elevation: float) -> str:
        """Write a height: an elevation over a datum, else the signed difference."""
        if self.has_datum:
            return format_elevation(elevation, self.length_unit)
        words = format_elevation(elevation - self.reference, self.length_unit).removeprefix("EL ")
        return words if words.startswith("-") else f"+{words}"


def words_for(whole: Schedules, row: CableRow | HangerRow | AnchorageRow) -> Words:
    """Give the words of one row."""
    return Words(
        length_unit=whole.length_unit,
        force_unit=whole.force_unit,
        digits=whole.digits,
        has_datum=row.has_datum,
        reference=row.reference,
    )


def cable_fields(whole: Schedules, row: CableRow) -> list[Field]:
    """List the columns of the cable schedule."""
    words, lengths = words_for(whole, row), row.lengths
    governs, (left, right) = row.governs, lengths.offsets
    return [
        Field("mark", "cable", Kind.TEXT, row.mark),
        Field("status", "status", Kind.TEXT, row.status),
        Field("rule", "rule", Kind.TEXT, rule_words(row.rule, words)),
        Field("under", "state shown", Kind.TEXT, row.under),
        Field("level", "level", Kind.TEXT, level_words(row.level, is_assumed=row.level_is_assumed)),
        Field("reference_temperature", "reference temperature", Kind.TEXT, whole.temperature),
        Field("strand", "strand", Kind.TEXT, row.strand),
        Field("weight", "weight", Kind.LINE_LOAD, row.weight or None),
        Field("ea", "EA", Kind.GIVEN_FORCE, row.ea),
        Field("horizontal", "pull", Kind.FORCE, row.horizontal),
        Field("max_tension", "largest tension as formed", Kind.FORCE, row.max_tension),
        Field(
            "governs",
            "governs in",
            Kind.TEXT,
            f"{governs.segment} {governs.support or governs.end}",
        ),
        *_tension_fields(row),
        Field("capacity", "capacity", Kind.GIVEN_FORCE, row.capacity),
        Field("utilization", "utilization as formed", Kind.RATIO, row.utilization),
        Field("sag", "sag", Kind.LENGTH, row.sag),
        Field("length", "length as formed", Kind.LENGTH, row.length),
        Field("unstressed_length", "unstressed length", Kind.LENGTH, row.unstressed_length),
        Field("pin_offset_left", "less pin offset left", Kind.LENGTH, left or None),
        Field("pin_offset_right", "less pin offset right", Kind.LENGTH, right or None),
        Field("pin_to_pin", "pin to pin as formed", Kind.LENGTH, lengths.pin_to_pin),
        Field("unstressed_pin_to_pin", "pin to pin unstressed", Kind.LENGTH, lengths.unstressed),
        Field(
            "measuring_tension", "measuring tension", Kind.GIVEN_FORCE, lengths.measuring_tension
        ),
        Field("measured_length", "pin to pin measured", Kind.LENGTH, lengths.measured),
        *_cut_fields(lengths, ("left", "right")),
        Field("pieces_count", "pieces", Kind.COUNT, float(len(row.pieces))),
    ]


def hanger_fields(_: Schedules, row: HangerRow) -> list[Field]:
    """List the columns of the hanger schedule."""
    top, bottom = row.lengths.offsets
    return [
        Field("cable", "cable", Kind.TEXT, row.cable),
        Field("mark", "hanger", Kind.TEXT, row.mark),
        Field("heights", "heights", Kind.TEXT, heights_words(row)),
        Field("along", "from left support", Kind.LENGTH, row.along),
        Field("elevation", "cable elevation", Kind.LEVEL, row.elevation),
        Field("deck_elevation", "deck elevation", Kind.LEVEL, row.deck_elevation),
        Field("length", "length", Kind.LENGTH, row.length),
        Field("force", "force", Kind.FORCE, row.force),
        *_force_fields(row),
        Field("slack", "slack under", Kind.TEXT, "; ".join(row.slack)),
        Field("clamped", "clamped", Kind.TEXT, "yes" if row.is_clamped else ""),
        Field("ea", "EA", Kind.GIVEN_FORCE, row.ea),
        Field("clamp_drop", "less clamp drop", Kind.LENGTH, top or None),
        Field("deck_pin", "less deck pin", Kind.LENGTH, bottom or None),
        Field("pin_to_pin", "pin to pin", Kind.LENGTH, row.lengths.pin_to_pin),
        Field("unstressed_length", "unstressed", Kind.LENGTH, row.lengths.unstressed),
        *_cut_fields(row.lengths, ("top", "bottom")),
    ]


def anchorage_fields(_: Schedules, row: AnchorageRow) -> list[Field]:
    """List the columns of the anchorage schedule that belong to the whole support."""
    found = row.found
    residual = found.residual if any(found.residual) else (None, None)
    return [
        Field("support", "support", Kind.TEXT, found.mark),
        Field("heights", "heights", Kind.TEXT, heights_words(row)),
        Field("elevation", "elevation", Kind.LEVEL, row.elevation),
        Field("combo", "state", Kind.TEXT, row.combo),
        Field("level", "level", Kind.TEXT, level_words(row.level, is_assumed=row.level_is_assumed)),
        Field("mast", "mast", Kind.FORCE, found.mast),
        Field("head_shear", "head shear", Kind.FORCE, found.head_shear or None),
        Field("base_moment", "base moment", Kind.MOMENT, found.base_moment or None),
        Field("residual_x", "not held x", Kind.FORCE, residual[0]),
        Field("residual_y", "not held y", Kind.FORCE, residual[1]),
    ]


def stay_fields(row: AnchorageRow, number: int | None) -> list[Field]:
    """List the columns of one stay of a support, empty ones without a number."""
    force = angle = None
    if number is not None:
        force, angle = row.found.stays[number], row.stay_angles[number]
    return [
        Field("stay", "stay", Kind.FORCE, force),
        Field("angle", "stay to horizontal", Kind.ANGLE, angle),
    ]


def anchor_fields(row: AnchorageRow, number: int | None) -> list[Field]:
    """List the columns of one anchor of a support, empty ones without a number."""
    anchor = None if number is None else row.found.anchors[number]
    return [
        Field("anchor", "anchor", Kind.TEXT, anchor.mark if anchor else None),
        Field("horizontal", "anchor H", Kind.FORCE, anchor.horizontal if anchor else None),
        Field("uplift", "anchor uplift", Kind.FORCE, anchor.uplift if anchor else None),
        Field(
            "sliding_factor",
            "sliding factor",
            Kind.RATIO,
            anchor.sliding_factor if anchor else None,
        ),
        Field(
            "uplift_factor", "uplift factor", Kind.RATIO, anchor.uplift_factor if anchor else None
        ),
    ]


def level_words(level: str, *, is_assumed: bool) -> str:
    """Name a level, and whether it is only assumed."""
    return f"{level} (assumed)" if is_assumed else level


def rule_words(rule: Rule, words: Words) -> str:
    """Write a rule with its value."""
    kind = {
        RuleKind.MAX_TENSION: Kind.GIVEN_FORCE,
        RuleKind.PULL: Kind.GIVEN_FORCE,
        RuleKind.LOW_POINT: Kind.LEVEL,
    }.get(rule.kind, Kind.LENGTH)
    if rule.kind is RuleKind.THROUGH and rule.point is not None:
        return f"THROUGH ({rule.point[0]:.6g}, {rule.point[1]:.6g})"
    return f"{rule.kind.name} {words.of(Field('', '', kind, rule.value))}"


def heights_words(row: HangerRow | AnchorageRow) -> str:
    """Say what heights are counted from."""
    return "elevations" if row.has_datum else "above the left support"


def _range_of(ranges: tuple[LevelRange, ...], level: str) -> LevelRange | None:
    return next((r for r in ranges if r.level == level), None)


def _level_field(level: str, found: LevelRange | None) -> Field:
    """Say whether the level of some state among these is only assumed."""
    said = ("assumed" if found.is_assumed else "stated") if found else None
    return Field(f"{level}_level", f"{level} level", Kind.TEXT, said)


def _tension_fields(row: CableRow) -> list[Field]:
    """Give the largest tension of each level, its combination and its share of the capacity."""
    fields = []
    for level in LEVELS:
        found = _range_of(row.tensions, level)
        most = found.most.value if found else None
        share = most / row.capacity if most is not None and row.capacity else None
        under = found.most.combo if found else None
        label = f"largest tension {level}"
        fields += [
            _level_field(level, found),
            Field(f"max_tension_{level}", label, Kind.FORCE, most),
            Field(f"max_tension_{level}_combo", f"{label}, under", Kind.TEXT, under),
            Field(f"utilization_{level}", f"utilization {level}", Kind.RATIO, share),
        ]
    return fields


def _force_fields(row: HangerRow) -> list[Field]:
    """Give the largest and least force of each level with its combination."""
    fields = []
    for level in LEVELS:
        found = _range_of(row.forces, level)
        fields.append(_level_field(level, found))
        for name in ("largest", "least"):
            extreme = (found.most if name == "largest" else found.least) if found else None
            key, label = f"{name}_{level}", f"{name} {level}"
            value, combo = (extreme.value, extreme.combo) if extreme else (None, None)
            fields += [
                Field(key, label, Kind.FORCE, value),
                Field(f"{key}_combo", f"{label}, under", Kind.TEXT, combo),
            ]
    return fields


def _cut_fields(lengths: CutLengths, sides: tuple[str, str]) -> list[Field]:
    """Give end fittings, each deduction by its name, and the cut length or why there is none."""
    fields = [
        Field(f"fitting_{side}", f"fitting {side}", Kind.TEXT, name)
        for side, name in zip(sides, lengths.fittings, strict=True)
    ]
    known = {(d.name, d.end): abs(d.value) for d in lengths.deductions}
    for name, sign in (("pin to face", "less"), ("embedment", "plus")):
        for side in sides:
            key, label = f"{name.replace(' ', '_')}_{side}", f"{sign} {name} {side}"
            fields.append(Field(key, label, Kind.LENGTH, known.get((name, side))))
    if sides[0] == "left":
        key, label = "constructional_stretch", "less constructional stretch"
        fields.append(Field(key, label, Kind.LENGTH, known.get(("constructional stretch", ""))))
    fields += [
        Field("cut_length", "cut length", Kind.LENGTH, lengths.cut),
        Field("cut_length_missing", "no cut length because", Kind.TEXT, lengths.missing),
    ]
    return fields
