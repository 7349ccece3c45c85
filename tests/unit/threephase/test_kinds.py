"""The impedance of each kind against formulas worked by hand, in both bases."""

from __future__ import annotations

import cmath
import math
from typing import Any

import pytest

from equiv.threephase.loading import parse, require_system
from equiv.threephase.model import Link, OneLine, Shunt, Transformer, View

SUPERPOSITION = View()
MAX = View("equivalent-source", "max")
MIN = View("equivalent-source", "min")
HEAD = """three-phase 50 Hz
bus A 33 kV
bus B 11 kV
bus C 11 kV
bus D 400 V tolerance 10%
infeed Elsewhere C level 1 MVA
"""


def system_of(*lines: str) -> OneLine:
    return require_system(parse(HEAD + "\n".join(lines)))  # type: ignore[arg-type]


def item_of(line: str, *others: str) -> Any:
    return system_of(line, *others).items[line.split()[1]]


def near(value: complex | None) -> Any:
    assert value is not None
    return pytest.approx(value, rel=1e-12, abs=1e-12)


def at_angle(size: float, x_over_r: float) -> complex:
    """A magnitude whose reactance is so many times its resistance."""
    resistance = size / math.sqrt(1 + x_over_r**2)
    return complex(resistance, resistance * x_over_r)


def test_an_infeed_by_its_level() -> None:
    grid = item_of("infeed Grid A level 900 MVA x/r 12 z0/z1 1.3")
    z = at_angle(33e3**2 / 900e6, 12)
    assert grid.series(1, SUPERPOSITION) == near(z)
    assert grid.series(2, SUPERPOSITION) == near(z)
    assert grid.series(0, SUPERPOSITION) == near(1.3 * z)
    assert grid.series(1, MAX) == near(1.1 * z)
    assert grid.series(1, MIN) == near(z)
    assert grid.neutral() == 0
    assert grid.emf(SUPERPOSITION) is None


def test_an_infeed_by_its_current_without_a_ratio_is_a_reactance() -> None:
    grid = item_of("infeed Grid A level 10 kA")
    assert grid.series(1, SUPERPOSITION) == near(1j * 33e3 / math.sqrt(3) / 10e3)
    assert grid.series(0, SUPERPOSITION) is None
    assert grid.neutral() is None
    assert grid.lacks_zero_sequence


@pytest.mark.parametrize("zero", ["", "x0/r0 3"])
@pytest.mark.parametrize("view", [SUPERPOSITION, MAX, MIN])
def test_the_line_to_ground_level_comes_back(zero: str, view: View) -> None:
    grid = item_of(f"infeed Grid A level 10 kA level1 7 kA x/r 12 {zero}")
    c = {"superposition": 1.0}.get(view.basis, 1.1 if view.case == "max" else 1.0)
    loop = 2 * grid.series(1, view) + grid.series(0, view)
    assert abs(3 * c * 33e3 / math.sqrt(3) / loop) == pytest.approx(7e3, rel=1e-12)
    ratio = 3 if zero else 12
    assert grid.series(0, view).imag / grid.series(0, view).real == pytest.approx(ratio)


def test_an_infeed_by_its_impedances() -> None:
    grid = item_of("infeed Grid A z1 0.4+3.6j ohm z0 0.9+4.1j ohm voltage 1.02 pu @ -3 deg")
    assert grid.series(1, MAX) == near(0.4 + 3.6j)
    assert grid.series(0, MAX) == near(0.9 + 4.1j)
    emf = 1.02 * 33e3 / math.sqrt(3) * cmath.exp(-1j * math.radians(3))
    assert grid.emf(SUPERPOSITION) == near(emf)


def test_an_infeed_in_per_unit_of_the_base() -> None:
    grid = item_of("infeed Grid A z1 5% x/r 10", "base 50 MVA")
    assert grid.series(1, SUPERPOSITION) == near(at_angle(0.05 * 33e3**2 / 50e6, 10))


def test_a_generator() -> None:
    line = "generator G B 2.5 MVA 10.5 kV x1 14% x2 16% x0 5% x/r 30 cosphi 0.85 neutral 18 ohm"
    machine = item_of(line)
    base = 10.5e3**2 / 2.5e6
    r = 0.14 * base / 30
    z = {1: r + 0.14j * base, 2: r + 0.16j * base, 0: r + 0.05j * base}
    k = 11 / 10.5 * 1.1 / (1 + 0.14 * math.sqrt(1 - 0.85**2))
    for sequence, value in z.items():
        assert machine.series(sequence, SUPERPOSITION) == near(value)
        assert machine.series(sequence, MAX) == near(k * value)
    assert machine.neutral() == 18
    assert machine.stays(MIN)


