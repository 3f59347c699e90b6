"""evolve run: the history of a config."""

from pathlib import Path

from evolve.commands.output import Answer


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("config", metavar="CONFIG or ARCHIVE")
    parser.add_argument("-o", "--output", metavar="FILE.h5", help="default: the config's name, here")
    add_settings(parser)
    parser.add_argument("--until", metavar="EVENT", help="end at this event")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing file")
    parser.add_argument(
        "--verify", action="store_true", help="remake an archive and compare; writes nothing"
    )


def add_settings(parser):
    """Arguments of every command that reads a config."""
    parser.add_argument(
        "--set", action="append", default=[], metavar="KEY=VALUE",
        help='change a key, such as --set "A.mass=0.7 Msun"; may be repeated',
    )  # fmt: skip
    parser.add_argument(
        "--allow-code", action="store_true", help="execute a law of your own that the config names"
    )


def config_of(path, settings=(), allow_code=False):
    """The config in a TOML file, or the one that an archive keeps."""
    from evolve.archive import is_archive, open_history
    from evolve.config import read_config, read_config_text

    if not is_archive(path):
        return read_config(path, set=settings, allow_code=allow_code)
    history = open_history(path)
    config = read_config_text(history.config_text, history.config_files, str(path))
    return read_config(config, set=settings)


def run(arguments):
    """Compute, save, tell."""
    from evolve.archive import check_output, is_archive, write_archive
    from evolve.commands.progress import history_bar
    from evolve.commands.summary import history_result, summary
    from evolve.errors import ConfigError
    from evolve.integrate import integrate
    from evolve.integrate.outcomes import exit_status

    if arguments.verify and not is_archive(arguments.config):
        raise ConfigError(f"{arguments.config}: --verify needs an archive")
    settings = list(arguments.set)
    if arguments.until:
        settings.append(f"end.event={arguments.until}")
    config = config_of(arguments.config, settings, arguments.allow_code)
    output = Path(arguments.output or Path(Path(arguments.config).name).with_suffix(".h5"))
    if not arguments.verify:
        check_output(output, arguments.replace)
    with history_bar(arguments.quiet) as progress:
        history = integrate(config, progress)
    if arguments.verify:
        return _verify(arguments.config, history)
    write_archive(history, output, arguments.replace)
    lines = [*summary(history), "", f"written to {output}"]
    result = {**history_result(history), "archive": str(output)}
    status = exit_status(history.outcome)
    warnings = list(history.warnings)
    if history.outcome in ("validity", "table_end"):
        warnings.append(history.message)
    if status:
        from evolve.config.units import human

        reached = human(float(history["time"][-1]), "time", 5)
        warnings.append(f"{history.message} It got to {reached}; what was computed is in {output}.")
    return Answer(lines, result, tuple(warnings), status)


def _verify(path, history):
    from evolve.archive import open_history
    from evolve.commands.output import aligned
    from evolve.history import largest_differences

    differences = largest_differences(open_history(path), history)
    worst = max(differences.values())
    rows = [[name, f"{value:.3g}"] for name, value in differences.items()]
    verdict = "remade to the last bit" if worst == 0.0 else f"differs: {worst:.3g} at most"
    lines = [*aligned(["column", "largest difference, relative"], rows), "", f"{path}: {verdict}"]
    result = {"differences": differences, "largest": worst, "equal": worst == 0.0}
    return Answer(lines, result, (), 0 if worst == 0.0 else 1)
