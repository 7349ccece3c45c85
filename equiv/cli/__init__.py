"""The command line: `equiv COMMAND FILE [WORDS] [OPTIONS]`."""

from equiv.cli.main import main

__all__ = ["main"]
