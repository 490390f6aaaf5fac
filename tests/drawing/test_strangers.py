"""What stands on our layers without a mark of ours is told, and never touched."""

from __future__ import annotations

from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.strangers import strangers
from dxfcable.job import Options, solve_bytes, strip_bytes
from dxfcable.settings import Settings
from tests.generated import CableOptions, copy_records, drawing
from tests.tampering import unmarked

F = drawing("AC1015", seed=3, layout=CableOptions())
ISSUED = solve_bytes(F, Options(units="m"))[0]


def test_a_drafters_own_drawing_has_nothing_on_our_layers() -> None:
    assert strangers(scan(F), Settings()) == ()


def test_an_issue_that_lost_its_marks_is_told_and_kept() -> None:
    bare = unmarked(ISSUED)
    result, outcome = solve_bytes(bare, Options(units="m"))
    (note,) = [f for f in outcome.findings if f.code == "unmarked"]
    assert "S-CABL-PROF" in note.text
    assert note.line is not None
    assert strip_bytes(result)[0] == bare


def test_copies_that_still_carry_marks_are_told_as_copies_only() -> None:
    copied = strip_bytes(copy_records(ISSUED, 500.0, 0.0))[0]
    assert strangers(scan(copied), Settings()) == ()
