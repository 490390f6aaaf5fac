"""The starter drawing reads and solves in every unit, and is the same at every run."""

from __future__ import annotations

import hashlib
import io
import math
import os
import subprocess
import sys
from dataclasses import dataclass, replace
from functools import cache
from typing import TYPE_CHECKING

import pytest
from ezdxf.filemanagement import read as read_document

from dxfcable.drawing.rows import LOOKS
from dxfcable.drawing.starter import UNITS, starter
from dxfcable.errors import DxfcableError
from dxfcable.job import Options, read_bytes, solve_bytes, strip_bytes
from dxfcable.model import Severity
from dxfcable.settings import Blocks, Cases, Layers, Settings, Show
from dxfcable.settings import Units as UnitSettings

if TYPE_CHECKING:
    from ezdxf.document import Drawing

    from dxfcable.job import Outcome
    from dxfcable.model import FormedCable

# Section 1 of the contract: every value that a block can carry.
TAGS = {
    "CABLE-SUPPORT": {"MARK", "EL", "KIND"},
    "CABLE-LOAD": {"MARK", "CABLE", "CLAMPED", *(case.upper() for case in Cases().letters)},
    "CABLE-DATA": {
        *("MARK", "MAX_TENSION", "SAG", "LOW_POINT", "PULL", "LENGTH", "CUT_LENGTH", "UNDER"),
        *("WEIGHT", "WEIGHT_CASE", "EA", "STRAND", "ALPHA", "DELTA_T", "CAPACITY", "SPAN"),
        *("FITTING_L", "FITTING_R"),
    },
    "CABLE-ANCHOR": {"MARK", "EA", "STRAND", "SHARE", "WEIGHT", "MU", "FS_SLIDE", "FS_UPLIFT"},
}


@dataclass(frozen=True, slots=True, kw_only=True)
class Expected:
    """What the scenario says, in the unit of the drawing."""

    force_unit: str
    span: float
    rise: float
    loads: tuple[float, ...]
    sag: float
    header: tuple[int, int, int]  # $INSUNITS, $MEASUREMENT, $LUNITS


_KN, _KIP = (9.0, 10.0, 10.0, 10.0, 9.0), (2.5, 3.0, 3.0, 3.0, 2.5)
EXPECTED = {
    "m": Expected(force_unit="kN", span=24.0, rise=-0.5, loads=_KN, sag=2.4, header=(6, 1, 2)),
    "mm": Expected(
        force_unit="kN", span=24e3, rise=-500.0, loads=_KN, sag=2400.0, header=(4, 1, 2)
    ),
    "ft": Expected(force_unit="kip", span=72.0, rise=-1.5, loads=_KIP, sag=7.25, header=(2, 0, 2)),
    "in": Expected(
        force_unit="kip", span=864.0, rise=-18.0, loads=_KIP, sag=87.0, header=(1, 0, 4)
    ),
}


def document(data: bytes) -> Drawing:
    """Load a drawing with the library."""
    return read_document(io.StringIO(data.decode("cp1252")))


@cache
def plain(unit: str) -> bytes:
    """Return the starter of the default settings."""
    return starter(unit, Settings())


@cache
def issued(unit: str) -> tuple[bytes, Outcome]:
    """Return it solved."""
    return solve_bytes(plain(unit), Options())


def checked(outcome: Outcome) -> Outcome:
    """Check that nothing needs an engineer's eye."""
    assert {f.severity for f in outcome.findings} == {Severity.NOTE}
    assert outcome.exit_code == 0
    return outcome


def formed(outcome: Outcome) -> FormedCable:
    """Return the one cable."""
    assert outcome.solution is not None
    (cable,) = outcome.solution.cables
    return cable


@pytest.mark.parametrize("unit", UNITS)
def test_a_starter_reads_without_anything_worse_than_notes(unit: str) -> None:
    outcome = read_bytes(plain(unit), Options())
    assert outcome.exit_code == 0
    assert outcome.layout is not None
    (cable,) = outcome.layout.cables
    expected = EXPECTED[unit]
    assert (outcome.layout.length_unit, outcome.layout.force_unit) == (unit, expected.force_unit)
    left, right = cable.supports
    assert right.x - left.x == pytest.approx(expected.span, rel=1e-9)
    assert right.y - left.y == pytest.approx(expected.rise, rel=1e-9)
    assert [point.mark for point in cable.loads] == ["P1", "P2", "P3", "P4", "P5"]
    assert tuple(dict(point.cases)["D"] for point in cable.loads) == expected.loads
    assert all("L" in dict(point.cases) for point in cable.loads)
    assert cable.frame is not None
    assert cable.deck
    assert cable.clearance
    assert cable.datum is not None
    assert (len(outcome.layout.masts), len(outcome.layout.stays)) == (1, 1)
    (stay,) = outcome.layout.stays
    assert stay.anchor is not None
    assert stay.anchor.mark == "A1"


