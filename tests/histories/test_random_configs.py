"""Random legal configs over the whole range of every key end with a stated reason."""

import random
import tempfile
from pathlib import Path

import numpy as np
import pytest

import evolve
from evolve.errors import ConfigError
from evolve.integrate.outcomes import GOOD

SEED = 20260117
COUNT = 500
CHUNKS = 25
TABLES = Path(tempfile.mkdtemp(prefix="random_tracks"))
MAY_BE_NAN = ("zeta_lobe", "zeta_star", "transfer_time", "thermal_time", "disc_critical_rate",
              "wave_strain")  # fmt: skip
"""Columns of the donor, the disc or the waves that have no value where those are not."""
OUTCOMES = {*GOOD, "step_limit", "domain", "non_finite", "failed"}


def log_uniform(rng, low, high):
    return float(np.exp(rng.uniform(np.log(low), np.log(high))))


def random_star(rng):
    model = rng.choice(["dwarf", "dwarf", "white-dwarf", "compact", "power-law", "helium-star",
                        "main-sequence", "main-sequence", "giant", "expanding", "track"])  # fmt: skip
    if model in ("helium-star", "main-sequence", "giant", "expanding", "track"):
        return random_evolving(rng, model)
    if model == "dwarf":
        return {"star": model, "mass": rng.uniform(0.02, 0.98),
                "inflation": rng.choice([0.0, rng.uniform(0.0, 0.2)])}  # fmt: skip
    if model == "white-dwarf":
        return {"star": model, "mass": rng.uniform(0.05, 1.37)}
    if model == "compact":
        kind = rng.choice(["neutron-star", "black-hole", "point-mass"])
        spin = {"spin": rng.choice([0.0, rng.random()])} if kind == "black-hole" else {}
        mass = {"neutron-star": rng.uniform(1.1, 2.1), "black-hole": log_uniform(rng, 3.0, 100.0),
                "point-mass": log_uniform(rng, 0.01, 100.0)}[kind]  # fmt: skip
        return {"star": model, "kind": kind, "mass": mass, **spin}
    return {"star": model, "mass": log_uniform(rng, 0.1, 20.0),
            "radius": log_uniform(rng, 0.01, 50.0), "exponent": rng.uniform(-1.0, 3.0)}  # fmt: skip


def random_track(rng):
    """A star on a table that rises, with a core in half of the cases."""
    rows, mass = rng.randint(4, 12), log_uniform(rng, 0.5, 20.0)
    ages = np.cumsum([log_uniform(rng, 1e5, 1e9) for _ in range(rows)])
    radii = log_uniform(rng, 0.2, 20.0) * np.cumprod([rng.uniform(0.8, 2.0) for _ in range(rows)])
    table = {"age": ages, "mass": mass * np.linspace(1.0, rng.uniform(0.7, 1.0), rows), "radius": radii}
    if rng.random() < 0.5:
        table["core_mass"] = mass * np.linspace(0.05, rng.uniform(0.1, 0.6), rows)
    if rng.random() < 0.5:
        table["luminosity"] = log_uniform(rng, 0.1, 1e4) * np.linspace(1.0, 3.0, rows)
    units = {"age": "yr", "mass": "Msun", "radius": "Rsun", "core_mass": "Msun", "luminosity": "Lsun"}
    lines = [", ".join(f"{name} [{units[name]}]" for name in table)]
    lines += [", ".join(repr(float(x)) for x in row) for row in zip(*table.values(), strict=True)]
    path = TABLES / f"{abs(hash(tuple(lines))):x}.csv"
    path.write_text("\n".join(lines) + "\n")
    return {"star": "track", "mass": mass, "table": str(path), "zeta_ad": rng.uniform(-0.3, 4.0),
            "zeta_eq": rng.choice([0.0, rng.uniform(-0.5, 1.0)])}  # fmt: skip


