"""From x to x: steps of the Rosenbrock method, their rows, the events on the way.

What `course` does around solve_ivp, as plain functions of floats and arrays: compiled, a whole
stretch is one call. It stops at a terminal event, at the end, at a fault, or when its share of
steps is used up; the caller then calls again.
"""

import numpy as np

from evolve.integrate.rosenbrock import (
    STAGES,
    difference_jacobian,
    error_norm,
    evaluate,
    step,
)

MORE, END, FIRED, STEP_LIMIT, DOMAIN, TOO_SMALL = range(6)
"""Why `advance` came back."""
SAFETY, LEAST_SHRINK, MOST_GROWTH = 0.9, 1.0 / 6.0, 5.0
REFUSED = 0.1
"""Share of its length that a step without a finite result is tried again with."""
ROW, EVENT = range(2)
LAST, LAST_ERROR, NEXT, SPENT = range(4)


def observe(look, x, y, p, quantities, gauges):
    """Fill what a state shows. Compiled, `look` is an address, and this a call through it."""
    look(x, y, p, quantities, gauges)


def copy(values, into):
    """An array into another one (spelt out: checking shapes took half the compilation)."""
    for i in range(len(values)):
        into[i] = values[i]


def first_step(y, f, rtol, atol, span):
    """A first step that changes the state by a hundredth of its size or tolerance."""
    size, change = 0.0, 0.0
    for i in range(len(atol)):
        scale = atol[i] + rtol * abs(y[i])
        size += (y[i] / scale) ** 2
        change += (f[i] / scale) ** 2
    if size < 1e-10 or change < 1e-300:
        return 1e-6 * span
    return min(0.01 * (size / change) ** 0.5, span)


def within(rates, look, x, y, f, h, p, room, held, state, quantities, gauges):
    """Fill the state a length h after (x, y), and what it shows: by a step of just that length,
    which is as accurate as the one it is part of; an interpolant over a long step is not."""
    step(rates, x, y, f, h, p, room, held, state)
    observe(look, x + h, state, p, quantities, gauges)


def root(
    rates, look, x, y, f, h, p, room, held, gauge, level, before, after, state, quantities, gauges
):
    """Length after which one gauge crosses its level within a step of length h.

    Bisection sped up by inverse quadratic interpolation: Chandrupatla 1997, Adv. Eng. Softw.
    28, 145. A gauge that jumps (it reads +-1/2) would be met again from before its jump: the
    length then lies past it.
    """
    if before * after > 0.0 or after == 0.0:
        return h
    a, fa, b, fb = h, after, 0.0, before
    c, fc, share = b, fb, 0.5
    width = max(1e-12 * h, 4e-16 * max(abs(x), abs(x + h)))
    for _ in range(100):
        length = a + share * (b - a)
        within(rates, look, x, y, f, length, p, room, held, state, quantities, gauges)
        value = gauges[gauge] - level
        if (value > 0.0) == (fa > 0.0):
            c, fc = a, fa
        else:
            c, fc, b, fb = b, fb, a, fa
        a, fa = length, value
        least = width / abs(b - c) if b != c else 1.0
        if least > 0.5 or fa == 0.0:
            break
        xi, phi = (a - b) / (c - b), (fa - fb) / (fc - fb)
        share = 0.5
        if phi * phi < xi and (1.0 - phi) ** 2 < 1.0 - xi:
            share = fa / (fb - fa) * fc / (fb - fc)
            share += (c - a) / (b - a) * fa / (fc - fa) * fb / (fc - fb)
        share = min(max(share, least), 1.0 - least)
    best = a if abs(fa) < abs(fb) else b
    if abs(fa) == 0.5:  # past a jump: where the sign is that of the far end
        best = a if fa * after > 0.0 else b
    return best


def crossed(watch, direction, before, after):
    """True if a reading went through zero in the direction that counts."""
    old, new = before[watch], after[watch]
    through = (old < 0.0 and new >= 0.0) or (old > 0.0 and new <= 0.0)
    return through and direction[watch] * (new - old) >= 0.0


def any_crossed(direction, before, after):
    """True if any reading did."""
    for watch in range(len(direction)):
        if crossed(watch, direction, before, after):
            return True
    return False


