"""``dewledger demo``: what it says, that its files hold the same, that it spares what is not its own."""

from __future__ import annotations

import csv
import json
import os
import re
import shlex
import shutil
import subprocess
import sys
from pathlib import Path
from types import SimpleNamespace

import pytest

import estimator
from estimator import demo as scenario
from estimator import load_scheme
from estimator.cli.output import progress
from estimator.scheme import resolved_sha256

ROOT = Path(__file__).resolve().parents[2]
SITES = ("port-quellin", "sablewick-bay", "ondavari", "millbrandt", "alto-serrone", "cape-wendle")
SCHEMES = ("electric-reheat", "boiler-reheat", "cold-supply")
#: The prices and factors that the page declares as invented.
PRICE = {"electricity": 0.20, "fuel": 0.07}
CARBON = {"electricity": 0.40, "fuel": 0.20}
NAMES = {
    "checksums.txt", "answer.txt", "annual.csv", "hours.csv", *(f"{scheme}.toml" for scheme in SCHEMES),
    *(f"years/{site}-{scheme}.json" for site in SITES for scheme in SCHEMES),
}  # fmt: skip


def files_of(folder: Path) -> set[str]:
    return {path.relative_to(folder).as_posix() for path in folder.rglob("*") if path.is_file()}


def document(folder: Path, site: str, scheme: str) -> dict:
    return json.loads((folder / "years" / f"{site}-{scheme}.json").read_text(encoding="utf-8"))


def number(text: str) -> float:
    return float(text.replace(" ", ""))


@pytest.fixture(scope="session")
def run(home, tmp_path_factory):
    """The page of one run, in SI, and the folder that it left; no test writes into it."""
    folder = tmp_path_factory.mktemp("demo")
    done = subprocess.run(
        [sys.executable, "-W", "error", "-c", "from estimator.cli import main; main()", "demo"],
        capture_output=True, cwd=folder, check=False,
        env={
            **os.environ,
            "DEWLEDGER_HOME": str(home),
            "PYTHONPATH": str(Path(estimator.__file__).parents[1]),
        },
    )  # fmt: skip
    assert (done.returncode, done.stderr) == (0, b"")
    return done.stdout.decode(), folder / "dewledger-demo"


# what it says


def test_it_leaves_its_files_and_nothing_else(run):
    page, folder = run
    assert [path.name for path in folder.parent.iterdir()] == ["dewledger-demo"]
    assert files_of(folder) == NAMES
    assert (folder / "answer.txt").read_text(encoding="utf-8") == page


def test_the_page_fits_a_terminal_and_is_plain(run):
    page, _ = run
    assert page.isascii()
    assert max(map(len, page.splitlines())) <= 80
    assert not [line for line in page.splitlines() if line != line.rstrip()]


def test_the_page_warns(run):
    joined = " ".join(run[0].split())
    for words in (
        "All of this is synthetic: the owner, the sites, their weather and the prices",
        "The weather is synthetic: made up for demonstration, of no real place",
        "Prices and carbon factors are invented too",
        "Condensate is not drinking water",
        "a licensed practitioner decide",
    ):
        assert words in joined
    assert (
        "a kWh of electricity costs 0.20 crowns and emits 0.40 kg of CO2; a kWh of fuel 0.07 and 0.20"
        in joined
    )


def cost_of(found: dict, factors: dict[str, float], purpose: str = "") -> float:
    rows = [row for row in found["energy"] if purpose in ("", row["purpose"])]
    return sum(row["kwh"] * factors[row["carrier"]] for row in rows if row["kwh"])


def rows_of(page: str, title: str) -> dict[str, list[str]]:
    """The cells of a table by their first, between a heading and the empty line that ends its section."""
    lines = page.partition(f"\n{title}")[2].splitlines()[2:]
    cells = [re.split(r"\s{2,}", line.strip()) for line in lines[: lines.index("") + 3]]
    return {row[0]: row[1:] for row in cells}


