"""``docs/result-reference.md``: the keys of every document and the columns of the ledger.

Keys and columns are read off documents that the program makes of a year of made-up weather and a scheme
with every device; what they mean stands in ``result_words``.
"""

from __future__ import annotations

import dataclasses
import re
from collections.abc import Iterable, Iterator, Mapping
from typing import Any, Final

from generators import result_words as words
from generators.markdown import MARK, cell, code, paragraph, table
from support import varied_year

from estimator.hour import OutdoorAir, run_hour
from estimator.plant import CARRIERS, PURPOSES
from estimator.quantities import QUANTITIES
from estimator.report.documents import hour_document, weather_document, year_document
from estimator.report.ledger import columns
from estimator.result import YearResult, evaluate
from estimator.scheme_file import parse_scheme
from estimator.weather import WeatherOptions, summarise
from estimator.weather.model import Finding, Repair
from estimator.year import Mode

__all__ = ["result_page"]

_EVERYTHING: Final = """
[scheme]
name = "every device"
[airflow]
outdoor_air = "2 m3/s"
[supply]
dew_point = "9 degC"
dry_bulb = { low = "17 degC", high = "21 degC" }
[fan]
total_pressure = "700 Pa"
efficiency = 0.6
[preheat]
dry_bulb = "5 degC"
source = "boiler"
[[reheat]]
source = "boiler"
capacity = "5 kW"
[[reheat]]
source = "district"
capacity = "5 kW"
[[reheat]]
source = "electric"
[plant]
cooling_cop = 3.5
"""

#: The unit that the end of a key names; the longest ending counts.
_UNITS: Final[Mapping[str, str]] = {
    "_kwh": "kWh",
    "_kw": "kW",
    "_kg": "kg",
    "_per_kwh_kg": "kg/kWh",
    "_kg_per_h": "kg/h",
    "_kg_per_s": "kg/s",
    "_m3_per_s": "m3/s",
    "_kg_per_m3": "kg/m3",
    "_kj_per_kg": "kJ/kg",
    "_g_per_kg": "g/kg",
    "_kg_per_kg": "kg/kg",
    "_c": "degC",
    "_pa": "Pa",
    "_m": "m",
    "_h": "h",
    "_percent": "%",
    "humidity_ratio": "kg/kg",
    "monthly_kwh[]": "kWh",
}

_INTRODUCTION: Final = (
    "`dewledger year --json` and `--hours`, `hour --json`, `weather --json` and `scheme show --json` write "
    "for other programs what the pages show to people. JSON and CSV are always in SI, whatever `--units` "
    "says, and the unit stands in the name. A figure that was not asked for or that is not fully determined "
    "is `null` (an empty cell), never 0 and never a part of a sum. Numbers are not rounded, apart from the "
    "ten digits of the CSV."
)

_MODES: Final[Mapping[Mode, str]] = {
    Mode.OFF: "the schedule has the unit off",
    Mode.UNTREATED: "the unit runs and the air is as wanted",
    Mode.HEATING: "heat without the coil",
    Mode.SENSIBLE_COOLING: "the coil cools and removes no water",
    Mode.DRYING: "the coil removes water, whatever asked for it",
    Mode.DRYING_WITH_REHEAT: "the same, and a source after the coil heats",
}


def result_page() -> str:
    """The page as text."""
    result = _a_year()
    year = year_document(result)
    outdoor = OutdoorAir(dry_bulb=3.0, humidity_ratio=0.004, pressure=101_325.0)
    warm = OutdoorAir(dry_bulb=32.0, humidity_ratio=0.018, pressure=101_325.0)
    hour = hour_document(run_hour(result.scheme, warm))
    cold = hour_document(run_hour(result.scheme, outdoor))
    weather = weather_document([(result.weather, summarise(result.weather))], {"site.epw": "why"})
    lines = [MARK, "", "# Result reference", "", *paragraph(_INTRODUCTION)]
    lines += _year(year)
    lines += _hour(hour, cold)
    lines += _weather(weather)
    lines += [
        "## Scheme document",
        "",
        *paragraph(
            "`dewledger scheme show --json`: `schema`, `tool` and `scheme` as above, and for each setting "
            "also `doc`, its meaning, and `default_source`, where its default comes from."
        ),
    ]
    lines += _ledger(result)
    return "\n".join(lines).rstrip("\n") + "\n"


def _a_year() -> YearResult:
    weather = dataclasses.replace(
        varied_year(),
        options=WeatherOptions(),
        repairs=(Repair(what="", count=1, where=""),),
        findings=(Finding(what=""),),
    )
    return evaluate(weather, parse_scheme(_EVERYTHING))


