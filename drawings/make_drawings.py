"""Write the eight demonstration drawings beside this script: `python drawings/make_drawings.py`.

The projects, places, people and numbers are our own invention; nothing of this was ever
designed or built. Every run writes the same bytes.
"""

from __future__ import annotations

import sys
from pathlib import Path
from typing import TYPE_CHECKING

from ezdxf._options import options

if TYPE_CHECKING:
    from ezdxf.document import Drawing

HERE = Path(__file__).resolve().parent


def drawings() -> dict[str, Drawing]:
    """Draw all of them; the key is the file name."""
    if str(HERE.parent) not in sys.path:  # run as a script, only this folder is on the path
        sys.path.insert(0, str(HERE.parent))
    from drawings import (
        canopy_roof,
        creek_footbridge,
        deck_plan,
        gulch_pipe,
        long_walkway,
        pipe_crossing,
        twin_views,
        weir_footbridge,
    )

    return {
        "canopy_roof.dxf": canopy_roof.draw(),
        "creek_footbridge.dxf": creek_footbridge.draw(),
        "pipe_crossing_r12.dxf": pipe_crossing.draw(),
        "twin_views_mm.dxf": twin_views.draw(),
        "long_walkway_60.dxf": long_walkway.draw(),
        "deck_plan.dxf": deck_plan.draw(),
        "weir_footbridge.dxf": weir_footbridge.draw(),
        "gulch_pipe.dxf": gulch_pipe.draw(),
    }


def _sort_classes(doc: Drawing) -> None:
    """Put CLASS rows in order: ezdxf makes them from a set, in another order every run."""
    if doc.dxfversion == "AC1009":
        return
    doc.classes.add_required_classes(doc.dxfversion)
    rows = sorted(doc.classes.classes.items())
    doc.classes.classes.clear()
    doc.classes.classes.update(rows)


def write(folder: Path) -> list[Path]:
    """Write the drawings into a folder and return their paths."""
    before = options.write_fixed_meta_data_for_testing
    options.write_fixed_meta_data_for_testing = True  # no times, no new GUIDs
    try:
        paths = []
        for name, doc in drawings().items():
            path = folder / name
            _sort_classes(doc)
            with path.open("w", encoding=doc.output_encoding, newline="\n") as stream:
                doc.write(stream)
            paths.append(path)
        return paths
    finally:
        options.write_fixed_meta_data_for_testing = before


if __name__ == "__main__":
    for written in write(HERE):
        print(written)
