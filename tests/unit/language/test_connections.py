"""Connections: the marks each kind asks for, from its declaration."""

import pytest

from equiv.elements import KINDS
from equiv.errors import NetworkFileError
from equiv.language import parse
from equiv.language.connections import shape, write_connection


def nodes(text: str) -> tuple[str, ...]:
    """The nodes of the first element of a text."""
    return next(iter(parse(text).elements.values())).nodes


@pytest.mark.parametrize(
    ("connection", "kind", "value"),
    [
        ("a b", "resistor", "5"),
        ("a > b", "resistor", "5"),
        ("a>b", "resistor", "5"),
        ("a >b", "resistor", "5"),
        ("a> b", "resistor", "5"),
        ("a > b", "current", "5"),
        ("a>b", "current", "5"),
        ("+a -b", "voltage", "5"),
    ],
)
def test_two_nodes(connection: str, kind: str, value: str) -> None:
    assert nodes(f"{kind} X1 {connection} {value}") == ("a", "b")


def test_more_nodes() -> None:
    assert nodes("opamp U1 +p -n out") == ("p", "n", "out")
    assert nodes("transformer T1 +p -q +s -t ratio 2") == ("p", "q", "s", "t")


def test_a_coupling_joins_elements() -> None:
    network = parse("inductor L1 a b 1\ninductor L2 c d 1\ncoupling M L1 L2 k 0.5")
    assert network.elements["M"].links == ("L1", "L2")
    assert network.elements["M"].nodes == ()


WRONG = {
    "a b": ["+a -b", "a - b", "> a b"],
    "a > b": ["a b", "+a -b", "> a b", "a > > b"],
    "+a -b": ["a b", "a > b", "-a +b", "+a b", "+ -", "+a > -b"],
    "+p -n out": ["p n out", "+p -n +out", "-p +n out", "+p > -n out"],
    "+p -q +s -t": ["p q s t", "+p -q s t", "+p -q -s +t"],
    "+a -b +c -d": ["a b c d", "+a -b"],
    "+a -b …": ["a b", "+a", "+a b", "+a -b -c +d", "+a -b +c"],
    "L1 L2": ["+L1 -L2"],
}


@pytest.mark.parametrize("kind", sorted(KINDS))
def test_the_wrong_form_is_told_the_right_one(kind: str) -> None:
    right = KINDS[kind].connection
    for wrong in WRONG[right]:
        with pytest.raises(NetworkFileError) as caught:
            parse(f"{kind} X1 {wrong}\n")
        (diagnostic,) = caught.value.diagnostics
        assert diagnostic.code in ("wrong-connection", "missing-word", "bad-name")
        if diagnostic.code == "wrong-connection":
            assert diagnostic.hint == f"write it as: {kind} X1 {right}"


@pytest.mark.parametrize("kind", sorted(KINDS))
def test_what_is_written_bears_the_marks(kind: str) -> None:
    declared = KINDS[kind].connection
    declared = declared.removesuffix(" …")
    names = tuple(word.lstrip("+-") for word in declared.split() if word != ">")
    assert " ".join(write_connection(KINDS[kind], names)) == declared
    assert len(shape(kind).marks) == len(names)
