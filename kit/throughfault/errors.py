"""Every error the kit raises on purpose.

::

    KitError                     a fault the kit can name; exit code 70 unless a class says otherwise
    ├── DeclarationError         a cell, symbol or table is declared wrongly (found at import)
    ├── OutsideValidity          a formula was asked outside the range in which it holds
    ├── InputError               the user's input is at fault; holds all faults found; exit code 2
    │   ├── QuantityError        a text is not "number unit", or its unit does not fit
    │   ├── UnitFileError        the unit file
    │   ├── TemplateError        the notebook template
    │   └── RecordError          a record folder, or a request it refuses
    ├── NetworkError             the fault network cannot be solved as described
    └── RunError                 the workbook could not be executed; nothing was written
"""

from __future__ import annotations

from collections.abc import Iterable
from difflib import get_close_matches

__all__ = [
    "DeclarationError",
    "InputError",
    "KitError",
    "NetworkError",
    "OutsideValidity",
    "QuantityError",
    "RecordError",
    "RunError",
    "TemplateError",
    "UnitFileError",
    "did_you_mean",
]

EXIT_KIT_FAULT = 70
EXIT_BAD_INPUT = 2


class KitError(Exception):
    """Base of all errors of the kit."""

    exit_code = EXIT_KIT_FAULT


class DeclarationError(KitError):
    """A cell, symbol, range or table is declared wrongly."""


class OutsideValidity(KitError):  # noqa: N818 - the name states the situation, not a failure
    """A formula was asked outside the range in which its source holds."""


class InputError(KitError):
    """The user's input is at fault.

    Parameters
    ----------
    faults
        One sentence for each fault; all that were found.
    """

    exit_code = EXIT_BAD_INPUT

    def __init__(self, faults: str | Iterable[str]) -> None:
        self.faults: tuple[str, ...] = (faults,) if isinstance(faults, str) else tuple(faults)
        super().__init__("\n".join(self.faults))


class QuantityError(InputError):
    """A text is not a quantity of the wanted kind."""


class UnitFileError(InputError):
    """The unit file is not usable."""


class TemplateError(InputError):
    """The notebook template is not usable."""


class RecordError(InputError):
    """A record folder is not usable, or refuses what was asked of it."""


class NetworkError(KitError):
    """The fault network cannot be solved as described."""


class RunError(KitError):
    """The workbook could not be executed; nothing was written."""


def did_you_mean(name: str, known: Iterable[str]) -> str:
    """Return `` (did you mean 'x'?)`` for the nearest known name, or an empty string."""
    folded = {candidate.casefold(): candidate for candidate in known}
    near = get_close_matches(name.casefold(), list(folded), n=1)
    return f" (did you mean '{folded[near[0]]}'?)" if near else ""
