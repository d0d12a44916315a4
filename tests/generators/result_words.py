"""What every key of a document and every column of the ledger means.

The keys themselves are taken from documents that the program makes; one that has no words here, or words
here that no document has, fails the generator.
"""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

__all__ = ["COLUMNS", "HOUR", "INPUTS", "PERIOD", "SCHEME", "WEATHER", "WEATHER_SUMMARY", "YEAR"]

#: Where a figure that rests on the plant is not stated.
_NO_COP: Final = "null where `plant.cooling_cop` is not set"

WEATHER: Final[Mapping[str, str]] = {
    "file": "name of the weather file as it was given, without its folder",
    "sha256": "hash of the file's content",
    "format": "EPW, TMY3 or TMY2",
    "site": "the site's name in the file",
    "latitude": "degrees north; null where not known",
    "longitude": "degrees east; null where not known",
    "elevation_m": "elevation; null where the header gives none that can be believed",
    "utc_offset_h": "time zone of the rows, hours east of Greenwich",
    "hours": "8760 or 8784",
    "calendar": "`typical` (months of several years) or `observed` (one year, its own weekdays)",
    "first_weekday": "day of the week of 1 January",
    "source_years[]": "the year that each month was taken from, January first",
    "synthetic": "true where the weather is made up",
    "read_with.humidity": "which of the file's columns governs: `dew_point` or `relative_humidity`",
    "read_with.max_gap_h": "longest run of missing hours that is filled",
    "read_with.utc_offset_h": "time zone given in place of the file's own; null where none was",
    "read_with.first_weekday": "day of the week of 1 January where one was given, else null",
    "repairs[].what": "what was changed in the weather as read",
    "repairs[].count": "in how many hours",
    "repairs[].where": "the first of them",
    "findings[].what": "what was noticed and left as it is",
    "findings[].count": "in how many hours; null where it is not about single hours",
    "findings[].where": "the first of them, or empty",
}

SCHEME: Final[Mapping[str, str]] = {
    "name": "name of the scheme",
    "file": "the scheme file, or the name of a bundled scheme",
    "file_sha256": "hash of the file's content",
    "resolved_sha256": "hash of all settings in SI, however they were written",
    "settings.<path>.value": "value in SI; a list for twelve months, an object for a target that follows the "
    "outdoor air, null where not set",
    "settings.<path>.unit": "its unit; null for a word or a text",
    "settings.<path>.origin": "`file`, `default` or `command`",
}

PERIOD: Final[Mapping[str, str]] = {
    "coil_cooling_kwh": "heat that the cooling coil takes from the air",
    "coil_sensible_kwh": "its part that lowers the dry bulb, at the leaving humidity ratio",
    "coil_latent_kwh": "the rest, which condenses water; the two add up exactly",
    "reheat_kwh": "heat from the sources after the coil, in hours in which the coil dries",
    "reheat_recovered_kwh": "its part from heat that was recovered",
    "reheat_solar_kwh": "its part from the sun",
    "reheat_purchased_kwh": "its part from bought energy",
    "cooling_undone_kwh": "heat after the coil that only brings the air back up to at most its outdoor dry "
    "bulb",
    "cooling_undone_by_fan_kwh": "its part from fan heat",
    "cooling_undone_by_purchased_kwh": "its part from bought heat",
    "outdoor_air_heating_kwh": "heat in hours in which the coil does not run, preheat included",
    "preheat_kwh": "heat of the preheat, in all hours",
    "preheat_while_cooling_kwh": "its part in hours in which the coil runs, which takes it out again",
    "condensate_kg": "water that leaves the coil, as liquid or ice",
    "condensate_frozen_kg": "its part that leaves as ice",
    "fan_kwh": "electricity of the fan",
    "electricity_kwh": f"bought electricity; {_NO_COP}",
    "fuel_kwh": "bought fuel",
    "heat_kwh": "bought district heat",
    "moisture_removed_per_kwh_kg": "condensate over the electricity of cooling; "
    f"{_NO_COP}, or without cooling",
    "hours_operating": "hours in which the unit runs",
    "hours_drying": "hours in which the coil removes water",
    "hours_reheat": "hours with reheat",
    "hours_frozen": "hours in which the condensate leaves as ice",
    "hours_unmet": "operating hours off any target by more than 0.1 K",
    "hours_unmet_dew_point": "of them, with too high a dew point",
    "hours_unmet_warm": "of them, too warm",
    "hours_unmet_cold": "of them, too cold",
    "cost": "cost of bought energy in the scheme's currency; null where a price or an amount is not known",
    "co2e_kg": "CO2 equivalent of bought energy; null where a factor or an amount is not known",
    "hours_by_mode.<mode>": "hours of each mode",
}

