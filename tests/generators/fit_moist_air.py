"""The fits of ``estimator.moist_air`` made again: enthalpy of moist air, enthalpy of liquid water.

Run ``python tests/generators/fit_moist_air.py`` from the top of the repository to see the fresh coefficients
beside the committed ones, and the largest difference each leaves. CoolProp's humid air (a real-gas
formulation) and water (IAPWS-95) are what is fitted; they are computed, not published.

Enthalpy is linear in its ten coefficients. A plain least-squares fit is followed by rounds in which points
with a large remaining difference gain weight, which flattens the largest one (Lawson's method, gently).
"""

from __future__ import annotations

from dataclasses import dataclass
from typing import Final

import numpy as np
from CoolProp.CoolProp import HAPropsSI, PropsSI
from numpy.typing import NDArray

from estimator import moist_air

Array = NDArray[np.float64]

STANDARD_PRESSURE: Final = 101_325.0
#: Names of the committed enthalpy coefficients, in the order of the columns of ``design_matrix``.
NAMES: Final = ("_A1", "_A2", "_B0", "_B1", "_C0", "_C1", "_C2", "_D0", "_E0", "_E1")
LARGEST_HUMIDITY_RATIO: Final = 0.12
ROUNDS: Final = 40
#: How hard a remaining difference pulls, and the difference in kJ/kg below which it no longer matters.
PULL: Final = 0.15
FLOOR: Final = 1e-4


@dataclass(frozen=True, kw_only=True)
class States:
    """Moist air: temperature degC, humidity ratio kg/kg, pressure Pa; all of the shape (states,)."""

    t: Array
    w: Array
    p: Array


def states(temperatures: Array, pressures: Array, fractions: Array) -> States:
    """Every combination; ``fractions`` are shares of the saturation humidity ratio, capped at 0.12 kg/kg."""
    mesh = np.meshgrid(pressures, temperatures, fractions, indexing="ij")
    p, t, fraction = (axis.ravel() for axis in mesh)
    saturated = np.asarray(HAPropsSI("W", "T", t + 273.15, "R", 1.0, "P", p))
    return States(t=t, w=np.minimum(fraction * saturated, LARGEST_HUMIDITY_RATIO), p=p)


def fitted_states() -> States:
    """The states the committed fit was made on."""
    return states(
        np.arange(-45.0, 65.1, 5.0),
        np.linspace(55e3, 108e3, 6),
        np.array([0.0, 0.1, 0.25, 0.5, 0.75, 1.0]),
    )


def reference_enthalpy(s: States) -> Array:
    """CoolProp's enthalpy, kJ per kg dry air."""
    return np.asarray(HAPropsSI("H", "T", s.t + 273.15, "W", s.w, "P", s.p)) / 1000.0


def design_matrix(s: States) -> Array:
    """What each coefficient multiplies, shape (states, 10)."""
    t, w, q = s.t, s.w, s.p / STANDARD_PRESSURE
    over = q - 1.0
    columns = [t, t**2, w, w * t, over, over * t, over * t**2, q * w, q * w**2, q * w**2 * t]
    return np.stack(columns, axis=1)


def fit_enthalpy(s: States) -> Array:
    """Coefficients in the order of ``NAMES``."""
    matrix, target = design_matrix(s), reference_enthalpy(s)
    weight = np.ones_like(target)
    coefficients: Array = np.zeros(len(NAMES))
    for _ in range(ROUNDS):
        solved, *_ = np.linalg.lstsq(matrix * weight[:, None], target * weight, rcond=None)
        coefficients = np.asarray(solved, dtype=np.float64)
        left = np.abs(target - matrix @ coefficients)
        weight = weight * (left + FLOOR) ** PULL
        weight = weight / weight.mean()
    return coefficients


def reference_water_enthalpy(t: Array) -> Array:
    """CoolProp's enthalpy of saturated liquid water, kJ/kg."""
    return np.asarray(PropsSI("H", "T", t + 273.15, "Q", 0, "Water")) / 1000.0


def fit_water_enthalpy() -> Array:
    """Coefficients of powers of t, ascending."""
    t = np.arange(0.01, 61.0, 2.0)
    return np.polyfit(t, reference_water_enthalpy(t), 4)[::-1]


def committed_enthalpy_coefficients() -> Array:
    """The ten numbers in ``estimator.moist_air``."""
    return np.array([getattr(moist_air, name) for name in NAMES])


def committed_water_coefficients() -> Array:
    """The five numbers in ``estimator.moist_air``."""
    return np.array(moist_air._WATER)


def main() -> None:
    """Print fresh and committed coefficients and the largest differences they leave."""
    s = fitted_states()
    expected, matrix = reference_enthalpy(s), design_matrix(s)
    fresh, committed = fit_enthalpy(s), committed_enthalpy_coefficients()
    print(f"enthalpy of moist air, {s.t.size} states")
    for name, new, old in zip(NAMES, fresh, committed, strict=True):
        print(f"  {name}  {new: .8g}  committed {old: .8g}")
    for label, c in (("fresh", fresh), ("committed", committed)):
        print(f"  largest difference, {label}: {np.abs(matrix @ c - expected).max():.5f} kJ/kg")

    fresh, committed = fit_water_enthalpy(), committed_water_coefficients()
    t = np.linspace(0.01, 60.0, 241)
    print("enthalpy of liquid water")
    for power, (new, old) in enumerate(zip(fresh, committed, strict=True)):
        print(f"  t^{power}  {new: .9g}  committed {old: .9g}")
    for label, c in (("fresh", fresh), ("committed", committed)):
        left = np.polynomial.polynomial.polyval(t, c) - reference_water_enthalpy(t)
        print(f"  largest difference, {label}: {np.abs(left).max():.5f} kJ/kg")


if __name__ == "__main__":
    main()