def read(gauges, gauge, level, readings):
    """Fill how far each watch's gauge is above its level."""
    for watch in range(len(gauge)):
        readings[watch] = gauges[gauge[watch]] - level[watch]


def out_of_bounds(y, low, high):
    """The first slot that left the range in which the equations hold, or -1."""
    for slot in range(len(low)):
        if not low[slot] < y[slot] < high[slot]:
            return slot
    return -1


def next_length(h, error, last_h, last_error):
    """Length of the next step: by the error, and by how the error grew (Gustafsson 1994, ACM
    Trans. Math. Softw. 20, 496)."""
    factor = min(max(error**0.25 / SAFETY, 1.0 / MOST_GROWTH), 1.0 / LEAST_SHRINK)
    if last_h > 0.0:
        predicted = last_h / h * (error * error / last_error) ** 0.25 / SAFETY
        factor = max(factor, min(max(predicted, 1.0 / MOST_GROWTH), 1.0 / LEAST_SHRINK))
    return h / factor


def find_events(
    rates, look, x, y, f, h, p, room, held, watches, before, after, lengths, rows, found
):
    """Rows of the events within one step, up to and with the first terminal one.

    Parameters
    ----------
    room, held : tuple, int
        As `step` has them.
    watches : tuple of ndarray
        gauge, level, direction, terminal of every watch.
    before, after : ndarray
        Readings at both ends of the step.
    lengths : ndarray
        Room to work in.
    rows, found : tuple of ndarray, ndarray
        To fill.

    Returns
    -------
    bool
        True if a terminal event was found.
    """
    gauge, level, direction, terminal = watches
    xs, states, quantities, gauges, counts = rows
    if not any_crossed(direction, before, after):
        return False
    for watch in range(len(gauge)):
        lengths[watch] = np.inf
        if crossed(watch, direction, before, after):
            lengths[watch] = root(
                rates, look, x, y, f, h, p, room, held, gauge[watch], level[watch], before[watch],
                after[watch], states[counts[ROW]], quantities[counts[ROW]], gauges,
            )  # fmt: skip
    while True:
        watch = 0
        for other in range(1, len(gauge)):
            if lengths[other] < lengths[watch]:
                watch = other
        if lengths[watch] > h:
            return False
        row, event = counts[ROW], counts[EVENT]
        xs[row] = x + lengths[watch]
        within(
            rates, look, x, y, f, lengths[watch], p, room, held, states[row], quantities[row],
            gauges,
        )  # fmt: skip
        found[event, 0], found[event, 1] = row, watch
        found[event, 2] = gauges[gauge[watch]] - level[watch]
        counts[ROW], counts[EVENT] = row + 1, event + 1
        if terminal[watch]:
            return True
        lengths[watch] = np.inf


def take_step(rates, x, y, f, p, h, end, control, room, new, memory):
    """The next step that meets the tolerance, shortened as often as it takes.

    Parameters
    ----------
    h : float
        Length to try first.
    memory : ndarray (4,)
        Length and error of the step before (0: none); length of the step to come; evaluations.

    Returns
    -------
    float
        Length of the step taken: 0.0 if none is short enough.
    """
    rtol, atol, floor, longest = control
    memory[SPENT] += difference_jacobian(
        rates, x, y, f, p, floor, room[0], new, room[4]
    )
    rejected = False
    while True:
        h = min(h, longest)
        if x + 1.0001 * h >= end:
            h = end - x
        elif x + 0.1 * h == x:
            return 0.0
        error = np.inf
        if step(rates, x, y, f, h, p, room, len(atol), new):
            error = error_norm(y, new, room[3], rtol, atol)
        memory[SPENT] += STAGES - 1
        if error <= 1.0:
            break
        h *= REFUSED if error == np.inf else max(SAFETY / error**0.25, LEAST_SHRINK)
        rejected = True
    error = max(error, 1e-4)
    following = next_length(h, error, memory[LAST], memory[LAST_ERROR])
    memory[LAST], memory[LAST_ERROR] = h, error
    memory[NEXT] = min(following, h) if rejected else following
    return h


def make_room(n, columns):
    """Jacobian and room to work in, for `step`."""
    return (
        np.empty((columns, n)), np.empty((columns, columns)), np.empty(columns, np.int64),
        np.empty((STAGES, n)), np.empty(n),
    )  # fmt: skip


