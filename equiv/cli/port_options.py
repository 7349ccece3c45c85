"""The options of `port`, each declared once."""

from __future__ import annotations

from typing import Annotated, Literal

import typer

Form = Annotated[
    Literal["z", "y", "h", "g", "abcd", "s"] | None,
    typer.Option(help="The ports' parameters in this form, with the source vector."),
]
References = Annotated[
    list[str] | None,
    typer.Option(metavar="OHMS", help="Of s, Touchstone: 50ohm; may repeat, one a port."),
]
At = Annotated[
    list[str] | None,
    typer.Option(metavar="FREQUENCY", help="In place of the file's: 1MHz; may repeat."),
]
From = Annotated[
    str | None, typer.Option("--from", metavar="FREQUENCY", help="The first of a range.")
]
To = Annotated[str | None, typer.Option(metavar="FREQUENCY", help="The last of it.")]
Points = Annotated[int, typer.Option(metavar="N", help="How many there are in it.")]
Log = Annotated[bool, typer.Option("--log", help="At equal ratios.")]
TouchstoneFile = Annotated[
    str | None,
    typer.Option(metavar="PATH", help="Write s, z or y to a file, its sources to another."),
]
