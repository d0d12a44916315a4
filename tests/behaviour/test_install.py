"""What a package carries. ``.ci/run`` builds one and runs it alone; here is what it is built from."""

from __future__ import annotations

import importlib
import os
import shutil
import subprocess
import sys
import tomllib
import zlib
from pathlib import Path

import pytest

from estimator.demo import SITES
from estimator.scheme_file import bundled_schemes

ROOT = Path(__file__).resolve().parents[2]
PROJECT = tomllib.loads((ROOT / "pyproject.toml").read_text(encoding="utf-8"))
TARGETS = PROJECT["tool"]["hatch"]["build"]["targets"]
FORCED = TARGETS["wheel"]["force-include"]


def test_the_wheel_carries_every_sample_beside_the_modules():
    samples = sorted(path.name for path in (ROOT / "weather_samples").glob("*.epw"))
    assert {f"weather_samples/{name}": f"estimator/weather_samples/{name}" for name in samples} == FORCED
    assert set(SITES) == {name.removesuffix(".epw") for name in samples}


def test_the_wheel_carries_every_scheme():
    assert TARGETS["wheel"]["packages"] == ["estimator"]
    files = {path.stem for path in (ROOT / "estimator" / "schemes").glob("*.toml")}
    assert files == set(bundled_schemes())
    # what is ignored is left out of a package
    ignored = (ROOT / ".gitignore").read_text(encoding="utf-8").split()
    assert not [line for line in ignored if "toml" in line or "epw" in line or "schemes" in line]


def test_the_sdist_carries_what_the_wheel_is_made_of():
    included = [path.removeprefix("/") for path in TARGETS["sdist"]["include"]]
    for path in ("estimator", PROJECT["project"]["readme"], *FORCED):
        assert any(path == one or path.startswith(f"{one}/") for one in included), path
        assert (ROOT / path).exists(), path


def test_the_wheel_stays_under_its_size():
    carried = [path for path in (ROOT / "estimator").rglob("*") if path.suffix in (".py", ".toml")]
    packed = sum(
        len(zlib.compress(path.read_bytes())) for path in (*carried, *(ROOT / path for path in FORCED))
    )
    assert packed < 6_000_000


def test_the_command_is_there():
    module, _, name = PROJECT["project"]["scripts"]["dewledger"].partition(":")
    assert callable(getattr(importlib.import_module(module), name))


@pytest.fixture(scope="module")
def laid_out(tmp_path_factory) -> Path:
    """The files as the wheel lays them out, far from the checkout."""
    site = tmp_path_factory.mktemp("site")
    shutil.copytree(ROOT / "estimator", site / "estimator", ignore=shutil.ignore_patterns("__pycache__"))
    for source, target in FORCED.items():
        (site / target).parent.mkdir(exist_ok=True)
        shutil.copy(ROOT / source, site / target)
    return site


def alone(site: Path, folder: Path, code: str, *arguments: str) -> str:
    done = subprocess.run(
        [sys.executable, "-W", "error", "-c", code, *arguments],
        capture_output=True, text=True, cwd=folder, check=False,
        env={**os.environ, "PYTHONPATH": str(site), "DEWLEDGER_HOME": str(folder / ".home")},
    )  # fmt: skip
    assert (done.returncode, done.stderr) == (0, "")
    return done.stdout


def test_samples_are_found_without_a_checkout(laid_out, tmp_path):
    code = "from estimator.samples import samples; print(*(s.path for s in samples().values()), sep='\\n')"
    found = [Path(line) for line in alone(laid_out, tmp_path, code).splitlines()]
    assert {path.parent for path in found} == {laid_out.resolve() / "estimator" / "weather_samples"}
    assert {path.stem for path in found} == set(SITES)


def test_the_demo_runs_without_a_checkout(laid_out, tmp_path):
    page = alone(laid_out, tmp_path, "from estimator.cli import main; main()", "demo")
    assert "Marrowby Libraries" in page
    assert (tmp_path / "dewledger-demo" / "answer.txt").read_text(encoding="utf-8") == page
