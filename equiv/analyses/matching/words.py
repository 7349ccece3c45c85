"""What is asked of a match, in words with units or in numbers, and whether it fits together."""

from __future__ import annotations

import cmath
import math
from typing import NamedTuple

from equiv.analyses.matching.ladder import Losses
from equiv.analyses.matching.preferred import Wanted
from equiv.analyses.preferred import SERIES, TOLERANCES, Series
from equiv.elements.element import Frequency
from equiv.errors import Diagnostic, DoesNotExistError, UsageError
from equiv.language import value
from equiv.units import Symbol, as_number, say

RULES = ("conjugate", "resistive", "angle", "reactance", "ratio")
NETWORKS = ("l", "pi", "t", "two-section", "quarter-wave")
_OF_LOADS = {"angle": "an angle", "reactance": "a reactance", "ratio": "a load"}


class Words(NamedTuple):
    """The numbers that a match may be given (ohm, rad)."""

    load: complex | None
    angle: float | None
    reactance: complex | None
    q: float | None

    def require(self, by: str, frequency: Frequency, losses: Losses, wanted: Wanted) -> None:
        """Complain of what is missing, or cannot be.

        Errors: UsageError; DoesNotExistError for a load that takes no power.
        """
        if by not in ("all", *RULES, *NETWORKS):
            raise refuse(f"{by} is no rule and no network", f"all, {', '.join(RULES + NETWORKS)}")
        given = {"angle": self.angle, "reactance": self.reactance, "ratio": self.load}
        if by in given and given[by] is None:
            raise refuse(f"the rule {by} needs {_OF_LOADS[by]}")
        if by in NETWORKS and self.load is None:
            raise refuse(f"the network {by} needs a load", "give one, as in 50 ohm")
        if by in ("pi", "t") and self.q is None:
            raise refuse(f"the network {by} needs a loaded Q")
        self._require_numbers(losses, wanted)
        if not frequency.omega:
            self._require_dc()
        if self.load is not None:
            _require_load(self.load)

    def _require_numbers(self, losses: Losses, wanted: Wanted) -> None:
        named = {"loaded Q": self.q, "Q of coils": losses.inductor_q,
                 "Q of capacitors": losses.capacitor_q}  # fmt: skip
        for name, number in named.items():
            if number is not None and not 0 < number < math.inf:
                raise refuse(f"the {name} must be over zero; found {number:g}")
        if not 0 < wanted.return_loss < math.inf:
            raise refuse(f"the return loss must be over 0 dB; found {wanted.return_loss:g}")
        if self.angle is not None and math.cos(self.angle) <= 1e-9:
            raise refuse(
                f"a load at {math.degrees(self.angle):.6g} degrees takes no power",
                "the angle must lie between -90 and 90 degrees",
            )

    def _require_dc(self) -> None:
        reactive = self.angle or (self.reactance or 0) or (self.load or 0j).imag
        if reactive:
            raise refuse("at DC a load has no reactance", "--frequency sets another frequency")


def _require_load(load: complex) -> None:
    if load.real > 1e-12 * abs(load):
        return
    words = (
        "no resistance" if load.real >= 0 else f"the negative resistance {say(load.real, 'ohm')}"
    )
    raise DoesNotExistError(
        Diagnostic(
            "no-match",
            f"no match: the load has {words}, and takes no power whatever stands before it",
            hint="a load needs a resistance over zero",
        )
    )


def wanted_of(
    series: Series | None,
    tolerance: float | str | None,
    return_loss: float,
    band: complex | None,
    frequency: Frequency,
) -> Wanted:
    """What a made network must do; UsageError for what cannot be."""
    if series is not None and series not in SERIES:
        raise refuse(f"{series} is no series of IEC 60063", f"series: {', '.join(SERIES)}")
    usual = TOLERANCES[series] if series else 0.0
    width = None if band is None else band.real
    if width is not None and not 0 < width < 2 * frequency.hertz:
        raise refuse(
            f"a band of {width:g} Hz does not fit evenly around {frequency.hertz:g} Hz",
            "it must be over zero, and less than twice the frequency",
        )
    off = usual if tolerance is None else fraction_of(tolerance)
    return Wanted(series, off, return_loss, width)


def number_of(given: complex | float | str | None, unit: str) -> complex | None:
    """A number in an SI unit, read with its unit where it is a text."""
    if given is None:
        return None
    if not isinstance(given, str):
        found = complex(given)
    else:
        read = value(given, unit, may_be_complex=unit == "ohm")
        if isinstance(read, Symbol):
            raise refuse("`?` has no number", f"give a value in {unit}")
        found = complex(as_number(read))
    if not cmath.isfinite(found):
        raise refuse("a value is not a finite number")
    return found


def angle_of(given: float | str | None) -> float | None:
    """An angle (rad), given in degrees, or as a text with `deg` or `rad`."""
    if given is None or not isinstance(given, str):
        return None if given is None else math.radians(given)
    return cmath.phase(as_number(value(f"1 @ {given}", "")))


def fraction_of(given: float | str) -> float:
    """A fraction, or a text such as `5%`."""
    if isinstance(given, str):
        if not given.strip().endswith("%"):
            raise refuse(f"expected a tolerance in percent; found {given}", "for example: 5%")
        number = as_number(value(given.strip()[:-1], "", may_be_complex=False))
        fraction = float(number.real) / 100
    else:
        fraction = given
    if not 0 <= fraction < 1:
        raise refuse(f"a tolerance lies between 0% and 100%; found {100 * fraction:g}%")
    return fraction


def refuse(message: str, hint: str | None = None) -> UsageError:
    """What cannot be used, in words."""
    return UsageError(Diagnostic("match", message, hint=hint))
