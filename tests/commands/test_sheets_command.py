"""`sheets` as a user meets it: files and their names, the index, second runs, what is refused."""

from __future__ import annotations

import csv
import json
import sys
from pathlib import Path
from typing import TYPE_CHECKING

import pypdfium2
import pytest
from typer.testing import CliRunner

from dxfcable.asking import Options
from dxfcable.cli import app
from dxfcable.drawing.sheeting.sheet import MARK
from dxfcable.errors import DxfcableError
from dxfcable.settings import Settings
from dxfcable.sheets.sheet_making import Order, make_index, make_sheets
from dxfcable.sheets.sheet_set import Numbers, check_name, page_names, read_index
from dxfcable.sheets.sheet_solving import solved_for_sheets
from tests.drawing.sheet_cases import faults
from tests.generated import CableOptions, change_load_text, drawing

if TYPE_CHECKING:
    from collections.abc import Mapping

RUNNER = CliRunner()
DRAWINGS = Path(__file__).parents[2] / "drawings"


def run(*arguments: object) -> tuple[int, str, str]:
    result = RUNNER.invoke(app, ["sheets", *(str(a) for a in arguments)])
    if result.exception is not None and not isinstance(result.exception, SystemExit):
        raise result.exception
    return result.exit_code, result.stdout, result.stderr


def contents(folder: Path) -> Mapping[str, bytes]:
    return {path.name: path.read_bytes() for path in sorted(folder.iterdir())}


def index_of(folder: Path) -> list[dict[str, str]]:
    text = (folder / "index.csv").read_text(encoding="utf-8")
    return list(csv.DictReader(text.splitlines()))


def small(path: Path, *loads: str) -> Path:
    options = CableOptions(loads=loads or ("12 kN", "15 kN", "9.5 kN"))
    path.write_bytes(drawing("AC1015", seed=3, layout=options))
    return path


@pytest.fixture
def bridge(tmp_path: Path) -> Path:
    return small(tmp_path / "bridge.dxf")


@pytest.fixture
def light(monkeypatch: pytest.MonkeyPatch) -> None:
    """Write no more than our mark as DXF, which takes most of the time and is not asked about."""
    monkeypatch.setattr("dxfcable.sheets.sheet_making.sheet_dxf", lambda *_: MARK.encode())


def test_each_cable_gets_three_files_and_the_set_an_index(bridge: Path, tmp_path: Path) -> None:
    folder = tmp_path / "sheets"
    code, out, _ = run(bridge, "-d", folder, "--json")
    assert code == 0
    names = ["bridge-C1.dxf", "bridge-C1.pdf", "bridge-C1.svg"]
    shared = ["index.csv", "index.dxf", "index.pdf", "index.svg", "set.pdf"]
    assert sorted(contents(folder)) == sorted([*names, *shared])
    written = json.loads(out)["written"]
    assert sorted(written) == sorted(str(folder / name) for name in [*names, *shared])
    rows = index_of(folder)
    assert [(r["number"], r["drawing"], r["cables"], r["file"]) for r in rows] == [
        ("FD-001", "bridge", "C1", "bridge-C1")
    ]


def test_a_second_run_leaves_every_byte_and_every_other_file(bridge: Path, tmp_path: Path) -> None:
    folder = tmp_path / "sheets"
    folder.mkdir()
    (folder / "notes.txt").write_text("the office's own", encoding="utf-8")
    assert run(bridge, "-d", folder, "--checker")[0] == 0
    before, times = contents(folder), {p.name: p.stat().st_mtime_ns for p in folder.iterdir()}
    code, out, _ = run(bridge, "-d", folder, "--checker")
    assert code == 0
    assert contents(folder) == before
    assert {p.name: p.stat().st_mtime_ns for p in folder.iterdir()} == times
    assert "unchanged" in out
    assert before["notes.txt"] == b"the office's own"


@pytest.mark.parametrize("name", ["", pytest.param("creek_footbridge.dxf", marks=pytest.mark.slow)])
def test_solved_and_unsolved_drawings_give_the_same_sheets(name: str, tmp_path: Path) -> None:
    (tmp_path / "a").mkdir()
    (tmp_path / "b").mkdir()
    plain, solved = tmp_path / "a" / "bridge.dxf", tmp_path / "b" / "bridge.dxf"
    if name:
        plain.write_bytes((DRAWINGS / name).read_bytes())
    else:
        small(plain)
    RUNNER.invoke(app, ["solve", str(plain), "-o", str(solved)])
    assert solved.read_bytes() != plain.read_bytes()
    assert run(plain, "-d", tmp_path / "x", "--checker")[0] == 0
    assert run(solved, "-d", tmp_path / "y", "--checker")[0] == 0
    assert contents(tmp_path / "x") == contents(tmp_path / "y")


