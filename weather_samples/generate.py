#!/usr/bin/env python3
"""Make the six sample years: ``python weather_samples/generate.py [--out DIR]``.

Each year is synthetic: a climate written down in ``sites.py``, spells of weather from a seeded generator,
and the sun. Running it again makes the same bytes. How it works is told in docs/sample-climates.md.
"""

from __future__ import annotations

import argparse
import itertools
import sys
from collections.abc import Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Final

import numpy as np
from numpy.typing import NDArray
from sites import SITES, Site
from sky import HOURS, Radiation, clear_sky, under_cloud
from spells import Chance, air_masses, drift, long_tailed, relaxed, showers

__all__ = ["Weather", "epw", "make", "write_all"]

Array = NDArray[np.float64]

#: A year without 29 February whose 1 January is a Monday. It stands for no year in particular.
YEAR: Final = 2001
#: Digits to which the model's values are rounded before they are printed: far above what computers differ
#: by in the last bit of a sine, far below what is printed.
_SETTLED: Final = 6
_LENGTHS: Final = (31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31)
_STANDARD_PRESSURE: Final = 101_325.0

#: Share of a month's own departure that is taken out of it.
_PICKED: Final = 0.85

#: The ground follows the sun within these hours: its skin, and what lies beneath.
_SKIN, _BELOW = 3.0, 20.0
#: Loss of heat to a clear sky, W/m2, in the units in which the sun is the gain.
_SKY: Final = 75.0
#: Width of the range in which air nears saturation, K, and the share of the excess that the heat of
#: condensation gives back to the dry bulb.
_NEAR, _GIVEN_BACK = 1.0, 0.5
#: Cloud cover reacts this strongly to its spells (a logistic curve: mostly clear or mostly covered).
_CLOUD_GAIN: Final = 2.0
#: A shower cools by this share of the wet-bulb-like part of the depression, K at most.
_SHOWER_SHARE, _SHOWER_MOST = 0.55, 7.0
#: The atmosphere's half-daily tide at the equator, Pa (common knowledge: about 1.2 hPa).
_TIDE: Final = 120.0


@dataclass(frozen=True, kw_only=True)
class Weather:
    """A finished year as printed, each of shape (hours,): degC, %, Pa, W/m2, tenths, degrees, m/s."""

    dry_bulb: Array
    dew_point: Array
    humidity: Array
    pressure: Array
    radiation: Radiation
    cover: Array
    wind_from: Array
    wind: Array


def make(site: Site) -> Weather:
    """The year of a site."""
    chance = Chance(site.seed)
    clear = clear_sky(
        latitude=site.latitude,
        longitude=site.longitude,
        utc_offset=site.utc_offset,
        elevation=site.elevation,
        turbidity=site.turbidity,
    )
    warmth, moisture = _spells(site, chance)
    noon = 12.0 - site.longitude / 15.0 + site.utc_offset
    odds = np.clip(_monthly(site.shower) * (1.0 + 0.35 * moisture), 0.0, 1.0)
    rain, cooled = showers(chance, odds.reshape(-1, 24)[:, 12], noon)
    cover = np.maximum(_cloud(site, chance, moisture, noon), rain)
    radiation = under_cloud(clear, cover)

    sun = _from_the_sun(site, radiation, cover)
    flutter_t, flutter_d = site.flutter
    dry_bulb = (
        _monthly(site.dry_bulb)
        + _monthly(site.dry_bulb_spread) * warmth
        + sun
        + flutter_t * drift(chance, HOURS, 2.0)
    )
    dew_point = (
        _monthly(site.dew_point)
        + _monthly(site.dew_point_spread) * moisture
        - site.mixing * sun / _monthly(site.sun_range)
        + flutter_d * drift(chance, HOURS, 3.0)
    )
    drop = cooled * np.minimum(_SHOWER_SHARE * np.maximum(dry_bulb - dew_point, 0.0), _SHOWER_MOST)
    dry_bulb, dew_point = _condensed(dry_bulb - drop, dew_point + 0.3 * drop)
    wind, wind_from = _wind(site, chance, sun, moisture)
    pressure = _pressure(site, chance, warmth, noon)
    return _printed(dry_bulb, dew_point, pressure, radiation, cover, wind, wind_from)


