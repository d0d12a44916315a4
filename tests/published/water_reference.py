"""Ice and sublimation pressure by the IAPWS releases, for the tests to compare with.

CoolProp's Python interface gives neither, and both are short. Every coefficient was written down from
memory; ``test_water_reference.py`` shows that they reproduce the check values which the releases print.
"""

from __future__ import annotations

import cmath
import math

#: Triple point of water, K and Pa (IAPWS-95).
TRIPLE_K = 273.16
TRIPLE_PA = 611.657
_NORMAL_PA = 101_325.0

# IAPWS R10-06 (2009), Gibbs energy of ice Ih
_G0 = (
    -0.632020233335886e6,
    0.655022213658955,
    -0.189369929326131e-7,
    0.339746123271053e-14,
    -0.556464869058991e-21,
)
_S0 = -0.332733756492168e4
_T1 = complex(0.368017112855051e-1, 0.510878114959572e-1)
_R1 = complex(0.447050716285388e2, 0.656876847463481e2)
_T2 = complex(0.337315741065416, 0.335449415919309)
_R2 = (
    complex(-0.725974574329220e2, -0.781008427112870e2),
    complex(-0.557107698030123e-4, 0.464578634580806e-4),
    complex(0.234801409215913e-10, -0.285651142904972e-10),
)

# IAPWS R14-08 (2011), sublimation pressure of ice Ih
_SUBLIMATION = (
    (-0.212144006e2, 0.333333333e-2),
    (0.273203819e2, 0.120666667e1),
    (-0.610598130e1, 0.170333333e1),
)


def ice_gibbs(kelvin: float, p: float) -> float:
    """Gibbs energy of ice Ih, J/kg, at a temperature in K and a pressure in Pa (IAPWS R10-06, eq. 1)."""
    tau, pi = kelvin / TRIPLE_K, (p - _NORMAL_PA) / TRIPLE_PA

    def term(t: complex) -> complex:
        wings = (t - tau) * cmath.log(t - tau) + (t + tau) * cmath.log(t + tau)
        return wings - 2 * t * cmath.log(t) - tau * tau / t

    g0 = sum(c * pi**k for k, c in enumerate(_G0))
    r2 = sum(c * pi**k for k, c in enumerate(_R2))
    return g0 - _S0 * TRIPLE_K * tau + TRIPLE_K * (_R1 * term(_T1) + r2 * term(_T2)).real


def ice_entropy(kelvin: float, p: float) -> float:
    """Entropy of ice Ih, J/(kg K), at a temperature in K and a pressure in Pa (IAPWS R10-06)."""
    tau, pi = kelvin / TRIPLE_K, (p - _NORMAL_PA) / TRIPLE_PA

    def term(t: complex) -> complex:
        return -cmath.log(t - tau) + cmath.log(t + tau) - 2 * tau / t

    r2 = sum(c * pi**k for k, c in enumerate(_R2))
    return _S0 - (_R1 * term(_T1) + r2 * term(_T2)).real


def ice_enthalpy(t: float, p: float = TRIPLE_PA) -> float:
    """Enthalpy of ice Ih, kJ/kg, at ``t`` in degC; zero for liquid water at the triple point."""
    kelvin = t + 273.15
    return (ice_gibbs(kelvin, p) + kelvin * ice_entropy(kelvin, p)) / 1000.0


def sublimation_pressure(t: float) -> float:
    """Pressure of water vapour over ice, Pa, at ``t`` in degC, -223..0.01 (IAPWS R14-08, eq. 6)."""
    theta = (t + 273.15) / TRIPLE_K
    return TRIPLE_PA * math.exp(sum(a * theta**b for a, b in _SUBLIMATION) / theta)
