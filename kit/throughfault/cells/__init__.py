"""The library of calculation cells: one module a phenomenon; importing this package declares them all."""

from importlib import import_module
from pkgutil import iter_modules

for _module in sorted(module.name for module in iter_modules(__path__)):
    import_module(f"{__name__}.{_module}")
