"""The references of this folder reproduce the check values that IAPWS prints (values from memory)."""

from __future__ import annotations

import pytest
from CoolProp.CoolProp import PropsSI
from published import water_reference as reference


@pytest.mark.parametrize(
    ("kelvin", "p", "gibbs", "enthalpy", "entropy"),
    [
        (273.16, 611.657, 0.611784135, -333444.253966, -1220.69433940),
        (273.152519, 101325.0, 101.342740690, -333354.873637, -1220.76932550),
        (100.0, 100e6, -222296.513088, -483491.635676, -2611.95122589),
    ],
)
def test_ice(kelvin: float, p: float, gibbs: float, enthalpy: float, entropy: float) -> None:
    """IAPWS R10-06 (2009), table 6, all twelve digits; at the triple point g is a difference of two numbers
    near 333 kJ/kg, which costs it digits."""
    assert reference.ice_gibbs(kelvin, p) == pytest.approx(gibbs, rel=1e-11, abs=1e-8)
    found = reference.ice_gibbs(kelvin, p) + kelvin * reference.ice_entropy(kelvin, p)
    assert found == pytest.approx(enthalpy, rel=1e-11)
    assert reference.ice_entropy(kelvin, p) == pytest.approx(entropy, rel=1e-11)


def test_sublimation_pressure() -> None:
    """IAPWS R14-08 (2011), section 5: 8.94735 Pa at 230 K, to the digits printed."""
    assert reference.sublimation_pressure(230.0 - 273.15) == pytest.approx(8.94735, abs=5e-6)


def test_ice_and_liquid_meet_at_the_triple_point() -> None:
    """Vapour over ice equals vapour over liquid there; CoolProp (IAPWS-95) supplies the liquid.

    Its triple-point pressure is 611.655 Pa against 611.657 Pa here, hence 1e-5.
    """
    liquid = PropsSI("P", "T", 273.16, "Q", 0, "Water")
    assert reference.sublimation_pressure(0.01) == pytest.approx(liquid, rel=1e-5)
