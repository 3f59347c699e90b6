"""One step of a Rosenbrock method: implicit, yet without a Newton iteration that could be fooled.

A step solves six linear systems with one matrix, 1/(h gamma) - J. Where an overflow rises
exponentially a Newton iteration may settle on a false state; this has none. Plain functions of
floats and arrays, which run as they stand and compiled.

The state is `columns` slots on which the equations depend, then others on which nothing does. Of
these the first, up to `held` slots in all, go through the stages and have an error; the rest are
quadratures: h times a weighted mean of their rates and of what the Jacobian adds. It is what the
stages come to, so that linear invariants are kept as well as differences are exact.
"""

import numpy as np

GAMMA = 0.25
STAGES = 6
A = np.array([
    [0.0, 0.0, 0.0, 0.0, 0.0],
    [1.544, 0.0, 0.0, 0.0, 0.0],
    [0.9466785280815826, 0.2557011698983284, 0.0, 0.0, 0.0],
    [3.314825187068521, 2.896124015972201, 0.9986419139977817, 0.0, 0.0],
    [1.221224509226641, 6.019134481288629, 12.53708332932087, -0.6878860361058950, 0.0],
    [1.221224509226641, 6.019134481288629, 12.53708332932087, -0.6878860361058950, 1.0],
])  # fmt: skip
COUPLING = np.array([
    [0.0, 0.0, 0.0, 0.0, 0.0],
    [-5.6688, 0.0, 0.0, 0.0, 0.0],
    [-2.430093356833875, -0.2063599157091915, 0.0, 0.0, 0.0],
    [-0.1073529058151375, -9.594562251023355, -20.47028614809616, 0.0, 0.0],
    [7.496443313967647, -10.24680431464352, -33.99990352819905, 11.70890893206160, 0.0],
    [8.083246795921522, -7.981132988064893, -31.52159432874371, 16.31930543123136,
     -6.058818238834054],
])  # fmt: skip
"""Coefficients of Rodas4, order 4 (3) with 6 stages: Hairer & Wanner, Solving Ordinary
Differential Equations II, section IV.7. From memory; a test measures the order."""
LAST = STAGES - 1
MEAN = GAMMA * np.linalg.solve(
    np.eye(STAGES) - GAMMA * np.column_stack((COUPLING, np.zeros(STAGES))).T,
    np.append(A[LAST], 1.0),
)
"""Weight of every stage in a quadrature."""
DIFFERENCE = 4e-11
"""Relative step of the difference Jacobian, on which the order of the method rests. An overflow
bends within 2e-5 of the radius: a straight line over 4e-11 errs by as much as rounding does."""


def evaluate(rates, x, y, p, out):
    """Fill `out` with dy/dx. Compiled, `rates` is an address, and this a call through it."""
    rates(x, y, p, out)


def difference_jacobian(rates, x, y, f, p, floor, jacobian, point, shifted):
    """Fill d rates/d y by forward differences; columns of slots that stand still stay zero.

    Parameters
    ----------
    rates : callable
        rates(x, y, p, out) fills `out` with dy/dx.
    f : ndarray (n,)
        rates at (x, y).
    floor : ndarray (columns,)
        Smallest size of each slot that a difference is scaled to.
    jacobian : ndarray (columns, n)
        Filled: d rates[i]/d y[slot] at [slot, i].
    point, shifted : ndarray (n,)
        Room to work in.

    Returns
    -------
    int
        Evaluations spent.
    """
    n, spent = len(y), 0
    for i in range(n):
        point[i] = y[i]
    for slot in range(len(floor)):
        if f[slot] == 0.0:
            for i in range(n):
                jacobian[slot, i] = 0.0
            continue
        moved = y[slot] + DIFFERENCE * max(abs(y[slot]), floor[slot])
        point[slot] = moved
        evaluate(rates, x, point, p, shifted)
        spent += 1
        inverse = 1.0 / (moved - y[slot])
        for i in range(n):
            jacobian[slot, i] = (shifted[i] - f[i]) * inverse
        point[slot] = y[slot]
    return spent


