"""Solve the demonstration drawings and picture the results, for the README.

Run as `python drawings/make_pictures.py` after `make_drawings.py`; needs the extra `picture`.
"""

from __future__ import annotations

import io
import sys
from pathlib import Path

from PIL import Image

from dxfcable.drawing.picture import picture
from dxfcable.job import Options, solve_bytes

HERE = Path(__file__).resolve().parent
PICTURES = HERE / "pictures"
UNITS = {"pipe_crossing_r12.dxf": "m"}  # release 12 states no unit
WIDTH = 1500
# Part of a revised sheet that shows the change: left, top, right, bottom as parts of the whole.
CHANGED = {
    "gulch_pipe.dxf": (0.145, 0.09, 0.85, 0.47),
    "weir_footbridge.dxf": (0.17, 0.09, 0.82, 0.36),
}


def main() -> None:
    """Write one picture for each drawing, and for a load change those before and after."""
    if str(HERE.parent) not in sys.path:  # run as a script, only this folder is on the path
        sys.path.insert(0, str(HERE.parent))
    from drawings.load_changes import CHANGES

    PICTURES.mkdir(exist_ok=True)
    for drawing in sorted(HERE.glob("*.dxf")):
        data, change = drawing.read_bytes(), CHANGES.get(drawing.name)
        if change is None:
            solved, _ = solve_bytes(data, Options(units=UNITS.get(drawing.name)))
            _write(drawing.stem, picture(solved, "png", size=WIDTH))
            continue
        issued, _ = change.issue(data)
        revised, _ = change.revise(issued)
        _write(drawing.stem, picture(issued, "png", size=WIDTH))
        _write(f"{drawing.stem}_revised", picture(revised, "png", size=WIDTH))
        box = CHANGED[drawing.name]
        large = picture(revised, "png", size=round(WIDTH / (box[2] - box[0])))
        _write(f"{drawing.stem}_change", cut_out(large, box))


def cut_out(png: bytes, box: tuple[float, float, float, float]) -> bytes:
    """Cut a part out of a picture."""
    whole = Image.open(io.BytesIO(png))
    wide, high = whole.size
    left, top, right, bottom = box
    part = whole.crop(
        (round(left * wide), round(top * high), round(right * wide), round(bottom * high))
    )
    stream = io.BytesIO()
    part.save(stream, "PNG", optimize=True)
    return stream.getvalue()


def _write(name: str, data: bytes) -> None:
    (PICTURES / f"{name}.png").write_bytes(data)


if __name__ == "__main__":
    main()
