"""Sign a record folder: add a statement and its signature, or leave the record as it was.

Everything is written under temporary names first; the renaming of `SHA256SUMS` comes last and completes the
signature. After a crash the new `SHA256SUMS` under its temporary name says what the next `sign` must take back.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from contextlib import suppress
from datetime import datetime
from pathlib import Path
from typing import cast

from throughfault.errors import InputError, RecordError, did_you_mean
from throughfault.workbook.documents import SIGNATURES, SUMS, ResultsFace
from throughfault.workbook.integrity import Integrity, PageLint
from throughfault.workbook.manifest import parse_sums, sums_text, timestamp
from throughfault.workbook.report import SignReport
from throughfault.workbook.ssh_signature import fingerprint, load_private_key, public_blob, sign_bytes
from throughfault.workbook.statement import (
    DECISIONS,
    LAST_NUMBER,
    ROLES,
    TEMPORARY,
    Decision,
    Role,
    Statement,
    file_stem,
    namespace,
    parse_name,
    text_fault,
)
from throughfault.workbook.tree import Tree, remove_if_empty, sha256_bytes, write_durably
from throughfault.workbook.verify import earlier_statements, examine

__all__ = ["sign"]


def sign(
    record: Path,
    role: str,
    key: Path,
    signer: str,
    decision: str = "accept",
    comment: str = "",
    signed_on: datetime | None = None,
    *,
    passphrase: Callable[[], bytes] | None = None,
    page_lint: PageLint | None = None,
) -> SignReport:
    """Verify a record, then sign its manifest and every earlier statement in a role.

    Parameters
    ----------
    record
        The record folder.
    role
        author, checker, approver or witness.
    key
        OpenSSH private key file (Ed25519).
    signer
        The name by which an `allowed_signers` file knows the signer.
    decision
        accept, reject or conditional.
    comment
        Free text.
    signed_on
        With a time zone; now by default.
    passphrase
        Called once when the key is encrypted.
    page_lint
        As for `verify`.

    Raises
    ------
    InputError
        An argument or the key is at fault.
    RecordError
        The record is broken, may not be approved yet, or could not be written; it is as it was.
    """
    _check_arguments(role, decision, signer, comment)
    moment = timestamp(signed_on)
    private = load_private_key(key, passphrase)
    _refuse_link(record)
    take_back(record)
    integrity, results = _signable(record, role, page_lint)
    earlier = earlier_statements(integrity)
    statement = Statement(
        tag=results.unit.tag,
        revision=results.unit.revision,
        manifest_sha256=integrity.manifest_sha256,
        role=cast("Role", role),
        signer=signer,
        decision=cast("Decision", decision),
        comment=comment,
        signed_on=moment,
        earlier=earlier,
    ).canonical()
    stem = file_stem(len(earlier) + 1, role)
    signature = sign_bytes(statement, private, namespace(role)).encode()
    _publish(integrity.tree, {f"{stem}.json": statement, f"{stem}.sig": signature})
    return SignReport(
        statement=record / f"{stem}.json",
        signature=record / f"{stem}.sig",
        manifest_sha256=integrity.manifest_sha256,
        key=fingerprint(public_blob(private.public_key())),
    )


def _refuse_link(record: Path) -> None:
    """See that what is taken back and written stays within the record."""
    for path in (record / SIGNATURES, record / SUMS, record / f"{TEMPORARY}{SUMS}"):
        if path.is_symlink():
            raise RecordError(f"sign: {path.name} of the record must not be a symbolic link; nothing was changed")


def take_back(record: Path) -> None:
    """Remove what an interrupted signing left in a record, and nothing else.

    A statement or signature under its final name goes only when it is of the one pair which the new `SHA256SUMS`,
    left under its temporary name, lists beyond the present one, with the very hash listed there.
    """
    journal = record / f"{TEMPORARY}{SUMS}"
    for name, value in _unfinished(record, journal).items():
        path = record / name
        if path.is_file() and sha256_bytes(path.read_bytes()) == value:
            path.unlink()
    for path in sorted((record / SIGNATURES).glob(f"{TEMPORARY}*")):
        if parse_name(SIGNATURES + path.name.removeprefix(TEMPORARY)):
            path.unlink()
    journal.unlink(missing_ok=True)
    remove_if_empty(record / SIGNATURES)


def _unfinished(record: Path, journal: Path) -> dict[str, str]:
    """Return the pair that an interrupted signing was about to add, with the hashes; empty when unclear."""
    try:
        old, new = (parse_sums(path.read_text(encoding="utf-8")) for path in (record / SUMS, journal))
    except (OSError, ValueError):
        return {}
    added = {name: value for name, value in new.items() if name not in old}
    stem = next(iter(added), "").rpartition(".")[0]
    is_pair = set(added) == {f"{stem}.json", f"{stem}.sig"} and all(parse_name(name) for name in added)
    return added if is_pair and old.items() <= new.items() else {}


def _check_arguments(role: str, decision: str, signer: str, comment: str) -> None:
    faults = [
        f"{name} must be one of {', '.join(known)}, got {value!r}{did_you_mean(value, known)}"
        for name, value, known in (("role", role, ROLES), ("decision", decision, DECISIONS))
        if value not in known
    ]
    texts = (text_fault("signer", signer), text_fault("comment", comment))
    faults += [fault for fault in texts if fault]
    if faults:
        raise InputError(f"sign: {fault}" for fault in faults)


def _signable(record: Path, role: str, page_lint: PageLint | None) -> tuple[Integrity, ResultsFace]:
    integrity, signatures = examine(record, None, page_lint)
    if integrity.faults.found or integrity.results is None:
        raise RecordError(("sign: only an intact record is signed; in this one", *integrity.faults.lines))
    unconfirmed = integrity.results.unconfirmed
    if role == "approver" and unconfirmed:
        raise RecordError(
            "sign: the role approver is refused while limits from memory carry deciding checks "
            f"({', '.join(unconfirmed)}); confirm each under [limits] from a licensed copy and review again"
        )
    if len(signatures) >= LAST_NUMBER:
        raise RecordError(f"sign: the record holds {LAST_NUMBER} signatures, which is the most it can")
    return integrity, integrity.results


def _publish(tree: Tree, new: Mapping[str, bytes]) -> None:
    """Add files to signatures/ and list them in `SHA256SUMS`, or leave everything as it was."""
    record = tree.folder
    sums = sums_text({**tree.hashes, **{name: sha256_bytes(data) for name, data in new.items()}})
    try:
        (record / SIGNATURES).mkdir(exist_ok=True)
        for name, data in new.items():
            write_durably(_temporary(record, name), data)
        write_durably(_temporary(record, SUMS), sums.encode())
        for name in (*new, SUMS):
            _temporary(record, name).replace(record / name)
    except BaseException as error:
        with suppress(OSError):
            take_back(record)
        if isinstance(error, OSError):
            raise RecordError(f"sign: the signature could not be written: {error.strerror}") from error
        raise


def _temporary(record: Path, name: str) -> Path:
    path = record / name
    return path.with_name(TEMPORARY + path.name)
