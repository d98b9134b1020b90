"""Record folders made by hand, small but whole, and keys made for one test."""

import json
from dataclasses import dataclass
from datetime import UTC, datetime
from pathlib import Path

import pytest
from cryptography.hazmat.primitives.asymmetric.ed25519 import Ed25519PrivateKey
from cryptography.hazmat.primitives.serialization import (
    BestAvailableEncryption,
    Encoding,
    NoEncryption,
    PrivateFormat,
    PublicFormat,
)

from throughfault.workbook.manifest import inputs_sha256, write_manifest
from throughfault.workbook.sign import sign

CREATED = datetime(2026, 11, 2, 8, 0, tzinfo=UTC)
SIGNED = datetime(2026, 11, 3, 9, 30, tzinfo=UTC)


@dataclass(frozen=True)
class KeyFile:
    """A private key file and the public key as an allowed_signers file wants it."""

    path: Path
    public: str


@dataclass
class Bench:
    """Makes records and keys in a temporary folder and signs with them."""

    folder: Path

    def key(self, name="ann", passphrase=None):
        key = Ed25519PrivateKey.generate()
        lock = BestAvailableEncryption(passphrase.encode()) if passphrase else NoEncryption()
        path = self.folder / f"{name}.key"
        path.write_bytes(key.private_bytes(Encoding.PEM, PrivateFormat.OpenSSH, lock))
        path.chmod(0o600)
        return KeyFile(path, key.public_key().public_bytes(Encoding.OpenSSH, PublicFormat.OpenSSH).decode())

    def results(self, record, **changes):
        return {
            "format": "throughfault-results/1",
            "unit": {"tag": "BV-T9", "title": "Brackwater Vale", "revision": "A"},
            "kit": {"version": "0.1.0"},
            "template": {"name": "rating", "sha256": "ab" * 32},
            "inputs_sha256": inputs_sha256(record),
            "checks": [],
            **changes,
        }

    def unlisted(self, name="BV-T9-A", **changes):
        """Make a record folder without manifest."""
        record = self.folder / name
        (record / "inputs" / "recordings").mkdir(parents=True)
        (record / "inputs" / "unit.toml").write_text('format = "throughfault-unit/1"\n')
        (record / "inputs" / "recordings" / "fault 1.csv").write_text("0.0,1.0\n")
        (record / "record.html").write_text(f"<!doctype html><title>{name}</title>")
        (record / "workbook.ipynb").write_text("{}")
        (record / "results.json").write_text(json.dumps(self.results(record, **changes)))
        return record

    def record(self, name="BV-T9-A", **changes):
        """Make a whole, unsigned record folder."""
        record = self.unlisted(name, **changes)
        write_manifest(record, tables={"peak_factor.csv": "cd" * 32}, created=CREATED)
        return record

    def signed(self, name="BV-T9-A"):
        """Make a record signed by an author and a checker; returns it with the allowed_signers file."""
        record = self.record(name)
        ann, ben = self.key("ann"), self.key("ben")
        sign(record, "author", ann.path, "Ann Author", signed_on=SIGNED)
        sign(record, "checker", ben.path, "ben@brackwater.example", "conditional", "see 4.2", signed_on=SIGNED)
        signers = self.signers(
            f'"Ann Author" namespaces="throughfault-author" {ann.public}',
            f'*@brackwater.example namespaces="throughfault-checker,throughfault-witness" {ben.public}',
        )
        return record, signers

    def signers(self, *lines):
        path = self.folder / "allowed_signers"
        path.write_text("".join(f"{line}\n" for line in lines))
        return path


@pytest.fixture
def bench(tmp_path):
    return Bench(tmp_path)


@pytest.fixture
def signed_on():
    return SIGNED


def contents(folder):
    """Every file of a folder by path, as bytes."""
    return {
        path.relative_to(folder).as_posix(): path.read_bytes() for path in sorted(folder.rglob("*")) if path.is_file()
    }


@pytest.fixture(name="contents")
def contents_fixture():
    return contents
