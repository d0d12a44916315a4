"""One hour in full: every state point, every exchange, and the arithmetic behind each."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from typing import Any, Literal, TypeAlias

import numpy as np

from estimator import moist_air
from estimator.airstream.airflow import fraction, mass_flow
from estimator.airstream.fan import FanDevice
from estimator.airstream.order import Passage
from estimator.airstream.state import Hours, State
from estimator.errors import InputError
from estimator.scheme import Scheme
from estimator.settings import Setpoint
from estimator.year import Mode, Year, run_hours

__all__ = [
    "CoilWork",
    "Governing",
    "HourEnergy",
    "HourExchange",
    "HourResult",
    "OutdoorAir",
    "Reason",
    "StatePoint",
    "Targets",
    "follows_calendar",
    "run_hour",
]

#: What fixes the coil's leaving air.
Governing: TypeAlias = Literal[
    "dew point", "dry bulb", "least surface temperature", "total cooling capacity", "lockout", "off"
]
#: Why a target is missed.
Reason: TypeAlias = Literal[
    "least surface temperature", "total cooling capacity", "lockout", "heating capacity", "no source of heat"
]


@dataclass(frozen=True, kw_only=True)
class OutdoorAir:
    """The outdoor air of one hour, and when it is; the calendar is None where no time was given."""

    dry_bulb: float
    humidity_ratio: float
    pressure: float
    month: int | None = None
    hour: int | None = None
    weekday: int | None = None
    #: how this hour was chosen, in words
    described: str = ""


@dataclass(frozen=True, kw_only=True)
class StatePoint:
    """Moist air at one numbered place in the airstream."""

    name: str
    dry_bulb_c: float
    humidity_ratio: float
    relative_humidity: float
    dew_point_c: float
    wet_bulb_c: float
    enthalpy_kj_per_kg: float


@dataclass(frozen=True, kw_only=True)
class HourExchange:
    """What one device moved, per kg dry air and in all, and the numbers that went into it.

    Heat is positive into the air; water is what left the air.
    """

    name: str
    entering: str
    leaving: str
    heat_kj_per_kg: float
    water_g_per_kg: float
    kw: float
    equation: str
    inputs: Mapping[str, float]


@dataclass(frozen=True, kw_only=True)
class Targets:
    """What the supply air is asked for in this hour; a dry bulb is None where nothing is asked."""

    dew_point_c: float
    #: kg/kg: that of saturation at the dew point and the hour's pressure
    humidity_ratio: float
    dry_bulb_low_c: float | None
    dry_bulb_high_c: float | None


@dataclass(frozen=True, kw_only=True)
class CoilWork:
    """What the coil does and what it follows.

    ``surface_c`` is the apparatus dew point of a coil that removes water, else the temperature of the dry
    surface; None where the coil does nothing.
    """

    governed_by: Governing
    surface_c: float | None
    flags: Mapping[str, bool]


@dataclass(frozen=True, kw_only=True)
class HourEnergy:
    """Bought energy of one carrier for one purpose; None where the scheme does not determine it."""

    carrier: str
    purpose: str
    kw: float | None


@dataclass(frozen=True, kw_only=True)
class HourResult:
    """One hour of one scheme."""

    scheme: Scheme
    outdoor: OutdoorAir
    targets: Targets
    mass_flow_kg_per_s: float
    #: share of the full flow that the schedule asks for
    flow_share: float
    state_points: tuple[StatePoint, ...]
    exchanges: tuple[HourExchange, ...]
    mode: Mode
    unmet: Mapping[str, bool]
    #: why, for each target that is missed
    unmet_because: Mapping[str, Reason]
    coil: CoilWork
    sensible_kw: float
    latent_kw: float
    condensate_kg_per_h: float
    #: heat that only brings the air back up to at most its outdoor dry bulb, by what supplied it
    cooling_undone_kw: Mapping[str, float]
    energy: tuple[HourEnergy, ...]
    electricity_kw: float | None


def run_hour(scheme: Scheme, outdoor: OutdoorAir) -> HourResult:
    """Take one hour's outdoor air through a scheme.

    Raises
    ------
    InputError
        The scheme follows the calendar and no time is given, or the outdoor air is supersaturated.
    """
    hours = _hours(scheme, outdoor)
    year = run_hours(scheme, hours)
    points = {name: _point(name, state) for name, state in year.airstream.points.items()}
    work = _coil_work(year)
    return HourResult(
        scheme=scheme,
        outdoor=outdoor,
        targets=_targets(year),
        mass_flow_kg_per_s=_one(hours.mass_flow),
        flow_share=_one(fraction(scheme.airflow, hours.month, hours.hour, hours.weekday)),
        state_points=tuple(points.values()),
        exchanges=tuple(_exchange(year, passage, points) for passage in year.airstream.passages),
        mode=Mode(int(year.mode[0])),
        unmet={name: bool(flag[0]) for name, flag in year.unmet.items()},
        unmet_because={name: _reason(name, work, scheme) for name, flag in year.unmet.items() if flag[0]},
        coil=work,
        sensible_kw=_one(year.coil_sensible),
        latent_kw=_one(year.coil_latent),
        condensate_kg_per_h=_one(year.condensate),
        cooling_undone_kw={kind: _one(heat) for kind, heat in year.cooling_undone_by.items()},
        energy=tuple(
            HourEnergy(
                carrier=row.carrier,
                purpose=row.purpose,
                kw=None if row.power is None else _one(row.power),
            )
            for row in year.energy
        ),
        electricity_kw=_electricity(year),
    )


def _one(value: Any) -> float:
    return float(np.asarray(value).reshape(-1)[0])


def _electricity(year: Year) -> float | None:
    total = 0.0
    for row in year.energy:
        if row.carrier == "electricity":
            if row.power is None:
                return None
            total += _one(row.power)
    return total


def _targets(year: Year) -> Targets:
    wanted = year.airstream.request
    return Targets(
        dew_point_c=_one(wanted.dew_point),
        humidity_ratio=_one(wanted.humidity_ratio),
        dry_bulb_low_c=None if wanted.low is None else _one(wanted.low),
        dry_bulb_high_c=None if wanted.high is None else _one(wanted.high),
    )


def _coil_work(year: Year) -> CoilWork:
    passage = next(p for p in year.airstream.passages if p.exchange.kind == "coil")
    entering, leaving = (year.airstream.points[name] for name in (passage.entering, passage.leaving))
    flags = {name: bool(flag[0]) for name, flag in year.coil_flags.items()}
    cools = bool(year.cooling[0])
    w1, w2, w_set = (
        _one(w) for w in (entering.humidity_ratio, leaving.humidity_ratio, _targets(year).humidity_ratio)
    )
    governed: Governing = "dry bulb" if cools else "off"
    if flags["locked out"]:
        governed = "lockout"
    elif flags["at capacity"]:
        governed = "total cooling capacity"
    elif flags["at least surface temperature"]:
        governed = "least surface temperature"
    elif w1 > w_set and bool(year.hours.running[0]):
        if not cools:
            # even its coldest surface takes no water from this air
            governed = "least surface temperature"
        elif abs(w2 - w_set) <= 1e-9 * w_set:
            governed = "dew point"
    return CoilWork(
        governed_by=governed,
        surface_c=_surface(year, entering, leaving, governed) if cools else None,
        flags=flags,
    )


def _surface(year: Year, entering: State, leaving: State, governed: Governing) -> float:
    coil = year.scheme.coil
    if governed == "least surface temperature":
        return min(coil.least_surface_temperature, _one(entering.dry_bulb))
    wet = _one(year.apparatus_dew_point())
    if np.isfinite(wet):
        return wet
    bf = coil.bypass_factor
    h = (_one(leaving.enthalpy) - bf * _one(entering.enthalpy)) / (1.0 - bf)
    return _one(entering.mixture.dry_bulb(h))


def _reason(target: str, work: CoilWork, scheme: Scheme) -> Reason:
    if target == "cold":
        return "heating capacity" if scheme.reheat else "no source of heat"
    if work.governed_by in ("lockout", "total cooling capacity"):
        return "lockout" if work.governed_by == "lockout" else "total cooling capacity"
    # nothing else keeps a coil from its target
    return "least surface temperature"


def follows_calendar(scheme: Scheme) -> bool:
    """Whether the schedule or a target of the scheme depends on the time."""
    targets = (scheme.supply.dew_point, scheme.supply.low, scheme.supply.high)
    return bool(scheme.airflow.schedule) or any(
        isinstance(target, Setpoint) and not target.outdoor and len(target.values) > 1 for target in targets
    )


def _hours(scheme: Scheme, outdoor: OutdoorAir) -> Hours:
    if outdoor.month is None and follows_calendar(scheme):
        raise InputError(
            "the scheme follows the calendar and no time is given",
            where=scheme.source.file or scheme.name,
            hint="say when, for example --at '07-14 15:00'",
        )
    t, w, p = (np.array([x]) for x in (outdoor.dry_bulb, outdoor.humidity_ratio, outdoor.pressure))
    most = moist_air.saturation_humidity_ratio(t, p)
    if w[0] > most[0] * (1.0 + 1e-9):
        raise InputError(
            f"{w[0] * 1000:.3f} g/kg is more water than air at {t[0]:g} degC holds",
            where="outdoor air",
            allowed=f"at most {most[0] * 1000:.3f} g/kg at this pressure",
        )
    calendar = {
        "month": np.array([outdoor.month or 1]),
        "hour": np.array([outdoor.hour or 0]),
        "weekday": np.array([outdoor.weekday or 0]),
    }
    flow = mass_flow(scheme.airflow, **calendar, dry_bulb=t, humidity_ratio=w, pressure=p)
    return Hours(**calendar, outdoor=State.of(t, w, p), mass_flow=flow)


def _point(name: str, state: State) -> StatePoint:
    t, w, p = state.dry_bulb, state.humidity_ratio, state.pressure
    return StatePoint(
        name=name,
        dry_bulb_c=_one(t),
        humidity_ratio=_one(w),
        relative_humidity=_one(moist_air.relative_humidity(t, w, p)),
        dew_point_c=_one(moist_air.dew_point(w, p)),
        wet_bulb_c=_one(moist_air.wet_bulb(t, w, p)),
        enthalpy_kj_per_kg=_one(state.enthalpy),
    )


def _exchange(year: Year, passage: Passage, points: Mapping[str, StatePoint]) -> HourExchange:
    before, after = points[passage.entering], points[passage.leaving]
    exchange = passage.exchange
    flow = _one(year.mass_flow)
    heat, water = _one(exchange.heat), 0.0 if exchange.water is None else _one(exchange.water)
    equation, inputs = _arithmetic(year, passage, before, after)
    return HourExchange(
        name=exchange.device,
        entering=before.name,
        leaving=after.name,
        heat_kj_per_kg=heat / flow if flow else 0.0,
        water_g_per_kg=1000.0 * water / flow if flow else 0.0,
        kw=heat,
        equation=equation,
        inputs=inputs,
    )


def _arithmetic(
    year: Year, passage: Passage, before: StatePoint, after: StatePoint
) -> tuple[str, dict[str, float]]:
    exchange, flow = passage.exchange, _one(year.mass_flow)
    enthalpies = {
        "m_kg_per_s": flow,
        "h1_kj_per_kg": before.enthalpy_kj_per_kg,
        "h2_kj_per_kg": after.enthalpy_kj_per_kg,
    }
    if exchange.device == "coil":
        return _coil_arithmetic(year, passage, before, after, enthalpies)
    if exchange.device == "fan":
        return _fan_arithmetic(year, before, flow)
    return "Q = m (h2 - h1)", enthalpies


def _coil_arithmetic(
    year: Year, passage: Passage, before: StatePoint, after: StatePoint, enthalpies: dict[str, float]
) -> tuple[str, dict[str, float]]:
    inputs = enthalpies | {
        "w1_kg_per_kg": before.humidity_ratio,
        "w2_kg_per_kg": after.humidity_ratio,
        "h_w_kj_per_kg": _one(moist_air.water_enthalpy(np.array([after.dry_bulb_c]))),
        "h_t1_w2_kj_per_kg": _one(
            moist_air.enthalpy(
                before.dry_bulb_c, after.humidity_ratio, _one(year.airstream.points["outdoor"].pressure)
            )
        ),
        "bypass_factor": _one(year.scheme.coil.bypass_factor),
    }
    surface = _one(year.apparatus_dew_point())
    if np.isfinite(surface):
        inputs["apparatus_dew_point_c"] = surface
    equation = (
        "Q = -m [(h1 - h2) - (W1 - W2) h_w]; sensible = m [h(t1, W2) - h2]; "
        "leaving = BF entering + (1 - BF) saturated at the apparatus dew point, fog drained"
    )
    return equation, inputs


def _fan_arithmetic(year: Year, before: StatePoint, flow: float) -> tuple[str, dict[str, float]]:
    fan = year.scheme.fan
    assert fan is not None
    density = year.scheme.airflow.standard_density
    pressure = _one(year.airstream.points["outdoor"].pressure)
    volume = _one(moist_air.specific_volume(before.dry_bulb_c, before.humidity_ratio, pressure))
    device = FanDevice(fan, density)
    inputs = {
        "m_kg_per_s": flow,
        "inlet_volume_m3_per_s": flow * volume,
        "inlet_density_kg_per_m3": (1.0 + before.humidity_ratio) / volume,
        "standard_density_kg_per_m3": density,
        "total_pressure_pa": fan.total_pressure,
        "efficiency": fan.efficiency,
        "motor_efficiency": fan.motor_efficiency,
        "loss_to_air": fan.loss_to_air,
        "shaft_kw": flow * float(device.shaft_work(before.humidity_ratio)),
        "electric_kw": flow * float(device.electric_work(before.humidity_ratio)),
    }
    equation = (
        "shaft = V dp (rho / rho_standard) / efficiency; electric = shaft / motor efficiency; "
        "Q = shaft + loss_to_air (electric - shaft)"
    )
    return equation, inputs