_PEAKS: Final[Mapping[str, str]] = {
    "coil_cooling_kw": "highest hour of coil cooling",
    "coil_cooling_at": "when, `MM-DD HH:MM`, by the start of the hour; null where the peak is 0",
    "reheat_kw": "highest hour of reheat",
    "reheat_at": "when",
    "condensate_kg_per_h": "highest hour of condensate",
    "condensate_at": "when",
}

_HEAD: Final[Mapping[str, str]] = {
    "schema": "counts breaking changes; new keys may come without one",
    "tool.name": "`dewledger`",
    "tool.version": "version of the program",
}

YEAR: Final[Mapping[str, str]] = {
    **_HEAD,
    "weather": "see [weather](#weather)",
    "scheme": "see [scheme](#scheme)",
    "currency": "label of all costs; null where the scheme names none",
    "annual": "see [periods](#periods)",
    "energy[].carrier": "`electricity`, `fuel` or `heat`",
    "energy[].purpose": "what it is bought for",
    "energy[].kwh": f"bought in the year; {_NO_COP}",
    "energy[].monthly_kwh[]": "the same by month, January first",
    **{f"peaks.{key}": words for key, words in _PEAKS.items()},
    "peaks_outdoor.<peak>.dry_bulb_c": "outdoor air in the hour of each peak; null where the peak is 0",
    "peaks_outdoor.<peak>.dew_point_c": "",
    "peaks_outdoor.<peak>.humidity_ratio": "",
    "peaks_outdoor.<peak>.pressure_pa": "",
    "seasons[].season": "name of the season; all keys of [periods](#periods) and `peaks` stand beside it",
    "seasons[].months[]": "its months, 1 to 12",
    "months[].month": "1 to 12; all keys of [periods](#periods) and `peaks` stand beside it",
    "balance.heat_residual_max": "worst hour's heat imbalance, as a share of the enthalpy that passes; at "
    "most 1e-9",
    "balance.water_residual_max": "worst hour's water imbalance, as a share of the water that passes; at "
    "most 1e-9",
    "notes[]": "what the figures rest on, in words",
    "cautions[]": "what a reader must know before using them, in words",
}

