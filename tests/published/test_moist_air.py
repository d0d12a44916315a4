"""Moist-air properties against published tables.

The tables are those of the ASHRAE Handbook Fundamentals 2021 (SI), chapter 1, unless a test says otherwise.
They come from a real-gas formulation; the program's saturation is Hyland and Wexler's with an enhancement
factor, which is 0.02 to 0.04 % below them in humidity ratio. That known disagreement, not the digits
printed, is what the tolerances allow for.
"""

from __future__ import annotations

import numpy as np
import pytest
from published import water_reference
from published.chart import SEA_LEVEL, humidity_ratio_from_wet_bulb

from estimator import moist_air

GRAINS_PER_POUND = 7000.0

# t degC, W_s kg/kg, h_s kJ/kg: table 2
SATURATED_AIR = [
    (-20, 0.0006373, -18.542),
    (-10, 0.0016062, -6.0705),
    (0, 0.0037900, 9.4744),
    (5, 0.0054247, 18.639),
    (10, 0.0076627, 29.354),
    (15, 0.010694, 42.114),
    (20, 0.014761, 57.558),
    (25, 0.020173, 76.503),
    (30, 0.027333, 100.01),
    (35, 0.036760, 129.46),
    (40, 0.049145, 166.68),
    (45, 0.065416, 214.17),
    (50, 0.086863, 275.34),
]

# t degC, p_ws kPa: table 3
SATURATION_PRESSURE = [
    (0, 0.6112),
    (5, 0.8726),
    (10, 1.2282),
    (15, 1.7057),
    (20, 2.3392),
    (25, 3.1697),
    (30, 4.2467),
    (35, 5.6286),
    (40, 7.3844),
    (45, 9.5944),
    (50, 12.3513),
]


@pytest.mark.parametrize(("t", "humidity_ratio"), [row[:2] for row in SATURATED_AIR])
def test_saturation_humidity_ratio(t: float, humidity_ratio: float) -> None:
    """Table 2. Tolerance 0.05 %, the accuracy this program claims; the largest difference is 0.040 %."""
    found = moist_air.saturation_humidity_ratio(t, SEA_LEVEL)
    assert found == pytest.approx(humidity_ratio, rel=5e-4)


@pytest.mark.parametrize(("t", "humidity_ratio", "enthalpy"), SATURATED_AIR)
def test_enthalpy_of_saturated_air(t: float, humidity_ratio: float, enthalpy: float) -> None:
    """Table 2, both ways of asking.

    With the table's own humidity ratio: 0.025 kJ/kg, the table's last digit (0.005) and its largest
    difference from CoolProp (0.013) with the fit's (0.0075). With the program's own: 0.05 kJ/kg, because
    0.03 % of the water at 50 degC carries 0.06 kJ/kg.
    """
    own = moist_air.saturation_humidity_ratio(t, SEA_LEVEL)
    assert moist_air.enthalpy(t, humidity_ratio, SEA_LEVEL) == pytest.approx(enthalpy, abs=0.025)
    assert moist_air.enthalpy(t, own, SEA_LEVEL) == pytest.approx(enthalpy, abs=0.05)


@pytest.mark.parametrize(("t", "humidity_ratio", "enthalpy"), SATURATED_AIR)
def test_inverses_on_saturated_air(t: float, humidity_ratio: float, enthalpy: float) -> None:
    """Table 2 read backwards: 0.05 % of humidity ratio is 0.007 K at most, 0.05 kJ/kg is 0.03 K."""
    assert moist_air.dew_point(humidity_ratio, SEA_LEVEL) == pytest.approx(t, abs=0.01)
    assert moist_air.saturated_from_enthalpy(enthalpy, SEA_LEVEL) == pytest.approx(t, abs=0.01)
    found = moist_air.dry_bulb_from_enthalpy(enthalpy, humidity_ratio, SEA_LEVEL)
    assert found == pytest.approx(t, abs=0.03)


@pytest.mark.parametrize(("t", "kilopascal"), SATURATION_PRESSURE)
def test_saturation_pressure(t: float, kilopascal: float) -> None:
    """Table 3. Tolerance 0.02 %: the table follows IAPWS, and Hyland and Wexler lie 0.017 % below it."""
    assert moist_air.saturation_pressure(t) / 1000.0 == pytest.approx(kilopascal, rel=2e-4)


@pytest.mark.parametrize("t", np.arange(-45.0, 0.01, 5.0))
def test_saturation_pressure_over_ice(t: float) -> None:
    """IAPWS R14-08 (coefficients from memory, checked). Tolerance 0.035 %: Hyland and Wexler's older equation
    lies above it, by 0.033 % at -47 degC and nothing at 0 degC.
    """
    found = float(moist_air.saturation_pressure(t))
    assert found == pytest.approx(water_reference.sublimation_pressure(float(t)), rel=3.5e-4)


