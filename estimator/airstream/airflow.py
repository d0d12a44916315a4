"""How much air: the outdoor airflow, its basis, and the schedule that multiplies it."""

from __future__ import annotations

from dataclasses import dataclass, field
from typing import Any

import numpy as np
from numpy.typing import NDArray

from estimator import moist_air
from estimator.constants import STANDARD_DENSITY
from estimator.moist_air import Array, ArrayLike
from estimator.settings import Settings, setting

__all__ = ["Airflow", "ScheduleRule", "mass_flow"]


@dataclass(frozen=True, kw_only=True)
class ScheduleRule(Settings):
    """A share of the airflow in the hours that lie in all three sets; of overlapping rules the last counts.

    ``hours`` are the hours of the day by their start: 7 is 07:00 to 08:00.
    """

    days: tuple[int, ...] = tuple(range(7))
    hours: tuple[int, ...] = tuple(range(24))
    months: tuple[int, ...] = tuple(range(1, 13))
    fraction: float = setting(
        "fraction",
        least=0.0,
        most=1.0,
        default=1.0,
        doc="share of the airflow in these hours; 0 is off",
        example="1.0",
    )


@dataclass(frozen=True, kw_only=True)
class Airflow(Settings):
    """Outdoor airflow through the unit."""

    outdoor_air: float = setting(
        "airflow",
        least=0.0,
        above=True,
        doc="outdoor airflow at full flow",
        example="2.5 m3/s",
    )
    basis: str = setting(
        choices=("standard", "actual"),
        default="standard",
        doc="standard: constant mass, flow x standard density; "
        "actual: constant volume at the outdoor state of each hour",
        source="common practice",
    )
    standard_density: float = setting(
        "density",
        default=STANDARD_DENSITY,
        doc="dry air in a standard cubic metre; fan total pressure refers to it too",
        source="common practice: dry air at 20 degC and 101.325 kPa; 0.075 lb/ft3 in inch-pound practice",
    )
    schedule: tuple[ScheduleRule, ...] = field(default=())


def fraction(airflow: Airflow, month: Any, hour: Any, weekday: Any) -> Any:
    """Share of the full flow in each hour: 1 without a schedule; 0 where no rule of the schedule applies."""
    if not airflow.schedule:
        return 1.0
    share: Any = np.zeros(np.shape(month))
    for rule in airflow.schedule:
        inside = _in(month, rule.months) & _in(hour, rule.hours) & _in(weekday, rule.days)
        share = np.where(inside, rule.fraction, share)
    return share


def _in(values: NDArray[np.int64], allowed: tuple[int, ...]) -> NDArray[np.bool_]:
    return np.isin(values, np.asarray(allowed, dtype=np.int64))


def mass_flow(
    airflow: Airflow,
    *,
    month: NDArray[np.int64],
    hour: NDArray[np.int64],
    weekday: NDArray[np.int64],
    dry_bulb: Array,
    humidity_ratio: Array,
    pressure: Array,
) -> Array:
    """Dry air through the unit in each hour, kg/s, shape (..., hours)."""
    share = fraction(airflow, month, hour, weekday)
    flow: ArrayLike
    if airflow.basis == "standard":
        flow = airflow.outdoor_air * airflow.standard_density
    else:
        flow = airflow.outdoor_air / moist_air.specific_volume(dry_bulb, humidity_ratio, pressure)
    return np.asarray(flow * share * np.ones_like(dry_bulb))
