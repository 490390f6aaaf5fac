"""What is kept of a cable reads back exactly, or says why it does not."""

from __future__ import annotations

from dataclasses import replace

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.drawing import record
from dxfcable.drawing.bytes.scan import scan
from dxfcable.drawing.cable_reading import UnreadCable, read_cable, read_cables, sort_cables
from dxfcable.drawing.cable_record import cable_text
from dxfcable.drawing.record import FileFacts, Memory
from dxfcable.drawing.strip import plan_strip
from dxfcable.errors import DrawingError
from dxfcable.model import CableRevisions, PointChange, RevisionRow, Rule, RuleKind
from dxfcable.recorded import (
    CableRecord,
    RecordedHead,
    RecordedLoad,
    RecordedStay,
    RecordedSupport,
)

# Letters that would end a line, a value or a string, or that code pages lack.
_TEXTS = st.text(max_size=8) | st.text("ab,;:=|^%\\\n \u00df\u6a4b\U0001f309", max_size=8)
_FLOATS = st.floats(allow_nan=False)
_POINTS = st.tuples(_FLOATS, _FLOATS)
_CASES = st.lists(st.tuples(_TEXTS, _FLOATS), max_size=3).map(tuple)
_LOADS = st.builds(
    RecordedLoad,
    mark=_TEXTS,
    x=_FLOATS,
    y=_FLOATS,
    cases=_CASES,
    drawn=_CASES,
    formed=_CASES,
    source=st.sampled_from(["drawing", "csv"]),
)
_RULES = st.builds(
    Rule,
    kind=st.sampled_from(RuleKind),
    value=_FLOATS,
    point=st.none() | _POINTS,
    text=_TEXTS,
)
_HEADS = st.builds(
    RecordedHead,
    support=_TEXTS,
    head=_POINTS,
    mast_foot=_POINTS,
    mast_length=_FLOATS,
    mast_ea=st.none() | _FLOATS,
    stays=st.lists(
        st.builds(RecordedStay, foot=_POINTS, length=_FLOATS, ea=_FLOATS), max_size=2
    ).map(tuple),
)
_REVISIONS = st.builds(
    CableRevisions,
    cable=_TEXTS,
    rows=st.lists(
        st.builds(
            RevisionRow,
            number=st.integers(0, 99),
            rev=_TEXTS,
            description=_TEXTS,
            by=_TEXTS,
            date=_TEXTS,
        ),
        max_size=2,
    ).map(tuple),
    old=st.lists(st.lists(_POINTS, max_size=3).map(tuple), max_size=2).map(tuple),
    changes=st.lists(
        st.builds(PointChange, mark=_TEXTS, at=_POINTS, dx=_FLOATS, dy=_FLOATS), max_size=2
    ).map(tuple),
)
_RECORDS = st.builds(
    CableRecord,
    mark=_TEXTS,
    status=st.sampled_from(["formed", "cut"]),
    length_unit=st.sampled_from(["ft", "us-ft", "m"]),
    force_unit=st.none() | st.sampled_from(["kip", ""]),
    rule=_RULES,
    under=_TEXTS,
    level=st.none() | _TEXTS,
    weight=_FLOATS,
    weight_case=st.none() | _TEXTS,
    ea=st.none() | _FLOATS,
    alpha=st.none() | _FLOATS,
    delta_t=_FLOATS,
    datum=st.none() | _FLOATS,
    supports=st.lists(
        st.builds(RecordedSupport, mark=_TEXTS, x=_FLOATS, y=_FLOATS, formed=_POINTS), max_size=3
    ).map(tuple),
    loads=st.lists(_LOADS, max_size=3).map(tuple),
    support_loads=st.lists(st.tuples(_TEXTS, _LOADS), max_size=2).map(tuple),
    pieces=st.lists(_FLOATS, max_size=3).map(tuple),
    heads=st.lists(_HEADS, max_size=2).map(tuple),
    combos=st.lists(_TEXTS, max_size=2).map(tuple),
    revisions=st.none() | _REVISIONS,
    stated_rule=st.none() | _RULES,
    stated_under=st.none() | _TEXTS,
)

