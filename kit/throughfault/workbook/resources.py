"""Where templates and the change log lie: in the installed package, or in the checkout it runs from."""

from __future__ import annotations

from pathlib import Path

__all__ = ["changes_file", "templates_folder"]

_PACKAGE = Path(__file__).resolve().parents[1]
_CHECKOUT = _PACKAGE.parents[1]


def _first(*candidates: Path) -> Path:
    return next((path for path in candidates if path.exists()), candidates[-1])


def templates_folder() -> Path:
    """Return the folder of the templates shipped with the kit."""
    return _first(_PACKAGE / "templates", _CHECKOUT / "templates")


def changes_file() -> Path:
    """Return the kit's change log."""
    return _first(_PACKAGE / "CHANGES.md", _CHECKOUT / "kit" / "CHANGES.md")
