"""Results as JSON documents: always SI, the unit in the key, null for what is not fully determined."""

from __future__ import annotations

import dataclasses
import json
from collections.abc import Iterable, Mapping
from typing import Any, Final

import numpy as np

from estimator import __version__
from estimator.calendar_words import DAYS
from estimator.hour import HourResult
from estimator.report.hour import hour_cautions, hour_notes
from estimator.report.weather import first_weekday
from estimator.result import YearResult
from estimator.scheme import Scheme, leaves, plain, resolved_sha256
from estimator.totals import Peaks, PeriodTotals
from estimator.weather.model import WeatherYear
from estimator.weather.options import WeatherOptions
from estimator.weather.summary import Range, WeatherSummary

__all__ = ["dumps", "hour_document", "scheme_document", "weather_document", "year_document"]

#: Counts breaking changes of the documents; fields may be added without one.
SCHEMA: Final = 1


def dumps(document: Mapping[str, Any]) -> str:
    """The document as text, in ASCII so that any console or pipe takes it."""
    return json.dumps(document, indent=2, allow_nan=False) + "\n"


def _head() -> dict[str, Any]:
    return {"schema": SCHEMA, "tool": {"name": "dewledger", "version": __version__}}


# provenance


def _weather(weather: WeatherYear) -> dict[str, Any]:
    return {
        "file": weather.file,
        "sha256": weather.sha256,
        "format": weather.format,
        "site": weather.site,
        "latitude": weather.latitude,
        "longitude": weather.longitude,
        "elevation_m": weather.elevation,
        "utc_offset_h": weather.utc_offset,
        "hours": weather.hours,
        "calendar": weather.calendar,
        "first_weekday": first_weekday(weather),
        "source_years": list(weather.source_years),
        "synthetic": weather.synthetic,
        "read_with": None if weather.options is None else _choices(weather.options),
        "repairs": [dataclasses.asdict(repair) for repair in weather.repairs],
        "findings": [dataclasses.asdict(finding) for finding in weather.findings],
    }


def _choices(options: WeatherOptions) -> dict[str, Any]:
    """What a reader chose; whether the cache was used changes nothing."""
    return {
        "humidity": options.humidity,
        "max_gap_h": options.max_gap_hours,
        "utc_offset_h": options.utc_offset,
        "first_weekday": None if options.first_weekday is None else DAYS[options.first_weekday].capitalize(),
    }


def _scheme(scheme: Scheme, *, full: bool = False) -> dict[str, Any]:
    settings: dict[str, Any] = {}
    for leaf in leaves(scheme):
        quantity = leaf.setting.quantity
        settings[leaf.path] = {
            "value": plain(leaf.value),
            "unit": None if quantity is None else quantity.unit,
            "origin": leaf.origin,
        }
        if full:
            settings[leaf.path] |= {"doc": leaf.setting.doc, "default_source": leaf.setting.source or None}
    return {
        "name": scheme.name,
        "file": scheme.source.file,
        "file_sha256": scheme.source.file_sha256,
        "resolved_sha256": resolved_sha256(scheme),
        "settings": settings,
    }


# one year


def year_document(result: YearResult) -> dict[str, Any]:
    """A finished year: the contract that other programs may rely on."""
    sums = result.totals
    seasons = [
        {
            "season": name,
            "months": list(months),
            **_period(result, sums.seasons[name], months),
            **_own(sums.seasons[name]),
        }
        for name, months in sums.season_months.items()
    ]
    months = [
        {"month": month, **_period(result, period, (month,)), **_own(period)}
        for month, period in enumerate(sums.months, 1)
    ]
    return {
        **_head(),
        "weather": _weather(result.weather),
        "scheme": _scheme(result.scheme),
        "currency": result.bill.currency or None,
        "annual": _period(result, sums.annual, range(1, 13)),
        "energy": [
            {
                "carrier": row.carrier,
                "purpose": row.purpose,
                "kwh": row.kwh,
                "monthly_kwh": None if row.monthly_kwh is None else list(row.monthly_kwh),
            }
            for row in sums.energy
        ],
        "peaks": _peaks(sums.annual.peaks),
        "peaks_outdoor": _outdoor_at(result, sums.annual.peaks),
        "seasons": seasons,
        "months": months,
        "balance": {
            "heat_residual_max": sums.heat_residual_max,
            "water_residual_max": sums.water_residual_max,
        },
        "notes": list(result.notes),
        "cautions": list(result.cautions),
    }


def _period(result: YearResult, period: PeriodTotals, months: Iterable[int]) -> dict[str, Any]:
    held = tuple(months)
    values = {
        field.name: getattr(period, field.name)
        for field in dataclasses.fields(period)
        if field.name not in ("peaks", "hours_by_mode")
    }
    return {
        **values,
        "cost": result.bill.cost(held),
        "co2e_kg": result.bill.co2e_kg(held),
        "hours_by_mode": dict(period.hours_by_mode),
    }


def _own(period: PeriodTotals) -> dict[str, Any]:
    return {"peaks": _peaks(period.peaks)}


