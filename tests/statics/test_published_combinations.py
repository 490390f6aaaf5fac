"""Combinations of standards, expanded.

Status TEXT: the combination was read in a page that quotes the standard; MEM: from memory of
the standard, not seen. What each expands to is OWN: written out by hand.
"""

from __future__ import annotations

import pytest

from dxfcable.statics.expansion import expand

US = ["D", "L", "Lr", "S", "R", "W", "Ev", "Eh"]
EN = ["G", "Q", "S", "W", "T"]

# ASCE 7-16, 2.3.1 (strength): TEXT, a public page that quotes it
STRENGTH = {
    "1.4D": ["1.4D"],
    "1.2D + 1.6L + 0.5(Lr or S or R)": [
        "1.2D + 1.6L + 0.5Lr",
        "1.2D + 1.6L + 0.5S",
        "1.2D + 1.6L + 0.5R",
    ],
    "1.2D + 1.6(Lr or S or R) + (L or 0.5W)": [
        "1.2D + 1.6Lr + L",
        "1.2D + 1.6Lr + 0.5W",
        "1.2D + 1.6S + L",
        "1.2D + 1.6S + 0.5W",
        "1.2D + 1.6R + L",
        "1.2D + 1.6R + 0.5W",
    ],
    "1.2D + 1.0W + L + 0.5(Lr or S or R)": [
        "1.2D + 1.0W + L + 0.5Lr",
        "1.2D + 1.0W + L + 0.5S",
        "1.2D + 1.0W + L + 0.5R",
    ],
    "0.9D + 1.0W": ["0.9D + 1.0W"],
    "1.2D + Ev + Eh + L + 0.2S": ["1.2D + Ev + Eh + L + 0.2S"],
    "0.9D - Ev + Eh": ["0.9D - Ev + Eh"],
}

# ASCE 7-16, 2.4.1 (allowable stress): MEM
ALLOWABLE = {
    "D": ["D"],
    "D + L": ["D + L"],
    "D + (Lr or S or R)": ["D + Lr", "D + S", "D + R"],
    "D + 0.75L + 0.75(Lr or S or R)": [
        "D + 0.75L + 0.75Lr",
        "D + 0.75L + 0.75S",
        "D + 0.75L + 0.75R",
    ],
    "D + 0.6W": ["D + 0.6W"],
    "D + 0.75L + 0.75(0.6W) + 0.75(Lr or S or R)": [
        "D + 0.75L + 0.45W + 0.75Lr",
        "D + 0.75L + 0.45W + 0.75S",
        "D + 0.75L + 0.45W + 0.75R",
    ],
    "0.6D + 0.6W": ["0.6D + 0.6W"],
    "D + 0.7Ev + 0.7Eh": ["D + 0.7Ev + 0.7Eh"],
    "D + 0.525Ev + 0.525Eh + 0.75L + 0.75S": ["D + 0.525Ev + 0.525Eh + 0.75L + 0.75S"],
    "0.6D - 0.7Ev + 0.7Eh": ["0.6D - 0.7Ev + 0.7Eh"],
}

# EN 1990, expression 6.10 and table A1.2, factors and psi0 (wind and temperature 0.6, snow below
# 1000 m 0.5, imposed 0.7) and xi 0.85 of 6.10b: TEXT, public pages that quote the recommended
# values; national annexes differ. How they stand together in these texts: OWN.
ULTIMATE = {
    "1.35G + 1.5Q + 1.5(0.6W)": ["1.35G + 1.5Q + 0.9W"],
    "1.35G + 1.5W + 1.5(0.5S) + 1.5(0.7Q)": ["1.35G + 1.5W + 0.75S + 1.05Q"],
    "(1.35G or 1.00G) + 1.5(Q or S)": [
        "1.35G + 1.5Q",
        "1.35G + 1.5S",
        "1.00G + 1.5Q",
        "1.00G + 1.5S",
    ],
    "(1.10G or 0.90G) + 1.50W": ["1.10G + 1.50W", "0.90G + 1.50W"],
    "1.00G + 1.30(Q or W)": ["1.00G + 1.30Q", "1.00G + 1.30W"],
    "0.85(1.35G) + 1.5Q": ["1.1475G + 1.5Q"],
    "1.35G + 1.5Q + 1.5(0.6T)": ["1.35G + 1.5Q + 0.9T", "1.35G + 1.5Q - 0.9T"],
}


@pytest.mark.parametrize(("text", "alternatives"), (STRENGTH | ALLOWABLE).items())
def test_the_combinations_of_asce_7_16(text: str, alternatives: list[str]) -> None:
    assert [one.text for one in expand(text, US)] == alternatives


@pytest.mark.parametrize(("text", "alternatives"), ULTIMATE.items())
def test_combinations_of_the_fundamental_kind_of_en_1990(
    text: str, alternatives: list[str]
) -> None:
    assert [one.text for one in expand(text, EN)] == alternatives


@pytest.mark.parametrize("text", STRENGTH)
def test_the_strength_combinations_are_taken_for_factored(text: str) -> None:
    assert {one.level for one in expand(text, US)} == {"factored"}


@pytest.mark.parametrize("text", ALLOWABLE)
def test_the_allowable_stress_combinations_are_taken_for_service(text: str) -> None:
    assert {one.level for one in expand(text, US)} == {"service"}