HOUR: Final[Mapping[str, str]] = {
    **_HEAD,
    "weather": "see [weather](#weather); null where the air was given",
    "scheme": "see [scheme](#scheme)",
    "outdoor.described": "how the hour was chosen, in words",
    "outdoor.dry_bulb_c": "outdoor dry bulb",
    "outdoor.humidity_ratio": "outdoor humidity ratio",
    "outdoor.pressure_pa": "station pressure, the same at every state point",
    "mass_flow_kg_per_s": "dry air through the unit",
    "state_points[].name": "place in the airstream, in the order of the air",
    "state_points[].dry_bulb_c": "dry bulb",
    "state_points[].humidity_ratio": "humidity ratio",
    "state_points[].relative_humidity": "a fraction; over ice below 0.01 degC",
    "state_points[].dew_point_c": "dew point; frost point below 0.01 degC",
    "state_points[].wet_bulb_c": "wet bulb; where there are two, the one over liquid water",
    "state_points[].enthalpy_kj_per_kg": "enthalpy, from dry air at 0 degC",
    "exchanges[].name": "the device",
    "exchanges[].from": "state point before it",
    "exchanges[].to": "state point behind it",
    "exchanges[].heat_kj_per_kg": "heat per kg of dry air, positive into the air",
    "exchanges[].water_g_per_kg": "water that left the air",
    "exchanges[].kw": "heat in all",
    "exchanges[].equation": "the formula, with the symbols of the method page",
    "exchanges[].inputs.<input>": "the numbers that went into it, see [inputs](#inputs-of-an-exchange)",
    "mode": "the hour's mode, see [modes](#modes)",
    "unmet.dew_point": "true where the supply is off its dew point by more than 0.1 K",
    "unmet.warm": "true where it is too warm",
    "unmet.cold": "true where it is too cold",
    "coil_sensible_kw": "sensible part of the coil's cooling",
    "coil_latent_kw": "latent part",
    "condensate_kg_per_h": "water that leaves the coil",
    "electricity_kw": f"all bought electricity; {_NO_COP}",
    "targets.dew_point_c": "highest dew point asked for in this hour",
    "targets.humidity_ratio": "humidity ratio of saturation at it and at the hour's pressure",
    "targets.dry_bulb_low_c": "dry bulb that the supply is heated to; null where none is asked for",
    "targets.dry_bulb_high_c": "dry bulb that the supply is cooled to; null where none is asked for",
    "flow_share": "share of the full flow that the schedule asks for; 1 without a schedule",
    "unmet_because.dew_point": "why: `least surface temperature`, `total cooling capacity` or `lockout`; "
    "null where met",
    "unmet_because.warm": "the same",
    "unmet_because.cold": "why: `heating capacity` or `no source of heat`; null where met",
    "coil.governed_by": "what fixes the coil's leaving air: `dew point`, `dry bulb`, "
    "`least surface temperature`, `total cooling capacity`, `lockout` or `off`",
    "coil.surface_c": "apparatus dew point, or the temperature of a dry surface; null where the coil does "
    "nothing",
    "coil.at_least_surface_temperature": "true where the surface is held at its least",
    "coil.at_capacity": "true at the total cooling capacity",
    "coil.frozen": "true where the condensate leaves as ice",
    "coil.locked_out": "true where the coil is locked out",
    "cooling_undone_kw": "heat that only brings the air back up to at most its outdoor dry bulb",
    "cooling_undone_by_fan_kw": "its part from fan heat",
    "cooling_undone_by_purchased_kw": "its part from bought heat",
    "energy[].carrier": "`electricity`, `fuel` or `heat`",
    "energy[].purpose": "what it is bought for",
    "energy[].kw": f"bought in this hour; {_NO_COP}",
    "notes[]": "what the figures rest on, in words",
    "cautions[]": "what a reader must know before using them, in words",
}

INPUTS: Final[Mapping[str, str]] = {
    "m_kg_per_s": "dry air",
    "h1_kj_per_kg": "enthalpy before the device",
    "h2_kj_per_kg": "enthalpy behind it",
    "w1_kg_per_kg": "humidity ratio before the coil",
    "w2_kg_per_kg": "humidity ratio behind it",
    "h_w_kj_per_kg": "enthalpy of the water (below 0.01 degC: ice) that leaves, at the leaving dry bulb",
    "h_t1_w2_kj_per_kg": "enthalpy at the entering dry bulb and the leaving humidity ratio",
    "bypass_factor": "bypass factor",
    "apparatus_dew_point_c": "apparatus dew point; only where the coil removes water",
    "inlet_volume_m3_per_s": "actual volume at the fan inlet",
    "inlet_density_kg_per_m3": "density of the moist air there",
    "standard_density_kg_per_m3": "density that the fan total pressure refers to",
    "total_pressure_pa": "fan total pressure",
    "efficiency": "fan total efficiency",
    "motor_efficiency": "motor and drive together",
    "loss_to_air": "share of their losses that ends in the air",
    "shaft_kw": "shaft power",
    "electric_kw": "electricity of the fan",
}

