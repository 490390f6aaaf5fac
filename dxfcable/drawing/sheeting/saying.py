"""Words that several blocks of a sheet use."""

from __future__ import annotations

import re
from typing import TYPE_CHECKING

from dxfcable.drawing.painting.schedule_tables import rule_words
from dxfcable.drawing.painting.sketch import shown
from dxfcable.recorded import CUT

if TYPE_CHECKING:
    from dxfcable.drawing.painting.elevation_view import View

UNCASED = "load"  # name of the one case of loads that state none
_MARK, _COMBINATION = 20, 60  # characters shown of a mark, of a combination
_CHARACTERS = re.compile(r"\\U\+[0-9A-Fa-f]{4}|%%[cdpCDP]|.", re.DOTALL)


def characters(text: str) -> list[str]:
    r"""Split a text as it is shown into characters, a code being one.

    Examples
    --------
    >>> characters(r"a\U+0416b")
    ['a', '\\U+0416', 'b']
    """
    return _CHARACTERS.findall(text)


def brief(text: str, most: int = _MARK) -> str:
    """Give a text as it is shown, cut where it is too long for a title or a label."""
    found = characters(shown(text))
    return "".join(found) if len(found) <= most else "".join(found[: most - 2]) + ".."


def under_words(view: View) -> str:
    """Say the combination that a cable was formed under."""
    under = view.formed.under
    return "UNDER THE LOADS DRAWN" if under == UNCASED else f"UNDER {brief(under, _COMBINATION)}"


def state_words(view: View) -> str:
    """Say the state that a cable is shown in, with its level."""
    formed = view.formed
    assumed = ", ASSUMED" if formed.level_is_assumed else ""
    change = f", {formed.delta_t:+.6g} K" if formed.delta_t else ""
    state = f"{formed.status.upper()} {under_words(view)}{change}"
    return f"{state} ({formed.level.upper()}{assumed})"


def held_words(view: View) -> str:
    """Say what was held: the rule, or what was cut and can no longer change."""
    if view.formed.status == CUT:
        return "UNSTRESSED LENGTH OF EACH PIECE"
    return rule_words(view)
