"""One hour as text: the state points, the exchanges, and the arithmetic behind each."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Final

from estimator.hour import HourResult
from estimator.quantities import UnitSystem
from estimator.report.arithmetic import flow_steps, step_lines, steps_of
from estimator.report.text import WIDTH, heading, page, pairs, paragraph, show, table, unit

__all__ = ["hour_page"]

#: The state table and the arithmetic below it share this, so that the one can be found in the other.
_DECIMALS: Final = 4

_UNMET: Final[Mapping[str, str]] = {"dew_point": "dew point", "warm": "too warm", "cold": "too cold"}


def hour_page(result: HourResult, system: UnitSystem = "si") -> str:
    """The whole page of one hour."""
    lines = paragraph(result.scheme.name, "", "")
    lines += pairs(_head(result, system))
    lines += [*heading("State points"), *_states(result, system)]
    lines += [*heading("Exchanges"), *_exchanges(result, system)]
    lines += [*heading("Arithmetic"), *_arithmetic(result, system)]
    return page(lines)


def _head(result: HourResult, system: UnitSystem) -> list[tuple[str, str]]:
    missed = [words for kind, words in _UNMET.items() if result.unmet[kind]]

    def text(name: str, value: float | None) -> str:
        return show(name, value, system, with_unit=True)

    electricity = text("electric power", result.electricity_kw)
    if result.electricity_kw is None:
        electricity += ": plant.cooling_cop is not set"
    cooling = result.sensible_kw + result.latent_kw
    return [
        ("Air", result.outdoor.described),
        ("Pressure", text("station pressure", result.outdoor.pressure)),
        ("Mode", result.mode.words),
        ("Off target", ", ".join(missed) or "no"),
        ("Dry air", text("mass flow", result.mass_flow_kg_per_s)),
        (
            "Coil",
            f"{text('cooling rate', cooling)}, sensible {text('cooling rate', result.sensible_kw)}, "
            f"latent {text('cooling rate', result.latent_kw)}",
        ),
        ("Condensate", text("water rate", result.condensate_kg_per_h)),
        ("Electricity", electricity),
    ]


_STATE_COLUMNS: Final = (
    ("Dry bulb", "dry bulb", "dry_bulb_c"),
    ("Humidity", "humidity ratio", "humidity_ratio"),
    ("RH", "relative humidity", "relative_humidity"),
    ("Dew point", "dew point", "dew_point_c"),
    ("Wet bulb", "wet bulb", "wet_bulb_c"),
    ("Enthalpy", "enthalpy", "enthalpy_kj_per_kg"),
)


def _states(result: HourResult, system: UnitSystem) -> list[str]:
    rows = [
        ["", *(label for label, _, _ in _STATE_COLUMNS)],
        ["", *(unit(name, system) for _, name, _ in _STATE_COLUMNS)],
    ]
    for number, point in enumerate(result.state_points, 1):
        cells = [
            show(
                name, getattr(point, field), system, decimals=2 if name == "relative humidity" else _DECIMALS
            )
            for _, name, field in _STATE_COLUMNS
        ]
        rows.append([f"{number} {point.name}", *cells])
    lines = table(rows, "lrrrrrr")
    if system == "ip":
        lines += paragraph(
            "Enthalpy is counted from dry air at 32 degF; charts in these units often count from 0 degF."
        )
    return lines


def _exchanges(result: HourResult, system: UnitSystem) -> list[str]:
    number = {point.name: i for i, point in enumerate(result.state_points, 1)}
    rows = [
        ["", "from", "to", "heat into the air", "", "water out"],
        ["", "", "", unit("enthalpy", system), unit("power", system), unit("humidity ratio", system)],
    ]
    rows += [
        [
            e.name,
            f"{number[e.entering]}",
            f"{number[e.leaving]}",
            show("enthalpy", e.heat_kj_per_kg, system, decimals=_DECIMALS),
            show("power", e.kw, system, decimals=3 if system == "si" else 2),
            show("humidity ratio", e.water_g_per_kg / 1000.0, system, decimals=_DECIMALS),
        ]
        for e in result.exchanges
    ]
    return table(rows, "lrrrrr")


def _arithmetic(result: HourResult, system: UnitSystem) -> list[str]:
    names = {point.name: f"{i} {point.name}" for i, point in enumerate(result.state_points, 1)}
    lines = []
    if system == "ip":
        lines += [*paragraph("In SI, where the formulas need no unit factors."), ""]
    lines += paragraph(
        "Per kg of dry air; 1 before and 2 behind the device; W in g/kg; positive into the air."
    )
    if result.mass_flow_kg_per_s == 0.0:
        return [*lines, "", *paragraph("The unit is off in this hour: nothing is exchanged.")]
    lines += ["", "  Mass flow of dry air", *step_lines(flow_steps(result))]
    for exchange in result.exchanges:
        lines += ["", f"  {exchange.name}: {names[exchange.entering]} -> {names[exchange.leaving]}"[:WIDTH]]
        steps = steps_of(result, exchange)
        lines += step_lines(steps) if steps else ["    nothing in this hour"]
    return lines
