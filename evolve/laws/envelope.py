"""Common envelope: what is left of an orbit when the donor's envelope is thrown out."""

from evolve.orbit.lobes import lobe_fraction


def webbink_1984(
    mass_donor, core_mass, mass_accretor, radius, separation, efficiency=1.0, binding=0.5
):
    """Separation after a common envelope, from the energy that it takes to expel it.

    Parameters
    ----------
    mass_donor : float  [solMass]
        Before.
    core_mass : float  [solMass]
        Of the donor: what is left of it.
    mass_accretor : float  [solMass]
        Unchanged.
    radius : float  [solRad]
        Of the donor at the onset: its lobe.
    separation : float  [solRad]
        At the onset.
    efficiency : float
        Share of the orbital energy set free that lifts the envelope (alpha).
    binding : float
        lambda in the envelope's binding energy G m m_env/(lambda R).

    Returns
    -------
    float  [solRad]
        Of the circular orbit afterwards.

    Notes
    -----
    G m m_env/(lambda R) = alpha (G m_core m_other/(2 a_f) - G m m_other/(2 a_i)).

    References
    ----------
    Webbink 1984, ApJ 277, 355.
    """
    envelope = mass_donor - core_mass
    lifted = 2.0 * mass_donor * envelope / (efficiency * binding * radius)
    before = mass_donor * mass_accretor / separation
    return core_mass * mass_accretor / (lifted + before)


def survives(core_mass, core_radius, mass_accretor, radius_accretor, separation):
    """Whether both bodies fit their lobes after a common envelope; if not, they merge.

    Parameters
    ----------
    core_mass : float  [solMass]
    core_radius : float  [solRad]
    mass_accretor : float  [solMass]
    radius_accretor : float  [solRad]
    separation : float  [solRad]
        After, as `webbink_1984` gives it.

    Returns
    -------
    bool
    """
    mass_ratio = core_mass / mass_accretor
    return (
        core_radius < separation * lobe_fraction(mass_ratio)
        and radius_accretor < separation * lobe_fraction(1.0 / mass_ratio)
    )


__all__ = ["survives", "webbink_1984"]
