"""``dewledger year``: one scheme through one weather year."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Final

import typer

from estimator.cli.asked import scheme_asked
from estimator.cli.options import (
    Airflow,
    DewPoint,
    DryBulb,
    FirstWeekday,
    Humidity,
    Json,
    MaxGap,
    NoCache,
    Quiet,
    SchemeName,
    Set,
    UnitOption,
    UtcOffset,
    examples,
    unit_system,
    weather_completion,
    weather_options,
)
from estimator.cli.output import CONSOLE, say, tell, writing

if TYPE_CHECKING:
    from io import StringIO

    from estimator.result import YearResult

__all__ = ["EXAMPLES", "year"]

EXAMPLES: Final = examples(
    "dewledger year sablewick-bay --scheme boiler-reheat",
    "dewledger year ondavari --airflow 10000cfm --dew-point 52degF --units ip",
    "dewledger year millbrandt -s starter --set coil.bypass_factor=0.1",
    "dewledger year cape-wendle -s cold-supply --json year.json --hours hours.csv",
)


def year(
    file: Annotated[
        str,
        typer.Argument(
            metavar="FILE",
            autocompletion=weather_completion,
            help="A weather file (EPW, TMY3 or TMY2), or the name of a sample.",
        ),
    ],
    scheme: SchemeName = None,
    airflow: Airflow = None,
    dew_point: DewPoint = None,
    dry_bulb: DryBulb = None,
    units: UnitOption = "si",
    json: Json = None,
    hours: Annotated[
        str | None,
        typer.Option(
            "--hours",
            metavar="PATH",
            help="Write the hourly ledger as CSV, one row an hour; '-' is standard output.",
        ),
    ] = None,
    seasons: Annotated[
        str | None,
        typer.Option(
            "--seasons",
            metavar="TEXT",
            help="Seasons of your own, every month in one of them: 'wet=may..oct, dry=nov..apr'.",
        ),
    ] = None,
    set_: Set = None,
    quiet: Quiet = False,
    humidity: Humidity = "dew-point",
    max_gap: MaxGap = "6",
    utc_offset: UtcOffset = None,
    first_weekday: FirstWeekday = None,
    no_cache: NoCache = False,
) -> None:
    """Take every hour of a weather year through a scheme and sum it.

    The summary has the year, its seasons and months, peaks, hours by mode, hours off target, the cooling that
    reheat undoes, bought energy, and everything that a reader must know to trust it or not.
    """
    from estimator.report.assumed import assumed_page, with_caution
    from estimator.result import evaluate
    from estimator.samples import weather_path
    from estimator.totals import parse_seasons
    from estimator.weather import read_weather

    system = unit_system(units)
    options = weather_options(humidity, max_gap, utc_offset, first_weekday, no_cache)
    own_seasons = None if seasons is None else parse_seasons(seasons)
    path = weather_path(file)
    with writing({"--json": json, "--hours": hours}, (path, scheme or "")) as streams:
        model = scheme_asked("year", scheme, set_, airflow, dew_point, dry_bulb)
        result = evaluate(read_weather(path, options), model, own_seasons)
        if scheme is None:
            result = with_caution(result)
        _write(result, streams)
    if quiet:
        return
    if CONSOLE not in (json, hours):
        from estimator.report.summary import year_page

        say(year_page(result, system))
        if scheme is None:
            say(assumed_page(model, system))
    elif scheme is None:
        tell(result.cautions[0])


def _write(result: YearResult, streams: dict[str, StringIO]) -> None:
    if "--json" in streams:
        from estimator.report.documents import dumps, year_document

        streams["--json"].write(dumps(year_document(result)))
    if "--hours" in streams:
        from estimator.report.ledger import write_ledger

        write_ledger(result.year, streams["--hours"])
