"""evolve report: one self-contained page of histories."""

from pathlib import Path

from evolve.commands.output import Answer

SUFFIXES = (".html", ".htm")


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("files", nargs="+", metavar="FILE.h5", help="one after the other on the page")
    parser.add_argument("-o", "--output", metavar="FILE.html", help="default: the archive's name, here")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing file")


def run(arguments):
    """Read, tell, write."""
    import os

    from evolve.archive import check_output, open_history
    from evolve.errors import ConfigError
    from evolve.page import report

    output = Path(arguments.output or f"{Path(arguments.files[0]).stem}.html")
    if output.suffix not in SUFFIXES:
        raise ConfigError(f"{output}: allowed are files in {', '.join(SUFFIXES)}")
    check_output(output, arguments.replace)
    histories = [open_history(path) for path in arguments.files]
    names = None if len(histories) == 1 else [Path(path).stem for path in arguments.files]
    page = report(histories, names)
    part = output.with_name(output.name + ".part")
    part.write_text(page, encoding="utf-8")
    os.replace(part, output)
    return Answer([f"written to {output}"], {"file": str(output)})
