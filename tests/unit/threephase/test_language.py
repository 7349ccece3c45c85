"""What is read from a three-phase text, and that what is written reads back equal."""

from __future__ import annotations

from dataclasses import replace
from decimal import Decimal
from pathlib import Path
from typing import Any

import pytest

import equiv
from equiv.errors import NetworkFileError
from equiv.threephase.entered import Earthing, Entered
from equiv.threephase.kinds import KINDS
from equiv.threephase.kinds.infeed import Infeed
from equiv.threephase.loading import parse, require_system, write
from equiv.threephase.model import Bus, OneLine, View
from equiv.units import Formula

SAMPLES = Path(__file__).parents[3] / "samples"
THREE_PHASE = [p for p in sorted(SAMPLES.glob("*.equiv")) if "three-phase" in p.read_text("utf-8")]
HEAD = "three-phase 50 Hz\nbus A 33 kV\nbus B 11 kV\nbus C 11 kV\ninfeed U A level 1 GVA\n"


def read(*lines: str, **words: Any) -> OneLine:
    return require_system(parse(HEAD + "\n".join(lines), **words))


def test_what_the_file_says_about_itself() -> None:
    system = read("title  A mill", "note one", "note two", "base 10 MVA", "prefault 1.05 pu")
    assert (system.title, system.notes) == ("A mill", ("one", "two"))
    assert (system.hertz, system.base, system.prefault) == (50.0, 10e6, 1.05)
    assert list(system.buses) == ["A", "B", "C"]
    assert system.buses["A"].volts == 33e3
    assert system.places["U"] == ("text", 5)


def test_what_is_not_said_has_its_usual_value() -> None:
    system = read()
    assert (system.title, system.notes, system.base, system.prefault) == ("", (), 100e6, 1.0)
    assert system.buses["A"].tolerance == 0.06
    assert require_system(parse(HEAD.replace("50 Hz", "377 rad/s"))).hertz == pytest.approx(
        60, 1e-3
    )


def test_keywords_stand_in_any_order() -> None:
    one = read('generator G B 3 MVA 11 kV x1 15% x/r 28 count 2 group sets label "a b"')
    other = read('generator G B 3 MVA 11 kV label "a b" group sets count 2 x/r 28 x1 15%')
    assert one == other
    item = one.items["G"]
    assert (item.count, item.group, item.label) == (2, "sets", "a b")


@pytest.mark.parametrize(
    ("one", "other"),
    [
        ("generator G B 3MVA 11kV x1 15%", "generator G B 3000 kVA 11000 V x1 15 %"),
        ("line L B>C 1.2km z1 0.1+0.2johm/km", "line L B > C 1200 m z1 0.1+0.2j ohm/km"),
        ("capacitor-bank L B 2Mvar", "capacitor-bank L B 2 Mvar"),
        ("line L B > C 1 km z1 0.1+0.2j ohm/km b1 80 uS/km", "line L B > C 1 km z1 0.1+0.2j Ω/km b1 0.08mS/km"),
        ("infeed I B level 9 kA voltage 1.02pu@5deg", "infeed I B level 9kA voltage 1.02 pu @ 5 deg"),
        ("motor M B 1 MVA 11 kV start 5", "motor M B 1e6 VA 11 kV start 5.0"),
        ("transformer T A > B 9 MVA 33/11 kV z 8% vector Dyn11",
         "transformer T A > B 9 MVA 33kV/11kV z 0.08 pu vector Dyn11"),
    ],
)  # fmt: skip
def test_units_are_written_onto_numbers_or_behind_them(one: str, other: str) -> None:
    first, second = (read(line).items for line in (one, other))
    (name,) = set(first) - {"U"}
    for sequence in (1, 2, 0):
        values = [items[name].series(sequence, View()) for items in (first, second)]  # type: ignore[attr-defined]
        assert values == [None, None] or values[0] == pytest.approx(values[1], rel=1e-12)


def test_parameters_and_expressions() -> None:
    lines = ("given r = 12 ohm", "given power = 2 MVA", "given part = 4", "given k = 8%",
             "generator G B power 11 kV x1 (2*part) % neutral (r + 1 ohm)",
             "line L B > C (part/2) km z1 0.1 ohm/km",
             "transformer T A > B (2*power) 33/11 kV z k pu vector Dyn11 neutral2 r",
             "motor M B (power/4) VA 11 kV start 5 count (part/2)")  # fmt: skip
    system = read(*lines)
    g, t, m, line = (system.items[name] for name in "GTML")
    assert g.neutral() == 13  # type: ignore[attr-defined]
    assert g.series(1, View()) == pytest.approx(0.08j * 11e3**2 / 2e6)  # type: ignore[attr-defined]
    assert t.neutral(2) == 12  # type: ignore[attr-defined]
    assert t.series(1, View()) == pytest.approx(0.08j * 33e3**2 / 4e6)  # type: ignore[attr-defined]
    assert m.count == 2
    assert m.series(1, View()) == pytest.approx(1j * 11e3**2 / 0.5e6 / 5 / 2)  # type: ignore[attr-defined]
    assert line.series(1, View()) == pytest.approx(0.2)  # type: ignore[attr-defined]
    other = read(*lines, given={"r": "20 ohm", "power": "4MVA"})
    assert other.items["T"].neutral(2) == 20  # type: ignore[attr-defined]
    assert other.items["G"].series(1, View()) == pytest.approx(0.08j * 11e3**2 / 4e6)  # type: ignore[attr-defined]
    assert require_system(parse(write(system))) == system


