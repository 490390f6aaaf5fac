"""The demonstration drawings are those that their script draws, and say that they are invented."""

from __future__ import annotations

from importlib.metadata import version
from typing import TYPE_CHECKING

import pytest
from ezdxf.filemanagement import readfile

from drawings import long_walkway, make_drawings
from drawings.load_changes import CHANGES
from dxfcable.job import Options, read_bytes, revise_bytes, solve_bytes, strip_bytes
from dxfcable.model import Severity

if TYPE_CHECKING:
    from pathlib import Path

NAMES = (
    "canopy_roof.dxf",
    "creek_footbridge.dxf",
    "pipe_crossing_r12.dxf",
    "twin_views_mm.dxf",
    "long_walkway_60.dxf",
    "deck_plan.dxf",
    "weir_footbridge.dxf",
    "gulch_pipe.dxf",
)
# Loads, supports, closing strings, masts, stays, anchors, decks, data blocks, frames.
COUNTS = {
    "canopy_roof.dxf": (9, 2, 0, 2, 2, 2, 0, 1, 1),
    "creek_footbridge.dxf": (11, 2, 1, 2, 2, 2, 1, 1, 1),
    "pipe_crossing_r12.dxf": (13, 4, 2, 0, 0, 0, 0, 2, 2),
    "twin_views_mm.dxf": (11, 4, 2, 2, 2, 2, 0, 2, 2),
    "long_walkway_60.dxf": (60, 2, 0, 2, 2, 2, 1, 1, 1),
    "deck_plan.dxf": (9, 2, 1, 2, 2, 2, 1, 1, 1),
    "weir_footbridge.dxf": (7, 2, 1, 2, 2, 2, 1, 1, 1),
    "gulch_pipe.dxf": (8, 2, 0, 0, 0, 0, 1, 1, 1),
}
RELEASES = {
    "canopy_roof.dxf": "AC1015",
    "creek_footbridge.dxf": "AC1024",
    "pipe_crossing_r12.dxf": "AC1009",
    "twin_views_mm.dxf": "AC1032",
    "long_walkway_60.dxf": "AC1021",
    "deck_plan.dxf": "AC1027",
    "weir_footbridge.dxf": "AC1024",
    "gulch_pipe.dxf": "AC1018",
}
# Cable, its rule, and the loads that form it, left to right; the scenario's own numbers.
_LOADS_A = (11.5, 12.5, 12.5, 15.0, 15.0, 12.5, 12.5, 11.5)
CABLES: dict[str, tuple[tuple[str, str, tuple[float, ...]], ...]] = {
    "canopy_roof.dxf": (
        ("C1", "max_tension", (14.0, 16.0, 18.0, 18.0, 21.0, 18.0, 18.0, 16.0, 14.0)),
    ),
    "creek_footbridge.dxf": (("C1", "low_point", (8.2, *[7.6] * 4, 9.1, *[7.6] * 4, 8.2)),),
    "pipe_crossing_r12.dxf": (
        ("A", "sag", _LOADS_A),
        ("B", "pull", (8.0, 8.0, 9.6, 8.0, 8.0)),
    ),
    "twin_views_mm.dxf": (
        ("C1", "max_tension", (12.5, 14.25, 14.25, 16.75, 14.25, 14.25, 12.5)),
        ("C2", "sag", (6.4, 7.2, 7.2, 6.4)),
    ),
    "long_walkway_60.dxf": (
        (
            "C1",
            "through",
            tuple(2.6 if 29 <= k <= 32 else 2.15 if k % 10 == 0 else 1.8 for k in range(1, 61)),
        ),
    ),
    # 1.25 kPa on 4.0 x 2.4 m a hanger; at the sixth an opening of 1.0 x 0.8 m.
    "deck_plan.dxf": (("C1", "sag", (*[12.0] * 5, 11.0, *[12.0] * 3)),),
    "weir_footbridge.dxf": (("C1", "sag", (12.4, 12.0, 12.0, 13.5, 12.0, 12.0, 12.4)),),
    # Pipe and fluid at each saddle, a valve at the fifth.
    "gulch_pipe.dxf": (
        ("C1", "max_tension", tuple(d + 1.9 for d in (3.2, 3.0, 3.0, 3.0, 4.4, 3.0, 3.0, 3.2))),
    ),
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
    assert doc.dxfversion == RELEASES[name]
    layout = doc.modelspace()
    found = []
    for kind in KINDS:
        drawn = layout.query(f'*[layer=="S-CABL-{kind}"]')
        if kind == "LOAD":  # texts are values; of an arrow only the shaft is upright
            drawn = drawn.query("POINT CIRCLE INSERT LINE LEADER")
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


@pytest.mark.parametrize("name", NAMES)
def test_a_drawing_solves_by_its_rules_and_loads_without_anything_for_an_engineer_to_see(
    fresh: Path, name: str
) -> None:
    units = "m" if name.endswith("_r12.dxf") else None  # R12 states none
    data, outcome = solve_bytes((fresh / name).read_bytes(), Options(units=units))
    assert {f.severity for f in outcome.findings} == {Severity.NOTE}
    assert outcome.solution is not None
    found = [
        (cable.mark, cable.rule.kind.value, tuple(n.load for n in cable.nodes if not n.is_support))
        for cable in outcome.solution.cables
    ]
    assert found == list(CABLES[name])
    assert strip_bytes(data)[0] == (fresh / name).read_bytes()


def test_the_long_walkway_passes_through_its_point(fresh: Path) -> None:
    data = (fresh / "long_walkway_60.dxf").read_bytes()
    solution = solve_bytes(data, Options())[1].solution
    assert solution is not None
    (cable,) = solution.cables
    (x, y) = long_walkway.THROUGH
    (piece,) = [s for s in cable.segments if s.start[0] < x < s.end[0]]
    share = (x - piece.start[0]) / (piece.end[0] - piece.start[0])
    there = piece.start[1] + share * (piece.end[1] - piece.start[1])
    assert there == pytest.approx(y, rel=1e-9)


def test_mirrored_supports_stand_where_their_base_points_are(fresh: Path) -> None:
    outcome = read_bytes((fresh / "twin_views_mm.dxf").read_bytes(), Options())
    assert outcome.layout is not None
    places = {s.mark: (s.x, s.y, s.stated_elevation) for s in outcome.layout.supports}
    assert places["S2"] == (32000.0, 8400.0, 108400.0)
    assert places["S4"] == (65000.0, 7600.0, 107600.0)


@pytest.mark.parametrize("name", CHANGES)
def test_a_load_change_is_answered_from_the_issued_drawing(fresh: Path, name: str) -> None:
    change = CHANGES[name]
    issued, before = change.issue((fresh / name).read_bytes())
    revised, after = change.revise(issued)
    assert {f.severity for f in (*before.findings, *after.findings)} == {Severity.NOTE}
    assert before.solution is not None
    assert after.solution is not None
    (old,), (new,) = before.solution.cables, after.solution.cables
    assert [s.combo for s in new.states] == list(change.combos)
    assert new.envelope is not None
    # Whatever the shape: the supports carry what was added, and the pull is one and the same.
    added = sum(n.load for n in new.nodes) - sum(n.load for n in old.nodes)
    assert added > 0.0
    assert sum(r.vertical for r in new.reactions) - sum(r.vertical for r in old.reactions) == (
        pytest.approx(added, rel=1e-9)
    )
    if change.is_cut:
        assert new.status == "cut"
        assert [s.unstressed_length for s in new.segments] == pytest.approx(
            [s.unstressed_length for s in old.segments], rel=1e-12
        )
    else:
        assert new.max_tension == pytest.approx(old.max_tension, rel=1e-9)
        assert new.sag > old.sag
    # The record keeps the loads of the table: asked again without it, nothing changes.
    assert revise_bytes(revised, Options(), change.revision)[0] == revised
    assert strip_bytes(revised)[0] == (fresh / name).read_bytes()
