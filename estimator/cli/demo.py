"""``dewledger demo``: an answer in seconds, from nothing."""

from __future__ import annotations

from pathlib import Path
from typing import Annotated, Final

import typer

from estimator.cli.folder import check_folder, write_folder
from estimator.cli.options import Quiet, UnitOption, examples, unit_system
from estimator.cli.output import progress, say

__all__ = ["EXAMPLES", "demo"]

EXAMPLES: Final = examples("dewledger demo", "dewledger demo --units ip --out try-ip")


def demo(
    out: Annotated[
        str, typer.Option("--out", metavar="DIR", help="The folder that the files are written into.")
    ] = "dewledger-demo",
    force: Annotated[
        bool,
        typer.Option("--force", help="Write into a folder with other files in it, and over files changed."),
    ] = False,
    units: UnitOption = "si",
    quiet: Quiet = False,
) -> None:
    """Compare three schemes at six synthetic sites, in seconds.

    An invented owner, Marrowby Libraries, asks which reheat costs least. The answer is printed; all that is
    behind it goes into a folder: annual figures, results in full, hours, schemes to edit. A second run
    writes over its own files, but over none that were changed since.
    """
    from estimator.demo import run_demo
    from estimator.report.demo import demo_files, demo_page

    system = unit_system(units)
    check_folder(Path(out), force=force)
    with progress() as advance:
        found = run_demo(advance)
        files = demo_files(found, system, out)
    write_folder(Path(out), files, force=force)
    if not quiet:
        say(demo_page(found, system, out))