# As the version before wrote it: without what the drawing said and what was formed under.
EARLIER = (
    "units,m,kN;cable,C=C3=A9,formed;rule,sag,2.4;under,D;weight,0.0,;ea,9000.0;datum,;"
    "support,S1,0.0,12.0,end;support,S2,24.0,13.0,end;load,P1,8.0,7.586,drawing,D,15.0;piece,8.1"
)


def kept(mark: str = "C1", *, load: float = 15.0, count: int = 1) -> CableRecord:
    """Return the record of a cable with equal loads."""
    cases = (("D", load),)
    return CableRecord(
        mark=mark,
        status="formed",
        length_unit="m",
        force_unit="kN",
        rule=Rule(kind=RuleKind.SAG, value=2.4, text="2.4"),
        under="D",
        level=None,
        weight=0.0,
        weight_case=None,
        ea=9000.0,
        alpha=None,
        delta_t=0.0,
        datum=None,
        supports=(
            RecordedSupport(mark="S1", x=0.0, y=12.0, formed=(0.0, 12.0)),
            RecordedSupport(mark="S2", x=24.0, y=13.0, formed=(24.0, 13.0)),
        ),
        loads=tuple(
            RecordedLoad(
                mark=f"P{k}",
                x=24.0 * k / (count + 1),
                y=8.0,
                cases=cases,
                drawn=cases,
                formed=cases,
            )
            for k in range(1, count + 1)
        ),
        support_loads=(),
        pieces=(8.1,) * (count + 1),
    )


@settings(max_examples=60)
@given(_RECORDS)
def test_every_field_reads_back_exactly(cable: CableRecord) -> None:
    found = read_cable(cable_text(cable))
    assert found == cable
    assert repr(found) == repr(cable)  # tells -0.0 from 0.0


def test_a_record_without_what_the_data_block_stated_reads_as_none() -> None:
    stated = Rule(kind=RuleKind.PULL, value=55.0, text="PULL 55 kN")
    lines = cable_text(replace(kept(), stated_rule=stated, stated_under="D + L")).split(";")
    before = ";".join(line for line in lines if not line.startswith("stated-"))
    assert len(before.split(";")) == len(lines) - 2
    assert read_cable(before) == kept()


@settings(max_examples=40)
@given(_RECORDS)
def test_a_record_has_no_letters_that_a_program_may_change(cable: CableRecord) -> None:
    text = cable_text(cable)
    assert text.isascii()
    assert text.isprintable()
    assert not any(mark in text for mark in ("^", "%", "\\", " "))


@settings(max_examples=40)
@given(_RECORDS, st.dictionaries(_TEXTS, _POINTS, max_size=2), st.lists(_TEXTS, max_size=2))
def test_lines_of_the_file_and_of_the_cable_share_a_text(
    cable: CableRecord, places: dict[str, tuple[float, float]], opened: list[str]
) -> None:
    facts = FileFacts(opened=tuple(dict.fromkeys(opened)), memory=Memory(places=places))
    text = f"{record.facts_text(facts)};{cable_text(cable)}"
    assert record.read_facts([text]) == facts
    assert read_cables([text]) == (cable,)


@settings(max_examples=40)
@given(_RECORDS, st.data())
def test_a_changed_letter_never_goes_unnoticed_past_the_checksum(
    cable: CableRecord, data: st.DataObject
) -> None:
    parts = record.parts(cable_text(cable))
    spoiled = [list(part) for part in parts]
    k = data.draw(st.integers(0, len(parts) - 1))
    line = data.draw(st.integers(1, len(parts[k]) - 1))
    at = data.draw(st.integers(len("record="), len(parts[k][line]) - 1))
    old = parts[k][line]
    spoiled[k][line] = f"{old[:at]}#{old[at + 1 :]}"
    assert read_cables(record.join(spoiled)) == ()
    assert read_cables(record.join([*spoiled, *parts])) == (cable,)


@settings(max_examples=60)
@given(_RECORDS, st.data())
def test_a_record_that_was_not_written_so_is_told_and_raises_nothing(
    cable: CableRecord, data: st.DataObject
) -> None:
    lines = cable_text(cable).split(";")
    k = data.draw(st.integers(0, len(lines) - 1))
    lines[k] += data.draw(st.sampled_from([",", ",=", ":", ",=ZZ", ",1.0,2.0,3.0"]))
    found = read_cable(";".join(lines))
    if isinstance(found, UnreadCable):
        assert found.reason.startswith("does not read: ")
    else:
        assert isinstance(found, CableRecord)


