"""The summary of a weather year and its design conditions, on years whose answer can be counted."""

from __future__ import annotations

import numpy as np
import pytest
from behaviour import weather_files as wf

from estimator.errors import WeatherError
from estimator.weather import DESIGN_CONDITIONS, WeatherOptions, design_hour, read_weather, summarise


def made(tmp_path, dry_bulb, dew_point, pressure="97700"):
    rows = wf.epw_rows(wf.Year())
    for i, row in enumerate(rows):
        row[6], row[7], row[8], row[9] = f"{dry_bulb[i]:.2f}", f"{dew_point[i]:.2f}", "999", pressure
    path = tmp_path / "made.epw"
    path.write_bytes(wf.epw(rows))
    return read_weather(path, WeatherOptions(cache=False))


@pytest.fixture
def ramp(tmp_path):
    """8760 dry bulbs in steps of 0.004 K from -0.5 to 34.536 degC, in a mixed order; dew points 5 K below."""
    order = np.random.default_rng(7).permutation(8760)
    t = -0.5 + 0.004 * order
    return made(tmp_path, np.round(t, 3), np.round(t - 5.0, 3))


def test_extremes_counts_and_period(tmp_path):
    t = np.full(8760, 10.0)
    t[:10], t[10:30] = -5.0, 30.0
    dew = t - 2.0
    dew[100:150] = 9.5
    s = summarise(made(tmp_path, t, dew))
    assert (s.dry_bulb.least, s.dry_bulb.most) == (-5.0, 30.0)
    assert s.dry_bulb.mean == pytest.approx((8730 * 10 - 50 + 600) / 8760)
    assert s.hours_below_freezing == 10
    # 20 hours at 28 degC, 50 at 9.5, the rest at 8 or below, which is not above 8
    assert dict(s.hours_above_dew_point) == {
        8.0: 70, 10.0: 20, 12.0: 20, 14.0: 20, 16.0: 20, 18.0: 20, 20.0: 20, 22.0: 20, 24.0: 20
    }  # fmt: skip
    assert s.period == ("01-01 00:00", "12-31 23:00")
    assert (s.site, s.hours, s.calendar, s.source_years) == (wf.SITE, 8760, "typical", wf.YEARS)
    assert s.pressure == (97_700.0, 97_700.0, 97_700.0)


def test_completeness_is_the_share_of_hours_as_read(tmp_path):
    t = wf.Year().dry_bulb.copy()
    t[50:53] = 99.9
    s = summarise(made(tmp_path, t, wf.Year().dew_point))
    assert s.completeness == pytest.approx(1 - 3 / 8760)


def test_design_values_are_exceeded_in_their_share_of_the_hours(ramp):
    # steps of 0.004 K, written with two decimals: 0.01 K
    for condition, hours in zip(summarise(ramp).design, (35, 87, 175) * 2, strict=True):
        values = ramp.dry_bulb if condition.kind == "dry bulb" else ramp.dew_point
        value = condition.dry_bulb if condition.kind == "dry bulb" else condition.dew_point
        top = 34.536 if condition.kind == "dry bulb" else 29.536
        assert value == pytest.approx(top - 0.004 * 8759 * condition.frequency / 100, abs=0.011)
        assert (values > value).sum() == pytest.approx(hours, abs=4)


def test_coincident_values_are_means_of_the_bin(ramp):
    for condition in summarise(ramp).design:
        # 1 K holds 250 steps of 0.004 K, the dew point is 5 K below in each of those hours, and a bin
        # that reaches beyond the hottest hour is only partly filled
        high = 34.536 - (0 if condition.kind == "dry bulb" else 5)
        value = condition.dry_bulb if condition.kind == "dry bulb" else condition.dew_point
        filled = 0.5 + min(0.5, high - value)
        assert condition.hours == pytest.approx(250 * filled, abs=5)
        middle = value + (filled - 1.0) / 2
        other = condition.dew_point + 5 if condition.kind == "dry bulb" else condition.dry_bulb - 5
        assert other == pytest.approx(middle, abs=0.02)


def test_a_bin_without_neighbours_takes_the_nearest_hours(tmp_path):
    t = np.full(8760, 10.0)
    t[:35] = 30.0  # the 0.4 % value lies between 10 and 30 degC
    t[0] = 34.0
    s = summarise(made(tmp_path, t, t - 3.0))
    assert all(c.hours >= 1 for c in s.design)
    assert all(np.isfinite([c.dry_bulb, c.dew_point, c.humidity_ratio, c.pressure]).all() for c in s.design)


@pytest.mark.parametrize("name", DESIGN_CONDITIONS)
def test_a_design_hour_is_the_condition_of_that_name(ramp, name):
    (condition,) = [c for c in summarise(ramp).design if c.name == name]
    hour = design_hour(ramp, name)
    assert hour.dry_bulb == condition.dry_bulb
    assert hour.humidity_ratio == condition.humidity_ratio
    assert hour.pressure == condition.pressure == pytest.approx(97_700.0)
    assert name.split(" ")[0] in hour.description
    # ideal gas, Bolton's vapour pressure, enhancement factor 1.004; the mean over 1 K is 0.1 % above
    e = 1.004 * 100 * float(wf.magnus(np.asarray(condition.dew_point)))
    assert hour.humidity_ratio == pytest.approx(0.62198 * e / (97_700 - e), rel=0.005)


@pytest.mark.parametrize("name", ["dew point 0.4 %", "Dew-point 0.4%", "dewpoint 0.4", " DEW POINT 0.40 % "])
def test_spellings_of_a_design_condition(ramp, name):
    assert design_hour(ramp, name) == design_hour(ramp, "dew point 0.4 %")


@pytest.mark.parametrize(
    "name", ["", "wet bulb 1 %", "dew point", "dew point 5 %", "dry bulb -1 %", "07-14 15:00"]
)
def test_an_unknown_design_condition_names_the_known_ones(ramp, name):
    with pytest.raises(WeatherError) as caught:
        design_hour(ramp, name)
    for known in DESIGN_CONDITIONS:
        assert known in str(caught.value)
