"""Writes the right-hand side of one config as the text of a small Python module.

The pair's equations are a sum of laws, and a config chooses which of them act. Writing
that sum out as text, with nothing in it but the chosen laws, gives one set of equations
that runs as plain Python at the speed of hand-written code, compiles with numba as it
stands, and can be read (`evolve check CONFIG --equations`). No formula lives here, except
the definitions that tie a state to an orbit and the balance of masses and angular
momentum.

The module written has two functions of the same body and the gauges of events,

    rates(time, STATE, switches, parameters)       -> the derivatives, then those of the ledger
    quantities(time, STATE, switches, parameters)  -> everything a column or an event needs
    gauges(quantities)                             -> the readings whose crossings are events

so what a column shows is what the integrator used. Parameters are arguments, never
constants of the text: configs that differ only in values share one text.

Switches, constant within a chapter: flow_A, flow_B (the component may lose mass through
its lobe), braking_A, braking_B.
"""

from evolve.system.gauges import write_gauges
from evolve.system.layout import OTHER, has_ceiling, layout, receives, torque_slots
from evolve.system.response import indented, locked_overflow, response


def write(plan):
    """The text of the module for one plan.

    Parameters
    ----------
    plan : Plan

    Returns
    -------
    str
        A module that defines `rates` and `quantities`. It imports what it calls by name
        from `plan.imports`; functions that a user brought must be put in its namespace.
    """
    slots = layout(plan)
    head = ["from math import exp, log, nan, sqrt", "", *plan.imports, ""]
    parts = ["\n".join(head), "\n".join(_function(plan, slots, "rates"))]
    parts += ["\n".join(_function(plan, slots, "quantities"))]
    return "\n\n".join([*parts, write_gauges(plan, slots.quantities)])


def _function(plan, slots, name):
    full = name == "quantities"
    arguments = ", ".join(("time", *slots.core, "switches", "parameters"))
    body = [
        "flow_A, flow_B, braking_on_A, braking_on_B = switches",
        f"{', '.join(slots.parameters)}, = parameters",
        f"{', '.join(slots.settings)}, = settings",
        *_bounds(plan),
        *_orbit(plan),
        *_both(_star, plan, full),
        *_torque_laws(plan),
        *_both(_wind, plan),
        *_both(_ceiling, plan),
        *_both(_specific_of_captured, plan),
        *_both(_transfer, plan, full),
        *_sums(plan),
        *(_return_quantities(plan, slots) if full else _return_rates(plan, slots)),
    ]
    return [f"def {name}({arguments}):"] + indented(body)


def _both(lines_of, plan, *more):
    return [line for c in plan.order for line in lines_of(plan, c, *more)]


def _bounds(plan):
    """Trial states may be absurd: bound them here, once, before any law sees them."""
    limits = [(f"mass_{c}", f"mass_low_{c}", f"mass_high_{c}") for c in plan.order]
    limits.append(("angular_momentum", "momentum_low", "momentum_high"))
    if plan.eccentric:
        limits.append(("eccentricity_state", "0.0", "1e4"))
    limits += [(f"ln_radius_{c}", "-20.0", "15.0") for c in plan.order if plan.components[c].relaxing]
    limits += [(f"spin_momentum_{c}", "0.0", "momentum_high") for c in plan.order if plan.components[c].tides]
    lines = []
    for name, low, high in limits:
        lines += [f"if {name} < {low}:", f"    {name} = {low}"]
        lines += [f"elif {name} > {high}:", f"    {name} = {high}"]
    return lines


