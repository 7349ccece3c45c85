"""The kinds of element, each a class in a file of its own that registers itself."""

from importlib import import_module
from pkgutil import iter_modules

from equiv.elements.element import KINDS, Element

for _module in iter_modules(__path__):
    import_module(f"{__name__}.{_module.name}")

__all__ = ["KINDS", "Element"]
