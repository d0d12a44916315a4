"""Moist-air properties against CoolProp's humid air, on a grid: computed, a cross-check and not a source.

The grid is -30..50 degC, 60..106 kPa, 0..100 % relative humidity, over which the program claims its
accuracy. CoolProp's humid air is a real-gas formulation (Herrmann, Kretzschmar and Gatley 2009). A second
cross-check is psychrolib, whose perfect-gas formulas share Hyland and Wexler's saturation pressure.
"""

from __future__ import annotations

from typing import NamedTuple

import numpy as np
import psychrolib
import pytest
from CoolProp.CoolProp import HAPropsSI, PropsSI
from published import checks, water_reference
from published.chart import SEA_LEVEL
from published.checks import Recorder, validates

from estimator import moist_air
from estimator.moist_air import Array


class Grid(NamedTuple):
    """Points of the claimed range; ``w`` is CoolProp's humidity ratio there."""

    t: Array
    p: Array
    rh: Array
    w: Array


def humid_air(output: str, t: Array, name: str, value: Array | float, p: Array | float) -> Array:
    """CoolProp's humid air, element by element, from degC, the property ``name`` and Pa."""
    return np.asarray(HAPropsSI(output, "T", t + 273.15, name, value, "P", p), dtype=np.float64)


@pytest.fixture(scope="module")
def grid() -> Grid:
    axes = (
        np.arange(-30.0, 50.1, 2.5),
        np.linspace(60e3, 106e3, 5),
        np.array([0.0, 0.05, 0.1, 0.25, 0.5, 0.75, 0.9, 1.0]),
    )
    t, p, rh = (axis.ravel() for axis in np.meshgrid(*axes, indexing="ij"))
    w = humid_air("W", t, "R", rh, p)
    assert np.isfinite(w).all()
    return Grid(t, p, rh, w)


@validates("Humidity ratio over the claimed range", checks.COOLPROP)
def test_humidity_ratio(grid: Grid, check: Recorder) -> None:
    """Within 0.05 %, the claim; the largest difference is at 15 degC and 106 kPa, saturated."""
    found = moist_air.humidity_ratio_from_relative_humidity(grid.t, grid.rh, grid.p)
    check.largest("humidity ratio", found, grid.w, "kg/kg", rel=5e-4)


@validates("Relative humidity over the claimed range", checks.COOLPROP)
def test_relative_humidity(grid: Grid, check: Recorder) -> None:
    """The same comparison backwards, 0.05 %."""
    found = moist_air.relative_humidity(grid.t, grid.w, grid.p)
    check.largest("relative humidity", found, grid.rh, "1", rel=5e-4)


@validates("Enthalpy over the claimed range", checks.COOLPROP)
def test_enthalpy(grid: Grid, check: Recorder) -> None:
    """Within 0.12 kJ/kg, the claim, up to 50 degC saturated at 60 kPa (160 g/kg).

    In the range the fit was made for, up to 120 g/kg, 0.0075 kJ/kg.
    """
    expected = humid_air("H", grid.t, "W", grid.w, grid.p) / 1000.0
    found = moist_air.enthalpy(grid.t, grid.w, grid.p)
    check.largest("the whole range", found, expected, "kJ/kg", within=0.12)
    fitted = grid.w <= 0.12
    check.largest("up to 120 g/kg", found[fitted], expected[fitted], "kJ/kg", within=0.0075)


@validates("Enthalpy of saturated air at all pressures", checks.COOLPROP)
def test_enthalpy_of_saturated_air(grid: Grid, check: Recorder) -> None:
    """With the program's own humidity ratio as well, up to 120 g/kg: 0.12 kJ/kg.

    That is nearly all humidity ratio: 0.03 % of 119 g/kg, at 45 degC and 60 kPa, carries 0.09 kJ/kg.
    """
    saturated = (grid.rh == 1.0) & (grid.w <= 0.12)
    t, p, w = grid.t[saturated], grid.p[saturated], grid.w[saturated]
    expected = humid_air("H", t, "W", w, p) / 1000.0
    found = moist_air.enthalpy(t, moist_air.saturation_humidity_ratio(t, p), p)
    check.largest("enthalpy, saturated", found, expected, "kJ/kg", within=0.12)


@validates("Specific volume over the claimed range", checks.COOLPROP)
def test_specific_volume(grid: Grid, check: Recorder) -> None:
    """Within 0.1 % from -20 degC up and to 120 g/kg, 0.12 % over the whole grid.

    The program's is a perfect gas. Cold dense air is further from one, 0.114 % at -30 degC and 106 kPa, and
    so is very moist air, 0.103 % at 50 degC and 60 kPa, saturated.
    """
    expected = humid_air("V", grid.t, "W", grid.w, grid.p)
    found = moist_air.specific_volume(grid.t, grid.w, grid.p)
    usual = (grid.t >= -20.0) & (grid.w <= 0.12)
    check.largest("from -20 degC and to 120 g/kg", found[usual], expected[usual], "m3/kg", rel=1.0e-3)
    check.largest("the whole range", found, expected, "m3/kg", rel=1.2e-3)