def _orbit(plan):
    lines = [
        "total_mass = mass_A + mass_B",
        "product = mass_A * mass_B",
        "separation = angular_momentum * angular_momentum * total_mass / (G * product * product)",
    ]
    if plan.eccentric:
        lines += [
            "roundness = 1.0 + eccentricity_state * eccentricity_state  # 1/(1 - e2)",
            "separation *= roundness",
            "eccentricity = eccentricity_state / sqrt(roundness)",
            "periastron = separation / (roundness * (1.0 + eccentricity))  # a (1 - e)",
        ]
    else:
        lines += ["eccentricity = 0.0", "periastron = separation"]
    return lines + [
        "omega = sqrt(G * total_mass / separation) / separation",
        "orbit = Orbit(separation, eccentricity, omega, angular_momentum, total_mass)",
    ]


def _star(plan, c, full):
    """The star as laws see it. One that only its mass acts for is not asked for more."""
    part, o = plan.components[c], OTHER[c]
    radius = f"exp(ln_radius_{c})" if part.relaxing else "0.0"
    phase = f"phase_{c}" if part.phase else "0.0"
    spin = f"spin_{c}" if part.tides else "omega"
    whole = [
        f"lobe_{c} = periastron * lobe_fraction(mass_{c} / mass_{o})",
        f"(radius_{c}, equilibrium_{c}, luminosity_{c}, temperature_{c}, zeta_{c}, thermal_{c},",
        f" phase_rate_{c}, core_mass_{c}, convective_{c}, envelope_mass_{c}, envelope_depth_{c},",
        f") = structure_{c}(mass_{c}, {radius}, {phase}, star_keys_{c})",
        *(
            [f"spin_{c} = spin_momentum_{c} / (gyration_{c} * mass_{c} * radius_{c} * radius_{c})"]
            * part.tides
        ),
        f"star_{c} = Star(mass_{c}, radius_{c}, lobe_{c}, luminosity_{c}, temperature_{c},",
        f"              core_mass_{c}, convective_{c}, zeta_{c}, {spin}, gyration_{c},",
        f"              envelope_mass_{c}, envelope_depth_{c})",
    ]
    if full or not part.bare:
        return whole
    mass_only = ", ".join([f"mass_{c}"] + ["0.0"] * 11)
    bare = [f"star_{c} = Star({mass_only})  # nothing that acts reads more than its mass"]
    if not part.overflows:
        return bare
    return [f"if flow_{c}:", *indented(whole), "else:", *indented(bare)]


def _torque_laws(plan):
    lines = ["waves = waves_torque(star_A, star_B, orbit, waves_keys)"] * plan.waves
    if plan.eccentric:
        rate = "waves_eccentricity(star_A, star_B, orbit, waves_keys)" if plan.waves else "0.0"
        lines.append(f"eccentricity_rate = {rate}")
    for c in plan.order:
        if plan.components[c].tides:
            arguments = f"(star_{c}, star_{OTHER[c]}, orbit, tides_keys_{c})"
            lines.append(f"tide_{c} = tides_{c}_torque{arguments}")
            if plan.eccentric:
                lines.append(f"eccentricity_rate += tides_{c}_eccentricity{arguments}")
        if plan.components[c].braking:
            call = f"braking_{c}_torque(star_{c}, star_{OTHER[c]}, orbit, braking_keys_{c})"
            lines += [
                f"braking_{c} = 0.0",
                f"if braking_on_{c} and convective_{c} > 0.0:",
                f"    braking_{c} = {call}",
            ]
    return lines


def _wind(plan, c):
    part, o = plan.components[c], OTHER[c]
    if not part.wind:
        return []
    lines = [f"wind_{c} = wind_{c}_rate(star_{c}, star_{o}, orbit, wind_keys_{c})"]
    lost = f"wind_{c}"
    if part.capture:
        share = f"capture_share_{c}"
        if part.capture == "law":
            share = f"capture_{c}_share(star_{c}, star_{o}, orbit, capture_keys_{c})"
        lines.append(f"captured_{c} = wind_{c} * {share}")
        lost = f"(wind_{c} - captured_{c})"
    # what is not captured leaves with the specific angular momentum of its star
    lines.append(
        f"torque_wind_{c} = -{lost} * angular_momentum * mass_{o} / (mass_{c} * total_mass)"
    )
    return lines


