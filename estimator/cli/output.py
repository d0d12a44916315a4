"""What leaves the program: text to the console that never fails on it, and files that are whole or absent."""

from __future__ import annotations

import errno
import io
import os
import stat
import sys
from collections.abc import Callable, Iterable, Iterator, Mapping
from contextlib import ExitStack, contextmanager
from pathlib import Path
from typing import IO, Final

from estimator.errors import InputError

__all__ = ["CONSOLE", "check_outputs", "prepare_console", "progress", "say", "tell", "writing"]

#: The path that stands for standard output.
CONSOLE: Final = "-"
#: A line of a terminal that the next one takes the place of.
_LINE: Final = "\r{:<78.78}"
#: How a pipe that the reader has closed shows itself; the second is what Windows says.
_CLOSED: Final = (errno.EPIPE, errno.EINVAL)


def prepare_console() -> None:
    """Let the console show a question mark for a letter that it does not have, instead of failing."""
    for stream in (sys.stdout, sys.stderr):
        reconfigure: Callable[..., None] | None = getattr(stream, "reconfigure", None)
        if reconfigure is not None:
            reconfigure(errors="replace")


def say(text: str) -> None:
    """Write a result to standard output; a reader that has had enough is no error."""
    try:
        sys.stdout.write(_shown(text))
        sys.stdout.flush()
    except OSError as error:
        if error.errno not in _CLOSED:
            raise InputError(f"cannot be written ({error.strerror})", where="standard output") from error
        # what is left in the buffer would fail again when the interpreter ends
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())


def tell(message: str) -> None:
    """Write a message to standard error."""
    sys.stderr.write(_shown(f"dewledger: {message}\n"))
    sys.stderr.flush()


@contextmanager
def progress() -> Iterator[Callable[[str], None]]:
    """A line on standard error that says how far a run is: at a terminal only, and gone when it ends."""
    if not sys.stderr.isatty():
        yield lambda _text: None
        return

    def advance(text: str) -> None:
        sys.stderr.write(_LINE.format(_shown(text)))
        sys.stderr.flush()

    try:
        yield advance
    finally:
        advance("")
        sys.stderr.write("\r")
        sys.stderr.flush()


def _shown(text: str) -> str:
    """The text without what would steer a terminal: names come from files that anyone may have written."""
    if text.isascii() and "\x1b" not in text and "\r" not in text:
        return text
    return "".join(c if c == "\n" or c.isprintable() else "?" for c in text)


@contextmanager
def writing(
    asked: Mapping[str, str | None], inputs: Iterable[str | Path] = ()
) -> Iterator[dict[str, io.StringIO]]:
    """Open what was asked for, before anything is computed; all of it appears when the block ends well.

    Parameters
    ----------
    asked
        Path, or ``-`` for standard output, by option; None for an option that was not given.
    inputs
        Files that are read, which must not be written over.

    Yields
    ------
    A text stream for each option that was given. What goes to standard output is shown once the files are in
    place.

    Raises
    ------
    InputError
        A path that cannot be written, that is read, or that is given twice.
    """
    check_outputs(asked, inputs)
    given = {option: path for option, path in asked.items() if path is not None}
    texts = {option: io.StringIO() for option in given}
    with ExitStack() as stack:
        files = {
            option: stack.enter_context(_file(f"{option} {path}", path))
            for option, path in given.items()
            if path != CONSOLE
        }
        yield texts
        for option, file in files.items():
            with _told(f"{option} {given[option]}"):
                file.write(texts[option].getvalue())
                # whatever the disk has against one of them shows before the first is put in place
                file.flush()
    for option in given.keys() - files.keys():
        say(texts[option].getvalue())


def check_outputs(asked: Mapping[str, str | None], inputs: Iterable[str | Path] = ()) -> None:
    """Refuse paths that cannot be written, that are read, or that are given twice."""
    # the name of a bundled scheme is no file
    read = [Path(path) for path in inputs if Path(path).is_file()]
    seen: list[tuple[str, str]] = []
    for option, path in asked.items():
        if path is None:
            continue
        where = f"{option} {path}"
        for other, earlier in seen:
            if _same(path, earlier):
                raise InputError(
                    f"is given for {other} too", where=where, allowed="a path of its own for each"
                )
        if path != CONSOLE and any(_same(path, str(file)) for file in read):
            raise InputError("is a file that is read", where=where, hint="name another file to write to")
        if path != CONSOLE:
            _check_place(Path(path), where)
        seen.append((option, path))


def _check_place(path: Path, where: str) -> None:
    with _told(where):
        if path.is_dir():
            raise InputError("is a folder", where=where, hint="name a file")
        if not path.parent.is_dir():
            raise InputError(f"there is no folder {str(path.parent)!r}", where=where, hint="make it first")
        if path.exists() and not stat.S_ISREG(path.stat().st_mode):
            raise InputError(
                "is not a regular file", where=where, hint=f"{CONSOLE!r} writes to standard output"
            )


def _same(path: str, other: str) -> bool:
    if CONSOLE in (path, other):
        return path == other
    try:
        return Path(path).samefile(other)
    except (OSError, ValueError):
        return os.path.normcase(os.path.realpath(path)) == os.path.normcase(os.path.realpath(other))


@contextmanager
def _told(where: str) -> Iterator[None]:
    try:
        yield
    except (OSError, ValueError) as error:
        reason = getattr(error, "strerror", None) or str(error)
        raise InputError(f"cannot be written ({reason})", where=where) from error


@contextmanager
def _file(where: str, path: str) -> Iterator[IO[str]]:
    from estimator.files import replacing

    # a link is followed, so that what it points to is written and the link stays
    target = Path(os.path.realpath(path))
    finished = False
    try:
        with replacing(target, "w") as stream:
            yield stream
            finished = True
    except OSError as error:
        # one from within the block is not about this file
        if not finished:
            raise
        raise InputError(f"cannot be written ({error.strerror or error})", where=where) from error
