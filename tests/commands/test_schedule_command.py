"""`schedule` as a user meets it: tables, CSV files, JSON, exit codes."""

from __future__ import annotations

import csv
import io
import json
from dataclasses import replace
from typing import TYPE_CHECKING, Protocol

import pytest
from typer.testing import CliRunner

from dxfcable.cli import app
from dxfcable.job import CAUTION
from dxfcable.scheduling.schedule_csv import TABLES, is_ours, schedule_csv
from dxfcable.scheduling.schedule_terminal import show_schedules
from dxfcable.scheduling.schedules import schedules
from dxfcable.settings import Settings, load
from dxfcable.solving.solve import Forming, solve
from tests.crossing import crossing, layout
from tests.generated import RULELESS, CableOptions, change_load_text, drawing
from tests.layouts import sample

if TYPE_CHECKING:
    from pathlib import Path

    from dxfcable.model import Layout
    from dxfcable.scheduling.schedule_rows import Schedules

RUNNER = CliRunner()


class Result(Protocol):
    """What a run left: the parts of the runner's result that are used here."""

    @property
    def exit_code(self) -> int: ...
    @property
    def output(self) -> str: ...
    @property
    def stdout(self) -> str: ...
    @property
    def stderr(self) -> str: ...


def run(*arguments: object) -> Result:
    return RUNNER.invoke(app, [str(a) for a in arguments])


@pytest.fixture
def bridge(tmp_path: Path) -> Path:
    path = tmp_path / "bridge.dxf"
    path.write_bytes(drawing("AC1015", seed=3, layout=CableOptions()))
    return path


def whole(drawn: Layout, page: str = "", *combos: str) -> Schedules:
    office = load(page)
    return schedules(drawn, solve(drawn, Forming(combos=combos), office), office)


def rows(text: str, delimiter: str = ",") -> list[list[str]]:
    return list(csv.reader(io.StringIO(text), delimiter=delimiter))


def column(text: str, heading: str) -> list[str]:
    head, *body = rows(text)
    return [line[head.index(heading)] for line in body[:-1]]


def test_the_tables_hold_lengths_hangers_and_the_caution(bridge: Path) -> None:
    before = bridge.read_bytes()
    result = run("schedule", bridge)
    assert result.exit_code == 0
    assert "Cable schedule: C1" in result.output
    assert "Hanger schedule: C1, lengths and forces under load" in result.output
    assert "SAG 2.400 m" in result.output
    assert result.output.count(CAUTION) == 2
    assert bridge.read_bytes() == before
    assert [p.name for p in bridge.parent.iterdir()] == ["bridge.dxf"]


def test_the_document_has_exact_numbers_and_words_beside_them(bridge: Path) -> None:
    document = json.loads(run("schedule", bridge, "--json").stdout)
    solved = json.loads(run("solve", bridge, "--dry-run", "--json").stdout)
    assert document["format"] == 1
    assert document["drawing"] == "bridge.dxf"
    assert (document["length_unit"], document["force_unit"]) == ("m", "kN")
    (cable,), (own,) = document["cables"], solved["cables"]
    for key in ("mark", "rule", "under", "level", "length", "unstressed_length", "max_tension"):
        assert cable[key] == own[key]
    assert cable["words"]["length"] == f"{cable['length']:.3f} m"
    points = [p for p in own["points"] if p.get("hanger")]
    assert len(document["hangers"]) == len(points) == 3
    for hanger, point in zip(document["hangers"], points, strict=True):
        assert (hanger["cable"], hanger["mark"]) == ("C1", point["mark"])
        assert hanger["length"] == point["hanger"]
        assert hanger["force"] == point["load"]
        assert hanger["words"]["length"] == f"{hanger['length']:.3f} m"
    assert document["anchorages"] == []
    assert document["caution"] == CAUTION
    assert {"code", "severity", "text"} <= set(document["findings"][0])


def test_a_solved_drawing_has_the_schedule_of_the_unsolved_one(
    bridge: Path, tmp_path: Path
) -> None:
    solved = tmp_path / "solved.dxf"
    assert run("solve", bridge, "-o", solved).exit_code == 0
    first = json.loads(run("schedule", bridge, "--json").stdout)
    again = json.loads(run("schedule", solved, "--json").stdout)
    for key in ("cables", "hangers", "anchorages"):
        assert first[key] == again[key]


