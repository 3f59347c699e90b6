"""What a config's equations are made of: which laws act, and the slots they need.

A plan says which laws act; the layout says in which order the state, the quantities, the
gauges and the parameters stand. `evolve.system.equations` writes the equations out.
"""

from typing import NamedTuple

from evolve.system.gauges import gauge_expressions

OTHER = {"A": "B", "B": "A"}


class Plan(NamedTuple):
    """Which laws act, by name of the function in the text; empty text where none does.

    `order` is "AB" or "BA": which component comes first in every slot and sum, chosen by what
    the components are, not by how they are called; so a config with the names exchanged
    gives the same history to the last bit. `components` maps "A" and "B" to PlanOfComponent;
    `overflow` is the law's name as in a
    config; `expulsion` lists the ways among which the expelled matter is shared.
    """

    order: str
    components: dict
    eccentric: bool
    waves: bool
    overflow: str
    expulsion: tuple[str, ...]
    consequential: bool
    imports: tuple[str, ...]


class PlanOfComponent(NamedTuple):
    """What one component brings: its star model and the laws that act on it."""

    relaxing: bool
    phase: str  # name of its model's own clock, "" without one
    overflows: bool
    braking: bool
    wind: bool
    capture: str  # "", "law" or "share"
    tides: bool  # its spin is followed
    ceiling: str  # on what it accepts: "", "plain" or "band" (all is kept between two edges)
    bare: bool  # in `rates`, while it does not overflow, only its mass acts


class Layout(NamedTuple):
    """Names of the slots of the state: the core (under error control), then the ledger.

    And of what else the text takes and gives, each in its order.
    """

    core: tuple[str, ...]
    ledger: tuple[str, ...]
    quantities: tuple[str, ...]
    gauges: tuple[str, ...]
    parameters: tuple[str, ...]
    settings: tuple[str, ...]


def layout(plan):
    """The slots of the state, of the quantities and of the parameters of a plan.

    Parameters
    ----------
    plan : Plan

    Returns
    -------
    Layout
        `core` starts with mass_A, mass_B [solMass], angular_momentum [solMass solRad2/yr];
        then, as needed, eccentricity_state u = e/sqrt(1-e2), ln_radius_A, ln_radius_B
        (ln of solRad), phase_A, phase_B, spin_momentum_A, spin_momentum_B (k2 m R2 spin)
        [solMass solRad2/yr]. The ledger's slots are integrals of torques
        [solMass solRad2/yr] and flows [solMass].
    """
    core = [*(f"mass_{c}" for c in plan.order), "angular_momentum"]
    if plan.eccentric:
        core.append("eccentricity_state")
    core += [f"ln_radius_{c}" for c in plan.order if plan.components[c].relaxing]
    core += [f"phase_{c}" for c in plan.order if plan.components[c].phase]
    core += [f"spin_momentum_{c}" for c in plan.order if plan.components[c].tides]
    return Layout(
        tuple(core),
        tuple(torque_slots(plan) + flow_slots(plan)),
        tuple(_quantities(plan)),
        tuple(gauge_expressions(plan)),
        tuple(_parameters(plan)),
        tuple(_settings(plan)),
    )


def torque_slots(plan):
    """The ledger's slots of angular momentum."""
    names = ["waves"] if plan.waves else []
    for c in plan.order:
        part = plan.components[c]
        names += [f"braking_{c}"] * (part.braking and not part.tides)
        names += [f"torque_tides_{c}"] * part.tides + [f"torque_wind_{c}"] * part.wind
        if part.overflows or part.capture:
            names.append(f"torque_expelled_{c}")
        if part.overflows and plan.consequential:
            names.append(f"torque_consequential_{c}")
    return names


def flow_slots(plan):
    """The ledger's slots of mass."""
    names = []
    for c in plan.order:
        part, other = plan.components[c], plan.components[OTHER[c]]
        names += [f"overflow_{c}"] * part.overflows + [f"wind_{c}"] * part.wind
        names += [f"captured_{c}"] * bool(part.capture)
        if other.overflows or other.capture:
            names += [f"accepted_{c}", f"expelled_{c}"]
    return names


def _quantities(plan):
    names = ["time", "mass_A", "mass_B", "angular_momentum", "separation", "omega", "mass_rate_A",
             "mass_rate_B", "torque", "separation_rate"]  # fmt: skip
    names += ["eccentricity"] + ["eccentricity_rate"] * plan.eccentric
    for c in plan.order:
        part = plan.components[c]
        names += [f"{name}_{c}" for name in ("radius", "lobe", "luminosity", "temperature",
                                             "zeta", "thermal", "core_mass",
                                             "equilibrium")]  # fmt: skip
        names += [f"phase_{c}", f"convective_{c}"] * bool(part.phase)
        names += [f"spin_{c}", f"spin_momentum_{c}"] * part.tides
        if part.overflows:
            names += [f"zeta_lobe_{c}", f"excess_{c}"]
            names += [f"drive_{c}"] * (plan.overflow == "locked")
        names += [f"ceiling_{c}"] * has_ceiling(plan, c)
        names += [f"edge_{c}"] * has_band(plan, c)
    return names + torque_slots(plan) + flow_slots(plan)


def _parameters(plan):
    names = ["settings", "star_keys_A", "star_keys_B"] + ["waves_keys"] * plan.waves
    for c in plan.order:
        part = plan.components[c]
        names += [f"braking_keys_{c}"] * part.braking + [f"wind_keys_{c}"] * part.wind
        names += [f"capture_keys_{c}"] * (part.capture == "law")
        names += [f"tides_keys_{c}"] * part.tides
        names += [f"ceiling_keys_{c}"] * has_ceiling(plan, c)
    names += ["overflow_keys"] * _has_excess(plan)
    names += [f"expulsion_keys_{way}" for way in plan.expulsion]
    return names + ["consequential_keys"] * plan.consequential


def _settings(plan):
    names = ["momentum_low", "momentum_high"]
    for c in plan.order:
        names += [f"share_{c}"] * receives(plan, c) + [f"retained_{c}"] * has_ceiling(plan, c)
        names += [f"mass_low_{c}", f"mass_high_{c}", f"gyration_{c}"]
        names += [f"capture_share_{c}"] * (plan.components[c].capture == "share")
    return names + [f"weight_{way}" for way in plan.expulsion]


def receives(plan, c):
    """Whether matter may reach component c."""
    other = plan.components[OTHER[c]]
    return other.overflows or bool(other.capture)


def has_ceiling(plan, c):
    """Whether what component c accepts has a ceiling."""
    return bool(plan.components[c].ceiling) and receives(plan, c)


def has_band(plan, c):
    """Whether hydrogen burns steadily on component c between two rates."""
    return has_ceiling(plan, c) and plan.components[c].ceiling == "band"


def _has_excess(plan):
    return plan.overflow != "locked" and any(plan.components[c].overflows for c in plan.order)
