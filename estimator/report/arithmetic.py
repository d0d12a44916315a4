"""The arithmetic of one hour, written out so that a reader with a calculator gets the same figures.

A step is a formula, the same formula with its numbers, and its result. Numbers are shown with as many
digits as it takes to arrive at the result as shown, four decimals at least. Everything is in SI, humidity
ratios in g/kg, and runs forwards: what a step needs stands above it. A sentence between steps says what
the numbers alone cannot, such as what a value found by trial brings about.

A formula is written once, as the reader sees it, and worked out from there: what stands side by side is
multiplied. In a name ``~`` is shown as a space, and what follows ``#`` is not shown.
"""

from __future__ import annotations

import ast
import operator
import re
from collections.abc import Callable, Iterator, Mapping
from dataclasses import dataclass, field
from typing import Final

from estimator import moist_air
from estimator.airstream.heat import BoughtHeat
from estimator.constants import GAS_CONSTANT_DRY_AIR, MOLE_MASS_RATIO, TRIPLE_POINT, ZERO_CELSIUS
from estimator.hour import HourExchange, HourResult, StatePoint
from estimator.plant import CARRIER_OF, CARRIERS
from estimator.report.text import WIDTH, paragraph

__all__ = ["Arithmetic", "arithmetic"]

_DIGITS: Final = range(4, 11)
#: Less water than this is rounding, g/kg.
_NO_FOG: Final = 2e-6
_AT_CAPACITY: Final = 1.0 - 1e-9

_NAME: Final = re.compile(r"[A-Za-z][\w~.]*(?:#\w+)?")
_SIDE_BY_SIDE: Final = re.compile(r"(?<=[\w~)]) (?=[\w(])")
_HIDDEN: Final = re.compile(r"#\w+")
#: Brackets around a negative number that a function's own brackets and commas make unnecessary.
_BRACKETED: Final = re.compile(r"(?<=[(,])( ?)\((-[\d.]+)\)(?=[,)])")
_TWICE_NEGATIVE: Final = re.compile(r"^-\(-([\d.]+)\)")

_OPERATORS: Final[Mapping[type[ast.operator], Callable[[float, float], float]]] = {
    ast.Add: operator.add,
    ast.Sub: operator.sub,
    ast.Mult: operator.mul,
    ast.Div: operator.truediv,
}


@dataclass
class _Air:
    """The functions of the page's next section, at the hour's pressure; W in g/kg."""

    pressure: float
    #: whether saturation was asked for where it is over ice
    over_ice: bool = False

    def h(self, t: float, w: float) -> float:
        return float(moist_air.enthalpy(t, w / 1000.0, self.pressure))

    def t(self, h: float, w: float) -> float:
        return float(moist_air.dry_bulb_from_enthalpy(h, w / 1000.0, self.pressure))

    def w_s(self, t: float) -> float:
        self.over_ice |= t < TRIPLE_POINT
        return 1000.0 * float(moist_air.saturation_humidity_ratio(t, self.pressure))

    def t_s(self, w: float) -> float:
        t = float(moist_air.dew_point(w / 1000.0, self.pressure))
        self.over_ice |= t < TRIPLE_POINT
        return t

    def h_w(self, t: float) -> float:
        self.over_ice |= t < TRIPLE_POINT
        return float(moist_air.water_enthalpy(t))

    def evaluated(self, text: str) -> float:
        """The value of an expression of numbers and functions."""
        functions: Mapping[str, Callable[..., float]]
        functions = {"h": self.h, "t": self.t, "W_s": self.w_s, "t_s": self.t_s, "h_w": self.h_w}

        def value(node: ast.expr) -> float:
            match node:
                case ast.Constant(value=int() | float() as number):
                    return float(number)
                case ast.UnaryOp(op=ast.USub(), operand=operand):
                    return -value(operand)
                case ast.BinOp(left=left, op=op, right=right):
                    return _OPERATORS[type(op)](value(left), value(right))
                case ast.Call(func=ast.Name(id=name), args=arguments):
                    return functions[name](*map(value, arguments))
            raise ValueError(f"not arithmetic: {text}")

        return value(ast.parse(text.replace(" x ", " * "), mode="eval").body)


