"""Forces in masts, stays and anchors: all cables at one support summed first."""

from __future__ import annotations

import math
from typing import TYPE_CHECKING

from dxfcable.errors import LayoutError
from dxfcable.model import (
    Anchor,
    Anchorage,
    AnchorForce,
    Finding,
    FormedCable,
    Layout,
    Mast,
    Origin,
    Point,
    Severity,
    Stay,
    Support,
)
from dxfcable.statics.combinations import combine
from dxfcable.statics.joints import Joint, anchor_force, joint_equilibrium

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.settings import Settings
    from dxfcable.statics.combinations import Combination

_SAME_FOOT = 1e-9


def anchorages(
    layout: Layout,
    formed: Sequence[FormedCable],
    combinations: Sequence[Combination],
    settings: Settings,
) -> tuple[tuple[Anchorage, ...], list[Finding]]:
    """Find the forces at each support that has a mast or a stay.

    Parameters
    ----------
    formed : sequence of FormedCable
        One for each cable of the layout, in its order.
    combinations : sequence of Combination
        What each was formed under; loads at a support's x are combined alike.

    Returns
    -------
    tuple
        Anchorages in the order of the supports, and what has to be said of them.
    """
    result: list[Anchorage] = []
    findings: list[Finding] = []
    for support in layout.supports:
        masts = [m for m in layout.masts if m.support == support.key]
        stays = [s for s in layout.stays if s.support == support.key]
        if not masts and not stays:
            continue
        if len(masts) > 1:
            findings.append(
                _finding(
                    "two-masts",
                    Severity.ERROR,
                    f"support {support.mark} at ({support.x:g}, {support.y:g}) has "
                    f"{len(masts)} masts",
                    masts[1].origin,
                    "Draw one mast from it.",
                )
            )
            continue
        joint = _joint(layout, formed, combinations, support, masts, stays, findings)
        if joint is not None:
            result.append(_anchorage(support, masts, stays, joint, settings, findings))
    return tuple(result), findings


def _joint(
    layout: Layout,
    formed: Sequence[FormedCable],
    combinations: Sequence[Combination],
    support: Support,
    masts: Sequence[Mast],
    stays: Sequence[Stay],
    findings: list[Finding],
) -> Joint | None:
    """Solve one support."""
    pulls: list[Point] = []
    load = 0.0
    for cable, result, combination in zip(layout.cables, formed, combinations, strict=True):
        for reaction in result.reactions:
            if reaction.support == support.key:
                is_left = reaction is result.reactions[0]
                across = reaction.horizontal if is_left else -reaction.horizontal
                pulls.append((across, -reaction.vertical))
        own = [point.cases for key, point in cable.support_loads if key == support.key]
        for cases in own:
            known = [pair for pair in cases if pair[0] in dict(combination.terms)]
            load += math.fsum(combine([known], combination).tolist())
    head = (support.x, support.y)
    try:
        return joint_equilibrium(
            pulls,
            load=load,
            mast=_down(head, masts[0].foot) if masts else None,
            stays=[_down(head, stay.foot) for stay in stays],
            shares=[stay.anchor.share if stay.anchor else None for stay in stays],
        )
    except (LayoutError, ValueError) as error:
        origin = stays[-1].origin if stays else masts[0].origin
        findings.append(
            _finding("joint", Severity.ERROR, f"support {support.mark}: {error}", origin)
        )
        return None


def _anchorage(
    support: Support,
    masts: Sequence[Mast],
    stays: Sequence[Stay],
    joint: Joint,
    settings: Settings,
    findings: list[Finding],
) -> Anchorage:
    """Gather one support's result and what has to be said of it."""
    _remarks(support, masts, stays, joint, findings)
    return Anchorage(
        support=support.key,
        mark=support.mark,
        at=(support.x, support.y),
        mast=joint.mast,
        stays=joint.stays,
        anchors=tuple(_anchors(support, masts, stays, joint, settings, findings)),
        head_shear=joint.head_shear,
        base_moment=joint.base_moment,
        residual=joint.residual,
        sides=joint.sides,
        mast_foot=masts[0].foot if masts else None,
        stay_feet=tuple(stay.foot for stay in stays),
    )


