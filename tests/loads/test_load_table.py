"""The load table as CSV: what is written reads back, and every fault of a table is told at once."""

from __future__ import annotations

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st

from dxfcable.errors import LayoutError
from dxfcable.forces import Force
from dxfcable.loads import load_table
from dxfcable.loads.load_table import TableCode
from dxfcable.model import Finding, Layout, LoadPoint, LoadSymbol, Origin, Severity, Support
from dxfcable.settings import Cases, Settings, Units
from dxfcable.units import convert
from tests.drawing.excerpts import Sketch
from tests.layouts import cable, layout, load, sample

COMMA = Settings(units=Units(decimal_comma=True))


def point(mark: str, x: float, *, raw: str = "", kind: str = "TEXT", **cases: float) -> LoadPoint:
    """Return a load point with the drafter's words."""
    return LoadPoint(
        mark=mark,
        x=x,
        y=0.0,
        cases=tuple(cases.items()),
        symbol=LoadSymbol.BLOCK,
        origin=Origin(handle=f"F{x:g}", line=int(x), at=(x, 0.0)),
        value_origin=Origin(raw=raw, kind=kind) if raw else None,
    )


def missing(of: LoadPoint, mark: str = "C1") -> Finding:
    """Return the reader's finding on a load point without value."""
    return Finding(
        code="load-value-missing",
        severity=Severity.ERROR,
        text=f"load point {of.mark} has no value",
        cable=mark,
        handle=of.origin.handle,
        line=of.origin.line,
        at=of.origin.at,
    )


def two_cables() -> Layout:
    """Return cables C1 and C2 that both have a P1."""
    other = (Support(key=2, mark="S3", x=0.0, y=2.0), Support(key=3, mark="S4", x=9.0, y=2.0))
    return layout(cable(), cable(mark="C2", supports=other, loads=(load("P1", 4.0, 7.0),)))


def read(text: str, drawn: Layout | None = None, settings: Settings | None = None) -> Layout:
    """Read a table for a layout and put it in."""
    drawn = drawn or sample()
    settings = settings or Settings()
    return load_table.apply(drawn, load_table.read(text, drawn, settings))


def refused(text: str, drawn: Layout | None = None, settings: Settings | None = None) -> list[str]:
    """Return the codes of the errors of a table, and check that each says its line."""
    with pytest.raises(LayoutError) as caught:
        load_table.read(text, drawn or sample(), settings or Settings())
    found = [f for f in caught.value.findings if isinstance(f, Finding)]
    assert len(found) == len(caught.value.findings)
    return [f.code for f in found if f.severity is Severity.ERROR]


def values(drawn: Layout, number: int = 0) -> dict[str, dict[str, float]]:
    """Return the loads of a cable by mark and case."""
    return {point.mark: dict(point.cases) for point in drawn.cables[number].loads}


def notes(drawn: Layout, code: str) -> list[str]:
    """Return the texts of findings of a code."""
    return [f.text for f in drawn.findings if f.code == code]


# --- writing --------------------------------------------------------------------------------


def test_a_table_has_a_row_for_each_point_and_a_column_for_each_case() -> None:
    assert load_table.write(sample(), Settings()) == "cable,mark,D (kN)\nC1,P1,15\nC1,P2,21\n"


def test_a_point_without_value_gets_empty_cells() -> None:
    drawn = layout(cable(loads=(point("P1", 8.0), point("P2", 16.0, D=21.5, L=4.0))))
    text = load_table.write(drawn, Settings())
    assert text == "cable,mark,D (kN),L (kN)\nC1,P1,,\nC1,P2,21.5,4\n"


def test_uncased_loads_stand_in_a_column_load() -> None:
    drawn = layout(cable(loads=(load("P1", 8.0, 15.0, case="load"),)))
    assert load_table.write(drawn, Settings()) == "cable,mark,load (kN)\nC1,P1,15\n"


