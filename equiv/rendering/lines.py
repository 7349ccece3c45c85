"""Lines of text on a grid of columns: width, filling and wrapping at blanks."""

from __future__ import annotations

from collections.abc import Sequence

from equiv.errors import display_width


def widest(texts: Sequence[str]) -> int:
    """The columns that the widest text takes."""
    return max(map(len if "".join(texts).isascii() else display_width, texts), default=0)


def fill(texts: Sequence[str], width: int, right: bool) -> list[str]:
    """Each text filled with blanks to a width."""
    if "".join(texts).isascii():
        return [text.rjust(width) if right else text.ljust(width) for text in texts]
    blanks = [" " * (width - display_width(text)) for text in texts]
    pairs = zip(texts, blanks, strict=True)
    return [blank + text if right else text + blank for text, blank in pairs]


def wrap(text: str, width: int, hanging: str = "") -> list[str]:
    """A text in lines broken at blanks only; a word wider than `width` stands alone."""
    lines: list[str] = []
    line = ""
    for word in text.split():
        longer = f"{line} {word}" if line.strip() else line + word
        if line.strip() and display_width(longer) > width:
            lines.append(line)
            longer = hanging + word
        line = longer
    return [*lines, line]
