"""Which outdoor air an hour is asked for: an hour of a file, air given in words, or a design condition."""

from __future__ import annotations

import datetime as dt
import re
from typing import TYPE_CHECKING, Any, Final

from estimator.errors import InputError

if TYPE_CHECKING:
    from estimator.hour import OutdoorAir
    from estimator.weather import WeatherYear

__all__ = ["air_at", "air_given", "air_of_design", "time_given"]

_TIME: Final = re.compile(r"\s*(\d{1,2})-(\d{1,2})[ T]+(\d{1,2}):(\d{2})\s*")
_FORM: Final = "'MM-DD HH:00', such as '07-14 15:00'"
_AIR_EXAMPLE: Final = "write for example --air '32 degC, 65 %, 101.3 kPa'"
_UNIT: Final = re.compile(r"[^\d.eE+-]+$")
#: Air without water has no dew point; this is a frost point of some -73 degC at sea level.
_DRIEST: Final = 1e-6
#: A year of 365 days that begins on a Monday: the calendar of a typical year.
_TYPICAL: Final = 2001


def time_given(text: str, weather: WeatherYear | None, first_weekday: int | None = None) -> dict[str, Any]:
    """Month, day, hour and weekday of ``--at``, and with a weather year the ``index`` of the hour in it.

    Raises
    ------
    InputError
        No such hour exists; the message says which do.
    """
    match = _TIME.fullmatch(text)
    if match is None:
        raise InputError(f"{text!r} is not an hour", where="--at", allowed=_FORM)
    month, day, hour, minute = (int(part) for part in match.groups())
    if not 1 <= month <= 12:
        raise _no_such(text, f"there is no month {month}", "months 01 to 12")
    last = _last_day(month, weather)
    if not 1 <= day <= last:
        raise _no_such(text, f"month {month:02d} of this year has no day {day}", f"days 01 to {last}")
    if hour > 23:
        raise _no_such(text, f"there is no hour {hour}", "hours 00:00 to 23:00, each named by its start")
    if minute:
        near = f"{hour:02d}:00" if hour == 23 else f"{hour:02d}:00 or {hour + 1:02d}:00"
        raise _no_such(text, "hours begin at the full hour", near)
    if weather is None:
        weekday = (dt.date(_TYPICAL, month, day).weekday() + (first_weekday or 0)) % 7
        return {"month": month, "day": day, "hour": hour, "weekday": weekday, "index": None}
    index = int(((weather.month == month) & (weather.day == day) & (weather.hour == hour)).argmax())
    weekday = int(weather.weekday[index])
    return {"month": month, "day": day, "hour": hour, "weekday": weekday, "index": index}


def _no_such(text: str, problem: str, allowed: str) -> InputError:
    return InputError(f"{text!r} does not exist: {problem}", where="--at", allowed=allowed)


