"""Options that several commands share, and what is made of them."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Annotated, Final, Literal, cast

import typer

from estimator.cli.output import tell
from estimator.errors import InputError, WeatherError

if TYPE_CHECKING:
    from estimator.quantities import UnitSystem
    from estimator.weather import WeatherOptions

__all__ = [
    "Airflow",
    "DewPoint",
    "DryBulb",
    "FirstWeekday",
    "Humidity",
    "Json",
    "MaxGap",
    "NoCache",
    "Quiet",
    "SchemeName",
    "Set",
    "UnitOption",
    "UtcOffset",
    "examples",
    "require_command",
    "scheme_completion",
    "settings_given",
    "unit_system",
    "weather_completion",
    "weather_options",
    "weekday_number",
]

#: What the library calls an option, and what it is called on the command line.
_NAMES: Final = {
    "humidity": "--humidity",
    "max_gap_hours": "--max-gap",
    "utc_offset": "--utc-offset",
    "first_weekday": "--first-weekday",
}


def scheme_completion(incomplete: str) -> list[str]:
    """The bundled schemes that begin so; where none does, the shell offers files."""
    from estimator.scheme_file import bundled_schemes

    return [name for name in bundled_schemes() if name.startswith(incomplete)]


def weather_completion(incomplete: str) -> list[str]:
    """The samples that begin so; where none does, the shell offers files."""
    from estimator.samples import sample_names

    return [name for name in sample_names() if name.startswith(incomplete)]


def unit_completion(incomplete: str) -> list[str]:
    """The unit systems that begin so."""
    return [name for name in ("si", "ip") if name.startswith(incomplete)]


# Words and numbers are taken as text and read here, so that what cannot be read is told in the same words
# whatever the version of typer.

UnitOption = Annotated[
    str,
    typer.Option(
        "--units",
        metavar="si|ip",
        autocompletion=unit_completion,
        help="Units of the text: SI or inch-pound. JSON and CSV are always SI.",
    ),
]
Json = Annotated[
    str | None,
    typer.Option("--json", metavar="PATH", help="Write the result as JSON; '-' is standard output."),
]
SchemeName = Annotated[
    str | None,
    typer.Option(
        "--scheme",
        "-s",
        metavar="S",
        autocompletion=scheme_completion,
        help="A scheme file, or the name of a bundled scheme. In its place any of the next three options may "
        "stand; all other settings are then the starter's, and listed as assumed.",
    ),
]
Airflow = Annotated[
    str | None,
    typer.Option(
        "--airflow", metavar="FLOW", help="Outdoor air: '2.5 m3/s' or '5000 cfm'. Overrides the scheme."
    ),
]
DewPoint = Annotated[
    str | None,
    typer.Option(
        "--dew-point",
        metavar="T",
        help="Highest dew point of the supply air: '11 degC'. Overrides the scheme.",
    ),
]
DryBulb = Annotated[
    str | None,
    typer.Option(
        "--dry-bulb", metavar="T", help="Dry bulb of the supply air: '20 degC'. Overrides the scheme."
    ),
]
Quiet = Annotated[
    bool, typer.Option("--quiet", "-q", help="Print no page; files that are asked for are written.")
]
Set = Annotated[
    list[str] | None,
    typer.Option(
        "--set",
        metavar="KEY=VALUE",
        help="Override a setting of the scheme, written as in its file; may be repeated. "
        "'dewledger scheme show' lists the keys.",
    ),
]
Humidity = Annotated[
    str,
    typer.Option(
        "--humidity",
        metavar="COLUMN",
        help="Weather: which of the file's two humidity columns governs, dew-point or relative-humidity.",
    ),
]
MaxGap = Annotated[
    str,
    typer.Option("--max-gap", metavar="HOURS", help="Weather: longest run of missing hours that is filled."),
]
UtcOffset = Annotated[
    str | None,
    typer.Option(
        "--utc-offset",
        metavar="HOURS",
        help="Weather: time zone of the rows, hours east of Greenwich, in place of the one the file states.",
    ),
]
FirstWeekday = Annotated[
    str | None,
    typer.Option(
        "--first-weekday",
        metavar="NAME",
        help="Weather: the day of the week of 1 January. A typical year begins on a Monday unless this says "
        "otherwise.",
    ),
]
NoCache = Annotated[
    bool, typer.Option("--no-cache", help="Weather: read the file itself and keep nothing of it.")
]


def examples(*lines: str) -> str:
    """The end of a help page: commands as they are typed, each on a line of its own.

    Each runs as it stands, in an empty folder.
    """
    return "\n".join(["\b", "Examples:", *(f"  {line}" for line in lines)])


def require_command(context: typer.Context) -> None:
    """Show the help of a group of commands where none of them is named."""
    if context.invoked_subcommand is None:
        tell(f"nothing to do\n\n{context.get_help()}")
        raise typer.Exit(2)


def weather_options(
    humidity: str,
    max_gap: str,
    utc_offset: str | None,
    first_weekday: str | None,
    no_cache: bool,
) -> WeatherOptions:
    """The library's options, with errors that name the command line's."""
    from estimator.weather import WeatherOptions

    column = _one_of("--humidity", humidity, ("dew-point", "relative-humidity")).replace("-", "_")
    gap = _number("--max-gap", max_gap, "a whole number of hours")
    try:
        return WeatherOptions(
            humidity=cast(Literal["dew_point", "relative_humidity"], column),
            max_gap_hours=int(gap) if gap.is_integer() else cast(int, gap),
            utc_offset=None
            if utc_offset is None
            else _number("--utc-offset", utc_offset, "a number of hours"),
            first_weekday=weekday_number(first_weekday),
            cache=not no_cache,
        )
    except WeatherError as error:
        raise error.at(_NAMES.get(error.where.rpartition(" ")[2], error.where)) from error


def unit_system(text: str) -> UnitSystem:
    """The unit system that ``--units`` names."""
    return cast("UnitSystem", _one_of("--units", text, ("si", "ip")))


def _one_of(option: str, text: str, words: tuple[str, ...]) -> str:
    word = text.strip().lower()
    if word not in words:
        from estimator.quantities import likeliest

        raise InputError(
            f"{text!r} is not known", where=option, allowed=" or ".join(words), hint=likeliest(word, words)
        )
    return word


def _number(option: str, text: str, allowed: str) -> float:
    try:
        return float(text)
    except ValueError:
        raise InputError(f"{text!r} is not a number", where=option, allowed=allowed) from None


def weekday_number(name: str | None) -> int | None:
    """0 for Monday; three letters are enough."""
    if name is None:
        return None
    from estimator.calendar_words import DAYS

    word = name.strip().lower()
    found = [i for i, day in enumerate(DAYS) if len(word) >= 3 and day.startswith(word)]
    if not found:
        raise InputError(
            f"{name!r} is not a day of the week", where="--first-weekday", allowed=", ".join(DAYS)
        )
    return found[0]


def settings_given(items: Sequence[str] | None) -> dict[str, str]:
    """Overrides by key, from ``KEY=VALUE``."""
    settings: dict[str, str] = {}
    for item in items or ():
        key, equals, value = (part.strip() for part in item.partition("="))
        if not equals or not key or not value:
            raise InputError(
                f"{item!r} is not KEY=VALUE",
                where="--set",
                hint="write for example --set coil.bypass_factor=0.1",
            )
        if key in settings:
            raise InputError(f"{key!r} is set twice", where="--set", allowed="each key once")
        settings[key] = value
    return settings
