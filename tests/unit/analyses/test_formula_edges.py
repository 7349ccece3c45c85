"""Formulas where they have no number, where options do not apply, and how they are told."""

import json
import subprocess
import sys
from pathlib import Path

import pytest
import sympy

import equiv
from equiv.equations.symbolic.sympy_form import to_sympy
from equiv.rendering import csv, latex, markdown, terminal


def ladder(last: str, first: str = "1 kohm", sections: int = 13) -> str:
    """A ladder of resistors too long to be written out: its formulas are a sequence."""
    lines = ["voltage Vin +n0 -gnd 1 V"]
    for k in range(sections):
        series = first if k == 1 else "1 kohm"
        shunt = last if k == sections - 1 else "2 kohm"
        lines += [f"resistor A{k} n{k} n{k + 1} {series}", f"resistor B{k} n{k + 1} gnd {shunt}"]
    return "\n".join(lines) + "\n"


def far_end(shunts: int) -> float:
    """n12 of the ladder whose last shunt is -1 kohm, backwards: v and i from the far end."""
    v, i = 1.0, 1.0 / -1000
    for _ in range(shunts):
        v += i * 1000
        i += v / 2000
    return 1.0 / (v + i * 1000)


@pytest.mark.parametrize("text", [ladder("-1 kohm"), ladder("2 kohm", first="0 ohm")])
def test_a_sequence_that_divides_by_zero_gives_the_number_of_floating_point(text: str) -> None:
    network = equiv.parse(text)
    found = equiv.superpose(network, "V:n13", symbolic=True)
    q = found.data()["quantities"][0]
    assert q["style"] == "sequence"
    term = q["frequencies"][0]["terms"][0]
    numeric = equiv.superpose(network, "V:n13").data()["quantities"][0]["frequencies"][0]
    assert term["contribution"]["re"] == pytest.approx(numeric["terms"][0]["contribution"]["re"])
    cautioned = [c for c in found.cautions if c.code == "no-number"]
    compared = [c for c in found.checks if "floating point" in c.name]
    # either the formula has a number, which is compared; or it has none, and that is said
    assert bool(cautioned) != bool(compared)
    assert found.exit_status == 0


def test_the_number_of_a_sequence_with_a_zero_pivot_is_right() -> None:
    found = equiv.superpose(equiv.parse(ladder("-1 kohm")), "V:n13", symbolic=True)
    term = found.data()["quantities"][0]["frequencies"][0]["terms"][0]
    assert term["contribution"]["re"] == pytest.approx(far_end(12), rel=1e-9)


def test_a_port_whose_formulas_have_no_number_is_not_a_failure() -> None:
    network = equiv.parse(ladder("2 kohm", first="0 ohm"))
    found = equiv.port(network, "n13,gnd", symbolic=True)
    numeric = equiv.port(network, "n13,gnd").data()
    data = found.data()
    z = data["thevenin"]["impedance"][0][0]
    assert z["re"] == pytest.approx(numeric["thevenin"]["impedance"][0][0]["re"])
    volts = data["thevenin"]["voltage"][0]["re"]
    assert volts == pytest.approx(numeric["thevenin"]["voltage"][0]["re"])
    assert all(check.passed for check in found.checks)
    assert [c.code for c in found.cautions].count("no-number") == 2
    assert found.exit_status == 0


DIVIDER = "voltage V1 +a -gnd 10 V\nresistor R1 a b 10 ohm\nresistor R2 b gnd 30 ohm\n"


@pytest.mark.parametrize("options", [{"expand": True}, {"fails_for": "R1"}, {"derivative": "R1"}])
def test_options_of_formulas_alone_are_refused(options: dict[str, object]) -> None:
    network = equiv.parse(DIVIDER)
    with pytest.raises(equiv.UsageError, match="about formulas"):
        equiv.superpose(network, "V:b", **options)
    with pytest.raises(equiv.UsageError, match="about formulas"):
        equiv.port(network, "b,gnd", **options)


@pytest.mark.parametrize(
    "words",
    [
        "superpose f.equiv V:b --derivative R1", "superpose f.equiv V:b --fails-for R1",
        "superpose f.equiv V:b --expand", "port f.equiv b,gnd --expand",
        "port f.equiv b,gnd --fails-for R1", "port f.equiv b,gnd --derivative R1",
    ],
)  # fmt: skip
def test_the_commands_refuse_them_too(words: str, tmp_path: Path) -> None:
    (tmp_path / "f.equiv").write_text(DIVIDER)
    root = Path(__file__).resolve().parents[3]
    done = subprocess.run(
        [sys.executable, "-m", "equiv", *words.split(), "--json"], cwd=tmp_path,
        capture_output=True, text=True, env={"PYTHONPATH": str(root)}, check=False,
    )  # fmt: skip
    assert done.returncode == 2
    assert json.loads(done.stdout)["errors"][0]["code"] == "only-with-formulas"


def test_powers_among_the_finds_are_left_out_aloud() -> None:
    network = equiv.parse(DIVIDER + "find V:b\nfind P:R2\n")
    found = equiv.superpose(network, symbolic=True)
    assert [c.message for c in found.cautions if c.code == "no-formula"] == [
        "P:R2: a power is no sum of terms and has no formula here"
    ]
    assert not equiv.superpose(network, "V:b", symbolic=True).cautions