def _anchors(
    support: Support,
    masts: Sequence[Mast],
    stays: Sequence[Stay],
    joint: Joint,
    settings: Settings,
    findings: list[Finding],
) -> list[AnchorForce]:
    """Sum the members at each foot, and hold the block's factors against what is asked."""
    head = (support.x, support.y)
    members: list[tuple[Point, Anchor | None, Point, Origin]] = [
        (stay.foot, stay.anchor, force, stay.origin)
        for stay, force in zip(stays, joint.stay_feet, strict=True)
    ]
    if masts and masts[0].anchor is not None and joint.mast_foot is not None:
        members.append((masts[0].foot, masts[0].anchor, joint.mast_foot, masts[0].origin))
    groups: list[list[tuple[Point, Anchor | None, Point, Origin]]] = []
    for member in members:
        reach = math.dist(head, member[0])
        near = [g for g in groups if math.dist(g[0][0], member[0]) <= _SAME_FOOT * reach]
        if near:
            near[0].append(member)
        else:
            groups.append([member])
    result = []
    for group in groups:
        foot, anchor, _, origin = group[0]
        pull = (math.fsum(m[2][0] for m in group), math.fsum(m[2][1] for m in group))
        mu = anchor.mu if anchor and anchor.mu is not None else settings.anchor.mu or None
        force = anchor_force(
            pull,
            _down(head, foot),
            weight=anchor.weight if anchor else None,
            mu=mu,
            mark=anchor.mark if anchor else "",
            at=foot,
        )
        result.append(force)
        if anchor is not None:
            _factors(anchor, force, settings, origin, findings)
    return result


def _factors(
    anchor: Anchor, force: AnchorForce, settings: Settings, origin: Origin, findings: list[Finding]
) -> None:
    """Warn of an anchor whose factor is not reached."""
    asked = (
        ("sliding", force.sliding_factor, anchor.fs_slide, settings.anchor.sliding),
        ("uplift", force.uplift_factor, anchor.fs_uplift, settings.anchor.uplift),
    )
    for name, reached, stated, default in asked:
        wanted = stated if stated is not None else default
        if reached is not None and wanted and reached < wanted:
            findings.append(
                _finding(
                    "anchor-factor",
                    Severity.WARNING,
                    f"anchor {anchor.mark} at ({force.at[0]:g}, {force.at[1]:g}): factor on "
                    f"{name} {reached:.3f} is under the {wanted:g} asked for",
                    anchor.origin if anchor.origin.line else origin,
                )
            )


def _remarks(
    support: Support,
    masts: Sequence[Mast],
    stays: Sequence[Stay],
    joint: Joint,
    findings: list[Finding],
) -> None:
    """Say what an engineer must see at a support."""
    where = f"support {support.mark} at ({support.x:g}, {support.y:g})"
    said = []
    if masts and not stays and joint.head_shear:
        said.append(
            (
                "mast-without-stay",
                f"has a mast and no stay: head shear {joint.head_shear:.4g}, base moment "
                f"{joint.base_moment:.4g}",
            )
        )
    if stays and not masts and any(joint.residual):
        x, y = joint.residual
        said.append(
            ("stay-without-mast", f"has a stay and no mast: ({x:.4g}, {y:.4g}) is left over")
        )
    if joint.stay_parallel_to_mast:
        said.append(("stay-parallel", "has a stay parallel to its mast, which carries nothing"))
    if joint.stay_in_compression:
        said.append(("stay-compressed", "has a stay in compression"))
    if joint.mast_in_tension:
        said.append(("mast-in-tension", "has a mast in tension"))
    origin = stays[0].origin if stays else masts[0].origin
    findings += [_finding(code, Severity.WARNING, f"{where} {text}", origin) for code, text in said]


def _down(head: Point, foot: Point) -> Point:
    """Return the vector from head to foot."""
    return foot[0] - head[0], foot[1] - head[1]


def _finding(code: str, severity: Severity, text: str, origin: Origin, remedy: str = "") -> Finding:
    """Make a finding about a drawn member."""
    return Finding(
        code=code,
        severity=severity,
        text=text,
        remedy=remedy,
        handle=origin.handle,
        line=origin.line,
        layer=origin.layer or None,
        at=origin.at,
    )
