"""The base duty as one compiled loop over the hours: how quick the same arithmetic can be on one thread.

The equations, the constants, the number of steps of every inverse, the rule for fog, the order of the
decisions and the checks of heat and water are those of ``estimator``; what is left out is everything that
makes a program of it: named states, the ledger kept by hour, devices that can be absent. What it sums must
agree with the program's to 1e-9, which the benchmark asserts: a loop that does something else is no limit.
A dry coil that cools for the dry bulb is solved directly, which is quickest; a wet one is searched for.

Compiled without fastmath, without parallel loops, and without a cache on disk.
"""

from __future__ import annotations

import math
from typing import Any

import numpy as np
from numba import njit

from estimator import moist_air
from estimator.constants import (
    BALANCE_TOLERANCE,
    MOLE_MASS_RATIO,
    NEGLIGIBLE_HEAT,
    SECONDS_PER_HOUR,
    STANDARD_PRESSURE,
    TEMPERATURE_TOLERANCE,
    TRIPLE_POINT,
    UNMET_TOLERANCE,
    ZERO_CELSIUS,
)

_ICE, _LIQUID = moist_air._ICE, moist_air._LIQUID
_ALPHA_ICE, _BETA_ICE = moist_air._ALPHA_ICE, moist_air._BETA_ICE
_ALPHA_LIQUID, _BETA_LIQUID = moist_air._ALPHA_LIQUID, moist_air._BETA_LIQUID
_A1, _A2, _B0, _B1 = moist_air._A1, moist_air._A2, moist_air._B0, moist_air._B1
_C0, _C1, _C2 = moist_air._C0, moist_air._C1, moist_air._C2
_D0, _E0, _E1 = moist_air._D0, moist_air._E0, moist_air._E1
_TRIPLE_PRESSURE, _MEET_PRESSURE = moist_air._TRIPLE_PRESSURE, moist_air._MEET_PRESSURE
_MEET_ALPHA, _MEET_BETA = moist_air._MEET_ALPHA, moist_air._MEET_BETA
_WATER = moist_air._WATER
_ICE_ENTHALPY = moist_air._ICE_ENTHALPY
_SATURATION_STEPS = moist_air._SATURATION_STEPS
_STRAIGHTENING = moist_air._STRAIGHTENING

# two corrections and a check
_DEW_POINT_STEPS = 3
_ROOT_STEPS = 80
_ROOT_TOLERANCE = 1e-9
_FOG = 1.0 + 1e-10

#: Columns of the sums and of the counts that the loop returns, each of shape (12, columns).
SUMS = (
    "coil_cooling_kwh",
    "coil_sensible_kwh",
    "reheat_kwh",
    "cooling_undone_by_fan_kwh",
    "cooling_undone_by_purchased_kwh",
    "outdoor_air_heating_kwh",
    "condensate_kg",
    "condensate_frozen_kg",
    "fan_kwh",
    "cooling electricity",
    "reheat electricity",
    "outdoor-air heating electricity",
)
COUNTS = (
    "hours_operating",
    "hours_drying",
    "hours_reheat",
    "hours_frozen",
    "hours_unmet",
    "hours_unmet_dew_point",
    "hours_unmet_warm",
    "hours_unmet_cold",
    "off",
    "untreated",
    "heating",
    "sensible cooling",
    "drying",
    "drying with reheat",
)
PEAKS = ("coil_cooling_kw", "reheat_kw", "condensate_kg_per_h")

compiled = njit(cache=False, fastmath=False)


@compiled
def _log_pressure(kelvin: float, c: Any) -> float:
    polynomial = c[1] + kelvin * (c[2] + kelvin * (c[3] + kelvin * (c[4] + kelvin * c[5])))
    return c[0] / kelvin + polynomial + c[6] * math.log(kelvin)


@compiled
def _log_pressure_slope(kelvin: float, c: Any) -> float:
    slope = (c[6] - c[0] / kelvin) / kelvin
    return slope + c[2] + kelvin * (2.0 * c[3] + kelvin * (3.0 * c[4] + kelvin * 4.0 * c[5]))


@compiled
def _cubic(t: float, c: Any) -> float:
    return c[0] + t * (c[1] + t * (c[2] + t * c[3]))


