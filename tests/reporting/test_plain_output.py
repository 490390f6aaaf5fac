"""What is printed into a pipe is what rich would print there."""

from __future__ import annotations

import io
from typing import TYPE_CHECKING

from hypothesis import given, settings
from hypothesis import strategies as st

from dxfcable.reporting.plain_output import WIDTH, PlainConsole, Table, is_plain, rich_console

if TYPE_CHECKING:
    from collections.abc import Callable
    from typing import Any

    import pytest

WORDS = st.text(st.characters(min_codepoint=32, max_codepoint=126), max_size=12)
LETTERS = st.text(st.characters(codec="utf-8"), max_size=12)
SENTENCES = st.lists(WORDS, max_size=60).map(" ".join)


def printed(make: Callable[[io.StringIO], Any], what: str | Table, **options: bool) -> str:
    stream = io.StringIO()
    make(stream).print(what, **options)
    return stream.getvalue()


@settings(max_examples=60, deadline=None)
@given(st.lists(SENTENCES, min_size=1, max_size=3).map("\n".join), st.booleans())
def test_text_is_parted_as_rich_parts_it(text: str, soft_wrap: bool) -> None:
    plain = printed(PlainConsole, text, soft_wrap=soft_wrap)
    assert plain == printed(rich_console, text, soft_wrap=soft_wrap)


@settings(max_examples=60, deadline=None)
@given(st.text(max_size=150), st.booleans())
def test_any_letters_come_out_as_rich_prints_them(text: str, soft_wrap: bool) -> None:
    plain = printed(PlainConsole, text, soft_wrap=soft_wrap)
    assert plain == printed(rich_console, text, soft_wrap=soft_wrap)


@settings(max_examples=60, deadline=None)
@given(st.integers(1, 7).flatmap(lambda n: st.lists(st.tuples(*[WORDS] * n), min_size=1)))
def test_tables_stand_as_rich_sets_them(rows: list[tuple[str, ...]]) -> None:
    table = Table(rows[0], rows[1:])
    assert printed(PlainConsole, table) == printed(rich_console, table)


@settings(max_examples=60, deadline=None)
@given(st.lists(st.tuples(LETTERS, LETTERS), min_size=1, max_size=5))
def test_tables_of_any_letters_stand_as_rich_sets_them(rows: list[tuple[str, ...]]) -> None:
    table = Table(rows[0], rows[1:])
    assert printed(PlainConsole, table) == printed(rich_console, table)


def test_a_table_wider_than_the_page_is_left_to_rich() -> None:
    table = Table(("a", "b"), [("x" * 70, "y" * 70)])
    assert table.lines() is None
    lines = printed(PlainConsole, table).splitlines()
    assert max(map(len, lines)) <= WIDTH


def test_a_stream_of_another_encoding_or_asked_for_color_is_left_to_rich(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    for name in ("FORCE_COLOR", "TTY_COMPATIBLE"):
        monkeypatch.delenv(name, raising=False)
    assert is_plain(io.TextIOWrapper(io.BytesIO(), encoding="utf-8"))
    assert not is_plain(io.TextIOWrapper(io.BytesIO(), encoding="cp1252"))
    monkeypatch.setenv("FORCE_COLOR", "1")
    assert not is_plain(io.TextIOWrapper(io.BytesIO(), encoding="utf-8"))
