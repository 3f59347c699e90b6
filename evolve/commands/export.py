"""evolve export: a table from an archive."""

from evolve.commands.output import Answer


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("file", metavar="FILE.h5")
    parser.add_argument("--columns", metavar="A,B,...", help="names, by commas; all by default")
    parser.add_argument(
        "--unit", action="append", default=[], metavar="COLUMN=UNIT", help="such as period=d"
    )
    parser.add_argument("--every", metavar="TIME", help='a row every "1 Myr"')
    parser.add_argument("--rows", type=int, metavar="N", help="N rows evenly spaced on a column")
    parser.add_argument("--on", default="time", metavar="COLUMN", help="that column (time)")
    parser.add_argument("--format", choices=("csv", "ecsv"), default="csv")
    parser.add_argument("-o", "--output", metavar="FILE", help="stdout by default")
    parser.add_argument("--replace", action="store_true", help="overwrite an existing file")


def run(arguments):
    """Sample, convert, print or write."""
    from evolve.archive import check_output, open_history
    from evolve.archive.export import table_text
    from evolve.archive.paths import whole_file
    from evolve.config.units import parse_quantity
    from evolve.errors import ConfigError

    if arguments.output:
        check_output(arguments.output, arguments.replace)
    history = open_history(arguments.file)
    units = {}
    for text in arguments.unit:
        column, equals, unit = text.partition("=")
        if not equals:
            raise ConfigError(f"--unit {text}: write COLUMN=UNIT, such as period=d")
        units[column.strip()] = unit.strip()
    columns = [name.strip() for name in arguments.columns.split(",")] if arguments.columns else None
    every = parse_quantity(arguments.every, "time") if arguments.every else None
    text = table_text(
        history, columns, units, every, arguments.rows, arguments.on, arguments.format
    )
    result = {"format": arguments.format, "rows": text.count("\n"), "text": text}
    if not arguments.output:
        return Answer([text.rstrip("\n")], result)
    with whole_file(arguments.output) as part:
        part.write_text(text, encoding="utf-8")
    del result["text"]
    return Answer([f"written to {arguments.output}"], {**result, "file": arguments.output})
