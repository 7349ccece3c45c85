"""The README and the manual show what the program really prints."""

import re
import runpy
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
MANUAL = runpy.run_path(str(ROOT / "docs" / "generate.py"))


@pytest.mark.parametrize("path", MANUAL["PAGES"], ids=lambda path: path.name)
def test_page_is_fresh(path: Path) -> None:
    page = path.read_text(encoding="utf-8")
    assert MANUAL["same"](MANUAL["fresh"](page), page), "run: python docs/generate.py"


def test_the_comparison_sees_what_matters() -> None:
    same = MANUAL["same"]
    assert same("a  1.2e-16 V\n", "a 3.4e-17 V\n")
    assert not same("a 1.2345 V", "a 1.2346 V")
    assert not same("along", "against")
    assert not same("1.0 kA", "1.0 A")


def test_every_link_leads_somewhere() -> None:
    for path in MANUAL["PAGES"]:
        for target in re.findall(r"\]\(([^)#:]+)(?:#[^)]*)?\)", path.read_text(encoding="utf-8")):
            assert (path.parent / target).exists(), (path.name, target)
