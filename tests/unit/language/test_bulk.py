"""Reading by columns gives exactly what reading word by word gives."""

import gc
import random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from equiv.errors import NetworkFileError
from equiv.language.bulk import read_plain
from equiv.language.files import Text
from equiv.language.loading import load, read_text
from equiv.language.reader import FEWEST_IN_BULK
from equiv.network import Network

NEVER = 10**9

plain = [
    "resistor R{n} a n{n} 4.7012 kohm",
    "resistor R{n} a b{n} 4.7",
    "resistor R{n} a > b{n} 4.7 kohm",
    "resistor R{n} a b 4.7kohm",
    "resistor R{n} a b 1e3 ohm",
    "resistor R{n} a b -.5E-2 Mohm",
    "capacitor C{n} a b 100 nF",
    "current I{n} gnd > n{n} 2 mA",
    "voltage V{n} +a -n{n} 2 V",
    "vccs G{n} a > b g 3 mS senses V:a,b",
    "vcvs E{n} +a -b mu 3 senses V:R{n}",
    "cccs F{n} a > b beta 3 senses I:R0",
    "cccs F{n} a > b β 3 senses I:R0",
    "ccvs H{n} +a -b r 3 ohm senses I:R0",
    "conductance G{n} a b 3 mho",
    "resistor R{n}.x a:b c/d' 3Ω",
    "resistor Rä{n} a b 3 µohm",
]
odd = [
    "",
    "   # a comment",
    "resistor R{n} a b 4k7",
    "resistor R{n} a b 5 kohm # why",
    'resistor R{n} a b 5 kohm label "x"',
    "resistor R{n} a b 5 V",
    "resistor R{n} a b",
    "resistor :R{n} a b 5 ohm",
    "resistor R{n}: a b 5 ohm",
    "resistor R{n} .a b 5 ohm",
    "resistor R{n} a b 5_0 ohm",
    "resistor R{n} a b 1.2.3 ohm",
    "resistor R{n} a b inf ohm",
    "resistor R{n} a b 1e999 ohm",
    "resistor R{n} a b 1e99999999999999999999 ohm",
    "resistor R{n} a b ٣ ohm",
    "resistor R{n} a b tail",
    "resistor R{n} a b (2*tail)",
    "resistor R{n} +a -b 5",
    "voltage V{n} a b 5",
    "voltage V{n} + - 5",
    "voltage V{n} -a +b 5",
    "current I{n} a b 2",
    "current I{n} a>b 2",
    "vccs G{n} a > b g 3 senses V:",
    "vccs G{n} a > b g 3 senses V:a,",
    "vccs G{n} a > b g 3 senses V:a,b,c",
    "vccs G{n} a > b g 3 senses I:R0",
    "vccs G{n} a > b g 3 senses V2:R0",
    "vccs G{n} a > b g 3 sense V:a",
    "vccs G{n} a > b mu 3 senses V:a",
    "resistor R{n} a b 5 \\\n ohm",
    "resistor R{n} a b \\",
    "block B{n} (p)\nresistor R p gnd 5\nend",
    "use B{n} X{n} (a)",
    "end",
    "\tresistor\tR{n}\ta\tb\t7\tohm",
    "short S{n} a b",
    "opamp U{n} +a -b c",
    "impedance Z{n} a b 3 ohm",
    "resistor R0 a b 5",
    "resistor R{n} a क्षि 5",
    "x" * 300 + "{n} a b 5",
    "resistor " + "y" * 300 + "{n} a b 5",
]


def outcome(text: str, in_bulk_from: int) -> object:
    """The network with its places, or every diagnostic."""
    try:
        network = read_text(Text("text", text), in_bulk_from=in_bulk_from)
    except NetworkFileError as error:
        return [str(d) for d in error.diagnostics]
    values = [repr(element) for element in network.elements.values()]
    return network, values, network.places, network.comments


@given(st.lists(st.sampled_from(plain * 4 + odd), max_size=60), st.booleans())
@settings(derandomize=True, max_examples=150, deadline=None)
def test_columns_and_words_agree(lines: list[str], only_plain: bool) -> None:
    chosen = [line for line in lines if line in plain] if only_plain else lines
    head = ["given tail = 3 ohm", "resistor R0 a b 1"]
    text = "\n".join([*head, *(line.format(n=n) for n, line in enumerate(chosen))])
    assert outcome(text, 1) == outcome(text, NEVER)


@pytest.mark.parametrize("line", plain + odd)
def test_one_odd_line_among_many_plain_ones(line: str) -> None:
    lines = [f"resistor r{n} a b {n} ohm" for n in range(100)]
    lines[50] = line.format(n=1)
    text = "\n".join(["resistor R0 a b 1", "given tail = 3 ohm", *lines])
    assert outcome(text, 1) == outcome(text, NEVER)


@pytest.mark.parametrize("line", plain)
def test_plain_lines_are_read_by_columns(line: str) -> None:
    lines = [line.format(n=n) for n in range(20)]
    assert None not in read_plain(lines)


def test_odd_lines_among_plain_ones_do_not_slow_the_rest_down() -> None:
    lines = [f"resistor R{n} a b {n} ohm" for n in range(1000)]
    lines[500] = "resistor R500 a b tail 7"
    assert read_plain(lines).count(None) <= 16


def test_places_of_a_large_file(tmp_path) -> None:
    chooser = random.Random(5)
    lines, expected = ["# head"], []
    for n in range(3 * FEWEST_IN_BULK):
        if chooser.random() < 0.3:
            lines.append("")
        lines.append(f"resistor R{n} a b {n} ohm" + chooser.choice(["", "", "  # odd"]))
        expected.append(("large.equiv", len(lines)))
    path = tmp_path / "large.equiv"
    path.write_text("\n".join(lines))
    network = load(path)
    assert list(network.places) == expected
    assert list(network.elements) == [f"R{n}" for n in range(3 * FEWEST_IN_BULK)]


def test_the_garbage_collector_runs_again_afterwards() -> None:
    with pytest.raises(NetworkFileError):
        read_text(Text("text", "nonsense"))
    assert gc.isenabled()
    gc.disable()
    try:
        assert isinstance(read_text(Text("text", "resistor R a b 1")), Network)
        assert not gc.isenabled()
    finally:
        gc.enable()