def _written(value: float, digits: int = 4) -> str:
    """``value`` to ``digits`` decimals; a number that has fewer, as settings do, as it is."""
    short = f"{value:.6g}"
    return short if float(short) == value and "e" not in short else _plain_zero(f"{value:.{digits}f}")


def _plain_zero(text: str) -> str:
    return text.lstrip("-") if float(text) == 0.0 else text


@dataclass(frozen=True, kw_only=True)
class _Step:
    """One line of arithmetic as it is shown."""

    symbol: str
    formula: str
    numbers: str
    result: str

    def lines(self, width: int) -> list[str]:
        """The step as text, on one line if it fits; symbols are ``width`` wide."""
        head, below = f"    {self.symbol:<{width}} = ", f"    {'':<{width}} = "
        hanging = " " * (width + 9)
        if len(whole := f"{head}{self.formula} = {self.numbers} = {self.result}") <= WIDTH:
            return [whole]
        formula = paragraph(self.formula, head, hanging)
        if len(rest := f"{below}{self.numbers} = {self.result}") <= WIDTH:
            return [*formula, rest]
        return [*formula, *paragraph(self.numbers, below, hanging), f"{below}{self.result}"]


@dataclass
class _Sheet:
    """The arithmetic of one device, or of one sum over the unit: steps, and sentences between them.

    ``known`` are the numbers that later steps may use, by name, unrounded.
    """

    title: str
    air: _Air
    known: dict[str, float] = field(default_factory=dict)
    body: list[_Step | str] = field(default_factory=list)

    def say(self, text: str) -> None:
        self.body.append(text)

    def step(self, symbol: str, formula: str, unit: str, decimals: int = 4, **given: float) -> float:
        """Work a formula out from what is known and given; the result is known from here on."""
        self.known |= given
        product = _SIDE_BY_SIDE.sub(" x ", formula.replace(" x ", " * ")).replace(" * ", " x ")
        value = self.air.evaluated(self._numbers(product, None))
        want, numbers, again = f"{value:.{decimals}f}", "", ""
        for digits in _DIGITS:
            numbers = self._numbers(product, digits)
            again = f"{self.air.evaluated(numbers):.{decimals}f}"
            if again == want:
                break
        numbers = _TWICE_NEGATIVE.sub(r"\1", _BRACKETED.sub(r"\1\2", numbers))
        self.body.append(
            _Step(
                symbol=symbol,
                formula=_HIDDEN.sub("", formula).replace("~", " "),
                numbers=numbers,
                result=f"{_plain_zero(again)} {unit}",
            )
        )
        self.known[symbol] = value
        return value

    def _numbers(self, product: str, digits: int | None) -> str:
        """The formula with a number for each name: to ``digits`` decimals, or all there is."""

        def number(match: re.Match[str]) -> str:
            name = match[0]
            if name == "x" or product[match.end() : match.end() + 1] == "(":
                return name
            value = self.known[name]
            text = repr(float(value)) if digits is None else _written(value, digits)
            return f"({text})" if text.startswith("-") else text

        return _NAME.sub(number, product)

    def lines(self) -> list[str]:
        """The sheet as text, at most 80 columns."""
        width = max((len(part.symbol) for part in self.body if isinstance(part, _Step)), default=0)
        shown = [f"  {self.title}"[:WIDTH]]
        for part in self.body:
            shown += paragraph(part, "    ") if isinstance(part, str) else part.lines(width)
        return shown


# the whole, in the order of the air


@dataclass(frozen=True)
class _Way:
    """An exchange with the states before and behind it; humidity ratios in g/kg."""

    exchange: HourExchange
    before: StatePoint
    after: StatePoint

    @property
    def known(self) -> dict[str, float]:
        """What enters, and the humidity ratio that leaves."""
        return {
            "m": self.exchange.inputs["m_kg_per_s"],
            "t1": self.before.dry_bulb_c,
            "h1": self.before.enthalpy_kj_per_kg,
            "W1": 1000.0 * self.before.humidity_ratio,
            "W2": 1000.0 * self.after.humidity_ratio,
        }


@dataclass(frozen=True, kw_only=True)
class Arithmetic:
    """The arithmetic of one hour as text, at most 80 columns."""

    lines: tuple[str, ...]
    #: whether some of it needs the functions over ice
    over_ice: bool


