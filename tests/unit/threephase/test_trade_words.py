"""Words of the trade lead to keywords, and are none themselves."""

from __future__ import annotations

import pytest

from equiv.threephase.kinds import KINDS
from equiv.threephase.language import trade_words
from equiv.threephase.language.statements import HANDLERS
from equiv.threephase.loading import parse, require_system
from equiv.threephase.type_words import type_meant
from equiv.threephase.vector_groups import group_meant, read_group


def test_every_hint_is_a_keyword() -> None:
    assert {keyword.name for keyword in trade_words._KINDS} <= {*KINDS, *HANDLERS}
    fields = {word for kind in KINDS.values() for word in kind.words}
    assert {keyword.name for keyword in trade_words._FIELDS} <= fields


@pytest.mark.parametrize("kind", KINDS)
def test_what_a_kind_reads_has_no_hint_elsewhere(kind: str) -> None:
    assert trade_words.kind_meant(kind) is None


def test_a_parameter_may_have_such_a_name() -> None:
    system = require_system(
        parse(
            "three-phase 50 Hz\ngiven earthed = 9 ohm\nbus A 11 kV\n"
            "generator G A 3 MVA 11 kV x1 15% x0 6% neutral earthed"
        )
    )
    assert system.items["G"].neutral() == 9  # type: ignore[attr-defined]


@pytest.mark.parametrize(
    ("text", "meant"),
    [
        ("ynd11", "YNd11"), ("YND11", "YNd11"), ("yND11", "YNd11"), ("dyN5", "Dyn5"),
        ("Dyn11", None), ("dyn10", None), ("xyn11", None),
    ],
)  # fmt: skip
def test_groups_in_the_wrong_case(text: str, meant: str | None) -> None:
    assert group_meant(text) == meant
    assert meant is None or not isinstance(read_group(meant), str)


@pytest.mark.parametrize(
    ("word", "meant"),
    [
        ("LG", "line-ground"), ("slg", "line-ground"), ("line-earth", "line-ground"),
        ("3ph", "three-phase"), ("LL", "line-line"), ("LLG", "line-line-ground"),
        ("lin-line", "line-line"), ("bolt", None),
    ],
)  # fmt: skip
def test_types_by_other_words(word: str, meant: str | None) -> None:
    assert type_meant(word) == (meant and f"did you mean {meant}?")
