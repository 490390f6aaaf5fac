"""Texts of items as a reader sees them: codes of DXF turned into characters."""

from __future__ import annotations

import re

_CODES = re.compile(r"%%([cdpCDP])|\\U\+([0-9A-Fa-f]{4})")
_NAMED = {"c": "\u00d8", "d": "\u00b0", "p": "\u00b1"}


def plain(text: str) -> str:
    r"""Turn `%%c`, `%%d`, `%%p` and `\U+XXXX` into characters.

    Examples
    --------
    >>> plain("12.5%%d") == "12.5\u00b0"
    True
    """
    return _CODES.sub(lambda m: _NAMED[m[1].lower()] if m[1] else chr(int(m[2], 16)), text)
