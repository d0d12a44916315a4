"""``docs/command-reference.md``: every command, argument and option, from the application's own declarations.

What the application declares is read, not what its help prints: that is laid out differently by other
versions of the library below it.
"""

from __future__ import annotations

import inspect
import re
from collections.abc import Iterator
from typing import Any, Final

from generators.markdown import MARK, cell, code, paragraph, table

__all__ = ["command_page"]

_INTRODUCTION: Final = (
    "Every command answers `--help` (`-h`) with what stands here. A page goes to standard output and so does "
    "whatever is asked for with the path `-`; messages go to standard error. Files that are asked for appear "
    "whole or not at all. Values take units, `'2.5 m3/s'` or `'5000 cfm'`: see "
    "[values and units](scheme-reference.md#values)."
)
#: Options that the library below the application adds, whose words change with its version.
_COMPLETION: Final = (
    (
        "`--install-completion`",
        "",
        "Install completion of commands, options and names for the shell in use.",
        "",
    ),
    ("`--show-completion`", "", "Print what `--install-completion` would install.", ""),
)


def command_page() -> str:
    """The page as text."""
    from estimator.cli.app import app

    lines = [MARK, "", "# Command reference", "", *paragraph(_INTRODUCTION), *_exit_statuses()]
    for path, callback, epilog, extra in _commands(app, "dewledger"):
        lines += _command(path, callback, epilog, extra)
    return "\n".join(lines).rstrip("\n") + "\n"


def _exit_statuses() -> list[str]:
    from estimator.cli import main

    (text,) = re.findall(r"Exit status: (.*?)\.", " ".join((main.__doc__ or "").split()))
    rows = [part.strip().split(" ", 1) for part in text.split(";")]
    return ["## Exit status", "", *table(("status", "meaning"), rows), ""]


def _commands(app: Any, path: str) -> Iterator[tuple[str, Any, str, Any]]:
    """Path, function, end of the help page, and options that are not the function's own."""
    root = app.registered_callback
    epilog = root.epilog if isinstance(root.epilog, str) else ""
    extra = _COMPLETION if app._add_completion else ()
    yield path, root.callback, epilog, extra
    for command in app.registered_commands:
        if not command.hidden:
            yield f"{path} {command.name}", command.callback, command.epilog or "", ()
    for group in app.registered_groups:
        yield from _commands(group.typer_instance, f"{path} {group.name}")


def _command(path: str, callback: Any, epilog: str, extra: Any) -> list[str]:
    import typer
    from typer.utils import get_params_from_function

    declared = {
        name: parameter.default
        for name, parameter in get_params_from_function(callback).items()
        if isinstance(parameter.default, typer.models.ParameterInfo)
    }
    arguments = {n: i for n, i in declared.items() if isinstance(i, typer.models.ArgumentInfo)}
    options = {n: i for n, i in declared.items() if n not in arguments}
    annotated = inspect.signature(callback).parameters
    several = {
        name: str(annotated[name].annotation).startswith(("list", "Annotated[list")) for name in declared
    }
    group = path in ("dewledger", "dewledger scheme")
    usage = [path, *(_usage(i, several[n]) for n, i in arguments.items())]
    usage += ["COMMAND"] * group + ["[OPTIONS]"] * bool(options or extra)
    lines = [f"## {path}", "", "```text", " ".join(usage), "```", ""]
    text = inspect.cleandoc(callback.__doc__ or "")
    if not text:
        raise KeyError(f"{path} has no help text")
    for part in text.split("\n\n"):
        # the statuses have a table of their own
        if not part.startswith("Exit status"):
            lines += paragraph(part)
    rows = [(code(i.metavar), cell(_help(path, n, i)), _default(i)) for n, i in arguments.items()]
    if rows:
        lines += [*table(("argument", "meaning", "default"), rows), ""]
    rows = [_option(path, n, i, several[n]) for n, i in options.items()] + list(extra)
    if rows:
        lines += [*table(("option", "takes", "meaning", "default"), rows), ""]
    return lines + _examples(epilog)


def _usage(info: Any, several: bool) -> str:
    name = f"{info.metavar}{'...' if several else ''}"
    return name if info.default is ... else f"[{name}]"


def _help(path: str, name: str, info: Any) -> str:
    if not info.help:
        raise KeyError(f"{name} of {path} has no help text")
    return str(info.help)


def _option(path: str, name: str, info: Any, several: bool) -> tuple[str, str, str, str]:
    spelled = ", ".join(code(option) for option in info.param_decls)
    # the text of a flag's metavar is the library's
    takes = code(info.metavar) if info.metavar else ""
    return spelled, takes + " *(repeatable)*" * several, cell(_help(path, name, info)), _default(info)


def _default(info: Any) -> str:
    if info.default is ...:
        return "required"
    return code(str(info.default)) if isinstance(info.default, str) else ""


def _examples(epilog: str) -> list[str]:
    lines = [line.strip() for line in epilog.splitlines()]
    commands = [line for line in lines if line.startswith("dewledger ")]
    return ["```sh", *commands, "```", ""] if commands else []