def test_a_cut_cable_keeps_its_lengths_in_the_schedule(bridge: Path, tmp_path: Path) -> None:
    solved = tmp_path / "solved.dxf"
    assert run("solve", bridge, "-o", solved, "--cut").exit_code in (0, 1)
    first = json.loads(run("schedule", bridge, "--json").stdout)["cables"][0]
    cut = json.loads(run("schedule", solved, "--json").stdout)["cables"][0]
    assert (first["status"], cut["status"]) == ("formed", "cut")
    assert cut["unstressed_length"] == pytest.approx(first["unstressed_length"], rel=1e-12)


def test_combinations_are_checked_on_the_way(bridge: Path) -> None:
    (cable,) = json.loads(run("schedule", bridge, "--combo", "factored: 1.5load", "--json").stdout)[
        "cables"
    ]
    levels = {r["level"]: r for r in cable["tensions"]}
    assert levels["factored"]["combo"] == "1.5load"
    assert not levels["factored"]["level_assumed"]
    assert levels["factored"]["value"] > levels["service"]["value"]


def test_csv_files_are_written_once_and_then_unchanged(bridge: Path, tmp_path: Path) -> None:
    folder = tmp_path / "out" / "schedules"
    result = run("schedule", bridge, "--csv", folder)
    assert result.exit_code == 0
    names = [f"bridge-{name}.csv" for name in TABLES]
    assert sorted(p.name for p in folder.iterdir()) == sorted(names)
    before = {p.name: (p.read_bytes(), p.stat().st_mtime_ns) for p in folder.iterdir()}
    again = run("schedule", bridge, "--csv", folder)
    assert again.output.count("unchanged: ") == 3
    assert {p.name: (p.read_bytes(), p.stat().st_mtime_ns) for p in folder.iterdir()} == before
    for name in names:
        assert (folder / name).read_text(encoding="utf-8").splitlines()[-1] == CAUTION


def test_the_document_names_the_files(bridge: Path, tmp_path: Path) -> None:
    document = json.loads(run("schedule", bridge, "--csv", tmp_path / "c", "--json").stdout)
    assert document["written"] == [str(tmp_path / "c" / f"bridge-{name}.csv") for name in TABLES]


def test_a_file_of_another_kind_is_not_overwritten(bridge: Path, tmp_path: Path) -> None:
    folder = tmp_path / "out"
    folder.mkdir()
    (folder / "bridge-hangers.csv").write_text("my,own\n1,2\n", encoding="utf-8")
    (folder / "notes.txt").write_text("mine", encoding="utf-8")
    result = run("schedule", bridge, "--csv", folder)
    assert result.exit_code == 2
    assert "bridge-hangers.csv is no schedule of dxfcable" in result.stderr.replace("\n", "")
    assert sorted(p.name for p in folder.iterdir()) == ["bridge-hangers.csv", "notes.txt"]
    assert (folder / "bridge-hangers.csv").read_text(encoding="utf-8") == "my,own\n1,2\n"


def test_names_that_would_meet_and_a_folder_that_is_a_file_are_refused(
    bridge: Path, tmp_path: Path
) -> None:
    other = tmp_path / "b" / "BRIDGE.dxf"
    other.parent.mkdir()
    other.write_bytes(bridge.read_bytes())
    with pytest.raises(Exception, match="would have the same names"):
        RUNNER.invoke(
            app,
            ["schedule", str(bridge), str(other), "--csv", str(tmp_path / "o")],
            catch_exceptions=False,
        )
    with pytest.raises(Exception, match="is a file"):
        RUNNER.invoke(app, ["schedule", str(bridge), "--csv", str(bridge)], catch_exceptions=False)


def test_a_drawing_that_cannot_be_solved_is_refused_and_others_are_scheduled(
    bridge: Path, tmp_path: Path
) -> None:
    ruleless = tmp_path / "ruleless.dxf"
    ruleless.write_bytes(drawing("AC1015", seed=3, layout=RULELESS))
    result = run("schedule", ruleless, bridge, "--csv", tmp_path / "o", "--json")
    assert result.exit_code == 2
    refused, done = json.loads(result.stdout)["drawings"]
    assert refused["error"]["code"] == "no-rule"
    assert done["cables"][0]["mark"] == "C1"
    assert len(list((tmp_path / "o").iterdir())) == 3


def test_numbers_of_the_csv_stand_without_their_unit() -> None:
    texts = schedule_csv(whole(sample(datum=0.0)))
    (length,) = column(texts["cables"], "unstressed length (m)")
    assert length == "24.480"
    assert column(texts["hangers"], "cable elevation (m)")[0] == "10.186"
    assert column(texts["anchorages"], "mast (kN)")[0].startswith("-52")
    assert column(texts["anchorages"], "member") == ["mast and support", "stay 1", "anchor 1"]


