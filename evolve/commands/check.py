"""evolve check: is a config right, and where does the pair stand."""

from evolve.commands.output import Answer, aligned, quantity, scalar
from evolve.commands.run import add_settings


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("config", metavar="CONFIG")
    add_settings(parser)
    parser.add_argument(
        "--equations", action="store_true",
        help="print the right-hand side of this config, as the Python that is integrated",
    )  # fmt: skip


def run(arguments):
    """Complete the config and look at the start."""
    from evolve.commands.run import config_of
    from evolve.system.pair import Pair

    config = config_of(arguments.config, arguments.set, arguments.allow_code)
    pair = Pair(config)
    if arguments.equations:
        return Answer([pair.equations.rstrip()], {"equations": pair.equations})
    q = pair.quantities(0.0, pair.start, pair.first_switches())
    result, rows = {"config": config.completed_text()}, []
    for c in "AB":
        stand = _stand(pair, q, c)
        result[c] = {name: scalar(value, unit) for name, (value, unit) in stand.items()}
        rows.append([c, *(_cell(name, value, unit) for name, (value, unit) in stand.items())])
    head = ["", "mass", "R", "R_L", "R/R_L", "q (over other)", "period of contact"]
    now = 2.0 * 3.141592653589793 / q.omega
    result["period"] = scalar(now, "yr")
    result["separation"] = scalar(q.separation, "solRad")
    orbit = f"period {quantity(now, 'yr')}, separation {quantity(q.separation, 'solRad')}"
    lines = [config.completed_text().rstrip(), "", *aligned(head, rows), "", orbit]
    return Answer(lines, result, (*config.warnings, *_spin_warning(pair, q)))


def _stand(pair, q, c):
    from evolve.orbit.kepler import period
    from evolve.orbit.lobes import lobe_fraction

    o = {"A": "B", "B": "A"}[c]
    mass, other = getattr(q, f"mass_{c}"), getattr(q, f"mass_{o}")
    radius, lobe = getattr(q, f"radius_{c}"), getattr(q, f"lobe_{c}")
    contact = radius / (lobe_fraction(mass / other) * (1.0 - q.eccentricity))
    return {
        "mass": (mass, "solMass"),
        "radius": (radius, "solRad"),
        "lobe": (lobe, "solRad"),
        "fill": (radius / lobe, ""),
        "mass_ratio": (mass / other, ""),
        "contact_period": (period(contact, mass + other) if radius > 0.0 else float("nan"), "yr"),
    }


def _cell(name, value, unit):
    return quantity(value, unit) if unit else f"{value:.4g}"


def _spin_warning(pair, q):
    """Spins are left out of J without tides: say so where they would matter."""
    inertia = sum(
        pair.gyration(c) * getattr(q, f"mass_{c}") * getattr(q, f"radius_{c}") ** 2
        for c in "AB"
        if not pair.plan.components[c].tides
    )
    share = inertia * q.omega / q.angular_momentum
    if share > 0.1:
        yield (
            f"the corotating spins hold {100 * share:.0f} % of the orbit's angular momentum and "
            "are left out; follow them with [tides.A], [tides.B]"
        )