@pytest.mark.usefixtures("light")
def test_a_solved_drawing_keeps_its_combinations_rule_and_loads_on_the_sheets(
    tmp_path: Path,
) -> None:
    source = tmp_path / "span.dxf"
    source.write_bytes(drawing("AC1015", seed=3, layout=CableOptions(rule=None)))
    table = tmp_path / "loads.csv"
    table.write_text("mark,load\nP1,40 kN\n", encoding="utf-8")
    solved = tmp_path / "solved.dxf"
    arguments = ["solve", source, "-o", solved, "--sag", "2.4 m", "--loads", table]
    assert RUNNER.invoke(app, [str(a) for a in arguments]).exit_code == 0
    assert run(source, "-d", tmp_path / "x")[0] == 2  # no rule
    assert run(solved, "-d", tmp_path / "y")[0] == 0
    words = text_of(tmp_path / "y" / "solved-C1.pdf")
    assert "SAG 2.400 m" in words
    assert "DRAWN, kN" in words

    cases = small(tmp_path / "cases.dxf", "D=12 kN L=5 kN", "D=15 kN L=5 kN")
    both = tmp_path / "both.dxf"
    RUNNER.invoke(app, ["solve", str(cases), "-o", str(both), "--combo", "D + L"])
    assert run(both, "-d", tmp_path / "z")[0] == 0
    words = text_of(tmp_path / "z" / "both-C1.pdf")
    assert "COMBINATIONS ON CABLE C1, UNSTRESSED LENGTHS FIXED" in words
    assert "ENVELOPE OF TENSIONS, CABLE C1" in words


def text_of(path: Path) -> str:
    """Give the text of a PDF's first page."""
    page = pypdfium2.PdfDocument(path.read_bytes())[0]
    words: str = page.get_textpage().get_text_range()
    return words


@pytest.mark.usefixtures("light")
def test_a_cut_cable_says_that_its_lengths_are_held(tmp_path: Path) -> None:
    cut = tmp_path / "cut.dxf"
    bridge = small(tmp_path / "bridge.dxf")
    RUNNER.invoke(app, ["solve", str(bridge), "-o", str(cut), "--cut"])
    run(cut, "-d", tmp_path / "x")
    words = text_of(tmp_path / "x" / "cut-C1.pdf")
    assert "HELD: UNSTRESSED LENGTH OF EACH PIECE" in words
    assert "FIRST FORMED BY" in words


@pytest.mark.usefixtures("light")
def test_several_drawings_make_one_set_in_the_order_of_their_names(tmp_path: Path) -> None:
    names = [f"span-{letter}" for letter in "cba"]
    drawings = [
        small(tmp_path / f"{name}.dxf", f"{k + 9} kN", "15 kN") for k, name in enumerate(names)
    ]
    folder = tmp_path / "set"
    assert run(*drawings, "-d", folder, "--size", "A3")[0] == 0
    rows = index_of(folder)
    assert [r["drawing"] for r in rows] == sorted(names)
    assert [r["number"] for r in rows] == [f"FD-{k:03d}" for k in range(1, 4)]
    pages = sum(int(r["sheets"]) for r in rows)
    whole = pypdfium2.PdfDocument((folder / "set.pdf").read_bytes())
    assert len(whole) == pages + 1  # and the index
    assert "INDEX OF SHEETS" in whole[0].get_textpage().get_text_range()
    for page in whole:
        assert page.get_size() == pytest.approx((420 * 72 / 25.4, 297 * 72 / 25.4), abs=0.01)
        assert "Preliminary calculation aid." in page.get_textpage().get_text_range()


@pytest.mark.usefixtures("light")
def test_sheets_keep_their_numbers_when_others_come(tmp_path: Path) -> None:
    folder = tmp_path / "set"
    second, first = small(tmp_path / "m.dxf"), small(tmp_path / "a.dxf")
    assert run(second, "-d", folder)[0] == 0
    before = contents(folder)
    code, out, _ = run(first, "-d", folder)
    assert code == 0
    assert "set.pdf is not renewed" in out
    rows = index_of(folder)
    assert {r["file"]: r["number"] for r in rows} == {"m-C1": "FD-001", "a-C1": "FD-002"}
    after = contents(folder)
    assert {n: d for n, d in after.items() if n.startswith(("m-", "set"))} == {
        n: d for n, d in before.items() if n.startswith(("m-", "set"))
    }


@pytest.mark.usefixtures("light")
def test_a_drawing_that_is_refused_stops_no_other(bridge: Path, tmp_path: Path) -> None:
    bad = tmp_path / "bad.dxf"
    bad.write_bytes(b"no drawing")
    folder = tmp_path / "set"
    code, _, err = run(bad, bridge, "-d", folder)
    assert code == 2
    assert "bad.dxf: not done, nothing written" in err
    assert (folder / "bridge-C1.dxf").exists()
    assert not list(folder.glob("bad*"))


