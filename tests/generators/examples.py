"""The examples of a page: found, run, and their output put where the page shows it.

A block is run by what it is and by the comment on the line above it:

- ``sh``: every line is a ``dewledger`` command, and must succeed. ``<!-- refused -->``: must end with
  status 2. ``<!-- not run: reason -->``: is left alone. ``<!-- job: posix -->`` and the like: is run from a
  fresh copy, before a change is taken in.
- ``python``: is executed. ``toml``: is a scheme, or sections of one.
- ``text`` below ``<!-- output: ... -->``: shows what the last block printed, or parts of it: the sections
  under some headings (``Year, Hours``), the ``beginning`` before the first heading, ``all``, the
  ``message`` on standard error, or a span of lines (``from "coil:" to "fan:"``).

The blocks of a page run in one folder, one after the other. A scheme or weather file that they name and
that is not there is put there: the starter, and a sample.
"""

from __future__ import annotations

import contextlib
import io
import re
import shlex
import shutil
from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from pathlib import Path
from typing import Any, Final

from generators.markdown import MARK, ROOT

__all__ = ["Block", "blocks", "elsewhere", "refreshed", "scheme_text"]

#: Which sample stands in for a weather file of the reader's own.
_OWN_SITE: Final = "sablewick-bay"
_FENCE: Final = re.compile(r"```(\w*)\s*$")
_COMMENT: Final = re.compile(r"<!--\s*(.*?)\s*-->\s*$")
_SPAN: Final = re.compile(r'from "(.*?)" to "(.*?)"')


@dataclass(frozen=True, kw_only=True)
class Block:
    """One fenced block: its language, the comment above it, its text, and where that stands.

    ``line`` counts from 1 and is that of the text's first line; ``end`` is that of the closing fence.
    """

    language: str
    mark: str
    text: str
    line: int
    end: int


def blocks(page: str) -> Iterator[Block]:
    """Every fenced block of a page."""
    lines = page.splitlines()
    number = 0
    while number < len(lines):
        fence = _FENCE.match(lines[number])
        if fence is None:
            number += 1
            continue
        end = next(i for i in range(number + 1, len(lines)) if lines[i].startswith("```"))
        comment = _COMMENT.match(lines[number - 1]) if number else None
        yield Block(
            language=fence[1],
            mark=comment[1] if comment else "",
            text="\n".join(lines[number + 1 : end]),
            line=number + 2,
            end=end + 1,
        )
        number = end + 1


def elsewhere(block: Block) -> bool:
    """Whether a block is not run here, for a reason that its mark gives."""
    return block.mark.startswith("not run: ") or block.mark in ("job: posix", "own: posix", "tests: posix")


def refreshed(page: str, folder: Path) -> tuple[str, list[str]]:
    """The page with the output of its examples as it is now, and what went wrong in running them."""
    lines, problems, changes = page.split("\n"), [], []
    alone = page.startswith(MARK)
    run = _Runner(folder)
    for block in blocks(page):
        if alone and block.language == "sh":
            # nothing leads from one command of a reference to the next
            run = _Runner(folder / str(block.line))
        try:
            shown = run.block(block)
        except Exception as error:  # noqa: BLE001 - whatever becomes of an example is told with its line
            problems.append(f"line {block.line}: {error!r}")
        else:
            if shown is not None:
                changes.append((block, shown))
    for block, shown in reversed(changes):
        lines[block.line - 1 : block.end - 1] = shown.split("\n")
    return "\n".join(lines), problems


