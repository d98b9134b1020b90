"""A record is published whole by rename, and nothing a user would miss is ever removed."""

import errno
import shutil
from pathlib import Path

import pytest

from throughfault.errors import RecordError
from throughfault.workbook.folder import recover_exchange, replace_record, staging_folder

FAULTS = {"full disk": OSError(errno.ENOSPC, "No space left on device"), "Ctrl-C": KeyboardInterrupt()}


def listing(folder):
    return sorted(path.name for path in folder.iterdir())


def publish(bench, out, route):
    """Make a record of the given route in a staging folder and publish it; returns its results."""
    with staging_folder(out, "BV-T9-A") as staging:
        made = bench.record(f"made-{route}", route=route)
        shutil.copytree(made, staging, dirs_exist_ok=True)
        replace_record(staging, out / "BV-T9-A")
    return (out / "BV-T9-A/results.json").read_text()


def test_new_record_appears_whole(bench, tmp_path):
    """The staging folder becomes the record and nothing else is left; folders on the way are made."""
    out = tmp_path / "deep" / "records"
    assert '"route": "test"' in publish(bench, out, "test")
    assert listing(out) == ["BV-T9-A"]


def test_unsigned_record_is_replaced(bench, tmp_path):
    """An unsigned record makes way for the new one."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    assert '"route": "calculation"' in publish(bench, out, "calculation")
    assert listing(out) == ["BV-T9-A"]


def test_record_has_the_usual_rights(bench, tmp_path):
    """A published folder can be entered by whoever may enter any other new folder."""
    publish(bench, tmp_path / "records", "test")
    (tmp_path / "plain").mkdir()
    assert (tmp_path / "records/BV-T9-A").stat().st_mode == (tmp_path / "plain").stat().st_mode


@pytest.mark.parametrize("what", ["pair", "stray", "file"])
def test_signed_record_is_never_replaced(bench, tmp_path, contents, what):
    """A record with anything at all in signatures/ is refused and stays."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    signatures = out / "BV-T9-A/signatures"
    if what == "pair":
        from throughfault.workbook.sign import sign

        sign(out / "BV-T9-A", "author", bench.key().path, "Ann")
    elif what == "stray":
        signatures.mkdir()
        (signatures / "x").write_text("x")
    else:
        signatures.write_text("x")
    before = contents(out)
    with pytest.raises(RecordError) as caught:
        publish(bench, out, "calculation")
    assert caught.value.faults == (
        "record BV-T9-A: is signed, and a signed record is never replaced; give a new revision",
    )
    assert contents(out) == before


@pytest.mark.parametrize("kind", ["folder", "empty folder", "file", "link", "broken link"])
def test_what_is_no_record_is_left_alone(bench, tmp_path, kind):
    """A user's own folder, file or link under the record's name is refused and stays."""
    out = tmp_path / "records"
    out.mkdir()
    target = out / "BV-T9-A"
    elsewhere = bench.record("elsewhere")
    if kind == "folder":
        target.mkdir()
        (target / "thesis.txt").write_text("x")
    elif kind == "empty folder":
        target.mkdir()
    elif kind == "file":
        target.write_text("x")
    else:
        target.symlink_to(elsewhere if kind == "link" else tmp_path / "nowhere")
    with pytest.raises(RecordError) as caught:
        publish(bench, out, "test")
    assert caught.value.faults == ("record BV-T9-A: what stands there is no record folder, and is left alone",)
    assert listing(out) == ["BV-T9-A"]
    assert (elsewhere / "manifest.json").exists()


def test_half_a_record_is_not_published(tmp_path):
    """A staging folder without manifest is refused."""
    with pytest.raises(RecordError) as caught, staging_folder(tmp_path, "BV-T9-A") as staging:  # noqa: PT012
        (staging / "record.html").write_text("x")
        replace_record(staging, tmp_path / "BV-T9-A")
    assert caught.value.faults == (
        "record BV-T9-A: the new folder is not finished; it has no manifest.json and SHA256SUMS",
    )
    assert listing(tmp_path) == []


@pytest.mark.parametrize("fault", [KeyboardInterrupt, SystemExit, ValueError])
def test_staging_folder_is_removed_on_any_failure(tmp_path, fault):
    """Whatever ends the work, nothing is left, not even the folder made for records."""
    out = tmp_path / "a" / "records"
    with pytest.raises(fault), staging_folder(out, "BV-T9-A") as staging:  # noqa: PT012
        (staging / "sub").mkdir()
        (staging / "sub/x").write_text("x")
        assert staging.parent == out
        assert staging.name.startswith(".BV-T9-A.staging-")
        raise fault
    assert listing(tmp_path) == []


