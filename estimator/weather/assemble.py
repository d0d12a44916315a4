"""From the rows of a file to the weather year: every check and repair in its order."""

from __future__ import annotations

from collections.abc import Callable

import numpy as np
from numpy.typing import NDArray

from estimator import moist_air
from estimator.errors import WeatherError
from estimator.moist_air import Array
from estimator.weather.formats import ESSENTIAL, LIMITS, SOURCES, decode
from estimator.weather.headers import Place
from estimator.weather.humidity import (
    Phase,
    better_phase,
    dew_point_from_relative_humidity,
    relative_humidity_from_dew_point,
)
from estimator.weather.model import WeatherYear
from estimator.weather.options import WeatherOptions
from estimator.weather.reading import Rows
from estimator.weather.repair import Log, fill_gaps, lower_dew_point, settle_pressure, tidy_optional
from estimator.weather.sun import hours_ahead
from estimator.weather.timeline import Timeline, arrange

__all__ = ["NO_NAME", "assemble"]

#: Finding of a header without a site name; whoever knows the file's name puts it in.
NO_NAME = "the header names no site: the file's name is used"

#: Clock error that is remarked on, h. Files of mean radiation over the hour agree within about 0.1 h;
#: files of momentary values are up to half an hour off without being in another zone.
_CLOCK_TOLERANCE = 0.4
#: No inhabited zone is farther from the sun's own time than this, h (common knowledge: 3.1 in western China).
_WIDEST_ZONE = 3.5
#: Disagreement of the humidity columns that is remarked on, points of relative humidity: whole-degree
#: temperatures and whole percents explain most smaller ones.
_HUMIDITY_TOLERANCE = 5.0
#: Hours without any change of the dry bulb that are remarked on.
_STUCK = 36

Mask = NDArray[np.bool_]


def assemble(rows: Rows, options: WeatherOptions) -> WeatherYear:
    """The weather year of ``rows``; its ``file`` and ``sha256`` are left empty.

    Raises
    ------
    WeatherError
        A value that no weather has, a gap that is too long, not one whole year, no way to know the pressure.
    """
    columns, implausible = _decoded(rows)
    time = arrange(rows, options.first_weekday)
    absent = time.row < 0
    log = Log(time.name, np.zeros(len(absent), dtype=bool))
    log.repairs += time.repairs
    log.findings += rows.header.findings + time.findings
    place = _place(rows.header.place, options, log)

    def in_order(column: str) -> Array:
        return np.where(absent, np.nan, columns[column][time.row])

    log.repair("hour without a row, interpolated", absent)
    dry_bulb, pressure, dew_point, elevation = _air(in_order, place, options, log, absent)
    optional = {
        column: tidy_optional(in_order(column), implausible[column][time.row] & ~absent, column, log, absent)
        for column in SOURCES[rows.header.format]
        if column not in ESSENTIAL and column != "pressure"
    }
    offset = _settled_offset(place, options)
    _check_clock(place, offset, optional["global horizontal radiation"], time, log)
    return WeatherYear(
        site=place.site,
        latitude=place.latitude,
        longitude=place.longitude,
        elevation=elevation,
        utc_offset=offset,
        calendar=time.calendar,
        source_years=time.source_years,
        month=time.month,
        day=time.day,
        hour=time.hour,
        weekday=time.weekday,
        dry_bulb=dry_bulb,
        dew_point=dew_point,
        pressure=pressure,
        humidity_ratio=moist_air.saturation_humidity_ratio(dew_point, pressure),
        global_horizontal=optional["global horizontal radiation"],
        direct_normal=optional["direct normal radiation"],
        diffuse_horizontal=optional["diffuse horizontal radiation"],
        wind_speed=optional["wind speed"],
        wind_direction=optional["wind direction"],
        format=rows.header.format,
        synthetic=rows.header.synthetic,
        repairs=tuple(log.repairs),
        findings=tuple(log.findings),
        repaired=log.repaired,
    )


def _decoded(rows: Rows) -> tuple[dict[str, Array], dict[str, Mask]]:
    """Columns in the program's units, and which of their values are implausible; refuses where it matters."""
    columns, implausible = {}, {}
    for column, source in SOURCES[rows.header.format].items():
        columns[column], implausible[column] = decode(rows.columns[column], column, source)
        bad = implausible[column]
        if column in ESSENTIAL and bad.any():
            row = int(bad.argmax())
            codes = ", ".join(f"{c:g}" for c in source.codes)
            raise WeatherError(
                f"{columns[column][row]:g} {LIMITS[column].unit}",
                where=f"line {rows.line[row]}, column {column}",
                allowed=f"{LIMITS[column]}, or {codes} for missing",
                hint="correct the value, or write the code for missing",
            )
    return columns, implausible


def _place(place: Place, options: WeatherOptions, log: Log) -> Place:
    if not place.site:
        log.find(NO_NAME)
    if place.latitude is None:
        log.find("the header gives no usable latitude and longitude (0 and 0 count as none)")
    if options.utc_offset is not None and options.utc_offset != place.utc_offset:
        stated = "none" if place.utc_offset is None else zone(place.utc_offset)
        log.find(f"time zone {zone(options.utc_offset)} in place of the header's ({stated}), as asked")
    return place


