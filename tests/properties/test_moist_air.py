"""Properties of the moist-air functions on generated states: inverses, batches, order, shapes, NaN, fog.

States are drawn over the ranges the module declares: saturation -60..70 degC, enthalpy -45..65 degC with a
humidity ratio of at most 0.12, both for 55..108 kPa.
"""

from __future__ import annotations

import warnings
from collections.abc import Callable

import numpy as np
import pytest
from hypothesis import assume, example, given, settings
from hypothesis import strategies as st
from numpy.typing import NDArray

from estimator import moist_air as ma
from estimator.constants import TEMPERATURE_TOLERANCE, TRIPLE_POINT
from estimator.errors import ConvergenceError

Array = NDArray[np.float64]

LARGEST_W = 0.12
#: What 1e-6 K becomes when a fixed number of steps and its residual check are both held to it.
EXACT = TEMPERATURE_TOLERANCE

pressures = st.floats(55e3, 108e3)
saturation_temperatures = st.floats(-60.0, 70.0)
temperatures = st.floats(-45.0, 65.0)
fractions = st.floats(0.0, 1.0)

quick = settings(max_examples=150, deadline=None)


def on_the_edge(t: float) -> bool:
    """At the triple point but for rounding, where the last bit decides between ice and water."""
    return abs(t - TRIPLE_POINT) < 1e-9


def saturated(t: float, p: float) -> float:
    """Saturation humidity ratio as a float."""
    return float(ma.saturation_humidity_ratio(t, p))


def moist(t: float, fraction: float, p: float) -> float:
    """A humidity ratio in range: dry, or between the driest dew point declared and saturation."""
    w = fraction * min(saturated(t, p), LARGEST_W)
    return w if w >= saturated(-60.0, p) else 0.0


@quick
@given(saturation_temperatures, pressures)
@example(0.0099, 101_325.0)
@example(TRIPLE_POINT, 55e3)
@example(-60.0, 55e3)
@example(70.0, 55e3)
def test_dew_point_undoes_saturation(t: float, p: float) -> None:
    assert abs(float(ma.dew_point(saturated(t, p), p)) - t) <= EXACT


@quick
@given(temperatures, fractions, pressures)
def test_dry_bulb_undoes_enthalpy(t: float, fraction: float, p: float) -> None:
    w = moist(t, fraction, p)
    assert abs(float(ma.dry_bulb_from_enthalpy(ma.enthalpy(t, w, p), w, p)) - t) <= 1e-9


@quick
@given(temperatures, pressures, st.sampled_from(["none", "liquid", "ice", "own"]))
@example(0.0099, 101_325.0, "none")
@example(TRIPLE_POINT, 101_325.0, "own")
@example(-45.0, 55e3, "liquid")
def test_saturated_state_undoes_its_enthalpy(t: float, p: float, water: str) -> None:
    """With the drained water at its own temperature, at another, frozen, or left out."""
    drained = {
        "none": 0.0,
        "liquid": float(ma.liquid_water_enthalpy(12.0)),
        "ice": float(ma.ice_enthalpy(-10.0)),
        "own": float(ma.water_enthalpy(t)),
    }[water]
    w = saturated(t, p)
    assume(w <= LARGEST_W)
    h = ma.enthalpy(t, w, p) - w * drained
    assert abs(float(ma.saturated_from_enthalpy(h, p, drained)) - t) <= EXACT


@quick
@given(st.floats(-45.0, 45.0), st.floats(0.0, 20.0), pressures)
@example(0.0099, 0.0, 101_325.0)
@example(0.02, 8.0, 101_325.0)
def test_wet_bulb_undoes_its_definition(wet_bulb: float, above: float, p: float) -> None:
    """Air made by drying saturated air backwards along its adiabat, so the wet bulb is known beforehand.

    Over ice the answer may be the one over liquid water instead, where there is one.
    """
    assume(not on_the_edge(wet_bulb))
    w_s, water = saturated(wet_bulb, p), float(ma.water_enthalpy(wet_bulb))
    h_s = float(ma.enthalpy(wet_bulb, w_s, p))
    # one kelvin of air takes 0.4 g/kg of evaporation at most
    w = max(0.0, w_s - 4e-4 * above)
    assume(w <= LARGEST_W)
    h = h_s - (w_s - w) * water
    found = float(ma.adiabatic_saturation_temperature(h, w, p))
    if wet_bulb < TRIPLE_POINT <= found:
        again = saturated(found, p)
        balance = h + (again - w) * float(ma.water_enthalpy(found)) - float(ma.enthalpy(found, again, p))
        assert abs(balance) <= 2e-6
    else:
        assert abs(found - wet_bulb) <= EXACT


