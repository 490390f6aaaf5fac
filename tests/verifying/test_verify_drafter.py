"""What the drafter changes after the issue shows: clearance line, capacity, anchors, elevations.

The scenario is invented: two loads, two masts with stays on anchor blocks, a clearance line.
"""

from __future__ import annotations

import functools
import io
import re
from typing import TYPE_CHECKING

import pytest
from ezdxf.filemanagement import read

from dxfcable.commands.verifying import outcome
from dxfcable.job import Options, solve_bytes
from dxfcable.model import Severity
from tests.issued_cases import Scenario, drawn, issued
from tests.proving import failed, proof_of, told
from tests.tampering import IssuedFile, open_issued, unmarked

if TYPE_CHECKING:
    from collections.abc import Callable

    from ezdxf.document import Drawing
    from ezdxf.entities.insert import Insert
    from ezdxf.entities.lwpolyline import LWPolyline

    from dxfcable.verify import Proof

_CASE = Scenario(
    loads=("D=12 kN L=4 kN", "D=15.5 kN L=6 kN"),
    data=(("SAG", "2.4 m"), ("UNDER", "D"), ("CAPACITY", "170 kN"), ("EA", "20000 kN")),
)
_LEVEL = ((-1.0, 7.0), (25.0, 7.0))
_STEEP = ((-2.0, 4.0), (9.0, 7.5), (14.0, 6.0), (30.0, 9.0))
_BEYOND = ((30.0, 7.0), (40.0, 7.0))
MARKS = pytest.mark.parametrize("has_marks", [True, False], ids=["marks", "no marks"])


def _edited(data: bytes, change: Callable[[Drawing], None]) -> bytes:
    doc = read(io.StringIO(data.decode("cp1252")))
    change(doc)
    stream = io.StringIO()
    doc.write(stream)
    return stream.getvalue().encode("cp1252")


def _add_clearance(doc: Drawing, line: tuple[tuple[float, float], ...]) -> None:
    doc.modelspace().add_lwpolyline(line, dxfattribs={"layer": "S-CABL-CLRN"})


def _add_anchors(doc: Drawing) -> None:
    doc.blocks.new("CABLE-ANCHOR")
    for k, x in enumerate((-9.0, 33.0), start=1):
        insert = doc.modelspace().add_blockref(
            "CABLE-ANCHOR", (x, 5.0), dxfattribs={"layer": "S-CABL-ANCH"}
        )
        for tag, value in (("MARK", f"A{k}"), ("WEIGHT", "180 kN"), ("MU", "0.5")):
            insert.add_attrib(tag, value, (x, 5.0))


@functools.cache
def _issued(line: tuple[tuple[float, float], ...] = _LEVEL) -> bytes:
    def change(doc: Drawing) -> None:
        _add_anchors(doc)
        if line:
            _add_clearance(doc, line)

    data, _ = solve_bytes(_edited(drawn(_CASE), change), Options(combos=("D", "D + L")))
    return data


def _proved(data: bytes, has_marks: bool = True) -> Proof:
    return proof_of(data if has_marks else unmarked(data))


def _attribute(layer: str, tag: str, value: str) -> Callable[[Drawing], None]:
    def change(doc: Drawing) -> None:
        insert: Insert = doc.modelspace().query(f'INSERT[layer=="{layer}"]')[0]
        found = insert.get_attrib(tag)
        assert found is not None
        found.dxf.text = value

    return change


def _move_clearance(doc: Drawing) -> None:
    line: LWPolyline = doc.modelspace().query('LWPOLYLINE[layer=="S-CABL-CLRN"]')[0]
    line.translate(0.0, 0.3, 0.0)


@MARKS
@pytest.mark.parametrize("line", [_LEVEL, _STEEP, _BEYOND, ()])
def test_an_untouched_drawing_passes(
    line: tuple[tuple[float, float], ...], has_marks: bool
) -> None:
    proof = _proved(_issued(line), has_marks)
    assert proof.passed, told(proof)


@MARKS
@pytest.mark.parametrize("line", [_LEVEL, _STEEP])
def test_a_clearance_line_moved_after_the_issue_fails(
    line: tuple[tuple[float, float], ...], has_marks: bool
) -> None:
    proof = _proved(_edited(_issued(line), _move_clearance), has_marks)
    assert failed(proof) == {"least clearance"}
    assert "does not stand on the clearance line" in told(proof)


