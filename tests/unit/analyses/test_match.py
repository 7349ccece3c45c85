"""Loads and matching networks: closed forms, refusals in words, and the file that is written."""

import json
import math
from pathlib import Path

import pytest
from unit.cli.made import Process

import equiv
from equiv.cli.boundary import run

TURN = 2 * math.pi
TEXT = """
frequency 9 MHz
voltage E +s -gnd 10 V @ 20 deg
resistor R s a 40 ohm
inductor L a b 1 uH
port P +b -gnd
"""
PORT = 40 + 1j * TURN * 9


def match(text: str = TEXT, *words, **options):
    return equiv.match(equiv.parse(text), "P", *words, **options)


def network_of(result, form: str):
    (found,) = [n for n in result.networks if n.section.words == form]
    return found


def rules(result) -> dict[str, object]:
    return {load.rule: load for load in result.loads}


def test_fixed_angle_and_reactance() -> None:
    found = rules(match(angle=-30, reactance="12 ohm"))
    assert list(found) == ["conjugate", "resistive", "angle", "reactance"]
    assert found["conjugate"].impedance == pytest.approx(PORT.conjugate())
    assert found["resistive"].impedance == pytest.approx(abs(PORT))
    assert abs(found["angle"].impedance) == pytest.approx(abs(PORT))
    assert found["reactance"].impedance == pytest.approx(abs(PORT + 12j) + 12j)
    for load in found.values():
        power = abs(10 / (PORT + load.impedance)) ** 2 * load.impedance.real
        assert load.power == pytest.approx(power) and load.found == pytest.approx(power)
        loss = 10 * math.log10(100 / (4 * 40) / power)
        assert load.mismatch_loss == pytest.approx(loss, abs=1e-12)


def test_angles_are_read_with_their_unit() -> None:
    for angle in (-30, "-30 deg", "-30deg", f"{-math.pi / 6!r} rad"):
        assert rules(match(angle=angle))["angle"].impedance == pytest.approx(
            rules(match(angle=-30.0))["angle"].impedance
        )


def test_efficiency_counts_all_of_the_network() -> None:
    # 10 V over 10 ohm and 10 ohm: behind the port there is a divider that the equivalent hides
    result = match("voltage E +s -gnd 10 V\nresistor A s a 10 ohm\nresistor B a gnd 10 ohm\n"
                   "port P +a -gnd\n")  # fmt: skip
    (load,) = result.loads
    assert load.impedance == 5 and load.power == pytest.approx(1.25)
    assert load.efficiency == pytest.approx(1.25 / 7.5)


def test_efficiency_counts_only_sources_that_deliver() -> None:
    # 10 V charges 4 V on the way to the port: what that battery takes is none of the supply
    result = match("voltage E +s -gnd 10 V\nresistor A s a 2 ohm\nvoltage Battery +b -gnd 4 V\n"
                   "resistor B a b 2 ohm\nport P +a -gnd\n")  # fmt: skip
    (load,) = result.loads
    assert load.impedance == 1 and load.voltage == pytest.approx(3.5)
    assert load.efficiency == pytest.approx(3.5**2 / (10 * (10 - 3.5) / 2 + 4 * (4 - 3.5) / 2))
    (load,) = match("voltage E +s -gnd 10 V\nresistor A s a 2 ohm\nvoltage Battery +b -gnd 2 V\n"
                    "resistor B a b 2 ohm\nport P +a -gnd\n").loads  # fmt: skip
    assert load.voltage == pytest.approx(3) and load.efficiency == pytest.approx(9 / 35)


def test_peak_phasors_give_rms_powers() -> None:
    assert match("phasors peak\n" + TEXT).available_power == pytest.approx(0.5 * 100 / 160)


def test_half_power_band_in_closed_form() -> None:
    # equal resistances: one series capacitor makes a resonance of Q = ωL/(2R)
    result = match(TEXT, 40)
    network = network_of(result, "series C")
    low, high = network.band
    assert network.section.parts[0].value == pytest.approx(1 / ((TURN * 9e6) ** 2 * 1e-6))
    assert high - low == pytest.approx(2 * 40 / (TURN * 1e-6), rel=1e-9)
    assert low * high == pytest.approx(9e6**2, rel=1e-9)
    assert any(reason.startswith("two-section") for reason in result.found.reasons)
    assert result.exit_status == 0


