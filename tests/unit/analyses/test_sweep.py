"""Sweeps: closed forms, points without a value, parameters, what is refused, and the forms."""

import csv
import io
import json
import math

import numpy as np
import pytest

import equiv
from equiv.analyses.picture import drawn
from equiv.analyses.tables import Plot, Series

LOW_PASS = """
title A low-pass
frequency 1 kHz
voltage  E +in -gnd 2 V
resistor R in out 1 kohm
capacitor C out gnd 100 nF
port OUT +out -gnd
find V:out "output"
"""
RESONANCE = """
frequency 1 kHz
voltage E +in -gnd 1 V
resistor R in a 5 ohm
inductor L a b 1 mH
capacitor C b gnd 1 uF
"""
STATION = """
frequency 50 Hz
given tail = 10 mohm
given gain = 2
block feeder (a b) length=1
  resistor R a m (length*tail)
  resistor S m b (2*tail)
end
voltage  A +a -gnd 230 V
voltage  B +b -gnd 220 V @ 10 deg
use feeder F1 (a bus) length=gain
use feeder F2 (b bus)
ccvs     K +bus -k r (gain*tail) senses I:F1.R
inductor L k gnd 5 mH
"""


def low_pass(hertz: np.ndarray) -> np.ndarray:
    return 2 / (1 + 2j * np.pi * hertz * 1e3 * 100e-9)


def test_low_pass_is_its_closed_form() -> None:
    found = equiv.sweep(equiv.parse(LOW_PASS), start="1 Hz", stop="1 MHz", points=61, log=True)
    (curve,) = found.curves
    told = low_pass(found.axis.values)
    assert np.abs(curve.total - told).max() <= 1e-13 * 2
    assert np.abs(curve.terms[:, 0] - told).max() <= 1e-13 * 2
    assert found.exit_status == 0
    assert curve.dominant == (0,) * 61


def test_impedance_of_the_low_pass_with_the_dc_point() -> None:
    found = equiv.sweep(equiv.parse(LOW_PASS), "OUT", start=0, stop="10 kHz", points=11)
    (curve,) = found.curves
    s = 2j * np.pi * found.axis.values
    assert curve.impedance is not None
    assert found.axis.values.tolist() == [1000.0 * k for k in range(11)]
    np.testing.assert_allclose(curve.impedance, 1 / (1e-3 + s * 100e-9), rtol=1e-12)
    np.testing.assert_allclose(curve.total, low_pass(found.axis.values), rtol=1e-12)


def test_resonance_peaks_where_it_should() -> None:
    network = equiv.parse(RESONANCE)
    found = equiv.sweep(network, "I:R", "V:C", start="3 kHz", stop="7 kHz", points=401)
    current, voltage = found.curves
    omega = 2 * np.pi * found.axis.values
    z = 5 + 1j * (omega * 1e-3 - 1 / (omega * 1e-6))
    np.testing.assert_allclose(current.total, 1 / z, rtol=1e-11)
    np.testing.assert_allclose(voltage.total, 1 / (z * 1j * omega * 1e-6), rtol=1e-11)
    peak = found.axis.values[np.abs(current.total).argmax()]
    assert peak == pytest.approx(1 / (2 * math.pi * math.sqrt(1e-9)), abs=5.0)


def test_radians_a_second() -> None:
    found = equiv.sweep(equiv.parse(LOW_PASS), start="1 krad/s", stop="100 krad/s", points=3)
    assert found.axis.unit == "rad/s"
    told = 2 / (1 + 1j * found.axis.values * 1e-4)
    np.testing.assert_allclose(found.curves[0].total, told, rtol=1e-13)


@pytest.mark.parametrize("over", ["tail", "gain"])
def test_a_parameter_is_the_text_read_with_its_value(over: str) -> None:
    network = equiv.parse(STATION)
    ends = ("1 mohm", "50 mohm") if over == "tail" else ("0.5", "4")
    found = equiv.sweep(network, "V:bus", "I:F2.S", "P:L", over=over, start=ends[0], stop=ends[1],
                        points=7)  # fmt: skip
    for point in range(7):
        fresh = equiv.parse(STATION, given={over: found.axis.at(point)})
        told = equiv.superpose(fresh, "V:bus", "I:F2.S", "P:L")
        for curve, q in zip(found.curves, told.quantities, strict=True):
            at = q.frequencies[0]
            assert curve.total[point] == pytest.approx(at.total, rel=1e-12)
            if at.power:
                assert list(curve.terms[point]) == pytest.approx(list(at.power.own), rel=1e-11)
            else:
                own = [t.contribution for t in at.terms]
                assert list(curve.terms[point]) == pytest.approx(own, rel=1e-12)
    spread = np.abs(found.curves[0].total)
    assert spread.max() > 1.001 * spread.min()  # the blocks follow the parameter


