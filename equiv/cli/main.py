"""The process: its words in, its exit status out."""

from __future__ import annotations

import sys
import warnings
from typing import NoReturn

from equiv.cli.boundary import run
from equiv.cli.environment import of_process


def main() -> NoReturn:
    """Run the command line of this process."""
    if not sys.warnoptions:
        # Warnings for programmers are no messages to the user; results bear their own.
        warnings.simplefilter("ignore")
    sys.exit(run(sys.argv[1:], of_process()))
