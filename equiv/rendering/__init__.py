"""Tables as text; importing the package registers every form for `Result.render`."""

from equiv.analyses.result import DRAWERS
from equiv.rendering import csv, html, latex, markdown, terminal

DRAWERS.update(
    {
        "table": terminal.draw,
        "csv": csv.draw,
        "markdown": markdown.draw,
        "latex": latex.draw,
        "html": html.draw,
    }
)
