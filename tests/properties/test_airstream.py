"""Properties of the airstream that hold whatever the air, the setpoints and the altitude."""

from __future__ import annotations

import itertools
from functools import partial

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from support import BASE, FAN, hours, scheme, states, varied_year, weather_year

from estimator import moist_air
from estimator.airstream.coil import apparatus_dew_point
from estimator.airstream.heat import ReheatDevice
from estimator.airstream.state import State, Step, Streams
from estimator.errors import BalanceError
from estimator.scheme import stack
from estimator.totals import sum_year
from estimator.year import run_hours, run_year, variant

SETTINGS = st.fixed_dictionaries(
    {
        "coil__bypass_factor": st.floats(0.0, 0.5),
        "supply__dew_point": st.floats(-8.0, 18.0).map("{} degC".format),
        "supply__dry_bulb": st.one_of(
            st.floats(8.0, 30.0).map("{} degC".format),
            st.tuples(st.floats(8.0, 18.0), st.floats(18.0, 30.0)).map(
                lambda b: f'{{low = "{b[0]} degC", high = "{b[1]} degC"}}'
            ),
        ),
        "coil__least_surface_temperature": st.floats(-15.0, 8.0).map("{} degC".format),
    },
    optional={
        "coil__capacity": st.floats(1.0, 300.0).map("{} kW".format),
        "coil__lockout_below": st.floats(-5.0, 20.0).map("{} degC".format),
        "reheat__electric__capacity": st.floats(0.5, 50.0).map("{} kW".format),
    },
)
TEXTS = st.sampled_from([BASE, BASE + FAN, BASE + FAN + 'position = "blow-through"\n'])


def each_state(year):
    for name, state in year.airstream.points.items():
        shape = year.coil_cooling.shape
        yield (
            name,
            np.broadcast_to(state.dry_bulb, shape),
            np.broadcast_to(state.humidity_ratio, shape),
            np.broadcast_to(state.pressure, shape),
        )


@given(SETTINGS, TEXTS, st.integers(0, 10_000))
@settings(max_examples=60, deadline=None)
def test_no_state_is_supersaturated_and_every_number_is_finite(chosen, text, seed):
    year = run_hours(scheme(text, **chosen), hours(*states(seed)))
    for name, t, w, p in each_state(year):
        assert np.isfinite(t + w).all(), name
        assert (t >= moist_air.dew_point(w, p) - 1e-6).all(), name
    for power in (year.coil_cooling, year.coil_latent, year.reheat, year.outdoor_air_heating):
        assert np.isfinite(power).all()


@given(SETTINGS, TEXTS, st.integers(0, 10_000))
@settings(max_examples=40, deadline=None)
def test_heat_and_water_balance_and_nothing_runs_backwards(chosen, text, seed):
    year = run_hours(scheme(text, **chosen), hours(*states(seed)))
    assert year.heat_residual.max() <= 1e-9
    assert year.water_residual.max() <= 1e-9
    throughput = year.mass_flow * 100.0
    for power in (year.coil_cooling, year.coil_sensible, year.condensate, year.reheat, year.cooling_undone):
        assert (power >= -1e-12 * throughput).all()
    assert (year.coil_latent[year.drying] > 0.0).all()
    np.testing.assert_array_max_ulp(year.coil_sensible + year.coil_latent, year.coil_cooling, 2)
    assert not ((year.reheat > 0.0) & ~year.drying).any()
    assert not ((year.outdoor_air_heating > 0.0) & year.cooling).any()


@given(SETTINGS, TEXTS, st.integers(0, 10_000))
@settings(max_examples=40, deadline=None)
def test_a_supply_that_is_not_marked_unmet_is_on_target(chosen, text, seed):
    one = scheme(text, **chosen)
    year = run_hours(one, hours(*states(seed)))
    wanted, supply = year.airstream.request, year.supply
    met = ~(year.unmet["dew_point"] | year.unmet["warm"] | year.unmet["cold"])
    dew_point = moist_air.dew_point(supply.humidity_ratio, np.broadcast_to(supply.pressure, met.shape))
    assert (dew_point[met] <= wanted.dew_point + 0.1 + 1e-6).all()
    assert (supply.dry_bulb[met] <= wanted.high + 0.1 + 1e-6).all()
    assert (supply.dry_bulb[met] >= wanted.low - 0.1 - 1e-6).all()


