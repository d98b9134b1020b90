"""Publish a finished record folder by rename, so that a record is there whole or not at all.

A staging folder stands beside the target, on the same file system, under a name with a dot in front.
"""

from __future__ import annotations

import os
import secrets
import shutil
from collections.abc import Iterator
from contextlib import contextmanager, suppress
from pathlib import Path

from throughfault.errors import RecordError
from throughfault.workbook.documents import MANIFEST, SIGNATURES, SUMS

__all__ = ["recover_exchange", "replace_record", "staging_folder"]


@contextmanager
def staging_folder(out_dir: Path, name: str) -> Iterator[Path]:
    """Give an empty folder beside the later record `out_dir`/`name`, and remove whatever of it is left at the end.

    Folders that had to be made for `out_dir` and are empty at the end are removed too.

    Raises
    ------
    RecordError
        The folder cannot be made.
    """
    made = [folder for folder in (out_dir, *out_dir.parents) if not folder.exists()]
    staging = out_dir / f".{name}.staging-{secrets.token_hex(4)}"
    try:
        try:
            staging.mkdir(parents=True)
        except OSError as error:
            raise RecordError(f"records folder {out_dir}: cannot be written to: {error.strerror}") from error
        yield staging
    finally:
        shutil.rmtree(staging, ignore_errors=True)
        for folder in made:
            with suppress(OSError):  # not empty, or never made
                folder.rmdir()


def replace_record(staging: Path, target: Path) -> None:
    """Publish a finished staging folder as `target`; an unsigned record that stands there makes way.

    Parameters
    ----------
    staging
        A whole record folder, in the same folder as the target.
    target
        Where the record shall stand.

    Raises
    ------
    RecordError
        The staging folder is no whole record, or the target is signed or is no record.
    OSError
        A folder cannot be renamed. In both cases the target is as it was.
    """
    if not all((staging / name).is_file() for name in (MANIFEST, SUMS)):
        raise RecordError(f"record {target.name}: the new folder is not finished; it has no {MANIFEST} and {SUMS}")
    recover_exchange(target)
    _refuse_to_replace(target, target.name)
    aside = _aside(target)
    try:
        if target.exists():
            target.replace(aside)
            _refuse_to_replace(aside, target.name)  # somebody may have signed since
        staging.replace(target)
    except BaseException:
        if aside.exists() and not target.exists():
            aside.replace(target)
        raise
    _discard(aside)


def recover_exchange(target: Path) -> None:
    """Finish what an interrupted `replace_record` left: put the old record back, or remove it after the new one."""
    aside = _aside(target)
    shutil.rmtree(_trash(aside), ignore_errors=True)
    if not aside.is_dir() or aside.is_symlink():
        return
    if not target.exists():
        aside.replace(target)
    elif _is_signed(aside):
        raise RecordError(f"record {target.name}: {aside.name} beside it is signed and must be moved by hand")
    else:
        _discard(aside)


def _aside(target: Path) -> Path:
    return target.with_name(f".{target.name}.replaced")


def _trash(aside: Path) -> Path:
    return aside.with_suffix(".discarded")


def _discard(aside: Path) -> None:
    """Remove an old record under a name that is never put back, so that half of it never returns."""
    with suppress(OSError):
        aside.replace(_trash(aside))
    shutil.rmtree(_trash(aside), ignore_errors=True)


def _refuse_to_replace(folder: Path, name: str) -> None:
    if not folder.exists() and not folder.is_symlink():
        return
    if folder.is_symlink() or not (folder / MANIFEST).is_file():
        raise RecordError(f"record {name}: what stands there is no record folder, and is left alone")
    if _is_signed(folder):
        raise RecordError(f"record {name}: is signed, and a signed record is never replaced; give a new revision")


def _is_signed(folder: Path) -> bool:
    signatures = folder / SIGNATURES
    return os.path.lexists(signatures) and (not signatures.is_dir() or any(signatures.iterdir()))
