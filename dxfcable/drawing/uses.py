"""Who names a table row: entities by layer, linetype, text style or application."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.cut import encoding_of
from dxfcable.drawing.bytes.decode import layer_key
from dxfcable.drawing.bytes.pairs import distinct, find_tags, skip_prologue, texts

if TYPE_CHECKING:
    from collections.abc import Iterable, Iterator

    from numpy.typing import NDArray

    from dxfcable.drawing.bytes.pairs import Tags
    from dxfcable.drawing.bytes.scan import Scan

Row = tuple[str, str]  # table and name
_CODE = {"LAYER": 8, "LTYPE": 6, "STYLE": 7, "APPID": 1001}
_SCANNED = frozenset({"LAYER", "APPID"})
_WIDTH = 32
_AT_ONCE = 1 << 15


def row_key(name: str) -> str:
    """Return a row's name in the form that is compared."""
    return layer_key(name.encode("utf-8", "surrogateescape"), "utf-8")


def users(
    drawing: Scan, rows: Iterable[Row], without: frozenset[int] = frozenset()
) -> dict[Row, int]:
    """Find the first record that names each row.

    Parameters
    ----------
    rows : iterable of (str, str)
        Table and name.
    without : frozenset of int
        Records that do not count.

    Returns
    -------
    dict
        Row to record; a row that nobody names is missing.
    """
    wanted: dict[tuple[int, str], Row] = {}
    for table, name in rows:
        wanted[(_CODE[table], row_key(name))] = (table, name)
    if not wanted:
        return {}
    tags = drawing.tags
    if any(table not in _SCANNED for table, _ in wanted.values()):
        tags = find_tags(drawing.data, _CODE.values(), skip_prologue(drawing.data))
    return _first(drawing, tags, wanted, without)


def _first(
    drawing: Scan, tags: Tags, wanted: dict[tuple[int, str], Row], without: frozenset[int]
) -> dict[Row, int]:
    """Search tags for names, each distinct beginning looked at once."""
    encoding, _ = encoding_of(drawing)
    found: dict[Row, int] = {}
    for code in {code for code, _ in wanted}:
        keys = {key: row for (c, key), row in wanted.items() if c == code}
        which = np.flatnonzero(tags.codes == code)
        for k in range(0, which.size, _AT_ONCE):
            for row, record in _named(drawing, tags, which[k : k + _AT_ONCE], keys, encoding):
                if record not in without:
                    found.setdefault(row, record)
    return found


def _named(
    drawing: Scan, tags: Tags, which: NDArray[np.intp], keys: dict[str, Row], encoding: str
) -> Iterator[tuple[Row, int]]:
    """Yield rows that some tags of one code name, with the record that does."""
    names = texts(drawing.data, tags.values[which], tags.ends[which], _WIDTH)
    first, group = distinct(names)
    for number, raw in enumerate(names[first]):
        key = layer_key(bytes(raw), encoding)
        is_whole = len(raw) < _WIDTH
        if is_whole and key not in keys:
            continue
        if not is_whole and not any(k.startswith(key[: _WIDTH // 4]) for k in keys):
            continue
        for k in which[group == number]:
            name = layer_key(drawing.data[tags.values[k] : tags.ends[k]], encoding)
            if name in keys:
                at = np.searchsorted(drawing.starts[:-1], tags.starts[k], side="right")
                yield keys[name], int(at) - 1
