"""Smooth monotone curves through the rows of a table: piecewise cubics, continuous in slope.

A curve keeps every rise and fall of its rows and adds none of its own. It is made once, before
an integration; reading it off takes a bisection and a cubic.
"""


def _end_slope(first_width, second_width, first, second):
    """Slope at an end of the curve: of a parabola through three rows, kept monotone."""
    slope = (2.0 * first_width + second_width) * first - first_width * second
    slope /= first_width + second_width
    if slope * first <= 0.0:
        return 0.0
    if first * second <= 0.0 and abs(slope) > 3.0 * abs(first):
        return 3.0 * first
    return slope


def slopes(x, y):
    """Slopes of a monotone piecewise cubic at its rows.

    Parameters
    ----------
    x, y : sequence of float (n,)
        Rows, x rising, n >= 3.

    Returns
    -------
    list of float (n,)
        0 at a maximum or minimum among the rows; elsewhere a weighted harmonic mean of the
        slopes on both sides.

    References
    ----------
    Fritsch & Carlson 1980, SIAM J. Numer. Anal. 17, 238; Fritsch & Butland 1984, SIAM J. Sci.
    Stat. Comput. 5, 300 (the mean).
    """
    widths = [b - a for a, b in zip(x, x[1:])]
    secants = [(b - a) / width for a, b, width in zip(y, y[1:], widths)]
    found = [_end_slope(widths[0], widths[1], secants[0], secants[1])]
    for i in range(1, len(widths)):
        before, after = secants[i - 1], secants[i]
        if before * after <= 0.0:
            found.append(0.0)
            continue
        left, right = widths[i - 1], widths[i]
        first, second = 2.0 * right + left, right + 2.0 * left
        found.append((first + second) / (first / before + second / after))
    found.append(_end_slope(widths[-1], widths[-2], secants[-1], secants[-2]))
    return found


def cubics(x, *curves):
    """Coefficients of monotone cubics through several columns over the same x.

    Parameters
    ----------
    x : sequence of float (n,)
        Rising.
    *curves : sequences of float (n,)

    Returns
    -------
    tuple of float
        For each of the n - 1 intervals, for each curve, c0..c3 of
        c0 + d (c1 + d (c2 + d c3)), d = x - x_i: 4 times the number of curves an interval.
    """
    tangents = [slopes(x, y) for y in curves]
    flat = []
    for i in range(len(x) - 1):
        width = x[i + 1] - x[i]
        for y, slope in zip(curves, tangents):
            secant = (y[i + 1] - y[i]) / width
            flat += [
                y[i],
                slope[i],
                (3.0 * secant - 2.0 * slope[i] - slope[i + 1]) / width,
                (slope[i] + slope[i + 1] - 2.0 * secant) / (width * width),
            ]
    return tuple(flat)


def interval(knots, x):
    """Which interval of rising knots x lies in; the first or last one for an x outside.

    Parameters
    ----------
    knots : tuple of float (n,)
    x : float

    Returns
    -------
    int
        i with knots[i] <= x < knots[i + 1], 0..n-2.
    """
    low, high = 0, len(knots) - 1
    while high - low > 1:
        middle = (low + high) // 2
        if x < knots[middle]:
            high = middle
        else:
            low = middle
    return low


__all__ = ["cubics", "interval", "slopes"]
