"""A drawing is solved again at each save, to a second file, until the drafter ends it."""

from __future__ import annotations

import signal
import subprocess
import sys
import threading
from queue import Empty, Queue
from typing import TYPE_CHECKING

import pytest

from dxfcable.cli import app
from dxfcable.errors import DxfcableError
from dxfcable.job import Options, solve_bytes
from tests.generated import CableOptions, change_load_text, drawing

if TYPE_CHECKING:
    from collections.abc import Iterator
    from pathlib import Path

F = drawing("AC1015", seed=3, layout=CableOptions())
EDITED = change_load_text(F, 1, b"22 kN")
PATIENCE = 30.0  # seconds for a line, on a machine with much else to do


class Watch:
    """A watching process and the lines that it says."""

    def __init__(self, drawn: Path, output: Path) -> None:
        self.process = subprocess.Popen(
            [
                sys.executable,
                "-m",
                "dxfcable",
                "solve",
                str(drawn),
                "-o",
                str(output),
                "--watch",
                "--units",
                "m",
            ],
            stdout=subprocess.PIPE,
            stderr=subprocess.PIPE,
            text=True,
        )
        self._lines: Queue[str] = Queue()
        threading.Thread(target=self._read, daemon=True).start()

    def _read(self) -> None:
        assert self.process.stdout is not None
        for line in self.process.stdout:
            self._lines.put(line.rstrip("\n"))

    def line(self) -> str:
        try:
            return self._lines.get(timeout=PATIENCE)
        except Empty:
            pytest.fail("nothing was said")

    def end(self, how: signal.Signals) -> int:
        self.process.send_signal(how)
        return self.process.wait(timeout=PATIENCE)


@pytest.fixture
def watch(tmp_path: Path) -> Iterator[tuple[Watch, Path, Path]]:
    drawn, output = tmp_path / "roof.dxf", tmp_path / "solved.dxf"
    drawn.write_bytes(F)
    started = Watch(drawn, output)
    yield started, drawn, output
    started.process.kill()
    started.process.wait()
    for stream in (started.process.stdout, started.process.stderr):
        assert stream is not None
        stream.close()


def solved(data: bytes) -> bytes:
    return solve_bytes(data, Options(units="m"))[0]


def test_each_save_is_solved_and_told_in_one_line(watch: tuple[Watch, Path, Path]) -> None:
    process, drawn, output = watch
    assert process.line().startswith("watching")
    first = process.line()
    assert "roof.dxf: C1 pull" in first
    assert output.read_bytes() == solved(F)
    drawn.write_bytes(EDITED[: len(EDITED) // 2])  # half written, and then left so
    assert "not done, solved.dxf stays" in process.line()
    assert output.read_bytes() == solved(F)
    drawn.write_bytes(EDITED)
    again = process.line()
    assert "P2 15.00 kN to 22.00 kN" in again
    assert output.read_bytes() == solved(EDITED)
    assert process.end(signal.SIGINT) == 0
    assert process.line().startswith("ended")


def test_a_saved_settings_page_counts_as_a_save(watch: tuple[Watch, Path, Path]) -> None:
    process, drawn, output = watch
    process.line()
    process.line()
    drawn.with_name("dxfcable.toml").write_text('[show]\nplot_scale = "1:50"\n', encoding="utf-8")
    assert "roof.dxf: nothing changed" in process.line()
    assert output.read_bytes() != solved(F)
    assert process.end(signal.SIGINT) == 0


def test_a_drawing_that_is_replaced_and_away_for_a_moment_is_waited_for(
    watch: tuple[Watch, Path, Path],
) -> None:
    process, drawn, output = watch
    process.line()
    process.line()
    drawn.unlink()
    assert "is not there" in process.line()
    beside = drawn.with_suffix(".tmp")
    beside.write_bytes(EDITED)
    beside.replace(drawn)
    assert "22.00 kN" in process.line()
    assert output.read_bytes() == solved(EDITED)
    assert drawn.read_bytes() == EDITED
    assert process.end(signal.SIGTERM) == 0


@pytest.mark.parametrize("with_it", [["--json", "-o", "x.dxf"], ["--in-place"], ["--dry-run"]])
def test_watching_needs_a_second_file_and_its_own_lines(with_it: list[str]) -> None:
    with pytest.raises(DxfcableError, match="second file"):
        app(["solve", "roof.dxf", "--watch", *with_it], standalone_mode=False)
