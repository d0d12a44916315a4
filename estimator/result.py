"""A finished year as one frozen result: totals, bill, provenance, notes and cautions.

Every renderer (terminal, JSON, CSV) works from this and from nothing else.
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np

from estimator import pricing
from estimator.quantities import QUANTITIES
from estimator.scheme import Scheme
from estimator.totals import SeasonMap, Totals, sum_year
from estimator.weather.model import WeatherYear
from estimator.year import Year, run_year

__all__ = ["ESTIMATE", "NOT_MODELLED", "SYNTHETIC", "YearResult", "evaluate"]


#: Said in every output that it touches.
NOT_MODELLED: Final = (
    "Each hour is a steady state: humidification, water re-evaporating from a cycling coil while the fan "
    "runs, duct gains and control dead bands are not modelled.",
    "Condensate leaves at the coil's leaving dry bulb, by convention. Station pressure holds throughout the "
    "unit: the fan's own pressure is left out of the air's state.",
)


SYNTHETIC: Final = "The weather is synthetic: made up for demonstration, of no real place."
ESTIMATE: Final = (
    "An estimate for comparison. Local codes, the authority having jurisdiction and a licensed "
    "practitioner decide."
)


@dataclass(frozen=True, kw_only=True, eq=False)
class YearResult:
    """One scheme in one weather year, summed and annotated."""

    weather: WeatherYear
    scheme: Scheme
    year: Year
    totals: Totals
    bill: pricing.Bill
    notes: tuple[str, ...]
    cautions: tuple[str, ...]


def evaluate(weather: WeatherYear, scheme: Scheme, seasons: SeasonMap | None = None) -> YearResult:
    """Run a scheme through a weather year, sum it, price it and say what a reader must know."""
    year = run_year(weather, scheme)
    sums = sum_year(year, seasons)
    return YearResult(
        weather=weather,
        scheme=scheme,
        year=year,
        totals=sums,
        bill=pricing.bill(sums.energy, scheme.prices, scheme.carbon),
        notes=_notes(year, sums),
        cautions=_cautions(year, sums),
    )


def _notes(year: Year, sums: Totals) -> tuple[str, ...]:
    scheme, weather = year.scheme, year.weather
    notes = list(NOT_MODELLED)
    if weather is not None:
        if weather.calendar == "typical" and scheme.airflow.schedule:
            notes.append(
                "The schedule's weekdays follow a typical year's calendar; see the weather's first weekday."
            )
        notes.extend(_finding_notes(weather))
    if scheme.airflow.basis == "standard":
        notes.append(
            f"Airflow is at standard density, {scheme.airflow.standard_density:g} kg dry air per m3: "
            "at full flow the mass of air is the same in every hour."
        )
    if scheme.airflow.schedule and scheme.fan is not None:
        notes.append(
            "Fan pressure and efficiency are held where the schedule lowers the flow: no fan law is applied."
        )
    if any(row.kwh is None for row in sums.energy):
        notes.append("plant.cooling_cop is not set, so electricity, cost and carbon are not stated.")
    limited = int(np.count_nonzero(year.coil_flags["at capacity"]))
    if limited:
        notes.append(f"The coil is at its total cooling capacity in {_hours(limited)}.")
    held = int(np.count_nonzero(year.coil_flags["at least surface temperature"]))
    if held:
        notes.append(
            "The coil is held at its least surface temperature, "
            f"{scheme.coil.least_surface_temperature:g} degC, in {_hours(held)}."
        )
    locked = int(np.count_nonzero(year.coil_flags["locked out"]))
    if locked:
        missed = year.coil_flags["locked out"] & (year.unmet["dew_point"] | year.unmet["warm"])
        notes.append(
            f"The coil is locked out in {_hours(locked)}, of which {_hours(int(np.count_nonzero(missed)))} "
            "miss a target for it."
        )
    if scheme.fan is None:
        notes.append("The scheme has no fan: neither its electricity nor its heat is counted.")
    return tuple(notes)


def _hours(count: int) -> str:
    return QUANTITIES["hours"].show(count)


def _finding_notes(weather: WeatherYear) -> list[str]:
    found = []
    for finding in weather.findings:
        count = f" ({_hours(finding.count)})" if finding.count is not None else ""
        where = f", {finding.where}" if finding.where else ""
        found.append(f"Weather: {finding.what}{count}{where}.")
    return found


def _cautions(year: Year, sums: Totals) -> tuple[str, ...]:
    weather, scheme = year.weather, year.scheme
    cautions = []
    if weather is not None and weather.synthetic:
        cautions.append(SYNTHETIC)
    if weather is not None and weather.calendar == "typical":
        cautions.append(
            "A typical year leaves out extremes: its peaks must not size equipment. "
            "Size on design conditions."
        )
    if sums.annual.hours_unmet:
        cautions.append(
            f"The supply misses a target in {_hours(sums.annual.hours_unmet)}; energy of a scheme that "
            "does less is not comparable."
        )
    if sums.annual.preheat_while_cooling_kwh:
        heat = QUANTITIES["electricity"].show(sums.annual.preheat_while_cooling_kwh)
        cautions.append(
            f"The coil takes out again {heat} of preheat: the preheat's dry bulb is high for this coil."
        )
    if sums.annual.hours_frozen:
        cautions.append(
            f"Frost forms on the coil in {_hours(sums.annual.hours_frozen)}: airflow and capacity would "
            "fall, and defrosting is not modelled."
        )
    if sums.annual.condensate_kg > 0.0:
        cautions.append(
            "Condensate is not drinking water: low in minerals and corrosive, with bacteria (Legionella "
            "among them) and metals from the coil. Wet surfaces and pans that do not drain grow mould."
        )
    if any(source.source == "electric" for source in scheme.reheat) or (
        scheme.preheat is not None and scheme.preheat.source == "electric"
    ):
        cautions.append("Electric heaters need airflow proving and over-temperature cut-outs.")
    cautions.append(ESTIMATE)
    return tuple(cautions)
