"""The manifest and SHA256SUMS of a record."""

import json
import os
import shutil
import subprocess
from datetime import datetime

import pytest
import rfc8785

from throughfault.errors import RecordError
from throughfault.workbook.manifest import (
    inputs_sha256,
    parse_sums,
    path_faults,
    sums_text,
    timestamp,
    write_manifest,
)
from throughfault.workbook.verify import verify

needs_sha256sum = pytest.mark.skipif(shutil.which("sha256sum") is None, reason="sha256sum is not on this machine")


def test_manifest_lists_every_file_but_itself_and_the_sums(bench):
    """The manifest lists what the contract says, with the sizes and hashes of the bytes on disk."""
    record = bench.record()
    manifest = json.loads((record / "manifest.json").read_bytes())
    assert [entry["path"] for entry in manifest["files"]] == [
        "inputs/recordings/fault 1.csv",
        "inputs/unit.toml",
        "record.html",
        "results.json",
        "workbook.ipynb",
    ]
    assert manifest["files"][0] == {
        "path": "inputs/recordings/fault 1.csv",
        "size": 8,
        # printf '0.0,1.0\n' | sha256sum
        "sha256": subprocess.run(["sha256sum"], input=b"0.0,1.0\n", capture_output=True, check=True)
        .stdout[:64]
        .decode(),
    }


def test_manifest_names_what_made_the_record(bench):
    """Kit, dependencies, platform, template and tables stand in it; the time is in UTC; there is no host or path."""
    record = bench.record()
    data = (record / "manifest.json").read_bytes()
    manifest = json.loads(data)
    assert manifest["format"] == "throughfault-manifest/1"
    assert manifest["created"] == "2026-11-02T08:00:00Z"
    assert manifest["kit"] == {"name": "throughfault", "version": "0.1.0"}
    assert manifest["template"] == {"name": "rating", "sha256": "ab" * 32}
    assert manifest["tables"] == {"peak_factor.csv": "cd" * 32}
    assert set(manifest["dependencies"]) == {
        "numpy",
        "scipy",
        "pint",
        "matplotlib",
        "papermill",
        "nbconvert",
        "nbclient",
        "ipykernel",
        "pydantic",
        "math-core",
    }
    assert set(manifest["platform"]) == {"system", "machine"}
    assert data == rfc8785.dumps(manifest)
    assert os.uname().nodename.encode() not in data
    assert str(record.parent).encode() not in data


def test_missing_dependency_is_called_absent(bench, monkeypatch):
    """A dependency that is not installed is written down as absent."""
    monkeypatch.setattr("throughfault.workbook.manifest.DEPENDENCIES", ("no-such-distribution-here",))
    manifest = json.loads((bench.record() / "manifest.json").read_bytes())
    assert manifest["dependencies"] == {"no-such-distribution-here": "absent"}


@needs_sha256sum
def test_sha256sum_checks_the_record(bench):
    """`sha256sum -c` accepts SHA256SUMS, and every file but itself is listed."""
    record, _ = bench.signed()
    done = subprocess.run(
        ["sha256sum", "--strict", "-c", "SHA256SUMS"], cwd=record, capture_output=True, text=True, check=True
    )
    assert sorted(line.removesuffix(": OK") for line in done.stdout.splitlines()) == sorted(
        path.relative_to(record).as_posix()
        for path in record.rglob("*")
        if path.is_file() and path.name != "SHA256SUMS"
    )


@needs_sha256sum
def test_inputs_hash_is_that_of_a_shell_pipeline(bench):
    """The hash of the inputs can be had without the kit."""
    record = bench.record()
    pipeline = "find inputs -type f -exec sha256sum {} + | LC_ALL=C sort | sha256sum"
    done = subprocess.run(["sh", "-c", pipeline], cwd=record, capture_output=True, text=True, check=True)
    assert inputs_sha256(record) == done.stdout.split()[0]


def test_inputs_hash_needs_inputs(bench, tmp_path):
    """A record without inputs has no hash of inputs."""
    with pytest.raises(RecordError) as caught:
        inputs_sha256(tmp_path)
    assert caught.value.faults == ("inputs/: the record has no folder of inputs",)
    (tmp_path / "inputs").mkdir()
    with pytest.raises(RecordError) as caught:
        inputs_sha256(tmp_path)
    assert caught.value.faults == ("inputs/: holds no file",)


def test_inputs_hash_follows_no_link(tmp_path):
    """A link among the inputs is refused."""
    (tmp_path / "inputs").mkdir()
    (tmp_path / "inputs" / "unit.toml").write_text("x")
    (tmp_path / "inputs" / "more").symlink_to("/etc")
    with pytest.raises(RecordError) as caught:
        inputs_sha256(tmp_path)
    assert caught.value.faults == ("inputs/more: is a link or a special file; a record holds regular files only",)


def test_incomplete_folder_gets_no_manifest(bench):
    """Everything that is missing is named and nothing is written."""
    record = bench.unlisted()
    (record / "record.html").unlink()
    (record / "results.json").unlink()
    with pytest.raises(RecordError) as caught:
        write_manifest(record)
    assert caught.value.faults == (
        "record.html: is missing from the record",
        "results.json: is missing from the record",
    )
    assert not (record / "manifest.json").exists()


