"""One hour as text: targets, state points, exchanges, the arithmetic behind each, and what it rests on."""

from __future__ import annotations

import math
from collections.abc import Mapping
from typing import Final

from estimator import __version__, moist_air
from estimator.constants import MOLE_MASS_RATIO, STANDARD_PRESSURE, TRIPLE_POINT, ZERO_CELSIUS
from estimator.hour import HourResult, Reason

# read from where they are used, so that what is printed cannot differ from what is computed
from estimator.moist_air import (
    _A1,
    _A2,
    _ALPHA_ICE,
    _ALPHA_LIQUID,
    _B0,
    _B1,
    _BETA_ICE,
    _BETA_LIQUID,
    _C0,
    _C1,
    _C2,
    _D0,
    _E0,
    _E1,
    _ICE,
    _ICE_ENTHALPY,
    _LIQUID,
    _WATER,
)
from estimator.quantities import UnitSystem
from estimator.report.arithmetic import Arithmetic, arithmetic
from estimator.report.scheme import SHORT_HASH
from estimator.report.text import bullets, heading, page, pairs, paragraph, show, table, unit
from estimator.report.weather import place_text
from estimator.result import ESTIMATE, NOT_MODELLED, SYNTHETIC
from estimator.scheme import resolved_sha256
from estimator.weather.model import WeatherYear

__all__ = ["hour_cautions", "hour_notes", "hour_page"]

#: The state table and the arithmetic below it share this, so that the one can be found in the other.
_DECIMALS: Final = 4

_UNMET: Final[Mapping[str, str]] = {"dew_point": "dew point", "warm": "too warm", "cold": "too cold"}


def hour_page(result: HourResult, system: UnitSystem = "si", weather: WeatherYear | None = None) -> str:
    """The whole page of one hour; ``weather`` is the year it was taken from."""
    steps = arithmetic(result)
    lines = paragraph(result.scheme.name, "", "")
    lines += pairs(_head(result, system))
    for title, body in (
        ("Targets", pairs(_targets(result, system))),
        ("State points", _states(result, system)),
        ("Exchanges", _exchanges(result, system)),
        ("Arithmetic", _arithmetic(result, steps, system)),
        ("Where h and W_s come from", _functions(result, over_ice=steps.over_ice or _frosty(result))),
        ("Cautions", bullets(hour_cautions(result, weather))),
        ("Notes", bullets(hour_notes(result))),
        ("Where this comes from", pairs(_provenance(result, weather, system))),
    ):
        lines += [*heading(title), *body]
    return page(lines)


# what is asked for and what comes of it


def _head(result: HourResult, system: UnitSystem) -> list[tuple[str, str]]:
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
        ("Off target", _off_target(result, system)),
        ("Dry air", text("mass flow", result.mass_flow_kg_per_s)),
        (
            "Coil",
            f"{text('cooling rate', cooling)}, sensible {text('cooling rate', result.sensible_kw)}, "
            f"latent {text('cooling rate', result.latent_kw)}",
        ),
        ("Governed by", result.coil.governed_by),
        ("Condensate", text("water rate", result.condensate_kg_per_h)),
        ("Electricity", electricity),
    ]


def _off_target(result: HourResult, system: UnitSystem) -> str:
    missed = [words for kind, words in _UNMET.items() if result.unmet[kind]]
    if not missed:
        return "no"
    reasons = dict.fromkeys(result.unmet_because[kind] for kind in _UNMET if result.unmet[kind])
    if len(reasons) == 1:
        return f"{', '.join(missed)}: {_because(next(iter(reasons)), result, system)}"
    return "; ".join(
        f"{words}: {_because(result.unmet_because[kind], result, system)}"
        for kind, words in _UNMET.items()
        if result.unmet[kind]
    )


def _because(reason: Reason, result: HourResult, system: UnitSystem) -> str:
    scheme = result.scheme
    coil = scheme.coil

    def text(name: str, value: float | None) -> str:
        return show(name, value, system, with_unit=True)

    if reason == "total cooling capacity":
        return f"the coil's capacity of {text('cooling rate', coil.capacity)} is reached"
    if reason == "least surface temperature":
        least = text("temperature", coil.least_surface_temperature)
        return f"the coil's surface is never below {least}"
    if reason == "lockout":
        return f"the coil is locked out below {text('temperature', coil.lockout_below)} outdoors"
    if reason == "no source of heat":
        return "the scheme has no source of heat"
    capacity = sum(source.capacity or 0.0 for source in scheme.reheat)
    return f"the heat sources' capacity of {text('power', capacity)} is reached"


