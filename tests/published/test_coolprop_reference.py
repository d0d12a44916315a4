"""The separate year on CoolProp is itself right: hand computations, its own limits, and its independence."""

from __future__ import annotations

import ast
import dataclasses
from pathlib import Path

import numpy as np
import pytest
from CoolProp.CoolProp import HAPropsSI
from published import checks
from published import coolprop_reference as reference
from published.checks import Recorder, validates
from published.coolprop_reference import Air, Sums, Unit

SEA_LEVEL = 101_325.0


def humid(t: float, rh: float, p: float = SEA_LEVEL) -> Air:
    """Air of this relative humidity, a fraction."""
    w = float(HAPropsSI("W", "T", t + 273.15, "R", rh, "P", p))
    return Air(t, w, reference.enthalpy(t, w, p))


def one_hour(entering: Air, p: float = SEA_LEVEL, **settings: float) -> Sums:
    """An hour of 1 kg/s unless said."""
    return reference.hour(entering, p, Unit(**{"mass_flow": 1.0, **settings}))


def test_it_shares_nothing_with_the_program() -> None:
    tree = ast.parse(Path(reference.__file__).read_text(encoding="utf-8"))
    imported = {
        name
        for node in ast.walk(tree)
        for name in (
            [alias.name for alias in node.names]
            if isinstance(node, ast.Import)
            else [node.module or ""]
            if isinstance(node, ast.ImportFrom)
            else []
        )
    }
    assert {name.split(".")[0] for name in imported} == {
        "CoolProp", "__future__", "collections", "dataclasses", "functools", "scipy",
    }  # fmt: skip


@validates("The separate computation: cooling", checks.EXAMPLES)
def test_cooling_example(check: Recorder) -> None:
    """5.70 kg/s of 30 degC 50 % to saturated 10 degC. 1 % for the chart, 0.1 % for the computed figures."""
    sums = one_hour(humid(30.0, 0.5), dew_point=10.0, low=10.0, high=10.0, mass_flow=5.702)
    check("cooling", sums.coil_cooling_kwh, 197.0, "kW", rel=1e-2)
    check("cooling", sums.coil_cooling_kwh, 198.2, "kW", rel=1e-3, source=checks.APART)
    check("water", sums.condensate_kg / 3600.0, 0.03256, "kg/s", rel=1e-3, source=checks.APART)
    assert sums.reheat_kwh == pytest.approx(0.0, abs=1e-9)


@validates("The separate computation: cool and reheat", checks.TEXTBOOK)
def test_cool_and_reheat_example(check: Recorder) -> None:
    """34 degC 70 % to 22 degC 50 %; the textbook's cooling has the water at 10 degC. Here it leaves at
    11.1 degC: 0.06 kJ/kg less. 2 % of the reheat, 0.15 kJ/kg of the cooling.
    """
    supplied = humid(22.0, 0.5)
    off_coil = reference.dew_point(supplied.w, SEA_LEVEL)
    sums = one_hour(humid(34.0, 0.7), dew_point=off_coil, low=22.0, high=22.0)
    check("off-coil dry bulb", off_coil, 11.1, "degC", within=0.05)
    check("reheat", sums.reheat_kwh, 11.3, "kJ/kg", rel=2e-2)
    check("cooling, less the 0.06", sums.coil_cooling_kwh, 62.7 - 0.06, "kJ/kg", within=0.15)


@validates("The separate computation: coil with bypass", checks.APART)
def test_bypass_example(check: Recorder) -> None:
    """32 degC 65 % to 25 degC 60 % with an apparatus dew point of 13 degC: bypass factor 0.25
    (computed; 0.237 off the book's chart), off-coil 17.8 degC, and per 250 m3/min 34.5 kW of reheat and
    130 kg/h of water. Given the bypass factor and the supply, the apparatus dew point must come out: within
    0.1 K, the digits of the factor. 1 % for the rest.
    """
    entering, supplied = humid(32.0, 0.65), humid(25.0, 0.6)
    setpoint = reference.dew_point(supplied.w, SEA_LEVEL)
    volume = float(HAPropsSI("V", "T", 305.15, "W", entering.w, "P", SEA_LEVEL))
    unit = Unit(dew_point=setpoint, low=25.0, high=25.0, bypass_factor=0.25, mass_flow=250.0 / 60.0 / volume)
    leaving = reference.dried(entering, SEA_LEVEL, unit)
    surface_w = (supplied.w - 0.25 * entering.w) / 0.75
    surface = reference.dew_point(surface_w, SEA_LEVEL)
    check("apparatus dew point", surface, 13.0, "degC", within=0.1, source=checks.TEXTBOOK_COIL)
    assert leaving.w == pytest.approx(supplied.w, rel=1e-9)
    check("off-coil dry bulb", leaving.t, 17.8, "degC", within=0.1)
    sums = reference.hour(entering, SEA_LEVEL, unit)
    check("reheat", sums.reheat_kwh, 34.5, "kW", rel=1e-2)
    check("water", sums.condensate_kg, 130.0, "kg/h", rel=1e-2)


