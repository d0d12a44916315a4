"""Roots, one a cell of an array: of a single unknown between bounds, and of coupled unknowns together.

An element's steps depend on nothing but itself, so its result does not depend on what else is in the
array; finished elements drop out.
"""

from __future__ import annotations

from collections.abc import Callable
from typing import Any, Final, TypeVar

import numpy as np
from numpy.typing import NDArray

from estimator.errors import ConvergenceError
from estimator.moist_air import Array

__all__ = ["between", "coupled"]

_STRAIGHT_STEPS: Final = 25
_MOST_STEPS: Final = 80
#: bounds this near are as near as a root in degC can be had
_SMALLEST_GAP: Final = 1e-12
_COUPLED_TOLERANCE: Final = 1e-6
_MOST_COUPLED_STEPS: Final = 30
_DIFFERENCE_STEP: Final = 1e-4

Result = TypeVar("Result")


def between(
    residual: Callable[[Array, NDArray[np.intp]], Array],
    low: Array,
    high: Array,
    tolerance: float,
    what: str,
) -> Array:
    """The root of ``residual`` between ``low`` and ``high``, elementwise, shape (n,).

    ``residual(x, which)`` gives the residuals of the elements ``which`` at ``x``. It must be monotone in
    ``x`` and have opposite signs at the bounds, or be zero at one. Regula falsi after Anderson and Bjorck
    (BIT 13, 1973): as quick as the secant rule where the residual is nearly straight, never outside the
    bounds; then bisection for what is left. Where the residual jumps over zero, as coil heat does when
    water begins to freeze, the near side on which it is negative is returned.

    Raises
    ------
    ConvergenceError
        The residual does not change sign.
    """
    which = np.arange(low.size)
    a, b = low.astype(float), high.astype(float)
    fa, fb = residual(a, which), residual(b, which)
    if np.any(fa * fb > 0.0):
        raise ConvergenceError(f"{what}: no root between the bounds in {np.sum(fa * fb > 0.0)} hours")
    nearer = np.abs(fa) < np.abs(fb)
    a, b, fa, fb = (np.where(nearer, *pair) for pair in ((b, a), (a, b), (fb, fa), (fa, fb)))
    root = b.copy()
    for step in range(_MOST_STEPS):
        apart = np.abs(b - a) > _SMALLEST_GAP
        root[which] = np.where(apart | (fb <= 0.0), b, a)
        unfinished = apart & (np.abs(fb) > tolerance)
        which, a, b, fa, fb = (v[unfinished] for v in (which, a, b, fa, fb))
        if which.size == 0:
            return root
        straight = b - fb * (b - a) / (fb - fa)
        x = np.clip(straight, np.minimum(a, b), np.maximum(a, b)) if step < _STRAIGHT_STEPS else 0.5 * (a + b)
        fx = residual(x, which)
        crossed = fx * fb < 0.0
        weight = 1.0 - fx / fb
        weight = np.where(weight > 0.0, weight, 0.5)
        a, fa = np.where(crossed, b, a), np.where(crossed, fb, fa * weight)
        b, fb = x, fx
    raise ConvergenceError(f"{what}: {which.size} hours did not converge in {_MOST_STEPS} steps")


def coupled(run: Callable[[Array], tuple[Array, Result]], start: Array) -> Result:
    """Run an airstream whose devices depend on each other through a vector of unknowns.

    ``start`` has the shape (unknowns, ..., hours); ``run(unknowns)`` gives the residuals, of the same
    shape and in kelvin or its like, and what it computed on the way. Newton's rule with differences, all
    unknowns of an hour together, to 1e-6; an hour that has come so near is left as it is. With no unknowns
    the airstream is run once.

    Raises
    ------
    ConvergenceError
        An hour stays above the tolerance.
    """
    unknowns = start.astype(float)
    for _ in range(_MOST_COUPLED_STEPS):
        residual, result = run(unknowns)
        open_ = np.asarray(~(np.abs(residual) <= _COUPLED_TOLERANCE).all(axis=0))
        if not open_.any():
            return result
        unknowns = np.where(open_, unknowns - _newton_step(run, unknowns, residual, open_), unknowns)
    raise ConvergenceError("coupled devices did not agree; the scheme may have no steady state")


def _newton_step(
    run: Callable[[Array], tuple[Array, Result]], unknowns: Array, residual: Array, open_: NDArray[np.bool_]
) -> Array:
    count = unknowns.shape[0]
    slopes = np.empty((count, *residual.shape))
    for j in range(count):
        moved = unknowns.copy()
        moved[j] += _DIFFERENCE_STEP
        slopes[j] = (run(moved)[0] - residual) / _DIFFERENCE_STEP
    # (unknown, residual, ..., hours) -> (..., hours, residual, unknown); finished hours need no slope
    jacobian: Any = np.moveaxis(slopes, (1, 0), (-2, -1))
    jacobian = np.where(open_[..., None, None], jacobian, np.eye(count))
    right = np.moveaxis(residual, 0, -1)[..., None]
    try:
        step = np.linalg.solve(jacobian, right)[..., 0]
    except np.linalg.LinAlgError as error:
        raise ConvergenceError("coupled devices: an unknown has no effect on its residual") from error
    return np.asarray(np.moveaxis(step, -1, 0))
