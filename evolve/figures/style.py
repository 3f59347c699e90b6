"""One look for all figures: colours, sizes, labels, axes."""

from evolve.errors import MissingExtra
from evolve.history.columns import COLUMNS

COMPONENT = {"A": "#D55E00", "B": "#0072B2"}
"""Vermilion and blue of Okabe & Ito (2008): told apart with any colour vision, and in grey."""
SERIES = ("#000000", "#D55E00", "#0072B2", "#009E73", "#CC79A7", "#E69F00", "#56B4E9")
DASHES = ("-", (0, (5, 1.5)), (0, (1, 1)), (0, (5, 1, 1, 1)), (0, (3, 1, 1, 1, 1, 1)))
REGIME = {"detached": "#FFFFFF", "overflow_A": "#FBE6D9", "overflow_B": "#DCEAF5", "inspiral": "#EEEEEE"}
REGIME_WORDS = {"detached": "detached", "overflow_A": "overflow of A", "overflow_B": "overflow of B",
                "inspiral": "inspiral"}  # fmt: skip
SETTINGS = {
    "font.size": 8.0,
    "axes.labelsize": 8.0,
    "xtick.labelsize": 7.0,
    "ytick.labelsize": 7.0,
    "legend.fontsize": 7.0,
    "axes.linewidth": 0.6,
    "lines.linewidth": 1.2,
    "xtick.direction": "in",
    "ytick.direction": "in",
    "axes.spines.top": True,
    "legend.frameon": False,
    "svg.fonttype": "path",
    "svg.hashsalt": "evolve",
    "pdf.fonttype": 42,
}
UNITS = {
    "solMass": r"$M_\odot$", "solRad": r"$R_\odot$", "solLum": r"$L_\odot$", "yr": "yr",
    "h": "h", "solMass / yr": r"$M_\odot\,\mathrm{yr}^{-1}$", "K": "K",
}  # fmt: skip


def matplotlib():
    """The matplotlib package, or one sentence on how to install it."""
    try:
        import matplotlib as package
    except ImportError as error:
        raise MissingExtra("matplotlib", "figures") from error
    return package


def new_figure(width, height):
    """An empty Figure [inch], without any display."""
    matplotlib()
    from matplotlib.figure import Figure

    return Figure(figsize=(width, height), layout="constrained")


def styled(function):
    """Draw with the settings of this page, whatever the user's own are."""
    from functools import wraps

    @wraps(function)
    def drawn(*arguments, **options):
        with matplotlib().rc_context(SETTINGS):
            return function(*arguments, **options)

    return drawn


def label_of(column, words=None):
    """Axis label of a column: what it is, with its unit."""
    entry = COLUMNS[column]
    unit = UNITS.get(entry.unit, entry.unit)
    return f"{words or entry.long_name}" + (f" [{unit}]" if unit else "")


def save_figure(figure, path):
    """Write a Figure whole or not at all; equal figures give equal bytes.

    Parameters
    ----------
    figure : matplotlib.figure.Figure
    path : pathlib.Path
        .png, .svg or .pdf.
    """
    import os

    part = path.with_name(path.name + ".part")
    metadata = {".svg": {"Date": None}, ".pdf": {"CreationDate": None}}.get(path.suffix, {})
    with matplotlib().rc_context(SETTINGS):
        figure.savefig(part, format=path.suffix[1:], dpi=200, metadata=metadata)
    os.replace(part, path)


def plain_log_ticks(axis):
    """A logarithmic x or y axis in plain numbers: nobody reads 10^0.5 hours."""
    from matplotlib.ticker import FuncFormatter, LogLocator, NullFormatter

    axis.set_major_locator(LogLocator(subs=(1.0, 1.5, 2.0, 3.0, 5.0, 7.0)))
    axis.set_major_formatter(FuncFormatter(lambda value, _: f"{value:g}"))
    axis.set_minor_formatter(NullFormatter())