def _year(document: Mapping[str, Any]) -> list[str]:
    period = document["annual"]
    inner = {"weather", "scheme", "annual"}
    beside = {*period, "peaks"}
    top = {key: value for key, value in document.items() if key not in inner} | dict.fromkeys(inner)
    for part in ("seasons", "months"):
        # what stands beside the name of a season or a month is told once
        top[part] = [{k: v for k, v in document[part][0].items() if k not in beside}]
        missing = beside - set(document[part][0])
        if missing:
            raise KeyError(f"{part} have no {', '.join(sorted(missing))}")
    order = [key for key in document if key in top]
    keys = _named(_flat({key: top[key] for key in order}), (r"^peaks_outdoor\.\w+", "peaks_outdoor.<peak>"))
    return [
        "## Year document",
        "",
        *_keys(keys, words.YEAR),
        "## Periods",
        "",
        *paragraph("The year, each season and each month have the same keys; months add up to both."),
        *_keys(_named(_flat(period), (r"^hours_by_mode\..*", "hours_by_mode.<mode>")), words.PERIOD),
        "## Modes",
        "",
        *table(("mode", "is"), ((code(mode.words), text) for mode, text in _MODES.items())),
        "",
        "## Weather",
        "",
        *_keys(_flat(document["weather"]), words.WEATHER),
        "## Scheme",
        "",
        *_keys(
            _named(
                # a path has dots of its own
                (re.sub(r"^settings\..*\.", "settings.<path>.", key) for key in _flat(document["scheme"])),
            ),
            words.SCHEME,
        ),
    ]


def _hour(document: Mapping[str, Any], other: Mapping[str, Any]) -> list[str]:
    inputs = dict.fromkeys(
        key for doc in (document, other) for exchange in doc["exchanges"] for key in exchange["inputs"]
    )
    rest = {key: None if key in ("weather", "scheme") else value for key, value in document.items()}
    keys = _named(_flat(rest), (r"\.inputs\..*", ".inputs.<input>"))
    return [
        "## Hour document",
        "",
        *_keys(keys, words.HOUR),
        "## Inputs of an exchange",
        "",
        *_keys(inputs, words.INPUTS),
    ]


def _weather(document: Mapping[str, Any]) -> list[str]:
    keys = _named(
        (key for key in _flat(document) if key.removeprefix("weather[].") not in words.WEATHER),
        (r"^weather\[\]\.(dry_bulb_c|dew_point_c|pressure_pa)\.", "weather[].<quantity>."),
    )
    return [
        "## Weather document",
        "",
        *paragraph("`dewledger weather --json`, for all files together."),
        *_keys(_before("weather[].first_hour", "weather[]", keys), words.WEATHER_SUMMARY),
    ]


def _before(key: str, new: str, keys: Iterable[str]) -> Iterator[str]:
    """The keys with one more before ``key``."""
    for known in keys:
        if known == key:
            yield new
        yield known


def _ledger(result: YearResult) -> list[str]:
    pairs = {f"{c}_for_{re.sub('[ -]', '_', p)}_kw" for c in CARRIERS for p in PURPOSES}
    keys = dict.fromkeys(
        "<carrier>_for_<purpose>_kw"
        if name in pairs
        else re.sub(r"^\w+?_(dry_bulb_c|humidity_ratio_kg_per_kg)$", r"<point>_\1", name)
        for name in columns(result.year)
    )
    points = [name.replace(" ", "_") for name in result.year.airstream.points]
    return [
        "## Hourly ledger",
        "",
        *paragraph(
            "`dewledger year --hours`: CSV, UTF-8, one row an hour, a header row, ten significant digits, so "
            "that sums of a column give the totals. Flags are 0 and 1. A power holds for its whole hour: kW "
            "summed over rows are kWh."
        ),
        *_keys(keys, words.COLUMNS),
        *paragraph(
            "State points, in the order of the air, those that a scheme has: "
            + ", ".join(map(code, points))
            + ". A blow-through fan comes before the coil. The last source of heat ends at `supply`; each "
            "before it has a point of its own. Without a source `supply` is what leaves the last device."
        ),
        *paragraph(f"Purposes: {', '.join(map(code, PURPOSES))}."),
    ]


def _flat(value: Any, path: str = "") -> Iterator[str]:
    """The keys below a value, as paths."""
    if isinstance(value, Mapping):
        for key, item in value.items():
            yield from _flat(item, f"{path}.{key}" if path else key)
    elif isinstance(value, list):
        yield from _flat(value[0], f"{path}[]") if value else (f"{path}[]",)
    else:
        yield path


def _named(keys: Iterable[str], *patterns: tuple[str, str]) -> dict[str, None]:
    """The keys in order, each once, with names that differ from case to case replaced by what they are."""
    found: dict[str, None] = {}
    for key in keys:
        for pattern, name in patterns:
            key = re.sub(pattern, name, key)  # noqa: PLW2901 - one after the other
        found[key] = None
    return found


def _keys(keys: Iterable[str], meanings: Mapping[str, str]) -> list[str]:
    """A table of keys with unit and meaning; every key has a meaning and every meaning a key."""
    found = list(keys)
    for problem, names in (
        ("has no words", set(found) - set(meanings)),
        ("is in no document", set(meanings) - set(found)),
    ):
        if names:
            raise KeyError(f"{', '.join(sorted(names))} {problem}: see tests/generators/result_words.py")
    rows = [(code(key), _unit(key), cell(meanings[key])) for key in found]
    return [*table(("key", "unit", "meaning"), rows), ""]


def _unit(key: str) -> str:
    last = f"_{key.rpartition('.')[2]}"
    if last.startswith("_hours") or last.endswith("_hours") or key.startswith("hours_"):
        return QUANTITIES["hours"].unit
    endings = [ending for ending in _UNITS if last.endswith(ending)]
    return _UNITS[max(endings, key=len)] if endings else ""