@validates("The separate computation: dry hours", checks.CONSTANTS)
def test_dry_hours(check: Recorder) -> None:
    """Sensible cooling and heating by the textbook specific heat 1.006 + 1.86 W, 0.2 %."""
    dew, w = 5.0, reference.saturated(5.0, SEA_LEVEL).w
    hot = one_hour(reference.outdoor(30.0, dew, SEA_LEVEL), dew_point=11.0, low=18.0, high=22.0)
    check("cooling, 30 to 22 degC", hot.coil_cooling_kwh, (1.006 + 1.86 * w) * 8.0, "kJ/kg", rel=2e-3)
    assert hot.coil_latent_kwh == pytest.approx(0.0, abs=1e-9)
    assert hot.condensate_kg == 0.0
    cold = one_hour(reference.outdoor(6.0, dew, SEA_LEVEL), dew_point=11.0, low=18.0, high=22.0)
    heat = cold.outdoor_air_heating_kwh
    check("heating, 6 to 18 degC", heat, (1.006 + 1.86 * w) * 12.0, "kJ/kg", rel=2e-3)
    assert cold.reheat_kwh == 0.0
    assert cold.coil_cooling_kwh == 0.0
    mild = one_hour(reference.outdoor(20.0, dew, SEA_LEVEL), dew_point=11.0, low=18.0, high=22.0)
    assert dataclasses.astuple(mild) == (0.0,) * 6


@validates("The separate computation: latent heat", checks.CONSTANTS)
def test_latent_heat_is_the_water_removed(check: Recorder) -> None:
    """Latent per kg of water is vapour at the entering dry bulb less water at the leaving one, 2501 + 1.86 t
    - 4.19 t_leaving (textbook). 0.1 %: constant specific heats."""
    sums = one_hour(humid(30.0, 0.8), dew_point=10.0, low=20.0, high=20.0)
    per_kg = 3600.0 * sums.coil_latent_kwh / sums.condensate_kg
    check("per kg of water", per_kg, 2501.0 + 1.86 * 30.0 - 4.19 * 10.0, "kJ/kg", rel=1e-3)


def test_a_dew_point_at_the_setpoint_needs_no_drying() -> None:
    at, above = (reference.outdoor(18.0, dew, SEA_LEVEL) for dew in (11.0, 11.01))
    assert one_hour(at, dew_point=11.0, low=18.0, high=22.0).coil_cooling_kwh == 0.0
    assert one_hour(above, dew_point=11.0, low=18.0, high=22.0).coil_cooling_kwh > 5.0


@pytest.mark.parametrize("rh", [0.3, 0.6, 0.95, 1.0])
@pytest.mark.parametrize("high", [9.0, 20.0])
def test_a_vanishing_bypass_is_none(rh: float, high: float) -> None:
    """The two ways through the code meet: no bypass, and a bypass factor of 1e-9."""
    entering = humid(27.0, rh)
    settings = {"dew_point": 11.0, "low": 8.0, "high": high}
    none = dataclasses.astuple(one_hour(entering, bypass_factor=0.0, **settings))
    little = dataclasses.astuple(one_hour(entering, bypass_factor=1e-9, **settings))
    assert little == pytest.approx(none, rel=1e-6, abs=1e-6)


def test_foggy_mixture_leaves_saturated_at_the_setpoint() -> None:
    """Saturated air mixed with colder saturated air is fog; it must not leave below the setpoint for that."""
    entering = humid(20.0, 1.0)
    unit = Unit(dew_point=13.0, low=13.0, high=20.0, bypass_factor=0.3)
    assert reference.dried(entering, SEA_LEVEL, unit) == reference.saturated(13.0, SEA_LEVEL)


