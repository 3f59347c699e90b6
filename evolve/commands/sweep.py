"""evolve sweep: many histories, one archive."""

from pathlib import Path

import numpy as np

from evolve.commands.output import Answer, aligned, quantity

REASON = "end.reason"


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("study", metavar="STUDY.toml")
    parser.add_argument("-o", "--output", metavar="FILE.h5", help="default: the study's name, here")
    parser.add_argument("--workers", type=int, default=1, metavar="N", help="processes (1)")
    parser.add_argument("--cluster", metavar="ADDRESS", help="of a dask.distributed scheduler")
    parser.add_argument("--replace", action="store_true", help="overwrite; a journal of another study too")
    parser.add_argument("--allow-code", action="store_true", help="execute laws of your own")


def run(arguments):
    """Run the study, or what is left of it."""
    from evolve.commands.progress import counting_bar
    from evolve.errors import ConfigError
    from evolve.studies.study import read_study
    from evolve.studies.sweep import histories_folder, journal_path, sweep

    if arguments.workers < 1:
        raise ConfigError(f"--workers {arguments.workers}: allowed: 1 or more")
    study = read_study(arguments.study, allow_code=arguments.allow_code)
    output = Path(arguments.output or Path(arguments.study).with_suffix(".h5").name)
    try:
        with counting_bar(study.size, "history", arguments.quiet) as progress:
            result = sweep(
                study, output, arguments.workers, arguments.cluster, arguments.replace, progress
            )
    except KeyboardInterrupt:
        journal = journal_path(output)
        print_resume(arguments, journal)
        raise
    lines = [f"{study.size} histories over {' x '.join(s.key for s in result.scales) or 'one point'}", ""]
    lines += _table(result)
    lines += ["", f"{study.size - result.failed} done, {result.failed} failed; written to {output}"]
    if study.histories:
        lines.append(f"the histories are in {histories_folder(output)}")
    warnings = [
        f"point {point}: {reason.splitlines()[0]}" for point, reason in list(result.messages.items())[:5]
    ]
    if result.failed > 5:
        warnings.append(f"{result.failed} points failed in all; the archive has their reasons")
    return Answer(lines, _summary(study, output, result), tuple(warnings))


def _summary(study, output, result):
    return {
        "archive": str(output), "points": study.size, "failed": result.failed,
        "results": {
            name: {"unit": result.units[name], "values": _words(v) if name == REASON else v}
            for name, v in result.values.items()
        },
        "axes": {s.key: {"unit": s.unit, "values": s.values} for s in result.scales},
    }  # fmt: skip


def _words(codes):
    """Ends in words; None for a point without a history."""
    from evolve.studies.results import OUTCOMES

    words = [OUTCOMES[int(code)] if code == code else None for code in codes.ravel()]
    return np.array(words, dtype=object).reshape(codes.shape)


def _table(result):
    """Smallest, median and largest of each result; of ends, how many there are of each."""
    rows, ends = [], []
    for name, values in result.values.items():
        there = values[np.isfinite(values)]
        if name == REASON:
            words, counts = np.unique(_words(there).astype(str), return_counts=True)
            ends = ["", "ends: " + ", ".join(f"{w} {n}" for w, n in zip(words, counts, strict=True))]
            continue
        three = (there.min(), np.median(there), there.max()) if there.size else (None,) * 3
        rows.append([name, str(there.size), *(_shown(x, result.units[name]) for x in three)])
    table = aligned(["result", "points", "smallest", "median", "largest"], rows) if rows else []
    return table + ends


def _shown(value, unit):
    return quantity(value, unit) if unit or value is None else f"{value:.4g}"


def print_resume(arguments, journal):
    """Where an interrupted study stands, and how to go on."""
    import sys

    print(
        f"evolve sweep: interrupted; what was done is in {journal}; the same command goes on",
        file=sys.stderr,
    )
