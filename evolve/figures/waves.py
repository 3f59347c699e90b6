"""The waves figure: strain against frequency, with what a detector in space would see."""

import numpy as np

from evolve.errors import ConfigError
from evolve.figures.axes import time_labels
from evolve.figures.style import DASHES, SERIES, new_figure, styled

ARM = 2.5e9
TRANSFER = 299792458.0 / (2.0 * np.pi * ARM)
"""Length of an arm [m] and transfer frequency [Hz] of the detector, 19.09 mHz."""
CONFUSION = {"alpha": 0.138, "beta": -221.0, "kappa": 521.0, "gamma": 1680.0, "knee": 1.13e-3}
"""Of unresolved Galactic pairs after four years."""
YEARS, SECONDS = 4.0, 3.15576e7
AGES = 5


def instrument_noise(frequency):
    """Sky-averaged noise of the instrument alone [1/Hz] at a frequency [Hz]; see `detector_noise`."""
    f = np.asarray(frequency, dtype=float)
    optical = 1.5e-11**2 * (1.0 + (2e-3 / f) ** 4)
    acceleration = 3e-15**2 * (1.0 + (0.4e-3 / f) ** 2) * (1.0 + (f / 8e-3) ** 4)
    ratio = f / TRANSFER
    shaken = 2.0 * (1.0 + np.cos(ratio) ** 2) * acceleration / (2.0 * np.pi * f) ** 4
    return 10.0 / (3.0 * ARM**2) * (optical + shaken) * (1.0 + 0.6 * ratio**2)


def detector_noise(frequency):
    """Sky-averaged noise of the space detector LISA, with the Galaxy's unresolved pairs.

    Parameters
    ----------
    frequency : float or ndarray  [Hz]

    Returns
    -------
    float or ndarray  [1/Hz]
        Power spectral density S_n. Constants from memory.

    References
    ----------
    Robson, Cornish & Liu 2019, CQG 36, 105011, eqs. 1, 10, 11, 13, 14 and table 1.
    """
    f, c = np.asarray(frequency, dtype=float), CONFUSION
    bend = -(f ** c["alpha"]) + c["beta"] * f * np.sin(c["kappa"] * f)
    galaxy = 9e-45 * f ** (-7.0 / 3.0) * np.exp(bend) * (1.0 + np.tanh(c["gamma"] * (c["knee"] - f)))
    return instrument_noise(f) + galaxy


def gathered_strain(history, years=YEARS):
    """Strain times the root of the cycles seen: of those in the time of observation, or of those
    for which the pair stays at a frequency if they are fewer; ndarray (n,)."""
    f, rate = history["wave_frequency"], np.abs(history["period_derivative"])
    with np.errstate(divide="ignore"):
        cycles = np.minimum(f * years * SECONDS, 2.0 / rate)  # f2/(df/dt) = f P/(dP/dt)
    return history["wave_strain"] * np.sqrt(cycles)


@styled
def waves_figure(histories, names=None):
    """Tracks of strain against frequency, ages marked, over the noise of the detector LISA.

    Parameters
    ----------
    histories : History or sequence of History
    names : sequence of str, optional

    Returns
    -------
    matplotlib.figure.Figure
        h0 sqrt(N) of four years against sqrt(f S_n); 2/sqrt(5) of their ratio is the
        signal-to-noise ratio of a slow pair, averaged over sky and inclination.

    Raises
    ------
    ConfigError
        If a history has no strain: its config gives no distance, or no waves act.
    """
    histories = histories if isinstance(histories, (list, tuple)) else [histories]
    names = names or [history.title or f"history {n}" for n, history in enumerate(histories, 1)]
    figure = new_figure(4.6, 3.6)
    axis = figure.subplots()
    for number, (history, name) in enumerate(zip(histories, names, strict=True)):
        if "wave_strain" not in history.columns or not np.isfinite(history["wave_strain"]).any():
            raise ConfigError(
                f'{name}: no strain of waves is known; give the config a distance, as [observer] '
                'distance = "1 kpc" (the strain is that of circular orbits)'
            )
        colour = SERIES[(number + 1) % len(SERIES)]
        strain = gathered_strain(history)
        axis.plot(history["wave_frequency"], strain, color=colour, label=name, ls=DASHES[number % len(DASHES)])
        _ages(axis, history, strain, colour)
    f = np.geomspace(1e-5, 1.0, 600)
    axis.plot(f, np.sqrt(f * detector_noise(f)), color="0.45", lw=0.9, label="LISA, four years")
    axis.set_xscale("log")
    axis.set_yscale("log")
    axis.set_xlabel("frequency of the waves [Hz]")
    axis.set_ylabel(r"strain  $h_0\sqrt{N}$,  $\sqrt{f S_n}$")
    low, high = axis.get_xlim()
    axis.set_xlim(max(low, 1e-6), high)
    axis.legend(loc="best")
    return figure


def _ages(axis, history, strain, colour):
    """Dots along the track with the time since the start, or left to the end."""
    good = np.flatnonzero(np.isfinite(strain) & (strain > 0.0))
    path = np.log(history["wave_frequency"][good])
    if len(good) < 2 or path.max() == path.min():
        return
    way = np.concatenate([[0.0], np.cumsum(np.abs(np.diff(path)))])
    chosen = good[np.unique(np.searchsorted(way, np.linspace(0.0, way[-1], AGES)).clip(0, len(good) - 1))]
    labels = time_labels(history["time"][chosen], history["time"][-1])
    for row, label in zip(chosen, labels, strict=True):
        place = (history["wave_frequency"][row], strain[row])
        axis.plot(*place, "o", color=colour, ms=2.5)
        axis.annotate(label, place, (3, 3), textcoords="offset points", fontsize=6)
