"""Hourly weather of one year: reading, checking, repair, cache, summary."""

from estimator.weather.cache import clear_cache
from estimator.weather.model import Finding, Repair, WeatherYear
from estimator.weather.options import WeatherOptions
from estimator.weather.read import read_weather
from estimator.weather.summary import (
    DESIGN_CONDITIONS,
    DesignCondition,
    DesignHour,
    WeatherSummary,
    design_hour,
    summarise,
)

__all__ = [
    "DESIGN_CONDITIONS",
    "DesignCondition",
    "DesignHour",
    "Finding",
    "Repair",
    "WeatherOptions",
    "WeatherSummary",
    "WeatherYear",
    "clear_cache",
    "design_hour",
    "read_weather",
    "summarise",
]
