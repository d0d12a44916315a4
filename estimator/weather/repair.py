"""Filling what a weather file leaves out, and setting right what cannot be: always counted, never silent.

All arrays have the shape (hours,), in the order of the year, NaN for missing.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field

import numpy as np
from numpy.typing import NDArray

from estimator import moist_air
from estimator.errors import WeatherError
from estimator.moist_air import Array
from estimator.weather.formats import LIMITS
from estimator.weather.model import Finding, Repair
from estimator.weather.timeline import MOST_FILLED

__all__ = ["PRESSURE_BAND", "Log", "fill_gaps", "lower_dew_point", "settle_pressure", "tidy_optional"]

Mask = NDArray[np.bool_]

#: Station pressure over that of the standard atmosphere at the station's elevation. Lows: 870 hPa at sea
#: level is the deepest on record (-14 %, at sea), about 890 hPa the deepest on land (-12 %), and polar
#: plateaus stay 10 % under it in winter. Highs: the highest on record at low elevation, 1064 hPa, is 5 %
#: over it; the rest is room for an elevation that is some 200 m wrong. Records from memory.
PRESSURE_BAND = (0.88, 1.08)

#: A year's mean pressure this far from the standard atmosphere is remarked on: the elevation is wrong by
#: more than 200 m, or the pressure is reduced to sea level.
_MEAN_BAND = 0.025


@dataclass
class Log:
    """What was repaired and noticed so far, and in which hours."""

    name: Callable[[int], str]
    repaired: Mask
    repairs: list[Repair] = field(default_factory=list)
    findings: list[Finding] = field(default_factory=list)

    def repair(self, what: str, where: Mask, *, counts: bool = True) -> None:
        """Note a repair of the hours in ``where``, which thereby count as repaired if ``counts``."""
        if where.any():
            first = self.name(int(where.argmax()))
            self.repairs.append(Repair(what=what, count=int(where.sum()), where=first))
            if counts:
                self.repaired |= where

    def find(self, what: str, where: Mask | None = None) -> None:
        """Note a finding, in the hours of ``where`` or of the year as a whole."""
        if where is None:
            self.findings.append(Finding(what=what))
        elif where.any():
            first = self.name(int(where.argmax()))
            self.findings.append(Finding(what=what, count=int(where.sum()), where=first))


def _runs(missing: Mask) -> tuple[int, int]:
    """Length and first hour of the longest run of missing hours, the year being a ring."""
    known = np.flatnonzero(~missing)
    lengths = np.diff(np.concatenate((known, [known[0] + len(missing)]))) - 1
    longest = int(lengths.argmax())
    return int(lengths[longest]), int((known[longest] + 1) % len(missing))


def fill_gaps(values: Array, column: str, longest: int, log: Log) -> Array:
    """Straight lines over the missing hours; the last hour of December is the neighbour of the first.

    Raises
    ------
    WeatherError
        A run of missing hours is longer than ``longest``, or more than a tenth of the year is missing.
    """
    missing = np.isnan(values)
    if not missing.any():
        return values
    if missing.all():
        raise WeatherError(f"no {column} in the whole file", allowed=f"hourly {column}")
    length, start = _runs(missing)
    if length > longest:
        raise WeatherError(
            f"no {column} for {length} hours in a row",
            where=log.name(start),
            allowed=f"gaps of at most {longest} hours",
            hint="fill the gap in the file, or allow longer ones (max_gap_hours)",
        )
    if missing.mean() > MOST_FILLED:
        raise WeatherError(
            f"no {column} in {int(missing.sum())} of {len(values)} hours",
            where=log.name(int(missing.argmax())),
            allowed=f"gaps in at most {MOST_FILLED:.0%} of the hours",
        )
    return _interpolated(values, missing)


def _interpolated(values: Array, missing: Mask) -> Array:
    hours = np.arange(len(values))
    known = ~missing
    return np.where(missing, np.interp(hours, hours[known], values[known], period=len(values)), values)


def lower_dew_point(dew_point: Array, dry_bulb: Array, log: Log) -> Array:
    """Dew points above the dry bulb lowered to it.

    Raises
    ------
    WeatherError
        In more than a quarter of the hours it lies over 1 K above: that is not weather.
    """
    excess = dew_point - dry_bulb
    above = excess > 0.0
    if not above.any():
        return dew_point
    if (excess > 1.0).mean() > 0.25:
        raise WeatherError(
            f"the dew point is over 1 K above the dry bulb in {int((excess > 1.0).sum())} of "
            f"{len(excess)} hours",
            where=log.name(int((excess > 1.0).argmax())),
            allowed="a dew point of at most the dry bulb",
            hint="the columns may be swapped, or in other units",
        )
    log.repair(f"dew point above the dry bulb, lowered to it (by {_size(excess.max())} K at most)", above)
    return np.where(above, dry_bulb, dew_point)


def _size(value: float) -> str:
    return f"{value:.1f}" if value >= 0.1 else f"{value:.1g}"


def settle_pressure(
    pressure: Array, elevation: float | None, longest: int, log: Log, absent: Mask
) -> tuple[Array, float | None]:
    """Pressure in every hour, and the elevation if it can be believed.

    Missing hours in short runs are interpolated; longer runs, and values that no weather brings about at the
    elevation, get the standard atmosphere. ``absent`` marks hours without a row, which are not told again.

    Raises
    ------
    WeatherError
        Pressure is needed and the elevation is not known.
    """
    elevation = _believable_elevation(pressure, elevation, log)
    pressure, bad = _without_impossible(pressure, elevation, log)
    missing = np.isnan(pressure)
    _remark_on_pressure(pressure[~missing & ~bad], elevation, log)
    if missing.any() and not missing.all():
        length, _ = _runs(missing)
        if length <= longest and missing.mean() <= MOST_FILLED:
            log.repair("pressure missing, interpolated", missing & ~absent)
            pressure, missing = _interpolated(pressure, missing), np.zeros_like(missing)
    if missing.any():
        if elevation is None:
            raise WeatherError(
                "the pressure is missing, and so is the elevation from which it could be estimated",
                where=log.name(int(missing.argmax())),
                allowed="a pressure in every hour or an elevation in the header",
                hint="write the elevation into the file's header",
            )
        log.repair(f"pressure missing, that of the standard atmosphere at {elevation:g} m used", missing)
        pressure = np.where(missing, moist_air.standard_atmosphere(elevation), pressure)
    return pressure, elevation


def _believable_elevation(pressure: Array, elevation: float | None, log: Log) -> float | None:
    """None for an elevation of 0 that the file's own plausible pressures contradict."""
    if elevation is None:
        log.find("the header gives no usable elevation")
        return None
    limits = LIMITS["pressure"]
    sound = pressure[(pressure >= limits.least) & (pressure <= limits.most)]
    if elevation == 0.0 and len(sound):
        ratio = float(np.median(sound)) / float(moist_air.standard_atmosphere(0.0))
        if not PRESSURE_BAND[0] <= ratio <= PRESSURE_BAND[1]:
            log.find(
                f"the header gives an elevation of 0, which a median pressure of {np.median(sound):.0f} Pa "
                "contradicts: taken as unknown"
            )
            return None
    return elevation


