"""evolve sweep: many histories, one archive."""

from pathlib import Path

import numpy as np

from evolve.commands.output import Answer, aligned


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
    from evolve.studies.sweep import journal_path, sweep

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
    rows = [
        [name, str(int(np.isfinite(v).sum())), *(_span(v))] for name, v in result.values.items()
    ]
    lines = [f"{study.size} histories over {' x '.join(s.key for s in result.scales) or 'one point'}", ""]
    lines += aligned(["result", "points", "smallest", "median", "largest", ], rows)
    lines = [line + _unit(result, line) for line in lines]
    lines += ["", f"{study.size - result.failed} done, {result.failed} failed; written to {output}"]
    warnings = [
        f"point {point}: {reason.splitlines()[0]}" for point, reason in list(result.messages.items())[:5]
    ]
    summary = {
        "archive": str(output), "points": study.size, "failed": result.failed,
        "results": {name: {"unit": result.units[name], "values": v} for name, v in result.values.items()},
        "axes": {s.key: {"unit": s.unit, "values": s.values} for s in result.scales},
    }  # fmt: skip
    return Answer(lines, summary, tuple(warnings))


def print_resume(arguments, journal):
    """Where an interrupted study stands, and how to go on."""
    import sys

    print(
        f"evolve sweep: interrupted; what was done is in {journal}; the same command goes on",
        file=sys.stderr,
    )


def _span(values):
    there = values[np.isfinite(values)]
    if not there.size:
        return ["-", "-", "-"]
    return [f"{x:.5g}" for x in (there.min(), np.median(there), there.max())]


def _unit(result, line):
    name = line.split("  ")[0].strip()
    return f"  {result.units[name]}" if result.units.get(name) else ""
