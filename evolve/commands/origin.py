"""evolve origin: which starting pairs pass through an observed one."""

from evolve.commands.output import Answer, aligned, of_column, quantity, scalar
from evolve.history.columns import COLUMNS


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("study", metavar="STUDY.toml")
    parser.add_argument("--workers", type=int, default=1, metavar="N", help="processes (1)")
    parser.add_argument("--cluster", metavar="ADDRESS", help="of a dask.distributed scheduler")
    parser.add_argument("--draw", metavar="FILE", help="the map searched: .png, .svg or .pdf")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing figure")
    parser.add_argument("--allow-code", action="store_true", help="execute laws of your own")


def run(arguments):
    """Search, refine, tell."""
    from evolve.commands.progress import stages_bar
    from evolve.errors import ConfigError
    from evolve.studies.origin import origin
    from evolve.studies.study import read_study

    if arguments.workers < 1:
        raise ConfigError(f"--workers {arguments.workers}: allowed: 1 or more")
    figure = _figure_path(arguments)
    needs = ("vary", "observed")
    study = read_study(arguments.study, needs, arguments.allow_code)
    with stages_bar(arguments.quiet) as progress:
        found = origin(study, arguments.workers, arguments.cluster, progress)
    shown = found.fitting or found.origins[:3]
    lines = [f"{study.size} histories over {' x '.join(scale.key for scale in found.scales)}"]
    if not shown:
        lines += ["No history in these ranges has what was observed at any time."]
    elif not found.fitting:
        lines += ["No starting pair in these ranges passes through the observed one. What came nearest:"]
    for number, entry in enumerate(shown, 1):
        lines += ["", *_lines(number, entry)]
    if figure:
        _draw(found, figure)
        lines += ["", f"drawn to {figure}"]
    warnings = [f"point {n}: {text.splitlines()[0]}" for n, text in list(found.messages.items())[:5]]
    if len(found.messages) > 5:
        warnings.append(f"{len(found.messages)} points in all have no history")
    return Answer(lines, _whole(found, shown), tuple(warnings), 0 if found.fitting else 1)


def _figure_path(arguments):
    from pathlib import Path

    from evolve.archive import check_output
    from evolve.commands.draw import SUFFIXES
    from evolve.errors import ConfigError
    from evolve.figures.style import matplotlib

    if not arguments.draw:
        return None
    path = Path(arguments.draw)
    if path.suffix not in SUFFIXES:
        raise ConfigError(f"{path}: allowed are files in {', '.join(SUFFIXES)}")
    matplotlib()  # a missing extra shows before the search
    return check_output(path, arguments.replace)


def _draw(found, path):
    from evolve.figures.origin import origin_figure
    from evolve.figures.style import save_figure

    save_figure(origin_figure(found), path)


def _whole(found, shown):
    return {
        "fits": bool(found.fitting),
        "origins": [_result(entry) for entry in shown],
        "map": {
            "axes": {s.key: {"unit": s.unit, "values": s.values} for s in found.scales},
            "mismatch": [
                {"branch": _branch(branch), "values": cells} for branch, cells in found.maps.items()
            ],
        },
    }


def _branch(branch):
    return {"regime": branch[0], "contacts": branch[1], "period": branch[2]}


def _lines(number, entry):
    match = entry.match
    regime, contacts, word = match.branch
    head = (
        f"{number}. {regime.replace('_', ' of ')}, contact {contacts}, period {word}; "
        f"{quantity(match.time, 'yr')} after the start; mismatch {match.mismatch:.3g}"
    )
    starts = []
    for key, value in entry.start.items():
        low, high = entry.ranges.get(key, (None, None))
        unit = entry.units[key]
        span = f"{low:.5g} .. {high:.5g} {unit}" if low is not None else ""
        starts.append([key, f"{value:.5g} {unit}" if isinstance(value, float) else value, span])
    seen = [
        [name, of_column(name, match.state[name]), f"{match.deviations[name]:+.2f} sigma"]
        for name in match.state
    ]
    return [
        head, *aligned(["starting value", "", "range"], starts, "   "),
        *aligned(["observed", "there", "off by"], seen, "   "),
        f"   before: {', '.join(match.before) or 'nothing'}",
        f"   next:   {', '.join(match.after) or 'nothing'}",
    ]  # fmt: skip


def _result(entry):
    match = entry.match
    return {
        "start": {k: scalar(v, entry.units[k]) if isinstance(v, float) else v for k, v in entry.start.items()},
        "ranges": entry.ranges,
        "fits": entry.fits,
        "mismatch": match.mismatch,
        "time": scalar(match.time, "yr"),
        "branch": _branch(match.branch),
        "state": {n: scalar(v, COLUMNS[n].unit) for n, v in match.state.items()},
        "deviations": match.deviations,
        "before": match.before,
        "after": match.after,
    }
