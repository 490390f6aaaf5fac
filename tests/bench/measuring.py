"""Fresh processes, measured: wall time, processor time, peak memory.

Nothing large may live in the process that measures: on Linux a child starts with the peak
memory of its parent. So this module needs the standard library only, and drawings are made
by a process of their own.
"""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
import tempfile
import time
from dataclasses import dataclass
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    from collections.abc import Sequence

ROOT = Path(__file__).resolve().parents[2]
_BYTES_PER_RSS = 1 if sys.platform == "darwin" else 1024


@dataclass(frozen=True, slots=True, kw_only=True)
class Run:
    """One run: wall and processor time [s], peak memory [MB]."""

    wall: float
    cpu: float
    peak: float


class RunError(Exception):
    """A measured command failed; the message holds what it said."""


def environment() -> dict[str, str]:
    """Return the environment of the measured processes: the checkout first on the path."""
    return os.environ | {"PYTHONPATH": str(ROOT), "PYTHONHASHSEED": "0"}


def measure(arguments: Sequence[str], accepted: tuple[int, ...] = (0,)) -> Run:
    """Run a Python command line in a fresh process and measure it.

    Raises
    ------
    RunError
        If the exit code is not one of those accepted.
    """
    with tempfile.TemporaryFile() as said:
        start = time.perf_counter()
        process = subprocess.Popen(
            [sys.executable, *arguments], stdout=said, stderr=said, cwd=ROOT, env=environment()
        )
        _, status, usage = os.wait4(process.pid, 0)
        wall = time.perf_counter() - start
        process.returncode = os.waitstatus_to_exitcode(status)
        if process.returncode not in accepted:
            said.seek(0)
            words = said.read().decode(errors="replace").strip()
            message = f"{' '.join(arguments)}: exit {process.returncode}\n{words[-2000:]}"
            raise RunError(message)
    cpu = usage.ru_utime + usage.ru_stime
    return Run(wall=wall, cpu=cpu, peak=usage.ru_maxrss * _BYTES_PER_RSS / 1e6)


def interleaved(
    first: Sequence[str], second: Sequence[str], runs: int, accepted: tuple[int, ...] = (0,)
) -> tuple[Run, Run]:
    """Run two commands in turn and return the median of each; `accepted` is of the first.

    One run of each before that is not counted: it fills caches and writes byte code.
    """
    found: tuple[list[Run], list[Run]] = ([], [])
    for k in range(runs + 1):
        pair = measure(first, accepted), measure(second)
        if k:
            found[0].append(pair[0])
            found[1].append(pair[1])
    return median(found[0]), median(found[1])


def median(runs: Sequence[Run]) -> Run:
    """Return the median of each quantity."""
    return Run(
        wall=statistics.median(r.wall for r in runs),
        cpu=statistics.median(r.cpu for r in runs),
        peak=statistics.median(r.peak for r in runs),
    )
