"""Where settings lie and where results go: the rim between the command line and the disk."""

from __future__ import annotations

from typing import TYPE_CHECKING

from dxfcable.errors import DxfcableError, OutputError
from dxfcable.settings import Settings, load

if TYPE_CHECKING:
    from pathlib import Path

SETTINGS_NAME = "dxfcable.toml"


def find_settings(drawing: Path, given: Path | None) -> tuple[Settings, Path | None]:
    """Read the office's page: the one given, else the nearest beside or above the drawing.

    Returns
    -------
    tuple
        The settings, and the file they came from, None for the defaults.

    Raises
    ------
    DxfcableError
        Where the page is missing or does not read.
    """
    path = settings_path(drawing, given)
    if path is None:
        return Settings(), None
    try:
        return load(path.read_text(encoding="utf-8")), path
    except (OSError, UnicodeDecodeError) as error:
        reason = getattr(error, "strerror", None) or "no text in UTF-8"
        message = f"the settings {path} cannot be read: {reason}"
        raise DxfcableError(
            message, code="settings", remedy="Check the path of --settings."
        ) from error
    except DxfcableError as error:
        error.message = f"{path}: {error.message}"
        raise


def settings_path(drawing: Path, given: Path | None) -> Path | None:
    """Return the office's page that holds for a drawing, None where there is none."""
    if given is not None:
        return given
    folders = [drawing.absolute().parent, *drawing.absolute().parent.parents]
    return next((f / SETTINGS_NAME for f in folders if (f / SETTINGS_NAME).is_file()), None)


def read_drawing(path: Path) -> bytes:
    """Read a drawing.

    Raises
    ------
    DxfcableError
        Where there is no such file, or it cannot be read.
    """
    try:
        return path.read_bytes()
    except OSError as error:
        reason = error.strerror or str(error)
        message = f"{path} cannot be read: {reason}"
        raise DxfcableError(message, code="input", remedy="Check the path.") from error


def read_table(path: Path) -> str:
    """Read a load table.

    Raises
    ------
    DxfcableError
        Where there is no such file, or it is no text.
    """
    try:
        return read_drawing(path).decode("utf-8-sig")
    except UnicodeDecodeError as error:
        message = f"{path} is no text in UTF-8"
        raise DxfcableError(
            message, code="input", remedy="Save the table as CSV, UTF-8."
        ) from error


def resolve_output(
    drawing: Path, output: Path | None, *, in_place: bool, is_one_of_many: bool
) -> Path:
    """Settle where the result of one drawing goes.

    Parameters
    ----------
    drawing : Path
        The input.
    output : Path or None
        Of `-o`: a file, or a folder for many drawings.
    in_place : bool
        Of `--in-place`.
    is_one_of_many : bool
        Whether `output` names a folder.

    Raises
    ------
    OutputError
        Where neither or both are given, or the input would be overwritten unasked.
    """
    if in_place and output is not None:
        msg = "-o and --in-place exclude each other"
        raise OutputError(msg, remedy="Give one of them.")
    if in_place:
        return drawing
    if output is None:
        msg = "nothing says where the result goes"
        raise OutputError(
            msg,
            remedy="Give -o OUT.dxf, --in-place, or --dry-run.",
        )
    if is_one_of_many:
        if output.exists() and not output.is_dir():
            msg = f"{output} is a file"
            raise OutputError(msg, remedy="With several drawings -o names a folder.")
        output.mkdir(parents=True, exist_ok=True)
    target = output / drawing.name if output.is_dir() else output
    if target.exists() and target.samefile(drawing):
        msg = f"{target} is the drawing itself"
        raise OutputError(msg, remedy="Give --in-place to write into it.")
    if not target.parent.is_dir():
        msg = f"the folder {target.parent} does not exist"
        raise OutputError(msg, remedy="Make it first.")
    return target
