"""`load`: a port under loads, against closed forms, published values and the network itself."""

import math

import pytest

import equiv
from equiv.analyses.load import LoadedPort
from equiv.errors import NetworkFileError, UsageError

DIVIDER = "voltage E +s -gnd 20 V\nresistor R5 s a 5 ohm\nresistor R15 a gnd 15 ohm\n"
LOOP = "voltage S +s -gnd 2 V\nresistor Rs s gnd 1 kohm\ncurrent J gnd > a 16 mA\n"
STIFF = "voltage E +a -gnd 12 V\nresistor R a gnd 100 ohm\n"
NEGATIVE = "voltage E +s -gnd 1.5 V\nresistor R s a 2.2 kohm\nvccs G gnd > a g 0.75 mS senses V:a\n"


def simple(e: str, z: str, ac: bool = False) -> str:
    kind = "impedance" if ac else "resistor"
    return f"{'frequency 50 Hz' if ac else ''}\nvoltage E +s -gnd {e}\n{kind} Z s a {z} ohm\n"


def loaded(text: str, *values: object) -> LoadedPort:
    result = equiv.load_port(equiv.parse(text), "a,gnd", *values)
    assert all(check.passed for check in result.checks), result.checks
    return result


def state(text: str, *values: object):
    (found,) = loaded(text, *values).first.states
    return found


# J. O. Bird, Electrical Circuit Theory and Technology, ch. 35, Examples 1, 4 and 2, pp. 620-621
# (the printed values were read): loads for maximum power at 120 V, 15+j20 and 60 V, 4+j3.
@pytest.mark.parametrize(
    ("emf", "own", "load", "power"),
    [
        ("120 V", "15+20j", "25 ohm", 180.0),
        ("60 V", "4+3j", "5 ohm", 200.0),
        ("120 V", "15+20j", "15-20j ohm", 240.0),
    ],
)
def test_published_powers(emf: str, own: str, load: str, power: float) -> None:
    found = state(simple(emf, own, ac=True), load)
    assert found.power.real == pytest.approx(power, rel=1e-12)


def test_a_conjugate_load_has_half_the_power() -> None:
    assert state(simple("120 V", "15+20j", True), "15-20j ohm").efficiency.value == pytest.approx(
        0.5, rel=1e-12
    )


def test_efficiency_is_that_of_the_network_not_of_its_equivalent() -> None:
    # Bird, ch. 35 Example 5, p. 622: 3.75 ohm takes 15 W; the divider itself takes more still.
    found = state(DIVIDER, "3.75 ohm")
    assert found.power.real == pytest.approx(15.0)
    voltage = 7.5
    delivered = 20 * (20 - voltage) / 5
    assert found.efficiency.value == pytest.approx(15 / delivered, rel=1e-12)  # not 0.5
    assert found.regulation == pytest.approx((15 - 7.5) / 7.5)
    (source,) = found.proof.sources
    assert source.name == "E" and source.delivered == pytest.approx(delivered)


def test_a_reflected_load_takes_what_the_book_says() -> None:
    # Bird, ch. 35 Example 7, p. 624: 1600 ohm behind 1:8 takes 1600 W at 8 A of the primary.
    text = (
        "voltage E +s -gnd 240 V\nresistor R5 s p 5 ohm\n"
        "transformer T +p -gnd +a -gnd ratio 0.125\n"
    )
    found = state(text, "1600 ohm")
    assert found.power.real == pytest.approx(1600.0)
    assert found.proof.sources[0].delivered == pytest.approx(240 * 8.0)


def test_short_and_open() -> None:
    short, opened = loaded(DIVIDER, "short open").first.states
    assert short.point.current == pytest.approx(4.0) and short.point.voltage == 0
    assert opened.point.voltage == pytest.approx(15.0) and opened.point.current == 0
    assert short.regulation is None and opened.regulation == 0
    assert short.efficiency.value == opened.efficiency.value == 0


