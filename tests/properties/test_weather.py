"""What holds for every weather file: a year that makes sense, or a clear refusal, and nothing else."""

from __future__ import annotations

import random
from functools import lru_cache
from pathlib import Path
from tempfile import TemporaryDirectory

import numpy as np
import pytest
from behaviour import weather_files as wf
from hypothesis import HealthCheck, given, settings
from hypothesis import strategies as st

from estimator import moist_air
from estimator.errors import WeatherError
from estimator.weather import WeatherOptions, WeatherYear, read_weather, summarise
from estimator.weather.humidity import dew_point_from_relative_humidity, relative_humidity_from_dew_point
from estimator.weather.repair import Log, fill_gaps
from estimator.weather.sun import hours_ahead

FEW = settings(max_examples=25, deadline=None, suppress_health_check=list(HealthCheck))
MANY = settings(max_examples=100, deadline=None)


@lru_cache(maxsize=3)
def plain(format_: str) -> bytes:
    if format_ == "EPW":
        return wf.epw()
    return wf.text(wf.tmy3() if format_ == "TMY3" else wf.tmy2())


def read(data: bytes, **options) -> WeatherYear:
    with TemporaryDirectory() as folder:
        path = Path(folder) / "made"
        path.write_bytes(data)
        return read_weather(path, WeatherOptions(cache=False, **options))


def assert_sound(year: WeatherYear) -> None:
    """What every year that is not refused promises."""
    assert year.hours in (8760, 8784)
    for name in ("dry_bulb", "dew_point", "pressure", "humidity_ratio"):
        values = getattr(year, name)
        assert values.shape == (year.hours,)
        assert np.isfinite(values).all()
    assert (year.dew_point <= year.dry_bulb).all()
    assert (year.humidity_ratio > 0).all()
    assert year.repaired is not None
    assert all(r.count > 0 and r.where for r in year.repairs)
    counted = np.diff(year.month) % 12
    assert counted.sum() == 11
    assert 0 <= summarise(year).completeness <= 1


@FEW
@given(st.data())
def test_any_damage_gives_a_sound_year_or_a_weather_error(data):
    """Bytes overwritten, lines dropped, doubled, swapped or cut at random places."""
    format_ = data.draw(st.sampled_from(["EPW", "TMY3", "TMY2"]))
    text = bytearray(plain(format_))
    kind = data.draw(st.sampled_from(["bytes", "drop", "double", "swap", "cut"]))
    if kind == "bytes":
        for _ in range(data.draw(st.integers(1, 4))):
            at = data.draw(st.integers(0, len(text) - 1))
            text[at] = data.draw(st.sampled_from(b'0123456789,-. \n"ae\xff\x00/:'))
        made = bytes(text)
    elif kind == "cut":
        made = bytes(text[: data.draw(st.integers(0, len(text)))])
    else:
        lines = bytes(text).splitlines(keepends=True)
        a, b = (data.draw(st.integers(0, len(lines) - 1)) for _ in range(2))
        if kind == "drop":
            del lines[a]
        elif kind == "double":
            lines.insert(b, lines[a])
        else:
            lines[a], lines[b] = lines[b], lines[a]
        made = b"".join(lines)
    try:
        year = read(made)
    except WeatherError:
        return
    assert_sound(year)


@FEW
@given(st.binary(max_size=400))
def test_any_bytes_give_a_weather_error(data):
    with pytest.raises(WeatherError):
        read(data)


@pytest.mark.parametrize("format_", ["EPW", "TMY3", "TMY2"])
def test_the_order_of_the_rows_does_not_matter(format_):
    head = {"EPW": 8, "TMY3": 2, "TMY2": 1}[format_]
    lines = plain(format_).splitlines(keepends=True)
    body = lines[head:]
    random.Random(11).shuffle(body)
    year = read(b"".join(lines[:head] + body))
    np.testing.assert_array_equal(year.dry_bulb, wf.Year().dry_bulb)
    assert year.repairs


@MANY
@given(st.lists(st.integers(0, 8759), max_size=30), st.integers(0, 6))
def test_filled_gaps_stay_between_their_neighbours_and_the_rest_is_untouched(where, longest):
    truth = wf.Year().dry_bulb
    values = truth.copy()
    values[where] = np.nan
    log = Log(str, np.zeros(8760, dtype=bool))
    try:
        filled = fill_gaps(values, "dry bulb", longest, log)
    except WeatherError:
        missing = np.isnan(np.concatenate((values, values[:10])))
        runs = np.convolve(missing, np.ones(longest + 1), "valid")
        assert (runs == longest + 1).any()
        return
    known = ~np.isnan(values)
    np.testing.assert_array_equal(filled[known], truth[known])
    assert np.isfinite(filled).all()
    assert filled.min() >= truth[known].min()
    assert filled.max() <= truth[known].max()


@MANY
@given(
    st.floats(-60.0, 50.0),
    st.floats(5.0, 100.0),
    st.floats(60_000.0, 106_000.0),
    st.sampled_from(["water", "ice"]),
)
def test_dew_point_and_relative_humidity_undo_each_other(t, rh, p, phase):
    one = np.array([t])
    dew = dew_point_from_relative_humidity(one, np.array([rh]), np.array([p]), phase)
    assert dew[0] <= t
    # Magnus against the formulation of the program: 1 % of the humidity over the range, enhancement included
    assert relative_humidity_from_dew_point(one, dew, phase)[0] == pytest.approx(rh, rel=0.012)


@MANY
@given(st.floats(1.0, 50.0), st.floats(5.0, 100.0))
def test_derived_dew_points_above_freezing_are_those_of_moist_air(t, rh):
    p = np.array([101_325.0])
    dew = dew_point_from_relative_humidity(np.array([t]), np.array([rh]), p, "water")
    w = moist_air.humidity_ratio_from_relative_humidity(t, rh / 100, p)
    if dew[0] > 0.02:
        assert moist_air.saturation_humidity_ratio(dew, p) == pytest.approx(w, rel=1e-7)


@FEW
@given(st.floats(-11.5, 11.5), st.integers(-179, 179))
def test_the_clock_s_error_is_found_wherever_the_site_is(off, longitude):
    """Radiation of a sun that keeps its own zone, read as if the zone were another one."""
    made = wf.Year()
    zone = longitude / 15.0
    day, hour = np.divmod(np.arange(8760), 24)
    # the helper's place lies at another longitude: a zone that keeps the same distance to its sun
    sun = wf.clear_sky(day + 1, hour + 0.5, wf.LONGITUDE / 15.0)
    month = np.array([s[1] for s in made.stamps])
    found = hours_ahead(sun, month, float(longitude), zone - off)
    assert found is not None
    assert (found - off + 12) % 24 - 12 == pytest.approx(0.0, abs=0.05)
