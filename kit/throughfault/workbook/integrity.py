"""Whether the files of a record folder are those of its manifest. Bytes are read and hashed; nothing is run."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from pathlib import Path

import rfc8785

from throughfault.workbook.documents import (
    MANIFEST,
    MANIFEST_LIMIT,
    REQUIRED,
    RESULTS,
    RESULTS_LIMIT,
    SIGNATURES,
    SUMS,
    Manifest,
    ResultsFace,
)
from throughfault.workbook.manifest import hash_of_inputs, parse_sums, path_faults, sums_text
from throughfault.workbook.statement import TEMPORARY, parse_name
from throughfault.workbook.strict_json import parse_strict, read_bounded, read_model
from throughfault.workbook.tree import Faults, Tree, scan

__all__ = ["Integrity", "PageLint", "check_integrity"]

PageLint = Callable[[str], Iterable[str]]
SUMS_LIMIT = 1 << 20


@dataclass(frozen=True)
class Integrity:
    """What was found in a record folder; `manifest` and `results` are None when they cannot be read."""

    tree: Tree
    faults: Faults
    manifest: Manifest | None
    results: ResultsFace | None

    @property
    def manifest_sha256(self) -> str:
        """SHA-256 of the manifest, empty when there is none."""
        return self.tree.hashes.get(MANIFEST, "")


def check_integrity(record: Path, page_lint: PageLint | None = None) -> Integrity:
    """Compare a record folder with its manifest, its SHA256SUMS and its results; note every fault."""
    faults = Faults()
    tree = scan(record, faults)
    manifest = _read_manifest(tree, faults)
    _refuse_foreign(tree, manifest, faults)
    if manifest is not None:
        _compare_files(tree, manifest, faults)
    _compare_sums(tree, manifest, faults)
    results = _read_results(tree, faults)
    if manifest is not None and results is not None:
        _compare_results(tree, manifest, results, faults)
    if page_lint is not None:
        _lint_page(tree, page_lint, faults)
    return Integrity(tree, faults, manifest, results)


def _read_manifest(tree: Tree, faults: Faults) -> Manifest | None:
    if MANIFEST not in tree.hashes:
        faults.add(MANIFEST, "is missing")
        return None
    try:
        data = read_bounded(tree.path(MANIFEST), MANIFEST_LIMIT)
        manifest = read_model(Manifest, data)
        if rfc8785.dumps(parse_strict(data)) != data:  # type: ignore[arg-type]  # any JSON value
            faults.add(MANIFEST, "is not in canonical form (RFC 8785)")
    except ValueError as error:
        faults.add(MANIFEST, str(error))
        return None
    for name, sentence in path_faults(entry.path for entry in manifest.files):
        faults.add(MANIFEST, f"path {name!r} {sentence}")
    return manifest


def _refuse_foreign(tree: Tree, manifest: Manifest | None, faults: Faults) -> None:
    listed = {MANIFEST, SUMS} | ({entry.path for entry in manifest.files} if manifest else set())
    for name in sorted(tree.hashes):
        if Path(name).name.startswith(TEMPORARY):
            faults.add(name, "is left from an interrupted signing; the next 'sign' clears it away")
        elif name.startswith(SIGNATURES):
            if parse_name(name) is None:
                faults.add(name, "is a foreign file; signatures/ holds NN-role.json and NN-role.sig only")
        elif manifest is not None and name not in listed:
            faults.add(name, "is a foreign file; the manifest does not list it")


def _compare_files(tree: Tree, manifest: Manifest, faults: Faults) -> None:
    for entry in manifest.files:
        if faults.names(entry.path):
            continue
        if entry.path not in tree.hashes:
            faults.add(entry.path, "is missing")
        elif tree.hashes[entry.path] != entry.sha256:
            faults.add(entry.path, "is changed: its SHA-256 is not that of the manifest")
        elif tree.sizes[entry.path] != entry.size:
            faults.add(entry.path, "is changed: its size is not that of the manifest")
    listed = {entry.path for entry in manifest.files}
    for name in REQUIRED:
        if name not in listed:
            faults.add(MANIFEST, f"does not list {name}")


def _compare_sums(tree: Tree, manifest: Manifest | None, faults: Faults) -> None:
    if SUMS not in tree.hashes:
        faults.add(SUMS, "is missing")
        return
    try:
        text = read_bounded(tree.path(SUMS), SUMS_LIMIT).decode("utf-8")
        sums = parse_sums(text)
    except ValueError as error:
        faults.add(SUMS, str(error))
        return
    vouched = {entry.path for entry in manifest.files} if manifest else set()
    for name in sorted((set(sums) | set(tree.hashes)) - {SUMS}):
        if faults.names(name) or sums.get(name) == tree.hashes.get(name):
            continue
        if name not in tree.hashes:
            faults.add(name, f"is missing, but {SUMS} lists it")
        elif name not in sums:
            faults.add(name, f"is not listed in {SUMS}")
        elif name in vouched:
            faults.add(SUMS, f"gives another SHA-256 for {name} than the manifest")
        else:
            faults.add(name, f"has another SHA-256 than {SUMS} gives; one of the two is changed")
    if not faults.found and text != sums_text(tree.hashes):
        faults.add(SUMS, "is not written as the kit writes it: one line a file, sorted by path")


def _read_results(tree: Tree, faults: Faults) -> ResultsFace | None:
    if RESULTS not in tree.hashes:
        return None
    try:
        return read_model(ResultsFace, read_bounded(tree.path(RESULTS), RESULTS_LIMIT))
    except ValueError as error:
        faults.add(RESULTS, str(error))
        return None


def _compare_results(tree: Tree, manifest: Manifest, results: ResultsFace, faults: Faults) -> None:
    found = hash_of_inputs(tree.hashes)
    for name, value in ((MANIFEST, manifest.inputs_sha256), (RESULTS, results.inputs_sha256)):
        if value != found:
            faults.add(name, "inputs_sha256 is not that of the files in inputs/")
    if results.kit != manifest.kit:
        faults.add(MANIFEST, f"names another version of the kit than {RESULTS}")
    if results.template != manifest.template:
        faults.add(MANIFEST, f"names another template than {RESULTS}")


def _lint_page(tree: Tree, page_lint: PageLint, faults: Faults) -> None:
    if "record.html" not in tree.hashes:
        return
    try:
        text = tree.path("record.html").read_text(encoding="utf-8")
    except UnicodeDecodeError:
        faults.add("record.html", "is not UTF-8")
        return
    for sentence in page_lint(text):
        faults.add("record.html", sentence)
