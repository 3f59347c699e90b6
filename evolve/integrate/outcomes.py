"""Every way a history can end, with a sentence for people."""

SENTENCES = {
    "time": "The time asked for is over.",
    "event": "The event asked for happened.",
    "mass_below": "The mass fell to the limit asked for.",
    "period_below": "The period fell to the limit asked for.",
    "period_above": "The period rose to the limit asked for.",
    "rate_below": "The overflow fell to the rate asked for.",
    "both_lobes_filled": "Both components fill their lobes.",
    "unstable_overflow": "The overflow became dynamically unstable.",
    "merger": "The pair merged.",
    "unbound": "The pair is no longer bound.",
    "table_end": "A star reached the end of its track.",
    "validity": "A star reached the end of what its model describes.",
    "step_limit": "The limit of evaluations was reached (raise numerics.max_evaluations).",
    "non_finite": "The state stopped being finite.",
    "domain": "The state left the domain of the equations.",
    "failed": "The integration failed.",
    "interrupted": "Interrupted; what was computed is kept.",
}

GOOD = (
    "time", "event", "mass_below", "period_below", "period_above", "rate_below",
    "both_lobes_filled", "unstable_overflow", "merger", "unbound", "table_end", "validity",
)  # fmt: skip
"""Ends that are answers; the others are faults, and their histories are not complete."""


def sentence(outcome, detail=""):
    """What an end means, for people, with the detail that is known."""
    words = SENTENCES[outcome]
    return f"{words[:-1]}: {detail.rstrip('.')}." if detail else words


def exit_status(outcome):
    """The exit status a command ends with after a history with this outcome."""
    if outcome in GOOD:
        return 0
    return 130 if outcome == "interrupted" else 1
