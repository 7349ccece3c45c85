"""The README and the manual show what the program really prints."""

import runpy
from pathlib import Path

import pytest

ROOT = Path(__file__).resolve().parents[2]
MANUAL = runpy.run_path(str(ROOT / "docs" / "generate.py"))


@pytest.mark.parametrize("path", MANUAL["PAGES"], ids=lambda path: path.name)
def test_page_is_fresh(path: Path) -> None:
    page = path.read_text(encoding="utf-8")
    assert MANUAL["fresh"](page) == page, "run: python docs/generate.py"


def test_every_link_leads_somewhere() -> None:
    import re

    for path in MANUAL["PAGES"]:
        for target in re.findall(r"\]\(([^)#:]+)(?:#[^)]*)?\)", path.read_text(encoding="utf-8")):
            assert (path.parent / target).exists(), (path.name, target)
