"""Every command calls the library function of its name with the words it was given."""

import json

import pytest
from unit.cli.made import FAILED, NETWORK, RESULT, Library, Made, Process

import equiv
from equiv.cli.boundary import run
from equiv.errors import ExitStatus, NetworkFileError


def test_superpose_passes_its_words_on(library: Library):
    words = [
        "superpose",
        "f.equiv",
        "I:R3",
        "V:a,b",
        "--detail",
        "--paths",
        "--by",
        "group",
        "--check",
        "all",
    ]
    process = Process()
    assert run(words, process.environment) == 0
    (network, *quantities), options = library.calls["superpose"]
    assert network is NETWORK
    assert quantities == ["I:R3", "V:a,b"]
    progress = options.pop("progress")
    assert callable(progress)
    assert options == {
        "by": "group",
        "detail": True,
        "paths": True,
        "check": "all",
        "exact": False,
        "symbolic": None,
        "derivative": None,
        "expand": False,
        "fails_for": None,
    }
    assert library.calls["load"] == (("f.equiv",), {"given": {}, "frequency": None})


def test_superpose_without_quantities(library: Library):
    assert run(["superpose", "f.equiv"], Process().environment) == 0
    words, options = library.calls["superpose"]
    assert words == (NETWORK,)
    assert (options["by"], options["check"], options["detail"]) == ("source", "auto", False)


@pytest.mark.parametrize(
    ("line", "name", "words"),
    [
        ("check f.equiv", "check", (NETWORK,)),
        ("solve f.equiv", "solve", (NETWORK,)),
        ("isolate f.equiv Vgen", "isolate", (NETWORK, "Vgen")),
        ("port f.equiv", "port", (NETWORK,)),
        ("port f.equiv PANEL a,b", "port", (NETWORK, "PANEL", "a,b")),
        ("kinds", "kinds", (None,)),
        ("kinds ccvs", "kinds", ("ccvs",)),
        ("sample", "sample", (None,)),
        ("sample pump", "sample", ("pump",)),
    ],
)
def test_the_other_commands(library: Library, line: str, name: str, words: tuple[object, ...]):
    assert run(line.split(), Process().environment) == 0
    assert library.calls[name][0] == words


def test_given_and_frequency_reach_the_reader(library: Library):
    line = "solve f.equiv --given tail=12mohm --given k=(2*a=3) --frequency 60Hz"
    assert run(line.split(), Process().environment) == 0
    assert library.calls["load"] == (
        ("f.equiv",),
        {"given": {"tail": "12mohm", "k": "(2*a=3)"}, "frequency": "60Hz"},
    )


def test_a_dash_reads_standard_input(library: Library):
    process = Process(stdin=b"title \xc3\xa9\n")
    assert run(["solve", "-"], process.environment) == 0
    assert library.calls["parse"] == (
        ("title é\n",),
        {"name": "-", "given": {}, "frequency": None},
    )


def test_standard_input_that_is_not_text(library: Library):
    process = Process(stdin=b"title \xff")
    assert run(["solve", "-"], process.environment) == ExitStatus.CANNOT_READ_OR_WRITE
    assert "cannot read standard input: line 1 is not UTF-8 text" in process.told


def test_standard_input_without_an_end(library: Library, monkeypatch: pytest.MonkeyPatch):
    monkeypatch.setattr("equiv.language.limits.MOST_BYTES", 10)
    process = Process(stdin=b"# " * 100)
    assert run(["solve", "-"], process.environment) == ExitStatus.CANNOT_READ_OR_WRITE
    assert "cannot read standard input: it has more than 10 bytes" in process.told


def test_a_failed_check_is_status_1_and_the_result_is_printed(library: Library):
    library.answer = FAILED
    process = Process()
    assert run(["solve", "f"], process.environment) == ExitStatus.CHECK_FAILED
    assert process.printed.startswith("Made\n")