@pytest.mark.usefixtures("light")
def test_nothing_is_written_over_what_is_no_sheet(bridge: Path, tmp_path: Path) -> None:
    folder = tmp_path / "set"
    folder.mkdir()
    (folder / "bridge-C1.dxf").write_bytes(bridge.read_bytes())
    before = contents(folder)
    with pytest.raises(DxfcableError, match="is no sheet of an earlier run"):
        run(bridge, "-d", folder)
    assert contents(folder) == before
    (folder / "bridge-C1.dxf").unlink()
    (folder / "index.csv").write_text("name,price\n", encoding="utf-8")
    with pytest.raises(DxfcableError, match="is no index of sheets"):
        run(bridge, "-d", folder)


def test_sheets_of_one_name_are_refused_before_anything_is_done(tmp_path: Path) -> None:
    (tmp_path / "x").mkdir()
    twins = [small(tmp_path / "roof.dxf"), small(tmp_path / "x" / "ROOF.dxf")]
    with pytest.raises(DxfcableError, match="would have the same names"):
        run(*twins, "-d", tmp_path / "set")
    assert not (tmp_path / "set").exists()


def test_a_size_that_is_none_is_refused_by_name(bridge: Path, tmp_path: Path) -> None:
    with pytest.raises(DxfcableError, match='"B5" is no size of paper'):
        run(bridge, "-d", tmp_path / "set", "--size", "B5")


