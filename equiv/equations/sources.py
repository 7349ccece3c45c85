"""The values of a network's independent sources."""

from __future__ import annotations

import math

import numpy as np

from equiv.elements.element import Frequency
from equiv.equations.layout import Numbers, arithmetic_of
from equiv.network import Network


def source_values(network: Network, frequency: Frequency) -> Numbers:
    """The rms value (V or A) of each source at a frequency; 0 for a source at another one."""
    arithmetic = arithmetic_of(network)
    values = arithmetic.column([source.value for source in network.sources], network.sources)
    at = [network.frequency_of(source).omega for source in network.sources]
    here = [math.isclose(omega, frequency.omega, rel_tol=1e-12) for omega in at]
    if network.phasors == "peak" and frequency.omega:
        values = arithmetic.rms(values, network.sources)
    return np.where(here, values, 0)
