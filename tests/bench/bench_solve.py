"""How long `dxfcable solve` takes beside ezdxf's bare read and save of the same drawing.

Run by hand: `python tests/bench/bench_solve.py`. It prints ratios and asserts nothing, since
times belong to the machine. Both sides are whole fresh processes, run in turn.
"""

from __future__ import annotations

import argparse
import compileall
import sys
import tempfile
from dataclasses import dataclass
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

import dxfcable
from tests.bench.measuring import Run, RunError, interleaved, measure

READ_AND_SAVE = (
    "import sys; from ezdxf.filemanagement import readfile; "
    "readfile(sys.argv[1]).saveas(sys.argv[2])"
)
MAKE = (
    "import sys; from pathlib import Path; from tests.generated import big_drawing; "
    "Path(sys.argv[1]).write_bytes(big_drawing(int(sys.argv[2]), "
    "newline=b'\\r\\n' if sys.argv[3] == 'CRLF' else b'\\n', padded=sys.argv[4] == 'padded'))"
)
LARGE = 100_000


@dataclass(frozen=True, slots=True, kw_only=True)
class Case:
    """One drawing to measure."""

    entities: int
    newline: str
    codes: str

    @property
    def limits(self) -> tuple[str, str]:
        """What time and memory ratios must and should stay under."""
        if self.entities >= LARGE:
            return "0.10 (aim 0.07)", "0.40 (aim 0.33)"
        return "0.60", "-"


def cases(counts: list[int]) -> list[Case]:
    """Return every size with both line ends and both ways to write group codes."""
    return [
        Case(entities=count, newline=newline, codes=codes)
        for count in counts
        for newline in ("LF", "CRLF")
        for codes in ("padded", "unpadded")
    ]


def bench(case: Case, folder: Path, runs: int) -> tuple[Run, Run, float]:
    """Measure one drawing; return ours, the bare read and save, and its size [MB]."""
    drawing, ours, theirs = (folder / f"{name}.dxf" for name in ("in", "ours", "theirs"))
    measure(["-c", MAKE, str(drawing), str(case.entities), case.newline, case.codes])
    size = drawing.stat().st_size / 1e6
    solve = ["-m", "dxfcable", "solve", str(drawing), "-o", str(ours)]
    bare = ["-c", READ_AND_SAVE, str(drawing), str(theirs)]
    first, second = interleaved(solve, bare, runs, accepted=(0, 1))
    return first, second, size


def line(case: Case, ours: Run, bare: Run, size: float) -> str:
    """Return one line of the table."""
    time_limit, memory_limit = case.limits
    return (
        f"{case.entities:>8,} {case.newline:<5}{case.codes:<9}{size:6.1f} MB | "
        f"{ours.cpu:6.2f} s {ours.wall:6.2f} s {ours.peak:6.0f} MB | "
        f"{bare.cpu:6.2f} s {bare.wall:6.2f} s {bare.peak:6.0f} MB | "
        f"cpu {ours.cpu / bare.cpu:.3f}  wall {ours.wall / bare.wall:.3f}  of {time_limit:<16}"
        f" memory {ours.peak / bare.peak:.3f} of {memory_limit}"
    )


def main() -> int:
    """Print the table; 1 if a command failed, whatever the times."""
    # As an installed package is: some machines forbid Python to write compiled modules itself.
    compileall.compile_dir(Path(dxfcable.__file__).parent, quiet=2)
    parser = argparse.ArgumentParser(description=(__doc__ or "").splitlines()[0])
    parser.add_argument("--count", type=int, action="append", help="entities; repeatable")
    parser.add_argument("--runs", type=int, default=3, help="measured runs of each side")
    arguments = parser.parse_args()
    print("dxfcable solve: cpu, wall, peak | ezdxf read + save: cpu, wall, peak | ratios of limits")
    for case in cases(arguments.count or [200_000, 10_000]):
        with tempfile.TemporaryDirectory() as folder:
            try:
                ours, bare, size = bench(case, Path(folder), arguments.runs)
            except RunError as error:
                print(error, file=sys.stderr)
                return 1
        print(line(case, ours, bare, size), flush=True)
    return 0


if __name__ == "__main__":
    sys.exit(main())