def test_files_that_read_others(tmp_path: Path) -> None:
    (tmp_path / "buses.equiv").write_text("bus A 33 kV\nbus B 11 kV\n", encoding="utf-8")
    file = tmp_path / "station.equiv"
    file.write_text('three-phase 50 Hz\nread "buses.equiv"\ninfeed U A level 1 GVA\n', "utf-8")
    system = require_system(equiv.load(file))
    assert list(system.buses) == ["A", "B"]
    assert system.origin.name == "station.equiv"


@pytest.mark.parametrize("path", THREE_PHASE, ids=lambda p: p.stem)
def test_samples_read_back_equal(path: Path) -> None:
    system = require_system(equiv.load(path))
    text = write(system)
    again = require_system(equiv.parse(text))
    assert again == system
    assert write(again) == text


@pytest.mark.parametrize("kind", sorted(KINDS))
def test_the_example_of_each_kind_reads_back_equal(kind: str) -> None:
    from equiv.analyses.kinds import sections

    example = sections(KINDS[kind])["Example"]
    names = ("GRID", "MAIN", "PUMP", "BOARD", "BOARD_A", "BOARD_B")
    volts = dict.fromkeys(names, "11 kV") | {"GRID": "33 kV"}
    if kind == "motor":
        volts["BOARD"] = "6.6 kV"
    buses = "\n".join(f"bus {name} {volts[name]}" for name in names)
    text = f"three-phase 60 Hz\n{buses}\ninfeed Other MAIN level 1 MVA\n{example}\n"
    system = require_system(parse(text))
    (name,) = set(system.items) - {"Other"}
    assert system.items[name].kind == kind
    assert require_system(parse(write(system))) == system


def test_everything_that_can_be_written_reads_back() -> None:
    system = read(
        'note a "quoted" # not a comment', "base 100 MVA", "prefault 103%", "bus D 400 V tolerance 10%",
        "infeed I B z1 (1/3)% x/r 7 z0 0.1+2j % voltage 10.9 kV @ -0.1 rad",
        "generator G B 3 MVA 11 kV x1 0.2 pu x2 3 ohm neutral 3+1j ohm cosphi 80%",
        "synchronous-motor S B 3 MW 11 kV x1 20% cosphi 0.9 lead efficiency 96% neutral open",
        "transformer T A > B 1e7 VA 33/11.2 kV z 0.5+8j % z0 7 ohm vector YNyn0 neutral1 solid tap -2.5%",
        "transformer T2 D > B 630 kVA 400 V/11kV z 4% vector Dyn11 neutral1 solid",
        "line L B > C 350 m z1 0.1 ohm/km x/r 0.9 b1 12 nS/km b0 0 S/km",
        "reactor X B > C 500 A x 4% x0 2 ohm",
        'load P C 1.5 MW cosphi 0.9 neutral 2 ohm label "a # \\"b\\""', "capacitor-bank K C 250 kvar 12 kV",
    )  # fmt: skip
    text = write(system)
    again = require_system(parse(text))
    assert again == system
    assert write(again) == text
    assert all(line == line.rstrip() for line in text.splitlines())


def test_a_system_made_in_code_is_written() -> None:
    bus = Bus("A", 6600.0, 0.1)
    level = Entered(Decimal("5e8"), "VA")
    grid = Infeed("Grid", bus=bus, level=level, x_over_r=Entered(Decimal(9)))
    system = OneLine({"A": bus}, {"Grid": grid}, 60.0, base=12.5e6, prefault=1.03)
    assert require_system(parse(write(system))) == system
    formula = replace(grid, level=Entered(Formula("(2*level)", Decimal("5e8")), "VA"))
    with pytest.raises(NetworkFileError, match="no parameter called level"):
        parse(write(replace(system, items={"Grid": formula})))
    with pytest.raises(equiv.UsageError, match="finite"):
        write(replace(system, items={"Grid": replace(grid, level=Entered(Decimal("NaN"), "VA"))}))


def test_an_earthing_of_no_ohms_is_solid() -> None:
    system = read("generator G B 3 MVA 11 kV x1 15% x0 5% neutral 0 ohm")
    assert "neutral solid" in write(system)
    assert Earthing(None).ohms is None
