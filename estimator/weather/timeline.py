"""Each row in its hour of the year: duplicates, order, missing hours, the calendar.

The hours of a year are slots, 0..8759, or 0..8783 where the file has a 29 February. Slot 0 is the hour that
starts at 00:00 on 1 January.
"""

from __future__ import annotations

import calendar
from dataclasses import dataclass
from datetime import date
from typing import Final

import numpy as np
from numpy.typing import NDArray

from estimator.errors import WeatherError
from estimator.weather.headers import WEEKDAYS, Header
from estimator.weather.model import Calendar, Finding, Repair
from estimator.weather.reading import Rows

__all__ = ["MOST_FILLED", "Timeline", "arrange", "hour_name"]

#: Largest share of a year that may be filled in by interpolation; more is not an hourly year.
MOST_FILLED: Final = 0.10

Integers = NDArray[np.int64]
_LENGTHS: Final = np.array([31, 29, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31])
_BEFORE: Final = np.concatenate(([0], np.cumsum(_LENGTHS)[:-1]))
_LEAP_DAY: Final = 59  # days of a leap year before 29 February


@dataclass(frozen=True, kw_only=True)
class Timeline:
    """Which row belongs to which hour. Arrays of shape (hours,)."""

    #: index of the hour's row, -1 where the file has none
    row: Integers
    month: Integers
    day: Integers
    hour: Integers
    weekday: Integers
    calendar: Calendar
    source_years: tuple[int, ...]
    repairs: tuple[Repair, ...]
    findings: tuple[Finding, ...]

    def name(self, slot: int) -> str:
        """``MM-DD HH:MM`` of a slot."""
        return hour_name(self.month, self.day, self.hour, slot)


def hour_name(month: Integers, day: Integers, hour: Integers, slot: int) -> str:
    """``MM-DD HH:MM``, the start of the hour."""
    return f"{month[slot]:02d}-{day[slot]:02d} {hour[slot]:02d}:00"


def arrange(rows: Rows, first_weekday: int | None) -> Timeline:
    """Sort the rows into the hours of one year.

    Raises
    ------
    WeatherError
        Two different rows for one hour; more or less than one year.
    """
    leap = bool(((rows.month == 2) & (rows.day == 29)).any())
    month, day, hour = _calendar_of(leap)
    ordinal = _BEFORE[rows.month - 1] + rows.day - 1
    if not leap:
        ordinal = ordinal - (ordinal > _LEAP_DAY)
    slot = ordinal * 24 + rows.hour - 1

    _refuse_several_years(rows)
    keep, repairs = _without_duplicates(rows, slot, (month, day, hour))
    repairs += _order(slot[keep], rows.line[keep], (month, day, hour))
    row = np.full(len(month), -1, dtype=np.int64)
    row[slot[keep]] = keep
    _refuse_part_of_a_year(row, (month, day, hour))

    years, several = _source_years(rows)
    kind, findings = _kind(rows.header, years, leap)
    weekday = _weekdays(kind, years[0], leap, first_weekday, len(month))
    if several:
        findings.append(Finding(what=f"rows of several years within a month, in {several} months"))
    findings += _stated_weekday(rows.header, int(weekday[0]), first_weekday)
    return Timeline(
        row=row,
        month=month,
        day=day,
        hour=hour,
        weekday=weekday,
        calendar=kind,
        source_years=years,
        repairs=tuple(repairs),
        findings=tuple(findings),
    )


def _calendar_of(leap: bool) -> tuple[Integers, Integers, Integers]:
    lengths = _LENGTHS if leap else _LENGTHS - (np.arange(12) == 1)
    month = np.repeat(np.arange(1, 13), lengths)
    first = np.repeat(np.cumsum(lengths) - lengths, lengths)
    day = np.arange(len(month)) - first + 1
    return np.repeat(month, 24), np.repeat(day, 24), np.tile(np.arange(24), len(month))


def _refuse_several_years(rows: Rows) -> None:
    if len(rows.line) <= 8784 + 24:
        return
    years = np.unique(rows.year)
    if len(years) > 1:
        shown = ", ".join(str(y) for y in years[:4]) + (", ..." if len(years) > 4 else "")
        raise WeatherError(
            f"{len(rows.line)} rows of the years {shown}",
            allowed="one year, of 8760 or 8784 hours",
            hint="split the file by year",
        )