def test_without_any_force_the_column_load_has_no_unit() -> None:
    drawn = replace(layout(cable(loads=(point("P1", 8.0),))), force_unit=None)
    assert load_table.write(drawn, Settings()) == "cable,mark,load\nC1,P1,\n"


def test_a_decimal_comma_comes_with_semicolons() -> None:
    drawn = layout(cable(loads=(load("P1", 8.0, 22.5),)))
    assert load_table.write(drawn, COMMA) == "cable;mark;D (kN)\nC1;P1;22,5\n"


def test_loads_at_supports_stand_in_the_table_from_left_to_right() -> None:
    drawn = layout(cable(support_loads=((0, load("Q1", 0.0, 3.0)), (1, load("Q2", 24.0, 4.0)))))
    rows = load_table.write(drawn, Settings()).splitlines()[1:]
    assert [row.split(",")[1] for row in rows] == ["Q1", "P1", "P2", "Q2"]


# --- what is read ---------------------------------------------------------------------------


def test_a_case_column_sets_the_values_of_the_points_named() -> None:
    drawn = read("mark,D (kN)\nP2,22.5\n")
    assert values(drawn) == {"P1": {"D": 15.0}, "P2": {"D": 22.5}}
    assert [p.source for p in drawn.cables[0].loads] == ["drawing", "csv"]
    assert notes(drawn, TableCode.LOADS_SET) == [
        "cable C1: the load table sets P2 (1 of 2 load points); P1 keeps its value"
    ]


def test_a_value_may_carry_its_own_unit_and_is_converted() -> None:
    drawn = read('mark,D\nP1,2 kip\nP2,"22.5 kN"\n')
    assert values(drawn)["P1"]["D"] == convert(2.0, "kip", "kN")
    assert notes(drawn, "force-units-mixed") == [
        "the load table states forces in kip; all are given in kN"
    ]


def test_a_blank_cell_keeps_the_drawn_value_and_a_new_case_is_added() -> None:
    drawn = read("mark,D (kN),L (kN)\nP1,,6\nP2,20,\n")
    assert values(drawn) == {"P1": {"D": 15.0, "L": 6.0}, "P2": {"D": 20.0}}


def test_a_row_of_blank_cells_sets_nothing() -> None:
    drawn = read("mark,D (kN)\nP1,\nP2,20\n")
    assert [p.source for p in drawn.cables[0].loads] == ["drawing", "csv"]


@pytest.mark.parametrize(
    "text",
    [
        "\ufeffMark;d (kN)\r\nP1;22,5\r\n",
        "\n\ncable,MARK,DL [kN]\n\nc1,p1,22.5\n",
        'mark,"SDL (kn)"\n"P1","22.5"\n',
        "mark,D(kN),\nP1,22.5,\n",
        "mark;D\nP1;22,5 kN\n",
        "mark, D (kN)\rP1, 22.5",
        "mark;D (N)\nP1;22 500,0\n",
    ],
)
def test_separators_marks_of_order_and_spellings_that_offices_use_are_accepted(text: str) -> None:
    assert values(read(text))["P1"]["D"] == pytest.approx(22.5, rel=1e-15)


def test_two_columns_of_one_case_add_and_say_so() -> None:
    drawn = read("mark,DL (kN),SDL (kN)\nP1,10,4\n")
    assert values(drawn)["P1"] == {"D": 14.0}
    assert notes(drawn, TableCode.CASES_ADDED) == [
        "load table: DL, SDL are all case D; their values are added"
    ]


def test_a_bare_value_takes_the_unit_of_the_command_line_before_that_of_the_settings() -> None:
    settings = Settings(units=Units(force="kip"))
    table = load_table.read("mark,D\nP1,9\n", sample(), settings, "kN")
    drawn = load_table.apply(sample(), table)
    assert values(drawn)["P1"]["D"] == 9.0
    assert notes(drawn, "force-unit-assumed") == [
        "1 loads of the load table without unit are read as kN"
    ]
    assert table.entries[0].values == (("D", Force(value=9.0, unit="kN", is_bare=True)),)


