"""Quantities: one table of names, units and labels, and the one grammar in which a value is written.

Everything that shows, reads or documents a number looks here, so that a table, a chart, an error and a
scheme file cannot disagree. Inside the program every value is in the SI unit of its quantity; units are
converted only where a file or a command is read or written.

Grammar of a value, in a scheme file and on the command line::

    11 degC                    number and unit
    0.05  |  5 %               a pure number needs no unit
    8..14 degC by 0.5          a range with its step, both ends included
    [8, 10, 12] degC           a list; also [8 degC, 46 degF]

A step of a temperature range is a temperature difference.
"""

from __future__ import annotations

import difflib
import math
import re
from collections.abc import Iterable
from dataclasses import dataclass
from functools import cache
from typing import TYPE_CHECKING, Any, Final, Literal

from estimator.errors import QuantityError

if TYPE_CHECKING:
    import pint

__all__ = [
    "QUANTITIES",
    "Quantity",
    "UnitSystem",
    "convert",
    "count",
    "likeliest",
    "parse_value",
    "parse_values",
    "units_of",
]

UnitSystem = Literal["si", "ip"]


@dataclass(frozen=True, kw_only=True)
class Quantity:
    """One kind of number: how it is called, in which unit it is kept and shown, which units it takes."""

    name: str
    label: str
    symbol: str
    #: the unit inside the program and in every JSON and CSV
    unit: str
    #: the unit shown with ``--units ip``
    ip_unit: str
    #: decimals shown in SI and in inch-pound units
    decimals: tuple[int, int]
    #: plausible range in the SI unit; what lies outside is refused where it is read
    least: float = -math.inf
    most: float = math.inf
    #: the unit shown with ``--units si`` where that of ``unit`` would make small numbers
    si_unit: str = ""

    def unit_for(self, system: UnitSystem) -> str:
        """The unit in which ``system`` shows this quantity."""
        return (self.si_unit or self.unit) if system == "si" else self.ip_unit

    def show(
        self,
        value: float,
        system: UnitSystem = "si",
        *,
        with_unit: bool = True,
        decimals: int | None = None,
    ) -> str:
        """``value``, given in ``unit``, as text in the units of ``system``."""
        unit = self.unit_for(system)
        places = self.decimals[0 if system == "si" else 1] if decimals is None else decimals
        text = count(convert(value, self.unit, unit), places)
        return f"{text} {unit}" if with_unit and unit != "1" else text


def count(value: float, decimals: int = 0) -> str:
    """A number with a space between thousands; never minus zero."""
    text = f"{value:,.{decimals}f}".replace(",", " ")
    return text.lstrip("-") if not any(c in "123456789" for c in text) else text


# Definitions for the units library, one a line: name, what it is, further spellings. Its own stock of
# names is not loaded, because there "cfm" is not a flow and "20 F" is a capacitance.
_DEFINITIONS: Final = """
m = [length]
s = [time]
kg = [mass]
K = [temperature]; offset: 0
g = 0.001 * kg
lb = 0.45359237 * kg
gr = lb / 7000
min = 60 * s
h = 3600 * s
ft = 0.3048 * m
in = 0.0254 * m
L = 0.001 * m ** 3
US_gal = 231 * in ** 3
water = 999.7 * kg / m ** 3
gpm = US_gal / min
cfm = ft ** 3 / min
cfh = ft ** 3 / h
N = kg * m / s ** 2
Pa = N / m ** 2
hPa = 100 * Pa
kPa = 1000 * Pa
mbar = 100 * Pa
bar = 100000 * Pa
psi = 4.4482216152605 * N / in ** 2
inHg = 3386.389 * Pa
inH2O = 249.08891 * Pa
J = N * m
kJ = 1000 * J
MJ = 1000000 * J
GJ = 1000000000 * J
W = J / s
kW = 1000 * W
MW = 1000000 * W
kWh = 1000 * W * h
MWh = 1000000 * W * h
Btu = 1055.05585262 * J
kBtu = 1000 * Btu
MMBtu = 1000000 * Btu
therm = 100000 * Btu
ton = 12000 * Btu / h
percent = 0.01
degC = K; offset: 273.15
degF = 5 / 9 * K; offset: 255.37222222222223
"""

