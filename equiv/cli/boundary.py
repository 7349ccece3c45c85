"""The one place where errors end: words (or JSON) and an exit status for each."""

from __future__ import annotations

import re
import traceback
from collections.abc import Sequence
from itertools import pairwise
from pathlib import Path

import typer

from equiv.cli import (  # noqa: F401
    fault_command,
    load_command,
    loadtest_command,
    match_command,
    sweep_command,
)
from equiv.cli.commands import app
from equiv.cli.environment import Environment, silence
from equiv.cli.formula_options import with_values
from equiv.cli.options import Request
from equiv.cli.progress import ProgressBar
from equiv.cli.run import Run
from equiv.errors import Diagnostic, EquivError, ExitStatus, UsageError, printable

# The root of what typer raises for wrong words; it has no public name in every version.
_WrongWords: type[Exception] = typer.BadParameter.__mro__[2]


def run(words: Sequence[str], environment: Environment) -> int:
    """Do what the words of a command line ask for; the exit status."""
    try:
        asked = _read(words)
        return _perform(asked, environment) if isinstance(asked, Request) else int(asked or 0)
    except KeyboardInterrupt:
        environment.tell("interrupted")
        return ExitStatus.INTERRUPTED
    except BrokenPipeError:
        silence(environment.out)
        return ExitStatus.DONE
    except EquivError as error:
        return _report(error, error.diagnostics, error.exit_status, words, environment)
    except Exception as error:
        return _report(error, (_internal(error),), ExitStatus.INTERNAL, words, environment)


def _read(words: Sequence[str]) -> Request | int | None:
    """The words as a request; a status where typer has done all there is to do (help)."""
    try:
        command = typer.main.get_command(app)
        asked: Request | int | None = command.main(
            list(with_values(words)),
            prog_name="equiv",
            standalone_mode=False,
            windows_expand_args=False,
        )
    except _WrongWords as error:
        raise _usage_error(error) from None
    return asked


def _usage_error(error: Exception) -> UsageError:
    """What typer says of wrong words, in this program's form."""
    message = str(error.format_message() if hasattr(error, "format_message") else error)
    message = " ".join(message.split()).removesuffix(".")
    context = getattr(error, "ctx", None)
    path = context.command_path if context is not None else "equiv"
    hint = _type_meant(message) or f"{path} --help shows what is expected"
    return UsageError(Diagnostic("usage", message[:1].lower() + message[1:], hint=hint))


def _type_meant(message: str) -> str | None:
    """A hint at the type of fault, where a word for it is wrong."""
    match = re.search(r"'--type': '(.+?)' is not one of", message)
    if match is None:
        return None
    from equiv.threephase.type_words import type_meant

    return type_meant(match[1])


def _perform(request: Request, environment: Environment) -> int:
    """Make the result and deliver it."""
    # What draws is imported only now: help and usage errors do without it.
    from equiv.cli.output import print_text, require_writable, text_of, write_whole

    settings = request.settings
    form = settings.form
    path = None if settings.output is None else Path(settings.output)
    if path is not None:
        require_writable(path, settings.force)
    with ProgressBar(environment, settings.quiet) as progress:
        run = Run(environment, settings.parameters, settings.frequency, progress, settings.force)
        result = request.work(run)
    text = text_of(result, form, settings, environment)
    if path is None:
        print_text(text, environment)
    else:
        write_whole(text, path, settings.force)
    return result.exit_status


def _internal(error: Exception) -> Diagnostic:
    reason = " ".join(str(error).split())
    kind = type(error).__name__
    return Diagnostic(
        "internal",
        f"an error of the program itself: {kind}{': ' + reason if reason else ''}; "
        "run again with --traceback",
    )


def _report(
    error: Exception,
    diagnostics: Sequence[Diagnostic],
    status: ExitStatus,
    words: Sequence[str],
    environment: Environment,
) -> int:
    if "--traceback" in words:
        lines = "".join(traceback.format_exception(error)).splitlines()
        environment.tell("\n".join(map(printable, lines)))
    if wants_json(words):
        from equiv.cli.output import print_text
        from equiv.rendering import json

        try:
            print_text(json.draw(error_object(diagnostics)), environment)
        except EquivError as second:
            environment.tell(str(second))
    else:
        environment.tell("\n\n".join(map(str, diagnostics)))
    return status


def wants_json(words: Sequence[str]) -> bool:
    """Whether JSON is asked for, even by words that are wrong otherwise."""
    return bool({"--json", "--as=json"} & set(words)) or ("--as", "json") in pairwise(words)


def error_object(diagnostics: Sequence[Diagnostic]) -> dict[str, object]:
    """The JSON object of errors."""
    return {"schema": "equiv/error/1", "errors": [_error(d) for d in diagnostics]}


def _error(diagnostic: Diagnostic) -> dict[str, object]:
    span = diagnostic.span
    return {
        "code": diagnostic.code,
        "message": diagnostic.message,
        "file": span.file if span else None,
        "line": span.line if span else None,
        "column": span.column if span else None,
        "length": span.length if span else None,
        "hint": diagnostic.hint,
    }