def test_the_column_cable_tells_equal_marks_apart() -> None:
    drawn = read("cable,mark,D (kN)\nC2,P1,9\n", two_cables())
    assert values(drawn, 0)["P1"] == {"D": 15.0}
    assert values(drawn, 1)["P1"] == {"D": 9.0}


def test_loads_at_supports_are_set_too() -> None:
    drawn = read("mark,D (kN)\nQ1,9\n", layout(cable(support_loads=((0, load("Q1", 0.0, 3.0)),))))
    (key, at_support), *_ = drawn.cables[0].support_loads
    assert (key, dict(at_support.cases), at_support.source) == (0, {"D": 9.0}, "csv")


def test_without_a_force_in_the_drawing_the_leftmost_value_gives_the_unit() -> None:
    points = (point("P1", 8.0), point("P2", 16.0))
    blank = replace(layout(cable(loads=points)), force_unit=None)
    drawn = read("mark,load\nP2,3 kN\nP1,2 kip\n", blank)
    assert drawn.force_unit == "kip"
    assert values(drawn)["P2"]["load"] == convert(3.0, "kN", "kip")


# --- what becomes of the drawing's words and findings ---------------------------------------


def test_a_value_that_differs_keeps_the_drafters_words_and_an_equal_one_does_not() -> None:
    points = (
        point("P1", 8.0, raw="15 kN", D=15.0),
        point("P2", 16.0, raw="D=21 kN", kind="INSERT", D=21.0),
    )
    drawn = read("mark,D (kN)\nP1,16\nP2,21\n", layout(cable(loads=points)))
    assert [p.drawn for p in drawn.cables[0].loads] == ["15 kN", ""]
    assert [p.source for p in drawn.cables[0].loads] == ["csv", "csv"]


def test_words_of_several_attributes_or_with_formatting_are_given_as_values() -> None:
    points = (
        point("P1", 8.0, raw="D=15 kN", kind="INSERT", D=15.0, L=4.5),
        point("P2", 16.0, raw=r"{\fArial;21 kN}", kind="MTEXT", D=21.0),
    )
    drawn = read("mark,D (kN)\nP1,16\nP2,22\n", layout(cable(loads=points)))
    assert [p.drawn for p in drawn.cables[0].loads] == ["D=15 kN L=4.5 kN", "D=21 kN"]


def test_a_point_that_had_no_value_loses_its_finding_and_only_it() -> None:
    points = (point("P1", 8.0), point("P2", 16.0))
    blank = replace(layout(cable(loads=points)), findings=tuple(missing(point) for point in points))
    drawn = read("mark,load (kN)\nP1,15\nP2,\n", blank)
    assert notes(drawn, "load-value-missing") == ["load point P2 has no value"]
    assert [p.drawn for p in drawn.cables[0].loads] == ["", ""]


def test_values_with_cases_replace_a_drawn_value_without_and_mend_a_mixture() -> None:
    mixed = Finding(code="cases-mixed", severity=Severity.ERROR, text="mixed", cable="C1")
    points = (point("P1", 8.0, raw="15 kN", load=15.0), point("P2", 16.0, D=21.0))
    drawn = read("mark,D (kN)\nP1,14\n", replace(layout(cable(loads=points)), findings=(mixed,)))
    assert values(drawn)["P1"] == {"D": 14.0}
    assert drawn.cables[0].loads[0].drawn == "15 kN"
    assert notes(drawn, "cases-mixed") == []


