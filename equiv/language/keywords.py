"""The words that begin a statement that is not an element."""

from equiv.language import definitions, statements

HANDLERS = {**statements.register, **definitions.register}

STATEMENTS: dict[str, str] = {
    name: handler.read.__doc__ or "" for name, handler in HANDLERS.items()
}
"""One line of help for each, from its handler."""