def _monthly(table: Sequence[float]) -> Array:
    """A table of months as hours: straight lines between the middles of the months."""
    middles = 24.0 * (np.cumsum(_LENGTHS) - np.array(_LENGTHS) / 2.0)
    return np.interp(np.arange(HOURS) + 0.5, middles, np.array(table), period=HOURS)


def _spells(site: Site, chance: Chance) -> tuple[Array, Array]:
    """Departures of dry bulb and dew point from the season, of variance 1, which belong together."""
    masses = air_masses(chance, HOURS, site.air_mass, 2)
    first, second = (
        np.sqrt(site.fronts) * mass + np.sqrt(1.0 - site.fronts) * drift(chance, HOURS, 40.0, 8.0)
        for mass in masses
    )
    together = _monthly(site.together)
    other = together * first + np.sqrt(1.0 - together**2) * second
    return _typical(long_tailed(other, site.skew)), _typical(long_tailed(first, site.skew))


def _typical(spells: Array) -> Array:
    """Spells whose months depart less from the season than a month of any one year would.

    A typical year is put together of months picked for being usual; these stand in for such months.
    """
    ends = np.cumsum((0, *_LENGTHS)) * 24
    means = [float(spells[a:b].mean()) for a, b in itertools.pairwise(ends)]
    usual = spells - _PICKED * _monthly(means)
    return np.asarray(usual / np.sqrt((usual**2).mean()))


def _cloud(site: Site, chance: Chance, moisture: Array, noon: float) -> Array:
    """Cloud cover, 0..1, denser in moist spells and, where the site has it so, in the afternoon."""
    usual = _monthly(site.cloud)
    own = drift(chance, HOURS, 14.0, 3.0)
    clock = np.arange(HOURS) % 24 + 0.5
    afternoon = site.afternoon_cloud * np.cos(2.0 * np.pi * (clock - noon - 3.0) / 24.0)
    level = 1.5 * np.log(usual / (1.0 - usual)) + afternoon + _CLOUD_GAIN * (0.45 * moisture + 0.9 * own)
    return np.asarray(1.0 / (1.0 + np.exp(-level)))


def _from_the_sun(site: Site, radiation: Radiation, cover: Array) -> Array:
    """What sun and clear sky do to the dry bulb, K, with the site's mean daily range and no yearly mean.

    A cloudy day is flat and a clear night cold; the season's own mean stands in the site's table and is
    taken out here.
    """
    gain = radiation.global_horizontal - _SKY * (1.0 - 0.7 * cover**2)
    gain = np.concatenate((gain[-10 * 24 :], gain))  # the end of the year, to start warm
    course = relaxed(gain, _SKIN) + 1.5 * relaxed(gain, _BELOW)
    course = _of_range_one(0.5 * (course[10 * 24 - 1 : -1] + course[10 * 24 :]))
    breeze = course / (1.0 + site.sea_breeze * np.maximum(course, 0.0))
    return _of_range_one(breeze) * _monthly(site.sun_range)


def _of_range_one(course: Array) -> Array:
    """``course`` without its season, and so that its daily range is about 1 in every season."""
    course = course - _season(course)
    daily = course.reshape(-1, 24)
    return np.asarray(course / _season(np.repeat(daily.max(axis=1) - daily.min(axis=1), 24)))


def _season(values: Array) -> Array:
    """The mean and the first three yearly waves of ``values``, shape (hours,)."""
    angle = 2.0 * np.pi * (np.arange(HOURS) + 0.5) / HOURS
    out = np.full(HOURS, values.mean())
    for wave in (1, 2, 3):
        for shape in (np.cos(wave * angle), np.sin(wave * angle)):
            out += 2.0 * (values * shape).mean() * shape
    return out


