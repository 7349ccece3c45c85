"""What is wrong with a statement, while it is being read: a place in it, and words."""

from __future__ import annotations

from collections.abc import Iterable
from itertools import islice

from equiv.errors import Span, nearest

_MOST_LOOKED_AT = 20_000
_MOST_COMPARED = 500
_LONGEST_WORD = 80


class Mistake(Exception):  # noqa: N818 (it is reported, never raised to a caller)
    """An error at a place of a statement; `near` is a wrong word and what it may have meant."""

    def __init__(
        self,
        code: str,
        message: str,
        place: tuple[int, int],
        *,
        hint: str | None = None,
        near: tuple[str, Iterable[str]] | None = None,
        related: tuple[tuple[Span, str], ...] = (),
    ) -> None:
        super().__init__(message)
        self.code = code
        self.message = message
        self.place = place
        self.near = near
        self.related = related
        self._hint = hint

    @property
    def hint(self) -> str | None:
        """What to do about it; looked for only when it is shown."""
        near = did_you_mean(*self.near) if self.near is not None else None
        return near or self._hint


class AlreadyReported(Exception):  # noqa: N818 (it is no error of its own)
    """The statement rests on something whose mistake is reported elsewhere."""


def did_you_mean(word: str, known: Iterable[str]) -> str | None:
    """A hint that names the known word most like a wrong one, however many are known."""
    some = islice(known, _MOST_LOOKED_AT)
    alike = [k for k in some if abs(len(k) - len(word)) <= 2 and len(word) <= _LONGEST_WORD]
    if len(alike) > _MOST_COMPARED:
        alike = [k for k in alike if k[0] == word[0]][:_MOST_COMPARED]
    same = [k for k in alike if k.casefold() == word.casefold()]
    return nearest(word, same or alike)
