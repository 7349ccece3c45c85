"""Parameters as a Touchstone file, version 1.1, in Hz and real and imaginary parts."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from equiv.elements.tabulated import Tabulated

_MOST_PAIRS = 4


def write_touchstone(table: Tabulated, comments: Sequence[str] = ()) -> str:
    """The text of a file: s as it is, z and y normalised by the reference.

    Two-ports are written N11 N21 N12 N22; from three ports on each row begins a line, with at most
    four pairs on it. Every number reads back as it was, but for the rounding of z·R and y/R.
    """
    # a product rounds once; one with a reciprocal would round twice
    r = table.reference
    divided, factor = {"z": (r, 1.0), "y": (1.0, r)}.get(table.form, (1.0, 1.0))
    matrices = [[x * factor / divided for x in matrix] for matrix in table.matrices]
    lines = [
        *(f"! {_plain(comment)}" for comment in comments),
        f"# Hz {table.form.upper()} RI R {_word(table.reference)}",
    ]
    for hertz, matrix in zip(table.hertz, matrices, strict=True):
        lines += _point(hertz, matrix, table.ports)
    return "\n".join(lines) + "\n"


def _plain(text: str) -> str:
    """A comment in one line of printable ASCII, which is all that the format has."""
    return "".join(c if " " <= c <= "~" else "?" for c in text)


def _point(hertz: float, matrix: list[complex], ports: int) -> Iterator[str]:
    rows = [matrix[r * ports : (r + 1) * ports] for r in range(ports)]
    if ports == 2:
        rows = [[matrix[0], matrix[2], matrix[1], matrix[3]]]
    start = _word(hertz)
    for row in rows:
        for at in range(0, ports if ports > 2 else len(row), _MOST_PAIRS):
            pairs = (f"{_word(x.real)} {_word(x.imag)}" for x in row[at : at + _MOST_PAIRS])
            yield f"{start} {' '.join(pairs)}"
            start = " " * len(start)


def _word(number: float) -> str:
    return repr(float(number) + 0.0).removesuffix(".0")