def decompose(jacobian, diagonal, matrix, order):
    """LU decomposition, with exchange of rows, of diagonal * 1 - J over the columns of J.

    Parameters
    ----------
    matrix : ndarray (columns, columns)
        Filled with both factors; on the diagonal, one over it.
    order : ndarray of int (columns,)
        Filled with the order of the rows.

    Returns
    -------
    bool
        False if the matrix is singular or not finite, or its determinant negative: a mode then
        grows by more than e^(1/gamma) within the step, and an implicit step would damp what it
        ought to follow.
    """
    size, positive = matrix.shape[0], True
    for i in range(size):
        order[i] = i
        for j in range(size):
            matrix[i, j] = -jacobian[j, i]
        matrix[i, i] += diagonal
    for k in range(size):
        best = k
        for i in range(k + 1, size):
            if abs(matrix[i, k]) > abs(matrix[best, k]):
                best = i
        if not 0.0 < abs(matrix[best, k]) < np.inf:
            return False
        positive = positive == ((matrix[best, k] > 0.0) == (best == k))
        if best != k:
            order[k], order[best] = order[best], order[k]
            for j in range(size):
                matrix[k, j], matrix[best, j] = matrix[best, j], matrix[k, j]
        inverse = 1.0 / matrix[k, k]
        matrix[k, k] = inverse
        for i in range(k + 1, size):
            factor = matrix[i, k] * inverse
            matrix[i, k] = factor
            if factor != 0.0:
                for j in range(k + 1, size):
                    matrix[i, j] -= factor * matrix[k, j]
    return positive


def solve(jacobian, diagonal, matrix, order, right, u, stage, held):
    """Solve (diagonal - J) u[stage] = right: the columns by the factors, then what hangs on them."""
    size, inverse = matrix.shape[0], 1.0 / diagonal
    for i in range(size):
        total = right[order[i]]
        for j in range(i):
            total -= matrix[i, j] * u[stage, j]
        u[stage, i] = total
    for i in range(size - 1, -1, -1):
        total = u[stage, i]
        for j in range(i + 1, size):
            total -= matrix[i, j] * u[stage, j]
        u[stage, i] = total * matrix[i, i]
    for i in range(size, held):
        total = right[i]
        for j in range(size):
            total += jacobian[j, i] * u[stage, j]
        u[stage, i] = total * inverse


def step(rates, x, y, f, h, p, room, held, new):
    """One step of length h from (x, y).

    Parameters
    ----------
    f : ndarray (n,)
        rates at (x, y).
    room : tuple of ndarray
        Jacobian (columns, n), filled; room for the matrix, the order of its rows, the stages
        (6, n) and the right side (n,). Of the last stage the first `held` slots are left as
        the estimate of the error.
    held : int
        Slots whose error counts.
    new : ndarray (n,)
        Filled with the state at x + h.

    Returns
    -------
    bool
        False if no step of this length can be taken.
    """
    jacobian, matrix, order, u, right = room
    n, size, diagonal = len(y), matrix.shape[0], 1.0 / (h * GAMMA)
    if not decompose(jacobian, diagonal, matrix, order):
        return False
    for i in range(n):
        right[i] = new[i] = f[i]
    for i in range(held, n):
        new[i] *= MEAN[0]
    solve(jacobian, diagonal, matrix, order, right, u, 0, held)
    for stage in range(1, STAGES):
        for i in range(held):
            total = y[i]
            for j in range(stage):
                total += A[stage, j] * u[j, i]
            new[i] = total
        evaluate(rates, x, new, p, right)
        for i in range(held, n):
            new[i] += MEAN[stage] * right[i]
        for i in range(held):
            total = 0.0
            for j in range(stage):
                total += COUPLING[stage, j] * u[j, i]
            right[i] += total / h
        solve(jacobian, diagonal, matrix, order, right, u, stage, held)
    for i in range(held):
        new[i] += u[LAST, i]
    for slot in range(size):
        mean = 0.0
        for stage in range(STAGES):
            mean += MEAN[stage] * u[stage, slot]
        for i in range(held, n):
            new[i] += jacobian[slot, i] * mean
    for i in range(held, n):
        new[i] = y[i] + h * new[i]
    return True


def error_norm(y, new, u, rtol, atol):
    """Root mean square of the error of a step over its tolerance; inf if it is not finite.

    `atol` (m,) covers the first m slots: those whose error counts.
    """
    total = 0.0
    for i in range(len(atol)):
        scaled = u[LAST, i] / (atol[i] + rtol * max(abs(y[i]), abs(new[i])))
        total += scaled * scaled
    for i in range(len(y)):
        total += 0.0 * new[i]  # NaN if any slot is not finite
    if not total < np.inf:
        return np.inf
    return (total / len(atol)) ** 0.5
