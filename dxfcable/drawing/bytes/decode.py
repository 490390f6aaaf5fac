"""How the text of a drawing is encoded, and layer names as a person reads them."""

from __future__ import annotations

import codecs
import re

UTF8_SINCE = "AC1021"  # R2007: UTF-8 whatever $DWGCODEPAGE says
_ESCAPE = re.compile(r"\\U\+([0-9A-Fa-f]{4})")
_NAMES = {"932": "cp932", "936": "gbk", "949": "cp949", "950": "big5", "874": "cp874"}


def is_release(version: str) -> bool:
    """Tell whether a $ACADVER is of the AC10nn kind that orders by its digits."""
    return len(version) == 6 and version.startswith("AC1") and version[3:].isdigit()


def codec(version: str, code_page: str) -> tuple[str, str]:
    """Choose the codec of a drawing.

    Returns
    -------
    tuple of str
        Python's name of the codec, and the declared page where it is not known, else "".
    """
    if is_release(version) and version >= UTF8_SINCE:
        return "utf-8", ""
    page = code_page.strip().lower()
    if not page:
        return "cp1252", ""
    if page == "mac-roman":
        return "mac-roman", ""
    digits = re.search(r"(\d+)$", page)
    if digits and page.startswith(("ansi", "dos", "cp")):
        name = _NAMES.get(digits[1], f"cp{digits[1]}")
        try:
            codecs.lookup(name)
        except LookupError:
            return "cp1252", code_page
        return name, ""
    return "cp1252", code_page


def decode(raw: bytes, encoding: str) -> str:
    r"""Decode bytes so that they can be encoded again, `\U+XXXX` left as typed."""
    return raw.decode(encoding, errors="surrogateescape")


def unescape(text: str) -> str:
    r"""Turn `\U+XXXX` into its character."""
    return _ESCAPE.sub(lambda found: chr(int(found[1], 16)), text)


def layer_key(raw: bytes, encoding: str) -> str:
    """Return a layer name in the form that is compared: decoded, without regard to case."""
    return unescape(decode(raw, encoding)).strip().casefold()


def escape(text: str) -> str:
    r"""Write text in ASCII only: degree, diameter, plus-minus as %%d, %%c, %%p, else `\U+XXXX`."""
    known = {"\u00b0": "%%d", "\u00d8": "%%c", "\u2300": "%%c", "\u00b1": "%%p"}
    return "".join(
        c if " " <= c <= "~" else known.get(c, f"\\U+{ord(c) & 0xFFFF:04X}") for c in text
    )


def plain(text: str) -> str:
    """Return text as a person reads it, for comparing what two programs wrote."""
    text = unescape(text)
    for code, char in (("d", "\u00b0"), ("c", "\u00d8"), ("p", "\u00b1")):
        text = text.replace(f"%%{code}", char).replace(f"%%{code.upper()}", char)
    return text