@given(st.floats(0.0, 0.5), st.integers(0, 10_000))
@settings(max_examples=40, deadline=None)
def test_a_wet_coil_is_a_mixture_of_entering_air_and_saturated_surface_air(bypass, seed):
    """The mixing rule read backwards: surface from the leaving state, then mixed again by hand."""
    year = run_hours(scheme(coil__bypass_factor=str(bypass)), hours(*states(seed)))
    before, after = year.airstream.points["outdoor"], year.airstream.points["after coil"]
    wet = year.drying
    surface = apparatus_dew_point(before, after, bypass)[wet]
    p = before.pressure[wet]
    w_s = moist_air.saturation_humidity_ratio(surface, p)
    w = bypass * before.humidity_ratio[wet] + (1 - bypass) * w_s
    h = bypass * before.enthalpy[wet] + (1 - bypass) * moist_air.enthalpy(surface, w_s, p)
    drained = w - after.humidity_ratio[wet]
    h_w = moist_air.water_enthalpy(after.dry_bulb[wet])
    assert (drained >= -1e-10).all()
    np.testing.assert_allclose(h - drained * h_w, after.enthalpy[wet], atol=2e-6)
    saturated = moist_air.saturation_humidity_ratio(after.dry_bulb[wet], p)
    foggy = drained > 1e-9
    np.testing.assert_allclose(after.humidity_ratio[wet][foggy], saturated[foggy], rtol=1e-7)


def test_where_no_apparatus_dew_point_exists_the_hour_is_unmet_with_finite_numbers():
    # half the air bypasses, so the surface would have to be drier than dry: 0.5 x 20 g/kg > 6 g/kg
    year = run_hours(
        scheme(coil__bypass_factor="0.5", supply__dew_point="6 degC"), hours([32.0], [0.020], [1e5])
    )
    assert year.unmet["dew_point"].all()
    assert year.coil_flags["at least surface temperature"].all()
    assert year.apparatus_dew_point() == pytest.approx([1.0], abs=1e-6)
    assert np.isfinite(year.supply.dry_bulb).all()


def test_an_apparatus_dew_point_below_the_least_surface_temperature_is_held_and_unmet():
    year = run_hours(scheme(supply__dew_point="-3 degC"), hours([25.0], [0.012], [1e5]))
    assert year.unmet["dew_point"].all()
    assert year.apparatus_dew_point() == pytest.approx([1.0], abs=1e-6)


def test_a_surface_allowed_below_freezing_makes_frost_that_leaves_as_ice():
    one = scheme(
        supply__dew_point="-5 degC", coil__least_surface_temperature="-10 degC", coil__bypass_factor="0"
    )
    year = run_hours(one, hours([15.0], [0.008], [1e5]))
    assert year.frozen.all()
    assert not year.unmet["dew_point"].any()
    before, after = year.airstream.points["outdoor"], year.airstream.points["after coil"]
    water = before.humidity_ratio - after.humidity_ratio
    # ice at -5 degC: -333.4 - 5 x 2.1 = -343.9 kJ/kg (handbook value of 2.1 kJ/(kg K), from memory)
    by_hand = 2.4 * (before.enthalpy - after.enthalpy + water * 343.9)
    np.testing.assert_allclose(year.coil_cooling, by_hand, rtol=1e-4)


def test_a_capacity_limit_lets_dew_point_and_dry_bulb_rise_together():
    t, w, p = [33.0], [0.018], [1e5]
    free = run_hours(scheme(), hours(t, w, p))
    full = float(free.coil_cooling[0])
    dew_points, dry_bulbs = [], []
    for share in (0.9, 0.7, 0.5, 0.3, 0.1):
        year = run_hours(scheme(coil__capacity=f"{share * full} kW"), hours(t, w, p))
        assert year.coil_cooling == pytest.approx([share * full], rel=1e-9)
        after = year.airstream.points["after coil"]
        dew_points.append(float(moist_air.dew_point(after.humidity_ratio, p)[0]))
        dry_bulbs.append(float(after.dry_bulb[0]))
        # reheat follows from the actual leaving state
        assert year.supply.dry_bulb[0] == pytest.approx(max(20.0, dry_bulbs[-1]), abs=1e-9)
    assert dew_points == sorted(dew_points)
    assert dry_bulbs == sorted(dry_bulbs)
    assert dew_points[0] > 11.0


