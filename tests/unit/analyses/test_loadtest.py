"""`loadtest`: closed forms, numpy's and scipy's least squares, and Monte-Carlo of uncertainties."""

import math

import numpy as np
import pytest
from scipy.optimize import curve_fit

import equiv
from equiv.analyses.loadtest import LoadTest
from equiv.errors import DoesNotExistError, NetworkFileError


def csv(header: str, *rows: str) -> str:
    return "\n".join([header, *rows]) + "\n"


def fitted(header: str, *rows: str) -> LoadTest:
    result = equiv.loadtest(csv(header, *rows))
    assert result.exit_status == 0, result.checks
    return result


def values(result: LoadTest) -> list[float]:
    return [e.value for e in result.estimates]


def sigmas(result: LoadTest) -> list[float]:
    return [e.uncertainty for e in result.estimates]


LV = "load [ohm],voltage [V]"
VI = "voltage [V],current [A]"


def test_two_readings_are_exact() -> None:
    # E = 12 V, R = 0.5 ohm: 12·L/(L + 0.5)
    result = fitted(LV, "5.5,11", "1.5,9")
    assert values(result) == [pytest.approx(12, rel=1e-14), pytest.approx(0.5, rel=1e-13)]
    assert result.short_current.value == pytest.approx(24) and result.correlations is None
    assert sigmas(result) == [None, None]
    same = fitted("voltage [mV],current [mA]", "11000,2000", "9000,6000")
    assert values(same) == pytest.approx(values(result))


def test_an_open_port_is_a_reading() -> None:
    result = fitted("load [kohm],voltage [V]", "open,10", "1,8")
    assert values(result) == pytest.approx([10, 250])
    assert fitted(VI, "10,0", "8,8e-3").estimates[1].value == pytest.approx(250)


def test_two_readings_propagate_by_the_closed_form() -> None:
    # E = (V1·I2 - V2·I1)/(I2 - I1), R = (V1 - V2)/(I2 - I1) with u(V) = 10 mV, u(I) = 20 mA
    v, i = np.array([12.1, 10.3]), np.array([0.5, 4.0])
    result = fitted(VI, "12.1±0.01,0.5±0.02", "10.3±0.01,4±0.02")
    r = (v[0] - v[1]) / (i[1] - i[0])
    width = i[1] - i[0]
    by_v = np.array([[i[1], -i[0]], [1, -1]]) / width  # of E, R
    by_i = r * by_v  # a current's error is that of a voltage, times R
    covariance = by_v @ by_v.T * 0.01**2 + by_i @ by_i.T * 0.02**2
    assert sigmas(result) == pytest.approx(np.sqrt(np.diag(covariance)), rel=1e-12)
    correlation = covariance[0, 1] / math.sqrt(covariance[0, 0] * covariance[1, 1])
    assert result.correlations[0][1] == pytest.approx(correlation, rel=1e-12)


def test_a_line_is_numpys_weighted_line() -> None:
    i = np.array([0.5, 1, 2, 3, 4.5])
    v = np.array([12.31, 12.02, 11.43, 10.81, 9.93])
    u = np.array([0.02, 0.02, 0.03, 0.02, 0.05])
    rows = [f"{a},{s},{b}" for a, s, b in zip(v, u, i, strict=True)]
    result = fitted("voltage [V],± voltage [V],current [A]", *rows)
    (slope, start), covariance = np.polyfit(i, v, 1, w=1 / u, cov="unscaled")
    assert values(result) == pytest.approx([start, -slope], rel=1e-12)
    assert sigmas(result) == pytest.approx(np.sqrt(np.diag(covariance))[::-1], rel=1e-10)
    size = math.sqrt(covariance[0, 0] * covariance[1, 1])
    assert result.correlations[0][1] == pytest.approx(-covariance[0, 1] / size)
    residuals = v - (start + slope * i)
    assert result.fit.residuals[:, 0] == pytest.approx(residuals, abs=1e-12)
    assert result.fit.chi_squared == pytest.approx(float((residuals**2 / u**2).sum()))


