"""The duty that every contender does: one scheme of the base kind, one year, and the sums asked for.

A base scheme has a constant mass of air, constant setpoints, a cooling coil without a capacity limit, a
draw-through fan and one source of reheat without a limit. Its numbers are handed to the contenders as
they are in ``Duty``; none of them reads a scheme or a weather file.
"""

from __future__ import annotations

import dataclasses
from dataclasses import dataclass
from typing import Any

import numpy as np

from estimator.scheme import Scheme
from estimator.totals import PeriodTotals, Totals
from estimator.weather import WeatherYear

#: What every contender sums by month, named as in this program's totals; kWh, and kg of water.
SUMS = (
    "coil_cooling_kwh",
    "coil_sensible_kwh",
    "reheat_kwh",
    "cooling_undone_kwh",
    "outdoor_air_heating_kwh",
    "condensate_kg",
    "fan_kwh",
    "electricity_kwh",
)
#: Peaks that every contender finds, by month; kW, and kg/h of water.
PEAKS = ("coil_cooling_kw", "reheat_kw", "condensate_kg_per_h")


@dataclass(frozen=True, kw_only=True)
class Duty:
    """The numbers of one base scheme: degC, kg dry air/s, kJ/kg."""

    flow: float
    dew_point: float
    low: float
    high: float
    bypass_factor: float
    least_surface_temperature: float
    #: kJ per kg of moist air: work at the shaft, electricity, heat left in the air
    shaft_work: float
    electric_work: float
    fan_heat: float
    heat_efficiency: float
    cooling_cop: float


def duty_of(scheme: Scheme) -> Duty:
    """The numbers of ``scheme``, which must be of the base kind."""
    fan, coil, supply, (source,) = scheme.fan, scheme.coil, scheme.supply, scheme.reheat
    base = (
        fan is not None
        and fan.position == "draw-through"
        and scheme.airflow.basis == "standard"
        and not scheme.airflow.schedule
        and scheme.preheat is None
        and (coil.capacity, coil.lockout_below, source.capacity) == (None, None, None)
        and source.source == "electric"
        and scheme.plant.cooling_cop is not None
    )
    if not base:
        raise ValueError(f"{scheme.name!r} is not a scheme of the base kind")
    shaft = fan.total_pressure / (1000.0 * scheme.airflow.standard_density * fan.efficiency)
    return Duty(
        flow=scheme.airflow.outdoor_air * scheme.airflow.standard_density,
        dew_point=constant(supply.dew_point),
        low=constant(supply.low),
        high=constant(supply.high),
        bypass_factor=coil.bypass_factor,
        least_surface_temperature=coil.least_surface_temperature,
        shaft_work=shaft,
        electric_work=shaft / fan.motor_efficiency,
        fan_heat=shaft * (1.0 + fan.loss_to_air * (1.0 / fan.motor_efficiency - 1.0)),
        heat_efficiency=source.efficiency,
        cooling_cop=scheme.plant.cooling_cop,
    )


def constant(setpoint: Any) -> float:
    """The value of a setpoint that follows nothing."""
    (value,) = setpoint.values
    return float(value)


def columns(weather: WeatherYear) -> dict[str, list[float]]:
    """What a loop over the hours takes, as plain lists."""
    return {
        "month": (weather.month - 1).tolist(),
        "dry_bulb": weather.dry_bulb.tolist(),
        "dew_point": weather.dew_point.tolist(),
        "pressure": weather.pressure.tolist(),
    }


def every(weather: WeatherYear, step: int) -> WeatherYear:
    """Every ``step``-th hour of a year: a year of its own whose months are short."""
    arrays = {
        item.name: value[::step].copy()
        for item in dataclasses.fields(weather)
        if isinstance(value := getattr(weather, item.name), np.ndarray)
    }
    return dataclasses.replace(weather, **arrays)


def sums_of(sums: Totals) -> dict[str, list[float]]:
    """This program's own monthly sums and peaks, by the names of ``SUMS`` and ``PEAKS``."""

    def value(period: PeriodTotals, name: str) -> float:
        return float(getattr(period.peaks if name in PEAKS else period, name))

    return {name: [value(month, name) for month in sums.months] for name in (*SUMS, *PEAKS)}


def annual(months: dict[str, list[float]]) -> dict[str, float]:
    """The year's sums and peaks from those of its months."""
    return {name: max(values) if name in PEAKS else sum(values) for name, values in months.items()}


def largest_difference(found: dict[str, list[float]], wanted: dict[str, list[float]]) -> float:
    """Largest difference between two results, as a share of the year's sum or peak."""
    scale = annual(wanted)
    return max(
        abs(a - b) / scale[name]
        for name in wanted
        for a, b in zip(found[name], wanted[name], strict=True)
        if scale[name] > 0.0
    )