def _condensed(dry_bulb: Array, dew_point: Array) -> tuple[Array, Array]:
    """Dew and fog: what lies above saturation leaves as water, and warms the air by part of it."""
    gap = (dry_bulb - dew_point) / _NEAR
    depression = _NEAR * (np.maximum(gap, 0.0) + np.log1p(np.exp(-np.abs(gap))))
    dry_bulb = dry_bulb + _GIVEN_BACK * (depression - _NEAR * gap)
    return dry_bulb, dry_bulb - depression


def _pressure(site: Site, chance: Chance, warmth: Array, noon: float) -> Array:
    """Station pressure, Pa: the standard atmosphere, season, lows in warm spells, the half-daily tide."""
    share = (1.0 - 2.25577e-5 * site.elevation) ** 5.2559
    hour = np.arange(HOURS) + 0.5
    winter = np.cos(2.0 * np.pi * (hour / 24.0 - 15.0) / 365.0) * (1.0 if site.latitude > 0.0 else -1.0)
    tide = _TIDE * np.cos(np.radians(site.latitude)) ** 3 * np.cos(4.0 * np.pi * (hour - noon + 2.0) / 24.0)
    spell = 0.85 * drift(chance, HOURS, 50.0, 12.0) - 0.5 * relaxed(warmth, 12.0)
    change = site.pressure_season * winter + site.pressure_spread * spell + tide * share
    return np.asarray(_STANDARD_PRESSURE * share + change)


def _wind(site: Site, chance: Chance, sun: Array, moisture: Array) -> tuple[Array, Array]:
    """Wind speed, m/s, and where it comes from, degrees: stronger by day, veering with the spells."""
    gusty = 0.75 * drift(chance, HOURS, 30.0, 4.0) + 0.5 * drift(chance, HOURS, 2.0)
    by_day = 1.0 + 0.35 * np.clip(sun / _monthly(site.sun_range) / 0.5, -1.0, 1.0)
    speed = 0.93 * _monthly(site.wind) * by_day * np.maximum(1.0 + 0.4 * gusty, 0.0) ** 1.6
    angle = np.radians(np.array(site.wind_from))
    east, north = (_monthly(part.tolist()) for part in (np.sin(angle), np.cos(angle)))
    turn = 45.0 * drift(chance, HOURS, 30.0, 5.0) + 15.0 * drift(chance, HOURS, 2.0) - 15.0 * moisture
    return speed, np.degrees(np.arctan2(east, north)) + turn


def _printed(
    dry_bulb: Array,
    dew_point: Array,
    pressure: Array,
    radiation: Radiation,
    cover: Array,
    wind: Array,
    wind_from: Array,
) -> Weather:
    """The year in the digits of the file; the humidity follows from the rounded temperatures."""
    dry_bulb, dew_point = _to(dry_bulb, 0.1), _to(dew_point, 0.1)
    dew_point = np.minimum(dew_point, dry_bulb)
    humidity = 100.0 * np.exp(_saturation(dew_point) - _saturation(dry_bulb))
    wind = _to(wind, 0.1)
    direction = _to(wind_from, 10.0) % 360.0
    return Weather(
        dry_bulb=dry_bulb,
        dew_point=dew_point,
        humidity=_to(humidity, 1.0),
        pressure=_to(pressure, 10.0),
        radiation=Radiation(
            global_horizontal=_to(radiation.global_horizontal, 1.0),
            direct_normal=_to(radiation.direct_normal, 1.0),
            diffuse_horizontal=_to(radiation.diffuse_horizontal, 1.0),
        ),
        cover=_to(10.0 * cover, 1.0),
        # the format: 0 for calm, 360 for north
        wind_from=np.where(wind == 0.0, 0.0, np.where(direction == 0.0, 360.0, direction)),
        wind=wind,
    )


