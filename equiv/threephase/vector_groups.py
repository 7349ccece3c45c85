"""Vector groups by IEC 60076-1: from text, turned round, and back into text.

Source: IEC 60076-1:2011, clause 7 (from memory).
"""

from __future__ import annotations

import re

from equiv.threephase.model import VectorGroup, Winding

_GROUP = re.compile(r"([A-Z])(N?)([a-z])(n?)([0-9]{1,2})")
_ANY_CASE = re.compile(r"([ydz]n?)([ydz]n?)([0-9]{1,2})", re.IGNORECASE)
_EVEN = "groups of two stars, of two deltas, or of a zigzag with a delta"
_ODD = "groups of a star with a delta or a zigzag"


def read_group(text: str) -> VectorGroup | str:
    """The group of a text, high voltage first; in words what is wrong where it is none."""
    match = _GROUP.fullmatch(text)
    if match is None:
        return f"{text} is not a vector group"
    high, high_neutral, low, low_neutral, clock = match.groups()
    low = low.upper()
    for letter, neutral in ((high, high_neutral), (low, low_neutral)):
        if letter not in "YDZ":
            return f"{text}: a winding is Y, D or Z"
        if letter == "D" and neutral:
            return f"{text}: a delta has no neutral"
    if high == low == "Z":
        return f"{text}: a zigzag stands beside a star or a delta"
    hours = int(clock)
    if hours > 11:
        return f"{text}: the clock number runs from 0 to 11"
    odd = (high == "Y") != (low == "Y")
    if odd != bool(hours % 2):
        kinds, parity = (_ODD, "odd") if odd else (_EVEN, "even")
        return f"{text}: {kinds} have {parity} clock numbers"
    return VectorGroup(Winding(high, bool(high_neutral)), Winding(low, bool(low_neutral)), hours)


def group_meant(text: str) -> str | None:
    """The group that a text with capitals and small letters mixed up was meant to be."""
    match = _ANY_CASE.fullmatch(text)
    if match is None:
        return None
    meant = f"{match[1].upper()}{match[2].lower()}{match[3]}"
    return meant if meant != text and not isinstance(read_group(meant), str) else None


def turned(group: VectorGroup) -> VectorGroup:
    """The same windings with the other side first."""
    return VectorGroup(group.second, group.first, -group.clock % 12)


def write_group(group: VectorGroup) -> str:
    """The text of a group whose high side is first."""
    first = group.first.connection + "N" * group.first.neutral_out
    second = group.second.connection.lower() + "n" * group.second.neutral_out
    return f"{first}{second}{group.clock}"
