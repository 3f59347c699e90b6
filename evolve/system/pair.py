"""The pair of one config, ready to be integrated: equations, parameters, state at the start."""

from collections import namedtuple
from functools import lru_cache
from math import exp, log, sqrt
from typing import NamedTuple

from evolve.config.units import human
from evolve.constants import C, G, GRAVITATIONAL_TIME
from evolve.errors import ConfigError
from evolve.orbit.kepler import angular_momentum, mean_motion, period, separation_from_period
from evolve.orbit.lobes import lobe_fraction
from evolve.stars import MODELS
from evolve.system.equations import write
from evolve.system.layout import OTHER, layout
from evolve.system.plan import Chosen, choose_laws, parameters_of, plan_of

OVERFILL = 1e-3
"""A start overfilled by more than this share of the lobe is refused."""


NOTHING_LEFT = 1e-6


class Switches(NamedTuple):
    """What is on within one chapter: flow through each lobe, braking of each star."""

    flow_A: bool = False
    flow_B: bool = False
    braking_A: bool = False
    braking_B: bool = False


_plans = {}


@lru_cache(maxsize=64)
def _code(text):
    return compile(text, "<equations>", "exec")


def _written(plan):
    """Layout, equations and class of quantities of a plan: made once for configs of one kind."""
    key = plan._replace(components=tuple(plan.components.items()))
    if key not in _plans:
        slots = layout(plan)
        _plans[key] = slots, write(plan), namedtuple("Quantities", slots.quantities)
    return _plans[key]


class Pair:
    """One config's pair of stars: what is integrated, with which numbers, from where.

    Parameters
    ----------
    config : evolve.config.Config
        Completed and checked.
    star_keys : dict, optional
        "A" or "B" -> Keys of a star that goes on from an earlier pair as it was.
    state : dict, optional
        Core slot -> value of that earlier pair.

    Attributes
    ----------
    config, laws, plan, layout, parameters
        The config; the laws chosen; the plan of the equations; the slots; the values.
    equations : str
        The right-hand side as the text of a Python module.
    models : dict
        "A" and "B" -> StarModel.
    gauges : callable
        Of quantities; the readings named in `layout.gauges`.
    start : list of float
        State at the start, in the order of `layout.core`.

    Raises
    ------
    ConfigError
        If the pair starts overfilled, or the orbit is too small for its stars.
    """

    def __init__(self, config, star_keys=None, state=None):
        values = config.values
        self.config = config
        self.models = {c: MODELS[values[c]["star"]] for c in "AB"}
        carried = star_keys or {}
        self.star_keys = {
            c: carried[c] if c in carried else self.models[c].prepare(values[c]["mass"], values[c])
            for c in "AB"
        }
        self.laws = choose_laws(config)
        self.plan, self.functions = plan_of(config, self.laws)
        self.layout, self.equations, self.Quantities = _written(self.plan)
        self.parameters = parameters_of(config, self.laws, self.layout, self.star_keys)
        namespace = {
            name: function
            for name, function in self.functions.items()
            if not function.__module__.startswith("evolve.")
        }
        exec(_code(self.equations), namespace)  # the text of evolve.system.equations only
        self._rates, self._quantities = namespace["rates"], namespace["quantities"]
        self.gauges = namespace["gauges"]
        self.stops_below = {
            c: values["braking"][c]["stops_below"] if self.laws.braking[c] else 0.0 for c in "AB"
        }
        slots = {k: v for k, v in (state or {}).items() if k[-1] in carried}
        self.start = start_state(self, slots)

    def quantities(self, time, state, switches):
        """Everything that columns and events need at one state, by name.

        Parameters
        ----------
        time : float  [yr]
        state : sequence of float
            Core state (more may follow).
        switches : Switches

        Returns
        -------
        Quantities
        """
        core = state[: len(self.layout.core)]
        return self.Quantities._make(self._quantities(time, *core, switches, self.parameters))

    def right_side(self, switches):
        """dy/dt of core and ledger as solve_ivp wants it, for one set of switches."""
        rates, parameters, n = self._rates, self.parameters, len(self.layout.core)

        def right_side(time, state):
            return rates(time, *state.tolist()[:n], switches, parameters)

        return right_side

    def first_switches(self):
        """Braking as the masses at the start have it; no flow."""
        masses = dict(zip(self.plan.order, self.start, strict=False))
        on = {
            c: self.laws.braking[c] is not None and masses[c] > self.stops_below[c] for c in "AB"
        }
        return Switches(braking_A=on["A"], braking_B=on["B"])

    def mass_range(self, c):
        """Masses within which the model of component c means anything [solMass].

        A star that has lost all but a millionth of itself is none.
        """
        low, high = self.models[c].mass_range
        keys = self.star_keys[c]
        low = max(getattr(keys, "mass_low", low), NOTHING_LEFT * self.config.values[c]["mass"])
        return low, getattr(keys, "mass_high", high)

    def gyration(self, c):
        """k2 of the moment of inertia k2 m R2 of component c."""
        written = self.config.values[c].get("gyration")
        return self.models[c].gyration if written is None else written

    def smallest_separation(self):
        """Where point masses count as merged: 6 G M / c2, the last stable circular orbit."""
        return 6.0 * G * (self.start[0] + self.start[1]) / C**2


