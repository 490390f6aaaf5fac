"""What tests of `verify` share: proofs, and what they say."""

from __future__ import annotations

import functools

from dxfcable.job import Options
from dxfcable.verify import Proof, verify_bytes
from tests.issued_cases import issued
from tests.tampering import IssuedFile, open_issued


def proof_of(data: bytes) -> Proof:
    return verify_bytes(data, Options())


@functools.cache
def proof_as_issued(name: str) -> Proof:
    return proof_of(issued(name))


def failed(proof: Proof) -> set[str]:
    return {check.name for cable in proof.cables for check in cable.checks if not check.passed}


def handles(proof: Proof) -> set[str | None]:
    return {difference.handle for cable in proof.cables for difference in cable.differences}


def told(proof: Proof) -> str:
    return "\n".join(finding.text for finding in proof.findings)


@functools.cache
def opened(name: str) -> IssuedFile:
    return open_issued(issued(name))
