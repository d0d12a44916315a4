"""How long a year takes, against other ways of doing the same duty in the same run.

    python tests/bench/bench_year.py [--quick]

A script, not a test: nothing here fails for being slow. Contenders take turns, so that whatever else the
machine does falls on all of them alike; what counts is the best of the runs, and the spread is printed
beside it. Every contender's sums are printed and must agree with this program's before any time is shown.
"""

from __future__ import annotations

import argparse
import dataclasses
import importlib.metadata
import importlib.util
import os
import platform
import statistics
import sys
import tempfile
import time
from collections.abc import Callable
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import coolprop_year
import duty as duties
import numpy as np
from psychrolib_year import Psychrolib

from estimator.scheme import Scheme, stack
from estimator.scheme_file import load_scheme
from estimator.totals import sum_year
from estimator.weather import WeatherOptions, WeatherYear, read_weather
from estimator.year import run_year, variant

VARIANTS = 8
#: Largest difference from this program's sums and peaks, as a share of the year's.
ALLOWED = {"psychrolib": 0.02, "CoolProp": 0.002, "fused kernel": 1e-9}
PROGRAM = "this program, year and totals"


@dataclass
class Contender:
    """One way of doing a duty: ``run`` gives the seconds that one run took."""

    name: str
    run: Callable[[], float]
    rounds: int
    #: runs in a row when its turn comes
    burst: int = 1
    #: years (or files) that one run stands for; a share of the hours counts as a share of a year
    years: float = 1.0
    note: str = ""
    seconds: list[float] = field(default_factory=list)

    @property
    def best(self) -> float:
        return min(self.seconds)


def timed(call: Callable[[], Any]) -> Callable[[], float]:
    """``call`` as something that gives the seconds it took."""

    def run() -> float:
        start = time.perf_counter()
        call()
        return time.perf_counter() - start

    return run


def interleave(contenders: list[Contender]) -> None:
    """Let the contenders take turns until each has had its rounds."""
    for turn in range(max(c.rounds for c in contenders)):
        for contender in contenders:
            if turn < contender.rounds:
                found = (contender.run() for _ in range(contender.burst))
                contender.seconds.extend(s / contender.years for s in found)


def table(contenders: list[Contender], reference: str, unit: str) -> None:
    """Best, median and spread of every contender, and its best as a multiple of the reference's."""
    base = next(c.best for c in contenders if c.name == reference)
    head = f"best/{unit}"
    print(f"{'':44}{head:>14}{'median':>12}{'spread':>9}{'runs':>6}{'ratio':>10}")
    for c in contenders:
        median = statistics.median(c.seconds)
        print(
            f"{c.name:44}{c.best * 1e3:11.3f} ms{median * 1e3:9.3f} ms{median / c.best - 1.0:8.0%}"
            f"{len(c.seconds):7d}{c.best / base:10.4g}{'  ' + c.note if c.note else ''}"
        )
    print("spread: median over best, less one; ratio: best over the best of", reference)


def compare(results: dict[str, tuple[dict[str, list[float]], dict[str, list[float]]]]) -> None:
    """Every contender's sums beside this program's for the same hours; a wrong one ends the run."""
    print(f"{'sums and peaks of the year':30}{'this program':>16}" + "".join(f"{n:>24}" for n in results))
    years = {name: (duties.annual(found), duties.annual(own)) for name, (found, own) in results.items()}
    own_year = next(iter(years.values()))[1]
    for key in (*duties.SUMS, *duties.PEAKS):
        line = f"{key:30}{own_year[key]:16.6g}"
        for found, own in years.values():
            difference = found[key] / own[key] - 1.0
            line += f"{found[key]:14.6g} {difference:+9.1e}"
        print(line)
    for name, (found, own) in results.items():
        worst = duties.largest_difference(found, own)
        if not worst <= ALLOWED[name]:
            raise SystemExit(f"{name} differs from this program by {worst:.2g}: it does not do this duty")


