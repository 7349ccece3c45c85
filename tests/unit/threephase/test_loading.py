"""Files of either sort: which is which, and what a command says of the wrong one."""

from __future__ import annotations

import subprocess
import sys
from collections.abc import Callable

import pytest

import equiv
from equiv.threephase.loading import require_network, require_system, says_three_phase
from equiv.threephase.model import OneLine

SYSTEM = "title A mill\nthree-phase 50 Hz\nbus A 11 kV\ninfeed U A level 100 MVA x/r 9 z0/z1 1\n"
NETWORK = "note three-phase 50 Hz\nvoltage V +a -gnd 1 V\nresistor R a gnd 1 ohm\n"


@pytest.mark.parametrize(
    ("text", "says"),
    [
        (SYSTEM, True),
        (NETWORK, False),
        ("   three-phase 50 Hz", True),
        ("# three-phase 50 Hz", False),
        ("note a \\\nthree-phase 50 Hz", False),
        ("note a # b \\\nthree-phase 50 Hz", True),
        ("three-phases 50 Hz", False),
        ("\\\n\\\nthree-phase", False),
    ],
)
def test_a_statement_says_which_it_is(text: str, says: bool) -> None:
    assert says_three_phase(text) is says


def test_both_are_loaded_parsed_and_written() -> None:
    system, network = equiv.parse(SYSTEM), equiv.parse(NETWORK)
    assert isinstance(system, OneLine)
    assert isinstance(network, equiv.Network)
    assert equiv.parse(equiv.write(system)) == system
    assert equiv.parse(equiv.write(network)) == network
    assert require_network(network) is network
    assert require_system(system) is system


@pytest.mark.parametrize(
    "work",
    [
        equiv.solve,
        lambda n: equiv.superpose(n, "I:R"),
        lambda n: equiv.port(n, "a,gnd"),
        lambda n: equiv.match(n, "a,gnd"),
        lambda n: equiv.load_port(n, "a,gnd", "8 ohm"),
        lambda n: equiv.sweep(n, "I:R", start="1 Hz", stop="2 Hz"),
    ],
)
def test_what_is_for_networks_says_so(work: Callable[[object], object]) -> None:
    with pytest.raises(equiv.UsageError, match=r"mill\.equiv describes a three-phase system"):
        work(equiv.parse(SYSTEM, name="mill.equiv"))


def test_another_frequency_is_refused() -> None:
    with pytest.raises(equiv.UsageError, match="its own frequency only"):
        equiv.parse(SYSTEM, frequency="60 Hz")


def test_check_counts_what_is_there() -> None:
    result = equiv.check(equiv.parse(SYSTEM))
    assert result.data() == {
        "counts": {"buses": 1, "items": 1, "infeed": 1, "sources": 1, "groups of sources": 0},
        "hertz": [50.0],
        "kilovolts": [11.0],
        "prefault": 1.0,
    }
    assert "Nothing is wrong or doubtful." in str(result)
    assert result.to_dict()["title"] == "A mill"
    doubtful = equiv.check(equiv.parse(SYSTEM + "bus B 400 V\n"))
    assert "nothing is connected to B" in str(doubtful)
    assert doubtful.to_dict()["warnings"][0]["code"] == "loose-bus"


def test_the_kinds_have_their_pages() -> None:
    page = str(equiv.kinds("three-phase"))
    for word in ("three-phase 50 Hz", "bus NAME", "synchronous-motor", "prefault"):
        assert word in page
    assert "no-load angle" in str(equiv.kinds("infeed"))
    assert "Vector" in str(equiv.kinds("three-phase-transformer")).title()
    assert "ratio" in str(equiv.kinds("transformer"))
    assert len(equiv.kinds("three-phase").data()["kinds"]) == 9
    with pytest.raises(equiv.UsageError, match="did you mean generator"):
        equiv.kinds("generater")


def test_a_plain_network_needs_no_more_than_before() -> None:
    code = (
        "import sys, equiv\n"
        "equiv.parse('voltage V +a -gnd 1 V\\nresistor R a gnd 1 ohm\\n')\n"
        "heavy = {'numpy', 'equiv.threephase.kinds', 'equiv.threephase.language'}\n"
        "sys.exit(bool(heavy & set(sys.modules)))"
    )
    assert subprocess.run([sys.executable, "-c", code], check=False).returncode == 0