@pytest.mark.parametrize("power", [0.5, 7.0, 14.99999, -3.0])
def test_both_points_of_a_constant_power(power: float) -> None:
    high, low = loaded(DIVIDER, f"power {power} W").first.states
    e, r = 15.0, 3.75
    root = math.sqrt(e * e / 4 - r * power)
    assert high.point.voltage == pytest.approx(e / 2 + root, rel=1e-9)
    assert low.point.voltage == pytest.approx(e / 2 - root, rel=1e-9)
    for found in (high, low):
        assert found.power.real == pytest.approx(power, rel=1e-12)
    assert (high.which, low.which) == ("1 of 2", "2 of 2")


def test_the_largest_power_is_one_point_and_more_is_none() -> None:
    most = state(DIVIDER, "power 15 W")
    assert most.point.voltage == pytest.approx(7.5) and not most.which
    result = loaded(DIVIDER, "power 15.001 W", "8 ohm")
    none, there = result.first.states
    assert none.words == "none: at most 15.000 W can be drawn" and none.most == pytest.approx(15)
    assert there.exists and result.exit_status == 0
    assert loaded(DIVIDER, "power 16 W").exit_status == 5


@pytest.mark.parametrize("factor", [1.0, 0.8, 0.3])
@pytest.mark.parametrize("side", ["lag", "lead"])
def test_the_largest_power_at_an_angle(factor: float, side: str) -> None:
    text = simple("120 V", "15+20j", True)
    tangent = math.tan(math.acos(factor)) * (1 if side == "lag" else -1)
    # the load impedance of that angle with |Zl| = |Z| takes the most (common practice)
    zl = 25 * complex(factor, math.copysign(math.sqrt(1 - factor**2), tangent))
    most = 120**2 * zl.real / abs(15 + 20j + zl) ** 2
    assert state(text, f"power 1 MW pf {factor} {side}").most == pytest.approx(most, rel=1e-12)
    high, low = loaded(text, f"power {most * 0.999} W pf {factor} {side}").first.states
    for found in (high, low):
        assert found.power == pytest.approx(most * 0.999 * complex(1, tangent), rel=1e-9)
    assert abs(high.point.voltage) > abs(low.point.voltage)


def test_power_on_a_port_that_gives_one_current_or_one_voltage() -> None:
    found = state(LOOP, "power 5 mW")
    assert found.point.voltage == pytest.approx(5 / 16) and found.point.current == 0.016
    assert state(STIFF, "power 24 W").point.current == pytest.approx(2.0)


def test_a_port_without_open_voltage_says_why() -> None:
    opened, current, resistor = loaded(LOOP, "open", "current 2 mA", "250 ohm").first.states
    assert opened.words.startswith("none: with the port open, J and load at a,gnd cut node a off")
    assert current.words == "none: the port gives 16.000 mA whatever its voltage"
    assert resistor.point.voltage == pytest.approx(4.0) and resistor.regulation is None
    assert "no voltage is determined" in state(LOOP, "current 16 mA").words


def test_a_port_without_short_current_says_why() -> None:
    short, load = loaded(STIFF, "short", "6 ohm").first.states
    assert short.words.startswith("none: with the port shorted") and load.regulation == 0
    assert load.efficiency.value == pytest.approx(24 / 25.44)


def test_a_negative_resistance() -> None:
    result = loaded(NEGATIVE, "1 kohm", "power 1 W", "power -1 W")
    r = 1 / (1 / 2200 - 0.75e-3)
    e = 1.5 / 2200 * r
    resistor, high, low, none = result.first.states
    assert resistor.point.voltage == pytest.approx(e * 1000 / (r + 1000))
    for found in (high, low):
        assert found.point.voltage + r * found.point.current == pytest.approx(e)
    assert none.most == pytest.approx(abs(e * e / (4 * r)))
    assert "fed in" in none.words
    assert "resistance-not-positive" in {caution.code for caution in result.cautions}
    cancelling = state("voltage E +s -gnd 1 V\nresistor R s a -5 ohm\n", "5 ohm")
    assert "add to zero: no current fits" in cancelling.words


