"""A weather year as text: place, completeness, extremes, design values, humid hours, repairs and findings."""

from __future__ import annotations

from typing import Final

from estimator.quantities import UnitSystem
from estimator.report.scheme import SHORT_HASH
from estimator.report.text import bullets, count, heading, page, pairs, paragraph, show, table, unit
from estimator.weather.model import Finding, Repair, WeatherYear
from estimator.weather.summary import WeatherSummary

__all__ = ["first_weekday", "notice_lines", "place_text", "weather_page", "years_text"]

_MONTHS: Final = 12
_WEEKDAYS: Final = ("Monday", "Tuesday", "Wednesday", "Thursday", "Friday", "Saturday", "Sunday")


def first_weekday(weather: WeatherYear) -> str:
    """The day of the week on which the year begins, which schedules follow."""
    return _WEEKDAYS[int(weather.weekday[0])]


def place_text(weather: WeatherYear, system: UnitSystem = "si") -> str:
    """Where the weather was measured, as far as the file says."""
    parts = [_degrees(weather.latitude, "NS", "latitude"), _degrees(weather.longitude, "EW", "longitude")]
    if weather.elevation is None:
        parts.append("elevation not known")
    else:
        parts.append(show("elevation", weather.elevation, system, with_unit=True))
    return f"{', '.join(parts)}, UTC{weather.utc_offset:+g}"


def _degrees(value: float | None, sides: str, name: str) -> str:
    if value is None:
        return f"{name} not known"
    return f"{abs(value):.2f} {sides[0] if value >= 0.0 else sides[1]}"


def years_text(weather: WeatherYear) -> str:
    """What kind of year it is, and of which years its months are."""
    known = weather.source_years
    if weather.synthetic:
        return "synthetic year"
    if weather.calendar == "observed":
        return f"observed year {known[0]}" if known else "observed year"
    if len(known) != _MONTHS or not all(known):
        return "typical year"
    return f"typical year, January to December of {' '.join(str(year) for year in known)}"


def notice_lines(notices: tuple[Repair, ...] | tuple[Finding, ...], none: str) -> list[str]:
    """Repairs or findings, each with the number of hours and where it begins."""
    if not notices:
        return paragraph(none)
    return bullets(_notice_text(notice) for notice in notices)


def _notice_text(notice: Repair | Finding) -> str:
    text = notice.what
    if notice.count is not None:
        text += f": {count(notice.count)} h"
        if notice.where:
            text += f", first at {notice.where}"
    elif notice.where:
        text += f", at {notice.where}"
    return text


def weather_page(weather: WeatherYear, summary: WeatherSummary, system: UnitSystem = "si") -> str:
    """The whole page of one weather year."""
    lines = heading(weather.site)
    lines += pairs(
        [
            ("File", f"{weather.file} ({weather.format}), sha256 {weather.sha256[:SHORT_HASH]}"),
            ("Place", place_text(weather, system)),
            ("Year", years_text(weather)),
            ("Period", f"{summary.period[0]} to {summary.period[1]}, {count(summary.hours)} hours"),
            ("Calendar", f"1 January is a {first_weekday(weather)}"),
            ("Complete", f"{_percent(summary.completeness)} of the hours as read"),
        ]
    )
    lines += ["", *_extremes(summary, system)]
    lines += heading("Design values of this one year, with mean coincident values")
    lines += _design(summary, system)
    lines += paragraph("One year is not a long record: these are not the published values of the site.")
    lines += heading("Hours above a dew point")
    lines += _humid_hours(summary, system)
    lines += ["", *paragraph(f"Hours below freezing: {count(summary.hours_below_freezing)}")]
    lines += [*heading("Repairs"), *notice_lines(weather.repairs, "None: every hour is as read.")]
    lines += [*heading("Findings"), *notice_lines(weather.findings, "None.")]
    return page(lines)


def _percent(share: float) -> str:
    # a single repaired hour of a year must not read as 100 %
    return f"{min(share * 100.0, 100.0 if share == 1.0 else 99.99):.2f} %"


def _extremes(summary: WeatherSummary, system: UnitSystem) -> list[str]:
    rows = [["", "", "least", "mean", "most"]]
    for label, name, values in (
        ("Dry bulb", "dry bulb", summary.dry_bulb),
        ("Dew point", "dew point", summary.dew_point),
        ("Station pressure", "station pressure", summary.pressure),
    ):
        rows.append([label, unit(name, system), *(show(name, value, system) for value in values)])
    return table(rows, "llrrr")


def _design(summary: WeatherSummary, system: UnitSystem) -> list[str]:
    names = ("dry bulb", "dew point", "humidity ratio", "station pressure")
    rows = [
        ["exceeded in", *names],
        ["", *(unit(name, system) for name in names)],
    ]
    for d in summary.design:
        values = zip(names, (d.dry_bulb, d.dew_point, d.humidity_ratio, d.pressure), strict=True)
        cells = [show(name, value, system) for name, value in values]
        rows.append([d.name, *cells])
    return table(rows, "lrrrr")


def _humid_hours(summary: WeatherSummary, system: UnitSystem) -> list[str]:
    above = summary.hours_above_dew_point
    thresholds = [show("dew point", t, system, decimals=0 if system == "si" else 1) for t, _ in above]
    rows = [
        [f"above, {unit('dew point', system)}", *thresholds],
        ["hours", *(count(n) for _, n in above)],
    ]
    return table(rows, "l" + "r" * len(above))
