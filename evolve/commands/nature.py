"""What the components of a history are at its end, in the words of the trade."""

import tomllib

COMPACT = {"neutron-star": "neutron star", "black-hole": "black hole", "point-mass": "point mass"}
MODELS = {
    "dwarf": "dwarf", "white-dwarf": "white dwarf", "helium-star": "helium star",
    "main-sequence": "main-sequence star", "giant": "giant", "expanding": "expanding star",
    "power-law": "star", "track": "star on its track",
}  # fmt: skip
HELIUM_CORE = 0.5
"""A core above this left by a common envelope burns helium on [solMass]."""


def natures(history):
    """What each component is at the end of a history.

    Parameters
    ----------
    history : evolve.history.History

    Returns
    -------
    dict of str
        "A", "B" -> such as "white dwarf", from the config and what the events made of it.
    """
    config, found = tomllib.loads(history.config_text), {}
    for c in "AB":
        star = config[c]["star"]
        found[c] = COMPACT.get(config[c].get("kind"), "") if star == "compact" else MODELS[star]
    for event in history.events:
        c = event.component
        if event.name == "remnant_formed":
            core = history[f"mass_{c}"][min(event.row + 1, len(history) - 1)]
            burns = core > HELIUM_CORE and found[c] == MODELS["track"]
            found[c] = MODELS["helium-star" if burns else "white-dwarf"]
        elif event.name == "collapse":
            found[c] = "neutron star" if found[c] == MODELS["white-dwarf"] else "black hole"
    return found
