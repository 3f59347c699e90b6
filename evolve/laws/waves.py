"""Gravitational waves: the torque on an orbit, and what follows for two point masses.

`torque` and `eccentricity_rate` obey the contract of a law. The rest are plain functions
of masses [solMass], separations [solRad], periods [yr] and distances [pc].

References
----------
Peters 1964, Phys. Rev. 136, B1224.
"""

from math import cosh, exp, pi, sinh, sqrt

from evolve.constants import PC_SI, R_SUN_SI, C, G
from evolve.laws.contract import Annotated, Key, Law, NamedTuple

TORQUE = -32.0 / 5.0 * G**3 / C**5  # solRad4 solMass-3 yr-1
ECCENTRICITY = -304.0 / 15.0 * G**3 / C**5
SHRINKING = -64.0 / 5.0 * G**3 / C**5
SOLRAD_PER_PC = PC_SI / R_SUN_SI


class WavesKeys(NamedTuple):
    """Keys of the gravitational waves."""

    strength: Annotated[
        float, Key("", 0.0, 1e6, "factor on torque and de/dt; 1 is general relativity")
    ] = 1.0


def torque(star, other, orbit, keys):
    """Torque of gravitational waves on the orbit, averaged over a revolution.

    Parameters
    ----------
    star, other : Star
        Both components; the law is symmetric in them.
    orbit : Orbit
    keys : WavesKeys

    Returns
    -------
    float  [solMass solRad2 / yr2]
        <= 0.

    Notes
    -----
    dJ/dt = -(32/5) G^3 m1 m2 M / (c^5 a^4) (1 + 7/8 e^2) / (1-e^2)^(5/2) J: point masses, at
    the lowest order in v/c, slow inspiral.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.5.
    """
    square = orbit.separation * orbit.separation
    result = TORQUE * keys.strength * orbit.angular_momentum
    result *= star.mass * other.mass * orbit.total_mass / (square * square)
    e = orbit.eccentricity
    if e > 0.0:
        shape = (1.0 - e) * (1.0 + e)
        result *= (1.0 + 0.875 * e * e) / (shape * shape * sqrt(shape))
    return result


def eccentricity_rate(star, other, orbit, keys):
    """Change of the eccentricity by gravitational waves, averaged over a revolution.

    Parameters
    ----------
    star, other : Star
        Both components; the law is symmetric in them.
    orbit : Orbit
    keys : WavesKeys

    Returns
    -------
    float  [1/yr]
        <= 0; 0 for a circular orbit.

    Notes
    -----
    de/dt = -(304/15) e G^3 m1 m2 M / (c^5 a^4) (1 + 121/304 e^2) / (1-e^2)^(5/2).

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.7.
    """
    e = orbit.eccentricity
    square = orbit.separation * orbit.separation
    shape = (1.0 - e) * (1.0 + e)
    result = ECCENTRICITY * keys.strength * e * (1.0 + 121.0 / 304.0 * e * e)
    result *= star.mass * other.mass * orbit.total_mass / (square * square)
    return result / (shape * shape * sqrt(shape))


PETERS_1964 = Law(
    function=torque,
    keys=WavesKeys,
    sources=("peters-1964",),
    validity="point masses, slow inspiral (a much above 6 G M/c2), lowest order in v/c",
    second=eccentricity_rate,
)

TABLE = {"peters-1964": PETERS_1964}


# Plain functions of numbers -------------------------------------------------------------


def circular_merger_time(mass_a, mass_b, separation):
    """Time to merge by waves alone from a circular orbit of point masses.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    separation : float  [solRad]

    Returns
    -------
    float  [yr]

    Notes
    -----
    T = (5/256) c^5 a^4 / (G^3 m1 m2 M).

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.10.
    """
    return separation**4 / (-4.0 * SHRINKING * mass_a * mass_b * (mass_a + mass_b))


def _tanh_sinh(step, ends):
    """Nodes in (0, 1) and weights of the tanh-sinh rule."""
    nodes = []
    for index in range(-ends, ends + 1):
        t = index * step
        falling = exp(-pi * sinh(t))
        nodes.append((1.0 / (1.0 + falling), step * pi * cosh(t) * falling / (1.0 + falling) ** 2))
    return tuple(nodes)


_NODES = _tanh_sinh(1.0 / 16.0, 52)


def merger_time_ratio(eccentricity):
    """Time to merge over that of a circular orbit of the same semi-major axis.

    Parameters
    ----------
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    float
        1 at e = 0; (768/425) (1-e^2)^(7/2) towards e = 1.

    Notes
    -----
    Peters' integral in u = e/sqrt(1-e^2), over its upper end: the integrand is bounded for
    every e and leaves 0 as u^(29/19), an end that the tanh-sinh rule takes in its stride.
    Relative error below 1e-14 up to e = 0.9999, 1e-10 beyond.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.14; Takahasi & Mori 1974, Publ. RIMS 9, 721.
    """
    square = eccentricity * eccentricity
    shape = (1.0 - eccentricity) * (1.0 + eccentricity)
    total = 0.0
    for x, weight in _NODES:
        relative = x / sqrt(shape + square * x * x)  # e over its value at the start
        bracket = 1.0 + 121.0 / 304.0 * square * relative * relative
        total += weight * relative ** (29.0 / 19.0) * bracket ** (1181.0 / 2299.0)
    outer = (1.0 + 121.0 / 304.0 * square) ** (-3480.0 / 2299.0)
    return 48.0 / 19.0 * shape**3.5 * outer * total


