"""Small weather files of an invented place, with knobs for every defect.

The humidity and the sun of the made-up year are computed here, by other formulas than the program's.
"""

from __future__ import annotations

import calendar
import math
from dataclasses import dataclass, field

import numpy as np

SITE = "Fennmoor"
LATITUDE, LONGITUDE, ZONE, ELEVATION = 40.0, -75.0, -5.0, 300.0
#: a typical year: each month from another year
YEARS = (2003, 1999, 2011, 2006, 2004, 2015, 2008, 2001, 2012, 2005, 2009, 2007)

EPW_COLUMNS = (
    "year", "month", "day", "hour", "minute", "flags", "dry bulb", "dew point", "relative humidity",
    "pressure", "etr", "etrn", "infrared", "global", "direct", "diffuse", "illum", "illum direct",
    "illum diffuse", "zenith", "wind direction", "wind speed", "total cover", "opaque cover", "visibility",
    "ceiling", "observation", "codes", "water", "aerosol", "snow", "days since snow", "albedo", "rain",
    "rain hours",
)  # fmt: skip
TMY3_HEADER = (
    "Date (MM/DD/YYYY),Time (HH:MM),ETR (W/m^2),ETRN (W/m^2),GHI (W/m^2),GHI source,GHI uncert (%),"
    "DNI (W/m^2),DNI source,DNI uncert (%),DHI (W/m^2),DHI source,DHI uncert (%),Dry-bulb (C),"
    "Dry-bulb source,Dry-bulb uncert (code),Dew-point (C),Dew-point source,Dew-point uncert (code),"
    "RHum (%),RHum source,RHum uncert (code),Pressure (mbar),Pressure source,Pressure uncert (code),"
    "Wdir (degrees),Wdir source,Wdir uncert (code),Wspd (m/s),Wspd source,Wspd uncert (code)"
)


def months_days(leap: bool = False) -> list[tuple[int, int]]:
    """Every day of a year."""
    year = 2004 if leap else 2003
    return [(m, d) for m in range(1, 13) for d in range(1, calendar.monthrange(year, m)[1] + 1)]


@dataclass
class Year:
    """A made-up year, hours labelled by their start, arrays of shape (hours,), rounded as in a file."""

    leap: bool = False
    years: tuple[int, ...] = YEARS
    cold: float = 0.0
    stamps: list[tuple[int, int, int, int]] = field(init=False)  # year, month, day, hour 0..23
    dry_bulb: np.ndarray = field(init=False)
    dew_point: np.ndarray = field(init=False)
    humidity: np.ndarray = field(init=False)
    pressure: np.ndarray = field(init=False)
    radiation: np.ndarray = field(init=False)
    wind: np.ndarray = field(init=False)

    def __post_init__(self) -> None:
        days = months_days(self.leap)
        self.stamps = [(self.years[m - 1], m, d, h) for m, d in days for h in range(24)]
        n = len(self.stamps)
        day, hour = np.divmod(np.arange(n), 24)
        season = -np.cos(2 * np.pi * (day - 15) / 365)
        self.dry_bulb = np.round(
            14.0 - self.cold + 11.0 * season + 4.0 * np.sin(2 * np.pi * (hour - 9) / 24) + (day % 5), 1
        )
        self.dew_point = np.round(self.dry_bulb - 1.5 - 0.3 * (hour % 12) - 0.4 * (day % 7), 1)
        self.humidity = np.round(100.0 * magnus(self.dew_point) / magnus(self.dry_bulb))
        self.pressure = np.round(97_700.0 + 600.0 * np.sin(2 * np.pi * day / 9), -2)
        self.radiation = np.round(clear_sky(day + 1, hour + 0.5, ZONE))
        self.wind = np.round(3.0 + 2.0 * np.sin(day / 3.0), 1)

    @property
    def hours(self) -> int:
        return len(self.stamps)

    def row(self, month: int, day: int, hour: int) -> int:
        """Index of the hour that starts then."""
        return next(i for i, s in enumerate(self.stamps) if s[1:] == (month, day, hour))


def magnus(t: np.ndarray) -> np.ndarray:
    """Saturation pressure over water, hPa (August-Roche-Magnus, coefficients of Bolton 1980)."""
    return 6.112 * np.exp(17.67 * t / (t + 243.5))


def clear_sky(day: np.ndarray, clock: np.ndarray, zone: float) -> np.ndarray:
    """Radiation of a cloudless sky, W/m2: 900 times the sine of the sun's height."""
    b = 2 * np.pi * (day - 81) / 364
    minutes = 9.87 * np.sin(2 * b) - 7.53 * np.cos(b) - 1.5 * np.sin(b)  # Woolf 1968
    solar = clock - zone + LONGITUDE / 15 + minutes / 60
    declination = np.radians(23.45) * np.sin(b)
    lat = math.radians(LATITUDE)
    height = np.sin(lat) * np.sin(declination) + np.cos(lat) * np.cos(declination) * np.cos(
        np.pi * (solar - 12) / 12
    )
    return 900.0 * np.maximum(height, 0.0)