def test_the_scatter_gives_uncertainties_where_none_are_stated() -> None:
    i, v = np.array([0.5, 1, 2, 3, 4.5]), np.array([12.31, 12.02, 11.43, 10.81, 9.93])
    result = fitted(VI, *(f"{a},{b}" for a, b in zip(v, i, strict=True)))
    _, covariance = np.polyfit(i, v, 1, cov=True)
    assert sigmas(result) == pytest.approx(np.sqrt(np.diag(covariance))[::-1], rel=1e-10)
    assert result.fit.freedom == 3


@pytest.mark.parametrize("stated", [True, False])
def test_loads_are_scipys_least_squares_of_the_voltages(stated: bool) -> None:
    loads, v = np.array([20.0, 10, 5, 2, 1]), np.array([9.8, 9.47, 9.13, 7.99, 6.71])
    u = np.array([0.02, 0.05, 0.02, 0.03, 0.04])
    rows = [f"{a},{b}±{s}" if stated else f"{a},{b}" for a, b, s in zip(loads, v, u, strict=True)]
    result = fitted(LV, *rows)
    best, covariance = curve_fit(
        lambda x, e, r: e * x / (x + r), loads, v, p0=[10, 0.5],
        sigma=u if stated else None, absolute_sigma=stated, xtol=1e-14, ftol=1e-14,
    )  # fmt: skip
    assert values(result) == pytest.approx(best, rel=1e-7)
    # the covariance is that of the slopes at the solution in both
    assert sigmas(result) == pytest.approx(np.sqrt(np.diag(covariance)), rel=1e-5)


def test_uncertain_loads_by_monte_carlo() -> None:
    draw = np.random.default_rng(20240901)
    loads, e, r = np.array([20.0, 6.0, 2.0]), 10.0, 0.8
    v = e * loads / (loads + r)
    rows = [f"{a:.12g}±0.5%,{b:.12g}±0.01" for a, b in zip(loads, v, strict=True)]
    result = fitted(LV, *rows)
    found = []
    weights = 1 / (0.01**2 + (e * r * 0.005 * loads / (loads + r) ** 2) ** 2)
    for _ in range(4000):
        x = loads * (1 + 0.005 * draw.standard_normal(3))
        y = v + 0.01 * draw.standard_normal(3)
        # one Gauss-Newton step from the true values is the estimator to first order
        slopes = np.stack([x / (x + r), -e * x / (x + r) ** 2], axis=1)
        root = np.sqrt(weights)[:, None]
        found.append(
            np.linalg.lstsq(root * slopes, root[:, 0] * (y - e * x / (x + r)), rcond=None)[0]
        )
    covariance = np.cov(np.array(found).T)
    assert sigmas(result) == pytest.approx(np.sqrt(np.diag(covariance)), rel=0.05)
    size = math.sqrt(covariance[0, 0] * covariance[1, 1])
    assert result.correlations[0][1] == pytest.approx(covariance[0, 1] / size, abs=0.03)
    current = (e + np.array(found)[:, 0]) / (r + np.array(found)[:, 1])
    assert result.short_current.uncertainty == pytest.approx(current.std(), rel=0.05)


@pytest.mark.parametrize("by", ["load", "current"])
def test_angles_give_a_complex_impedance(by: str) -> None:
    e, z = 230 + 0j, 0.4 + 0.9j
    loads = [10 + 0j, 4 + 3j, 2 - 1j]
    rows = []
    for load in loads:
        i = e / (z + load)
        v = i * load
        other = f"{load.real!r}{load.imag:+}j" if by == "load" else f"{i.real!r}{i.imag:+}j"
        rows.append(f"{abs(v)!r} @ {math.degrees(math.atan2(v.imag, v.real))!r} deg,{other}")
    result = fitted(f"voltage [V],{'load [ohm]' if by == 'load' else 'current [A]'}", *rows)
    assert result.emf == pytest.approx(e, rel=1e-12)
    assert result.impedance == pytest.approx(z, rel=1e-11)


