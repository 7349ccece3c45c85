"""Parameters of ports: published values, closed forms, sources, and what does not exist."""

import cmath
import math
from pathlib import Path

import numpy as np
import pytest

import equiv
from equiv.errors import DoesNotExistError, ExitStatus, UsageError

TWO_PORTS = "port IN +a -gnd\nport OUT +b -gnd\n"
FORMS = ("z", "y", "h", "g", "abcd", "s")


def parameters(text: str, form: str, **options: object) -> np.ndarray:
    result = equiv.port(equiv.parse(text + TWO_PORTS), form=form, **options)
    assert result.exit_status == 0, result.checks
    return result.forms[0].parameters


def printed(found: complex, text: str) -> None:
    """Within half of the last printed digit."""
    decimals = len(text.partition(".")[2])
    assert abs(found - float(text)) <= 0.5 * 10.0**-decimals * (1 + 1e-9), (found, text)


# Published values


def test_z_to_y_and_abcd() -> None:
    """R. Singh, Electrical Network, Example 11.19, p. 11.49 (the printed value was read)."""
    text = "resistor R1 a m 10 ohm\nresistor R2 b m 20 ohm\nresistor R3 m gnd 10 ohm\n"
    np.testing.assert_allclose(parameters(text, "z"), [[20, 10], [10, 30]], rtol=1e-14)
    for found, told in zip(
        parameters(text, "y").ravel(), ("0.06", "-0.02", "-0.02", "0.04"), strict=True
    ):
        printed(found, told)
    for found, told in zip(
        parameters(text, "abcd").ravel(), ("2.00", "50.00", "0.10", "3.00"), strict=True
    ):
        printed(found, told)


def test_y_of_a_two_port_that_is_not_reciprocal() -> None:
    """R. Singh, Electrical Network, Example 11.22, p. 11.52 (the printed value was read)."""
    y = parameters("twoport B +a -gnd +b -gnd z 0.8 -0.8 0.4 -2.4\n", "y")
    np.testing.assert_allclose(y, [[1.5, -0.5], [0.25, -0.5]], rtol=1e-12)


def test_h_with_its_signs() -> None:
    """R. Singh, Electrical Network, Example 11.23, p. 11.53: h21 = -z21/z22 (value read)."""
    h = parameters("twoport B +a -gnd +b -gnd z 5 1 -1 3\n", "h")
    for found, told in zip(h.ravel(), ("5.3333", "0.3333", "0.3333", "0.3333"), strict=True):
        printed(found, told)


def test_reflection_with_the_second_port_shorted(tmp_path: Path) -> None:
    """D. M. Pozar, Microwave Engineering, Example 4.5, p. 202: 3.967 dB (value read)."""
    (tmp_path / "x.s2p").write_text("# GHz S RI R 50\n1 0.1 0 0 0.8 0 0.8 0.2 0\n")
    text = 'frequency 1 GHz\ntwoport B +a -gnd +b -gnd file "x.s2p"\nshort S b gnd\n'
    result = equiv.port(equiv.parse(text, folder=tmp_path), "a,gnd", form="s", reference=50)
    printed(-20 * math.log10(abs(result.forms[0].parameters[0, 0])), "3.967")


def test_pad_of_20_decibels() -> None:
    """s of a T pad: s11 = 0, s21 = 0.1 by its definition (from memory)."""
    text = (
        "resistor R1 a m (600*9/11)\nresistor R2 m b (600*9/11)\nresistor R3 m gnd (2*600*10/99)\n"
    )
    s = parameters(text, "s", reference="600 ohm")
    np.testing.assert_allclose(s, [[0, 0.1], [0.1, 0]], atol=1e-15)


def test_image_impedance_and_attenuation_of_a_pi_section() -> None:
    """J. O. Bird, Electrical Circuit Theory and Technology, ch. 41 Example 6, p. 769 (read)."""
    text = "resistor R1 a b 500\nresistor R2 a gnd 1 kohm\nresistor R3 b gnd 1 kohm\n"
    _, b, c, _ = parameters(text, "abcd").ravel()
    image = math.sqrt(b / c)
    printed(image, "447.21")
    s = parameters(text, "s", reference=image)
    assert abs(s[0, 0]) < 1e-12
    printed(-20 * math.log10(abs(s[1, 0])), "8.36")


