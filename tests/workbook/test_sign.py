"""Signing adds one pair to a record, or leaves the record as it was."""

import errno
import json
import os
import shutil
from datetime import datetime
from pathlib import Path

import pytest
import rfc8785

from throughfault.errors import InputError, RecordError
from throughfault.workbook.manifest import SUMS
from throughfault.workbook.sign import sign
from throughfault.workbook.statement import TEMPORARY
from throughfault.workbook.tree import sha256_bytes
from throughfault.workbook.verify import verify


def test_statement_names_everything(bench, signed_on):
    """The statement holds what the contract asks, in canonical form, and the chain of what stands before it."""
    record, _ = bench.signed()
    data = (record / "signatures/02-checker.json").read_bytes()
    folder = record / "signatures"
    assert json.loads(data) == {
        "format": "throughfault-statement/1",
        "tag": "BV-T9",
        "revision": "A",
        "manifest_sha256": sha256_bytes((record / "manifest.json").read_bytes()),
        "role": "checker",
        "signer": "ben@brackwater.example",
        "decision": "conditional",
        "comment": "see 4.2",
        "signedOn": "2026-11-03T09:30:00Z",
        "earlier": [
            {
                "statement": "01-author.json",
                "sha256": sha256_bytes((folder / "01-author.json").read_bytes()),
                "signature_sha256": sha256_bytes((folder / "01-author.sig").read_bytes()),
            }
        ],
    }
    assert data == rfc8785.dumps(json.loads(data))


def test_report_says_what_was_signed(bench):
    """Files, hash of the manifest and key come back, and two sentences."""
    record, key = bench.record(), bench.key()
    report = sign(record, "author", key.path, "Ann")
    assert report.statement == record / "signatures/01-author.json"
    assert report.signature.is_file()
    assert report.exit_code == 0
    assert report.lines == (
        f"Signed 01-author.json with key {report.key}.",
        f"Manifest SHA-256: {sha256_bytes((record / 'manifest.json').read_bytes())}",
    )
    assert verify(record).signatures[0].key == report.key


def test_signing_changes_nothing_that_was_there(bench, contents):
    """Only SHA256SUMS changes and one pair is added; the numbers count on."""
    record, _ = bench.signed()
    before = contents(record)
    sign(record, "witness", bench.key("cyd").path, "Cyd")
    after = contents(record)
    assert set(after) - set(before) == {"signatures/03-witness.json", "signatures/03-witness.sig"}
    assert {name for name in before if before[name] != after[name]} == {"SHA256SUMS"}


def test_encrypted_key_signs(bench):
    """An encrypted key signs once its passphrase is given."""
    record, key = bench.record(), bench.key("ann", "secret words")
    sign(record, "author", key.path, "Ann", passphrase=lambda: b"secret words")
    assert verify(record, bench.signers(f"Ann {key.public}")).exit_code == 0


def test_all_wrong_arguments_are_named(bench, contents):
    """Role, decision, signer and comment are checked together and nothing is written."""
    record, key = bench.record(), bench.key()
    before = contents(record)
    with pytest.raises(InputError) as caught:
        sign(record, "cheker", key.path, "Ann, Author", "maybe", "a\x07")
    assert caught.value.faults == (
        "sign: role must be one of author, checker, approver, witness, got 'cheker' (did you mean 'checker'?)",
        "sign: decision must be one of accept, reject, conditional, got 'maybe'",
        (
            'sign: signer must be a name without , " * ? ! \\ in it, # or - before it or space around it'
            " (an allowed_signers file must be able to name it), got 'Ann, Author'"
        ),
        "sign: comment must hold printable characters only",
    )
    assert contents(record) == before


@pytest.mark.parametrize("signer", ["", " Ann", "-Ann", "#Ann", 'A"nn', "*", "?", "!Ann", "A\\nn"])
def test_name_that_no_signers_file_can_hold_is_refused(bench, signer):
    """A signer whose name means something in an allowed_signers file is refused."""
    with pytest.raises(InputError, match=r"^sign: signer must be a name without "):
        sign(bench.folder, "author", bench.folder, signer)