def test_a_capacity_too_small_to_wet_the_coil_cools_it_dry():
    year = run_hours(scheme(coil__capacity="2 kW"), hours([33.0], [0.018], [1e5]))
    assert year.coil_cooling == pytest.approx([2.0], rel=1e-9)
    assert not year.drying.any()


def test_deeper_dew_points_never_condense_less():
    air = hours(*states(7, 2000))
    water = [run_hours(scheme(supply__dew_point=f"{d} degC"), air).condensate for d in (14, 12, 10, 8, 6, 4)]
    for shallow, deep in itertools.pairwise(water):
        assert (deep >= shallow - 1e-9).all()


def test_bypass_of_zero_leaves_saturated_air_at_the_dew_point():
    year = run_hours(scheme(coil__bypass_factor="0", supply__dry_bulb="25 degC"), hours(*states(3, 2000)))
    after = year.airstream.points["after coil"]
    np.testing.assert_allclose(after.dry_bulb[year.drying], 11.0, atol=1e-6)


def test_a_vanishing_bypass_meets_the_saturated_case():
    air = hours(*states(4, 1000))
    none = run_hours(scheme(coil__bypass_factor="0"), air)
    little = run_hours(scheme(coil__bypass_factor="1e-9"), air)
    np.testing.assert_allclose(little.coil_cooling, none.coil_cooling, rtol=1e-6, atol=1e-6)


@given(st.floats(0.0, 0.5), st.floats(2.0, 16.0), st.integers(0, 10_000))
@settings(max_examples=60, deadline=None)
def test_a_humidity_controlled_coil_never_leaves_below_the_dew_point_asked_for(bypass, dew_point, seed):
    # no air here is above 50 degC, so the dry bulb never governs
    band = '{ low = "8 degC", high = "50 degC" }'
    one = scheme(coil__bypass_factor=bypass, supply__dew_point=f"{dew_point} degC", supply__dry_bulb=band)
    year = run_hours(one, hours(*states(seed)))
    asked = year.airstream.request.humidity_ratio
    assert (year.airstream.points["after coil"].humidity_ratio[year.drying] >= asked[year.drying]).all()


def test_saturated_air_whose_fog_drains_reaches_a_dew_point_that_its_mixture_cannot():
    """Saturated at 30 degC with a tenth bypassed: the mixture stays above the humidity of 7 degC.

    0.1 x 27.3 g/kg + 0.9 x 4.1 g/kg (a surface of 1 degC) = 6.4 g/kg, above the 6.2 g/kg of 7 degC.
    """
    w = moist_air.saturation_humidity_ratio(30.0, 101_325.0)
    one = scheme(coil__bypass_factor=0.1, supply__dew_point="7 degC")
    year = run_hours(one, hours([30.0], [float(w)], [101_325.0]))
    after = year.airstream.points["after coil"]
    assert after.dry_bulb == pytest.approx([7.0], abs=1e-9)
    assert not year.unmet["dew_point"].any()
    assert not year.coil_flags["at least surface temperature"].any()
    surface = year.apparatus_dew_point()[0]
    assert surface > 1.0
    assert surface < 7.0


def test_what_root_finding_leaves_over_is_no_reheat():
    for text in (BASE, BASE + FAN):
        one = scheme(text, coil__bypass_factor=0.1, supply__dew_point="12.9 degC", supply__dry_bulb="13 degC")
        year = run_hours(one, hours(*states(5, 4000)))
        assert year.drying.sum() > 500
        assert (year.reheat[year.reheat > 0.0] > 1e-6 * year.mass_flow[0]).all()
        warm = year.drying & (year.airstream.points["after coil"].dry_bulb > 13.0 - 1e-9)
        assert (year.reheat[warm] == 0.0).all()
    saturated = scheme(coil__bypass_factor=0, supply__dew_point="13 degC", supply__dry_bulb="13 degC")
    assert not (run_hours(saturated, hours(*states(5, 4000))).reheat > 0.0).any()


