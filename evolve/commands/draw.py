"""evolve draw: figures of histories."""

from pathlib import Path

from evolve.commands.output import Answer

SUFFIXES = (".png", ".svg", ".pdf")


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("files", nargs="+", metavar="FILE.h5", help="several are overlaid")
    parser.add_argument(
        "--figure", choices=("history", "rate-period"), default="history", help="which (history)"
    )
    parser.add_argument(
        "--on", default="time", metavar="COLUMN",
        help="abscissa of the history: time, time_since:contact, period, mass_A ...",
    )  # fmt: skip
    parser.add_argument(
        "--gap", action="store_true", help="mark the observed period gap (rate-period)"
    )
    parser.add_argument("-o", "--output", metavar="FILE", help=".png, .svg or .pdf")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing file")


def run(arguments):
    """Read, draw, write."""
    from evolve.archive import check_output, open_history
    from evolve.errors import ConfigError
    from evolve.figures.history import history_figure, rate_period_figure
    from evolve.figures.style import save_figure

    first = Path(arguments.files[0])
    output = Path(arguments.output or f"{first.stem}_{arguments.figure}.png")
    if output.suffix not in SUFFIXES:
        raise ConfigError(f"{output}: allowed are files in {', '.join(SUFFIXES)}")
    check_output(output, arguments.replace)
    histories = [open_history(path) for path in arguments.files]
    names = [Path(path).stem for path in arguments.files]
    if arguments.figure == "history":
        figure = history_figure(histories, names, arguments.on)
    else:
        figure = rate_period_figure(histories, names, arguments.gap)
    save_figure(figure, output)
    return Answer([f"drawn to {output}"], {"file": str(output)})
