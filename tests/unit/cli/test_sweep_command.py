"""The command `sweep`: its files, its forms and its refusals."""

import json
import subprocess
import sys
from pathlib import Path

import pytest

TEXT = """
title A $x$ <b>filter</b>
frequency 1 kHz
given r = 1 kohm
voltage  E +in -gnd 2 V
current  J gnd > out 1 mA
resistor R in out (2*r)
capacitor C out gnd 100 nF
find V:out
port OUT +out -gnd
"""


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "filter.equiv"
    path.write_text(TEXT)
    return path


def run(*words: object, width: str = "80") -> subprocess.CompletedProcess[str]:
    return subprocess.run(
        [sys.executable, "-m", "equiv", "sweep", *map(str, words)],
        capture_output=True, text=True, encoding="utf-8", check=False,
        env={"COLUMNS": width, "PYTHONUTF8": "1", "PATH": "", "NO_COLOR": "1"},
    )  # fmt: skip


def test_a_table_and_a_picture_at_80_columns(file: Path) -> None:
    done = run(file, "--from", "10Hz", "--to", "100kHz", "--points", 9, "--log")
    assert done.returncode == 0 and not done.stderr
    assert max(map(len, done.stdout.splitlines())) <= 80
    assert "dominating" in done.stdout and "█ E" in done.stdout


def test_a_parameter_in_json(file: Path) -> None:
    done = run(file, "OUT", "--over", "r", "--from", "1 kohm", "--to", "3kohm", "--points", 3,
               "--frequency", "2kHz", "--json")  # fmt: skip
    result = json.loads(done.stdout)["result"]
    assert result["over"]["values"] == [1000, 2000, 3000]
    assert result["curves"][0]["hertz"] == 2000
    z = result["curves"][0]["points"][2]["impedance"]
    told = 1 / (1 / 6000 + 2j * 3.141592653589793 * 2000 * 100e-9)
    assert complex(z["re"], z["im"]) == pytest.approx(told, rel=1e-12)


@pytest.mark.parametrize("form", ["csv", "markdown", "latex"])
def test_other_forms(file: Path, form: str) -> None:
    done = run(file, "--from", "0Hz", "--to", "1kHz", "--points", 3, "--as", form)
    assert done.returncode == 0
    assert "<b>" not in done.stdout
    if form == "csv":
        assert done.stdout.splitlines()[0].startswith("frequency [Hz],total_re [V],total_im [V]")


def test_a_picture_beside_the_table(file: Path) -> None:
    pytest.importorskip("matplotlib")
    picture = file.with_suffix(".svg")
    words = (file, "--from", "10Hz", "--to", "1kHz", "--points", 5, "--plot", picture)
    assert run(*words).returncode == 0
    first = picture.read_bytes()
    refused = run(*words)
    assert refused.returncode == 6 and "filter.svg exists already" in refused.stderr
    assert run(*words, "--force").returncode == 0
    assert picture.read_bytes() == first
    assert b"<b>" not in first and b"$x$ &lt;b&gt;" in first
    png = run(file, "--from", 1, "--to", 2, "--plot", file.with_suffix(".png"))
    assert png.returncode == 0 and file.with_suffix(".png").read_bytes()[:4] == b"\x89PNG"


@pytest.mark.parametrize(
    ("words", "status", "part"),
    [
        (["--from", "1Hz"], 2, "--to"),
        (["--from", "1Hz", "--to", "2Hz", "--over", "rr"], 2, "did you mean r?"),
        (["--from", "1Hz", "--to", "2Hz", "--plot", "x.pdf"], 2, "name it .svg or .png"),
        (["V:nowhere", "--from", "1Hz", "--to", "2Hz"], 2, "nowhere"),
        (["P9", "--from", "1Hz", "--to", "2Hz"], 2, "there is no port called P9"),
    ],
)
def test_refusals(file: Path, words: list[str], status: int, part: str) -> None:
    done = run(file, *words)
    assert done.returncode == status
    assert part in done.stderr and not done.stdout


def test_without_matplotlib(file: Path) -> None:
    code = (
        "import sys; sys.modules['matplotlib'] = None\n"
        "from equiv.cli import main\n"
        f"sys.argv = ['equiv', 'sweep', {str(file)!r}, '--from', '1Hz', '--to', '2Hz', "
        "'--plot', 'never.svg']\nmain()"
    )
    done = subprocess.run([sys.executable, "-c", code], capture_output=True, text=True, check=False)
    assert done.returncode == 2
    assert 'python -m pip install "equiv[plot]"' in done.stderr
