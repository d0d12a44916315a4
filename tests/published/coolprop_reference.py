"""A year through the cooling coil, hour by hour, on CoolProp's humid air: a second, separate computation.

Written from the definitions alone and sharing no line with the program: it imports nothing from
``estimator``, goes through the hours one at a time, asks CoolProp for every property and finds a coil
surface by bracketing and halving. It is slow and plain on purpose. It is a cross-check, not a source.

What it knows: an airflow given at standard density, a dew-point setpoint, a dry-bulb band, a bypass factor,
a least surface temperature; unlimited cooling and heat; no fan and no preheat. Units: degC, Pa, kg/kg dry
air, kJ/kg dry air, kg/s, kWh, kg.

- An hour needs drying when its humidity ratio exceeds that of saturation at the setpoint and the coil's
  least surface could lower it.
- The coil leaves ``BF x entering + (1 - BF) x saturated air at the surface temperature``, in enthalpy and
  humidity ratio; with a surface that does not condense, the surface air keeps the entering humidity ratio.
- A mixture beyond saturation leaves saturated. Where the setpoint asked for it, it leaves saturated at the
  setpoint; elsewhere the excess drains adiabatically.
- Coil heat is ``h1 - h2 - (W1 - W2) h_w`` with the water at the leaving temperature; sensible is
  ``h(t1, W2) - h2``; latent is the rest.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache

from CoolProp.CoolProp import HAPropsSI, PropsSI
from scipy.optimize import brentq

_ZERO = 273.15
#: Root finding stops within this many kelvin.
_CLOSE = 1e-8
#: CoolProp wants a dry bulb even for what does not depend on one; warmer than any dew point, degC.
_WARM = 60.0
#: A humidity ratio counts as above another from this share on: a dew point equal to the setpoint is a tie
#: that CoolProp's rounding must not decide.
_ABOVE = 1e-9


@dataclass(frozen=True)
class Air:
    """Moist air at a pressure known from elsewhere."""

    t: float
    w: float
    h: float


@dataclass(frozen=True, kw_only=True)
class Unit:
    """The unit's settings."""

    dew_point: float
    low: float
    high: float
    bypass_factor: float = 0.0
    #: kg dry air/s: 1 m3/s at 1.204 kg/m3
    mass_flow: float = 1.204
    least_surface: float = 1.0


@dataclass
class Sums:
    """What a unit exchanges, kWh and kg."""

    coil_cooling_kwh: float = 0.0
    coil_sensible_kwh: float = 0.0
    coil_latent_kwh: float = 0.0
    reheat_kwh: float = 0.0
    outdoor_air_heating_kwh: float = 0.0
    condensate_kg: float = 0.0

    def add(self, other: Sums) -> None:
        """Add another hour's or another month's."""
        for field in dataclasses.fields(self):
            setattr(self, field.name, getattr(self, field.name) + getattr(other, field.name))


def enthalpy(t: float, w: float, p: float) -> float:
    """Enthalpy of moist air, kJ per kg dry air."""
    return float(HAPropsSI("H", "T", t + _ZERO, "W", w, "P", p)) / 1000.0


@cache
def saturated(t: float, p: float) -> Air:
    """Saturated air at ``t``."""
    w = float(HAPropsSI("W", "T", t + _ZERO, "R", 1.0, "P", p))
    return Air(t, w, enthalpy(t, w, p))


@cache
def water_enthalpy(t: float) -> float:
    """Enthalpy of liquid water, kJ/kg, zero at 0.01 degC."""
    return float(PropsSI("H", "T", t + _ZERO, "Q", 0, "Water")) / 1000.0


@cache
def outdoor(t: float, dew_point: float, p: float) -> Air:
    """Outdoor air from what a weather file holds."""
    w = float(HAPropsSI("W", "T", t + _ZERO, "D", dew_point + _ZERO, "P", p))
    return Air(t, w, enthalpy(t, w, p))


def dew_point(w: float, p: float) -> float:
    """Temperature at which air of this humidity ratio is saturated, degC."""
    return float(HAPropsSI("D", "T", _WARM + _ZERO, "W", w, "P", p)) - _ZERO


