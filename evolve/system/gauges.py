"""Gauges: the readings, made of the pair's quantities, whose crossings are events.

An event is a gauge crossing a level. Gauges are written as text beside the equations, so
that they run plain and compiled like them; which of them are watched, at which level and in
which direction, is the business of `evolve.integrate.watches`.
"""

RUNAWAY_FILL = 1.1
RUNAWAY_DYNAMICAL_TIMES = 100.0


def gauge_expressions(plan):
    """The gauges of a plan: name -> expression of the quantities.

    Parameters
    ----------
    plan : evolve.system.layout.Plan

    Returns
    -------
    dict of str
        fill_c: ln(R/R_L); excess_c: (R - R_L)/H, or ln(R/R_L) where a law has no H;
        rate_c: ln of the overflow in solMass/yr; drive_c: growth past the lobe with R = R_L
        imposed [1/yr]; stability_c: zeta_star - zeta_lobe; runaway_c: positive when
        R > 1.1 R_L or the donor empties itself within 100 dynamical times; mass_c: ln m; lag_c: ln(R/R_eq);
        convective_c: 1 with a convective envelope, else 0;
        phase_c: the clock
        of its model; envelope_c: mass outside the core [solMass]; ceiling_c: ln of what c
        accepts over its ceiling; burning_c: ln of what reaches c over the least that burns
        steadily there; eccentricity: ln e;
        darwin: positive when no stable synchronous orbit exists, (I_A + I_B) n > J/3 (Hut
        1980, A&A 92, 167); merger: positive when a lobe or the last stable orbit is filled; log_period: ln P in
        yr; period_rate: d ln P/dt [1/yr]; mass_ratio: ln(m_A/m_B); time [yr].
    """
    gauges = {"time": "time"}
    for c in plan.order:
        gauges[f"mass_{c}"] = f"log(mass_{c})"
        gauges[f"fill_{c}"] = f"log(max(radius_{c}, 1e-99) / lobe_{c})"
        if plan.components[c].relaxing:
            gauges[f"lag_{c}"] = f"log(radius_{c} / equilibrium_{c})"
        if plan.components[c].phase:
            gauges[f"phase_{c}"] = f"phase_{c}"
            gauges[f"convective_{c}"] = f"convective_{c}"
        if plan.components[c].phase == "core":
            gauges[f"envelope_{c}"] = f"mass_{c} - core_mass_{c}"
        if not plan.components[c].overflows:
            continue
        gauges[f"excess_{c}"] = f"excess_{c}"
        gauges[f"rate_{c}"] = f"log(max(overflow_{c}, 1e-300))"
        if plan.overflow == "locked":
            gauges[f"drive_{c}"] = f"drive_{c}"
        gauges[f"stability_{c}"] = f"zeta_{c} - zeta_lobe_{c}"
        gauges[f"runaway_{c}"] = (
            f"max(log(radius_{c} / lobe_{c} / {RUNAWAY_FILL}), log(max(overflow_{c}, 1e-300)"
            f" * {RUNAWAY_DYNAMICAL_TIMES} * sqrt(radius_{c}**3 / (G * mass_{c})) / mass_{c}))"
        )
    for c in plan.order:
        other = plan.components["B" if c == "A" else "A"]
        if plan.components[c].ceiling and (other.overflows or other.capture):
            gauges[f"ceiling_{c}"] = (
                f"log(max(accepted_{c}, 1e-300)) - log(max(ceiling_{c}, 1e-300))"
            )
            if plan.components[c].ceiling == "band":
                gauges[f"burning_{c}"] = (
                    f"log(max(accepted_{c} + expelled_{c}, 1e-300)) - log(max(edge_{c}, 1e-300))"
                )
    if plan.eccentric:
        gauges["eccentricity"] = "log(max(eccentricity, 1e-300))"
    spins = [f"spin_momentum_{c} / spin_{c}" for c in plan.order if plan.components[c].tides]
    if spins:  # moments of inertia of the stars whose spins are followed
        gauges["darwin"] = f"log(3.0 * ({' + '.join(spins)}) * omega / angular_momentum)"
    periastron = "(separation * (1.0 - eccentricity))"
    gauges["merger"] = (
        "max(radius_A / lobe_A, radius_B / lobe_B, "
        f"6.0 * G * (mass_A + mass_B) / (C * C * {periastron})) - 1.0"
    )
    gauges["log_period"] = f"log({6.283185307179586!r} / omega)"
    gauges["period_rate"] = (
        "1.5 * separation_rate - 0.5 * (mass_rate_A + mass_rate_B) / (mass_A + mass_B)"
    )
    gauges["mass_ratio"] = "log(mass_A / mass_B)"
    return gauges


def write_gauges(plan, quantities):
    """The text of `gauges(quantities) -> tuple`, in the order of `gauge_expressions`."""
    values = ",\n        ".join(gauge_expressions(plan).values())
    return (
        f"def gauges(quantities):\n    ({', '.join(quantities)},) = quantities\n"
        f"    return (\n        {values},\n    )\n"
    )
