"""Make the generated pages of ``docs/``, and put fresh output into the examples of all others.

    python tests/generators/make_docs.py [--check] [PAGE ...]

A page is named without its ending: ``validation``, ``getting-started``. Without names all are made; with
``--check`` none is written, and the status is 1 when one is stale. ``validation`` runs the published tests,
which takes most of a minute; all else takes seconds.
"""

from __future__ import annotations

import argparse
import os
import sys
import tempfile
from collections.abc import Callable, Iterable
from pathlib import Path

__all__ = ["GENERATED", "generated"]

#: Pages that nobody edits.
GENERATED = ("command-reference", "scheme-reference", "result-reference", "validation")


def generated(name: str) -> str:
    """A page that is made as a whole, other than the validation page."""
    from generators.command_page import command_page
    from generators.result_page import result_page
    from generators.scheme_page import scheme_page

    makers: dict[str, Callable[[], str]] = {
        "command-reference": command_page,
        "scheme-reference": scheme_page,
        "result-reference": result_page,
    }
    return makers[name]()


def _make(name: str, path: Path) -> tuple[str, list[str]]:
    """The page as it should be, and in what the one that is there differs."""
    from generators import examples, validation_page

    text = path.read_text(encoding="utf-8") if path.exists() else ""
    if name == "validation":
        recorded = validation_page.record()
        return validation_page.page_of(recorded), validation_page.differences(recorded, text)
    if name in GENERATED:
        fresh, problems = generated(name), []
    else:
        with tempfile.TemporaryDirectory() as folder:
            fresh, problems = examples.refreshed(text, Path(folder))
    if problems:
        raise SystemExit(f"{path.name}: " + "\n".join(problems))
    return fresh, [] if fresh == text else ["the text"]


def main(arguments: Iterable[str] | None = None) -> None:
    """Write the pages, or say which are stale."""
    from generators.markdown import DOCS

    parser = argparse.ArgumentParser(description="Make the pages of docs/.")
    parser.add_argument("--check", action="store_true", help="write nothing; status 1 when a page is stale")
    parser.add_argument("pages", nargs="*", metavar="PAGE", help="names without ending; all when left out")
    given = parser.parse_args(None if arguments is None else list(arguments))
    pages = {path.stem: path for path in sorted(DOCS.glob("*.md"))} | {
        name: DOCS / f"{name}.md" for name in GENERATED
    }
    unknown = set(given.pages) - set(pages)
    if unknown:
        parser.error(f"no page {', '.join(sorted(unknown))}; there are {', '.join(sorted(pages))}")
    stale = False
    for name in given.pages or pages:
        fresh, differences = _make(name, pages[name])
        if not differences:
            continue
        stale = True
        sys.stdout.write(f"{name}: {'stale' if given.check else 'written'}\n")
        if not given.check:
            pages[name].write_text(fresh, encoding="utf-8", newline="\n")
    if stale and given.check:
        raise SystemExit(1)


if __name__ == "__main__":
    sys.path.insert(0, str(Path(__file__).resolve().parents[1]))
    with tempfile.TemporaryDirectory() as home:
        os.environ["DEWLEDGER_HOME"] = home
        main()