@pytest.mark.parametrize("unit", UNITS)
def test_pull_and_tension_are_those_of_statics(unit: str) -> None:
    # OWN: general cable theorem, H times sag is the simple beam's moment (here at midspan, the
    # middle load); the end's vertical force is the beam's reaction and H times the slope.
    expected = EXPECTED[unit]
    panel = expected.span / 6
    reaction = sum(expected.loads) / 2
    moment = reaction * 3 * panel - sum(
        load * (3 - k) * panel for k, load in enumerate(expected.loads[:2], start=1)
    )
    pull = moment / expected.sag
    up = reaction - pull * expected.rise / expected.span
    cable = formed(checked(issued(unit)[1]))
    assert cable.sag == pytest.approx(expected.sag, rel=1e-9)
    assert cable.horizontal == pytest.approx(pull, rel=1e-9)
    assert cable.max_tension == pytest.approx(math.hypot(pull, up), rel=1e-9)
    assert cable.governs.support == "S1"


@pytest.mark.parametrize("unit", UNITS)
def test_the_anchor_has_the_factors_that_it_asks_for(unit: str) -> None:
    solution = checked(issued(unit)[1]).solution
    assert solution is not None
    (anchorage,) = solution.anchorages
    (anchor,) = anchorage.anchors
    assert anchor.sliding_factor is not None
    assert anchor.uplift_factor is not None
    assert 1.5 <= anchor.sliding_factor < 2.0
    assert anchor.uplift_factor >= 1.5


@pytest.mark.parametrize("unit", UNITS)
def test_the_header_says_the_unit(unit: str) -> None:
    header = document(plain(unit)).header
    names = ("$INSUNITS", "$MEASUREMENT", "$LUNITS")
    assert tuple(header[name] for name in names) == EXPECTED[unit].header


@pytest.mark.parametrize("unit", UNITS)
def test_the_library_finds_nothing_to_mend(unit: str) -> None:
    for data in (plain(unit), issued(unit)[0]):
        auditor = document(data).audit()
        assert [e.message for e in [*auditor.errors, *auditor.fixes]] == []


@pytest.mark.parametrize("unit", UNITS)
def test_solving_and_stripping_gives_the_starter_back(unit: str) -> None:
    assert strip_bytes(issued(unit)[0])[0] == plain(unit)


def test_two_runs_give_the_same_bytes_whatever_the_order_of_sets() -> None:
    code = (
        "import hashlib, sys; from dxfcable.drawing.starter import starter; "
        "from dxfcable.settings import Settings; "
        "sys.stdout.write(hashlib.sha256(starter('m', Settings())).hexdigest())"
    )
    hashes = {
        subprocess.run(
            [sys.executable, "-c", code],
            env=os.environ | {"PYTHONHASHSEED": seed},
            check=True,
            capture_output=True,
            text=True,
        ).stdout
        for seed in ("1", "2")
    }
    assert hashes == {hashlib.sha256(plain("m")).hexdigest()}


@pytest.mark.parametrize("name", TAGS)
def test_every_value_of_a_block_has_an_attribute_with_a_prompt_and_no_default(name: str) -> None:
    block = document(plain("ft")).blocks.get(name)
    attributes = list(block.attdefs())
    assert sorted(a.dxf.tag for a in attributes) == sorted(TAGS[name])
    assert all(a.dxf.text == "" and len(a.dxf.prompt) > 10 for a in attributes)
    assert tuple(block.base_point) == (0.0, 0.0, 0.0)


def test_every_layer_of_the_settings_has_its_row() -> None:
    table = document(plain("m")).layers
    layers = Layers()
    for role in (*layers.input_roles(), *layers.output_roles()):
        assert layers.name(role) in table
    for role in layers.output_roles():
        row = table.get(layers.name(role))
        assert (row.color, row.dxf.lineweight) == (LOOKS[role].color, LOOKS[role].lineweight)


def test_texts_are_in_ascii_and_say_that_the_example_is_invented() -> None:
    data = plain("in")
    assert data.isascii()
    assert b"Invented example. Not for construction." in data


OTHER = Settings(
    layers=Layers(load="S-ANNO-NOTE", support="Lager", profile="Tr\u00e4ger", hanger="Tr\u00e4ger"),
    blocks=Blocks(data="SEIL-DATEN", load="LAST"),
    cases=Cases(letters=("G", "Q", "S"), alias=()),
    units=UnitSettings(decimal_comma=True),
    show=Show(text_style="B\u00fcro"),
)


@pytest.mark.parametrize("unit", UNITS)
def test_an_office_with_its_own_names_cases_and_comma_gets_a_starter_that_solves(
    unit: str,
) -> None:
    data = starter(unit, OTHER)
    outcome = checked(solve_bytes(data, Options(settings=OTHER))[1])
    assert formed(outcome).under == "G"
    doc = document(data)
    assert {"G", "Q", "S"} <= {a.dxf.tag for a in doc.blocks.get("LAST").attdefs()}
    assert data.isascii()


@pytest.mark.parametrize("unit", ["m", "in"])
@pytest.mark.parametrize("scale", ["1:20", "1:75", "1:1000"])
def test_texts_and_example_follow_the_plotting_scale_of_the_settings(unit: str, scale: str) -> None:
    settings = replace(Settings(), show=Show(plot_scale=scale))
    data = starter(unit, settings)
    outcome = checked(solve_bytes(data, Options(settings=settings))[1])
    codes = {f.code for f in outcome.findings}
    assert "diagram-placed" in codes
    assert "frame-small" not in codes
    placed = next(f for f in outcome.findings if f.code == "diagram-placed")
    assert "in the frame drawn" in placed.text


def test_another_unit_is_refused() -> None:
    with pytest.raises(DxfcableError, match="no unit of a starter"):
        starter("cm", Settings())