def _targets(result: HourResult, system: UnitSystem) -> list[tuple[str, str]]:
    targets = result.targets

    def text(name: str, value: float, further: int = 0) -> str:
        return show(name, value, system, with_unit=True, decimals=_DECIMALS + further)

    low, high = targets.dry_bulb_low_c, targets.dry_bulb_high_c
    return [
        (
            "Dew point",
            f"at most {text('dew point', targets.dew_point_c)}; at this pressure W_set is "
            f"{text('humidity ratio', targets.humidity_ratio, 1)}",
        ),
        (
            "Dry bulb",
            f"low {'none' if low is None else text('dry bulb', low)}, "
            f"high {'none' if high is None else text('dry bulb', high)}",
        ),
    ]


_STATE_COLUMNS: Final = (
    ("Dry bulb", "dry bulb", "dry_bulb_c", _DECIMALS),
    ("Humidity", "humidity ratio", "humidity_ratio", _DECIMALS + 1),
    ("RH", "relative humidity", "relative_humidity", 2),
    ("Dew point", "dew point", "dew_point_c", _DECIMALS),
    ("Wet bulb", "wet bulb", "wet_bulb_c", _DECIMALS),
    ("Enthalpy", "enthalpy", "enthalpy_kj_per_kg", _DECIMALS),
)


