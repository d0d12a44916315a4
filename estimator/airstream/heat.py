"""Bought heat: the preheat that keeps the coil from freezing, and the reheat sources in their order."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np

from estimator.airstream.state import Exchange, Hours, Kind, Request, State, Step, Streams
from estimator.constants import NEGLIGIBLE_HEAT
from estimator.moist_air import Array, ArrayLike
from estimator.plant import CARRIER_OF, USUAL_EFFICIENCY
from estimator.settings import Settings, setting

__all__ = ["BoughtHeat", "Preheat", "PreheatDevice", "ReheatDevice", "ReheatSource"]


@dataclass(frozen=True, kw_only=True)
class BoughtHeat(Settings):
    """Something that buys heat."""

    source: str = setting(
        choices=tuple(CARRIER_OF),
        doc="electric (electricity), boiler (fuel) or district (heat)",
        example='"electric"',
    )
    capacity: float | None = setting(
        "power",
        least=0.0,
        above=True,
        default=None,
        doc="highest output; absent: unlimited",
        example="60 kW",
    )
    efficiency: float | None = setting(
        "fraction",
        least=0.0,
        above=True,
        most=1.0,
        default=None,
        doc="delivered heat over bought energy; absent: 1 electric, 0.85 boiler, 1 district",
        source="common practice",
        example="0.85",
    )

    def __post_init__(self) -> None:
        if self.efficiency is None and self.source in USUAL_EFFICIENCY:
            object.__setattr__(self, "efficiency", USUAL_EFFICIENCY[self.source])
        super().__post_init__()


@dataclass(frozen=True, kw_only=True)
class ReheatSource(BoughtHeat):
    """A bought source of heat after the coil; it serves reheat and outdoor-air heating alike."""


@dataclass(frozen=True, kw_only=True)
class Preheat(BoughtHeat):
    """Heat before the coil that keeps it, and what stands before it, from freezing."""

    dry_bulb: float = setting(
        "temperature",
        least=-40.0,
        most=40.0,
        doc="outdoor air is heated up to this dry bulb",
        example="4 degC",
    )


def _heat(air: State, to: ArrayLike, capacity: ArrayLike | None, hours: Hours) -> Array:
    """Heat in kW that brings the air up to ``to`` as far as the capacity goes."""
    needed = air.heat_to(to)
    wanted = hours.mass_flow * np.where(needed > NEGLIGIBLE_HEAT, needed, 0.0)
    return wanted if capacity is None else np.minimum(wanted, capacity)


def _step(device: str, kind: Kind, entering: Streams, heat: Array, hours: Hours) -> Step:
    flow = np.where(hours.running, hours.mass_flow, 1.0)
    leaving = entering.supply.heated(heat / flow)
    return Step(Streams(leaving, entering.exhaust), Exchange(device=device, kind=kind, heat=heat))


@dataclass(frozen=True, eq=False)
class PreheatDevice:
    """The preheat at its place in the airstream."""

    preheat: Preheat

    def __call__(self, entering: Streams, hours: Hours, request: Request) -> Step:
        """Heat up to the freeze-protection dry bulb."""
        heat = _heat(entering.supply, self.preheat.dry_bulb, self.preheat.capacity, hours)
        return _step("preheat", "preheat", entering, heat, hours)


@dataclass(frozen=True, eq=False)
class ReheatDevice:
    """One source of active heat after the coil; it gives what those before it have left to give."""

    reheat: ReheatSource

    def __call__(self, entering: Streams, hours: Hours, request: Request) -> Step:
        """Heat up to the low supply dry bulb."""
        if request.low is None:
            heat = np.zeros_like(hours.mass_flow)
        else:
            heat = _heat(entering.supply, request.low, self.reheat.capacity, hours)
        return _step(f"reheat.{self.reheat.source}", "purchased", entering, heat, hours)
