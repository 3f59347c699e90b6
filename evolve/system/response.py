"""Lines of the equations: how lobe and donor answer mass loss, and the rate of `locked`."""

from evolve.system.layout import OTHER, has_ceiling


def indented(lines):
    """The lines one level further in."""
    return ["    " + line for line in lines]


def zeta_lobe(plan, c, kept, name):
    """d ln R_L / d ln m along the overflow of component c, `kept` of it being accepted."""
    o = OTHER[c]
    leaving = f"consequential_{c}" if plan.consequential else f"(1.0 - {kept}) * specific_{c}"
    if plan.components[c].tides:  # the donor's matter hands its spin over to the orbit
        leaving = f"({leaving} - spin_momentum_{c} / mass_{c})"
    return [
        f"{name} = 2.0 * mass_{c} * {leaving} / angular_momentum - 2.0 \\",
        f"    + 2.0 * {kept} * mass_{c} / mass_{o} + (1.0 - {kept}) * mass_{c} / total_mass \\",
        f"    + slope_{c} * (1.0 + {kept} * mass_{c} / mass_{o})",
    ]


def response(plan, c):
    """zeta_lobe and, with R = R_L imposed, how fast the star would grow past its lobe."""
    lines = [
        f"slope_{c} = lobe_slope(mass_{c} / mass_{OTHER[c]})",
        *zeta_lobe(plan, c, f"kept_{OTHER[c]}", f"zeta_lobe_{c}"),
    ]
    if plan.overflow == "locked":
        lines += _drive(plan, c)
    return lines


def _drive(plan, c):
    """N of the locked law: d ln(R/R_L)/dt with every law acting but the overflow of c."""
    o = OTHER[c]
    torques = ["waves"] if plan.waves else []
    for s in plan.order:
        part = plan.components[s]
        torques += [f"-tide_{s}"] if part.tides else [f"braking_{s}"] * part.braking
        torques += [f"torque_wind_{s}"] * part.wind
    kept = {s: "0.0" for s in plan.order}
    lines = []
    for s in plan.order:
        if plan.components[s].capture:
            receiver = OTHER[s]
            amount = f"share_{receiver} * captured_{s}"
            if has_ceiling(plan, receiver):
                amount = f"min({amount}, ceiling_{receiver})"
            kept[receiver] = f"caught_{receiver}"
            lines.append(f"caught_{receiver} = {amount}")
            torques.append(f"(caught_{receiver} - captured_{s}) * specific_{s}")
    still = {s: kept[s] + (f" - wind_{s}" if plan.components[s].wind else "") for s in plan.order}
    lines += [
        f"still_{c} = {still[c]}",
        f"still_{o} = {still[o]}",
        f"drive_{c} = thermal_{c} + zeta_{c} * still_{c} / mass_{c} \\",
        f"    - 2.0 * ({' + '.join(torques) or '0.0'}) / angular_momentum \\",
        f"    + 2.0 * (still_{c} / mass_{c} + still_{o} / mass_{o}) \\",
        f"    - (still_{c} + still_{o}) / total_mass \\",
        f"    - slope_{c} * (still_{c} / mass_{c} - still_{o} / mass_{o})",
    ]
    if plan.eccentric:
        lines.append(f"drive_{c} += eccentricity_rate / (1.0 + eccentricity)")
    return lines


def locked_overflow(plan, c):
    """The rate that keeps R = R_L: what the donor would grow past its lobe, over how the gap
    between the two answers mass loss."""
    part, o = plan.components[c], OTHER[c]
    lines = [f"overflow_{c} = mass_{c} * drive_{c} / max(zeta_{c} - zeta_lobe_{c}, 1e-9)"]
    if has_ceiling(plan, o):
        # The rate is piecewise linear: below the ceiling `share` of what comes on top is
        # kept, above it nothing. The piece that holds is the one its own rate lies in.
        before = f"captured_{c}" if part.capture else "0.0"
        lines += [
            f"full_{c} = max(ceiling_{o} / max(share_{o}, 1e-99) - {before}, 0.0)",
            f"if overflow_{c} > full_{c}:",
            *indented(zeta_lobe(plan, c, "0.0", f"beyond_{c}")),
            f"    rest_{c} = drive_{c} - full_{c} * (zeta_{c} - zeta_lobe_{c}) / mass_{c}",
            f"    overflow_{c} = full_{c} + mass_{c} * rest_{c} / max(zeta_{c} - beyond_{c}, 1e-9)",
        ]
    return lines