def test_stresses_in_closed_form() -> None:
    text = TEXT.replace("inductor L a b 1 uH", "short L a b").replace("40 ohm", "75 ohm")
    network = network_of(match(text, 1000), "series L, shunt C")
    power = 100 / 300
    series, shunt = network.real.stresses
    assert series.current == pytest.approx(math.sqrt(power / 75))
    assert shunt.voltage == pytest.approx(math.sqrt(power * 1000))
    assert network.section.q == pytest.approx(math.sqrt(1000 / 75 - 1))


def test_a_load_that_needs_no_network() -> None:
    result = match(TEXT, PORT.conjugate())
    assert result.found.needs_none and not result.networks and result.exit_status == 0
    assert "needs no network" in str(result)
    again = equiv.parse(equiv.write(result.matched()))
    assert list(again.elements) == ["E", "R", "L"] and "MATCHED" in again.ports


def test_dc_has_loads_and_a_ratio_but_no_networks() -> None:
    text = "voltage E +s -gnd 10 V\nresistor R s a 50 ohm\nport P +a -gnd\n"
    result = match(text, 200)
    assert rules(result)["ratio"].ratio == pytest.approx(0.5)
    assert not result.networks and "at DC" in result.found.reasons[0]
    with pytest.raises(equiv.DoesNotExistError, match="at DC"):
        match(text, 200, by="l")
    with pytest.raises(equiv.UsageError, match="no reactance"):
        match(text, "200+1j ohm")
    with pytest.raises(equiv.DoesNotExistError, match="no matching network"):
        result.matched()


@pytest.mark.parametrize(
    ("lines", "words"),
    [
        ("resistor R s a -40 ohm", "negative resistance -40"),
        ("inductor R s a 1 uH", "has no resistance"),
        ("resistor R s x 40 ohm\ncurrent J x > a 1 A\nresistor Q x gnd 4 ohm", "same current"),
    ],
)
def test_ports_that_cannot_be_matched(lines: str, words: str) -> None:
    text = f"frequency 9 MHz\nvoltage E +s -gnd 10 V @ 0 deg\n{lines}\nport P +a -gnd\n"
    with pytest.raises(equiv.DoesNotExistError, match=words) as caught:
        match(text)
    assert caught.value.exit_status == 5


def test_a_port_without_power() -> None:
    with pytest.raises(equiv.DoesNotExistError, match="no power to give"):
        match("resistor R a gnd 40 ohm\nport P +a -gnd\n")


@pytest.mark.parametrize(
    ("load", "words"), [(0, "no resistance"), ("5j ohm", "no resistance"), (-5, "negative")]
)
def test_loads_that_take_no_power(load, words: str) -> None:
    with pytest.raises(equiv.DoesNotExistError, match=words):
        match(TEXT, load)


@pytest.mark.parametrize(
    ("options", "words"),
    [
        ({"by": "foster"}, "no rule and no network"),
        ({"by": "angle"}, "needs an angle"),
        ({"by": "l"}, "needs a load"),
        ({"load": 50, "by": "pi"}, "needs a loaded Q"),
        ({"load": 50, "q": -1}, "over zero"),
        ({"angle": 90}, "takes no power"),
        ({"load": 50, "series": "E23"}, "no series"),
        ({"load": 50, "series": "E24", "tolerance": "5"}, "in percent"),
        ({"load": 50, "tolerance": "150%"}, "between 0% and 100%"),
        ({"load": 50, "band": "18 MHz"}, "does not fit"),
        ({"load": "50 V"}, "expected ohms"),
        ({"load": float("nan")}, "finite"),
    ],
)
def test_words_that_do_not_fit(options, words: str) -> None:
    with pytest.raises(equiv.UsageError, match=words):
        match(TEXT, **options)


def test_a_pi_below_its_least_q() -> None:
    with pytest.raises(equiv.DoesNotExistError, match=r"must be over 4\.8"):
        match(TEXT.replace("1 uH", "0 H").replace("40 ohm", "50 ohm"), 1202, by="pi", q=4)


