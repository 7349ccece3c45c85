"""The commands. Each calls the library function of its name; the docstrings are the help."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Literal

import typer

import equiv
from equiv.cli import completion, fault_options, port_files
from equiv.cli import formula_options as formulas
from equiv.cli import port_options as options
from equiv.cli.options import By, Exactly, shared
from equiv.cli.run import Run

if TYPE_CHECKING:
    from equiv.analyses.result import Result

app = typer.Typer(
    name="equiv",
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    context_settings={"help_option_names": ["--help", "-h"]},
)

File = Annotated[
    str, typer.Argument(metavar="FILE", show_default=False, help="Network file; - reads a pipe.")
]
Quantities = Annotated[
    list[str] | None,
    typer.Argument(
        metavar="QUANTITY ...",
        show_default=False,
        help="I:R3, V:a, V:a,b, V:R3, P:R3; the file's find statements if none is given.",
        autocompletion=completion.quantities,
    ),
]

Ports = Annotated[
    list[str] | None,
    typer.Argument(
        metavar="PORT ...",
        show_default=False,
        help="A declared port or a pair of nodes a,b; all declared ports if none is given.",
        autocompletion=completion.ports,
    ),
]


def _version(wanted: bool) -> None:
    if wanted:
        typer.echo(f"equiv {equiv.__version__}")
        raise typer.Exit


@app.callback()
def program(
    version: Annotated[
        bool,
        typer.Option("--version", callback=_version, is_eager=True, help="Print the version."),
    ] = False,
) -> None:
    """Superposition and port equivalents of electrical networks with controlled sources.

    \b
    To begin:
      equiv sample                        what samples there are
      equiv sample NAME --output f.equiv  one of them to start from
      equiv superpose f.equiv             what each source gives to each quantity
      equiv kinds                         the network language on one page

    \b
    Exit status: 0 done; 1 done, but a check failed; 2 wrong usage; 3 the file
    has errors; 4 no unique solution; 5 what was asked for does not exist;
    6 a file cannot be read or written; 70 an error of the program itself.
    """


@app.command()
@shared
def check(run: Run, file: File) -> Result:
    """What is wrong or doubtful in a file, and what is in it.

    \b
    Example:
      equiv check supply.equiv
    """
    return equiv.check(run.network(file))


@app.command()
@shared
def solve(run: Run, file: File, exact: Exactly = False) -> Result:
    """Everything at once: voltages, currents, powers, their balance.

    \b
    Examples:
      equiv solve supply.equiv --as csv --output supply.csv
      equiv solve supply.equiv --exact
    """
    return equiv.solve(run.network(file), exact=exact, progress=run.progress)


@app.command()
@shared
def superpose(
    run: Run,
    file: File,
    quantities: Quantities = None,
    detail: Annotated[
        bool, typer.Option("--detail", help="Each sub-circuit: what its controlled sources do.")
    ] = False,
    paths: Annotated[
        bool, typer.Option("--paths", help="Split each term by the controlled source it takes.")
    ] = False,
    by: By = "source",
    check: Annotated[
        Literal["auto", "all", "none"],
        typer.Option(help="Which terms are found again by a second method."),
    ] = "auto",
    exact: Exactly = False,
    symbolic: formulas.Symbolic = None,
    expand: formulas.Expand = False,
    fails_for: formulas.FailsFor = None,
    derivative: formulas.Derivative = None,
) -> Result:
    """Term by term: what each source gives to each quantity.

    Every controlled source stays in place in every term; each term is proved by a second
    method, and the sum by the network with all sources on.

    --symbolic gives formulas, in all elements' names or in those behind it; without names it
    stands last, or before an option, a quantity or a file.

    \b
    Examples:
      equiv superpose supply.equiv I:R3
      equiv superpose supply.equiv V:bus,gnd --detail --by group
      equiv superpose supply.equiv --exact
      equiv superpose supply.equiv I:R3 --symbolic R1,R3
    """
    return equiv.superpose(
        run.network(file),
        *(quantities or ()),
        by=by,
        detail=detail,
        paths=paths,
        check=check,
        exact=exact,
        symbolic=symbolic,
        expand=expand,
        fails_for=fails_for,
        derivative=derivative,
        progress=run.progress,
    )


@app.command()
@shared
def isolate(
    run: Run,
    file: File,
    source: Annotated[
        str,
        typer.Argument(
            metavar="SOURCE",
            show_default=False,
            help="An independent source, or a group of them.",
            autocompletion=completion.sources,
        ),
    ],
    bus: fault_options.OneBus = None,
    type: fault_options.IsolateType = None,
    fault_impedance: fault_options.IsolateFaultImpedance = None,
    ground_impedance: fault_options.IsolateGroundImpedance = None,
) -> Result:
    """Print the sub-circuit of one source, ready to be run again.

    The other sources become shorts and opens of the same names. Of a three-phase file it is
    the sequence networks, joined as a fault at --bus joins them, with the one source in them.

    \b
    Examples:
      equiv isolate supply.equiv Vgen | equiv solve -
      equiv isolate station.equiv G1 --bus MAIN | equiv superpose -
    """
    asked = {
        "bus": bus, "type": type, "fault_impedance": fault_impedance,
        "ground_impedance": ground_impedance,
    }  # fmt: skip
    given = {name: word for name, word in asked.items() if word is not None}
    return equiv.isolate(run.network(file), source, **given)


@app.command()
@shared
def port(
    run: Run,
    file: File,
    ports: Ports = None,
    form: options.Form = None,
    reference: options.References = None,
    at: options.At = None,
    from_: options.From = None,
    to: options.To = None,
    points: options.Points = 11,
    log: options.Log = False,
    touchstone: options.TouchstoneFile = None,
    exact: Exactly = False,
    symbolic: formulas.Symbolic = None,
    expand: formulas.Expand = False,
    fails_for: formulas.FailsFor = None,
    derivative: formulas.Derivative = None,
) -> Result:
    """Equivalents or parameters of one port or several.

    The Thevenin and Norton equivalents; with --form z, y, h, g, abcd or s and its sources.

    --touchstone writes s, or z or y by --form, as a Touchstone file of version 1.1; the source
    vector goes to a file of the same name with .sources.json behind it.

    \b
    Examples:
      equiv port supply.equiv PANEL
      equiv port supply.equiv bus,gnd pump,gnd --json
      equiv port supply.equiv PANEL --symbolic
      equiv port filter.equiv IN OUT --form s --reference 50ohm --at 1MHz
      equiv port filter.equiv IN OUT --from 1MHz --to 9MHz --touchstone filter.s2p
    """
    files = port_files.of(run, touchstone)
    network = run.network(file)
    symbolic, named = formulas.names_and_ports(network, symbolic, ports)
    form = form or ("s" if touchstone else None)
    frequencies = port_files.frequencies(at or (), from_, to, points, log)
    if symbolic is not None:
        return equiv.port(
            network, *named, form=form, at=frequencies, exact=exact,
            symbolic=symbolic, expand=expand, fails_for=fails_for,
            derivative=derivative,
        )  # fmt: skip
    result = equiv.port(
        network,
        *named,
        form=form,
        reference=reference or 50,
        at=frequencies,
        exact=exact,
        expand=expand,
        fails_for=fails_for,
        derivative=derivative,
        progress=run.progress,
    )
    files.write(result)
    return result


@app.command()
@shared
def kinds(
    run: Run,
    kind: Annotated[
        str | None,
        typer.Argument(
            metavar="KIND",
            show_default=False,
            help="One kind of element, in full; three-phase: the words of such files.",
            autocompletion=completion.kinds,
        ),
    ] = None,
) -> Result:
    """The network language on one page, or one kind in full.

    \b
    Example:
      equiv kinds ccvs
    """
    return equiv.kinds(kind)


@app.command()
@shared
def sample(
    run: Run,
    name: Annotated[
        str | None,
        typer.Argument(
            metavar="NAME",
            show_default=False,
            help="The sample to print.",
            autocompletion=completion.samples,
        ),
    ] = None,
) -> Result:
    """List the samples, or print one to start from.

    \b
    Example:
      equiv sample NAME --output my.equiv
    """
    return equiv.sample(name)
