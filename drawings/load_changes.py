"""The load changes that two of the demonstration drawings go through, as asked of dxfcable."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

from drawings import gulch_pipe, weir_footbridge
from dxfcable.job import AskedRevision, Options, revise_bytes, solve_bytes

if TYPE_CHECKING:
    from dxfcable.job import Outcome

HERE = Path(__file__).resolve().parent


@dataclass(frozen=True, slots=True, kw_only=True)
class LoadChange:
    """How a drawing is issued, and how it is revised then.

    Attributes
    ----------
    combos : tuple of str
        Combinations to check.
    is_cut : bool
        Whether the cable is cut when the drawing is issued.
    loads : str
        Name of the load table beside the drawings.
    """

    combos: tuple[str, ...]
    is_cut: bool
    loads: str
    revision: AskedRevision

    def issue(self, drawing: bytes) -> tuple[bytes, Outcome]:
        """Solve the drawing as drawn."""
        return solve_bytes(drawing, Options(combos=self.combos, cut=self.is_cut))

    def revise(self, issued: bytes) -> tuple[bytes, Outcome]:
        """Answer the load change from the issued drawing."""
        loads = (HERE / self.loads).read_text(encoding="utf-8")
        return revise_bytes(issued, Options(loads=loads), self.revision)


CHANGES = {
    "weir_footbridge.dxf": LoadChange(
        combos=weir_footbridge.COMBINATIONS,
        is_cut=True,
        loads="loads_weir_footbridge.csv",
        revision=AskedRevision(
            hold="cut-length", rev="A", description="WATER MAIN UNDER LEFT HALF OF DECK"
        ),
    ),
    "gulch_pipe.dxf": LoadChange(
        combos=gulch_pipe.COMBINATIONS,
        is_cut=False,
        loads="loads_gulch_pipe.csv",
        revision=AskedRevision(hold="rule", rev="1", description="DENSER TAILINGS"),
    ),
}