def test_a_device_that_loses_water_or_heat_is_caught(monkeypatch):
    def leaky(entering, hours, request, *, part):
        step = original(entering, hours, request)
        air = step.leaving.supply
        lost = State.of(
            air.dry_bulb - 0.1 * (part == "heat"), air.humidity_ratio * (1 - 0.1 * (part == "water")), 1e5
        )
        return Step(Streams(lost), step.exchange)

    for part in ("water", "heat"):
        original = ReheatDevice(scheme().reheat[0])
        monkeypatch.setattr(
            "estimator.airstream.order.ReheatDevice", lambda source, part=part: partial(leaky, part=part)
        )
        with pytest.raises(BalanceError, match="does not balance"):
            run_hours(scheme(), hours([30.0], [0.016], [1e5]))


def test_a_constant_year_is_8760_times_one_hour():
    weather = weather_year(30.0, 22.0)
    year = sum_year(run_year(weather, scheme(BASE + FAN))).annual
    one = run_hours(scheme(BASE + FAN), hours([30.0], weather.humidity_ratio[:1], [101_325.0], 2 * 1.204))
    for total, power in (
        (year.coil_cooling_kwh, one.coil_cooling),
        (year.coil_latent_kwh, one.coil_latent),
        (year.reheat_kwh, one.reheat),
        (year.condensate_kg, one.condensate),
        (year.fan_kwh, one.fan_power),
        (year.cooling_undone_kwh, one.cooling_undone),
    ):
        assert total == pytest.approx(8760 * float(power[0]), rel=1e-12)


def test_half_the_flow_is_half_of_everything_extensive():
    weather = varied_year()
    whole = sum_year(run_year(weather, scheme(BASE + FAN))).annual
    half = sum_year(run_year(weather, scheme(BASE + FAN, airflow__outdoor_air="1 m3/s"))).annual
    for name in vars(whole):
        value = getattr(whole, name)
        if (
            not name.startswith("hours")
            and isinstance(value, float)
            and name != "moisture_removed_per_kwh_kg"
        ):
            assert getattr(half, name) == pytest.approx(value / 2, rel=1e-12, abs=1e-9), name
    assert half.hours_drying == whole.hours_drying


def test_a_schedule_fraction_of_one_half_is_half_the_flow():
    weather = varied_year()
    text = BASE + "[[airflow.schedule]]\nfraction = 0.5\n"
    scheduled = sum_year(run_year(weather, scheme(text))).annual
    half = sum_year(run_year(weather, scheme(airflow__outdoor_air="1 m3/s"))).annual
    assert scheduled.coil_cooling_kwh == pytest.approx(half.coil_cooling_kwh, rel=1e-12)


def test_hours_without_flow_are_off_and_do_nothing():
    text = BASE + FAN + '[[airflow.schedule]]\nhours = "07:00..19:00"\n'
    year = run_year(varied_year(), scheme(text))
    off = ~year.hours.running
    assert off.sum() == 365 * 12
    for power in (year.coil_cooling, year.reheat, year.outdoor_air_heating, year.fan_power, year.condensate):
        assert (power[off] == 0.0).all()
    assert (year.mode[off] == 0).all()
    assert not year.unmet["cold"][off].any()


def test_the_actual_basis_moves_the_volume_and_the_standard_basis_the_mass():
    weather = varied_year()
    actual = run_year(weather, scheme(airflow__basis="actual"))
    volume = actual.mass_flow * moist_air.specific_volume(
        weather.dry_bulb, weather.humidity_ratio, weather.pressure
    )
    np.testing.assert_allclose(volume, 2.0, rtol=1e-12)
    np.testing.assert_array_equal(run_year(weather, scheme()).mass_flow, 2.0 * 1.204)


def test_a_lockout_shows_its_unmet_hours():
    weather = varied_year()
    locked = sum_year(run_year(weather, scheme(coil__lockout_below="18 degC"))).annual
    free = sum_year(run_year(weather, scheme())).annual
    assert free.hours_unmet_dew_point == 0
    assert locked.hours_unmet_dew_point > 0
    assert locked.hours_drying < free.hours_drying


def test_sources_of_heat_are_used_in_order_and_what_none_supplies_is_unmet():
    text = BASE.replace(
        '[[reheat]]\nsource = "electric"\n',
        '[[reheat]]\nsource = "boiler"\ncapacity = "5 kW"\n'
        '[[reheat]]\nsource = "electric"\ncapacity = "3 kW"\n',
    )
    year = run_hours(scheme(text), hours([15.0, 19.0, 5.0], [0.0105, 0.012, 0.004], 1e5))
    boiler, electric = (year.exchange(f"reheat.{n}").heat for n in ("boiler", "electric"))
    needed = run_hours(scheme(), hours([15.0, 19.0, 5.0], [0.0105, 0.012, 0.004], 1e5)).active_heat
    np.testing.assert_allclose(boiler, np.minimum(needed, 5.0))
    np.testing.assert_allclose(electric, np.minimum(needed - boiler, 3.0), atol=1e-9)
    np.testing.assert_array_equal(year.unmet["cold"], needed > 8.0)


