"""dewledger: what it takes to dry outdoor air by cooling it and heating it again, hour by hour.

The whole of it in three lines::

    from estimator import evaluate, load_scheme, read_weather

    result = evaluate(read_weather("site.epw"), load_scheme("scheme.toml"))
    print(result.totals.annual.reheat_kwh)

Names are loaded when they are first used, so importing the package costs next to nothing.
"""

from __future__ import annotations

from importlib import import_module
from typing import TYPE_CHECKING, Any

if TYPE_CHECKING:
    from estimator.errors import (
        BalanceError,
        CalculationError,
        ConvergenceError,
        DewledgerError,
        InputError,
        QuantityError,
        SchemeError,
        WeatherError,
    )
    from estimator.hour import HourResult, OutdoorAir, run_hour
    from estimator.result import YearResult, evaluate
    from estimator.scheme import Scheme, stack
    from estimator.scheme_file import load_scheme, parse_scheme
    from estimator.totals import Totals, sum_year
    from estimator.weather import WeatherOptions, read_weather
    from estimator.weather.model import WeatherYear
    from estimator.year import Year, run_year

__version__ = "0.1.0"

_HOME = {
    "BalanceError": "errors",
    "CalculationError": "errors",
    "ConvergenceError": "errors",
    "DewledgerError": "errors",
    "HourResult": "hour",
    "InputError": "errors",
    "OutdoorAir": "hour",
    "QuantityError": "errors",
    "Scheme": "scheme",
    "SchemeError": "errors",
    "Totals": "totals",
    "WeatherError": "errors",
    "WeatherOptions": "weather",
    "WeatherYear": "weather.model",
    "Year": "year",
    "YearResult": "result",
    "evaluate": "result",
    "load_scheme": "scheme_file",
    "parse_scheme": "scheme_file",
    "read_weather": "weather",
    "run_hour": "hour",
    "run_year": "year",
    "stack": "scheme",
    "sum_year": "totals",
}

__all__ = [
    "BalanceError",
    "CalculationError",
    "ConvergenceError",
    "DewledgerError",
    "HourResult",
    "InputError",
    "OutdoorAir",
    "QuantityError",
    "Scheme",
    "SchemeError",
    "Totals",
    "WeatherError",
    "WeatherOptions",
    "WeatherYear",
    "Year",
    "YearResult",
    "evaluate",
    "load_scheme",
    "parse_scheme",
    "read_weather",
    "run_hour",
    "run_year",
    "stack",
    "sum_year",
]


def __getattr__(name: str) -> Any:
    if name not in _HOME:
        raise AttributeError(f"module {__name__!r} has no attribute {name!r}")
    return getattr(import_module(f"{__name__}.{_HOME[name]}"), name)


def __dir__() -> list[str]:
    return sorted([*globals(), *_HOME])
