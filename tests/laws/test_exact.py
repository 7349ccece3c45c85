"""Exact results: the networks' own equations in fractions, closures that are literally zero."""

from fractions import Fraction
from typing import Any

import numpy as np
import pytest
from hypothesis import assume, given, settings
from hypothesis import strategies as st
from laws.exact_networks import ExactMaker, Tableau
from laws.random_networks import quantities, seeded, seeds

import equiv
from equiv.errors import NoUniqueSolutionError

few = settings(seeded, max_examples=4)


def parts(value: Any) -> tuple[Fraction, Fraction]:
    """An exact number's parts, read from the text that JSON has."""
    exact = value.exact
    re, im = (exact, "0") if isinstance(exact, str) else exact
    return Fraction(re), Fraction(im)


@few
@given(seeds, st.booleans())
def test_the_networks_own_equations_in_fractions(seed: int, ac: bool) -> None:
    network = equiv.parse(ExactMaker(seed, ac).text)
    try:
        state = equiv.solve(network, exact=True).first
    except NoUniqueSolutionError:
        assume(False)
    told = Tableau(network).solve()
    for node, voltage in state.nodes:
        assert parts(voltage) == told["v", node]
    for e in state.elements:
        assert parts(e.current) == told["i", (e.name, e.pair)]
    assert state.balance == 0


@few
@given(seeds, st.booleans())
def test_terms_close_to_nothing_and_are_those_of_floating_point(seed: int, ac: bool) -> None:
    maker = ExactMaker(seed, ac)
    network = equiv.parse(maker.text)
    asked = [*quantities(maker), "P:Z1"]
    exact = equiv.superpose(network, *asked, exact=True, paths=True)
    assert exact.exit_status == 0
    assert exact.checks and all(c.value == 0 and c.limit == 0 for c in exact.checks)
    rounded = equiv.superpose(network, *asked)
    for one, other in zip(exact.quantities, rounded.quantities, strict=True):
        true, near = one.frequencies[0], other.frequencies[0]
        assert true.total == true.all_on
        assert abs(complex(true.total) - near.total) <= 1e-9 * max(abs(near.total), 1e-6)
        for term, close in zip(true.terms, near.terms, strict=True):
            assert term.contribution == term.check
            size = max(near.arithmetic_sum, 1e-6)
            assert abs(complex(term.number) - close.number) <= 1e-9 * size


@settings(seeded, max_examples=3)
@given(seeds, st.booleans())
def test_ports_in_every_form(seed: int, ac: bool) -> None:
    network = equiv.parse(ExactMaker(seed, ac).text)
    ports = ("n1,gnd", "n2,gnd")
    for form in ("z", "y", "h", "g", "abcd", "s"):
        try:
            near = equiv.port(network, *ports, form=form, reference=49)
        except equiv.DoesNotExistError:
            continue
        true = equiv.port(network, *ports, form=form, reference=49, exact=True)
        assert true.checks and all(c.value == 0 and c.limit == 0 for c in true.checks)
        for name in ("parameters", "terms", "sources"):
            one, other = (getattr(result.forms[0], name) for result in (true, near))
            assert all(hasattr(x, "exact") or type(x) is int for x in one.ravel())
            one = one.astype(complex)
            assert np.abs(one - other).max() <= 1e-8 * max(np.abs(other).max(), 1e-9)
    z = equiv.port(network, *ports, exact=True).first
    assert z.impedance is not None and z.admittance is not None
    assert (z.impedance @ z.admittance == np.eye(2, dtype=int)).all()


@few
@given(seeds, st.booleans())
def test_loads_are_met_exactly(seed: int, ac: bool) -> None:
    network = equiv.parse(ExactMaker(seed, ac).text)
    loads = ("8 ohm", "short", "open", "current 0.3 A", *(("4+3j ohm",) if ac else ()))
    result = equiv.load_port(network, "n1,gnd", *loads, exact=True)
    assert result.exit_status == 0
    assert all(c.value == 0 and c.limit == 0 for c in result.checks)
    for state in result.first.states:
        assert state.point is not None and state.proof is not None
        assert state.point.voltage == state.proof.voltage
    assert result.first.states[0].point.voltage == 8 * result.first.states[0].point.current


GAIN = """
voltage V +a -gnd 1 V
resistor R1 a b 1 ohm
resistor R2 b c 3 ohm
resistor R3 b gnd 7 ohm
vcvs E +c -gnd mu {mu} senses V:b
find V:b
"""


def test_a_singular_gain_is_found_exactly_and_its_neighbour_is_not() -> None:
    # at b: (a - v) + (mu·v - v)/3 = v/7, so that D = 1 + 1/3 + 1/7 - mu/3 = 0 at mu = 31/7
    with pytest.raises(NoUniqueSolutionError, match="the gain of E"):
        equiv.superpose(equiv.parse(GAIN.format(mu="(31/7)")), exact=True)
    beside = "(31/7 + 1e-30)"
    total = equiv.superpose(equiv.parse(GAIN.format(mu=beside)), exact=True).quantities[0]
    assert parts(total.frequencies[0].total) == (-3 * 10**30, 0)


@few
@given(seeds)
def test_any_singular_gain_is_found(seed: int) -> None:
    draw = np.random.default_rng(seed)
    r1, r2, r3 = (Fraction(int(x), int(y)) for x, y in draw.integers(1, 999, (3, 2)))
    mu = r2 * (1 / r1 + 1 / r2 + 1 / r3)

    def text(gain: Fraction) -> str:
        lines = GAIN.replace("1 ohm", f"({r1}) ohm").replace("3 ohm", f"({r2}) ohm")
        return lines.replace("7 ohm", f"({r3}) ohm").format(mu=f"({gain})")

    with pytest.raises(NoUniqueSolutionError):
        equiv.solve(equiv.parse(text(mu)), exact=True)
    state = equiv.solve(equiv.parse(text(mu + Fraction(1, 10**40))), exact=True).first
    assert parts(dict(state.nodes)["b"])[0] == -(r2 / r1) * 10**40
