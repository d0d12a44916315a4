"""The airstream: which devices stand in it and in which order, and one pass of the air through them.

The order is fixed. A device is present when its section is in the scheme:

    outdoor -> preheat -> (fan, blow-through) -> cooling coil -> (fan, draw-through)
            -> sources of active heat in their order -> supply
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from typing import Final

import numpy as np

from estimator.airstream.airflow import Airflow
from estimator.airstream.coil import Coil, CoilDevice
from estimator.airstream.fan import Fan, FanDevice
from estimator.airstream.heat import Preheat, PreheatDevice, ReheatDevice, ReheatSource
from estimator.airstream.solve import coupled
from estimator.airstream.state import Before, Device, Exchange, Hours, Request, State, Streams
from estimator.airstream.supply import Supply, request
from estimator.moist_air import Array

__all__ = ["ORDER", "Airstream", "Passage", "Place", "Unit", "pass_air", "places"]


@dataclass(frozen=True, kw_only=True)
class Unit:
    """The devices of one unit: the settings of every section that a scheme has."""

    airflow: Airflow
    supply: Supply
    coil: Coil
    fan: Fan | None = None
    preheat: Preheat | None = None
    reheat: tuple[ReheatSource, ...] = ()


@dataclass(frozen=True, eq=False)
class Place:
    """A device at its place, and the name of the state point behind it."""

    device: Device
    leaving: str


def _preheat(unit: Unit) -> list[Place]:
    return [Place(PreheatDevice(unit.preheat), "preheated")] if unit.preheat else []


def _fan(unit: Unit, position: str) -> list[Place]:
    if unit.fan is None or unit.fan.position != position:
        return []
    return [Place(FanDevice(unit.fan, unit.airflow.standard_density), "after fan")]


def _coil(unit: Unit) -> list[Place]:
    return [Place(CoilDevice(unit.coil, passive_before(unit)), "after coil")]


def _heat(unit: Unit) -> list[Place]:
    last = len(unit.reheat) - 1
    return [
        Place(ReheatDevice(source), "supply" if i == last else f"after {source.source}")
        for i, source in enumerate(unit.reheat)
    ]


#: The one order. Each entry gives the devices that stand at its place, none where a scheme has none.
ORDER: Final[tuple[Callable[[Unit], list[Place]], ...]] = (
    _preheat,
    lambda unit: _fan(unit, "blow-through"),
    _coil,
    lambda unit: _fan(unit, "draw-through"),
    _heat,
)


def places(unit: Unit) -> list[Place]:
    """The devices of ``unit`` in the order in which the air meets them."""
    return [place for section in ORDER for place in section(unit)]


def passive_before(unit: Unit) -> Before:
    """What must leave the coil for a given dry bulb behind the passive devices downstream of it."""
    if unit.fan is None or unit.fan.position != "draw-through":
        return lambda t, state, take: state.mixture.enthalpy(t)
    return FanDevice(unit.fan, unit.airflow.standard_density).before


@dataclass(frozen=True, kw_only=True, eq=False)
class Passage:
    """One device's part of the way: the points before and behind it and its exchange."""

    entering: str
    leaving: str
    exchange: Exchange


@dataclass(frozen=True, kw_only=True, eq=False)
class Airstream:
    """The air's whole way: the state at every point and the exchanges between them."""

    hours: Hours
    request: Request
    #: by name, in the order of the air; the first is "outdoor", the last "supply"
    points: dict[str, State]
    passages: tuple[Passage, ...]


def pass_air(unit: Unit, hours: Hours) -> Airstream:
    """Take the outdoor air of ``hours`` through ``unit``."""
    wanted = request(unit.supply, hours.month, hours.outdoor)
    along = places(unit)

    def run(unknowns: Array) -> tuple[Array, Airstream]:
        # no device of the base set depends on one downstream of it, so there are no unknowns to adjust
        return unknowns, _once(along, hours, wanted)

    return coupled(run, np.empty((0, *hours.mass_flow.shape)))


def _once(along: list[Place], hours: Hours, wanted: Request) -> Airstream:
    streams = Streams(hours.outdoor)
    points = {"outdoor": hours.outdoor}
    passages: list[Passage] = []
    before = "outdoor"
    for place in along:
        step = place.device(streams, hours, wanted)
        streams = step.leaving
        points[place.leaving] = streams.supply
        passages.append(Passage(entering=before, leaving=place.leaving, exchange=step.exchange))
        before = place.leaving
    points.setdefault("supply", streams.supply)
    return Airstream(hours=hours, request=wanted, points=points, passages=tuple(passages))
