"""evolve draw: figures of histories and studies."""

from pathlib import Path

from evolve.commands.output import Answer

SUFFIXES = (".png", ".svg", ".pdf")


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("files", nargs="+", metavar="FILE.h5", help="several are overlaid")
    parser.add_argument(
        "--figure", choices=("history", "rate-period", "ledger", "pair", "stability", "waves"),
        default="history",
        help="which (history)",
    )
    parser.add_argument(
        "--at", action="append", default=[], metavar="EPOCH",
        help='of the pair: an event, "period=4 h" ...; may be repeated',
    )
    parser.add_argument(
        "--on", default="time", metavar="COLUMN",
        help="abscissa of the history: time, time_since:contact, period, mass_A ...",
    )  # fmt: skip
    parser.add_argument(
        "--gap", action="store_true", help="mark the observed period gap (rate-period)"
    )
    parser.add_argument("--result", metavar="NAME", help="of a study's archive; its first result")
    parser.add_argument("-o", "--output", metavar="FILE", help=".png, .svg or .pdf")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing file")


def figure_path(name, replace):
    """The path of a figure to be written, or what is wrong with it."""
    from evolve.archive import check_output
    from evolve.errors import ConfigError

    output = Path(name)
    if output.suffix not in SUFFIXES:
        raise ConfigError(f"{output}: allowed are files in {', '.join(SUFFIXES)}")
    check_output(output, replace)
    return output


def run(arguments):
    """Read, draw, write."""
    from evolve.archive import is_archive, open_history
    from evolve.errors import ConfigError
    from evolve.figures.history import history_figure, rate_period_figure
    from evolve.figures.study import sweep_figure
    from evolve.figures.style import save_figure
    from evolve.studies.study_archive import is_study, open_study

    first = Path(arguments.files[0])
    study = is_archive(first) and is_study(first)
    kind = "sweep" if study else arguments.figure
    output = figure_path(arguments.output or f"{first.stem}_{kind}.png", arguments.replace)
    if study:
        if len(arguments.files) > 1:
            raise ConfigError("a study is drawn alone; give one archive")
        save_figure(sweep_figure(open_study(first), arguments.result), output)
        return Answer([f"drawn to {output}"], {"file": str(output)})
    histories = [open_history(path) for path in arguments.files]
    names = [Path(path).stem for path in arguments.files]
    if arguments.figure == "history":
        figure = history_figure(histories, names, arguments.on)
    elif arguments.figure == "rate-period":
        figure = rate_period_figure(histories, names, arguments.gap)
    elif arguments.figure == "waves":
        from evolve.figures.waves import waves_figure

        figure = waves_figure(histories, names)
    else:
        figure = _of_one(histories, arguments)
    save_figure(figure, output)
    return Answer([f"drawn to {output}"], {"file": str(output)})


def _of_one(histories, arguments):
    """A figure that shows a single history."""
    from evolve.commands.show import epoch_of
    from evolve.errors import ConfigError
    from evolve.figures.ledger import ledger_figure
    from evolve.figures.pair import pair_figure

    if len(histories) > 1:
        raise ConfigError(f"--figure {arguments.figure} shows one history; give one archive")
    if arguments.figure == "ledger":
        return ledger_figure(histories[0])
    if arguments.figure == "stability":
        from evolve.figures.stability import stability_figure

        return stability_figure(histories[0])
    plain = [text if "=" not in text else epoch_of(histories[0], text) for text in arguments.at]
    return pair_figure(histories[0], plain or ("start", "end"))
