"""Names of elements, nodes and parameters."""

from __future__ import annotations

import re
import unicodedata

from equiv.language.limits import MOST_NAME
from equiv.language.mistakes import Mistake

_NAME = re.compile(r"\w(?:[\w.:/']*[\w./'])?")
_PARAMETER = re.compile(r"[^\W\d][\w.']*")

NAME_RULE = "a name is a letter, digit or _ first, then letters, digits and _ . : / '"


def is_name(text: str) -> bool:
    """Whether a text may name an element or a node."""
    if _NAME.fullmatch(text):
        return True
    if text.isascii():
        return False
    # Vowel signs and accents of many scripts are marks, which `\w` does not know.
    bare = "".join(c for c in text[1:] if unicodedata.category(c)[0] != "M")
    return _NAME.fullmatch(text[0] + bare) is not None


def is_parameter(text: str) -> bool:
    """Whether a text has the form of a parameter's name."""
    return _PARAMETER.fullmatch(text) is not None


def require_name(text: str, at: int, wanted: str) -> str:
    """The text, which must be a name."""
    if _NAME.fullmatch(text) and len(text) <= MOST_NAME:
        return text
    if not is_name(text):
        raise Mistake(
            "bad-name",
            f"expected {wanted}; found {text or 'nothing'}",
            (at, len(text)),
            hint=NAME_RULE,
        )
    if len(text) > MOST_NAME:
        raise Mistake(
            "name-too-long",
            f"the name has {len(text)} characters; at most {MOST_NAME} are read",
            (at, len(text)),
        )
    return text
