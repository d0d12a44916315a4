"""Moist-air properties against published tables.

The tables are those of the ASHRAE Handbook Fundamentals 2021 (SI), chapter 1, unless a test says otherwise.
They come from a real-gas formulation; the program's saturation is Hyland and Wexler's with an enhancement
factor, which is 0.02 to 0.04 % below them in humidity ratio. That known disagreement, not the digits
printed, is what the tolerances allow for.
"""

from __future__ import annotations

import numpy as np
import pytest
from published import checks, water_reference
from published.chart import SEA_LEVEL
from published.checks import Recorder, validates

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


@validates("Humidity ratio of saturated air", checks.TABLE_2)
@pytest.mark.parametrize(("t", "humidity_ratio"), [row[:2] for row in SATURATED_AIR])
def test_saturation_humidity_ratio(t: float, humidity_ratio: float, check: Recorder) -> None:
    """Tolerance 0.05 %, the accuracy this program claims."""
    found = moist_air.saturation_humidity_ratio(t, SEA_LEVEL)
    check(f"{t} degC", found, humidity_ratio, "kg/kg", rel=5e-4)


@validates("Enthalpy of saturated air", checks.TABLE_2)
@pytest.mark.parametrize(("t", "humidity_ratio", "enthalpy"), SATURATED_AIR)
def test_enthalpy_of_saturated_air(t: float, humidity_ratio: float, enthalpy: float, check: Recorder) -> None:
    """Both ways of asking.

    With the table's own humidity ratio: 0.025 kJ/kg, the table's last digit (0.005) and its largest
    difference from CoolProp (0.013) with the fit's (0.0075). With the program's own: 0.05 kJ/kg, because
    0.03 % of the water at 50 degC carries 0.06 kJ/kg.
    """
    own = moist_air.saturation_humidity_ratio(t, SEA_LEVEL)
    check(
        f"{t} degC, the table's humidity ratio",
        moist_air.enthalpy(t, humidity_ratio, SEA_LEVEL),
        enthalpy,
        "kJ/kg",
        within=0.025,
    )
    check(
        f"{t} degC, the program's own", moist_air.enthalpy(t, own, SEA_LEVEL), enthalpy, "kJ/kg", within=0.05
    )


@validates("The table of saturated air read backwards", checks.TABLE_2)
@pytest.mark.parametrize(("t", "humidity_ratio", "enthalpy"), SATURATED_AIR)
def test_inverses_on_saturated_air(t: float, humidity_ratio: float, enthalpy: float, check: Recorder) -> None:
    """0.05 % of humidity ratio is 0.007 K at most, 0.05 kJ/kg is 0.03 K."""
    check.largest("dew point", moist_air.dew_point(humidity_ratio, SEA_LEVEL), t, "K", within=0.01)
    saturated = moist_air.saturated_from_enthalpy(enthalpy, SEA_LEVEL)
    check.largest("saturated state of an enthalpy", saturated, t, "K", within=0.01)
    found = moist_air.dry_bulb_from_enthalpy(enthalpy, humidity_ratio, SEA_LEVEL)
    check.largest("dry bulb from enthalpy and humidity ratio", found, t, "K", within=0.03)


@validates("Saturation pressure over water", checks.TABLE_3)
@pytest.mark.parametrize(("t", "kilopascal"), SATURATION_PRESSURE)
def test_saturation_pressure(t: float, kilopascal: float, check: Recorder) -> None:
    """Tolerance 0.02 %: the table follows IAPWS, and Hyland and Wexler lie 0.017 % below it."""
    check(f"{t} degC", moist_air.saturation_pressure(t) / 1000.0, kilopascal, "kPa", rel=2e-4)


@validates("Saturation pressure over ice", checks.SUBLIMATION)
@pytest.mark.parametrize("t", np.arange(-45.0, 0.01, 5.0))
def test_saturation_pressure_over_ice(t: float, check: Recorder) -> None:
    """Tolerance 0.035 %: Hyland and Wexler's older equation lies above it, by 0.033 % at -47 degC and nothing
    at 0 degC.
    """
    expected = water_reference.sublimation_pressure(float(t))
    check(f"{t:g} degC", moist_air.saturation_pressure(t), expected, "Pa", rel=3.5e-4)


@validates("Enthalpy of liquid water", checks.TABLE_3)
def test_liquid_water(check: Recorder) -> None:
    """To the last digit printed."""
    check("10 degC", moist_air.liquid_water_enthalpy(10.0), 42.02, "kJ/kg", within=0.005)
    assert moist_air.water_enthalpy(10.0) == moist_air.liquid_water_enthalpy(10.0)


