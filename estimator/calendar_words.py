"""Days and months by name: ``"mon..fri"``, ``"may..oct"``, ``["jan", "jul"]``."""

from __future__ import annotations

from typing import Any, Final

from estimator.errors import InputError

__all__ = ["DAYS", "MONTHS", "names_to_days", "names_to_months", "short"]

DAYS: Final = ("monday", "tuesday", "wednesday", "thursday", "friday", "saturday", "sunday")
MONTHS: Final = (
    "january",
    "february",
    "march",
    "april",
    "may",
    "june",
    "july",
    "august",
    "september",
    "october",
    "november",
    "december",
)


def short(name: str) -> str:
    """The three letters that stand for a day or a month."""
    return name[:3]


def names_to_days(given: Any) -> tuple[int, ...]:
    """Days, Monday being 0, from a name, a span that may wrap around the week, or a list of either.

    Raises
    ------
    InputError
        A word that is no day, or an empty list.

    >>> names_to_days("fri..mon")
    (0, 4, 5, 6)
    """
    return _numbers(given, DAYS, 0)


def names_to_months(given: Any) -> tuple[int, ...]:
    """Months, 1 to 12, from a name, a span that may wrap around the year, or a list of either.

    Raises
    ------
    InputError
        A word that is no month, or an empty list.

    >>> names_to_months(["nov..feb", "july"])
    (1, 2, 7, 11, 12)
    """
    return _numbers(given, MONTHS, 1)


def _numbers(given: Any, names: tuple[str, ...], first: int) -> tuple[int, ...]:
    letters = [short(name) for name in names]
    allowed = f"{', '.join(letters)}, a span such as '{letters[0]}..{letters[4]}', or a list of them"

    def index(word: Any) -> int:
        folded = word.strip().lower() if isinstance(word, str) else ""
        for known in (letters, list(names)):
            if folded in known:
                return known.index(folded)
        raise InputError(f"{word!r} is not known", allowed=allowed)

    items = given if isinstance(given, list) else [given]
    found: set[int] = set()
    for item in items:
        start, dots, end = item.partition("..") if isinstance(item, str) else (item, "", "")
        a = index(start)
        b = index(end) if dots else a
        found.update((a + i) % len(names) + first for i in range((b - a) % len(names) + 1))
    if not found:
        raise InputError("is empty", allowed=allowed)
    return tuple(sorted(found))