@compiled
def _pure(t: float) -> tuple[float, float, float, float]:
    """What saturation at ``t`` is before the pressure comes in: pressure, alpha, exp(beta), 1 over ice."""
    if t < TRIPLE_POINT:
        return (
            math.exp(_log_pressure(t + ZERO_CELSIUS, _ICE)),
            _cubic(t, _ALPHA_ICE),
            math.exp(_cubic(t, _BETA_ICE)),
            1.0,
        )
    return (
        math.exp(_log_pressure(t + ZERO_CELSIUS, _LIQUID)),
        _cubic(t, _ALPHA_LIQUID),
        math.exp(_cubic(t, _BETA_LIQUID)),
        0.0,
    )


@compiled
def _meet(p: float) -> float:
    """What brings the curve over ice to the curve over water at the triple point."""
    triple = p / _TRIPLE_PRESSURE
    return _MEET_ALPHA * (1.0 - 1.0 / triple) + _MEET_BETA * (triple - 1.0) + _MEET_PRESSURE


@compiled
def _enhanced(pure: tuple[float, float, float, float], p: float) -> float:
    e, alpha, beta, ice = pure
    ratio = p / e
    log_f = alpha * (1.0 - 1.0 / ratio) + beta * (ratio - 1.0)
    if ice > 0.0:
        log_f += _meet(p)
    return e * math.exp(log_f)


@compiled
def _humidity_ratio(e: float, p: float) -> float:
    return MOLE_MASS_RATIO * e / (p - e)


@compiled
def _saturated(t: float, p: float) -> float:
    return _humidity_ratio(_enhanced(_pure(t), p), p)


@compiled
def _enthalpy(t: float, w: float, p: float) -> float:
    q = p / STANDARD_PRESSURE
    over = q - 1.0
    qw = q * w
    a = w * _B0 + _C0 * over + qw * (_D0 + _E0 * w)
    b = _A1 + _C1 * over + w * (_B1 + _E1 * qw)
    c = _A2 + _C2 * over
    return a + t * (b + t * c)


@compiled
def _dry_bulb(h: float, w: float, p: float) -> float:
    q = p / STANDARD_PRESSURE
    over = q - 1.0
    qw = q * w
    a = w * _B0 + _C0 * over + qw * (_D0 + _E0 * w)
    b = _A1 + _C1 * over + w * (_B1 + _E1 * qw)
    c = _A2 + _C2 * over
    above = h - a
    return 2.0 * above / (b + math.sqrt(b * b + 4.0 * c * above))


@compiled
def _water_enthalpy(t: float) -> float:
    if t < TRIPLE_POINT:
        return _ICE_ENTHALPY[0] + t * (_ICE_ENTHALPY[1] + t * _ICE_ENTHALPY[2])
    return _WATER[0] + t * (_WATER[1] + t * (_WATER[2] + t * (_WATER[3] + t * _WATER[4])))


@compiled
def _dew_point_on(
    e: float, p: float, c: Any, alpha: Any, beta: Any, meet: float, magnus: float, offset: float
) -> float:
    log_e = math.log(e)
    x = log_e - math.log(611.2)
    t = offset * x / (magnus - x)
    error = 0.0
    for step in range(_DEW_POINT_STEPS):
        kelvin = t + ZERO_CELSIUS
        log_pure = _log_pressure(kelvin, c)
        ratio = p / math.exp(log_pure)
        log_f = _cubic(t, alpha) * (1.0 - 1.0 / ratio) + math.exp(_cubic(t, beta)) * (ratio - 1.0) + meet
        error = (log_pure + log_f - log_e) / _log_pressure_slope(kelvin, c)
        if step < _DEW_POINT_STEPS - 1:
            t -= error
    if abs(error) > TEMPERATURE_TOLERANCE:
        return math.nan
    return t


@compiled
def _dew_point(w: float, p: float, triple: tuple[float, float, float, float]) -> float:
    e = p * w / (MOLE_MASS_RATIO + w)
    if e < _enhanced(triple, p):
        return _dew_point_on(e, p, _ICE, _ALPHA_ICE, _BETA_ICE, _meet(p), 22.46, 272.62)
    return _dew_point_on(e, p, _LIQUID, _ALPHA_LIQUID, _BETA_LIQUID, 0.0, 17.62, 243.12)


