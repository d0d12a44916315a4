"""Sample weather by name, wherever a weather file is asked for."""

from __future__ import annotations

import json
from pathlib import Path

import pytest
from behaviour import weather_files as wf

from estimator import samples
from estimator.errors import WeatherError

FOLDER = Path(__file__).resolve().parents[2] / "weather_samples"
NAMES = sorted(path.stem for path in FOLDER.glob("*.epw"))


def document(dewledger, *arguments: str) -> dict:
    result = dewledger(*arguments, "--json", "-")
    assert (result.exit_code, result.stderr) == (0, "")
    return json.loads(result.stdout)


@pytest.mark.parametrize("name", NAMES)
def test_a_name_is_the_file(dewledger, name):
    by_name, by_path = (
        document(dewledger, "weather", file)["weather"] for file in (name, str(FOLDER / f"{name}.epw"))
    )
    assert by_name == by_path
    assert by_name[0]["synthetic"] is True


def test_every_command_that_reads_weather_takes_a_name(dewledger):
    year = document(dewledger, "year", "cape-wendle", "-s", "starter")
    hour = document(dewledger, "hour", "cape-wendle", "-s", "starter", "--at", "01-26 13:00")
    assert year["weather"] == hour["weather"]
    assert year["weather"]["file"] == "cape-wendle.epw"
    assert any("synthetic" in caution for caution in year["cautions"])


def test_a_file_of_that_name_comes_first_and_a_folder_does_not(dewledger, tmp_path):
    (tmp_path / "ondavari").mkdir()
    assert document(dewledger, "weather", "ondavari")["weather"][0]["site"] == "Ondavari"
    (tmp_path / "millbrandt").write_bytes(wf.epw())
    assert document(dewledger, "weather", "millbrandt")["weather"][0]["synthetic"] is False


@pytest.mark.parametrize(
    ("name", "words"),
    [
        ("sablewik-bay", ("no such file and no such sample", "did you mean 'sablewick-bay'?")),
        ("Sablewick Bay", ("did you mean 'sablewick-bay'?",)),
        ("ondavari.epw", ("did you mean 'ondavari'?",)),
        ("zzz", ("no such file and no such sample", "'dewledger weather' lists the samples")),
        ("site.epw", ("site.epw: no such file; check the name and the folder",)),
        ("samples/ondavari", ("samples/ondavari: no such file",)),
    ],
)
def test_a_name_that_is_none(refused, name, words):
    for arguments in (
        ("year", name, "-s", "starter", "--json", "y.json"),
        ("hour", name, "-s", "starter", "--at", "07-14 15:00"),
        ("weather", name),
    ):
        message = refused(*arguments)
        assert all(word in message for word in words), message


def test_weather_without_a_file_lists_the_samples(dewledger):
    result = dewledger("weather")
    assert (result.exit_code, result.stderr) == (0, "")
    assert max(map(len, result.stdout.splitlines())) <= 80
    assert "synthetic" in result.stdout
    rows = {line.split()[0]: line for line in result.stdout.splitlines() if line.startswith("  ")}
    assert sorted(rows) == NAMES
    assert rows["millbrandt"].endswith("mixed-humid continental, with frost")
    assert "Sablewick Bay" in rows["sablewick-bay"]


def test_a_sample_is_not_written_over(refused):
    path = FOLDER / "cape-wendle.epw"
    assert "is a file that is read" in refused("year", "cape-wendle", "-s", "starter", "--json", str(path))


def test_an_installed_package_looks_beside_its_modules_first(monkeypatch, tmp_path):
    installed, checkout = tmp_path / "a", tmp_path / "b"
    for folder, name in ((installed, "here"), (checkout, "there")):
        folder.mkdir()
        (folder / f"{name}.epw").write_bytes(wf.epw())
    monkeypatch.setattr(samples, "_FOLDERS", (installed, checkout))
    assert samples.sample_names() == ("here",)
    (installed / "here.epw").unlink()
    assert samples.sample_names() == ("there",)
    assert samples.weather_path("there") == checkout / "there.epw"


def test_a_package_without_samples_says_so(monkeypatch, dewledger, refused, tmp_path):
    monkeypatch.setattr(samples, "_FOLDERS", (tmp_path / "nowhere",))
    assert samples.samples() == {}
    with pytest.raises(WeatherError, match="no such sample"):
        samples.weather_path("ondavari")
    assert "None came with this installation" in dewledger("weather").stdout
    assert "missing from this installation" in refused("demo")
