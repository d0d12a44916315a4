"""``dewledger hour``: one hour in full, for checking by hand."""

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
    weekday_number,
)
from estimator.cli.output import CONSOLE, say, writing
from estimator.errors import InputError

if TYPE_CHECKING:
    from estimator.hour import HourResult, OutdoorAir
    from estimator.scheme import Scheme
    from estimator.weather import WeatherYear

__all__ = ["EXAMPLES", "hour"]

EXAMPLES: Final = examples(
    'dewledger hour sablewick-bay --scheme starter --at "07-14 15:00"',
    'dewledger hour millbrandt -s boiler-reheat --design "dew point 0.4 %"',
    'dewledger hour --airflow 5000cfm --air "90 degF, 65 %, 14.7 psi" --units ip',
)


def hour(
    file: Annotated[
        str | None,
        typer.Argument(
            metavar="FILE",
            autocompletion=weather_completion,
            help="A weather file (EPW, TMY3 or TMY2), or the name of a sample. Not with --air.",
        ),
    ] = None,
    scheme: SchemeName = None,
    airflow: Airflow = None,
    dew_point: DewPoint = None,
    dry_bulb: DryBulb = None,
    at: Annotated[
        str | None,
        typer.Option(
            "--at",
            metavar="TIME",
            help="The hour of FILE, 'MM-DD HH:00', by its start. With --air only the time, for a scheme that "
            "follows the calendar.",
        ),
    ] = None,
    air: Annotated[
        str | None,
        typer.Option(
            "--air",
            metavar="AIR",
            help="Air without a file: dry bulb, humidity, pressure. Humidity is '65 %', 'dew point 24 degC', "
            "'wet bulb 26 degC' or '12 g/kg'; pressure may be an elevation ('1500 m').",
        ),
    ] = None,
    design: Annotated[
        str | None,
        typer.Option(
            "--design",
            metavar="NAME",
            help="A design condition of FILE: 'dry bulb' or 'dew point', 0.4, 1 or 2 %.",
        ),
    ] = None,
    set_: Set = None,
    units: UnitOption = "si",
    json: Json = None,
    quiet: Quiet = False,
    humidity: Humidity = "dew-point",
    max_gap: MaxGap = "6",
    utc_offset: UtcOffset = None,
    first_weekday: FirstWeekday = None,
    no_cache: NoCache = False,
) -> None:
    """Show one hour in full, for checking by hand.

    Every state point, every exchange between them, and the arithmetic behind each.
    """
    from estimator.samples import weather_path

    system = unit_system(units)
    _check_choice(file, at, air, design)
    path = None if file is None else weather_path(file)
    with writing({"--json": json}, (path or "", scheme or "")) as streams:
        model = scheme_asked("hour", scheme, set_, airflow, dew_point, dry_bulb)
        weather: WeatherYear | None = None
        if path is None:
            from estimator.cli.air import air_given

            outdoor = air_given(str(air), at, weekday_number(first_weekday))
        else:
            from estimator.cli.air import air_at, air_of_design
            from estimator.weather import read_weather

            weather = read_weather(
                path, weather_options(humidity, max_gap, utc_offset, first_weekday, no_cache)
            )
            outdoor = air_of_design(weather, design) if design is not None else air_at(weather, str(at))
        result = _run(model, outdoor)
        if "--json" in streams:
            from estimator.report.documents import dumps, hour_document

            streams["--json"].write(dumps(hour_document(result, weather)))
    if json != CONSOLE and not quiet:
        from estimator.report.hour import hour_page

        say(hour_page(result, system, weather))
        if scheme is None:
            from estimator.report.assumed import assumed_page

            say(assumed_page(model, system))


def _check_choice(file: str | None, at: str | None, air: str | None, design: str | None) -> None:
    """Refuse anything but an hour of a file, air given, or a design condition of a file."""
    if air is not None and (file is not None or design is not None):
        other = "a weather file" if file is not None else "--design"
        raise InputError(f"--air and {other} are both given", where="hour", allowed="one of them")
    if at is not None and design is not None:
        raise InputError("--at and --design are both given", where="hour", allowed="one of them")
    if air is None and at is None and design is None:
        raise InputError(
            "no hour is chosen",
            where="hour",
            allowed="--at, --air or --design",
            hint="write for example --at '07-14 15:00'",
        )
    if air is None and file is None:
        option = "--at" if at is not None else "--design"
        raise InputError(
            f"{option} needs a weather file", where="hour", hint="name one, or give the air itself with --air"
        )


def _run(scheme: Scheme, outdoor: OutdoorAir) -> HourResult:
    from estimator.hour import follows_calendar, run_hour

    if outdoor.month is None and follows_calendar(scheme):
        # the library's advice to say when, worded for this command
        t, w, p = outdoor.dry_bulb, 1000.0 * outdoor.humidity_ratio, outdoor.pressure
        air = f"{t:.2f} degC, {w:.3f} g/kg, {p:.0f} Pa"
        raise InputError(
            "the scheme follows the calendar and no time is given",
            where=scheme.source.file or scheme.name,
            hint=f"say when: --air '{air}' --at '07-14 15:00'",
        )
    return run_hour(scheme, outdoor)