def test_a_generator_of_which_less_is_said() -> None:
    machine = item_of("generator G B 2.5 MVA 11 kV x1 0.2 pu count 2 voltage 11.2 kV neutral solid")
    half = 1j * 0.2 * 11e3**2 / 2.5e6 / 2
    assert machine.series(1, SUPERPOSITION) == near(half)
    assert machine.series(2, SUPERPOSITION) == near(half)
    assert machine.series(0, SUPERPOSITION) is None
    assert machine.lacks_zero_sequence
    assert machine.series(1, MAX) == near(half * 1.1 / (1 + 0.2 * 0.6))
    assert machine.emf(SUPERPOSITION) == near(11.2e3 / math.sqrt(3))


def test_parallel_generators_have_parallel_neutrals() -> None:
    machine = item_of("generator G B 1 MVA 11 kV x1 15% x0 3 ohm neutral 12+1j ohm count 3")
    assert machine.neutral() == near((12 + 1j) / 3)
    assert machine.series(0, SUPERPOSITION) == near(1j)
    assert item_of("generator G B 1 MVA 11 kV x1 15% neutral open").neutral() is None


def test_a_motor() -> None:
    line = "motor M B 560 kW 11 kV cosphi 0.88 efficiency 95% start 5.8 x/r 8 count 3"
    motor = item_of(line)
    z = at_angle(11e3**2 / (560e3 / 0.95 / 0.88) / 5.8, 8) / 3
    assert motor.series(1, SUPERPOSITION) == near(z)
    assert motor.series(2, MAX) == near(z)
    assert motor.series(0, MAX) is None
    assert motor.neutral() is None
    assert (motor.stays(MAX), motor.stays(MIN), motor.drives) == (True, False, True)
    assert motor.stays(View("superposition", "min")) is False


def test_a_motor_by_its_rating_in_voltamperes() -> None:
    motor = item_of("motor M B 600 kVA 11 kV start 6")
    assert motor.series(1, SUPERPOSITION) == near(1j * 11e3**2 / 600e3 / 6)


def test_a_synchronous_motor() -> None:
    line = "synchronous-motor M B 1.8 MW 11 kV cosphi 0.9 lead efficiency 96% x1 18% x/r 25"
    motor = item_of(line)
    x = 0.18 * 11e3**2 / (1.8e6 / 0.96 / 0.9)
    assert motor.series(1, SUPERPOSITION) == near(complex(x / 25, x))
    k = 1.1 / (1 + 0.18 * math.sqrt(1 - 0.9**2))
    assert motor.series(1, MAX) == near(k * complex(x / 25, x))
    assert motor.stays(MIN) is False


def test_a_transformer() -> None:
    line = "transformer T A > B 16 MVA 33/11 kV z 9.6% x/r 18 vector Dyn11 neutral2 9 ohm"
    transformer = item_of(line)
    z = at_angle(0.096 * 33e3**2 / 16e6, 18)
    assert transformer.rated == (33e3, 11e3)
    for sequence in (0, 1, 2):
        assert transformer.series(sequence, SUPERPOSITION) == near(z)
    x = z.imag / (33e3**2 / 16e6)
    k = 0.95 * 1.1 / (1 + 0.6 * x)
    for view in (MAX, MIN):
        assert transformer.series(1, view) == near(k * z)
    assert (transformer.neutral(1), transformer.neutral(2)) == (None, 9)
    group = transformer.group_of_windings
    assert (group.first.connection, group.second.connection, group.clock) == ("D", "Y", 11)
    assert (group.first.neutral_out, group.second.neutral_out) == (False, True)


def test_a_transformer_named_from_its_low_side() -> None:
    line = "transformer T B > A 16 MVA 11/33 kV z 9.6% vector YNd5 neutral2 solid z0 8% tap 2.5%"
    transformer = item_of(line)
    group = transformer.group_of_windings
    # the plate says: the delta of 11 kV lags the star of 33 kV by 5 hours, so the star lags by 7
    assert (group.first.connection, group.second.connection, group.clock) == ("D", "Y", 7)
    assert transformer.rated == (pytest.approx(11e3 * 1.025), 33e3)
    assert transformer.neutral(2) == 0
    base = (11e3 * 1.025) ** 2 / 16e6
    assert transformer.series(1, SUPERPOSITION) == near(1j * 0.096 * base)
    assert transformer.series(0, SUPERPOSITION) == near(1j * 0.08 * base)


def test_a_transformer_to_low_voltage_has_that_side_s_factor() -> None:
    line = "transformer T B > D 400 kVA 11/0.4 kV z 1+3.9j % vector Dyn5 neutral2 solid count 2"
    transformer = item_of(line)
    z = (0.01 + 0.039j) * 11e3**2 / 400e3 / 2
    assert transformer.series(1, SUPERPOSITION) == near(z)
    # 1.10: a low-voltage supply with a tolerance of 10 %
    assert transformer.series(1, MAX) == near(z * 0.95 * 1.1 / (1 + 0.6 * 0.039))


