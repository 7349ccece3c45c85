"""The command `loadtest`."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

import equiv
from equiv.cli.commands import app
from equiv.cli.options import shared
from equiv.cli.run import Run

if TYPE_CHECKING:
    from equiv.analyses.result import Result


@app.command()
@shared
def loadtest(
    run: Run,
    file: Annotated[
        str,
        typer.Argument(
            metavar="FILE", show_default=False, help="CSV file of readings; - reads a pipe."
        ),
    ],
) -> Result:
    """From readings of a real port to its EMF and internal impedance.

    Two readings give them exactly, more by least squares; with standard uncertainties
    (GUM), their correlation, residuals, and how much the readings' errors are magnified.

    \b
    Columns of the CSV, each with its unit (prefixes too):
      load [ohm] and voltage [V], or voltage [V] and current [A]
      voltage angle [deg], current angle [deg]   or cells as 12 @ -30 deg, 3+4j
      |voltage| [V] and load [ohm]               magnitudes alone, resistive loads
      ± voltage [mV], or cells as 2.31±0.02      standard uncertainties

    \b
    Example:
      equiv loadtest readings.csv
    """
    text, name = run.text(file)
    return equiv.loadtest(text, name=name)
