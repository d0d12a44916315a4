"""The base duty by psychrolib, hour by hour, in a process of its own in which numba cannot be imported.

psychrolib compiles itself with numba where that is installed; this contender is psychrolib as plain Python.

Calls in an hour, SI units:

    every hour         GetHumRatioFromTDewPoint   outdoor humidity ratio, from dew point
                       GetMoistAirEnthalpy        outdoor
                       GetHumRatioFromTDewPoint   setpoint
                       GetHumRatioFromTDewPoint   least surface temperature
                       GetHumRatioFromTDewPoint   setpoint + 0.1 K, for the unmet hours
                       GetMoistAirEnthalpy        at outdoor dry bulb behind the coil (sensible part, undone)
                       GetMoistAirEnthalpy        at the supply's low dry bulb (heat of the source)
                       GetTDryBulbFromEnthalpyAndHumRatio   behind the fan
                       GetTDryBulbFromEnthalpyAndHumRatio   supply
    drying hours       GetVapPresFromHumRatio     of the surface
                       GetTDewPointFromVapPres    apparatus dew point
                       GetMoistAirEnthalpy        at the surface
                       GetTDryBulbFromEnthalpyAndHumRatio   behind the coil (mixing)
                       GetMoistAirEnthalpy        only where the mixture is fog: saturated instead
    too warm, dry      GetMoistAirEnthalpy        behind the fan, at the supply's high dry bulb
                       GetTDryBulbFromEnthalpyAndHumRatio   behind the coil
                       GetTDryBulbFromEnthalpyAndHumRatio   at the surface

The water's enthalpy is 4.186 t. A duty in which the surface must be at its least temperature, or a coil that
cools for the dry bulb becomes wet, is refused: the base scheme at the site of the benchmark has no such hour,
and leaving the iteration out is in this contender's favour.
"""

from __future__ import annotations

import json
import subprocess
import sys
import time
import types
from collections.abc import Sequence
from typing import Any

CALLS = (
    "GetHumRatioFromTDewPoint",
    "GetMoistAirEnthalpy",
    "GetTDewPointFromVapPres",
    "GetTDryBulbFromEnthalpyAndHumRatio",
    "GetVapPresFromHumRatio",
)


def plain_psychrolib() -> Any:
    """psychrolib without numba, every function that is called being plain Python."""
    if "psychrolib" in sys.modules or "numba" in sys.modules:
        raise RuntimeError("psychrolib or numba is loaded already: use a process of its own")
    # None here makes the import fail, whatever is installed
    sys.modules["numba"] = None  # type: ignore[assignment]
    import psychrolib

    for name in (*CALLS, "GetSatVapPres", "dLnPws_", "isIP"):
        if type(getattr(psychrolib, name)) is not types.FunctionType:
            raise RuntimeError(f"psychrolib.{name} is not a plain Python function")
    psychrolib.SetUnitSystem(psychrolib.SI)
    return psychrolib


