"""Ports whose equivalents do not exist, are zero, or come from terms that do not exist."""

import random

import pytest

import equiv
from equiv.errors import ExitStatus


def port(text: str, *ports: str) -> "equiv.analyses.port.PortEquivalent":  # type: ignore[name-defined]
    return equiv.port(equiv.parse(text), *ports)


def test_sources_that_have_no_solution_alone_are_no_terms() -> None:
    text = (
        "voltage A +a -gnd 24 V{0}\nvoltage B +a -gnd 24 V{0}\nresistor R a b 2 ohm\n"
        "resistor S b gnd 6 ohm\n"
    )
    single = port(text.format(""), "b,gnd").first
    assert single.alone == (False, False)
    assert single.open_voltage == pytest.approx([18]) and single.impedance[0, 0] == pytest.approx(
        1.5
    )
    data = port(text.format(""), "b,gnd").to_dict()["result"]
    assert [t["voltage"] for t in data["terms"]] == [None, None]
    group = port(text.format(" group g"), "b,gnd")
    assert group.first.sources == ("g",) and group.first.alone == (True,)
    assert group.first.voltages == pytest.approx(18)
    assert group.exit_status == 0


def test_rank_is_decided_before_entries_cancel() -> None:
    ohms = "voltage V +a -gnd 3 V\nresistor R1 a b {} ohm\nresistor R2 b c {} ohm\nresistor R3 c d {} ohm\n"
    found = port(ohms.format("0.1", "0.2", "-0.3"), "d,gnd")
    assert found.first.impedance[0, 0] == 0 and not found.first.norton
    assert found.exit_status == 0
    siemens = (
        "current J gnd > a 3 mA\nconductance G1 a gnd 0.1 S\nconductance G2 a gnd 0.2 S\n"
        "conductance G3 a gnd -0.3 S\n"
    )
    found = port(siemens, "a,gnd")
    assert not found.first.thevenin and found.first.admittance[0, 0] == 0
    assert found.first.short_current == pytest.approx([3e-3])
    assert found.exit_status == 0


def test_balanced_bridges_and_dead_ports_pass_their_proofs() -> None:
    draw = random.Random(8)
    for _ in range(20):
        a, b, k = draw.uniform(1, 9), draw.uniform(1, 9), draw.uniform(0.1, 9)
        text = (
            f"voltage V +s -gnd 5 V\nresistor A s p {a!r} ohm\nresistor B p gnd {b!r} ohm\n"
            f"resistor C s q {a * k!r} ohm\nresistor D q gnd {b * k!r} ohm\n"
        )
        found = port(text, "p,q")
        assert found.first.open_voltage == pytest.approx([0], abs=0)
        assert found.exit_status == 0, found.checks
        assert len(found.first.loads) == 3


def test_a_small_shunt_on_a_large_voltage_keeps_its_digits() -> None:
    text = "voltage V +a -gnd 230 V\nresistor Load a b 1 Mohm\nresistor Shunt b gnd 100 uohm\n"
    found = port(text, "b,gnd")
    assert found.first.open_voltage == pytest.approx([230 * 1e-4 / (1e6 + 1e-4)], rel=1e-9)
    assert found.exit_status == 0, found.checks


def test_cautions_name_the_port_concerned() -> None:
    text = (
        "voltage V +a -gnd 10 V\nresistor R a b 3 ohm\nresistor S b gnd 5 ohm\n"
        "port P +a -gnd\nport Q +b -gnd\n"
    )
    (caution,) = [c for c in port(text).cautions if c.code == "resistance-not-positive"]
    assert caution.message.startswith("the resistance of P is zero")


def test_several_ports_say_that_all_are_shorted_at_once() -> None:
    text = (
        "voltage G +g -gnd 230 V\nresistor A g m 10 mohm\nresistor B m s 20 mohm\n"
        "port MAIN +m -gnd\nport SUB +s -gnd\n"
    )
    both = port(text)
    assert both.first.short_current == pytest.approx([23000, 0])
    shown = " ".join(both.render().split())
    assert "short-circuit current, all shorted" in shown
    assert "for the current of one fault, ask for its port alone" in shown
    assert port(text, "SUB").first.short_current == pytest.approx([230 / 0.03])


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("voltage V +a -gnd 1 V\nresistor R a gnd 1 ohm\ntwoport N +p -gnd +a -gnd abcd 0 0 0 0\n",
         "the network itself fixes the port's"),
        ("current I gnd > c 2 A\nvoltage V +c -gnd 1 V\nopamp U +c -c p\n", "undecided"),
    ],
)  # fmt: skip
def test_ports_that_fix_both_or_neither_say_so(text: str, words: str) -> None:
    found = port(text, "p,gnd")
    assert not found.first.thevenin and not found.first.norton
    assert found.exit_status == ExitStatus.DOES_NOT_EXIST
    said = f"{found.first.no_thevenin} {found.first.no_norton}"
    assert words in said and "test source" not in said


def test_reasons_do_not_speak_of_test_sources() -> None:
    found = port("voltage V +a -gnd 10 V\nresistor R a gnd 1 ohm\n", "a,gnd")
    assert found.first.no_norton == (
        "with the port shorted, V and the short across a,gnd form a loop of voltage sources and "
        "shorts whose voltages disagree by 10 V"
    )


def test_the_file_s_own_frequency_is_always_among_those_of_a_port() -> None:
    text = "frequency 50 Hz\nvoltage V +a -gnd 5 V at 0 Hz\nresistor R a b 3 ohm\ninductor L b gnd 10 mH\n"
    found = port(text, "b,gnd")
    assert [e.frequency.hertz for e in found.equivalents] == [0, 50]
    assert found.first.frequency.hertz == 50 and found.first.thevenin


def test_a_symbol_is_a_usage_error_and_not_a_missing_equivalent() -> None:
    with pytest.raises(equiv.UsageError, match="has no number"):
        port("voltage V +a -gnd 5 V\nresistor R a gnd ?\n", "a,gnd")


def test_the_same_port_twice_is_refused() -> None:
    with pytest.raises(equiv.UsageError):
        port("voltage V +a -gnd 5 V\nresistor R a b 1 ohm\n", "b,gnd", "b,gnd")