def arithmetic(result: HourResult) -> Arithmetic:
    """Everything that was worked out in this hour."""
    air = _Air(result.outdoor.pressure)
    points = {point.name: point for point in result.state_points}
    numbers = {name: f"{i} {name}" for i, name in enumerate(points, 1)}
    ways = [_Way(e, points[e.entering], points[e.leaving]) for e in result.exchanges]
    sheets = [_Sheet("outdoor air and targets", air)]
    _outdoor(result, sheets[0])
    for way in ways:
        e = way.exchange
        sheet = _Sheet(f"{e.name}: {numbers[e.entering]} -> {numbers[e.leaving]}", air, way.known)
        _device(result, way, sheet)
        sheets.append(sheet)
    if result.coil.surface_c is not None:
        sheets.append(_Sheet("cooling undone", air))
        _undone(result, ways, sheets[-1])
    sheets.append(_Sheet("bought energy", air))
    _energy(result, sheets[-1])
    lines = tuple(line for sheet in sheets for line in ("", *sheet.lines()))
    return Arithmetic(lines=lines, over_ice=air.over_ice)


def _outdoor(result: HourResult, sheet: _Sheet) -> None:
    """Mass flow of dry air, and what the targets mean."""
    airflow, outdoor = result.scheme.airflow, result.outdoor
    sheet.known |= {"V": airflow.outdoor_air, "rho": airflow.standard_density, "p": outdoor.pressure}
    sheet.known |= {"t": outdoor.dry_bulb, "W": 1000.0 * outdoor.humidity_ratio}
    sheet.known["t_dew"] = result.targets.dew_point_c
    flow = "V x rho"
    if airflow.basis == "actual":
        gas, zero, ratio = GAS_CONSTANT_DRY_AIR, ZERO_CELSIUS, 1000.0 * MOLE_MASS_RATIO
        sheet.step("v", f"{gas:g} (t + {zero:g}) (1 + W / {ratio:g}) / p", "m3/kg")
        flow = "V / v"
    if airflow.schedule:
        flow += " x share~of~the~schedule"
        sheet.known["share~of~the~schedule"] = result.flow_share
    sheet.step("m", flow, "kg/s")
    sheet.step("h", "h(t, W)", "kJ/kg")
    sheet.step("W_set", "W_s(t_dew)", "g/kg")


def _device(result: HourResult, way: _Way, sheet: _Sheet) -> None:
    name = way.exchange.name
    if name == "coil":
        _coil(result, way, sheet)
    elif way.exchange.kw == 0.0:
        sheet.say("Nothing in this hour.")
    elif name == "fan":
        _fan(way, sheet)
    else:
        _heat(result, way, sheet)


def _sources(result: HourResult) -> dict[str, BoughtHeat]:
    """Everything that buys heat, by the name of its exchange."""
    scheme = result.scheme
    preheat: dict[str, BoughtHeat] = {} if scheme.preheat is None else {"preheat": scheme.preheat}
    return preheat | {f"reheat.{source.source}": source for source in scheme.reheat}


def _heat(result: HourResult, way: _Way, sheet: _Sheet) -> None:
    name, preheat = way.exchange.name, result.scheme.preheat
    capacity = _sources(result)[name].capacity
    if capacity is not None and way.exchange.kw >= _AT_CAPACITY * capacity:
        sheet.say(f"At its capacity: Q is {_written(capacity)} kW.")
        sheet.known["Q"] = capacity
        _warmed(sheet)
        return
    asked = result.targets.dry_bulb_low_c
    if name == "preheat" and preheat is not None:
        asked = preheat.dry_bulb
    assert asked is not None
    symbol = "t_preheat" if name == "preheat" else "t_low"
    sheet.known[symbol] = asked
    sheet.step("h2", f"h({symbol}, W2)", "kJ/kg")
    _heat_between(sheet)


def _heat_between(sheet: _Sheet) -> None:
    """From the states to the heat."""
    sheet.step("q", "h2 - h1", "kJ/kg")
    sheet.step("Q", "m q", "kW", 3)


def _warmed(sheet: _Sheet) -> None:
    """From the heat to the state behind."""
    sheet.step("q", "Q / m", "kJ/kg")
    sheet.step("h2", "h1 + q", "kJ/kg")
    sheet.step("t2", "t(h2, W2)", "degC")


