"""Stable codes of what the reader finds, each with one line that says what it means."""

from __future__ import annotations

import enum

from dxfcable.units import Doubt


class Code(enum.StrEnum):
    """What was assumed, passed over or is wrong in a layout; a member's doc is in MEANINGS."""

    NOTHING_DRAWN = "nothing-drawn"
    NO_UNITS = "no-units"
    UNITS_UNSUPPORTED = "units-unsupported"
    UNITS_OVERRIDDEN = "units-overridden"
    UNITS_TRAP = "units-trap"
    SPAN_UNUSUAL = "span-unusual"
    FORCE_UNIT_ASSUMED = "force-unit-assumed"
    FORCE_UNITS_MIXED = "force-units-mixed"
    CODE_PAGE_UNKNOWN = "code-page-unknown"
    TURNED_AXES = "turned-axes"
    DAMAGED = "damaged-lines"
    LAYER_HIDDEN = "layer-hidden"
    LAYER_SPELLING = "layer-spelling"
    LAYER_VARIANT = "layer-variant"
    PAPER_SPACE = "paper-space"
    EXTERNAL_REFERENCE = "external-reference"
    ENTITY_UNSUPPORTED = "entity-unsupported"
    ENTITY_BROKEN = "entity-broken"
    SYMBOL_PIECES = "symbol-pieces"
    Z_SPREAD = "z-spread"
    BLOCK_ARRAY = "block-array"
    BLOCK_SCALE_UNIT = "block-scale-unit"
    BLOCK_BASE_FAR = "block-base-far"
    BLOCK_LAYER = "block-layer"
    BLOCK_STRAY = "block-stray"
    BLOCK_UNKNOWN = "block-unknown"
    TAG_UNKNOWN = "tag-unknown"
    TAG_UNKNOWN_FORCE = "tag-unknown-force"
    TAG_REPEATED = "tag-repeated"
    VALUE_UNREAD = "value-unread"
    NO_SUPPORTS = "no-supports"
    ONE_SUPPORT = "one-support"
    SUPPORT_MERGED = "support-merged"
    SUPPORT_CONFLICT = "support-conflict"
    SUPPORT_UNUSED = "support-unused"
    NEAR_DUPLICATE = "near-duplicate"
    SAME_X = "same-x"
    STRING_MISSING = "string-missing"
    STRING_FREE = "string-free"
    STRING_BACK = "string-back"
    STRING_BRANCH = "string-branch"
    STRING_MERGED = "string-merged"
    SADDLE_KIND_MISSING = "saddle-kind-missing"
    SADDLES_WITHOUT_STRING = "saddles-without-string"
    NO_DATUM = "no-datum"
    DATUM_CONFLICT = "datum-conflict"
    NO_LOADS = "no-loads"
    LOAD_MERGED = "load-merged"
    LOAD_CONFLICT = "load-conflict"
    LOAD_BEYOND_SUPPORTS = "load-beyond-supports"
    LOAD_AT_SUPPORT = "load-at-support"
    LOAD_OWNER_AMBIGUOUS = "load-owner-ambiguous"
    CABLE_MARK_REPEATED = "cable-mark-repeated"
    CABLE_UNKNOWN = "cable-unknown"
    LOAD_VALUE_MISSING = "load-value-missing"
    LOAD_TEXT_UNCLAIMED = "load-text-unclaimed"
    LOAD_TEXT_AMBIGUOUS = "load-text-ambiguous"
    LOAD_TEXTS_TWO = "load-texts-two"
    LOAD_NOTE = "load-note"
    TEXT_MERGED = "text-merged"
    TEXTS_LISTED = "texts-listed"
    TEXT_TINY = "text-tiny"
    MARK_UNCLAIMED = "mark-unclaimed"
    MARK_REPEATED = "mark-repeated"
    CASES_MIXED = "cases-mixed"
    ARROW_SLANTED = "arrow-slanted"
    LEADER_UP = "leader-up"
    OWNER_AMBIGUOUS = "owner-ambiguous"
    OWNER_MISSING = "owner-missing"
    RULE_TWO = "rule-two"
    RULE_VALUE = "rule-value"
    DATA_TWO = "data-two"
    FRAME_UNCLEAR = "frame-unclear"
    CASE_UNKNOWN = "case-unknown"
    MAST_FREE = "mast-free"
    MAST_UP = "mast-up"
    MAST_TWO = "mast-two"
    STAY_FREE = "stay-free"
    STAY_UP = "stay-up"
    LINE_MERGED = "line-merged"
    ANCHOR_FREE = "anchor-free"
    ANCHOR_TWO = "anchor-two"
    POLYLINE_BACK = "polyline-back"
    POLYLINE_TWO = "polyline-two"
    DIMENSION_DIFFERS = "dimension-differs"
    AREA_SHAPE = "area-shape"
    AREA_MERGED = "area-merged"
    AREA_TEXT_MISSING = "area-text-missing"
    AREA_TEXT_STRAY = "area-text-stray"
    AREA_TEXTS_TWO = "area-texts-two"
    AREA_DIRECTION = "area-direction"
    AREA_OVERLAP = "area-overlap"
    AREA_UNSHARED = "area-unshared"
    PLAN_INCOMPLETE = "plan-incomplete"
    PLAN_MERGED = "plan-merged"
    PLAN_MARK_MISSING = "plan-mark-missing"
    PLAN_MARK_UNKNOWN = "plan-mark-unknown"
    PLAN_MARK_AMBIGUOUS = "plan-mark-ambiguous"
    PLAN_MARK_REPEATED = "plan-mark-repeated"
    PLAN_LINES_NEAR = "plan-lines-near"
    PLAN_POINT_FREE = "plan-point-free"
    PLAN_SPACING = "plan-spacing"
    PLAN_SHARED = "plan-shared"
    LATER_HOLD_DOWN = "later-hold-down"
    LATER_STRAND = "later-strand"
    LATER_SPAN = "later-span"


