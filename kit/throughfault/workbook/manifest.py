"""The manifest of a record: what it holds, by size and SHA-256, and what it was made with.

`manifest.json` is canonical JSON (RFC 8785), so that the same content has one spelling and one hash. It lists
every file but itself, `SHA256SUMS` and `signatures/`; `SHA256SUMS` lists every file but itself, for ``sha256sum -c``.
"""

from __future__ import annotations

import platform
import re
from collections.abc import Iterable, Mapping
from datetime import UTC, datetime
from importlib.metadata import PackageNotFoundError, version
from pathlib import Path

import rfc8785

from throughfault.errors import RecordError
from throughfault.tables import table_digests
from throughfault.workbook.documents import (
    MANIFEST,
    REQUIRED,
    RESULTS,
    RESULTS_LIMIT,
    SIGNATURES,
    SUMS,
    ResultsFace,
)
from throughfault.workbook.strict_json import read_bounded, read_model
from throughfault.workbook.tree import Faults, Tree, collision_key, path_fault, scan, sha256_bytes, write_durably

__all__ = [
    "inputs_sha256",
    "parse_sums",
    "path_faults",
    "sums_text",
    "timestamp",
    "write_manifest",
]

DEPENDENCIES = (
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
)


def write_manifest(record: Path, *, tables: Mapping[str, str] | None = None, created: datetime | None = None) -> str:
    """Write `manifest.json` and `SHA256SUMS` of a finished, unsigned record folder.

    Parameters
    ----------
    record
        Holds record.html, workbook.ipynb, results.json and inputs/. Kit version and template are taken from
        results.json, so that the two files cannot disagree.
    tables
        SHA-256 of each table by file name; those of the installed kit by default.
    created
        With a time zone; now by default.

    Returns
    -------
    str
        SHA-256 of the manifest.

    Raises
    ------
    RecordError
        The folder is signed, incomplete, or holds what a record may not hold.
    """
    faults = Faults()
    tree = scan(record, faults)
    if any(name.startswith(SIGNATURES) for name in tree.hashes):
        raise RecordError(f"{record.name}: the record is signed; its manifest is never written again")
    listed = sorted(name for name in tree.hashes if name not in {MANIFEST, SUMS})
    results = _results_to_list(tree, listed, faults)
    if faults.found or results is None:
        raise RecordError(faults.lines)
    document = {
        "format": "throughfault-manifest/1",
        "created": timestamp(created),
        "files": [{"path": n, "size": tree.sizes[n], "sha256": tree.hashes[n]} for n in listed],
        "kit": {"name": "throughfault", "version": results.kit.version},
        **_environment(),
        "template": results.template.model_dump(),
        "tables": dict(table_digests() if tables is None else tables),
        "inputs_sha256": results.inputs_sha256,
    }
    data = rfc8785.dumps(document)  # type: ignore[arg-type]  # the alias for JSON values is not covariant
    tree.hashes[MANIFEST] = sha256_bytes(data)
    write_durably(record / MANIFEST, data)
    write_durably(record / SUMS, sums_text(tree.hashes).encode())
    return tree.hashes[MANIFEST]


def inputs_sha256(record: Path) -> str:
    """Return the SHA-256 of the sorted ``sha256  path`` lines of `record`/inputs.

    The same as ``find inputs -type f -exec sha256sum {} + | LC_ALL=C sort | sha256sum`` inside the record.

    Raises
    ------
    RecordError
        `inputs/` is missing or empty, or holds a link or a special file.
    """
    faults = Faults()
    if not (record / "inputs").is_dir():
        raise RecordError("inputs/: the record has no folder of inputs")
    below = Faults()
    hashes = {f"inputs/{name}": value for name, value in scan(record / "inputs", below).hashes.items()}
    for name, sentence in below.found:
        faults.add(f"inputs/{name}", sentence)
    if not hashes:
        faults.add("inputs/", "holds no file")
    if faults.found:
        raise RecordError(faults.lines)
    return hash_of_inputs(hashes)


def hash_of_inputs(hashes: Mapping[str, str]) -> str:
    """Return the joint hash of those of the files below inputs/, of all files of a record by path."""
    lines = sorted(f"{value}  {name}\n" for name, value in hashes.items() if name.startswith("inputs/"))
    return sha256_bytes("".join(lines).encode())


def timestamp(moment: datetime | None = None) -> str:
    """Return a moment (now by default) in UTC to the second; RecordError without a time zone."""
    moment = datetime.now(UTC) if moment is None else moment
    if moment.utcoffset() is None:
        raise RecordError(f"time: needs a time zone, got {moment.isoformat()}")
    return moment.astimezone(UTC).strftime("%Y-%m-%dT%H:%M:%SZ")


def sums_text(hashes: Mapping[str, str]) -> str:
    """Return the content of SHA256SUMS for the files of a record by path."""
    return "".join(f"{hashes[name]}  {name}\n" for name in sorted(hashes) if name != SUMS)


def parse_sums(text: str) -> dict[str, str]:
    """Return the hash of each path in the lines of a SHA256SUMS file; ValueError names a line it cannot read."""
    found: dict[str, str] = {}
    for number, line in enumerate(text.removesuffix("\n").split("\n"), 1):
        match = re.fullmatch(r"([0-9a-f]{64})  (.+)", line)
        if match is None or match[2] in found:
            raise ValueError(f"line {number} is not a new 'sha256  path'")
        found[match[2]] = match[1]
    return found


def path_faults(names: Iterable[str]) -> list[tuple[str, str]]:
    """Return each path that a record may not hold, with the reason."""
    found: list[tuple[str, str]] = []
    seen: dict[str, str] = {}
    for name in names:
        key = collision_key(name)
        if fault := path_fault(name):
            found.append((name, fault))
        elif key in seen:
            twin = seen[key]
            found.append((name, "stands twice" if twin == name else f"differs from {twin} in case alone"))
        elif key.startswith(SIGNATURES) or key in {collision_key(MANIFEST), collision_key(SUMS)}:
            found.append((name, "is reserved and may not stand in the manifest"))
        seen.setdefault(key, name)
    return found


def _results_to_list(tree: Tree, listed: list[str], faults: Faults) -> ResultsFace | None:
    for name, sentence in path_faults(listed):
        faults.add(name, sentence)
    for name in REQUIRED:
        if name not in tree.hashes:
            faults.add(name, "is missing from the record")
    if RESULTS not in tree.hashes:
        return None
    try:
        results = read_model(ResultsFace, read_bounded(tree.path(RESULTS), RESULTS_LIMIT))
    except ValueError as error:
        faults.add(RESULTS, str(error))
        return None
    if results.inputs_sha256 != hash_of_inputs(tree.hashes):
        faults.add(RESULTS, "inputs_sha256 is not that of the files in inputs/")
    return results


def _environment() -> dict[str, object]:
    return {
        "dependencies": {name: _version(name) for name in DEPENDENCIES},
        "python": platform.python_version(),
        "platform": {"system": platform.system(), "machine": platform.machine()},
    }


def _version(distribution: str) -> str:
    try:
        return version(distribution)
    except PackageNotFoundError:
        return "absent"