def _peaks(peaks: Peaks) -> dict[str, Any]:
    return dataclasses.asdict(peaks)


def _outdoor_at(result: YearResult, peaks: Peaks) -> dict[str, Any]:
    at = {"coil_cooling": peaks.coil_cooling_at, "reheat": peaks.reheat_at, "condensate": peaks.condensate_at}
    return {name: None if label is None else outdoor_at(result.weather, label) for name, label in at.items()}


def outdoor_at(weather: WeatherYear, label: str) -> dict[str, float]:
    """The outdoor air of the hour called ``label``, ``MM-DD HH:MM``."""
    month, day, hour = int(label[:2]), int(label[3:5]), int(label[6:8])
    at = int(np.argmax((weather.month == month) & (weather.day == day) & (weather.hour == hour)))
    return {
        "dry_bulb_c": float(weather.dry_bulb[at]),
        "dew_point_c": float(weather.dew_point[at]),
        "humidity_ratio": float(weather.humidity_ratio[at]),
        "pressure_pa": float(weather.pressure[at]),
    }


# one hour


def hour_document(result: HourResult, weather: WeatherYear | None = None) -> dict[str, Any]:
    """One hour: targets, state points, exchanges with what went into each, mode, what is missed and why."""
    outdoor = result.outdoor
    return {
        **_head(),
        "weather": None if weather is None else _weather(weather),
        "scheme": _scheme(result.scheme),
        "outdoor": {
            "described": outdoor.described,
            "dry_bulb_c": outdoor.dry_bulb,
            "humidity_ratio": outdoor.humidity_ratio,
            "pressure_pa": outdoor.pressure,
        },
        "targets": dataclasses.asdict(result.targets),
        "mass_flow_kg_per_s": result.mass_flow_kg_per_s,
        "flow_share": result.flow_share,
        "state_points": [dataclasses.asdict(point) for point in result.state_points],
        "exchanges": [
            {
                "name": e.name,
                "from": e.entering,
                "to": e.leaving,
                "heat_kj_per_kg": e.heat_kj_per_kg,
                "water_g_per_kg": e.water_g_per_kg,
                "kw": e.kw,
                "equation": e.equation,
                "inputs": dict(e.inputs),
            }
            for e in result.exchanges
        ],
        "mode": result.mode.words,
        "unmet": dict(result.unmet),
        "unmet_because": {target: result.unmet_because.get(target) for target in result.unmet},
        "coil": {
            "governed_by": result.coil.governed_by,
            "surface_c": result.coil.surface_c,
            **{name.replace(" ", "_"): flag for name, flag in result.coil.flags.items()},
        },
        "coil_sensible_kw": result.sensible_kw,
        "coil_latent_kw": result.latent_kw,
        "condensate_kg_per_h": result.condensate_kg_per_h,
        "cooling_undone_kw": sum(result.cooling_undone_kw.values()),
        "cooling_undone_by_fan_kw": result.cooling_undone_kw.get("fan", 0.0),
        "cooling_undone_by_purchased_kw": result.cooling_undone_kw.get("purchased", 0.0),
        "energy": [dataclasses.asdict(row) for row in result.energy],
        "electricity_kw": result.electricity_kw,
        "notes": list(hour_notes(result)),
        "cautions": list(hour_cautions(result, weather)),
    }


# schemes and weather


def scheme_document(scheme: Scheme) -> dict[str, Any]:
    """Every setting of a scheme with its meaning, and the source of its default."""
    return {**_head(), "scheme": _scheme(scheme, full=True)}


def weather_document(
    years: Iterable[tuple[WeatherYear, WeatherSummary]], failed: Mapping[str, str]
) -> dict[str, Any]:
    """The summaries of several weather years, and the message of every file that could not be read."""
    return {
        **_head(),
        "weather": [_weather(weather) | _summary(summary) for weather, summary in years],
        "failed": [{"file": file, "message": message} for file, message in failed.items()],
    }


def _summary(summary: WeatherSummary) -> dict[str, Any]:
    return {
        "first_hour": summary.period[0],
        "last_hour": summary.period[1],
        "completeness": summary.completeness,
        "dry_bulb_c": _range(summary.dry_bulb),
        "dew_point_c": _range(summary.dew_point),
        "pressure_pa": _range(summary.pressure),
        "design": [
            {
                "name": d.name,
                "kind": d.kind,
                "frequency_percent": d.frequency,
                "dry_bulb_c": d.dry_bulb,
                "dew_point_c": d.dew_point,
                "humidity_ratio": d.humidity_ratio,
                "pressure_pa": d.pressure,
                "coincident_hours": d.hours,
            }
            for d in summary.design
        ],
        "hours_above_dew_point": [{"dew_point_c": t, "hours": n} for t, n in summary.hours_above_dew_point],
        "hours_below_freezing": summary.hours_below_freezing,
    }


def _range(values: Range) -> dict[str, float]:
    return {"least": values.least, "mean": values.mean, "most": values.most}
