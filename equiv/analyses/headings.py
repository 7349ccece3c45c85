"""How tables of quantities are headed and named."""

from __future__ import annotations

from equiv.analyses.superposition.terms import FrequencyTerms, QuantityTerms
from equiv.elements.element import Frequency
from equiv.elements.quantity import Quantity
from equiv.network import Network, NodePair
from equiv.units import write_value


def frequency_words(frequency: Frequency, what: str = "phasors are rms") -> str:
    """`DC`, or the frequency and what the phasors mean."""
    if not frequency.omega:
        return "DC"
    return ", ".join(filter(None, (write_value(frequency.value, frequency.unit), what)))


def at_words(frequency: Frequency) -> str:
    """` at 50 Hz`, or nothing at DC."""
    return f" at {frequency_words(frequency, '')}" if frequency.omega else ""


def titles_of(
    network: Network, q: QuantityTerms, at: FrequencyTerms
) -> tuple[str, tuple[str, ...]]:
    """Title and subtitles: label, the quantity in words, frequency."""
    heading = q.heading[0].upper() + q.heading[1:]
    labels = (q.label[0].upper() + q.label[1:],) if q.label else ()
    title = network.title or "Superposition"
    return title, (*labels, f"{heading} ({q.quantity})", frequency_words(at.frequency))


def name_of(q: QuantityTerms, at: FrequencyTerms) -> str:
    """What tells this table from the others of the result."""
    return f"{q.quantity}{at_words(at.frequency)}"


def positive_words(network: Network, quantity: Quantity) -> str:
    """The reference direction of a quantity: `a over b`, `from a to b inside R1`."""
    place = network.locate(quantity)
    if isinstance(place, NodePair):
        return f"{place.first} over {place.second}"
    first, second = network.pair_nodes(place)
    words = {"V": f"{first} over {second}", "P": "absorbed"}
    return words.get(quantity.what, f"from {first} to {second} inside {place.element}")
