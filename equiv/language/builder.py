"""A network made in code: each call is a statement, and the one reader reads them all."""

from __future__ import annotations

from collections.abc import Callable, Sequence
from dataclasses import replace
from decimal import Decimal
from fractions import Fraction
from pathlib import Path
from typing import Any

from equiv.elements import KINDS, Element
from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic, UsageError
from equiv.language.amounts import read_amount
from equiv.language.connections import shape, write_connection
from equiv.language.drafts import written_as
from equiv.language.files import FORBIDDEN
from equiv.language.loading import parse
from equiv.language.mistakes import Mistake
from equiv.language.names import NAME_RULE, is_name
from equiv.language.options import OPTIONS
from equiv.language.quantities import quantity as read_quantity
from equiv.language.words import Statement, Words, quoted
from equiv.network import NOWHERE, Network
from equiv.units import Rectangular, write_number, write_value

Given = str | int | float | complex | Decimal | Fraction


class Builder:
    """A network, statement by statement; every kind of element is a method.

    `Builder().resistor("R1", "a", "b", "4.7 kohm").network()`. A method takes the element's name,
    its nodes in the order of the language (without marks), and its value; everything that has
    a word before it in the language is a keyword argument (`senses="V:p,n"`, `gain=2e5`,
    `z=(10, 2, 2, 8)`, `label="…"`). Numbers are in SI units. Nothing given can be read as more
    than the one word that it stands for.
    """

    def __init__(self, title: str | None = None) -> None:
        self._lines: list[str] = []
        if title is not None:
            self.title(title)

    def __getattr__(self, kind: str) -> Callable[..., Builder]:
        if kind not in KINDS:
            raise AttributeError(f"there is no kind of element called {kind}")

        def add(name: str, *words: Given, **options: Any) -> Builder:
            return self._add(_element(KINDS[kind], name, words, options))

        add.__name__ = kind
        add.__doc__ = KINDS[kind].__doc__
        return add

    def __dir__(self) -> list[str]:
        return sorted({*super().__dir__(), *KINDS})

    def title(self, text: str) -> Builder:
        """The heading of every output."""
        return self._add(f"title {_text(text)}")

    def note(self, text: str) -> Builder:
        """A note that is carried into reports."""
        return self._add(f"note {_text(text)}")

    def ground(self, node: str) -> Builder:
        """The reference node."""
        return self._add(f"ground {_name(node)}")

    def frequency(self, value: Given) -> Builder:
        """The frequency of the steady state, in hertz unless it says rad/s."""
        return self._add(f"frequency {_value(value)}")

    def phasors(self, word: str) -> Builder:
        """What the magnitude of a source means: rms or peak."""
        return self._add(f"phasors {_name(word)}")

    def given(self, name: str, value: Given) -> Builder:
        """A parameter."""
        return self._add(f"given {_name(name)} = {_value(value)}")

    def find(self, quantity: str | Quantity, label: str | None = None) -> Builder:
        """A quantity that the network is about."""
        behind = f" {_text(label)}" if label is not None else ""
        return self._add(f"find {_quantity(quantity)}{behind}")

    def port(self, name: str, plus: str, minus: str) -> Builder:
        """A named terminal pair."""
        return self._add(f"port {_name(name)} +{_name(plus)} -{_name(minus)}")

    def network(self, folder: Path | None = None) -> Network:
        """The network; `NetworkFileError` with every mistake, as for a file.

        `folder` is where files that elements take their parameters from are looked for.
        """
        made = parse("\n".join(self._lines), name="builder", folder=folder)
        return replace(made, origin=NOWHERE, places=())

    def _add(self, line: str) -> Builder:
        self._lines.append(line)
        return self


