"""What a person signs: a canonical statement (RFC 8785) of role, decision and the hash of the manifest.

A statement stands in `signatures/NN-role.json`, its signature in `NN-role.sig`. It names the hashes of every
earlier statement and signature, so that none of them can be dropped, exchanged or put in another order.
"""

from __future__ import annotations

import re
from datetime import UTC, datetime
from typing import Annotated, Literal

import rfc8785
from pydantic import AfterValidator, BaseModel, ConfigDict, Field

from throughfault.workbook.documents import SIGNATURES, TIME_PATTERN, Sha256

__all__ = ["DECISIONS", "ROLES", "Earlier", "Statement", "file_stem", "namespace", "parse_name", "text_fault"]

Role = Literal["author", "checker", "approver", "witness"]
Decision = Literal["accept", "reject", "conditional"]
ROLES: tuple[Role, ...] = ("author", "checker", "approver", "witness")
DECISIONS: tuple[Decision, ...] = ("accept", "reject", "conditional")
STATEMENT_LIMIT = 1 << 16
COMMENT_LENGTH = 4000
SIGNER_LENGTH = 200
LAST_NUMBER = 99
TEMPORARY = ".throughfault-sign-"  # in front of the name of a file that is being written by sign


def text_fault(name: str, text: str) -> str | None:
    """Return what makes a signer's name or a comment unfit to be signed and printed, or None."""
    longest = SIGNER_LENGTH if name == "signer" else COMMENT_LENGTH
    if len(text) > longest:
        return f"{name} must have at most {longest} characters, got {len(text)}"
    if not all(character.isprintable() or (name == "comment" and character == "\n") for character in text):
        return f"{name} must hold printable characters only"
    if name == "signer" and (not text or text != text.strip() or text[0] in "#-" or set(text) & set(',"*?!\\')):
        return (
            'signer must be a name without , " * ? ! \\ in it, # or - before it or space around it'
            f" (an allowed_signers file must be able to name it), got {text!r}"
        )
    return None


def _fit(name: str) -> AfterValidator:
    def check(text: str) -> str:
        if fault := text_fault(name, text):
            raise ValueError(fault)
        return text

    return AfterValidator(check)


def _real_moment(text: str) -> str:
    datetime.fromisoformat(text)
    return text


class Earlier(BaseModel):
    """A statement that was in the record when a later one was signed."""

    model_config = ConfigDict(strict=True, frozen=True, extra="forbid")

    statement: str  # file name in signatures/
    sha256: Sha256
    signature_sha256: Sha256


class Statement(BaseModel):
    """The content of `signatures/NN-role.json`."""

    model_config = ConfigDict(strict=True, frozen=True, extra="forbid", populate_by_name=True)

    format: Literal["throughfault-statement/1"] = "throughfault-statement/1"
    tag: str
    revision: str
    manifest_sha256: Sha256
    role: Role
    signer: Annotated[str, _fit("signer")]
    decision: Decision
    comment: Annotated[str, _fit("comment")]
    signed_on: Annotated[str, Field(alias="signedOn", pattern=TIME_PATTERN), AfterValidator(_real_moment)]
    earlier: list[Earlier]

    def canonical(self) -> bytes:
        """Return the one spelling of the statement that is signed."""
        return rfc8785.dumps(self.model_dump(by_alias=True))

    @property
    def moment(self) -> datetime:
        """When it was signed, as the signer states it."""
        return datetime.fromisoformat(self.signed_on).astimezone(UTC)


def namespace(role: str) -> str:
    """Return the namespace of OpenSSH signatures in a role."""
    return f"throughfault-{role}"


def file_stem(number: int, role: str) -> str:
    """Return the path of a statement or signature in the record, without its ending."""
    return f"{SIGNATURES}{number:02d}-{role}"


def parse_name(path: str) -> tuple[int, str, str] | None:
    """Return number, role and ending of a file in signatures/, or None when it is none of the kit's."""
    match = re.fullmatch(rf"{SIGNATURES}([0-9]{{2}})-({'|'.join(ROLES)})\.(json|sig)", path)
    return (int(match[1]), match[2], match[3]) if match else None