def test_s_of_a_series_impedance_and_of_a_shunt_admittance() -> None:
    """Z/(Z + 2 Z0) and -Y/(Y + 2 Y0): textbook formulas (from memory)."""
    s = parameters("frequency 1 MHz\nimpedance Z a b 30+40j ohm\n", "s")
    assert abs(s[0, 0] - (30 + 40j) / (130 + 40j)) < 1e-14
    assert abs(s[0, 0] - complex(0.297297297, 0.216216216)) < 1e-9
    shunt = "frequency 1 MHz\nadmittance Y a gnd 0.01-0.02j S\nshort L a b\n"
    s = parameters(shunt, "s")
    assert abs(s[0, 0] - complex(-0.310344828, 0.275862069)) < 1e-9


def test_bridged_t() -> None:
    """D. M. Pozar, Microwave Engineering, Example 4.7, p. 226 (formula read): y adds."""
    text = "resistor R1 a m 50\nresistor R2 m b 50\nresistor R3 m gnd 50\nresistor R4 a b 50\n"
    y = parameters(text, "y")
    assert abs(y[0, 0] - 1 / 30) < 1e-14
    assert abs(y[1, 0] + 2 / 75) < 1e-14


# Source vectors, by hand


def test_source_vectors_of_a_t_with_a_source_in_its_stem() -> None:
    text = (
        "resistor R1 a m 10 ohm\nresistor R2 b m 20 ohm\nresistor R3 m q 10 ohm\n"
        "voltage E +q -gnd 6 V\n" + TWO_PORTS
    )
    network = equiv.parse(text)

    def sources(form: str) -> list[float]:
        return list(equiv.port(network, form=form).forms[0].sources)

    assert sources("z") == pytest.approx([6, 6])  # both ports open
    assert sources("y") == pytest.approx([-0.06 * 6 + 0.02 * 6, 0.02 * 6 - 0.04 * 6])
    assert sources("h") == pytest.approx([6 * 20 / 30, -6 / 30])  # IN open, OUT shorted
    assert sources("g") == pytest.approx([-6 / 20, 6 * 10 / 20])  # IN shorted, OUT open
    # v2 = 0 and j2 = 0: no current in R2, so the stem's node is at 0 V and 0.6 A flows out of IN
    assert sources("abcd") == pytest.approx([-6, -0.6])


def test_source_wave() -> None:
    network = equiv.parse("voltage E +q -gnd 6 V\nresistor R q a 100 ohm\n")
    form = equiv.port(network, "a,gnd", form="s", reference=50).forms[0]
    assert form.parameters[0, 0] == pytest.approx(1 / 3)
    assert form.sources[0] == pytest.approx(2 / math.sqrt(50))
    # the available power: |b0|²/(1 - |s|²) = E²/(4 R)
    available = form.sources[0] ** 2 / (1 - form.parameters[0, 0] ** 2)
    assert available == pytest.approx(36 / 400)


def test_the_reference_of_each_port() -> None:
    text = "transformer T +a -gnd +b -gnd ratio 2:1\n"
    s = parameters(text, "s", reference=("200 ohm", 50))
    np.testing.assert_allclose(s, [[0, 1], [1, 0]], atol=1e-15)
    s = parameters(text, "s", reference=50)
    np.testing.assert_allclose(s, [[0.6, 0.8], [0.8, -0.6]], atol=1e-14)


def test_terms_add_to_the_source_vector_and_groups_of_sources_are_apart() -> None:
    text = (
        "voltage E +q -gnd 6 V\nresistor R1 q a 10\ncurrent J gnd > b 2 A\n"
        "resistor R2 b a 5\nresistor R3 b gnd 7\n" + TWO_PORTS
    )
    for form in FORMS:
        found = equiv.port(equiv.parse(text), form=form).forms[0]
        alone = [
            equiv.port(equiv.parse(text).isolate(name), form=form).forms[0].sources
            for name in ("E", "J")
        ]
        np.testing.assert_allclose(found.terms.T, alone, rtol=1e-12, atol=1e-14)
        np.testing.assert_allclose(found.sources, sum(alone), rtol=1e-12, atol=1e-14)


# What exists

