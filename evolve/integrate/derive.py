"""The columns of a trajectory from the quantities of its rows: arithmetic on arrays."""

import numpy as np

from evolve.constants import (
    ENERGY_PER_LUMINOSITY_YEAR,
    G_PER_MSUN,
    CM_PER_RSUN,
    GRAVITATIONAL_TIME,
    HOURS_PER_YEAR,
    KM_S,
    SECONDS_PER_YEAR,
    C,
    G,
)
from evolve.laws.acceptance import radiative_efficiency
from evolve.laws.disc import critical_rate, critical_rate_irradiated, disc_radius, forms_disc
from evolve.laws.waves import strain_amplitude
from evolve.orbit.kepler import mass_function, velocity_semi_amplitude
from evolve.system.layout import OTHER

STAR_COLUMNS = ("radius", "lobe", "luminosity", "temperature")
FLOW_COLUMNS = ("overflow", "wind", "captured", "accepted", "expelled")


def columns_of(pair, time, q, donor):
    """The columns of a trajectory from the quantities of its rows.

    Parameters
    ----------
    pair : evolve.system.pair.Pair
    time, donor : ndarray (n,)
        [yr]; 0 none, 1 A, 2 B.
    q : dict of ndarray (n,)
        The quantities by name.

    Returns
    -------
    dict of ndarray (n,)
        A column is there when its physics is on.
    """
    plan, parts = pair.plan, pair.plan.components
    columns = {"time": time, "donor": donor}
    for name in ("mass", *STAR_COLUMNS):
        columns.update({f"{name}_{c}": q[f"{name}_{c}"] for c in "AB"})
    for c in "AB":
        columns[f"fill_{c}"] = q[f"radius_{c}"] / q[f"lobe_{c}"]
        if q[f"core_mass_{c}"].any():
            columns[f"core_mass_{c}"] = q[f"core_mass_{c}"]
    columns["separation"] = q["separation"]
    columns["period"] = 2.0 * np.pi / q["omega"] * HOURS_PER_YEAR
    if plan.eccentric:
        columns["eccentricity"] = q["eccentricity"]
    columns["mass_ratio"] = _mass_ratio(q, donor)
    columns["angular_momentum"] = q["angular_momentum"]
    if any(parts[c].tides for c in "AB"):
        spins = {c: q[f"spin_momentum_{c}"] for c in "AB" if parts[c].tides}
        columns["total_angular_momentum"] = q["angular_momentum"] + sum(spins.values())
        columns.update({f"spin_{c}": q[f"spin_{c}"] for c in spins})
    flows = [f"{name}_{c}" for name in FLOW_COLUMNS for c in "AB"]
    # at the root of a detachment the rate imposed is zero within rounding, of either sign
    columns.update({name: np.maximum(q[name], 0.0) for name in flows if name in q})
    columns.update(_torque_columns(q))
    if any(parts[c].overflows for c in "AB"):
        columns.update(_stability_columns(pair, q, donor))
    total = q["mass_A"] + q["mass_B"]
    rate = 1.5 * q["separation_rate"] - 0.5 * (q["mass_rate_A"] + q["mass_rate_B"]) / total
    columns["period_derivative"] = rate * columns["period"] / HOURS_PER_YEAR
    columns.update(_observer_columns(pair, q, columns["period"] / HOURS_PER_YEAR))
    return columns


def _observer_columns(pair, q, period):
    """What an observer at a distance, under an inclination, would measure."""
    observer, found = pair.config.values["observer"], {}
    if pair.plan.waves:
        found["wave_frequency"] = 2.0 / (period * SECONDS_PER_YEAR)
        if observer["distance"] is not None:
            strain = strain_amplitude(q["mass_A"], q["mass_B"], period, observer["distance"])
            found["wave_strain"] = np.where(q["eccentricity"] > 1e-3, np.nan, strain)
    if observer["inclination"] is not None:
        sine, total = np.sin(observer["inclination"]), q["mass_A"] + q["mass_B"]
        for c in "AB":
            other = q[f"mass_{OTHER[c]}"]
            found[f"K_{c}"] = KM_S * velocity_semi_amplitude(
                other, total, q["separation"], q["eccentricity"], sine
            )
            found[f"mass_function_{c}"] = mass_function(other, total, sine)
    return found


def _torque_columns(q):
    slots = {"torque_waves": ("waves",), "torque_braking": ("braking_A", "braking_B")}
    for name in ("torque_wind", "torque_expelled", "torque_consequential", "torque_tides"):
        slots[name] = (f"{name}_A", f"{name}_B")
    columns = {}
    for column, parts in slots.items():
        there = [q[part] for part in parts if part in q]
        if there:
            columns[column] = sum(there)
    return columns


def _mass_ratio(q, donor):
    """Donor over accretor; while detached, the component nearer to its lobe over the other."""
    by_b = _b_leads(q, donor)
    return np.where(by_b, q["mass_B"] / q["mass_A"], q["mass_A"] / q["mass_B"])