WEATHER_SUMMARY: Final[Mapping[str, str]] = {
    **_HEAD,
    "weather[]": "for each file the keys of [weather](#weather) and:",
    "weather[].first_hour": "the year's first hour, `MM-DD HH:MM`",
    "weather[].last_hour": "its last hour",
    "weather[].completeness": "share of the hours in which nothing was repaired",
    "weather[].<quantity>.least": "least of `dry_bulb_c`, `dew_point_c` and `pressure_pa`",
    "weather[].<quantity>.mean": "mean",
    "weather[].<quantity>.most": "greatest",
    "weather[].design[].name": "name of the design condition, as `--design` takes it",
    "weather[].design[].kind": "`dry bulb` or `dew point`: the value that is exceeded",
    "weather[].design[].frequency_percent": "in how many per cent of the year's hours it is exceeded",
    "weather[].design[].dry_bulb_c": "that value, or the mean coincident one",
    "weather[].design[].dew_point_c": "the same",
    "weather[].design[].humidity_ratio": "the same",
    "weather[].design[].pressure_pa": "mean coincident station pressure",
    "weather[].design[].coincident_hours": "hours that the coincident values are the mean of",
    "weather[].hours_above_dew_point[].dew_point_c": "a dew point",
    "weather[].hours_above_dew_point[].hours": "hours above it",
    "weather[].hours_below_freezing": "hours below 0 degC dry bulb",
    "failed[].file": "a file that could not be used",
    "failed[].message": "why",
}

COLUMNS: Final[Mapping[str, str]] = {
    "hour": "`MM-DD HH:MM`, the start of the hour in the file's standard time",
    "pressure_pa": "station pressure",
    "mass_flow_kg_per_s": "dry air through the unit; 0 where it is off",
    "<point>_dry_bulb_c": "dry bulb at each state point",
    "<point>_humidity_ratio_kg_per_kg": "humidity ratio at each state point",
    "coil_cooling_kw": "heat that the coil takes from the air",
    "coil_sensible_kw": "its sensible part",
    "coil_latent_kw": "its latent part",
    "apparatus_dew_point_c": "apparatus dew point; empty where the coil removes no water",
    "reheat_kw": "heat after the coil, in an hour in which it dries",
    "outdoor_air_heating_kw": "heat in an hour in which the coil does not run, preheat included",
    "preheat_kw": "heat of the preheat",
    "fan_kw": "electricity of the fan",
    "condensate_kg_per_h": "water that leaves the coil",
    "cooling_undone_kw": "heat that only brings the air back up to at most its outdoor dry bulb",
    "cooling_undone_by_fan_kw": "its part from fan heat; no column without a fan behind the coil",
    "cooling_undone_by_purchased_kw": "its part from bought heat; no column without a source",
    "<carrier>_for_<purpose>_kw": "bought energy by carrier and purpose, a column for each pair that the "
    f"scheme has; empty {_NO_COP.removeprefix('null ')}",
    "mode": "the hour's mode, in words",
    "unmet_dew_point": "1 where the supply is off its dew point by more than 0.1 K",
    "unmet_warm": "1 where it is too warm",
    "unmet_cold": "1 where it is too cold",
    "coil_at_least_surface_temperature": "1 where the coil is held at its least surface temperature",
    "coil_at_capacity": "1 where the coil is at its total cooling capacity",
    "coil_locked_out": "1 where the coil is locked out",
    "frozen": "1 where the condensate leaves as ice",
    "heat_residual": "heat imbalance, as a share of the enthalpy that passes",
    "water_residual": "water imbalance, as a share of the water that passes",
}