def test_a_dead_port() -> None:
    dead = (
        "frequency 50 Hz\nresistor R a gnd 5 ohm\nvoltage E +s -gnd 0 V\nresistor Q s gnd 1 ohm\n"
    )
    short, power = loaded(dead, "short", "power 1 W").first.states
    assert short.point.current == 0 and "fix a phase" in power.words
    assert "at most 0" in state(dead.removeprefix("frequency 50 Hz\n"), "power 1 W").words


def test_a_load_that_gives_power_has_no_efficiency() -> None:
    found = state(DIVIDER, "current -2 A")
    assert found.power.real < 0 and found.efficiency.value is None
    assert found.efficiency.reason == "the load itself gives power"


def test_the_power_of_sources_that_are_not_determined() -> None:
    text = "voltage A +a -gnd 24 V\nvoltage B +a -gnd 24 V\nresistor R a gnd 8 ohm\n"
    found = state(text, "6 ohm")
    assert found.point.current == pytest.approx(4.0)
    assert found.efficiency == (None, "the power of A and B is not determined")


def test_controlled_sources_are_named_and_not_counted() -> None:
    text = "voltage S +s -gnd 1 V\nresistor Rs s gnd 1 kohm\nvcvs K +k -gnd mu 10 senses V:s\nresistor Rk k a 1 ohm\n"
    result = loaded(text, "9 ohm")
    (found,) = result.first.states
    assert found.efficiency.value == pytest.approx(9 / 1e-3)
    assert [(s.name, s.role) for s in found.proof.sources] == [
        ("S", "independent"),
        ("K", "controlled"),
    ]
    assert "K: no independent source, and delivers power all the same" in " ".join(
        result.tables()[0].notes
    )


def test_phasors_of_a_peak_file_and_current_loads_are_rms() -> None:
    text = "frequency 50 Hz\nphasors peak\nvoltage E +s -gnd 100 V\nimpedance Z s a 3+4j ohm\n"
    found = state(text, "current 2 A @ -30 deg")
    current = 2 * complex(math.cos(math.radians(-30)), math.sin(math.radians(-30)))
    assert found.point.voltage == pytest.approx(100 / math.sqrt(2) - (3 + 4j) * current)


CURVE = "voltage [V],current [A]\n"


def test_every_intersection_with_a_curve() -> None:
    # up, down and up again, as a tunnel diode: i = 4 - v meets it three times
    curve = equiv.load_curve(CURVE + "0,0\n1,3.5\n3,0.5\n4,5\n", "diode.csv")
    text = simple("4 V", "1")
    states = loaded(text, curve).first.states
    found = [(s.point.voltage, s.point.current) for s in states]
    expected = [(4 / 4.5, 3.5 * 4 / 4.5), (2.0, 2.0), (3 + 0.5 / 5.5, 0.5 + 4.5 * 0.5 / 5.5)]
    assert found == [pytest.approx(point) for point in expected]
    assert [s.which for s in states] == ["1 of 3", "2 of 3", "3 of 3"]


def test_a_curve_through_its_own_readings() -> None:
    text = simple("4 V", "1")
    assert len(loaded(text, equiv.load_curve(CURVE + "0,0\n2,2\n3,3\n")).first.states) == 1
    along = loaded(text, equiv.load_curve(CURVE + "0,0\n2,2\n3,1\n4,8\n")).first.states
    assert [s.point.voltage for s in along] == [2.0, 3.0]
    assert "a part of the curve lies on the load line" in along[0].solution
    miss = state(text, equiv.load_curve(CURVE + "0,0\n1,0.1\n"))
    assert miss.words.startswith("none: the load line does not meet the curve, which was measured")


def test_a_curve_on_a_port_that_gives_one_current() -> None:
    found = state(LOOP, equiv.load_curve("voltage [V],current [mA]\n0,0\n4,32\n"))
    assert found.point.voltage == pytest.approx(2.0) and found.point.current == pytest.approx(0.016)


TWO = (
    "frequency 1 kHz\nvoltage Vs +s -gnd 10 V\nvoltage Vd +d -s 5 V at 0 Hz\nresistor R d a 100 ohm\n"
    "capacitor C a gnd 1 uF\n"
)