def test_liquid_water() -> None:
    """Table 3: h_f 42.02 kJ/kg at 10 degC, to the last digit printed."""
    assert moist_air.liquid_water_enthalpy(10.0) == pytest.approx(42.02, abs=0.005)
    assert moist_air.water_enthalpy(10.0) == moist_air.liquid_water_enthalpy(10.0)


def test_vapour_in_air() -> None:
    """Table 3: h_g 2555.58 kJ/kg at 30 degC.

    What a little vapour adds to dry air at sea level is the nearest thing the module has. Tolerance 0.02 %:
    vapour among air molecules and saturated vapour alone differ by their interaction terms, 0.3 kJ/kg here.
    """
    dry = moist_air.enthalpy(30.0, 0.0, SEA_LEVEL)
    per_kg = (moist_air.enthalpy(30.0, 1e-4, SEA_LEVEL) - dry) / 1e-4
    assert per_kg == pytest.approx(2555.58, rel=2e-4)


@pytest.mark.parametrize("t", [-40.0, -30.0, -20.0, -10.0, -5.0, 0.0])
def test_ice(t: float) -> None:
    """IAPWS R10-06 (from memory, checked against its printed values). Tolerance 0.1 kJ/kg, 0.03 %.

    The program has a fit of degree 2, declared within 0.003 kJ/kg.
    """
    expected = water_reference.ice_enthalpy(t)
    assert moist_air.ice_enthalpy(t) == pytest.approx(expected, abs=0.003)
    assert moist_air.water_enthalpy(t) == moist_air.ice_enthalpy(t)


def test_heat_of_melting() -> None:
    """IAPWS R10-06: 333.44 kJ/kg at the triple point (from memory). Tolerance 0.03 kJ/kg, as above."""
    found = moist_air.liquid_water_enthalpy(0.01) - moist_air.ice_enthalpy(0.01)
    assert found == pytest.approx(333.44, abs=0.03)


@pytest.mark.parametrize(
    ("elevation", "kilopascal"),
    [
        (-500, 107.478),
        (500, 95.461),
        (1000, 89.875),
        (1500, 84.556),
        (2000, 79.495),
        (3000, 70.108),
        (5000, 54.020),
    ],
)
def test_standard_atmosphere(elevation: float, kilopascal: float) -> None:
    """Table 1, to the last digit printed."""
    assert moist_air.standard_atmosphere(elevation) / 1000.0 == pytest.approx(kilopascal, abs=5e-4)


@pytest.mark.parametrize(
    ("p", "enthalpy", "grams", "volume"),
    [(SEA_LEVEL, 99.5, 23.0, 0.920), (84_556.0, 114.1, 28.6, 1.111)],
    ids=["sea level", "1500 m"],
)
def test_chart_states(p: float, enthalpy: float, grams: float, volume: float) -> None:
    """Charts 1 and 6: 40 degC dry bulb, 30 degC wet bulb.

    Tolerance: half a graduation of the chart, 0.5 kJ/kg and 0.1 g/kg; volume 0.2 %, its last digit and the
    perfect gas.
    """
    w = humidity_ratio_from_wet_bulb(40.0, 30.0, p)
    assert 1000.0 * w == pytest.approx(grams, abs=0.1)
    assert moist_air.enthalpy(40.0, w, p) == pytest.approx(enthalpy, abs=0.5)
    assert moist_air.specific_volume(40.0, w, p) == pytest.approx(volume, rel=2e-3)


def test_worked_state() -> None:
    """Section 10, state from 40 degC dry bulb and 20 degC wet bulb, read off a chart.

    Tolerances are those of the reading: 0.1 g/kg, 0.3 kJ/kg, 0.6 K of dew point (the chart's curves are
    steep there), 0.5 points of relative humidity, 0.001 m3/kg.
    """
    w = humidity_ratio_from_wet_bulb(40.0, 20.0, SEA_LEVEL)
    assert 1000.0 * w == pytest.approx(6.5, abs=0.1)
    assert moist_air.enthalpy(40.0, w, SEA_LEVEL) == pytest.approx(56.7, abs=0.3)
    assert moist_air.dew_point(w, SEA_LEVEL) == pytest.approx(7.0, abs=0.6)
    assert 100.0 * moist_air.relative_humidity(40.0, w, SEA_LEVEL) == pytest.approx(14.0, abs=0.5)
    assert moist_air.specific_volume(40.0, w, SEA_LEVEL) == pytest.approx(0.896, abs=0.001)


def test_dew_point_limit_in_grains() -> None:
    """60 degF dew point holds 77.3 gr/lb by the perfect-gas formula (a cross-check, computed).

    0.5 %: real air holds 0.4 % more, the enhancement factor.
    """
    w = moist_air.saturation_humidity_ratio((60.0 - 32.0) / 1.8, SEA_LEVEL)
    assert GRAINS_PER_POUND * w == pytest.approx(77.3, rel=5e-3)