EXISTING = {
    "resistor R a gnd 5\nresistor Q b gnd 7\n": "z y h g s",
    "resistor R a b 50\n": "y h g abcd s",
    "short L a b\nresistor R a gnd 50\n": "z h g abcd s",
    "short L a b\n": "h g abcd s",
    "transformer T +a -gnd +b -gnd ratio 2:1\n": "h g abcd s",
    "transformer T +a -gnd +c -gnd ratio 2:1\nvoltage V +b -c 3 V\n": "h g abcd s",
    "gyrator G +a -gnd +b -gnd r 10\n": "z y abcd s",
    "opamp U +a -gnd b\n": "abcd",
    "vcvs E +b -gnd mu 10 senses V:a\nresistor R a gnd 1 kohm\n": "z g abcd s",
    "open O a gnd\nvcvs E +b -gnd mu 10 senses V:a\n": "g abcd s",
    "ccvs E +b -gnd r 10 ohm senses I:S\nshort S a gnd\n": "z abcd s",
    "open O a gnd\nvccs E b > gnd g 10 mS senses V:a\n": "y abcd s",
    "cccs E b > gnd beta 10 senses I:S\nshort S a gnd\n": "h abcd s",
    "voltage V +a -gnd 5 V\nresistor Q a b 7\n": "z h s",
    "voltage V +a -gnd 5 V\ncurrent I gnd > b 1 A\n": "h s",
    "current I gnd > a 1 A\nvoltage V +b -gnd 5 V\n": "g s",
    "resistor R a gnd -50\nresistor Q b gnd 20\n": "z y h g",
    "voltage V +q -gnd 5 V\nvoltage W +q -gnd 6 V\nresistor Q a b 7\n": "",
}


@pytest.mark.parametrize("text", EXISTING, ids=range(len(EXISTING)))
def test_which_forms_exist(text: str) -> None:
    network = equiv.parse(text + TWO_PORTS)
    exist = EXISTING[text].split()
    for form in FORMS:
        if form in exist:
            result = equiv.port(network, form=form)
            assert result.exit_status == ExitStatus.DONE, (form, result.checks)
            assert np.isfinite(result.forms[0].parameters).all()
            assert result.render() and result.to_dict()["result"]["form"] == form
            continue
        with pytest.raises(DoesNotExistError) as caught:
            equiv.port(network, form=form)
        (diagnostic,) = caught.value.diagnostics
        assert diagnostic.code == "no-such-form"
        offered = ", ".join(exist)
        assert diagnostic.hint == (f"these forms exist: {offered}" if offered else "no form exists")


def test_an_ideal_amplifier_has_the_chain_matrix_zero_and_says_it_is_not_proved() -> None:
    result = equiv.port(equiv.parse("opamp U +a -gnd b\n" + TWO_PORTS), form="abcd")
    np.testing.assert_array_equal(result.forms[0].parameters, np.zeros((2, 2)))
    assert [caution.code for caution in result.cautions] == ["unproved"]


def test_nothing_passes_between_ports_that_are_apart() -> None:
    network = equiv.parse("resistor R a gnd 5\nresistor Q b gnd 7\n" + TWO_PORTS)
    with pytest.raises(DoesNotExistError, match="nothing passes from IN to OUT"):
        equiv.port(network, form="abcd")


def test_a_great_attenuation_is_no_isolation() -> None:
    # each divider takes a thousandth; the chain's A is their product
    text = "resistor R1 a m 999\nresistor R2 m gnd 1\nvcvs E +n -gnd mu 1 senses V:m\n"
    text += "resistor R3 n b 999\nresistor R4 b gnd 1\n"
    assert parameters(text, "abcd")[0, 0] == pytest.approx(1e6)


def test_three_ports_of_which_neither_z_nor_y_exists() -> None:
    text = "transformer T +a -gnd +b -gnd ratio 3:1\nresistor R b c 10 ohm\n" + TWO_PORTS
    network = equiv.parse(text + "port AUX +c -gnd\n")
    for form in ("z", "y"):
        with pytest.raises(DoesNotExistError, match=f"have no {form} parameters"):
            equiv.port(network, form=form)
    s = equiv.port(network, form="s").forms[0].parameters
    assert np.linalg.norm(s.conj().T @ s, 2) <= 1 + 1e-12