# How a unit is written here -> how the units library is told of it. A volume of condensate stands for its
# mass, at the density of water at 10 degC (999.7 kg/m3, common practice).
_EXPRESSIONS: Final = {
    "1": "",
    "%": "percent",
    "degC": "degC",
    "degF": "degF",
    "K": "K",
    "delta degF": "delta_degF",
    "Pa": "Pa",
    "hPa": "hPa",
    "mbar": "mbar",
    "kPa": "kPa",
    "bar": "bar",
    "psi": "psi",
    "inHg": "inHg",
    "inH2O": "inH2O",
    "m3/s": "m ** 3 / s",
    "m3/h": "m ** 3 / h",
    "m3/min": "m ** 3 / min",
    "L/s": "L / s",
    "cfm": "cfm",
    "kg/s": "kg / s",
    "kg/h": "kg / h",
    "lb/h": "lb / h",
    "kg/kg": "kg / kg",
    "g/kg": "g / kg",
    "gr/lb": "gr / lb",
    "kJ/kg": "kJ / kg",
    "Btu/lb": "Btu / lb",
    "kg/m3": "kg / m ** 3",
    "lb/ft3": "lb / ft ** 3",
    "m3/kg": "m ** 3 / kg",
    "ft3/lb": "ft ** 3 / lb",
    "W": "W",
    "kW": "kW",
    "MW": "MW",
    "Btu/h": "Btu / h",
    "kBtu/h": "kBtu / h",
    "MMBtu/h": "MMBtu / h",
    "ton": "ton",
    "kWh": "kWh",
    "MWh": "MWh",
    "MJ": "MJ",
    "GJ": "GJ",
    "kBtu": "kBtu",
    "MMBtu": "MMBtu",
    "therm": "therm",
    "ton-h": "ton * h",
    "kg": "kg",
    "lb": "lb",
    "L": "L * water",
    "m3": "m ** 3 * water",
    "US gal": "US_gal * water",
    "m": "m",
    "ft": "ft",
    "h": "h",
    "/kWh": "1 / kWh",
    "/MWh": "1 / MWh",
    "/GJ": "1 / GJ",
    "/therm": "1 / therm",
    "/MMBtu": "1 / MMBtu",
    "kg/kWh": "kg / kWh",
    "g/kWh": "g / kWh",
    "kg/MWh": "kg / MWh",
    "kg/GJ": "kg / GJ",
    "lb/kWh": "lb / kWh",
    "lb/MMBtu": "lb / MMBtu",
}

# Other spellings that leave no doubt.
_ALIASES: Final = {
    "°C": "degC",
    "C": "degC",
    "°F": "degF",
    "F": "degF",
    "m³/s": "m3/s",
    "m³/h": "m3/h",
    "m^3/s": "m3/s",
    "m^3/h": "m3/h",
    "l/s": "L/s",
    "in.w.g.": "inH2O",
    "in w.g.": "inH2O",
    "kg/m³": "kg/m3",
    "percent": "%",
    "tons": "ton",
    "gal": "US gal",
}

_TEMPERATURE: Final = ("degC", "degF", "K")
_DIFFERENCE: Final = ("K", "degC", "degF")
_PRESSURE: Final = ("Pa", "hPa", "mbar", "kPa", "bar", "psi", "inHg", "inH2O")
_FLOW: Final = ("m3/s", "m3/h", "m3/min", "L/s", "cfm")
_MASS_FLOW: Final = ("kg/s", "kg/h", "lb/h")
_RATIO: Final = ("kg/kg", "g/kg", "gr/lb")
_POWER: Final = ("kW", "W", "MW", "Btu/h", "kBtu/h", "MMBtu/h", "ton")
_ENERGY: Final = ("kWh", "MWh", "MJ", "GJ", "kBtu", "MMBtu", "therm", "ton-h")
_PRICE: Final = ("/kWh", "/MWh", "/GJ", "/therm", "/MMBtu")
_CARBON: Final = ("kg/kWh", "g/kWh", "kg/MWh", "kg/GJ", "lb/kWh", "lb/MMBtu")
_PURE: Final = ("1", "%")

_UNITS: Final[dict[str, tuple[str, ...]]] = {
    "degC": _TEMPERATURE,
    "K": _DIFFERENCE,
    "Pa": _PRESSURE,
    "m3/s": _FLOW,
    "kg/s": _MASS_FLOW,
    "kg/h": _MASS_FLOW,
    "kg/kg": _RATIO,
    "g/kg": _RATIO,
    "kJ/kg": ("kJ/kg", "Btu/lb"),
    "kg/m3": ("kg/m3", "lb/ft3"),
    "m3/kg": ("m3/kg", "ft3/lb"),
    "kW": _POWER,
    "kWh": _ENERGY,
    "kg": ("kg", "lb", "L", "m3", "US gal"),
    "m": ("m", "ft"),
    "h": ("h",),
    "/kWh": _PRICE,
    "kg/kWh": _CARBON,
    "1": _PURE,
}


