"""What the reader of a fault result must know."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from equiv.analyses.cautions import DUTY
from equiv.analyses.result import Caution
from equiv.threephase.model import OneLine, View
from equiv.threephase.sequence.connection import EARTH_FAULTS
from equiv.threephase.sequence.faulted import Fault
from equiv.threephase.sequence.sequences import there

CHECKED_UP_TO = 100
"""Buses up to which every fault is found again in phase coordinates."""


def cautions_of(
    system: OneLine, view: View, faults: Sequence[Fault], cases: int, checked: bool
) -> Iterator[Caution]:
    """What the reader must know before relying on the result."""
    yield Caution(DUTY.code, _DUTY)
    if cases:
        yield Caution("arc-flash", _ARC_FLASH)
    if view.basis == "equivalent-source":
        yield from _of_the_standard(system, view)
    else:
        yield Caution("partial-currents", _PARTIAL)
        if view.case == "min":
            yield Caution("as-entered", _AS_ENTERED)
    if any(fault.impedance for fault in faults):
        yield Caution("fault-impedance", _where(faults))
    if any(fault.ground and fault.type in EARTH_FAULTS for fault in faults):
        others = [fault.type for fault in faults if fault.type not in EARTH_FAULTS]
        nowhere = f"; it has no place in {' and '.join(others)}" if others else ""
        yield Caution("ground-impedance", f"{_GROUND}{nowhere}")
    if not checked and cases:
        why = (
            f"the system has {len(system.buses)} buses, and it is done up to {CHECKED_UP_TO}"
            if len(system.buses) > CHECKED_UP_TO
            else "an impedance of 0 ohm to earth leaves currents there undetermined"
        )
        message = f"the phase currents are not checked in phase coordinates: {why}"
        yield Caution("not-checked", message)


def _of_the_standard(system: OneLine, view: View) -> Iterator[Caution]:
    """Where what is done is not all that IEC 60909-0 does."""
    yield Caution("impedance-corrections", _CORRECTIONS)
    kinds = {item.kind for item in there(system, view)}
    if "generator" in kinds:
        units = _UNITS if "transformer" in kinds else ""
        yield Caution("generators", f"{_RESISTANCE}{units}")
    if view.case == "min" and "line" in kinds:
        yield Caution("warm-conductors", _WARM)
    if view.case == "min" and "infeed" in kinds:
        yield Caution("smallest-level", _LEVEL)


def _where(faults: Sequence[Fault]) -> str:
    places = "; ".join(f"{f.type}: {_PLACES[f.type]}" for f in faults if f.impedance)
    return f"books differ in where the fault impedance is; here it is, {places}"


_PLACES = {
    "three-phase": "in each phase",
    "line-ground": "between phase a and earth",
    "line-line": "between phases b and c",
    "line-line-ground": "in each of the two phase legs",
}
_GROUND = (
    "the ground impedance is between the common point of phases b and c and earth "
    "(line-line-ground), or in series with the fault impedance (line-ground)"
)
_DUTY = (
    "linear, balanced, steady-state phasors: arcs, saturation, converter current limits and "
    "decaying currents are not in them unless entered. Equipment duty, protection settings and "
    "labels are the work of a licensed engineer under the local code."
)
_AS_ENTERED = (
    "case min leaves out the motors alone: the voltage before the fault, resistances (of cold or "
    "warm conductors) and the levels of infeeds are as they are entered"
)
_ARC_FLASH = "the largest bolted current is not the worst case for arc flash"
_CORRECTIONS = (
    "transformers are corrected by K_T and generators by K_G (IEC 60909-0); neutral impedances, "
    "lines, infeeds and motors are not. Contributions are partial currents"
)
_RESISTANCE = "for the peak generators have the x/r that is entered, not a fictitious R_Gf"
_UNITS = (
    "; one with its unit transformer is corrected as two items (K_G and K_T), not as a "
    "power-station unit (K_S, K_SO)"
)
_WARM = (
    "resistances of lines are as they are entered: for the smallest currents enter those of the "
    "warm conductors"
)
_LEVEL = "an infeed has one level for both cases: for the smallest currents enter its smallest one"
_PARTIAL = (
    "a term is what a source's EMF drives through the fault, its partial current what it delivers "
    "from its terminals: they are the same only where no load, no line charging and no unequal "
    "EMFs intervene, and in unbalanced faults only in the positive sequence"
)
