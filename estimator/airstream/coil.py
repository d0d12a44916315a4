"""The cooling coil: bypass factor, apparatus dew point, least surface temperature, capacity.

Part of the air (the bypass factor) leaves as it came, the rest leaves saturated at the apparatus dew
point, and the two mix adiabatically, in enthalpy and humidity ratio:

    leaving = BF x entering + (1 - BF) x saturated at the apparatus dew point

Where that point would lie above saturation the leaving air is saturated and the excess drains. Above the
entering dew point the coil is dry and its surface acts on the dry bulb alone. Water leaves at the coil's
leaving temperature (a convention), as ice below 0.01 degC:

    coil heat = m [(h1 - h2) - (W1 - W2) h_w]
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Any, Final

import numpy as np
from numpy.typing import NDArray

from estimator import moist_air
from estimator.airstream.solve import between
from estimator.airstream.state import (
    Before,
    Exchange,
    Flags,
    Hours,
    Request,
    State,
    Step,
    Streams,
    pick,
)
from estimator.constants import TRIPLE_POINT
from estimator.moist_air import Array, ArrayLike, Mixture
from estimator.settings import Settings, setting

__all__ = ["Coil", "CoilDevice", "apparatus_dew_point", "leaving_state"]

#: How near the solved dry bulb and capacity come, kJ/kg (a kelvin being about one).
_DRY_BULB_TOLERANCE: Final = 1e-9
_CAPACITY_TOLERANCE: Final = 1e-9

#: A mixture counts as fog when it holds more water than saturated air by more than rounding.
_FOG: Final = 1.0 + 1e-10


@dataclass(frozen=True, kw_only=True)
class Coil(Settings):
    """The cooling coil."""

    bypass_factor: float = setting(
        "fraction",
        least=0.0,
        most=0.9,
        default=0.05,
        doc="share of the air that leaves as it came; 0 to 0.1 for the deep coils of outdoor-air units",
        source="handbook range, from memory",
    )
    least_surface_temperature: float = setting(
        "temperature",
        least=-40.0,
        most=30.0,
        default=1.0,
        doc="the apparatus dew point is never below this",
        source="common practice: above freezing",
    )
    capacity: float | None = setting(
        "cooling rate",
        least=0.0,
        above=True,
        default=None,
        doc="total cooling capacity; absent: unlimited",
        example="150 kW",
    )
    lockout_below: float | None = setting(
        "temperature",
        least=-60.0,
        most=50.0,
        default=None,
        doc="the coil stays off below this outdoor dry bulb; absent: never locked out",
        example="10 degC",
    )


def leaving_state(surface: Array, entering: State, bypass_factor: ArrayLike) -> State:
    """The air behind a coil whose surface is at ``surface``, degC, dry or wet, never supersaturated."""
    p, w1 = entering.pressure, entering.humidity_ratio
    w_surface = np.minimum(moist_air.saturation_humidity_ratio(surface, p), w1)
    h_surface = moist_air.enthalpy(surface, w_surface, p)
    # written as a distance from the surface so that a dry coil keeps the humidity ratio to the last bit
    w = w_surface + bypass_factor * (w1 - w_surface)
    h = h_surface + bypass_factor * (entering.enthalpy - h_surface)
    return _drained(h, w, p, wet=w_surface < w1)


def _drained(h: Array, w: Array, p: Array, wet: Flags) -> State:
    """The mixture itself, or where it is fog the saturated air left after the excess has drained."""
    t = moist_air.dry_bulb_from_enthalpy(h, w, p)
    fog = wet & (w > moist_air.saturation_humidity_ratio(t, p) * _FOG)
    if fog.any():
        p_fog = np.broadcast_to(p, t.shape)[fog]
        t[fog] = moist_air.adiabatic_saturation_temperature(h[fog], w[fog], p_fog)
        w[fog] = moist_air.saturation_humidity_ratio(t[fog], p_fog)
        h[fog] = moist_air.enthalpy(t[fog], w[fog], p_fog)
    return State(t, w, h, p)


def _specific_heat_removed(entering: State, leaving: State) -> Array:
    """Coil heat per kg dry air, kJ/kg."""
    water = entering.humidity_ratio - leaving.humidity_ratio
    return np.asarray(
        entering.enthalpy - leaving.enthalpy - water * moist_air.water_enthalpy(leaving.dry_bulb)
    )


def apparatus_dew_point(entering: State, leaving: State, bypass_factor: ArrayLike) -> Array:
    """Surface temperature, degC, that makes ``leaving`` of ``entering``; NaN where the coil removes no water.

    The mixture from which fog drained and the saturated air left over lie on one line of slope ``h_w``
    in enthalpy over humidity ratio, so the surface follows from the leaving state alone.
    """
    w1, w2 = entering.humidity_ratio, leaving.humidity_ratio
    wet = np.flatnonzero(w2 < w1)
    take = pick(wet, w2.shape)
    h_w = moist_air.water_enthalpy(take(leaving.dry_bulb))
    bf = take(bypass_factor)
    y1 = take(entering.enthalpy) - take(w1) * h_w
    y2 = take(leaving.enthalpy) - take(w2) * h_w
    out = np.full(w2.shape, np.nan)
    out.reshape(-1)[wet] = moist_air.saturated_from_enthalpy(
        (y2 - bf * y1) / (1.0 - bf), take(leaving.pressure), h_w
    )
    return out


@dataclass(frozen=True, eq=False)
class CoilDevice:
    """The coil at its place in the airstream.

    ``before`` says what must leave the coil for a dry bulb behind the passive devices downstream, since the
    supply dry bulb is judged there.
    """

    coil: Coil
    before: Before

    def __call__(self, entering: Streams, hours: Hours, request: Request) -> Step:
        """Every hour: as cold as the dew point or the dry bulb asks for, within what the coil can do."""
        air = entering.supply
        task = _Task(self.coil, self.before, air, hours, request)
        task.dry()
        task.cool()
        task.limit()
        leaving = task.leaving()
        h_w = moist_air.water_enthalpy(leaving.dry_bulb)
        water = hours.mass_flow * (air.humidity_ratio - leaving.humidity_ratio)
        removed = hours.mass_flow * (air.enthalpy - leaving.enthalpy) - water * h_w
        exchange = Exchange(
            device="coil",
            kind="coil",
            heat=-removed,
            water=water,
            water_enthalpy=h_w,
            flags={
                "at least surface temperature": task.held,
                "at capacity": task.limited,
                "frozen": (water > 0.0) & (leaving.dry_bulb < TRIPLE_POINT),
                "locked out": task.locked,
            },
        )
        return Step(Streams(leaving, entering.exhaust), exchange)


class _Task:
    """One pass over the hours: the leaving arrays, filled in place for the hours that each rule governs."""

    def __init__(self, coil: Coil, before: Before, air: State, hours: Hours, request: Request) -> None:
        self.coil, self.before, self.air, self.request = coil, before, air, request
        # of the leaving air, until its humidity ratio changes
        self.mixture: Mixture | None = None
        self.flow = hours.mass_flow
        self.shape = hours.mass_flow.shape
        self.t = np.array(np.broadcast_to(air.dry_bulb, self.shape), order="C")
        self.w = np.array(np.broadcast_to(air.humidity_ratio, self.shape), order="C")
        self.h = np.array(np.broadcast_to(air.enthalpy, self.shape), order="C")
        self.held = np.zeros(self.shape, dtype=bool)
        self.limited = np.zeros(self.shape, dtype=bool)
        self.locked = np.zeros(self.shape, dtype=bool)
        allowed = hours.running
        if coil.lockout_below is not None:
            self.locked = (
                np.broadcast_to(hours.outdoor.dry_bulb < coil.lockout_below, self.shape) & hours.running
            )
            allowed = allowed & ~self.locked
        self.allowed = np.broadcast_to(allowed, self.shape)

    def leaving(self) -> State:
        state = State(self.t, self.w, self.h, self.air.pressure)
        if self.mixture is None:
            self.mixture = state.mixture
        return state.knowing(self.mixture)

    def _take(self, index: NDArray[np.intp]) -> Callable[[Any], Any]:
        return pick(index, self.shape)

    def _entering(self, take: Callable[[Any], Any]) -> State:
        a = self.air
        return State(take(a.dry_bulb), take(a.humidity_ratio), take(a.enthalpy), take(a.pressure))

    def _put(self, index: NDArray[np.intp], state: State) -> None:
        self.mixture = None
        for full, part in (
            (self.t, state.dry_bulb),
            (self.w, state.humidity_ratio),
            (self.h, state.enthalpy),
        ):
            full.reshape(-1)[index] = part

    def dry(self) -> None:
        """Hours in which the dew point asks for the coil."""
        w1, w_set, p = self.air.humidity_ratio, self.request.humidity_ratio, self.air.pressure
        index = np.flatnonzero(self.allowed & (w1 > w_set))
        take = self._take(index)
        bf = take(self.coil.bypass_factor)
        surface = (take(w_set) - bf * take(w1)) / (1.0 - bf)
        w_least = moist_air.saturation_humidity_ratio(take(self.coil.least_surface_temperature), take(p))
        possible = take(w1) > w_least
        if not possible.all():
            index, surface, w_least = index[possible], surface[possible], w_least[possible]
        reached = surface > w_least
        if reached.all():
            self._reach(index, surface)
        else:
            self._reach(index[reached], surface[reached])
            self._hold_or_drain(index[~reached])

    def _reach(self, index: NDArray[np.intp], w_surface: Array) -> None:
        """The leaving air has exactly the humidity ratio asked for."""
        if index.size == 0:
            return
        take = self._take(index)
        p, w = take(self.air.pressure), np.asarray(take(self.request.humidity_ratio))
        adp = moist_air.dew_point(w_surface, p)
        h_surface = moist_air.enthalpy(adp, w_surface, p)
        h = h_surface + take(self.coil.bypass_factor) * (take(self.air.enthalpy) - h_surface)
        # below its own dew point the mixture is fog: a slightly warmer surface leaves it just saturated
        mixture, saturated = Mixture.of(w, p), take(self.request.dew_point)
        h = np.maximum(h, mixture.enthalpy(saturated))
        t = np.maximum(mixture.dry_bulb(h), saturated)
        self._put(index, State(t, w, h, p))

    def _hold_or_drain(self, index: NDArray[np.intp]) -> None:
        """The mixture cannot be as dry as asked for; what is left once its fog has drained may be.

        Then some warmer surface leaves the air just saturated at the dew point asked for.
        """
        take = self._take(index)
        entering = self._entering(take)
        least = np.minimum(take(self.coil.least_surface_temperature), entering.dry_bulb)
        coldest = leaving_state(least, entering, take(self.coil.bypass_factor))
        drained = coldest.humidity_ratio < take(self.request.humidity_ratio)
        take = self._take(index[drained])
        w = np.asarray(take(self.request.humidity_ratio))
        t = np.array(np.broadcast_to(take(self.request.dew_point), w.shape))
        self._put(index[drained], State.of(t, w, take(self.air.pressure)))
        self._hold(index[~drained])

    def _hold(self, index: NDArray[np.intp]) -> None:
        """The surface is as cold as it may be."""
        if index.size == 0:
            return
        take = self._take(index)
        entering = self._entering(take)
        least = np.minimum(take(self.coil.least_surface_temperature), entering.dry_bulb)
        self._put(index, leaving_state(least, entering, take(self.coil.bypass_factor)))
        self.held.reshape(-1)[index] = True

    def cool(self) -> None:
        """Hours in which the supply would be too warm, with the coil off or as cold as the dew point asks."""
        high = self.request.high
        if high is None:
            return
        behind = self.leaving()
        limit = self.before(high, behind, lambda full: full)
        index = np.flatnonzero(self.allowed & ~self.held & (behind.enthalpy > limit + _DRY_BULB_TOLERANCE))
        index = self._cool_dry(index, limit)
        if index.size == 0:
            return
        take = self._take(index)
        entering, bf, target = self._entering(take), take(self.coil.bypass_factor), take(high)
        least = np.minimum(take(self.coil.least_surface_temperature), entering.dry_bulb)

        def too_warm(surface: Array, which: NDArray[np.intp]) -> Array:
            sub = pick(which, index.shape)
            state = leaving_state(surface, _part(entering, sub), sub(bf))
            limit = self.before(sub(target), state, lambda full: sub(take(full)))
            return np.asarray(state.enthalpy - limit)

        every = np.arange(index.size)
        beyond = too_warm(least, every) >= 0.0
        self._hold(index[beyond])
        within = every[~beyond]
        sub = pick(within, index.shape)
        surface = between(
            lambda x, which: too_warm(x, within[which]),
            sub(least),
            sub(entering.dry_bulb),
            _DRY_BULB_TOLERANCE,
            "coil surface for the supply dry bulb",
        )
        self._put(index[within], leaving_state(surface, _part(entering, sub), sub(bf)))

    def _cool_dry(self, index: NDArray[np.intp], limit: Array) -> NDArray[np.intp]:
        """Hours in which a dry surface makes the air leave at ``limit``, kJ/kg; returns the others."""
        take = self._take(index)
        entering, bf = self._entering(take), take(self.coil.bypass_factor)
        h, w = take(limit), entering.humidity_ratio
        surface = entering.mixture.dry_bulb((h - bf * entering.enthalpy) / (1.0 - bf))
        dry = (take(self.w) == w) & (surface >= take(self.coil.least_surface_temperature))
        # nothing condenses where the surface could hold more water than the air has
        least = np.where(dry, surface, take(self.coil.least_surface_temperature))
        dry &= moist_air.saturation_humidity_ratio(least, entering.pressure) >= w
        done = index[dry]
        self.h.reshape(-1)[done] = h[dry]
        self.t.reshape(-1)[done] = entering.mixture.dry_bulb(h)[dry]
        return np.asarray(index[~dry])

    def limit(self) -> None:
        """Hours that ask for more than the total cooling capacity: dew point and dry bulb rise together."""
        capacity = self.coil.capacity
        if capacity is None:
            return
        removed = self.flow * _specific_heat_removed(self.air, self.leaving())
        index = np.flatnonzero(removed > capacity * (1.0 + 1e-12))
        take = self._take(index)
        entering, bf = self._entering(take), take(self.coil.bypass_factor)
        available = np.asarray(take(capacity) / take(self.flow))
        least = np.minimum(take(self.coil.least_surface_temperature), entering.dry_bulb)

        def excess(surface: Array, which: NDArray[np.intp]) -> Array:
            sub = pick(which, index.shape)
            part = _part(entering, sub)
            state = leaving_state(surface, part, sub(bf))
            return np.asarray(_specific_heat_removed(part, state) - sub(available))

        surface = between(
            excess, least, entering.dry_bulb, _CAPACITY_TOLERANCE, "coil surface for the capacity"
        )
        self._put(index, leaving_state(surface, entering, bf))
        self.held.reshape(-1)[index] = False
        self.limited.reshape(-1)[index] = True


def _part(state: State, take: Callable[[Any], Any]) -> State:
    return State(take(state.dry_bulb), take(state.humidity_ratio), take(state.enthalpy), take(state.pressure))
