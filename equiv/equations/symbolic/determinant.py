"""The determinant of a sparse matrix of polynomials, by rows with its minors remembered.

A polynomial is a dict from keys to integers. The low bits of a key are the symbols of a term,
one bit each; the degree in s stands above them. Every symbol stands in the matrix as σ·u·vᵀ, so
that the determinant is linear in it: a product that repeats one cancels, and is left out at once.

Rows are taken one by one; what is remembered is, for every set of columns that the rows so far
can have used, their minor. A set that has left out a column which no later row has is dropped, so
that few are alive at a time where the order of the rows keeps the frontier small.
"""

from __future__ import annotations

from collections.abc import Mapping, Sequence

from equiv.equations.symbolic.amount import TooLargeError

Terms = dict[int, int]
"""A polynomial: its coefficients by the key of the term."""
MatrixRow = Mapping[int, Terms]
"""The entries of a row that are not zero, by their column."""


def determinant(rows: Sequence[MatrixRow], symbols: int, most_terms: int) -> Terms:
    """The determinant, but for its sign, which the order of the rows decides.

    Arguments: the rows of a square matrix; the bits of a key that are symbols; how many terms
    may be held at a time.
    Errors: TooLargeError beyond that.
    """
    minors: dict[int, Terms] = {0: {0: 1}}
    for entries, finished in _in_order(rows):
        minors = _with_row(minors, entries, finished, symbols)
        if sum(map(len, minors.values())) > most_terms:
            raise TooLargeError
    return minors.get((1 << len(rows)) - 1, {})


def _with_row(
    minors: dict[int, Terms], entries: Sequence[tuple[int, Terms]], finished: int, symbols: int
) -> dict[int, Terms]:
    """The minors of one row more, by Laplace's expansion along it."""
    longer: dict[int, Terms] = {}
    for used, minor in minors.items():
        for column, entry in entries:
            bit = 1 << column
            now = used | bit
            if used & bit or now & finished != finished:
                continue
            odd = (used >> column).bit_count() & 1
            _add_product(longer.setdefault(now, {}), entry, minor, odd, symbols)
    return {used: cleared(minor) for used, minor in longer.items()}


def _add_product(into: Terms, entry: Terms, minor: Terms, odd: int, symbols: int) -> None:
    for key, factor in entry.items():
        own = key & symbols
        number = -factor if odd else factor
        if not into:  # the first product has nothing to add to
            into.update({k + key: number * c for k, c in minor.items() if not k & own})
            continue
        for other, coefficient in minor.items():
            if not other & own:
                product = other + key
                into[product] = into.get(product, 0) + number * coefficient


def cleared(terms: Terms) -> Terms:
    """Without the terms that have cancelled."""
    return {k: c for k, c in terms.items() if c} if 0 in terms.values() else terms


def _in_order(rows: Sequence[MatrixRow]) -> list[tuple[list[tuple[int, Terms]], int]]:
    """The rows in an order that keeps few columns open, each with the columns that it closes.

    A column is open from the first row that has it to the last one; the next row is the one that
    leaves the fewest open.
    """
    masks = [sum(1 << column for column in row) for row in rows]
    waiting = set(range(len(rows)))
    left = [0] * len(rows)
    for row in rows:
        for column in row:
            left[column] += 1
    seen, found = 0, []
    last = sum(1 << column for column, count in enumerate(left) if count == 1)
    while waiting:
        _, best = min(
            [((masks[r] & ~seen).bit_count() - (masks[r] & last).bit_count(), r) for r in waiting]
        )
        waiting.remove(best)
        found.append((list(rows[best].items()), masks[best] & last))
        seen |= masks[best]
        for column in rows[best]:
            left[column] -= 1
            if left[column] == 1:
                last |= 1 << column
    return found