def test_several_frequencies() -> None:
    result = loaded(TWO, "100 ohm", "current 10 mA", "4+3j ohm", "power 1 W")
    dc, ac = result.frequencies
    assert result.first is ac
    assert dc.states[0].point.voltage == pytest.approx(2.5)
    assert dc.states[1].point.current == 0 and ac.states[1].point.current == pytest.approx(0.01)
    assert "known at the file's frequency (1 kHz) only" in dc.states[2].words
    assert ac.states[2].exists and not dc.states[3].exists and not ac.states[3].exists
    total = result.totals[0]
    voltage = abs(10 / (100 * (1 / 100 + 1 / 100 + 2j * math.pi * 1e-3)))
    assert total.voltage == pytest.approx(math.hypot(2.5, voltage))
    assert total.power == pytest.approx(total.voltage**2 / 100)
    assert len(result.to_dict()["result"]["frequencies"]) == 2
    other = loaded(TWO, "current 10 mA at 0 Hz")
    assert other.frequencies[0].states[0].point.voltage == pytest.approx(4.0)
    assert "no source at 60 Hz" in state_of(loaded(TWO, "current 1 A at 60 Hz"))


def state_of(result: LoadedPort) -> str:
    return result.first.states[0].words


def test_what_makes_no_sense_says_so() -> None:
    assert state(DIVIDER, "4+3j ohm").words == "none: at DC a load is a real number"
    curve = equiv.load_curve(CURVE + "0,0\n1,1\n")
    assert "of DC alone" in state(simple("1 V", "1+1j", True), curve).words
    neither = "voltage V +a -gnd 1 V\nvoltage W +a -gnd 2 V\nresistor R a gnd 1 ohm\n"
    result = equiv.load_port(equiv.parse(neither), "a,gnd", "1 ohm", "open")
    assert result.exit_status == 5
    assert "the port has no equivalent" in result.first.states[0].words


@pytest.mark.parametrize(
    ("words", "message"),
    [
        ("8 A", "found 8 A, expected ohms"),
        ("shrt", "did you mean short"),
        ("power 5 W pf 0.8", "expected lag or lead"),
        ("power 5 W pf 1.2 lag", "a power factor lies over 0"),
        ("current", "expected a current"),
        ("?", "needs a number"),
        ("lamp.csv", "load_curve"),
        ("power 3+4j W", "complex"),
    ],
)
def test_loads_that_cannot_be_read(words: str, message: str) -> None:
    with pytest.raises(UsageError) as error:
        equiv.load_port(equiv.parse(DIVIDER), "a,gnd", words)
    assert message in str(error.value)


def test_no_load_and_no_port() -> None:
    with pytest.raises(UsageError, match="no load"):
        equiv.load_port(equiv.parse(DIVIDER), "a,gnd")
    with pytest.raises(UsageError, match="no port called PANEL"):
        equiv.load_port(equiv.parse(DIVIDER), "PANEL", "8 ohm")


def test_words_may_be_parted_or_not() -> None:
    one = loaded(DIVIDER, "8 ohm short", "current 2 A").to_dict()
    other = loaded(DIVIDER, "8", "ohm", "short", "current", "2 A").to_dict()
    assert one == other and len(one["result"]["loads"]) == 3


@pytest.mark.parametrize(
    ("text", "message"),
    [
        ("voltage [V],current [A]\n1,2\n", "two readings or more"),
        ("voltage [V]\n1\n2\n", "there is no column current"),
        ("voltage [V],current [A]\n1,2 @ 30 deg\n2,3\n", "real numbers only"),
        ("voltage [V],load [ohm]\n1,2\n", "no column called load"),
    ],
)
def test_curves_that_are_none(text: str, message: str) -> None:
    with pytest.raises(NetworkFileError, match=message):
        equiv.load_curve(text)


def test_every_form_is_drawn() -> None:
    result = loaded(simple("10 V", "3+4j", True), "5 ohm", "power 1 kW", "short")
    for form in ("table", "csv", "markdown", "latex", "html"):
        assert "at most" in result.render(form)
    data = result.to_dict()["result"]
    assert data["loads"][1]["voltage"] is None and data["loads"][1]["largest_power"] > 0
