"""What is asked beside the drawing, and what comes of it."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import TYPE_CHECKING

from dxfcable.model import Finding, Layout, RuleKind, Severity, Solution
from dxfcable.settings import Settings

if TYPE_CHECKING:
    from dxfcable.drawing.items import Painting


@dataclass(frozen=True, slots=True, kw_only=True)
class AskedRule:
    """A governing rule as asked for beside the drawing, such as PULL "120 kN"."""

    kind: RuleKind
    text: str


@dataclass(frozen=True, slots=True, kw_only=True)
class Options:
    """What is asked beside the drawing.

    Attributes
    ----------
    settings : Settings
        The office's page.
    units, force_unit : str or None
        Length unit of the drawing and unit of bare forces; they win over the drawing.
    plot_scale : str or None
        Such as "1:100" or 1/8"=1'-0".
    rule, cable : AskedRule or None, str or None
        A governing rule for cables that have none; with `cable` for that one, whatever it has.
    under : str or None
        Combination to form under.
    loads : str or None
        Text of a load table that overrules loads of the drawing.
    fresh : bool
        Forget what the drafter moved or edited among our entities.
    combos : tuple of str
        Combinations to check, as typed.
    cut, reform : bool
        Whether the cables count as cut from now on; whether one that is cut is formed anew.
    """

    settings: Settings = field(default_factory=Settings)
    units: str | None = None
    force_unit: str | None = None
    plot_scale: str | None = None
    rule: AskedRule | None = None
    cable: str | None = None
    under: str | None = None
    loads: str | None = None
    fresh: bool = False
    combos: tuple[str, ...] = ()
    cut: bool = False
    reform: bool = False


@dataclass(frozen=True, slots=True, kw_only=True)
class AskedRevision:
    """A load change as asked for, such as hold "cut-length" and delta_t "30 K".

    Attributes
    ----------
    hold : str
        `rule` or `cut-length`.
    delta_t : str or None
        Change from the reference temperature.
    move_clamps : bool
        Whether load points drawn elsewhere are clamped there now.
    rev, description, by, date : str
        Of the revision row.
    """

    hold: str
    delta_t: str | None = None
    move_clamps: bool = False
    rev: str = ""
    description: str = ""
    by: str = ""
    date: str = ""


@dataclass(frozen=True, slots=True, kw_only=True)
class Outcome:
    """What was understood, found and decided; `removed` counts entities taken out by strip."""

    findings: tuple[Finding, ...]
    layout: Layout | None = None
    solution: Solution | None = None
    painting: Painting | None = None
    layers: tuple[str, ...] = ()
    removed: int = 0

    @property
    def exit_code(self) -> int:
        """0 done, 1 something that an engineer must see, 2 refused."""
        found = {finding.severity for finding in self.findings}
        return 2 if Severity.ERROR in found else int(Severity.WARNING in found)
