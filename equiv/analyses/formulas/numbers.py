"""The values of symbols at a frequency of a network."""

from __future__ import annotations

from equiv.elements.element import Frequency
from equiv.equations.solution import source_values
from equiv.equations.symbolic.nesting import Where
from equiv.equations.symbolic.numbers import Numbers
from equiv.equations.symbolic.solver import FormulaSolver
from equiv.network import Network
from equiv.units import Symbol


def has_numbers(solver: FormulaSolver) -> bool:
    """Whether every symbol has a value."""
    written = solver.made.network.elements.values()
    return all(named.number is not None for named in solver.named) and not any(
        isinstance(element.value, Symbol) for element in written
    )


def values_at(
    network: Network, solver: FormulaSolver, frequency: Frequency, where: Where
) -> Numbers:
    """The symbols' values at s = jω, and those of the named parts; sources are rms."""
    values: dict[str, complex] = {}
    if frequency.omega and has_numbers(solver):
        rms = source_values(network, frequency)
        names = {named.element: named.name for named in solver.named if named.source}
        for source, value in zip(network.sources, rms, strict=True):
            if source.name in names:
                values[names[source.name]] = complex(value)
    numbers = solver.numbers(1j * frequency.omega if frequency.omega else 0j, values)
    numbers.name(where)
    return numbers
