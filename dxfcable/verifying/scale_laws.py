"""The scale of forces: words and bar under a diagram must say one and the same."""

from __future__ import annotations

import math
import re
from typing import TYPE_CHECKING

from dxfcable.scales import read_plot_scale
from dxfcable.units import QuantityError, convert
from dxfcable.verifying.words import read_scale

if TYPE_CHECKING:
    from collections.abc import Sequence

    from dxfcable.drawing.issued import IssuedEntity
    from dxfcable.drawing.recovery.scales import ScaleBlock
    from dxfcable.verifying.sheet import Sheet
    from dxfcable.verifying.tally import Tally
    from dxfcable.verifying.words import Reader, ScaleWords, Shown

SCALE = "scale in words and as a bar"
_UNDER = re.compile(r"UNDER (?P<combination>.*?)(?: \((?:SERVICE|FACTORED)[^()]*\))?\Z")
_PLAIN = 1e-12  # a number of six digits that is the scale itself
_DIVISIONS = {"cm": 4, "in": 2}


def form_ratio(blocks: Sequence[ScaleBlock]) -> float | None:
    """Give the plotting scale that a drawing's blocks state."""
    for entity in (e for block in blocks for e in block.words if e.text.startswith("FORM ")):
        try:
            return read_plot_scale(entity.text.removeprefix("FORM "))
        except QuantityError:
            continue
    return None


def scale_of(
    block: ScaleBlock, reader: Reader, grain: float, ratio: float | None = None
) -> float | None:
    """Give the force by length of the drawing that a block states; None where it states none.

    The words have six digits, which is exact for usual scales; where it is not, and the bar
    agrees with them, the bar tells it better. Where they disagree, the plotted scale decides.
    """
    found = [w for _, w in _words(block) if w.length_unit == reader.length_unit]
    bar = _by_bar(block, reader)
    if not found:
        return bar
    words = found[0]
    said = convert(words.force, words.force_unit, reader.force_unit)
    length = math.dist(*block.bar.points) if block.bar else 0.0
    if bar is None or abs(bar / said - 1.0) <= 4.0 * grain / length:
        return said
    if abs(bar - said) <= convert(words.half, words.force_unit, reader.force_unit):
        return bar
    plotted = next((w for w in map(_plotted, block.words) if w is not None), None)
    if plotted is None or ratio is None:
        return said
    force = convert(plotted.force, plotted.force_unit, reader.force_unit)
    third = force / convert(ratio, plotted.length_unit, reader.length_unit)
    return min(said, bar, key=lambda scale: abs(scale - third))


def _words(block: ScaleBlock) -> list[tuple[IssuedEntity, ScaleWords]]:
    found = ((e, read_scale(e.text)) for e in block.words)
    return [(e, w) for e, w in found if w is not None]


def _value(block: ScaleBlock, reader: Reader) -> tuple[IssuedEntity, Shown] | None:
    """Give the label at the bar's end."""
    found = ((e, reader.load(e.text)) for e in block.values if e.text.strip() != "0")
    return next(((e, shown) for e, shown in found if shown is not None), None)


def _by_bar(block: ScaleBlock, reader: Reader) -> float | None:
    value = _value(block, reader)
    if value is None or block.bar is None:
        return None
    length = math.dist(*block.bar.points)
    return value[1].value / length if length else None


def under_of(block: ScaleBlock) -> IssuedEntity | None:
    """Give the line that names the combination."""
    return next((e for e in block.words if e.text.startswith("UNDER ")), None)


def combination_in(text: str) -> str:
    """Take a combination out of "UNDER D (SERVICE)", or out of the schedule's "D"."""
    match = _UNDER.match(text.strip())
    return match["combination"].strip() if match else text.strip()


def hold_words(tally: Tally, block: ScaleBlock, title: tuple[str, str], name: str) -> None:
    """Hold the lines of words: their title, and that none is missing."""
    if block.title != title:
        entity = block.words[0] if block.words else None
        tally.fail(SCALE, f"{name}: the title {' '.join(title)} is missing", entity)
    numbers = [e.id.rpartition("/")[2] for e in block.words]
    lost = {str(n) for n in range(1, len(numbers) + 1)} - set(numbers)
    if lost and all(number.isdigit() for number in numbers):
        tally.fail(SCALE, f"{name}: line {min(lost)} of its words is missing")
    if under_of(block) is None:
        tally.fail(SCALE, f"{name}: the line UNDER .. is missing")


