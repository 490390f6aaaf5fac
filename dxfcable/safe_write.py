"""Write a file so that a killed run leaves the old one or the new one, whole.

The bytes go to a file beside the target, are forced to disk, and then take its name in one
step. A file whose content would not change is not touched.
"""

from __future__ import annotations

import contextlib
import os
import stat
import tempfile
from pathlib import Path
from typing import TYPE_CHECKING

from dxfcable.errors import OutputError

if TYPE_CHECKING:
    from collections.abc import Iterable, Sequence

Piece = bytes | memoryview
_BLOCK = 1 << 20


def write(path: Path, pieces: Sequence[Piece]) -> bool:
    """Write a file, replacing what stands there.

    Parameters
    ----------
    path : Path
        Target; a symbolic link is followed. Permissions and hard links are kept.
    pieces : sequence of bytes
        The content, one piece after the other.

    Returns
    -------
    bool
        False where the file holds these bytes already and was left alone.

    Raises
    ------
    OutputError
        Where the folder is missing, the target is read-only, or the disk refuses.
    """
    target = Path(os.path.realpath(path))
    try:
        standing = target.stat()
    except FileNotFoundError:
        standing = None
    except OSError as error:
        raise _refused(path, error) from error
    if standing is not None:
        _check_target(path, standing)
        if _holds(target, pieces):
            return False
    try:
        if standing is not None and standing.st_nlink > 1:
            _write_through(target, pieces)
        else:
            _replace(target, pieces, standing)
    except OutputError:
        raise
    except OSError as error:
        raise _refused(path, error) from error
    return True


def backup(path: Path) -> Path:
    """Copy a file to the first free of NAME.bak, NAME.bak2, NAME.bak3 beside it.

    Raises
    ------
    OutputError
        Where the copy cannot be written.
    """
    number = 1
    while (copy := path.with_name(f"{path.name}.bak{number if number > 1 else ''}")).exists():
        number += 1
    write(copy, [path.read_bytes()])
    return copy


def _check_target(path: Path, standing: os.stat_result) -> None:
    """Refuse what must not be overwritten."""
    if stat.S_ISDIR(standing.st_mode):
        msg = f"{path} is a folder"
        raise OutputError(msg, remedy="Name a file.")
    if not stat.S_ISREG(standing.st_mode):
        msg = f"{path} is no regular file"
        raise OutputError(msg, remedy="Name another file with -o.")
    if not standing.st_mode & 0o222 or not os.access(path, os.W_OK):
        msg = f"{path} is read-only"
        raise OutputError(msg, remedy="Make it writable, or name another file with -o.")


def _holds(target: Path, pieces: Iterable[Piece]) -> bool:
    """Tell whether a file holds just these bytes."""
    with target.open("rb") as file:
        for piece in pieces:
            rest = memoryview(piece)
            while rest:
                if file.read(min(len(rest), _BLOCK)) != rest[:_BLOCK]:
                    return False
                rest = rest[_BLOCK:]
        return not file.read(1)


def _replace(target: Path, pieces: Iterable[Piece], standing: os.stat_result | None) -> None:
    """Write aside, force to disk, take the name."""
    handle, name = tempfile.mkstemp(prefix=f".{target.name}.", suffix=".part", dir=target.parent)
    aside = Path(name)
    try:
        with os.fdopen(handle, "wb") as file:
            _fill(file.fileno(), pieces)
        if standing is not None:
            aside.chmod(stat.S_IMODE(standing.st_mode))
            with contextlib.suppress(PermissionError):  # another owner's file stays readable
                os.chown(aside, standing.st_uid, standing.st_gid)
        else:
            mask = os.umask(0)
            os.umask(mask)
            aside.chmod(0o666 & ~mask)
        aside.replace(target)
    except BaseException:
        aside.unlink(missing_ok=True)
        raise
    _sync_folder(target.parent)


def _write_through(target: Path, pieces: Sequence[Piece]) -> None:
    """Write into a file that has other names, a whole copy of the old one beside it meanwhile."""
    kept = target.with_name(f".{target.name}.before")
    if kept.exists():
        message = f"{target} was being written when a run was stopped; {kept} holds it as it was"
        raise OutputError(message, remedy=f"Look at both, keep the right one, remove {kept.name}.")
    with kept.open("wb") as file:
        _fill(file.fileno(), [target.read_bytes()])
    _sync_folder(target.parent)
    with target.open("r+b") as file:
        _fill(file.fileno(), pieces)
        os.ftruncate(file.fileno(), sum(len(piece) for piece in pieces))
        os.fsync(file.fileno())
    kept.unlink()


def _fill(descriptor: int, pieces: Iterable[Piece]) -> None:
    """Write all bytes and force them to disk."""
    for piece in pieces:
        rest = memoryview(piece)
        while rest:
            rest = rest[os.write(descriptor, rest) :]
    os.fsync(descriptor)


def _sync_folder(folder: Path) -> None:
    """Force the new name to disk, where the system can."""
    with contextlib.suppress(OSError):
        descriptor = os.open(folder, os.O_RDONLY)
        try:
            os.fsync(descriptor)
        finally:
            os.close(descriptor)


def _refused(path: Path, error: OSError) -> OutputError:
    """Say in one sentence why a file was not written."""
    reason = error.strerror or str(error)
    return OutputError(
        f"{path} cannot be written: {reason}", remedy="Check the folder, its rights and the disk."
    )
