"""What the names in formulas stand for."""

from __future__ import annotations

from collections.abc import Iterator

from equiv.equations.symbolic.solver import FormulaSolver

_MOST_LISTED = 24


def symbols_data(solver: FormulaSolver) -> tuple[tuple[str, str], ...]:
    """The symbols whose names are not simply those of their elements, and what they are."""
    return tuple(
        (named.name, named.meaning if named.part or named.name == named.element else named.element)
        for named in solver.named
        if not named.plain
    )


def legend_of(solver: FormulaSolver) -> Iterator[str]:
    """The same in sentences, and which elements are symbols although they were not named."""
    special = [f"{n.name} is the {n.meaning}" for n in solver.named if not n.plain]
    if special:
        more = len(special) - _MOST_LISTED
        rest = f"; and {more} more" if more > 0 else ""
        yield f"In the formulas {'; '.join(special[:_MOST_LISTED])}{rest}."
    kept = list(dict.fromkeys(solver.made.symbols.kept))
    if kept:
        yield (
            f"Symbols although they were not named, since their values are complex or "
            f"irrational: {', '.join(kept)}."
        )