def hold_scale(
    tally: Tally, sheet: Sheet, block: ScaleBlock, scale: float, reader: Reader, name: str
) -> None:
    """Hold words, bar, strokes and values of one scale against each other."""
    words = _words(block)
    if not words:
        lost = next((e for e in block.words[1:] if e.text.startswith("FORCE")), None)
        tally.fail(SCALE, f"{name}: the line FORCE 1 {reader.length_unit} = .. is missing", lost)
    for entity, found in words:
        said = convert(found.force, found.force_unit, reader.force_unit)
        half = convert(found.half, found.force_unit, reader.force_unit)
        if found.length_unit != reader.length_unit:
            tally.fail(SCALE, f"{name}: the scale is by {found.length_unit}", entity)
            continue
        text = f'{name}: "{entity.text}" is not the scale, off'
        tally.hold(SCALE, abs(said - scale) / scale, max(half / scale, _PLAIN), text, entity)
    _hold_plotted(tally, sheet, block, scale, reader, name)
    _hold_bar(tally, sheet, block, scale, reader, name)


def _hold_plotted(
    tally: Tally, sheet: Sheet, block: ScaleBlock, scale: float, reader: Reader, name: str
) -> None:
    """Hold the force by a length on paper, and the form's scale, against the force scale."""
    plotted = [(e, read_scale(e.text, is_plotted=True)) for e in block.words]
    entity, found = next(((e, w) for e, w in plotted if w is not None), (None, None))
    if found is None:
        entity = next((e for e in block.words if e.text.startswith("PLOTTED")), None)
        tally.fail(SCALE, f"{name}: the line PLOTTED: .. is missing", entity)
        return
    form = next((e for e in block.words if e.text.startswith("FORM ")), None)
    if form is None and name.endswith("/diagram"):
        tally.fail(SCALE, f"{name}: the line FORM .. is missing")
    ratio = form_ratio([block]) or form_ratio(sheet.scales)
    if ratio is None or (form is not None and form_ratio([block]) is None):
        tally.fail(SCALE, f"{name}: the plotting scale does not read", form)
        return
    force = convert(found.force, found.force_unit, reader.force_unit)
    said = force / convert(ratio, found.length_unit, reader.length_unit)
    half = 1e-5  # of the form's scale, which has six digits, and of the force
    text = f"{name}: the plotting scale and the line PLOTTED do not give the scale, off"
    tally.hold(SCALE, abs(said - scale) / scale, half, text, entity)


def _hold_bar(
    tally: Tally, sheet: Sheet, block: ScaleBlock, scale: float, reader: Reader, name: str
) -> None:
    """Hold the bar's length, its strokes and its values."""
    bar, value = block.bar, _value(block, reader)
    if bar is None or value is None:
        tally.fail(SCALE, f"{name}: the scale bar or its value is missing", bar)
        return
    entity, shown = value
    length = math.dist(*bar.points)
    off = abs(shown.value - length * scale) / shown.value if shown.value else math.inf
    allowed = (shown.half / shown.value if shown.value else 0.0) + 4.0 * sheet.grain / length
    text = f'{name}: the bar (handle {bar.handle}) is not "{entity.text}" long'
    # Where a stroke stands at its end the bar is as drawn, and its value is at fault.
    is_whole = any(math.dist(e.start, bar.end) <= 2.0 * sheet.grain for e in block.strokes)
    tally.hold(SCALE, off, allowed, text, entity if is_whole else bar)
    if not any(e.text.strip() == "0" for e in block.values):
        other = next((e for e in block.values if e is not entity), None)
        tally.fail(SCALE, f"{name}: the 0 of the scale bar is missing", other)
    unit = next((w.length_unit for w in map(_plotted, block.words) if w is not None), "")
    count = _DIVISIONS.get(unit, len(block.strokes) - 1)
    if len(block.strokes) != count + 1:
        text = f"{name}: the scale bar has {len(block.strokes)} strokes, {count + 1} are due"
        tally.fail(SCALE, text, bar)
        return
    for k, stroke in enumerate(sorted(block.strokes, key=lambda e: e.start[0])):
        x = bar.start[0] + (bar.end[0] - bar.start[0]) * k / count
        off = max(abs(stroke.start[0] - x), abs(stroke.end[0] - x))
        off = max(off, abs(stroke.start[1] - bar.start[1])) / length
        text = f"{name}: a stroke of the scale bar is not at its share"
        tally.hold(SCALE, off, 4.0 * sheet.grain / length, text, stroke)


def _plotted(entity: IssuedEntity) -> ScaleWords | None:
    return read_scale(entity.text, is_plotted=True)
