"""Algorithms: cells whose result comes from a solver, declared with their governing equations."""

from __future__ import annotations

import inspect
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from throughfault.declare.registry import register
from throughfault.sources import Source

__all__ = ["Algorithm", "Equation", "algorithm"]


@dataclass(frozen=True, slots=True)
class Equation:
    """A governing equation of an algorithm, printed by hand and compared numerically.

    Attributes
    ----------
    latex
        As printed.
    residual
        Takes what the algorithm was given and what it gave; returns the relative residual.
    """

    latex: str
    residual: Callable[..., float]


@dataclass(frozen=True)
class Algorithm:
    """A cell whose result comes from a solver: shows its governing equations."""

    function: Callable[..., Any]
    title: str
    source: Source
    equations: tuple[Equation, ...]
    example: Callable[[], dict[str, Any]]
    valid_for: tuple[str, ...]
    checks: tuple[str, ...]

    @property
    def name(self) -> str:
        """Name of the cell."""
        return self.function.__name__

    @property
    def documentation(self) -> str:
        """What is assumed."""
        return inspect.getdoc(self.function) or ""

    def __call__(self, *args: Any, **kwargs: Any) -> Any:
        """Be the plain function."""
        return self.function(*args, **kwargs)


def algorithm(
    *,
    title: str,
    source: Source,
    equations: tuple[Equation, ...],
    example: Callable[[], dict[str, Any]],
    valid_for: tuple[str, ...],
    checks: tuple[str, ...],
) -> Callable[[Callable[..., Any]], Algorithm]:
    """Declare an algorithm cell: governing equations, an example to compare them with, its validity in words."""

    def declare(function: Callable[..., Any]) -> Algorithm:
        made = Algorithm(function, title, source, equations, example, valid_for, checks)
        register(made)
        return made

    return declare
