"""`python -m equiv` is the command line."""

from equiv.cli import main

main()