def make_buffers(steps, n, columns, sizes, watches):
    """All that `advance` works in and fills, for up to `steps` steps a call.

    Parameters
    ----------
    steps, n, columns, watches : int
    sizes : tuple of int
        Number of quantities and of gauges.

    Returns
    -------
    rows : tuple of ndarray
        x, states, quantities; gauges; numbers of rows and of events.
    found : ndarray (rows, 3)
        Row, watch, what was left of the reading, of every event.
    room : tuple of ndarray
    state, readings : tuple of ndarray
        y, new, f, quantities; before, after, lengths.
    memory : ndarray (4,)
    """
    most = steps + 2 * watches + 2
    rows = (
        np.empty(most), np.empty((most, n)), np.empty((most, sizes[0])), np.empty(sizes[1]),
        np.zeros(2, np.int64),
    )  # fmt: skip
    state = (np.empty(n), np.empty(n), np.empty(n), np.empty(sizes[0]))
    readings = (np.empty(watches), np.empty(watches), np.empty(watches))
    return rows, np.empty((most, 3)), make_room(n, columns), state, readings, np.zeros(4)


def advance(rates, look, start, p, control, bounds, watches, limits, buffers):
    """Integrate until something ends it. Nothing is allocated here.

    Parameters
    ----------
    rates : callable
        rates(x, y, p, out) fills `out` with dy/dx.
    look : callable
        look(x, y, p, quantities, gauges) fills both.
    start : tuple
        x, end, h (0: choose), y.
    p : ndarray
        Parameters, handed through.
    control : tuple
        rtol; atol (m,) of the slots whose error counts; floor (columns,); longest step.
    bounds : tuple of ndarray (k,)
        Low and high ends of the first k slots.
    watches : tuple of ndarray (w,)
        gauge, level, direction, terminal.
    limits : tuple of int
        Evaluations and steps that may be spent.
    buffers : tuple
        From `make_buffers`. Rows hold accepted steps and events in their order.

    Returns
    -------
    reason, slot : int
        MORE, END, FIRED, STEP_LIMIT, DOMAIN or TOO_SMALL; the slot out of bounds.
    h : float
        Length of the next step.
    rows, events, evaluations, steps : int
        How many.
    """
    x, end, h, begin = start
    rows, found, room, (y, new, f, here), (before, after, lengths), memory = buffers
    xs, states, quantities, gauges, counts = rows
    counts[ROW], counts[EVENT], held = 0, 0, len(control[1])
    copy(begin, y)
    observe(look, x, y, p, here, gauges)
    read(gauges, watches[0], watches[1], before)
    evaluate(rates, x, y, p, f)
    memory[LAST], memory[SPENT], reason, slot, steps = 0.0, 1.0, MORE, -1, 0
    if h <= 0.0:
        h = first_step(y, f, control[0], control[1], end - x)
    while reason == MORE and steps < limits[1] and counts[ROW] + len(before) + 1 < len(xs):
        if memory[SPENT] > limits[0]:
            reason = STEP_LIMIT
            break
        taken = take_step(rates, x, y, f, p, h, end, control, room, new, memory)
        if taken == 0.0:
            reason = TOO_SMALL
            break
        h, steps = memory[NEXT], steps + 1
        arrived = end if x + taken >= end else x + taken
        observe(look, arrived, new, p, here, gauges)
        read(gauges, watches[0], watches[1], after)
        step_taken = (rates, look, x, y, f, taken, p, room, held)
        if find_events(*step_taken, watches, before, after, lengths, rows, found):
            reason = FIRED
            break
        slot = out_of_bounds(new, bounds[0], bounds[1])
        if slot >= 0:
            reason = DOMAIN
            break
        x = xs[counts[ROW]] = arrived
        copy(new, states[counts[ROW]])
        copy(here, quantities[counts[ROW]])
        counts[ROW] += 1
        copy(new, y)
        copy(after, before)
        evaluate(rates, x, y, p, f)
        memory[SPENT] += 1.0
        if x >= end:
            reason = END
    return reason, slot, h, counts[ROW], counts[EVENT], int(memory[SPENT]), steps