def _settled_offset(place: Place, options: WeatherOptions) -> float:
    offset = place.utc_offset if options.utc_offset is None else options.utc_offset
    if offset is None:
        raise WeatherError(
            "the header gives no usable time zone",
            where="header",
            allowed="hours east of Greenwich, -12..14",
            hint="give it with --utc-offset",
        )
    return offset


def _air(
    in_order: Callable[[str], Array], place: Place, options: WeatherOptions, log: Log, absent: Mask
) -> tuple[Array, Array, Array, float | None]:
    """Dry bulb, pressure and dew point in every hour, and the elevation."""
    longest = options.max_gap_hours
    as_read = in_order("dry bulb")
    dry_bulb = fill_gaps(as_read, "dry bulb", longest, log)
    log.repair("dry bulb missing, interpolated", np.isnan(as_read) & ~absent)
    _remark_on_stuck(as_read, log)
    elevation = place.elevation
    if elevation == 0.0 and place.latitude is None:
        elevation = None  # a header of zeros
    pressure, elevation = settle_pressure(in_order("pressure"), elevation, longest, log, absent)
    dew_point = _dew_point(
        in_order("dew point"), in_order("relative humidity"), dry_bulb, pressure, options, log, absent
    )
    return dry_bulb, pressure, dew_point, elevation


def _dew_point(
    dew: Array, rh: Array, dry_bulb: Array, pressure: Array, options: WeatherOptions, log: Log, absent: Mask
) -> Array:
    phase = better_phase(dry_bulb, dew, rh)
    derived = dew_point_from_relative_humidity(dry_bulb, rh, pressure, phase)
    _compare_humidity(dew, rh, derived, dry_bulb, phase, options, log)
    if options.humidity == "dew_point":
        first, second, what = dew, derived, "dew point missing, derived from relative humidity"
    else:
        first, second, what = derived, dew, "relative humidity missing, the file's dew point used"
    if options.humidity == "relative_humidity":
        log.repair("relative humidity above 100 %, taken as 100 %", rh > 100.0)
    lacking = np.isnan(first)
    log.repair(what, lacking & ~np.isnan(second))
    chosen = np.where(lacking, second, first)
    lacking = np.isnan(chosen)
    chosen = fill_gaps(chosen, "dew point or relative humidity", options.max_gap_hours, log)
    log.repair("dew point and relative humidity missing, dew point interpolated", lacking & ~absent)
    return lower_dew_point(chosen, dry_bulb, log)


def _compare_humidity(
    dew: Array, rh: Array, derived: Array, dry_bulb: Array, phase: Phase, options: WeatherOptions, log: Log
) -> None:
    """Say how often and how far the two humidity columns disagree, and which governed."""
    meant = relative_humidity_from_dew_point(dry_bulb, np.minimum(dew, dry_bulb), phase)
    points = np.abs(meant - np.minimum(rh, 100.0))
    apart = points > _HUMIDITY_TOLERANCE  # False where either is missing
    if not apart.any():
        return
    kelvin = np.nanmax(np.abs(derived - dew)[apart], initial=0.0)
    governs = options.humidity.replace("_", " ")
    log.find(
        f"dew point and relative humidity disagree by more than {_HUMIDITY_TOLERANCE:g} points, by up to "
        f"{np.nanmax(points):.1f} points or {kelvin:.1f} K (below freezing over {phase}, which fits the file "
        f"best); the {governs} governs",
        apart,
    )


def _remark_on_stuck(dry_bulb: Array, log: Log) -> None:
    starts = np.flatnonzero(np.concatenate(([True], np.diff(dry_bulb) != 0.0)))
    lengths = np.diff(np.concatenate((starts, [len(dry_bulb)])))
    longest = int(lengths.argmax())
    if lengths[longest] >= _STUCK:
        where = np.zeros(len(dry_bulb), dtype=bool)
        where[starts[longest] : starts[longest] + lengths[longest]] = True
        log.find(f"the dry bulb stays at {dry_bulb[starts[longest]]:g} degC", where)


def _check_clock(place: Place, offset: float, radiation: Array | None, time: Timeline, log: Log) -> None:
    """Hold the radiation, or failing that the longitude, against the stated time zone."""
    if place.longitude is None:
        return
    ahead = None if radiation is None else hours_ahead(radiation, time.month, place.longitude, offset)
    if ahead is None:
        apart = (offset - place.longitude / 15.0 + 12.0) % 24.0 - 12.0
        if abs(apart) > _WIDEST_ZONE:
            log.find(
                f"the time zone {zone(offset)} is {abs(apart):.1f} h from the sun's own time at longitude "
                f"{place.longitude:g}, farther than any zone: --utc-offset restates it"
            )
        return
    if abs(ahead) > _CLOCK_TOLERANCE:
        way = "later" if ahead > 0.0 else "earlier"
        log.find(
            f"by the radiation the sun culminates {abs(ahead):.2f} h {way} than the time zone {zone(offset)} "
            f"has it; it fits {zone(round((offset + ahead + 12.0) % 24.0 - 12.0, 1))}. "
            "Nothing was shifted; --utc-offset restates the time zone"
        )


def zone(offset: float) -> str:
    """``UTC+5.5`` and the like."""
    return "UTC" if offset == 0.0 else f"UTC{offset:+g}"
