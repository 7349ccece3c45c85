"""What superposition must satisfy on any network."""

import random

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st
from laws.random_networks import Maker, quantities, seeded, seeds

import equiv


def close(one: complex, other: complex, size: float = 0.0) -> None:
    assert abs(one - other) <= 1e-8 * max(abs(one), abs(other), size, 1e-12)


@seeded
@given(seeds, st.booleans())
def test_terms_sum_to_the_total_and_checks_pass(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    network = equiv.parse(maker.text)
    result = equiv.superpose(network, *quantities(maker))
    assert all(check.passed for check in result.checks), result.checks
    solution = equiv.solve(network)
    for q in result.quantities:
        (at,) = q.frequencies
        close(sum(t.number for t in at.terms), at.all_on, at.arithmetic_sum)
        if q.quantity.what == "I":
            state = next(e for e in solution.first.elements if e.name == q.quantity.names[0])
            assert state.current is not None
            close(at.total, state.current, at.arithmetic_sum)


@seeded
@given(seeds, st.booleans())
def test_each_term_is_its_isolated_subcircuit(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    network = equiv.parse(maker.text)
    asked = quantities(maker)
    result = equiv.superpose(network, *asked, check="none")
    for k, source in enumerate(network.sources):
        text = equiv.isolate(network, source.name).plain_text()
        alone = equiv.superpose(equiv.parse(text), *asked, check="none")
        for whole, part in zip(result.quantities, alone.quantities, strict=True):
            term = whole.frequencies[0].terms[k]
            close(term.number, part.frequencies[0].total, whole.frequencies[0].arithmetic_sum)


@seeded
@given(seeds, st.booleans(), st.floats(min_value=-5, max_value=5))
def test_scaling_a_source_scales_its_term_alone(seed: int, ac: bool, factor: float) -> None:
    maker = Maker(seed, ac)
    factor = round(factor, 3)
    name = maker.sources[0]
    scaled = []
    for line in maker.text.splitlines():
        words = line.split()
        if len(words) > 1 and words[1] == name:
            at = 5 if words[0] == "current" else 4
            words[at] = repr(float(words[at]) * factor)
            line = " ".join(words)
        scaled.append(line)
    asked = quantities(maker)
    before = equiv.superpose(equiv.parse(maker.text), *asked, check="none")
    after = equiv.superpose(equiv.parse("\n".join(scaled)), *asked, check="none")
    for one, other in zip(before.quantities, after.quantities, strict=True):
        size = one.frequencies[0].arithmetic_sum
        for t, u in zip(one.frequencies[0].terms, other.frequencies[0].terms, strict=True):
            close(u.number, t.number * (factor if t.source == name else 1), size)


@seeded
@given(seeds, st.booleans())
def test_renaming_and_reordering_change_nothing(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    head = [line for line in maker.lines if line.startswith("frequency")]
    body = [line for line in maker.lines if not line.startswith("frequency")]
    random.Random(seed).shuffle(body)
    renamed = "\n".join([*head, *body])
    for node in sorted(maker.nodes[1:], key=len, reverse=True):
        renamed = renamed.replace(node, f"bus_{node[1:]}")
    asked = quantities(maker)
    before = equiv.superpose(equiv.parse(maker.text), *asked)
    new_asked = [
        q.replace("n", "bus_").replace("gbus_d", "gnd") if q[0] == "V" else q for q in asked
    ]
    after = equiv.superpose(equiv.parse(renamed), *new_asked)
    for one, other in zip(before.quantities, after.quantities, strict=True):
        size = one.frequencies[0].arithmetic_sum
        terms = {t.source: t for t in other.frequencies[0].terms}
        for t in one.frequencies[0].terms:
            close(t.number, terms[t.source].number, size)


@seeded
@given(seeds, st.booleans())
def test_paths_add_up_to_their_terms(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    result = equiv.superpose(equiv.parse(maker.text), *quantities(maker), paths=True)
    assert all(check.passed for check in result.checks), result.checks
    for q in result.quantities:
        for term in q.frequencies[0].terms:
            assert term.paths is not None
            assert [name for name, _ in term.paths.through] == [
                c.name for c in equiv.parse(maker.text).controlled
            ]
            close(term.paths.total, term.number, q.frequencies[0].arithmetic_sum)


@seeded
@given(seeds, st.booleans())
def test_controlled_sources_obey_their_gain_in_every_subcircuit(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    network = equiv.parse(maker.text)
    result = equiv.superpose(network, quantities(maker)[0])
    for term in result.quantities[0].frequencies[0].terms:
        assert len(term.controlled) == len(network.controlled)
        for state in term.controlled:
            gain = complex(float(network.elements[state.name].value))  # type: ignore[arg-type]
            close(state.output, gain * state.sensed, 1e-6)
            assert state.reversed == (state.sensed.real < 0) or abs(state.sensed) < 1e-9


@seeded
@given(seeds, st.booleans())
def test_power_is_a_quadratic_form_of_the_terms(seed: int, ac: bool) -> None:
    maker = Maker(seed, ac)
    network = equiv.parse(maker.text)
    name = maker.sensible[0]
    result = equiv.superpose(network, f"V:{name}", f"I:{name}", f"P:{name}")
    v, i, p = (q.frequencies[0] for q in result.quantities)
    assert p.power is not None
    vs, cs = np.array([t.number for t in v.terms]), np.array([t.number for t in i.terms])
    outer = np.outer(vs, cs.conj())
    size = float(np.abs(outer).sum())
    assert np.allclose(np.diag(outer), p.power.own, atol=1e-9 * size)
    for j in range(len(vs)):
        for k in range(j + 1, len(vs)):
            close(p.power.cross[j][k], outer[j, k] + outer[k, j], size)
    close(p.total, v.total * i.total.conjugate(), size)


@pytest.mark.parametrize("ac", [False, True])
def test_groups_add_their_members(ac: bool) -> None:
    maker = Maker(77, ac)
    lines = [
        f"{line} group all" if line.split()[0] in ("voltage", "current") else line
        for line in maker.lines
    ]
    network = equiv.parse("\n".join(lines))
    asked = quantities(maker)
    single = equiv.superpose(network, *asked)
    grouped = equiv.superpose(network, *asked, by="group")
    for one, other in zip(single.quantities, grouped.quantities, strict=True):
        (term,) = other.frequencies[0].terms
        assert term.members == tuple(s.name for s in network.sources)
        close(term.number, one.frequencies[0].total, one.frequencies[0].arithmetic_sum)
        assert term.check is not None
        close(term.number, term.check, one.frequencies[0].arithmetic_sum)
        for part, alone in zip(term.parts, one.frequencies[0].terms, strict=True):
            close(part.number, alone.number)
