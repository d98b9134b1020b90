"""The verifier's list of who may sign as what: an OpenSSH `allowed_signers` file.

Format: ssh-keygen(1), ALLOWED SIGNERS. Each line holds principals, options, key type and key. A line without
``namespaces=`` lets its key sign in every role, as it does for ``ssh-keygen -Y verify``.
"""

from __future__ import annotations

import base64
import binascii
import re
from collections.abc import Sequence
from dataclasses import dataclass
from datetime import UTC, datetime
from pathlib import Path

from throughfault.errors import InputError
from throughfault.workbook.strict_json import read_bounded

__all__ = ["AllowedSigner", "Identification", "identify", "read_allowed_signers"]

FILE_LIMIT = 1 << 20
KEY_TYPES = ("ssh-", "ecdsa-sha2-", "sk-ssh-", "sk-ecdsa-")
OPTION = re.compile(r'([A-Za-z-]+)(?:="((?:[^"\\]|\\.)*)")?(,|\s+|$)')
PRINCIPALS = re.compile(r'"([^"]*)"\s+|(\S+)\s+')


@dataclass(frozen=True)
class AllowedSigner:
    """One line of the file."""

    line: int
    principals: str  # pattern list
    key: bytes  # SSH wire format
    namespaces: str | None = None  # pattern list
    valid_after: datetime | None = None
    valid_before: datetime | None = None

    def refusal(self, namespace: str, moment: datetime) -> str | None:
        """Return why the line does not let its key sign in the namespace at the moment, or None."""
        if self.namespaces is not None and not matches(namespace, self.namespaces):
            return f"line {self.line} does not grant the namespace {namespace}"
        if self.valid_after is not None and moment < self.valid_after:
            return f"line {self.line} is not valid before {self.valid_after.astimezone(UTC):%Y-%m-%d %H:%M:%S} UTC"
        if self.valid_before is not None and moment > self.valid_before:
            return f"line {self.line} is not valid after {self.valid_before.astimezone(UTC):%Y-%m-%d %H:%M:%S} UTC"
        return None


@dataclass(frozen=True)
class Identification:
    """Whether a signature is by somebody the verifier knows in that role, and why."""

    identified: bool
    reason: str


def read_allowed_signers(path: Path) -> tuple[AllowedSigner, ...]:
    """Return the lines of an `allowed_signers` file.

    Raises
    ------
    InputError
        The file cannot be read or a line is wrong; every wrong line is named. Certificate authorities are not
        supported.
    """
    try:
        text = read_bounded(path, FILE_LIMIT).decode("utf-8")
    except (OSError, ValueError) as error:
        reason = error.strerror if isinstance(error, OSError) else error
        raise InputError(f"signers file {path.name}: cannot be read: {reason}") from None
    found: list[AllowedSigner] = []
    faults: list[str] = []
    for number, line in enumerate(text.split("\n"), 1):
        if not line.strip() or line.lstrip().startswith("#"):
            continue
        try:
            found.append(_parse_line(number, line.strip()))
        except ValueError as error:
            faults.append(f"signers file {path.name}, line {number}: {error}")
    if faults:
        raise InputError(faults)
    return tuple(found)


def identify(
    allowed: Sequence[AllowedSigner], signer: str, key: bytes, namespace: str, moment: datetime
) -> Identification:
    """Say whether one of the lines lets this signer sign with this key in the namespace at the moment."""
    named = [line for line in allowed if matches(signer, line.principals)]
    if not named:
        return Identification(identified=False, reason=f"no line of the signers file names {signer!r}")
    reasons = [
        line.refusal(namespace, moment) if line.key == key else f"line {line.line} gives another key" for line in named
    ]
    for line, reason in zip(named, reasons, strict=True):
        if reason is None:
            scope = " (for every role)" if line.namespaces is None else ""
            return Identification(identified=True, reason=f"line {line.line} of the signers file{scope}")
    return Identification(identified=False, reason="; ".join(reason for reason in reasons if reason))


def matches(text: str, patterns: str) -> bool:
    """Say whether a text fits a pattern list: ``*``, ``?``, commas, and ``!`` in front of what must not fit.

    Source: ssh_config(5), PATTERNS.
    """
    positive = False
    for pattern in patterns.split(","):
        negated = pattern.startswith("!")
        body = re.escape(pattern.removeprefix("!")).replace(r"\*", ".*").replace(r"\?", ".")
        if re.fullmatch(body, text, re.DOTALL):
            if negated:
                return False
            positive = True
    return positive


def _parse_line(number: int, line: str) -> AllowedSigner:
    principals = PRINCIPALS.match(line)
    if principals is None:
        raise ValueError("needs principals, options, key type and key")
    rest = line[principals.end() :]
    options: dict[str, str] = {}
    if not rest.startswith(KEY_TYPES):
        options, rest = _parse_options(rest)
    return AllowedSigner(
        line=number,
        principals=principals[1] if principals[1] is not None else principals[2],
        key=_parse_key(rest),
        namespaces=options.get("namespaces"),
        valid_after=_parse_time(options, "valid-after"),
        valid_before=_parse_time(options, "valid-before"),
    )


def _parse_options(text: str) -> tuple[dict[str, str], str]:
    options: dict[str, str] = {}
    position = 0
    while True:
        match = OPTION.match(text, position)
        if match is None:
            raise ValueError(f'options must be name="value" with commas between, got {text[position:][:40]!r}')
        name, value = match[1].lower(), match[2]
        _check_option(name, value, options)
        options[name] = value.replace('\\"', '"')
        position = match.end()
        if match[3] != ",":
            return options, text[position:]


def _check_option(name: str, value: str | None, options: dict[str, str]) -> None:
    if name == "cert-authority":
        raise ValueError("cert-authority is not supported; give the signer's own Ed25519 key")
    if name not in {"namespaces", "valid-after", "valid-before"}:
        raise ValueError(f"unknown option {name!r}; known are namespaces, valid-after, valid-before")
    if not value or name in options:
        raise ValueError(f"option {name} must be given once, with a value in quotation marks")


def _parse_key(text: str) -> bytes:
    fields = text.split()
    try:
        kind, blob = fields[0], base64.b64decode(fields[1], validate=True)
    except (IndexError, binascii.Error):
        raise ValueError("the key must be a key type and base64") from None
    length = int.from_bytes(blob[:4], "big")
    if blob[4 : 4 + length] != kind.encode():
        raise ValueError(f"the key is not of the type {kind!r} that stands before it")
    return blob


def _parse_time(options: dict[str, str], name: str) -> datetime | None:
    """Read YYYYMMDD or YYYYMMDDHHMM[SS]; local time unless Z follows."""
    text = options.get(name)
    if text is None:
        return None
    digits = text.removesuffix("Z")
    pattern = {8: "%Y%m%d", 12: "%Y%m%d%H%M", 14: "%Y%m%d%H%M%S"}.get(len(digits))
    if pattern is None or not (digits.isascii() and digits.isdigit()):
        raise ValueError(f"{name} must be YYYYMMDD[Z] or YYYYMMDDHHMM[SS][Z], got {text!r}")
    try:
        moment = datetime.strptime(digits, pattern)  # noqa: DTZ007 - the time zone follows
        return moment.replace(tzinfo=UTC) if text.endswith("Z") else moment.astimezone()
    except (ValueError, OverflowError, OSError):
        raise ValueError(f"{name} is no date and time, got {text!r}") from None
