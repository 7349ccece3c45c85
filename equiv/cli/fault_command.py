"""The command `fault`."""

from __future__ import annotations

from functools import partial
from typing import TYPE_CHECKING

import equiv
from equiv.cli import fault_options as options
from equiv.cli.commands import File, app
from equiv.cli.options import By, shared
from equiv.cli.run import Run

if TYPE_CHECKING:
    from equiv.analyses.result import Result


@app.command()
@partial(shared, refused=["frequency"])
def fault(
    run: Run,
    file: File,
    buses: options.Buses = None,
    type: options.Type = "all",
    fault_impedance: options.FaultImpedance = None,
    ground_impedance: options.GroundImpedance = None,
    basis: options.Basis = "superposition",
    case: options.Case = "max",
    branches: options.Branches = None,
    by: By = "source",
) -> Result:
    """Three-phase faults: currents, and each source's share.

    Phase and sequence currents, peak, voltages, and term by term what each source gives,
    beside what it delivers from its own terminals; proved in phase coordinates.

    --branch adds what a relay there sees: terms, infeed factor, apparent impedance.

    \b
    Examples:
      equiv fault station.equiv MAIN --type line-ground --branch T1
      equiv fault station.equiv --basis equivalent-source --as csv
    """
    return equiv.fault(
        run.network(file),
        *(buses or ()),
        type=type,
        fault_impedance=fault_impedance or 0,
        ground_impedance=ground_impedance or 0,
        basis=basis,
        case=case,
        branches=branches or (),
        by=by,
        progress=run.progress,
    )