def test_costs_and_carbon_are_the_bought_energy_times_the_declared_prices(run):
    page, folder = run
    shown = rows_of(page, "Energy cost of a year, crowns")
    sums, carbon = dict.fromkeys(SCHEMES, 0.0), dict.fromkeys(SCHEMES, 0.0)
    for site in SITES:
        found = {scheme: document(folder, site, scheme) for scheme in SCHEMES}
        costs = {scheme: cost_of(found[scheme], PRICE) for scheme in SCHEMES}
        for scheme in SCHEMES:
            sums[scheme] += costs[scheme]
            carbon[scheme] += cost_of(found[scheme], CARBON) / 1000
            assert found[scheme]["annual"]["cost"] == pytest.approx(costs[scheme], rel=1e-9)
        _, best, *cells = shown[found["cold-supply"]["weather"]["site"]]
        assert [number(cell) for cell in cells] == [round(costs[scheme]) for scheme in SCHEMES]
        # cold supply is another duty: however little it costs, it is not an answer
        assert best.replace(" ", "-") == min(SCHEMES[:2], key=costs.__getitem__)
        assert costs["cold-supply"] < min(costs[scheme] for scheme in SCHEMES[:2])
    assert [number(cell) for cell in shown["All six"][1:]] == [round(sums[scheme]) for scheme in SCHEMES]
    assert [number(cell) for cell in shown["CO2 equivalent, t"]] == [round(carbon[s]) for s in SCHEMES]
    joined = " ".join(page.split())
    assert (
        "* Another duty, so not ranked: cold supply gives colder air of 12 to 20 degC, the others of 20 degC"
        in joined
    )
    assert f"spares {sums['electric-reheat'] - sums['boiler-reheat']:,.0f} crowns".replace(",", " ") in joined


def test_the_figures_of_a_site_are_those_of_its_files(run):
    page, folder = run
    shown = rows_of(page, "What the air takes with the scheme that costs least")
    costs = rows_of(page, "Energy cost of a year")
    for site in SITES:
        name = document(folder, site, SCHEMES[0])["weather"]["site"]
        found = document(folder, site, costs[name][1].replace(" ", "-"))
        annual = found["annual"]
        expected = [
            annual["hours_drying"], annual["coil_cooling_kwh"],
            100 * annual["cooling_undone_kwh"] / annual["coil_cooling_kwh"], annual["reheat_kwh"],
            100 * cost_of(found, PRICE, "reheat") / cost_of(found, PRICE),
            # a cubic metre of water at 10 degC has 999.7 kg
            annual["condensate_kg"] / 999.7, annual["hours_unmet"],
        ]  # fmt: skip
        assert [number(cell) for cell in shown[name]] == [round(value) for value in expected]


def test_inch_pound_units(dewledger, run):
    _, folder = run
    result = dewledger("demo", "--units", "ip")
    assert result.exit_code == 0
    assert max(map(len, result.stdout.splitlines())) <= 80
    assert "degC" not in result.stdout
    assert "m3" not in result.stdout
    shown = rows_of(result.stdout, "What the air takes with the scheme that costs least")
    annual = document(folder, "ondavari", "boiler-reheat")["annual"]
    # 1 ton is 12 000 Btu/h and 1 Btu 1055.05585 J; 1 US gal is 3.785412 L, of 0.9997 kg each
    assert number(shown["Ondavari"][1]) == round(annual["coil_cooling_kwh"] / 3.51685284)
    assert number(shown["Ondavari"][3]) == pytest.approx(annual["reheat_kwh"] / 293.071070, abs=0.051)
    assert number(shown["Ondavari"][5]) == round(annual["condensate_kg"] / 3.785411784 / 0.9997)


def test_the_duty_of_the_ranked_schemes_is_one(run):
    _, folder = run
    for site in SITES:
        electric, boiler, cold = (document(folder, site, scheme)["annual"] for scheme in SCHEMES)
        for key in ("coil_cooling_kwh", "reheat_kwh", "condensate_kg", "hours_drying", "hours_unmet"):
            assert electric[key] == pytest.approx(boiler[key], rel=1e-9), key
        assert (cold["reheat_kwh"], cold["hours_reheat"]) == (0, 0)
        # all heat is bought, at an efficiency of 1 or 0.85
        bought = electric["reheat_kwh"] + electric["outdoor_air_heating_kwh"]
        assert boiler["fuel_kwh"] == pytest.approx(bought / 0.85, rel=1e-9)
        assert electric["electricity_kwh"] == pytest.approx(boiler["electricity_kwh"] + bought, rel=1e-9)