def _element(
    kind: type[Element], name: str, words: Sequence[Given], options: dict[str, Any]
) -> str:
    """The statement of an element."""
    form = shape(kind.kind)
    count = len(form.marks)
    if form.repeats:  # everything but nodes has a keyword
        count = max(count, len(words) - len(words) % count)
    ends, values = words[:count], words[count:]
    if len(ends) < count:
        raise _unusable(f"{kind.kind} {name} needs {count} names of what it joins", kind)
    parts = [kind.kind, _name(name), *write_connection(kind, tuple(map(_name, ends)))]
    fields = list(kind.fields)
    if kind.rule == "all" and values:
        for field in (f for f in fields if f.form != "file"):
            taken, values = values[: len(field.units)], values[len(field.units) :]
            if field.form == "ratio":
                taken, values = (taken[:1], (*taken[1:], *values))
            parts.extend([field.keyword or "", *map(_value, taken)])
    if values:
        raise _unusable(f"{kind.kind} {name} was given too many values", kind)
    for field in fields:
        for word in (field.keyword or field.name, *field.aliases):
            if word in options:
                given, write = options.pop(word), _text if field.form == "file" else _value
                parts.extend([field.keyword or "", *map(write, _sequence(given))])
    parts.extend(_option(word, options[word], kind) for word in options)
    return " ".join(part for part in parts if part)


def _sequence(value: Any) -> Sequence[Given]:
    return value if isinstance(value, list | tuple) else (value,)


def _option(word: str, value: Any, kind: type[Element]) -> str:
    """An option, or what is sensed."""
    if word == "senses":
        return f"senses {_quantity(value)}"
    if word not in OPTIONS:
        raise _unusable(f"{kind.kind} has no option {word}", kind)
    if word == "label":
        return f"label {_text(value)}"
    if word == "group":
        return f"group {_name(value)}"
    if word == "tolerance" and not isinstance(value, str):
        return f"tolerance {write_number(Decimal(_value(value)).scaleb(2))}%"
    return f"{word} {_one_word(value) if word == 'tolerance' else _value(value)}"


def _name(name: Any) -> str:
    if not isinstance(name, str) or not is_name(name):
        raise UsageError(Diagnostic("bad-name", f"{name!r} is not a name", hint=NAME_RULE))
    return name


def _one_word(text: str) -> str:
    if not text or text.split() != [text] or '"' in text or "#" in text:
        raise UsageError(Diagnostic("bad-value", f"{text!r} is not one word"))
    return text


def _text(text: Any) -> str:
    if not isinstance(text, str) or "\n" in text or FORBIDDEN.search(text):
        raise UsageError(
            Diagnostic("bad-text", f"{text!r} is not one line of printable characters")
        )
    return quoted(text)


def _quantity(quantity: Any) -> str:
    if isinstance(quantity, Quantity):
        quantity = str(quantity)
    if not isinstance(quantity, str):
        raise UsageError(Diagnostic("bad-quantity", f"{quantity!r} is not a quantity"))
    read_quantity(quantity)
    return quantity


def _value(value: Any) -> str:
    """A value's words; a text must be one value and nothing more."""
    if isinstance(value, str):
        return _checked(value)
    if isinstance(value, bool) or not isinstance(value, int | float | complex | Decimal | Fraction):
        raise UsageError(Diagnostic("bad-value", f"{value!r} is not a value"))
    if isinstance(value, complex):
        parts = (_exact(value.real), _exact(value.imag))
        return write_value(Rectangular(*parts), "")
    return write_number(_exact(value))


def _exact(value: int | float | Decimal | Fraction) -> Decimal | Fraction:
    if isinstance(value, Fraction):
        return value
    number = value if isinstance(value, Decimal) else Decimal(repr(value))
    if not number.is_finite():
        raise UsageError(Diagnostic("bad-value", f"{value!r} is not a finite number"))
    return number


def _checked(text: str) -> str:
    """The text, if the language reads it as one value from its first word to its last."""
    if "\n" in text or "\\" in text or FORBIDDEN.search(text):
        raise UsageError(Diagnostic("bad-value", f"{text!r} is not a value"))
    statement = Statement("value", 1, text)
    try:
        words = Words(statement)
        if words.comment or "#" in text:
            raise Mistake("bad-value", "a value has no comment", (0, len(text)))
        read_amount(words)
        words.end()
    except Mistake as mistake:
        span = statement.span(mistake.place)
        raise UsageError(Diagnostic(mistake.code, mistake.message, span, mistake.hint)) from None
    return text


def _unusable(message: str, kind: type[Element]) -> UsageError:
    return UsageError(Diagnostic("wrong-arguments", message, hint=written_as(kind.kind)))
