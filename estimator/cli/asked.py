"""The weather and the scheme that a command line asks for."""

from __future__ import annotations

from collections.abc import Sequence
from typing import TYPE_CHECKING, Any, Final

from estimator.cli.options import settings_given
from estimator.errors import InputError, SchemeError

if TYPE_CHECKING:
    from estimator.scheme import Scheme

__all__ = ["SHORT", "STARTER", "scheme_asked"]

#: The scheme whose settings stand where no scheme is named.
STARTER: Final = "starter"
#: Options of their own for the settings that no default can be right about, and their paths.
SHORT: Final = {
    "--airflow": "airflow.outdoor_air",
    "--dew-point": "supply.dew_point",
    "--dry-bulb": "supply.dry_bulb",
}


def scheme_asked(
    command: str,
    name: str | None,
    set_: Sequence[str] | None,
    airflow: str | None,
    dew_point: str | None,
    dry_bulb: str | None,
) -> Scheme:
    """The scheme named, or the starter where none is, with what the command line sets.

    Raises
    ------
    InputError
        Neither a scheme nor one of the options is there, a setting is given twice, or a value is refused; an
        option's value is told by the option's name.
    """
    from estimator.scheme_file import load_scheme

    values = zip(SHORT, (airflow, dew_point, dry_bulb), strict=True)
    given = {option: value for option, value in values if value is not None}
    if name is None and not given:
        raise InputError(
            "no scheme is named",
            where=command,
            allowed=f"--scheme, or any of {', '.join(SHORT)} to go with the {STARTER}'s other settings",
            hint="'dewledger scheme list' shows the bundled schemes",
        )
    settings: dict[str, Any] = dict(settings_given(set_))
    for option, value in given.items():
        path = SHORT[option]
        twice = next((key for key in settings if key == path or key.startswith(f"{path}.")), None)
        if twice is not None:
            raise InputError(f"--set {twice} gives the same setting", where=option, allowed="one of them")
        settings[path] = value
    try:
        return load_scheme(STARTER if name is None else name, settings)
    except SchemeError as error:
        raise _by_option(error, given, STARTER if name is None else name) from error


def _by_option(error: SchemeError, given: dict[str, str], name: str) -> InputError:
    """The error with its problems told of the options that gave the values."""
    options = {SHORT[option]: option for option in given}
    if not any(_owner(problem.where, options) for problem in error.problems):
        return error
    told = []
    for problem in error.problems:
        option = _owner(problem.where, options)
        told.append(problem.at(option or f"{name}: {problem.where}"))
    return told[0] if len(told) == 1 else SchemeError.collect("", told)


def _owner(where: str, options: dict[str, str]) -> str:
    """The option whose setting ``where`` is, or is a part of."""
    for path, option in options.items():
        if where == path or where.startswith((f"{path}.", f"{path}[")):
            return option
    return ""
