"""Hypothesis strategies: drawings, layouts, and the edits of other hands."""

from __future__ import annotations

from typing import TYPE_CHECKING, NamedTuple

from hypothesis import strategies as st

from tests.generated import edits as hand
from tests.generated.cable import CableOptions
from tests.generated.drawing import drawing
from tests.generated.quirks import Quirk
from tests.generated.writing import VERSIONS, Codes

if TYPE_CHECKING:
    from collections.abc import Callable

    from hypothesis.strategies import SearchStrategy

NEWLINES = (b"\n", b"\r\n")


class Edit(NamedTuple):
    """A named edit of a drawing's bytes."""

    name: str
    apply: Callable[[bytes], bytes]

    def __repr__(self) -> str:
        return self.name


@st.composite
def layouts(draw: st.DrawFn, *, ruled: bool | None = True) -> CableOptions:
    """Draw a cable layout that has a solution; `ruled` None leaves the rule to chance."""
    span = draw(st.sampled_from((12.0, 24.0, 36.5, 80.0)))
    origin = draw(st.sampled_from(((0.0, 0.0), (-7.25, 3.5), (1000.0, 250.0), (435000.5, 5.1e6))))
    count = draw(st.integers(2, 5))
    value = st.integers(4, 200).map(lambda n: f"{n / 4:g} kN")
    has_rule = draw(st.booleans()) if ruled is None else ruled
    sag = span / draw(st.sampled_from((8, 10, 12)))
    return CableOptions(
        origin=origin,
        span=span,
        rise=draw(st.sampled_from((0.0, 1.0, -0.75))),
        loads=tuple(draw(st.lists(value, min_size=count, max_size=count))),
        rule=("SAG", f"{sag:.4f} m") if has_rule else None,
        height=0.01 * span,
    )


@st.composite
def drawings(
    draw: st.DrawFn,
    *,
    versions: tuple[str, ...] = VERSIONS,
    without: frozenset[Quirk] = frozenset(),
    layout: SearchStrategy[CableOptions | None] | None = None,
) -> bytes:
    """Draw a drawing: any version, any habit, up to five quirks, and a cable.

    Parameters
    ----------
    versions : tuple of str
        Versions to choose from.
    without : frozenset of Quirk
        Quirks that do not occur.
    layout : strategy, optional
        Of the cable; by default one with a rule; `st.none()` for no cable.
    """
    allowed = sorted(set(Quirk) - without, key=lambda q: q.name)
    quirks = draw(st.frozensets(st.sampled_from(allowed), max_size=5))
    return drawing(
        draw(st.sampled_from(versions)),
        newline=draw(st.sampled_from(NEWLINES)),
        codes=draw(st.sampled_from(Codes)),
        handles=draw(st.booleans()),
        seed=draw(st.integers(0, 2**16)),
        quirks=quirks,
        layout=draw(layouts() if layout is None else layout),
        entities=draw(st.integers(0, 14)),
    )


@st.composite
def edits(draw: st.DrawFn) -> Edit:
    """Draw an edit by another program that keeps what it does not know and moves nothing."""
    seed = draw(st.integers(0, 99))
    start = draw(st.sampled_from((0x100, 0x1000, 0xABC000)))
    return draw(
        st.sampled_from(
            (
                Edit("renumber_handles", lambda data: hand.renumber_handles(data, start)),
                Edit("shuffle_entities", lambda data: hand.shuffle_entities(data, seed)),
                Edit("swap_line_ends", hand.swap_line_ends),
                Edit("round_coordinates", hand.round_coordinates),
            )
        )
    )
