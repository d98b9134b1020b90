"""Whatever is changed in a record, verify fails and names the file; what is intact is told apart by who signed."""

import hashlib
import json
import os
import shutil
import subprocess
import sys
from datetime import timedelta

import pytest
import rfc8785
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from throughfault.errors import InputError, RecordError
from throughfault.workbook.manifest import write_manifest
from throughfault.workbook.sign import sign
from throughfault.workbook.ssh_signature import load_private_key, sign_bytes
from throughfault.workbook.verify import verify

needs_ssh_keygen = pytest.mark.skipif(shutil.which("ssh-keygen") is None, reason="ssh-keygen is not on this machine")
FILES = [
    "SHA256SUMS",
    "inputs/recordings/fault 1.csv",
    "inputs/unit.toml",
    "manifest.json",
    "record.html",
    "results.json",
    "signatures/01-author.json",
    "signatures/01-author.sig",
    "signatures/02-checker.json",
    "signatures/02-checker.sig",
    "workbook.ipynb",
]


def sums_again(record):
    """Write SHA256SUMS as one who tampers would, to fit the files."""
    names = sorted(
        p.relative_to(record).as_posix() for p in record.rglob("*") if p.is_file() and p.name != "SHA256SUMS"
    )
    (record / "SHA256SUMS").write_text(
        "".join(f"{hashlib.sha256((record / name).read_bytes()).hexdigest()}  {name}\n" for name in names)
    )


def failed(record, signers=None):
    """Verify, insist on failure, and return the sentences."""
    report = verify(record, signers)
    assert report.state == "failed"
    assert report.exit_code == 1
    assert report.lines[0] == f"Record {record.name} is not as it was made or signed:"
    return report.faults


def test_the_signed_record_is_whole(bench, contents):
    """The record that the tests below tamper with holds exactly the files they name, and is intact."""
    record, signers = bench.signed()
    assert sorted(contents(record)) == FILES
    report = verify(record, signers, ["author", "checker"])
    assert (report.state, report.exit_code, report.faults, report.negatives) == ("identified", 0, (), ())


