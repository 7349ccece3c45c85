"""CSV, Markdown, LaTeX, HTML and JSON: what is in them, and what can never be in them."""

import csv
import io
import json
import re
from html.parser import HTMLParser

import pytest
from markdown_it import MarkdownIt
from unit.rendering.examples import AC, DC
from unit.rendering.hostile import HOSTILE, hostile_table

from equiv.analyses.result import DRAWERS
from equiv.analyses.tables import Column, Measure, Row, Table
from equiv.errors import printable
from equiv.rendering import csv as csv_form
from equiv.rendering import html as html_form
from equiv.rendering import json as json_form
from equiv.rendering import latex, markdown

FORMULA_SIGNS = "=+-@\t\r"


def test_every_form_is_registered():
    assert set(DRAWERS) == {"table", "csv", "markdown", "latex", "html"}
    for form in DRAWERS.values():
        assert "Vmain" in form([DC], 5)
        assert form([DC], 5).endswith("\n")


# ---- CSV


def test_csv_has_units_in_its_heading_and_si_base_units():
    assert csv_form.draw([DC]) == (
        "source,kind,value,value unit,coefficient,coefficient unit,contribution [A],share,"
        "running sum [A],second method [A],relative difference,row\n"
        "Vmain,voltage,240.0,V,0.026316,S,6315.84,0.6479,6315.84,6315.84,1.2e-16,term\n"
        "standby,group,,,,,3432.1,0.3521,9747.94,9747.94,0.0,term\n"
        "Vgen,voltage,236.0,V,0.0145,S,3434.1,,,,,member\n"
        "Iaux,current,-0.002,A,1.0,,-2.0,,,,,member\n"
        "sum,,,,,,9747.94,1.0,,9747.94,,total\n"
    )


def test_csv_complex_numbers_are_two_columns():
    rows = list(csv.reader(io.StringIO(csv_form.draw([AC]))))
    assert rows[0] == [
        "node",
        "voltage_re [V]",
        "voltage_im [V]",
        "source value_re",
        "source value_im",
        "source value unit",
        "row",
    ]
    assert rows[1] == ["a", "3.0", "4.0", "120.0", "-3.0", "V", "term"]
    assert rows[3] == ["x", "", "", "", "", "", "term"]


def test_csv_numbers_keep_every_bit():
    values = (0.1 + 0.2, 1 / 3, 5e-324, 1.7976931348623157e308, -0.0)
    table = Table("", columns=(Column("x", "V"),), rows=Table.rows_of([[v] for v in values]))
    _, *rows = csv.reader(io.StringIO(csv_form.draw([table])))
    assert [float(row[0]) for row in rows] == list(values)
    assert rows[-1] == ["0.0"]


def test_csv_negative_numbers_are_not_formulas_but_texts_are():
    drawn = csv_form.draw([hostile_table()])
    assert "\r" not in drawn
    rows = list(csv.reader(io.StringIO(drawn)))
    assert len(rows) == 1 + len(HOSTILE)
    assert not any(cell.startswith(tuple(FORMULA_SIGNS)) for row in rows for cell in row)
    assert rows[3][0] == "'=cmd|' /C calc'!A0"
    table = Table("", columns=(Column("x"),), rows=(Row((-1.5,)), Row((" =1",)), Row(("＝1",))))
    assert csv_form.draw([table]) == "x\n-1.5\n' =1\n'＝1\n"


def test_csv_of_several_tables():
    assert csv_form.draw(
        [Table("", columns=(Column("n"),), rows=(Row((3,)),), name="counts"), AC]
    ) == (
        "table,n\ncounts,3\n\n"
        "table,node,voltage_re [V],voltage_im [V],source value_re,source value_im,"
        "source value unit,row\n"
        "table,a,3.0,4.0,120.0,-3.0,V,term\n"
        "table,名前,-0.001,0.0,1e-09,0.0,ohm,term\n"
        "table,x,,,,,,term\n"
        "table,sum,-5.0,0.0,0.0,0.0,V,total\n"
    )


