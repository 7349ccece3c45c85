"""What a fault result says of itself: the study, its columns, what has no value and why."""

import math

import pytest
from unit.threephase.test_fault_forms import number, rows_of

import equiv
from equiv.errors import UsageError
from equiv.threephase.asymmetry import CAPACITIVE, NO_CURRENT, asymmetry
from equiv.threephase.fault import FaultResult

TEXT = """
title        Sawmill with a set of its own
note         nameplates of the year of building
three-phase  50 Hz
base         10 MVA
prefault     1.05 pu
bus HIGH 33 kV
bus MAIN 6 kV
bus KILN 6 kV
bus SHED 0.4 kV
infeed       Utility  HIGH         level 310 MVA  x/r 9  z0/z1 2.2  voltage 1 pu @ 0 deg
transformer  T1       HIGH > MAIN  6 MVA  33/6 kV  z 7.4%  x/r 13  vector Dyn11  neutral2 4 ohm
transformer  T2       KILN > SHED  400 kVA  6/0.4 kV  z 4.6%  x/r 4  vector Dyn5  neutral2 solid
line         Feeder   MAIN > KILN  0.7 km  z1 0.206+0.098j ohm/km  z0 0.92+0.36j ohm/km
motor        Saw      MAIN         450 kW  6 kV  cosphi 0.86  efficiency 94.6%  start 5.4  x/r 6.5
"""
CABLE = """
three-phase 50 Hz
bus H 30 kV
bus A 10 kV
bus B 10 kV
infeed U H level 200 MVA x/r 9 z0/z1 1
transformer T H > A 20 MVA 30/10 kV z 9% x/r 15 vector Dd0
line L A > B 3 km z1 0.2+0.1j ohm/km z0 0.9+0.4j ohm/km b0 90 uS/km
"""


def fault(*buses: str, text: str = TEXT, **words: object) -> FaultResult:
    return equiv.fault(equiv.parse(text), *buses, **words)  # type: ignore[arg-type]


def said(found: object) -> str:
    return " ".join(str(found).split())


@pytest.mark.parametrize("buses", [("MAIN",), ()])
def test_the_voltage_before_the_fault_is_said_where_an_emf_follows_from_it(buses: tuple) -> None:
    words = "Voltage before the fault: 1.05 of nominal where no EMF is given"
    assert words in said(fault(*buses, type="three-phase"))
    assert words in said(equiv.check(equiv.parse(TEXT)))
    assert equiv.check(equiv.parse(TEXT)).data()["prefault"] == 1.05
    for text in (
        TEXT.replace("1.05 pu", "1 pu"),
        "\n".join(line for line in TEXT.splitlines() if not line.startswith("motor")),
    ):
        assert "Voltage before" not in said(fault(*buses, text=text, type="three-phase"))
    # c is in place of it
    assert "Voltage before" not in said(fault(*buses, basis="equivalent-source"))


def test_a_survey_says_c_of_each_level() -> None:
    found = fault(type="three-phase", basis="equivalent-source")
    assert "c = 1.10 at 33 kV and 6 kV, 1.05 at 400 V" in said(found)
    two = TEXT.replace("bus SHED 0.4 kV", "bus SHED 0.4 kV\nbus HUT 0.4 kV tolerance 10%")
    found = fault(text=two, type="three-phase", basis="equivalent-source", case="min")
    assert "c = 1.00 at 33 kV and 6 kV, 0.95 at 400 V (SHED), 0.90 at 400 V (HUT)" in said(found)


