"""One scheme through one weather year: the hourly ledger.

``run_year`` is the whole of the physics: it opens no file and knows nothing of prices or display. What
the year keeps is what cannot be derived, the state at every point and the exchanges between them;
everything else is worked out when it is asked for.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Mapping
from dataclasses import dataclass
from enum import IntEnum
from functools import cached_property, reduce
from typing import TYPE_CHECKING, Any, Final

import numpy as np
from numpy.typing import NDArray

from estimator import moist_air
from estimator.airstream.airflow import mass_flow
from estimator.airstream.coil import apparatus_dew_point
from estimator.airstream.order import Airstream, pass_air
from estimator.airstream.state import Exchange, Flags, Hours, Kind, State
from estimator.constants import BALANCE_TOLERANCE, SECONDS_PER_HOUR, UNMET_TOLERANCE
from estimator.errors import BalanceError
from estimator.moist_air import Array, Mixture
from estimator.plant import CARRIER_OF, bought
from estimator.scheme import Scheme

if TYPE_CHECKING:
    from estimator.weather.model import WeatherYear

__all__ = ["Energy", "Mode", "Year", "run_hours", "run_year"]


_ACTIVE: Final[tuple[Kind, ...]] = ("recovered", "solar", "purchased")


class Mode(IntEnum):
    """What the unit does in an hour."""

    OFF = 0
    UNTREATED = 1
    HEATING = 2
    SENSIBLE_COOLING = 3
    DRYING = 4
    DRYING_WITH_REHEAT = 5

    @property
    def words(self) -> str:
        """The mode as it is shown."""
        return self.name.lower().replace("_", " ")


@dataclass(frozen=True, kw_only=True, eq=False)
class Energy:
    """Bought energy of one carrier for one purpose: hourly kW, None where a scheme does not determine it."""

    carrier: str
    purpose: str
    power: Array | None


@dataclass(frozen=True, kw_only=True, eq=False)
class Year:
    """The hourly ledger of one scheme (or a stack of variants) in one weather year.

    Arrays have the shape (..., hours). Powers are in kW, water in kg/h; each holds for its whole hour, so a
    sum over hours is in kWh or kg.
    """

    scheme: Scheme
    airstream: Airstream
    weather: WeatherYear | None = None

    @property
    def hours(self) -> Hours:
        """Calendar, outdoor air and flow of every hour."""
        return self.airstream.hours

    @property
    def mass_flow(self) -> Array:
        """Dry air through the unit, kg/s."""
        return self.hours.mass_flow

    @property
    def supply(self) -> State:
        """The air as it leaves the unit."""
        return self.airstream.points["supply"]

    def exchange(self, device: str) -> Exchange | None:
        """The exchange of one device, None where the scheme has no such device."""
        for passage in self.airstream.passages:
            if passage.exchange.device == device:
                return passage.exchange
        return None

    @cached_property
    def _coil(self) -> tuple[State, State, Exchange]:
        for passage in self.airstream.passages:
            if passage.exchange.device == "coil":
                points = self.airstream.points
                return points[passage.entering], points[passage.leaving], passage.exchange
        raise BalanceError("an airstream without a coil")

    @cached_property
    def coil_cooling(self) -> Array:
        """Heat that the coil takes from the air, kW."""
        return -self._coil[2].heat

    @cached_property
    def coil_sensible(self) -> Array:
        """Coil cooling of the dry bulb at the leaving humidity ratio, kW; the rest is latent."""
        before, after, _ = self._coil
        at_entering = after.mixture.enthalpy(before.dry_bulb)
        return np.where(self.coil_cooling != 0.0, self.mass_flow * (at_entering - after.enthalpy), 0.0)

    @cached_property
    def coil_latent(self) -> Array:
        """Coil cooling less its sensible part, kW."""
        return self.coil_cooling - self.coil_sensible

    @cached_property
    def condensate(self) -> Array:
        """Water that leaves as liquid or ice, kg/h."""
        water = self._coil[2].water
        assert water is not None
        return water * SECONDS_PER_HOUR

    @cached_property
    def drying(self) -> Flags:
        """Hours in which the coil removes water."""
        return np.asarray(self.condensate > 0.0)

    @cached_property
    def cooling(self) -> Flags:
        """Hours in which the coil runs, wet or dry."""
        return np.asarray(self.coil_cooling > 0.0) | self.drying

    @cached_property
    def active_heat(self) -> Array:
        """Heat of all sources after the coil, kW."""
        return self._sum(*_ACTIVE)

    @cached_property
    def preheat(self) -> Array:
        """Heat of the preheat, kW."""
        return self._sum("preheat")

    def _sum(self, *kinds: Kind) -> Array:
        parts = [p.exchange.heat for p in self.airstream.passages if p.exchange.kind in kinds]
        return np.asarray(sum(parts)) if parts else np.zeros_like(self.coil_cooling)

    @cached_property
    def reheat(self) -> Array:
        """Active heat in hours in which the coil dries, kW."""
        return np.where(self.drying, self.active_heat, 0.0)

    @cached_property
    def reheat_by(self) -> dict[Kind, Array]:
        """Reheat, kW, by the class of its sources, of those classes that the scheme has."""
        present = {p.exchange.kind for p in self.airstream.passages}
        return {kind: np.where(self.drying, self._sum(kind), 0.0) for kind in _ACTIVE if kind in present}

    @cached_property
    def outdoor_air_heating(self) -> Array:
        """Heat added, preheat included, in hours in which the coil does not run, kW."""
        return np.where(self.cooling, 0.0, self.active_heat + self.preheat)

    @cached_property
    def preheat_while_cooling(self) -> Array:
        """Preheat in hours in which the coil runs, kW: heat that the coil takes out again."""
        return np.where(self.cooling, self.preheat, 0.0)

    @cached_property
    def fan_power(self) -> Array:
        """Electricity of the fan, kW."""
        fan = self.exchange("fan")
        if fan is None or fan.power is None:
            return np.zeros_like(self.coil_cooling)
        return fan.power

    @cached_property
    def cooling_undone_by(self) -> dict[Kind, Array]:
        """Cooling undone, kW, by what supplied the heat: ``fan`` and the active sources' class.

        The air is brought back from the coil's leaving dry bulb up to at most the outdoor dry bulb. Each
        device behind the coil gets the part of that stretch over which it heats, in the air's order.
        """
        _, behind, _ = self._coil
        names = list(self.airstream.points)
        coil_point = next(p.leaving for p in self.airstream.passages if p.exchange.device == "coil")
        outdoor = self.airstream.points["outdoor"].dry_bulb
        ceiling = np.maximum(behind.mixture.enthalpy(outdoor), behind.enthalpy)
        parts: dict[Kind, Array] = {}
        for passage in self.airstream.passages:
            if names.index(passage.leaving) <= names.index(coil_point):
                continue
            before, after = (self.airstream.points[n].enthalpy for n in (passage.entering, passage.leaving))
            share = np.minimum(after, ceiling) - np.minimum(before, ceiling)
            kind = passage.exchange.kind
            heat = np.where(self.cooling, self.mass_flow * np.maximum(share, 0.0), 0.0)
            parts[kind] = parts[kind] + heat if kind in parts else heat
        return parts

    @cached_property
    def cooling_undone(self) -> Array:
        """Heat that only brings the air back up to at most its outdoor dry bulb, kW."""
        parts = list(self.cooling_undone_by.values())
        return np.asarray(sum(parts)) if parts else np.zeros_like(self.coil_cooling)

    @cached_property
    def mode(self) -> NDArray[np.int64]:
        """The hour's mode, a ``Mode``."""
        heated = self.active_heat + self.preheat > 0.0
        mode = np.full(self.coil_cooling.shape, int(Mode.UNTREATED))
        # the later one governs
        for where, kind in (
            (heated, Mode.HEATING),
            (self.cooling, Mode.SENSIBLE_COOLING),
            (self.drying, Mode.DRYING),
            (self.reheat > 0.0, Mode.DRYING_WITH_REHEAT),
            (~self.hours.running, Mode.OFF),
        ):
            np.copyto(mode, int(kind), where=where)
        return mode

    @cached_property
    def unmet(self) -> dict[str, Flags]:
        """Operating hours off target by more than 0.1 K: ``dew_point``, ``warm``, ``cold``."""
        wanted, supply, running = self.airstream.request, self.supply, self.hours.running
        none = np.zeros(self.coil_cooling.shape, dtype=bool)
        high, low = wanted.high, wanted.low
        t = supply.dry_bulb
        wet = running & (supply.humidity_ratio > wanted.humidity_ratio)
        if wet.any():
            worst = moist_air.saturation_humidity_ratio(
                np.asarray(wanted.dew_point) + UNMET_TOLERANCE, supply.pressure
            )
            wet &= supply.humidity_ratio > worst
        return {
            "dew_point": wet,
            "warm": none if high is None else running & (t > high + UNMET_TOLERANCE),
            "cold": none if low is None else running & (t < low - UNMET_TOLERANCE),
        }

    @cached_property
    def frozen(self) -> Flags:
        """Hours in which the condensate leaves as ice."""
        return self._coil[2].flags["frozen"]

    @property
    def coil_flags(self) -> dict[str, Flags]:
        """The coil's marks of single hours."""
        return dict(self._coil[2].flags)

    def apparatus_dew_point(self) -> Array:
        """Apparatus dew point of the coil, degC, NaN where it removes no water."""
        before, after, _ = self._coil
        return apparatus_dew_point(before, after, self.scheme.coil.bypass_factor)

    @cached_property
    def energy(self) -> tuple[Energy, ...]:
        """Bought energy by carrier and purpose."""
        rows: dict[tuple[str, str], Array | None] = {}

        def add(carrier: str, purpose: str, power: Array | None) -> None:
            known = rows.get((carrier, purpose), 0.0)
            rows[carrier, purpose] = None if power is None or known is None else known + power

        add("electricity", "cooling", bought(self.coil_cooling, self.scheme.plant.cooling_cop))
        for source in self.scheme.reheat:
            given = self.exchange(f"reheat.{source.source}")
            assert given is not None
            used = bought(given.heat, source.efficiency)
            add(CARRIER_OF[source.source], "reheat", np.where(self.drying, used, 0.0))
            add(CARRIER_OF[source.source], "outdoor-air heating", np.where(self.drying, 0.0, used))
        if self.scheme.preheat is not None:
            preheat = self.scheme.preheat
            add(CARRIER_OF[preheat.source], "preheat", bought(self.preheat, preheat.efficiency))
        if self.scheme.fan is not None:
            add("electricity", "fans", self.fan_power)
        return tuple(
            Energy(carrier=carrier, purpose=purpose, power=power)
            for (carrier, purpose), power in rows.items()
        )

    @cached_property
    def heat_residual(self) -> Array:
        """Largest heat imbalance of any device and of the whole, as a share of the enthalpy passing."""
        return self._residuals[0]

    @cached_property
    def water_residual(self) -> Array:
        """Largest water imbalance of any device and of the whole, as a share of the water passing."""
        return self._residuals[1]

    @cached_property
    def _residuals(self) -> tuple[Array, Array]:
        return _balance(self.airstream)