def test_complex_readings_are_numpys_least_squares() -> None:
    draw = np.random.default_rng(5)
    i = np.array([1, 2 - 1j, 4 - 2j, 5 + 1j])
    v = 100 - (3 + 4j) * i + 0.05 * (draw.standard_normal(4) + 1j * draw.standard_normal(4))
    rows = [
        f"{abs(a):.17g},{np.angle(a):.17g},{b.real}{b.imag:+}j" for a, b in zip(v, i, strict=True)
    ]
    header = "voltage [V],voltage angle [rad],current angle [deg],current [A]"
    rows = [f"{a},{b},0,{c}" for a, b, c in (row.split(",") for row in rows)]
    result = fitted(header, *rows)
    a = np.stack([np.ones(4), -i], axis=1)
    (e, z), residual, _, _ = np.linalg.lstsq(a, v, rcond=None)
    assert result.emf == pytest.approx(e, rel=1e-12)
    assert result.impedance == pytest.approx(z, rel=1e-12)
    scatter = float(residual[0]) / (8 - 4)
    expected = np.sqrt(np.diag(np.linalg.inv(a.conj().T @ a)).real * scatter)
    assert sigmas(result) == pytest.approx([expected[0]] * 2 + [expected[1]] * 2, rel=1e-9)


def test_uncertain_angles_by_monte_carlo() -> None:
    header = "load [ohm],voltage [V],± voltage [V],voltage angle [deg],± voltage angle [deg]"
    e, z = 10.0, 3 + 4j
    loads = np.array([20.0, 5.0])
    v = e * loads / (loads + z)
    rows = [
        f"{a:.17g},{abs(b):.15g},0.02,{math.degrees(np.angle(b)):.15g},0.3"
        for a, b in zip(loads, v, strict=True)
    ]
    result = fitted(header, *rows)
    draw = np.random.default_rng(11)
    size = np.abs(v) + 0.02 * draw.standard_normal((4000, 2))
    turn = np.angle(v) + math.radians(0.3) * draw.standard_normal((4000, 2))
    read = size * np.exp(1j * turn)
    current = read / loads
    found_z = (read[:, 0] - read[:, 1]) / (current[:, 1] - current[:, 0])
    found_e = read[:, 0] + found_z * current[:, 0]
    parts = np.stack([found_e.real, found_e.imag, found_z.real, found_z.imag])
    assert sigmas(result) == pytest.approx(parts.std(axis=1), rel=0.05)
    assert np.array(result.correlations) == pytest.approx(np.corrcoef(parts), abs=0.04)


MAGNITUDE = "load [ohm],|voltage| [V]"


def magnitudes(e: float, z: complex, *loads: float) -> list[str]:
    return [f"{load!r},{e * load / abs(load + z):.15g}" for load in loads]


def test_magnitudes_give_the_reactance_but_for_its_sign() -> None:
    for x in (4.0, -4.0):
        result = fitted(MAGNITUDE, *magnitudes(10, 3 + 1j * x, 20.0, 5.0, 2.0))
        assert values(result) == pytest.approx([10, 3, 4], rel=1e-9)
        assert result.impedance is None
    assert "sign of the reactance cannot be found" in str(result)
    assert "sign" in result.to_dict()["result"]["impedance_reason"]
    opened = fitted(MAGNITUDE, "open,10", *magnitudes(10, 3 + 4j, 5.0, 2.0))
    assert values(opened) == pytest.approx([10, 3, 4], rel=1e-9)


def test_magnitudes_by_scipy_and_their_uncertainties() -> None:
    loads = np.array([50.0, 20.0, 8.0, 4.0, 2.0])
    noise = np.array([0.01, -0.02, 0.015, 0.005, -0.01])
    v = 10 * loads / abs(loads + 3 + 4j) + noise
    rows = [f"{a!r},{b!r}±0.02" for a, b in zip(loads.tolist(), v.tolist(), strict=True)]
    result = fitted(MAGNITUDE, *rows)
    best, covariance = curve_fit(
        lambda a, e, r, x: e * a / np.sqrt((a + r) ** 2 + x * x), loads, v, p0=[10, 3, 4],
        sigma=np.full(5, 0.02), absolute_sigma=True, xtol=1e-14, ftol=1e-14,
    )  # fmt: skip
    assert values(result) == pytest.approx(best, rel=1e-6)
    assert sigmas(result) == pytest.approx(np.sqrt(np.diag(covariance)), rel=1e-4)


