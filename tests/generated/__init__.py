"""Drawings of our own making, without a DXF library, with every oddity that real ones have.

Tests import all of it from here. `pairs` and `records` are the judge: a parser too plain to
be wrong.
"""

from tests.generated.big import big_drawing
from tests.generated.cable import (
    RULELESS,
    CableOptions,
    cable_block,
    cable_layout,
    maker_for,
    splice_layout,
)
from tests.generated.drawing import drawing
from tests.generated.edits import (
    change_load_text,
    copy_records,
    is_ours,
    load_texts,
    move_records,
    our_texts,
    renumber_handles,
    round_coordinates,
    shuffle_entities,
    swap_line_ends,
)
from tests.generated.entities import Maker
from tests.generated.pairs import Pair, Record, Token, entities, pairs, records, tokens
from tests.generated.quirks import BROKEN_FOR_EZDXF, Quirk
from tests.generated.strategies import Edit, drawings, edits, layouts
from tests.generated.writing import VERSIONS, Codes, Style, Tags, render

__all__ = [
    "BROKEN_FOR_EZDXF",
    "RULELESS",
    "VERSIONS",
    "CableOptions",
    "Codes",
    "Edit",
    "Maker",
    "Pair",
    "Quirk",
    "Record",
    "Style",
    "Tags",
    "Token",
    "big_drawing",
    "cable_block",
    "cable_layout",
    "change_load_text",
    "copy_records",
    "drawing",
    "drawings",
    "edits",
    "entities",
    "is_ours",
    "layouts",
    "load_texts",
    "maker_for",
    "move_records",
    "our_texts",
    "pairs",
    "records",
    "render",
    "renumber_handles",
    "round_coordinates",
    "shuffle_entities",
    "splice_layout",
    "swap_line_ends",
    "tokens",
]