@validates("The separate computation: fog drained below the setpoint", checks.APART)
def test_fog_drained_below_the_setpoint(check: Recorder) -> None:
    """Saturated air of 30 degC, bypass factor 0.1, least surface 1 degC, setpoint 7 degC, by hand.

    It has 27.33 g/kg and 100.01 kJ/kg (table 2), that of 1 degC 4.08 g/kg and 11.20 kJ/kg. A tenth of the one
    with the other is 6.40 g/kg and 20.08 kJ/kg: fog, above the 6.24 g/kg of the setpoint. Saturated air of
    5.7 degC, 5.70 g/kg, with 0.70 g/kg of water at 24 kJ/kg, has the same enthalpy, so the coldest surface
    leaves the air below the setpoint and a warmer one leaves it there, saturated. 0.05 K and 0.01 g/kg, what
    such figures are good for.
    """
    entering = humid(30.0, 1.0)
    coldest = reference.off_coil(entering, 1.0, SEA_LEVEL, 0.1)
    check("behind the coldest surface, dry bulb", coldest.t, 5.7, "degC", within=0.05)
    check("behind the coldest surface, humidity ratio", 1000.0 * coldest.w, 5.70, "g/kg", within=0.01)
    unit = Unit(dew_point=7.0, low=7.0, high=30.0, bypass_factor=0.1)
    leaving = reference.dried(entering, SEA_LEVEL, unit)
    check("leaving for the setpoint, humidity ratio", 1000.0 * leaving.w, 6.24, "g/kg", within=0.01)
    assert leaving == reference.saturated(7.0, SEA_LEVEL)
    # out of reach even so
    unit = dataclasses.replace(unit, dew_point=4.0, low=4.0)
    assert reference.dried(entering, SEA_LEVEL, unit) == coldest


def test_fog_drains_adiabatically() -> None:
    """Where nothing was asked for but cold, the excess drains: energy and water before are those after."""
    w, h = 0.012, 30.0
    left = reference.settle(w, h, SEA_LEVEL)
    assert left.w < w
    after = left.h + (w - left.w) * reference.water_enthalpy(left.t)
    assert after == pytest.approx(h, abs=1e-6)


def test_a_surface_held_at_its_least() -> None:
    """Setpoint out of reach: the surface stays at 1 degC, and the bypass factor says what leaves."""
    entering = humid(30.0, 0.5)
    unit = Unit(dew_point=3.0, low=3.0, high=30.0, bypass_factor=0.3)
    leaving = reference.dried(entering, SEA_LEVEL, unit)
    coldest = reference.saturated(1.0, SEA_LEVEL)
    assert leaving.w == pytest.approx(0.3 * entering.w + 0.7 * coldest.w, rel=1e-12)
    assert leaving.h == pytest.approx(0.3 * entering.h + 0.7 * coldest.h, rel=1e-12)
    # and without a bypass a setpoint below 1 degC is held there
    unit = Unit(dew_point=-3.0, low=3.0, high=30.0)
    assert reference.dried(entering, SEA_LEVEL, unit) == coldest


def test_a_coil_cooled_for_its_dry_bulb() -> None:
    """It leaves at the dry bulb asked for: dry at constant humidity, wet on the way to its surface."""
    unit = Unit(dew_point=13.0, low=10.0, high=14.0, bypass_factor=0.1)
    dry = reference.cooled(reference.outdoor(30.0, 2.0, SEA_LEVEL), SEA_LEVEL, unit)
    assert dry.t == pytest.approx(14.0, abs=1e-6)
    # 0.1 w + 0.9 w is w but for the rounding of two products and a sum, whatever w a CoolProp gives
    few_ulps = 4.0 * np.finfo(float).eps
    assert dry.w == pytest.approx(reference.outdoor(30.0, 2.0, SEA_LEVEL).w, rel=few_ulps, abs=0.0)
    moist = reference.outdoor(30.0, 12.9, SEA_LEVEL)
    wet = reference.cooled(moist, SEA_LEVEL, unit)
    assert wet.t == pytest.approx(14.0, abs=1e-6)
    assert wet.w < moist.w


def test_sums_add_up() -> None:
    unit = Unit(dew_point=11.0, low=20.0, high=20.0)
    hours = reference.hours([30.0, 10.0], [20.0, 2.0], [SEA_LEVEL] * 2, unit)
    total = reference.total(hours)
    for field in dataclasses.fields(Sums):
        parts = [getattr(hour, field.name) for hour in hours]
        assert getattr(total, field.name) == pytest.approx(sum(parts))
    assert total.coil_sensible_kwh + total.coil_latent_kwh == pytest.approx(total.coil_cooling_kwh)
