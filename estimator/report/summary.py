"""A finished year as text: what it takes, what it costs, what it misses, where it all comes from."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Final

from estimator import __version__
from estimator.calendar_words import MONTHS, short
from estimator.constants import BALANCE_TOLERANCE
from estimator.quantities import UnitSystem
from estimator.report.documents import outdoor_at
from estimator.report.scheme import SHORT_HASH, setting_text
from estimator.report.text import (
    NOT_STATED,
    bullets,
    count,
    heading,
    page,
    pairs,
    paragraph,
    show,
    table,
    unit,
)
from estimator.report.weather import first_weekday, notice_lines, place_text, years_text
from estimator.result import YearResult
from estimator.scheme import Carbon, Prices, leaves, resolved_sha256
from estimator.totals import PeriodTotals
from estimator.weather.model import WeatherYear

__all__ = ["why_not_stated", "year_page"]

#: Carriers that are bought as heat and so are shown in the unit of heat.
_HEAT_CARRIERS: Final = ("fuel", "heat")


def year_page(result: YearResult, system: UnitSystem = "si") -> str:
    """The whole page of one scheme in one weather year."""
    lines = paragraph(result.scheme.name, "", "")
    lines += paragraph(f"{result.weather.site}, {years_text(result.weather)}", "", "")
    for title, body in (
        ("Year", _annual(result, system)),
        ("Bought energy", _energy(result, system)),
        ("Hours", _hours(result)),
        ("Peaks", _peaks(result, system)),
        ("Seasons and months", _periods(result, system)),
        ("Cautions", bullets(result.cautions)),
        ("Notes", bullets(result.notes)),
        ("Repairs of the weather", notice_lines(result.weather.repairs, "None: every hour is as read.")),
        ("Where this comes from", _provenance(result, system)),
        ("Settings", _settings(result, system)),
    ):
        lines += [*heading(title), *body]
    return page(lines)


# the year


def _annual(result: YearResult, system: UnitSystem) -> list[str]:
    annual = result.totals.annual
    cooling, undone = annual.coil_cooling_kwh, annual.cooling_undone_kwh

    def row(label: str, name: str, value: float, of: float = 0.0, what: str = "coil cooling") -> list[str]:
        share = f"{100.0 * value / of:.1f} % of {what}" if of else ""
        return [label, show(name, value, system), unit(name, system), share]

    rows = [
        row("Coil cooling", "cooling", cooling),
        row("  sensible", "cooling", annual.coil_sensible_kwh, cooling),
        row("  latent", "cooling", annual.coil_latent_kwh, cooling),
        row("Reheat", "heat", annual.reheat_kwh),
    ]
    rows += [
        row(f"  {kind}", "heat", value, annual.reheat_kwh, "reheat")
        for kind, value in (
            ("recovered", annual.reheat_recovered_kwh),
            ("solar", annual.reheat_solar_kwh),
            ("purchased", annual.reheat_purchased_kwh),
        )
        if value or kind == "purchased"
    ]
    rows += [
        row("Cooling undone", "heat", undone, cooling),
        row("  by fan heat", "heat", annual.cooling_undone_by_fan_kwh, undone, "cooling undone"),
        row(
            "  by purchased reheat", "heat", annual.cooling_undone_by_purchased_kwh, undone, "cooling undone"
        ),
        row("Outdoor-air heating", "heat", annual.outdoor_air_heating_kwh),
    ]
    if result.scheme.preheat is not None:
        while_cooling = annual.preheat_while_cooling_kwh
        rows += [
            row("  by preheat", "heat", annual.preheat_kwh - while_cooling),
            row("Preheat while the coil runs", "heat", while_cooling),
        ]
    rows += [
        row("Condensate", "water", annual.condensate_kg),
        row("Fan electricity", "electricity", annual.fan_kwh),
    ]
    if annual.condensate_frozen_kg:
        rows.insert(
            -1, row("  frozen", "water", annual.condensate_frozen_kg, annual.condensate_kg, "condensate")
        )
    lines = table(rows, "lrll")
    if system == "ip":
        lines += paragraph("US gal of water at 10 degC.")
    removed = annual.moisture_removed_per_kwh_kg
    text = show("moisture per energy", removed, system, with_unit=True)
    if removed is None:
        text = f"{NOT_STATED}: {_why_no_efficiency(result)}"
    return lines + paragraph(f"Moisture removed per kWh of cooling electricity: {text}")


def _why_no_efficiency(result: YearResult) -> str:
    if result.scheme.plant.cooling_cop is None:
        return "plant.cooling_cop is not set"
    return "no cooling"


def why_not_stated(result: YearResult, factors: Prices | Carbon | None) -> str:
    """Which settings are missing for a sum over the bought energy, priced by ``factors`` or not at all."""
    missing = []
    if any(row.kwh is None for row in result.totals.energy):
        missing.append("plant.cooling_cop")
    if factors is not None:
        section = "prices" if isinstance(factors, Prices) else "carbon"
        carriers = dict.fromkeys(row.carrier for row in result.totals.energy)
        missing += [f"{section}.{carrier}" for carrier in carriers if getattr(factors, carrier) is None]
    return f"{' and '.join(missing)} {'are' if len(missing) > 1 else 'is'} not set"


def _energy(result: YearResult, system: UnitSystem) -> list[str]:
    rows: list[list[str]] = []
    annual = result.totals.annual
    sums = {"electricity": annual.electricity_kwh, "fuel": annual.fuel_kwh, "heat": annual.heat_kwh}
    carriers = dict.fromkeys(row.carrier for row in result.totals.energy)
    for carrier in carriers:
        name = "heat" if carrier in _HEAT_CARRIERS else "electricity"
        own = [row for row in result.totals.energy if row.carrier == carrier]
        parts = [(row.purpose, row.kwh) for row in own] + [("total", sums[carrier])]
        for i, (purpose, kwh) in enumerate(parts):
            label = carrier.capitalize() if i == 0 else ""
            shown = "" if kwh is None else unit(name, system)
            rows.append([label, purpose, show(name, kwh, system), shown])
    lines = table(rows, "llrl")
    if any(value is None for value in sums.values()):
        lines += paragraph(f"Not stated, because {why_not_stated(result, None)}.")
    year = range(1, 13)
    cost, carbon = result.bill.cost(year), result.bill.co2e_kg(year)
    currency = result.bill.currency or "(no currency named)"
    return [
        *lines,
        "",
        *pairs(
            [
                (
                    "Cost",
                    f"{NOT_STATED}: {why_not_stated(result, result.scheme.prices)}"
                    if cost is None
                    else f"{count(cost)} {currency}",
                ),
                (
                    "Carbon",
                    f"{NOT_STATED}: {why_not_stated(result, result.scheme.carbon)}"
                    if carbon is None
                    else f"{count(carbon)} kg CO2 equivalent",
                ),
            ]
        ),
    ]


# hours and peaks


def _hours(result: YearResult) -> list[str]:
    annual = result.totals.annual
    total = result.weather.hours
    rows = [["operating", count(annual.hours_operating), ""]]
    rows += [
        [f"  {mode}", count(n), f"{100.0 * n / total:.1f} %"] for mode, n in annual.hours_by_mode.items()
    ]
    rows += [
        ["off target (unmet)", count(annual.hours_unmet), ""],
        ["  dew point", count(annual.hours_unmet_dew_point), ""],
        ["  too warm", count(annual.hours_unmet_warm), ""],
        ["  too cold", count(annual.hours_unmet_cold), ""],
    ]
    if annual.hours_frozen:
        rows.append(["frost on the coil", count(annual.hours_frozen), ""])
    return table(rows, "lrr")


def _peaks(result: YearResult, system: UnitSystem) -> list[str]:
    peaks = result.totals.annual.peaks
    rows = [["", "", "", "hour", "outdoor dry bulb", "dew point"]]
    for label, name, value, at in (
        ("Coil cooling", "cooling rate", peaks.coil_cooling_kw, peaks.coil_cooling_at),
        ("Reheat", "power", peaks.reheat_kw, peaks.reheat_at),
        ("Condensate", "water rate", peaks.condensate_kg_per_h, peaks.condensate_at),
    ):
        cells = ["never", "", ""]
        if at is not None:
            outdoor = outdoor_at(result.weather, at)
            cells = [
                at,
                show("dry bulb", outdoor["dry_bulb_c"], system, with_unit=True),
                show("dew point", outdoor["dew_point_c"], system, with_unit=True),
            ]
        rows.append([label, show(name, value, system), unit(name, system), *cells])
    return table(rows, "lrllrr")


# seasons and months

_COLUMNS: Final = (
    ("Cooling", "cooling", "coil_cooling_kwh"),
    ("Latent", "cooling", "coil_latent_kwh"),
    ("Reheat", "heat", "reheat_kwh"),
    ("Undone", "heat", "cooling_undone_kwh"),
    ("Heating", "heat", "outdoor_air_heating_kwh"),
    ("Condensate", "water", "condensate_kg"),
    ("Unmet", "hours", "hours_unmet"),
)


def _periods(result: YearResult, system: UnitSystem) -> list[str]:
    sums = result.totals
    rows = [
        ["", *(label for label, _, _ in _COLUMNS)],
        ["", *(unit(name, system) for _, name, _ in _COLUMNS)],
    ]
    rows += [_period_row(name, period, system) for name, period in sums.seasons.items()]
    rows += [_period_row(_month(i), period, system) for i, period in enumerate(sums.months, 1)]
    rows.append(_period_row("Year", sums.annual, system))
    lines = table(rows, "l" + "r" * len(_COLUMNS))
    seasons = 2 + len(sums.seasons)
    spans = ", ".join(f"{name} {_months_text(months)}" for name, months in sums.season_months.items())
    return [
        *lines[:seasons],
        "",
        *lines[seasons:-1],
        "",
        lines[-1],
        *paragraph(f"Seasons: {spans}. Heating: of outdoor air, in hours without the coil.", "  "),
    ]


def _period_row(label: str, period: PeriodTotals, system: UnitSystem) -> list[str]:
    return [label, *(show(name, getattr(period, field), system) for _, name, field in _COLUMNS)]


def _months_text(months: Sequence[int]) -> str:
    return " ".join(_month(month) for month in months)


def _month(number: int) -> str:
    return short(MONTHS[number - 1]).capitalize()


# provenance


def _choices(weather: WeatherYear) -> str:
    """How the file was read."""
    options = weather.options
    if options is None:
        return "not read from a file"
    governs = options.humidity.replace("_", " ")
    return f"{governs} governs; gaps up to {options.max_gap_hours} h filled"


def _provenance(result: YearResult, system: UnitSystem) -> list[str]:
    weather, scheme, sums = result.weather, result.scheme, result.totals
    return pairs(
        [
            ("Weather", f"{weather.file} ({weather.format}), sha256 {weather.sha256[:SHORT_HASH]}"),
            ("", f"{place_text(weather, system)}; {count(weather.hours)} hours"),
            ("", f"1 January is a {first_weekday(weather)}; {_choices(weather)}"),
            ("Scheme", f"{scheme.source.file}, sha256 {(scheme.source.file_sha256 or '')[:SHORT_HASH]}"),
            ("", f"all settings together: sha256 {resolved_sha256(scheme)[:SHORT_HASH]}"),
            ("Program", f"dewledger {__version__}"),
            (
                "Balance",
                f"heat within {sums.heat_residual_max:.1e}, water within {sums.water_residual_max:.1e} of "
                f"what passes, in the worst hour; allowed {BALANCE_TOLERANCE:.0e}",
            ),
        ]
    )


def _settings(result: YearResult, system: UnitSystem) -> list[str]:
    groups: dict[str, list[str]] = {"command": [], "default": [], "not set": []}
    for leaf in leaves(result.scheme):
        text = setting_text(leaf, system)
        if leaf.origin == "command":
            groups["command"].append(f"{leaf.path} = {text}")
        elif text == "not set":
            groups["not set"].append(leaf.path)
        elif leaf.origin == "default":
            groups["default"].append(f"{leaf.path} = {text}")
    titles = {"command": "By command", "default": "Defaults", "not set": "Not set"}
    rows = [(titles[group], ", ".join(items)) for group, items in groups.items() if items]
    return [*pairs(rows), *paragraph("All other settings stand in the scheme.")]
