"""``dewledger weather``: what a weather file holds, and what is wrong with it."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Final

import typer

from estimator.cli.options import (
    FirstWeekday,
    Humidity,
    Json,
    MaxGap,
    NoCache,
    Quiet,
    UnitOption,
    UtcOffset,
    examples,
    unit_system,
    weather_completion,
    weather_options,
)
from estimator.cli.output import CONSOLE, say, tell, writing
from estimator.errors import InputError

if TYPE_CHECKING:
    from estimator.weather import WeatherSummary, WeatherYear

__all__ = ["EXAMPLES", "weather"]

EXAMPLES: Final = examples(
    "dewledger weather",
    "dewledger weather sablewick-bay",
    "dewledger weather millbrandt cape-wendle --units ip --json weather.json",
)


def weather(
    files: Annotated[
        list[str] | None,
        typer.Argument(
            metavar="FILE",
            autocompletion=weather_completion,
            help="Weather files (EPW, TMY3 or TMY2, plain or zipped), or names of samples. Without any the "
            "samples are listed.",
        ),
    ] = None,
    units: UnitOption = "si",
    json: Json = None,
    quiet: Quiet = False,
    humidity: Humidity = "dew-point",
    max_gap: MaxGap = "6",
    utc_offset: UtcOffset = None,
    first_weekday: FirstWeekday = None,
    no_cache: NoCache = False,
    clear_cache: Annotated[
        bool, typer.Option("--clear-cache", help="Remove all that is kept of weather files read before.")
    ] = False,
) -> None:
    """Show what a weather file holds, and what is wrong with it.

    Place, period, extremes, design values, humid hours; everything that was repaired and everything odd that
    was left as it is are listed. A file that cannot be used is told on standard error, the others are
    shown, and the exit status is 2.
    """
    from estimator.samples import weather_path
    from estimator.weather import clear_cache as clear
    from estimator.weather import read_weather, summarise

    named = files or []
    system = unit_system(units)
    options = weather_options(humidity, max_gap, utc_offset, first_weekday, no_cache)
    if clear_cache:
        tell(f"{clear()} kept weather years removed")
    if not named:
        if not clear_cache:
            _list_samples(json)
        return
    years: list[tuple[WeatherYear, WeatherSummary]] = []
    failed: dict[str, str] = {}
    with writing({"--json": json}, named) as streams:
        for file in named:
            try:
                year = read_weather(weather_path(file), options)
                years.append((year, summarise(year)))
            except InputError as error:
                failed[file] = error.message()
                tell(failed[file])
        if not years:
            # leaving by an error keeps the document from being written
            raise typer.Exit(2)
        if "--json" in streams:
            from estimator.report.documents import dumps, weather_document

            streams["--json"].write(dumps(weather_document(years, failed)))
    if json != CONSOLE and not quiet:
        from estimator.report.weather import weather_page

        say("\n\n".join(weather_page(year, summary, system) for year, summary in years))
    if failed:
        raise typer.Exit(2)


def _list_samples(json: str | None) -> None:
    from estimator.report.samples import sample_list
    from estimator.samples import samples

    if json is not None:
        raise InputError("no weather file is named", where="weather --json", hint="name one")
    say(sample_list(samples().values()))
