"""`port` with forms, frequencies and a Touchstone file, from the words to what is on the disk."""

import json
from pathlib import Path

import pytest
from unit.cli.made import Process

from equiv.cli.boundary import run

FILTER = (
    "title Filter\nfrequency 1 MHz\nvoltage E +q -gnd 1 V\nresistor R q a 50 ohm\n"
    "inductor L a b 8 uH\ncapacitor C b gnd 3.2 nF\nport IN +a -gnd\nport OUT +b -gnd\n"
)


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "filter.equiv"
    path.write_text(FILTER)
    return path


def port(*words: object) -> tuple[int, Process]:
    process = Process()
    return run(["port", *map(str, words)], process.environment), process


def test_a_form_and_its_reference(file: Path) -> None:
    status, process = port(file, "IN", "OUT", "--form", "s", "--reference", "75ohm",
                           "--reference", "50 ohm", "--json")  # fmt: skip
    assert status == 0, process.told
    result = json.loads(process.printed)["result"]
    assert (result["form"], result["reference"]) == ("s", [75.0, 50.0])
    assert result["hertz"] == 1e6 and len(result["parameters"]) == 2
    assert result["source_terms"][0]["source"] == "E"


def test_frequencies_one_by_one_and_as_a_range(file: Path) -> None:
    status, process = port(file, "--form", "z", "--at", "5MHz", "--from", "1MHz", "--to", "4MHz",
                           "--points", 3, "--log", "--json")  # fmt: skip
    assert status == 0, process.told
    points = json.loads(process.printed)["result"]["frequencies"]
    assert [p["hertz"] for p in points] == pytest.approx([1e6, 2e6, 4e6, 5e6])


def test_a_touchstone_file_and_its_sources_read_back(file: Path) -> None:
    path = file.with_name("filter.s2p")
    status, process = port(file, "IN", "OUT", "--from", "1MHz", "--to", "3MHz", "--points", 3,
                           "--touchstone", path, "--json")  # fmt: skip
    assert status == 0, process.told
    result = json.loads(process.printed)["result"]
    sources = json.loads(Path(f"{path}.sources.json").read_text())
    assert sources["schema"] == "equiv/touchstone-sources/1"
    assert [p["sources"] for p in sources["frequencies"]] == [
        p["sources"] for p in result["frequencies"]
    ]
    again = file.with_name("again.equiv")
    again.write_text(
        'frequency 2 MHz\ntwoport F +a -gnd +b -gnd file "filter.s2p"\n'
        "port IN +a -gnd\nport OUT +b -gnd\n"
    )
    status, process = port(again, "--form", "s", "--json")
    assert status == 0, process.told
    data = json.loads(process.printed)
    for row, told in zip(
        data["result"]["parameters"], result["frequencies"][1]["parameters"], strict=True
    ):
        for x, y in zip(row, told, strict=True):
            assert complex(x["re"], x["im"]) == pytest.approx(complex(y["re"], y["im"]), rel=1e-12)
    assert "interpolated" not in {w["code"] for w in data["warnings"]}
    status, process = port(again, "--form", "s", "--at", "2.5MHz", "--json")
    warnings = json.loads(process.printed)["warnings"]
    assert "interpolated" in {w["code"] for w in warnings}


@pytest.mark.parametrize("there", ["filter.s2p", "filter.s2p.sources.json"])
def test_neither_file_is_overwritten_without_force(file: Path, there: str) -> None:
    (file.parent / there).write_text("precious")
    path = file.with_name("filter.s2p")
    status, process = port(file, "--touchstone", path)
    assert status == 6 and "exists already" in process.told
    assert (file.parent / there).read_text() == "precious"
    assert len(list(file.parent.iterdir())) == 2
    status, process = port(file, "--touchstone", path, "--force", "--quiet")
    assert status == 0, process.told
    assert path.read_text().count("\n") == 6


@pytest.mark.parametrize(
    ("words", "status", "code"),
    [
        (["--touchstone", "x.s3p"], 2, "wrong-ports"),
        (["--touchstone", "x.s2p", "--form", "h"], 2, "not-for-touchstone"),
        (["--touchstone", "x.s2p", "--reference", "50", "--reference", "75"], 2, "one-reference"),
        (["--touchstone", "x.s2p", "--form", "y", "--at", "0Hz"], 5, "no-such-form"),
        (["--form", "t"], 2, "usage"),
        (["--from", "1MHz"], 2, "half-a-range"),
        (["--from", "2MHz", "--to", "1MHz"], 2, "bad-range"),
        (["--from", "1MHz", "--to", "2MHz", "--points", "1"], 2, "bad-range"),
        (["--from", "0Hz", "--to", "2MHz", "--log"], 2, "bad-range"),
        (["--form", "s", "--at", "1ohm"], 2, "wrong-unit"),
        (["--form", "s", "--at", "x"], 2, "unknown-parameter"),
    ],
)
def test_what_cannot_be_done_is_said_and_nothing_is_written(
    file: Path, monkeypatch: pytest.MonkeyPatch, words: list[str], status: int, code: str
) -> None:
    monkeypatch.chdir(file.parent)
    found, process = port(file, *words, "--json")
    assert found == status, process.printed
    assert json.loads(process.printed)["errors"][0]["code"] == code
    assert list(file.parent.iterdir()) == [file]


def test_the_file_of_the_manual_is_what_is_written(tmp_path: Path) -> None:
    root = Path(__file__).resolve().parents[3]
    path = tmp_path / "preselector.s2p"
    status, process = port(root / "samples" / "preselector.equiv", "--from", "5MHz", "--to",
                           "9MHz", "--points", 5, "--at", "7.1MHz", "--touchstone", path)  # fmt: skip
    assert status == 0, process.told
    kept = (root / "docs" / "examples" / "preselector.s2p").read_text()
    for line, told in zip(path.read_text().splitlines(), kept.splitlines(), strict=True):
        if line[0] in "!#":
            assert line == told
        else:
            numbers = (list(map(float, text.split())) for text in (line, told))
            assert next(numbers) == pytest.approx(next(numbers), rel=1e-9, abs=1e-12)


@pytest.mark.parametrize("form", ["table", "csv", "markdown", "latex"])
def test_every_form_of_output(file: Path, form: str) -> None:
    for kind in ("z", "abcd", "s"):
        status, process = port(file, "--form", kind, "--as", form)
        assert status == 0, process.told
        assert "j1" in process.printed or kind == "s"
        assert ("Port 1: IN, a over gnd" in process.printed) == (form != "csv")