def test_s_is_named_where_it_occurs_alone() -> None:
    direct = equiv.superpose(equiv.parse(ladder("2 kohm")), "V:n13", symbolic=True)
    assert "Formulas in the values of the elements" in direct.tables()[0].subtitles
    dynamic = ladder("2 kohm").replace("resistor B0 n1 gnd 2 kohm", "capacitor B0 n1 gnd 2 uF")
    found = equiv.superpose(equiv.parse(dynamic), "V:n13", symbolic=True)
    assert "Formulas in the values of the elements and s" in found.tables()[0].subtitles


def test_a_limit_that_is_too_long_is_not_told_in_the_table() -> None:
    text = ladder("2 kohm", sections=7) + "capacitor C n7 gnd 1 uF\n"
    found = equiv.superpose(equiv.parse(text), "V:n7", symbolic=True)
    table = next(t for t in found.tables() if t.name == "response of V:n7")
    assert table.rows[0].cells[1] == "too long (it stands in --json)"
    assert found.data()["quantities"][0]["response"]["terms"][0]["dc"]["formula"]


def test_no_blanks_are_put_into_a_long_product() -> None:
    names = [f"gain_of_stage_{k}" for k in range(6)]
    text = "voltage V1 +a0 -gnd 1 V\n"
    for k, name in enumerate(names):
        text += f"vcvs {name} +a{k + 1} -gnd mu ? senses V:a{k}\n"
    found = equiv.superpose(equiv.parse(text + "resistor R a6 gnd 1 ohm\n"), "V:a6", symbolic=True)
    product = "*".join(["V1", *names])
    for form in (csv, markdown):
        assert product in form.draw(found.tables()).replace("\\", "")
    assert product in terminal.draw(found.tables())
    narrow = terminal.draw(found.tables(), width=60)
    assert max(map(len, narrow.splitlines())) <= 60
    assert product in "".join(line.split()[-1] for line in narrow.splitlines() if "gain" in line)


def test_what_to_sympy_does_not_know_is_an_error() -> None:
    found = equiv.port(equiv.parse(DIVIDER), "b,gnd", symbolic=True)
    with pytest.raises(ValueError, match="voltage, impedance, current, admittance"):
        found.to_sympy("nonsense")


def test_the_parts_of_a_port_are_those_that_its_formulas_use() -> None:
    data = equiv.port(equiv.parse(DIVIDER), "b,gnd", symbolic=True).data()
    assert data["where"] == []
    network = equiv.parse(ladder("2 kohm", sections=5))
    named = equiv.port(network, "n5,gnd", symbolic=True).data()
    assert named["where"]


def test_several_ports_have_no_nz() -> None:
    found = equiv.port(equiv.parse(DIVIDER), "a,b", "b,gnd", symbolic=True)
    notes = "\n".join(note for table in found.tables() for note in table.notes)
    assert "Nz" not in notes
    one = equiv.port(equiv.parse(DIVIDER), "b,gnd", symbolic=True)
    assert any("D or Nz" in note for table in one.tables() for note in table.notes)


def test_names_stay_apart_in_latex() -> None:
    text = DIVIDER.replace("R2", "R_1").replace("10 ohm", "?").replace("30 ohm", "?")
    found = equiv.superpose(equiv.parse(text), "V:b", symbolic=True)
    assert r"$R_{1} + \mathrm{R\_1}$" in latex.draw(found.tables())


def test_equal_factors_are_a_power() -> None:
    text = "given k = 3\nvoltage V1 +a -gnd (2*k)\nresistor R1 a b 1 ohm\nresistor R2 b gnd 1 ohm\n"
    text += "vcvs E +c -gnd mu k senses V:b\nresistor R3 c gnd 1 ohm\n"
    data = equiv.superpose(equiv.parse(text), "V:c", symbolic="k").data()
    assert data["quantities"][0]["frequencies"][0]["total"]["formula"] == "k**2"


def test_the_derivatives_of_a_port() -> None:
    r1, r2, v1 = sympy.symbols("R1 R2 V1")
    network = equiv.parse(DIVIDER)
    found = equiv.port(network, "b,gnd", symbolic=True, derivative="R1")
    data = found.data()["derivatives"]
    right = {
        "voltage": v1 * r2 / (r1 + r2),
        "impedance": r1 * r2 / (r1 + r2),
        "current": v1 / r1,
        "admittance": 1 / r1 + 1 / r2,
    }
    assert found.slopes is not None
    for what, formula in right.items():
        value = found.slopes.found[what]
        assert value is not None
        slope = sympy.diff(formula, r1)
        assert sympy.cancel(to_sympy(value.expression) - slope) == 0
        at = slope.subs({r1: 10, r2: 30, v1: 10})
        assert data[what]["re"] == pytest.approx(float(at), rel=1e-15)
    assert any(t.name == "derivatives" and len(t.rows) == 4 for t in found.tables())
    own = equiv.port(network, "b,gnd", symbolic=True, derivative="V1").data()["derivatives"]
    assert own["voltage"]["formula"] == "R2/(R1 + R2)"
    assert own["impedance"]["formula"] == "0"
    with pytest.raises(equiv.UsageError, match="several"):
        equiv.port(network, "a,b", "b,gnd", symbolic=True, derivative="R1")
