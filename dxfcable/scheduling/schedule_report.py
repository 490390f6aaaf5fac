"""The schedules as JSON: exact numbers, and beside them the words that a drawing shows."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.model import RuleKind
from dxfcable.reporting.report import FORMAT, findings
from dxfcable.scheduling.schedule_fields import (
    Field,
    Kind,
    anchor_fields,
    anchorage_fields,
    cable_fields,
    hanger_fields,
    stay_fields,
    words_for,
)

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

    from dxfcable.model import Extreme, Finding
    from dxfcable.reporting.report import Json
    from dxfcable.scheduling.schedule_fields import Words
    from dxfcable.scheduling.schedule_rows import (
        AnchorageRow,
        CableRow,
        CutLengths,
        HangerRow,
        LevelRange,
        Piece,
        Schedules,
    )


def scheduled(drawing: str, whole: Schedules, found: Sequence[Finding], caution: str) -> Json:
    """Describe the schedules of one drawing.

    Parameters
    ----------
    drawing : str
        Name of its file.
    found : sequence of Finding
        All that has to be said, those of the schedules too.
    caution : str
        Stands beside the tables, word for word.
    """
    formed = [row for row in whole.anchorages if row.is_formed]
    return {
        "format": FORMAT,
        "drawing": drawing,
        "length_unit": whole.length_unit,
        "force_unit": whole.force_unit or None,
        "reference_temperature": whole.temperature or None,
        "cables": [_cable(whole, row) for row in whole.cables],
        "hangers": [_hanger(whole, row) for row in whole.hangers],
        "anchorages": [_support(whole, row) for row in formed],
        "caution": caution,
        "findings": findings(found),
    }


def _cable(whole: Schedules, row: CableRow) -> Json:
    words = words_for(whole, row)
    rule = row.rule
    value: object = list(rule.point or ()) if rule.kind is RuleKind.THROUGH else rule.value
    governs = row.governs
    return {
        "mark": row.mark,
        "status": row.status,
        "rule": {"kind": rule.kind.value, "value": value},
        "under": row.under,
        "level": row.level,
        "level_assumed": row.level_is_assumed,
        "strand": row.strand or None,
        "weight": row.weight,
        "ea": row.ea,
        "horizontal": row.horizontal,
        "max_tension": row.max_tension,
        "governs": {"segment": governs.segment, "end": governs.end, "support": governs.support},
        "tensions": [
            {"level": r.level, "level_assumed": r.is_assumed, **_extreme(r.most)}
            for r in row.tensions
        ],
        "capacity": row.capacity,
        "utilization": row.utilization,
        "sag": row.sag,
        "length": row.length,
        "unstressed_length": row.unstressed_length,
        "pin_offsets": {"left": row.lengths.offsets[0], "right": row.lengths.offsets[1]},
        **_lengths(row.lengths, ("left", "right"), "unstressed_pin_to_pin"),
        "pieces": [_piece(piece, words) for piece in row.pieces],
        "states_without_shape": [{"combo": combo, "fault": why} for combo, why in row.faults],
        "words": _words(words, cable_fields(whole, row)),
    }


def _hanger(whole: Schedules, row: HangerRow) -> Json:
    return {
        "cable": row.cable,
        "mark": row.mark,
        "x": row.x,
        "elevation": row.elevation,
        "deck_elevation": row.deck_elevation,
        "length": row.length,
        "force": row.force,
        "forces": [_range(r) for r in row.forces],
        "slack": list(row.slack),
        "clamped": row.is_clamped,
        "ea": row.ea,
        "clamp_drop": row.lengths.offsets[0],
        "deck_pin": row.lengths.offsets[1],
        **_lengths(row.lengths, ("top", "bottom"), "unstressed_length"),
        "words": _words(words_for(whole, row), hanger_fields(whole, row)),
    }


def _support(whole: Schedules, row: AnchorageRow) -> Json:
    """Describe one support as formed, and in each state."""
    support = row.found.support
    states = [r for r in whole.anchorages if r.found.support == support and not r.is_formed]
    return {**_anchorage(whole, row), "states": [_anchorage(whole, state) for state in states]}


def _anchorage(whole: Schedules, row: AnchorageRow) -> Json:
    found, words = row.found, words_for(whole, row)
    return {
        "support": found.mark,
        "elevation": row.elevation,
        "combo": row.combo,
        "level": row.level,
        "level_assumed": row.level_is_assumed,
        "mast": found.mast,
        "stays": list(found.stays),
        "stay_angles_deg": list(row.stay_angles),
        "anchors": [
            {
                "mark": anchor.mark,
                "horizontal": anchor.horizontal,
                "uplift": anchor.uplift,
                "sliding_factor": anchor.sliding_factor,
                "uplift_factor": anchor.uplift_factor,
                "words": _words(words, anchor_fields(row, k)),
            }
            for k, anchor in enumerate(found.anchors)
        ],
        "head_shear": found.head_shear,
        "base_moment": found.base_moment,
        "residual": list(found.residual),
        "words": {
            **_words(words, anchorage_fields(whole, row)),
            "stays": [words.of(stay_fields(row, k)[0]) for k in range(len(found.stays))],
        },
    }


def _lengths(lengths: CutLengths, sides: tuple[str, str], unstressed: str) -> Json:
    """Describe the way from pin to pin to the cut length."""
    return {
        "pin_to_pin": lengths.pin_to_pin,
        unstressed: lengths.unstressed,
        "measuring_tension": lengths.measuring_tension,
        "measured_length": lengths.measured,
        "fittings": {
            side: name or None for side, name in zip(sides, lengths.fittings, strict=True)
        },
        "deductions": [
            {"name": d.name, "end": d.end or None, "value": d.value} for d in lengths.deductions
        ],
        "cut_length": lengths.cut,
        "cut_length_missing": lengths.missing or None,
    }


def _piece(piece: Piece, words: Words) -> Json:
    fields = [
        Field("unstressed_length", "", Kind.LENGTH, piece.unstressed_length),
        Field("mark", "", Kind.LENGTH, piece.mark),
        Field("measured_mark", "", Kind.LENGTH, piece.measured_mark),
    ]
    return {
        "name": piece.name,
        "from": piece.start,
        "to": piece.end,
        **{field.key: field.value for field in fields},
        "words": _words(words, fields),
    }


def _range(found: LevelRange) -> Json:
    return {
        "level": found.level,
        "level_assumed": found.is_assumed,
        "max": _extreme(found.most),
        "min": _extreme(found.least),
    }


def _extreme(found: Extreme) -> Json:
    return {"value": found.value, "combo": found.combo}


def _words(words: Words, fields: Iterable[Field]) -> dict[str, str]:
    """Pair each rounded quantity with its words; texts need none, nor what is not known."""
    plain = (Kind.TEXT, Kind.COUNT)
    return {f.key: words.of(f) for f in fields if f.kind not in plain and f.value is not None}
