"""Parameters in every form against the networks they are of, by other ways than their own."""

import random
from collections.abc import Iterator
from itertools import count
from pathlib import Path

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from laws.random_networks import Maker, seeded, seeds

import equiv
from equiv.analyses.ports.relation import by_tests, by_waves, solved_for
from equiv.elements.tabulated import Tabulated
from equiv.equations.port_relation import null_space
from equiv.equations.solution import source_values
from equiv.language.touchstone_writer import write_touchstone
from equiv.network import Network

FORMS = ("z", "y", "h", "g", "abcd", "s")
few = settings(seeded, max_examples=10)


@pytest.fixture(scope="module")
def folder(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return tmp_path_factory.mktemp("touchstone")


names: Iterator[int] = count()


def made(seed: int, ac: bool, controlled: bool = True) -> tuple[Network, list[str]]:
    """A random network and three of its nodes over the ground, which resistors join."""
    return equiv.parse(text_of(seed, ac, controlled)), [f"n{k},gnd" for k in (1, 2, 3)]


def text_of(seed: int, ac: bool, controlled: bool = True) -> str:
    joins = "resistor Join1 n1 n2 33 ohm\nresistor Join2 n2 n3 47 ohm\n"
    return Maker(seed, ac, controlled).text + joins


def quiet(network: Network) -> Network:
    """The network with its independent sources off."""
    return network.replacing({s.name: s.switched_off() for s in network.sources})


def close(one: np.ndarray, other: np.ndarray, limit: float = 1e-8) -> None:
    assert np.abs(one - other).max() <= limit * max(np.abs(one).max(), np.abs(other).max(), 1e-9)


def of_z(z: np.ndarray, form: str, r: np.ndarray) -> np.ndarray:
    """Textbook conversions from z, written out (currents into the ports)."""
    if form == "y":
        return np.linalg.inv(z)
    if form == "s":
        root, unit = np.diag(np.sqrt(r)), np.eye(len(z))
        scaled = np.linalg.inv(root) @ z @ np.linalg.inv(root)
        return (scaled - unit) @ np.linalg.inv(scaled + unit)
    (a, b), (c, d) = z
    det = a * d - b * c
    return {
        "z": z,
        "h": np.array([[det, b], [-c, 1]]) / d,
        "g": np.array([[1, -b], [c, det]]) / a,
        "abcd": np.array([[a, det], [1, d]]) / c,
    }[form]


@few
@given(seeds, st.booleans())
def test_every_form_is_the_textbook_s_conversion_of_z(seed: int, ac: bool) -> None:
    network, ports = made(seed, ac)
    r = (50.0, 20.0)
    z = equiv.port(network, *ports[:2], form="z").forms[0]
    assert z.parameters is not None and z.sources is not None
    for form in FORMS:
        result = equiv.port(network, *ports[:2], form=form, reference=r)
        assert all(check.passed for check in result.checks), result.checks
        found = result.forms[0]
        close(found.parameters, of_z(z.parameters, form, np.array(r)))
        # what the sources give on the left with nothing on the right, from z by its own equations
        v0 = z.sources
        told = {
            "z": v0,
            "y": -np.linalg.solve(z.parameters, v0),
            "h": [v0[0] - z.parameters[0, 1] * v0[1] / z.parameters[1, 1],
                  -v0[1] / z.parameters[1, 1]],
            "g": [-v0[0] / z.parameters[0, 0],
                  v0[1] - z.parameters[1, 0] * v0[0] / z.parameters[0, 0]],
            "abcd": [v0[0] - z.parameters[0, 0] * v0[1] / z.parameters[1, 0],
                     -v0[1] / z.parameters[1, 0]],
            "s": np.sqrt(np.array(r)) * np.linalg.solve(z.parameters + np.diag(r), v0),
        }[form]  # fmt: skip
        close(found.sources, np.array(told), 1e-7)


@few
@given(seeds, st.booleans())
def test_the_null_space_is_what_the_tests_find(seed: int, ac: bool) -> None:
    network, words = made(seed, ac)
    result = equiv.port(network, *words, form="z")
    e = result.first
    relation = null_space(network, e.ports, e.frequency, source_values(network, e.frequency))
    assert relation is not None and len(relation.m) == relation.rank == 3
    for form in ("z", "y", "s"):
        references = np.full(3, 50.0)
        by_null = solved_for(relation, form, references)
        form_found = equiv.port(network, *words, form=form).forms[0]
        assert by_null is not None and form_found.terms is not None
        close(by_null.parameters, form_found.parameters)
        close(by_null.terms, form_found.terms)
        if form == "s":
            waves = by_waves(form_found.parameters, form_found.terms, references)
            again = solved_for(waves, "z", references)
        else:
            kind = "current" if form == "z" else "voltage"
            tests = by_tests((kind,) * 3, form_found.parameters, form_found.terms)
            again = solved_for(tests, "z", references)
        assert again is not None and e.impedance is not None
        close(again.parameters, e.impedance, 1e-7)


@seeded
@given(seeds, st.booleans())
def test_s_of_a_passive_network_amplifies_nothing_and_is_reciprocal(seed: int, ac: bool) -> None:
    network, ports = made(seed, ac, controlled=False)
    references = [random.Random(seed).uniform(1, 300) for _ in ports]
    s = equiv.port(network, *ports, form="s", reference=references).forms[0].parameters
    assert np.linalg.svd(s, compute_uv=False).max() <= 1 + 1e-12
    close(s, s.T)


@few
@given(seeds, st.booleans())
def test_cascaded_chain_matrices_are_the_joined_network(seed: int, ac: bool) -> None:
    one, two = (text_of(seed + k, ac).replace("frequency 50 Hz\n", "") for k in range(2))
    head = "frequency 50 Hz\n" if ac else ""

    def block(name: str, text: str) -> str:
        return f"block {name} (n1 n2)\n{text}end\n"

    def chain(uses: str, *ports: str) -> tuple[np.ndarray, np.ndarray]:
        network = equiv.parse(head + block("one", one) + block("two", two) + uses)
        form = equiv.port(network, *ports, form="abcd").forms[0]
        return form.parameters, form.sources

    first, from_first = chain("use one A (a b)\n", "a,gnd", "b,gnd")
    second, from_second = chain("use two B (b c)\n", "b,gnd", "c,gnd")
    both, from_both = chain("use one A (a b)\nuse two B (b c)\n", "a,gnd", "c,gnd")
    close(both, first @ second)
    size = np.abs(first) @ np.abs(from_second) + np.abs(from_first)
    assert (np.abs(from_both - first @ from_second - from_first) <= 1e-8 * size).all()


def outside(ports: list[str], ac: bool) -> str:
    """Loads and a source that are put on the ports."""
    nodes = [port.partition(",")[0] for port in ports]
    lines = [f"resistor Load{n} {node} gnd {10 + 7 * n} ohm" for n, node in enumerate(nodes)]
    value = "5 V @ 30 deg" if ac else "5 V"
    return "\n".join([*lines, f"voltage Drive +drive -gnd {value}",
                      f"resistor Inner drive {nodes[0]} 3 ohm", ""])  # fmt: skip


@seeded
@given(seeds, st.booleans(), st.sampled_from("szy"))
def test_an_nport_is_the_network_it_was_made_from(
    folder: Path, seed: int, ac: bool, form: str
) -> None:
    network, ports = made(seed, ac)
    network = quiet(network)
    file = f"n{next(names)}.s3p"
    result = equiv.port(network, *ports, form=form, reference=70)
    (folder / file).write_text(result.touchstone())
    around = outside(ports, ac)
    head = "frequency 50 Hz\n" if ac else ""
    nodes = [port.partition(",")[0] for port in ports]
    pairs = " ".join(f"+{node} -gnd" for node in nodes)
    stands_in = equiv.parse(f'{head}nport N {pairs} file "{file}"\n{around}', folder=folder)
    more = equiv.parse(head + around).elements.values()
    for form_of in (network.with_elements(more), stands_in):
        assert equiv.solve(form_of).exit_status == 0
    real, told = (
        dict(equiv.solve(n).first.nodes) for n in (network.with_elements(more), stands_in)
    )
    close(np.array([real[n] for n in nodes]), np.array([told[n] for n in nodes]))


@seeded
@given(seeds, st.booleans(), st.sampled_from(["s", "z", "y", "h", "g"]), st.integers(1, 4))
def test_nports_obey_their_own_law(
    folder: Path, seed: int, ac: bool, form: str, ports: int
) -> None:
    draw = np.random.default_rng(seed)
    ports = 2 if form in "hg" else ports
    size = {"s": 0.4, "z": 40, "y": 0.04}.get(form, 1.0)
    matrix = size * (draw.normal(size=(ports, ports)) + ac * 1j * draw.normal(size=(ports, ports)))
    hertz = 50.0 if ac else 0.0
    file = f"law{next(names)}.s{ports}p"
    # h and g are only read; they are written here as they are for a reference of one ohm
    told = Tabulated(file, form, 1.0 if form in "hg" else 50.0, (hertz,), (tuple(matrix.ravel()),))
    (folder / file).write_text(write_touchstone(told))
    nodes = [f"p{k}" for k in range(ports)]
    pairs = " ".join(f"+{node} -gnd" for node in nodes)
    text = "frequency 50 Hz\n" if ac else ""
    text += f'nport N {pairs} file "{file}"\n' + outside([f"{n},gnd" for n in nodes], ac)
    state = equiv.solve(equiv.parse(text, folder=folder)).first
    rows = [e for e in state.elements if e.name == "N"]
    v, i = (np.array([getattr(e, what) for e in rows]) for what in ("voltage", "current"))
    if form == "s":
        a, b = (v + 50 * i) / 2, (v - 50 * i) / 2
        close(b, matrix @ a)
    elif form in "zy":
        left, right = (v, i) if form == "z" else (i, v)
        close(left, matrix @ right)
    else:
        left, right = np.array([v[0], i[1]]), np.array([i[0], v[1]])
        close(*((left, matrix @ right) if form == "h" else (right, matrix @ left)))


@pytest.mark.parametrize(
    ("matrix", "same"),
    [
        ("0 0 1 0 1 0 0 0", "short X a b\n"),
        ("1 0 0 0 0 0 1 0", "open X a gnd\nopen Y b gnd\n"),
        ("-1 0 0 0 0 0 -1 0", "short X a gnd\nshort Y b gnd\n"),
        ("0.6 0 0.8 0 0.8 0 -0.6 0", "transformer X +a -gnd +b -gnd ratio 2:1\n"),
        ("0 0 1 0 -1 0 0 0", "gyrator X +a -gnd +b -gnd r 50\n"),
        ("0 0 1 0 0 0 0 0", "resistor X a gnd 50\nresistor Y b y 50\nvcvs E +y -gnd mu 2 senses V:a\n"),
    ],
)  # fmt: skip
def test_s_without_z_or_y_is_exact(folder: Path, matrix: str, same: str) -> None:
    (folder / "edge.s2p").write_text(f"# Hz S RI R 50\n0 {matrix}\n50 {matrix}\n")
    around = (
        "voltage V +q -gnd 5 V\nresistor R1 q a 30\nresistor R2 b c 20\nvoltage W +c -gnd 2 V\n"
    )
    told = equiv.parse(f'twoport B +a -gnd +b -gnd file "edge.s2p"\n{around}', folder=folder)
    nodes = [dict(equiv.solve(n).first.nodes) for n in (told, equiv.parse(same + around))]
    for node in ("a", "b"):
        assert nodes[0][node] == pytest.approx(nodes[1][node], abs=1e-14)
    # and the parameters of the port are those of the file
    network = equiv.parse('twoport B +a -gnd +b -gnd file "edge.s2p"\n', folder=folder)
    s = equiv.port(network, "a,gnd", "b,gnd", form="s", reference=50).forms[0].parameters
    numbers = list(map(float, matrix.split()))[::2]
    assert s == pytest.approx(np.array(numbers).reshape(2, 2).T, abs=1e-14)