def _ceiling(plan, c):
    """The most that component c accepts."""
    if not has_ceiling(plan, c):
        return []
    arguments = f"(star_{c}, star_{OTHER[c]}, orbit, ceiling_keys_{c})"
    lines = [f"ceiling_{c} = retained_{c} * ceiling_{c}_rate{arguments}"]
    return lines + [f"edge_{c} = ceiling_{c}_edge{arguments}"] * (plan.components[c].ceiling == "band")


def _transfer(plan, c, full):
    """What component c passes on: overflow, what of it is accepted, what is expelled."""
    part = plan.components[c]
    if not (part.overflows or part.capture):
        return []
    if not part.overflows:
        return _balance(plan, c)
    lines = [f"excess_{c} = " + _excess(plan, c)] * full
    o = OTHER[c]
    flowing = _specific(plan, c) * (not part.capture)
    if plan.overflow == "locked":
        flowing += [f"kept_{o} = share_{o}", *response(plan, c), *_overflow(plan, c)]
        after = []
    else:
        flowing += _overflow(plan, c)
        after = _marginal(plan, c) + response(plan, c) if full else []
    idle = [f"overflow_{c} = 0.0"]
    if full:
        idle.append(f"zeta_lobe_{c} = nan")
        idle += [f"drive_{c} = 0.0"] * (plan.overflow == "locked")
    if part.capture:
        lines += _either(c, flowing, idle) + _balance(plan, c)
        return lines + ([f"if flow_{c}:", *indented(after)] if after else [])
    idle.append(f"accepted_{o} = expelled_{o} = torque_expelled_{c} = 0.0")
    idle += [f"torque_consequential_{c} = 0.0"] * plan.consequential
    return lines + _either(c, flowing + _balance(plan, c) + after, idle)


def _either(c, flowing, idle):
    return [f"if flow_{c}:", *indented(flowing), "else:", *indented(idle)]


def _excess(plan, c):
    if plan.overflow == "atmosphere":  # of no interest to a star far inside its lobe
        call = f"overflow_excess(star_{c}, star_{OTHER[c]}, orbit, overflow_keys)"
        return f"{call} if radius_{c} > 0.1 * lobe_{c} else -1e9"
    return f"log(radius_{c} / lobe_{c})"


def _specific_of_captured(plan, c):
    """For what is captured, needed before either component's overflow is solved for."""
    return _specific(plan, c) if plan.components[c].capture else []


def _specific(plan, c):
    """Specific angular momentum of the matter expelled on its way from component c."""
    part, o = plan.components[c], OTHER[c]
    terms = [
        f"weight_{way} * expulsion_{way}(star_{c}, star_{o}, orbit, expulsion_keys_{way})"
        for way in plan.expulsion
    ]
    lines = [f"specific_{c} = " + " + ".join(terms)]
    if plan.consequential and part.overflows:
        lines.append(
            f"consequential_{c} = consequential_loss(star_{c}, star_{o}, orbit, consequential_keys)"
        )
    return lines


def _overflow(plan, c):
    if plan.overflow == "locked":
        return locked_overflow(plan, c)
    return [f"overflow_{c} = overflow_rate(star_{c}, star_{OTHER[c]}, orbit, overflow_keys)"]


