"""``dewledger year``: one scheme through one weather year."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Final

import typer

from estimator.cli.options import (
    FirstWeekday,
    Humidity,
    Json,
    MaxGap,
    NoCache,
    SchemeName,
    Set,
    UnitOption,
    UtcOffset,
    examples,
    settings_given,
    unit_system,
    weather_options,
)
from estimator.cli.output import CONSOLE, say, writing

if TYPE_CHECKING:
    from io import StringIO

    from estimator.result import YearResult

__all__ = ["EXAMPLES", "year"]

EXAMPLES: Final = examples(
    "dewledger year site.epw --scheme my-scheme.toml",
    "dewledger year site.epw -s my-scheme.toml --json year.json --hours hours.csv",
    "dewledger year site.epw -s starter --set coil.bypass_factor=0.1 --units ip",
)


def year(
    file: Annotated[str, typer.Argument(metavar="FILE", help="A weather file: EPW, TMY3 or TMY2.")],
    scheme: SchemeName,
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
    quiet: Annotated[bool, typer.Option("--quiet", "-q", help="Print no summary.")] = False,
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
    from estimator.result import evaluate
    from estimator.scheme_file import load_scheme
    from estimator.totals import parse_seasons
    from estimator.weather import read_weather

    system = unit_system(units)
    options = weather_options(humidity, max_gap, utc_offset, first_weekday, no_cache)
    own_seasons = None if seasons is None else parse_seasons(seasons)
    with writing({"--json": json, "--hours": hours}, (file, scheme)) as streams:
        model = load_scheme(scheme, settings_given(set_))
        result = evaluate(read_weather(file, options), model, own_seasons)
        _write(result, streams)
    if not quiet and CONSOLE not in (json, hours):
        from estimator.report.summary import year_page

        say(year_page(result, system))


def _write(result: YearResult, streams: dict[str, StringIO]) -> None:
    if "--json" in streams:
        from estimator.report.documents import dumps, year_document

        streams["--json"].write(dumps(year_document(result)))
    if "--hours" in streams:
        from estimator.report.ledger import write_ledger

        write_ledger(result.year, streams["--hours"])
