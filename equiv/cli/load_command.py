"""The command `load`."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

import equiv
from equiv.cli import completion
from equiv.cli.commands import File, app
from equiv.cli.options import Exactly, shared
from equiv.cli.run import Run

if TYPE_CHECKING:
    from equiv.analyses.result import Result


@app.command()
@shared
def load(
    run: Run,
    file: File,
    port: Annotated[
        str,
        typer.Argument(
            metavar="PORT",
            show_default=False,
            help="A declared port or a pair of nodes a,b.",
            autocompletion=completion.ports,
        ),
    ],
    values: Annotated[
        list[str],
        typer.Argument(
            metavar="VALUE ...",
            show_default=False,
            help="8 ohm, 4+3j ohm, short, open, current 2 A, power 50 W, or curve.csv.",
        ),
    ],
    exact: Exactly = False,
) -> Result:
    """What a port does under given loads, proved in the full network.

    Voltage, current, power, regulation, efficiency, and what every source gives. Several
    loads make one table; a load without a point is a row that says why.

    \b
    Loads:
      8 ohm, 4+3j ohm, short, open
      current 2 A [at 50 Hz]       a constant current (rms) out of plus into the load
      power 50 W [pf 0.8 lag]      a constant power: both points, or the largest power
      curve.csv                    a measured curve, columns voltage [V],current [A]

    \b
    Examples:
      equiv load supply.equiv PANEL 8 ohm short power 50 W
      equiv load supply.equiv bus,gnd "current 2 A" lamp.csv --json
      equiv load supply.equiv PANEL -- -8 ohm
    """
    loads = [
        equiv.load_curve(*run.text(word)) if word.lower().endswith(".csv") else word
        for word in values
    ]
    return equiv.load_port(run.network(file), port, *loads, exact=exact, progress=run.progress)
