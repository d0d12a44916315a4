"""The fits in ``estimator.moist_air`` are what their generator makes, and as close as they declare.

Values are compared, not coefficients: several sets of coefficients describe the same surface.
"""

from __future__ import annotations

import numpy as np
import pytest
from generators import fit_moist_air as generator
from numpy.polynomial.polynomial import polyval
from published import checks
from published.checks import Recorder, validates

from estimator import moist_air


@pytest.fixture(scope="module")
def fitted() -> generator.States:
    return generator.fitted_states()


def test_enthalpy_is_what_the_generator_makes(fitted: generator.States) -> None:
    """Within 1e-4 kJ/kg: eight digits of the coefficients give 3e-6, one round of reweighting more or less
    5e-5, and another version of CoolProp or of the linear algebra may cost as much.
    """
    fresh = generator.design_matrix(fitted) @ generator.fit_enthalpy(fitted)
    committed = moist_air.enthalpy(fitted.t, fitted.w, fitted.p)
    np.testing.assert_allclose(committed, fresh, rtol=0.0, atol=1e-4)


@validates("The enthalpy fit on the states it was made from", checks.COOLPROP)
def test_enthalpy_on_the_states_it_was_fitted_to(fitted: generator.States, check: Recorder) -> None:
    """Within 0.0072 kJ/kg, as the module declares; -45..65 degC, 55..108 kPa, up to 120 g/kg."""
    expected = generator.reference_enthalpy(fitted)
    found = moist_air.enthalpy(fitted.t, fitted.w, fitted.p)
    check.largest("enthalpy", found, expected, "kJ/kg", within=0.0072)


@validates("The enthalpy fit between those states", checks.COOLPROP)
def test_enthalpy_between_the_states_it_was_fitted_to(check: Recorder) -> None:
    """Within 0.0075 kJ/kg on a grid twice as fine: the fit is smooth and does not swing in between."""
    fine = generator.states(
        np.arange(-45.0, 65.1, 2.5), np.linspace(55e3, 108e3, 11), np.linspace(0.0, 1.0, 11)
    )
    expected = generator.reference_enthalpy(fine)
    found = moist_air.enthalpy(fine.t, fine.w, fine.p)
    check.largest("enthalpy", found, expected, "kJ/kg", within=0.0075)


def test_liquid_water_is_what_the_generator_makes() -> None:
    """Within 1e-6 kJ/kg: nine digits of the coefficients."""
    t = np.linspace(0.01, 60.0, 241)
    fresh = polyval(t, generator.fit_water_enthalpy())
    np.testing.assert_allclose(moist_air.liquid_water_enthalpy(t), fresh, rtol=0.0, atol=1e-6)


def test_the_generator_runs(capsys: pytest.CaptureFixture[str]) -> None:
    """It prints every coefficient twice, and what is left."""
    generator.main()
    printed = capsys.readouterr().out
    for name in generator.NAMES:
        assert name in printed
    assert printed.count("committed") == len(generator.NAMES) + 5 + 2
