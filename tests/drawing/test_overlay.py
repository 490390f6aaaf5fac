"""The picture of what was understood shows every thing read, where it is and as it was read."""

from __future__ import annotations

import re
from dataclasses import replace
from pathlib import Path
from typing import TYPE_CHECKING
from xml.etree import ElementTree as ET

import pytest

from dxfcable.drawing.overlay import overlay
from dxfcable.drawing.picture import page_of
from dxfcable.drawing.picturing.picture_load import load
from dxfcable.errors import DrawingError, DxfcableError
from dxfcable.job import Options, read_bytes
from dxfcable.model import (
    Finding,
    Layout,
    LoadPoint,
    LoadSymbol,
    Origin,
    Rectangle,
    Rule,
    RuleKind,
    Severity,
)
from tests.drawing.pictures import blank, saved
from tests.layouts import cable, layout, sample

if TYPE_CHECKING:
    from collections.abc import Iterator

DEMONSTRATIONS = sorted((Path(__file__).resolve().parents[2] / "drawings").glob("*.dxf"))
SVG = "{http://www.w3.org/2000/svg}"
STATED = LoadPoint(
    mark="P1",
    x=8.0,
    y=7.5,
    cases=(("D", 15.0), ("L", 22.5)),
    symbol=LoadSymbol.ARROW,
    value_origin=Origin(handle="2F", kind="TEXT", at=(9.0, 9.5), raw="D=15 kN L=22.5 kN"),
)
UNREAD = Finding(
    code="value-unread",
    severity=Severity.ERROR,
    text="no force: 8.2 t",
    at=(12.0, 9.0),
    handle="3A",
)


def ground() -> bytes:
    """Return a drawing with something on it."""
    doc = blank()
    doc.modelspace().add_line((-10, 6), (24, 13))
    return saved(doc)


def root_of(svg: bytes) -> ET.Element:
    """Parse a picture."""
    return ET.fromstring(svg)


def groups(svg: bytes, name: str) -> list[ET.Element]:
    """Return the groups of marks of one kind."""
    return [g for g in root_of(svg).iter(f"{SVG}g") if (g.get("class") or "").split()[:1] == [name]]


def words(svg: bytes) -> list[str]:
    """Return all texts."""
    return [element.text or "" for element in root_of(svg).iter(f"{SVG}text")]


def numbers(text: str | None) -> list[float]:
    """Read the numbers of an attribute."""
    return [float(found) for found in re.findall(r"-?[\d.]+", text or "")]


def test_each_support_is_ringed_with_its_mark() -> None:
    svg = overlay(ground(), sample(), ())
    rings = groups(svg, "support")
    assert len(rings) == 2
    assert all(len(ring.findall(f"{SVG}circle")) == 2 for ring in rings)
    assert {"S1", "S2"} <= set(words(svg))


def test_a_mark_stands_on_the_point_of_the_drawing_that_it_is_about() -> None:
    # The grey line runs from (-10, 6) to (24, 13); the right support is at its end (24, 13).
    svg = overlay(ground(), sample(), ())
    circle = groups(svg, "support")[1].find(f"{SVG}circle")
    assert circle is not None
    center = (float(circle.get("cx", "")) * 200, float(circle.get("cy", "")) * 200)
    drawn = [
        numbers(path.get("d"))
        for path in root_of(svg).iter(f"{SVG}path")
        if len(numbers(path.get("d"))) == 4
    ]
    ends = [(x + dx, y + dy) for x, y, dx, dy in drawn]
    assert min(abs(x - center[0]) + abs(y - center[1]) for x, y in ends) < 10  # 0.05 mm


def test_a_load_point_shows_the_value_read_and_an_arrow_from_its_text() -> None:
    svg = overlay(ground(), sample(loads=(STATED,)), ())
    assert [w for w in words(svg) if w in WANTED] == ["P1", "D 15 kN", "L 22.5 kN"]
    (mark,) = groups(svg, "load")
    title = mark.find(f"{SVG}title")
    assert title is not None
    assert 'from TEXT 2F "D=15 kN L=22.5 kN"' in (title.text or "")
    ring = next(c for c in mark.iter(f"{SVG}circle") if c.get("class") == "load")
    arrow = next(line for line in mark.iter(f"{SVG}polyline") if line.get("class") == "from")
    assert numbers(arrow.get("points"))[2:] == [
        float(ring.get("cx", "")),
        float(ring.get("cy", "")),
    ]


WANTED = ("P1", "D 15 kN", "L 22.5 kN")


def test_masts_stays_deck_clearance_frame_and_rule_are_marked() -> None:
    understood = sample(
        deck=((0.0, 1.0), (24.0, 1.5)),
        clearance=((0.0, 0.2), (24.0, 0.2)),
        frame=Rectangle(x0=0.0, y0=-6.0, x1=6.0, y1=-1.0),
        rule=Rule(kind=RuleKind.SAG, value=2.4, text="SAG 2.4", origin=Origin(at=(26.0, 15.0))),
    )
    svg = overlay(ground(), understood, ())
    for name in ("mast", "stay", "deck", "clearance", "frame", "rule", "string"):
        assert len(groups(svg, name)) == 1, name
    assert "C1: SAG 2.4" in words(svg)


