"""What passes between devices: states, streams, exchanges, and the protocol of a device.

Arrays have the shape (..., hours): hours last, and any leading axis holds variants of a scheme. A number
or an array of shape (variants, 1) stands for all hours.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass, field
from functools import cached_property
from typing import Any, Literal, Protocol, TypeAlias

import numpy as np
from numpy.typing import NDArray

from estimator.moist_air import Array, ArrayLike, Mixture

__all__ = [
    "Before",
    "Device",
    "Exchange",
    "Flags",
    "Hours",
    "Kind",
    "Request",
    "State",
    "Step",
    "Streams",
    "pick",
]

Flags: TypeAlias = NDArray[np.bool_]

#: What the heat of a device counts as: the coil's cooling, preheat, fan heat, or a class of active heat.
Kind: TypeAlias = Literal["coil", "preheat", "fan", "recovered", "solar", "purchased"]


@dataclass(frozen=True, eq=False)
class State:
    """Moist air at a point: dry bulb degC, humidity ratio kg/kg, enthalpy kJ/kg, pressure Pa."""

    dry_bulb: Array
    humidity_ratio: Array
    enthalpy: Array
    pressure: Array

    @classmethod
    def of(cls, dry_bulb: Array, humidity_ratio: Array, pressure: Array) -> State:
        """The state of this dry bulb and humidity ratio."""
        mixture = Mixture.of(humidity_ratio, pressure)
        state = cls(dry_bulb, humidity_ratio, mixture.enthalpy(dry_bulb), pressure)
        return state.knowing(mixture)

    def knowing(self, mixture: Mixture) -> State:
        """The same state, which need not work out ``mixture`` again."""
        self.__dict__["mixture"] = mixture
        return self

    @cached_property
    def mixture(self) -> Mixture:
        """The air of this state at any temperature."""
        return Mixture.of(self.humidity_ratio, self.pressure)

    def heated(self, heat: ArrayLike) -> State:
        """The state after ``heat``, kJ per kg dry air, at the same humidity ratio."""
        h = self.enthalpy + heat
        state = State(self.mixture.dry_bulb(h), self.humidity_ratio, h, self.pressure)
        return state.knowing(self.mixture)

    def heat_to(self, dry_bulb: ArrayLike) -> Array:
        """Heat, kJ per kg dry air, that brings the air to ``dry_bulb`` (negative: cooling without water)."""
        return self.mixture.enthalpy(dry_bulb) - self.enthalpy


@dataclass(frozen=True, slots=True, eq=False)
class Streams:
    """The two airstreams at one place; ``exhaust`` is None where a scheme has no exhaust air."""

    supply: State
    exhaust: State | None = None


@dataclass(frozen=True, kw_only=True, eq=False)
class Hours:
    """What every device may know of the hours: calendar, outdoor air, and the flow through the unit."""

    month: NDArray[np.int64]
    hour: NDArray[np.int64]
    weekday: NDArray[np.int64]
    outdoor: State
    #: kg dry air/s, of the full shape (..., hours); 0 where the unit is off
    mass_flow: Array

    @property
    def running(self) -> Flags:
        """Hours in which the unit runs."""
        return np.asarray(self.mass_flow > 0.0)


@dataclass(frozen=True, kw_only=True, eq=False)
class Request:
    """What the supply is asked for in each hour; dry bulbs are None where nothing is asked."""

    dew_point: ArrayLike
    humidity_ratio: Array
    low: ArrayLike | None
    high: ArrayLike | None


@dataclass(frozen=True, kw_only=True, eq=False)
class Exchange:
    """What one device moves: heat, water and power, and the pressure drops it puts in the way of the air.

    ``kind`` says what the heat counts as; a device whose heat is none of them has its own name there.
    ``heat`` is in kW into the supply air (negative: cooling); ``water`` in kg/s leaves the supply air as
    liquid or ice, carrying ``water_enthalpy`` kJ/kg; ``power`` is the electricity the device draws, kW.
    The exhaust side's counterparts are positive into the exhaust air.
    """

    device: str
    kind: Kind
    heat: Array
    water: Array | None = None
    water_enthalpy: Array | None = None
    power: Array | None = None
    pressure_drop: ArrayLike = 0.0
    exhaust_heat: Array | None = None
    exhaust_water: Array | None = None
    exhaust_water_enthalpy: Array | None = None
    exhaust_pressure_drop: ArrayLike = 0.0
    #: named marks of single hours, such as "frozen"
    flags: Mapping[str, Flags] = field(default_factory=dict)


@dataclass(frozen=True, slots=True, eq=False)
class Step:
    """What a device returns: the streams that leave it and what it exchanged."""

    leaving: Streams
    exchange: Exchange


#: The enthalpy, kJ/kg, of air that leaves the coil and is at a given dry bulb behind the passive devices
#: downstream; the state gives its humidity ratio and pressure, and the last argument picks the hours (and
#: variants) in question out of arrays of the full shape.
Before: TypeAlias = Callable[[ArrayLike, State, Callable[[Any], Any]], Array]


class Device(Protocol):
    """A device: frozen settings, and a pure function of what enters it."""

    def __call__(self, entering: Streams, hours: Hours, request: Request) -> Step:
        """The streams that leave, and the exchange."""
        ...


def pick(index: NDArray[np.intp], shape: tuple[int, ...]) -> Callable[[Any], Any]:
    """A function that takes the elements at flat ``index`` out of anything that broadcasts to ``shape``.

    A plain number stays a plain number.
    """

    def take(value: Any) -> Any:
        if np.ndim(value) == 0:
            return value
        full = value if value.shape == shape else np.broadcast_to(value, shape)
        return full.reshape(-1)[index]

    return take