def _structure(pair, c, radius=1.0):
    values = pair.config.values[c]
    model = pair.models[c]
    phase = model.start_phase(values["mass"], values) if model.phase else 0.0
    return model.structure(values["mass"], radius, phase, pair.star_keys[c])


def start_state(pair, carried=None):
    """Core state at the start, from period, separation or fill and the stars' radii.

    Parameters
    ----------
    pair : Pair
    carried : dict, optional
        Core slot -> value, of a star that goes on from an earlier pair.

    Returns
    -------
    list of float

    Raises
    ------
    ConfigError
        If a star starts overfilled.
    """
    values, carried = pair.config.values, carried or {}
    orbit = values["orbit"]
    masses = {c: values[c]["mass"] for c in pair.plan.order}
    eccentricity = orbit["eccentricity"]
    fractions = {c: lobe_fraction(masses[c] / masses[OTHER[c]]) for c in pair.plan.order}
    radii = {c: _start_radius(pair, c, carried) for c in pair.plan.order}
    separation = _start_separation(pair, masses, radii, fractions)
    lobes = {c: separation * (1.0 - eccentricity) * fractions[c] for c in pair.plan.order}
    for c in pair.plan.order:
        if radii[c] == "lobe":
            radii[c] = lobes[c]
    for c in pair.plan.order:
        if not carried and radii[c] > lobes[c] * (1.0 + OVERFILL):
            raise ConfigError(_overfilled(pair, c, radii[c], lobes[c], masses, fractions))
    for c in pair.plan.order:
        capture = pair.laws.capture[c]
        if isinstance(capture, Chosen) and not radii[c] and not capture.keys.speed:
            raise ConfigError(
                f"{pair.config.name}: wind.{c}.speed is missing: a component without a radius has "
                f"no escape speed that {capture.name} could take; allowed: a speed above 0 km/s"
            )
    state = [*masses.values(), angular_momentum(*masses.values(), separation, eccentricity)]
    if pair.plan.eccentric:
        state.append(eccentricity / sqrt(1.0 - eccentricity**2))
    state += [log(radii[c]) for c in pair.plan.order if pair.plan.components[c].relaxing]
    state += [_start_phase(pair, c, carried) for c in pair.plan.order if pair.plan.components[c].phase]
    omega = mean_motion(separation, sum(masses.values()))
    for c in pair.plan.order:
        if pair.plan.components[c].tides:
            spin = values["tides"][c].get("spin")
            gyration = pair.gyration(c)
            momentum = gyration * masses[c] * radii[c] ** 2 * (omega if spin is None else spin)
            state.append(carried.get(f"spin_momentum_{c}", momentum))
    return [float(x) for x in state]


def _start_phase(pair, c, carried):
    values = pair.config.values[c]
    if f"phase_{c}" in carried:
        return carried[f"phase_{c}"]
    return pair.models[c].start_phase(values["mass"], values)


def _start_radius(pair, c, carried):
    """The radius at the start, or "lobe" where it is to fill the lobe."""
    if f"ln_radius_{c}" in carried:
        return exp(carried[f"ln_radius_{c}"])
    model, written = pair.models[c], pair.config.values[c].get("radius")
    if written == "lobe":
        return "lobe"
    if not model.relaxing:
        return _structure(pair, c).radius
    if written is not None and "radius" not in model.keys._fields:
        return written
    return _structure(pair, c).equilibrium


def _start_separation(pair, masses, radii, fractions):
    orbit = pair.config.values["orbit"]
    total = sum(masses.values())
    if orbit["separation"] is not None:
        return orbit["separation"]
    if orbit["period"] is not None:
        return separation_from_period(orbit["period"], total)
    if "lobe" in radii.values():
        raise ConfigError(
            f'{pair.config.name}: orbit.fill = {orbit["fill"]} with radius = "lobe" leaves the '
            "separation open; give orbit.period or orbit.separation"
        )
    sizes = [radii[c] / fractions[c] for c in "AB" if pair.models[c].overflows]
    largest = max(sizes or [radii[c] / fractions[c] for c in "AB"])
    if largest <= 0.0:
        raise ConfigError(
            f"{pair.config.name}: orbit.fill = {orbit['fill']} needs a star with a radius; "
            "give orbit.period or orbit.separation"
        )
    return largest / (orbit["fill"] * (1.0 - orbit["eccentricity"]))


def _overfilled(pair, c, radius, lobe, masses, fractions):
    eccentricity = pair.config.values["orbit"]["eccentricity"]
    contact = period(radius / ((1.0 - eccentricity) * fractions[c]), sum(masses.values()))
    return (
        f"{pair.config.name}: component {c} starts overfilled: R = {radius:.5g} Rsun exceeds its "
        f"lobe, R_L = {lobe:.5g} Rsun (fill {radius / lobe:.4f}, at most {1 + OVERFILL}); it "
        f"reaches contact at a period of {human(contact, 'time')}. Start there with "
        f'contact = true in [orbit], or give the star the lobe\'s radius with radius = "lobe" '
        f"in [{c}] (relaxing stars)"
    )


def thermal_time(mass, radius, luminosity):
    """Kelvin-Helmholtz time G m2/(R L) [yr] from solMass, solRad, solLum."""
    return GRAVITATIONAL_TIME * mass * mass / (radius * luminosity)


__all__ = ["OVERFILL", "Pair", "Switches", "start_state", "thermal_time"]