@quick
@given(temperatures, fractions, pressures)
@example(-0.5, 0.999, 101_325.0)
@example(3.0, 0.5, 101_325.0)
def test_dew_point_below_wet_bulb_below_dry_bulb(t: float, fraction: float, p: float) -> None:
    w = moist(t, fraction, p)
    dew_point, wet_bulb = float(ma.dew_point(w, p)), float(ma.wet_bulb(t, w, p))
    assert dew_point <= wet_bulb + EXACT
    assert wet_bulb <= t + EXACT


@quick
@given(saturation_temperatures, st.floats(1e-3, 5.0), pressures)
def test_saturation_rises_with_temperature(t: float, step: float, p: float) -> None:
    assume(t + step <= 70.0)
    assert saturated(t + step, p) > saturated(t, p)
    assert ma.saturation_pressure(t + step) > ma.saturation_pressure(t)


@quick
@given(temperatures, fractions, st.floats(0.01, 5.0), pressures)
def test_enthalpy_volume_and_wet_bulb_rise_with_temperature(
    t: float, fraction: float, step: float, p: float
) -> None:
    assume(t + step <= 65.0)
    w = moist(t, fraction, p)
    assert ma.enthalpy(t + step, w, p) > ma.enthalpy(t, w, p)
    assert ma.specific_volume(t + step, w, p) > ma.specific_volume(t, w, p)
    wet_bulbs = ma.wet_bulb(np.array([t, t + step]), w, p)
    assert wet_bulbs[1] > wet_bulbs[0]


@quick
@given(temperatures, fractions, st.floats(1e-5, 1e-2), pressures)
def test_enthalpy_volume_and_dew_point_rise_with_humidity(
    t: float, fraction: float, more: float, p: float
) -> None:
    w = moist(t, fraction, p)
    assume(w + more <= LARGEST_W)
    assert ma.enthalpy(t, w + more, p) > ma.enthalpy(t, w, p)
    assert ma.specific_volume(t, w + more, p) > ma.specific_volume(t, w, p)
    assert ma.dew_point(w + more, p) > ma.dew_point(w, p)
    assert ma.vapour_pressure(w + more, p) > ma.vapour_pressure(w, p)


@quick
@given(temperatures, pressures)
def test_less_pressure_holds_more_water(t: float, p: float) -> None:
    assume(p >= 60e3)
    assert saturated(t, p - 5e3) > saturated(t, p)
    assert ma.enhancement_factor(t, p) >= 1.0


@quick
@given(temperatures, fractions, pressures)
def test_relative_humidity_and_vapour_pressure_are_undone(t: float, rh: float, p: float) -> None:
    w = ma.humidity_ratio_from_relative_humidity(t, rh, p)
    assert ma.relative_humidity(t, w, p) == pytest.approx(rh, rel=1e-12, abs=1e-15)
    e = ma.vapour_pressure(w, p)
    assert ma.humidity_ratio_from_vapour_pressure(e, p) == pytest.approx(float(w), rel=1e-12, abs=1e-15)


@quick
@given(temperatures)
def test_water_is_ice_below_the_triple_point(t: float) -> None:
    expected = ma.ice_enthalpy(t) if t < TRIPLE_POINT else ma.liquid_water_enthalpy(t)
    assert ma.water_enthalpy(t) == expected


@pytest.mark.parametrize("p", [55e3, 80e3, 101_325.0, 108e3])
def test_ice_and_water_meet_at_the_triple_point(p: float) -> None:
    """No step in saturation, so that the dew point has one answer everywhere."""
    below, at = saturated(float(np.nextafter(TRIPLE_POINT, -1.0)), p), saturated(TRIPLE_POINT, p)
    assert below == pytest.approx(at, rel=1e-12)
    assert float(ma.dew_point(below, p)) == pytest.approx(TRIPLE_POINT, abs=EXACT)


# Fog. A supersaturated mixture of two states settles on the saturation curve and drains the excess.


def settles(h: float, w: float, p: float) -> tuple[float, float]:
    """Temperature and humidity ratio where the state of this enthalpy and total water settles."""
    t = float(ma.adiabatic_saturation_temperature(h, w, p))
    return t, saturated(t, p)


def fog(t1: float, t2: float, share: float, p: float) -> tuple[float, float]:
    """Enthalpy and humidity ratio of a mixture of two saturated states."""
    w1, w2 = saturated(t1, p), saturated(t2, p)
    h1, h2 = float(ma.enthalpy(t1, w1, p)), float(ma.enthalpy(t2, w2, p))
    return share * h1 + (1.0 - share) * h2, share * w1 + (1.0 - share) * w2


def partly_frozen(h: float, w: float, p: float) -> bool:
    """Whether the excess would leave partly as ice and partly as water, both at the triple point."""
    at = saturated(TRIPLE_POINT, p)
    short = float(ma.enthalpy(TRIPLE_POINT, at, p)) - h
    return w > at and 0.0 < short < (w - at) * 334.0