def _fan(way: _Way, sheet: _Sheet) -> None:
    given = way.exchange.inputs
    sheet.known |= {
        "dp": given["total_pressure_pa"],
        "rho_standard": given["standard_density_kg_per_m3"],
        "efficiency": given["efficiency"],
        "motor~efficiency": given["motor_efficiency"],
        "loss_to_air": given["loss_to_air"],
    }
    sheet.step("shaft", "m (1 + W1 / 1000) dp / rho_standard / efficiency / 1000", "kW")
    sheet.step("electric", "shaft / motor~efficiency", "kW")
    sheet.step("Q", "shaft + loss_to_air (electric - shaft)", "kW")
    _warmed(sheet)


# the coil: what fixes its surface, then from the surface to the leaving air


def _coil(result: HourResult, way: _Way, sheet: _Sheet) -> None:
    surface = result.coil.surface_c
    if surface is None:
        _idle(result, sheet)
        return
    sheet.known |= {
        "BF": way.exchange.inputs["bypass_factor"],
        "W_set": 1000.0 * result.targets.humidity_ratio,
        "t_least": result.scheme.coil.least_surface_temperature,
    }
    wet = way.exchange.water_g_per_kg > 0.0
    name = "ADP" if wet else "t_surface"
    said = {
        "dew point": _by_dew_point,
        "dry bulb": _by_dry_bulb,
        "least surface temperature": _by_least_surface,
        "total cooling capacity": _by_capacity,
    }[result.coil.governed_by](result, sheet, f"{name} {_written(surface)} degC")
    if said:
        sheet.say(said)
    sheet.known.setdefault(name, surface)
    if wet:
        _wet(result, way, sheet)
        return
    if "h2" not in sheet.known:
        sheet.step("h_surface", "h(t_surface, W1)", "kJ/kg")
        sheet.step("h2", "BF h1 + (1 - BF) h_surface", "kJ/kg")
        sheet.step("t2", "t(h2, W2)", "degC")
    sheet.say("The surface is not below the air's dew point: W2 is W1, and all of Q is sensible.")
    _heat_between(sheet)


def _idle(result: HourResult, sheet: _Sheet) -> None:
    coil, w1, w_set = result.scheme.coil, sheet.known["W1"], 1000.0 * result.targets.humidity_ratio
    least = _written(coil.least_surface_temperature)
    if result.mass_flow_kg_per_s == 0.0:
        sheet.say("Nothing: the unit is off.")
    elif result.coil.governed_by == "lockout" and coil.lockout_below is not None:
        outdoor, below = _written(result.outdoor.dry_bulb), _written(coil.lockout_below)
        sheet.say(f"Locked out: outdoor air of {outdoor} degC is below {below} degC.")
    elif result.coil.governed_by == "off":
        sheet.say("Nothing in this hour: W1 is not above W_set, and the supply is not too warm.")
    elif w1 > w_set:
        sheet.step("W_least", "W_s(t_least)", "g/kg", t_least=coil.least_surface_temperature)
        sheet.say(f"Nothing in this hour: even a surface at {least} degC takes no water from W1.")
    else:
        sheet.say(f"Nothing in this hour: the air is not above the least surface temperature, {least} degC.")


_FOR_HUMIDITY: Final = "(W_set - BF W1) / (1 - BF)"


def _by_dew_point(result: HourResult, sheet: _Sheet, surface: str) -> str:
    """The surface for the humidity; where its mixture would be fog, or there is none, a warmer one."""
    air, known, setpoint = sheet.air, sheet.known, result.targets.dew_point_c
    bf = known["BF"]
    needed = (known["W_set"] - bf * known["W1"]) / (1.0 - bf)
    sheet.say("Governed by the dew point: W2 is W_set.")
    saturated = f"so the air leaves saturated at exactly {_written(setpoint)} degC"
    if needed <= air.w_s(known["t_least"]):
        sheet.step("W_try", _FOR_HUMIDITY, "g/kg")
        return (
            f"No surface allowed is that dry. But what a mixture has above saturation, as fog, drains, "
            f"{saturated} with {surface}, found by trial."
        )
    mixture = bf * known["h1"] + (1.0 - bf) * air.h(air.t_s(needed), needed)
    if air.t(mixture, known["W_set"]) >= setpoint - 1e-6:
        sheet.step("W_surface", _FOR_HUMIDITY, "g/kg")
        sheet.step("ADP", "t_s(W_surface)", "degC")
        return ""
    sheet.step("W_try", _FOR_HUMIDITY, "g/kg")
    sheet.step("t_try", "t_s(W_try)", "degC")
    sheet.step("h_try", "BF h1 + (1 - BF) h(t_try, W_try)", "kJ/kg")
    sheet.step("t_mix", "t(h_try, W_set)", "degC")
    return (
        f"Below the dew point asked for, that would be fog. It drains, {saturated} with a surface that is "
        f"that much warmer: {surface}, found by trial."
    )