@pytest.mark.parametrize("name", FILES)
@pytest.mark.parametrize("position", ["first", "middle", "last"])
def test_one_flipped_bit_is_found(bench, name, position):
    """One flipped bit in any file, anywhere, fails and the file is named."""
    record, _ = bench.signed()
    path = record / name
    data = bytearray(path.read_bytes())
    index = {"first": 0, "middle": len(data) // 2, "last": len(data) - 1}[position]
    data[index] ^= 1
    path.write_bytes(bytes(data))
    assert any(name in fault for fault in failed(record))


@given(st.sampled_from(FILES), st.integers(0, 10**6), st.integers(1, 255))
@settings(suppress_health_check=[HealthCheck.function_scoped_fixture], deadline=None, max_examples=60)
def test_any_changed_byte_is_found(bench, name, index, flip):
    """Any byte changed in any way in any file fails and the file is named."""
    record = bench.folder / "BV-T9-A"
    if not record.exists():
        bench.signed()
    path = record / name
    before = path.read_bytes()
    data = bytearray(before)
    data[index % len(data)] ^= flip
    path.write_bytes(bytes(data))
    try:
        assert any(name in fault for fault in failed(record))
    finally:
        path.write_bytes(before)


@pytest.mark.parametrize("name", FILES)
def test_deleted_file_is_found(bench, name):
    """A file that is gone is named, each alone."""
    record, _ = bench.signed()
    (record / name).unlink()
    assert any(fault.startswith(f"{name}: is missing") for fault in failed(record))


def test_deleted_file_struck_from_the_sums_is_found(bench):
    """With SHA256SUMS made to fit, the manifest still misses the file."""
    record, _ = bench.signed()
    (record / "inputs/recordings/fault 1.csv").unlink()
    (record / "inputs/recordings").rmdir()
    sums_again(record)
    assert failed(record) == (
        "inputs/recordings/fault 1.csv: is missing",
        "manifest.json: inputs_sha256 is not that of the files in inputs/",
        "results.json: inputs_sha256 is not that of the files in inputs/",
    )


@pytest.mark.parametrize(
    ("name", "fault"),
    [
        ("extra.txt", "extra.txt: is a foreign file; the manifest does not list it"),
        ("inputs/more.csv", "inputs/more.csv: is a foreign file; the manifest does not list it"),
        (".hidden", ".hidden: is a foreign file; the manifest does not list it"),
        (
            "signatures/note.txt",
            "signatures/note.txt: is a foreign file; signatures/ holds NN-role.json and NN-role.sig only",
        ),
        (
            "signatures/03-owner.json",
            "signatures/03-owner.json: is a foreign file; signatures/ holds NN-role.json and NN-role.sig only",
        ),
        (
            "signatures/03-witness.json/x",
            "signatures/03-witness.json/x: is a foreign file; signatures/ holds NN-role.json and NN-role.sig only",
        ),
        ("\u202egnp.exe", "\\u202egnp.exe: is a foreign file; the manifest does not list it"),
    ],
)
def test_added_file_is_found(bench, name, fault):
    """A file that was put in is named, whether SHA256SUMS knows it or not."""
    record, _ = bench.signed()
    (record / name).parent.mkdir(exist_ok=True)
    (record / name).write_text("x")
    assert fault in failed(record)
    sums_again(record)
    assert fault in failed(record)


def test_added_empty_folder_is_found(bench):
    """An empty folder that was put in is named."""
    record, _ = bench.signed()
    (record / "inputs" / "photographs").mkdir()
    assert failed(record) == ("inputs/photographs/: is an empty folder that does not belong to the record",)


@pytest.mark.parametrize("target", ["file", "folder", "nothing"])
def test_link_is_refused(bench, target):
    """A link is refused even where its target has the right bytes; a linked folder is not entered."""
    record, _ = bench.signed()
    outside = bench.folder / "outside"
    if target == "file":
        shutil.move(record / "record.html", outside)
        (record / "record.html").symlink_to(outside)
        name = "record.html"
    elif target == "folder":
        shutil.move(record / "inputs/recordings", outside)
        (record / "inputs/recordings").symlink_to(outside)
        name = "inputs/recordings"
    else:
        (record / "gone").symlink_to(bench.folder / "nowhere")
        name = "gone"
    assert f"{name}: is a link or a special file; a record holds regular files only" in failed(record)


def test_special_file_is_not_opened(bench):
    """A pipe would hold a reader for ever; it is refused unopened."""
    record, _ = bench.signed()
    os.mkfifo(record / "pipe")
    assert failed(record) == ("pipe: is a link or a special file; a record holds regular files only",)


@pytest.mark.parametrize("ending", ["json", "sig"])
def test_exchanged_files_of_two_signatures_are_found(bench, ending):
    """Two statements, or two signatures, that changed places fail, SHA256SUMS made to fit."""
    record, _ = bench.signed()
    one, two = record / f"signatures/01-author.{ending}", record / f"signatures/02-checker.{ending}"
    first, second = one.read_bytes(), two.read_bytes()
    one.write_bytes(second)
    two.write_bytes(first)
    sums_again(record)
    faults = failed(record)
    for name in ("01-author", "02-checker"):
        assert any(fault.startswith(f"signatures/{name}.{ending}: ") for fault in faults)


def test_rebuilt_manifest_breaks_the_signatures(bench):
    """Changed results with manifest and SHA256SUMS made anew are found by every statement."""
    record, _ = bench.signed()
    shutil.move(record / "signatures", bench.folder / "kept")
    results = json.loads((record / "results.json").read_bytes()) | {"route": "calculation"}
    (record / "results.json").write_text(json.dumps(results))
    write_manifest(record, tables={})
    shutil.move(bench.folder / "kept", record / "signatures")
    sums_again(record)
    sentence = "is about another manifest: the record was changed after it was signed, or is another"
    assert failed(record) == (
        f"signatures/01-author.json: {sentence}",
        f"signatures/02-checker.json: {sentence}",
    )


def test_replay_into_another_record_is_found(bench):
    """Signatures carried over from another record of another unit fail."""
    record, signers = bench.signed()
    other = bench.record("BV-T8-A", unit={"tag": "BV-T8", "title": "", "revision": "A"})
    shutil.copytree(record / "signatures", other / "signatures")
    sums_again(other)
    faults = failed(other, signers)
    assert "signatures/01-author.json: is about BV-T9-A, not this unit and revision" in faults
    assert any(fault.startswith("signatures/01-author.json: is about another manifest") for fault in faults)


def test_role_swap_by_name_is_found(bench):
    """A checker's statement and signature renamed to an approver's fail."""
    record, signers = bench.signed()
    for ending in ("json", "sig"):
        (record / f"signatures/02-checker.{ending}").rename(record / f"signatures/02-approver.{ending}")
    sums_again(record)
    assert failed(record, signers) == (
        "signatures/02-approver.json: states the role checker, which is not the one in its name",
    )


def test_role_swap_inside_is_found(bench):
    """A checker's signature under a statement rewritten for an approver fails: the namespace is signed."""
    record, signers = bench.signed()
    statement = json.loads((record / "signatures/02-checker.json").read_bytes()) | {"role": "approver"}
    (record / "signatures/02-approver.json").write_bytes(rfc8785.dumps(statement))
    (record / "signatures/02-checker.json").unlink()
    (record / "signatures/02-checker.sig").rename(record / "signatures/02-approver.sig")
    sums_again(record)
    assert failed(record, signers) == (
        "signatures/02-approver.sig: is made for the namespace 'throughfault-checker' and not for 'throughfault-approver'",
    )


def test_dropped_earlier_signature_is_found(bench):
    """The author's pair dropped leaves a gap; the checker's renumbered to fill it names statements that are not there."""
    record, _ = bench.signed()
    for ending in ("json", "sig"):
        (record / f"signatures/01-author.{ending}").unlink()
    sums_again(record)
    chain = "names other earlier statements or signatures than stand before it"
    assert failed(record) == (
        "signatures/02-checker.json: is out of order; number 01 is missing or stands twice",
        f"signatures/02-checker.json: {chain}",
    )
    for ending in ("json", "sig"):
        (record / f"signatures/02-checker.{ending}").rename(record / f"signatures/01-checker.{ending}")
    sums_again(record)
    assert failed(record) == (f"signatures/01-checker.json: {chain}",)


def test_signatures_in_another_order_are_found(bench):
    """Author and checker renumbered into the other order fail, both named."""
    record, _ = bench.signed()
    folder = record / "signatures"
    for ending in ("json", "sig"):
        (folder / f"01-author.{ending}").rename(folder / f"02-author.{ending}")
        (folder / f"02-checker.{ending}").rename(folder / f"01-checker.{ending}")
    sums_again(record)
    chain = "names other earlier statements or signatures than stand before it"
    assert failed(record) == (f"signatures/01-checker.json: {chain}", f"signatures/02-author.json: {chain}")


def test_number_that_stands_twice_is_found(bench):
    """A second pair under a number already given fails."""
    record, _ = bench.signed()
    for ending in ("json", "sig"):
        shutil.copy(record / f"signatures/01-author.{ending}", record / f"signatures/01-witness.{ending}")
    sums_again(record)
    assert "signatures/01-witness.json: is out of order; number 02 is missing or stands twice" in failed(record)


def test_author_signed_anew_by_another_key_is_found(bench):
    """A statement signed again with another key breaks the chain: the checker names the signature too."""
    record, _ = bench.signed()
    statement = (record / "signatures/01-author.json").read_bytes()
    other = load_private_key(bench.key("mal").path)
    (record / "signatures/01-author.sig").write_text(sign_bytes(statement, other, "throughfault-author"))
    sums_again(record)
    assert failed(record) == (
        "signatures/02-checker.json: names other earlier statements or signatures than stand before it",
    )


def rewritten(bench, change):
    """Return a record whose only statement was changed by `change` and signed anew with its own key."""
    record, ann = bench.record(), bench.key("ann")
    sign(record, "author", ann.path, "Ann Author")
    path = record / "signatures/01-author.json"
    data = change(path.read_bytes())
    path.write_bytes(data)
    (record / "signatures/01-author.sig").write_text(
        sign_bytes(data, load_private_key(ann.path), "throughfault-author")
    )
    sums_again(record)
    return record


def with_key(**changes):
    return lambda data: rfc8785.dumps(json.loads(data) | changes)


@pytest.mark.parametrize(
    ("change", "fault"),
    [
        (lambda data: data + b"\n", "is not in canonical form (RFC 8785)"),
        (lambda data: data.replace(b'","', b'", "', 1), "is not in canonical form (RFC 8785)"),
        (
            lambda data: data.replace(b'{"comment":""', b'{"comment":"","comment":"x"'),
            "is not strict JSON in UTF-8: the key 'comment' stands twice",
        ),
        (lambda data: b"", "is not strict JSON in UTF-8: Expecting value: line 1 column 1 (char 0)"),
        (lambda data: b"[]", "the document: Input should be a valid dictionary or instance of Statement"),
        (lambda data: b" " * 70_000, "is larger than the 65536 bytes allowed"),
        (with_key(decision="maybe"), "decision: Input should be 'accept', 'reject' or 'conditional'"),
        (with_key(role="owner"), "role: Input should be 'author', 'checker', 'approver' or 'witness'"),
        (with_key(more=1), "more: Extra inputs are not permitted"),
        (with_key(format="x"), "format: Input should be 'throughfault-statement/1'"),
        (with_key(signedOn="2026-13-01T00:00:00Z"), "signedOn: Value error, month must be in 1..12"),
        (with_key(signedOn="today"), r"signedOn: String should match pattern '^\d{4}-\d\d-\d\dT\d\d:\d\d:\d\dZ$'"),
        (with_key(comment="a\x1b[2Jb"), "comment: Value error, comment must hold printable characters only"),
        (
            with_key(manifest_sha256="0" * 64),
            "is about another manifest: the record was changed after it was signed, or is another",
        ),
    ],
)
def test_signed_statement_that_is_none_is_found(bench, change, fault):
    """A validly signed file that is no statement in its one spelling fails and is named."""
    assert f"signatures/01-author.json: {fault}" in failed(rewritten(bench, change))


def changed_manifest(bench, change):
    """Return an unsigned record with a changed manifest and SHA256SUMS made to fit."""
    record = bench.record()
    path = record / "manifest.json"
    path.write_bytes(change(path.read_bytes()))
    sums_again(record)
    return record


def entry(**changes):
    def change(data):
        manifest = json.loads(data)
        manifest["files"][0] |= changes
        return rfc8785.dumps(manifest)

    return change


@pytest.mark.parametrize(
    ("change", "fault"),
    [
        (lambda data: data + b" ", "manifest.json: is not in canonical form (RFC 8785)"),
        (
            lambda data: data.replace(b'{"created"', b'{"created":"x","created"'),
            "manifest.json: is not strict JSON in UTF-8: the key 'created' stands twice",
        ),
        (
            lambda data: data.replace(b'"size":8', b'"size":NaN'),
            "manifest.json: is not strict JSON in UTF-8: NaN is not a JSON number",
        ),
        (lambda data: data + b" " * (1 << 20), "manifest.json: is larger than the 1048576 bytes allowed"),
        (
            lambda data: data.replace(b"manifest/1", b"manifest/2"),
            "manifest.json: format: Input should be 'throughfault-manifest/1'",
        ),
        (entry(size=9), "inputs/recordings/fault 1.csv: is changed: its size is not that of the manifest"),
        (entry(size=-1), "manifest.json: files.0.size: Input should be greater than or equal to 0"),
        (entry(sha256="0" * 64), "inputs/recordings/fault 1.csv: is changed: its SHA-256 is not that of the manifest"),
        (entry(path="../outside"), "manifest.json: path '../outside' is not a plain relative path"),
        (entry(path="/etc/passwd"), "manifest.json: path '/etc/passwd' is not a plain relative path"),
        (entry(path="record.html"), "manifest.json: path 'record.html' stands twice"),
        (entry(path="Record.html"), "manifest.json: path 'record.html' differs from Record.html in case alone"),
        (entry(path="SHA256SUMS"), "manifest.json: path 'SHA256SUMS' is reserved and may not stand in the manifest"),
        (with_key(files=[]), "manifest.json: does not list record.html"),
        (with_key(inputs_sha256="0" * 64), "manifest.json: inputs_sha256 is not that of the files in inputs/"),
        (with_key(kit={"version": "9"}), "manifest.json: names another version of the kit than results.json"),
        (
            with_key(template={"name": "design", "sha256": "ab" * 32}),
            "manifest.json: names another template than results.json",
        ),
    ],
)
def test_wrong_manifest_is_found(bench, change, fault):
    """A manifest that is malformed, unsafe or of other files fails, SHA256SUMS made to fit."""
    assert fault in failed(changed_manifest(bench, change))


@pytest.mark.parametrize(
    ("change", "fault"),
    [
        (
            lambda text: "".join(reversed(text.splitlines(keepends=True))),
            "is not written as the kit writes it: one line a file, sorted by path",
        ),
        (lambda text: text.rstrip("\n"), "is not written as the kit writes it: one line a file, sorted by path"),
        (lambda text: text + "x\n", "line 7 is not a new 'sha256  path'"),
        (lambda text: text.replace("record.html", "record.htm"), "lists it"),
        (
            lambda text: "0" * 64 + text[64:],
            "gives another SHA-256 for inputs/recordings/fault 1.csv than the manifest",
        ),
        (lambda text: "x" * (1 << 21), "is larger than the 1048576 bytes allowed"),
    ],
)
def test_wrong_sums_are_found(bench, change, fault):
    """SHA256SUMS itself fails when it is not exactly that of the files."""
    record = bench.record()
    path = record / "SHA256SUMS"
    path.write_text(change(path.read_text()))
    assert any("SHA256SUMS" in line and line.endswith(fault) for line in failed(record))


def test_wrong_results_are_found(bench):
    """Results that no longer hold what the manifest leans on fail by name."""
    record = bench.record()
    (record / "results.json").write_text("{}")
    assert any(fault.startswith("results.json: unit: Field required; ") for fault in failed(record))


def test_page_lint_speaks_for_the_page(bench):
    """What the page's own check finds is a fault of record.html, printed safely; a page that is no text is refused."""
    record = bench.record()
    assert verify(record, page_lint=lambda text: []).exit_code == 0
    report = verify(record, page_lint=lambda text: [f"holds a script {text[:2]}\x1b"])
    assert report.faults == ("record.html: holds a script <!\\x1b",)
    (record / "record.html").write_bytes(b"\xff")
    assert "record.html: is not UTF-8" in verify(record, page_lint=lambda text: []).faults
    (record / "record.html").unlink()
    assert "record.html: is missing" in verify(record, page_lint=lambda text: ["never asked"]).faults


def test_every_fault_stands_in_one_report(bench):
    """Several changed files are named together."""
    record, _ = bench.signed()
    for name in ("record.html", "workbook.ipynb"):
        (record / name).write_text("x")
    (record / "new").write_text("x")
    assert failed(record) == (
        "new: is a foreign file; the manifest does not list it",
        "record.html: is changed: its SHA-256 is not that of the manifest",
        "workbook.ipynb: is changed: its SHA-256 is not that of the manifest",
    )


def test_unsigned_record_is_intact(bench):
    """A record nobody signed is intact and said to be unsigned; an empty signatures folder does not matter."""
    record = bench.record()
    (record / "signatures").mkdir()
    report = verify(record)
    assert (report.state, report.exit_code) == ("unsigned", 0)
    assert report.lines == ("Record BV-T9-A is intact and unsigned.",)


def test_required_role_that_is_missing_is_a_negative_answer(bench):
    """Nobody having signed in a required role gives exit code 1, role by role."""
    report = verify(bench.record(), require=["author", "approver"])
    assert (report.state, report.exit_code) == ("unsigned", 1)
    assert report.lines[1:] == (
        "Required role author: nobody has signed.",
        "Required role approver: nobody has signed.",
    )


def test_required_role_that_rejects_is_a_negative_answer(bench):
    """The latest decision of a required role counts: reject fails, a later accept heals it."""
    record, key = bench.record(), bench.key()
    sign(record, "checker", key.path, "Ann", "reject")
    signers = bench.signers(f"Ann {key.public}")
    report = verify(record, signers, ["checker"])
    assert report.exit_code == 1
    assert report.negatives == ("Required role checker: the latest decision, by Ann, is reject.",)
    assert verify(record, signers).exit_code == 0
    sign(record, "checker", key.path, "Ann", "accept")
    assert verify(record, signers, ["checker"]).exit_code == 0


def test_unknown_required_role_is_refused(bench):
    """A role that does not exist is bad input, with the nearest one."""
    with pytest.raises(InputError) as caught:
        verify(bench.record(), require=["autor"])
    assert caught.value.faults == (
        "require: unknown role 'autor' (did you mean 'author'?); known are author, checker, approver, witness",
    )


def test_missing_record_is_refused(tmp_path):
    """A folder that is not there is bad input."""
    with pytest.raises(RecordError) as caught:
        verify(tmp_path / "none")
    assert caught.value.faults == (f"record {tmp_path / 'none'}: there is no such folder",)


def test_unreadable_file_is_reported(bench, monkeypatch):
    """A file that the system does not let us read is bad input, not a traceback."""
    record = bench.record()

    def refuse(*args):
        raise PermissionError(13, "Permission denied", "record.html")

    monkeypatch.setattr("throughfault.workbook.tree.hashlib.file_digest", refuse)
    with pytest.raises(RecordError) as caught:
        verify(record)
    assert caught.value.faults == (f"record {record}: cannot be read: [Errno 13] Permission denied: 'record.html'",)


def test_without_signers_file_nobody_is_identified(bench):
    """Intact signatures without a signers file give exit code 3 and say who claims to have signed."""
    record, _ = bench.signed()
    report = verify(record, require=["author"])
    assert (report.state, report.exit_code) == ("not identified", 3)
    key = report.signatures[1].key
    assert report.lines[0] == "Record BV-T9-A is intact, but signers are not identified."
    assert report.lines[2] == (
        '02 checker: ben@brackwater.example, decision conditional, "see 4.2", states 2026-11-03T09:30:00Z, '
        f"key {key}, not identified: no signers file was given."
    )


def test_identified_signers_are_printed_with_their_line(bench):
    """The line of the verifier's file that identifies each signer is named."""
    record, signers = bench.signed()
    lines = verify(record, signers).lines
    assert lines[0] == "Record BV-T9-A is intact and every signer is identified."
    assert lines[1].endswith("identified by line 1 of the signers file.")
    assert lines[2].endswith("identified by line 2 of the signers file.")


@pytest.mark.parametrize(
    "options",
    [
        'namespaces="throughfault-checker"',
        'valid-after="20261103093001Z"',
        'valid-before="20261103092959Z"',
        'namespaces="throughfault-author",valid-before="20261101Z"',
    ],
)
def test_key_that_may_not_sign_so_is_not_identified(bench, signed_on, options):
    """A key not granted the role, or not at that time, leaves the record intact but unidentified."""
    record, key = bench.record(), bench.key()
    sign(record, "author", key.path, "Ann", signed_on=signed_on)
    report = verify(record, bench.signers(f"Ann {options} {key.public}"))
    assert (report.state, report.exit_code) == ("not identified", 3)


def test_one_unknown_signer_is_enough(bench):
    """A signature by a stranger beside known ones gives exit code 3."""
    record, signers = bench.signed()
    sign(record, "approver", bench.key("mal").path, "Ann Author")
    report = verify(record, signers, ["approver"])
    assert [s.identified for s in report.signatures] == [True, True, False]
    assert report.exit_code == 3


def test_notes_say_what_no_signature_forbids(bench, signed_on):
    """One key in two roles and a signature older than the record are noted; neither fails."""
    record, key = bench.record(), bench.key()
    sign(record, "author", key.path, "Ann", signed_on=signed_on - timedelta(days=9))
    sign(record, "checker", key.path, "Ann", signed_on=signed_on)
    report = verify(record, bench.signers(f"Ann {key.public}"))
    assert report.exit_code == 0
    assert report.lines[-2:] == (
        f"One key signed as author, checker: {report.signatures[0].key}.",
        "Signature 01 is dated before the record was made (2026-11-02T08:00:00Z).",
    )


def test_approval_over_unconfirmed_limits_is_noted(bench):
    """An approver's signature made by other means over limits from memory is noted."""
    checks = [{"id": "thermal.LV.temperature", "verdict": "within", "limit_provenance": "recalled"}]
    record, key = bench.record(checks=checks), bench.key()
    sign(record, "author", key.path, "Ann")
    folder = record / "signatures"
    statement = rfc8785.dumps(json.loads((folder / "01-author.json").read_bytes()) | {"role": "approver"})
    for ending in ("json", "sig"):
        (folder / f"01-author.{ending}").unlink()
    (folder / "01-approver.json").write_bytes(statement)
    (folder / "01-approver.sig").write_text(sign_bytes(statement, load_private_key(key.path), "throughfault-approver"))
    sums_again(record)
    report = verify(record)
    assert report.exit_code == 3
    assert report.notes == (
        "Signature 01 approves although limits from memory carry deciding checks: thermal.LV.temperature.",
    )


@needs_ssh_keygen
def test_ssh_keygen_verifies_the_record_without_the_kit(bench):
    """`ssh-keygen -Y verify` accepts an untouched signature under the same signers file, and no changed one."""
    record, signers = bench.signed()
    for stem, signer in (("01-author", "Ann Author"), ("02-checker", "ben@brackwater.example")):
        statement = record / f"signatures/{stem}.json"
        command = [
            "ssh-keygen",
            "-Y",
            "verify",
            "-f",
            signers,
            "-I",
            signer,
            "-n",
            f"throughfault-{stem[3:]}",
            "-s",
            statement.with_suffix(".sig"),
        ]
        good = subprocess.run(command, input=statement.read_bytes(), capture_output=True, check=False)
        bad = subprocess.run(command, input=statement.read_bytes() + b" ", capture_output=True, check=False)
        assert (good.returncode, bad.returncode != 0) == (0, True), good.stderr


@needs_ssh_keygen
def test_signature_by_ssh_keygen_verifies(bench):
    """A signature that ssh-keygen made of our statement, with its own key, is accepted in the record."""
    record = bench.record()
    subprocess.run(["ssh-keygen", "-q", "-t", "ed25519", "-N", "", "-f", bench.folder / "k"], check=True)
    sign(record, "author", bench.folder / "k", "Ann")
    done = subprocess.run(
        ["ssh-keygen", "-Y", "sign", "-f", bench.folder / "k", "-n", "throughfault-author", "-O", "hashalg=sha256"],
        input=(record / "signatures/01-author.json").read_bytes(),
        capture_output=True,
        check=True,
    )
    (record / "signatures/01-author.sig").write_bytes(done.stdout)
    sums_again(record)
    public = (bench.folder / "k.pub").read_text().strip()
    assert verify(record, bench.signers(f"Ann {public}")).exit_code == 0


def test_nothing_of_the_record_is_run(bench):
    """Verifying imports nothing from the record and no notebook machinery, even when run inside the record."""
    record, _ = bench.signed()
    for name in ("json.py", "rfc8785.py", "sitecustomize.py"):
        (record / name).write_text("raise SystemExit('the record was run')")
    program = (
        "import sys; sys.path.remove('') if '' in sys.path else None\n"
        "from pathlib import Path; from throughfault.workbook.verify import verify\n"
        "report = verify(Path('.'))\n"
        "assert len(report.faults) == 3, report.faults\n"
        "assert not {'nbformat', 'nbclient', 'papermill', 'jupyter_client', 'nbconvert'} & set(sys.modules)\n"
    )
    environment = {**os.environ, "PYTHONPATH": os.pathsep.join(path for path in sys.path if path)}
    done = subprocess.run(
        [sys.executable, "-c", program], cwd=record, env=environment, capture_output=True, text=True, check=False
    )
    assert done.returncode == 0, done.stderr