@quick
@given(st.floats(-40.0, 50.0), st.floats(-40.0, 50.0), fractions, pressures)
@example(-10.0, 20.0, 0.5, 101_325.0)
@example(-20.0, 5.0, 0.7, 80e3)
@example(0.0, 0.02, 0.5, 101_325.0)
def test_fog_settles_saturated_and_balances(t1: float, t2: float, share: float, p: float) -> None:
    """Enthalpy before is enthalpy after and that of the water drained, to what 1e-6 K is worth.

    A mixture of states on either side of 0 degC can miss saturation by a hair, because the curve over ice
    is the steeper one there; it then takes water up, and the balance holds all the same.
    """
    h, w = fog(t1, t2, share, p)
    assume(max(saturated(t1, p), saturated(t2, p)) <= LARGEST_W)
    assume(not partly_frozen(h, w, p))
    t, w_s = settles(h, w, p)
    assume(not on_the_edge(t))
    drained = w - w_s
    supersaturated = w > saturated(float(ma.dry_bulb_from_enthalpy(h, w, p)), p) * (1.0 + 2e-4)
    assert drained > 0.0 or not supersaturated
    balance = h - drained * float(ma.water_enthalpy(t)) - float(ma.enthalpy(t, w_s, p))
    # saturated air takes 2 kJ/(kg K) at 0 degC and 20 at 60 degC
    assert abs(balance) <= 2e-5
    assert min(t1, t2) - EXACT <= t <= max(t1, t2) + EXACT


@pytest.mark.parametrize("excess", [1e-4, 1e-3, 3e-3])
@pytest.mark.parametrize("frozen", [0.1, 0.5, 0.9])
def test_partly_frozen_fog_settles_at_the_triple_point(excess: float, frozen: float) -> None:
    """Between draining water and draining ice lies the heat of melting, at one temperature."""
    p = 101_325.0
    w = saturated(TRIPLE_POINT, p)
    h = float(ma.enthalpy(TRIPLE_POINT, w, p)) + frozen * excess * float(ma.ice_enthalpy(TRIPLE_POINT))
    t, _ = settles(h, w + excess, p)
    assert abs(t - TRIPLE_POINT) <= EXACT


# Batches and shapes. Each entry: a function and how many of (t or h, w, p) it takes, by example.

Arguments = tuple[Array, ...]


