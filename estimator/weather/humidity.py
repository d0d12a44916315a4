"""The two humidity columns of a weather file, and what each says of the other.

Below freezing neither column of these formats says whether it counts from saturation over water or over
ice. Stations of the weather services report both over water (WMO-No. 8, ch. 4, from memory); other sources
use ice. Dew point and relative humidity of one file agree with each other under one of the two, so the
convention is found by comparing them, and the comparison is made under the one that fits better.

The two saturation curves here are Magnus' form with the coefficients of WMO-No. 8 (annex 4.B, from memory):
valid -45..60 degC over water, -65..0 degC over ice, within 0.5 % there; they only compare and convert
columns that are themselves rounded to 1 % or 0.1 K. No state of the air is computed with them where
``moist_air`` can.
"""

from __future__ import annotations

from typing import Final, Literal

import numpy as np

from estimator import moist_air
from estimator.moist_air import Array

__all__ = ["Phase", "better_phase", "dew_point_from_relative_humidity", "relative_humidity_from_dew_point"]

Phase = Literal["water", "ice"]

_WATER: Final = (17.62, 243.12)
_ICE: Final = (22.46, 272.62)
#: Freezing hours that a file must have for its convention to be judged.
_ENOUGH: Final = 24


def _exponent(t: Array, phase: Phase) -> Array:
    """Logarithm of the saturation pressure over that at 0 degC; over ice only below 0 degC."""
    a, b = _WATER
    over_water = a * t / (b + t)
    if phase == "water":
        return over_water
    c, d = _ICE
    return np.where(t < 0.0, c * t / (d + t), over_water)


def relative_humidity_from_dew_point(t: Array, dew_point: Array, phase: Phase) -> Array:
    """Relative humidity, %, from dry bulb and dew point, degC, both counted over the same phase."""
    return np.asarray(100.0 * np.exp(_exponent(dew_point, phase) - _exponent(t, phase)))


def better_phase(t: Array, dew_point: Array, rh: Array) -> Phase:
    """The phase under which the file's own two columns agree better in the hours that tell the difference.

    Arrays of shape (hours,), NaN for missing, ``rh`` in %. "water" where fewer than 24 hours have a dry bulb
    or a dew point below freezing.
    """
    known = ((t < 0.0) | (dew_point < 0.0)) & ~np.isnan(dew_point) & ~np.isnan(rh)
    if np.count_nonzero(known) < _ENOUGH:
        return "water"
    t, dew_point, rh = t[known], dew_point[known], rh[known]
    phases: tuple[Phase, Phase] = ("water", "ice")
    off = [float(np.median(np.abs(relative_humidity_from_dew_point(t, dew_point, x) - rh))) for x in phases]
    return "ice" if off[1] < off[0] else "water"


def dew_point_from_relative_humidity(t: Array, rh: Array, p: Array, phase: Phase) -> Array:
    """Dew point, degC, from dry bulb, degC, relative humidity, %, and pressure, Pa.

    Above freezing exactly ``moist_air``'s; below, a dew point over the phase that the file's humidity
    refers to, so that it means what the file's own dew points mean. Never above the dry bulb. NaN where
    any argument is NaN or ``rh`` is 0, which says nothing of the dew point.
    """
    known = ~(np.isnan(t) | np.isnan(rh) | np.isnan(p)) & (rh > 0.0)
    out = np.full(t.shape, np.nan)
    if not known.any():
        return out
    t, fraction, p = t[known], np.minimum(rh[known], 100.0) / 100.0, p[known]
    if phase == "water":
        # moist_air counts from ice below freezing
        cold = np.minimum(t, 0.0)
        fraction = fraction * np.exp(_exponent(cold, "water") - _exponent(cold, "ice"))
    w = moist_air.humidity_ratio_from_relative_humidity(t, fraction, p)
    found = moist_air.dew_point(w, p)
    if phase == "water":
        a, b = _WATER
        x = _exponent(np.minimum(found, 0.0), "ice")
        found = np.where(found < 0.0, b * x / (a - x), found)
    out[known] = np.minimum(found, t)
    return out