def test_points_drawn_with_a_mark_only_are_filled_by_the_table_that_was_written_for_them() -> None:
    sketch = Sketch()
    sketch.support(0, 12, MARK="S1", EL="12.000")
    sketch.support(24, 13, MARK="S2", EL="13.000")
    sketch.load(8, 7.8, "P1")
    sketch.load_block(16, 7.9, MARK="P2", D="21 kN")
    sketch.load(0, 7.0, "P0")
    blank = sketch.read()
    assert sorted(f.code for f in blank.findings if f.severity is Severity.ERROR) == [
        "load-value-missing",
        "load-value-missing",
    ]
    text = load_table.write(blank, Settings())
    assert text == "cable,mark,D (kN)\nC1,P0,\nC1,P1,\nC1,P2,21\n"
    full = text.replace("P0,", "P0,4").replace("P1,", "P1,15").replace("21", "22")
    drawn = read(full, blank)
    assert not [f for f in drawn.findings if f.severity is Severity.ERROR]
    assert values(drawn) == {"P1": {"D": 15.0}, "P2": {"D": 22.0}}
    assert [p.drawn for p in drawn.cables[0].loads] == ["", "D=21 kN"]
    assert dict(drawn.cables[0].support_loads[0][1].cases) == {"D": 4.0}


# --- what is refused ------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("text", "codes"),
    [
        ("", ["csv-header"]),
        ("P1,15 kN\n", ["csv-column-unknown", "csv-column-unknown", "csv-header"]),
        ("mark\nP1\n", ["csv-header"]),
        ("mark,D (kN),D (kN)\nP1,1,1\n", ["csv-header"]),
        ("mark,D (kN),remark\nP1,1,new\n", ["csv-column-unknown"]),
        ("mark,D (t)\nP1,1\n", ["load-unit-ambiguous"]),
        ("mark,D (kN)\nP9,1\n", ["csv-mark-unknown"]),
        ("mark,D (kN)\nP1,1\nP1,2\n", ["csv-mark-repeated"]),
        ("cable,mark,D (kN)\nC7,P1,1\n", ["csv-cable-unknown"]),
        ("mark,D (kN)\n,1\n", ["csv-mark-missing"]),
        ("mark,D\nP1,15\n", ["load-unit-missing"]),
        ("mark,D\nP1,8.2 t\n", ["load-unit-ambiguous"]),
        ("mark,D (kN)\nP1,l5\n", ["load-typo"]),
        ("mark,D (kN)\nP1,-5\n", ["load-sign"]),
        ("mark,D (kN)\nP1,nan\n", ["load-unread"]),
        ("mark,D (kN)\nP1,2 kip\n", ["csv-units-differ"]),
        ("mark,D (kN)\nP1,22,5\n", ["csv-cells"]),
        ('mark,D (kN)\nP1,"15\n', ["csv-unread"]),
        ("mark,load (kN)\nP1,15\n", ["cases-mixed"]),
        ("mark,D (kN),load (kN)\nP1,15,3\n", ["cases-mixed"]),
        ("mark;D (kN)\nP1;1.500\n", ["number-ambiguous"]),
    ],
)
def test_a_table_that_does_not_read_or_fit_is_refused(text: str, codes: list[str]) -> None:
    assert refused(text) == codes


def test_all_faults_are_told_at_once_each_with_its_line() -> None:
    text = "mark,D (kN),Q9\nP9,1,\nP1,abc,\nP2,1,\nP2,2,\n"
    with pytest.raises(LayoutError) as caught:
        load_table.read(text, sample(), Settings())
    told = [f.text for f in caught.value.findings if isinstance(f, Finding)]
    lines = [text.partition(" of the load table")[0] for text in told]
    assert lines == ["line 1", "line 3", "line 2", "line 5"]


def test_a_record_over_several_lines_does_not_shift_the_line_numbers() -> None:
    with pytest.raises(LayoutError) as caught:
        load_table.read('mark,D (kN)\n"P\n1",2\nP9,1\n', sample(), Settings())
    told = [f.text for f in caught.value.findings if isinstance(f, Finding)]
    assert [text.partition(" of ")[0] for text in told] == ["line 2", "line 4"]


def test_a_mark_of_two_cables_needs_the_column_cable() -> None:
    assert refused("mark,D (kN)\nP1,1\n", two_cables()) == ["csv-mark-ambiguous"]
    assert refused("cable,mark,D (kN)\n,P1,1\n", two_cables()) == ["csv-mark-ambiguous"]


