"""Networks of every kind of element, generated from what the kinds declare."""

from __future__ import annotations

from decimal import Decimal
from fractions import Fraction
from itertools import pairwise
from unicodedata import normalize

from hypothesis import settings
from hypothesis import strategies as st

from equiv.elements import KINDS, Element
from equiv.elements.element import Field, Frequency, Options, Parameters
from equiv.elements.quantity import Quantity
from equiv.network import DC, Find, Given, Network, Port
from equiv.units import SYMBOL, Formula, Phasor, Rectangular, Value

seeded = settings(derandomize=True, max_examples=80, deadline=None)

WITHOUT_FILES = sorted(
    name for name, k in KINDS.items() if not k.fields or any(f.form != "file" for f in k.fields)
)
NODES = ("gnd", "a", "b1", "n.2", "mitte", "ä", "3", "in/out", "x'")
GIVEN = {
    "tail": Given(Decimal("0.012"), "ohm"),
    "n": Given(Decimal(7), ""),
    "both": Given(Formula("(2*tail)", Decimal("0.024")), "ohm"),
    "third": Given(Fraction(1, 3), "S"),
}
FORMULAS = {
    "ohm": [Formula("tail", Decimal("0.012")), Formula("(both/3 + tail)", Decimal("0.020"))],
    "S": [Formula("third", Fraction(1, 3)), Formula("(1/tail)", Fraction(250, 3))],
    "": [Formula("n", Decimal(7)), Formula("(n/3)", Fraction(7, 3))],
}
texts = st.text(st.characters(codec="utf-8", categories=("L", "N", "P", "S")), min_size=1).map(
    lambda text: normalize("NFC", " ".join(text.split())) or "x"
)
labels = st.sampled_from(["load", 'the "big" one', "5 % # not a comment", "C:\\", "Ω µ", " led"])
decimals = st.builds(
    lambda digits, power: Decimal(digits).scaleb(power),
    st.integers(-(10**15), 10**15),
    st.integers(-30, 30),
)
fractions = st.fractions(max_denominator=10**6)
reals = decimals | fractions


@st.composite
def values(draw: st.DrawFn, field: Field, unit: str, ac: bool) -> Value:
    """A value that the field takes."""
    choices = [decimals, fractions, st.just(SYMBOL), st.sampled_from(FORMULAS.get(unit, [SYMBOL]))]
    if field.complex and ac:
        choices.append(st.builds(Rectangular, reals, reals))
        choices.append(st.builds(Phasor, reals, reals, st.booleans()))
    return draw(st.one_of(choices))


@st.composite
def parameters(draw: st.DrawFn, field: Field, ac: bool) -> tuple[Value, ...]:
    """The values of one field."""
    if field.form == "ratio":
        whole = st.integers(1, 10**6).map(Decimal)
        return draw(
            st.tuples(whole, whole)
            | st.tuples(fractions.filter(bool), whole)
            | st.just((SYMBOL, Decimal(1)))
            | st.just((Formula("(n/3)", Fraction(7, 3)), Decimal(1)))
        )
    if field.name == "k":
        return (draw(st.decimals(-1, 1, places=4)),)
    if field.name == "M":
        return (SYMBOL,)
    return tuple(draw(values(field, unit, ac)) for unit in field.units)


@st.composite
def element_values(draw: st.DrawFn, kind: type[Element], ac: bool) -> Value | Parameters | None:
    """The value of an element, in the form that its kind has."""
    if not kind.fields:
        return None
    chosen = [field for field in kind.fields if field.form != "file"]
    if kind.rule == "one":
        chosen = [draw(st.sampled_from(chosen))]
    if kind.rule == "any":
        chosen = [field for field in chosen if draw(st.booleans())]
    if kind.rule == "all" and chosen[0].form == "number":
        return draw(values(chosen[0], chosen[0].units[0], ac))
    return Parameters(tuple((f.name, draw(parameters(f, ac))) for f in chosen))


@st.composite
def options(draw: st.DrawFn, kind: type[Element], ac: bool) -> Options:
    """Options that the kind may have."""
    source = kind.role == "source"
    at = None
    if source and not ac:
        at = draw(st.none() | st.builds(Frequency, st.just(Decimal(150)), st.just("rad/s")))
    return Options(
        label=draw(st.none() | labels),
        group=draw(st.none() | st.sampled_from(["standby", "g.1"])) if source else None,
        tolerance=draw(st.none() | st.sampled_from([Decimal("0.01"), Fraction(1, 3), Decimal(0)])),
        at=at,
    )


@st.composite
def networks(draw: st.DrawFn) -> Network:
    """A network with up to a dozen elements, and whatever else a file may say."""
    ac = draw(st.booleans())
    first = [KINDS["resistor"](f"R{i}", pair, Decimal(1)) for i, pair in enumerate(_pairs(NODES))]
    first += [KINDS["inductor"](f"L{i}", ("a", "gnd"), Decimal(i + 1)) for i in range(2)]
    sensed = [*first]
    kinds = draw(st.lists(st.sampled_from(WITHOUT_FILES), min_size=1, max_size=8))
    for number, name in enumerate(kinds):
        kind = KINDS[name]
        if not ac and name in ("impedance", "admittance"):
            continue
        count = len([word for word in kind.connection.split() if word != ">"])
        nodes = tuple(draw(st.sampled_from(NODES)) for _ in range(count)) if kind.pairs else ()
        sensed_one = draw(st.sampled_from([e for e in sensed if e.pairs]))
        senses = {
            "": None,
            "I": Quantity("I", (sensed_one.name,)),
            "V": draw(
                st.sampled_from(
                    [
                        Quantity("V", ("a", "b1")),
                        Quantity("V", (sensed_one.name,)),
                        Quantity("V", ("x'",)),
                    ]
                )
            ),
        }[kind.senses_what]
        links = () if kind.pairs else ("L0", "L1")
        sensed.append(
            kind(
                f"{name[:3]}{number}",
                nodes,
                draw(element_values(kind, ac)),
                senses,
                links,
                draw(options(kind, ac)),
            )
        )
    return Network(
        elements={e.name: e for e in sensed},
        title=draw(st.just("") | labels | texts),
        notes=tuple(draw(st.lists(labels | texts, max_size=2))),
        ground=draw(st.sampled_from(["gnd", "a"])),
        frequency=Frequency(Decimal(50)) if ac else DC,
        phasors=draw(st.sampled_from(["rms", "peak"])),
        given=GIVEN,
        finds=(
            Find(Quantity("I", ("R1",)), draw(st.none() | labels)),
            Find(Quantity("V", ("b1", "gnd"))),
        ),
        ports={"OUT": Port("OUT", "b1", "gnd")} if draw(st.booleans()) else {},
        comments={"R1": "checked on site"},
    )


def _pairs(nodes: tuple[str, ...]) -> list[tuple[str, str]]:
    return list(pairwise(nodes))
