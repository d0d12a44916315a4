"""The base duty by CoolProp's humid air, hour by hour.

Calls in an hour, all to ``HAPropsSI`` unless said otherwise (K, Pa, J/kg dry air):

    every hour         W(T, D, P)     outdoor humidity ratio, from dew point
                       H(T, W, P)     outdoor
                       W(T, R=1, P)   setpoint
                       W(T, R=1, P)   least surface temperature
                       W(T, R=1, P)   setpoint + 0.1 K, for the unmet hours
                       H(T, W, P)     at outdoor dry bulb behind the coil (sensible part, undone)
                       H(T, W, P)     at the supply's low dry bulb (heat of the source)
                       T(H, W, P)     behind the fan
                       T(H, W, P)     supply
    drying hours       D(T, W, P)     apparatus dew point
                       H(T, R=1, P)   at the surface
                       T(H, W, P)     behind the coil (mixing)
                       H(T, R=1, P)   only where the mixture is fog: saturated instead
                       PropsSI H(T, Q=0) of water: what the condensate carries
    too warm, dry      H(T, W, P)     behind the fan, at the supply's high dry bulb
                       T(H, W, P)     behind the coil
                       T(H, W, P)     at the surface

A duty in which the surface must be at its least temperature, or a coil that cools for the dry bulb becomes
wet, is refused, as in ``psychrolib_year``.
"""

from __future__ import annotations

from typing import Any

_ZERO = 273.15
NAMES = (
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


def run(  # noqa: C901, PLR0915 - the whole hour in one place, as in the other contender
    duty: dict[str, float], weather: dict[str, list[float]]
) -> dict[str, list[float]]:
    """Monthly sums and peaks."""
    from CoolProp.CoolProp import HAPropsSI, PropsSI

    def saturated(t: float, p: float) -> float:
        return HAPropsSI("W", "T", t + _ZERO, "R", 1.0, "P", p)

    def enthalpy(t: float, w: float, p: float) -> float:
        return HAPropsSI("H", "T", t + _ZERO, "W", w, "P", p) / 1000.0

    def saturated_enthalpy(t: float, p: float) -> float:
        return HAPropsSI("H", "T", t + _ZERO, "R", 1.0, "P", p) / 1000.0

    def dry_bulb(h: float, w: float, p: float) -> float:
        return HAPropsSI("T", "H", h * 1000.0, "W", w, "P", p) - _ZERO

    flow, bf = duty["flow"], duty["bypass_factor"]
    t_set, t_least = duty["dew_point"], duty["least_surface_temperature"]
    low, high = duty["low"], duty["high"]
    months: list[list[Any]] = [[0.0] * len(NAMES) for _ in range(12)]
    for month, t1, t_dew, p in zip(
        weather["month"], weather["dry_bulb"], weather["dew_point"], weather["pressure"], strict=True
    ):
        w1 = HAPropsSI("W", "T", t1 + _ZERO, "D", t_dew + _ZERO, "P", p)
        h1 = enthalpy(t1, w1, p)
        w_set, w_least, w_worst = saturated(t_set, p), saturated(t_least, p), saturated(t_set + 0.1, p)
        t2, w2, h2 = t1, w1, h1
        if w1 > w_set and w1 > w_least:
            w_surface = (w_set - bf * w1) / (1.0 - bf)
            if w_surface <= w_least:
                raise ValueError("the surface is at its least temperature: not part of this duty")
            t_surface = HAPropsSI("D", "T", t1 + _ZERO, "W", w_surface, "P", p) - _ZERO
            h_surface = saturated_enthalpy(t_surface, p)
            w2, h2 = w_set, h_surface + bf * (h1 - h_surface)
            t2 = dry_bulb(h2, w2, p)
            if t2 < t_set:
                t2, h2 = t_set, saturated_enthalpy(t_set, p)
        fan = duty["fan_heat"] * (1.0 + w2)
        h3 = h2 + fan
        t3 = dry_bulb(h3, w2, p)
        if t3 > high + 1e-6:
            h3 = enthalpy(high, w2, p)
            h2 = h3 - fan
            t2 = dry_bulb(h2, w2, p)
            t_surface = dry_bulb((h2 - bf * h1) / (1.0 - bf), w2, p)
            if w2 is not w1 or t_surface < max(t_dew, t_least):
                raise ValueError("a wet coil that cools for the dry bulb: not part of this duty")
            t3 = high
        heat = flow * max(enthalpy(low, w2, p) - h3, 0.0)
        h4 = h3 + heat / flow
        t4 = dry_bulb(h4, w2, p)
        water = flow * (w1 - w2)
        drying = water > 0.0
        carried = water * PropsSI("H", "T", t2 + _ZERO, "Q", 0, "Water") / 1000.0 if drying else 0.0
        cooling = flow * (h1 - h2) - carried
        h_outdoor = enthalpy(t1, w2, p)
        sums = months[month]
        if drying or cooling > 0.0:
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
    return {name: [month[i] for month in months] for i, name in enumerate(NAMES)}
