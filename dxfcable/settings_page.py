"""The settings page as text: every key with its default, and what it is for."""

PAGE = """\
# Settings of dxfcable. What a page leaves out keeps the default shown here.
# Keep the page as dxfcable.toml beside the drawings or above them, or name it by --settings.

[layers]                     # what is read; upper and lower case are the same
support = "S-CABL-SUPP"      # cable ends and saddles
string = "S-CABL-STRG"       # which supports a cable joins
load = "S-CABL-LOAD"         # load points and their values
data = "S-CABL-DATA"         # what governs a cable
mast = "S-CABL-MAST"         # support down to base
stay = "S-CABL-STAY"         # support down to anchor
anchor = "S-CABL-ANCH"       # stiffness and anchor block, at a foot
deck = "S-CABL-DECK"         # what the hangers carry
clearance = "S-CABL-CLRN"    # what must stay clear below the cable
hold_down = "S-CABL-HOLD"    # hold-down cables
area = "S-CABL-AREA"         # loaded areas of a framing plan
plan_point = "S-CABL-PLAN"   # hanger points of a framing plan
frame = "S-CABL-FRAM"        # rectangle for the force diagram
                             # what is written
profile = "S-CABL-PROF"
closing_string = "S-CABL-CLSG"
force_diagram = "S-CABL-FORC"
letters = "S-CABL-BOWN"
tension = "S-CABL-TENS"
elevation = "S-CABL-ELEV"
reaction = "S-CABL-REAC"
hanger = "S-CABL-HANG"
table = "S-CABL-TABL"
revision = "S-CABL-REVN"

[blocks]                     # blocks with attributes
support = "CABLE-SUPPORT"
load = "CABLE-LOAD"
data = "CABLE-DATA"
anchor = "CABLE-ANCHOR"

[units]
force = ""                   # lb, kip, N, kN, MN, kgf: unit of bare forces; empty: they stop
decimal_comma = false        # true: 80,1 is 80.1
upward_sign = ""             # "-": loads with minus or UP act upward; empty: they stop

[cases]
letters = ["D", "L", "Lr", "S", "R", "W", "E", "H", "F", "T", "G", "P", "Q", "A"]
alias = { DL = "D", SDL = "D", LL = "L", RL = "Lr", SL = "S", WL = "W", EQ = "E" }

[limits]
text_reach = 6.0             # how far a text may be from its point, in text heights
text_ratio = 1.5             # the next candidate is at least so many times as far
touch = 1e-5                 # of the span: nearer points are one point
min_pull = 0.02              # of the formed pull: a smaller pull is reported as slack
lean_deg = 2.0               # a hanger that leans more is noted
movement = 0.0               # least movement marked, drawing units; 0: half the last place
span_m = [3.0, 1000.0]       # spans outside are questioned, metres
sag_ratio = [0.02, 0.2]      # sag over span outside is noted

[show]
plot_scale = ""              # "1:100", "100" or "1/8\\"=1'-0\\""; empty: found from the drawing
text_mm = 2.5                # plotted text height, metric drawings, mm
text_in = 0.09375            # plotted text height, inch and foot drawings, in
text_style = ""              # name of a text style; empty: one of our own
force_digits = 3             # significant digits of forces
reference_temperature = ""   # "10 C" or "60 F", printed with lengths

[strength]
factor = 0.0                 # breaking force over capacity; 0: not stated, strands give no capacity
level = "service"            # the level that the capacity is for: service or factored
edition = ""                 # of the standard, printed beside the factor
strand_table = ""            # CSV file of the office's strands

[anchor]                     # for anchors whose block does not say; 0: not stated
mu = 0.0                     # friction
sliding = 0.0                # factor wanted
uplift = 0.0                 # factor wanted

[sheet]
size = "A1"                  # A0..A4, ANSI-A..ANSI-E, ARCH-A..ARCH-E, ARCH-E1
owner = ""
project = ""
number_prefix = "FD-"        # of the sheet numbers
title = ""
drawn = ""
checked = ""
approved = ""
date = ""
status = ""
language = "en"

[cut_length]                 # end fittings (FITTING_L, FITTING_R): deductions, drawing units
# open_socket = { pin_to_face = 0.0, embedment = 0.0 }
# [cut_length.marks.C1]      # what holds for one cable, or "*" for all
# measuring_tension = "60 kN"    # the tension that its length is measured under, with unit
# pin_offset = 0.0           # support point to pin, each end, or [left, right]
# pin_to_face = 0.0          # in place of what its fittings state, likewise
# embedment = 0.0            # likewise
# constructional_stretch = 0.0   # share of the length, where it is not prestretched
# [cut_length.marks.P1]      # a hanger, as "C1/P1" where marks repeat; or a cable: all of its own
# hanger_ea = "9000 kN"      # stiffness, with unit
# clamp_drop = 0.0           # cable's centre line down to the upper pin
# deck_pin = 0.0             # deck line up to the lower pin
# hanger_top = "open_socket" # its end fittings
# hanger_bottom = "open_socket"
"""
