"""Tables as LaTeX fragments for any class and any engine, without packages."""

from __future__ import annotations

import re
import unicodedata
from collections.abc import Iterator, Sequence

from equiv.analyses.tables import Cell, FormulaText, Fractions, Row, Table
from equiv.errors import printable
from equiv.rendering.columns import Drawn, drawn_columns
from equiv.rendering.marks import UNICODE

_SPECIALS = {
    "\\": r"\textbackslash{}", "{": r"\{", "}": r"\}", "$": r"\$", "&": r"\&", "#": r"\#",
    "^": r"\textasciicircum{}", "_": r"\_", "~": r"\textasciitilde{}", "%": r"\%",
    "<": r"\textless{}", ">": r"\textgreater{}", "|": r"\textbar{}", '"': r"\char34{}",
    "`": r"\char96{}", "[": "{[}", "]": "{]}", "*": "{*}",
    "°": r"$^\circ$", "∠": r"$\angle$", "±": r"$\pm$", "×": r"$\times$", "·": r"$\cdot$",
    "≤": r"$\le$", "≥": r"$\ge$", "√": r"$\surd{}$", "−": "$-$", "–": "--", "—": "---",
    "Σ": r"$\Sigma$", "→": r"$\to$", "¹": "$^1$", "²": "$^2$", "³": "$^3$", "⁻": "$^-$",
    "≈": r"$\approx$", "≠": r"$\neq$", "∞": r"$\infty$", "…": r"\ldots{}", "µ": r"$\mu{}$",
    "\u2126": r"$\Omega$", "“": "``", "”": "''", "’": "'",
}  # fmt: skip
_GREEK = {
    "ALPHA", "BETA", "GAMMA", "DELTA", "EPSILON", "ZETA", "ETA", "THETA", "IOTA", "KAPPA", "LAMDA",
    "MU", "NU", "XI", "PI", "RHO", "SIGMA", "TAU", "UPSILON", "PHI", "CHI", "PSI", "OMEGA",
}  # fmt: skip
_LARGE_GREEK = {
    "GAMMA", "DELTA", "THETA", "LAMDA", "XI", "PI", "SIGMA", "UPSILON", "PHI", "PSI", "OMEGA",
}  # fmt: skip
_ACCENTS = {
    "\u0300": "`", "\u0301": "'", "\u0302": "^", "\u0303": "~", "\u0308": '"', "\u030a": "r",
    "\u0327": "c", "\u030c": "v", "\u0304": "=", "\u0306": "u", "\u0307": ".", "\u030b": "H",
}  # fmt: skip
_PLAIN_WORDS = {"Ω": "ohm", "\u2126": "ohm", "µ": "u", "μ": "u", "∠": "@", "β": "beta", "±": "+-"}
BROAD = 6
"""Columns beyond which a table is set small, to fit a page."""
_FIGURE = re.compile(r"(-?[\d.]+)(?:e([-+]\d+))?")


def draw(tables: Sequence[Table], digits: int = 5) -> str:
    """Tables as LaTeX: a paragraph heading, a tabular and the notes each."""
    return "\n".join("\n".join(_table(table, digits)) + "\n" for table in tables)


def literal(text: str) -> str:
    """A text that LaTeX sets as it is, whatever the encoding of its fonts."""
    signs = []
    before = ""
    for sign in printable(text):
        if sign == before and sign in "-',":
            signs.append("{}")
        signs.append(_sign(sign))
        before = sign
    return "".join(signs)


def _sign(sign: str) -> str:
    """One character; what LaTeX's own fonts lack is given by its number."""
    if sign in _SPECIALS:
        return _SPECIALS[sign]
    if sign.isascii():
        return sign
    words = unicodedata.name(sign, "").split()
    if words[:1] == ["GREEK"] and words[-1] in _GREEK and len(words) == 4:
        name = words[-1].replace("LAMDA", "LAMBDA")
        if words[1] == "SMALL":
            return f"$\\{name.lower()}{{}}$"
        if words[-1] in _LARGE_GREEK:
            return f"$\\{name.capitalize()}{{}}$"
    parts = unicodedata.normalize("NFD", sign)
    if len(parts) == 2 and parts[0].isascii() and parts[0].isalpha() and parts[1] in _ACCENTS:
        return f"\\{_ACCENTS[parts[1]]}{{{parts[0]}}}"
    # A bare bracket behind a row's end would be the argument of `\\`.
    return f"{{[}}U+{ord(sign):04X}{{]}}"


