"""evolve contact: when a pair reaches contact, which component, what drove it."""

from evolve.commands.output import Answer, aligned, of_column, quantity, scalar
from evolve.commands.run import add_settings
from evolve.history.ledger import LAW_WORDS


def arguments(parser):
    """The command's own arguments."""
    parser.add_argument("config", nargs="+", metavar="CONFIG")
    add_settings(parser)
    parser.add_argument(
        "--draws", type=int, metavar="N", help="for errors; [draw] count of the config, or 200"
    )
    parser.add_argument("--seed", type=int, metavar="N", help="of the draws; [draw] seed, or 1")


def run(arguments):
    """Search the span of every config."""
    lines, result, warnings, missed = [], {}, [], False
    for path in arguments.config:
        found_lines, found, notes, reached = _one(path, arguments)
        lines += found_lines + [""]
        result[path] = found
        warnings += notes
        missed = missed or not reached
    if len(arguments.config) == 1:
        result = next(iter(result.values()))
    return Answer(lines[:-1], result, tuple(warnings), 1 if missed else 0)


def _one(path, arguments):
    from evolve.commands.progress import counting_bar, history_bar
    from evolve.commands.run import config_of
    from evolve.studies.contact import contact, contact_distribution
    from evolve.studies.uncertain import drawn_configs, split_settings

    settings, uncertain = split_settings(arguments.set)
    config = config_of(path, settings, arguments.allow_code)
    with history_bar(arguments.quiet) as progress:
        answer = contact(config, progress)
    title = config.values["title"] or path
    lines, result = (_reached if answer.reached else _missed)(title, answer, config)
    asked = config.values["draw"]
    keys = {**asked.keys, **uncertain}
    if keys:
        draws = asked.count if arguments.draws is None else arguments.draws
        seed = asked.seed if arguments.seed is None else arguments.seed
        with counting_bar(draws, "pair", arguments.quiet) as count:
            spreads = contact_distribution(drawn_configs(config, keys, draws, seed), count)
        more, result["distribution"] = _spread_lines(spreads, draws, seed)
        lines += more
    return lines, result, list(config.warnings), answer.reached


def _words(entry):
    law, _, component = entry.rpartition("_")
    if entry in ("growth", "mass_changes"):
        return {"growth": "growth of the star", "mass_changes": "changes of mass"}[entry]
    return f"{LAW_WORDS.get(law, law)} of {component}" if law else LAW_WORDS.get(entry, entry)


def _reached(title, answer, config):
    lines = [
        f"{title}: component {answer.component} reaches contact after "
        f"{quantity(answer.time, 'yr', 6)} (+- {quantity(answer.time_error, 'yr', 2)} by tolerance)",
        "",
    ]
    if answer.shares:
        lines += aligned(["what brought it there", "share"], [
            [_words(entry), f"{100 * share:.3g} %"] for entry, share in answer.shares.items()
        ])  # fmt: skip
    else:
        lines.append("It is in contact from the start.")
    lines += ["", *_state_lines("at contact", answer.state)]
    return lines, _result(answer)


def _missed(title, answer, config):
    span = quantity(config.values["end"]["time"], "yr")
    lines = [
        f"{title}: no contact within {span} ({answer.outcome.replace('_', ' ')}). Nearest: component "
        f"{answer.component} filled {100 * answer.nearest_fill:.4g} % of its lobe's radius after "
        f"{quantity(answer.nearest_time, 'yr')}."
    ]
    needed = answer.needed_period
    if needed == needed:
        lines.append(
            f"Needed, all else alike: a starting period of {quantity(needed, 'yr')} or less."
        )
    else:
        lines.append("No starting period leads to contact with what acts on this pair.")
    return lines + ["", *_state_lines("at the nearest approach", answer.state)], _result(answer)


def _state_lines(when, state):
    return aligned([when, ""], [[name, of_column(name, value)] for name, value in state.items()])


def _result(answer):
    from evolve.history.columns import COLUMNS

    return {
        "reached": answer.reached,
        "component": answer.component,
        "time": scalar(answer.time, "yr", answer.time_error, answer.time_error),
        "shares": answer.shares,
        "state": {name: scalar(v, COLUMNS[name].unit) for name, v in answer.state.items()},
        "nearest": {"fill": scalar(answer.nearest_fill), "time": scalar(answer.nearest_time, "yr")},
        "needed_period": scalar(answer.needed_period, "yr"),
        "outcome": answer.outcome,
    }


def _spread_lines(spreads, draws, seed):
    units = {"time": "yr", "period": "h", "mass_A": "solMass", "mass_B": "solMass"}
    rows = [
        [f"{name} at contact" if name != "time" else "time to contact",
         *(quantity(getattr(s, part), units[name]) for part in
           ("median", "low_68", "high_68", "low_95", "high_95"))]
        for name, s in spreads.items()
    ]  # fmt: skip
    head = [f"{draws} draws, seed {seed}", "median", "68 % from", "to", "95 % from", "to"]
    missing = spreads["time"].missing
    lines = ["", *aligned(head, rows)]
    if missing:
        lines.append(f"{missing} of {draws} draws reach no contact and are left out")
    result = {
        name: {**{k: v for k, v in s._asdict().items()}, "unit": units[name]}
        for name, s in spreads.items()
    }
    return lines, {**result, "draws": draws, "seed": seed}
