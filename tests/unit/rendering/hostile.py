"""Texts that try to be markup, escape codes, formulas or code, for every form."""

from equiv.analyses.tables import Column, Row, Table

HOSTILE = (
    "\x1b[31mred\x1b[0m",
    "\u202eevil",
    "=cmd|' /C calc'!A0",
    "+1+1",
    "-2+3",
    "@SUM(A1)",
    "\t=1+1",
    "\r=1+1",
    "<script>alert(1)</script>",
    "<b>bold</b>&amp;",
    "**bold** _it_ `code` [link](http://x.example) ![i](x)",
    "| a | b |",
    "# heading",
    "- item",
    "1. item",
    "www.evil.example me@evil.example https://evil.example",
    "---",
    "a\n\n## b",
    "\\input{/etc/passwd} $x^2$ % comment & # _ ~ { }",
    "\\end{tabular}",
    "\\end{verbatim}\\input{x}",
    '"quoted, "" text"',
    "$\\write18{rm}$",
    "[red]x[/red]",
    "a--b,,c''d",
)


def hostile_table() -> Table:
    """A table in which every text is hostile."""
    return Table(
        HOSTILE[8],
        subtitles=(HOSTILE[16], HOSTILE[10]),
        columns=(Column(HOSTILE[10], key=True), Column(HOSTILE[2], "A")),
        rows=tuple(Row((text, 1.0)) for text in HOSTILE),
        notes=(HOSTILE[13], HOSTILE[18]),
    )