def figure(text: str) -> str:
    """A drawn number, with its angle and unit, as a formula."""
    parts = []
    for part in text.split():
        number = _FIGURE.fullmatch(part.rstrip("°"))
        if part == "∠":
            parts.append(r"\angle ")
        elif number is None:
            parts.append(r"\,\mathrm{" + literal(part).replace("$", "") + "}")
        else:
            power = rf"\times10^{{{int(number[2])}}}" if number[2] else ""
            parts.append(number[1] + power + ("^\\circ" if part.endswith("°") else ""))
    return f"${''.join(parts).removeprefix(chr(92) + ',')}$"


def _table(table: Table, digits: int) -> Iterator[str]:
    for words, face in ((table.title, r"\textbf"), *((words, "") for words in table.subtitles)):
        if words:
            yield rf"\noindent {face}{{{literal(words)}}}\par"
    text = table.text_in(unicode=False)
    if text is not None:
        yield r"\begin{verbatim}"
        yield from map(_verbatim, text.splitlines())
        yield r"\end{verbatim}"
    elif table.columns:
        yield from _tabular(drawn_columns(table, digits, UNICODE), table.rows)
    if table.notes:
        yield r"\begin{itemize}"
        yield from (rf"\item {{}}{literal(note)}" for note in table.notes)
        yield r"\end{itemize}"


def _verbatim(line: str) -> str:
    """A line in verbatim, where nothing can be escaped: it must not end the environment."""
    safe = "".join(_PLAIN_WORDS.get(sign) or _verbatim_sign(sign) for sign in printable(line))
    return safe.replace(r"\end{verbatim", r"\end {verbatim")


def _verbatim_sign(sign: str) -> str:
    return sign if sign.isascii() or _sign(sign).startswith("\\") else f"[U+{ord(sign):04X}]"


def _tabular(columns: Sequence[Drawn], rows: Sequence[Row]) -> Iterator[str]:
    ranged = "".join("r" if c.right else "l" for c in columns)
    if len(columns) > BROAD:
        yield r"{\footnotesize\setlength{\tabcolsep}{3pt}"
    yield rf"\noindent\begin{{tabular}}{{{ranged}}}"
    yield _line([literal(column.name) for column in columns])
    if any(column.unit for column in columns):
        yield _line([figure(c.unit) if c.unit else "" for c in columns])
    yield r"\hline"
    first = next((i for i, column in enumerate(columns) if not column.right), None)
    above = True
    for number, row in enumerate(rows):
        cells = [
            _cell(cell, column.texts[number])
            for cell, column in zip(row.cells, columns, strict=True)
        ]
        if first is not None:
            cells[first] = r"\quad " * row.level + cells[first]
        if row.total and not above:
            yield r"\hline"
        above = row.total
        yield _line(cells)
    yield r"\end{tabular}\par" + ("}" if len(columns) > BROAD else "")


def _cell(cell: Cell, text: str) -> str:
    """A text or a number; blanks behind a number stand for digits that it does not have."""
    if isinstance(cell, FormulaText):
        return f"${cell.latex()}$"
    if isinstance(cell, Fractions) and not cell.long:
        return f"${cell.text}$" + (rf"\,{figure(UNICODE.unit('', cell.unit))}" if cell.unit else "")
    if cell is None or isinstance(cell, str | Fractions):
        return literal(text.strip())
    number = text.rstrip()
    missing = "0" * (len(text) - len(number))
    phantom = rf"\phantom{{{missing}}}" if missing and _FIGURE.fullmatch(number.strip()) else ""
    return figure(number) + phantom


def _line(cells: Sequence[str]) -> str:
    return " & ".join(cells) + r" \\"
