"""The exact output of each command, at 80 columns and in a pipe (but for rounding)."""

import runpy
from pathlib import Path

import pytest
from commands.outputs import COMMANDS, EXPECTED, ROOT, output

SAME = runpy.run_path(str(ROOT / "docs" / "generate.py"))["same"]


@pytest.mark.parametrize("name", COMMANDS)
def test_output(name: str) -> None:
    for form, columns in (("80", 80), ("pipe", None)):
        expected = (EXPECTED / f"{name}.{form}.txt").read_text(encoding="utf-8")
        found = output(COMMANDS[name], columns)
        assert SAME(found, expected), f"{name} ({form}):\n{found}"


def test_nothing_is_wider_than_the_terminal() -> None:
    # a network's text and the forms for machines are not set for a width
    as_it_is = ("json", "csv", "markdown", "latex", "isolate")
    for path in sorted(EXPECTED.glob("*.80.txt")):
        if not any(form in path.name for form in as_it_is):
            result = path.read_text(encoding="utf-8").partition("--- standard error")[0]
            for line in result.splitlines():
                assert len(line) <= 80, (path.name, line)


def test_every_kept_output_belongs_to_a_command() -> None:
    names = {path.name for path in Path(EXPECTED).glob("*.txt")}
    assert names == {f"{name}.{form}.txt" for name in COMMANDS for form in ("80", "pipe")}