def _last_day(month: int, weather: WeatherYear | None) -> int:
    if weather is not None:
        return int(weather.day[weather.month == month].max())
    following = dt.date(_TYPICAL + month // 12, month % 12 + 1, 1)
    return (following - dt.timedelta(days=1)).day


def air_at(weather: WeatherYear, text: str) -> OutdoorAir:
    """The air of one hour of a weather year."""
    from estimator.hour import OutdoorAir

    time = time_given(text, weather)
    index = time["index"]
    return OutdoorAir(
        dry_bulb=float(weather.dry_bulb[index]),
        humidity_ratio=float(weather.humidity_ratio[index]),
        pressure=float(weather.pressure[index]),
        month=time["month"],
        hour=time["hour"],
        weekday=time["weekday"],
        described=f"{weather.label(index)}, {weather.site} ({weather.file})",
    )


def air_of_design(weather: WeatherYear, name: str) -> OutdoorAir:
    """The air of a design condition of a weather year; it has no time."""
    from estimator.hour import OutdoorAir
    from estimator.weather import design_hour

    found = design_hour(weather, name)
    return OutdoorAir(
        dry_bulb=found.dry_bulb,
        humidity_ratio=found.humidity_ratio,
        pressure=found.pressure,
        described=f"{weather.site} ({weather.file}): {found.description}",
    )


def air_given(text: str, at: str | None, first_weekday: int | None) -> OutdoorAir:
    """The air of ``--air``: dry bulb, humidity, and pressure or elevation."""
    from estimator import moist_air
    from estimator.hour import OutdoorAir
    from estimator.quantities import QUANTITIES, parse_value

    parts = [part.strip() for part in text.split(",")]
    if len(parts) != 3 or not all(parts):
        raise InputError(
            f"{text!r} does not have three parts",
            where="--air",
            allowed="dry bulb, humidity, pressure or elevation, with commas between",
            hint=_AIR_EXAMPLE,
        )
    dry_bulb = parse_value(parts[0], QUANTITIES["dry bulb"], where="--air, dry bulb")
    if _unit_of(parts[2]) in ("m", "ft"):
        elevation = parse_value(parts[2], QUANTITIES["elevation"], where="--air, elevation")
        pressure = float(moist_air.standard_atmosphere(elevation))
    else:
        pressure = parse_value(parts[2], QUANTITIES["station pressure"], where="--air, pressure")
    humidity_ratio = _humidity(parts[1], dry_bulb, pressure)
    if humidity_ratio < _DRIEST:
        raise InputError(
            f"{parts[1]!r} is drier than any outdoor air",
            where="--air, humidity",
            allowed=f"at least {1000.0 * _DRIEST:g} g/kg",
        )
    time = None if at is None else time_given(at, None, first_weekday)
    return OutdoorAir(
        dry_bulb=dry_bulb,
        humidity_ratio=humidity_ratio,
        pressure=pressure,
        month=None if time is None else time["month"],
        hour=None if time is None else time["hour"],
        weekday=None if time is None else time["weekday"],
        described=text
        if time is None
        else f"{text}, at {time['month']:02d}-{time['day']:02d} {time['hour']:02d}:00",
    )


def _unit_of(text: str) -> str:
    found = _UNIT.search(text)
    return found.group().strip() if found else ""


def _humidity(text: str, dry_bulb: float, pressure: float) -> float:
    """The humidity ratio that the second part of ``--air`` means."""
    from estimator import moist_air
    from estimator.quantities import QUANTITIES, parse_value

    where = "--air, humidity"
    for name in ("dew point", "wet bulb"):
        word = re.fullmatch(rf"{name[:3]}[ -]?{name[4:]}\s+(.*)", text, re.IGNORECASE)
        if word is None:
            continue
        value = parse_value(word[1], QUANTITIES[name], where=f"--air, {name}")
        if value > dry_bulb:
            raise InputError(
                f"a {name} of {value:g} degC lies above the dry bulb",
                where=where,
                allowed=f"at most {dry_bulb:g} degC",
            )
        if name == "wet bulb":
            return _from_wet_bulb(text, value, dry_bulb, pressure)
        return _plausible(text, float(moist_air.saturation_humidity_ratio(value, pressure)))
    unit = _unit_of(text)
    if unit in ("%", "percent"):
        share = parse_value(text, QUANTITIES["relative humidity"], where=where)
        w = float(moist_air.humidity_ratio_from_relative_humidity(dry_bulb, share, pressure))
        return _plausible(text, w)
    if unit in ("g/kg", "kg/kg", "gr/lb"):
        return parse_value(text, QUANTITIES["humidity ratio"], where=where)
    raise InputError(
        f"{text!r} is not a humidity",
        where=where,
        allowed="'65 %', 'dew point 24 degC', 'wet bulb 26 degC' or '12 g/kg'",
    )


def _plausible(text: str, w: float) -> float:
    """The humidity ratio ``w`` that ``text`` means, unless it is more than any outdoor air has."""
    from estimator.quantities import QUANTITIES

    quantity = QUANTITIES["humidity ratio"]
    if w > quantity.most:
        raise InputError(
            f"{text!r} means {quantity.show(w)} in this air, more than any outdoor air has",
            where="--air, humidity",
            allowed=f"at most {quantity.show(quantity.most, decimals=0)}",
        )
    return w


def _from_wet_bulb(text: str, wet_bulb: float, dry_bulb: float, pressure: float) -> float:
    from estimator import moist_air

    w = float(moist_air.humidity_ratio_from_wet_bulb(dry_bulb, wet_bulb, pressure))
    if w < 0.0:
        driest = float(moist_air.wet_bulb(dry_bulb, 0.0, pressure))
        raise InputError(
            f"a wet bulb of {wet_bulb:g} degC is lower than that of dry air at {dry_bulb:g} degC",
            where="--air, humidity",
            allowed=f"{driest:.2f} to {dry_bulb:g} degC at this pressure",
        )
    _plausible(text, w)
    again = float(moist_air.wet_bulb(dry_bulb, w, pressure))
    if abs(again - wet_bulb) > 1e-4:
        # close below 0 degC the same air has a wet bulb over ice and another over water
        raise InputError(
            f"a wet bulb of {wet_bulb:g} degC is not definite: over water the same air has {again:.2f} degC",
            where="--air, humidity",
            hint="give the dew point or the relative humidity",
        )
    return w