MEANINGS: dict[str, str] = {
    Code.NOTHING_DRAWN: "no entity on a layer of the settings",
    Code.NO_UNITS: "the drawing does not say its unit of length",
    Code.UNITS_UNSUPPORTED: "the drawing's unit is none that cables are drawn in",
    Code.UNITS_OVERRIDDEN: "--units differs from the drawing's header",
    Code.UNITS_TRAP: "the header's unit is the foot, its display takes a unit for an inch",
    Code.SPAN_UNUSUAL: "a span is outside the usual: the unit may be wrong",
    Code.FORCE_UNIT_ASSUMED: "bare forces were read in the stated unit",
    Code.FORCE_UNITS_MIXED: "forces in several units were converted to the first",
    Code.CODE_PAGE_UNKNOWN: "the declared code page is not known",
    Code.TURNED_AXES: "the user coordinate system is turned against the drawing",
    Code.DAMAGED: "lines of the file do not pair",
    Code.LAYER_HIDDEN: "entities on layers that are off or frozen, or invisible, were not read",
    Code.LAYER_SPELLING: "a layer's name matches but for upper and lower case",
    Code.LAYER_VARIANT: "a layer's name is nearly one of ours; it was not read",
    Code.PAPER_SPACE: "entities in paper space were not read",
    Code.EXTERNAL_REFERENCE: "an external reference has a layer of ours; it is not read",
    Code.ENTITY_UNSUPPORTED: "entities of a kind that is not read here, such as arcs",
    Code.ENTITY_BROKEN: "an entity's content cannot be read",
    Code.SYMBOL_PIECES: "lines beside supports or loads taken as pieces of symbols",
    Code.Z_SPREAD: "entities lie at different Z: no elevation view",
    Code.BLOCK_ARRAY: "a block inserted as an array",
    Code.BLOCK_SCALE_UNIT: "a block scaled by a factor between units",
    Code.BLOCK_BASE_FAR: "a block's base point is far from its symbol",
    Code.BLOCK_LAYER: "a block of ours on the layer of another role",
    Code.BLOCK_STRAY: "a cable block stands on a layer that is not read",
    Code.BLOCK_UNKNOWN: "a block that is not the one this layer holds",
    Code.TAG_UNKNOWN: "attributes that are not known",
    Code.TAG_UNKNOWN_FORCE: "an attribute that is not known holds a force",
    Code.TAG_REPEATED: "two attributes of one load case were added",
    Code.VALUE_UNREAD: "an attribute's value is none of those that it may have",
    Code.NO_SUPPORTS: "no support is drawn",
    Code.ONE_SUPPORT: "only one support is drawn",
    Code.SUPPORT_MERGED: "supports at one point were merged",
    Code.SUPPORT_CONFLICT: "supports at one point have different attributes",
    Code.SUPPORT_UNUSED: "a support that no closing string joins",
    Code.NEAR_DUPLICATE: "two points are very near each other but not merged",
    Code.SAME_X: "neighbouring supports at one x",
    Code.STRING_MISSING: "several supports and no closing string",
    Code.STRING_FREE: "a closing string's vertex touches no support",
    Code.STRING_BACK: "a closing string runs back in x",
    Code.STRING_BRANCH: "more than two closing strings meet at a saddle",
    Code.STRING_MERGED: "closing strings drawn twice were merged",
    Code.SADDLE_KIND_MISSING: "a saddle does not say how it lets the cable pass",
    Code.SADDLES_WITHOUT_STRING: "saddles were joined from left to right without a string",
    Code.NO_DATUM: "no support of the cable has an elevation",
    Code.DATUM_CONFLICT: "two elevations disagree with the drawn difference",
    Code.NO_LOADS: "a cable without load points",
    Code.LOAD_MERGED: "load points drawn twice were merged",
    Code.LOAD_CONFLICT: "two load points at one x of a cable with different values",
    Code.LOAD_BEYOND_SUPPORTS: "a load point outside all spans",
    Code.LOAD_AT_SUPPORT: "a load at a support's x acts on the support",
    Code.LOAD_OWNER_AMBIGUOUS: "a load point that may belong to two cables",
    Code.CABLE_MARK_REPEATED: "two cables with one mark",
    Code.CABLE_UNKNOWN: "an attribute names a cable that is not drawn",
    Code.LOAD_VALUE_MISSING: "a load point without a value",
    Code.LOAD_TEXT_UNCLAIMED: "a force text within reach of no load point",
    Code.LOAD_TEXT_AMBIGUOUS: "a force text that may belong to two load points",
    Code.LOAD_TEXTS_TWO: "two values for one load point",
    Code.LOAD_NOTE: "something was added up or assumed in a load text",
    Code.TEXT_MERGED: "a text drawn twice counts once",
    Code.TEXTS_LISTED: "texts that are no values",
    Code.TEXT_TINY: "texts that plot under 0.5 mm",
    Code.MARK_UNCLAIMED: "a mark that belongs to no point, or to several",
    Code.MARK_REPEATED: "a cable with one mark at two load points",
    Code.CASES_MIXED: "values with and without load case letters in one cable",
    Code.ARROW_SLANTED: "a slanted line or leader among the loads",
    Code.LEADER_UP: "a leader as load arrow that points up",
    Code.OWNER_AMBIGUOUS: "something that may belong to two cables",
    Code.OWNER_MISSING: "something that belongs to no cable",
    Code.RULE_TWO: "more than one rule for a cable",
    Code.RULE_VALUE: "a rule whose value cannot be",
    Code.DATA_TWO: "more than one data block for a cable",
    Code.FRAME_UNCLEAR: "a frame that is no upright rectangle, or a second one",
    Code.CASE_UNKNOWN: "a load case that is not known",
    Code.MAST_FREE: "a mast that starts at no support",
    Code.MAST_UP: "a mast that does not run down from its support",
    Code.MAST_TWO: "two masts at one support",
    Code.STAY_FREE: "a stay that starts at no support",
    Code.STAY_UP: "a stay that does not run down from its support",
    Code.LINE_MERGED: "masts or stays drawn twice were merged",
    Code.ANCHOR_FREE: "an anchor block at no foot",
    Code.ANCHOR_TWO: "two anchor blocks at one foot",
    Code.POLYLINE_BACK: "a deck or clearance line runs back in x",
    Code.POLYLINE_TWO: "two deck or clearance lines over the same x",
    Code.DIMENSION_DIFFERS: "a dimension's text differs from what is drawn",
    Code.AREA_SHAPE: "a loaded area or opening that is not closed, or crosses itself",
    Code.AREA_MERGED: "outlines of areas drawn twice were merged",
    Code.AREA_TEXT_MISSING: "a loaded area without a pressure",
    Code.AREA_TEXT_STRAY: "a pressure that stands in no loaded area, or in several",
    Code.AREA_TEXTS_TWO: "two pressures in one loaded area",
    Code.AREA_DIRECTION: "a direction of a deck in no area, or two in one",
    Code.AREA_OVERLAP: "loaded areas that overlap: there their loads add",
    Code.AREA_UNSHARED: "a loaded area that cannot be shared out to hanger points",
    Code.PLAN_INCOMPLETE: "areas without hanger points, or points without areas",
    Code.PLAN_MERGED: "hanger points drawn twice were merged",
    Code.PLAN_MARK_MISSING: "a hanger point of the plan without a mark",
    Code.PLAN_MARK_UNKNOWN: "a hanger point that no load point matches",
    Code.PLAN_MARK_AMBIGUOUS: "a hanger point that several load points match",
    Code.PLAN_MARK_REPEATED: "two hanger points for one load point",
    Code.PLAN_LINES_NEAR: "supporting lines so near that they may be one",
    Code.PLAN_POINT_FREE: "a hanger point that carries nothing of any area",
    Code.PLAN_SPACING: "hanger points spaced otherwise in plan than in elevation",
    Code.PLAN_SHARED: "what the points of a loaded area carry, and their sum",
    Code.LATER_HOLD_DOWN: "hold-down cables are not yet read in this version",
    Code.LATER_STRAND: "the strand of a stay or mast is not yet read in this version",
    Code.LATER_SPAN: "SPAN is not yet used in this version",
    Doubt.NUMBER_UNREAD: "a number that does not read",
    Doubt.NUMBER_AMBIGUOUS: "a comma, point or fraction that may mean two things",
    Doubt.LOAD_UNREAD: "a load text that is more or less than a force",
    Doubt.LOAD_TYPO: "letters among digits",
    Doubt.LOAD_UNIT_MISSING: "a force without unit",
    Doubt.LOAD_UNIT_AMBIGUOUS: "a unit of force that may be two",
    Doubt.LOAD_UNIT_UNKNOWN: "a unit that is none of force",
    Doubt.LOAD_IS_MASS: "a mass where a force is needed",
    Doubt.LOAD_SIGN: "a load that may act upward",
    Doubt.LOAD_DISTRIBUTED: "a load by length or area where a force is needed",
    Doubt.LOAD_LEVEL: "a level where a load case is needed",
    Doubt.LOAD_REPEATED: "one text for several loads",
    Doubt.LOAD_CASES_UNLABELLED: "several values without load case letters",
    Doubt.LOAD_CASE_UNKNOWN: "a letter that is no load case",
    Doubt.LENGTH_UNREAD: "a length that does not read",
    Doubt.LENGTH_AMBIGUOUS: "a length that may mean two things",
    Doubt.WEIGHT_UNREAD: "a weight by length that does not read",
    Doubt.PRESSURE_UNREAD: "a load by area that does not read",
    Doubt.TEMPERATURE_UNREAD: "a temperature difference that does not read",
    Doubt.EXPANSION_UNREAD: "a coefficient of expansion that does not read",
    Doubt.PLOT_SCALE_UNREAD: "a plotting scale that does not read",
}
