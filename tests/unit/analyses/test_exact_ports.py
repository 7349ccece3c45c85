"""Ports in exact numbers: the forms that exist, degenerate ports, what is said of them."""

import json

import numpy as np
import pytest
from unit.analyses.test_port_forms import EXISTING, FORMS, TWO_PORTS

import equiv
from equiv.errors import DoesNotExistError

SEVERAL = (
    "frequency 1000 rad/s\ncurrent J gnd > a 2 A\nresistor R a b 3 ohm\ninductor L b gnd 4 mH\n"
    "voltage E +b -c 1+2j V\nresistor Q c gnd 5 ohm\nport IN +a -gnd\nport OUT +c -gnd\n"
)


@pytest.mark.parametrize("text", EXISTING, ids=range(len(EXISTING)))
@pytest.mark.parametrize("form", FORMS)
def test_the_forms_that_exist_are_those_of_floating_point(text: str, form: str) -> None:
    network = equiv.parse(text + TWO_PORTS)
    try:
        near = equiv.port(network, form=form, reference=49)
    except DoesNotExistError as error:
        with pytest.raises(DoesNotExistError) as caught:
            equiv.port(network, form=form, reference=49, exact=True)
        assert str(caught.value) == str(error)
        return
    true = equiv.port(network, form=form, reference=49, exact=True)
    assert true.exit_status == 0
    assert all(c.value == 0 and c.limit == 0 for c in true.checks)
    assert [c.name for c in true.checks] == [c.name for c in near.checks]
    for name in ("parameters", "terms"):
        one, other = (getattr(result.forms[0], name) for result in (true, near))
        np.testing.assert_allclose(one.astype(complex), other, rtol=1e-9, atol=1e-12)
    data = true.to_dict()["result"]
    assert all("exact" in entry for row in data["parameters"] for entry in row)
    assert true.render() and true.render("csv")


def test_a_resonance_without_loss_is_seen_exactly() -> None:
    # 3 H and 1/3 F at 1 rad/s: in floating point 1/3 is not a third
    text = "frequency 1 rad/s\ncurrent I gnd > a {}1 A\n{}inductor L a gnd 3 H\ncapacitor C a gnd (1/3) F\n"
    reason = equiv.port(equiv.parse(text.format("", "")), "a,gnd", exact=True).first.no_thevenin
    assert reason is not None and "L and C are in resonance without loss" in reason


def test_json_has_every_number_as_a_fraction_too() -> None:
    result = equiv.port(equiv.parse(SEVERAL), exact=True)
    assert all(c.value == 0 for c in result.checks)
    data = json.loads(json.dumps(result.to_dict()))["result"]
    assert data["thevenin"]["impedance"][1][1]["exact"] == ["80/41", "100/41"]
    assert data["terms"][0]["voltage"][1]["exact"] == ["160/41", "200/41"]
    assert data["tests"][0]["response"][0]["exact"] == ["203/41", "100/41"]

    def numbers(part: object) -> list[dict[str, object]]:
        if isinstance(part, dict):
            inner = [n for value in part.values() for n in numbers(value)]
            return [part] if "re" in part else inner
        return [n for one in part for n in numbers(one)] if isinstance(part, list) else []

    found = numbers(data)
    assert len(found) > 20 and all("exact" in number for number in found)


def test_references_of_s() -> None:
    network = equiv.parse(SEVERAL)
    for reference in (49, "49 ohm", "0.25 ohm", 2.25, (1, 4)):
        assert equiv.port(network, form="s", reference=reference, exact=True).exit_status == 0
    for reference in (50, "50 ohm", 0.1, (1, 2)):
        with pytest.raises(equiv.UsageError, match="is irrational"):
            equiv.port(network, form="s", reference=reference, exact=True)
    with pytest.raises(equiv.UsageError, match="expected a real positive resistance"):
        equiv.port(network, form="s", reference=-4, exact=True)


def test_other_frequencies_in_rad_s() -> None:
    network = equiv.parse(SEVERAL.replace("voltage E +b -c 1+2j V", "voltage E +b -c 1 V"))
    at = equiv.port(network, "OUT", at=["0 Hz", "500 rad/s"], exact=True)
    z = [e.impedance[0, 0].exact for e in at.equivalents if e.impedance is not None]
    assert z == ["0", ["20/29", "50/29"]]
    with pytest.raises(equiv.UsageError, match="2π·f is irrational"):
        equiv.port(network, "OUT", at=["50 Hz"], exact=True)
