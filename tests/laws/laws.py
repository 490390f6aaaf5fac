"""The laws of the byte ledger, each for any drawing `f` that holds a cable without a rule."""

from __future__ import annotations

import functools
import io
import logging
from collections import Counter
from typing import TYPE_CHECKING

from ezdxf import recover
from ezdxf.lldxf.const import DXFError

from dxfcable.drawing.bytes.scan import scan
from dxfcable.job import AskedRule, Options, solve_bytes, strip_bytes
from dxfcable.model import RuleKind
from tests.generated import records

if TYPE_CHECKING:
    from collections.abc import Callable

SAG = Options(units="m", rule=AskedRule(kind=RuleKind.SAG, text="2.4 m"))
PULL = Options(units="m", rule=AskedRule(kind=RuleKind.PULL, text="80 kN"), plot_scale="1:50")


@functools.lru_cache(maxsize=8)
def solved(data: bytes, options: Options = SAG) -> bytes:
    return solve_bytes(data, options)[0]


def stripped(data: bytes) -> bytes:
    return strip_bytes(data)[0]


def comes_back(f: bytes) -> None:
    """Law 1: what holds nothing of ours is left alone, and a solve is undone to the byte."""
    assert stripped(f) == f
    result = solved(f)
    assert result != f
    assert stripped(result) == f


def is_written_the_same_again(f: bytes) -> None:
    """Law 2: solving twice is solving once, whatever was asked before."""
    once = solved(f, SAG)
    assert solved(once, SAG) == once
    assert solved(solved(f, PULL), SAG) == once


def holds_the_drafters_records(f: bytes) -> None:
    """Law 4: whole records are inserted; only the value of $HANDSEED differs."""
    assert_only_records_were_inserted(f, solved(f))


def assert_only_records_were_inserted(before: bytes, after: bytes) -> None:
    left = iter([after[start:end] for start, end, _ in records(after)])
    for start, end, _ in records(before):
        record = before[start:end]
        if b"$HANDSEED" in record:
            assert any(_without_seed(record) == _without_seed(other) for other in left)
        else:
            assert any(record == other for other in left)


def _without_seed(record: bytes) -> list[bytes]:
    lines = record.split(b"\n")
    named = [k for k in range(1, len(lines)) if b"$HANDSEED" in lines[k]]
    at = next((k for k in named if lines[k - 1].strip() == b"9"), None)
    return lines if at is None else lines[: at + 2] + lines[at + 3 :]


def is_cut_into_the_same_records(f: bytes) -> None:
    """Law 5: the spans are those of a plain pair parser."""
    expected = [start for start, _, _ in records(f)]
    assert scan(f).starts[:-1].tolist() == expected


def makes_no_new_fault(f: bytes) -> None:
    """Law 7: the library's audit, on throw-away copies, finds nothing that f did not have."""
    before = _audit(f)
    if before is None:
        return
    after = _audit(solved(f))
    assert after is not None
    assert after - before == Counter()


def _audit(data: bytes) -> Counter[tuple[int, str]] | None:
    """Return kinds of fault; None where the library cannot read the drawing at all."""
    logging.disable(logging.CRITICAL)
    try:
        document, auditor = recover.read(io.BytesIO(data))
    except (DXFError, ValueError):
        return None
    finally:
        logging.disable(logging.NOTSET)
    assert len(document.modelspace()) > 0
    # A table without a head handle is repaired in each drawing that has no handles; the text
    # names the table, and one of ours may be among them.
    entries = (*auditor.errors, *auditor.fixes)
    return Counter(
        (e.code, type(e.entity).__name__) for e in entries if "table head" not in e.message
    )


LAWS: tuple[Callable[[bytes], None], ...] = (
    comes_back,
    is_written_the_same_again,
    holds_the_drafters_records,
    is_cut_into_the_same_records,
    makes_no_new_fault,
)