def variants(scheme: str) -> list[Scheme]:
    """Schemes that differ in their setpoint only."""
    return [load_scheme(scheme, {"supply.dew_point": f"{9 + 0.5 * i} degC"}) for i in range(VARIANTS)]


def run_stack(weather: WeatherYear, together: Scheme, schemes: list[Scheme]) -> None:
    year = run_year(weather, together)
    for index, scheme in enumerate(schemes):
        sum_year(variant(year, index, scheme))


def bench_years(weather: WeatherYear, quick: bool) -> None:
    """One year of the base scheme by every contender."""
    scheme = load_scheme("starter")
    numbers = dataclasses.asdict(duties.duty_of(scheme))
    own = duties.sums_of(sum_year(run_year(weather, scheme)))
    several = variants("starter")
    together = stack(several)
    # 23 and not 24, so that every hour of the day is among them
    few = duties.every(weather, 23) if quick else weather
    few_own = duties.sums_of(sum_year(run_year(few, scheme)))
    few_columns = duties.columns(few)

    rounds = 12 if quick else 60
    fast = {"rounds": rounds, "burst": 4}
    contenders = [
        Contender(PROGRAM, timed(lambda: sum_year(run_year(weather, scheme))), **fast),
        Contender("this program, year alone", timed(lambda: run_year(weather, scheme)), **fast),
        Contender(
            f"this program, a year of a stack of {VARIANTS}",
            timed(lambda: run_stack(weather, together, several)),
            rounds=rounds,
            years=VARIANTS,
            note="with totals of each",
        ),
    ]
    results = {}
    if importlib.util.find_spec("numba"):
        import fused_kernel

        arrays = fused_kernel.columns(weather)
        # the first run compiles
        results["fused kernel"] = (fused_kernel.run(numbers, arrays), own)
        contenders.append(Contender("fused kernel", timed(lambda: fused_kernel.run(numbers, arrays)), **fast))
    else:
        print("numba is not installed: no fused kernel")
    with Psychrolib(numbers, duties.columns(weather)) as library:
        results["psychrolib"] = (library.run()[1], own)
        results["CoolProp"] = (coolprop_year.run(numbers, few_columns), few_own)
        contenders.append(
            Contender("psychrolib, hour by hour", lambda: library.run()[0], rounds=rounds // 3 + 2)
        )
        contenders.append(
            Contender(
                "CoolProp, hour by hour",
                timed(lambda: coolprop_year.run(numbers, few_columns)),
                rounds=2,
                years=few.hours / weather.hours,
                note=f"{few.hours} hours, scaled to the year" if quick else "",
            )
        )
        compare(results)
        print()
        interleave(contenders)
    table(contenders, PROGRAM, "year")


def write_epw(path: Path, weather: WeatherYear) -> None:
    """The year as an EPW file: 35 fields a row, those that nobody asks for as missing."""
    place = f"{weather.latitude:.2f},{weather.longitude:.2f},{weather.utc_offset:.1f},{weather.elevation:.1f}"
    head = [
        f"LOCATION,{weather.site},-,-,made by a benchmark,000000,{place}",
        "DESIGN CONDITIONS,0",
        "TYPICAL/EXTREME PERIODS,0",
        "GROUND TEMPERATURES,0",
        "HOLIDAYS/DAYLIGHT SAVINGS,No,0,0,0",
        "COMMENTS 1,typical year",
        "COMMENTS 2,",
        "DATA PERIODS,1,1,Data,Sunday, 1/ 1,12/31",
    ]
    zeros = np.zeros(weather.hours)
    radiation = [
        zeros if column is None else column
        for column in (weather.global_horizontal, weather.direct_normal, weather.diffuse_horizontal)
    ]
    humidity = np.clip(100.0 * np.exp(-0.06 * (weather.dry_bulb - weather.dew_point)), 1.0, 100.0)
    rows = []
    for i in range(weather.hours):
        row = [
            f"2001,{weather.month[i]},{weather.day[i]},{weather.hour[i] + 1},0,?9?9?9?9E0?9",
            f"{weather.dry_bulb[i]:.1f},{weather.dew_point[i]:.1f},{humidity[i]:.0f}",
            f"{weather.pressure[i]:.0f},9999,9999,9999",
            ",".join(f"{column[i]:.0f}" for column in radiation),
            "999999,999999,999999,9999,180,2.0,99,99,9999,99999,9,999999999,999,0.999,999,99,0.2,999,99",
        ]
        rows.append(",".join(row))
    path.write_text("\n".join([*head, *rows]) + "\n")


def bench_reading(tmy3: Path, weather: WeatherYear, quick: bool) -> None:
    """Reading a file against pvlib's own reader of it, which neither checks nor repairs."""
    import pvlib

    rounds = 3 if quick else 10
    cold = WeatherOptions(cache=False)
    with tempfile.TemporaryDirectory() as folder:
        epw = Path(folder) / "site.epw"
        write_epw(epw, weather)
        readers = {
            tmy3: lambda: pvlib.iotools.read_tmy3(str(tmy3), map_variables=True),
            epw: lambda: pvlib.iotools.read_epw(str(epw)),
        }
        for path, reader in readers.items():
            print()
            read_weather(path)
            reference = f"{path.suffix.upper()[1:]}: pvlib's reader alone"
            contenders = [
                Contender(reference, timed(reader), rounds=rounds),
                Contender(
                    "   read_weather, cold", timed(lambda p=path: read_weather(p, cold)), rounds=rounds
                ),
                Contender(
                    "   read_weather, from its cache",
                    timed(lambda p=path: read_weather(p)),
                    rounds=rounds,
                    burst=3,
                ),
            ]
            interleave(contenders)
            table(contenders, reference, "file")


def machine() -> str:
    """The processor's name, how many there are, and what numpy makes of it."""
    name = platform.processor() or platform.machine()
    cpuinfo = Path("/proc/cpuinfo")
    if cpuinfo.exists():
        lines = cpuinfo.read_text().splitlines()
        name = next((line.partition(":")[2].strip() for line in lines if line.startswith("model name")), name)
    from numpy._core._multiarray_umath import __cpu_features__

    widest = [f for f in ("AVX512_SKX", "AVX512F", "AVX2", "FMA3", "ASIMD") if __cpu_features__.get(f)]
    return f"{name}, {os.cpu_count()} cores, numpy sees {widest[0] if widest else 'no wide instructions'}"


def main() -> None:
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("--quick", action="store_true", help="fewer runs, and CoolProp on some hours")
    quick = parser.parse_args().quick
    import pvlib

    packages = ("numpy", "numba", "psychrolib", "coolprop", "pvlib", "pandas")
    versions = []
    for package in packages:
        try:
            versions.append(f"{package} {importlib.metadata.version(package)}")
        except importlib.metadata.PackageNotFoundError:
            versions.append(f"{package} absent")
    print(machine())
    print(f"{time.strftime('%Y-%m-%d')}, Python {platform.python_version()} on {platform.system()}")
    print(", ".join(versions))
    print("kernel: one thread, fastmath off, compile time excluded; psychrolib: numba blocked, plain Python")
    tmy3 = Path(pvlib.__file__).parent / "data" / "723170TYA.CSV"
    weather = read_weather(tmy3, WeatherOptions(cache=False))
    print(f"{weather.site}, {weather.hours} hours; scheme: starter")
    print()
    bench_years(weather, quick)
    # a cache of its own: the user's is left as it is
    with tempfile.TemporaryDirectory() as home:
        os.environ["DEWLEDGER_HOME"] = home
        bench_reading(tmy3, weather, quick)


if __name__ == "__main__":
    sys.exit(main())