def _by_dry_bulb(result: HourResult, sheet: _Sheet, surface: str) -> str:
    high, judged = result.targets.dry_bulb_high_c, _judged(result)
    assert high is not None
    said = f"Governed by the dry bulb: {_written(high)} degC {judged}."
    if sheet.known["W2"] < sheet.known["W1"]:
        return f"{said} {surface}, found by trial, brings that about."
    sheet.say(said)
    sheet.known["t_high"] = high
    if judged == "behind the fan":
        heat = next(e.heat_kj_per_kg for e in result.exchanges if e.name == "fan")
        sheet.step("h2", "h(t_high, W2) - q_fan", "kJ/kg", q_fan=heat)
    else:
        sheet.step("h2", "h(t_high, W2)", "kJ/kg")
    sheet.step("t2", "t(h2, W2)", "degC")
    sheet.step("h_surface", "(h2 - BF h1) / (1 - BF)", "kJ/kg")
    sheet.step("t_surface", "t(h_surface, W1)", "degC")
    return ""


def _judged(result: HourResult) -> str:
    """Where the supply dry bulb is judged."""
    fan = result.scheme.fan
    return "behind the fan" if fan is not None and fan.position == "draw-through" else "behind the coil"


def _by_least_surface(result: HourResult, sheet: _Sheet, surface: str) -> str:
    known, high = sheet.known, result.targets.dry_bulb_high_c
    said = f"Governed by the least surface temperature: {surface}."
    if known["W2"] > known["W_set"] and sheet.air.w_s(known["t_least"]) < known["W1"]:
        sheet.say(f"{said} W_set asks for W_needed at the surface, which is less than W_surface:")
        sheet.step("W_needed", _FOR_HUMIDITY, "g/kg")
        return ""
    assert high is not None
    return f"{said} Even so the air {_judged(result)} is above {_written(high)} degC."


def _by_capacity(result: HourResult, sheet: _Sheet, surface: str) -> str:
    capacity = result.scheme.coil.capacity
    assert capacity is not None
    return (
        f"Governed by the total cooling capacity, {_written(capacity)} kW: {surface}, found by trial, is the "
        "coldest surface that takes no more."
    )


def _wet(result: HourResult, way: _Way, sheet: _Sheet) -> None:
    """From the apparatus dew point to the leaving air, and what it takes to get there."""
    air, known = sheet.air, sheet.known
    governed = result.coil.governed_by == "dew point"
    bf, w_surface = known["BF"], air.w_s(known["ADP"])
    fog = bf * known["W1"] + (1.0 - bf) * w_surface - known["W2"]
    if "W_surface" not in known:
        sheet.step("W_surface", "W_s(ADP)", "g/kg")
    sheet.step("h_surface", "h(ADP, W_surface)", "kJ/kg")
    if fog > _NO_FOG:
        _fog(way, sheet, governed=governed)
    else:
        if not governed:
            sheet.step("W2", "BF W1 + (1 - BF) W_surface", "g/kg")
        sheet.step("h2", "BF h1 + (1 - BF) h_surface", "kJ/kg")
        sheet.step("t2", "t(h2, W2)", "degC")
    # liquid water has an enthalpy below zero nowhere
    ice = way.exchange.inputs["h_w_kj_per_kg"] < 0.0
    sheet.step("h_w", "h_w(t2)", "kJ/kg" + (", of ice" if ice else ""))
    sheet.step("q", "(W1 - W2) / 1000 h_w - (h1 - h2)", "kJ/kg")
    sheet.step("Q", "m q", "kW", 3)
    sheet.step("sensible", "m (h(t1, W2) - h2)", "kW", 3)
    sheet.step("latent", "-Q - sensible", "kW", 3)
    sheet.step("water", "W1 - W2", "g/kg")
    sheet.step("condensate", "m water x 3600 / 1000", "kg/h", 3)


