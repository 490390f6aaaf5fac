"""Real drawings beside the checkout, where they are; tests take them as they lie there."""

from __future__ import annotations

from pathlib import Path

FOLDER = Path(__file__).resolve().parents[3] / "shared" / "corpus"
BINARY = b"AutoCAD Binary DXF"


def drawings(kind: str) -> list[Path]:
    """List the drawings that a tolerant reader takes (`open`) or that are malformed (`broken`)."""
    return sorted((FOLDER / kind).glob("*.dxf"))


def is_text(path: Path) -> bool:
    """Tell whether a drawing is an ASCII DXF."""
    return not path.read_bytes().startswith(BINARY)