def _without_impossible(pressure: Array, elevation: float | None, log: Log) -> tuple[Array, Mask]:
    """The pressures with what cannot be set missing or to the standard atmosphere, and where that was."""
    limits = LIMITS["pressure"]
    if elevation is None:
        bad = (pressure < limits.least) | (pressure > limits.most)
        log.repair(f"pressure outside {limits}, taken as missing", bad)
        return np.where(bad, np.nan, pressure), bad
    standard = float(moist_air.standard_atmosphere(elevation))
    low, high = PRESSURE_BAND
    ratio = pressure / standard
    bad = (ratio < low) | (ratio > high)
    if bad.any():
        worst = ratio[bad][np.abs(ratio[bad] - 1.0).argmax()] - 1.0
        log.repair(
            f"pressure impossible at {elevation:g} m ({worst:+.0%} off the standard atmosphere at worst), "
            "that of the standard atmosphere used",
            bad,
        )
    return np.where(bad, standard, pressure), bad


def _remark_on_pressure(pressure: Array, elevation: float | None, log: Log) -> None:
    """What the pressures as read, shape (any,), say of themselves and of the elevation."""
    if not len(pressure):
        return
    if np.ptp(pressure) == 0.0:
        log.find(
            f"the pressure is {pressure[0]:.0f} Pa in every hour that has one: an estimate, not a record"
        )
    if elevation is None:
        return
    off = float(pressure.mean() / moist_air.standard_atmosphere(elevation)) - 1.0
    if abs(off) > _MEAN_BAND:
        log.find(
            f"the mean pressure is {off:+.1%} off the standard atmosphere at {elevation:g} m: the elevation "
            "may be wrong, or the pressure reduced to sea level"
        )


def tidy_optional(values: Array, implausible: Mask, column: str, log: Log, absent: Mask) -> Array | None:
    """A column that the calculation can do without: what is implausible is set missing, missing stays NaN.

    ``None`` for a column without a single value. Radiation a little below zero is set to zero.
    """
    log.repair(f"{column} outside {LIMITS[column]}, set to missing", implausible, counts=False)
    values = np.where(implausible, np.nan, values)
    if column.endswith("radiation"):
        below = values < 0.0
        log.repair(f"{column} below zero, set to zero", below, counts=False)
        values = np.where(below, 0.0, values)
    missing = np.isnan(values)
    if missing.all():
        log.find(f"no {column}")
        return None
    log.find(f"{column} missing, left out", missing & ~absent)
    return values
