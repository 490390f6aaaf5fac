"""The README tells the truth: its commands exist, and what it shows is what they print."""

from __future__ import annotations

import re
import subprocess
import sys
from pathlib import Path

import pytest

from dxfcable.cli import app
from dxfcable.job import CAUTION

ROOT = Path(__file__).resolve().parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
SHOWN = re.findall(r"```console\n\$ dxfcable ([^\n]+)\n(.*?)```", README, re.DOTALL)


def test_every_command_is_told() -> None:
    for command in app.registered_commands:
        assert command.callback is not None
        assert f"`dxfcable {command.name or command.callback.__name__} " in README


def test_the_caution_stands_there_word_for_word() -> None:
    assert CAUTION in " ".join(README.replace("\n> ", " ").split())


def test_the_two_commands_set_everything_up() -> None:
    commands = re.findall(r"```sh\n(.*?)```", README, re.DOTALL)
    assert len(commands) == 2
    assert all(command.startswith("python3 -m venv .venv && ") for command in commands)
    assert commands[1].strip() in (ROOT / ".ci" / "run").read_text(encoding="utf-8")


@pytest.mark.parametrize(("words", "output"), SHOWN, ids=[words for words, _ in SHOWN])
def test_what_is_shown_is_what_is_printed(words: str, output: str) -> None:
    command = [sys.executable, "-m", "dxfcable", *words.split()]
    done = subprocess.run(command, cwd=ROOT, capture_output=True, text=True, check=False)
    printed = "\n".join(line.rstrip() for line in done.stdout.splitlines())
    assert printed.strip() == output.strip()
