"""Commands on a record: sign it, verify it, run it again."""

from __future__ import annotations

import os
import sys
from contextlib import suppress
from pathlib import Path

import click

__all__ = ["reproduce", "sign", "verify"]

RECORD = click.argument("record", metavar="RECORD", type=click.Path(path_type=Path))
ROLES = ("author", "checker", "approver", "witness")
DECISIONS = ("accept", "reject", "conditional")


def _terminal() -> bool:
    """Tell whether a passphrase can be asked for unseen: at the controlling terminal, else at standard input."""
    if hasattr(os, "ctermid"):
        with suppress(OSError):
            os.close(os.open(os.ctermid(), os.O_RDWR | os.O_NOCTTY))
            return True
    return sys.stdin is not None and sys.stdin.isatty()


def _ask() -> bytes:
    from throughfault.errors import InputError

    if not _terminal():
        raise InputError("sign: the key needs a passphrase and there is no terminal to ask at.")
    return str(click.prompt("Passphrase of the key", hide_input=True, err=True)).encode()


@click.command()
@RECORD
@click.option("--role", type=click.Choice(ROLES), required=True)
@click.option("--key", metavar="KEY", type=click.Path(path_type=Path), required=True, help="OpenSSH key, Ed25519.")
@click.option("--signer", metavar="NAME", required=True, help="As the verifier's list of signers names you.")
@click.option("--decision", type=click.Choice(DECISIONS), default="accept", show_default=True)
@click.option("--comment", metavar="TEXT", default="")
def sign(record: Path, role: str, key: Path, signer: str, decision: str, comment: str) -> None:
    """Sign a record in a role.

    What is signed names the record's manifest, the role, the decision and all earlier signatures.

    \b
    Example: throughfault sign records/BV-T1-A --role checker --key ~/.ssh/id_ed25519 --signer mara@bwv.example
    """
    from throughfault.render.record import lint
    from throughfault.workbook.sign import sign as sign_record

    report = sign_record(record, role, key, signer, decision, comment, passphrase=_ask, page_lint=lint)
    for line in report.lines:
        click.echo(line)


@click.command()
@RECORD
@click.option("--signers", metavar="FILE", type=click.Path(path_type=Path), help="Your own allowed_signers file.")
@click.option("--require", metavar="ROLE,...", default="", help="Roles that must have signed.")
def verify(record: Path, signers: Path | None, require: str) -> int:
    """Check every hash and signature of a record; nothing in it is run.

    \b
    Example: throughfault verify records/BV-T1-A --signers allowed_signers --require author,checker
    """
    from throughfault.render.record import lint
    from throughfault.workbook.verify import verify as verify_record

    roles = [role.strip() for role in require.split(",") if role.strip()]
    report = verify_record(record, signers, roles, page_lint=lint)
    for line in report.lines:
        click.echo(line)
    return report.exit_code


@click.command()
@RECORD
@click.option("--template", metavar="PATH", type=click.Path(path_type=Path), help="Template not shipped with the kit.")
def reproduce(record: Path, template: Path | None) -> int:
    """Run a record's inputs again with the installed kit and compare number by number.

    \b
    Example: throughfault reproduce records/BV-T1-A
    """
    from throughfault.workbook.reproduce import reproduce as run_again

    comparison = run_again(record, template, progress=sys.stderr.isatty())
    for line in (*comparison.notes, *comparison.differences):
        click.echo(line)
    click.echo(f"{record}: {len(comparison.differences)} differences in {comparison.compared} values compared.")
    return comparison.exit_code
