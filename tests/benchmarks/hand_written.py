"""The red-dwarf history as a person would write it for one paper: the yardstick of `run`.

Waves (Peters 1964), braking (Rappaport, Verbunt & Joss 1983, gamma 3, off below 0.2 Msun),
atmosphere overflow (Ritter 1988), everything re-emitted from the white dwarf, a relaxing
n = 3/2 donor. Scalar math, three variables, two calls of solve_ivp with LSODA. It writes no
file, keeps no ledger and no columns, and its equations cannot be changed without editing it.
"""

import math
from bisect import bisect_right

import numpy as np
from scipy.integrate import solve_ivp
from scipy.interpolate import PchipInterpolator

G, C = 3.925125598496094e8, 1.359886513235705e7
MWD = 0.75


def tables(path):
    data = np.array([
        [float(x) for x in line.split(",")]
        for line in open(path)
        if line.strip() and line[0] in "0123456789"
    ])
    x = np.log(data[:, 0])
    knots = x.tolist()
    radius = PchipInterpolator(x, np.log(data[:, 1])).c.T.tolist()
    light = PchipInterpolator(x, np.log(data[:, 2])).c.T.tolist()
    return knots, radius, light


def history(path, rtol=1e-6, end=1e10, fill=0.98, maths=math):
    """Both stretches (braking on, braking off) of the history; returns the two solutions.

    `maths` may be numpy: what people write who start from arrays.
    """
    exp, log, log10, sqrt = maths.exp, maths.log, maths.log10, maths.sqrt
    knots, radius_table, light_table = tables(path)

    def equilibrium(m):
        x = log(m)
        i = min(max(bisect_right(knots, x) - 1, 0), len(knots) - 2)
        d = x - knots[i]
        a, b, c, e = radius_table[i]
        f, g, h, k = light_table[i]
        return exp(((a * d + b) * d + c) * d + e), exp(((f * d + g) * d + h) * d + k)

    def lobe(q):
        c = q ** (1 / 3)
        return 0.49 * c * c / (0.6 * c * c + log(1 + c))

    def right_side(t, y, braking):
        ln_m, ln_a, ln_r = y if maths is np else y.tolist()
        ln_m = min(max(ln_m, -4.6), 0.0)  # trial states of LSODA are off by hundreds
        ln_r = min(max(ln_r, -5.0), 5.0)
        m, a, r = exp(ln_m), exp(min(max(ln_a, -5.0), 9.0)), exp(ln_r)
        total = m + MWD
        omega2 = G * total / a**3
        j = m * MWD / total * sqrt(G * total * a)
        torque = -32 / 5 * G**3 * m * MWD * total / C**5 / a**4 * j
        if braking:
            torque -= 5.82805e-16 * m * r**3 * omega2 * sqrt(omega2)
        r_eq, l_eq = equilibrium(m)
        x = min(max(r / r_eq, 0.2), 4.5)
        thermal = -7 / 3 * r * l_eq / (3.139927676222474e7 * m * m) * (x * x - x**-9)
        temperature = 5772 * (l_eq * x * x / r**2) ** 0.25
        l = log10(MWD / m)
        f = 1.222 + 0.543 * l + 0.043 * l * l - 0.052 * l**3
        g = 0.84 - 0.041 * l * l
        r_l = a * lobe(m / MWD)
        h = 3.35275e-8 * temperature * r * r / (m * g)
        f0 = 2.2434e-10 * f * r_l**3 / r**2 * sqrt(temperature)
        z = min((r - r_l) / h, 1e4)
        rate = f0 * exp(z) if z < 0 else f0 * (1 + z + z * z / 2 + z**3 / 6)
        torque -= rate * j * m / (MWD * total)
        return (
            -rate / m,
            2 * torque / j + 2 * rate / m - rate / total,
            rate / m / 3 + thermal,
        )

    m = 0.6
    r = equilibrium(m)[0]
    y = [log(m), log(r / fill / lobe(m / MWD)), log(r)]
    stop = lambda t, y, braking: y[0] - log(0.2)  # noqa: E731
    stop.terminal = True
    atol = 1e-6
    first = solve_ivp(right_side, (0, end), y, "LSODA", rtol=rtol, atol=atol, args=(True,), events=stop)
    second = solve_ivp(
        right_side, (first.t[-1], end), first.y[:, -1], "LSODA", rtol=rtol, atol=atol, args=(False,)
    )
    return first, second
