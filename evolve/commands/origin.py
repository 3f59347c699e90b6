"""evolve origin: which starting pairs pass through an observed one."""

from evolve.commands.output import Answer, aligned, of_column, quantity, scalar
from evolve.history.columns import COLUMNS


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("study", metavar="STUDY.toml")
    parser.add_argument("--workers", type=int, default=1, metavar="N", help="processes (1)")


def run(arguments):
    """Search, refine, tell."""
    from evolve.commands.progress import counting_bar
    from evolve.errors import ConfigError
    from evolve.studies.origin import origin
    from evolve.studies.study import read_study

    if arguments.workers < 1:
        raise ConfigError(f"--workers {arguments.workers}: allowed: 1 or more")
    study = read_study(arguments.study, needs=("vary", "observed"))
    with counting_bar(study.size, "history", arguments.quiet) as progress:
        found = origin(study, arguments.workers, progress)
    fitting = [entry for entry in found if entry.fits]
    lines = []
    if not fitting:
        lines = ["No starting pair in these ranges passes through the observed one. What came nearest:"]
    for number, entry in enumerate(fitting or found[:3], 1):
        lines += ["", *_lines(number, entry)]
    result = {"fits": bool(fitting), "origins": [_result(entry) for entry in fitting or found[:3]]}
    return Answer(lines, result, (), 0 if fitting else 1)


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
        "branch": {"regime": match.branch[0], "contacts": match.branch[1], "period": match.branch[2]},
        "state": {n: scalar(v, COLUMNS[n].unit) for n, v in match.state.items()},
        "deviations": match.deviations,
        "before": match.before,
        "after": match.after,
    }
