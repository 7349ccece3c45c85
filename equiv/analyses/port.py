"""A network as seen from its ports: Thevenin and Norton equivalents by test sources, proved."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass, replace
from typing import TYPE_CHECKING, Any, ClassVar, NamedTuple, overload

from equiv.analyses.cautions import about_network, interpolated
from equiv.analyses.closing import closing_table
from equiv.analyses.exactness import exactly
from equiv.analyses.formulas.kinds import require_plain, require_symbolic
from equiv.analyses.headings import at_words
from equiv.analyses.ports.cautions import TERMINALS_ALONE, resistance_cautions
from equiv.analyses.ports.choice import chosen_ports
from equiv.analyses.ports.choice import find_port as find_port
from equiv.analyses.ports.equivalent import equivalent as equivalent
from equiv.analyses.ports.form_proof import proved
from equiv.analyses.ports.form_tables import form_data, form_tables
from equiv.analyses.ports.forms import PortForm, existing, in_form
from equiv.analyses.ports.frequencies import Given, frequencies_of, network_at
from equiv.analyses.ports.proof import Equivalent, blackman, three_loads
from equiv.analyses.ports.references import Ohms, checked_form, references_of
from equiv.analyses.ports.tables import port_data, port_tables
from equiv.analyses.ports.touchstone import touchstone_sources, touchstone_text
from equiv.analyses.result import Caution, Check, Result
from equiv.analyses.superposition.terms import limit_of
from equiv.analyses.tables import Table
from equiv.elements.element import Frequency
from equiv.errors import Diagnostic, DoesNotExistError, ExitStatus
from equiv.network import Network, Port, Progress, no_progress

if TYPE_CHECKING:
    from equiv.analyses.formulas.ported import FormulaPort

_UNPROVED = Caution(
    "unproved",
    "under no loads that were tried does the network have a solution of its own: the parameters "
    "follow from its equations, and are not proved in another way",
)


@dataclass(frozen=True)
class PortEquivalent(Result):
    """Equivalents of one or several ports, at each frequency of the sources.

    Voltages of `plus` over `minus` (V), currents out of `plus` into the load (A), rms.
    """

    command: ClassVar[str] = "port"

    equivalents: tuple[Equivalent, ...] = ()
    forms: tuple[PortForm, ...] = ()
    """The parameters of each equivalent in the form that was asked for, if one was."""

    @property
    def first(self) -> Equivalent:
        """The equivalent at the file's frequency (or the lowest of the sources')."""
        own = self.network.frequency.omega
        return next((e for e in self.equivalents if e.frequency.omega == own), self.equivalents[0])

    def tables(self, digits: int = 5) -> tuple[Table, ...]:
        """Terms, equivalents, test sources and proof, for each frequency."""
        if self.forms:
            pairs = zip(self.equivalents, self.forms, strict=True)
            tables = [t for e, form in pairs for t in form_tables(self.network, e, form)]
        else:
            tables = [t for e in self.equivalents for t in port_tables(self.network, e)]
        return (*tables, closing_table(self.network, self.checks, self.cautions, TERMINALS_ALONE))

    def data(self) -> dict[str, Any]:
        """The `result` of the JSON object; `frequencies` holds all of them where there are several."""
        found = [port_data(e) for e in self.equivalents]
        for data, e, form in zip(found, self.equivalents, self.forms, strict=False):
            data |= form_data(e, form)
        first = found[self.equivalents.index(self.first)]
        return {**first, "frequencies": found} if len(found) > 1 else first

    def touchstone(self) -> str:
        """The parameters as a Touchstone file, version 1.1: s, or z or y normalised to R.

        Errors: UsageError for another form, or for references that differ.
        """
        return touchstone_text(self.network, self.equivalents, self.forms)

    def touchstone_sources(self) -> dict[str, Any]:
        """The source vectors, which a Touchstone file cannot carry, as an object for JSON."""
        return touchstone_sources(self.network, self.equivalents, self.forms)


@overload
def port(
    network: Network,
    *ports: str | Port,
    form: str | None = None,
    reference: Ohms | Sequence[Ohms] = 50,
    at: Sequence[Given] = (),
    exact: bool = False,
    symbolic: None = None,
    expand: bool = False,
    fails_for: str | None = None,
    derivative: str | None = None,
    progress: Progress = no_progress,
) -> PortEquivalent: ...


@overload
def port(
    network: Network,
    *ports: str | Port,
    form: str | None = None,
    reference: Ohms | Sequence[Ohms] = 50,
    at: Sequence[Given] = (),
    exact: bool = False,
    symbolic: bool | str | Sequence[str] | None = None,
    expand: bool = False,
    fails_for: str | None = None,
    derivative: str | None = None,
    progress: Progress = no_progress,
) -> PortEquivalent | FormulaPort: ...


def port(
    network: Network,
    *ports: str | Port,
    form: str | None = None,
    reference: Ohms | Sequence[Ohms] = 50,
    at: Sequence[Given] = (),
    exact: bool = False,
    symbolic: bool | str | Sequence[str] | None = None,
    expand: bool = False,
    fails_for: str | None = None,
    derivative: str | None = None,
    progress: Progress = no_progress,
) -> PortEquivalent | FormulaPort:
    """The Thevenin and Norton equivalents of one port, or the coupled ones of several.

    1 A into each open port, the independent sources off, gives the columns of Z in
    v = Voc - Z·i; 1 V across each port, the others shorted, those of Y in i = Isc - Y·v.
    Controlled sources stay in place. With a `form` the parameters z, y, h, g, abcd or s too,
    each with its source vector.

    Arguments: ports by their names or as `a,b` (all declared ports if none are given);
    `reference` (ohm) of s, one or one a port; `at` frequencies (hertz, or text such as `1 MHz`)
    in place of those of the sources; `exact` for rational arithmetic; `symbolic` for formulas in
    the elements' names (True: all; else the named ones) and in s, `expand` written out whatever
    their length, with the value of `fails_for` at which there is no Thevenin equivalent, and
    the derivatives of one port's equivalents with respect to `derivative`.
    Errors: UsageError for an unknown port or form; NoUniqueSolutionError; DoesNotExistError where
    the form does not exist; UsageError where an exact result would need an irrational value.
    Sign convention: v is `plus` over `minus`, i flows out of `plus` into the load; the currents
    of the parameters flow into the ports, as textbooks have them.
    Source: L. Thevenin, 1883; E. L. Norton, 1926; test sources: common practice.
    """
    if symbolic is not None and symbolic is not False:
        require_plain(form=bool(form), at=bool(at), exact=exact)
        wanted = (symbolic, expand, fails_for, derivative)
        return _in_symbols(network, chosen_ports(network, ports), wanted)
    require_symbolic(expand=expand, fails_for=bool(fails_for), derivative=bool(derivative))
    network = exactly(network, exact)
    chosen = chosen_ports(network, ports)
    checked_form(form, len(chosen))
    references = references_of(reference, len(chosen), exact=form == "s" and network.exact)
    general = about_network(network)
    if at:  # nothing is taken at the file's own frequency
        general = [c for c in general if c not in interpolated(network)]
    points = _points(network, chosen, frequencies_of(at), form, references, progress)
    return _put_together(network, points, general)


def _in_symbols(
    network: Network,
    ports: tuple[Port, ...],
    wanted: tuple[bool | str | Sequence[str], bool, str | None, str | None],
) -> FormulaPort:
    from equiv.analyses.formulas.ported import ported
    from equiv.analyses.formulas.wanted import Wanted

    return ported(network, ports, _own_frequencies(network), Wanted(*wanted))


def _own_frequencies(network: Network) -> tuple[Frequency, ...]:
    """The frequencies of the sources, and the file's own: a port has an impedance without them."""
    found = network.frequencies
    if any(f.same_as(network.frequency) for f in found):
        return found
    return tuple(sorted((*found, network.frequency), key=lambda f: f.omega))


