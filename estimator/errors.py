"""The exception tree.

::

    DewledgerError
    ├── InputError             what the user gave cannot be used; the command line exits with status 2
    │   ├── QuantityError      a value with a unit, a range or a list that cannot be read
    │   ├── SchemeError        a scheme file or a setting; carries every problem found at once
    │   └── WeatherError       a weather file that cannot be read, or must not be trusted
    └── CalculationError       the program's own arithmetic did not hold; never the user's fault
        ├── ConvergenceError   an inverse or a coupling did not reach its tolerance
        └── BalanceError       heat or water does not add up over a device or over the whole airstream
"""

from __future__ import annotations

from collections.abc import Iterable

__all__ = [
    "BalanceError",
    "CalculationError",
    "ConvergenceError",
    "DewledgerError",
    "InputError",
    "QuantityError",
    "SchemeError",
    "WeatherError",
]


class DewledgerError(Exception):
    """Base of everything this package raises on purpose."""


class InputError(DewledgerError):
    """Bad input, told once and in full.

    Parameters
    ----------
    problem
        What is wrong, including the offending value.
    where
        File, row, hour or key in which it stands.
    allowed
        What would have been accepted.
    hint
        What to do next.
    """

    def __init__(self, problem: str, *, where: str = "", allowed: str = "", hint: str = "") -> None:
        self.problem = problem
        self.where = where
        self.allowed = allowed
        self.hint = hint
        super().__init__(self.message())

    def message(self) -> str:
        """The whole message on one line."""
        text = f"{self.where}: {self.problem}" if self.where else self.problem
        if self.allowed:
            text += f"; allowed: {self.allowed}"
        if self.hint:
            text += f"; {self.hint}"
        return text

    def at(self, where: str) -> InputError:
        """The same error, of the same class, told of another place."""
        return type(self)(self.problem, where=where, allowed=self.allowed, hint=self.hint)


class QuantityError(InputError):
    """A value with a unit, a range or a list that cannot be read."""


class SchemeError(InputError):
    """One or more problems of a scheme file, all told at once."""

    def __init__(
        self,
        problem: str,
        *,
        where: str = "",
        allowed: str = "",
        hint: str = "",
        problems: Iterable[InputError] = (),
    ) -> None:
        self.problems = tuple(problems)
        super().__init__(problem, where=where, allowed=allowed, hint=hint)

    @classmethod
    def collect(cls, where: str, problems: Iterable[InputError]) -> SchemeError:
        """One error out of many, each on a line of its own."""
        found = tuple(problems)
        if len(found) == 1:
            only = found[0]
            place = f"{where}: {only.where}" if only.where else where
            return cls(only.problem, where=place, allowed=only.allowed, hint=only.hint, problems=found)
        lines = "".join(f"\n  {p.message()}" for p in found)
        return cls(f"{len(found)} problems{lines}", where=where, problems=found)


class WeatherError(InputError):
    """A weather file that cannot be read, or must not be trusted."""


class CalculationError(DewledgerError):
    """The program's own arithmetic did not hold."""


class ConvergenceError(CalculationError):
    """An inverse or a coupling did not reach its tolerance."""


class BalanceError(CalculationError):
    """Heat or water does not add up."""
