"""The contenders of the benchmark do the duty that this program does. Nothing here is timed."""

from __future__ import annotations

import dataclasses
import importlib.util
from pathlib import Path
from typing import Any

import pytest
from bench import duty as duties

from estimator.scheme_file import load_scheme
from estimator.totals import sum_year
from estimator.weather import WeatherOptions, WeatherYear, read_weather
from estimator.year import run_year

#: Every 23rd hour, so that each hour of the day and each month is there.
STEP = 23


@pytest.fixture(scope="module")
def hours() -> WeatherYear:
    import pvlib

    file = Path(pvlib.__file__).parent / "data" / "723170TYA.CSV"
    return duties.every(read_weather(file, WeatherOptions(cache=False)), STEP)


def own(hours: WeatherYear, **overrides: str) -> tuple[dict[str, float], dict[str, list[float]]]:
    scheme = load_scheme("starter", {key.replace("__", "."): value for key, value in overrides.items()})
    return dataclasses.asdict(duties.duty_of(scheme)), duties.sums_of(sum_year(run_year(hours, scheme)))


def test_psychrolib_is_plain_and_within_two_per_cent(hours: WeatherYear) -> None:
    # perfect-gas saturation holds 0.5 % less water than real air, and its sums differ accordingly
    if importlib.util.find_spec("psychrolib") is None:
        pytest.skip("psychrolib is not installed")
    from bench.psychrolib_year import Psychrolib

    numbers, wanted = own(hours)
    with Psychrolib(numbers, duties.columns(hours)) as contender:
        found = contender.run()[1]
    assert sum(found["hours_unmet"]) == 0
    assert duties.largest_difference(found, wanted) <= 0.02


def test_coolprop_is_within_a_fifth_of_a_per_cent(hours: WeatherYear) -> None:
    # CoolProp's humid air is what the program's enthalpy is fitted to
    pytest.importorskip("CoolProp", reason="CoolProp is not installed")
    from bench import coolprop_year

    numbers, wanted = own(hours)
    found = coolprop_year.run(numbers, duties.columns(hours))
    assert sum(found["hours_unmet"]) == 0
    assert duties.largest_difference(found, wanted) <= 0.002


@pytest.mark.parametrize(
    "overrides",
    [
        {},
        {"coil__bypass_factor": "0"},
        # hours at the least surface temperature, and unmet ones
        {"coil__bypass_factor": "0.2", "supply__dew_point": "6 degC"},
        # hours that cool for the dry bulb with a wet coil
        {"supply__dry_bulb": "13 degC"},
        # fog and frost
        {
            "coil__bypass_factor": "0.3",
            "supply__dew_point": "-3 degC",
            "supply__dry_bulb": "10 degC",
            "coil__least_surface_temperature": "-25 degC",
        },
    ],
    ids=["base", "no bypass", "held", "wet for dry bulb", "fog and frost"],
)
def test_the_fused_kernel_is_the_same_arithmetic(hours: WeatherYear, overrides: Any) -> None:
    pytest.importorskip("numba", reason="numba is not installed")
    from bench import fused_kernel

    numbers, wanted = own(hours, **overrides)
    found = fused_kernel.run(numbers, fused_kernel.columns(hours))
    assert duties.largest_difference(found, wanted) <= 1e-9


def test_the_fused_kernel_counts_the_same_hours(hours: WeatherYear) -> None:
    pytest.importorskip("numba", reason="numba is not installed")
    from bench import fused_kernel

    overrides = {"coil.bypass_factor": "0.2", "supply.dew_point": "6 degC"}
    scheme = load_scheme("starter", overrides)
    year = sum_year(run_year(hours, scheme)).annual
    found = fused_kernel.run(dataclasses.asdict(duties.duty_of(scheme)), fused_kernel.columns(hours))
    counted = {name: sum(found[name]) for name in fused_kernel.COUNTS}
    assert counted == {
        name: year.hours_by_mode[name] if name in year.hours_by_mode else getattr(year, name)
        for name in fused_kernel.COUNTS
    }