def _without_duplicates(
    rows: Rows, slot: Integers, clock: tuple[Integers, Integers, Integers]
) -> tuple[Integers, list[Repair]]:
    """Indices of the rows to keep, in the order of the file; the first of equal rows stays."""
    order = np.argsort(slot, kind="stable")
    again = np.flatnonzero(slot[order][1:] == slot[order][:-1]) + 1
    if not len(again):
        return np.arange(len(slot)), []
    first, second = order[again - 1], order[again]
    same = rows.year[first] == rows.year[second]
    for values in rows.columns.values():
        a, b = values[first], values[second]
        same &= (a == b) | (np.isnan(a) & np.isnan(b))
    if not same.all():
        at = int((~same).argmax())
        a_row, b_row = int(first[at]), int(second[at])
        ends = rows.year[a_row], rows.year[b_row]
        raise WeatherError(
            f"two different rows for one hour (lines {rows.line[a_row]} and {rows.line[b_row]})"
            + (f", of {ends[0]} and {ends[1]}" if ends[0] != ends[1] else ""),
            where=hour_name(*clock, int(slot[a_row])),
            allowed="one row an hour, of one year",
            hint="if the rows keep daylight saving time, restate the file in standard time",
        )
    drop = np.zeros(len(slot), dtype=bool)
    drop[second] = True
    where = f"{hour_name(*clock, int(slot[second.min()]))} (line {rows.line[second.min()]})"
    repair = Repair(what="row repeated word for word, dropped", count=int(drop.sum()), where=where)
    return np.flatnonzero(~drop), [repair]


def _order(slot: Integers, line: Integers, clock: tuple[Integers, Integers, Integers]) -> list[Repair]:
    latest = np.maximum.accumulate(slot)
    late = slot < latest
    if not late.any():
        return []
    first = int(late.argmax())
    where = f"{hour_name(*clock, int(slot[first]))} (line {line[first]})"
    return [Repair(what="row stood after a later hour, put in its place", count=int(late.sum()), where=where)]


def _refuse_part_of_a_year(row: Integers, clock: tuple[Integers, Integers, Integers]) -> None:
    absent = row < 0
    if absent.mean() > MOST_FILLED:
        raise WeatherError(
            f"rows for only {int((~absent).sum())} of the {len(row)} hours of a year",
            where=f"first missing hour {hour_name(*clock, int(absent.argmax()))}",
            allowed="one whole year of hourly rows",
            hint="a part of a year, or one without hourly rows, cannot be summed to a year",
        )


def _source_years(rows: Rows) -> tuple[tuple[int, ...], int]:
    """The commonest year of each month, and the number of months that mix years."""
    years, several = [], 0
    for month in range(1, 13):
        found, counts = np.unique(rows.year[rows.month == month], return_counts=True)
        if not len(found):
            raise WeatherError(
                "a month without rows", where=f"month {month}", allowed="one whole year of hourly rows"
            )
        years.append(int(found[counts.argmax()]))
        several += len(found) > 1
    return tuple(years), several


def _kind(header: Header, years: tuple[int, ...], leap: bool) -> tuple[Calendar, list[Finding]]:
    """Whether the year is one that was, or one put together; said where the file leaves room for doubt."""
    if len(set(years)) > 1:
        return "typical", []
    year = years[0]
    if header.typical:
        return "typical", []
    if leap and not calendar.isleap(year):
        return "typical", [
            Finding(
                what=f"a 29 February in {year}, which had none: taken as a typical year", where="02-29 00:00"
            )
        ]
    findings = [
        Finding(
            what=f"all rows carry the year {year}: taken as observed, with that year's own weekdays; a "
            "typical year whose years were overwritten looks the same"
        )
    ]
    if calendar.isleap(year) and not leap:
        findings.append(Finding(what=f"no 29 February, which {year} had", where="02-29 00:00"))
    return "observed", findings


def _weekdays(kind: Calendar, year: int, leap: bool, first_weekday: int | None, hours: int) -> Integers:
    days = np.arange(hours // 24)
    first = 0
    if kind == "observed":
        first = date(year, 1, 1).weekday() if 1 <= year <= 9999 else 0
        if calendar.isleap(year) and not leap:
            days = days + (days >= _LEAP_DAY)  # the day that the file leaves out has passed all the same
    if first_weekday is not None:
        first = first_weekday
    return np.repeat((days + first) % 7, 24)


def _stated_weekday(header: Header, used: int, chosen: int | None) -> list[Finding]:
    stated = header.weekday
    if stated is None or stated == used or chosen is not None:
        return []
    return [
        Finding(
            what=f"the header calls the first day a {WEEKDAYS[stated]}; schedules take 1 January as a "
            f"{WEEKDAYS[used]} unless the first weekday is set"
        )
    ]