def _table(*rows: Quantity) -> dict[str, Quantity]:
    return {row.name: row for row in rows}


def _q(
    name: str,
    label: str,
    symbol: str,
    unit: str,
    ip_unit: str,
    decimals: tuple[int, int],
    least: float = -math.inf,
    most: float = math.inf,
    si_unit: str = "",
) -> Quantity:
    return Quantity(
        name=name,
        label=label,
        symbol=symbol,
        unit=unit,
        ip_unit=ip_unit,
        decimals=decimals,
        least=least,
        most=most,
        si_unit=si_unit,
    )


#: The one table. Plausible ranges are common practice: wide enough for any site or unit that exists.
QUANTITIES: Final[dict[str, Quantity]] = _table(
    _q("dry bulb", "Dry bulb", "t", "degC", "degF", (2, 1), -90.0, 65.0),
    _q("dew point", "Dew point", "t_dp", "degC", "degF", (2, 1), -90.0, 40.0),
    _q("wet bulb", "Wet bulb", "t_wb", "degC", "degF", (2, 1), -90.0, 40.0),
    _q("temperature", "Temperature", "t", "degC", "degF", (1, 1), -60.0, 65.0),
    _q("temperature difference", "Temperature difference", "dt", "K", "delta degF", (2, 1)),
    _q("humidity ratio", "Humidity ratio", "W", "kg/kg", "gr/lb", (2, 1), 0.0, 0.12, "g/kg"),
    _q("relative humidity", "Relative humidity", "RH", "1", "%", (1, 1), 0.0, 1.0, "%"),
    _q("enthalpy", "Enthalpy", "h", "kJ/kg", "Btu/lb", (2, 2)),
    _q("station pressure", "Station pressure", "p", "Pa", "inHg", (0, 2), 45_000.0, 110_000.0),
    _q("fan pressure", "Fan total pressure", "dp", "Pa", "inH2O", (0, 2), 0.0, 5_000.0),
    _q("airflow", "Airflow", "V", "m3/s", "cfm", (3, 0), 0.0, 1_000.0),
    _q("mass flow", "Mass flow of dry air", "m", "kg/s", "lb/h", (3, 0), 0.0),
    _q("density", "Density of dry air", "rho", "kg/m3", "lb/ft3", (4, 4), 0.5, 2.0),
    _q("specific volume", "Specific volume", "v", "m3/kg", "ft3/lb", (4, 3)),
    _q("power", "Power", "P", "kW", "kBtu/h", (1, 0), 0.0, 100_000.0),
    _q("cooling rate", "Cooling", "Q", "kW", "ton", (1, 1), 0.0, 100_000.0),
    _q("electric power", "Electric power", "P", "kW", "kW", (1, 1), 0.0),
    _q("heat", "Heat", "Q", "kWh", "MMBtu", (0, 1), 0.0),
    _q("cooling", "Cooling", "Q", "kWh", "ton-h", (0, 0), 0.0),
    _q("electricity", "Electricity", "E", "kWh", "kWh", (0, 0), 0.0),
    _q("water", "Condensate", "m_w", "kg", "US gal", (0, 0), 0.0),
    _q("water rate", "Condensate rate", "m_w", "kg/h", "lb/h", (1, 1), 0.0),
    _q("moisture per energy", "Moisture removed per kWh", "MRE", "kg/kWh", "lb/kWh", (2, 2), 0.0),
    _q("elevation", "Elevation", "z", "m", "ft", (0, 0), -500.0, 6_000.0),
    _q("fraction", "Fraction", "", "1", "1", (3, 3), 0.0, 1.0),
    _q("coefficient of performance", "Coefficient of performance", "COP", "1", "1", (2, 2), 0.0, 30.0),
    _q("price", "Price", "", "/kWh", "/kWh", (4, 4), 0.0, 100.0),
    _q("carbon factor", "Carbon factor", "", "kg/kWh", "kg/kWh", (4, 4), 0.0, 10.0),
    _q("hours", "Hours", "", "h", "h", (0, 0), 0.0),
)


@cache
def _registry() -> pint.UnitRegistry[Any]:
    import pint

    registry: pint.UnitRegistry[Any] = pint.UnitRegistry(None, on_redefinition="raise")
    registry.load_definitions(_DEFINITIONS.strip().splitlines())
    return registry


