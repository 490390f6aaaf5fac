"""What real drawings do, each by name."""

from __future__ import annotations

import enum


class Quirk(enum.StrEnum):
    """One oddity of a drawing."""

    # how the file is written
    BOM = "byte-order mark"
    BLANK_LINES = "blank lines before the first pair"
    LEADING_COMMENT = "a comment before the first section"
    COMMENTS = "comments between any two tags"
    MIXED_NEWLINES = "LF and CRLF in one file"
    AFTER_EOF = "text after EOF"
    CTRL_Z = "Ctrl-Z after EOF"
    NO_LAST_NEWLINE = "no line end after EOF"
    ODD_VALUES = "texts that read 0, ENDSEC, EOF, or nothing"
    ODD_FLOATS = "numbers in odd formats"
    NON_ASCII = "layer names with U+ escapes and non-ASCII bytes"
    # sections and tables
    NO_HEADER = "no HEADER section"
    NO_UNITS = "no $INSUNITS"
    UNKNOWN_VARIABLE = "an unknown header variable"
    UNKNOWN_SECTION = "an unknown section"
    THUMBNAIL = "a THUMBNAILIMAGE section"
    ACDSDATA = "an ACDSDATA section"
    WRONG_COUNTS = "wrong table counts"
    NO_TABLES = "no TABLES section"
    NO_STYLE = "no STYLE table"
    NO_LTYPE = "no LTYPE table"
    NO_LAYER = "no LAYER table"
    NO_APPID = "no APPID table"
    NO_BLOCKS = "no BLOCKS section where nothing needs one"
    OUR_LAYERS = "rows of our layers in the office's template"
    EMPTY_ENTITIES = "nothing but the layout in ENTITIES"
    # handles
    SEED_ABSENT = "no $HANDSEED"
    SEED_LOW = "$HANDSEED below the handles in use"
    SEED_LOWER_CASE = "$HANDSEED in lower case"
    SEED_AT_END = "handles at the end of 64 bits"
    DUPLICATE_HANDLES = "two entities with one handle"
    HANDLE_NOT_FIRST = "the handle is not the first tag"
    SOME_WITHOUT_HANDLE = "an entity without a handle"
    LOWER_CASE_HANDLES = "a handle in lower case with zeros before it"
    MODEL_SPACE_17 = "*Model_Space has the handle 17"
    MODEL_SPACE_OTHER = "*Model_Space has a handle of its own"
    # content
    PAPER_SPACE = "entities in paper space"
    NESTED_BLOCKS = "blocks in blocks, attributes, old polylines"
    FOREIGN_XDATA = "XDATA of another application"
    PROXY = "proxy graphics in chunks"
    REACTORS = "reactors before the owner"
    UNKNOWN_ENTITY = "an unknown entity"
    UNKNOWN_OBJECT = "an unknown object"
    GROUP = "a group and a dimension that point at entities"


Q = Quirk
MODERN_ONLY = frozenset(
    {Q.MODEL_SPACE_17, Q.MODEL_SPACE_OTHER, Q.UNKNOWN_OBJECT, Q.GROUP, Q.REACTORS, Q.THUMBNAIL,
     Q.ACDSDATA, Q.PROXY}
)  # fmt: skip
NEEDS_HANDLES = frozenset(
    {Q.SEED_ABSENT, Q.SEED_LOW, Q.SEED_LOWER_CASE, Q.SEED_AT_END, Q.DUPLICATE_HANDLES,
     Q.HANDLE_NOT_FIRST, Q.SOME_WITHOUT_HANDLE, Q.LOWER_CASE_HANDLES}
)  # fmt: skip
EXCLUSIVE = (
    (Q.SEED_ABSENT, Q.SEED_LOW, Q.SEED_LOWER_CASE, Q.SEED_AT_END),
    (Q.MODEL_SPACE_17, Q.MODEL_SPACE_OTHER),
    (Q.NO_LAST_NEWLINE, Q.AFTER_EOF),
    (Q.NO_LAST_NEWLINE, Q.CTRL_Z),
    (Q.EMPTY_ENTITIES, Q.DUPLICATE_HANDLES),
)
# ezdxf refuses these, or mends them in its own way; the rest it reads as they are.
BROKEN_FOR_EZDXF = frozenset({Q.BOM, Q.BLANK_LINES, Q.DUPLICATE_HANDLES, Q.NO_TABLES})


def apply(version: str, quirks: frozenset[Quirk], *, handles: bool) -> frozenset[Quirk]:
    """Return those quirks that such a drawing can have; of exclusive ones the first."""
    kept = set(quirks)
    if version < "AC1012":
        kept -= MODERN_ONLY
    else:
        kept -= {Q.NO_BLOCKS, Q.NO_HEADER}
    if not handles:
        kept -= NEEDS_HANDLES
    if version == "":
        kept.add(Q.NO_HEADER)
    for group in EXCLUSIVE:
        for other in [q for q in group if q in kept][1:]:
            kept.discard(other)
    return frozenset(kept)