def test_a_scheme_that_misses_fewer_hours_goes_before_a_cheaper_one():
    def result(unmet: int, cost: float) -> SimpleNamespace:
        annual = SimpleNamespace(hours_unmet=unmet)
        return SimpleNamespace(
            totals=SimpleNamespace(annual=annual), bill=SimpleNamespace(cost=lambda _months: cost)
        )

    schemes = {name: load_scheme(name) for name in SCHEMES}
    made = {"electric-reheat": result(0, 9.0), "boiler-reheat": result(3, 5.0), "cold-supply": result(0, 1.0)}
    found = scenario.Demo(texts={}, schemes=schemes, results={"here": made})
    assert found.ranking("here") == ["electric-reheat", "boiler-reheat"]
    made["boiler-reheat"] = result(0, 5.0)
    assert found.best("here") == "boiler-reheat"


def test_electric_reheat_is_the_starter_without_its_comments():
    assert resolved_sha256(load_scheme("electric-reheat")) == resolved_sha256(load_scheme("starter"))


# what it leaves


def test_every_file_says_that_it_is_synthetic(run):
    _, folder = run
    for site in SITES:
        for scheme in SCHEMES:
            found = document(folder, site, scheme)
            assert found["weather"]["synthetic"] is True
            assert any("synthetic" in text for text in found["cautions"])
    for scheme in SCHEMES:
        assert "Invented for the demo" in (folder / f"{scheme}.toml").read_text(encoding="utf-8")
    rows = (folder / "annual.csv").read_text(encoding="utf-8").splitlines()[1:]
    assert all(",synthetic," in row for row in rows)
    assert "synthetic" in (folder / "answer.txt").read_text(encoding="utf-8")


def test_annual_figures_are_those_of_the_documents(run):
    _, folder = run
    with (folder / "annual.csv").open(encoding="utf-8", newline="") as stream:
        rows = list(csv.DictReader(stream))
    assert len(rows) == len(SITES) * len(SCHEMES)
    for row, (site, scheme) in zip(rows, ((a, b) for a in SITES for b in SCHEMES), strict=True):
        found = document(folder, site, scheme)
        assert (row["site"], row["scheme"]) == (found["weather"]["site"], scheme)
        assert row["same_duty"] == ("0" if scheme == "cold-supply" else "1")
        for key, value in found["annual"].items():
            if not isinstance(value, dict):
                assert float(row[key]) == value, key
    for site in SITES:
        own = [row for row in rows if row["site"] == document(folder, site, SCHEMES[0])["weather"]["site"]]
        assert sum(row["costs_least"] == "1" for row in own) == 1


def test_the_hours_are_those_of_the_year(run):
    _, folder = run
    with (folder / "hours.csv").open(encoding="utf-8", newline="") as stream:
        rows = list(csv.DictReader(stream))
    annual = document(folder, "sablewick-bay", "boiler-reheat")["annual"]
    assert len(rows) == 8760
    for column, key in (("reheat_kw", "reheat_kwh"), ("condensate_kg_per_h", "condensate_kg")):
        assert sum(float(row[column]) for row in rows) == pytest.approx(annual[key], rel=1e-8)


def test_any_result_can_be_had_again_from_the_files(dewledger, run):
    _, folder = run
    path = folder / "boiler-reheat.toml"
    result = dewledger("year", "millbrandt", "--scheme", str(path), "--json", "-")
    again, kept = json.loads(result.stdout), document(folder, "millbrandt", "boiler-reheat")
    # a file is called as the command called it
    assert again["scheme"].pop("file") == str(path)
    assert kept["scheme"].pop("file") == "boiler-reheat.toml"
    assert again == kept


@pytest.mark.parametrize("units", ["si", "ip"])
def test_what_to_try_next_works_as_printed(dewledger, tmp_path, units):
    page = dewledger("demo", "--units", units, "--out", "my demo").stdout
    commands = re.findall(r"^    (dewledger .*)$", page.partition("\nTry next\n")[2], re.MULTILINE)
    assert len(commands) == 4
    shutil.copy(ROOT / "weather_samples" / "millbrandt.epw", tmp_path / "my.epw")
    for command in commands:
        result = dewledger(*shlex.split(command)[1:])
        assert (result.exit_code, result.stderr) == (0, ""), command