def test_a_mark_twice_on_one_cable_cannot_be_named_and_the_remedy_says_so() -> None:
    twice = layout(cable(loads=(load("P1", 8.0, 1.0), load("P1", 16.0, 2.0))))
    for drawn, remedy in ((twice, "own mark"), (two_cables(), "column cable")):
        with pytest.raises(LayoutError) as caught:
            load_table.read("mark,D (kN)\nP1,1\n", drawn, Settings())
        (found,) = [f for f in caught.value.findings if isinstance(f, Finding)]
        assert found.code == "csv-mark-ambiguous"
        assert remedy in found.remedy
    assert refused("cable,mark,D (kN)\nC1,P1,1\n", twice) == ["csv-mark-ambiguous"]


def test_a_comma_between_semicolons_is_doubted_where_commas_group_thousands() -> None:
    drawn = replace(sample(), length_unit="ft", force_unit="lb")
    assert refused("mark;D (lb)\nP1;18,000\n", drawn) == ["number-ambiguous"]
    told = read("mark;D (lb)\nP1;18,000\n", drawn, COMMA)
    assert values(told)["P1"] == {"D": 18.0}
    quoted = read('mark,D (lb)\nP1,"18,000"\n', drawn)
    assert values(quoted)["P1"] == {"D": 18000.0}


# --- laws -----------------------------------------------------------------------------------

_FORCES = st.floats(min_value=0.0, max_value=1e9, allow_nan=False)
_MARKS = st.text(
    st.characters(codec="ascii", exclude_characters="\r\n", min_codepoint=33), min_size=1
)
_LETTERS = st.sampled_from(Cases().letters)


@st.composite
def _layouts(draw: st.DrawFn) -> Layout:
    """Draw one or two cables, each cased or not, some points without value."""
    cables = []
    for mark in draw(st.sampled_from((("C1",), ("C1", "C;2")))):
        names = draw(st.lists(_MARKS, min_size=1, max_size=5, unique_by=str.casefold))
        cases = st.just("load") if draw(st.booleans()) else _LETTERS
        points = [
            LoadPoint(
                mark=name,
                x=1.0 + k,
                y=0.0,
                cases=tuple(draw(st.dictionaries(cases, _FORCES, max_size=3)).items()),
                symbol=LoadSymbol.POINT,
            )
            for k, name in enumerate(names)
        ]
        held = tuple((0, p) for p in points[:1]) if draw(st.booleans()) else ()
        cables.append(cable(mark=mark, loads=tuple(points[len(held) :]), support_loads=held))
    return layout(*cables)


def _all_cases(drawn: Layout) -> list[list[tuple[str, dict[str, float]]]]:
    """Return marks and values of all load points, cable by cable."""
    return [
        [(p.mark, dict(p.cases)) for p in (*c.loads, *(q for _, q in c.support_loads))]
        for c in drawn.cables
    ]


@given(drawn=_layouts(), settings=st.sampled_from((Settings(), COMMA)))
def test_what_is_written_reads_back_exactly(drawn: Layout, settings: Settings) -> None:
    table = load_table.read(load_table.write(drawn, settings), drawn, settings)
    again = load_table.apply(drawn, table)
    assert _all_cases(again) == _all_cases(drawn)
    assert load_table.write(again, settings) == load_table.write(drawn, settings)
    assert all(p.drawn == "" for c in again.cables for p in c.loads)


@given(drawn=_layouts(), settings=st.sampled_from((Settings(), COMMA)))
def test_a_written_table_fills_the_same_drawing_without_its_values(
    drawn: Layout, settings: Settings
) -> None:
    bare = replace(
        drawn,
        cables=tuple(
            replace(
                c,
                loads=tuple(replace(p, cases=()) for p in c.loads),
                support_loads=tuple((k, replace(p, cases=())) for k, p in c.support_loads),
            )
            for c in drawn.cables
        ),
    )
    table = load_table.read(load_table.write(drawn, settings), bare, settings)
    assert _all_cases(load_table.apply(bare, table)) == _all_cases(drawn)
