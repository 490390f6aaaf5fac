"""Small drawings to issue and to tamper with: invented cables with masts, stays and a deck."""

from __future__ import annotations

import functools
import io
from dataclasses import dataclass

from ezdxf.filemanagement import new, read

from dxfcable.job import Options, solve_bytes

_INSUNITS = {"m": 6, "ft": 2, "mm": 4, "in": 1}


@dataclass(frozen=True, kw_only=True)
class Scenario:
    """One cable; all lengths in metres or feet, turned into the drawing's unit.

    `loads` are texts at even panels. `data` are attributes of the data block.
    """

    release: str = "R2000"
    unit: str = "m"
    span: float = 24.0
    rise: float = 1.0
    el: str = "112.000"  # of the left support, "" for no datum
    loads: tuple[str, ...] = ("12 kN", "15.5 kN", "9.5 kN", "12 kN")
    data: tuple[tuple[str, str], ...] = (("SAG", "2.4 m"),)
    has_masts: bool = True
    has_deck: bool = True
    cables: int = 1


LIGHT = Scenario()
HEAVY = Scenario(
    data=(("MAX_TENSION", "90 kN"), ("WEIGHT", "0.35 kN/m"), ("EA", "9000 kN")),
    loads=("12 kN", "15.5 kN", "4 kN"),
)
CASES = Scenario(
    loads=("D=8 kN L=5 kN", "D=6 kN L=9 kN", "D=0 kN L=3 kN", "D=8 kN L=5 kN"),
    data=(("LOW_POINT", "109.6"), ("UNDER", "D + 0.5L"), ("EA", "20000 kN")),
)
FEET = Scenario(
    release="R12",
    unit="ft",
    span=60.0,
    rise=-2.5,
    el="41'-2 1/2\"",
    loads=("8k", "11.5k", "8k"),
    data=(("LENGTH", "62'-3\""), ("EA", "4000 kip")),
)
PAIR = Scenario(unit="mm", el="", cables=2, data=(("PULL", "55 kN"),), has_masts=False)
SCENARIOS = {"light": LIGHT, "heavy": HEAVY, "cases": CASES, "feet": FEET, "pair": PAIR}
# Few entities, for everything that may be done to any of them.
SMALL = {
    "small": Scenario(loads=("12 kN", "15.5 kN"), has_masts=False),
    "small feet": Scenario(
        release="R12",
        unit="ft",
        span=60.0,
        rise=-2.5,
        el="",
        loads=("8k", "11.5k"),
        data=(("SAG", "6'-0\""), ("WEIGHT", "0.02 kip/ft")),
        has_masts=False,
        has_deck=False,
    ),
}
ALL = SCENARIOS | SMALL


def drawn(scenario: Scenario) -> bytes:
    """Draw the drafter's part of a scenario."""
    doc = new(scenario.release)
    doc.header["$INSUNITS"] = _INSUNITS[scenario.unit]
    block = doc.blocks.new("CABLE-DATA")
    for tag in ("MARK", *(tag for tag, _ in scenario.data)):
        block.add_attdef(tag, (0, 0))
    block = doc.blocks.new("CABLE-SUPPORT")
    for tag in ("MARK", "EL"):
        block.add_attdef(tag, (0, 0))
    for number in range(scenario.cables):
        _cable(doc.modelspace(), scenario, number)
    stream = io.StringIO()
    doc.write(stream)
    return stream.getvalue().encode(doc.output_encoding)


def _cable(space: object, scenario: Scenario, number: int) -> None:
    """Draw one cable above the last one."""
    from ezdxf.layouts.layout import Modelspace

    assert isinstance(space, Modelspace)
    big = 1000.0 if scenario.unit == "mm" else 1.0
    span, rise, height = scenario.span * big, scenario.rise * big, 0.25 * big
    base = 12.0 * big + 40.0 * big * number
    ends = [(0.0, base), (span, base + rise)]
    for k, at in enumerate(ends):
        insert = space.add_blockref("CABLE-SUPPORT", at, dxfattribs={"layer": "S-CABL-SUPP"})
        insert.add_attrib("MARK", f"S{2 * number + k + 1}", at)
        if k == 0 and scenario.el:
            insert.add_attrib("EL", scenario.el, at)
    space.add_line(ends[0], ends[1], dxfattribs={"layer": "S-CABL-STRG"})
    panel = span / (len(scenario.loads) + 1)
    for k, words in enumerate(scenario.loads, start=1):
        at = (round(k * panel, 4), base - 5.0 * big)
        space.add_point(at, dxfattribs={"layer": "S-CABL-LOAD"})
        below = (at[0], at[1] - 2.0 * height)
        space.add_text(words, height=height, dxfattribs={"layer": "S-CABL-LOAD", "insert": below})
    at = (0.5 * span, base + 4.0 * big)
    insert = space.add_blockref("CABLE-DATA", at, dxfattribs={"layer": "S-CABL-DATA"})
    insert.add_attrib("MARK", f"C{number + 1}", at)
    for tag, value in scenario.data:
        insert.add_attrib(tag, value, at)
    if scenario.has_masts:
        for (x, y), side in zip(ends, (-1.0, 1.0), strict=True):
            foot = base - 7.0 * big
            space.add_line((x, y), (x, foot), dxfattribs={"layer": "S-CABL-MAST"})
            anchor = (x + side * 9.0 * big, foot)
            space.add_line((x, y), anchor, dxfattribs={"layer": "S-CABL-STAY"})
    if scenario.has_deck:
        deck = [(-1.0 * big, base - 6.0 * big), (span + big, base - 6.0 * big + 0.5 * rise)]
        add = space.add_polyline2d if scenario.release == "R12" else space.add_lwpolyline
        add(deck, dxfattribs={"layer": "S-CABL-DECK"})


@functools.cache
def issued(name: str) -> bytes:
    """Issue a scenario."""
    scenario = ALL[name]
    data, _ = solve_bytes(drawn(scenario), Options(units=scenario.unit))
    return data


@functools.lru_cache(maxsize=16)
def saved_by_a_library(data: bytes) -> bytes:
    """Read a drawing and write it again, as another program does."""
    text = data.decode("utf-8" if data[data.find(b"AC10") :][:6] >= b"AC1021" else "cp1252")
    doc = read(io.StringIO(text))
    stream = io.StringIO()
    doc.write(stream)
    return stream.getvalue().encode(doc.output_encoding)