def _fog(way: _Way, sheet: _Sheet, *, governed: bool) -> None:
    """The mixture holds more water than saturated air: the excess drains."""
    h_mix = "BF h1 + (1 - BF) h_surface"
    sheet.step("W_mix", "BF W1 + (1 - BF) W_surface", "g/kg")
    sheet.step("h_mix", h_mix, "kJ/kg")
    t2 = way.after.dry_bulb_c
    sheet.known["t2"] = t2
    if not governed:
        trial = (
            f"That is fog: its excess drains until saturated air is left, at t2 {_written(t2)} degC, found"
        )
        sheet.say(f"{trial} by trial.")
        sheet.step("W2", "W_s(t2)", "g/kg")
    sheet.step("fog", "W_mix - W2", "g/kg")
    drained = sheet.known["h_mix"] - sheet.known["fog"] / 1000.0 * sheet.air.h_w(t2)
    if abs(drained - way.after.enthalpy_kj_per_kg) > 1e-4:
        # at the triple point fog leaves in part as ice, so that no one enthalpy of water fits
        sheet.say("Part of it freezes, which keeps the air at that temperature.")
        sheet.step("h2", "h(t2, W2)", "kJ/kg")
        return
    sheet.step("h2", "h_mix - fog / 1000 h_w(t2)", "kJ/kg")
    sheet.step("t2", "t(h2, W2)", "degC")


# sums over the unit


def _undone(result: HourResult, ways: list[_Way], sheet: _Sheet) -> None:
    """Heat behind the coil that only brings the air back, up to at most its outdoor dry bulb."""
    at = next(i for i, way in enumerate(ways) if way.exchange.name == "coil")
    leaving = ways[at].after
    if not any(result.cooling_undone_kw.values()):
        warm = leaving.dry_bulb_c >= result.outdoor.dry_bulb
        why = "the air leaves the coil no colder than it is outdoors" if warm else "nothing heats the air"
        sheet.say(f"None: {why}.")
        return
    sheet.say("What only brings the air back, at most to its outdoor dry bulb:")
    sheet.known |= {"m": result.mass_flow_kg_per_s, "t_outdoor": result.outdoor.dry_bulb}
    top = sheet.step("h_top", "h(t_outdoor, W2)", "kJ/kg", W2=1000.0 * leaving.humidity_ratio)
    parts = []
    for way in ways[at + 1 :]:
        before, after = way.before.enthalpy_kj_per_kg, way.after.enthalpy_kj_per_kg
        if after > before and before < top:
            name = way.exchange.name.removeprefix("reheat.")
            end = "h_top" if after > top else f"h2#{name}"
            sheet.known |= {f"h1#{name}": before, f"h2#{name}": after}
            sheet.step(name, f"m ({end} - h1#{name})", "kW", 3)
            parts.append(name)
    if len(parts) > 1:
        sheet.step("all", " + ".join(parts), "kW", 3)


def _energy(result: HourResult, sheet: _Sheet) -> None:
    for carrier in CARRIERS:
        terms = list(_terms(carrier, result, sheet.known))
        if any(row.kw is None for row in result.energy if row.carrier == carrier):
            sheet.say(f"{carrier.capitalize()} is not stated: plant.cooling_cop is not set.")
        elif terms:
            sheet.step(carrier, " + ".join(terms), "kW", 3)
    if not sheet.body:
        sheet.say("None in this hour.")


def _terms(carrier: str, result: HourResult, known: dict[str, float]) -> Iterator[str]:
    """What a carrier is bought for in this hour, as terms of a sum."""
    sources, cop = _sources(result), result.scheme.plant.cooling_cop
    for exchange in result.exchanges:
        name = exchange.name
        source = sources.get(name)
        if exchange.kw == 0.0:
            continue
        if source is not None and CARRIER_OF[source.source] == carrier:
            short = name.removeprefix("reheat.")
            known |= {name: exchange.kw, f"efficiency#{short}": source.efficiency or 1.0}
            yield f"{name} / efficiency#{short}"
        elif name == "coil" and carrier == "electricity" and cop is not None:
            known |= {"coil": -exchange.kw, "COP": cop}
            yield "coil / COP"
        elif name == "fan" and carrier == "electricity":
            known["fan"] = exchange.inputs["electric_kw"]
            yield "fan"
