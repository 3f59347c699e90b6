"""The Rosenbrock method as plain functions, against closed forms."""

import numpy as np
import pytest

from evolve.integrate.advance import DOMAIN, END, FIRED, MORE, STEP_LIMIT, TOO_SMALL, advance, make_buffers, make_room
from evolve.integrate.rosenbrock import MEAN, decompose, difference_jacobian, solve, step


def one_step(rates, y, h, columns=None, held=None):
    """(new state, stages) of one step from y."""
    n = len(y)
    columns = columns or n
    f, new, room = np.empty(n), np.empty(n), make_room(n, columns)
    rates(0.0, y, None, f)
    difference_jacobian(rates, 0.0, y, f, None, np.full(columns, 1e-3), room[0], new, room[4])
    assert step(rates, 0.0, y, f, h, None, room, held or columns, new)
    return new, room[3]


def swing(x, y, p, out):
    """A pendulum: nonlinear, with an energy."""
    out[0], out[1] = y[1], -np.sin(y[0])


def reference(x, y0):
    """The pendulum by another method, far more accurate."""
    from scipy.integrate import solve_ivp

    def right_side(x, y):
        return [y[1], -np.sin(y[0])]

    return solve_ivp(right_side, (0.0, x), y0, method="DOP853", rtol=1e-13, atol=1e-14).y[:, -1]


def errors_of(quantity, lengths):
    """Slope of log error against log step."""
    found = [quantity(h) for h in lengths]
    return np.polyfit(np.log(lengths), np.log(found), 1)[0]


def test_linear_systems():
    """Against numpy.linalg, with rows that must be exchanged; quadratures by their own row."""
    random = np.random.default_rng(5)
    for size in range(1, 8):
        jacobian, right = random.normal(size=(size, size + 2)), random.normal(size=size + 2)
        matrix, order, u = np.empty((size, size)), np.empty(size, int), np.empty(size + 2)
        whole = 1e-3 * np.eye(size + 2)
        whole[:, :size] -= jacobian.T
        positive = np.linalg.det(whole[:size, :size]) > 0.0
        assert decompose(jacobian, 1e-3, matrix, order) == positive
        solve(jacobian, 1e-3, matrix, order, right, u[np.newaxis], 0, size + 2)
        assert u == pytest.approx(np.linalg.solve(whole, right), rel=1e-8)
    assert not decompose(np.zeros((2, 2)), 0.0, np.empty((2, 2)), np.empty(2, int))


def test_order():
    """Local error h^5: order 4. The estimate of it, h^4: order 3 (Hairer & Wanner II, IV.7)."""
    y0 = np.array([1.0, 0.3])
    lengths = np.array([0.4, 0.2, 0.1])

    def local(h):
        return np.abs(one_step(swing, y0, h)[0] - reference(h, y0)).max()

    def estimate(h):
        return np.abs(one_step(swing, y0, h)[1][5]).max()

    assert errors_of(local, lengths) == pytest.approx(5.0, abs=0.5)
    assert errors_of(estimate, lengths) == pytest.approx(4.0, abs=0.5)


def test_stiff_decay_in_one_step():
    """L-stable: a step a million times the decay time leaves nothing (closed form: exp)."""
    new, _ = one_step(lambda x, y, p, out: np.copyto(out, -1e6 * y), np.array([1.0]), 1.0)
    assert abs(new[0]) < 1e-5


@pytest.mark.parametrize("held", [1, 2])
def test_what_hangs_on_the_rest_keeps_a_linear_invariant(held):
    """What one slot loses another gains, to rounding, at any tolerance: as a quadrature or held."""

    def leak(x, y, p, out):
        out[0] = -(y[0] ** 3)
        out[1] = y[0] ** 3

    new, _ = one_step(leak, np.array([1.0, 0.0]), 1.0, columns=1, held=held)
    assert new[0] + new[1] == pytest.approx(1.0, abs=4e-16)
    assert 0.5 < new[0] < 0.7  # 1/sqrt(3): closed form


def test_weights_of_a_quadrature():
    """They sum to one, as those of any method of order 1 do."""
    assert MEAN.sum() == pytest.approx(1.0, abs=1e-13)


# The walk -----------------------------------------------------------------------------------


def look(x, y, p, quantities, gauges):
    quantities[0], quantities[1] = y[0], y[1]
    gauges[0], gauges[1] = y[0], x