@compiled
def _fog_excess(t: float, h: float, w: float, p: float, ice: bool) -> tuple[float, float]:
    c = _ICE if ice else _LIQUID
    w_s = _saturated(t, p)
    w_slope = w_s * (1.0 + w_s / MOLE_MASS_RATIO) * _log_pressure_slope(t + ZERO_CELSIUS, c)
    h_w = _water_enthalpy(t)
    excess = _enthalpy(t, w_s, p) - h - (w_s - w) * h_w
    slope = _A1 + _B1 * w_s + w_slope * (_B0 + _B1 * t - h_w) - (w_s - w) * (2.1 if ice else 4.19)
    return excess, slope


@compiled
def _drained(h: float, w: float, p: float) -> float:
    """Temperature of the saturated air that fog leaves."""
    ice = _fog_excess(TRIPLE_POINT, h, w, p, False)[0] > 0.0
    t = 0.0 if ice else 20.0
    base = h + _STRAIGHTENING
    error = 0.0
    for step in range(_SATURATION_STEPS):
        excess, slope = _fog_excess(t, h, w, p, ice)
        error = excess / slope
        if step < _SATURATION_STEPS - 1:
            t -= (excess if ice else (base + excess) * math.log1p(excess / base)) / slope
    if abs(error) > TEMPERATURE_TOLERANCE:
        return math.nan
    return min(t, TRIPLE_POINT) if ice else t


@compiled
def _leaving(
    surface: float, t1: float, w1: float, h1: float, p: float, bf: float
) -> tuple[float, float, float]:
    """Dry bulb, humidity ratio and enthalpy behind a coil whose surface is at ``surface``."""
    w_surface = min(_saturated(surface, p), w1)
    h_surface = _enthalpy(surface, w_surface, p)
    w = w_surface + bf * (w1 - w_surface)
    h = h_surface + bf * (h1 - h_surface)
    t = _dry_bulb(h, w, p)
    if w_surface < w1 and w > _saturated(t, p) * _FOG:
        t = _drained(h, w, p)
        w = _saturated(t, p)
        h = _enthalpy(t, w, p)
    return t, w, h


@compiled
def _too_warm(
    surface: float, t1: float, w1: float, h1: float, p: float, bf: float, fan_heat: float, high: float
) -> float:
    _, w, h = _leaving(surface, t1, w1, h1, p, bf)
    return _dry_bulb(h + fan_heat * (1.0 + w), w, p) - high


@compiled
def _surface_for(
    a: float, b: float, t1: float, w1: float, h1: float, p: float, bf: float, fan_heat: float, high: float
) -> float:
    """The surface between ``a`` and ``b`` at which the air behind the fan is at ``high``."""
    fa = _too_warm(a, t1, w1, h1, p, bf, fan_heat, high)
    fb = _too_warm(b, t1, w1, h1, p, bf, fan_heat, high)
    if abs(fa) < abs(fb):
        a, b, fa, fb = b, a, fb, fa
    for _ in range(_ROOT_STEPS):
        if abs(fb) <= _ROOT_TOLERANCE or abs(b - a) <= 1e-12:
            return b
        x = min(max(b - fb * (b - a) / (fb - fa), min(a, b)), max(a, b))
        fx = _too_warm(x, t1, w1, h1, p, bf, fan_heat, high)
        if fx * fb < 0.0:
            a, fa = b, fb
        else:
            weight = 1.0 - fx / fb
            fa *= weight if weight > 0.0 else 0.5
        b, fb = x, fx
    return math.nan


