"""What is asked of a fault in words: its impedances."""

from __future__ import annotations

import cmath
from collections.abc import Sequence

from equiv.errors import Diagnostic, UsageError
from equiv.language import value
from equiv.threephase.sequence.connection import EARTH_FAULTS
from equiv.units import Symbol, as_number

Ohms = str | complex
"""An impedance in ohms, or in the words of the language: `0.5 ohm`, `0.1+0.2j ohm`."""


def impedance_of(given: Ohms, what: str) -> complex:
    """An impedance of a fault (ohm); its resistance is not negative.

    Errors: UsageError for what is no impedance.
    """
    if not isinstance(given, str):
        number = complex(given)
    else:
        found = value(given, "ohm")
        if isinstance(found, Symbol):
            raise _refuse(what, "is not a number", given)
        number = complex(as_number(found))
    if not cmath.isfinite(number) or number.real < 0:
        raise _refuse(what, "must have a resistance of zero or more", given)
    return number


def require_place(types: Sequence[str], ground: complex) -> None:
    """Raise UsageError where an impedance to earth has no place in any type that is asked for."""
    if ground and not any(kind in EARTH_FAULTS for kind in types):
        message = f"a ground impedance has no place in a {types[0]} fault: it does not reach earth"
        hint = "leave it out, or ask for line-ground or line-line-ground"
        raise UsageError(Diagnostic("ground-impedance", message, hint=hint))


def _refuse(what: str, why: str, given: Ohms) -> UsageError:
    return UsageError(
        Diagnostic(
            "bad-impedance",
            f"the {what} {why}; found {given}",
            hint="for example: 0.5 ohm, or 0.1+0.2j ohm",
        )
    )
