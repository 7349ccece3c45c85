"""Slips in writing a number: a decimal comma, j before its number, i for j."""

from __future__ import annotations

import re

_COMMA = re.compile(r"(?<=[0-9]),(?=[0-9])")
_THOUSANDS = re.compile(r"[+-]?[1-9][0-9]{0,2}(?:,[0-9]{3})+(?![0-9,.])")
_J_FIRST = re.compile(r"(^|[+-])[ij]\*?([0-9][0-9.]*(?:[eE][+-]?[0-9]+)?)")
_I_BEHIND = re.compile(r"(?<=[0-9.])i(?![A-Za-z])")


def number_meant(text: str) -> str | None:
    """A hint how a number is written that a text was perhaps meant to be."""
    with_point = _COMMA.sub(".", text)
    with_j = _I_BEHIND.sub("j", _J_FIRST.sub(r"\1\2j", with_point))
    if with_j != with_point:
        return f"j stands behind its number: {with_j}"
    if _THOUSANDS.match(text):
        return f"write a decimal point: {with_point}, or no comma at all: {_COMMA.sub('', text)}"
    return f"write a decimal point: {with_point}" if with_point != text else None