@validates("Enthalpy of vapour in air", checks.TABLE_3)
def test_vapour_in_air(check: Recorder) -> None:
    """The table has saturated vapour alone.

    What a little vapour adds to dry air at sea level is the nearest thing the module has. Tolerance 0.02 %:
    vapour among air molecules and saturated vapour alone differ by their interaction terms, 0.3 kJ/kg here.
    """
    dry = moist_air.enthalpy(30.0, 0.0, SEA_LEVEL)
    per_kg = (moist_air.enthalpy(30.0, 1e-4, SEA_LEVEL) - dry) / 1e-4
    check("30 degC", per_kg, 2555.58, "kJ/kg", rel=2e-4)


@validates("Enthalpy of ice", checks.ICE)
@pytest.mark.parametrize("t", [-40.0, -30.0, -20.0, -10.0, -5.0, 0.0])
def test_ice(t: float, check: Recorder) -> None:
    """The program has a fit of degree 2, declared within 0.003 kJ/kg."""
    check(f"{t:g} degC", moist_air.ice_enthalpy(t), water_reference.ice_enthalpy(t), "kJ/kg", within=0.003)
    assert moist_air.water_enthalpy(t) == moist_air.ice_enthalpy(t)


@validates("Heat of melting", checks.ICE)
def test_heat_of_melting(check: Recorder) -> None:
    """At the triple point. Tolerance 0.03 kJ/kg, the fits of liquid and of ice and the last digit."""
    found = moist_air.liquid_water_enthalpy(0.01) - moist_air.ice_enthalpy(0.01)
    check("0.01 degC", found, 333.44, "kJ/kg", within=0.03)


@validates("Standard atmosphere", checks.TABLE_1)
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
def test_standard_atmosphere(elevation: float, kilopascal: float, check: Recorder) -> None:
    """To the last digit printed."""
    found = moist_air.standard_atmosphere(elevation) / 1000.0
    check(f"{elevation} m", found, kilopascal, "kPa", within=5e-4)


@validates("States on two charts", checks.CHARTS)
@pytest.mark.parametrize(
    ("place", "p", "enthalpy", "grams", "volume"),
    [("sea level", SEA_LEVEL, 99.5, 23.0, 0.920), ("1500 m", 84_556.0, 114.1, 28.6, 1.111)],
)
def test_chart_states(
    place: str, p: float, enthalpy: float, grams: float, volume: float, check: Recorder
) -> None:
    """40 degC dry bulb, 30 degC wet bulb.

    Tolerance: half a graduation of the chart, 0.5 kJ/kg and 0.1 g/kg; volume 0.2 %, its last digit and the
    perfect gas.
    """
    w = moist_air.humidity_ratio_from_wet_bulb(40.0, 30.0, p)
    check(f"humidity ratio, {place}", 1000.0 * w, grams, "g/kg", within=0.1)
    check(f"enthalpy, {place}", moist_air.enthalpy(40.0, w, p), enthalpy, "kJ/kg", within=0.5)
    check(f"specific volume, {place}", moist_air.specific_volume(40.0, w, p), volume, "m3/kg", rel=2e-3)


@validates("A state from dry and wet bulb", checks.EXAMPLES)
def test_worked_state(check: Recorder) -> None:
    """40 degC dry bulb and 20 degC wet bulb, read off a chart.

    Tolerances are those of the reading: 0.1 g/kg, 0.3 kJ/kg, 0.6 K of dew point (the chart's curves are
    steep there), 0.5 points of relative humidity, 0.001 m3/kg.
    """
    w = moist_air.humidity_ratio_from_wet_bulb(40.0, 20.0, SEA_LEVEL)
    check("humidity ratio", 1000.0 * w, 6.5, "g/kg", within=0.1)
    check("enthalpy", moist_air.enthalpy(40.0, w, SEA_LEVEL), 56.7, "kJ/kg", within=0.3)
    check("dew point", moist_air.dew_point(w, SEA_LEVEL), 7.0, "degC", within=0.6)
    share = 100.0 * moist_air.relative_humidity(40.0, w, SEA_LEVEL)
    check("relative humidity", share, 14.0, "%", within=0.5)
    check("specific volume", moist_air.specific_volume(40.0, w, SEA_LEVEL), 0.896, "m3/kg", within=0.001)


@validates("A dew-point limit in grains", checks.APART)
def test_dew_point_limit_in_grains(check: Recorder) -> None:
    """A dew point of 60 degF, the expected figure by the perfect-gas formula.

    0.5 %: real air holds 0.4 % more, the enhancement factor.
    """
    w = moist_air.saturation_humidity_ratio((60.0 - 32.0) / 1.8, SEA_LEVEL)
    check("60 degF dew point", GRAINS_PER_POUND * w, 77.3, "gr/lb", rel=5e-3)
