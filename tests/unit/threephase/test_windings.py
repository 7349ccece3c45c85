"""Windings connected as vector groups, against what IEC 60076-1 draws."""

import cmath
import math

import numpy as np
import pytest
from laws.random_systems import GROUPS, group

from equiv.errors import UsageError
from equiv.threephase.coordinates.windings import BALANCED, arranged
from equiv.threephase.sequence.displacement import rotation, turn

ANGLES = {
    # IEC 60076-1, clock number n: the second side lags by 30·n degrees (from memory)
    "Yy0": 0, "Dd0": 0, "Dyn1": -30, "Yd1": -30, "Dyn5": -150, "Yzn5": -150, "YNyn6": 180,
    "Dzn6": 180, "Dyn7": 150, "Dyn11": 30, "YNd11": 30, "Yzn11": 30, "YNyn2": -60, "ZNy11": 30,
}  # fmt: skip


@pytest.mark.parametrize("text", GROUPS)
def test_no_load_voltages_stand_where_the_clock_says(text: str) -> None:
    """With no current in the limbs both sides' voltages are the rated ones, turned by the clock."""
    first, second = arranged(group(text))
    lag = cmath.exp(-1j * math.pi * group(text).clock / 6)
    left, right = first[:, :3] @ BALANCED, second[:, :3] @ (BALANCED * lag)
    assert np.allclose(left, right)
    assert np.allclose(np.abs(left), 1)
    # the negative sequence turns the other way
    left = first[:, :3] @ BALANCED.conj()
    assert np.allclose(left, second[:, :3] @ (BALANCED.conj() * lag.conjugate()))


@pytest.mark.parametrize(("text", "degrees"), ANGLES.items())
def test_the_angles_of_common_groups(text: str, degrees: int) -> None:
    steps = -group(text).clock
    assert cmath.isclose(turn(steps), cmath.rect(1, math.radians(degrees)), abs_tol=1e-12)
    assert cmath.isclose(rotation(2, steps), cmath.rect(1, math.radians(-degrees)), abs_tol=1e-12)


@pytest.mark.parametrize("clock", [0, 2, 4, 6, 8, 10])
def test_zero_sequence_through_a_star_star_unit(clock: int) -> None:
    """A limb links one phase of each side: equal voltages in all phases pass, or are reversed."""
    first, second = arranged(group(f"YNyn{clock}"))
    ours, theirs = first[:, :3] @ np.ones(3), second[:, :3] @ np.ones(3)
    reversed_or_not = 1 if np.allclose(ours, theirs) else -1
    assert np.allclose(ours, reversed_or_not * theirs)
    assert rotation(0, -clock) == reversed_or_not == (1 if clock % 4 == 0 else -1)


@pytest.mark.parametrize("text", ["Yzn5", "Dzn0", "YNzn1", "ZNd0", "ZNyn5"])
def test_a_zigzag_gives_the_other_side_no_zero_sequence(text: str) -> None:
    first, second = arranged(group(text))
    zigzag, other = (first, second) if text.startswith("Z") else (second, first)
    assert np.allclose(other[:, :3] @ np.ones(3), 0)
    assert np.allclose(np.abs(zigzag[:, :3] @ np.ones(3)), 1)


@pytest.mark.parametrize("text", ["Yy1", "Dd11", "Dy0", "Yd6", "Yz0", "Dz5"])
def test_a_clock_that_windings_cannot_have(text: str) -> None:
    with pytest.raises(UsageError, match="no clock number"):
        arranged(group(text))