def test_csv_leaves_out_what_has_words_only():
    words = Table("Checks", notes=("passed",))
    assert csv_form.draw([AC, words]) == csv_form.draw([AC])


def test_csv_of_a_text():
    assert csv_form.draw([Table("t", text="a, b\n=c\n")]) == 'text\n"a, b"\n\'=c\n'


# ---- Markdown


def test_markdown_table():
    assert markdown.draw([AC], 3) == (
        "## Voltages\n\n"
        "| node | voltage (V) | source value |\n"
        "| :--- | ---: | ---: |\n"
        "| a | 5.00 ∠ 53° | 120 ∠ -1° V |\n"
        "| 名前 | 0.0010 ∠ 180° | 1.00 ∠ 0° nΩ |\n"
        "| x | – | – |\n"
        "| **sum** | **5.00 ∠ 180°** | **0.00 ∠ 0° V** |\n"
    )


def test_markdown_shows_members_under_their_group_and_notes_as_a_list():
    drawn = markdown.draw([DC])
    assert "| &emsp;Vgen | voltage | 236.00 V |" in drawn
    assert drawn.endswith("\n\n- " + DC.notes[0] + "\n")


def test_markdown_texts_come_out_as_literal_text():
    reader = MarkdownIt("commonmark").enable(["table", "strikethrough"])
    tokens = reader.parse(markdown.draw([hostile_table()]))
    kinds = {token.type for token in tokens}
    assert not kinds & {"html_block", "fence", "code_block", "hr", "ordered_list_open"}
    inlines = [token for token in tokens if token.type == "inline"]
    allowed = {"text", "text_special", "softbreak"}
    assert {child.type for token in inlines for child in token.children or []} <= allowed
    contents = ["".join(c.content for c in token.children or []) for token in inlines]
    for hostile in HOSTILE:
        assert printable(hostile).strip() in contents


def test_markdown_has_no_autolinks():
    drawn = markdown.draw([hostile_table()])
    assert not re.search(r"www\.|https://|\w@\w", drawn)


def test_markdown_code_cannot_be_closed_from_inside():
    drawn = markdown.draw([Table("t", text="a\n```\n````` b\n")])
    assert drawn == "## t\n\n``````\na\n```\n````` b\n``````\n"


# ---- LaTeX


def test_latex_table():
    assert latex.draw([AC]) == (
        "\\noindent \\textbf{Voltages}\\par\n"
        "\\noindent\\begin{tabular}{lrr}\n"
        "node & voltage & source value \\\\\n"
        " & $\\mathrm{V}$ &  \\\\\n"
        "\\hline\n"
        "a & $5.0000\\angle 53.13^\\circ$ & $120.04\\angle -1.43^\\circ\\,\\mathrm{V}$ \\\\\n"
        "{[}U+540D{]}{[}U+524D{]} & $0.0010\\angle 180.00^\\circ$ & "
        "$1.0000\\angle 0.00^\\circ\\,\\mathrm{n\\Omega{}}$ \\\\\n"
        "x & -- & -- \\\\\n"
        "\\hline\n"
        "sum & $5.0000\\angle 180.00^\\circ$ & $0.0000\\angle 0.00^\\circ\\,\\mathrm{V}$ \\\\\n"
        "\\end{tabular}\\par\n"
    )


def test_latex_has_only_the_commands_of_the_form():
    drawn = latex.draw([hostile_table()])
    assert drawn.isascii()
    known = {
        "noindent", "textbf", "par", "begin", "end", "hline", "quad", "item", "mathrm", "phantom",
        "textbackslash", "textasciicircum", "textasciitilde", "textless", "textgreater",
        "textbar", "char",
    }  # fmt: skip
    assert set(re.findall(r"\\([A-Za-z]+)", drawn)) <= known
    assert set(re.findall(r"\\(?:begin|end)\{(\w+)\}", drawn)) == {"tabular", "itemize"}
    assert drawn.count("\\begin") == drawn.count("\\end") == 2
    bare = re.sub(r"\\[\\{}$&#_%]", "", drawn)
    assert bare.count("{") == bare.count("}")
    assert bare.count("$") % 2 == 0
    assert "%" not in bare and "#" not in bare and "~" not in bare and "^" not in bare