def epw_rows(year: Year) -> list[list[str]]:
    """Rows of 35 fields, without line ends."""
    tail = ["99", "99", "9999", "99999", "9", "999999999", "999", "0.999", "999", "99", "999", "999", "99"]
    return [
        [
            *(str(x) for x in (y, m, d, h + 1, 0)), "?9?9?9?9E0",
            f"{t:.1f}", f"{dp:.1f}", f"{rh:.0f}", f"{p:.0f}", "9999", "9999", "9999",
            f"{g:.0f}", "0", f"{g:.0f}", "999999", "999999", "999999", "9999", "180", f"{w:.1f}", *tail,
        ]
        for (y, m, d, h), t, dp, rh, p, g, w in zip(
            year.stamps, year.dry_bulb, year.dew_point, year.humidity, year.pressure, year.radiation,
            year.wind, strict=True,
        )
    ]  # fmt: skip


def epw_header(
    site: str = SITE,
    latitude: object = LATITUDE,
    longitude: object = LONGITUDE,
    zone: object = ZONE,
    elevation: object = ELEVATION,
    source: str = "made up",
    comment: str = "",
    periods: str = "DATA PERIODS,1,1,Data,Monday, 1/ 1,12/31",
    saving: str = "HOLIDAYS/DAYLIGHT SAVINGS,No,0,0,0",
) -> list[str]:
    """The eight lines before the data."""
    return [
        f"LOCATION,{site},-,NN,{source},000000,{latitude},{longitude},{zone},{elevation}",
        "DESIGN CONDITIONS,0",
        "TYPICAL/EXTREME PERIODS,0",
        "GROUND TEMPERATURES,0",
        saving,
        f"COMMENTS 1,{comment}",
        "COMMENTS 2,",
        periods,
    ]


def epw(rows: list[list[str]] | None = None, header: list[str] | None = None, end: str = "\n") -> bytes:
    """The whole file."""
    rows = epw_rows(Year()) if rows is None else rows
    lines = (epw_header() if header is None else header) + [",".join(row) for row in rows]
    return (end.join(lines) + end).encode()


def put(rows: list[list[str]], column: str, where: slice | int, text: str) -> list[list[str]]:
    """The rows with ``text`` written into an EPW column."""
    at = EPW_COLUMNS.index(column)
    for row in rows[where] if isinstance(where, slice) else [rows[where]]:
        row[at] = text
    return rows


def tmy3(
    year: Year | None = None,
    header: str = f'000000,"{SITE}",NN,{ZONE},{LATITUDE},{LONGITUDE},{ELEVATION:g}',
    midnight: str = "24:00",
) -> list[str]:
    """Lines of a TMY3 file; ``midnight`` as "00:00" names the end of a day by the next one."""
    year = Year() if year is None else year
    lines = [header, TMY3_HEADER]
    for i, (y, m, d, h) in enumerate(year.stamps):
        date, time = f"{m:02d}/{d:02d}/{y}", f"{h + 1:02d}:00"
        if h == 23:
            time = midnight
            if midnight == "00:00":
                last = calendar.monthrange(y, m)[1] == d
                date = f"{m % 12 + 1:02d}/01/{y + (m == 12)}" if last else f"{m:02d}/{d + 1:02d}/{y}"
        lines.append(
            f"{date},{time},0,0,{year.radiation[i]:.0f},1,0,0,1,0,{year.radiation[i]:.0f},1,0,"
            f"{year.dry_bulb[i]:.1f},A,7,{year.dew_point[i]:.1f},A,7,{year.humidity[i]:.0f},A,7,"
            f"{year.pressure[i] / 100:.0f},A,7,180,A,7,{year.wind[i]:.1f},A,7"
        )
    return lines


def tmy2(year: Year | None = None, city: str = SITE.upper()) -> list[str]:
    """Lines of a TMY2 file: fixed width, tenths, two digits for the year."""
    year = Year() if year is None else year
    lines = [f" 00000 {city:<22} NN  -5 N 40  0 W  75  0   300"]
    for i, (y, m, d, h) in enumerate(year.stamps):
        g = round(year.radiation[i])
        lines.append(
            f" {y % 100:02d}{m:02d}{d:02d}{h + 1:02d}00000000{g:04d}?00000?0{g:04d}?0"
            "0000?00000?00000?00000?005A705A7"
            f"{round(year.dry_bulb[i] * 10):4d}A7{round(year.dew_point[i] * 10):4d}A7"
            f"{year.humidity[i]:3.0f}A7{year.pressure[i] / 100:4.0f}A7180A7{round(year.wind[i] * 10):3d}A7"
            "0161A777777A70999999999013F8062F8000A788E7"
        )  # fmt: skip
    return lines


def text(lines: list[str], end: str = "\n") -> bytes:
    return (end.join(lines) + end).encode()