def test_long_texts_are_refused(bench):
    """Name and comment are bounded; a comment of several lines is allowed."""
    with pytest.raises(InputError) as caught:
        sign(bench.folder, "author", bench.folder, "x" * 201, comment="x" * 4001)
    assert caught.value.faults == (
        "sign: signer must have at most 200 characters, got 201",
        "sign: comment must have at most 4000 characters, got 4001",
    )
    record, key = bench.record(), bench.key()
    sign(record, "author", key.path, "Ann", comment="one\ntwo")
    assert '"one\\ntwo"' in verify(record).lines[1]


def test_time_without_a_zone_is_refused(bench):
    """The time of a signature needs a zone."""
    with pytest.raises(RecordError, match=r"^time: needs a time zone, got 2026-01-02T00:00:00$"):
        sign(bench.record(), "author", bench.key().path, "Ann", signed_on=datetime.fromisoformat("2026-01-02"))


def test_missing_record_is_refused(bench):
    """A folder that is not there is refused."""
    with pytest.raises(RecordError) as caught:
        sign(bench.folder / "none", "author", bench.key().path, "Ann")
    assert caught.value.faults == (f"record {bench.folder / 'none'}: there is no such folder",)


def test_broken_record_is_not_signed(bench, contents):
    """A record that is not intact is not signed, and what is wrong is named."""
    record = bench.record()
    (record / "record.html").write_text("x")
    before = contents(record)
    with pytest.raises(RecordError) as caught:
        sign(record, "author", bench.key().path, "Ann")
    assert caught.value.faults == (
        "sign: only an intact record is signed; in this one",
        "record.html: is changed: its SHA-256 is not that of the manifest",
    )
    assert contents(record) == before


def test_page_that_fails_its_check_is_not_signed(bench):
    """The page's own check speaks before a signature."""
    with pytest.raises(RecordError) as caught:
        sign(bench.record(), "author", bench.key().path, "Ann", page_lint=lambda text: ["holds a script"])
    assert caught.value.faults[1] == "record.html: holds a script"


CHECKS = [
    {"id": "thermal.HV.temperature", "verdict": "within", "limit_provenance": "recalled"},
    {"id": "thermal.LV.temperature", "verdict": "exceeds", "limit_provenance": "recalled"},
    {"id": "strength.LV.hoop", "verdict": "not assessed", "limit_provenance": "recalled"},
    {"id": "strength.HV.hoop", "verdict": "within", "limit_provenance": "signatory"},
    {"id": "strength.HV.spacer", "verdict": "not assessed"},
]


def test_approver_waits_for_confirmed_limits(bench, contents):
    """An approver is refused while recalled limits carry deciding checks, and they are named; an author is not."""
    record, key = bench.record(checks=CHECKS), bench.key()
    sign(record, "author", key.path, "Ann")
    before = contents(record)
    with pytest.raises(RecordError) as caught:
        sign(record, "approver", key.path, "Ann")
    assert caught.value.exit_code == 2
    assert caught.value.faults == (
        (
            "sign: the role approver is refused while limits from memory carry deciding checks "
            "(thermal.HV.temperature, thermal.LV.temperature); "
            "confirm each under [limits] from a licensed copy and review again"
        ),
    )
    assert contents(record) == before


def test_approver_signs_when_limits_are_confirmed(bench):
    """Recalled limits of checks that are not assessed decide nothing."""
    record, key = bench.record(checks=CHECKS[2:]), bench.key()
    sign(record, "approver", key.path, "Ann")
    assert verify(record, require=["approver"]).exit_code == 3


