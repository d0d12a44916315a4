"""The cache of parsed years: quick, never wrong, never in the way."""

from __future__ import annotations

import os
import random
import subprocess
import sys
from pathlib import Path

import numpy as np
import pytest
from behaviour import weather_files as wf

from estimator.weather import WeatherOptions, WeatherYear, cache, clear_cache, read_weather

ARRAYS = (
    "month", "day", "hour", "weekday", "dry_bulb", "dew_point", "pressure", "humidity_ratio",
    "global_horizontal", "direct_normal", "diffuse_horizontal", "wind_speed", "wind_direction", "repaired",
)  # fmt: skip


@pytest.fixture
def home(tmp_path, monkeypatch) -> Path:
    monkeypatch.setenv("DEWLEDGER_HOME", str(tmp_path / "home"))
    return tmp_path / "home"


@pytest.fixture
def file(tmp_path) -> Path:
    """A file with something to repair, something to find, and columns that are absent."""
    rows = wf.put(wf.epw_rows(wf.Year()), "dry bulb", slice(10, 12), "99.9")
    wf.put(rows, "wind speed", slice(None), "999")
    path = tmp_path / "first.epw"
    path.write_bytes(wf.epw(rows, wf.epw_header(site="unknown", comment="synthetic")))
    return path


def entries(home: Path) -> list[Path]:
    return sorted((home / "weather").iterdir())


def assert_same(a: WeatherYear, b: WeatherYear) -> None:
    for name in a.__dataclass_fields__:
        x, y = getattr(a, name), getattr(b, name)
        if name in ARRAYS and x is not None:
            assert x.dtype == y.dtype
            assert not y.flags.writeable
            np.testing.assert_array_equal(x, y, err_msg=name)
        else:
            assert x == y, name


def test_the_second_reading_is_the_first_one(home, file):
    plain = read_weather(file, WeatherOptions(cache=False))
    assert not home.exists()
    first = read_weather(file)
    assert len(entries(home)) == 1
    second = read_weather(file)
    assert_same(plain, first)
    assert_same(plain, second)
    assert second.wind_speed is None
    assert second.repairs


def test_the_cache_is_used(home, file, monkeypatch):
    read_weather(file)
    monkeypatch.setattr("estimator.weather.read._parse", lambda *_: pytest.fail("parsed again"))
    read_weather(file)


def test_a_cached_year_needs_neither_pandas_nor_pvlib(home, file):
    read_weather(file)
    code = (
        "import sys; from estimator.weather import read_weather; y = read_weather(sys.argv[1]);"
        "print(y.hours, [m for m in ('pvlib', 'pandas', 'scipy', 'pint') if m in sys.modules])"
    )
    env = {**os.environ, "PYTHONPATH": str(Path(__file__).parents[2])}
    run = [sys.executable, "-c", code, str(file)]
    done = subprocess.run(run, capture_output=True, text=True, env=env, check=True)
    assert done.stdout.strip() == "8760 []"


def test_the_same_content_under_another_name_shows_that_name(home, file, tmp_path):
    assert read_weather(file).site == "first"
    other = tmp_path / "second.epw"
    other.write_bytes(file.read_bytes())
    year = read_weather(other)
    assert (year.file, year.site) == ("second.epw", "second")
    assert len(entries(home)) == 1


@pytest.mark.parametrize(
    "options",
    [
        {"humidity": "relative_humidity"},
        {"max_gap_hours": 3},
        {"utc_offset": -6.0},
        {"first_weekday": 3},
    ],
)
def test_other_options_are_another_entry(home, file, options):
    read_weather(file)
    year = read_weather(file, WeatherOptions(**options))
    assert len(entries(home)) == 2
    assert_same(year, read_weather(file, WeatherOptions(cache=False, **options)))


def test_other_content_and_another_version_are_another_entry(home, file, monkeypatch):
    read_weather(file)
    file.write_bytes(file.read_bytes().replace(b"synthetic", b"measured"))
    assert not read_weather(file).synthetic
    assert len(entries(home)) == 2
    monkeypatch.setattr("estimator.__version__", "another")
    read_weather(file)
    assert len(entries(home)) == 3


def test_damage_anywhere_is_noticed_and_mended(home, file):
    good = read_weather(file)
    (entry,) = entries(home)
    whole = entry.read_bytes()
    chance = random.Random(4)
    places = [0, 1, 63, 64, 65, 66, len(whole) - 1, *(chance.randrange(len(whole)) for _ in range(12))]
    for place in places:
        entry.write_bytes(
            whole[:place] + bytes([whole[place] ^ (1 << chance.randrange(8))]) + whole[place + 1 :]
        )
        assert cache.load(entry.stem) is None
    assert_same(good, read_weather(file))
    assert cache.load(entry.stem) is not None


@pytest.mark.parametrize("keep", [0, 10, 64, 65, 66, 5000, -1])
def test_a_truncated_entry_is_noticed(home, file, keep):
    good = read_weather(file)
    (entry,) = entries(home)
    entry.write_bytes(entry.read_bytes()[:keep])
    assert cache.load(entry.stem) is None
    assert_same(good, read_weather(file))


def test_entries_that_changed_places_are_noticed(home, file):
    options = WeatherOptions(humidity="relative_humidity")
    first, second = read_weather(file), read_weather(file, options)
    a, b = entries(home)
    one, two = a.read_bytes(), b.read_bytes()
    a.write_bytes(two)
    b.write_bytes(one)
    assert_same(first, read_weather(file))
    assert_same(second, read_weather(file, options))


@pytest.mark.parametrize("body", [b"", b"not an archive", b"PK\x03\x04 neither"])
def test_a_foreign_file_with_a_valid_digest_is_no_entry(home, file, body):
    read_weather(file)
    (entry,) = entries(home)
    entry.write_bytes(cache.sha256(body).encode() + b"\n" + body)
    assert cache.load(entry.stem) is None


def test_a_folder_that_cannot_be_written_does_not_stop_the_run(tmp_path, file, monkeypatch):
    blocked = tmp_path / "blocked"
    blocked.write_text("a file where the folder should be")
    monkeypatch.setenv("DEWLEDGER_HOME", str(blocked))
    assert read_weather(file).hours == 8760
    assert clear_cache() == 0


def test_a_full_disk_does_not_stop_the_run(home, file, monkeypatch):
    def full(*_):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("estimator.files.os.fsync", full)
    assert read_weather(file).hours == 8760
    assert entries(home) == []


def test_clearing_tells_how_many(home, file):
    assert clear_cache() == 0
    read_weather(file)
    read_weather(file, WeatherOptions(first_weekday=2))
    (home / "weather" / "not-ours.txt").write_text("stays")
    assert clear_cache() == 2
    assert [p.name for p in entries(home)] == ["not-ours.txt"]


def test_a_refused_file_is_not_kept(home, tmp_path):
    path = tmp_path / "bad.epw"
    path.write_bytes(wf.epw()[:-40])
    for _ in range(2):
        with pytest.raises(Exception, match="cut off"):
            read_weather(path)
    assert not (home / "weather").exists()