def test_numbers_of_numpy_are_written_as_plain_ones() -> None:
    cable = kept(load=np.float64(1 / 3))
    found = read_cable(cable_text(cable))
    assert isinstance(found, CableRecord)
    assert found.loads[0].cases == (("D", 1 / 3),)
    assert type(found.loads[0].cases[0][1]) is float


def test_a_record_of_an_earlier_version_is_told_by_the_mark_of_its_cable() -> None:
    read, unread = sort_cables([EARLIER, cable_text(kept("C2"))])
    assert [cable.mark for cable in read] == ["C2"]
    assert unread == (UnreadCable(mark="C\u00e9", reason="was written by an earlier version"),)


def test_a_cable_that_reads_once_is_not_told_as_unread() -> None:
    cable = kept("c\u00e9")
    assert sort_cables([EARLIER, cable_text(cable)]) == ((cable,), ())


def test_facts_alone_are_no_cable() -> None:
    assert read_cable(record.facts_text(FileFacts(opened=("row LAYER X",)))) is None
    assert read_cable("") is None


def test_a_cable_of_three_hundred_points_stays_within_what_entities_hold() -> None:
    parts = record.parts(cable_text(kept(count=300)))
    assert len(parts) > 1
    assert all(len(line) < 250 for part in parts for line in part)
    # Twelve thousand bytes an entity, of the sixteen that extended data may have (DXF reference).
    assert all(sum(map(len, part)) < 12_000 for part in parts)


# --- in a drawing ---


def drawing(*records: tuple[str, str], newest: bool = True) -> bytes:
    """Return a drawing with one marked line for each (id, text of its record)."""
    lines = ["0", "SECTION", "2", "ENTITIES"]
    for k, (name, text) in enumerate(records):
        (strings,) = record.parts(text)
        handle = f"{0x20 + k:X}"
        lines += ["0", "LINE", "5", handle, "8", "0", "10", "0.0", "20", "0.0"]
        lines += ["11", "1.0", "21", "0.0", "1001", "DXFCABLE", "1000", f"id={name}"]
        lines += ["1000", f"handle={handle if newest or k else 'FF'}"]
        lines += [word for string in strings for word in ("1000", string)]
        lines += ["1010", "0.0", "1020", "0.0", "1030", "0.0"]
    return "\n".join([*lines, "0", "ENDSEC", "0", "EOF", ""]).encode()


def test_stripping_hands_on_the_cables_of_a_drawing_once_each() -> None:
    first, second = kept("C1"), kept("\u6a4b")
    text, other = cable_text(first), cable_text(second)
    data = drawing(
        ("C1/profile/1", text), ("C1/table/1", text), ("C2/profile/1", other), ("C2/table/1", other)
    )
    stripping = plan_strip(scan(data))
    assert stripping.cables == (first, second)
    assert not stripping.findings


def test_what_a_copy_carries_does_not_outweigh_what_we_carry() -> None:
    stale, present = kept(load=10.0), kept(load=15.0)
    data = drawing(
        ("C1/profile/1", cable_text(stale)), ("C1/profile/1", cable_text(present)), newest=False
    )
    stripping = plan_strip(scan(data))
    assert stripping.cables == (present,)
    assert [finding.code for finding in stripping.findings] == ["copied"]


def test_a_copy_serves_where_ours_is_spoiled() -> None:
    cable = kept()
    text = cable_text(cable)
    data = drawing(("C1/profile/1", text), ("C1/profile/1", text))
    spoiled = data.replace(b"9000.0", b"9000.1", 1)
    assert plan_strip(scan(spoiled)).cables == (cable,)


def test_a_record_that_is_there_and_does_not_read_is_a_finding() -> None:
    stripping = plan_strip(scan(drawing(("C1/profile/1", EARLIER))))
    assert stripping.cables == ()
    (note,) = stripping.findings
    assert (note.code, note.cable) == ("record-unread", "C\u00e9")
    assert "earlier version" in note.text
    assert "again" in note.remedy


def test_a_later_format_is_refused_whatever_else_reads() -> None:
    data = drawing(("C1/profile/1", cable_text(kept())))
    later = data.replace(b"record=1/", b"record=2/")
    with pytest.raises(DrawingError, match="later version"):
        plan_strip(scan(later))
