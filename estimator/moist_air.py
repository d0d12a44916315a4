"""Moist-air properties: pure functions of arrays, SI, float64.

Arguments broadcast against each other like numpy's own; a result has the broadcast shape. Units:
temperatures ``t`` in degC, pressures ``p`` in Pa, humidity ratios ``w`` in kg water per kg dry air,
enthalpies ``h`` in kJ per kg dry air (zero for dry air at 0 degC and 101 325 Pa, and for liquid
water at the triple point), volumes in m3 per kg dry air. Relative humidity is a fraction.

Saturation is over ice below 0.01 degC and over liquid water from there on; a dew point below
0.01 degC is therefore a frost point.

Validity: saturation -60..70 degC; enthalpy -45..65 degC with ``w`` up to 0.12; both for
55..108 kPa. Nothing is clamped: a value outside gives an extrapolated number, and the callers that
read files and settings refuse values far outside. NaN in gives NaN out.

Every inverse takes a fixed number of steps and then checks its residual, so that an element's result
does not depend on what else stands in the array; it raises ``ConvergenceError`` where the residual
exceeds 1e-6 K.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from estimator.constants import (
    GAS_CONSTANT_DRY_AIR,
    MOLE_MASS_RATIO,
    STANDARD_PRESSURE,
    TEMPERATURE_TOLERANCE,
    TRIPLE_POINT,
    ZERO_CELSIUS,
)
from estimator.errors import ConvergenceError

Array: TypeAlias = NDArray[np.float64]
#: What the functions accept.
ArrayLike: TypeAlias = Array | float

__all__ = [
    "Array",
    "ArrayLike",
    "Mixture",
    "adiabatic_saturation_temperature",
    "dew_point",
    "dry_bulb_from_enthalpy",
    "enhancement_factor",
    "enthalpy",
    "humidity_ratio_from_relative_humidity",
    "humidity_ratio_from_vapour_pressure",
    "humidity_ratio_from_wet_bulb",
    "ice_enthalpy",
    "liquid_water_enthalpy",
    "relative_humidity",
    "saturated_from_enthalpy",
    "saturation_humidity_ratio",
    "saturation_pressure",
    "specific_volume",
    "standard_atmosphere",
    "vapour_pressure",
    "water_enthalpy",
    "wet_bulb",
]

# Saturation pressure, ln(p/Pa) = c0/T + c1 + c2 T + ... + c ln T: Hyland and Wexler 1983, as printed in
# ASHRAE Handbook Fundamentals 2021, ch. 1, eq. 5 (ice, -100..0 degC) and eq. 6 (liquid, 0..200 degC).
_ICE: Final = (
    -5.6745359e3,
    6.3925247,
    -9.677843e-3,
    6.2215701e-7,
    2.0747825e-9,
    -9.484024e-13,
    4.1635019,
)
_LIQUID: Final = (
    -5.8002206e3,
    1.3914993,
    -4.8640239e-2,
    4.1764768e-5,
    -1.4452093e-8,
    0.0,
    6.5459673,
)

# Enhancement factor, ln f = alpha (1 - e/p) + exp(beta) (p/e - 1), t in degC: Hardy 1998 (the ITS-90 form
# of Greenspan 1976). Coefficients from memory; tests/published checks them against CoolProp.
_ALPHA_LIQUID: Final = (3.53624e-4, 2.9328363e-5, 2.6168979e-7, 8.5813609e-9)
_BETA_LIQUID: Final = (-1.07588e1, 6.3268134e-2, -2.5368934e-4, 6.3405286e-7)
_ALPHA_ICE: Final = (3.64449e-4, 2.9367585e-5, 4.8874766e-7, 4.3669918e-9)
_BETA_ICE: Final = (-1.07271e1, 7.6215115e-2, -1.7490155e-4, 2.4668279e-6)

# Enthalpy of moist air: a fit, made by tests/generators/fit_moist_air.py to CoolProp's humid air over
# -45..65 degC, 55..108 kPa, 0..100 %, w up to 0.12; largest difference there 0.0075 kJ/kg. With
# q = p/101325 it has the shape of a gas mixture with second virial coefficients, kept quadratic in t so
# that its inverse is exact:
#   h = a1 t + a2 t^2 + w (b0 + b1 t) + (q - 1)(c0 + c1 t + c2 t^2) + q w (d0 + w (e0 + e1 t))
_A1: Final = 1.0059195
_A2: Final = 1.0635195e-05
_B0: Final = 2500.2309
_B1: Final = 1.8891728
_C0: Final = -0.27819694
_C1: Final = 0.0020810733
_C2: Final = -8.2351713e-06
_D0: Final = -1.0231615
_E0: Final = -60.977167
_E1: Final = 0.53549112

# Enthalpy of saturated liquid water, kJ/kg, powers of t ascending: a fit by the same generator to
# CoolProp's water (IAPWS-95) over 0.01..60 degC; largest difference 0.004 kJ/kg.
_WATER: Final = (-0.0378134822, 4.21726162, -1.33887622e-3, 2.00856951e-5, -1.03303734e-7)

# Enthalpy of ice, kJ/kg, powers of t ascending: a fit of degree 2 to IAPWS R10-06 (2009) over
# -40..0.01 degC (tests/published/water_reference.py computes it); largest difference 0.002 kJ/kg.
_ICE_ENTHALPY: Final = (-333.466743, 2.09617269, 3.65397765e-3)

_DEW_POINT_STEPS: Final = 3
_SATURATION_STEPS: Final = 7
_STRAIGHTENING: Final = 20.0


def _log_pressure(kelvin: ArrayLike, c: tuple[float, ...]) -> Array:
    c0, c1, c2, c3, c4, c5, c_log = c
    polynomial = c1 + kelvin * (c2 + kelvin * (c3 + kelvin * (c4 + kelvin * c5)))
    return np.asarray(c0 / kelvin + polynomial + c_log * np.log(kelvin))


def _log_pressure_slope(kelvin: ArrayLike, c: tuple[float, ...]) -> Array:
    c0, _, c2, c3, c4, c5, c_log = c
    slope = (c_log - c0 / kelvin) / kelvin
    return np.asarray(slope + c2 + kelvin * (2 * c3 + kelvin * (3 * c4 + kelvin * 4 * c5)))


def _cubic(t: ArrayLike, c: tuple[float, ...]) -> Any:
    return c[0] + t * (c[1] + t * (c[2] + t * c[3]))


def _log_enhancement(t: ArrayLike, p: ArrayLike, e: ArrayLike, ice: bool) -> Array:
    alpha, beta = (_ALPHA_ICE, _BETA_ICE) if ice else (_ALPHA_LIQUID, _BETA_LIQUID)
    ratio = p / e
    if ice:
        # moved by at most 0.013 %, so that both curves meet at the triple point and have one inverse
        triple = p / _TRIPLE_PRESSURE
        meet = _MEET_ALPHA * (1.0 - 1.0 / triple) + _MEET_BETA * (triple - 1.0) + _MEET_PRESSURE
    log_f = _cubic(t, alpha) * (1.0 - 1.0 / ratio) + np.exp(_cubic(t, beta)) * (ratio - 1.0)
    return np.asarray(log_f + meet if ice else log_f)


# What separates the two branches at the triple point, where they have to meet.
_TRIPLE_PRESSURE: Final = float(np.exp(_log_pressure(TRIPLE_POINT + ZERO_CELSIUS, _LIQUID)))
_MEET_PRESSURE: Final = float(
    _log_pressure(TRIPLE_POINT + ZERO_CELSIUS, _LIQUID) - _log_pressure(TRIPLE_POINT + ZERO_CELSIUS, _ICE)
)
_MEET_ALPHA: Final = _cubic(TRIPLE_POINT, _ALPHA_LIQUID) - _cubic(TRIPLE_POINT, _ALPHA_ICE)
_MEET_BETA: Final = float(
    np.exp(_cubic(TRIPLE_POINT, _BETA_LIQUID)) - np.exp(_cubic(TRIPLE_POINT, _BETA_ICE))
)


def _branch_pressure(t: ArrayLike, p: ArrayLike, ice: bool) -> Array:
    """Partial pressure of water in air saturated over one phase, Pa."""
    e = np.exp(_log_pressure(t + ZERO_CELSIUS, _ICE if ice else _LIQUID))
    return e * np.exp(_log_enhancement(t, p, e, ice))


def _by_phase(ice: NDArray[np.bool_], function: Callable[..., Array], *arguments: ArrayLike) -> Array:
    """``function(*arguments, ice=...)`` with each element on its own branch, evaluated once each."""
    if not ice.any():
        return np.asarray(function(*arguments, False))
    if ice.all():
        return np.asarray(function(*arguments, True))
    full = np.broadcast_arrays(*arguments)
    ice = np.broadcast_to(ice, full[0].shape)
    out = np.empty(full[0].shape)
    for phase, mask in ((True, ice), (False, ~ice)):
        out[mask] = function(*(a[mask] for a in full), phase)
    return out


def _over_ice(t: ArrayLike) -> NDArray[np.bool_]:
    return np.asarray(np.asarray(t) < TRIPLE_POINT)


def saturation_pressure(t: ArrayLike) -> Array:
    """Saturation pressure of pure water, Pa, over ice below 0.01 degC.

    Source: Hyland and Wexler 1983 (ASHRAE Handbook Fundamentals 2021, ch. 1, eq. 5 and 6).
    Valid -100..200 degC.

    >>> round(float(saturation_pressure(10.0)), 1)
    1228.0
    """

    def branch(t: ArrayLike, ice: bool) -> Array:
        return np.exp(_log_pressure(t + ZERO_CELSIUS, _ICE if ice else _LIQUID))

    return _by_phase(_over_ice(t), branch, t)


def enhancement_factor(t: ArrayLike, p: ArrayLike) -> Array:
    """How much more water air holds at ``t`` and ``p`` than an ideal gas would, dimensionless.

    Source: Hardy 1998 (ITS-90 form of Greenspan 1976). Valid -100..100 degC.
    """
    return _by_phase(_over_ice(t), _branch_pressure, t, p) / saturation_pressure(t)


def humidity_ratio_from_vapour_pressure(e: ArrayLike, p: ArrayLike) -> Array:
    """Humidity ratio, kg/kg, from the partial pressure of water ``e``, Pa (ASHRAE 2021, ch. 1, eq. 20)."""
    return np.asarray(MOLE_MASS_RATIO * e / (p - e))


def vapour_pressure(w: ArrayLike, p: ArrayLike) -> Array:
    """Partial pressure of water, Pa, in air of humidity ratio ``w`` (ASHRAE 2021, ch. 1, eq. 20 solved)."""
    return np.asarray(p * w / (MOLE_MASS_RATIO + w))


def saturation_humidity_ratio(t: ArrayLike, p: ArrayLike) -> Array:
    """Humidity ratio of saturated air, kg/kg; with a dew point for ``t``, the air's own humidity ratio.

    Source: ASHRAE Handbook Fundamentals 2021, ch. 1, eq. 20 and 21 with the enhancement factor.
    Within 0.04 % of CoolProp for -30..60 degC and 0.05 % from -45 degC up, 60..106 kPa.

    >>> round(float(saturation_humidity_ratio(20.0, 101325.0)), 5)
    0.01476
    """
    return humidity_ratio_from_vapour_pressure(_by_phase(_over_ice(t), _branch_pressure, t, p), p)


def humidity_ratio_from_relative_humidity(t: ArrayLike, rh: ArrayLike, p: ArrayLike) -> Array:
    """Humidity ratio, kg/kg, from relative humidity as a fraction of the saturation mole fraction.

    Source: ASHRAE Handbook Fundamentals 2021, ch. 1, eq. 12. Saturation is over ice below 0.01 degC.
    """
    e = rh * _by_phase(_over_ice(t), _branch_pressure, t, p)
    return humidity_ratio_from_vapour_pressure(e, p)


def relative_humidity(t: ArrayLike, w: ArrayLike, p: ArrayLike) -> Array:
    """Relative humidity as a fraction (ASHRAE 2021, ch. 1, eq. 12); above 1 for a supersaturated state."""
    return vapour_pressure(w, p) / _by_phase(_over_ice(t), _branch_pressure, t, p)


def specific_volume(t: ArrayLike, w: ArrayLike, p: ArrayLike) -> Array:
    """Volume of moist air, m3 per kg dry air, as a perfect gas (ASHRAE 2021, ch. 1, eq. 26).

    Within 0.12 % of CoolProp for -30..50 degC, 60..106 kPa.
    """
    kelvin = t + ZERO_CELSIUS
    return np.asarray(GAS_CONSTANT_DRY_AIR * kelvin * (1.0 + w / MOLE_MASS_RATIO) / p)


@dataclass(frozen=True, slots=True, eq=False)
class Mixture:
    """Air of one humidity ratio and pressure at any temperature: ``h = a + b t + c t^2``.

    Nothing here depends on temperature or enthalpy, so states that differ in nothing else share it.
    """

    a: Array
    b: Array
    c: Array

    @classmethod
    def of(cls, w: ArrayLike, p: ArrayLike) -> Mixture:
        """The mixture of this humidity ratio, kg/kg, at this pressure, Pa."""
        q = p / STANDARD_PRESSURE
        over = q - 1.0
        qw = q * w
        a = w * _B0 + _C0 * over + qw * (_D0 + _E0 * w)
        b = _A1 + _C1 * over + w * (_B1 + _E1 * qw)
        c = _A2 + _C2 * over
        return cls(np.asarray(a), np.asarray(b), np.asarray(c))

    def enthalpy(self, t: ArrayLike) -> Array:
        """Enthalpy at ``t``, kJ/kg."""
        return np.asarray(self.a + t * (self.b + t * self.c))

    def dry_bulb(self, h: ArrayLike) -> Array:
        """Dry bulb, degC, at the enthalpy ``h``."""
        above = h - self.a
        return np.asarray(2.0 * above / (self.b + np.sqrt(self.b * self.b + 4.0 * self.c * above)))


def enthalpy(t: ArrayLike, w: ArrayLike, p: ArrayLike) -> Array:
    """Enthalpy of moist air, kJ per kg dry air.

    A fit to a real-gas formulation (see the coefficients), within 0.0075 kJ/kg of CoolProp's humid air for
    -45..65 degC, 55..108 kPa, ``w`` up to 0.12.

    >>> round(float(enthalpy(30.0, 0.027333, 101325.0)), 1)
    100.0
    """
    return Mixture.of(w, p).enthalpy(t)


def dry_bulb_from_enthalpy(h: ArrayLike, w: ArrayLike, p: ArrayLike) -> Array:
    """Dry bulb, degC, of air of enthalpy ``h`` and humidity ratio ``w``: the exact inverse of ``enthalpy``.

    >>> round(float(dry_bulb_from_enthalpy(enthalpy(31.7, 0.012, 9e4), 0.012, 9e4)), 9)
    31.7
    """
    return Mixture.of(w, p).dry_bulb(h)


def liquid_water_enthalpy(t: ArrayLike) -> Array:
    """Enthalpy of liquid water, kJ/kg. A fit, within 0.004 kJ/kg of IAPWS-95 for 0..60 degC."""
    c0, c1, c2, c3, c4 = _WATER
    return np.asarray(c0 + t * (c1 + t * (c2 + t * (c3 + t * c4))))


def ice_enthalpy(t: ArrayLike) -> Array:
    """Enthalpy of ice, kJ/kg. A fit, within 0.003 kJ/kg of IAPWS R10-06 for -40..0.01 degC."""
    c0, c1, c2 = _ICE_ENTHALPY
    return np.asarray(c0 + t * (c1 + t * c2))


def water_enthalpy(t: ArrayLike) -> Array:
    """Enthalpy of water that leaves at ``t``, kJ/kg: ice below 0.01 degC, liquid from there on."""
    ice = _over_ice(t)
    liquid = liquid_water_enthalpy(t)
    return np.where(ice, ice_enthalpy(t), liquid) if ice.any() else liquid


def standard_atmosphere(elevation: ArrayLike) -> Array:
    """Pressure of the standard atmosphere, Pa, at ``elevation`` in m (ASHRAE 2021, ch. 1, eq. 3).

    Valid -5000..11 000 m.
    """
    return np.asarray(STANDARD_PRESSURE * np.exp(5.2559 * np.log(1.0 - 2.25577e-5 * elevation)))


def dew_point(w: ArrayLike, p: ArrayLike) -> Array:
    """Dew point, degC (frost point below 0.01 degC), of air of humidity ratio ``w``.

    The inverse of ``saturation_humidity_ratio`` by Newton's rule on the logarithm of the vapour pressure.
    Valid -60..70 degC. Dry air (``w`` of 0) has none: -inf.

    >>> round(float(dew_point(saturation_humidity_ratio(-12.3, 8e4), 8e4)), 6)
    -12.3
    """
    e = vapour_pressure(w, p)
    # air lifts the saturation pressure by less than a tenth, so far from it the pure water's decides
    ice = np.asarray(e < _TRIPLE_PRESSURE)
    if np.any(ice != (e < 1.1 * _TRIPLE_PRESSURE)):
        ice = np.asarray(e < _branch_pressure(TRIPLE_POINT, p, ice=False))
    return _by_phase(ice, _branch_dew_point, e, p)


def _branch_dew_point(e: ArrayLike, p: ArrayLike, ice: bool) -> Array:
    c = _ICE if ice else _LIQUID
    with np.errstate(divide="ignore", invalid="ignore"):
        log_e = np.log(e)
    # Magnus' form inverted (WMO-No. 8 coefficients, from memory) is within 0.1 K to start from
    magnus, offset = (22.46, 272.62) if ice else (17.62, 243.12)
    x = log_e - np.log(611.2)
    dry = np.isneginf(x)
    any_dry = dry.any()
    if any_dry:
        x = np.where(dry, -5.0, x)
    t = np.asarray(offset * x / (magnus - x))
    correction = np.zeros_like(t)
    for step in range(_DEW_POINT_STEPS):
        kelvin = t + ZERO_CELSIUS
        log_pure = _log_pressure(kelvin, c)
        residual = log_pure + _log_enhancement(t, p, np.exp(log_pure), ice) - log_e
        correction = residual / _log_pressure_slope(kelvin, c)
        if any_dry:
            correction = np.where(dry, 0.0, correction)
        if step < _DEW_POINT_STEPS - 1:
            t = t - correction
    _check_residual("dew point", correction, e, p)
    return np.where(dry, -np.inf, t) if any_dry else t


def _saturation_curve(t: ArrayLike, p: ArrayLike, ice: bool) -> tuple[Array, Array]:
    """Humidity ratio of saturated air over one phase and its slope with temperature."""
    w = humidity_ratio_from_vapour_pressure(_branch_pressure(t, p, ice), p)
    slope = w * (1.0 + w / MOLE_MASS_RATIO)
    return w, slope * _log_pressure_slope(t + ZERO_CELSIUS, _ICE if ice else _LIQUID)


def adiabatic_saturation_temperature(h: ArrayLike, w: ArrayLike, p: ArrayLike) -> Array:
    """Temperature, degC, at which air of enthalpy ``h`` and humidity ratio ``w`` is saturated adiabatically.

    Solves ``h + (w_s(t) - w) h_w(t) = h_s(t)`` (ASHRAE 2021, ch. 1, eq. 33), ``h_w`` being the enthalpy of
    the water taken up, or of the water drained where the state given is supersaturated (fog). Of the two
    solutions near 0 degC the one over liquid water is returned; ice only where there is no other.
    """
    h, w, p = np.broadcast_arrays(h, w, p)
    at_triple = _saturation_excess(np.full(h.shape, TRIPLE_POINT), h, w, p, False)[0]
    return _by_phase(np.asarray(at_triple > 0.0), _branch_saturation_temperature, h, w, p)


def _saturation_excess(t: Array, h: Array, w: Array, p: Array, ice: bool) -> tuple[Array, Array]:
    """What saturated air at ``t`` holds over the state given, kJ/kg, and its slope with ``t``."""
    w_s, w_slope = _saturation_curve(t, p, ice)
    h_w = ice_enthalpy(t) if ice else liquid_water_enthalpy(t)
    excess = enthalpy(t, w_s, p) - h - (w_s - w) * h_w
    slope = _A1 + _B1 * w_s + w_slope * (_B0 + _B1 * t - h_w) - (w_s - w) * (2.1 if ice else 4.19)
    return excess, slope


def _branch_saturation_temperature(h: Array, w: Array, p: Array, ice: bool) -> Array:
    t = _solve_saturation("adiabatic saturation temperature", _saturation_excess, h, w, p, ice)
    # fog whose drained water freezes in part stays at the triple point until all of it has frozen
    return np.minimum(t, TRIPLE_POINT) if ice else t


def wet_bulb(t: ArrayLike, w: ArrayLike, p: ArrayLike) -> Array:
    """Thermodynamic wet bulb, degC; over liquid water where a solution exists there (see above).

    >>> round(float(wet_bulb(25.0, saturation_humidity_ratio(25.0, 1e5), 1e5)), 6)
    25.0
    """
    return adiabatic_saturation_temperature(enthalpy(t, w, p), w, p)


def humidity_ratio_from_wet_bulb(t: ArrayLike, wet_bulb: ArrayLike, p: ArrayLike) -> Array:
    """Humidity ratio, kg/kg, of air of this dry bulb and thermodynamic wet bulb; over ice below 0.01 degC.

    The exact inverse of ``wet_bulb`` (ASHRAE 2021, ch. 1, eq. 33), in which enthalpy is quadratic in the
    humidity ratio. Negative where even dry air has a higher wet bulb.

    >>> w = humidity_ratio_from_wet_bulb(40.0, 20.0, 101325.0)
    >>> round(float(wet_bulb(40.0, w, 101325.0)), 6)
    20.0
    """
    w_s = saturation_humidity_ratio(wet_bulb, p)
    h_w = water_enthalpy(wet_bulb)
    q = p / STANDARD_PRESSURE
    square = q * (_E0 + _E1 * t)
    linear = _B0 + _B1 * t + q * _D0 - h_w
    rest = enthalpy(t, 0.0, p) + w_s * h_w - enthalpy(wet_bulb, w_s, p)
    return np.asarray(-2.0 * rest / (linear + np.sqrt(linear * linear - 4.0 * square * rest)))


def saturated_from_enthalpy(h: ArrayLike, p: ArrayLike, water: ArrayLike = 0.0) -> Array:
    """Temperature, degC, of the saturated air for which ``h_s - w_s * water`` equals ``h``.

    With ``water`` of 0 (the default) that is saturated air of enthalpy ``h``; with the enthalpy of the
    water that leaves, kJ/kg, it is the surface at the end of a coil's process line.
    Valid -45..65 degC.
    """
    h, p, water = np.broadcast_arrays(h, p, water)
    at_triple = _curve_excess(np.full(h.shape, TRIPLE_POINT), h, p, water, False)[0]
    return _by_phase(np.asarray(at_triple > 0.0), _branch_from_enthalpy, h, p, water)


def _curve_excess(t: Array, h: Array, p: Array, water: Array, ice: bool) -> tuple[Array, Array]:
    w_s, w_slope = _saturation_curve(t, p, ice)
    excess = enthalpy(t, w_s, p) - w_s * water - h
    return excess, _A1 + _B1 * w_s + w_slope * (_B0 + _B1 * t - water)


def _branch_from_enthalpy(h: Array, p: Array, water: Array, ice: bool) -> Array:
    return _solve_saturation("saturated state of given enthalpy", _curve_excess, h, p, water, ice)


def _solve_saturation(
    what: str,
    excess_of: Callable[..., tuple[Array, Array]],
    h: Array,
    x: Array,
    y: Array,
    ice: bool,
) -> Array:
    """The root of ``excess_of(t, h, x, y, ice)``, an enthalpy along the saturation curve less ``h``."""
    # along the liquid curve ln(enthalpy + 20 kJ/kg) is nearly straight in t, so Newton's rule on it needs
    # few steps from anywhere; the ice curve is nearly straight as it is, and bends away from its warm end
    t = np.full(h.shape, 0.0 if ice else 20.0)
    base = h + _STRAIGHTENING
    excess = slope = np.ones_like(t)
    with np.errstate(all="ignore"):
        for step in range(_SATURATION_STEPS):
            excess, slope = excess_of(t, h, x, y, ice)
            if step < _SATURATION_STEPS - 1:
                t = t - (excess if ice else (base + excess) * np.log1p(excess / base)) / slope
    _check_residual(what, excess / slope, h, x, y)
    return t


def _check_residual(what: str, error: Array, *given: ArrayLike) -> None:
    """Refuse a residual above the tolerance; NaN is right only where something given was NaN."""
    missed = ~(np.abs(error) <= TEMPERATURE_TOLERANCE)
    if missed.any() and np.any(missed & ~np.isnan(sum(given))):
        raise ConvergenceError(
            f"{what}: not found to {TEMPERATURE_TOLERANCE:g} K in the fixed number of steps; "
            "an argument lies outside the range this function is valid for"
        )
