"""States as a psychrometric chart is read, at sea level, from the program's moist-air functions."""

from __future__ import annotations

from typing import NamedTuple

from estimator import moist_air

SEA_LEVEL = 101_325.0


class Air(NamedTuple):
    """Moist air at sea level: dry bulb degC, humidity ratio kg/kg, enthalpy kJ/kg, volume m3/kg."""

    t: float
    w: float
    h: float
    v: float

    @classmethod
    def of(cls, t: float, w: float) -> Air:
        """From dry bulb and humidity ratio."""
        h = float(moist_air.enthalpy(t, w, SEA_LEVEL))
        return cls(t, w, h, float(moist_air.specific_volume(t, w, SEA_LEVEL)))

    @classmethod
    def humid(cls, t: float, rh: float) -> Air:
        """From dry bulb and relative humidity, a fraction."""
        return cls.of(t, float(moist_air.humidity_ratio_from_relative_humidity(t, rh, SEA_LEVEL)))

    @classmethod
    def wet(cls, t: float, wet_bulb: float) -> Air:
        """From dry and wet bulb."""
        return cls.of(t, float(moist_air.humidity_ratio_from_wet_bulb(t, wet_bulb, SEA_LEVEL)))

    @classmethod
    def from_enthalpy(cls, h: float, w: float) -> Air:
        """From enthalpy and humidity ratio."""
        return cls.of(float(moist_air.dry_bulb_from_enthalpy(h, w, SEA_LEVEL)), w)
