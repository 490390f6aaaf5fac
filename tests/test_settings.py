"""The office's settings: defaults, overrides, and refusals that name the key."""

from __future__ import annotations

import subprocess
import sys
import tomllib
from dataclasses import fields

import pytest

from dxfcable.errors import DxfcableError
from dxfcable.settings import Fitting, Settings, default_page, load


def test_the_page_reads_back_as_the_defaults() -> None:
    assert load(default_page()) == Settings()


def test_an_empty_page_gives_the_defaults() -> None:
    assert load("") == Settings()


def test_the_page_names_every_key() -> None:
    page = tomllib.loads(default_page())
    settings = Settings()
    assert list(page) == [f.name for f in fields(settings)]
    for table in fields(settings):
        if table.name != "cut_length":
            keys = [f.name for f in fields(getattr(settings, table.name))]
            assert list(page[table.name]) == keys


def test_a_page_overrides_what_it_names_and_no_more() -> None:
    settings = load('[layers]\nload = "X-LOAD"\n[limits]\nspan_m = [1, 50]\ntext_reach = 4')
    assert settings.layers.load == "X-LOAD"
    assert settings.layers.support == "S-CABL-SUPP"
    assert settings.limits.span_m == (1.0, 50.0)
    assert settings.limits.text_reach == 4.0


def test_roles_are_told_apart_by_who_draws() -> None:
    layers = Settings().layers
    assert layers.input_roles()[0] == "support"
    assert layers.input_roles()[-1] == "frame"
    assert layers.output_roles()[0] == "profile"
    assert layers.output_roles()[-1] == "revision"
    assert len(layers.input_roles()) + len(layers.output_roles()) == len(fields(layers))
    assert layers.name("mast") == "S-CABL-MAST"


def test_a_layer_has_its_role_without_regard_to_case() -> None:
    layers = Settings().layers
    assert layers.role("s-cabl-load ") == "load"
    assert layers.role("S_CABL_LOAD") is None
    assert layers.role("S-CABL-PROF") is None


def test_case_letters_and_aliases_compare_without_regard_to_case() -> None:
    cases = Settings().cases
    assert [cases.find(tag) for tag in ("d", "LR", "sdl", "eq", "X")] == ["D", "Lr", "D", "E", None]


def test_fittings_are_named_by_the_office() -> None:
    settings = load("[cut_length]\nopen_socket = { pin_to_face = 0.3, embedment = 0.1 }")
    assert settings.fitting("OPEN_SOCKET") == Fitting(pin_to_face=0.3, embedment=0.1)
    assert settings.fitting("button") is None


@pytest.mark.parametrize(
    ("page", "key"),
    [
        ("[colours]\na = 1", "colours"),
        ("[layers]\nlaod = 'X'", "layers.laod"),
        ("layers = 3", "layers"),
        ("[units]\ndecimal_comma = 'yes'", "units.decimal_comma"),
        ("[units]\nforce = 'tons'", "units.force"),
        ("[units]\nupward_sign = '+'", "units.upward_sign"),
        ("[limits]\ntext_reach = '6'", "limits.text_reach"),
        ("[limits]\ntext_reach = true", "limits.text_reach"),
        ("[limits]\ntext_reach = nan", "limits.text_reach"),
        ("[limits]\ntext_reach = -1.0", "limits.text_reach"),
        ("[limits]\ntext_ratio = 0.5", "limits.text_ratio"),
        ("[limits]\ntouch = 0.0", "limits.touch"),
        ("[limits]\nspan_m = [5.0]", "limits.span_m"),
        ("[limits]\nspan_m = [9.0, 3.0]", "limits.span_m"),
        ("[show]\nforce_digits = 2.5", "show.force_digits"),
        ("[show]\nforce_digits = 0", "show.force_digits"),
        ("[show]\nplot_scale = 'big'", "show.plot_scale"),
        ("[show]\ntext_mm = 0", "show.text_mm"),
        ("[strength]\nlevel = 'ULS'", "strength.level"),
        ("[sheet]\nsize = 'A9'", "sheet.size"),
        ("[sheet]\ndate = 2024-01-01", "sheet.date"),
        ("[cases]\nletters = [1]", "cases.letters"),
        ("[cases]\nletters = ['D', 'd']", "cases"),
        ("[cases]\nalias = { DW = 'Z' }", "cases.alias.DW"),
        ("[cases]\nalias = { DW = 1 }", "cases.alias"),
        ("[cut_length]\nsocket = 3", "cut_length.socket"),
        ("[cut_length]\nsocket = { face = 3.0 }", "cut_length.socket.face"),
        ("[layers]\nload = 'A|B'", "layers.load"),
        ("[layers]\nload = ''", "layers.load"),
        ("[layers]\nload = ' X'", "layers.load"),
        ("[layers]\nload = 's-cabl-supp'", "layers.load"),
        ("[layers]\nprofile = 'S-CABL-LOAD'", "layers.profile"),
        ("[blocks]\nload = 'CABLE-DATA'", "blocks.data"),
    ],
)
def test_what_cannot_be_is_refused_by_name(page: str, key: str) -> None:
    with pytest.raises(DxfcableError) as caught:
        load(page)
    assert f"Settings: {key} " in caught.value.message
    assert caught.value.code == "settings"
    assert caught.value.remedy


@pytest.mark.parametrize("letter", '<>/\\":;?*|,=`')
def test_a_layer_name_that_cad_programs_refuse_is_refused(letter: str) -> None:
    with pytest.raises(DxfcableError, match=r"layers\.tension"):
        load(f"[layers]\ntension = '''S{letter}X'''")


def test_several_written_roles_may_share_a_layer() -> None:
    page = "[layers]\ntension = 'S-CABL-TEXT'\nelevation = 'S-CABL-TEXT'"
    assert load(page).layers.tension == load(page).layers.elevation


def test_a_page_that_is_no_toml_is_refused_with_its_line() -> None:
    with pytest.raises(DxfcableError, match="line 2"):
        load("[layers]\nload = \n")


def test_settings_and_quantities_import_nothing_heavy() -> None:
    program = (
        "import sys, dxfcable.settings, dxfcable.quantities\n"
        "print(sorted({'ezdxf', 'numpy', 'shapely', 'rich', 'typer'} & set(sys.modules)))"
    )
    done = subprocess.run([sys.executable, "-c", program], capture_output=True, text=True)
    assert done.stdout.strip() == "[]", done.stderr