def test_cooling_undone_is_split_by_what_supplied_it_and_stops_at_the_outdoor_dry_bulb():
    year = run_hours(scheme(BASE + FAN), hours([16.0, 35.0], [0.011, 0.02], 1e5))
    after, supply = year.airstream.points["after coil"], year.supply
    # a damp hour of 16 degC: only the way from the coil back up to 16 degC undoes cooling
    top = np.minimum([16.0, 35.0], supply.dry_bulb)
    by_hand = 2.4 * (moist_air.enthalpy(top, after.humidity_ratio, 1e5) - after.enthalpy)
    np.testing.assert_allclose(year.cooling_undone, by_hand, rtol=1e-12)
    parts = year.cooling_undone_by
    np.testing.assert_allclose(parts["fan"], year.exchange("fan").heat, rtol=1e-12)
    np.testing.assert_allclose(parts["fan"] + parts["purchased"], by_hand, rtol=1e-12)


def test_a_draw_through_fan_lowers_reheat_and_a_blow_through_fan_adds_coil_load():
    air = hours([30.0], [0.016], [1e5])
    none, draw = run_hours(scheme(), air), run_hours(scheme(BASE + FAN), air)
    blow = run_hours(scheme(BASE + FAN, fan__position="blow-through"), air)
    heat = draw.exchange("fan").heat
    np.testing.assert_allclose(none.reheat - draw.reheat, heat, rtol=1e-9)
    np.testing.assert_allclose(draw.coil_cooling, none.coil_cooling, rtol=1e-12)
    assert blow.coil_cooling[0] > none.coil_cooling[0] + 0.9 * float(blow.exchange("fan").heat[0])


def test_a_draw_through_fan_makes_a_temperature_governed_coil_colder():
    air = hours([30.0], [0.006], [1e5])
    none, draw = run_hours(scheme(), air), run_hours(scheme(BASE + FAN), air)
    rise = draw.airstream.points["after fan"].dry_bulb - draw.airstream.points["after coil"].dry_bulb
    assert draw.supply.dry_bulb == pytest.approx([20.0], abs=1e-6)
    np.testing.assert_allclose(
        none.airstream.points["after coil"].dry_bulb - draw.airstream.points["after coil"].dry_bulb,
        rise,
        atol=1e-6,
    )


def test_preheat_protects_and_counts_as_outdoor_air_heating():
    text = BASE + '[preheat]\ndry_bulb = "5 degC"\nsource = "boiler"\n'
    year = run_hours(scheme(text), hours([-10.0, 2.0, 8.0], [0.001, 0.003, 0.004], 1e5))
    np.testing.assert_allclose(year.airstream.points["preheated"].dry_bulb, [5.0, 5.0, 8.0], atol=1e-9)
    plain = run_hours(scheme(), hours([-10.0, 2.0, 8.0], [0.001, 0.003, 0.004], 1e5))
    np.testing.assert_allclose(year.outdoor_air_heating, plain.outdoor_air_heating, rtol=1e-9)


def test_stacked_variants_give_each_variant_its_own_figures_to_the_last_bit():
    weather = varied_year()
    variants = [
        scheme(
            BASE + FAN,
            coil__bypass_factor=str(bf),
            supply__dew_point=f"{d} degC",
            supply__dry_bulb=f"{t} degC",
            coil__capacity=f"{c} kW",
            fan__total_pressure=f"{f} Pa",
        )
        for bf, d, t, c, f in ((0.0, 11, 20, 90, 700), (0.1, 8, 18, 60, 900), (0.05, 13, 14, 300, 1200))
    ]
    together = run_year(weather, stack(variants))
    for i, one in enumerate(variants):
        assert sum_year(variant(together, i, one)) == sum_year(run_year(weather, one))


