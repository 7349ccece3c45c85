"""A large power system as text: a meshed transmission net, and radial networks below it."""

import math
import random


def grid_system(buses: int, seed: int = 20261201) -> str:
    """A three-phase file of so many buses, a quarter of them meshed.

    The transmission net is a map of substations: each has lines to most of its neighbours, double
    where it is a trunk. Below each stand transformers with a feeder and its branches. Every
    twentieth substation has a generator, every thirtieth feeder a motor.
    """
    draw = random.Random(seed)
    side = max(2, math.isqrt(buses // 4))
    lines = ["title A made system", "three-phase 50 Hz", "base 100 MVA"]
    items = ["infeed Grid T0 level 6000 MVA x/r 15 z0/z1 1.2"]
    for k in range(side * side):
        lines.append(f"bus T{k} 132 kV")
        row, column = divmod(k, side)
        if column and (row == 0 or draw.random() < 0.8):
            items.append(_line(draw, f"H{k}", f"T{k - 1}", f"T{k}", 4, 40, 1 + (row % 5 == 0)))
        if row:
            items.append(
                _line(draw, f"V{k}", f"T{k - side}", f"T{k}", 4, 40, 1 + (column % 5 == 0))
            )
        if k % 20 == 0:
            items.append(
                f"generator G{k} T{k} {draw.uniform(40, 160):.1f} MVA 132 kV x1 18% x2 18% x0 9% "
                f"x/r {draw.uniform(30, 70):.1f} cosphi 0.85 neutral solid"
            )
    left, feeder = buses - side * side, 0
    while left > 0:
        long = min(left, draw.randint(2, 4))
        names = [f"F{feeder}_{n}" for n in range(long)]
        lines += [f"bus {name} 11 kV" for name in names]
        items.append(
            f"transformer S{feeder} T{feeder % side**2} > {names[0]} "
            f"{draw.uniform(10, 40):.1f} MVA 132/11 kV z {draw.uniform(9, 13):.2f}% x/r 20 "
            "vector Dyn11 neutral2 6.35 ohm"
        )
        items += [
            _line(draw, f"C{feeder}_{n}", names[draw.randrange(n)], names[n], 0.3, 3, 1)
            for n in range(1, long)
        ]
        if feeder % 30 == 0:
            items.append(
                f"motor M{feeder} {names[-1]} {draw.uniform(200, 900):.0f} kW 11 kV cosphi 0.87 "
                "efficiency 95% start 5.5 x/r 8"
            )
        left, feeder = left - long, feeder + 1
    return "\n".join([*lines, *items, ""])


def _line(
    draw: random.Random, name: str, a: str, b: str, least: float, most: float, count: int
) -> str:
    return (
        f"line {name} {a} > {b} {draw.uniform(least, most):.2f} km z1 0.11+0.38j ohm/km "
        f"z0 0.33+1.1j ohm/km b1 3 uS/km b0 1.8 uS/km count {count}"
    )
