"""``dewledger scheme``: write, list and show schemes."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated

import typer

from estimator.cli.options import (
    Json,
    Set,
    UnitOption,
    examples,
    require_command,
    scheme_completion,
    settings_given,
    unit_system,
)
from estimator.cli.output import CONSOLE, check_outputs, say, tell, writing
from estimator.errors import InputError

__all__ = ["app"]

app = typer.Typer(
    add_completion=False,
    rich_markup_mode=None,
)


@app.callback(
    epilog=examples("dewledger scheme list", "dewledger scheme show starter"), invoke_without_command=True
)
def scheme(context: typer.Context) -> None:
    """Write, list and show schemes: ways of treating outdoor air."""
    require_command(context)


@app.command("new", epilog=examples("dewledger scheme new my-scheme.toml"))
def new(
    path: Annotated[str, typer.Argument(metavar="PATH", help="Where to write; '-' prints.")] = "scheme.toml",
    force: Annotated[bool, typer.Option("--force", help="Write over a file that exists.")] = False,
) -> None:
    """Write a commented scheme file to start from.

    It has every section and every setting, with what each means and takes.
    """
    from estimator.scheme_file import starter_text

    if path == CONSOLE:
        say(starter_text())
        return
    check_outputs({"scheme new": path})
    if not force and Path(path).exists():
        raise InputError(
            "exists already", where=path, hint="name another file, or write over it with --force"
        )
    with writing({"scheme new": path}) as streams:
        streams["scheme new"].write(starter_text())
    tell(f"wrote {path}; 'dewledger scheme show {path}' lists its settings")


@app.command("list", epilog=examples("dewledger scheme list"))
def list_() -> None:
    """List the schemes that come with the program.

    Each name may stand in place of a file wherever a scheme is asked for.
    """
    from estimator.report.scheme import scheme_list
    from estimator.scheme_file import bundled_schemes

    say(scheme_list(bundled_schemes()))


@app.command(
    "show",
    epilog=examples(
        "dewledger scheme show boiler-reheat",
        'dewledger scheme show starter --set "fan.total_pressure=4 inH2O" --units ip',
    ),
)
def show(
    file: Annotated[
        str,
        typer.Argument(
            metavar="FILE",
            autocompletion=scheme_completion,
            help="A scheme file, or the name of a bundled scheme.",
        ),
    ],
    set_: Set = None,
    units: UnitOption = "si",
    json: Json = None,
) -> None:
    """Show every setting of a scheme, and where it came from.

    Value, unit, origin (file, default, --set), meaning, and the source of a default. The resolved hash is
    that of all settings together: two files that mean the same have the same one.
    """
    from estimator.scheme_file import load_scheme

    system = unit_system(units)
    with writing({"--json": json}, (file,)) as streams:
        scheme = load_scheme(file, settings_given(set_))
        if "--json" in streams:
            from estimator.report.documents import dumps, scheme_document

            streams["--json"].write(dumps(scheme_document(scheme)))
    if json != CONSOLE:
        from estimator.report.scheme import scheme_page

        say(scheme_page(scheme, system))