def run(  # noqa: PLR0915 - a loop without calls of its own is the quickest way to call the library
    library: Any, duty: dict[str, float], weather: dict[str, list[float]]
) -> dict[str, list[float]]:
    """Monthly sums and peaks."""
    humidity_from_dew_point = library.GetHumRatioFromTDewPoint
    enthalpy = library.GetMoistAirEnthalpy
    dew_point_from = library.GetTDewPointFromVapPres
    dry_bulb_from = library.GetTDryBulbFromEnthalpyAndHumRatio
    vapour_pressure = library.GetVapPresFromHumRatio
    flow, bf = duty["flow"], duty["bypass_factor"]
    t_set, t_least = duty["dew_point"], duty["least_surface_temperature"]
    low, high = duty["low"], duty["high"]
    months = [[0.0] * 12 for _ in range(12)]
    for month, t1, t_dew, p in zip(
        weather["month"], weather["dry_bulb"], weather["dew_point"], weather["pressure"], strict=True
    ):
        w1 = humidity_from_dew_point(t_dew, p)
        h1 = enthalpy(t1, w1) / 1000.0
        w_set = humidity_from_dew_point(t_set, p)
        w_least = humidity_from_dew_point(t_least, p)
        w_worst = humidity_from_dew_point(t_set + 0.1, p)
        t2, w2, h2 = t1, w1, h1
        if w1 > w_set and w1 > w_least:
            w_surface = (w_set - bf * w1) / (1.0 - bf)
            if w_surface <= w_least:
                raise ValueError("the surface is at its least temperature: not part of this duty")
            t_surface = dew_point_from(t1, vapour_pressure(w_surface, p))
            h_surface = enthalpy(t_surface, w_surface) / 1000.0
            w2, h2 = w_set, h_surface + bf * (h1 - h_surface)
            t2 = dry_bulb_from(h2 * 1000.0, w2)
            if t2 < t_set:
                t2, h2 = t_set, enthalpy(t_set, w2) / 1000.0
        fan = duty["fan_heat"] * (1.0 + w2)
        h3 = h2 + fan
        t3 = dry_bulb_from(h3 * 1000.0, w2)
        if t3 > high + 1e-9:
            h3 = enthalpy(high, w2) / 1000.0
            h2 = h3 - fan
            t2 = dry_bulb_from(h2 * 1000.0, w2)
            t_surface = dry_bulb_from((h2 - bf * h1) / (1.0 - bf) * 1000.0, w2)
            if w2 is not w1 or t_surface < max(t_dew, t_least):
                raise ValueError("a wet coil that cools for the dry bulb: not part of this duty")
            t3 = high
        heat = flow * max(enthalpy(low, w2) / 1000.0 - h3, 0.0)
        h4 = h3 + heat / flow
        t4 = dry_bulb_from(h4 * 1000.0, w2)
        water = flow * (w1 - w2)
        cooling = flow * (h1 - h2) - water * 4.186 * t2
        drying = water > 0.0
        running = drying or cooling > 0.0
        h_outdoor = enthalpy(t1, w2) / 1000.0
        sums = months[month]
        if running:
            ceiling = max(h_outdoor, h2)
            sums[0] += cooling
            sums[1] += flow * (h_outdoor - h2)
            sums[3] += flow * max(min(h4, ceiling) - min(h2, ceiling), 0.0)
        else:
            sums[4] += heat
        if drying:
            sums[2] += heat
            sums[9] = max(sums[9], heat)
        fan_power = flow * duty["electric_work"] * (1.0 + w2)
        sums[5] += water * 3600.0
        sums[6] += fan_power
        sums[7] += cooling / duty["cooling_cop"] + heat / duty["heat_efficiency"] + fan_power
        sums[8] = max(sums[8], cooling)
        sums[10] = max(sums[10], water * 3600.0)
        sums[11] += w2 > w_worst or t4 > high + 0.1 or t4 < low - 0.1
    return _named(months)


def _named(months: list[list[float]]) -> dict[str, list[float]]:
    names = (
        "coil_cooling_kwh",
        "coil_sensible_kwh",
        "reheat_kwh",
        "cooling_undone_kwh",
        "outdoor_air_heating_kwh",
        "condensate_kg",
        "fan_kwh",
        "electricity_kwh",
        "coil_cooling_kw",
        "reheat_kw",
        "condensate_kg_per_h",
        "hours_unmet",
    )
    return {name: [month[i] for month in months] for i, name in enumerate(names)}


class Psychrolib:
    """The contender seen from outside: a child process that runs the duty whenever it is asked."""

    def __init__(self, duty: dict[str, float], weather: dict[str, list[float]]) -> None:
        self._child = subprocess.Popen(
            [sys.executable, __file__], stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True
        )
        self._ask({"duty": duty, "weather": weather})

    def __enter__(self) -> Psychrolib:
        return self

    def __exit__(self, *_: object) -> None:
        assert self._child.stdin is not None
        assert self._child.stdout is not None
        self._child.stdin.close()
        self._child.wait(timeout=60)
        self._child.stdout.close()

    def _ask(self, question: object) -> Any:
        assert self._child.stdin is not None
        assert self._child.stdout is not None
        self._child.stdin.write(json.dumps(question) + "\n")
        self._child.stdin.flush()
        return json.loads(self._child.stdout.readline())

    def run(self) -> tuple[float, dict[str, list[float]]]:
        """Seconds that one year took in the child, and its monthly sums."""
        seconds, months = self._ask("run")
        return seconds, months


def serve(lines: Sequence[str] | Any) -> None:
    """Answer the parent: the first line is the duty, each further one asks for a run."""
    library = plain_psychrolib()
    given = json.loads(next(lines))
    print(json.dumps("ready"), flush=True)
    for _ in lines:
        start = time.perf_counter()
        months = run(library, given["duty"], given["weather"])
        print(json.dumps([time.perf_counter() - start, months]), flush=True)


if __name__ == "__main__":
    serve(iter(sys.stdin.readline, ""))
