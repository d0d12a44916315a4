"""The supply fan: its power, and the heat that it leaves in the air.

Power uses the actual volume at the fan inlet. Fan total pressure is given at standard density and falls
and rises with the density of the air, as a fan at constant speed makes it:

    shaft power = V dp (rho / rho_standard) / efficiency,      V rho = m (1 + W)
    electricity = shaft power / motor efficiency
    heat to air = shaft power + loss_to_air (electricity - shaft power)
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

import numpy as np

from estimator.airstream.state import Exchange, Hours, Request, State, Step, Streams
from estimator.moist_air import ArrayLike
from estimator.settings import Settings, setting

__all__ = ["Fan", "FanDevice"]


@dataclass(frozen=True, kw_only=True)
class Fan(Settings):
    """One supply fan; pressure and efficiency stay what they are when a schedule lowers the flow."""

    total_pressure: float = setting(
        "fan pressure",
        least=0.0,
        doc="fan total pressure at standard density",
        example="900 Pa",
    )
    efficiency: float = setting(
        "fraction",
        least=0.0,
        above=True,
        most=1.0,
        doc="fan total efficiency, air to shaft; usually 0.55 to 0.70",
        example="0.62",
    )
    position: str = setting(
        choices=("draw-through", "blow-through"),
        default="draw-through",
        doc="after the coil, or before it",
        source="common practice",
    )
    motor_efficiency: float = setting(
        "fraction",
        least=0.0,
        above=True,
        most=1.0,
        default=0.9,
        doc="motor and drive together, shaft to wire",
        source="common practice",
    )
    loss_to_air: float = setting(
        "fraction",
        least=0.0,
        most=1.0,
        default=1.0,
        doc="share of motor and drive losses that ends in the air; 1 with the motor in the airstream",
        source="common practice",
    )


@dataclass(frozen=True, eq=False)
class FanDevice:
    """A fan at its place in the airstream."""

    fan: Fan
    standard_density: ArrayLike

    def shaft_work(self, w: ArrayLike) -> Any:
        """Work on the air and its turbulence, kJ per kg dry air."""
        fan = self.fan
        return (1.0 + w) * (fan.total_pressure / (1000.0 * self.standard_density * fan.efficiency))

    def electric_work(self, w: ArrayLike) -> Any:
        """Electricity, kJ per kg dry air."""
        return self.shaft_work(w) / self.fan.motor_efficiency

    def heat_to_air(self, w: ArrayLike) -> Any:
        """Heat that the air keeps, kJ per kg dry air."""
        return (1.0 + w) * self._heat_per_moist_mass

    @property
    def _heat_per_moist_mass(self) -> Any:
        share = 1.0 + self.fan.loss_to_air * (1.0 / self.fan.motor_efficiency - 1.0)
        return self.shaft_work(0.0) * share

    def before(self, dry_bulb: ArrayLike, state: State, take: Any) -> Any:
        """Enthalpy before the fan, kJ/kg, of air that is at ``dry_bulb`` behind it (see ``state.Before``)."""
        heat = (1.0 + state.humidity_ratio) * take(self._heat_per_moist_mass)
        return state.mixture.enthalpy(dry_bulb) - heat

    def __call__(self, entering: Streams, hours: Hours, request: Request) -> Step:
        """All hours in which the unit runs."""
        air = entering.supply
        heat = np.where(hours.running, self.heat_to_air(air.humidity_ratio), 0.0)
        power = hours.mass_flow * self.electric_work(air.humidity_ratio)
        exchange = Exchange(
            device="fan",
            kind="fan",
            heat=hours.mass_flow * heat,
            power=power,
            pressure_drop=-self.fan.total_pressure,
        )
        return Step(Streams(air.heated(heat), entering.exhaust), exchange)
