"""The form and the reference resistances that are asked for."""

from __future__ import annotations

import math
from collections.abc import Sequence
from decimal import Decimal
from fractions import Fraction
from typing import cast

from equiv.analyses.ports.relation import FORMS, OF_TWO_PORTS
from equiv.errors import Diagnostic, UsageError
from equiv.language import value
from equiv.units import as_number

Ohms = str | int | float | Decimal | Fraction
"""A resistance in ohms, or in the words of the language."""


def checked_form(form: str | None, ports: int) -> None:
    """Complain of a form that there is not, or not for so many ports."""
    if form is not None and form not in FORMS:
        raise UsageError(
            Diagnostic(
                "unknown-form",
                f"there is no form called {form}",
                hint=f"the forms are {', '.join(FORMS)}",
            )
        )
    if form in OF_TWO_PORTS and ports != 2:
        raise UsageError(
            Diagnostic(
                "two-ports-only",
                f"{form} parameters are those of two ports; there {_are(ports)}",
                hint="z, y and s are for any number of ports",
            )
        )


def _are(ports: int) -> str:
    return "is one" if ports == 1 else f"are {ports}"


def references_of(
    reference: Ohms | Sequence[Ohms], ports: int, exact: bool = False
) -> tuple[float, ...]:
    """A real positive reference (ohm) for each port; exact numbers where they are wanted.

    Errors: UsageError for another value, for as many values as fit neither one nor each port, or
    for one whose square root, which an exact result needs, is irrational.
    """
    given = [reference] if isinstance(reference, Ohms) else list(reference)
    if len(given) not in (1, ports):
        raise UsageError(
            Diagnostic(
                "wrong-references",
                f"there are {len(given)} references for {ports} port{'s' if ports > 1 else ''}",
                hint="give one for all ports, or one for each",
            )
        )
    found = [_ohms(one) for one in given]
    if exact:
        found = [_with_root(one) for one in given]
    return tuple(found * ports if len(found) == 1 else found)


def _with_root(given: Ohms) -> float:
    """A reference as an exact number that has a rational square root."""
    from equiv.equations.exact.number import Exact

    read = value(given, "ohm") if isinstance(given, str) else given
    ohms = Exact.of(Decimal(repr(read)) if isinstance(read, float) else read)
    try:
        ohms.sqrt()
    except ValueError:
        message = (
            f"no exact result: the waves of s are over √R, and the root of {given} is irrational"
        )
        hint = "give a reference that is a square, as 49 ohm; or leave --exact out"
        raise UsageError(Diagnostic("irrational", message, hint=hint)) from None
    return cast(float, ohms)


def _ohms(given: Ohms) -> float:
    number = as_number(value(given, "ohm")) if isinstance(given, str) else float(given)
    if isinstance(number, complex) or not (math.isfinite(number) and number > 0):
        raise UsageError(
            Diagnostic(
                "bad-reference",
                f"expected a real positive resistance as the reference; found {given}",
                hint="for example: --reference 50ohm",
            )
        )
    return number
