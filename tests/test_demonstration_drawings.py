"""The demonstration drawings are those that their script draws, and say that they are invented."""

from __future__ import annotations

from importlib.metadata import version
from typing import TYPE_CHECKING

import pytest
from ezdxf.filemanagement import readfile

from drawings import make_drawings

if TYPE_CHECKING:
    from pathlib import Path

NAMES = ("canopy_roof.dxf", "creek_footbridge.dxf", "pipe_crossing_r12.dxf")
# Loads, supports, closing strings, masts, stays, anchors, decks, data blocks, frames.
COUNTS = {
    "canopy_roof.dxf": (9, 2, 0, 2, 2, 2, 0, 1, 1),
    "creek_footbridge.dxf": (11, 2, 1, 2, 2, 2, 1, 1, 1),
    "pipe_crossing_r12.dxf": (13, 4, 2, 0, 0, 0, 0, 2, 2),
}
KINDS = ("LOAD", "SUPP", "STRG", "MAST", "STAY", "ANCH", "DECK", "DATA", "FRAM")


@pytest.fixture(scope="module")
def fresh(tmp_path_factory: pytest.TempPathFactory) -> Path:
    folder = tmp_path_factory.mktemp("drawn")
    assert [p.name for p in make_drawings.write(folder)] == list(NAMES)
    return folder


def test_two_runs_of_the_script_write_the_same_bytes(fresh: Path, tmp_path: Path) -> None:
    for path in make_drawings.write(tmp_path):
        assert path.read_bytes() == (fresh / path.name).read_bytes()


@pytest.mark.parametrize("name", NAMES)
@pytest.mark.skipif(
    not version("ezdxf").startswith("1.4."),
    reason="another ezdxf may order its own tags differently",
)
def test_the_drawings_beside_the_script_are_up_to_date(fresh: Path, name: str) -> None:
    assert (make_drawings.HERE / name).read_bytes() == (fresh / name).read_bytes()


@pytest.mark.parametrize("name", NAMES)
def test_a_drawing_has_what_the_scenario_says_and_no_fault(fresh: Path, name: str) -> None:
    doc = readfile(fresh / name)
    layout = doc.modelspace()
    found = []
    for kind in KINDS:
        drawn = layout.query(f'*[layer=="S-CABL-{kind}"]')
        if kind == "LOAD":  # texts are values; of an arrow only the shaft is upright
            drawn = drawn.query("POINT CIRCLE INSERT LINE")
            strokes = [e for e in drawn if e.dxftype() == "LINE"]
            slanted = [e for e in strokes if e.dxf.start.x != e.dxf.end.x]
            found.append(len(drawn) - len(slanted))
        else:
            found.append(len(drawn))
    assert tuple(found) == COUNTS[name]
    auditor = doc.audit()
    assert [e.message for e in [*auditor.errors, *auditor.fixes]] == []


@pytest.mark.parametrize("name", NAMES)
def test_a_drawing_says_that_it_is_invented(fresh: Path, name: str) -> None:
    texts = [str(e.dxf.text) for e in readfile(fresh / name).modelspace().query("TEXT")]
    assert "INVENTED, FOR DEMONSTRATION ONLY" in texts
