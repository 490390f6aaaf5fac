"""Who names a table row: entities by layer, linetype, text style or application."""

from __future__ import annotations

from typing import TYPE_CHECKING

import numpy as np

from dxfcable.drawing.bytes.cut import encoding_of
from dxfcable.drawing.bytes.decode import layer_key
from dxfcable.drawing.bytes.pairs import find_tags, skip_prologue, texts

if TYPE_CHECKING:
    from collections.abc import Iterable

    from dxfcable.drawing.bytes.pairs import Tags
    from dxfcable.drawing.bytes.scan import Scan

Row = tuple[str, str]  # table and name
_CODE = {"LAYER": 8, "LTYPE": 6, "STYLE": 7, "APPID": 1001}
_SCANNED = frozenset({"LAYER", "APPID"})
_WIDTH = 64


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
    """Search tags for names, each distinct name decoded once."""
    encoding, _ = encoding_of(drawing)
    found: dict[Row, int] = {}
    for code in {code for code, _ in wanted}:
        which = np.flatnonzero(tags.codes == code)
        starts, ends = tags.values[which], tags.ends[which]
        names, group = np.unique(texts(drawing.data, starts, ends, _WIDTH), return_inverse=True)
        for number, raw in enumerate(names):
            row = wanted.get((code, layer_key(bytes(raw), encoding)))
            if row is None or row in found:
                continue
            at = tags.starts[which[group == number]]
            records = np.searchsorted(drawing.starts[:-1], at, side="right") - 1
            outside = records[~np.isin(records, list(without))] if without else records
            if outside.size:
                found[row] = int(outside[0])
    return found