def merger_time(mass_a, mass_b, separation, eccentricity=0.0):
    """Time to merge by waves alone, point masses in an orbit of any eccentricity.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    separation : float  [solRad]
        Semi-major axis.
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    float  [yr]

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.14.
    """
    circular = circular_merger_time(mass_a, mass_b, separation)
    return circular if eccentricity == 0.0 else circular * merger_time_ratio(eccentricity)


def separation_of_eccentricity(eccentricity, start_separation, start_eccentricity):
    """Semi-major axis when waves alone have brought the eccentricity down to a value.

    Parameters
    ----------
    eccentricity : float
        0 <= e <= start_eccentricity.
    start_separation : float  [solRad]
    start_eccentricity : float
        0 < e < 1.

    Returns
    -------
    float  [solRad]

    Notes
    -----
    a(e) = c0 e^(12/19) / (1-e^2) [1 + 121/304 e^2]^(870/2299), whatever the masses.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.11.
    """
    e, e0 = eccentricity, start_eccentricity
    bracket = (1.0 + 121.0 / 304.0 * e * e) / (1.0 + 121.0 / 304.0 * e0 * e0)
    shape = (1.0 - e0) * (1.0 + e0) / ((1.0 - e) * (1.0 + e))
    return start_separation * (e / e0) ** (12.0 / 19.0) * shape * bracket ** (870.0 / 2299.0)


def enhancement(eccentricity):
    """Power radiated over that of a circular orbit of the same semi-major axis.

    Parameters
    ----------
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    float
        f(e) = (1 + 73/24 e^2 + 37/96 e^4) / (1-e^2)^(7/2).

    References
    ----------
    Peters & Mathews 1963, Phys. Rev. 131, 435, eq. 17.
    """
    square = eccentricity * eccentricity
    shape = (1.0 - eccentricity) * (1.0 + eccentricity)
    return (1.0 + square * (73.0 / 24.0 + 37.0 / 96.0 * square)) / shape**3.5


def separation_derivative(mass_a, mass_b, separation, eccentricity=0.0):
    """Change of the semi-major axis by waves alone.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    separation : float  [solRad]
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    float  [solRad/yr]
        < 0.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.6.
    """
    strength = SHRINKING * mass_a * mass_b * (mass_a + mass_b) * enhancement(eccentricity)
    return strength / separation**3


def eccentricity_derivative(mass_a, mass_b, separation, eccentricity):
    """Change of the eccentricity by waves alone, from bare numbers.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    separation : float  [solRad]
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    float  [1/yr]
        <= 0.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.7.
    """
    square = eccentricity * eccentricity
    shape = (1.0 - eccentricity) * (1.0 + eccentricity)
    strength = ECCENTRICITY * mass_a * mass_b * (mass_a + mass_b) / separation**4
    return strength * eccentricity * (1.0 + 121.0 / 304.0 * square) / shape**2.5


def period_derivative(mass_a, mass_b, separation, eccentricity=0.0):
    """Change of the orbital period by waves alone.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    separation : float  [solRad]
    eccentricity : float
        0 <= e < 1.

    Returns
    -------
    float
        dP/dt, a pure number (s/s), < 0.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.6, with Kepler's third law.
    """
    period = 2.0 * pi * sqrt(separation / (G * (mass_a + mass_b))) * separation
    shrinking = separation_derivative(mass_a, mass_b, separation, eccentricity)
    return 1.5 * period * shrinking / separation


def wave_frequency_derivative(mass_a, mass_b, period):
    """Rise of the frequency of the waves, 2/P, of a circular orbit.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    period : float  [yr]
        Orbital.

    Returns
    -------
    float  [1/yr2]
        (96/5) pi^(8/3) (G Mc/c^3)^(5/3) f^(11/3), Mc the chirp mass.

    References
    ----------
    Peters 1964, Phys. Rev. 136, B1224, eq. 5.6, at e = 0.
    """
    frequency = 2.0 / period
    chirp = G / C**3 * (mass_a * mass_b) ** 0.6 / (mass_a + mass_b) ** 0.2
    return 96.0 / 5.0 * pi ** (8.0 / 3.0) * chirp ** (5.0 / 3.0) * frequency ** (11.0 / 3.0)


def strain_amplitude(mass_a, mass_b, period, distance):
    """Amplitude h0 of the waves of a circular orbit.

    Parameters
    ----------
    mass_a, mass_b : float  [solMass]
    period : float  [yr]
        Orbital.
    distance : float  [pc]

    Returns
    -------
    float
        h0 = 4 (G Mc)^(5/3) (pi f)^(2/3) / (c^4 d), f = 2/P. Seen face-on both
        polarisations have this amplitude; many papers use A = h0/2.

    References
    ----------
    Robson, Cornish & Liu 2019, CQG 36, 105011.
    """
    chirp = G / C**3 * (mass_a * mass_b) ** 0.6 / (mass_a + mass_b) ** 0.2
    light_time = distance * SOLRAD_PER_PC / C
    return 4.0 * chirp ** (5.0 / 3.0) * (2.0 * pi / period) ** (2.0 / 3.0) / light_time
