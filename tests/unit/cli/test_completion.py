"""What the shell offers, and that it never fails."""

from pathlib import Path
from types import SimpleNamespace
from typing import Any

import pytest

from equiv.cli import completion

TEXT = """\
title   A small file
voltage Vmain +m -gnd 240 V
voltage Vgen  +g -gnd 236 V group standby
ccvs    Droop +g2 -g r 20 mohm senses I:Rmain
resistor Rmain m bus 38 mohm
resistor Rtie g2 bus 48 mohm
resistor Rload bus gnd 1 ohm
port PANEL +bus -gnd
"""


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "small.equiv"
    path.write_text(TEXT)
    return path


def context(file: Path, **words: Any) -> Any:
    return SimpleNamespace(params={"file": str(file), **words})


def test_quantities(file: Path):
    assert completion.quantities(context(file), "I:R") == ["I:Rmain", "I:Rtie", "I:Rload"]
    assert completion.quantities(context(file), "V:b") == ["V:bus"]
    assert completion.quantities(context(file), "V:bus,g") == ["V:bus,g", "V:bus,g2", "V:bus,gnd"]
    assert "P:Rload" in completion.quantities(context(file), "")


def test_quantities_where_the_shell_splits_at_the_colon(file: Path):
    assert completion.quantities(context(file, quantities=["I", ":"]), "Rm") == ["Rmain"]


def test_sources_and_groups(file: Path):
    assert completion.sources(context(file), "") == ["Vmain", "Vgen", "standby"]


def test_ports(file: Path):
    assert completion.ports(context(file), "P") == ["PANEL"]
    assert completion.ports(context(file), "bu") == ["bus,"]
    assert completion.ports(context(file), "bus,gn") == ["bus,gnd"]


def test_kinds_and_samples():
    assert completion.kinds(SimpleNamespace(params={}), "cc") == ["cccs", "ccvs"]
    assert "pump-station" in completion.samples(SimpleNamespace(params={}), "pump")


def test_a_file_with_errors_still_offers_its_names(file: Path):
    file.write_text(TEXT + "resistor R9 m\nnonsense\n")
    assert completion.sources(context(file), "") == ["Vmain", "Vgen", "standby"]


@pytest.mark.parametrize("content", [b"\xff\xfe\x00", b"", b"nonsense\n" * 300])
def test_nothing_is_offered_and_nothing_fails(
    tmp_path: Path, content: bytes, capsys: pytest.CaptureFixture[str]
):
    path = tmp_path / "bad"
    path.write_bytes(content)
    for offered in (completion.quantities, completion.sources, completion.ports):
        assert offered(context(path), "Z") == []
        assert offered(context(tmp_path / "missing"), "") == []
        assert offered(context(tmp_path), "") == []
        assert offered(SimpleNamespace(params={}), "") == []
    assert capsys.readouterr() == ("", "")
