"""The arithmetic of one hour, written out so that a reader with a calculator gets the same figures.

A step is a formula, the same formula with its numbers, and its result. Numbers are shown with as many
digits as it takes to arrive at the result as shown, four decimals at least.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from typing import Final

from estimator import moist_air
from estimator.hour import HourExchange, HourResult
from estimator.report.text import paragraph

__all__ = ["flow_steps", "step_lines", "steps_of"]

_DIGITS: Final = range(4, 11)


@dataclass(frozen=True, kw_only=True)
class Step:
    """One line of arithmetic: ``numbers`` names each input in braces, ``of`` works the result out."""

    symbol: str
    formula: str
    numbers: str
    inputs: Mapping[str, float]
    of: Callable[..., float]
    result: float
    unit: str
    decimals: int = 4

    def shown(self) -> tuple[str, str]:
        """The formula with its numbers, and the result."""
        want = f"{self.result:.{self.decimals}f}"
        texts: dict[str, str] = {}
        for digits in _DIGITS:
            texts = {name: _written(value, digits) for name, value in self.inputs.items()}
            again = self.of(**{name: float(text) for name, text in texts.items()})
            if f"{again:.{self.decimals}f}" == want:
                break
        signed = {name: f"({text})" if text.startswith("-") else text for name, text in texts.items()}
        return self.numbers.format(**signed), _plain_zero(want)


def _written(value: float, digits: int) -> str:
    """``value`` to ``digits`` decimals; a number that has fewer, as settings do, as it is."""
    short = f"{value:.6g}"
    return short if float(short) == value and "e" not in short else _plain_zero(f"{value:.{digits}f}")


def _plain_zero(text: str) -> str:
    return text.lstrip("-") if float(text) == 0.0 else text


def step_lines(steps: list[Step]) -> list[str]:
    """Steps as text, at most 80 columns."""
    width = max((len(step.symbol) for step in steps), default=0)
    lines = []
    for step in steps:
        numbers, result = step.shown()
        head, below = f"    {step.symbol:<{width}} = ", f"    {'':<{width}} = "
        lines += paragraph(step.formula, head, " " * (width + 7))
        lines += paragraph(numbers, below, " " * (width + 7))
        lines += [f"{below}{result} {step.unit}".rstrip()]
    return lines


def flow_steps(result: HourResult) -> list[Step]:
    """How the mass flow of dry air follows from the airflow asked for."""
    airflow, m = result.scheme.airflow, result.mass_flow_kg_per_s
    outdoor = result.outdoor
    inputs = {"volume": airflow.outdoor_air}
    formula, numbers = "V x rho", "{volume} x {rho}"
    if airflow.basis == "standard":
        full = airflow.outdoor_air * airflow.standard_density
        inputs["rho"] = airflow.standard_density
    else:
        v = float(moist_air.specific_volume(outdoor.dry_bulb, outdoor.humidity_ratio, outdoor.pressure))
        full = airflow.outdoor_air / v
        formula, numbers = "V / v", "{volume} / {v}"
        inputs["v"] = v
    if airflow.schedule:
        inputs["share"] = m / full
        formula, numbers = f"{formula} x share of the schedule", f"{numbers} x {{share}}"

    def flow(volume: float, rho: float = 1.0, v: float = 1.0, share: float = 1.0) -> float:
        return volume * rho / v * share

    return [Step(symbol="m", formula=formula, numbers=numbers, inputs=inputs, of=flow, result=m, unit="kg/s")]


def steps_of(result: HourResult, exchange: HourExchange) -> list[Step]:
    """The steps behind one exchange; none where it does nothing."""
    if exchange.kw == 0.0 and exchange.water_g_per_kg == 0.0:
        return []
    if exchange.name == "coil":
        return _coil_steps(result, exchange)
    if exchange.name == "fan":
        return _fan_steps(exchange)
    return _heat_steps(exchange)


def _heat_steps(exchange: HourExchange) -> list[Step]:
    inputs = exchange.inputs
    return [
        Step(
            symbol="q",
            formula="h2 - h1",
            numbers="{h2} - {h1}",
            inputs={"h2": inputs["h2_kj_per_kg"], "h1": inputs["h1_kj_per_kg"]},
            of=lambda h2, h1: h2 - h1,
            result=exchange.heat_kj_per_kg,
            unit="kJ/kg",
        ),
        _total(exchange),
    ]


def _total(exchange: HourExchange) -> Step:
    return Step(
        symbol="Q",
        formula="m q",
        numbers="{m} x {q}",
        inputs={"m": exchange.inputs["m_kg_per_s"], "q": exchange.heat_kj_per_kg},
        of=lambda m, q: m * q,
        result=exchange.kw,
        unit="kW",
        decimals=3,
    )


def _fan_steps(exchange: HourExchange) -> list[Step]:
    inputs = exchange.inputs
    shaft, electric = inputs["shaft_kw"], inputs["electric_kw"]
    return [
        Step(
            symbol="shaft",
            formula="V dp (rho / rho_standard) / efficiency / 1000",
            numbers="{volume} x {dp} x ({rho} / {standard}) / {efficiency} / 1000",
            inputs={
                "volume": inputs["inlet_volume_m3_per_s"],
                "dp": inputs["total_pressure_pa"],
                "rho": inputs["inlet_density_kg_per_m3"],
                "standard": inputs["standard_density_kg_per_m3"],
                "efficiency": inputs["efficiency"],
            },
            of=lambda volume, dp, rho, standard, efficiency: (
                volume * dp * (rho / standard) / efficiency / 1000.0
            ),
            result=shaft,
            unit="kW",
        ),
        Step(
            symbol="electric",
            formula="shaft / motor efficiency",
            numbers="{shaft} / {motor}",
            inputs={"shaft": shaft, "motor": inputs["motor_efficiency"]},
            of=lambda shaft, motor: shaft / motor,
            result=electric,
            unit="kW",
        ),
        Step(
            symbol="Q",
            formula="shaft + loss to air x (electric - shaft)",
            numbers="{shaft} + {loss} x ({electric} - {shaft})",
            inputs={"shaft": shaft, "electric": electric, "loss": inputs["loss_to_air"]},
            of=lambda shaft, electric, loss: shaft + loss * (electric - shaft),
            result=exchange.kw,
            unit="kW",
        ),
        Step(
            symbol="q",
            formula="Q / m",
            numbers="{heat} / {m}",
            inputs={"heat": exchange.kw, "m": inputs["m_kg_per_s"]},
            of=lambda heat, m: heat / m,
            result=exchange.heat_kj_per_kg,
            unit="kJ/kg",
        ),
    ]


def _coil_steps(result: HourResult, exchange: HourExchange) -> list[Step]:
    inputs = exchange.inputs
    wet = exchange.water_g_per_kg > 0.0
    # liquid water has an enthalpy below zero nowhere
    ice = wet and inputs["h_w_kj_per_kg"] < 0.0
    steps = _surface_steps(result, exchange) if "apparatus_dew_point_c" in inputs else []
    steps.append(
        Step(
            symbol="q",
            formula="-((h1 - h2) - (W1 - W2) h_w), W in kg/kg" + (", h_w that of ice" if ice else ""),
            numbers="-(({h1} - {h2}) - ({w1} - {w2}) / 1000 x {h_w})",
            inputs={
                "h1": inputs["h1_kj_per_kg"],
                "h2": inputs["h2_kj_per_kg"],
                "w1": 1000.0 * inputs["w1_kg_per_kg"],
                "w2": 1000.0 * inputs["w2_kg_per_kg"],
                "h_w": inputs["h_w_kj_per_kg"],
            },
            of=lambda h1, h2, w1, w2, h_w: -((h1 - h2) - (w1 - w2) / 1000.0 * h_w),
            result=exchange.heat_kj_per_kg,
            unit="kJ/kg",
        )
    )
    steps += [_total(exchange), *_split_steps(result, exchange)]
    return steps + (_water_steps(result, exchange) if wet else [])


def _split_steps(result: HourResult, exchange: HourExchange) -> list[Step]:
    inputs = exchange.inputs
    return [
        Step(
            symbol="sensible",
            formula="m (h(t1, W2) - h2)",
            numbers="{m} x ({h_t1_w2} - {h2})",
            inputs={
                "m": inputs["m_kg_per_s"],
                "h_t1_w2": inputs["h_t1_w2_kj_per_kg"],
                "h2": inputs["h2_kj_per_kg"],
            },
            of=lambda m, h_t1_w2, h2: m * (h_t1_w2 - h2),
            result=result.sensible_kw,
            unit="kW",
            decimals=3,
        ),
        Step(
            symbol="latent",
            formula="-Q - sensible",
            numbers="{cooling} - {sensible}",
            inputs={"cooling": -exchange.kw, "sensible": result.sensible_kw},
            of=lambda cooling, sensible: cooling - sensible,
            result=result.latent_kw,
            unit="kW",
            decimals=3,
        ),
    ]


def _water_steps(result: HourResult, exchange: HourExchange) -> list[Step]:
    inputs = exchange.inputs
    return [
        Step(
            symbol="water",
            formula="W1 - W2",
            numbers="{w1} - {w2}",
            inputs={"w1": 1000.0 * inputs["w1_kg_per_kg"], "w2": 1000.0 * inputs["w2_kg_per_kg"]},
            of=lambda w1, w2: w1 - w2,
            result=exchange.water_g_per_kg,
            unit="g/kg",
        ),
        Step(
            symbol="condensate",
            formula="m water x 3600 / 1000",
            numbers="{m} x {water} x 3600 / 1000",
            inputs={"m": inputs["m_kg_per_s"], "water": exchange.water_g_per_kg},
            of=lambda m, water: m * water * 3600.0 / 1000.0,
            result=result.condensate_kg_per_h,
            unit="kg/h",
            decimals=3,
        ),
    ]


def _surface_steps(result: HourResult, exchange: HourExchange) -> list[Step]:
    """From the apparatus dew point to the leaving state: the mixture, and what drains of it as fog."""
    inputs = exchange.inputs
    surface, p, bf = inputs["apparatus_dew_point_c"], result.outdoor.pressure, inputs["bypass_factor"]
    w_surface = float(moist_air.saturation_humidity_ratio(surface, p))
    h_surface = float(moist_air.enthalpy(surface, w_surface, p))
    w1, w2, h_w = inputs["w1_kg_per_kg"], inputs["w2_kg_per_kg"], inputs["h_w_kj_per_kg"]
    fog = 1000.0 * (bf * w1 + (1.0 - bf) * w_surface - w2)
    drains = fog > 5e-5
    steps = [
        Step(
            symbol="Wm" if drains else "W2",
            formula="BF W1 + (1 - BF) Ws, Ws being that of saturation at the apparatus dew point "
            f"of {surface:.4f} degC",
            numbers="{bf} x {w1} + (1 - {bf}) x {ws}",
            inputs={"bf": bf, "w1": 1000.0 * w1, "ws": 1000.0 * w_surface},
            of=lambda bf, w1, ws: bf * w1 + (1.0 - bf) * ws,
            result=1000.0 * w2 + (fog if drains else 0.0),
            unit="g/kg",
        )
    ]
    if drains:
        steps.append(
            Step(
                symbol="fog",
                formula="Wm - W2, more than the mixture can hold: it drains",
                numbers="{wm} - {w2}",
                inputs={"wm": 1000.0 * w2 + fog, "w2": 1000.0 * w2},
                of=lambda wm, w2: wm - w2,
                result=fog,
                unit="g/kg",
            )
        )
    steps.append(
        Step(
            symbol="h2",
            formula="BF h1 + (1 - BF) hs" + (" - fog h_w" if drains else ""),
            numbers="{bf} x {h1} + (1 - {bf}) x {hs}" + (" - {fog} / 1000 x {h_w}" if drains else ""),
            inputs={"bf": bf, "h1": inputs["h1_kj_per_kg"], "hs": h_surface}
            | ({"fog": fog, "h_w": h_w} if drains else {}),
            of=lambda bf, h1, hs, fog=0.0, h_w=0.0: bf * h1 + (1.0 - bf) * hs - fog / 1000.0 * h_w,
            result=inputs["h2_kj_per_kg"],
            unit="kJ/kg",
        )
    )
    return steps
