"""A file is replaced whole or not at all."""

from __future__ import annotations

import os
import signal
import stat
import subprocess
import sys
import time
from typing import TYPE_CHECKING

import pytest

from dxfcable import safe_write
from dxfcable.errors import OutputError

if TYPE_CHECKING:
    from pathlib import Path


def test_permissions_are_kept(tmp_path: Path) -> None:
    target = tmp_path / "a.dxf"
    target.write_bytes(b"old")
    target.chmod(0o640)
    assert safe_write.write(target, [b"ne", memoryview(b"w")])
    assert target.read_bytes() == b"new"
    assert stat.S_IMODE(target.stat().st_mode) == 0o640


def test_an_unchanged_file_is_not_touched(tmp_path: Path) -> None:
    target = tmp_path / "a.dxf"
    target.write_bytes(b"same")
    os.utime(target, ns=(1, 1))
    assert not safe_write.write(target, [b"sa", b"me"])
    assert target.stat().st_mtime_ns == 1


def test_a_symbolic_link_is_followed(tmp_path: Path) -> None:
    real, link = tmp_path / "real.dxf", tmp_path / "link.dxf"
    real.write_bytes(b"old")
    link.symlink_to(real)
    safe_write.write(link, [b"new"])
    assert link.is_symlink()
    assert real.read_bytes() == b"new"


@pytest.mark.parametrize("new", [b"n", b"new and longer"])
def test_hard_links_stay_one_file(tmp_path: Path, new: bytes) -> None:
    first, second = tmp_path / "a.dxf", tmp_path / "b.dxf"
    first.write_bytes(b"old one")
    second.hardlink_to(first)
    safe_write.write(first, [new])
    assert second.read_bytes() == new
    assert first.samefile(second)
    assert sorted(p.name for p in tmp_path.iterdir()) == ["a.dxf", "b.dxf"]


def test_a_stopped_run_over_hard_links_is_told_and_the_old_drawing_is_there(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    first, second = tmp_path / "a.dxf", tmp_path / "b.dxf"
    first.write_bytes(b"old one")
    second.hardlink_to(first)

    def stopped(*_: object) -> None:
        raise KeyboardInterrupt

    monkeypatch.setattr(os, "ftruncate", stopped)
    with pytest.raises(KeyboardInterrupt):
        safe_write.write(first, [b"new"])
    monkeypatch.undo()
    with pytest.raises(OutputError, match="holds it as it was"):
        safe_write.write(first, [b"newer"])
    assert (tmp_path / ".a.dxf.before").read_bytes() == b"old one"


def test_a_read_only_target_is_refused(tmp_path: Path) -> None:
    target = tmp_path / "a.dxf"
    target.write_bytes(b"old")
    target.chmod(0o444)
    with pytest.raises(OutputError, match="read-only"):
        safe_write.write(target, [b"new"])
    assert target.read_bytes() == b"old"


def test_a_missing_folder_is_refused(tmp_path: Path) -> None:
    with pytest.raises(OutputError, match="cannot be written"):
        safe_write.write(tmp_path / "none" / "a.dxf", [b"new"])


def test_a_folder_is_no_target(tmp_path: Path) -> None:
    with pytest.raises(OutputError, match="folder"):
        safe_write.write(tmp_path, [b"new"])


def test_backups_never_overwrite_each_other(tmp_path: Path) -> None:
    target = tmp_path / "a.dxf"
    for content in (b"one", b"two"):
        target.write_bytes(content)
        safe_write.backup(target)
    assert (tmp_path / "a.dxf.bak").read_bytes() == b"one"
    assert (tmp_path / "a.dxf.bak2").read_bytes() == b"two"


def test_a_failing_write_leaves_the_old_file_and_nothing_beside_it(
    tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    target = tmp_path / "a.dxf"
    target.write_bytes(b"old")

    def full(*_: object) -> int:
        message = "No space left on device"
        raise OSError(28, message)

    monkeypatch.setattr(os, "write", full)
    with pytest.raises(OutputError, match="No space left"):
        safe_write.write(target, [b"new"])
    assert target.read_bytes() == b"old"
    assert [p.name for p in tmp_path.iterdir()] == ["a.dxf"]


_WRITER = """
import sys
from pathlib import Path
from dxfcable import safe_write
target = Path(sys.argv[1])
print("ready", flush=True)
number = 0
while True:
    number += 1
    safe_write.write(target, [bytes([65 + number % 26]) * 4096] * 256)
"""


def test_a_killed_run_leaves_one_whole_file(tmp_path: Path) -> None:
    target = tmp_path / "a.dxf"
    target.write_bytes(b"A" * 4096 * 256)
    for wait in (0.01, 0.023, 0.05):
        command = [sys.executable, "-c", _WRITER, str(target)]
        with subprocess.Popen(command, stdout=subprocess.PIPE) as process:
            assert process.stdout is not None
            process.stdout.readline()
            time.sleep(wait)
            process.send_signal(signal.SIGKILL)
        content = target.read_bytes()
        assert len(content) == 4096 * 256
        assert len(set(content)) == 1