def test_given_words_stay_while_another_parameter_moves() -> None:
    network = equiv.parse(STATION, given={"gain": "3"}, frequency="60 Hz")
    found = equiv.sweep(network, "V:bus", over="tail", start="10 mohm", stop="20 mohm", points=2)
    fresh = equiv.parse(STATION, given={"gain": "3", "tail": "20 mohm"}, frequency="60 Hz")
    total = equiv.superpose(fresh, "V:bus").quantities[0].frequencies[0].total
    assert found.curves[0].total[1] == pytest.approx(total, rel=1e-12)


def test_a_changed_network_moves_with_its_changes() -> None:
    network = equiv.parse(STATION).isolate("A")
    found = equiv.sweep(network, "V:bus", over="tail", start="10 mohm", stop="20 mohm", points=2)
    fresh = equiv.parse(STATION, given={"tail": "20 mohm"})
    at = equiv.superpose(fresh, "V:bus").quantities[0].frequencies[0]
    assert found.curves[0].total[1] == pytest.approx(at.terms[0].contribution, rel=1e-12)


def test_sources_of_several_frequencies_have_a_curve_each() -> None:
    text = STATION + "voltage H +h -gnd 3 V at 150 Hz\nresistor Rh h bus 1 ohm\n"
    found = equiv.sweep(equiv.parse(text), "V:bus", over="tail", start="1mohm", stop="9mohm",
                        points=3)  # fmt: skip
    assert [c.frequency.hertz for c in found.curves if c.frequency] == [50, 150]
    assert [c.sources for c in found.curves] == [("A", "B"), ("H",)]


def test_sources_at_their_own_frequency_stay_out_of_a_frequency_sweep() -> None:
    text = LOW_PASS + "voltage H +h -gnd 3 V at 50 Hz\nresistor Rh h out 1 kohm\n"
    found = equiv.sweep(equiv.parse(text), start="50 Hz", stop="60 Hz", points=2)
    assert found.curves[0].sources == ("E",)
    quiet = equiv.superpose(equiv.parse(text, frequency="60 Hz")).quantities[0].frequencies
    told = next(f for f in quiet if f.frequency.hertz == 60).total
    assert found.curves[0].total[1] == pytest.approx(told, rel=1e-12)
    assert "H at 50 Hz" in found.render()


def test_peak_phasors_are_halved_in_power_but_not_at_dc() -> None:
    found = equiv.sweep(equiv.parse(LOW_PASS + "phasors peak\n"), start=0, stop="2 Hz", points=3)
    np.testing.assert_allclose(
        np.abs(found.curves[0].total), np.abs(low_pass(found.axis.values)) / [1, 2**0.5, 2**0.5]
    )
    dc_file = LOW_PASS.replace("frequency 1 kHz\n", "") + "phasors peak\n"
    again = equiv.sweep(equiv.parse(dc_file), start=0, stop="2 Hz", points=3)
    np.testing.assert_allclose(again.curves[0].total, found.curves[0].total, rtol=1e-13)


def test_a_point_without_a_unique_solution_is_a_row_with_the_reason() -> None:
    text = "frequency 1 kHz\ncurrent J gnd > a 1 A\ncapacitor C a b 1 uF\nresistor R b gnd 1 ohm\n"
    found = equiv.sweep(equiv.parse(text), "V:a", "a,gnd", start=0, stop="1 kHz", points=3)
    assert found.exit_status == 4
    for curve in found.curves:
        assert curve.exists.tolist() == [False, True, True]
        assert list(curve.reasons) == [0]
    assert found.data()["curves"][0]["points"][0]["total"] is None
    assert "No value at 0 Hz: " in found.render()
    reason = found.curves[0].reasons[0]
    assert "a" in reason and "matrix" not in reason


