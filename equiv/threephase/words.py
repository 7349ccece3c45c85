"""What a fault is, in words: type, place, impedances, basis, and what its numbers mean."""

from __future__ import annotations

from equiv.threephase.cases import FaultCase, Phases
from equiv.threephase.model import OneLine, Shunt, View
from equiv.units import say

TYPE_WORDS = {
    "three-phase": ("Three-phase fault", ""),
    "line-ground": ("Line-to-earth fault", ", phase a to earth"),
    "line-line": ("Line-to-line fault", ", phase b to phase c"),
    "line-line-ground": ("Line-to-line-to-earth fault", ", phases b and c to earth"),
}
"""What a type is called, and which phases it is between."""
FAULT_IMPEDANCE = {
    "three-phase": "in each phase",
    "line-ground": "between phase a and earth",
    "line-line": "between phases b and c",
    "line-line-ground": "in each of the two phase legs",
}
BASIS_WORDS = {
    "superposition": "superposition: each source's EMF behind its impedance is a term",
    "equivalent-source": "equivalent voltage source at the fault (IEC 60909-0): every EMF is zero",
}
CASE_WORDS = {
    "superposition": {
        "max": "with motors, at the voltage before the fault",
        "min": "without motors, at the voltage before the fault",
    },
    "equivalent-source": {
        "max": "largest currents",
        "min": "smallest currents, without motors",
    },
}
LOOP_WORDS = {
    "three-phase": "Va/Ia, phase a to earth over its current",
    "line-ground": "Va/Ia, phase a to earth over its current, without zero-sequence compensation",
    "line-line": "(Vb - Vc)/(Ib - Ic), the loop of phases b and c",
    "line-line-ground": "(Vb - Vc)/(Ib - Ic), the loop of phases b and c",
}

STAR_POINT_WORDS = "Star point: the zero-sequence current that a transformer's earthing lets flow."
STARS_AND_NETWORK_WORDS = (
    "Star points and network: what transformers' earthing, line charging and unequal ratios give."
)
NETWORK_WORDS = "Network: what line charging and unequal ratios give, all together."

NO_INFEED = "the relay sees no current"
NO_IMPEDANCE = "the current of its loop is zero"

ROUNDING = 1e-12
"""A sum of phases below this part of them is their rounding."""


def before_words(system: OneLine) -> tuple[str, ...]:
    """The voltage before the fault, where it is not the nominal one and some EMF follows from it."""
    if system.prefault == 1.0 or not any(
        isinstance(item, Shunt) and item.drives and item.emf(View()) is None
        for item in system.items.values()
    ):
        return ()
    return (f"Voltage before the fault: {system.prefault:g} of nominal where no EMF is given",)


def sentence(words: str) -> str:
    """Words as a sentence."""
    return f"{words[:1].upper()}{words[1:]}."


def level_words(volts: float) -> str:
    """A nominal voltage as it is spoken: `6.6 kV`, `400 V`."""
    return f"{volts / 1e3:g} kV" if volts >= 1e3 else f"{volts:g} V"


def impedance_words(type_: str, fault: complex, ground: complex, digits: int) -> str:
    """The impedances of the fault, and between what they are."""
    parts = []
    if fault:
        where = FAULT_IMPEDANCE[type_]
        parts.append(f"fault impedance {ohms(fault, digits)} {where}")
    if ground and type_ in GROUND_IMPEDANCE:
        parts.append(f"ground impedance {ohms(ground, digits)} {GROUND_IMPEDANCE[type_]}")
    words = "; ".join(parts)
    return words[:1].upper() + words[1:] if parts else "Bolted: no impedance in the fault"


GROUND_IMPEDANCE = {
    "line-ground": "in series, between phase a and earth",
    "line-line-ground": "from their common point to earth",
}


def ohms(value: complex, digits: int) -> str:
    """An impedance in parts: `0.10000 + j0.20000 Ω`."""
    if not value.imag:
        return say(value.real, "ohm", digits)
    sign = "-" if value.imag < 0 else "+"
    return f"{value.real:.{digits}g} {sign} j{abs(value.imag):.{digits}g} Ω"


def phase_of(phases: Phases, phase: str) -> complex:
    """The value in one phase."""
    return complex(getattr(phases, phase))


def residual(phases: Phases) -> complex:
    """The sum of the phases, 3·I0; nothing where it is only their rounding."""
    found = sum(phases)
    return found if abs(found) > ROUNDING * sum(map(abs, phases)) else 0j


def fault_words(case: FaultCase) -> str:
    """`Line-to-earth fault at MAIN (6.6 kV), phase a to earth`."""
    name, phases = TYPE_WORDS[case.type]
    return f"{name} at {case.bus} ({level_words(case.volts)}){phases}"


def basis_words(basis: str, case: str) -> str:
    """What is calculated: `Basis superposition, case max: …`."""
    return f"Basis: {BASIS_WORDS[basis]}; case {case}: {CASE_WORDS[basis][case]}"
