"""Make the sheets of all demonstration drawings as one set, and a picture of some of its pages.

Run as `python drawings/make_set.py` after `make_drawings.py`; needs the extra `picture`. The two
drawings of a load change are shown as revised.
"""

from __future__ import annotations

import sys
import tempfile
from pathlib import Path

import pypdfium2
from PIL import Image

from dxfcable.commands.running import Asked
from dxfcable.commands.sheeting import SET, SheetsAsked, sheets_all
from dxfcable.job import Options, solve_bytes

HERE = Path(__file__).resolve().parent
RESULT = HERE / "demonstration_set.pdf"
PICTURE = HERE / "pictures" / "demonstration_set.png"
UNITS = {"pipe_crossing_r12.dxf": "m"}  # release 12 states no unit
SHOWN = ("weir_footbridge", "canopy_roof", "gulch_pipe", "long_walkway_60")  # in the picture
ACROSS, WIDTH, GAP = 2, 1000, 12
GREYS = 16  # so that a page is read in outline and the picture stays small


def main() -> None:
    """Write the set and the picture of some pages."""
    if str(HERE.parent) not in sys.path:  # run as a script, only this folder is on the path
        sys.path.insert(0, str(HERE.parent))
    from drawings.load_changes import CHANGES

    with tempfile.TemporaryDirectory() as folder:
        issued = []
        for drawing in sorted(HERE.glob("*.dxf")):
            data, change = drawing.read_bytes(), CHANGES.get(drawing.name)
            if change is None:
                data, _ = solve_bytes(data, Options(units=UNITS.get(drawing.name)))
            else:
                data, _ = change.revise(change.issue(data)[0])
            issued.append(Path(folder) / drawing.name)
            issued[-1].write_bytes(data)
        sheets = Path(folder) / "sheets"
        sheets.mkdir()
        code = sheets_all(issued, Asked(), SheetsAsked(folder=sheets))
        if code not in (0, 1):
            sys.exit(code)
        RESULT.write_bytes((sheets / SET).read_bytes())
        _picture([sheets / f"{name}-C1.pdf" for name in SHOWN])


def _picture(files: list[Path]) -> None:
    """Put pictures of the first pages of some sheets side by side."""
    first = [pypdfium2.PdfDocument(file)[0] for file in files]
    # Drawn larger than shown: thin lines and small letters become grey, not broken.
    pages = [page.render(scale=2 * WIDTH / page.get_width()).to_pil() for page in first]
    pages = [page.resize((WIDTH, page.height // 2), Image.Resampling.LANCZOS) for page in pages]
    high = max(page.height for page in pages)
    rows = -(-len(pages) // ACROSS)
    size = (ACROSS * (WIDTH + GAP) + GAP, rows * (high + GAP) + GAP)
    whole = Image.new("L", size, 120)
    for number, page in enumerate(pages):
        row, column = divmod(number, ACROSS)
        whole.paste(page, (GAP + column * (WIDTH + GAP), GAP + row * (high + GAP)))
    whole.quantize(GREYS).save(PICTURE, "PNG", optimize=True)


if __name__ == "__main__":
    main()