def test_an_exact_resonance_is_a_row_with_the_reason() -> None:
    text = "frequency 1 Hz\ncurrent J gnd > a 1 A\ninductor L a gnd 1 H\ncapacitor C a gnd 1 F\n"
    found = equiv.sweep(equiv.parse(text), "V:a", start="0.5 rad/s", stop="1.5 rad/s", points=3)
    assert found.curves[0].exists.tolist() == [True, False, True]
    assert found.exit_status == 4


def test_no_value_at_any_point_is_an_error() -> None:
    text = "frequency 1 Hz\ncurrent J gnd > a 1 A\ncapacitor C b gnd 1 F\nresistor R b gnd 1 ohm\n"
    network = equiv.parse(text + "opamp U +b -gnd c\nresistor Q c gnd 1 ohm\n")
    with pytest.raises(equiv.NoUniqueSolutionError):
        equiv.sweep(network, "V:a", start="1 Hz", stop="2 Hz", points=3)


def test_a_port_that_fixes_its_current_has_no_impedance() -> None:
    network = equiv.parse("frequency 1 Hz\ncurrent J gnd > a 1 A\nresistor R b gnd 1 ohm\n")
    with pytest.raises(equiv.DoesNotExistError):
        equiv.sweep(network, "a,gnd", start="1 Hz", stop="2 Hz", points=3)


def test_a_value_that_the_file_cannot_have_is_a_row_with_the_reason() -> None:
    text = "given d = 1 ohm\nvoltage E +a -gnd 1 V\nresistor R a gnd (1 ohm^2/d)\n"
    text = text.replace("ohm^2", "ohm*1 ohm")
    found = equiv.sweep(equiv.parse(text), "I:R", over="d", start="-1 ohm", stop="1 ohm", points=3)
    assert found.curves[0].reasons == {1: "the divisor is zero"}
    assert found.curves[0].total[2] == 1


@pytest.mark.parametrize(
    ("words", "code", "part"),
    [
        ({"over": "tial", "start": "1ohm", "stop": "2ohm"}, "unknown-given", "tial"),
        ({"over": "tail", "start": "1V", "stop": "2V"}, "wrong-unit", "1V"),
        ({"over": "tail", "start": "1ohm", "stop": "1ohm"}, "wrong-sweep", "begins and ends"),
        ({"start": "0 Hz", "stop": "1 Hz", "log": True}, "wrong-sweep", "logarithmic"),
        ({"start": "-1 Hz", "stop": "1 Hz"}, "wrong-sweep", "negative"),
        ({"start": "1 Hz", "stop": "2 Hz", "points": 1}, "wrong-sweep", "points"),
    ],
)
def test_what_cannot_be_swept(words: dict[str, object], code: str, part: str) -> None:
    with pytest.raises(equiv.UsageError) as caught:
        equiv.sweep(equiv.parse(STATION), "V:bus", **words)  # type: ignore[arg-type]
    (diagnostic,) = caught.value.diagnostics
    assert diagnostic.code == code
    assert part in diagnostic.message
    if code == "unknown-given":
        assert diagnostic.hint == "did you mean tail?"


def test_elements_known_at_one_frequency_are_named() -> None:
    text = LOW_PASS + "impedance Zx out gnd 3+4j ohm\nadmittance Yx out gnd 1 S\n"
    text += "vcvs G +q -gnd mu 1+1j senses V:out\nresistor Rq q gnd 1 ohm\n"
    text = text.replace("mu 1+1j", "mu 2")
    with pytest.raises(equiv.UsageError, match="Zx, Yx are known at the file's frequency only"):
        equiv.sweep(equiv.parse(text), start="1 Hz", stop="2 Hz", points=3)
    given = text + "given k = 1 ohm\n"
    over = equiv.sweep(equiv.parse(given), over="k", start=1, stop=2, points=2)
    assert over.exit_status == 0


def test_nothing_asked() -> None:
    with pytest.raises(equiv.UsageError, match="no find statement"):
        equiv.sweep(equiv.parse(RESONANCE), start="1 Hz", stop="2 Hz")


def test_progress_is_told() -> None:
    told: list[tuple[int, int]] = []
    equiv.sweep(equiv.parse(LOW_PASS), start="1 Hz", stop="2 Hz", points=50,
                progress=lambda work, done, total: told.append((done, total)))  # fmt: skip
    assert told[-1] == (50, 50)