def test_preferred_values_are_what_the_written_network_shows() -> None:
    load = 22 - 9j
    result = match(TEXT, load, by="l", series="E12")
    for number, network in enumerate(result.networks, 1):
        losses = [choice.return_loss_db for choice in network.preferred]
        assert losses == sorted(losses, reverse=True) and len(losses) == 4
        written = equiv.parse(equiv.write(result.matched(number)))
        z = complex(equiv.port(written, "MATCHED").first.impedance[0, 0])
        reflection = abs((z - load.conjugate()) / (z + load))
        assert losses[0] == pytest.approx(-20 * math.log10(reflection), rel=1e-9)
    best = max(result.networks, key=lambda n: n.preferred[0].return_loss_db)
    assert result.networks[result.found.best] is best


def test_yield_is_seeded_and_falls_with_the_tolerance() -> None:
    def yields(tolerance) -> list[float]:
        result = match(TEXT, 300, by="l", series="E24", tolerance=tolerance, return_loss=20)
        return [choice.yielded for n in result.networks for choice in n.preferred]

    assert set(yields(0.0)) <= {0.0, 1.0}
    usual, wide = yields(None), yields("20%")
    assert usual == yields("5%") and wide == yields(0.2)
    assert max(wide) < max(usual) and max(wide) < 1


def test_yield_in_closed_form() -> None:
    # one series capacitor: its error alone makes the reflection, |Γ| = |x|/|80 + jx|
    result = match(TEXT, 40, by="l", series="E192", tolerance="20%", return_loss=26)
    (choice, _) = network_of(result, "series C").preferred
    limit = 10 ** (-26 / 20)
    x = 80 * limit / math.sqrt(1 - limit**2)
    low, high = (1 / (TURN * 9e6 * (PORT.imag + sign * x)) / choice.values[0] for sign in (1, -1))
    assert choice.yielded == pytest.approx((high - low) / 0.4, abs=0.03)
    assert 0.1 < choice.yielded < 0.9


def test_losses_in_closed_form() -> None:
    result = match(TEXT, 300, by="l", inductor_q=80, capacitor_q=400)
    number = result.networks.index(network_of(result, "series L, shunt C")) + 1
    elements = result.matched(number).elements
    ratio = float(elements["Cmatch2.loss"].value) / float(elements["Cmatch2"].value)
    assert ratio == pytest.approx(TURN * 9e6 / 400)
    ratio = float(elements["Lmatch1.loss"].value) / float(elements["Lmatch1"].value)
    assert ratio == pytest.approx(TURN * 9e6 / 80)


def test_parts_of_finite_q() -> None:
    result = match(TEXT, 300, by="l", inductor_q=80, capacitor_q=400)
    assert result.exit_status == 0
    for number, network in enumerate(result.networks, 1):
        assert network.loss_db > 0.02 and network.return_loss_db < 60
        written = equiv.parse(equiv.write(result.matched(number)))
        given = rules(equiv.match(written, "MATCHED", 300, by="conjugate"))["given"]
        share = given.found / result.available_power
        assert -10 * math.log10(share) == pytest.approx(network.loss_db, rel=1e-9)


def test_a_needed_band() -> None:
    narrow = match(TEXT, 300, by="l", series="E24", band="200 kHz")
    assert narrow.networks[narrow.found.best].covers
    alone = match(TEXT, 300, by="l", series="E24")
    # the band's ends count too: never more than at the middle alone
    for one, other in zip(narrow.networks, alone.networks, strict=True):
        middle = {c.values: c.return_loss_db for c in other.preferred}
        assert all(c.return_loss_db <= middle[c.values] + 1e-9 for c in one.preferred)
    wide = match(TEXT, 300, by="l", band="16 MHz")
    assert wide.exit_status == 5 and "band" in [c.code for c in wide.cautions]


def test_values_known_at_one_frequency_are_said_to_be_held() -> None:
    text = TEXT.replace("inductor L a b 1 uH", "impedance Z a b 3+20j ohm")
    result = match(text, 100, by="l")
    assert any("held constant over the band: Z" in c.message for c in result.cautions)


