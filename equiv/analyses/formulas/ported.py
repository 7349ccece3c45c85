"""Port equivalents as formulas."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from typing import Any, ClassVar

from equiv.analyses.cautions import about_network
from equiv.analyses.closing import closing_table
from equiv.analyses.formulas.legend import legend_of, symbols_data
from equiv.analyses.formulas.port_data import at_data, shared_data, used_parts
from equiv.analyses.formulas.port_numbers import PortNumbers, port_checks, port_numbers
from equiv.analyses.formulas.port_slopes import PortSlopes, port_slopes
from equiv.analyses.formulas.port_tables import port_tables
from equiv.analyses.formulas.ports import PortFormulas, port_formulas
from equiv.analyses.formulas.proof import of_failing
from equiv.analyses.formulas.told import Failing, InS, failing, in_s
from equiv.analyses.formulas.wanted import Wanted, symbol_of
from equiv.analyses.ports.cautions import TERMINALS_ALONE
from equiv.analyses.result import Check, Result
from equiv.analyses.tables import Table
from equiv.elements.element import Frequency
from equiv.equations.symbolic.bordered import Place
from equiv.equations.symbolic.infix import text_of
from equiv.errors import ExitStatus
from equiv.network import Network, Port

_FORMULAS = ("voltage", "impedance", "current", "admittance")


@dataclass(frozen=True)
class FormulaPort(Result):
    """The formulas of one port or several, with what proves them.

    Voltages of `plus` over `minus` (V), currents out of `plus` into the load (A).
    """

    command: ClassVar[str] = "port"

    formulas: PortFormulas | None = None
    numbers: tuple[PortNumbers, ...] = ()
    """At each frequency of the sources."""
    failing: tuple[Failing, ...] = ()
    response: InS | None = None
    slopes: PortSlopes | None = None
    symbols: tuple[tuple[str, str], ...] = ()
    legend: tuple[str, ...] = ()

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """Terms, equivalents, named parts, and what is told of them."""
        assert self.formulas is not None
        tables = port_tables(
            self.network, self.formulas, self.numbers, self.failing, self.response, digits
        )
        if self.slopes is not None:
            tables.append(self.slopes.table())
        return (
            *tables,
            closing_table(self.network, self.checks, self.cautions, *self.legend, TERMINALS_ALONE),
        )

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object: that of numbers, with a formula in each value."""
        assert self.formulas is not None
        found = [at_data(self.formulas, numbers) for numbers in self.numbers]
        data = {**found[0], "frequencies": found} if len(found) > 1 else found[0]
        data |= shared_data(self.formulas, self.failing, self.response)
        if self.slopes is not None:
            data["derivatives"] = self.slopes.data()
        data["where"] = [[name, text_of(part)] for name, part in used_parts(self.formulas)]
        data["symbols"] = dict(self.symbols)
        return data

    def to_sympy(self, what: str = "impedance", port: int = 0, other: int = 0) -> Any:
        """A formula as a sympy expression, its named parts put in.

        `what` is voltage, impedance, current or admittance; ports by their numbers, from 0.
        Errors: ValueError for another word, and where that equivalent does not exist.
        """
        from equiv.equations.symbolic.sympy_form import with_parts

        assert self.formulas is not None
        if what not in _FORMULAS:
            raise ValueError(f"{what!r} is none of {', '.join(_FORMULAS)}")
        thevenin = what in ("voltage", "impedance")
        side = self.formulas.thevenin if thevenin else self.formulas.norton
        if side is None:
            raise ValueError(self.formulas.no_thevenin if thevenin else self.formulas.no_norton)
        matrix = what in ("impedance", "admittance")
        entry = side.matrix[port][other] if matrix else side.total(port)
        return with_parts(entry.whole, self.formulas.where)


def ported(
    network: Network, ports: tuple[Port, ...], frequencies: Sequence[Frequency], wanted: Wanted
) -> FormulaPort:
    """The formulas of some ports (see `equiv.port`)."""
    solver = wanted.solver(network)
    formulas = port_formulas(network, solver, ports)
    numbers = tuple(port_numbers(network, formulas, f) for f in frequencies)
    checks = [_proved(what, wrong) for what, wrong in formulas.wrong]
    checks += [check for at in numbers for check in port_checks(formulas, at)]
    neither = formulas.thevenin is None and formulas.norton is None
    cautions = [*about_network(network), *(c for at in numbers for c in at.cautions)]
    known = None if frequencies[0].omega else solver.numbers()
    slopes = None
    if wanted.derivative is not None:
        slopes = port_slopes(formulas, symbol_of(solver, wanted.derivative), known)
    found: list[Failing] = []
    response = None
    if len(ports) == 1 and formulas.thevenin is not None:
        answer = formulas.answers[0]
        found = failing(solver, answer, wanted, known)
        checks += of_failing(found, f"the open port {ports[0].name}")
        place = Place(
            solver.layout.node_number[ports[0].plus], solver.layout.node_number[ports[0].minus]
        )
        names = [*solver.sources, f"1 A into {ports[0].name}"]
        response = in_s(network, solver, answer, place, names, [place])
    return FormulaPort(
        network,
        checks=tuple(checks),
        cautions=tuple(dict.fromkeys(cautions)),
        refusal=ExitStatus.DOES_NOT_EXIST if neither else ExitStatus.DONE,
        formulas=formulas,
        numbers=numbers,
        failing=tuple(found),
        response=response,
        slopes=slopes,
        symbols=symbols_data(solver),
        legend=tuple(legend_of(solver)),
    )


def _proved(what: str, wrong: int) -> Check:
    return Check(
        f"formulas of {what} that differ from the original equations at a random point modulo "
        "2^61 - 1",
        float(wrong),
        0.0,
    )