class _Runner:
    """Runs the blocks of one page in one folder."""

    def __init__(self, folder: Path) -> None:
        folder.mkdir(parents=True, exist_ok=True)
        self._folder = folder
        self._out = self._err = ""

    def block(self, block: Block) -> str | None:
        """Run one block; the text that it should show, if it is one that shows output."""
        if elsewhere(block):
            return None
        if block.language == "sh":
            self._commands(block)
        elif block.language == "python":
            self._python(block)
        elif block.language == "toml":
            self._scheme(block)
        elif block.language != "text":
            raise ValueError(f"a block of {block.language or 'no'} language: sh, python, toml or text")
        elif block.mark.startswith("output: "):
            return self._shown(block.mark.removeprefix("output: "))
        return None

    def _commands(self, block: Block) -> None:
        wanted = 2 if block.mark == "refused" else 0
        self._provide(block.text)
        for line in block.text.splitlines():
            words = shlex.split(line, comments=True)
            if words[:1] != ["dewledger"]:
                raise ValueError(f"{line!r} is no dewledger command, and the block has no reason not to run")
            status = self._run(lambda words=words: _command(words[1:]))
            if status != wanted:
                raise ValueError(f"{line!r} ends with {status}: {self._err}")

    def _run(self, action: Callable[[], Any]) -> Any:
        out, err = io.StringIO(), io.StringIO()
        with contextlib.chdir(self._folder), contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
            result = action()
        self._out, self._err = out.getvalue(), err.getvalue()
        return result

    def _python(self, block: Block) -> None:
        self._provide(block.text)
        # an empty first part gives errors the line of the page
        code = compile("\n" * (block.line - 1) + block.text, "page", "exec")
        self._run(lambda: exec(code, {"__name__": "__main__"}))

    def _scheme(self, block: Block) -> None:
        from estimator.scheme_file import parse_scheme

        parse_scheme(scheme_text(block.text))

    def _provide(self, text: str) -> None:
        """Put the files that the reader is supposed to have into the folder."""
        from estimator.scheme_file import starter_text

        made = re.findall(r"scheme new (\S+)", text)
        for name in re.findall(r"[\w./-]+\.(?:epw|toml)\b", text):
            path = self._folder / name
            if path.exists() or name in made:
                continue
            path.parent.mkdir(parents=True, exist_ok=True)
            if path.suffix == ".toml":
                path.write_text(starter_text(), encoding="utf-8", newline="\n")
            else:
                samples = ROOT / "weather_samples"
                own = samples / path.name
                shutil.copyfile(own if own.exists() else samples / f"{_OWN_SITE}.epw", path)

    def _shown(self, parts: str) -> str:
        if parts == "all":
            return self._out.rstrip("\n")
        if parts == "message":
            return self._err.rstrip("\n")
        span = _SPAN.fullmatch(parts)
        if span is not None:
            return _between(self._out.splitlines(), span[1], span[2])
        sections = _sections(self._out.splitlines())
        return "\n\n".join("\n".join(sections[name.strip()]) for name in parts.split(","))


def _command(words: Sequence[str]) -> int:
    from typer.main import get_command

    from estimator.cli.app import app

    return int(get_command(app).main(list(words), prog_name="dewledger", standalone_mode=False))


def _sections(lines: Sequence[str]) -> dict[str, list[str]]:
    """The sections of a page by their headings, underlined by dashes; what comes before is the beginning."""
    found: dict[str, list[str]] = {"beginning": []}
    here = found["beginning"]
    for number, line in enumerate(lines):
        under = lines[number + 1] if number + 1 < len(lines) else ""
        if line and under == "-" * len(line):
            here = found.setdefault(line, [])
        here.append(line)
    for body in found.values():
        while body and not body[-1]:
            body.pop()
    return found


def _between(lines: Sequence[str], first: str, last: str) -> str:
    """From the line that starts with ``first`` to before the one that starts with ``last``."""
    start = next(i for i, line in enumerate(lines) if line.strip().startswith(first))
    end = next(i for i, line in enumerate(lines) if i > start and line.strip().startswith(last))
    return "\n".join(lines[start:end]).rstrip("\n")


def scheme_text(text: str) -> str:
    """Sections of a scheme as a whole one: what every scheme needs, where they do not have it."""
    head = "" if "[scheme]" in text else '[scheme]\nname = "example"\n'
    if "[airflow]" not in text:
        head += '[airflow]\noutdoor_air = "1 m3/s"\n'
    tail = "" if "[supply]" in text else '\n[supply]\ndew_point = "11 degC"\ndry_bulb = "20 degC"\n'
    return head + text + tail
