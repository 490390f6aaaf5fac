"""Cables over stays and masts that give: the heads stand where all forces there balance.

Signs, order and units: see the package's docstring. A mast is pinned at its base; one without
stretch keeps its head on the circle about it. Stays pull and do not push. Temperature acts on
the cables only: masts and stays keep their unstressed lengths in every state.
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Any, TypeAlias

import numpy as np

from dxfcable.statics.beam import frozen
from dxfcable.statics.catenary import respond
from dxfcable.statics.heads_layout import check, rows
from dxfcable.statics.heads_members import members_of
from dxfcable.statics.heads_search import settle
from dxfcable.statics.heads_spans import span_of
from dxfcable.statics.heads_system import System

if TYPE_CHECKING:
    from collections.abc import Sequence

    from numpy.typing import ArrayLike, NDArray

    from dxfcable.statics.beam import Floats
    from dxfcable.statics.catenary import Response
    from dxfcable.statics.heads_layout import CableChain, Head
    from dxfcable.statics.heads_members import Members
    from dxfcable.statics.heads_search import Found

    Indices: TypeAlias = NDArray[np.intp]


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class HeadsResponse:
    """Cables and heads in their load states; arrays are read only, one row a state.

    Where the heads find no equilibrium, every array of theirs, and of the cables that end at
    them, is not-a-number in that state. Where only a cable has no determinate shape, since it
    hangs idle, only that cable's arrays are.

    Attributes
    ----------
    cables : tuple of Response
        In the order given.
    supports : (s, k, 2) array
        Where all supports stand, heads included [length].
    movements : (s, h, 2) array
        Of the heads from where they were formed [length].
    masts : (s, h) array
        Axial forces, compression negative [force].
    stays : tuple of (s, m) array
        Tensions of the stays of each head [force], 0 where they are slack.
    slack_stays : tuple of (s, m) array of bool
        Which stays are slack; True nowhere in a state without equilibrium.
    mast_feet : (s, h, 2) array
        Force of each mast on its base, right and up positive [force].
    stay_feet : tuple of (s, m, 2) array
        Force of each stay on its foot [force].
    residuals : (s,) array
        Force left over at the worst head, over the sum of the forces there.
    iterations : (s,) array of int
        Evaluations of the search for the heads, after the first.
    faults : tuple of str
        Why the heads or a cable of a state are not determinate, "" where all are.
    heads_found : (s,) array of bool
        Whether the heads stand in a stable equilibrium.
    """

    cables: tuple[Response, ...]
    supports: Floats
    movements: Floats
    masts: Floats
    stays: tuple[Floats, ...]
    slack_stays: tuple[NDArray[np.bool_], ...]
    mast_feet: Floats
    stay_feet: tuple[Floats, ...]
    residuals: Floats
    iterations: Indices
    faults: tuple[str, ...]
    heads_found: NDArray[np.bool_]


def respond_with_heads(
    cables: Sequence[CableChain],
    supports: ArrayLike,
    heads: Sequence[Head] = (),
    head_loads: ArrayLike | None = None,
) -> HeadsResponse:
    """Solve cables over supports some of which are heads of masts, in all load states at once.

    Parameters
    ----------
    cables : sequence of CableChain
        Several may end at one support: cables over a fixed saddle. Give only what hangs
        together in one call, since heads that find no equilibrium take all cables of theirs
        with them.
    supports : (k, 2) or (s, k, 2) array of float
        Where the supports are held [length]; places that are heads are not read.
    heads : sequence of Head
        The supports that give.
    head_loads : (h,) or (s, h) array of float, optional
        Vertical loads at the heads themselves, down positive [force].

    Returns
    -------
    HeadsResponse
        All states; those without an equilibrium carry their reason.

    Raises
    ------
    ValueError
        If shapes do not match or a number is out of its range.
    ConvergenceError
        If a cable that has a shape does not reach equilibrium.

    Notes
    -----
    Newton's method on the potential energy, from the heads as formed (`heads_search`); the
    stiffness of the cables is the inverse of their flexibility, exact for the elastic catenary.
    An equilibrium counts only where it is stable. Limits: plane, members without weight,
    straight, pinned at both ends.

    Examples
    --------
    >>> from dxfcable.statics.heads_layout import CableChain, Head, StayMember, unstressed_from
    >>> stay = unstressed_from((0, 6), (-8, 0), 50.0, 9000.0)
    >>> head = Head(support=0, at=(0, 6), foot=(0, 0), stays=(
    ...     StayMember(foot=(-8, 0), unstressed_length=stay, ea=9000.0),))
    >>> piece = unstressed_from((0, 6), (10, 3), 40.0 * 1.09**0.5, 9000.0)
    >>> cable = CableChain(
    ...     left=0, right=1, unstressed_lengths=[piece, piece], loads=[[24], [36]], ea=9000.0)
    >>> found = respond_with_heads([cable], [(0, 6), (20, 6)], [head])
    >>> found.movements[:, 0, 0].round(4).tolist()
    [0.0, 0.0307]
    """
    places = np.asarray(supports, dtype=np.float64)
    head_forces = np.zeros(len(heads)) if head_loads is None else np.asarray(head_loads, float)
    if places.ndim not in (2, 3):
        message = f"supports must be pairs of coordinates, not of shape {places.shape}"
        raise ValueError(message)
    check(cables, heads, places.shape[-2])
    count = _state_count(cables, places, head_forces)
    drawn = rows("supports", places, (count, places.shape[-2], 2)).copy()
    for head in heads:
        drawn[:, head.support] = head.at
    if not heads:
        return _held(cables, drawn)
    spots = {head.support: k for k, head in enumerate(heads)}
    spans = [
        span_of(cable, drawn[:, [cable.left, cable.right]], spots)
        for cable in cables
        if cable.left in spots or cable.right in spots
    ]
    system = System(
        members=members_of(heads),
        spans=spans,
        loads=rows("head_loads", head_forces, (count, len(heads))),
        names=tuple(head.called for head in heads),
    )
    return _response(cables, drawn, spots, system.members, settle(system))


def _state_count(cables: Sequence[CableChain], places: Floats, head_forces: Floats) -> int:
    """Rows of whatever has an axis of states."""
    counts = {1}
    if places.ndim == 3:
        counts.add(len(places))
    if head_forces.ndim == 2:
        counts.add(len(head_forces))
    for cable in cables:
        for values, plain in (
            (cable.unstressed_lengths, 1),
            (cable.loads, 1),
            (cable.weight_factors, 0),
            (cable.delta_t, 0),
        ):
            if np.ndim(values) > plain:
                counts.add(len(np.asarray(values)))
    return max(counts)


def _response(
    cables: Sequence[CableChain],
    drawn: Floats,
    spots: dict[int, int],
    members: Members,
    found: Found,
) -> HeadsResponse:
    """Lay out cables and members with the heads where they were found."""
    lost = np.array([bool(reason) for reason in found.reasons])
    stand = members.stand(found.turned)
    pulls = members.pulls(stand.moved)
    standing = drawn.copy()
    for support, head in spots.items():
        standing[:, support] += stand.moved[:, head]
    answers = tuple(_cable(c, drawn, spots, stand.moved, found.reasons) for c in cables)
    slack = members.slack(pulls.elongations) & ~lost[:, np.newaxis]
    each = [np.flatnonzero(members.owner == head) for head in range(len(spots))]
    stay_feet = pulls.tensions[..., np.newaxis] * pulls.lines
    found.iterations.flags.writeable = False
    return HeadsResponse(
        cables=answers,
        supports=frozen(standing),
        movements=frozen(stand.moved),
        masts=frozen(found.masts),
        stays=tuple(frozen(pulls.tensions[:, some]) for some in each),
        slack_stays=tuple(_fixed(slack[:, some]) for some in each),
        mast_feet=frozen(found.masts[..., np.newaxis] * stand.radial),
        stay_feet=tuple(frozen(stay_feet[:, some]) for some in each),
        residuals=frozen(found.residuals),
        iterations=found.iterations,
        faults=_first_faults(found.reasons, answers),
        heads_found=_fixed(~lost),
    )


def _held(cables: Sequence[CableChain], drawn: Floats) -> HeadsResponse:
    """Answer of cables between supports that do not move."""
    count = len(drawn)
    nothing = np.zeros((count, 0, 2))
    answers = tuple(_cable(cable, drawn, {}, nothing, ("",) * count) for cable in cables)
    iterations = np.zeros(count, dtype=np.intp)
    iterations.flags.writeable = False
    return HeadsResponse(
        cables=answers,
        supports=frozen(drawn),
        movements=frozen(nothing),
        masts=frozen(np.zeros((count, 0))),
        stays=(),
        slack_stays=(),
        mast_feet=frozen(np.zeros((count, 0, 2))),
        stay_feet=(),
        residuals=frozen(np.zeros(count)),
        iterations=iterations,
        faults=_first_faults(("",) * count, answers),
        heads_found=_fixed(np.ones(count, dtype=np.bool_)),
    )


def _cable(
    cable: CableChain,
    drawn: Floats,
    spots: dict[int, int],
    moved: Floats,
    reasons: tuple[str, ...],
) -> Response:
    """Hang one cable between its ends, in coordinates of its own that keep their digits."""
    origin = drawn[:, cable.left]
    ends = np.stack([np.zeros_like(origin), drawn[:, cable.right] - origin], axis=1)
    lost = np.zeros(len(drawn), dtype=np.bool_)
    for place, support in enumerate((cable.left, cable.right)):
        if support in spots:
            lost |= np.array([bool(reason) for reason in reasons])
            ends[:, place] += np.where(lost[:, np.newaxis], 0.0, moved[:, spots[support]])
    answer = respond(
        cable.unstressed_lengths,
        cable.weight,
        cable.loads,
        ends,
        ea=cable.ea,
        weight_factors=cable.weight_factors,
        alpha=cable.alpha,
        delta_t=cable.delta_t,
    )
    return _without(
        replace(answer, x=frozen(answer.x + origin[:, :1]), y=frozen(answer.y + origin[:, 1:])),
        lost,
        reasons,
    )


_GIVEN = ("loads", "unstressed_lengths", "weights", "thermals")


def _without(answer: Response, lost: NDArray[np.bool_], reasons: tuple[str, ...]) -> Response:
    """Take out states whose heads have no equilibrium: no shape is made up."""
    if not np.any(lost):
        return answer
    values: dict[str, Any] = {}
    for name in answer.__dataclass_fields__:
        value = getattr(answer, name)
        if isinstance(value, np.ndarray) and value.dtype == np.float64 and name not in _GIVEN:
            values[name] = value.copy()
            values[name][lost] = np.nan
            frozen(values[name])
    iterations = np.where(lost, -1, answer.iterations)
    iterations.flags.writeable = False
    faults = tuple(
        reason if gone else fault
        for reason, gone, fault in zip(reasons, lost.tolist(), answer.faults, strict=True)
    )
    return replace(answer, **values, iterations=iterations, faults=faults)


def _first_faults(reasons: tuple[str, ...], cables: Sequence[Response]) -> tuple[str, ...]:
    """Of each state: why its heads, else why its first cable without a shape, has none."""
    each = zip(reasons, *(cable.faults for cable in cables), strict=True)
    return tuple(next((reason for reason in row if reason), "") for row in each)


def _fixed(values: NDArray[np.bool_]) -> NDArray[np.bool_]:
    values.flags.writeable = False
    return values
