"""What an engineer asks of a weather year first: extremes, design values, humid hours, completeness."""

from __future__ import annotations

import re
from dataclasses import dataclass
from typing import Final, NamedTuple

import numpy as np

from estimator import moist_air
from estimator.errors import WeatherError
from estimator.moist_air import Array
from estimator.weather.model import Calendar, WeatherYear

__all__ = [
    "DESIGN_CONDITIONS",
    "DesignCondition",
    "DesignHour",
    "Range",
    "WeatherSummary",
    "design_hour",
    "summarise",
]

#: Annual cumulative frequencies of design values, % of the hours (ASHRAE Handbook Fundamentals, climatic
#: design information).
FREQUENCIES: Final = (0.4, 1.0, 2.0)
#: Names of the design conditions, as ``design_hour`` takes them.
DESIGN_CONDITIONS: Final = tuple(f"{name} {f:g} %" for name in ("dry bulb", "dew point") for f in FREQUENCIES)
#: Dew points above which hours are counted, degC.
DEW_POINTS: Final = (8.0, 10.0, 12.0, 14.0, 16.0, 18.0, 20.0, 22.0, 24.0)
#: Half the width of the bin whose hours give the mean coincident values, K.
HALF_BIN: Final = 0.5

_NAME: Final = re.compile(r"\s*(dry[ -]?bulb|dew[ -]?point)\s+(\d+(?:\.\d+)?)\s*%?\s*", re.IGNORECASE)


class Range(NamedTuple):
    """Least, mean and greatest value over the year."""

    least: float
    mean: float
    most: float


@dataclass(frozen=True, kw_only=True)
class DesignCondition:
    """A design value with what goes with it; temperatures in degC, pressure in Pa, humidity ratio in kg/kg.

    ``kind`` names the value that is exceeded in ``frequency`` % of the hours; the others are coincident.
    """

    kind: str
    frequency: float
    dry_bulb: float
    dew_point: float
    humidity_ratio: float
    pressure: float
    #: hours in the bin that the coincident values are the mean of
    hours: int

    @property
    def name(self) -> str:
        """As ``design_hour`` takes it."""
        return f"{self.kind} {self.frequency:g} %"


@dataclass(frozen=True, kw_only=True)
class WeatherSummary:
    """A weather year in a few numbers."""

    site: str
    latitude: float | None
    longitude: float | None
    elevation: float | None
    utc_offset: float
    calendar: Calendar
    source_years: tuple[int, ...]
    #: first and last hour, ``MM-DD HH:MM``
    period: tuple[str, str]
    hours: int
    #: share of the hours whose dry bulb, humidity and pressure are all as read
    completeness: float
    dry_bulb: Range
    dew_point: Range
    pressure: Range
    #: in the order of ``DESIGN_CONDITIONS``
    design: tuple[DesignCondition, ...]
    #: dew point, degC, and the number of hours above it
    hours_above_dew_point: tuple[tuple[float, int], ...]
    hours_below_freezing: int


class DesignHour(NamedTuple):
    """The outdoor air of a design condition: degC, kg/kg, Pa, and how it came about."""

    dry_bulb: float
    humidity_ratio: float
    pressure: float
    description: str


def summarise(weather: WeatherYear) -> WeatherSummary:
    """The summary of ``weather``; see ``design_condition`` for how design values are taken."""
    repaired = weather.repaired
    return WeatherSummary(
        site=weather.site,
        latitude=weather.latitude,
        longitude=weather.longitude,
        elevation=weather.elevation,
        utc_offset=weather.utc_offset,
        calendar=weather.calendar,
        source_years=weather.source_years,
        period=(weather.label(0), weather.label(weather.hours - 1)),
        hours=weather.hours,
        completeness=1.0 if repaired is None else float(1.0 - repaired.mean()),
        dry_bulb=_range(weather.dry_bulb),
        dew_point=_range(weather.dew_point),
        pressure=_range(weather.pressure),
        design=tuple(
            design_condition(weather, kind, f) for kind in ("dry bulb", "dew point") for f in FREQUENCIES
        ),
        hours_above_dew_point=tuple((t, int((weather.dew_point > t).sum())) for t in DEW_POINTS),
        hours_below_freezing=int((weather.dry_bulb < 0.0).sum()),
    )


def _range(values: Array) -> Range:
    return Range(float(values.min()), float(values.mean()), float(values.max()))


def design_condition(weather: WeatherYear, kind: str, frequency: float) -> DesignCondition:
    """The value of ``kind`` exceeded in ``frequency`` % of the hours of this year, and what goes with it.

    The value is the quantile ``1 - frequency / 100`` of the hourly values, linear between neighbouring ones
    (Hyndman and Fan 1996, type 7): with 8760 hours 0.4 % is exceeded in 35 of them. The coincident values are
    means over the hours whose ``kind`` lies within 0.5 K of it, a bin of 1 K, or as near as the nearest
    hour where none does. The humidity ratio of a dry-bulb condition is such a mean; that of a dew-point
    condition is the one of saturation at the dew point and the mean pressure of the bin; its dry bulb is
    not below its dew point.

    That design values are annual cumulative frequencies with mean coincident values is the practice of the
    ASHRAE handbook, which takes them from long records; this takes them from the one year at hand, so they
    are not the published values of the site (common practice).
    """
    values = weather.dry_bulb if kind == "dry bulb" else weather.dew_point
    value = float(np.quantile(values, 1.0 - frequency / 100.0))
    off = np.abs(values - value)
    bin_ = off <= max(HALF_BIN, float(off.min()))
    dry_bulb, dew_point, w, pressure = (
        float(a[bin_].mean())
        for a in (weather.dry_bulb, weather.dew_point, weather.humidity_ratio, weather.pressure)
    )
    if kind == "dry bulb":
        dry_bulb = value
    else:
        dew_point = value
        dry_bulb = max(dry_bulb, value)
        w = float(moist_air.saturation_humidity_ratio(value, pressure))
    return DesignCondition(
        kind=kind,
        frequency=frequency,
        dry_bulb=dry_bulb,
        dew_point=dew_point,
        humidity_ratio=w,
        pressure=pressure,
        hours=int(bin_.sum()),
    )


def design_hour(weather: WeatherYear, name: str) -> DesignHour:
    """The air of a design condition, named as in ``"dew point 0.4 %"``.

    Raises
    ------
    WeatherError
        There is no such condition.
    """
    match = _NAME.fullmatch(name)
    frequency = float(match.group(2)) if match else 0.0
    if match is None or frequency not in FREQUENCIES:
        raise WeatherError(
            f"no design condition is called {name!r}",
            where="design condition",
            allowed=", ".join(DESIGN_CONDITIONS),
        )
    kind = "dry bulb" if match.group(1).lower().startswith("dry") else "dew point"
    found = design_condition(weather, kind, frequency)
    other = (
        f"mean coincident dew point {found.dew_point:.1f} degC"
        if kind == "dry bulb"
        else f"mean coincident dry bulb {found.dry_bulb:.1f} degC"
    )
    own = found.dry_bulb if kind == "dry bulb" else found.dew_point
    return DesignHour(
        found.dry_bulb,
        found.humidity_ratio,
        found.pressure,
        f"{kind} of {own:.1f} degC, exceeded in {frequency:g} % of this year's hours, with a {other}",
    )