# the folder


def test_a_second_run_writes_the_same_bytes_over_the_first(dewledger, tmp_path, run):
    _, folder = run
    assert dewledger("demo", "--quiet").stdout == ""
    assert dewledger("demo", "--quiet").exit_code == 0
    for name in NAMES:
        assert (tmp_path / "dewledger-demo" / name).read_bytes() == (folder / name).read_bytes(), name
    assert files_of(tmp_path / "dewledger-demo") == NAMES


def test_it_writes_over_what_it_wrote_in_other_units(dewledger):
    assert dewledger("demo", "--units", "ip", "-q").exit_code == 0
    assert dewledger("demo", "-q").exit_code == 0
    assert "degC" in Path("dewledger-demo/answer.txt").read_text(encoding="utf-8")


def test_a_file_that_was_changed_is_spared(dewledger, refused):
    assert dewledger("demo", "-q").exit_code == 0
    path = Path("dewledger-demo/boiler-reheat.toml")
    path.write_text(path.read_text(encoding="utf-8").replace("0.07", "0.09"), encoding="utf-8")
    own = Path("dewledger-demo/notes.txt")
    own.write_text("mine", encoding="utf-8")
    message = refused("demo")
    assert "--out dewledger-demo: boiler-reheat.toml: changed since this program wrote it" in message
    assert "--force" in message
    assert dewledger("demo", "-q", "--force").exit_code == 0
    assert "0.07" in path.read_text(encoding="utf-8")
    assert own.read_text(encoding="utf-8") == "mine"


def test_a_folder_of_somebody_else_is_spared(dewledger, refused, tmp_path):
    (tmp_path / "theirs").mkdir()
    (tmp_path / "theirs" / "annual.csv").write_text("precious", encoding="utf-8")
    assert "has files in it that this program did not write" in refused("demo", "--out", "theirs")
    (tmp_path / "empty").mkdir()
    assert dewledger("demo", "-q", "--out", "empty").exit_code == 0
    # a list of ours beside a file that is not on it
    (tmp_path / "theirs" / "checksums.txt").write_text("", encoding="utf-8")
    assert "annual.csv: changed" in refused("demo", "--out", "theirs")


@pytest.mark.parametrize(
    ("out", "words"),
    [
        ("file", ("--out file: is a file, not a folder",)),
        ("no/demo", ("--out no/demo: there is no folder 'no'",)),
        ("a" * 300, ("--out", "cannot be used")),
    ],
)
def test_a_folder_that_cannot_be(refused, tmp_path, out, words):
    (tmp_path / "file").write_text("", encoding="utf-8")
    message = refused("demo", "--out", out)
    assert all(word in message for word in words), message


def test_a_disk_that_is_full_leaves_nothing(dewledger, monkeypatch):
    def full(_descriptor):
        raise OSError(28, "No space left on device")

    monkeypatch.setattr("os.fsync", full)
    result = dewledger("demo")
    assert (result.exit_code, result.stdout) == (2, "")
    assert "No space left on device" in result.stderr
    assert not list(Path().iterdir())


def test_an_interrupted_run_leaves_nothing(dewledger, monkeypatch):
    def interrupt(*_args):
        raise KeyboardInterrupt

    monkeypatch.setattr("estimator.report.demo.write_ledger", interrupt)
    assert dewledger("demo").exit_code == 130
    assert not list(Path().iterdir())


# how far it is


def test_progress_shows_at_a_terminal_only(monkeypatch, capsys):
    with progress() as advance:
        advance("Ondavari")
    assert capsys.readouterr() == ("", "")
    monkeypatch.setattr(sys.stderr, "isatty", lambda: True)
    with progress() as advance:
        advance("Ondavari\x1b[31m")
    out, err = capsys.readouterr()
    assert out == ""
    assert err.startswith("\rOndavari?[31m")
    assert err.endswith(f"\r{' ' * 78}\r")
    assert "\n" not in err


def test_it_tells_how_far_it_is():
    told: list[str] = []
    found = scenario.run_demo(told.append)
    assert len(told) == len(found.results) == 6
    assert told[0] == "Port Quellin, 1 of 6"
