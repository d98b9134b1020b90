"""The library: every cell and algorithm that was declared, by name."""

from __future__ import annotations

from typing import TYPE_CHECKING, Any

from throughfault.errors import DeclarationError

if TYPE_CHECKING:
    from throughfault.declare.algorithm import Algorithm
    from throughfault.declare.cell import Cell

__all__ = ["register", "registry"]

_registry: dict[str, Cell[Any] | Algorithm] = {}


def registry() -> dict[str, Cell[Any] | Algorithm]:
    """Return every declared cell by name (import ``throughfault.cells`` to fill it)."""
    return dict(sorted(_registry.items()))


def register(made: Cell[Any] | Algorithm) -> None:
    """Enter a cell in the library.

    Raises
    ------
    DeclarationError
        If another module declared the name, or documentation or checks are missing.
    """
    if made.name in _registry and _registry[made.name].function.__module__ != made.function.__module__:
        raise DeclarationError(f"{made.name}: declared twice.")
    if not made.documentation or not made.checks:
        raise DeclarationError(f"{made.name}: needs a docstring and the checks behind it.")
    _registry[made.name] = made
