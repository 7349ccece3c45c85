"""The kinds of item in a three-phase system, each a class in a file of its own."""

from importlib import import_module
from pkgutil import iter_modules

from equiv.threephase.declaring import KINDS, Field, Kind

for _module in iter_modules(__path__):
    import_module(f"{__name__}.{_module.name}")

__all__ = ["KINDS", "Field", "Kind"]
