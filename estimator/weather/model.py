"""The weather year: what the rest of the program sees of a weather file."""

from __future__ import annotations

import dataclasses
from dataclasses import dataclass, field
from typing import Literal

import numpy as np
from numpy.typing import NDArray

from estimator import moist_air
from estimator.moist_air import Array
from estimator.weather.options import WeatherOptions

__all__ = ["Finding", "Repair", "WeatherYear"]

Calendar = Literal["typical", "observed"]


@dataclass(frozen=True, kw_only=True)
class Repair:
    """Something that was changed: what, in how many hours, and where first."""

    what: str
    count: int
    where: str


@dataclass(frozen=True, kw_only=True)
class Finding:
    """Something that was noticed and left as it is, in words that stand alone."""

    what: str
    count: int | None = None
    where: str = ""


@dataclass(frozen=True, kw_only=True, eq=False)
class WeatherYear:
    """One site's hourly weather after reading, checking and repair.

    Every array has the shape (hours,); row i is the hour that starts at ``month[i]``, ``day[i]``,
    ``hour[i]`` in the file's stated standard time. Temperatures are in degC, pressure in Pa, humidity ratio
    in kg/kg, radiation in W/m2 (mean over the hour), wind speed in m/s, wind direction in degrees.
    Dry bulb, dew point, pressure and humidity ratio hold in every hour; radiation and wind may have NaN for
    missing, and are None where the file has nothing. Dew points below 0.01 degC are taken as frost points.
    The arrays are read-only.
    """

    site: str
    latitude: float | None
    longitude: float | None
    #: m; None where the header gives none that can be believed
    elevation: float | None
    #: hours east of Greenwich
    utc_offset: float
    calendar: Calendar
    #: source year of each month, January first; equal for an observed year
    source_years: tuple[int, ...]
    month: NDArray[np.int64]
    day: NDArray[np.int64]
    hour: NDArray[np.int64]
    #: 0 is Monday
    weekday: NDArray[np.int64]
    dry_bulb: Array
    dew_point: Array
    pressure: Array
    humidity_ratio: Array
    global_horizontal: Array | None = None
    direct_normal: Array | None = None
    diffuse_horizontal: Array | None = None
    wind_speed: Array | None = None
    wind_direction: Array | None = None
    file: str = ""
    sha256: str = ""
    #: the choices the file was read with; None for a year that was not read from a file
    options: WeatherOptions | None = None
    format: str = ""
    synthetic: bool = False
    repairs: tuple[Repair, ...] = ()
    findings: tuple[Finding, ...] = field(default=())
    #: hours in which dry bulb, humidity or pressure is not as read, shape (hours,)
    repaired: NDArray[np.bool_] | None = None

    def __post_init__(self) -> None:
        for item in dataclasses.fields(self):
            value = getattr(self, item.name)
            if isinstance(value, np.ndarray):
                # the caller keeps its own array as it is
                view = value.view()
                view.flags.writeable = False
                object.__setattr__(self, item.name, view)

    @property
    def hours(self) -> int:
        """Number of hours, 8760 or 8784."""
        return int(self.dry_bulb.shape[-1])

    def label(self, index: int) -> str:
        """The hour's name, ``MM-DD HH:MM``."""
        return f"{self.month[index]:02d}-{self.day[index]:02d} {self.hour[index]:02d}:00"

    def at_pressure(self, pressure: float) -> WeatherYear:
        """The same dry bulbs and dew points at a constant station pressure, Pa."""
        p = np.full_like(self.dry_bulb, pressure)
        return dataclasses.replace(
            self,
            pressure=p,
            humidity_ratio=moist_air.saturation_humidity_ratio(self.dew_point, p),
        )
