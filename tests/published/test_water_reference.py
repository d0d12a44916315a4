"""The references of this folder reproduce the check values that IAPWS prints (values from memory)."""

from __future__ import annotations

import pytest
from CoolProp.CoolProp import PropsSI
from published import checks
from published import water_reference as reference
from published.checks import Recorder, validates


@validates("Ice, as the tests compute it", checks.ICE)
@pytest.mark.parametrize(
    ("kelvin", "p", "gibbs", "enthalpy", "entropy"),
    [
        (273.16, 611.657, 0.611784135, -333444.253966, -1220.69433940),
        (273.152519, 101325.0, 101.342740690, -333354.873637, -1220.76932550),
        (100.0, 100e6, -222296.513088, -483491.635676, -2611.95122589),
    ],
)
def test_ice(kelvin: float, p: float, gibbs: float, enthalpy: float, entropy: float, check: Recorder) -> None:
    """Table 6 of the release, all twelve digits; at the triple point g is a difference of two numbers
    near 333 kJ/kg, which costs it digits."""
    assert reference.ice_gibbs(kelvin, p) == pytest.approx(gibbs, rel=1e-11, abs=1e-8)
    found = reference.ice_gibbs(kelvin, p) + kelvin * reference.ice_entropy(kelvin, p)
    state = f"{kelvin:g} K, {p:g} Pa"
    check(f"enthalpy, {state}", found, enthalpy, "J/kg", rel=1e-11)
    check(f"entropy, {state}", reference.ice_entropy(kelvin, p), entropy, "J/(kg K)", rel=1e-11)


@validates("Sublimation pressure, as the tests compute it", checks.SUBLIMATION)
def test_sublimation_pressure(check: Recorder) -> None:
    """Section 5 of the release, to the digits printed."""
    check("230 K", reference.sublimation_pressure(230.0 - 273.15), 8.94735, "Pa", within=5e-6)


@validates("Ice and liquid meet at the triple point", checks.COOLPROP)
def test_ice_and_liquid_meet_at_the_triple_point(check: Recorder) -> None:
    """Vapour over ice equals vapour over liquid there; CoolProp (IAPWS-95) supplies the liquid.

    Its triple-point pressure is 611.655 Pa against 611.657 Pa here, hence 1e-5.
    """
    liquid = PropsSI("P", "T", 273.16, "Q", 0, "Water")
    check("vapour pressure", reference.sublimation_pressure(0.01), liquid, "Pa", rel=1e-5)
