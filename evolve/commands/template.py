"""evolve template: a commented config to start from."""

from evolve.commands.output import Answer


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("kind", nargs="?", metavar="KIND", help="`list` tells which there are")


def run(arguments):
    """Print the template."""
    from evolve.config.templates import kinds, template

    if arguments.kind == "list":
        return Answer(list(kinds()), {"kinds": list(kinds())})
    text = template(arguments.kind) if arguments.kind else template()
    return Answer([text.rstrip("\n")], {"kind": arguments.kind, "text": text})
