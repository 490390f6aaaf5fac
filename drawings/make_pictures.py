"""Solve the demonstration drawings and picture the results, for the README.

Run as `python drawings/make_pictures.py` after `make_drawings.py`; needs the extra `picture`.
"""

from __future__ import annotations

from pathlib import Path

from dxfcable.drawing.picture import picture
from dxfcable.job import Options, solve_bytes

HERE = Path(__file__).resolve().parent
PICTURES = HERE / "pictures"
UNITS = {"pipe_crossing_r12.dxf": "m"}  # release 12 states no unit
WIDTH = 1500


def main() -> None:
    """Write one picture for each drawing."""
    PICTURES.mkdir(exist_ok=True)
    for drawing in sorted(HERE.glob("*.dxf")):
        solved, _ = solve_bytes(drawing.read_bytes(), Options(units=UNITS.get(drawing.name)))
        (PICTURES / f"{drawing.stem}.png").write_bytes(picture(solved, "png", size=WIDTH))


if __name__ == "__main__":
    main()
