"""Superposition where it is easily got wrong: rms and peak, frequencies, groups, zeros, checks."""

import math
import random
from dataclasses import replace

import pytest

import equiv
from equiv.analyses.result import Check
from equiv.analyses.superpose import Superposition
from equiv.analyses.superposition.terms import FrequencyTerms, Term
from equiv.errors import ExitStatus
from equiv.network import DC


def at(result: Superposition, quantity: int = 0, frequency: int = 0) -> FrequencyTerms:
    return result.quantities[quantity].frequencies[frequency]


def test_peak_values_are_made_rms_but_not_at_dc() -> None:
    text = """
    frequency 50 Hz
    phasors {}
    voltage V1 +a -gnd 10 V @ 0 deg
    voltage V0 +b -a 7 V at 0 Hz
    resistor R b gnd 1 ohm
    """
    totals = {
        word: [f.total for f in equiv.superpose(equiv.parse(text.format(word)), "I:R")
               .quantities[0].frequencies]
        for word in ("rms", "peak")
    }  # fmt: skip
    assert totals["rms"] == pytest.approx([7, 10])
    assert totals["peak"] == pytest.approx([7, 10 / math.sqrt(2)])


def test_three_loads_prove_a_port_of_a_file_in_peak_values() -> None:
    text = """
    frequency 50 Hz
    phasors peak
    voltage V +a -gnd 10 V @ 20 deg
    resistor R a b 3 ohm
    inductor L b gnd 20 mH
    """
    for words in (text, text.replace("10 V", "0 V")):
        result = equiv.port(equiv.parse(words), "b,gnd")
        assert {c.name.split(" at ")[0]: c.passed for c in result.checks}["three loads"]
        assert result.exit_status == 0


def test_rms_over_frequencies_is_the_root_of_the_sum_of_squares() -> None:
    text = """
    frequency 1 kHz
    voltage A +a -gnd 3 V
    voltage B +b -a 4 V at 50 Hz
    voltage C +c -b 12 V at 0 Hz
    resistor R c gnd 2 ohm
    """
    voltage, power = equiv.superpose(equiv.parse(text), "V:R", "P:R").quantities
    assert [f.frequency.hertz for f in voltage.frequencies] == [0, 50, 1000]
    assert [abs(f.total) for f in voltage.frequencies] == pytest.approx([12, 4, 3])
    assert voltage.rms == pytest.approx(13)
    assert power.rms == pytest.approx(13**2 / 2)


def test_a_frequency_without_a_value_leaves_no_rms() -> None:
    text = """
    frequency 50 Hz
    voltage V0 +a -gnd 5 V at 0 Hz
    voltage V1 +b -a 3 V
    capacitor C b x 1 uF
    capacitor D x gnd 1 uF
    """
    result = equiv.superpose(equiv.parse(text), "V:x")
    (quantity,) = result.quantities
    assert quantity.rms is None and quantity.frequencies[0].refusal is not None
    assert quantity.frequencies[1].total == pytest.approx(1.5)
    assert result.exit_status == ExitStatus.NO_UNIQUE_SOLUTION
    assert "at DC" in quantity.frequencies[0].refusal
    assert result.to_dict()["result"]["quantities"][0]["frequencies"][0]["total"] is None


def test_very_low_frequencies_are_not_taken_for_dc_nor_equal_ones_for_two() -> None:
    low = (
        "voltage V0 +a -gnd 5 V at 0 Hz\nvoltage V1 +b -a 3 V at 1e-11 Hz\nresistor R b gnd 1 ohm\n"
    )
    totals = [f.total for f in equiv.superpose(equiv.parse(low), "V:R").quantities[0].frequencies]
    assert totals == pytest.approx([5, 3])
    near = "frequency 3 GHz\nvoltage V0 +a -gnd 5 V\nvoltage V1 +b -a 3 V at {!r} rad/s\nresistor R b gnd 1 ohm\n"
    text = near.format(math.nextafter(2 * math.pi * 3e9, math.inf))
    assert len(equiv.superpose(equiv.parse(text), "V:R").quantities[0].frequencies) == 1