def random_evolving(rng, model):
    if model == "track":
        return random_track(rng)
    if model == "helium-star":
        half = rng.random() < 0.3
        return {"star": model, "mass": rng.uniform(0.02, 0.15) if half else rng.uniform(0.35, 4.5),
                "semi_degenerate": str(half).lower()}  # fmt: skip
    if model == "main-sequence":
        return {"star": model, "mass": log_uniform(rng, 0.15, 60.0), "burnt": rng.uniform(0.0, 0.95)}
    if model == "giant":
        core = rng.uniform(0.165, 0.44)
        return {"star": model, "core_mass": core, "mass": rng.uniform(core + 0.05, 2.2),
                "relation": rng.choice(["webbink-1983", "rappaport-1995"])}  # fmt: skip
    return {"star": model, "mass": log_uniform(rng, 0.2, 20.0), "radius": log_uniform(rng, 0.1, 20.0),
            "growth_time": f"{log_uniform(rng, 1e-3, 10.0)} Gyr", "zeta_ad": rng.uniform(-0.3, 4.0)}  # fmt: skip


def random_extras(rng, config):
    """Winds, ceilings, tides, what follows an unstable overflow, limits, an observer."""
    for c in "AB":
        if rng.random() < 0.25:
            law = rng.choice(["reimers-1975", "nieuwenhuijzen-dejager-1990", "vink-2001", "constant"])
            wind = {"law": law, "capture": rng.choice(["none", "bondi-hoyle", rng.random()])}
            if law == "constant":
                wind["rate"] = log_uniform(rng, 1e-14, 1e-6)
            if config[c]["star"] not in ("compact", "white-dwarf") or law == "constant":
                config.setdefault("wind", {})[c] = wind
        if rng.random() < 0.15 and config[c]["star"] not in ("compact", "white-dwarf"):
            config.setdefault("tides", {})[c] = {"law": "hut-1981", "k_over_t": rng.choice(
                ["auto", log_uniform(rng, 1e-4, 10.0)])}  # fmt: skip
    if rng.random() < 0.4:
        config["acceptance"]["ceiling"] = rng.choice(
            ["eddington", "hydrogen-burning-band", log_uniform(rng, 1e-12, 1e-5)])  # fmt: skip
    if rng.random() < 0.4:
        config["envelope"] = {"follows": rng.choice(["common-envelope", "continue"]),
                              "efficiency": log_uniform(rng, 0.1, 5.0)}  # fmt: skip
    if rng.random() < 0.3:
        dwarfs = [config[c]["mass"] for c in "AB" if config[c]["star"] == "white-dwarf"]
        config["limits"] = {"white_dwarf": rng.uniform(max([1.2, *dwarfs]), 1.44),
                            "neutron_star": rng.uniform(2.1, 3.5)}  # fmt: skip
    for c in "AB":
        if rng.random() < 0.15:
            config.setdefault("kick", {})[c] = random_kick(rng, config[c]["mass"])
    if rng.random() < 0.2:
        config["observer"] = {"distance": "1 kpc", "inclination": f"{rng.uniform(0, 180)} deg"}


def random_kick(rng, mass):
    """At a time, or when the star collapses if it does; with any direction."""
    kick = {"speed": log_uniform(rng, 1.0, 500.0), "polar": f"{rng.uniform(0, 180)} deg",
            "azimuth": f"{rng.uniform(0, 360)} deg"}  # fmt: skip
    if rng.random() < 0.5:
        kick |= {"anomaly": f"{rng.uniform(0, 360)} deg"}
    else:
        kick |= {"seed": rng.randint(0, 1000)}
    if rng.random() < 0.7:
        kick |= {"time": f"{log_uniform(rng, 1e3, 1e9)} yr", "mass_lost": rng.uniform(0.0, 0.5) * mass}
    return kick


