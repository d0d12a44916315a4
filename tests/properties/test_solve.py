"""The two solvers, on problems whose roots are known by other means."""

from __future__ import annotations

import numpy as np
import pytest
from hypothesis import given
from hypothesis import strategies as st

from estimator.airstream.solve import between, coupled
from estimator.errors import ConvergenceError


def cubes(targets):
    return lambda x, which: x**3 - targets[which]


def test_a_root_between_bounds_is_found():
    targets = np.array([8.0, 27.0, 1e-3, 0.0])
    root = between(cubes(targets), np.zeros(4), np.full(4, 5.0), 1e-12, "cube root")
    np.testing.assert_allclose(root, np.cbrt(targets), atol=1e-4)
    np.testing.assert_allclose(root[:2], [2.0, 3.0], atol=1e-12)


@given(st.lists(st.floats(0.0, 100.0), min_size=1, max_size=20))
def test_a_root_does_not_depend_on_its_company(targets):
    array = np.array(targets)
    together = between(cubes(array), np.zeros(array.size), np.full(array.size, 5.0), 1e-10, "cube root")
    for i, target in enumerate(targets):
        alone = between(cubes(np.array([target])), np.zeros(1), np.full(1, 5.0), 1e-10, "cube root")
        assert alone[0] == together[i]


def test_where_the_residual_jumps_the_negative_side_is_returned():
    root = between(
        lambda x, which: np.where(x < 1.0, -0.3, 0.4), np.zeros(1), np.full(1, 3.0), 1e-9, "a jump"
    )
    assert root[0] < 1.0
    assert root[0] == pytest.approx(1.0, abs=1e-9)


def test_no_root_between_the_bounds_is_told():
    with pytest.raises(ConvergenceError, match="no root between the bounds in 1 hours"):
        between(lambda x, which: x + 1.0, np.zeros(1), np.ones(1), 1e-9, "nothing")


def test_without_unknowns_the_airstream_runs_once():
    runs = []

    def run(unknowns):
        runs.append(unknowns.shape)
        return unknowns, "done"

    assert coupled(run, np.empty((0, 24))) == "done"
    assert runs == [(0, 24)]


def circle_and_line(radius):
    """x^2 + y^2 = r^2 and x = y: both unknowns are r over the square root of two."""

    def run(u):
        return np.stack([u[0] ** 2 + u[1] ** 2 - radius**2, u[0] - u[1]]), u

    return run


def test_two_unknowns_are_solved_together():
    radius = np.array([[1.0, 2.0, 5.0]])
    found = coupled(circle_and_line(radius), np.stack([np.full((1, 3), 2.0), np.full((1, 3), 1.0)]))
    np.testing.assert_allclose(found, np.broadcast_to(radius / np.sqrt(2.0), (2, 1, 3)), atol=1e-6)


def test_a_coupled_hour_does_not_depend_on_its_company():
    def cube(target):
        return lambda u: (u**3 - target, u)

    alone = coupled(cube(np.array([8.0])), np.array([[2.5]]))
    beside = coupled(cube(np.array([8.0, 1e6])), np.array([[2.5, 2.5]]))
    assert alone[0, 0] == beside[0, 0]


def test_coupled_devices_that_do_not_agree_are_told():
    with pytest.raises(ConvergenceError, match="did not agree"):
        coupled(lambda u: (u**2 + 1.0, u), np.array([[0.7]]))
    with pytest.raises(ConvergenceError, match="no effect"):
        coupled(lambda u: (np.ones_like(u), u), np.array([[0.7]]))
