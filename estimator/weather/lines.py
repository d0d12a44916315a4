"""The lines of a text file as arrays, so that rows can be counted and named without a loop."""

from __future__ import annotations

import re

import numpy as np
from numpy.typing import NDArray

from estimator.errors import WeatherError
from estimator.weather.formats import FORMATS_READ

__all__ = ["Lines", "text_of"]


def text_of(data: bytes) -> bytes:
    """``data`` as ASCII-compatible text: byte order mark dropped, every line ended by a line feed.

    UTF-16 becomes UTF-8. Raises ``WeatherError`` for a binary file.
    """
    if data.startswith((b"\xff\xfe", b"\xfe\xff")):
        data = data.decode("utf-16", errors="replace").encode()
    data = data.removeprefix(b"\xef\xbb\xbf")
    if b"\x00" in data:
        raise WeatherError("is a binary file", allowed=f"a text file: {FORMATS_READ}")
    return data.replace(b"\r\n", b"\n").replace(b"\r", b"\n")


class Lines:
    """The lines that are not blank.

    ``number`` holds their line numbers in the file, counted from 1; every array has the shape (lines,).
    """

    def __init__(self, text: bytes) -> None:
        if not text.endswith(b"\n"):
            text += b"\n"
        self._text = text
        codes = np.frombuffer(text, dtype=np.uint8)
        stops = np.flatnonzero(codes == 10)
        starts = np.concatenate(([0], stops[:-1] + 1))
        # a line of spaces or of the end-of-file mark of old systems is blank
        filled = np.maximum.reduceat(codes, starts) > 32
        self._codes = codes
        self._starts, self._stops = starts[filled], stops[filled]
        self.number: NDArray[np.int64] = np.flatnonzero(filled) + 1

    def __len__(self) -> int:
        return len(self.number)

    def __getitem__(self, index: int) -> str:
        """One line, decoded as UTF-8 or, failing that, Latin-1."""
        raw = self._text[self._starts[index] : self._stops[index]]
        try:
            return raw.decode()
        except UnicodeDecodeError:
            return raw.decode("latin-1")

    def after(self, count: int) -> bytes:
        """Every line after the first ``count``, blank ones left out."""
        if count >= len(self):
            return b""
        start, stop = int(self._starts[count]), int(self._stops[-1]) + 1
        body = self._text[start:stop]
        if self.number[-1] - self.number[count] == len(self) - 1 - count:
            return body
        return re.sub(rb"\n(?:[\x00-\x09\x0b-\x20]*\n)+", b"\n", body)

    def occurrences(self, sign: str, count: int) -> NDArray[np.int64]:
        """How often an ASCII character stands in each line after the first ``count``."""
        places = np.flatnonzero(self._codes == ord(sign))
        before, until = (np.searchsorted(places, at[count:]) for at in (self._starts, self._stops))
        return np.asarray(until - before, dtype=np.int64)

    def lengths(self, count: int) -> NDArray[np.int64]:
        """Length in bytes of each line after the first ``count``."""
        return np.asarray(self._stops[count:] - self._starts[count:], dtype=np.int64)