def test_feet_and_inches_of_the_csv_keep_their_marks() -> None:
    texts = schedule_csv(whole(layout(crossing())))
    assert column(texts["cables"], "length as formed (ft-in)") == ["123'-1 3/16\""]
    assert column(texts["hangers"], "length (ft-in)")[0] == "15'-8 3/16\""
    assert rows(texts["anchorages"]) == [["no anchorages"], [CAUTION]]


def test_feet_below_zero_get_no_apostrophe() -> None:
    texts = schedule_csv(whole(layout(crossing(None, datum=None))))
    levels = column(texts["hangers"], "cable elevation (ft-in)")
    assert all(level.startswith("-") for level in levels)


def test_an_issued_drawing_that_was_changed_says_so(bridge: Path, tmp_path: Path) -> None:
    issued = tmp_path / "issued.dxf"
    run("solve", bridge, "-o", issued)
    assert "since it was issued" not in run("schedule", issued).output
    issued.write_bytes(change_load_text(issued.read_bytes(), 0, b"18 kN"))
    result = run("schedule", issued, "--json")
    stale = [f for f in json.loads(result.stdout)["findings"] if f["code"] == "stale"]
    assert result.exit_code == 1
    assert "now 18; the schedule shows it as it is drawn now" in stale[0]["text"]


def test_a_decimal_comma_office_gets_semicolons_and_commas() -> None:
    texts = schedule_csv(whole(sample()), decimal_comma=True)
    head, first, _ = rows(texts["cables"], ";")
    assert first[head.index("unstressed length (m)")] == "24,480"
    assert first[head.index("rule")] == "SAG 2.400 m"


@pytest.mark.parametrize("mark", ["=1+1", "+1", "-1", "@x", '=HYPERLINK("x";"y")', "\tx"])
def test_a_text_of_the_drafter_is_no_formula_to_a_spreadsheet(mark: str) -> None:
    drawn = sample(mark=mark)
    texts = schedule_csv(whole(drawn))
    assert column(texts["cables"], "cable") == [f"'{mark}"]
    assert set(column(texts["hangers"], "cable")) == {f"'{mark}"}
    for text in texts.values():
        for row in rows(text):
            assert not [c for c in row if c.startswith(("=", "+", "@", "\t"))]


def test_our_own_files_are_known_again() -> None:
    texts = schedule_csv(whole(sample()))
    assert all(is_ours(text) for text in texts.values())
    assert is_ours("")
    assert not is_ours("a,b\n1,2\n")


def test_a_wide_table_is_never_cut_short() -> None:
    page = """
    [cut_length]
    fork = { pin_to_face = 0.1 }
    [cut_length.marks."*"]
    hanger_ea = "9000 kN"
    hanger_top = "fork"
    hanger_bottom = "fork"
    [cut_length.marks.P2]
    clamp_drop = 0.2
    """
    lines: list[str] = []
    found = whole(sample(), page, "service: 1.2D")
    show_schedules(found, lines.append)
    text = "\n".join(lines)
    assert "\N{HORIZONTAL ELLIPSIS}" not in text
    assert "Forces over all states of level service" in text
    assert " all: EA 9000 kN; fitting top fork" in text
    assert text.count(CAUTION) == 3
    assert f"{found.hangers[0].lengths.cut:.3f} m" in text


def test_marks_that_no_terminal_shows_are_escaped() -> None:
    lines: list[str] = []
    show_schedules(whole(sample(mark="C\udc80\x1b1")), lines.append)
    assert "Cable schedule: C" in lines[0]
    assert "\x1b" not in "".join(lines)
    "\n".join(lines).encode("utf-8")


def test_settings_beside_the_drawing_give_the_cut_length(bridge: Path) -> None:
    page = '[cut_length.marks."*"]\npin_to_face = 0.25\nmeasuring_tension = "10 kN"\n'
    bridge.with_name("dxfcable.toml").write_text(page, encoding="utf-8")
    (cable,) = json.loads(run("schedule", bridge, "--json").stdout)["cables"]
    assert cable["cut_length"] == pytest.approx(cable["measured_length"] - 0.5, rel=1e-12)
    assert cable["words"]["pin_to_face_left"] == "0.250 m"
    assert cable["cut_length_missing"] is None


def test_the_reference_temperature_is_told() -> None:
    office = replace(Settings(), show=replace(Settings().show, reference_temperature="10 C"))
    drawn = sample()
    found = schedules(drawn, solve(drawn, Forming(), office), office)
    assert column(schedule_csv(found)["cables"], "reference temperature") == ["10 C"]
