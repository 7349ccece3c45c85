"""Values that are given to a function in the words of the language, rather than in a file."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from decimal import localcontext

from equiv.elements.element import Frequency
from equiv.errors import UsageError
from equiv.language.amounts import Written, read_amount
from equiv.language.assembly import Override
from equiv.language.fields import LaterFrequency, LaterValue, read_frequency, read_number
from equiv.language.mistakes import Mistake
from equiv.language.numerals import EXACT
from equiv.language.reports import Argument, Reports
from equiv.language.scope import Scope
from equiv.language.words import Words
from equiv.units import Value


def value(text: str, unit: str, may_be_complex: bool = True) -> Value:
    """The value that a text such as `4.7 kohm` stands for, in an SI unit; `UsageError` if none."""
    argument = Argument("value", 1, text)
    try:
        with localcontext(EXACT):
            words = Words(argument)
            found = read_number(words, unit, may_be_complex, f"a value in {unit or 'no unit'}")
            words.end()
            return found.evaluate(Scope()) if isinstance(found, LaterValue) else found
    except Mistake as mistake:
        reports = Reports()
        reports.add(mistake, argument)
        raise UsageError(reports.diagnostics()) from None


def frequency(text: str) -> Frequency:
    """The frequency that a text such as `1.5 MHz` or `300 rad/s` stands for; `UsageError` if none."""
    argument = Argument("frequency", 1, text)
    try:
        with localcontext(EXACT):
            words = Words(argument)
            found = read_frequency(words)
            words.end()
            return found.evaluate(Scope()) if isinstance(found, LaterFrequency) else found
    except Mistake as mistake:
        reports = Reports()
        reports.add(mistake, argument)
        raise UsageError(reports.diagnostics()) from None


def arguments(
    given: Mapping[str, str],
    frequency: str | None,
    read: Callable[[Words], Written] = read_amount,
) -> tuple[dict[str, tuple[Written, Argument]], Override | None]:
    """What was given to the function, values by `read`; `UsageError` if it cannot be read."""
    reports = Reports()
    values: dict[str, tuple[Written, Argument]] = {}
    for name, text in given.items():
        argument = Argument("given", 1, f"{name}={text}")
        try:
            words = Words(argument)
            words.name("a parameter's name")
            words.take("=")
            values[name] = read(words), argument
            words.end()
        except Mistake as mistake:
            reports.add(mistake, argument)
    override: Override | None = None
    if frequency is not None:
        argument = Argument("frequency", 1, str(frequency))
        try:
            words = Words(argument)
            override = read_frequency(words), argument
            words.end()
        except Mistake as mistake:
            reports.add(mistake, argument)
    if reports:
        raise UsageError(reports.diagnostics())
    return values, override