def test_results_of_other_inputs_are_refused(bench):
    """Results that were computed from other inputs than those in the folder get no manifest."""
    record = bench.unlisted(inputs_sha256="00" * 32)
    with pytest.raises(RecordError) as caught:
        write_manifest(record)
    assert caught.value.faults == ("results.json: inputs_sha256 is not that of the files in inputs/",)


def test_unreadable_results_are_refused(bench):
    """A results file without what the manifest takes from it is refused, key by key."""
    record = bench.unlisted()
    (record / "results.json").write_text('{"unit": {"tag": 1, "revision": "A"}, "inputs_sha256": "", "checks": []}')
    with pytest.raises(RecordError) as caught:
        write_manifest(record)
    assert caught.value.faults == (
        (
            "results.json: unit.tag: Input should be a valid string; kit: Field required; template: Field required; "
            "inputs_sha256: String should match pattern '^[0-9a-f]{64}$'"
        ),
    )


def test_signed_record_keeps_its_manifest(bench, contents):
    """The manifest of a signed record is never written again."""
    record, _ = bench.signed()
    before = contents(record)
    with pytest.raises(RecordError) as caught:
        write_manifest(record)
    assert caught.value.faults == ("BV-T9-A: the record is signed; its manifest is never written again",)
    assert contents(record) == before


def test_manifest_again_is_the_same(bench, contents):
    """Writing the manifest of the same folder at the same time gives the same bytes."""
    assert contents(bench.record("one"))["manifest.json"] != b""
    first, second = bench.record("two"), bench.folder / "three"
    shutil.copytree(first, second)
    (second / "manifest.json").unlink()
    (second / "SHA256SUMS").unlink()
    write_manifest(
        second, tables={"peak_factor.csv": "cd" * 32}, created=datetime.fromisoformat("2026-11-02T09:00:00+01:00")
    )
    assert contents(first) == contents(second)


def test_new_record_is_intact_now(bench):
    """Without a given time, the manifest carries the present one, and the record is intact."""
    record = bench.unlisted()
    write_manifest(record, tables={})
    assert verify(record).state == "unsigned"


def test_time_needs_a_zone():
    """A time without a zone is refused: nobody could say when it was."""
    with pytest.raises(RecordError) as caught:
        timestamp(datetime.fromisoformat("2026-01-02T03:04:05"))
    assert caught.value.faults == ("time: needs a time zone, got 2026-01-02T03:04:05",)


@pytest.mark.parametrize(
    ("name", "fault"),
    [
        ("/etc/passwd", "is not a plain relative path"),
        ("inputs/../x", "is not a plain relative path"),
        ("./x", "is not a plain relative path"),
        ("inputs//x", "is not a plain relative path"),
        ("", "is not a plain relative path"),
        ("a\\b", "holds a backslash, a colon, a quotation mark or a character that cannot be printed"),
        ("C:x", "holds a backslash, a colon, a quotation mark or a character that cannot be printed"),
        ("a\nb", "holds a backslash, a colon, a quotation mark or a character that cannot be printed"),
        ("a\u202eb", "holds a backslash, a colon, a quotation mark or a character that cannot be printed"),
        ("inputs/x ", "has a part that begins or ends with a space, or ends with a dot"),
        ("inputs/x.", "has a part that begins or ends with a space, or ends with a dot"),
        ("manifest.json", "is reserved and may not stand in the manifest"),
        ("Signatures/01-author.json", "is reserved and may not stand in the manifest"),
        ("sha256sums", "is reserved and may not stand in the manifest"),
    ],
)
def test_unsafe_path_is_named(name, fault):
    """A path that leaves the record or means different things on different systems is refused."""
    assert path_faults([name]) == [(name, fault)]


def test_paths_that_differ_in_case_collide():
    """Two paths that are one on some file systems are refused, as is one that stands twice."""
    assert path_faults(["inputs/a", "inputs/A", "inputs/a"]) == [
        ("inputs/A", "differs from inputs/a in case alone"),
        ("inputs/a", "stands twice"),
    ]


def test_unsafe_file_name_gets_no_manifest(bench):
    """A folder with a file that sha256sum would read differently gets no manifest, and its name prints safely."""
    record = bench.unlisted()
    (record / "inputs" / "a\x1b[2J").write_text("x")
    with pytest.raises(RecordError) as caught:
        write_manifest(record)
    assert caught.value.faults[0] == (
        "inputs/a\\x1b[2J: holds a backslash, a colon, a quotation mark or a character that cannot be printed"
    )


@pytest.mark.parametrize("text", ["", "x\n", f"{'0' * 64} record.html\n", f"{'0' * 64}  a\n{'1' * 64}  a\n"])
def test_bad_sums_are_named(text):
    """A line of SHA256SUMS that is none is named by its number."""
    with pytest.raises(ValueError) as caught:
        parse_sums(text)
    assert str(caught.value) == f"line {text.count(chr(10)) or 1} is not a new 'sha256  path'"


def test_sums_round_trip():
    """What is written is read back, itself left out, sorted by path."""
    hashes = {"b": "1" * 64, "a": "2" * 64, "SHA256SUMS": "3" * 64}
    text = sums_text(hashes)
    assert text == f"{'2' * 64}  a\n{'1' * 64}  b\n"
    assert parse_sums(text) == {"a": "2" * 64, "b": "1" * 64}