def test_csv_and_json_say_which_study_they_are() -> None:
    found = fault("MAIN", "SHED", type="line-ground", fault_impedance="0.5 ohm", ground_impedance=2)
    study = found.to_dict()["result"]["study"]
    assert (study["basis"], study["case"], study["hertz"]) == ("superposition", "max", 50.0)
    assert (study["prefault"], study["types"]) == (1.05, ["line-ground"])
    assert number(study["fault_impedance"]) == 0.5 and number(study["ground_impedance"]) == 2
    assert "phase a" in study["angles"] and len(study["notes"]) == 1
    (row,) = rows_of(found.render("csv"), "study")
    assert row["title"] == study["title"] == "Sawmill with a set of its own"
    assert (row["types"], row["basis"], row["case"]) == ("line-ground", "superposition", "max")
    assert (float(row["frequency [Hz]"]), float(row["prefault"])) == (50.0, 1.05)
    assert float(row["fault_impedance_re [ohm]"]) == 0.5
    assert row["notes"] == "nameplates of the year of building"
    standard = fault("MAIN", "SHED", type="line-ground", basis="equivalent-source")
    study = standard.to_dict()["result"]["study"]
    assert study["prefault"] is None and study["prefault_reason"] and study["c"]["SHED"] == 1.05
    assert [float(r["c"]) for r in rows_of(standard.render("csv"), "faults")] == [1.1, 1.05]


def test_a_survey_to_earth_says_what_its_currents_are() -> None:
    found = fault(type="line-line-ground", basis="equivalent-source")
    survey = found.tables()[0]
    names = [column.name for column in survey.columns]
    assert names[:4] == ["bus", "level", "fault current", "earth, 3·I0"]
    assert "Fault current: of phase b. Peak: in the larger one of b and c" in said(found)
    letters = set()
    for row, case in zip(survey.rows, found.cases, strict=True):
        sizes = dict(zip("abc", map(abs, case.phases), strict=True))
        letter = row.cells[-1]
        letters.add(letter)
        assert sizes[str(letter)] == max(sizes.values())
        assert row.cells[2] == pytest.approx(sizes["b"])
        assert row.cells[3] == pytest.approx(abs(case.earth))
    assert letters == {"b", "c"}  # as often the one as the other: it must be said


def test_star_points_are_called_so_and_sources_are_counted_without_them() -> None:
    found = fault(type="line-ground", basis="equivalent-source")
    assert "T1 star point" in [column.name for column in found.tables()[0].columns]
    assert "star point: the zero-sequence current that a transformer's" in said(found).lower()
    kinds = {row["source"]: row["kind"] for row in rows_of(found.render("csv"), "terms")}
    assert kinds["T1"] == kinds["T2"] == "star point" and kinds["Saw"] == "motor"
    more = TEXT + "".join(f"motor M{k} MAIN 90 kVA 6 kV start 5.4\n" for k in range(3))
    found = fault(text=more, type="line-ground", basis="equivalent-source")
    assert "Of 5 sources and 2 star points the 4 that give most have a column; others is the " \
        "phasor sum of the other 3" in said(found)  # fmt: skip


def test_the_cases_promise_no_more_than_they_are() -> None:
    assert "largest currents" not in said(fault("MAIN", type="three-phase"))
    least = fault("MAIN", type="three-phase", case="min")
    assert "smallest" not in said(least)
    assert "the levels of infeeds are as they are entered" in said(least)
    assert "as they are entered" not in said(fault("MAIN", type="three-phase"))


def test_a_relay_without_a_named_bus_is_seen_at_every_bus() -> None:
    found = fault(type="line-line", branches=["Feeder", "T1@MAIN"])
    tables = [table for table in found.tables() if table.name.startswith("relay survey")]
    assert [table.name for table in tables] == [
        "relay survey, line-line, Feeder at MAIN", "relay survey, line-line, T1 at MAIN",
    ]  # fmt: skip
    for number_, table in enumerate(tables):
        for row, case in zip(table.rows, found.cases, strict=True):
            relay = case.relays[number_]
            assert row.cells[0] == case.bus
            assert row.cells[2] == pytest.approx(abs(relay.phases.b))
            impedance = None if relay.impedance is None else pytest.approx(abs(relay.impedance))
            assert row.cells[6] == impedance
    assert "fault at MAIN: the fault is at the relay's own bus" in said(found)
    assert "fault at HIGH: the relay looks away from the fault" in said(found)