def test_sources_at_other_frequencies_are_left_out() -> None:
    text = TEXT.replace("port P", "voltage Hum +t -b 3 V at 50 Hz\nresistor W t gnd 1 kohm\nport P")
    result = match(text, 100, by="l")
    assert result.exit_status == 0 and "one-frequency" in [c.code for c in result.cautions]


def test_what_is_unique_all_the_same_is_matched() -> None:
    # two equal sources side by side: how they share is not determined, the port is
    text = TEXT.replace("voltage E", "voltage Twin +s -gnd 10 V @ 20 deg\nvoltage E")
    result, single = match(text, 300, by="l"), match(TEXT, 300, by="l")
    assert result.exit_status == 0, result.checks
    assert result.available_power == pytest.approx(single.available_power)
    assert result.networks[0].band == pytest.approx(single.networks[0].band)
    assert result.loads[0].efficiency is None
    assert "not determined" in result.loads[0].no_efficiency and "no efficiency" in str(result)


def test_names_that_are_taken_are_not_used_again() -> None:
    text = TEXT.replace("resistor R s a", "resistor Lmatch1 s a").replace("+b", "+match1")
    text = text.replace("a b 1 uH", "a match1 1 uH")
    result = match(text, 300, by="l")
    for number in range(1, len(result.networks) + 1):
        again = equiv.match(equiv.parse(equiv.write(result.matched(number))), "MATCHED")
        assert rules(again)["conjugate"].impedance == pytest.approx(300, rel=1e-8)


def test_the_json_is_what_the_contract_says() -> None:
    data = match(TEXT, 300, by="l", series="E24").to_dict()
    json.dumps(data, allow_nan=False)
    result = data["result"]
    assert set(result["loads"][0]) >= {"rule", "impedance", "power", "efficiency"}
    network = result["networks"][0]
    assert set(network) >= {"topology", "parts", "q", "band", "return_loss_db", "preferred"}
    assert network["return_loss_db"] is None and network["reasons"]["return_loss_db"]
    assert set(network["parts"][0]) >= {"kind", "position", "value"}
    assert set(network["preferred"][0]) == {
        "series",
        "values",
        "return_loss_db",
        "loss_db",
        "yield",
    }


def command(*words: str) -> tuple[int, Process]:
    process = Process()
    return run(["match", *words], process.environment), process


@pytest.fixture
def file(tmp_path: Path) -> Path:
    path = tmp_path / "port.equiv"
    path.write_text(TEXT, encoding="utf-8")
    return path


def test_the_command_writes_a_network_that_shows_the_match(file: Path, tmp_path: Path) -> None:
    target = tmp_path / "matched.equiv"
    words = (str(file), "P", "--load", "20+5j ohm", "--by", "quarter-wave", "--write", str(target))
    status, process = command(*words, "--json")
    assert status == 0, process.told
    assert json.loads(process.printed)["result"]["networks"][0]["topology"] == "quarter-wave"
    (load,) = equiv.match(equiv.load(target), "MATCHED", by="conjugate").loads
    assert load.impedance == pytest.approx(20 + 5j)

    before = target.read_bytes()
    status, process = command(*words)
    assert status == 6 and "exists already" in process.told
    assert command(*words, "--force", "--number", "1")[0] == 0 and target.read_bytes() == before
    assert sorted(p.name for p in tmp_path.iterdir()) == ["matched.equiv", "port.equiv"]


@pytest.mark.parametrize("form", ["table", "csv", "markdown", "latex"])
def test_every_form(file: Path, form: str) -> None:
    status, process = command(
        str(file), "P", "--load", "300ohm", "--by", "t", "--q", "9", "--series", "E24", "--as", form
    )
    assert status == 0 and "shunt C" in process.printed


def test_nothing_is_written_where_nothing_is_matched(file: Path, tmp_path: Path) -> None:
    target = tmp_path / "matched.equiv"
    status, process = command(str(file), "P", "--load=-4ohm", "--write", str(target))
    assert status == 5 and "negative resistance" in process.told and not target.exists()
    status, process = command(str(file), "P", "--write", str(target))
    assert status == 2 and "needs a load" in process.told and not target.exists()