@cache
def _affine(unit: str, to: str) -> tuple[float, float]:
    """The scale and offset that take a number from one unit to another."""
    if unit == to:
        return 1.0, 0.0
    registry = _registry()
    source, target = (registry.parse_units(_EXPRESSIONS[name]) for name in (unit, to))
    zero, far = (float(registry.Quantity(x, source).to(target).magnitude) for x in (0.0, 1000.0))
    return (far - zero) / 1000.0, zero


def convert(value: Any, unit: str, to: str) -> Any:
    """A number or an array, from one unit of this table to another."""
    scale, offset = _affine(unit, to)
    return value * scale + offset if offset else value * scale if scale != 1.0 else value


def units_of(quantity: Quantity) -> tuple[str, ...]:
    """Every unit in which a value of this quantity may be written."""
    return _UNITS[quantity.unit]


def likeliest(word: str, known: Iterable[str]) -> str:
    """``did you mean ...?`` where something close is known, else an empty string."""
    names = list(known)
    close = difflib.get_close_matches(word, names, n=1, cutoff=0.5)
    if not close:
        folded = {name.casefold(): name for name in names}
        close = [folded[w] for w in difflib.get_close_matches(word.casefold(), folded, n=1, cutoff=0.5)]
    return f"did you mean {close[0]!r}?" if close else ""


_NUMBER: Final = r"[+-]?(?:\d+(?:\.\d*)?|\.\d+)(?:[eE][+-]?\d+)?"
_ONE: Final = re.compile(rf"\s*({_NUMBER})\s*(.*?)\s*", re.DOTALL)
_RANGE: Final = re.compile(
    rf"\s*({_NUMBER}?)\s*\.\.\s*({_NUMBER})\s*(.*?)\s+by\s+({_NUMBER})\s*(.*?)\s*", re.DOTALL
)
_BARE_RANGE: Final = re.compile(r".*\d\s*\.\.\s*[\d+-].*", re.DOTALL)


def parse_value(text: Any, quantity: Quantity, *, where: str = "") -> float:
    """One value in the SI unit of ``quantity``.

    Raises
    ------
    QuantityError
        The text is not one number with one of the units of the quantity, or is not plausible for it.

    >>> parse_value("68 degF", QUANTITIES["dry bulb"])
    20.0
    """
    values = parse_values(text, quantity, where=where)
    if len(values) != 1:
        raise QuantityError(f"{text!r} has {len(values)} values", where=where, allowed=_expected(quantity))
    return values[0]


def parse_values(text: Any, quantity: Quantity, *, where: str = "") -> tuple[float, ...]:
    """One or more values in the SI unit of ``quantity``: a number, a range or a list.

    >>> parse_values("8..9 degC by 0.5", QUANTITIES["dry bulb"])
    (8.0, 8.5, 9.0)
    """
    if isinstance(text, bool) or not isinstance(text, int | float | str | list | tuple):
        raise QuantityError(f"{text!r} is not a value", where=where, allowed=_expected(quantity))
    if isinstance(text, list | tuple):
        values = tuple(_one(item, quantity, where) for item in text)
    elif isinstance(text, int | float):
        values = (_one(text, quantity, where),)
    elif text.strip().startswith("["):
        values = _listed(text.strip(), quantity, where)
    elif _RANGE.fullmatch(text):
        values = _ranged(text, quantity, where)
    elif _BARE_RANGE.fullmatch(text):
        raise QuantityError(
            f"{text!r} is a range without its step",
            where=where,
            allowed="first..last unit by step",
            hint=f"write for example {_example_range(quantity)!r}",
        )
    else:
        values = (_one(text, quantity, where),)
    if not values:
        raise QuantityError("the list is empty", where=where, allowed=_expected(quantity))
    return values


def _one(item: Any, quantity: Quantity, where: str, unit: str = "") -> float:
    if isinstance(item, bool) or not isinstance(item, int | float | str):
        raise QuantityError(f"{item!r} is not a value", where=where, allowed=_expected(quantity))
    if isinstance(item, str):
        match = _ONE.fullmatch(item)
        if match is None:
            what = "a number" if quantity.unit == "1" else "a number with a unit"
            raise QuantityError(f"{item!r} is not {what}", where=where, allowed=_expected(quantity))
        number, own = float(match[1]), match[2]
    else:
        number, own = float(item), ""
    value = _to_si(number, own or unit, quantity, where, shown=str(item))
    if not math.isfinite(value) or not quantity.least <= value <= quantity.most:
        raise QuantityError(
            f"{str(item)!r} is out of range for {quantity.name}", where=where, allowed=_bounds(quantity)
        )
    return value


