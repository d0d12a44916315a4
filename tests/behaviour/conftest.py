"""The command line in this process, with a cache of its own, and the files that its tests read."""

from __future__ import annotations

from collections.abc import Callable
from importlib.util import find_spec
from pathlib import Path
from typing import Any

import pytest

#: Weather files that come with the reader's own library, by what they are here.
YEARS = {"humid": "12839.tm2", "mild": "723170TYA.CSV", "cold": "703165TY.csv"}

#: A scheme that leaves no figure of the year at zero.
BUSY = """
[scheme]
name = "Busy"
[airflow]
outdoor_air = "2 m3/s"
basis = "actual"
[[airflow.schedule]]
days = "mon..fri"
hours = "06:00..20:00"
fraction = 1.0
[[airflow.schedule]]
days = "sat"
hours = "08:00..14:00"
fraction = 0.5
[supply]
dew_point = "9 degC"
dry_bulb = { low = "17 degC", high = "21 degC" }
[coil]
bypass_factor = 0.08
capacity = "35 kW"
[fan]
total_pressure = "700 Pa"
efficiency = 0.6
[preheat]
dry_bulb = "5 degC"
source = "boiler"
efficiency = 0.8
[[reheat]]
source = "boiler"
capacity = "12 kW"
[[reheat]]
source = "electric"
capacity = "10 kW"
[plant]
cooling_cop = 3.5
[prices]
currency = "EUR"
electricity = "0.20 /kWh"
fuel = "0.08 /kWh"
[carbon]
electricity = "0.30 kg/kWh"
fuel = "0.25 kg/kWh"
"""


@pytest.fixture(scope="session")
def years() -> dict[str, str]:
    """Paths of three typical years: humid, mild and cold."""
    spec = find_spec("pvlib")
    assert spec is not None
    assert spec.origin is not None
    return {name: str(Path(spec.origin).parent / "data" / file) for name, file in YEARS.items()}


@pytest.fixture(scope="session")
def home(tmp_path_factory) -> Path:
    """A cache folder that all tests share, so that each file is parsed once."""
    return tmp_path_factory.mktemp("home")


@pytest.fixture
def dewledger(home, tmp_path, monkeypatch) -> Callable[..., Any]:
    """Run the command line in a folder of the test's own; gives exit_code, stdout and stderr."""
    from typer.testing import CliRunner

    from estimator.cli.app import app

    monkeypatch.setenv("DEWLEDGER_HOME", str(home))
    monkeypatch.chdir(tmp_path)
    try:
        runner = CliRunner(mix_stderr=False)
    except TypeError:
        # newer ones never mix the two
        runner = CliRunner()

    def run(*arguments: str) -> Any:
        return runner.invoke(app, list(arguments), prog_name="dewledger")

    return run


@pytest.fixture
def refused(dewledger, tmp_path) -> Callable[..., str]:
    """Run what must be refused: status 2, one message, no traceback, nothing written. Gives the message."""

    def run(*arguments: str) -> str:
        before = {path: path.read_bytes() for path in tmp_path.rglob("*") if path.is_file()}
        result = dewledger(*arguments)
        assert result.exit_code == 2, result.output
        assert result.stdout == ""
        assert result.stderr.startswith("dewledger: ")
        assert result.stderr.count("dewledger: ") == 1
        assert "Traceback" not in result.stderr
        assert {path: path.read_bytes() for path in tmp_path.rglob("*") if path.is_file()} == before
        return result.stderr.removeprefix("dewledger: ")

    return run


@pytest.fixture
def busy(tmp_path) -> str:
    """Path of a scheme that leaves no figure at zero."""
    path = tmp_path / "busy.toml"
    path.write_text(BUSY, encoding="utf-8")
    return str(path)
