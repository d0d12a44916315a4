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
from published import water_reference
from published.chart import SEA_LEVEL

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


def test_humidity_ratio(grid: Grid) -> None:
    """Within 0.05 %, the claim; the largest difference is 0.037 % (15 degC and 106 kPa, saturated)."""
    found = moist_air.humidity_ratio_from_relative_humidity(grid.t, grid.rh, grid.p)
    np.testing.assert_allclose(found, grid.w, rtol=5e-4, atol=0.0)


def test_relative_humidity(grid: Grid) -> None:
    """The same comparison backwards, 0.05 %."""
    found = moist_air.relative_humidity(grid.t, grid.w, grid.p)
    np.testing.assert_allclose(found, grid.rh, rtol=5e-4, atol=0.0)


def test_enthalpy(grid: Grid) -> None:
    """Within 0.12 kJ/kg, the claim, up to 50 degC saturated at 60 kPa (160 g/kg); 0.033 there.

    In the range the fit was made for, up to 120 g/kg, 0.0075 kJ/kg; the largest difference is 0.0071.
    """
    expected = humid_air("H", grid.t, "W", grid.w, grid.p) / 1000.0
    found = moist_air.enthalpy(grid.t, grid.w, grid.p)
    np.testing.assert_allclose(found, expected, rtol=0.0, atol=0.12)
    fitted = grid.w <= 0.12
    np.testing.assert_allclose(found[fitted], expected[fitted], rtol=0.0, atol=0.0075)


def test_enthalpy_of_saturated_air(grid: Grid) -> None:
    """With the program's own humidity ratio as well, up to 120 g/kg: 0.12 kJ/kg; the largest is 0.096.

    That is nearly all humidity ratio: 0.03 % of 119 g/kg, at 45 degC and 60 kPa, carries 0.09 kJ/kg.
    """
    saturated = (grid.rh == 1.0) & (grid.w <= 0.12)
    t, p, w = grid.t[saturated], grid.p[saturated], grid.w[saturated]
    expected = humid_air("H", t, "W", w, p) / 1000.0
    found = moist_air.enthalpy(t, moist_air.saturation_humidity_ratio(t, p), p)
    np.testing.assert_allclose(found, expected, rtol=0.0, atol=0.12)


def test_specific_volume(grid: Grid) -> None:
    """Within 0.1 % from -20 degC up and to 120 g/kg, 0.12 % over the whole grid.

    The program's is a perfect gas. Cold dense air is further from one, 0.114 % at -30 degC and 106 kPa, and
    so is very moist air, 0.103 % at 50 degC and 60 kPa, saturated.
    """
    expected = humid_air("V", grid.t, "W", grid.w, grid.p)
    error = np.abs(moist_air.specific_volume(grid.t, grid.w, grid.p) / expected - 1.0)
    assert error[(grid.t >= -20.0) & (grid.w <= 0.12)].max() < 1.0e-3
    assert error.max() < 1.2e-3


def test_dew_point(grid: Grid) -> None:
    """Within 0.01 K: 0.04 % of humidity ratio is 0.006 K, the largest difference."""
    moist = grid.rh > 0.0
    t, p, w = grid.t[moist], grid.p[moist], grid.w[moist]
    expected = humid_air("D", t, "W", w, p) - 273.15
    np.testing.assert_allclose(moist_air.dew_point(w, p), expected, rtol=0.0, atol=0.01)


def test_wet_bulb(grid: Grid) -> None:
    """Within 0.01 K, the largest difference being 0.007 K, where both find a solution over the same phase.

    From a little below 0 degC CoolProp returns the wet bulb over ice although there is one over liquid
    water too, which is the one the program returns; those points have a test of their own.
    """
    expected = humid_air("B", grid.t, "W", grid.w, grid.p) - 273.15
    found = moist_air.wet_bulb(grid.t, grid.w, grid.p)
    same = (expected < 0.01) == (found < 0.01)
    assert same.mean() > 0.98
    np.testing.assert_allclose(found[same], expected[same], rtol=0.0, atol=0.01)


def test_wet_bulb_where_two_solutions_exist(grid: Grid) -> None:
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
        assert h + (saturated - w) * water == pytest.approx(h_s, abs=0.03)


@pytest.mark.parametrize("p", [60e3, 80e3, SEA_LEVEL, 106e3])
@pytest.mark.parametrize("t", [0.01, 1.0, 10.0, 20.0, 30.0, 40.0, 50.0])
def test_enhancement_factor_over_water(t: float, p: float) -> None:
    """Partial pressure of water in saturated air over its pure saturation pressure, both CoolProp's.

    Hardy's fit (from memory) and the real-gas formulation differ by 0.03 %, one part in twelve of f - 1.
    """
    kelvin = t + 273.15
    partial = HAPropsSI("P_w", "T", kelvin + 1e-9, "R", 1.0, "P", p)
    expected = partial / PropsSI("P", "T", kelvin, "Q", 0, "Water")
    assert moist_air.enhancement_factor(t, p) == pytest.approx(expected, abs=3e-4)