@pytest.mark.usefixtures("light")
def test_without_the_library_for_pdf_the_rest_is_written_and_the_missing_named(
    bridge: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setitem(sys.modules, "reportlab", None)
    folder = tmp_path / "set"
    code, out, err = run(bridge, "-d", folder)
    assert code == 1
    assert "bridge-C1.pdf" in out + err
    assert "pip install" in out + err
    assert sorted(contents(folder)) == [
        *("bridge-C1.dxf", "bridge-C1.svg", "index.csv", "index.dxf", "index.svg")
    ]


@pytest.mark.usefixtures("light")
def test_the_office_fills_the_title_block(bridge: Path, tmp_path: Path) -> None:
    page = '[sheet]\nsize = "ARCH-C"\nowner = "Invented Office"\nnumber_prefix = "S-4"\n'
    page += 'drawn = "NN"\nstatus = "FOR CHECK"\n'
    (tmp_path / "dxfcable.toml").write_text(page, encoding="utf-8")
    folder = tmp_path / "set"
    assert run(bridge, "-d", folder)[0] == 0
    sheet = folder / "bridge-C1.pdf"
    words = text_of(sheet)
    assert {"Invented Office", "NN", "FOR CHECK", "S-4001"} <= set(words.splitlines())
    assert pypdfium2.PdfDocument(sheet.read_bytes())[0].get_size() == pytest.approx(
        (24 * 72, 18 * 72), abs=0.01
    )


@pytest.mark.usefixtures("light")
def test_a_scale_that_is_asked_for_is_taken_where_it_fits(bridge: Path, tmp_path: Path) -> None:
    assert run(bridge, "-d", tmp_path / "x", "--plot-scale", "1:250")[0] == 0
    assert "1:250, NOT EXAGGERATED" in text_of(tmp_path / "x" / "bridge-C1.pdf")
    code, out, _ = run(bridge, "-d", tmp_path / "y", "--plot-scale", "1:10")
    assert code == 0
    assert "does not fit the sheet at the scale asked for" in out


@pytest.mark.usefixtures("light")
def test_what_an_earlier_run_left_over_is_named_and_left(tmp_path: Path) -> None:
    source = DRAWINGS / "twin_views_mm.dxf"
    folder = tmp_path / "set"
    assert run(source, "-d", folder, "--size", "ARCH-D")[0] == 0
    code, out, _ = run(source, "-d", folder, "--size", "ARCH-D", "--together")
    assert code == 0
    assert (folder / "twin_views_mm-C1+C2.dxf").exists()
    assert "no longer of the set: twin_views_mm-C1, twin_views_mm-C2" in out
    assert (folder / "twin_views_mm-C2.dxf").exists()


@pytest.mark.usefixtures("light")
def test_an_issued_drawing_that_was_changed_says_so(bridge: Path, tmp_path: Path) -> None:
    issued = tmp_path / "issued.dxf"
    RUNNER.invoke(app, ["solve", str(bridge), "-o", str(issued)])
    code, out, _ = run(issued, "-d", tmp_path / "set")
    assert code == 0
    issued.write_bytes(change_load_text(issued.read_bytes(), 0, b"18 kN"))
    code, out, _ = run(issued, "-d", tmp_path / "set")
    words = " ".join(out.split())
    assert code == 1
    assert "the drawing changed since it was issued: load" in words
    assert "the sheet shows it as it is drawn now" in words


@pytest.mark.usefixtures("light")
def test_a_long_number_stands_whole_and_one_that_cannot_is_refused(
    bridge: Path, tmp_path: Path
) -> None:
    prefix = "PRJ-2026-0001-STR-CABLE-FD-"
    page = tmp_path / "dxfcable.toml"
    page.write_text(f'[sheet]\nnumber_prefix = "{prefix}"\n', encoding="utf-8")
    for size in ("A1", "A4", "ANSI-A", "ARCH-D"):
        folder = tmp_path / size
        assert run(bridge, "-d", folder, "--size", size)[0] == 0
        words = "".join(text_of(folder / "bridge-C1.pdf").split())
        assert f"{prefix}001" in words
    page.write_text(f'[sheet]\nnumber_prefix = "{4 * prefix}"\n', encoding="utf-8")
    code, _, error = run(bridge, "-d", tmp_path / "none")
    assert code == 2
    assert "does not fit the title block" in " ".join(error.split())


@pytest.mark.usefixtures("light")
def test_fields_that_are_cut_and_characters_that_the_pdf_lacks_are_named(
    bridge: Path, tmp_path: Path
) -> None:
    page = tmp_path / "dxfcable.toml"
    long = "A very long name of an office " * 8
    page.write_text(f'[sheet]\nowner = "{long}"\ndrawn = "NN"\n', encoding="utf-8")
    code, out, _ = run(bridge, "-d", tmp_path / "a")
    assert code == 0
    assert "LEGAL OWNER (owner in [sheet])" in " ".join(out.split())
    page.write_text('[sheet]\nproject = "\u0141\u00f3d\u017a"\n', encoding="utf-8")
    code, out, _ = run(bridge, "-d", tmp_path / "b")
    assert code == 1
    words = " ".join(out.split())
    assert "U+0141" in words
    assert "PROJECT (project in [sheet])" in words


@pytest.mark.usefixtures("light")
def test_a_changed_load_changes_its_sheet(bridge: Path, tmp_path: Path) -> None:
    folder = tmp_path / "set"
    run(bridge, "-d", folder)
    before = contents(folder)
    bridge.write_bytes(change_load_text(bridge.read_bytes(), 0, b"18 kN"))
    run(bridge, "-d", folder)
    after = contents(folder)
    assert after["bridge-C1.svg"] != before["bridge-C1.svg"]
    assert after["index.csv"] == before["index.csv"]


@pytest.mark.usefixtures("light")
@pytest.mark.parametrize(
    ("name", "size"),
    [
        ("canopy_roof", "ANSI-B"),
        *(
            pytest.param(name, size, marks=pytest.mark.slow)
            for name, size in (
                *(
                    ("canopy_roof", "A1"),
                    ("creek_footbridge", "A1"),
                    ("creek_footbridge", "ANSI-B"),
                ),
                *(("twin_views_mm", "A1"), ("twin_views_mm", "ANSI-B")),
            )
        ),
    ],
)
def test_sheets_and_checkers_pages_of_drawings_keep_clear(name: str, size: str) -> None:
    options = Options(combos=() if name == "canopy_roof" else ("D + L", "0.9D"))
    outcome = solved_for_sheets((DRAWINGS / f"{name}.dxf").read_bytes(), options)
    order = Order(drawing=name, settings=Settings(), size=size, together=True, checker=True)
    made = make_sheets(outcome, order, Numbers())
    index = make_index(made.rows, Settings(), size)
    for sheet in (*made.sheets, *index.sheets):
        assert faults(sheet) == [], sheet.stem


# --- names and numbers -------------------------------------------------------------------------


def test_names_of_further_sheets_never_meet_those_of_other_cables() -> None:
    assert page_names("roof-C1", 2, ["roof-C2"]) == ("roof-C1", "roof-C1-2")
    assert page_names("roof-C1", 2, ["roof-c1-2"]) == ("roof-C1", "roof-C1-sheet-2")
    assert check_name("roof-C1", ["roof-C1-check"]) == "roof-C1-check-page"


def test_new_numbers_follow_the_greatest_one_of_their_prefix() -> None:
    numbers = Numbers({"a-C1": "FD-007", "b-C1": "X-3"})
    assert numbers.number("a-C1", "FD-") == "FD-007"
    assert numbers.number("c-C1", "FD-") == "FD-008"
    assert numbers.number("b-C1", "FD-") == "FD-009"  # another prefix now


def test_an_index_that_is_cut_is_refused() -> None:
    with pytest.raises(DxfcableError, match="is no index"):
        read_index("", "index.csv")
    head = "number,rev,title,drawing,cables,file,sheets,size,scale,status\n"
    assert read_index(head, "index.csv") == ()
    with pytest.raises(DxfcableError, match="is no index"):
        read_index(head + "FD-001,,T\n", "index.csv")