def test_a_refusal_is_the_status_of_the_result(library: Library):
    library.answer = Made(NETWORK, refusal=ExitStatus.DOES_NOT_EXIST)
    assert run(["port", "f"], Process().environment) == 5


def test_the_table(library: Library):
    process = Process(width=80)
    run(["solve", "f", "--digits", "3"], process.environment)
    assert process.printed == (
        "Made\n\n"
        "node     voltage\n"
        "               V\n"
        "────────────────\n"
        "a     12.3 ∠  0°\n"
        "<b>    2.1 ∠ 14°\n"
    )
    assert process.told == ""


def test_plain_signs_where_the_stream_has_no_others(library: Library):
    process = Process(encoding="latin-1")
    run(["solve", "f"], process.environment)
    assert process.printed.isascii()
    assert "12.346 @  0.00 deg" in process.printed


@pytest.mark.parametrize("words", [["--json"], ["--as", "json"], ["--as=json"]])
def test_json(library: Library, words: list[str]):
    process = Process()
    assert run(["solve", "f", *words], process.environment) == 0
    assert json.loads(process.printed) == RESULT.to_dict()
    assert "\x1b" not in process.printed


@pytest.mark.parametrize("form", ["csv", "markdown", "latex"])
def test_the_other_forms(library: Library, form: str):
    process = Process()
    assert run(["solve", "f", "--as", form, "--digits", "3"], process.environment) == 0
    assert process.printed == RESULT.render(form, 3)


def test_a_text_is_printed_byte_for_byte(library: Library):
    text = "title  x\t\r\nresistor R1 a b 1 ohm \x1b[2J\n\n"
    library.answer = Made(NETWORK, text=text)
    process = Process(width=80)
    run(["isolate", "f", "V1"], process.environment)
    assert process.printed == text


def test_a_text_is_made_harmless_on_a_terminal(library: Library):
    library.answer = Made(NETWORK, text="a \x1b[2J\nb\n")
    process = Process(out_is_terminal=True)
    run(["isolate", "f", "V1"], process.environment)
    assert process.printed == "a \\x1b[2J\nb\n"


def test_version(capsys: pytest.CaptureFixture[str]):
    assert run(["--version"], Process().environment) == 0
    assert capsys.readouterr().out == f"equiv {equiv.__version__}\n"


@pytest.mark.parametrize(
    "command", ["check", "solve", "superpose", "isolate", "port", "kinds", "sample"]
)
def test_every_command_has_help_with_an_example(
    command: str, capsys: pytest.CaptureFixture[str], monkeypatch: pytest.MonkeyPatch
):
    monkeypatch.setenv("COLUMNS", "80")
    assert run([command, "--help"], Process().environment) == 0
    page = capsys.readouterr().out
    assert f"  equiv {command}" in page
    assert "--given NAME=VALUE" in page
    assert max(map(len, page.splitlines())) <= 80


def test_a_file_with_errors_in_words_and_in_json(library: Library):
    span = equiv.errors.Span("f.equiv", 3, 10, 4, "resistor R1 a")
    error = equiv.errors.Diagnostic("missing-word", "expected a node \x1b", span, "write one")
    library.answer = NetworkFileError([error, error._replace(span=None, hint=None)])
    process = Process()
    assert run(["solve", "f"], process.environment) == 3
    assert process.printed == ""
    assert process.told == str(library.answer) + "\n"
    assert "\x1b" not in process.told
    process = Process()
    assert run(["solve", "f", "--json"], process.environment) == 3
    assert process.told == ""
    assert json.loads(process.printed) == {
        "schema": "equiv/error/1",
        "errors": [
            {
                "code": "missing-word",
                "message": "expected a node \x1b",
                "file": "f.equiv",
                "line": 3,
                "column": 10,
                "length": 4,
                "hint": "write one",
            },
            {
                "code": "missing-word",
                "message": "expected a node \x1b",
                "file": None,
                "line": None,
                "column": None,
                "length": None,
                "hint": None,
            },
        ],
    }