def _b_leads(q, donor):
    nearer = q["radius_B"] / q["lobe_B"] > q["radius_A"] / q["lobe_A"]
    return (donor == 2) | ((donor == 0) & nearer)


def _stability_columns(pair, q, donor):
    by_b = _b_leads(q, donor)

    def of_donor(name):
        missing = np.full(len(donor), np.nan)
        return np.where(by_b, q.get(f"{name}_B", missing), q.get(f"{name}_A", missing))

    mass, radius, luminosity = of_donor("mass"), of_donor("radius"), of_donor("luminosity")
    overflow = np.nan_to_num(of_donor("overflow"))
    with np.errstate(divide="ignore", invalid="ignore"):
        found = {
            "zeta_star": of_donor("zeta"),
            "zeta_lobe": of_donor("zeta_lobe"),
            "thermal_time": np.where(
                luminosity > 0.0, GRAVITATIONAL_TIME * mass**2 / (radius * luminosity), np.nan
            ),
            "transfer_time": np.where(overflow > 0.0, mass / overflow, np.nan),
            "dynamical_time": np.sqrt(radius**3 / (G * mass)),
            "accretion_luminosity": _accretion_luminosity(pair, q),
            "donor_density": mass * G_PER_MSUN / (4.0 / 3.0 * np.pi * (radius * CM_PER_RSUN) ** 3),
        }
        found["overflow_kind"] = _kind(
            q, donor, found, of_donor("thermal"), radius / of_donor("equilibrium")
        )
        critical = _critical_rate(pair, q, by_b)
    if critical is not None:
        found["disc_critical_rate"] = critical
    return found


def _kind(q, donor, found, growth, lag):
    """What drives an overflow.

    4 the orbit's loss of angular momentum, if it brings more of it than the star's growth;
    else 2 the donor's thermal relaxation, if it is below 0.95 of its equilibrium radius; else 1
    its nuclear evolution. 3, dynamical, where the lobe answers mass loss faster than the star.
    """
    names = ("waves", "braking_A", "braking_B", "torque_tides_A", "torque_tides_B")
    shrinking = -2.0 * sum(q.get(name, 0.0) for name in names) / q["angular_momentum"]
    kind = np.where(lag < 0.95, 2.0, 1.0)
    kind = np.where(shrinking > np.nan_to_num(growth), 4.0, kind)
    kind = np.where(found["zeta_star"] < found["zeta_lobe"], 3.0, kind)
    return np.where(donor > 0.0, kind, 0.0)


def _accretor_kind(pair, c):
    return pair.config.values[c].get("kind") or pair.models[c].kind


def _accretion_luminosity(pair, q):
    """Light of what reaches an accretor [solLum]: G m mdot/R with a surface, eta mdot c2 of a
    black hole. Beyond an Eddington ceiling the rest is driven off before it falls in.
    """
    power = np.zeros_like(q["mass_A"])
    for c in "AB":
        o = OTHER[c]
        reaching = q.get(f"overflow_{o}", 0.0) + q.get(f"captured_{o}", 0.0)
        hole = _accretor_kind(pair, c) == "black-hole"
        eta = radiative_efficiency(pair.config.values[c].get("spin") or 0.0) if hole else 0.0
        ceiling = pair.laws.ceiling[c]
        if ceiling and ceiling.name == "eddington" and f"ceiling_{c}" in q:
            reaching = np.minimum(reaching, q[f"ceiling_{c}"] / (1.0 - eta))
        if hole:
            power += eta * reaching * C**2
        else:
            surface = np.where(q[f"radius_{c}"] > 0.0, q[f"radius_{c}"], np.inf)
            power += G * q[f"mass_{c}"] * reaching / surface
    return power / ENERGY_PER_LUMINOSITY_YEAR


def _critical_rate(pair, q, by_b):
    """Rate above which a disc around a compact accretor is stable [solMass/yr], or None.

    Irradiated around neutron stars and black holes; of helium if the donor is a white dwarf or
    a helium star. NaN where the stream strikes the accretor: then there is no disc.
    """
    found = None
    for c, chosen in (("A", by_b), ("B", ~by_b)):
        kind = _accretor_kind(pair, c)
        if kind not in ("white-dwarf", "neutron-star", "black-hole"):
            continue
        mass, donor = q[f"mass_{c}"], OTHER[c]
        radius = disc_radius(q[f"mass_{donor}"] / mass, q["separation"])
        if kind == "white-dwarf":
            helium = pair.models[donor].kind in ("white-dwarf", "helium")
            rate = critical_rate(mass, radius, helium=helium)
        else:
            rate = critical_rate_irradiated(mass, radius)
        rows = zip(q[f"mass_{donor}"] / mass, q["separation"], q[f"radius_{c}"], strict=True)
        rate = np.where([forms_disc(*row) for row in rows], rate, np.nan)
        found = np.where(chosen, rate, np.nan if found is None else found)
    return found