def random_braking(rng):
    law = rng.choice(["rappaport-verbunt-joss-1983", "verbunt-zwaan-1981", "andronov-2003",
                      "ivanova-taam-2003"])  # fmt: skip
    keys = {"law": law, "strength": log_uniform(rng, 0.01, 10.0),
            "stops_below": rng.choice([0.0, 0.2, 0.35])}  # fmt: skip
    if law.startswith("rappaport"):
        keys["gamma"] = rng.uniform(0.0, 4.0)
    return keys


def random_expulsion(rng):
    ways = ["accretor", "donor", "ring", "multiple"]
    first, second = rng.sample(ways, 2)
    weight = round(rng.uniform(0.05, 0.95), 3)
    return {
        "from": rng.choice([first, {first: weight, second: 1.0 - weight}, "outer-point"]),
        "ring": log_uniform(rng, 1.0, 4.0),
        "multiple": rng.uniform(0.1, 3.0),
        "consequential": rng.choice(["none", "none", "schreiber-2016"]),
    }


def random_config(rng):
    """One legal config: every section may be there, every key may take its whole range."""
    orbit = rng.choice([
        {"fill": rng.uniform(0.3, 1.0)}, {"contact": True}, {"fill": rng.uniform(0.9, 1.0)},
        {"period": f"{log_uniform(rng, 0.5, 300.0)} h"},
        {"separation": log_uniform(rng, 0.1, 300.0)},
    ])  # fmt: skip
    if rng.random() < 0.3 and "contact" not in orbit:
        orbit["eccentricity"] = rng.choice([rng.uniform(0.0, 0.9), rng.uniform(0.9, 0.999)])
    config = {
        "A": random_star(rng), "B": random_star(rng), "orbit": orbit,
        "waves": {"strength": rng.choice([1.0, log_uniform(rng, 0.1, 100.0)])},
        "overflow": {"law": rng.choice(["atmosphere", "polytrope", "locked"])},
        "acceptance": {"share": rng.choice([0.0, 1.0, rng.random()])},
        "expulsion": random_expulsion(rng),
        "end": {"time": f"{log_uniform(rng, 1e-3, 14.0)} Gyr"},
        "numerics": {"max_evaluations": 60000, "rtol": log_uniform(rng, 1e-8, 1e-4)},
    }  # fmt: skip
    if rng.random() < 0.5:
        config["braking"] = random_braking(rng)
    if rng.random() < 0.1:
        config["waves"] = {"law": "off"}
    random_extras(rng, config)
    for key, value in (("period_below", "1 h"), ("period_above", "100 h"), ("rate_below", 1e-11)):
        if rng.random() < 0.1:
            config["end"][key] = value
    return config


def check(history):
    assert history.outcome in OUTCOMES and history.message
    # the faults left: a kick that asks for more mass than there is, and too many evaluations
    assert history.outcome in (*GOOD, "step_limit") or "no such mass" in history.message
    time = history["time"]
    assert len(time) >= 1 and (np.diff(time) > 0.0).all()
    for name, values in history.columns.items():
        if name not in MAY_BE_NAN:
            assert np.isfinite(values).all(), name
    for name in ("overflow_A", "overflow_B", "wind_A", "captured_B", "mass_A", "mass_B", "separation"):
        if name in history.columns:
            assert (history[name] >= 0.0).all(), name
    assert abs(history.ledger.residuals["angular_momentum"]) < 1e-6
    assert history.events[0].name == "start" and history.events[-1].name == "end"
    assert history.chapters[0].first_row == 0
    assert history.chapters[-1].last_row == len(time) - 1


@pytest.mark.parametrize("chunk", range(CHUNKS))
def test_random_legal_configs_end_with_a_reason(chunk):
    rng = random.Random(SEED + chunk)
    done = refused = 0
    while done < COUNT // CHUNKS:
        config = random_config(rng)
        try:
            history = evolve.run(config)
        except ConfigError as error:  # an overfilled start can only be told by the stars
            assert "overfilled" in str(error) or "lobe" in str(error) or "radius" in str(error)
            refused += 1
            assert refused < 40 * COUNT
            continue
        check(history)
        done += 1