def walk(rates=swing, y=(1.0, 0.3), end=10.0, watches=(), rtol=1e-8, longest=np.inf,
         bounds=(-10.0, 10.0), limits=(10**6, 10**4), h=0.0, x=0.0):  # fmt: skip
    n = len(y)
    table = np.array(watches, dtype=float).reshape(-1, 4)
    columns = (
        table[:, 0].astype(int), table[:, 1].copy(), table[:, 2].astype(int),
        table[:, 3].astype(bool),
    )  # fmt: skip
    buffers = make_buffers(limits[1], n, n, (2, 2), len(watches))
    reason, slot, h, rows, events, evaluations, steps = advance(
        rates, look, (x, end, h, np.array(y)), None,
        (rtol, np.full(n, rtol), np.full(n, 1e-3), longest),
        (np.full(1, bounds[0]), np.full(1, bounds[1])), columns, limits, buffers,
    )  # fmt: skip
    xs, states, quantities = (array[:rows] for array in buffers[0][:3])
    return reason, slot, h, xs, states, quantities, buffers[1][:events], evaluations, steps


def test_walk_to_the_end():
    reason, _, _, xs, states, quantities, found, evaluations, steps = walk()
    assert reason == END and xs[-1] == 10.0 and len(found) == 0
    assert len(xs) == steps and evaluations > 6 * steps
    assert states[-1] == pytest.approx(reference(10.0, [1.0, 0.3]), abs=1e-6)
    assert (quantities == states).all()


def test_events_in_their_order():
    """Half-swings of a small pendulum lie pi apart (closed form), the first at atan."""
    rates = lambda x, y, p, out: np.copyto(out, np.array([y[1], -y[0]]))  # noqa: E731
    watches = [(0, 0.0, 0, False), (1, 5.0, 1, False), (0, 0.9999, 1, True)]
    reason, _, _, xs, _, _, found, _, _ = walk(rates, (1.0, 0.0), 20.0, watches, rtol=1e-10)
    assert reason == FIRED
    times = xs[found[:, 0].astype(int)]
    assert found[:, 1].tolist() == [0, 0, 1, 2]
    late = 2.0 * np.pi - np.arccos(0.9999)
    assert times == pytest.approx([np.pi / 2, 1.5 * np.pi, 5.0, late], abs=1e-7)
    assert (np.diff(xs) >= 0.0).all() and xs[-1] == times[-1]


def test_only_the_asked_direction():
    *_, found, _, _ = walk(watches=[(0, 0.0, 1, False)], end=7.0)
    assert len(found) == 1


def test_going_on_after_a_share_of_the_steps():
    """Stopping every ten steps changes nothing but the memory of the last step's error."""
    x, y, h, parts = 0.0, (1.0, 0.3), 0.0, 0
    while True:
        reason, _, h, xs, states, *_ = walk(y=y, x=x, h=h, limits=(10**6, 10))
        x, y, parts = xs[-1], tuple(states[-1]), parts + 1
        if reason != MORE:
            break
    assert reason == END and parts > 3
    assert states[-1] == pytest.approx(reference(10.0, [1.0, 0.3]), abs=1e-6)


def test_faults():
    assert walk(limits=(50, 10**4))[0] == STEP_LIMIT
    explode = lambda x, y, p, out: np.copyto(out, np.array([y[0] ** 2, 0.0]))  # noqa: E731
    reason, slot, *_ = walk(explode, (1.0, 0.0), 2.0, bounds=(-1.0, 50.0))
    assert (reason, slot) == (DOMAIN, 0)
    assert walk(explode, (1.0, 0.0), 2.0, bounds=(-1.0, np.inf))[0] == TOO_SMALL


def test_a_growing_mode_is_not_stepped_over():
    """An implicit step of 1000 growth times would damp it: R(z) -> 0 on either side."""

    def grow(x, y, p, out):
        out[0], out[1] = y[0], 0.0

    reason, _, _, xs, states, *_ = walk(grow, (1e-3, 1.0), 1e3, bounds=(-1.0, 1.0), rtol=1e-6)
    assert reason == DOMAIN and 4.0 < xs[-1] < np.log(1e3)
    assert states[-1][0] == pytest.approx(1e-3 * np.exp(xs[-1]), rel=1e-2)


def test_longest_step():
    xs = walk(longest=0.01, end=1.0)[3]
    assert np.diff(xs).max() <= 0.01 * (1 + 1e-9)
