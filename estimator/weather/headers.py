"""What the head of a weather file says of its site, its clock and its calendar.

Read here from the raw lines: pvlib's own reading of them stops at the first word that is not a number,
counts on a fixed number of header lines, and takes a site of two words for three fields.
"""

from __future__ import annotations

import csv
import math
import re
from dataclasses import dataclass
from typing import Final

from estimator.errors import WeatherError
from estimator.quantities import QUANTITIES
from estimator.weather.formats import TMY2_HEADER, Format
from estimator.weather.lines import Lines
from estimator.weather.model import Finding
from estimator.weather.options import UTC_OFFSETS

__all__ = ["WEEKDAYS", "Header", "Place", "read_header"]

WEEKDAYS: Final = ("Monday", "Tuesday", "Wednesday", "Thursday", "Friday", "Saturday", "Sunday")

_NO_NAME: Final = frozenset({"", "-", "--", "unknown", "n/a", "na", "none", "null", "unnamed", "?"})
_MISSING_NUMBER: Final = frozenset({-999.0, -9999.0, -9900.0, 9999.0, 99999.0})
#: Names of collections of typical years, from memory.
_TYPICAL: Final = re.compile(
    r"\b(tmy\w{0,3}|try|iwec\d?|cwec\d*|wyec\w?|swera|igdg|cswd|rmy|etmy|gtmy|typical|reference year)\b",
    re.IGNORECASE,
)
_SYNTHETIC: Final = re.compile(r"\bsynthetic\b", re.IGNORECASE)
_EPW_HEADER_SEARCH: Final = 100


@dataclass(frozen=True, kw_only=True)
class Place:
    """Where a station stands. ``None`` is what the header does not say, or says with a stand-in."""

    #: empty when the header names none
    site: str
    latitude: float | None
    longitude: float | None
    elevation: float | None
    utc_offset: float | None


@dataclass(frozen=True, kw_only=True)
class Header:
    """The head of one file."""

    format: Format
    #: number of non-blank lines before the first row of data
    lines: int
    place: Place
    #: the day of the week that the file gives its first day, 0 being Monday
    weekday: int | None = None
    #: whether the words of the header call the year typical
    typical: bool = False
    synthetic: bool = False
    findings: tuple[Finding, ...] = ()


def read_header(lines: Lines, format_: Format) -> Header:
    """The header of a file of the given format.

    Raises
    ------
    WeatherError
        The header is incomplete, or a number in it lies outside what the earth has.
    """
    readers = {"EPW": _epw, "TMY3": _tmy3, "TMY2": _tmy2}
    return readers[format_](lines)


def _epw(lines: Lines) -> Header:
    head = [lines[i] for i in range(min(len(lines), _EPW_HEADER_SEARCH))]
    by_name: dict[str, list[str]] = {}
    last = None
    for index, line in enumerate(head):
        fields = _split(line)
        by_name.setdefault(fields[0].upper(), fields[1:])
        if fields[0].upper() == "DATA PERIODS":
            last = index
            break
    if last is None:
        raise WeatherError(
            "an EPW file without its DATA PERIODS line",
            where="header",
            allowed="eight header lines, from LOCATION to DATA PERIODS",
            hint="fetch it again",
        )
    location = by_name["LOCATION"]
    if len(location) != 9:
        raise WeatherError(
            f"LOCATION has {len(location)} fields",
            where="line 1",
            allowed="9: city, state, country, source, station, latitude, longitude, time zone, elevation",
        )
    weekday = _check_periods(by_name["DATA PERIODS"], int(lines.number[last]))
    words = " ".join(
        line for line in head[:last] if line.upper().lstrip('" ').startswith(("LOCATION", "COMMENTS"))
    )
    place = _place(location[0], *location[5:9])
    return Header(
        format="EPW",
        lines=last + 1,
        place=place,
        weekday=weekday,
        typical=bool(_TYPICAL.search(words)),
        synthetic=bool(_SYNTHETIC.search(words)),
        findings=_daylight_saving(by_name),
    )


