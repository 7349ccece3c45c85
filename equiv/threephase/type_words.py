"""What else the types of fault are called."""

from __future__ import annotations

from equiv.errors import nearest

_ALSO = {
    "three-phase": "3ph lll lllg 3p 3-phase threephase 3phase three symmetrical balanced abc",
    "line-ground": "lg slg slgf l-g 1ph 1-phase single-phase single-line-ground line-earth "
    "phase-earth phase-ground line-to-ground line-to-earth earth ground earth-fault le l-e",
    "line-line": "ll l-l 2ph 2-phase two-phase phase-phase line-to-line phase-to-phase bc",
    "line-line-ground": "llg dlg l-l-g 2phg double-line-ground line-line-earth lle "
    "two-phase-earth phase-phase-earth line-to-line-to-ground",
}


def type_meant(word: str) -> str | None:
    """A hint at the type of fault that a word was perhaps meant to be."""
    bare = word.casefold().replace("_", "-").replace(" ", "-")
    for name, words in _ALSO.items():
        if bare in words.split():
            return f"did you mean {name}?"
    return nearest(bare, [*_ALSO, "all"])