def _mixed(length: int) -> tuple[Array, Array, Array, Array]:
    """Temperatures, humidity ratios, pressures and enthalpies on both sides of 0 degC, always the same."""
    rng = np.random.default_rng(20240607)
    t = rng.uniform(-40.0, 45.0, length)
    t[: length // 4] = rng.uniform(-0.5, 0.5, length // 4)
    p = rng.uniform(60e3, 106e3, length)
    w = ma.saturation_humidity_ratio(t, p) * rng.uniform(0.0, 1.0, length)
    w[0] = 0.0
    return t, w, p, ma.enthalpy(t, w, p)


T, W, P, H = _mixed(97)
E = ma.vapour_pressure(W, P)

FUNCTIONS: list[tuple[Callable[..., Array], Arguments]] = [
    (ma.adiabatic_saturation_temperature, (H, W, P)),
    (ma.dew_point, (W, P)),
    (ma.dry_bulb_from_enthalpy, (H, W, P)),
    (ma.enhancement_factor, (T, P)),
    (ma.enthalpy, (T, W, P)),
    (ma.humidity_ratio_from_relative_humidity, (T, np.linspace(0.0, 1.0, T.size), P)),
    (ma.humidity_ratio_from_vapour_pressure, (E, P)),
    (ma.humidity_ratio_from_wet_bulb, (T, ma.wet_bulb(T, W, P), P)),
    (ma.ice_enthalpy, (T,)),
    (ma.liquid_water_enthalpy, (T,)),
    (ma.relative_humidity, (T, W, P)),
    (ma.saturated_from_enthalpy, (H, P)),
    (ma.saturated_from_enthalpy, (H, P, ma.water_enthalpy(T))),
    (ma.saturation_humidity_ratio, (T, P)),
    (ma.saturation_pressure, (T,)),
    (ma.specific_volume, (T, W, P)),
    (ma.standard_atmosphere, (np.linspace(-400.0, 4500.0, T.size),)),
    (ma.vapour_pressure, (W, P)),
    (ma.water_enthalpy, (T,)),
    (ma.wet_bulb, (T, W, P)),
]
each_function = pytest.mark.parametrize(
    ("function", "arguments"),
    FUNCTIONS,
    ids=[f"{function.__name__}-{len(arguments)}" for function, arguments in FUNCTIONS],
)


def same_bits(a: Array | float, b: Array | float) -> bool:
    """Equality of every bit, NaN included."""
    left, right = np.ascontiguousarray(a), np.ascontiguousarray(b)
    return left.shape == right.shape and left.tobytes() == right.tobytes()


def test_every_function_is_tried() -> None:
    tried = {function.__name__ for function, _ in FUNCTIONS}
    assert tried == set(ma.__all__) - {"Array", "ArrayLike", "Mixture"}


@each_function
def test_result_does_not_depend_on_the_batch(function: Callable[..., Array], arguments: Arguments) -> None:
    """Alone, as a float, in any company, order, length, leading axis or memory layout: the same bits."""
    whole = function(*arguments)
    length = whole.size
    assert same_bits(function(*(a.reshape(1, length) for a in arguments)), whole.reshape(1, length))
    for i in range(length):
        assert same_bits(function(*(a[i : i + 1] for a in arguments)), whole[i : i + 1])
        assert same_bits(function(*(float(a[i]) for a in arguments)), whole[i])
    for start, stop in ((0, 8), (3, 20), (5, 97), (41, 44)):
        assert same_bits(function(*(a[start:stop] for a in arguments)), whole[start:stop])
    assert same_bits(function(*(a[::-1] for a in arguments)), whole[::-1])
    assert same_bits(function(*(a[::3] for a in arguments)), whole[::3])
    # rows (96, 97) of a leading axis, C and Fortran order
    stacked = [np.stack([np.roll(a, k) for k in range(4)]) for a in arguments]
    expected = np.stack([np.roll(whole, k) for k in range(4)])
    assert same_bits(function(*stacked), expected)
    assert same_bits(function(*(np.asfortranarray(a) for a in stacked)), expected)


@each_function
def test_broadcasting(function: Callable[..., Array], arguments: Arguments) -> None:
    """Each argument in turn is a column against rows; the result has their common shape and the same bits."""
    for position in range(len(arguments)):
        mixed = [a[:5] for a in arguments]
        mixed[position] = arguments[position][:3, None]
        result = function(*mixed)
        full = np.broadcast_arrays(*mixed)
        assert result.shape == full[0].shape == ((3, 1) if len(arguments) == 1 else (3, 5))
        assert same_bits(result, function(*(np.ascontiguousarray(a) for a in full)))


@each_function
def test_nan_passes_through_quietly(function: Callable[..., Array], arguments: Arguments) -> None:
    """NaN in any argument gives NaN there, the same bits elsewhere, and no warning."""
    whole = function(*arguments)
    for position in range(len(arguments)):
        holed = [a.copy() for a in arguments]
        holed[position][10:12] = np.nan
        with warnings.catch_warnings():
            warnings.simplefilter("error")
            result = function(*holed)
            only = function(*(a[10:12] for a in holed))
        assert np.isnan(result[10:12]).all()
        assert np.isnan(only).all()
        assert same_bits(np.delete(result, [10, 11]), np.delete(whole, [10, 11]))


@each_function
def test_nan_alone_passes_through_quietly(function: Callable[..., Array], arguments: Arguments) -> None:
    """The same for plain floats."""
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        assert np.isnan(function(*(float("nan") for _ in arguments)))


@each_function
def test_arguments_are_left_alone(function: Callable[..., Array], arguments: Arguments) -> None:
    before = [a.copy() for a in arguments]
    function(*arguments)
    for a, b in zip(arguments, before, strict=True):
        assert same_bits(a, b)


@each_function
def test_nothing_in_nothing_out(function: Callable[..., Array], arguments: Arguments) -> None:
    assert function(*(a[:0] for a in arguments)).shape == (0,)


def test_dry_air_has_no_dew_point() -> None:
    with warnings.catch_warnings():
        warnings.simplefilter("error")
        assert ma.dew_point(0.0, 101_325.0) == -np.inf
        found = ma.dew_point(np.array([0.0, 0.01]), 101_325.0)
    assert found[0] == -np.inf
    assert np.isfinite(found[1])


def test_far_outside_the_range_is_an_error_and_not_a_number() -> None:
    """An inverse that has not arrived says so."""
    with pytest.raises(ConvergenceError, match="dew point"):
        ma.dew_point(1e-12, 101_325.0)
    with pytest.raises(ConvergenceError, match="range"):
        ma.saturated_from_enthalpy(2000.0, 101_325.0)


@given(t=st.floats(-25.0, 60.0), rh=st.floats(0.02, 1.0), p=st.floats(60e3, 106e3))
def test_wet_bulb_gives_back_the_humidity_ratio(t: float, rh: float, p: float) -> None:
    """Except close below freezing, where one state has a wet bulb over water and another over ice."""
    w = ma.humidity_ratio_from_relative_humidity(t, rh, p)
    t_wb = ma.wet_bulb(t, w, p)
    assert ma.humidity_ratio_from_wet_bulb(t, t_wb, p) == pytest.approx(float(w), abs=1e-12)
