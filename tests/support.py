"""Weather, hours and schemes for the tests."""

from __future__ import annotations

import numpy as np

from estimator import moist_air
from estimator.airstream.state import Hours, State
from estimator.scheme import Scheme
from estimator.scheme_file import parse_scheme
from estimator.weather.model import WeatherYear

BASE = """
[scheme]
name = "base"
[airflow]
outdoor_air = "2 m3/s"
[supply]
dew_point = "11 degC"
dry_bulb = "20 degC"
[coil]
bypass_factor = 0.05
[[reheat]]
source = "electric"
[plant]
cooling_cop = 3.0
"""

FAN = """
[fan]
total_pressure = "900 Pa"
efficiency = 0.62
"""


def scheme(text: str = BASE, **settings: str) -> Scheme:
    """The base scheme with settings overridden; a double underscore stands for the dot of a path."""
    return parse_scheme(text, settings={key.replace("__", "."): value for key, value in settings.items()})


def hours(t, w, p, flow=2.4) -> Hours:
    """Hours of any outdoor states, at noon of a Wednesday in July."""
    t, w, p = (np.ascontiguousarray(x, dtype=float) for x in np.broadcast_arrays(t, w, p))
    ones = np.ones(t.shape[-1], dtype=np.int64)
    return Hours(
        month=7 * ones,
        hour=12 * ones,
        weekday=2 * ones,
        outdoor=State.of(t, w, p),
        mass_flow=np.full(t.shape, float(flow)),
    )


def states(seed: int, count: int = 400) -> tuple[np.ndarray, np.ndarray, np.ndarray]:
    """Random outdoor dry bulbs, humidity ratios and pressures, a third of them within 0.1 % of saturation."""
    rng = np.random.default_rng(seed)
    t = rng.uniform(-30.0, 46.0, count)
    p = rng.uniform(60e3, 106e3, count)
    rh = np.where(rng.random(count) < 1 / 3, rng.uniform(0.999, 1.0, count), rng.uniform(0.02, 1.0, count))
    return t, moist_air.humidity_ratio_from_relative_humidity(t, rh, p), p


def weather_year(dry_bulb, dew_point, pressure=101_325.0, *, latitude=35.0, days=365) -> WeatherYear:
    """A made-up typical year of ``days`` days; a number stands for every hour."""
    n = 24 * days
    index = np.arange(n)
    date = np.datetime64("2024-01-01" if days == 366 else "2023-01-01") + (index // 24).astype(
        "timedelta64[D]"
    )
    month = date.astype("datetime64[M]").astype(int) % 12 + 1
    t, td, p = (
        np.broadcast_to(np.asarray(x, dtype=float), n).copy() for x in (dry_bulb, dew_point, pressure)
    )
    return WeatherYear(
        site="Nowhere",
        latitude=latitude,
        longitude=0.0,
        elevation=0.0,
        utc_offset=0.0,
        calendar="typical",
        source_years=(2001,) * 12,
        month=month,
        day=(date - date.astype("datetime64[M]")).astype(int) + 1,
        hour=index % 24,
        weekday=(index // 24) % 7,
        dry_bulb=t,
        dew_point=td,
        pressure=p,
        humidity_ratio=moist_air.saturation_humidity_ratio(td, p),
    )


def varied_year(seed: int = 1, pressure: float = 98_000.0, **rest) -> WeatherYear:
    """A made-up year with warm and cold, dry and saturated hours."""
    n = 24 * rest.get("days", 365)
    rng = np.random.default_rng(seed)
    i = np.arange(n)
    t = 14.0 - 13.0 * np.cos(2 * np.pi * i / n) - 5.0 * np.cos(2 * np.pi * i / 24) + rng.normal(0.0, 2.0, n)
    depression = np.maximum(rng.gamma(1.5, 3.0, n) - 2.0, 0.0)
    return weather_year(t, t - depression, pressure + rng.normal(0.0, 500.0, n), **rest)
