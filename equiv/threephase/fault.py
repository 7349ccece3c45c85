"""Three-phase faults: currents, and what each source gives to them."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, ClassVar, Literal

from equiv.analyses.result import Result
from equiv.analyses.tables import Table
from equiv.errors import Diagnostic, UsageError, nearest
from equiv.network import Network, Progress, no_progress
from equiv.threephase.asked import Ohms, impedance_of, require_place
from equiv.threephase.cases import TYPES, FaultCase
from equiv.threephase.fault_cautions import cautions_of
from equiv.threephase.loading import require_system
from equiv.threephase.model import OneLine, View
from equiv.threephase.relays import places
from equiv.threephase.sequence.faulted import Fault
from equiv.threephase.showing.survey_tables import Survey
from equiv.threephase.work import Asked, Work

BASES = ("superposition", "equivalent-source")
CASES = ("max", "min")


@dataclass(frozen=True)
class FaultResult(Result):
    """Faults at one or more buses. `network` is the one-line diagram that they are in.

    `cases` are the faults, bus by bus and type by type (made as they are asked for where there
    are many); `surveys`, where no bus was named, one a type over all buses.
    """

    command: ClassVar[str] = "fault"

    network: OneLine  # type: ignore[assignment]
    cases: Sequence[FaultCase] = ()
    surveys: Sequence[Survey] = ()
    basis: str = "superposition"
    case: str = "max"
    types: tuple[str, ...] = ()
    fault_impedance: complex = 0j
    ground_impedance: complex = 0j
    by: str = "source"

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """Each fault in full where buses were named; else a table a type over all buses."""
        from equiv.threephase.showing.report import fault_tables

        return fault_tables(self, digits)

    def records(self, digits: int = 5) -> tuple[Table, ...]:
        """A row a term, a row a fault, and so on."""
        from equiv.threephase.showing.report import fault_records

        return fault_records(self)

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object."""
        from equiv.threephase.showing.report import result_data

        return result_data(self)


def fault(
    system: OneLine | Network,
    *buses: str,
    type: str = "all",
    fault_impedance: Ohms = 0,
    ground_impedance: Ohms = 0,
    basis: Literal["superposition", "equivalent-source"] = "superposition",
    case: Literal["max", "min"] = "max",
    branches: Sequence[str] = (),
    by: Literal["source", "group"] = "source",
    progress: Progress = no_progress,
) -> FaultResult:
    """The currents of faults at some buses (every bus if none is named), term by term.

    I1 = E/(Z1 + …), E = Σ h_k·E_k before the fault; each EMF's term is its part of E through the
    same networks. With basis `equivalent-source` one source c·Un/√3 at the fault drives, every
    EMF is zero, and contributions are partial currents (IEC 60909-0).

    Arguments: `type` one of three-phase, line-ground, line-line, line-line-ground, all;
    `fault_impedance` (ohm) in each phase, between phase a and earth, between phases b and c, or
    in each of two phase legs; `ground_impedance` (ohm) from the common point to earth, in
    series for line-ground, no place in the others; `case` `max` or `min`; `branches` where
    relays are (`NAME`, at the first bus of it, or `NAME@BUS`); `by` "group" makes groups terms.
    Errors: UsageError (relays with more than 100 buses too); DoesNotExistError where zero-sequence
    data are missing; NoUniqueSolutionError where nothing limits a current.
    Sign convention: out of the bus into the fault; into a relay's branch from its bus; out of a
    source into its bus. Angles count from the no-load voltage of phase a of the faulted bus.
    Source: C. L. Fortescue (1918); IEC 60909-0:2016 (from memory).
    """
    diagram = require_system(system)
    view = View(_one_of("basis", basis, BASES), _one_of("case", case, CASES))
    kinds = TYPES if _one_of("type", type, (*TYPES, "all")) == "all" else (type,)
    in_fault = impedance_of(fault_impedance, "fault impedance")
    to_earth = impedance_of(ground_impedance, "ground impedance")
    require_place(kinds, to_earth)
    asked = Asked(
        diagram, view, _known(diagram, buses), [Fault(k, in_fault, to_earth) for k in kinds],
        places(diagram, tuple(branches)), _one_of("by", by, ("source", "group")), progress,
    )  # fmt: skip
    return _result(asked, bool(buses), explicit=type != "all")


def _result(asked: Asked, named: bool, explicit: bool) -> FaultResult:
    """What is asked for, found; `named` and `explicit` where buses and a type were named."""
    work = Work(asked)
    lacking = work.leave_out(named, explicit)
    found = work.few(survey=not named) if work.full else work.many()
    one = asked.faults[0]
    cautions = cautions_of(asked.system, asked.view, asked.faults, len(found.cases), found.checked)
    return FaultResult(
        asked.system,
        checks=found.checks,
        cautions=(*lacking, *cautions),
        cases=found.cases,
        surveys=found.surveys,
        basis=asked.view.basis,
        case=asked.view.case,
        types=tuple(each.type for each in asked.faults),
        fault_impedance=one.impedance,
        ground_impedance=one.ground,
        by=asked.by,
    )


def _one_of(name: str, value: str, known: tuple[str, ...]) -> str:
    if value not in known:
        message = f"{name} is {value}; it is one of {', '.join(known)}"
        raise UsageError(Diagnostic("unknown-choice", message, hint=nearest(value, known)))
    return value


def _known(system: OneLine, buses: Sequence[str]) -> tuple[str, ...]:
    """The buses that were asked for; all of them where none was."""
    for bus in buses:
        if bus not in system.buses:
            message = f"there is no bus called {bus}"
            raise UsageError(Diagnostic("unknown-bus", message, hint=nearest(bus, system.buses)))
    return tuple(dict.fromkeys(buses)) or tuple(system.buses)