def _check_periods(fields: list[str], line: int) -> int | None:
    """Refuse rows shorter than an hour; return the weekday of the first day."""
    each_hour = fields[1] if len(fields) > 1 else ""
    if each_hour != "1":
        raise WeatherError(
            f"{each_hour or 'no'} records an hour",
            where=f"line {line}, DATA PERIODS",
            allowed="1: hourly data",
            hint="average the file to hours first",
        )
    name = fields[3].capitalize() if len(fields) > 3 else ""
    return WEEKDAYS.index(name) if name in WEEKDAYS else None


def _daylight_saving(by_name: dict[str, list[str]]) -> tuple[Finding, ...]:
    for name, fields in by_name.items():
        if name.startswith("HOLIDAYS/DAYLIGHT SAVING") and len(fields) > 2 and fields[1] not in ("0", ""):
            return (
                Finding(
                    what=f"the header states daylight saving time from {fields[1]} to {fields[2]}; the rows "
                    "are read as standard time, as the format has them"
                ),
            )
    return ()


def _tmy3(lines: Lines) -> Header:
    fields = _split(lines[0])
    if len(fields) != 7:
        raise WeatherError(
            f"the header has {len(fields)} fields",
            where="line 1",
            allowed="7: station, name, state, time zone, latitude, longitude, elevation",
        )
    place = _place(fields[1], fields[4], fields[5], fields[3], fields[6])
    return Header(format="TMY3", lines=2, place=place, synthetic=bool(_SYNTHETIC.search(lines[0])))


def _tmy2(lines: Lines) -> Header:
    match = TMY2_HEADER.fullmatch(lines[0].encode("latin-1", errors="replace"))
    assert match is not None  # what made the file a TMY2 file
    _, city, _, zone, north, lat, lat_min, east, lon, lon_min, elevation = (
        g.decode("latin-1") for g in match.groups()
    )
    latitude = (int(lat) + int(lat_min) / 60.0) * (1 if north == "N" else -1)
    longitude = (int(lon) + int(lon_min) / 60.0) * (1 if east == "E" else -1)
    place = _place(city, str(latitude), str(longitude), zone, elevation)
    return Header(format="TMY2", lines=1, place=place, synthetic=bool(_SYNTHETIC.search(city)))


def _split(line: str) -> list[str]:
    """The fields of a header line; a spreadsheet pads short lines with commas, which say nothing."""
    try:
        fields = [field.strip() for field in next(csv.reader([line]), [""])]
    except csv.Error:
        fields = [line.strip()]
    while len(fields) > 1 and not fields[-1]:
        fields.pop()
    return fields


def _place(site: str, latitude: str, longitude: str, zone: str, elevation: str) -> Place:
    name = "" if site.lower() in _NO_NAME else site
    lat = _number(latitude, "latitude", -90.0, 90.0, "degrees")
    lon = _number(longitude, "longitude", -180.0, 180.0, "degrees")
    if lat is None or lon is None or (lat == 0.0 and lon == 0.0):
        lat = lon = None
    height = QUANTITIES["elevation"]
    try:
        z = _number(elevation, "elevation", height.least, height.most, "m")
    except WeatherError:
        z = None
    return Place(
        site=name,
        latitude=lat,
        longitude=lon,
        elevation=z,
        utc_offset=_number(zone, "time zone", *UTC_OFFSETS, "h"),
    )


def _number(text: str, name: str, least: float, most: float, unit: str) -> float | None:
    try:
        value = float(text)
    except ValueError:
        return None
    if not math.isfinite(value) or value in _MISSING_NUMBER:
        return None
    if not least <= value <= most:
        raise WeatherError(
            f"{value:g} in the header", where=f"line 1, {name}", allowed=f"{least:g}..{most:g} {unit}"
        )
    return value