def test_there_are_ninety_nine_signatures_at_most(bench, monkeypatch):
    """The two digits of the number are the bound."""
    record, _ = bench.signed()
    monkeypatch.setattr("throughfault.workbook.sign.LAST_NUMBER", 2)
    with pytest.raises(RecordError) as caught:
        sign(record, "witness", bench.key("cyd").path, "Cyd")
    assert caught.value.faults == ("sign: the record holds 2 signatures, which is the most it can",)


STEPS = range(8)  # mkdir, three writes, three renames, one step beyond
FAULTS = {"full disk": OSError(errno.ENOSPC, "No space left on device"), "Ctrl-C": KeyboardInterrupt()}


class Interruption:
    """Lets a number of file operations pass, then raises at every further one until lifted."""

    def __init__(self, monkeypatch, step, fault, *, for_good):
        self.left, self.fault, self.for_good, self.raised = step, fault, for_good, False
        for name in ("mkdir", "replace", "unlink"):
            self.wrap(monkeypatch, Path, name)
        self.wrap(monkeypatch, os, "fsync")

    def wrap(self, monkeypatch, owner, name):
        real = getattr(owner, name)

        def step(*args, **options):
            self.check(name)
            return real(*args, **options)

        monkeypatch.setattr(owner, name, step)

    def check(self, name):
        if self.raised and not self.for_good:
            return
        if name == "unlink" and not self.raised:
            return
        if self.left == 0:
            self.raised = True
            raise self.fault
        self.left -= 1


@pytest.mark.parametrize("step", STEPS)
@pytest.mark.parametrize("fault", FAULTS)
@pytest.mark.parametrize("earlier", [False, True])
def test_interruption_at_any_step_leaves_the_old_record(bench, contents, monkeypatch, step, fault, earlier):
    """Whatever fails while signing, the record is byte for byte as before; afterwards signing works."""
    record = bench.signed()[0] if earlier else bench.record()
    key = bench.key("cyd")
    before = contents(record)
    with monkeypatch.context() as patch:
        interruption = Interruption(patch, step, FAULTS[fault], for_good=False)
        if step == STEPS[-1]:
            sign(record, "witness", key.path, "Cyd")
            assert not interruption.raised
            return
        with pytest.raises(RecordError if fault == "full disk" else KeyboardInterrupt) as caught:
            sign(record, "witness", key.path, "Cyd")
    if fault == "full disk":
        assert caught.value.faults == ("sign: the signature could not be written: No space left on device",)
    assert contents(record) == before
    assert verify(record).faults == ()
    sign(record, "witness", key.path, "Cyd")
    assert verify(record).faults == ()


@pytest.mark.parametrize("step", STEPS[:-1])
@pytest.mark.parametrize("earlier", [False, True])
def test_killed_process_leaves_a_named_state_that_the_next_sign_clears(bench, contents, monkeypatch, step, earlier):
    """With no chance to clean up, verify names what is left or finds the old record, and signing again succeeds."""
    record = bench.signed()[0] if earlier else bench.record()
    key = bench.key("cyd")
    before = contents(record)
    with monkeypatch.context() as patch:
        Interruption(patch, step, KeyboardInterrupt(), for_good=True)
        with pytest.raises(KeyboardInterrupt):
            sign(record, "witness", key.path, "Cyd")
    left = set(contents(record)) - set(before)
    report = verify(record)
    if left:
        assert report.exit_code == 1
        assert all(any(fault.startswith(f"{name}: ") for fault in report.faults) for name in left)
        assert any("is left from an interrupted signing; the next 'sign' clears it away" in f for f in report.faults)
    else:
        assert contents(record) == before
        assert report.faults == ()
    sign(record, "witness", key.path, "Cyd")
    after = contents(record)
    number = "03" if earlier else "01"
    assert set(after) - set(before) == {f"signatures/{number}-witness.json", f"signatures/{number}-witness.sig"}
    assert verify(record).faults == ()