def test_a_reactance_that_is_not_told_from_zero() -> None:
    exact = fitted(MAGNITUDE, *magnitudes(10, 3, 20.0, 5.0, 2.0))
    assert values(exact)[:2] == pytest.approx([10, 3]) and values(exact)[2] == pytest.approx(0)
    rows = [f"{row}±0.01" for row in magnitudes(10, 3 + 0.01j, 20.0, 5.0, 2.0)]
    unsure = fitted(MAGNITUDE, *rows)
    assert unsure.estimates[2].value is None and "not told" in unsure.estimates[2].reason
    assert unsure.to_dict()["result"]["estimates"][2]["value"] is None


def test_conditioning_is_said() -> None:
    close = equiv.loadtest(csv(LV, "10,9.523809523809524", "10.1,9.528301886792453"))
    wide = equiv.loadtest(csv(LV, "10,9.523809523809524", "0.5,5"))
    assert {c.code for c in close.cautions} == {"readings-too-close"} and not wide.cautions
    stated = [fitted(LV, f"10,9.5238±{u}", f"2,8±{u}") for u in ("0.2", "0.002")]
    assert [len(result.cautions) for result in stated] == [1, 0]
    # an error of 1 % in one voltage at a time, in quadrature, by differences
    for result, loads, v in (
        (close, (10, 10.1), (9.523809523809524, 9.528301886792453)),
        (wide, (10, 0.5), (9.523809523809524, 5)),
    ):
        step = 1e-7
        changes = []
        for k in range(2):
            w = [a * (1 + step * (j == k)) for j, a in enumerate(v)]
            i = [a / b for a, b in zip(w, loads, strict=True)]
            changes.append(((w[0] - w[1]) / (i[1] - i[0]) - 0.5) / 0.5 / step)
        assert result.magnified[1] == pytest.approx(math.hypot(*changes), rel=1e-3)
    assert "Conditioning: independent errors of 1 % in the voltages become" in str(close)


def test_a_poor_fit_and_a_negative_resistance_are_said() -> None:
    poor = fitted("voltage [V],current [A]", "10±0.001,0", "9.5±0.001,1", "9.2±0.001,2")
    assert {c.code for c in poor.cautions} == {"poor-fit"}
    active = fitted(VI, "10,1", "11,2")
    assert {c.code for c in active.cautions} == {"resistance-not-positive"}


@pytest.mark.parametrize(
    ("rows", "place", "message"),
    [
        ([LV, "10,5", "10,6"], "r.csv:3:4", "no linear port does that"),
        ([LV, "1,2", "2,4"], "r.csv:3:3", "it is a current source"),
        ([VI, "1,2", "1,2"], "r.csv:3:1", "do not tell EMF and impedance apart"),
        ([MAGNITUDE, "open,10", "10,12", "5,3"], "r.csv:4:3", "square of its reactance"),
        (
            [MAGNITUDE, "10,3.2", "5,1", "2,0.52"],
            "r.csv:4:3",
            "open-circuit voltage would have to be",
        ),
        ([MAGNITUDE, "10,1", "5,3", "5,3"], "r.csv:4:3", "three different loads"),
        ([VI, "1,2±0.1", "2,3±0"], "r.csv:3:1", "no uncertainty at all"),
    ],
)
def test_readings_that_no_port_can_have(rows: list[str], place: str, message: str) -> None:
    with pytest.raises(DoesNotExistError) as error:
        equiv.loadtest(csv(*rows), name="r.csv")
    text = str(error.value)
    assert text.startswith(f"{place}: error[impossible-readings]") and message in text
    assert error.value.exit_status == 5 and "^" in text


