"""Two point masses in a Kepler orbit: what follows from masses, separation, eccentricity.

Internal units only (solMass, solRad, yr). Nothing here but arithmetic, so every function
takes floats or numpy arrays, and compiles under numba.
"""

from evolve.constants import G, pi


def mean_motion(separation, total_mass):
    """Mean angular velocity of the orbit, Kepler's third law.

    Parameters
    ----------
    separation : float or ndarray  [solRad]
        Semi-major axis of the relative orbit.
    total_mass : float or ndarray  [solMass]

    Returns
    -------
    float or ndarray  [rad/yr]
    """
    return (G * total_mass / separation) ** 0.5 / separation


def period(separation, total_mass):
    """Orbital period, Kepler's third law.

    Parameters
    ----------
    separation : float or ndarray  [solRad]
        Semi-major axis of the relative orbit.
    total_mass : float or ndarray  [solMass]

    Returns
    -------
    float or ndarray  [yr]
    """
    return 2.0 * pi * separation * (separation / (G * total_mass)) ** 0.5


def separation_from_period(period, total_mass):
    """Semi-major axis that belongs to a period: the inverse of `period`.

    Parameters
    ----------
    period : float or ndarray  [yr]
    total_mass : float or ndarray  [solMass]

    Returns
    -------
    float or ndarray  [solRad]
    """
    return (G * total_mass * (period / (2.0 * pi)) ** 2) ** (1.0 / 3.0)


def angular_momentum(mass_a, mass_b, separation, eccentricity=0.0):
    """Orbital angular momentum of both stars about the centre of mass, spins left out.

    Parameters
    ----------
    mass_a, mass_b : float or ndarray  [solMass]
    separation : float or ndarray  [solRad]
        Semi-major axis of the relative orbit.
    eccentricity : float or ndarray
        0 <= e < 1.

    Returns
    -------
    float or ndarray  [solMass solRad2 / yr]
    """
    total = mass_a + mass_b
    # (1-e)(1+e) keeps its digits where 1-e^2 loses them, near a parabolic orbit
    parameter = separation * (1.0 - eccentricity) * (1.0 + eccentricity)
    return mass_a * (mass_b / total) * (G * total * parameter) ** 0.5


def separation_from_angular_momentum(mass_a, mass_b, momentum, eccentricity=0.0):
    """Semi-major axis that belongs to an orbital angular momentum.

    Parameters
    ----------
    mass_a, mass_b : float or ndarray  [solMass]
    momentum : float or ndarray  [solMass solRad2 / yr]
        Orbital angular momentum, as `angular_momentum` gives it.
    eccentricity : float or ndarray
        0 <= e < 1.

    Returns
    -------
    float or ndarray  [solRad]
    """
    total = mass_a + mass_b
    shape = (1.0 - eccentricity) * (1.0 + eccentricity)
    return (momentum / mass_a / mass_b) ** 2 * total / (G * shape)


def velocity_semi_amplitude(mass_other, total_mass, separation, eccentricity=0.0, sine=1.0):
    """Semi-amplitude K of the radial velocity of one star.

    Parameters
    ----------
    mass_other : float or ndarray  [solMass]
        Mass of the *companion* of the star whose velocity is meant.
    total_mass : float or ndarray  [solMass]
    separation : float or ndarray  [solRad]
        Semi-major axis of the relative orbit.
    eccentricity : float or ndarray
        0 <= e < 1.
    sine : float or ndarray
        Sine of the inclination (1: the orbit seen edge-on).

    Returns
    -------
    float or ndarray  [solRad/yr]
        Times `evolve.constants.KM_S` in km/s.

    Notes
    -----
    K_i = 2 pi a sin i (m_j/M) / (P sqrt(1-e^2)).
    """
    shape = (1.0 - eccentricity) * (1.0 + eccentricity)
    return sine * mass_other / total_mass * (G * total_mass / (separation * shape)) ** 0.5


def mass_function(mass_other, total_mass, sine=1.0):
    """Mass function that the radial velocities of one star yield.

    Parameters
    ----------
    mass_other : float or ndarray  [solMass]
        Mass of the *companion* of the star whose velocity is measured.
    total_mass : float or ndarray  [solMass]
    sine : float or ndarray
        Sine of the inclination (1: the orbit seen edge-on).

    Returns
    -------
    float or ndarray  [solMass]
        (m_j sin i)^3 / M^2; the companion is at least as heavy as this.
    """
    return (sine * mass_other) ** 3 / total_mass**2


def mass_function_from_velocity(period, semi_amplitude, eccentricity=0.0):
    """Mass function from what is measured: the other way to `mass_function`.

    Parameters
    ----------
    period : float or ndarray  [yr]
    semi_amplitude : float or ndarray  [solRad/yr]
        K of the radial velocity.
    eccentricity : float or ndarray
        0 <= e < 1.

    Returns
    -------
    float or ndarray  [solMass]
        P K^3 (1-e^2)^(3/2) / (2 pi G).
    """
    shape = (1.0 - eccentricity) * (1.0 + eccentricity)
    return period * semi_amplitude**3 * shape**1.5 / (2.0 * pi * G)


def mean_density(mass, radius):
    """Mean density of a star.

    Parameters
    ----------
    mass : float or ndarray  [solMass]
    radius : float or ndarray  [solRad]

    Returns
    -------
    float or ndarray  [solMass/solRad3]
    """
    return mass / (4.0 / 3.0 * pi * radius**3)


def chirp_mass(mass_a, mass_b):
    """Chirp mass, the combination that sets the pace of an inspiral by gravitational waves.

    Parameters
    ----------
    mass_a, mass_b : float or ndarray  [solMass]

    Returns
    -------
    float or ndarray  [solMass]
        (m_A m_B)^(3/5) / M^(1/5).
    """
    return (mass_a * mass_b) ** 0.6 / (mass_a + mass_b) ** 0.2


__all__ = [
    "angular_momentum",
    "chirp_mass",
    "mass_function",
    "mass_function_from_velocity",
    "mean_density",
    "mean_motion",
    "period",
    "separation_from_angular_momentum",
    "separation_from_period",
    "velocity_semi_amplitude",
]
