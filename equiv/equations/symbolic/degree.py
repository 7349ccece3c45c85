"""The degree in s of formulas that are too long to be written out."""

from __future__ import annotations

from collections.abc import Sequence
from functools import reduce

from flint import nmod_mat, nmod_poly

from equiv.equations.symbolic.bordered import MARKER, Bordered
from equiv.equations.symbolic.modular import PRIME, Point

MOST_WORK = 10**9
"""Of eliminations, their number times the cube of the unknowns: a few seconds."""


def degree_in_s(matrix: Bordered, point: Point) -> int | None:
    """The degree of the denominator in s, what it has in common with all numerators taken out.

    All symbols but s are at a random point modulo a large prime; the determinants, at so many
    values of s that their polynomials follow. None where that would take too long.
    """
    entries = _entries(matrix, point)
    least, most = [0] * (matrix.size + 1), [0] * (matrix.size + 1)
    for row, _, _, power in entries:
        least[row], most[row] = min(least[row], power), max(most[row], power)
    bound = sum(most) - sum(least)
    if bound * matrix.size**3 > MOST_WORK:
        return None
    places: list[int] = []
    found: list[list[int]] = []
    s = 1
    while len(places) <= bound:
        s += 1
        values = _determinants(matrix, entries, least, s)
        if values is not None:
            places.append(s)
            found.append(values)
    polynomials = [_through(places, values) for values in zip(*found, strict=True)]
    common = reduce(lambda a, b: a.gcd(b), polynomials)
    return int(polynomials[0].degree() - common.degree())


_Entry = tuple[int, int, int, int]
"""Row, column (the sources behind the unknowns), coefficient at the point, power of s."""


def _entries(matrix: Bordered, point: Point) -> list[_Entry]:
    found = []
    for entry in matrix.entries:
        if entry.drive != MARKER:
            column = entry.column if entry.drive is None else matrix.size + entry.drive
            value = point.of_part(entry.part._replace(s=0))
            found.append((entry.row, column, value, entry.part.s))
    return found


def _determinants(
    matrix: Bordered, entries: Sequence[_Entry], least: Sequence[int], s: int
) -> list[int] | None:
    """D and every N_k at one s, each row times a power that leaves none of 1/s; None where D = 0."""
    size = matrix.size
    table = [[0] * (size + matrix.sources) for _ in range(size + 1)]
    for row, column, value, power in entries:
        table[row][column] += value * pow(s, power - least[row], PRIME)
    own = nmod_mat([[x % PRIME for x in row[:size]] for row in table[:size]], PRIME)
    right = nmod_mat([[x % PRIME for x in row[size:]] for row in table[:size]], PRIME)
    try:
        solved = own.solve(right).tolist()
    except ZeroDivisionError:
        return None
    last, determinant = table[size], int(own.det())
    scale = pow(s, -least[size], PRIME)
    found = [determinant * scale]
    for k in range(matrix.sources):
        less = sum(last[j] * int(solved[j][k]) for j in range(size))
        found.append(determinant * (last[size + k] - less))
    return [value % PRIME for value in found]


def _through(places: Sequence[int], values: Sequence[int]) -> nmod_poly:
    """The polynomial through points (I. Newton)."""
    slopes = list(values)
    for step in range(1, len(places)):
        for i in range(len(places) - 1, step - 1, -1):
            run = pow(places[i] - places[i - step], -1, PRIME)
            slopes[i] = (slopes[i] - slopes[i - 1]) * run % PRIME
    found = nmod_poly([0], PRIME)
    for place, slope in zip(reversed(places), reversed(slopes), strict=True):
        found = found * nmod_poly([-place % PRIME, 1], PRIME) + slope
    return found