def _bounds(quantity: Quantity) -> str:
    unit = "" if quantity.unit == "1" else f" {quantity.unit}"
    if math.isinf(quantity.most):
        return f"at least {quantity.least:g}{unit}" if math.isfinite(quantity.least) else "a finite number"
    bounds = f"{quantity.least:g} to {quantity.most:g}{unit}"
    if quantity.unit == "1" and quantity.most <= 1.0:
        bounds += f" ({100.0 * quantity.least:g} to {100.0 * quantity.most:g} %)"
    return bounds


def _to_si(number: float, unit: str, quantity: Quantity, where: str, shown: str) -> float:
    allowed = units_of(quantity)
    name = _ALIASES.get(unit, unit)
    if not name:
        if quantity.unit != "1":
            raise QuantityError(
                f"{shown!r} has no unit",
                where=where,
                allowed=_expected(quantity),
                hint=f"write for example '{shown} {allowed[0]}'",
            )
        return number
    if name not in allowed:
        raise QuantityError(
            f"{unit!r} is not a unit of {quantity.name}",
            where=where,
            allowed=", ".join(u for u in allowed if u != "1"),
            hint=likeliest(unit, allowed),
        )
    if quantity.unit == "K" and name in ("degC", "degF"):
        name = "K" if name == "degC" else "delta degF"
    # twelve digits: what somebody wrote in one unit stays the round number it is in another
    return float(f"{convert(number, name, quantity.unit):.12g}")


def _listed(text: str, quantity: Quantity, where: str) -> tuple[float, ...]:
    body, bracket, unit = text[1:].partition("]")
    if not bracket:
        raise QuantityError(f"{text!r} has no closing bracket", where=where, allowed="[8, 10, 12] unit")
    items = [item.strip().strip("'\"") for item in body.split(",")] if body.strip() else []
    return tuple(_one(item, quantity, where, unit.strip()) for item in items)


def _ranged(text: str, quantity: Quantity, where: str) -> tuple[float, ...]:
    match = _RANGE.fullmatch(text)
    if match is None or not match[1]:
        raise QuantityError(f"{text!r} has no first value", where=where, allowed=_example_range(quantity))
    first, last, step = float(match[1]), float(match[2]), float(match[4])
    unit, step_unit = match[3], match[5]
    if step_unit:
        step = _step_in(step, step_unit, unit, quantity, where)
    if step <= 0.0 or last < first:
        raise QuantityError(
            f"{text!r} goes nowhere", where=where, allowed="first below last, and a step above 0"
        )
    steps = (last - first) / step
    if steps > _MOST_VALUES:
        raise QuantityError(
            f"{text!r} has {steps:.0f} values", where=where, allowed=f"at most {_MOST_VALUES}"
        )
    whole = round(steps)
    if abs(steps - whole) > 1e-6:
        reached = first + math.floor(steps) * step
        raise QuantityError(
            f"{text!r} does not reach its end",
            where=where,
            allowed="a whole number of steps",
            hint=f"end at {reached:g} or {reached + step:g}",
        )
    numbers = (round(first + i * step, 12) for i in range(whole + 1))
    return tuple(_one(f"{number!r} {unit}", quantity, where) for number in numbers)


_MOST_VALUES: Final = 100_000


def _step_in(step: float, step_unit: str, unit: str, quantity: Quantity, where: str) -> float:
    """The step as a number of the range's own unit; a temperature step is a difference."""
    if quantity.unit != "degC":
        scale = _to_si(1.0, step_unit, quantity, where, step_unit) / _to_si(1.0, unit, quantity, where, unit)
        return step * scale
    difference = QUANTITIES["temperature difference"]
    return (
        step
        * _to_si(1.0, step_unit, difference, where, step_unit)
        / _to_si(1.0, unit or "K", difference, where, unit)
    )


def _expected(quantity: Quantity) -> str:
    if quantity.unit == "1":
        return "a plain number or a value in %"
    return f"a number with a unit ({', '.join(units_of(quantity))})"


def _example_range(quantity: Quantity) -> str:
    unit = units_of(quantity)[0]
    return "0..0.2 by 0.05" if unit == "1" else f"8..14 {unit} by 0.5"
