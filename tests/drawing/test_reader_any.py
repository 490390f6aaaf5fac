"""The reader over whole files and over drawings thrown together at random."""

from __future__ import annotations

import io
from dataclasses import replace
from typing import TYPE_CHECKING

import pytest
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.codes import MEANINGS
from dxfcable.drawing.reader import ReadOptions, read
from dxfcable.drawing.small import excerpt
from dxfcable.model import Layout, Severity
from dxfcable.settings import Settings
from tests.drawing.excerpts import Sketch, codes, errors, walkway

if TYPE_CHECKING:
    from ezdxf.document import Drawing

OFFICE = Settings()
NAMES = [OFFICE.layers.name(role) for role in OFFICE.layers.input_roles()]


def from_bytes(doc: Drawing, **options: str) -> Layout:
    """Save a drawing and read it as a file is read."""
    stream = io.StringIO()
    doc.write(stream)
    small = excerpt(scan(stream.getvalue().encode("cp1252")), NAMES)
    return read(small, OFFICE, ReadOptions(**options))


def test_a_saved_drawing_reads_the_same_and_names_its_own_handles_and_lines() -> None:
    sketch = walkway()
    sketch.doc.header["$INSUNITS"] = 6
    layout = from_bytes(sketch.doc)
    expected = sketch.read()
    assert codes(layout) == []
    (cable,), (other,) = layout.cables, expected.cables
    assert [(p.x, p.y, p.cases) for p in cable.loads] == [(p.x, p.y, p.cases) for p in other.loads]
    assert cable.rule is not None
    assert other.rule is not None
    assert replace(cable.rule, origin=other.rule.origin) == other.rule
    point = sketch.space.query('POINT[layer=="S-CABL-LOAD"]')[0]
    assert cable.loads[0].origin.handle == point.dxf.handle


@pytest.mark.parametrize("version", ["R12", "R2000", "R2018"])
def test_every_release_reads_the_same(version: str) -> None:
    sketch = walkway()
    sketch.doc.header["$INSUNITS"] = 6
    sketch.polyline("STRG", [(0, 12), (24, 13)])
    sketch.line("MAST", (0, 12), (0, 6))
    sketch.doc.dxfversion = version
    layout = from_bytes(sketch.doc, units="m")
    assert errors(layout) == []
    assert [p.cases for p in layout.cables[0].loads] == [(("D", 15.0),), (("D", 21.0),)]
    assert layout.masts[0].foot == (0, 6)


_grid = st.sampled_from([0.0, 0.0001, 6.0, 12.0, 12.0001, 24.0])
_at = st.tuples(_grid, _grid)
_text = st.sampled_from(
    ["18 kN", "D=3 kN", "8.2 t", "P1", "EL 12.5", "FIXED", "ROLLER", "yes", "", "12", "12e-6 /C"]
)
_tag = st.sampled_from(
    [
        *("MARK", "EL", "KIND", "CABLE", "CLAMPED", "D", "LL", "LOAD", "SAG", "PULL", "THROUGH"),
        *("WEIGHT", "EA", "ALPHA", "UNDER", "SHARE", "MU", "STRAND", "NOTE", "LOW_POINT"),
    ]
)
_block = st.sampled_from(
    ["CABLE-SUPPORT", "CABLE-LOAD", "CABLE-DATA", "CABLE-ANCHOR", "OTHER", "VIEW"]
)
_entity = st.one_of(
    st.tuples(st.just("point"), st.sampled_from(NAMES), _at),
    st.tuples(st.just("circle"), st.sampled_from(NAMES), _at),
    st.tuples(st.just("line"), st.sampled_from(NAMES), _at, _at),
    st.tuples(st.just("leader"), st.sampled_from(NAMES), _at, _at),
    st.tuples(
        st.just("polyline"),
        st.sampled_from(NAMES),
        st.lists(_at, max_size=4),
        st.booleans(),
    ),
    st.tuples(st.just("text"), st.sampled_from(NAMES), _at, _text),
    st.tuples(
        st.just("block"),
        st.sampled_from(NAMES),
        _at,
        _block,
        st.dictionaries(_tag, _text, max_size=4),
        st.sampled_from([1.0, -1.0, 12.0]),
    ),
)


def _draw(sketch: Sketch, entity: tuple[object, ...]) -> None:
    attribs = {"layer": entity[1]}
    match entity:
        case ("point", _, at):
            sketch.space.add_point(at, dxfattribs=attribs)
        case ("circle", _, at):
            sketch.space.add_circle(at, 0.5, dxfattribs=attribs)
        case ("line", _, start, end):
            sketch.space.add_line(start, end, dxfattribs=attribs)
        case ("leader", _, start, end):
            sketch.space.add_leader([start, end], dxfattribs=attribs)
        case ("polyline", _, list(points), close):
            sketch.space.add_lwpolyline(points, close=bool(close), dxfattribs=attribs)
        case ("text", _, at, str(text)):
            sketch.space.add_text(text, height=0.5, dxfattribs=attribs).set_placement(at)
        case ("block", str(layer), tuple(at), str(name), dict(tags), scale):
            sketch.block(name, at, layer, tags, xscale=scale)


@settings(max_examples=150, deadline=None, suppress_health_check=[HealthCheck.too_slow])
@given(st.lists(_entity, max_size=14))
def test_any_drawing_is_read_or_told_and_never_raises(entities: list[tuple[object, ...]]) -> None:
    sketch = Sketch()
    view = sketch.doc.blocks.new("VIEW")
    view.add_point((6, 6), dxfattribs={"layer": "S-CABL-LOAD"})
    view.add_blockref("OTHER", (0, 0), dxfattribs={"layer": "S-CABL-SUPP"})
    for entity in entities:
        _draw(sketch, entity)
    layout = sketch.read()
    assert {f.code for f in layout.findings} <= set(MEANINGS)
    for found in layout.findings:
        assert found.text
        if found.severity is Severity.ERROR:
            assert found.remedy
    for cable in layout.cables:
        xs = [s.x for s in cable.supports]
        assert xs == sorted(set(xs))
        loads = [p.x for p in cable.loads]
        assert loads == sorted(set(loads))
        assert all(xs[0] < x < xs[-1] for x in loads)
        assert all(layout.supports[s.key] == s for s in cable.supports)
