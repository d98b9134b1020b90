"""Run a record's inputs again with the installed kit and compare number by number."""

from __future__ import annotations

import json
import math
import re
import tempfile
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from throughfault import __version__
from throughfault.errors import RecordError
from throughfault.workbook.assess.rules import rules_for
from throughfault.workbook.inputs import read_unit
from throughfault.workbook.resources import changes_file
from throughfault.workbook.results import read_results
from throughfault.workbook.run import UNIT_FILE, fill_record
from throughfault.workbook.template import Template, find_template, read_template, shipped_templates

__all__ = ["Comparison", "compare_results", "reproduce"]

CLOSED_FORM = 1e-9
SOLVED = 1e-6
SOLVED_PREFIXES = ("field.", "force.", "strength.", "dynamic.", "spread.", "headroom.")
#: below this a difference of two computed numbers is rounding, in the unit named
FLOOR = {
    "%": 1e-9, "kA": 1e-9, "degC": 1e-7, "A/mm^2": 1e-9, "s": 1e-9, "kN": 1e-6, "MPa": 1e-6, "T": 1e-9, "deg": 1e-6,
}  # fmt: skip
ZERO = 1e-12
LARGEST = 1e300
#: a phasor of (nearly) no length has no angle worth comparing, kA
NO_LENGTH = 1e-9


@dataclass(frozen=True)
class Comparison:
    """What a second run found.

    Attributes
    ----------
    differences
        One line each, naming the id and both values.
    notes
        What differs around the numbers: kit version, template, changes between the versions.
    compared
        How many numbers and words were compared.
    """

    differences: tuple[str, ...]
    notes: tuple[str, ...]
    compared: int

    @property
    def exit_code(self) -> int:
        """0 when nothing differs, else 1."""
        return 1 if self.differences else 0


def _leaves(value: Any, path: str = "") -> Iterator[tuple[str, Any, str]]:
    """Yield path, value and unit of every leaf; lists of entries are keyed by their ids."""
    if isinstance(value, Mapping):
        unit = value.get("unit") if isinstance(value.get("unit"), str) else ""
        for key, item in value.items():
            for where, leaf, inner in _leaves(item, f"{path}/{key}" if path else str(key)):
                yield where, leaf, inner or str(unit)
    elif isinstance(value, list):
        for position, item in enumerate(value):
            name = item["id"] if isinstance(item, Mapping) and "id" in item else position
            yield from _leaves(item, f"{path}/{name}")
    else:
        yield path, value, ""


def _shared(results: Mapping[str, Any]) -> dict[str, tuple[Any, str]]:
    """Return what two runs must agree on: everything but who ran it with what."""
    apart = ("kit", "template", "inputs_sha256", "format")
    body = {key: value for key, value in results.items() if key not in apart}
    return {path: (leaf, unit) for path, leaf, unit in _leaves(body)}


def _agree(path: str, old: Any, new: Any, unit: str) -> bool:
    numbers = all(isinstance(v, int | float) and not isinstance(v, bool) for v in (old, new))
    if not numbers:
        return bool(old == new)
    solved = path.removeprefix("quantities/").startswith(SOLVED_PREFIXES)
    unit = _case_unit(path) or unit
    if any(abs(v) > LARGEST for v in (old, new)):  # a whole number may be beyond what can be compared
        return bool(old == new)
    return math.isclose(old, new, rel_tol=SOLVED if solved else CLOSED_FORM, abs_tol=FLOOR.get(unit, ZERO))


def _case_unit(path: str) -> str:
    """Return the unit of a phasor's parts, which the cases carry without naming it."""
    if not path.startswith("cases/"):
        return ""
    return "deg" if path.endswith("/angle") else "kA"


def _angle_of_nothing(path: str, old: Mapping[str, tuple[Any, str]]) -> bool:
    if not path.endswith("/angle"):
        return False
    length = old.get(path.removesuffix("angle") + "rms", (None, ""))[0]
    return isinstance(length, int | float) and abs(length) < NO_LENGTH


def compare_results(old: Mapping[str, Any], new: Mapping[str, Any]) -> tuple[list[str], int]:
    """Return the differences of two results documents and how many leaves were compared."""
    before, after = _shared(old), _shared(new)
    differences = [f"{path}: only in the record" for path in before if path not in after]
    differences += [f"{path}: only in this run" for path in after if path not in before]
    for path in before.keys() & after.keys():
        (was, unit), (now, _) = before[path], after[path]
        if not _agree(path, was, now, unit) and not _angle_of_nothing(path, before):
            differences.append(f"{path}: record {was!r}, this run {now!r}{' ' + unit if unit else ''}")
    return sorted(differences), len(before.keys() | after.keys())


def _changes_since(version: str) -> list[str]:
    """Return the headings and *Results changed* entries of every version after the one named."""
    text = changes_file().read_text(encoding="utf-8") if changes_file().is_file() else ""
    found = []
    for section in re.split(r"(?m)^## ", text)[1:]:
        name = section.split()[0]
        if name == version:
            break
        changed = re.search(r"(?ms)^### Results changed\s+(.*?)(?=^### |\Z)", section)
        found.append(f"{name}: results changed: {' '.join(changed[1].split()) if changed else 'not stated'}")
    return found


def _template_of(results: Mapping[str, Any], given: Path | None) -> tuple[Template, list[str]]:
    recorded = results["template"]
    name = recorded["name"]
    if given is None and name not in shipped_templates():
        raise RecordError(f"--template: the record was made with '{name}', which the kit does not ship; give its path.")
    template = read_template(given or find_template(name))
    if template.sha256 == recorded["sha256"]:
        return template, []
    if given is not None:
        raise RecordError(f"--template: must have the recorded SHA-256 {recorded['sha256']}, got {template.sha256}.")
    return template, [f"template '{name}' differs from the one of the record (SHA-256 {recorded['sha256'][:16]}...)"]


def reproduce(record: Path, template: Path | None = None, *, progress: bool = False) -> Comparison:
    """Run the inputs of a record again in a folder of its own and compare.

    Raises
    ------
    RecordError
        If the record cannot be read, the template needed is not at hand, or there is no room for a second run.
    UnitFileError
        If its unit file is at fault.
    InputError
        If it names a standard that the kit does not carry.
    RunError
        If the workbook cannot be executed.
    """
    old = read_results(record)
    unit_file = record / "inputs" / UNIT_FILE
    rules_for(read_unit(unit_file), str(unit_file))
    chosen, notes = _template_of(old, template)
    was = old["kit"]["version"]
    if was != __version__:
        notes.append(f"kit: the record was made with {was}, this is {__version__}")
        notes += _changes_since(was)
    inputs = {p.relative_to(record / "inputs").as_posix(): p.read_bytes() for p in _files(record / "inputs")}
    new = _run_again(inputs, chosen, progress=progress)
    differences, compared = compare_results(old, json.loads(json.dumps(new)))
    if old["inputs_sha256"] != new["inputs_sha256"]:
        differences.insert(0, "inputs_sha256: the inputs are not those of the results")
    return Comparison(tuple(differences), tuple(notes), compared)


def _run_again(inputs: Mapping[str, bytes], template: Template, *, progress: bool) -> dict[str, Any]:
    try:
        with tempfile.TemporaryDirectory(prefix="throughfault-") as folder:
            return fill_record(Path(folder), inputs, template, progress=progress)
    except OSError as fault:
        where = tempfile.gettempdir()
        raise RecordError(f"{where}: the second run could not be written there ({fault.strerror}).") from fault


def _files(folder: Path) -> list[Path]:
    return sorted(path for path in folder.rglob("*") if path.is_file() and not path.is_symlink())
