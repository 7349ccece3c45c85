"""Surveys: every bus at once is what each bus alone is, however many there are."""

import csv
import io

import pytest
from performance.grids import grid_system

import equiv
from equiv.threephase.cases import TYPES, FaultCase
from equiv.threephase.loading import require_system
from equiv.threephase.model import OneLine
from equiv.threephase.showing import trimmed

MANY = 240


def unearthed() -> str:
    return grid_system(MANY).replace("neutral2 6.35 ohm", "neutral2 open")


@pytest.fixture(scope="module")
def large() -> OneLine:
    return require_system(equiv.parse(grid_system(MANY)))


@pytest.mark.parametrize("text", [grid_system(MANY), unearthed()], ids=["earthed", "unearthed"])
@pytest.mark.parametrize(
    "options",
    [
        {},
        {"fault_impedance": 0.3 + 0.1j, "ground_impedance": 2},
        {"basis": "equivalent-source", "case": "min"},
        {"by": "group"},
    ],
    ids=str,
)
def test_all_at_once_is_each_alone(text: str, options: dict) -> None:
    """Selected inversion and products of matrices against solves bus by bus."""
    system = require_system(equiv.parse(text))
    survey = {(case.bus, case.type): case for case in equiv.fault(system, **options).cases}
    assert len(survey) == MANY * len(TYPES)
    for bus in list(system.buses)[:: MANY // 6]:
        for alone in equiv.fault(system, bus, **options).cases:
            _same(survey[bus, alone.type], alone)


def _same(one: FaultCase, other: FaultCase) -> None:
    size = max(map(abs, other.phases)) or other.volts
    assert one.phases == pytest.approx(other.phases, abs=1e-9 * size)
    assert one.no_peak == other.no_peak
    for value, alone in ((one.peak, other.peak), (one.asymmetrical_rms, other.asymmetrical_rms)):
        assert value == (None if alone is None else pytest.approx(alone, rel=1e-9))
    # R/X, since the resistance of a capacitive loop is nearly nothing
    ratios = [case.x_over_r and 1 / case.x_over_r for case in (one, other)]
    assert ratios[0] == (None if ratios[1] is None else pytest.approx(ratios[1], abs=1e-9))
    assert set(one.voltages) == {one.bus}
    volts = other.voltages[one.bus]
    assert one.voltages[one.bus] == pytest.approx(volts, abs=1e-9 * other.volts)
    terms = {term.source: term.contribution for term in other.terms}
    for term in one.terms:
        if term.kind != "network":
            assert term.contribution == pytest.approx(terms[term.source], abs=1e-9 * size)


def test_tables_have_a_row_a_bus_and_the_largest_sources(large: OneLine) -> None:
    found = equiv.fault(large, type="line-line")
    survey, closing = found.tables()
    assert len(survey.rows) == MANY and closing.notes
    headings = [column.name for column in survey.columns]
    assert headings[:3] == ["bus", "level", "fault current"] and headings[-2:] == ["X/R", "peak"]
    sources = len(found.cases[0].terms)
    assert sources > 5 and len(headings) == 3 + 4 + 1 + 2 and headings[-3] == "others"
    case = found.cases[7]
    row = survey.rows[7].cells
    assert row[0] == case.bus and row[2] == pytest.approx(abs(case.total))
    shown = sum(t.contribution for t in case.terms if t.source not in headings)
    assert row[-3] == pytest.approx(abs(shown))


def test_very_many_sources_are_named_bus_by_bus() -> None:
    text = grid_system(MANY) + "".join(
        f"generator X{k} T{k} 50 MVA 132 kV x1 18% x0 9% cosphi 0.9 neutral solid\n"
        for k in range(10)
    )
    found = equiv.fault(equiv.parse(text), type="three-phase")
    (survey, _) = found.tables()
    assert [column.name for column in survey.columns][3:6] == ["largest source", "gives", "others"]
    for row, case in zip(survey.rows, found.cases, strict=True):
        largest = max(case.terms, key=lambda term: abs(term.contribution))
        assert row.cells[0] == case.bus and row.cells[3] == largest.source
        assert row.cells[4] == pytest.approx(abs(largest.contribution))
        assert row.cells[5] == pytest.approx(abs(case.total - largest.contribution))


def test_too_many_terms_are_summed_as_others(
    large: OneLine, monkeypatch: pytest.MonkeyPatch
) -> None:
    whole = equiv.fault(large, type="three-phase")
    assert trimmed.kept_terms(whole.cases) is None
    monkeypatch.setattr(trimmed, "MOST_TERMS", 4 * MANY)
    kept = trimmed.kept_terms(whole.cases)
    assert kept == 3
    text = whole.render("csv")
    assert "the 3 largest of each stand alone" in text
    rows = list(csv.reader(io.StringIO(text.split("\n\n")[0])))[1:]
    assert len(rows) == 4 * MANY
    faults = whole.to_dict()["result"]["faults"]
    for fault, case in zip(faults, whole.cases, strict=True):
        assert [term["kind"] for term in fault["terms"]].count("others") == 1
        total = sum(
            complex(t["contribution"]["re"], t["contribution"]["im"]) for t in fault["terms"]
        )
        assert total == pytest.approx(case.total)
        members = [m for term in fault["terms"] for m in term["members"]]
        assert sorted(members) == sorted(m for term in case.terms for m in term.members)


def test_a_reader_of_a_large_survey_is_told_what_was_not_checked(large: OneLine) -> None:
    found = equiv.fault(large, type="three-phase")
    assert "not-checked" in [caution.code for caution in found.cautions]
    assert all(case.check is None for case in found.cases[:3])
    assert all(check.passed for check in found.checks) and found.checks
