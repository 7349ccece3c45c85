"""Transformers whose rated voltages do not agree with their buses."""

from __future__ import annotations

from equiv.threephase.declaring import Problem
from equiv.threephase.kinds.transformer import Transformer
from equiv.threephase.words import level_words

MOST_OFF = 0.10
DOUBTFUL_OFF = 0.03


def ratio_off(item: Transformer) -> float:
    """How far the rated ratio (without the tap) is from that of the buses, as a fraction."""
    first, second = item.rated_voltages
    ratio = first.real / second.real
    nominal = item.first.volts / item.second.volts
    return abs(ratio / nominal - 1)


def _reversed(item: Transformer) -> bool:
    """Whether the rated voltages would fit if they changed sides."""
    first, second = item.rated_voltages
    turned = second.real / first.real
    return abs(turned * item.second.volts / item.first.volts - 1) <= MOST_OFF


def _words(item: Transformer) -> str:
    first, second = (level_words(side.real) for side in item.rated_voltages)
    return (
        f"{item.name} is rated {first} to {second}, and its buses {item.first.name} and "
        f"{item.second.name} are at {level_words(item.first.volts)} and "
        f"{level_words(item.second.volts)}: {100 * ratio_off(item):.1f} % apart"
    )


def wrong_ratio(item: Transformer) -> Problem | None:
    """That a transformer cannot be meant for its buses."""
    if ratio_off(item) <= MOST_OFF:
        return None
    hint = "the first voltage is that of the side named first"
    words = _words(item)
    if _reversed(item):
        words = f"{words.rpartition(':')[0]}: reversed"
        hint = f"exchange the voltages or the buses: {hint}"
    return Problem("wrong-ratio", words, "rated_voltages", hint)


def doubtful_ratio(item: Transformer) -> str | None:
    """In words, that a ratio is hardly meant."""
    return _words(item) if ratio_off(item) >= DOUBTFUL_OFF else None