@validates("Dew point over the claimed range", checks.COOLPROP)
def test_dew_point(grid: Grid, check: Recorder) -> None:
    """Within 0.01 K: 0.04 % of humidity ratio is 0.006 K."""
    moist = grid.rh > 0.0
    t, p, w = grid.t[moist], grid.p[moist], grid.w[moist]
    expected = humid_air("D", t, "W", w, p) - 273.15
    check.largest("dew point", moist_air.dew_point(w, p), expected, "K", within=0.01)


@validates("Wet bulb over the claimed range", checks.COOLPROP)
def test_wet_bulb(grid: Grid, check: Recorder) -> None:
    """Within 0.01 K where both find a solution over the same phase.

    From a little below 0 degC CoolProp returns the wet bulb over ice although there is one over liquid
    water too, which is the one the program returns; those points have a test of their own.
    """
    expected = humid_air("B", grid.t, "W", grid.w, grid.p) - 273.15
    found = moist_air.wet_bulb(grid.t, grid.w, grid.p)
    same = (expected < 0.01) == (found < 0.01)
    assert same.mean() > 0.98
    check.largest("wet bulb", found[same], expected[same], "K", within=0.01)


@validates("Humidity ratio from wet bulb over the claimed range", checks.COOLPROP)
def test_humidity_ratio_from_wet_bulb(grid: Grid, check: Recorder) -> None:
    """CoolProp's wet bulbs, over ice and over water, back to the humidity ratio they belong to.

    Over water 0.05 % of what the air can hold, the claim. Over ice, where that is little, 0.006 g/kg: 0.04 %
    of 4 g/kg at the wet bulb, and the enthalpy fit at both ends, 0.0075 kJ/kg each over 2830 kJ/kg.
    """
    wet_bulb = humid_air("B", grid.t, "W", grid.w, grid.p) - 273.15
    found = moist_air.humidity_ratio_from_wet_bulb(grid.t, wet_bulb, grid.p)
    ice = wet_bulb < 0.01
    most = humid_air("W", grid.t, "R", 1.0, grid.p)
    share, expected = found / most, grid.w / most
    check.largest("over water, share of saturation", share[~ice], expected[~ice], "1", within=5e-4)
    check.largest("over ice", 1000.0 * found[ice], 1000.0 * grid.w[ice], "g/kg", within=6e-3)


@validates("Wet bulb where two solutions exist", checks.COOLPROP)
def test_wet_bulb_where_two_solutions_exist(grid: Grid, check: Recorder) -> None:
    """The program's wet bulb over water satisfies its definition with CoolProp's properties.

    To 0.03 kJ/kg: 0.035 % of the water evaporated, 4 g/kg at most, and the fits; 0.015 K.
    """
    expected = humid_air("B", grid.t, "W", grid.w, grid.p) - 273.15
    found = moist_air.wet_bulb(grid.t, grid.w, grid.p)
    two = np.flatnonzero((expected < 0.01) & (found >= 0.01))
    assert two.size > 0
    for i in two:
        kelvin, p, w = found[i] + 273.15, grid.p[i], grid.w[i]
        saturated = HAPropsSI("W", "T", kelvin, "R", 1.0, "P", p)
        h_s = HAPropsSI("H", "T", kelvin, "R", 1.0, "P", p) / 1000.0
        h = HAPropsSI("H", "T", grid.t[i] + 273.15, "W", w, "P", p) / 1000.0
        water = PropsSI("H", "T", kelvin, "Q", 0, "Water") / 1000.0
        check.largest("enthalpy", h + (saturated - w) * water, h_s, "kJ/kg", within=0.03)


@validates("Enhancement factor over water", checks.COOLPROP)
@pytest.mark.parametrize("p", [60e3, 80e3, SEA_LEVEL, 106e3])
@pytest.mark.parametrize("t", [0.01, 1.0, 10.0, 20.0, 30.0, 40.0, 50.0])
def test_enhancement_factor_over_water(t: float, p: float, check: Recorder) -> None:
    """Partial pressure of water in saturated air over its pure saturation pressure, both CoolProp's.

    Hardy's fit (from memory) and the real-gas formulation differ by 0.03 %, one part in twelve of f - 1.
    """
    kelvin = t + 273.15
    partial = HAPropsSI("P_w", "T", kelvin + 1e-9, "R", 1.0, "P", p)
    expected = partial / PropsSI("P", "T", kelvin, "Q", 0, "Water")
    check.largest(f"{p / 1000.0:g} kPa", moist_air.enhancement_factor(t, p), expected, "1", within=3e-4)


@validates("Enhancement factor over ice", checks.COOLPROP)
@pytest.mark.parametrize("p", [60e3, 80e3, SEA_LEVEL, 106e3])
@pytest.mark.parametrize("t", [-45.0, -30.0, -20.0, -10.0, -5.0, -0.1])
def test_enhancement_factor_over_ice(t: float, p: float, check: Recorder) -> None:
    """The same over ice, with IAPWS R14-08 for the pure substance. Tolerance 0.09 %.

    Hardy's set over ice (from memory), less the 0.013 % by which the program joins it to the one over water,
    lies up to 0.08 % below at -45 degC; what matters is the product with the saturation pressure, which
    errs the other way and is tested next.
    """
    partial = HAPropsSI("P_w", "T", t + 273.15, "R", 1.0, "P", p)
    expected = partial / water_reference.sublimation_pressure(t)
    check.largest(f"{p / 1000.0:g} kPa", moist_air.enhancement_factor(t, p), expected, "1", within=9e-4)


