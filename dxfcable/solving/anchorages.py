"""Forces in masts, stays and anchors: all cables at one support summed first."""

from __future__ import annotations

import math
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING

from dxfcable.errors import LayoutError
from dxfcable.model import (
    Anchor,
    Anchorage,
    AnchorForce,
    Finding,
    Layout,
    Mast,
    Origin,
    Point,
    Reaction,
    Severity,
    Stay,
    Support,
)
from dxfcable.statics.combinations import combine
from dxfcable.statics.joints import Joint, anchor_force, joint_equilibrium

if TYPE_CHECKING:
    from collections.abc import Mapping, Sequence

    from dxfcable.settings import Settings
    from dxfcable.statics.combinations import Combination

_SAME_FOOT = 1e-9


@dataclass(frozen=True, slots=True, kw_only=True)
class MovedHead:
    """A mast's head in a state: where it stands, and how its stays share the pull.

    `shares` are fractions of the stays' summed horizontal component.
    """

    at: Point
    shares: tuple[float, ...]


def anchorages(
    layout: Layout,
    reactions: Sequence[Sequence[Reaction]],
    loads: Mapping[int, float],
    settings: Settings,
    *,
    heads: Mapping[int, MovedHead] | None = None,
    state: str = "",
) -> tuple[tuple[Anchorage, ...], list[Finding]]:
    """Find the forces at each support that has a mast or a stay.

    Parameters
    ----------
    reactions : sequence of sequences of Reaction
        Of each cable, left to right.
    loads : mapping of int to float
        Loads at a support itself by its key, down positive [force].
    heads : mapping of int to MovedHead, optional
        Supports that do not stand where they are drawn, by key.
    state : str
        Combination that findings name, "" for the formed state.

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
        place = _Place(support=support, masts=masts, stays=stays, state=state)
        if len(masts) > 1:
            text = f"{place} has {len(masts)} masts"
            remedy = "Draw one mast from it."
            findings.append(_finding("two-masts", Severity.ERROR, text, masts[1].origin, remedy))
            continue
        head = (heads or {}).get(support.key)
        if head is not None:
            place = replace(place, support=replace(support, x=head.at[0], y=head.at[1]))
        joint = _joint(place, reactions, loads.get(support.key, 0.0), head, findings)
        if joint is not None:
            result.append(_anchorage(place, joint, settings, findings))
    return tuple(result), findings


def loads_at_supports(layout: Layout, combinations: Sequence[Combination]) -> dict[int, float]:
    """Combine the loads that stand at supports and not on a cable.

    Parameters
    ----------
    combinations : sequence of Combination
        One a cable; a case that a combination does not name counts as zero.

    Returns
    -------
    dict of int to float
        Down positive [force], by the support's key.
    """
    result: dict[int, list[float]] = {}
    for cable, combination in zip(layout.cables, combinations, strict=True):
        for key, point in cable.support_loads:
            result.setdefault(key, []).extend(combine([point.cases], combination).tolist())
    return {key: math.fsum(values) for key, values in result.items()}


@dataclass(frozen=True, slots=True, kw_only=True)
class _Place:
    """A support with its members, and the state that is looked at."""

    support: Support
    masts: Sequence[Mast]
    stays: Sequence[Stay]
    state: str

    def __str__(self) -> str:
        """Name the support and the state for a finding."""
        under = f", under {self.state}," if self.state else ""
        return f"support {self.support.mark} at ({self.support.x:g}, {self.support.y:g}){under}"

    @property
    def head(self) -> Point:
        """Where the members meet."""
        return self.support.x, self.support.y


def _joint(
    place: _Place,
    reactions: Sequence[Sequence[Reaction]],
    load: float,
    moved: MovedHead | None,
    findings: list[Finding],
) -> Joint | None:
    """Solve one support."""
    pulls: list[Point] = []
    for of_cable in reactions:
        for reaction in of_cable:
            if reaction.support == place.support.key:
                is_left = reaction is of_cable[0]
                across = reaction.horizontal if is_left else -reaction.horizontal
                pulls.append((across, -reaction.vertical))
    stays, masts = place.stays, place.masts
    shares: list[float | None] = [stay.anchor.share if stay.anchor else None for stay in stays]
    if moved is not None and len(stays) > 1:
        shares = list(moved.shares)
    try:
        return joint_equilibrium(
            pulls,
            load=load,
            mast=_down(place.head, masts[0].foot) if masts else None,
            stays=[_down(place.head, stay.foot) for stay in stays],
            shares=shares,
        )
    except (LayoutError, ValueError) as error:
        origin = stays[-1].origin if stays else masts[0].origin
        findings.append(_finding("joint", Severity.ERROR, f"{place}: {error}", origin))
        return None


def _anchorage(
    place: _Place, joint: Joint, settings: Settings, findings: list[Finding]
) -> Anchorage:
    """Gather one support's result and what has to be said of it."""
    _remarks(place, joint, findings)
    support, masts, stays = place.support, place.masts, place.stays
    return Anchorage(
        support=support.key,
        mark=support.mark,
        at=place.head,
        mast=joint.mast,
        stays=joint.stays,
        anchors=tuple(_anchors(place, joint, settings, findings)),
        head_shear=joint.head_shear,
        base_moment=joint.base_moment,
        residual=joint.residual,
        sides=joint.sides,
        mast_foot=masts[0].foot if masts else None,
        stay_feet=tuple(stay.foot for stay in stays),
    )


def _anchors(
    place: _Place, joint: Joint, settings: Settings, findings: list[Finding]
) -> list[AnchorForce]:
    """Sum the members at each foot, and hold the block's factors against what is asked."""
    head, masts, stays = place.head, place.masts, place.stays
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
            _factors(anchor, force, settings, origin, place.state, findings)
    return result


def _factors(
    anchor: Anchor,
    force: AnchorForce,
    settings: Settings,
    origin: Origin,
    state: str,
    findings: list[Finding],
) -> None:
    """Warn of an anchor whose factor is not reached."""
    asked = (
        ("sliding", force.sliding_factor, anchor.fs_slide, settings.anchor.sliding),
        ("uplift", force.uplift_factor, anchor.fs_uplift, settings.anchor.uplift),
    )
    under = f" under {state}" if state else ""
    for name, reached, stated, default in asked:
        wanted = stated if stated is not None else default
        if reached is not None and wanted and reached < wanted:
            findings.append(
                _finding(
                    "anchor-factor",
                    Severity.WARNING,
                    f"anchor {anchor.mark} at ({force.at[0]:g}, {force.at[1]:g}): factor on "
                    f"{name}{under} is {reached:.3f}, less than the {wanted:g} asked for",
                    anchor.origin if anchor.origin.line else origin,
                )
            )


def _remarks(place: _Place, joint: Joint, findings: list[Finding]) -> None:
    """Say what an engineer must see at a support."""
    masts, stays = place.masts, place.stays
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
    findings += [_finding(code, Severity.WARNING, f"{place} {text}", origin) for code, text in said]


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
