"""How long `dxfcable --help` takes beside a process that only imports typer.

Run by hand: `python tests/bench/bench_help.py`. It prints a ratio and asserts nothing.
"""

from __future__ import annotations

import argparse
import sys
from pathlib import Path

sys.path.insert(0, str(Path(__file__).resolve().parents[2]))

from tests.bench.measuring import RunError, interleaved

LIMIT = "1.5"


def main() -> int:
    """Print the ratio; 1 if a command failed, whatever the times."""
    parser = argparse.ArgumentParser(description=(__doc__ or "").splitlines()[0])
    parser.add_argument("--runs", type=int, default=15, help="measured runs of each side")
    runs = parser.parse_args().runs
    try:
        ours, bare = interleaved(["-m", "dxfcable", "--help"], ["-c", "import typer"], runs)
    except RunError as error:
        print(error, file=sys.stderr)
        return 1
    print(
        f"--help {1000 * ours.wall:.0f} ms wall, {1000 * ours.cpu:.0f} ms cpu | "
        f"import typer {1000 * bare.wall:.0f} ms wall, {1000 * bare.cpu:.0f} ms cpu | "
        f"cpu {ours.cpu / bare.cpu:.2f}  wall {ours.wall / bare.wall:.2f}  of {LIMIT}"
    )
    return 0


if __name__ == "__main__":
    sys.exit(main())
