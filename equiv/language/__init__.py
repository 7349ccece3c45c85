"""The network language: text into networks, and networks into text."""

from equiv.language.arguments import frequency, value
from equiv.language.builder import Builder
from equiv.language.keywords import STATEMENTS
from equiv.language.loading import load, parse
from equiv.language.loads import load_curve
from equiv.language.options import OPTIONS
from equiv.language.quantities import quantity
from equiv.language.writer import write

__all__ = [
    "OPTIONS",
    "STATEMENTS",
    "Builder",
    "frequency",
    "load",
    "load_curve",
    "parse",
    "quantity",
    "value",
    "write",
]
