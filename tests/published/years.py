"""The three real weather years that come with pvlib, as the program reads them."""

from __future__ import annotations

from functools import cache
from pathlib import Path

import pvlib

from estimator.weather import WeatherOptions, WeatherYear, read_weather

_DATA = Path(pvlib.__file__).parent / "data"
FILES = {
    "Miami": _DATA / "12839.tm2",
    "Greensboro": _DATA / "723170TYA.CSV",
    "Sand Point": _DATA / "703165TY.csv",
}


@cache
def real_year(site: str, pressure: float | None = None) -> WeatherYear:
    """One of the years, at the file's pressures or at one that is set, Pa."""
    year = read_weather(FILES[site], WeatherOptions(cache=False))
    return year if pressure is None else year.at_pressure(pressure)
