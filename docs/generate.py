"""Fills the generated parts of the manual and the README, or checks that they are fresh.

    python docs/generate.py            writes them
    python docs/generate.py --check    says which pages are stale, and fails if one is

A page holds two sorts of generated part:

    <!-- output of: equiv superpose samples/pump-station.equiv -->   the fenced block below it
    <!-- generated: kinds --> … <!-- end -->                         what a function here writes
"""

from __future__ import annotations

import re
import shlex
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parent.parent
sys.path.insert(0, str(ROOT))  # the checkout, not an installed copy
PAGES = [ROOT / "README.md", *sorted((ROOT / "docs").glob("*.md"))]
_OUTPUT = re.compile(
    r"(<!-- output of: (?P<command>.+?) -->\n+```text\n)(?P<shown>.*?)(```\n)", re.S
)
_GENERATED = re.compile(
    r"(<!-- generated: (?P<name>[\w-]+) -->\n)(?P<shown>.*?)(<!-- end -->)", re.S
)


def run(command: str) -> str:
    """What a command prints in an 80-column terminal's width, with its exit status if not 0."""
    words = shlex.split(command)
    assert words[0] == "equiv", command
    done = subprocess.run(
        [sys.executable, "-m", "equiv", *words[1:]],
        cwd=ROOT,
        capture_output=True,
        text=True,
        encoding="utf-8",
        env={"COLUMNS": "80", "PYTHONUTF8": "1", "PATH": "", "NO_COLOR": "1"},
        check=False,
    )
    text = (done.stdout + done.stderr).rstrip("\n") + "\n"
    text = "\n".join(line.rstrip() for line in text.splitlines()) + "\n"
    return text + (f"(exit status {done.returncode})\n" if done.returncode else "")


def kinds() -> str:
    """Every kind of element: a section each, from its docstring."""
    from equiv.analyses.kinds import ROLES, sections, summary
    from equiv.elements import KINDS

    lines = []
    for role, title in ROLES.items():
        lines.append(f"\n## {title}\n")
        for kind in sorted((k for k in KINDS.values() if k.role == role), key=lambda k: k.kind):
            lines.append(f"### `{kind.kind}`\n\n{summary(kind)}\n")
            for name, text in sections(kind).items():
                code = name in ("Written", "Example")
                lines.append(f"- {name}: {'`' + text + '`' if code else text}")
            lines.append("")
    return "\n".join(lines)


def statements() -> str:
    """The statements about the file."""
    from equiv.analyses.kinds import statements as listed

    rows = [f"| `{written}` | {meaning} |" for written, meaning in listed()]
    return "\n".join(["", "| statement | meaning |", "| --- | --- |", *rows, "", ""])


def system_kinds() -> str:
    """Every kind of item in a three-phase system: a section each, from its docstring."""
    from equiv.analyses.kinds import sections, summary
    from equiv.threephase.kinds import KINDS

    lines = []
    for word, kind in KINDS.items():
        lines.append(f"\n### `{word}`\n\n{summary(kind)}\n")
        for name, text in sections(kind).items():
            code = name in ("Written", "Example")
            lines.append(f"- {name}: {'`' + text + '`' if code else text}")
    return "\n".join([*lines, "", ""])


def system_statements() -> str:
    """The statements about a three-phase file."""
    from equiv.threephase.kinds_page import statements as listed

    rows = [f"| `{written}` | {meaning} |" for written, meaning in listed()]
    return "\n".join(["", "| statement | meaning |", "| --- | --- |", *rows, "", ""])


def exit_statuses() -> str:
    """The exit statuses."""
    from equiv.errors import ExitStatus

    meanings = {
        0: "done, and every check passed",
        1: "done, but a check failed or a limit was exceeded",
        2: "wrong usage",
        3: "the network file has errors",
        4: "the network has no unique solution",
        5: "the term or the equivalent that was asked for does not exist",
        6: "a file cannot be read or written",
        70: "an error of the program itself",
        130: "interrupted",
    }
    rows = [f"| {int(status)} | {meanings[int(status)]} |" for status in ExitStatus]
    return "\n".join(["", "| status | meaning |", "| --- | --- |", *rows, "", ""])


def library() -> str:
    """The library's functions: signature and docstring."""
    import inspect

    import equiv

    parts = [""]
    names = ("load", "parse", "write", "check", "solve", "superpose", "isolate", "port",
             "load_port", "match", "sweep", "loadtest", "fault")  # fmt: skip
    for name in names:
        function = getattr(equiv, name)
        signature = re.sub(r"'", "", str(inspect.signature(function)))
        signature = re.sub(r"<function (\w+) at \w+>", r"\1", signature)
        signature = re.sub(r"equiv\.[\w.]+\.(\w+)", r"\1", signature)
        doc = inspect.getdoc(function) or ""
        parts.append(f"### `equiv.{name}`\n\n```python\n{name}{signature}\n```\n\n{doc}\n")
    return "\n".join(parts)


PARTS = {
    "kinds": kinds,
    "statements": statements,
    "three-phase-kinds": system_kinds,
    "three-phase-statements": system_statements,
    "exit-statuses": exit_statuses,
    "library": library,
}


def fresh(page: str) -> str:
    """A page with all its generated parts made anew."""
    page = _OUTPUT.sub(lambda m: m[1] + run(m["command"]) + m[4], page)
    return _GENERATED.sub(lambda m: m[1] + PARTS[m["name"]]() + m[4], page)


_NUMBER = re.compile(r"[-+]?\d+(?:\.\d+)?(?:e[-+]?\d+)?")
_BLANKS = re.compile(r" +|─+|-{3,}")


def same(one: str, other: str) -> bool:
    """Whether two outputs are the same but for rounding, and the blanks that it moves.

    The last digits of a residual differ from processor to processor.
    """
    one, other = (_BLANKS.sub(" ", text) for text in (one, other))
    if _NUMBER.sub("#", one) != _NUMBER.sub("#", other):
        return False
    pairs = zip(_NUMBER.findall(one), _NUMBER.findall(other), strict=True)
    return all(
        abs(float(a) - float(b)) <= 1e-9 * max(abs(float(a)), abs(float(b))) + 1e-10
        for a, b in pairs
    )


def main() -> int:
    """Write or check the pages."""
    stale = []
    for path in PAGES:
        old = path.read_text(encoding="utf-8")
        new = fresh(old)
        if not same(new, old):
            stale.append(path.relative_to(ROOT))
            if "--check" not in sys.argv:
                path.write_text(new, encoding="utf-8")
    if stale:
        print(f"{'stale' if '--check' in sys.argv else 'written'}: {', '.join(map(str, stale))}")
    return 1 if stale and "--check" in sys.argv else 0


if __name__ == "__main__":
    sys.exit(main())