def _balance(airstream: Airstream) -> tuple[Array, Array]:
    """Residuals of heat and water, with every enthalpy worked out anew from dry bulb and humidity ratio.

    Each device starts where the one before it ended, so what the whole gains from outdoor to supply is the
    sum of what its devices gain, and the residual of the whole the sum of theirs.
    """
    m, points = airstream.hours.mass_flow, airstream.points
    # by array, since devices that move no water hand on the very same humidity ratios
    mixtures = {id(s.humidity_ratio): Mixture.of(s.humidity_ratio, s.pressure) for s in points.values()}
    enthalpy = {name: mixtures[id(s.humidity_ratio)].enthalpy(s.dry_bulb) for name, s in points.items()}

    def gain(values: Mapping[str, Array], entering: str, leaving: str) -> Array:
        return m * (values[leaving] - values[entering])

    humidity = {name: state.humidity_ratio for name, state in points.items()}
    heat_residuals, water_residuals = [], []
    for passage in airstream.passages:
        exchange, way = passage.exchange, (passage.entering, passage.leaving)
        heat = gain(enthalpy, *way) - exchange.heat
        if exchange.water is not None and exchange.water_enthalpy is not None:
            heat = heat + exchange.water * exchange.water_enthalpy
        heat_residuals.append(heat)
        if exchange.water is not None:
            water_residuals.append(gain(humidity, *way) + exchange.water)
        elif humidity[way[0]] is not humidity[way[1]]:
            water_residuals.append(gain(humidity, *way))
    ends = np.maximum(np.abs(enthalpy["outdoor"]), np.abs(enthalpy["supply"]))
    heat_passing = m * np.maximum(ends, 1.0)
    water_passing = m * np.maximum(humidity["outdoor"], 1e-6)
    return _share(heat_residuals, heat_passing), _share(water_residuals, water_passing)


