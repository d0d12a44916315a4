"""The command line: each command parses, calls the library, and renders."""

from __future__ import annotations

from collections.abc import Sequence

__all__ = ["main"]


def main(arguments: Sequence[str] | None = None) -> None:
    """Run the command line and end the process.

    Exit status: 0 done; 1 done, but something asked for fails; 2 the input cannot be used; 3 a defect of the
    program; 130 interrupted.
    """
    from estimator.cli.app import app
    from estimator.cli.output import prepare_console

    prepare_console()
    app(arguments, prog_name="dewledger")
