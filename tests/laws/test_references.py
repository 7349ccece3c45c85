"""The same answers from general libraries: numpy for whole networks, networkx for resistances."""

import random

import networkx
import numpy as np
from hypothesis import given
from laws.random_networks import seeded, seeds

import equiv


@seeded
@given(seeds)
def test_nodal_voltages_by_numpy(seed: int) -> None:
    """A network of conductances, current sources and vccs, assembled here by hand."""
    draw = random.Random(seed)
    count = draw.randint(3, 8)
    g = np.zeros((count, count))
    j = np.zeros((count, 3))
    names = ["gnd", *(f"n{i}" for i in range(1, count))]
    lines = []
    for i in range(1, count):
        for k in range(i):
            if k == i - 1 or draw.random() < 0.4:
                value = round(draw.uniform(0.1, 5), 3)
                lines.append(f"conductance G{i}_{k} {names[i]} {names[k]} {value} S")
                g[np.ix_([i, k], [i, k])] += value * np.array([[1, -1], [-1, 1]])
    for number in range(3):
        a, b = draw.sample(range(count), 2)
        value = round(draw.uniform(-4, 4), 3)
        lines.append(f"current J{number} {names[a]} > {names[b]} {value} A")
        j[a, number] -= value
        j[b, number] += value
    a, b = draw.sample(range(count), 2)
    p, q = draw.sample(range(count), 2)
    lines.append(f"vccs F {names[a]} > {names[b]} g 0.05 S senses V:{names[p]},{names[q]}")
    g[a, [p, q]] += [0.05, -0.05]
    g[b, [p, q]] -= [0.05, -0.05]
    expected = np.linalg.solve(g[1:, 1:], j[1:])
    node = draw.randrange(1, count)
    result = equiv.superpose(equiv.parse("\n".join(lines)), f"V:{names[node]}")
    terms = [t.number.real for t in result.quantities[0].frequencies[0].terms]
    assert np.allclose(terms, expected[node - 1], rtol=1e-9, atol=1e-12)


def graph_network(graph: networkx.Graph, root: object) -> equiv.Network:
    def name(node: object) -> str:
        return "gnd" if node == root else f"n{node}"

    return equiv.parse(
        "".join(
            f"resistor R{i} {name(a)} {name(b)} {data.get('weight', 1)} ohm\n"
            for i, (a, b, data) in enumerate(graph.edges(data=True))
        )
    )


def resistance(network: equiv.Network, a: str, b: str) -> float:
    impedance = equiv.port(network, f"{a},{b}").first.impedance
    assert impedance is not None
    return float(impedance[0, 0].real)


@seeded
@given(seeds)
def test_resistance_distance_by_networkx(seed: int) -> None:
    graph = networkx.gnp_random_graph(7, 0.5, seed=seed)
    if not networkx.is_connected(graph):
        return
    draw = random.Random(seed)
    for _, _, data in graph.edges(data=True):
        data["weight"] = round(draw.uniform(0.5, 9), 2)
    expected = networkx.resistance_distance(graph, 1, 2, weight="weight", invert_weight=True)
    assert abs(resistance(graph_network(graph, 0), "n1", "n2") - expected) <= 1e-9 * expected


@seeded
@given(seeds)
def test_foster_sum_of_edge_resistances(seed: int) -> None:
    """R. M. Foster, 1949: over the edges of a connected graph of unit resistors, Σ R = n - 1."""
    graph = networkx.gnp_random_graph(7, 0.5, seed=seed)
    if not networkx.is_connected(graph):
        return
    network = graph_network(graph, 0)
    names = {node: "gnd" if node == 0 else f"n{node}" for node in graph}
    total = sum(resistance(network, names[a], names[b]) for a, b in graph.edges)
    assert abs(total - 6) < 1e-9