@pytest.mark.parametrize("p", [60e3, 80e3, SEA_LEVEL, 106e3])
@pytest.mark.parametrize("t", [-45.0, -30.0, -20.0, -10.0, -5.0, -0.1])
def test_enhancement_factor_over_ice(t: float, p: float) -> None:
    """The same over ice, with IAPWS R14-08 for the pure substance. Tolerance 0.09 %.

    Hardy's set over ice (from memory), less the 0.013 % by which the program joins it to the one over water,
    lies up to 0.08 % below at -45 degC; what matters is the product with the saturation pressure, which
    errs the other way and is tested next.
    """
    partial = HAPropsSI("P_w", "T", t + 273.15, "R", 1.0, "P", p)
    expected = partial / water_reference.sublimation_pressure(t)
    assert moist_air.enhancement_factor(t, p) == pytest.approx(expected, abs=9e-4)


@pytest.mark.parametrize("p", [60e3, 80e3, SEA_LEVEL, 106e3])
def test_saturation_over_ice_and_water(p: float) -> None:
    """Factor times pressure, as humidity ratio: within 0.04 % of CoolProp from -30 degC up, 0.05 % below."""
    t = np.arange(-45.0, 60.1, 0.5)
    expected = humid_air("W", t, "R", 1.0, p)
    error = np.abs(moist_air.saturation_humidity_ratio(t, p) / expected - 1.0)
    assert error[t >= -30.0].max() < 4e-4
    assert error.max() < 5e-4


def test_liquid_water() -> None:
    """Within 0.004 kJ/kg of IAPWS-95 (CoolProp) over 0.01..60 degC, as declared."""
    t = np.linspace(0.01, 60.0, 241)
    expected = np.asarray(PropsSI("H", "T", t + 273.15, "Q", 0, "Water")) / 1000.0
    np.testing.assert_allclose(moist_air.liquid_water_enthalpy(t), expected, rtol=0.0, atol=0.004)


@pytest.fixture(scope="module")
def metric() -> None:
    """psychrolib keeps its unit system as global state, and compiles itself anew each time it is set."""
    psychrolib.SetUnitSystem(psychrolib.SI)


@pytest.mark.usefixtures("metric")
@pytest.mark.parametrize("t", [-60.0, -30.0, -5.0, 0.0, 0.02, 10.0, 35.0, 60.0])
def test_saturation_pressure_is_hyland_and_wexler(t: float) -> None:
    """psychrolib holds the same two equations: every coefficient agrees, to rounding."""
    assert moist_air.saturation_pressure(t) == pytest.approx(psychrolib.GetSatVapPres(t), rel=1e-12)


@pytest.mark.usefixtures("metric")
def test_perfect_gas_is_too_coarse() -> None:
    """Without the enhancement factor (psychrolib) W is 0.42 % low at 10 degC and 0.62 % at 50 degC.

    Figures computed with CoolProp, a cross-check; 0.05 %, the accuracy of the program's own.
    """
    for t, low in ((10.0, 0.0042), (50.0, 0.0062)):
        perfect = psychrolib.GetSatHumRatio(t, SEA_LEVEL)
        found = 1.0 - perfect / moist_air.saturation_humidity_ratio(t, SEA_LEVEL)
        assert found == pytest.approx(low, abs=5e-4)


@pytest.mark.usefixtures("metric")
@pytest.mark.parametrize("t", [-15.0, 5.0, 20.0, 35.0, 45.0])
@pytest.mark.parametrize("rh", [0.2, 0.6, 0.95])
def test_wet_bulb_by_perfect_gas(t: float, rh: float) -> None:
    """psychrolib's wet bulb at the same relative humidity: within 0.03 K, dew point within 0.02 K.

    At equal relative humidity the enhancement factor acts on both sides and nearly cancels: what remains is
    its change between dry bulb and dew point, 0.1 % or 0.016 K at 45 degC 20 %.
    """
    w = moist_air.humidity_ratio_from_relative_humidity(t, rh, SEA_LEVEL)
    wet_bulb = psychrolib.GetTWetBulbFromRelHum(t, rh, SEA_LEVEL)
    assert moist_air.wet_bulb(t, w, SEA_LEVEL) == pytest.approx(wet_bulb, abs=0.03)
    dew_point = psychrolib.GetTDewPointFromRelHum(t, rh)
    assert moist_air.dew_point(w, SEA_LEVEL) == pytest.approx(dew_point, abs=0.02)


@pytest.mark.usefixtures("metric")
@pytest.mark.parametrize("elevation", [-500.0, 0.0, 1600.0, 4000.0])
def test_standard_atmosphere(elevation: float) -> None:
    """psychrolib's form of the same equation, to the digits of its exponent."""
    expected = psychrolib.GetStandardAtmPressure(elevation)
    assert moist_air.standard_atmosphere(elevation) == pytest.approx(expected, rel=1e-6)