def _to(values: Array, step: float) -> Array:
    """``values`` in whole steps, never a minus zero."""
    return np.asarray(np.rint(np.round(values, _SETTLED) / step) * step + 0.0)


def _saturation(t: Array) -> Array:
    """Logarithm of the saturation pressure over that at 0 degC, over ice below.

    Magnus' form, coefficients of WMO-No. 8, annex 4.B, from memory.
    """
    return np.where(t < 0.0, 22.46 * t / (272.62 + t), 17.62 * t / (243.12 + t))


def epw(site: Site, weather: Weather) -> bytes:
    """The year as a file; what is not modelled carries the format's code for missing.

    Source: EnergyPlus Auxiliary Programs, "EnergyPlus Weather File (EPW) Data Dictionary", from memory.
    """
    lines = [
        f"LOCATION,{site.name},-,-,Synthetic,000000,{site.latitude},{site.longitude},{site.utc_offset},"
        f"{site.elevation}",
        "DESIGN CONDITIONS,0",
        "TYPICAL/EXTREME PERIODS,0",
        "GROUND TEMPERATURES,0",
        "HOLIDAYS/DAYLIGHT SAVINGS,No,0,0,0",
        f"COMMENTS 1,Synthetic typical year of an invented place ({site.climate}); not a record of any "
        f"weather. Made by weather_samples/generate.py of dewledger with PCG64 seed {site.seed}",
        "COMMENTS 2,Each value is for the hour that its row names the end of; dew points below 0 degC are "
        "frost points",
        "DATA PERIODS,1,1,Data,Monday, 1/ 1,12/31",
    ]
    dates = [(month, day) for month, n in enumerate(_LENGTHS, 1) for day in range(1, n + 1)]
    sun = weather.radiation
    columns = (
        weather.dry_bulb, weather.dew_point, weather.humidity, weather.pressure, sun.global_horizontal,
        sun.direct_normal, sun.diffuse_horizontal, weather.wind_from, weather.wind, weather.cover,
    )  # fmt: skip
    for i, (t, dp, rh, p, g, b, d, way, v, c) in enumerate(zip(*(x.tolist() for x in columns), strict=True)):
        month, day = dates[i // 24]
        lines.append(
            f"{YEAR},{month},{day},{i % 24 + 1},0,?9,"  # flags: neither source nor uncertainty is stated
            f"{t:.1f},{dp:.1f},{rh:.0f},{p:.0f},"
            "9999,9999,9999,"  # outside the atmosphere: horizontal, beam; infrared from the sky
            f"{g:.0f},{b:.0f},{d:.0f},"
            "999999,999999,999999,9999,"  # light: global, beam, diffuse; zenith luminance
            f"{way:.0f},{v:.1f},"
            f"{c:.0f},{c:.0f},"  # one layer of cloud: all of it is opaque
            "9999,99999,"  # visibility, ceiling
            "9,999999999,"  # weather observed: none
            "999,.999,"  # precipitable water, aerosol optical depth
            "999,99,"  # snow depth, days since snow
            "999,"  # albedo
            "999,99"  # rain depth, and the hours it fell in
        )
    return ("\n".join(lines) + "\n").encode("ascii")


def write_all(folder: Path) -> list[Path]:
    """Write every site's file into ``folder``."""
    folder.mkdir(parents=True, exist_ok=True)
    paths = []
    for site in SITES:
        path = folder / f"{site.slug}.epw"
        path.write_bytes(epw(site, make(site)))
        paths.append(path)
    return paths


def main() -> None:
    """Write the files where asked, beside this script by default."""
    parser = argparse.ArgumentParser(description="Make the synthetic sample years.")
    parser.add_argument(
        "--out", type=Path, default=Path(__file__).parent, metavar="DIR", help="default: beside this script"
    )
    for path in write_all(parser.parse_args().out):
        sys.stdout.write(f"{path}\n")


if __name__ == "__main__":
    main()
