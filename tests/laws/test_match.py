"""A matching network makes the load take all that the port can give, whatever port and load."""

import random

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from laws.random_networks import Maker, seeded, seeds

import equiv

few = settings(seeded, max_examples=5)


def put_together(text: str, ends: tuple[str, str], network: object, load: complex) -> equiv.Network:
    """The printed parts written out again by hand between port and load, with the load."""
    plus, minus = ends
    node, lines = plus, []
    for number, part in enumerate(network.section.parts):  # type: ignore[attr-defined]
        shunt = part.position == "shunt"
        after = minus if shunt else f"x{number}"
        if part.kind == "line":
            ohms = part.value
            lines.append(
                f"twoport X{number} +{node} -{minus} +{after} -{minus} "
                f"abcd 0 0+{ohms!r}j ohm 0+{1 / ohms!r}j S 0"
            )
        else:
            unit = "H" if part.kind == "inductor" else "F"
            lines.append(f"{part.kind} X{number} {node} {after} {part.value!r} {unit}")
        node = node if shunt else after
    lines.append(f"port SEEN +{node} -{minus}")
    return equiv.parse(text + "\n".join(lines) + "\n")


def port_of(maker: Maker, draw: random.Random) -> tuple[str, str]:
    a, b = draw.sample(maker.nodes, 2)
    return a, b


@few
@given(seeds)
def test_every_network_is_a_match_when_put_together_again(seed: int) -> None:
    maker = Maker(seed, ac=True, controlled=seed % 2 == 0)
    draw = random.Random(seed + 5)
    ends = port_of(maker, draw)
    load = complex(round(draw.uniform(1, 300), 2), round(draw.uniform(-200, 200), 2))
    network = equiv.parse(maker.text)
    try:
        result = equiv.match(network, ",".join(ends), load, q=draw.uniform(8, 30))
    except equiv.DoesNotExistError:
        return  # a controlled source has made the resistance negative, or the port dead
    assert result.exit_status == 0, result.checks
    kinds = {n.section.topology for n in result.networks}
    assert {"L", "two-section", "quarter-wave"} <= kinds
    for found in result.networks:
        again = equiv.port(put_together(maker.text, ends, found, load), "SEEN").first
        z = complex(again.impedance[0, 0])
        voc = complex(again.open_voltage[0])
        # seen from the load: its conjugate, and the same available power
        assert abs(z - load.conjugate()) <= 1e-6 * abs(load), found.section
        available = abs(voc) ** 2 / (4 * z.real)
        assert available == pytest.approx(result.available_power, rel=1e-6)


@few
@given(seeds, st.booleans())
def test_no_other_load_takes_more(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    draw = random.Random(seed + 6)
    ends = port_of(maker, draw)
    network = equiv.parse(maker.text)
    rules = {"angle": draw.uniform(-60, 60), "reactance": draw.uniform(-50, 50)} if ac else {}
    try:
        result = equiv.match(network, ",".join(ends), **rules)
    except equiv.DoesNotExistError:
        return
    assert result.exit_status == 0, result.checks
    best = {load.rule: load.power for load in result.loads}
    most = result.available_power
    assert max(best.values()) <= most * (1 + 1e-9)
    assert best.get("conjugate", best["resistive"]) == pytest.approx(most)
    for _ in range(3):
        r = draw.uniform(0.1, 400)
        loaded = equiv.parse(maker.text + f"resistor Any {ends[0]} {ends[1]} {r!r} ohm\n")
        power = equiv.superpose(loaded, "P:Any").quantities[0].frequencies[0].total.real
        assert power <= best["resistive"] * (1 + 1e-7)


@few
@given(seeds)
def test_a_written_match_shows_the_match(seed: int) -> None:
    maker = Maker(seed, ac=True, controlled=False)
    ends = port_of(maker, random.Random(seed + 7))
    try:
        result = equiv.match(equiv.parse(maker.text), ",".join(ends), "75-20j ohm", by="l")
    except equiv.DoesNotExistError:
        return
    for number in range(1, len(result.networks) + 1):
        again = equiv.match(equiv.parse(equiv.write(result.matched(number))), "MATCHED")
        conjugate = next(load for load in again.loads if load.rule == "conjugate")
        assert conjugate.impedance == pytest.approx(75 - 20j, rel=1e-7)
        assert again.available_power == pytest.approx(result.available_power, rel=1e-7)