@pytest.mark.parametrize(
    "setting",
    [
        {"fan__total_pressure": ("700 Pa", "1200 Pa")},
        {"reheat__electric__capacity": ("5 kW", "50 kW")},
        {"airflow__outdoor_air": ("1 m3/s", "3 m3/s")},
        {"airflow__standard_density": ("1.2 kg/m3", "1.204 kg/m3")},
        {"supply__dry_bulb__low": ("16 degC", "18 degC")},
        {"coil__lockout_below": ("5 degC", "15 degC")},
        {"plant__cooling_cop": ("3", "4")},
    ],
    ids=lambda setting: next(iter(setting)),
)
@pytest.mark.parametrize("position", ["draw-through", "blow-through"])
def test_variants_may_differ_in_any_one_number(setting, position):
    weather = varied_year()
    ((key, values),) = setting.items()
    base = {"reheat__electric__capacity": "9 kW", "coil__lockout_below": "8 degC", "fan__position": position}
    variants = [scheme(BASE + FAN, **(base | {key: value})) for value in values]
    together = run_year(weather, stack(variants))
    for i, one in enumerate(variants):
        assert sum_year(variant(together, i, one)) == sum_year(run_year(weather, one))


def test_an_hour_gives_the_same_figures_whatever_else_is_in_the_batch():
    t, w, p = states(11, 500)
    one = scheme(BASE + FAN, coil__capacity="70 kW")
    all_ = run_hours(one, hours(t, w, p))
    for i in (0, 17, 255, 499):
        alone = run_hours(one, hours(t[i : i + 1], w[i : i + 1], p[i : i + 1]))
        assert alone.coil_cooling[0] == all_.coil_cooling[i]
        assert alone.reheat[0] == all_.reheat[i]


def test_setpoints_follow_month_and_outdoor_air():
    one = scheme(
        supply__dew_point='{ outdoor = ["10 degC", "30 degC"], value = ["14 degC", "10 degC"] }',
        supply__dry_bulb="{ by_month = [" + ", ".join(f'"{20 + m % 2} degC"' for m in range(12)) + "] }",
    )
    wanted = run_hours(one, hours([5.0, 20.0, 40.0], 0.006, 1e5)).airstream.request
    np.testing.assert_allclose(wanted.dew_point, [14.0, 12.0, 10.0])
    # the test's hours are in July, the seventh value of the list
    np.testing.assert_allclose(wanted.low, 20.0)


def test_leap_years_stay_whole():
    weather = varied_year(days=366)
    sums = sum_year(run_year(weather, scheme()))
    assert sums.annual.hours_operating == 8784
    assert sums.months[1].hours_operating == 29 * 24


def test_months_and_seasons_add_up_to_the_year():
    sums = sum_year(run_year(varied_year(), scheme(BASE + FAN)))
    for parts in (sums.months, list(sums.seasons.values())):
        for name in ("coil_cooling_kwh", "reheat_kwh", "condensate_kg", "electricity_kwh"):
            total = sum(getattr(part, name) for part in parts)
            assert total == pytest.approx(getattr(sums.annual, name), rel=1e-13)
        for name in ("hours_drying", "hours_unmet", "hours_operating"):
            assert sum(getattr(part, name) for part in parts) == getattr(sums.annual, name)
    assert sum(sums.annual.hours_by_mode.values()) == 8760


def test_the_last_hour_of_december_belongs_to_december():
    t = np.full(8760, 15.0)
    t[-1] = 30.0
    sums = sum_year(run_year(weather_year(t, np.minimum(t, 10.0)), scheme(supply__dry_bulb="20 degC")))
    assert sums.months[11].peaks.coil_cooling_at == "12-31 23:00"
    assert sums.annual.peaks.coil_cooling_at == "12-31 23:00"


@pytest.mark.parametrize(
    ("latitude", "names"),
    [
        (45.0, ["winter", "spring", "summer", "autumn"]),
        (-33.0, ["summer", "autumn", "winter", "spring"]),
        (5.0, ["quarter 1", "quarter 2", "quarter 3", "quarter 4"]),
        (None, ["quarter 1", "quarter 2", "quarter 3", "quarter 4"]),
    ],
)
def test_seasons_are_named_by_hemisphere(latitude, names):
    sums = sum_year(run_year(weather_year(15.0, 10.0, latitude=latitude), scheme()))
    assert list(sums.seasons) == names
    if latitude is not None and abs(latitude) > 10:
        assert sums.season_months[names[0]] == (12, 1, 2)