@validates("Saturation humidity ratio over ice and water", checks.COOLPROP)
@pytest.mark.parametrize("p", [60e3, 80e3, SEA_LEVEL, 106e3])
def test_saturation_over_ice_and_water(p: float, check: Recorder) -> None:
    """Factor times pressure, as humidity ratio: within 0.04 % of CoolProp from -30 degC up, 0.05 % below."""
    t = np.arange(-45.0, 60.1, 0.5)
    expected = humid_air("W", t, "R", 1.0, p)
    found = moist_air.saturation_humidity_ratio(t, p)
    usual = t >= -30.0
    check.largest("-30..60 degC", found[usual], expected[usual], "kg/kg", rel=4e-4)
    check.largest("-45..60 degC", found, expected, "kg/kg", rel=5e-4)


@validates("Enthalpy of liquid water, the fit", checks.COOLPROP)
def test_liquid_water(check: Recorder) -> None:
    """Within 0.004 kJ/kg of IAPWS-95 over 0.01..60 degC, as declared."""
    t = np.linspace(0.01, 60.0, 241)
    expected = np.asarray(PropsSI("H", "T", t + 273.15, "Q", 0, "Water")) / 1000.0
    check.largest("0.01..60 degC", moist_air.liquid_water_enthalpy(t), expected, "kJ/kg", within=0.004)


@pytest.fixture(scope="module")
def metric() -> None:
    """psychrolib keeps its unit system as global state, and compiles itself anew each time it is set."""
    psychrolib.SetUnitSystem(psychrolib.SI)


@pytest.mark.usefixtures("metric")
@validates("Saturation pressure is Hyland and Wexler's", checks.PSYCHROLIB)
@pytest.mark.parametrize("t", [-60.0, -30.0, -5.0, 0.0, 0.02, 10.0, 35.0, 60.0])
def test_saturation_pressure_is_hyland_and_wexler(t: float, check: Recorder) -> None:
    """psychrolib holds the same two equations: every coefficient agrees, to rounding."""
    expected = psychrolib.GetSatVapPres(t)
    check.largest("-60..60 degC", moist_air.saturation_pressure(t), expected, "Pa", rel=1e-12)


@pytest.mark.usefixtures("metric")
@validates("Why the perfect gas is too coarse", checks.APART)
def test_perfect_gas_is_too_coarse(check: Recorder) -> None:
    """By how much psychrolib's saturated humidity ratio, without the enhancement factor, is low.

    Figures computed with CoolProp, a cross-check; 0.05 %, the accuracy of the program's own.
    """
    for t, low in ((10.0, 0.42), (50.0, 0.62)):
        perfect = psychrolib.GetSatHumRatio(t, SEA_LEVEL)
        found = 1.0 - perfect / moist_air.saturation_humidity_ratio(t, SEA_LEVEL)
        check(f"{t:g} degC", 100.0 * found, low, "% of W", within=0.05)


@pytest.mark.usefixtures("metric")
@validates("Wet bulb and dew point by perfect-gas formulas", checks.PSYCHROLIB)
@pytest.mark.parametrize("t", [-15.0, 5.0, 20.0, 35.0, 45.0])
@pytest.mark.parametrize("rh", [0.2, 0.6, 0.95])
def test_wet_bulb_by_perfect_gas(t: float, rh: float, check: Recorder) -> None:
    """psychrolib's wet bulb at the same relative humidity: within 0.03 K, dew point within 0.02 K.

    At equal relative humidity the enhancement factor acts on both sides and nearly cancels: what remains is
    its change between dry bulb and dew point, 0.1 % or 0.016 K at 45 degC 20 %.
    """
    w = moist_air.humidity_ratio_from_relative_humidity(t, rh, SEA_LEVEL)
    wet_bulb = psychrolib.GetTWetBulbFromRelHum(t, rh, SEA_LEVEL)
    check.largest("wet bulb", moist_air.wet_bulb(t, w, SEA_LEVEL), wet_bulb, "K", within=0.03)
    dew_point = psychrolib.GetTDewPointFromRelHum(t, rh)
    check.largest("dew point", moist_air.dew_point(w, SEA_LEVEL), dew_point, "K", within=0.02)


@pytest.mark.usefixtures("metric")
@validates("Standard atmosphere by another form of its equation", checks.PSYCHROLIB)
@pytest.mark.parametrize("elevation", [-500.0, 0.0, 1600.0, 4000.0])
def test_standard_atmosphere(elevation: float, check: Recorder) -> None:
    """psychrolib's form of the same equation, to the digits of its exponent."""
    expected = psychrolib.GetStandardAtmPressure(elevation)
    check.largest("-500..4000 m", moist_air.standard_atmosphere(elevation), expected, "Pa", rel=1e-6)
