"""Acceptance: the most an accretor can keep of the matter that reaches it.

In these laws `star` is the accretor. `accepted` and `burning_share` say what is kept.
"""

from math import log, pi, sqrt

from evolve.constants import M_SUN_SI, R_SUN_SI, C, G
from evolve.laws.contract import Annotated, Key, Law, NamedTuple, NoKeys

OPACITY = 0.02 * M_SUN_SI / R_SUN_SI**2
"""0.2 cm2/g (electron scattering, times 1 + X) in solRad2/solMass."""
NO_CEILING = 1e99
"""Stands for a ceiling that is none [solMass/yr]."""
RAMP = 0.01
"""Relative width over which acceptance bends into the ceiling."""
EDGE = 0.05
"""Half width, in ln rate, of the edge below which hydrogen burns in flashes."""


class EddingtonKeys(NamedTuple):
    """Keys of the Eddington limit; `black_hole` (1.0 or 0.0) and `spin` are the accretor's."""

    hydrogen: Annotated[float, Key("", 0.0, 1.0, "mass fraction X of what is accreted")] = 0.7
    black_hole: float = 0.0
    spin: float = 0.0


class RateKeys(NamedTuple):
    """Keys of a ceiling that is a number."""

    rate: Annotated[float, Key("solMass/yr", 0.0, 1e3, "the most that is accepted")]


def radiative_efficiency(spin):
    """Share of the rest energy that matter sets free on its way into a black hole.

    Parameters
    ----------
    spin : float
        Dimensionless, 0..1; the disc turns the same way.

    Returns
    -------
    float
        1 minus the energy on the last stable circular orbit: 0.0572 at 0, 0.321 at 0.998.
        The hole grows by the rest, 1 - efficiency, of what falls in.

    References
    ----------
    Bardeen, Press & Teukolsky 1972, ApJ 178, 347, eq. 2.21.
    """
    square = spin * spin
    rest = (1.0 - square) ** (1.0 / 3.0)
    z1 = 1.0 + rest * ((1.0 + spin) ** (1.0 / 3.0) + (1.0 - spin) ** (1.0 / 3.0))
    z2 = sqrt(3.0 * square + z1 * z1)
    orbit = 3.0 + z2 - sqrt((3.0 - z1) * (3.0 + z1 + 2.0 * z2))
    return 1.0 - sqrt(1.0 - 2.0 / (3.0 * orbit))


def eddington(star, other, orbit, keys):
    """Rate at which the light of accretion balances gravity.

    Parameters
    ----------
    star : Star
        The accretor.
    other : Star
        The donor.
    orbit : Orbit
    keys : EddingtonKeys

    Returns
    -------
    float  [solMass/yr]
        4 pi G m/(kappa c eta); 1e99 (no ceiling) for a star without a radius.

    Notes
    -----
    kappa = 0.2 (1 + X) cm2/g; eta = G m/(R c^2) for a star, so 4 pi c R/kappa whatever its
    mass; `radiative_efficiency` for a black hole.

    References
    ----------
    Eddington 1926, The Internal Constitution of the Stars (the limit); Bardeen, Press &
    Teukolsky 1972, ApJ 178, 347.
    """
    opacity = OPACITY * (1.0 + keys.hydrogen)
    if keys.black_hole > 0.0:
        return 4.0 * pi * G * star.mass / (opacity * C * radiative_efficiency(keys.spin))
    if star.radius <= 0.0:
        return NO_CEILING
    return 4.0 * pi * C * star.radius / opacity


def burning_upper(star, other, orbit, keys):
    """Upper edge of steady hydrogen burning on a white dwarf: it accepts no more than this.

    Parameters
    ----------
    star : Star
        The white dwarf.
    other : Star
    orbit : Orbit
    keys : NoKeys

    Returns
    -------
    float  [solMass/yr]
        6.682e-7 (m - 0.4453), >= 0. Constants from memory.

    References
    ----------
    Nomoto, Saio, Kato & Hachisu 2007, ApJ 663, 1269.
    """
    return max(6.682e-7 * (star.mass - 0.4453), 0.0)


def burning_lower(star, other, orbit, keys):
    """Lower edge of steady hydrogen burning on a white dwarf: below it there are flashes.

    Parameters
    ----------
    star : Star
        The white dwarf.
    other : Star
    orbit : Orbit
    keys : NoKeys

    Returns
    -------
    float  [solMass/yr]
        3.066e-7 (m - 0.5357), >= 0. Constants from memory.

    References
    ----------
    Nomoto, Saio, Kato & Hachisu 2007, ApJ 663, 1269.
    """
    return max(3.066e-7 * (star.mass - 0.5357), 0.0)


def fixed_rate(star, other, orbit, keys):
    """A ceiling that is a number.

    Parameters
    ----------
    star, other : Star
    orbit : Orbit
    keys : RateKeys

    Returns
    -------
    float  [solMass/yr]
        >= 0.

    References
    ----------
    None: the rate is the user's.
    """
    return keys.rate


def accepted(reaching, share, ceiling, width=RAMP):
    """What an accretor keeps: a share of what reaches it, and no more than a ceiling.

    Parameters
    ----------
    reaching : float  [solMass/yr]
        >= 0.
    share : float
        0..1.
    ceiling : float  [solMass/yr]
        >= 0.
    width : float
        Of the bend, relative to the ceiling; 0 for the exact minimum.

    Returns
    -------
    float  [solMass/yr]
        min(share reaching, ceiling); within `width` of the ceiling a parabola that joins
        both branches with their slopes. Never above the exact minimum, and at most a
        quarter of the width below it.

    References
    ----------
    None: a smoothed minimum, so that an integrator meets no kink.
    """
    wanted = share * reaching
    bend = width * ceiling
    distance = wanted - ceiling
    if distance >= bend:
        return ceiling
    if distance <= -bend:
        return wanted
    inside = bend + distance
    return wanted - inside * inside / (4.0 * bend)


def burning_share(reaching, share, lower):
    """Share that a white dwarf keeps on either side of the lower edge of steady burning.

    Parameters
    ----------
    reaching : float  [solMass/yr]
        >= 0.
    share : float
        Kept below the edge, through the flashes (0: all is thrown out), 0..1.
    lower : float  [solMass/yr]
        The edge, `burning_lower`; 0 where there is none: all burns.

    Returns
    -------
    float
        `share` below, 1 above, between them a cubic in ln rate, 10 % wide.

    References
    ----------
    None: a ramp in place of a jump, so that an integrator meets none.
    """
    if lower <= 0.0:
        return 1.0
    if reaching <= 0.0:
        return share
    x = (log(reaching / lower) + EDGE) / (2.0 * EDGE)
    if x <= 0.0:
        return share
    if x >= 1.0:
        return 1.0
    return share + (1.0 - share) * x * x * (3.0 - 2.0 * x)


TABLE = {
    "eddington": Law(
        eddington,
        EddingtonKeys,
        ("bardeen-press-teukolsky-1972",),
        "spherical accretion on a star with a surface, disc accretion on a black hole",
    ),
    "hydrogen-burning-band": Law(
        burning_upper,
        NoKeys,
        ("nomoto-2007",),
        "white dwarfs of 0.5..1.38 solMass that accrete hydrogen",
        second=burning_lower,
    ),
    "rate": Law(fixed_rate, RateKeys, (), "a rate known from elsewhere"),
}
