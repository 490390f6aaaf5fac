"""One thing done to one entity of an issued drawing is found, and named where marks are there.

A sample here; with `-m slow` every entity of two small drawings, and everything done to it.
"""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import TYPE_CHECKING

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from tests.issued_cases import ALL, SMALL
from tests.proving import failed, handles, opened, proof_of, told
from tests.tampering import unmarked

if TYPE_CHECKING:
    from collections.abc import Iterator

NAMES = ("small", "small feet", "heavy", "pair", "cases")
_ACTS = {
    "LINE": ("start", "end", "delete", "copy"),
    "LWPOLYLINE": ("vertex", "delete", "copy"),
    "POLYLINE": ("vertex", "delete", "copy"),
    "TEXT": ("digit", "delete", "copy"),
    "CIRCLE": ("start", "delete", "copy"),
    "SOLID": ("start", "delete", "copy"),
}
# Words that state nothing which could be measured, and leaders, which only point: without marks
# nobody knows how they were.
_MERE_WORDS = re.compile(r"/leader$|/words/3$|/supports/value$|/pole-letter/|/letter/O-")


@dataclass(frozen=True, kw_only=True)
class Act:
    """What is done to one entity; small, so that a failure prints well."""

    name: str
    target: str
    what: str
    by: float = 0.0
    number: int = 0
    words: str = ""

    def done(self) -> bytes:
        """Do it."""
        file = opened(self.name)
        match self.what:
            case "delete":
                return file.without(self.target)
            case "copy":
                return file.doubled(self.target)
            case "digit":
                return file.retexted(self.target, self.words)
        code = 11 if self.what == "end" else 10
        # Oblique: a line moved along itself says the same.
        return file.moved(self.target, code, self.by, 0.7 * self.by, self.number)


def far(name: str) -> float:
    """Return how far points are moved: by a centimetre or so."""
    return 10.0 if ALL[name].unit == "mm" else 0.01


def other_digit(words: str, choice: int, plus: int) -> str:
    """Change one digit of a text; of one without digits a letter."""
    places = [k for k, c in enumerate(words) if c.isdigit()]
    if not places:
        return f"{words}X"
    at = places[choice % len(places)]
    return words[:at] + str((int(words[at]) + plus) % 10) + words[at + 1 :]


@st.composite
def acts(draw: st.DrawFn, *, has_marks: bool) -> Act:
    """Choose an entity and what is done to it."""
    name = draw(st.sampled_from(NAMES))
    file = opened(name)
    known = sorted(k for k in file.ours if has_marks or not _MERE_WORDS.search(k))
    target = draw(st.sampled_from(known))
    what = draw(st.sampled_from(_ACTS[file.kind(target)]))
    vertices = file.count(target, 10) if what == "vertex" else 1
    words = ""
    if what == "digit":
        words = other_digit(file.text(target), draw(st.integers(0, 9)), draw(st.integers(1, 9)))
    return Act(
        name=name,
        target=target,
        what=what,
        by=draw(st.sampled_from((-1.0, 1.0))) * far(name),
        number=draw(st.integers(0, vertices - 1)),
        words=words,
    )


def every_act(name: str) -> Iterator[Act]:
    """Give everything that is done to any entity of a drawing."""
    file = opened(name)
    for target in file.ours:
        for what in _ACTS[file.kind(target)]:
            words = other_digit(file.text(target), 0, 1) if what == "digit" else ""
            for k in range(file.count(target, 10) if what == "vertex" else 1):
                yield Act(name=name, target=target, what=what, by=far(name), number=k, words=words)


def judge(act: Act, *, has_marks: bool) -> None:
    """One thing was done: the proof fails, and names it, by handle where that still exists."""
    data = act.done()
    proof = proof_of(data if has_marks else unmarked(data))
    assert not proof.passed, act
    assert proof.exit_code == 1
    if not has_marks:
        return
    assert failed(proof), act
    handle = opened(act.name).handle(act.target)
    if act.what == "delete":
        assert f"{act.target} is missing" in told(proof), (act, told(proof))
    elif handle is not None:
        wanted = {handle, "F0000"} if act.what == "copy" else {handle}
        assert handles(proof) & wanted, (act, told(proof))


@given(act=acts(has_marks=True))
@settings(max_examples=16)
def test_one_entity_tampered_with_is_found_and_named(act: Act) -> None:
    judge(act, has_marks=True)


@given(act=acts(has_marks=False))
@settings(max_examples=16)
def test_without_marks_every_tampering_is_found_still(act: Act) -> None:
    judge(act, has_marks=False)


@pytest.mark.slow
@pytest.mark.parametrize("name", SMALL)
@pytest.mark.parametrize("has_marks", [True, False], ids=["marks", "no marks"])
def test_everything_done_to_any_entity_is_found(
    name: str, has_marks: bool, request: pytest.FixtureRequest
) -> None:
    if "slow" not in request.config.getoption("markexpr"):
        pytest.skip("takes seconds; run with -m slow")
    done = 0
    for act in every_act(name):
        if has_marks or not _MERE_WORDS.search(act.target):
            judge(act, has_marks=has_marks)
            done += 1
    assert done > len(opened(name).ours)
