"""Where earth-fault current has no path, and what is doubtful, in words."""

from __future__ import annotations

import pytest

import equiv
from equiv.threephase.loading import parse, require_system
from equiv.threephase.model import OneLine, View
from equiv.threephase.sequence.findings import BY_DATA, doubts, no_earth_path
from equiv.threephase.vector_groups import read_group

HEAD = "three-phase 50 Hz\nbus A 33 kV\nbus B 11 kV\nbus C 11 kV\n"
NO_PATH = "no path for earth-fault current at B: "
GRID = "infeed U A level 1 GVA x/r 9 z0/z1 1.3"


def read(*lines: str) -> OneLine:
    return require_system(parse(HEAD + "\n".join(lines)))


def transformer(group: str, *neutrals: str) -> str:
    return f"transformer T A > B 9 MVA 33/11 kV z 8% vector {group} {' '.join(neutrals)}"


@pytest.mark.parametrize(
    ("group", "neutrals", "where"),
    [
        ("Dyn11", "neutral2 solid", ""),
        ("Dyn11", "neutral2 open", "BC"),
        ("Dyn11", "neutral2 9 ohm", ""),
        ("Dd0", "", "BC"),
        ("YNd5", "neutral1 solid", "BC"),
        ("YNyn0", "neutral1 solid neutral2 solid", ""),
        ("YNyn0", "neutral2 solid", "BC"),
        ("YNyn0", "neutral1 solid", "BC"),
        ("Dzn0", "neutral2 solid", ""),
        ("Yzn11", "neutral2 solid", ""),
        ("YNzn11", "neutral1 solid", "BC"),
    ],
)
def test_windings_and_earthing_decide(group: str, neutrals: str, where: str) -> None:
    """The table of a two-winding transformer's zero-sequence paths (common practice)."""
    line = "line L B > C 1 km z1 0.1+0.1j ohm/km z0 0.3+0.3j ohm/km"
    system = read(GRID, transformer(group, neutrals), line)
    assert "".join(no_earth_path(system)) == where


def test_an_infeed_that_passes_no_earth_current_through_a_delta() -> None:
    """The infeed is earthed; behind the transformer of star and star without earth nothing is."""
    system = read(GRID, transformer("YNyn0", "neutral1 solid neutral2 open"))
    paths = no_earth_path(system)
    assert paths["B"] == f"{NO_PATH}the 11 kV side of T is not earthed{BY_DATA}"
    assert paths["C"] == f"{NO_PATH.replace('B', 'C')}nothing there is earthed{BY_DATA}"
    assert "A" not in paths


def test_the_reasons_name_everything_that_might_be_earthed() -> None:
    system = read(GRID, transformer("YNd1", "neutral1 solid"), "generator G B 3 MVA 11 kV x1 15%",
                  "motor M B 1 MVA 11 kV start 5")  # fmt: skip
    assert no_earth_path(system)["B"] == (
        f"{NO_PATH}the 11 kV side of T is a delta and G is not earthed{BY_DATA}"
    )
    system = read(GRID, transformer("YNyn0", "neutral2 solid"))
    assert "is earthed, but the other is a star that is not earthed" in no_earth_path(system)["B"]


def test_what_else_reaches_earth() -> None:
    delta = transformer("Dd0")
    line = "line L B > C 1 km z1 0.1+0.1j ohm/km z0 0.3+0.3j ohm/km"
    assert not no_earth_path(read(GRID, delta, f"{line} b0 90 uS/km"))
    assert not no_earth_path(read(GRID, delta, line, "load P C 1 MVA neutral solid"))
    assert not no_earth_path(
        read(GRID, delta, line, "generator G C 1 MVA 11 kV x1 9% x0 3% neutral 9 ohm")
    )
    # loads are not in the equivalent-source method
    system = read(GRID, delta, line, "load P C 1 MVA neutral solid")
    assert list(no_earth_path(system, View("equivalent-source"))) == ["B", "C"]


def codes(*lines: str) -> list[str]:
    return [caution.code for caution in doubts(read(*lines))]


def messages(*lines: str) -> str:
    return "\n".join(caution.message for caution in doubts(read(*lines)))


def test_nothing_is_doubtful() -> None:
    line = "line L B > C 1 km z1 0.1+0.1j ohm/km z0 0.3+0.3j ohm/km"
    assert codes(GRID, transformer("Dyn11", "neutral2 solid"), line) == []


def test_buses_that_nothing_names_and_that_no_source_reaches() -> None:
    said = messages(GRID, "load P B 1 MVA")
    assert "nothing is connected to C" in said
    assert "no source reaches B: no fault current there" in said


def test_a_ratio_that_is_a_little_off() -> None:
    line = "transformer T A > B 9 MVA 33/11.4 kV z 8% vector Dyn11 neutral2 solid tap 5%"
    assert "T is rated 33 kV to 11.4 kV" in messages(GRID, line)
    assert "3.5 % apart" in messages(GRID, line)
    line = "transformer T A > B 9 MVA 33/11.3 kV z 8% vector Dyn11 neutral2 solid tap 5%"
    assert "doubtful-ratio" not in codes(GRID, line)


def test_a_star_point_about_which_nothing_is_said() -> None:
    assert "the 11 kV side of T is brought out" in messages(GRID, transformer("Dyn11"))
    assert "neutral-not-said" not in codes(GRID, transformer("Dyn11", "neutral2 open"))


def test_zero_sequence_data_that_is_not_there() -> None:
    said = messages("infeed U A level 1 GVA", "line L B > C 1 km z1 0.1 ohm/km",
                    "generator G B 3 MVA 11 kV x1 15% neutral solid")  # fmt: skip
    assert "no zero-sequence data for U, L and G" in said


GROUPS = [
    "Dyn11",
    "YNd5",
    "YNyn0",
    "YNzn11",
    "ZNyn11",
    "Dzn0",
    "ZNd0",
    "Yzn1",
    "Yyn0",
    "YNy0",
    "Dd0",
]


@pytest.mark.parametrize("group", GROUPS)
@pytest.mark.parametrize("first", ["solid", "open"])
@pytest.mark.parametrize("second", ["solid", "open"])
def test_no_current_flows_where_there_is_no_path(group: str, first: str, second: str) -> None:
    """Against the windings themselves, in three conductors and without sequences."""
    windings = read_group(group)
    assert not isinstance(windings, str)
    chosen = ((first, windings.first.neutral_out), (second, windings.second.neutral_out))
    earthing = [f"neutral{n} {how}" for n, (how, out) in enumerate(chosen, 1) if out]
    system = read(GRID, transformer(group, *earthing), "motor M B 1 MVA 11 kV start 5 x/r 8")
    for bus in "AB":
        (case,) = equiv.fault(system, bus, type="line-ground").cases
        assert case.check is not None
        assert (abs(sum(case.check)) < 1e-6) == (bus in no_earth_path(system))
