"""What `import equiv` gives: cheap, complete, and spelt in one place."""

import tomllib
from pathlib import Path

import pytest

import equiv
from equiv.analyses.result import PROGRAM


def test_the_names_are_sorted_and_shown():
    assert equiv.__all__ == sorted(equiv.__all__)
    assert dir(equiv) == equiv.__all__


@pytest.mark.parametrize("name", equiv.__all__)
def test_every_name_is_there(name: str):
    assert getattr(equiv, name) is getattr(equiv, name)


def test_a_name_that_is_not_there():
    with pytest.raises(AttributeError, match="no attribute 'nonsense'"):
        _ = equiv.nonsense


def test_one_version():
    project = tomllib.loads((Path(__file__).parents[3] / "pyproject.toml").read_text())
    assert project["project"]["version"] == equiv.__version__
    assert f"equiv {equiv.__version__}" == PROGRAM
