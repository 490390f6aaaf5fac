"""Deductions on the office's page: by end fitting and by mark."""

from __future__ import annotations

import re

import pytest

from dxfcable.errors import DxfcableError
from dxfcable.settings import Fitting, Settings, default_page, load
from dxfcable.settings_cut_length import Marked


def test_the_examples_of_the_page_read_once_they_are_no_comments() -> None:
    page = default_page()
    table = page[page.index("[cut_length]") :]
    cut_length = load(re.sub(r"(?m)^# ", "", table)).cut_length
    assert [name for name, _ in cut_length.fittings] == ["open_socket"]
    assert [name for name, _ in cut_length.marks] == ["C1", "P1"]
    keys = re.findall(r"(?m)^# (\w+) =", table[table.index("marks.C1") :])
    assert keys == list(Marked.__dataclass_fields__)


def test_values_of_a_mark_come_from_the_first_name_that_states_them() -> None:
    page = """
    [cut_length.marks."*"]
    clamp_drop = 0.1
    deck_pin = 0.2
    hanger_top = "fork"
    [cut_length.marks."c1/p1"]
    deck_pin = 0.0
    """
    stated = load(page).cut_length.stated(["C1/P1", "P1", "C1", "*"])
    assert (stated.clamp_drop, stated.deck_pin, stated.hanger_top) == (0.1, 0.0, "fork")
    assert stated.pin_offset is None
    assert not stated.hanger_ea


def test_one_number_is_for_both_ends_and_two_are_left_and_right() -> None:
    page = "[cut_length.marks.C1]\npin_offset = 0.3\nembedment = [0.1, 0.2]"
    stated = load(page).cut_length.stated(["C1"])
    assert (stated.pin_offset, stated.embedment) == ((0.3, 0.3), (0.1, 0.2))


def test_marks_is_no_fitting() -> None:
    settings = load("[cut_length]\nfork = { pin_to_face = 0.1 }\n[cut_length.marks.C1]\n")
    assert settings.fitting("marks") is None
    assert settings.fitting("FORK") == Fitting(pin_to_face=0.1)
    assert Settings().cut_length.marks == ()


@pytest.mark.parametrize(
    ("page", "key"),
    [
        ("[cut_length]\nmarks = 3", "cut_length.marks"),
        ("[cut_length.marks]\nC1 = 3", "cut_length.marks.C1"),
        ("[cut_length.marks.C1]\nface = 0.1", "cut_length.marks.C1.face"),
        ("[cut_length.marks.C1]\npin_offset = -0.1", "cut_length.marks.C1.pin_offset"),
        ("[cut_length.marks.C1]\npin_offset = [0.1]", "cut_length.marks.C1.pin_offset"),
        ("[cut_length.marks.C1]\nclamp_drop = 'a'", "cut_length.marks.C1.clamp_drop"),
        ("[cut_length.marks.C1]\nhanger_ea = 9000", "cut_length.marks.C1.hanger_ea"),
        ("[cut_length.marks.C1]\nhanger_ea = '9000'", "cut_length.marks.C1.hanger_ea"),
        ("[cut_length.marks.C1]\nmeasuring_tension = '5 t'", "cut_length.marks.C1.measuring_t"),
        ("[cut_length.marks.C1]\nmeasuring_tension = '-5 kN'", "cut_length.marks.C1.measuring_t"),
        (
            "[cut_length.marks.C1]\nconstructional_stretch = 0.2",
            "cut_length.marks.C1.constructional_stretch",
        ),
        ("[cut_length.marks.C1]\n[cut_length.marks.c1]", "cut_length.marks."),
        ("[cut_length]\nfork = {}\nFORK = {}", "cut_length."),
    ],
)
def test_what_cannot_be_is_refused_by_name(page: str, key: str) -> None:
    with pytest.raises(DxfcableError) as caught:
        load(page)
    assert f"Settings: {key}" in caught.value.message
    assert caught.value.code == "settings"
    assert caught.value.remedy


def test_a_force_without_unit_reads_where_the_office_names_one() -> None:
    page = "[units]\nforce = 'kN'\n[cut_length.marks.C1]\nmeasuring_tension = '60'"
    assert load(page).cut_length.stated(["C1"]).measuring_tension == "60"


def test_a_negative_tension_is_no_tension() -> None:
    with pytest.raises(DxfcableError) as refused:
        load("[cut_length.marks.C1]\nmeasuring_tension = '-60 kN'")
    assert refused.value.remedy.startswith("A measuring_tension is above zero")
