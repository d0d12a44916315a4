"""The hourly ledger as CSV: one row an hour, the unit in each column's name.

Numbers have ten significant digits, so that sums of a column reproduce the totals. Flags are 0 and 1; a
cell is empty where there is no such value.
"""

from __future__ import annotations

from typing import IO, Any, Final

import numpy as np

from estimator.weather.model import WeatherYear
from estimator.year import Mode, Year

__all__ = ["columns", "write_ledger"]

_DIGITS: Final = "%.10g"


def columns(year: Year) -> dict[str, Any]:
    """The columns by name, in order; texts are lists, everything else an array of shape (hours,)."""
    assert year.weather is not None
    found: dict[str, Any] = {"hour": _labels(year.weather)}
    found |= {
        "pressure_pa": year.weather.pressure,
        "mass_flow_kg_per_s": year.mass_flow,
    }
    for name, state in year.airstream.points.items():
        place = name.replace(" ", "_").replace("-", "_")
        found[f"{place}_dry_bulb_c"] = state.dry_bulb
        found[f"{place}_humidity_ratio_kg_per_kg"] = state.humidity_ratio
    found |= {
        "coil_cooling_kw": year.coil_cooling,
        "coil_sensible_kw": year.coil_sensible,
        "coil_latent_kw": year.coil_latent,
        "apparatus_dew_point_c": year.apparatus_dew_point(),
        "reheat_kw": year.reheat,
        "outdoor_air_heating_kw": year.outdoor_air_heating,
        "preheat_kw": year.preheat,
        "fan_kw": year.fan_power,
        "condensate_kg_per_h": year.condensate,
        "cooling_undone_kw": year.cooling_undone,
    }
    found |= {f"cooling_undone_by_{name}_kw": power for name, power in year.cooling_undone_by.items()}
    for row in year.energy:
        column = f"{row.carrier}_for_{row.purpose.replace(' ', '_').replace('-', '_')}_kw"
        found[column] = [""] * year.weather.hours if row.power is None else row.power
    words = {int(mode): mode.words for mode in Mode}
    found["mode"] = [words[number] for number in year.mode.tolist()]
    found |= {f"unmet_{kind}": flags for kind, flags in year.unmet.items()}
    found |= {
        f"coil_{name.replace(' ', '_')}": flags for name, flags in year.coil_flags.items() if name != "frozen"
    }
    return found | {
        "frozen": year.frozen,
        "heat_residual": year.heat_residual,
        "water_residual": year.water_residual,
    }


def write_ledger(year: Year, stream: IO[str]) -> None:
    """Write the ledger of one year (no leading axis), header first, lines ending in a line feed."""
    found = columns(year)
    hours = len(found["hour"])
    formats, cells = [], []
    for values in found.values():
        form, column = _cells(values, hours)
        formats.append(form)
        cells.append(column)
    row = ",".join(formats) + "\n"
    stream.write(",".join(found) + "\n")
    stream.writelines(row % values for values in zip(*cells, strict=True))


def _cells(values: Any, hours: int) -> tuple[str, list[Any]]:
    """The format of a column and its cells; no text of the ledger has a comma or a quotation mark."""
    if isinstance(values, list):
        return "%s", values
    full = np.broadcast_to(values, (hours,))
    if full.dtype == bool:
        return "%d", full.tolist()
    missing = np.isnan(full)
    if missing.any():
        return "%s", [
            "" if gone else _DIGITS % value
            for value, gone in zip(full.tolist(), missing.tolist(), strict=True)
        ]
    # adding zero turns a negative zero into a plain one
    return _DIGITS, (full + 0.0).tolist()


def _labels(weather: WeatherYear) -> list[str]:
    return [weather.label(i) for i in range(weather.hours)]