def test_csv_reads_back_to_the_same_numbers() -> None:
    text = LOW_PASS + "current J gnd > out 1 mA @ 30 deg\n"
    found = equiv.sweep(equiv.parse(text), start="1 Hz", stop="1 MHz", points=13, log=True)
    rows = list(csv.DictReader(io.StringIO(found.render("csv"))))
    (curve,) = found.curves
    assert [float(r["frequency [Hz]"]) for r in rows] == found.axis.values.tolist()
    for k, source in enumerate(curve.sources):
        read = [complex(float(r[f"term of {source}_re [V]"]), float(r[f"term of {source}_im [V]"]))
                for r in rows]  # fmt: skip
        assert read == curve.terms[:, k].tolist()
    total = [complex(float(r["total_re [V]"]), float(r["total_im [V]"])) for r in rows]
    assert total == curve.total.tolist()
    assert [r["dominating source"] for r in rows] == [
        curve.sources[k] for k in curve.dominant if k is not None
    ]


def test_json_is_complete_and_finite() -> None:
    found = equiv.sweep(equiv.parse(LOW_PASS), "V:out", "OUT", start=0, stop="1 kHz", points=3)
    text = json.dumps(found.to_dict(), allow_nan=False)
    result = json.loads(text)["result"]
    assert result["over"] == {"name": "frequency", "unit": "Hz", "log": False,
                              "values": [0, 500, 1000]}  # fmt: skip
    point = result["curves"][1]["points"][1]
    assert set(point) == {"at", "impedance", "open_circuit_voltage", "terms", "gross_shares",
                          "dominating", "reason"}  # fmt: skip
    assert point["dominating"] == "E"


def test_stacked_bands_add_up() -> None:
    lines = [f"current J{k} gnd > out {k + 1} mA" for k in range(9)]
    network = equiv.parse(LOW_PASS + "\n".join(lines) + "\n")
    found = equiv.sweep(network, start="1 kHz", stop="1 MHz", points=20, log=True)
    (plot,) = found.plots()
    stacked = np.sum([band.values for band in plot.bands], axis=0)
    np.testing.assert_allclose(stacked, found.curves[0].sizes.sum(axis=1), rtol=1e-12)
    assert [band.name for band in plot.bands] == ["J8", "J7", "J6", "J5", "J4", "other sources"]
    (line,) = plot.lines
    assert (np.array(line.values) <= stacked * (1 + 1e-12)).all()
    shares = found.curves[0].shares
    np.testing.assert_allclose(shares.sum(axis=1), 1)


PLOT = Plot(
    "Title", "frequency", "Hz", (10.0, 100.0, 1000.0, 10000.0), True, "Voltage of a", "V",
    (Series("E", (3e-3, 2e-3, float("nan"), 0.0)), Series("\x1b[2J", (0.0, 1e-3, float("nan"), 1e-3))),
    (Series("|sum|", (3e-3, 1.5e-3, float("nan"), 1e-3)),),
)  # fmt: skip
DRAWN = """\
          voltage in mV
        3+###..............................
         |##ooo##..........................
         |#####ooo###......................
         |########ooo#####.................
         |###########ooo######.............
         |##############oo#################
         |################ooo##############
      1.5+###################oooooooooooooo
         |#################################
         |#################################
         |#################################                      ...........
         |#################################                      ...........
         |#################################                      ...........
         |#################################                      ...........
         |#################################                      ...........
        0+---------------------------------xxxxxxxxxxxxxxxxxxxxxx-----------
          10 Hz                        316.2 Hz                       10 kHz
          frequency, logarithmic
          o |sum|, where it is less than the stack   . \\x1b[2J   # E
          x no value"""


def test_a_picture_of_text_within_80_columns() -> None:
    text = drawn(PLOT, unicode=False)
    assert text.isascii()
    assert max(map(len, drawn(PLOT, unicode=True).splitlines())) <= 80
    assert "\x1b" not in drawn(PLOT, unicode=True)
    assert text == DRAWN


def test_terminal_without_unicode_gets_the_ascii_picture() -> None:
    from equiv.rendering import terminal

    found = equiv.sweep(equiv.parse(LOW_PASS), start="1 Hz", stop="1 MHz", points=9, log=True)
    assert "█ E" in terminal.draw(found.tables(), 5, 80, unicode=True)
    plain = terminal.draw(found.tables(), 5, 80, unicode=False)
    assert plain.isascii() and "# E" in plain and "\\u" not in plain
    assert "# E" in found.render("latex") and "█ E" in found.to_markdown()
