"""What `verify` and `sign` found or did, as data and as sentences."""

from __future__ import annotations

from dataclasses import dataclass
from pathlib import Path
from typing import Literal

from throughfault.workbook.tree import shown

__all__ = ["SignReport", "SignatureCheck", "State", "VerifyReport"]

State = Literal["failed", "unsigned", "not identified", "identified"]


@dataclass(frozen=True)
class SignatureCheck:
    """One signature whose statement and form could be read."""

    number: int
    role: str
    signer: str
    decision: str
    comment: str
    signed_on: str  # UTC, as the signer states it
    key: str  # fingerprint
    identified: bool
    reason: str  # which line of the signers file identifies the signer, or why none does

    @property
    def line(self) -> str:
        """One sentence on the signature, safe to print."""
        comment = f', "{shown(self.comment)}"' if self.comment else ""
        known = "identified by" if self.identified else "not identified:"
        return (
            f"{self.number:02d} {self.role}: {shown(self.signer)}, decision {self.decision}{comment}, "
            f"states {self.signed_on}, key {self.key}, {known} {shown(self.reason)}."
        )


@dataclass(frozen=True)
class VerifyReport:
    """The outcome of `verify`."""

    record: str
    manifest_sha256: str
    faults: tuple[str, ...]  # each names its file
    signatures: tuple[SignatureCheck, ...]
    negatives: tuple[str, ...]  # required roles that have not signed, or reject
    notes: tuple[str, ...]

    @property
    def state(self) -> State:
        """`failed` when a file, statement or signature is not as it was made; else how far signers are known."""
        if self.faults:
            return "failed"
        if not self.signatures:
            return "unsigned"
        return "identified" if all(s.identified for s in self.signatures) else "not identified"

    @property
    def exit_code(self) -> int:
        """0 intact, 1 a negative answer, 3 intact but signers not identified."""
        if self.faults or self.negatives:
            return 1
        return 3 if self.state == "not identified" else 0

    @property
    def lines(self) -> tuple[str, ...]:
        """The sentences to print."""
        summary = {
            "failed": "is not as it was made or signed:",
            "unsigned": "is intact and unsigned.",
            "not identified": "is intact, but signers are not identified.",
            "identified": "is intact and every signer is identified.",
        }[self.state]
        return (
            f"Record {shown(self.record)} {summary}",
            *self.faults,
            *(signature.line for signature in self.signatures if not self.faults),
            *(shown(line) for line in self.negatives),
            *(shown(line) for line in self.notes),
        )


@dataclass(frozen=True)
class SignReport:
    """The outcome of `sign`."""

    statement: Path
    signature: Path
    manifest_sha256: str
    key: str  # fingerprint

    exit_code = 0

    @property
    def lines(self) -> tuple[str, ...]:
        """The sentences to print."""
        return (
            f"Signed {self.statement.name} with key {self.key}.",
            f"Manifest SHA-256: {self.manifest_sha256}",
        )
