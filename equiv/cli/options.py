"""The options that every command shares, declared once, and how a command takes them."""

from __future__ import annotations

import inspect
from collections.abc import Callable, Sequence
from copy import copy
from dataclasses import dataclass
from functools import wraps
from typing import TYPE_CHECKING, Annotated, Any, Literal, NamedTuple, get_args, get_type_hints

import typer

from equiv.cli.run import Run
from equiv.errors import Diagnostic, UsageError

if TYPE_CHECKING:
    from equiv.analyses.result import Result

Form = Literal["table", "json", "csv", "markdown", "latex"]
By = Annotated[
    Literal["source", "group"], typer.Option(help="A term for each source or each group.")
]
Exactly = Annotated[
    bool,
    typer.Option("--exact", help="Rational arithmetic: fractions beside decimals, checks are 0."),
]


@dataclass(frozen=True)
class Settings:
    """The values of the shared options; each field is the declaration of one."""

    given: Annotated[
        list[str] | None,
        typer.Option(metavar="NAME=VALUE", help="Another value for a parameter; may repeat."),
    ] = None
    frequency: Annotated[
        str | None,
        typer.Option(metavar="VALUE", help="Another frequency for the file: 60Hz, 314rad/s."),
    ] = None
    as_: Annotated[
        Form | None,
        typer.Option(
            "--as", metavar="FORM", help="table (the default), json, csv, markdown or latex."
        ),
    ] = None
    json: Annotated[bool, typer.Option("--json", help="Short for --as json.")] = False
    digits: Annotated[
        int, typer.Option(min=1, max=17, metavar="N", help="Significant digits in tables.")
    ] = 5
    output: Annotated[
        str | None, typer.Option(metavar="PATH", help="Write to a file, whole or not at all.")
    ] = None
    force: Annotated[bool, typer.Option("--force", help="Overwrite the output file.")] = False
    quiet: Annotated[bool, typer.Option("--quiet", help="No messages and no progress bar.")] = False
    traceback: Annotated[
        bool, typer.Option("--traceback", help="Show where in the program an error came from.")
    ] = False

    @property
    def form(self) -> Form:
        """What is printed."""
        if self.json and self.as_ not in (None, "json"):
            raise UsageError(
                Diagnostic(
                    "two-forms", f"--json and --as {self.as_} ask for two forms", hint="give one"
                )
            )
        return "json" if self.json else self.as_ or "table"

    @property
    def parameters(self) -> dict[str, str]:
        """The parameters given on the command line, as text."""
        found: dict[str, str] = {}
        for words in self.given or ():
            name, equals, value = (part.strip() for part in words.partition("="))
            if not (name and equals and value):
                raise UsageError(
                    Diagnostic(
                        "not-a-parameter",
                        f"expected NAME=VALUE behind --given; found {words}",
                        hint="for example: --given Rload=10ohm",
                    )
                )
            found[name] = value
        return found


_COMMON = tuple(inspect.signature(Settings, eval_str=True).parameters.values())


class Request(NamedTuple):
    """What the words of a command line ask for; nothing has been done yet."""

    work: Callable[[Run], Result]
    settings: Settings


def shared(command: Callable[..., Result], refused: Sequence[str] = ()) -> Callable[..., Request]:
    """The command with the shared options behind its own; called, it gives a request.

    Those that it always refuses are not in its help; given all the same, the refusal says why.
    """
    # Results are imported when there are any; start-up does without them.
    hints = get_type_hints(command, localns={"Result": Any}, include_extras=True)
    _, *own = inspect.signature(command).parameters.values()
    own = [parameter.replace(annotation=hints[parameter.name]) for parameter in own]

    @wraps(command)
    def request(**words: Any) -> Request:
        settings = Settings(**{option.name: words.pop(option.name) for option in _COMMON})
        return Request(lambda run: command(run, **words), settings)

    keyword = inspect.Parameter.KEYWORD_ONLY
    common = [_hidden(option) if option.name in refused else option for option in _COMMON]
    parameters = [parameter.replace(kind=keyword) for parameter in (*own, *common)]
    request.__signature__ = inspect.Signature(parameters)  # type: ignore[attr-defined]
    request.__annotations__ = {p.name: p.annotation for p in parameters}
    return request


def _hidden(option: inspect.Parameter) -> inspect.Parameter:
    """An option that is read and not offered."""
    annotation, declared = get_args(option.annotation)
    declared = copy(declared)
    declared.hidden = True
    return option.replace(annotation=Annotated[annotation, declared])