class _Point(NamedTuple):
    """What is found at one frequency."""

    equivalent: Equivalent
    form: PortForm | None
    checks: list[Check]
    cautions: list[Caution]


def _points(
    network: Network,
    ports: tuple[Port, ...],
    wanted: tuple[Frequency, ...],
    form: str | None,
    references: tuple[float, ...],
    progress: Progress,
) -> list[_Point]:
    """What is found at the wanted frequencies, or else at those of the network."""
    frequencies = wanted or _own_frequencies(network)
    points: list[_Point] = []
    for number, frequency in enumerate(frequencies):
        progress("port equivalents", number, len(frequencies))
        here = network_at(network, frequency) if wanted else network
        points.append(_point(here, ports, frequency, form, references))
    return points


def _point(
    network: Network,
    ports: tuple[Port, ...],
    frequency: Frequency,
    form: str | None,
    references: tuple[float, ...],
) -> _Point:
    found = equivalent(network, ports, frequency)
    checks = _checks(network, found)
    near = interpolated(replace(network, frequency=frequency))
    cautions = [*resistance_cautions(found), *near]
    if form is None:
        return _Point(found, None, checks, cautions)
    parameters = _required(network, found, form, references)
    proofs = _form_checks(network, found, parameters)
    cautions += [] if proofs else [_UNPROVED]
    return _Point(found, parameters, checks + proofs, cautions)


def _put_together(
    network: Network, points: Sequence[_Point], general: Sequence[Caution]
) -> PortEquivalent:
    cautions = [*general, *(c for point in points for c in point.cautions)]
    equivalents = tuple(point.equivalent for point in points)
    forms = tuple(point.form for point in points if point.form is not None)
    neither = not forms and any(not e.thevenin and not e.norton for e in equivalents)
    return PortEquivalent(
        network,
        checks=tuple(check for point in points for check in point.checks),
        cautions=tuple(dict.fromkeys(cautions)),
        refusal=ExitStatus.DOES_NOT_EXIST if neither else ExitStatus.DONE,
        equivalents=equivalents,
        forms=forms,
    )


def _required(
    network: Network, e: Equivalent, form: str, references: tuple[float, ...]
) -> PortForm:
    """The parameters in a form, or a refusal that offers other forms."""
    found = in_form(network, e, form, references)
    if found.parameters is None:
        others = existing(network, e, references, but=form)
        where = at_words(e.frequency)
        message = f"{e.named} have no {form} parameters{where}: {found.reason}"
        if len(e.ports) == 1:
            message = message.replace(" have ", " has ", 1)
        hint = f"these forms exist: {', '.join(others)}" if others else "no form exists"
        raise DoesNotExistError(Diagnostic("no-such-form", message, hint=hint))
    return found


def _form_checks(network: Network, e: Equivalent, form: PortForm) -> list[Check]:
    where = at_words(e.frequency)
    off = proved(network, e, form)
    return (
        []
        if off is None
        else [Check(f"parameters {form.form} under loads{where}", off, limit_of(network))]
    )


def _checks(network: Network, e: Equivalent) -> list[Check]:
    limit = limit_of(network)
    where = at_words(e.frequency)
    checks = []
    if e.thevenin and e.norton:
        checks.append(Check(f"Norton against Thevenin{where}", e.disagreement, limit))
    if e.thevenin or e.norton:
        off = three_loads(network, e)
        if off is not None:
            checks.append(Check(f"three loads{where}", off, limit))
    off = blackman(network, e)
    if off is not None:
        checks.append(Check(f"Blackman's formula{where}", off, limit))
    return checks