def test_a_relay_that_does_not_look_at_the_fault_measures_nothing() -> None:
    places = ["Feeder@MAIN", "Feeder@KILN", "T1@HIGH", "Saw"]
    (case,) = fault("MAIN", type="three-phase", branches=places).cases
    blind = [relay.blind for relay in case.relays]
    assert blind[:3] == ["the fault is at the relay's own bus", "", ""]
    (case,) = fault("HIGH", type="three-phase", branches=places).cases
    blind = [relay.blind for relay in case.relays]
    assert blind[0] == "the relay looks away from the fault" and blind[1] == ""
    assert blind[3] == "Saw is no way to another bus: no fault lies beyond it"
    for relay in case.relays:
        assert (relay.infeed_factor is None) >= bool(relay.blind)
        assert (relay.impedance is None) >= bool(relay.blind)
    found = fault("HIGH", type="three-phase", branches=["Feeder"])
    (relay,) = found.to_dict()["result"]["faults"][0]["relays"]
    assert relay["impedance"] is None and relay["impedance_reason"] == blind[0]
    (row,) = rows_of(found.render("csv"), "relays")
    assert row["impedance_re [ohm]"] == "" and row["reason"] == blind[0]
    assert f"No infeed factor and no apparent impedance: {blind[0]}." in said(found)


def test_in_a_ring_a_relay_looks_both_ways() -> None:
    ring = TEXT + "line Tie MAIN > KILN 0.9 km z1 0.2+0.1j ohm/km z0 0.9+0.4j ohm/km\n"
    (case,) = fault("KILN", text=ring, type="three-phase", branches=["Feeder", "Tie@MAIN"]).cases
    assert all(relay.impedance is not None and not relay.blind for relay in case.relays)


@pytest.mark.parametrize("kind", ["three-phase", "line-line"])
def test_a_ground_impedance_without_a_place_is_refused(kind: str) -> None:
    with pytest.raises(UsageError, match=f"no place in a {kind} fault"):
        fault("MAIN", type=kind, ground_impedance="2 ohm")
    assert fault("MAIN", type=kind, ground_impedance="0 ohm").cases


def test_where_a_ground_impedance_applies_is_said() -> None:
    words = "it has no place in three-phase and line-line"
    assert words in said(fault("MAIN", ground_impedance=2))
    assert "no place" not in said(fault("MAIN", type="line-ground", ground_impedance=2))


def test_a_capacitive_loop_has_no_peak() -> None:
    """Behind a delta, earth-fault current returns through the cable's capacitance alone."""
    inductive = fault("A", text=CABLE, type="three-phase").cases[0]
    assert inductive.peak is not None and not inductive.no_peak
    found = fault("A", text=CABLE, type="line-ground")
    (case,) = found.cases
    assert abs(case.earth) > 0 and case.no_peak == CAPACITIVE
    data = found.to_dict()["result"]["faults"][0]
    for key in ("x_over_r", "peak_factor", "peak", "asymmetrical_rms"):
        assert data[key] is None
    assert data["peak_reason"] == data["x_over_r_reason"] == CAPACITIVE
    assert CAPACITIVE in said(found).replace("The", "the")
    survey = fault(text=CABLE, type="line-ground")
    assert "No X/R and no peak at A and B: the fault loop is capacitive" in said(survey)
    (row,) = rows_of(found.render("csv"), "faults")
    assert row["peak [A]"] == "" and row["peak_reason"] == CAPACITIVE


def test_peak_and_first_cycle_of_a_loop() -> None:
    """IEC 60909-0, 8.1: R/X is that of the loop (method c) where R and L are in series."""
    z = complex(1, 8)
    found = asymmetry(1 / z, 1 / complex(1, 0.4 * 8), 100.0)
    assert found.x_over_r == pytest.approx(8) and not found.reason
    kappa = 1.02 + 0.98 * math.exp(-3 / 8)
    assert found.peak_factor == pytest.approx(kappa)
    assert found.peak == pytest.approx(kappa * math.sqrt(2) * 100)
    assert found.asymmetrical_rms == pytest.approx(100 * math.sqrt(1 + 2 * math.exp(-math.pi / 4)))
    # a resistance alone: no d.c. component, though rounding leaves a reactance
    assert asymmetry(1 / complex(1, -1e-15), 1.0, 1.0).peak_factor == pytest.approx(1.02)
    # inductive at the frequency of the system, capacitive at 0.4 of it
    assert asymmetry(1 / complex(1, 1), 1 / complex(1, -1), 1.0).reason == CAPACITIVE
    assert asymmetry(0j, 0j, 0.0).reason == NO_CURRENT
