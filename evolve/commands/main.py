"""The command line: which command was asked for, its answer in print, its exit status.

Exit status: 0 done; 1 done with a negative answer, or the computation failed; 2 what was
written is wrong; 3 the machine failed or a file is damaged; 130 interrupted.
"""

import argparse
import os
import sys
from importlib import import_module

COMMANDS = {
    "check": "is a config right: completed, with radii, lobes, period of contact; no run",
    "run": "the history of a config, or of an archive's config again",
    "show": "what is in an archive; the state at an epoch",
    "export": "a table from an archive, to a file or stdout",
    "contact": "when a pair reaches contact, which component, what drove it",
    "shrink": "how long gravitational waves take to merge two masses",
    "compare": "histories side by side, with their differences",
    "sweep": "many histories over axes and draws; resumes; one archive",
    "origin": "which starting pairs pass through an observed one",
    "draw": "figures of histories",
    "report": "one self-contained page: what happened, in words, figures and a moving panel",
    "lobe": "Roche lobes, Lagrange points and stability limits of a mass ratio",
    "laws": "every law and star: keys, units, validity, source",
    "template": "a commented config to start from",
    "sources": "the publications that a history rests on",
}
"""Name -> what it answers. The command NAME is `evolve/commands/NAME.py`, with two
functions: arguments(parser) and run(arguments) -> Answer."""

EPILOG = (
    "Exit status: 0 done; 1 negative answer or failed computation (what was computed is "
    "saved); 2 something written is wrong; 3 a damaged file or a failing machine; "
    "130 interrupted (saved)."
)


def build_parser(chosen=None):
    """The parser; only the chosen command's own arguments are loaded.

    Parameters
    ----------
    chosen : str, optional
        None loads them all.
    """
    parser = argparse.ArgumentParser(
        prog="evolve", epilog=EPILOG,
        description="Histories of interacting binary stars. `evolve COMMAND --help` tells more.",
    )  # fmt: skip
    parser.add_argument("--version", action="version", version=f"evolve {_version()}")
    commands = parser.add_subparsers(dest="command", metavar="COMMAND", required=True)
    for name, answers in COMMANDS.items():
        sub = commands.add_parser(name, help=answers, description=answers[0].upper() + answers[1:] + ".")
        if chosen in (None, name):
            module = import_module(f"evolve.commands.{name}")
            module.arguments(sub)
            sub.add_argument("--json", action="store_true", help="print one JSON object")
            sub.add_argument("--quiet", action="store_true", help="no progress on stderr")
    return parser


def _version():
    from evolve import __version__

    return __version__


def main(argv=None):
    """Run one command line.

    Parameters
    ----------
    argv : list of str, optional
        sys.argv[1:] by default.

    Returns
    -------
    int
        The exit status.
    """
    argv = sys.argv[1:] if argv is None else argv
    chosen = next((word for word in argv if not word.startswith("-")), "")
    arguments = build_parser(chosen).parse_args(argv)
    try:
        return _answer(arguments)
    except KeyboardInterrupt:
        print("evolve: interrupted", file=sys.stderr)
        return 130
    except BrokenPipeError:  # the reader of stdout has gone, `| head` for instance
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        return 0


def _answer(arguments):
    from evolve.errors import EvolveError

    try:
        command = import_module(f"evolve.commands.{arguments.command}")
        answer = command.run(arguments)
    except EvolveError as error:
        for line in str(error).splitlines():
            print(f"evolve {arguments.command}: {line}", file=sys.stderr)
        return error.status
    except OSError as error:
        where = f"{error.filename}: " if error.filename else ""
        print(f"evolve {arguments.command}: {where}{error.strerror or error}", file=sys.stderr)
        return 3
    from evolve.commands.output import show

    show(answer, arguments)
    sys.stdout.flush()
    return answer.status