def test_the_point_that_a_cable_goes_through_is_marked() -> None:
    rule = Rule(kind=RuleKind.THROUGH, point=(12.0, 8.0), text="THROUGH")
    assert len(groups(overlay(ground(), sample(rule=rule), ()), "rule")) == 1


def test_what_was_passed_over_is_marked_with_its_code_and_told_below() -> None:
    svg = overlay(ground(), sample(), (UNREAD,))
    (mark,) = groups(svg, "finding")
    assert mark.get("class") == "finding error"
    assert "value-unread" in words(svg)
    assert "value-unread: no force: 8.2 t" in words(svg)


def test_findings_of_one_place_share_one_sign_that_of_the_gravest() -> None:
    note = replace(UNREAD, code="text-tiny", severity=Severity.NOTE)
    svg = overlay(ground(), sample(), (note, UNREAD))
    (mark,) = groups(svg, "finding")
    assert mark.get("class") == "finding error"
    assert {"text-tiny", "value-unread"} <= set(words(svg))


def test_a_finding_far_off_does_not_make_the_cable_a_speck() -> None:
    near, far = (overlay(ground(), sample(), (replace(UNREAD, at=at),)) for at in (
        None, (1e7, 0.0)))  # fmt: skip
    widths = [
        numbers(groups(svg, "string")[0].find(f"{SVG}polyline").get("points"))  # type: ignore[union-attr]
        for svg in (near, far)
    ]
    assert widths[0] == widths[1]
    assert "value-unread: no force: 8.2 t" in words(far)


def test_kinds_of_marks_differ_in_colour_and_in_shape() -> None:
    from dxfcable.drawing.picturing.overlay_understood import SIGNS, STYLE

    colours = dict(re.findall(r"^\.([a-z]+) \{ stroke: (#\w+)", STYLE, re.MULTILINE))
    apart = ("support", "load", "rule", "mast", "deck", "clearance", "error", "warning", "note")
    assert len({colours[name] for name in apart}) == len(apart)
    assert len({len(shape) for shape in SIGNS.values()}) == len(SIGNS)


def test_the_legend_names_the_marks_that_occur_and_no_others() -> None:
    told = words(overlay(ground(), sample(), ()))
    assert "support with its mark" in told
    assert "stay" in told
    assert "deck" not in told
    assert "error: stops a solve" not in told


def boxes(svg: bytes) -> Iterator[tuple[float, float, float, float]]:
    """Yield the sheets of labels."""
    for rect in root_of(svg).iter(f"{SVG}rect"):
        if (rect.get("class") or "").endswith("sheet"):
            x, y, wide, high = (float(rect.get(k, "")) for k in ("x", "y", "width", "height"))
            yield x, y, x + wide, y + high


def test_labels_of_twenty_points_do_not_cover_each_other() -> None:
    loads = tuple(
        replace(STATED, mark=f"P{k}", x=float(k), y=8.0, value_origin=None) for k in range(2, 22)
    )
    placed = list(boxes(overlay(ground(), sample(loads=loads), ())))
    assert len(placed) >= 22
    for k, (x0, y0, x1, y1) in enumerate(placed):
        for u0, v0, u1, v1 in placed[:k]:
            assert min(x1, u1) - max(x0, u0) < 0.02 or min(y1, v1) - max(y0, v0) < 0.02


def test_texts_that_xml_cannot_hold_are_made_readable() -> None:
    strange = replace(UNREAD, text="bytes \udc81, bell \x07, <&>", raw="\udc81")
    svg = overlay(ground(), sample(), (strange,))
    assert any("<&>" in text for text in words(svg))


def test_a_drawing_in_which_nothing_was_understood_is_shown_whole() -> None:
    nothing = Layout(version="AC1015", length_unit="m", force_unit=None)
    finding = Finding(code="nothing-drawn", severity=Severity.ERROR, text="nothing on our layers")
    svg = overlay(ground(), nothing, (finding,))
    assert "nothing-drawn: nothing on our layers" in words(svg)


def test_the_same_input_gives_the_same_bytes() -> None:
    understood = sample(loads=(STATED,))
    assert overlay(ground(), understood, (UNREAD,)) == overlay(ground(), understood, (UNREAD,))


def test_an_empty_drawing_is_refused_in_one_sentence() -> None:
    from ezdxf.filemanagement import new

    with pytest.raises(DrawingError, match="empty"):
        overlay(saved(new("R2000")), layout(cable()), ())


def test_a_missing_library_is_named(monkeypatch: pytest.MonkeyPatch) -> None:
    import sys

    monkeypatch.setitem(sys.modules, "PIL", None)
    with pytest.raises(DxfcableError, match="pillow"):
        overlay(ground(), sample(), ())


@pytest.mark.parametrize("path", DEMONSTRATIONS, ids=lambda path: path.stem)
def test_every_load_of_a_demonstration_drawing_is_marked_once(path: Path) -> None:
    data = path.read_bytes()
    outcome = read_bytes(data, Options(units="m"))
    assert outcome.layout is not None
    svg = overlay(data, outcome.layout, outcome.findings)
    loads = [load for found in outcome.layout.cables for load in found.loads]
    assert len(groups(svg, "load")) == len(loads) > 4
    assert len(groups(svg, "support")) == len(outcome.layout.supports)


def test_a_document_in_memory_can_be_put_on_a_page() -> None:
    page = page_of(load(ground()).doc, size=400)
    assert page.width == pytest.approx(400 * 25.4 / 96, abs=0.1)
