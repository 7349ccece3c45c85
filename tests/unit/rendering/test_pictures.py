"""Pictures: the same bytes each time, nothing hostile in them, and words where they cannot be."""

import subprocess
import sys
from collections.abc import Callable
from dataclasses import replace
from xml.etree import ElementTree

import pytest

import equiv
from equiv.analyses.tables import Plot, Series
from equiv.rendering import pictures

pytest.importorskip("matplotlib")
HOSTILE = "$x^2$ \\frac{1}{0} <script>alert(1)</script> --> &amp; \x1b[2J]]>"
PLOT = Plot(
    HOSTILE, "parameter _R", "ohm", (1.0, 10.0, 100.0), True, HOSTILE, "V",
    (Series(HOSTILE, (1.0, 2.0, float("nan"))), Series("_hidden", (1.0, 0.5, float("nan")))),
    (Series("|sum|", (0.5, 1.5, float("nan"))),),
)  # fmt: skip


def svg(plot: Plot = PLOT) -> str:
    return pictures.draw([plot], "svg").decode()


def test_svg_has_no_date_and_no_metadata() -> None:
    text = svg().lower()
    for word in ("metadata", "<dc:date", "creator", "rdf:", "https://matplotlib"):
        assert word not in text
    ElementTree.fromstring(svg())


def test_names_are_only_text() -> None:
    text = svg()
    assert "<script" not in text and "\x1b" not in text
    words = [e.text for e in ElementTree.fromstring(text).iter() if e.tag.endswith("text")]
    shown = HOSTILE.replace("\x1b", "\\x1b")
    assert any(word and word.startswith(shown[:59]) for word in words)
    assert "_hidden" in words and "|sum|" in words
    assert "parameter _R, logarithmic" in words


def test_bands_differ_by_more_than_their_colour() -> None:
    assert svg().count("<pattern ") == 1  # the lowest is plain, the next hatched


@pytest.mark.parametrize("form", pictures.FORMS)
def test_the_same_bytes_each_time(form: str) -> None:
    code = (
        "import sys; sys.path.insert(0, 'tests/unit/rendering'); sys.path.insert(0, '.')\n"
        "import hashlib, test_pictures as t\n"
        f"print(hashlib.sha256(t.pictures.draw([t.PLOT], {form!r})).hexdigest())"
    )
    first, second = (
        subprocess.run(
            [sys.executable, "-c", code], check=True, capture_output=True, text=True
        ).stdout
        for _ in range(2)
    )
    assert first == second and len(first) == 65


def test_the_users_own_settings_do_not_matter() -> None:
    import matplotlib

    told = svg()
    with matplotlib.rc_context({"text.usetex": True, "font.size": 30.0}):
        assert svg() == told
        assert matplotlib.rcParams["text.usetex"] is True


def test_an_empty_or_negative_plot_is_drawn() -> None:
    power = replace(PLOT, bands=(), lines=(Series("P", (-1.0, 2.0, 3.0)),), y_unit="W")
    assert "P" in svg(power)
    nothing = replace(PLOT, bands=(), lines=(Series("P", (float("nan"),) * 3),))
    assert svg(nothing)


def test_only_svg_and_png(monkeypatch: pytest.MonkeyPatch) -> None:
    assert pictures.form_of("a/b.SVG") == "svg"
    with pytest.raises(equiv.UsageError, match=r"name it \.svg or \.png"):
        pictures.form_of("a.pdf")


def test_without_matplotlib_it_says_how_to_get_it(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setattr(pictures, "find_spec", lambda name: None)
    with pytest.raises(equiv.UsageError, match="not installed") as caught:
        pictures.form_of("a.svg")
    assert caught.value.diagnostics[0].hint == (
        'install it with: python -m pip install "equiv[plot]"'
    )


def test_nothing_but_a_picture_imports_matplotlib(run_python: Callable[[str], int]) -> None:
    code = (
        "import sys, equiv\n"
        "n = equiv.parse('frequency 1 Hz\\nvoltage V +a -gnd 1 V\\nresistor R a gnd 1 ohm\\n')\n"
        "equiv.sweep(n, 'I:R', start='1 Hz', stop='2 Hz', points=3).render()\n"
        "sys.exit('matplotlib' in sys.modules)"
    )
    assert run_python(code) == 0


@pytest.fixture
def run_python() -> Callable[[str], int]:
    return lambda code: subprocess.run([sys.executable, "-c", code], check=False).returncode
