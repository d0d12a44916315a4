"""A folder of results: written whole, and never over what somebody else put there or has changed since."""

from __future__ import annotations

import contextlib
from collections.abc import Mapping
from contextlib import ExitStack
from pathlib import Path
from typing import Final

from estimator.errors import InputError

__all__ = ["CHECKSUMS", "check_folder", "write_folder"]

#: Stands in every folder that the program has written: the SHA-256 of each file as it was written.
CHECKSUMS: Final = "checksums.txt"


def check_folder(folder: Path, *, force: bool) -> None:
    """Refuse, before anything is computed, a folder that cannot be ours.

    Raises
    ------
    InputError
        It is a file, it would stand in a folder that does not exist, or it holds files and no list of ours.
    """
    where = f"--out {folder}"
    try:
        if folder.exists() and not folder.is_dir():
            raise InputError("is a file, not a folder", where=where, hint="name another folder")
        if not folder.parent.is_dir():
            raise InputError(f"there is no folder {str(folder.parent)!r}", where=where, hint="make it first")
        filled = folder.is_dir() and any(folder.iterdir())
    except (OSError, ValueError) as error:
        raise InputError(f"cannot be used ({_reason(error)})", where=where) from error
    if filled and not force and not (folder / CHECKSUMS).is_file():
        raise InputError(
            "has files in it that this program did not write",
            where=where,
            hint="name another folder, or write into it with --force",
        )


def write_folder(folder: Path, files: Mapping[str, str], *, force: bool) -> None:
    """Write texts by their names in the folder (one level of subfolders), all of them or none.

    What else is in the folder stays. A file that is there and is not as the program once wrote it is written
    over with ``force`` alone.
    """
    from estimator.files import replacing, sha256

    where = f"--out {folder}"
    data = {name: text.encode() for name, text in files.items()}
    sums = {name: sha256(content) for name, content in data.items()}
    if not force:
        _refuse_changed(folder, sums, where)
    listed = "".join(f"{digest}  {name}\n" for name, digest in sums.items())
    folders = [folder, *sorted({(folder / name).parent for name in files} - {folder})]
    made = [path for path in folders if not path.is_dir()]
    try:
        for path in made:
            path.mkdir()
        with ExitStack() as stack:
            # the files appear in the opposite order: the list of them comes last
            for name, content in {CHECKSUMS: listed.encode(), **data}.items():
                stream = stack.enter_context(replacing(folder / name))
                stream.write(content)
                # whatever the disk has against one of them shows before the first is put in place
                stream.flush()
    except BaseException as error:
        for path in reversed(made):
            with contextlib.suppress(OSError):
                path.rmdir()
        if isinstance(error, OSError | ValueError):
            raise InputError(f"cannot be written ({_reason(error)})", where=where) from error
        raise


def _refuse_changed(folder: Path, sums: Mapping[str, str], where: str) -> None:
    from estimator.files import sha256

    try:
        lines = (folder / CHECKSUMS).read_text(encoding="utf-8").splitlines()
    except (OSError, ValueError):
        lines = []
    written = {name: digest for digest, _, name in (line.partition("  ") for line in lines)}
    changed = []
    for name, digest in sums.items():
        try:
            found = sha256((folder / name).read_bytes())
        except (OSError, ValueError):
            # what is not there can be written; what cannot be read shows when it is
            continue
        if found not in (digest, written.get(name)):
            changed.append(name)
    if changed:
        more = f" and {len(changed) - 1} more" if len(changed) > 1 else ""
        raise InputError(
            f"{changed[0]}{more}: changed since this program wrote it",
            where=where,
            hint="name another folder, or write over it with --force",
        )


def _reason(error: Exception) -> str:
    return getattr(error, "strerror", None) or str(error)