def leave_journal(record, extra):
    """Leave a new SHA256SUMS under its temporary name, as if a signing of `extra` had been interrupted."""
    text = (record / SUMS).read_text()
    for name in extra:
        text += f"{sha256_bytes((record / name).read_bytes())}  {name}\n"
    (record / f"{TEMPORARY}{SUMS}").write_text(text)


def test_nothing_else_is_cleared(bench, contents):
    """Foreign files, listed files and files with other bytes survive, whatever a left journal says."""
    record, _ = bench.signed()
    key = bench.key("cyd")
    (record / "inputs/mine").write_text("x")
    (record / "signatures/03-witness.json").write_text("mine")
    leave_journal(record, ["inputs/mine", "signatures/03-witness.json"])
    with pytest.raises(RecordError):
        sign(record, "witness", key.path, "Cyd")
    assert (record / "inputs/mine").exists()
    assert (record / "signatures/03-witness.json").read_text() == "mine"
    (record / "signatures/03-witness.sig").write_text("mine")
    leave_journal(record, ["signatures/03-witness.json", "signatures/03-witness.sig"])
    (record / "signatures/03-witness.json").write_text("changed")
    with pytest.raises(RecordError):
        sign(record, "witness", key.path, "Cyd")
    assert (record / "signatures/03-witness.json").read_text() == "changed"
    assert not (record / "signatures/03-witness.sig").exists()  # its bytes were those of the interrupted signing


def test_journal_of_another_state_takes_nothing_back(bench):
    """A left journal that disagrees with the present SHA256SUMS about any other file says nothing about a pair."""
    record, _ = bench.signed()
    for ending in ("json", "sig"):
        (record / f"signatures/03-witness.{ending}").write_text("mine")
    leave_journal(record, ["signatures/03-witness.json", "signatures/03-witness.sig"])
    journal = record / f"{TEMPORARY}{SUMS}"
    journal.write_text("0" * 64 + journal.read_text()[64:])
    with pytest.raises(RecordError):
        sign(record, "witness", bench.key("cyd").path, "Cyd")
    assert (record / "signatures/03-witness.json").read_text() == "mine"
    assert (record / "signatures/03-witness.sig").read_text() == "mine"


def test_lost_sums_do_not_cost_signatures(bench):
    """Where SHA256SUMS is gone, a left journal takes no signature back."""
    record, _ = bench.signed()
    shutil.copy(record / SUMS, record / f"{TEMPORARY}{SUMS}")
    (record / SUMS).unlink()
    with pytest.raises(RecordError):
        sign(record, "witness", bench.key("cyd").path, "Cyd")
    assert (record / "signatures/02-checker.sig").exists()


def test_temporary_names_of_others_stay(bench):
    """A file that only looks like one of ours is foreign: named by verify, not removed by sign."""
    record, _ = bench.signed()
    odd = record / "signatures" / f"{TEMPORARY}notes.txt"
    odd.write_text("mine")
    with pytest.raises(RecordError) as caught:
        sign(record, "witness", bench.key("cyd").path, "Cyd")
    assert odd.read_text() == "mine"
    assert any(odd.name in fault for fault in caught.value.faults)


@pytest.mark.parametrize("name", ["signatures", "SHA256SUMS", f"{TEMPORARY}SHA256SUMS"])
def test_a_link_out_of_the_record_is_refused_before_anything_is_touched(bench, contents, name):
    """What is taken back or written must stay within the record."""
    record, key = bench.record(), bench.key()
    outside = bench.folder / "outside"
    if name == "signatures":
        outside.mkdir()
        (outside / f"{TEMPORARY}01-author.json").write_text("of somebody else")
    else:
        outside.write_text("of somebody else")
    (record / name).unlink(missing_ok=True)
    (record / name).symlink_to(outside)
    before = contents(record), contents(bench.folder)
    with pytest.raises(RecordError) as fault:
        sign(record, "author", key.path, "Ann")
    assert str(fault.value) == f"sign: {name} of the record must not be a symbolic link; nothing was changed"
    assert (contents(record), contents(bench.folder)) == before
