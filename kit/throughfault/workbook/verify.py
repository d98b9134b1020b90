"""Verify a record: every hash, every statement, every signature, and who signed. Nothing of the record is run."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from pathlib import Path

from throughfault.errors import InputError, RecordError, did_you_mean
from throughfault.workbook.allowed_signers import AllowedSigner, Identification, identify, read_allowed_signers
from throughfault.workbook.documents import SIGNATURES
from throughfault.workbook.integrity import Integrity, PageLint, check_integrity
from throughfault.workbook.report import SignatureCheck, VerifyReport
from throughfault.workbook.ssh_signature import SIGNATURE_LIMIT, SshSignature, fingerprint, parse_signature
from throughfault.workbook.statement import (
    ROLES,
    STATEMENT_LIMIT,
    Earlier,
    Statement,
    file_stem,
    namespace,
    parse_name,
)
from throughfault.workbook.strict_json import read_bounded, read_model

__all__ = ["earlier_statements", "examine", "verify"]

NO_POLICY = Identification(identified=False, reason="no signers file was given")


def verify(
    record: Path,
    signers: Path | None = None,
    require: Iterable[str] = (),
    *,
    page_lint: PageLint | None = None,
) -> VerifyReport:
    """Check a record folder without running anything from it.

    Parameters
    ----------
    record
        The folder.
    signers
        The verifier's own OpenSSH `allowed_signers` file; it alone says who may sign in which role
        (``namespaces="throughfault-<role>"``).
    require
        Roles that must have signed, their latest decision not being reject.
    page_lint
        Returns what is not allowed in the text of record.html, a sentence each.

    Raises
    ------
    RecordError
        There is no such folder, or a file in it cannot be read.
    InputError
        The signers file is unusable or a role is unknown.
    """
    wanted = _known_roles(require)
    allowed = None if signers is None else read_allowed_signers(signers)
    integrity, signatures = examine(record, allowed, page_lint)
    return VerifyReport(
        record=record.resolve().name,
        manifest_sha256=integrity.manifest_sha256,
        faults=integrity.faults.lines,
        signatures=tuple(signatures),
        negatives=_negatives(wanted, signatures),
        notes=_notes(integrity, signatures),
    )


def examine(
    record: Path, allowed: Sequence[AllowedSigner] | None, page_lint: PageLint | None
) -> tuple[Integrity, list[SignatureCheck]]:
    """Return what stands in a record folder and the signatures in it; the faults are in the former.

    Raises RecordError when there is no such folder or it cannot be read.
    """
    if not record.is_dir():
        raise RecordError(f"record {record}: there is no such folder")
    try:
        integrity = check_integrity(record, page_lint)
        return integrity, _check_signatures(integrity, allowed)
    except OSError as error:
        raise RecordError(f"record {record}: cannot be read: {error}") from error


def _known_roles(require: Iterable[str]) -> tuple[str, ...]:
    wanted = tuple(require)
    faults = [
        f"require: unknown role {role!r}{did_you_mean(role, ROLES)}; known are {', '.join(ROLES)}"
        for role in wanted
        if role not in ROLES
    ]
    if faults:
        raise InputError(faults)
    return wanted


def earlier_statements(integrity: Integrity) -> list[Earlier]:
    """Return the statements and signatures in a record in the order of their names, as a next one lists them."""
    hashes = integrity.tree.hashes
    nothing = "0" * 64  # the absence of a file is a fault of its own
    return [
        Earlier(
            statement=f"{stem}.json".removeprefix(SIGNATURES),
            sha256=hashes.get(f"{stem}.json", nothing),
            signature_sha256=hashes.get(f"{stem}.sig", nothing),
        )
        for stem in _stems(integrity)
    ]


def _stems(integrity: Integrity) -> list[str]:
    return sorted({name.rpartition(".")[0] for name in integrity.tree.hashes if parse_name(name)})


def _check_signatures(integrity: Integrity, allowed: Sequence[AllowedSigner] | None) -> list[SignatureCheck]:
    """Check each pair of statement and signature, in the order of their numbers."""
    checked: list[SignatureCheck] = []
    earlier = earlier_statements(integrity)
    for number, stem in enumerate(_stems(integrity), 1):
        if stem != file_stem(number, stem.partition("-")[2]):
            integrity.faults.add(f"{stem}.json", f"is out of order; number {number:02d} is missing or stands twice")
        statement = _read_statement(integrity, f"{stem}.json", earlier[: number - 1])
        signature = _read_signature(integrity, f"{stem}.sig")
        if statement is not None and signature is not None:
            checked.append(_check_pair(integrity, number, f"{stem}.json", statement, signature, allowed))
    return checked


def _read_statement(integrity: Integrity, path: str, earlier: list[Earlier]) -> Statement | None:
    """Read a statement and compare it with the record it stands in."""
    faults = integrity.faults
    if path not in integrity.tree.hashes:
        faults.add(path, "is missing beside its signature")
        return None
    try:
        data = read_bounded(integrity.tree.path(path), STATEMENT_LIMIT)
        statement = read_model(Statement, data)
    except ValueError as error:
        faults.add(path, str(error))
        return None
    if statement.canonical() != data:
        faults.add(path, "is not in canonical form (RFC 8785)")
    if statement.role != path.partition("-")[2].removesuffix(".json"):
        faults.add(path, f"states the role {statement.role}, which is not the one in its name")
    if statement.manifest_sha256 != integrity.manifest_sha256:
        faults.add(path, "is about another manifest: the record was changed after it was signed, or is another")
    unit = integrity.results.unit if integrity.results else None
    if unit is not None and (statement.tag, statement.revision) != (unit.tag, unit.revision):
        faults.add(path, f"is about {statement.tag}-{statement.revision}, not this unit and revision")
    if statement.earlier != earlier:
        faults.add(path, "names other earlier statements or signatures than stand before it")
    return statement


def _read_signature(integrity: Integrity, path: str) -> SshSignature | None:
    if path not in integrity.tree.hashes:
        integrity.faults.add(path, "is missing beside its statement")
        return None
    try:
        return parse_signature(read_bounded(integrity.tree.path(path), SIGNATURE_LIMIT))
    except ValueError as error:
        integrity.faults.add(path, str(error))
        return None


def _check_pair(
    integrity: Integrity,
    number: int,
    path: str,
    statement: Statement,
    signature: SshSignature,
    allowed: Sequence[AllowedSigner] | None,
) -> SignatureCheck:
    role = namespace(statement.role)
    try:
        signature.check(integrity.tree.path(path).read_bytes(), role)
    except ValueError as error:
        integrity.faults.add(path.replace(".json", ".sig"), str(error))
    identity = (
        NO_POLICY if allowed is None else identify(allowed, statement.signer, signature.key, role, statement.moment)
    )
    return SignatureCheck(
        number=number,
        role=statement.role,
        signer=statement.signer,
        decision=statement.decision,
        comment=statement.comment,
        signed_on=statement.signed_on,
        key=fingerprint(signature.key),
        identified=identity.identified,
        reason=identity.reason,
    )


def _negatives(wanted: Sequence[str], signatures: Sequence[SignatureCheck]) -> tuple[str, ...]:
    latest = {signature.role: signature for signature in signatures}
    missing = [f"Required role {role}: nobody has signed." for role in wanted if role not in latest]
    rejected = [
        f"Required role {role}: the latest decision, by {latest[role].signer}, is reject."
        for role in wanted
        if role in latest and latest[role].decision == "reject"
    ]
    return tuple(missing + rejected)


def _notes(integrity: Integrity, signatures: Sequence[SignatureCheck]) -> tuple[str, ...]:
    """State what a reader should know although it makes no signature false."""
    latest = {signature.role: signature for signature in signatures}
    notes = [
        f"The latest decision of the {role}, by {signature.signer}, is {signature.decision}."
        for role, signature in latest.items()
        if signature.decision != "accept"
    ]
    roles_of_key: dict[str, set[str]] = {}
    for signature in signatures:
        roles_of_key.setdefault(signature.key, set()).add(signature.role)
    notes += [
        f"One key signed as {', '.join(sorted(roles))}: {key}." for key, roles in roles_of_key.items() if len(roles) > 1
    ]
    if integrity.manifest is not None:
        notes += [
            f"Signature {s.number:02d} is dated before the record was made ({integrity.manifest.created})."
            for s in signatures
            if s.signed_on < integrity.manifest.created
        ]
    if integrity.results is not None and integrity.results.unconfirmed:
        ids = ", ".join(integrity.results.unconfirmed)
        notes += [
            f"Signature {s.number:02d} approves although limits from memory carry deciding checks: {ids}."
            for s in signatures
            if s.role == "approver"
        ]
    return tuple(notes)
