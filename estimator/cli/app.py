"""The application: its commands, and what becomes of every error."""

from __future__ import annotations

import re
import traceback
from collections.abc import Callable
from typing import Annotated, Any, Final

import typer
from typer.core import TyperGroup

from estimator.cli import demo, hour, scheme, weather, year
from estimator.cli.options import examples, require_command
from estimator.cli.output import tell
from estimator.errors import CalculationError, InputError

__all__ = ["app"]

# typer has its own copy of click or uses the one that is installed, by version; the class of all usage
# errors is found through one that typer has always exported
_USAGE: Final[type[Exception]] = next(c for c in typer.BadParameter.__mro__ if c.__name__ == "ClickException")

_NO_COMMAND: Final = re.compile(r"No such command '(.*?)'")
DONE, BAD_INPUT, DEFECT, INTERRUPTED = 0, 2, 3, 130
_DEFECT: Final = "this is a defect of the program, not of your input; nothing was written."


class Commands(TyperGroup):
    """A group that turns every error into one message and an exit status."""

    def main(self, args: Any = None, *, standalone_mode: bool = True, **rest: Any) -> Any:  # type: ignore[override]
        """Run; end the process with the status, or return it where ``standalone_mode`` is off."""
        run = super().main
        status = _status_of(lambda: run(args, standalone_mode=False, **rest))
        if standalone_mode:
            raise SystemExit(status)
        return status


def _status_of(run: Callable[[], Any]) -> int:
    try:
        status = run()
    except InputError as error:
        tell(error.message())
        return BAD_INPUT
    except CalculationError as error:
        tell(f"{_DEFECT} {error}. Please report it with the command, the scheme and the weather file.")
        return DEFECT
    except _USAGE as error:
        tell(_usage_message(error))
        return BAD_INPUT
    except (KeyboardInterrupt, typer.Abort):
        tell("interrupted")
        return INTERRUPTED
    except Exception:  # noqa: BLE001 - whatever else happens is a defect, told with its trace
        tell(f"{_DEFECT} Please report it with the command and what follows.\n{traceback.format_exc()}")
        return DEFECT
    if status == INTERRUPTED:
        # typer has caught the interruption itself, without a word
        tell("interrupted")
    return status if isinstance(status, int) else DONE


def _usage_message(error: Any) -> str:
    """One message for a command line that cannot be read."""
    text = str(error.format_message()).rstrip(".")
    context = getattr(error, "ctx", None)
    command = _NO_COMMAND.match(text)
    if command and context:
        text = _unknown("command", repr(command[1]), command[1], context.command.list_commands(context))
    elif type(error).__name__ == "NoSuchOption" and context:
        name = error.option_name
        known = [option for parameter in context.command.params for option in parameter.opts]
        text = _unknown("option", name, name, [option for option in known if option.startswith("-")])
    else:
        text = text[:1].lower() + text[1:]
    if context is None:
        return text
    return f"{text}{' See' if text.endswith('?') else '; see'} '{context.command_path} --help'."


def _unknown(kind: str, shown: str, name: str, known: list[str]) -> str:
    from estimator.quantities import likeliest

    hint = likeliest(name, known)
    return f"no such {kind} {shown}" + (f"; {hint}" if hint else "")


app = typer.Typer(
    name="dewledger",
    cls=Commands,
    add_completion=True,
    rich_markup_mode=None,
    pretty_exceptions_enable=False,
    context_settings={"help_option_names": ["--help", "-h"]},
)

EXAMPLES: Final = examples(
    "dewledger demo",
    "dewledger weather sablewick-bay",
    "dewledger year sablewick-bay --scheme boiler-reheat",
    "dewledger scheme new my-scheme.toml",
)


def _version(wanted: bool) -> None:
    if wanted:
        from estimator import __version__
        from estimator.cli.output import say

        say(f"dewledger {__version__}\n")
        raise typer.Exit


@app.callback(epilog=EXAMPLES, invoke_without_command=True)
def dewledger(
    context: typer.Context,
    version: Annotated[
        bool, typer.Option("--version", callback=_version, is_eager=True, help="Print the version and stop.")
    ] = False,
) -> None:
    """What it takes to dry outdoor air by cooling it and heating it again, hour by hour over a year.

    Exit status: 0 done; 1 done, but something asked for fails; 2 the input cannot be used; 3 a defect of the
    program.
    """
    require_command(context)


app.command("demo", epilog=demo.EXAMPLES)(demo.demo)
app.command("weather", epilog=weather.EXAMPLES)(weather.weather)
app.command("year", epilog=year.EXAMPLES)(year.year)
app.command("hour", epilog=hour.EXAMPLES)(hour.hour)
app.add_typer(scheme.app, name="scheme")
