"""Totals: sums and peaks of a year over the whole, its seasons and its months.

Months are summed from hours, and seasons and the year from months, so that the parts add up to the whole
to the last digit.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass
from itertools import pairwise
from operator import itemgetter
from typing import Any, Final, TypeAlias

import numpy as np
from numpy.typing import NDArray

from estimator.calendar_words import names_to_months
from estimator.errors import InputError
from estimator.moist_air import Array
from estimator.plant import CARRIERS, PURPOSES
from estimator.year import Mode, Year

__all__ = [
    "EnergyRow",
    "Peaks",
    "PeriodTotals",
    "SeasonMap",
    "Totals",
    "check_seasons",
    "monthly",
    "parse_seasons",
    "seasons_by_latitude",
    "sum_year",
]

#: Name of each season and the months in it, 1 to 12; together they hold every month once.
SeasonMap = Mapping[str, tuple[int, ...]]

_MONTHS: Final = 12
_COUNTS: Final = (
    "hours_operating",
    "hours_drying",
    "hours_reheat",
    "hours_frozen",
    "hours_unmet",
    "hours_unmet_dew_point",
    "hours_unmet_warm",
    "hours_unmet_cold",
    *(f"mode {mode.words}" for mode in Mode),
)
_MODES: Final = tuple(mode.words for mode in Mode)


@dataclass(frozen=True, kw_only=True)
class Peaks:
    """Highest hourly values of a period, and the hour of each; None where the peak is 0.

    Where several hours share a peak the first counts.
    """

    coil_cooling_kw: float
    coil_cooling_at: str | None
    reheat_kw: float
    reheat_at: str | None
    condensate_kg_per_h: float
    condensate_at: str | None


@dataclass(frozen=True, kw_only=True)
class PeriodTotals:
    """Sums over a period, kWh, kg and hours; None where a scheme does not determine one fully."""

    coil_cooling_kwh: float
    coil_sensible_kwh: float
    coil_latent_kwh: float
    reheat_kwh: float
    reheat_recovered_kwh: float
    reheat_solar_kwh: float
    reheat_purchased_kwh: float
    cooling_undone_kwh: float
    cooling_undone_by_fan_kwh: float
    cooling_undone_by_purchased_kwh: float
    outdoor_air_heating_kwh: float
    preheat_kwh: float
    preheat_while_cooling_kwh: float
    condensate_kg: float
    condensate_frozen_kg: float
    fan_kwh: float
    electricity_kwh: float | None
    fuel_kwh: float | None
    heat_kwh: float | None
    moisture_removed_per_kwh_kg: float | None
    hours_operating: int
    hours_drying: int
    hours_reheat: int
    hours_frozen: int
    hours_unmet: int
    hours_unmet_dew_point: int
    hours_unmet_warm: int
    hours_unmet_cold: int
    hours_by_mode: Mapping[str, int]
    peaks: Peaks


@dataclass(frozen=True, kw_only=True)
class EnergyRow:
    """Bought energy of one carrier for one purpose over the year, kWh; None where not determined."""

    carrier: str
    purpose: str
    kwh: float | None
    #: the same by month, January first
    monthly_kwh: tuple[float, ...] | None


@dataclass(frozen=True, kw_only=True)
class Totals:
    """Everything that is summed from one year."""

    annual: PeriodTotals
    seasons: Mapping[str, PeriodTotals]
    season_months: SeasonMap
    months: tuple[PeriodTotals, ...]
    energy: tuple[EnergyRow, ...]
    heat_residual_max: float
    water_residual_max: float


def seasons_by_latitude(latitude: float | None) -> SeasonMap:
    """Three-month quarters, named by the hemisphere; plain quarters near the equator or without a latitude.

    Quarters begin in December, as meteorological seasons do (common practice); within 10 degrees of the
    equator, or where the latitude is not known, in January.
    """
    if latitude is None or abs(latitude) < 10.0:
        return {f"quarter {q + 1}": tuple(range(3 * q + 1, 3 * q + 4)) for q in range(4)}
    names = ("winter", "spring", "summer", "autumn")
    if latitude < 0.0:
        names = ("summer", "autumn", "winter", "spring")
    return dict(zip(names, ((12, 1, 2), (3, 4, 5), (6, 7, 8), (9, 10, 11)), strict=True))


def check_seasons(seasons: SeasonMap) -> None:
    """Refuse seasons that leave out a month or count one twice.

    Raises
    ------
    InputError
        Names the months.
    """
    held = [month for months in seasons.values() for month in months]
    missing = sorted(set(range(1, 13)) - set(held))
    double = sorted({month for month in held if held.count(month) > 1})
    if missing or double:
        fault = " and ".join(
            f"month{'s' if len(months) > 1 else ''} {', '.join(map(str, months))} {verb}"
            for months, verb in ((missing, "left out"), (double, "counted twice"))
            if months
        )
        raise InputError(fault, where="seasons", allowed="every month in one season")


def _by_month(starts: NDArray[np.int64], values: Any) -> Array:
    return np.asarray(np.add.reduceat(values, starts, axis=-1))


def _starts(month: NDArray[np.int64]) -> NDArray[np.int64]:
    starts = np.append(0, np.flatnonzero(month[1:] != month[:-1]) + 1)
    if not np.array_equal(month[starts], np.arange(1, _MONTHS + 1)):
        raise InputError("the hours do not run from January to December", where="weather")
    return starts


def monthly(year: Year) -> dict[str, Array]:
    """Sums of every month, shape (..., 12), by the names of ``PeriodTotals`` (and carriers, see below).

    Leading axes are kept, so this serves a stack of variants too.
    """
    starts = _starts(year.hours.month)
    undone = year.cooling_undone_by
    zero = np.zeros(1)
    unmet = year.unmet
    powers: dict[str, Any] = {
        "coil_cooling_kwh": year.coil_cooling,
        "coil_sensible_kwh": year.coil_sensible,
        "reheat_kwh": year.reheat,
        "reheat_recovered_kwh": year.reheat_by.get("recovered", zero),
        "reheat_solar_kwh": year.reheat_by.get("solar", zero),
        "reheat_purchased_kwh": year.reheat_by.get("purchased", zero),
        "cooling_undone_kwh": year.cooling_undone,
        "cooling_undone_by_fan_kwh": undone.get("fan", zero),
        "cooling_undone_by_purchased_kwh": undone.get("purchased", zero),
        "outdoor_air_heating_kwh": year.outdoor_air_heating,
        "preheat_kwh": year.preheat,
        "preheat_while_cooling_kwh": year.preheat_while_cooling,
        "condensate_kg": year.condensate,
        "condensate_frozen_kg": np.where(year.frozen, year.condensate, 0.0),
        "fan_kwh": year.fan_power,
    }
    flags: dict[str, Any] = {
        "hours_operating": year.hours.running,
        "hours_drying": year.drying,
        "hours_reheat": year.reheat > 0.0,
        "hours_frozen": year.frozen,
        "hours_unmet": unmet["dew_point"] | unmet["warm"] | unmet["cold"],
        "hours_unmet_dew_point": unmet["dew_point"],
        "hours_unmet_warm": unmet["warm"],
        "hours_unmet_cold": unmet["cold"],
    }
    shape = year.coil_cooling.shape
    sums = {name: _by_month(starts, _full(value, shape)) for name, value in powers.items()}
    for name, flag in flags.items():
        sums[name] = _by_month(starts, _full(flag, shape).astype(np.int64))
    cells = (year.mode + len(Mode) * (year.hours.month - 1)).reshape(-1, shape[-1])
    counts: Any = np.stack([np.bincount(row, minlength=_MONTHS * len(Mode)) for row in cells])
    counts = counts.reshape(*shape[:-1], _MONTHS, len(Mode))
    for mode in Mode:
        sums[f"mode {mode.words}"] = counts[..., mode]
    return sums


def _full(value: Any, shape: tuple[int, ...]) -> Any:
    return value if np.shape(value) == shape else np.broadcast_to(value, shape)


def _energy(year: Year, starts: NDArray[np.int64]) -> tuple[EnergyRow, ...]:
    found = {(e.carrier, e.purpose): e.power for e in year.energy}
    rows = []
    for carrier in CARRIERS:
        for purpose in PURPOSES:
            if (carrier, purpose) not in found:
                continue
            power = found[carrier, purpose]
            months = None if power is None else tuple(_by_month(starts, power).tolist())
            kwh = None if months is None else float(np.add.accumulate(months)[-1])
            rows.append(EnergyRow(carrier=carrier, purpose=purpose, kwh=kwh, monthly_kwh=months))
    return tuple(rows)


def _period(
    sums: dict[str, Any],
    counts: dict[str, Any],
    energy: Iterable[tuple[EnergyRow, float]],
    peaks: Peaks,
) -> PeriodTotals:
    carriers: dict[str, float | None] = dict.fromkeys(CARRIERS, 0.0)
    spent = 0.0
    for row, kwh in energy:
        known = carriers[row.carrier]
        carriers[row.carrier] = None if known is None or row.monthly_kwh is None else known + kwh
        if row.purpose == "cooling":
            spent += kwh
    modes = {words: counts.pop(f"mode {words}") for words in _MODES}
    return PeriodTotals(
        **sums,
        **counts,
        coil_latent_kwh=sums["coil_cooling_kwh"] - sums["coil_sensible_kwh"],
        electricity_kwh=carriers["electricity"],
        fuel_kwh=carriers["fuel"],
        heat_kwh=carriers["heat"],
        moisture_removed_per_kwh_kg=sums["condensate_kg"] / spent if spent > 0.0 else None,
        hours_by_mode=modes,
        peaks=peaks,
    )


#: A month's highest value of each of ``_PEAKS`` and the name of its hour.
_Peak: TypeAlias = list[tuple[float, str | None]]
_PEAKS: Final = {
    "coil_cooling": "coil_cooling_kw",
    "reheat": "reheat_kw",
    "condensate": "condensate_kg_per_h",
}


def _peaks(year: Year, starts: NDArray[np.int64]) -> list[_Peak]:
    label = year.weather.label if year.weather is not None else str
    series = [getattr(year, name) for name in _PEAKS]
    bounds = [*starts.tolist(), year.hours.month.size]
    months = []
    for start, end in pairwise(bounds):
        at = [(values, start + int(values[start:end].argmax())) for values in series]
        months.append([(float(values[i]), label(i) if values[i] > 0.0 else None) for values, i in at])
    return months


def _highest(months: list[_Peak]) -> Peaks:
    fields: dict[str, Any] = {}
    for (name, key), values in zip(_PEAKS.items(), zip(*months, strict=True), strict=True):
        # max keeps the first of equals
        fields[key], fields[f"{name}_at"] = max(values, key=itemgetter(0))
    return Peaks(**fields)


def sum_year(year: Year, seasons: SeasonMap | None = None) -> Totals:
    """Sum one year (no leading axis) over the whole, its seasons and its months.

    Parameters
    ----------
    year
        The result of ``run_year`` for one scheme.
    seasons
        Seasons of one's own, each month in one of them; quarters by hemisphere when left out.

    Raises
    ------
    InputError
        A month is in no season or in two, or the year is a stack of variants.
    """
    if year.coil_cooling.ndim != 1:
        raise InputError("a stack of variants", where="totals", allowed="one year; see year.variant")
    if seasons is None:
        seasons = seasons_by_latitude(year.weather.latitude if year.weather is not None else None)
    check_seasons(seasons)
    starts = _starts(year.hours.month)
    found = monthly(year)
    rows = _energy(year, starts)
    peaks = _peaks(year, starts)
    every = range(1, _MONTHS + 1)
    spans = [tuple(every), *seasons.values(), *((month,) for month in every)]
    # months are added in the order of the calendar, so no digit depends on how a machine adds
    within = np.array([[month in span for month in every] for span in spans])[..., None]

    def sums(columns: list[Any]) -> Any:
        return np.where(within, np.column_stack(columns), 0).sum(axis=1).tolist()

    flows = [name for name in found if name not in _COUNTS]
    nothing = (0.0,) * _MONTHS
    annual, *parts = (
        _period(
            dict(zip(flows, flow, strict=True)),
            dict(zip(_COUNTS, count, strict=True)),
            zip(rows, energy, strict=True),
            _highest([peaks[month - 1] for month in sorted(span)]),
        )
        for span, flow, count, energy in zip(
            spans,
            sums([found[name] for name in flows]),
            sums([found[name] for name in _COUNTS]),
            sums([row.monthly_kwh or nothing for row in rows]),
            strict=True,
        )
    )
    return Totals(
        annual=annual,
        seasons=dict(zip(seasons, parts, strict=False)),
        season_months=dict(seasons),
        months=tuple(parts[len(seasons) :]),
        energy=rows,
        heat_residual_max=float(year.heat_residual.max(initial=0.0)),
        water_residual_max=float(year.water_residual.max(initial=0.0)),
    )


def parse_seasons(text: str) -> SeasonMap:
    """Seasons written as ``"wet=may..oct, dry=nov..apr"``; parts of a season are joined by ``+``.

    Raises
    ------
    InputError
        What cannot be read, or a month left out or counted twice.
    """
    seasons: dict[str, tuple[int, ...]] = {}
    for part in text.split(","):
        name, equals, months = (piece.strip() for piece in part.partition("="))
        if not equals or not name or not months:
            raise InputError(
                f"{part.strip()!r} is not a season", where="seasons", allowed="'wet=may..oct, dry=nov..apr'"
            )
        seasons[name] = names_to_months(months.split("+"))
    check_seasons(seasons)
    return seasons
