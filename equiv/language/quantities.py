"""The words for quantities: `V:a`, `V:a,b`, `V:R3`, `I:R3`, `P:R3`, `V2:T1`, `I3:N1`."""

from __future__ import annotations

import re

from equiv.elements.quantity import Quantity
from equiv.errors import Diagnostic, Span, UsageError
from equiv.language.mistakes import Mistake
from equiv.language.names import require_name

_FORM = re.compile(r"([VIP])([1-9][0-9]{0,2})?:(.*)", re.DOTALL)
FORMS = "quantities are written V:a, V:a,b, V:R3, I:R3 or P:R3"


def read_quantity(text: str, at: int) -> Quantity:
    """The quantity that a word stands for; `at` is the word's offset in its statement."""
    place = (at, len(text))
    match = _FORM.fullmatch(text)
    if match is None:
        better = text[:1].upper() + text[1:]
        hint = f"write it with a capital: {better}" if _FORM.fullmatch(better) else FORMS
        raise Mistake("bad-quantity", f"expected a quantity; found {text}", place, hint=hint)
    what, number, rest = match.groups()
    names, start = [], at + match.start(3)
    for name in rest.split(","):
        names.append(require_name(name, start, "a name"))
        start += len(name) + 1
    if len(names) > 2 or (len(names) == 2 and (what != "V" or number)):
        raise Mistake(
            "bad-quantity",
            f"{text} names {len(names)} things; only a voltage is between two, and they are nodes",
            place,
            hint=FORMS,
        )
    pair = int(number or 1) - 1
    if what == "P" and pair:
        raise Mistake(
            "bad-quantity",
            f"{text}: a power is that of the whole element",
            place,
            hint=f"write P:{names[0]}",
        )
    return Quantity(what, tuple(names), pair)


def quantity(text: str) -> Quantity:
    """The quantity that a word stands for; `UsageError` if it is none."""
    try:
        return read_quantity(text, 0)
    except Mistake as mistake:
        at, length = mistake.place
        span = Span("quantity", 1, at + 1, max(1, length), text)
        raise UsageError(Diagnostic(mistake.code, mistake.message, span, mistake.hint)) from None
