"""Elements whose parameters a Touchstone file gives: read in place, and written again."""

from pathlib import Path

import pytest

from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic, NetworkFileError, UsageError
from equiv.language import Builder, load, parse, quantity, write
from equiv.network import Network

TWO = "# MHz S RI R 50\n0 0 0 0.5 0 0.5 0 0 0\n2 0.1 0 0 -0.5 0 -0.5 0.1 0\n"
THREE = "# MHz Y RI R 50\n1 1 0 0 0 0 0\n0 0 1 0 0 0\n0 0 0 0 1 0\n"


@pytest.fixture
def folder(tmp_path: Path) -> Path:
    (tmp_path / "parts").mkdir()
    (tmp_path / "x.s2p").write_text(TWO)
    (tmp_path / "parts" / "y.s3p").write_text(THREE)
    (tmp_path / "parts" / "amplifier.equiv").write_text(
        'twoport B2 +a -gnd +b -gnd file "../x.s2p"\nnport N2 +a -b +c -d +e -f file "y.s3p"\n'
    )
    return tmp_path


def mistake(text: str, folder: Path | None) -> Diagnostic:
    with pytest.raises(NetworkFileError) as caught:
        parse(text, folder=folder)
    (found,) = caught.value.diagnostics
    return found


def test_a_file_is_read_and_written_again(folder: Path) -> None:
    text = (
        'twoport B1 +a -gnd +b -gnd file "./x.s2p" tolerance 1%\n'
        'nport N1 +a -gnd +b -gnd +c -d label "splitter" file "parts/y.s3p"\n'
    )
    network = parse(text, folder=folder)
    b1, n1 = network.elements.values()
    assert b1.table is not None and n1.table is not None
    assert (b1.table.file, b1.table.form, b1.table.ports) == ("x.s2p", "s", 2)
    assert b1.table.matrices[0] == (0, 0.5, 0.5, 0)
    assert n1.pairs == ((0, 1), (2, 3), (4, 5)) and n1.nodes[4:] == ("c", "d")
    assert n1.table.matrices == ((0.02, 0, 0, 0, 0.02, 0, 0, 0, 0.02),)
    written = write(network)
    assert 'file "x.s2p"  tolerance 1%' in written and 'file "parts/y.s3p"' in written
    assert parse(written, folder=folder) == network


def test_a_file_is_named_from_the_folder_of_the_one_that_names_it(folder: Path) -> None:
    (folder / "top.equiv").write_text('read "parts/amplifier.equiv"\n')
    network = load(folder / "top.equiv")
    files = [e.table.file for e in network.elements.values() if e.table]
    assert files == ["x.s2p", "parts/y.s3p"]
    assert parse(write(network), folder=folder) == network


def test_in_a_block(folder: Path) -> None:
    network = parse(
        'block half (p q)\n  twoport B +p -gnd +q -gnd file "x.s2p"\nend\n'
        "use half A (a b)\nuse half C (b c)\n",
        folder=folder,
    )
    assert [e.nodes for e in network.elements.values()] == [
        ("a", "gnd", "b", "gnd"), ("b", "gnd", "c", "gnd"),
    ]  # fmt: skip
    assert network.elements["A.B"].table is network.elements["C.B"].table
    assert parse(write(network), folder=folder) == network


def test_quantities_of_every_pair(folder: Path) -> None:
    network = parse(
        'nport N1 +a -gnd +b -gnd +c -d file "parts/y.s3p"\nfind V3:N1\nfind I2:N1\n'
        "resistor R d gnd 1\ncccs F a > gnd beta 2 senses I3:N1\n",
        folder=folder,
    )
    assert [str(find.quantity) for find in network.finds] == ["V3:N1", "I2:N1"]
    assert quantity("I12:N1") == Quantity("I", ("N1",), 11)
    assert network.describe(Quantity("V", ("N1",), 2)) == (
        "voltage of N1 (terminal pair 3), positive where c is higher than d"
    )
    wrong = mistake('nport N1 +a -gnd +b -gnd +c -d file "parts/y.s3p"\nfind V4:N1\n', folder)
    assert wrong.code == "no-such-pair"


def test_made_in_code(folder: Path) -> None:
    made = (
        Builder()
        .nport("N1", "a", "gnd", "b", "gnd", "c", "d", file="parts/y.s3p")
        .twoport("B1", "a", "gnd", "b", "gnd", file="x.s2p")
        .network(folder)
    )
    assert isinstance(made, Network)
    assert parse(write(made), folder=folder) == made
    with pytest.raises(UsageError):
        Builder().nport("N1", "a", "gnd", "b", file="x.s2p")
    with pytest.raises(UsageError):
        Builder().nport("N1", "a", "gnd", file='x.s2p"\nend')


@pytest.mark.parametrize(
    ("name", "code"),
    [
        ("../x.s2p", "outside-folder"),
        ("parts/../../x.s2p", "outside-folder"),
        ("/etc/hosts", "absolute-path"),
        ("C:\\x.s2p", "absolute-path"),
        ("none.s2p", "cannot-read"),
        ("parts", "cannot-read"),
        ("x\\u0000.s2p", "cannot-read"),
    ],
)
def test_never_outside_the_network_s_folder(folder: Path, name: str, code: str) -> None:
    inside = folder / "parts"
    text = f'twoport B1 +a -gnd +b -gnd file "{name}"\n'
    assert mistake(text, inside if ".." in name else folder).code == code


def test_a_link_does_not_lead_out(folder: Path, tmp_path_factory: pytest.TempPathFactory) -> None:
    outside = tmp_path_factory.mktemp("outside") / "x.s2p"
    outside.write_text(TWO)
    (folder / "link.s2p").symlink_to(outside)
    assert mistake('twoport B +a -gnd +b -gnd file "link.s2p"\n', folder).code == "outside-folder"


def test_a_text_in_no_folder_reads_no_file() -> None:
    assert mistake('twoport B1 +a -gnd +b -gnd file "x.s2p"\n', None).code == "no-folder"


def test_a_wrong_file_is_told_once_and_what_it_names_is_not_doubted(folder: Path) -> None:
    (folder / "bad.s2p").write_text("# Hz S RI\n1 2 3\n")
    text = (
        'twoport B1 +a -gnd +b -gnd file "bad.s2p"\ntwoport B2 +a -gnd +b -gnd file "bad.s2p"\n'
        "find V:b\nfind I2:B1\n"
    )
    wrong = mistake(text, folder)
    assert wrong.span is not None
    assert (wrong.code, wrong.span.file, wrong.span.line) == ("touchstone-data", "bad.s2p", 2)


def test_bytes_that_are_no_text(folder: Path) -> None:
    (folder / "x.s2p").write_bytes(b"\xff\xfe# Hz")
    wrong = mistake('twoport B1 +a -gnd +b -gnd file "x.s2p"\n', folder)
    assert wrong.code == "cannot-read"


def test_a_file_whose_name_tells_nothing_has_as_many_ports_as_there_are_pairs(
    folder: Path,
) -> None:
    (folder / "two.txt").write_text(TWO)
    network = parse('nport N1 +a -gnd +b -gnd file "two.txt"\n', folder=folder)
    table = network.elements["N1"].table
    assert table is not None and table.ports == 2
    with pytest.raises(NetworkFileError) as caught:
        parse('nport N1 +a -gnd file "two.txt"\n', folder=folder)
    assert [d.code for d in caught.value.diagnostics] == ["touchstone-data"] * 2