def _states(result: HourResult, system: UnitSystem) -> list[str]:
    rows = [
        ["", *(label for label, _, _, _ in _STATE_COLUMNS)],
        ["", *(unit(name, system) for _, name, _, _ in _STATE_COLUMNS)],
    ]
    for number, point in enumerate(result.state_points, 1):
        cells = [
            show(name, getattr(point, field), system, decimals=decimals)
            for _, name, field, decimals in _STATE_COLUMNS
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


def _arithmetic(result: HourResult, steps: Arithmetic, system: UnitSystem) -> list[str]:
    lines = []
    if system == "ip":
        lines += [*paragraph("In SI, where the formulas need no unit factors."), ""]
    lines += paragraph(
        "Per kg of dry air; 1 before and 2 behind the device; W in g/kg; positive into the air. "
        "h, t, W_s, t_s and h_w are the functions of the next section."
    )
    if result.mass_flow_kg_per_s == 0.0:
        return [*lines, "", *paragraph("The unit is off in this hour: nothing is exchanged.")]
    return [*lines, *steps.lines]


# the functions that the arithmetic uses


#: A space at which no line breaks.
_UNBROKEN: Final = "\N{NO-BREAK SPACE}"


def _functions(result: HourResult, *, over_ice: bool) -> list[str]:
    p = result.outdoor.pressure
    lines = paragraph(
        f"At p of {p:.10g} Pa; q is p / {STANDARD_PRESSURE:g}, T is t + {ZERO_CELSIUS:g}, w is W / 1000. "
        "Sources and validity of the formulas are in docs/method.md."
    )
    lines += ["", *paragraph("Enthalpy, a fit to a real-gas formulation, and its inverse:")]
    lines += _formulas(
        ("h(t, W)", "a + b t + c t^2"),
        ("a", _sum((_B0, "w"), (_C0, "(q - 1)"), (_D0, "q w"), (_E0, "q w^2"))),
        ("b", _sum((_A1, ""), (_B1, "w"), (_C1, "(q - 1)"), (_E1, "q w^2"))),
        ("c", _sum((_A2, ""), (_C2, "(q - 1)"))),
        ("t(h, W)", "2 (h - a) / (b + sqrt(b^2 + 4 c (h - a)))"),
        ("h_w(t)", _powers(_WATER, "t")),
    )
    lines += [
        "",
        *paragraph(
            "Saturation by Hyland and Wexler (1983), with the enhancement factor of Greenspan (1976) as "
            "fitted by Hardy (1998); t_s is the inverse of W_s, by trial:"
        ),
    ]
    over = 1000.0 * MOLE_MASS_RATIO
    lines += _formulas(
        ("W_s(t)", f"{over:.10g} e / (p - e)"),
        ("e", "p_w exp(A (1 - p_w / p) + exp(B) (p / p_w - 1))"),
        ("p_w", f"exp({_saturation(_LIQUID)})"),
        ("A", _powers(_ALPHA_LIQUID, "t")),
        ("B", _powers(_BETA_LIQUID, "t")),
    )
    if over_ice:
        lines += ["", *paragraph(f"Below {TRIPLE_POINT:g} degC, over ice, instead:")]
        lines += _formulas(
            ("h_w(t)", _powers(_ICE_ENTHALPY, "t")),
            ("e", f"p_w exp(A (1 - p_w / p) + exp(B) (p / p_w - 1) {_signed(_joint(p))})"),
            ("p_w", f"exp({_saturation(_ICE)})"),
            ("A", _powers(_ALPHA_ICE, "t")),
            ("B", _powers(_BETA_ICE, "t")),
        )
    return [
        *lines,
        "",
        *paragraph(
            f"State points: the dew point is t_s(W); RH is p W / ({over:.10g} + W) over e at t; the wet bulb "
            "is the t at which h + (W_s(t) - W) / 1000 h_w(t) is h(t, W_s(t))."
        ),
    ]


def _frosty(result: HourResult) -> bool:
    """Whether any temperature of the state points lies where saturation is over ice."""
    return any(
        t < TRIPLE_POINT for p in result.state_points for t in (p.dry_bulb_c, p.dew_point_c, p.wet_bulb_c)
    )


def _joint(p: float) -> float:
    """What moves the logarithm of the enhancement factor over ice, so that it meets that over water."""
    t = -10.0
    pure = float(moist_air.saturation_pressure(t))
    alpha, beta = (sum(c * t**i for i, c in enumerate(cs)) for cs in (_ALPHA_ICE, _BETA_ICE))
    own = alpha * (1.0 - pure / p) + math.exp(beta) * (p / pure - 1.0)
    return math.log(float(moist_air.enhancement_factor(t, p))) - own


def _formulas(*rows: tuple[str, str]) -> list[str]:
    width = max(len(name) for name, _ in rows)
    lines = (
        line for name, text in rows for line in paragraph(text, f"    {name:<{width}} = ", " " * (width + 7))
    )
    return [line.replace(_UNBROKEN, " ") for line in lines]


def _signed(value: float) -> str:
    return f"{'-' if value < 0.0 else '+'} {abs(value):.10g}"


def _sum(*terms: tuple[float, str]) -> str:
    """Coefficients and what they multiply, as one expression that breaks between its terms."""
    text = ""
    for value, of in terms:
        if value != 0.0:
            sign = "-" if value < 0.0 else "+"
            lead = f" {sign}{_UNBROKEN}" if text else sign.replace("+", "")
            text += lead + f"{abs(value):.10g} {of}".rstrip().replace(" ", _UNBROKEN)
    return text


def _powers(coefficients: tuple[float, ...], of: str) -> str:
    names = ["", of, *(f"{of}^{i}" for i in range(2, len(coefficients)))]
    return _sum(*zip(coefficients, names, strict=True))


def _saturation(c: tuple[float, ...]) -> str:
    over, *powers, log = c
    names = ("", "T", "T^2", "T^3", "T^4")
    return _sum((over, "/ T"), *zip(powers, names, strict=True), (log, "ln(T)"))


# what it rests on


def hour_notes(result: HourResult) -> tuple[str, ...]:
    """What the hour's figures rest on, and what is left out."""
    notes = list(NOT_MODELLED)
    if result.electricity_kw is None:
        notes.append("plant.cooling_cop is not set, so electricity is not stated.")
    if result.scheme.fan is None:
        notes.append("The scheme has no fan: neither its electricity nor its heat is counted.")
    return tuple(notes)


def hour_cautions(result: HourResult, weather: WeatherYear | None = None) -> tuple[str, ...]:
    """What a reader must know before using the hour's figures."""
    cautions = []
    if weather is not None and weather.synthetic:
        cautions.append(SYNTHETIC)
    if weather is not None and weather.calendar == "typical":
        cautions.append("A typical year leaves out extremes: do not size equipment on an hour of it.")
    if any(result.unmet.values()):
        cautions.append("The supply is off target: do not compare its energy with that of one that is not.")
    if result.coil.flags["frozen"]:
        cautions.append(
            "Frost forms on the coil: airflow and capacity would fall, and defrosting is not modelled."
        )
    cautions.append(ESTIMATE)
    return tuple(cautions)


def _provenance(result: HourResult, weather: WeatherYear | None, system: UnitSystem) -> list[tuple[str, str]]:
    source = result.scheme.source
    rows = [("Weather", "none: the air was given")]
    if weather is not None:
        rows = [
            ("Weather", f"{weather.file} ({weather.format}), sha256 {weather.sha256[:SHORT_HASH]}"),
            ("", place_text(weather, system)),
        ]
    return [
        *rows,
        ("Scheme", f"{source.file}, sha256 {(source.file_sha256 or '')[:SHORT_HASH]}"),
        ("", f"all settings together: sha256 {resolved_sha256(result.scheme)[:SHORT_HASH]}"),
        ("Program", f"dewledger {__version__}"),
    ]
