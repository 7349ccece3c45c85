"""Bytes into lines: decoding, sizes, and the characters that a text must not have."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterator
from hashlib import sha256
from pathlib import Path, PureWindowsPath

from equiv.errors import Diagnostic, FileAccessError
from equiv.language.limits import MOST_BYTES, MOST_LINE
from equiv.language.mistakes import Mistake

_ALLOWED = bytes([9, 10, *range(32, 127)])
FORBIDDEN = re.compile(
    "[\x00-\x08\x0b-\x1f\x7f-\x9f\u2028\u2029\u202a-\u202e\u2066-\u2069\ud800-\udfff\ufeff]"
)


class Text:
    """The lines of one file, and what it is called."""

    def __init__(self, name: str, text: str) -> None:
        self.name = name
        text = text.removeprefix("\ufeff").replace("\r\n", "\n")
        if not text.isascii():
            # One spelling of an accented letter, so that names that look alike are alike.
            text = unicodedata.normalize("NFC", text)
        self.text = text
        self.lines = text.split("\n")

    def mistakes(self) -> Iterator[tuple[int, Mistake]]:
        """Lines that cannot be read at all, with what is wrong: number from 0, mistake."""
        if max(map(len, self.lines)) > MOST_LINE:
            for number, line in enumerate(self.lines):
                if len(line) > MOST_LINE:
                    yield number, _too_long(len(line))
        clean = self.text.isascii() and not self.text.encode().translate(None, _ALLOWED)
        if not clean and FORBIDDEN.search(self.text):
            for number, line in enumerate(self.lines):
                if match := FORBIDDEN.search(line):
                    yield number, _forbidden(match)


def _too_long(length: int) -> Mistake:
    return Mistake(
        "line-too-long",
        f"the line has {length} characters; at most {MOST_LINE} are read",
        (0, length),
        hint="a \\ at a line's end continues the statement on the next line",
    )


def _forbidden(match: re.Match[str]) -> Mistake:
    character = match.group()
    name = unicodedata.name(character, "control character")
    return Mistake(
        "control-character",
        f"the line contains U+{ord(character):04X} ({name.lower()}), which cannot be read",
        (match.start(), 1),
    )


def digest(data: bytes) -> str:
    """The SHA-256 of a text's bytes."""
    return sha256(data).hexdigest()


def read_bytes(path: Path, spent: int = 0) -> bytes:
    """A file's bytes; `FileAccessError` if it cannot be read or is too large.

    `spent` are the bytes of the files read before it.
    """
    most = MOST_BYTES - spent
    try:
        with path.open("rb") as file:
            data = file.read(most + 1)
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or "it is not the name of a file"
        raise FileAccessError(
            Diagnostic("cannot-read", f"cannot read {path.name or path}: {reason}")
        ) from None
    if len(data) > most:
        raise FileAccessError(
            Diagnostic(
                "file-too-large",
                f"{path.name} has more than {MOST_BYTES} bytes, with the files that it reads",
            )
        )
    return data


def decoded(data: bytes, name: str) -> str:
    """The text of a file, which must be UTF-8."""
    try:
        return data.decode("utf-8")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        raise FileAccessError(
            Diagnostic(
                "cannot-read",
                f"cannot read {name}: line {line} is not UTF-8 text",
                hint="save the file as plain text in UTF-8",
            )
        ) from None


def included_path(name: str, place: tuple[int, int], folder: Path, root: Path) -> Path:
    """The file that a `read` statement names, which must lie inside the root folder."""
    if Path(name).is_absolute() or PureWindowsPath(name).drive or PureWindowsPath(name).root:
        raise Mistake(
            "absolute-path",
            "a file is named relative to this one's folder",
            place,
            hint='as in: read "parts/amplifier.equiv"',
        )
    try:
        path = (folder / name).resolve()
        if not path.is_relative_to(root):
            raise Mistake("outside-folder", f"{name} is outside the network's folder", place)
        if not path.is_file():
            raise Mistake("cannot-read", f"there is no file {name} here", place)
    except (OSError, ValueError, RuntimeError):
        raise Mistake("cannot-read", f"cannot read {name}", place) from None
    return path