@pytest.mark.parametrize(
    "device", ["transformer T +a -gnd +b -gnd ratio 3:1", "gyrator T +a -gnd +b -gnd r 20 ohm"]
)
def test_lossless_two_pair_devices_take_no_power(device: str) -> None:
    text = f"""
    frequency 50 Hz
    voltage V +s -gnd 10 V @ 30 deg
    resistor R s a 4 ohm
    {device}
    resistor Load b gnd 5 ohm
    current J gnd > b 0.3 A @ -70 deg
    """
    network = equiv.parse(text)
    result = equiv.superpose(network, "P:T", "P:Load")
    assert result.exit_status == 0
    assert abs(at(result).total.real) < 1e-12
    rows = {row["name"]: row for row in equiv.solve(network).to_dict()["result"]["elements"]}
    assert abs(rows["T"]["power"]["re"]) < 1e-12
    assert rows["Load"]["power"]["re"] == pytest.approx(at(result, 1).total.real)


def test_equal_phasors_in_parallel_and_their_group() -> None:
    text = """
    frequency 50 Hz
    voltage A +a -gnd 5 V @ 40 deg{0}
    voltage B +a -gnd 5 V @ 40 deg{0}
    impedance Z a b 1+2j ohm
    resistor R b gnd 3 ohm
    """
    alone = equiv.superpose(equiv.parse(text.format("")), "I:Z")
    assert [t.contribution for t in at(alone).terms] == [None, None]
    expected = 5 * complex(math.cos(math.radians(40)), math.sin(math.radians(40))) / (4 + 2j)
    assert at(alone).total == pytest.approx(expected)
    together = equiv.superpose(equiv.parse(text.format(" group g")), "I:Z")
    (term,) = at(together).terms
    assert term.number == pytest.approx(expected) and term.check == pytest.approx(expected)
    tilted = equiv.parse(text.format("").replace("B +a -gnd 5 V @ 40", "B +a -gnd 5 V @ 41"))
    with pytest.raises(equiv.NoUniqueSolutionError, match="disagree"):
        equiv.superpose(tilted, "I:Z")


def test_a_group_that_rescues_some_members_is_one_term() -> None:
    text = """
    voltage A +a -gnd 5 V group g
    voltage B +a -gnd 5 V group g
    voltage C +c -gnd 2 V group g
    resistor R a c 1 ohm
    resistor Rc c gnd 4 ohm
    """
    result = equiv.superpose(equiv.parse(text), "I:R")
    (term,) = at(result).terms
    assert term.members == ("A", "B", "C")
    assert at(result).total == pytest.approx(3) and result.exit_status == 0


def test_a_small_contradiction_is_seen_beside_a_large_source() -> None:
    text = """
    voltage Big +h -gnd 100 kV
    resistor Rh h gnd 1 Mohm
    voltage A +a -gnd 10 uV
    voltage B +a -gnd 50 uV
    resistor R a gnd 1 ohm
    """
    result = equiv.superpose(equiv.parse(text), "I:Rh", "I:R")
    assert [str(q.quantity) for q in result.quantities] == ["I:Rh"]
    assert at(result).total == pytest.approx(0.1)
    assert any("disagree by 40 µV" in c.message for c in result.cautions)


@pytest.mark.parametrize(
    ("text", "quantity"),
    [
        ("voltage V +a -gnd 9 V\nresistor A a b 1 kohm\nresistor B b gnd 2 kohm\nresistor C a d 3 kohm\n"
         "resistor D d gnd 6 kohm\nresistor X b d 70 ohm\n", "I:X"),
        ("voltage V +a -gnd 9 V\nresistor R a b 7 ohm\ncapacitor C b c 1 uF\ncapacitor D c gnd 1 uF\n", "I:C"),
        ("voltage V +a -gnd 9 V\nvoltage W +b -gnd 9 V\nresistor R a b 7 ohm\nresistor S b gnd 3 ohm\n", "P:R"),
    ],
    ids=["balanced bridge", "capacitors at DC", "no current, no power"],
)  # fmt: skip
def test_what_is_only_rounding_is_zero(text: str, quantity: str) -> None:
    network = equiv.parse(text)
    result = equiv.superpose(network, quantity)
    assert at(result).total == 0 and result.exit_status == 0, result.checks
    assert equiv.solve(network).exit_status in (0, 4)
    assert all(check.passed for check in equiv.solve(network).checks)


