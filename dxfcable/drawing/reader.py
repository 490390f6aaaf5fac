"""A drawing's entities understood: supports, cables, loads, rules, with everything assumed said."""

from __future__ import annotations

from dataclasses import dataclass
from itertools import pairwise
from typing import TYPE_CHECKING

from dxfcable.drawing.codes import Code
from dxfcable.drawing.reading.anchorage import Anchorages
from dxfcable.drawing.reading.assemble import Forces, cable_of, support_of
from dxfcable.drawing.reading.context import Context
from dxfcable.drawing.reading.data import read_data
from dxfcable.drawing.reading.datum import read_datum
from dxfcable.drawing.reading.expand import expand
from dxfcable.drawing.reading.faults import Faults, listed
from dxfcable.drawing.reading.lines import read_frames, read_lines
from dxfcable.drawing.reading.loadowners import share_out
from dxfcable.drawing.reading.loadpoints import read_load_points
from dxfcable.drawing.reading.loadtexts import read_load_texts
from dxfcable.drawing.reading.plan import Plan
from dxfcable.drawing.reading.strings import read_strings
from dxfcable.drawing.reading.supports import merging_tolerance, number_marks, read_supports
from dxfcable.drawing.reading.survey import (
    check_dimensions,
    check_plane,
    check_text_heights,
    read_unit,
    tell_not_read,
    tell_nothing_drawn,
    tell_passed_over,
)
from dxfcable.model import Layout, Severity
from dxfcable.quantities import FORCE_UNITS, Style, convert

if TYPE_CHECKING:
    from dxfcable.drawing.excerpt import Excerpt
    from dxfcable.drawing.reading.context import CableDraft, SupportDraft
    from dxfcable.drawing.reading.loadpoints import LoadDraft
    from dxfcable.settings import Settings


@dataclass(frozen=True, slots=True, kw_only=True)
class ReadOptions:
    """What the command line says about units; None where it says nothing.

    `units` is the drawing's unit of length, `force_unit` that of forces written bare.
    """

    units: str | None = None
    force_unit: str | None = None


def read(excerpt: Excerpt, settings: Settings, options: ReadOptions | None = None) -> Layout:
    """Understand a drawing.

    Parameters
    ----------
    excerpt : Excerpt
        The entities on our layers.
    settings : Settings
    options : ReadOptions, optional

    Returns
    -------
    Layout
        With all findings; where one is an error the rest is as far as it could be read, and
        must not be solved.
    """
    options = options or ReadOptions()
    faults = Faults()
    unit = read_unit(excerpt, options.units, faults)
    tell_passed_over(excerpt, settings, faults)
    version = excerpt.version
    if not excerpt.entities:
        tell_nothing_drawn(excerpt, settings, faults)
        return Layout(
            version=version, length_unit=unit, force_unit=None, findings=tuple(faults.findings)
        )
    style = Style(
        length_unit=unit,
        bare_unit=_bare_unit(options, settings, faults),
        decimal_comma=settings.units.decimal_comma,
        upward_sign=settings.units.upward_sign,
    )
    pieces = expand(excerpt, settings, faults)
    context = Context(settings=settings, style=style, pieces=pieces, faults=faults)
    tell_not_read(context)
    check_plane(context)
    check_dimensions(context)
    check_text_heights(context)
    return _understand(context, version, options)


def _bare_unit(options: ReadOptions, settings: Settings, faults: Faults) -> str:
    """Give the unit of forces written bare; the command line wins over the settings."""
    stated = settings.units.force
    wanted = options.force_unit
    if wanted is None:
        return stated
    if wanted not in FORCE_UNITS:
        text = f'"{wanted}" is no unit of force'
        remedy = f"Write one of {listed(FORCE_UNITS)}."
        faults.error(Code.UNITS_UNSUPPORTED, text, remedy)
        return stated
    if stated and stated != wanted:
        text = f"the settings say {stated}, the command line {wanted}: {wanted} is used"
        faults.note(Code.UNITS_OVERRIDDEN, text)
    return wanted


def _understand(context: Context, version: str, options: ReadOptions) -> Layout:
    """Read supports, cables, loads and what else there is, in the order that they need."""
    supports = read_supports(context)
    cables = read_strings(context, supports)
    read_data(context, cables)
    number_marks(cables, "C")
    _check_cables(context, supports, cables)
    tolerance = _tolerance(context, supports, cables)
    drafts = read_load_points(context, tolerance)
    text_height = read_load_texts(context, drafts)
    _sort(drafts, tolerance)
    number_marks(drafts, "P")
    carried = share_out(context, supports, cables, drafts)
    anchorages = Anchorages(context, supports, tolerance)
    plan = Plan(context, tolerance)
    decks = read_lines(context, cables, "deck")
    clearances = read_lines(context, cables, "clearance")
    frames = read_frames(context, cables)
    forces = Forces(context, cables, carried, anchorages.forces())
    for cable in cables:
        cable.datum = read_datum(context, supports, cable)
    points = tuple(support_of(key, draft, cables) for key, draft in enumerate(supports))
    unit = forces.unit or context.style.bare_unit or plan.force_unit or None
    areas = plan.areas(unit or "")
    return Layout(
        version=version,
        length_unit=context.unit,
        force_unit=unit,
        supports=points,
        cables=tuple(
            cable_of(
                cable,
                points,
                carried[i],
                unit or "",
                context.unit,
                deck=decks[i],
                clearance=clearances[i],
                frame=frames.get(i),
            )
            for i, cable in enumerate(cables)
        ),
        masts=anchorages.masts(unit or ""),
        stays=anchorages.stays(unit or ""),
        plan=areas,
        plan_points=plan.points,
        text_height=text_height or plan.text_height,
        findings=tuple(context.faults.findings),
    )


def _tolerance(context: Context, supports: list[SupportDraft], cables: list[CableDraft]) -> float:
    """Give the distance within which points of the drawing are one."""
    spans = [cable.span for cable in cables if cable.span > 0]
    return context.touch * min(spans) if spans else merging_tolerance(context, supports)


def _sort(drafts: list[LoadDraft], tolerance: float) -> None:
    """Order load points from left to right, then top to bottom."""
    drafts.sort(key=lambda d: (round(d.at[0] / tolerance) if tolerance else d.at[0], -d.at[1]))


def _check_cables(context: Context, supports: list[SupportDraft], cables: list[CableDraft]) -> None:
    """Tell marks that name two cables, and spans whose unit may be wrong."""
    limits, faults = context.settings.limits, context.faults
    seen: set[str] = set()
    for cable in cables:
        if cable.mark.casefold() in seen:
            text = f"two cables are marked {cable.mark}"
            remedy = "Give each its own MARK."
            faults.error(Code.CABLE_MARK_REPEATED, text, remedy, origin=cable.origin)
        seen.add(cable.mark.casefold())
        for a, b in pairwise(cable.keys):
            width = convert(supports[b].at[0] - supports[a].at[0], context.unit, "m")
            if not limits.span_m[0] <= width <= limits.span_m[1]:
                text = (
                    f"the span {supports[a].mark} to {supports[b].mark} is {width:.4g} m: "
                    f"{context.unit} may be the wrong unit"
                )
                faults.add(
                    Severity.WARNING,
                    Code.SPAN_UNUSUAL,
                    text,
                    "Check $INSUNITS, or give --units.",
                    origin=supports[a].origin,
                    cable=cable.mark,
                )