@pytest.mark.parametrize(
    ("options", "code"),
    [
        ({"form": "t"}, "unknown-form"),
        ({"form": "s", "reference": -50}, "bad-reference"),
        ({"form": "s", "reference": "0 ohm"}, "bad-reference"),
        ({"form": "s", "reference": "50+1j ohm"}, "bad-reference"),
        ({"form": "s", "reference": float("nan")}, "bad-reference"),
        ({"form": "s", "reference": "50 V"}, "wrong-unit"),
        ({"form": "s", "reference": (50, 50, 50)}, "wrong-references"),
        ({"at": [-1]}, "bad-frequency"),
        ({"at": ["1 ohm"]}, "wrong-unit"),
    ],
)
def test_words_that_cannot_be_used(options: dict[str, object], code: str) -> None:
    network = equiv.parse("resistor R a b 5\n" + TWO_PORTS)
    with pytest.raises(UsageError) as caught:
        equiv.port(network, **options)
    assert caught.value.diagnostics[0].code == code


def test_two_port_forms_are_for_two_ports() -> None:
    network = equiv.parse("resistor R a gnd 5\n")
    for form in ("h", "g", "abcd"):
        with pytest.raises(UsageError, match="those of two ports"):
            equiv.port(network, "a,gnd", form=form)
    with pytest.raises(UsageError, match="named twice"):
        equiv.port(network, "a,gnd", "a,gnd")


# Frequencies

FILTER = "frequency 50 Hz\ninductor L a b 10 uH\ncapacitor C b gnd 1 nF\n"


def test_frequencies_in_place_of_the_file_s() -> None:
    network = equiv.parse(FILTER + TWO_PORTS)
    result = equiv.port(network, form="abcd", at=["1 MHz", 2e6, "0 Hz"])
    assert [e.frequency.hertz for e in result.equivalents] == [0, 1e6, 2e6]
    for e, form in zip(result.equivalents, result.forms, strict=True):
        s = 2j * cmath.pi * e.frequency.hertz
        told = [[1 + s * s * 1e-14, s * 1e-5], [s * 1e-9, 1]]
        np.testing.assert_allclose(form.parameters, told, rtol=1e-9, atol=1e-14)
    data = result.to_dict()["result"]
    assert [point["hertz"] for point in data["frequencies"]] == [0, 1e6, 2e6]


def test_a_file_s_points_bind_only_the_frequencies_that_are_asked_for(tmp_path: Path) -> None:
    (tmp_path / "x.s1p").write_text("# MHz S RI R 50\n1 0 0\n2 0.5 0\n3 0.5 0\n")
    network = equiv.parse('nport N +a -gnd file "x.s1p"\n', folder=tmp_path)  # at DC by itself
    result = equiv.port(network, "a,gnd", form="s", at=["1.5 MHz", "2 MHz"])
    assert [form.parameters[0, 0] for form in result.forms] == pytest.approx([0.25, 0.5])
    assert [c.message for c in result.cautions if c.code == "interpolated"] == [
        "x.s1p is taken linear between its points at 1 MHz and 2 MHz"
    ]
    for at in ((), ["4 MHz"]):
        with pytest.raises(UsageError) as caught:
            equiv.port(network, "a,gnd", form="s", at=at)
        assert caught.value.diagnostics[0].code == "outside-file"


def test_what_is_known_at_one_frequency_is_not_used_at_another() -> None:
    network = equiv.parse("frequency 50 Hz\nimpedance Z a b 1+1j ohm\n" + TWO_PORTS)
    with pytest.raises(UsageError, match="Z is known at the file's frequency only"):
        equiv.port(network, form="y", at=["60 Hz"])
    assert equiv.port(network, form="y", at=["50 Hz"]).exit_status == 0


def test_single_ports_are_as_they_were() -> None:
    network = equiv.parse("voltage E +q -gnd 6 V\nresistor R q a 100 ohm\n")
    plain, formed = (equiv.port(network, "a,gnd", form=form) for form in (None, "z"))
    before, after = (result.to_dict()["result"] for result in (plain, formed))
    assert "form" not in before and "frequencies" not in before
    assert {key: after[key] for key in before} == before
    assert after["parameters"] == [[{"re": 100.0, "im": 0.0}]]
    assert after["sources"] == [{"re": 6.0, "im": 0.0}]
    assert after["units"] == [["ohm"]] and after["reference"] is None
