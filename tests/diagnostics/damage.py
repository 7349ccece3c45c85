"""Texts damaged at random: pieces cut out, words and pieces of other texts put in."""

from __future__ import annotations

import random
from collections.abc import Sequence


def damaged(seed: int, texts: Sequence[str], words: Sequence[str], most: int) -> str:
    """One of some texts with up to `most` damages."""
    chooser = random.Random(seed)
    text = chooser.choice(texts)
    for _ in range(chooser.randint(1, most)):
        start = chooser.randrange(len(text) + 1)
        stop = min(len(text), start + chooser.choice([0, 0, 1, 1, 5, 40]))
        other = chooser.choice(texts)
        cut = chooser.randrange(len(other) + 1)
        put = chooser.choice(
            ["", chooser.choice(words), f" {chooser.choice(words)} ", other[cut : cut + 30]]
        )
        text = text[:start] + put + text[stop:]
    return text
