"""What is wrong with a statement, while it is being read: a place in it, and words."""

from __future__ import annotations

from collections.abc import Iterable

from equiv.errors import Span, nearest


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
        near = nearest(*self.near) if self.near is not None else None
        return near or self._hint


class AlreadyReported(Exception):  # noqa: N818 (it is no error of its own)
    """The statement rests on something whose mistake is reported elsewhere."""