def test_a_transformer_in_ohms_is_seen_from_its_first_side() -> None:
    transformer = item_of("transformer T A > B 16 MVA 33/11 kV z 6.5 ohm x/r 10 vector Dyn11")
    assert transformer.series(1, SUPERPOSITION) == near(at_angle(6.5, 10))


def test_a_line() -> None:
    line = item_of("line L B > C 1.2 km z1 0.161+0.093j ohm/km z0 0.72+0.28j ohm/km "
                   "b1 80 uS/km b0 50 uS/km count 2")  # fmt: skip
    assert line.series(1, SUPERPOSITION) == near((0.161 + 0.093j) * 1.2 / 2)
    assert line.series(2, MAX) == near((0.161 + 0.093j) * 1.2 / 2)
    assert line.series(0, SUPERPOSITION) == near((0.72 + 0.28j) * 1.2 / 2)
    assert line.charging(1, SUPERPOSITION) == near(80e-6j * 1.2 * 2)
    assert line.charging(0, SUPERPOSITION) == near(50e-6j * 1.2 * 2)


def test_a_line_without_a_length() -> None:
    line = item_of("line L B > C z1 0.2+0.4j ohm b1 30 uS")
    assert line.series(1, SUPERPOSITION) == near(0.2 + 0.4j)
    assert line.series(0, SUPERPOSITION) is None
    assert line.lacks_zero_sequence
    assert line.charging(1, SUPERPOSITION) == near(30e-6j)
    assert line.charging(0, SUPERPOSITION) == 0
    per_unit = item_of("line L B > C z1 0.01+0.02j pu", "base 10 MVA")
    assert per_unit.series(1, SUPERPOSITION) == near((0.01 + 0.02j) * 11e3**2 / 10e6)


def test_a_reactor() -> None:
    x = 0.06 * 11e3 / math.sqrt(3) / 1.2e3
    reactor = item_of("reactor X B > C 1.2 kA x 6% x/r 70")
    assert reactor.series(1, SUPERPOSITION) == near(complex(x / 70, x))
    assert reactor.series(0, SUPERPOSITION) == near(complex(x / 70, x))
    reactor = item_of("reactor X B > C x 0.4 ohm x0 0.3 ohm x/r 40 count 2")
    assert reactor.series(0, SUPERPOSITION) == near(complex(0.01, 0.3) / 2)


def test_a_load() -> None:
    load = item_of("load L B 380 kW cosphi 0.95")
    apparent = 380e3 + 1j * 380e3 * math.tan(math.acos(0.95))
    assert load.series(1, SUPERPOSITION) == near(11e3**2 / apparent.conjugate())
    assert load.series(0, SUPERPOSITION) is None
    assert (load.drives, load.stays(MAX), load.stays(SUPERPOSITION)) == (False, False, True)
    leading = item_of("load L B 400 kVA cosphi 0.95 lead neutral solid")
    z = 11e3**2 / 400e3 * cmath.exp(-1j * math.acos(0.95))
    assert leading.series(0, SUPERPOSITION) == near(z)
    assert leading.neutral() == 0


def test_a_capacitor_bank() -> None:
    bank = item_of("capacitor-bank K B 600 kvar count 2")
    assert bank.series(1, SUPERPOSITION) == near(-1j * 11e3**2 / 600e3 / 2)
    assert bank.series(0, SUPERPOSITION) is None
    assert bank.stays(MAX) is False
    rated = item_of("capacitor-bank K B 600 kvar 12 kV")
    assert rated.series(1, SUPERPOSITION) == near(-1j * 12e3**2 / 600e3)


@pytest.mark.parametrize(
    "line",
    [
        "infeed I A level 900 MVA x/r 12 z0/z1 1.3",
        "generator G B 2.5 MVA 11 kV x1 14% x0 5% x/r 30 neutral 18 ohm",
        "motor M B 560 kVA 11 kV start 5.8 x/r 8",
        "transformer T A > B 16 MVA 33/11 kV z 9.6% x/r 18 vector Dyn11",
        "line L B > C 1.2 km z1 0.161+0.093j ohm/km z0 0.72+0.28j ohm/km b1 80 uS/km",
        "reactor X B > C 1.2 kA x 6% x/r 70",
        "load L B 380 kW cosphi 0.95",
        "capacitor-bank K B 600 kvar",
    ],
)
def test_at_20_hz_resistances_stay(line: str) -> None:
    """An inductive reactance goes with the frequency, a capacitive one against it."""
    item: Shunt | Link | Transformer = item_of(line)
    low = View(reactances=0.4)
    for sequence in (0, 1, 2):
        full = item.series(sequence, SUPERPOSITION)
        if full is not None:
            part = full.imag * 0.4 if full.imag > 0 else full.imag / 0.4
            assert item.series(sequence, low) == near(complex(full.real, part))
    if isinstance(item, Link):
        assert item.charging(1, low) == near(0.4 * item.charging(1, SUPERPOSITION))
