"""The options of `fault`, each declared once; `isolate` has some of them too."""

from __future__ import annotations

from typing import Annotated, Literal

import typer

from equiv.cli import completion

OneType = Literal["three-phase", "line-ground", "line-line", "line-line-ground"]

Buses = Annotated[
    list[str] | None,
    typer.Argument(
        metavar="BUS ...",
        show_default=False,
        help="Buses of the file, each in full; a survey of every bus if none is given.",
        autocompletion=completion.buses,
    ),
]
Type = Annotated[
    Literal[OneType, "all"],
    typer.Option(
        metavar="TYPE", help="three-phase, line-ground, line-line, line-line-ground or all."
    ),
]
FaultImpedance = Annotated[
    str | None,
    typer.Option(
        metavar="IMPEDANCE",
        show_default=False,
        help="In the fault: 0.5ohm, '0.1+0.2j ohm'; a bare number is in ohms. "
        "line-line: between the phases; line-line-ground: in each leg.",
    ),
]
GroundImpedance = Annotated[
    str | None,
    typer.Option(
        metavar="IMPEDANCE",
        show_default=False,
        help="Of earth faults. line-ground: in series; line-line-ground: from the common point "
        "to earth.",
    ),
]
Basis = Annotated[
    Literal["superposition", "equivalent-source"],
    typer.Option(
        metavar="BASIS",
        help="superposition: each EMF is a term; equivalent-source: by IEC 60909-0.",
    ),
]
Case = Annotated[
    Literal["max", "min"],
    typer.Option(help="max: with motors; min: without them. By IEC 60909-0, with its c too."),
]
Branches = Annotated[
    list[str] | None,
    typer.Option(
        "--branch",
        metavar="NAME",
        show_default=False,
        help="Where a relay is: a branch, at its first bus, or NAME@BUS; may repeat.",
        autocompletion=completion.branches,
    ),
]

OneBus = Annotated[
    str | None,
    typer.Option(
        metavar="BUS",
        show_default=False,
        help="Of a three-phase file: the bus of the fault.",
        autocompletion=completion.buses,
    ),
]
IsolateType = Annotated[
    OneType | None,
    typer.Option(
        metavar="TYPE",
        show_default=False,
        help="Of a three-phase file: the type of fault; three-phase if none is given.",
    ),
]
IsolateFaultImpedance = Annotated[
    str | None,
    typer.Option(
        metavar="IMPEDANCE", show_default=False, help="Of a three-phase file: in the fault."
    ),
]
IsolateGroundImpedance = Annotated[
    str | None,
    typer.Option(
        metavar="IMPEDANCE",
        show_default=False,
        help="Of a three-phase file: from the joined phases to earth.",
    ),
]
