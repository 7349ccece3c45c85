"""Exact results of unusual networks, in every form, with a fraction beside every number."""

import json
from collections.abc import Callable, Iterator

import pytest

import equiv
from equiv.analyses.result import Result
from equiv.network import Network

NETWORKS = {
    "several frequencies": (
        "frequency 100 rad/s\nvoltage V +a -gnd 3-4j V group g\ncurrent J gnd > b 2 A at 0 Hz\n"
        "voltage W +c -gnd 1 V at 300 rad/s group g\nresistor R a b 2 ohm\n"
        "inductor L b gnd 10 mH\nresistor Q b c 5 ohm\ncapacitor C b gnd 1 mF\n"
        "vccs G a > b g 0.1 S senses V:b\nfind I:R\nfind P:R\nfind V:b\n"
    ),
    "no source": "resistor R a gnd 1 ohm\nfind I:R\n",
    "peak values at DC": "phasors peak\nvoltage V +a -gnd 1 V\nresistor R a gnd 3 ohm\nfind I:R\n",
    "elements that join a node to itself": (
        "voltage V +a -gnd 1 V\nresistor R gnd gnd 3 ohm\nresistor S a a 2 ohm\n"
        "resistor Q a gnd 7 ohm\nfind I:Q\nfind I:R\n"
    ),
    "sources in parallel": (
        "voltage V1 +a -gnd 5 V\nvoltage V2 +a -gnd 5 V\nresistor R a gnd 5 ohm\n"
        "find I:R\nfind I:V1\n"
    ),
    "nothing but a short": "short S a gnd\ncurrent J gnd > a 1 A\nfind I:S\n",
    "values of zero": (
        "resistor R0 a b 0 ohm\nvoltage V +a -gnd 1 V\nresistor Q b gnd 3 ohm\n"
        "impedance Z b gnd 0.1 ohm\nconductance G b gnd 0 S\nfind I:R0\n"
    ),
}
ANALYSES: dict[str, Callable[[Network], Result]] = {
    "superpose": lambda n: equiv.superpose(n, exact=True, detail=True, paths=True),
    "groups": lambda n: equiv.superpose(n, exact=True, by="group", check="none"),
    "solve": lambda n: equiv.solve(n, exact=True),
    "port": lambda n: equiv.port(n, "a,gnd", exact=True),
    "load": lambda n: equiv.load_port(n, "a,gnd", "2 ohm", "short", "open", exact=True),
}


def numbers(part: object) -> Iterator[dict[str, object]]:
    """Every number of a result's JSON."""
    if isinstance(part, dict):
        if "re" in part:
            yield part
        for value in part.values():
            yield from numbers(value)
    elif isinstance(part, list):
        for value in part:
            yield from numbers(value)


@pytest.mark.parametrize("analysis", ANALYSES)
@pytest.mark.parametrize("name", NETWORKS)
def test_every_number_is_exact_and_every_check_nothing(name: str, analysis: str) -> None:
    result = ANALYSES[analysis](equiv.parse(NETWORKS[name]))
    assert all(check.value == 0 and check.limit == 0 for check in result.checks)
    found = list(numbers(json.loads(json.dumps(result.to_dict()["result"], allow_nan=False))))
    assert found
    for number in found:
        assert "exact" in number, number
    for form in ("table", "csv", "markdown", "latex", "html"):
        assert result.render(form)


def test_frequencies_each_have_their_own_fractions() -> None:
    result = equiv.superpose(equiv.parse(NETWORKS["several frequencies"]), "V:b", exact=True)
    totals = [f.total for f in result.quantities[0].frequencies]
    # at DC the inductor is a short; 100 and 300 rad/s by hand, admittances at b
    assert totals[0] == 0
    first = ((3 - 4j) / 2, 0.5 + 0.2 + 1 / 1j + 0.1j - 0.1)
    second = (1 / 5, 0.5 + 0.2 + 1 / 3j + 0.3j - 0.1)
    for total, (drive, admittance) in zip(totals[1:], (first, second), strict=True):
        assert complex(total) == pytest.approx(drive / admittance, rel=1e-12)


def test_paths_of_a_network_without_sources_are_none() -> None:
    network = equiv.parse("resistor R a gnd 1 ohm\nvcvs E +b -gnd mu 2 senses V:a\nfind I:R\n")
    result = equiv.superpose(network, paths=True)
    assert result.exit_status == 0 and not result.quantities[0].frequencies[0].terms
