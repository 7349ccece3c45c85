"""The command `sweep`."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

import typer

import equiv
from equiv.cli import completion
from equiv.cli.commands import File, app
from equiv.cli.options import shared
from equiv.cli.run import Run

if TYPE_CHECKING:
    from equiv.analyses.result import Result


@app.command()
@shared
def sweep(
    run: Run,
    file: File,
    what: Annotated[
        list[str] | None,
        typer.Argument(
            metavar="QUANTITY|PORT ...",
            show_default=False,
            help="I:R3, V:a, V:a,b, P:R3, a port's name or a,b; the file's find statements, or "
            "else its ports, if none is given.",
            autocompletion=completion.swept,
        ),
    ] = None,
    start: Annotated[
        str, typer.Option("--from", metavar="VALUE", show_default=False, help="The first value.")
    ] = ...,  # type: ignore[assignment]
    stop: Annotated[
        str, typer.Option("--to", metavar="VALUE", show_default=False, help="The last value.")
    ] = ...,  # type: ignore[assignment]
    over: Annotated[
        str,
        typer.Option(
            metavar="frequency|PARAMETER",
            help="What is moved: the file's frequency, or one of its given parameters.",
            autocompletion=completion.parameters,
        ),
    ] = "frequency",
    points: Annotated[int, typer.Option(metavar="N", help="How many values.")] = 21,
    log: Annotated[bool, typer.Option("--log", help="Equal ratios instead of steps.")] = False,
    plot: Annotated[
        str | None,
        typer.Option(metavar="PATH", help="Also draw the curves: .svg or .png (by matplotlib)."),
    ] = None,
) -> Result:
    """Terms or port impedance against frequency or a parameter.

    A row a point: the sum of the terms, which source dominates, and each term; of a port
    its impedance and open-circuit voltage. A point without a value is a row with the reason.

    \b
    Examples:
      equiv sweep filter.equiv V:out --from 10Hz --to 100kHz --points 41 --log
      equiv sweep supply.equiv PANEL --over tail --from 0ohm --to 50mohm
      equiv sweep filter.equiv V:out --from 0Hz --to 1kHz --plot filter.svg
    """
    form = ""
    if plot is not None:
        # What draws is imported only where a picture is wanted.
        from equiv.rendering import pictures

        form = pictures.form_of(plot)
        run.require_writable(plot)
    result = equiv.sweep(
        run.network(file),
        *(what or ()),
        over=over,
        start=start,
        stop=stop,
        points=points,
        log=log,
        progress=run.progress,
    )
    if plot is not None:
        run.write(pictures.draw(result.plots(), form), plot)
    return result