def test_latex_rows_have_as_many_cells_as_the_heading():
    body = latex.draw([hostile_table()]).split("\\hline\n")[1].split("\\end{tabular}")[0]
    for row in body.splitlines():
        assert len(re.findall(r"(?<!\\)&", row)) == 1
        assert row.endswith(" \\\\")
        assert row[0] not in "[*"


def test_latex_letters():
    assert latex.literal("Åsa é Ω µ β_1 Δ 中") == (
        "\\r{A}sa \\'{e} $\\Omega{}$ $\\mu{}$ $\\beta{}$\\_1 $\\Delta{}$ {[}U+4E2D{]}"
    )
    assert latex.literal("λ Λ") == "$\\lambda{}$ $\\Lambda{}$"
    assert latex.literal("a--b") == "a-{}-b"


def test_latex_numbers():
    assert latex.figure("-1.2e-09") == "$-1.2\\times10^{-9}$"
    assert latex.figure("26.316 mS") == "$26.316\\,\\mathrm{mS}$"
    assert latex.figure("%") == "$\\mathrm{\\%}$"


def test_latex_verbatim_cannot_be_ended_from_inside():
    drawn = latex.draw([Table("", text="a\n\\end{verbatim}\\input{x}\n4.7 kΩ 中\n")])
    assert drawn.count("\\end{verbatim}") == 1
    assert drawn.splitlines()[-1] == "\\end{verbatim}"
    assert "4.7 kohm [U+4E2D]" in drawn


# ---- HTML


class Reader(HTMLParser):
    """The tags and the text of a page."""

    def __init__(self, page: str) -> None:
        super().__init__()
        self.tags: set[str] = set()
        self.attributes: set[str] = set()
        self.texts: list[str] = []
        self.feed(page)
        self.close()

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.add(tag)
        self.attributes |= {name for name, _ in attrs}

    def handle_data(self, data: str) -> None:
        self.texts.append(data)


def test_html_is_a_table_and_nothing_else():
    page = Reader(html_form.draw([hostile_table(), DC]))
    assert page.tags == {"table", "caption", "thead", "tbody", "tr", "th", "td", "ul", "li", "br"}
    assert page.attributes == {"scope"}
    for hostile in HOSTILE:
        assert " ".join(printable(hostile).split()) in page.texts


def test_html_of_a_text():
    assert html_form.draw([Table("t", text="<a>\n\x1b b\n")]) == (
        "<p>t</p>\n<pre>&lt;a&gt;&#10;\\x1b b</pre>\n"
    )


# ---- JSON


def test_json_is_ascii_in_the_order_given():
    data = {"b": [1.0, None, True], "a": {"re": 0.1, "im": -1e-17}, "text": "é\x1b\x7f\u202e"}
    drawn = json_form.draw(data)
    assert json.loads(drawn) == data
    assert drawn.isascii() and drawn.replace("\n", "").isprintable()
    assert drawn.startswith('{\n  "b": [\n    1.0,\n    null,\n    true\n  ],\n  "a": {')
    assert drawn.endswith("}\n")


@pytest.mark.parametrize("value", [float("nan"), float("inf"), -float("inf")])
def test_json_never_has_what_json_does_not_know(value: float):
    with pytest.raises(ValueError):
        json_form.draw({"x": [value]})


def test_measures_in_a_real_column_keep_their_unit_column():
    table = Table("", columns=(Column("x", "A"),), rows=(Row((Measure(1.0, "V"),)), Row((2.0,))))
    assert csv_form.draw([table]) == "x,x unit\n1.0,V\n2.0,A\n"


def test_latex_keeps_a_prefix_and_its_unit_apart():
    assert latex.figure("5.0000 µA") == "$5.0000\\,\\mathrm{\\mu{}A}$"
