"""A result as text, and where the text goes: standard output, or a file that is written whole."""

from __future__ import annotations

import os
from pathlib import Path

from equiv.analyses.result import Result
from equiv.cli.environment import Environment, silence
from equiv.cli.options import Form, Settings
from equiv.errors import Diagnostic, FileAccessError, printable
from equiv.rendering import json, terminal
from equiv.rendering.marks import UNICODE


def text_of(result: Result, form: Form, settings: Settings, environment: Environment) -> str:
    """The result in the form that was asked for."""
    if form == "json":
        return json.draw(result.to_dict())
    if form != "table":
        return result.render(form, settings.digits)
    to_file = settings.output is not None
    plain = result.plain_text()
    if plain is not None:
        shown = environment.out_is_terminal and not to_file
        return "\n".join(map(printable, plain.split("\n"))) if shown else plain
    tables = result.tables(settings.digits)
    if to_file:
        return terminal.draw(tables, settings.digits)
    unicode = _can_write("".join(UNICODE), environment.encoding)
    return terminal.draw(tables, settings.digits, environment.width, unicode)


def _can_write(signs: str, encoding: str) -> bool:
    try:
        signs.encode(encoding)
    except (LookupError, UnicodeError):
        return False
    return True


def print_text(text: str, environment: Environment) -> None:
    """Text on standard output; a reader that has gone away has read enough."""
    try:
        environment.out.write(text)
        environment.out.flush()
    except BrokenPipeError:
        silence(environment.out)
    except OSError as error:
        silence(environment.out)
        raise FileAccessError(
            Diagnostic("cannot-write", f"standard output cannot be written: {error.strerror}")
        ) from None


def require_writable(path: Path, force: bool) -> None:
    """Complain of an output file before the work rather than after it."""
    try:
        # a link whose target is missing is there all the same
        there = path.exists() or path.is_symlink()
        is_file, has_folder = path.is_file() or not path.exists(), path.parent.is_dir()
    except OSError as error:
        raise _refusal(path, f"cannot be written: {error.strerror}") from None
    if there and not is_file:
        raise _refusal(path, "is not a file that can be overwritten")
    if there and not force:
        raise _refusal(path, "exists already", "--force overwrites it")
    if not has_folder:
        raise _refusal(path, "cannot be written: its folder does not exist")


def write_whole(text: str | bytes, path: Path, force: bool) -> None:
    """A file written whole or not at all: beside its place first, then moved into it."""
    require_writable(path, force)
    # A link is written through, not replaced.
    target = path.resolve()
    beside = target.with_name(f".{target.name[:200]}.{os.getpid()}.part")
    try:
        data = text if isinstance(text, bytes) else text.encode("utf-8", "backslashreplace")
        with beside.open("xb") as stream:
            stream.write(data)
            stream.flush()
            os.fsync(stream.fileno())
        _move(beside, target, force)
    except FileExistsError:
        raise _refusal(path, "exists already", "--force overwrites it") from None
    except OSError as error:
        raise _refusal(path, f"cannot be written: {error.strerror}") from None
    finally:
        beside.unlink(missing_ok=True)


def _move(beside: Path, target: Path, force: bool) -> None:
    """Without force a link fails where another process has made the file meanwhile."""
    if force:
        beside.replace(target)
        return
    try:
        target.hardlink_to(beside)
    except FileExistsError:
        raise
    except OSError:  # a file system without links
        beside.replace(target)


def _refusal(path: Path, reason: str, hint: str | None = None) -> FileAccessError:
    return FileAccessError(Diagnostic("cannot-write", f"{path.name or path} {reason}", hint=hint))