def test_balanced_bridges_pass_their_checks_whatever_the_values() -> None:
    draw = random.Random(3)
    for _ in range(30):
        a, b, k = draw.uniform(1, 9), draw.uniform(1, 9), draw.uniform(0.1, 9)
        text = (
            f"voltage V +s -gnd 5 V\nresistor A s p {a!r} ohm\nresistor B p gnd {b!r} ohm\n"
            f"resistor C s q {a * k!r} ohm\nresistor D q gnd {b * k!r} ohm\nresistor X p q 2 ohm\n"
        )
        result = equiv.superpose(equiv.parse(text), "I:X", "P:X", "V:p,q")
        assert result.exit_status == 0, result.checks


def test_the_largest_terms_of_many_are_checked() -> None:
    draw = random.Random(4)
    sizes = [draw.uniform(0.1, 1) for _ in range(250)]
    sizes[17], sizes[203] = 40.0, -60.0
    text = "resistor R a gnd 1 ohm\n" + "".join(
        f"current J{k} gnd > a {size!r} A\n" for k, size in enumerate(sizes)
    )
    result = equiv.superpose(equiv.parse(text), "V:a")
    checked = {t.source for t in at(result).terms if t.check is not None}
    assert len(checked) == 16 and {"J17", "J203"} <= checked
    largest = sorted(range(250), key=lambda k: -abs(sizes[k]))[:8]
    assert {f"J{k}" for k in largest} <= checked
    assert "16 of 250 terms" in result.render()
    every = equiv.superpose(equiv.parse(text), "V:a", check="all")
    assert all(t.check is not None for t in at(every).terms)
    none = equiv.superpose(equiv.parse(text), "V:a", check="none")
    assert all(t.check is None for t in at(none).terms)


def term(contribution: complex, check: complex) -> Term:
    return Term("V", "voltage", ("V",), 1, "V", contribution, "1", contribution, check)


def test_checks_can_fail() -> None:
    sound = FrequencyTerms(DC, (term(1, 1), term(-0.25, -0.25)), 0.75)
    assert sound.agrees and sound.difference == 0
    assert not FrequencyTerms(DC, (term(1, 1 + 1e-6), term(-0.25, -0.25)), 0.75).agrees
    assert not FrequencyTerms(DC, (term(1, 1), term(-0.25, 0.25)), 0.75).agrees
    assert not FrequencyTerms(DC, (term(1, 1), term(-0.25, -0.25)), 0.75 + 1e-6).agrees
    assert not FrequencyTerms(DC, (term(1e-5, -1e-5), term(1, 1)), 1 + 1e-5).agrees
    assert Check("x", 1e-10, 1e-9).passed and not Check("x", 1e-8, 1e-9).passed
    assert not Check("x", math.nan, 1e-9).passed


def test_a_failed_check_is_the_exit_status() -> None:
    result = equiv.superpose(equiv.parse("voltage V +a -gnd 1 V\nresistor R a gnd 1 ohm\n"), "I:R")
    assert result.exit_status == ExitStatus.DONE
    failed = replace(result, checks=(Check("sum", 1e-3, 1e-9, shared=True),))
    assert failed.exit_status == ExitStatus.CHECK_FAILED
    assert "FAILED" in failed.render()


def test_paths_of_groups_are_those_of_their_members() -> None:
    text = """
    voltage A +a -gnd 5 V group g
    current B gnd > b 2 A group g
    resistor R1 a b 3 ohm
    resistor R2 b gnd 4 ohm
    cccs F b > gnd beta 0.5 senses I:R1
    """
    single = equiv.superpose(equiv.parse(text), "V:b", paths=True)
    (group,) = at(equiv.superpose(equiv.parse(text), "V:b", by="group", paths=True)).terms
    paths = [t.paths for t in at(single).terms]
    assert group.paths is not None
    assert group.paths.direct == pytest.approx(sum(p.direct for p in paths if p))
    assert group.paths.total == pytest.approx(group.number)


def test_asking_nothing_lists_what_can_be_asked() -> None:
    result = equiv.superpose(equiv.parse("voltage V +a -gnd 1 V\nresistor R a gnd 1 ohm\n"))
    assert result.to_dict()["result"]["askable"] == [
        "V:a",
        "V:V",
        "I:V",
        "P:V",
        "V:R",
        "I:R",
        "P:R",
    ]
