"""What a unit file says against itself."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator

from throughfault.workbook.inputs.hole import HoleMetError
from throughfault.workbook.inputs.messages import Fault
from throughfault.workbook.inputs.model import UnitFile
from throughfault.workbook.inputs.refused_design import COIL_CHECKS, DESIGN_CHECKS
from throughfault.workbook.inputs.refused_network import EARTHING_CHECKS, NETWORK_CHECKS, TERMINAL_CHECKS
from throughfault.workbook.inputs.refused_rating import RATING_CHECKS, WINDING_CHECKS
from throughfault.workbook.inputs.refused_results import RESULT_CHECKS
from throughfault.workbook.inputs.refused_rows import ROW_CHECKS, TABLE_CHECKS

__all__ = ["contradictions"]

Check = Callable[..., Iterator[Fault]]
Checks = tuple[Check, ...]


def contradictions(file: UnitFile) -> list[Fault]:
    """Return every contradiction that can be seen; one that touches a refused value is left out."""
    made: list[Fault] = []
    _all((*RATING_CHECKS, *TABLE_CHECKS, *NETWORK_CHECKS, *RESULT_CHECKS), made, file)
    _each(WINDING_CHECKS, lambda: file.windings, made, file)
    _each(ROW_CHECKS, lambda: range(len(file.impedances)), made, file)
    _each(TERMINAL_CHECKS, lambda: file.system.terminals, made, file)
    _each(EARTHING_CHECKS, lambda: file.earthing, made, file)
    design = file.design
    if design is not None:
        _all(DESIGN_CHECKS, made, file, design)
        _each(COIL_CHECKS, lambda: range(len(design.coils)), made, file, design)
    return made


def _each(checks: Checks, subjects: Callable[[], Iterable[str | int]], made: list[Fault], *given: object) -> None:
    """Run checks on each winding, row, terminal or coil, so that a refused value spoils its own only."""
    try:
        found = list(subjects())
    except HoleMetError:
        return
    for subject in found:
        _all(checks, made, *given, subject)


def _all(checks: Checks, made: list[Fault], *arguments: object) -> None:
    for check in checks:
        _run(check, made, *arguments)


def _run(check: Check, made: list[Fault], *arguments: object) -> None:
    """Collect what a check yields until it meets a value that was refused."""
    try:
        made.extend(check(*arguments))
    except HoleMetError:
        return
