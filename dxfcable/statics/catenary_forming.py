"""From the one rule that governs a cable with weight and stretch to its shape.

Signs, order and units: see the package's docstring. Load points stay on their vertical lines
while forming. Each pull gives one shape (`catenary_stations`); the rule then is one equation
in the pull. A weightless cable takes its pull from `forming`, so that both agree.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from typing import TYPE_CHECKING

import numpy as np

from dxfcable.errors import RuleError
from dxfcable.model import RuleKind
from dxfcable.statics.beam import TIE, finite, simple_beam, stated
from dxfcable.statics.catenary_layout import shape_from
from dxfcable.statics.catenary_piece import flexibility
from dxfcable.statics.catenary_rules import greatest_moment, measure_of
from dxfcable.statics.catenary_stations import forces_on_stations
from dxfcable.statics.catenary_tension import pull_for_max_tension
from dxfcable.statics.forming import form
from dxfcable.statics.roots import decreasing_root

if TYPE_CHECKING:
    from numpy.typing import ArrayLike

    from dxfcable.statics.beam import Floats, SimpleBeam
    from dxfcable.statics.catenary_shape import Catenary

_SHALLOWEST = 20.0  # largest weight times span over pull: beyond it sag is 500 spans
_WIDEST = 1e30


@dataclass(frozen=True, slots=True, kw_only=True, eq=False)
class _Span:
    """What does not change while a rule is searched."""

    beam: SimpleBeam
    left: float
    right: float
    weight: float
    ea: float | None

    @property
    def rise(self) -> float:
        return self.right - self.left

    def shape(self, pull: float) -> Catenary:
        """Lay out the one cable on these stations that has a pull."""
        found = forces_on_stations(
            self.beam,
            self.rise,
            np.array([pull]),
            weight=self.weight,
            soft=flexibility(self.ea),
        )
        x = self.beam.x
        return shape_from(
            self.beam.loads,
            ((float(x[0]), self.left), (float(x[-1]), self.right)),
            found.unstressed_lengths[0],
            pull,
            found.verticals_left[0],
            weight=self.weight,
            ea=self.ea,
            x=x,
            iterations=found.iterations,
        )


def form_catenary(
    x: ArrayLike,
    loads: ArrayLike,
    y_left: float,
    y_right: float,
    kind: RuleKind,
    value: float = 0.0,
    *,
    point: tuple[float, float] | None = None,
    weight: float = 0.0,
    ea: float | None = None,
) -> Catenary:
    """Form the cable with weight and stretch that meets its one rule.

    Parameters
    ----------
    x : (n+2,) array of float
        Stations, both supports included [length], strictly increasing.
    loads : (n,) array of float
        Loads at the inner stations, down positive [force]; none at all for a cable with weight.
    y_left, y_right : float
        Ordinates of the supports [length].
    kind : RuleKind
        The rule; each holds on the exact curve, inside the pieces as well.
    value : float
        Its value [length or force]; for a low point the ordinate. Not read for THROUGH.
    point : (float, float), optional
        For THROUGH.
    weight : float
        Per unstressed length, with its factor [force/length], >= 0.
    ea : float, optional
        Axial stiffness [force]; None for inextensible.

    Returns
    -------
    Catenary
        The cable in equilibrium, with the unstressed length of every piece.

    Raises
    ------
    RuleError
        If no hanging cable meets the rule; for the largest tension `least` is the least one.
    ValueError
        If THROUGH comes without a point, or a number is out of its range.
    ConvergenceError
        If an iteration does not reach equilibrium.

    Examples
    --------
    >>> cable = form_catenary([0, 20], [], 0, 0, RuleKind.SAG, 6, weight=5.0)
    >>> round(cable.horizontal, 3), round(cable.max_tension, 3), round(cable.length, 3)
    (45.945, 75.945, 24.188)
    """
    if not finite("weight", weight) >= 0.0:
        message = f"the weight must not be negative, not {weight:g}"
        raise ValueError(message)
    span = _Span(
        beam=simple_beam(x, loads),
        left=finite("y_left", y_left),
        right=finite("y_right", y_right),
        weight=float(weight),
        ea=None if flexibility(ea) == 0.0 else ea,
    )
    if weight == 0.0:
        pull = form(x, loads, y_left, y_right, kind, value, point=point, ea=span.ea).horizontal
        return span.shape(pull)
    _refuse_if_not_hanging(span)
    if kind is RuleKind.PULL:
        return span.shape(stated("pull", value))
    if kind is RuleKind.MAX_TENSION:
        return span.shape(_pull_for_max_tension(span, stated("largest tension", value)))
    return span.shape(_pull_for(span, kind, value, point))


def _refuse_if_not_hanging(span: _Span) -> None:
    moment, scale = greatest_moment(span.beam, span.rise, span.weight)
    if moment <= TIE * scale:
        message = (
            "The simple-beam moment of these loads and the cable's weight is nowhere downward, "
            "so no hanging cable can be formed: form it under a combination that is."
        )
        raise RuleError(message)


def _pull_for_max_tension(span: _Span, limit: float) -> float:
    def tensions(pulls: Floats) -> Floats:
        return forces_on_stations(
            span.beam, span.rise, pulls, weight=span.weight, soft=flexibility(span.ea)
        ).max_tensions

    beam = span.beam
    slope = span.rise / beam.span
    force = float(np.sum(np.abs(beam.loads))) + span.weight * math.hypot(beam.span, span.rise)
    # The tension is least at weight x span / pull = 2.4 for a bare level cable. For a light one
    # it is where the pull's share of the tension, of second order between level supports and of
    # first order else, equals what the growing length weighs. The grid begins well below that.
    heavy = span.weight * beam.span
    light = min(0.05 * math.cbrt(heavy * force * force), 0.2 * math.sqrt(heavy * force))
    low = max(heavy / 12.0, light, 1e-9 * force)
    high = max(limit, 8.0 * force * (1.0 + slope * slope))
    return pull_for_max_tension(tensions, limit, low, high)


def _pull_for(
    span: _Span, kind: RuleKind, value: float, point: tuple[float, float] | None
) -> float:
    """Pull at which a quantity that falls as the pull grows has its wanted value."""
    measure = measure_of(kind, value, point, span.beam, (span.left, span.right), span.ea)
    moment, _ = greatest_moment(span.beam, span.rise, span.weight)
    least = span.weight * span.beam.span / _SHALLOWEST
    return decreasing_root(
        lambda pull: measure(span.shape(pull)),
        start=max(least, moment / (0.1 * span.beam.span)),
        low=least,
        high=moment / span.beam.span * _WIDEST,
        name=f"The rule {kind.value.replace('_', ' ')}",
    )
