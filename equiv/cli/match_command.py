"""The command `match`."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any, Literal

import typer

import equiv
from equiv.cli import completion
from equiv.cli.commands import File, app
from equiv.cli.options import shared
from equiv.cli.run import Run

if TYPE_CHECKING:
    from equiv.analyses.result import Result

Rule = Literal[
    "all", "conjugate", "resistive", "angle", "reactance", "ratio",
    "l", "pi", "t", "two-section", "quarter-wave",
]  # fmt: skip
Series = Literal["E3", "E6", "E12", "E24", "E48", "E96", "E192"]


def _option(help_: str, metavar: str) -> Any:
    return typer.Option(help=help_, metavar=metavar, show_default=False)


PortWord = Annotated[
    str,
    typer.Argument(
        metavar="PORT",
        show_default=False,
        help="A declared port or a pair of nodes a,b.",
        autocompletion=completion.ports,
    ),
]
Text = str | None
Number = float | None
Load = Annotated[Text, _option("The load to be matched: 50ohm, 10+10j ohm.", "IMPEDANCE")]
By = Annotated[
    Rule, typer.Option(help="One rule for the load, or one sort of network.", metavar="WORD")
]
Angle = Annotated[Text, _option("An angle that the load must have: 30deg.", "ANGLE")]
Reactance = Annotated[Text, _option("A reactance that the load must have: -8ohm.", "REACTANCE")]
LoadedQ = Annotated[Number, typer.Option("--q", metavar="NUMBER", help="The loaded Q of pi and T.")]
Values = Annotated[
    Series | None,
    _option("Preferred values of IEC 60063: E3, E6, E12, E24, E48, E96, E192.", "SERIES"),
]
Tolerance = Annotated[
    Text, _option("Of the parts: 5%; the series' own if none is given.", "PERCENT")
]
ReturnLoss = Annotated[
    float, typer.Option(metavar="DECIBELS", help="What a made network must have.")
]
Band = Annotated[Text, _option("The band it is needed over, around the frequency: 2MHz.", "WIDTH")]
CoilQ = Annotated[Number, _option("The Q of the coils.", "NUMBER")]
CapacitorQ = Annotated[Number, _option("The Q of the capacitors.", "NUMBER")]
Write = Annotated[Text, _option("Write the matched network to a file.", "PATH")]
Which = Annotated[
    int | None, _option("Which network is written; the best if none is given.", "NUMBER")
]


@app.command()
@shared
def match(
    run: Run,
    file: File,
    port: PortWord,
    load: Load = None,
    by: By = "all",
    angle: Angle = None,
    reactance: Reactance = None,
    q: LoadedQ = None,
    series: Values = None,
    tolerance: Tolerance = None,
    return_loss: ReturnLoss = 10.0,
    band: Band = None,
    inductor_q: CoilQ = None,
    capacitor_q: CapacitorQ = None,
    write: Write = None,
    number: Which = None,
) -> Result:
    """The load for most power, and matching networks.

    \b
    WORD is a rule for the load:  conjugate, resistive, angle, reactance, ratio
    or a sort of network:         l, pi, t, two-section, quarter-wave

    --write puts the network on the file's own network, with a port MATCHED where
    the load goes; it has the best preferred values if --series is given.

    \b
    Examples:
      equiv match antenna.equiv FEED
      equiv match antenna.equiv FEED --load 50ohm --series E24 --tolerance 5%
      equiv match antenna.equiv FEED --load 50ohm --by pi --q 5 --write fed.equiv
    """
    if write is not None:
        run.require_writable(write)
    result = equiv.match(
        run.network(file), port, load, by=by, angle=angle, reactance=reactance, q=q,
        series=series, tolerance=tolerance, return_loss=return_loss, band=band,
        inductor_q=inductor_q, capacitor_q=capacitor_q, progress=run.progress,
    )  # fmt: skip
    if write is not None:
        run.write(equiv.write(result.matched(number)), write)
    return result