def test_folder_for_records_that_was_there_stays(tmp_path):
    """A folder that was there before stays, with what is in it."""
    (tmp_path / "mine").write_text("x")
    with pytest.raises(KeyboardInterrupt), staging_folder(tmp_path, "BV-T9-A"):
        raise KeyboardInterrupt
    assert listing(tmp_path) == ["mine"]


def test_folder_that_cannot_be_written_is_refused(tmp_path):
    """Records cannot be put where a file stands."""
    (tmp_path / "records").write_text("x")
    with pytest.raises(RecordError) as caught, staging_folder(tmp_path / "records", "BV-T9-A"):
        pass
    assert caught.value.faults == (f"records folder {tmp_path / 'records'}: cannot be written to: Not a directory",)


@pytest.mark.parametrize("fault", FAULTS)
@pytest.mark.parametrize("step", [0, 1])
def test_interrupted_exchange_restores_the_old_record(bench, tmp_path, contents, monkeypatch, fault, step):
    """When one of the two renames fails, the old record stands as before."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    before = contents(out)
    count = 0
    real = Path.replace

    def replace(self, target):
        nonlocal count
        count += 1
        if count == step + 1:
            raise FAULTS[fault]
        return real(self, target)

    with monkeypatch.context() as patch:
        patch.setattr(Path, "replace", replace)
        with pytest.raises(type(FAULTS[fault])):
            publish(bench, out, "calculation")
    assert contents(out) == before
    assert listing(out) == ["BV-T9-A"]


def test_killed_between_the_renames_is_recovered(bench, tmp_path, contents):
    """The old record, left aside by a killed process, is put back; the next exchange then replaces it."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    before = contents(out / "BV-T9-A")
    (out / "BV-T9-A").rename(out / ".BV-T9-A.replaced")
    recover_exchange(out / "BV-T9-A")
    assert contents(out / "BV-T9-A") == before
    (out / "BV-T9-A").rename(out / ".BV-T9-A.replaced")
    assert '"route": "calculation"' in publish(bench, out, "calculation")
    assert listing(out) == ["BV-T9-A"]


def test_killed_before_the_removal_is_recovered(bench, tmp_path):
    """An old record that was only to be removed goes at the next exchange, and half of it never comes back."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    shutil.copytree(out / "BV-T9-A", out / ".BV-T9-A.replaced")
    shutil.copytree(out / "BV-T9-A/inputs", out / ".BV-T9-A.discarded")
    recover_exchange(out / "BV-T9-A")
    assert listing(out) == ["BV-T9-A"]


def test_removal_that_fails_does_not_fail_the_exchange(bench, tmp_path, monkeypatch):
    """The new record is in place; the old one goes at the next exchange."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    with monkeypatch.context() as patch:
        patch.setattr("throughfault.workbook.folder.shutil.rmtree", lambda *args, **options: None)
        with staging_folder(out, "BV-T9-A") as staging:
            shutil.copytree(bench.record("other"), staging, dirs_exist_ok=True)
            replace_record(staging, out / "BV-T9-A")
    assert listing(out) == [".BV-T9-A.discarded", "BV-T9-A"]
    publish(bench, out, "calculation")
    assert listing(out) == ["BV-T9-A"]


def test_signed_leftover_is_never_removed(bench, tmp_path):
    """A record left aside that is signed is left for a person to move."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    shutil.copytree(out / "BV-T9-A", out / ".BV-T9-A.replaced")
    (out / ".BV-T9-A.replaced/signatures").mkdir()
    (out / ".BV-T9-A.replaced/signatures/x").write_text("x")
    with pytest.raises(RecordError) as caught:
        publish(bench, out, "calculation")
    assert caught.value.faults == ("record BV-T9-A: .BV-T9-A.replaced beside it is signed and must be moved by hand",)


def test_record_signed_during_the_exchange_is_put_back(bench, tmp_path, monkeypatch):
    """A signature that arrives just before the rename is found after it, and the record put back."""
    out = tmp_path / "records"
    publish(bench, out, "test")
    real = Path.replace

    def replace(self, target):
        if self.name == "BV-T9-A":
            (self / "signatures").mkdir()
            (self / "signatures/01-author.json").write_text("x")
        return real(self, target)

    with monkeypatch.context() as patch:
        patch.setattr(Path, "replace", replace)
        with pytest.raises(
            RecordError, match=r"is signed, and a signed record is never replaced; give a new revision$"
        ):
            publish(bench, out, "calculation")
    assert (out / "BV-T9-A/signatures/01-author.json").exists()
    assert listing(out) == ["BV-T9-A"]
