"""The words for quantities."""

import pytest

from equiv.elements.quantity import Quantity
from equiv.errors import NetworkFileError, UsageError
from equiv.language import parse, quantity


@pytest.mark.parametrize(
    ("text", "expected"),
    [
        ("V:a", Quantity("V", ("a",))),
        ("V:a,b", Quantity("V", ("a", "b"))),
        ("V:n.1,gnd", Quantity("V", ("n.1", "gnd"))),
        ("V:a:b", Quantity("V", ("a:b",))),
        ("I:R3", Quantity("I", ("R3",))),
        ("P:R3", Quantity("P", ("R3",))),
        ("V1:T1", Quantity("V", ("T1",))),
        ("I1:T1", Quantity("I", ("T1",))),
        ("P1:T1", Quantity("P", ("T1",))),
        ("V2:T1", Quantity("V", ("T1",), 1)),
        ("I2:X.T1", Quantity("I", ("X.T1",), 1)),
    ],
)
def test_forms(text: str, expected: Quantity) -> None:
    assert quantity(text) == expected
    assert quantity(str(expected)) == expected


@pytest.mark.parametrize(
    "text",
    [
        "", "V", "V:", "V:,", "V:a,", "V:a,b,c", "I:a,b", "P:a,b", "v:a", "Q:a", "V0:a", "V2:a,b",
        "P2:a", "V a", "V: a", "V:a b", "V:a\n", "V(a)", "I:R3:", "V:a,b ", "V:(a)", "V:" + "a" * 300,
    ],
)  # fmt: skip
def test_what_is_no_quantity(text: str) -> None:
    with pytest.raises(UsageError) as caught:
        quantity(text)
    (diagnostic,) = caught.value.diagnostics
    assert diagnostic.hint or diagnostic.code == "name-too-long"
    assert diagnostic.span.text == text


@pytest.mark.parametrize(
    ("text", "code"),
    [
        ("V:a", None),
        ("V:a,gnd", None),
        ("V:gnd", None),
        ("V:T1", None),
        ("V2:T1", None),
        ("I2:T1", None),
        ("I2:U1", None),
        ("P:T1", None),
        ("V1:R1", None),
        ("V:same", "two-meanings"),
        ("V1:same", "two-meanings"),
        ("I:same", None),
        ("V:nowhere", "unknown-name"),
        ("V:a,nowhere", "unknown-name"),
        ("V:R1,a", "unknown-name"),
        ("I:a", "unknown-name"),
        ("I2:R1", "no-such-pair"),
        ("V2:R1", "no-such-pair"),
    ],
)
def test_find_agrees_with_the_network(text: str, code: str | None) -> None:
    head = (
        "resistor R1 a gnd 1\nresistor same same gnd 1\nopamp U1 +a -gnd o\n"
        "transformer T1 +a -gnd +b -gnd ratio 2\n"
    )
    network = parse(head)
    if code is None:
        assert parse(f"{head}find {text}").finds[0].quantity == quantity(text)
        network.locate(quantity(text))
        return
    with pytest.raises(NetworkFileError) as caught:
        parse(f"{head}find {text}")
    assert [d.code for d in caught.value.diagnostics] == [code]
    with pytest.raises(UsageError) as located:
        network.locate(quantity(text))
    assert [d.code for d in located.value.diagnostics] == [code]