def settle(w: float, h: float, p: float, setpoint: float | None = None) -> Air:
    """The state of this enthalpy and water, or where it settles when that lies beyond saturation."""
    t_saturated = dew_point(w, p) if setpoint is None else setpoint
    if h >= enthalpy(t_saturated, w, p):
        return Air(float(HAPropsSI("T", "H", 1000.0 * h, "W", w, "P", p)) - _ZERO, w, h)
    if setpoint is not None:
        return saturated(setpoint, p)

    def excess(t: float) -> float:
        air = saturated(t, p)
        return air.h + (w - air.w) * water_enthalpy(t) - h

    # the excess drains and frees heat: between the saturated states of this enthalpy and this humidity
    t = brentq(excess, 0.02, t_saturated, xtol=_CLOSE)
    return saturated(t, p)


def off_coil(
    entering: Air, surface: float, p: float, bypass_factor: float, setpoint: float | None = None
) -> Air:
    """Air leaving a coil whose surface has one temperature, wet or dry."""
    at_surface = saturated(surface, p)
    if at_surface.w >= entering.w:
        at_surface = Air(surface, entering.w, enthalpy(surface, entering.w, p))
    if bypass_factor == 0.0:
        return at_surface
    w = bypass_factor * entering.w + (1.0 - bypass_factor) * at_surface.w
    h = bypass_factor * entering.h + (1.0 - bypass_factor) * at_surface.h
    return settle(w, h, p, setpoint)


def dried(entering: Air, p: float, unit: Unit) -> Air:
    """Air leaving a coil that is asked for the dew-point setpoint and nothing else."""
    bf = unit.bypass_factor
    coldest = saturated(unit.least_surface, p)
    if bf == 0.0:
        return saturated(max(unit.dew_point, unit.least_surface), p)
    wanted = (saturated(unit.dew_point, p).w - bf * entering.w) / (1.0 - bf)
    if wanted <= coldest.w:
        # the mixture cannot be as dry as asked for, but with its fog drained it may be drier: then some
        # warmer surface leaves the air saturated at the setpoint, never below it
        held, asked = off_coil(entering, unit.least_surface, p, bf), saturated(unit.dew_point, p)
        return asked if held.w < asked.w else held
    surface = dew_point(wanted, p)
    return off_coil(entering, surface, p, bf, unit.dew_point)


def cooled(entering: Air, p: float, unit: Unit) -> Air:
    """Air leaving a coil that is asked for the upper end of the dry-bulb band and nothing else."""

    def too_warm(surface: float) -> float:
        return off_coil(entering, surface, p, unit.bypass_factor).t - unit.high

    if too_warm(unit.least_surface) > 0.0:
        return off_coil(entering, unit.least_surface, p, unit.bypass_factor)
    surface = brentq(too_warm, unit.least_surface, unit.high, xtol=_CLOSE)
    return off_coil(entering, surface, p, unit.bypass_factor)


def hour(entering: Air, p: float, unit: Unit) -> Sums:
    """One hour's exchanges."""
    floor = max(saturated(unit.dew_point, p).w, saturated(unit.least_surface, p).w)
    drying = entering.w > floor * (1.0 + _ABOVE)
    leaving = dried(entering, p, unit) if drying else entering
    if leaving.t > unit.high:
        leaving = cooled(entering, p, unit)
    m = unit.mass_flow
    sums = Sums()
    if leaving is not entering:
        removed = entering.w - leaving.w
        water = water_enthalpy(leaving.t) if removed > 0.0 else 0.0
        sums.coil_cooling_kwh = m * (entering.h - leaving.h - removed * water)
        sums.coil_sensible_kwh = m * (enthalpy(entering.t, leaving.w, p) - leaving.h)
        sums.coil_latent_kwh = sums.coil_cooling_kwh - sums.coil_sensible_kwh
        sums.condensate_kg = 3600.0 * m * removed
    if leaving.t < unit.low:
        heat = m * (enthalpy(unit.low, leaving.w, p) - leaving.h)
        if leaving is entering:
            sums.outdoor_air_heating_kwh = heat
        else:
            sums.reheat_kwh = heat
    return sums


def hours(
    dry_bulb: Iterable[float], dew_points: Iterable[float], pressure: Iterable[float], unit: Unit
) -> list[Sums]:
    """Every hour's exchanges."""
    columns = zip(dry_bulb, dew_points, pressure, strict=True)
    return [hour(outdoor(float(t), float(d), float(p)), float(p), unit) for t, d, p in columns]


def total(hourly: Iterable[Sums]) -> Sums:
    """The sum of hours."""
    sums = Sums()
    for one in hourly:
        sums.add(one)
    return sums