def _balance(plan, c):
    """What reaches the companion of c, what it accepts, what is expelled, with what torque."""
    part, o = plan.components[c], OTHER[c]
    reaching = " + ".join(
        [f"overflow_{c}"] * part.overflows + [f"captured_{c}"] * bool(part.capture)
    )
    share, lines = f"share_{o}", [f"reaching_{o} = {reaching}"]
    if plan.components[o].ceiling == "band":
        share = f"kept_share_{o}"
        lines.append(f"{share} = burning_share(reaching_{o}, share_{o}, edge_{o})")
    accepted = f"{share} * reaching_{o}"
    if has_ceiling(plan, o):  # with R = R_L imposed the rate is solved for the exact minimum
        accepted = f"accepted_rate(reaching_{o}, {share}, ceiling_{o})"
        if plan.overflow == "locked":
            accepted = f"min({share} * reaching_{o}, ceiling_{o})"
    lines += [
        f"accepted_{o} = {accepted}",
        f"expelled_{o} = reaching_{o} - accepted_{o}",
    ]
    if plan.consequential and part.overflows:
        caught = f"expelled_{o} * captured_{c} / max(reaching_{o}, 1e-99)" if part.capture else "0.0"
        lines += [
            f"torque_expelled_{c} = -({caught}) * specific_{c}",
            f"torque_consequential_{c} = -overflow_{c} * consequential_{c}",
        ]
    else:
        lines.append(f"torque_expelled_{c} = -expelled_{o} * specific_{c}")
    return lines


def _marginal(plan, c):
    """Share that the accretor would keep of a little more: none at its ceiling."""
    o = OTHER[c]
    if not has_ceiling(plan, o):
        return [f"kept_{o} = share_{o}"]
    share = f"kept_share_{o}" if plan.components[o].ceiling == "band" else f"share_{o}"
    return [f"kept_{o} = {share} if {share} * reaching_{o} < ceiling_{o} else 0.0"]


def _sums(plan):
    lines = []
    for c in plan.order:
        part = plan.components[c]
        terms = [f"accepted_{c}"] * receives(plan, c)
        terms += [f"- overflow_{c}"] * part.overflows + [f"- wind_{c}"] * part.wind
        lines.append(f"mass_rate_{c} = " + (" ".join(terms) or "0.0"))
        if part.tides:
            lines += _spin(part, c)
    lines.append("torque = " + (" + ".join(torque_slots(plan)) or "0.0"))
    return lines


def _spin(part, c):
    """Balance of a spin that is followed: tide and braking; wind and overflow carry it off.

    A wind leaves from the whole surface, with 2/3 R2; the overflow with the star's mean k2 R2,
    which it hands over to the orbit.
    """
    handed = f"overflow_{c} * spin_momentum_{c} / mass_{c}" if part.overflows else "0.0"
    terms = [f"tide_{c}"] + [f"braking_{c}"] * part.braking + [f"- {handed}"] * part.overflows
    if part.wind:
        terms.append(f"- 2.0 / 3.0 * wind_{c} * radius_{c} * radius_{c} * spin_{c}")
    total = " + ".join(terms).replace("+ -", "-")
    return [f"torque_tides_{c} = {handed} - tide_{c}", f"spin_rate_{c} = {total}"]


def _return_rates(plan, slots):
    parts = [*(f"mass_rate_{c}" for c in plan.order), "torque"]
    if plan.eccentric:
        parts.append("eccentricity_rate * roundness * sqrt(roundness)")
    for c in plan.order:
        if plan.components[c].relaxing:
            parts.append(f"zeta_{c} * mass_rate_{c} / mass_{c} + thermal_{c}")
    parts += [f"phase_rate_{c}" for c in plan.order if plan.components[c].phase]
    parts += [f"spin_rate_{c}" for c in plan.order if plan.components[c].tides]
    return [f"return ({', '.join((*parts, *slots.ledger))},)"]


def _return_quantities(plan, slots):
    lines = [
        "separation_rate = 2.0 * torque / angular_momentum \\",
        "    - 2.0 * (mass_rate_A / mass_A + mass_rate_B / mass_B) \\",
        "    + (mass_rate_A + mass_rate_B) / total_mass",
    ]
    if plan.eccentric:
        lines.append("separation_rate += 2.0 * eccentricity * eccentricity_rate * roundness")
    return [*lines, f"return ({', '.join(slots.quantities)},)"]
