"""Files: complete or absent, hashed, and where the program keeps its own."""

from __future__ import annotations

import hashlib
import json
import os
import tempfile
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import IO, Any

from estimator.errors import InputError

__all__ = ["canonical_json", "replacing", "sha256", "user_folder", "write_bytes", "write_text"]


def sha256(data: bytes) -> str:
    """Hexadecimal SHA-256 of ``data``."""
    return hashlib.sha256(data).hexdigest()


def canonical_json(value: Any) -> bytes:
    """The one spelling of ``value`` that is hashed: sorted keys, no spaces, shortest exact floats."""
    return json.dumps(
        value, sort_keys=True, separators=(",", ":"), ensure_ascii=False, allow_nan=False
    ).encode()


def user_folder() -> Path:
    """Where caches live: ``DEWLEDGER_HOME`` if set, else the platform's cache folder of the user."""
    home = os.environ.get("DEWLEDGER_HOME")
    if home:
        return Path(home)
    import platformdirs

    return Path(platformdirs.user_cache_dir("dewledger", appauthor=False))


@contextmanager
def replacing(path: Path, mode: str = "wb") -> Iterator[IO[Any]]:
    """Open a file that takes the place of ``path`` when the block ends well, and vanishes when it does not.

    Raises
    ------
    InputError
        The folder does not exist or cannot be written to, or ``path`` is a folder.
    """
    text = "b" not in mode
    # a link is followed: what it points to is written, and the link stays
    target = Path(os.path.realpath(path))
    with _told(path):
        if target.exists() and not target.is_file():
            raise InputError("is not a regular file", where=str(path), hint="name a file")
        handle, name = tempfile.mkstemp(dir=target.parent, prefix=f".{target.name}.", suffix=".part")
    part = Path(name)
    try:
        with os.fdopen(
            handle, mode, encoding="utf-8" if text else None, newline="" if text else None
        ) as stream:
            yield stream
            with _told(path):
                stream.flush()
                os.fsync(stream.fileno())
        with _told(path):
            # mkstemp's own rights are for the owner alone; give what a plain open would have given
            umask = os.umask(0)
            os.umask(umask)
            part.chmod(0o666 & ~umask)
            part.replace(target)
    except BaseException:
        part.unlink(missing_ok=True)
        raise


@contextmanager
def _told(path: Path) -> Iterator[None]:
    try:
        yield
    except OSError as error:
        raise InputError(
            f"cannot be written ({error.strerror or error})",
            where=str(path),
            hint="name a file in a folder that exists and may be written to",
        ) from error


def write_text(path: Path, text: str) -> None:
    """Write ``text`` as UTF-8, complete or not at all."""
    write_bytes(path, text.encode())


def write_bytes(path: Path, data: bytes) -> None:
    """Write ``data``, complete or not at all."""
    with replacing(path) as stream:
        stream.write(data)
