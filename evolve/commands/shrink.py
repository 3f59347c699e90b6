"""evolve shrink: how long gravitational waves take to merge two masses."""

from evolve.commands.output import Answer, aligned, quantity, scalar, table

SHOWN = {
    "merger_time": ("time to merge", "yr"),
    "period": ("period", "yr"),
    "separation": ("separation", "solRad"),
    "eccentricity": ("eccentricity", ""),
    "period_derivative": ("dP/dt", "s / s"),
    "separation_derivative": ("da/dt", "solRad / yr"),
    "eccentricity_derivative": ("de/dt", "1 / yr"),
    "wave_frequency": ("wave frequency, 2/P", "Hz"),
    "wave_frequency_derivative": ("its derivative", "Hz / s"),
    "chirp_mass": ("chirp mass", "solMass"),
}


def arguments(parser):
    """The command's own arguments."""
    errors = 'with errors if you like: "1.40+-0.05 Msun"'
    parser.add_argument("--mass-a", required=True, metavar="MASS", help=errors)
    parser.add_argument("--mass-b", required=True, metavar="MASS")
    parser.add_argument("--period", metavar="TIME", help="or --separation")
    parser.add_argument("--separation", metavar="LENGTH")
    parser.add_argument("--eccentricity", default="0", metavar="E")
    parser.add_argument("--draws", type=int, default=1000, metavar="N", help="for errors (1000)")
    parser.add_argument("--seed", type=int, default=1, metavar="N", help="of the draws (1)")


def run(arguments):
    """Compute and tell."""
    from evolve.errors import ConfigError
    from evolve.studies.shrink import shrink, shrink_uncertain

    if (arguments.period is None) == (arguments.separation is None):
        raise ConfigError("give one of --period and --separation")
    kind = "period" if arguments.period is not None else "separation"
    inputs = {
        "mass-a": _parsed("mass-a", arguments.mass_a, "mass"),
        "mass-b": _parsed("mass-b", arguments.mass_b, "mass"),
        kind: _parsed(kind, getattr(arguments, kind), "time" if kind == "period" else "length"),
        "eccentricity": _parsed("eccentricity", arguments.eccentricity, "number"),
    }
    central = [value for value, _, _ in inputs.values()]
    answer = shrink(central[0], central[1], **{kind: central[2]}, eccentricity=central[3])
    spreads = {}
    if any(plus or minus for _, plus, minus in inputs.values()):
        if arguments.draws < 2:
            raise ConfigError(f"--draws {arguments.draws}: allowed is 2 or more")
        measured = list(inputs.values())
        spreads = shrink_uncertain(
            measured[:2], (kind, measured[2]), measured[3], arguments.draws, arguments.seed
        )
    return _told(answer, spreads, arguments)


def _parsed(option, text, dimension):
    from evolve.config.units import parse_uncertain
    from evolve.errors import ConfigError

    try:
        return parse_uncertain(text, dimension)
    except ConfigError as error:
        raise ConfigError(f"--{option} {text}: {error}") from None


def _converted(name, value):
    from evolve.constants import SECONDS_PER_YEAR

    factor = {"wave_frequency": 1.0, "wave_frequency_derivative": 2.0}.get(name, 0.0)
    return value / SECONDS_PER_YEAR**factor


def _cell(name, value):
    words, unit = SHOWN[name]
    value = _converted(name, value)
    if unit == "solRad / yr":
        from evolve.constants import R_SUN_SI

        return f"{value * R_SUN_SI:.5g} m/yr"
    if unit in ("s / s", "1 / yr", "Hz / s", ""):
        return f"{value:.6g} {unit}".rstrip() if value == value else "-"
    return quantity(value, unit, 6)


def _told(answer, spreads, arguments):
    rows, result, warnings = [], {}, []
    for name, (words, unit) in SHOWN.items():
        value = getattr(answer, name)
        spread = spreads.get(name)
        row = [words, _cell(name, value)]
        if spread:
            row += [_cell(name, spread.median), f"{_cell(name, spread.low_68)} .. {_cell(name, spread.high_68)}",
                    f"{_cell(name, spread.low_95)} .. {_cell(name, spread.high_95)}"]  # fmt: skip
        rows.append(row)
        plus = _converted(name, spread.high_68 - value) if spread else None
        minus = _converted(name, value - spread.low_68) if spread else None
        result[name] = scalar(_converted(name, value), unit, plus, minus)
        if spread and spread.missing and name == "merger_time":
            warnings.append(f"{spread.missing} of {spread.count} draws make no orbit and are left out")
    head = ["", "value"] + ["median", "68 %", "95 %"] * bool(spreads)
    lines = aligned(head, rows) + [""]
    table_ = answer.table
    lines += aligned(
        ["time left", "period", "separation", "eccentricity"],
        [
            [quantity(t, "yr"), quantity(p, "yr"), quantity(a, "solRad"), f"{e:.4g}"]
            for t, p, a, e in zip(*(table_[n] for n in table_), strict=True)
        ],
    )
    units = {"remaining_time": "yr", "period": "yr", "separation": "solRad", "eccentricity": ""}
    result["remaining"] = table(table_, units)
    if spreads:
        result["draws"] = {"count": arguments.draws, "seed": arguments.seed}
        result["distributions"] = {
            name: {k: _converted(name, v) if k not in ("count", "missing") else v
                   for k, v in spread._asdict().items()}
            for name, spread in spreads.items()
        }  # fmt: skip
    return Answer(lines, result, tuple(warnings))