@compiled
def _imbalance(
    t: Any, w: Any, h: Any, p: float, moved: Any, water: float, carried: float
) -> tuple[float, float]:
    """Residuals of heat and water of three devices and of the whole, per kg dry air, as shares."""
    anew = (
        _enthalpy(t[0], w[0], p),
        _enthalpy(t[1], w[1], p),
        _enthalpy(t[2], w[1], p),
        _enthalpy(t[3], w[1], p),
    )
    coil = abs(anew[1] - anew[0] - moved[0] + carried)
    fan = abs(anew[2] - anew[1] - moved[1])
    reheat = abs(anew[3] - anew[2] - moved[2])
    whole = abs(anew[3] - anew[0] - moved[0] - moved[1] - moved[2] + carried)
    scale = max(abs(anew[0]), abs(anew[1]), abs(anew[2]), abs(anew[3]), 1.0)
    heat = max(coil, fan, reheat, whole) / scale
    return heat, abs(w[1] - w[0] + water) / max(w[0], 1e-6)


@compiled
def _year(  # noqa: C901, PLR0912, PLR0915 - one loop is the point of it
    month: Any,
    dry_bulb: Any,
    humidity_ratio: Any,
    pressure: Any,
    flow: float,
    t_set: float,
    low: float,
    high: float,
    bf: float,
    t_least: float,
    electric_work: float,
    fan_heat: float,
    heat_efficiency: float,
    cooling_cop: float,
) -> Any:
    sums = np.zeros((12, 12))
    counts = np.zeros((12, 14), dtype=np.int64)
    peaks = np.zeros((12, 3))
    at = np.zeros((12, 3), dtype=np.int64)
    residuals = np.zeros(2)
    at_set, at_least = _pure(t_set), _pure(t_least)
    at_worst, triple = _pure(t_set + UNMET_TOLERANCE), _pure(TRIPLE_POINT)
    for i in range(dry_bulb.size):
        t1, w1, p = dry_bulb[i], humidity_ratio[i], pressure[i]
        h1 = _enthalpy(t1, w1, p)
        w_set = _humidity_ratio(_enhanced(at_set, p), p)
        w_least = _humidity_ratio(_enhanced(at_least, p), p)
        t2, w2, h2 = t1, w1, h1
        held = False
        if w1 > w_set and w1 > w_least:
            w_surface = (w_set - bf * w1) / (1.0 - bf)
            if w_surface > w_least:
                adp = _dew_point(w_surface, p, triple)
                h_surface = _enthalpy(adp, w_surface, p)
                h2 = h_surface + bf * (h1 - h_surface)
                w2 = w_set
                t2 = _dry_bulb(h2, w2, p)
                if t2 < t_set:
                    t2 = t_set
                    h2 = _enthalpy(t2, w2, p)
            else:
                t2, w2, h2 = _leaving(min(t_least, t1), t1, w1, h1, p, bf)
                held = w2 >= w_set
                if not held:
                    t2, w2, h2 = t_set, w_set, _enthalpy(t_set, w_set, p)
        if not held and _dry_bulb(h2 + fan_heat * (1.0 + w2), w2, p) > high + _ROOT_TOLERANCE:
            least = min(t_least, t1)
            # a dry coil needs no search: what stands behind the fan says what must leave the coil
            h_dry = _enthalpy(high, w1, p) - fan_heat * (1.0 + w1)
            dry = _dry_bulb((h_dry - bf * h1) / (1.0 - bf), w1, p)
            if w2 == w1 and dry >= least and _saturated(dry, p) >= w1:
                t2, h2 = _dry_bulb(h_dry, w1, p), h_dry
            else:
                if _too_warm(least, t1, w1, h1, p, bf, fan_heat, high) >= 0.0:
                    surface = least
                else:
                    surface = _surface_for(least, t1, t1, w1, h1, p, bf, fan_heat, high)
                t2, w2, h2 = _leaving(surface, t1, w1, h1, p, bf)
        water = w1 - w2
        carried = water * _water_enthalpy(t2)
        removed = h1 - h2 - carried
        from_fan = fan_heat * (1.0 + w2)
        h3 = h2 + from_fan
        t3 = _dry_bulb(h3, w2, p)
        heat = _enthalpy(low, w2, p) - h3
        if heat <= NEGLIGIBLE_HEAT:
            heat = 0.0
        h4 = h3 + heat
        t4 = _dry_bulb(h4, w2, p)
        off_heat, off_water = _imbalance(
            (t1, t2, t3, t4), (w1, w2), (h1, h2, h3, h4), p, (-removed, from_fan, heat), water, carried
        )
        residuals[0] = max(residuals[0], off_heat)
        residuals[1] = max(residuals[1], off_water)

        k = month[i] - 1
        drying = water > 0.0
        cooling = removed > 0.0 or drying
        power = flow * electric_work * (1.0 + w2)
        if cooling:
            h_outdoor = _enthalpy(t1, w2, p)
            ceiling = max(h_outdoor, h2)
            sums[k, 0] += flow * removed
            sums[k, 1] += flow * (h_outdoor - h2)
            sums[k, 3] += flow * max(min(h3, ceiling) - min(h2, ceiling), 0.0)
            sums[k, 4] += flow * max(min(h4, ceiling) - min(h3, ceiling), 0.0)
            sums[k, 9] += flow * removed / cooling_cop
            if flow * removed > peaks[k, 0]:
                peaks[k, 0], at[k, 0] = flow * removed, i
        else:
            sums[k, 5] += flow * heat
        if drying:
            sums[k, 2] += flow * heat
            sums[k, 6] += flow * water * SECONDS_PER_HOUR
            sums[k, 10] += flow * heat / heat_efficiency
            counts[k, 1] += 1
            counts[k, 2] += heat > 0.0
            if flow * heat > peaks[k, 1]:
                peaks[k, 1], at[k, 1] = flow * heat, i
            if flow * water * SECONDS_PER_HOUR > peaks[k, 2]:
                peaks[k, 2], at[k, 2] = flow * water * SECONDS_PER_HOUR, i
            if t2 < TRIPLE_POINT:
                sums[k, 7] += flow * water * SECONDS_PER_HOUR
                counts[k, 3] += 1
        else:
            sums[k, 11] += flow * heat / heat_efficiency
        sums[k, 8] += power
        wet = w2 > _humidity_ratio(_enhanced(at_worst, p), p)
        warm, cold = t4 > high + UNMET_TOLERANCE, t4 < low - UNMET_TOLERANCE
        counts[k, 0] += 1
        counts[k, 4] += wet or warm or cold
        counts[k, 5] += wet
        counts[k, 6] += warm
        counts[k, 7] += cold
        if drying:
            mode = 13 if heat > 0.0 else 12
        elif cooling:
            mode = 11
        else:
            mode = 10 if heat > 0.0 else 9
        counts[k, mode] += 1
    return sums, counts, peaks, at, residuals