def _share(residuals: list[Array], passing: Array) -> Array:
    """The largest of the residuals and of their sum, as a share of what passes; 0 where nothing does."""
    worst = reduce(np.maximum, map(np.abs, residuals), np.zeros_like(passing))
    if len(residuals) > 1:
        worst = np.maximum(worst, np.abs(sum(residuals)))
    return np.asarray(worst / np.maximum(passing, np.finfo(float).tiny))


def run_hours(scheme: Scheme, hours: Hours, weather: WeatherYear | None = None) -> Year:
    """Take any set of hours through a scheme and check that heat and water balance in every one.

    Raises
    ------
    BalanceError
        A residual exceeds 1e-9 of what passes through.
    """
    year = Year(scheme=scheme, airstream=pass_air(scheme.unit, hours), weather=weather)
    for name, residual in (("heat", year.heat_residual), ("water", year.water_residual)):
        worst = float(residual.max(initial=0.0))
        if not worst <= BALANCE_TOLERANCE:
            index = int(np.argmax(residual) % residual.shape[-1])
            place = weather.label(index) if weather is not None else f"hour {index}"
            raise BalanceError(f"{name} does not balance at {place}: {worst:.2g} of what passes through")
    return year


def run_year(weather: WeatherYear, scheme: Scheme) -> Year:
    """Take every hour of a weather year through a scheme.

    Parameters
    ----------
    weather
        A year as ``read_weather`` gives it; arrays of shape (hours,).
    scheme
        A scheme, or a stack of variants (``scheme.stack``); arrays of the result then have the shape
        (variants, hours), and a variant's figures are the same as if it had run alone.

    Raises
    ------
    ConvergenceError, BalanceError
        The arithmetic did not hold; a defect of this program, not of the input.
    """
    outdoor = State.of(weather.dry_bulb, weather.humidity_ratio, weather.pressure)
    calendar = {"month": weather.month, "hour": weather.hour, "weekday": weather.weekday}
    flow = mass_flow(
        scheme.airflow,
        **calendar,
        dry_bulb=weather.dry_bulb,
        humidity_ratio=weather.humidity_ratio,
        pressure=weather.pressure,
    )
    full = np.array(np.broadcast_to(flow, (*scheme.variants, weather.hours)))
    return run_hours(scheme, Hours(**calendar, outdoor=outdoor, mass_flow=full), weather)


def variant(year: Year, index: int, scheme: Scheme) -> Year:
    """One variant of a stacked year as a year of its own; ``scheme`` is the variant's own scheme."""
    size = year.coil_cooling.shape[-1]

    def row(value: Any) -> Any:
        if np.ndim(value) < 2:
            return value
        return np.broadcast_to(value, (*np.shape(value)[:-1], size))[min(index, len(value) - 1)]

    def rows(item: Any) -> Any:
        fields = {f.name: getattr(item, f.name) for f in dataclasses.fields(item)}
        return type(item)(**{name: row(value) for name, value in fields.items()})

    stream = year.airstream
    hours = dataclasses.replace(
        stream.hours, outdoor=rows(stream.hours.outdoor), mass_flow=row(stream.hours.mass_flow)
    )
    passages = tuple(
        dataclasses.replace(
            p,
            exchange=dataclasses.replace(
                rows(p.exchange), flags={k: row(v) for k, v in p.exchange.flags.items()}
            ),
        )
        for p in stream.passages
    )
    points = {name: rows(state) for name, state in stream.points.items()}
    own = Airstream(hours=hours, request=rows(stream.request), points=points, passages=passages)
    return Year(scheme=scheme, airstream=own, weather=year.weather)