def test_a_clearance_line_added_after_the_issue_lacks_its_dimension() -> None:
    for line, due in ((_LEVEL, {"least clearance"}), (_BEYOND, set())):
        data = _edited(_issued(()), lambda doc, line=line: _add_clearance(doc, line))  # type: ignore[misc]
        assert failed(proof_of(data)) == due


_CHANGED = {
    "capacity": (_attribute("S-CABL-DATA", "CAPACITY", "160 kN"), "CAPACITY says"),
    "no capacity": (_attribute("S-CABL-DATA", "CAPACITY", ""), "the data block has none"),
    "weight": (_attribute("S-CABL-ANCH", "WEIGHT", "150 kN"), "ANCHOR A1 FACTOR says"),
    "no weight": (_attribute("S-CABL-ANCH", "WEIGHT", ""), "no such anchor or no weight"),
    "friction": (_attribute("S-CABL-ANCH", "MU", "0.4"), "ANCHOR A1 FACTOR says"),
    "anchor's mark": (_attribute("S-CABL-ANCH", "MARK", "A7"), "ANCHOR A7 is missing"),
}


@MARKS
@pytest.mark.parametrize("what", _CHANGED)
def test_what_the_drafter_says_of_safety_is_held(what: str, has_marks: bool) -> None:
    change, words = _CHANGED[what]
    proof = _proved(_edited(_issued(), change), has_marks)
    assert "schedule" in failed(proof)
    assert words in told(proof)


@functools.cache
def _file() -> IssuedFile:
    return open_issued(_issued())


def _cell(pattern: str) -> str:
    return next(n for n in _file().ours if re.search(pattern, n))


@pytest.mark.parametrize(
    ("cell", "old", "new"),
    [
        ("summary/capacity/value", "170", "190"),
        ("summary/capacity/value", r"\d\d$", "01"),
        ("summary/capacity/name", "CAPACITY", "CAPACITIES"),
        (r"summary/S1-\w+-factor/value", r"SLIDING \d", "SLIDING 9"),
        (r"summary/S1-\w+-factor/value", r"UPLIFT \d", "UPLIFT 8"),
        (r"summary/S1-\w+-factor/value", r"SLIDING [\d.]+, ", ""),
        (r"summary/S1-\w+-factor/name", "A1", "A2"),
        (r"summary/S2-\w+-factor/name", "FACTOR", "FACTORS"),
        (r"summary/S1-A1/name", "A1", "A2"),
    ],
)
def test_safety_written_otherwise_is_a_difference_without_marks(
    cell: str, old: str, new: str
) -> None:
    name = _cell(cell)
    words = re.sub(old, new, _file().text(name))
    assert words != _file().text(name)
    assert "schedule" in failed(_proved(_file().retexted(name, words), has_marks=False))


@pytest.mark.parametrize(
    ("layer", "tag", "value", "reason"),
    [
        ("S-CABL-SUPP", "EL", "112.500", "EL at its supports was changed by 0.5"),
        ("S-CABL-SUPP", "EL", "", "an EL was stated, now none is"),
        ("S-CABL-SUPP", "MARK", "S9", 'support "S1" is marked "S9" now'),
    ],
)
def test_a_support_said_otherwise_is_stale(layer: str, tag: str, value: str, reason: str) -> None:
    (cable,) = proof_of(_edited(_issued(), _attribute(layer, tag, value))).cables
    assert cable.stale
    assert reason in cable.reasons


def test_tables_that_nothing_was_held_against_are_not_called_proved() -> None:
    proof = _proved(_issued(), has_marks=False)
    (note,) = [f for f in proof.findings if f.code == "verify-not-proved"]
    assert note.severity is Severity.NOTE
    assert "states and envelopes" in note.text
    assert proof.passed
    assert outcome(proof) != "proved"
    assert outcome(_proved(_issued())) == "proved"
    for name in ("light", "pair", "feet"):  # no such tables
        assert outcome(_proved(issued(name), has_marks=False)) == "proved"


def test_a_lost_mark_is_told_from_a_missing_entity() -> None:
    def drop(doc: Drawing) -> None:
        for entity in doc.modelspace().query('LWPOLYLINE[layer=="S-CABL-PROF"]'):
            entity.discard_xdata("DXFCABLE")

    proof = proof_of(_edited(_issued(), drop))
    assert not proof.passed
    assert "the profile of C1 has lost its mark" in told(proof)
    assert "C1/profile/1 is missing (or its mark is lost" in told(proof)