def run(duty: dict[str, float], weather: dict[str, Any]) -> dict[str, Any]:
    """Monthly sums, counts and peaks; ``weather`` holds arrays: month 1..12, degC, kg/kg, Pa.

    Raises
    ------
    ArithmeticError
        Heat or water does not balance.
    """
    sums, counts, peaks, at, residuals = _year(
        weather["month"],
        weather["dry_bulb"],
        weather["humidity_ratio"],
        weather["pressure"],
        duty["flow"],
        duty["dew_point"],
        duty["low"],
        duty["high"],
        duty["bypass_factor"],
        duty["least_surface_temperature"],
        duty["electric_work"],
        duty["fan_heat"],
        duty["heat_efficiency"],
        duty["cooling_cop"],
    )
    if not residuals.max() <= BALANCE_TOLERANCE:
        raise ArithmeticError(f"out of balance by {residuals.max():.2g}")
    found: dict[str, Any] = dict(zip(SUMS, sums.T.tolist(), strict=True))
    found |= dict(zip(COUNTS, counts.T.tolist(), strict=True))
    found |= dict(zip(PEAKS, peaks.T.tolist(), strict=True))
    found["cooling_undone_kwh"] = (sums[:, 3] + sums[:, 4]).tolist()
    found["electricity_kwh"] = (sums[:, 8] + sums[:, 9:].sum(axis=1)).tolist()
    found["peak hours"] = at
    return found


def columns(weather: Any) -> dict[str, Any]:
    """The arrays that the loop takes of a weather year."""
    return {
        "month": np.ascontiguousarray(weather.month),
        "dry_bulb": np.array(weather.dry_bulb),
        "humidity_ratio": np.array(weather.humidity_ratio),
        "pressure": np.array(weather.pressure),
    }
