"""evolve sources: the publications that a history rests on."""

from evolve.commands.output import Answer


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("file", metavar="FILE.h5")
    parser.add_argument("--bibtex", action="store_true", help="as BibTeX entries")


def run(arguments):
    """Look the sources up and print them."""
    from evolve.archive import open_history
    from evolve.laws.bibliography import bibtex, text

    history = open_history(arguments.file)
    form = bibtex if arguments.bibtex else text
    lines = [form(key) for key in history.sources]
    return Answer(lines, {"sources": {key: form(key) for key in history.sources}})
