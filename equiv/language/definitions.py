"""The statements that define: parameters, blocks and their instances."""

from __future__ import annotations

import re
from collections.abc import Callable

from equiv.language.amounts import Amount, Later, Place, Written, read_amount
from equiv.language.blocks import Block, Body, Use, local_parameter
from equiv.language.dimensions import PER_SECOND
from equiv.language.expressions import RESERVED
from equiv.language.handlers import Reading, Registry, opened
from equiv.language.mistakes import Mistake
from equiv.language.names import is_parameter, require_name
from equiv.language.numerals import UNITS
from equiv.language.reports import Argument
from equiv.language.scope import Definition, Parameter, Scope
from equiv.language.words import Statement, Word, Words

register = Registry()


@register(in_blocks=True)
def given(reading: Reading, body: Body, statement: Statement) -> None:
    """given NAME = VALUE: a parameter, to be used in values."""
    define(reading, body, statement, read_amount)


def define(
    reading: Reading, body: Body, statement: Statement, read: Callable[[Words], Written]
) -> None:
    """Define a parameter, whose value `read` takes from the words."""
    words = opened(statement)
    word = _parameter_name(words)
    _equals(words, f"given {word.text} = VALUE")
    start = words.taken
    written = read(words)
    place = words.stretch(start)
    words.end(near=UNITS)
    _require_new(body, word)
    top = body.outer is None
    if top and word.text in reading.given:
        override, argument = reading.given[word.text]
        written = _overriding(written, override, argument)
        body.definitions[word.text] = definition(written, argument, (0, len(argument.text)), top)
    else:
        body.definitions[word.text] = definition(written, statement, place, top)


def _require_new(body: Body, word: Word) -> None:
    """A parameter is defined once, in a `given` or as a block's own."""
    first = body.definitions.get(word.text)
    if first is not None:
        span = first.statement.span(first.place)
    elif isinstance(body, Block) and word.text in body.parameters:
        span = body.statement.span((0, len(body.statement.text)))
    else:
        return
    raise Mistake(
        "given-twice",
        f"the parameter {word.text} is defined twice",
        word.place,
        related=((span, "first defined here"),),
    )


def _overriding(written: Written, override: Written, argument: Argument) -> Written:
    """The value given to the function, in the unit of the one in the file."""
    if isinstance(written, Later) or isinstance(override, Later) or not written.unit:
        return override
    if override.unit not in (None, written.unit):
        raise Mistake(
            "wrong-unit",
            f"{argument.text} is not in the unit of the file's value, {written.unit}",
            (0, len(argument.text)),
        )
    return Amount(override.value, written.unit)


def definition(written: Written, statement: Statement, place: Place, top: bool) -> Definition:
    """How a parameter comes to its value."""

    def evaluate(scope: Scope) -> Parameter:
        parameter = local_parameter(written, scope, place, top)
        if top and parameter.unit == PER_SECOND:
            raise Mistake(
                "hertz-or-radians",
                "the value may be in Hz or in rad/s",
                place,
                hint="write the unit behind the parenthesis: (…) rad/s",
            )
        return parameter

    return Definition(evaluate, statement, place)


def _parameter_name(words: Words) -> Word:
    word = words.take("a parameter's name")
    require_name(word.text, word.at, "a parameter's name")
    if not is_parameter(word.text):
        raise Mistake(
            "bad-name",
            f"{word.text} cannot name a parameter",
            word.place,
            hint="a parameter's name is a letter or _ first, then letters, digits and _ . '",
        )
    if word.text in RESERVED or word.text in UNITS:
        what = "a unit" if word.text in UNITS else "a word of expressions"
        raise Mistake(
            "reserved-name", f"{word.text} is {what}; a parameter needs another name", word.place
        )
    return word


def _equals(words: Words, form: str) -> None:
    word = words.take("=", f"write it as: {form}")
    if word.text != "=":
        raise Mistake(
            "missing-equals", f"expected =; found {word.text}", word.place,
            hint=f"write it as: {form}",
        )  # fmt: skip


@register(in_blocks=True)
def block(reading: Reading, body: Body, statement: Statement) -> None:
    """block NAME (pin …) param=VALUE … : a reusable piece, up to `end`."""
    words = opened(statement)
    block = Block("", statement, body)
    reading.enter(block)
    word = words.next
    block.name = words.name("a block's name")
    first = body.blocks.get(block.name)
    body.blocks.setdefault(block.name, block)
    block.pins, _ = _in_parentheses(words, "pins", "block NAME (pin …) param=VALUE …")
    if len(set(block.pins)) < len(block.pins):
        raise Mistake("given-twice", "two pins have one name", words.stretch(2))
    while words.peek():
        name = _parameter_name(words)
        if name.text in block.parameters:
            raise Mistake("given-twice", f"{name.text} is given twice", name.place)
        block.parameters[name.text] = None
        if words.peek() == "=":
            words.take("=")
            start = words.taken
            value = read_amount(words)
            default = definition(value, statement, words.stretch(start), False)
            block.parameters[name.text] = default
    if first is not None:
        raise Mistake(
            "name-taken",
            f"there is already a block called {block.name}",
            word.place,
            related=((first.statement.span((0, len(first.statement.text))), "first defined here"),),
        )


def _in_parentheses(words: Words, what: str, form: str) -> tuple[tuple[str, ...], Place]:
    """The names in parentheses that stand next."""
    word = words.take(f"the {what} in parentheses", f"write it as: {form}")
    if word.text[0] != "(" or word.text[-1] != ")":
        raise Mistake(
            "missing-parentheses",
            f"expected the {what} in parentheses; found {word.text}",
            word.place,
            hint=f"write it as: {form}",
        )
    inside = re.finditer(r"\S+", word.text[1:-1])
    return tuple(
        require_name(m.group(), word.at + 1 + m.start(), "a node") for m in inside
    ), word.place


@register(in_blocks=True)
def use(reading: Reading, body: Body, statement: Statement) -> None:
    """use BLOCK NAME (node …) param=VALUE … : an instance of a block."""
    form = "use BLOCK NAME (node …) param=VALUE …"
    words = opened(statement)
    kind = words.next
    name_of_block = words.name("a block's name", f"write it as: {form}")
    name = words.name("a name for the instance", f"write it as: {form}")
    nodes, pins_place = _in_parentheses(words, "nodes", form)
    arguments: dict[str, tuple[Written, Place]] = {}
    while words.peek():
        word = _parameter_name(words)
        _equals(words, f"{word.text}=VALUE")
        if word.text in arguments:
            raise Mistake("given-twice", f"{word.text} is given twice", word.place)
        arguments[word.text] = (read_amount(words), word.place)
    body.entries.append(
        Use(name_of_block, name, nodes, arguments, statement, kind.place, pins_place)
    )


@register(in_blocks=True)
def end(reading: Reading, body: Body, statement: Statement) -> None:
    """end: the end of a block."""
    words = opened(statement)
    reading.leave()
    words.end()
