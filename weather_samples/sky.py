"""Sun, clear sky and cloud: radiation on the ground as means over each hour, W/m2.

Written out here in numpy, and not taken from a library, so that the samples stay what they are when a
library changes; the tests compare it with one.
"""
# ruff: noqa: INP001 - a neighbour of a script that is run by its path, not a package

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np
from numpy.typing import NDArray

__all__ = ["HOURS", "Clear", "Radiation", "clear_sky", "under_cloud"]

Array = NDArray[np.float64]

HOURS: Final = 8760
SOLAR_CONSTANT: Final = 1361.0  # W/m2 (Kopp and Lean 2011)
#: Moments of the hour over which the mean is taken.
_MOMENTS: Final = 12
#: Least mean sine of the sun's height at which a beam is told from the diffuse light.
_LOW_SUN: Final = 0.03
#: Clearness up to which all is diffuse, and from which the diffuse share stays the same.
_DULL, _BRIGHT = 0.22, 0.80


@dataclass(frozen=True, kw_only=True)
class Clear:
    """A cloudless year, each of shape (hours,)."""

    #: mean sine of the sun's height, 0 by night
    height: Array
    #: outside the atmosphere, on the horizontal
    extraterrestrial: Array
    #: on the horizontal, and the beam alone on a surface that faces it
    total: Array
    beam: Array


@dataclass(frozen=True, kw_only=True)
class Radiation:
    """Radiation on the ground, each of shape (hours,)."""

    global_horizontal: Array
    direct_normal: Array
    diffuse_horizontal: Array


def clear_sky(
    *, latitude: float, longitude: float, utc_offset: float, elevation: float, turbidity: float
) -> Clear:
    """The year without clouds, hours of standard time.

    Sun: Spencer 1971 (declination, equation of time, distance). Relative air mass: Kasten and Young 1989.
    Radiation: Ineichen and Perez 2002, with a turbidity (Linke) that stays the same all year. Formulas from
    memory, compared with pvlib by the tests.
    """
    clock = (np.arange(HOURS * _MOMENTS) + 0.5) / _MOMENTS
    b = 2.0 * np.pi * (clock - utc_offset) / 24.0 / 365.0
    declination = (
        0.006918
        - 0.399912 * np.cos(b)
        + 0.070257 * np.sin(b)
        - 0.006758 * np.cos(2 * b)
        + 0.000907 * np.sin(2 * b)
        - 0.002697 * np.cos(3 * b)
        + 0.00148 * np.sin(3 * b)
    )
    minutes = 229.18 * (
        0.000075
        + 0.001868 * np.cos(b)
        - 0.032077 * np.sin(b)
        - 0.014615 * np.cos(2 * b)
        - 0.040849 * np.sin(2 * b)
    )
    distance = (
        1.00011
        + 0.034221 * np.cos(b)
        + 0.00128 * np.sin(b)
        + 0.000719 * np.cos(2 * b)
        + 0.000077 * np.sin(2 * b)
    )
    solar = clock - utc_offset + longitude / 15.0 + minutes / 60.0
    phi = np.radians(latitude)
    sine = np.sin(phi) * np.sin(declination) + np.cos(phi) * np.cos(declination) * np.cos(
        np.pi * (solar - 12.0) / 12.0
    )
    up = sine > 0.0
    height = np.where(up, sine, 0.0)
    normal = SOLAR_CONSTANT * distance
    degrees = np.degrees(np.arcsin(np.clip(height, 0.0, 1.0)))
    thin = (1.0 - 2.25577e-5 * elevation) ** 5.2559  # the air above, against that above the sea
    air_mass = thin / (height + 0.50572 * (degrees + 6.07995) ** -1.6364)
    low, deep = np.exp(-elevation / 8000.0), np.exp(-elevation / 1250.0)
    thickness = (3.92e-5 * elevation + 0.0387) * air_mass * (low + deep * (turbidity - 1.0))
    total = (5.09e-5 * elevation + 0.868) * normal * height * np.exp(-thickness)
    beam = (0.664 + 0.163 / low) * normal * np.exp(-0.09 * air_mass * (turbidity - 1.0))
    most = total * (1.0 - (0.1 - 0.2 * np.exp(-turbidity)) / (0.1 + 0.882 / low)) / np.maximum(height, 1e-9)
    beam = np.where(up, np.minimum(beam, most), 0.0)
    return Clear(
        height=_hourly(height),
        extraterrestrial=_hourly(normal * height),
        total=_hourly(total),
        beam=_hourly(beam),
    )


def under_cloud(clear: Clear, cover: Array) -> Radiation:
    """What is left under a cloud cover, 0..1, shape (hours,).

    Total: Kasten and Czeplak 1980. Diffuse share by clearness: Erbs, Klein and Duffie 1982. From memory.
    The three agree: total = diffuse + beam x mean sine of the sun's height.
    """
    total = clear.total * (1.0 - 0.75 * cover**3.4)
    lit = clear.height > _LOW_SUN
    height = np.where(lit, clear.height, 1.0)
    k = np.where(lit, total / np.where(lit, clear.extraterrestrial, 1.0), 0.0)
    share = np.select(
        [k <= _DULL, k <= _BRIGHT],
        [
            1.0 - 0.09 * k,
            0.9511 + k * (-0.1604 + k * (4.388 + k * (-16.638 + k * 12.336))),
        ],
        0.165,
    )
    beam = np.where(lit, np.minimum(total * (1.0 - share) / height, clear.beam), 0.0)
    return Radiation(
        global_horizontal=total,
        direct_normal=beam,
        diffuse_horizontal=total - beam * np.where(lit, clear.height, 0.0),
    )


def _hourly(values: Array) -> Array:
    return np.asarray(values.reshape(HOURS, _MOMENTS).mean(axis=1))