@pytest.mark.parametrize(
    ("rows", "place", "message"),
    [
        ([""], "r.csv:1:1", "no header"),
        ([LV], "r.csv:1:1", "no reading follows"),
        ([LV, "1,2"], "r.csv:1:1", "two readings or more"),
        ([MAGNITUDE, "1,2", "2,3"], "r.csv:1:1", "three readings or more"),
        (["load,voltage [V]", "1,2"], "r.csv:1:1", "needs a unit of ohm"),
        (["load [V],voltage [V]", "1,2"], "r.csv:1:1", "found V"),
        (["load [ohm],volts [V]", "1,2"], "r.csv:1:12", "did you mean voltage?"),
        (["load [ohm],load [ohm]", "1,2"], "r.csv:1:12", "two columns"),
        (["load [ohm],± voltage [V]", "1,2"], "r.csv:1:12", "no column of its values"),
        (["load [ohm]", "1", "2"], "r.csv:1:1", "there is no column voltage"),
        (["voltage [V]", "1", "2"], "r.csv:1:1", "either load or current"),
        ([VI + ",load [ohm]", "1,2,3", "2,3,4"], "r.csv:1:1", "not both"),
        ([MAGNITUDE + ",current [A]", "1,2,3"], "r.csv:1:1", "only load is used"),
        ([VI + ",voltage angle [deg]", "1,2,3"], "r.csv:1:1", "both need an angle"),
        ([LV, "1;2,3,4"], "r.csv:2:1", "found 3 cells"),
        ([LV, "# a remark", "1,2", "", "3,x"], "r.csv:5:3", "expected a number"),
        ([LV, "1,2", " 3 , "], "r.csv:3:6", "there is no voltage here"),
        ([LV, "1,2±-1"], "r.csv:2:5", "from zero up"),
        ([LV, "1,2±0.1±0.2"], "r.csv:2:3", "one ±"),
        ([LV, "1,nan", "2,3"], "r.csv:2:3", "expected a number"),
        ([LV, "1,1e999", "2,3"], "r.csv:2:3", "1e300"),
        ([LV, "1,?", "2,3"], "r.csv:2:3", "expected a number"),
        ([LV, "1,2 A", "2,3"], "r.csv:2:3", "expected a value in V"),
        ([LV, "-1,2", "2,3"], "r.csv:2:1", "not negative"),
        ([LV, "1,2", "0,3"], "r.csv:3:1", "a short has no voltage"),
        ([LV, "1,2", "short,3"], "r.csv:3:1", "a short has no voltage"),
        ([LV, "1,2", "3,0"], "r.csv:3:3", "no voltage across a load"),
        ([LV, "1,2±0.1", "3,2.5"], "r.csv:3:3", "states no uncertainty"),
        (
            [LV.replace("voltage", "± load [ohm],voltage"), "1,2±1,3"],
            "r.csv:2:4",
            "±1 is not a unit",
        ),
        ([MAGNITUDE, "1,-2", "2,3", "3,4"], "r.csv:2:3", "over zero"),
        ([MAGNITUDE, "1+1j,2", "2,3", "3,4"], "r.csv:2:1", "need resistive loads"),
        ([LV, "1,2\x1b[31m", "2,3"], "r.csv:2:4", "control"),
    ],
)
def test_texts_that_are_no_readings(rows: list[str], place: str, message: str) -> None:
    with pytest.raises(NetworkFileError) as error:
        equiv.loadtest(csv(*rows), name="r.csv")
    text = str(error.value)
    assert text.startswith(f"{place}: error["), text
    assert message in text and "^" in text and "\x1b" not in text
    assert error.value.exit_status == 3


def test_every_mistake_is_told_at_once() -> None:
    with pytest.raises(NetworkFileError) as error:
        equiv.loadtest(csv(LV, "x,2", "3,y", "1,2,3"))
    assert len(error.value.diagnostics) == 3


@pytest.mark.parametrize("separator", [",", ";", "\t"])
def test_separators_quotes_and_remarks(separator: str) -> None:
    lines = [
        ["remark", '"load [kΩ]"', "Voltage [V]"],
        ['"a ""b"""', '"1±1%"', "9 ± 0.1"],
        ["-", "open", "10±0.1"],
    ]
    text = "\ufeff# title\r\n" + "\r\n".join(separator.join(line) for line in lines) + "\r\n"
    found = equiv.loadtest(text)
    assert values(found) == pytest.approx([10, 1000 / 9])


def test_every_form_is_drawn_and_nothing_acts_as_code() -> None:
    result = equiv.loadtest(csv(LV, "10,5±0.1", "1,3±0.1", "5,4.5±0.1"), name="=1+1\x1b[2J<b>.csv")
    for form in ("table", "csv", "markdown", "latex", "html"):
        drawn = result.render(form)
        assert "\x1b" not in drawn and "internal resistance" in drawn
    data = result.to_dict()
    assert data["schema"] == "equiv/loadtest/1" and data["result"]["degrees_of_freedom"] == 1
